//! What is wrong before the first word of a project is read.

use insta::assert_snapshot;

use super::project::{BEAM, Project, run};

#[test]
fn a_missing_folder() {
    assert_snapshot!(run(&["solve", "no-such-folder"]).shown(), @r"
    exit: 2
    --- stderr
    error[missing-project]: there is no folder `no-such-folder`
     |
     = help: `spanfolio start FOLDER` sets up a new project
    ");
}

#[test]
fn a_folder_without_a_project() {
    assert_snapshot!(Project::empty().run(&["solve", "."]).shown(), @r"
    exit: 2
    --- stderr
    error[missing-project]: there is no `project.yaml` in `[PROJECT]`
     |
     = help: `spanfolio start FOLDER` sets up a new project
    ");
}

#[test]
fn an_empty_file() {
    assert_snapshot!(Project::of("").run(&["solve", "."]).shown(), @r"
    exit: 2
    --- stderr
    error[empty-file]: the project file is empty
     --> [PROJECT]/project.yaml:1:1
      |
    1 |
      | ^
    ");
}

#[test]
fn a_file_that_is_not_text() {
    let project = Project::empty();
    project.put("project.yaml", b"format: 1\ntitle: \xff\n");
    assert_snapshot!(project.run(&["solve", "."]).shown(), @r"
    exit: 2
    --- stderr
    error[not-text]: `[PROJECT]/project.yaml` is not UTF-8 at line 2, column 8
     |
     = help: save the file as UTF-8 text
    ");
}

#[test]
fn an_unclosed_bracket() {
    assert_snapshot!(Project::of("format: 1\nnodes: {A: [0 m\n").run(&["solve", "."]).shown(), @r"
    exit: 2
    --- stderr
    error[syntax]: not valid YAML: while parsing a flow sequence, expected ',' or ']'
     --> [PROJECT]/project.yaml:2:17
      |
    2 | nodes: {A: [0 m
      |                ^
      |
      = help: is the `[` on line 2 closed?
    ");
}

#[cfg(unix)]
#[test]
fn a_template_that_leads_out_of_the_folder() {
    let outside = Project::of(BEAM);
    let project = Project::of(BEAM);
    project.put("templates/own.md", b"fine\n");
    std::os::unix::fs::symlink(outside.path("project.yaml"), project.path("templates/cover.md"))
        .expect("a link");
    let run = project.run(&["issue", "."]);
    assert_eq!(run.status, 2);
    assert!(run.err.contains("is a link out of the project's folder"), "{}", run.err);
    assert!(!project.path("package").exists());
}

#[test]
fn line_ends_of_another_system_change_nothing() {
    let lf = Project::of(BEAM);
    let crlf = Project::of(&format!("\u{feff}{}", BEAM.replace('\n', "\r\n")));
    assert_eq!(lf.run(&["issue", "."]).status, 0);
    assert_eq!(crlf.run(&["issue", "."]).status, 0);
    assert!(lf.files("package") == crlf.files("package"));
}

#[test]
fn the_project_file_can_be_named_itself() {
    let project = Project::of(BEAM);
    let file = project.path("project.yaml").display().to_string();
    assert_eq!(project.run(&["solve", &file]).status, 0);
}
