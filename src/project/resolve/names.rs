//! Names: what they may look like, and that none is given twice.

use std::collections::BTreeMap;

use unicode_normalization::is_nfc;

use super::reader::Reader;
use crate::diagnostic::{Diagnostic, Place};
use crate::project::text::Text;

/// Longest name, characters.
const LONGEST: usize = 40;

/// Names of one kind, case ignored.
#[derive(Debug, Default)]
pub(super) struct Names {
    taken: BTreeMap<String, String>,
}

impl Names {
    /// Takes a name; says whether it can be used.
    pub(super) fn take(&mut self, reader: &mut Reader, name: &Text, what: &str) -> bool {
        self.take_plain(reader, name, name.place(), what)
    }

    /// Takes a name that stands at a place of any file.
    pub(super) fn take_plain(
        &mut self,
        reader: &mut Reader,
        name: &str,
        place: Place,
        what: &str,
    ) -> bool {
        if let Some(problem) = wrong(name) {
            reader.problem(
                Diagnostic::error("name", format!("`{name}` cannot be the name of a {what}: {problem}"))
                    .at(place)
                    .hint(
                        "begin with a letter or digit, go on with letters, digits, `_`, `.`, `-` and spaces, at most 40"
                            .to_owned(),
                    ),
            );
            return false;
        }
        let lower = name.to_lowercase();
        if let Some(other) = self.taken.get(&lower) {
            let message = if other == name {
                format!("the name `{name}` is given twice")
            } else {
                format!("the name `{name}` differs from `{other}` in case only")
            };
            reader.error("duplicate-name", message, place);
            return false;
        }
        self.taken.insert(lower, name.to_owned());
        true
    }
}

fn wrong(name: &str) -> Option<&'static str> {
    let allowed = |c: char| c.is_alphanumeric() || matches!(c, '_' | '.' | '-' | ' ');
    if !name.chars().next().is_some_and(char::is_alphanumeric) {
        Some("it does not begin with a letter or a digit")
    } else if !name.chars().all(allowed) {
        Some("it holds a character that names cannot have")
    } else if name.ends_with(' ') {
        Some("it ends with a space")
    } else if name.chars().count() > LONGEST {
        Some("it is longer than 40 characters")
    } else if !is_nfc(name) {
        Some("it is not in Unicode normal form C")
    } else {
        None
    }
}
