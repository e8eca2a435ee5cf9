//! First step: YAML events → a tree in which every key and value knows its bytes.
//!
//! Invariants
//! - The tree is at most [`DEPTH`] deep and holds at most [`NODES`] nodes, aliases expanded: whatever walks
//!   it may recurse and needs no limits of its own.
//! - Keys are text and differ within a map; there are no tags, no merge keys and only one document.
//! - Scalars are text as written; nothing is taken for a number.

use std::ops::Range;

use indexmap::map::Entry;
use saphyr_parser::{Event, Parser, ScalarStyle, ScanError, Span, StrInput};

use super::text::{Map, Text, place};
use crate::diagnostic::Diagnostic;

/// Largest file, bytes.
pub(super) const SIZE: usize = 8 << 20;
/// Deepest nesting.
pub(super) const DEPTH: usize = 64;
/// Most nodes, aliases expanded.
pub(super) const NODES: usize = 2_000_000;

/// A value with its bytes; of a value left empty, the bytes of its key.
#[derive(Clone, Debug)]
pub(super) struct Node {
    pub(super) range: Range<usize>,
    pub(super) kind: Kind,
}

/// What a value is.
#[derive(Clone, Debug)]
pub(super) enum Kind {
    /// Nothing, `~` or `null`.
    Empty,
    Leaf(String),
    List(Vec<Node>),
    Map(Map<Node>),
}

/// Nodes, bytes of text and levels below an anchor.
#[derive(Clone, Copy, Default)]
struct Weight {
    nodes: usize,
    bytes: usize,
    levels: usize,
}

/// A list or map that is still open.
struct Open {
    node: Node,
    /// The key whose value comes next.
    key: Option<Text>,
    anchor: usize,
    /// Ends with a bracket of its own, not with its last child.
    flow: bool,
    weight: Weight,
}

struct Builder<'t> {
    bytes: Bytes<'t>,
    open: Vec<Open>,
    /// By anchor id; `None` while its node is open.
    anchors: Vec<Option<(Node, Weight)>>,
    spent: Weight,
    root: Option<Node>,
    found: Vec<Diagnostic>,
}

/// Character index → byte.
struct Bytes<'t> {
    text: &'t str,
    /// `None`: all characters are one byte long.
    starts: Option<Vec<usize>>,
}

impl Bytes<'_> {
    fn at(&self, character: usize) -> usize {
        match &self.starts {
            None => character.min(self.text.len()),
            Some(starts) => starts.get(character).copied().unwrap_or(self.text.len()),
        }
    }

    fn range(&self, span: Span) -> Range<usize> {
        let start = self.at(span.start.index());
        start..self.at(span.end.index()).max(start)
    }
}

/// Reads the tree of a file.
///
/// # Errors
/// A syntax error or a limit passed ends the reading; keys written twice and the like are collected.
pub(super) fn read(text: &str) -> Result<Node, Vec<Diagnostic>> {
    if text.len() > SIZE {
        let message = format!("the file is larger than {} MiB", SIZE >> 20);
        return Err(vec![Diagnostic::error("limit", message)]);
    }
    let starts = (!text.is_ascii()).then(|| text.char_indices().map(|(byte, _)| byte).collect());
    let mut builder = Builder {
        bytes: Bytes { text, starts },
        open: Vec::new(),
        anchors: Vec::new(),
        spent: Weight::default(),
        root: None,
        found: Vec::new(),
    };
    let mut parser: Parser<'_, StrInput<'_>> = Parser::new_from_str(text);
    while let Some(event) = parser.next_event() {
        let problem = match event {
            Ok((event, span)) => builder.take(event, span),
            Err(error) => Err(builder.syntax(&error)),
        };
        if let Err(problem) = problem {
            builder.found.push(problem);
            return Err(builder.found);
        }
    }
    match builder.root {
        _ if !builder.found.is_empty() => Err(builder.found),
        Some(Node { kind: Kind::Empty, .. }) | None => {
            Err(vec![Diagnostic::error("empty-file", "the project file is empty").at(place(0..0))])
        }
        Some(root) => Ok(root),
    }
}

