//! What a machine reads of an audit.

use insta::assert_snapshot;
use roxmltree::Document;
use serde_json::Value;

use super::{BEAM, CHECKED, Project, issue};

/// A project in a repository, with a name that escapes must bear, out of date and with checks of every outcome.
fn project() -> Project {
    let folder = Project::empty();
    folder.put(".git/HEAD", b"ref: refs/heads/main\n");
    let checks = CHECKED
        .replace("title: Bending,", "title: \"Bending <b>100%</b>, | a: b\\n::error::x\",")
        .replace("25 kN m", "15 kN m")
        .replace("to: fabricator}", "to: fabricator, checks: [later]}");
    let more = "  - {id: shear, title: Shear, shows: strength, members: [B1], purpose: strength, reference: a test, demand: abs(V_z), capacity: 100 kN}
  - {id: later, title: Fire, shows: strength, members: [B1], purpose: fire, reference: a test, demand: abs(V_z), capacity: 100 kN}
  - {id: unsaid, title: Fire, shows: strength, members: [B1], purpose: fire, reference: a test, demand: abs(V_z), capacity: 100 kN}
";
    let yaml = format!("{BEAM}{checks}{more}");
    folder.put("roofs, 5%/é/project.yaml", yaml.as_bytes());
    let path = folder.path("roofs, 5%/é").display().to_string();
    assert_eq!(folder.run(&["issue", &path]).status, 0);
    folder.edit("roofs, 5%/é/project.yaml", "IPE 200", "IPE 220");
    folder
}

fn report(project: &Project, option: &str) -> String {
    let file = project.path("report").display().to_string();
    let run = project.run(&["audit", ".", option, &file]);
    assert_eq!(run.status, 4, "{}", run.err);
    String::from_utf8(project.get("report")).expect("UTF-8")
}

