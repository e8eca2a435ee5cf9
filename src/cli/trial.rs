//! `spanfolio try`

use std::path::Path;

use serde_json::json;

use super::table::{Align, Table};
use super::{Project, Status, render, wrong};
use crate::diagnostic::Diagnostic;
use crate::files::{self, Sources};
use crate::project;
use crate::quantity::{System, print};
use crate::record::printed_utilisation;
use crate::trial::{Candidate, Trial, Verdict, trial};

/// kg/m in one pound per foot.
const POUND_PER_FOOT: f64 = 0.453_592_37 / 0.3048;

#[derive(Debug, clap::Args)]
pub(super) struct Arguments {
    #[command(flatten)]
    project: Project,
    /// Section of the project in whose place others are tried
    #[arg(long, value_name = "NAME")]
    section: String,
    /// Family of the catalogue, e.g. `IPE`; left out: that of the section
    #[arg(long, value_name = "FAMILY")]
    family: Option<String>,
    /// Print every section of the family, not only those that satisfy
    #[arg(long)]
    all: bool,
    /// Print JSON, masses in kg/m
    #[arg(long)]
    json: bool,
    /// Write a section into the project file: the one named, else the lightest that satisfies
    #[arg(long, value_name = "DESIGNATION", num_args = 0..=1)]
    adopt: Option<Option<String>>,
}

pub(super) fn run(arguments: &Arguments) -> Status {
    let folder = arguments.project.folder();
    let sources = match files::read(&arguments.project.path) {
        Ok(sources) => sources,
        Err(problems) => return wrong(&problems, &folder, None),
    };
    let trial = match trial(&sources, &arguments.section, arguments.family.as_deref()) {
        Ok(trial) => trial,
        Err(problems) => return wrong(&problems, &folder, Some(&sources)),
    };
    if arguments.json {
        anstream::println!("{:#}", as_json(&trial));
    } else {
        anstream::print!("{}", text(&trial, &arguments.section, system(&sources), arguments.all));
    }
    let Some(asked) = &arguments.adopt else {
        let any = trial.candidates.iter().any(Candidate::satisfies);
        return if any { Status::Done } else { Status::NotSatisfied };
    };
    match chosen(&trial, asked.as_deref()) {
        Ok(candidate) => adopt(&folder, &sources, &arguments.section, &candidate.designation),
        Err(problem) => {
            let status =
                if problem.code == "not-satisfied" { Status::NotSatisfied } else { Status::Wrong };
            render::print(&[problem], &folder, None);
            status
        }
    }
}

fn system(sources: &Sources) -> System {
    project::read(sources).map_or(System::Si, |(model, _)| model.units.system)
}

/// The candidate to adopt, which must satisfy.
fn chosen<'t>(trial: &'t Trial, asked: Option<&str>) -> Result<&'t Candidate, Diagnostic> {
    let found = match asked {
        None => trial.candidates.iter().find(|candidate| candidate.satisfies()),
        Some(name) => {
            let same = |candidate: &&Candidate| candidate.designation.eq_ignore_ascii_case(name);
            let found = trial.candidates.iter().find(same);
            Some(found.ok_or_else(|| {
                let message = format!("no section `{name}` in the family {}", trial.family);
                Diagnostic::error("unknown-section", message)
            })?)
        }
    };
    match found {
        Some(candidate) if candidate.satisfies() => Ok(candidate),
        Some(candidate) => {
            let message = format!("{} does not satisfy every check", candidate.designation);
            Err(Diagnostic::error("not-satisfied", format!("{message}; nothing was written")))
        }
        None => {
            let message = format!("no section of {} satisfies every check", trial.family);
            Err(Diagnostic::error("not-satisfied", format!("{message}; nothing was written")))
        }
    }
}

fn adopt(folder: &Path, sources: &Sources, section: &str, designation: &str) -> Status {
    let edited = project::section_edit(sources, section, designation)
        .and_then(|edit| files::replace(folder, "project.yaml", &edit.range, &edit.text));
    match edited {
        Ok(()) => {
            anstream::eprintln!("wrote `{designation}` into section `{section}` of `project.yaml`");
            Status::Done
        }
        Err(problem) => {
            let status =
                if problem.code == "cannot-write" { Status::CouldNot } else { Status::Wrong };
            render::print(&[problem], folder, Some(sources));
            status
        }
    }
}

fn text(trial: &Trial, section: &str, system: System, all: bool) -> String {
    let unit = if system == System::Us { "lb/ft" } else { "kg/m" };
    let mut table = Table::new(&[
        ("", Align::Left),
        ("section", Align::Left),
        (unit, Align::Right),
        ("governing check", Align::Left),
        ("on", Align::Left),
        ("utilisation", Align::Right),
        ("outcome", Align::Left),
    ]);
    let is_present = |candidate: &Candidate| trial.present.as_ref() == Some(&candidate.designation);
    let satisfying = trial.candidates.iter().filter(|candidate| candidate.satisfies()).count();
    for candidate in &trial.candidates {
        if all || candidate.satisfies() || is_present(candidate) {
            table.row(row(candidate, system, is_present(candidate)));
        }
    }
    let mut out = format!("Section {section}: family {} tried, lightest first\n", trial.family);
    out += &table.print();
    out += &format!("\n{satisfying} of {} satisfy every check", trial.candidates.len());
    let failed = |candidate: &&Candidate| matches!(candidate.verdict, Verdict::Failed(_));
    match trial.candidates.iter().filter(failed).count() {
        0 => {}
        failed => out += &format!("; {failed} could not be evaluated"),
    }
    out += "\n";
    if trial.present.is_some() {
        out += "> is the section as written. ";
    }
    out += "Hand calculations belong to the section as written and are not counted.\n";
    out
}

fn row(candidate: &Candidate, system: System, present: bool) -> Vec<String> {
    let mass = match system {
        System::Si => candidate.mass,
        System::Us => candidate.mass / POUND_PER_FOOT,
    };
    let mut row = vec![
        (if present { ">" } else { "" }).to_owned(),
        candidate.designation.clone(),
        print(mass, 4),
    ];
    match &candidate.verdict {
        Verdict::Checked { governing, .. } => {
            let reason =
                governing.reason.as_ref().map(|reason| format!(": {reason}")).unwrap_or_default();
            row.extend([
                governing.id.clone(),
                governing.on.clone(),
                governing.utilisation.map_or_else(|| "–".to_owned(), printed_utilisation),
                format!("{}{reason}", governing.outcome.name()),
            ]);
        }
        Verdict::Failed(message) => {
            row.extend([String::new(), String::new(), "–".to_owned(), format!("error: {message}")]);
        }
    }
    row
}

fn as_json(trial: &Trial) -> serde_json::Value {
    let candidates: Vec<serde_json::Value> = trial
        .candidates
        .iter()
        .map(|candidate| match &candidate.verdict {
            Verdict::Checked { satisfied, governing } => json!({
                "section": candidate.designation,
                "mass": candidate.mass,
                "satisfied": satisfied,
                "check": governing.id,
                "on": governing.on,
                "utilisation": governing.utilisation,
                "outcome": governing.outcome.name(),
                "reason": governing.reason,
            }),
            Verdict::Failed(message) => json!({
                "section": candidate.designation,
                "mass": candidate.mass,
                "satisfied": false,
                "error": message,
            }),
        })
        .collect();
    json!({ "family": trial.family, "present": trial.present, "candidates": candidates })
}
