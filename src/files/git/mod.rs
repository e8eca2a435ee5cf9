//! A project as it stood at a git revision, read without touching the working copy.
//!
//! Invariants
//! - What belongs to a project, the limits and the treatment of text are those of the disk (`gather`).
//! - Only the `git` program reads the repository; nothing is checked out, fetched, locked or written.
//! - Links and submodules are never followed: in place of a file of the project they are refused.

mod program;
mod repository;
mod tree;

use std::collections::BTreeSet;
use std::path::Path;

use repository::Place;
use tree::{Contents, Entry, Kind};

use super::gather::{
    DEEPEST, FOLDERS, Gathered, LARGEST_FILE, LARGEST_PROJECT, LARGEST_RECORD, PROJECT, RECORD,
    is_hidden, text, too_deep, too_large, unreadable,
};
use super::{PACKAGE, Sources, read};
use crate::diagnostic::Diagnostic;

/// Projects named when there is none where it was looked for.
const NAMED: usize = 5;

/// A project at a revision.
#[derive(Clone, Debug)]
pub struct AtRevision {
    pub sources: Sources,
    /// The record of the committed package, if there is one.
    pub record: Option<Vec<u8>>,
    /// Full id of the commit.
    pub commit: String,
}

/// Reads the project in `folder` as it stood at `revision`. The folder need not be there any more; in a bare
/// repository it is a path on from the repository itself.
///
/// # Errors
/// No git, no repository, no such revision, no project there; otherwise as [`read`](super::read()).
pub fn read_at(folder: &Path, revision: &str) -> Result<AtRevision, Vec<Diagnostic>> {
    let folder = super::folder(folder);
    let one = |problem| vec![problem];
    let place = Place::of(&folder).map_err(one)?;
    let commit = place.commit(revision).map_err(one)?;
    let tree = Tree::read(&place, &commit, revision).map_err(one)?;
    if !tree.has_project {
        return Err(vec![no_project(&place, &commit, revision)]);
    }
    Ok(AtRevision { sources: tree.gathered.end()?, record: tree.record, commit })
}

/// The files of the project in `folder` that differ from those at `HEAD`, are new or are gone, in order. `None`
/// where nothing is committed to: outside a repository, in a bare one, without git.
#[must_use]
pub fn uncommitted(folder: &Path) -> Option<Vec<String>> {
    let folder = super::folder(folder);
    let place = Place::of(&folder).ok().filter(|place| place.has_working_copy)?;
    let there = match place.commit("HEAD") {
        Ok(commit) => Tree::read(&place, &commit, "HEAD").ok()?,
        Err(_) => Tree::default(),
    };
    let here = read::gather(&folder).unwrap_or_default().sources.files;
    let then = &there.gathered.sources.files;
    let names: BTreeSet<&String> = here.keys().chain(then.keys()).collect();
    // What a link leads to is not known at a revision.
    let is_linked = |name: &str| {
        there.links.iter().any(|link| {
            name.strip_prefix(link.as_str())
                .is_some_and(|rest| rest.is_empty() || rest.starts_with('/'))
                && folder.join(link).is_symlink()
        })
    };
    let differs = |name: &String| here.get(name) != then.get(name) && !is_linked(name);
    Some(names.into_iter().filter(|name| differs(name)).cloned().collect())
}

/// What of a project stands in a commit.
#[derive(Default)]
struct Tree {
    gathered: Gathered,
    record: Option<Vec<u8>>,
    links: Vec<String>,
    has_project: bool,
}

