//! `spanfolio audit`

use std::path::{Path, PathBuf};

use super::table::{Align, Table};
use super::{Status, render};
use crate::audit::{Audited, Part, Report, Standing, audit, one_line};
use crate::diagnostic::Diagnostic;
use crate::files;

#[derive(Debug, clap::Args)]
#[command(after_long_help = "\
Each project is rebuilt in memory and held against its committed package; nothing of it is written. Where a package is out of date, \
the reason is the first of: no package yet; the input was changed and not issued again; another version of the program made it; \
its files were edited by hand. Line ends, and numbers that differ by less than 1e-9 of their size, do not count and are noted.

`--part` gives each project to one of several machines by a hash of its path from the root of the repository: the parts are disjoint, \
hold every project, differ little in size, and most projects stay in their part when another comes or goes.

Exit status: 0 all up to date and satisfied; 1 could not; 2 a project or the command line is wrong; 4 a package is out of date; \
3 a check is not satisfied, or deferred without being named in `basis.deferred`; of several the first in this order.")]
pub(super) struct Arguments {
    /// Folders of projects, their `project.yaml`, or folders that are searched for projects
    #[arg(value_name = "PROJECT", required = true)]
    paths: Vec<PathBuf>,
    /// Audit one part of the projects only, such as `3/8` on the third of eight machines
    #[arg(long, value_name = "N/OF")]
    part: Option<Part>,
    /// Print the whole audit as JSON
    #[arg(long)]
    json: bool,
    /// Write JUnit XML: a suite for each project, a case for its package and for each check
    #[arg(long, value_name = "FILE")]
    junit: Option<PathBuf>,
    /// Write a Markdown summary; `-` prints it in place of the report
    #[arg(long, value_name = "FILE")]
    summary: Option<PathBuf>,
    /// Print annotations behind the report, in the form that a git host reads from the output of a job
    #[arg(long, value_name = "HOST", conflicts_with = "json")]
    annotations: Option<Host>,
    /// Write a code quality report: JSON that a git host shows beside the lines of a change
    #[arg(long, value_name = "FILE")]
    code_quality: Option<PathBuf>,
}

/// A git host that reads annotations from what a job prints.
#[derive(Clone, Copy, Debug, PartialEq, Eq, clap::ValueEnum)]
enum Host {
    /// Workflow commands: `::error file=…,line=…::…`
    Github,
}

pub(super) fn run(arguments: &Arguments) -> Status {
    let prints_summary = arguments.summary.as_deref() == Some(Path::new("-"));
    if prints_summary && (arguments.json || arguments.annotations.is_some()) {
        let message = "`--summary -` prints in place of what `--json` and `--annotations` print";
        let problem = Diagnostic::error("two-outputs", message)
            .hint("name a file for the summary".to_owned());
        return super::wrong(&[problem], Path::new(""), None);
    }
    let (found, problems) = files::projects(&arguments.paths);
    let all = found.len();
    let found = match arguments.part {
        Some(part) => part.keep(found, |project| &project.name),
        None => found,
    };
    let report = Report::new(arguments.part, all - found.len(), audit(&found), &problems);
    render::print(&problems, Path::new(""), None);
    for project in &report.projects {
        render::print(&project.diagnostics, &project.folder, project.sources.as_ref());
    }
    if arguments.json {
        anstream::print!("{}", report.to_json());
    } else if prints_summary {
        anstream::print!("{}", report.to_markdown());
    } else if arguments.annotations == Some(Host::Github) {
        anstream::print!("{}{}", inert(&shown(&report)), report.workflow_commands());
    } else {
        anstream::print!("{}", shown(&report));
    }
    match write(arguments, &report, prints_summary) {
        Ok(()) => status(report.standing),
        Err(problem) => {
            render::print(&[problem], Path::new(""), None);
            Status::CouldNot
        }
    }
}

