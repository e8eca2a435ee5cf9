//! Reduction of imposed loads on one member.

use spanfolio::model::{Effect, Purpose, Side};
use spanfolio::record::Record;

use crate::support::solved;

/// Two equal simple beams of 6 m under the same loads; the second one's imposed loads are reduced.
fn beams() -> Record {
    solved(
        "format: 1
project: {title: Beams, number: 1, revisions: [{mark: A, date: 2026-01-01, status: test}]}
materials: {steel: {grade: S275}}
sections: {beam: {catalogue: IPE 240}}
frame: plane
nodes: {A: [0 m, 0 m], B: [6 m, 0 m], C: [0 m, 3 m], D: [6 m, 3 m]}
members:
  B1: {along: [A, B], section: beam, material: steel}
  B2: {along: [C, D], section: beam, material: steel, imposed_reduction: {factor: 0.8, source: \"EN 1991-1-1, 6.3.1.2\"}}
supports: {A: pinned, B: {Z: fixed}, C: pinned, D: {Z: fixed}}
load_cases:
  G: {title: G, nature: permanent, loads: [{members: [B1, B2], uniform: 2 kN/m}]}
  Q: {title: Q, nature: imposed, category: B, loads: [{members: [B1, B2], uniform: 4 kN/m}]}
  S: {title: S, nature: snow, loads: [{members: [B1, B2], uniform: 1 kN/m}]}
combinations: {written: [{title: all, purpose: strength, factors: {G: 1.35, Q: 1.5, S: 0.75}}]}
checks:
  - {id: m, title: t, reference: r, members: all, purpose: strength, demand: M_y, capacity: 100 kN m}
  - {id: r, title: t, reference: r, nodes: [A, C], purpose: strength, demand: R_up, capacity: 100 kN}
",
    )
}

/// q L²/8 (common practice, no source).
#[test]
fn it_counts_in_the_results_and_checks_of_its_member_alone() {
    let record = beams();
    let whole = (1.35 * 2.0 + 1.5 * 4.0 + 0.75) * 4.5;
    let reduced = (1.35 * 2.0 + 0.8 * 1.5 * 4.0 + 0.75) * 4.5;
    let state = record.combinations.keys().next().expect("a combination");
    for (member, by_hand, check) in [("B1", whole, 0), ("B2", reduced, 1)] {
        let governing = &record.results.members[member].governing["strength"]["M_y"].max;
        assert!(
            (governing.value / 1e3 / by_hand - 1.0).abs() < 1e-9,
            "{member}: {}",
            governing.value
        );
        let at = record.effect(member, Effect::My, state, 3.0, Side::Before).expect("a moment");
        assert!((at / governing.value - 1.0).abs() < 1e-9);
        let band = record.band(member, Effect::My, Purpose::Strength).expect("a band");
        let highest = band.iter().map(|[_, _, high]| *high).fold(0.0, f64::max);
        assert!((highest / governing.value - 1.0).abs() < 1e-9);
        let utilisation = record.checks[check].utilisation.expect("a utilisation");
        assert!((utilisation - by_hand / 100.0).abs() < 1e-9);
    }
    // Not in load cases by themselves, nor in reactions.
    let case = |member| record.effect(member, Effect::My, "Q", 3.0, Side::Before);
    assert_eq!(case("B1"), case("B2"));
    assert_eq!(record.checks[2].utilisation, record.checks[3].utilisation);
}

#[test]
fn a_factor_above_one_is_refused() {
    let yaml = "format: 1
project: {title: Beam, number: 1, revisions: [{mark: A, date: 2026-01-01, status: test}]}
materials: {steel: {grade: S275}}
sections: {beam: {catalogue: IPE 240}}
frame: plane
nodes: {A: [0 m, 0 m], B: [6 m, 0 m]}
members: {B1: {along: [A, B], section: beam, material: steel, imposed_reduction: {factor: 1.2, source: none}}}
supports: {A: pinned, B: {Z: fixed}}
load_cases: {Q: {title: Q, nature: imposed, loads: [{member: B1, uniform: 1 kN/m}]}}
";
    let problems = crate::support::model(yaml).map(|_| ()).expect_err("a mistake");
    assert_eq!(problems[0].message, "`1.2` is above 1: it reduces nothing");
}
