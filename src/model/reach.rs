//! What formulas can read: every name with where its value comes from.
//!
//! Names are bound here, before anything is solved, so that an unknown one is found with all other mistakes
//! of the file. No effect is computed here.

use super::{
    CaseId, Effect, HeldAlong, Member, MemberId, Model, NodeId, On, Purpose, Release, Shows, Side,
    StructureId,
};
use crate::calc::{Argument, Reading, Value};
use crate::quantity::{Dimension, Kind, Quantity};

/// A reading bound to its source.
#[derive(Clone, Debug, PartialEq)]
pub struct Bound {
    pub source: Source,
    /// What it is, where that decides the unit it prints in.
    pub kind: Option<Kind>,
}

/// Where a value comes from.
#[derive(Clone, Debug, PartialEq)]
pub enum Source {
    Constant(Value),
    /// Shortest load duration in the combination.
    Duration,
    /// An effect at the point.
    Effect(Effect),
    /// Position along the member, m.
    Position,
    /// Length of the span that holds the point.
    Span,
    /// Whether that span has one free end.
    Cantilever,
    /// Greatest and least of an effect along the target, in the same combination.
    Greatest(Effect),
    Least(Effect),
    /// An effect at a share of the target's length, in the same combination.
    At(Effect, f64),
    /// Component of the reaction of the node.
    Reaction(usize),
    /// Vertical reaction that pushes up, that holds down; neither below zero.
    Up,
    Down,
    /// Horizontal resultant of the reaction.
    Horizontal,
    /// Component of the displacement of the node.
    Displacement(usize),
    /// Sum over the supports of a component of reaction, global.
    SumOfReactions(usize),
    /// Greatest size of a component of displacement over the nodes.
    LargestDisplacement(usize),
    /// Moments of the actions about a horizontal line along Y through a node, those that act with the
    /// permanent actions, and those against them.
    Stabilising,
    Overturning,
    /// A result for working blocks.
    Result(Query),
}

/// A result that working blocks and narrative ask for.
#[derive(Clone, Debug, PartialEq)]
pub enum Query {
    Effect {
        member: MemberId,
        span: Option<usize>,
        effect: Effect,
        of: Of,
    },
    Reaction {
        node: NodeId,
        component: usize,
        of: Of,
    },
    Displacement {
        node: NodeId,
        component: usize,
        state: State,
    },
    /// Utilisation of a check.
    Check(String),
}

impl Query {
    /// What the value is.
    #[must_use]
    pub fn kind(&self) -> Kind {
        match self {
            Self::Effect { effect, .. } => effect.kind(),
            Self::Reaction { component, .. } => component_kind(*component, true),
            Self::Displacement { component, .. } => component_kind(*component, false),
            Self::Check(_) => Kind::Number,
        }
    }
}

/// Which value of many.
#[derive(Clone, Debug, PartialEq)]
pub enum Of {
    Greatest(Purpose),
    Least(Purpose),
    /// In one state; at a position for effects, m.
    State(State, f64, Side),
}

/// A state by itself.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum State {
    Case(CaseId),
    /// Index into the combinations.
    Combination(usize),
}

/// Why a name cannot be bound.
#[derive(Clone, Debug, PartialEq)]
pub struct Unbound {
    pub message: String,
    pub hint: Option<String>,
    /// Names that could have been meant.
    pub known: Vec<String>,
}

pub(super) const COMPONENTS: [&str; 6] = ["X", "Y", "Z", "RX", "RY", "RZ"];

fn constant(kind: Kind, value: f64) -> Bound {
    Bound { source: Source::Constant(Value::number(value, kind.dimension())), kind: Some(kind) }
}

fn truth(value: bool) -> Bound {
    Bound { source: Source::Constant(Value::Truth(value)), kind: None }
}

pub(super) fn of(source: Source, kind: Kind) -> Bound {
    Bound { source, kind: Some(kind) }
}

