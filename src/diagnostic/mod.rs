//! Problems as values: what is wrong, where, what was expected and what to do.
//!
//! Nothing here prints; `cli` renders diagnostics once, at the edge.

pub mod near;

use std::ops::Range;

/// How serious a problem is.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Severity {
    Error,
    Warning,
}

/// A stretch of one source file.
#[derive(Clone, Debug, PartialEq, Eq, Hash)]
pub struct Place {
    /// Path inside the project folder with `/`, e.g. `project.yaml`.
    pub file: String,
    /// Bytes in the text of that file.
    pub range: Range<usize>,
}

/// One problem.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Diagnostic {
    pub severity: Severity,
    /// Slug of the kind of problem, e.g. `unknown-member`.
    pub code: &'static str,
    /// Starts in lower case, quotes names in backticks, ends without a full stop.
    pub message: String,
    pub place: Option<Place>,
    /// What stands under the underlined text, e.g. `expected a length`.
    pub label: Option<String>,
    /// What to do next.
    pub hints: Vec<String>,
}

impl Diagnostic {
    /// An error without a place.
    #[must_use]
    pub fn error(code: &'static str, message: impl Into<String>) -> Self {
        Self {
            severity: Severity::Error,
            code,
            message: message.into(),
            place: None,
            label: None,
            hints: Vec::new(),
        }
    }

    /// A warning without a place.
    #[must_use]
    pub fn warning(code: &'static str, message: impl Into<String>) -> Self {
        Self { severity: Severity::Warning, ..Self::error(code, message) }
    }

    /// Points to a place.
    #[must_use]
    pub fn at(mut self, place: impl Into<Option<Place>>) -> Self {
        self.place = place.into();
        self
    }

    /// Text under the underlined place.
    #[must_use]
    pub fn label(mut self, label: impl Into<String>) -> Self {
        self.label = Some(label.into());
        self
    }

    /// Adds a hint when there is one.
    #[must_use]
    pub fn hint(mut self, hint: impl Into<Option<String>>) -> Self {
        self.hints.extend(hint.into());
        self
    }
}
