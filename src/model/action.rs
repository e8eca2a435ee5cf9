//! Load cases and their loads, resolved to global axes and SI.

use super::{BuildUpId, CaseId, MemberId, NodeId, Origin};

/// One load case.
#[derive(Clone, Debug, PartialEq)]
pub struct LoadCase {
    pub name: String,
    pub title: String,
    pub nature: Nature,
    pub category: Option<String>,
    /// ψ0, ψ1, ψ2 where stated.
    pub psi: Option<[f64; 3]>,
    pub relations: Relations,
    /// Each span may be loaded or not.
    pub by_span: Option<SpanLoading>,
    pub duration: Option<Duration>,
    pub source: Option<String>,
    pub self_weight: bool,
    pub loads: Vec<Load>,
    pub origin: Origin,
}

/// Which spans of a case that acts by span can be loaded together.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum SpanLoading {
    /// Every choice of spans.
    Any,
    /// Alternate spans, and two adjacent spans (EN 1992-1-1, 5.1.3(1)P, from memory).
    AlternateAndAdjacent,
    /// Alternate spans, and all of them.
    Alternate,
}

/// The part of a case that one span takes; a solved state of its own.
#[derive(Clone, Debug, PartialEq)]
pub struct Part {
    pub of: CaseId,
    /// Member and span, counted from 0; `None` for what acts on no span.
    pub on: Option<(MemberId, usize)>,
    /// Its loads, under a name such as `Q/B1.1`.
    pub case: LoadCase,
}

/// How a case acts with others.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Relations {
    /// At most one case of this name acts at a time.
    pub one_of: Option<String>,
    /// Acts only when all of these act.
    pub together_with: Vec<CaseId>,
    /// Acts in the opposite sense too.
    pub reverses: bool,
    /// Permanent actions of one group are favourable or unfavourable together.
    pub source_group: Option<String>,
}

/// Nature of an action, in the words of the standards.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Nature {
    Permanent,
    Imposed,
    RoofLive,
    Snow,
    Rain,
    Wind,
    Thermal,
    Fluid,
    Earth,
    Settlement,
    Accidental,
    SeismicHorizontal,
    SeismicVertical,
    Construction,
}

/// Load duration class, longest first.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Duration {
    Permanent,
    Long,
    Medium,
    Short,
    Instantaneous,
}

/// One load: what acts, and how it was written (for tables and drawings).
#[derive(Clone, Debug, PartialEq)]
pub struct Load {
    pub kind: LoadKind,
    pub written: Written,
    pub source: Option<String>,
    pub origin: Origin,
}

/// What a load acts on.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Target {
    Member(MemberId),
    Node(NodeId),
}

/// What acts. Positions run along the member from its start, m; vectors are global.
#[derive(Clone, Debug, PartialEq)]
pub enum LoadKind {
    /// Force per metre of member, varying linearly from `start` at `from` to `end` at `to`, N/m.
    Line { member: MemberId, from: f64, to: f64, start: [f64; 3], end: [f64; 3] },
    /// Force (N) and moment (N m, right hand) at a point of a member.
    Point { member: MemberId, at: f64, force: [f64; 3], moment: [f64; 3] },
    /// Force and moment on a node.
    Node { node: NodeId, force: [f64; 3], moment: [f64; 3] },
    /// Movement of the ground end of a support, along the support's own axes (m, rad).
    Displaced { node: NodeId, by: [Option<f64>; 6] },
    /// Warming of the whole member: `mean` at the centroid (K), gradients over the depth: top (+z)
    /// minus bottom per metre of depth, K/m, and likewise +y minus −y.
    Warming { member: MemberId, mean: f64, gradient_z: f64, gradient_y: f64 },
    /// Made too long by so much, m.
    LackOfFit { member: MemberId, length: f64 },
    /// Reactions of a node of another structure, turned round, at each position (or on a node).
    Handed(Handed),
}

