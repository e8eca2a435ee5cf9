//! Reading a quantity from text.

use std::ops::Range;

use super::Quantity;

/// Why a text is not a quantity.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
#[error("{message}")]
pub struct QuantityError {
    pub message: String,
    /// Bytes of the text that are at fault.
    pub range: Range<usize>,
    pub hint: Option<String>,
}

/// Reads a number with an optional unit, e.g. `12.5 kN/m`, `3 ft 6 in`, `1.2e-5 /K`, `0.4 %`.
///
/// # Errors
/// When the text is not one finite number followed by known units.
pub fn parse(text: &str) -> Result<Quantity, QuantityError> {
    todo!("{text}")
}
