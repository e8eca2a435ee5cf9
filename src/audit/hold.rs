//! A committed package held against the one that should be there, file by file.

use std::collections::{BTreeMap, BTreeSet};

use serde::Serialize;

use super::text::{Sameness, held};
use crate::files::{CONTENTS, contents, digest};
use crate::package::Package;

/// A file of a package that is not what it should be.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct FileDifference {
    /// Path inside the package.
    pub file: String,
    pub what: FileState,
    /// The first line that differs, of a text.
    pub line: Option<usize>,
}

/// What is wrong with a file.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize)]
#[serde(rename_all = "lowercase")]
pub enum FileState {
    Edited,
    Missing,
    Extra,
}

impl FileDifference {
    /// In words: ``edited `package.md`, first at line 12``.
    #[must_use]
    pub fn words(&self) -> String {
        let what = match self.what {
            FileState::Edited => "edited",
            FileState::Missing => "missing",
            FileState::Extra => "extra",
        };
        let line = self.line.map(|line| format!(", first at line {line}")).unwrap_or_default();
        format!("{what} `{}`{line}", self.file)
    }
}

/// What holding two packages against each other found.
#[derive(Debug, Default)]
pub(super) struct Held {
    pub(super) files: Vec<FileDifference>,
    /// Numbers that differ by round-off.
    pub(super) numbers: usize,
}

/// Compares every file. `expected` has no list of contents: the committed one must name the same files,
/// each with the hash of what is there or of what should be.
pub(super) fn hold(committed: &Package, expected: &Package) -> Held {
    let mut out = Held::default();
    let names: BTreeSet<&String> = committed.keys().chain(expected.keys()).collect();
    for name in names.into_iter().filter(|name| *name != CONTENTS) {
        let (what, line) = match (committed.get(name), expected.get(name)) {
            (Some(there), Some(right)) => match bytes(there, right) {
                Sameness::Same => continue,
                Sameness::RoundOff(numbers) => {
                    out.numbers += numbers;
                    continue;
                }
                Sameness::PartsAt(0) => (FileState::Edited, None),
                Sameness::PartsAt(line) => (FileState::Edited, Some(line)),
            },
            (Some(_), None) => (FileState::Extra, None),
            (None, _) => (FileState::Missing, None),
        };
        out.files.push(FileDifference { file: name.clone(), what, line });
    }
    out.files.extend(list(committed, expected));
    out
}

/// Line 0 stands for a file that is no text.
fn bytes(committed: &[u8], expected: &[u8]) -> Sameness {
    if committed == expected {
        return Sameness::Same;
    }
    match (std::str::from_utf8(committed), std::str::from_utf8(expected)) {
        (Ok(committed), Ok(expected)) => held(committed, expected),
        _ => Sameness::PartsAt(0),
    }
}

/// The list of contents where it is not what it should be.
fn list(committed: &Package, expected: &Package) -> Option<FileDifference> {
    let file = CONTENTS.to_owned();
    let Some(there) = committed.get(CONTENTS) else {
        return Some(FileDifference { file, what: FileState::Missing, line: None });
    };
    let right = contents(expected);
    if there == right.as_bytes() {
        return None;
    }
    let there = String::from_utf8_lossy(there);
    let (there, right): (Vec<&str>, Vec<&str>) = (there.lines().collect(), right.lines().collect());
    let is_right = |(there, right): (&&str, &&str)| {
        let of_file = listed(there).filter(|(hash, name)| {
            right.ends_with(&format!("  {name}")) && is_digest(committed, name, hash)
        });
        there == right || of_file.is_some()
    };
    let same = there.iter().zip(&right).take_while(|pair| is_right(*pair)).count();
    let line = (same < there.len().max(right.len())).then_some(same + 1)?;
    Some(FileDifference { file, what: FileState::Edited, line: Some(line) })
}

/// The package is as its own list of contents says: nobody changed a file after it was written.
pub(super) fn is_intact(committed: &Package) -> bool {
    let Some(list) = committed.get(CONTENTS) else { return false };
    let list = String::from_utf8_lossy(list);
    let listed: BTreeMap<&str, &str> =
        list.lines().filter_map(|line| listed(line).map(|(hash, name)| (name, hash))).collect();
    committed.len() == listed.len() + 1
        && listed.iter().all(|(name, hash)| is_digest(committed, name, hash))
}

fn listed(line: &str) -> Option<(&str, &str)> {
    line.split_once("  ")
}

fn is_digest(committed: &Package, name: &str, hash: &str) -> bool {
    committed.get(name).is_some_and(|bytes| digest(bytes) == hash)
}