impl Tree {
    fn read(place: &Place, commit: &str, revision: &str) -> Result<Self, Diagnostic> {
        let record = format!("{PACKAGE}/{RECORD}");
        let paths: Vec<String> = [PROJECT, record.as_str()]
            .iter()
            .chain(&FOLDERS)
            .map(|path| format!("{}{path}", place.prefix))
            .collect();
        let entries = tree::list(&place.git, commit, &paths)?;
        let mut contents = Contents::of(&place.git)?;
        let mut tree = Self::default();
        let mut deep = BTreeSet::new();
        for entry in &entries {
            let Some(name) = entry.path.strip_prefix(place.prefix.as_bytes()) else { continue };
            let Ok(name) = std::str::from_utf8(name) else {
                let shown = format!("{revision}:{}", String::from_utf8_lossy(&entry.path));
                tree.gathered.problems.push(unreadable(&shown, "its name is not UTF-8"));
                continue;
            };
            let shown = format!("{revision}:{}{name}", place.prefix);
            if name == record {
                let fits = entry.size.is_some_and(|size| size <= LARGEST_RECORD);
                let is_record = entry.kind == Kind::File && fits;
                tree.record = is_record.then(|| contents.get(&entry.id).ok()).flatten();
                continue;
            }
            tree.has_project |= name == PROJECT;
            if name.starts_with(&format!("{PROJECT}/")) || name.split('/').skip(1).any(is_hidden) {
                continue;
            }
            if let Some(folder) = too_deep_folder(name) {
                if deep.insert(folder) {
                    let shown = format!("{revision}:{}{folder}", place.prefix);
                    tree.gathered.problems.push(too_deep(&shown));
                }
                continue;
            }
            if entry.kind == Kind::Link {
                tree.links.push(name.to_owned());
            }
            if tree.gathered.has_room_for(name) {
                let text = content(entry, name, &shown, &mut contents);
                tree.gathered.add(name, text);
            }
        }
        Ok(tree)
    }
}

/// The text of one file of the project.
fn content(
    entry: &Entry,
    name: &str,
    shown: &str,
    contents: &mut Contents,
) -> Result<String, Diagnostic> {
    let put = || "commit the file itself in its place".to_owned();
    match entry.kind {
        Kind::Link => {
            let message = format!("`{shown}` is a link; links are not followed at a revision");
            return Err(Diagnostic::error("link-at-revision", message).hint(put()));
        }
        Kind::Submodule => {
            let message = format!("`{shown}` is a submodule; a project lies in one repository");
            return Err(Diagnostic::error("submodule-at-revision", message).hint(put()));
        }
        Kind::File if FOLDERS.contains(&name) => {
            return Err(unreadable(shown, "not a directory"));
        }
        Kind::File => {}
    }
    let limit = if name == PROJECT { LARGEST_PROJECT } else { LARGEST_FILE };
    if entry.size.is_some_and(|size| size > limit) {
        return Err(too_large(shown, limit));
    }
    let bytes = contents.get(&entry.id).map_err(|reason| unreadable(shown, &reason))?;
    text(bytes, shown)
}

/// The folder of a file's path that is one too many.
fn too_deep_folder(name: &str) -> Option<&str> {
    let (end, _) = name.match_indices('/').nth(DEEPEST)?;
    Some(&name[..end])
}

/// Says where the revision has projects instead.
fn no_project(place: &Place, commit: &str, revision: &str) -> Diagnostic {
    let folder = place.prefix.trim_end_matches('/');
    let message = match folder {
        "" => format!("there is no `{PROJECT}` at `{revision}`"),
        folder => format!("there is no `{PROJECT}` in `{folder}` at `{revision}`"),
    };
    let problem = Diagnostic::error("missing-at-revision", message);
    let Ok(entries) = tree::list(&place.git, commit, &[]) else { return problem };
    let folders: Vec<String> = entries
        .iter()
        .filter_map(|entry| {
            let path = String::from_utf8_lossy(&entry.path).into_owned();
            let folder = path.strip_suffix(PROJECT)?;
            match folder {
                "" => Some("`.`".to_owned()),
                folder => Some(format!("`{}`", folder.strip_suffix('/')?)),
            }
        })
        .collect();
    let shown = folders.iter().take(NAMED).cloned().collect::<Vec<_>>().join(", ");
    let more = match folders.len().saturating_sub(NAMED) {
        0 => String::new(),
        more => format!(" and {more} more"),
    };
    let hint = match folders.len() {
        0 => "no folder of the repository had a project then".to_owned(),
        _ => format!("projects at that revision: {shown}{more}"),
    };
    problem.hint(hint)
}
