//! Settling: results are rounded once, in memory, so that a Record equals itself written and read, and
//! so that round-off does not print.
//!
//! A value below [`NOTHING`] of the largest of its effect in the structure becomes 0 (a coefficient c_k is
//! judged by |c_k| (to − from)^k); the rest keeps 12 significant digits. Relative errors of the self-check
//! are round-off through and through: of them only the power of ten is kept.

use super::{
    ExtremeRecord, ExtremesRecord, Map, MemberRecord, Record, SegmentRecord, StepRecord,
    StepValueRecord, WorkingLineRecord,
};
use crate::analysis::{Chord, Fields, Segment, deflections};
use crate::model::{EFFECTS, FORCES, STORED};

/// Share of the largest value that counts as nothing.
const NOTHING: f64 = 1e-11;
/// Relative errors below this are all alike.
const LEAST_ERROR: f64 = 1e-14;

/// Largest size of every effect in one structure.
type Scales = [f64; EFFECTS.len()];

impl Record {
    /// Rounds all results; doing it twice changes nothing.
    pub(super) fn settle(&mut self) {
        let mut structures = std::mem::take(&mut self.model.structures);
        for member in structures.values_mut().flat_map(|structure| structure.members.values_mut()) {
            settle_places(member);
        }
        for structure in structures.values() {
            let scales = self.scales(structure.members.keys());
            for (name, member) in &structure.members {
                self.settle_member(name, member, &scales);
            }
            self.settle_nodes(structure.nodes.keys());
        }
        self.model.structures = structures;
        self.settle_governing_deflections();
        self.settle_self_check();
        self.settle_checks();
        for case in self.model.cases.values_mut() {
            for resultant in case.resultant.values_mut() {
                settle_vector(resultant);
            }
            for load in &mut case.loads {
                let places = load.from.iter_mut().chain(&mut load.to).chain(&mut load.at);
                places.for_each(|x| *x = rounded(*x));
                let scale = largest(load.start.iter().chain(&load.end));
                settle_values(load.start.iter_mut().chain(&mut load.end), scale);
                let scale = largest(&load.moment);
                settle_values(&mut load.moment, scale);
            }
        }
    }

