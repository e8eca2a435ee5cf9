//! Numbers of footnotes.
//!
//! Numbers run through the page in order of first reference. A label counts within its chapter, since chapters
//! come from files of their own and each may begin with `[^1]`; where its chapter does not define it, the first
//! chapter that does so counts.

use pulldown_cmark::{Event, HeadingLevel, Tag};

/// Numbers for references and definitions, each in the order in which they stand.
pub(super) struct Notes {
    references: std::vec::IntoIter<Option<usize>>,
    definitions: std::vec::IntoIter<Option<usize>>,
    pub(super) count: usize,
}

impl Notes {
    pub(super) fn new(events: &[Event<'_>]) -> Self {
        let mut chapter = 0;
        let mut references = Vec::new();
        let mut definitions = Vec::new();
        for event in events {
            match event {
                Event::Start(Tag::Heading { level: HeadingLevel::H1, .. }) => chapter += 1,
                Event::FootnoteReference(label) => references.push((chapter, label.to_lowercase())),
                Event::Start(Tag::FootnoteDefinition(label)) => {
                    definitions.push((chapter, label.to_lowercase()));
                }
                _ => {}
            }
        }
        let mut numbers = vec![None; definitions.len()];
        let mut count = 0;
        let mut number = |reference: &(usize, String)| {
            let own = definitions.iter().position(|definition| definition == reference);
            let other = || definitions.iter().position(|(_, label)| *label == reference.1);
            let index = own.or_else(other)?;
            Some(*numbers[index].get_or_insert_with(|| {
                count += 1;
                count
            }))
        };
        let references: Vec<Option<usize>> = references.iter().map(&mut number).collect();
        Self { references: references.into_iter(), definitions: numbers.into_iter(), count }
    }

    /// The number of the next reference.
    pub(super) fn reference(&mut self) -> Option<usize> {
        self.references.next().flatten()
    }

    /// The number of the next definition; none if nothing refers to it.
    pub(super) fn definition(&mut self) -> Option<usize> {
        self.definitions.next().flatten()
    }
}
