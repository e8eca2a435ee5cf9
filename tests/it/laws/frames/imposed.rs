//! Settlement, warming and lack of fit.

use spanfolio::model::{Effect, Freedom, LoadKind, MemberId, NodeId};

use super::build::*;

fn bar(right: [Freedom; 6]) -> Build {
    plane()
        .node("A", [0.0; 3])
        .node("B", [5.0, 0.0, 0.0])
        .support("A", FIXED)
        .support("B", right)
        .member("B1", &["A", "B"])
}

fn sinking(node: usize, by: f64) -> LoadKind {
    let mut all = [None; 6];
    all[2] = Some(by);
    LoadKind::Displaced { node: NodeId(node), by: all }
}

#[test]
fn a_sinking_end_bends_a_beam_held_at_both() {
    // M = 6 E I δ / L², V = 12 E I δ / L³.
    let beam = bar(FIXED).case(vec![sinking(1, -0.01)]).solve();
    close(beam.after(0, Effect::My, 0.0), -6.0 * EI * 0.01 / 25.0, 0.0);
    close(beam.reaction("A")[2], 12.0 * EI * 0.01 / 125.0, 0.0);
    close(beam.displacement("B")[2], -0.01, 0.0);
}

#[test]
fn the_ground_under_a_spring_moves_the_beam_through_the_spring() {
    let stiffness = 5e5;
    let mut freedoms = FREE;
    freedoms[2] = Freedom::Spring(stiffness);
    let beam = bar(freedoms).case(vec![sinking(1, -0.02)]).solve();
    // Cantilever stiffness and spring in series.
    let cantilever = 3.0 * EI / 125.0;
    let force = 0.02 / (1.0 / cantilever + 1.0 / stiffness);
    close(beam.reaction("B")[2], -force, 0.0);
    close(beam.displacement("B")[2], -force / cantilever, 0.0);
}

#[test]
fn warming_between_fixed_ends_presses() {
    let warming =
        |member| LoadKind::Warming { member, mean: 30.0, gradient_z: 0.0, gradient_y: 0.0 };
    let held = bar(FIXED).case(vec![warming(MemberId(0))]).solve();
    close(held.after(0, Effect::N, 2.0), -E * AREA * ALPHA * 30.0, 0.0);
    close(held.after(0, Effect::U, 2.5), 0.0, 1e-3);
    let free = bar(FREE).case(vec![warming(MemberId(0))]).solve();
    close(free.after(0, Effect::N, 2.0), 0.0, 1.0);
    close(free.displacement("B")[0], ALPHA * 30.0 * 5.0, 0.0);
}

#[test]
fn a_gradient_bends_a_free_cantilever_without_force() {
    // Top hotter by 40 K/m of depth: w″ = −α 40, the tip goes down by α 40 L²/2.
    let beam = bar(FREE)
        .case(vec![LoadKind::Warming {
            member: MemberId(0),
            mean: 0.0,
            gradient_z: 40.0,
            gradient_y: 0.0,
        }])
        .solve();
    close(beam.displacement("B")[2], -ALPHA * 40.0 * 12.5, 0.0);
    close(beam.after(0, Effect::My, 2.0), 0.0, 1.0);
}

#[test]
fn a_member_made_too_long_presses_where_it_is_held() {
    let held =
        bar(FIXED).case(vec![LoadKind::LackOfFit { member: MemberId(0), length: 0.002 }]).solve();
    close(held.after(0, Effect::N, 1.0), -E * AREA * 0.002 / 5.0, 0.0);
}
