//! Families A–E, K, L and N of the check cases.

use super::case::Family;
use super::compare::compare;
use super::translate::project_file;
use crate::support::solved;

/// Runs every case of a family; the failure lists every value that differs.
fn check(data: &str, cases: usize, values: usize) {
    let family: Family = serde_yaml::from_str(data).expect("the check cases read");
    assert_eq!(family.cases.len(), cases, "no case is left out");
    assert_eq!(family.cases.iter().map(|case| case.expect.len()).sum::<usize>(), values);
    let mut wrong = Vec::new();
    for case in &family.cases {
        let record = solved(&project_file(case));
        assert!(record.self_check.satisfied, "{}: {:#?}", case.id, record.self_check);
        for expected in &case.expect {
            if let Err(difference) = compare(case, &record, expected) {
                wrong.push(format!("{} ({}; {}): {difference}", case.id, case.title, case.source));
            }
        }
    }
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}

#[test]
fn single_span_beams() {
    check(include_str!("data/A-single-span-beams.yaml"), 14, 89);
}

#[test]
fn continuous_beams() {
    check(include_str!("data/B-continuous-beams.yaml"), 9, 80);
}

#[test]
fn settlement_springs_temperature_and_releases() {
    check(include_str!("data/C-settlement-springs-temperature-releases.yaml"), 11, 52);
}

#[test]
fn plane_frames_and_trusses() {
    check(include_str!("data/D-plane-frames-and-trusses.yaml"), 11, 73);
}

#[test]
fn shear_deformation() {
    check(include_str!("data/E-shear-deformation.yaml"), 5, 13);
}

#[test]
fn space_frames() {
    check(include_str!("data/K-space-frames.yaml"), 6, 47);
}

#[test]
fn combinations() {
    check(include_str!("data/L-combinations.yaml"), 4, 18);
}

#[test]
fn invariants() {
    check(include_str!("data/N-invariants.yaml"), 3, 8);
}
