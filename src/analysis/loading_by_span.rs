//! Which spans are loaded: the choices that a combination leaves open.
//!
//! Where every choice of spans may act, the adverse one is found effect by effect and place by place: of each
//! part only what adds to the extreme counts. Where a simplified set of arrangements is asked for, each of
//! them is a variant of the combination.

use crate::model::{CaseId, Model, Part, SpanLoading};

/// A combination with its open choices.
#[derive(Clone, Debug, PartialEq)]
pub struct Choices {
    /// What always acts.
    pub fixed: Vec<(CaseId, f64)>,
    /// Sets of parts, one of which acts; a single empty one where there is no such choice.
    pub variants: Vec<Vec<(CaseId, f64)>>,
    /// Parts that act or not, each by itself.
    pub free: Vec<(CaseId, f64)>,
}

/// The choices that factors leave open.
#[must_use]
pub fn choices(model: &Model, factors: &[(CaseId, f64)]) -> Choices {
    let mut out = Choices { fixed: Vec::new(), variants: vec![Vec::new()], free: Vec::new() };
    for (case, factor) in factors {
        let parts: Vec<CaseId> = model.parts_of(*case).collect();
        match model[*case].by_span {
            Some(_) if parts.is_empty() => {}
            None => out.fixed.push((*case, *factor)),
            Some(SpanLoading::Any) => {
                out.free.extend(parts.into_iter().map(|part| (part, *factor)));
            }
            Some(loading) => {
                let sets = arrangements(model, &parts, loading);
                let mut next = Vec::new();
                for before in &out.variants {
                    for set in &sets {
                        let mut variant = before.clone();
                        variant.extend(set.iter().map(|part| (*part, *factor)));
                        next.push(variant);
                    }
                }
                out.variants = next;
            }
        }
    }
    out
}

/// The sets of parts of a simplified arrangement, by the number of the span along its member: all, the odd,
/// the even, and two adjacent ones. What acts on no span acts in all of them.
#[must_use]
pub fn arrangements(model: &Model, parts: &[CaseId], loading: SpanLoading) -> Vec<Vec<CaseId>> {
    let span =
        |part: CaseId| model.part(part).and_then(|part: &Part| part.on.map(|(_, span)| span));
    let most = parts.iter().filter_map(|part| span(*part)).max().unwrap_or(0);
    let of = |wanted: &dyn Fn(usize) -> bool| -> Vec<CaseId> {
        parts.iter().copied().filter(|part| span(*part).is_none_or(wanted)).collect()
    };
    let mut sets = vec![of(&|_| true), of(&|span| span % 2 == 0), of(&|span| span % 2 == 1)];
    if loading == SpanLoading::AlternateAndAdjacent {
        for first in 0..most {
            sets.push(of(&|span| span == first || span == first + 1));
        }
    }
    // A case that is absent acts nowhere.
    sets.push(Vec::new());
    let mut out: Vec<Vec<CaseId>> = Vec::new();
    for set in sets {
        if !out.contains(&set) {
            out.push(set);
        }
    }
    out
}
