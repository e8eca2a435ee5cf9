//! Ids of drawings, words for effects, and what is drawn of them.

use crate::model::Effect;

/// So many combinations are drawn one by one.
pub(super) const COMBINATIONS: usize = 40;
/// Up to this share of the greatest value of its kind an effect is round-off and not drawn.
pub(super) const NOTHING: f64 = 1e-9;

/// A moment drawn on the tension or the compression side.
pub(super) const fn is_bending(effect: Effect) -> bool {
    matches!(effect, Effect::My | Effect::Mz)
}

/// A name as part of an id: lower case; different names never give the same part, nor do joined parts
/// (they are joined by `.`, which no part holds).
pub(super) fn slug(name: &str) -> String {
    let mut out = String::new();
    for c in name.chars() {
        match c {
            ' ' => out.push('-'),
            '-' => out.push_str("_-"),
            '_' => out.push_str("__"),
            '.' => out.push_str("_d"),
            _ => out.extend(c.to_lowercase()),
        }
    }
    out
}

/// What an effect is called in captions.
pub(super) const fn words(effect: Effect) -> &'static str {
    match effect {
        Effect::N => "axial force N",
        Effect::Vy => "shear force V_y",
        Effect::Vz => "shear force V_z",
        Effect::T => "torsional moment T",
        Effect::My => "bending moment M_y",
        Effect::Mz => "bending moment M_z",
        Effect::U => "displacement u",
        Effect::V => "displacement v",
        Effect::W => "displacement w",
        Effect::ThetaX => "rotation theta_x",
        Effect::ThetaY => "rotation theta_y",
        Effect::ThetaZ => "rotation theta_z",
        Effect::Dy => "deflection d_y",
        Effect::Dz => "deflection d_z",
    }
}
