//! Family M: section properties through the project file; sources stand in the data.

use std::collections::BTreeMap;

use serde::Deserialize;
use spanfolio::record::SectionRecord;

use crate::support::solved;

#[derive(Deserialize)]
struct Family {
    cases: Vec<Case>,
}

#[derive(Deserialize)]
struct Case {
    id: String,
    source: String,
    model: BTreeMap<String, serde_yaml::Value>,
    expect: Vec<Expected>,
}

#[derive(Deserialize)]
struct Expected {
    quantity: String,
    value: f64,
    rel_tol: f64,
}

/// The `sections` entry that says the same as the case's model.
fn written(model: &BTreeMap<String, serde_yaml::Value>) -> String {
    let size = |key: &str| {
        let value = model.get(key).and_then(serde_yaml::Value::as_f64);
        format!("{} m", value.unwrap_or_else(|| panic!("no {key}")))
    };
    match model["shape"].as_str().expect("a shape") {
        "i_section" => format!(
            "{{shape: I, depth: {}, width: {}, web: {}, flange: {}, root_radius: {}}}",
            size("h"),
            size("b"),
            size("tw"),
            size("tf"),
            size("r")
        ),
        "rectangle" => format!("{{shape: rectangle, depth: {}, width: {}}}", size("h"), size("b")),
        "circular_hollow" => {
            format!("{{shape: tube, diameter: {}, thickness: {}}}", size("D"), size("t"))
        }
        "t_section" => format!(
            "{{shape: T, depth: {}, width: {}, web: {}, flange: {}}}",
            size("h"),
            size("b"),
            size("tw"),
            size("tf")
        ),
        "angle" => format!(
            "{{shape: angle, depth: {}, width: {}, thickness: {}}}",
            size("leg_y"),
            size("leg_x"),
            size("t")
        ),
        shape => panic!("no translation of {shape}"),
    }
}

fn project(section: &str) -> String {
    format!(
        "format: 1\n\
         project: {{title: Section, number: 1, revisions: [{{mark: A, date: 2026-01-01, status: test}}]}}\n\
         materials:\n  steel: {{E: 210 GPa, G: 81 GPa, density: 7850 kg/m3, expansion: 1.2e-5 /K}}\n\
         sections:\n  s: {section}\n\
         frame: space\nnodes: {{A: [0 m, 0 m, 0 m], B: [1 m, 0 m, 0 m]}}\n\
         members: {{B1: {{along: [A, B], section: s, material: steel}}}}\n\
         supports: {{A: fixed}}\n\
         load_cases: {{G: {{title: Weight, nature: permanent, self_weight: true}}}}\n\
         combinations: {{written: [{{title: G, purpose: strength, factors: {{G: 1}}}}]}}\n"
    )
}

/// The value by the data's name. Its x points right and y up; the section is seen along +x, where
/// local y points left: the heel of the angle lies the other way round, so that the product moment and
/// the angle of the principal axes change their signs.
fn value(section: &SectionRecord, quantity: &str) -> f64 {
    let get = |symbol: &str| section.properties[symbol];
    match quantity {
        "area" => get("A"),
        "I_major" => section.properties.get("I_u").copied().unwrap_or_else(|| get("I_y")),
        "I_minor" => section.properties.get("I_v").copied().unwrap_or_else(|| get("I_z")),
        "I_x" => get("I_y"),
        "I_y" => get("I_z"),
        "I_xy" => get("I_yz"),
        "W_el_major" => get("W_el_y"),
        "W_el_minor" => get("W_el_z"),
        "W_pl_major" => get("W_pl_y"),
        "W_pl_minor" => get("W_pl_z"),
        "W_el_top" => get("I_y") / get("z_top"),
        "W_el_bottom" => get("I_y") / get("z_bottom"),
        "radius_major" => get("i_y"),
        "radius_minor" => get("i_z"),
        "shear_area_web" => get("A_vz"),
        "torsion_constant" => get("I_t"),
        "warping_constant" => get("I_w"),
        "centroid_x" => get("y_minus"),
        "centroid_y" => get("z_bottom"),
        "principal_angle_deg" => get("alpha").to_degrees(),
        other => panic!("no property for {other}"),
    }
}

#[test]
fn section_properties_from_geometry() {
    let family: Family = serde_yaml::from_str(include_str!("data/M-section-properties.yaml"))
        .expect("the check cases read");
    assert_eq!(family.cases.len(), 8);
    let mut wrong = Vec::new();
    let mut values = 0;
    for case in &family.cases {
        let record = solved(&project(&written(&case.model)));
        for expected in &case.expect {
            values += 1;
            let computed = value(&record.model.sections["s"], &expected.quantity);
            if (computed - expected.value).abs() > expected.rel_tol * expected.value.abs() {
                wrong.push(format!(
                    "{} ({}): {} = {computed}, published {}",
                    case.id, case.source, expected.quantity, expected.value
                ));
            }
        }
    }
    assert_eq!(values, 75);
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}
