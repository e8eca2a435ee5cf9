//! Dimensions of sums, powers and roots.

use crate::quantity::Dimension;

/// Tolerance on a power that should make whole exponents, as 1/3 does of length³.
const WHOLE: f64 = 1e-9;
/// Larger exponents than any structural quantity needs.
const LARGEST: f64 = 24.0;

/// The dimension raised to any power; `None` where an exponent would not be whole.
pub(super) fn raised(dimension: Dimension, power: f64) -> Option<Dimension> {
    let whole = |exponent: i8| -> Option<i8> {
        let raised = f64::from(exponent) * power;
        let rounded = libm::round(raised);
        if (raised - rounded).abs() > WHOLE || rounded.abs() > LARGEST {
            return None;
        }
        #[expect(clippy::cast_possible_truncation, reason = "at most 24 in size, and whole")]
        Some(rounded as i8)
    };
    Some(Dimension {
        length: whole(dimension.length)?,
        mass: whole(dimension.mass)?,
        time: whole(dimension.time)?,
        temperature: whole(dimension.temperature)?,
        angle: 0,
    })
}

/// No exponent is larger than any structural quantity needs; far larger ones would not be kept.
pub(super) fn usable(dimension: Dimension) -> bool {
    let Dimension { length, mass, time, temperature, angle } = dimension;
    [length, mass, time, temperature, angle].iter().all(|n| f64::from(*n).abs() <= LARGEST)
}
