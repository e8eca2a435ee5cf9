//! One model → how it comes off, and which check governs.

use super::{Governing, Verdict};
use crate::analysis;
use crate::checks::{self, CheckResult, Outcome};
use crate::diagnostic::Diagnostic;
use crate::model::Model;

/// Shares of a limit that differ by less, relatively, are the same: the earlier check governs.
const EQUAL: f64 = 1e-9;

/// A candidate weighed.
pub(super) struct Weighed {
    pub(super) verdict: Verdict,
    /// By check and target; `None` where it was not evaluated.
    standings: Vec<Option<Standing>>,
}

/// A check on one target.
struct Standing {
    /// Utilisation over its limit; infinite where the capacity is not above zero.
    share: f64,
    governing: Governing,
}

/// Solves, checks and weighs.
pub(super) fn weigh(model: &Model) -> Result<Weighed, Vec<Diagnostic>> {
    let solution = analysis::solve(model)?;
    let results = checks::checks(model, &solution)?;
    let verdict = verdict(model, &results);
    if verdict == Verdict::Satisfied && !analysis::self_check(model, &solution).satisfied() {
        let message = "the self-check is out of tolerance: these values cannot be used";
        return Err(vec![Diagnostic::error("self-check", message)]);
    }
    let standings = results.iter().map(|result| standing(model, result)).collect();
    Ok(Weighed { verdict, standings })
}

fn verdict(model: &Model, results: &[CheckResult]) -> Verdict {
    let mut failing: Vec<String> = Vec::new();
    let mut deferred: Vec<(String, String)> = Vec::new();
    let mut covered: Vec<(String, String)> = Vec::new();
    let mut satisfied = 0;
    for result in results {
        let id = model.checks[result.check].id.clone();
        match result.outcome {
            Outcome::Satisfied => satisfied += 1,
            Outcome::NotSatisfied if failing.contains(&id) => {}
            Outcome::NotSatisfied => failing.push(id),
            Outcome::Deferred => {
                let by_basis = model.basis.deferred.iter().any(|by| by.checks.contains(&id));
                let list = if by_basis { &mut covered } else { &mut deferred };
                // Of a check on many targets the first reason is enough.
                if list.iter().all(|(other, _)| *other != id) {
                    list.push((id, result.reason.clone().unwrap_or_default()));
                }
            }
        }
    }
    if !failing.is_empty() {
        Verdict::NotSatisfied(failing)
    } else if !deferred.is_empty() {
        Verdict::Deferred(deferred)
    } else if satisfied > 0 {
        Verdict::Satisfied
    } else {
        // Deferrals excuse checks, but without any that holds nothing is shown.
        Verdict::Deferred(covered)
    }
}

fn standing(model: &Model, result: &CheckResult) -> Option<Standing> {
    let evaluated = result.governing.as_ref()?;
    let check = &model.checks[result.check];
    let share = evaluated.utilisation.map_or(f64::INFINITY, |value| value / check.limit);
    let governing = Governing {
        check: check.id.clone(),
        on: model.on_name(check.targets[result.target].on),
        combination: model.combinations[evaluated.combination].number.clone(),
        utilisation: evaluated.utilisation,
    };
    Some(Standing { share, governing })
}

/// By check and target: some candidates differ in it, so that it depends on the section tried.
pub(super) fn dependent<'w>(all: impl Iterator<Item = &'w Weighed> + Clone) -> Vec<bool> {
    let count = all.clone().map(|weighed| weighed.standings.len()).max().unwrap_or_default();
    let share = |weighed: &Weighed, k: usize| {
        weighed.standings.get(k).and_then(Option::as_ref).map(|standing| standing.share)
    };
    let same = |a: Option<f64>, b: Option<f64>| match (a, b) {
        (Some(a), Some(b)) => a.total_cmp(&b).is_eq() || (a - b).abs() <= EQUAL * a.abs(),
        (a, b) => a.is_none() && b.is_none(),
    };
    (0..count)
        .map(|k| {
            let mut shares = all.clone().map(|weighed| share(weighed, k));
            shares.next().is_some_and(|first| shares.any(|other| !same(first, other)))
        })
        .collect()
}

/// The check with the greatest share of its limit: where none fails, of those that depend on the section.
pub(super) fn governing(weighed: &Weighed, dependent: &[bool]) -> Option<Governing> {
    let worst = |counts: &dyn Fn(usize) -> bool| {
        let mut worst: Option<&Standing> = None;
        for (k, standing) in weighed.standings.iter().enumerate() {
            let Some(standing) = standing.as_ref().filter(|_| counts(k)) else { continue };
            let above = |so_far: f64| standing.share > so_far + EQUAL * so_far.abs();
            if worst.is_none_or(|worst| above(worst.share)) {
                worst = Some(standing);
            }
        }
        worst.map(|standing| standing.governing.clone())
    };
    let all = || worst(&|_| true);
    match weighed.verdict {
        Verdict::NotSatisfied(_) => all(),
        _ => worst(&|k| dependent[k]).or_else(all),
    }
}
