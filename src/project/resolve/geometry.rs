//! Vectors, local axes of members, turned axes.

use crate::model::{Axes, Frame};

/// A member whose horizontal run is at most this share of its length counts as vertical.
const VERTICAL: f64 = 0.01;
/// Unit vectors that differ by less than this point the same way.
const SAME_WAY: f64 = 1e-9;

pub(super) type Vector = [f64; 3];

/// The axes of a support that is not turned.
pub(super) const GLOBAL: Axes = [[1.0, 0.0, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, 1.0]];

/// Local x, y, z of a member along `x` (a unit vector): z points most upward, or for a vertical
/// member y is the perpendicular nearest to global +Y.
pub(super) fn usual_axes(x: Vector) -> Axes {
    let run = (x[0] * x[0] + x[1] * x[1]).sqrt();
    if run <= VERTICAL {
        let y = unit(perpendicular([0.0, 1.0, 0.0], x));
        [x, y, cross(x, y)]
    } else {
        let z = unit(perpendicular([0.0, 0.0, 1.0], x));
        [x, cross(z, x), z]
    }
}

/// Local axes with z towards a direction; `None` where it points along the member.
pub(super) fn axes_towards(x: Vector, towards: Vector) -> Option<Axes> {
    let size = length(towards);
    let z = perpendicular(towards, x);
    if size <= 0.0 || length(z) <= 1e-6 * size {
        return None;
    }
    let z = unit(z);
    Some([x, cross(z, x), z])
}

/// Turns y and z right-handed about +x by an angle, rad.
pub(super) fn rotated([x, y, z]: Axes, angle: f64) -> Axes {
    let (sin, cos) = (libm::sin(angle), libm::cos(angle));
    let mix = |a: f64, b: f64| -> Vector { std::array::from_fn(|k| a * y[k] + b * z[k]) };
    [x, mix(cos, sin), mix(-sin, cos)]
}

/// Global axes turned right-handed about one of them by an angle, rad; rows.
pub(super) fn turned(about: usize, angle: f64) -> Axes {
    let (sin, cos) = (libm::sin(angle), libm::cos(angle));
    let (first, second) = ((about + 1) % 3, (about + 2) % 3);
    let mut axes = GLOBAL;
    axes[first][first] = cos;
    axes[first][second] = sin;
    axes[second][first] = -sin;
    axes[second][second] = cos;
    axes
}

/// The axes keep a member's bending planes in and square to the plane of its frame.
pub(super) fn fits(frame: Frame, axes: &Axes) -> bool {
    let across = |axis: Vector| (axis[1].abs() - 1.0).abs() <= SAME_WAY;
    frame == Frame::Space || across(axes[1]) || across(axes[2])
}

/// Makes components that are only round-off exactly what they stand for.
pub(super) fn cleaned(axes: Axes) -> Axes {
    axes.map(|axis| {
        axis.map(|c| {
            if c.abs() <= 1e-14 {
                0.0
            } else if (c.abs() - 1.0).abs() <= 1e-14 {
                c.signum()
            } else {
                c
            }
        })
    })
}

pub(super) fn between(from: Vector, to: Vector) -> Vector {
    [to[0] - from[0], to[1] - from[1], to[2] - from[2]]
}

pub(super) fn dot(a: Vector, b: Vector) -> f64 {
    a[0] * b[0] + a[1] * b[1] + a[2] * b[2]
}

pub(super) fn length(a: Vector) -> f64 {
    dot(a, a).sqrt()
}

pub(super) fn unit(a: Vector) -> Vector {
    scaled(a, 1.0 / length(a))
}

pub(super) fn scaled(a: Vector, factor: f64) -> Vector {
    a.map(|c| c * factor)
}

fn cross(a: Vector, b: Vector) -> Vector {
    [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]]
}

/// What of `a` is at right angles to the unit vector `x`.
fn perpendicular(a: Vector, x: Vector) -> Vector {
    let along = dot(a, x);
    std::array::from_fn(|k| a[k] - along * x[k])
}
