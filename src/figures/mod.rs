//! Record → SVG drawings. Asks the Record for every value; computes none.

use crate::record::Record;

/// A drawing with its place in the package.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Figure {
    /// Unique slug: `model-main`, `loads-main-g`, `member-b1-effects`, `frame-main-strength-m_y`, …
    pub id: String,
    /// Caption under the drawing.
    pub caption: String,
    /// One SVG element with title and desc, text as text, no outside reference.
    pub svg: String,
    /// The structure shown, where one is shown.
    pub structure: Option<String>,
    /// The load case shown.
    pub case: Option<String>,
    /// The member shown.
    pub member: Option<String>,
    /// The purpose whose combinations are shown.
    pub purpose: Option<String>,
    /// The effect shown (its name, e.g. `M_y`); `None` where several are.
    pub effect: Option<String>,
}

/// All drawings of a package, in order: for each structure its model, the loads of each case and the
/// frame's effects by purpose, then each drawn member's effects by purpose.
#[must_use]
pub fn figures(record: &Record) -> Vec<Figure> {
    todo!("{}", record.format)
}

/// The drawing of the method statement: the beam element, its end freedoms and shape functions.
#[must_use]
pub fn method() -> Figure {
    todo!()
}
