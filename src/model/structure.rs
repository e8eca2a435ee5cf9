//! Nodes, members, supports, sections and materials.

use indexmap::IndexMap;

use super::{Effect, MaterialId, MemberId, NodeId, Origin, SectionId, StructureId};
use crate::quantity::Kind;
use crate::section::Properties;

/// Rows are unit vectors x, y, z in global coordinates.
pub type Axes = [[f64; 3]; 3];

/// Plane frames lie in X-Z.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Frame {
    /// Out-of-plane freedoms (Y, RX, RZ) of every node are fixed.
    Plane,
    Space,
}

/// One connected (or not) set of nodes and members, solved on its own.
#[derive(Clone, Debug, PartialEq)]
pub struct Structure {
    pub name: String,
    pub frame: Frame,
    pub nodes: Vec<NodeId>,
    pub members: Vec<MemberId>,
    pub origin: Origin,
}

/// A node with its support, if any.
#[derive(Clone, Debug, PartialEq)]
pub struct Node {
    pub name: String,
    pub structure: StructureId,
    /// Global coordinates, m; Y = 0 in a plane frame.
    pub at: [f64; 3],
    pub support: Option<Support>,
    pub origin: Origin,
}

/// A support. Freedoms along X Y Z, then about X Y Z, of its own axes.
#[derive(Clone, Debug, PartialEq)]
pub struct Support {
    /// `pinned`, `fork`, `fixed` or `per freedom`.
    pub kind: String,
    pub freedoms: [Freedom; 6],
    /// Rows are the support's own axes in global coordinates (unit matrix where not turned).
    pub axes: Axes,
    /// As written, e.g. `15° about Y`.
    pub turned: Option<String>,
    /// A combination that lifts this support is accepted (`uplift: anchored`).
    pub uplift_anchored: bool,
    pub origin: Origin,
}

/// One freedom of a support.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Freedom {
    Free,
    Fixed,
    /// N/m or N m/rad, positive.
    Spring(f64),
}

/// A physical piece along two or more collinear nodes.
#[derive(Clone, Debug, PartialEq)]
pub struct Member {
    pub name: String,
    pub structure: StructureId,
    pub along: Vec<NodeId>,
    /// Position of each node of `along` from the member's start, m; the first is 0.
    pub stations: Vec<f64>,
    pub length: f64,
    pub axes: Axes,
    pub section: SectionId,
    pub material: MaterialId,
    pub hinges: Vec<Hinge>,
    pub spans: Vec<Span>,
    /// The spans were written in the file (not the default stretches).
    pub spans_written: bool,
    pub held: Held,
    /// For buckling about y and z, m, where stated.
    pub buckling_length: [Option<f64>; 2],
    /// Factor on imposed loads in the results and checks of this member alone, with its source.
    pub imposed_reduction: Option<(f64, String)>,
    /// Carries axial force only.
    pub axial_only: Option<AxialOnly>,
    pub origin: Origin,
}

/// A member that carries axial force only.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct AxialOnly {
    /// `compression: accepted`.
    pub compression_accepted: bool,
}

/// Internal forces released at a station of a member.
///
/// At the start the release is on the after side of the first node, at the end on the before side of
/// the last. At an inner node the piece after it is released: whatever else meets the node is
/// attached to the piece before it.
#[derive(Clone, Debug, PartialEq)]
pub struct Hinge {
    /// Index into [`Member::along`].
    pub station: usize,
    /// N, V_y, V_z, T, M_y, M_z.
    pub releases: [Release; 6],
    pub origin: Origin,
}

/// One internal force at a hinge.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Release {
    /// Passed on in full.
    Rigid,
    Free,
    /// N/m or N m/rad, positive.
    Spring(f64),
}

/// What the engineer calls a span.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Span {
    pub nodes: [NodeId; 2],
    /// Positions along the member, m.
    pub from: f64,
    pub to: f64,
    /// The start / the end is free: neither supported nor joined to another member.
    pub free: [bool; 2],
}

impl Span {
    /// One end is free, the other is not.
    #[must_use]
    pub const fn is_cantilever(&self) -> bool {
        self.free[0] != self.free[1]
    }
}

/// Where the top (+z) and bottom (−z) edges are held against moving sideways.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Held {
    pub top: HeldAlong,
    pub bottom: HeldAlong,
}

/// Restraint along one edge.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub enum HeldAlong {
    #[default]
    NotStated,
    Continuous,
    At(Vec<NodeId>),
}

/// A section as used, with where it came from.
#[derive(Clone, Debug, PartialEq)]
pub struct Section {
    pub name: String,
    /// E.g. `IPE 300`, `rectangle 75 × 220 mm`, `given properties`.
    pub title: String,
    pub properties: Properties,
    pub source: String,
    pub origin: Origin,
}

/// A material as used, with where it came from.
#[derive(Clone, Debug, PartialEq)]
pub struct Material {
    pub name: String,
    /// E.g. `S275`, `C24`; the name where given in full.
    pub title: String,
    /// `steel`, `timber`, `aluminium`, `concrete` or `other`.
    pub family: String,
    /// Young's modulus, Pa.
    pub e: f64,
    /// Shear modulus, Pa.
    pub g: f64,
    /// kg/m³.
    pub density: f64,
    /// 1/K.
    pub expansion: f64,
    /// Strengths and the like by symbol (`f_y`, `f_u`, `f_m_k`, …), SI, with what they are.
    pub strengths: IndexMap<String, (f64, Kind)>,
    /// Greatest thickness at which the strengths hold, m; `None` where they do not depend on it.
    pub up_to: Option<f64>,
    pub service_class: Option<String>,
    pub source: String,
    pub origin: Origin,
}

impl Member {
    /// The span that holds position `x` (m), counted from 0; at a joint of two spans the earlier.
    #[must_use]
    pub fn span_at(&self, x: f64) -> Option<usize> {
        self.spans.iter().position(|span| span.from <= x && x <= span.to)
    }

    /// What the given effect is released to at a station, if there is a hinge.
    #[must_use]
    pub fn release(&self, station: usize, force: Effect) -> Release {
        self.hinges
            .iter()
            .find(|hinge| hinge.station == station)
            .map_or(Release::Rigid, |hinge| hinge.releases[force.index()])
    }
}
