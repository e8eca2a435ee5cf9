//! Outcomes of checks, hand calculations and narrative by name.

use super::steps::Bindings;
use crate::checks::{CheckResult, Checked, LineResult};
use crate::model::{Agreement, Check, DeflectionFrom, Model, NarrativeBlock, On, WorkingLine};
use crate::record::{
    CheckRecord, NarrativeBlockRecord, NarrativeRecord, NextRecord, OnRecord, WorkingLineRecord,
    WorkingRecord,
};

/// Checks and working blocks; the agreements of the blocks stand behind the checks.
pub(super) fn outcomes(model: &Model, checked: &Checked) -> (Vec<CheckRecord>, Vec<WorkingRecord>) {
    let mut checks: Vec<CheckRecord> =
        checked.checks.iter().map(|result| check(model, result)).collect();
    let mut workings: Vec<WorkingRecord> = Vec::new();
    // Blocks of one file go on from one another.
    let mut printed = Vec::new();
    for (working, results) in model.workings.iter().zip(&checked.workings) {
        if workings.last().is_none_or(|before| before.file != working.file) {
            printed.clear();
        }
        let mut bindings = Bindings { units: &model.units, bound: &working.bound, printed };
        let mut lines = Vec::new();
        for (line, result) in working.lines.iter().zip(results) {
            match (line, result) {
                (WorkingLine::Remark(text), _) => {
                    lines.push(WorkingLineRecord::Remark(text.clone()))
                }
                (WorkingLine::Step(step), Some(LineResult::Step(value))) => {
                    lines.push(WorkingLineRecord::Step(bindings.next(step, value)));
                }
                (WorkingLine::Agreement(agreement), Some(result)) => {
                    checks.extend(self::agreement(agreement, result, &working.file, &bindings));
                    lines.push(WorkingLineRecord::Agreement(agreement.id.clone()));
                }
                (WorkingLine::Step(_) | WorkingLine::Agreement(_), _) => {}
            }
        }
        printed = bindings.printed;
        workings.push(WorkingRecord { file: working.file.clone(), lines });
    }
    (checks, workings)
}

fn check(model: &Model, result: &CheckResult) -> CheckRecord {
    let check = &model.checks[result.check];
    let target = &check.targets[result.target];
    let mut bindings = Bindings { units: &model.units, bound: &target.bound, printed: Vec::new() };
    let name = |index: usize| model.combinations[index].name.clone();
    let governing = result.governing.as_ref();
    let steps = governing.map_or_else(Vec::new, |governing| {
        let both = check.steps.iter().zip(&governing.steps);
        both.map(|(step, value)| bindings.next(step, value)).collect()
    });
    let validity = governing.map_or_else(Vec::new, |governing| {
        let both = check.validity.iter().zip(&governing.validity);
        both.map(|(condition, value)| {
            bindings.step(("", &condition.formula), value, Some(&condition.reason), None)
        })
        .collect()
    });
    CheckRecord {
        id: check.id.clone(),
        kind: "check".to_owned(),
        on: on(model, target.on),
        title: check.title.clone(),
        reference: check.reference.clone(),
        sheet: check.sheet.clone(),
        shows: check.shows.name().to_owned(),
        purpose: check.purpose.clone(),
        variable_only: check.variable_only,
        deflection: deflection(check).to_owned(),
        state: governing.map(|governing| name(governing.combination)),
        loaded: governing.map_or_else(Vec::new, |governing| {
            governing.loaded.iter().map(|part| model[*part].name.clone()).collect()
        }),
        x: governing.and_then(|governing| governing.x),
        side: governing.and_then(|governing| governing.side),
        demand: governing
            .map(|governing| bindings.step(("", &check.demand), &governing.demand, None, None)),
        capacity: governing
            .map(|governing| bindings.step(("", &check.capacity), &governing.capacity, None, None)),
        utilisation: governing.and_then(|governing| governing.utilisation),
        limit: check.limit,
        outcome: result.outcome.name().to_owned(),
        reason: result.reason.clone(),
        relies_on: check.relies_on.clone(),
        steps,
        validity,
        next: result
            .next
            .iter()
            .map(|next| NextRecord {
                state: name(next.combination),
                utilisation: Some(next.utilisation).filter(|value| value.is_finite()),
                x: next.x,
            })
            .collect(),
        further: result.further,
        cautions: check.cautions.clone(),
    }
}

const fn deflection(check: &Check) -> &'static str {
    match check.deflection {
        DeflectionFrom::Chord => "chord",
        DeflectionFrom::Undeformed => "undeformed",
        DeflectionFrom::SupportTangent => "support tangent",
    }
}

fn on(model: &Model, on: On) -> OnRecord {
    let none = OnRecord::default();
    match on {
        On::Member { member, span } => OnRecord {
            member: Some(model[member].name.clone()),
            span: span.map(|span| span + 1),
            ..none
        },
        On::Node { node, relative_to } => OnRecord {
            node: Some(model[node].name.clone()),
            relative_to: relative_to.map(|node| model[node].name.clone()),
            ..none
        },
        On::Structure { structure, about } => OnRecord {
            structure: Some(model[structure].name.clone()),
            about: about.map(|node| model[node].name.clone()),
            ..none
        },
    }
}

fn agreement(
    agreement: &Agreement,
    result: &LineResult,
    file: &str,
    bindings: &Bindings<'_>,
) -> Option<CheckRecord> {
    let LineResult::Agreement { outcome, value, with, difference } = result else { return None };
    Some(CheckRecord {
        id: agreement.id.clone(),
        kind: "agreement".to_owned(),
        on: OnRecord { file: Some(file.to_owned()), ..OnRecord::default() },
        title: agreement.title.clone(),
        reference: format!("within {} %", crate::quantity::print(agreement.tolerance * 100.0, 4)),
        sheet: None,
        shows: "analysis".to_owned(),
        purpose: String::new(),
        variable_only: false,
        deflection: "chord".to_owned(),
        state: None,
        loaded: Vec::new(),
        x: None,
        side: None,
        demand: Some(bindings.step(("", &agreement.value), value, None, None)),
        capacity: Some(bindings.step(("", &agreement.with), with, None, None)),
        utilisation: Some(difference / agreement.tolerance),
        limit: 1.0,
        outcome: outcome.name().to_owned(),
        reason: None,
        relies_on: Vec::new(),
        steps: Vec::new(),
        validity: Vec::new(),
        next: Vec::new(),
        further: 0,
        cautions: Vec::new(),
    })
}

pub(super) fn narrative(model: &Model) -> Vec<NarrativeRecord> {
    let mut workings = 0..;
    model
        .narrative
        .iter()
        .map(|narrative| NarrativeRecord {
            file: narrative.file.clone(),
            after: narrative.after.clone(),
            blocks: narrative
                .blocks
                .iter()
                .map(|block| match block {
                    NarrativeBlock::Working => {
                        NarrativeBlockRecord::Working(workings.next().unwrap_or_default())
                    }
                    NarrativeBlock::Assumption(id) => NarrativeBlockRecord::Assumption(id.clone()),
                    NarrativeBlock::Deferral(id) => NarrativeBlockRecord::Deferral(id.clone()),
                    NarrativeBlock::Reference(id) => NarrativeBlockRecord::Reference(id.clone()),
                    NarrativeBlock::Open { text, by } => {
                        let by = by.as_ref().map(|by| format!(" (by {by})")).unwrap_or_default();
                        let text = text.trim_end_matches(['.', ' ']);
                        NarrativeBlockRecord::Open(format!("{text}{by}"))
                    }
                })
                .collect(),
        })
        .collect()
}
