//! The project file as written, and its resolution into a Model.
//!
//! Invariants
//! - Three reading steps: events (syntax, duplicates, limits), shape (against the schema), serde.
//! - Every problem of a file is reported in one run.
//! - Leaves are text as written until `resolve` parses and names them.

mod de;
pub mod keys;
mod resolve;
pub mod text;
mod tree;
pub mod written;

use crate::diagnostic::Diagnostic;
use crate::files::Sources;
use crate::model::Model;

/// Reads and resolves `project.yaml`.
///
/// # Errors
/// Every problem found, in the order of the file; warnings never stand alone here.
pub fn read(sources: &Sources) -> Result<(Model, Vec<Diagnostic>), Vec<Diagnostic>> {
    let written: written::Project =
        de::read(&tree::read(sources.project())?).map_err(|problem| vec![problem])?;
    resolve::resolve(&written)
}

/// JSON Schema (2020-12) of the project file.
#[must_use]
pub fn schema() -> serde_json::Value {
    todo!()
}
