//! Exponents of the base dimensions.

use std::ops::{Div, Mul};

/// Exponents of length, mass, time, temperature and angle.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Dimension {
    pub length: i8,
    pub mass: i8,
    pub time: i8,
    pub temperature: i8,
    pub angle: i8,
}

impl Dimension {
    pub const NONE: Self = Self { length: 0, mass: 0, time: 0, temperature: 0, angle: 0 };
    pub const LENGTH: Self = Self { length: 1, ..Self::NONE };
    pub const MASS: Self = Self { mass: 1, ..Self::NONE };
    pub const TIME: Self = Self { time: 1, ..Self::NONE };
    pub const TEMPERATURE: Self = Self { temperature: 1, ..Self::NONE };
    pub const ANGLE: Self = Self { angle: 1, ..Self::NONE };
    pub const AREA: Self = Self { length: 2, ..Self::NONE };
    pub const FORCE: Self = Self { length: 1, mass: 1, time: -2, ..Self::NONE };
    pub const MOMENT: Self = Self { length: 2, mass: 1, time: -2, ..Self::NONE };
    /// Force per length.
    pub const LINE_LOAD: Self = Self { length: 0, mass: 1, time: -2, ..Self::NONE };
    /// Force per area, and stress.
    pub const PRESSURE: Self = Self { length: -1, mass: 1, time: -2, ..Self::NONE };
    pub const MASS_DENSITY: Self = Self { length: -3, mass: 1, ..Self::NONE };
    pub const WEIGHT_DENSITY: Self = Self { length: -2, mass: 1, time: -2, ..Self::NONE };
    /// Moment per angle.
    pub const ROTATION_SPRING: Self =
        Self { length: 2, mass: 1, time: -2, angle: -1, ..Self::NONE };
    /// Per temperature.
    pub const EXPANSION: Self = Self { temperature: -1, ..Self::NONE };

    /// The dimension raised to a whole power.
    #[must_use]
    pub fn power(self, n: i8) -> Self {
        Self {
            length: self.length * n,
            mass: self.mass * n,
            time: self.time * n,
            temperature: self.temperature * n,
            angle: self.angle * n,
        }
    }
}

impl Mul for Dimension {
    type Output = Self;
    fn mul(self, other: Self) -> Self {
        Self {
            length: self.length + other.length,
            mass: self.mass + other.mass,
            time: self.time + other.time,
            temperature: self.temperature + other.temperature,
            angle: self.angle + other.angle,
        }
    }
}

impl Div for Dimension {
    type Output = Self;
    fn div(self, other: Self) -> Self {
        self * other.power(-1)
    }
}
