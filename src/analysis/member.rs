//! The stretches of an element between breaks, and the fields along them.

use super::element::{FACE, Flexibility, Particular, advance};
use super::fields::{Fields, evaluate};
use super::frame::Element;
use super::loading::MemberLoads;
use crate::model::{EFFECTS, STORED};

/// A piece of an element that holds no break of any case inside.
#[derive(Clone, Copy, Debug)]
pub(super) struct Stretch {
    /// Positions along the member, m.
    pub(super) from: f64,
    pub(super) to: f64,
}

/// The stretches of an element, from the cuts of its whole member.
pub(super) fn stretches(element: &Element, cuts: &[f64]) -> Vec<Stretch> {
    cuts.windows(2)
        .filter(|pair| pair[0] >= element.from && pair[1] <= element.to)
        .map(|pair| Stretch { from: pair[0], to: pair[1] })
        .collect()
}

/// The fields of one case along an element, from all effects at its start.
pub(super) fn fields(
    start: &[f64; STORED],
    stretches: &[Stretch],
    loads: &MemberLoads,
    length: f64,
    flexibility: &Flexibility,
) -> Vec<Fields> {
    let mut out = Vec::with_capacity(stretches.len());
    walk(start, stretches, loads, length, flexibility, |stored| {
        let mut fields = Fields([[0.0; 6]; EFFECTS.len()]);
        fields.0[..STORED].copy_from_slice(stored);
        out.push(fields);
    });
    out
}

/// What the loads do to the element when its start is held and free of force.
pub(super) fn particular(
    stretches: &[Stretch],
    loads: &MemberLoads,
    length: f64,
    flexibility: &Flexibility,
) -> Particular {
    let end = walk(&[0.0; STORED], stretches, loads, length, flexibility, |_| ());
    Particular {
        force: std::array::from_fn::<f64, 6, _>(|k| end[k]).into(),
        displacement: std::array::from_fn::<f64, 6, _>(|k| end[6 + k]).into(),
    }
}

/// Goes along the element stretch by stretch, over the jumps at point loads; returns the effects at
/// the end.
fn walk(
    start: &[f64; STORED],
    stretches: &[Stretch],
    loads: &MemberLoads,
    length: f64,
    flexibility: &Flexibility,
    mut visit: impl FnMut(&[[f64; 6]; STORED]),
) -> [f64; STORED] {
    let mut here = *start;
    for (index, stretch) in stretches.iter().enumerate() {
        if index > 0
            && let Some(point) = loads.at(stretch.from, length)
        {
            // The internal forces on the +x face take over what the load brings: they jump by its opposite.
            for k in 0..3 {
                here[k] -= FACE[k] * point.force[k];
                here[3 + k] -= FACE[3 + k] * point.moment[k];
            }
        }
        let polynomials =
            advance(&here, &loads.intensity(stretch.from, stretch.to), &loads.imposed, flexibility);
        here = polynomials.map(|polynomial| evaluate(&polynomial, stretch.to - stretch.from));
        visit(&polynomials);
    }
    here
}
