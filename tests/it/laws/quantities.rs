//! Quantities: what can be read, what is refused and with which words, how values print.

use proptest::prelude::*;
use spanfolio::quantity::{
    Dimension, Kind, Printer, System, Units, parse, parse_as, parse_unit, print,
};

fn si() -> Printer {
    Printer { units: Units::new(System::Si), significant: 4 }
}

fn assert_close(computed: f64, published: f64, what: &str) {
    // A product of a few factors, each right to half a unit in the last place.
    assert!((computed - published).abs() <= 1e-15 * 4.0 * published.abs(), "{what}: {computed}");
}

/// Factors: NIST Special Publication 811 (2008), Appendix B.8, exact unless rounded there.
#[test]
fn quantities_are_read_in_si() {
    let (pound, inch, foot) = (4.448_221_615_260_5, 0.0254, 0.3048);
    let cases = [
        ("12.5 kN/m", 12_500.0, Dimension::LINE_LOAD),
        ("7850 kg/m³", 7_850.0, Dimension::MASS_DENSITY),
        ("7850 kg/m^3", 7_850.0, Dimension::MASS_DENSITY),
        ("5.0 kN/m2", 5_000.0, Dimension::PRESSURE),
        ("210 GPa", 2.1e11, Dimension::PRESSURE),
        ("355 N/mm²", 3.55e8, Dimension::PRESSURE),
        ("250 kPa", 250_000.0, Dimension::PRESSURE),
        ("1.2e-5 /K", 1.2e-5, Dimension::EXPANSION),
        ("1.2e-5/K", 1.2e-5, Dimension::EXPANSION),
        ("1.2×10⁻⁵ 1/K", 1.2e-5, Dimension::EXPANSION),
        ("6.5e-6 /°F", 6.5e-6 * 1.8, Dimension::EXPANSION),
        ("3 ft 6 in", 42.0 * inch, Dimension::LENGTH),
        ("3' 6\"", 42.0 * inch, Dimension::LENGTH),
        ("3'-6\"", 42.0 * inch, Dimension::LENGTH),
        ("-3 ft 6 in", -42.0 * inch, Dimension::LENGTH),
        ("0.45 kip/ft", 450.0 * pound / foot, Dimension::LINE_LOAD),
        ("450 plf", 450.0 * pound / foot, Dimension::LINE_LOAD),
        ("50 psf", 50.0 * pound / (foot * foot), Dimension::PRESSURE),
        ("29000 ksi", 2.9e7 * pound / (inch * inch), Dimension::PRESSURE),
        ("490 pcf", 490.0 * pound / (foot * foot * foot), Dimension::WEIGHT_DENSITY),
        ("490 lb/ft3", 490.0 * pound / (foot * foot * foot), Dimension::WEIGHT_DENSITY),
        ("490 lbm/ft3", 490.0 * 0.453_592_37 / (foot * foot * foot), Dimension::MASS_DENSITY),
        ("12 kN m", 12_000.0, Dimension::MOMENT),
        ("12 kNm", 12_000.0, Dimension::MOMENT),
        ("12kNm", 12_000.0, Dimension::MOMENT),
        ("12 kN·m", 12_000.0, Dimension::MOMENT),
        ("12 kN*m", 12_000.0, Dimension::MOMENT),
        ("12 kip-ft", 12_000.0 * pound * foot, Dimension::MOMENT),
        ("12 kip in", 12_000.0 * pound * inch, Dimension::MOMENT),
        ("3 ft lb", 3.0 * pound * foot, Dimension::MOMENT),
        ("12 MN m/rad", 12e6, Dimension::ROTATION_SPRING),
        ("60 MN/m", 60e6, Dimension::LINE_LOAD),
        ("1.5°", 1.5 * std::f64::consts::PI / 180.0, Dimension::ANGLE),
        ("1.5 deg", 1.5 * std::f64::consts::PI / 180.0, Dimension::ANGLE),
        ("20 mrad", 0.02, Dimension::ANGLE),
        ("20 K", 20.0, Dimension::TEMPERATURE),
        ("20 °C", 20.0, Dimension::TEMPERATURE),
        ("36 °F", 20.0, Dimension::TEMPERATURE),
        ("0.4 %", 0.004, Dimension::NONE),
        ("7600 mm2", 0.0076, Dimension::AREA),
        ("9.1e7 mm4", 9.1e-5, Dimension::SECOND_MOMENT),
        ("375 in^4", 375.0 * inch * inch * inch * inch, Dimension::SECOND_MOMENT),
        ("126 000 cm⁶", 1.26e-7, Dimension::WARPING),
        ("12\u{2009}000\u{a0}kN", 1.2e7, Dimension::FORCE),
        ("\u{2212}5 mm", -0.005, Dimension::LENGTH),
        ("+.5 t", 500.0, Dimension::MASS),
        ("42", 42.0, Dimension::NONE),
    ];
    for (text, value, dimension) in cases {
        let quantity = parse(text).unwrap_or_else(|error| panic!("{text}: {error}"));
        assert_eq!(quantity.dimension, dimension, "{text}");
        assert_close(quantity.value, value, text);
    }
}

