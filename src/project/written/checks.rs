//! Checks, groups and narrative as written.

use schemars::JsonSchema;
use serde::Deserialize;

use super::words::{AllWord, Only};
use crate::model::{DeflectionFrom, Shows};
use crate::project::text::{Located, Map, Text, Word};

/// A check: from a sheet, or with demand and capacity of its own; on members, groups, spans, nodes or a
/// structure.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Check {
    /// Short name, unique in the project.
    pub id: Text,
    /// What combinations it is made for: a purpose, or `service`.
    pub purpose: Word<super::words::CheckPurpose>,
    /// Id of a check sheet of the catalogue or of the project's `checks` folder.
    pub sheet: Option<Text>,
    /// Values for the sheet's inputs: quantities or formulas.
    #[serde(default)]
    #[serde(rename = "with")]
    pub inputs: Map<Text>,
    /// Title in the package.
    pub title: Option<Text>,
    /// Clause or source.
    pub reference: Option<Text>,
    /// Members by name, or all.
    pub members: Option<Members>,
    /// Groups of members.
    pub groups: Option<Vec<Text>>,
    /// Spans by number, or all, each by itself.
    pub spans: Option<Members>,
    /// One node.
    pub node: Option<Text>,
    /// Several nodes, each by itself.
    pub nodes: Option<Vec<Text>>,
    /// Node whose displacements are taken off, and above which heights count.
    pub relative_to: Option<Text>,
    /// A structure as a whole.
    pub structure: Option<Text>,
    /// Node through which the line of overturning runs, along Y.
    pub about: Option<Text>,
    /// The part of each combination that counts.
    pub only: Option<Word<Only>>,
    /// What deflections are measured from.
    pub from: Option<Word<DeflectionFrom>>,
    /// Values computed on the way, in order: formulas, which may end with the unit in which they print.
    #[serde(default)]
    #[serde(rename = "let")]
    pub steps: Map<Text>,
    /// Conditions without which the check says nothing.
    #[serde(default)]
    pub valid_if: Vec<Located<Condition>>,
    /// What is held against the capacity.
    pub demand: Option<Text>,
    /// What it may be at most.
    pub capacity: Option<Text>,
    /// Greatest utilisation that satisfies; 1 unless given.
    pub limit: Option<Text>,
    /// A demand below zero is meant, and satisfied.
    pub one_sided: Option<bool>,
    /// Ids of assumptions it stands on.
    #[serde(default)]
    pub relies_on: Vec<Text>,
    /// What it shows of the member.
    pub shows: Option<Word<Shows>>,
}

/// Names or numbers, or all.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(rename = "$kind")]
#[schemars(rename = "Members", untagged)]
pub enum Members {
    /// Every one.
    Word(Word<AllWord>),
    /// These.
    List(Vec<Text>),
}

/// A condition with the reason why the check says nothing without it.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Condition {
    /// The condition.
    pub condition: Text,
    /// What it means when it does not hold.
    pub reason: Text,
}

/// A narrative file, or a file with its place.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(rename = "$kind")]
#[schemars(rename = "Narrative", untagged)]
pub enum Narrative {
    /// Path of the file; it follows the summary.
    Word(Text),
    /// With the chapter that it follows.
    Map(Placed),
}

/// A narrative file with the chapter that it follows.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Placed {
    /// Path of the file.
    pub file: Text,
    /// The chapter of the package that it follows.
    pub after: Word<super::words::Chapter>,
}

/// What is open and for whom.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct OpenPoint {
    /// What is open.
    pub text: Text,
    /// Who is to settle it.
    pub by: Option<Text>,
}
