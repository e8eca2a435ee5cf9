//! Writing a package, all or nothing.
//!
//! The new package is written whole to `.package-new`, the present one renamed to `.package-old`, the new
//! one renamed to `package`, and the old one removed. A failure at any point leaves or puts back the old
//! package; when the program itself was stopped between the two renames, [`heal`] does so at the next
//! command. The two names are ours alone: whatever bears them is removed.
//!
//! Each package carries [`CONTENTS`], the names of its files with their SHA-256 (the form that
//! `sha256sum --check` reads). A `package` folder with files that its own list does not name is somebody
//! else's and is refused.

use std::collections::{BTreeMap, BTreeSet};
use std::fs;
use std::io::{self, Write as _};
use std::path::{Component, Path};

use sha2::{Digest, Sha256};

use super::{hexadecimal, reason};
use crate::diagnostic::Diagnostic;

/// The folder of the package inside the project's.
pub const PACKAGE: &str = "package";
/// The list of a package's files inside it.
pub const CONTENTS: &str = "contents.txt";

const NEW: &str = ".package-new";
const OLD: &str = ".package-old";

/// Puts a package in place of the present one in `folder`.
///
/// # Errors
/// When the present package holds files of others, or the disk refuses; the present package stays.
pub fn write(folder: &Path, package: &BTreeMap<String, Vec<u8>>) -> Result<(), Diagnostic> {
    heal(folder)?;
    refuse_foreign_files(&folder.join(PACKAGE))?;
    let new = folder.join(NEW);
    let written = write_all(&new, package).and_then(|()| exchange(folder));
    if written.is_err() {
        // What stays behind is removed by the next `heal`.
        let _ = fs::remove_dir_all(&new);
    }
    written
}

/// Ends what an interrupted command began: a package taken away without its successor comes back, and
/// left-overs go.
///
/// # Errors
/// When the disk refuses.
pub fn heal(folder: &Path) -> Result<(), Diagnostic> {
    let (package, new, old) = (folder.join(PACKAGE), folder.join(NEW), folder.join(OLD));
    if is_there(&old) && !is_there(&package) {
        fs::rename(&old, &package).map_err(|error| unwritable(&package, &error))?;
    }
    for left_over in [new, old] {
        if is_there(&left_over) {
            fs::remove_dir_all(&left_over).map_err(|error| unwritable(&left_over, &error))?;
        }
    }
    Ok(())
}

/// Fills a new or empty folder with files, for a new project.
///
/// # Errors
/// When the folder holds anything, or the disk refuses.
pub fn create(folder: &Path, files: &BTreeMap<String, Vec<u8>>) -> Result<(), Diagnostic> {
    let empty = match fs::read_dir(folder) {
        Ok(mut entries) => entries.next().is_none(),
        Err(error) if error.kind() == io::ErrorKind::NotFound => true,
        Err(error) => return Err(unwritable(folder, &error)),
    };
    if !empty {
        let message = format!("`{}` is not empty", folder.display());
        return Err(Diagnostic::error("not-empty", message)
            .hint("name a folder that does not exist yet".to_owned()));
    }
    write_files(folder, files)
}

fn is_there(path: &Path) -> bool {
    fs::symlink_metadata(path).is_ok()
}

fn write_all(new: &Path, package: &BTreeMap<String, Vec<u8>>) -> Result<(), Diagnostic> {
    write_files(new, package)?;
    write_file(&new.join(CONTENTS), contents(package).as_bytes())
}

/// The text of [`CONTENTS`] for the other files of a package.
#[must_use]
pub fn contents(package: &BTreeMap<String, Vec<u8>>) -> String {
    package.iter().map(|(path, bytes)| format!("{}  {path}\n", digest(bytes))).collect()
}

/// SHA-256 in hexadecimal.
#[must_use]
pub fn digest(bytes: &[u8]) -> String {
    hexadecimal(&Sha256::digest(bytes))
}

