//! Laws of section properties on random shapes.

use proptest::prelude::*;
use spanfolio::section::{Properties, Shape};

fn polygon(points: &[[f64; 2]]) -> Properties {
    Shape::Polygon { points: points.to_vec(), holes: Vec::new(), torsion_constant: None }
        .properties()
        .unwrap_or_else(|problem| panic!("{problem} in {points:?}"))
}

fn near(computed: f64, expected: f64, scale: f64) -> bool {
    (computed - expected).abs() <= 1e-9 * scale
}

/// A star-shaped polygon round the origin, in anticlockwise order; up to 12 corners.
fn star() -> impl Strategy<Value = Vec<[f64; 2]>> {
    prop::collection::vec(0.05..0.5_f64, 5..12).prop_map(|radii| {
        let step = std::f64::consts::TAU / f64::from(u32::try_from(radii.len()).expect("a few"));
        radii
            .iter()
            .zip(0_u32..)
            .map(|(r, i)| {
                let angle = step * f64::from(i);
                [r * libm::cos(angle), r * libm::sin(angle)]
            })
            .collect()
    })
}

fn moved(points: &[[f64; 2]], turn: f64, by: [f64; 2]) -> Vec<[f64; 2]> {
    let (s, c) = (libm::sin(turn), libm::cos(turn));
    points.iter().map(|[y, z]| [c * y - s * z + by[0], s * y + c * z + by[1]]).collect()
}

proptest! {
    #[test]
    fn moving_a_polygon_changes_nothing(
        points in star(), y in -3.0..3.0_f64, z in -3.0..3.0_f64,
    ) {
        let (here, there) = (polygon(&points), polygon(&moved(&points, 0.0, [y, z])));
        let scale = here.i_y + here.i_z;
        // Far from the origin the digits of the points themselves are lost.
        prop_assert!((here.area - there.area).abs() <= 1e-9 * here.area);
        for (a, b) in [(here.i_y, there.i_y), (here.i_z, there.i_z), (here.i_yz, there.i_yz)] {
            prop_assert!(near(a, b, scale), "{a} {b}");
        }
        let plastic = |section: &Properties| section.w_pl_y.unwrap();
        prop_assert!(near(plastic(&here), plastic(&there), plastic(&here)));
    }

    #[test]
    fn turning_a_polygon_keeps_its_principal_values(points in star(), turn in -3.0..3.0_f64) {
        let (before, after) = (polygon(&points), polygon(&moved(&points, turn, [0.0, 0.0])));
        let (u, v, _) = before.principal();
        let (u2, v2, _) = after.principal();
        prop_assert!(near(u, u2, u) && near(v, v2, u), "{u} {u2} {v} {v2}");
    }

    #[test]
    fn the_principal_axes_carry_no_product(points in star()) {
        let section = polygon(&points);
        let (u, v, alpha) = section.principal();
        // Turned back by α the axes u, v lie along y, z.
        let along = polygon(&moved(&points, -alpha, [0.0, 0.0]));
        prop_assert!(near(along.i_yz, 0.0, u));
        prop_assert!(near(along.i_y, u, u) && near(along.i_z, v, u));
    }

    #[test]
    fn the_order_of_the_corners_does_not_matter(points in star()) {
        let mut backwards = points.clone();
        backwards.reverse();
        let (a, b) = (polygon(&points), polygon(&backwards));
        prop_assert!(near(a.i_y, b.i_y, a.i_y) && near(a.area, b.area, a.area));
    }

    #[test]
    fn sharp_shapes_are_polygons(
        depth in 0.1..1.0_f64, width in 0.1..0.5_f64, web in 0.005..0.03_f64, flange in 0.005..0.04_f64,
    ) {
        let (w, b, inner) = (web / 2.0, width / 2.0, depth - flange);
        let i = Shape::I { depth, width, web, flange, root_radius: None }.properties().unwrap();
        let drawn = polygon(&[
            [-b, 0.0], [b, 0.0], [b, flange], [w, flange], [w, inner], [b, inner], [b, depth],
            [-b, depth], [-b, inner], [-w, inner], [-w, flange], [-b, flange],
        ]);
        for (a, p) in [
            (i.area, drawn.area), (i.i_y, drawn.i_y), (i.i_z, drawn.i_z),
            (i.w_pl_y.unwrap(), drawn.w_pl_y.unwrap()), (i.w_pl_z.unwrap(), drawn.w_pl_z.unwrap()),
        ] {
            prop_assert!(near(a, p, a), "{a} {p}");
        }
        // Closed form of the textbooks.
        let clear = depth - 2.0 * flange;
        let closed = (width * depth * depth * depth - (width - web) * clear * clear * clear) / 12.0;
        prop_assert!(near(i.i_y, closed, closed));
        let plastic = width * flange * (depth - flange) + web * clear * clear / 4.0;
        prop_assert!(near(i.w_pl_y.unwrap(), plastic, plastic));
    }

    #[test]
    fn the_outline_for_drawing_is_close_to_the_exact_fillets(
        depth in 0.2..0.6_f64, width in 0.1..0.3_f64, t in 0.005..0.02_f64,
    ) {
        let exact = Shape::RectangularHollow {
            width, depth, thickness: t, outer_radius: Some(2.0 * t), inner_radius: Some(t),
        }.properties().unwrap();
        let drawn = Shape::Polygon {
            points: exact.outline[0].clone(),
            holes: vec![exact.outline[1].clone()],
            torsion_constant: Some(1.0),
        }.properties().unwrap();
        prop_assert!((drawn.area / exact.area - 1.0).abs() < 1e-2);
        prop_assert!((drawn.i_y / exact.i_y - 1.0).abs() < 1e-2);
    }

    #[test]
    fn no_dimension_makes_a_shape_panic(values in prop::collection::vec(
        prop_oneof![-1.0..2.0_f64, Just(0.0), Just(f64::NAN), Just(f64::INFINITY), Just(1e-9), Just(1e300)], 6,
    )) {
        let [a, b, c, d, e, f] = values[..] else { unreachable!() };
        let shapes = [
            Shape::Rectangle { width: a, depth: b },
            Shape::Circle { diameter: a },
            Shape::Tube { diameter: a, thickness: b },
            Shape::RectangularHollow {
                width: a, depth: b, thickness: c, outer_radius: Some(d), inner_radius: Some(e),
            },
            Shape::I { depth: a, width: b, web: c, flange: d, root_radius: Some(e) },
            Shape::UnequalI {
                depth: a, web: b, top_width: c, top_flange: d, bottom_width: e, bottom_flange: f,
                root_radius: Some(d),
            },
            Shape::Channel {
                depth: a, width: b, web: c, flange: d, root_radius: Some(e), toe_radius: Some(f),
                taper: None,
            },
            Shape::Angle {
                depth: a, width: b, thickness: c, root_radius: Some(d), toe_radius: Some(e),
            },
            Shape::T { depth: a, width: b, web: c, flange: d, root_radius: Some(e) },
            Shape::Polygon {
                points: vec![[a, b], [c, d], [e, f]], holes: vec![vec![[b, c], [d, e], [f, a]]],
                torsion_constant: Some(f),
            },
        ];
        for shape in shapes {
            if let Ok(section) = shape.properties() {
                prop_assert!(section.area > 0.0 && section.i_t > 0.0, "{shape:?}");
                prop_assert!(section.i_y > 0.0 && section.i_z > 0.0, "{shape:?}");
                prop_assert!(section.a_vz.is_none_or(|area| area > 0.0), "{shape:?}");
            }
        }
    }
}

