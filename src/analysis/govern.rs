//! Governing values: every combination superposed, the greatest and least of each effect found.

use std::ops::Range;

use rayon::prelude::*;

use super::combine::{on_member, superpose_one};
use super::extremes::{FLAT, Found, Stretch, extremes};
use super::loading_by_span::choices;
use super::progress;
use super::roots::{shifted, sign_changes};
use super::{
    Extreme, Extremes, Governing, GoverningMember, MemberSolution, Polynomial, Runner, Segment,
    Solution, evaluate,
};
use crate::model::{CaseId, EFFECTS, Member, Model, NodeId, Purpose, Side};

/// Places closer than this share of a segment are one.
const SAME_PLACE: f64 = 1e-12;

pub(super) fn govern(model: &Model, solution: &Solution) -> Governing {
    let members: Vec<usize> = (0..model.members.len()).collect();
    progress::expect(members.len() * model.combinations.len());
    Governing {
        members: members
            .par_iter()
            .map(|index| member(model, &model.members[*index], &solution.members[*index]))
            .collect(),
        reactions: reactions(model, solution),
    }
}

/// The combinations of each purpose that has any, in printing order.
fn by_purpose(model: &Model) -> Vec<(Purpose, Vec<usize>)> {
    Purpose::ALL
        .into_iter()
        .map(|purpose| {
            let of = |index: &usize| model.combinations[*index].purpose == purpose;
            (purpose, (0..model.combinations.len()).filter(of).collect::<Vec<usize>>())
        })
        .filter(|(_, combinations)| !combinations.is_empty())
        .collect()
}

fn member(model: &Model, member: &Member, solution: &MemberSolution) -> GoverningMember {
    let segments = &solution.segments;
    let bounds = Bounds::new(segments);
    let ranges: Vec<Range<usize>> =
        member.spans.iter().map(|span| inside(segments, span.from, span.to)).collect();
    let mut whole = Vec::new();
    let mut spans = vec![Vec::new(); member.spans.len()];
    for (purpose, combinations) in by_purpose(model) {
        let mut wholly = Best::new();
        let mut by_span: Vec<Best> = member.spans.iter().map(|_| Best::new()).collect();
        for combination in combinations {
            progress::done();
            let factors = on_member(model, member, &model.combinations[combination].factors);
            let choices = choices(model, &factors);
            for variant in &choices.variants {
                let acting: Vec<(CaseId, f64)> =
                    choices.fixed.iter().chain(variant).copied().collect();
                let candidate = Candidate {
                    combination,
                    bounds: bounds.of(&acting, &choices.free),
                    acting,
                    variant: variant.iter().map(|(part, _)| *part).collect(),
                    free: &choices.free,
                };
                wholly.take(&candidate, segments, 0..segments.len());
                for (range, best) in ranges.iter().zip(&mut by_span) {
                    best.take(&candidate, segments, range.clone());
                }
            }
        }
        whole.extend(wholly.ended().map(|all| (purpose, all)));
        for (out, best) in spans.iter_mut().zip(by_span) {
            out.extend(best.ended().map(|all| (purpose, all)));
        }
    }
    GoverningMember { whole, spans }
}

/// The segments of a stretch of the member.
fn inside(segments: &[Segment], from: f64, to: f64) -> Range<usize> {
    let inside = |segment: &Segment| {
        let middle = 0.5 * (segment.from + segment.to);
        from < middle && middle < to
    };
    let first = segments.iter().position(inside).unwrap_or(0);
    first..first + segments[first..].iter().take_while(|segment| inside(segment)).count()
}

/// A combination that stands for election.
struct Candidate<'c> {
    combination: usize,
    /// What acts in any case.
    acting: Vec<(CaseId, f64)>,
    /// Parts that act in this variant of it.
    variant: Vec<CaseId>,
    /// Parts that act where they are adverse.
    free: &'c [(CaseId, f64)],
    /// By segment and effect: no value lies outside.
    bounds: Vec<[(f64, f64); EFFECTS.len()]>,
}

