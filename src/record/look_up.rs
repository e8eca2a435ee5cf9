//! Looking up effects in a Record: the only way downstream gets a structural value.

use super::Record;
use crate::analysis::Polynomial;
use crate::model::{Effect, Purpose, Side};

/// One polynomial piece of an effect along a member, in s = x − from.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Piece {
    pub from: f64,
    pub to: f64,
    pub polynomial: Polynomial,
}

/// The band between the least and the greatest of an effect over a purpose, as points (x, least,
/// greatest); two points at the same x where it jumps.
pub type Band = Vec<[f64; 3]>;

impl Record {
    /// An effect at position `x` of a member in a state: a load case or a combination.
    /// `None` for unknown names or a position off the member.
    #[must_use]
    pub fn effect(
        &self,
        member: &str,
        effect: Effect,
        state: &str,
        x: f64,
        side: Side,
    ) -> Option<f64> {
        todo!("{member} {effect:?} {state} {x} {side:?}")
    }

    /// An effect along a whole member in a state.
    #[must_use]
    pub fn along(&self, member: &str, effect: Effect, state: &str) -> Option<Vec<Piece>> {
        todo!("{member} {effect:?} {state}")
    }

    /// The envelope of an effect over all combinations of a purpose, for drawing.
    #[must_use]
    pub fn band(&self, member: &str, effect: Effect, purpose: Purpose) -> Option<Band> {
        todo!("{member} {effect:?} {purpose:?}")
    }

    /// Displacement of a node (global, m and rad) in a state.
    #[must_use]
    pub fn displacement(&self, node: &str, state: &str) -> Option<[f64; 6]> {
        todo!("{node} {state}")
    }

    /// Reaction at a supported node (support's own axes where turned) in a state.
    #[must_use]
    pub fn reaction(&self, node: &str, state: &str) -> Option<[f64; 6]> {
        todo!("{node} {state}")
    }
}
