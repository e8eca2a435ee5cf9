//! The Record: settled once, the same when written and read.

use spanfolio::analysis::{self, evaluate};
use spanfolio::model::{EFFECTS, Side};
use spanfolio::record::Record;

use crate::support::{model, solved, solved_demo};

const BEAM: &str = "format: 1\n\
    project: {title: Beam, number: 1, revisions: [{mark: A, date: 2026-01-01, status: test}]}\n\
    basis:\n  assumptions:\n    - {id: A1, text: The floor holds the flange., status: to confirm, by: site}\n\
    materials: {steel: {grade: S275}}\n\
    sections: {beam: {catalogue: IPE 240}}\n\
    frame: plane\n\
    nodes: {A: [0 m, 0 m], B: [5 m, 0 m], C: [8 m, 0 m]}\n\
    members:\n  B1: {along: [A, B], section: beam, material: steel}\n  B2: {along: [B, C], section: beam, material: steel}\n\
    supports: {A: pinned, B: {Z: fixed}}\n\
    load_cases:\n  Q: {title: Q, nature: imposed, loads: [{member: B2, uniform: 5 kN/m}]}\n\
    combinations: {written: [{title: all, purpose: strength, factors: {Q: 1.5}}]}\n";

#[test]
fn a_record_equals_itself_written_and_read() {
    let demos = ["gallery-floor", "workshop-portal", "pump-platform"].map(solved_demo);
    for record in demos.into_iter().chain([solved(BEAM)]) {
        let text = record.to_json();
        let read = Record::from_json(&text).expect("our own record");
        assert!(read == record, "{} changes when read", record.project.title);
        assert!(read.to_json() == text, "{} changes when written again", record.project.title);
    }
}

#[test]
fn a_newer_record_is_refused() {
    let newer = solved(BEAM).to_json().replacen("\"format\": 1", "\"format\": 2", 1);
    let error = Record::from_json(&newer).expect_err("a newer format");
    assert!(error.contains("format 2"), "{error}");
}

#[test]
fn what_is_no_record_is_refused() {
    for text in ["", "[]", "{}", "{\"format\": 1}", "{\"format\": \"one\"}"] {
        assert!(Record::from_json(text).is_err(), "{text}");
    }
}

#[test]
fn one_line_holds_one_governing_value() {
    let text = solved(BEAM).to_json();
    let lines: Vec<&str> =
        text.lines().filter(|line| line.trim_start().starts_with("\"max\":")).collect();
    assert!(lines.len() > 20);
    assert!(
        lines
            .iter()
            .all(|line| line.contains("\"value\"") && line.trim_end_matches(',').ends_with('}'))
    );
}

#[test]
fn members_that_are_not_drawn_are_written_without_fields() {
    let record = solved(&BEAM.replacen("materials:", "package: {draw: [B2]}\nmaterials:", 1));
    assert_eq!(record.model.package.left_out, ["B1"]);
    let read = Record::from_json(&record.to_json()).expect("our own record");
    assert!(read.results.members["B1"].segments.is_empty());
    assert!(!read.results.members["B2"].segments.is_empty());
    // What governs is kept all the same.
    assert_eq!(read.results.members["B1"].governing, record.results.members["B1"].governing);
}

#[test]
fn look_ups_give_what_the_analysis_found() {
    let model = model(BEAM).expect("a good file");
    let solution = analysis::solve(&model).expect("a sound structure");
    let record = solved(BEAM);
    for (member, of) in model.members.iter().zip(&solution.members) {
        for segment in &of.segments {
            let x = segment.from + 0.3 * (segment.to - segment.from);
            for effect in EFFECTS {
                let raw = evaluate(&segment.states[0].0[effect.index()], x - segment.from);
                let found =
                    record.effect(&member.name, effect, "Q", x, Side::After).expect("there");
                assert!(
                    (raw - found).abs() <= 1e-9 * raw.abs().max(1e-3),
                    "{effect:?}: {raw} {found}"
                );
                let combined = record
                    .effect(&member.name, effect, "strength all | 1.5 Q", x, Side::After)
                    .expect("there");
                assert!((combined - 1.5 * found).abs() <= 1e-12 * found.abs().max(1e-12));
            }
        }
    }
}

#[test]
fn look_ups_of_what_is_not_there_give_nothing() {
    let record = solved(BEAM);
    assert_eq!(record.effect("B9", EFFECTS[0], "Q", 1.0, Side::After), None);
    assert_eq!(record.effect("B1", EFFECTS[0], "R", 1.0, Side::After), None);
    assert_eq!(record.effect("B1", EFFECTS[0], "Q", 5.1, Side::After), None);
    assert_eq!(record.reaction("Z", "Q"), None);
}

fn open_items(yaml: &str, kind: &str) -> usize {
    solved(yaml).registers.open_items.iter().filter(|item| item.kind == kind).count()
}

#[test]
fn a_support_that_lifts_is_an_open_item_until_anchored() {
    assert_eq!(open_items(BEAM, "uplift"), 1);
    let anchored = BEAM.replacen("A: pinned", "A: {kind: pinned, uplift: anchored}", 1);
    assert_eq!(open_items(&anchored, "uplift"), 0);
}

#[test]
fn an_assumption_is_an_open_item_until_confirmed() {
    assert_eq!(open_items(BEAM, "assumption"), 1);
    assert_eq!(open_items(&BEAM.replacen("to confirm, by: site", "confirmed", 1), "assumption"), 0);
}

#[test]
fn a_compressed_member_is_an_open_item_of_a_first_order_analysis() {
    assert_eq!(open_items(BEAM, "first order"), 0);
    let pushed = BEAM.replacen(
        "loads: [{member: B2, uniform: 5 kN/m}]",
        "loads: [{node: C, force: {X: -5 kN}}]",
        1,
    );
    assert_eq!(open_items(&pushed, "first order"), 1);
}
