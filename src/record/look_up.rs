//! Looking up effects in a Record: the only way downstream gets a structural value.

use super::{MemberRecord, Record, SegmentRecord};
use crate::analysis::{Polynomial, evaluate, superpose_one};
use crate::model::{Effect, Purpose, Side};

/// Points inside a segment at which an envelope is drawn, besides its ends.
const BETWEEN: u32 = 15;

/// One polynomial piece of an effect along a member, in s = x − from.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Piece {
    pub from: f64,
    pub to: f64,
    pub polynomial: Polynomial,
}

/// The band between the least and the greatest of an effect over a purpose, as points (x, least,
/// greatest); two points at the same x where it jumps.
pub type Band = Vec<[f64; 3]>;

impl Record {
    /// An effect at position `x` of a member in a state: a load case or a combination.
    /// `None` for unknown names, a position off the member, or a member whose fields were left out.
    #[must_use]
    pub fn effect(
        &self,
        member: &str,
        effect: Effect,
        state: &str,
        x: f64,
        side: Side,
    ) -> Option<f64> {
        let segments = &self.results.members.get(member)?.segments;
        let (first, last) = (segments.first()?, segments.last()?);
        if !(first.from..=last.to).contains(&x) {
            return None;
        }
        let segment = match side {
            Side::Before => segments.iter().find(|segment| x <= segment.to),
            Side::After => segments.iter().rev().find(|segment| segment.from <= x),
        }?;
        let polynomial = self.polynomial(segment, effect, &self.terms(state)?)?;
        Some(evaluate(&polynomial, x - segment.from))
    }

    /// An effect along a whole member in a state.
    #[must_use]
    pub fn along(&self, member: &str, effect: Effect, state: &str) -> Option<Vec<Piece>> {
        let terms = self.terms(state)?;
        let segments = &self.results.members.get(member)?.segments;
        let piece = |segment: &SegmentRecord| {
            Some(Piece {
                from: segment.from,
                to: segment.to,
                polynomial: self.polynomial(segment, effect, &terms)?,
            })
        };
        segments.iter().map(piece).collect()
    }

    /// The envelope of an effect over all combinations of a purpose, for drawing.
    #[must_use]
    pub fn band(&self, member: &str, effect: Effect, purpose: Purpose) -> Option<Band> {
        let segments = &self.results.members.get(member)?.segments;
        let states: Vec<Vec<(&str, f64)>> = self
            .combinations
            .iter()
            .filter(|(_, combination)| combination.purpose == purpose.name())
            .filter_map(|(name, _)| self.terms(name))
            .collect();
        if states.is_empty() {
            return None;
        }
        let mut band = Band::new();
        for segment in segments {
            let polynomials: Option<Vec<Polynomial>> =
                states.iter().map(|terms| self.polynomial(segment, effect, terms)).collect();
            let polynomials = polynomials?;
            let length = segment.to - segment.from;
            for point in 0..=BETWEEN + 1 {
                let s = length * f64::from(point) / f64::from(BETWEEN + 1);
                let mut least = f64::INFINITY;
                let mut greatest = f64::NEG_INFINITY;
                for polynomial in &polynomials {
                    let value = evaluate(polynomial, s);
                    least = least.min(value);
                    greatest = greatest.max(value);
                }
                band.push([segment.from + s, least, greatest]);
            }
        }
        Some(band)
    }

    /// Displacement of a node (global, m and rad) in a state.
    #[must_use]
    pub fn displacement(&self, node: &str, state: &str) -> Option<[f64; 6]> {
        let values = &self.results.nodes.get(node)?.displacement;
        self.vector(state, |case| values.get(case))
    }

    /// Reaction at a supported node (support's own axes where turned) in a state.
    #[must_use]
    pub fn reaction(&self, node: &str, state: &str) -> Option<[f64; 6]> {
        let values = &self.results.nodes.get(node)?.reaction;
        self.vector(state, |case| values.get(case))
    }

    /// A member as resolved, whatever its structure.
    #[must_use]
    pub fn member(&self, name: &str) -> Option<&MemberRecord> {
        self.model.structures.values().find_map(|structure| structure.members.get(name))
    }

    /// The names of all states: load cases, then combinations.
    pub fn states(&self) -> impl Iterator<Item = &String> {
        self.model.cases.keys().chain(self.combinations.keys())
    }

    /// A state as factors on solved states.
    fn terms<'r>(&'r self, state: &'r str) -> Option<Vec<(&'r str, f64)>> {
        if self.model.cases.contains_key(state) {
            return Some(vec![(state, 1.0)]);
        }
        let combination = self.combinations.get(state)?;
        Some(combination.factors.iter().map(|(case, factor)| (case.as_str(), *factor)).collect())
    }

    fn polynomial(
        &self,
        segment: &SegmentRecord,
        effect: Effect,
        terms: &[(&str, f64)],
    ) -> Option<Polynomial> {
        let fields: Option<Vec<(f64, &Polynomial)>> = terms
            .iter()
            .map(|(case, factor)| Some((*factor, &segment.fields.get(*case)?.0[effect.index()])))
            .collect();
        Some(superpose_one(fields?))
    }

    fn vector<'r>(
        &'r self,
        state: &str,
        values: impl Fn(&str) -> Option<&'r [f64; 6]>,
    ) -> Option<[f64; 6]> {
        let terms: Option<Vec<(f64, &[f64; 6])>> = self
            .terms(state)?
            .into_iter()
            .map(|(case, factor)| Some((factor, values(case)?)))
            .collect();
        Some(superpose_one(terms?))
    }
}
