//! The audit of one project.

use std::path::PathBuf;

use serde::Serialize;

use super::lines::{Where, column, line};
use super::state::{PackageState, state};
use crate::compare::LineOf;
use crate::diagnostic::{Diagnostic, Severity};
use crate::files::{self, Found, Sources};
use crate::record::{CheckRecord, Record, printed_utilisation};

/// How a project stands, best first.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Serialize)]
pub enum Standing {
    /// The package is up to date, and every check is satisfied or deferred as disclosed.
    #[serde(rename = "up to date")]
    UpToDate,
    /// A check is not satisfied, or deferred without being named in `basis.deferred`.
    #[serde(rename = "not satisfied")]
    NotSatisfied,
    #[serde(rename = "out of date")]
    OutOfDate,
    /// The project is wrong.
    #[serde(rename = "wrong")]
    Wrong,
    /// The self-check is out of tolerance, or the disk refused.
    #[serde(rename = "could not")]
    CouldNot,
}

impl Standing {
    /// The word in reports.
    #[must_use]
    pub const fn word(self) -> &'static str {
        match self {
            Self::UpToDate => "up to date",
            Self::NotSatisfied => "not satisfied",
            Self::OutOfDate => "out of date",
            Self::Wrong => "wrong",
            Self::CouldNot => "could not",
        }
    }
}

/// A project audited.
#[derive(Clone, Debug, Serialize)]
pub struct Audited {
    /// Path from the root of the repository; see [`Found`].
    pub project: String,
    pub standing: Standing,
    /// Of the project; empty where it could not be solved.
    pub title: String,
    pub number: String,
    /// The last revision in its table.
    pub revision: String,
    /// Nothing where it was not come to.
    pub package: Option<PackageState>,
    /// Every check, and every agreement of a hand calculation.
    pub checks: Vec<CheckOutcome>,
    /// Assumptions that are to be confirmed.
    pub assumptions: Vec<Assumption>,
    pub deferrals: Vec<Deferral>,
    /// Errors and warnings, located.
    pub problems: Vec<Problem>,
    /// The same for people.
    #[serde(skip)]
    pub diagnostics: Vec<Diagnostic>,
    /// What diagnostics point into.
    #[serde(skip)]
    pub sources: Option<Sources>,
    /// Path as given.
    #[serde(skip)]
    pub folder: PathBuf,
}

/// What a check came to.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct CheckOutcome {
    pub id: String,
    /// `check` or `agreement`.
    pub kind: String,
    pub title: String,
    /// What it is made on, in words.
    pub on: String,
    /// `satisfied`, `not satisfied` or `deferred`.
    pub outcome: String,
    /// Deferred, and `basis.deferred` names it.
    pub disclosed: bool,
    pub utilisation: Option<f64>,
    pub limit: f64,
    pub reason: Option<String>,
    /// The governing combination: number, with the spans loaded where it leaves that open.
    pub combination: Option<String>,
    pub place: Option<LineOf>,
}

impl CheckOutcome {
    /// Not satisfied, or deferred without being disclosed.
    #[must_use]
    pub fn is_open(&self) -> bool {
        self.outcome == "not satisfied" || (self.outcome == "deferred" && !self.disclosed)
    }

    /// The name in reports: `bending, member B1`.
    #[must_use]
    pub fn name(&self) -> String {
        if self.on.is_empty() { self.id.clone() } else { format!("{}, {}", self.id, self.on) }
    }

    /// What was checked, with its line: `Bending (bending, member B1) (project.yaml:33)`.
    #[must_use]
    pub fn said(&self) -> String {
        format!("{}, {}{}", self.name(), self.title, at(self.place.as_ref()))
    }

