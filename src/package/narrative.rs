//! Narrative files as templates, and the blocks that were cut out of them.

use serde::Serialize;

use super::steps::{Equation, equation, named};
use crate::files::Sources;
use crate::project::narrative::cut;
use crate::record::{
    CheckRecord, NarrativeBlockRecord, Record, WorkingLineRecord, printed_utilisation,
};

/// A block as its template sees it: one of the fields.
#[derive(Default, Serialize)]
pub(super) struct Block {
    working: Option<Vec<Line>>,
    /// What leads a note, and its text.
    note: Option<(String, String)>,
}

/// A line of a working block: one of the fields.
#[derive(Default, Serialize)]
struct Line {
    remark: Option<String>,
    step: Option<Equation>,
    agreement: Option<AgreementView>,
}

#[derive(Serialize)]
struct AgreementView {
    id: String,
    tolerance: String,
    hand: Option<Equation>,
    analysis: Option<Equation>,
    share: String,
    outcome: String,
}

/// The templates of all narrative files, by path, and their blocks in order.
pub(super) fn templates(record: &Record, sources: &Sources) -> (Vec<(String, String)>, Vec<Block>) {
    let mut blocks: Vec<Block> = Vec::new();
    let mut files = Vec::new();
    for narrative in &record.narrative {
        let text = sources.text(&narrative.file).unwrap_or_default();
        files.push((narrative.file.clone(), cut(text, blocks.len()).template));
        blocks.extend(narrative.blocks.iter().map(|block| self::block(record, block)));
    }
    (files, blocks)
}

fn block(record: &Record, block: &NarrativeBlockRecord) -> Block {
    let basis = &record.basis;
    let note = |lead: String, text: &str| Block {
        note: Some((lead, text.to_owned())),
        ..Block::default()
    };
    match block {
        NarrativeBlockRecord::Working(index) => Block {
            working: record
                .workings
                .get(*index)
                .map(|working| working.lines.iter().map(|line| self::line(record, line)).collect()),
            note: None,
        },
        NarrativeBlockRecord::Assumption(id) => {
            let of = basis.assumptions.iter().find(|assumption| assumption.id == *id);
            of.map_or_else(Block::default, |assumption| {
                let by = assumption.by.as_ref().map(|by| format!(", by {by}")).unwrap_or_default();
                note(format!("Assumption {id} ({}{by})", assumption.status), &assumption.text)
            })
        }
        NarrativeBlockRecord::Deferral(id) => {
            let of = basis.deferred.iter().find(|deferral| deferral.id == *id);
            of.map_or_else(Block::default, |deferral| {
                note(format!("Deferred {id} to {}", deferral.to), &deferral.text)
            })
        }
        NarrativeBlockRecord::Reference(id) => {
            let of = basis.standards.iter().find(|standard| standard.id == *id);
            of.map_or_else(Block::default, |standard| {
                note(
                    format!("Reference {id}"),
                    &format!("{}, {}", standard.title, standard.edition),
                )
            })
        }
        NarrativeBlockRecord::Open(text) => note("Open".to_owned(), text),
    }
}

fn line(record: &Record, line: &WorkingLineRecord) -> Line {
    let significant = record.model.units.significant;
    match line {
        WorkingLineRecord::Remark(text) => Line { remark: Some(text.clone()), ..Line::default() },
        WorkingLineRecord::Step(step) => {
            Line { step: Some(equation(step, significant)), ..Line::default() }
        }
        WorkingLineRecord::Agreement(id) => {
            let check = record.checks.iter().find(|check| check.id == *id);
            Line { agreement: check.map(|check| agreement(check, significant)), ..Line::default() }
        }
    }
}

fn agreement(check: &CheckRecord, significant: usize) -> AgreementView {
    AgreementView {
        id: check.id.clone(),
        tolerance: check.reference.clone(),
        hand: check.demand.as_ref().map(|step| named("hand", step, significant)),
        analysis: check.capacity.as_ref().map(|step| named("analysis", step, significant)),
        share: check.utilisation.map(printed_utilisation).unwrap_or_default(),
        outcome: check.outcome.clone(),
    }
}
