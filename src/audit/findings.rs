//! What an audit found, one by one, for whoever shows it at a line of a file.

use super::{Audited, FileDifference, Report, one_line};
use crate::compare::LineOf;
use crate::files::PACKAGE;

/// How serious a finding is, worst first.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Level {
    /// The audit is not passed with it.
    Error,
    Warning,
    Notice,
}

/// One thing found.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Finding {
    pub level: Level,
    /// Slug of its kind.
    pub code: String,
    pub title: String,
    /// One line.
    pub message: String,
    /// Path from where the names of projects count, usually the root of the repository.
    pub file: Option<String>,
    pub line: Option<usize>,
    pub column: Option<usize>,
}

impl Report {
    /// Everything found, worst first, then in order of the projects.
    #[must_use]
    pub fn findings(&self) -> Vec<Finding> {
        let search = self.problems.iter().map(|problem| Finding {
            level: Level::Error,
            code: problem.code.to_owned(),
            title: "no project".to_owned(),
            message: one_line(&problem.message),
            file: None,
            line: None,
            column: None,
        });
        let mut out: Vec<Finding> =
            search.chain(self.projects.iter().flat_map(of_project)).collect();
        out.sort_by_key(|finding| finding.level);
        out
    }
}

/// Where a package was edited.
fn edited(difference: &FileDifference) -> Option<LineOf> {
    let file = format!("{PACKAGE}/{}", difference.file);
    difference.line.map(|line| LineOf { file, line })
}

fn of_project(project: &Audited) -> Vec<Finding> {
    let finding = |level, code: &str, title: &str, message: &str, place: Option<&LineOf>| Finding {
        level,
        code: code.to_owned(),
        title: one_line(title),
        message: one_line(message),
        file: Some(project.path_of(place.map_or("project.yaml", |place| &place.file))),
        line: place.map(|place| place.line),
        column: None,
    };
    let mut out: Vec<Finding> = project
        .problems
        .iter()
        .map(|problem| {
            let level = if problem.severity == "error" { Level::Error } else { Level::Warning };
            let file = problem.file.as_deref().unwrap_or("project.yaml");
            let hints: String = problem.hints.iter().map(|hint| format!("; {hint}")).collect();
            let message = format!("{}{hints}", problem.message);
            Finding {
                file: Some(project.path_of(file)),
                line: problem.line,
                column: problem.column,
                ..finding(level, problem.code, problem.code, &message, None)
            }
        })
        .collect();
    if let Some(package) = &project.package {
        if let Some(reason) = package.reason {
            let more = package.details.iter().cloned();
            let files = package.files.iter().map(FileDifference::words);
            let said: Vec<String> =
                std::iter::once(package.words.clone()).chain(more).chain(files).collect();
            let message = said.join("; ");
            let place = package.files.first().and_then(edited);
            let title = "package out of date";
            out.push(finding(Level::Error, reason.slug(), title, &message, place.as_ref()));
        }
        out.extend(package.notes.iter().map(|note| {
            finding(Level::Notice, "package-note", package.words.as_str(), note, None)
        }));
    }
    out.extend(project.open_checks().map(|check| {
        let code = if check.outcome == "deferred" { "not-disclosed" } else { "not-satisfied" };
        let message = format!("{} ({}): {}", check.name(), check.title, check.words());
        finding(
            Level::Error,
            code,
            &format!("check {}", check.outcome),
            &message,
            check.place.as_ref(),
        )
    }));
    out.extend(project.assumptions.iter().map(|assumption| {
        let place = assumption.place.as_ref();
        finding(Level::Notice, "assumption", "assumption to confirm", &assumption.words(), place)
    }));
    out
}