    /// What came of it: `not satisfied: utilisation 1.20 in C3`.
    #[must_use]
    pub fn words(&self) -> String {
        let by = self.utilisation.map(|value| {
            let combination = self.combination.as_ref().map(|name| format!(" in {name}"));
            format!("utilisation {}{}", printed_utilisation(value), combination.unwrap_or_default())
        });
        let disclosed = match (self.outcome.as_str(), self.disclosed) {
            ("deferred", false) => ", not named in `basis.deferred`",
            ("deferred", true) => ", as disclosed",
            _ => "",
        };
        let because: Vec<String> = by.into_iter().chain(self.reason.clone()).collect();
        let because =
            if because.is_empty() { String::new() } else { format!(": {}", because.join(", ")) };
        format!("{}{disclosed}{because}", self.outcome)
    }
}

/// An assumption that is to be confirmed.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct Assumption {
    pub id: String,
    pub text: String,
    pub by: Option<String>,
    pub place: Option<LineOf>,
}

impl Assumption {
    /// In one sentence.
    #[must_use]
    pub fn words(&self) -> String {
        let by = self.by.as_ref().map(|by| format!(" (by {by})")).unwrap_or_default();
        format!("{}{by}: {}{}", self.id, ended(&self.text), at(self.place.as_ref()))
    }
}

/// What the project defers, and to whom.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct Deferral {
    pub id: String,
    pub text: String,
    pub to: String,
    /// Ids of the checks that it names.
    pub checks: Vec<String>,
    pub place: Option<LineOf>,
}

impl Deferral {
    /// In one sentence.
    #[must_use]
    pub fn words(&self) -> String {
        let checks = if self.checks.is_empty() {
            String::new()
        } else {
            format!(" [{}]", self.checks.join(", "))
        };
        format!(
            "{} to {}: {}{checks}{}",
            self.id,
            self.to,
            ended(&self.text),
            at(self.place.as_ref())
        )
    }
}

/// A problem for machines.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct Problem {
    /// `error` or `warning`.
    pub severity: &'static str,
    pub code: &'static str,
    pub message: String,
    /// What stands under the underlined text.
    pub label: Option<String>,
    pub hints: Vec<String>,
    /// Path inside the project, with line and column counted from 1.
    pub file: Option<String>,
    pub line: Option<usize>,
    pub column: Option<usize>,
}

impl Problem {
    /// In one line: `project.yaml:12:8: no member named …`.
    #[must_use]
    pub fn words(&self) -> String {
        let numbers = self.line.zip(self.column).map(|(line, column)| format!(":{line}:{column}"));
        let place =
            self.file.as_ref().map(|file| format!("{file}{}: ", numbers.unwrap_or_default()));
        format!("{}{}", place.unwrap_or_default(), self.message)
    }

    pub(super) fn new(problem: &Diagnostic, sources: Option<&Sources>) -> Self {
        let place = problem.place.as_ref();
        let text = place.and_then(|place| sources?.text(&place.file));
        let at = place.map(|place| place.range.start);
        Self {
            severity: match problem.severity {
                Severity::Error => "error",
                Severity::Warning => "warning",
            },
            code: problem.code,
            message: problem.message.clone(),
            label: problem.label.clone(),
            hints: problem.hints.clone(),
            file: place.map(|place| place.file.clone()),
            line: text.zip(at).map(|(text, at)| line(text, at)),
            column: text.zip(at).map(|(text, at)| column(text, at)),
        }
    }
}

/// Without the full stop with which a project may end its words.
fn ended(text: &str) -> &str {
    text.trim_end_matches(['.', ' ', '\n'])
}

/// Where something stands, in brackets behind it.
fn at(place: Option<&LineOf>) -> String {
    place.map(|place| format!(" ({}:{})", place.file, place.line)).unwrap_or_default()
}

/// Why an audit ended before its end.
type Failure = (Standing, Vec<Diagnostic>);

/// Audits one project.
pub(super) fn audited(found: &Found) -> Audited {
    let mut out = Audited::new(found);
    let (ended, sources) = match files::read(&found.folder) {
        Ok(sources) => (out.fill(&sources), Some(sources)),
        Err(problems) => (Err((Standing::Wrong, problems)), None),
    };
    out.standing = match ended {
        Ok(()) => out.judged(),
        Err((standing, problems)) => {
            out.diagnostics.extend(problems);
            standing
        }
    };
    out.diagnostics.sort_by_key(|problem| problem.severity);
    let problem = |problem: &Diagnostic| Problem::new(problem, sources.as_ref());
    out.problems = out.diagnostics.iter().map(problem).collect();
    out.sources = sources.filter(|_| !out.diagnostics.is_empty());
    out
}

