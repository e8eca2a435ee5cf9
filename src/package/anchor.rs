//! Where links inside the package lead.
//!
//! A link is written to a thing, `[text](#check:B1-bending)`, and led to its place once headings have their
//! numbers; an empty text is filled in. Ids of headings are made as the usual git hosts make them, so that the
//! same link works in the Markdown and in the page.

use unicode_normalization::char::is_combining_mark;

/// The id that a heading gets: lower case, spaces to hyphens, everything but letters with their marks, digits,
/// `-` and `_` left out; `²` and `½` are no digits.
pub(super) fn anchor(heading: &str) -> String {
    let mut out = String::new();
    for c in heading.trim().chars() {
        match c {
            ' ' => out.push('-'),
            '-' | '_' => out.push(c),
            c if c.is_alphabetic() || c.is_ascii_digit() || is_combining_mark(c) => {
                out.extend(c.to_lowercase());
            }
            _ => {}
        }
    }
    out
}

/// Text of the heading of a check.
pub(super) fn check_heading(id: &str, title: &str) -> String {
    format!("{id}: {title}")
}

/// What a link to a check is written as; blanks would end a link.
pub(super) fn check_target(id: &str) -> String {
    format!("#check:{}", id.replace(' ', "%20"))
}