pub(super) fn component_kind(component: usize, force: bool) -> Kind {
    match (component < 3, force) {
        (true, true) => Kind::Force,
        (false, true) => Kind::Moment,
        (true, false) => Kind::Deflection,
        (false, false) => Kind::Rotation,
    }
}

fn is_member(on: On) -> bool {
    matches!(on, On::Member { .. })
}

impl Model {
    /// Binds what a check's formula reads on a target.
    ///
    /// # Errors
    /// When nothing of this name is in reach there.
    pub fn bind(&self, on: On, reading: &Reading) -> Result<Bound, Unbound> {
        let value = self.values.iter().find(|value| value.name == reading.name);
        if let Some(arguments) = &reading.arguments {
            return match on {
                On::Member { .. } => along(reading, arguments),
                On::Node { .. } | On::Structure { .. } => Err(unknown_function(reading, &[])),
            };
        }
        let (own, missing) = match on {
            On::Member { member, span } => self.of_member(&self[member], span, &reading.name),
            On::Node { node, relative_to } => {
                (self.of_node(node, relative_to, &reading.name), None)
            }
            On::Structure { about, .. } => (of_structure(about, &reading.name), None),
        };
        match (own, value) {
            (Some(_), Some(_)) => Err(Unbound {
                message: format!(
                    "`{}` is both a value of the project and in reach here",
                    reading.name
                ),
                hint: Some("give the value of the project another name".to_owned()),
                known: Vec::new(),
            }),
            (Some(own), None) => Ok(own),
            (None, Some(value)) => Ok(Bound {
                source: Source::Constant(Value::number(value.value, value.dimension)),
                kind: None,
            }),
            (None, None) => Err(self.unknown(on, &reading.name, missing)),
        }
    }

    /// Whether a name is one of the target's own, which a step may then not have.
    #[must_use]
    pub fn has(&self, on: On, name: &str) -> bool {
        match on {
            On::Member { member, span } => self.of_member(&self[member], span, name).0.is_some(),
            On::Node { node, relative_to } => self.of_node(node, relative_to, name).is_some(),
            On::Structure { about, .. } => of_structure(about, name).is_some(),
        }
    }

    pub(super) fn unknown(&self, on: On, name: &str, missing: Option<String>) -> Unbound {
        if let Some(message) = missing {
            return Unbound { message, hint: None, known: Vec::new() };
        }
        let mut known: Vec<String> = self.values.iter().map(|value| value.name.clone()).collect();
        let own: &[&str] = match on {
            On::Member { member, .. } => {
                let member = &self[member];
                let properties = &self[member.section].properties;
                known
                    .extend(properties.by_symbol().iter().map(|(symbol, ..)| (*symbol).to_owned()));
                known.extend(properties.dimensions.keys().cloned());
                known.extend(self[member.material].strengths.keys().cloned());
                known.extend(super::EFFECTS.iter().map(|effect| effect.name().to_owned()));
                &MEMBER_NAMES
            }
            On::Node { .. } => {
                known.extend(COMPONENTS.iter().map(|name| format!("reaction_{name}")));
                known.extend(COMPONENTS.iter().map(|name| format!("displacement_{name}")));
                &["R_up", "R_down", "R_horizontal", "height", "duration"]
            }
            On::Structure { .. } => {
                known.extend(COMPONENTS.iter().map(|name| format!("sum_{name}")));
                known.extend(COMPONENTS[..3].iter().map(|name| format!("largest_{name}")));
                &["M_stabilising", "M_overturning", "duration"]
            }
        };
        known.extend(own.iter().map(|name| (*name).to_owned()));
        Unbound { message: format!("nothing named `{name}` is in reach here"), hint: None, known }
    }

