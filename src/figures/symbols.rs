//! Signs of structural drawings: supports, hinges, springs, moments, dimension lines.

use super::canvas::{Align, Canvas, Pen};
use super::plane::{Point, add, between, length, moved, scaled, sub, turned, unit};
use super::text::Text;
use crate::record::{FreedomRecord, FreedomWord, SupportRecord};

/// Height of a support's triangle, mm.
const TRIANGLE: f64 = 3.6;
/// Downwards on the paper.
const DOWN: Point = [0.0, 1.0];

fn fixed(freedom: FreedomRecord) -> bool {
    freedom == FreedomRecord::Word(FreedomWord::Fixed)
}

fn spring(freedom: FreedomRecord) -> bool {
    matches!(freedom, FreedomRecord::Spring(_))
}

/// A support. `direction` brings a vector of space to the paper; `members` are the directions of the
/// members at the node; in space the freedoms out of the paper count too.
pub(super) fn support(
    canvas: &mut Canvas,
    at: Point,
    support: &SupportRecord,
    direction: impl Fn([f64; 3]) -> Point,
    members: &[Point],
    space: bool,
) {
    let away = away(members);
    let free = support.freedoms;
    let axes = support.axes.map(direction);
    let held = |range: std::ops::Range<usize>| range.clone().all(|i| fixed(free[i]));
    if space && held(0..6) {
        // Level or upright: several members seldom lean alike.
        let level = away[0].abs() > away[1].abs();
        let away = if level { [away[0].signum(), 0.0] } else { [0.0, away[1].signum()] };
        return ground(canvas, at, away, 3.0);
    }
    if space && held(0..3) {
        triangle(canvas, at, DOWN);
        if fixed(free[3]) {
            // A fork: torsion is held too.
            canvas.line([at[0] - 1.6, at[1] - 1.6], [at[0] - 1.6, at[1] + 1.6], Pen::Outline);
            canvas.line([at[0] + 1.6, at[1] - 1.6], [at[0] + 1.6, at[1] + 1.6], Pen::Outline);
        }
        return ground(canvas, moved(at, DOWN, TRIANGLE), DOWN, 3.0);
    }
    if space {
        for axis in 0..3 {
            stay(canvas, at, axes[axis], free[axis], false);
            stay(canvas, at, axes[axis], free[axis + 3], true);
        }
        return;
    }
    let side = |axis: Point| towards(axis, away);
    let turn = free[4];
    match (fixed(free[0]), fixed(free[2])) {
        (true, true) if fixed(turn) => ground(canvas, at, away, 3.2),
        (true, true) => {
            let down = side(axes[2]);
            triangle(canvas, at, down);
            ground(canvas, moved(at, down, TRIANGLE), down, 3.2);
        }
        (along_x, along_z) => {
            for (axis, freedom, here) in [(0, free[0], along_x), (2, free[2], along_z)] {
                let down = side(axes[axis]);
                if here || spring(freedom) {
                    let at = beside(canvas, at, down, members);
                    if here { roller(canvas, at, down) } else { zigzag(canvas, at, down) }
                }
            }
            if fixed(turn) {
                canvas.polygon(
                    &[[-1.3, -1.3], [1.3, -1.3], [1.3, 1.3], [-1.3, 1.3]].map(|c| add(at, c)),
                    Pen::Outline,
                );
            }
        }
    }
    if spring(turn) {
        curl(canvas, at, [1.0, 0.0], [0.0, 1.0], 2.4, false);
    }
}

/// Where to start a symbol that would lie on a member: off the node, joined to it by a line.
fn beside(canvas: &mut Canvas, at: Point, down: Point, members: &[Point]) -> Point {
    if members.iter().all(|member| member[0] * down[0] + member[1] * down[1] < 0.9) {
        return at;
    }
    let start = moved(at, away(members), 2.8);
    canvas.line(at, start, Pen::Axis);
    start
}

/// Points from a node to where no member is.
pub(super) fn away(members: &[Point]) -> Point {
    let sum = members.iter().fold([0.0; 2], |sum, member| add(sum, *member));
    if length(sum) >= 0.2 {
        return scaled(unit(sum), -1.0);
    }
    // Members go on straight: below them, to the left of upright ones.
    let across = turned(members.first().copied().unwrap_or([1.0, 0.0]));
    let keep = if across[1].abs() > 0.3 { across[1] > 0.0 } else { across[0] < 0.0 };
    if keep { across } else { scaled(across, -1.0) }
}

/// The sense of an axis in which a support is drawn: down on the paper unless members are there.
fn towards(axis: Point, away: Point) -> Point {
    let agreement = axis[0] * away[0] + axis[1] * away[1];
    let axis = unit(axis);
    let downwards = if axis[1].abs() > 0.2 { axis[1] } else { -axis[0] };
    let keep = if agreement.abs() > 0.3 { agreement > 0.0 } else { downwards > 0.0 };
    if keep { axis } else { scaled(axis, -1.0) }
}

