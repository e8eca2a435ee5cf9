//! Combination rules in use, as the Record holds them.

use serde::{Deserialize, Serialize};

/// A rule with what it made.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct RuleUseRecord {
    pub rule: String,
    /// Code, edition and clause; the source stated of a rule of the project.
    pub reference: String,
    pub annex: Option<String>,
    pub purpose: String,
    /// `all subsets`, `maximal` or `as written`.
    pub expansion: String,
    /// Named factors as used.
    pub values: Vec<(String, f64)>,
    pub expressions: Vec<String>,
    /// Combinations made and kept.
    pub kept: usize,
    /// Left out because another rule or row of the purpose made the same.
    pub same: usize,
    /// Those that can never govern; `None` where there are too many to tell.
    pub dominated: Option<usize>,
    /// The dominated ones were left out.
    pub dropped: bool,
    pub notes: Option<String>,
    /// Of each variable action; empty where the expressions name no ψ.
    #[serde(skip_serializing_if = "Vec::is_empty", default)]
    pub psi: Vec<PsiRecord>,
}

/// ψ factors of a case as a rule uses them.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct PsiRecord {
    pub case: String,
    /// ψ0, ψ1, ψ2.
    pub psi: [f64; 3],
    /// Where they come from, e.g. `category E`.
    pub origin: String,
}

/// How a case acts with others; only what is stated.
#[derive(Clone, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct RelationsRecord {
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub one_of: Option<String>,
    #[serde(skip_serializing_if = "Vec::is_empty", default)]
    pub together_with: Vec<String>,
    #[serde(skip_serializing_if = "std::ops::Not::not", default)]
    pub reverses: bool,
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub source_group: Option<String>,
}

impl RelationsRecord {
    /// Nothing is stated.
    #[must_use]
    pub fn is_empty(&self) -> bool {
        *self == Self::default()
    }
}
