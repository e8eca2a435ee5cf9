//! Exponents of the base dimensions.

use std::borrow::Cow;
use std::ops::{Div, Mul};

/// Exponents of length, mass, time, temperature and angle.
///
/// Exponents saturate instead of overflowing; `parse` refuses units anywhere near that.
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
    pub const VOLUME: Self = Self { length: 3, ..Self::NONE };
    /// Second moment of area.
    pub const SECOND_MOMENT: Self = Self { length: 4, ..Self::NONE };
    /// Warping constant.
    pub const WARPING: Self = Self { length: 6, ..Self::NONE };
    pub const ACCELERATION: Self = Self { length: 1, time: -2, ..Self::NONE };
    pub const FREQUENCY: Self = Self { time: -1, ..Self::NONE };
    pub const FORCE: Self = Self { length: 1, mass: 1, time: -2, ..Self::NONE };
    /// Moment, and energy.
    pub const MOMENT: Self = Self { length: 2, mass: 1, time: -2, ..Self::NONE };
    /// Force per length.
    pub const LINE_LOAD: Self = Self { length: 0, mass: 1, time: -2, ..Self::NONE };
    /// Force per area, and stress.
    pub const PRESSURE: Self = Self { length: -1, mass: 1, time: -2, ..Self::NONE };
    pub const MASS_PER_LENGTH: Self = Self { length: -1, mass: 1, ..Self::NONE };
    pub const MASS_PER_AREA: Self = Self { length: -2, mass: 1, ..Self::NONE };
    pub const MASS_DENSITY: Self = Self { length: -3, mass: 1, ..Self::NONE };
    pub const WEIGHT_DENSITY: Self = Self { length: -2, mass: 1, time: -2, ..Self::NONE };
    /// Moment per angle.
    pub const ROTATION_SPRING: Self =
        Self { length: 2, mass: 1, time: -2, angle: -1, ..Self::NONE };
    /// Per temperature.
    pub const EXPANSION: Self = Self { temperature: -1, ..Self::NONE };

    /// What values of this dimension are called, e.g. `force per length`; where there is no word for
    /// it, the SI base units, e.g. `kg² m⁻¹`.
    #[must_use]
    pub fn name(self) -> Cow<'static, str> {
        let named = NAMES.iter().find(|(dimension, _)| *dimension == self);
        let in_base = || format!("quantity in {}", self.base_units()).into();
        named.map_or_else(in_base, |(_, name)| (*name).into())
    }

    /// [`Self::name`] with its article, e.g. `an area`, `a force per length`.
    #[must_use]
    pub fn name_with_article(self) -> String {
        let name = self.name();
        let article = if name.starts_with(['a', 'e', 'i', 'o', 'u']) { "an" } else { "a" };
        format!("{article} {name}")
    }

    /// The dimension raised to a whole power.
    #[must_use]
    pub fn power(self, n: i8) -> Self {
        Self {
            length: self.length.saturating_mul(n),
            mass: self.mass.saturating_mul(n),
            time: self.time.saturating_mul(n),
            temperature: self.temperature.saturating_mul(n),
            angle: self.angle.saturating_mul(n),
        }
    }

    /// The SI base units of this dimension, e.g. `kg² m⁻¹`; nothing for plain numbers.
    #[must_use]
    pub fn base_units(self) -> String {
        let exponents = [
            ("kg", self.mass),
            ("m", self.length),
            ("s", self.time),
            ("K", self.temperature),
            ("rad", self.angle),
        ];
        let present = exponents.iter().filter(|(_, exponent)| *exponent != 0);
        let units: Vec<String> = present
            .map(|(unit, exponent)| format!("{unit}{}", superscript(i32::from(*exponent))))
            .collect();
        units.join(" ")
    }
}

const NAMES: [(Dimension, &str); 22] = [
    (Dimension::NONE, "plain number"),
    (Dimension::LENGTH, "length"),
    (Dimension::AREA, "area"),
    (Dimension::VOLUME, "length³"),
    (Dimension::SECOND_MOMENT, "second moment of area"),
    (Dimension::WARPING, "warping constant"),
    (Dimension::MASS, "mass"),
    (Dimension::MASS_PER_LENGTH, "mass per length"),
    (Dimension::MASS_PER_AREA, "mass per area"),
    (Dimension::MASS_DENSITY, "mass per volume"),
    (Dimension::TIME, "time"),
    (Dimension::FREQUENCY, "frequency"),
    (Dimension::ACCELERATION, "acceleration"),
    (Dimension::TEMPERATURE, "temperature difference"),
    (Dimension::EXPANSION, "number per temperature difference"),
    (Dimension::ANGLE, "angle"),
    (Dimension::FORCE, "force"),
    (Dimension::MOMENT, "moment"),
    (Dimension::LINE_LOAD, "force per length"),
    (Dimension::PRESSURE, "force per area"),
    (Dimension::WEIGHT_DENSITY, "force per volume"),
    (Dimension::ROTATION_SPRING, "moment per angle"),
];

/// An exponent in superscript digits; nothing for 1.
pub(super) fn superscript(exponent: i32) -> String {
    if exponent == 1 {
        return String::new();
    }
    let digit = |c: char| match c {
        '-' => '⁻',
        _ => SUPERSCRIPTS[usize::from(c as u8 - b'0')],
    };
    exponent.to_string().chars().map(digit).collect()
}

/// Superscript 0 to 9.
pub(super) const SUPERSCRIPTS: [char; 10] = ['⁰', '¹', '²', '³', '⁴', '⁵', '⁶', '⁷', '⁸', '⁹'];

impl Mul for Dimension {
    type Output = Self;
    fn mul(self, other: Self) -> Self {
        Self {
            length: self.length.saturating_add(other.length),
            mass: self.mass.saturating_add(other.mass),
            time: self.time.saturating_add(other.time),
            temperature: self.temperature.saturating_add(other.temperature),
            angle: self.angle.saturating_add(other.angle),
        }
    }
}

impl Div for Dimension {
    type Output = Self;
    fn div(self, other: Self) -> Self {
        self * other.power(-1)
    }
}
