//! Units, the two systems of units, and which unit prints which kind of value.

use super::Dimension;

/// One unit with its factor to SI base units.
#[derive(Clone, Debug, PartialEq)]
pub struct Unit {
    /// As printed, e.g. `kN m`, `mm²`, `°`.
    pub label: String,
    /// SI base units in one of this unit.
    pub factor: f64,
    pub dimension: Dimension,
}

/// System of units for printing.
#[derive(Clone, Copy, Debug, PartialEq, Eq, serde::Serialize, serde::Deserialize)]
pub enum System {
    #[serde(rename = "SI")]
    Si,
    #[serde(rename = "US")]
    Us,
}

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

/// The unit of every kind.
#[derive(Clone, Debug, PartialEq)]
pub struct Units {
    pub system: System,
    // one unit a kind
    units: std::collections::BTreeMap<Kind, Unit>,
}
