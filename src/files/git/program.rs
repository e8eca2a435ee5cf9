//! The `git` program, run so that it reads and does nothing else.
//!
//! It never asks, fetches, locks or starts another program, speaks English whatever the user's language, and
//! takes the repository from the folder alone: the variables that a hook sets do not count.

use std::io::ErrorKind;
use std::path::PathBuf;
use std::process::{Command, Stdio};

use crate::diagnostic::Diagnostic;
use crate::files::reason;

/// What would name another repository or other objects than those of the folder
/// (`git rev-parse --local-env-vars`, apart from configuration, which a user may set on purpose).
const FOREIGN: [&str; 11] = [
    "GIT_ALTERNATE_OBJECT_DIRECTORIES",
    "GIT_COMMON_DIR",
    "GIT_DIR",
    "GIT_GRAFT_FILE",
    "GIT_IMPLICIT_WORK_TREE",
    "GIT_INDEX_FILE",
    "GIT_NAMESPACE",
    "GIT_OBJECT_DIRECTORY",
    "GIT_PREFIX",
    "GIT_SHALLOW_FILE",
    "GIT_WORK_TREE",
];

/// The program in one folder.
pub(super) struct Git {
    pub(super) folder: PathBuf,
}

/// What it said.
pub(super) struct Answer {
    pub(super) done: bool,
    pub(super) out: Vec<u8>,
    pub(super) err: String,
}

impl Git {
    /// Runs one command to its end.
    pub(super) fn ask(&self, words: &[&str]) -> Result<Answer, Diagnostic> {
        let output = self.command(words).output().map_err(|error| cannot_run(&error))?;
        Ok(Answer {
            done: output.status.success(),
            out: output.stdout,
            err: String::from_utf8_lossy(&output.stderr).into_owned(),
        })
    }

    /// A command ready to run, without standard input.
    pub(super) fn command(&self, words: &[&str]) -> Command {
        let mut command = Command::new("git");
        for name in FOREIGN {
            command.env_remove(name);
        }
        command
            .env("GIT_NO_LAZY_FETCH", "1")
            // A commit's id says what was read only where nothing is put in place of it.
            .env("GIT_NO_REPLACE_OBJECTS", "1")
            .env("GIT_OPTIONAL_LOCKS", "0")
            .env("GIT_TERMINAL_PROMPT", "0")
            .env("LC_ALL", "C")
            .arg("-C")
            .arg(&self.folder)
            .args(["--no-pager", "--literal-pathspecs"])
            .args(["-c", "core.fsmonitor=false", "-c", "core.warnAmbiguousRefs=true"])
            .args(words)
            .stdin(Stdio::null());
        command
    }
}

impl Answer {
    pub(super) fn text(&self) -> String {
        String::from_utf8_lossy(&self.out).trim().to_owned()
    }

    /// The command failed for a reason that we have no words of our own for.
    pub(super) fn failed(&self, command: &str) -> Diagnostic {
        let said = self.err.lines().find(|line| line.starts_with("fatal:"));
        let said = said.or_else(|| self.err.lines().next()).unwrap_or("it says nothing");
        let said = said.trim_start_matches("fatal: ");
        Diagnostic::error("git-failed", format!("`git {command}` failed: {said}"))
    }
}

pub(super) fn cannot_run(error: &std::io::Error) -> Diagnostic {
    match error.kind() {
        ErrorKind::NotFound => Diagnostic::error("no-git", "there is no program `git` on the PATH")
            .hint(
                "install git to read revisions; folders and records are read without it".to_owned(),
            ),
        _ => Diagnostic::error("no-git", format!("cannot run `git`: {}", reason(error))),
    }
}
