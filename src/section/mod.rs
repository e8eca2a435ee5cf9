//! Section properties from geometry.
//!
//! Axes: local y and z through the centroid, z up, y = z × x: looking along +x, y points left; looking
//! against +x, right. y-y is the major axis of an upright I, H, rectangle or channel. All values SI.
//!
//! Lie of the shapes that are not symmetric: a channel has its web on the -y side and its flanges
//! pointing to +y; an angle has its heel at -y, -z, its `width` leg along +y and its `depth` leg along
//! +z (so I_yz < 0); a T has its flange on top (+z).
//!
//! Areas, second moments, elastic and plastic moduli are exact for the nominal shape, fillets included.
//! Torsion and warping constants and shear areas follow published approximations, each named in
//! [`Methods`]. Nothing here knows tables or materials.

mod closed;
mod edge;
mod integral;
mod open;
mod polygon;
mod shape;
mod shear;
mod torsion;

pub use open::european_i_torsion;
pub use shape::{Shape, ShapeError, Taper};

use std::f64::consts::FRAC_PI_2;

use indexmap::IndexMap;

use crate::quantity::Kind;

/// Closed loops of (y, z) about the centroid; the first is the outer edge, the others are holes.
/// For drawing and for polygon integration.
pub type Outline = Vec<Vec<[f64; 2]>>;

/// Properties of a cross-section about axes through its centroid. `None`: not known.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Properties {
    /// m².
    pub area: f64,
    /// ∫ z² dA, m⁴: about local y.
    pub i_y: f64,
    /// ∫ y² dA, m⁴.
    pub i_z: f64,
    /// ∫ y z dA, m⁴.
    pub i_yz: f64,
    /// St Venant torsion constant, m⁴.
    pub i_t: f64,
    /// Warping constant, m⁶.
    pub i_w: Option<f64>,
    /// Elastic section moduli, second moment over the farther fibre, m³.
    pub w_el_y: Option<f64>,
    pub w_el_z: Option<f64>,
    /// Plastic section moduli, m³.
    pub w_pl_y: Option<f64>,
    pub w_pl_z: Option<f64>,
    /// Shear areas for deformation along y and z, m²; `None`: shear deformation does not count.
    pub a_sy: Option<f64>,
    pub a_sz: Option<f64>,
    /// Shear areas for resistance along y and z, m².
    pub a_vy: Option<f64>,
    pub a_vz: Option<f64>,
    /// Distance from the centroid to the extreme fibres: top +z, bottom −z, m (positive).
    pub z_top: Option<f64>,
    pub z_bottom: Option<f64>,
    /// Likewise +y and −y.
    pub y_plus: Option<f64>,
    pub y_minus: Option<f64>,
    /// Shear centre from the centroid (y, z), m.
    pub shear_centre: Option<[f64; 2]>,
    /// Nominal dimensions by symbol (`h`, `b`, `t_w`, `t_f`, `r`, `d`, `t`), m.
    pub dimensions: IndexMap<String, f64>,
    pub outline: Outline,
    pub methods: Methods,
    /// `rectangle`, `circle`, `tube`, `rectangular hollow`, `I`, `unequal I`, `channel`, `angle`, `T` or
    /// `polygon`; empty where only properties are known.
    pub form: &'static str,
}

/// How the values that are not exact were found, as text for the Basis chapter. `None`: not known, or
/// given by hand.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Methods {
    /// I_t.
    pub torsion: Option<&'static str>,
    /// I_w and the shear centre.
    pub warping: Option<&'static str>,
    /// A_sy, A_sz.
    pub shear_area: Option<&'static str>,
    /// A_vy, A_vz.
    pub shear_resistance: Option<&'static str>,
}

/// Text for [`Methods::torsion`] where [`european_i_torsion`] is used.
pub const EUROPEAN_TORSION: &str = torsion::EUROPEAN;

impl Methods {
    /// Those that are known, as sentences in a fixed order.
    pub fn texts(&self) -> impl Iterator<Item = &'static str> {
        [self.torsion, self.warping, self.shear_area, self.shear_resistance].into_iter().flatten()
    }
}