    /// A name of a member, or why it has none although others have.
    pub(super) fn of_member(
        &self,
        member: &Member,
        span: Option<usize>,
        name: &str,
    ) -> (Option<Bound>, Option<String>) {
        if let Some(effect) = Effect::from_name(name) {
            return (Some(of(Source::Effect(effect), effect.kind())), None);
        }
        let section = &self[member.section];
        let material = &self[member.material];
        let properties = &section.properties;
        let symbols = properties.by_symbol();
        if let Some((_, kind, value)) = symbols.iter().find(|(symbol, ..)| *symbol == name) {
            return (Some(constant(*kind, *value)), None);
        }
        if let Some(value) = properties.dimensions.get(name) {
            return (Some(constant(Kind::SectionLength, *value)), None);
        }
        // European and American tables write the same strength as f_y and F_y.
        let other = match name {
            "f_y" => "F_y",
            "F_y" => "f_y",
            "f_u" => "F_u",
            "F_u" => "f_u",
            other => other,
        };
        let strengths = &material.strengths;
        if let Some((value, kind)) = strengths.get(name).or_else(|| strengths.get(other)) {
            return (Some(constant(*kind, *value)), None);
        }
        let has = |what: &str| format!("section `{}` has no known {what}", section.name);
        let states = |what: &str| format!("member `{}` states no {what}", member.name);
        let bounds = self.ends(member, span);
        let one_span = span.or((member.spans.len() == 1).then_some(0)).map(|k| member.spans[k]);
        let found = match name {
            "E" => constant(Kind::Modulus, material.e),
            "G" => constant(Kind::Modulus, material.g),
            "density" => constant(Kind::MassDensity, material.density),
            "depth" | "width" => {
                let size = if name == "depth" { properties.depth() } else { properties.width() };
                match size {
                    Some(size) => constant(Kind::SectionLength, size),
                    None => return (None, Some(has(name))),
                }
            }
            "A_el_z" => match properties.elastic_shear_area() {
                Some(area) => constant(Kind::Area, area),
                None => return (None, Some(has(name))),
            },
            "length" => constant(Kind::Length, member.length),
            "span" => match one_span {
                Some(span) => constant(Kind::Length, span.to - span.from),
                None => of(Source::Span, Kind::Length),
            },
            "x" => of(Source::Position, Kind::Length),
            "L_cr_y" | "L_cr_z" => match member.buckling_length[usize::from(name == "L_cr_z")] {
                Some(length) => constant(Kind::Length, length),
                None => return (None, Some(states("buckling length about this axis"))),
            },
            "top_held" => truth(member.held.top == HeldAlong::Continuous),
            "bottom_held" => truth(member.held.bottom == HeldAlong::Continuous),
            "unheld_top" | "unheld_bottom" => {
                let held =
                    if name == "unheld_top" { &member.held.top } else { &member.held.bottom };
                match unheld(member, held, bounds) {
                    Some(length) => constant(Kind::Length, length),
                    None => return (None, Some(states("restraint of this edge (`held`)"))),
                }
            }
            "start_free" | "end_free" => {
                truth(self.is_free(member, if name == "start_free" { bounds.0 } else { bounds.1 }))
            }
            "start_hinged" | "end_hinged" => {
                truth(is_hinged(member, if name == "start_hinged" { bounds.0 } else { bounds.1 }))
            }
            "cantilever" => match one_span {
                Some(span) => truth(span.is_cantilever()),
                None => Bound { source: Source::Cantilever, kind: None },
            },
            "shape" => word(properties.form),
            "family" => word(&material.family),
            "service_class" => match &material.service_class {
                Some(class) => word(class),
                None => {
                    let message = format!("material `{}` states no service class", material.name);
                    return (None, Some(message));
                }
            },
            "duration" => Bound { source: Source::Duration, kind: None },
            "A_vy" | "A_vz" | "W_el_y" | "W_el_z" | "W_pl_y" | "W_pl_z" | "I_w" | "z_top"
            | "z_bottom" | "y_plus" | "y_minus" => return (None, Some(has(name))),
            _ => return (None, None),
        };
        (Some(found), None)
    }

