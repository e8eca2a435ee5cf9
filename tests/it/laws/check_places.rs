//! Where checks are evaluated: jumps, conditions that fail between two samples, spans of a whole member, and
//! the cases that a load duration counts.

use spanfolio::diagnostic::Diagnostic;
use spanfolio::record::{CheckRecord, StepValueRecord};

use crate::support::{solved, sources};

/// A 10 m beam with an overhang of 2 m under 8 kN/m, by statics: R_A = 8 × 10 × (8 − 5) / 8 = 30 kN and
/// M(x) = 30 x − 4 x² left of B; and a simple beam of 4 m under 1 kN/m in another structure.
fn project(checks: &str) -> String {
    format!(
        "format: 1
project: {{title: Beam, number: 1, revisions: [{{mark: A, date: 2026-01-01, status: test}}]}}
shear_deformation: false
materials: {{steel: {{grade: S275}}}}
sections: {{beam: {{catalogue: IPE 300}}}}
structures:
  main:
    frame: plane
    nodes: {{A: [0 m, 0 m], B: [8 m, 0 m], C: [10 m, 0 m]}}
    members: {{B1: {{along: [A, B, C], section: beam, material: steel}}}}
    supports: {{A: pinned, B: {{Z: fixed}}}}
  other:
    frame: plane
    nodes: {{D: [0 m, 5 m], E: [4 m, 5 m]}}
    members: {{B2: {{along: [D, E], section: beam, material: steel}}}}
    supports: {{D: pinned, E: {{Z: fixed}}}}
load_cases:
  Q: {{title: Q, nature: imposed, duration: long, loads: [{{member: B1, uniform: 8 kN/m}}]}}
  S: {{title: S, nature: snow, duration: short, loads: [{{member: B2, uniform: 1 kN/m}}]}}
combinations:
  written:
    - {{title: all, purpose: strength, factors: {{Q: 1, S: 1}}}}
checks:
  - {checks}
"
    )
}

fn own(rest: &str) -> String {
    format!("{{id: c, title: t, reference: r, purpose: strength, {rest}}}")
}

fn checked(check: &str) -> CheckRecord {
    solved(&project(&own(check))).checks.swap_remove(0)
}

fn refused(check: &str) -> Diagnostic {
    let yaml = project(&own(check));
    let mut problems =
        spanfolio::solve(&sources(&yaml)).map(|_| ()).expect_err("a mistake is found");
    problems.swap_remove(0)
}

/// Left of x = 1.3 m, where no sample lies, the capacity is
/// smaller: the utilisation just before it is greater than at midspan, where that of all samples is greatest.
#[test]
fn a_jump_between_two_samples_is_found() {
    let check = checked(
        "members: [B1], spans: [1], demand: abs(M_y), capacity: \"if x < 1.3 m then 25 kN m else 70 kN m\"",
    );
    let by_hand = (30.0 * 1.3 - 4.0 * 1.3 * 1.3) / 25.0;
    assert_eq!(check.outcome, "not satisfied");
    // The place is known to a millionth of the length.
    let found = check.utilisation.expect("a utilisation");
    assert!((found - by_hand).abs() <= 1e-5 && found <= by_hand, "{found} {by_hand}");
    assert!((check.x.expect("a place") - 1.3).abs() <= 1e-5);
}

/// Bounds of the brackets are 0, 3.75 m (V = 0), 7.5 m (M = 0) and 8 m: samples lie 0.47 m apart.
#[test]
fn a_condition_that_fails_between_two_samples_defers() {
    for condition in ["(x - 1.65 m)^2 >= 0.01 m2", "x < 1.6 m or x > 1.7 m"] {
        let check = checked(&format!(
            "members: [B1], spans: [1], valid_if: [{{condition: \"{condition}\", reason: not there}}], demand: abs(M_y), capacity: 900 kN m",
        ));
        let reason = check.reason.unwrap_or_default();
        assert_eq!(check.outcome, "deferred", "{condition}");
        assert!(reason.starts_with("not there (C1 at x = 1.6"), "{reason}");
    }
}

#[test]
fn a_demand_that_is_below_zero_between_two_samples_defers() {
    let check =
        checked("members: [B1], spans: [1], demand: (x - 1.65 m)^2 - 0.01 m2, capacity: 900 m2");
    assert_eq!(check.outcome, "deferred");
}

/// The member as a whole has one free end, but only its second span is a cantilever.
#[test]
fn a_sheet_for_cantilevers_does_not_pass_other_spans() {
    let of = |sheet: &str, rest: &str| {
        let check = format!(
            "{{id: c, sheet: {sheet}, members: [B1], purpose: strength, with: {{ratio: 1}}{rest}}}"
        );
        solved(&project(&check)).checks.swap_remove(0).outcome
    };
    assert_eq!(of("cantilever deflection", ""), "deferred");
    assert_eq!(of("span deflection", ""), "deferred");
    assert_eq!(of("cantilever deflection", ", spans: [2]"), "satisfied");
    assert_eq!(of("span deflection", ", spans: [1]"), "satisfied");
}

