//! `compare`, and the story of a revision: A issued and committed; B changes a section, a load and the name of
//! a node.

use std::path::PathBuf;

use insta::assert_snapshot;
use serde_json::Value;

use super::project::{Run, run};
use crate::repository::Repository;

/// A roof beam with checks, small enough to read whole.
pub(super) const ROOF: &str = "\
format: 1
project:
  title: Boat shed
  number: BS-7
  revisions:
    - {mark: A, date: 2026-03-01, status: for checking, note: First issue}
basis:
  assumptions:
    - {id: A1, text: The roof boards hold the top flange, status: to confirm, by: site engineer}
materials:
  steel: {grade: S275}
sections:
  beam: {catalogue: IPE 200}
frame: plane
nodes: {A: [0 m, 0 m], B: [6 m, 0 m]}
members:
  B1: {along: [A, B], section: beam, material: steel}
supports: {A: pinned, B: {Z: fixed}}
load_cases:
  G:
    title: Roof
    nature: permanent
    self_weight: true
    loads:
      - {member: B1, uniform: 2 kN/m}
  S:
    title: Snow
    nature: snow
    loads:
      - {member: B1, uniform: 3 kN/m}
combinations:
  written:
    - {title: snow, purpose: strength, factors: {G: 1.35, S: 1.5}, source: a test}
    - {title: snow in use, purpose: characteristic, factors: {G: 1, S: 1}, source: a test}
checks:
  - {id: bending, sheet: bending stress, members: all, purpose: strength}
  - {id: deflection, sheet: span deflection, members: all, purpose: characteristic, with: {ratio: 250}}
";

/// The project file of revision B.
pub(super) fn revised() -> String {
    let edits = [
        ("IPE 200", "IPE 180"),
        ("uniform: 3 kN/m", "uniform: 4.5 kN/m"),
        ("B: [6 m, 0 m]", "East: [6 m, 0 m]"),
        ("along: [A, B]", "along: [A, East]"),
        ("B: {Z: fixed}", "East: {Z: fixed}"),
        (
            "note: First issue}\n",
            "note: First issue}\n    - {mark: B, date: 2026-04-02, status: for checking, note: Snow of the new map}\n",
        ),
    ];
    edits.iter().fold(ROOF.to_owned(), |text, (old, new)| {
        assert_eq!(text.matches(old).count(), 1, "`{old}` must occur once");
        text.replacen(old, new, 1)
    })
}

/// The project in a repository, with what it runs.
pub(super) struct Story {
    pub(super) repository: Repository,
}

impl Story {
    /// Revision A issued and committed.
    pub(super) fn issued() -> Self {
        let story = Self { repository: Repository::of(&[("shed/project.yaml", ROOF)]) };
        assert_eq!(story.run(&["issue", "."]).status, 0);
        story.repository.commit("Issue A");
        story
    }

    /// Revision B in the working copy.
    pub(super) fn revised() -> Self {
        let story = Self::issued();
        story.repository.put("shed/project.yaml", revised());
        story
    }

    pub(super) fn folder(&self) -> PathBuf {
        self.repository.path("shed")
    }

    /// Runs the program; `.` and `:.` stand for the project's folder. Ids of commits are made alike.
    pub(super) fn run(&self, words: &[&str]) -> Run {
        let folder = self.folder().display().to_string();
        let words: Vec<String> = words
            .iter()
            .map(|word| match word.strip_suffix('.') {
                Some(revision) if revision.is_empty() || revision.ends_with(':') => {
                    format!("{revision}{folder}")
                }
                _ => (*word).to_owned(),
            })
            .collect();
        let words: Vec<&str> = words.iter().map(String::as_str).collect();
        let mut run = run(&words);
        let commits = self.repository.git(&["rev-list", "--all"]);
        for text in [&mut run.out, &mut run.err] {
            *text = text.replace(&folder, "[SHED]");
            for (index, commit) in commits.lines().rev().enumerate() {
                *text = text.replace(&commit[..10], &format!("COMMIT-{}", index + 1));
            }
        }
        run
    }
}

fn json(run: &Run) -> Value {
    serde_json::from_str(&run.out).unwrap_or_else(|error| panic!("{error}\n{}", run.shown()))
}

#[test]
fn the_working_copy_against_a_revision() {
    assert_snapshot!(Story::revised().run(&["compare", "--since", "HEAD", "."]).shown());
}

#[test]
fn markdown_for_a_comment() {
    let words = ["compare", "--since", "HEAD", ".", "--markdown", "-"];
    assert_snapshot!(Story::revised().run(&words).out);
}

#[test]
fn two_revisions_of_a_repository() {
    let story = Story::revised();
    assert_eq!(story.run(&["issue", "."]).status, 0);
    story.repository.commit("Issue B");
    let found = json(&story.run(&["compare", "HEAD~1:.", "main:.", "--json"]));
    assert_eq!(found["renamed"][0]["old"], "B");
    assert_eq!(found["renamed"][0]["new"], "East");
    assert_eq!(found["old"]["revision"], "A");
    assert_eq!(found["new"]["revision"], "B");
    assert_eq!(found["notes"], serde_json::json!([]));
}

#[test]
fn the_same_both_sides_is_no_change_and_says_how_much_was_compared() {
    assert_snapshot!(Story::issued().run(&["compare", ".", "."]).shown());
}

#[test]
fn an_outcome_that_worsened_ends_with_3_when_asked() {
    let story = Story::revised();
    let words = ["compare", "--since", "HEAD", "."];
    assert_eq!(story.run(&words).status, 0);
    let asked = [&words[..], &["--exit-status"]].concat();
    assert_eq!(story.run(&asked).status, 3);
    story.repository.commit("Revision B");
    assert_eq!(story.run(&asked).status, 0);
}

