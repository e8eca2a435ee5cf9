//! Reading a project, jailed in its folder.

use std::fs::{self, File};
use std::io::Read;
use std::path::{Path, PathBuf};

use super::gather::{
    DEEPEST, FOLDERS, Gathered, LARGEST_FILE, LARGEST_PROJECT, LARGEST_RECORD, PROJECT, RECORD,
    is_hidden, not_text, text, too_deep, too_large,
};
use super::{PACKAGE, Sources, gather, reason};
use crate::diagnostic::Diagnostic;

/// The folder of a project that is given as its folder or as its `project.yaml`.
#[must_use]
pub fn folder(path: &Path) -> PathBuf {
    let named = path.file_name().is_some_and(|name| name == PROJECT) && !path.is_dir();
    match path.parent() {
        Some(parent) if named && parent.as_os_str().is_empty() => PathBuf::from("."),
        Some(parent) if named => parent.to_owned(),
        _ => path.to_owned(),
    }
}

/// Reads a project: `project.yaml` and everything under `checks/`, `narrative/` and `templates/`.
///
/// # Errors
/// Everything that cannot be read: missing, too large, outside the folder, not text.
pub fn read(path: &Path) -> Result<Sources, Vec<Diagnostic>> {
    gather(&folder(path)).map_err(|problem| vec![problem])?.end()
}

/// Reads what can be read of the project in `folder`.
pub(super) fn gather(folder: &Path) -> Result<Gathered, Diagnostic> {
    let mut reader = Reader::new(folder)?;
    reader.file(&folder.join(PROJECT), PROJECT, LARGEST_PROJECT);
    for name in FOLDERS {
        let inside = folder.join(name);
        if fs::symlink_metadata(&inside).is_ok() {
            reader.folder(&inside, name, 0);
        }
    }
    Ok(reader.gathered)
}

struct Reader {
    /// The project's folder without links; nothing outside it is opened.
    jail: PathBuf,
    gathered: Gathered,
}

impl Reader {
    fn new(folder: &Path) -> Result<Self, Diagnostic> {
        let shown = folder.display();
        let start = || Some("`spanfolio start FOLDER` sets up a new project".to_owned());
        if !folder.exists() {
            let message = format!("there is no folder `{shown}`");
            return Err(Diagnostic::error("missing-project", message).hint(start()));
        }
        if !folder.is_dir() {
            let message = format!("`{shown}` is not a project folder nor a `{PROJECT}`");
            return Err(Diagnostic::error("missing-project", message));
        }
        if fs::symlink_metadata(folder.join(PROJECT)).is_err() {
            let message = format!("there is no `{PROJECT}` in `{shown}`");
            return Err(Diagnostic::error("missing-project", message).hint(start()));
        }
        let jail = folder.canonicalize().map_err(|e| unreadable(folder, &reason(&e)))?;
        Ok(Self { jail, gathered: Gathered::default() })
    }

    /// Reads one file to the name it has in [`Sources`].
    fn file(&mut self, path: &Path, name: &str, limit: u64) {
        if self.gathered.has_room_for(name) {
            self.gathered.add(name, self.content(path, limit));
        }
    }

    fn folder(&mut self, path: &Path, name: &str, depth: usize) {
        if let Err(problem) = self.inside(path) {
            return self.problem(problem);
        }
        if depth == DEEPEST {
            return self.problem(too_deep(&path.display().to_string()));
        }
        let entries = fs::read_dir(path).and_then(Iterator::collect::<Result<Vec<_>, _>>);
        let mut entries = match entries {
            Ok(entries) => entries,
            Err(error) => return self.problem(unreadable(path, &reason(&error))),
        };
        entries.sort_by_key(fs::DirEntry::file_name);
        for entry in entries {
            let path = entry.path();
            let Some(part) = entry.file_name().to_str().map(str::to_owned) else {
                self.problem(unreadable(&path, "its name is not UTF-8"));
                continue;
            };
            if is_hidden(&part) {
                continue;
            }
            let name = format!("{name}/{part}");
            if path.is_dir() {
                self.folder(&path, &name, depth + 1);
            } else {
                self.file(&path, &name, LARGEST_FILE);
            }
        }
    }

    fn problem(&mut self, problem: Diagnostic) {
        self.gathered.problems.push(problem);
    }

    /// Refuses what leads out of the project's folder.
    fn inside(&self, path: &Path) -> Result<PathBuf, Diagnostic> {
        let real = path.canonicalize().map_err(|error| unreadable(path, &reason(&error)))?;
        if real.starts_with(&self.jail) {
            return Ok(real);
        }
        let message = format!("`{}` is a link out of the project's folder", path.display());
        Err(Diagnostic::error("outside-project", message)
            .hint("put the file itself into the folder".to_owned()))
    }

    fn content(&self, path: &Path, limit: u64) -> Result<String, Diagnostic> {
        let real = self.inside(path)?;
        if !real.is_file() {
            return Err(unreadable(path, "it is not a file"));
        }
        let mut bytes = Vec::new();
        File::open(&real)
            .and_then(|file| file.take(limit + 1).read_to_end(&mut bytes))
            .map_err(|error| unreadable(path, &reason(&error)))?;
        let shown = path.display().to_string();
        if bytes.len() as u64 > limit {
            return Err(too_large(&shown, limit));
        }
        text(bytes, &shown)
    }
}

/// Reads a record file.
///
/// # Errors
/// When it cannot be read, is too large or is not text.
pub fn record(path: &Path) -> Result<String, Diagnostic> {
    let mut bytes = Vec::new();
    File::open(path)
        .and_then(|file| file.take(LARGEST_RECORD + 1).read_to_end(&mut bytes))
        .map_err(|error| unreadable(path, &reason(&error)))?;
    if bytes.len() as u64 > LARGEST_RECORD {
        return Err(too_large(&path.display().to_string(), LARGEST_RECORD));
    }
    String::from_utf8(bytes).map_err(|error| not_text(&path.display().to_string(), &error))
}

/// The record of the package that a project folder holds, if there is one.
#[must_use]
pub fn committed_record(folder: &Path) -> Option<Vec<u8>> {
    let path = folder.join(PACKAGE).join(RECORD);
    record(&path).ok().map(String::into_bytes)
}

pub(super) fn unreadable(path: &Path, reason: &str) -> Diagnostic {
    gather::unreadable(&path.display().to_string(), reason)
}
