//! The drawing of the method statement.

use super::Figure;
use super::canvas::{Align, Canvas, Pen, WIDTH};
use super::plane::{Point, add, moved, unit};
use super::symbols::curl;
use super::text::Text;

/// Ends of the element on the paper, mm.
const ENDS: [f64; 2] = [45.0, 125.0];
/// Width and height of a curve's plot, mm.
const PLOT: [f64; 2] = [32.0, 11.0];

/// A curve over t from 0 to 1.
type Shape = fn(f64) -> f64;

/// The drawing of the method statement: the beam element, its end freedoms and shape functions.
#[must_use]
pub fn method() -> Figure {
    let mut canvas = Canvas::default();
    element(&mut canvas);
    let top = canvas.bottom() + 12.0;
    // Cubic shape functions of bending without shear deformation, in t = x / L.
    let curves: [(&str, &str, Shape); 4] = [
        ("w at the start = 1", "1 − 3t² + 2t³", |t| 1.0 - 3.0 * t * t + 2.0 * t * t * t),
        ("w′ at the start = 1", "L (t − 2t² + t³)", |t| t - 2.0 * t * t + t * t * t),
        ("w at the end = 1", "3t² − 2t³", |t| 3.0 * t * t - 2.0 * t * t * t),
        ("w′ at the end = 1", "L (t³ − t²)", |t| t * t * t - t * t),
    ];
    for (i, (case, formula, shape)) in (0_u8..).zip(curves) {
        let left = 6.0 + f64::from(i) * (WIDTH - 12.0 - PLOT[0]) / 3.0;
        plot(&mut canvas, [left, top], case, formula, shape);
    }
    let id = "method-element".to_owned();
    let title = "Beam element, its end freedoms and shape functions";
    let caption =
        "Beam element with its freedoms at both ends, and the cubic shape functions of bending \
                   without shear deformation, t = x / L."
            .to_owned();
    let description = "A straight element from its start to its end with displacements u, v, w along and \
                       rotations about the local axes x, y, z at each end; below, four curves: the \
                       deflection for a unit displacement or slope at one end while the other three \
                       are held.";
    Figure { svg: canvas.finish(&id, title, description), id, caption, ..Figure::default() }
}

/// The element, seen a little from the side: x to the right, z up, y away from the reader.
fn element(canvas: &mut Canvas) {
    let axes: [(Point, &str, &str); 3] =
        [([1.0, 0.0], "u", "θ_x"), ([0.6, -0.45], "v", "θ_y"), ([0.0, -1.0], "w", "θ_z")];
    canvas.line([ENDS[0], 0.0], [ENDS[1], 0.0], Pen::Member);
    for (x, name) in ENDS.into_iter().zip(["start", "end"]) {
        for (axis, displacement, rotation) in axes {
            let along = unit(axis);
            // Before the start, so that the element does not hide it.
            let back = if name == "start" && axis[1].abs() < 0.1 { 17.0 } else { 0.0 };
            let at = |by: f64| moved([x, 0.0], along, by - back);
            canvas.arrow(at(1.5), at(10.5), Pen::Force);
            canvas.line(at(10.5), at(14.0), Pen::Axis);
            canvas.arrow_head(at(14.0), along, 1.4);
            canvas.arrow_head(at(15.2), along, 1.4);
            let words = Text::symbol(displacement).then(", ").and_symbol(rotation);
            let side = if back > 0.0 { [0.0, -1.0] } else { along };
            canvas.label(at(if back > 0.0 { 8.0 } else { 15.2 }), side, 1, words);
        }
        canvas.text([x, 4.5], Align::Middle, &Text::new(name));
    }
    canvas.text(
        [85.0, 4.5],
        Align::Middle,
        &Text::new("L, E, G, A, ")
            .and_symbol("I_y")
            .then(", ")
            .and_symbol("I_z")
            .then(", ")
            .and_symbol("I_t"),
    );
    // The sense of a rotation about y: from z towards x.
    curl(canvas, add([85.0, 0.0], [0.0, -9.0]), [-1.0, 0.0], [0.0, -1.0], 3.2, true);
    canvas.label([89.0, -9.0], [1.0, 0.0], 1, Text::new("sense about y"));
}

fn plot(canvas: &mut Canvas, at: Point, case: &str, formula: &str, shape: Shape) {
    let place = |t: f64| add(at, [t * PLOT[0], -shape(t) * PLOT[1]]);
    canvas.line(at, add(at, [PLOT[0], 0.0]), Pen::Axis);
    let line: Vec<Point> = (0_u8..=32).map(|i| place(f64::from(i) / 32.0)).collect();
    canvas.polyline(&line, Pen::Outline);
    let middle = at[0] + PLOT[0] / 2.0;
    canvas.text([middle, at[1] + 6.0], Align::Middle, &Text::new(case));
    canvas.text([middle, at[1] + 9.6], Align::Middle, &Text::new(formula));
}
