//! Checks on members and spans: the worst place in every combination.

use super::evaluator::{Evaluator, Level, Problem};
use super::fields::{Along, along};
use super::search::{PARTS, REFINED, bounds, length, refined};
use super::weigh::{Spot, Weighing, not_applicable};
use super::{CheckResult, Task};
use crate::calc::Value;
use crate::diagnostic::Diagnostic;
use crate::model::{CaseId, Effect, Member, MemberId, Side, Source};
use crate::quantity::Dimension;

/// A bracket whose best sample, raised by this share of its spread, cannot beat the best so far is left
/// unrefined: between eight samples a smooth curve rises by a sixtieth of its spread.
const MARGIN: f64 = 0.25;

pub(super) fn check(
    task: &Task<'_>,
    id: MemberId,
    span: Option<usize>,
) -> Result<CheckResult, Diagnostic> {
    if let Some(result) = not_applicable(task) {
        return Ok(result);
    }
    let member = &task.model[id];
    let mut run = Run {
        task,
        member,
        id,
        stretch: span
            .map_or((0.0, member.length), |span| (member.spans[span].from, member.spans[span].to)),
        evaluator: Evaluator::new(task),
        effects: Vec::new(),
    };
    run.effects = effects(&run.evaluator.sources);
    let mut weighing = Weighing::new();
    for entry in 0..task.entries.len() {
        weighing.begin();
        let mut at = None;
        run.entry(entry, &mut weighing, &mut at)
            .map_err(|problem| problem.on(task, Some(entry), at))?;
    }
    weighing.ended(task, |entry, spot| {
        run.in_full(entry, spot).map_err(|problem| problem.on(task, Some(entry), spot.x))
    })
}

/// Every effect that is read, at the point or along the target.
fn effects(sources: &[&Source]) -> Vec<Effect> {
    let mut out = Vec::new();
    for source in sources {
        if let Source::Effect(effect)
        | Source::Greatest(effect)
        | Source::Least(effect)
        | Source::At(effect, _) = source
            && !out.contains(effect)
        {
            out.push(*effect);
        }
    }
    out
}

struct Run<'t> {
    task: &'t Task<'t>,
    member: &'t Member,
    id: MemberId,
    stretch: (f64, f64),
    evaluator: Evaluator<'t>,
    effects: Vec<Effect>,
}

impl Run<'_> {
    fn along(&self, factors: &[(CaseId, f64)]) -> Along {
        let task = self.task;
        along(
            &task.solution.members[self.id.0].segments,
            factors,
            &self.effects,
            self.stretch,
            (self.member, task.model.checks[task.check].deflection),
            &task.scales.effects[self.member.structure.0],
        )
    }

    /// Everything that is the same along the member.
    fn set_entry(&mut self, entry: usize, along: &Along) -> Result<(), Problem> {
        for index in 0..self.evaluator.sources.len() {
            let value = match self.evaluator.sources[index] {
                Source::Duration => super::node::duration(self.task, entry)?,
                Source::Greatest(effect) => number(*effect, along.extremes(*effect).0),
                Source::Least(effect) => number(*effect, along.extremes(*effect).1),
                Source::At(effect, share) => {
                    let x = self.stretch.0 + share * (self.stretch.1 - self.stretch.0);
                    let piece = along.piece_at(x, Side::Before);
                    number(*effect, along.value(piece, *effect, x))
                }
                _ => continue,
            };
            self.evaluator.readings[index] = value;
        }
        Ok(())
    }

    fn set_point(&mut self, along: &Along, piece: usize, x: f64) {
        for index in 0..self.evaluator.sources.len() {
            let value = match self.evaluator.sources[index] {
                Source::Effect(effect) => number(*effect, along.value(piece, *effect, x)),
                Source::Position => Value::number(x, Dimension::LENGTH),
                Source::Span => {
                    let of = &along.pieces[piece];
                    let middle = 0.5 * (of.from + of.to);
                    let span = self.member.span_at(middle).map(|span| self.member.spans[span]);
                    let length = span.map_or(self.member.length, |span| span.to - span.from);
                    Value::number(length, Dimension::LENGTH)
                }
                _ => continue,
            };
            self.evaluator.readings[index] = value;
        }
    }

    /// One entry; `place` is where it stands, for messages.
    fn entry(
        &mut self,
        entry: usize,
        weighing: &mut Weighing,
        place: &mut Option<f64>,
    ) -> Result<(), Problem> {
        let along = self.along(&self.task.entries[entry].factors);
        self.set_entry(entry, &along)?;
        if !self.evaluator.varies() {
            let said = self.evaluator.run(Level::Combination)?;
            weighing.take(entry, None, None, said);
            return Ok(());
        }
        let mut fresh = Level::Combination;
        let width = REFINED * length(&along);
        let mut best = f64::NEG_INFINITY;
        let last = along.pieces.len().saturating_sub(1);
        for piece in 0..along.pieces.len() {
            let bounds = bounds(&along.pieces[piece]);
            let (from, to) = (along.pieces[piece].from, along.pieces[piece].to);
            for bracket in bounds.windows(2) {
                let (low, high) = (bracket[0], bracket[1]);
                let mut samples: Vec<(f64, f64)> = Vec::new();
                for part in 0..=PARTS {
                    let x = if part == PARTS {
                        high
                    } else {
                        low + (high - low) * f64::from(part) / f64::from(PARTS)
                    };
                    *place = Some(x);
                    self.set_point(&along, piece, x);
                    let said = self.evaluator.run(fresh)?;
                    fresh = Level::Point;
                    let side = if x <= from && piece > 0 {
                        Some(Side::After)
                    } else if x >= to && piece < last {
                        Some(Side::Before)
                    } else {
                        None
                    };
                    if let Some(value) = weighing.take(entry, Some(x), side, said) {
                        samples.push((x, value));
                    }
                }
                let top = samples.iter().map(|(_, value)| *value).fold(f64::NEG_INFINITY, f64::max);
                let bottom = samples.iter().map(|(_, value)| *value).fold(f64::INFINITY, f64::min);
                best = best.max(top);
                if !top.is_finite() || top + MARGIN * (top - bottom) < best || top <= bottom {
                    continue;
                }
                let Some(peak) = samples.iter().position(|(_, value)| *value >= top) else {
                    continue;
                };
                let around = (
                    samples[peak.saturating_sub(1)].0,
                    samples[(peak + 1).min(samples.len() - 1)].0,
                );
                refined(around, width, |x| {
                    *place = Some(x);
                    self.set_point(&along, piece, x);
                    let said = self.evaluator.run(Level::Point)?;
                    let value = weighing.take(entry, Some(x), None, said);
                    Ok(value.unwrap_or(f64::NEG_INFINITY))
                })?;
            }
        }
        Ok(())
    }

    fn in_full(&mut self, entry: usize, spot: Spot) -> Result<super::Evaluated, Problem> {
        let task = self.task;
        let along = self.along(&task.entries[entry].factors);
        self.set_entry(entry, &along)?;
        if let Some(x) = spot.x {
            let piece = along.piece_at(x, spot.side.unwrap_or(Side::Before));
            self.set_point(&along, piece, x);
        }
        self.evaluator.in_full(&task.entries[entry], spot.x)
    }
}

fn number(effect: Effect, value: f64) -> Value {
    Value::number(value, effect.kind().dimension())
}
