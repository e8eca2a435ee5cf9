//! The fixed words of the project file and what each stands for.

use crate::model::{
    DeflectionFrom, Direction, Duration, Frame, MomentSide, Nature, Paper, Per, Purpose, Shows,
    SpanLoading,
};
use crate::project::text::Words;
use crate::quantity::System;

macro_rules! words {
    ($($type:ty: $name:literal, $description:literal { $($word:literal => $is:expr),* $(,)? })*) => {$(
        impl Words for $type {
            const NAME: &'static str = $name;
            const DESCRIPTION: &'static str = $description;
            const WORDS: &'static [(&'static str, Self)] = &[$(($word, $is)),*];
        }
    )*};
}

/// Declares an enum that only the written file knows.
macro_rules! plain {
    ($($(#[$doc:meta])* $name:ident { $($variant:ident),* $(,)? })*) => {$(
        $(#[$doc])*
        #[derive(Clone, Copy, Debug, PartialEq, Eq)]
        pub enum $name { $($variant),* }
    )*};
}

plain! {
    /// Order of the analysis.
    Order { First }
    /// Imperfections of the analysis.
    Imperfections { None }
    /// State of an assumption.
    Status { ToConfirm, Confirmed }
    /// Whole sets of members to draw.
    DrawWord { All, Governing }
    /// The axes of a hand-given section are meant as they stand.
    AsWritten { AsWritten }
    /// An edge held over its whole length.
    Continuous { Continuous }
    /// A consequence that the engineer has accepted.
    Accepted { Accepted }
    /// The support is anchored against lifting.
    Anchored { Anchored }
    /// Named kinds of support.
    SupportKind { Pinned, Fork, Fixed }
    /// A global axis.
    Axis { X, Y, Z }
    /// Every one of a kind.
    AllWord { All }
    /// The part of a combination that counts.
    Only { Variable }
    /// Which combinations are made of a rule.
    Expansion { AllSubsets, Maximal, AsWritten }
    /// What happens to combinations that can never govern.
    Dominated { Keep, Drop }
    /// Chapters that narrative can follow.
    Chapter { Cover, Summary, Basis, Model, Actions, Combinations, Effects, Checks, SelfCheck, Deferred }
    /// Shapes that sections are made of.
    ShapeKind { Rectangle, Circle, Tube, RectangularHollow, I, UnequalI, Channel, Angle, T, Polygon }
}

/// The combinations that a check is made for.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum CheckPurpose {
    One(Purpose),
    /// Characteristic, frequent and quasi-permanent.
    Service,
}

const fn global(axis: usize, sign: i8) -> Direction {
    Direction::Global { axis, sign }
}

const fn local(axis: usize, sign: i8) -> Direction {
    Direction::Local { axis, sign }
}

words! {
    Order: "Order", "Order of the analysis." { "first" => Self::First }
    Imperfections: "Imperfections", "Imperfections that the analysis counts." { "none" => Self::None }
    Status: "Status", "Whether an assumption has been confirmed." {
        "to confirm" => Self::ToConfirm, "confirmed" => Self::Confirmed,
    }
    DrawWord: "DrawWord", "Whose effects the package draws." {
        "all" => Self::All, "governing" => Self::Governing,
    }
    AsWritten: "AsWritten", "The axes are meant as written, even where I_y is less than I_z." {
        "as written" => Self::AsWritten,
    }
    Continuous: "Continuous", "Held over the full length." { "continuous" => Self::Continuous }
    Accepted: "Accepted", "The engineer accepts this." { "accepted" => Self::Accepted }
    Anchored: "Anchored", "Anchored against lifting." { "anchored" => Self::Anchored }
    SupportKind: "SupportKind", "pinned: no movement; fork: pinned and no twist; fixed: no movement, no rotation." {
        "pinned" => Self::Pinned, "fork" => Self::Fork, "fixed" => Self::Fixed,
    }
    Axis: "Axis", "A global axis." { "X" => Self::X, "Y" => Self::Y, "Z" => Self::Z }
    ShapeKind: "ShapeKind", "Shape of a cross-section." {
        "rectangle" => Self::Rectangle, "circle" => Self::Circle, "tube" => Self::Tube,
        "rectangular hollow" => Self::RectangularHollow, "I" => Self::I, "unequal I" => Self::UnequalI,
        "channel" => Self::Channel, "angle" => Self::Angle, "T" => Self::T, "polygon" => Self::Polygon,
    }
    System: "System", "System of units." { "SI" => Self::Si, "US" => Self::Us }
    Frame: "Frame", "plane: nodes [x, z]; space: nodes [x, y, z]." {
        "plane" => Self::Plane, "space" => Self::Space,
    }
    MomentSide: "MomentSide", "Side on which moment diagrams are drawn." {
        "tension side" => Self::Tension, "compression side" => Self::Compression,
    }
    Paper: "Paper", "Sheet of the printed package." { "A4" => Self::A4, "Letter" => Self::Letter }
    Per: "Per", "What a line load counts per: length of the member, or its projection at right angles to the load." {
        "length" => Self::Length, "projected" => Self::Projected,
    }
    Direction: "Direction", "Global axes bare, the member's own axes with `local`." {
        "down" => Self::DOWN, "up" => global(2, 1),
        "+X" => global(0, 1), "X" => global(0, 1), "-X" => global(0, -1),
        "+Y" => global(1, 1), "Y" => global(1, 1), "-Y" => global(1, -1),
        "+Z" => global(2, 1), "Z" => global(2, 1), "-Z" => global(2, -1),
        "local +x" => local(0, 1), "local x" => local(0, 1), "local -x" => local(0, -1),
        "local +y" => local(1, 1), "local y" => local(1, 1), "local -y" => local(1, -1),
        "local +z" => local(2, 1), "local z" => local(2, 1), "local -z" => local(2, -1),
    }
    Nature: "Nature", "Nature of an action, in the words of the standards." {
        "permanent" => Self::Permanent, "dead" => Self::Permanent,
        "imposed" => Self::Imposed, "live" => Self::Imposed,
        "roof live" => Self::RoofLive, "snow" => Self::Snow, "rain" => Self::Rain, "wind" => Self::Wind,
        "thermal" => Self::Thermal, "fluid" => Self::Fluid, "earth" => Self::Earth,
        "settlement" => Self::Settlement, "accidental" => Self::Accidental,
        "seismic horizontal" => Self::SeismicHorizontal, "seismic vertical" => Self::SeismicVertical,
        "construction" => Self::Construction,
    }
    Duration: "Duration", "Load duration class, for timber." {
        "permanent" => Self::Permanent, "long" => Self::Long, "medium" => Self::Medium,
        "short" => Self::Short, "instantaneous" => Self::Instantaneous,
    }
    Expansion: "Expansion", "Which combinations are made of a rule." {
        "all subsets" => Self::AllSubsets, "maximal" => Self::Maximal, "as written" => Self::AsWritten,
    }
    Dominated: "Dominated", "What happens to combinations that can never govern." {
        "keep" => Self::Keep, "drop" => Self::Drop,
    }
    SpanLoading: "SpanLoading", "Which spans can be loaded together." {
        "true" => Self::Any, "alternate and adjacent" => Self::AlternateAndAdjacent,
        "alternate" => Self::Alternate,
    }
    AllWord: "All", "Every one." { "all" => Self::All }
    Only: "Only", "The part of each combination that counts." { "variable" => Self::Variable }
    DeflectionFrom: "DeflectionFrom", "What deflections are measured from." {
        "chord" => Self::Chord, "undeformed" => Self::Undeformed,
        "support tangent" => Self::SupportTangent,
    }
    Shows: "Shows", "What a check shows." {
        "strength" => Self::Strength, "stability" => Self::Stability, "deflection" => Self::Deflection,
        "equilibrium" => Self::Equilibrium, "bearing" => Self::Bearing, "other" => Self::Other,
    }
    Chapter: "Chapter", "A chapter of the package." {
        "cover" => Self::Cover, "summary" => Self::Summary, "basis" => Self::Basis,
        "model" => Self::Model, "actions" => Self::Actions, "combinations" => Self::Combinations,
        "effects" => Self::Effects, "checks" => Self::Checks, "self-check" => Self::SelfCheck,
        "deferred" => Self::Deferred,
    }
    CheckPurpose: "CheckPurpose", "The combinations that a check is made for." {
        "strength" => Self::One(Purpose::Strength), "equilibrium" => Self::One(Purpose::Equilibrium),
        "ground" => Self::One(Purpose::Ground), "accidental" => Self::One(Purpose::Accidental),
        "seismic" => Self::One(Purpose::Seismic), "fire" => Self::One(Purpose::Fire),
        "allowable" => Self::One(Purpose::Allowable),
        "characteristic" => Self::One(Purpose::Characteristic),
        "frequent" => Self::One(Purpose::Frequent),
        "quasi-permanent" => Self::One(Purpose::QuasiPermanent), "service" => Self::Service,
    }
    Purpose: "Purpose", "What a combination is for." {
        "strength" => Self::Strength, "equilibrium" => Self::Equilibrium, "ground" => Self::Ground,
        "accidental" => Self::Accidental, "seismic" => Self::Seismic, "fire" => Self::Fire,
        "allowable" => Self::Allowable, "characteristic" => Self::Characteristic,
        "frequent" => Self::Frequent, "quasi-permanent" => Self::QuasiPermanent,
    }
}
