//! Trial sections: each section of a catalogue family in place of one section, wherever it is used.
//!
//! Invariants
//! - A candidate is the project resolved and solved again with that designation, so that self-weight and
//!   all else that depends on the section follows; nothing else changes. Writes nothing.
//! - A candidate satisfies when every check of the project does, those deferred and covered by a deferral
//!   of the basis excepted, at least one was evaluated, and the self-check holds.
//! - Candidates that cannot be resolved, solved or checked are kept with their problems.
//! - Agreements of hand calculations are about the section as written and have no say.

mod weigh;

use rayon::prelude::*;

use self::weigh::Weighed;
use crate::catalogue::{self, CatalogueSection};
use crate::diagnostic::Diagnostic;
use crate::files::Sources;
use crate::model::{Model, SectionId, WorkingLine};
use crate::project::{self, text::Text, written};
use crate::quantity::Units;

/// What came out of a trial.
#[derive(Clone, Debug, PartialEq)]
pub struct Trial {
    /// Name of the section in the project.
    pub section: String,
    /// As written: its designation, or the title of its shape.
    pub as_written: String,
    /// Name of the family tried.
    pub family: &'static str,
    pub units: Units,
    /// Significant digits that the project prints.
    pub significant: usize,
    /// Lightest first, by area where the mass is the same; the section as written is among them.
    pub candidates: Vec<Candidate>,
    /// Agreements of hand calculations that were left aside.
    pub agreements: usize,
    /// What is odd in the project as written.
    pub warnings: Vec<Diagnostic>,
}

/// One section tried.
#[derive(Clone, Debug, PartialEq)]
pub struct Candidate {
    /// As in the catalogue; the title where the section as written is not of the catalogue.
    pub designation: String,
    pub as_written: bool,
    /// Of the family tried, which the section as written need not be.
    pub in_family: bool,
    /// kg/m, with the densest material of the members that have the section.
    pub mass: f64,
    pub area: f64,
    pub verdict: Verdict,
    /// `None` where no check was evaluated.
    pub governing: Option<Governing>,
}

/// How a candidate comes off.
#[derive(Clone, Debug, PartialEq)]
pub enum Verdict {
    Satisfied,
    /// Ids of the checks that are not satisfied.
    NotSatisfied(Vec<String>),
    /// No check fails, but these were not evaluated: id and reason.
    Deferred(Vec<(String, String)>),
    /// It cannot be resolved, solved or checked.
    Error(Vec<Diagnostic>),
}

/// The check with the greatest share of its limit; where none fails, among those whose utilisation is not
/// the same with every section tried.
#[derive(Clone, Debug, PartialEq)]
pub struct Governing {
    pub check: String,
    /// What it is made on, in words.
    pub on: String,
    /// Number of the combination, e.g. `C3`.
    pub combination: String,
    /// `None` where the capacity is not above zero.
    pub utilisation: Option<f64>,
}

impl Trial {
    /// The family's sections that satisfy every check, lightest first.
    pub fn satisfied(&self) -> impl Iterator<Item = &Candidate> {
        self.tried().filter(|candidate| candidate.verdict == Verdict::Satisfied)
    }

    /// The family's sections.
    pub fn tried(&self) -> impl Iterator<Item = &Candidate> {
        self.candidates.iter().filter(|candidate| candidate.in_family)
    }
}

