//! What cannot be read at a git revision, and what is said then.

use std::fmt::Write;
use std::path::Path;

use insta::assert_snapshot;
use spanfolio::files;

use crate::repository::Repository;

const HALL: &str = "beams/hall/project.yaml";
const AT: &str = "beams/hall";

fn hall() -> Repository {
    Repository::of(&[(HALL, "A\n")])
}

/// What is said of a folder at a revision, with the place of the repository left out.
fn said_of(repository: &Repository, folder: &Path, revision: &str) -> String {
    let problems = files::read_at(folder, revision).expect_err("nothing to read");
    let mut said = String::new();
    for problem in problems {
        let _ = writeln!(said, "{}: {}", problem.code, problem.message);
        for hint in problem.hints {
            let _ = writeln!(said, "  {hint}");
        }
    }
    said.replace(&repository.room("").display().to_string(), "")
}

fn said(repository: &Repository, revision: &str) -> String {
    said_of(repository, &repository.path(AT), revision)
}

#[test]
fn a_folder_outside_every_repository() {
    let repository = hall();
    assert_snapshot!(said_of(&repository, &repository.room(""), "HEAD"), @r"
    no-repository: `` is not in a git repository
      only a project under git has revisions
    ");
}

#[test]
fn a_path_that_leads_out_of_the_repository() {
    let repository = hall();
    let out = repository.path("gone/../../../beams");
    assert_snapshot!(said_of(&repository, &out, "HEAD"), @r"
    no-repository: `works/gone/../../../beams` is not in a git repository
      only a project under git has revisions
    ");
}

#[test]
fn a_repository_without_commits() {
    let repository = Repository::empty();
    repository.put(HALL, "A\n");
    assert_snapshot!(said(&repository, "HEAD"), @r"
    no-commits: the repository of `works/beams/hall` has no commit yet
      commit the project first
    ");
}

#[test]
fn an_unknown_revision() {
    assert_snapshot!(said(&hall(), "issue-A"), @r"unknown-revision: there is no revision `issue-A` in the repository of `works/beams/hall`");
}

#[test]
fn a_slip_in_the_name_of_a_branch() {
    assert_snapshot!(said(&hall(), "mian~2"), @r"
    unknown-revision: there is no revision `mian~2` in the repository of `works/beams/hall`
      did you mean `main~2`?
    ");
}

#[test]
fn a_branch_that_only_the_remote_has() {
    let repository = hall();
    repository.git(&["branch", "revision-b"]);
    repository.beside(&["clone", "--quiet", "works", "clone"]);
    let folder = repository.room("clone/beams/hall");
    assert_snapshot!(said_of(&repository, &folder, "revision-b"), @r"
    unknown-revision: there is no revision `revision-b` in the repository of `clone/beams/hall`
      did you mean `origin/revision-b`?
    ");
}

#[test]
fn a_branch_of_a_remote_that_was_not_fetched() {
    let repository = hall();
    repository.git(&["branch", "revision-b"]);
    repository.beside(&["clone", "--quiet", "--single-branch", "works", "clone"]);
    let folder = repository.room("clone/beams/hall");
    assert_snapshot!(said_of(&repository, &folder, "origin/revision-b"), @r"
    unknown-revision: there is no revision `origin/revision-b` in the repository of `clone/beams/hall`
      if the remote has it: `git fetch origin revision-b:refs/remotes/origin/revision-b`
    ");
}

#[test]
fn a_revision_that_a_shallow_clone_does_not_have() {
    let repository = hall();
    repository.commit("Second issue");
    let url = format!("file://{}", repository.path("").display());
    repository.beside(&["clone", "--quiet", "--depth", "1", &url, "shallow"]);
    let folder = repository.room("shallow/beams/hall");
    assert_snapshot!(said_of(&repository, &folder, "HEAD~1"), @r"
    shallow-clone: there is no revision `HEAD~1` in this clone, which is shallow
      `git fetch --unshallow` brings the whole history; a CI file asks for it with `fetch-depth: 0` or `GIT_DEPTH: 0`
    ");
}

#[test]
fn files_that_a_partial_clone_does_not_have_are_not_fetched() {
    let repository = hall();
    repository.git(&["config", "uploadpack.allowFilter", "true"]);
    repository.put(HALL, "B\n");
    repository.commit("Second issue");
    let url = format!("file://{}", repository.path("").display());
    repository.beside(&["clone", "--quiet", "--filter=blob:none", &url, "partial"]);
    let folder = repository.room("partial/beams/hall");
    assert_snapshot!(said_of(&repository, &folder, "HEAD~1"), @r"cannot-read: cannot read `HEAD~1:beams/hall/project.yaml`: this clone does not have it; `git fetch --refetch --no-filter` brings all files");
}

#[test]
fn folders_that_a_partial_clone_does_not_have_are_not_fetched() {
    let repository = hall();
    repository.git(&["config", "uploadpack.allowFilter", "true"]);
    repository.put(HALL, "B\n");
    repository.commit("Second issue");
    let url = format!("file://{}", repository.path("").display());
    repository.beside(&["clone", "--quiet", "--filter=tree:0", &url, "partial"]);
    let folder = repository.room("partial/beams/hall");
    assert_snapshot!(said_of(&repository, &folder, "HEAD~1"), @r"git-failed: `git ls-tree` failed: not a tree object");
}

#[test]
fn a_revision_never_becomes_an_option() {
    let repository = hall();
    for revision in ["--all", "-h", "--git-dir", "--not"] {
        assert!(said(&repository, revision).starts_with("unknown-revision"), "{revision}");
    }
}

#[test]
fn a_set_of_commits_is_not_a_revision() {
    let repository = hall();
    repository.commit("Second issue");
    for revision in ["HEAD~1..HEAD", "^HEAD", "HEAD HEAD", "", "HEAD\nHEAD", "HEAD\0"] {
        assert!(said(&repository, revision).starts_with("unknown-revision"), "{revision:?}");
    }
}

#[test]
fn a_tag_of_something_else_than_a_commit() {
    let repository = hall();
    repository.git(&["tag", "file", &format!("HEAD:{HALL}")]);
    assert_snapshot!(said(&repository, "file"), @r"
    unknown-revision: `file` is not a commit
      name a commit, a branch or a tag of a commit
    ");
}

#[test]
fn a_name_that_a_branch_and_a_tag_have() {
    let repository = hall();
    repository.git(&["branch", "issue-A"]);
    repository.commit("Second issue");
    repository.git(&["tag", "issue-A"]);
    assert_snapshot!(said(&repository, "issue-A~1"), @r"
    ambiguous-revision: `issue-A` is the name of several things in the repository of `works/beams/hall`
      write `heads/issue-A~1` or `tags/issue-A~1`
    ");
}

#[test]
fn either_of_two_things_of_one_name_can_be_meant() {
    let repository = hall();
    repository.git(&["branch", "issue-A"]);
    repository.put(HALL, "B\n");
    repository.commit("Second issue");
    repository.git(&["tag", "issue-A"]);
    let project = |revision| {
        let at = files::read_at(&repository.path(AT), revision).expect("a revision");
        at.sources.project().to_owned()
    };
    assert_eq!((project("heads/issue-A"), project("tags/issue-A")), ("A\n".into(), "B\n".into()));
}

#[test]
fn a_beginning_that_several_commits_have() {
    let repository = Repository::empty();
    let commit = |number: usize| {
        format!("commit refs/heads/main\ncommitter E <e@example.org> {number} +0000\ndata 0\n\n")
    };
    let history: String = (1..=1000).map(commit).collect();
    repository.git_reads(&["fast-import", "--quiet"], &history);
    let ids = repository.git(&["rev-list", "main"]);
    let mut beginnings: Vec<&str> = ids.lines().map(|id| &id[..4]).collect();
    beginnings.sort_unstable();
    let twice = beginnings.windows(2).find(|two| two[0] == two[1]).expect("two of a thousand")[0];
    assert_snapshot!(said(&repository, twice), @r"
    ambiguous-revision: `1913` is the beginning of several ids: `19135058bef1`, `1913be8ab057`
      write more of its digits
    ");
}

#[test]
fn a_branch_asked_for_before_git_remembers_it() {
    let repository = hall();
    assert_snapshot!(said(&repository, "main@{2001-01-01}"), @r"
    unknown-revision: what git remembers of branches does not reach back to `main@{2001-01-01}`
      name a commit, a branch or a tag
    ");
}

#[test]
fn a_folder_without_a_project_at_that_revision_names_those_with_one() {
    let repository = hall();
    repository.put("beams/barn/project.yaml", "A\n");
    repository.commit("A barn");
    let folder = repository.path("beams/barn");
    assert_snapshot!(said_of(&repository, &folder, "HEAD~1"), @r"
    missing-at-revision: there is no `project.yaml` in `beams/barn` at `HEAD~1`
      projects at that revision: `beams/hall`
    ");
}

#[test]
fn a_repository_without_any_project_at_that_revision() {
    let repository = Repository::of(&[("read.me", "nothing yet\n")]);
    repository.put("project.yaml", "A\n");
    assert_snapshot!(said_of(&repository, &repository.path(""), "HEAD"), @r"
    missing-at-revision: there is no `project.yaml` at `HEAD`
      no folder of the repository had a project then
    ");
}

#[cfg(unix)]
#[test]
fn a_project_file_that_is_a_link() {
    let repository = hall();
    std::fs::create_dir_all(repository.path("beams/barn")).expect("a folder");
    let link = repository.path("beams/barn/project.yaml");
    std::os::unix::fs::symlink("../hall/project.yaml", link).expect("a link");
    repository.commit("A barn like the hall");
    assert_snapshot!(said_of(&repository, &repository.path("beams/barn"), "HEAD"), @r"
    link-at-revision: `HEAD:beams/barn/project.yaml` is a link; links are not followed at a revision
      commit the file itself in its place
    ");
}

#[cfg(unix)]
#[test]
fn templates_that_are_a_link() {
    let repository = hall();
    std::os::unix::fs::symlink("/etc", repository.path("beams/hall/templates")).expect("a link");
    repository.commit("Templates");
    assert_snapshot!(said(&repository, "HEAD"), @r"
    link-at-revision: `HEAD:beams/hall/templates` is a link; links are not followed at a revision
      commit the file itself in its place
    ");
}

#[test]
fn templates_that_are_a_submodule() {
    let other = Repository::of(&[("cover.md", "Cover\n")]);
    let repository = hall();
    let url = other.path("").display().to_string();
    repository.git(&["submodule", "--quiet", "add", &url, "beams/hall/templates"]);
    repository.commit("Templates");
    assert_snapshot!(said(&repository, "HEAD"), @r"
    submodule-at-revision: `HEAD:beams/hall/templates` is a submodule; a project lies in one repository
      commit the file itself in its place
    ");
}

#[test]
fn a_project_file_that_is_a_folder() {
    let repository = Repository::of(&[("beams/hall/project.yaml/a", "A\n")]);
    assert!(said(&repository, "HEAD").starts_with("missing-at-revision"));
}

#[test]
fn a_file_in_place_of_a_folder() {
    let repository = Repository::of(&[(HALL, "A\n"), ("beams/hall/checks", "A\n")]);
    assert_snapshot!(said(&repository, "HEAD"), @r"cannot-read: cannot read `HEAD:beams/hall/checks`: not a directory");
}

#[test]
fn a_file_that_is_too_large() {
    let repository = Repository::of(&[(HALL, &"a".repeat((8 << 20) + 1))]);
    assert_snapshot!(said(&repository, "HEAD"), @r"too-large: `HEAD:beams/hall/project.yaml` is larger than 8 MiB");
}

#[test]
fn a_file_that_is_not_text() {
    let repository = hall();
    repository.put("beams/hall/narrative/loads.md", b"one\ntw\xff\n");
    repository.commit("Loads");
    assert_snapshot!(said(&repository, "HEAD"), @r"
    not-text: `HEAD:beams/hall/narrative/loads.md` is not UTF-8 at line 2, column 3
      save the file as UTF-8 text
    ");
}

#[test]
fn too_many_files_are_said_once() {
    let repository = hall();
    for number in 0..510 {
        repository.put(&format!("beams/hall/narrative/{number:03}.md"), "Text\n");
    }
    repository.commit("Much");
    assert_snapshot!(said(&repository, "HEAD"), @r"too-many-files: a project has at most 500 files, `narrative/500.md` is one more");
}

#[test]
fn folders_that_are_too_deep_are_refused_as_on_the_disk() {
    let repository = hall();
    let deep = |folders: usize| format!("beams/hall/narrative/{}", "a/".repeat(folders));
    repository.put(&format!("{}b.md", deep(7)), "Text\n");
    repository.commit("Deep enough");
    assert!(files::read_at(&repository.path(AT), "HEAD").is_ok());
    assert!(files::read(&repository.path(AT)).is_ok());
    repository.put(&format!("{}b.md", deep(8)), "Text\n");
    repository.put(&format!("{}c.md", deep(8)), "Text\n");
    repository.commit("Too deep");
    assert!(files::read(&repository.path(AT)).is_err());
    assert_snapshot!(said(&repository, "HEAD"), @r"too-deep: `HEAD:beams/hall/narrative/a/a/a/a/a/a/a/a` is more than 8 folders deep");
}

#[test]
fn every_problem_of_a_revision_comes_in_one_run() {
    let repository = hall();
    repository.put(HALL, b"\xff");
    repository.put("beams/hall/checks/own.yaml", b"\xff");
    repository.commit("Two");
    assert_eq!(said(&repository, "HEAD").matches("not-text").count(), 2);
}
