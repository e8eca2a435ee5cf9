//! Checks for templates: by id, the worst place in full, all others in a line each.

use serde::Serialize;

use super::Quantity;
use crate::package::anchor::{check_heading, check_target};
use crate::package::steps::{Equation, equation, in_text, named};
use crate::quantity::Kind;
use crate::record::{AssumptionRecord, CheckRecord, Record, by_id, printed_utilisation};

/// A check with everything it is made on.
#[derive(Serialize)]
pub(super) struct CheckView<'r> {
    id: &'r str,
    /// Text of its heading.
    heading: String,
    /// Where links to it lead before headings are numbered.
    target: String,
    title: &'r str,
    reference: &'r str,
    sheet: Option<&'r str>,
    purpose: &'r str,
    shows: &'r str,
    agreement: bool,
    variable_only: bool,
    deflection: &'r str,
    limit: String,
    /// The worst of all places.
    outcome: &'r str,
    /// Where it is worst, in full.
    full: Place<'r>,
    steps: Vec<Equation>,
    conditions: Vec<Equation>,
    demand: Option<Equation>,
    capacity: Option<Equation>,
    /// Both as printed.
    demand_value: Option<String>,
    capacity_value: Option<String>,
    next: Vec<NextRow<'r>>,
    further: usize,
    /// What else it is made on.
    others: Vec<Place<'r>>,
    relies_on: Vec<&'r AssumptionRecord>,
    cautions: &'r [String],
}

/// A check on one of its targets.
#[derive(Serialize)]
struct Place<'r> {
    on: String,
    x: Option<Quantity>,
    side: Option<&'static str>,
    combination: String,
    combination_title: &'r str,
    utilisation: String,
    outcome: &'r str,
    reason: Option<&'r str>,
}

#[derive(Serialize)]
struct NextRow<'r> {
    combination: &'r str,
    x: Option<Quantity>,
    utilisation: String,
}

/// A row of the summary.
#[derive(Serialize)]
pub(super) struct SummaryRow<'r> {
    member: &'r str,
    id: &'r str,
    target: String,
    title: &'r str,
    place: Place<'r>,
}

pub(super) fn checks(record: &Record) -> Vec<CheckView<'_>> {
    by_id(&record.checks).into_values().filter_map(|all| view(record, &all)).collect()
}

fn view<'r>(record: &'r Record, all: &[&'r CheckRecord]) -> Option<CheckView<'r>> {
    let worst = all.iter().copied().reduce(|a, b| if rank(b) > rank(a) { b } else { a })?;
    let significant = record.model.units.significant;
    let equations = |steps: &[crate::record::StepRecord]| -> Vec<Equation> {
        steps.iter().map(|step| equation(step, significant)).collect()
    };
    let (left, right) =
        if worst.kind == "agreement" { ("hand", "analysis") } else { ("demand", "capacity") };
    Some(CheckView {
        id: &worst.id,
        heading: check_heading(&worst.id, &worst.title),
        target: check_target(&worst.id),
        title: &worst.title,
        reference: &worst.reference,
        sheet: worst.sheet.as_deref(),
        purpose: &worst.purpose,
        shows: &worst.shows,
        agreement: worst.kind == "agreement",
        variable_only: worst.variable_only,
        deflection: &worst.deflection,
        limit: crate::quantity::print(worst.limit, significant),
        outcome: &worst.outcome,
        full: place(record, worst),
        steps: equations(&worst.steps),
        conditions: equations(&worst.validity),
        demand: worst.demand.as_ref().map(|step| named(left, step, significant)),
        capacity: worst.capacity.as_ref().map(|step| named(right, step, significant)),
        demand_value: worst.demand.as_ref().map(|step| in_text(&step.value, significant)),
        capacity_value: worst.capacity.as_ref().map(|step| in_text(&step.value, significant)),
        next: worst
            .next
            .iter()
            .map(|next| NextRow {
                combination: number(record, &next.state),
                x: next.x.map(|x| Quantity::new(Kind::Length, x)),
                utilisation: next.utilisation.map_or_else(|| "–".to_owned(), printed_utilisation),
            })
            .collect(),
        further: worst.further,
        others: all
            .iter()
            .filter(|other| !std::ptr::eq(**other, worst))
            .map(|other| place(record, other))
            .collect(),
        relies_on: record
            .basis
            .assumptions
            .iter()
            .filter(|assumption| worst.relies_on.contains(&assumption.id))
            .collect(),
        cautions: &worst.cautions,
    })
}

/// Not satisfied is worse than deferred, deferred than satisfied; then the utilisation counts.
pub(in crate::package) fn rank(check: &CheckRecord) -> (u8, f64) {
    let outcome = match check.outcome.as_str() {
        "not satisfied" => 2,
        "deferred" => 1,
        _ => 0,
    };
    // Without a utilisation the capacity is not above zero: nothing is worse.
    let utilisation = check.utilisation.unwrap_or(f64::MAX);
    (outcome, utilisation / check.limit)
}

fn place<'r>(record: &'r Record, check: &'r CheckRecord) -> Place<'r> {
    let state = check.state.as_deref().unwrap_or_default();
    let combination = record.combinations.get(state);
    Place {
        on: check.on_words(),
        x: check.x.map(|x| Quantity::new(Kind::Length, x)),
        side: check.side.map(|side| match side {
            crate::model::Side::Before => "before",
            crate::model::Side::After => "after",
        }),
        combination: record.in_short(state, &check.loaded),
        combination_title: combination.map_or("", |combination| &combination.title),
        utilisation: check.utilisation.map_or_else(|| "–".to_owned(), printed_utilisation),
        outcome: &check.outcome,
        reason: check.reason.as_deref(),
    }
}

fn number<'r>(record: &'r Record, state: &str) -> &'r str {
    record.combinations.get(state).map_or("", |combination| &combination.number)
}

