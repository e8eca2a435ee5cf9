//! Materials, sections and structures as written.

use schemars::JsonSchema;
use serde::Deserialize;

use super::words::{Accepted, Anchored, AsWritten, Axis, Continuous, ShapeKind, SupportKind};
use crate::model::Frame;
use crate::project::text::{Map, Text, Word};

/// Catalogue designation, a shape with its dimensions, or properties given by hand.
#[derive(Clone, Debug, Default, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Section {
    /// Designation in the catalogue.
    pub catalogue: Option<Text>,
    /// Shape whose properties follow from its dimensions.
    pub shape: Option<Word<ShapeKind>>,
    /// Properties given by hand: local-axis names, or major and minor.
    #[serde(default)]
    #[schemars(schema_with = "crate::project::keys::given")]
    pub given: Option<Map<Text>>,
    /// The axes of given properties are meant as written.
    pub axes: Option<Word<AsWritten>>,
    /// Where the section or its properties come from.
    pub source: Option<Text>,
    /// Overall width, along y.
    pub width: Option<Text>,
    /// Overall depth, along z.
    pub depth: Option<Text>,
    /// Outer diameter.
    pub diameter: Option<Text>,
    /// Wall or leg thickness.
    pub thickness: Option<Text>,
    /// Web thickness.
    pub web: Option<Text>,
    /// Flange thickness.
    pub flange: Option<Text>,
    /// Width of the top flange.
    pub top_width: Option<Text>,
    /// Thickness of the top flange.
    pub top_flange: Option<Text>,
    /// Width of the bottom flange.
    pub bottom_width: Option<Text>,
    /// Thickness of the bottom flange.
    pub bottom_flange: Option<Text>,
    /// Radius of the root fillets.
    pub root_radius: Option<Text>,
    /// Radius of the toes.
    pub toe_radius: Option<Text>,
    /// Outer corner radius of a hollow section.
    pub outer_radius: Option<Text>,
    /// Inner corner radius of a hollow section.
    pub inner_radius: Option<Text>,
    /// Slope of a channel's inner flange faces.
    pub taper: Option<Taper>,
    /// Corners [y, z] of a polygon, in order.
    #[schemars(length(min = 3))]
    pub points: Option<Vec<[Text; 2]>>,
    /// Holes of a polygon, each a list of corners.
    pub holes: Option<Vec<Vec<[Text; 2]>>>,
    /// St Venant torsion constant of a polygon.
    pub torsion_constant: Option<Text>,
}

/// Slope of inner flange faces.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Taper {
    /// Rise over run.
    pub slope: Text,
    /// Where the flange thickness is measured, from the back of the web.
    pub measured_at: Text,
}

/// One set of nodes and members, solved on its own.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Structure {
    /// Plane or space.
    pub frame: Word<Frame>,
    /// Nodes with their coordinates.
    #[schemars(schema_with = "crate::project::keys::nodes")]
    pub nodes: Map<Vec<Text>>,
    /// Members by name.
    pub members: Map<Member>,
    /// Supports by node.
    #[serde(default)]
    pub supports: Map<Support>,
}

/// A physical piece along two or more collinear nodes.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Member {
    /// Collinear nodes from the start to the end.
    #[schemars(length(min = 2))]
    pub along: Vec<Text>,
    /// Nodes that bound the spans; left out: the ends and the supported nodes.
    #[schemars(length(min = 2))]
    pub spans: Option<Vec<Text>>,
    /// Name of a section.
    pub section: Text,
    /// Name of a material.
    pub material: Text,
    /// Where local z points: a node, or a direction [x, y, z].
    pub z_towards: Option<Towards>,
    /// Turns y and z right-handed about +x.
    pub rotate: Option<Text>,
    /// Released internal forces, at `start`, `end` or an inner node.
    #[serde(default)]
    pub hinges: Map<Hinge>,
    /// Carries axial force only.
    pub axial_only: Option<bool>,
    /// Compression in a member that carries axial force only is accepted.
    pub compression: Option<Word<Accepted>>,
    /// Where the top and bottom edges are held against moving sideways.
    pub held: Option<Held>,
    /// Buckling lengths.
    pub buckling_length: Option<BucklingLength>,
    /// Reduction of imposed loads in the results and checks of this member alone.
    pub imposed_reduction: Option<ImposedReduction>,
}

