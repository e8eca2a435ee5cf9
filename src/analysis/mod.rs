//! Linear analysis of the structures of a model, exact for straight uniform members.
//!
//! Invariants
//! - SI throughout; local axes, signs and effects as fixed in the design (see [`crate::model::Effect`]).
//! - A field inside a member is a piecewise polynomial; nothing is sampled at stations.
//! - Mechanisms and unrestrained parts are refused with the node and direction named, never solved.
//! - Never reads files, never rounds for printing.

mod combine;
mod element;
mod extremes;
mod fields;
mod frame;
mod govern;
mod handed;
mod hinge;
mod loading;
mod loading_by_span;
mod mechanism;
mod member;
mod parts;
mod progress;
mod roots;
mod self_check;
mod side;
mod solution;
mod solve;
mod span;
mod sparse;

pub use combine::{on_member, superpose, superpose_one};
pub use extremes::{Found, Stretch, extremes};
pub use fields::{Fields, Polynomial, evaluate};
pub use loading_by_span::{Choices, arrangements, choices};
pub use progress::progress;
pub use roots::{derivative, sign_changes};
pub use solution::{
    Arithmetic, Balance, Energy, Extreme, Extremes, Governing, GoverningMember, HandedForce,
    Independent, MemberSolution, NodeSolution, Residual, Runner, Segment, SelfCheck, Solution,
    StructureCheck,
};
pub use span::{Chord, deflections};

use crate::diagnostic::Diagnostic;
use crate::model::Model;

/// Solves every load case of every structure.
///
/// # Errors
/// Mechanisms, unrestrained parts and loads that cannot be carried, each with its place in the file.
pub fn solve(model: &Model) -> Result<Solution, Vec<Diagnostic>> {
    solve::solve(model)
}

/// Superposes every combination and finds the governing values with their positions.
#[must_use]
pub fn govern(model: &Model, solution: &Solution) -> Governing {
    govern::govern(model, solution)
}

/// Holds the solution against equilibrium, energy and an independent integration.
#[must_use]
pub fn self_check(model: &Model, solution: &Solution) -> SelfCheck {
    self_check::self_check(model, solution)
}
