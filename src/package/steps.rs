//! Steps of a calculation as LaTeX, with the values printed as everywhere else.

use serde::Serialize;

use crate::calc;
use crate::quantity::{parse_unit, print};
use crate::record::{StepRecord, StepValueRecord};

/// A step as templates place it.
#[derive(Clone, Debug, Serialize)]
pub(super) struct Equation {
    /// LaTeX without delimiters; templates set it with the filter `display`.
    latex: String,
    meaning: Option<String>,
    /// The meaning as written, which of conditions is why they matter.
    reason: Option<String>,
    clause: Option<String>,
    /// Of conditions: whether it holds.
    holds: Option<bool>,
}

/// A step with its symbol, formula, values put in and result.
pub(super) fn equation(step: &StepRecord, significant: usize) -> Equation {
    named(&step.symbol, step, significant)
}

/// The same under another symbol.
pub(super) fn named(symbol: &str, step: &StepRecord, significant: usize) -> Equation {
    let holds = match step.value {
        StepValueRecord::Truth(truth) => Some(truth),
        StepValueRecord::Word(_) | StepValueRecord::Number(..) => None,
    };
    // The Record holds formulas that this program has parsed before; should it ever not, the text stands.
    let latex = match calc::formula(&step.formula) {
        Ok(formula) => {
            let values: Vec<calc::Shown> =
                step.values.iter().map(|(_, value)| shown(value, significant)).collect();
            match holds {
                Some(_) => condition(&formula, &values, &step.taken),
                None => {
                    let result = shown(&step.value, significant);
                    calc::equations(symbol, &formula, &values, &step.taken, &result)
                }
            }
        }
        Err(_) => calc::latex(&calc::Math::Text(step.formula.clone())),
    };
    let meaning = step.meaning.as_deref().map(capital);
    Equation { latex, meaning, reason: step.meaning.clone(), clause: step.clause.clone(), holds }
}

/// Text that begins a sentence.
fn capital(text: &str) -> String {
    let mut chars = text.chars();
    chars.next().map(|first| first.to_uppercase().chain(chars).collect()).unwrap_or_default()
}

/// A value with its unit, in running text.
pub(super) fn in_text(value: &StepValueRecord, significant: usize) -> String {
    let (number, unit) = shown(value, significant);
    match unit.as_str() {
        "" => number,
        "°" => number + "°",
        unit => format!("{number}\u{a0}{unit}"),
    }
}

/// A condition with its values put in behind it.
fn condition(formula: &calc::Formula, values: &[calc::Shown], taken: &[usize]) -> String {
    let symbols = calc::latex(&formula.symbols());
    let put_in = calc::latex(&formula.values_put_in(values, taken));
    if symbols == put_in { symbols } else { format!("{symbols} :\\quad {put_in}") }
}

/// Number and unit as printed.
pub(super) fn shown(value: &StepValueRecord, significant: usize) -> calc::Shown {
    match value {
        StepValueRecord::Truth(truth) => {
            ((if *truth { "true" } else { "false" }).to_owned(), String::new())
        }
        StepValueRecord::Word(word) => (word.clone(), String::new()),
        StepValueRecord::Number(value, unit) => {
            (print(value / factor(unit), significant), unit.clone())
        }
    }
}

/// SI units in one of a unit that the Record names.
pub(super) fn factor(unit: &str) -> f64 {
    parse_unit(unit).map_or(1.0, |unit| unit.factor)
}
