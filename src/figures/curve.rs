//! Effects along a member as lines to draw.

use super::plane::Point;
use crate::analysis::evaluate;
use crate::model::Effect;
use crate::record::{Piece, Record};

/// An effect of a state along a member as points (x in m, value), ends of every piece included.
/// `per_metre` is the paper a metre takes, mm: curves get a point every 2 mm or so.
pub(super) fn points(
    record: &Record,
    member: &str,
    effect: Effect,
    state: &str,
    per_metre: f64,
) -> Vec<Point> {
    let cuts = |piece: &Piece| {
        let straight = piece.polynomial[2..].iter().all(|c| c.abs() <= 0.0);
        if straight { 1 } else { steps((piece.to - piece.from) * per_metre) }
    };
    sampled(record, member, effect, state, cuts)
}

/// Like [`points`], but straight pieces are cut as curves are, so that several effects of a member
/// have their points at the same positions.
pub(super) fn evenly(
    record: &Record,
    member: &str,
    effect: Effect,
    state: &str,
    per_metre: f64,
) -> Vec<Point> {
    let cuts = |piece: &Piece| steps((piece.to - piece.from) * per_metre);
    sampled(record, member, effect, state, cuts)
}

fn sampled(
    record: &Record,
    member: &str,
    effect: Effect,
    state: &str,
    cuts: impl Fn(&Piece) -> u8,
) -> Vec<Point> {
    let mut points = Vec::new();
    for piece in record.along(member, effect, state).unwrap_or_default() {
        let cuts = cuts(&piece);
        for i in 0..=cuts {
            let s = (piece.to - piece.from) * f64::from(i) / f64::from(cuts);
            points.push([piece.from + s, evaluate(&piece.polynomial, s)]);
        }
    }
    points
}

fn steps(paper: f64) -> u8 {
    (4..60).find(|steps| f64::from(*steps) * 2.0 >= paper).unwrap_or(60)
}

/// Where an effect of a state passes through zero with a change of sign, m; jumps do not count, nor do
/// values up to `nothing`.
pub(super) fn zeros(
    record: &Record,
    member: &str,
    effect: Effect,
    state: &str,
    nothing: f64,
) -> Vec<f64> {
    let mut found = Vec::new();
    // The last place with a value that counts, and the first zero since.
    let mut last: Option<Point> = None;
    let mut touched: Option<f64> = None;
    for piece in record.along(member, effect, state).unwrap_or_default() {
        let value = |x: f64| evaluate(&piece.polynomial, x - piece.from);
        for i in 0..=16 {
            let x = piece.from + (piece.to - piece.from) * f64::from(i) / 16.0;
            let here = value(x);
            if here.abs() <= nothing {
                touched = touched.or(Some(x));
                continue;
            }
            if let Some([x0, before]) = last.filter(|[_, before]| before * here < 0.0) {
                if let Some(zero) = touched {
                    found.push(zero);
                } else if i > 0 {
                    found.push(bisect(value, x0, x, before));
                }
            }
            last = Some([x, here]);
            touched = None;
        }
    }
    found
}

/// The zero between `low` and `high`, where the value at `low` is `at_low`.
fn bisect(value: impl Fn(f64) -> f64, mut low: f64, mut high: f64, at_low: f64) -> f64 {
    for _ in 0..60 {
        let middle = (low + high) / 2.0;
        if value(middle) * at_low > 0.0 {
            low = middle;
        } else {
            high = middle;
        }
    }
    (low + high) / 2.0
}
