//! Formulas: values by hand, mistakes by the character, and an independent evaluator.

use exmex::prelude::*;
use insta::assert_snapshot;
use proptest::prelude::*;
use spanfolio::calc::{CalcError, Value, equations, formula, formula_with_unit, latex};
use spanfolio::quantity::{Dimension, Quantity, parse};

/// A formula that reads nothing.
fn value(text: &str) -> Result<Quantity, CalcError> {
    formula(text)?.quantity(&[])
}

/// A formula with the values of its names.
fn with(text: &str, values: &[(&str, &str)]) -> Result<Quantity, CalcError> {
    let formula = formula(text)?;
    let readings: Vec<Value> = formula
        .readings
        .iter()
        .map(|reading| {
            let given = values.iter().find(|(name, _)| *name == reading.name);
            let (_, written) = given.unwrap_or_else(|| panic!("no value for {}", reading.name));
            match parse(written) {
                Ok(quantity) => Value::number(quantity.value, quantity.dimension),
                Err(_) => Value::word(written),
            }
        })
        .collect();
    formula.quantity(&readings)
}

/// Formula, value in SI by hand, dimension.
#[test]
fn values_are_as_calculated_by_hand() {
    let plain = Dimension::NONE;
    let rows = [
        ("1 + 2 * 3", 7.0, plain),
        ("(1 + 2) * 3", 9.0, plain),
        ("8 / 4 / 2", 1.0, plain),
        ("7 - 4 - 2", 1.0, plain),
        ("-2^2", -4.0, plain),
        ("(-2)^2", 4.0, plain),
        ("2^-1", 0.5, plain),
        ("2^3^2", 512.0, plain),
        ("2 * -3", -6.0, plain),
        ("--3", 3.0, plain),
        ("3²", 9.0, plain),
        ("2 × 3 · 4", 24.0, plain),
        ("1e3 + 2.5E-1", 1000.25, plain),
        ("50 % * 4", 2.0, plain),
        ("5.4 m", 5.4, Dimension::LENGTH),
        ("5.4 m + 60 cm", 6.0, Dimension::LENGTH),
        ("3 ft 6 in", 1.0668, Dimension::LENGTH),
        ("5 mm^2", 5e-6, Dimension::AREA),
        ("(5 mm)^2", 25e-6, Dimension::AREA),
        ("5 mm²", 5e-6, Dimension::AREA),
        ("5 mm2", 5e-6, Dimension::AREA),
        ("12 kN/m * 6 m", 72e3, Dimension::FORCE),
        ("12 kN / 6 m", 2e3, Dimension::LINE_LOAD),
        ("10 kN/m * (6 m)^2 / 8", 45e3, Dimension::MOMENT),
        ("45 kN m / 557 cm3", 80.789_946_140_035_9e6, Dimension::PRESSURE),
        ("210 GPa * 8356 cm^4 / (2 m)^2", 4.3869e6, Dimension::FORCE),
        ("2 kip ft / (3 ft)", 2.0 * 4_448.221_615_260_5 / 3.0, Dimension::FORCE),
        ("sqrt(16 m^2)", 4.0, Dimension::LENGTH),
        ("(27 m^3)^(1/3)", 3.0, Dimension::LENGTH),
        ("abs(-3 kN)", 3e3, Dimension::FORCE),
        ("min(3 m, 250 cm, 4 m)", 2.5, Dimension::LENGTH),
        ("max(3 m, 250 cm)", 3.0, Dimension::LENGTH),
        ("max(0, -3 kN)", 0.0, Dimension::FORCE),
        ("sin(30°)", 0.5, plain),
        ("cos(60 deg)", 0.5, plain),
        ("tan(pi / 4)", 1.0, plain),
        ("asin(1)", std::f64::consts::FRAC_PI_2, plain),
        ("acos(0) + atan(0)", std::f64::consts::FRAC_PI_2, plain),
        ("ln(exp(2))", 2.0, plain),
        ("log10(1000)", 3.0, plain),
        ("floor(2.7) + ceil(2.1)", 5.0, plain),
        ("floor(-2.5)", -3.0, plain),
        ("sign(-3 m) + sign(0) + sign(2)", 0.0, plain),
        ("value_in(30 MPa, MPa)", 30.0, plain),
        ("0.3 * value_in(27 MPa, MPa)^(2/3) * 1 MPa", 2.7e6, Dimension::PRESSURE),
        ("value_in(1 kN/m2, Pa)", 1000.0, plain),
        ("if 3 m > 200 cm then 1 else 2", 1.0, plain),
        ("if not 1 > 2 and 3 > 2 then 5 mm else 6 mm", 0.005, Dimension::LENGTH),
        ("if 0 < 1 <= 1 then 1 else 0", 1.0, plain),
        ("if 1 < 2 < 2 then 1 else 0", 0.0, plain),
        ("if 1 > 2 or 2 ≥ 2 then 1 else 0", 1.0, plain),
        ("if 300 mm == 0.3 m then 1 else 0", 1.0, plain),
        ("if 1 != 2 then 1 else 0", 1.0, plain),
        ("interpolate(5 m; 0 m, 1.0; 10 m, 0.8)", 0.9, plain),
        ("interpolate(10 m; 0 m, 1.0; 10 m, 0.8; 20 m, 0.2)", 0.8, plain),
        ("interpolate(1; 0, 0; 2, 4 kN)", 2e3, Dimension::FORCE),
        ("choose('long'; 'short', 0.9; 'long', 0.7)", 0.7, plain),
        ("choose(3; 1, 10 m; 3, 30 m)", 30.0, Dimension::LENGTH),
    ];
    for (text, expected, dimension) in rows {
        let found = value(text).unwrap_or_else(|error| panic!("{text}: {error}"));
        let scale = f64::abs(expected).max(1e-300);
        // A change of units and a division leave the last bits.
        assert!((found.value - expected).abs() <= 1e-12 * scale, "{text}: {}", found.value);
        assert_eq!(found.dimension, dimension, "{text}");
    }
}

