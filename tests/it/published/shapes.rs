//! Shapes against printed and textbook values, through the public surface.

use spanfolio::catalogue;
use spanfolio::section::{Properties, Shape, Taper};

type Expected = (&'static str, f64, f64);

fn value(section: &Properties, name: &str) -> f64 {
    let known = |value: Option<f64>| value.unwrap_or_else(|| panic!("{name} is not known"));
    match name {
        "A" => section.area,
        "I_y" => section.i_y,
        "I_z" => section.i_z,
        "I_yz" => section.i_yz,
        "I_u" => section.principal().0,
        "I_v" => section.principal().1,
        "alpha" => section.principal().2.to_degrees(),
        "I_t" => section.i_t,
        "I_w" => known(section.i_w),
        "W_el_y" => known(section.w_el_y),
        "W_el_z" => known(section.w_el_z),
        "W_pl_y" => known(section.w_pl_y),
        "W_pl_z" => known(section.w_pl_z),
        "i_y" => section.radii()[0],
        "i_z" => section.radii()[1],
        "A_vz" => known(section.a_vz),
        "z_bottom" => known(section.z_bottom),
        "y_m" => -section.shear_centre.unwrap_or_default()[0],
        "y_minus" => known(section.y_minus),
        "W_el_top" => section.i_y / known(section.z_top),
        "W_el_bottom" => section.i_y / known(section.z_bottom),
        _ => panic!("no property named {name}"),
    }
}

fn holds(title: &str, shape: &Shape, expected: &[Expected]) {
    let section = shape.properties().unwrap_or_else(|problem| panic!("{title}: {problem}"));
    for &(name, published, tolerance) in expected {
        let computed = value(&section, name);
        assert!(
            (computed / published - 1.0).abs() <= tolerance,
            "{title}: {name} = {computed:e}, published {published:e}"
        );
    }
}

/// Section tables for European rolled sections (EN 10365 dimensions) and, for the last, the AISC Manual
/// shape tables; printed values from memory; recomputed by closed form with exact fillets and by
/// polygon integration. I_t is a handbook approximation there and here: hence its wide tolerance.
#[test]
fn rolled_i_sections_are_as_tabulated() {
    let cases: [(&str, [f64; 5], [f64; 12]); 4] = [
        (
            "IPE 300",
            [0.3, 0.15, 0.0071, 0.0107, 0.015],
            [
                0.005381201653,
                8.356109186e-5,
                6.037784244e-6,
                0.0005570739457,
                8.050378992e-5,
                0.0006283558865,
                0.0001252188342,
                0.1246127326,
                0.03349647924,
                0.002568171653,
                2.011849578e-7,
                1.259340529e-7,
            ],
        ),
        (
            "HEA 200",
            [0.19, 0.2, 0.0065, 0.01, 0.018],
            [
                0.00538312398,
                3.692155226e-5,
                1.335509426e-5,
                0.0003886479185,
                0.0001335509426,
                0.0004294848067,
                0.0002038177596,
                0.08281762741,
                0.04980882395,
                0.00180812398,
                2.098494326e-7,
                1.08e-7,
            ],
        ),
        (
            "HEB 200",
            [0.2, 0.2, 0.009, 0.015, 0.018],
            [
                0.00780812398,
                5.696176059e-5,
                2.003368781e-5,
                0.0005696176059,
                0.0002003368781,
                0.0006425473067,
                0.0003058122896,
                0.08541189387,
                0.05065322491,
                0.00248312398,
                5.928112876e-7,
                1.71125e-7,
            ],
        ),
        (
            "W12x26",
            [0.310388, 0.164846, 0.005842, 0.009652, 0.00762],
            [
                0.00493254282,
                8.501403069e-5,
                7.212120326e-6,
                0.0005477919938,
                8.75013082e-5,
                0.0006094165349,
                0.0001338567329,
                0.131283417,
                0.03823807757,
                0.0019538391,
                1.252822844e-7,
                1.629341614e-7,
            ],
        ),
    ];
    let names = [
        "A", "I_y", "I_z", "W_el_y", "W_el_z", "W_pl_y", "W_pl_z", "i_y", "i_z", "A_vz", "I_t",
        "I_w",
    ];
    for (title, [depth, width, web, flange, radius], published) in cases {
        let shape = Shape::I { depth, width, web, flange, root_radius: Some(radius) };
        let tolerance = |name| match name {
            "I_t" => 0.06,
            "I_w" => 0.005,
            _ => 1e-5,
        };
        let expected: Vec<Expected> = names
            .into_iter()
            .zip(published)
            .map(|(name, value)| (name, value, tolerance(name)))
            .collect();
        holds(title, &shape, &expected);
    }
}

/// Strength-of-materials textbooks, formulas from memory; torsion by the exact series.
#[test]
fn a_rectangle_is_as_in_textbooks() {
    holds(
        "140 × 315",
        &Shape::Rectangle { width: 0.14, depth: 0.315 },
        &[
            ("A", 0.0441, 1e-6),
            ("I_y", 0.000364651875, 1e-6),
            ("I_z", 7.203e-5, 1e-6),
            ("W_el_y", 0.00231525, 1e-6),
            ("W_pl_y", 0.003472875, 1e-6),
            ("I_t", 0.0002075512267, 1e-9),
        ],
    );
}

/// Strength-of-materials textbooks, formulas from memory.
#[test]
fn a_tube_is_as_in_textbooks() {
    holds(
        "139.7 × 5",
        &Shape::Tube { diameter: 0.1397, thickness: 0.005 },
        &[
            ("A", 0.002115862652, 1e-6),
            ("I_y", 4.805412369e-6, 1e-6),
            ("W_el_y", 6.87961685e-5, 1e-6),
            ("W_pl_y", 9.076211667e-5, 1e-6),
            ("I_t", 9.610824739e-6, 1e-6),
        ],
    );
}

/// Strength-of-materials textbooks, formulas from memory; centroid from the bottom of the web.
#[test]
fn a_t_is_as_in_textbooks() {
    holds(
        "T 240 × 180",
        &Shape::T { depth: 0.24, width: 0.18, web: 0.011, flange: 0.016, root_radius: None },
        &[
            ("A", 0.005344, 1e-6),
            ("z_bottom", 0.1766706587, 1e-6),
            ("I_y", 2.948606569e-5, 1e-6),
            ("I_z", 7.800845333e-6, 1e-6),
            ("W_el_top", 0.0004655988058, 1e-6),
            ("W_el_bottom", 0.0001668984873, 1e-6),
            ("W_pl_y", 0.0002987676444, 1e-6),
        ],
    );
}

/// Strength-of-materials textbooks, formulas from memory; heel at the origin, long leg up.
#[test]
fn an_unequal_angle_keeps_its_leg_axes_and_gives_principal_values() {
    holds(
        "150 × 100 × 12",
        &Shape::Angle {
            depth: 0.15,
            width: 0.1,
            thickness: 0.012,
            root_radius: None,
            toe_radius: None,
        },
        &[
            ("A", 0.002856, 1e-6),
            ("y_minus", 0.02448739496, 1e-6),
            ("z_bottom", 0.04948739496, 1e-6),
            ("I_y", 6.556337546e-6, 1e-6),
            ("I_z", 2.366937546e-6, 1e-6),
            ("I_yz", -2.296134454e-6, 1e-6),
            ("I_u", 7.569691844e-6, 1e-6),
            ("I_v", 1.353583248e-6, 1e-6),
            ("alpha", 23.81333323, 1e-6),
        ],
    );
}

/// UPN 200 and UPE 200, EN 10365: A, I_y, I_z, W_el as read in reproductions of DIN 1026-1 and -2.
/// Three figures are printed; taper and radii at the toe leave up to 0.6 %.
#[test]
fn channels_are_as_tabulated() {
    holds(
        "UPN 200",
        &Shape::Channel {
            depth: 0.2,
            width: 0.075,
            web: 0.0085,
            flange: 0.0115,
            root_radius: Some(0.0115),
            toe_radius: Some(0.006),
            taper: Some(Taper { slope: 0.08, measured_at: 0.0375 }),
        },
        &[
            ("A", 32.2e-4, 0.006),
            ("I_y", 1910e-8, 0.006),
            ("I_z", 148e-8, 0.006),
            ("W_el_y", 191e-6, 0.006),
            ("W_el_z", 27.0e-6, 0.006),
            ("y_minus", 2.01e-2, 0.006),
        ],
    );
    holds(
        "UPE 200",
        &Shape::Channel {
            depth: 0.2,
            width: 0.08,
            web: 0.006,
            flange: 0.011,
            root_radius: Some(0.013),
            toe_radius: None,
            taper: None,
        },
        &[("A", 29.0e-4, 0.005), ("I_y", 1909e-8, 0.005), ("I_z", 187e-8, 0.005)],
    );
}

/// I_t, I_w and shear centre of channels and angles: the closed formulas of a shape against the
/// catalogue's values from a finite-element warping function. The junction formulas leave out toe radii
/// (up to 3 % of a small angle), thin walls on mid-lines leave out fillets.
#[test]
fn torsion_and_warping_formulas_agree_with_finite_elements() {
    for family in ["UPE", "PFC", "L"] {
        for row in catalogue::family(family).unwrap() {
            let cell = |symbol: &str| {
                row.printed.iter().find(|printed| printed.symbol == symbol).unwrap().value
            };
            let (shape, expected): (_, Vec<Expected>) = if family == "L" {
                let shape = Shape::Angle {
                    depth: cell("h"),
                    width: cell("h"),
                    thickness: cell("t"),
                    root_radius: Some(cell("r")),
                    toe_radius: Some(cell("r_toe")),
                };
                (shape, vec![("I_t", cell("I_t"), 0.035)])
            } else {
                let shape = Shape::Channel {
                    depth: cell("h"),
                    width: cell("b"),
                    web: cell("t_w"),
                    flange: cell("t_f"),
                    root_radius: Some(cell("r")),
                    toe_radius: None,
                    taper: None,
                };
                let expected = vec![
                    ("I_t", cell("I_t"), 0.007),
                    ("I_w", cell("I_w"), 0.05),
                    ("y_m", cell("y_m"), 0.06),
                ];
                (shape, expected)
            };
            holds(&row.designation, &shape, &expected);
        }
    }
}
