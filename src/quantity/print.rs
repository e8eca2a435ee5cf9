//! Printing values: the one rounding rule.

use super::{Kind, Units};

/// Prints SI values in the project's units with its number of significant digits.
#[derive(Clone, Debug, PartialEq)]
pub struct Printer {
    pub units: Units,
    pub significant: usize,
}

impl Printer {
    /// The number alone, e.g. `12.35`, `1 234` (thin space), `1.2×10⁻⁵`; never `-0`.
    #[must_use]
    pub fn number(&self, kind: Kind, si: f64) -> String {
        todo!("{kind:?} {si}")
    }

    /// Number and unit with a no-break space, e.g. `12.35 kN m`.
    #[must_use]
    pub fn with_unit(&self, kind: Kind, si: f64) -> String {
        todo!("{kind:?} {si}")
    }
}
