//! (Record, Sources) → Package: chapters by templates, Markdown, one self-contained HTML page.
//!
//! Invariants
//! - Templates look up, format and place; no value is defined and no outcome changed here.
//! - Whatever comes from the project's YAML is escaped unless a template says otherwise, and HTML in it
//!   never reaches the page.
//! - The notice of responsibility and the cautions are added after rendering: no template turns them off.
//! - The page loads nothing from elsewhere and runs no script; its content security policy says so.

mod against;
mod anchor;
mod cautions;
mod comparison;
mod context;
mod data_uri;
mod html;
mod links;
mod look_up;
mod markdown;
mod math;
mod narrative;
mod number;
mod steps;
mod templates;
mod unclosed;

use std::collections::BTreeMap;

pub use against::Against;
pub use comparison::{comparison_markdown, comparison_page};
pub use markdown::escaped as escaped_markdown;

use crate::compare::{Changes, Marks};
use crate::diagnostic::{Diagnostic, Place};
use crate::figures::{self, Figure, figures, method};
use crate::files::Sources;
use crate::record::Record;

/// Relative path (`/` between parts) → bytes.
pub type Package = BTreeMap<String, Vec<u8>>;

/// Chapters in order: template, and whether its heading is numbered.
const CHAPTERS: [(&str, bool); 10] = [
    ("cover.md", false),
    ("summary.md", true),
    ("basis.md", true),
    ("model.md", true),
    ("actions.md", true),
    ("combinations.md", true),
    ("effects.md", true),
    ("checks.md", true),
    ("self-check.md", true),
    ("deferred.md", true),
];
/// What changed, in a package that is held against an earlier revision.
const CHANGES: &str = "changes.md";
/// Stands before the mark of the revision in rows that changed.
const MARK: char = '▲';
/// The last chapter stands apart: nothing is added behind it.
const APPENDIX: &str = "appendix.md";

/// A comparison with its drawings.
struct Comparison {
    changes: Changes,
    marks: Marks,
    figures: Vec<Figure>,
}

impl Comparison {
    fn new(against: &Against, record: &Record, sources: &Sources) -> Self {
        let changes = against.changes(record, sources);
        let marks = Marks::new(against.record(), record, &changes);
        let figures = figures::comparison(against.record(), record, &changes);
        Self { changes, marks, figures }
    }
}

/// Builds the package: package.md, figures/*.svg, package.html, record.json; held against an earlier
/// revision, also marks on changed rows, a chapter of changes, and that revision's files in `against/`.
///
/// # Errors
/// Template errors with file and line.
pub fn package(
    record: &Record,
    sources: &Sources,
    against: Option<&Against>,
) -> Result<Package, Vec<Diagnostic>> {
    let comparison = against.map(|against| Comparison::new(against, record, sources));
    let mut drawings = vec![method()];
    drawings.extend(figures(record));
    drawings.extend(comparison.iter().flat_map(|comparison| comparison.figures.clone()));
    let markdown = chapters(record, sources, &drawings, comparison.as_ref())?;
    let (page, missing) = html::page(record, &markdown, &drawings);
    if !missing.is_empty() {
        let problem = |id: &String| {
            Diagnostic::error(
                "unknown-link",
                format!("a link leads to `#{id}`, which is not there"),
            )
            .at(place_of_link(id, sources))
        };
        return Err(missing.iter().map(problem).collect());
    }
    let mut package = against.map(Against::files).unwrap_or_default();
    package.insert("package.md".to_owned(), markdown.into_bytes());
    package.insert("package.html".to_owned(), page.into_bytes());
    package.insert("record.json".to_owned(), record.to_json().into_bytes());
    for figure in drawings {
        package.insert(format!("figures/{}.svg", figure.id), figure.svg.into_bytes());
    }
    Ok(package)
}

/// Where the project's own text has a link to an id, in its first file that has one.
fn place_of_link(id: &str, sources: &Sources) -> Option<Place> {
    let link = format!("](#{id})");
    let own = |path: &&String| path.starts_with("narrative/") || path.starts_with("templates/");
    sources.files.keys().filter(own).find_map(|path| {
        let start = sources.text(path)?.find(&link)? + "](".len();
        Some(Place { file: path.clone(), range: start..start + 1 + id.len() })
    })
}

/// The Markdown of all chapters, numbered, links led to their places.
fn chapters(
    record: &Record,
    sources: &Sources,
    drawings: &[Figure],
    comparison: Option<&Comparison>,
) -> Result<String, Vec<Diagnostic>> {
    let context = context::context(record, sources, drawings, comparison);
    let marks = comparison.map(|comparison| comparison.marks.clone());
    let renderer = templates::Renderer::new(record, sources, &context, marks);
    let ids = drawings.iter().map(|figure| figure.id.as_str());
    let mut targets = links::Targets::new(record, ids);
    let names: Vec<&str> = CHAPTERS
        .iter()
        .map(|(template, _)| *template)
        .chain([APPENDIX])
        .map(|template| template.trim_end_matches(".md"))
        .chain(record.narrative.iter().map(|narrative| narrative.file.as_str()))
        .collect();
    let mut problems = targets.problems(sources, &names);
    let mut numbering = number::Numbering::default();
    let mut out = String::new();
    let mut add = |out: &mut String, name: &str, template: &str, numbered: bool| {
        match renderer.render(template) {
            Ok(text) => {
                problems.extend(unclosed::problem(&text, template, sources));
                let chapter = numbering.chapter(&text, numbered);
                if let Some(heading) = chapter.lines().find_map(|line| line.strip_prefix("# ")) {
                    targets.chapter(name, heading);
                }
                *out += &chapter;
            }
            Err(problem) => problems.push(problem),
        }
        match template {
            "cover.md" => *out += &numbering.chapter(cautions::NOTICE, false),
            "deferred.md" => *out += &numbering.continued(cautions::CAUTIONS),
            _ => {}
        }
    };
    for (template, numbered) in CHAPTERS {
        let name = template.trim_end_matches(".md");
        add(&mut out, name, template, numbered);
        for narrative in record.narrative.iter().filter(|narrative| narrative.after == name) {
            add(&mut out, &narrative.file, &narrative.file, true);
        }
    }
    if comparison.is_some() {
        add(&mut out, "changes", CHANGES, true);
    }
    add(&mut out, "appendix", APPENDIX, true);
    if problems.is_empty() { Ok(targets.resolved(&out)) } else { Err(problems) }
}
