//! Open sections of flanges, webs and legs: I, T, channel, angle.

use super::closed::symbols;
use super::edge::{self, Edge, Point};
use super::shape::{ShapeError, Taper, below, positive, radius};
use super::{Methods, Properties, integral, torsion};

pub(super) struct ISection {
    pub depth: f64,
    pub web: f64,
    /// Top, bottom.
    pub widths: [f64; 2],
    pub flanges: [f64; 2],
    pub root_radius: Option<f64>,
    /// Both flanges are given by the same keys.
    pub equal: bool,
}

/// I_t of an I with equal flanges by the formula of the European section tables.
#[must_use]
pub fn european_i_torsion(depth: f64, width: f64, web: f64, flange: f64, root_radius: f64) -> f64 {
    2.0 * torsion::european_joint(width, flange, web, root_radius)
        + (depth - 2.0 * flange) * web * web * web / 3.0
}

pub(super) fn i_section(s: &ISection) -> Result<Properties, ShapeError> {
    let keys = if s.equal {
        [("width", "flange"), ("width", "flange")]
    } else {
        [("top_width", "top_flange"), ("bottom_width", "bottom_flange")]
    };
    positive("depth", s.depth)?;
    positive("web", s.web)?;
    for (i, (width, flange)) in keys.into_iter().enumerate() {
        positive(width, s.widths[i])?;
        positive(flange, s.flanges[i])?;
        below("web", s.web, s.widths[i], &format!("the `{width}`"))?;
    }
    let [top, bottom] = s.flanges;
    below(keys[0].1, top + bottom, s.depth, "what the `depth` leaves for both flanges")?;
    let r = radius("root_radius", s.root_radius)?;
    let (h, w, [b1, b2]) = (s.depth, s.web / 2.0, s.widths.map(|width| width / 2.0));
    let (under, over) = (h - top, bottom);
    let section = integral::properties(&[around(&[
        ([-b2, 0.0], 0.0),
        ([b2, 0.0], 0.0),
        ([b2, over], 0.0),
        ([w, over], r),
        ([w, under], r),
        ([b1, under], 0.0),
        ([b1, h], 0.0),
        ([-b1, h], 0.0),
        ([-b1, under], 0.0),
        ([-w, under], r),
        ([-w, over], r),
        ([-b2, over], 0.0),
    ])?]);
    let clear = h - top - bottom;
    let arm = h - (top + bottom) / 2.0;
    // Second moments of the flanges about z: they carry the warping.
    let [i1, i2] = [0, 1].map(|i| s.flanges[i] * cubed(s.widths[i]) / 12.0);
    let from_top = top / 2.0 + arm * i2 / (i1 + i2);
    let flanges = 2.0 * b1 * top + 2.0 * b2 * bottom;
    let web_area = clear * s.web;
    let (a_vz, shear_resistance) = if r > 0.0 {
        let rolled = section.area - flanges + (s.web + 2.0 * r) * top.min(bottom);
        (
            rolled.max(web_area),
            "A_vz = A - 2 b t_f + (t_w + 2 r) t_f, at least η h_w t_w, η = 1.0 (EN 1993-1-1, 6.2.6(3)a); A_vy = both flanges (common practice, no source)",
        )
    } else {
        (web_area, "A_vz = η h_w t_w, η = 1.0; A_vy = A - h_w t_w (EN 1993-1-1, 6.2.6(3)d, e)")
    };
    Ok(Properties {
        i_t: torsion::t_joint(2.0 * b1, top, s.web, r)
            + torsion::t_joint(2.0 * b2, bottom, s.web, r)
            + clear * cubed(s.web) / 3.0,
        i_w: Some(arm * arm * i1 * i2 / (i1 + i2)),
        a_sy: Some(5.0 / 6.0 * flanges),
        a_sz: Some(arm * s.web),
        a_vy: Some(flanges),
        a_vz: Some(a_vz),
        shear_centre: section
            .z_top
            .map(|z_top| [0.0, if s.equal { 0.0 } else { z_top - from_top }]),
        dimensions: if s.equal {
            symbols([("h", h), ("b", 2.0 * b1), ("t_w", s.web), ("t_f", top), ("r", r)])
        } else {
            symbols([
                ("h", h),
                ("t_w", s.web),
                ("b_top", 2.0 * b1),
                ("t_f_top", top),
                ("b_bottom", 2.0 * b2),
                ("t_f_bottom", bottom),
                ("r", r),
            ])
        },
        methods: Methods {
            torsion: Some(torsion::JUNCTION),
            warping: Some(
                "I_w = h_s² I_1 I_2/(I_1 + I_2), I_1 and I_2 of the flanges about z, h_s between their mid-lines; with equal flanges t_f b³ h_s²/24 (Vlasov)",
            ),
            shear_area: Some(
                "A_sz = h_s t_w, the web between the mid-lines of the flanges (common practice, no source); A_sy = 5/6 of both flanges (Timoshenko, as rectangles)",
            ),
            shear_resistance: Some(shear_resistance),
        },
        ..section
    })
}