/// The worst check of each member, then the worst place of every check that is not on a member.
pub(super) fn summary(record: &Record) -> Vec<SummaryRow<'_>> {
    let row = |member: &'_ str, check: &'_ CheckRecord| -> Option<(String, usize)> {
        record
            .checks
            .iter()
            .position(|other| std::ptr::eq(other, check))
            .map(|index| (member.to_owned(), index))
    };
    let mut rows: Vec<(String, usize)> = Vec::new();
    for name in record.results.members.keys() {
        let of = record.checks.iter().filter(|check| check.on.member.as_ref() == Some(name));
        let worst = of.reduce(|a, b| if rank(b) > rank(a) { b } else { a });
        rows.extend(worst.and_then(|check| row(name, check)));
    }
    for all in by_id(&record.checks).into_values() {
        let others = all.into_iter().filter(|check| check.on.member.is_none());
        let worst = others.reduce(|a, b| if rank(b) > rank(a) { b } else { a });
        rows.extend(worst.and_then(|check| row("", check)));
    }
    rows.into_iter()
        .map(|(_, index)| {
            let check = &record.checks[index];
            SummaryRow {
                member: check.on.member.as_deref().unwrap_or_default(),
                id: &check.id,
                target: check_target(&check.id),
                title: &check.title,
                place: place(record, check),
            }
        })
        .collect()
}

/// Cautions of the sheets used, each once with the checks that bring it.
#[derive(Serialize)]
pub(super) struct Caution<'r> {
    text: &'r str,
    checks: Vec<&'r str>,
}

pub(super) fn cautions(record: &Record) -> Vec<Caution<'_>> {
    let mut out: Vec<Caution<'_>> = Vec::new();
    for check in &record.checks {
        for text in &check.cautions {
            let known = out.iter().position(|caution| caution.text == text);
            let index = known.unwrap_or_else(|| {
                out.push(Caution { text, checks: Vec::new() });
                out.len() - 1
            });
            if !out[index].checks.contains(&check.id.as_str()) {
                out[index].checks.push(&check.id);
            }
        }
    }
    out
}

/// A check that is deferred, with what covers it.
#[derive(Serialize)]
pub(super) struct DeferredCheck<'r> {
    id: &'r str,
    target: String,
    on: String,
    reason: &'r str,
    covered_by: Vec<&'r str>,
}

pub(super) fn deferred(record: &Record) -> Vec<DeferredCheck<'_>> {
    record
        .checks
        .iter()
        .filter(|check| check.outcome == "deferred")
        .map(|check| DeferredCheck {
            id: &check.id,
            target: check_target(&check.id),
            on: check.on_words(),
            reason: check.reason.as_deref().unwrap_or_default(),
            covered_by: record
                .basis
                .deferred
                .iter()
                .filter(|deferral| deferral.checks.contains(&check.id))
                .map(|deferral| deferral.id.as_str())
                .collect(),
        })
        .collect()
}
