//! An audit as Markdown for a job's summary or a comment on a change.

use super::{Audited, Report, Standing};
use crate::package::escaped_markdown as escaped;

/// Rows of a list; comments and summaries have a greatest length.
const MOST_ROWS: usize = 50;

impl Report {
    /// The report as Markdown.
    #[must_use]
    pub fn to_markdown(&self) -> String {
        let mut out = format!("## Audit of calculation packages\n\n{}", self.scope());
        if !self.projects.is_empty() {
            out += &format!(
                ": **{}**\n\nChecks: {}. {}.",
                self.counts.standings(),
                self.counts.checks(),
                self.counts.left_open()
            );
        }
        out += "\n";
        for problem in &self.problems {
            out += &format!("\n- {}", escaped(&problem.words()));
        }
        if !self.problems.is_empty() {
            out.push('\n');
        }
        if !self.projects.is_empty() {
            out += "\n| project | stands | package | checks satisfied | open | deferred as disclosed | to confirm |\n";
            out += "| --- | --- | --- | ---: | ---: | ---: | ---: |\n";
            self.projects.iter().for_each(|project| out += &row(project));
        }
        self.projects.iter().for_each(|project| out += &details(project));
        out
    }
}

fn row(project: &Audited) -> String {
    let package = match &project.package {
        None => "–",
        Some(package) if package.up_to_date => "up to date",
        Some(_) => "out of date",
    };
    let count =
        |outcome: &str| project.checks.iter().filter(|check| check.outcome == outcome).count();
    let stands = match project.standing {
        Standing::UpToDate => Standing::UpToDate.word().to_owned(),
        other => format!("**{}**", other.word()),
    };
    let disclosed = project.checks.iter().filter(|check| check.disclosed).count();
    format!(
        "| {} | {stands} | {package} | {} of {} | {} | {disclosed} | {} |\n",
        escaped(&project.project),
        count("satisfied"),
        project.checks.len(),
        project.open_checks().count(),
        project.assumptions.len()
    )
}

/// What is not fine with a project, then, folded, what it leaves to others.
fn details(project: &Audited) -> String {
    let mut open: Vec<String> = project.problems.iter().map(super::Problem::words).collect();
    if let Some(package) = &project.package {
        let files = package.files.iter().map(super::FileDifference::words);
        if !package.up_to_date {
            open.push(format!("package out of date: {}", package.words));
            open.extend(package.details.iter().cloned().chain(files));
        }
        open.extend(package.notes.iter().cloned());
    }
    open.extend(project.open_checks().map(|check| format!("{}: {}", check.said(), check.words())));
    let assumptions = project.assumptions.iter().map(super::Assumption::words).collect::<Vec<_>>();
    let deferrals = project.deferrals.iter().map(super::Deferral::words).collect::<Vec<_>>();
    if open.is_empty() && assumptions.is_empty() && deferrals.is_empty() {
        return String::new();
    }
    let name: Vec<String> = [&project.title, &project.number, &project.revision]
        .into_iter()
        .filter(|text| !text.is_empty())
        .map(|text| escaped(text))
        .collect();
    let mut out = format!("\n### {}\n", escaped(&project.project));
    if !name.is_empty() {
        out += &format!("\n{}\n", name.join(", "));
    }
    out += &list(&open);
    for (title, rows) in [("Assumptions to confirm", assumptions), ("Deferrals", deferrals)] {
        if !rows.is_empty() {
            let count = rows.len();
            out += &format!(
                "\n<details><summary>{title}: {count}</summary>\n{}\n</details>\n",
                list(&rows)
            );
        }
    }
    out
}

fn list(rows: &[String]) -> String {
    if rows.is_empty() {
        return String::new();
    }
    let mut out = "\n".to_owned();
    for row in rows.iter().take(MOST_ROWS) {
        out += &format!("- {}\n", escaped(row));
    }
    if rows.len() > MOST_ROWS {
        out += &format!("- and {} more\n", rows.len() - MOST_ROWS);
    }
    out
}
