//! A comparison sees every change, reads the same both ways, and lists only what passes its thresholds.

use proptest::prelude::*;
use serde_json::Value;
use spanfolio::compare::{Changes, ItemKind, Side, Thresholds, What, compare};
use spanfolio::record::Record;

use crate::support::{solved, solved_demo};

/// What random edits change.
#[derive(Clone, Debug)]
struct Beam {
    span: f64,
    section: &'static str,
    load: f64,
    factor: f64,
    node: &'static str,
    member: &'static str,
    limit: f64,
    overhang: bool,
}

const BEAM: Beam = Beam {
    span: 6.0,
    section: "IPE 240",
    load: 4.0,
    factor: 1.5,
    node: "B",
    member: "B1",
    limit: 60.0,
    overhang: false,
};

impl Beam {
    fn record(&self) -> Record {
        let Self { span, section, load, factor, node, member, limit, overhang } = self;
        let far = span + 2.0;
        let (more, along) = if *overhang {
            (format!(", D: [{far} m, 0 m]"), format!("A, {node}, D"))
        } else {
            (String::new(), format!("A, {node}"))
        };
        solved(&format!(
            "format: 1
project: {{title: Beam, number: 1, revisions: [{{mark: A, date: 2026-01-01, status: test}}]}}
materials: {{steel: {{grade: S275}}}}
sections: {{beam: {{catalogue: {section}}}}}
frame: plane
nodes: {{A: [0 m, 0 m], {node}: [{span} m, 0 m]{more}}}
members: {{{member}: {{along: [{along}], section: beam, material: steel}}}}
supports: {{A: pinned, {node}: {{Z: fixed}}}}
load_cases:
  G: {{title: G, nature: permanent, self_weight: true}}
  Q: {{title: Q, nature: imposed, loads: [{{member: {member}, uniform: {load} kN/m}}]}}
combinations: {{written: [{{title: all, purpose: strength, factors: {{G: 1.35, Q: {factor}}}}}]}}
checks:
  - {{id: moment, title: t, reference: r, members: all, purpose: strength, demand: abs(M_y), capacity: {limit} kN m}}
"
        ))
    }
}

fn changes(old: &Record, new: &Record) -> Changes {
    let side = |label, record| Side { label, record, sources: None };
    compare(&side("old", old), &side("new", new), &Thresholds::default())
}

fn beams() -> impl Strategy<Value = Beam> {
    (
        prop::sample::select(vec![5.0, 6.0, 6.000_001]),
        prop::sample::select(vec!["IPE 240", "IPE 270"]),
        prop::sample::select(vec![4.0, 4.002, 7.5]),
        prop::sample::select(vec![1.5, 1.4]),
        prop::sample::select(vec!["B", "K"]),
        prop::sample::select(vec!["B1", "main beam"]),
        prop::sample::select(vec![20.0, 60.0]),
        any::<bool>(),
    )
        .prop_map(|(span, section, load, factor, node, member, limit, overhang)| Beam {
            span,
            section,
            load,
            factor,
            node,
            member,
            limit,
            overhang,
        })
}

const fn mirrored(what: What) -> What {
    match what {
        What::New => What::Vanished,
        What::Vanished => What::New,
        What::Changed => What::Changed,
    }
}

