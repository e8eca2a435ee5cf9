//! What is wrong with a file whose shape is right: each mistake is named, located and explained.

use spanfolio::diagnostic::{Diagnostic, Severity};
use spanfolio::project;

use crate::support::{model, sources};

/// A project that is right; each row below makes one thing wrong.
const GOOD: &str = r#"format: 1
project:
  title: Shed
  number: 1
  revisions:
    - {mark: A, date: 2026-02-28, status: for checking}
values:
  spacing: {value: 0.6 m}
build_ups:
  roof: [{layer: Boards, load: 0.2 kN/m2}]
materials:
  steel: {grade: S275}
sections:
  beam: {catalogue: IPE 200}
  plain: {given: {A: 40 cm2, I_major: 3000 cm4, I_minor: 200 cm4, I_t: 10 cm4}}
structures:
  purlin:
    frame: plane
    nodes: {PA: [0 m, 0 m], PB: [4 m, 0 m]}
    members:
      P1: {along: [PA, PB], section: plain, material: steel}
    supports: {PA: pinned, PB: {Z: fixed}}
  frame:
    frame: plane
    nodes: {A: [0 m, 0 m], B: [5 m, 0 m], C: [8 m, 0 m], D: [5 m, -3 m]}
    members:
      B1: {along: [A, B, C], section: beam, material: steel}
      C1: {along: [D, B], section: beam, material: steel, hinges: {end: {M_y: free}}}
    supports: {A: pinned, C: {Z: fixed}, D: {X: fixed, Z: fixed}}
load_cases:
  G:
    title: Weight
    nature: permanent
    self_weight: true
    loads:
      - {member: P1, build_up: roof, width: spacing}
      - {member: B1, reaction_of: PB, every: 0.6 m, from: 0.3 m, to: 4.8 m}
  Q:
    title: Load
    nature: imposed
    loads:
      - {member: B1, uniform: 2 kN/m, from: 1 m, to: 3 m}
      - {node: B, force: {Z: -3 kN}}
      - {node: D, displaced: {Z: -4 mm}}
combinations:
  written:
    - {title: all, purpose: strength, factors: {G: 1.35, Q: 1.5}}
"#;

/// Title; the text that is replaced and by what; code; part of the message; what is underlined.
type Row = (&'static str, &'static str, &'static str, &'static str, &'static str, &'static str);

