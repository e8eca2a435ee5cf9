//! Record → SVG drawings. Asks the Record for every value; computes none.

use crate::record::Record;

/// A drawing with its place in the package.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Figure {
    /// Unique slug: `model-main`, `case-main-g`, `effects-b1-m_y`, `frame-main-strength-m_y`, …
    pub id: String,
    /// Caption under the drawing.
    pub caption: String,
    /// One SVG element with title and desc, text as text, no outside reference.
    pub svg: String,
}

/// All drawings of a package, in order.
#[must_use]
pub fn figures(record: &Record) -> Vec<Figure> {
    todo!("{}", record.format)
}
