//! Things that have another name on the new side and are otherwise the same.
//!
//! Nodes are recognised by where they are, members by their nodes, structures by their nodes and members,
//! load cases by their loads, sections and materials by their properties; only where exactly one vanished
//! and one new thing fit together, so that both ways of comparing recognise the same.

use std::collections::BTreeSet;

use serde_json::Value;

use super::Renamed;
use super::facts::items;
use super::items::{Item, ItemKind};
use super::translate::translated;
use crate::record::{Record, StructureRecord};

/// Places that differ by less, as a share of the larger coordinate, are the same.
const SAME_PLACE: f64 = 1e-9;

/// Everything recognised under another name.
pub(super) fn recognised(old: &Record, new: &Record) -> Vec<Renamed> {
    let mut found = structures(old, new);
    // Each step sees what the steps before recognised.
    found.extend(nodes(&translated(old, &found), new));
    found.extend(members(&translated(old, &found), new));
    for (kind, by) in [
        (ItemKind::Section, "its properties"),
        (ItemKind::Material, "its properties"),
        (ItemKind::Case, "its loads"),
    ] {
        found.extend(by_content(&translated(old, &found), new, kind, by));
    }
    found
}

/// Pairs of a vanished and a new name that fit each other and nothing else.
fn pairs(
    old: &[&String],
    new: &[&String],
    fits: impl Fn(&str, &str) -> bool,
) -> Vec<(String, String)> {
    let vanished: Vec<_> = old.iter().filter(|name| !new.contains(name)).collect();
    let come: Vec<_> = new.iter().filter(|name| !old.contains(name)).collect();
    let mut out = Vec::new();
    for before in &vanished {
        let mut fitting = come.iter().filter(|after| fits(before, after));
        let (Some(after), None) = (fitting.next(), fitting.next()) else { continue };
        if vanished.iter().filter(|other| fits(other, after)).count() == 1 {
            out.push(((**before).clone(), (**after).clone()));
        }
    }
    out
}

fn renamed(kind: ItemKind, by: &str, pairs: Vec<(String, String)>) -> Vec<Renamed> {
    let one = |(old, new)| Renamed { kind, old, new, by: by.to_owned() };
    pairs.into_iter().map(one).collect()
}

fn structures(old: &Record, new: &Record) -> Vec<Renamed> {
    let (before, after) = (&old.model.structures, &new.model.structures);
    let names = |structure: &StructureRecord| -> BTreeSet<String> {
        structure.nodes.keys().chain(structure.members.keys()).cloned().collect()
    };
    let fits = |a: &str, b: &str| names(&before[a]) == names(&after[b]);
    let old: Vec<&String> = before.keys().collect();
    let new: Vec<&String> = after.keys().collect();
    renamed(ItemKind::Structure, "its nodes and members", pairs(&old, &new, fits))
}

fn nodes(old: &Record, new: &Record) -> Vec<Renamed> {
    let mut out = Vec::new();
    for (name, before) in &old.model.structures {
        let Some(after) = new.model.structures.get(name) else { continue };
        let fits = |a: &str, b: &str| same_place(&before.nodes[a].at, &after.nodes[b].at);
        let old: Vec<&String> = before.nodes.keys().collect();
        let new: Vec<&String> = after.nodes.keys().collect();
        out.extend(renamed(ItemKind::Node, "its place", pairs(&old, &new, fits)));
    }
    out
}

fn same_place(a: &[f64; 3], b: &[f64; 3]) -> bool {
    let scale = a.iter().chain(b).fold(0.0_f64, |largest, part| largest.max(part.abs()));
    a.iter().zip(b).all(|(a, b)| (a - b).abs() <= SAME_PLACE * scale)
}

fn members(old: &Record, new: &Record) -> Vec<Renamed> {
    let mut out = Vec::new();
    for (name, before) in &old.model.structures {
        let Some(after) = new.model.structures.get(name) else { continue };
        let ends = |along: &[String]| (along.first().cloned(), along.last().cloned());
        let fits =
            |a: &str, b: &str| ends(&before.members[a].along) == ends(&after.members[b].along);
        let old: Vec<&String> = before.members.keys().collect();
        let new: Vec<&String> = after.members.keys().collect();
        out.extend(renamed(ItemKind::Member, "its nodes", pairs(&old, &new, fits)));
    }
    out
}

/// What says the same under another name; of load cases their loads too.
fn by_content(old: &Record, new: &Record, kind: ItemKind, by: &str) -> Vec<Renamed> {
    let (before, after) = (contents(old, kind), contents(new, kind));
    let of = |contents: &[(String, Value)], name: &str| {
        contents.iter().find(|(own, _)| own == name).map(|(_, content)| content.clone())
    };
    let fits = |a: &str, b: &str| of(&before, a) == of(&after, b);
    let old: Vec<&String> = before.iter().map(|(name, _)| name).collect();
    let new: Vec<&String> = after.iter().map(|(name, _)| name).collect();
    renamed(kind, by, pairs(&old, &new, fits))
}

fn contents(record: &Record, kind: ItemKind) -> Vec<(String, Value)> {
    let all = items(record);
    let content = |item: &Item| {
        let mut parts: Vec<Value> = vec![stated(item)];
        if kind == ItemKind::Case {
            let own = format!("{} on ", item.name);
            let loads = all.iter().filter(|load| load.kind == ItemKind::Load);
            parts.extend(loads.filter_map(|load| {
                let rest = load.name.strip_prefix(&own)?;
                Some(Value::from(vec![Value::from(rest), stated(load)]))
            }));
        }
        (item.name.clone(), Value::from(parts))
    };
    all.iter().filter(|item| item.kind == kind).map(content).collect()
}

/// The facts of a thing apart from its title: a renamed case often gets another.
fn stated(item: &Item) -> Value {
    let facts = item.facts.iter().filter(|fact| fact.label != "title");
    facts
        .map(|fact| Value::from(vec![Value::from(fact.label.as_str()), fact.raw.clone()]))
        .collect()
}
