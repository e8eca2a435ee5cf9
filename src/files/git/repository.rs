//! Where a project folder lies in a repository, and which commit a revision means.

use std::path::{Component, Path, PathBuf};

use super::program::{Answer, Git};
use crate::diagnostic::Diagnostic;
use crate::diagnostic::near::nearest;
use crate::files::reason;

/// A project folder inside a repository.
pub(super) struct Place {
    pub(super) git: Git,
    /// From the root of the repository to the folder, empty or with `/` at its end.
    pub(super) prefix: String,
    /// There is a working copy that the folder lies in.
    pub(super) has_working_copy: bool,
    is_shallow: bool,
    shown: String,
}

impl Place {
    /// Finds the repository of a folder, which need not be there any more. Inside a bare repository the path
    /// goes on from its root: `works.git/beams/hall`.
    pub(super) fn of(folder: &Path) -> Result<Self, Diagnostic> {
        let (base, rest) = standing(folder);
        let git = Git { folder: base };
        let shown = folder.display().to_string();
        let answer = git.ask(&[
            "rev-parse",
            "--is-inside-git-dir",
            "--is-shallow-repository",
            "--show-prefix",
        ])?;
        if !answer.done {
            return Err(no_repository(&answer, &git.folder, &shown));
        }
        let out = String::from_utf8(answer.out)
            .map_err(|_| super::unreadable(&shown, "its name is not UTF-8"))?;
        let mut lines = out.splitn(3, '\n');
        let mut next = || lines.next().unwrap_or_default();
        let (is_inside, is_shallow) = (next() == "true", next() == "true");
        let inside = next();
        let inside = inside.strip_suffix('\n').unwrap_or(inside).to_owned();
        let inside = if is_inside { inside_git_dir(&git)? } else { inside };
        let prefix = joined(&inside, &rest).ok_or_else(|| outside(&shown))?;
        Ok(Self { git, prefix, has_working_copy: !is_inside, is_shallow, shown })
    }

    /// The full id of the commit that a revision means.
    pub(super) fn commit(&self, revision: &str) -> Result<String, Diagnostic> {
        if revision.is_empty() || revision.contains(char::is_control) {
            return Err(self.unknown(revision));
        }
        let asked = format!("{revision}^{{commit}}");
        let answer = self.git.ask(&["rev-parse", "--verify", "--end-of-options", &asked])?;
        if let Some(name) = quoted(&answer.err, "warning: refname '", "' is ambiguous") {
            return Err(self.several_names(revision, name));
        }
        if answer.err.contains(" only goes back to ") {
            let message =
                format!("what git remembers of branches does not reach back to `{revision}`");
            return Err(Diagnostic::error("unknown-revision", message)
                .hint("name a commit, a branch or a tag".to_owned()));
        }
        let id = answer.text();
        if answer.done && is_id(&id) { Ok(id) } else { Err(self.no_commit(revision)?) }
    }

    /// Why a revision means no commit.
    fn no_commit(&self, revision: &str) -> Result<Diagnostic, Diagnostic> {
        let names = self.git.ask(&["for-each-ref", "--format=%(refname:short)"])?;
        let names = names.text();
        let head = self.git.ask(&["rev-parse", "--verify", "--quiet", "HEAD"])?;
        if names.is_empty() && !head.done {
            let message = format!("the repository of `{}` has no commit yet", self.shown);
            return Ok(Diagnostic::error("no-commits", message)
                .hint("commit the project first".to_owned()));
        }
        let object =
            self.git.ask(&["rev-parse", "--verify", "--quiet", "--end-of-options", revision])?;
        if object.done && is_id(&object.text()) {
            let message = format!("`{revision}` is not a commit");
            return Ok(Diagnostic::error("unknown-revision", message)
                .hint("name a commit, a branch or a tag of a commit".to_owned()));
        }
        let several = self.same_beginning(revision)?;
        if several.len() > 1 {
            let message =
                format!("`{revision}` is the beginning of several ids: {}", several.join(", "));
            return Ok(Diagnostic::error("ambiguous-revision", message)
                .hint("write more of its digits".to_owned()));
        }
        let problem = self.unknown(revision);
        let remotes = self.git.ask(&["remote"])?.text();
        Ok(problem
            .hint(near(revision, &names).map(|near| format!("did you mean `{near}`?")))
            .hint(fetch(revision, &remotes)))
    }

    fn unknown(&self, revision: &str) -> Diagnostic {
        if self.is_shallow {
            let message =
                format!("there is no revision `{revision}` in this clone, which is shallow");
            return Diagnostic::error("shallow-clone", message).hint(
                "`git fetch --unshallow` brings the whole history; a CI file asks for it with \
                 `fetch-depth: 0` or `GIT_DEPTH: 0`"
                    .to_owned(),
            );
        }
        let message =
            format!("there is no revision `{revision}` in the repository of `{}`", self.shown);
        Diagnostic::error("unknown-revision", message)
    }

