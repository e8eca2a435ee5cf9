//! Links to things → links to places.

use super::anchor::{anchor, check_heading};
use super::markdown;
use crate::diagnostic::{Diagnostic, Place};
use crate::files::Sources;
use crate::project::narrative::Fences;
use crate::record::{Record, by_id};

/// What a link can lead to, besides headings by their own ids.
const KINDS: [&str; 5] = ["check", "chapter", "figure", "standard", "assumption"];

/// A link as written: where its text begins, its text, kind and name.
struct Link<'t> {
    /// Bytes of the whole link.
    start: usize,
    end: usize,
    text: &'t str,
    kind: &'t str,
    name: String,
}

/// Where things stand.
pub(super) struct Targets<'r> {
    record: &'r Record,
    /// Chapters by name: heading with its number.
    chapters: Vec<(String, String)>,
    figures: Vec<&'r str>,
}

impl<'r> Targets<'r> {
    pub(super) fn new(record: &'r Record, figures: impl Iterator<Item = &'r str>) -> Self {
        Self { record, chapters: Vec::new(), figures: figures.collect() }
    }

    /// A chapter with its heading as numbered.
    pub(super) fn chapter(&mut self, name: &str, heading: &str) {
        self.chapters.push((name.to_owned(), heading.to_owned()));
    }

    /// Links of the narrative whose target is not there.
    pub(super) fn problems(&self, sources: &Sources, chapters: &[&str]) -> Vec<Diagnostic> {
        let mut out = Vec::new();
        for narrative in &self.record.narrative {
            let Some(text) = sources.text(&narrative.file) else { continue };
            for link in links(text) {
                let known: Vec<&str> = self.names(link.kind, chapters);
                if !known.contains(&link.name.as_str()) {
                    let message = format!("no {} named `{}` to link to", link.kind, link.name);
                    let place = Place { file: narrative.file.clone(), range: link.start..link.end };
                    let some: Vec<&str> = known.into_iter().take(12).collect();
                    out.push(
                        Diagnostic::error("unknown-link", message)
                            .at(place)
                            .hint(format!("there are {}", some.join(", "))),
                    );
                }
            }
        }
        out
    }

    fn names<'n>(&'n self, kind: &str, chapters: &[&'n str]) -> Vec<&'n str> {
        let basis = &self.record.basis;
        match kind {
            "check" => self.record.checks.iter().map(|check| check.id.as_str()).collect(),
            "chapter" => chapters.to_vec(),
            "figure" => self.figures.clone(),
            "standard" => basis.standards.iter().map(|standard| standard.id.as_str()).collect(),
            _ => basis.assumptions.iter().map(|assumption| assumption.id.as_str()).collect(),
        }
    }

    /// The Markdown with every link led to its place.
    pub(super) fn resolved(&self, markdown: &str) -> String {
        let mut out = String::with_capacity(markdown.len());
        let mut at = 0;
        for link in links(markdown) {
            out += &markdown[at..link.start];
            at = link.end;
            let (usual, place) = self.place(&link, markdown);
            let text =
                if link.text.is_empty() { markdown::escaped(&usual) } else { link.text.to_owned() };
            match place {
                Some(place) => out += &format!("[{text}](#{place})"),
                None => out += &text,
            }
        }
        out += &markdown[at..];
        out
    }

    /// The usual text of a link and the id of its place.
    fn place(&self, link: &Link<'_>, markdown: &str) -> (String, Option<String>) {
        let heading = |wanted: &str| {
            let found = headings(markdown).find(|heading| heading.ends_with(wanted));
            found.map(|heading| anchor(&plain(heading)))
        };
        let name = link.name.as_str();
        match link.kind {
            "check" => {
                let title = by_id(&self.record.checks)
                    .get(name)
                    .and_then(|all| Some(check_heading(name, &all.first()?.title)));
                let place = title.and_then(|title| heading(&markdown::escaped(&title)));
                (format!("check {name}"), place)
            }
            "chapter" => {
                let found = self.chapters.iter().find(|(chapter, _)| chapter == name);
                let usual = found
                    .map_or_else(|| name.to_owned(), |(_, heading)| format!("chapter {heading}"));
                (usual, found.map(|(_, heading)| anchor(&plain(heading))))
            }
            "figure" => ("figure".to_owned(), Some(format!("figure-{name}"))),
            "standard" => (format!("[{name}]"), heading("Standards and classes")),
            _ => (format!("assumption {name}"), heading("Assumptions")),
        }
    }
}

/// The lines of headings outside code, without their marks.
fn headings(markdown: &str) -> impl Iterator<Item = &str> {
    let mut fences = Fences::default();
    markdown.lines().filter_map(move |line| {
        let rest = line.trim_start_matches('#');
        (!fences.holds(line) && rest.len() < line.len()).then(|| rest.strip_prefix(' ')).flatten()
    })
}

/// A heading without the marks of escaping.
fn plain(heading: &str) -> String {
    heading.replace('\\', "")
}

/// Every link to a thing, outside code.
fn links(text: &str) -> Vec<Link<'_>> {
    let mut out = Vec::new();
    let mut fences = Fences::default();
    let mut at = 0;
    for line in text.split_inclusive('\n') {
        let start = at;
        at += line.len();
        if !fences.holds(line.trim_end()) {
            in_line(line, start, &mut out);
        }
    }
    out
}

fn in_line<'t>(line: &'t str, start: usize, out: &mut Vec<Link<'t>>) {
    let mut from = 0;
    while let Some(middle) = line[from..].find("](#").map(|at| from + at) {
        from = middle + 3;
        let Some(open) = line[..middle].rfind('[') else { continue };
        let Some(close) = line[from..].find(')').map(|at| from + at) else { continue };
        let Some((kind, name)) = line[from..close].split_once(':') else { continue };
        if KINDS.contains(&kind) {
            out.push(Link {
                start: start + open,
                end: start + close + 1,
                text: &line[open + 1..middle],
                kind,
                name: name.replace("%20", " "),
            });
        }
    }
}
