//! Which files of a project are not as committed.

use spanfolio::files;

use crate::repository::Repository;

const AT: &str = "beams/hall";

fn hall() -> Repository {
    Repository::of(&[
        ("beams/hall/project.yaml", "one\ntwo\n"),
        ("beams/hall/narrative/loads.md", "Loads\n"),
        ("beams/hall/narrative/basis.md", "Basis\n"),
    ])
}

fn uncommitted(repository: &Repository) -> Option<Vec<String>> {
    files::uncommitted(&repository.path(AT))
}

fn names(names: &[&str]) -> Option<Vec<String>> {
    Some(names.iter().map(|name| (*name).to_owned()).collect())
}

#[test]
fn a_clean_project_has_none() {
    assert_eq!(uncommitted(&hall()), names(&[]));
}

#[test]
fn changed_new_and_deleted_files_in_order() {
    let repository = hall();
    repository.put("beams/hall/project.yaml", "one\nthree\n");
    repository.put("beams/hall/checks/own.yaml", "new\n");
    std::fs::remove_file(repository.path("beams/hall/narrative/loads.md")).expect("removed");
    let expected = names(&["checks/own.yaml", "narrative/loads.md", "project.yaml"]);
    assert_eq!(uncommitted(&repository), expected);
}

#[test]
fn a_staged_change_is_not_committed() {
    let repository = hall();
    repository.put("beams/hall/project.yaml", "one\nthree\n");
    repository.git(&["add", "--all"]);
    assert_eq!(uncommitted(&repository), names(&["project.yaml"]));
}

#[test]
fn a_file_that_git_ignores_counts_since_the_program_reads_it() {
    let repository = hall();
    repository.put(".gitignore", "*.md\n");
    repository.put("beams/hall/narrative/more.md", "More\n");
    assert_eq!(uncommitted(&repository), names(&["narrative/more.md"]));
}

#[test]
fn files_that_are_not_of_the_project_do_not_count() {
    let repository = hall();
    repository.put("beams/hall/package/package.md", "new\n");
    repository.put("beams/hall/notes.md", "new\n");
    repository.put("beams/project.yaml", "new\n");
    assert_eq!(uncommitted(&repository), names(&[]));
}

#[test]
fn a_checkout_with_line_ends_of_another_system_is_clean() {
    let repository = hall();
    repository.beside(&["-c", "core.autocrlf=true", "clone", "--quiet", "works", "clone"]);
    let folder = repository.room("clone/beams/hall");
    let raw = std::fs::read(folder.join("project.yaml")).expect("a file");
    assert_eq!(raw, b"one\r\ntwo\r\n");
    assert_eq!(files::uncommitted(&folder), names(&[]));
}

#[test]
fn everything_of_a_repository_without_commits() {
    let repository = Repository::empty();
    repository.put("beams/hall/project.yaml", "A\n");
    assert_eq!(uncommitted(&repository), names(&["project.yaml"]));
}

#[test]
fn a_project_that_was_deleted() {
    let repository = hall();
    std::fs::remove_dir_all(repository.path("beams")).expect("removed");
    let expected = names(&["narrative/basis.md", "narrative/loads.md", "project.yaml"]);
    assert_eq!(uncommitted(&repository), expected);
}

#[test]
fn a_project_named_by_its_file() {
    let repository = hall();
    repository.put("beams/hall/project.yaml", "one\nthree\n");
    let file = repository.path("beams/hall/project.yaml");
    assert_eq!(files::uncommitted(&file), names(&["project.yaml"]));
}

#[test]
fn another_working_copy_is_held_against_its_own_commit() {
    let repository = hall();
    repository.git(&["worktree", "add", "--quiet", "--detach", "../second"]);
    repository.put("beams/hall/project.yaml", "one\nthree\n");
    repository.commit("Second issue");
    assert_eq!(files::uncommitted(&repository.room("second/beams/hall")), names(&[]));
}

#[test]
fn a_file_that_is_damaged_in_the_commit_differs() {
    let repository = hall();
    repository.put("beams/hall/narrative/loads.md", b"\xff");
    repository.commit("Damaged");
    repository.put("beams/hall/narrative/loads.md", "Loads\n");
    assert_eq!(uncommitted(&repository), names(&["narrative/loads.md"]));
}

#[cfg(unix)]
#[test]
fn a_committed_link_is_taken_as_committed() {
    let repository = hall();
    let link = repository.path("beams/hall/narrative/copy.md");
    std::os::unix::fs::symlink("loads.md", link).expect("a link");
    repository.commit("Copy");
    assert_eq!(uncommitted(&repository), names(&[]));
}

#[test]
fn there_is_none_outside_a_repository() {
    assert_eq!(files::uncommitted(&hall().room("")), None);
}

#[test]
fn there_is_none_in_a_bare_repository() {
    let repository = hall();
    repository.beside(&["clone", "--quiet", "--bare", "works", "works.git"]);
    assert_eq!(files::uncommitted(&repository.room("works.git/beams/hall")), None);
}
