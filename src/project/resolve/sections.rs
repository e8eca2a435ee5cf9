//! Sections: from the catalogue, from a shape, or with properties given by hand.

use super::about::words;
use super::names::Names;
use super::reader::Reader;
use crate::catalogue;
use crate::diagnostic::Diagnostic;
use crate::model::Section;
use crate::project::text::{Map, Text};
use crate::project::written;
use crate::project::written::words::ShapeKind;
use crate::quantity::Kind;
use crate::section::{Properties, Shape, ShapeError, Taper};

pub(super) fn sections(
    reader: &mut Reader,
    written: &Map<written::Section>,
    shear_deformation: bool,
) -> Vec<Section> {
    let mut names = Names::default();
    let mut out = Vec::new();
    for (name, section) in written {
        names.take(reader, name, "section");
        let read = if let Some(designation) = &section.catalogue {
            from_catalogue(reader, designation)
        } else if let Some(shape) = &section.shape {
            from_shape(reader, name, section, shape.is)
        } else {
            given(reader, name, section)
        };
        let (title, mut properties, source) = read.unwrap_or_default();
        if !shear_deformation && section.given.is_none() {
            properties.a_sy = None;
            properties.a_sz = None;
        }
        out.push(Section {
            name: name.to_string(),
            title,
            properties,
            source: words(section.source.as_ref()).unwrap_or(source),
            origin: name.place(),
        });
    }
    out
}

type Read = Option<(String, Properties, String)>;

fn from_catalogue(reader: &mut Reader, designation: &Text) -> Read {
    match catalogue::section(designation) {
        Ok(found) => Some((found.designation, found.properties, found.source)),
        Err(missing) => {
            let near = missing.nearest.first().map(|near| format!("did you mean `{near}`?"));
            reader.problem(
                Diagnostic::error(
                    "unknown-section",
                    format!("no section `{designation}` in the catalogue"),
                )
                .at(designation.place())
                .hint(near)
                .hint("`spanfolio catalogue` lists the families".to_owned()),
            );
            None
        }
    }
}

fn from_shape(
    reader: &mut Reader,
    name: &Text,
    written: &written::Section,
    kind: ShapeKind,
) -> Read {
    let shape = shape(reader, written, kind)?;
    match shape.properties() {
        Ok(properties) => {
            let title = title(written, kind);
            Some((title, properties, "computed from the dimensions given".to_owned()))
        }
        Err(error) => {
            let place = place_of(written, &error).map_or_else(|| name.place(), Text::place);
            reader.error("shape", error.message, place);
            None
        }
    }
}

fn place_of<'w>(written: &'w written::Section, error: &ShapeError) -> Option<&'w Text> {
    match error.dimension {
        "width" => written.width.as_ref(),
        "depth" => written.depth.as_ref(),
        "diameter" => written.diameter.as_ref(),
        "thickness" => written.thickness.as_ref(),
        "web" => written.web.as_ref(),
        "flange" => written.flange.as_ref(),
        "top_width" => written.top_width.as_ref(),
        "top_flange" => written.top_flange.as_ref(),
        "bottom_width" => written.bottom_width.as_ref(),
        "bottom_flange" => written.bottom_flange.as_ref(),
        "root_radius" => written.root_radius.as_ref(),
        "toe_radius" => written.toe_radius.as_ref(),
        "outer_radius" => written.outer_radius.as_ref(),
        "inner_radius" => written.inner_radius.as_ref(),
        "torsion_constant" => written.torsion_constant.as_ref(),
        "slope" => written.taper.as_ref().map(|taper| &taper.slope),
        "measured_at" => written.taper.as_ref().map(|taper| &taper.measured_at),
        _ => None,
    }
}

