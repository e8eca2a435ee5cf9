//! Open items: what a reader of the first page must know is not settled.

use super::{CheckRecord, NarrativeBlockRecord, OpenItem, Record, Registers};
use crate::model::Effect;
use crate::quantity::{Kind, print};
use crate::record::by_id;

/// A force below this share of the structure's largest is round-off, not uplift or compression.
const NOTHING: f64 = 1e-9;

pub(super) fn registers(record: &Record) -> Registers {
    let mut open_items = Vec::new();
    open_items.extend(outcomes(record));
    open_items.extend(lenient(record));
    open_items.extend(assumptions(record));
    open_items.extend(narrative(record));
    open_items.extend(uncombined(record));
    open_items.extend(uplift(record));
    open_items.extend(compression(record));
    open_items.extend(unchecked(record));
    Registers { open_items }
}

/// A sentence, ended once however the project's own words end.
fn item(kind: &str, text: String) -> OpenItem {
    OpenItem { kind: kind.to_owned(), text: format!("{}.", text.trim_end_matches(['.', ' '])) }
}

fn assumptions(record: &Record) -> impl Iterator<Item = OpenItem> {
    record.open_assumptions().map(|assumption| {
        let by = assumption.by.as_ref().map(|by| format!(" (by {by})")).unwrap_or_default();
        item(
            "assumption",
            format!("Assumption {} is to be confirmed{by}: {}", assumption.id, assumption.text),
        )
    })
}

/// Load cases that no combination counts, and those without any load.
fn uncombined(record: &Record) -> impl Iterator<Item = OpenItem> {
    let cases = record.model.cases.iter();
    let unused = cases.clone().filter(|(name, _)| {
        !record.combinations.values().any(|combination| combination.factors.contains_key(*name))
    });
    let unused: Vec<&str> = unused.map(|(name, _)| name.as_str()).collect();
    let empty = cases.filter(|(_, case)| case.loads.is_empty());
    let empty: Vec<&str> = empty.map(|(name, _)| name.as_str()).collect();
    let said = |names: Vec<&str>, what: &str| {
        (!names.is_empty()).then(|| item("combinations", format!("{what}: {}", names.join(", "))))
    };
    said(unused, "Load cases in no combination")
        .into_iter()
        .chain(said(empty, "Load cases without a load"))
}

/// Supports that some combination lifts without `uplift: anchored`.
fn uplift(record: &Record) -> Vec<OpenItem> {
    let printer = record.model.units.printer();
    let mut out = Vec::new();
    for (name, node) in record.model.structures.values().flat_map(|structure| &structure.nodes) {
        let Some(support) = node.support.as_ref().filter(|support| !support.uplift_anchored) else {
            continue;
        };
        // The part of a reaction along global Z, from the support's own axes.
        let up = |state: &str| -> f64 {
            record
                .reaction(name, state)
                .map_or(0.0, |own| (0..3).map(|axis| support.axes[axis][2] * own[axis]).sum())
        };
        let scale = record.states().map(|state| up(state).abs()).fold(0.0, f64::max);
        let combined = record.combinations.keys().map(|state| (up(state), state, &[][..]));
        // Where spans may be loaded or not, the governing values know the adverse ones.
        let upright = support.axes[2][2] >= 1.0;
        let governing = record.results.reactions.values().filter(|_| upright).filter_map(|nodes| {
            let least = &nodes.get(name)?.get("Z")?.min;
            Some((least.value, &least.state, &least.loaded[..]))
        });
        let least = combined.chain(governing).fold(
            None,
            |least: Option<(f64, &String, &[String])>, next| match least {
                Some(so_far) if so_far.0 <= next.0 => least,
                _ => Some(next),
            },
        );
        if let Some((value, state, loaded)) = least
            && value < -NOTHING * scale
        {
            let force = printer.with_unit(Kind::Force, -value);
            out.push(item(
                "uplift",
                format!(
                    "Support {name} must hold down {force} in {} and is not said to be anchored",
                    record.in_short(state, loaded)
                ),
            ));
        }
    }
    out
}