    /// Positions of the ends of the member or span.
    pub(super) fn ends(&self, member: &Member, span: Option<usize>) -> (f64, f64) {
        span.map_or((0.0, member.length), |span| (member.spans[span].from, member.spans[span].to))
    }

    fn is_free(&self, member: &Member, x: f64) -> bool {
        member.spans.iter().any(|span| {
            span.free[0] && span.from.total_cmp(&x).is_eq()
                || span.free[1] && span.to.total_cmp(&x).is_eq()
        })
    }

    fn of_node(&self, node: NodeId, relative_to: Option<NodeId>, name: &str) -> Option<Bound> {
        if let Some(component) = name.strip_prefix("reaction_") {
            let component = COMPONENTS.iter().position(|other| *other == component)?;
            self[node].support.as_ref()?;
            return Some(of(Source::Reaction(component), component_kind(component, true)));
        }
        if let Some(component) = name.strip_prefix("displacement_") {
            let component = COMPONENTS.iter().position(|other| *other == component)?;
            return Some(of(Source::Displacement(component), component_kind(component, false)));
        }
        let supported = self[node].support.is_some();
        Some(match name {
            "R_up" if supported => of(Source::Up, Kind::Force),
            "R_down" if supported => of(Source::Down, Kind::Force),
            "R_horizontal" if supported => of(Source::Horizontal, Kind::Force),
            "height" => {
                let other = relative_to?;
                constant(Kind::Length, self[node].at[2] - self[other].at[2])
            }
            "duration" => Bound { source: Source::Duration, kind: None },
            _ => return None,
        })
    }
}

/// Names of a member besides its effects, section properties and strengths.
const MEMBER_NAMES: [&str; 24] = [
    "A_el_z",
    "E",
    "G",
    "density",
    "depth",
    "width",
    "length",
    "span",
    "x",
    "L_cr_y",
    "L_cr_z",
    "top_held",
    "bottom_held",
    "unheld_top",
    "unheld_bottom",
    "start_free",
    "end_free",
    "start_hinged",
    "end_hinged",
    "cantilever",
    "shape",
    "family",
    "service_class",
    "duration",
];

fn word(text: &str) -> Bound {
    Bound { source: Source::Constant(Value::word(text)), kind: None }
}

/// Longest stretch of a part of a member between held places of an edge, its ends counted as held only
/// where they are; `None` where nothing is stated.
fn unheld(member: &Member, held: &HeldAlong, (from, to): (f64, f64)) -> Option<f64> {
    match held {
        HeldAlong::NotStated => None,
        HeldAlong::Continuous => Some(0.0),
        HeldAlong::At(nodes) => {
            let mut places = vec![from];
            places.extend(
                member
                    .along
                    .iter()
                    .zip(&member.stations)
                    .filter(|(node, x)| nodes.contains(node) && from < **x && **x < to)
                    .map(|(_, x)| *x),
            );
            places.push(to);
            Some(places.windows(2).map(|pair| pair[1] - pair[0]).fold(0.0, f64::max))
        }
    }
}

fn is_hinged(member: &Member, x: f64) -> bool {
    let station = member.stations.iter().position(|station| station.total_cmp(&x).is_eq());
    station.is_some_and(|station| member.release(station, Effect::My) == Release::Free)
}

fn of_structure(about: Option<NodeId>, name: &str) -> Option<Bound> {
    if let Some(component) = name.strip_prefix("sum_") {
        let component = COMPONENTS.iter().position(|other| *other == component)?;
        return Some(of(Source::SumOfReactions(component), component_kind(component, true)));
    }
    if let Some(component) = name.strip_prefix("largest_") {
        let component = COMPONENTS[..3].iter().position(|other| *other == component)?;
        return Some(of(Source::LargestDisplacement(component), Kind::Deflection));
    }
    match name {
        "M_stabilising" => about.map(|_| of(Source::Stabilising, Kind::Moment)),
        "M_overturning" => about.map(|_| of(Source::Overturning, Kind::Moment)),
        "duration" => Some(Bound { source: Source::Duration, kind: None }),
        _ => None,
    }
}

