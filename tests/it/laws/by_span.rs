//! Spans loaded or not: adverse selection and arrangements against brute-force enumeration.

use std::fmt::Write;

use proptest::prelude::*;
use spanfolio::record::Record;

use crate::support::solved;

/// Loads of each span: intensity and a point load at a share of the span.
type Loads = [(f64, f64, f64)];

const HEAD: &str = "format: 1
project: {title: Beam, number: 1, revisions: [{mark: A, date: 2026-01-01, status: test}]}
materials: {steel: {grade: S275}}
sections: {beam: {catalogue: IPE 300}}
frame: plane
";

/// A beam over as many spans as there are loads, with an overhang as the last.
fn beam(loads: &Loads) -> String {
    let mut yaml = HEAD.to_owned() + "nodes: {N0: [0 m, 0 m]";
    let mut x = 0.0;
    for index in 0..loads.len() {
        x += if index + 1 == loads.len() { 1.7 } else { 4.0 + 0.5 * index as f64 };
        let _ = write!(yaml, ", N{}: [{x} m, 0 m]", index + 1);
    }
    let names: Vec<String> = (0..=loads.len()).map(|index| format!("N{index}")).collect();
    let _ = write!(
        yaml,
        "}}\nmembers: {{B1: {{along: [{}], section: beam, material: steel}}}}\nsupports: {{N0: pinned",
        names.join(", ")
    );
    for index in 1..loads.len() {
        let _ = write!(yaml, ", N{index}: {{Z: fixed}}");
    }
    yaml + "}\nload_cases:\n  G: {title: G, nature: permanent, loads: [{member: B1, uniform: 3 kN/m}]}\n"
}

fn lines(loads: &Loads, spans: &[usize]) -> String {
    let mut out = String::new();
    for span in spans {
        let (q, p, share) = loads[*span];
        let length = if span + 1 == loads.len() { 1.7 } else { 4.0 + 0.5 * *span as f64 };
        let _ = write!(
            out,
            "{{member: B1, span: {}, uniform: {q} kN/m}}, {{member: B1, span: {}, point: {p} kN, at: {} m}}, ",
            span + 1,
            span + 1,
            share * length
        );
    }
    format!("[{}]", out.trim_end_matches(", "))
}

const CHECK: &str = "checks:
  - {id: c, title: t, reference: r, members: [B1], purpose: strength, demand: abs(M_y) / (80 kN m) + (V_z / (100 kN))^2, capacity: \"1\"}
  - {id: n, title: t, reference: r, node: N1, purpose: strength, demand: R_up, capacity: 100 kN}
";

/// The case by span, as the program takes it.
fn by_span(loads: &Loads, loading: &str, factors: [f64; 2]) -> Record {
    let all: Vec<usize> = (0..loads.len()).collect();
    solved(&format!(
        "{}  Q: {{title: Q, nature: imposed, by_span: {loading}, loads: {}}}\ncombinations: {{written: [{{title: one, purpose: strength, factors: {{G: {}, Q: {}}}}}]}}\n{CHECK}",
        beam(loads),
        lines(loads, &all),
        factors[0],
        factors[1]
    ))
}

/// Each span a case of its own, one combination for each set.
fn enumerated(loads: &Loads, sets: &[Vec<usize>], factors: [f64; 2]) -> Record {
    let mut yaml = beam(loads);
    for span in 0..loads.len() {
        let _ = writeln!(
            yaml,
            "  Q{span}: {{title: Q, nature: imposed, loads: {}}}",
            lines(loads, &[span])
        );
    }
    yaml += "combinations:\n  written:\n";
    for (index, set) in sets.iter().enumerate() {
        let parts: Vec<String> =
            set.iter().map(|span| format!(", Q{span}: {}", factors[1])).collect();
        let _ = writeln!(
            yaml,
            "    - {{title: c{index}, purpose: strength, factors: {{G: {}{}}}}}",
            factors[0],
            parts.concat()
        );
    }
    solved(&(yaml + CHECK))
}

fn subsets(count: usize) -> Vec<Vec<usize>> {
    (0..1_u32 << count)
        .map(|set| (0..count).filter(|index| set & (1 << index) != 0).collect())
        .collect()
}

/// Governing values of every effect, span and reaction, and utilisations, agree.
fn agree(one: &Record, other: &Record) -> Result<(), TestCaseError> {
    let (a, b) = (&one.results.members["B1"], &other.results.members["B1"]);
    let spans = a.spans.iter().zip(&b.spans).map(|(a, b)| (&a.governing, &b.governing));
    for (a, b) in std::iter::once((&a.governing, &b.governing)).chain(spans) {
        for (effect, extremes) in &a["strength"] {
            let theirs = &b["strength"][effect];
            let scale = extremes.max.value.abs().max(extremes.min.value.abs()).max(1e-9);
            for (own, their) in [(&extremes.max, &theirs.max), (&extremes.min, &theirs.min)] {
                prop_assert!(
                    (own.value - their.value).abs() <= 1e-8 * scale,
                    "{effect}: {} and {}",
                    own.value,
                    their.value
                );
            }
        }
    }
    for (node, components) in &one.results.reactions["strength"] {
        for (component, extremes) in components {
            let theirs = &other.results.reactions["strength"][node][component];
            let scale = extremes.max.value.abs().max(1.0);
            prop_assert!((extremes.max.value - theirs.max.value).abs() <= 1e-8 * scale, "{node}");
            prop_assert!((extremes.min.value - theirs.min.value).abs() <= 1e-8 * scale, "{node}");
        }
    }
    for (a, b) in one.checks.iter().zip(&other.checks) {
        let (a, b) = (a.utilisation.unwrap_or(0.0), b.utilisation.unwrap_or(0.0));
        prop_assert!((a - b).abs() <= 1e-8 * a.abs().max(1e-3), "{a} and {b}");
    }
    Ok(())
}

/// The value at a governing place is that of its own loaded spans.
fn loaded_gives_its_value(record: &Record) -> Result<(), TestCaseError> {
    let (state, combination) = record.combinations.first().expect("a combination");
    for (name, extremes) in &record.results.members["B1"].governing["strength"] {
        let effect = spanfolio::model::Effect::from_name(name).expect("an effect");
        for extreme in [&extremes.max, &extremes.min] {
            prop_assert_eq!(&extreme.state, state);
            let (x, side) = (extreme.x.expect("a place"), extreme.side);
            let side = side.unwrap_or(spanfolio::model::Side::Before);
            let at = |state: &str| record.effect("B1", effect, state, x, side).expect("a value");
            let loaded: f64 = extreme.loaded.iter().map(|part| at(part)).sum();
            let sum = combination.factors["G"] * at("G") + combination.factors["Q"] * loaded;
            let scale = extremes.max.value.abs().max(extremes.min.value.abs()).max(1e-9);
            prop_assert!(
                (sum - extreme.value).abs() <= 1e-8 * scale,
                "{name}: {sum} {}",
                extreme.value
            );
        }
    }
    Ok(())
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(12))]

    #[test]
    fn adverse_selection_is_the_worst_of_all_subsets(
        loads in prop::collection::vec((0.5..12.0_f64, 0.0..20.0_f64, 0.1..0.9_f64), 2..6),
        sense in prop::sample::select(vec![1.5, -1.5]),
    ) {
        let factors = [1.35, sense];
        let one = by_span(&loads, "true", factors);
        agree(&one, &enumerated(&loads, &subsets(loads.len()), factors))?;
        loaded_gives_its_value(&one)?;
    }

    #[test]
    fn simplified_arrangements_are_the_worst_of_their_sets(
        loads in prop::collection::vec((0.5..12.0_f64, 0.0..20.0_f64, 0.1..0.9_f64), 3..6),
    ) {
        let count = loads.len();
        let all: Vec<usize> = (0..count).collect();
        let odd = all.iter().copied().filter(|span| span % 2 == 0).collect();
        let even = all.iter().copied().filter(|span| span % 2 == 1).collect();
        let mut sets = vec![all, odd, even, Vec::new()];
        let factors = [1.35, 1.5];
        agree(&by_span(&loads, "alternate", factors), &enumerated(&loads, &sets, factors))?;
        sets.extend((1..count).map(|second| vec![second - 1, second]));
        let one = by_span(&loads, "alternate and adjacent", factors);
        agree(&one, &enumerated(&loads, &sets, factors))?;
    }
}

