//! From all evaluations of a check on a target to its outcome.

use super::evaluator::Said;
use super::{CheckResult, Evaluated, Next, Outcome, Task};
use crate::diagnostic::Diagnostic;
use crate::model::Side;

/// Values that differ by less than this count as equal.
pub(super) const EQUAL: f64 = 1e-9;
/// How many combinations behind the governing one are listed.
const LISTED: usize = 3;

/// A place at which a check was evaluated.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Spot {
    pub(super) x: Option<f64>,
    pub(super) side: Option<Side>,
    /// Infinite where the capacity is not above zero.
    pub(super) utilisation: f64,
}

/// Keeps what the outcome needs.
pub(super) struct Weighing {
    /// The worst place of each entry, in order.
    worst: Vec<(usize, Spot)>,
    present: Option<(usize, Spot)>,
    /// First condition that did not hold: which, entry, place.
    invalid: Option<(usize, usize, Option<f64>)>,
    least: Option<(f64, usize, Option<f64>)>,
    largest: f64,
}

impl Weighing {
    pub(super) fn new() -> Self {
        Self { worst: Vec::new(), present: None, invalid: None, least: None, largest: 0.0 }
    }

    /// The evaluations that follow are of another entry.
    pub(super) fn begin(&mut self) {
        self.worst.extend(self.present.take());
    }

    /// Takes one evaluation; gives its utilisation.
    pub(super) fn take(
        &mut self,
        entry: usize,
        x: Option<f64>,
        side: Option<Side>,
        said: Said,
    ) -> Option<f64> {
        let (demand, capacity) = match said {
            Said::Values { demand, capacity } => (demand, capacity),
            Said::Invalid(condition) => {
                self.invalid = self.invalid.or(Some((condition, entry, x)));
                return None;
            }
        };
        self.largest = self.largest.max(demand.abs());
        if self.least.is_none_or(|(least, ..)| demand < least) {
            self.least = Some((demand, entry, x));
        }
        let utilisation = if capacity > 0.0 { demand / capacity } else { f64::INFINITY };
        let better = match self.present {
            None => true,
            Some((_, spot)) => utilisation > spot.utilisation + EQUAL * spot.utilisation.abs(),
        };
        if better {
            self.present = Some((entry, Spot { x, side, utilisation }));
        }
        Some(utilisation)
    }

    /// The governing entry with its place: ties stay with the earlier one.
    fn governing(&self) -> Option<usize> {
        let mut best: Option<usize> = None;
        for (index, (_, spot)) in self.worst.iter().enumerate() {
            let beats = best.is_none_or(|best| {
                let so_far = self.worst[best].1.utilisation;
                spot.utilisation > so_far + EQUAL * so_far.abs().max(EQUAL)
            });
            if beats {
                best = Some(index);
            }
        }
        best
    }

    /// The outcome; `in_full` evaluates once more with every step kept.
    pub(super) fn ended(
        mut self,
        task: &Task<'_>,
        in_full: impl FnOnce(usize, Spot) -> Result<Evaluated, Diagnostic>,
    ) -> Result<CheckResult, Diagnostic> {
        self.begin();
        let check = &task.model.checks[task.check];
        let deferred = |reason: String| deferred(task, reason);
        if task.entries.is_empty() {
            let what = if check.variable_only { " with a variable action" } else { "" };
            return Ok(deferred(format!(
                "there is no combination of purpose {}{what}",
                check.purpose
            )));
        }
        let place = |entry: usize, x: Option<f64>| {
            let number = &task.model.combinations[task.entries[entry].combination].number;
            let at = x.map(|x| format!(" at x = {} m", crate::quantity::print(x, 4)));
            format!("{number}{}", at.unwrap_or_default())
        };
        if let Some((condition, combination, x)) = self.invalid {
            let reason = &check.validity[condition].reason;
            return Ok(deferred(format!("{reason} ({})", place(combination, x))));
        }
        let Some(index) = self.governing() else {
            return Ok(deferred("nothing could be evaluated".to_owned()));
        };
        if let Some((least, combination, x)) = self.least
            && !check.one_sided
            && least < -EQUAL * self.largest
        {
            return Ok(deferred(format!(
                "the demand is below zero ({}): use abs(…), or say one_sided: true if that is meant",
                place(combination, x)
            )));
        }
        let (entry, spot) = self.worst[index];
        // Each combination once, with its worst choice of loaded spans.
        let governs = task.entries[entry].combination;
        let mut next: Vec<Next> = Vec::new();
        for (other, spot) in &self.worst {
            let combination = task.entries[*other].combination;
            let own = Next { combination, utilisation: spot.utilisation, x: spot.x };
            match next.iter_mut().find(|next| next.combination == combination) {
                _ if combination == governs => {}
                Some(known) if own.utilisation > known.utilisation => *known = own,
                Some(_) => {}
                None => next.push(own),
            }
        }
        // Stable, so that equal ones stay in order.
        next.sort_by(|a, b| b.utilisation.total_cmp(&a.utilisation));
        let further = next.len().saturating_sub(LISTED);
        next.truncate(LISTED);
        let mut governing = in_full(entry, spot)?;
        governing.side = spot.side;
        governing.utilisation = spot.utilisation.is_finite().then_some(spot.utilisation);
        let (outcome, reason) = match governing.utilisation {
            None => (Outcome::NotSatisfied, Some("the capacity is not above zero".to_owned())),
            Some(value) if value <= check.limit + EQUAL => (Outcome::Satisfied, None),
            Some(_) => (Outcome::NotSatisfied, None),
        };
        Ok(CheckResult {
            check: task.check,
            target: task.target,
            outcome,
            reason,
            governing: Some(governing),
            next,
            further,
        })
    }
}

/// The outcome of a check that does not apply to its target.
pub(super) fn not_applicable(task: &Task<'_>) -> Option<CheckResult> {
    let reason = task.model.checks[task.check].targets[task.target].deferred.clone()?;
    Some(deferred(task, reason))
}

fn deferred(task: &Task<'_>, reason: String) -> CheckResult {
    CheckResult {
        check: task.check,
        target: task.target,
        outcome: Outcome::Deferred,
        reason: Some(reason),
        governing: None,
        next: Vec::new(),
        further: 0,
    }
}
