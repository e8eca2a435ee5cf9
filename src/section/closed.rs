//! Solid and hollow sections: rectangle, circle, tube, rectangular hollow.

use std::f64::consts::PI;

use indexmap::IndexMap;

use super::edge::{self, Edge, Point};
use super::shape::{ShapeError, below, positive, radius};
use super::{Methods, Properties, integral, torsion};

pub(super) fn rectangle(width: f64, depth: f64) -> Result<Properties, ShapeError> {
    positive("width", width)?;
    positive("depth", depth)?;
    let section = integral::properties(&[
        rectangle_loop(width, depth, 0.0, false).expect("sharp corners always fit")
    ]);
    Ok(Properties {
        i_t: torsion::rectangle(width, depth),
        a_sy: Some(5.0 / 6.0 * section.area),
        a_sz: Some(5.0 / 6.0 * section.area),
        a_vy: Some(section.area),
        a_vz: Some(section.area),
        shear_centre: Some([0.0, 0.0]),
        dimensions: symbols([("b", width), ("h", depth)]),
        methods: Methods {
            torsion: Some(torsion::RECTANGLE),
            warping: None,
            shear_area: Some("A_sy = A_sz = 5/6 A (parabolic shear stress, Timoshenko)"),
            shear_resistance: Some("A_vy = A_vz = A (EN 1993-1-1, 6.2.6(3), solid bar)"),
        },
        ..section
    })
}

pub(super) fn circle(diameter: f64) -> Result<Properties, ShapeError> {
    positive("diameter", diameter)?;
    let section = integral::properties(&[edge::circle(diameter / 2.0, false)]);
    Ok(Properties {
        i_t: section.i_y + section.i_z,
        i_w: Some(0.0),
        a_sy: Some(0.9 * section.area),
        a_sz: Some(0.9 * section.area),
        a_vy: Some(section.area),
        a_vz: Some(section.area),
        shear_centre: Some([0.0, 0.0]),
        dimensions: symbols([("d", diameter)]),
        methods: Methods {
            torsion: Some(torsion::ROUND),
            warping: Some("I_w = 0, a circle does not warp"),
            shear_area: Some("A_sy = A_sz = 0.9 A (parabolic shear stress, Timoshenko)"),
            shear_resistance: Some("A_vy = A_vz = A (EN 1993-1-1, 6.2.6(3), solid bar)"),
        },
        ..section
    })
}

pub(super) fn tube(diameter: f64, thickness: f64) -> Result<Properties, ShapeError> {
    positive("diameter", diameter)?;
    positive("thickness", thickness)?;
    below("thickness", thickness, diameter / 2.0, "half the `diameter`")?;
    let outer = diameter / 2.0;
    let section =
        integral::properties(&[edge::circle(outer, false), edge::circle(outer - thickness, true)]);
    Ok(Properties {
        i_t: section.i_y + section.i_z,
        i_w: Some(0.0),
        a_sy: Some(0.5 * section.area),
        a_sz: Some(0.5 * section.area),
        a_vy: Some(2.0 * section.area / PI),
        a_vz: Some(2.0 * section.area / PI),
        shear_centre: Some([0.0, 0.0]),
        dimensions: symbols([("d", diameter), ("t", thickness)]),
        methods: Methods {
            torsion: Some(torsion::ROUND),
            warping: Some("I_w = 0, a circular tube does not warp"),
            shear_area: Some("A_sy = A_sz = 0.5 A (thin-walled tube, Timoshenko)"),
            shear_resistance: Some("A_vy = A_vz = 2 A/π (EN 1993-1-1, 6.2.6(3)g)"),
        },
        ..section
    })
}

pub(super) fn hollow(
    width: f64,
    depth: f64,
    thickness: f64,
    outer: Option<f64>,
    inner: Option<f64>,
) -> Result<Properties, ShapeError> {
    positive("width", width)?;
    positive("depth", depth)?;
    positive("thickness", thickness)?;
    let least = width.min(depth);
    below("thickness", thickness, least / 2.0, "half of the smaller of `width` and `depth`")?;
    let (outer, inner) = match (outer, inner) {
        (None, None) => (1.5 * thickness, thickness),
        (Some(outer), None) => (outer, (outer - thickness).max(0.0)),
        (None, Some(inner)) => (inner + thickness, inner),
        (Some(outer), Some(inner)) => (outer, inner),
    };
    radius("outer_radius", Some(outer))?;
    radius("inner_radius", Some(inner))?;
    // Otherwise the wall at a corner closes up: the outer arc would come nearer than the inner one.
    if (outer - inner - thickness) * (libm::sqrt(2.0) - 1.0) >= thickness {
        return Err(ShapeError::new(
            "outer_radius",
            "`outer_radius` leaves no wall at the corners",
        ));
    }
    let outer_loop = rectangle_loop(width, depth, outer, false).ok_or_else(|| {
        ShapeError::new("outer_radius", "`outer_radius` must be at most half the smaller side")
    })?;
    let hole = rectangle_loop(width - 2.0 * thickness, depth - 2.0 * thickness, inner, true)
        .ok_or_else(|| {
            ShapeError::new("inner_radius", "`inner_radius` must be at most half the clear side")
        })?;
    let section = integral::properties(&[outer_loop, hole]);
    Ok(Properties {
        i_t: torsion::hollow(width, depth, thickness, (outer + inner) / 2.0),
        a_sy: Some(2.0 * (width - thickness) * thickness),
        a_sz: Some(2.0 * (depth - thickness) * thickness),
        a_vy: Some(section.area * width / (width + depth)),
        a_vz: Some(section.area * depth / (width + depth)),
        shear_centre: Some([0.0, 0.0]),
        dimensions: symbols([
            ("h", depth),
            ("b", width),
            ("t", thickness),
            ("r_o", outer),
            ("r_i", inner),
        ]),
        methods: Methods {
            torsion: Some(torsion::HOLLOW),
            warping: None,
            shear_area: Some(
                "A_sz = 2 (h - t) t, A_sy = 2 (b - t) t: the two walls along the force, on their mean line (common practice, no source)",
            ),
            shear_resistance: Some(
                "A_vz = A h/(b + h), A_vy = A b/(b + h) (EN 1993-1-1, 6.2.6(3)f)",
            ),
        },
        ..section
    })
}

fn rectangle_loop(width: f64, depth: f64, radius: f64, hole: bool) -> Option<Vec<Edge>> {
    let (y, z) = (width / 2.0, depth / 2.0);
    let mut corners: Vec<(Point, f64)> =
        [[-y, -z], [y, -z], [y, z], [-y, z]].map(|corner| (corner, radius)).to_vec();
    if hole {
        corners.reverse();
    }
    edge::rounded(&corners).ok()
}

pub(super) fn symbols<const N: usize>(values: [(&str, f64); N]) -> IndexMap<String, f64> {
    values.into_iter().map(|(symbol, value)| (symbol.to_owned(), value)).collect()
}
