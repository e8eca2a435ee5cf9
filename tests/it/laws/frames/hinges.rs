//! Hinges, springs and members that carry axial force only.

use spanfolio::model::{Effect, Freedom, Release};

use super::build::*;

fn two_spans() -> Build {
    plane()
        .node("A", [0.0; 3])
        .node("B", [4.0, 0.0, 0.0])
        .node("C", [7.0, 0.0, 0.0])
        .support("A", FIXED)
        .support("C", ROLLER)
        .member("B1", &["A", "B", "C"])
}

#[test]
fn no_moment_passes_a_hinge_at_an_inner_node() {
    // Cantilever A-B carries half of the hung-in span B-C: P/2 at its tip.
    let beam = two_spans()
        .hinge(1, &[(Effect::My, Release::Free)])
        .case(vec![point(0, 5.5, [0.0, 0.0, -8.0])])
        .solve();
    close(beam.before(0, Effect::My, 4.0), 0.0, 8.0);
    close(beam.after(0, Effect::My, 4.0), 0.0, 8.0);
    close(beam.after(0, Effect::My, 0.0), -16.0, 0.0);
    close(beam.before(0, Effect::My, 5.5), 4.0 * 1.5, 0.0);
    let tip = -4.0 * 64.0 / (3.0 * EI);
    close(beam.displacement("B")[2], tip, 0.0);
    // The rotation jumps over the hinge; the node goes with the piece before it.
    close(beam.before(0, Effect::ThetaY, 4.0), beam.displacement("B")[4], 0.0);
    assert!(beam.after(0, Effect::ThetaY, 4.0) < beam.before(0, Effect::ThetaY, 4.0));
}

#[test]
fn a_hinge_with_a_spring_turns_by_moment_over_stiffness() {
    let stiffness = 2e6;
    let beam = two_spans()
        .hinge(1, &[(Effect::My, Release::Spring(stiffness))])
        .case(vec![point(0, 5.5, [0.0, 0.0, -8.0])])
        .solve();
    let moment = beam.after(0, Effect::My, 4.0);
    let jump = beam.after(0, Effect::ThetaY, 4.0) - beam.before(0, Effect::ThetaY, 4.0);
    // Sagging moments open the joint downward: w′ grows, θ_y = −w′ falls.
    close(jump, -moment / stiffness, 1e-9);
    assert!(moment.abs() > 0.1);
}

#[test]
fn a_shear_hinge_passes_moment_but_no_shear() {
    let beam = plane()
        .node("A", [0.0; 3])
        .node("B", [3.0, 0.0, 0.0])
        .node("C", [6.0, 0.0, 0.0])
        .support("A", FIXED)
        .support("C", FIXED)
        .member("B1", &["A", "B", "C"])
        .hinge(1, &[(Effect::Vz, Release::Free)])
        .case(vec![line(0, 6.0, [0.0, 0.0, -10.0])])
        .solve();
    close(beam.before(0, Effect::Vz, 3.0), 0.0, 30.0);
    close(beam.after(0, Effect::Vz, 3.0), 0.0, 30.0);
    // By symmetry the joint does not turn: both halves are guided cantilevers, M_tip = q L²/6.
    close(beam.after(0, Effect::My, 3.0), 10.0 * 9.0 / 6.0, 0.0);
    close(beam.after(0, Effect::My, 0.0), -10.0 * 9.0 / 3.0, 0.0);
}

#[test]
fn an_expansion_joint_passes_no_axial_force() {
    let bar = plane()
        .node("A", [0.0; 3])
        .node("B", [2.0, 0.0, 0.0])
        .support("A", FIXED)
        .support("B", FIXED)
        .member("B1", &["A", "B"])
        .hinge(1, &[(Effect::N, Release::Free)])
        .case(vec![line(0, 2.0, [50.0, 0.0, 0.0])])
        .solve();
    close(bar.after(0, Effect::N, 0.0), 100.0, 0.0);
    close(bar.reaction("A")[0], -100.0, 0.0);
    close(bar.reaction("B")[0], 0.0, 100.0);
    close(bar.before(0, Effect::U, 2.0), 50.0 * 4.0 / (2.0 * E * AREA), 0.0);
}

