//! Where along a member a check may be worst.

use super::fields::{Along, PieceOf};
use crate::analysis::{derivative, sign_changes};

/// Parts into which a bracket is divided for a first look.
pub(super) const PARTS: u32 = 8;
/// Share of the member's length to which a place is refined.
pub(super) const REFINED: f64 = 1e-6;
/// (√5 − 1) / 2.
const GOLDEN: f64 = 0.618_033_988_749_894_9;

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
