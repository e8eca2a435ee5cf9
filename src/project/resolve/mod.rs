//! From the file as written to the Model: quantities parsed, names resolved, everything wrong collected.

use super::written;
use crate::diagnostic::Diagnostic;
use crate::model::Model;

/// Resolves a project without shape problems.
///
/// # Errors
/// Every problem found, in the order of the file.
pub(super) fn resolve(
    project: &written::Project,
) -> Result<(Model, Vec<Diagnostic>), Vec<Diagnostic>> {
    todo!("{}", project.format)
}
