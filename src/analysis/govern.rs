//! Governing values: every combination superposed, the greatest and least of each effect found.

use rayon::prelude::*;

use super::combine::superpose;
use super::extremes::{FLAT, Found, Stretch, bound, extremes};
use super::{
    Extreme, Extremes, Fields, Governing, GoverningMember, MemberSolution, Runner, Segment,
    Solution, evaluate,
};
use crate::model::{EFFECTS, FORCES, Member, Model, NodeId, Purpose, Side};

pub(super) fn govern(model: &Model, solution: &Solution) -> Governing {
    let members: Vec<usize> = (0..model.members.len()).collect();
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
    let mut whole = Vec::new();
    let mut spans = vec![Vec::new(); member.spans.len()];
    for (purpose, combinations) in by_purpose(model) {
        let mut wholly = Best::new();
        let mut by_span: Vec<Best> = member.spans.iter().map(|_| Best::new()).collect();
        for combination in combinations {
            let fields: Vec<Fields> =
                segments.iter().map(|segment| combined(model, combination, segment)).collect();
            wholly.take(combination, segments, &fields);
            for (span, best) in member.spans.iter().zip(&mut by_span) {
                let inside = |segment: &Segment| {
                    let middle = 0.5 * (segment.from + segment.to);
                    span.from < middle && middle < span.to
                };
                let first = segments.iter().position(inside).unwrap_or(0);
                let count = segments[first..].iter().take_while(|segment| inside(segment)).count();
                best.take(
                    combination,
                    &segments[first..first + count],
                    &fields[first..first + count],
                );
            }
        }
        whole.extend(wholly.ended().map(|all| (purpose, all)));
        for (out, best) in spans.iter_mut().zip(by_span) {
            out.extend(best.ended().map(|all| (purpose, all)));
        }
    }
    GoverningMember { whole, spans }
}

fn combined(model: &Model, combination: usize, segment: &Segment) -> Fields {
    let factors = &model.combinations[combination].factors;
    superpose(factors.iter().map(|(case, factor)| (*factor, &segment.states[case.0])))
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
    fn take(&mut self, combination: usize, segments: &[Segment], fields: &[Fields]) {
        for (index, best) in self.effects.iter_mut().enumerate() {
            let stretches: Vec<Stretch> = segments
                .iter()
                .zip(fields)
                .map(|(segment, fields)| Stretch {
                    from: segment.from,
                    to: segment.to,
                    polynomial: fields.0[index],
                })
                .collect();
            let Some((greatest, least)) = extremes(&stretches) else { continue };
            let scale = stretches.iter().map(bound).fold(0.0, f64::max);
            let here = |found: &Found| Extreme {
                value: found.value,
                x: Some(found.x),
                side: found.side,
                combination,
                with: forces(segments, fields, found),
                next: None,
            };
            match best {
                None => {
                    *best = Some((
                        Standing { sign: 1.0, scale, best: here(&greatest) },
                        Standing { sign: -1.0, scale, best: here(&least) },
                    ));
                }
                Some((high, low)) => {
                    high.meet(here(&greatest), scale);
                    low.meet(here(&least), scale);
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
    /// A challenger must win by more than round-off: ties stay with the earlier combination.
    fn meet(&mut self, challenger: Extreme, scale: f64) {
        self.scale = self.scale.max(scale);
        let margin = FLAT * self.scale;
        let runner =
            |extreme: &Extreme| Runner { value: extreme.value, combination: extreme.combination };
        if self.sign * (challenger.value - self.best.value) > margin {
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

/// The six internal forces at a place found.
fn forces(segments: &[Segment], fields: &[Fields], found: &Found) -> [f64; FORCES] {
    let before = found.side == Some(Side::Before);
    let place = segments
        .iter()
        .position(|segment| if before { found.x <= segment.to } else { found.x < segment.to })
        .unwrap_or(segments.len() - 1);
    let s = found.x - segments[place].from;
    std::array::from_fn(|k| evaluate(&fields[place].0[k], s))
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
                let mut with = [0.0; 6];
                for (case, factor) in &model.combinations[*combination].factors {
                    for k in 0..6 {
                        with[k] += factor * node.reaction[case.0][k];
                    }
                }
                let scale = with.iter().fold(0.0_f64, |most, value| most.max(value.abs()));
                for (k, best) in standing.iter_mut().enumerate() {
                    let here = || Extreme {
                        value: with[k],
                        x: None,
                        side: None,
                        combination: *combination,
                        with,
                        next: None,
                    };
                    match best {
                        None => {
                            *best = Some((
                                Standing { sign: 1.0, scale, best: here() },
                                Standing { sign: -1.0, scale, best: here() },
                            ));
                        }
                        Some((high, low)) => {
                            high.meet(here(), scale);
                            low.meet(here(), scale);
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