/// Eight spans: more parts than are tried in every choice.
#[test]
fn checks_of_many_spans_find_what_enumeration_finds() {
    let loads: Vec<(f64, f64, f64)> =
        (0..8).map(|span| (4.0 + f64::from(span), 6.0, 0.4)).collect();
    let factors = [1.35, 1.5];
    let one = by_span(&loads, "true", factors);
    let other = enumerated(&loads, &subsets(8), factors);
    agree(&one, &other).expect("the same");
}

/// Joists hand their reaction on to a beam: parts are the beam's spans, and what is handed on is the reaction
/// with all parts acting.
#[test]
fn parts_of_a_reaction_handed_on_are_the_receiving_members_spans() {
    let record = solved(&format!(
        "{}structures:
  joists:
    frame: plane
    nodes: {{JA: [0 m, 0 m], JB: [3 m, 0 m], JC: [6 m, 0 m]}}
    members: {{J1: {{along: [JA, JB, JC], section: beam, material: steel}}}}
    supports: {{JA: pinned, JB: {{Z: fixed}}, JC: {{Z: fixed}}}}
  beam:
    frame: plane
    nodes: {{A: [0 m, 0 m], B: [4 m, 0 m], C: [8 m, 0 m]}}
    members: {{B1: {{along: [A, B, C], section: beam, material: steel}}}}
    supports: {{A: pinned, B: {{Z: fixed}}, C: {{Z: fixed}}}}
load_cases:
  Q: {{title: Q, nature: imposed, by_span: true, loads: [{{member: J1, uniform: 4 kN/m}}, {{member: B1, reaction_of: JB, every: 1 m, from: 0.5 m, to: 7.5 m}}]}}
combinations: {{written: [{{title: one, purpose: strength, factors: {{Q: 1}}}}]}}
",
        HEAD.replace("frame: plane\n", "")
    ));
    let by_span = record.model.cases["Q"].by_span.as_ref().expect("a case by span");
    assert_eq!(by_span.parts, ["Q/J1.1", "Q/J1.2", "Q/B1.1", "Q/B1.2"]);
    // Two equal spans of 3 m: the middle takes 1.25 q L = 15 kN, at each of eight places.
    let reaction = |state: &str| -> f64 {
        ["A", "B", "C"]
            .iter()
            .map(|node| record.reaction(node, state).expect("a reaction")[2])
            .sum()
    };
    // Shear deformation moves a little of it.
    assert!((reaction("Q/B1.1") / 60e3 - 1.0).abs() < 0.02, "{}", reaction("Q/B1.1"));
    assert!((reaction("Q/B1.1") + reaction("Q/B1.2") - reaction("Q")).abs() < 1e-6);
    assert!(reaction("Q/J1.1").abs() < 1e-9);
    let span = &record.results.members["B1"].spans[0].governing["strength"]["M_y"].max;
    assert_eq!(span.loaded, ["Q/B1.1"]);
}
