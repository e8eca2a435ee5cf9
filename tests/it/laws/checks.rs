//! Checks: the worst place found where it is, and the rules of their outcomes.

use proptest::prelude::*;
use spanfolio::diagnostic::Diagnostic;
use spanfolio::files::Sources;
use spanfolio::record::{CheckRecord, Record, StepValueRecord};

use crate::support::{solved, sources};

/// A 6 m column-beam with an axial load that grows along it, a uniform load and a point load, and checks.
fn beam(more: &str) -> String {
    format!(
        "format: 1
project: {{title: Beam, number: 1, revisions: [{{mark: A, date: 2026-01-01, status: test}}]}}
basis: {{assumptions: [{{id: A1, text: The floor holds the flange, status: to confirm}}]}}
shear_deformation: false
values: {{q_allow: {{value: 200 kPa}}}}
materials: {{steel: {{grade: S275}}, timber: {{grade: C24}}}}
sections: {{beam: {{catalogue: IPE 300}}, plain: {{given: {{A: 50 cm2, I_y: 8000 cm4, I_z: 600 cm4, I_t: 20 cm4, W_el_y: 500 cm3}}}}}}
frame: plane
nodes: {{A: [0 m, 0 m], B: [6 m, 0 m], C: [8 m, 0 m]}}
members:
  B1: {{along: [A, B, C], section: beam, material: steel, held: {{top: [B]}}}}
supports: {{A: pinned, B: {{Z: fixed}}}}
load_cases:
  G: {{title: G, nature: permanent, duration: permanent, loads: [{{member: B1, uniform: 4 kN/m}}]}}
  Q: {{title: Q, nature: imposed, duration: medium, loads: [{{member: B1, span: 1, uniform: 10 kN/m}}]}}
  P: {{title: P, nature: imposed, duration: short, loads: [{{member: B1, point: 9 kN, at: 8 m}}, {{member: B1, varying: [0 kN/m, 40 kN/m], direction: local -x}}]}}
combinations:
  written:
    - {{title: span, purpose: strength, factors: {{G: 1.35, Q: 1.5}}}}
    - {{title: tip, purpose: strength, factors: {{G: 1.35, P: 1.5}}}}
    - {{title: all, purpose: strength, factors: {{G: 1.35, Q: 1.5, P: 1.5}}}}
    - {{title: use, purpose: characteristic, factors: {{G: 1, Q: 1}}}}
    - {{title: lasting, purpose: quasi-permanent, factors: {{G: 1}}}}
{more}"
    )
}

/// One check in the words of the file.
fn checked(check: &str) -> CheckRecord {
    record(check).checks.swap_remove(0)
}

fn record(check: &str) -> Record {
    solved(&beam(&format!("checks:\n  - {check}\n")))
}

fn refused(check: &str) -> (String, Diagnostic) {
    let yaml = beam(&format!("checks:\n  - {check}\n"));
    let mut problems =
        spanfolio::solve(&sources(&yaml)).map(|_| ()).expect_err("a mistake is found");
    (yaml, problems.swap_remove(0))
}

/// The text that a problem points at.
fn part<'y>(yaml: &'y str, problem: &Diagnostic) -> &'y str {
    &yaml[problem.place.clone().expect("a place").range]
}

fn own(rest: &str) -> String {
    format!("{{id: c, purpose: strength, members: [B1], title: t, reference: r, {rest}}}")
}

/// N(x), V(x) and M(x) of the combination `all` of the left span, by statics: reactions from moments about B.
fn statics(x: f64) -> [f64; 3] {
    let (g, q, p) = (1.35 * 4.0, 1.5 * 10.0, 1.5 * 9.0);
    // Moments about B: R_A 6 = (g + q) 6²/2 − g 2²/2 − p 2.
    let reaction = ((g + q) * 18.0 - g * 2.0 - p * 2.0) / 6.0;
    let moment = reaction * x - (g + q) * x * x / 2.0;
    let shear = reaction - (g + q) * x;
    // Axial load acts along −x, from 0 to 40 kN/m over 8 m: what acts beyond x presses on x.
    let beyond = 1.5 * (40.0 / 8.0) * (64.0 - x * x) / 2.0;
    [-beyond, shear, moment]
}

