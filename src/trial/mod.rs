//! Trial sections: each section of a family in place of one section of the project.
//!
//! Invariants
//! - A candidate goes the whole way from the written project to the outcomes of its checks: self-weight and
//!   everything derived follow the section.
//! - No candidate is dropped: one that cannot be resolved or evaluated says why.
//! - Agreements of hand calculations belong to the section as drawn and do not count here.
//! - Never writes anything.

use rayon::prelude::*;

use crate::analysis;
use crate::catalogue::{self, CatalogueSection};
use crate::checks::{self, CheckResult, Outcome};
use crate::diagnostic::Diagnostic;
use crate::files::Sources;
use crate::model::{Model, On};
use crate::project;

/// All candidates of a trial.
#[derive(Clone, Debug, PartialEq)]
pub struct Trial {
    pub family: String,
    /// The section as written, where it is one of the catalogue.
    pub present: Option<String>,
    /// Lightest first.
    pub candidates: Vec<Candidate>,
}

/// One section in place of the project's own.
#[derive(Clone, Debug, PartialEq)]
pub struct Candidate {
    pub designation: String,
    /// kg/m, with the heaviest material of the members that use the section.
    pub mass: f64,
    pub verdict: Verdict,
}

/// What the checks say with a candidate in place.
#[derive(Clone, Debug, PartialEq)]
pub enum Verdict {
    Checked {
        /// Every check is satisfied, or deferred under a deferral that names it.
        satisfied: bool,
        governing: Worst,
    },
    /// Why it could not be evaluated.
    Failed(String),
}

/// The worst check of a candidate: of one that satisfies, the worst on the members that use the section.
#[derive(Clone, Debug, PartialEq)]
pub struct Worst {
    pub id: String,
    /// What it is made on, in words.
    pub on: String,
    pub utilisation: Option<f64>,
    pub outcome: Outcome,
    pub reason: Option<String>,
}

impl Candidate {
    /// Every check of the project holds with it.
    #[must_use]
    pub const fn satisfies(&self) -> bool {
        matches!(self.verdict, Verdict::Checked { satisfied: true, .. })
    }
}

/// Tries every section of a family; without one, of the family that the section is of.
///
/// # Errors
/// A project that does not read, an unknown section or family, a project without checks, a section that no
/// member uses.
pub fn trial(
    sources: &Sources,
    section: &str,
    family: Option<&str>,
) -> Result<Trial, Vec<Diagnostic>> {
    let written = project::written(sources)?;
    let (model, _) = project::read(sources)?;
    let one = |problem: Diagnostic| vec![problem];
    let wrong = |code, message: String| one(Diagnostic::error(code, message));
    let Some(own) = written.sections.get(section) else {
        let known: Vec<&str> = written.sections.keys().map(|name| name.as_str()).collect();
        let problem = Diagnostic::error("unknown-section", format!("no section named `{section}`"))
            .hint(format!("the project has {}", known.join(", ")));
        return Err(one(problem));
    };
    if model.checks.is_empty() {
        return Err(one(Diagnostic::error(
            "no-checks",
            "the project makes no check to try sections against",
        )
        .hint("add `checks` to the project file".to_owned())));
    }
    let density = heaviest(&model, section).ok_or_else(|| {
        wrong("unused-section", format!("no member uses the section `{section}`"))
    })?;
    let present = own.catalogue.as_ref().map(|text| text.to_string());
    let family = match (family, &present) {
        (Some(family), _) => family.to_owned(),
        (None, Some(designation)) => match catalogue::section(designation) {
            Ok(found) => found.family.to_owned(),
            Err(missing) => return Err(wrong("unknown-section", missing.message)),
        },
        (None, None) => {
            let message = format!("section `{section}` is not one of the catalogue");
            return Err(one(Diagnostic::error("no-family", message)
                .hint("say which to try: `--family IPE`".to_owned())));
        }
    };
    let sections = catalogue::family(&family).map_err(|missing| {
        let near = missing.nearest.first().map(|near| format!("did you mean `{near}`?"));
        one(Diagnostic::error("unknown-family", missing.message).hint(near))
    })?;
    let mut candidates: Vec<Candidate> = sections
        .par_iter()
        .map(|candidate| Candidate {
            designation: candidate.designation.clone(),
            mass: candidate.properties.area * density,
            verdict: verdict(&written, sources, section, candidate),
        })
        .collect();
    candidates.sort_by(|a, b| a.mass.total_cmp(&b.mass));
    Ok(Trial { family, present, candidates })
}

/// Greatest density of the materials of the members that use a section, kg/m³.
fn heaviest(model: &Model, section: &str) -> Option<f64> {
    let users = model.members.iter().filter(|member| model[member.section].name == section);
    users.map(|member| model[member.material].density).reduce(f64::max)
}

fn verdict(
    written: &project::written::Project,
    sources: &Sources,
    section: &str,
    candidate: &CatalogueSection,
) -> Verdict {
    let checked = project::with_section(written, sources, section, &candidate.designation)
        .and_then(|model| {
            let solution = analysis::solve(&model)?;
            let results = checks::checks(&model, &solution)?;
            Ok((model, results))
        });
    match checked {
        Ok((model, results)) => {
            let satisfied = results.iter().all(|result| holds(&model, result));
            let uses = |result: &CheckResult| uses(&model, result, section);
            let of_users = satisfied.then(|| worst(&model, &results, uses)).flatten();
            match of_users.or_else(|| worst(&model, &results, |_| true)) {
                Some(governing) => Verdict::Checked { satisfied, governing },
                None => Verdict::Failed("every check is deferred".to_owned()),
            }
        }
        Err(problems) => Verdict::Failed(
            problems.first().map_or_else(String::new, |problem| problem.message.clone()),
        ),
    }
}

fn holds(model: &Model, result: &CheckResult) -> bool {
    let id = &model.checks[result.check].id;
    match result.outcome {
        Outcome::Satisfied => true,
        Outcome::Deferred => {
            model.basis.deferred.iter().any(|deferral| deferral.checks.contains(id))
        }
        Outcome::NotSatisfied => false,
    }
}

/// The check is on a member that uses the section.
fn uses(model: &Model, result: &CheckResult, section: &str) -> bool {
    match model.checks[result.check].targets[result.target].on {
        On::Member { member, .. } => model[model[member].section].name == section,
        On::Node { .. } | On::Structure { .. } => false,
    }
}

/// The worst of some checks; one that is deferred under a deferral of the project does not govern.
fn worst(
    model: &Model,
    results: &[CheckResult],
    of: impl Fn(&CheckResult) -> bool,
) -> Option<Worst> {
    let counts = |result: &&CheckResult| {
        of(result) && (result.outcome != Outcome::Deferred || !holds(model, result))
    };
    let worse = |a: &CheckResult, b: &CheckResult| b.rank(model) > a.rank(model);
    let worst = results.iter().filter(counts).reduce(|a, b| if worse(a, b) { b } else { a })?;
    let check = &model.checks[worst.check];
    Some(Worst {
        id: check.id.clone(),
        on: model.on_name(check.targets[worst.target].on),
        utilisation: worst.governing.as_ref().and_then(|governing| governing.utilisation),
        outcome: worst.outcome,
        reason: worst.reason.clone(),
    })
}
