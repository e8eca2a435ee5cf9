//! Points, segments and boxes on the paper: mm, x to the right, y down.

pub(super) type Point = [f64; 2];

pub(super) fn add(a: Point, b: Point) -> Point {
    [a[0] + b[0], a[1] + b[1]]
}

pub(super) fn sub(a: Point, b: Point) -> Point {
    [a[0] - b[0], a[1] - b[1]]
}

pub(super) fn scaled(a: Point, by: f64) -> Point {
    [a[0] * by, a[1] * by]
}

/// `from` moved by `by` along `along`.
pub(super) fn moved(from: Point, along: Point, by: f64) -> Point {
    add(from, scaled(along, by))
}

pub(super) fn between(a: Point, b: Point, t: f64) -> Point {
    [a[0] + (b[0] - a[0]) * t, a[1] + (b[1] - a[1]) * t]
}

pub(super) fn length(a: Point) -> f64 {
    (a[0] * a[0] + a[1] * a[1]).sqrt()
}

/// Unit vector; zero stays zero.
pub(super) fn unit(a: Point) -> Point {
    let l = length(a);
    if l > 1e-12 { scaled(a, 1.0 / l) } else { [0.0, 0.0] }
}

/// Turned a quarter: `[1, 0]` becomes `[0, 1]`.
pub(super) fn turned(a: Point) -> Point {
    [-a[1], a[0]]
}

/// A box with its sides along the paper's.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Area {
    pub(super) min: Point,
    pub(super) max: Point,
}

impl Area {
    pub(super) const EMPTY: Self =
        Self { min: [f64::INFINITY, f64::INFINITY], max: [f64::NEG_INFINITY, f64::NEG_INFINITY] };

    pub(super) fn around(points: &[Point]) -> Self {
        let mut area = Self::EMPTY;
        for point in points {
            area.include(*point);
        }
        area
    }

    pub(super) fn include(&mut self, point: Point) {
        for i in 0..2 {
            self.min[i] = self.min[i].min(point[i]);
            self.max[i] = self.max[i].max(point[i]);
        }
    }

    pub(super) fn grown(self, by: f64) -> Self {
        Self {
            min: [self.min[0] - by, self.min[1] - by],
            max: [self.max[0] + by, self.max[1] + by],
        }
    }

    pub(super) fn overlaps(&self, other: &Self) -> bool {
        (0..2).all(|i| self.min[i] < other.max[i] && other.min[i] < self.max[i])
    }

    /// Nearest point of the box.
    pub(super) fn nearest(&self, point: Point) -> Point {
        [point[0].clamp(self.min[0], self.max[0]), point[1].clamp(self.min[1], self.max[1])]
    }

    /// The segment from `a` to `b` touches the box (clipping by its four sides).
    pub(super) fn meets(&self, a: Point, b: Point) -> bool {
        let (mut enter, mut leave) = (0.0_f64, 1.0_f64);
        for i in 0..2 {
            let run = b[i] - a[i];
            if run.abs() < 1e-12 {
                if a[i] < self.min[i] || a[i] > self.max[i] {
                    return false;
                }
                continue;
            }
            let (t0, t1) = ((self.min[i] - a[i]) / run, (self.max[i] - a[i]) / run);
            enter = enter.max(t0.min(t1));
            leave = leave.min(t0.max(t1));
        }
        enter <= leave
    }
}
