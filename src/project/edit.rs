//! Edits of the project file that keep everything else as it stands.

use std::ops::Range;

use super::written;
use crate::diagnostic::Diagnostic;
use crate::files::Sources;

/// Bytes of `project.yaml` (with LF line ends) and what stands there instead.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Edit {
    pub range: Range<usize>,
    pub text: String,
}

/// The edit that gives a section another designation of the catalogue.
///
/// # Errors
/// When the section is not written as a designation of its own.
pub fn section_edit(
    sources: &Sources,
    section: &str,
    designation: &str,
) -> Result<Edit, Diagnostic> {
    let project: written::Project =
        super::written(sources).map_err(|mut problems| problems.swap_remove(0))?;
    let written = project.sections.get(section).and_then(|section| section.catalogue.as_ref());
    let Some(written) = written else {
        let message = format!("section `{section}` is not written as `catalogue: …`");
        return Err(Diagnostic::error("not-editable", message)
            .hint(format!("write `{section}: {{catalogue: {designation}}}` yourself")));
    };
    let file = sources.project();
    let range = written.range().clone();
    let raw = &file[range.clone()];
    let shared = || {
        Diagnostic::error(
            "not-editable",
            "this designation is shared by an anchor, or written in parts",
        )
        .at(written.place())
        .hint("write it out in this section, then adopt again".to_owned())
    };
    // An alias has the place of its anchor: what stands before tells.
    let before = file[..range.start].trim_end().rsplit([' ', '\n', '{', '[']).next();
    let anchored = before.is_some_and(|word| word.starts_with('&'));
    let quote = raw.chars().next().filter(|c| matches!(c, '"' | '\''));
    let plain = match quote {
        Some(quote) => raw.trim_matches(quote),
        None => raw,
    };
    if anchored || plain != written.as_str() {
        return Err(shared());
    }
    let text = match quote {
        Some(quote) => format!("{quote}{designation}{quote}"),
        None => designation.to_owned(),
    };
    // The file must say the new designation afterwards, and nothing else must have changed.
    let mut edited = file.to_owned();
    edited.replace_range(range.clone(), &text);
    let mut again = sources.clone();
    again.files.insert("project.yaml".to_owned(), edited.into_bytes());
    let read = super::written(&again).map_err(|_| shared())?;
    let now = read.sections.get(section).and_then(|section| section.catalogue.as_ref());
    if now.is_none_or(|now| now.as_str() != designation) {
        return Err(shared());
    }
    Ok(Edit { range, text })
}
