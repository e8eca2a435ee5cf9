//! The template context, version 1.
//!
//! | name | holds |
//! | --- | --- |
//! | `program`, `fingerprint`, `project`, `present`, `basis` | as in the Record; `present` is the last revision |
//! | `settings` | analysis, gravity, moments side, system of units, arithmetic |
//! | `units` | every kind of value with its unit |
//! | `values`, `build_ups`, `materials`, `sections` | the resolved input |
//! | `structures` | nodes, members, supports, hinges, drawings |
//! | `cases` | load cases with their loads in words and figures |
//! | `takedown` | reactions handed from structure to structure |
//! | `combinations` | factors matrix in blocks of at most sixteen cases |
//! | `members` | drawings and governing values of each member |
//! | `reactions` | by case and governing, with components acting together |
//! | `checks`, `checks_method` | checks by id: the worst place in full, all others in a line each |
//! | `checks_summary`, `checks_deferred`, `cautions` | the worst check of each member; what is deferred; cautions of sheets |
//! | `figures`, `method_figure` | every drawing with its caption |
//! | `changes`, `changes_figures` | what changed since an earlier revision, where the package is held against one |
//! | `registers`, `self_check`, `sources` | open items, checks of the run, the project file as read |
//!
//! Every number is a [`Quantity`]; templates print it with the filters `quantity` and `number`.

mod actions;
mod checks;
mod input;
mod results;

use serde::Serialize;

use super::Comparison;
use crate::compare::Report;
use crate::figures::Figure;
use crate::files::Sources;
use crate::quantity::Kind;
use crate::record::{BasisRecord, ProgramRecord, ProjectRecord, Record, Registers, RevisionRecord};

pub(super) use checks::rank;

/// A value with the name of its kind, printed only by the filters.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub(super) struct Quantity {
    /// SI.
    pub(super) value: f64,
    pub(super) kind: &'static str,
}

impl Quantity {
    pub(super) fn new(kind: Kind, value: f64) -> Self {
        Self { value, kind: kind.name() }
    }
}

/// Everything a template can see.
#[derive(Serialize)]
pub(super) struct Context<'r> {
    program: &'r ProgramRecord,
    fingerprint: &'r str,
    project: &'r ProjectRecord,
    present: &'r RevisionRecord,
    basis: &'r BasisRecord,
    settings: input::Settings<'r>,
    units: Vec<input::UnitRow<'r>>,
    values: Vec<input::ValueRow<'r>>,
    build_ups: Vec<actions::BuildUpTable<'r>>,
    materials: Vec<input::MaterialRow<'r>>,
    sections: Vec<input::SectionRow<'r>>,
    structures: Vec<input::StructureView<'r>>,
    cases: Vec<actions::CaseView<'r>>,
    takedown: Vec<actions::HandedRow<'r>>,
    combinations: actions::Combinations<'r>,
    members: Vec<results::MemberView<'r>>,
    reactions: results::Reactions<'r>,
    checks: Vec<checks::CheckView<'r>>,
    checks_method: &'static str,
    checks_summary: Vec<checks::SummaryRow<'r>>,
    checks_deferred: Vec<checks::DeferredCheck<'r>>,
    cautions: Vec<checks::Caution<'r>>,
    changes: Option<Report>,
    changes_figures: Vec<FigureRef<'r>>,
    registers: &'r Registers,
    self_check: results::SelfCheckView<'r>,
    method_figure: FigureRef<'r>,
    /// Every drawing, the method's first.
    figures: Vec<FigureRef<'r>>,
    sources: Vec<SourceFile<'r>>,
}

/// A drawing that a template places.
#[derive(Clone, Copy, Debug, Serialize)]
pub(super) struct FigureRef<'r> {
    id: &'r str,
    caption: &'r str,
}

impl<'r> From<&'r Figure> for FigureRef<'r> {
    fn from(figure: &'r Figure) -> Self {
        Self { id: &figure.id, caption: &figure.caption }
    }
}

/// A file as read.
#[derive(Serialize)]
struct SourceFile<'r> {
    path: &'r str,
    text: &'r str,
    fence: String,
}

impl Context<'_> {
    /// Every drawing: id and caption.
    pub(super) fn figure_captions(&self) -> Vec<(String, String)> {
        self.figures
            .iter()
            .map(|figure| (figure.id.to_owned(), figure.caption.to_owned()))
            .collect()
    }
}

/// Builds the context.
pub(super) fn context<'r>(
    record: &'r Record,
    sources: &'r Sources,
    drawings: &'r [Figure],
    changes: Option<&'r Comparison>,
) -> Context<'r> {
    static NO_REVISION: RevisionRecord = RevisionRecord {
        mark: String::new(),
        date: String::new(),
        status: String::new(),
        note: String::new(),
        originated: String::new(),
        checked: String::new(),
        approved: String::new(),
    };
    Context {
        program: &record.program,
        fingerprint: &record.fingerprint,
        project: &record.project,
        present: record.project.revisions.last().unwrap_or(&NO_REVISION),
        basis: &record.basis,
        settings: input::settings(record),
        units: input::units(record),
        values: input::values(record),
        build_ups: actions::build_ups(record),
        materials: input::materials(record),
        sections: input::sections(record),
        structures: input::structures(record, drawings),
        cases: actions::cases(record, drawings),
        takedown: actions::takedown(record),
        combinations: actions::combinations(record),
        members: results::members(record, drawings),
        reactions: results::reactions(record),
        checks: checks::checks(record),
        checks_method: crate::checks::METHOD,
        checks_summary: checks::summary(record),
        checks_deferred: checks::deferred(record),
        cautions: checks::cautions(record),
        changes: changes.map(|of| of.changes.report(&record.model.units.printer())),
        changes_figures: changes
            .map(|of| of.figures.iter().map(FigureRef::from).collect())
            .unwrap_or_default(),
        registers: &record.registers,
        self_check: results::self_check(record),
        method_figure: FigureRef::from(&drawings[0]),
        figures: drawings.iter().map(FigureRef::from).collect(),
        sources: sources
            .files
            .keys()
            .filter_map(|path| {
                let text = sources.text(path)?;
                Some(SourceFile { path, text, fence: super::markdown::fence(text) })
            })
            .collect(),
    }
}
