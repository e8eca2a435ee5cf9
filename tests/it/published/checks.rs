//! Checks against published values: the utilisation is the published value over itself, and the sheets give
//! what statics and strength of materials give by hand.

mod sheets;

use std::f64::consts::PI;
use std::fmt::Write;

use spanfolio::record::{CheckRecord, Record};

use super::case::{Case, Expected, Family};
use super::translate::project_file;
use crate::support::solved;

/// A check whose utilisation is 1 where the program finds the published extreme, and nothing worse.
fn check(index: usize, case: &Case, expected: &Expected) -> Option<String> {
    let scope = match expected.location.scope.as_deref() {
        None | Some("all") => "all".to_owned(),
        Some(member) => format!("[{member}]"),
    };
    let size = expected.value.abs();
    if let (Some(extreme), Some(node), "reaction_y") =
        (&expected.location.extreme, &expected.location.node, expected.quantity.as_str())
    {
        let sign = if extreme == "min" { "-" } else { "" };
        return Some(format!(
            "  - {{id: c{index}, purpose: strength, node: {node}, title: t, reference: \"published\", demand: \"{sign}reaction_Z\", capacity: {size} N, one_sided: true}}\n"
        ));
    }
    let sign = if expected.value < 0.0 { "-" } else { "" };
    let (demand, unit) = match expected.quantity.as_str() {
        // Stress on a section modulus of 1000 cm³ as well as the moment itself.
        "moment_max" | "moment_min" if index.is_multiple_of(2) => {
            (format!("{sign}M_y / (1000 cm3)"), "kPa")
        }
        "moment_max" | "moment_min" => (format!("{sign}M_y"), "N m"),
        "deflection_y_min" | "deflection_y_max" => (format!("{sign}w"), "m"),
        _ => return None,
    };
    if size <= 0.0 || !horizontal(case) {
        return None;
    }
    Some(format!(
        "  - {{id: c{index}, purpose: strength, members: {scope}, title: t, reference: \"published\", demand: \"{demand}\", capacity: {size} {unit}, one_sided: true}}\n"
    ))
}

/// Every member runs from left to right, so that local z is up.
fn horizontal(case: &Case) -> bool {
    case.model.kind == "plane"
        && case.model.members.values().all(|member| {
            let (i, j) = (&case.model.nodes[&member.i], &case.model.nodes[&member.j]);
            j[0] > i[0] && (j[1] - i[1]).abs() <= 0.0
        })
}

/// The greatest utilisation of a check over its members.
fn worst<'r>(record: &'r Record, id: &str) -> &'r CheckRecord {
    let of = record.checks.iter().filter(|check| check.id == id);
    of.max_by(|a, b| a.utilisation.unwrap_or(0.0).total_cmp(&b.utilisation.unwrap_or(0.0)))
        .expect("a check")
}

/// Runs every extreme of a family as a check.
fn family(data: &str, expected_values: usize) {
    let family: Family = serde_yaml::from_str(data).expect("the check cases read");
    let mut seen = 0;
    for case in &family.cases {
        let mut yaml = project_file(case) + "checks:\n";
        let mut held = Vec::new();
        for (index, expected) in case.expect.iter().enumerate() {
            if let Some(check) = check(index, case, expected) {
                yaml += &check;
                held.push((index, expected));
            }
        }
        if held.is_empty() {
            continue;
        }
        let record = solved(&yaml);
        for (index, expected) in held {
            let check = worst(&record, &format!("c{index}"));
            let utilisation = check.utilisation.expect("a utilisation");
            let tolerance = expected.rel_tol.expect("a tolerance");
            // The least of a reaction is sought as the greatest of its opposite.
            let sought = match expected.location.extreme.as_deref() {
                Some("min") => -expected.value.signum(),
                Some(_) => expected.value.signum(),
                None => 1.0,
            };
            assert!(
                (utilisation - sought).abs() <= tolerance,
                "{} ({}; {}): {} published {}, found {utilisation} of it",
                case.id,
                case.title,
                case.source,
                expected.quantity,
                expected.value
            );
            if let Some(governing) = &expected.location.governing_combination {
                let state = check.state.as_deref().expect("a combination");
                assert_eq!(&record.combinations[state].title, governing, "{}", case.id);
            }
            seen += 1;
        }
    }
    assert_eq!(seen, expected_values, "extremes that are checked");
}

#[test]
fn single_span_beams() {
    family(include_str!("data/A-single-span-beams.yaml"), 24);
}

#[test]
fn continuous_beams() {
    family(include_str!("data/B-continuous-beams.yaml"), 29);
}

#[test]
fn combinations() {
    family(include_str!("data/L-combinations.yaml"), 13);
}

