//! The earlier revision that a package is held against, kept inside the package.
//!
//! The project files of that revision stand in the package's folder `against`, so that whoever has the
//! package can make the same comparison again, without the repository.

use std::collections::BTreeMap;

use serde::{Deserialize, Serialize};

use super::Package;
use crate::compare::{Changes, Side, Thresholds, compare};
use crate::diagnostic::Diagnostic;
use crate::files::Sources;
use crate::record::Record;

/// What the revision is called, inside that folder.
const ABOUT: &str = "against/about.json";
/// Digits of a commit that name it in print.
const SHORT: usize = 10;

/// An earlier revision of the project, solved by this program.
#[derive(Clone, Debug)]
pub struct Against {
    about: About,
    sources: Sources,
    record: Record,
}

#[derive(Clone, Debug, Serialize, Deserialize)]
struct About {
    /// In full.
    commit: String,
}

impl Against {
    /// Where a package keeps it.
    pub const FOLDER: &str = "against/";

    /// Solves the project as it stood at a commit.
    ///
    /// # Errors
    /// Every problem of that revision.
    pub fn solve(commit: &str, sources: Sources) -> Result<Self, Vec<Diagnostic>> {
        let record = crate::solve(&sources)?.record;
        Ok(Self { about: About { commit: commit.to_owned() }, sources, record })
    }

    /// The revision that a written package was held against; `None` where it was held against none.
    ///
    /// # Errors
    /// When what the package says of it cannot be read or solved.
    pub fn of_package(
        package: &BTreeMap<String, Vec<u8>>,
    ) -> Option<Result<Self, Vec<Diagnostic>>> {
        let about = package.get(ABOUT)?;
        let about: About = match serde_json::from_slice(about) {
            Ok(about) => about,
            Err(error) => {
                let message = format!("`{ABOUT}` of the package cannot be read: {error}");
                return Some(Err(vec![Diagnostic::error("foreign-package", message)]));
            }
        };
        let files = package
            .iter()
            .filter(|(path, _)| *path != ABOUT)
            .filter_map(|(path, bytes)| {
                Some((path.strip_prefix(Self::FOLDER)?.to_owned(), bytes.clone()))
            })
            .collect();
        Some(Self::solve(&about.commit, Sources { files }))
    }

    /// The commit in full.
    #[must_use]
    pub fn commit(&self) -> &str {
        &self.about.commit
    }

    /// The project files at that commit.
    #[must_use]
    pub const fn sources(&self) -> &Sources {
        &self.sources
    }

    /// Says so when the project's table of revisions has no revision after the one at that commit: its marks
    /// would name the old one.
    #[must_use]
    pub fn warning(&self, record: &Record) -> Option<Diagnostic> {
        let last = |record: &Record| record.project.revisions.last().map(|last| last.mark.clone());
        let (old, new) = (last(&self.record)?, last(record)?);
        (old == new).then(|| {
            let message =
                format!("changes since revision {old} are marked as revision {new} again");
            Diagnostic::warning("same-revision", message)
                .hint("add the new revision to `project.revisions`".to_owned())
        })
    }

    pub(super) const fn record(&self) -> &Record {
        &self.record
    }

    /// What changed since.
    pub(super) fn changes(&self, record: &Record, sources: &Sources) -> Changes {
        let commit: String = self.about.commit.chars().take(SHORT).collect();
        let old = Side {
            label: &format!("commit {commit}"),
            record: &self.record,
            sources: Some(&self.sources),
        };
        let new = Side { label: "this package", record, sources: Some(sources) };
        compare(&old, &new, &Thresholds::default())
    }

    /// What the package keeps of it.
    ///
    /// # Panics
    /// Never: the words of a commit are text.
    pub(super) fn files(&self) -> Package {
        let about = serde_json::to_string_pretty(&self.about).expect("a commit is text");
        let mut files: Package = self
            .sources
            .files
            .iter()
            .map(|(path, content)| (format!("{}{path}", Self::FOLDER), content.clone()))
            .collect();
        files.insert(ABOUT.to_owned(), (about + "\n").into_bytes());
        files
    }
}
