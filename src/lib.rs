//! Spanfolio turns one YAML project file into a calculation package for beams and frames.
//!
//! The modules stand in the order in which the data flows; each imports only those before it
//! (`tests/it/laws/module_order.rs` holds this). The way of the data:
//!
//! `files::Sources` → [`project`] → [`model::Model`] → [`analysis::Solution`] → [`record::Record`]
//! → [`package::Package`] → `files`.

pub mod analysis;
pub mod audit;
pub mod calc;
pub mod catalogue;
pub mod checks;
pub mod cli;
pub mod compare;
pub mod diagnostic;
pub mod figures;
pub mod files;
pub mod model;
pub mod package;
pub mod project;
pub mod quantity;
pub mod record;
pub mod section;
pub mod trial;

use diagnostic::Diagnostic;
use files::Sources;
use record::Record;

/// A project read, solved and settled.
#[derive(Clone, Debug)]
pub struct Solved {
    pub record: Record,
    /// What is odd but not wrong.
    pub warnings: Vec<Diagnostic>,
}

/// Sources → Record: reads the project file, solves every structure, finds what governs, checks itself.
/// Whether the self-check holds stands in the Record.
///
/// # Errors
/// Every problem of the project, located.
pub fn solve(sources: &Sources) -> Result<Solved, Vec<Diagnostic>> {
    let (model, warnings) = project::read(sources)?;
    let solution = analysis::solve(&model)?;
    let governing = analysis::govern(&model, &solution);
    let self_check = analysis::self_check(&model, &solution);
    let checked = checks::check(&model, &solution, &governing)?;
    let fingerprint = sources.fingerprint();
    let record = record::record(&model, &solution, &governing, &self_check, &checked, &fingerprint);
    Ok(Solved { record, warnings })
}
