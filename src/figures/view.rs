//! From space to paper: a plane frame seen along Y, a space frame from the front, the right and above.

use super::canvas::WIDTH;
use super::plane::{Area, Point};
use crate::record::StructureRecord;

/// Clear width left and right of a structure, mm.
const MARGIN: f64 = 24.0;
/// Greatest height of a structure on the paper, mm.
const HEIGHT: f64 = 78.0;

/// A parallel projection at a scale.
#[derive(Clone, Copy, Debug)]
pub(super) struct View {
    right: [f64; 3],
    up: [f64; 3],
    /// mm of paper a metre.
    pub(super) scale: f64,
    origin: Point,
    pub(super) space: bool,
}

impl View {
    /// Fits a structure into one column.
    pub(super) fn of(structure: &StructureRecord) -> Self {
        let space = structure.frame == "space";
        // In space: turned by 28° about Z, then tilted by 22° towards the reader, so that X runs to
        // the right and Y away from the reader.
        let (right, up) = if space {
            ([0.882_95, 0.469_47, 0.0], [-0.175_87, 0.330_76, 0.927_18])
        } else {
            ([1.0, 0.0, 0.0], [0.0, 0.0, 1.0])
        };
        let mut view = Self { right, up, scale: 1.0, origin: [0.0; 2], space };
        let flat: Vec<Point> =
            structure.nodes.values().map(|node| view.direction(node.at)).collect();
        let area = Area::around(&flat);
        let [width, height] = [area.max[0] - area.min[0], area.max[1] - area.min[1]];
        let scale = ((WIDTH - 2.0 * MARGIN) / width).min(HEIGHT / height);
        if scale.is_finite() && scale > 0.0 {
            view.scale = scale;
        }
        let middle = (area.min[0] + area.max[0]) / 2.0;
        view.origin = [WIDTH / 2.0 - middle * view.scale, -area.min[1] * view.scale];
        view
    }

    pub(super) fn point(&self, at: [f64; 3]) -> Point {
        let [x, y] = self.direction(at);
        [self.origin[0] + x * self.scale, self.origin[1] + y * self.scale]
    }

    /// A vector of space on the paper, not scaled.
    pub(super) fn direction(&self, vector: [f64; 3]) -> Point {
        [dot(self.right, vector), -dot(self.up, vector)]
    }
}

pub(super) fn dot(a: [f64; 3], b: [f64; 3]) -> f64 {
    a[0] * b[0] + a[1] * b[1] + a[2] * b[2]
}

pub(super) fn norm(a: [f64; 3]) -> f64 {
    dot(a, a).sqrt()
}

/// `from` moved by `by` along `along`.
pub(super) fn along(from: [f64; 3], along: [f64; 3], by: f64) -> [f64; 3] {
    [from[0] + along[0] * by, from[1] + along[1] * by, from[2] + along[2] * by]
}

pub(super) fn cross(a: [f64; 3], b: [f64; 3]) -> [f64; 3] {
    [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]]
}