const fn status(standing: Standing) -> Status {
    match standing {
        Standing::UpToDate => Status::Done,
        Standing::NotSatisfied => Status::NotSatisfied,
        Standing::OutOfDate => Status::OutOfDate,
        Standing::Wrong => Status::Wrong,
        Standing::CouldNot => Status::CouldNot,
    }
}

/// The files asked for.
fn write(arguments: &Arguments, report: &Report, prints_summary: bool) -> Result<(), Diagnostic> {
    if let Some(path) = &arguments.junit {
        files::put(path, report.to_junit().as_bytes())?;
    }
    if let Some(path) = arguments.summary.as_ref().filter(|_| !prints_summary) {
        files::put(path, report.to_markdown().as_bytes())?;
    }
    if let Some(path) = &arguments.code_quality {
        files::put(path, report.code_quality().as_bytes())?;
    }
    Ok(())
}

/// Between commands that keep the host from reading commands out of a project's own words. The token comes
/// from the text, so no text can hold it.
fn inert(text: &str) -> String {
    let token = files::digest(text.as_bytes());
    format!("::stop-commands::{token}\n{text}::{token}::\n")
}

/// The report for people: a line a project, what is not fine, counts.
fn shown(report: &Report) -> String {
    let mut table =
        Table::new(&[("stands", Align::Left), ("project", Align::Left), ("", Align::Left)]);
    for project in &report.projects {
        table.row(vec![
            project.standing.word().to_owned(),
            one_line(&project.folder.display().to_string()),
            in_short(project),
        ]);
    }
    let mut out = if table.is_empty() { String::new() } else { table.print() };
    report.projects.iter().for_each(|project| out += &details(project));
    if !out.is_empty() {
        out.push('\n');
    }
    out += &report.scope();
    if !report.projects.is_empty() {
        let counts = &report.counts;
        out += &format!(": {}\n", counts.standings());
        out += &format!("checks: {}\n", counts.checks());
        out += &counts.left_open();
    }
    out + "\n"
}

/// What is not fine with a project, in a few words.
fn in_short(project: &Audited) -> String {
    let errors = project.problems.iter().filter(|problem| problem.severity == "error");
    let mut parts: Vec<String> = errors.map(|problem| problem.message.clone()).take(1).collect();
    if let Some(package) = project.package.as_ref().filter(|package| !package.up_to_date) {
        parts.push(package.words.clone());
    }
    match project.open_checks().count() {
        0 => {}
        1 => parts.push("1 check open".to_owned()),
        open => parts.push(format!("{open} checks open")),
    }
    one_line(&parts.join("; "))
}

fn details(project: &Audited) -> String {
    let mut lines: Vec<String> = Vec::new();
    if let Some(package) = &project.package {
        lines.push(format!("package: {}", package.words));
        let files = package.files.iter().map(crate::audit::FileDifference::words);
        let below = package.details.iter().cloned().chain(files).chain(package.notes.clone());
        lines.extend(below.map(|line| format!("  {line}")));
        if !package.up_to_date {
            let against = package.against.as_ref();
            let against = against.map(|commit| format!(" --against {commit}")).unwrap_or_default();
            let folder = project.folder.display();
            lines.push(format!("  `spanfolio issue {folder}{against}` makes it anew"));
        }
        if package.up_to_date && package.notes.is_empty() {
            lines.clear();
        }
    }
    let open = project.open_checks().map(|check| format!("{}: {}", check.said(), check.words()));
    lines.extend(open);
    let assumptions = project.assumptions.iter();
    lines.extend(assumptions.map(|assumption| format!("to confirm: {}", assumption.words())));
    lines
        .extend(project.deferrals.iter().map(|deferral| format!("deferred: {}", deferral.words())));
    if lines.is_empty() {
        return String::new();
    }
    let mut out = format!("\n{}\n", one_line(&project.folder.display().to_string()));
    lines.iter().for_each(|line| out += &format!("  {}\n", one_line(line)));
    out
}
