//! Outcomes of checks, and open items.

use super::facts::content_name;
use super::thresholds::Apart;
use super::{CheckChange, Count, OutcomeEnd, Thresholds, What};
use crate::record::{CheckRecord, Record};

/// Outcomes that moved, worst first, then utilisations that moved, worst first.
pub(super) fn changes(
    old: &Record,
    new: &Record,
    thresholds: &Thresholds,
    count: &mut Count,
) -> Vec<CheckChange> {
    let same = |a: &CheckRecord, b: &CheckRecord| a.id == b.id && a.on == b.on && a.kind == b.kind;
    let mut out = Vec::new();
    for after in &new.checks {
        let before = old.checks.iter().find(|before| same(before, after));
        out.extend(change(before.map(|check| (old, check)), Some((new, after)), thresholds, count));
    }
    for before in &old.checks {
        if !new.checks.iter().any(|after| same(before, after)) {
            out.extend(change(Some((old, before)), None, thresholds, count));
        }
    }
    out.sort_by(|a, b| rank(a).partial_cmp(&rank(b)).unwrap_or(std::cmp::Ordering::Equal));
    out
}

/// Worse ones first, then flips, then what vanished, then by utilisation; greatest first.
fn rank(change: &CheckChange) -> (u8, f64) {
    let group = match change {
        CheckChange { worse: true, .. } => 0,
        CheckChange { flipped: true, .. } => 1,
        CheckChange { what: What::Vanished, .. } => 2,
        CheckChange { what: What::New, .. } => 3,
        _ => 4,
    };
    let end = change.new.as_ref().or(change.old.as_ref());
    (group, -end.and_then(|end| end.utilisation).unwrap_or(f64::MAX))
}

type Of<'r> = (&'r Record, &'r CheckRecord);

fn change(
    old: Option<Of<'_>>,
    new: Option<Of<'_>>,
    thresholds: &Thresholds,
    count: &mut Count,
) -> Option<CheckChange> {
    let (before, after) = (old.map(end), new.map(end));
    let (_, check) = new.or(old)?;
    let what = match (&before, &after) {
        (None, _) => What::New,
        (_, None) => What::Vanished,
        _ => What::Changed,
    };
    let flipped =
        what == What::Changed && before.as_ref().map(severity) != after.as_ref().map(severity);
    if what == What::Changed && !flipped {
        let utilisations =
            [&before, &after].map(|end| end.as_ref().and_then(|end| end.utilisation));
        let apart = match utilisations {
            [Some(a), Some(b)] => thresholds.utilisations_apart(a, b),
            [None, None] => Apart::Same,
            _ => Apart::Listed,
        };
        match apart {
            Apart::Same => {
                count.same += 1;
                return None;
            }
            Apart::Below => {
                count.below += 1;
                return None;
            }
            Apart::Listed => {}
        }
    }
    count.listed += 1;
    let of = |end: &Option<OutcomeEnd>| end.as_ref().map_or(0, severity);
    Some(CheckChange {
        id: check.id.clone(),
        kind: check.kind.clone(),
        on: check.on.clone(),
        on_words: check.on_words(),
        title: check.title.clone(),
        what,
        flipped,
        // A new check that is satisfied, or deferred openly, makes nothing worse.
        worse: match what {
            What::New => of(&after) > DEFERRED,
            What::Changed => of(&after) > of(&before),
            What::Vanished => false,
        },
        old: before,
        new: after,
    })
}

/// The rank of a deferral that the project names.
const DEFERRED: u8 = 1;

/// Greater is worse.
fn severity(end: &OutcomeEnd) -> u8 {
    match (end.outcome.as_str(), end.covered) {
        ("satisfied", _) => 0,
        ("deferred", true) => DEFERRED,
        ("deferred", false) => 2,
        _ => 3,
    }
}

fn end((record, check): Of<'_>) -> OutcomeEnd {
    let combination = check.state.as_ref().and_then(|state| record.combinations.get(state));
    let short = check.state.as_ref().map(|state| record.in_short(state, &check.loaded));
    OutcomeEnd {
        outcome: check.outcome.clone(),
        covered: record.is_covered(check),
        reason: check.reason.clone(),
        utilisation: check.utilisation,
        limit: check.limit,
        state: combination.map(content_name),
        number: short.filter(|short| !short.is_empty()),
        x: check.x,
    }
}

/// Open items that came and went; those of which only a number is another one stay.
pub(super) fn open_items(old: &Record, new: &Record) -> (Vec<String>, Vec<String>) {
    let missing = |from: &Record, other: &Record| -> Vec<String> {
        let others: Vec<String> =
            other.registers.open_items.iter().map(|item| without_numbers(&item.text)).collect();
        let texts = from.registers.open_items.iter().map(|item| &item.text);
        texts.filter(|text| !others.contains(&without_numbers(text))).cloned().collect()
    };
    (missing(new, old), missing(old, new))
}

/// The words of a sentence that are not values nor numbers of combinations with their loaded spans.
fn without_numbers(text: &str) -> String {
    let mut inside = false;
    let mut kept = Vec::new();
    for word in text.split_whitespace() {
        inside |= word.starts_with('[');
        let bare = word.trim_end_matches(['.', ',', ':', ';']).trim_start_matches('\u{2212}');
        let number = bare.strip_prefix('C').unwrap_or(bare);
        if !inside && number.parse::<f64>().is_err() {
            kept.push(word);
        }
        inside &= !word.trim_end_matches(['.', ',', ':', ';']).ends_with(']');
    }
    kept.join(" ")
}
