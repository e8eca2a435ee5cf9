//! Git as it stands around a command: without the program, in another user's repository, inside a hook.

use std::process::Command;

use insta::assert_snapshot;

use super::project::BEAM;
use crate::repository::Repository;

/// A repository whose project carries 11 kN on the disk and 10 kN in its commit.
fn repository() -> Repository {
    let repository = Repository::of(&[("porch/project.yaml", BEAM)]);
    repository.put("porch/project.yaml", BEAM.replace("point: 10 kN", "point: 11 kN"));
    repository
}

/// Compares the working copy with its commit, with these variables; what was said, and how it ended.
fn compared(repository: &Repository, variables: &[(&str, &str)]) -> (i32, String) {
    let output = Command::new(env!("CARGO_BIN_EXE_spanfolio"))
        .args(["compare", "--since", "HEAD", "porch"])
        .current_dir(repository.path(""))
        .env_clear()
        .env("PATH", std::env::var_os("PATH").unwrap_or_default())
        .envs(variables.iter().copied())
        .output()
        .expect("the program runs");
    let said = [output.stdout, output.stderr].concat();
    let said = String::from_utf8(said).expect("UTF-8");
    let root = repository.room("").display().to_string();
    (output.status.code().expect("an exit status"), said.replace(&root, "/"))
}

#[test]
fn without_the_program_git_revisions_cannot_be_read_and_that_is_said() {
    let (status, said) = compared(&repository(), &[("PATH", "/nowhere")]);
    assert_eq!(status, 2);
    assert_snapshot!(said, @r"
    error[no-git]: there is no program `git` on the PATH
     |
     = help: install git to read revisions; folders and records are read without it
    ");
}

#[test]
fn a_repository_of_another_user_is_not_trusted_by_us_either() {
    let (status, said) = compared(&repository(), &[("GIT_TEST_ASSUME_DIFFERENT_OWNER", "1")]);
    assert_eq!(status, 2);
    assert_snapshot!(said, @r"
    error[foreign-repository]: the repository of `porch` belongs to another user
     |
     = help: if you trust it: `git config --global --add safe.directory '/works'`
    ");
}

#[test]
fn inside_a_hook_of_another_repository_the_folder_decides() {
    let other = Repository::of(&[("porch/project.yaml", "another\n")]);
    let folder = other.path(".git").display().to_string();
    let tree = other.path("").display().to_string();
    let index = other.path(".git/index").display().to_string();
    let (status, said) = compared(
        &repository(),
        &[("GIT_DIR", &folder), ("GIT_WORK_TREE", &tree), ("GIT_INDEX_FILE", &index)],
    );
    assert_eq!(status, 0, "{said}");
    assert!(said.contains("10\u{a0}kN") && said.contains("11\u{a0}kN"), "{said}");
}

#[test]
fn another_language_of_the_user_changes_nothing() {
    let (status, said) = compared(&repository(), &[("LANGUAGE", "de"), ("LC_ALL", "de_DE.UTF-8")]);
    assert_eq!(status, 0, "{said}");
}
