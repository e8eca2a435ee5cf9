//! (Record, Sources) → Package: chapters by templates, Markdown, one self-contained HTML page.
//!
//! Invariants
//! - Templates look up, format and place; no value is defined and no outcome changed here.
//! - Whatever comes from the project's YAML is escaped unless a template says otherwise, and HTML in it
//!   never reaches the page.
//! - The notice of responsibility and the cautions are added after rendering: no template turns them off.
//! - The page loads nothing from elsewhere and runs no script; its content security policy says so.

mod cautions;
mod context;
mod html;
mod markdown;
mod math;
mod number;
mod templates;

use std::collections::BTreeMap;

use crate::diagnostic::Diagnostic;
use crate::figures::{Figure, figures, method};
use crate::files::Sources;
use crate::record::Record;

/// Relative path (`/` between parts) → bytes.
pub type Package = BTreeMap<String, Vec<u8>>;

/// Chapters in order: template, and whether its heading is numbered.
const CHAPTERS: [(&str, bool); 9] = [
    ("cover.md", false),
    ("summary.md", true),
    ("basis.md", true),
    ("model.md", true),
    ("actions.md", true),
    ("combinations.md", true),
    ("effects.md", true),
    ("self-check.md", true),
    ("deferred.md", true),
];
/// The last chapter stands apart: nothing is added behind it.
const APPENDIX: &str = "appendix.md";

/// Builds the package: package.md, figures/*.svg, package.html, record.json.
///
/// # Errors
/// Template errors with file and line.
pub fn package(record: &Record, sources: &Sources) -> Result<Package, Vec<Diagnostic>> {
    let mut drawings = vec![method()];
    drawings.extend(figures(record));
    let markdown = chapters(record, sources, &drawings).map_err(|problem| vec![problem])?;
    let page = html::page(record, &markdown, &drawings);
    let mut package = Package::new();
    package.insert("package.md".to_owned(), markdown.into_bytes());
    package.insert("package.html".to_owned(), page.into_bytes());
    package.insert("record.json".to_owned(), record.to_json().into_bytes());
    for figure in drawings {
        package.insert(format!("figures/{}.svg", figure.id), figure.svg.into_bytes());
    }
    Ok(package)
}

/// The Markdown of all chapters, numbered.
fn chapters(record: &Record, sources: &Sources, drawings: &[Figure]) -> Result<String, Diagnostic> {
    let context = context::context(record, sources, drawings);
    let renderer = templates::Renderer::new(record, sources, &context);
    let mut numbering = number::Numbering::default();
    let mut out = String::new();
    for (template, numbered) in CHAPTERS {
        out += &numbering.chapter(&renderer.render(template)?, numbered);
        match template {
            "cover.md" => out += &numbering.chapter(cautions::NOTICE, false),
            "deferred.md" => out += &numbering.continued(cautions::CAUTIONS),
            _ => {}
        }
    }
    out += &numbering.chapter(&renderer.render(APPENDIX)?, true);
    Ok(out)
}