/// A column 3.6 m high under N and a horizontal force at its top, section given, with checks on it.
fn column(checks: &[&str]) -> Record {
    let mut yaml = String::from(
        "format: 1
project: {title: Column, number: 1, revisions: [{mark: A, date: 2026-01-01, status: test}]}
materials: {steel: {E: 200 GPa, G: 80 GPa, density: 1 kg/m3, expansion: 1e-5 /K, f_y: 250 MPa}}
sections: {post: {given: {A: 64 cm2, I_y: 4000 cm4, I_z: 1400 cm4, I_t: 50 cm4, W_el_y: 400 cm3, W_el_z: 200 cm3, A_vz: 20 cm2}}}
frame: plane
nodes: {A: [0 m, 0 m], B: [0 m, 3.6 m], C: [4 m, 0 m], D: [4 m, 3.6 m]}
members:
  P1: {along: [A, B], section: post, material: steel, buckling_length: {y: 3.6 m, z: 1.8 m}}
  P2: {along: [C, D], section: post, material: steel}
  T1: {along: [B, D], section: post, material: steel, axial_only: true, compression: accepted}
supports: {A: fixed, C: fixed}
load_cases:
  G: {title: G, nature: permanent, loads: [{node: B, force: {Z: -300 kN}}, {node: D, force: {Z: -300 kN}}]}
  W: {title: W, nature: wind, loads: [{node: B, force: {X: 40 kN}}]}
  U: {title: U, nature: wind, loads: [{node: B, force: {Z: 350 kN}}]}
combinations:
  written:
    - {title: weight, purpose: strength, factors: {G: 1.35}}
    - {title: wind, purpose: strength, factors: {G: 1.35, W: 1.5}}
    - {title: lift, purpose: equilibrium, factors: {G: 0.9, U: 1.5}}
    - {title: push, purpose: ground, factors: {G: 0.9, W: 1.5}}
    - {title: use, purpose: characteristic, factors: {G: 1, W: 1}}
checks:
",
    );
    for check in checks {
        let _ = writeln!(yaml, "  - {check}");
    }
    solved(&yaml)
}

/// The utilisation of one check by hand, within what shortening of the tie leaves (1e-3).
fn by_hand(check: &str, expected: f64) {
    let record = column(&[check]);
    let found = record.checks[0].utilisation.expect("a utilisation");
    assert!((found / expected - 1.0).abs() <= 1e-3, "{check}: {found}, by hand {expected}");
}

/// σ = N/A (from memory).
#[test]
fn axial_stress() {
    by_hand(
        "{id: c, sheet: axial stress, members: [P1], purpose: strength}",
        1.35 * 300e3 / 64e-4 / 250e6,
    );
}

/// Two equal columns joined by a tie share a horizontal force: M = H/2 × 3.6 m, σ = M/W (from memory).
#[test]
fn bending_stress() {
    by_hand(
        "{id: c, sheet: bending stress, members: [P2], purpose: strength}",
        1.5 * 20e3 * 3.6 / 400e-6 / 250e6,
    );
}

/// τ = V/A_v against f_y/√3 (von Mises, from memory).
#[test]
fn shear_stress() {
    by_hand(
        "{id: c, sheet: shear stress, members: [P2], purpose: strength}",
        1.5 * 20e3 / 20e-4 / (250e6 / 3.0_f64.sqrt()),
    );
}

/// √(σ² + 3 τ²) with σ = N/A + M/W at the foot (EN 1993-1-1, 6.2.1(5), from memory).
#[test]
fn combined_stress() {
    let sigma: f64 = 1.35 * 300e3 / 64e-4 + 1.5 * 20e3 * 3.6 / 400e-6;
    let tau = 1.5 * 20e3 / 20e-4;
    by_hand(
        "{id: c, sheet: combined stress, members: [P1], purpose: strength, with: {A_shear: A_vz}}",
        (sigma * sigma + 3.0 * tau * tau).sqrt() / 250e6,
    );
}

/// N_cr = π² E I/L_cr² about both axes, factor 3 (Euler, from memory).
#[test]
fn euler_load() {
    let about_y = PI * PI * 200e9 * 4000e-8 / (3.6 * 3.6);
    let about_z = PI * PI * 200e9 * 1400e-8 / (1.8 * 1.8);
    by_hand(
        "{id: c, sheet: Euler load, members: [P1], purpose: strength, with: {factor: 3}}",
        1.35 * 300e3 * 3.0 / f64::min(about_y, about_z),
    );
}

