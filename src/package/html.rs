//! Markdown → one self-contained page.
//!
//! HTML in the Markdown is dropped; the events that are left can only make text, headings, lists, tables,
//! code, formulas, links inside the page, and figures of this package.

use std::fmt::Write;

use math_core::MathDisplay;
use pulldown_cmark::{Alignment, CodeBlockKind, Event, HeadingLevel, Options, Parser, Tag, TagEnd};

use super::anchor::anchor;
use super::math::Mathematics;
use super::number::TABLE;
use crate::figures::Figure;
use crate::record::Record;

const STYLE: &str = include_str!("../../styles/page.css");

/// Tables of at most so many rows stay on one sheet.
const TOGETHER: usize = 14;

/// The whole page, and the ids that links lead to although nothing in the page has them.
pub(super) fn page(record: &Record, markdown: &str, drawings: &[Figure]) -> (String, Vec<String>) {
    let body = Body::new(markdown, drawings);
    let project = &record.project;
    let mark = project.revisions.last().map_or("", |revision| revision.mark.as_str());
    let title = format!("{} – {}", project.number, project.title);
    let mut out = String::with_capacity(body.html.len() + STYLE.len() + 4096);
    let _ = write!(
        out,
        "<!DOCTYPE html>\n<html lang=\"en\">\n<head>\n<meta charset=\"utf-8\">\n\
         <meta http-equiv=\"Content-Security-Policy\" content=\"default-src 'none'; style-src 'unsafe-inline'; img-src data:\">\n\
         <meta name=\"viewport\" content=\"width=device-width, initial-scale=1\">\n\
         <title>{}</title>\n<style>\n{STYLE}\n{}</style>\n</head>\n<body>\n",
        escaped(&title),
        sheet(record, mark),
    );
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
            entry.level, entry.id, entry.title
        );
    }
    out += "</ol>\n</nav>\n<main>\n";
    out += rest;
    out += "</main>\n</body>\n</html>\n";
    let missing = body.links.iter().filter(|link| !body.ids.contains(link));
    (out, missing.cloned().collect())
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

/// A line of the table of contents.
struct Entry {
    level: u8,
    /// Where its heading begins in the body.
    at: usize,
    id: String,
    /// HTML.
    title: String,
}

struct Body<'d> {
    drawings: &'d [Figure],
    mathematics: Mathematics,
    html: String,
    contents: Vec<Entry>,
    heading: Option<(u8, usize)>,
    /// Text of the present heading, without any markup.
    plain: String,
    /// Where the present strong text begins.
    strong: usize,
    /// Labels of footnotes in order of first reference.
    notes: Vec<String>,
    /// Ids inside the page that links lead to.
    links: Vec<String>,
    /// Where the present paragraph begins in `html`.
    paragraph: usize,
    /// A table's caption that has been read and waits for its table.
    caption: Option<String>,
    alignments: Vec<Alignment>,
    column: usize,
    /// Where the present table begins, and how many rows it has.
    table: usize,
    rows: usize,
    in_head: bool,
    /// An image whose description is being read: where it goes, and its text.
    image: Option<(String, String)>,
    in_code: bool,
    ids: Vec<String>,
}

impl<'d> Body<'d> {
    fn new(markdown: &str, drawings: &'d [Figure]) -> Self {
        let mut body = Self {
            drawings,
            mathematics: Mathematics::new(),
            html: String::with_capacity(2 * markdown.len()),
            contents: Vec::new(),
            heading: None,
            plain: String::new(),
            strong: 0,
            notes: Vec::new(),
            links: Vec::new(),
            paragraph: 0,
            caption: None,
            alignments: Vec::new(),
            column: 0,
            table: 0,
            rows: 0,
            in_head: false,
            image: None,
            in_code: false,
            ids: Vec::new(),
        };
        let options = Options::ENABLE_TABLES | Options::ENABLE_MATH | Options::ENABLE_FOOTNOTES;
        for event in Parser::new_ext(markdown, options) {
            body.take(event);
        }
        body
    }

    /// Where the first chapter behind the cover begins.
    fn contents_at(&self) -> usize {
        let chapters = self.contents.iter().filter(|entry| entry.level == 1);
        chapters.map(|entry| entry.at).nth(1).unwrap_or(self.html.len())
    }

