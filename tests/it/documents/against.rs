//! A package that is held against an earlier revision: marks on changed rows, a chapter of changes, the
//! earlier revision kept inside.

use insta::assert_snapshot;
use spanfolio::files::Sources;
use spanfolio::package::{Against, Package, package};

use crate::support::{demo, sources};

const COMMIT: &str = "5ca1ab1e0ddba11c0ffee0000000000000000000";

const SHED: &str = "\
format: 1
project:
  title: Boat shed
  number: BS-7
  revisions:
    - {mark: A, date: 2026-03-01, status: for checking, note: First issue}
materials:
  steel: {grade: S275}
sections:
  beam: {catalogue: IPE 200}
  post: {catalogue: HEA 100}
frame: plane
nodes: {A: [0 m, 0 m], B: [6 m, 0 m], F: [0 m, -3 m]}
members:
  B1: {along: [A, B], section: beam, material: steel}
  P1: {along: [F, A], section: post, material: steel, hinges: {A: {M_y: free}}}
supports: {F: {X: fixed, Z: fixed, RY: fixed}, B: pinned}
load_cases:
  S:
    title: Snow
    nature: snow
    loads:
      - {member: B1, uniform: 3 kN/m}
combinations:
  written:
    - {title: snow, purpose: strength, factors: {S: 1.5}, source: a test}
checks:
  - {id: bending, sheet: bending stress, members: [B1], purpose: strength}
";

/// Revision B has a larger beam; nothing else changed.
fn revised() -> Sources {
    let note = "note: First issue}\n";
    let yaml = SHED.replace("IPE 200", "IPE 220").replace(
        note,
        &format!(
            "{note}    - {{mark: B, date: 2026-04-02, status: for checking, note: Stiffer beam}}\n"
        ),
    );
    sources(&yaml)
}

fn issued(new: &Sources, old: Option<Sources>) -> Package {
    let against = old.map(|old| Against::solve(COMMIT, old).expect("solved"));
    let record = spanfolio::solve(new).expect("solved").record;
    package(&record, new, against.as_ref()).expect("a package")
}

fn text(package: &Package, path: &str) -> String {
    String::from_utf8(package[path].clone()).expect("UTF-8")
}

#[test]
fn rows_that_changed_carry_the_mark_of_the_revision_and_no_other_row_does() {
    let package = issued(&revised(), Some(sources(SHED)));
    let markdown = text(&package, "package.md");
    let before_the_changes = markdown.split("Changes since revision A").next().expect("text");
    let marked: Vec<&str> =
        before_the_changes.lines().filter(|line| line.starts_with("| ▲")).collect();
    assert_snapshot!(marked.join("\n"));
}

#[test]
fn the_chapter_of_changes_says_what_changed_and_counts_what_did_not() {
    let package = issued(&revised(), Some(sources(SHED)));
    let markdown = text(&package, "package.md");
    let start = markdown.find(" Changes since revision A\n").expect("a chapter");
    let end = markdown[start..].find(" Appendix\n").expect("the appendix") + start;
    assert_snapshot!(&markdown[start..end]);
}

#[test]
fn the_revision_table_says_in_short_what_changed() {
    let package = issued(&revised(), Some(sources(SHED)));
    let markdown = text(&package, "package.md");
    let row = markdown.lines().find(|line| line.contains("Stiffer beam")).expect("a row");
    assert_snapshot!(row);
}

#[test]
fn marks_stand_in_the_margin_of_the_page() {
    let page = text(&issued(&revised(), Some(sources(SHED))), "package.html");
    assert!(page.contains("<th scope=\"row\"><span class=\"changed\">▲B </span>"), "no mark");
}

#[test]
fn old_and_new_lines_are_drawn_over_each_other() {
    let mut new = revised();
    let yaml = new.project().replace("uniform: 3 kN/m", "uniform: 4 kN/m");
    new.files.insert("project.yaml".to_owned(), yaml.into_bytes());
    let package = issued(&new, Some(sources(SHED)));
    assert!(package.contains_key("figures/change-b1.strength.svg"));
    let page = text(&package, "package.html");
    assert!(page.contains("old (broken line) and new (full line)"), "no caption");
}

#[test]
fn a_package_that_is_held_against_nothing_has_neither_marks_nor_the_chapter() {
    let package = issued(&revised(), None);
    let markdown = text(&package, "package.md");
    assert!(!markdown.contains('▲'));
    assert!(!markdown.contains("Changes since"));
    assert!(package.keys().all(|path| !path.starts_with("against/")));
}

#[test]
fn the_earlier_revision_is_kept_in_the_package_and_makes_the_same_package_again() {
    let new = demo("gallery-floor");
    let mut old = new.clone();
    let yaml = old.project().replace("catalogue: IPE 270", "catalogue: IPE 300");
    assert_ne!(yaml, old.project());
    old.files.insert("project.yaml".to_owned(), yaml.into_bytes());
    let first = issued(&new, Some(old.clone()));
    let against = Against::of_package(&first).expect("held against a revision").expect("readable");
    assert_eq!(against.commit(), COMMIT);
    assert_eq!(*against.sources(), old);
    let record = spanfolio::solve(&new).expect("solved").record;
    assert_eq!(package(&record, &new, Some(&against)).expect("a package"), first);
}
