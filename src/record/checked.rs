//! The shapes of checks, hand calculations and narrative in a Record.

use serde::{Deserialize, Serialize};

use super::{AssumptionRecord, Map, Record};
use crate::model::Side;

/// A check on one of its targets, or an agreement of a hand calculation.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct CheckRecord {
    pub id: String,
    /// `check` or `agreement`.
    pub kind: String,
    pub on: OnRecord,
    pub title: String,
    pub reference: String,
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub sheet: Option<String>,
    /// `strength`, `stability`, `deflection`, `equilibrium`, `bearing`, `other`; of agreements `analysis`.
    pub shows: String,
    /// A purpose, `service`, or empty for agreements.
    pub purpose: String,
    /// Only the variable part of each combination counts.
    #[serde(skip_serializing_if = "std::ops::Not::not", default)]
    pub variable_only: bool,
    /// `chord`, `undeformed` or `support tangent`.
    pub deflection: String,
    /// Name of the governing combination.
    pub state: Option<String>,
    /// Parts that act, of cases that act by span.
    #[serde(skip_serializing_if = "Vec::is_empty", default)]
    pub loaded: Vec<String>,
    /// Position along the member, m.
    pub x: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub side: Option<Side>,
    pub demand: Option<StepRecord>,
    pub capacity: Option<StepRecord>,
    pub utilisation: Option<f64>,
    /// Greatest utilisation that satisfies; of agreements 1, their utilisation being difference over
    /// tolerance.
    pub limit: f64,
    /// `satisfied`, `not satisfied` or `deferred`.
    pub outcome: String,
    pub reason: Option<String>,
    /// Ids of assumptions.
    pub relies_on: Vec<String>,
    pub steps: Vec<StepRecord>,
    /// Conditions with what was found.
    pub validity: Vec<StepRecord>,
    /// The combinations that come next, worst first.
    pub next: Vec<NextRecord>,
    /// How many more combinations were evaluated.
    pub further: usize,
    pub cautions: Vec<String>,
}

/// What a check is made on; one of these.
#[derive(Clone, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct OnRecord {
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub member: Option<String>,
    /// Counted from 1.
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub span: Option<usize>,
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub node: Option<String>,
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub relative_to: Option<String>,
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub structure: Option<String>,
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub about: Option<String>,
    /// The narrative file of an agreement.
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub file: Option<String>,
}

/// A formula with what it read and gave.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct StepRecord {
    /// Empty for demands, capacities and conditions.
    pub symbol: String,
    /// As written.
    pub formula: String,
    /// In the order of the formula's readings: text of the reading, value.
    pub values: Vec<(String, StepValueRecord)>,
    /// Branches taken, in order of evaluation.
    #[serde(skip_serializing_if = "Vec::is_empty", default)]
    pub taken: Vec<usize>,
    pub value: StepValueRecord,
    /// What it is, or why a condition matters.
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub meaning: Option<String>,
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub clause: Option<String>,
}

/// A value in a step.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(untagged)]
pub enum StepValueRecord {
    Truth(bool),
    Word(String),
    /// SI, with the unit in which it prints.
    Number(f64, String),
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct NextRecord {
    /// Name of the combination.
    pub state: String,
    pub utilisation: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub x: Option<f64>,
}

/// A working block.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct WorkingRecord {
    pub file: String,
    pub lines: Vec<WorkingLineRecord>,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum WorkingLineRecord {
    Remark(String),
    Step(StepRecord),
    /// Id of the agreement among the checks.
    Agreement(String),
}

/// A narrative file with its place in the package.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct NarrativeRecord {
    pub file: String,
    /// The chapter that it follows.
    pub after: String,
    pub blocks: Vec<NarrativeBlockRecord>,
}

#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum NarrativeBlockRecord {
    /// Index into the workings.
    Working(usize),
    Assumption(String),
    Deferral(String),
    Reference(String),
    Open(String),
}

impl CheckRecord {
    /// What it is made on, in words.
    #[must_use]
    pub fn on_words(&self) -> String {
        let on = &self.on;
        match (&on.member, on.span, &on.node, &on.structure) {
            (Some(member), None, ..) => format!("member {member}"),
            (Some(member), Some(span), ..) => format!("member {member}, span {span}"),
            (_, _, Some(node), _) => match &on.relative_to {
                Some(other) => format!("node {node} against {other}"),
                None => format!("node {node}"),
            },
            (.., Some(structure)) => match &on.about {
                Some(edge) => format!("structure {structure} about {edge}"),
                None => format!("structure {structure}"),
            },
            _ => on.file.clone().unwrap_or_default(),
        }
    }
}

impl Record {
    /// A deferral of the project names this check.
    #[must_use]
    pub fn is_covered(&self, check: &CheckRecord) -> bool {
        self.basis.deferred.iter().any(|deferral| deferral.checks.contains(&check.id))
    }

    /// Assumptions that nobody has confirmed.
    pub fn open_assumptions(&self) -> impl Iterator<Item = &AssumptionRecord> {
        self.basis.assumptions.iter().filter(|assumption| assumption.status != "confirmed")
    }

    /// Every check is satisfied, or deferred with a deferral of the project that names it.
    #[must_use]
    pub fn is_settled(&self) -> bool {
        self.checks.iter().all(|check| match check.outcome.as_str() {
            "satisfied" => true,
            "deferred" => self.is_covered(check),
            _ => false,
        })
    }
}

/// Checks by id in order of first appearance, each with all it is made on.
#[must_use]
pub fn by_id(checks: &[CheckRecord]) -> Map<Vec<&CheckRecord>> {
    let mut out: Map<Vec<&CheckRecord>> = Map::new();
    for check in checks {
        out.entry(check.id.clone()).or_default().push(check);
    }
    out
}