/// A reaction handed on.
#[derive(Clone, Debug, PartialEq)]
pub struct Handed {
    /// The supported node whose reaction is taken, for the same load case.
    pub from: NodeId,
    pub to: Target,
    /// Positions along the member, m; for a node a single 0.
    pub at: Vec<f64>,
}

/// How a load was written.
#[derive(Clone, Debug, PartialEq)]
pub struct Written {
    pub form: LoadForm,
    pub direction: Direction,
    pub per: Per,
    /// Intensity or force as given, SI, along `direction`; two values for `varying`.
    pub values: Vec<f64>,
    /// Tributary width, m.
    pub width: Option<f64>,
    pub build_up: Option<BuildUpId>,
    /// Spacing of reactions handed on, m.
    pub every: Option<f64>,
    /// The span named in the file, counted from 1.
    pub span: Option<usize>,
}

/// The deciding key of a load.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum LoadForm {
    SelfWeight,
    Uniform,
    Varying,
    Area,
    BuildUp,
    Point,
    PointMoment,
    Nodal,
    Displaced,
    Warming,
    LackOfFit,
    ReactionOf,
}

/// Direction of a load.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Direction {
    /// Global axis 0, 1, 2 with its sign; down is (2, −1).
    Global { axis: usize, sign: i8 },
    /// Local axis 0, 1, 2 of the member with its sign.
    Local { axis: usize, sign: i8 },
}

/// What a line load counts per.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Per {
    /// Metre along the member.
    Length,
    /// Metre of the member's projection at right angles to the load.
    Projected,
}

impl Nature {
    /// The word of the project file and the package.
    #[must_use]
    pub const fn name(self) -> &'static str {
        match self {
            Self::Permanent => "permanent",
            Self::Imposed => "imposed",
            Self::RoofLive => "roof live",
            Self::Snow => "snow",
            Self::Rain => "rain",
            Self::Wind => "wind",
            Self::Thermal => "thermal",
            Self::Fluid => "fluid",
            Self::Earth => "earth",
            Self::Settlement => "settlement",
            Self::Accidental => "accidental",
            Self::SeismicHorizontal => "seismic horizontal",
            Self::SeismicVertical => "seismic vertical",
            Self::Construction => "construction",
        }
    }
}

impl Duration {
    /// The word of the project file and the package.
    #[must_use]
    pub const fn name(self) -> &'static str {
        match self {
            Self::Permanent => "permanent",
            Self::Long => "long",
            Self::Medium => "medium",
            Self::Short => "short",
            Self::Instantaneous => "instantaneous",
        }
    }
}

impl LoadForm {
    /// The deciding key of the project file.
    #[must_use]
    pub const fn name(self) -> &'static str {
        match self {
            Self::SelfWeight => "self_weight",
            Self::Uniform => "uniform",
            Self::Varying => "varying",
            Self::Area => "area",
            Self::BuildUp => "build_up",
            Self::Point => "point",
            Self::PointMoment => "point_moment",
            Self::Nodal => "force",
            Self::Displaced => "displaced",
            Self::Warming => "warming",
            Self::LackOfFit => "lack_of_fit",
            Self::ReactionOf => "reaction_of",
        }
    }
}

impl Direction {
    /// Downward, the default.
    pub const DOWN: Self = Self::Global { axis: 2, sign: -1 };

    /// As printed: `down`, `+X`, `local -z`.
    #[must_use]
    pub fn name(self) -> String {
        match self {
            Self::Global { axis: 2, sign: -1 } => "down".to_owned(),
            Self::Global { axis: 2, sign: _ } => "up".to_owned(),
            Self::Global { axis, sign } => format!("{}{}", sign_mark(sign), ["X", "Y", "Z"][axis]),
            Self::Local { axis, sign } => {
                format!("local {}{}", sign_mark(sign), ["x", "y", "z"][axis])
            }
        }
    }
}

fn sign_mark(sign: i8) -> char {
    if sign < 0 { '-' } else { '+' }
}
