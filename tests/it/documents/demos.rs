//! Every demo project reads, resolves and solves, and governs as calculated by hand (`docs/hand-checks.md`).

use spanfolio::model::{Effect, Model, Side};
use spanfolio::project;
use spanfolio::record::Record;

use crate::support::{self, solved_demo};

const DEMOS: [&str; 3] = ["gallery-floor", "workshop-portal", "pump-platform"];

fn demo(name: &str) -> Model {
    project::read(&support::demo(name)).unwrap_or_else(|problems| panic!("{name}: {problems:#?}")).0
}

#[test]
fn every_demo_solves() {
    for name in DEMOS {
        let model = demo(name);
        let solution = spanfolio::analysis::solve(&model)
            .unwrap_or_else(|problems| panic!("{name}: {problems:#?}"));
        assert_eq!(solution.states.len(), model.cases.len() + model.parts.len());
    }
}

/// Governing value of a member in SI, with the content of its combination.
fn governing(
    record: &Record,
    member: &str,
    purpose: &str,
    effect: Effect,
    greatest: bool,
) -> (f64, String) {
    let extremes = &record.results.members[member].governing[purpose][effect.name()];
    let extreme = if greatest { &extremes.max } else { &extremes.min };
    let (_, content) = extreme.state.rsplit_once(" | ").expect("a combination");
    (extreme.value, content.to_owned())
}

fn near(computed: f64, by_hand: f64, tolerance: f64) {
    assert!((computed / by_hand - 1.0).abs() <= tolerance, "{computed}, by hand {by_hand}");
}

/// Simple beam: q L²/8, q L/2, 5 q L⁴/384 E I + q L²/8 G A_s (common practice, no source).
#[test]
fn the_joist_of_the_gallery_floor_is_a_simple_beam() {
    let record = solved_demo("gallery-floor");
    let dead = 0.075 * 0.22 * 420.0 * 9.80665 + 540.0 * 0.4;
    let (strength, service) = (1.35 * dead + 1.5 * 2000.0, dead + 2000.0);
    let (moment, combination) = governing(&record, "J2", "strength", Effect::My, true);
    near(moment, strength * 3.6 * 3.6 / 8.0, 1e-9);
    assert_eq!(combination, "1.35 G + 1.5 Q1 + 1.5 Q2 + 1.5 H");
    near(governing(&record, "J2", "strength", Effect::Vz, true).0, strength * 1.8, 1e-9);
    let second = 0.075 * 0.22 * 0.22 * 0.22 / 12.0;
    let bending = 5.0 * service * 3.6 * 3.6 * 3.6 * 3.6 / (384.0 * 11e9 * second);
    let shear = service * 3.6 * 3.6 / (8.0 * 690e6 * 0.075 * 0.22 * 5.0 / 6.0);
    near(governing(&record, "J2", "characteristic", Effect::Dz, false).0, -(bending + shear), 1e-9);
}

/// The weight that comes down on the post is what the beam's support carries.
#[test]
fn the_post_of_the_gallery_floor_carries_the_beams_reaction() {
    let record = solved_demo("gallery-floor");
    let reaction = |case: &str| record.reaction("B", case).expect("a support")[2];
    let own = record.effect("P1", Effect::N, "G", 0.0, Side::After).expect("a place")
        - record.effect("P1", Effect::N, "G", 2.7, Side::Before).expect("a place");
    let by_hand = -1.35 * reaction("G") - 1.5 * (reaction("Q1") + reaction("Q2") + reaction("H"))
        + 1.35 * own;
    near(governing(&record, "P1", "strength", Effect::N, false).0, by_hand, 1e-9);
}

/// Pinned portal with pitched rafters under vertical load: Kleinlogel, Rigid Frame Formulas, from memory.
/// The formula leaves out axial and shear deformation: half a per cent.
#[test]
fn the_portal_thrusts_as_published() {
    let record = solved_demo("workshop-portal");
    let second = |name: &str| record.model.sections[name].properties["I_y"];
    let (span, height, rise) = (17.0_f64, 5.2_f64, 1.5_f64);
    let slope = (8.5 * 8.5 + rise * rise).sqrt();
    let k = second("rafter") / second("column") * height / slope;
    let m = 1.0 + rise / height;
    let n = 2.0 * (k + 1.0) + m + m * (1.0 + 2.0 * m);
    let thrust = |w: f64| w * span * span * (3.0 + 5.0 * m) / (16.0 * n * height);
    let snow = 720.0 * 5.5;
    near(record.reaction("A", "S").expect("a support")[0], thrust(snow), 5e-3);
    near(record.reaction("A", "S").expect("a support")[2], snow * span / 2.0, 1e-9);
    let apex = snow * span * span / 8.0 - thrust(snow) * (height + rise);
    let computed = record.effect(
        "R1",
        Effect::My,
        "S",
        record.member("R1").expect("a member").length,
        Side::Before,
    );
    near(computed.expect("a place"), apex, 2e-2);
}

/// Beam hinged at both ends with a force at midspan: F L/4 + q L²/8 (common practice, no source).
#[test]
fn the_beam_under_the_pump_is_a_simple_beam() {
    let record = solved_demo("pump-platform");
    const KIP: f64 = 4_448.221_615_260_5;
    const FOOT: f64 = 0.3048;
    let (length, force) = (8.0 * FOOT, |kip: f64| kip * KIP);
    let load = record.model.cases["DL"].loads.iter().find(|load| {
        load.form == "self_weight"
            && matches!(&load.target, spanfolio::record::TargetRecord::Member(name) if name == "X1")
    });
    let own = load.expect("a weight").values[0];
    let dead = force(2.4) * length / 4.0 + own * length * length / 8.0;
    let live = force(1.1) * length / 4.0;
    let (moment, combination) = governing(&record, "X1", "strength", Effect::My, true);
    near(moment, 1.2 * dead + 1.6 * live, 1e-9);
    assert_eq!(combination, "1.2 DL + 1.6 LL");
    near(record.model.cases["WX"].resultant["main"][0], force(1.8), 1e-9);
}
