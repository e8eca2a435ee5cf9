//! Finding projects: those named, and those below a folder that holds several.

use std::collections::BTreeSet;
use std::fs;
use std::path::{Path, PathBuf};

use super::gather::PROJECT;
use super::read::{folder, unreadable};
use super::{PACKAGE, reason};
use crate::diagnostic::Diagnostic;

/// Projects that one run looks at.
const MOST_PROJECTS: usize = 10_000;
/// Folders in which nobody keeps projects, besides hidden ones.
const SKIPPED: [&str; 2] = ["target", PACKAGE];

/// A project's folder, with a name that is the same wherever the repository was put.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Found {
    /// Path from the root of the repository, `.` for the root itself; outside a repository from the present
    /// folder, and as given where it is not below that.
    pub name: String,
    /// Path as given.
    pub folder: PathBuf,
}

/// The projects that paths name, each once, in order of name. A folder without a `project.yaml` is
/// searched; a path that is no folder is taken for a project, for whoever reads it to say what is wrong.
///
/// Problems stop nothing: they are told beside what was found.
#[must_use]
pub fn projects(paths: &[PathBuf]) -> (Vec<Found>, Vec<Diagnostic>) {
    let mut search = Search::default();
    for path in paths {
        let folder = folder(path);
        let problems = search.problems.len();
        let is_project = !folder.is_dir();
        if !search.folder(&folder, is_project) && search.problems.len() == problems {
            let message = format!("there is no `{PROJECT}` in `{}` nor below it", folder.display());
            search.problems.push(
                Diagnostic::error("missing-project", message)
                    .hint("`spanfolio start FOLDER` sets up a new project".to_owned()),
            );
        }
    }
    if search.found.len() > MOST_PROJECTS {
        let message = format!(
            "there are {} projects, and one run takes at most {MOST_PROJECTS}",
            search.found.len()
        );
        return (Vec::new(), vec![Diagnostic::error("too-many-projects", message)]);
    }
    search.found.sort_by(|a, b| a.name.cmp(&b.name));
    (search.found, search.problems)
}

#[derive(Default)]
struct Search {
    found: Vec<Found>,
    /// Folders without links, so that a project named twice is one.
    seen: BTreeSet<PathBuf>,
    problems: Vec<Diagnostic>,
}

impl Search {
    /// Whether there is a project.
    fn folder(&mut self, path: &Path, is_project: bool) -> bool {
        if is_project || fs::symlink_metadata(path.join(PROJECT)).is_ok() {
            if self.seen.insert(path.canonicalize().unwrap_or_else(|_| path.to_owned())) {
                self.found.push(Found { name: name(path), folder: path.to_owned() });
            }
            return true;
        }
        let entries = match fs::read_dir(path) {
            Ok(entries) => entries,
            Err(error) => {
                self.problems.push(unreadable(path, &reason(&error)));
                return false;
            }
        };
        let mut any = false;
        for entry in entries.flatten() {
            let name = entry.file_name();
            let name = name.to_string_lossy();
            // A link is not followed: what it leads to is found where it is, and no search goes in circles.
            let is_folder = entry.file_type().is_ok_and(|kind| kind.is_dir());
            if is_folder && !name.starts_with('.') && !SKIPPED.contains(&&*name) {
                any |= self.folder(&path.join(entry.file_name()), false);
            }
        }
        any
    }
}

fn name(path: &Path) -> String {
    let given = || path.components().collect::<PathBuf>();
    let Ok(real) = path.canonicalize() else { return shown(&given()) };
    let root = real.ancestors().find(|folder| fs::symlink_metadata(folder.join(".git")).is_ok());
    let present = std::env::current_dir().ok();
    match root.or(present.as_deref()).and_then(|root| real.strip_prefix(root).ok()) {
        Some(inside) => shown(inside),
        None => shown(&given()),
    }
}

/// With `/` between its parts.
fn shown(path: &Path) -> String {
    let parts: Vec<_> = path.components().map(|part| part.as_os_str().to_string_lossy()).collect();
    match parts.join("/") {
        empty if empty.is_empty() => ".".to_owned(),
        // The root itself is the first part of an absolute path.
        absolute => absolute.strip_prefix("//").map_or(absolute.clone(), |rest| format!("/{rest}")),
    }
}