impl Properties {
    /// Principal second moments (I_u ≥ I_v) and the angle α from local y to axis u, rad,
    /// right-handed about +x.
    #[must_use]
    pub fn principal(&self) -> (f64, f64, f64) {
        let mean = (self.i_y + self.i_z) / 2.0;
        let half = (self.i_y - self.i_z) / 2.0;
        let radius = libm::hypot(half, self.i_yz);
        // A round or square section: every axis is principal, and the local ones serve.
        if radius <= 1e-12 * mean {
            return (self.i_y, self.i_z, 0.0);
        }
        let angle = if self.i_yz == 0.0 {
            if half > 0.0 { 0.0 } else { FRAC_PI_2 }
        } else {
            libm::atan2(-self.i_yz, half) / 2.0
        };
        (mean + radius, mean - radius, angle)
    }

    /// The local axes are not principal axes: bending about y also moves the section sideways.
    #[must_use]
    pub fn is_skew(&self) -> bool {
        self.i_yz.abs() > 1e-9 * (self.i_y + self.i_z)
    }

    /// Radii of gyration about y and z, m.
    #[must_use]
    pub fn radii(&self) -> [f64; 2] {
        [self.i_y, self.i_z].map(|second| libm::sqrt(second / self.area))
    }

    /// Every known value by symbol, with what it is, in printing order; I_yz and the principal values
    /// only where the local axes are not principal.
    #[must_use]
    pub fn by_symbol(&self) -> Vec<(&'static str, Kind, f64)> {
        let (i_u, i_v, alpha) = self.principal();
        let skew = |value| self.is_skew().then_some(value);
        let [i_y, i_z] = self.radii();
        let [y_s, z_s] = [0, 1].map(|k| self.shear_centre.map(|centre| centre[k]));
        [
            ("A", Kind::Area, Some(self.area)),
            ("I_y", Kind::SecondMoment, Some(self.i_y)),
            ("I_z", Kind::SecondMoment, Some(self.i_z)),
            ("I_t", Kind::SecondMoment, Some(self.i_t)),
            ("I_w", Kind::Warping, self.i_w),
            ("I_yz", Kind::SecondMoment, skew(self.i_yz)),
            ("I_u", Kind::SecondMoment, skew(i_u)),
            ("I_v", Kind::SecondMoment, skew(i_v)),
            ("alpha", Kind::Angle, skew(alpha)),
            ("W_el_y", Kind::SectionModulus, self.w_el_y),
            ("W_el_z", Kind::SectionModulus, self.w_el_z),
            ("W_pl_y", Kind::SectionModulus, self.w_pl_y),
            ("W_pl_z", Kind::SectionModulus, self.w_pl_z),
            ("i_y", Kind::SectionLength, Some(i_y)),
            ("i_z", Kind::SectionLength, Some(i_z)),
            ("A_sy", Kind::Area, self.a_sy),
            ("A_sz", Kind::Area, self.a_sz),
            ("A_vy", Kind::Area, self.a_vy),
            ("A_vz", Kind::Area, self.a_vz),
            ("z_top", Kind::SectionLength, self.z_top),
            ("z_bottom", Kind::SectionLength, self.z_bottom),
            ("y_plus", Kind::SectionLength, self.y_plus),
            ("y_minus", Kind::SectionLength, self.y_minus),
            ("y_s", Kind::SectionLength, y_s),
            ("z_s", Kind::SectionLength, z_s),
        ]
        .into_iter()
        .filter_map(|(symbol, kind, value)| Some((symbol, kind, value?)))
        .collect()
    }

    /// Overall depth along z, m.
    #[must_use]
    pub fn depth(&self) -> Option<f64> {
        Some(self.z_top? + self.z_bottom?)
    }

    /// Thickest part, which decides on strengths that depend on it, m; `None` where dimensions are not known.
    #[must_use]
    pub fn thickest(&self) -> Option<f64> {
        let parts: &[&str] = match self.form {
            // A bar is as thick as it is slender.
            "rectangle" => return Some(self.depth()?.min(self.width()?)),
            "circle" => return self.depth(),
            _ => &["t", "t_f", "t_f_top", "t_f_bottom", "t_w"],
        };
        let known = parts.iter().filter_map(|part| self.dimensions.get(*part).copied());
        known.reduce(f64::max)
    }

    /// Overall width along y, m.
    #[must_use]
    pub fn width(&self) -> Option<f64> {
        Some(self.y_plus? + self.y_minus?)
    }
}
