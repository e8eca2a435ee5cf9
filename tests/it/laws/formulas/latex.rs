//! Formulas as the package prints them: with symbols, with values put in, step by step.

use spanfolio::calc::{Shown, Value, equations, formula, formula_with_unit, latex};
use spanfolio::quantity::Dimension;

/// Every row: the formula, its LaTeX.
fn prints(rows: &[(&str, &str)]) {
    for (text, expected) in rows {
        let formula = formula(text).expect("a formula");
        assert_eq!(latex(&formula.symbols()), *expected, "{text}");
    }
}

fn shown(values: &[(&str, &str)]) -> Vec<Shown> {
    values.iter().map(|(number, unit)| ((*number).to_owned(), (*unit).to_owned())).collect()
}

#[test]
fn quotients_roots_and_sizes() {
    prints(&[
        (
            "abs(N) / A + abs(M_y) / W_el_y",
            r"\frac{\left\lvert N\right\rvert }{A} + \frac{\left\lvert M_{y}\right\rvert }{W_{\mathrm{el},y}}",
        ),
        ("sqrt(sigma^2 + 3 * tau^2)", r"\sqrt{{\sigma}^{2} + 3 \cdot {\tau}^{2}}"),
        (
            "pi^2 * E * I_y / L_cr_y^2",
            r"\frac{{\pi}^{2} \cdot E \cdot I_{y}}{{L_{\mathrm{cr},y}}^{2}}",
        ),
        ("a / b / c", r"\frac{\frac{a}{b}}{c}"),
        ("min(a, b, 3 kN/m2)", r"\min\left(a,\; b,\; 3\,\mathrm{kN/m^{2}}\right)"),
        ("log10(x) + asin(x)", r"\log_{10}\left(x\right) + \arcsin\left(x\right)"),
        ("floor(x) * ceil(y)", r"\left\lfloor x\right\rfloor  \cdot \left\lceil y\right\rceil "),
        (
            "value_in(f_ck, MPa)^(2/3)",
            r"{\left(\frac{f_{\mathrm{ck}}}{1\,\mathrm{MPa}}\right)}^{\frac{2}{3}}",
        ),
    ]);
}

#[test]
fn brackets_stand_where_the_value_needs_them() {
    prints(&[
        ("-a^2", " - {a}^{2}"),
        ("(-a)^2", r"{\left( - a\right)}^{2}"),
        ("2^3^2", "{2}^{{3}^{2}}"),
        ("(2^3)^2", r"{\left({2}^{3}\right)}^{2}"),
        ("(a / b)^2", r"{\left(\frac{a}{b}\right)}^{2}"),
        ("5 mm^2 * (5 mm)^2", r"5\,\mathrm{mm^{2}} \cdot {\left(5\,\mathrm{mm}\right)}^{2}"),
        ("a - b - c", "a - b - c"),
        ("a - (b - c)", r"a - \left(b - c\right)"),
        ("-a * b", r" - a \cdot b"),
        ("-(a + b) * c", r" - \left(a + b\right) \cdot c"),
        ("a - -b", r"a - \left( - b\right)"),
        ("a * -b", r"a \cdot \left( - b\right)"),
        ("a and (b or c)", r"a \;\land\; \left(b \;\lor\; c\right)"),
    ]);
}

#[test]
fn names_are_symbols_with_one_place_for_indices() {
    prints(&[
        ("chi_LT * f_y / gamma_M1", r"\frac{\chi_{\mathrm{LT}} \cdot f_{y}}{\gamma_{\mathrm{M1}}}"),
        ("lambda_bar_LT", r"\bar{\lambda}_{\mathrm{LT}}"),
        ("sigma1_x + sigma_1 + tau2", r"\sigma_{1,x} + \sigma_{1} + \tau_{2}"),
        ("span / 360", r"\frac{\mathrm{span}}{360}"),
        (
            "effect('B1', 'M_y', 'max', purpose='strength')",
            r"M_{y,\mathrm{max}}\left(\text{B1},\; \text{strength}\right)",
        ),
    ]);
}

#[test]
fn numbers_with_a_power_of_ten_print_as_such() {
    prints(&[
        ("1.5e-5 * a", r"1.5 \times 10^{-5} \cdot a"),
        ("2E+6 + a", r"2 \times 10^{6} + a"),
        ("(1e3)^2", r"{\left(1 \times 10^{3}\right)}^{2}"),
        ("3 ft 6 in + 20° + 5 %", r"3\,\mathrm{ft\,6\,in} + 20^{\circ} + 5\,\%"),
    ]);
}

#[test]
fn conditions_print_as_cases() {
    prints(&[
        (
            "if lambda_bar <= 0.2 then 1 else 2 / phi",
            r"\begin{cases}1 & \bar{\lambda} \le 0.2 \\ \frac{2}{\phi} & \text{otherwise}\end{cases}",
        ),
        (
            "choose(duration; 'permanent', 0.6; 'short', 0.9)",
            r"\begin{cases}0.6 & \mathrm{duration} = \text{permanent} \\ 0.9 & \mathrm{duration} = \text{short}\end{cases}",
        ),
        (
            "interpolate(h; 0 m, 1.0; 10 m, 0.8)",
            r"\operatorname{interpolate}\left(h;\; 0\,\mathrm{m} \to 1.0;\; 10\,\mathrm{m} \to 0.8\right)",
        ),
        ("a < b <= c and d != e", r"a < b \;\land\; b \le c \;\land\; d \ne e"),
        ("not d > 1", r"\lnot \left(d > 1\right)"),
        ("not a and b or c != 2 kN/m2", r"\lnot a \;\land\; b \;\lor\; c \ne 2\,\mathrm{kN/m^{2}}"),
    ]);
}

