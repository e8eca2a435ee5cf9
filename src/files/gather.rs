//! What belongs to a project and how much of it is read, whether it comes from the disk or from a revision.

use super::Sources;
use crate::diagnostic::Diagnostic;

/// Bytes in `project.yaml`.
pub const LARGEST_PROJECT: u64 = 8 << 20;
/// Bytes in any other file.
pub const LARGEST_FILE: u64 = 1 << 20;
/// Bytes in a package's record.
pub(super) const LARGEST_RECORD: u64 = 256 << 20;
/// Files of a project, `project.yaml` included.
pub const MOST_FILES: usize = 500;
/// Folders inside each other below the project's own.
pub(super) const DEEPEST: usize = 8;

pub(super) const PROJECT: &str = "project.yaml";
/// The record inside a package.
pub(super) const RECORD: &str = "record.json";
/// Folders read whole, apart from what [`is_hidden`] says.
pub(super) const FOLDERS: [&str; 3] = ["checks", "narrative", "templates"];

/// Whether a file or folder below one of [`FOLDERS`] is passed over.
pub(super) fn is_hidden(part: &str) -> bool {
    part.starts_with('.')
}

/// The files read so far, and what kept others from being read.
#[derive(Default)]
pub(super) struct Gathered {
    pub(super) sources: Sources,
    pub(super) problems: Vec<Diagnostic>,
}

impl Gathered {
    /// Whether one more file may be read; if not, that is said once, since the walk goes on over what may
    /// be a large folder.
    pub(super) fn has_room_for(&mut self, name: &str) -> bool {
        let room = self.sources.files.len() < MOST_FILES;
        if !room && self.problems.iter().all(|problem| problem.code != "too-many-files") {
            let message = format!("a project has at most {MOST_FILES} files, `{name}` is one more");
            self.problems.push(Diagnostic::error("too-many-files", message));
        }
        room
    }

    /// Keeps a file under the name it has inside the project.
    pub(super) fn add(&mut self, name: &str, text: Result<String, Diagnostic>) {
        match text {
            Ok(text) => {
                self.sources.files.insert(name.to_owned(), text.into_bytes());
            }
            Err(problem) => self.problems.push(problem),
        }
    }

    pub(super) fn end(self) -> Result<Sources, Vec<Diagnostic>> {
        if self.problems.is_empty() { Ok(self.sources) } else { Err(self.problems) }
    }
}

/// The content of a file as text; `shown` names it in messages.
pub(super) fn text(bytes: Vec<u8>, shown: &str) -> Result<String, Diagnostic> {
    let text = String::from_utf8(bytes).map_err(|error| not_text(shown, &error))?;
    Ok(as_text(&text))
}

/// The text of a file: without byte-order mark, line ends LF.
pub(super) fn as_text(raw: &str) -> String {
    raw.strip_prefix('\u{feff}').unwrap_or(raw).replace("\r\n", "\n")
}

pub(super) fn too_large(shown: &str, limit: u64) -> Diagnostic {
    Diagnostic::error("too-large", format!("`{shown}` is larger than {} MiB", limit >> 20))
}

pub(super) fn too_deep(shown: &str) -> Diagnostic {
    Diagnostic::error("too-deep", format!("`{shown}` is more than {DEEPEST} folders deep"))
}

pub(super) fn unreadable(shown: &str, reason: &str) -> Diagnostic {
    Diagnostic::error("cannot-read", format!("cannot read `{shown}`: {reason}"))
}

/// Names line and column of the first byte that is not UTF-8.
pub(super) fn not_text(shown: &str, error: &std::string::FromUtf8Error) -> Diagnostic {
    let good = &error.as_bytes()[..error.utf8_error().valid_up_to()];
    let good = String::from_utf8_lossy(good);
    let line = good.matches('\n').count() + 1;
    let column = good.rsplit('\n').next().unwrap_or_default().chars().count() + 1;
    let place = format!("`{shown}` is not UTF-8 at line {line}, column {column}");
    Diagnostic::error("not-text", place).hint("save the file as UTF-8 text".to_owned())
}