/// What is listed, in a form in which both ways of comparing say the same.
fn listed(changes: &Changes, mirror: bool) -> Vec<String> {
    let what = |what: What| if mirror { mirrored(what) } else { what };
    // The new names of one way are the old ones of the other.
    let name = |kind: ItemKind, name: &str| {
        let one = changes.renamed.iter().find(|one| one.kind == kind && one.new == name);
        match one {
            Some(one) if mirror => one.old.clone(),
            _ => name.to_owned(),
        }
    };
    let mut out = Vec::new();
    for item in &changes.input {
        let facts: Vec<String> = item
            .facts
            .iter()
            .map(|fact| {
                let (a, b) = if mirror { (&fact.new, &fact.old) } else { (&fact.old, &fact.new) };
                format!("{}: {a} > {b}", fact.fact)
            })
            .collect();
        // Facts of renamed things name each other by the names of the new side.
        let facts = if changes.renamed.is_empty() { facts } else { Vec::new() };
        let kind = item.kind.word();
        // A combination is named by its content on the new side.
        let by_name = changes.renamed.is_empty() && item.kind != ItemKind::Combination;
        let named = by_name.then(|| name(item.kind, &item.name));
        out.push(format!("{kind} {named:?} {:?} {facts:?}", what(item.what)));
    }
    for value in changes.values.iter().chain(&changes.reactions) {
        let ends = [&value.old, &value.new].map(|end| end.as_ref().map(|end| (end.value, end.x)));
        let ends = if mirror { [ends[1], ends[0]] } else { ends };
        let on = name(ItemKind::Member, &name(ItemKind::Node, &value.on));
        out.push(format!(
            "{on} {:?} {} {} {} {:?} {ends:?} {} {}",
            value.span,
            value.purpose,
            value.effect,
            value.which,
            what(value.what),
            value.other_combination,
            value.moved
        ));
    }
    for check in &changes.checks {
        let ends = [&check.old, &check.new]
            .map(|end| end.as_ref().map(|end| (&end.outcome, end.utilisation)));
        let ends = if mirror { [ends[1], ends[0]] } else { ends };
        out.push(format!("{} {:?} {ends:?} {}", check.id, what(check.what), check.flipped));
    }
    out.sort();
    out
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 60, ..ProptestConfig::default() })]

    #[test]
    fn both_ways_mirror_each_other(a in beams(), b in beams()) {
        let (a, b) = (a.record(), b.record());
        let (there, back) = (changes(&a, &b), changes(&b, &a));
        prop_assert_eq!(listed(&there, false), listed(&back, true));
        prop_assert_eq!(there.counts, back.counts);
        prop_assert_eq!(&there.opened, &back.closed);
        let renamed = |changes: &Changes, mirror: bool| -> Vec<(String, String)> {
            let pair = |one: &spanfolio::compare::Renamed| match mirror {
                true => (one.new.clone(), one.old.clone()),
                false => (one.old.clone(), one.new.clone()),
            };
            changes.renamed.iter().map(pair).collect()
        };
        prop_assert_eq!(renamed(&there, false), renamed(&back, true));
    }

    #[test]
    fn a_project_against_itself_is_no_change(beam in beams()) {
        let record = beam.record();
        let found = changes(&record, &record);
        prop_assert!(found.is_empty());
        prop_assert!(listed(&found, false).is_empty());
        prop_assert!(found.counts.items.same > 10 && found.counts.values.same > 10);
    }
}

/// Leaves of the resolved input that follow from others and need no row of their own.
fn follows(path: &str) -> bool {
    // A case's resultant follows from its loads; stations, places of hinges and spans from the nodes;
    // the order of solving from the loads handed on; parts of a case from its spans.
    let consequences =
        ["/resultant/", "/stations/", "/from", "/to", "/x", "/solve_order/", "/parts/", "/sets/"];
    // Self-weight and what a reaction comes to follow from sections and from the other structure.
    path.starts_with("/model/structures/") && consequences.iter().any(|part| path.contains(part))
        || path.contains("/resultant/")
        || path.contains("/solve_order/")
        || path.contains("/by_span/")
}

fn leaves(value: &Value, path: &str, out: &mut Vec<String>) {
    match value {
        Value::Object(map) => {
            for (key, value) in map {
                leaves(
                    value,
                    &format!("{path}/{}", key.replace('~', "~0").replace('/', "~1")),
                    out,
                );
            }
        }
        Value::Array(list) => {
            for (index, value) in list.iter().enumerate() {
                leaves(value, &format!("{path}/{index}"), out);
            }
        }
        Value::Null => {}
        _ => out.push(path.to_owned()),
    }
}

/// Every leaf of project, basis and model of a demo, changed one at a time.
#[test]
fn every_change_of_the_input_is_seen() {
    let record = solved_demo("workshop-portal");
    let json: Value = serde_json::from_str(&record.to_json()).expect("a record is JSON");
    let mut paths = Vec::new();
    for part in ["project", "basis", "model"] {
        leaves(&json[part], &format!("/{part}"), &mut paths);
    }
    let mut unseen = Vec::new();
    let mut tried = 0;
    for path in paths.iter().filter(|path| !follows(path)) {
        let mut other = json.clone();
        let leaf = other.pointer_mut(path).expect("a leaf of the record");
        *leaf = match &*leaf {
            Value::Number(number) => match number.as_u64() {
                Some(whole) => Value::from(whole + 1),
                None => Value::from(number.as_f64().expect("a number") * 1.01 + 0.013),
            },
            Value::Bool(flag) => Value::from(!flag),
            Value::String(text) => Value::from(format!("{text} x")),
            _ => continue,
        };
        // Words that only some texts may be: the record does not read with another.
        let Ok(changed) = Record::from_json(&other.to_string()) else { continue };
        tried += 1;
        let found = changes(&record, &changed);
        if found.input.is_empty() && found.renamed.is_empty() {
            unseen.push(path.clone());
        }
    }
    assert!(tried > 400, "only {tried} leaves");
    let self_weight = |path: &String| {
        path.contains("/loads/") && !path.ends_with("/source") // loads of self-weight
            && record.model.cases.iter().any(|(name, case)| {
                let own = format!("/model/cases/{name}/loads/");
                path.strip_prefix(&own).and_then(|rest| rest.split('/').next()).is_some_and(|index| {
                    let index: usize = index.parse().expect("an index");
                    case.loads[index].form == "self_weight"
                })
            })
    };
    unseen.retain(|path| !self_weight(path));
    assert!(unseen.is_empty(), "not seen: {unseen:#?}");
}

