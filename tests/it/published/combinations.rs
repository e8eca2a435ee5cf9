//! Worked lists of combinations (`data/combinations`, EN 1990 and ASCE/SEI 7, derived by two scripts and in
//! part by hand): every rule expands to exactly the listed rows, through the project file.

use std::fmt::Write;

use serde::Deserialize;
use spanfolio::record::Record;

use crate::support::solved;

#[derive(Deserialize)]
struct Set {
    title: String,
    actions: Vec<Action>,
    lists: Vec<List>,
}

#[derive(Deserialize)]
struct Action {
    id: String,
    kind: String,
    category: Option<String>,
    exclusive: Option<String>,
    source: Option<String>,
}

#[derive(Deserialize)]
struct List {
    id: String,
    rule: String,
    expansion: String,
    count: usize,
    columns: Vec<String>,
    rows: Vec<Vec<f64>>,
}

/// A name that a load case can have: `W+` cannot.
fn case(id: &str) -> String {
    id.replace('+', "p").replace('-', "m")
}

/// The words of the project file for an action's kind and category.
fn nature(action: &Action) -> String {
    let category = action.category.as_deref().unwrap_or_default();
    let imposed = |letter: &str| format!("nature: imposed, category: {letter}");
    match (action.kind.as_str(), category) {
        ("permanent" | "D", _) => "nature: permanent".to_owned(),
        ("variable", "wind") | ("W", _) => "nature: wind".to_owned(),
        ("variable", "snow_below_1000m") => "nature: snow, category: below 1000 m".to_owned(),
        ("variable", "snow_above_1000m") => "nature: snow, category: above 1000 m".to_owned(),
        ("variable", category) => imposed(&category[..1]),
        ("accidental", _) => "nature: accidental".to_owned(),
        ("seismic" | "Eh", _) => "nature: seismic horizontal".to_owned(),
        ("Ev", _) => "nature: seismic vertical".to_owned(),
        ("L", _) => "nature: live".to_owned(),
        ("Lr", _) => "nature: roof live".to_owned(),
        ("S", _) => "nature: snow".to_owned(),
        (other, _) => panic!("no nature for {other}"),
    }
}

/// The rule of the project file for a list.
fn rule(list: &List) -> String {
    let uk = if list.rule.contains("UK") { ", annex: UK" } else { "" };
    let half = if list.rule.contains("Exception 1") { ", with: {f_L: 0.5}" } else { "" };
    let id = match list.rule.split([',', ';']).next().unwrap_or_default() {
        "EN 1990 6.10" => "EN 1990 6.10",
        "EN 1990 6.10a" => "EN 1990 6.10a",
        "EN 1990 6.10b" => "EN 1990 6.10b",
        "EN 1990 6.14b characteristic" => "EN 1990 characteristic",
        "EN 1990 6.15b frequent" => "EN 1990 frequent",
        "EN 1990 6.16b quasi-permanent" => "EN 1990 quasi-permanent",
        "EN 1990 6.12b seismic" => "EN 1990 seismic",
        "EN 1990 6.11b accidental" if list.rule.ends_with("psi1") => "EN 1990 accidental",
        "EN 1990 6.11b accidental" => "EN 1990 accidental psi2",
        rule if rule.starts_with("EN 1990 6.10 with set A") => "EN 1990 EQU",
        rule if rule.starts_with("EN 1990 6.10 with set C") => "EN 1990 6.10 set C",
        rule if rule.starts_with("ASCE/SEI 7-22 2.3.1") => "ASCE 7-22 strength",
        "ASCE/SEI 7-22 2.3.6" => "ASCE 7-22 strength seismic",
        "ASCE/SEI 7-22 2.4.1" => "ASCE 7-22 allowable",
        "ASCE/SEI 7-22 2.4.5" => "ASCE 7-22 allowable seismic",
        rule if rule.starts_with("ASCE/SEI 7-16 2.3.1") => "ASCE 7-16 strength",
        "ASCE/SEI 7-16 2.3.6" => "ASCE 7-16 strength seismic",
        "ASCE/SEI 7-16 2.4.1" => "ASCE 7-16 allowable",
        "ASCE/SEI 7-16 2.4.5" => "ASCE 7-16 allowable seismic",
        other => panic!("no rule for {other}"),
    };
    let expansion = list.expansion.replace('-', " ");
    format!("{{rule: {id}, expansion: {expansion}{uk}{half}}}")
}

