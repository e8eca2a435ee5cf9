//! The resolved project: SI units, names resolved, nothing optional left that matters to the solver.
//!
//! Invariants
//! - Ids index the vectors of the [`Model`] they came from; entities stand in the order written.
//! - Lengths are finite and positive, members' nodes are collinear, axes orthonormal and right-handed:
//!   `project` checks each once and cannot build a model otherwise.
//! - Every entity keeps its origin in the file, so that later problems can point there.
//! - Never reads files, never computes an effect.

mod action;
mod call;
mod check;
mod combination;
mod effect;
mod reach;
mod settings;
mod structure;

pub use action::{
    Direction, Duration, Handed, Load, LoadCase, LoadForm, LoadKind, Nature, Part, Per, Relations,
    SpanLoading, Target, Written,
};
pub use check::{
    Agreement, Check, CheckTarget, Condition, DeflectionFrom, On, Placed, Shows, Slot, Step,
    Working, WorkingLine, located,
};
pub use combination::{Combination, Purpose, RuleUse, alike};
pub use effect::{EFFECTS, Effect, FORCES, STORED, Side};
pub use reach::{Bound, Of, Query, Source, State, Unbound};
pub use settings::{
    AnalysisSettings, Assumption, Basis, Deferral, Draw, MomentSide, PackageSettings, Paper,
    ProjectInfo, Revision, Standard,
};
pub use structure::{
    Axes, AxialOnly, Frame, Freedom, Held, HeldAlong, Hinge, Material, Member, Node, Release,
    Section, Span, Structure, Support,
};

use crate::diagnostic::Place;
use crate::quantity::{Dimension, Units};

macro_rules! ids {
    ($($(#[$doc:meta])* $name:ident),* $(,)?) => {$(
        $(#[$doc])*
        #[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
        pub struct $name(pub usize);
    )*};
}
ids! {
    /// Index into [`Model::structures`].
    StructureId,
    /// Index into [`Model::nodes`].
    NodeId,
    /// Index into [`Model::members`].
    MemberId,
    /// Index into [`Model::sections`].
    SectionId,
    /// Index into [`Model::materials`].
    MaterialId,
    /// Index into [`Model::cases`].
    CaseId,
    /// Index into [`Model::build_ups`].
    BuildUpId,
}

/// Where in the project file an entity was written.
pub type Origin = Place;

/// Everything the project states, resolved.
#[derive(Clone, Debug, PartialEq)]
pub struct Model {
    pub project: ProjectInfo,
    pub basis: Basis,
    pub units: Units,
    /// Significant digits printed.
    pub significant: usize,
    /// Shear deformation of catalogue and shape sections counts.
    pub shear_deformation: bool,
    pub analysis: AnalysisSettings,
    pub package: PackageSettings,
    pub values: Vec<NamedValue>,
    pub build_ups: Vec<BuildUp>,
    pub materials: Vec<Material>,
    pub sections: Vec<Section>,
    pub structures: Vec<Structure>,
    /// Structures in order of dependency: a structure that hands on reactions comes first.
    pub solve_order: Vec<StructureId>,
    pub nodes: Vec<Node>,
    pub members: Vec<Member>,
    pub cases: Vec<LoadCase>,
    /// Parts of cases that act by span; their ids follow those of the cases.
    pub parts: Vec<Part>,
    /// In the order written; `combinations[i].number` is what tables print.
    pub combinations: Vec<Combination>,
    /// Rules in use with what they made, in order.
    pub rules: Vec<RuleUse>,
    pub checks: Vec<Check>,
    /// Hand calculations of the narrative, in its order.
    pub workings: Vec<Working>,
    /// Chapters of narrative in the order of the package.
    pub narrative: Vec<Narrative>,
}

/// A narrative file with its place in the package.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Narrative {
    /// Path inside the project folder.
    pub file: String,
    /// The chapter of the package that it follows: `summary`, `checks`, …
    pub after: String,
    /// Its blocks in order.
    pub blocks: Vec<NarrativeBlock>,
}

/// A block of a narrative file.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum NarrativeBlock {
    /// The next of [`Model::workings`].
    Working,
    /// Ids in their registers.
    Assumption(String),
    Deferral(String),
    Reference(String),
    Open {
        text: String,
        by: Option<String>,
    },
}

/// A named constant of the project.
#[derive(Clone, Debug, PartialEq)]
pub struct NamedValue {
    pub name: String,
    /// SI.
    pub value: f64,
    pub dimension: Dimension,
    /// As written in the file, e.g. `0.4 m`.
    pub written: String,
    pub source: Option<String>,
    pub origin: Origin,
}

/// Layers that make up an area load.
#[derive(Clone, Debug, PartialEq)]
pub struct BuildUp {
    pub name: String,
    pub layers: Vec<Layer>,
    pub origin: Origin,
}

impl BuildUp {
    /// Sum of the layers, N/m².
    #[must_use]
    pub fn total(&self) -> f64 {
        self.layers.iter().map(|layer| layer.load).sum()
    }
}

/// One layer of a build-up.
#[derive(Clone, Debug, PartialEq)]
pub struct Layer {
    pub title: String,
    /// N/m².
    pub load: f64,
    pub source: Option<String>,
}

macro_rules! index_by_id {
    ($($id:ident => $field:ident: $entity:ident),* $(,)?) => {$(
        impl std::ops::Index<$id> for Model {
            type Output = $entity;
            fn index(&self, id: $id) -> &$entity {
                &self.$field[id.0]
            }
        }
    )*};
}
index_by_id! {
    StructureId => structures: Structure,
    NodeId => nodes: Node,
    MemberId => members: Member,
    SectionId => sections: Section,
    MaterialId => materials: Material,
    BuildUpId => build_ups: BuildUp,
}

impl std::ops::Index<CaseId> for Model {
    type Output = LoadCase;
    fn index(&self, id: CaseId) -> &LoadCase {
        match id.0.checked_sub(self.cases.len()) {
            None => &self.cases[id.0],
            Some(part) => &self.parts[part].case,
        }
    }
}

impl Model {
    /// Cases and their parts: every state that is solved.
    pub fn solved_states(&self) -> impl Iterator<Item = CaseId> + use<> {
        (0..self.cases.len() + self.parts.len()).map(CaseId)
    }

    /// The case that a part is of.
    #[must_use]
    pub fn whole_of(&self, id: CaseId) -> CaseId {
        id.0.checked_sub(self.cases.len()).map_or(id, |part| self.parts[part].of)
    }

    /// The parts of a case, none where it does not act by span.
    pub fn parts_of(&self, case: CaseId) -> impl Iterator<Item = CaseId> + '_ {
        let own = move |(_, part): &(usize, &Part)| part.of == case;
        let parts = self.parts.iter().enumerate().filter(own);
        parts.map(|(index, _)| CaseId(self.cases.len() + index))
    }

    /// The part behind an id.
    #[must_use]
    pub fn part(&self, id: CaseId) -> Option<&Part> {
        self.parts.get(id.0.checked_sub(self.cases.len())?)
    }
}