#[test]
fn an_interaction_is_found_where_no_effect_by_itself_is_greatest() {
    // N is greatest at A, V at B, M near midspan: their sum peaks elsewhere.
    let check = checked(&own(
        "spans: [1], let: {s: \"abs(N) / A + abs(M_y) / W_el_y [MPa]\", t: \"abs(V_z) / A_vz [MPa]\"}, demand: sqrt(s^2 + 3 * t^2), capacity: f_y",
    ));
    let full = record(&own("spans: [1], demand: N, capacity: 1 kN, one_sided: true"));
    let section = &full.model.sections["beam"].properties;
    let (area, modulus, shear) = (section["A"], section["W_el_y"], section["A_vz"]);
    let at = |x: f64| {
        let [n, v, m] = statics(x).map(|value| value * 1e3);
        let (s, t) = (n.abs() / area + m.abs() / modulus, v.abs() / shear);
        (s * s + 3.0 * t * t).sqrt() / 275e6
    };
    let mut best = (0.0, 0.0);
    for step in 0..=600_000 {
        let x = f64::from(step) * 1e-5;
        if at(x) > best.1 {
            best = (x, at(x));
        }
    }
    let (x, utilisation) = (check.x.expect("a place"), check.utilisation.expect("a utilisation"));
    assert_eq!(check.state.as_deref(), Some("strength all | 1.35 G + 1.5 Q + 1.5 P"));
    assert!((utilisation / best.1 - 1.0).abs() <= 1e-9, "{utilisation} {best:?}");
    // A smooth peak is flat: the value fixes its place to the square root of its own precision only.
    assert!((x - best.0).abs() <= 6.0 * 2e-5, "{x} {best:?}");
    // Away from every single extreme: A, B, and where M is greatest.
    let greatest = full.results.members["B1"].spans[0].governing["strength"]["M_y"].max.x;
    let greatest = greatest.expect("a place");
    for single in [0.0, 6.0, greatest] {
        assert!((x - single).abs() > 0.01, "{x} lies at a single extreme, {single}");
    }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(40))]

    /// A check with a kink, a root and a power, against dense scanning of what the Record says of each effect.
    #[test]
    fn no_scan_finds_a_worse_place(
        loads in prop::collection::vec((0.1..7.9_f64, -30.0..30.0_f64), 2..5),
        factors in prop::collection::vec(-1.5..1.5_f64, 3),
        exponent in 1..4_u32,
    ) {
        let mut extra = String::new();
        for (at, force) in &loads {
            extra += &format!("{{member: B1, point: {force:.3} kN, at: {at:.3} m}}, ");
        }
        let yaml = beam(&format!(
            "checks:\n  - {}\n",
            own(&format!(
                "demand: \"(abs(N) / (800 kN))^{exponent} + abs(M_y) / (60 kN m) + (V_z / (90 kN))^2\", capacity: \"1\""
            ))
        ))
        .replace("[{member: B1, point: 9 kN, at: 8 m}, ", &format!("[{extra}"))
        .replace("{G: 1.35, P: 1.5}", &format!("{{G: 1.35, P: {:.3}, Q: {:.3}}}", factors[0], factors[1]));
        let record = solved(&yaml);
        let check = &record.checks[0];
        let found = check.utilisation.expect("a utilisation");
        let mut scanned = 0.0_f64;
        for state in record.combinations.iter().filter(|(_, c)| c.purpose == "strength").map(|(name, _)| name) {
            for step in 0..=8_000 {
                let x = f64::from(step) * 1e-3;
                for side in [spanfolio::model::Side::Before, spanfolio::model::Side::After] {
                    let read = |effect| record.effect("B1", effect, state, x, side).expect("an effect");
                    let share = read(spanfolio::model::Effect::N).abs() / 800e3;
                    let n: f64 = (0..exponent).map(|_| share).product();
                    let m = read(spanfolio::model::Effect::My).abs() / 60e3;
                    let v = read(spanfolio::model::Effect::Vz) / 90e3;
                    scanned = scanned.max(n + m + v * v);
                }
            }
        }
        // The scan may stop a millimetre short of the peak, never above it.
        prop_assert!(found >= scanned * (1.0 - 1e-9), "{found} below {scanned}");
        prop_assert!(found <= scanned * (1.0 + 1e-3), "{found} above {scanned}");
    }

    /// Whatever keeps a check from being evaluated defers it.
    #[test]
    fn what_is_not_evaluated_is_never_satisfied(
        no_combination: bool, invalid: bool, wrong_shape: bool
    ) {
        let purpose = if no_combination { "fire" } else { "strength" };
        let member = if wrong_shape { "section: plain" } else { "section: beam" };
        let condition = if invalid { "length < 1 m" } else { "length > 1 m" };
        let yaml = beam(&format!(
            "checks:\n  - {{id: c, purpose: {purpose}, members: [B1], sheet: own, with: {{f: 1e6 MPa}}, valid_if: [{{condition: {condition}, reason: short only}}]}}\n"
        ))
        .replace("section: beam, material", &format!("{member}, material"));
        let mut sources = sources(&yaml);
        sources.files.insert("checks/own.yaml".to_owned(), OWN.as_bytes().to_vec());
        let record = spanfolio::solve(&sources).expect("a record").record;
        let deferred = no_combination || invalid || wrong_shape;
        let expected = if deferred { "deferred" } else { "satisfied" };
        prop_assert_eq!(&record.checks[0].outcome, expected);
        prop_assert_eq!(record.checks[0].reason.is_some(), deferred);
        prop_assert_eq!(record.is_settled(), !deferred);
    }
}

