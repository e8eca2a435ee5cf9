//! Working blocks: their steps and agreements, with results of the analysis.

use super::weigh::EQUAL;
use super::{CheckResult, LineResult, Outcome, StepValue};
use crate::analysis::{Extremes, Governing, Segment, Solution, evaluate, on_member, superpose_one};
use crate::calc::Value;
use crate::diagnostic::Diagnostic;
use crate::model::{
    Agreement, Bound, CaseId, EFFECTS, Effect, MemberId, Model, NodeId, Of, Placed, Purpose, Query,
    Side, Slot, Source, State, WorkingLine,
};

pub(super) fn workings(
    model: &Model,
    solution: &Solution,
    governing: &Governing,
    checks: &[CheckResult],
) -> Result<Vec<Vec<Option<LineResult>>>, Vec<Diagnostic>> {
    let results = Results { model, solution, governing, checks };
    let mut problems = Vec::new();
    let mut out = Vec::new();
    let mut file = "";
    // Steps of the file so far.
    let mut steps: Vec<Value> = Vec::new();
    for working in &model.workings {
        if working.file != file {
            steps.clear();
            file = &working.file;
        }
        let mut lines = Vec::new();
        for line in &working.lines {
            let result = match line {
                WorkingLine::Remark(_) => Ok(None),
                WorkingLine::Step(step) => {
                    results.kept(&step.formula, &working.bound, &steps).map(|value| {
                        steps.push(value.value.clone());
                        Some(LineResult::Step(value))
                    })
                }
                WorkingLine::Agreement(agreement) => {
                    results.agreement(agreement, &working.bound, &steps).map(Some)
                }
            };
            match result {
                Ok(result) => lines.push(result),
                Err(problem) => {
                    problems.push(problem);
                    // What follows would only repeat it.
                    if matches!(line, WorkingLine::Step(_)) {
                        return Err(problems);
                    }
                }
            }
        }
        out.push(lines);
    }
    if problems.is_empty() { Ok(out) } else { Err(problems) }
}

struct Results<'r> {
    model: &'r Model,
    solution: &'r Solution,
    governing: &'r Governing,
    checks: &'r [CheckResult],
}

