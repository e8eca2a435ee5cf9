//! A comparison as Markdown fit for a comment, and as one self-contained page.

use super::{html, number, templates};
use crate::compare::{Changes, Report};
use crate::diagnostic::Diagnostic;
use crate::figures::{Figure, comparison};
use crate::quantity::Printer;
use crate::record::Record;

/// The comparison as Markdown without drawings.
///
/// # Errors
/// When the built-in template fails, which is a fault of the program.
pub fn comparison_markdown(report: &Report, printer: &Printer) -> Result<String, Vec<Diagnostic>> {
    text(report, &[], printer)
}

/// The comparison as a page with old and new lines drawn over each other.
///
/// # Errors
/// When the built-in template fails, which is a fault of the program.
pub fn comparison_page(
    old: &Record,
    new: &Record,
    changes: &Changes,
) -> Result<String, Vec<Diagnostic>> {
    let drawings = comparison(old, new, changes);
    let printer = new.model.units.printer();
    let markdown = text(&changes.report(&printer), &drawings, &printer)?;
    Ok(html::comparison(new, &markdown, &drawings))
}

fn text(
    report: &Report,
    drawings: &[Figure],
    printer: &Printer,
) -> Result<String, Vec<Diagnostic>> {
    let rendered =
        templates::comparison(report, drawings, printer).map_err(|problem| vec![problem])?;
    Ok(number::Numbering::default().chapter(&rendered, false))
}
