//! Which rows of a package changed, by keys of words.

use std::collections::BTreeSet;

use super::{Changes, ItemKind, ValueChange, What, translate, values};
use crate::record::Record;

/// Keys of everything that changed:
///
/// | key | what |
/// | --- | --- |
/// | kind, name | a thing of the project file, kind as in [`ItemKind::word`] |
/// | `check`, id | a check anywhere; `check`, id, on: at one place |
/// | `effect`, member, span, purpose, effect | a governing value, span empty for the whole member; with `greatest` or `least` before the effect: one of both |
/// | `reaction`, node, purpose, `greatest Z` | a governing reaction |
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Marks {
    keys: BTreeSet<Vec<String>>,
}

impl Marks {
    /// Marks for the package of the new side.
    #[must_use]
    pub fn new(old: &Record, new: &Record, changes: &Changes) -> Self {
        let mut marks = Self::default();
        for item in &changes.input {
            marks.add(&[item.kind.word(), &item.name]);
            // A load stands in the table of its case, a support with its node.
            if item.kind == ItemKind::Support {
                marks.add(&[ItemKind::Node.word(), &item.name]);
            }
        }
        for one in &changes.renamed {
            marks.add(&[one.kind.word(), &one.new]);
        }
        for check in changes.checks.iter().filter(|check| check.what != What::Vanished) {
            marks.add(&["check", &check.id]);
            marks.add(&["check", &check.id, &check.on_words]);
        }
        let before = translate::translated(old, &changes.renamed);
        let wholes = values::wholes(&before, new, &changes.thresholds);
        for change in changes.values.iter().chain(&wholes) {
            let span = change.span.map(|span| span.to_string()).unwrap_or_default();
            let of = |what: &str| {
                ["effect", &change.on, &span, &change.purpose, what].map(str::to_owned)
            };
            marks.keys.insert(of(&change.effect).to_vec());
            marks.keys.insert(of(&which(change)).to_vec());
        }
        for change in &changes.reactions {
            marks.add(&["reaction", &change.on, &change.purpose, &which(change)]);
        }
        marks
    }

    fn add(&mut self, key: &[&str]) {
        self.keys.insert(key.iter().map(|word| (*word).to_owned()).collect());
    }

    /// The row that a key means changed.
    #[must_use]
    pub fn has(&self, key: &[String]) -> bool {
        self.keys.contains(key)
    }
}

/// `greatest M_y`, as rows of a package say it.
fn which(change: &ValueChange) -> String {
    let which = if change.which == "max" { "greatest" } else { "least" };
    format!("{which} {}", change.effect)
}
