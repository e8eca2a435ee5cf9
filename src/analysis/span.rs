//! Deflections from the chord of the span.
//!
//! A span held at both ends: from the straight line between its displaced ends. A span with one free
//! end: from the undeformed line through its support, so that rotation at the support counts. Outside
//! any span the member's own ends take the place of the span's.

use super::{Segment, evaluate};
use crate::model::{Effect, Member};

/// Fills `d_y` and `d_z` of every state from `v` and `w`.
pub fn deflections(member: &Member, segments: &mut [Segment]) {
    let ends = (0.0, member.length, [false; 2]);
    let states = segments.first().map_or(0, |segment| segment.states.len());
    let reference: Vec<(f64, f64, [bool; 2])> = segments
        .iter()
        .map(|segment| {
            let middle = 0.5 * (segment.from + segment.to);
            member
                .spans
                .iter()
                .find(|span| span.from <= middle && middle <= span.to)
                .map_or(ends, |span| (span.from, span.to, span.free))
        })
        .collect();
    for state in 0..states {
        for (displacement, deflection) in [(Effect::V, Effect::Dy), (Effect::W, Effect::Dz)] {
            for index in 0..segments.len() {
                let (from, to, free) = reference[index];
                let start = at_start(segments, state, displacement, from);
                let end = at_end(segments, state, displacement, to);
                let (offset, slope) = match free {
                    [false, false] => (start, (end - start) / (to - from)),
                    [false, true] => (start, 0.0),
                    [true, false] => (end, 0.0),
                    [true, true] => (0.0, 0.0),
                };
                let segment = &mut segments[index];
                let mut own = segment.states[state].0[displacement.index()];
                own[0] -= offset + slope * (segment.from - from);
                own[1] -= slope;
                segment.states[state].0[deflection.index()] = own;
            }
        }
    }
}

fn at_start(segments: &[Segment], state: usize, effect: Effect, x: f64) -> f64 {
    segments
        .iter()
        .find(|segment| x < segment.to)
        .map_or(0.0, |segment| evaluate(&segment.states[state].0[effect.index()], x - segment.from))
}

fn at_end(segments: &[Segment], state: usize, effect: Effect, x: f64) -> f64 {
    segments
        .iter()
        .rev()
        .find(|segment| segment.from < x)
        .map_or(0.0, |segment| evaluate(&segment.states[state].0[effect.index()], x - segment.from))
}
