//! Ids of the page, each given once.

use std::collections::BTreeSet;

use crate::figures::Figure;

/// Ids that are given, and those that headings must leave alone because figures and footnotes may get them.
pub(super) struct Ids {
    reserved: BTreeSet<String>,
    given: BTreeSet<String>,
}

impl Ids {
    pub(super) fn new(drawings: &[Figure], notes: usize) -> Self {
        let mut reserved = BTreeSet::new();
        for Figure { id, .. } in drawings {
            reserved.extend([figure(id), format!("{id}-title"), format!("{id}-desc")]);
        }
        for number in 1..=notes {
            reserved.extend([note(number), mark(number)]);
        }
        Self { reserved, given: BTreeSet::new() }
    }

    /// The id of a heading with this slug: where it is taken, `-1`, `-2`, … follow, as on the usual git hosts.
    pub(super) fn heading(&mut self, slug: String) -> String {
        // A heading of signs alone has no slug, and an id may not be empty.
        let base = if slug.is_empty() { "heading".to_owned() } else { slug };
        let mut id = base.clone();
        let mut count = 0;
        while self.reserved.contains(&id) || !self.give(id.clone()) {
            count += 1;
            id = format!("{base}-{count}");
        }
        id
    }

    /// Gives an id; false if something in the page has it.
    pub(super) fn give(&mut self, id: String) -> bool {
        self.given.insert(id)
    }

    pub(super) fn has(&self, id: &str) -> bool {
        self.given.contains(id)
    }
}

/// The id of a drawing of the package.
pub(super) fn figure(id: &str) -> String {
    format!("figure-{id}")
}

/// The id of a footnote.
pub(super) fn note(number: usize) -> String {
    format!("note-{number}")
}

/// The id of the first reference to a footnote.
pub(super) fn mark(number: usize) -> String {
    format!("note-{number}-mark")
}
