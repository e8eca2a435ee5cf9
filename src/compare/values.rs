//! Governing values of members and reactions.

use std::collections::BTreeSet;

use super::facts::content_name;
use super::thresholds::Apart;
use super::{Count, End, Thresholds, ValueChange, What};
use crate::model::Effect;
use crate::quantity::Kind;
use crate::record::{
    CombinationRecord, ExtremeRecord, ExtremesRecord, Map, MemberResult, Record, component_kind,
};

/// Purpose → effect → extremes.
type Governing = Map<Map<ExtremesRecord>>;

/// Where values stand: a member or one of its spans, or a node.
struct Place<'r> {
    on: &'r str,
    span: Option<usize>,
    length: f64,
}

/// The two Records with what decides.
struct Sides<'r> {
    old: &'r Record,
    new: &'r Record,
    /// What the combinations of each contain.
    contents: [BTreeSet<String>; 2],
    thresholds: &'r Thresholds,
}

impl<'r> Sides<'r> {
    fn new(old: &'r Record, new: &'r Record, thresholds: &'r Thresholds) -> Self {
        let contents =
            [old, new].map(|record| record.combinations.values().map(content_name).collect());
        Self { old, new, contents, thresholds }
    }

    /// Another combination governs. One whose factors changed, so that neither side has the other's, is
    /// the same as long as rule or title, leading action and cases are.
    fn is_other(&self, old: &ExtremeRecord, new: &ExtremeRecord) -> bool {
        let (Some(a), Some(b)) =
            (self.old.combinations.get(&old.state), self.new.combinations.get(&new.state))
        else {
            return true;
        };
        if old.loaded != new.loaded {
            return true;
        }
        let (before, after) = (content_name(a), content_name(b));
        let [olds, news] = &self.contents;
        let replaced = !news.contains(&before) && !olds.contains(&after);
        let row = |of: &CombinationRecord| {
            let cases: Vec<(String, bool)> =
                of.factors.iter().map(|(case, factor)| (case.clone(), *factor < 0.0)).collect();
            (of.rule.clone().unwrap_or_else(|| of.title.clone()), of.leading.clone(), cases)
        };
        before != after && !(replaced && row(a) == row(b))
    }
}

/// Of every member, or of each span where a member has several: its extremes are among theirs.
pub(super) fn members(
    old: &Record,
    new: &Record,
    thresholds: &Thresholds,
    count: &mut Count,
) -> Vec<ValueChange> {
    let sides = Sides::new(old, new, thresholds);
    let none = Governing::new();
    let mut out = Vec::new();
    for name in both(&old.results.members, &new.results.members) {
        let before = old.results.members.get(name).map(governing).unwrap_or_default();
        let after = new.results.members.get(name).map(governing).unwrap_or_default();
        let length = [new, old].iter().find_map(|side| Some(side.member(name)?.length));
        let length = length.unwrap_or_default();
        for index in 0..before.len().max(after.len()) {
            let several = before.len().max(after.len()) > 1;
            let place = Place { on: name, span: several.then_some(index + 1), length };
            let (a, b) = (before.get(index), after.get(index));
            out.extend(sides.compare(
                &place,
                a.unwrap_or(&&none),
                b.unwrap_or(&&none),
                count,
                kind,
            ));
        }
    }
    out
}

/// Of members with several spans, each as a whole; the counts are those of [`members`].
pub(super) fn wholes(old: &Record, new: &Record, thresholds: &Thresholds) -> Vec<ValueChange> {
    let sides = Sides::new(old, new, thresholds);
    let none = Governing::new();
    let mut out = Vec::new();
    for (name, after) in &new.results.members {
        let before = old.results.members.get(name);
        if after.spans.len() > 1 || before.is_some_and(|before| before.spans.len() > 1) {
            let length = new.member(name).map_or(0.0, |member| member.length);
            let place = Place { on: name, span: None, length };
            let before = before.map_or(&none, |before| &before.governing);
            out.extend(sides.compare(
                &place,
                before,
                &after.governing,
                &mut Count::default(),
                kind,
            ));
        }
    }
    out
}

fn kind(effect: &str) -> Kind {
    Effect::from_name(effect).map_or(Kind::Number, Effect::kind)
}

fn governing(member: &MemberResult) -> Vec<&Governing> {
    if member.spans.len() > 1 {
        member.spans.iter().map(|span| &span.governing).collect()
    } else {
        vec![&member.governing]
    }
}

