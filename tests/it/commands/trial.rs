//! `try`

use insta::assert_snapshot;
use spanfolio::record::by_id;
use spanfolio::trial::{Verdict, trial};

use super::project::{BEAM, Project};
use crate::support::{solved, sources};

/// The beam of [`BEAM`] with its weight, a check of stress and one of deflection, which only the deeper
/// sections satisfy.
fn checked() -> String {
    let whole = BEAM
        .replace("beam: {catalogue: IPE 200}", "beam: {catalogue: \"IPE 200\"}   # as on sketch 4")
        .replace("    nature: imposed\n", "    nature: imposed\n    self_weight: true\n")
        .replace("point: 10 kN", "point: 50 kN");
    format!(
        "{whole}    - {{title: seen, purpose: characteristic, factors: {{Q: 1}}, source: a test}}
checks:
  - {{id: stress, sheet: bending stress, members: [B1], purpose: strength}}
  - {{id: sag, sheet: span deflection, members: [B1], purpose: characteristic, with: {{ratio: \"250\"}}}}
"
    )
}

/// With these lines instead of the last check.
fn with_check(lines: &str) -> String {
    let checked = checked();
    let start = checked.find("  - {id: sag").expect("the last check");
    format!("{}{lines}", &checked[..start])
}

#[test]
fn those_that_satisfy_are_listed_lightest_first_with_what_governs() {
    assert_snapshot!(Project::of(&checked()).run(&["try", ".", "--section", "beam"]).shown(), @r"
    exit: 0
    --- stdout
    Section beam, IPE 200 as written (*): 18 sections of family IPE

         section   kg/m  governing check  on         in  utilisation  outcome
      *  IPE 200  22.36  sag              member B1  C3         2.05  not satisfied: stress, sag
         IPE 270  36.07  stress           member B1  C1         0.87  satisfied
         IPE 300  42.24  stress           member B1  C1         0.67  satisfied
         IPE 330  49.15  stress           member B1  C1         0.53  satisfied
         IPE 360  57.09  stress           member B1  C1         0.42  satisfied
         IPE 400   66.3  stress           member B1  C1         0.33  satisfied
         IPE 450  77.57  stress           member B1  C1         0.26  satisfied
         IPE 500  90.68  stress           member B1  C1         0.20  satisfied
         IPE 550  105.5  stress           member B1  C1         0.16  satisfied
         IPE 600  122.4  stress           member B1  C1         0.13  satisfied

    9 of 18 satisfy every check
      7 not satisfied, governed by sag
      2 not satisfied, governed by stress

    Only the section changes: strengths of its material, whatever the thickness, inputs of checks and restraints stay as written.
    ");
}

#[test]
fn all_shows_the_others_as_well() {
    let project = Project::of(&checked());
    let run = project.run(&["try", ".", "--section", "beam", "--family", "HEA", "--all"]);
    let first: Vec<&str> = run.out.lines().take(8).collect();
    assert_snapshot!(first.join("\n"), @r"
    Section beam, IPE 200 as written (*): 24 sections of family HEA

         section    kg/m  governing check  on         in  utilisation  outcome
         HEA 100   16.67  sag              member B1  C3        11.22  not satisfied: stress, sag
         HEA 120   19.89  sag              member B1  C3         6.50  not satisfied: stress, sag
      *  IPE 200   22.36  sag              member B1  C3         2.05  not satisfied: stress, sag
         HEA 140   24.66  sag              member B1  C3         3.84  not satisfied: stress, sag
         HEA 160   30.44  sag              member B1  C3         2.39  not satisfied: stress, sag
    ");
}

#[test]
fn masses_grow_down_the_table() {
    let words = ["try", ".", "--section", "beam", "--family", "W", "--all"];
    let run = Project::of(&checked()).run(&words);
    let rows = run.out.lines().filter(|line| line.starts_with("     W"));
    let masses: Vec<f64> =
        rows.filter_map(|line| line.split_whitespace().nth(1)?.parse().ok()).collect();
    assert!(masses.len() == 113 && masses.is_sorted(), "{masses:?}");
}

#[test]
fn trying_writes_nothing() {
    let project = Project::of(&checked());
    let before = project.files("");
    assert_eq!(project.run(&["try", ".", "--section", "beam"]).status, 0);
    assert!(project.files("") == before);
}

#[test]
fn where_none_satisfies_the_status_says_so() {
    let project = Project::of(&checked().replace("point: 50 kN", "point: 3000 kN"));
    let before = project.files("");
    assert_snapshot!(project.run(&["try", ".", "--section", "beam", "--adopt"]).shown(), @r"
    exit: 3
    --- stdout
    Section beam, IPE 200 as written (*): 18 sections of family IPE

         section   kg/m  governing check  on         in  utilisation  outcome
      *  IPE 200  22.36  sag              member B1  C3       120.18  not satisfied: stress, sag

    0 of 18 satisfy every check
      7 not satisfied, governed by sag
      11 not satisfied, governed by stress

    Only the section changes: strengths of its material, whatever the thickness, inputs of checks and restraints stay as written.
    --- stderr
    nothing adopted: no section tried satisfies every check
    ");
    assert!(project.files("") == before);
}

#[test]
fn a_check_that_does_not_depend_on_the_section_governs_only_where_it_fails() {
    let lines = |load: &str| {
        format!(
            "  - id: bearing
    title: Bearing on the wall
    node: A
    purpose: strength
    reference: a test
    demand: {load}
    capacity: 100 kN
"
        )
    };
    let governs = |load: &str| {
        let trial = trial(&sources(&with_check(&lines(load))), "beam", None).expect("a trial");
        let heaviest = trial.candidates.last().expect("a candidate").clone();
        (heaviest.governing.expect("a check").check, heaviest.verdict)
    };
    assert_eq!(governs("90 kN"), ("stress".to_owned(), Verdict::Satisfied));
    let fails = Verdict::NotSatisfied(vec!["bearing".to_owned()]);
    assert_eq!(governs("110 kN"), ("bearing".to_owned(), fails));
}

/// Whether the whole family satisfies a check that is deferred, with this deferral in the basis.
fn deferred(basis: &str, checks: &str) -> Verdict {
    let yaml = checked();
    let start = yaml.find("checks:\n").expect("the checks");
    let head = yaml[..start].replace("materials:\n", &format!("{basis}materials:\n"));
    let trial = trial(&sources(&format!("{head}checks:\n{checks}")), "beam", None);
    trial.expect("a trial").candidates.last().expect("a candidate").verdict.clone()
}

const SLENDER: &str = "  - id: slender
    title: Slender
    members: [B1]
    purpose: strength
    reference: a test
    valid_if:
      - {condition: \"h < 1 mm\", reason: made for wires}
    demand: h
    capacity: 1 m
";
const STRESS: &str = "  - {id: stress, sheet: bending stress, members: [B1], purpose: strength}\n";
const COVERED: &str =
    "basis: {deferred: [{id: D1, text: Wires, to: somebody, checks: [slender]}]}\n";

#[test]
fn a_deferred_check_keeps_a_section_from_satisfying() {
    let both = format!("{STRESS}{SLENDER}");
    let Verdict::Deferred(checks) = deferred("", &both) else { panic!("not deferred") };
    assert_eq!(checks[0].0, "slender");
    assert!(checks[0].1.starts_with("made for wires"), "{}", checks[0].1);
}

#[test]
fn a_deferral_of_the_basis_covers_a_deferred_check() {
    assert_eq!(deferred(COVERED, &format!("{STRESS}{SLENDER}")), Verdict::Satisfied);
}

#[test]
fn deferrals_alone_show_nothing() {
    assert!(matches!(deferred(COVERED, SLENDER), Verdict::Deferred(_)));
}

#[test]
fn a_section_that_cannot_be_checked_says_why() {
    let lines = "  - id: flange
    title: Flange
    members: [B1]
    purpose: strength
    reference: a test
    demand: t_f
    capacity: 1 m
";
    let project = Project::of(&with_check(lines));
    let run = project.run(&["try", ".", "--section", "beam", "--family", "CHS"]);
    assert_snapshot!(run.shown(), @r"
    exit: 3
    --- stdout
    Section beam, IPE 200 as written (*): 40 sections of family CHS

         section   kg/m  governing check  on         in  utilisation  outcome
      *  IPE 200  22.36  stress           member B1  C1         1.90  not satisfied: stress

    0 of 40 satisfy every check
      40 error: nothing named `t_f` is in reach here

    Only the section changes: strengths of its material, whatever the thickness, inputs of checks and restraints stay as written.
    ");
}

/// Each candidate is the project with that section: its weight included.
#[test]
fn a_candidate_is_the_project_with_that_section_written() {
    let tried = trial(&sources(&checked()), "beam", None).expect("a trial");
    assert_eq!(tried.candidates.len(), 18);
    for candidate in &tried.candidates {
        let record = solved(&checked().replace("IPE 200", &candidate.designation));
        let governing = candidate.governing.as_ref().expect("an evaluated check");
        let checks = by_id(&record.checks);
        let worst = |id: &str| checks[id][0].utilisation.expect("a utilisation");
        let written = worst(&governing.check);
        let found = governing.utilisation.expect("a utilisation");
        // The record keeps twelve digits.
        assert!((found / written - 1.0).abs() < 1e-11, "{}: {found}", candidate.designation);
        assert!(checks.keys().all(|id| worst(id) <= written), "{}", candidate.designation);
        let satisfied = checks.values().all(|check| check[0].outcome == "satisfied");
        assert_eq!(candidate.verdict == Verdict::Satisfied, satisfied, "{}", candidate.designation);
    }
}

#[test]
fn a_shape_is_held_against_the_family_named() {
    let shape = "beam: {shape: rectangle, width: 40 mm, depth: 200 mm}";
    let project =
        Project::of(&checked().replace("beam: {catalogue: \"IPE 200\"}   # as on sketch 4", shape));
    assert_snapshot!(project.run(&["try", ".", "--section", "beam"]).shown(), @r"
    exit: 2
    --- stderr
    error[no-family]: section `beam` is not of the catalogue, so that a family must be named to try
      --> [PROJECT]/project.yaml:10:3
       |
    10 |   beam: {shape: rectangle, width: 40 mm, depth: 200 mm}
       |   ^^^^
       |
       = help: add e.g. `--family IPE`
       = help: `spanfolio catalogue` lists the families
    ");
    let run = project.run(&["try", ".", "--section", "beam", "--family", "ipe", "--adopt"]);
    assert_snapshot!(run.shown(), @r"
    exit: 2
    --- stdout
    Section beam, rectangle 40 mm × 200 mm as written (*): 18 sections of family IPE

         section                    kg/m  governing check  on         in  utilisation  outcome
         IPE 270                   36.07  stress           member B1  C1         0.87  satisfied
         IPE 300                   42.24  stress           member B1  C1         0.67  satisfied
         IPE 330                   49.15  stress           member B1  C1         0.53  satisfied
         IPE 360                   57.09  stress           member B1  C1         0.42  satisfied
      *  rectangle 40 mm × 200 mm   62.8  sag              member B1  C3         1.53  not satisfied: stress, sag
         IPE 400                    66.3  stress           member B1  C1         0.33  satisfied
         IPE 450                   77.57  stress           member B1  C1         0.26  satisfied
         IPE 500                   90.68  stress           member B1  C1         0.20  satisfied
         IPE 550                   105.5  stress           member B1  C1         0.16  satisfied
         IPE 600                   122.4  stress           member B1  C1         0.13  satisfied

    9 of 18 satisfy every check
      7 not satisfied, governed by sag
      2 not satisfied, governed by stress

    Only the section changes: strengths of its material, whatever the thickness, inputs of checks and restraints stay as written.
    --- stderr
    error[not-adopted]: section `beam` is not written as a designation of the catalogue
      --> [PROJECT]/project.yaml:10:3
       |
    10 |   beam: {shape: rectangle, width: 40 mm, depth: 200 mm}
       |   ^^^^
       |
       = help: write `catalogue: IPE 270` there by hand
    ");
}

#[test]
fn masses_of_us_projects_are_in_pounds_per_foot() {
    let run = Project::demo("pump-platform").run(&["try", ".", "--section", "beam"]);
    // W10X22 weighs 22 lb/ft by its name.
    let row = run.out.lines().find(|line| line.contains("*  W10X22 ")).expect("its row");
    assert!(row.contains(" 22.09 ") && run.out.contains("lb/ft"), "{row}");
}

#[test]
fn json_holds_every_section_tried() {
    let run = Project::of(&checked()).run(&["try", ".", "--section", "beam", "--json"]);
    let read: serde_json::Value = serde_json::from_str(&run.out).expect("JSON");
    assert_eq!(read["tried"], 18);
    assert_eq!(read["candidates"].as_array().map(Vec::len), Some(18));
    assert_snapshot!(format!("{:#}", read["candidates"][0]), @r#"
    {
      "designation": "IPE 80",
      "as_written": false,
      "in_family": true,
      "mass_per_metre": 6.00007044173,
      "outcome": "not satisfied",
      "because": [
        "stress",
        "sag"
      ],
      "governing": {
        "check": "sag",
        "on": "member B1",
        "combination": "C3",
        "utilisation": 48.26102972
      }
    }
    "#);
}

#[test]
fn adopting_changes_the_designation_and_no_other_byte() {
    let crlf = format!("\u{feff}{}", checked().replace('\n', "\r\n"));
    let project = Project::of(&crlf);
    let run = project.run(&["try", ".", "--section", "beam", "--adopt"]);
    assert_eq!(
        (run.status, run.err.as_str()),
        (0, "adopted IPE 270 as section beam in `[PROJECT]/project.yaml`\n")
    );
    let expected = crlf.replace("\"IPE 200\"", "\"IPE 270\"");
    assert_eq!(String::from_utf8(project.get("project.yaml")).expect("UTF-8"), expected);
    assert_eq!(project.files("").len(), 1);
    let again = project.run(&["try", ".", "--section", "beam", "--adopt"]);
    assert_eq!(
        (again.status, again.err.as_str()),
        (0, "section beam is IPE 270 already; nothing written\n")
    );
}

#[test]
fn a_named_section_is_adopted_where_it_satisfies() {
    let project = Project::of(&checked().replace("\"IPE 200\"", "IPE 200"));
    let adopt = |name: &str, family: &str| {
        project.run(&["try", ".", "--section", "beam", "--family", family, "--adopt", name])
    };
    assert_eq!(adopt("hea 240", "HEA").status, 0);
    let text = String::from_utf8(project.get("project.yaml")).expect("UTF-8");
    assert!(text.contains("beam: {catalogue: HEA 240}   # as on sketch 4"), "{text}");
}

#[test]
fn what_cannot_be_adopted_leaves_the_file() {
    let project = Project::of(&checked());
    let before = project.get("project.yaml");
    let adopt = |name: &str| {
        let run = project.run(&["try", ".", "--section", "beam", "--adopt", name]);
        assert_eq!(project.get("project.yaml"), before);
        format!("exit: {}\n{}", run.status, run.err.trim_end())
    };
    assert_snapshot!(adopt("IPE 220"), @r"
    exit: 3
    nothing adopted: IPE 220 is not satisfied: stress, sag
    ");
    assert_snapshot!(adopt("HEA 300"), @r"
    exit: 2
    error[not-tried]: `HEA 300` is not of the family IPE
     |
     = help: add `--family HEA`
    ");
    assert_snapshot!(adopt("IPE 275"), @r"
    exit: 2
    error[unknown-section]: no section named `IPE 275` in the catalogue
     |
     = help: did you mean `IPE 270`?
    ");
}

#[test]
fn a_designation_shared_through_an_alias_is_not_adopted() {
    let own = "beam: {catalogue: \"IPE 200\"}   # as on sketch 4";
    for shared in [
        "beam: {catalogue: &size IPE 200}\n  spare: {catalogue: *size}",
        "spare: {catalogue: &size IPE 200}\n  beam: {catalogue: *size}",
        "beam: &whole {catalogue: IPE 200}\n  spare: *whole",
    ] {
        let project = Project::of(&checked().replace(own, shared));
        let before = project.get("project.yaml");
        let run = project.run(&["try", ".", "--section", "beam", "--adopt"]);
        assert_eq!(run.status, 2, "{shared}");
        let message = "the designation of section `beam` is shared through an alias";
        assert!(run.err.contains(message), "{}", run.err);
        assert_eq!(project.get("project.yaml"), before);
    }
}

#[cfg(unix)]
#[test]
fn a_changed_project_file_keeps_its_link_and_its_permissions() {
    use std::fs::{Permissions, metadata, set_permissions, symlink_metadata};
    use std::os::unix::fs::{PermissionsExt, symlink};

    let project = Project::empty();
    project.put("files/main.yaml", checked().as_bytes());
    symlink("files/main.yaml", project.path("project.yaml")).expect("a link");
    set_permissions(project.path("files/main.yaml"), Permissions::from_mode(0o640))
        .expect("a mode");
    assert_eq!(project.run(&["try", ".", "--section", "beam", "--adopt"]).status, 0);
    assert!(symlink_metadata(project.path("project.yaml")).expect("a file").is_symlink());
    let changed = metadata(project.path("files/main.yaml")).expect("a file");
    assert_eq!(changed.permissions().mode() & 0o777, 0o640);
    assert!(String::from_utf8_lossy(&project.get("files/main.yaml")).contains("\"IPE 270\""));
}

#[test]
fn hand_calculations_that_do_not_agree_with_the_new_section_are_named() {
    let project = Project::of(&checked());
    let text = "# By hand\n\n```working\nagree hand-sag: 1 mm with abs(effect('B1', 'd_z', at=2 m, state='Q')) within 1 %\n```\n";
    project.put("narrative/hand.md", text.as_bytes());
    let run = project.run(&["try", ".", "--section", "beam", "--adopt"]);
    assert_snapshot!(run.err, @r"
    adopted IPE 270 as section beam in `[PROJECT]/project.yaml`
    hand calculations that do not agree with it: hand-sag
    ");
}

#[test]
fn what_cannot_be_tried() {
    let of = |yaml: &str, words: &[&str]| {
        let all: Vec<&str> = ["try", ".", "--section"].iter().chain(words).copied().collect();
        Project::of(yaml).run(&all).shown()
    };
    assert_snapshot!(of(&checked(), &["beem"]), @r"
    exit: 2
    --- stderr
    error[unknown-section]: no section named `beem` in the project
     |
     = help: did you mean `beam`?
    ");
    assert_snapshot!(of(&checked(), &["beam", "--family", "IPX"]), @r"
    exit: 2
    --- stderr
    error[unknown-family]: no family of sections named `IPX` in the catalogue
     |
     = help: did you mean `IPE`?
     = help: `spanfolio catalogue` lists the families
    ");
    assert_snapshot!(of(BEAM, &["beam"]), @r"
    exit: 2
    --- stderr
    error[no-checks]: the project has no checks: there is nothing to try a section against
     |
     = help: write at least one under `checks`
    ");
    let spare = checked().replace("sections:\n", "sections:\n  spare: {catalogue: IPE 80}\n");
    assert_snapshot!(of(&spare, &["spare"]), @r"
    exit: 2
    --- stderr
    error[unused-section]: section `spare` is used by no member: nothing depends on it
      --> [PROJECT]/project.yaml:10:3
       |
    10 |   spare: {catalogue: IPE 80}
       |   ^^^^^
    ");
}
