//! The Record: everything resolved and computed, settled once, serialisable as record.json.
//!
//! Invariants
//! - All SI. A Record equals itself written and read (`settle`).
//! - Downstream (figures, package, cli) asks the Record and computes no structural value itself.
//! - Maps keep the order of the project file; no hash order is ever visible.

mod build;
mod checked;
mod json;
mod look_up;
mod registers;
mod rules;
mod settle;
mod types;
mod words;

pub use checked::*;
pub use look_up::{Acting, Band, Piece};
pub use registers::printed_utilisation;
pub use rules::*;
pub use settle::rounded;
pub use types::*;
pub use words::{LoadWords, component_kind, components, property_kind, release_kind};

use crate::analysis::{Governing, SelfCheck, Solution};
use crate::checks::Checked;
use crate::model::Model;

/// Builds the settled Record.
#[must_use]
pub fn record(
    model: &Model,
    solution: &Solution,
    governing: &Governing,
    self_check: &SelfCheck,
    checked: &Checked,
    fingerprint: &str,
) -> Record {
    build::build(model, solution, governing, self_check, checked, fingerprint)
}