const ROWS: [Row; 46] = [
    ("newer format", "format: 1", "format: 2", "format", "the file has format 2", "2"),
    ("date", "2026-02-28", "2026-02-29", "date", "`2026-02-29` is not a date", "2026-02-29"),
    ("unknown grade", "S275", "S27", "unknown-grade", "no grade `S27`", "S27"),
    (
        "unknown catalogue section",
        "IPE 200",
        "IPE 201",
        "unknown-section",
        "no section `IPE 201`",
        "IPE 201",
    ),
    (
        "unknown section",
        "[A, B, C], section: beam",
        "[A, B, C], section: bean",
        "unknown-section",
        "no section named `bean`",
        "bean",
    ),
    (
        "unknown material",
        "section: plain, material: steel",
        "section: plain, material: stel",
        "unknown-material",
        "no material named `stel`",
        "stel",
    ),
    (
        "unknown node on a member",
        "along: [D, B]",
        "along: [D, E]",
        "unknown-node",
        "no node named `E`",
        "E",
    ),
    (
        "unknown member of a load",
        "{member: B1, uniform",
        "{member: B2, uniform",
        "unknown-member",
        "no member named `B2`",
        "B2",
    ),
    (
        "unknown build-up",
        "build_up: roof",
        "build_up: rof",
        "unknown-build-up",
        "no build-up named `rof`",
        "rof",
    ),
    (
        "unknown case",
        "factors: {G: 1.35, Q: 1.5}",
        "factors: {G: 1.35, R: 1.5}",
        "unknown-case",
        "no load case named `R`",
        "R",
    ),
    (
        "name differing in case only",
        "B: [5 m, 0 m]",
        "a: [5 m, 0 m]",
        "duplicate-name",
        "differs from `A` in case only",
        "a",
    ),
    (
        "member named as a node",
        "C1: {along",
        "D: {along",
        "duplicate-name",
        "`D` is given twice",
        "D",
    ),
    (
        "name with a bad character",
        "  plain: {given",
        "  pl/ain: {given",
        "name",
        "cannot be the name of a section",
        "pl/ain",
    ),
    ("wrong unit", "2 kN/m, from", "2 kQ/m, from", "quantity", "kQ", "2 kQ/m"),
    (
        "wrong dimension",
        "uniform: 2 kN/m",
        "uniform: 2 kN",
        "wrong-dimension",
        "`2 kN` is a force, expected a force per length",
        "2 kN",
    ),
    (
        "mass for a force",
        "force: {Z: -3 kN}",
        "force: {Z: -3 kg}",
        "wrong-dimension",
        "`-3 kg` is a mass, expected a force",
        "-3 kg",
    ),
    ("not a number", "force: {Z: -3 kN}", "force: {Z: .nan}", "quantity", "", ".nan"),
    (
        "huge number",
        "force: {Z: -3 kN}",
        "force: {Z: -3e30 kN}",
        "huge-number",
        "too large",
        "-3e30 kN",
    ),
    ("beyond all numbers", "force: {Z: -3 kN}", "force: {Z: 1e999 kN}", "quantity", "", "1e999 kN"),
    (
        "value of the wrong dimension",
        "width: spacing",
        "width: 2 kN",
        "wrong-dimension",
        "`2 kN` is a force, expected a length",
        "2 kN",
    ),
    (
        "negative width",
        "width: spacing",
        "width: -1 m",
        "not-positive",
        "`-1 m` must be above zero",
        "-1 m",
    ),
    (
        "negative area",
        "A: 40 cm2",
        "A: -40 cm2",
        "not-positive",
        "`-40 cm2` must be above zero",
        "-40 cm2",
    ),
    ("missing property", "A: 40 cm2, ", "", "missing-key", "section `plain` gives no A", "plain"),
    (
        "minor above major",
        "I_minor: 200 cm4",
        "I_minor: 4000 cm4",
        "axes",
        "y is the major axis",
        "3000 cm4",
    ),
    (
        "zero length",
        "nodes: {PA: [0 m, 0 m], PB: [4 m, 0 m]}",
        "nodes: {PA: [0 m, 0 m], PB: [0 m, 0 m]}",
        "zero-length",
        "member `P1` has no length",
        "PA",
    ),
    (
        "not straight",
        "B: [5 m, 0 m]",
        "B: [5 m, 1 m]",
        "not-straight",
        "member `B1` is not straight",
        "B",
    ),
    (
        "too many coordinates",
        "A: [0 m, 0 m], B",
        "A: [0 m, 0 m, 0 m], B",
        "coordinates",
        "has 3 coordinates, expected [x, z]",
        "0 m",
    ),
    (
        "no support",
        "supports: {PA: pinned, PB: {Z: fixed}}",
        "supports: {}",
        "no-support",
        "structure `purlin` has no support",
        "purlin",
    ),
    (
        "support out of plane",
        "D: {X: fixed, Z: fixed}",
        "D: {X: fixed, Z: fixed, Y: 3 kN/m}",
        "out-of-plane",
        "out of the plane",
        "3 kN/m",
    ),
    (
        "hinge at no node of the member",
        "hinges: {end:",
        "hinges: {A:",
        "unknown-node",
        "has no place named `A`",
        "A",
    ),
    (
        "spring of the wrong dimension",
        "M_y: free",
        "M_y: 3 kN/m",
        "wrong-dimension",
        "expected a moment per angle",
        "3 kN/m",
    ),
    (
        "load off the member",
        "to: 3 m}",
        "to: 9 m}",
        "off-member",
        "`9 m` is not on member `B1`",
        "9 m",
    ),
    (
        "load that ends before it begins",
        "from: 1 m, to: 3 m",
        "from: 3 m, to: 1 m",
        "empty-stretch",
        "ends where it begins, or before",
        "1 m",
    ),
    (
        "spans unclear",
        "{member: B1, uniform: 2 kN/m, from: 1 m, to: 3 m}",
        "{member: B1, span: 1, uniform: 2 kN/m}",
        "spans",
        "another member frames in",
        "1",
    ),
    (
        "unknown span",
        "{member: P1, build_up",
        "{member: P1, span: 2, build_up",
        "unknown-span",
        "has no span 2",
        "2",
    ),
    (
        "load out of plane",
        "2 kN/m, from",
        "2 kN/m, direction: +Y, from",
        "out-of-plane",
        "out of the plane",
        "+Y",
    ),
    (
        "moment out of plane",
        "force: {Z: -3 kN}",
        "moment: {X: 3 kN m}",
        "out-of-plane",
        "out of the plane",
        "3 kN m",
    ),
    (
        "displaced where free",
        "displaced: {Z: -4 mm}",
        "displaced: {RY: 0.01 rad}",
        "free-direction",
        "free along RY",
        "0.01 rad",
    ),
    (
        "projected to nothing",
        "2 kN/m, from: 1 m, to: 3 m",
        "2 kN/m, direction: +X, per: projected",
        "no-projection",
        "projected length is zero",
        "projected",
    ),
    (
        "reaction of an unsupported node",
        "reaction_of: PB",
        "reaction_of: B",
        "no-reaction",
        "node `B` has no support",
        "B",
    ),
    (
        "reaction of the same structure",
        "reaction_of: PB",
        "reaction_of: A",
        "own-reaction",
        "belongs to the structure that is loaded",
        "A",
    ),
    (
        "reaction without a place",
        "reaction_of: PB, every: 0.6 m, from: 0.3 m, to: 4.8 m",
        "reaction_of: PB",
        "missing-key",
        "needs `at`, or `every`",
        "PB",
    ),
    (
        "thousands of reactions",
        "every: 0.6 m",
        "every: 0.01 mm",
        "too-many",
        "more than 10000 reactions",
        "0.01 mm",
    ),
    (
        "warming without a depth",
        "{member: P1, build_up: roof, width: spacing}",
        "{member: P1, warming: {top: 20 K, bottom: 5 K}}",
        "no-depth",
        "has no depth",
        "20 K",
    ),
    (
        "combination in which nothing acts",
        "{G: 1.35, Q: 1.5}",
        "{G: 0}",
        "empty",
        "no load case that acts",
        "all",
    ),
    (
        "out-of-plane turn",
        "C1: {along: [D, B], section: beam",
        "C1: {along: [D, B], rotate: 30°, section: beam",
        "out-of-plane",
        "axes of member `C1`",
        "30°",
    ),
];