    fn scales<'n>(&self, members: impl Iterator<Item = &'n String>) -> Scales {
        let mut scales = [0.0_f64; EFFECTS.len()];
        for result in members.filter_map(|name| self.results.members.get(name)) {
            for segment in &result.segments {
                let length = segment.to - segment.from;
                for fields in segment.fields.values() {
                    for (scale, polynomial) in scales.iter_mut().zip(&fields.0) {
                        let mut power = 1.0;
                        for c in polynomial {
                            *scale = scale.max(c.abs() * power);
                            power *= length;
                        }
                    }
                }
            }
        }
        scales
    }

    fn settle_member(&mut self, name: &str, member: &MemberRecord, scales: &Scales) {
        let Some(result) = self.results.members.get_mut(name) else { return };
        for segment in &mut result.segments {
            (segment.from, segment.to) = (rounded(segment.from), rounded(segment.to));
            let length = segment.to - segment.from;
            for fields in segment.fields.values_mut() {
                for (polynomial, scale) in fields.0.iter_mut().zip(scales).take(STORED) {
                    let mut power = 1.0;
                    for c in polynomial {
                        *c = if c.abs() * power < NOTHING * scale { 0.0 } else { rounded(*c) };
                        power *= length;
                    }
                }
            }
        }
        fill_deflections(member, &mut result.segments);
        let all = std::iter::once(&mut result.governing)
            .chain(result.spans.iter_mut().map(|span| &mut span.governing));
        for purpose in all.flat_map(|governing| governing.values_mut()) {
            for (effect, extremes) in EFFECTS.iter().zip(purpose.values_mut()) {
                settle_extremes(extremes, scales[effect.index()], |k| scales[k]);
            }
        }
    }

    fn settle_nodes<'n>(&mut self, nodes: impl Iterator<Item = &'n String> + Clone) {
        let mut displacements = [0.0_f64; 2];
        let mut forces = [0.0_f64; 2];
        for result in nodes.clone().filter_map(|name| self.results.nodes.get(name)) {
            for (values, scales) in
                [(&result.displacement, &mut displacements), (&result.reaction, &mut forces)]
            {
                for vector in values.values() {
                    scales[0] = scales[0].max(largest(&vector[..3]));
                    scales[1] = scales[1].max(largest(&vector[3..]));
                }
            }
        }
        for name in nodes {
            if let Some(result) = self.results.nodes.get_mut(name) {
                for (values, scales) in
                    [(&mut result.displacement, displacements), (&mut result.reaction, forces)]
                {
                    for vector in values.values_mut() {
                        settle_values(&mut vector[..3], scales[0]);
                        settle_values(&mut vector[3..], scales[1]);
                    }
                }
            }
            for purpose in self.results.reactions.values_mut() {
                for (component, extremes) in purpose.get_mut(name).into_iter().flatten() {
                    let own = forces[usize::from(component.starts_with('R'))];
                    settle_extremes(extremes, own, |k| forces[usize::from(k >= 3)]);
                }
            }
        }
    }

    /// Deflections follow from displacements, so that what is left of them where nothing moves is judged
    /// by the displacements it came from.
    fn settle_governing_deflections(&mut self) {
        for result in self.results.members.values_mut() {
            let all = std::iter::once(&mut result.governing)
                .chain(result.spans.iter_mut().map(|span| &mut span.governing));
            for purpose in all.flat_map(|governing| governing.values_mut()) {
                for (deflection, displacement) in [("d_y", "v"), ("d_z", "w")] {
                    let scale = purpose.get(displacement).map_or(0.0, |extremes| {
                        extremes.max.value.abs().max(extremes.min.value.abs())
                    });
                    if let Some(extremes) = purpose.get_mut(deflection) {
                        for extreme in [&mut extremes.max, &mut extremes.min] {
                            if extreme.value.abs() < NOTHING * scale {
                                extreme.value = 0.0;
                            }
                        }
                    }
                }
            }
        }
    }

    /// Values of checks are free of round-off already; they keep twelve digits like all others.
    fn settle_checks(&mut self) {
        for check in &mut self.checks {
            let numbers = [&mut check.x, &mut check.utilisation].into_iter().flatten();
            let next = check.next.iter_mut().flat_map(|next| [&mut next.x, &mut next.utilisation]);
            numbers.chain(next.flatten()).for_each(|value| *value = rounded(*value));
            let steps = check.steps.iter_mut().chain(&mut check.validity);
            steps.chain(&mut check.demand).chain(&mut check.capacity).for_each(settle_step);
        }
        for line in self.workings.iter_mut().flat_map(|working| &mut working.lines) {
            if let WorkingLineRecord::Step(step) = line {
                settle_step(step);
            }
        }
    }

    fn settle_self_check(&mut self) {
        for structure in self.self_check.structures.values_mut() {
            for balance in structure.balances.values_mut() {
                settle_vector(&mut balance.loads);
                settle_vector(&mut balance.reactions);
                balance.relative = power_of_ten(balance.relative);
            }
            for residual in structure.residuals.values_mut() {
                residual.relative = power_of_ten(residual.relative);
            }
            let scale = largest(structure.energies.values().map(|energy| &energy.strain));
            for energy in structure.energies.values_mut() {
                settle_values([&mut energy.external, &mut energy.strain], scale);
                energy.relative = power_of_ten(energy.relative);
            }
        }
        if let Some(independent) = &mut self.self_check.independent {
            for difference in independent.differences.values_mut() {
                *difference = power_of_ten(*difference);
            }
        }
        for energies in self.self_check.strain_energy.values_mut() {
            let scale = largest(energies.values());
            settle_values(energies.values_mut(), scale);
        }
    }
}