#[test]
fn an_outcome_that_improved_does_not() {
    let story = Story::revised();
    story.repository.commit("Revision B");
    assert_eq!(story.run(&["compare", "HEAD:.", "HEAD~1:.", "--exit-status"]).status, 0);
}

#[test]
fn a_record_file_is_a_side() {
    let story = Story::issued();
    story.repository.put("shed/project.yaml", ROOF.replace("uniform: 3 kN/m", "uniform: 4 kN/m"));
    let record = story.folder().join("package/record.json").display().to_string();
    let found = json(&story.run(&["compare", &record, ".", "--json"]));
    let input = found["input"].as_array().expect("a list");
    assert_eq!(input.len(), 1);
    assert_eq!(input[0]["name"], "S on B1, uniform");
    assert_eq!(input[0]["new_line"]["line"], 30);
    assert_eq!(input[0]["old_line"], Value::Null);
}

#[test]
fn a_package_that_is_out_of_date_and_a_dirty_tree_are_told_in_a_line_each() {
    let found = json(&Story::revised().run(&["compare", "--since", "HEAD", ".", "--json"]));
    let notes: Vec<&str> =
        found["notes"].as_array().expect("a list").iter().filter_map(Value::as_str).collect();
    assert_eq!(
        notes,
        [
            "The package committed with [SHED] was issued from other input.",
            "[SHED] has changes that are not committed: project.yaml.",
        ]
    );
}

#[test]
fn a_committed_record_that_says_something_else_than_its_project_is_told() {
    let story = Story::issued();
    let record = story.folder().join("package/record.json");
    let text = std::fs::read(&record).expect("a record");
    let text = String::from_utf8(text).expect("UTF-8");
    let strange = text.replace("33732.1073259", "33732.2");
    assert!(strange != text, "the record has the greatest moment");
    story.repository.put("shed/package/record.json", strange);
    let found = json(&story.run(&["compare", ".", ".", "--json"]));
    let note = found["notes"][0].as_str().expect("a note");
    assert!(note.contains("differs from what this program computes from the same input"), "{note}");
}

#[test]
fn thresholds_are_asked_for_and_printed() {
    let story = Story::issued();
    story.repository.put("shed/project.yaml", ROOF.replace("uniform: 3 kN", "uniform: 3.05 kN"));
    let words = ["compare", "--since", "HEAD", "."];
    let listed = story.run(&words).out;
    assert!(listed.contains("Governing values"), "{listed}");
    let coarse = [
        &words[..],
        &["--relative", "2", "--absolute", "0.5 kN", "--absolute", "1 kN m", "--absolute", "1 mm"],
        &["--absolute", "0.05"],
    ];
    let coarse = story.run(&coarse.concat()).out;
    assert!(!coarse.contains("Governing values"), "{coarse}");
    assert!(
        coarse.contains("changed by less than 2 %, 0.5\u{a0}kN of force, 1\u{a0}kN m of moment"),
        "{coarse}"
    );
}

#[test]
fn the_page_of_a_comparison_is_one_file_that_loads_nothing() {
    let story = Story::revised();
    let file = story.repository.room("changes.html");
    let path = file.display().to_string();
    assert_eq!(story.run(&["compare", "--since", "HEAD", ".", "--html", &path]).status, 0);
    let page = String::from_utf8(std::fs::read(&file).expect("a page")).expect("UTF-8");
    assert!(page.contains("default-src 'none'"));
    assert!(page.contains("<svg"));
    for outside in ["src=\"http", "href=\"http", "url(http"] {
        assert!(!page.contains(outside), "{outside}");
    }
}

#[test]
fn a_side_that_is_not_there_says_what_a_side_is() {
    assert_snapshot!(Story::issued().run(&["compare", ".", "nowhere"]).shown(), @r"
    exit: 2
    --- stderr
    error[missing-side]: there is no folder and no file `nowhere`
     |
     = help: a side is a project folder, a record.json, or `REVISION:FOLDER`
    ");
}

#[test]
fn a_side_that_cannot_be_solved_is_named() {
    let story = Story::issued();
    story.repository.put("shed/project.yaml", ROOF.replace("IPE 200", "IPE 201"));
    story.repository.commit("A slip");
    story.repository.put("shed/project.yaml", ROOF);
    assert_snapshot!(story.run(&["compare", "--since", "main", "."]).shown(), @r"
    exit: 2
    --- stderr
    main (COMMIT-3) cannot be solved:
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

#[test]
fn an_unknown_revision_is_said() {
    assert_snapshot!(Story::issued().run(&["compare", "--since", "v9", "."]).shown(), @r"
    exit: 2
    --- stderr
    error[unknown-revision]: there is no revision `v9` in the repository of `[SHED]`
    ");
}

#[test]
fn one_side_alone_is_refused() {
    assert_snapshot!(Story::issued().run(&["compare", "."]).shown(), @r"
    exit: 2
    --- stderr
    error[command-line]: a comparison has two sides: `compare OLD NEW`, or `--since REVISION PROJECT`
    ");
}

#[test]
fn a_threshold_of_something_else_is_refused() {
    let run = Story::issued().run(&["compare", ".", ".", "--absolute", "3 kg"]);
    assert_snapshot!(run.shown(), @r"
    exit: 2
    --- stderr
    error[threshold]: `--absolute 3 kg`: there is no threshold for a mass: give a force, a moment, a length, an angle or a plain number (utilisation)
    ");
}