#[test]
fn what_is_no_quantity_is_refused_with_the_bytes_at_fault() {
    let cases = [
        ("", "expected a number with its unit, found nothing", ""),
        ("  ", "expected a number with its unit, found nothing", ""),
        ("kN", "expected a number, found `kN`", "kN"),
        (".nan", "expected a number, found `.nan`", ".nan"),
        ("inf", "expected a number, found `inf`", "inf"),
        ("1e400 kN", "this number is too large to compute with", "1e400"),
        ("1e-400 kN", "this number is too small to compute with", "1e-400"),
        ("1e306 GPa", "`1e306 GPa` is too large to compute with", "1e306 GPa"),
        ("5 KN/m", "no unit is called `KN`", "KN"),
        ("5 kNs", "no unit is called `kNs`", "kNs"),
        ("5 kN/", "the unit breaks off", ""),
        ("5 kN*", "the unit breaks off", ""),
        ("5 kN)", "`)` is not part of a unit", ")"),
        ("5 kN 3", "`3` is not part of a unit", "3"),
        ("12,5 kN", "`12,5 kN` has a comma in its number", ","),
        ("5 m^99", "the exponent of a unit is a whole number up to 6", "^99"),
        ("5 kN/m m", "unit `kN/m m` is ambiguous after a `/`", "m"),
        ("5 m m m m m m m", "this unit has too many factors", "m"),
        ("3 ft 6 kN", "feet are followed by inches alone, as in `3 ft 6 in`", "6 kN"),
    ];
    for (text, message, fault) in cases {
        let error = parse(text).expect_err(text);
        assert_eq!(error.message, message, "{text}");
        assert_eq!(&text[error.range], fault, "{text}");
    }
}

#[test]
fn the_nearest_unit_is_named() {
    for (text, near) in [("5 KN", "kN"), ("5 mpa", "MPa"), ("5 klps", "kips"), ("5 ksii", "ksi")] {
        let hint = parse(text).expect_err(text).hint;
        assert_eq!(hint, Some(format!("did you mean `{near}`?")), "{text}");
    }
}

#[test]
fn a_wrong_dimension_says_what_was_given_and_what_was_expected() {
    let cases = [
        ("5 kg", Kind::Force, "`5 kg` is a mass, expected a force such as `5 kN`"),
        (
            "5 kg/m",
            Kind::LineLoad,
            "`5 kg/m` is a mass per length, expected a force per length such as `5 kN/m`",
        ),
        ("30", Kind::Angle, "`30` is a plain number, expected an angle such as `30°`"),
        ("3 kN", Kind::Number, "`3 kN` is a force, expected a plain number such as `3`"),
        ("12 kN", Kind::Moment, "`12 kN` is a force, expected a moment such as `12 kN m`"),
        ("2 m s", Kind::Length, "`2 m s` is a quantity in m s, expected a length such as `2 m`"),
    ];
    for (text, kind, message) in cases {
        assert_eq!(parse_as(text, kind).expect_err(text).message, message);
    }
}

#[test]
fn a_mass_for_a_load_is_told_from_a_force() {
    let hint = parse_as("5 kg/m2", Kind::AreaLoad).expect_err("a mass").hint;
    assert!(hint.is_some_and(|hint| hint.starts_with("a mass is not yet a force")));
}

/// 490 lb/ft³ of weight is 490 lb/ft³ of mass where g is standard: the pound-force is defined so.
#[test]
fn a_density_may_be_given_as_a_weight() {
    let by_weight = parse_as("490 pcf", Kind::MassDensity).expect("a density");
    let by_mass = parse_as("490 lbm/ft3", Kind::MassDensity).expect("a density");
    assert_close(by_weight, by_mass, "pcf");
}

#[test]
fn values_print_by_one_rule() {
    let cases = [
        (0.0, "0"),
        (-0.0, "0"),
        (45.0, "45"),
        (12.345, "12.35"),
        (-12.345, "−12.35"),
        (1.0005, "1.001"),
        (999.96, "1\u{2009}000"),
        (1_234.4, "1\u{2009}234"),
        (12_000.0, "12\u{2009}000"),
        (9_999_499.0, "9\u{2009}999\u{2009}000"),
        (9_999_999.0, "1×10⁷"),
        (2.1e11, "2.1×10¹¹"),
        (0.012_344_99, "0.01234"),
        (0.000_1, "0.0001"),
        (0.000_099_99, "9.999×10⁻⁵"),
        (1.2e-5, "1.2×10⁻⁵"),
        (f64::NAN, "–"),
        (f64::INFINITY, "–"),
    ];
    for (value, printed) in cases {
        assert_eq!(print(value, 4), printed, "{value:e}");
    }
}

