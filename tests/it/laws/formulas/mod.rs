//! The language of formulas: values and units by hand, errors at their place, laws, mathematics as printed.

mod errors;
mod evaluator;
mod latex;
mod limits;
mod values;

use spanfolio::calc::{CalcError, formula};
use spanfolio::quantity::Quantity;

/// The quantity of a formula that reads nothing.
fn quantity(text: &str) -> Result<Quantity, CalcError> {
    formula(text)?.quantity(&[])
}