pub(super) fn t_section(
    depth: f64,
    width: f64,
    web: f64,
    flange: f64,
    root_radius: Option<f64>,
) -> Result<Properties, ShapeError> {
    positive("depth", depth)?;
    positive("width", width)?;
    positive("web", web)?;
    positive("flange", flange)?;
    below("web", web, width, "the `width`")?;
    below("flange", flange, depth, "the `depth`")?;
    let r = radius("root_radius", root_radius)?;
    let (w, b, under) = (web / 2.0, width / 2.0, depth - flange);
    let section = integral::properties(&[around(&[
        ([-w, 0.0], 0.0),
        ([w, 0.0], 0.0),
        ([w, under], r),
        ([b, under], 0.0),
        ([b, depth], 0.0),
        ([-b, depth], 0.0),
        ([-b, under], 0.0),
        ([-w, under], r),
    ])?]);
    let (a_vz, shear_resistance) = if r > 0.0 {
        (
            section.area - width * flange + (web + 2.0 * r) * flange / 2.0,
            "A_vz = A - b t_f + (t_w + 2 r) t_f/2 (EN 1993-1-1 with A1:2014, 6.2.6(3)c); A_vy = the flange (common practice, no source)",
        )
    } else {
        (
            web * (depth - flange / 2.0),
            "A_vz = t_w (h - t_f/2) (EN 1993-1-1 with A1:2014, 6.2.6(3)c, welded T); A_vy = the flange (common practice, no source)",
        )
    };
    Ok(Properties {
        i_t: torsion::t_joint(width, flange, web, r) + (depth - flange) * cubed(web) / 3.0
            - torsion::FREE_END * fourth(web),
        i_w: Some(0.0),
        a_sy: Some(5.0 / 6.0 * width * flange),
        a_sz: Some(5.0 / 6.0 * depth * web),
        a_vy: Some(width * flange),
        a_vz: Some(a_vz),
        shear_centre: section.z_top.map(|z_top| [0.0, z_top - flange / 2.0]),
        dimensions: symbols([("h", depth), ("b", width), ("t_w", web), ("t_f", flange), ("r", r)]),
        methods: Methods {
            torsion: Some(torsion::JUNCTION),
            warping: Some(
                "I_w = 0 and shear centre where the mid-lines of web and flange meet (thin walls, Vlasov)",
            ),
            shear_area: Some(
                "A_sz = 5/6 h t_w, A_sy = 5/6 b t_f: web and flange as rectangles (Timoshenko; common practice for a T)",
            ),
            shear_resistance: Some(shear_resistance),
        },
        ..section
    })
}

pub(super) struct Channel {
    pub depth: f64,
    pub width: f64,
    pub web: f64,
    pub flange: f64,
    pub root_radius: Option<f64>,
    pub toe_radius: Option<f64>,
    pub taper: Option<Taper>,
}

