//! The effects along a member, named once for the whole program.

use crate::quantity::Kind;

/// An effect along a member in its local axes; signs as in the design page's conventions:
/// N tension positive, M_y sagging (tension on −z) positive, dM_y/dx = V_z.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Effect {
    N,
    Vy,
    Vz,
    T,
    My,
    Mz,
    U,
    V,
    W,
    ThetaX,
    ThetaY,
    ThetaZ,
    /// Deflection along y from the chord of the span.
    Dy,
    /// Deflection along z from the chord of the span.
    Dz,
}

/// All effects, in the order in which they are stored and printed.
pub const EFFECTS: [Effect; 14] = [
    Effect::N,
    Effect::Vy,
    Effect::Vz,
    Effect::T,
    Effect::My,
    Effect::Mz,
    Effect::U,
    Effect::V,
    Effect::W,
    Effect::ThetaX,
    Effect::ThetaY,
    Effect::ThetaZ,
    Effect::Dy,
    Effect::Dz,
];

/// The six internal forces, the first six of [`EFFECTS`].
pub const FORCES: usize = 6;
/// Effects written to record.json; `d_y` and `d_z` follow from the others.
pub const STORED: usize = 12;

impl Effect {
    /// Position in [`EFFECTS`].
    #[must_use]
    pub const fn index(self) -> usize {
        self as usize
    }

    /// The name in records, formulas, templates and the terminal.
    #[must_use]
    pub const fn name(self) -> &'static str {
        match self {
            Self::N => "N",
            Self::Vy => "V_y",
            Self::Vz => "V_z",
            Self::T => "T",
            Self::My => "M_y",
            Self::Mz => "M_z",
            Self::U => "u",
            Self::V => "v",
            Self::W => "w",
            Self::ThetaX => "theta_x",
            Self::ThetaY => "theta_y",
            Self::ThetaZ => "theta_z",
            Self::Dy => "d_y",
            Self::Dz => "d_z",
        }
    }

    /// What its values are: decides the unit they print in.
    #[must_use]
    pub const fn kind(self) -> Kind {
        match self {
            Self::N | Self::Vy | Self::Vz => Kind::Force,
            Self::T | Self::My | Self::Mz => Kind::Moment,
            Self::U | Self::V | Self::W | Self::Dy | Self::Dz => Kind::Deflection,
            Self::ThetaX | Self::ThetaY | Self::ThetaZ => Kind::Rotation,
        }
    }

    /// 0 for forces, 1 for moments, 2 for displacements and deflections, 3 for rotations: effects of a
    /// group are of one kind and can be compared.
    #[must_use]
    pub const fn group(self) -> usize {
        match self {
            Self::N | Self::Vy | Self::Vz => 0,
            Self::T | Self::My | Self::Mz => 1,
            Self::U | Self::V | Self::W | Self::Dy | Self::Dz => 2,
            Self::ThetaX | Self::ThetaY | Self::ThetaZ => 3,
        }
    }

    /// The effect of a name.
    #[must_use]
    pub fn from_name(name: &str) -> Option<Self> {
        EFFECTS.into_iter().find(|effect| effect.name() == name)
    }
}

/// Which side of a jump along a member: just before it (towards the start) or just after.
#[derive(
    Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, serde::Serialize, serde::Deserialize,
)]
#[serde(rename_all = "lowercase")]
pub enum Side {
    Before,
    After,
}
