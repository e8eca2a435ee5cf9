//! The tables in `catalogue/`, embedded in the program, each with its source.
//!
//! - A table is read only when a name calls for it, so that a command pays for what it asks.
//! - Names are compared ignoring case, spaces and the way a multiplication sign is written:
//!   `IPE 300`, `ipe300`; `CHS 114.3x5`, `chs114.3×5.0`; `HE 200 A`, `HEA 200`.
//! - Where geometry gives a property, the value used is computed from the nominal dimensions, fillets
//!   included, and the printed value is kept beside it; tests hold the two together. Where it does not
//!   (I_t, I_w and shear centre of channels, I_t of angles), the table's value is used; the source of
//!   each section says which.
//! - Values are SI.

mod checks;
mod expression;
mod find;
mod materials;
mod names;
mod rules;
mod sections;
mod table;

pub use checks::{
    Sheet, SheetCondition, SheetInput, SheetShows, SheetStep, SheetTarget, sheet_texts, sheets,
};
pub use expression::{ExpressionError, Factor, KINDS, Term, branches};
pub use find::{Entry, find};
pub use materials::{CatalogueMaterial, material, material_tables};
pub use rules::{Rule, RuleRow, RuleSet, rule, rule_sets};
pub use sections::{CatalogueSection, Family, families, family, section};
pub use table::Printed;

/// No entry of that name.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
#[error("{message}")]
pub struct NotFound {
    pub message: String,
    /// Names that may have been meant, the likeliest first.
    pub nearest: Vec<String>,
}
