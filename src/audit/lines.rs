//! Where checks, assumptions and deferrals stand in the files of a project.

use crate::compare::LineOf;
use crate::files::Sources;
use crate::project::{Lines, narrative};
use crate::record::{NarrativeBlockRecord, Record, WorkingLineRecord};

/// Looks up lines by kind in words and id.
pub(super) struct Where<'a> {
    sources: &'a Sources,
    record: &'a Record,
    lines: Lines,
}

impl<'a> Where<'a> {
    pub(super) fn new(record: &'a Record, sources: &'a Sources) -> Self {
        Self { sources, record, lines: Lines::of(sources) }
    }

    pub(super) fn check(&self, id: &str) -> Option<LineOf> {
        self.written("check", id).or_else(|| {
            self.block(|block| match block {
                NarrativeBlockRecord::Working(index) => {
                    let lines = self.record.workings.get(*index).map(|working| &working.lines);
                    lines.into_iter().flatten().any(
                        |line| matches!(line, WorkingLineRecord::Agreement(other) if other == id),
                    )
                }
                _ => false,
            })
        })
    }

    pub(super) fn assumption(&self, id: &str) -> Option<LineOf> {
        let is = |block: &NarrativeBlockRecord| matches!(block, NarrativeBlockRecord::Assumption(other) if other == id);
        self.written("assumption", id).or_else(|| self.block(is))
    }

    pub(super) fn deferral(&self, id: &str) -> Option<LineOf> {
        let is = |block: &NarrativeBlockRecord| matches!(block, NarrativeBlockRecord::Deferral(other) if other == id);
        self.written("deferral", id).or_else(|| self.block(is))
    }

    fn written(&self, kind: &'static str, id: &str) -> Option<LineOf> {
        let line = self.lines.get(kind, id, 0)?;
        Some(LineOf { file: "project.yaml".to_owned(), line })
    }

    /// The line that opens the first block of the narrative of which something holds.
    fn block(&self, is: impl Fn(&NarrativeBlockRecord) -> bool) -> Option<LineOf> {
        self.record.narrative.iter().find_map(|narrative| {
            let index = narrative.blocks.iter().position(&is)?;
            let text = self.sources.text(&narrative.file)?;
            let block = narrative::cut(text, 0).blocks.into_iter().nth(index)?;
            Some(LineOf { file: narrative.file.clone(), line: line(text, block.opening.start) })
        })
    }
}

/// The line of a byte, counted from 1.
pub(super) fn line(text: &str, at: usize) -> usize {
    text.bytes().take(at).filter(|byte| *byte == b'\n').count() + 1
}

/// The column of a byte in characters, counted from 1.
pub(super) fn column(text: &str, at: usize) -> usize {
    let before = text.get(..at).unwrap_or_default();
    before.rsplit('\n').next().unwrap_or_default().chars().count() + 1
}