#[test]
fn a_triangle_of_bars_needs_no_stiffness_against_rotation() {
    // Bars at 45° to a loaded apex: each carries P/√2 in compression.
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
        .case(vec![on_node(2, [0.0, 0.0, -10.0], [0.0; 3])])
        .solve();
    close(truss.after(0, Effect::N, 1.0), -10.0 * 0.5_f64.sqrt(), 0.0);
    close(truss.after(2, Effect::N, 1.0), 5.0, 0.0);
    close(truss.after(0, Effect::My, 1.0), 0.0, 1.0);
}

#[test]
fn a_space_truss_of_bars_is_solved() {
    // Tripod of height 3 over feet on a circle of radius 4: bars of length 5, N = −P·5/(3·3).
    let feet = [[4.0, 0.0, 0.0], [-2.0, 12.0_f64.sqrt(), 0.0], [-2.0, -(12.0_f64.sqrt()), 0.0]];
    let mut tripod = space().node("T", [0.0, 0.0, 3.0]);
    for (name, foot) in ["A", "B", "C"].into_iter().zip(feet) {
        tripod =
            tripod.node(name, foot).support(name, PINNED).member(name, &[name, "T"]).axial_only();
    }
    let tripod = tripod.case(vec![on_node(0, [0.0, 0.0, -9.0], [0.0; 3])]).solve();
    for member in 0..3 {
        close(tripod.after(member, Effect::N, 2.0), -5.0, 0.0);
        close(tripod.after(member, Effect::T, 2.0), 0.0, 1.0);
    }
}

#[test]
fn a_loaded_bar_hinged_at_both_ends_bends_like_a_simple_beam() {
    let bar = plane()
        .node("A", [0.0; 3])
        .node("B", [6.0, 0.0, 0.0])
        .support("A", FIXED)
        .support("B", FIXED)
        .member("B1", &["A", "B"])
        .axial_only()
        .case(vec![line(0, 6.0, [0.0, 0.0, -10.0])])
        .solve();
    close(bar.after(0, Effect::My, 3.0), 45.0, 0.0);
    close(bar.after(0, Effect::W, 3.0), -5.0 * 10.0 * 1296.0 / (384.0 * EI), 0.0);
    close(bar.reaction("A")[4], 0.0, 45.0);
}

#[test]
fn a_spring_support_gives_way_by_force_over_stiffness() {
    let mut freedoms = ROLLER;
    freedoms[2] = Freedom::Spring(4e5);
    let beam = plane()
        .node("A", [0.0; 3])
        .node("B", [6.0, 0.0, 0.0])
        .support("A", PINNED)
        .support("B", freedoms)
        .member("B1", &["A", "B"])
        .span(0.0, 6.0, [false; 2])
        .case(vec![line(0, 6.0, [0.0, 0.0, -10.0])])
        .solve();
    close(beam.reaction("B")[2], 30.0, 0.0);
    close(beam.displacement("B")[2], -30.0 / 4e5, 0.0);
    // Deflection from the chord does not feel the support give way.
    close(beam.after(0, Effect::Dz, 3.0), -5.0 * 10.0 * 1296.0 / (384.0 * EI), 0.0);
}

#[test]
fn a_node_held_against_twist_needs_no_further_hold_where_an_oblique_member_is_hinged() {
    // What the hinge still passes on is torque about an oblique axis: one direction out of the two free ones.
    let release = [(Effect::My, Release::Free), (Effect::Mz, Release::Free)];
    let beam = space()
        .node("A", [0.0; 3])
        .node("B", [2.0, 2.0, 1.0])
        .support("A", FORK)
        .support("B", FIXED)
        .member("B1", &["A", "B"])
        .hinge(0, &release)
        .case(vec![point(0, 1.5, [0.0, 0.0, -9.0])])
        .solve();
    // A propped cantilever of length 3, a = b = 1.5, force across the member 9·√8/3: R = 5 P/16.
    let across = 9.0 * 8.0_f64.sqrt() / 3.0;
    close(beam.after(0, Effect::Vz, 0.0), 5.0 / 16.0 * across, 0.0);
    close(beam.after(0, Effect::T, 0.0), 0.0, 9.0);
}
