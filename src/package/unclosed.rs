//! A chapter that would not end where its text ends.
//!
//! A fence, a comment or an element that is not closed takes every chapter behind it into itself, the
//! cautions with them.

use pulldown_cmark::{Event, HeadingLevel, Options, Parser, Tag};

use crate::diagnostic::{Diagnostic, Place};
use crate::files::Sources;

/// Stands behind the chapter in a trial reading.
const NEXT: &str = "\n\n# next\n";

/// What is open at the end of a chapter, at its place in the project's own file where that shows it.
pub(super) fn problem(chapter: &str, template: &str, sources: &Sources) -> Option<Diagnostic> {
    let text = format!("{chapter}{NEXT}");
    let heading = text.len() - NEXT.trim_start().len();
    let options = Options::ENABLE_TABLES | Options::ENABLE_MATH | Options::ENABLE_FOOTNOTES;
    // Where the last block that is no part of another begins.
    let mut last = 0;
    let mut depth = 0_usize;
    for (event, range) in Parser::new_ext(&text, options).into_offset_iter() {
        match event {
            Event::Start(Tag::Heading { level: HeadingLevel::H1, .. })
                if range.start == heading && depth == 0 =>
            {
                return None;
            }
            Event::Start(_) => {
                if depth == 0 {
                    last = range.start;
                }
                depth += 1;
            }
            Event::End(_) => depth = depth.saturating_sub(1),
            _ => {}
        }
    }
    let opening = chapter.get(last..)?.lines().next().unwrap_or_default();
    let message = format!("what begins with `{opening}` is not closed in the chapter");
    let place =
        [template.to_owned(), format!("templates/{template}")].into_iter().find_map(|file| {
            let start = sources.text(&file)?.rfind(opening)?;
            Some(Place { file, range: start..start + opening.len() })
        });
    Some(
        Diagnostic::error("unclosed-block", message)
            .at(place)
            .hint("close it: what follows would vanish in it".to_owned()),
    )
}
