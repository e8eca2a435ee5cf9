//! Events of the Markdown → HTML between the cover and the end.
//!
//! Invariants
//! - Everything is put at the end of `html`; what must be looked at whole (a heading, a paragraph, a caption) is
//!   split off again from where it began.
//! - Figures and formulas of their own are blocks: a paragraph ends before one and goes on behind it.
//! - Headings hold no links, because the contents lead to them and a link in a link is no HTML.

use std::fmt::Write;

use math_core::MathDisplay;
use pulldown_cmark::{CodeBlockKind, Event, HeadingLevel, LinkType, Options, Parser, Tag, TagEnd};

use super::escaped;
use super::ids::{self, Ids};
use super::notes::Notes;
use super::sheets;
use super::symbols::symbols;
use super::table::Table;
use crate::figures::Figure;
use crate::package::MARK;
use crate::package::anchor::anchor;
use crate::package::math::Mathematics;
use crate::package::number::TABLE;

/// A line of the table of contents.
pub(super) struct Entry {
    pub(super) level: HeadingLevel,
    /// Where its chapter or its heading begins in the body.
    at: usize,
    pub(super) id: String,
    /// HTML.
    pub(super) title: String,
    /// The title without markup.
    pub(super) plain: String,
}

/// The body so far and what is open in it.
pub(super) struct Body<'d> {
    drawings: &'d [Figure],
    mathematics: Mathematics,
    notes: Notes,
    ids: Ids,
    pub(super) html: String,
    pub(super) contents: Vec<Entry>,
    /// Chapters begun so far, each a section with a printed page of its own name.
    chapters: usize,
    /// Ids inside the page that links lead to.
    links: Vec<String>,
    /// Where the present paragraph begins, its tag left out.
    paragraph: Option<usize>,
    /// How many elements are open that hold no block.
    inline: usize,
    /// Where the present heading begins.
    heading: Option<usize>,
    /// Text of the present heading, without any markup.
    plain: String,
    /// References to footnotes in the present heading, put behind it: the contents do not repeat them.
    behind: String,
    /// Where the present strong text begins.
    strong: usize,
    /// What ends the present link.
    link_end: String,
    /// Images whose descriptions are being read: target, and where the description begins.
    images: Vec<(String, usize)>,
    /// How often each drawing has been placed.
    placed: Vec<String>,
    /// A table's caption that has been read; its table comes next.
    caption: Option<String>,
    table: Option<Table>,
    in_code: bool,
}

impl<'d> Body<'d> {
    pub(super) fn new(markdown: &str, drawings: &'d [Figure]) -> Self {
        let options = Options::ENABLE_TABLES | Options::ENABLE_MATH | Options::ENABLE_FOOTNOTES;
        let events: Vec<Event<'_>> = Parser::new_ext(markdown, options).collect();
        let notes = Notes::new(&events);
        let mut body = Self {
            drawings,
            mathematics: Mathematics::new(),
            ids: Ids::new(drawings, notes.count),
            notes,
            html: String::with_capacity(2 * markdown.len()),
            contents: Vec::new(),
            chapters: 0,
            links: Vec::new(),
            paragraph: None,
            inline: 0,
            heading: None,
            plain: String::new(),
            behind: String::new(),
            strong: 0,
            link_end: String::new(),
            images: Vec::new(),
            placed: Vec::new(),
            caption: None,
            table: None,
            in_code: false,
        };
        let mut events = events.into_iter().peekable();
        while let Some(event) = events.next() {
            let before_table = matches!(events.peek(), Some(Event::Start(Tag::Table(_))));
            body.take(event, before_table);
        }
        if body.chapters > 0 {
            body.html += "</section>\n";
        }
        body
    }

    /// Where the first chapter behind the cover begins.
    pub(super) fn contents_at(&self) -> usize {
        let chapters = self.contents.iter().filter(|entry| entry.level == HeadingLevel::H1);
        chapters.map(|entry| entry.at).nth(1).unwrap_or(self.html.len())
    }