#[test]
fn units_follow_the_system_and_the_project() {
    let mut printer = si();
    assert_eq!(
        printer.with_unit(Kind::Moment, 12_345.0),
        "12.35\u{a0}kN\u{a0}m".replace("N\u{a0}m", "N m")
    );
    assert_eq!(printer.with_unit(Kind::Angle, std::f64::consts::FRAC_PI_6), "30°");
    assert_eq!(printer.with_unit(Kind::Expansion, 1.2e-5), "1.2×10⁻⁵\u{a0}/K");
    assert_eq!(printer.with_unit(Kind::Number, 1.35), "1.35");
    printer.units.set(Kind::Moment, parse_unit("MN*m").expect("a unit")).expect("a moment");
    assert_eq!(printer.with_unit(Kind::Moment, 12_345.0), "0.01235\u{a0}MN m");
    let us = Printer { units: Units::new(System::Us), significant: 4 };
    assert_eq!(us.with_unit(Kind::Length, 1.0668), "3.5\u{a0}ft");
    assert_eq!(us.with_unit(Kind::Modulus, 199.947_978_795e9), "29\u{2009}000\u{a0}ksi");
    assert_eq!(us.with_unit(Kind::Temperature, 20.0), "36\u{a0}°F");
}

#[test]
fn a_unit_of_another_dimension_is_given_back() {
    let mut units = Units::new(System::Si);
    let wrong = parse_unit("kN").expect("a unit");
    assert_eq!(units.set(Kind::Moment, wrong.clone()), Err(wrong));
}

#[test]
fn every_unit_label_reads_back_as_itself() {
    for system in [System::Si, System::Us] {
        let units = Units::new(system);
        for (kind, unit) in units.iter() {
            assert_eq!(unit.dimension, kind.dimension(), "{}", kind.name());
            assert_eq!(Kind::from_name(kind.name()), Some(kind));
            if kind != Kind::Number {
                assert_eq!(parse_unit(&unit.label).as_ref(), Ok(unit), "{}", unit.label);
            }
        }
        let labels =
            units.iter().map(|(kind, unit)| (kind.name(), unit.label.as_str(), unit.factor));
        assert_eq!(Units::from_labels(system, labels), units);
    }
}

fn any_value() -> impl Strategy<Value = f64> {
    (-9.999_f64..9.999, -12..14_i32).prop_map(|(mantissa, exponent)| {
        format!("{mantissa}e{exponent}").parse().unwrap_or_default()
    })
}

proptest! {
    /// Four significant digits: at most half a unit of the fourth, relative to a first digit of 1.
    #[test]
    fn what_is_printed_reads_back(value in any_value(), kind in proptest::sample::select(&Kind::ALL[..]), us: bool) {
        let system = if us { System::Us } else { System::Si };
        let printer = Printer { units: Units::new(system), significant: 4 };
        let printed = printer.with_unit(kind, value);
        let read = parse_as(&printed, kind).map_err(|e| TestCaseError::fail(format!("{printed}: {e}")))?;
        prop_assert!((read - value).abs() <= 5.000_001e-4 * value.abs(), "{printed}");
        prop_assert_eq!(printer.with_unit(kind, read), printed);
    }

    #[test]
    fn printing_is_odd(value in any_value(), significant in 1..12_usize) {
        let (plus, minus) = (print(value.abs(), significant), print(-value.abs(), significant));
        prop_assert_eq!(minus.trim_start_matches('−'), plus);
    }

    #[test]
    fn no_text_makes_the_reader_panic(text in any::<String>()) {
        let whole = 0..text.len();
        if let Err(error) = parse(&text) {
            prop_assert!(error.range.start <= error.range.end && error.range.end <= whole.end);
            prop_assert!(text.get(error.range).is_some());
        }
    }

    #[test]
    fn no_near_quantity_makes_the_reader_panic(text in "[-+−]?[0-9]{0,4}[ .,e×'\"]{0,2}[0-9⁻²^]{0,3}[ a-zA-Z°%/·*'\"⁻²³^-]{0,12}") {
        for kind in [Kind::Force, Kind::MassDensity] {
            if let Err(error) = parse_as(&text, kind) {
                prop_assert!(text.get(error.range).is_some());
            }
        }
    }
}