/// Formula, what is said, the part at fault.
#[test]
fn mistakes_point_at_their_place() {
    let rows = [
        ("2 m + 3 kN", "`+` cannot take a length with a force", "2 m + 3 kN"),
        ("1 + (2 m - 3)", "`-` cannot take a length with a plain number", "2 m - 3"),
        ("if 2 m > 3 kN then 1 else 2", "`>` cannot take a length with a force", "2 m > 3 kN"),
        ("min(2 m, 3 kN)", "`min` cannot take a length with a force", "min(2 m, 3 kN)"),
        ("sqrt(2 m)", "a length has no square root", "2 m"),
        ("(2 m)^0.5", "a length cannot be raised to the power 0.5", "2 m"),
        ("2^(3 m)", "an exponent is a plain number, not a length", "3 m"),
        ("sin(2 m)", "`sin` takes a plain number, not a length", "2 m"),
        ("1 / (2 - 2)", "this divides by zero", "2 - 2"),
        ("0^-1", "this divides by zero", "0"),
        ("ln(0)", "this is not above zero: it has no logarithm", "0"),
        ("sqrt(-4)", "this is below zero: it has no root", "-4"),
        ("(-2)^0.5", "this is below zero: it has no broken power", "-2"),
        ("asin(1.5)", "this lies outside -1 to 1", "1.5"),
        ("exp(1000)", "the result is not a finite number", "exp(1000)"),
        ("1e300 * 1e300", "the result is not a finite number", "1e300 * 1e300"),
        ("value_in(3 m, kN)", "a length has no value in kN", "value_in(3 m, kN)"),
        (
            "interpolate(3; 0, 1; 2, 5)",
            "this lies outside the rows, and nothing is extrapolated",
            "3",
        ),
        ("interpolate(1; 2, 1; 0, 5)", "rows must ascend in their first entry", "0"),
        ("choose('mild'; 'wet', 1)", "no row for `mild`", "'mild'"),
        ("1 + (2 > 1)", "this is a truth value, expected a quantity", "2 > 1"),
        ("if 1 then 2 else 3", "this is a plain number, expected a condition", "1"),
        ("2 + ", "the formula breaks off: expected a value", ""),
        ("2 * (3 + 4", "this bracket is not closed", "("),
        ("2 $ 3", "`$` has no meaning in a formula", "$"),
        ("2 3", "expected an operator or the end of the formula, found `3`", "3"),
        ("5 mmm", "no unit is called `mmm`", "mmm"),
        ("2 a", "no unit is called `a`", "a"),
        ("max()", "expected a value, found `)`", ")"),
        ("sqrt(1, 2)", "`sqrt` takes one value, not 2", "sqrt(1, 2)"),
        ("if 1 > 2 then 3", "the formula breaks off: expected `else`", ""),
        ("'long", "this quotation has no end", "'long"),
        ("interpolate(1; 2, 3)", "`interpolate` needs at least 2 rows", "interpolate(1; 2, 3)"),
        ("a = 3", "expected an operator or the end of the formula, found `=`", "="),
    ];
    for (text, message, part) in rows {
        let error = value(text).expect_err(text);
        assert_eq!(error.message, message, "{text}");
        assert_eq!(text.get(error.range.clone()), Some(part), "{text}: {:?}", error.range);
    }
}

