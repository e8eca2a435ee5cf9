//! What is wrong with a formula is said at the characters that are at fault.

use spanfolio::calc::{CalcError, formula, formula_with_unit, is_name};

use super::quantity;

/// The formula without its marks, and the bytes between them.
fn marked(text: &str) -> (String, std::ops::Range<usize>) {
    let start = text.find('«').expect("an opening mark");
    let end = text.find('»').expect("a closing mark") - '«'.len_utf8();
    (text.replace(['«', '»'], ""), start..end)
}

/// Every row: the formula with its fault between « and », the message.
fn fails(rows: &[(&str, &str)]) {
    let mut wrong = Vec::new();
    for (row, message) in rows {
        let (text, range) = marked(row);
        match quantity(&text) {
            Err(error) if error.message == *message && error.range == range => {}
            other => {
                wrong.push(format!("{text}: expected `{message}` at {range:?}, found {other:?}"))
            }
        }
    }
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}

fn error(text: &str) -> CalcError {
    quantity(text).expect_err("an error")
}

#[test]
fn unlike_quantities_do_not_go_together() {
    fails(&[
        ("«1 m + 2 kN»", "`+` cannot take a length with a force"),
        ("3 * («2 kN m - 2 kN») / 4", "`-` cannot take a moment with a force"),
        ("«1 m + 2»", "`+` cannot take a length with a plain number"),
        ("if «3 m < 2 kN» then 1 else 2", "`<` cannot take a length with a force"),
        ("if «3 m == 2 m2» then 1 else 2", "`==` cannot take a length with an area"),
        ("2 * «max(1 m, 2 kN)»", "`max` cannot take a length with a force"),
        ("«min(0, 1 MPa, 2 kN)»", "`min` cannot take a force per area with a force"),
        ("«interpolate(1 m; 0, 1; 2 kN, 3)»", "`interpolate` cannot take a length with a force"),
        ("«interpolate(1; 0, 1 m; 2, 3 kN)»", "`interpolate` cannot take a length with a force"),
        ("«choose(1 m; 1 kN, 2)»", "`choose` cannot take a length with a force"),
        ("1 + «value_in(2 m, kN)»", "a length has no value in kN"),
    ]);
}

#[test]
fn a_nought_among_the_rows_hides_no_unlike_rows() {
    fails(&[
        (
            "«interpolate(1; 0, 0; 1, 5 m; 2, 3 kN)»",
            "`interpolate` cannot take a length with a force",
        ),
        (
            "«interpolate(0; 0, 1; 1 m, 2; 2 kN, 3)»",
            "`interpolate` cannot take a length with a force",
        ),
    ]);
}

#[test]
fn powers_roots_and_functions_say_what_they_take() {
    fails(&[
        ("sqrt(«2 m»)", "a length has no square root"),
        ("sqrt(«-4»)", "this is below zero: it has no root"),
        ("2^(«1 m»)", "an exponent is a plain number, not a length"),
        ("(«2 m»)^0.5", "a length cannot be raised to the power 0.5"),
        ("(«2 m2»)^0.3", "an area cannot be raised to the power 0.3"),
        ("(«-8»)^(1/3)", "this is below zero: it has no broken power"),
        ("«0»^-1", "this divides by zero"),
        ("sin(«2 m»)", "`sin` takes a plain number, not a length"),
        ("exp(«1 kN»)", "`exp` takes a plain number, not a force"),
        ("floor(«2 m»)", "`floor` takes a plain number, not a length"),
        ("ln(«0»)", "this is not above zero: it has no logarithm"),
        ("log10(«-3»)", "this is not above zero: it has no logarithm"),
        ("acos(«1.5»)", "this lies outside -1 to 1"),
    ]);
    let hint = error("0.3 * (30 MPa)^(2/3)").hint;
    assert_eq!(hint.as_deref(), Some("say in which unit its number counts: `value_in(…, MPa)`"));
}

#[test]
fn results_are_finite() {
    fails(&[
        ("1 / («3 - 3»)", "this divides by zero"),
        ("2 kN / («0 m»)", "this divides by zero"),
        ("«exp(1000)»", "the result is not a finite number"),
        ("1 / («1e200 * 1e200»)", "the result is not a finite number"),
        ("«10^400»", "the result is not a finite number"),
        ("«1e308 + 1e308» - 1e308", "the result is not a finite number"),
    ]);
}

/// Exponents of dimensions are kept in one byte: they must not wrap or stick.
#[test]
fn dimensions_far_from_any_use_are_refused() {
    let many = ["(1 m)^24"; 6].join(" * ");
    let back = ["(1 m)^24"; 6].join(" / ");
    assert!(quantity(&many).is_err());
    assert!(quantity(&format!("{many} / {back}")).is_err());
}

#[test]
fn look_ups_without_a_row_say_so() {
    fails(&[
        (
            "interpolate(«11 m»; 0 m, 1; 10 m, 2)",
            "this lies outside the rows, and nothing is extrapolated",
        ),
        (
            "interpolate(«-1»; 0, 1; 10, 2)",
            "this lies outside the rows, and nothing is extrapolated",
        ),
        ("interpolate(1; 3, 1; «2», 2)", "rows must ascend in their first entry"),
        ("interpolate(1; 2, 1; «2», 2)", "rows must ascend in their first entry"),
        ("choose(«'long'»; 'short', 1)", "no row for `long`"),
        ("choose(«3»; 1, 2; 2, 5)", "no row for this value"),
        ("choose(2; «'a'», 1)", "the word `a` cannot equal a plain number"),
    ]);
}

