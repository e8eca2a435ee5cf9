//! Reading a project, jailed in its folder.

use std::fs::{self, File};
use std::io::Read;
use std::path::{Path, PathBuf};

use super::{Sources, reason};
use crate::diagnostic::Diagnostic;

/// Bytes in `project.yaml`.
pub const LARGEST_PROJECT: u64 = 8 << 20;
/// Bytes in any other file.
pub const LARGEST_FILE: u64 = 1 << 20;
/// Files of a project, `project.yaml` included.
pub const MOST_FILES: usize = 500;
/// Folders inside each other below the project's own.
const DEEPEST: usize = 8;

pub(super) const PROJECT: &str = "project.yaml";
/// Folders read whole, apart from files whose name begins with a point.
const FOLDERS: [&str; 3] = ["checks", "narrative", "templates"];

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
    let folder = folder(path);
    let mut reader = Reader::new(&folder).map_err(|problem| vec![problem])?;
    reader.file(&folder.join(PROJECT), PROJECT, LARGEST_PROJECT);
    for name in FOLDERS {
        let inside = folder.join(name);
        if fs::symlink_metadata(&inside).is_ok() {
            reader.folder(&inside, name, 0);
        }
    }
    if reader.problems.is_empty() { Ok(reader.sources) } else { Err(reader.problems) }
}

struct Reader {
    /// The project's folder without links; nothing outside it is opened.
    jail: PathBuf,
    sources: Sources,
    problems: Vec<Diagnostic>,
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
        Ok(Self { jail, sources: Sources::default(), problems: Vec::new() })
    }

    /// Reads one file to the name it has in [`Sources`].
    fn file(&mut self, path: &Path, name: &str, limit: u64) {
        if self.sources.files.len() >= MOST_FILES {
            let message = format!("a project has at most {MOST_FILES} files, `{name}` is one more");
            // Once is enough: the walk goes on over what may be a large folder.
            if self.problems.iter().all(|problem| problem.code != "too-many-files") {
                self.problems.push(Diagnostic::error("too-many-files", message));
            }
            return;
        }
        match self.content(path, limit) {
            Ok(text) => {
                self.sources.files.insert(name.to_owned(), text.into_bytes());
            }
            Err(problem) => self.problems.push(problem),
        }
    }

    fn folder(&mut self, path: &Path, name: &str, depth: usize) {
        if let Err(problem) = self.inside(path) {
            self.problems.push(problem);
            return;
        }
        if depth == DEEPEST {
            let message = format!("`{}` is more than {DEEPEST} folders deep", path.display());
            self.problems.push(Diagnostic::error("too-deep", message));
            return;
        }
        let entries = fs::read_dir(path).and_then(Iterator::collect::<Result<Vec<_>, _>>);
        let mut entries = match entries {
            Ok(entries) => entries,
            Err(error) => return self.problems.push(unreadable(path, &reason(&error))),
        };
        entries.sort_by_key(fs::DirEntry::file_name);
        for entry in entries {
            let path = entry.path();
            let Some(part) = entry.file_name().to_str().map(str::to_owned) else {
                self.problems.push(unreadable(&path, "its name is not UTF-8"));
                continue;
            };
            if part.starts_with('.') {
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
        if bytes.len() as u64 > limit {
            let message = format!("`{}` is larger than {} MiB", path.display(), limit >> 20);
            return Err(Diagnostic::error("too-large", message));
        }
        let text = String::from_utf8(bytes).map_err(|error| not_text(path, &error))?;
        Ok(as_text(&text))
    }
}

/// The text of a file: without byte-order mark, line ends LF.
pub(super) fn as_text(raw: &str) -> String {
    raw.strip_prefix('\u{feff}').unwrap_or(raw).replace("\r\n", "\n")
}

fn unreadable(path: &Path, reason: &str) -> Diagnostic {
    Diagnostic::error("cannot-read", format!("cannot read `{}`: {reason}", path.display()))
}

/// Names line and column of the first byte that is not UTF-8.
fn not_text(path: &Path, error: &std::string::FromUtf8Error) -> Diagnostic {
    let good = &error.as_bytes()[..error.utf8_error().valid_up_to()];
    let good = String::from_utf8_lossy(good);
    let line = good.matches('\n').count() + 1;
    let column = good.rsplit('\n').next().unwrap_or_default().chars().count() + 1;
    let place = format!("`{}` is not UTF-8 at line {line}, column {column}", path.display());
    Diagnostic::error("not-text", place).hint("save the file as UTF-8 text".to_owned())
}

/// Bytes in a record.
const LARGEST_RECORD: u64 = 256 << 20;

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
        let message = format!("`{}` is larger than {} MiB", path.display(), LARGEST_RECORD >> 20);
        return Err(Diagnostic::error("too-large", message));
    }
    String::from_utf8(bytes).map_err(|error| not_text(path, &error))
}

/// The record of the package that a project folder holds, if there is one.
#[must_use]
pub fn committed_record(folder: &Path) -> Option<Vec<u8>> {
    let path = folder.join(super::PACKAGE).join("record.json");
    record(&path).ok().map(String::into_bytes)
}
