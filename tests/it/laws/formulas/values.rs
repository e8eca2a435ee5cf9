//! Formulas whose values were worked out by hand.

use proptest::prelude::*;
use spanfolio::calc::{Value, formula};
use spanfolio::quantity::Dimension;

use super::quantity;

const PI: f64 = std::f64::consts::PI;

/// Formula, SI value, dimension.
type Row = (&'static str, f64, Dimension);

/// Every row worked out by hand; feet, inches and the degree by their definitions.
fn holds(rows: &[Row]) {
    let mut wrong = Vec::new();
    for (text, value, dimension) in rows {
        match quantity(text) {
            // A few operations: nothing but round-off is left.
            Ok(found)
                if (found.value - value).abs() <= 1e-14 * value.abs().max(1e-3)
                    && found.dimension == *dimension => {}
            other => wrong.push(format!("{text}: expected {value} {dimension:?}, found {other:?}")),
        }
    }
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}

#[test]
fn operators_bind_as_in_mathematics() {
    holds(&[
        ("1 + 2 * 3", 7.0, Dimension::NONE),
        ("(1 + 2) * 3", 9.0, Dimension::NONE),
        ("7 - 4 - 2", 1.0, Dimension::NONE),
        ("7 - (4 - 2)", 5.0, Dimension::NONE),
        ("16 / 4 / 2", 2.0, Dimension::NONE),
        ("16 / 4 * 2", 8.0, Dimension::NONE),
        ("2 * 3^2", 18.0, Dimension::NONE),
        ("(2 * 3)^2", 36.0, Dimension::NONE),
        ("2^3^2", 512.0, Dimension::NONE),
        ("(2^3)^2", 64.0, Dimension::NONE),
        ("2^-2", 0.25, Dimension::NONE),
        ("9²", 81.0, Dimension::NONE),
        ("2³ - 1", 7.0, Dimension::NONE),
        ("3 · 4 × 5", 60.0, Dimension::NONE),
        ("1.5e3 + 2E-1", 1500.2, Dimension::NONE),
        (".5 + 1.", 1.5, Dimension::NONE),
    ]);
}

#[test]
fn unary_minus_binds_less_tightly_than_a_power() {
    holds(&[
        ("-2^2", -4.0, Dimension::NONE),
        ("(-2)^2", 4.0, Dimension::NONE),
        ("-2²", -4.0, Dimension::NONE),
        ("2 * -3", -6.0, Dimension::NONE),
        ("-3 * -2", 6.0, Dimension::NONE),
        ("10 - -4", 14.0, Dimension::NONE),
        ("--3", 3.0, Dimension::NONE),
        ("+5 - +2", 3.0, Dimension::NONE),
        ("2 \u{2212} 5", -3.0, Dimension::NONE),
        ("-(3 kN)", -3000.0, Dimension::FORCE),
    ]);
}

#[test]
fn an_exponent_belongs_to_its_unit() {
    holds(&[
        ("5 mm^2", 5e-6, Dimension::AREA),
        ("5 mm²", 5e-6, Dimension::AREA),
        ("5 mm2", 5e-6, Dimension::AREA),
        ("(5 mm)^2", 25e-6, Dimension::AREA),
        ("(5 mm)²", 25e-6, Dimension::AREA),
        ("3 m * 2 m^2", 6.0, Dimension::VOLUME),
        (
            "210 GPa * 8356 cm4",
            17_547_600.0,
            Dimension { length: 3, mass: 1, time: -2, ..Dimension::NONE },
        ),
        ("20 K * 1.2e-5 K^-1 * 10 m", 2.4e-3, Dimension::LENGTH),
    ]);
}

#[test]
fn a_unit_reaches_over_single_blanks_and_closed_strokes() {
    holds(&[
        ("4 kN m", 4000.0, Dimension::MOMENT),
        ("4 kN·m", 4000.0, Dimension::MOMENT),
        ("3 kN/m2", 3000.0, Dimension::PRESSURE),
        ("3 kN/m * 2 m", 6000.0, Dimension::FORCE),
        ("10 kN / 4 m2", 2500.0, Dimension::PRESSURE),
        ("6 m/2", 3.0, Dimension::LENGTH),
        ("5.4 m + 60 cm", 6.0, Dimension::LENGTH),
        ("12 kN / 6 m", 2000.0, Dimension::LINE_LOAD),
        ("2 kN * 3 m", 6000.0, Dimension::MOMENT),
        ("45 kN m / 557 cm3", 80.789_946_140_035_9e6, Dimension::PRESSURE),
        ("210 GPa * 8356 cm^4 / (2 m)^2", 4.3869e6, Dimension::FORCE),
        ("2 kip ft / (3 ft)", 2.0 * 4_448.221_615_260_5 / 3.0, Dimension::FORCE),
        ("12 kN/m * (6 m)^2 / 8", 54_000.0, Dimension::MOMENT),
        ("1 N/mm2 - 1 MPa", 0.0, Dimension::PRESSURE),
        ("9.81 m/s2 * 200 kg", 1962.0, Dimension::FORCE),
        ("2 % * 300 m", 6.0, Dimension::LENGTH),
        ("3 ft 6 in", 1.0668, Dimension::LENGTH),
        ("3 ft 6 in + 1 m", 2.0668, Dimension::LENGTH),
        ("2 * 1 ft 1.5 in", 0.6858, Dimension::LENGTH),
        // 1 kip/in² = 4448.2216152605 N / 645.16 mm².
        ("36 ksi", 36.0 * 4_448.221_615_260_5 / 645.16e-6, Dimension::PRESSURE),
    ]);
}

#[test]
fn angles_are_plain_numbers() {
    holds(&[
        ("180°", PI, Dimension::NONE),
        ("30 deg", PI / 6.0, Dimension::NONE),
        ("2 rad", 2.0, Dimension::NONE),
        ("sin(30 deg)", 0.5, Dimension::NONE),
        ("2 kN * cos(60°)", 1000.0, Dimension::FORCE),
        ("tan(45°)", 1.0, Dimension::NONE),
        ("asin(1)", PI / 2.0, Dimension::NONE),
        ("value_in(acos(0.5), deg)", 60.0, Dimension::NONE),
        ("4 * atan(1) - pi", 0.0, Dimension::NONE),
    ]);
}

#[test]
fn functions_of_quantities_keep_their_dimension() {
    holds(&[
        ("abs(-3 kN)", 3000.0, Dimension::FORCE),
        ("sqrt(16 m2)", 4.0, Dimension::LENGTH),
        ("sqrt((3 kN)^2 + (4 kN)^2)", 5000.0, Dimension::FORCE),
        // 275 / 1.7320508 = 158.7713 MPa.
        ("275 MPa / sqrt(3)", 158_771_324.027_147_08, Dimension::PRESSURE),
        ("(8 m3)^(1/3)", 2.0, Dimension::LENGTH),
        ("(16 m4)^0.5", 4.0, Dimension::AREA),
        ("min(3 m, 250 cm, 4 m)", 2.5, Dimension::LENGTH),
        ("max(3 kN)", 3000.0, Dimension::FORCE),
        ("max(-2 kN, 0)", 0.0, Dimension::FORCE),
        ("0 + 2 kN", 2000.0, Dimension::FORCE),
        ("sign(-4 kN)", -1.0, Dimension::NONE),
        ("sign(0)", 0.0, Dimension::NONE),
        ("sign(0.2 m)", 1.0, Dimension::NONE),
    ]);
}

#[test]
fn functions_of_plain_numbers() {
    holds(&[
        ("floor(2.7)", 2.0, Dimension::NONE),
        ("floor(-2.1)", -3.0, Dimension::NONE),
        ("ceil(2.1)", 3.0, Dimension::NONE),
        ("ceil(-2.7)", -2.0, Dimension::NONE),
        ("ceil(7.35 m / 600 mm)", 13.0, Dimension::NONE),
        ("exp(1)", std::f64::consts::E, Dimension::NONE),
        ("ln(exp(2))", 2.0, Dimension::NONE),
        ("log10(1000)", 3.0, Dimension::NONE),
        ("pi * (20 mm)^2 / 4", PI * 1e-4, Dimension::AREA),
    ]);
}

/// f_ctm of concrete C30, 0.30 f_ck^(2/3) with f_ck in MPa (EN 1992-1-1, Table 3.1, from memory): 30^(2/3) = 9.6549.
#[test]
fn the_number_of_units_in_a_quantity_can_be_taken() {
    holds(&[
        ("value_in(2.5 kN m, N mm)", 2.5e6, Dimension::NONE),
        ("value_in(12 ft, in)", 144.0, Dimension::NONE),
        ("value_in(32 kN/m2, kPa)", 32.0, Dimension::NONE),
        ("0.3 * value_in(27 MPa, MPa)^(2/3) * 1 MPa", 2.7e6, Dimension::PRESSURE),
        ("0.30 * value_in(30 MPa, MPa)^(2/3) * 1 MPa", 2_896_468.153_816_889, Dimension::PRESSURE),
    ]);
}

#[test]
fn conditions_choose_a_branch() {
    holds(&[
        ("if 3 m > 200 cm then 1 kN else 2 kN", 1000.0, Dimension::FORCE),
        ("if 1 > 2 then 1 m else if 2 > 1 then 2 m else 3 m", 2.0, Dimension::LENGTH),
        ("if 1 < 2 < 3 then 1 else 0", 1.0, Dimension::NONE),
        ("if 1 < 3 < 2 then 1 else 0", 0.0, Dimension::NONE),
        ("if 3 > 2 >= 2 then 5 else 6", 5.0, Dimension::NONE),
        ("if 1 ≤ 1 and 2 ≥ 2 and 1 ≠ 2 then 1 else 0", 1.0, Dimension::NONE),
        ("if not 1 > 2 and 2 > 1 then 1 else 0", 1.0, Dimension::NONE),
        ("if 1 > 2 or 3 == 3 then 1 else 0", 1.0, Dimension::NONE),
        ("if 1 > 2 and 1 > 2 or 2 > 1 then 1 else 0", 1.0, Dimension::NONE),
        ("if 2 != 2 then 1 else 7", 7.0, Dimension::NONE),
        ("if 'long' == 'long' and 'long' != 'short' then 1 else 0", 1.0, Dimension::NONE),
        ("if 0.2 m > 0 then 1 else 0", 1.0, Dimension::NONE),
        // Equal but for the last bits, which a change of units disturbs.
        ("if 300 mm == 0.3 m then 1 else 0", 1.0, Dimension::NONE),
        ("1 + (if 2 > 1 then 2 else 3) * 10", 21.0, Dimension::NONE),
        // What is not taken is not evaluated.
        ("if 1 > 0 then 4 else 1 / 0", 4.0, Dimension::NONE),
    ]);
}

#[test]
fn rows_are_interpolated_and_chosen() {
    holds(&[
        ("interpolate(5 m; 0 m, 1.0; 10 m, 0.8)", 0.9, Dimension::NONE),
        ("interpolate(0 m; 0 m, 1.0; 10 m, 0.8)", 1.0, Dimension::NONE),
        ("interpolate(10 m; 0 m, 1.0; 10 m, 0.8)", 0.8, Dimension::NONE),
        ("interpolate(10; 0, 0; 10, 2 m; 20, 6 m)", 2.0, Dimension::LENGTH),
        ("interpolate(15; 0, 0; 10, 2 m; 20, 6 m)", 4.0, Dimension::LENGTH),
        ("interpolate(5; 0, 0; 10, 2 m)", 1.0, Dimension::LENGTH),
        ("interpolate(0; 0, 0; 10, 2 m)", 0.0, Dimension::LENGTH),
        ("interpolate(2.5 m; 0, 4 kN; 5 m, 0)", 2000.0, Dimension::FORCE),
        ("choose('medium'; 'short', 0.9; 'medium', 0.8)", 0.8, Dimension::NONE),
        ("choose(2; 1, 5 kN; 2, 7 kN)", 7000.0, Dimension::FORCE),
        ("choose(1 m; 100 cm, 3; 2 m, 4)", 3.0, Dimension::NONE),
        ("choose('b'; 'a', 1 / 0; 'b', 2 / 1)", 2.0, Dimension::NONE),
    ]);
}

#[test]
fn readings_are_listed_once_and_spelled_alike() {
    let read = formula("M_y / W + N/A + M_y + effect( 'B 1','M_y' , at=2.5 m)").expect("a formula");
    let texts: Vec<&str> = read.readings.iter().map(|reading| reading.text.as_str()).collect();
    assert_eq!(texts, ["M_y", "W", "N", "A", "effect('B 1', 'M_y', at=2.5m)"]);
}

#[test]
fn readings_are_taken_in_the_order_of_first_use() {
    let formula = formula("M / W + N / A + M / W").expect("a formula");
    let names: Vec<&str> = formula.readings.iter().map(|reading| reading.name.as_str()).collect();
    assert_eq!(names, ["M", "W", "N", "A"]);
    let value = formula
        .quantity(&[
            Value::number(6e3, Dimension::MOMENT),
            Value::number(2e-3, Dimension::VOLUME),
            Value::number(5e3, Dimension::FORCE),
            Value::number(1e-2, Dimension::AREA),
        ])
        .expect("a value");
    // 2 × 6 kN m / 2000 cm³ + 5 kN / 100 cm² = 6 MPa + 0.5 MPa.
    assert!((value.value - 6.5e6).abs() <= 1e-6);
    assert_eq!(value.dimension, Dimension::PRESSURE);
}

/// Formulas with places for forces `F`, lengths `L` and line loads `q`.
const SHAPES: [&str; 6] = [
    "F * L / 4 + q * L^2 / 8",
    "sqrt((F / L)^2 + 3 * q^2)",
    "max(F, q * L) / min(L, 2 * L)^2 * abs(-L)",
    "if q * L > F then q * L^2 else F * L",
    "interpolate(F / (q * L); 0, 1; 1000000, 0.5) * value_in(q * L, kN)",
    "(q * L^4 / F)^(1/3) + L",
];

fn written(shape: &str, values: [&str; 3]) -> String {
    // `F`, `L` and `q` stand alone, so no other letter of a shape is one of them.
    let mut out = String::new();
    for c in shape.chars() {
        match c {
            'F' => out += &format!("({})", values[0]),
            'L' => out += &format!("({})", values[1]),
            'q' if !out.ends_with('s') => out += &format!("({})", values[2]),
            c => out.push(c),
        }
    }
    out
}

proptest! {
    #[test]
    fn the_units_in_which_quantities_are_written_do_not_matter(
        shape in prop::sample::select(&SHAPES[..]),
        force in 1.0..900.0_f64,
        length in 0.1..30.0_f64,
        load in 0.1..50.0_f64,
    ) {
        let large = [format!("{force} kN"), format!("{length} m"), format!("{load} kN/m")];
        let small = [
            format!("{} N", force * 1e3),
            format!("{} mm", length * 1e3),
            format!("{load} N/mm"),
        ];
        let [a, b] = [large, small].map(|values| {
            let text = written(shape, [&values[0], &values[1], &values[2]]);
            quantity(&text).map_err(|error| TestCaseError::fail(format!("{text}: {error:?}")))
        });
        let (a, b) = (a?, b?);
        prop_assert_eq!(a.dimension, b.dimension);
        // The decimal numbers of both are rounded once each.
        prop_assert!((a.value - b.value).abs() <= 1e-12 * a.value.abs(), "{shape}: {a:?} {b:?}");
    }

    #[test]
    fn exponents_of_dimensions_add(a in -4..=4_i8, b in -4..=4_i8, c in -4..=4_i8, d in -4..=4_i8) {
        let text = format!("(2 m)^{a} * (3 kg)^{b} / (5 s)^{c} / (7 K)^{d} * (1 m)^{b}");
        let found = quantity(&text).map_err(|error| TestCaseError::fail(format!("{error:?}")))?;
        let dimension = Dimension { length: a + b, mass: b, time: -c, temperature: -d, angle: 0 };
        prop_assert_eq!(found.dimension, dimension);
    }
}
