//! The audit of several projects.

use serde::Serialize;

use super::{Audited, Part, Problem, Standing};
use crate::diagnostic::Diagnostic;

/// The form of the machine-readable report written by this program.
const FORMAT: u32 = 1;

/// Several projects audited.
#[derive(Clone, Debug, Serialize)]
pub struct Report {
    format: u32,
    /// The part of the projects that this is, as `3/8`.
    pub part: Option<String>,
    /// Projects that belong to other parts.
    pub elsewhere: usize,
    pub standing: Standing,
    pub counts: Counts,
    pub projects: Vec<Audited>,
    /// What was wrong in finding projects.
    pub problems: Vec<Problem>,
}

/// How many there are of each.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Serialize)]
pub struct Counts {
    pub up_to_date: usize,
    pub not_satisfied: usize,
    pub out_of_date: usize,
    pub wrong: usize,
    pub could_not: usize,
    pub checks_satisfied: usize,
    pub checks_not_satisfied: usize,
    pub checks_deferred: usize,
    /// Deferred without being named in `basis.deferred`.
    pub checks_not_disclosed: usize,
    pub assumptions: usize,
    pub deferrals: usize,
}

impl Report {
    /// Puts audits together; `elsewhere` projects belong to other parts.
    #[must_use]
    pub fn new(
        part: Option<Part>,
        elsewhere: usize,
        projects: Vec<Audited>,
        search: &[Diagnostic],
    ) -> Self {
        let of_search = search.iter().map(|problem| match problem.code {
            "cannot-read" => Standing::CouldNot,
            _ => Standing::Wrong,
        });
        let of_projects = projects.iter().map(|project| project.standing);
        Self {
            format: FORMAT,
            part: part.map(|part| part.to_string()),
            elsewhere,
            standing: of_search.chain(of_projects).max().unwrap_or(Standing::UpToDate),
            counts: Counts::of(&projects),
            projects,
            problems: search.iter().map(|problem| Problem::new(problem, None)).collect(),
        }
    }

    /// The report as JSON.
    ///
    /// # Panics
    /// Never: a report holds nothing that JSON cannot.
    #[must_use]
    pub fn to_json(&self) -> String {
        let mut out =
            serde_json::to_string_pretty(self).expect("names are text and numbers are finite");
        out.push('\n');
        out
    }

    /// Which projects were looked at: `3 projects`, `part 1/3: 1 project, 2 in other parts`.
    #[must_use]
    pub fn scope(&self) -> String {
        let projects = number(self.projects.len(), "project", "projects");
        match &self.part {
            None => projects,
            Some(part) if self.projects.is_empty() => {
                format!("part {part} has no project, {} in other parts", self.elsewhere)
            }
            Some(part) => format!("part {part}: {projects}, {} in other parts", self.elsewhere),
        }
    }
}

impl Counts {
    fn of(projects: &[Audited]) -> Self {
        let mut out = Self::default();
        for project in projects {
            *match project.standing {
                Standing::UpToDate => &mut out.up_to_date,
                Standing::NotSatisfied => &mut out.not_satisfied,
                Standing::OutOfDate => &mut out.out_of_date,
                Standing::Wrong => &mut out.wrong,
                Standing::CouldNot => &mut out.could_not,
            } += 1;
            for check in &project.checks {
                *match check.outcome.as_str() {
                    "satisfied" => &mut out.checks_satisfied,
                    "deferred" if check.disclosed => &mut out.checks_deferred,
                    "deferred" => &mut out.checks_not_disclosed,
                    _ => &mut out.checks_not_satisfied,
                } += 1;
            }
            out.assumptions += project.assumptions.len();
            out.deferrals += project.deferrals.len();
        }
        out
    }

    /// How the projects stand, what is nought left out.
    #[must_use]
    pub fn standings(&self) -> String {
        listed(&[
            (self.could_not, "could not be audited"),
            (self.wrong, "wrong"),
            (self.out_of_date, "out of date"),
            (self.not_satisfied, "not satisfied"),
            (self.up_to_date, "up to date"),
        ])
    }

    /// What the checks came to.
    #[must_use]
    pub fn checks(&self) -> String {
        listed(&[
            (self.checks_not_satisfied, "not satisfied"),
            (self.checks_not_disclosed, "deferred and not disclosed"),
            (self.checks_deferred, "deferred as disclosed"),
            (self.checks_satisfied, "satisfied"),
        ])
    }

    /// What is left to others.
    #[must_use]
    pub fn left_open(&self) -> String {
        let assumptions = number(self.assumptions, "assumption", "assumptions");
        let deferrals = number(self.deferrals, "deferral", "deferrals");
        format!("{assumptions} to confirm, {deferrals}")
    }
}

fn listed(counts: &[(usize, &str)]) -> String {
    let there = counts.iter().filter(|(count, _)| *count > 0);
    let said: Vec<String> = there.map(|(count, words)| format!("{count} {words}")).collect();
    if said.is_empty() { "none".to_owned() } else { said.join(", ") }
}

fn number(count: usize, one: &str, several: &str) -> String {
    format!("{count} {}", if count == 1 { one } else { several })
}
