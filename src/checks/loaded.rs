//! Which spans are loaded when a check is evaluated.
//!
//! Formulas need not be linear, so that a check is evaluated for whole choices of loaded spans: all of them
//! where the target's structure has at most [`ALL_OF`] such parts. Of more parts, those choices count that are
//! adverse to some effect at an end or in the middle of some piece of the member (or to some reaction or
//! displacement of the node), none, and all.

use super::Entry;
use crate::analysis::{Choices, Solution, choices, evaluate};
use crate::model::{CaseId, Model, On};

/// So many parts are tried in every choice.
const ALL_OF: usize = 6;

/// The choices for one target, found once for each set of parts.
pub(super) struct Patterns<'p> {
    model: &'p Model,
    solution: &'p Solution,
    on: On,
    /// By parts and sense of their factors: the sets that count.
    known: Vec<(Vec<(CaseId, bool)>, Sets)>,
}

/// Choices of loaded spans.
type Sets = Vec<Vec<CaseId>>;

impl<'p> Patterns<'p> {
    pub(super) fn new(model: &'p Model, solution: &'p Solution, on: On) -> Self {
        Self { model, solution, on, known: Vec::new() }
    }

    /// The entries of one combination.
    pub(super) fn entries(&mut self, combination: usize, factors: &[(CaseId, f64)]) -> Vec<Entry> {
        let Choices { fixed, variants, free } = choices(self.model, factors);
        let structure = self.on.structure(self.model);
        // What acts on another structure does nothing here: reactions are handed on with all parts acting.
        let here = |part: CaseId| {
            let on = self.model.part(part).and_then(|part| part.on);
            on.is_none_or(|(member, _)| self.model[member].structure == structure)
        };
        let free: Vec<(CaseId, f64)> = free.into_iter().filter(|(part, _)| here(*part)).collect();
        let sets = self.sets(&free);
        let mut out = Vec::new();
        for variant in &variants {
            for set in &sets {
                let chosen = free.iter().filter(|(part, _)| set.contains(part));
                let acting: Vec<(CaseId, f64)> = variant.iter().chain(chosen).copied().collect();
                let loaded = acting.iter().map(|(part, _)| *part).collect();
                let mut factors = fixed.clone();
                factors.extend(&acting);
                if !factors.is_empty() {
                    out.push(Entry { combination, factors, loaded });
                }
            }
        }
        out
    }

    fn sets(&mut self, free: &[(CaseId, f64)]) -> Sets {
        if free.len() <= ALL_OF {
            // The full set first, so that it wins ties.
            return (0..1_u32 << free.len())
                .rev()
                .map(|set| {
                    let at = |index: &usize| set & (1 << index) != 0;
                    (0..free.len()).filter(at).map(|index| free[index].0).collect()
                })
                .collect();
        }
        let key: Vec<(CaseId, bool)> = free.iter().map(|(part, f)| (*part, *f > 0.0)).collect();
        if let Some((_, sets)) = self.known.iter().find(|(known, _)| *known == key) {
            return sets.clone();
        }
        let mut sets: Sets = vec![free.iter().map(|(part, _)| *part).collect()];
        let mut keep = |set: Vec<CaseId>| {
            if !sets.contains(&set) {
                sets.push(set);
            }
        };
        for values in self.values(free) {
            for sign in [1.0, -1.0] {
                let adverse = free.iter().zip(&values).filter(|(_, value)| sign * **value > 0.0);
                keep(adverse.map(|((part, _), _)| *part).collect());
            }
        }
        keep(Vec::new());
        self.known.push((key, sets.clone()));
        sets
    }

    /// What each part adds, in rows: one for each effect and place, or component.
    fn values(&self, free: &[(CaseId, f64)]) -> Vec<Vec<f64>> {
        let mut rows = Vec::new();
        let node = |node: usize, rows: &mut Vec<Vec<f64>>| {
            let solved = &self.solution.nodes[node];
            for values in [&solved.displacement, &solved.reaction] {
                for k in 0..6 {
                    let of = |(part, factor): &(CaseId, f64)| {
                        values.get(part.0).map_or(0.0, |value| factor * value[k])
                    };
                    rows.push(free.iter().map(of).collect());
                }
            }
        };
        match self.on {
            On::Member { member, .. } => {
                for segment in &self.solution.members[member.0].segments {
                    let length = segment.to - segment.from;
                    for s in [0.0, 0.5 * length, length] {
                        for effect in 0..crate::model::EFFECTS.len() {
                            let of = |(part, factor): &(CaseId, f64)| {
                                factor * evaluate(&segment.states[part.0].0[effect], s)
                            };
                            rows.push(free.iter().map(of).collect());
                        }
                    }
                }
            }
            On::Node { node: id, relative_to } => {
                node(id.0, &mut rows);
                if let Some(other) = relative_to {
                    node(other.0, &mut rows);
                }
            }
            On::Structure { structure, .. } => {
                for id in &self.model[structure].nodes {
                    node(id.0, &mut rows);
                }
            }
        }
        rows
    }
}
