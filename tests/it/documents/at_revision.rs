//! A project as it stood at a git revision.

use std::collections::BTreeMap;
use std::path::Path;

use spanfolio::files::{self, AtRevision, Sources};

use crate::repository::Repository;

const HALL: &str = "beams/hall/project.yaml";
const AT: &str = "beams/hall";

/// A hall whose project file said `A` in the first commit, tagged `issue-A`, and says `B` in the second.
fn hall() -> Repository {
    let repository = Repository::of(&[(HALL, "A\n")]);
    repository.git(&["tag", "issue-A"]);
    repository.put(HALL, "B\n");
    repository.commit("Second issue");
    repository
}

fn read(folder: &Path, revision: &str) -> AtRevision {
    files::read_at(folder, revision).unwrap_or_else(|problems| panic!("{revision}: {problems:#?}"))
}

/// The project file of the hall at a revision.
fn project(repository: &Repository, revision: &str) -> String {
    read(&repository.path(AT), revision).sources.project().to_owned()
}

#[test]
fn a_revision_is_read_as_committed_and_not_as_it_lies_on_the_disk() {
    let repository = hall();
    repository.put(HALL, "C, not committed\n");
    assert_eq!(project(&repository, "HEAD"), "B\n");
}

#[test]
fn a_commit_before_the_last() {
    assert_eq!(project(&hall(), "HEAD~1"), "A\n");
}

#[test]
fn a_tag() {
    assert_eq!(project(&hall(), "issue-A"), "A\n");
}

#[test]
fn a_tag_with_a_message() {
    let repository = hall();
    repository.git(&["tag", "-a", "-m", "for checking", "checking", "HEAD~1"]);
    assert_eq!(project(&repository, "checking"), "A\n");
}

#[test]
fn a_branch_of_a_remote() {
    let repository = hall();
    repository.beside(&["clone", "--quiet", "works", "clone"]);
    let at = read(&repository.room("clone/beams/hall"), "origin/main");
    assert_eq!(at.sources.project(), "B\n");
}

#[test]
fn a_revision_with_spaces_in_it() {
    assert_eq!(project(&hall(), "HEAD^{/First issue}"), "A\n");
}

#[test]
fn the_beginning_of_a_commit_id() {
    let repository = hall();
    let id = repository.git(&["rev-parse", "issue-A"]);
    assert_eq!(project(&repository, &id[..9]), "A\n");
}

#[test]
fn the_commit_is_named_in_full() {
    let repository = hall();
    let id = repository.git(&["rev-parse", "issue-A"]);
    assert_eq!(read(&repository.path(AT), "issue-A").commit, id);
}

#[test]
fn every_demo_reads_the_same_from_a_commit_as_from_its_folder() {
    for demo in ["gallery-floor", "pump-platform", "workshop-portal"] {
        let sources = crate::support::demo(demo);
        let repository = Repository::empty();
        for (name, content) in &sources.files {
            repository.put(name, content);
        }
        repository.commit(demo);
        assert_eq!(read(&repository.path(""), "HEAD").sources, sources, "{demo}");
    }
}

#[test]
fn what_belongs_to_a_project_is_the_same_in_a_commit_as_on_the_disk() {
    let repository = Repository::of(&[
        (HALL, "A\n"),
        ("beams/hall/narrative/basis/loads.md", "Loads\n"),
        ("beams/hall/templates/cover.md", "Cover\n"),
        ("beams/hall/checks/own.yaml", "Own\n"),
        ("beams/hall/checks/.draft.yaml", "hidden"),
        ("beams/hall/narrative/.draft/loads.md", "hidden"),
        ("beams/hall/notes/own.md", "elsewhere"),
        ("beams/hall/readme.md", "elsewhere"),
        ("beams/hall/project.yaml.old", "elsewhere"),
        ("beams/hall 2/project.yaml", "another"),
        ("beams/project.yaml", "another"),
    ]);
    let at = read(&repository.path(AT), "HEAD").sources;
    let names: Vec<&str> = at.files.keys().map(String::as_str).collect();
    let expected =
        ["checks/own.yaml", "narrative/basis/loads.md", "project.yaml", "templates/cover.md"];
    assert_eq!(names, expected);
    assert_eq!(at, files::read(&repository.path(AT)).expect("a project"));
}

