//! What the project says about itself and about its package.

use super::Origin;

/// The `project` block.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct ProjectInfo {
    pub title: String,
    pub number: String,
    pub client: Option<String>,
    pub subject: Option<String>,
    /// At least one; the last is the present revision.
    pub revisions: Vec<Revision>,
}

/// A row of the revision table.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Revision {
    pub mark: String,
    /// `YYYY-MM-DD`, checked to be a date.
    pub date: String,
    pub status: String,
    pub note: String,
    /// Blank: to be signed on paper.
    pub originated: String,
    pub checked: String,
    pub approved: String,
}

/// The `basis` block.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Basis {
    pub national_annex: Option<String>,
    pub consequence_class: Option<String>,
    pub working_life: Option<String>,
    pub standards: Vec<Standard>,
    pub assumptions: Vec<Assumption>,
    pub deferred: Vec<Deferral>,
}

/// A standard by id, title and edition.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Standard {
    pub id: String,
    pub title: String,
    pub edition: String,
}

/// An assumption; anything but `confirmed` is an open item.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Assumption {
    pub id: String,
    pub text: String,
    pub confirmed: bool,
    pub by: Option<String>,
    pub source: Option<String>,
    pub origin: Origin,
}

/// What this package leaves to somebody else.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Deferral {
    pub id: String,
    pub text: String,
    /// To which clause or person.
    pub to: String,
    /// Ids of checks whose deferred outcome this covers.
    pub checks: Vec<String>,
}

/// The `analysis` block.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct AnalysisSettings {
    /// First order is all there is for now.
    pub order: String,
    pub imperfections: String,
}

/// The `package` block.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct PackageSettings {
    pub draw: Draw,
    pub moments: MomentSide,
    pub paper: Paper,
    /// Draw the local axes of members on the model drawing.
    pub local_axes: bool,
}

/// Whose effects the package draws and the record file holds.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Draw {
    All,
    /// Members that hold a governing value.
    Governing,
    /// These members.
    Named(Vec<String>),
}

/// On which side moment diagrams are drawn.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum MomentSide {
    Tension,
    Compression,
}

/// Sheet size of the printed package.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Paper {
    A4,
    Letter,
}
