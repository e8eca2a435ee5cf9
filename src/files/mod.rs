//! The only module that reads or writes the disk or asks git.
//!
//! Invariants
//! - A project is read once, whole, before anything is computed; text has LF line ends and no byte-order
//!   mark.
//! - Nothing outside the project's own folder is read: no `..`, no absolute path, no link out.
//! - Writing is all or nothing: beside the old package, then exchanged by two renames; a changed project
//!   file or a report likewise by one.

mod committed;
mod edit;
mod find;
mod gather;
mod git;
mod put;
mod read;
mod write;

use std::collections::BTreeMap;
use std::io;

pub use committed::committed;
pub use edit::edit;
pub use find::{Found, projects};
pub use gather::{LARGEST_FILE, LARGEST_PROJECT, MOST_FILES};
pub use git::{AtRevision, read_at, uncommitted};
pub use put::put;
pub use read::{committed_record, folder, read, record};
pub use write::{CONTENTS, PACKAGE, contents, create, digest, heal, write};

use sha2::{Digest, Sha256};

/// Everything a project brings, read once.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Sources {
    /// Path inside the project folder (`/` between parts) → content; `project.yaml` is always there.
    /// Holds `project.yaml`, `checks/**`, `narrative/**` and `templates/**`.
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

    /// SHA-256 in hexadecimal over every path and content in order of path, each led by its length in
    /// bytes (64 bits, least significant byte first), so that no two sets of files read alike.
    #[must_use]
    pub fn fingerprint(&self) -> String {
        let mut hash = Sha256::new();
        for (path, content) in &self.files {
            for part in [path.as_bytes(), content] {
                hash.update((part.len() as u64).to_le_bytes());
                hash.update(part);
            }
        }
        hexadecimal(&hash.finalize())
    }
}

fn hexadecimal(bytes: &[u8]) -> String {
    bytes.iter().map(|byte| format!("{byte:02x}")).collect()
}

/// The system's words for a failure in the style of our messages: lower case, without its number.
fn reason(error: &io::Error) -> String {
    let text = error.to_string();
    let text = text.split(" (os error").next().unwrap_or_default();
    let mut chars = text.chars();
    chars.next().map(|first| first.to_lowercase().chain(chars).collect()).unwrap_or_default()
}