fn write_files(folder: &Path, files: &BTreeMap<String, Vec<u8>>) -> Result<(), Diagnostic> {
    fs::create_dir_all(folder).map_err(|error| unwritable(folder, &error))?;
    for (name, bytes) in files {
        let path = folder.join(name);
        if !Path::new(name).components().all(|part| matches!(part, Component::Normal(_))) {
            let message = format!("`{name}` is not a path inside a folder");
            return Err(Diagnostic::error("cannot-write", message));
        }
        if let Some(parent) = path.parent() {
            fs::create_dir_all(parent).map_err(|error| unwritable(parent, &error))?;
        }
        write_file(&path, bytes)?;
    }
    Ok(())
}

fn write_file(path: &Path, bytes: &[u8]) -> Result<(), Diagnostic> {
    fs::File::create_new(path)
        .and_then(|mut file| file.write_all(bytes))
        .map_err(|error| unwritable(path, &error))
}

/// The two renames.
fn exchange(folder: &Path) -> Result<(), Diagnostic> {
    let (package, new, old) = (folder.join(PACKAGE), folder.join(NEW), folder.join(OLD));
    let replaces = is_there(&package);
    if replaces {
        fs::rename(&package, &old).map_err(|error| unwritable(&package, &error))?;
    }
    if let Err(error) = fs::rename(&new, &package) {
        let put_back = if replaces { fs::rename(&old, &package) } else { Ok(()) };
        return Err(unwritable(&package, put_back.as_ref().err().unwrap_or(&error)));
    }
    if replaces {
        // The new package is in place: an old one that cannot be removed now goes with the next `heal`.
        let _ = fs::remove_dir_all(&old);
    }
    Ok(())
}

fn refuse_foreign_files(package: &Path) -> Result<(), Diagnostic> {
    let Ok(metadata) = fs::symlink_metadata(package) else { return Ok(()) };
    if !metadata.is_dir() {
        let message = format!("`{}` is not a folder", package.display());
        return Err(Diagnostic::error("foreign-package", message)
            .hint("move it away: the package is written there".to_owned()));
    }
    let listed = fs::read(package.join(CONTENTS)).unwrap_or_default();
    let listed = String::from_utf8_lossy(&listed);
    let mut ours: BTreeSet<&str> =
        listed.lines().filter_map(|line| Some(line.split_once("  ")?.1)).collect();
    if !ours.is_empty() {
        ours.insert(CONTENTS);
    }
    let mut found = Vec::new();
    list(package, "", &mut found).map_err(|error| unwritable(package, &error))?;
    let foreign: Vec<String> = found
        .iter()
        .filter(|name| !ours.contains(name.as_str()))
        .map(|n| format!("`{n}`"))
        .collect();
    if foreign.is_empty() {
        return Ok(());
    }
    let shown = foreign.iter().take(3).cloned().collect::<Vec<_>>().join(", ");
    let more =
        if foreign.len() > 3 { format!(" and {} more", foreign.len() - 3) } else { String::new() };
    let message =
        format!("`{}` holds files that are not of a package: {shown}{more}", package.display());
    Err(Diagnostic::error("foreign-package", message)
        .hint("move them away: the whole folder is replaced".to_owned()))
}

/// Every file below a folder, links not followed, as a path with `/`.
fn list(folder: &Path, prefix: &str, found: &mut Vec<String>) -> io::Result<()> {
    let mut entries = fs::read_dir(folder)?.collect::<io::Result<Vec<_>>>()?;
    entries.sort_by_key(fs::DirEntry::file_name);
    for entry in entries {
        let name = format!("{prefix}{}", entry.file_name().to_string_lossy());
        if entry.file_type()?.is_dir() {
            list(&entry.path(), &format!("{name}/"), found)?;
        } else {
            found.push(name);
        }
    }
    Ok(())
}

pub(super) fn unwritable(path: &Path, error: &io::Error) -> Diagnostic {
    Diagnostic::error(
        "cannot-write",
        format!("cannot write `{}`: {}", path.display(), reason(error)),
    )
}