impl Builder<'_> {
    fn take(&mut self, event: Event<'_>, span: Span) -> Result<(), Diagnostic> {
        let range = self.bytes.range(span);
        match event {
            Event::DocumentStart(_) if self.root.is_some() => {
                Err(Diagnostic::error("several-documents", "a project file is one document")
                    .at(place(range))
                    .label("a second document begins here"))
            }
            Event::Scalar(text, style, anchor, tag) => {
                self.refuse_tag(tag.is_some(), &range);
                let empty = style == ScalarStyle::Plain
                    && matches!(&*text, "" | "~" | "null" | "Null" | "NULL");
                let weight = Weight { nodes: 1, bytes: text.len(), levels: 0 };
                let kind = if empty { Kind::Empty } else { Kind::Leaf(text.into_owned()) };
                self.spend(weight, &range)?;
                self.close(Node { range, kind }, anchor, weight)
            }
            Event::SequenceStart(anchor, tag) => {
                self.refuse_tag(tag.is_some(), &range);
                self.begin(Kind::List(Vec::new()), range, anchor)
            }
            Event::MappingStart(anchor, tag) => {
                self.refuse_tag(tag.is_some(), &range);
                self.begin(Kind::Map(Map::new()), range, anchor)
            }
            Event::SequenceEnd | Event::MappingEnd => {
                if let Some(mut open) = self.open.pop() {
                    if open.flow {
                        open.node.range.end = range.end;
                    }
                    open.weight.levels += 1;
                    self.close(open.node, open.anchor, open.weight)?;
                }
                Ok(())
            }
            Event::Alias(anchor) => self.alias(anchor, range),
            _ => Ok(()),
        }
    }

    fn begin(&mut self, kind: Kind, range: Range<usize>, anchor: usize) -> Result<(), Diagnostic> {
        let weight = Weight { nodes: 1, bytes: 0, levels: 0 };
        self.spend(weight, &range)?;
        if self.open.len() >= DEPTH {
            return Err(too_deep(range));
        }
        let flow = matches!(self.bytes.text.as_bytes().get(range.start), Some(b'[' | b'{'));
        self.open.push(Open { node: Node { range, kind }, key: None, anchor, flow, weight });
        Ok(())
    }

    fn alias(&mut self, anchor: usize, range: Range<usize>) -> Result<(), Diagnostic> {
        let weight = self.anchors.get(anchor).and_then(Option::as_ref).map(|(_, weight)| *weight);
        let Some(weight) = weight else {
            return Err(Diagnostic::error("alias", "an alias stands inside its own anchor")
                .at(place(range)));
        };
        if self.open.len() + weight.levels > DEPTH {
            return Err(too_deep(range));
        }
        // Counted before copying, so that a bomb costs nothing.
        self.spend(weight, &range)?;
        match self.anchors[anchor].clone() {
            Some((node, _)) => self.close(node, 0, weight),
            None => Ok(()),
        }
    }

    fn spend(&mut self, weight: Weight, range: &Range<usize>) -> Result<(), Diagnostic> {
        self.spent.nodes += weight.nodes;
        self.spent.bytes += weight.bytes;
        let over = self.spent.nodes > NODES || self.spent.bytes > 2 * SIZE;
        if over { Err(too_many(range.clone())) } else { Ok(()) }
    }

    /// Puts a finished node into the list or map that is open.
    fn close(&mut self, mut node: Node, anchor: usize, weight: Weight) -> Result<(), Diagnostic> {
        if anchor > 0 {
            // The copy kept for aliases counts too.
            self.spend(weight, &node.range)?;
            if self.anchors.len() <= anchor {
                self.anchors.resize(anchor + 1, None);
            }
            self.anchors[anchor] = Some((node.clone(), weight));
        }
        let Some(open) = self.open.last_mut() else {
            self.root = Some(node);
            return Ok(());
        };
        open.weight.nodes += weight.nodes;
        open.weight.bytes += weight.bytes;
        open.weight.levels = open.weight.levels.max(weight.levels);
        open.node.range.end = open.node.range.end.max(node.range.end);
        match &mut open.node.kind {
            Kind::List(items) => items.push(node),
            Kind::Map(entries) => match open.key.take() {
                None => {
                    open.key = Some(key(node, &mut self.found));
                }
                Some(key) => {
                    if matches!(node.kind, Kind::Empty) {
                        node.range = key.range().clone();
                    }
                    let again = key.range().clone();
                    match entries.entry(key) {
                        Entry::Vacant(entry) => {
                            entry.insert(node);
                        }
                        Entry::Occupied(entry) => {
                            let line = line_of(self.bytes.text, entry.key().range().start);
                            self.found.push(
                                Diagnostic::error(
                                    "duplicate-key",
                                    format!("`{}` is written twice", entry.key()),
                                )
                                .at(place(again))
                                .label("again here")
                                .hint(format!("it was first written on line {line}")),
                            );
                        }
                    }
                }
            },
            Kind::Empty | Kind::Leaf(_) => {}
        }
        Ok(())
    }

    fn refuse_tag(&mut self, tagged: bool, range: &Range<usize>) {
        if tagged {
            self.found.push(
                Diagnostic::error("tag", "a project file takes no YAML tags")
                    .at(place(range.clone()))
                    .hint("leave out the word that begins with `!`".to_owned()),
            );
        }
    }

    fn syntax(&self, error: &ScanError) -> Diagnostic {
        let at = self.bytes.at(error.marker().index());
        // Of brackets the scanner reads on ahead and stops at its own limit, which is higher than ours.
        if error.info() == "recursion limit exceeded" {
            return too_deep(at..at);
        }
        let open = self.open.iter().rev().find(|open| open.flow).map(|open| {
            let start = open.node.range.start;
            let bracket = &self.bytes.text[start..=start];
            format!("is the `{bracket}` on line {} closed?", line_of(self.bytes.text, start))
        });
        Diagnostic::error("syntax", format!("not valid YAML: {}", error.info()))
            .at(place(at..at))
            .hint(open)
    }
}

fn key(node: Node, found: &mut Vec<Diagnostic>) -> Text {
    let range = node.range;
    let text = match node.kind {
        Kind::Leaf(text) if text == "<<" => {
            found.push(
                Diagnostic::error("merge-key", "merge keys `<<` are not read")
                    .at(place(range.clone()))
                    .hint("write the keys out".to_owned()),
            );
            text
        }
        Kind::Leaf(text) => text,
        Kind::Empty | Kind::List(_) | Kind::Map(_) => {
            found.push(Diagnostic::error("key", "a key is a name").at(place(range.clone())));
            format!("key at byte {}", range.start)
        }
    };
    Text::new(text, range)
}

fn too_deep(range: Range<usize>) -> Diagnostic {
    Diagnostic::error("limit", format!("nested deeper than {DEPTH} levels")).at(place(range))
}

fn too_many(range: Range<usize>) -> Diagnostic {
    Diagnostic::error("limit", format!("more than {NODES} values, aliases counted in full"))
        .at(place(range))
}

/// Line that holds a byte, counted from 1.
fn line_of(text: &str, byte: usize) -> usize {
    text.as_bytes()[..byte.min(text.len())].iter().filter(|b| **b == b'\n').count() + 1
}
