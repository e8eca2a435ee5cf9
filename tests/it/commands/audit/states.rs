//! Up to date, or why not.

use std::collections::BTreeMap;

use insta::assert_snapshot;
use spanfolio::files;
use spanfolio::package::package;
use spanfolio::record::Record;

use super::{BEAM, CHECKED, Project, issue, issued};

/// Writes the package of a record as the program does.
fn write(project: &Project, change: impl Fn(&mut Record)) {
    let sources = files::read(&project.path("")).expect("a project");
    let mut record = spanfolio::solve(&sources).expect("a project that solves").record;
    change(&mut record);
    let package = package(&record, &sources, None).expect("a package");
    files::write(&project.path(""), &package).expect("a package written");
}

/// Every file of the package through a change of its text.
fn change(project: &Project, change: impl Fn(&str) -> String) {
    for (name, bytes) in project.files("package") {
        let text = String::from_utf8(bytes).expect("UTF-8");
        project.put(&format!("package/{name}"), change(&text).as_bytes());
    }
}

#[test]
fn a_package_just_issued_is_up_to_date() {
    assert_snapshot!(issued().run(&["audit", "."]).shown(), @r"
    exit: 0
    --- stdout
      stands      project
      up to date  [PROJECT]

    [PROJECT]
      to confirm: A1 (by site engineer): The floor holds the top flange (project.yaml:28)
      deferred: D1 to fabricator: Connections (project.yaml:30)

    1 project: 1 up to date
    checks: 1 satisfied
    1 assumption to confirm, 1 deferral
    ");
}

#[test]
fn auditing_writes_nothing() {
    let project = issued();
    project.put(".package-new/half", b"half");
    let before = project.files("");
    assert_eq!(project.run(&["audit", "."]).status, 0);
    assert_eq!(project.files(""), before);
}

#[test]
fn a_project_without_a_package_is_out_of_date() {
    assert_snapshot!(Project::of(BEAM).run(&["audit", "."]).shown(), @r"
    exit: 4
    --- stdout
      stands       project
      out of date  [PROJECT]  there is no package yet

    [PROJECT]
      package: there is no package yet
        `spanfolio issue [PROJECT]` makes it anew

    1 project: 1 out of date
    checks: none
    0 assumptions to confirm, 0 deferrals
    ");
}

#[test]
fn changed_input_is_named_with_its_line() {
    let project = issued();
    project.edit("project.yaml", "IPE 200", "IPE 220");
    project.edit("project.yaml", "point: 10 kN", "point: 12 kN");
    assert_snapshot!(project.run(&["audit", "."]).shown(), @r"
    exit: 4
    --- stdout
      stands       project
      out of date  [PROJECT]  the input was changed and not issued again

    [PROJECT]
      package: the input was changed and not issued again
        section beam: section IPE 200 → IPE 220; dimension h 200 mm → 220 mm; dimension b 100 mm → 110 mm; 22 more (project.yaml:10)
        load Q on B1, point: load 10 kN → 12 kN (project.yaml:21)
        no outcome of a check changed; 2 of 19 things of the input changed; 7 of 28 governing values of members and 4 of 8 of reactions changed
        `spanfolio issue [PROJECT]` makes it anew
      to confirm: A1 (by site engineer): The floor holds the top flange (project.yaml:28)
      deferred: D1 to fabricator: Connections (project.yaml:30)

    1 project: 1 out of date
    checks: 1 satisfied
    1 assumption to confirm, 1 deferral
    ");
}

#[test]
fn a_renamed_member_is_recognised() {
    let project = Project::of(BEAM);
    issue(&project);
    let text = String::from_utf8(project.get("project.yaml")).expect("UTF-8");
    project.put("project.yaml", text.replace("B1", "beam 1").as_bytes());
    let run = project.run(&["audit", "."]);
    assert_eq!(run.status, 4);
    assert!(run.out.contains("member B1 is now called beam 1"), "{}", run.out);
}

#[test]
fn a_comment_is_input_too() {
    let project = issued();
    project.put("project.yaml", format!("# A note\n{BEAM}{CHECKED}").as_bytes());
    let run = project.run(&["audit", "."]);
    assert_eq!(run.status, 4);
    assert!(run.out.contains("no thing of the project file"), "{}", run.out);
}

#[test]
fn another_version_with_the_same_results_is_up_to_date() {
    let project = issued();
    write(&project, |record| "0.0.9".clone_into(&mut record.program.version));
    let run = project.run(&["audit", "."]);
    assert_eq!(run.status, 0, "{}", run.out);
    assert!(run.out.contains("made by version 0.0.9 with the same results"), "{}", run.out);
}

#[test]
fn another_version_with_other_results_is_out_of_date() {
    let project = issued();
    write(&project, |record| {
        "0.0.9".clone_into(&mut record.program.version);
        let governing = &mut record.results.members["B1"].governing["strength"];
        governing["M_y"].max.value *= 1.01;
    });
    assert_snapshot!(project.run(&["audit", "."]).shown(), @r"
    exit: 4
    --- stdout
      stands       project
      out of date  [PROJECT]  made by version 0.0.9, and version 0.1.0 makes another package

    [PROJECT]
      package: made by version 0.0.9, and version 0.1.0 makes another package
        no outcome of a check changed; 0 of 19 things of the input changed; 1 of 28 governing values of members changed
        `spanfolio issue [PROJECT]` makes it anew
      to confirm: A1 (by site engineer): The floor holds the top flange (project.yaml:28)
      deferred: D1 to fabricator: Connections (project.yaml:30)

    1 project: 1 out of date
    checks: 1 satisfied
    1 assumption to confirm, 1 deferral
    ");
}

#[test]
fn another_build_of_the_same_version_is_told_from_editing() {
    let project = issued();
    write(&project, |record| record.checks[0].title = "Bending as it was".to_owned());
    let run = project.run(&["audit", "."]);
    assert_eq!(run.status, 4);
    assert!(run.out.contains("made by another build of version"), "{}", run.out);
}

#[test]
fn files_edited_missing_and_extra_are_listed() {
    let project = issued();
    project.edit("package/package.md", "Made with", "Made by");
    std::fs::remove_file(project.path("package/figures/model-main.svg")).expect("a file less");
    project.put("package/sketch.txt", b"mine");
    assert_snapshot!(project.run(&["audit", "."]).shown(), @r"
    exit: 4
    --- stdout
      stands       project
      out of date  [PROJECT]  its files are not what the program wrote: edited by hand

    [PROJECT]
      package: its files are not what the program wrote: edited by hand
        missing `figures/model-main.svg`
        edited `package.md`, first at line 11
        extra `sketch.txt`
        `spanfolio issue [PROJECT]` makes it anew
      to confirm: A1 (by site engineer): The floor holds the top flange (project.yaml:28)
      deferred: D1 to fabricator: Connections (project.yaml:30)

    1 project: 1 out of date
    checks: 1 satisfied
    1 assumption to confirm, 1 deferral
    ");
}

#[test]
fn editing_is_found_behind_another_version_too() {
    let project = issued();
    write(&project, |record| "0.0.9".clone_into(&mut record.program.version));
    project.edit("package/package.md", "Made with", "Made by");
    let run = project.run(&["audit", "."]);
    assert_eq!(run.status, 4);
    assert!(run.out.contains("edited `package.md`"), "{}", run.out);
}

#[test]
fn a_record_that_is_none_is_edited_by_hand() {
    let project = issued();
    project.put("package/record.json", b"{}\n");
    let run = project.run(&["audit", "."]);
    assert_eq!(run.status, 4);
    assert!(run.out.contains("edited `record.json`, first at line 1"), "{}", run.out);
}

#[test]
fn a_checkout_with_crlf_is_up_to_date() {
    let project = issued();
    change(&project, |text| text.replace('\n', "\r\n"));
    assert_snapshot!(project.run(&["audit", "."]).shown(), @r"
    exit: 0
    --- stdout
      stands      project
      up to date  [PROJECT]

    [PROJECT]
      package: the package is up to date
        its files were checked out with CRLF line ends, which do not count
      to confirm: A1 (by site engineer): The floor holds the top flange (project.yaml:28)
      deferred: D1 to fabricator: Connections (project.yaml:30)

    1 project: 1 up to date
    checks: 1 satisfied
    1 assumption to confirm, 1 deferral
    ");
}

#[test]
fn a_number_that_differs_in_its_last_digits_is_up_to_date() {
    let project = issued();
    write(&project, |record| {
        let governing = &mut record.results.members["B1"].governing["strength"];
        let value = &mut governing["w"].min.value;
        *value = spanfolio::record::rounded(*value * (1.0 + 2e-11));
    });
    let run = project.run(&["audit", "."]);
    assert_eq!(run.status, 0, "{}", run.out);
    assert!(run.out.contains("1 number differs from those computed here"), "{}", run.out);
}

#[test]
fn a_last_printed_digit_on_the_border_is_up_to_date() {
    // 20 kN m prints as `20`, and a load of 10.0025 kN gives 20.005: printed to four digits as `20.01`, and a
    // thousandth of a billionth less as `20`.
    let project = Project::of(&BEAM.replace("point: 10 kN", "point: 10.0025 kN"));
    issue(&project);
    let printed = project.get("package/package.md");
    write(&project, |record| {
        let governing = &mut record.results.members["B1"].governing["strength"];
        governing["M_y"].max.value *= 1.0 - 1e-11;
    });
    assert_ne!(printed, project.get("package/package.md"), "the border is elsewhere");
    let run = project.run(&["audit", "."]);
    assert_eq!(run.status, 0, "{}", run.out);
    assert!(run.out.contains("printed with another last digit"), "{}", run.out);
}

#[test]
fn a_number_that_differs_by_more_is_out_of_date() {
    let project = issued();
    write(&project, |record| {
        let governing = &mut record.results.members["B1"].governing["strength"];
        governing["w"].min.value *= 1.0 + 1e-8;
    });
    assert_eq!(project.run(&["audit", "."]).status, 4);
}

#[test]
fn a_print_beside_the_page_is_no_file_of_the_set() {
    let project = issued();
    project.put("package/package.pdf", b"%PDF-1.7\n");
    assert_eq!(project.run(&["audit", "."]).status, 0);
}

#[cfg(unix)]
#[test]
fn a_link_in_the_package_is_not_followed() {
    let project = issued();
    std::os::unix::fs::symlink(project.path("project.yaml"), project.path("package/more.yaml"))
        .expect("a link");
    let run = project.run(&["audit", "."]);
    assert_eq!(run.status, 2, "{}", run.out);
    assert!(run.err.contains("more.yaml` is a link or no file"), "{}", run.err);
}

#[test]
fn an_unsatisfied_check_is_status_3() {
    let project = Project::of(&format!("{BEAM}{}", CHECKED.replace("25 kN m", "15 kN m")));
    issue(&project);
    assert_snapshot!(project.run(&["audit", "."]).shown(), @r"
    exit: 3
    --- stdout
      stands         project
      not satisfied  [PROJECT]  1 check open

    [PROJECT]
      bending, member B1, Bending (project.yaml:32): not satisfied: utilisation 1.34 in C1
      to confirm: A1 (by site engineer): The floor holds the top flange (project.yaml:28)
      deferred: D1 to fabricator: Connections (project.yaml:30)

    1 project: 1 not satisfied
    checks: 1 not satisfied
    1 assumption to confirm, 1 deferral
    ");
}

#[test]
fn a_deferred_check_is_status_3_until_it_is_disclosed() {
    let deferred = CHECKED.replace("purpose: strength", "purpose: fire");
    let project = Project::of(&format!("{BEAM}{deferred}"));
    issue(&project);
    let run = project.run(&["audit", "."]);
    assert_eq!(run.status, 3);
    assert!(run.out.contains("deferred, not named in `basis.deferred`"), "{}", run.out);
    project.edit("project.yaml", "to: fabricator}", "to: fabricator, checks: [bending]}");
    issue(&project);
    assert_eq!(project.run(&["audit", "."]).status, 0);
}

#[test]
fn a_wrong_project_is_status_2() {
    let project = issued();
    project.edit("project.yaml", "point: 10 kN", "point: 10 kg");
    assert_snapshot!(project.run(&["audit", "."]).shown(), @r"
    exit: 2
    --- stdout
      stands  project
      wrong   [PROJECT]  `10 kg` is a mass, expected a force such as `10 kN`

    1 project: 1 wrong
    checks: none
    0 assumptions to confirm, 0 deferrals
    --- stderr
    error[wrong-dimension]: `10 kg` is a mass, expected a force such as `10 kN`
      --> [PROJECT]/project.yaml:21:29
       |
    21 |       - {member: B1, point: 10 kg, at: 2 m}
       |                             ^^^^^ expected a force
       |
       = help: a mass is not yet a force: multiply it by the acceleration of free fall, 9.80665 m/s², and write it in kN (pounds: `lb` is the force, `lbm` the mass)
    ");
}

#[test]
fn a_template_error_is_status_2_and_the_checks_are_listed() {
    let project = issued();
    project.put("templates/summary.md", b"# In short\n\n{{ project.titel }}\n");
    let run = project.run(&["audit", "."]);
    assert_eq!(run.status, 2);
    assert!(run.err.contains("[PROJECT]/templates/summary.md:3"), "{}", run.err);
    assert!(run.out.contains("checks: 1 satisfied"), "{}", run.out);
}

#[test]
fn a_demo_just_issued_is_up_to_date() {
    for demo in ["gallery-floor", "pump-platform", "workshop-portal"] {
        let project = Project::demo(demo);
        issue(&project);
        let run = project.run(&["audit", "."]);
        assert!(run.out.contains("1 project: 1 up to date"), "{demo}: {}", run.out);
    }
}

/// What a package keeps of an earlier revision.
#[test]
fn a_package_held_against_an_earlier_revision_is_rebuilt_with_it() {
    let project = issued();
    let sources = files::read(&project.path("")).expect("a project");
    let earlier = files::Sources {
        files: BTreeMap::from([(
            "project.yaml".to_owned(),
            sources.project().replace("point: 10 kN", "point: 9 kN").into_bytes(),
        )]),
    };
    let against = spanfolio::package::Against::solve(&"c0ffee".repeat(7)[..40], earlier)
        .expect("a revision that solves");
    let record = spanfolio::solve(&sources).expect("a project that solves").record;
    let package = package(&record, &sources, Some(&against)).expect("a package");
    files::write(&project.path(""), &package).expect("a package written");
    let run = project.run(&["audit", "."]);
    assert_eq!(run.status, 0, "{}", run.out);
    change(&project, |text| text.replace('\n', "\r\n"));
    assert_eq!(project.run(&["audit", "."]).status, 0);
    project.put("package/against/project.yaml", b"nothing: of use\n");
    let run = project.run(&["audit", "."]);
    assert_eq!(run.status, 4, "{}", run.out);
    assert!(
        run.out.contains("the earlier revision kept in the package is of no use"),
        "{}",
        run.out
    );
}
