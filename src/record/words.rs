//! What a Record holds, in words: loads, restraint, kinds of properties.

use serde::Serialize;

use super::{FreedomRecord, FreedomWord, LoadRecord, SupportRecord, TargetRecord};
use crate::quantity::{Kind, Printer};

const AXES: [&str; 3] = ["X", "Y", "Z"];

/// A load in words, in the units of a printer.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct LoadWords {
    pub what: String,
    /// Where along the member; empty where it is the whole member or a node.
    pub place: String,
    /// Empty where `what` says it.
    pub direction: String,
}

impl LoadRecord {
    /// The member or node it acts on.
    #[must_use]
    pub fn on(&self) -> &str {
        let (TargetRecord::Member(on) | TargetRecord::Node(on)) = &self.target;
        on
    }

    /// The load in words.
    #[must_use]
    pub fn words(&self, printer: &Printer) -> LoadWords {
        let directed = !matches!(
            self.form.as_str(),
            "force" | "displaced" | "warming" | "lack_of_fit" | "reaction_of" | "point_moment"
        );
        LoadWords {
            what: what(self, printer),
            place: place(self, printer),
            direction: match (directed, self.per.as_str()) {
                (false, _) => String::new(),
                (true, "projected") => format!("{}, per projected length", self.direction),
                (true, _) => self.direction.clone(),
            },
        }
    }
}

impl SupportRecord {
    /// `fixed`, `free` or a stiffness, for X Y Z RX RY RZ.
    #[must_use]
    pub fn words(&self, printer: &Printer) -> [String; 6] {
        std::array::from_fn(|k| {
            let kind = if k < 3 { Kind::Spring } else { Kind::RotationSpring };
            self.freedoms[k].words(kind, printer)
        })
    }
}

impl FreedomRecord {
    /// `fixed`, `free` or a stiffness of this kind.
    #[must_use]
    pub fn words(&self, kind: Kind, printer: &Printer) -> String {
        match self {
            Self::Word(FreedomWord::Free) => "free".to_owned(),
            Self::Word(FreedomWord::Fixed) => "fixed".to_owned(),
            Self::Spring(stiffness) => printer.with_unit(kind, *stiffness),
        }
    }
}

/// What a released internal force's stiffness is, by the force.
#[must_use]
pub fn release_kind(force: &str) -> Kind {
    if matches!(force, "T" | "M_y" | "M_z") { Kind::RotationSpring } else { Kind::Spring }
}

/// What a section property is, by its symbol.
#[must_use]
pub fn property_kind(symbol: &str) -> Kind {
    match symbol {
        "A" | "A_sy" | "A_sz" | "A_vy" | "A_vz" => Kind::Area,
        "I_w" => Kind::Warping,
        "alpha" => Kind::Angle,
        _ if symbol.starts_with("I_") => Kind::SecondMoment,
        _ if symbol.starts_with("W_") => Kind::SectionModulus,
        _ => Kind::SectionLength,
    }
}

/// What a component of a reaction is.
#[must_use]
pub fn component_kind(component: &str) -> Kind {
    if component.starts_with('R') { Kind::Moment } else { Kind::Force }
}

fn what(load: &LoadRecord, printer: &Printer) -> String {
    let first = load.values.first().copied().unwrap_or_default();
    let last = load.values.last().copied().unwrap_or_default();
    let line = |value: f64| printer.with_unit(Kind::LineLoad, value);
    let over_width = || {
        let width = load.width.unwrap_or_default();
        format!(
            "{} × {} = {}",
            printer.with_unit(Kind::AreaLoad, first),
            printer.with_unit(Kind::Length, width),
            line(first * width)
        )
    };
    match load.form.as_str() {
        "self_weight" => format!("self-weight {}", line(first)),
        "uniform" => line(first),
        "varying" => format!("{} to {}", line(first), line(last)),
        "area" => over_width(),
        "build_up" => {
            format!("build-up {}: {}", load.build_up.as_deref().unwrap_or_default(), over_width())
        }
        "point" => printer.with_unit(Kind::Force, first),
        "point_moment" => {
            format!(
                "moment {} about {}",
                printer.with_unit(Kind::Moment, first),
                axis(&load.direction)
            )
        }
        "force" => joined(&[
            components("force", load.start, Kind::Force, printer),
            components("moment", load.moment, Kind::Moment, printer),
        ]),
        "reaction_of" => {
            let given = joined(&[
                components("force", load.start, Kind::Force, printer),
                components("moment", load.moment, Kind::Moment, printer),
            ]);
            let node = load.reaction_of.as_deref().unwrap_or_default();
            let given = if given.is_empty() { "nothing in this case".to_owned() } else { given };
            format!("reaction of {node} handed on: {given}")
        }
        "displaced" => {
            let part = |from: usize, kind: Kind, word: &str| {
                let values =
                    std::array::from_fn(|k| load.values.get(from + k).copied().unwrap_or_default());
                components(word, values, kind, printer)
            };
            joined(&[
                part(0, Kind::Deflection, "ground moved"),
                part(3, Kind::Rotation, "ground turned"),
            ])
        }
        "warming" if (first - last).abs() > 0.0 => format!(
            "warming: top {}, bottom {}",
            printer.with_unit(Kind::Temperature, first),
            printer.with_unit(Kind::Temperature, last)
        ),
        "warming" => format!("warming {}", printer.with_unit(Kind::Temperature, first)),
        _ => format!("made too long by {}", printer.with_unit(Kind::Deflection, first)),
    }
}

fn axis(direction: &str) -> &str {
    match direction {
        "up" | "down" => "Z",
        other => other.trim_start_matches('+'),
    }
}

fn joined(parts: &[String]) -> String {
    let there: Vec<&str> =
        parts.iter().map(String::as_str).filter(|part| !part.is_empty()).collect();
    there.join("; ")
}

/// `force X 3 kN, Z −1 kN`; nothing where all are zero.
#[must_use]
pub fn components(word: &str, values: [f64; 3], kind: Kind, printer: &Printer) -> String {
    let parts: Vec<String> = AXES
        .iter()
        .zip(values)
        .filter(|(_, value)| value.abs() > 0.0)
        .map(|(axis, value)| format!("{axis} {}", printer.with_unit(kind, value)))
        .collect();
    if parts.is_empty() { String::new() } else { format!("{word} {}", parts.join(", ")) }
}

fn place(load: &LoadRecord, printer: &Printer) -> String {
    let length = |x: f64| printer.number(Kind::Length, x);
    let unit = &printer.units.get(Kind::Length).label;
    match (load.from, load.to, load.at.as_slice()) {
        (Some(from), Some(to), _) => format!("{} to {} {unit}", length(from), length(to)),
        (_, _, [at]) => format!("at {} {unit}", length(*at)),
        (_, _, [first, .., last]) => {
            let every = load.every.map(|every| format!("every {} {unit}, ", length(every)));
            format!(
                "{}{} places from {} to {} {unit}",
                every.unwrap_or_default(),
                load.at.len(),
                length(*first),
                length(*last)
            )
        }
        _ => String::new(),
    }
}
