//! The Record: everything resolved and computed, settled once, serialisable as record.json.
//!
//! Invariants
//! - All SI. A Record equals itself written and read (`settle`).
//! - Downstream (figures, package, cli) asks the Record and computes no structural value itself.
//! - Maps keep the order of the project file; no hash order is ever visible.

mod look_up;
mod types;

pub use look_up::{Band, Piece};
pub use types::*;

use crate::analysis::{Governing, SelfCheck, Solution};
use crate::model::Model;

/// Builds the settled Record.
#[must_use]
pub fn record(
    model: &Model,
    solution: &Solution,
    governing: &Governing,
    self_check: &SelfCheck,
    fingerprint: &str,
) -> Record {
    todo!("{model:?} {solution:?} {governing:?} {self_check:?} {fingerprint}")
}

impl Record {
    /// The text of record.json: one line per segment, governing value and step.
    #[must_use]
    pub fn to_json(&self) -> String {
        todo!()
    }

    /// Reads a record.
    ///
    /// # Errors
    /// When the text is not a record, or its format is newer than this program.
    pub fn from_json(text: &str) -> Result<Self, String> {
        todo!("{text}")
    }
}