impl Candidate<'_> {
    fn polynomial(&self, segment: &Segment, effect: usize) -> Polynomial {
        let of = |(case, factor): &(CaseId, f64)| (*factor, &segment.states[case.0].0[effect]);
        superpose_one(self.acting.iter().map(of))
    }

    /// Bounds of an effect over some segments.
    fn within(&self, range: Range<usize>, effect: usize) -> (f64, f64) {
        self.bounds[range]
            .iter()
            .map(|bounds| bounds[effect])
            .fold((f64::INFINITY, f64::NEG_INFINITY), |(low, high), (least, greatest)| {
                (low.min(least), high.max(greatest))
            })
    }
}

/// Bernstein coefficients of every state: a polynomial lies between the least and the greatest of its own, and
/// those of a combination are superposed like the effects themselves. Most combinations are told apart by
/// them alone, without looking for extremes.
struct Bounds {
    /// By segment, state and effect.
    segments: Vec<Vec<[Polynomial; EFFECTS.len()]>>,
}

impl Bounds {
    fn new(segments: &[Segment]) -> Self {
        let of = |segment: &Segment| {
            let length = segment.to - segment.from;
            segment.states.iter().map(|fields| fields.0.map(|p| bernstein(&p, length))).collect()
        };
        Self { segments: segments.iter().map(of).collect() }
    }

    fn of(
        &self,
        acting: &[(CaseId, f64)],
        free: &[(CaseId, f64)],
    ) -> Vec<[(f64, f64); EFFECTS.len()]> {
        let of_segment = |states: &Vec<[Polynomial; EFFECTS.len()]>| {
            std::array::from_fn(|effect| {
                let terms = acting.iter().map(|(case, factor)| (*factor, &states[case.0][effect]));
                let (mut low, mut high) = spread(&superpose_one(terms));
                for (part, factor) in free {
                    let (least, greatest) = spread(&states[part.0][effect].map(|c| c * factor));
                    low += least.min(0.0);
                    high += greatest.max(0.0);
                }
                (low, high)
            })
        };
        self.segments.iter().map(of_segment).collect()
    }
}

/// Coefficients in the Bernstein basis of degree five over the length.
fn bernstein(polynomial: &Polynomial, length: f64) -> Polynomial {
    /// C(j, k) / C(5, k).
    const SHARES: [[f64; 6]; 6] = [
        [1.0, 0.0, 0.0, 0.0, 0.0, 0.0],
        [1.0, 0.2, 0.0, 0.0, 0.0, 0.0],
        [1.0, 0.4, 0.1, 0.0, 0.0, 0.0],
        [1.0, 0.6, 0.3, 0.1, 0.0, 0.0],
        [1.0, 0.8, 0.6, 0.4, 0.2, 0.0],
        [1.0, 1.0, 1.0, 1.0, 1.0, 1.0],
    ];
    let mut power = 1.0;
    let scaled = polynomial.map(|c| {
        let scaled = c * power;
        power *= length;
        scaled
    });
    SHARES.map(|shares| shares.iter().zip(scaled).map(|(share, c)| share * c).sum())
}

fn spread(coefficients: &Polynomial) -> (f64, f64) {
    coefficients
        .iter()
        .fold((f64::INFINITY, f64::NEG_INFINITY), |(low, high), c| (low.min(*c), high.max(*c)))
}

/// The best so far of every effect, in both senses.
struct Best {
    /// By effect; (greatest, least).
    effects: Vec<Option<(Standing, Standing)>>,
}

/// A governing value with its runner-up; `sign` is +1 for the greatest, −1 for the least.
struct Standing {
    sign: f64,
    scale: f64,
    best: Extreme,
}

impl Best {
    fn new() -> Self {
        Self { effects: EFFECTS.iter().map(|_| None).collect() }
    }

