//! What a project file may hold, and what is said about one that does not.

use std::fmt::Write;

use spanfolio::diagnostic::Diagnostic;
use spanfolio::project::{self, written};

use crate::support::sources;

/// A small project that is right in every block; invented.
pub(super) const GOOD: &str = r#"format: 1
project:
  title: Heron Weir footbridge, trial beam
  number: HW-01
  revisions:
    - {mark: A, date: 2026-05-04, status: for checking, originated: ""}
basis:
  national_annex: no
  standards:
    - {id: EC0, title: EN 1990, edition: 2002}
  assumptions:
    - {id: A1, text: The bank seats do not settle., status: to confirm, by: site engineer}
units: {system: SI, moment: kN m}
precision: {significant: 4}
shear_deformation: false
package: {draw: [B1], paper: A4}
values:
  deck: {value: 1.2 kN/m2, source: Drawing HW-03}
build_ups:
  planks:
    - {layer: Larch planks, load: 0.30 kN/m2}
materials:
  larch: {grade: C24, service_class: 3}
  iron: {E: 170 GPa, G: 66 GPa, density: 7200 kg/m3, expansion: 1e-5 /K}
sections:
  plank: {shape: rectangle, width: 100 mm, depth: 250 mm}
  rod: {given: {A: 10 cm2, I_y: 80 cm4, I_z: 60 cm4, I_t: 90 cm4}}
  joist: {catalogue: IPE 200}
frame: plane
nodes:
  W: [0 m, 0 m]
  M: [4 m, 0 m]
  E: [7 m, 0 m]
members:
  B1:
    along: [W, M, E]
    section: plank
    material: larch
    hinges: {M: {M_y: free}}
    held: {top: continuous, bottom: [M]}
supports:
  W: fixed
  M: {Z: 4 MN/m, uplift: anchored}
  E: {Z: fixed, turned: 10°}
load_cases:
  G:
    title: Self-weight and planks
    nature: permanent
    self_weight: [B1]
    loads:
      - {member: B1, build_up: planks, width: 1.5 m}
  Q:
    title: Crowd
    nature: live
    loads:
      - {member: B1, area: deck, width: 1.5 m}
      - {members: [B1], span: 2, point: 2.50 kN, at: 1 m}
      - {node: E, moment: {Y: 3 kN m}}
      - {member: B1, warming: {top: 8 K, bottom: 2 K}}
combinations:
  written:
    - {title: "6.10", purpose: strength, factors: {G: 1.35, Q: 1.50}, source: EN 1990}
"#;

/// One mistake each: what it is, the text taken out of [`GOOD`] and the text put in.
pub(super) const SHAPE_ERRORS: [(&str, &str, &str); 38] = [
    ("unknown key with a near one", "uplift: anchored", "uplfit: anchored"),
    ("unknown key without a near one", "paper: A4", "perfume: A4"),
    ("unknown block", "precision: {significant: 4}", "colours: {red: 4}"),
    ("key of a later version", "purpose: strength, ", "purpose: strength, priority: 2, "),
    ("checks that are no list", "precision: {significant: 4}", "checks: {}"),
    (
        "check without a reference",
        "precision: {significant: 4}",
        "checks: [{id: c, purpose: strength, members: all, title: t, demand: N, capacity: 1 kN}]",
    ),
    (
        "check with a sheet and a demand",
        "precision: {significant: 4}",
        "checks: [{id: c, purpose: strength, members: all, sheet: sway, demand: N}]",
    ),
    (
        "check of no purpose",
        "precision: {significant: 4}",
        "checks: [{id: c, members: all, sheet: sway}]",
    ),
    ("span loading that is none", "nature: live", "nature: live\n    by_span: sometimes"),
    ("rule without its name", "  written:\n", "  rules: [{purpose: strength}]\n  written:\n"),
    ("missing key", "title: Self-weight and planks", "source: a drawing"),
    ("missing key in a list", "layer: Larch planks, ", ""),
    ("missing block", "load_cases:\n", "values_: 1\nlaod_cases:\n"),
    ("no value", "number: HW-01", "number:"),
    ("null", "number: HW-01", "number: ~"),
    ("list for text", "section: plank", "section: [plank]"),
    ("text for a list", "along: [W, M, E]", "along: W M E"),
    ("text for a map", "package: {draw: [B1], paper: A4}", "package: all"),
    ("map for text", "number: HW-01", "number: {a: b}"),
    ("neither word nor list", "bottom: [M]", "bottom: {M: yes}"),
    ("not true or false", "shear_deformation: false", "shear_deformation: no"),
    ("unknown word", "purpose: strength", "purpose: strenght"),
    ("unknown nature", "nature: live", "nature: lively"),
    ("unknown support", "W: fixed", "W: clamped"),
    ("one coordinate", "E: [7 m, 0 m]", "E: [7 m]"),
    ("one node along", "along: [W, M, E]", "along: [W]"),
    ("no factors", "factors: {G: 1.35, Q: 1.50}", "factors: {}"),
    ("load that says nothing", "area: deck, width: 1.5 m", "source: Drawing 1"),
    ("load that says two things", "point: 2.50 kN", "point: 2.50 kN, uniform: 1 kN/m"),
    ("load without its member", "member: B1, area: deck", "area: deck"),
    ("load without its width", "area: deck, width: 1.5 m", "area: deck"),
    ("load with a key of another", "point: 2.50 kN", "point: 2.50 kN, per: projected"),
    ("load on a member and on members", "members: [B1], span", "members: [B1], member: B1, span"),
    ("shape without a dimension", "width: 100 mm, depth: 250 mm", "width: 100 mm"),
    ("shape with a dimension of another", "depth: 250 mm", "depth: 250 mm, web: 8 mm"),
    ("material half given", "expansion: 1e-5 /K", "f_y: 180 MPa"),
    ("support that fixes nothing", "M: {Z: 4 MN/m, uplift: anchored}", "M: {uplift: anchored}"),
    ("structures and the short form", "frame: plane", "structures: {}\nframe: plane"),
];

