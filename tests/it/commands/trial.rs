//! `try`

use insta::assert_snapshot;

use super::project::Project;

const BEAM: &str = "# A beam with remarks that must stay.
format: 1
project: {title: Shed, number: S-1, revisions: [{mark: A, date: 2026-02-03, status: for checking}]}
materials: {steel: {grade: S275}}
sections:
  beam: {catalogue: 'IPE 300'}   # chosen by eye
  other: {catalogue: IPE 200}
frame: plane
nodes: {A: [0 m, 0 m], B: [6 m, 0 m]}
members: {B1: {along: [A, B], section: beam, material: steel}}
supports: {A: pinned, B: {Z: fixed}}
load_cases: {G: {title: G, nature: permanent, self_weight: true, loads: [{member: B1, uniform: 12 kN/m}]}}
combinations:
  written:
    - {title: weight, purpose: strength, factors: {G: 1.35}}
    - {title: use, purpose: characteristic, factors: {G: 1}}
checks:
  - {id: bending, sheet: bending stress, members: [B1], purpose: strength}
  - {id: deflection, sheet: span deflection, members: [B1], purpose: characteristic, with: {ratio: 300}}
";

#[test]
fn sections_that_satisfy_come_lightest_first() {
    let run = Project::of(BEAM).run(&["try", ".", "--section", "beam"]);
    assert_eq!(run.status, 0);
    assert_snapshot!(run.out, @r"
    Section beam: family IPE tried, lightest first
         section   kg/m  governing check  on         utilisation  outcome
         IPE 270  36.07  deflection       member B1         0.88  satisfied
      >  IPE 300  42.24  deflection       member B1         0.62  satisfied
         IPE 330  49.15  deflection       member B1         0.45  satisfied
         IPE 360  57.09  deflection       member B1         0.33  satisfied
         IPE 400   66.3  bending          member B1         0.25  satisfied
         IPE 450  77.57  bending          member B1         0.19  satisfied
         IPE 500  90.68  bending          member B1         0.15  satisfied
         IPE 550  105.5  bending          member B1         0.12  satisfied
         IPE 600  122.4  bending          member B1         0.10  satisfied

    9 of 18 satisfy every check
    > is the section as written. Hand calculations belong to the section as written and are not counted.
    ");
}

#[test]
fn all_sections_are_printed_on_request() {
    let run = Project::of(BEAM).run(&["try", ".", "--section", "beam", "--family", "HEA", "--all"]);
    assert_eq!(run.status, 0);
    assert!(run.out.contains("not satisfied"), "{}", run.out);
    let masses: Vec<f64> = run
        .out
        .lines()
        .filter(|line| line.contains(" HEA "))
        .filter_map(|line| line.split_whitespace().nth(2)?.parse().ok())
        .collect();
    assert!(masses.len() > 20 && masses.is_sorted(), "{masses:?}");
}

#[test]
fn a_trial_says_what_the_project_says_with_that_section() {
    let project = Project::of(BEAM);
    let trial = project.run(&["try", ".", "--section", "beam", "--all", "--json"]);
    let trial: serde_json::Value = serde_json::from_str(&trial.out).expect("JSON");
    let of = |designation: &str| {
        let all = trial["candidates"].as_array().expect("candidates");
        all.iter().find(|one| one["section"] == designation).expect("a candidate").clone()
    };
    for designation in ["IPE 240", "IPE 270", "IPE 360"] {
        let written = Project::of(&BEAM.replace("'IPE 300'", designation));
        let record = written.run(&["solve", ".", "--json"]);
        let record: serde_json::Value = serde_json::from_str(&record.out).expect("JSON");
        let candidate = of(designation);
        let same = record["checks"].as_array().expect("checks").iter().any(|check| {
            let own = check["utilisation"].as_f64().unwrap_or_default();
            let tried = candidate["utilisation"].as_f64().unwrap_or_default();
            check["id"] == candidate["check"] && (own / tried - 1.0).abs() < 1e-9
        });
        assert!(same, "{designation}: {candidate} {}", record["checks"]);
    }
}

#[test]
fn none_that_satisfies_ends_with_three() {
    let project = Project::of(&BEAM.replace("ratio: 300", "ratio: 90000"));
    let run = project.run(&["try", ".", "--section", "beam"]);
    assert_eq!(run.status, 3);
    assert!(run.out.contains("0 of 18 satisfy every check"), "{}", run.out);
}

#[test]
fn adopting_changes_the_designation_and_nothing_else() {
    for ends in ["\n", "\r\n"] {
        let project = Project::empty();
        project.put("project.yaml", BEAM.replace('\n', ends).as_bytes());
        let run = project.run(&["try", ".", "--section", "beam", "--adopt"]);
        assert_eq!(run.status, 0, "{}", run.err);
        assert_eq!(run.err.trim_end(), "wrote `IPE 270` into section `beam` of `project.yaml`");
        let expected = BEAM.replace("'IPE 300'", "'IPE 270'").replace('\n', ends);
        assert_eq!(String::from_utf8(project.get("project.yaml")).expect("UTF-8"), expected);
    }
}

#[test]
fn a_section_is_adopted_by_name_only_if_it_satisfies() {
    let project = Project::of(BEAM);
    assert_eq!(project.run(&["try", ".", "--section", "beam", "--adopt", "IPE 400"]).status, 0);
    assert!(String::from_utf8(project.get("project.yaml")).expect("UTF-8").contains("'IPE 400'"));
    let run = project.run(&["try", ".", "--section", "beam", "--adopt", "IPE 80"]);
    assert_eq!(run.status, 3);
    assert!(
        run.err.contains("IPE 80 does not satisfy every check; nothing was written"),
        "{}",
        run.err
    );
    assert!(String::from_utf8(project.get("project.yaml")).expect("UTF-8").contains("'IPE 400'"));
}

#[test]
fn a_designation_shared_by_an_anchor_is_not_edited() {
    let shared = BEAM
        .replace("{catalogue: 'IPE 300'}", "{catalogue: &one IPE 300}")
        .replace("{catalogue: IPE 200}", "{catalogue: *one}");
    for section in ["beam", "other"] {
        let text = shared.replace("section: beam", &format!("section: {section}"));
        let project = Project::of(&text);
        let run = project.run(&["try", ".", "--section", section, "--adopt"]);
        assert_eq!(run.status, 2, "{section}: {}", run.err);
        assert_eq!(String::from_utf8(project.get("project.yaml")).expect("UTF-8"), text);
    }
}

#[test]
fn mistakes_say_what_there_is() {
    let said: Vec<String> = [
        (BEAM.to_owned(), vec!["--section", "bean"]),
        (BEAM.to_owned(), vec!["--section", "other"]),
        (BEAM.to_owned(), vec!["--section", "beam", "--family", "IPN"]),
        (
            BEAM.replace(
                "{catalogue: 'IPE 300'}",
                "{shape: rectangle, width: 80 mm, depth: 200 mm}",
            ),
            vec!["--section", "beam"],
        ),
        (BEAM.split("checks:").next().unwrap_or_default().to_owned(), vec!["--section", "beam"]),
    ]
    .into_iter()
    .map(|(yaml, words)| {
        let mut all = vec!["try", "."];
        all.extend(words);
        Project::of(&yaml).run(&all).shown()
    })
    .collect();
    assert_snapshot!(said.join("\n"), @r"
    exit: 2
    --- stderr
    error[unknown-section]: no section named `bean`
     |
     = help: the project has beam, other

    exit: 2
    --- stderr
    error[unused-section]: no member uses the section `other`

    exit: 2
    --- stderr
    error[unknown-family]: no family of sections named `IPN` in the catalogue
     |
     = help: did you mean `IPE`?

    exit: 2
    --- stderr
    error[no-family]: section `beam` is not one of the catalogue
     |
     = help: say which to try: `--family IPE`

    exit: 2
    --- stderr
    error[no-checks]: the project makes no check to try sections against
     |
     = help: add `checks` to the project file
    ");
}