#[test]
fn a_comparison_with_one_equals_sign_is_helped() {
    assert_eq!(formula("a = 3").unwrap_err().hint.as_deref(), Some("to compare, write `==`"));
}

#[test]
fn too_long_and_too_deep_are_refused() {
    let deep = format!("{}1{}", "(".repeat(60), ")".repeat(60));
    assert!(formula(&deep).unwrap_err().message.contains("nests at most"));
    assert!(formula(&"1+".repeat(3_000)).unwrap_err().message.contains("at most 4000 characters"));
    assert!(
        formula(&format!("1{}", "+1".repeat(900))).unwrap_err().message.contains("at most 1000")
    );
    assert!(formula(&format!("1{}", "+1".repeat(490))).is_ok());
}

#[test]
fn a_result_can_state_its_unit() {
    let read = formula_with_unit("span / 360 [mm]").expect("a formula with a unit");
    assert_eq!(read.text, "span / 360");
    assert_eq!(read.unit.map(|unit| unit.label).as_deref(), Some("mm"));
    assert!(formula("span / 360 [mm]").is_err());
}

#[test]
fn readings_are_listed_once_and_spelled_alike() {
    let read = formula("M_y / W + N/A + M_y + effect( 'B 1','M_y' , at=2.5 m)").expect("a formula");
    let texts: Vec<&str> = read.readings.iter().map(|reading| reading.text.as_str()).collect();
    assert_eq!(texts, ["M_y", "W", "N", "A", "effect('B 1', 'M_y', at=2.5m)"]);
}