    fn take(&mut self, event: Event<'_>) {
        match event {
            Event::Start(tag) => self.start(tag),
            Event::End(tag) => self.end(tag),
            Event::Text(text) => self.text(&text),
            Event::Code(code) => {
                self.plain.push_str(&code);
                let _ = write!(self.html, "<code>{}</code>", escaped(&code));
            }
            Event::InlineMath(latex) => {
                self.html += &self.mathematics.convert(&latex, MathDisplay::Inline);
            }
            Event::DisplayMath(latex) => {
                self.html += &self.mathematics.convert(&latex, MathDisplay::Block);
            }
            Event::SoftBreak => self.html.push('\n'),
            Event::HardBreak => self.html += "<br>\n",
            Event::Rule => self.html += "<hr>\n",
            Event::FootnoteReference(label) => {
                let number = self.note(&label);
                let mark = format!("note-{number}-mark");
                // Only the first reference can be led back to.
                let id = if self.ids.contains(&mark) {
                    String::new()
                } else {
                    format!(" id=\"{mark}\"")
                };
                self.ids.push(mark);
                let _ = write!(self.html, "<sup{id}><a href=\"#note-{number}\">{number}</a></sup>");
            }
            // No HTML but ours; tasks are not switched on.
            Event::Html(_) | Event::InlineHtml(_) | Event::TaskListMarker(_) => {}
        }
    }

    /// The number of a footnote.
    fn note(&mut self, label: &str) -> usize {
        let known = self.notes.iter().position(|other| other == label);
        known.unwrap_or_else(|| {
            self.notes.push(label.to_owned());
            self.notes.len() - 1
        }) + 1
    }

    fn text(&mut self, text: &str) {
        self.plain.push_str(text);
        if let Some((_, description)) = &mut self.image {
            description.push_str(text);
        } else if self.in_code {
            self.html += &escaped(text);
        } else {
            self.html += &symbols(text);
        }
    }

    fn start(&mut self, tag: Tag<'_>) {
        match tag {
            Tag::Paragraph => {
                self.paragraph = self.html.len();
                self.html += "<p>";
            }
            Tag::Heading { level, .. } => {
                let level = match level {
                    HeadingLevel::H1 => 1,
                    HeadingLevel::H2 => 2,
                    _ => 3,
                };
                self.plain.clear();
                self.heading = Some((level, self.html.len()));
            }
            Tag::CodeBlock(kind) => {
                self.in_code = true;
                let language = match kind {
                    CodeBlockKind::Fenced(language) => language.to_string(),
                    CodeBlockKind::Indented => String::new(),
                };
                self.html += match language.as_str() {
                    "yaml" => "<pre class=\"file\"><code>",
                    _ => "<pre><code>",
                };
            }
            Tag::List(None) => self.html += "<ul>\n",
            Tag::List(Some(_)) => self.html += "<ol>\n",
            Tag::Item => self.html += "<li>",
            Tag::BlockQuote(_) => self.html += "<blockquote>\n",
            Tag::Emphasis => self.html += "<em>",
            Tag::Strong => {
                self.strong = self.html.len();
                self.html += "<strong>";
            }
            Tag::FootnoteDefinition(label) => {
                let number = self.note(&label);
                self.ids.push(format!("note-{number}"));
                let _ = writeln!(
                    self.html,
                    "<aside class=\"note\" id=\"note-{number}\"><a href=\"#note-{number}-mark\">{number}</a>"
                );
            }
            Tag::Table(alignments) => {
                self.alignments = alignments;
                self.table = self.html.len();
                self.rows = 0;
                self.html += "<div class=\"table\">\n<table>\n";
                if let Some(caption) = self.caption.take() {
                    let _ = writeln!(self.html, "<caption>{caption}</caption>");
                }
            }
            Tag::TableHead => {
                self.in_head = true;
                self.column = 0;
                self.html += "<thead>\n<tr>";
            }
            Tag::TableRow => {
                self.column = 0;
                self.rows += 1;
                self.html += "<tr>";
            }
            Tag::TableCell => {
                let class = match self.alignments.get(self.column) {
                    Some(Alignment::Right) => " class=\"right\"",
                    Some(Alignment::Center) => " class=\"centre\"",
                    _ => "",
                };
                let _ = match (self.in_head, self.column) {
                    (true, _) => write!(self.html, "<th scope=\"col\"{class}>"),
                    (false, 0) => write!(self.html, "<th scope=\"row\"{class}>"),
                    (false, _) => write!(self.html, "<td{class}>"),
                };
            }
            Tag::Image { dest_url, .. } => self.image = Some((dest_url.to_string(), String::new())),
            Tag::Link { dest_url, .. } => {
                // Only inside the page: nothing in a package leads elsewhere.
                let target = dest_url.strip_prefix('#').unwrap_or_default();
                self.links.extend(Some(target.to_owned()).filter(|target| !target.is_empty()));
                let _ = write!(self.html, "<a href=\"#{}\">", escaped(target));
            }
            _ => {}
        }
    }

