//! The worst place of a check along a simple beam, against dense scanning of statics written out here.

use proptest::prelude::*;

use crate::support::solved;

/// Span, m; area, section modulus and shear area of the section, m², m³, m².
const SPAN: f64 = 7.2;
const AREA: f64 = 50e-4;
const MODULUS: f64 = 500e-6;
const SHEAR_AREA: f64 = 20e-4;

/// Loads in kN and kN/m, positions in m: up is positive, and axial load acts towards the pinned end.
#[derive(Clone, Copy, Debug)]
enum Load {
    Point { force: f64, at: f64 },
    Line { load: f64, from: f64, to: f64 },
    Axial { load: f64 },
}

impl Load {
    fn written(self) -> String {
        match self {
            Self::Point { force, at } => {
                format!("{{member: B1, point: {force} kN, at: {at} m, direction: +Z}}")
            }
            Self::Line { load, from, to } => format!(
                "{{member: B1, uniform: {load} kN/m, from: {from} m, to: {to} m, direction: +Z}}"
            ),
            Self::Axial { load } => {
                format!("{{member: B1, uniform: {load} kN/m, direction: local -x}}")
            }
        }
    }

    /// N, V and M just before or just after a place, kN and m.
    fn effects(self, x: f64, after: bool) -> [f64; 3] {
        match self {
            Self::Point { force, at } => {
                let near = -force * (SPAN - at) / SPAN;
                if x > at || after && x >= at {
                    [0.0, near + force, near * x + force * (x - at)]
                } else {
                    [0.0, near, near * x]
                }
            }
            Self::Line { load, from, to } => {
                let near = -load * (to - from) * (SPAN - (from + to) / 2.0) / SPAN;
                let covered = x.clamp(from, to) - from;
                let moment = near * x + load * covered * (x - from - covered / 2.0);
                [0.0, near + load * covered, moment]
            }
            Self::Axial { load } => [-load * (SPAN - x), 0.0, 0.0],
        }
    }

    fn edges(self) -> Vec<f64> {
        match self {
            Self::Point { at, .. } => vec![at],
            Self::Line { from, to, .. } => vec![from, to],
            Self::Axial { .. } => Vec::new(),
        }
    }
}

/// Hundredths, so that the file says exactly what the statics reckon with.
fn hundredths(from: i32, to: i32) -> impl Strategy<Value = f64> {
    (from..=to).prop_map(|n| f64::from(n) / 100.0)
}

fn loads() -> impl Strategy<Value = Load> {
    prop_oneof![
        (hundredths(-6000, 6000), hundredths(20, 700))
            .prop_map(|(force, at)| Load::Point { force, at }),
        (hundredths(-2000, 2000), hundredths(0, 340), hundredths(360, 720))
            .prop_map(|(load, from, to)| Load::Line { load, from, to }),
        hundredths(-8000, 8000).prop_map(|load| Load::Axial { load }),
    ]
}

