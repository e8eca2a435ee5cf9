//! Section properties from geometry.
//!
//! Axes: local y and z through the centroid, z up, y = z × x (members' local axes seen against +x:
//! y points left, z up). All values SI.

use indexmap::IndexMap;

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
    /// Elastic section moduli (least), m³.
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
}

impl Properties {
    /// Principal second moments (I_u ≥ I_v) and the angle α from local y to axis u, rad,
    /// right-handed about +x.
    #[must_use]
    pub fn principal(&self) -> (f64, f64, f64) {
        todo!()
    }

    /// Overall depth along z, m.
    #[must_use]
    pub fn depth(&self) -> Option<f64> {
        Some(self.z_top? + self.z_bottom?)
    }
}