#[test]
fn a_dimension_that_cannot_be_is_named() {
    let problem = |shape: Shape| {
        let problem = shape.properties().unwrap_err();
        (problem.dimension, problem.message)
    };
    for (shape, dimension, message) in [
        (
            Shape::Rectangle { width: -0.1, depth: 0.2 },
            "width",
            "`width` must be greater than zero",
        ),
        (
            Shape::Tube { diameter: 0.1, thickness: 0.05 },
            "thickness",
            "`thickness` must be less than half the `diameter`",
        ),
        (
            Shape::I { depth: 0.3, width: 0.15, web: 0.2, flange: 0.01, root_radius: None },
            "web",
            "`web` must be less than the `width`",
        ),
        (
            Shape::I { depth: 0.3, width: 0.15, web: 0.007, flange: 0.01, root_radius: Some(0.2) },
            "root_radius",
            "`root_radius` does not fit between web and toe",
        ),
        (
            Shape::Polygon {
                points: vec![[0.0, 0.0], [1.0, 1.0], [1.0, 0.0], [0.0, 1.0]],
                holes: Vec::new(),
                torsion_constant: None,
            },
            "points",
            "the outline in `points` crosses itself",
        ),
        (
            Shape::Polygon {
                points: vec![[0.0, 0.0], [1.0, 0.0], [1.0, 1.0]],
                holes: vec![vec![[2.0, 2.0], [2.1, 2.0], [2.0, 2.1]]],
                torsion_constant: None,
            },
            "holes",
            "a hole lies outside the polygon",
        ),
    ] {
        assert_eq!(problem(shape), (dimension, message.to_owned()));
    }
}

proptest! {
    #[test]
    fn any_text_may_be_asked_of_the_catalogue(name in ".{0,24}", size in "[A-Z]{0,4}[0-9x×./]{0,12}") {
        for text in [&name, &size] {
            if let Ok(section) = spanfolio::catalogue::section(text) {
                prop_assert!(section.properties.area > 0.0);
            }
            let _ = spanfolio::catalogue::material(text, None);
            let _ = spanfolio::catalogue::find(std::slice::from_ref(text));
        }
    }
}
