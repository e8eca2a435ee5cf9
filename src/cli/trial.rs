//! `spanfolio try`

use std::path::Path;

use indexmap::IndexMap;
use serde_json::{Value, json};

use super::table::{Align, Table};
use super::{Project, Status, render, wrong};
use crate::catalogue;
use crate::diagnostic::Diagnostic;
use crate::files::{self, Sources};
use crate::project;
use crate::quantity::{System, parse_unit, print};
use crate::record::{printed_utilisation, rounded};
use crate::trial::{self, Candidate, Trial, Verdict};

#[derive(Debug, clap::Args)]
pub(super) struct Arguments {
    #[command(flatten)]
    project: Project,
    /// Name of the section in the project
    #[arg(long, value_name = "NAME")]
    section: String,
    /// Family of the catalogue; left out: that of the section as written
    #[arg(long, value_name = "FAMILY")]
    family: Option<String>,
    /// Write a designation into `project.yaml`: this one, or the lightest that satisfies every check
    #[arg(long, value_name = "DESIGNATION", num_args = 0..=1)]
    adopt: Option<Option<String>>,
    /// Print those that do not satisfy as well
    #[arg(long)]
    all: bool,
    /// Print JSON, all values in SI base units
    #[arg(long)]
    json: bool,
}

pub(super) fn run(arguments: &Arguments) -> Status {
    let folder = arguments.project.folder();
    let sources = match files::read(&arguments.project.path) {
        Ok(sources) => sources,
        Err(problems) => return wrong(&problems, &folder, None),
    };
    let family = arguments.family.as_deref();
    let trial = match trial::trial(&sources, &arguments.section, family) {
        Ok(trial) => trial,
        Err(problems) => return wrong(&problems, &folder, Some(&sources)),
    };
    render::print(&trial.warnings, &folder, Some(&sources));
    if arguments.json {
        anstream::print!("{:#}\n", as_json(&trial));
    } else {
        anstream::print!("{}", summary(&trial, arguments.all));
    }
    match &arguments.adopt {
        Some(designation) => adopt(&trial, designation.as_deref(), &sources, &folder),
        None if trial.satisfied().next().is_none() => Status::NotSatisfied,
        None => Status::Done,
    }
}

/// Writes the designation asked for, or the lightest that satisfies, into the project file.
fn adopt(trial: &Trial, asked: Option<&str>, sources: &Sources, folder: &Path) -> Status {
    let chosen = match asked {
        Some(name) => match among(trial, name) {
            Ok(candidate) => candidate,
            Err(problem) => return wrong(&[problem], folder, None),
        },
        None => match trial.satisfied().next() {
            Some(lightest) => lightest,
            None => {
                anstream::eprintln!("nothing adopted: no section tried satisfies every check");
                return Status::NotSatisfied;
            }
        },
    };
    let designation = &chosen.designation;
    if chosen.verdict != Verdict::Satisfied {
        anstream::eprintln!("nothing adopted: {designation} is {}", verdict(chosen));
        return Status::NotSatisfied;
    }
    if chosen.as_written {
        anstream::eprintln!("section {} is {designation} already; nothing written", trial.section);
        return Status::Done;
    }
    // Solved whole before anything is written: hand calculations read the new section too.
    let edit = match project::section_edit(sources, &trial.section, designation) {
        Ok(edit) => edit,
        Err(problems) => return wrong(&problems, folder, Some(sources)),
    };
    let edited = edit.apply(sources);
    let solved = match crate::solve(&edited) {
        Ok(solved) => solved,
        Err(problems) => {
            anstream::eprintln!(
                "nothing adopted: with {designation} the project cannot be solved\n"
            );
            return wrong(&problems, folder, Some(&edited));
        }
    };
    if let Err(problem) = files::edit(folder, sources, &edit.range, &edit.text) {
        render::print(&[problem], folder, None);
        return Status::CouldNot;
    }
    anstream::eprintln!(
        "adopted {designation} as section {} in `{}`",
        trial.section,
        folder.join("project.yaml").display()
    );
    let checks = &solved.record.checks;
    let apart: Vec<&str> = checks
        .iter()
        .filter(|check| check.kind == "agreement" && check.outcome != "satisfied")
        .map(|check| check.id.as_str())
        .collect();
    if !apart.is_empty() {
        anstream::eprintln!("hand calculations that do not agree with it: {}", apart.join(", "));
    }
    Status::Done
}

/// The candidate of a name.
fn among<'t>(trial: &'t Trial, name: &str) -> Result<&'t Candidate, Diagnostic> {
    let found = catalogue::section(name).map_err(|missing| {
        let near = missing.nearest.first().map(|near| format!("did you mean `{near}`?"));
        Diagnostic::error("unknown-section", missing.message).hint(near)
    })?;
    let same = |candidate: &&Candidate| candidate.designation == found.designation;
    trial.tried().find(same).ok_or_else(|| {
        let message = format!("`{}` is not of the family {}", found.designation, trial.family);
        Diagnostic::error("not-tried", message).hint(format!("add `--family {}`", found.family))
    })
}

