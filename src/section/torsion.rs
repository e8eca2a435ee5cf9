//! St Venant torsion constants from published formulas, m⁴.

use std::f64::consts::PI;

/// Of [`rectangle`].
pub(super) const RECTANGLE: &str =
    "I_t by the series for a rectangle (Timoshenko and Goodier, Theory of Elasticity)";
/// Of a circle or tube.
pub(super) const ROUND: &str = "I_t = I_y + I_z, exact for a circle or circular tube";
/// Of [`hollow`].
pub(super) const HOLLOW: &str = "I_t by EN 10210-2, Annex A (mean line, exact corner radii)";
/// Of [`european_joint`].
pub(super) const EUROPEAN: &str = "I_t by the formula of the European section tables (EN 10365): flanges, web and the circle inscribed at each junction";
/// Of the junction formulas.
pub(super) const JUNCTION: &str = "I_t after El Darwish and Johnston (1965): flanges, web and the circle inscribed at each junction, less the free ends";
/// Of [`compact`].
pub(super) const COMPACT: &str = "I_t ≈ A⁴ / (40 (I_y + I_z)), Saint-Venant's approximation for a solid compact section; too small for slender walls";

/// What a free end of a wall takes away, times its thickness to the fourth.
pub(super) const FREE_END: f64 = 0.105;

/// A solid rectangle: ab³/3 (1 - 192 b/(π⁵ a) Σ tanh(nπa/2b)/n⁵), n = 1, 3, 5 …, a ≥ b.
pub(super) fn rectangle(width: f64, depth: f64) -> f64 {
    let (a, b) = (width.max(depth), width.min(depth));
    // The terms fall with n⁵: after n = 99 less than 1e-10 of the first is left.
    let sum: f64 = std::iter::successors(Some(1.0), |n| Some(n + 2.0))
        .take(50)
        .map(|n: f64| libm::tanh(n * PI * a / (2.0 * b)) / (n * n * n * n * n))
        .sum();
    a * b * b * b / 3.0 * (1.0 - 192.0 * b / (PI * PI * PI * PI * PI * a) * sum)
}

/// A rectangular hollow section: I_t = t³ h/3 + 4 A_h² t/h with h the length of the mean line and A_h
/// the area within (EN 10210-2:2006, Annex A).
pub(super) fn hollow(width: f64, depth: f64, t: f64, mean_radius: f64) -> f64 {
    let (b, h) = (width - t, depth - t);
    let line = 2.0 * (b + h) - 2.0 * mean_radius * (4.0 - PI);
    let enclosed = b * h - mean_radius * mean_radius * (4.0 - PI);
    t * t * t * line / 3.0 + 4.0 * enclosed * enclosed * t / line
}

/// A compact section without holes: A⁴ / (40 I_p).
pub(super) fn compact(area: f64, polar: f64) -> f64 {
    area * area * area * area / (40.0 * polar)
}

/// Share of a flange `b` × `t` and its junction with a web `w` in the European tables:
/// (b - 0.63 t) t³/3 + (w/t)(0.145 + 0.1 r/t) D⁴.
pub(super) fn european_joint(b: f64, t: f64, w: f64, r: f64) -> f64 {
    let d = ((r + w / 2.0) * (r + w / 2.0) + (r + t) * (r + t) - r * r) / (2.0 * r + t);
    (b - 0.63 * t) * t * t * t / 3.0 + w / t * (0.145 + 0.1 * r / t) * d * d * d * d
}

/// Share of a flange and its T-junction: b t³/3 + α D⁴ - 0.21 t⁴ (two free ends of 0.105 t⁴).
pub(super) fn t_joint(b: f64, t: f64, w: f64, r: f64) -> f64 {
    let alpha = -0.042 + 0.2204 * w / t + 0.1355 * r / t
        - 0.0865 * w * r / (t * t)
        - 0.0725 * w * w / (t * t);
    let d = ((t + r) * (t + r) + (r + w / 4.0) * w) / (2.0 * r + t);
    b * t * t * t / 3.0 + alpha * d * d * d * d - 0.21 * t * t * t * t
}

/// Share of a flange and its L-junction with the edge of a web, likewise: b t³/3 + α D⁴ - 0.21 t⁴.
pub(super) fn l_joint(b: f64, t: f64, w: f64, r: f64) -> f64 {
    let alpha = -0.0908 + 0.2621 * w / t + 0.1231 * r / t
        - 0.0752 * w * r / (t * t)
        - 0.0945 * w * w / (t * t);
    let d = 2.0 * (3.0 * r + w + t - libm::sqrt(2.0 * (2.0 * r + w) * (2.0 * r + t)));
    b * t * t * t / 3.0 + alpha * d * d * d * d - 0.21 * t * t * t * t
}