fn problems(yaml: &str) -> Vec<Diagnostic> {
    match project::read(&sources(yaml)) {
        Ok(_) => Vec::new(),
        Err(problems) => problems,
    }
}

fn underlined<'y>(yaml: &'y str, problem: &Diagnostic) -> &'y str {
    problem.place.as_ref().map_or("", |place| &yaml[place.range.clone()])
}

#[test]
fn the_good_file_is_good() {
    assert_eq!(problems(GOOD), Vec::new());
}

#[test]
fn every_mistake_is_named_and_located() {
    let mut wrong = Vec::new();
    for (title, old, new, code, message, place) in ROWS {
        assert_eq!(GOOD.matches(old).count(), 1, "{title}: `{old}` must occur once");
        let yaml = GOOD.replacen(old, new, 1);
        let found = problems(&yaml);
        let hit = found.iter().any(|problem| {
            problem.severity == Severity::Error
                && problem.code == code
                && problem.message.contains(message)
                && underlined(&yaml, problem) == place
        });
        if !hit {
            let said: Vec<String> = found
                .iter()
                .map(|p| format!("{} | {} | {}", p.code, p.message, underlined(&yaml, p)))
                .collect();
            wrong.push(format!("{title}: {said:?}"));
        }
    }
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}

#[test]
fn a_near_name_is_offered() {
    let found = problems(&GOOD.replacen("{member: B1, uniform", "{member: B11, uniform", 1));
    assert_eq!(found[0].hints, ["did you mean `B1`?"]);
}

#[test]
fn a_mass_on_a_load_gets_a_hint() {
    let found = problems(&GOOD.replacen("{Z: -3 kN}", "{Z: -3 kg}", 1));
    assert!(!found[0].hints.is_empty(), "{found:#?}");
}

