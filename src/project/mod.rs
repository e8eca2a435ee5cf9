//! The project file as written, and its resolution into a Model.
//!
//! Invariants
//! - Three reading steps: events (syntax, duplicates, limits), shape (against the schema), serde.
//! - Every problem of a file is reported in one run.
//! - Leaves are text as written until `resolve` parses and names them.

mod de;
mod edit;
mod forms;
pub mod keys;
mod lines;
pub mod narrative;
mod resolve;
mod schema;
mod shape;
pub mod text;
mod tree;
pub mod written;

pub use edit::{Edit, section, section_edit, with_section};
pub use lines::Lines;

use crate::diagnostic::{Diagnostic, near};
use crate::files::Sources;
use crate::model::Model;

/// Reads and resolves `project.yaml`.
///
/// # Errors
/// Every problem found, in the order of the file; warnings never stand alone here.
pub fn read(sources: &Sources) -> Result<(Model, Vec<Diagnostic>), Vec<Diagnostic>> {
    resolve::resolve(&written(sources)?, sources)
}

/// Reads `project.yaml` as written: the three reading steps, without resolving anything.
///
/// # Errors
/// Every problem of syntax, or else every problem of shape, in the order of the file.
pub fn written(sources: &Sources) -> Result<written::Project, Vec<Diagnostic>> {
    let Some(bytes) = sources.files.get(text::FILE) else {
        return Err(vec![Diagnostic::error("no-project", "there is no `project.yaml`")]);
    };
    let content = std::str::from_utf8(bytes).map_err(|error| {
        let at = error.valid_up_to();
        vec![
            Diagnostic::error("encoding", "`project.yaml` is not UTF-8 text")
                .hint(format!("the first byte that is not stands after {at} bytes")),
        ]
    })?;
    let tree = tree::read(content)?;
    let problems = shape::problems(content, &tree);
    if !problems.is_empty() {
        return Err(problems);
    }
    de::read(&tree).map_err(|problem| vec![problem])
}

/// JSON Schema (2020-12) of the project file.
#[must_use]
pub fn schema() -> serde_json::Value {
    schema::SCHEMA.clone()
}