impl Audited {
    fn new(found: &Found) -> Self {
        Self {
            project: found.name.clone(),
            standing: Standing::Wrong,
            title: String::new(),
            number: String::new(),
            revision: String::new(),
            package: None,
            checks: Vec::new(),
            assumptions: Vec::new(),
            deferrals: Vec::new(),
            problems: Vec::new(),
            diagnostics: Vec::new(),
            sources: None,
            folder: found.folder.clone(),
        }
    }

    /// Goes as far as the project lets it.
    fn fill(&mut self, sources: &Sources) -> Result<(), Failure> {
        let wrong = |problems| (Standing::Wrong, problems);
        let solved = crate::solve(sources).map_err(wrong)?;
        self.diagnostics = solved.warnings;
        self.describe(&solved.record, sources);
        if !solved.record.self_check.satisfied {
            let message = "the self-check is out of tolerance: do not use these values";
            return Err((Standing::CouldNot, vec![Diagnostic::error("self-check", message)]));
        }
        let committed = files::committed(&self.folder).map_err(|problem| {
            let foreign = problem.code == "foreign-package";
            (if foreign { Standing::Wrong } else { Standing::CouldNot }, vec![problem])
        })?;
        self.package = Some(state(&solved.record, sources, committed).map_err(wrong)?);
        Ok(())
    }

    fn describe(&mut self, record: &Record, sources: &Sources) {
        let places = Where::new(record, sources);
        self.title.clone_from(&record.project.title);
        self.number.clone_from(&record.project.number);
        let last = record.project.revisions.last();
        self.revision = last.map(|last| last.mark.clone()).unwrap_or_default();
        self.checks = record.checks.iter().map(|check| outcome(record, check, &places)).collect();
        self.assumptions = record
            .open_assumptions()
            .map(|assumption| Assumption {
                id: assumption.id.clone(),
                text: assumption.text.clone(),
                by: assumption.by.clone(),
                place: places.assumption(&assumption.id),
            })
            .collect();
        self.deferrals = record
            .basis
            .deferred
            .iter()
            .map(|deferral| Deferral {
                id: deferral.id.clone(),
                text: deferral.text.clone(),
                to: deferral.to.clone(),
                checks: deferral.checks.clone(),
                place: places.deferral(&deferral.id),
            })
            .collect();
    }

    /// How a project stands that could be audited to the end.
    fn judged(&self) -> Standing {
        if self.package.as_ref().is_none_or(|package| !package.up_to_date) {
            Standing::OutOfDate
        } else if self.open_checks().next().is_some() {
            Standing::NotSatisfied
        } else {
            Standing::UpToDate
        }
    }

    /// Checks that are not satisfied, or deferred without being disclosed.
    pub fn open_checks(&self) -> impl Iterator<Item = &CheckOutcome> {
        self.checks.iter().filter(|check| check.is_open())
    }

    /// A path inside the project, from where its own name counts.
    #[must_use]
    pub fn path_of(&self, file: &str) -> String {
        if self.project == "." { file.to_owned() } else { format!("{}/{file}", self.project) }
    }
}

fn outcome(record: &Record, check: &CheckRecord, places: &Where<'_>) -> CheckOutcome {
    let combination = |state: &String| record.in_short(state, &check.loaded);
    CheckOutcome {
        id: check.id.clone(),
        kind: check.kind.clone(),
        title: check.title.clone(),
        on: check.on_words(),
        outcome: check.outcome.clone(),
        disclosed: check.outcome == "deferred" && record.is_covered(check),
        utilisation: check.utilisation,
        limit: check.limit,
        reason: check.reason.clone(),
        combination: check.state.as_ref().map(combination),
        place: places.check(&check.id),
    }
}
