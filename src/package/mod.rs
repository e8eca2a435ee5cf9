//! (Record, Sources) → Package: chapters by templates, Markdown, one self-contained HTML page.

use std::collections::BTreeMap;

use crate::diagnostic::Diagnostic;
use crate::files::Sources;
use crate::record::Record;

/// Relative path (`/` between parts) → bytes.
pub type Package = BTreeMap<String, Vec<u8>>;

/// Builds the package: package.md, figures/*.svg, package.html, record.json.
///
/// # Errors
/// Template errors with file and line.
pub fn package(record: &Record, sources: &Sources) -> Result<Package, Vec<Diagnostic>> {
    todo!("{} {}", record.format, sources.files.len())
}
