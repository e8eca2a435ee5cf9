//! Checks on members and spans: the worst place in every combination.

use super::evaluator::{Evaluator, Level, Problem};
use super::fields::{Along, along};
use super::search::{PARTS, REFINED, SPLITS, Sample, bounds, dips, length, peaks, refined};
use super::weigh::{Spot, Weighing, not_applicable};
use super::{CheckResult, Task};
use crate::calc::Value;
use crate::diagnostic::Diagnostic;
use crate::model::{CaseId, Effect, Member, MemberId, Side, Source, Span};
use crate::quantity::Dimension;

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

/// The search in one entry.
struct Look<'l> {
    along: &'l Along,
    entry: usize,
    piece: usize,
    /// To which places are refined, m.
    width: f64,
    fresh: Level,
    /// The greatest utilisation so far.
    best: f64,
    weighing: &'l mut Weighing,
    place: &'l mut Option<f64>,
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
                    let span = self.span(along, piece);
                    let length = span.map_or(self.member.length, |span| span.to - span.from);
                    Value::number(length, Dimension::LENGTH)
                }
                Source::Cantilever => {
                    Value::Truth(self.span(along, piece).is_some_and(|span| span.is_cantilever()))
                }
                _ => continue,
            };
            self.evaluator.readings[index] = value;
        }
    }

    /// The span that holds a piece.
    fn span(&self, along: &Along, piece: usize) -> Option<&Span> {
        let of = &along.pieces[piece];
        let span = self.member.span_at(0.5 * (of.from + of.to))?;
        Some(&self.member.spans[span])
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
        let width = REFINED * length(&along);
        let mut look = Look {
            along: &along,
            entry,
            piece: 0,
            width,
            fresh: Level::Combination,
            best: f64::NEG_INFINITY,
            weighing,
            place,
        };
        for piece in 0..along.pieces.len() {
            look.piece = piece;
            for bracket in bounds(&along.pieces[piece]).windows(2) {
                self.bracket(&mut look, (bracket[0], bracket[1]), SPLITS)?;
            }
        }
        Ok(())
    }

    /// Looks for the worst place between two others. Where a condition or a formula turns to another branch on
    /// the way, both sides are looked at by themselves, at most `splits` times over.
    fn bracket(
        &mut self,
        look: &mut Look<'_>,
        (low, high): (f64, f64),
        splits: u32,
    ) -> Result<(), Problem> {
        let mut samples = Vec::with_capacity(PARTS as usize + 1);
        for part in 0..=PARTS {
            let x = if part == PARTS {
                high
            } else {
                low + (high - low) * f64::from(part) / f64::from(PARTS)
            };
            samples.push(self.at(look, x)?);
        }
        if splits > 0
            && let Some((before, after)) = self.turn(look, &samples)?
        {
            for (from, to) in [(low, before), (after, high)] {
                if to - from > look.width {
                    self.bracket(look, (from, to), splits - 1)?;
                }
            }
            return Ok(());
        }
        for (from, to) in peaks(&samples, look.best) {
            refined((from, to), look.width, |x| {
                Ok(self.at(look, x)?.utilisation.unwrap_or(f64::NEG_INFINITY))
            })?;
        }
        Ok(())
    }

    /// Places just before and behind the first turn to another branch.
    fn turn(
        &mut self,
        look: &mut Look<'_>,
        samples: &[Sample],
    ) -> Result<Option<(f64, f64)>, Problem> {
        let seen = samples.windows(2).find(|pair| !pair[0].is_like(&pair[1]));
        if let Some([before, after]) = seen {
            let (mut low, mut high) = (before.x, after.x);
            while high - low > look.width {
                let middle = 0.5 * (low + high);
                let same = self.at(look, middle)?.is_like(before);
                *(if same { &mut low } else { &mut high }) = middle;
            }
            return Ok(Some((low, high)));
        }
        // Turned and back again between two samples.
        for (turn, sign, around) in dips(samples) {
            let mut found = None;
            refined(around, look.width, |x| {
                let sample = self.at(look, x)?;
                if !sample.is_like(&samples[0]) {
                    found = Some(x);
                }
                Ok(sample.margin(turn).map_or(f64::INFINITY, |margin| -sign * margin))
            })?;
            if let Some(x) = found {
                return Ok(Some((x, x)));
            }
        }
        Ok(None)
    }

    /// Evaluates at one place.
    fn at(&mut self, look: &mut Look<'_>, x: f64) -> Result<Sample, Problem> {
        *look.place = Some(x);
        self.set_point(look.along, look.piece, x);
        let said = self.evaluator.run(look.fresh)?;
        look.fresh = Level::Point;
        let piece = &look.along.pieces[look.piece];
        let side = if x <= piece.from && look.piece > 0 {
            Some(Side::After)
        } else if x >= piece.to && look.piece + 1 < look.along.pieces.len() {
            Some(Side::Before)
        } else {
            None
        };
        let utilisation = look.weighing.take(look.entry, Some(x), side, said);
        look.best = look.best.max(utilisation.unwrap_or(f64::NEG_INFINITY));
        Ok(Sample { x, utilisation, turns: self.evaluator.turns.clone() })
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