pub(super) type Arguments = [(Option<String>, Argument)];

/// `greatest(M_y)`, `least(M_y)`, `at(M_y, 0.25)` along the target of a check.
fn along(reading: &Reading, arguments: &Arguments) -> Result<Bound, Unbound> {
    let effect = match arguments.first() {
        Some((None, Argument::Name(name) | Argument::Text(name))) => Effect::from_name(name),
        _ => None,
    };
    let known = || super::EFFECTS.iter().map(|effect| effect.name().to_owned()).collect();
    let no_effect = || Unbound {
        message: format!("`{}` takes an effect such as `M_y`", reading.name),
        hint: None,
        known: known(),
    };
    match (reading.name.as_str(), arguments) {
        ("greatest", [_]) => {
            let effect = effect.ok_or_else(no_effect)?;
            Ok(of(Source::Greatest(effect), effect.kind()))
        }
        ("least", [_]) => {
            let effect = effect.ok_or_else(no_effect)?;
            Ok(of(Source::Least(effect), effect.kind()))
        }
        ("at", [_, (None, Argument::Quantity(Quantity { value, dimension }))])
            if *dimension == Dimension::NONE && (0.0..=1.0).contains(value) =>
        {
            let effect = effect.ok_or_else(no_effect)?;
            Ok(of(Source::At(effect, *value), effect.kind()))
        }
        ("at", _) => Err(Unbound {
            message: "`at` takes an effect and a share of the length between 0 and 1".to_owned(),
            hint: Some("for example `at(M_y, 0.25)`".to_owned()),
            known: Vec::new(),
        }),
        ("greatest" | "least", _) => Err(no_effect()),
        _ => Err(unknown_function(reading, &["greatest", "least", "at"])),
    }
}

pub(super) fn unknown_function(reading: &Reading, own: &[&str]) -> Unbound {
    let functions = crate::calc::Function::ALL.iter().map(|function| function.name());
    let language = ["value_in", "interpolate", "choose"];
    Unbound {
        message: format!("no function named `{}`", reading.name),
        hint: None,
        known: own.iter().copied().chain(functions).chain(language).map(str::to_owned).collect(),
    }
}

impl Model {
    /// What a check is made on, in words.
    #[must_use]
    pub fn on_name(&self, on: On) -> String {
        let name = |node: NodeId| self[node].name.as_str();
        match on {
            On::Member { member, span: None } => format!("member {}", self[member].name),
            On::Member { member, span: Some(span) } => {
                format!("member {}, span {}", self[member].name, span + 1)
            }
            On::Node { node, relative_to: None } => format!("node {}", name(node)),
            On::Node { node, relative_to: Some(other) } => {
                format!("node {} against {}", name(node), name(other))
            }
            On::Structure { structure, about: None } => {
                format!("structure {}", self[structure].name)
            }
            On::Structure { structure, about: Some(edge) } => {
                format!("structure {} about {}", self[structure].name, name(edge))
            }
        }
    }
}

impl On {
    /// The structure it stands in.
    #[must_use]
    pub fn structure(self, model: &Model) -> StructureId {
        match self {
            Self::Member { member, .. } => model[member].structure,
            Self::Node { node, .. } => model[node].structure,
            Self::Structure { structure, .. } => structure,
        }
    }

    /// What a check of this purpose shows here unless it says otherwise.
    #[must_use]
    pub fn usually_shows(self, purpose: Purpose) -> Shows {
        match purpose {
            Purpose::Equilibrium => Shows::Equilibrium,
            _ if !is_member(self) => Shows::Other,
            purpose if purpose.is_service() => Shows::Deflection,
            _ => Shows::Strength,
        }
    }
}
