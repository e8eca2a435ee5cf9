//! Governing values against a search that knows nothing of roots.

use proptest::prelude::*;
use spanfolio::analysis::{Polynomial, Stretch, evaluate, extremes, sign_changes};
use spanfolio::model::{EFFECTS, Effect, Side};
use spanfolio::record::Record;

use crate::support::solved;

fn polynomials() -> impl Strategy<Value = Polynomial> {
    prop::array::uniform6(-10.0..10.0_f64)
}

/// A beam over two spans with an overhang under loads in three cases and some combinations of them.
fn beam(loads: &[(f64, f64)], factors: &[[f64; 3]]) -> String {
    let mut yaml = String::from(
        "format: 1\n\
         project: {title: Beam, number: 1, revisions: [{mark: A, date: 2026-01-01, status: test}]}\n\
         materials: {steel: {grade: S275}}\n\
         sections: {beam: {catalogue: IPE 240}}\n\
         frame: plane\n\
         nodes: {A: [0 m, 0 m], B: [5 m, 0 m], C: [9 m, 0 m], D: [10.5 m, 0 m]}\n\
         members: {B1: {along: [A, B, C, D], section: beam, material: steel}}\n\
         supports: {A: pinned, B: {Z: fixed}, C: {Z: 40 MN/m}}\n\
         load_cases:\n",
    );
    for (index, (at, force)) in loads.iter().enumerate() {
        yaml += &format!(
            "  Q{index}:\n    title: Q\n    nature: imposed\n    loads:\n      - {{member: B1, point: {force} kN, at: {at} m}}\n      \
             - {{member: B1, varying: [{force} kN/m, {} kN/m], from: {} m, to: 10.5 m}}\n",
            force / 3.0,
            at / 2.0
        );
    }
    yaml += "combinations:\n  written:\n";
    for (index, row) in factors.iter().enumerate() {
        yaml += &format!(
            "    - {{title: c{index}, purpose: strength, factors: {{Q0: {}, Q1: {}, Q2: {}}}}}\n",
            row[0], row[1], row[2]
        );
    }
    yaml
}

/// Least and greatest over all combinations, at 2 001 places of every segment between the ends.
fn scanned(record: &Record, effect: Effect, from: f64, to: f64) -> (f64, f64) {
    let (mut least, mut greatest) = (f64::INFINITY, f64::NEG_INFINITY);
    let inside = record.results.members["B1"]
        .segments
        .iter()
        .filter(|segment| from <= segment.from && segment.to <= to);
    for segment in inside {
        for state in record.combinations.keys() {
            for step in 0..=2000 {
                let x = segment.from + (segment.to - segment.from) * f64::from(step) / 2000.0;
                let side = if step == 2000 { Side::Before } else { Side::After };
                let x = if step == 2000 { segment.to } else { x };
                let value = record.effect("B1", effect, state, x, side).expect("on the member");
                least = least.min(value);
                greatest = greatest.max(value);
            }
        }
    }
    (least, greatest)
}

