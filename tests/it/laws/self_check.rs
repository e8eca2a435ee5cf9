//! The self-check passes on sound solutions and fails on damaged ones.

use spanfolio::analysis::{SelfCheck, Solution, self_check, solve};
use spanfolio::model::{Effect, Model};

use crate::support::model;

const HEAD: &str = "format: 1\n\
    project: {title: Check, number: 1, revisions: [{mark: A, date: 2026-01-01, status: test}]}\n\
    materials: {steel: {grade: S275}}\n\
    sections:\n  beam: {catalogue: IPE 240}\n  angle: {catalogue: L 100x100x10}\n";

const TAIL: &str = "combinations: {written: [{title: all, purpose: strength, factors: {Q: 1}}]}\n";

fn plane(nodes: &str, members: &str, supports: &str, loads: &str) -> Model {
    whole("plane", nodes, members, supports, loads)
}

fn whole(frame: &str, nodes: &str, members: &str, supports: &str, loads: &str) -> Model {
    let yaml = format!(
        "{HEAD}frame: {frame}\nnodes: {{{nodes}}}\nmembers:\n{members}supports: {{{supports}}}\n\
         load_cases:\n  Q:\n    title: Q\n    nature: imposed\n    self_weight: true\n    loads:\n{loads}{TAIL}"
    );
    model(&yaml).unwrap_or_else(|problems| panic!("{problems:#?}\n{yaml}"))
}

fn checked(model: &Model) -> (Solution, SelfCheck) {
    let solution = solve(model).expect("a sound structure");
    let check = self_check(model, &solution);
    (solution, check)
}

/// A two-span beam with everything that can act along it.
fn beam() -> Model {
    plane(
        "A: [0 m, 0 m], B: [5 m, 0 m], C: [9 m, 0 m]",
        "  B1: {along: [A, B, C], section: beam, material: steel}\n",
        "A: pinned, B: {Z: 30 MN/m, RY: 2 MN m/rad}, C: {Z: fixed}",
        "      - {member: B1, varying: [3 kN/m, 8 kN/m], from: 1 m, to: 7 m}\n      \
         - {member: B1, point: 12 kN, at: 2.2 m}\n      \
         - {member: B1, point_moment: 5 kN m, at: 6.1 m, about: Y}\n      \
         - {member: B1, warming: {top: 25 K, bottom: 5 K}}\n      \
         - {node: C, displaced: {Z: -6 mm}}\n",
    )
}

#[test]
fn sound_solutions_pass() {
    let hinged = plane(
        "A: [0 m, 0 m], B: [0 m, 4 m], C: [6 m, 5 m], D: [6 m, 0 m]",
        "  C1: {along: [A, B], section: beam, material: steel}\n  \
           R1: {along: [B, C], section: beam, material: steel, hinges: {start: {M_y: 4 MN m/rad}, end: {M_y: free}}}\n  \
           C2: {along: [D, C], section: beam, material: steel}\n",
        "A: fixed, D: {X: fixed, Z: fixed, RY: fixed, turned: 20°}",
        "      - {member: R1, uniform: 4 kN/m, per: projected}\n      - {member: C1, uniform: 2 kN/m, direction: +X}\n      \
         - {member: C2, lack_of_fit: 3 mm}\n",
    );
    let settled = plane(
        "A: [0 m, 0 m], B: [5 m, 0 m]",
        "  B1: {along: [A, B], section: beam, material: steel}\n",
        "A: pinned, B: {Z: fixed}",
        "      - {node: B, displaced: {Z: -6 mm}}\n      - {member: B1, warming: {top: 30 K, bottom: 0 K}}\n",
    );
    let space = whole(
        "space",
        "A: [0 m, 0 m, 0 m], B: [3 m, 1 m, 0 m], C: [3 m, 1 m, 2.5 m]",
        "  B1: {along: [A, B], section: angle, material: steel, rotate: 20°}\n  \
           C1: {along: [B, C], section: beam, material: steel}\n",
        "A: fixed",
        "      - {node: C, force: {X: 1 kN, Y: -2 kN}, moment: {Z: 0.5 kN m}}\n      - {member: B1, point: 3 kN, at: 1.1 m, direction: +Y}\n",
    );
    for (title, model) in
        [("beam", beam()), ("hinged", hinged), ("settled", settled), ("space", space)]
    {
        let (_, check) = checked(&model);
        assert!(check.satisfied(), "{title}: {check:#?}");
    }
}

#[test]
fn a_determinate_beam_that_only_settles_passes() {
    let mut model = plane(
        "A: [0 m, 0 m], B: [5 m, 0 m]",
        "  B1: {along: [A, B], section: beam, material: steel}\n",
        "A: pinned, B: {Z: fixed}",
        "      - {node: B, displaced: {Z: -6 mm}}\n",
    );
    // Nothing but the settlement: all forces are round-off.
    model.cases[0].loads.retain(|load| load.written.form != spanfolio::model::LoadForm::SelfWeight);
    assert!(checked(&model).1.satisfied());
}

#[test]
fn a_wrong_reaction_breaks_the_balance() {
    let model = beam();
    let (mut solution, _) = checked(&model);
    solution.nodes[0].reaction[0][2] *= 1.001;
    let check = self_check(&model, &solution);
    assert!(!check.structures[0].balances[0].satisfied);
    assert!(!check.satisfied());
}

#[test]
fn a_wrong_internal_force_breaks_the_equilibrium_of_a_node() {
    let model = beam();
    let (mut solution, _) = checked(&model);
    solution.members[0].segments[0].states[0].0[Effect::Vz.index()][0] += 50.0;
    let check = self_check(&model, &solution);
    assert!(check.structures[0].balances[0].satisfied, "the reactions are as they were");
    assert!(!check.structures[0].residuals[0].satisfied);
}

#[test]
fn a_wrong_displacement_breaks_the_energy() {
    let model = beam();
    let (mut solution, _) = checked(&model);
    for segment in &mut solution.members[0].segments {
        for c in &mut segment.states[0].0[Effect::W.index()] {
            *c *= 1.01;
        }
    }
    let check = self_check(&model, &solution);
    assert!(check.structures[0].residuals[0].satisfied, "the forces are as they were");
    assert!(!check.structures[0].energies[0].satisfied);
}

#[test]
fn a_wrong_coefficient_breaks_the_independent_integration() {
    let model = beam();
    let (mut solution, _) = checked(&model);
    // Leaves every value at the segment's ends as it was: s (L − s).
    let segment = &mut solution.members[0].segments[1];
    let length = segment.to - segment.from;
    let moment = &mut segment.states[0].0[Effect::My.index()];
    moment[1] += 200.0 * length;
    moment[2] -= 200.0;
    let check = self_check(&model, &solution);
    assert!(!check.independent.expect("a member was integrated").satisfied);
}

#[test]
fn a_number_that_is_none_fails() {
    let model = beam();
    let (mut solution, _) = checked(&model);
    solution.nodes[0].reaction[0][2] = f64::NAN;
    assert!(!self_check(&model, &solution).satisfied());
}
