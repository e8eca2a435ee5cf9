//! Printed sheets: their size, what stands at their edges, and the numbers that point at them.
//!
//! Browsers know no running titles, so that every chapter has a page of its own name; nor do they know on which
//! sheet a link's target falls: the marks for that stay empty on screen, and whoever prints may fill them.

use std::fmt::Write;

use pulldown_cmark::HeadingLevel;

use super::body::Entry;
use crate::record::Record;

/// The name of the printed pages of a chapter, the cover being 0.
pub(super) fn page_name(chapter: usize) -> String {
    format!("chapter-{chapter}")
}

/// The name of the pages of a chapter that are turned sideways, for wide tables.
pub(super) fn sideways_name(chapter: usize) -> String {
    page_name(chapter) + "-sideways"
}

/// The mark to be filled with the number of the sheet that holds the element of this id, already escaped.
pub(super) fn number_of(id: &str) -> String {
    format!("<span class=\"sheet\" data-of=\"{id}\"></span>")
}

/// The rules for sheets: number, revision and title at the top with the chapter, date and sheet at the foot.
pub(super) fn rules(record: &Record, contents: &[Entry]) -> String {
    let project = &record.project;
    let (mark, date) = project
        .revisions
        .last()
        .map_or(("", ""), |revision| (revision.mark.as_str(), revision.date.as_str()));
    let paper = &record.model.package.paper;
    let mut out = format!(
        "@page {{ size: {paper};\n\
         @top-left {{ content: {}; }}\n\
         @top-center {{ content: {}; }}\n\
         @bottom-left {{ content: {}; }}\n\
         @bottom-right {{ content: \"sheet \" counter(page) \" of \" counter(pages); }} }}\n",
        text(&format!("{}  revision {mark}", project.number)),
        text(&project.title),
        text(&format!("Revision {mark} of {date}")),
    );
    let chapters = contents.iter().filter(|entry| entry.level == HeadingLevel::H1);
    for (number, chapter) in chapters.enumerate() {
        let name = page_name(number);
        if number == 0 {
            for place in ["left", "center", "right"] {
                let _ = writeln!(out, "@page {name} {{ @top-{place} {{ content: none; }} }}");
            }
            continue;
        }
        let title = text(&chapter.plain);
        let _ = writeln!(out, "@page {name} {{ @top-right {{ content: {title}; }} }}");
        let _ = writeln!(
            out,
            "@page {} {{ size: {paper} landscape; @top-right {{ content: {title}; }} }}",
            sideways_name(number),
        );
    }
    out
}

/// Text as a string of CSS.
fn text(text: &str) -> String {
    let mut out = String::from("\"");
    for c in text.chars() {
        match c {
            // A code point in hexadecimal, ended by a space: no character can leave the string.
            '"' | '\\' | '<' | '>' | '&' => {
                let _ = write!(out, "\\{:x} ", u32::from(c));
            }
            c if c.is_control() => out.push(' '),
            c => out.push(c),
        }
    }
    out.push('"');
    out
}
