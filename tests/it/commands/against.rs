//! `issue --against`: the package of revision B with its changes marked.

use insta::assert_snapshot;

use super::compare::Story;

fn markdown(story: &Story) -> String {
    let path = story.folder().join("package/package.md");
    String::from_utf8(std::fs::read(path).expect("a package")).expect("UTF-8")
}

#[test]
fn changed_rows_are_marked_and_the_chapter_of_changes_is_added() {
    let story = Story::revised();
    let run = story.run(&["issue", ".", "--against", "HEAD"]);
    assert_eq!(run.status, 0, "{}", run.shown());
    let markdown = markdown(&story);
    let marked: Vec<&str> = markdown.lines().filter(|line| line.starts_with("| ▲B")).collect();
    assert_snapshot!(marked.join("\n"));
    assert!(markdown.contains(" Changes since revision A\n"), "no chapter");
}

#[test]
fn the_earlier_project_file_is_kept_in_the_package() {
    let story = Story::revised();
    assert_eq!(story.run(&["issue", ".", "--against", "HEAD"]).status, 0);
    let kept = std::fs::read(story.folder().join("package/against/project.yaml")).expect("kept");
    assert_eq!(String::from_utf8(kept).expect("UTF-8"), super::compare::ROOF);
}

#[test]
fn issued_again_against_nothing_the_marks_are_gone() {
    let story = Story::revised();
    assert_eq!(story.run(&["issue", ".", "--against", "HEAD"]).status, 0);
    assert_eq!(story.run(&["issue", "."]).status, 0);
    assert!(!markdown(&story).contains('▲'));
    assert!(!story.folder().join("package/against").exists());
}

#[test]
fn without_a_new_revision_in_the_table_a_warning_says_so() {
    let story = Story::issued();
    let run = story.run(&["issue", ".", "--against", "HEAD"]);
    assert_eq!(run.status, 0);
    assert!(
        run.err.contains("changes since revision A are marked as revision A again"),
        "{}",
        run.err
    );
}

#[test]
fn an_unknown_revision_leaves_the_package_as_it_was() {
    let story = Story::revised();
    let before = markdown(&story);
    let run = story.run(&["issue", ".", "--against", "v9"]);
    assert_eq!(run.status, 2, "{}", run.shown());
    assert_eq!(markdown(&story), before);
}

#[test]
fn an_earlier_revision_that_cannot_be_solved_is_named() {
    let story = Story::issued();
    story.repository.put("shed/project.yaml", super::compare::ROOF.replace("IPE 200", "IPE 201"));
    story.repository.commit("A slip");
    story.repository.put("shed/project.yaml", super::compare::ROOF);
    assert_snapshot!(story.run(&["issue", ".", "--against", "HEAD"]).shown(), @r"
    exit: 2
    --- stderr
    the project at HEAD cannot be solved:
    error[unknown-section]: no section `IPE 201` in the catalogue
      --> [SHED]/project.yaml:13:21
       |
    13 |   beam: {catalogue: IPE 201}
       |                     ^^^^^^^
       |
       = help: did you mean `IPE 200`?
       = help: `spanfolio catalogue` lists the families

    error[unknown-name]: sheet `bending stress`: section `beam` has no known W_el_y
      --> [SHED]/project.yaml:36:26
       |
    36 |   - {id: bending, sheet: bending stress, members: all, purpose: strength}
       |                          ^^^^^^^^^^^^^^

    error[unknown-name]: sheet `bending stress`: section `beam` has no known W_el_z
      --> [SHED]/project.yaml:36:26
       |
    36 |   - {id: bending, sheet: bending stress, members: all, purpose: strength}
       |                          ^^^^^^^^^^^^^^

    3 errors
    ");
}