fn record(set: &Set, list: &List) -> Record {
    let mut yaml = String::from(
        "format: 1
project: {title: Beam, number: 1, revisions: [{mark: A, date: 2026-01-01, status: test}]}
materials: {steel: {grade: S275}}
sections: {beam: {catalogue: IPE 240}}
frame: plane
nodes: {A: [0 m, 0 m], B: [5 m, 0 m]}
members: {B1: {along: [A, B], section: beam, material: steel}}
supports: {A: pinned, B: {Z: fixed}}
load_cases:
",
    );
    for action in &set.actions {
        let one_of =
            action.exclusive.as_ref().map(|name| format!(", one_of: {name}")).unwrap_or_default();
        let source = action
            .source
            .as_ref()
            .map(|name| format!(", source_group: {name}"))
            .unwrap_or_default();
        let _ = writeln!(
            yaml,
            "  {}: {{title: {}, {}{one_of}{source}, loads: [{{member: B1, uniform: 1 kN/m}}]}}",
            case(&action.id),
            case(&action.id),
            nature(action)
        );
    }
    let _ = writeln!(yaml, "combinations: {{rules: [{}]}}", rule(list));
    solved(&yaml)
}

/// Rows in an order that does not depend on how they were made.
fn sorted(mut rows: Vec<Vec<f64>>) -> Vec<Vec<f64>> {
    let key = |row: &Vec<f64>| -> Vec<String> { row.iter().map(|f| format!("{f:.6}")).collect() };
    rows.sort_by_key(key);
    rows
}

fn check(data: &str, lists: usize) {
    let set: Set = serde_yaml::from_str(data).expect("the lists read");
    assert_eq!(set.lists.len(), lists);
    for list in &set.lists {
        let record = record(&set, list);
        let found: Vec<Vec<f64>> = record
            .combinations
            .values()
            .map(|combination| {
                let factor =
                    |id: &String| combination.factors.get(&case(id)).copied().unwrap_or(0.0);
                list.columns.iter().map(factor).collect()
            })
            .collect();
        assert_eq!(list.rows.len(), list.count, "{}", list.id);
        let (found, listed) = (sorted(found), sorted(list.rows.clone()));
        let same = found.len() == listed.len()
            && found
                .iter()
                .flatten()
                .zip(listed.iter().flatten())
                .all(|(a, b)| (a - b).abs() <= 1e-6);
        assert!(same, "{} ({}): listed\n{listed:?}\nmade\n{found:?}", list.id, set.title);
        for combination in record.combinations.values() {
            assert!(combination.rule.is_some() && combination.clause.is_some(), "{}", list.id);
        }
    }
}

#[test]
fn office_snow_and_wind() {
    check(include_str!("data/combinations/s1-office-snow-wind.yaml"), 13);
}

#[test]
fn domestic_and_wind() {
    check(include_str!("data/combinations/s2-domestic-wind.yaml"), 7);
}

#[test]
fn two_sources_of_weight_storage_and_snow() {
    check(include_str!("data/combinations/s3-two-permanents-storage-snow.yaml"), 5);
}

#[test]
fn accidental_and_seismic() {
    check(include_str!("data/combinations/s4-accidental-seismic.yaml"), 4);
}

#[test]
fn us_gravity_and_wind() {
    check(include_str!("data/combinations/s5-us-gravity-wind.yaml"), 6);
}

#[test]
fn us_seismic() {
    check(include_str!("data/combinations/s6-us-seismic.yaml"), 4);
}