fn summary(trial: &Trial, all: bool) -> String {
    let label = match trial.units.system {
        System::Si => "kg/m",
        System::Us => "lb/ft",
    };
    let mut table = Table::new(&[
        ("", Align::Left),
        ("section", Align::Left),
        (label, Align::Right),
        ("governing check", Align::Left),
        ("on", Align::Left),
        ("in", Align::Left),
        ("utilisation", Align::Right),
        ("outcome", Align::Left),
    ]);
    let shown = |candidate: &&Candidate| {
        all || candidate.as_written || candidate.verdict == Verdict::Satisfied
    };
    for candidate in trial.candidates.iter().filter(shown) {
        table.row(cells(trial, candidate));
    }
    let tried = trial.tried().count();
    let mut out = format!(
        "Section {}, {} as written (*): {tried} sections of family {}\n\n{}\n",
        trial.section,
        trial.as_written,
        trial.family,
        table.print()
    );
    out += &format!("{} of {tried} satisfy every check\n", trial.satisfied().count());
    for (reason, count) in reasons(trial) {
        out += &format!("  {count} {reason}\n");
    }
    out += "\nOnly the section changes: strengths of its material, whatever the thickness, inputs of checks and restraints stay as written.\n";
    if trial.agreements > 0 {
        out += "Agreements of hand calculations belong to the section as written and do not count here.\n";
    }
    out
}

fn cells(trial: &Trial, candidate: &Candidate) -> Vec<String> {
    let governing = candidate.governing.as_ref();
    let text = |of: fn(&trial::Governing) -> &String| {
        governing.map_or_else(|| "–".to_owned(), |governing| of(governing).clone())
    };
    let utilisation = governing.and_then(|governing| governing.utilisation);
    vec![
        if candidate.as_written { "*" } else { "" }.to_owned(),
        candidate.designation.clone(),
        mass(trial, candidate.mass),
        text(|governing| &governing.check),
        text(|governing| &governing.on),
        text(|governing| &governing.combination),
        utilisation.map_or_else(|| "–".to_owned(), printed_utilisation),
        verdict(candidate),
    ]
}

/// Mass per metre, or in pounds per foot, whose figures weight and mass share.
fn mass(trial: &Trial, mass: f64) -> String {
    let unit = match trial.units.system {
        System::Si => "kg/m",
        System::Us => "lbm/ft",
    };
    let factor = parse_unit(unit).map_or(1.0, |unit| unit.factor);
    print(mass / factor, trial.significant)
}

fn verdict(candidate: &Candidate) -> String {
    match &candidate.verdict {
        Verdict::Satisfied => "satisfied".to_owned(),
        Verdict::NotSatisfied(checks) => format!("not satisfied: {}", checks.join(", ")),
        Verdict::Deferred(checks) => {
            let each = checks.iter().map(|(id, reason)| format!("{id} ({reason})"));
            format!("deferred: {}", each.collect::<Vec<_>>().join(", "))
        }
        Verdict::Error(problems) => {
            let message = problems.first().map_or("", |problem| problem.message.as_str());
            format!("error: {message}")
        }
    }
}

/// Why sections do not satisfy, by the check that governs, with how many, in the order of the table.
fn reasons(trial: &Trial) -> IndexMap<String, usize> {
    let mut out = IndexMap::new();
    for candidate in trial.tried() {
        let reason = match &candidate.verdict {
            Verdict::Satisfied => continue,
            Verdict::NotSatisfied(_) => match &candidate.governing {
                Some(governing) => format!("not satisfied, governed by {}", governing.check),
                None => "not satisfied".to_owned(),
            },
            Verdict::Deferred(_) | Verdict::Error(_) => verdict(candidate),
        };
        *out.entry(reason).or_insert(0) += 1;
    }
    out
}

fn as_json(trial: &Trial) -> Value {
    json!({
        "section": trial.section,
        "as_written": trial.as_written,
        "family": trial.family,
        "tried": trial.tried().count(),
        "satisfied": trial.satisfied().count(),
        "candidates": trial.candidates.iter().map(candidate_json).collect::<Vec<_>>(),
        "agreements_left_aside": trial.agreements,
    })
}

fn candidate_json(candidate: &Candidate) -> Value {
    let governing = candidate.governing.as_ref().map(|governing| {
        json!({
            "check": governing.check,
            "on": governing.on,
            "combination": governing.combination,
            "utilisation": governing.utilisation.map(rounded),
        })
    });
    let (outcome, because) = match &candidate.verdict {
        Verdict::Satisfied => ("satisfied", json!([])),
        Verdict::NotSatisfied(checks) => ("not satisfied", json!(checks)),
        Verdict::Deferred(checks) => (
            "deferred",
            checks.iter().map(|(id, reason)| json!({"check": id, "reason": reason})).collect(),
        ),
        Verdict::Error(problems) => {
            ("error", problems.iter().map(|problem| json!(problem.message)).collect())
        }
    };
    json!({
        "designation": candidate.designation,
        "as_written": candidate.as_written,
        "in_family": candidate.in_family,
        "mass_per_metre": rounded(candidate.mass),
        "outcome": outcome,
        "because": because,
        "governing": governing,
    })
}
