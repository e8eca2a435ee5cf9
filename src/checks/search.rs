//! Where along a member a check may be worst.

use super::fields::{Along, PieceOf};
use crate::analysis::{derivative, sign_changes};
use crate::calc::Turn;

/// Parts into which a bracket is divided for a first look.
pub(super) const PARTS: u32 = 8;
/// Share of the member's length to which a place is refined.
pub(super) const REFINED: f64 = 1e-6;
/// How often a bracket is split where a formula turns to another branch.
pub(super) const SPLITS: u32 = 4;
/// A sample that, raised by this share of the spread of its bracket, cannot beat the best so far is left
/// unrefined: between eight samples a smooth curve rises by a sixtieth of its spread.
const MARGIN: f64 = 0.25;
/// (√5 − 1) / 2.
const GOLDEN: f64 = 0.618_033_988_749_894_9;

/// What was found at one place.
pub(super) struct Sample {
    pub(super) x: f64,
    /// `None` where a condition does not hold.
    pub(super) utilisation: Option<f64>,
    pub(super) turns: Vec<Turn>,
}

impl Sample {
    /// Every formula is on the same branch at both places.
    pub(super) fn is_like(&self, other: &Self) -> bool {
        let pairs = self.turns.iter().zip(&other.turns);
        self.turns.len() == other.turns.len() && pairs.into_iter().all(|(a, b)| a.is_same(*b))
    }

    /// The margin of a comparison.
    pub(super) fn margin(&self, turn: usize) -> Option<f64> {
        match self.turns.get(turn) {
            Some(Turn::Compared { margin, .. }) => Some(*margin),
            _ => None,
        }
    }
}

/// Brackets around the samples that none beside them beats, where they may beat `best`.
pub(super) fn peaks(samples: &[Sample], best: f64) -> Vec<(f64, f64)> {
    let known: Vec<(f64, f64)> =
        samples.iter().filter_map(|sample| Some((sample.x, sample.utilisation?))).collect();
    let top = known.iter().map(|(_, value)| *value).fold(f64::NEG_INFINITY, f64::max);
    let bottom = known.iter().map(|(_, value)| *value).fold(f64::INFINITY, f64::min);
    if !top.is_finite() || top <= bottom {
        return Vec::new();
    }
    let last = known.len() - 1;
    (0..=last)
        .filter(|k| {
            let value = known[*k].1;
            let above_left = *k == 0 || value > known[k - 1].1;
            let above_right = *k == last || value >= known[k + 1].1;
            above_left && above_right && value + MARGIN * (top - bottom) >= best
        })
        .map(|k| (known[k.saturating_sub(1)].0, known[(k + 1).min(last)].0))
        .collect()
}

/// Where a comparison that comes out alike at all samples may do otherwise between two: its number, the sign
/// of its margin, and the bracket around the least of it.
pub(super) fn dips(samples: &[Sample]) -> Vec<(usize, f64, (f64, f64))> {
    let mut out = Vec::new();
    let last = samples.len() - 1;
    for turn in 0..samples[0].turns.len() {
        let margins: Option<Vec<f64>> = samples.iter().map(|sample| sample.margin(turn)).collect();
        let Some(margins) = margins else { continue };
        let size = |k: usize| margins[k].abs();
        let greatest = (0..=last).map(size).fold(0.0, f64::max);
        let least = (0..=last).map(size).fold(f64::INFINITY, f64::min);
        for k in 0..=last {
            // At an end, the parabola through three samples tells whether it falls from there.
            let falls = |one: usize, two: usize| 4.0 * size(one) < 3.0 * size(k) + size(two);
            let dips = match k {
                0 => falls(1, 2),
                k if k == last => falls(k - 1, k - 2),
                k => size(k) <= size(k - 1) && size(k) <= size(k + 1),
            };
            if dips && size(k) > 0.0 && size(k) <= MARGIN * (greatest - least) {
                let around = (samples[k.saturating_sub(1)].x, samples[(k + 1).min(last)].x);
                out.push((turn, margins[k].signum(), around));
            }
        }
    }
    out
}

/// Bounds of the brackets in a piece: its ends, and the extremes and zeros of every effect read there.
/// Between two of them every effect rises or falls and keeps its sign.
pub(super) fn bounds(piece: &PieceOf) -> Vec<f64> {
    let length = piece.to - piece.from;
    let mut inner: Vec<f64> = Vec::new();
    for polynomial in &piece.polynomials {
        inner.extend(sign_changes(polynomial, length));
        inner.extend(sign_changes(&derivative(polynomial), length));
    }
    inner.sort_by(f64::total_cmp);
    inner.dedup_by(|a, b| (*a - *b).abs() <= REFINED * length);
    let mut out = vec![piece.from];
    out.extend(inner.into_iter().map(|s| piece.from + s));
    out.push(piece.to);
    out
}

/// Narrows a bracket around the greatest value of `at` to a width, by golden section.
pub(super) fn refined<E>(
    (mut low, mut high): (f64, f64),
    width: f64,
    mut at: impl FnMut(f64) -> Result<f64, E>,
) -> Result<(), E> {
    let mut left = high - GOLDEN * (high - low);
    let mut right = low + GOLDEN * (high - low);
    let mut at_left = at(left)?;
    let mut at_right = at(right)?;
    while high - low > width {
        if at_left >= at_right {
            (high, right, at_right) = (right, left, at_left);
            left = high - GOLDEN * (high - low);
            at_left = at(left)?;
        } else {
            (low, left, at_left) = (left, right, at_right);
            right = low + GOLDEN * (high - low);
            at_right = at(right)?;
        }
    }
    Ok(())
}

/// The whole length.
pub(super) fn length(along: &Along) -> f64 {
    match (along.pieces.first(), along.pieces.last()) {
        (Some(first), Some(last)) => last.to - first.from,
        _ => 0.0,
    }
}
