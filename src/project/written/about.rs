//! Blocks in which a project speaks of itself and of its package.

use schemars::JsonSchema;
use serde::Deserialize;

use super::words::{DrawWord, Imperfections, Order, Status};
use crate::model::{MomentSide, Paper};
use crate::project::text::{Located, Map, Text, Word};

/// What the package is called and which issue this is.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct ProjectInfo {
    /// Title of the calculation package.
    pub title: Text,
    /// Document number.
    pub number: Text,
    /// Who it is for.
    pub client: Option<Text>,
    /// What part of the works it treats.
    pub subject: Option<Text>,
    /// Every revision, oldest first; the last is the present one.
    #[schemars(length(min = 1))]
    pub revisions: Vec<Located<Revision>>,
}

/// A row of the revision table. Names stay blank to be signed on paper.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Revision {
    /// Mark of the revision, e.g. `A`.
    pub mark: Text,
    /// Date as `YYYY-MM-DD`.
    pub date: Text,
    /// E.g. `for checking`.
    pub status: Text,
    /// What changed.
    pub note: Option<Text>,
    /// Who made it.
    pub originated: Option<Text>,
    /// Who checked it.
    pub checked: Option<Text>,
    /// Who approved it.
    pub approved: Option<Text>,
}

/// What the calculation stands on.
#[derive(Clone, Debug, Default, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Basis {
    /// National annex whose values are used.
    pub national_annex: Option<Text>,
    /// Consequence class or risk category.
    pub consequence_class: Option<Text>,
    /// Design working life.
    pub working_life: Option<Text>,
    /// Standards used.
    #[serde(default)]
    pub standards: Vec<Located<Standard>>,
    /// What was assumed, and whether it is confirmed.
    #[serde(default)]
    pub assumptions: Vec<Located<Assumption>>,
    /// What this package leaves to others.
    #[serde(default)]
    pub deferred: Vec<Located<Deferral>>,
}

/// A standard by id, title and edition.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Standard {
    /// Short name, unique in the project.
    pub id: Text,
    /// Title.
    pub title: Text,
    /// Edition with amendments.
    pub edition: Text,
}

/// An assumption; until confirmed it is an open item.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Assumption {
    /// Short name, unique in the project.
    pub id: Text,
    /// The assumption.
    pub text: Text,
    /// Whether it is confirmed.
    pub status: Word<Status>,
    /// Who is to confirm it.
    pub by: Option<Text>,
    /// What confirms it.
    pub source: Option<Text>,
}

/// What this package leaves to somebody else.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Deferral {
    /// Short name, unique in the project.
    pub id: Text,
    /// What is left out.
    pub text: Text,
    /// To which clause or person.
    pub to: Text,
    /// Ids of checks whose deferred outcome this covers.
    #[serde(default)]
    pub checks: Vec<Text>,
}

/// Digits printed.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Precision {
    /// Significant digits, 3 to 8.
    pub significant: Text,
}

/// How the structures are analysed.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Analysis {
    /// Order of the analysis.
    pub order: Option<Word<Order>>,
    /// Imperfections counted.
    pub imperfections: Option<Word<Imperfections>>,
}

/// What the package shows and on which paper.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Package {
    /// Whose effects are drawn: all, governing, or the members named.
    pub draw: Option<Draw>,
    /// Side on which moment diagrams are drawn.
    pub moments: Option<Word<MomentSide>>,
    /// Sheet of the printed package.
    pub paper: Option<Word<Paper>>,
    /// Draw the local axes of members.
    pub local_axes: Option<bool>,
}

/// Whose effects are drawn.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(rename = "$kind")]
#[schemars(rename = "Draw", untagged)]
pub enum Draw {
    /// All members or those that hold a governing value.
    Word(Word<DrawWord>),
    /// These members.
    List(Vec<Text>),
}

/// A named constant.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct NamedValue {
    /// The value with its unit.
    pub value: Text,
    /// Where it comes from.
    pub source: Option<Text>,
}

/// One layer of a build-up.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Layer {
    /// What it is.
    pub layer: Text,
    /// Force per area.
    pub load: Text,
    /// Where the value comes from.
    pub source: Option<Text>,
}

/// `system`, and one unit for each kind of value that prints otherwise.
pub type Units = Map<Text>;
