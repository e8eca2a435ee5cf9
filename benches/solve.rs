//! Time of the analysis alone: regular space frames with five load cases, below and above the limit of
//! the portable path.

use std::hint::black_box;

use criterion::{BenchmarkId, Criterion, criterion_group, criterion_main};
use spanfolio::analysis;
use spanfolio::model::{LoadKind, Model};

#[expect(dead_code, reason = "the tests need more of it")]
#[path = "../tests/it/laws/frames/build.rs"]
mod build;

use build::{FIXED, line, on_node, space};

/// Columns on a square grid, beams both ways on every floor: 6 · bays² · floors freedoms.
fn frame(bays: u8, floors: u8) -> Model {
    let (spacing, height) = (5.0, 3.5);
    let name = |x: u8, y: u8, z: u8| format!("{x}-{y}-{z}");
    let mut frame = space();
    let mut beams = 0;
    for z in 0..=floors {
        for y in 0..bays {
            for x in 0..bays {
                let at = [spacing * f64::from(x), spacing * f64::from(y), height * f64::from(z)];
                let own = name(x, y, z);
                frame = frame.node(&own, at);
                if z == 0 {
                    frame = frame.support(&own, FIXED);
                    continue;
                }
                if x > 0 {
                    frame = frame.member(&format!("X {own}"), &[&name(x - 1, y, z), &own]);
                    beams += 1;
                }
                if y > 0 {
                    frame = frame.member(&format!("Y {own}"), &[&name(x, y - 1, z), &own]);
                    beams += 1;
                }
                frame = frame.member(&format!("Z {own}"), &[&name(x, y, z - 1), &own]);
                beams += 1;
            }
        }
    }
    let uniform = |force: [f64; 3]| -> Vec<LoadKind> {
        (0..beams)
            .map(|member| {
                let length = frame.0.members[member].length;
                line(member, length, force)
            })
            .collect()
    };
    let cases = [
        uniform([0.0, 0.0, -8e3]),
        uniform([0.0, 0.0, -5e3]),
        uniform([700.0, 0.0, 0.0]),
        uniform([0.0, 700.0, 0.0]),
        vec![on_node(frame.0.nodes.len() - 1, [0.0, 0.0, -2e4], [0.0; 3])],
    ];
    cases.into_iter().fold(frame, build::Build::case).0
}

fn solve(criterion: &mut Criterion) {
    let mut group = criterion.benchmark_group("solve");
    group.sample_size(10);
    for (bays, floors) in [(5, 4), (10, 10)] {
        let model = frame(bays, floors);
        let freedoms = 6 * usize::from(bays) * usize::from(bays) * usize::from(floors);
        group.bench_with_input(BenchmarkId::from_parameter(freedoms), &model, |bench, model| {
            bench.iter(|| analysis::solve(black_box(model)).expect("a frame that stands"));
        });
    }
    group.finish();
}

criterion_group!(benches, solve);
criterion_main!(benches);
