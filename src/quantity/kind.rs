//! What a value is: a length of a member, a deflection, a line load.

use super::Dimension;

/// What a value is: decides the unit it prints in and the dimension it must have when read.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Kind {
    /// Plain number.
    Number,
    /// Member lengths, coordinates, positions along members.
    Length,
    /// Dimensions of sections.
    SectionLength,
    Area,
    SecondMoment,
    SectionModulus,
    /// Warping constant, length⁶.
    Warping,
    /// Displacements and deflections.
    Deflection,
    /// Rotations of nodes and cross-sections.
    Rotation,
    /// Angles of geometry: `rotate`, `turned`.
    Angle,
    Force,
    Moment,
    LineLoad,
    AreaLoad,
    Stress,
    /// Young's and shear moduli.
    Modulus,
    MassDensity,
    WeightDensity,
    Temperature,
    Expansion,
    /// Spring against displacement, force per length.
    Spring,
    /// Spring against rotation, moment per angle.
    RotationSpring,
    /// Work and strain energy.
    Energy,
}

/// What is fixed about a kind.
struct Facts {
    name: &'static str,
    description: &'static str,
    dimension: Dimension,
    si: &'static str,
    us: &'static str,
}

impl Kind {
    /// All kinds, in printing order.
    pub const ALL: [Self; 23] = [
        Self::Number,
        Self::Length,
        Self::SectionLength,
        Self::Area,
        Self::SecondMoment,
        Self::SectionModulus,
        Self::Warping,
        Self::Deflection,
        Self::Rotation,
        Self::Angle,
        Self::Force,
        Self::Moment,
        Self::LineLoad,
        Self::AreaLoad,
        Self::Stress,
        Self::Modulus,
        Self::MassDensity,
        Self::WeightDensity,
        Self::Temperature,
        Self::Expansion,
        Self::Spring,
        Self::RotationSpring,
        Self::Energy,
    ];

    /// The word in the `units` block and in records, e.g. `moment`, `section_length`.
    #[must_use]
    pub const fn name(self) -> &'static str {
        self.facts().name
    }

    /// The kind of a word.
    #[must_use]
    pub fn from_name(name: &str) -> Option<Self> {
        Self::ALL.into_iter().find(|kind| kind.name() == name)
    }

    /// With its article, for messages, e.g. `a force per length`.
    #[must_use]
    pub const fn description(self) -> &'static str {
        self.facts().description
    }

    /// The dimension a value of this kind has.
    #[must_use]
    pub const fn dimension(self) -> Dimension {
        self.facts().dimension
    }

    /// The unit it prints in under SI unless the project says otherwise.
    #[must_use]
    pub(super) const fn usual_unit(self) -> &'static str {
        self.facts().si
    }

    /// The unit it prints in under US customary units unless the project says otherwise.
    #[must_use]
    pub(super) const fn usual_unit_us(self) -> &'static str {
        self.facts().us
    }

    #[rustfmt::skip]
    const fn facts(self) -> Facts {
        match self {
            Self::Number => facts("number", "a plain number", Dimension::NONE, "", ""),
            Self::Length => facts("length", "a length", Dimension::LENGTH, "m", "ft"),
            Self::SectionLength => facts("section_length", "a length", Dimension::LENGTH, "mm", "in"),
            Self::Area => facts("area", "an area", Dimension::AREA, "cm²", "in²"),
            Self::SecondMoment => facts("second_moment", "a second moment of area", Dimension::SECOND_MOMENT, "cm⁴", "in⁴"),
            Self::SectionModulus => facts("section_modulus", "a section modulus", Dimension::VOLUME, "cm³", "in³"),
            Self::Warping => facts("warping", "a warping constant", Dimension::WARPING, "cm⁶", "in⁶"),
            Self::Deflection => facts("deflection", "a length", Dimension::LENGTH, "mm", "in"),
            Self::Rotation => facts("rotation", "an angle", Dimension::ANGLE, "mrad", "mrad"),
            Self::Angle => facts("angle", "an angle", Dimension::ANGLE, "°", "°"),
            Self::Force => facts("force", "a force", Dimension::FORCE, "kN", "kip"),
            Self::Moment => facts("moment", "a moment", Dimension::MOMENT, "kN m", "kip ft"),
            Self::LineLoad => facts("line_load", "a force per length", Dimension::LINE_LOAD, "kN/m", "kip/ft"),
            Self::AreaLoad => facts("area_load", "a force per area", Dimension::PRESSURE, "kN/m²", "psf"),
            Self::Stress => facts("stress", "a stress", Dimension::PRESSURE, "MPa", "ksi"),
            Self::Modulus => facts("modulus", "a modulus of elasticity", Dimension::PRESSURE, "GPa", "ksi"),
            Self::MassDensity => facts("mass_density", "a density", Dimension::MASS_DENSITY, "kg/m³", "lbm/ft³"),
            Self::WeightDensity => facts("weight_density", "a force per volume", Dimension::WEIGHT_DENSITY, "kN/m³", "lb/ft³"),
            Self::Temperature => facts("temperature", "a temperature difference", Dimension::TEMPERATURE, "K", "°F"),
            Self::Expansion => facts("expansion", "a coefficient of expansion", Dimension::EXPANSION, "/K", "/°F"),
            Self::Spring => facts("spring", "a force per length", Dimension::LINE_LOAD, "kN/m", "kip/in"),
            Self::RotationSpring => facts("rotation_spring", "a moment per angle", Dimension::ROTATION_SPRING, "kN m/rad", "kip ft/rad"),
            Self::Energy => facts("energy", "an energy", Dimension::MOMENT, "J", "ft lb"),
        }
    }
}

const fn facts(
    name: &'static str,
    description: &'static str,
    dimension: Dimension,
    si: &'static str,
    us: &'static str,
) -> Facts {
    Facts { name, description, dimension, si, us }
}
