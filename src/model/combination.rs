//! Combinations of load cases.

use super::{CaseId, Duration, Model, Origin};

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
    /// ψ0, ψ1, ψ2 of each variable action as used, with where they come from; empty where the rule has none.
    pub psi: Vec<(CaseId, [f64; 3], String)>,
}

impl Model {
    /// Combinations that a text can mean: by name, by title, or by content (`1.35 G + 1.5 S`). Of those
    /// with the same factors only the first, as their results are the same.
    #[must_use]
    pub fn combinations_meant(&self, text: &str) -> Vec<usize> {
        let all = self.combinations.iter().enumerate();
        if let Some((index, _)) = all.clone().find(|(_, combination)| combination.name == text) {
            return vec![index];
        }
        let mut found: Vec<usize> = Vec::new();
        let content = self.content(text);
        for (index, combination) in all {
            let meant = combination.title == text
                || content.as_ref().is_some_and(|factors| alike(factors, &combination.factors));
            let again =
                |other: &usize| alike(&self.combinations[*other].factors, &combination.factors);
            if meant && !found.iter().any(again) {
                found.push(index);
            }
        }
        found
    }

    /// `1.35 G + 1.5 S - W` as factors, in the order of the cases; `None` where it is something else.
    fn content(&self, text: &str) -> Option<Vec<(CaseId, f64)>> {
        let case = |name: &str| self.cases.iter().position(|case| case.name == name).map(CaseId);
        let text = text.replace('\u{2212}', "-").replace(" - ", " + -");
        let term = |term: &str| {
            let (sign, term) = match term.trim().strip_prefix('-') {
                Some(rest) => (-1.0, rest.trim()),
                None => (1.0, term.trim()),
            };
            if let Some(case) = case(term) {
                return Some((case, sign));
            }
            let (factor, name) = term.split_once(' ')?;
            Some((case(name.trim())?, sign * factor.parse::<f64>().ok()?))
        };
        let mut factors: Vec<(CaseId, f64)> = text.split(" + ").map(term).collect::<Option<_>>()?;
        factors.sort_by_key(|(case, _)| *case);
        Some(factors)
    }
}

/// The same factors on the same cases.
#[must_use]
pub fn alike(a: &[(CaseId, f64)], b: &[(CaseId, f64)]) -> bool {
    a.len() == b.len() && a.iter().zip(b).all(|(a, b)| a.0 == b.0 && (a.1 - b.1).abs() <= 1e-9)
}