    /// Ids that links lead to although nothing has them, each once.
    pub(super) fn missing(&self) -> Vec<String> {
        let mut missing: Vec<String> = Vec::new();
        for link in &self.links {
            if !self.ids.has(link) && !missing.contains(link) {
                missing.push(link.clone());
            }
        }
        missing
    }

    fn take(&mut self, event: Event<'_>, before_table: bool) {
        match event {
            Event::Start(tag) => self.start(tag),
            Event::End(TagEnd::Paragraph) => self.end_paragraph(before_table),
            Event::End(tag) => self.end(tag),
            Event::Text(text) => {
                self.plain.push_str(&text);
                if self.in_code {
                    self.html += &escaped(&text);
                } else {
                    self.text(&text);
                }
            }
            Event::Code(code) => {
                self.plain.push_str(&code);
                let _ = write!(self.html, "<code>{}</code>", escaped(&code));
            }
            Event::InlineMath(latex) => {
                self.plain.push_str(&latex);
                self.html += &self.mathematics.convert(&latex, MathDisplay::Inline);
            }
            Event::DisplayMath(latex) => self.formula(&latex),
            Event::SoftBreak => self.html.push('\n'),
            Event::HardBreak => self.html += "<br>\n",
            Event::Rule => self.html += "<hr>\n",
            Event::FootnoteReference(_) => self.reference(),
            // No HTML but ours; tasks are not switched on.
            Event::Html(_) | Event::InlineHtml(_) | Event::TaskListMarker(_) => {}
        }
    }

    /// Running text; the mark of a changed row goes into the margin.
    fn text(&mut self, text: &str) {
        let row_head = self.table.as_ref().is_some_and(Table::heads_row);
        match text.split_once('\u{a0}').filter(|(mark, _)| row_head && mark.starts_with(MARK)) {
            Some((mark, rest)) => {
                let _ = write!(self.html, "<span class=\"changed\">{} </span>", escaped(mark));
                self.html += &symbols(rest);
            }
            None => self.html += &symbols(text),
        }
    }

    fn start(&mut self, tag: Tag<'_>) {
        if is_inline(&tag.to_end()) {
            self.inline += 1;
        }
        match tag {
            Tag::Paragraph => self.paragraph = Some(self.html.len()),
            Tag::Heading { .. } => {
                self.plain.clear();
                self.heading = Some(self.html.len());
            }
            Tag::CodeBlock(kind) => {
                self.in_code = true;
                let is_file = matches!(&kind, CodeBlockKind::Fenced(language)
                    if matches!(&**language, "yaml" | "markdown"));
                self.html += if is_file { "<pre class=\"file\"><code>" } else { "<pre><code>" };
            }
            Tag::List(None) => self.html += "<ul>\n",
            Tag::List(Some(1)) => self.html += "<ol>\n",
            Tag::List(Some(first)) => {
                let _ = writeln!(self.html, "<ol start=\"{first}\">");
            }
            Tag::Item => self.html += "<li>",
            Tag::BlockQuote(_) => self.html += "<blockquote>\n",
            Tag::Emphasis => self.html += "<em>",
            Tag::Strong => {
                self.strong = self.html.len();
                self.html += "<strong>";
            }
            Tag::FootnoteDefinition(_) => self.start_note(),
            Tag::Table(alignments) => {
                let table = Table::new(alignments, self.html.len());
                self.html += &table.opening(self.caption.take());
                self.table = Some(table);
            }
            Tag::TableRow => self.html += self.table.as_mut().map_or("", Table::row),
            Tag::TableCell => self.html += &self.table.as_ref().map_or(String::new(), Table::cell),
            Tag::Image { dest_url, .. } => {
                self.images.push((dest_url.to_string(), self.html.len()))
            }
            Tag::Link { link_type, dest_url, .. } => self.start_link(link_type, &dest_url),
            _ => {}
        }
    }

