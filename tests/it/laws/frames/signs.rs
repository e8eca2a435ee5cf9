//! The worked signs of the conventions that every package prints.

use spanfolio::model::{Effect, Frame, Handed, LoadKind, MemberId, NodeId, Target};

use super::build::*;

#[test]
fn a_simple_beam_sags_positive() {
    let beam = plane()
        .node("A", [0.0; 3])
        .node("B", [6.0, 0.0, 0.0])
        .support("A", PINNED)
        .support("B", ROLLER)
        .member("B1", &["A", "B"])
        .span(0.0, 6.0, [false; 2])
        .case(vec![line(0, 6.0, [0.0, 0.0, -10.0])])
        .solve();
    close(beam.after(0, Effect::My, 3.0), 45.0, 0.0);
    close(beam.after(0, Effect::Vz, 0.0), 30.0, 0.0);
    close(beam.before(0, Effect::Vz, 6.0), -30.0, 0.0);
    close(beam.reaction("A")[2], 30.0, 0.0);
    // 5 q L⁴ / 384 E I.
    let sag = -5.0 * 10.0 * 1296.0 / (384.0 * EI);
    close(beam.after(0, Effect::W, 3.0), sag, 0.0);
    close(beam.after(0, Effect::Dz, 3.0), sag, 0.0);
    // θ_y = −w′: the start turns clockwise, which is positive about +Y.
    close(beam.after(0, Effect::ThetaY, 0.0), 10.0 * 216.0 / (24.0 * EI), 0.0);
    close(beam.displacement("A")[4], 10.0 * 216.0 / (24.0 * EI), 0.0);
}

#[test]
fn a_cantilever_hogs_negative_and_its_reaction_is_right_handed() {
    let beam = plane()
        .node("A", [0.0; 3])
        .node("B", [3.0, 0.0, 0.0])
        .support("A", FIXED)
        .member("B1", &["A", "B"])
        .span(0.0, 3.0, [false, true])
        .case(vec![on_node(1, [0.0, 0.0, -5.0], [0.0; 3])])
        .solve();
    close(beam.after(0, Effect::My, 0.0), -15.0, 0.0);
    close(beam.after(0, Effect::Vz, 0.0), 5.0, 0.0);
    close(beam.reaction("A")[4], -15.0, 0.0);
    close(beam.reaction("A")[2], 5.0, 0.0);
    close(beam.before(0, Effect::Dz, 3.0), -5.0 * 27.0 / (3.0 * EI), 0.0);
}

#[test]
fn a_column_pushed_along_x_has_tension_on_its_minus_z_face() {
    let column = plane()
        .node("A", [0.0; 3])
        .node("B", [0.0, 0.0, 3.0])
        .support("A", FIXED)
        .member("C1", &["A", "B"])
        .case(vec![on_node(1, [5.0, 0.0, 0.0], [0.0; 3])])
        .solve();
    close(column.model.members[0].axes[2][0], -1.0, 0.0);
    close(column.after(0, Effect::My, 0.0), -15.0, 0.0);
    close(column.after(0, Effect::Vz, 0.0), 5.0, 0.0);
    assert!(column.before(0, Effect::W, 3.0) < 0.0);
}

#[test]
fn held_ends_with_a_hotter_top_sag() {
    // M = E I α ΔT / h, the free curvature held back.
    let beam = plane()
        .node("A", [0.0; 3])
        .node("B", [4.0, 0.0, 0.0])
        .support("A", FIXED)
        .support("B", FIXED)
        .member("B1", &["A", "B"])
        .case(vec![LoadKind::Warming {
            member: MemberId(0),
            mean: 0.0,
            gradient_z: 50.0,
            gradient_y: 0.0,
        }])
        .solve();
    close(beam.after(0, Effect::My, 1.0), EI * ALPHA * 50.0, 0.0);
    close(beam.after(0, Effect::W, 2.0), 0.0, 1.0);
}

#[test]
fn twist_follows_the_right_hand_about_the_member() {
    let shaft = space()
        .node("A", [0.0; 3])
        .node("B", [2.0, 0.0, 0.0])
        .support("A", FIXED)
        .member("S1", &["A", "B"])
        .case(vec![on_node(1, [0.0; 3], [7.0, 0.0, 0.0])])
        .solve();
    close(shaft.after(0, Effect::T, 1.0), 7.0, 0.0);
    close(shaft.before(0, Effect::ThetaX, 2.0), 7.0 * 2.0 / (G * I_T), 0.0);
    close(shaft.reaction("A")[3], -7.0, 0.0);
}

#[test]
fn a_sideways_load_puts_tension_on_the_minus_y_face_when_it_acts_along_minus_y() {
    let beam = space()
        .node("A", [0.0; 3])
        .node("B", [6.0, 0.0, 0.0])
        .support("A", FORK)
        .support("B", ROLLER)
        .member("B1", &["A", "B"])
        .case(vec![line(0, 6.0, [0.0, -10.0, 0.0])])
        .solve();
    close(beam.after(0, Effect::Mz, 3.0), 45.0, 0.0);
    close(beam.after(0, Effect::Vy, 0.0), 30.0, 0.0);
    close(beam.after(0, Effect::V, 3.0), -5.0 * 10.0 * 1296.0 / (384.0 * E * I_Z), 0.0);
    // θ_z = v′.
    close(beam.after(0, Effect::ThetaZ, 0.0), -10.0 * 216.0 / (24.0 * E * I_Z), 0.0);
}

