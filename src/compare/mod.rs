//! (Record, Record) → Changes: what differs between two revisions of a project, and what does not.
//!
//! Invariants
//! - Works from Records alone; texts and lines of files are added where a side has its Sources.
//! - Things are matched by name, after renamed ones were recognised; combinations by what they contain,
//!   never by number.
//! - No structural value is computed: values are those of the two Records.
//! - What is not listed is counted: as the same, or as a change below the thresholds.
//! - `compare(a, b)` and `compare(b, a)` mirror each other.

mod changes;
mod checks;
mod committed;
mod facts;
mod input;
mod items;
mod marks;
mod rename;
mod report;
mod texts;
mod thresholds;
mod translate;
mod values;
mod verdict;

pub use changes::{
    Changes, CheckChange, Count, Counts, End, FactChange, ItemChange, LineOf, OutcomeEnd, Renamed,
    SideRecord, TextChange, ValueChange, What,
};
pub use committed::differs;
pub use facts::{content_name, load_name};
pub use items::ItemKind;
pub use marks::Marks;
pub use report::{CheckRow, CountRow, ItemRow, RenamedRow, Report, TextRow, ValueRow};
pub use thresholds::Thresholds;

use crate::files::Sources;
use crate::project::Lines;
use crate::record::Record;

/// The form of the machine-readable comparison written by this program.
pub const FORMAT: u32 = 1;

/// One side of a comparison.
#[derive(Clone, Copy, Debug)]
pub struct Side<'s> {
    /// What the side is called in messages: a folder, a record file, a revision.
    pub label: &'s str,
    pub record: &'s Record,
    /// Texts and lines; a record file has none.
    pub sources: Option<&'s Sources>,
}

/// Compares two revisions.
#[must_use]
pub fn compare(old: &Side<'_>, new: &Side<'_>, thresholds: &Thresholds) -> Changes {
    let renamed = rename::recognised(old.record, new.record);
    let before = translate::translated(old.record, &renamed);
    let lines = |side: &Side<'_>| side.sources.map(Lines::of);
    let mut counts = Counts::default();
    let input = input::changes(
        &input::Input { record: &before, lines: lines(old) },
        &input::Input { record: new.record, lines: lines(new) },
        &renamed,
        &mut counts.items,
    );
    let checks = checks::changes(&before, new.record, thresholds, &mut counts.checks);
    let values = values::members(&before, new.record, thresholds, &mut counts.values);
    let reactions = values::reactions(&before, new.record, thresholds, &mut counts.reactions);
    let texts = texts::changes(old.sources, new.sources, &mut counts.texts);
    let (opened, closed) = checks::open_items(&before, new.record);
    Changes {
        format: FORMAT,
        old: SideRecord::new(old),
        new: SideRecord::new(new),
        thresholds: thresholds.clone(),
        notes: notes(old, new),
        renamed,
        input,
        texts,
        checks,
        values,
        reactions,
        opened,
        closed,
        counts,
    }
}

/// What a reader must know of the two sides besides their content.
fn notes(old: &Side<'_>, new: &Side<'_>) -> Vec<String> {
    let mut out = Vec::new();
    let versions = [old, new].map(|side| side.record.program.version.as_str());
    if versions[0] != versions[1] {
        out.push(format!(
            "The sides were computed by versions {} and {} of the program; a difference may come from that.",
            versions[0], versions[1]
        ));
    }
    if old.sources.is_none() || new.sources.is_none() {
        out.push(
            "A record holds no narrative, templates and styles: their texts were not compared."
                .to_owned(),
        );
    }
    for side in [old, new] {
        if !side.record.self_check.satisfied {
            out.push(format!("The self-check of {} is out of tolerance.", side.label));
        }
    }
    out
}
