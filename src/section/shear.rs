//! The greatest shear stress of elastic bending.
//!
//! τ = V S / (I b), S the first moment of what lies above a cut about the centroid and b the width there
//! (Jourawski; EN 1993-1-1, 6.2.6(4); from memory). Not for sections whose local axes are not principal.

use super::Properties;

/// How far beside a corner a cut is made, as a share of the depth: the width may jump there.
const BESIDE: f64 = 1e-7;

impl Properties {
    /// V_z over the greatest shear stress that it causes, I_y b / S, m². `None` where the outline is not known or
    /// the local axes are not principal axes.
    #[must_use]
    pub fn elastic_shear_area(&self) -> Option<f64> {
        let dimension = |name: &str| self.dimensions.get(name).copied();
        if self.is_skew() {
            return None;
        }
        // Round outlines are known as polygons only; a full and a hollow half circle in closed form.
        if self.form == "circle" {
            return Some(0.75 * self.area);
        }
        if let ("tube", Some(d), Some(t)) = (self.form, dimension("d"), dimension("t")) {
            let (outer, inner) = (0.5 * d, 0.5 * d - t);
            let first = 2.0 / 3.0 * (outer * outer * outer - inner * inner * inner);
            return Some(self.i_y * 2.0 * t / first);
        }
        let depth = self.depth()?;
        let corners = self.outline.iter().flatten().map(|[_, z]| *z);
        let levels = corners.flat_map(|z| [z - BESIDE * depth, z + BESIDE * depth]).chain([0.0]);
        let most = levels.filter_map(|level| self.first_over_width(level)).fold(0.0, f64::max);
        (most > 0.0).then(|| self.i_y / most)
    }

    /// S / b of the part above a level, m².
    fn first_over_width(&self, level: f64) -> Option<f64> {
        let (mut area, mut first, mut width) = (0.0, 0.0, 0.0);
        for corners in &self.outline {
            for (k, [y1, z1]) in corners.iter().enumerate() {
                let [y2, z2] = corners[(k + 1) % corners.len()];
                let (a, b) = (z1 - level, z2 - level);
                let cut = |from: f64, to: f64| y1 + (y2 - y1) * from / (from - to);
                let (start, end) = match (a > 0.0, b > 0.0) {
                    (false, false) => continue,
                    (true, true) => ((*y1, a), (y2, b)),
                    (false, true) => ((cut(a, b), 0.0), (y2, b)),
                    (true, false) => ((*y1, a), (cut(a, b), 0.0)),
                };
                // By Green's theorem; the cut itself lies at height 0 and adds nothing.
                let along = end.0 - start.0;
                area -= along * (start.1 + end.1) / 2.0;
                first -= along * (start.1 * start.1 + start.1 * end.1 + end.1 * end.1) / 6.0;
                // The edge of the right side goes up, that of the left side down.
                if (a > 0.0) != (b > 0.0) {
                    width += if b > 0.0 { start.0 } else { -end.0 };
                }
            }
        }
        let moment: f64 = first + level * area;
        (width.abs() > 0.0).then(|| moment.abs() / width.abs())
    }
}
