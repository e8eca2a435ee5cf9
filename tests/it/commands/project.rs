//! A project in a temporary folder, and the program run on it.

use std::collections::BTreeMap;
use std::fmt::Write;
use std::path::{Path, PathBuf};
use std::process::Command;

use tempfile::TempDir;

/// A project folder that goes away with the test.
pub(super) struct Project {
    folder: TempDir,
}

/// What a run said and how it ended.
pub(super) struct Run {
    pub(super) status: i32,
    pub(super) out: String,
    pub(super) err: String,
}

impl Project {
    /// A copy of a demo project, without its package.
    pub(super) fn demo(name: &str) -> Self {
        let demo = Path::new(env!("CARGO_MANIFEST_DIR")).join("demo-projects").join(name);
        let sources = spanfolio::files::read(&demo).expect("a demo project");
        let project = Self::empty();
        for (name, content) in &sources.files {
            project.put(name, content);
        }
        project
    }

    /// A folder with this project file.
    pub(super) fn of(yaml: &str) -> Self {
        let project = Self { folder: TempDir::new().expect("a temporary folder") };
        project.put("project.yaml", yaml.as_bytes());
        project
    }

    /// An empty folder.
    pub(super) fn empty() -> Self {
        Self { folder: TempDir::new().expect("a temporary folder") }
    }

    pub(super) fn path(&self, name: &str) -> PathBuf {
        self.folder.path().join(name)
    }

    /// Writes a file, folders included.
    pub(super) fn put(&self, name: &str, content: &[u8]) {
        let path = self.path(name);
        std::fs::create_dir_all(path.parent().expect("a folder")).expect("a folder");
        write(&path, content);
    }

    /// Replaces a text that occurs exactly once.
    pub(super) fn edit(&self, name: &str, old: &str, new: &str) {
        let text = String::from_utf8(self.get(name)).expect("UTF-8");
        assert_eq!(text.matches(old).count(), 1, "`{old}` must occur once in {name}");
        self.put(name, text.replacen(old, new, 1).as_bytes());
    }

    pub(super) fn get(&self, name: &str) -> Vec<u8> {
        std::fs::read(self.path(name)).unwrap_or_else(|error| panic!("{name}: {error}"))
    }

    /// Every file below a folder of the project.
    pub(super) fn files(&self, below: &str) -> BTreeMap<String, Vec<u8>> {
        let mut out = BTreeMap::new();
        collect(&self.path(below), String::new(), &mut out);
        out
    }

    /// Runs `spanfolio WORDS`, where `.` stands for the project's folder.
    pub(super) fn run(&self, words: &[&str]) -> Run {
        let folder = self.folder.path().display().to_string();
        let words: Vec<&str> =
            words.iter().map(|word| if *word == "." { folder.as_str() } else { *word }).collect();
        let mut run = run(&words);
        for text in [&mut run.out, &mut run.err] {
            *text = text.replace(&folder, "[PROJECT]");
        }
        run
    }
}

impl Run {
    /// For snapshots.
    pub(super) fn shown(&self) -> String {
        let mut out = format!("exit: {}\n", self.status);
        for (name, text) in [("stdout", &self.out), ("stderr", &self.err)] {
            if !text.is_empty() {
                let _ = writeln!(out, "--- {name}\n{}", text.trim_end());
            }
        }
        out
    }
}

/// Runs the program with an empty environment.
pub(super) fn run(words: &[&str]) -> Run {
    let output = Command::new(env!("CARGO_BIN_EXE_spanfolio"))
        .args(words)
        .env_clear()
        .output()
        .expect("the program runs");
    Run {
        status: output.status.code().expect("an exit status"),
        out: String::from_utf8(output.stdout).expect("UTF-8"),
        err: String::from_utf8(output.stderr).expect("UTF-8"),
    }
}

#[expect(clippy::disallowed_methods, reason = "the program's own writing is what is tested")]
fn write(path: &Path, content: &[u8]) {
    std::fs::write(path, content).expect("a file written");
}

fn collect(folder: &Path, prefix: String, out: &mut BTreeMap<String, Vec<u8>>) {
    let Ok(entries) = std::fs::read_dir(folder) else { return };
    for entry in entries {
        let entry = entry.expect("an entry");
        let name = format!("{prefix}{}", entry.file_name().to_string_lossy());
        if entry.path().is_dir() {
            collect(&entry.path(), format!("{name}/"), out);
        } else {
            out.insert(name, std::fs::read(entry.path()).expect("a file"));
        }
    }
}

/// A beam small enough to show whole.
pub(super) const BEAM: &str = "\
format: 1
project:
  title: Porch
  number: P-1
  revisions:
    - {mark: A, date: 2026-03-01, status: for checking, note: First issue}
materials:
  steel: {grade: S275}
sections:
  beam: {catalogue: IPE 200}
frame: plane
nodes: {A: [0 m, 0 m], B: [6 m, 0 m]}
members:
  B1: {along: [A, B], section: beam, material: steel}
supports: {A: pinned, B: {Z: fixed}}
load_cases:
  Q:
    title: Load
    nature: imposed
    loads:
      - {member: B1, point: 10 kN, at: 2 m}
combinations:
  written:
    - {title: all, purpose: strength, factors: {Q: 1.5}, source: a test}
    - {title: some, purpose: strength, factors: {Q: 1.2}, source: a test}
";
