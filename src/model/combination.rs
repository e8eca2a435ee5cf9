//! Combinations of load cases.

use super::{CaseId, Duration, Origin};

/// What a combination is for.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Purpose {
    Strength,
    Equilibrium,
    Ground,
    Accidental,
    Seismic,
    Fire,
    Allowable,
    Characteristic,
    Frequent,
    QuasiPermanent,
}

impl Purpose {
    /// All, in printing order.
    pub const ALL: [Self; 10] = [
        Self::Strength,
        Self::Equilibrium,
        Self::Ground,
        Self::Accidental,
        Self::Seismic,
        Self::Fire,
        Self::Allowable,
        Self::Characteristic,
        Self::Frequent,
        Self::QuasiPermanent,
    ];

    /// The word of the project file, the record and the package.
    #[must_use]
    pub const fn name(self) -> &'static str {
        match self {
            Self::Strength => "strength",
            Self::Equilibrium => "equilibrium",
            Self::Ground => "ground",
            Self::Accidental => "accidental",
            Self::Seismic => "seismic",
            Self::Fire => "fire",
            Self::Allowable => "allowable",
            Self::Characteristic => "characteristic",
            Self::Frequent => "frequent",
            Self::QuasiPermanent => "quasi-permanent",
        }
    }

    /// The purpose of a word.
    #[must_use]
    pub fn from_name(name: &str) -> Option<Self> {
        Self::ALL.into_iter().find(|purpose| purpose.name() == name)
    }

    /// Serviceability purposes, together called `service`.
    #[must_use]
    pub const fn is_service(self) -> bool {
        matches!(self, Self::Characteristic | Self::Frequent | Self::QuasiPermanent)
    }
}

/// Factors on load cases.
#[derive(Clone, Debug, PartialEq)]
pub struct Combination {
    /// Made from its content: `strength Removal of store | 1 G + 1.5 S`; unique with case names.
    pub name: String,
    /// Short number for tables, `C1`, `C2`, … in order.
    pub number: String,
    pub title: String,
    pub purpose: Purpose,
    /// In the order of the model's cases; no zero factors.
    pub factors: Vec<(CaseId, f64)>,
    /// The rule that made it; `None` where written.
    pub rule: Option<String>,
    pub clause: Option<String>,
    pub leading: Option<CaseId>,
    /// The source stated, or why this row exists.
    pub reason: Option<String>,
    /// Shortest duration among its cases.
    pub duration: Option<Duration>,
    pub origin: Origin,
}

/// A rule in use, with what it made.
#[derive(Clone, Debug, PartialEq)]
pub struct RuleUse {
    pub rule: String,
    /// Code, edition and clause; the source stated of a rule of the project.
    pub reference: String,
    pub annex: Option<String>,
    pub purpose: Purpose,
    /// `all subsets`, `maximal` or `as written`.
    pub expansion: String,
    /// Named factors as used.
    pub values: Vec<(String, f64)>,
    pub expressions: Vec<String>,
    /// Combinations made and kept.
    pub kept: usize,
    /// Left out because another rule or row of the purpose made the same.
    pub same: usize,
    /// Those that can never govern, because others have the same or worse factors for every sign; `None`
    /// where there are too many to tell.
    pub dominated: Option<usize>,
    /// The dominated ones were left out.
    pub dropped: bool,
    pub notes: Option<String>,
}
