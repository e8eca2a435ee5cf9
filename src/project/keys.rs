//! Keys of blocks that are read as maps of text, with their help: `given`, materials, units; and nodes.

use indexmap::IndexMap;
use schemars::{Schema, SchemaGenerator};
use serde_json::{Value, json};

use super::text::Words as _;
use crate::model::SpanLoading;

/// Keys of a section's `given` block.
pub const GIVEN: [(&str, &str); 34] = [
    ("A", "Area."),
    ("I_y", "Second moment of area about y, ∫ z² dA."),
    ("I_z", "Second moment of area about z, ∫ y² dA."),
    ("I_yz", "Product moment ∫ y z dA."),
    ("I_major", "Second moment of area about the major axis, which is y."),
    ("I_minor", "Second moment of area about the minor axis, which is z."),
    ("I_t", "St Venant torsion constant."),
    ("I_w", "Warping constant."),
    ("W_el_y", "Elastic section modulus about y."),
    ("W_el_z", "Elastic section modulus about z."),
    ("W_pl_y", "Plastic section modulus about y."),
    ("W_pl_z", "Plastic section modulus about z."),
    ("W_el_major", "Elastic section modulus about the major axis."),
    ("W_el_minor", "Elastic section modulus about the minor axis."),
    ("W_pl_major", "Plastic section modulus about the major axis."),
    ("W_pl_minor", "Plastic section modulus about the minor axis."),
    ("S_major", "Elastic section modulus about the major axis, as US tables name it."),
    ("S_minor", "Elastic section modulus about the minor axis, as US tables name it."),
    ("Z_major", "Plastic section modulus about the major axis, as US tables name it."),
    ("Z_minor", "Plastic section modulus about the minor axis, as US tables name it."),
    ("i_y", "Radius of gyration about y."),
    ("i_z", "Radius of gyration about z."),
    ("r_major", "Radius of gyration about the major axis."),
    ("r_minor", "Radius of gyration about the minor axis."),
    ("A_sy", "Shear area along y, for deformation."),
    ("A_sz", "Shear area along z, for deformation."),
    ("A_vy", "Shear area along y, for resistance."),
    ("A_vz", "Shear area along z, for resistance."),
    ("depth", "Overall depth along z."),
    ("width", "Overall width along y."),
    ("z_top", "From the centroid to the top fibre."),
    ("z_bottom", "From the centroid to the bottom fibre."),
    ("y_plus", "From the centroid to the +y fibre."),
    ("y_minus", "From the centroid to the -y fibre."),
];

/// Keys of a material.
pub const MATERIAL: [(&str, &str); 27] = [
    ("grade", "Grade in the catalogue."),
    ("thickness", "Governing thickness, for grades whose strength depends on it."),
    ("service_class", "Service class of timber."),
    ("title", "What it is called in the package."),
    ("source", "Where the values come from."),
    ("family", "steel, timber, aluminium, concrete or other."),
    ("E", "Young's modulus."),
    ("G", "Shear modulus."),
    ("density", "Mass per volume."),
    ("expansion", "Coefficient of thermal expansion."),
    ("f_y", "Yield strength."),
    ("f_u", "Ultimate strength."),
    ("f_o", "Proof strength of aluminium."),
    ("f_ck", "Characteristic cylinder strength of concrete."),
    ("f_m_k", "Characteristic bending strength of timber."),
    ("f_t_0_k", "Characteristic tension strength along the grain."),
    ("f_t_90_k", "Characteristic tension strength across the grain."),
    ("f_c_0_k", "Characteristic compression strength along the grain."),
    ("f_c_90_k", "Characteristic compression strength across the grain."),
    ("f_v_k", "Characteristic shear strength."),
    ("E_0_05", "Fifth percentile of the modulus along the grain."),
    ("E_90_mean", "Mean modulus across the grain."),
    ("F_b", "Reference bending design value."),
    ("F_t", "Reference tension design value."),
    ("F_v", "Reference shear design value."),
    ("F_c", "Reference compression design value along the grain."),
    ("E_min", "Reference modulus for stability."),
];

fn texts(keys: impl IntoIterator<Item = (String, String)>) -> IndexMap<String, Value> {
    keys.into_iter()
        .map(|(key, help)| {
            (key, json!({ "description": help, "type": ["string", "number", "boolean"] }))
        })
        .collect()
}

fn owned((key, help): (&str, &str)) -> (String, String) {
    (key.to_owned(), help.to_owned())
}

fn object(title: &str, properties: &IndexMap<String, Value>) -> Value {
    json!({ "title": title, "type": "object", "properties": properties, "additionalProperties": false })
}

fn schema(value: Value) -> Schema {
    Schema::try_from(value).expect("an object is a schema")
}

/// Schema of a section's `given` block.
pub(super) fn given(_: &mut SchemaGenerator) -> Schema {
    schema(object("Given", &texts(GIVEN.map(owned))))
}

/// Schema of the `materials` block.
pub(super) fn materials(_: &mut SchemaGenerator) -> Schema {
    let material = object("Material", &texts(MATERIAL.map(owned)));
    schema(json!({ "type": "object", "additionalProperties": material }))
}

/// Schema of the `units` block.
pub(super) fn units(_: &mut SchemaGenerator) -> Schema {
    let kinds = crate::quantity::Kind::ALL
        .into_iter()
        .map(|kind| (kind.name().to_owned(), format!("Unit of {}.", kind.description())));
    let mut properties = texts(kinds);
    properties.insert("system".into(), json!({ "description": "SI or US.", "enum": ["SI", "US"] }));
    schema(object("Units", &properties))
}

/// Schema of a `nodes` block: [x, z] or [x, y, z].
pub(super) fn nodes(_: &mut SchemaGenerator) -> Schema {
    let at = json!({ "type": "array", "items": { "type": ["string", "number", "boolean"] }, "minItems": 2, "maxItems": 3 });
    schema(json!({ "type": "object", "additionalProperties": at }))
}

/// `by_span`: `true` is a truth value to editors and a word to us.
pub(super) fn by_span(_: &mut SchemaGenerator) -> Schema {
    let words: Vec<Value> = std::iter::once(json!(true))
        .chain(SpanLoading::WORDS.iter().map(|(word, _)| json!(word)))
        .collect();
    schemars::json_schema!({ "description": SpanLoading::DESCRIPTION, "enum": words })
}
