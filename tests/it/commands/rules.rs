//! Combination rules as an engineer meets them: mistakes in the file, what the chapter says, the catalogue.
//! The short lists are written out by hand from EN 1990:2002 + A1:2005, 6.4.3 and Annex A1, and ASCE/SEI
//! 7-22, 2.3 and 2.4 (from memory).

use insta::assert_snapshot;

use super::project::{Project, run};

/// A beam with these load cases (name and what is said of it) and this text below `combinations`.
fn beam(cases: &[(&str, &str)], combinations: &str) -> Project {
    let cases: String = cases
        .iter()
        .map(|(name, said)| {
            format!(
                "  {name}: {{title: {name}, {said}, loads: [{{member: B1, uniform: 1 kN/m}}]}}\n"
            )
        })
        .collect();
    Project::of(&format!(
        "format: 1
project: {{title: Beam, number: 1, revisions: [{{mark: A, date: 2026-01-01, status: test}}]}}
materials: {{steel: {{grade: S275}}}}
sections: {{beam: {{catalogue: IPE 240}}}}
frame: plane
nodes: {{A: [0 m, 0 m], B: [5 m, 0 m]}}
members: {{B1: {{along: [A, B], section: beam, material: steel}}}}
supports: {{A: pinned, B: {{Z: fixed}}}}
load_cases:
{cases}combinations:
  rules:
{combinations}
"
    ))
}

const G: (&str, &str) = ("G", "nature: permanent");
const Q: (&str, &str) = ("Q", "nature: imposed, category: B");

/// The combinations made, one a line: content, then reason.
fn made(cases: &[(&str, &str)], rule: &str) -> String {
    let chapter = chapter(&beam(cases, &format!("    - {rule}")));
    let rows = chapter.lines().filter(|line| line.starts_with("| C") && line.contains(" | 6."));
    let cell =
        |row: &str, index: usize| row.split('|').nth(index).unwrap_or_default().trim().to_owned();
    let line = |row: &str| {
        let reason = cell(row, 4);
        let reason = reason.split_once("; ").map_or("", |(_, reason)| reason);
        format!("{}: {reason}\n", cell(row, 3))
    };
    rows.map(line).collect()
}

/// The chapter of combinations.
fn chapter(project: &Project) -> String {
    let run = project.run(&["issue", "."]);
    assert_eq!(run.status, 0, "{}", run.err);
    let markdown = String::from_utf8(project.get("package/package.md")).expect("UTF-8");
    let after = markdown.split("\n# 5 Combinations").nth(1).expect("the chapter");
    after.split("\n# 6 ").next().expect("its end").to_owned()
}

fn refused(cases: &[(&str, &str)], combinations: &str) -> String {
    let run = beam(cases, combinations).run(&["solve", "."]);
    assert_eq!(run.status, 2, "{}{}", run.out, run.err);
    run.err
}