const OWN: &str = "id: own
title: Stress of our own
code: Office rule 3
on: member
shows: strength
shapes: [I]
inputs:
  f: {meaning: what it may reach}
steps:
  s: {formula: \"abs(M_y) / W_el_y [MPa]\", meaning: stress}
demand: s
capacity: f
assumes: [The office rule holds here.]
cautions: [Not for fatigue.]
";

#[test]
fn a_demand_within_its_capacity_is_satisfied() {
    let check = checked(&own("demand: abs(M_y), capacity: 200 kN m"));
    assert_eq!((check.outcome.as_str(), check.reason), ("satisfied", None));
}

#[test]
fn a_demand_above_its_capacity_is_not_satisfied() {
    assert_eq!(checked(&own("demand: abs(M_y), capacity: 20 kN m")).outcome, "not satisfied");
}

#[test]
fn a_limit_on_the_utilisation_counts() {
    let check = checked(&own("demand: abs(M_y), capacity: 70 kN m"));
    let utilisation = check.utilisation.expect("a utilisation");
    let at = |limit: f64| {
        checked(&own(&format!("demand: abs(M_y), capacity: 70 kN m, limit: {limit}"))).outcome
    };
    assert_eq!(at(utilisation - 1e-6), "not satisfied");
    assert_eq!(at(utilisation + 1e-6), "satisfied");
}

#[test]
fn without_a_combination_of_its_purpose_a_check_is_deferred() {
    let check = checked(
        "{id: c, purpose: fire, members: [B1], title: t, reference: r, demand: abs(M_y), capacity: 1 kN m}",
    );
    assert_eq!(check.outcome, "deferred");
    assert_eq!(check.reason.as_deref(), Some("there is no combination of purpose fire"));
}

#[test]
fn a_condition_that_does_not_hold_defers_with_its_place() {
    let check = checked(&own(
        "demand: abs(M_y), capacity: 200 kN m, valid_if: [{condition: abs(V_z) < 50 kN, reason: shear is too large}]",
    ));
    assert_eq!(check.outcome, "deferred");
    let reason = check.reason.expect("a reason");
    assert!(reason.starts_with("shear is too large (C1 at x = "), "{reason}");
}

#[test]
fn a_condition_keeps_a_formula_from_dividing_by_zero() {
    let check = checked(&own(
        "let: {ratio: 1 kN m / M_y}, demand: abs(ratio), capacity: \"10\", valid_if: [{condition: M_y != 0, reason: no moment}]",
    ));
    assert_eq!(check.outcome, "deferred");
}

#[test]
fn a_demand_below_zero_is_deferred_unless_it_is_meant() {
    let check = checked(&own("demand: M_y, capacity: 200 kN m"));
    assert_eq!(check.outcome, "deferred");
    assert!(check.reason.expect("a reason").starts_with("the demand is below zero (C"));
    let meant = checked(&own("demand: M_y, capacity: 200 kN m, one_sided: true"));
    assert_eq!(meant.outcome, "satisfied");
}

#[test]
fn a_capacity_of_nothing_is_not_satisfied() {
    let check = checked(&own("demand: abs(M_y), capacity: 0 kN m"));
    assert_eq!(check.outcome, "not satisfied");
    assert_eq!(check.reason.as_deref(), Some("the capacity is not above zero"));
    assert_eq!(check.utilisation, None);
}

#[test]
fn a_division_by_zero_is_an_error_at_its_place() {
    let (yaml, problem) = refused(&own("demand: 1 kN / (N / N), capacity: 1 kN"));
    assert_eq!((problem.code, problem.message.as_str()), ("formula", "this divides by zero"));
    assert_eq!(part(&yaml, &problem), "N");
    assert_eq!(problem.label.as_deref(), Some("check `c` on member B1 in C1 at x = 0 m"));
}

#[test]
fn a_demand_and_a_capacity_of_two_kinds_are_an_error() {
    let (yaml, problem) = refused(&own("demand: abs(M_y), capacity: 200 kN"));
    assert_eq!(problem.message, "the demand is a moment, the capacity a force");
    assert_eq!(part(&yaml, &problem), "abs(M_y)");
}

#[test]
fn units_that_do_not_go_together_are_located_in_quoted_formulas_too() {
    let (yaml, problem) =
        refused(&own("let: {a: \"span + 3 kN\"}, demand: abs(M_y), capacity: 1 kN m"));
    assert_eq!(problem.message, "`+` cannot take a length with a force");
    assert_eq!(part(&yaml, &problem), "span + 3 kN");
}

#[test]
fn mistakes_in_words_bring_the_nearest_name() {
    let rows = [
        ("demand: abs(M_yy), capacity: 1 kN m", "unknown-name", "M_yy", "did you mean `M_y`?"),
        (
            "demand: gratest(M_y), capacity: 1 kN m",
            "unknown-name",
            "gratest(M_y)",
            "did you mean `greatest`?",
        ),
        (
            "demand: abs(M_y), capacity: q_alow * A",
            "unknown-name",
            "q_alow",
            "did you mean `q_allow`?",
        ),
        (
            "demand: abs(M_y), capacity: 1 kN m, relies_on: [A2]",
            "unknown-assumption",
            "A2",
            "did you mean `A1`?",
        ),
    ];
    for (rest, code, at, hint) in rows {
        let (yaml, problem) = refused(&own(rest));
        assert_eq!(problem.code, code, "{rest}");
        assert_eq!(part(&yaml, &problem), at, "{rest}");
        assert!(problem.hints.iter().any(|other| other == hint), "{rest}: {:?}", problem.hints);
    }
}

#[test]
fn mistakes_of_checks_are_found_before_anything_is_solved() {
    let rows = [
        ("{id: c, purpose: strength, sheet: sway, with: {ratio: 100}}", "missing-key", "c"),
        ("{id: c, purpose: strength, sheet: swy, node: A}", "unknown-sheet", "swy"),
        (
            "{id: c, purpose: strength, sheet: sway, members: [B1], with: {ratio: 100}}",
            "wrong-target",
            "sway",
        ),
        ("{id: c, purpose: strength, sheet: uplift, node: A}", "missing-key", "uplift"),
        (
            "{id: c, purpose: strength, sheet: uplift, node: A, with: {holding: 3 kN, wind: 2}}",
            "unknown-key",
            "wind",
        ),
        ("{id: c, purpose: strength, sheet: axial stress, members: [B2]}", "unknown-member", "B2"),
        (
            "{id: c, purpose: strength, sheet: axial stress, members: [B1], spans: [3]}",
            "unknown-span",
            "3",
        ),
        (
            "{id: c, purpose: strength, sheet: axial stress, groups: [joists]}",
            "unknown-group",
            "joists",
        ),
        (
            "{id: c, purpose: strength, sheet: uplift, node: A, spans: [1], with: {holding: 3 kN}}",
            "conflicting-keys",
            "1",
        ),
        (
            "{id: c, purpose: strength, sheet: Euler load, members: [B1], with: {factor: 2}}",
            "unknown-name",
            "Euler load",
        ),
    ];
    for (check, code, at) in rows {
        let (yaml, problem) = refused(check);
        assert_eq!(problem.code, code, "{check}: {}", problem.message);
        assert_eq!(part(&yaml, &problem), at, "{check}");
    }
}

#[test]
fn a_name_given_twice_is_an_error() {
    let (_, problem) =
        refused(&own("let: {A_1: 1 mm2, s: N / A_1, A: 2 mm2}, demand: abs(s), capacity: A"));
    assert!(problem.message.contains("`A`") || problem.code == "formula", "{}", problem.message);
}

#[test]
fn only_the_variable_part_counts_where_that_is_asked() {
    let rest =
        "members: [B1], spans: [1], title: t, reference: r, demand: abs(d_z), capacity: 30 mm";
    let all = checked(&format!("{{id: c, purpose: characteristic, {rest}}}"));
    let variable = checked(&format!("{{id: c, purpose: characteristic, only: variable, {rest}}}"));
    assert!(variable.utilisation < all.utilisation);
    // Of a combination of permanent actions nothing is left.
    let none = checked(&format!("{{id: c, purpose: quasi-permanent, only: variable, {rest}}}"));
    assert_eq!(none.outcome, "deferred");
}

#[test]
fn service_means_three_purposes() {
    let check = checked(
        "{id: c, purpose: service, members: [B1], title: t, reference: r, demand: abs(M_y), capacity: 100 kN m}",
    );
    assert_eq!(check.state.as_deref(), Some("characteristic use | 1 G + 1 Q"));
    assert_eq!(check.next.len() + check.further, 1);
}

/// A cantilever over its own support: from the chord the tip moves by what the overhang bends and by what the
/// support turns; from the tangent, by what the overhang bends alone: w l⁴/8EI + P l³/3EI (from memory).
#[test]
fn deflections_of_an_overhang_are_measured_as_asked() {
    let at = |from: &str| {
        let record = record(&format!(
            "{{id: c, purpose: strength, members: [B1], spans: [2], title: t, reference: r, {from}demand: abs(d_z), capacity: 1 m}}"
        ));
        let second = record.model.sections["beam"].properties["I_y"];
        let e = record.model.materials["steel"].e;
        (record.checks[0].utilisation.expect("a utilisation"), e * second)
    };
    let (tangent, stiffness) = at("from: support tangent, ");
    let by_hand = 1.35 * 4e3 * 16.0 / (8.0 * stiffness) + 1.5 * 9e3 * 8.0 / (3.0 * stiffness);
    assert!((tangent / by_hand - 1.0).abs() < 1e-9, "{tangent} {by_hand}");
    assert!(at("from: chord, ").0 > tangent);
    // The support does not sink, so that the line through it is the undeformed one.
    assert!((at("").0 / at("from: undeformed, ").0 - 1.0).abs() < 1e-9);
}

#[test]
fn the_tangent_of_a_span_held_at_both_ends_is_refused() {
    let (_, problem) =
        refused(&own("spans: [1], from: support tangent, demand: abs(d_z), capacity: 1 m"));
    assert_eq!(problem.code, "support-tangent");
}

/// The moment factor of AISC 360 F1 (from memory) of the span under G + Q, by statics:
/// R_A = (14 × 18 − 4 × 2)/6, M(x) = R_A x − 7 x², greatest at R_A/14.
#[test]
fn values_along_the_target_are_in_reach() {
    let check = checked(
        "{id: c, purpose: characteristic, members: [B1], spans: [1], title: t, reference: r, let: {C: \"12.5 * greatest(M_y) / (2.5 * greatest(M_y) + 3 * at(M_y, 0.25) + 4 * at(M_y, 0.5) + 3 * at(M_y, 0.75))\"}, demand: C - least(M_y) / (8 kN m), capacity: \"3\"}",
    );
    let value = |step: usize| match &check.steps[step].value {
        StepValueRecord::Number(value, _) => *value,
        other => panic!("{other:?}"),
    };
    let reaction = (14.0 * 18.0 - 8.0) / 6.0;
    let at = |x: f64| reaction * x - 7.0 * x * x;
    let greatest = at(reaction / 14.0);
    let factor = 12.5 * greatest / (2.5 * greatest + 3.0 * at(1.5) + 4.0 * at(3.0) + 3.0 * at(4.5));
    assert!((value(0) / factor - 1.0).abs() < 1e-9, "{} {factor}", value(0));
    // The moment over B is −4 × 2²/2 = −8 kN m.
    assert!((check.utilisation.expect("a utilisation") - (factor + 1.0) / 3.0).abs() < 1e-9);
}

#[test]
fn the_duration_of_the_combination_is_in_reach() {
    let check = checked(&own(
        "let: {k: \"choose(duration; 'permanent', 0.6; 'medium', 0.8; 'short', 0.9)\"}, demand: abs(M_y) / k, capacity: 500 kN m",
    ));
    assert!(check.steps[0].values.iter().any(|(name, value)| {
        name == "duration"
            && matches!(value, StepValueRecord::Word(word) if word == "short" || word == "medium")
    }));
}

#[test]
fn restraint_and_ends_are_in_reach() {
    let check = checked(&own(
        "spans: [2], demand: \"if cantilever and end_free and not start_free then unheld_top else 0 m\", capacity: 4 m",
    ));
    assert!((check.utilisation.expect("a utilisation") - 0.5).abs() < 1e-12);
}

#[test]
fn a_sheet_of_the_project_is_used_and_its_registers_gather() {
    let yaml = beam(
        "checks:\n  - {id: c, purpose: strength, members: [B1], sheet: own, with: {f: 200 MPa}, relies_on: [A1]}\n",
    );
    let mut sources = sources(&yaml);
    sources.files.insert("checks/own.yaml".to_owned(), OWN.as_bytes().to_vec());
    let record = spanfolio::solve(&sources).expect("a record").record;
    assert_eq!(record.checks[0].reference, "Office rule 3");
    assert_eq!(record.checks[0].cautions, ["Not for fatigue."]);
    assert!(record.basis.assumptions.iter().any(|assumption| assumption.id == "own 1"));
    let open = record.registers.open_items.iter().filter(|item| item.kind == "assumption");
    assert_eq!(open.count(), 2);
}

#[test]
fn a_mistake_in_a_sheet_of_the_project_points_into_its_file() {
    let yaml = beam(
        "checks:\n  - {id: c, purpose: strength, members: [B1], sheet: own, with: {f: 200 MPa}}\n",
    );
    let of = |edit: (&str, &str)| -> (Sources, Vec<Diagnostic>) {
        let mut sources = sources(&yaml);
        let text = OWN.replacen(edit.0, edit.1, 1);
        sources.files.insert("checks/own.yaml".to_owned(), text.into_bytes());
        let problems = spanfolio::solve(&sources).map(|_| ()).expect_err("a mistake");
        (sources, problems)
    };
    for (edit, at) in [
        (("abs(M_y) / W_el_y", "abs(M_y) / W_el_q"), "W_el_q"),
        (("abs(M_y) / W_el_y", "abs(M_y) / "), "["),
        (("abs(M_y) / W_el_y", "M_y + W_el_y"), "M_y + W_el_y"),
        (("shows: strength", "shows: beauty"), "beauty"),
        (("demand: s", "demand: s\nlook: 3"), "look"),
    ] {
        let (sources, problems) = of(edit);
        let place = problems[0].place.clone().expect("a place");
        assert_eq!(place.file, "checks/own.yaml", "{edit:?}");
        let text = sources.text("checks/own.yaml").expect("the sheet");
        assert_eq!(&text[place.range], at, "{edit:?}: {}", problems[0].message);
    }
}

#[test]
fn every_sheet_of_the_catalogue_reads_as_one_of_the_project() {
    for text in spanfolio::catalogue::sheet_texts() {
        let sheet = spanfolio::catalogue::sheets()
            .iter()
            .find(|sheet| text.contains(&format!("id: {}\n", sheet.id)))
            .expect("the sheet of its text");
        // Under another id it passes the shape of the project's own sheets, and every formula parses.
        let other = text.replacen(&format!("id: {}\n", sheet.id), "id: copy\n", 1);
        let yaml = beam("");
        let mut sources = sources(&yaml);
        sources.files.insert("checks/copy.yaml".to_owned(), other.into_bytes());
        let problems = spanfolio::solve(&sources).map(|_| ()).err().unwrap_or_default();
        assert!(problems.is_empty(), "{}: {problems:#?}", sheet.id);
        let formulas = sheet.steps.values().map(|step| &step.formula);
        for formula in formulas.chain([&sheet.demand, &sheet.capacity]) {
            assert!(spanfolio::calc::formula_with_unit(formula).is_ok(), "{}: {formula}", sheet.id);
        }
        for condition in &sheet.valid_if {
            assert!(spanfolio::calc::formula(&condition.condition).is_ok(), "{}", sheet.id);
        }
    }
}

#[test]
fn a_step_states_only_a_unit_of_its_value() {
    let (yaml, problem) =
        refused(&own("let: {d: \"N / A [mm]\"}, demand: abs(M_y), capacity: 200 kN m"));
    assert_eq!(problem.message, "the result is a force per area, which has no value in mm");
    assert_eq!(part(&yaml, &problem), "N / A");
}

#[test]
fn a_step_is_named_once_and_not_as_a_word_of_the_language() {
    let (yaml, problem) =
        refused(&own("let: {s: N / A, s: M_y}, demand: abs(M_y), capacity: 200 kN m"));
    assert_eq!((problem.code, part(&yaml, &problem)), ("duplicate-key", "s"));
    let (yaml, problem) = refused(&own("let: {sqrt: N / A}, demand: abs(M_y), capacity: 200 kN m"));
    assert_eq!((problem.code, part(&yaml, &problem)), ("name", "sqrt"));
}

#[test]
fn what_is_named_twice_is_checked_once() {
    let count = |check: &str| record(check).checks.len();
    let moment = "title: t, reference: r, demand: abs(M_y), capacity: 200 kN m";
    assert_eq!(count(&format!("{{id: c, purpose: strength, members: [B1, B1], {moment}}}")), 1);
    let spans = "members: [B1], spans: [2, 1, 2]";
    assert_eq!(count(&format!("{{id: c, purpose: strength, {spans}, {moment}}}")), 2);
    let uplift = "sheet: uplift, with: {holding: 3 kN}";
    assert_eq!(count(&format!("{{id: c, purpose: strength, nodes: [A, B, A], {uplift}}}")), 2);
}
