//! Checks as `solve` and `issue` show them: every outcome, and mistakes in formulas and narrative.

use insta::assert_snapshot;

use super::project::Project;

const FLOOR: &str = "format: 1
project: {title: Heron Lane depot, number: HL-1, revisions: [{mark: A, date: 2026-02-03, status: for checking}]}
basis:
  deferred:
    - {id: D1, text: Fire, to: fire engineer, checks: [fire]}
shear_deformation: false
values: {q: {value: 5 kN/m, source: brief}}
materials: {steel: {grade: S275}}
sections: {beam: {catalogue: IPE 240}}
frame: plane
nodes: {A: [0 m, 0 m], B: [6 m, 0 m]}
members: {B1: {along: [A, B], section: beam, material: steel}}
supports: {A: pinned, B: {Z: fixed}}
load_cases: {Q: {title: Store, nature: imposed, loads: [{member: B1, uniform: q}]}}
combinations:
  written:
    - {title: store, purpose: strength, factors: {Q: 1.5}, source: test}
    - {title: use, purpose: characteristic, factors: {Q: 1}, source: test}
checks:
  - {id: bending, sheet: bending stress, members: [B1], purpose: strength}
  - {id: deflection, sheet: span deflection, members: [B1], purpose: characteristic, with: {ratio: 800}}
  - {id: fire, sheet: bending stress, members: [B1], purpose: fire}
  - {id: signed, title: Moment, members: [B1], purpose: strength, reference: test, demand: -M_y, capacity: 9 kN m}
";

const HAND: &str = "# By hand