fn triangle(canvas: &mut Canvas, at: Point, down: Point) {
    let base = moved(at, down, TRIANGLE);
    let half = scaled(turned(down), TRIANGLE * 0.58);
    canvas.polygon(&[at, add(base, half), sub(base, half)], Pen::Open);
}

fn roller(canvas: &mut Canvas, at: Point, down: Point) {
    triangle(canvas, at, down);
    let across = turned(down);
    let base = moved(at, down, TRIANGLE + 0.6);
    for offset in [-1.3, 1.3] {
        canvas.circle(moved(base, across, offset), 0.6, Pen::Open);
    }
    ground(canvas, moved(base, down, 0.6), down, 3.2);
}

/// A line with hatching on its far side: what does not move.
fn ground(canvas: &mut Canvas, at: Point, down: Point, half: f64) {
    let across = turned(down);
    canvas.line(moved(at, across, -half), moved(at, across, half), Pen::Outline);
    let steps = 5;
    for i in 0..steps {
        let start = moved(at, across, -half + 2.0 * half * (f64::from(i) + 0.6) / f64::from(steps));
        canvas.line(start, add(start, add(scaled(down, 1.3), scaled(across, -0.9))), Pen::Hair);
    }
}

fn zigzag(canvas: &mut Canvas, at: Point, down: Point) {
    let across = turned(down);
    let mut points = vec![at, moved(at, down, 1.0)];
    for (i, offset) in [1.1, -1.1, 1.1, -1.1].into_iter().enumerate() {
        let step = 1.0 + 0.35 + 0.7 * [0.0, 1.0, 2.0, 3.0][i];
        points.push(moved(moved(at, down, step), across, offset));
    }
    points.extend([moved(at, down, 4.1), moved(at, down, 5.0)]);
    canvas.polyline(&points, Pen::Axis);
    ground(canvas, moved(at, down, 5.0), down, 2.6);
}

/// One restrained freedom of a support in space: a bar across the end of a stay, two bars where the
/// rotation about the axis is held.
fn stay(canvas: &mut Canvas, at: Point, axis: Point, freedom: FreedomRecord, rotation: bool) {
    if freedom == FreedomRecord::Word(FreedomWord::Free) || length(axis) < 0.1 {
        return;
    }
    let along = towards(axis, DOWN);
    if spring(freedom) && !rotation {
        return zigzag(canvas, at, along);
    }
    let across = scaled(turned(along), 1.5);
    let bars: &[f64] = if rotation { &[2.2, 2.9] } else { &[4.4] };
    let far = bars.iter().copied().fold(0.0, f64::max);
    canvas.line(at, moved(at, along, far), Pen::Axis);
    for bar in bars {
        let end = moved(at, along, *bar);
        canvas.line(sub(end, across), add(end, across), Pen::Outline);
    }
}

pub(super) fn hinge(canvas: &mut Canvas, at: Point) {
    canvas.circle(at, 0.85, Pen::Open);
}

/// Three quarters of a turn from `first` towards `second`, with an arrow head where wanted.
pub(super) fn curl(
    canvas: &mut Canvas,
    centre: Point,
    first: Point,
    second: Point,
    radius: f64,
    head: bool,
) {
    let at = |turn: f64| {
        let angle = turn * std::f64::consts::TAU;
        let (sin, cos) = (libm::sin(angle), libm::cos(angle));
        add(centre, add(scaled(first, cos * radius), scaled(second, sin * radius)))
    };
    let points: Vec<Point> = (0..=24).map(|i| at(-0.1 + 0.75 * f64::from(i) / 24.0)).collect();
    canvas.polyline(&points, Pen::Force);
    if head {
        let (before, end) = (at(0.61), at(0.67));
        canvas.arrow_head(end, unit(sub(end, before)), 1.9);
    }
}

/// A dimension line from `a` to `b` with its text above it; turned with it where it stands.
pub(super) fn dimension(canvas: &mut Canvas, a: Point, b: Point, text: &Text) {
    canvas.line(a, b, Pen::Hair);
    let along = unit(sub(b, a));
    let slash = scaled(add(along, turned(along)), 0.9);
    for end in [a, b] {
        canvas.line(sub(end, slash), add(end, slash), Pen::Axis);
    }
    let middle = between(a, b, 0.5);
    if along[0].abs() > 0.5 {
        canvas.text([middle[0], middle[1] - 2.0], Align::Middle, text);
    } else {
        canvas.upright_text([middle[0] - 2.0, middle[1]], text);
    }
}

/// The axes of space on the paper, named.
pub(super) fn triad(canvas: &mut Canvas, at: Point, axes: &[(&str, Point)]) {
    for (name, axis) in axes {
        let tip = moved(at, *axis, 7.0);
        canvas.line(at, tip, Pen::Axis);
        canvas.arrow_head(tip, unit(*axis), 1.3);
        canvas.label(tip, *axis, 0, Text::new(*name));
    }
}