/// Where local z points.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(rename = "$kind")]
#[schemars(rename = "Towards", untagged)]
pub enum Towards {
    /// Towards this node.
    Word(Text),
    /// Along this global direction.
    List([Text; 3]),
}

/// Internal forces released: `free` or a spring.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
#[schemars(extend("minProperties" = 1))]
pub struct Hinge {
    /// Axial force.
    #[serde(rename = "N")]
    pub n: Option<Text>,
    /// Shear along y.
    #[serde(rename = "V_y")]
    pub v_y: Option<Text>,
    /// Shear along z.
    #[serde(rename = "V_z")]
    pub v_z: Option<Text>,
    /// Torsion.
    #[serde(rename = "T")]
    pub t: Option<Text>,
    /// Bending about y.
    #[serde(rename = "M_y")]
    pub m_y: Option<Text>,
    /// Bending about z.
    #[serde(rename = "M_z")]
    pub m_z: Option<Text>,
}

impl Hinge {
    /// N, V_y, V_z, T, M_y, M_z.
    #[must_use]
    pub fn releases(&self) -> [Option<&Text>; 6] {
        [&self.n, &self.v_y, &self.v_z, &self.t, &self.m_y, &self.m_z].map(Option::as_ref)
    }
}

/// Edges held against moving sideways.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Held {
    /// The +z edge.
    pub top: Option<HeldAlong>,
    /// The -z edge.
    pub bottom: Option<HeldAlong>,
}

/// How one edge is held.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(rename = "$kind")]
#[schemars(rename = "HeldAlong", untagged)]
pub enum HeldAlong {
    /// Over its whole length.
    Word(Word<Continuous>),
    /// At these nodes.
    List(Vec<Text>),
}

/// Lengths for buckling about the local axes.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct BucklingLength {
    /// About y.
    pub y: Option<Text>,
    /// About z.
    pub z: Option<Text>,
}

/// A support by its kind, or freedom by freedom.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(rename = "$kind")]
#[schemars(rename = "Support", untagged)]
pub enum Support {
    /// pinned, fork or fixed.
    Word(Word<SupportKind>),
    /// A kind with more said about it, or per freedom.
    Map(Box<SupportMap>),
}

/// Each freedom is `fixed` or a spring; a freedom not named is free, or as the kind has it.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct SupportMap {
    /// pinned, fork or fixed; freedoms named beside it are set in addition.
    pub kind: Option<Word<SupportKind>>,
    /// Movement along X.
    #[serde(rename = "X")]
    pub x: Option<Text>,
    /// Movement along Y.
    #[serde(rename = "Y")]
    pub y: Option<Text>,
    /// Movement along Z.
    #[serde(rename = "Z")]
    pub z: Option<Text>,
    /// Rotation about X.
    #[serde(rename = "RX")]
    pub rx: Option<Text>,
    /// Rotation about Y.
    #[serde(rename = "RY")]
    pub ry: Option<Text>,
    /// Rotation about Z.
    #[serde(rename = "RZ")]
    pub rz: Option<Text>,
    /// Turns the support's axes, right-handed: an angle about Y, or an angle about an axis.
    pub turned: Option<Turned>,
    /// A combination that lifts this support is accepted.
    pub uplift: Option<Word<Anchored>>,
}

impl SupportMap {
    /// X, Y, Z, RX, RY, RZ.
    #[must_use]
    pub fn freedoms(&self) -> [Option<&Text>; 6] {
        [&self.x, &self.y, &self.z, &self.rx, &self.ry, &self.rz].map(Option::as_ref)
    }
}

/// How a support is turned.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(rename = "$kind")]
#[schemars(rename = "Turned", untagged)]
pub enum Turned {
    /// An angle about Y.
    Word(Text),
    /// An angle about a named axis.
    Map(TurnedAbout),
}

/// An angle about a global axis, right-handed.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct TurnedAbout {
    /// The axis.
    pub about: Word<Axis>,
    /// The angle.
    pub by: Text,
}

/// Reduction of imposed loads for area or number of storeys.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct ImposedReduction {
    /// Factor on imposed loads, above 0 and at most 1.
    pub factor: Text,
    /// Clause or calculation that it comes from.
    pub source: Text,
}