#[test]
fn formulas_are_set_as_mathematics() {
    let texts = [
        "M_y / W_el_y",
        "-a^2 * (b - (c + d))",
        "lambda_bar_LT >= 0.4",
        "sqrt(sigma^2 + 3 * tau^2)",
        "abs(x) + floor(y) + ceil(z)",
        "if a > b then a else b / 2",
        "choose(duration; 'long', 0.7; 'short', 0.9)",
        "interpolate(h; 0 m, 1; 10 m, 0.8)",
        "value_in(f_ck, MPa)^(2/3)",
        "pi^2 * E * I_y / L_cr_y^2",
        "min(N_cr_y, N_cr_z) / gamma_M1",
        "effect('B1', 'M_y', 'max', purpose='strength')",
        "not a and b or c != 2 kN/m2",
    ];
    let set: Vec<String> =
        texts.iter().map(|text| latex(&formula(text).expect("a formula").symbols())).collect();
    assert_snapshot!(set.join("\n"), @r"
    \frac{M_{y}}{W_{\mathrm{el},y}}
     - {a}^{2} \cdot \left(b - \left(c + d\right)\right)
    \bar{\lambda}_{\mathrm{LT}} \ge 0.4
    \sqrt{{\sigma}^{2} + 3 \cdot {\tau}^{2}}
    \left\lvert x\right\rvert  + \left\lfloor y\right\rfloor  + \left\lceil z\right\rceil 
    \begin{cases}a & a > b \\ \frac{b}{2} & \text{otherwise}\end{cases}
    \begin{cases}0.7 & \mathrm{duration} = \text{long} \\ 0.9 & \mathrm{duration} = \text{short}\end{cases}
    \operatorname{interpolate}\left(h;\; 0\,\mathrm{m} \to 1;\; 10\,\mathrm{m} \to 0.8\right)
    {\left(\frac{f_{\mathrm{ck}}}{1\,\mathrm{MPa}}\right)}^{\frac{2}{3}}
    \frac{{\pi}^{2} \cdot E \cdot I_{y}}{{L_{\mathrm{cr},y}}^{2}}
    \frac{\min\left(N_{\mathrm{cr},y},\; N_{\mathrm{cr},z}\right)}{\gamma_{\mathrm{M1}}}
    M_{y,\mathrm{max}}\left(\text{B1},\; \text{strength}\right)
    \lnot a \;\land\; b \;\lor\; c \ne 2\,\mathrm{kN/m^{2}}
    ");
}

#[test]
fn a_step_shows_formula_values_and_result() {
    let step = |text: &str, values: &[(&str, &str)], taken: &[usize], result: (&str, &str)| {
        let shown: Vec<(String, String)> =
            values.iter().map(|(n, u)| ((*n).to_owned(), (*u).to_owned())).collect();
        let formula = formula(text).expect("a formula");
        equations("M_d", &formula, &shown, taken, &(result.0.to_owned(), result.1.to_owned()))
    };
    let all = [
        step("12 kN m", &[], &[], ("12", "kN m")),
        step("M", &[("12", "kN m")], &[], ("12", "kN m")),
        step("q * L^2 / 8", &[("10", "kN/m"), ("6", "m")], &[], ("45", "kN m")),
        step("a - b", &[("3", "kN"), ("\u{2212}2", "kN")], &[], ("5", "kN")),
        step("if x > 0 then 2 * x else x", &[("3", "")], &[0], ("6", "")),
        step(
            "1.35 * (g_roof + g_services + g_self_weight) * b_spacing + 1.5 * q_snow * b_spacing",
            &[
                ("0.25", "kN/m²"),
                ("0.35", "kN/m²"),
                ("0.11", "kN/m²"),
                ("5.5", "m"),
                ("0.72", "kN/m²"),
            ],
            &[],
            ("11.21", "kN/m"),
        ),
    ];
    assert_snapshot!(all.join("\n\n"), @r"
    M_{d} = 12\,\mathrm{kN\,m}

    M_{d} = M = 12\,\mathrm{kN\,m}

    M_{d} = \frac{q \cdot {L}^{2}}{8} = \frac{10\,\mathrm{kN/m} \cdot {\left(6\,\mathrm{m}\right)}^{2}}{8} = 45\,\mathrm{kN\,m}

    M_{d} = a - b = 3\,\mathrm{kN} - \left(-2\,\mathrm{kN}\right) = 5\,\mathrm{kN}

    M_{d} = \begin{cases}2 \cdot x & x > 0 \\ x & \text{otherwise}\end{cases} = 2 \cdot 3 = 6

    \begin{aligned}
    M_{d} &= 1.35 \cdot \left(g_{\mathrm{roof}} + g_{\mathrm{services}} + g_{\mathrm{self},\mathrm{weight}}\right) \cdot b_{\mathrm{spacing}} + 1.5 \cdot q_{\mathrm{snow}} \cdot b_{\mathrm{spacing}} \\
    &= 1.35 \cdot \left(0.25\,\mathrm{kN/m^{2}} + 0.35\,\mathrm{kN/m^{2}} + 0.11\,\mathrm{kN/m^{2}}\right) \cdot 5.5\,\mathrm{m} \\
    &\quad  + 1.5 \cdot 0.72\,\mathrm{kN/m^{2}} \cdot 5.5\,\mathrm{m} \\
    &= 11.21\,\mathrm{kN/m}
    \end{aligned}
    ");
}

/// Expressions of plain numbers that both evaluators read alike: signs in brackets, whole powers.
fn expressions() -> impl Strategy<Value = String> {
    let leaf = prop_oneof![
        (0.01..20.0_f64).prop_map(|x| format!("{x:.3}")),
        (1..30_u32).prop_map(|n| n.to_string()),
    ];
    leaf.prop_recursive(5, 40, 3, |inner| {
        prop_oneof![
            (inner.clone(), "[-+*/]", inner.clone()).prop_map(|(a, op, b)| format!("{a} {op} {b}")),
            (inner.clone(), "[-+*/]", inner.clone(), "[-+*/]", inner.clone())
                .prop_map(|(a, f, b, g, c)| format!("{a} {f} {b} {g} {c}")),
            inner.clone().prop_map(|a| format!("({a})")),
            inner.clone().prop_map(|a| format!("(-({a}))")),
            (inner.clone(), 0..4_u32).prop_map(|(a, n)| format!("({a})^{n}")),
            (
                prop::sample::select(vec![
                    "sqrt", "abs", "sin", "cos", "tan", "exp", "ln", "log10", "atan", "floor",
                    "ceil"
                ]),
                inner
            )
                .prop_map(|(function, a)| format!("{function}({a})")),
        ]
    })
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(2_000))]

    #[test]
    fn an_independent_evaluator_finds_the_same(text in expressions()) {
        let theirs = exmex::parse::<f64>(&text)
            .unwrap_or_else(|error| panic!("{text}: {error}"))
            .eval(&[])
            .unwrap_or_else(|error| panic!("{text}: {error}"));
        match value(&text) {
            Ok(ours) => {
                let scale = theirs.abs().max(1.0);
                // Other elementary functions and orders of operation: last bits, magnified by cancellation.
                prop_assert!(
                    (ours.value - theirs).abs() <= 1e-7 * scale || ill_conditioned(&text),
                    "{text}: {} and {theirs}", ours.value
                );
            }
            // What is not a finite number there, or on the way there, is an error here.
            Err(error) => prop_assert!(
                !theirs.is_finite() || passes_through_infinity(&error),
                "{text}: {error}, but {theirs}"
            ),
        }
    }

    #[test]
    fn units_do_not_change_a_result(q in 0.1..50.0_f64, l in 1.0..20.0_f64, w in 50.0..5e3_f64) {
        let text = "q * L^2 / (8 * W) + sqrt((q * L / W^(2/3))^2)";
        let metric = with(text, &[
            ("q", &format!("{q} kN/m")), ("L", &format!("{l} m")), ("W", &format!("{w} cm3")),
        ]).expect("a stress");
        let other = with(text, &[
            ("q", &format!("{q} N/mm")), ("L", &format!("{} mm", l * 1e3)), ("W", &format!("{} mm3", w * 1e3)),
        ]).expect("a stress");
        prop_assert!((metric.value / other.value - 1.0).abs() <= 1e-12);
        prop_assert_eq!(metric.dimension, Dimension::PRESSURE);
    }

    #[test]
    fn no_text_makes_the_reader_panic(text in "\\PC{0,80}") {
        if let Ok(formula) = formula_with_unit(&text) {
            let readings = vec![Value::number(1.5, Dimension::LENGTH); formula.readings.len()];
            let _ = formula.evaluate(&readings);
            let _ = latex(&formula.symbols());
        }
    }

    #[test]
    fn no_likely_text_makes_the_reader_panic(
        parts in prop::collection::vec(prop::sample::select(vec![
            "1", "2.5 kN/m", "M_y", "+", "-", "*", "/", "^", "(", ")", "if", "then", "else", "and", "not", ",", ";",
            "sqrt(", "max(", "choose(", "interpolate(", "value_in(", "[mm]", "'a'", "<", "==", "²", "pi", "effect(",
        ]), 0..14)
    ) {
        if let Ok(formula) = formula_with_unit(&parts.join(" ")) {
            let readings = vec![Value::number(-1.5, Dimension::MOMENT); formula.readings.len()];
            let shown = vec![("1.5".to_owned(), "kN m".to_owned()); formula.readings.len()];
            let taken = formula.evaluate(&readings).map(|evaluation| evaluation.taken);
            let _ = equations("a_b", &formula, &shown, &taken.unwrap_or_default(), &("1".to_owned(), String::new()));
        }
    }
}

/// Sines, tangents and floors of large or cut numbers lose digits in any evaluator.
fn ill_conditioned(text: &str) -> bool {
    ["sin", "cos", "tan", "floor", "ceil", "exp"].iter().any(|function| text.contains(function))
}

fn passes_through_infinity(error: &CalcError) -> bool {
    error.message.contains("not a finite number")
        || error.message.contains("divides by zero")
        || error.message.contains("no logarithm")
        || error.message.contains("no root")
}
