//! Another designation of the catalogue for one section: in memory for a trial, in the file to keep.

use std::ops::Range;

use super::near::nearest;
use super::text::{FILE, Text};
use super::tree::{Kind, Node};
use super::{resolve, tree, written};
use crate::diagnostic::Diagnostic;
use crate::files::Sources;
use crate::model::Model;

/// A change of one stretch of `project.yaml`, counted in the text as [`Sources`] holds it.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Edit {
    pub range: Range<usize>,
    pub text: String,
}

impl Edit {
    /// The sources with this change made.
    #[must_use]
    pub fn apply(&self, sources: &Sources) -> Sources {
        let mut content = sources.project().to_owned();
        content.replace_range(self.range.clone(), &self.text);
        let mut out = sources.clone();
        out.files.insert(FILE.to_owned(), content.into_bytes());
        out
    }
}

/// The section of a name, as written.
///
/// # Errors
/// When there is none, with the nearest name.
pub fn section<'p>(
    project: &'p written::Project,
    name: &str,
) -> Result<(&'p Text, &'p written::Section), Diagnostic> {
    project.sections.get_key_value(name).ok_or_else(|| {
        let near = nearest(name, project.sections.keys().map(Text::as_str));
        let names: Vec<String> = project.sections.keys().map(|name| format!("`{name}`")).collect();
        Diagnostic::error("unknown-section", format!("no section named `{name}` in the project"))
            .hint(match near {
                Some(near) => format!("did you mean `{near}`?"),
                None => format!("the sections are {}", names.join(", ")),
            })
    })
}

/// Resolves the project again with a designation of the catalogue in place of one section, so that
/// self-weight and all else that follows from the section follows from the new one. Places in messages
/// are those of the section as written.
///
/// # Errors
/// An unknown section, or every problem of the project with that designation.
pub fn with_section(
    project: &written::Project,
    sources: &Sources,
    name: &str,
    designation: &str,
) -> Result<Model, Vec<Diagnostic>> {
    let (key, present) = section(project, name).map_err(|problem| vec![problem])?;
    let range = present.catalogue.as_ref().unwrap_or(key).range().clone();
    let designation = Text::new(designation.to_owned(), range);
    let replaced = written::Section { catalogue: Some(designation), ..written::Section::default() };
    let mut project = project.clone();
    project.sections.insert(key.clone(), replaced);
    resolve::resolve(&project, sources).map(|(model, _)| model)
}

/// The change of the file that gives a section another designation and leaves every other byte.
///
/// # Errors
/// When the section is no designation of the catalogue, or its text cannot be changed alone.
pub fn section_edit(
    sources: &Sources,
    name: &str,
    designation: &str,
) -> Result<Edit, Vec<Diagnostic>> {
    let project = written(sources)?;
    let one = |problem: Diagnostic| vec![problem];
    let (key, section) = section(&project, name).map_err(one)?;
    let by_hand = || format!("write `catalogue: {designation}` there by hand");
    let Some(present) = &section.catalogue else {
        let message = format!("section `{name}` is not written as a designation of the catalogue");
        return Err(one(Diagnostic::error("not-adopted", message).at(key.place()).hint(by_hand())));
    };
    let refused = |message: String| {
        one(Diagnostic::error("not-adopted", message).at(present.place()).hint(by_hand()))
    };
    let content = sources.project();
    let range = present.range().clone();
    if count(&tree::read(content)?, &range) > 1 {
        let message = format!("the designation of section `{name}` is shared through an alias");
        return Err(refused(message));
    }
    let text = rewritten(&content[range.clone()], present, designation).ok_or_else(|| {
        refused(format!("the designation of section `{name}` is not on one line"))
    })?;
    let edit = Edit { range, text };
    let reads = written(&edit.apply(sources)).ok().and_then(|edited| {
        let (_, section) = self::section(&edited, name).ok()?;
        section.catalogue.clone()
    });
    if reads.is_none_or(|text| text.as_str() != designation) {
        return Err(refused(format!("the file would not say `{designation}` after the change")));
    }
    Ok(edit)
}

/// A designation in the quotes of the present one, or in quotes where it cannot stand without; `None`
/// where the present one is neither plain nor quoted on one line.
fn rewritten(present: &str, says: &str, designation: &str) -> Option<String> {
    let quote = present.chars().next().filter(|c| matches!(c, '"' | '\''));
    if present.contains('\n') {
        return None;
    }
    match quote {
        Some(quote) if present.len() > 1 && present.ends_with(quote) => {
            Some(format!("{quote}{designation}{quote}"))
        }
        None if present == says => {
            let plain = |c: char| c.is_alphanumeric() || matches!(c, ' ' | '.' | '/' | '-' | '×');
            let safe = designation.starts_with(char::is_alphanumeric)
                && designation.chars().all(plain)
                && !designation.ends_with(' ');
            Some(if safe { designation.to_owned() } else { format!("\"{designation}\"") })
        }
        _ => None,
    }
}

/// How often the value or key of these bytes occurs, aliases expanded.
fn count(node: &Node, range: &Range<usize>) -> usize {
    match &node.kind {
        Kind::Empty => 0,
        Kind::Leaf(_) => usize::from(node.range == *range),
        Kind::List(items) => items.iter().map(|item| count(item, range)).sum(),
        Kind::Map(entries) => entries
            .iter()
            .map(|(key, value)| usize::from(key.range() == range) + count(value, range))
            .sum(),
    }
}
