//! Numbers with units, known at run time.
//!
//! Invariants
//! - A [`Quantity`] holds its value in SI base units (m, kg, s, K, rad and their products).
//! - Temperatures are differences: 1 °C here is 1 K.
//! - Angles are told apart from plain numbers, so that `rotate: 30` is refused and `30°` is read.
//! - This module never guesses a unit: a number without one is dimensionless.

mod dimension;
mod kind;
mod parse;
mod print;
mod symbols;
mod units;

pub use dimension::Dimension;
pub use kind::Kind;
pub use parse::{QuantityError, parse, parse_as, parse_unit};
pub use print::{Printer, print};
pub use units::{System, Unit, Units};

/// A value in SI base units with its dimension.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Quantity {
    /// In SI base units.
    pub value: f64,
    pub dimension: Dimension,
}

/// Standard acceleration of free fall, m/s² (3rd CGPM, 1901).
pub const STANDARD_GRAVITY: f64 = 9.806_65;
