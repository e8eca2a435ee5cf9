//! Several projects at once, and parts of them.

use insta::assert_snapshot;

use super::{BEAM, CHECKED, Project};

/// A repository with four projects: up to date, out of date, wrong, not satisfied.
fn repository() -> Project {
    let folder = Project::empty();
    folder.put(".git/HEAD", b"ref: refs/heads/main\n");
    let failing = CHECKED.replace("25 kN m", "15 kN m");
    for (name, yaml) in [
        ("halls/good", format!("{BEAM}{CHECKED}")),
        ("halls/old", BEAM.to_owned()),
        ("halls/failing", format!("{BEAM}{failing}")),
        ("wrong", BEAM.to_owned()),
    ] {
        folder.put(&format!("{name}/project.yaml"), yaml.as_bytes());
        let path = folder.path(name).display().to_string();
        assert_eq!(folder.run(&["issue", &path]).status, 0);
    }
    folder.edit("halls/old/project.yaml", "First issue", "Second issue");
    folder.edit("wrong/project.yaml", "IPE 200", "IPE 201");
    for skipped in [".hidden", "target", "halls/good/package", "halls/good/drawings"] {
        folder.put(&format!("{skipped}/inner/project.yaml"), b"not: a project\n");
    }
    std::fs::remove_dir_all(folder.path("halls/good/package/inner")).expect("a folder less");
    folder
}

#[test]
fn a_folder_of_projects_is_searched() {
    assert_snapshot!(repository().run(&["audit", "."]).shown(), @r"
    exit: 2
    --- stdout
      stands         project
      not satisfied  [PROJECT]/halls/failing  1 check open
      up to date     [PROJECT]/halls/good
      out of date    [PROJECT]/halls/old      the input was changed and not issued again
      wrong          [PROJECT]/wrong          no section `IPE 201` in the catalogue

    [PROJECT]/halls/failing
      bending, member B1, Bending (project.yaml:32): not satisfied: utilisation 1.34 in C1
      to confirm: A1 (by site engineer): The floor holds the top flange (project.yaml:28)
      deferred: D1 to fabricator: Connections (project.yaml:30)

    [PROJECT]/halls/good
      to confirm: A1 (by site engineer): The floor holds the top flange (project.yaml:28)
      deferred: D1 to fabricator: Connections (project.yaml:30)

    [PROJECT]/halls/old
      package: the input was changed and not issued again
        revision A: note First issue → Second issue (project.yaml:6)
        1 of 16 things of the input changed; 0 of 28 governing values of members changed
        `spanfolio issue [PROJECT]/halls/old` makes it anew

    4 projects: 1 wrong, 1 out of date, 1 not satisfied, 1 up to date
    checks: 1 not satisfied, 1 satisfied
    2 assumptions to confirm, 2 deferrals
    --- stderr
    error[unknown-section]: no section `IPE 201` in the catalogue
      --> [PROJECT]/wrong/project.yaml:10:21
       |
    10 |   beam: {catalogue: IPE 201}
       |                     ^^^^^^^
       |
       = help: did you mean `IPE 200`?
       = help: `spanfolio catalogue` lists the families
    ");
}

#[test]
fn a_project_named_twice_is_audited_once() {
    let folder = repository();
    let good = folder.path("halls/good").display().to_string();
    let file = folder.path("halls/good/project.yaml").display().to_string();
    let run = folder.run(&["audit", &good, &file]);
    assert_eq!(run.status, 0, "{}", run.out);
    assert!(run.out.contains("1 project: 1 up to date"), "{}", run.out);
}

#[test]
fn the_worst_status_is_that_of_the_run() {
    let folder = repository();
    let path = |name: &str| folder.path(name).display().to_string();
    let of = |names: &[&str]| {
        let paths: Vec<String> = names.iter().map(|name| path(name)).collect();
        let words: Vec<&str> =
            std::iter::once("audit").chain(paths.iter().map(String::as_str)).collect();
        folder.run(&words).status
    };
    assert_eq!(of(&["halls/good"]), 0);
    assert_eq!(of(&["halls/good", "halls/failing"]), 3);
    assert_eq!(of(&["halls/good", "halls/failing", "halls/old"]), 4);
    assert_eq!(of(&["halls/good", "halls/failing", "halls/old", "wrong"]), 2);
    // Larger than a package may be, without taking the room.
    let large = std::fs::File::create(folder.path("halls/good/package/large")).expect("a file");
    large.set_len((512 << 20) + 1).expect("a length");
    assert_eq!(of(&["halls/good", "wrong"]), 1);
}

#[test]
fn a_folder_without_a_project_is_an_error() {
    assert_snapshot!(Project::empty().run(&["audit", "."]).shown(), @r"
    exit: 2
    --- stdout
    0 projects
    --- stderr
    error[missing-project]: there is no `project.yaml` in `[PROJECT]` nor below it
     |
     = help: `spanfolio start FOLDER` sets up a new project
    ");
}

#[test]
fn a_missing_folder_stops_no_other_project() {
    let folder = repository();
    let good = folder.path("halls/good").display().to_string();
    let run = folder.run(&["audit", "no-such-folder", &good]);
    assert_eq!(run.status, 2);
    assert!(run.err.contains("there is no folder `no-such-folder`"), "{}", run.err);
    assert!(run.out.contains("1 wrong, 1 up to date"), "{}", run.out);
}

#[test]
fn parts_together_are_the_whole() {
    let folder = repository();
    let mut seen = Vec::new();
    for part in ["1/3", "2/3", "3/3"] {
        let run = folder.run(&["audit", ".", "--part", part, "--json"]);
        let json: serde_json::Value = serde_json::from_str(&run.out).expect("JSON");
        assert_eq!(json["part"], part);
        let projects = json["projects"].as_array().expect("a list");
        assert!(projects.len() <= 2, "{part}: {}", projects.len());
        seen.extend(projects.iter().map(|project| project["project"].to_string()));
    }
    seen.sort();
    assert_eq!(seen, [r#""halls/failing""#, r#""halls/good""#, r#""halls/old""#, r#""wrong""#]);
}

#[test]
fn a_part_without_a_project_is_fine_and_said() {
    let folder = repository();
    let good = folder.path("halls/good").display().to_string();
    let runs: Vec<_> =
        ["1/2", "2/2"].map(|part| folder.run(&["audit", &good, "--part", part])).into();
    let empty: Vec<_> = runs.iter().filter(|run| run.out.contains("has no project")).collect();
    assert_eq!(empty.len(), 1);
    assert_eq!(empty[0].status, 0);
    assert!(empty[0].out.ends_with("has no project, 1 in other parts\n"), "{}", empty[0].out);
}

#[test]
fn parts_that_are_none_are_refused() {
    for (part, said) in [
        ("0/8", "parts are counted from 1"),
        ("9/8", "there is no part 9 of 8"),
        ("1/0", "there is no division into 0 parts"),
        ("1/1000", "there are at most 256 parts"),
        ("half", "expected a part and their number, such as `3/8`"),
        ("-1/8", "such as `3/8`"),
        ("+1/8", "such as `3/8`"),
        ("1/8/2", "such as `3/8`"),
        ("/", "such as `3/8`"),
    ] {
        let run = super::super::project::run(&["audit", "x", &format!("--part={part}")]);
        assert_eq!(run.status, 2, "{part}");
        assert!(run.err.contains(said), "{part}: {}", run.err);
    }
}