#[test]
fn values_put_in_keep_signs_and_units_together() {
    let formula = formula("a - b * c^2 / d").expect("a formula");
    let values =
        shown(&[("\u{2212}3", "kN"), ("\u{2212}2.5", ""), ("1.2×10⁻⁵", "m"), ("\u{2212}4", "m2")]);
    assert_eq!(
        latex(&formula.values_put_in(&values, &[])),
        r"\left(-3\,\mathrm{kN}\right) - \frac{\left(-2.5\right) \cdot {\left(1.2 \times 10^{-5}\,\mathrm{m}\right)}^{2}}{-4\,\mathrm{m2}}"
    );
}

#[test]
fn only_the_branch_that_was_taken_has_its_values_put_in() {
    let formula = formula("max(if x > 1 then x else y, choose(w; 'a', x * 2; 'b', y * 3))")
        .expect("a formula");
    let readings = [
        Value::number(0.5, Dimension::NONE),
        Value::number(7.0, Dimension::NONE),
        Value::word("b"),
    ];
    let evaluation = formula.evaluate(&readings).expect("a value");
    assert_eq!(evaluation.value, Value::number(21.0, Dimension::NONE));
    assert_eq!(evaluation.taken, [1, 1]);
    let values = shown(&[("0.5", ""), ("7", ""), ("b", "")]);
    assert_eq!(
        latex(&formula.values_put_in(&values, &evaluation.taken)),
        r"\max\left(7,\; 7 \cdot 3\right)"
    );
}

#[test]
fn a_step_that_fits_stands_in_one_line() {
    let formula = formula_with_unit("L / 360 [mm]").expect("a formula");
    let values = shown(&[("6", "m")]);
    let result = ("16.67".to_owned(), "mm".to_owned());
    assert_eq!(
        equations("d_max", &formula, &values, &[], &result),
        r"d_{\mathrm{max}} = \frac{L}{360} = \frac{6\,\mathrm{m}}{360} = 16.67\,\mathrm{mm}"
    );
}

#[test]
fn a_number_alone_is_its_own_result() {
    let formula = formula("1.3").expect("a formula");
    let result = ("1.3".to_owned(), String::new());
    assert_eq!(equations("gamma_M", &formula, &[], &[], &result), r"\gamma_{M} = 1.3");
}

#[test]
fn a_longer_step_is_aligned_at_its_equals_signs() {
    let formula = formula_with_unit("w * L^2 / 8 + N * e [kN m]").expect("a formula");
    let values = shown(&[("12", "kN/m"), ("6", "m"), ("\u{2212}400", "kN"), ("0.0125", "m")]);
    let result = ("49".to_owned(), "kN m".to_owned());
    assert_eq!(
        equations("M_y", &formula, &values, &[], &result),
        r"\begin{aligned}
M_{y} &= \frac{w \cdot {L}^{2}}{8} + N \cdot e \\
&= \frac{12\,\mathrm{kN/m} \cdot {\left(6\,\mathrm{m}\right)}^{2}}{8} + \left(-400\,\mathrm{kN}\right) \cdot 0.0125\,\mathrm{m} \\
&= 49\,\mathrm{kN\,m}
\end{aligned}"
    );
}

#[test]
fn a_sum_too_wide_for_its_line_breaks_before_a_sign() {
    let formula = formula(
        "1.35 * (g_roof + g_services + g_self_weight) * b_spacing + 1.5 * q_snow * b_spacing",
    )
    .expect("a formula");
    let values = shown(&[
        ("0.25", "kN/m²"),
        ("0.35", "kN/m²"),
        ("0.11", "kN/m²"),
        ("5.5", "m"),
        ("0.72", "kN/m²"),
    ]);
    let result = ("11.21".to_owned(), "kN/m".to_owned());
    assert_eq!(
        equations("M_d", &formula, &values, &[], &result),
        r"\begin{aligned}
M_{d} &= 1.35 \cdot \left(g_{\mathrm{roof}} + g_{\mathrm{services}} + g_{\mathrm{self},\mathrm{weight}}\right) \cdot b_{\mathrm{spacing}} + 1.5 \cdot q_{\mathrm{snow}} \cdot b_{\mathrm{spacing}} \\
&= 1.35 \cdot \left(0.25\,\mathrm{kN/m^{2}} + 0.35\,\mathrm{kN/m^{2}} + 0.11\,\mathrm{kN/m^{2}}\right) \cdot 5.5\,\mathrm{m} \\
&\quad  + 1.5 \cdot 0.72\,\mathrm{kN/m^{2}} \cdot 5.5\,\mathrm{m} \\
&= 11.21\,\mathrm{kN/m}
\end{aligned}"
    );
}