/// Top of two cantilever columns that share H: H/2 h³/3 E I (from memory).
#[test]
fn sway() {
    let by = 20e3 * 3.6 * 3.6 * 3.6 / (3.0 * 200e9 * 4000e-8);
    by_hand(
        "{id: c, sheet: sway, node: D, relative_to: C, purpose: characteristic, with: {ratio: 200}}",
        by / (3.6 / 200.0),
    );
}

/// Effective area after Meyerhof: e = M/V, A' = (B − 2e) B (EN 1997-1 Annex D, from memory).
#[test]
fn bearing_pressure() {
    let v = 300e3 + 50e3;
    let e = 20e3 * 3.6 / v;
    by_hand(
        "{id: c, sheet: bearing pressure, node: C, purpose: characteristic, with: {B_X: 2 m, B_Y: 1.5 m, q_allow: 250 kPa, W_base: 50 kN}}",
        v / (250e3 * (2.0 - 2.0 * e) * 1.5),
    );
}

#[test]
fn bearing_far_outside_the_base_is_deferred() {
    let record = column(&[
        "{id: c, sheet: bearing pressure, node: C, purpose: characteristic, with: {B_X: 0.5 m, B_Y: 1.5 m, q_allow: 250 kPa}}",
    ]);
    assert_eq!(record.checks[0].outcome, "deferred");
}

/// 1.5 × 350 − 0.9 × 300 = 255 kN to hold down (statics).
#[test]
fn uplift() {
    by_hand(
        "{id: c, sheet: uplift, node: A, purpose: equilibrium, with: {holding: 400 kN}}",
        (1.5 * 350e3 - 0.9 * 300e3) / 400e3,
    );
}

/// About C: the weight on B stabilises with 4 m, that on D with nothing; the push overturns with 3.6 m.
#[test]
fn overturning() {
    by_hand(
        "{id: c, sheet: overturning, structure: main, about: C, purpose: ground, with: {factor: 1.2}}",
        1.2 * 1.5 * 40e3 * 3.6 / (0.9 * 300e3 * 4.0),
    );
}

/// H ≤ μ V (Coulomb, from memory).
#[test]
fn sliding() {
    by_hand(
        "{id: c, sheet: sliding, node: C, purpose: ground, with: {mu: 0.4, W_base: 20 kN}}",
        1.5 * 20e3 / (0.4 * (0.9 * 300e3 + 20e3)),
    );
}

/// Span and cantilever: 5 q L⁴/384 E I and q L⁴/8 E I (from memory).
#[test]
fn deflection_of_a_span_and_of_a_cantilever() {
    let beam = |supports: &str, sheet: &str| {
        let record = solved(&format!(
            "format: 1
project: {{title: Beam, number: 1, revisions: [{{mark: A, date: 2026-01-01, status: test}}]}}
shear_deformation: false
materials: {{steel: {{E: 200 GPa, G: 80 GPa, density: 1 kg/m3, expansion: 1e-5 /K}}}}
sections: {{beam: {{given: {{A: 50 cm2, I_y: 6000 cm4, I_z: 400 cm4, I_t: 10 cm4}}}}}}
frame: plane
nodes: {{A: [0 m, 0 m], B: [4.5 m, 0 m]}}
members: {{B1: {{along: [A, B], section: beam, material: steel}}}}
supports: {{{supports}}}
load_cases: {{Q: {{title: Q, nature: imposed, loads: [{{member: B1, uniform: 6 kN/m}}]}}}}
combinations: {{written: [{{title: use, purpose: characteristic, factors: {{Q: 1}}}}]}}
checks: [{{id: c, sheet: {sheet}, members: [B1], spans: [1], purpose: characteristic, with: {{ratio: 250}}}}]
"
        ));
        record.checks[0].clone()
    };
    let power = 4.5_f64 * 4.5 * 4.5 * 4.5;
    let limit = 4.5 / 250.0;
    let stiffness = 200e9 * 6000e-8;
    let span = beam("A: pinned, B: {Z: fixed}", "span deflection");
    let by = 5.0 * 6e3 * power / (384.0 * stiffness);
    assert!((span.utilisation.expect("a utilisation") / (by / limit) - 1.0).abs() < 1e-9);
    assert!((span.x.expect("a place") - 2.25).abs() < 1e-4);
    let cantilever = beam("A: fixed", "cantilever deflection");
    let by = 6e3 * power / (8.0 * stiffness);
    assert!((cantilever.utilisation.expect("a utilisation") / (by / limit) - 1.0).abs() < 1e-9);
    // Each sheet says when the other is meant.
    assert_eq!(beam("A: fixed", "span deflection").outcome, "deferred");
    assert_eq!(beam("A: pinned, B: {Z: fixed}", "cantilever deflection").outcome, "deferred");
}