#[test]
fn json_tells_everything() {
    let run = project().run(&["audit", ".", "--json"]);
    let json: Value = serde_json::from_str(&run.out).expect("JSON");
    assert_eq!(json["standing"], "out of date");
    let project = &json["projects"][0];
    assert_eq!(project["project"], "roofs, 5%/é");
    assert_eq!(project["package"]["reason"], "input-changed");
    let outcomes: Vec<String> = project["checks"]
        .as_array()
        .expect("a list")
        .iter()
        .map(|check| format!("{} {} {}", check["id"], check["outcome"], check["place"]["line"]))
        .collect();
    assert_snapshot!(outcomes.join("\n"), @r#"
    "bending" "not satisfied" 32
    "shear" "satisfied" 34
    "later" "deferred" 35
    "unsaid" "deferred" 36
    "#);
    assert_eq!(project["assumptions"][0]["place"]["line"], 28);
    assert_eq!(project["deferrals"][0]["checks"][0], "later");
}

#[test]
fn junit_has_a_suite_for_each_project() {
    let text = report(&project(), "--junit");
    let document = Document::parse(&text).expect("XML");
    let of = |name: &str| document.descendants().filter(|node| node.has_tag_name(name)).count();
    assert_eq!([of("testsuite"), of("testcase"), of("failure"), of("skipped")], [1, 6, 3, 1]);
    assert_snapshot!(text, @r#"
    <?xml version="1.0" encoding="UTF-8"?>
    <testsuites name="spanfolio audit" tests="6" skipped="1" failures="3" errors="0">
        <testsuite name="roofs, 5%/é" tests="6" skipped="1" errors="0" failures="3">
            <properties>
                <property name="assumption to confirm" value="A1 (by site engineer): The floor holds the top flange (project.yaml:28)"/>
                <property name="deferral" value="D1 to fabricator: Connections [later] (project.yaml:30)"/>
            </properties>
            <testcase name="project is read and solved" classname="roofs, 5%/é"/>
            <testcase name="package is up to date" classname="roofs, 5%/é">
                <failure message="the input was changed and not issued again" type="input-changed">section beam: section IPE 200 → IPE 220; dimension h 200 mm → 220 mm; dimension b 100 mm → 110 mm; 22 more (project.yaml:10)
    no outcome of a check changed; 1 of 22 things of the input changed; 4 of 28 governing values of members changed</failure>
            </testcase>
            <testcase name="bending, member B1" classname="roofs, 5%/é">
                <failure message="not satisfied: utilisation 1.34 in C1" type="not-satisfied">Bending &lt;b&gt;100%&lt;/b&gt;, | a: b
    ::error::x
    project.yaml:32</failure>
            </testcase>
            <testcase name="shear, member B1" classname="roofs, 5%/é"/>
            <testcase name="later, member B1" classname="roofs, 5%/é">
                <skipped message="deferred, as disclosed: there is no combination of purpose fire" type="deferred">Fire
    project.yaml:35</skipped>
            </testcase>
            <testcase name="unsaid, member B1" classname="roofs, 5%/é">
                <failure message="deferred, not named in `basis.deferred`: there is no combination of purpose fire" type="not-disclosed">Fire
    project.yaml:36</failure>
            </testcase>
        </testsuite>
    </testsuites>
    "#);
}

#[test]
fn junit_of_a_wrong_project_is_an_error() {
    let project = Project::of(&BEAM.replace("IPE 200", "IPE 201"));
    let file = project.path("out/junit.xml").display().to_string();
    assert_eq!(project.run(&["audit", ".", "--junit", &file]).status, 2);
    let text = String::from_utf8(project.get("out/junit.xml")).expect("UTF-8");
    let document = Document::parse(&text).expect("XML");
    let error = document.descendants().find(|node| node.has_tag_name("error")).expect("an error");
    assert_eq!(error.attribute("type"), Some("unknown-section"));
    assert_eq!(
        error.text().map(str::trim),
        Some("project.yaml:10:21: no section `IPE 201` in the catalogue")
    );
}

#[test]
fn the_summary_is_markdown() {
    assert_snapshot!(report(&project(), "--summary"), @r"
    ## Audit of calculation packages

    1 project: **1 out of date**

    Checks: 1 not satisfied, 1 deferred and not disclosed, 1 deferred as disclosed, 1 satisfied. 1 assumption to confirm, 1 deferral.

    | project | stands | package | checks satisfied | open | deferred as disclosed | to confirm |
    | --- | --- | --- | ---: | ---: | ---: | ---: |
    | roofs, 5%/é | **out of date** | out of date | 1 of 4 | 2 | 1 | 1 |

    ### roofs, 5%/é

    Porch, P-1, A

    - package out of date: the input was changed and not issued again
    - section beam: section IPE 200 → IPE 220; dimension h 200 mm → 220 mm; dimension b 100 mm → 110 mm; 22 more (project.yaml:10)
    - no outcome of a check changed; 1 of 22 things of the input changed; 4 of 28 governing values of members changed
    - bending, member B1, Bending \<b>100%\</b>, \| a: b ::error::x (project.yaml:32): not satisfied: utilisation 1.34 in C1
    - unsaid, member B1, Fire (project.yaml:36): deferred, not named in \`basis.deferred\`: there is no combination of purpose fire

    <details><summary>Assumptions to confirm: 1</summary>

    - A1 (by site engineer): The floor holds the top flange (project.yaml:28)

    </details>

    <details><summary>Deferrals: 1</summary>

    - D1 to fabricator: Connections \[later\] (project.yaml:30)

    </details>
    ");
}

#[test]
fn the_summary_can_be_printed_alone() {
    let project = project();
    let written = report(&project, "--summary");
    assert_eq!(project.run(&["audit", ".", "--summary", "-"]).out, written);
    assert_eq!(project.run(&["audit", ".", "--summary", "-", "--json"]).status, 2);
}

#[test]
fn annotations_are_workflow_commands_with_paths_from_the_root() {
    let run = project().run(&["audit", ".", "--annotations", "github"]);
    let (report, commands) = run.out.rsplit_once("::\n::error").expect("commands");
    let token = report.lines().next().and_then(|line| line.strip_prefix("::stop-commands::"));
    let token = token.expect("a token");
    assert!(report.ends_with(&format!("\n::{token}")), "commands stay off until the report ends");
    assert_snapshot!(format!("::error{commands}"), @r"
    ::error file=roofs%2C 5%25/é/project.yaml,title=package out of date::the input was changed and not issued again; section beam: section IPE 200 → IPE 220; dimension h 200 mm → 220 mm; dimension b 100 mm → 110 mm; 22 more (project.yaml:10); no outcome of a check changed; 1 of 22 things of the input changed; 4 of 28 governing values of members changed
    ::error file=roofs%2C 5%25/é/project.yaml,line=32,title=check not satisfied::bending, member B1 (Bending <b>100%25</b>, | a: b ::error::x): not satisfied: utilisation 1.34 in C1
    ::error file=roofs%2C 5%25/é/project.yaml,line=36,title=check deferred::unsaid, member B1 (Fire): deferred, not named in `basis.deferred`: there is no combination of purpose fire
    ::notice file=roofs%2C 5%25/é/project.yaml,line=28,title=assumption to confirm::A1 (by site engineer): The floor holds the top flange (project.yaml:28)
    ");
}

#[test]
fn no_words_of_a_project_begin_a_line() {
    let run = project().run(&["audit", "."]);
    assert!(run.out.lines().all(|line| !line.trim_start().starts_with("::")), "{}", run.out);
}

#[test]
fn code_quality_is_an_array_of_issues() {
    let text = report(&project(), "--code-quality");
    let issues: Value = serde_json::from_str(&text).expect("JSON");
    let lines: Vec<String> = issues
        .as_array()
        .expect("an array")
        .iter()
        .map(|issue| {
            assert_eq!(issue["fingerprint"].as_str().map(str::len), Some(64));
            assert!(issue["description"].is_string());
            let (path, line) = (&issue["location"]["path"], &issue["location"]["lines"]["begin"]);
            format!("{} {} {path}:{line}", issue["severity"], issue["check_name"])
        })
        .collect();
    assert_snapshot!(lines.join("\n"), @r#"
    "critical" "spanfolio-input-changed" "roofs, 5%/é/project.yaml":1
    "critical" "spanfolio-not-satisfied" "roofs, 5%/é/project.yaml":32
    "critical" "spanfolio-not-disclosed" "roofs, 5%/é/project.yaml":36
    "info" "spanfolio-assumption" "roofs, 5%/é/project.yaml":28
    "#);
}

#[test]
fn reports_are_the_same_on_every_run_and_any_number_of_threads() {
    let folder = project();
    for name in ["a", "b", "c"] {
        folder.put(&format!("{name}/project.yaml"), BEAM.as_bytes());
    }
    let once = folder.run(&["audit", ".", "--json", "--jobs", "1"]);
    let again = folder.run(&["audit", ".", "--json", "--jobs", "2"]);
    assert_eq!(once.out, again.out);
    for option in ["--junit", "--summary", "--code-quality"] {
        assert_eq!(report(&folder, option), report(&folder, option), "{option}");
    }
}

#[test]
fn a_report_that_cannot_be_written_is_status_1() {
    let project = Project::of(BEAM);
    issue(&project);
    let folder = project.path("narrative").display().to_string();
    std::fs::create_dir(&folder).expect("a folder");
    let run = project.run(&["audit", ".", "--junit", &folder]);
    assert_eq!(run.status, 1, "{}", run.err);
    assert!(run.err.contains("is a folder: name a file"), "{}", run.err);
}
