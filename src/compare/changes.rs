//! What a comparison found, as values.

use serde::{Deserialize, Deserializer, Serialize, de};

use super::{FORMAT, ItemKind, Side, Thresholds};
use crate::model::Purpose;
use crate::quantity::Kind;
use crate::record::OnRecord;

/// What differs between two revisions. All values SI.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Changes {
    pub format: u32,
    pub old: SideRecord,
    pub new: SideRecord,
    pub thresholds: Thresholds,
    /// Sentences a reader must know besides.
    pub notes: Vec<String>,
    pub renamed: Vec<Renamed>,
    /// In the order of the package's chapters.
    pub input: Vec<ItemChange>,
    pub texts: Vec<TextChange>,
    /// Those whose outcome moved, worst first, then those whose utilisation moved, worst first.
    pub checks: Vec<CheckChange>,
    /// Governing values of members, or of spans where a member has several; in order of the new side.
    pub values: Vec<ValueChange>,
    pub reactions: Vec<ValueChange>,
    /// Open items that the new side has and the old one has not.
    pub opened: Vec<String>,
    pub closed: Vec<String>,
    pub counts: Counts,
}

impl Changes {
    /// Nothing differs at all, changes below the thresholds included.
    #[must_use]
    pub fn is_empty(&self) -> bool {
        let counts = &self.counts;
        self.renamed.is_empty()
            && self.opened.is_empty()
            && self.closed.is_empty()
            && [&counts.items, &counts.texts, &counts.checks, &counts.values, &counts.reactions]
                .iter()
                .all(|count| count.listed == 0 && count.below == 0)
    }

    /// Something differs, and all of it by less than the thresholds.
    #[must_use]
    pub fn is_below(&self) -> bool {
        let counts = &self.counts;
        let listed = [counts.items, counts.texts, counts.checks, counts.values, counts.reactions]
            .iter()
            .any(|count| count.listed > 0);
        let named = [self.renamed.len(), self.opened.len(), self.closed.len()];
        !self.is_empty() && !listed && named == [0; 3]
    }

    /// The outcome of some check is worse than it was, or a new check is not satisfied.
    #[must_use]
    pub fn is_worse(&self) -> bool {
        self.checks.iter().any(|change| change.worse)
    }

    /// The comparison as JSON.
    ///
    /// # Panics
    /// Never: a comparison holds nothing that JSON cannot.
    #[must_use]
    pub fn to_json(&self) -> String {
        let mut out =
            serde_json::to_string_pretty(self).expect("names are text and numbers are finite");
        out.push('\n');
        out
    }

    /// Reads a comparison.
    ///
    /// # Errors
    /// When the text is not a comparison, or its format is newer than this program.
    pub fn from_json(text: &str) -> Result<Self, String> {
        let changes: Self =
            serde_json::from_str(text).map_err(|error| format!("not a comparison: {error}"))?;
        if changes.format > FORMAT {
            return Err(format!(
                "the comparison has format {}, this program reads {FORMAT}: use a newer version",
                changes.format
            ));
        }
        Ok(changes)
    }
}

/// One side by what it is.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct SideRecord {
    pub label: String,
    pub title: String,
    pub number: String,
    /// The last revision in its table.
    pub revision: String,
    pub date: String,
    pub version: String,
    pub fingerprint: String,
}

impl SideRecord {
    pub(super) fn new(side: &Side<'_>) -> Self {
        let project = &side.record.project;
        let last = project.revisions.last();
        Self {
            label: side.label.to_owned(),
            title: project.title.clone(),
            number: project.number.clone(),
            revision: last.map(|last| last.mark.clone()).unwrap_or_default(),
            date: last.map(|last| last.date.clone()).unwrap_or_default(),
            version: side.record.program.version.clone(),
            fingerprint: side.record.fingerprint.clone(),
        }
    }
}

/// Something that has another name and is otherwise recognised.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct Renamed {
    pub kind: ItemKind,
    pub old: String,
    pub new: String,
    /// What it was recognised by.
    pub by: String,
}

/// What happened to a thing.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum What {
    New,
    Changed,
    Vanished,
}

/// A change of something in the project file.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct ItemChange {
    pub kind: ItemKind,
    /// Its name on the new side; on the old one where it vanished.
    pub name: String,
    pub what: What,
    pub facts: Vec<FactChange>,
    /// Where it stands in the project file of either side.
    pub old_line: Option<LineOf>,
    pub new_line: Option<LineOf>,
}

