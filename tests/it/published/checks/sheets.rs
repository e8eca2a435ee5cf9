//! Check sheets on published cases: the deflection of a beam over its limit, the largest bending stress of a case;
//! buckling lengths of the textbook, and bases that are lifted or loaded off both their axes.

use std::f64::consts::PI;

use spanfolio::record::Record;

use crate::published::case::{Case, Expected, Family};
use crate::published::translate::project_file;
use crate::support::solved;

/// Span over the deflection that is accepted.
const RATIO: f64 = 250.0;
/// Section modulus, m³, and stress, Pa.
const MODULUS: f64 = 500e-6;
const STRESS: f64 = 100e6;

/// A node that holds nothing and where nothing goes on: the end of a cantilever.
fn is_free(case: &Case, node: &str) -> bool {
    let meeting = case.model.members.values().filter(|member| member.i == node || member.j == node);
    !case.model.supports.contains_key(node) && meeting.count() == 1
}

/// The sheet that fits the member on which a deflection is published, with the member's length.
fn deflection<'e>(case: &Case, expected: &'e Expected) -> Option<(&'e str, &'static str, f64)> {
    if !matches!(expected.quantity.as_str(), "deflection_y_min" | "deflection_y_max") {
        return None;
    }
    let name = expected.location.at_member.as_deref()?;
    let member = &case.model.members[name];
    let (i, j) = (&case.model.nodes[&member.i], &case.model.nodes[&member.j]);
    let cantilever = is_free(case, &member.i) != is_free(case, &member.j);
    let sheet = if cantilever { "cantilever deflection" } else { "span deflection" };
    Some((name, sheet, (j[0] - i[0]).abs()))
}

/// Runs the sheets on every case of a family; counts the deflections, and the cases whose largest moment is
/// published.
fn run(data: &str, deflections: usize, moments: usize) {
    let family: Family = serde_yaml::from_str(data).expect("the check cases read");
    let (mut deflected, mut bent) = (0, 0);
    for case in family.cases.iter().filter(|case| case.model.kind == "plane") {
        let modulus = format!(", W_el_y: {MODULUS} m3, W_el_z: 100 cm3}}, axes: as written");
        let mut yaml = project_file(case).replace("}, axes: as written", &modulus);
        yaml += &format!(
            "checks:\n  - {{id: bending, sheet: bending stress, purpose: strength, members: all, with: {{f_allow: {STRESS} Pa}}}}\n"
        );
        for (index, expected) in case.expect.iter().enumerate() {
            if let Some((member, sheet, _)) = deflection(case, expected) {
                yaml += &format!(
                    "  - {{id: d{index}, sheet: {sheet}, purpose: strength, members: [{member}], with: {{ratio: {RATIO}}}}}\n"
                );
            }
        }
        let record = solved(&yaml);
        for (index, expected) in case.expect.iter().enumerate() {
            let Some((_, _, span)) = deflection(case, expected) else { continue };
            let sought = expected.value.abs() * RATIO / span;
            let found = utilisation(&record, &format!("d{index}"));
            let tolerance = expected.rel_tol.expect("a tolerance");
            assert!(
                (found / sought - 1.0).abs() <= tolerance,
                "{} ({}; {}): {found}, published {sought}",
                case.id,
                case.title,
                case.source
            );
            deflected += 1;
        }
        let published =
            case.expect.iter().filter(|expected| expected.quantity.starts_with("moment"));
        let largest = published.map(|expected| expected.value.abs()).fold(0.0, f64::max);
        let found = utilisation(&record, "bending") * MODULUS * STRESS;
        // Published values have ten digits, their tolerance is 1e-6.
        assert!(found >= largest * (1.0 - 1e-6), "{}: {found} below {largest}", case.id);
        bent += usize::from(found <= largest * (1.0 + 1e-6));
    }
    assert_eq!((deflected, bent), (deflections, moments));
}

/// The greatest over all that a check is made on.
fn utilisation(record: &Record, id: &str) -> f64 {
    let of = record.checks.iter().filter(|check| check.id == id);
    of.filter_map(|check| check.utilisation).fold(0.0, f64::max)
}

#[test]
fn single_span_beams() {
    run(include_str!("../data/A-single-span-beams.yaml"), 9, 11);
}

#[test]
fn continuous_beams() {
    run(include_str!("../data/B-continuous-beams.yaml"), 9, 8);
}

#[test]
fn combinations() {
    run(include_str!("../data/L-combinations.yaml"), 0, 3);
}

const HEAD: &str = "format: 1
project: {title: Columns, number: 1, revisions: [{mark: A, date: 2026-01-01, status: test}]}
materials: {steel: {E: 200 GPa, G: 80 GPa, density: 1 kg/m3, expansion: 1e-5 /K}}
sections: {post: {given: {A: 64 cm2, I_y: 4000 cm4, I_z: 1400 cm4, I_t: 50 cm4}}}
";

