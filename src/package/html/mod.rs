//! Markdown → one self-contained page.
//!
//! Here stands the frame of the page: cover, contents, chapters.

mod body;
mod comparison;
mod head;
mod ids;
mod notes;
mod readings;
mod sheets;
mod symbols;
mod table;

use std::fmt::Write;

pub(super) use comparison::comparison;

use crate::figures::Figure;
use crate::record::Record;

/// The whole page, and the ids that links lead to although nothing in the page has them.
pub(super) fn page(record: &Record, markdown: &str, drawings: &[Figure]) -> (String, Vec<String>) {
    let body = body::Body::new(markdown, drawings);
    let project = &record.project;
    let number = escaped(&project.number);
    let mark = project.revisions.last().map_or("", |revision| revision.mark.as_str());
    let title = format!("{} – {}", project.number, project.title);
    let readings = readings::readings(record, drawings);
    let mut out = head::opening(&title, &sheets::rules(record, &body.contents), &readings);
    out.reserve(body.html.len());
    let mark = escaped(mark);
    // The cover comes first, then the contents.
    let (cover, chapters) = body.html.split_at(body.contents_at());
    let contents = &body.contents[body.contents.len().min(1)..];
    if let Some(first) = contents.first() {
        let _ = writeln!(out, "<a class=\"skip\" href=\"#{}\">Skip to the text</a>", first.id);
    }
    let _ = writeln!(
        out,
        "<header class=\"head\" data-issue=\"{number} rev {mark}\"><span>{number}</span> <span>{}</span> <span>Revision {mark}</span></header>",
        escaped(&project.title),
    );
    let _ = write!(out, "<main>\n{cover}");
    out += "<nav class=\"contents\" aria-labelledby=\"page.contents\">\n<h2 id=\"page.contents\">Contents</h2>\n<ol>\n";
    for body::Entry { level, id, title, .. } in contents {
        let _ = writeln!(
            out,
            "<li class=\"level-{}\"><a href=\"#{id}\">{title}</a>{}</li>",
            *level as usize,
            sheets::number_of(id),
        );
    }
    let _ = write!(out, "</ol>\n</nav>\n{chapters}</main>\n</body>\n</html>\n");
    (out, body.missing())
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
