//! Formulas: parsed once, evaluated with units as often as needed, set as mathematics.
//!
//! Invariants
//! - A formula sees only the values of its readings: it cannot loop, recurse, read or write anything else.
//! - Its length and nesting are limited, so that whatever walks it may recurse.
//! - Dimensions are checked at every operation; radians are plain numbers here.
//! - A result is always finite: division by zero and the like are errors at their place.
//! - Never prints, never knows which unit a project prefers, never decides an outcome.

mod dimensions;
mod evaluate;
mod expression;
mod function;
mod latex;
mod parse;
mod step;
mod token;
mod typeset;
mod unit;

pub use evaluate::{Evaluation, Turn, Value};
pub use expression::{Argument, Formula, Reading};
pub use function::Function;
pub use latex::latex;
pub use parse::{formula, formula_with_unit, is_name};
pub use step::{Shown, equations};
pub use typeset::Math;

use std::ops::Range;

/// What is wrong with a formula, and where in its text.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
#[error("{message}")]
pub struct CalcError {
    pub message: String,
    /// Bytes of the formula that are at fault.
    pub range: Range<usize>,
    pub hint: Option<String>,
}

impl CalcError {
    fn new(message: impl Into<String>, range: Range<usize>) -> Self {
        Self { message: message.into(), range, hint: None }
    }

    fn hint(mut self, hint: impl Into<String>) -> Self {
        self.hint = Some(hint.into());
        self
    }
}
