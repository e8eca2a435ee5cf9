//! Problems as text: the line of the file underlined, what was expected, what to do.

use std::path::Path;

use annotate_snippets::{AnnotationKind, Group, Level, Renderer, Snippet};

use crate::diagnostic::{Diagnostic, Severity};
use crate::files::Sources;

/// Most problems printed in full; a file that is wrong throughout needs no more.
const MOST: usize = 50;

/// Prints problems to stderr, and how many there are when there are several.
pub(super) fn print(problems: &[Diagnostic], folder: &Path, sources: Option<&Sources>) {
    for problem in problems.iter().take(MOST) {
        anstream::eprintln!("{}\n", render(problem, folder, sources));
    }
    let count =
        |severity: Severity| problems.iter().filter(|problem| problem.severity == severity).count();
    let (errors, warnings) = (count(Severity::Error), count(Severity::Warning));
    let said = |number: usize, word: &str| match number {
        0 => None,
        1 => Some(format!("1 {word}")),
        many => Some(format!("{many} {word}s")),
    };
    if problems.len() > 1 {
        let both: Vec<String> =
            [said(errors, "error"), said(warnings, "warning")].into_iter().flatten().collect();
        let left_out = match problems.len().saturating_sub(MOST) {
            0 => String::new(),
            more => format!(", {more} of them not shown"),
        };
        anstream::eprintln!("{}{left_out}", both.join(", "));
    }
}

fn render(problem: &Diagnostic, folder: &Path, sources: Option<&Sources>) -> String {
    let level = match problem.severity {
        Severity::Error => Level::ERROR,
        Severity::Warning => Level::WARNING,
    };
    let title = level.primary_title(&problem.message).id(problem.code);
    let place = problem.place.as_ref();
    let text = place.and_then(|place| sources.and_then(|sources| sources.text(&place.file)));
    let path = place.map(|place| folder.join(&place.file).display().to_string());
    let mut group = match (place, text, path) {
        (Some(place), Some(text), Some(path)) => {
            let start = place.range.start.min(text.len());
            let end = place.range.end.clamp(start, text.len());
            // One line is enough to find a place; a block of many would bury the message.
            let end = text[start..end].find('\n').map_or(end, |offset| start + offset);
            let mut annotation = AnnotationKind::Primary.span(start..end);
            if let Some(label) = &problem.label {
                annotation = annotation.label(label.as_str());
            }
            Group::with_title(title)
                .element(Snippet::source(text).path(path).annotation(annotation))
        }
        _ => Group::with_title(title),
    };
    if (place.is_none() || text.is_none())
        && let Some(label) = &problem.label
    {
        group = group.element(Level::NOTE.message(label.as_str()));
    }
    for hint in &problem.hints {
        group = group.element(Level::HELP.message(hint.as_str()));
    }
    Renderer::styled().render(&[group])
}