#[test]
fn truth_values_words_and_quantities_are_told_apart() {
    fails(&[
        ("if «3» then 1 else 2", "this is a plain number, expected a condition"),
        ("if 1 > 0 and «2 m» then 1 else 2", "this is a length, expected a condition"),
        ("1 + («2 > 1»)", "this is a truth value, expected a quantity"),
        ("«'long'» + 1", "this is the word `long`, expected a quantity"),
        ("if «'a'» < 'b' then 1 else 2", "this is the word `a`, expected a quantity"),
        ("if «'a'» == 1 then 1 else 2", "this is the word `a`, expected a quantity"),
        ("«1 < 2»", "this is a truth value, expected a quantity"),
        ("if «1 < 2 < 3» < 4 then 1 else 2", "this is a truth value, expected a quantity"),
    ]);
}

#[test]
fn the_grammar_is_checked_at_the_character() {
    fails(&[
        ("«»", "the formula breaks off: expected a value"),
        ("1 +«»", "the formula breaks off: expected a value"),
        ("1 * «*» 2", "expected a value, found `*`"),
        ("«and» 1", "expected a value, found `and`"),
        ("«(»1 + 2", "this bracket is not closed"),
        ("sqrt«(»1 + 2", "this bracket is not closed"),
        ("(1 + 2«,» 3)", "expected `)`, found `,`"),
        ("1 + 2«)»", "expected an operator or the end of the formula, found `)`"),
        ("0.5«.5»", "expected an operator or the end of the formula, found `.5`"),
        ("1 «000 m»", "expected an operator or the end of the formula, found `000 m`"),
        ("a «=» b", "expected an operator or the end of the formula, found `=`"),
        ("1 «$» 2", "`$` has no meaning in a formula"),
        ("σ + «√»2", "`√` has no meaning in a formula"),
        ("1 + «'long»", "this quotation has no end"),
        ("1 + «sqrt(1, 2)»", "`sqrt` takes one value, not 2"),
        ("if 1 > 0 then 2«»", "the formula breaks off: expected `else`"),
        ("if 1 > 0 «else» 2", "expected `then`, found `else`"),
        ("«interpolate(1; 2, 3)»", "`interpolate` needs at least 2 rows"),
        ("«choose(1)»", "`choose` needs at least 1 row"),
        ("choose(1; 2«)»", "expected `,` and the row's second entry, found `)`"),
        ("value_in(1 m«)»", "expected `,` and a unit, found `)`"),
        ("value_in(1 m, kN«»", "the formula breaks off: expected `)`"),
        ("greatest(1 «+» 2)", "expected `)`, found `+`"),
        ("greatest(«»", "the formula breaks off: expected a name, a quotation or a number"),
        ("greatest(M_y,«»", "the formula breaks off: expected a name, a quotation or a number"),
        ("at(M_y, -«a»)", "expected a name, a quotation or a number, found `a`"),
        ("max(«)»", "expected a value, found `)`"),
        ("2 «x»", "no unit is called `x`"),
        ("5 «mmm»", "no unit is called `mmm`"),
        ("3 kN «span»", "no unit is called `span`"),
    ]);
}

#[test]
fn hints_say_what_to_do() {
    let hint = |text: &str| error(text).hint.unwrap_or_default();
    assert_eq!(hint("a = b"), "to compare, write `==`");
    assert_eq!(hint("2 span"), "to multiply by a value, write `*` between the two");
    assert_eq!(hint("if 3 then 1 else 2"), "compare it with something");
    assert_eq!(
        hint("choose(1)"),
        "write rows behind semicolons: `choose(value; first, 1.0; second, 0.8)`"
    );
}

#[test]
fn a_stated_unit_must_be_one_of_the_result() {
    let formula = formula_with_unit("6 m / 360 [mm]").expect("a formula");
    assert_eq!(formula.unit.as_ref().map(|unit| unit.label.as_str()), Some("mm"));
    assert_eq!(formula.text, "6 m / 360");
    let formula = formula_with_unit("2 kN + 1 kN [mm]").expect("a formula");
    let error = formula.evaluate(&[]).expect_err("a force is no length");
    assert_eq!(error.message, "the result is a force, which has no value in mm");
    assert_eq!(error.range, 0..11);
    let error = formula_with_unit("6 m [furlong]").expect_err("no such unit");
    assert_eq!(error.range, 5..12);
    assert!(super::formula("6 m [mm]").is_err());
}

#[test]
fn words_of_the_language_name_no_value() {
    for name in ["M_y", "σ_1", "f2_x", "minimum", "e"] {
        assert!(is_name(name), "{name}");
        assert!(formula(name).is_ok_and(|formula| formula.readings.len() == 1), "{name}");
    }
    for name in [
        "",
        "if",
        "and",
        "sqrt",
        "pi",
        "choose",
        "interpolate",
        "value_in",
        "2x",
        "a b",
        "a-b",
        "m²",
    ] {
        assert!(!is_name(name), "{name}");
    }
}
