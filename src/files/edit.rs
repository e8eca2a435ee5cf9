//! Changing one stretch of `project.yaml`, every other byte kept.

use std::fs::{self, File};
use std::io::{self, Read, Write as _};
use std::ops::Range;
use std::path::Path;

use super::Sources;
use super::gather::{LARGEST_PROJECT, PROJECT, as_text};
use super::write::unwritable;
use crate::diagnostic::Diagnostic;

/// The changed file before it is renamed; the name is ours alone.
const NEW: &str = ".project-new.yaml";

/// Replaces a stretch of the project file in `folder`: `range` counts in the text that `sources` hold.
/// The file is written beside the present one and renamed over it.
///
/// # Errors
/// When the file is not the one that was read, or the disk refuses; it then stays as it was.
pub fn edit(
    folder: &Path,
    sources: &Sources,
    range: &Range<usize>,
    text: &str,
) -> Result<(), Diagnostic> {
    let shown = folder.join(PROJECT);
    let refused = |error: io::Error| unwritable(&shown, &error);
    // A link stays a link: what it leads to is replaced.
    let path = shown.canonicalize().map_err(refused)?;
    let mut raw = String::new();
    File::open(&path)
        .and_then(|file| file.take(LARGEST_PROJECT).read_to_string(&mut raw))
        .map_err(refused)?;
    if as_text(&raw) != sources.project() {
        let message = format!("`{}` was changed by someone else in the meantime", shown.display());
        return Err(Diagnostic::error("cannot-write", message).hint("run again".to_owned()));
    }
    raw.replace_range(raw_offset(&raw, range.start)..raw_offset(&raw, range.end), text);
    let new = path.with_file_name(NEW);
    let written = replace(&path, &new, raw.as_bytes());
    if written.is_err() {
        // Best effort: the next edit removes it as well.
        let _ = fs::remove_file(&new);
    }
    written.map_err(refused)
}

fn replace(path: &Path, new: &Path, content: &[u8]) -> io::Result<()> {
    if fs::symlink_metadata(new).is_ok() {
        fs::remove_file(new)?;
    }
    File::create_new(new)?.write_all(content)?;
    fs::set_permissions(new, fs::metadata(path)?.permissions())?;
    fs::rename(new, path)
}

/// From an offset in the text as read to one in the file, which may have a byte-order mark and CRLF.
fn raw_offset(raw: &str, offset: usize) -> usize {
    let mark = raw.len() - raw.strip_prefix('\u{feff}').unwrap_or(raw).len();
    let bytes = &raw.as_bytes()[mark..];
    let mut left = offset;
    let mut at = 0;
    while left > 0 && at < bytes.len() {
        left -= usize::from(!bytes[at..].starts_with(b"\r\n"));
        at += 1;
    }
    // What begins a line end of two bytes is never the place of a value.
    mark + at
}