#[test]
fn an_unknown_rule_brings_the_nearest_one() {
    assert_snapshot!(refused(&[G, Q], "    - {rule: EN 1990 6.10c}"), @r"
    error[unknown-rule]: no combination rule named `EN 1990 6.10c`
      --> [PROJECT]/project.yaml:14:14
       |
    14 |     - {rule: EN 1990 6.10c}
       |              ^^^^^^^^^^^^^
       |
       = help: did you mean `EN 1990 6.10`?
       = help: `spanfolio catalogue rules` lists them; a rule of your own needs `rows`, `purpose` and `source`
    ");
}

#[test]
fn an_unknown_annex_and_an_unknown_value_say_what_there_is() {
    let rules =
        "    - {rule: EN 1990 6.10, annex: Uk}\n    - {rule: EN 1990 6.10b, with: {zi: 0.9}}";
    assert_snapshot!(refused(&[G, Q], rules), @r"
    error[unknown-annex]: no annex values `Uk` for EN 1990
      --> [PROJECT]/project.yaml:14:35
       |
    14 |     - {rule: EN 1990 6.10, annex: Uk}
       |                                   ^^
       |
       = help: did you mean `UK`?
       = help: there are recommended, UK; state others in `with` and `psi`

    error[unknown-key]: `EN 1990 6.10b` has no value `zi`
      --> [PROJECT]/project.yaml:15:36
       |
    15 |     - {rule: EN 1990 6.10b, with: {zi: 0.9}}
       |                                    ^^
       |
       = help: did you mean `xi`?
       = help: it has gamma_G_sup, gamma_G_inf, gamma_Q, xi

    2 errors
    ");
}

#[test]
fn a_rule_that_does_not_read_is_shown_in_its_row() {
    let rules = "    - rule: Depot
      purpose: strength
      source: Client's standard 4
      rows:
        - 1.3 permanent + 1.6 leading
        - 1.3 permanent + 1.6 leadin";
    assert_snapshot!(refused(&[G, Q], rules), @r"
    error[rule]: this rule cannot be read: `leadin` is neither a value of the rule nor a kind of action
      --> [PROJECT]/project.yaml:19:11
       |
    19 |         - 1.3 permanent + 1.6 leadin
       |           ^^^^^^^^^^^^^^^^^^^^^^^^^^
       |
       = help: kinds of action: permanent, leading, accompanying, variable, accidental, seismic, D, L, Lr, S, R, W, F, H, T, Ev, Eh
    ");
}

#[test]
fn a_rule_of_the_project_needs_purpose_and_source() {
    let rules = "    - {rule: Depot, rows: [1.3 permanent + 1.6 variable]}";
    assert_snapshot!(refused(&[G, Q], rules), @r"
    error[missing-key]: the rule `Depot` of the project needs `purpose` and `source`
      --> [PROJECT]/project.yaml:14:14
       |
    14 |     - {rule: Depot, rows: [1.3 permanent + 1.6 variable]}
       |              ^^^^^
    ");
}

#[test]
fn too_many_combinations_are_refused_with_a_way_out() {
    let names: Vec<String> = (1..=15).map(|number| format!("Q{number}")).collect();
    let mut cases = vec![G];
    cases.extend(names.iter().map(|name| (name.as_str(), "nature: imposed, category: B")));
    assert_snapshot!(refused(&cases, "    - {rule: EN 1990 6.10}"), @r"
    error[too-many]: `EN 1990 6.10` makes too many combinations
      --> [PROJECT]/project.yaml:28:14
       |
    28 |     - {rule: EN 1990 6.10}
       |              ^^^^^^^^^^^^
       |
       = help: say `expansion: maximal`, or which cases exclude one another: `one_of`
    ");
    let fewer = beam(&cases, "    - {rule: EN 1990 6.10, expansion: maximal}").run(&["solve", "."]);
    assert_eq!(fewer.status, 0, "{}", fewer.err);
}

/// 6.4.3.2 (6.10), Table A1.2(B); ψ0 = 0.7 for category B, 0.6 for wind.
#[test]
fn each_variable_action_leads_in_turn_and_every_row_says_why() {
    let cases = [G, Q, ("W", "nature: wind")];
    assert_snapshot!(made(&cases, "{rule: EN 1990 6.10, expansion: maximal}"), @r"
    1.35 G + 1.5 Q + 0.9 W: Q leads, permanent unfavourable
    1 G + 1.5 Q + 0.9 W: Q leads, permanent favourable
    1.35 G + 1.05 Q + 1.5 W: W leads, permanent unfavourable
    1 G + 1.05 Q + 1.5 W: W leads, permanent favourable
    ");
}

/// 6.5.3 (6.14b): of two winds at most one.
#[test]
fn one_of_a_group_acts_at_a_time() {
    let cases = [G, ("W1", "nature: wind, one_of: wind"), ("W2", "nature: wind, one_of: wind")];
    assert_snapshot!(made(&cases, "{rule: EN 1990 characteristic}"), @r"
    1 G + 1 W1: W1 leads
    1 G + 1 W2: W2 leads
    1 G: without W1, W2
    ");
}

/// The same list from one case that acts in both senses.
#[test]
fn a_case_reverses() {
    let cases = [G, ("W", "nature: wind, reverses: true")];
    assert_snapshot!(made(&cases, "{rule: EN 1990 characteristic}"), @r"
    1 G + 1 W: W leads
    1 G − 1 W: W leads, W reversed
    1 G: without W
    ");
}

/// Braking of a hoist acts only when the hoist is loaded. ψ0 of category E is 1.
#[test]
fn a_case_acts_only_with_another() {
    let cases = [
        G,
        ("H", "nature: imposed, category: E"),
        ("B", "nature: imposed, category: E, together_with: [H]"),
    ];
    assert_snapshot!(made(&cases, "{rule: EN 1990 characteristic}"), @r"
    1 G + 1 H + 1 B: H leads
    1 G + 1 H: H leads, without B
    1 G: without H, B
    ");
}

/// Table A1.2(B), NOTE 3: permanent actions of one source have one factor; here two sources.
#[test]
fn sources_of_permanent_actions_choose_for_themselves() {
    let cases = [("G", "nature: permanent"), ("E", "nature: earth, source_group: soil")];
    assert_snapshot!(made(&cases, "{rule: EN 1990 6.10}"), @r"
    1.35 G + 1.35 E: permanent (others) unfavourable, permanent (soil) unfavourable
    1.35 G + 1 E: permanent (others) unfavourable, permanent (soil) favourable
    1 G + 1.35 E: permanent (others) favourable, permanent (soil) unfavourable
    1 G + 1 E: permanent (others) favourable, permanent (soil) favourable
    ");
}

/// ψ0 is 0.7 for Q and 1 for S: where Q acts unfavourably `1.5 Q + 1.5 S` is worse than `1.05 Q + 1.5 S`, where it
/// acts favourably `1.5 S` is. So with either factor on G one row of five can never govern.
#[test]
fn what_can_never_govern_is_counted_and_left_out_on_request() {
    let cases = [G, Q, ("S", "nature: imposed, category: E")];
    let kept = chapter(&beam(&cases, "    - {rule: EN 1990 6.10}"));
    let dropped = chapter(&beam(&cases, "    - {rule: EN 1990 6.10, dominated: drop}"));
    let row = |chapter: &str| -> String {
        chapter.lines().filter(|line| line.starts_with("| EN 1990")).map(str::to_owned).collect()
    };
    assert_snapshot!(format!("{}\n{}", row(&kept), row(&dropped)), @r"
    | EN 1990 6.10 | EN 1990 (2002 + A1:2005), 6.4.3.2 (6.10), Table A1.2(B); values: recommended | strength | all subsets | 10 | 0 | 2, kept |
    | EN 1990 6.10 | EN 1990 (2002 + A1:2005), 6.4.3.2 (6.10), Table A1.2(B); values: recommended | strength | all subsets | 8 | 0 | 2, left out |
    ");
}

#[test]
fn the_chapter_shows_rules_factors_and_what_is_left_out() {
    let cases = [G, Q, ("W", "nature: wind, reverses: true"), ("X", "nature: settlement")];
    let rules = "    - {rule: EN 1990 6.10b, annex: UK, expansion: maximal}";
    assert_snapshot!(chapter(&beam(&cases, rules)), @r"
    ## 5.1 Rules

    **Table 19.** Rules in use, with what each made

    | Rule | Reference | Purpose | Expansion | Combinations | The same as others | Can never govern |
    | --- | --- | --- | --- | ---: | ---: | --- |
    | EN 1990 6.10b | EN 1990 (2002 + A1:2005), 6.4.3.2 (6.10b), Table A1.2(B); values: UK | strength | maximal | 8 | 0 | 0, kept |

    A combination can never govern when for every choice of signs of the effects another has the same or worse factors. All subsets: every set of variable actions that can act together, each leading in turn; what is left out acts favourably. Maximal, as written: only sets to which nothing can be added.

    - EN 1990 6.10b: `(xi gamma_G_sup | gamma_G_inf) permanent + gamma_Q leading + gamma_Q psi0 accompanying` with gamma_G_sup = 1.35, gamma_G_inf = 1, gamma_Q = 1.5, xi = 0.925.

    **Table 20.** ψ factors as used

    | Case | ψ0 | ψ1 | ψ2 | From |
    | --- | ---: | ---: | ---: | --- |
    | Q | 0.7 | 0.5 | 0.3 | category B (UK values) |
    | W | 0.5 | 0.2 | 0 | wind (UK values) |

    ## 5.2 How cases act together

    - W acts in both senses, one at a time.
    - Load cases in no combination: X.

    ## 5.3 Combinations for strength

    **Table 21.** Combinations, strength

    | Number | Title | Expression | Clause, source or reason |
    | --- | --- | --- | --- |
    | C1 | 6.10b | 1.24875 G + 1.5 Q + 0.75 W | EN 1990, 6.4.3.2 (6.10b), Table A1.2(B); Q leads, permanent unfavourable |
    | C2 | 6.10b | 1 G + 1.5 Q + 0.75 W | EN 1990, 6.4.3.2 (6.10b), Table A1.2(B); Q leads, permanent favourable |
    | C3 | 6.10b | 1.24875 G + 1.05 Q + 1.5 W | EN 1990, 6.4.3.2 (6.10b), Table A1.2(B); W leads, permanent unfavourable |
    | C4 | 6.10b | 1 G + 1.05 Q + 1.5 W | EN 1990, 6.4.3.2 (6.10b), Table A1.2(B); W leads, permanent favourable |
    | C5 | 6.10b | 1.24875 G + 1.5 Q − 0.75 W | EN 1990, 6.4.3.2 (6.10b), Table A1.2(B); Q leads, permanent unfavourable, W reversed |
    | C6 | 6.10b | 1 G + 1.5 Q − 0.75 W | EN 1990, 6.4.3.2 (6.10b), Table A1.2(B); Q leads, permanent favourable, W reversed |
    | C7 | 6.10b | 1.24875 G + 1.05 Q − 1.5 W | EN 1990, 6.4.3.2 (6.10b), Table A1.2(B); W leads, permanent unfavourable, W reversed |
    | C8 | 6.10b | 1 G + 1.05 Q − 1.5 W | EN 1990, 6.4.3.2 (6.10b), Table A1.2(B); W leads, permanent favourable, W reversed |

    ## 5.4 Factors

    **Table 22.** Factors on load cases

    | | G | Q | W | X |
    | --- | ---: | ---: | ---: | ---: |
    | C1 | 1.24875 | 1.5 | 0.75 |  |
    | C2 | 1 | 1.5 | 0.75 |  |
    | C3 | 1.24875 | 1.05 | 1.5 |  |
    | C4 | 1 | 1.05 | 1.5 |  |
    | C5 | 1.24875 | 1.5 | −0.75 |  |
    | C6 | 1 | 1.5 | −0.75 |  |
    | C7 | 1.24875 | 1.05 | −1.5 |  |
    | C8 | 1 | 1.05 | −1.5 |  |
    ");
}

#[test]
fn the_first_page_names_cases_that_count_nowhere() {
    let project = beam(&[G, Q, ("X", "nature: settlement")], "    - {rule: EN 1990 6.10}");
    let run = project.run(&["solve", "."]);
    assert!(run.out.contains("- Load cases in no combination: X."), "{}", run.out);
}

#[test]
fn the_catalogue_lists_rules_and_prints_one_in_full() {
    let all = run(&["catalogue", "rules"]);
    assert!(all.out.contains("EN 1990 6.10b"), "{}", all.out);
    assert_snapshot!(run(&["catalogue", "asce", "7-16", "allowable"]).shown(), @r"
    exit: 0
    --- stdout
    ASCE 7-16 allowable
    ASCE/SEI 7-16 (2016), 2.4.1

    Purpose allowable; expansion as written unless stated

    Rows
      1: D + F
      2: D + F + L
      3: D + F + (Lr | S | R)   (only with Lr or S or R)
      4: D + F + 0.75 L + 0.75 (Lr | S | R)
      5: D + F + 0.6 W   (only with W)
      6: D + F + 0.75 L + 0.75 (0.6 W) + 0.75 (Lr | S | R)   (only with W)
      7: 0.6 D + 0.6 W   (only with W)

    Source: ASCE/SEI 7-16, 2.3.1, 2.3.6, 2.4.1, 2.4.5
    Verified: From memory.
    ");
    let one = run(&["catalogue", "EN", "1990", "6.10b"]);
    assert!(one.out.contains("UK: xi = 0.925"), "{}", one.out);
    let json = run(&["catalogue", "EN", "1990", "6.10b", "--json"]);
    let json: serde_json::Value = serde_json::from_str(&json.out).expect("JSON");
    assert_eq!(json["rules"][0]["annex_values"]["UK"]["xi"], 0.925);
}

#[test]
fn a_hand_calculation_names_a_combination_by_its_content() {
    let project = beam(&[G, Q], "    - {rule: EN 1990 6.10}\nnarrative: [narrative/hand.md]");
    let hand = |state: &str| {
        format!(
            "# By hand\n\n```working\nM = (1.35 + 1.5) * 1 kN/m * (5 m)^2 / 8 [kN m]\nagree hand: M with effect('B1', 'M_y', at=2.5 m, state='{state}') within 0.1 %\n```\n"
        )
    };
    project.put("narrative/hand.md", hand("1.5 Q + 1.35 G").as_bytes());
    let run = project.run(&["solve", "."]);
    assert!(run.out.contains("narrative/hand.md  "), "{}{}", run.out, run.err);
    project.put("narrative/hand.md", hand("6.10").as_bytes());
    assert_snapshot!(project.run(&["solve", "."]).err, @r"
    error[unknown-name]: 4 combinations are titled `6.10`
     --> [PROJECT]/narrative/hand.md:5:20
      |
    5 | agree hand: M with effect('B1', 'M_y', at=2.5 m, state='6.10') within 0.1 %
      |                    ^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^
      |
      = help: name one by its content: `1.35 G + 1.5 Q`, `1 G + 1.5 Q`, `1.35 G`, `1 G`
    ");
    project.put("narrative/hand.md", hand("1.35 G + 1.5 Z").as_bytes());
    assert_eq!(project.run(&["solve", "."]).status, 2);
}