#[test]
fn a_renamed_node_is_recognised_by_its_place_and_changes_nothing_else() {
    let found = changes(&BEAM.record(), &Beam { node: "K", ..BEAM }.record());
    assert_eq!(found.renamed.len(), 1);
    assert_eq!((found.renamed[0].old.as_str(), found.renamed[0].new.as_str()), ("B", "K"));
    assert!(found.input.is_empty(), "{:#?}", found.input);
    assert!(found.values.is_empty() && found.reactions.is_empty() && found.checks.is_empty());
}

#[test]
fn a_renamed_member_is_recognised_by_its_nodes() {
    let found = changes(&BEAM.record(), &Beam { member: "main beam", ..BEAM }.record());
    assert_eq!(found.renamed.len(), 1);
    assert_eq!(found.renamed[0].kind, ItemKind::Member);
    assert!(found.values.is_empty() && found.checks.is_empty());
}

/// 0.05 % of load is below 0.1 %: counted in values, listed in the input.
#[test]
fn a_change_below_the_threshold_is_counted_not_listed() {
    let found = changes(&BEAM.record(), &Beam { load: 4.002, ..BEAM }.record());
    assert_eq!(found.input.len(), 1);
    assert!(found.values.is_empty() && found.reactions.is_empty());
    assert!(found.counts.values.below >= 6, "{:?}", found.counts);
    assert!(!found.is_empty());
}

/// M = (1.35 g + 1.5 q) L²/8: 46 kN m and 75 kN m against a capacity of 60 kN m.
#[test]
fn a_check_that_fails_now_is_worse_and_stands_first() {
    let found = changes(&BEAM.record(), &Beam { load: 10.0, ..BEAM }.record());
    assert!(found.is_worse());
    let first = &found.checks[0];
    assert!(first.worse && first.flipped);
    let outcomes =
        [&first.old, &first.new].map(|end| end.as_ref().expect("an end").outcome.clone());
    assert_eq!(outcomes, ["satisfied", "not satisfied"]);
    let back = changes(&Beam { load: 10.0, ..BEAM }.record(), &BEAM.record());
    assert!(!back.is_worse());
}

#[test]
fn a_combination_with_another_factor_is_shown_as_changed_and_still_governs() {
    let found = changes(&BEAM.record(), &Beam { factor: 1.4, ..BEAM }.record());
    assert_eq!(found.input.len(), 1);
    assert_eq!(found.input[0].facts[0].new, "1.35 G + 1.4 Q");
    assert!(!found.values.is_empty());
    assert!(found.values.iter().all(|value| !value.other_combination));
}

#[test]
fn combinations_are_matched_by_content_not_by_number() {
    let two = |first: &str, second: &str| {
        solved(&format!(
            "format: 1
project: {{title: Beam, number: 1, revisions: [{{mark: A, date: 2026-01-01, status: test}}]}}
materials: {{steel: {{grade: S275}}}}
sections: {{beam: {{catalogue: IPE 240}}}}
frame: plane
nodes: {{A: [0 m, 0 m], B: [6 m, 0 m]}}
members: {{B1: {{along: [A, B], section: beam, material: steel}}}}
supports: {{A: pinned, B: {{Z: fixed}}}}
load_cases:
  G: {{title: G, nature: permanent, self_weight: true}}
  Q: {{title: Q, nature: imposed, loads: [{{member: B1, uniform: 4 kN/m}}]}}
combinations: {{written: [{first}, {second}]}}
"
        ))
    };
    let one = "{title: one, purpose: strength, factors: {G: 1.35, Q: 1.5}}";
    let other = "{title: other, purpose: strength, factors: {G: 1.0, Q: 1.5}}";
    let found = changes(&two(one, other), &two(other, one));
    assert!(found.is_empty(), "{:#?}", found.input);
}
