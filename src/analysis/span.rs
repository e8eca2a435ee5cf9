//! Deflections from the chord of the span.
//!
//! A span held at both ends: from the straight line between its displaced ends. A span with one free
//! end: from the undeformed line through its support, so that rotation at the support counts. Outside
//! any span the member's own ends take the place of the span's.

use super::{Segment, evaluate};
use crate::model::{Effect, Span};

/// What the deflections of a stretch are measured from.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Chord {
    /// Positions along the member, m.
    pub from: f64,
    pub to: f64,
    /// The start / the end is free.
    pub free: [bool; 2],
}

/// Fills `d_y` and `d_z` of every state from `v` and `w`, given the spans of a member and its length.
pub fn deflections(spans: &[Chord], length: f64, segments: &mut [Segment]) {
    let whole = Chord { from: 0.0, to: length, free: [false; 2] };
    let states = segments.first().map_or(0, |segment| segment.states.len());
    let reference: Vec<Chord> = segments
        .iter()
        .map(|segment| {
            let middle = 0.5 * (segment.from + segment.to);
            let holds = |span: &&Chord| span.from <= middle && middle <= span.to;
            spans.iter().find(holds).copied().unwrap_or(whole)
        })
        .collect();
    for state in 0..states {
        for (displacement, deflection) in [(Effect::V, Effect::Dy), (Effect::W, Effect::Dz)] {
            for index in 0..segments.len() {
                let Chord { from, to, free } = reference[index];
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

impl From<&Span> for Chord {
    fn from(span: &Span) -> Self {
        Self { from: span.from, to: span.to, free: span.free }
    }
}