fn settle_step(step: &mut StepRecord) {
    let values = step.values.iter_mut().map(|(_, value)| value);
    for value in values.chain([&mut step.value]) {
        if let StepValueRecord::Number(number, _) = value {
            *number = rounded(*number);
        }
    }
}

/// Places along a member are rounded alike wherever they stand, so that a governing place at a jump is
/// still on the side that it names.
fn settle_places(member: &mut MemberRecord) {
    member.length = rounded(member.length);
    let stations = member.stations.iter_mut();
    let hinges = member.hinges.iter_mut().map(|hinge| &mut hinge.x);
    let spans = member.spans.iter_mut().flat_map(|span| [&mut span.from, &mut span.to]);
    stations.chain(hinges).chain(spans).for_each(|x| *x = rounded(*x));
}

/// Fills `d_y` and `d_z` from the displacements, as the analysis does.
pub(super) fn fill_deflections(member: &MemberRecord, segments: &mut [SegmentRecord]) {
    let Some(first) = segments.first() else { return };
    let states: Vec<String> = first.fields.keys().cloned().collect();
    let mut plain: Vec<Segment> = segments
        .iter_mut()
        .map(|segment| Segment {
            from: segment.from,
            to: segment.to,
            states: std::mem::take(&mut segment.fields).into_values().collect(),
        })
        .collect();
    let spans: Vec<Chord> = member
        .spans
        .iter()
        .map(|span| Chord { from: span.from, to: span.to, free: span.free })
        .collect();
    deflections(&spans, member.length, &mut plain);
    for (segment, plain) in segments.iter_mut().zip(plain) {
        segment.fields = states.iter().cloned().zip(plain.states).collect::<Map<Fields>>();
    }
}

fn settle_extremes(extremes: &mut ExtremesRecord, own: f64, with: impl Fn(usize) -> f64) {
    for extreme in [&mut extremes.max, &mut extremes.min] {
        settle_extreme(extreme, own, &with);
    }
}

fn settle_extreme(extreme: &mut ExtremeRecord, own: f64, with: &impl Fn(usize) -> f64) {
    settle_values([&mut extreme.value], own);
    if let Some(next) = &mut extreme.next {
        settle_values([&mut next.value], own);
    }
    if let Some(x) = &mut extreme.x {
        *x = rounded(*x);
    }
    for k in 0..FORCES {
        settle_values([&mut extreme.with[k]], with(k));
    }
}

/// Force and moment part, each by its own largest.
fn settle_vector(vector: &mut [f64; 6]) {
    for part in [0..3, 3..6] {
        let scale = largest(&vector[part.clone()]);
        settle_values(&mut vector[part], scale);
    }
}

fn settle_values<'v>(values: impl IntoIterator<Item = &'v mut f64>, scale: f64) {
    for value in values {
        *value = if value.abs() < NOTHING * scale { 0.0 } else { rounded(*value) };
    }
}

fn largest<'v>(values: impl IntoIterator<Item = &'v f64>) -> f64 {
    values.into_iter().fold(0.0, |most, value| most.max(value.abs()))
}

/// Twelve significant digits; never −0.
#[must_use]
pub fn rounded(value: f64) -> f64 {
    if value == 0.0 {
        return 0.0;
    }
    // Printing and reading is exact to the last bit, which scaling by powers of ten is not.
    format!("{value:.11e}").parse().unwrap_or(value)
}

/// The power of ten at or above a relative error, 0 below [`LEAST_ERROR`].
fn power_of_ten(error: f64) -> f64 {
    if !error.is_finite() || error >= 1.0 {
        return error;
    }
    let mut power = 0.0;
    let mut next = LEAST_ERROR;
    while error > power {
        power = next;
        next = rounded(next * 10.0);
    }
    power
}