/// A demand over its capacity as written, and of N, V and M in kN and m.
type Demand = (&'static str, fn([f64; 3]) -> f64);

const DEMANDS: [Demand; 4] = [
    ("sqrt((abs(N) / A + abs(M_y) / W_el_y)^2 + 3 * (V_z / A_vz)^2) / (275 MPa)", |[n, v, m]| {
        let sigma = n.abs() / AREA + m.abs() / MODULUS;
        let tau = v / SHEAR_AREA;
        (sigma * sigma + 3.0 * tau * tau).sqrt() / 275e3
    }),
    ("(N / (600 kN))^2 + abs(M_y) / (130 kN m)", |[n, _, m]| {
        n / 600.0 * (n / 600.0) + m.abs() / 130.0
    }),
    ("max(abs(M_y) / (130 kN m), abs(V_z) / (90 kN)) * (1 + abs(N) / (400 kN))", |[n, v, m]| {
        (m.abs() / 130.0).max(v.abs() / 90.0) * (1.0 + n.abs() / 400.0)
    }),
    ("sqrt(abs(M_y * V_z) / (130 kN m * 90 kN)) + abs(M_y) / (400 kN m)", |[_, v, m]| {
        ((m * v).abs() / (130.0 * 90.0)).sqrt() + m.abs() / 400.0
    }),
];

fn project(loads: &[Load], factors: &[Vec<f64>], demand: &str) -> String {
    let mut cases = String::new();
    for (index, load) in loads.iter().enumerate() {
        let load = load.written();
        cases += &format!("  Q{index}: {{title: Q, nature: imposed, loads: [{load}]}}\n");
    }
    let mut written = String::new();
    for (index, row) in factors.iter().enumerate() {
        let terms: Vec<String> = (0..loads.len()).map(|q| format!("Q{q}: {}", row[q])).collect();
        let terms = terms.join(", ");
        written += &format!(
            "    - {{title: c{index}, purpose: strength, factors: {{{terms}}}, source: test}}\n"
        );
    }
    format!(
        "format: 1
project: {{title: Beam, number: 1, revisions: [{{mark: A, date: 2026-01-01, status: test}}]}}
materials: {{steel: {{E: 210 GPa, G: 81 GPa, density: 1 kg/m3, expansion: 1e-5 /K}}}}
sections: {{beam: {{given: {{A: 50 cm2, I_y: 8000 cm4, I_z: 600 cm4, I_t: 20 cm4, W_el_y: 500 cm3, A_vz: 20 cm2}}}}}}
frame: plane
nodes: {{A: [0 m, 0 m], B: [{SPAN} m, 0 m]}}
members: {{B1: {{along: [A, B], section: beam, material: steel}}}}
supports: {{A: pinned, B: {{Z: fixed}}}}
load_cases:
{cases}combinations:
  written:
{written}checks:
  - {{id: c, title: t, reference: r, purpose: strength, members: [B1], demand: \"{demand}\", capacity: \"1\"}}
"
    )
}

fn combined(loads: &[Load], factors: &[f64], x: f64, after: bool) -> [f64; 3] {
    let mut sum = [0.0; 3];
    for (load, factor) in loads.iter().zip(factors) {
        let of = load.effects(x, after);
        for k in 0..3 {
            sum[k] += factor * of[k];
        }
    }
    sum
}

/// Greatest utilisation over all combinations at 20 001 places and on both sides of every load's edge.
fn scanned(loads: &[Load], factors: &[Vec<f64>], demand: fn([f64; 3]) -> f64) -> f64 {
    let mut places: Vec<f64> = (0..=20_000).map(|step| SPAN * f64::from(step) / 20_000.0).collect();
    places.extend(loads.iter().flat_map(|load| load.edges()));
    let mut greatest = 0.0_f64;
    for row in factors {
        for (x, after) in places.iter().flat_map(|x| [(*x, false), (*x, true)]) {
            // Beyond the very end there is nothing.
            if x < SPAN || !after {
                greatest = greatest.max(demand(combined(loads, row, x, after)));
            }
        }
    }
    greatest
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(64))]
    #[test]
    fn a_check_is_worst_where_dense_scanning_finds_it(
        loads in prop::collection::vec(loads(), 2..6),
        factors in prop::collection::vec(prop::collection::vec(hundredths(-150, 150), 6), 2..5),
        (text, demand) in prop::sample::select(&DEMANDS[..]),
    ) {
        let record = solved(&project(&loads, &factors, text));
        let check = &record.checks[0];
        let found = check.utilisation.expect("a utilisation");
        let scanned = scanned(&loads, &factors, demand);
        // The scan stops half a step, 1/40 000 of the span, short of a smooth peak.
        prop_assert!((found - scanned).abs() <= 1e-6 * scanned, "{found}, scanned {scanned}");
        // The governing combination has that value at that place, on one side of it or the other.
        let state = check.state.as_deref().expect("a combination");
        let index: usize = record.combinations[state].title[1..].parse().expect("c0, c1, …");
        let x = check.x.expect("a place");
        let there = [false, true].map(|after| demand(combined(&loads, &factors[index], x, after)));
        let near = |value: &f64| (value - found).abs() <= 1e-8 * found.max(1e-3);
        prop_assert!(there.iter().any(near), "{found} at {x}: {there:?}");
    }
}