#[test]
fn byte_order_mark_and_line_ends_of_another_system_go() {
    let repository = Repository::of(&[(HALL, "\u{feff}one\r\ntwo\r\n")]);
    assert_eq!(project(&repository, "HEAD"), "one\ntwo\n");
}

#[test]
fn the_record_of_the_committed_package_comes_along() {
    let repository =
        Repository::of(&[(HALL, "A\n"), ("beams/hall/package/record.json", "{\"format\": 1}\n")]);
    let at = read(&repository.path(AT), "HEAD");
    assert_eq!(at.record.as_deref(), Some(b"{\"format\": 1}\n".as_slice()));
}

#[test]
fn a_project_that_was_never_issued_has_no_record() {
    assert_eq!(read(&hall().path(AT), "HEAD").record, None);
}

#[test]
fn a_folder_that_is_gone() {
    let repository = hall();
    repository.git(&["rm", "--quiet", "-r", "beams"]);
    repository.commit("Given up");
    assert!(!repository.path("beams").exists());
    assert_eq!(project(&repository, "issue-A"), "A\n");
}

#[test]
fn a_folder_that_is_gone_named_by_a_way_round() {
    let repository = hall();
    repository.git(&["rm", "--quiet", "-r", "beams"]);
    let way_round = repository.path("gone/../beams/./hall");
    assert_eq!(read(&way_round, "issue-A").sources.project(), "A\n");
}

#[test]
fn a_project_named_by_its_file() {
    assert_eq!(read(&hall().path(HALL), "issue-A").sources.project(), "A\n");
}

#[test]
fn a_project_in_the_root_of_its_repository() {
    let repository = Repository::of(&[("project.yaml", "A\n")]);
    assert_eq!(read(&repository.path(""), "HEAD").sources.project(), "A\n");
}

#[test]
fn a_bare_repository_and_the_path_on_from_its_root() {
    let repository = hall();
    repository.beside(&["clone", "--quiet", "--bare", "works", "works.git"]);
    let at = read(&repository.room("works.git/beams/hall"), "issue-A");
    assert_eq!(at.sources.project(), "A\n");
}

#[test]
fn a_project_in_the_root_of_a_bare_repository() {
    let repository = Repository::of(&[("project.yaml", "A\n")]);
    repository.beside(&["clone", "--quiet", "--bare", "works", "works.git"]);
    assert_eq!(read(&repository.room("works.git"), "main").sources.project(), "A\n");
}

#[test]
fn a_project_in_a_bare_repository_may_be_named_like_a_folder_of_git() {
    let repository = Repository::of(&[("objects/info/project.yaml", "A\n")]);
    repository.beside(&["clone", "--quiet", "--bare", "works", "works.git"]);
    assert!(repository.room("works.git/objects/info").is_dir());
    let at = read(&repository.room("works.git/objects/info"), "main");
    assert_eq!(at.sources.project(), "A\n");
}

#[test]
fn another_working_copy_of_the_same_repository() {
    let repository = hall();
    repository.git(&["worktree", "add", "--quiet", "--detach", "../second", "issue-A"]);
    assert!(repository.room("second/.git").is_file());
    let folder = repository.room("second/beams/hall");
    assert_eq!(read(&folder, "HEAD").sources.project(), "A\n");
    assert_eq!(read(&folder, "main").sources.project(), "B\n");
}

#[test]
fn what_a_shallow_clone_has() {
    let repository = hall();
    let url = format!("file://{}", repository.path("").display());
    repository.beside(&["clone", "--quiet", "--depth", "1", &url, "shallow"]);
    let at = read(&repository.room("shallow/beams/hall"), "HEAD");
    assert_eq!(at.sources.project(), "B\n");
}

