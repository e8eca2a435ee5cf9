//! From the file as written to the Model: quantities parsed, names resolved, everything wrong collected.
//!
//! Invariants
//! - One run reports every problem; whatever depends on something already reported stays silent.
//! - A Model is built only when nothing was found.
//! - Axes, spans, positions and dimensions are checked here, once; nothing later checks them again.

mod about;
mod cases;
mod checks;
mod combinations;
mod expand;
mod formulas;
mod geometry;
mod handed;
mod loads;
mod materials;
mod members;
mod names;
mod narrative;
mod order;
mod parts;
mod reader;
mod rules;
mod sections;
mod sheets;
mod stretch;
mod structures;
mod supports;
mod warnings;
mod workings;

use self::names::Names;
use self::reader::Reader;
pub(super) use self::structures::ONLY;
use super::text::FILE;
use super::written;
use crate::diagnostic::{Diagnostic, Severity};
use crate::files::Sources;
use crate::model::Model;

/// Resolves a project without shape problems.
///
/// # Errors
/// Every problem found, in the order of the file.
pub(super) fn resolve(
    project: &written::Project,
    sources: &Sources,
) -> Result<(Model, Vec<Diagnostic>), Vec<Diagnostic>> {
    let mut reader = Reader::new(sources.project());
    let mut ids = Names::default();
    let (units, significant) = about::printing(&mut reader, project);
    let mut model = Model {
        project: about::project(&mut reader, &project.project),
        basis: about::basis(&mut reader, &project.basis, &mut ids),
        units,
        significant,
        shear_deformation: project.shear_deformation.unwrap_or(true),
        analysis: about::analysis(),
        package: about::package(project.package.as_ref()),
        values: about::values(&mut reader, &project.values),
        build_ups: about::build_ups(&mut reader, &project.build_ups),
        materials: materials::materials(&mut reader, &project.materials),
        sections: Vec::new(),
        structures: Vec::new(),
        solve_order: Vec::new(),
        nodes: Vec::new(),
        members: Vec::new(),
        cases: Vec::new(),
        combinations: Vec::new(),
        parts: Vec::new(),
        rules: Vec::new(),
        checks: Vec::new(),
        workings: Vec::new(),
        narrative: Vec::new(),
    };
    model.sections = sections::sections(&mut reader, &project.sections, model.shear_deformation);
    structures::structures(&mut reader, project, &mut model);
    about::drawn(&mut reader, project.package.as_ref(), &model);
    cases::cases(&mut reader, &project.load_cases, &mut model);
    parts::parts(&mut reader, &project.load_cases, &mut model);
    combinations::combinations(&mut reader, &project.combinations, &mut model);
    order::solve_order(&mut reader, &mut model);
    let narrative = project.narrative.as_ref();
    let files = narrative::narrative(&mut reader, narrative, sources, &mut ids, &mut model);
    let sheets = sheets::sheets(&mut reader, sources);
    let groups = checks::groups(&mut reader, &project.groups, &model);
    let mut names = Names::default();
    let mut given = checks::Given { sheets: &sheets, groups: &groups, names: &mut names };
    checks::checks(&mut reader, &project.checks, &mut given, &mut model);
    workings::workings(&mut reader, &files, &mut names, &mut model);
    checks::deferrals(&mut reader, &project.basis, &model);

    let mut found = reader.found;
    if found.is_empty() {
        let warnings = warnings::warnings(&model, &reader.marks);
        return Ok((model, warnings));
    }
    found.sort_by_key(|problem| {
        let place = problem.place.clone();
        let place = place.map(|place| (place.file != FILE, place.file, place.range.start));
        (problem.severity != Severity::Error, place)
    });
    found.dedup();
    Err(found)
}
