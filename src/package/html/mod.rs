//! Markdown → one self-contained page.
//!
//! Here stands the frame of the page: head, contents, what is at the edge of every printed sheet.

mod body;
mod comparison;
mod ids;
mod notes;
mod symbols;
mod table;

use std::fmt::Write;

pub(super) use comparison::comparison;

use crate::figures::Figure;
use crate::record::Record;

const STYLE: &str = include_str!("../../../styles/page.css");

/// The whole page, and the ids that links lead to although nothing in the page has them.
pub(super) fn page(record: &Record, markdown: &str, drawings: &[Figure]) -> (String, Vec<String>) {
    let body = body::Body::new(markdown, drawings);
    let project = &record.project;
    let mark = project.revisions.last().map_or("", |revision| revision.mark.as_str());
    let title = format!("{} – {}", project.number, project.title);
    let mut out = opening(&title, &sheet(record, mark));
    out.reserve(body.html.len());
    let _ = writeln!(
        out,
        "<header class=\"head\"><span>{}</span> <span>{}</span> <span>Revision {}</span></header>",
        escaped(&project.number),
        escaped(&project.title),
        escaped(mark),
    );
    // The cover comes first, then the contents.
    let (cover, rest) = body.html.split_at(body.contents_at());
    let _ = write!(out, "<div class=\"cover\">\n{cover}</div>\n");
    out += "<nav class=\"contents\" aria-label=\"Contents\">\n<h2>Contents</h2>\n<ol>\n";
    for entry in body.contents.iter().skip(1) {
        let _ = writeln!(
            out,
            "<li class=\"level-{}\"><a href=\"#{}\">{}</a></li>",
            entry.level as usize, entry.id, entry.title
        );
    }
    out += "</ol>\n</nav>\n<main>\n";
    out += rest;
    out += "</main>\n</body>\n</html>\n";
    (out, body.missing())
}

/// The page up to its body: nothing is loaded from elsewhere, no script runs.
fn opening(title: &str, sheet: &str) -> String {
    format!(
        "<!DOCTYPE html>\n<html lang=\"en\">\n<head>\n<meta charset=\"utf-8\">\n\
         <meta http-equiv=\"Content-Security-Policy\" content=\"default-src 'none'; style-src 'unsafe-inline'; img-src data:\">\n\
         <meta name=\"viewport\" content=\"width=device-width, initial-scale=1\">\n\
         <title>{}</title>\n<style>\n{STYLE}\n{sheet}</style>\n</head>\n<body>\n",
        escaped(title),
    )
}

/// Sheet size and what stands at the edge of every printed sheet.
fn sheet(record: &Record, mark: &str) -> String {
    let project = &record.project;
    let date = project.revisions.last().map_or("", |revision| revision.date.as_str());
    let text = |text: &str| -> String {
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
    };
    format!(
        "@page {{ size: {}; \
         @top-left {{ content: {}; }} \
         @top-right {{ content: {}; }} \
         @bottom-left {{ content: {}; }} \
         @bottom-right {{ content: \"sheet \" counter(page) \" of \" counter(pages); }} }}\n",
        record.model.package.paper,
        text(&project.number),
        text(&project.title),
        text(&format!("Revision {mark}, {date}")),
    )
}

/// Text for an element or an attribute.
pub(super) fn escaped(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    for c in text.chars() {
        match c {
            '&' => out += "&amp;",
            '<' => out += "&lt;",
            '>' => out += "&gt;",
            '"' => out += "&quot;",
            c => out.push(c),
        }
    }
    out
}
