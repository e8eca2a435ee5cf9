//! What cannot be solved is refused, and the message says what moves.

use spanfolio::model::{Effect, Frame, Release};

use super::build::*;

#[track_caller]
fn says(build: Build, words: &[&str]) {
    let problems = build.refused();
    for word in words {
        assert!(
            problems.iter().any(|problem| problem.message.contains(word)),
            "no `{word}` in {problems:#?}"
        );
    }
    assert!(problems.iter().all(|problem| problem.place.is_some()));
}

fn pull() -> Vec<spanfolio::model::LoadKind> {
    vec![on_node(0, [0.0, 0.0, -1.0], [0.0; 3])]
}

#[test]
fn a_beam_without_supports_is_not_held() {
    let beam = plane()
        .node("A", [0.0; 3])
        .node("B", [6.0, 0.0, 0.0])
        .member("B1", &["A", "B"])
        .case(pull());
    says(beam, &["`main`", "has no support"]);
}

#[test]
fn a_beam_on_rollers_can_move_along_x() {
    let beam = plane()
        .node("A", [0.0; 3])
        .node("B", [6.0, 0.0, 0.0])
        .support("A", ROLLER)
        .support("B", ROLLER)
        .member("B1", &["A", "B"])
        .case(pull());
    says(beam, &["along X"]);
}

#[test]
fn a_beam_on_one_pin_turns_about_it() {
    let beam = plane()
        .node("A", [0.0; 3])
        .node("B", [6.0, 0.0, 0.0])
        .support("A", PINNED)
        .member("B1", &["A", "B"])
        .case(pull());
    says(beam, &["turn about Y"]);
}

#[test]
fn a_hinge_in_a_simple_beam_is_a_mechanism_and_its_node_is_named() {
    let beam = plane()
        .node("A", [0.0; 3])
        .node("B", [2.0, 0.0, 0.0])
        .node("C", [6.0, 0.0, 0.0])
        .support("A", PINNED)
        .support("C", ROLLER)
        .member("B1", &["A", "B", "C"])
        .hinge(1, &[(Effect::My, Release::Free)])
        .case(pull());
    says(beam, &["node `B` can move along Z"]);
}

#[test]
fn a_part_on_its_own_is_named_with_its_nodes() {
    let two = plane()
        .node("A", [0.0; 3])
        .node("B", [6.0, 0.0, 0.0])
        .node("C", [0.0, 0.0, 3.0])
        .node("D", [6.0, 0.0, 3.0])
        .support("A", PINNED)
        .support("B", ROLLER)
        .support("C", ROLLER)
        .support("D", ROLLER)
        .member("B1", &["A", "B"])
        .member("B2", &["C", "D"])
        .case(pull());
    says(two, &["`C`, `D`", "along X"]);
}

#[test]
fn a_sway_frame_without_stiff_corners_is_named() {
    let free = [(Effect::My, Release::Free)];
    let frame = plane()
        .node("A", [0.0; 3])
        .node("B", [0.0, 0.0, 4.0])
        .node("C", [5.0, 0.0, 4.0])
        .node("D", [5.0, 0.0, 0.0])
        .support("A", PINNED)
        .support("D", PINNED)
        .member("C1", &["A", "B"])
        .member("R1", &["B", "C"])
        .hinge(0, &free)
        .hinge(1, &free)
        .member("C2", &["D", "C"])
        .case(pull());
    says(frame, &["can move along X"]);
}

#[test]
fn a_beam_in_space_on_two_pins_spins_about_its_axis() {
    let beam = space()
        .node("A", [0.0; 3])
        .node("B", [6.0, 0.0, 0.0])
        .support("A", PINNED)
        .support("B", PINNED)
        .member("B1", &["A", "B"])
        .case(pull());
    says(beam, &["turn about X"]);
}

#[test]
fn a_member_that_passes_on_no_torque_at_either_end_is_loose() {
    let free = [(Effect::T, Release::Free)];
    let beam = space()
        .node("A", [0.0; 3])
        .node("B", [6.0, 0.0, 0.0])
        .support("A", FIXED)
        .support("B", FIXED)
        .member("B1", &["A", "B"])
        .hinge(0, &free)
        .hinge(1, &free)
        .case(pull());
    says(beam, &["`B1`", "`T`"]);
}

#[test]
fn a_node_that_nothing_joins_is_named() {
    let beam = plane()
        .node("A", [0.0; 3])
        .node("B", [6.0, 0.0, 0.0])
        .node("lost", [2.0, 0.0, 2.0])
        .support("A", PINNED)
        .support("B", ROLLER)
        .member("B1", &["A", "B"])
        .case(pull());
    says(beam, &["node `lost`"]);
}

#[test]
fn a_moment_on_a_node_where_every_member_is_hinged_is_refused() {
    let truss = plane()
        .node("A", [0.0; 3])
        .node("B", [4.0, 0.0, 0.0])
        .node("C", [2.0, 0.0, 2.0])
        .support("A", PINNED)
        .support("B", ROLLER)
        .member("AC", &["A", "C"])
        .axial_only()
        .member("CB", &["C", "B"])
        .axial_only()
        .member("AB", &["A", "B"])
        .axial_only()
        .case(vec![on_node(2, [0.0, 0.0, -10.0], [0.0, 3.0, 0.0])]);
    says(truss, &["node `C`", "moment"]);
}

#[test]
fn numbers_too_large_to_add_are_refused() {
    let beam = plane()
        .node("A", [0.0; 3])
        .node("B", [6.0, 0.0, 0.0])
        .support("A", PINNED)
        .support("B", ROLLER)
        .member("B1", &["A", "B"])
        .case(vec![line(0, 6.0, [0.0, 0.0, -1e308]), point(0, 2.0, [0.0, 0.0, -1e308])]);
    says(beam, &["`main`"]);
}

#[test]
fn every_structure_that_fails_is_reported() {
    let two = plane()
        .node("A", [0.0; 3])
        .node("B", [6.0, 0.0, 0.0])
        .member("B1", &["A", "B"])
        .structure(Frame::Plane)
        .node("C", [0.0; 3])
        .node("D", [6.0, 0.0, 0.0])
        .member("B2", &["C", "D"])
        .case(pull());
    says(two, &["`main`", "`structure 1`"]);
}

#[test]
fn a_structure_without_load_cases_is_solved() {
    let beam = plane()
        .node("A", [0.0; 3])
        .node("B", [6.0, 0.0, 0.0])
        .support("A", PINNED)
        .support("B", ROLLER)
        .member("B1", &["A", "B"])
        .solve();
    assert_eq!(beam.solution.members[0].segments.len(), 1);
}