/// Compressed members: those that carry axial force only without its acceptance, and all others while
/// the analysis is of first order without imperfections.
fn compression(record: &Record) -> Vec<OpenItem> {
    let printer = record.model.units.printer();
    let mut slender = Vec::new();
    let mut first_order = Vec::new();
    for structure in record.model.structures.values() {
        for (name, member) in &structure.members {
            let Some(result) = record.results.members.get(name) else { continue };
            let n = Effect::N.name();
            let extremes = || result.governing.values().filter_map(|effects| effects.get(n));
            let scale = extremes()
                .map(|extremes| extremes.max.value.abs().max(extremes.min.value.abs()))
                .fold(0.0, f64::max);
            let Some(least) = extremes()
                .map(|extremes| &extremes.min)
                .min_by(|a, b| a.value.total_cmp(&b.value))
                .filter(|least| least.value < -NOTHING * scale)
            else {
                continue;
            };
            let number = record.combinations.get(&least.state).map_or("", |c| c.number.as_str());
            let said =
                format!("{name} {} in {number}", printer.with_unit(Kind::Force, least.value));
            match &member.axial_only {
                Some(only) if !only.compression_accepted => slender.push(said.clone()),
                _ => {}
            }
            first_order.push(said);
        }
    }
    let mut out = Vec::new();
    if !slender.is_empty() {
        out.push(item(
            "compression",
            format!(
                "Members said to carry axial force only are compressed, which is not said to be accepted: {}",
                slender.join(", ")
            ),
        ));
    }
    let analysis = &record.model.analysis;
    if !first_order.is_empty() && analysis.order == "first" && analysis.imperfections == "none" {
        out.push(item(
            "first order",
            format!(
                "The analysis is of first order without imperfections; stability and second-order effects of compressed members are not shown: {}",
                first_order.join(", ")
            ),
        ));
    }
    out
}

/// Checks that are not satisfied, then those deferred that no deferral of the project covers.
fn outcomes(record: &Record) -> Vec<OpenItem> {
    let what = |check: &CheckRecord| {
        let reason = check.reason.as_ref().map(|reason| format!(": {reason}")).unwrap_or_default();
        format!("{} ({}), {}{reason}", check.id, check.title, check.on_words())
    };
    let failing = record.checks.iter().filter(|check| check.outcome == "not satisfied");
    let failing = failing.map(|check| {
        let by = match check.utilisation {
            Some(value) => format!(", utilisation {}", printed_utilisation(value)),
            None => String::new(),
        };
        item("not satisfied", format!("Not satisfied: {}{by}", what(check)))
    });
    let deferred = record
        .checks
        .iter()
        .filter(|check| check.outcome == "deferred" && !record.is_covered(check))
        .map(|check| item("deferred", format!("Deferred: {}", what(check))));
    failing.chain(deferred).collect()
}

/// Checks that accept a utilisation above 1, each once.
fn lenient(record: &Record) -> impl Iterator<Item = OpenItem> {
    by_id(&record.checks).into_iter().filter_map(|(id, all)| {
        let limit = all.first()?.limit;
        (limit > 1.0).then(|| {
            item("limit", format!("The check {id} accepts utilisations up to {}", print(limit, 6)))
        })
    })
}

/// What the narrative says is open.
fn narrative(record: &Record) -> impl Iterator<Item = OpenItem> {
    let blocks = record.narrative.iter().flat_map(|narrative| &narrative.blocks);
    blocks.filter_map(|block| match block {
        NarrativeBlockRecord::Open(text) => Some(item("open", text.clone())),
        NarrativeBlockRecord::Working(_)
        | NarrativeBlockRecord::Assumption(_)
        | NarrativeBlockRecord::Deferral(_)
        | NarrativeBlockRecord::Reference(_) => None,
    })
}

/// Members without a check of strength, of stability, of deflection; those without any are named once.
fn unchecked(record: &Record) -> Vec<OpenItem> {
    let shown = |member: &str, what: &str| {
        record
            .checks
            .iter()
            .any(|check| check.on.member.as_deref() == Some(member) && check.shows == what)
    };
    let all: Vec<&str> = record.results.members.keys().map(String::as_str).collect();
    let kinds = ["strength", "stability", "deflection"];
    let (none, some): (Vec<&str>, Vec<&str>) =
        all.iter().partition(|member| kinds.iter().all(|kind| !shown(member, kind)));
    let mut out = Vec::new();
    if !none.is_empty() {
        let lead =
            if some.is_empty() { "This package gives effects of actions only: " } else { "" };
        out.push(item(
            "members without checks",
            format!(
                "{lead}strength, stability and deflection of {} are to be checked elsewhere",
                none.join(", ")
            ),
        ));
    }
    for kind in kinds {
        let without: Vec<&str> =
            some.iter().filter(|member| !shown(member, kind)).copied().collect();
        if !without.is_empty() {
            let text = format!("No check of {kind} in this package: {}", without.join(", "));
            out.push(item("members without checks", text));
        }
    }
    out
}

/// A utilisation as printed: less a billionth, rounded up to two decimals, so that nothing above its limit
/// prints as the limit.
#[must_use]
pub fn printed_utilisation(value: f64) -> String {
    if !value.is_finite() {
        return "–".to_owned();
    }
    let hundredths = libm::ceil((value - 1e-9) * 100.0) + 0.0;
    format!("{:.2}", hundredths / 100.0).replace('-', "\u{2212}")
}
