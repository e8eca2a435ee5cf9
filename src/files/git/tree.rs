//! Files of one commit.

use std::io::{BufRead, BufReader, Read, Write};
use std::process::{Child, ChildStdin, ChildStdout, Stdio};

use super::program::{Git, cannot_run};
use crate::diagnostic::Diagnostic;
use crate::files::reason;

/// What stands at a path of a commit.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Kind {
    File,
    Link,
    Submodule,
}

/// One path of a commit.
#[derive(Debug)]
pub(super) struct Entry {
    /// From the root of the repository.
    pub(super) path: Vec<u8>,
    pub(super) kind: Kind,
    pub(super) id: String,
    /// Unknown where a partial clone does not have the file.
    pub(super) size: Option<u64>,
}

/// Everything at or below some paths of a commit, in order of path; without paths everything.
pub(super) fn list(git: &Git, commit: &str, paths: &[String]) -> Result<Vec<Entry>, Diagnostic> {
    let mut words = vec!["ls-tree", "-r", "-z", "-l", "--full-tree", commit, "--"];
    words.extend(paths.iter().map(String::as_str));
    let answer = git.ask(&words)?;
    if !answer.done {
        return Err(answer.failed("ls-tree"));
    }
    Ok(answer.out.split(|byte| *byte == 0).filter_map(entry).collect())
}

/// `MODE TYPE ID SIZE<tab>PATH`
fn entry(line: &[u8]) -> Option<Entry> {
    let tab = line.iter().position(|byte| *byte == b'\t')?;
    let head = std::str::from_utf8(&line[..tab]).ok()?;
    let mut words = head.split_ascii_whitespace();
    let kind = match words.next()? {
        "120000" => Kind::Link,
        "160000" => Kind::Submodule,
        _ => Kind::File,
    };
    let (id, size) = (words.nth(1)?.to_owned(), words.next()?.parse().ok());
    Some(Entry { path: line[tab + 1..].to_vec(), kind, id, size })
}

/// A running `git cat-file --batch`.
pub(super) struct Contents {
    child: Child,
    /// Taken when the process is told to end.
    asked: Option<ChildStdin>,
    answers: BufReader<ChildStdout>,
}

impl Contents {
    pub(super) fn of(git: &Git) -> Result<Self, Diagnostic> {
        let mut child = git
            .command(&["cat-file", "--batch"])
            .stdin(Stdio::piped())
            .stdout(Stdio::piped())
            .stderr(Stdio::null())
            .spawn()
            .map_err(|error| cannot_run(&error))?;
        match (child.stdin.take(), child.stdout.take()) {
            (asked, Some(out)) => Ok(Self { child, asked, answers: BufReader::new(out) }),
            _ => Err(Diagnostic::error("git-failed", "`git cat-file` has no output")),
        }
    }

    /// The content of an object of known size; the reason where there is none. One question, one answer, so
    /// that neither side waits with a full pipe.
    pub(super) fn get(&mut self, id: &str) -> Result<Vec<u8>, String> {
        self.exchange(id).map_err(|error| reason(&error))?.ok_or_else(|| {
            "this clone does not have it; `git fetch --refetch --no-filter` brings all files"
                .to_owned()
        })
    }

    fn exchange(&mut self, id: &str) -> std::io::Result<Option<Vec<u8>>> {
        if let Some(asked) = &mut self.asked {
            writeln!(asked, "{id}")?;
            asked.flush()?;
        }
        let mut head = String::new();
        self.answers.read_line(&mut head)?;
        let size = head.split_ascii_whitespace().nth(2).and_then(|size| size.parse::<u64>().ok());
        let Some(size) = size else { return Ok(None) };
        let mut bytes = Vec::new();
        // A line end follows the content.
        (&mut self.answers).take(size + 1).read_to_end(&mut bytes)?;
        bytes.pop();
        Ok((bytes.len() as u64 == size).then_some(bytes))
    }
}

impl Drop for Contents {
    fn drop(&mut self) {
        // The end of its input is the end of the process.
        self.asked.take();
        let _ = self.child.wait();
    }
}
