//! Blocks that are cut out of the narrative before anything else looks at it.
//!
//! A fence whose info string is one of [`BlockKind`]'s words is such a block. What is left is a template in
//! which each block is a call by its number, on as many lines as the block had.

use std::ops::Range;

/// What a block holds.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum BlockKind {
    /// A hand calculation.
    Working,
    Assumption,
    Deferral,
    Reference,
    Open,
}

impl BlockKind {
    const WORDS: [(&'static str, Self); 5] = [
        ("working", Self::Working),
        ("assumption", Self::Assumption),
        ("deferral", Self::Deferral),
        ("reference", Self::Reference),
        ("open", Self::Open),
    ];
}

/// A block with its bytes in the file.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Block {
    pub kind: BlockKind,
    /// Between the fences.
    pub body: Range<usize>,
    /// The line that opens it.
    pub opening: Range<usize>,
    /// Its closing fence is there.
    pub closed: bool,
}

/// A narrative file, cut.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Cut {
    /// The template that is left; blocks are numbered from the number given.
    pub template: String,
    pub blocks: Vec<Block>,
}

/// Cuts a narrative file; its first block gets the number `first`.
#[must_use]
pub fn cut(text: &str, first: usize) -> Cut {
    let mut template = String::with_capacity(text.len());
    let mut blocks: Vec<Block> = Vec::new();
    let mut open: Option<(Option<BlockKind>, &str, Range<usize>)> = None;
    let mut at = 0;
    for line in text.split_inclusive('\n') {
        let range = at..at + line.trim_end_matches('\n').len();
        at += line.len();
        let bare = line.trim_start_matches(' ');
        let indent = line.len() - bare.len();
        let fence = fence(bare).filter(|_| indent < 4);
        match (&open, fence) {
            (None, Some(fence)) => {
                let info = bare[fence.len()..].trim();
                let kind = BlockKind::WORDS.iter().find(|(word, _)| *word == info);
                let kind = kind.map(|(_, kind)| *kind);
                match kind {
                    Some(_) => {
                        template += &format!("{{{{ block({}) }}}}\n", first + blocks.len());
                    }
                    None => template += line,
                }
                open = Some((kind, fence, range));
            }
            (Some((kind, opening, start)), Some(fence)) if closes(bare, fence, opening) => {
                match kind {
                    Some(kind) => {
                        let body = (start.end + 1).min(range.start)..range.start;
                        let opening = start.clone();
                        blocks.push(Block { kind: *kind, body, opening, closed: true });
                        template.push('\n');
                    }
                    None => template += line,
                }
                open = None;
            }
            (Some((Some(_), ..)), _) => template.push('\n'),
            _ => template += line,
        }
    }
    if let Some((Some(kind), _, start)) = open {
        let body = (start.end + 1).min(text.len())..text.len();
        blocks.push(Block { kind, body, opening: start, closed: false });
    }
    Cut { template, blocks }
}

/// Tells lines of code from text, line by line, as CommonMark has it.
#[derive(Clone, Debug, Default)]
pub struct Fences {
    open: Option<String>,
}

impl Fences {
    /// Whether the next line is code or a fence.
    pub fn holds(&mut self, line: &str) -> bool {
        let bare = line.trim_start_matches(' ');
        let mark = fence(bare).filter(|_| line.len() - bare.len() < 4);
        match (&self.open, mark) {
            (None, None) => false,
            (None, Some(mark)) => {
                self.open = Some(mark.to_owned());
                true
            }
            (Some(opening), Some(mark)) if closes(bare, mark, opening) => {
                self.open = None;
                true
            }
            (Some(_), _) => true,
        }
    }
}

/// The mark closes a fence: as long at least, and nothing behind it.
fn closes(line: &str, mark: &str, opening: &str) -> bool {
    mark.starts_with(opening) && line[mark.len()..].trim().is_empty()
}

/// Three or more backticks or tildes at the beginning of a line; backticks with another behind them are code
/// within the line.
fn fence(line: &str) -> Option<&str> {
    let mark = line.chars().next().filter(|c| matches!(c, '`' | '~'))?;
    let rest = line.trim_start_matches(mark);
    let length = line.len() - rest.len();
    (length >= 3 && !(mark == '`' && rest.contains('`'))).then(|| &line[..length])
}