    fn end(&mut self, tag: TagEnd) {
        match tag {
            TagEnd::Paragraph => self.end_paragraph(),
            TagEnd::Heading(_) => self.end_heading(),
            TagEnd::CodeBlock => {
                self.in_code = false;
                self.html += "</code></pre>\n";
            }
            TagEnd::List(false) => self.html += "</ul>\n",
            TagEnd::List(true) => self.html += "</ol>\n",
            TagEnd::Item => self.html += "</li>\n",
            TagEnd::BlockQuote(_) => self.html += "</blockquote>\n",
            TagEnd::Emphasis => self.html += "</em>",
            TagEnd::Strong => self.end_strong(),
            TagEnd::FootnoteDefinition => self.html += "</aside>\n",
            TagEnd::Table => {
                self.html += "</tbody>\n</table>\n</div>\n";
                if self.rows <= TOGETHER {
                    let opening = "<div class=\"table";
                    self.html.insert_str(self.table + opening.len(), " short");
                }
            }
            TagEnd::TableHead => {
                self.in_head = false;
                self.html += "</tr>\n</thead>\n<tbody>\n";
            }
            TagEnd::TableRow => self.html += "</tr>\n",
            TagEnd::TableCell => {
                self.html += if self.in_head || self.column == 0 { "</th>" } else { "</td>" };
                self.column += 1;
            }
            TagEnd::Image => self.end_image(),
            TagEnd::Link => self.html += "</a>",
            _ => {}
        }
    }

    fn end_paragraph(&mut self) {
        let content = self.html.split_off(self.paragraph);
        let content = content.trim_start_matches("<p>");
        if content.starts_with("<figure") {
            self.html += content;
        } else if content.starts_with("<strong>Table ") && TABLE.starts_with("**Table ") {
            self.caption = Some(content.to_owned());
        } else {
            let _ = writeln!(self.html, "<p>{content}</p>");
        }
    }

    fn end_heading(&mut self) {
        let Some((level, start)) = self.heading.take() else { return };
        let title = self.html.split_off(start);
        let id = self.id();
        let at = self.html.len();
        let _ = writeln!(self.html, "<h{level} id=\"{id}\">{title}</h{level}>");
        if level < 3 {
            self.contents.push(Entry { level, at, id, title });
        }
    }

    /// Outcomes get a mark of their own, so that nothing hangs on colour alone.
    fn end_strong(&mut self) {
        let class = match &self.html[self.strong + "<strong>".len()..] {
            "satisfied" => " class=\"outcome satisfied\"",
            "not satisfied" => " class=\"outcome unsatisfied\"",
            "deferred" => " class=\"outcome deferred\"",
            _ => "",
        };
        self.html.insert_str(self.strong + "<strong".len(), class);
        self.html += "</strong>";
    }

    /// The id of the present heading, unique in the page as the usual git hosts make it.
    fn id(&mut self) -> String {
        let base = anchor(&self.plain);
        let mut id = base.clone();
        let mut count = 1;
        while self.ids.contains(&id) {
            id = format!("{base}-{count}");
            count += 1;
        }
        self.ids.push(id.clone());
        id
    }

    fn end_image(&mut self) {
        let Some((target, description)) = self.image.take() else { return };
        let own = target
            .strip_prefix("figures/")
            .and_then(|file| file.strip_suffix(".svg"))
            .and_then(|id| self.drawings.iter().find(|figure| figure.id == id));
        // An image that is not of this package is left out, its words stay.
        let Some(figure) = own else {
            self.html += &symbols(&description);
            return;
        };
        // A drawing placed again, as narrative may, has no id of its own, and its parts have others.
        let id = format!("figure-{}", figure.id);
        let times = self.ids.iter().filter(|other| **other == id).count();
        let named = if times > 0 { String::new() } else { format!(" id=\"{}\"", escaped(&id)) };
        let mut svg = figure.svg.trim().to_owned();
        if times > 0 {
            for part in ["title", "desc"] {
                let own = format!("{}-{part}", figure.id);
                svg = svg.replace(&own, &format!("{own}-{times}"));
            }
        }
        self.ids.push(id);
        let _ = write!(
            self.html,
            "<figure{named}>\n{}\n<figcaption>{}</figcaption>\n</figure>\n",
            svg,
            symbols(&description)
        );
    }
}

/// Letters that begin a symbol with a subscript.
const SYMBOLS: [&str; 21] = [
    "h", "b", "N", "V", "M", "T", "I", "W", "A", "E", "G", "F", "f", "i", "d", "w", "t", "r", "y",
    "z", "theta",
];

/// Text with `M_y`, `theta_y`, `W_el_y` and the like set as symbols with subscripts.
fn symbols(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    let mut word = String::new();
    for c in text.chars().chain(std::iter::once('\0')) {
        if c.is_alphanumeric() || c == '_' {
            word.push(c);
            continue;
        }
        if !word.is_empty() {
            out += &symbol(&word);
            word.clear();
        }
        if c != '\0' {
            out += &escaped(c.encode_utf8(&mut [0; 4]));
        }
    }
    out
}

fn symbol(word: &str) -> String {
    match word.split_once('_') {
        Some((letter, index))
            if SYMBOLS.contains(&letter) && !index.is_empty() && index.chars().count() <= 8 =>
        {
            let letter = if letter == "theta" { "θ" } else { letter };
            let index = index.replace('_', ",");
            format!("<i>{letter}</i><sub>{}</sub>", escaped(&index))
        }
        _ => escaped(word),
    }
}