#[test]
fn names_with_spaces_and_letters_of_other_scripts() {
    let names = ["Straße 7/Dach ß (neu)", "梁/#1 [a]*?", ":(top)x", "-c", "it's \"so\""];
    for name in names {
        let file = format!("{name}/project.yaml");
        let narrative = format!("{name}/narrative/größe \"2\".md");
        let repository = Repository::of(&[(&file, "A\n"), (&narrative, "Text\n")]);
        let at = read(&repository.path(name), "HEAD").sources;
        let files = [("narrative/größe \"2\".md", "Text\n"), ("project.yaml", "A\n")];
        let expected: BTreeMap<String, Vec<u8>> =
            files.map(|(name, text)| (name.to_owned(), text.as_bytes().to_vec())).into();
        assert_eq!(at, Sources { files: expected }, "{name}");
    }
}

#[test]
fn a_submodule_beside_the_project_does_not_matter() {
    let other = Repository::of(&[("read.me", "other\n")]);
    let repository = hall();
    let url = other.path("").display().to_string();
    repository.git(&["submodule", "--quiet", "add", &url, "beams/hall/shared"]);
    repository.commit("Shared");
    assert_eq!(project(&repository, "HEAD"), "B\n");
}

#[test]
fn a_project_inside_a_submodule_has_the_revisions_of_the_submodule() {
    let inner = hall();
    let outer = Repository::of(&[("read.me", "outer\n")]);
    let url = inner.path("").display().to_string();
    outer.git(&["submodule", "--quiet", "add", &url, "shared"]);
    outer.commit("Shared");
    assert_eq!(read(&outer.path("shared/beams/hall"), "HEAD~1").sources.project(), "A\n");
}

#[test]
fn a_commit_put_in_place_of_another_is_not_read_under_its_name() {
    let repository = hall();
    let (old, new) =
        (repository.git(&["rev-parse", "HEAD~1"]), repository.git(&["rev-parse", "HEAD"]));
    repository.git(&["replace", &old, &new]);
    assert_eq!(project(&repository, &old), "A\n");
}

#[test]
fn a_repository_with_long_object_ids() {
    let repository = Repository::empty();
    repository.beside(&["init", "--quiet", "--object-format=sha256", "works/long"]);
    let git = |words: &[&str]| repository.git(&[&["-C", "long"], words].concat());
    repository.put("long/project.yaml", "A\n");
    git(&["add", "project.yaml"]);
    git(&["commit", "--quiet", "-m", "First issue"]);
    let at = read(&repository.path("long"), "HEAD");
    assert_eq!((at.commit.len(), at.sources.project()), (64, "A\n"));
}

#[test]
fn reading_leaves_the_repository_byte_for_byte_and_starts_no_program_of_its_configuration() {
    let repository = hall();
    for key in ["core.fsmonitor", "core.pager", "diff.external", "core.sshCommand"] {
        repository.git(&["config", key, "touch started #"]);
    }
    repository.put(HALL, "C, not committed\n");
    let before = every_file(&repository.path(""));
    assert_eq!(project(&repository, "issue-A"), "A\n");
    assert!(files::uncommitted(&repository.path(AT)).is_some());
    assert!(every_file(&repository.path("")) == before);
}

/// Every file below a folder, those of git included, with its content.
fn every_file(folder: &Path) -> BTreeMap<String, Vec<u8>> {
    let mut files = BTreeMap::new();
    let mut folders = vec![folder.to_owned()];
    while let Some(folder) = folders.pop() {
        for entry in std::fs::read_dir(folder).expect("a folder") {
            let path = entry.expect("an entry").path();
            if path.is_dir() {
                folders.push(path);
            } else {
                let content = std::fs::read(&path).expect("a file");
                files.insert(path.display().to_string(), content);
            }
        }
    }
    files
}