#[test]
fn a_hanging_bar_is_pulled_by_its_weight() {
    // N falls linearly from the top; elongation q L²/2EA.
    let bar = plane()
        .node("A", [0.0, 0.0, 4.0])
        .node("B", [0.0; 3])
        .support("A", FIXED)
        .member("H1", &["A", "B"])
        .case(vec![line(0, 4.0, [0.0, 0.0, -100.0])])
        .solve();
    close(bar.after(0, Effect::N, 0.0), 400.0, 0.0);
    close(bar.before(0, Effect::N, 4.0), 0.0, 400.0);
    close(bar.before(0, Effect::U, 4.0), 100.0 * 16.0 / (2.0 * E * AREA), 0.0);
}

#[test]
fn loads_inside_a_member_are_exact() {
    // Simple beam, L = 5: triangular load 0 … 12 on [1, 4] and a moment of 6 (right hand) at 2.
    let triangle = LoadKind::Line {
        member: MemberId(0),
        from: 1.0,
        to: 4.0,
        start: [0.0; 3],
        end: [0.0, 0.0, -12.0],
    };
    let moment =
        LoadKind::Point { member: MemberId(0), at: 2.0, force: [0.0; 3], moment: [0.0, 6.0, 0.0] };
    let beam = plane()
        .node("A", [0.0; 3])
        .node("B", [5.0, 0.0, 0.0])
        .support("A", PINNED)
        .support("B", ROLLER)
        .member("B1", &["A", "B"])
        .case(vec![triangle, moment])
        .solve();
    // Resultant 18 at x = 3; about B: A·5 = 18·2 − 6 (a clockwise moment lifts A's share).
    let left = (18.0 * 2.0 - 6.0) / 5.0;
    close(beam.reaction("A")[2], left, 0.0);
    // M at 2: A·2 − ∫ (load up to 2: intensity 4 at 2, resultant 2, lever 1/3).
    let before = left * 2.0 - 2.0 / 3.0;
    close(beam.before(0, Effect::My, 2.0), before, 0.0);
    close(beam.after(0, Effect::My, 2.0), before + 6.0, 0.0);
    close(beam.before(0, Effect::My, 5.0), 0.0, 10.0);
}

#[test]
fn an_overhang_is_measured_from_the_undeformed_line_through_its_support() {
    // q on the back span lifts the overhang straight, by the support's rotation.
    let beam = plane()
        .node("A", [0.0; 3])
        .node("B", [6.0, 0.0, 0.0])
        .node("C", [8.0, 0.0, 0.0])
        .support("A", PINNED)
        .support("B", ROLLER)
        .member("B1", &["A", "B", "C"])
        .span(0.0, 6.0, [false; 2])
        .span(6.0, 8.0, [false, true])
        .case(vec![LoadKind::Line {
            member: MemberId(0),
            from: 0.0,
            to: 6.0,
            start: [0.0, 0.0, -10.0],
            end: [0.0, 0.0, -10.0],
        }])
        .solve();
    let rotation = 10.0 * 216.0 / (24.0 * EI);
    close(beam.before(0, Effect::Dz, 8.0), 2.0 * rotation, 0.0);
    close(beam.before(0, Effect::Dz, 6.0), 0.0, rotation);
}

#[test]
fn a_turned_roller_reacts_at_right_angles_to_its_plane() {
    // Roller on a 45° incline: its own Z points up and left.
    let root = 0.5_f64.sqrt();
    let axes = [[root, 0.0, root], [0.0, 1.0, 0.0], [-root, 0.0, root]];
    let beam = plane()
        .node("A", [0.0; 3])
        .node("B", [4.0, 0.0, 0.0])
        .support("A", PINNED)
        .turned("B", ROLLER, axes)
        .member("B1", &["A", "B"])
        .case(vec![line(0, 4.0, [0.0, 0.0, -10.0])])
        .solve();
    // Vertical part 20, so the reaction is 20√2 and pushes the beam to the left.
    close(beam.reaction("B")[2], 20.0 / root, 0.0);
    close(beam.reaction("A")[0], 20.0, 0.0);
    close(beam.after(0, Effect::N, 2.0), -20.0, 0.0);
}

#[test]
fn reactions_are_handed_on_turned_round() {
    let handed = LoadKind::Handed(Handed {
        from: NodeId(1),
        to: Target::Member(MemberId(1)),
        at: vec![1.0, 2.0, 3.0],
    });
    let both = plane()
        .node("A", [0.0; 3])
        .node("B", [3.0, 0.0, 0.0])
        .support("A", PINNED)
        .support("B", ROLLER)
        .member("joist", &["A", "B"])
        .structure(Frame::Plane)
        .node("C", [0.0; 3])
        .node("D", [4.0, 0.0, 0.0])
        .support("C", PINNED)
        .support("D", ROLLER)
        .member("beam", &["C", "D"])
        .case(vec![line(0, 3.0, [0.0, 0.0, -2.0]), handed])
        .solve();
    assert_eq!(both.solution.handed.len(), 1);
    close(both.solution.handed[0].force[2], -3.0, 0.0);
    // Three forces of 3 at the quarter points of 4 m: M = P L / 2.
    close(both.after(1, Effect::My, 2.0), 6.0, 0.0);
    close(both.reaction("C")[2], 4.5, 0.0);
}