/// A line of a file, counted from 1.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct LineOf {
    pub file: String,
    pub line: usize,
}

/// One fact of a thing, in words; empty where it is not stated.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct FactChange {
    pub fact: String,
    pub old: String,
    pub new: String,
}

/// A text file of the project: narrative, template, style, check sheet.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct TextChange {
    pub file: String,
    pub what: What,
    /// Lines that came and went.
    pub added: usize,
    pub removed: usize,
    /// The first line that differs, on the new side.
    pub first: usize,
}

/// A check, or an agreement of a hand calculation, that came out otherwise.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct CheckChange {
    pub id: String,
    pub kind: String,
    pub on: OnRecord,
    /// What it is made on, in words.
    pub on_words: String,
    pub title: String,
    pub what: What,
    /// The outcome is another one.
    pub flipped: bool,
    /// The outcome is worse, or the check is new and not satisfied.
    pub worse: bool,
    pub old: Option<OutcomeEnd>,
    pub new: Option<OutcomeEnd>,
}

/// One side of a check.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct OutcomeEnd {
    pub outcome: String,
    /// Deferred, with a deferral of the project that names it.
    pub covered: bool,
    pub reason: Option<String>,
    pub utilisation: Option<f64>,
    pub limit: f64,
    /// Name and number of the governing combination.
    pub state: Option<String>,
    pub number: Option<String>,
    pub x: Option<f64>,
}

/// One of the words that the program knows.
type Known = &'static str;

/// A governing value that changed.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct ValueChange {
    /// Member or node.
    pub on: String,
    /// Counted from 1, of a member with several spans.
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub span: Option<usize>,
    pub purpose: String,
    /// Effect of a member or component of a reaction.
    pub effect: String,
    /// `max` or `min`.
    #[serde(deserialize_with = "which")]
    pub which: Known,
    /// Name of the kind of quantity.
    #[serde(deserialize_with = "kind")]
    pub kind: Known,
    pub what: What,
    pub old: Option<End>,
    pub new: Option<End>,
    /// Change of size, (|new| − |old|) / |old|; nothing where the old value is zero, there is none, or the
    /// sign is another one.
    pub relative: Option<f64>,
    /// Another combination, or other loaded spans, govern.
    pub other_combination: bool,
    /// It governs at another position.
    pub moved: bool,
}

impl ValueChange {
    /// What a reader looks for first: forces, and displacements where serviceability asks for them.
    /// The others follow from the same causes.
    #[must_use]
    pub fn is_primary(&self) -> bool {
        let service = Purpose::from_name(&self.purpose).is_some_and(Purpose::is_service);
        match Kind::from_name(self.kind) {
            Some(Kind::Deflection) => service,
            Some(Kind::Rotation) => false,
            _ => true,
        }
    }
}

fn which<'de, D: Deserializer<'de>>(deserializer: D) -> Result<Known, D::Error> {
    match String::deserialize(deserializer)?.as_str() {
        "max" => Ok("max"),
        "min" => Ok("min"),
        other => Err(de::Error::custom(format!("`{other}` is neither `max` nor `min`"))),
    }
}

fn kind<'de, D: Deserializer<'de>>(deserializer: D) -> Result<Known, D::Error> {
    let name = String::deserialize(deserializer)?;
    let kind = Kind::from_name(&name);
    kind.map(Kind::name).ok_or_else(|| de::Error::custom(format!("no kind named `{name}`")))
}

/// One side of a governing value.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct End {
    pub value: f64,
    pub x: Option<f64>,
    /// Name of the combination.
    pub state: String,
    /// Its number, with the spans loaded where it leaves that open.
    pub number: String,
}

/// How many things of a sort there are on both sides together.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct Count {
    pub same: usize,
    /// Changed by less than the thresholds; not listed.
    pub below: usize,
    /// Changed, new or vanished.
    pub listed: usize,
}

impl Count {
    /// All that were compared.
    #[must_use]
    pub const fn all(&self) -> usize {
        self.same + self.below + self.listed
    }
}

/// Counts by sort.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct Counts {
    pub items: Count,
    pub texts: Count,
    pub checks: Count,
    pub values: Count,
    pub reactions: Count,
}