/// Short-term snow on another structure does not make a beam stronger.
#[test]
fn only_cases_that_act_on_the_target_set_its_load_duration() {
    let k = "demand: abs(M_y), capacity: \"choose(duration; 'long', 70 kN m; 'short', 90 kN m)\"";
    let utilisation = |member: &str| {
        let check = checked(&format!("members: [{member}], {k}"));
        check.utilisation.expect("a utilisation")
    };
    assert!((utilisation("B1") - 56.25 / 70.0).abs() < 1e-9);
    assert!((utilisation("B2") - 2.0 / 90.0).abs() < 1e-9);
}

#[test]
fn a_node_relative_to_itself_is_refused() {
    let problem = refused("node: C, relative_to: C, demand: abs(displacement_Z), capacity: 1 mm");
    assert_eq!(problem.message, "`C` does not move relative to itself");
}

#[test]
fn a_step_with_the_name_of_a_value_in_reach_is_refused() {
    let problem = refused("members: [B1], let: {M_y: 0 kN m}, demand: abs(M_y), capacity: 1 kN m");
    assert_eq!(problem.message, "the step `M_y` has the name of a value of member B1");
}

#[test]
fn a_node_against_another_is_named_so() {
    let check = checked("node: C, relative_to: A, demand: abs(displacement_Z), capacity: 1000 mm");
    assert_eq!(check.on_words(), "node C against A");
}

#[test]
fn arguments_that_say_nothing_are_refused() {
    for (call, message) in [
        ("effect('B1', 'M_y', at=2 m, state='Q', side='aftr')", "`side` is `before` or `after`"),
        ("effect('B1', 'M_y', at=9 m, span=1, state='Q')", "9 m is not on the span"),
        ("effect('B1', 'M_y', at=1 m, span=1 m, state='Q')", "`span` is a number"),
        ("effect('B1', 'M_y', at=1 m, at=2 m, state='Q')", "`at` is given twice"),
        ("reaction('A', 'Z', state='Q', at=2 m)", "`reaction` has no argument `at`"),
    ] {
        let yaml = project(&own("members: [B1], demand: abs(M_y), capacity: 900 kN m"));
        let mut sources = sources(&yaml);
        let text = format!("# By hand\n\n```working\nM = {call}\n```\n");
        sources.files.insert("narrative/a.md".to_owned(), text.into_bytes());
        let problems = spanfolio::solve(&sources).map(|_| ()).expect_err("a mistake is found");
        assert_eq!(problems[0].message, message);
    }
}

/// The strengths of a grade without `thickness` are those up to 40 mm.
#[test]
fn a_flange_thicker_than_the_strengths_allow_is_a_warning() {
    let of = |material: &str| {
        let yaml = project(&own("members: [B1], demand: abs(M_y), capacity: 900 kN m"))
            .replace("grade: S275", material)
            .replace(
                "catalogue: IPE 300",
                "shape: I, depth: 500 mm, width: 300 mm, web: 20 mm, flange: 45 mm",
            );
        let warnings = spanfolio::solve(&sources(&yaml)).expect("a record").warnings;
        warnings.into_iter().map(|warning| warning.message).collect::<Vec<_>>()
    };
    let said = "section `beam` is 45 mm thick, and material `steel` has its strengths up to 40 mm";
    assert_eq!(of("grade: S275"), [said]);
    assert!(of("grade: S275, thickness: 45 mm").is_empty());
}

/// Megapascals stood beside kips per square inch.
#[test]
fn a_sheet_of_the_catalogue_prints_in_the_units_of_the_project() {
    let check = "{id: c, sheet: combined stress, members: [B1], purpose: strength}";
    let units = |system: &str| {
        let yaml =
            project(check).replace("shear_deformation", &format!("{system}shear_deformation"));
        let check = solved(&yaml).checks.swap_remove(0);
        match check.demand.expect("a demand").value {
            StepValueRecord::Number(_, unit) => unit,
            other => panic!("{other:?}"),
        }
    };
    assert_eq!(units(""), "MPa");
    assert_eq!(units("units: {system: US}\n"), "ksi");
}

/// At B the shear jumps from 30 − 64 = −34 kN to 16 kN: the first place of the second span lies behind it.
#[test]
fn the_ends_of_a_named_span_lie_on_its_side_of_the_support() {
    let yaml = project(&own("members: [B1], demand: abs(M_y), capacity: 900 kN m"));
    let mut sources = sources(&yaml);
    let of = |at: &str| format!("effect('B1', 'V_z', at={at}, state='Q')");
    let text = format!(
        "# By hand\n\n```working\nagree before: -34 kN with {} within 0.1 %\nagree behind: 16 kN with {} within 0.1 %\n```\n",
        of("8 m, span=1"),
        of("0 m, span=2")
    );
    sources.files.insert("narrative/a.md".to_owned(), text.into_bytes());
    let record = spanfolio::solve(&sources).expect("a record").record;
    let agreements = record.checks.iter().filter(|check| check.kind == "agreement");
    assert!(agreements.clone().all(|check| check.outcome == "satisfied"));
    assert_eq!(agreements.count(), 2);
}

#[test]
fn a_limit_above_one_stands_among_the_open_items() {
    let of = |limit: &str| {
        let check =
            own(&format!("members: [B1], demand: abs(M_y), capacity: 50 kN m, limit: {limit}"));
        let items = solved(&project(&check)).registers.open_items;
        items.into_iter().find(|item| item.kind == "limit").map(|item| item.text)
    };
    assert_eq!(of("1.2").as_deref(), Some("The check c accepts utilisations up to 1.2."));
    assert_eq!(of("0.9"), None);
}
