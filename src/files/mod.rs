//! The only module that reads or writes the disk.
//!
//! Invariants
//! - A project is read once, whole, before anything is computed; text has LF line ends.
//! - Nothing outside the project's own folder is read: no `..`, no absolute path, no link out.
//! - Writing is all or nothing: beside the old package, then exchanged by two renames.

use std::collections::BTreeMap;

/// Everything a project brings, read once.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Sources {
    /// Path inside the project folder (`/` between parts) → content; `project.yaml` is always there.
    /// Holds `project.yaml`, `templates/**`, and what later steps add (`narrative/**`, logo).
    pub files: BTreeMap<String, Vec<u8>>,
}

impl Sources {
    /// The project file as text.
    #[must_use]
    pub fn project(&self) -> &str {
        self.text("project.yaml").unwrap_or_default()
    }

    /// A file as text, if it is there and is UTF-8.
    #[must_use]
    pub fn text(&self, path: &str) -> Option<&str> {
        self.files.get(path).and_then(|bytes| std::str::from_utf8(bytes).ok())
    }
}
