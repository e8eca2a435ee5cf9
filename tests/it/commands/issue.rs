//! `issue`

use super::project::{BEAM, Project};

#[test]
fn the_package_holds_what_it_lists() {
    let project = Project::demo("workshop-portal");
    let run = project.run(&["issue", "."]);
    assert_eq!(run.status, 0, "{}", run.err);
    let files = project.files("package");
    let contents = String::from_utf8(files["contents.txt"].clone()).expect("UTF-8");
    for line in contents.lines() {
        let (_, name) = line.split_once("  ").expect("a hash and a name");
        assert!(files.contains_key(name), "{name}");
    }
    assert_eq!(contents.lines().count() + 1, files.len());
}

#[test]
fn runs_threads_and_folders_do_not_change_a_byte() {
    let first = Project::demo("gallery-floor");
    let second = Project::demo("gallery-floor");
    assert_eq!(first.run(&["issue", ".", "--jobs", "1"]).status, 0);
    let package = first.files("package");
    assert_eq!(first.run(&["issue", "."]).status, 0);
    assert!(package == first.files("package"), "a second run differs");
    assert_eq!(second.run(&["issue", ".", "--jobs", "2"]).status, 0);
    assert!(package == second.files("package"), "another folder with two threads differs");
}

#[test]
fn an_error_leaves_the_old_package_as_it_was() {
    let project = Project::of(BEAM);
    assert_eq!(project.run(&["issue", "."]).status, 0);
    let before = project.files("package");
    project.edit("project.yaml", "point: 10 kN", "point: 10 kg");
    assert_eq!(project.run(&["issue", "."]).status, 2);
    assert!(before == project.files("package"));
}

#[test]
fn files_of_others_in_the_package_are_never_replaced() {
    let project = Project::of(BEAM);
    assert_eq!(project.run(&["issue", "."]).status, 0);
    project.put("package/sketch.txt", b"mine");
    let run = project.run(&["issue", "."]);
    assert_eq!(run.status, 2);
    assert!(run.err.contains("`sketch.txt`"), "{}", run.err);
    assert_eq!(project.get("package/sketch.txt"), b"mine");
}

#[test]
fn an_interrupted_exchange_is_healed() {
    let project = Project::of(BEAM);
    assert_eq!(project.run(&["issue", "."]).status, 0);
    let package = project.files("package");
    std::fs::rename(project.path("package"), project.path(".package-old")).expect("a rename");
    project.put(".package-new/half", b"half");
    assert_eq!(project.run(&["solve", "."]).status, 0);
    assert!(package == project.files("package"));
    assert!(!project.path(".package-new").exists() && !project.path(".package-old").exists());
}

#[test]
fn a_template_of_the_project_is_used() {
    let project = Project::of(BEAM);
    project.put("templates/summary.md", b"# In short\n");
    assert_eq!(project.run(&["issue", "."]).status, 0);
    let markdown = String::from_utf8(project.get("package/package.md")).expect("UTF-8");
    assert!(markdown.contains("# 1 In short"));
}

#[test]
fn a_template_error_shows_its_line() {
    let project = Project::of(BEAM);
    project.put("templates/summary.md", b"# In short\n\n{{ project.titel }}\n");
    let run = project.run(&["issue", "."]);
    assert_eq!(run.status, 2);
    assert!(run.err.contains("[PROJECT]/templates/summary.md:3"), "{}", run.err);
    assert!(!project.path("package").exists());
}
