//! Whatever is written: an answer or an error at its place, never a panic, never long work.

use std::time::{Duration, Instant};

use proptest::prelude::*;
use spanfolio::calc::{CalcError, Formula, Value, equations, formula, formula_with_unit, latex};
use spanfolio::quantity::Dimension;

/// Pieces of the language and near misses, to get past the first token.
const PIECES: [&str; 64] = [
    "1",
    "2.5",
    "0",
    "1e3",
    "3 kN",
    "2 m",
    "5 mm^2",
    "30°",
    "3 ft 6 in",
    "50 %",
    "'word'",
    "\"a\"",
    "'",
    "a",
    "M_y",
    "span",
    "σ",
    "pi",
    "+",
    "-",
    "*",
    "/",
    "^",
    "²",
    "³",
    "·",
    "(",
    ")",
    "[",
    "]",
    ",",
    ";",
    "=",
    "==",
    "!=",
    "<",
    "<=",
    ">",
    "≥",
    "≠",
    "and",
    "or",
    "not",
    "if",
    "then",
    "else",
    "sqrt(",
    "min(",
    "max(",
    "sin(",
    "ln(",
    "exp(",
    "value_in(",
    "interpolate(",
    "choose(",
    "choose \u{2009}\u{2009} (",
    "greatest(",
    "at(M_y, 0.5)",
    "[mm]",
    "kN",
    " ",
    "\u{a0}",
    "é",
    "10^400",
];

/// Walks the formula in every way there is.
fn walked(formula: &Formula) -> Result<(), CalcError> {
    let values = [
        Value::number(2.0, Dimension::NONE),
        Value::number(-3.0e3, Dimension::FORCE),
        Value::Truth(true),
        Value::word("word"),
        Value::number(0.0, Dimension::LENGTH),
    ];
    let readings: Vec<Value> =
        (0..formula.readings.len()).map(|index| values[index % values.len()].clone()).collect();
    let shown: Vec<(String, String)> =
        readings.iter().map(|_| ("\u{2212}1.2×10⁻⁵".to_owned(), "kN m".to_owned())).collect();
    let evaluation = formula.evaluate(&readings);
    let taken = evaluation.as_ref().map(|evaluation| evaluation.taken.clone()).unwrap_or_default();
    let _ = latex(&formula.symbols());
    let _ = latex(&formula.values_put_in(&shown, &taken));
    let _ = equations("a", formula, &shown, &taken, &("1".to_owned(), String::new()));
    if let Ok(evaluation) = &evaluation
        && let Value::Number(quantity) = &evaluation.value
    {
        assert!(quantity.value.is_finite());
    }
    evaluation.map(|_| ())
}

fn located(text: &str, result: Result<(), CalcError>) -> Result<(), TestCaseError> {
    if let Err(error) = result {
        prop_assert!(text.get(error.range.clone()).is_some(), "{text:?}: {error:?}");
        prop_assert!(!error.message.is_empty());
    }
    Ok(())
}

fn whole(text: &str) -> Result<(), CalcError> {
    formula(text).and_then(|formula| walked(&formula))?;
    formula_with_unit(text).and_then(|formula| walked(&formula))
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(2000))]
    #[test]
    fn any_text_is_a_formula_or_an_error_at_its_place(text in any::<String>()) {
        located(&text, whole(&text))?;
    }

    #[test]
    fn any_row_of_pieces_is_a_formula_or_an_error_at_its_place(
        pieces in prop::collection::vec(prop::sample::select(&PIECES[..]), 0..14),
        gap in prop::sample::select(&["", " ", "  "][..]),
    ) {
        let text = pieces.join(gap);
        located(&text, whole(&text))?;
    }
}

/// Runs and answers within a time that only exponential work exceeds, even where the machine is busy.
fn quickly(text: &str) -> Result<(), CalcError> {
    let start = Instant::now();
    let result = whole(text);
    let spent = start.elapsed();
    assert!(spent < Duration::from_secs(5), "{spent:?} for {}…", &text[..text.len().min(60)]);
    result
}

#[test]
fn deep_nesting_is_an_error() {
    for (open, middle, close) in [
        ("(", "1", ")"),
        ("-", "1", ""),
        ("2^", "1", ""),
        ("not ", "1 > 0", ""),
        ("sqrt(", "1", ")"),
        ("if 1 > 0 then ", "1", " else 1"),
        ("if ", "1 > 0", " then 1 else 1"),
        ("choose(", "1", "; 1, 1)"),
        ("interpolate(", "1", "; 0, 1; 2, 1)"),
        ("value_in(", "1 m", ", m)"),
    ] {
        let nested =
            |depth: usize| format!("{}{middle}{}", open.repeat(depth), close.repeat(depth));
        let error = quickly(&nested(60)).expect_err("too deep");
        assert_eq!(error.message, "a formula nests at most 40 deep", "{open}");
        // Brackets alone that a person may well write.
        assert!(formula(&nested(10)).is_ok(), "{open}");
    }
}

#[test]
fn long_formulas_are_an_error() {
    let longest = format!("1{}", "+1".repeat(499));
    assert!(quickly(&longest).is_ok());
    let error = quickly(&format!("{longest}+1")).expect_err("too many parts");
    assert_eq!(error.message, "a formula has at most 1000 numbers, names and signs");
    let wide = format!("{}1", " ".repeat(3_999));
    assert!(quickly(&wide).is_ok());
    let error = quickly(&format!(" {wide}")).expect_err("too long");
    assert_eq!(error.message, "a formula has at most 4000 characters");
    assert_eq!(error.range, 0..4_001);
}

#[test]
fn comparisons_within_comparisons_stay_small() {
    // The middle of `a < b < c` is compared twice.
    let chain = format!("{}1{}", "(0 < ".repeat(18), " < 2)".repeat(18));
    assert!(quickly(&chain).is_err());
    let equal = format!("{}1{}", "if (".repeat(12), ") == 1 then 1 else 2".repeat(12));
    assert!(quickly(&equal).is_ok());
    let left = format!("1{}", " < 1".repeat(400));
    assert!(quickly(&left).is_err());
}
