//! Checks as resolved: formulas parsed, what they read bound to its source.

use super::reach::Bound;
use super::{MemberId, NodeId, Origin, Purpose, StructureId};
use crate::calc::{CalcError, Formula};
use crate::diagnostic::Place;

/// One check with everything it is made on.
#[derive(Clone, Debug, PartialEq)]
pub struct Check {
    pub id: String,
    pub title: String,
    /// Clause or source.
    pub reference: String,
    /// Id and title of the sheet it comes from.
    pub sheet: Option<String>,
    pub shows: Shows,
    /// The word of the project file: a purpose, or `service`.
    pub purpose: String,
    pub purposes: Vec<Purpose>,
    /// Only the variable part of each combination counts.
    pub variable_only: bool,
    pub deflection: DeflectionFrom,
    /// A demand below zero is meant, and then satisfied.
    pub one_sided: bool,
    /// Greatest utilisation that satisfies.
    pub limit: f64,
    /// Ids of assumptions.
    pub relies_on: Vec<String>,
    /// Every reading of every formula, each once.
    pub readings: Vec<String>,
    pub steps: Vec<Step>,
    pub validity: Vec<Condition>,
    pub demand: Placed,
    pub capacity: Placed,
    pub targets: Vec<CheckTarget>,
    pub cautions: Vec<String>,
    pub origin: Origin,
}

/// What a check shows of a member.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Shows {
    Strength,
    Stability,
    Deflection,
    Equilibrium,
    Bearing,
    Other,
}

/// What deflections are measured from.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum DeflectionFrom {
    Chord,
    Undeformed,
    /// The tangent at the support of a span with a free end.
    SupportTangent,
}

/// What a check is made on, with its readings bound.
#[derive(Clone, Debug, PartialEq)]
pub struct CheckTarget {
    pub on: On,
    /// By reading of the check, `None` for those that are steps; empty where `deferred`.
    pub bound: Vec<Option<Bound>>,
    /// Why the check does not apply here.
    pub deferred: Option<String>,
}

/// What a check is made on.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum On {
    /// A member, or one of its spans counted from 0.
    Member { member: MemberId, span: Option<usize> },
    /// A node; displacements relative to another where one is named.
    Node { node: NodeId, relative_to: Option<NodeId> },
    /// A structure as a whole; overturning about a line through a node.
    Structure { structure: StructureId, about: Option<NodeId> },
}

/// A value computed on the way.
#[derive(Clone, Debug, PartialEq)]
pub struct Step {
    pub symbol: String,
    pub formula: Placed,
    /// What it is.
    pub meaning: Option<String>,
    pub clause: Option<String>,
}

/// A condition without which a check says nothing.
#[derive(Clone, Debug, PartialEq)]
pub struct Condition {
    pub formula: Placed,
    pub reason: String,
}

/// A formula, where it was written, and where its readings stand in the list of all.
#[derive(Clone, Debug, PartialEq)]
pub struct Placed {
    pub formula: Formula,
    /// For each reading of the formula: a reading of the check, or an earlier step.
    pub slots: Vec<Slot>,
    pub place: Place,
    /// Bytes of `place` stand for those of the formula one by one.
    pub exact: bool,
}

/// Where a formula's reading comes from.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Slot {
    /// Index into the readings of the whole.
    Reading(usize),
    /// Index of an earlier step.
    Step(usize),
}

impl Placed {
    /// Where a part of the formula stands in its file.
    #[must_use]
    pub fn at(&self, error: &CalcError) -> Place {
        located(&self.place, self.exact, error)
    }
}

/// Where a part of a formula stands; the whole where the text in the file is not the formula's own.
#[must_use]
pub fn located(place: &Place, exact: bool, error: &CalcError) -> Place {
    if !exact {
        return place.clone();
    }
    let start = place.range.start;
    Place { file: place.file.clone(), range: start + error.range.start..start + error.range.end }
}

impl Shows {
    /// All, in printing order.
    pub const ALL: [Self; 6] = [
        Self::Strength,
        Self::Stability,
        Self::Deflection,
        Self::Equilibrium,
        Self::Bearing,
        Self::Other,
    ];

    /// The word of the project file and the record.
    #[must_use]
    pub const fn name(self) -> &'static str {
        match self {
            Self::Strength => "strength",
            Self::Stability => "stability",
            Self::Deflection => "deflection",
            Self::Equilibrium => "equilibrium",
            Self::Bearing => "bearing",
            Self::Other => "other",
        }
    }
}

/// A block of hand calculation in the narrative.
#[derive(Clone, Debug, PartialEq)]
pub struct Working {
    /// The narrative file.
    pub file: String,
    /// Every reading of every formula, each once.
    pub readings: Vec<String>,
    /// By reading; `None` for steps.
    pub bound: Vec<Option<Bound>>,
    pub lines: Vec<WorkingLine>,
    pub origin: Origin,
}

/// One line of a working block.
#[derive(Clone, Debug, PartialEq)]
pub enum WorkingLine {
    Remark(String),
    /// The steps of one file are numbered through its blocks.
    Step(Box<Step>),
    Agreement(Box<Agreement>),
}

/// Two values that must agree.
#[derive(Clone, Debug, PartialEq)]
pub struct Agreement {
    pub id: String,
    pub title: String,
    pub value: Placed,
    pub with: Placed,
    /// Largest difference as a share of the second value.
    pub tolerance: f64,
    pub origin: Origin,
}
