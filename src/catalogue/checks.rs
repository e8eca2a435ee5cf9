//! Check sheets: checks kept as data.

use std::sync::LazyLock;

use indexmap::IndexMap;
use schemars::JsonSchema;
use serde::Deserialize;

/// A check kept as data, as in `catalogue/checks/` and in a project's own `checks/` folder.
#[derive(Clone, Debug, PartialEq, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Sheet {
    /// What a project calls it by.
    pub id: String,
    /// Title in the package.
    pub title: String,
    /// Code or book.
    pub code: String,
    /// Edition of the code.
    pub edition: Option<String>,
    /// Clause, section or formula number.
    pub clause: Option<String>,
    /// How it was verified, and against what.
    pub verified: Option<String>,
    /// What it is made on.
    pub on: SheetTarget,
    /// What it shows: strength, stability, deflection, equilibrium, bearing or other.
    pub shows: SheetShows,
    /// Families of materials it applies to; left out: all.
    #[serde(default)]
    pub materials: Vec<String>,
    /// Shapes of sections it applies to; left out: all.
    #[serde(default)]
    pub shapes: Vec<String>,
    /// What a project can or must give with `with`.
    #[serde(default)]
    pub inputs: IndexMap<String, SheetInput>,
    /// Without these the check says nothing and is deferred.
    #[serde(default)]
    pub valid_if: Vec<SheetCondition>,
    /// Values computed on the way, in order.
    #[serde(default)]
    pub steps: IndexMap<String, SheetStep>,
    /// What is held against the capacity.
    pub demand: String,
    /// What it may be at most.
    pub capacity: String,
    /// A demand below zero is meant, and satisfied.
    #[serde(default)]
    pub one_sided: bool,
    /// Deflections from the chord, the undeformed line or the support's tangent.
    pub from: Option<String>,
    /// What it takes for granted; each becomes an assumption of the project, to be confirmed.
    #[serde(default)]
    pub assumes: Vec<String>,
    /// What a reader must know before relying on it.
    #[serde(default)]
    pub cautions: Vec<String>,
}

/// What a sheet is made on.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Deserialize, JsonSchema)]
#[serde(rename_all = "lowercase")]
pub enum SheetTarget {
    Member,
    Node,
    Structure,
}

/// What a sheet shows.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Deserialize, JsonSchema)]
#[serde(rename_all = "lowercase")]
pub enum SheetShows {
    Strength,
    Stability,
    Deflection,
    Equilibrium,
    Bearing,
    Other,
}

/// A value that a project hands over.
#[derive(Clone, Debug, PartialEq, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct SheetInput {
    /// What it is.
    pub meaning: String,
    /// Formula taken where the project gives none; left out: the project must give it.
    pub default: Option<String>,
    /// Where the default comes from.
    pub clause: Option<String>,
}

/// A condition with the reason why the check says nothing without it.
#[derive(Clone, Debug, PartialEq, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct SheetCondition {
    /// The condition.
    pub condition: String,
    /// What it means when it does not hold.
    pub reason: String,
}

/// A value computed on the way.
#[derive(Clone, Debug, PartialEq, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct SheetStep {
    /// How it is computed; may end with the unit in which it prints: `… [MPa]`.
    pub formula: String,
    /// What it is.
    pub meaning: Option<String>,
    /// Clause or formula number of this step.
    pub clause: Option<String>,
}

impl Sheet {
    /// Code, edition and clause in one line.
    #[must_use]
    pub fn reference(&self) -> String {
        let edition =
            self.edition.as_ref().map(|edition| format!(":{edition}")).unwrap_or_default();
        let clause = self.clause.as_ref().map(|clause| format!(", {clause}")).unwrap_or_default();
        format!("{}{edition}{clause}", self.code)
    }
}

macro_rules! sheets {
    ($($file:literal),* $(,)?) => {
        [$(include_str!(concat!("../../catalogue/checks/", $file))),*]
    };
}

/// In the order in which they are listed.
const TEXTS: [&str; 12] = sheets![
    "axial-stress.yaml",
    "bending-stress.yaml",
    "shear-stress.yaml",
    "combined-stress.yaml",
    "euler-load.yaml",
    "span-deflection.yaml",
    "cantilever-deflection.yaml",
    "sway.yaml",
    "bearing-pressure.yaml",
    "uplift.yaml",
    "overturning.yaml",
    "sliding.yaml",
];

static SHEETS: LazyLock<Vec<Sheet>> = LazyLock::new(|| {
    let read = |text: &&str| {
        serde_yaml::from_str(text).expect("the sheets of the catalogue are read in tests")
    };
    TEXTS.iter().map(read).collect()
});

/// Every sheet of the catalogue.
#[must_use]
pub fn sheets() -> &'static [Sheet] {
    &SHEETS
}

/// The text of every sheet, as it stands in the catalogue.
#[must_use]
pub fn sheet_texts() -> &'static [&'static str] {
    &TEXTS
}
