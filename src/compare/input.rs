//! Changes of what the project file states.

use std::collections::BTreeMap;

use super::facts::items;
use super::items::{Fact, Item, ItemKind};
use super::{Count, FactChange, ItemChange, LineOf, Renamed, What};
use crate::project::Lines;
use crate::record::{Map, Record};

/// Facts shown of a thing that is new or vanished: enough to know it by.
const SHOWN: usize = 4;

/// One side's input.
pub(super) struct Input<'r> {
    /// Under the names of the new side.
    pub(super) record: &'r Record,
    pub(super) lines: Option<Lines>,
}

/// A thing with its number among those of the same name.
#[derive(Clone, Copy)]
struct Numbered<'i> {
    item: &'i Item,
    number: usize,
}

/// What is stated otherwise, in the order of the new side; what vanished stands behind its kind.
pub(super) fn changes(
    old: &Input<'_>,
    new: &Input<'_>,
    renamed: &[Renamed],
    count: &mut Count,
) -> Vec<ItemChange> {
    let (before, after) = (items(old.record), items(new.record));
    let (before, after) = (by_name(&before), by_name(&after));
    let mut out = Vec::new();
    for (key, news) in &after {
        let olds = before.get(key).map_or(&[][..], Vec::as_slice);
        out.extend(self::pair(olds, news, count));
    }
    for (key, olds) in &before {
        if !after.contains_key(key) {
            out.extend(self::pair(olds, &[], count));
        }
    }
    let mut out = matched_combinations(out);
    out.sort_by_key(|(kind, ..)| *kind);
    count.listed = out.len();
    out.into_iter().map(|(_, change)| located(change, old, new, renamed)).collect()
}

/// A pair of which one may be missing.
struct Pair<'i> {
    old: Option<Numbered<'i>>,
    new: Option<Numbered<'i>>,
}

type Found<'i> = (ItemKind, Pair<'i>);

fn by_name(items: &[Item]) -> Map<Vec<Numbered<'_>>> {
    let mut out: Map<Vec<Numbered<'_>>> = Map::new();
    for item in items {
        let all = out.entry(format!("{:?} {}", item.kind, item.name)).or_default();
        let number = all.len();
        all.push(Numbered { item, number });
    }
    out
}

