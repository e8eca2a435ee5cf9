//! One side of a comparison: a project folder, a record file, or a project at a git revision.

use std::path::{Path, PathBuf};

use super::{Status, progress, render, wrong};
use crate::compare::{Side, differs};
use crate::diagnostic::Diagnostic;
use crate::files::{self, Sources};
use crate::package::Against;
use crate::record::Record;

/// A side, read and where need be solved.
pub(super) struct Loaded {
    pub(super) label: String,
    pub(super) record: Record,
    pub(super) sources: Option<Sources>,
    /// Sentences a reader of the comparison must know.
    pub(super) notes: Vec<String>,
}

impl Loaded {
    pub(super) fn side(&self) -> Side<'_> {
        Side { label: &self.label, record: &self.record, sources: self.sources.as_ref() }
    }
}

/// Reads the side that a word of the command line means: what is there as a folder or a file, else
/// `REVISION:FOLDER`.
pub(super) fn load(word: &Path) -> Result<Loaded, Status> {
    if word.is_dir() || word.file_name().is_some_and(|name| name == "project.yaml") {
        return folder(word);
    }
    if word.exists() {
        return record(word);
    }
    match word.to_str().and_then(|word| word.split_once(':')) {
        Some((revision, folder)) => at_revision(revision, Path::new(folder)),
        None => {
            let message = format!("there is no folder and no file `{}`", word.display());
            let problem = Diagnostic::error("missing-side", message)
                .hint("a side is a project folder, a record.json, or `REVISION:FOLDER`".to_owned());
            Err(wrong(&[problem], Path::new(""), None))
        }
    }
}

/// A project as it stands on the disk.
pub(super) fn folder(path: &Path) -> Result<Loaded, Status> {
    let folder = files::folder(path);
    let sources = files::read(path).map_err(|problems| wrong(&problems, &folder, None))?;
    let committed = files::committed_record(&folder);
    let label = folder.display().to_string();
    let mut loaded = solved(label, sources, committed.as_deref(), &folder)?;
    if let Some(files) = files::uncommitted(&folder).filter(|files| !files.is_empty()) {
        loaded.notes.push(format!(
            "{} has changes that are not committed: {}.",
            loaded.label,
            files.join(", ")
        ));
    }
    Ok(loaded)
}

/// A project as it stood at a revision.
pub(super) fn at_revision(revision: &str, path: &Path) -> Result<Loaded, Status> {
    let folder = if path.as_os_str().is_empty() { PathBuf::from(".") } else { files::folder(path) };
    let at =
        files::read_at(&folder, revision).map_err(|problems| wrong(&problems, &folder, None))?;
    let short: String = at.commit.chars().take(10).collect();
    let label = if at.commit.starts_with(revision) {
        format!("revision {short}")
    } else {
        format!("{revision} ({short})")
    };
    solved(label, at.sources, at.record.as_deref(), &folder)
}

/// A record as the program wrote it.
fn record(path: &Path) -> Result<Loaded, Status> {
    let read = files::record(path).and_then(|text| {
        Record::from_json(&text).map_err(|problem| {
            Diagnostic::error("not-a-record", format!("`{}` is {problem}", path.display()))
        })
    });
    let record = read.map_err(|problem| wrong(&[problem], Path::new(""), None))?;
    let label = path.display().to_string();
    Ok(Loaded { label, record, sources: None, notes: Vec::new() })
}

/// Solves with the present program, so that differences come from the input.
fn solved(
    label: String,
    sources: Sources,
    committed: Option<&[u8]>,
    folder: &Path,
) -> Result<Loaded, Status> {
    let bar = progress::Bar::new();
    let solved = crate::solve(&sources);
    drop(bar);
    let solved = solved.map_err(|problems| {
        anstream::eprintln!("{label} cannot be solved:");
        wrong(&problems, folder, Some(&sources))
    })?;
    render::print(&solved.warnings, folder, Some(&sources));
    let notes = committed.and_then(|committed| differs(committed, &solved.record, &label));
    Ok(Loaded {
        label,
        record: solved.record,
        sources: Some(sources),
        notes: notes.into_iter().collect(),
    })
}

/// The revision that a package is held against.
pub(super) fn against(folder: &Path, revision: &str) -> Result<Against, Status> {
    let at = files::read_at(folder, revision).map_err(|problems| wrong(&problems, folder, None))?;
    Against::solve(&at.commit, at.sources.clone()).map_err(|problems| {
        anstream::eprintln!("the project at {revision} cannot be solved:");
        wrong(&problems, folder, Some(&at.sources))
    })
}
