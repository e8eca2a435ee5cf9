//! Generated combinations against an enumeration written independently here.

use std::fmt::Write;

use proptest::prelude::*;
use spanfolio::record::Record;

use crate::support::solved;

/// A two-span beam under weight, two imposed cases, snow and wind from two sides that exclude one another.
fn beam(loads: &[(f64, f64)], combinations: &str) -> Record {
    let natures = [
        "imposed, category: B",
        "imposed, category: E",
        "snow, category: below 1000 m",
        "wind, one_of: wind",
        "wind, one_of: wind",
    ];
    let mut yaml = String::from(
        "format: 1
project: {title: Beam, number: 1, revisions: [{mark: A, date: 2026-01-01, status: test}]}
materials: {steel: {grade: S275}}
sections: {beam: {catalogue: IPE 240}}
frame: plane
nodes: {A: [0 m, 0 m], B: [5 m, 0 m], C: [9 m, 0 m]}
members: {B1: {along: [A, B, C], section: beam, material: steel}}
supports: {A: pinned, B: {Z: fixed}, C: {Z: fixed}}
load_cases:
  G: {title: G, nature: permanent, loads: [{member: B1, uniform: 3 kN/m}]}
",
    );
    for (index, (nature, (q, p))) in natures.iter().zip(loads).enumerate() {
        let _ = writeln!(
            yaml,
            "  Q{index}: {{title: Q, nature: {nature}, loads: [{{member: B1, span: 1, uniform: {q} kN/m}}, {{member: B1, span: 2, point: {p} kN, at: 1.5 m}}]}}"
        );
    }
    solved(&(yaml + combinations))
}

/// EN 1990 (6.10) with the recommended values of Tables A1.1 and A1.2(B), from memory.
fn by_hand() -> Vec<[f64; 6]> {
    let psi0 = [0.7, 1.0, 0.5, 0.6, 0.6];
    let mut rows = Vec::new();
    for permanent in [1.35, 1.0] {
        for set in 0..32_u32 {
            let acts = |index: usize| set & (1 << index) != 0;
            if acts(3) && acts(4) {
                continue;
            }
            let leads: Vec<Option<usize>> = (0..5).filter(|index| acts(*index)).map(Some).collect();
            for lead in if leads.is_empty() { vec![None] } else { leads } {
                let mut row = [permanent, 0.0, 0.0, 0.0, 0.0, 0.0];
                for index in (0..5).filter(|index| acts(*index)) {
                    row[index + 1] = if lead == Some(index) { 1.5 } else { 1.5 * psi0[index] };
                }
                rows.push(row);
            }
        }
    }
    rows
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(10))]

    #[test]
    fn what_governs_among_them_is_what_governs_among_all(
        loads in prop::collection::vec((-6.0..12.0_f64, -15.0..20.0_f64), 5),
        dominated in prop::sample::select(vec!["keep", "drop"]),
    ) {
        let generated = beam(
            &loads,
            &format!("combinations: {{rules: [{{rule: EN 1990 6.10, dominated: {dominated}}}]}}\n"),
        );
        let mut written = String::from("combinations:\n  written:\n");
        for (index, row) in by_hand().iter().enumerate() {
            let mut factors = format!("G: {}", row[0]);
            for (case, factor) in row[1..].iter().enumerate().filter(|(_, factor)| **factor > 0.0) {
                let _ = write!(factors, ", Q{case}: {factor}");
            }
            let _ = writeln!(written, "    - {{title: c{index}, purpose: strength, factors: {{{factors}}}}}");
        }
        let all = beam(&loads, &written);
        for (effect, extremes) in &generated.results.members["B1"].governing["strength"] {
            let theirs = &all.results.members["B1"].governing["strength"][effect];
            let scale = extremes.max.value.abs().max(extremes.min.value.abs()).max(1e-9);
            prop_assert!((extremes.max.value - theirs.max.value).abs() <= 1e-8 * scale, "{effect}");
            prop_assert!((extremes.min.value - theirs.min.value).abs() <= 1e-8 * scale, "{effect}");
        }
        for (node, components) in &generated.results.reactions["strength"] {
            let theirs = &all.results.reactions["strength"][node]["Z"];
            let own = &components["Z"];
            prop_assert!((own.max.value - theirs.max.value).abs() <= 1e-8 * own.max.value.abs().max(1.0));
            prop_assert!((own.min.value - theirs.min.value).abs() <= 1e-8 * own.max.value.abs().max(1.0));
        }
    }
}
