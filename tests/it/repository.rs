//! A git repository in a temporary folder, the same on every machine.

use std::io::Write as _;
use std::path::{Path, PathBuf};
use std::process::{Command, Stdio};

use tempfile::TempDir;

/// A repository that goes away with the test, with room beside it for clones.
pub(crate) struct Repository {
    room: TempDir,
}

impl Repository {
    /// An empty repository.
    pub(crate) fn empty() -> Self {
        let repository = Self { room: TempDir::new().expect("a temporary folder") };
        repository.beside(&["init", "--quiet", "works"]);
        repository
    }

    /// A repository whose one commit holds these files.
    pub(crate) fn of(files: &[(&str, &str)]) -> Self {
        let repository = Self::empty();
        for (name, text) in files {
            repository.put(name, text);
        }
        repository.commit("First issue");
        repository
    }

    /// A path in the working copy; `""` is its root.
    pub(crate) fn path(&self, name: &str) -> PathBuf {
        self.room.path().join("works").join(name)
    }

    /// A path beside the repository.
    pub(crate) fn room(&self, name: &str) -> PathBuf {
        self.room.path().join(name)
    }

    pub(crate) fn put(&self, name: &str, content: impl AsRef<[u8]>) {
        let path = self.path(name);
        std::fs::create_dir_all(path.parent().expect("a folder")).expect("a folder");
        let mut file = std::fs::File::create(&path).expect("a file");
        file.write_all(content.as_ref()).expect("a file written");
    }

    /// Commits everything; the full id.
    pub(crate) fn commit(&self, message: &str) -> String {
        self.git(&["add", "--all"]);
        self.git(&["commit", "--quiet", "--allow-empty", "-m", message]);
        self.git(&["rev-parse", "HEAD"])
    }

    /// Runs git in the working copy; what it printed.
    pub(crate) fn git(&self, words: &[&str]) -> String {
        git(&self.path(""), words, "")
    }

    /// Runs git in the folder beside the working copy.
    pub(crate) fn beside(&self, words: &[&str]) -> String {
        git(self.room.path(), words, "")
    }

    /// Runs git in the working copy with something to read.
    pub(crate) fn git_reads(&self, words: &[&str], input: &str) -> String {
        git(&self.path(""), words, input)
    }
}

/// Git without the configuration of this machine and with fixed names and dates.
fn git(folder: &Path, words: &[&str], input: &str) -> String {
    let mut command = Command::new("git");
    command
        .current_dir(folder)
        .env_clear()
        .env("PATH", std::env::var_os("PATH").unwrap_or_default())
        .env("HOME", folder)
        .env("GIT_CONFIG_NOSYSTEM", "1")
        .env("GIT_CONFIG_GLOBAL", "/dev/null")
        .args(["-c", "init.defaultBranch=main", "-c", "protocol.file.allow=always"])
        .args(["-c", "advice.detachedHead=false", "-c", "core.autocrlf=false"])
        .args(words)
        .stdin(Stdio::piped())
        .stdout(Stdio::piped())
        .stderr(Stdio::piped());
    for who in ["AUTHOR", "COMMITTER"] {
        command
            .env(format!("GIT_{who}_NAME"), "An Engineer")
            .env(format!("GIT_{who}_EMAIL"), "engineer@example.org")
            .env(format!("GIT_{who}_DATE"), "2026-03-01T12:00:00Z");
    }
    let mut child = command.spawn().expect("git runs");
    child.stdin.take().expect("its input").write_all(input.as_bytes()).expect("git reads");
    let output = child.wait_with_output().expect("git ends");
    let said = String::from_utf8_lossy(&output.stderr);
    assert!(output.status.success(), "git {words:?}: {said}");
    String::from_utf8_lossy(&output.stdout).trim().to_owned()
}
