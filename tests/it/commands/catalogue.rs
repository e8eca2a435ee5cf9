//! `catalogue`: what it prints for a name, a family, words and nonsense.

use insta::assert_snapshot;
use spanfolio::cli::catalogue::{CatalogueArgs, UnitsArg, run};

fn asked(words: &[&str], units: UnitsArg) -> String {
    let words = words.iter().map(|word| (*word).to_owned()).collect();
    let args = CatalogueArgs { words, units, thickness: None, json: false };
    run(&args).unwrap_or_else(|problem| format!("{}\n{:?}\n", problem.message, problem.hints))
}

#[test]
fn a_section_comes_with_its_properties_and_source() {
    assert_snapshot!(asked(&["ipe", "300"], UnitsArg::Si));
}

#[test]
fn a_section_prints_in_us_units() {
    assert_snapshot!(asked(&["w12x26"], UnitsArg::Us));
}

#[test]
fn an_angle_shows_its_principal_values() {
    assert_snapshot!(asked(&["L", "100x100x10"], UnitsArg::Si));
}

#[test]
fn a_channel_shows_its_shear_centre() {
    assert_snapshot!(asked(&["UPN", "200"], UnitsArg::Si));
}

#[test]
fn a_material_comes_with_its_strengths_and_source() {
    assert_snapshot!(asked(&["s355"], UnitsArg::Si));
}

#[test]
fn a_family_is_listed_in_the_order_of_its_table() {
    assert_snapshot!(asked(&["hem"], UnitsArg::Si));
}

#[test]
fn words_list_what_holds_them_all() {
    assert_snapshot!(asked(&["hss", "6x"], UnitsArg::Us));
    assert_snapshot!(asked(&["glued"], UnitsArg::Si));
}

#[test]
fn no_words_list_the_tables() {
    assert_snapshot!(asked(&[], UnitsArg::Si));
}

#[test]
fn nothing_found_brings_the_nearest_names() {
    assert_snapshot!(asked(&["ipe", "310"], UnitsArg::Si));
    assert_snapshot!(asked(&["nonsense"], UnitsArg::Si));
}

#[test]
fn a_thickness_chooses_the_strength_and_must_be_a_length() {
    let strength = |thickness: &str| {
        let args = CatalogueArgs {
            words: vec!["S275".into()],
            units: UnitsArg::Si,
            thickness: Some(thickness.into()),
            json: false,
        };
        let line = |text: String| {
            text.lines().find(|line| line.starts_with("f_y")).map(str::to_owned).unwrap_or_default()
        };
        run(&args).map(line).map_err(|problem| problem.message)
    };
    assert_eq!(strength("16 mm"), Ok("f_y        275\u{a0}MPa".to_owned()));
    assert_eq!(strength("50 mm"), Ok("f_y        255\u{a0}MPa".to_owned()));
    assert!(strength("50 kN").unwrap_err().starts_with("--thickness: "));
    assert!(strength("200 mm").unwrap_err().contains("200 mm"));
}

#[test]
fn json_is_in_si_base_units() {
    let args = CatalogueArgs {
        words: vec!["IPE300".into()],
        units: UnitsArg::Us,
        thickness: None,
        json: true,
    };
    let value: serde_json::Value = serde_json::from_str(&run(&args).unwrap()).unwrap();
    let area = value["sections"][0]["properties"]["A"].as_f64().unwrap();
    assert!((area - 0.005_381).abs() < 1e-6);
}
