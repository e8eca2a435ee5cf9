//! Reading the package that a project folder holds, to hold it against what it should be.

use std::collections::BTreeMap;
use std::fs::{self, File};
use std::io::Read;
use std::path::Path;

use super::read::unreadable;
use super::{PACKAGE, reason};
use crate::diagnostic::Diagnostic;

/// The print of a package, which stands outside the set that is compared.
const PDF: &str = "package.pdf";
/// Bytes in a package, all files together.
const LARGEST_PACKAGE: u64 = 512 << 20;
/// Files in a package.
const MOST_PACKAGE_FILES: usize = 20_000;
/// Folders inside each other below the package's own.
const DEEPEST: usize = 16;

/// The files of the package in a project's folder without its print, path (`/` between parts) → content;
/// `None` where there is no package. No link is followed, and nothing is mended.
///
/// # Errors
/// When it holds links or what is no file, is too large, or the disk refuses.
pub fn committed(folder: &Path) -> Result<Option<BTreeMap<String, Vec<u8>>>, Diagnostic> {
    let package = folder.join(PACKAGE);
    let Ok(metadata) = fs::symlink_metadata(&package) else { return Ok(None) };
    if !metadata.is_dir() {
        return Err(strange(&package, "is not a folder"));
    }
    let mut reader = Reader { files: BTreeMap::new(), left: LARGEST_PACKAGE };
    reader.folder(&package, "", 0)?;
    reader.files.remove(PDF);
    Ok(Some(reader.files))
}

struct Reader {
    files: BTreeMap<String, Vec<u8>>,
    /// Bytes that may still be read.
    left: u64,
}

impl Reader {
    fn folder(&mut self, path: &Path, prefix: &str, depth: usize) -> Result<(), Diagnostic> {
        let refused = |error| unreadable(path, &reason(&error));
        if depth > DEEPEST {
            return Err(strange(path, &format!("is more than {DEEPEST} folders deep")));
        }
        for entry in fs::read_dir(path).map_err(refused)? {
            let entry = entry.map_err(refused)?;
            let path = entry.path();
            let Some(name) = entry.file_name().to_str().map(|name| format!("{prefix}{name}"))
            else {
                return Err(unreadable(&path, "its name is not UTF-8"));
            };
            let kind = entry.file_type().map_err(refused)?;
            if kind.is_dir() {
                self.folder(&path, &format!("{name}/"), depth + 1)?;
            } else if kind.is_file() {
                self.file(&path, name)?;
            } else {
                return Err(strange(&path, "is a link or no file"));
            }
        }
        Ok(())
    }

    fn file(&mut self, path: &Path, name: String) -> Result<(), Diagnostic> {
        if self.files.len() == MOST_PACKAGE_FILES {
            let most = format!("is one more than the {MOST_PACKAGE_FILES} files of a package");
            return Err(strange(path, &most));
        }
        let mut bytes = Vec::new();
        let read =
            File::open(path).and_then(|file| file.take(self.left + 1).read_to_end(&mut bytes));
        let length = read.map_err(|error| unreadable(path, &reason(&error)))? as u64;
        let Some(left) = self.left.checked_sub(length) else {
            let message = format!(
                "the package up to `{}` is larger than {} MiB",
                path.display(),
                LARGEST_PACKAGE >> 20
            );
            return Err(Diagnostic::error("too-large", message));
        };
        self.left = left;
        self.files.insert(name, bytes);
        Ok(())
    }
}

fn strange(path: &Path, what: &str) -> Diagnostic {
    Diagnostic::error("foreign-package", format!("`{}` {what}", path.display())).hint(
        "`spanfolio issue` writes a package anew once what is not of it is moved away".to_owned(),
    )
}