    /// Lets one combination stand for every effect.
    fn take(&mut self, candidate: &Candidate<'_>, segments: &[Segment], range: Range<usize>) {
        if range.is_empty() {
            return;
        }
        let own = &segments[range.clone()];
        for (index, best) in self.effects.iter_mut().enumerate() {
            let (low, high) = candidate.within(range.clone(), index);
            let scale = low.abs().max(high.abs());
            if let Some((most, fewest)) = best {
                most.scale = most.scale.max(scale);
                fewest.scale = fewest.scale.max(scale);
                if !most.can_change(high) && !fewest.can_change(low) {
                    continue;
                }
            }
            let fields: Vec<Polynomial> =
                own.iter().map(|segment| candidate.polynomial(segment, index)).collect();
            let greatest = stretches(candidate.free, own, &fields, index, 1.0);
            let Some((high, mut low)) = extremes(&greatest) else { continue };
            if !candidate.free.is_empty() {
                let least = stretches(candidate.free, own, &fields, index, -1.0);
                low = extremes(&least).map_or(low, |(_, low)| low);
            }
            let here = |found: &Found, sign: f64| {
                let segment = &own[place_of(own, found)];
                let s = found.x - segment.from;
                let acts = |(part, factor): &&(CaseId, f64)| {
                    let part = &segment.states[part.0].0[index];
                    sign * factor * evaluate(part, s) > FLAT * scale
                };
                let adverse: Vec<(CaseId, f64)> =
                    candidate.free.iter().filter(acts).copied().collect();
                let part = |k: usize| -> f64 {
                    let of = |(part, factor): &(CaseId, f64)| {
                        factor * evaluate(&segment.states[part.0].0[k], s)
                    };
                    adverse.iter().map(of).sum()
                };
                let mut loaded = candidate.variant.clone();
                loaded.extend(adverse.iter().map(|(part, _)| *part));
                loaded.sort();
                Extreme {
                    value: found.value,
                    x: Some(found.x),
                    side: found.side,
                    combination: candidate.combination,
                    loaded,
                    with: std::array::from_fn(|k| {
                        evaluate(&candidate.polynomial(segment, k), s) + part(k)
                    }),
                    next: None,
                }
            };
            match best {
                None => {
                    *best = Some((
                        Standing { sign: 1.0, scale, best: here(&high, 1.0) },
                        Standing { sign: -1.0, scale, best: here(&low, -1.0) },
                    ));
                }
                Some((most, fewest)) => {
                    most.meet(here(&high, 1.0), scale);
                    fewest.meet(here(&low, -1.0), scale);
                }
            }
        }
    }

    /// `None` where there was nothing to stand for.
    fn ended(self) -> Option<[Extremes; EFFECTS.len()]> {
        let all: Option<Vec<Extremes>> = self
            .effects
            .into_iter()
            .map(|both| both.map(|(high, low)| Extremes { max: high.best, min: low.best }))
            .collect();
        all?.try_into().ok()
    }
}

impl Standing {
    /// A value that no challenger of a combination exceeds could still win or be the runner-up.
    fn can_change(&self, bound: f64) -> bool {
        let beaten = |value: f64| self.sign * (bound - value) > FLAT * self.scale;
        self.best.next.is_none_or(|next| beaten(next.value))
    }

    /// A challenger must win by more than round-off: ties stay with the earlier combination.
    fn meet(&mut self, challenger: Extreme, scale: f64) {
        self.scale = self.scale.max(scale);
        let margin = FLAT * self.scale;
        let runner =
            |extreme: &Extreme| Runner { value: extreme.value, combination: extreme.combination };
        let wins = self.sign * (challenger.value - self.best.value) > margin;
        if challenger.combination == self.best.combination {
            // Another variant of the same combination is no runner-up to itself.
            if wins {
                self.best = Extreme { next: self.best.next, ..challenger };
            }
            return;
        }
        if wins {
            let next = Some(runner(&self.best));
            self.best = Extreme { next, ..challenger };
        } else if self
            .best
            .next
            .is_none_or(|next| self.sign * (challenger.value - next.value) > margin)
        {
            self.best.next = Some(runner(&challenger));
        }
    }
}