#[test]
fn one_run_reports_every_mistake_in_the_order_of_the_file() {
    let yaml = GOOD
        .replacen("S275", "S27", 1)
        .replacen("along: [D, B]", "along: [D, E]", 1)
        .replacen("uniform: 2 kN/m", "uniform: 2 kN", 1)
        .replacen("Q: 1.5", "R: 1.5", 1);
    let codes: Vec<&str> = problems(&yaml).iter().map(|problem| problem.code).collect();
    assert_eq!(codes, ["unknown-grade", "unknown-node", "wrong-dimension", "unknown-case"]);
}

#[test]
fn structures_that_rest_on_each_other_are_refused() {
    let yaml = GOOD.replacen(
        "      - {node: B, force: {Z: -3 kN}}",
        "      - {node: B, force: {Z: -3 kN}}\n      - {member: P1, reaction_of: C, at: 1 m}",
        1,
    );
    let found = problems(&yaml);
    assert_eq!(found[0].code, "reaction-cycle");
    assert!(found[0].message.contains("`purlin`") && found[0].message.contains("`frame`"));
}

#[test]
fn names_of_things_nobody_uses_are_warnings() {
    let yaml = GOOD.replacen(
        "  steel: {grade: S275}",
        "  steel: {grade: S275}\n  spare: {grade: S355}",
        1,
    );
    let (_, warnings) = project::read(&sources(&yaml)).expect("warnings alone");
    assert_eq!(warnings.len(), 1);
    assert_eq!(warnings[0].code, "unused-material");
}

/// The worked axes of the design's conventions; a column stands up or hangs down.
#[test]
fn local_axes_follow_the_conventions() {
    let model = model(GOOD).expect("a good file");
    let axes = |name: &str| {
        let member = model.members.iter().find(|member| member.name == name);
        member.expect("a member").axes
    };
    assert_eq!(axes("B1"), [[1.0, 0.0, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, 1.0]]);
    assert_eq!(axes("C1"), [[0.0, 0.0, 1.0], [0.0, 1.0, 0.0], [-1.0, 0.0, 0.0]]);
    let down = crate::support::model(&GOOD.replacen("[D, B]", "[B, D]", 1).replacen(
        "{end: {M_y",
        "{start: {M_y",
        1,
    ));
    let down = down.expect("a good file");
    let column = down.members.iter().find(|member| member.name == "C1").expect("a member");
    assert_eq!(column.axes, [[0.0, 0.0, -1.0], [0.0, 1.0, 0.0], [1.0, 0.0, 0.0]]);
}

#[test]
fn spans_run_between_ends_and_supported_nodes() {
    let model = model(&GOOD.replacen("C: {Z: fixed}", "B: {Z: fixed}", 1)).expect("a good file");
    let beam = model.members.iter().find(|member| member.name == "B1").expect("a member");
    let spans: Vec<(f64, f64, [bool; 2])> =
        beam.spans.iter().map(|span| (span.from, span.to, span.free)).collect();
    assert_eq!(spans, [(0.0, 5.0, [false, false]), (5.0, 8.0, [false, true])]);
}

#[test]
fn combinations_are_named_by_their_content() {
    let model = model(GOOD).expect("a good file");
    assert_eq!(model.combinations[0].name, "strength all | 1.35 G + 1.5 Q");
    assert_eq!(model.combinations[0].number, "C1");
}

#[test]
fn structures_that_hand_on_are_solved_first() {
    let swapped = GOOD.replacen("  purlin:\n", "  zzz:\n", 1);
    let model = model(&swapped).expect("a good file");
    let order: Vec<&str> = model.solve_order.iter().map(|id| model[*id].name.as_str()).collect();
    assert_eq!(order, ["zzz", "frame"]);
}

/// A node that only says where local z points is no part of the structure.
#[test]
fn a_node_can_mark_a_direction() {
    let yaml = GOOD
        .replacen("nodes: {PA: [0 m, 0 m]", "nodes: {K: [1 m, 2 m], PA: [0 m, 0 m]", 1)
        .replacen("P1: {along: [PA, PB]", "P1: {along: [PA, PB], z_towards: K", 1);
    let solved = spanfolio::solve(&sources(&yaml)).expect("a sound structure");
    assert!(solved.warnings.is_empty(), "{:#?}", solved.warnings);
    assert!(!solved.record.model.structures["purlin"].nodes.contains_key("K"));
    let loaded = problems(&yaml.replacen("{node: B, force", "{node: K, force", 1));
    assert_eq!(loaded[0].code, "no-member");
}
