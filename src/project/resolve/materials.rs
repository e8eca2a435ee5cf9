//! Materials: a grade of the catalogue, or in full.

use indexmap::IndexMap;

use super::about::words;
use super::names::Names;
use super::reader::Reader;
use crate::catalogue;
use crate::diagnostic::Diagnostic;
use crate::model::Material;
use crate::project::text::{Map, Text};
use crate::project::written;
use crate::quantity::Kind;

const FAMILIES: [&str; 5] = ["steel", "timber", "aluminium", "concrete", "other"];
/// Keys that are no strengths.
const PLAIN: [&str; 10] = [
    "grade",
    "thickness",
    "service_class",
    "title",
    "source",
    "family",
    "E",
    "G",
    "density",
    "expansion",
];

pub(super) fn materials(reader: &mut Reader, written: &Map<written::Material>) -> Vec<Material> {
    let mut names = Names::default();
    let mut out = Vec::new();
    for (name, material) in written {
        names.take(reader, name, "material");
        let read = match material.get("grade") {
            Some(grade) => from_catalogue(reader, name, material, grade),
            None => in_full(reader, name, material),
        };
        // A material that is wrong keeps its place, so that members can still name it.
        out.push(read.unwrap_or_else(|| unknown(name)));
    }
    out
}

fn from_catalogue(
    reader: &mut Reader,
    name: &Text,
    written: &written::Material,
    grade: &Text,
) -> Option<Material> {
    let thickness = match written.get("thickness") {
        Some(text) => Some(reader.positive(text, Kind::SectionLength)?),
        None => None,
    };
    match catalogue::material(grade, thickness) {
        Ok(found) => Some(Material {
            name: name.to_string(),
            title: words(written.get("title")).unwrap_or(found.title),
            family: found.family,
            e: found.e,
            g: found.g,
            density: found.density,
            expansion: found.expansion,
            strengths: found.strengths,
            up_to: found.up_to,
            service_class: words(written.get("service_class")),
            source: words(written.get("source")).unwrap_or(found.source),
            origin: name.place(),
        }),
        Err(missing) => {
            let near = missing.nearest.first().map(|near| format!("did you mean `{near}`?"));
            reader.problem(
                Diagnostic::error("unknown-grade", format!("no grade `{grade}` in the catalogue"))
                    .at(grade.place())
                    .hint(near)
                    .hint(
                        "give E, G, density and expansion in full for other materials".to_owned(),
                    ),
            );
            None
        }
    }
}

fn in_full(reader: &mut Reader, name: &Text, written: &written::Material) -> Option<Material> {
    let family = words(written.get("family")).unwrap_or_else(|| "other".to_owned());
    if !FAMILIES.contains(&family.as_str())
        && let Some(text) = written.get("family")
    {
        reader.problem(
            Diagnostic::error("unknown-word", format!("no family of materials named `{text}`"))
                .at(text.place())
                .label(format!("expected one of {}", FAMILIES.join(", "))),
        );
    }
    let mut strengths = IndexMap::new();
    for (key, text) in written.iter().filter(|(key, _)| !PLAIN.contains(&key.as_str())) {
        let kind = if key.starts_with('E') { Kind::Modulus } else { Kind::Stress };
        if let Some(value) = reader.positive(text, kind) {
            strengths.insert(key.to_string(), (value, kind));
        }
    }
    let e = reader.positive(written.get("E")?, Kind::Modulus);
    let g = reader.positive(written.get("G")?, Kind::Modulus);
    let density = reader.quantity(written.get("density")?, Kind::MassDensity);
    if let (Some(value), Some(text)) = (density, written.get("density"))
        && value < 0.0
    {
        reader.error("negative", format!("the density `{text}` is below zero"), text.place());
    }
    let expansion = reader.quantity(written.get("expansion")?, Kind::Expansion);
    Some(Material {
        name: name.to_string(),
        title: words(written.get("title")).unwrap_or_else(|| name.to_string()),
        family,
        e: e?,
        g: g?,
        density: density?,
        expansion: expansion?,
        strengths,
        up_to: None,
        service_class: words(written.get("service_class")),
        source: words(written.get("source"))
            .unwrap_or_else(|| "given in the project file".to_owned()),
        origin: name.place(),
    })
}

fn unknown(name: &Text) -> Material {
    Material {
        name: name.to_string(),
        title: String::new(),
        family: String::new(),
        e: 1.0,
        g: 1.0,
        density: 0.0,
        expansion: 0.0,
        strengths: IndexMap::new(),
        up_to: None,
        service_class: None,
        source: String::new(),
        origin: name.place(),
    }
}