/// Of every supported node.
pub(super) fn reactions(
    old: &Record,
    new: &Record,
    thresholds: &Thresholds,
    count: &mut Count,
) -> Vec<ValueChange> {
    let sides = Sides::new(old, new, thresholds);
    let (before, after) = (by_node(old), by_node(new));
    let none = Governing::new();
    let mut out = Vec::new();
    for node in both(&before, &after) {
        let place = Place { on: node, span: None, length: 0.0 };
        let (a, b) = (before.get(node).unwrap_or(&none), after.get(node).unwrap_or(&none));
        out.extend(sides.compare(&place, a, b, count, component_kind));
    }
    out
}

/// Node → purpose → component.
fn by_node(record: &Record) -> Map<Governing> {
    let mut out: Map<Governing> = Map::new();
    for (purpose, nodes) in &record.results.reactions {
        for (node, components) in nodes {
            out.entry(node.clone()).or_default().insert(purpose.clone(), components.clone());
        }
    }
    out
}

/// Names of the new side in order, then those of the old side that it has no more.
fn both<'m, T, U>(old: &'m Map<T>, new: &'m Map<U>) -> Vec<&'m String> {
    new.keys().chain(old.keys().filter(|name| !new.contains_key(*name))).collect()
}

impl Sides<'_> {
    fn compare(
        &self,
        place: &Place<'_>,
        before: &Governing,
        after: &Governing,
        count: &mut Count,
        kind: impl Fn(&str) -> Kind,
    ) -> Vec<ValueChange> {
        let none = Map::new();
        let mut out = Vec::new();
        for purpose in both(before, after) {
            let (a, b) =
                (before.get(purpose).unwrap_or(&none), after.get(purpose).unwrap_or(&none));
            for effect in both(a, b) {
                let (a, b) = (a.get(effect), b.get(effect));
                let ends = [
                    ("max", a.map(|a| &a.max), b.map(|b| &b.max)),
                    ("min", a.map(|a| &a.min), b.map(|b| &b.min)),
                ];
                for (which, a, b) in ends {
                    let change = self.change(place, a, b, kind(effect), count);
                    out.extend(change.map(|change| ValueChange {
                        purpose: purpose.clone(),
                        effect: effect.clone(),
                        which,
                        ..change
                    }));
                }
            }
        }
        out
    }

    fn change(
        &self,
        place: &Place<'_>,
        old: Option<&ExtremeRecord>,
        new: Option<&ExtremeRecord>,
        kind: Kind,
        count: &mut Count,
    ) -> Option<ValueChange> {
        let what = match (old, new) {
            (Some(old), Some(new)) => match self.thresholds.apart(kind, old.value, new.value) {
                Apart::Same => {
                    count.same += 1;
                    return None;
                }
                Apart::Below => {
                    count.below += 1;
                    return None;
                }
                Apart::Listed => What::Changed,
            },
            (None, _) => What::New,
            (_, None) => What::Vanished,
        };
        // An effect that is nothing everywhere is no news of a new or vanished member.
        let size = old.or(new).map_or(0.0, |one| one.value.abs());
        if what != What::Changed && size <= 0.0 {
            count.same += 1;
            return None;
        }
        count.listed += 1;
        let end = |record: &Record, extreme: &ExtremeRecord| End {
            value: extreme.value,
            x: extreme.x,
            state: record.combinations.get(&extreme.state).map(content_name).unwrap_or_default(),
            number: record.in_short(&extreme.state, &extreme.loaded),
        };
        let relative = match (old, new) {
            (Some(old), Some(new)) if old.value.abs() > 0.0 && old.value * new.value >= 0.0 => {
                Some(new.value.abs() / old.value.abs() - 1.0)
            }
            _ => None,
        };
        let both = what == What::Changed;
        let moved = match (old.and_then(|old| old.x), new.and_then(|new| new.x)) {
            (Some(a), Some(b)) => (a - b).abs() > self.thresholds.position * place.length,
            _ => false,
        };
        Some(ValueChange {
            on: place.on.to_owned(),
            span: place.span,
            purpose: String::new(),
            effect: String::new(),
            which: "",
            kind: kind.name(),
            what,
            relative,
            other_combination: old.zip(new).is_some_and(|(old, new)| self.is_other(old, new)),
            moved: both && moved,
            old: old.map(|extreme| end(self.old, extreme)),
            new: new.map(|extreme| end(self.new, extreme)),
        })
    }
}