/// N_cr = π² E I/(k L)², k = 0.5 fixed and fixed, 0.699 fixed and pinned, 1 pinned at both ends, 2 fixed and free
/// (Euler's four cases, from memory; 0.699 = π/4.4934).
#[test]
fn buckling_lengths_of_the_four_end_conditions() {
    let (length, load, factor) = (4.4, 55e3, 2.5);
    let yaml = format!(
        "{HEAD}frame: plane
nodes:
  A: [0 m, 0 m]
  B: [0 m, {length} m]
  C: [2 m, 0 m]
  D: [2 m, {length} m]
  E: [4 m, 0 m]
  F: [4 m, {length} m]
  G: [6 m, 0 m]
  H: [6 m, {length} m]
members:
  P1: {{along: [A, B], section: post, material: steel, buckling_length: {{y: 2.2 m, z: 2.2 m}}}}
  P2: {{along: [C, D], section: post, material: steel, buckling_length: {{y: 3.0756 m, z: 3.0756 m}}}}
  P3: {{along: [E, F], section: post, material: steel, buckling_length: {{y: 4.4 m, z: 4.4 m}}}}
  P4: {{along: [G, H], section: post, material: steel, buckling_length: {{y: 8.8 m, z: 8.8 m}}}}
supports:
  A: fixed
  B: {{X: fixed, RY: fixed}}
  C: fixed
  D: {{X: fixed}}
  E: pinned
  F: {{X: fixed}}
  G: fixed
load_cases:
  N: {{title: N, nature: permanent, loads: [{{node: B, force: {{Z: -55 kN}}}}, {{node: D, force: {{Z: -55 kN}}}}, {{node: F, force: {{Z: -55 kN}}}}, {{node: H, force: {{Z: -55 kN}}}}]}}
combinations: {{written: [{{title: N, purpose: strength, factors: {{N: 1}}}}]}}
checks: [{{id: c, sheet: Euler load, members: all, purpose: strength, with: {{factor: {factor}}}}}]
"
    );
    let record = solved(&yaml);
    for (check, k) in record.checks.iter().zip([0.5, 0.699, 1.0, 2.0]) {
        let critical = PI * PI * 200e9 * 1400e-8 / (k * length * k * length);
        let found = check.utilisation.expect("a utilisation");
        assert!((found / (load * factor / critical) - 1.0).abs() <= 1e-9, "k = {k}: {found}");
    }
    assert_eq!(record.checks.len(), 4);
}

/// A post 3 m high in space, fixed at A, under forces at its top; checks on its base.
fn base(force: &str, check: &str) -> Record {
    solved(&format!(
        "{HEAD}frame: space
nodes: {{A: [0 m, 0 m, 0 m], B: [0 m, 0 m, 3 m]}}
members: {{P1: {{along: [A, B], section: post, material: steel}}}}
supports: {{A: fixed}}
load_cases: {{F: {{title: F, nature: wind, loads: [{{node: B, force: {{{force}}}}}]}}}}
combinations: {{written: [{{title: F, purpose: ground, factors: {{F: 1}}}}]}}
checks: [{{id: c, node: A, purpose: ground, {check}}}]
"
    ))
}

fn held(force: &str, check: &str, by_hand: f64) {
    let found = base(force, check).checks[0].utilisation.expect("a utilisation");
    assert!((found / by_hand - 1.0).abs() <= 1e-9, "{check}: {found}, by hand {by_hand}");
}

/// Effective area after Meyerhof, off both axes: e_X = 12 × 3/(160 + 40) = 0.18 m, e_Y = 8 × 3/200 = 0.12 m
/// (EN 1997-1, Annex D, from memory).
#[test]
fn bearing_off_both_axes() {
    held(
        "X: 12 kN, Y: 8 kN, Z: -160 kN",
        "sheet: bearing pressure, with: {B_X: 1.8 m, B_Y: 1.2 m, q_allow: 200 kPa, W_base: 40 kN}",
        200.0 / (200.0 * (1.8 - 0.36) * (1.2 - 0.24)),
    );
}

/// What lifts the support is taken off the weight of the base: V = 60 − 45 = 15 kN, e_X = 1 × 3/15 = 0.2 m.
#[test]
fn a_base_that_is_lifted_presses_with_what_is_left() {
    held(
        "X: 1 kN, Z: 45 kN",
        "sheet: bearing pressure, with: {B_X: 1 m, B_Y: 1 m, q_allow: 50 kPa, W_base: 60 kN}",
        15.0 / (50.0 * 0.6),
    );
    // μ (60 − 45) against 1 kN.
    held("X: 1 kN, Z: 45 kN", "sheet: sliding, with: {mu: 0.4, W_base: 60 kN}", 1.0 / (0.4 * 15.0));
}

#[test]
fn a_base_that_is_lifted_off_is_never_satisfied() {
    let outcome = |check: &str| base("X: 1 kN, Z: 45 kN", check).checks[0].outcome.clone();
    let bearing =
        "sheet: bearing pressure, with: {B_X: 1 m, B_Y: 1 m, q_allow: 50 kPa, W_base: 40 kN}";
    assert_eq!(outcome(bearing), "deferred");
    assert_eq!(outcome("sheet: sliding, with: {mu: 0.4, W_base: 40 kN}"), "not satisfied");
    assert_eq!(outcome("sheet: uplift, with: {holding: 40 kN}"), "not satisfied");
    assert_eq!(outcome("sheet: uplift, with: {holding: 50 kN}"), "satisfied");
}
