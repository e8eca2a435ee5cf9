//! Looking up effects in a Record: the only way downstream gets a structural value.

use super::{CaseRecord, CombinationRecord, MemberRecord, Record, SegmentRecord};
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

/// What acts in a combination: solved states with their factors, and parts of cases that act or not.
#[derive(Clone, Debug, PartialEq)]
pub struct Acting<'r> {
    pub terms: Vec<(&'r str, f64)>,
    pub free: Vec<(&'r str, f64)>,
}

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
        let polynomial = self.polynomial(segment, effect, &self.terms_on(member, state)?)?;
        Some(evaluate(&polynomial, x - segment.from))
    }

    /// An effect along a whole member in a state.
    #[must_use]
    pub fn along(&self, member: &str, effect: Effect, state: &str) -> Option<Vec<Piece>> {
        let terms = self.terms_on(member, state)?;
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
        let states: Vec<Acting<'_>> = self
            .combinations
            .iter()
            .filter(|(_, combination)| combination.purpose == purpose.name())
            .flat_map(|(_, combination)| self.acting(member, combination))
            .collect();
        if states.is_empty() {
            return None;
        }
        let mut band = Band::new();
        for segment in segments {
            let polynomials: Option<Vec<(Polynomial, Vec<Polynomial>)>> = states
                .iter()
                .map(|acting| {
                    let own = self.polynomial(segment, effect, &acting.terms)?;
                    let one = |part: &(&str, f64)| self.polynomial(segment, effect, &[*part]);
                    Some((own, acting.free.iter().map(one).collect::<Option<Vec<_>>>()?))
                })
                .collect();
            let polynomials = polynomials?;
            let length = segment.to - segment.from;
            for point in 0..=BETWEEN + 1 {
                let s = length * f64::from(point) / f64::from(BETWEEN + 1);
                let mut least = f64::INFINITY;
                let mut greatest = f64::NEG_INFINITY;
                for (own, parts) in &polynomials {
                    let value = evaluate(own, s);
                    let parts = || parts.iter().map(|part| evaluate(part, s));
                    let more: f64 = parts().filter(|part| *part > 0.0).sum();
                    let less: f64 = parts().filter(|part| *part < 0.0).sum();
                    least = least.min(value + less);
                    greatest = greatest.max(value + more);
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

    /// The short number of a combination, with the spans that are loaded where it leaves that open:
    /// `C3 [Q on B1.1, B1.3]`, `C3 [no Q]`.
    #[must_use]
    pub fn in_short(&self, state: &str, loaded: &[String]) -> String {
        let Some(combination) = self.combinations.get(state) else { return String::new() };
        let mut choices = Vec::new();
        for (name, case) in &self.model.cases {
            let Some(by_span) = &case.by_span else { continue };
            if !combination.factors.contains_key(name) {
                continue;
            }
            let acting: Vec<&str> = by_span
                .parts
                .iter()
                .filter(|part| loaded.contains(part))
                .map(|part| {
                    part.strip_prefix(name.as_str()).unwrap_or(part).trim_start_matches('/')
                })
                .collect();
            choices.push(match acting.as_slice() {
                [] => format!("no {name}"),
                some => format!("{name} on {}", some.join(", ")),
            });
        }
        let number = &combination.number;
        if choices.is_empty() {
            number.clone()
        } else {
            format!("{number} [{}]", choices.join("; "))
        }
    }

    /// What acts on a member in a combination, one entry for each simplified arrangement of loaded spans;
    /// nothing for other names.
    #[must_use]
    pub fn arrangements<'r>(&'r self, member: &str, combination: &str) -> Vec<Acting<'r>> {
        let combination = self.combinations.get(combination);
        combination.map(|combination| self.acting(member, combination)).unwrap_or_default()
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

    /// A state as factors on solved states, as it counts for one member.
    fn terms_on<'r>(&'r self, member: &str, state: &'r str) -> Option<Vec<(&'r str, f64)>> {
        let terms = self.terms(state)?;
        if !self.combinations.contains_key(state) {
            return Some(terms);
        }
        let reduced =
            |(case, factor): (&'r str, f64)| (case, factor * self.reduction(member, case));
        Some(terms.into_iter().map(reduced).collect())
    }

    /// The reduction of a case for one member, in combinations.
    fn reduction(&self, member: &str, case: &str) -> f64 {
        let imposed = self.model.cases.get(case).is_some_and(|case| case.nature == "imposed");
        let member = self.member(member).and_then(|member| member.imposed_reduction.as_ref());
        member.filter(|_| imposed).map_or(1.0, |(factor, _)| *factor)
    }

    /// A state as factors on solved states.
    fn terms<'r>(&'r self, state: &'r str) -> Option<Vec<(&'r str, f64)>> {
        let is_part = |case: &CaseRecord| {
            case.by_span.as_ref().is_some_and(|by_span| by_span.parts.iter().any(|p| p == state))
        };
        if self.model.cases.contains_key(state) || self.model.cases.values().any(is_part) {
            return Some(vec![(state, 1.0)]);
        }
        let combination = self.combinations.get(state)?;
        Some(combination.factors.iter().map(|(case, factor)| (case.as_str(), *factor)).collect())
    }

    /// What a combination lets act, one entry for each simplified arrangement of loaded spans.
    fn acting<'r>(&'r self, member: &str, combination: &'r CombinationRecord) -> Vec<Acting<'r>> {
        let mut out = vec![Acting { terms: Vec::new(), free: Vec::new() }];
        for (name, factor) in &combination.factors {
            let factor = &(factor * self.reduction(member, name));
            let by_span = self.model.cases.get(name).and_then(|case| case.by_span.as_ref());
            match by_span {
                None => out.iter_mut().for_each(|acting| acting.terms.push((name, *factor))),
                Some(by_span) if by_span.sets.is_empty() => {
                    for acting in &mut out {
                        acting.free.extend(by_span.parts.iter().map(|p| (p.as_str(), *factor)));
                    }
                }
                Some(by_span) => {
                    let with = |acting: &Acting<'r>, set: &'r Vec<String>| {
                        let mut acting = acting.clone();
                        acting.terms.extend(set.iter().map(|part| (part.as_str(), *factor)));
                        acting
                    };
                    out = out
                        .iter()
                        .flat_map(|acting| by_span.sets.iter().map(|set| with(acting, set)))
                        .collect();
                }
            }
        }
        out
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
