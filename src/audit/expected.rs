//! The package that should be there.

use crate::diagnostic::Diagnostic;
use crate::files::{LARGEST_PROJECT, MOST_FILES, Sources};
use crate::package::{Against, Package, package};
use crate::record::Record;

/// A package built anew in memory, without its list of contents.
pub(super) struct Expected {
    pub(super) package: Package,
    /// Why it could not be held against the revision that the committed package was held against.
    pub(super) note: Option<String>,
    against: Option<Against>,
}

/// Builds the package of a project; against the earlier revision that the committed package keeps, if it
/// keeps one.
///
/// # Errors
/// Template errors of the project. What is wrong with the kept revision becomes a note.
pub(super) fn expected(
    record: &Record,
    sources: &Sources,
    committed: Option<&Package>,
) -> Result<Expected, Vec<Diagnostic>> {
    let kept = match committed {
        Some(committed) if is_too_large(committed) => {
            let message = "its files are too large or too many";
            Some(Err(vec![Diagnostic::error("too-large", message)]))
        }
        committed => committed.and_then(Against::of_package),
    };
    let (against, note) = match kept {
        None => (None, None),
        Some(Ok(against)) => (Some(against), None),
        Some(Err(problems)) => {
            let first = problems.first().map(|problem| problem.message.clone()).unwrap_or_default();
            (None, Some(format!("the earlier revision kept in the package is of no use: {first}")))
        }
    };
    let package = package(record, sources, against.as_ref())?;
    Ok(Expected { package, note, against })
}

/// A kept revision obeys the limits of a project.
fn is_too_large(committed: &Package) -> bool {
    let kept = || committed.iter().filter(|(path, _)| path.starts_with(Against::FOLDER));
    kept().count() > MOST_FILES + 1 || kept().any(|(_, bytes)| bytes.len() as u64 > LARGEST_PROJECT)
}

impl Expected {
    /// The commit of the earlier revision.
    pub(super) fn against(&self) -> Option<&str> {
        self.against.as_ref().map(Against::commit)
    }

    /// The same package made from another Record of the same input.
    pub(super) fn of(&self, record: &Record, sources: &Sources) -> Option<Package> {
        package(record, sources, self.against.as_ref()).ok()
    }
}
