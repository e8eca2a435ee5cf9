//! The effects that a check reads, superposed for one combination.

use crate::analysis::{Polynomial, Segment, Solution, evaluate, superpose_one};
use crate::model::{CaseId, DeflectionFrom, EFFECTS, Effect, Member, Model, Side};

/// Share of the largest value of its effect in the structure below which a value is round-off.
const NOTHING: f64 = 1e-11;

/// By structure: the largest size of each effect, and of forces and moments of reaction.
pub(super) struct Scales {
    pub(super) effects: Vec<[f64; EFFECTS.len()]>,
    pub(super) reactions: Vec<[f64; 2]>,
}

pub(super) fn scales(model: &Model, solution: &Solution) -> Scales {
    let mut effects = vec![[0.0_f64; EFFECTS.len()]; model.structures.len()];
    for (member, solved) in model.members.iter().zip(&solution.members) {
        let scales = &mut effects[member.structure.0];
        for segment in &solved.segments {
            let length = segment.to - segment.from;
            for fields in &segment.states {
                for (scale, polynomial) in scales.iter_mut().zip(&fields.0) {
                    *scale = scale.max(bound(polynomial, length));
                }
            }
        }
    }
    let mut reactions = vec![[0.0_f64; 2]; model.structures.len()];
    for (node, solved) in model.nodes.iter().zip(&solution.nodes) {
        for vector in &solved.reaction {
            for (k, value) in vector.iter().enumerate() {
                let scale = &mut reactions[node.structure.0][usize::from(k >= 3)];
                *scale = scale.max(value.abs());
            }
        }
    }
    Scales { effects, reactions }
}

/// What a polynomial does not exceed over a length.
pub(super) fn bound(polynomial: &Polynomial, length: f64) -> f64 {
    polynomial.iter().rev().fold(0.0, |sum, c| sum * length + c.abs())
}

/// A value without its round-off.
pub(super) fn settled(value: f64, scale: f64) -> f64 {
    if value.abs() <= NOTHING * scale { 0.0 } else { value }
}

/// Pieces of a member with the polynomials of the effects asked for.
pub(super) struct Along {
    pub(super) pieces: Vec<PieceOf>,
    pub(super) effects: Vec<Effect>,
    scales: Vec<f64>,
}

/// A stretch on which every effect is one polynomial.
pub(super) struct PieceOf {
    pub(super) from: f64,
    pub(super) to: f64,
    /// By effect of [`Along::effects`].
    pub(super) polynomials: Vec<Polynomial>,
}

/// Superposes effects over a stretch of a member.
pub(super) fn along(
    segments: &[Segment],
    factors: &[(CaseId, f64)],
    effects: &[Effect],
    (from, to): (f64, f64),
    member: (&Member, DeflectionFrom),
    scales: &[f64; EFFECTS.len()],
) -> Along {
    let inside = |segment: &&Segment| {
        let middle = 0.5 * (segment.from + segment.to);
        from < middle && middle < to
    };
    let one = |segment: &Segment, effect: Effect| {
        let terms = factors
            .iter()
            .map(|(case, factor)| (*factor, &segment.states[case.0].0[effect.index()]));
        superpose_one(terms)
    };
    let (member, reference) = member;
    let polynomial = |segment: &Segment, effect: Effect| {
        let displacement = match effect {
            Effect::Dy => Effect::V,
            Effect::Dz => Effect::W,
            other => return one(segment, other),
        };
        match reference {
            DeflectionFrom::Chord => one(segment, effect),
            DeflectionFrom::Undeformed => one(segment, displacement),
            DeflectionFrom::SupportTangent => {
                let mut own = one(segment, displacement);
                let (at, offset, slope) = tangent(segments, segment, member, displacement, &one);
                own[0] -= offset + slope * (segment.from - at);
                own[1] -= slope;
                own
            }
        }
    };
    let pieces = segments
        .iter()
        .filter(inside)
        .map(|segment| PieceOf {
            from: segment.from,
            to: segment.to,
            polynomials: effects.iter().map(|effect| polynomial(segment, *effect)).collect(),
        })
        .collect();
    let scales = effects.iter().map(|effect| scales[effect.index()]).collect();
    Along { pieces, effects: effects.to_vec(), scales }
}

/// Place, displacement and rotation of the cross-section at the held end of the span that holds a segment.
fn tangent(
    segments: &[Segment],
    segment: &Segment,
    member: &Member,
    displacement: Effect,
    one: &impl Fn(&Segment, Effect) -> Polynomial,
) -> (f64, f64, f64) {
    let middle = 0.5 * (segment.from + segment.to);
    let span = member.spans.iter().find(|span| span.from <= middle && middle <= span.to);
    let Some(span) = span else { return (0.0, 0.0, 0.0) };
    let starts_free = span.free[0];
    let at = if starts_free { span.to } else { span.from };
    let held = segments
        .iter()
        .find(|segment| if starts_free { segment.to >= at } else { segment.from >= at });
    let Some(held) = held else { return (at, 0.0, 0.0) };
    let s = at - held.from;
    // θ_y = −w′ and θ_z = v′ of the cross-section: shear deformation counts as deflection.
    let (turn, sign) = match displacement {
        Effect::W => (Effect::ThetaY, -1.0),
        _ => (Effect::ThetaZ, 1.0),
    };
    (at, evaluate(&one(held, displacement), s), sign * evaluate(&one(held, turn), s))
}

impl Along {
    /// An effect inside one piece.
    pub(super) fn value(&self, piece: usize, effect: Effect, x: f64) -> f64 {
        let Some(index) = self.effects.iter().position(|other| *other == effect) else {
            return 0.0;
        };
        let piece = &self.pieces[piece];
        settled(evaluate(&piece.polynomials[index], x - piece.from), self.scales[index])
    }

    /// The piece that holds a position, on one side of it.
    pub(super) fn piece_at(&self, x: f64, side: Side) -> usize {
        let found = match side {
            Side::Before => self.pieces.iter().position(|piece| x <= piece.to),
            Side::After => self.pieces.iter().rposition(|piece| piece.from <= x),
        };
        found.unwrap_or(0)
    }

    /// Greatest and least of an effect.
    pub(super) fn extremes(&self, effect: Effect) -> (f64, f64) {
        let index = self.effects.iter().position(|other| *other == effect);
        let Some(index) = index else { return (0.0, 0.0) };
        let stretches: Vec<crate::analysis::Stretch> = self
            .pieces
            .iter()
            .map(|piece| crate::analysis::Stretch {
                from: piece.from,
                to: piece.to,
                polynomial: piece.polynomials[index],
            })
            .collect();
        let scale = self.scales[index];
        crate::analysis::extremes(&stretches).map_or((0.0, 0.0), |(greatest, least)| {
            (settled(greatest.value, scale), settled(least.value, scale))
        })
    }
}
