//! Writing one file that somebody asked for by its path: a report, a picture for another program.

use std::fs::{self, File};
use std::io::{self, Write as _};
use std::path::{Path, PathBuf};

use super::write::unwritable;
use crate::diagnostic::Diagnostic;

/// Writes a file whole: beside, then renamed over what is there. Folders are made.
///
/// # Errors
/// When the disk refuses, or a folder has the name; what was there stays.
pub fn put(path: &Path, content: &[u8]) -> Result<(), Diagnostic> {
    if path.is_dir() {
        let message = format!("`{}` is a folder: name a file", path.display());
        return Err(Diagnostic::error("cannot-write", message));
    }
    let new = beside(path);
    let written = replace(path, &new, content);
    if written.is_err() {
        // Best effort: the next writing replaces it.
        let _ = fs::remove_file(&new);
    }
    written.map_err(|error| unwritable(path, &error))
}

/// A name of ours in the same folder, so that renaming never crosses file systems.
fn beside(path: &Path) -> PathBuf {
    let name = path.file_name().unwrap_or_default().to_string_lossy();
    path.with_file_name(format!(".{name}.spanfolio-new"))
}

fn replace(path: &Path, new: &Path, content: &[u8]) -> io::Result<()> {
    if let Some(folder) = path.parent().filter(|folder| !folder.as_os_str().is_empty()) {
        fs::create_dir_all(folder)?;
    }
    if fs::symlink_metadata(new).is_ok() {
        fs::remove_file(new)?;
    }
    File::create_new(new)?.write_all(content)?;
    fs::rename(new, path)
}
