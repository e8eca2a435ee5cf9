//! Combination rules: kept as data, their expressions read.

use std::sync::LazyLock;

use indexmap::IndexMap;
use serde::Deserialize;

/// The rules of one code with its ψ factors.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct RuleSet {
    pub code: String,
    pub edition: String,
    pub source: String,
    /// How it was verified.
    pub verified: String,
    /// Sets of values; the first is the usual one.
    pub annexes: Vec<String>,
    /// By annex: ψ0, ψ1, ψ2 by category or nature.
    pub psi: IndexMap<String, IndexMap<String, [f64; 3]>>,
    pub rules: Vec<Rule>,
}

impl RuleSet {
    /// Code, edition and clause of one of its rules in one line.
    #[must_use]
    pub fn reference(&self, rule: &Rule) -> String {
        format!("{} ({}), {}", self.code, self.edition, rule.clause)
    }
}

/// One rule.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Rule {
    /// What a project calls it by.
    pub id: String,
    /// Short title in tables.
    pub title: String,
    pub clause: String,
    /// Usual purpose of its combinations.
    pub purpose: String,
    /// Usual expansion: `all subsets`, `maximal` or `as written`.
    pub expansion: String,
    /// Named factors, which a project can state otherwise.
    #[serde(default)]
    pub values: IndexMap<String, f64>,
    /// By annex: values that differ.
    #[serde(default)]
    pub annex_values: IndexMap<String, IndexMap<String, f64>>,
    /// What an engineer must know to use it.
    pub notes: Option<String>,
    pub rows: Vec<RuleRow>,
}

/// One expression of a rule.
#[derive(Clone, Debug, PartialEq, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct RuleRow {
    /// Number of the combination in the code.
    pub id: Option<String>,
    pub expression: String,
    /// The row stands only where one of these kinds of action exists.
    #[serde(default)]
    pub needs: Vec<String>,
}

const TEXTS: [&str; 3] = [
    include_str!("../../catalogue/combinations/en-1990.yaml"),
    include_str!("../../catalogue/combinations/asce-7-22.yaml"),
    include_str!("../../catalogue/combinations/asce-7-16.yaml"),
];

static SETS: LazyLock<Vec<RuleSet>> = LazyLock::new(|| {
    let read = |text: &&str| {
        serde_yaml::from_str(text).expect("the rules of the catalogue are read in tests")
    };
    TEXTS.iter().map(read).collect()
});

/// The rules of every code.
#[must_use]
pub fn rule_sets() -> &'static [RuleSet] {
    &SETS
}

/// The rule of an id with the code it stands in.
#[must_use]
pub fn rule(id: &str) -> Option<(&'static RuleSet, &'static Rule)> {
    SETS.iter().find_map(|set| {
        let found = set.rules.iter().find(|rule| rule.id == id)?;
        Some((set, found))
    })
}