    /// A name that a branch and a tag have: git would take the tag, and nobody would see it.
    fn several_names(&self, revision: &str, name: &str) -> Diagnostic {
        let full = ["heads", "tags", "remotes"].map(|kind| format!("refs/{kind}/{name}"));
        let found = self
            .git
            .ask(&["for-each-ref", "--format=%(refname)", &full[0], &full[1], &full[2]])
            .map(|answer| answer.text())
            .unwrap_or_default();
        let found: Vec<String> = found
            .lines()
            .filter(|line| full.iter().any(|name| name == line))
            .map(|line| line.trim_start_matches("refs/").to_owned())
            .collect();
        let words = |name: &String| format!("`{}`", revision.replacen(name_of(revision), name, 1));
        let problem = Diagnostic::error(
            "ambiguous-revision",
            format!("`{name}` is the name of several things in the repository of `{}`", self.shown),
        );
        let choice: Vec<String> = found.iter().map(words).collect();
        problem.hint((!choice.is_empty()).then(|| format!("write {}", choice.join(" or "))))
    }

    /// The ids that begin with these digits.
    fn same_beginning(&self, revision: &str) -> Result<Vec<String>, Diagnostic> {
        let name = name_of(revision);
        if !is_hexadecimal(name) || name.len() < 4 {
            return Ok(Vec::new());
        }
        let answer = self.git.ask(&["rev-parse", &format!("--disambiguate={name}")])?;
        let beginning = |id: &str| format!("`{}`", &id[..id.len().min(12)]);
        Ok(answer.text().lines().map(beginning).collect())
    }
}

/// The part of a folder that is there, and the rest.
fn standing(folder: &Path) -> (PathBuf, PathBuf) {
    for base in folder.ancestors() {
        let here = if base.as_os_str().is_empty() { Path::new(".") } else { base };
        if here.is_dir() {
            let rest = folder.strip_prefix(base).unwrap_or(Path::new(""));
            return (here.to_owned(), rest.to_owned());
        }
    }
    (PathBuf::from("."), folder.to_owned())
}

/// A path inside the repository with the rest behind it, with `/` at its end unless it is the root; `None`
/// where it leads out.
fn joined(inside: &str, rest: &Path) -> Option<String> {
    let mut parts: Vec<&str> = inside.split('/').filter(|part| !part.is_empty()).collect();
    for part in rest.components() {
        match part {
            Component::Normal(part) => parts.push(part.to_str()?),
            Component::ParentDir => {
                parts.pop()?;
            }
            _ => {}
        }
    }
    Some(parts.iter().map(|part| format!("{part}/")).collect())
}

/// The path from a repository's own folder to where git runs: in a bare repository nothing of a project is
/// on the disk, but a folder of git's may have the same name as one of its projects.
fn inside_git_dir(git: &Git) -> Result<String, Diagnostic> {
    let root = git.ask(&["rev-parse", "--absolute-git-dir"])?;
    let refused = |error: &std::io::Error| {
        super::unreadable(&git.folder.display().to_string(), &reason(error))
    };
    let root = Path::new(&root.text()).canonicalize().map_err(|error| refused(&error))?;
    let here = git.folder.canonicalize().map_err(|error| refused(&error))?;
    let inside = here.strip_prefix(&root).unwrap_or(Path::new(""));
    Ok(inside.to_string_lossy().into_owned())
}

fn no_repository(answer: &Answer, base: &Path, shown: &str) -> Diagnostic {
    if answer.err.contains("dubious ownership") {
        let message = format!("the repository of `{shown}` belongs to another user");
        let path = base.canonicalize().unwrap_or_else(|_| base.to_owned());
        let root = quoted(&answer.err, "repository at '", "'").map(str::to_owned);
        let root = root.unwrap_or_else(|| path.display().to_string());
        return Diagnostic::error("foreign-repository", message)
            .hint(format!("if you trust it: `git config --global --add safe.directory '{root}'`"));
    }
    if !answer.err.contains("not a git repository") {
        return answer.failed("rev-parse");
    }
    outside(shown)
}

fn outside(shown: &str) -> Diagnostic {
    let message = format!("`{shown}` is not in a git repository");
    Diagnostic::error("no-repository", message)
        .hint("only a project under git has revisions".to_owned())
}

/// The text between two others.
fn quoted<'t>(text: &'t str, before: &str, after: &str) -> Option<&'t str> {
    text.split_once(before)?.1.split_once(after).map(|(between, _)| between)
}

fn is_id(text: &str) -> bool {
    text.len() >= 40 && is_hexadecimal(text)
}

fn is_hexadecimal(text: &str) -> bool {
    text.bytes().all(|byte| byte.is_ascii_hexdigit())
}

/// The name in a revision, without the steps behind it: `main` of `main~2`.
fn name_of(revision: &str) -> &str {
    let end = revision.find(['~', '^']).into_iter().chain(revision.find("@{")).min();
    &revision[..end.unwrap_or(revision.len())]
}

/// The revision with the name that was probably meant: a remote's branch of that name, or one that is
/// written almost alike.
fn near(revision: &str, names: &str) -> Option<String> {
    let name = name_of(revision);
    let (_, steps) = revision.split_at(name.len());
    if name.is_empty() {
        return None;
    }
    let of_remote = names.lines().find(|line| line.ends_with(&format!("/{name}")));
    let near = of_remote.or_else(|| nearest(name, names.lines()))?;
    Some(format!("{near}{steps}"))
}

/// How to bring a remote's branch that was not fetched.
fn fetch(revision: &str, remotes: &str) -> Option<String> {
    let (remote, branch) = name_of(revision).split_once('/')?;
    let known = remotes.lines().any(|line| line == remote);
    known.then(|| {
        format!(
            "if the remote has it: `git fetch {remote} {branch}:refs/remotes/{remote}/{branch}`"
        )
    })
}
