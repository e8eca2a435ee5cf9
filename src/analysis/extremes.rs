//! The greatest and the least of a piecewise polynomial along a member.
//!
//! Candidates are the ends of every stretch, both sides of a jump, and the roots of the derivative inside.
//! The place of a flat extreme is the smallest x within [`FLAT`] of the effect's scale.

use super::roots::{derivative, sign_changes};
use super::{Polynomial, evaluate};
use crate::model::Side;

/// Values that differ by less than this share of the scale count as equal.
pub(super) const FLAT: f64 = 1e-9;

/// One polynomial piece in s = x − from.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Stretch {
    pub from: f64,
    pub to: f64,
    pub polynomial: Polynomial,
}

/// A value with its place.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Found {
    pub value: f64,
    pub x: f64,
    /// Which side of `x`, where the effect jumps there.
    pub side: Option<Side>,
}

/// The greatest and the least along neighbouring stretches; `None` of no stretch.
#[must_use]
pub fn extremes(stretches: &[Stretch]) -> Option<(Found, Found)> {
    let scale = stretches.iter().map(bound).fold(0.0, f64::max);
    let candidates: Vec<Found> = candidates(stretches, scale);
    let pick = |sign: f64| {
        let best = candidates.iter().map(|c| sign * c.value).fold(f64::NEG_INFINITY, f64::max);
        // In order of x: the first within the margin is the smallest x.
        candidates.iter().find(|c| sign * c.value >= best - FLAT * scale).copied()
    };
    Some((pick(1.0)?, pick(-1.0)?))
}

/// No value on the stretch is larger than this.
pub(super) fn bound(stretch: &Stretch) -> f64 {
    let length = stretch.to - stretch.from;
    stretch.polynomial.iter().rev().fold(0.0, |sum, c| sum * length + c.abs())
}

fn candidates(stretches: &[Stretch], scale: f64) -> Vec<Found> {
    let mut out = Vec::with_capacity(2 * stretches.len() + 2);
    let mut before: Option<f64> = None;
    for (index, stretch) in stretches.iter().enumerate() {
        let length = stretch.to - stretch.from;
        let first = evaluate(&stretch.polynomial, 0.0);
        let jumps = before.is_some_and(|value| (value - first).abs() > FLAT * scale);
        if let (true, Some(value)) = (jumps, before) {
            out.push(Found { value, x: stretch.from, side: Some(Side::Before) });
        }
        out.push(Found { value: first, x: stretch.from, side: jumps.then_some(Side::After) });
        for s in sign_changes(&derivative(&stretch.polynomial), length) {
            out.push(Found {
                value: evaluate(&stretch.polynomial, s),
                x: stretch.from + s,
                side: None,
            });
        }
        let last = evaluate(&stretch.polynomial, length);
        if index + 1 == stretches.len() {
            out.push(Found { value: last, x: stretch.to, side: None });
        }
        before = Some(last);
    }
    out
}
