//! Edges of a cross-section: straight lines and circular arcs, and loops with rounded corners.
//!
//! Points are (y, z). A loop runs anticlockwise in that plane (from +y towards +z) round material
//! and clockwise round a hole.

use std::f64::consts::{FRAC_1_SQRT_2, FRAC_PI_2, FRAC_PI_4, PI};

pub(super) type Point = [f64; 2];

/// Chords to a quarter of a circle in an outline for drawing.
const CHORDS: f64 = 6.0;

/// One edge of a loop.
#[derive(Clone, Copy, Debug)]
pub(super) enum Edge {
    Line(Point, Point),
    /// Angles from +y towards +z, rad; `to` below `from` runs clockwise.
    Arc {
        centre: Point,
        radius: f64,
        from: f64,
        to: f64,
    },
}

impl Edge {
    /// Least and greatest z.
    pub(super) fn range(&self) -> [f64; 2] {
        match *self {
            Self::Line(a, b) => [a[1].min(b[1]), a[1].max(b[1])],
            Self::Arc { centre, radius, from, to } => {
                let ends = [from, to].map(|angle| centre[1] + radius * libm::sin(angle));
                let reaches = |angle: f64| {
                    let turns = libm::ceil((from.min(to) - angle) / (2.0 * PI));
                    angle + turns * 2.0 * PI <= from.max(to)
                };
                [
                    if reaches(-FRAC_PI_2) { centre[1] - radius } else { ends[0].min(ends[1]) },
                    if reaches(FRAC_PI_2) { centre[1] + radius } else { ends[0].max(ends[1]) },
                ]
            }
        }
    }

    /// The edge with the section turned so that +y becomes +z.
    pub(super) fn quarter_turned(&self) -> Self {
        self.mapped(|[y, z]| [-z, y], FRAC_PI_2)
    }

    /// The edge with the section turned from +y towards +z by 45°.
    pub(super) fn eighth_turned(&self) -> Self {
        self.mapped(|[y, z]| [(y - z) * FRAC_1_SQRT_2, (y + z) * FRAC_1_SQRT_2], FRAC_PI_4)
    }

    fn mapped(&self, point: impl Fn(Point) -> Point, turn: f64) -> Self {
        match *self {
            Self::Line(a, b) => Self::Line(point(a), point(b)),
            Self::Arc { centre, radius, from, to } => {
                Self::Arc { centre: point(centre), radius, from: from + turn, to: to + turn }
            }
        }
    }

    /// Points along the edge without its end, for drawing.
    pub(super) fn points(&self) -> Vec<Point> {
        match *self {
            Self::Line(a, _) => vec![a],
            Self::Arc { centre, radius, from, to } => {
                let chords = libm::ceil(libm::fabs(to - from) / FRAC_PI_2 * CHORDS - 1e-9).max(1.0);
                let step = (to - from) / chords;
                std::iter::successors(Some(0.0), |i| Some(i + 1.0))
                    .take_while(|i| *i < chords)
                    .map(|i| on_circle(centre, radius, from + i * step))
                    .collect()
            }
        }
    }
}

/// A closed loop through corners, each with the radius that rounds it (0: sharp).
///
/// # Errors
/// The number of the corner, counted from 0, where two roundings do not fit on one side.
pub(super) fn rounded(corners: &[(Point, f64)]) -> Result<Vec<Edge>, usize> {
    let n = corners.len();
    let cuts: Vec<f64> = (0..n).map(|i| cut(corners, i)).collect();
    let mut edges = Vec::with_capacity(2 * n);
    for i in 0..n {
        let next = (i + 1) % n;
        let [a, b] = [corners[i].0, corners[next].0];
        let (length, direction) = leg(a, b);
        // Round-off of a corner that fits exactly, as in a half-round end.
        if cuts[i] + cuts[next] > length * (1.0 + 1e-12) {
            return Err(if cuts[i] > 0.0 { i } else { next });
        }
        if let Some(arc) = arc(corners, i, cuts[i]) {
            edges.push(arc);
        }
        if length - cuts[i] - cuts[next] > length * 1e-12 {
            edges.push(Edge::Line(
                [0, 1].map(|k| a[k] + cuts[i] * direction[k]),
                [0, 1].map(|k| b[k] - cuts[next] * direction[k]),
            ));
        }
    }
    Ok(edges)
}

/// A whole circle about the origin.
pub(super) fn circle(radius: f64, clockwise: bool) -> Vec<Edge> {
    let sign = if clockwise { -1.0 } else { 1.0 };
    [0.0, 1.0, 2.0, 3.0]
        .map(|quarter: f64| Edge::Arc {
            centre: [0.0, 0.0],
            radius,
            from: sign * quarter * FRAC_PI_2,
            to: sign * (quarter + 1.0) * FRAC_PI_2,
        })
        .to_vec()
}

fn on_circle(centre: Point, radius: f64, angle: f64) -> Point {
    [centre[0] + radius * libm::cos(angle), centre[1] + radius * libm::sin(angle)]
}

fn leg(a: Point, b: Point) -> (f64, Point) {
    let [dy, dz] = [b[0] - a[0], b[1] - a[1]];
    let length = libm::sqrt(dy * dy + dz * dz);
    (length, [dy / length, dz / length])
}

/// Directions into and out of corner `i`, and the angle from the first to the second, rad.
fn turn(corners: &[(Point, f64)], i: usize) -> (Point, Point, f64) {
    let n = corners.len();
    let (_, into) = leg(corners[(i + n - 1) % n].0, corners[i].0);
    let (_, out) = leg(corners[i].0, corners[(i + 1) % n].0);
    let angle =
        libm::atan2(into[0] * out[1] - into[1] * out[0], into[0] * out[0] + into[1] * out[1]);
    (into, out, angle)
}

/// Length that the rounding of corner `i` takes from both its sides.
fn cut(corners: &[(Point, f64)], i: usize) -> f64 {
    let radius = corners[i].1;
    if radius > 0.0 { radius * libm::tan(libm::fabs(turn(corners, i).2) / 2.0) } else { 0.0 }
}

fn arc(corners: &[(Point, f64)], i: usize, cut: f64) -> Option<Edge> {
    let (corner, radius) = corners[i];
    if cut <= 0.0 {
        return None;
    }
    let (into, _, angle) = turn(corners, i);
    let side = libm::copysign(1.0, angle);
    // From the point of tangency, square to the side and towards the inside of the turn.
    let centre = [
        corner[0] - cut * into[0] - side * radius * into[1],
        corner[1] - cut * into[1] + side * radius * into[0],
    ];
    let from = libm::atan2(-side * into[0], side * into[1]);
    Some(Edge::Arc { centre, radius, from, to: from + angle })
}