/// Things of one name: first those that are the same, then the rest in order.
fn pair<'i>(olds: &[Numbered<'i>], news: &[Numbered<'i>], count: &mut Count) -> Vec<Found<'i>> {
    let mut olds = olds.to_vec();
    let mut left = Vec::new();
    for new in news {
        match olds.iter().position(|old| differences(Some(old.item), Some(new.item)).is_empty()) {
            Some(index) => {
                olds.remove(index);
                count.same += 1;
            }
            None => left.push(*new),
        }
    }
    let kind = |one: &Numbered<'_>| one.item.kind;
    let mut out = Vec::new();
    let mut olds = olds.into_iter();
    for new in left {
        out.push((kind(&new), Pair { old: olds.next(), new: Some(new) }));
    }
    out.extend(olds.map(|old| (kind(&old), Pair { old: Some(old), new: None })));
    out
}

/// A combination whose factors changed is another one by content; where purpose and title say which one
/// it was, it is shown as changed.
fn matched_combinations(found: Vec<Found<'_>>) -> Vec<Found<'_>> {
    let title = |one: &Option<Numbered<'_>>| {
        let item = one.as_ref().map(|one| one.item)?;
        let fact = item.facts.iter().find(|fact| fact.label == "title")?;
        let purpose = item.name.split(' ').next().unwrap_or_default();
        Some(format!("{purpose} {}", fact.text))
    };
    let mut out: Vec<Found<'_>> = Vec::new();
    let (combinations, others): (Vec<_>, Vec<_>) =
        found.into_iter().partition(|(kind, _)| *kind == ItemKind::Combination);
    let of_old = |pair: &Pair<'_>| if pair.new.is_none() { title(&pair.old) } else { None };
    let of_new = |pair: &Pair<'_>| if pair.old.is_none() { title(&pair.new) } else { None };
    let mut vanished: BTreeMap<String, Vec<Numbered<'_>>> = BTreeMap::new();
    let mut come: BTreeMap<String, usize> = BTreeMap::new();
    for (_, pair) in &combinations {
        if let (Some(title), Some(old)) = (of_old(pair), pair.old) {
            vanished.entry(title).or_default().push(old);
        }
        if let Some(title) = of_new(pair) {
            *come.entry(title).or_default() += 1;
        }
    }
    let partner = |title: &String| match vanished.get(title).map(Vec::as_slice) {
        Some([old]) if come.get(title) == Some(&1) => Some(*old),
        _ => None,
    };
    for (kind, pair) in combinations {
        let left = of_old(&pair).as_ref().and_then(partner);
        let right = of_new(&pair).as_ref().and_then(partner);
        match (left, right) {
            // Shown with its partner.
            (Some(_), _) => {}
            (None, Some(old)) => out.push((kind, Pair { old: Some(old), new: pair.new })),
            (None, None) => out.push((kind, pair)),
        }
    }
    out.extend(others);
    out
}

fn differences(old: Option<&Item>, new: Option<&Item>) -> Vec<FactChange> {
    let none: &[Fact] = &[];
    let (before, after) =
        (old.map_or(none, |item| &item.facts), new.map_or(none, |item| &item.facts));
    let partial =
        old.is_some() && new.is_some() && [old, new].iter().flatten().any(|item| item.is_partial());
    let find = |facts: &'_ [Fact], label: &str| facts.iter().position(|fact| fact.label == label);
    let mut out = Vec::new();
    for fact in after {
        match find(before, &fact.label).map(|index| &before[index]) {
            Some(other) if other.is_same(fact) => {}
            Some(other) => out.push(changed(other, fact)),
            None if partial => {}
            None => out.push(FactChange {
                fact: fact.label.clone(),
                old: String::new(),
                new: fact.text.clone(),
            }),
        }
    }
    for fact in before {
        if find(after, &fact.label).is_none() && !partial {
            out.push(FactChange {
                fact: fact.label.clone(),
                old: fact.text.clone(),
                new: String::new(),
            });
        }
    }
    out
}

/// Where the words do not show the difference, the values as kept do.
fn changed(old: &Fact, new: &Fact) -> FactChange {
    let (before, after) = if old.text == new.text {
        (format!("{} ({})", old.text, old.raw), format!("{} ({})", new.text, new.raw))
    } else {
        (old.text.clone(), new.text.clone())
    };
    FactChange { fact: new.label.clone(), old: before, new: after }
}

fn located(pair: Pair<'_>, old: &Input<'_>, new: &Input<'_>, renamed: &[Renamed]) -> ItemChange {
    let (before, after) = (pair.old.map(|one| one.item), pair.new.map(|one| one.item));
    let mut facts = differences(before, after);
    let what = match (before, after) {
        (None, _) => What::New,
        (_, None) => What::Vanished,
        _ => What::Changed,
    };
    if what != What::Changed {
        facts.truncate(SHOWN);
    }
    let kind = after.or(before).map_or(ItemKind::Project, |item| item.kind);
    let name = after.or(before).map(|item| item.name.clone()).unwrap_or_default();
    let line = |side: &Input<'_>, one: Option<Numbered<'_>>, name: &str| {
        let one = one?;
        // The file knows a written combination by its title only.
        let title = one.item.facts.iter().find(|fact| fact.label == "title");
        let (name, number) = match (kind, title) {
            (ItemKind::Combination, Some(title)) => (title.text.as_str(), 0),
            _ => (name, one.number),
        };
        let line = side.lines.as_ref()?.get(kind.word(), name, number)?;
        Some(LineOf { file: crate::project::text::FILE.to_owned(), line })
    };
    let old_name = before.map(|item| original(kind, &item.name, renamed)).unwrap_or_default();
    ItemChange {
        kind,
        what,
        facts,
        old_line: line(old, pair.old, &old_name),
        new_line: line(new, pair.new, &name),
        name,
    }
}

/// The name a thing has on the old side.
fn original(kind: ItemKind, name: &str, renamed: &[Renamed]) -> String {
    let old = |kind: ItemKind, name: &str| {
        let found = renamed.iter().find(|one| one.kind == kind && one.new == name);
        found.map_or_else(|| name.to_owned(), |one| one.old.clone())
    };
    match kind {
        ItemKind::Support => old(ItemKind::Node, name),
        ItemKind::Load => {
            let Some((case, rest)) = name.split_once(" on ") else { return name.to_owned() };
            let Some((on, form)) = rest.rsplit_once(", ") else { return name.to_owned() };
            let on = old(ItemKind::Member, &old(ItemKind::Node, on));
            format!("{} on {on}, {form}", old(ItemKind::Case, case))
        }
        _ => old(kind, name),
    }
}
