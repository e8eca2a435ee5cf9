//! `catalogue`

use insta::assert_snapshot;

use super::project::run;

#[test]
fn a_section_prints_its_properties_and_source() {
    let found = run(&["catalogue", "ipe", "300"]);
    assert_eq!(found.status, 0);
    assert!(found.out.contains("Source: EN 10365:2017"), "{}", found.out);
    // EN 10365: I_y 8356 cm⁴, from memory.
    assert!(found.out.contains("356 cm⁴"), "{}", found.out);
}

#[test]
fn an_unknown_name_offers_near_ones() {
    assert_snapshot!(run(&["catalogue", "ipe", "301"]).shown(), @r"
    exit: 2
    --- stderr
    error[unknown-catalogue-name]: nothing named `ipe 301` in the catalogue
     |
     = help: nearest names: `IPE 300`, `IPE 330`, `IPE 270`
    ");
}

#[test]
fn us_units_on_request() {
    let found = run(&["catalogue", "W10X22", "--units", "us"]);
    assert!(found.out.contains("in⁴"), "{}", found.out);
}