Load {{ value('q') | quantity }}, moment {{ result('M') | quantity(digits=3) }}, see [](#check:hand) and [the floor](#chapter:effects).

```working
# Simple beam
L = member('B1', 'length')
M = 1.5 * q * L^2 / 8 [kN m]  # largest moment
agree hand: M with effect('B1', 'M_y', 'max', purpose='strength') within 1 %
```
";

fn floor() -> Project {
    let project = Project::of(FLOOR);
    project.put("narrative/by-hand.md", HAND.as_bytes());
    project
}

/// The part of the output that begins with a line and ends before an empty one.
fn part(text: &str, head: &str) -> String {
    let lines = text.lines().skip_while(|line| *line != head);
    lines.take_while(|line| !line.is_empty()).collect::<Vec<_>>().join("\n")
}

#[test]
fn every_outcome_is_printed() {
    let run = floor().run(&["solve", "."]);
    assert_eq!(run.status, 3);
    assert_snapshot!(part(&run.out, "Checks"), @r"
    Checks
      check       on                    utilisation  in  at m  outcome
      bending     member B1                    0.38  C1     3  satisfied
      deflection  member B1                    1.38  C2     3  not satisfied
      fire        member B1                       –            deferred: there is no combination of purpose fire
      signed      member B1                       –            deferred: the demand is below zero (C1 at x = 3 m): use abs(…), or say one_sided: true if that is meant
      hand        narrative/by-hand.md         0.00            satisfied
    ");
    assert_snapshot!(part(&run.out, "Open items"), @r"
    Open items
      - Not satisfied: deflection (Deflection between supports), member B1, utilisation 1.38.
      - Deferred: signed (Moment), member B1: the demand is below zero (C1 at x = 3 m): use abs(…), or say one_sided: true if that is meant.
      - No check of stability in this package: B1.
    ");
}

#[test]
fn a_failing_check_does_not_keep_the_package_from_being_issued() {
    let run = floor().run(&["issue", "."]);
    assert_eq!(run.status, 0);
    assert!(run.err.contains("checks not satisfied: 1, deferred: 2"), "{}", run.err);
}

#[test]
fn satisfied_checks_and_covered_deferrals_end_with_nought() {
    let project = floor();
    project.edit("project.yaml", "ratio: 800", "ratio: 300");
    project.edit("project.yaml", "demand: -M_y", "one_sided: true, demand: -M_y");
    assert_eq!(project.run(&["solve", "."]).status, 0);
}

#[test]
fn the_chapter_of_checks_shows_formula_values_and_result() {
    let project = floor();
    project.run(&["issue", "."]);
    let markdown = String::from_utf8(project.get("package/package.md")).expect("UTF-8");
    let chapter = markdown.split("# 8 Checks").nth(1).expect("the chapter");
    let check = chapter.split("## 8.1 ").nth(1).and_then(|rest| rest.split("## 8.2").next());
    assert_snapshot!(check.expect("the first check"), @r"
    bending: Bending stress, elastic

    - Reference: Elementary theory of bending (Navier), σ = M / W.
    - Check sheet: bending stress.
    - Combinations: strength.

    Worst on member B1 at x = 3 m, in C1 (store).

    Stress that may be reached; f_y where the partial factor is 1:

    $$
    f_{\mathrm{allow}} = f_{y} = 275\,\mathrm{MPa}
    $$

    Bending about the major axis:

    $$
    \sigma_{y} = \frac{\left\lvert M_{y}\right\rvert }{W_{\mathrm{el},y}} = \frac{\left\lvert 33.75\,\mathrm{kN\,m}\right\rvert }{324.3\,\mathrm{cm^{3}}} = 104.1\,\mathrm{MPa}
    $$

    Bending about the minor axis:

    $$
    \sigma_{z} = \frac{\left\lvert M_{z}\right\rvert }{W_{\mathrm{el},z}} = \frac{\left\lvert 0\,\mathrm{kN\,m}\right\rvert }{47.27\,\mathrm{cm^{3}}} = 0\,\mathrm{MPa}
    $$

    Both at the same corner:

    $$
    \sigma = \sigma_{y} + \sigma_{z} = 104.1\,\mathrm{MPa} + 0\,\mathrm{MPa} = 104.1\,\mathrm{MPa}
    $$

    $$
    \mathrm{demand} = \sigma = 104.1\,\mathrm{MPa}
    $$

    $$
    \mathrm{capacity} = f_{\mathrm{allow}} = 275\,\mathrm{MPa}
    $$

    Utilisation 104.1 MPa / 275 MPa = 0.38: **satisfied**.
    ");
    let by_hand = markdown.split("# 2 By hand").nth(1).expect("the narrative");
    assert_snapshot!(by_hand.split("# 3").next().expect("the chapter"), @r"


    Load 5 kN/m, moment 33.8 kN m, see [check hand](#85-hand-agreement-of-a-hand-calculation-with-the-analysis) and [the floor](#7-effects).

    Simple beam

    $$
    L = \mathrm{length}\left(\text{B1}\right) = 6\,\mathrm{m}
    $$

    Largest moment:

    $$
    M = \frac{1.5 \cdot q \cdot {L}^{2}}{8} = \frac{1.5 \cdot 5\,\mathrm{kN/m} \cdot {\left(6\,\mathrm{m}\right)}^{2}}{8} = 33.75\,\mathrm{kN\,m}
    $$

    Agreement hand: the hand value must lie within 1 % of the analysis.

    $$
    \mathrm{hand} = M = 33.75\,\mathrm{kN\,m}
    $$

    $$
    \mathrm{analysis} = M_{y,\mathrm{max}}\left(\text{B1},\; \text{strength}\right) = 33.75\,\mathrm{kN\,m}
    $$

    Difference over tolerance 0.00: **satisfied**.
    ");
}

#[test]
fn an_error_in_a_formula_is_the_fourth_outcome() {
    let project = floor();
    project.edit("project.yaml", "capacity: 9 kN m}", "capacity: 9 kN m / (x - x)}");
    assert_snapshot!(project.run(&["solve", "."]).shown(), @r"
    exit: 2
    --- stderr
    error[formula]: this divides by zero
      --> [PROJECT]/project.yaml:23:118
       |
    23 |   - {id: signed, title: Moment, members: [B1], purpose: strength, reference: test, demand: -M_y, capacity: 9 kN m / (x - x)}
       |                                                                                                                      ^^^^^ check `signed` on member B1 in C1 at x = 0 m
    ");
}

#[test]
fn a_formula_that_does_not_parse_points_at_the_character() {
    let project = floor();
    project.edit("project.yaml", "demand: -M_y", "demand: -M_y +* 2 kN m");
    assert_snapshot!(project.run(&["solve", "."]).shown(), @r"
    exit: 2
    --- stderr
    error[formula]: expected a value, found `*`
      --> [PROJECT]/project.yaml:23:98
       |
    23 |   - {id: signed, title: Moment, members: [B1], purpose: strength, reference: test, demand: -M_y +* 2 kN m, capacity: 9 kN m}
       |                                                                                                  ^
    ");
}

#[test]
fn mistakes_in_the_narrative_are_located_in_its_file() {
    let edits = [
        ("value('q')", "value('p')"),
        ("result('M')", "result('N')"),
        ("digits=3", "unit='kN'"),
        ("#check:hand", "#check:hnad"),
        ("#chapter:effects", "#chapter:effect"),
        ("L^2 / 8", "L^2 / (8"),
        ("L^2 / 8", "L / 8"),
        ("'length'", "'lenght'"),
        ("M with", "{{ M }} with"),
        ("within 1 %", "within 1 kN"),
        ("agree hand: M", "agree hand M"),
        ("# By hand\n", "By hand\n"),
        ("M = 1.5", "1.5"),
        ("`working", "`workings"),
    ];
    let mut said = String::new();
    for (from, to) in edits {
        let project = floor();
        project.edit("narrative/by-hand.md", from, to);
        let run = project.run(&["issue", "."]);
        said += &format!("## {to}\n{}\n", run.err.trim_end());
        assert!(!project.path("package").exists() || run.status == 0, "{to}");
    }
    assert_snapshot!(said, @r"
    ## value('p')
    error[narrative]: no value named `p`
     --> [PROJECT]/narrative/by-hand.md:3:9
      |
    3 | Load {{ value('p') | quantity }}, moment {{ result('M') | quantity(digits=3) }}, see [](#check:hand) and [the floor](#chapter:effects).
      |         ^^^^^^^^^^
    ## result('N')
    error[narrative]: no result named `N`
     --> [PROJECT]/narrative/by-hand.md:3:45
      |
    3 | Load {{ value('q') | quantity }}, moment {{ result('N') | quantity(digits=3) }}, see [](#check:hand) and [the floor](#chapter:effects).
      |                                             ^^^^^^^^^^^
    ## unit='kN'
    error[narrative]: `kN` is not a unit of a moment
     --> [PROJECT]/narrative/by-hand.md:3:59
      |
    3 | Load {{ value('q') | quantity }}, moment {{ result('M') | quantity(unit='kN') }}, see [](#check:hand) and [the floor](#chapter:effects).
      |                                                           ^^^^^^^^^^^^^^^^^^^
    ## #check:hnad
    error[unknown-link]: no check named `hnad` to link to
     --> [PROJECT]/narrative/by-hand.md:3:86
      |
    3 | Load {{ value('q') | quantity }}, moment {{ result('M') | quantity(digits=3) }}, see [](#check:hnad) and [the floor](#chapter:effects).
      |                                                                                      ^^^^^^^^^^^^^^^
      |
      = help: there are bending, deflection, fire, signed, hand
    ## #chapter:effect
    error[unknown-link]: no chapter named `effect` to link to
     --> [PROJECT]/narrative/by-hand.md:3:106
      |
    3 | Load {{ value('q') | quantity }}, moment {{ result('M') | quantity(digits=3) }}, see [](#check:hand) and [the floor](#chapter:effect).
      |                                                                                                          ^^^^^^^^^^^^^^^^^^^^^^^^^^^^
      |
      = help: there are cover, summary, basis, model, actions, combinations, effects, checks, self-check, deferred, appendix, narrative/by-hand.md
    ## L^2 / (8
    error[formula]: expected `)`, found `[`
     --> [PROJECT]/narrative/by-hand.md:8:24
      |
    8 | M = 1.5 * q * L^2 / (8 [kN m]  # largest moment
      |                        ^
    ## L / 8
    error[formula]: the result is a force, which has no value in kN m
     --> [PROJECT]/narrative/by-hand.md:8:5
      |
    8 | M = 1.5 * q * L / 8 [kN m]  # largest moment
      |     ^^^^^^^^^^^^^^^
    ## 'lenght'
    error[unknown-name]: nothing named `lenght` is in reach here
     --> [PROJECT]/narrative/by-hand.md:7:5
      |
    7 | L = member('B1', 'lenght')
      |     ^^^^^^^^^^^^^^^^^^^^^^
    ## {{ M }} with
    error[template-mark]: a working block holds no template marks
     --> [PROJECT]/narrative/by-hand.md:9:13
      |
    9 | agree hand: {{ M }} with effect('B1', 'M_y', 'max', purpose='strength') within 1 %
      |             ^^
      |
      = help: read results by call: `effect('B1', 'M_y', 'max', purpose='strength')`
    ## within 1 kN
    error[quantity]: `1 kN` is a force, expected a plain number such as `1`
     --> [PROJECT]/narrative/by-hand.md:9:74
      |
    9 | agree hand: M with effect('B1', 'M_y', 'max', purpose='strength') within 1 kN
      |                                                                          ^^^^
    ## agree hand M
    error[working]: this agreement is not complete
     --> [PROJECT]/narrative/by-hand.md:9:1
      |
    9 | agree hand M with effect('B1', 'M_y', 'max', purpose='strength') within 1 %
      | ^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^
      |
      = help: write `agree ID: value with value within 3 %`
    ## By hand

    error[heading]: a narrative file begins with the heading of its chapter
     --> [PROJECT]/narrative/by-hand.md:1:1
      |
    1 | By hand
      | ^^^^^^^
      |
      = help: begin with a line such as `# Purpose`
    ## 1.5
    error[working]: this line is not a step, a remark or an agreement
     --> [PROJECT]/narrative/by-hand.md:8:1
      |
    8 | 1.5 * q * L^2 / 8 [kN m]  # largest moment
      | ^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^
      |
      = help: write `name = formula`, `# words`, or `agree ID: value with value within 3 %`

    error[unknown-name]: no value named `M`
     --> [PROJECT]/narrative/by-hand.md:9:13
      |
    9 | agree hand: M with effect('B1', 'M_y', 'max', purpose='strength') within 1 %
      |             ^
      |
      = help: did you mean `q`?

    2 errors
    ## `workings
    error[unknown-link]: no check named `hand` to link to
     --> [PROJECT]/narrative/by-hand.md:3:86
      |
    3 | Load {{ value('q') | quantity }}, moment {{ result('M') | quantity(digits=3) }}, see [](#check:hand) and [the floor](#chapter:effects).
      |                                                                                      ^^^^^^^^^^^^^^^
      |
      = help: there are bending, deflection, fire, signed

    error[narrative]: no result named `M`
     --> [PROJECT]/narrative/by-hand.md:3:45
      |
    3 | Load {{ value('q') | quantity }}, moment {{ result('M') | quantity(digits=3) }}, see [](#check:hand) and [the floor](#chapter:effects).
      |                                             ^^^^^^^^^^^

    2 errors
    ");
}

#[test]
fn a_hand_value_that_disagrees_is_not_satisfied() {
    let project = floor();
    project.edit("narrative/by-hand.md", "L^2 / 8", "L^2 / 10");
    let run = project.run(&["solve", "."]);
    assert_eq!(run.status, 3);
    let checks = part(&run.out, "Checks");
    let line = checks.lines().find(|line| line.contains("hand")).expect("the agreement");
    assert!(line.ends_with("not satisfied"), "{line}");
}

#[test]
fn registers_gather_from_the_narrative() {
    let project = floor();
    let more = "\n```assumption\nid: A7\ntext: The slab spans across.\nstatus: to confirm\nby: site\n```\n\n```open\ntext: Wait for the survey\n```\n\n```reference\nid: R1\ntitle: Survey of the depot\nedition: 2025\n```\n\n```deferral\nid: D7\ntext: Base plates\nto: fabricator\n```\n\nAs [](#assumption:A7) and [](#standard:R1) say.\n";
    project.put("narrative/by-hand.md", format!("{HAND}{more}").as_bytes());
    project.run(&["issue", "."]);
    let markdown = String::from_utf8(project.get("package/package.md")).expect("UTF-8");
    for text in [
        "| A7 | The slab spans across. | to confirm | site |",
        "- Assumption A7 is to be confirmed (by site): The slab spans across.",
        "- Wait for the survey.",
        "| R1 | Survey of the depot | 2025 |",
        "| D7 | Base plates | fabricator |",
        "As [assumption A7](#33-assumptions) and [\\[R1\\]](#32-standards-and-classes) say.",
        "> **Assumption A7 (to confirm, by site).** The slab spans across.",
    ] {
        assert!(markdown.contains(text), "no {text} in\n{markdown}");
    }
}

#[test]
fn a_mistake_in_a_register_block_points_into_the_narrative() {
    let project = floor();
    let more = "\n```assumption\nid: A7\ntext: The slab spans across.\nstatus: unsure\n```\n";
    project.put("narrative/by-hand.md", format!("{HAND}{more}").as_bytes());
    assert_snapshot!(project.run(&["solve", "."]).shown(), @r"
    exit: 2
    --- stderr
    error[unknown-word]: `status` cannot be `unsure`
      --> [PROJECT]/narrative/by-hand.md:15:9
       |
    15 | status: unsure
       |         ^^^^^^ expected `to confirm` or `confirmed`
    ");
}