pub(super) fn channel(s: &Channel) -> Result<Properties, ShapeError> {
    positive("depth", s.depth)?;
    positive("width", s.width)?;
    positive("web", s.web)?;
    positive("flange", s.flange)?;
    below("web", s.web, s.width, "the `width`")?;
    let root = radius("root_radius", s.root_radius)?;
    let toe = radius("toe_radius", s.toe_radius)?;
    let (slope, at) = s.taper.map_or((0.0, s.width), |taper| (taper.slope, taper.measured_at));
    if !(0.0..1.0).contains(&slope) {
        return Err(ShapeError::new("slope", "`slope` must be zero or more and below 1"));
    }
    // Flange thickness at the root and at the toe.
    let [thick, thin] = [s.web, s.width].map(|y| s.flange + slope * (at - y));
    if !(thin > 0.0 && thick > 0.0) {
        return Err(ShapeError::new(
            "slope",
            "`slope` leaves no thickness at the toe of the flange",
        ));
    }
    below("flange", 2.0 * thick, s.depth, "half the `depth`, at the root too")?;
    let (h, b, w) = (s.depth, s.width, s.web);
    let section = integral::properties(&[around(&[
        ([0.0, 0.0], 0.0),
        ([b, 0.0], 0.0),
        ([b, thin], toe),
        ([w, thick], root),
        ([w, h - thick], root),
        ([b, h - thin], toe),
        ([b, h], 0.0),
        ([0.0, h], 0.0),
    ])?]);
    let (tf, hs, bs) = (s.flange, h - s.flange, b - w / 2.0);
    // Thin walls on their mid-lines: shear centre beyond the web, warping constant.
    let (flange, web) = (6.0 * bs * tf, hs * w);
    let from_mid_web = 3.0 * bs * bs * tf / (flange + web);
    let i_w = tf * cubed(bs) * hs * hs / 12.0 * (3.0 * bs * tf + 2.0 * web) / (flange + web);
    let (a_vz, shear_resistance) = if root > 0.0 {
        (
            section.area - 2.0 * b * tf + (w + root) * tf,
            "A_vz = A - 2 b t_f + (t_w + r) t_f (EN 1993-1-1, 6.2.6(3)b); A_vy = both flanges (common practice, no source)",
        )
    } else {
        (
            (h - 2.0 * tf) * w,
            "A_vz = η h_w t_w, η = 1.0; A_vy = A - h_w t_w (EN 1993-1-1, 6.2.6(3)d, e)",
        )
    };
    Ok(Properties {
        i_t: 2.0 * torsion::l_joint(b, tf, w, root) + (h - 2.0 * tf) * cubed(w) / 3.0,
        i_w: Some(i_w),
        a_sy: Some(5.0 / 6.0 * 2.0 * b * tf),
        a_sz: Some(hs * w),
        a_vy: Some(2.0 * b * tf),
        a_vz: Some(a_vz),
        shear_centre: section.y_minus.map(|back| [w / 2.0 - back - from_mid_web, 0.0]),
        dimensions: symbols([
            ("h", h),
            ("b", b),
            ("t_w", w),
            ("t_f", tf),
            ("r", root),
            ("r_toe", toe),
            ("slope", slope),
        ]),
        methods: Methods {
            torsion: Some(torsion::JUNCTION),
            warping: Some(
                "I_w and shear centre from thin walls on their mid-lines (Vlasov); fillets and taper not counted",
            ),
            shear_area: Some(
                "A_sz = (h - t_f) t_w, the web between the mid-lines of the flanges (common practice, no source); A_sy = 5/6 of both flanges (Timoshenko, as rectangles)",
            ),
            shear_resistance: Some(shear_resistance),
        },
        ..section
    })
}

pub(super) fn angle(
    depth: f64,
    width: f64,
    thickness: f64,
    root_radius: Option<f64>,
    toe_radius: Option<f64>,
) -> Result<Properties, ShapeError> {
    positive("depth", depth)?;
    positive("width", width)?;
    positive("thickness", thickness)?;
    below("thickness", thickness, depth.min(width), "the shorter leg")?;
    let root = radius("root_radius", root_radius)?;
    let toe = radius("toe_radius", toe_radius)?;
    let (h, b, t) = (depth, width, thickness);
    let section = integral::properties(&[around(&[
        ([0.0, 0.0], 0.0),
        ([b, 0.0], 0.0),
        ([b, t], toe),
        ([t, t], root),
        ([t, h], toe),
        ([0.0, h], 0.0),
    ])?]);
    Ok(Properties {
        i_t: torsion::l_joint(b, t, t, root) + (h - t) * cubed(t) / 3.0,
        i_w: Some(0.0),
        a_sy: Some(5.0 / 6.0 * b * t),
        a_sz: Some(5.0 / 6.0 * h * t),
        shear_centre: section
            .y_minus
            .zip(section.z_bottom)
            .map(|(y, z)| [t / 2.0 - y, t / 2.0 - z]),
        dimensions: symbols([("h", h), ("b", b), ("t", t), ("r", root), ("r_toe", toe)]),
        methods: Methods {
            torsion: Some(torsion::JUNCTION),
            warping: Some(
                "I_w = 0 and shear centre where the mid-lines of the legs meet (thin walls, Vlasov)",
            ),
            shear_area: Some(
                "A_sz = 5/6 h t, A_sy = 5/6 b t: each leg as a rectangle (Timoshenko; common practice for an angle)",
            ),
            shear_resistance: None,
        },
        ..section
    })
}

fn around(corners: &[(Point, f64)]) -> Result<Vec<Edge>, ShapeError> {
    edge::rounded(corners).map_err(|corner| {
        // Root fillets round inward corners, toes outward ones; both share a face.
        let [y0, z0] = corners[corner].0;
        let n = corners.len();
        let ([ya, za], [yb, zb]) = (corners[(corner + n - 1) % n].0, corners[(corner + 1) % n].0);
        let outward = (y0 - ya) * (zb - z0) - (z0 - za) * (yb - y0) > 0.0;
        let key = if outward { "toe_radius" } else { "root_radius" };
        ShapeError::new(key, format!("`{key}` does not fit between web and toe"))
    })
}

fn cubed(x: f64) -> f64 {
    x * x * x
}

fn fourth(x: f64) -> f64 {
    x * x * x * x
}