fn shape(reader: &mut Reader, written: &written::Section, kind: ShapeKind) -> Option<Shape> {
    // All dimensions are read before any is missed, so that one run reports all of them.
    let mut length = |text: &Option<Text>| reader.optional(text.as_ref(), Kind::SectionLength);
    let (width, depth) = (length(&written.width), length(&written.depth));
    let (diameter, thickness) = (length(&written.diameter), length(&written.thickness));
    let (web, flange) = (length(&written.web), length(&written.flange));
    let (top_width, top_flange) = (length(&written.top_width), length(&written.top_flange));
    let (bottom_width, bottom_flange) =
        (length(&written.bottom_width), length(&written.bottom_flange));
    let (root_radius, toe_radius) = (length(&written.root_radius), length(&written.toe_radius));
    let (outer_radius, inner_radius) =
        (length(&written.outer_radius), length(&written.inner_radius));
    Some(match kind {
        ShapeKind::Rectangle => Shape::Rectangle { width: width?, depth: depth? },
        ShapeKind::Circle => Shape::Circle { diameter: diameter? },
        ShapeKind::Tube => Shape::Tube { diameter: diameter?, thickness: thickness? },
        ShapeKind::RectangularHollow => Shape::RectangularHollow {
            width: width?,
            depth: depth?,
            thickness: thickness?,
            outer_radius,
            inner_radius,
        },
        ShapeKind::I => {
            Shape::I { depth: depth?, width: width?, web: web?, flange: flange?, root_radius }
        }
        ShapeKind::UnequalI => Shape::UnequalI {
            depth: depth?,
            web: web?,
            top_width: top_width?,
            top_flange: top_flange?,
            bottom_width: bottom_width?,
            bottom_flange: bottom_flange?,
            root_radius,
        },
        ShapeKind::Channel => {
            let taper = match &written.taper {
                Some(taper) => Some(Taper {
                    slope: reader.quantity(&taper.slope, Kind::Number)?,
                    measured_at: reader.quantity(&taper.measured_at, Kind::SectionLength)?,
                }),
                None => None,
            };
            Shape::Channel {
                depth: depth?,
                width: width?,
                web: web?,
                flange: flange?,
                root_radius,
                toe_radius,
                taper,
            }
        }
        ShapeKind::Angle => Shape::Angle {
            depth: depth?,
            width: width?,
            thickness: thickness?,
            root_radius,
            toe_radius,
        },
        ShapeKind::T => {
            Shape::T { depth: depth?, width: width?, web: web?, flange: flange?, root_radius }
        }
        ShapeKind::Polygon => {
            let points = corners(reader, written.points.as_deref().unwrap_or_default())?;
            let holes = written
                .holes
                .iter()
                .flatten()
                .map(|hole| corners(reader, hole))
                .collect::<Option<Vec<_>>>()?;
            let torsion_constant = match &written.torsion_constant {
                Some(text) => Some(reader.positive(text, Kind::SecondMoment)?),
                None => None,
            };
            Shape::Polygon { points, holes, torsion_constant }
        }
    })
}

fn corners(reader: &mut Reader, written: &[[Text; 2]]) -> Option<Vec<[f64; 2]>> {
    let read: Vec<Option<[f64; 2]>> = written
        .iter()
        .map(|[y, z]| {
            let y = reader.quantity(y, Kind::SectionLength);
            let z = reader.quantity(z, Kind::SectionLength);
            Some([y?, z?])
        })
        .collect();
    read.into_iter().collect()
}

/// What the package calls a shape: its name and its leading dimensions as written.
fn title(written: &written::Section, kind: ShapeKind) -> String {
    let (name, keys): (&str, &[&Option<Text>]) = match kind {
        ShapeKind::Rectangle => ("rectangle", &[&written.width, &written.depth]),
        ShapeKind::Circle => ("circle", &[&written.diameter]),
        ShapeKind::Tube => ("tube", &[&written.diameter, &written.thickness]),
        ShapeKind::RectangularHollow => {
            ("rectangular hollow", &[&written.width, &written.depth, &written.thickness])
        }
        ShapeKind::I => ("I", &[&written.depth, &written.width, &written.web, &written.flange]),
        ShapeKind::UnequalI => ("I with unequal flanges", &[&written.depth, &written.web]),
        ShapeKind::Channel => {
            ("channel", &[&written.depth, &written.width, &written.web, &written.flange])
        }
        ShapeKind::Angle => ("angle", &[&written.depth, &written.width, &written.thickness]),
        ShapeKind::T => ("T", &[&written.depth, &written.width, &written.web, &written.flange]),
        ShapeKind::Polygon => ("polygon", &[]),
    };
    let sizes: Vec<&str> = keys.iter().filter_map(|key| key.as_ref().map(Text::as_str)).collect();
    if sizes.is_empty() { name.to_owned() } else { format!("{name} {}", sizes.join(" × ")) }
}

