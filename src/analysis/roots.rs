//! Real roots of a polynomial of degree five at most inside a stretch.
//!
//! By the chain of derivatives: between neighbouring roots of the derivative the polynomial is monotone,
//! so that each sign change there is one root, found by bisection. Robust where roots lie close together,
//! and the same on every processor.

use super::{Polynomial, evaluate};

/// Bisection steps: enough to use up every bit of a double.
const STEPS: usize = 80;

/// Coefficients of the derivative.
#[must_use]
pub fn derivative(polynomial: &Polynomial) -> Polynomial {
    std::array::from_fn(|k| {
        #[expect(clippy::cast_precision_loss, reason = "k is at most 5")]
        let power = (k + 1) as f64;
        if k + 1 < polynomial.len() { power * polynomial[k + 1] } else { 0.0 }
    })
}

/// The same polynomial counted from a later place: p(s + offset).
#[must_use]
pub(super) fn shifted(polynomial: &Polynomial, offset: f64) -> Polynomial {
    // Horner's scheme, once for each coefficient.
    let mut out = *polynomial;
    for first in 0..out.len() {
        for k in (first..out.len() - 1).rev() {
            out[k] += offset * out[k + 1];
        }
    }
    out
}

/// Where the polynomial changes sign strictly inside (0, length), ascending.
#[must_use]
pub fn sign_changes(polynomial: &Polynomial, length: f64) -> Vec<f64> {
    if polynomial[1..].iter().all(|c| *c == 0.0) {
        return Vec::new();
    }
    let mut bounds = vec![0.0];
    bounds.extend(sign_changes(&derivative(polynomial), length));
    bounds.push(length);
    let mut roots = Vec::new();
    for pair in bounds.windows(2) {
        let (low, high) = (pair[0], pair[1]);
        let (at_low, at_high) = (evaluate(polynomial, low), evaluate(polynomial, high));
        if at_low == 0.0 && low > 0.0 {
            roots.push(low);
        } else if (at_low < 0.0 && at_high > 0.0) || (at_low > 0.0 && at_high < 0.0) {
            roots.push(bisect(polynomial, low, high, at_low > 0.0));
        }
    }
    roots.dedup();
    roots
}

fn bisect(polynomial: &Polynomial, mut low: f64, mut high: f64, falls: bool) -> f64 {
    for _ in 0..STEPS {
        let middle = 0.5 * (low + high);
        if middle <= low || middle >= high {
            break;
        }
        if (evaluate(polynomial, middle) > 0.0) == falls {
            low = middle;
        } else {
            high = middle;
        }
    }
    0.5 * (low + high)
}