/// One effect along neighbouring segments, with what adds to it in one sense of the parts that act or not:
/// cut where a part changes sign, so that each stretch is one polynomial.
fn stretches(
    free: &[(CaseId, f64)],
    segments: &[Segment],
    fields: &[Polynomial],
    effect: usize,
    sign: f64,
) -> Vec<Stretch> {
    let mut out = Vec::with_capacity(segments.len());
    for (segment, own) in segments.iter().zip(fields) {
        let own = *own;
        let whole = Stretch { from: segment.from, to: segment.to, polynomial: own };
        let parts: Vec<Polynomial> = free
            .iter()
            .map(|(part, factor)| segment.states[part.0].0[effect].map(|c| c * factor))
            .filter(|part| part.iter().any(|c| c.abs() > 0.0))
            .collect();
        if parts.is_empty() {
            out.push(whole);
            continue;
        }
        let length = segment.to - segment.from;
        let mut cuts: Vec<f64> = vec![0.0];
        let mut inner: Vec<f64> =
            parts.iter().flat_map(|part| sign_changes(part, length)).collect();
        inner.sort_by(f64::total_cmp);
        for s in inner {
            if cuts.last().is_none_or(|last| s - last > SAME_PLACE * length) {
                cuts.push(s);
            }
        }
        cuts.push(length);
        for pair in cuts.windows(2) {
            let middle = 0.5 * (pair[0] + pair[1]);
            let mut sum = own;
            for part in parts.iter().filter(|part| sign * evaluate(part, middle) > 0.0) {
                for (into, from) in sum.iter_mut().zip(part) {
                    *into += from;
                }
            }
            let to = if pair[1] >= length { segment.to } else { segment.from + pair[1] };
            out.push(Stretch {
                from: segment.from + pair[0],
                to,
                polynomial: shifted(&sum, pair[0]),
            });
        }
    }
    out
}

/// The segment that holds a place found.
fn place_of(segments: &[Segment], found: &Found) -> usize {
    let before = found.side == Some(Side::Before);
    segments
        .iter()
        .position(|segment| if before { found.x <= segment.to } else { found.x < segment.to })
        .unwrap_or(segments.len() - 1)
}

fn reactions(model: &Model, solution: &Solution) -> Vec<(Purpose, NodeId, [Extremes; 6])> {
    let mut out = Vec::new();
    for (purpose, combinations) in by_purpose(model) {
        for (index, node) in solution.nodes.iter().enumerate() {
            if model.nodes[index].support.is_none() {
                continue;
            }
            let mut standing: Vec<Option<(Standing, Standing)>> = (0..6).map(|_| None).collect();
            for combination in &combinations {
                let choices = choices(model, &model.combinations[*combination].factors);
                for variant in &choices.variants {
                    let acting = choices.fixed.iter().chain(variant);
                    let own = summed(acting, &node.reaction);
                    for (k, best) in standing.iter_mut().enumerate() {
                        let here = |sign: f64| {
                            let adverse: Vec<(CaseId, f64)> = choices
                                .free
                                .iter()
                                .filter(|(part, factor)| {
                                    sign * factor * node.reaction[part.0][k] > 0.0
                                })
                                .copied()
                                .collect();
                            let more = summed(adverse.iter(), &node.reaction);
                            let with: [f64; 6] = std::array::from_fn(|k| own[k] + more[k]);
                            let mut loaded: Vec<CaseId> =
                                variant.iter().chain(&adverse).map(|(part, _)| *part).collect();
                            loaded.sort();
                            Extreme {
                                value: with[k],
                                x: None,
                                side: None,
                                combination: *combination,
                                loaded,
                                with,
                                next: None,
                            }
                        };
                        let (high, low) = (here(1.0), here(-1.0));
                        let scale = high.with.iter().chain(&low.with);
                        let scale = scale.fold(0.0_f64, |most, value| most.max(value.abs()));
                        match best {
                            None => {
                                *best = Some((
                                    Standing { sign: 1.0, scale, best: high },
                                    Standing { sign: -1.0, scale, best: low },
                                ));
                            }
                            Some((most, fewest)) => {
                                most.meet(high, scale);
                                fewest.meet(low, scale);
                            }
                        }
                    }
                }
            }
            let all: Option<Vec<Extremes>> = standing
                .into_iter()
                .map(|both| both.map(|(high, low)| Extremes { max: high.best, min: low.best }))
                .collect();
            if let Some(all) = all.and_then(|all| all.try_into().ok()) {
                out.push((purpose, NodeId(index), all));
            }
        }
    }
    out
}

/// Σ factor · values.
fn summed<'f>(factors: impl Iterator<Item = &'f (CaseId, f64)>, values: &[[f64; 6]]) -> [f64; 6] {
    let mut sum = [0.0; 6];
    for (case, factor) in factors {
        for (into, value) in sum.iter_mut().zip(values[case.0]) {
            *into += factor * value;
        }
    }
    sum
}