fn given(reader: &mut Reader, name: &Text, written: &written::Section) -> Read {
    let given = written.given.as_ref()?;
    let mut value = |keys: &[&str], kind: Kind| {
        let text = keys.iter().find_map(|key| given.get(*key))?;
        reader.positive(text, kind)
    };
    let area = value(&["A"], Kind::Area);
    let i_y = value(&["I_y", "I_major"], Kind::SecondMoment);
    let i_z = value(&["I_z", "I_minor"], Kind::SecondMoment);
    let i_t = value(&["I_t"], Kind::SecondMoment);
    let depth = value(&["depth"], Kind::SectionLength);
    let width = value(&["width"], Kind::SectionLength);
    let mut properties = Properties {
        i_w: value(&["I_w"], Kind::Warping),
        w_el_y: value(&["W_el_y", "W_el_major", "S_major"], Kind::SectionModulus),
        w_el_z: value(&["W_el_z", "W_el_minor", "S_minor"], Kind::SectionModulus),
        w_pl_y: value(&["W_pl_y", "W_pl_major", "Z_major"], Kind::SectionModulus),
        w_pl_z: value(&["W_pl_z", "W_pl_minor", "Z_minor"], Kind::SectionModulus),
        a_sy: value(&["A_sy"], Kind::Area),
        a_sz: value(&["A_sz"], Kind::Area),
        a_vy: value(&["A_vy"], Kind::Area),
        a_vz: value(&["A_vz"], Kind::Area),
        z_top: value(&["z_top"], Kind::SectionLength).or(depth.map(|d| d / 2.0)),
        z_bottom: value(&["z_bottom"], Kind::SectionLength).or(depth.map(|d| d / 2.0)),
        y_plus: value(&["y_plus"], Kind::SectionLength).or(width.map(|w| w / 2.0)),
        y_minus: value(&["y_minus"], Kind::SectionLength).or(width.map(|w| w / 2.0)),
        ..Properties::default()
    };
    properties.i_yz = reader.optional(given.get("I_yz"), Kind::SecondMoment).unwrap_or_default();
    for (key, value) in
        [("A", area), ("I_y or I_major", i_y), ("I_z or I_minor", i_z), ("I_t", i_t)]
    {
        let written = key.split(" or ").any(|key| given.contains_key(key));
        if value.is_none() && !written {
            reader.error("missing-key", format!("section `{name}` gives no {key}"), name.place());
        }
    }
    (properties.area, properties.i_y, properties.i_z, properties.i_t) = (area?, i_y?, i_z?, i_t?);
    if properties.i_y < properties.i_z && written.axes.is_none() {
        let place =
            given.get("I_y").or(given.get("I_major")).map_or_else(|| name.place(), Text::place);
        reader.problem(
            Diagnostic::error(
                "axes",
                format!("section `{name}` has I_y below I_z, but y is the major axis"),
            )
            .at(place)
            .hint("exchange the two, or say `axes: as written` if this is meant".to_owned()),
        );
        return None;
    }
    if properties.i_yz * properties.i_yz >= properties.i_y * properties.i_z {
        let place = given.get("I_yz").map_or_else(|| name.place(), Text::place);
        reader.error(
            "axes",
            format!("section `{name}` has a product moment that no shape can have"),
            place,
        );
        return None;
    }
    Some(("given properties".to_owned(), properties, "given in the project file".to_owned()))
}