proptest! {
    #[test]
    fn every_sign_change_of_a_polynomial_is_found(polynomial in polynomials(), length in 0.1..3.0_f64) {
        let roots = sign_changes(&polynomial, length);
        let mut bounds = vec![0.0];
        bounds.extend(&roots);
        bounds.push(length);
        let size: f64 = polynomial.iter().map(|c| c.abs()).sum();
        for root in &roots {
            // At most |x|⁵ = 3⁵ times the sum of the coefficients.
            prop_assert!(evaluate(&polynomial, *root).abs() <= 243e-9 * size);
        }
        // Between neighbouring roots the sign stays.
        for pair in bounds.windows(2) {
            let signs: Vec<bool> = (1..200)
                .map(|k| evaluate(&polynomial, pair[0] + (pair[1] - pair[0]) * f64::from(k) / 200.0))
                .filter(|value| value.abs() > 1e-9 * size)
                .map(|value| value > 0.0)
                .collect();
            prop_assert!(signs.windows(2).all(|pair| pair[0] == pair[1]), "{polynomial:?} {roots:?}");
        }
    }

    #[test]
    fn extremes_are_those_of_a_dense_scan(first in polynomials(), second in polynomials()) {
        let stretches = [
            Stretch { from: 0.0, to: 1.5, polynomial: first },
            Stretch { from: 1.5, to: 2.0, polynomial: second },
        ];
        let (greatest, least) = extremes(&stretches).expect("two stretches");
        let values: Vec<f64> = stretches
            .iter()
            .flat_map(|s| (0..=2000).map(move |k| evaluate(&s.polynomial, (s.to - s.from) * f64::from(k) / 2000.0)))
            .collect();
        let scale = values.iter().fold(1.0_f64, |most, v| most.max(v.abs()));
        let top = values.iter().copied().fold(f64::NEG_INFINITY, f64::max);
        let bottom = values.iter().copied().fold(f64::INFINITY, f64::min);
        // The scan misses the summit by the curvature over half a step.
        prop_assert!(greatest.value >= top - 1e-7 * scale && greatest.value <= top + 1e-3 * scale);
        prop_assert!(least.value <= bottom + 1e-7 * scale && least.value >= bottom - 1e-3 * scale);
    }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(24))]
    #[test]
    fn governing_values_are_those_of_a_dense_scan(
        loads in prop::collection::vec((0.5..10.0_f64, -20.0..20.0_f64), 3),
        factors in prop::collection::vec(prop::array::uniform3(0.1..1.6_f64), 1..5),
    ) {
        let record = solved(&beam(&loads, &factors));
        let result = &record.results.members["B1"];
        let member = record.member("B1").expect("a member");
        for effect in EFFECTS {
            let whole = &result.governing["strength"][effect.name()];
            let (least, greatest) = scanned(&record, effect, 0.0, 10.5);
            let scale = greatest.abs().max(least.abs()).max(1e-9);
            prop_assert!((whole.max.value - greatest).abs() <= 1e-4 * scale, "{effect:?} max");
            prop_assert!((whole.min.value - least).abs() <= 1e-4 * scale, "{effect:?} min");
            // The value stands where it says it stands.
            for extreme in [&whole.max, &whole.min] {
                let x = extreme.x.expect("a place");
                let side = extreme.side.unwrap_or(Side::Before);
                let there = record.effect("B1", effect, &extreme.state, x, side).expect("on the member");
                prop_assert!((there - extreme.value).abs() <= 1e-8 * scale, "{effect:?} at {x}");
            }
        }
        // A span's governing values are those of the span alone.
        for (span, governing) in member.spans.iter().zip(&result.spans) {
            let extremes = &governing.governing["strength"]["M_y"];
            let (least, greatest) = scanned(&record, Effect::My, span.from, span.to);
            let scale = greatest.abs().max(least.abs()).max(1e-9);
            prop_assert!((extremes.max.value - greatest).abs() <= 1e-4 * scale);
            prop_assert!((extremes.min.value - least).abs() <= 1e-4 * scale);
        }
    }
}

const TWO: [(f64, f64); 3] = [(2.0, 10.0), (7.0, 6.0), (10.0, 3.0)];

#[test]
fn ties_go_to_the_earlier_combination() {
    let record = solved(&beam(&TWO, &[[1.0, 0.5, 0.2], [1.0, 0.5, 0.2]]));
    for extremes in record.results.members["B1"].governing["strength"].values() {
        for extreme in [&extremes.max, &extremes.min] {
            assert_eq!(record.combinations[&extreme.state].title, "c0");
        }
    }
}

#[test]
fn the_runner_up_is_the_best_other_combination() {
    let record = solved(&beam(&TWO, &[[1.0, 0.1, 0.1], [1.5, 0.1, 0.1], [1.2, 0.1, 0.1]]));
    let extreme = &record.results.reactions["strength"]["A"]["Z"].max;
    assert_eq!(record.combinations[&extreme.state].title, "c1");
    let next = extreme.next.as_ref().expect("a runner-up");
    assert_eq!(record.combinations[&next.state].title, "c2");
    let value = record.reaction("A", &next.state).expect("a support")[2];
    assert!((next.value - value).abs() <= 1e-9 * value.abs());
}

#[test]
fn components_that_act_together_come_from_the_same_place_and_combination() {
    let record = solved(&beam(&TWO, &[[1.0, 0.5, 0.2], [0.2, 1.4, 0.9]]));
    let extreme = &record.results.members["B1"].governing["strength"]["M_y"].min;
    let (x, side) = (extreme.x.expect("a place"), extreme.side.unwrap_or(Side::After));
    let shear = record.effect("B1", Effect::Vz, &extreme.state, x, side).expect("on the member");
    let other = match side {
        Side::Before => Side::After,
        Side::After => Side::Before,
    };
    let across = record.effect("B1", Effect::Vz, &extreme.state, x, other).expect("on the member");
    let with = extreme.with[Effect::Vz.index()];
    let near = |value: f64| (value - with).abs() <= 1e-8 * with.abs();
    // The moment does not jump at a support, so either side of the shear may stand beside it.
    assert!(near(shear) || near(across), "{with} is neither {shear} nor {across}");
}