/// The good file with one text exchanged.
pub(super) fn edited(from: &str, to: &str) -> String {
    assert_eq!(GOOD.matches(from).count(), 1, "`{from}` once in the good file");
    GOOD.replace(from, to)
}

pub(super) fn read(yaml: &str) -> Result<written::Project, Vec<Diagnostic>> {
    project::written(&sources(yaml))
}

/// Each problem with its line, column and underlined text.
fn problems(yaml: &str) -> String {
    let mut out = String::new();
    for problem in read(yaml).expect_err("a mistake is found") {
        let range = problem.place.map_or(0..0, |place| place.range);
        let before = &yaml[..range.start];
        let line = before.matches('\n').count() + 1;
        let column = before.chars().rev().take_while(|c| *c != '\n').count() + 1;
        let _ = writeln!(out, "error[{}] {line}:{column}: {}", problem.code, problem.message);
        let _ = writeln!(out, "  `{}` {}", &yaml[range], problem.label.unwrap_or_default());
        for hint in problem.hints {
            let _ = writeln!(out, "  help: {hint}");
        }
    }
    out
}

fn table(mistakes: &[(&str, &str, &str)]) -> String {
    let rows = mistakes
        .iter()
        .map(|(name, from, to)| format!("## {name}\n{}", problems(&edited(from, to))));
    rows.collect::<Vec<_>>().join("\n")
}

#[test]
fn every_shape_error_is_found_and_placed() {
    let said = table(&SHAPE_ERRORS);
    insta::assert_snapshot!(said);
}

#[test]
fn every_yaml_error_is_found_and_placed() {
    let said = table(&[
        ("key twice", "number: HW-01", "number: HW-01\n  number: HW-02"),
        ("member twice", "supports:\n", "  B1: {}\nsupports:\n"),
        ("list not closed", "along: [W, M, E]", "along: [W, M, E"),
        ("map not closed", "precision: {significant: 4}", "precision: {significant: 4"),
        ("tab", "  number: HW-01", "\tnumber: HW-01"),
        ("second document", "frame: plane", "---\nframe: plane"),
        ("merge key", "frame: plane", "<<: {a: b}\nframe: plane"),
        ("tag", "number: HW-01", "number: !!str 7"),
        ("list for a key", "frame: plane", "[a, b]: c\nframe: plane"),
        ("unknown alias", "number: HW-01", "number: *n"),
        ("text never closed", "source: EN 1990}", "source: \"EN 1990}"),
    ]);
    insta::assert_snapshot!(said);
}

#[test]
fn all_shape_errors_come_in_one_run() {
    let yaml = GOOD
        .replace("uplift: anchored", "uplfit: anchored")
        .replace("purpose: strength", "purpose: strenght")
        .replace("section: plank\n", "sectoin: plank\n");
    let codes: Vec<&str> = read(&yaml).unwrap_err().iter().map(|found| found.code).collect();
    assert_eq!(codes, ["missing-key", "unknown-key", "unknown-key", "unknown-word"]);
}

#[test]
fn an_empty_file_says_so() {
    for yaml in ["", "\n", "# only a remark\n", "~", "---\n"] {
        assert_eq!(read(yaml).unwrap_err()[0].code, "empty-file", "{yaml:?}");
    }
}

#[test]
fn a_file_of_a_later_format_is_read_no_further() {
    let found = read("format: 2\nfresco: true\n").unwrap_err();
    assert_eq!((found.len(), found[0].code), (1, "format"));
}

#[test]
fn leaves_stay_as_written() {
    let project = read(GOOD).unwrap();
    assert_eq!(project.basis.national_annex.unwrap().as_str(), "no");
    assert_eq!(project.basis.standards[0].edition.as_str(), "2002");
    let combination = &project.combinations.written[0];
    assert_eq!(combination.title.as_str(), "6.10");
    assert_eq!(combination.factors["Q"].as_str(), "1.50");
}

#[test]
fn keys_and_leaves_know_their_places() {
    let project = read(GOOD).unwrap();
    let case = &project.load_cases["Q"];
    let point = &case.loads[1];
    assert_eq!(&GOOD[point.place().range], "{members: [B1], span: 2, point: 2.50 kN, at: 1 m}");
    assert_eq!(&GOOD[point.point.as_ref().unwrap().place().range], "2.50 kN");
    let (name, _) = project.nodes.as_ref().unwrap().get_index(1).unwrap();
    assert_eq!(&GOOD[name.place().range.start..][..12], "M: [4 m, 0 m");
}

#[test]
fn places_count_bytes_after_letters_of_several_bytes() {
    let yaml = GOOD.replace("Heron", "Höhe 12 m², ");
    let project = read(&yaml).unwrap();
    assert_eq!(&yaml[project.combinations.written[0].title.place().range], "\"6.10\"");
}

#[test]
fn maps_keep_the_order_of_the_file() {
    let nodes = read(GOOD).unwrap().nodes.unwrap();
    assert_eq!(nodes.keys().map(|name| name.as_str()).collect::<Vec<_>>(), ["W", "M", "E"]);
}

#[test]
fn an_alias_stands_for_what_its_anchor_holds() {
    let yaml = edited("along: [W, M, E]", "along: &all [W, M, E]\n    spans: *all");
    assert_eq!(read(&yaml).unwrap().members.unwrap()["B1"].spans.as_ref().unwrap().len(), 3);
}