    fn end(&mut self, tag: TagEnd) {
        if is_inline(&tag) {
            self.inline -= 1;
        }
        match tag {
            TagEnd::Heading(level) => self.end_heading(level),
            TagEnd::CodeBlock => {
                self.in_code = false;
                self.html += "</code></pre>\n";
            }
            TagEnd::List(ordered) => self.html += if ordered { "</ol>\n" } else { "</ul>\n" },
            TagEnd::Item => self.html += "</li>\n",
            TagEnd::BlockQuote(_) => self.html += "</blockquote>\n",
            TagEnd::Emphasis => self.html += "</em>",
            TagEnd::Strong => self.end_strong(),
            TagEnd::FootnoteDefinition => self.html += "</aside>\n",
            TagEnd::Table => {
                if let Some(table) = self.table.take() {
                    let chapter = self.chapters.saturating_sub(1);
                    table.end(&mut self.html, &sheets::sideways_name(chapter));
                }
            }
            TagEnd::TableHead => self.html += self.table.as_mut().map_or("", Table::head_end),
            TagEnd::TableRow => self.html += "</tr>\n",
            TagEnd::TableCell => self.html += self.table.as_mut().map_or("", Table::cell_end),
            TagEnd::Image => self.end_image(),
            TagEnd::Link => self.html += &std::mem::take(&mut self.link_end),
            _ => {}
        }
    }

    /// The text of the present paragraph so far, which ends with it.
    fn paragraph_text(&mut self) -> Option<String> {
        let text = self.html.split_off(self.paragraph.take()?);
        // Not `trim`: a paragraph of one no-break space is there to be seen.
        Some(text.trim_matches([' ', '\n']).to_owned()).filter(|text| !text.is_empty())
    }

    fn end_paragraph(&mut self, before_table: bool) {
        let Some(text) = self.paragraph_text() else { return };
        let caption = format!("<strong>{}", TABLE.trim_start_matches('*'));
        if before_table && text.starts_with(&caption) {
            self.caption = Some(text);
        } else {
            let _ = writeln!(self.html, "<p>{text}</p>");
        }
    }

    /// Puts a block between the paragraph before it and the one that goes on behind it.
    fn block(&mut self, block: &str) {
        let within = self.paragraph.is_some();
        if let Some(text) = self.paragraph_text() {
            let _ = writeln!(self.html, "<p>{text}</p>");
        }
        self.html += block;
        self.paragraph = within.then_some(self.html.len());
    }

    /// A formula of its own; in a heading or between words in strong print it stays in its line.
    fn formula(&mut self, latex: &str) {
        self.plain.push_str(latex);
        if self.inline > 0 {
            self.html += &self.mathematics.convert(latex, MathDisplay::Inline);
        } else {
            let formula = self.mathematics.convert(latex, MathDisplay::Block);
            let class = if is_wide(latex) { "display wide" } else { "display" };
            self.block(&format!("<div class=\"{class}\">{formula}</div>\n"));
        }
    }

    fn end_heading(&mut self, level: HeadingLevel) {
        let Some(start) = self.heading.take() else { return };
        let title = self.html.split_off(start);
        let notes = std::mem::take(&mut self.behind);
        let id = self.ids.heading(anchor(&self.plain));
        let mut at = self.html.len();
        if level == HeadingLevel::H1 {
            at = self.chapter();
        }
        let _ = writeln!(self.html, "<{level} id=\"{id}\">{title}{notes}</{level}>");
        if level <= HeadingLevel::H2 {
            let plain = std::mem::take(&mut self.plain);
            self.contents.push(Entry { level, at, id, title, plain });
        }
    }