/// Tries every section of a family, by default of the present one's, in place of a section.
///
/// # Errors
/// Every problem of the project as written, or an unknown section or family, or nothing to try against,
/// or, where no candidate can be solved and checked, the problems of the section as written.
pub fn trial(
    sources: &Sources,
    section: &str,
    family: Option<&str>,
) -> Result<Trial, Vec<Diagnostic>> {
    let (model, warnings) = project::read(sources)?;
    let project = project::written(sources)?;
    let one = |problem: Diagnostic| vec![problem];
    let (name, written) = project::section(&project, section).map_err(one)?;
    let (family, sections) = sections(name, written, family).map_err(one)?;
    let density = density(&model, name).map_err(one)?;
    if model.checks.is_empty() {
        let message = "the project has no checks: there is nothing to try a section against";
        return Err(one(Diagnostic::error("no-checks", message)
            .hint("write at least one under `checks`".to_owned())));
    }
    let present = present(&model, name, written);
    let mut tried: Vec<Tried> = sections
        .into_par_iter()
        .map(|tried| {
            let outcome = project::with_section(&project, sources, section, &tried.designation)
                .and_then(|model| weigh::weigh(&model));
            let as_written = tried.designation == present.designation;
            let (designation, area) = (tried.designation, tried.properties.area);
            Tried { section: Section { designation, area }, as_written, in_family: true, outcome }
        })
        .collect();
    if tried.iter().all(|tried| !tried.as_written) {
        let outcome = weigh::weigh(&model);
        tried.push(Tried { section: present.clone(), as_written: true, in_family: false, outcome });
    }
    let weighed: Vec<&Weighed> = tried.iter().flat_map(|tried| &tried.outcome).collect();
    if weighed.is_empty() {
        let as_written = tried.into_iter().find(|tried| tried.as_written);
        return Err(as_written.and_then(|tried| tried.outcome.err()).unwrap_or_default());
    }
    let dependent = weigh::dependent(weighed.into_iter());
    let mut candidates: Vec<Candidate> =
        tried.into_iter().map(|tried| tried.candidate(density, &dependent)).collect();
    candidates.sort_by(|a, b| a.mass.total_cmp(&b.mass).then(a.area.total_cmp(&b.area)));
    let lines = model.workings.iter().flat_map(|working| &working.lines);
    let agreements = lines.filter(|line| matches!(line, WorkingLine::Agreement(_))).count();
    Ok(Trial {
        section: name.to_string(),
        as_written: present.designation,
        family,
        units: model.units,
        significant: model.significant,
        candidates,
        agreements,
        warnings,
    })
}

/// The family's name and its sections.
fn sections(
    name: &Text,
    written: &written::Section,
    family: Option<&str>,
) -> Result<(&'static str, Vec<CatalogueSection>), Diagnostic> {
    let lists = || "`spanfolio catalogue` lists the families".to_owned();
    let family = match (family, &written.catalogue) {
        (Some(family), _) => family.to_owned(),
        (None, Some(designation)) => catalogue::section(designation)
            .map(|found| found.family.to_owned())
            .map_err(|missing| Diagnostic::error("unknown-section", missing.message))?,
        (None, None) => {
            let message = format!(
                "section `{name}` is not of the catalogue, so that a family must be named to try"
            );
            return Err(Diagnostic::error("no-family", message)
                .at(name.place())
                .hint("add e.g. `--family IPE`".to_owned())
                .hint(lists()));
        }
    };
    let sections = catalogue::family(&family).map_err(|missing| {
        let near = missing.nearest.first().map(|near| format!("did you mean `{near}`?"));
        Diagnostic::error("unknown-family", missing.message).hint(near).hint(lists())
    })?;
    let family = sections.first().map_or("", |section| section.family);
    Ok((family, sections))
}

/// Greatest density of the materials that the section is made of, kg/m³.
fn density(model: &Model, name: &Text) -> Result<f64, Diagnostic> {
    let is_this = |section: SectionId| model[section].name == name.as_str();
    let members = model.members.iter().filter(|member| is_this(member.section));
    members.map(|member| model[member.material].density).max_by(f64::total_cmp).ok_or_else(|| {
        let message = format!("section `{name}` is used by no member: nothing depends on it");
        Diagnostic::error("unused-section", message).at(name.place())
    })
}

/// A section before its mass is known.
#[derive(Clone)]
struct Section {
    designation: String,
    area: f64,
}

struct Tried {
    section: Section,
    as_written: bool,
    in_family: bool,
    outcome: Result<Weighed, Vec<Diagnostic>>,
}

impl Tried {
    fn candidate(self, density: f64, dependent: &[bool]) -> Candidate {
        let (verdict, governing) = match self.outcome {
            Ok(weighed) => {
                let governing = weigh::governing(&weighed, dependent);
                (weighed.verdict, governing)
            }
            Err(problems) => (Verdict::Error(problems), None),
        };
        Candidate {
            designation: self.section.designation,
            as_written: self.as_written,
            in_family: self.in_family,
            mass: self.section.area * density,
            area: self.section.area,
            verdict,
            governing,
        }
    }
}

/// The section as written.
fn present(model: &Model, name: &Text, written: &written::Section) -> Section {
    let section = model.sections.iter().find(|section| section.name == name.as_str());
    let title = section.map(|section| section.title.clone()).unwrap_or_default();
    let of_catalogue = written.catalogue.as_ref().and_then(|text| catalogue::section(text).ok());
    Section {
        designation: of_catalogue.map_or(title, |found| found.designation),
        area: section.map_or(0.0, |section| section.properties.area),
    }
}
