//! The project file as written: one struct for each block.
//!
//! Invariants
//! - Leaves are [`Text`](super::text::Text) or [`Word`](super::text::Word) and know their places, keys of
//!   maps likewise; quantities and names are not looked at here.
//! - Maps keep the order of the file.
//! - Filled only from a file without shape problems: of a load, a section, a material, a support and the
//!   project itself the combination of keys is one that `keys` allows.

mod about;
mod actions;
mod checks;
mod parts;
pub mod words;

pub use about::{
    Analysis, Assumption, Basis, Deferral, Draw, Layer, NamedValue, Package, Precision,
    ProjectInfo, Revision, Standard, Units,
};
pub use actions::{
    Combination, Combinations, Components, Load, LoadCase, Movement, Rule, SelfWeight, Warming,
};
pub use checks::{Check, Condition, Members, Narrative, OpenPoint, Placed};
pub use parts::{
    BucklingLength, Held, HeldAlong, Hinge, ImposedReduction, Member, Section, Structure, Support,
    SupportMap, Taper, Towards, Turned, TurnedAbout,
};

use schemars::JsonSchema;
use serde::Deserialize;

use super::text::{Located, Map, Text, Word};
use crate::model::Frame;

/// A structural calculation project: every dimensioned value carries its unit.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Project {
    /// Form of this file: 1.
    #[schemars(extend("enum" = [1, "1"]))]
    pub format: Text,
    /// What the package is called and which issue this is.
    pub project: ProjectInfo,
    /// What the calculation stands on.
    #[serde(default)]
    pub basis: Basis,
    /// Units printed: a system, and one unit for each kind of value that prints otherwise.
    #[serde(default)]
    #[schemars(schema_with = "super::keys::units")]
    pub units: Units,
    /// Digits printed.
    pub precision: Option<Precision>,
    /// Shear deformation of catalogue and shape sections counts.
    pub shear_deformation: Option<bool>,
    /// How the structures are analysed.
    pub analysis: Option<Analysis>,
    /// What the package shows and on which paper.
    pub package: Option<Package>,
    /// Named constants, usable in any quantity.
    #[serde(default)]
    pub values: Map<NamedValue>,
    /// Layers that make up area loads.
    #[serde(default)]
    pub build_ups: Map<Vec<Located<Layer>>>,
    /// Materials by name: a catalogue grade, or in full.
    #[schemars(schema_with = "super::keys::materials")]
    pub materials: Map<Material>,
    /// Sections by name.
    pub sections: Map<Section>,
    /// Structures by name, each solved on its own.
    pub structures: Option<Map<Structure>>,
    /// Plane or space, for a project of one structure.
    pub frame: Option<Word<Frame>>,
    /// Nodes with their coordinates, for a project of one structure.
    #[serde(default)]
    #[schemars(schema_with = "super::keys::nodes")]
    pub nodes: Option<Map<Vec<Text>>>,
    /// Members by name, for a project of one structure.
    pub members: Option<Map<Member>>,
    /// Supports by node, for a project of one structure.
    pub supports: Option<Map<Support>>,
    /// Load cases by name.
    pub load_cases: Map<LoadCase>,
    /// Combinations of load cases.
    #[serde(default)]
    pub combinations: Combinations,
    /// Groups of members by name, for checks.
    #[serde(default)]
    pub groups: Map<Vec<Text>>,
    /// Checks, in the order of the package.
    #[serde(default)]
    pub checks: Vec<Located<Check>>,
    /// Chapters of Markdown with live values; all files of `narrative` in order of name unless listed.
    pub narrative: Option<Vec<Narrative>>,
}

/// Keys of a material → text; see `keys::MATERIAL` for those that are allowed.
pub type Material = Map<Text>;