    /// Ends the chapter before and begins the next; says where that begins.
    fn chapter(&mut self) -> usize {
        if self.chapters > 0 {
            self.html += "</section>\n";
        }
        let at = self.html.len();
        let kind = if self.chapters == 0 { "cover" } else { "chapter" };
        let page = sheets::page_name(self.chapters);
        let _ = writeln!(self.html, "<section class=\"{kind}\" style=\"page: {page}\">");
        self.chapters += 1;
        at
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

    /// Only links inside the page lead anywhere; of others the address is shown.
    fn start_link(&mut self, link_type: LinkType, target: &str) {
        let inside = target.strip_prefix('#');
        self.links.extend(inside.filter(|id| !id.is_empty()).map(str::to_owned));
        if self.heading.is_some() {
            return;
        }
        match inside {
            Some(id) => {
                let id = escaped(id);
                let _ = write!(self.html, "<a href=\"#{id}\">");
                self.link_end = format!("</a>{}", sheets::number_of(&id));
            }
            None if matches!(link_type, LinkType::Autolink | LinkType::Email) => {}
            None => self.link_end = format!(" ({})", escaped(target)),
        }
    }

    fn reference(&mut self) {
        let Some(number) = self.notes.reference() else { return };
        // The note leads back to its first reference.
        let mark = ids::mark(number);
        let id = if self.ids.has(&mark) { String::new() } else { format!(" id=\"{mark}\"") };
        self.ids.give(mark);
        let note = ids::note(number);
        let out = if self.heading.is_some() { &mut self.behind } else { &mut self.html };
        let _ = write!(out, "<sup{id}><a href=\"#{note}\" role=\"doc-noteref\">{number}</a></sup>");
    }

    fn start_note(&mut self) {
        // What nothing refers to is shown where it stands, without a number.
        let Some(number) = self.notes.definition() else {
            self.html += "<aside class=\"note\">\n";
            return;
        };
        let (note, mark) = (ids::note(number), ids::mark(number));
        let _ = writeln!(
            self.html,
            "<aside class=\"note\" id=\"{note}\" role=\"doc-footnote\"><a href=\"#{mark}\" role=\"doc-backlink\">{number}</a>"
        );
        self.ids.give(note);
    }

    fn end_image(&mut self) {
        let Some((target, start)) = self.images.pop() else { return };
        let own = target
            .strip_prefix("figures/")
            .and_then(|file| file.strip_suffix(".svg"))
            .and_then(|id| self.drawings.iter().find(|figure| figure.id == id));
        // Of an image that is not of this package, or stands where no block may, the words stay.
        let Some(figure) = own.filter(|_| self.inline == 0) else { return };
        let description = self.html.split_off(start);
        // A drawing placed again, as narrative may, has no id of its own, and its parts have others; no
        // heading's id holds a point.
        let id = ids::figure(&figure.id);
        let times = self.placed.iter().filter(|other| **other == figure.id).count();
        let mut svg = without_style(figure.svg.trim());
        if times > 0 {
            for part in ["title", "desc"] {
                let own = format!("{}-{part}", figure.id);
                svg = svg.replace(&own, &format!("{own}.{times}"));
            }
        }
        let named = if times > 0 { String::new() } else { format!(" id=\"{}\"", escaped(&id)) };
        self.placed.push(figure.id.clone());
        self.ids.give(id);
        self.block(&format!(
            "<figure{named}>\n{svg}\n<figcaption>{description}</figcaption>\n</figure>\n"
        ));
    }
}

/// A drawing without its style, which the page has once for all drawings.
fn without_style(svg: &str) -> String {
    match (svg.find("<style>"), svg.find("</style>")) {
        (Some(start), Some(end)) => {
            let rest = svg[end + "</style>".len()..].trim_start();
            format!("{}{rest}", &svg[..start])
        }
        _ => svg.to_owned(),
    }
}

/// Signs in a line of mathematics that fit on a sheet in the usual size; stacked ones count twice.
const SIGNS: usize = 130;

/// Some line of a formula is wider than a sheet.
fn is_wide(latex: &str) -> bool {
    let signs = |line: &str| {
        let mut command = false;
        let counts = |c: char| {
            let was = command;
            command = c == '\\' || was && c.is_alphabetic();
            !command && !matches!(c, '{' | '}' | '^' | '_' | '&' | ' ' | '\n')
        };
        line.chars().map(counts).filter(|counts| *counts).count()
    };
    latex.split("\\\\").any(|line| signs(line) > SIGNS)
}

/// What holds text in a line and no block.
fn is_inline(tag: &TagEnd) -> bool {
    matches!(
        tag,
        TagEnd::Heading(_) | TagEnd::Emphasis | TagEnd::Strong | TagEnd::Link | TagEnd::Image
    )
}