impl Results<'_> {
    fn kept(
        &self,
        formula: &Placed,
        bound: &[Option<Bound>],
        steps: &[Value],
    ) -> Result<StepValue, Diagnostic> {
        let readings: Result<Vec<Value>, Diagnostic> = formula
            .slots
            .iter()
            .map(|slot| match slot {
                Slot::Step(index) => Ok(steps[*index].clone()),
                Slot::Reading(index) => match &bound[*index] {
                    Some(bound) => self.read(&bound.source, formula),
                    None => Ok(Value::Truth(false)),
                },
            })
            .collect();
        let readings = readings?;
        let evaluation = formula.formula.evaluate(&readings).map_err(|error| {
            let place = formula.at(&error);
            Diagnostic::error("formula", error.message).at(place).hint(error.hint)
        })?;
        Ok(StepValue { value: evaluation.value, readings, taken: evaluation.taken })
    }

    fn read(&self, source: &Source, formula: &Placed) -> Result<Value, Diagnostic> {
        let query = match source {
            Source::Constant(value) => return Ok(value.clone()),
            Source::Result(query) => query,
            _ => return Ok(Value::Truth(false)),
        };
        let missing =
            || Diagnostic::error("formula", "there is no such result").at(formula.place.clone());
        let value = match query {
            Query::Effect { member, span, effect, of } => {
                self.effect(*member, *span, *effect, of).ok_or_else(missing)?
            }
            Query::Reaction { node, component, of } => {
                self.reaction(*node, *component, of).ok_or_else(missing)?
            }
            Query::Displacement { node, component, state } => {
                let solved = &self.solution.nodes[node.0].displacement;
                let factors = self.factors(*state);
                factors.iter().map(|(case, factor)| factor * solved[case.0][*component]).sum()
            }
            Query::Check(id) => self.utilisation(id, formula)?,
        };
        Ok(Value::number(value, query.kind().dimension()))
    }

    fn effect(&self, id: MemberId, span: Option<usize>, effect: Effect, of: &Of) -> Option<f64> {
        let member = &self.model[id];
        match of {
            Of::State(state, x, side) => {
                let mut factors = self.factors(*state);
                if matches!(state, State::Combination(_)) {
                    factors = on_member(self.model, member, &factors);
                }
                // At an end of a named span, the value on its side of the support is meant.
                let inside = |segment: &&Segment| {
                    let middle = 0.5 * (segment.from + segment.to);
                    span.is_none_or(|span| {
                        member.spans[span].from < middle && middle < member.spans[span].to
                    })
                };
                let mut segments = self.solution.members[id.0].segments.iter().filter(inside);
                let segment = match side {
                    Side::Before => segments.find(|segment| *x <= segment.to),
                    Side::After => segments.rfind(|segment| segment.from <= *x),
                }?;
                let terms = factors
                    .iter()
                    .map(|(case, factor)| (*factor, &segment.states[case.0].0[effect.index()]));
                Some(evaluate(&superpose_one(terms), x - segment.from))
            }
            Of::Greatest(purpose) | Of::Least(purpose) => {
                let of_member = &self.governing.members[id.0];
                let extremes = match span {
                    Some(span) => &of_member.spans[span],
                    None => &of_member.whole,
                };
                Some(which(&by_purpose(extremes, *purpose)?[effect.index()], of))
            }
        }
    }

    fn reaction(&self, node: NodeId, component: usize, of: &Of) -> Option<f64> {
        match of {
            Of::State(state, ..) => {
                let solved = &self.solution.nodes[node.0].reaction;
                let factors = self.factors(*state);
                Some(factors.iter().map(|(case, factor)| factor * solved[case.0][component]).sum())
            }
            Of::Greatest(purpose) | Of::Least(purpose) => {
                let mut all = self.governing.reactions.iter();
                let found = all.find(|(of, at, _)| of == purpose && *at == node)?;
                Some(which(&found.2[component], of))
            }
        }
    }

    fn factors(&self, state: State) -> Vec<(CaseId, f64)> {
        match state {
            State::Case(case) => vec![(case, 1.0)],
            State::Combination(index) => self.model.combinations[index].factors.clone(),
        }
    }

    /// The greatest utilisation of a check over its targets.
    fn utilisation(&self, id: &str, formula: &Placed) -> Result<f64, Diagnostic> {
        let of = |result: &&CheckResult| self.model.checks[result.check].id == id;
        let mut greatest: Option<f64> = None;
        for result in self.checks.iter().filter(of) {
            let value = result.governing.as_ref().and_then(|governing| governing.utilisation);
            match (value, result.outcome) {
                (Some(value), outcome) if outcome != Outcome::Deferred => {
                    greatest = Some(greatest.map_or(value, |so_far| so_far.max(value)));
                }
                _ => {
                    let message = format!("the check `{id}` has no utilisation");
                    let reason = result.reason.clone().unwrap_or_default();
                    return Err(Diagnostic::error("formula", message)
                        .at(formula.place.clone())
                        .label(format!("{}: {reason}", result.outcome.name())));
                }
            }
        }
        greatest.ok_or_else(|| {
            Diagnostic::error("formula", format!("the check `{id}` has no utilisation"))
                .at(formula.place.clone())
        })
    }

    fn agreement(
        &self,
        agreement: &Agreement,
        bound: &[Option<Bound>],
        steps: &[Value],
    ) -> Result<LineResult, Diagnostic> {
        let value = self.kept(&agreement.value, bound, steps)?;
        let with = self.kept(&agreement.with, bound, steps)?;
        let wrong =
            |message: String| Diagnostic::error("formula", message).at(agreement.origin.clone());
        let (Value::Number(a), Value::Number(b)) = (&value.value, &with.value) else {
            return Err(wrong("an agreement holds two quantities".to_owned()));
        };
        if a.dimension != b.dimension {
            return Err(wrong(format!(
                "{} cannot agree with {}",
                a.dimension.name_with_article(),
                b.dimension.name_with_article()
            )));
        }
        if b.value == 0.0 {
            return Err(wrong("the second value is zero: nothing is a share of it".to_owned()));
        }
        let difference = ((a.value - b.value) / b.value).abs();
        let agrees = difference <= agreement.tolerance + EQUAL;
        let outcome = if agrees { Outcome::Satisfied } else { Outcome::NotSatisfied };
        Ok(LineResult::Agreement { outcome, value, with, difference })
    }
}

fn by_purpose(
    all: &[(Purpose, [Extremes; EFFECTS.len()])],
    purpose: Purpose,
) -> Option<&[Extremes; EFFECTS.len()]> {
    all.iter().find(|(of, _)| *of == purpose).map(|(_, extremes)| extremes)
}

fn which(extremes: &Extremes, of: &Of) -> f64 {
    match of {
        Of::Least(_) => extremes.min.value,
        Of::Greatest(_) | Of::State(..) => extremes.max.value,
    }
}
