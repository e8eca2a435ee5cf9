//! Superposition: the only place where effects of load cases are added up.

use super::{Fields, Polynomial};
use crate::model::{CaseId, EFFECTS, Member, Model, Nature};

/// The factors of a combination as they count for one member: imposed loads reduced where the project says so.
#[must_use]
pub fn on_member(model: &Model, member: &Member, factors: &[(CaseId, f64)]) -> Vec<(CaseId, f64)> {
    let reduction = member.imposed_reduction.as_ref().map_or(1.0, |(factor, _)| *factor);
    let of = |(case, factor): &(CaseId, f64)| {
        let reduced = model[*case].nature == Nature::Imposed;
        (*case, if reduced { factor * reduction } else { *factor })
    };
    factors.iter().map(of).collect()
}

/// Σ factor · fields, in the order given; nothing given is zero.
///
/// A plain loop over the coefficients in fixed order, so that the same factors give the same bits.
#[must_use]
pub fn superpose<'f>(terms: impl IntoIterator<Item = (f64, &'f Fields)>) -> Fields {
    let mut sum = Fields([[0.0; 6]; EFFECTS.len()]);
    for (factor, fields) in terms {
        for (into, from) in sum.0.as_flattened_mut().iter_mut().zip(fields.0.as_flattened()) {
            *into += factor * from;
        }
    }
    sum
}

/// Σ factor · polynomial: one effect of [`superpose`], with the same bits.
#[must_use]
pub fn superpose_one<'p>(terms: impl IntoIterator<Item = (f64, &'p Polynomial)>) -> Polynomial {
    let mut sum = [0.0; 6];
    for (factor, polynomial) in terms {
        for (into, from) in sum.iter_mut().zip(polynomial) {
            *into += factor * from;
        }
    }
    sum
}
