//! Runs the formulas of one check for the values of its readings.

use super::{Entry, Evaluated, StepValue, Task};
use crate::calc::{CalcError, Turn, Value};
use crate::diagnostic::Diagnostic;
use crate::model::{Check, Placed, Slot, Source};
use crate::quantity::Quantity;

/// How often a value changes.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub(super) enum Level {
    Target,
    Combination,
    Point,
}

/// What one evaluation says.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) enum Said {
    /// Demand and capacity, SI.
    Values { demand: f64, capacity: f64 },
    /// Index of the condition that does not hold.
    Invalid(usize),
}

pub(super) struct Evaluator<'t> {
    check: &'t Check,
    pub(super) sources: Vec<&'t Source>,
    pub(super) readings: Vec<Value>,
    steps: Vec<Option<Value>>,
    levels: Vec<Level>,
    /// What decided, in the last run, on which branch the formulas that change along a member are.
    pub(super) turns: Vec<Turn>,
}

impl<'t> Evaluator<'t> {
    pub(super) fn new(task: &Task<'t>) -> Self {
        let check = &task.model.checks[task.check];
        let sources: Vec<&Source> =
            check.targets[task.target].bound.iter().flatten().map(|bound| &bound.source).collect();
        let readings = sources
            .iter()
            .map(|source| match source {
                Source::Constant(value) => value.clone(),
                _ => Value::Truth(false),
            })
            .collect();
        let mut levels: Vec<Level> = Vec::new();
        for step in &check.steps {
            let level = level_of(&step.formula, &sources, &levels);
            levels.push(level);
        }
        Self {
            check,
            sources,
            readings,
            steps: vec![None; check.steps.len()],
            levels,
            turns: Vec::new(),
        }
    }

    /// The utilisation can change along a member.
    pub(super) fn varies(&self) -> bool {
        let formulas = [&self.check.demand, &self.check.capacity];
        let validity = self.check.validity.iter().map(|condition| &condition.formula);
        formulas
            .into_iter()
            .chain(validity)
            .any(|formula| level_of(formula, &self.sources, &self.levels) == Level::Point)
    }

    /// Evaluates with the readings as they stand; `fresh` is what changed since the last time.
    pub(super) fn run(&mut self, fresh: Level) -> Result<Said, Problem> {
        for (step, level) in self.steps.iter_mut().zip(&self.levels) {
            if *level >= fresh {
                *step = None;
            }
        }
        self.turns.clear();
        // Conditions on what is read come first: they may keep a step from dividing by zero.
        for late in [false, true] {
            if late {
                self.run_steps()?;
            }
            for index in 0..self.check.validity.len() {
                let condition = &self.check.validity[index].formula;
                let reads_steps = condition.slots.iter().any(|slot| matches!(slot, Slot::Step(_)));
                if reads_steps == late && !self.truth(condition)? {
                    return Ok(Said::Invalid(index));
                }
            }
        }
        let demand = self.quantity(&self.check.demand)?;
        let capacity = self.quantity(&self.check.capacity)?;
        if demand.dimension != capacity.dimension {
            let message = format!(
                "the demand is {}, the capacity {}",
                demand.dimension.name_with_article(),
                capacity.dimension.name_with_article()
            );
            return Err(Problem::whole(&self.check.demand, message));
        }
        if !self.check.one_sided {
            // A demand below zero counts like a condition that does not hold.
            let (holds, margin) = (demand.value >= 0.0, demand.value);
            self.turns.push(Turn::Compared { holds, margin });
        }
        Ok(Said::Values { demand: demand.value, capacity: capacity.value })
    }

    fn run_steps(&mut self) -> Result<(), Problem> {
        for index in 0..self.steps.len() {
            if self.steps[index].is_none() {
                let formula = &self.check.steps[index].formula;
                let values = self.values(formula);
                let evaluation = formula
                    .formula
                    .evaluate(&values)
                    .map_err(|error| Problem::at(formula, error))?;
                if self.levels[index] == Level::Point {
                    self.turns.extend(evaluation.turns);
                }
                self.steps[index] = Some(evaluation.value);
            }
        }
        Ok(())
    }

    fn values(&self, formula: &Placed) -> Vec<Value> {
        let value = |slot: &Slot| match slot {
            Slot::Reading(index) => self.readings[*index].clone(),
            Slot::Step(index) => self.steps[*index].clone().unwrap_or(Value::Truth(false)),
        };
        formula.slots.iter().map(value).collect()
    }

    fn quantity(&mut self, formula: &Placed) -> Result<Quantity, Problem> {
        let traced = formula.formula.traced(&self.values(formula));
        let (quantity, turns) = traced.map_err(|error| Problem::at(formula, error))?;
        self.turns.extend(turns);
        Ok(quantity)
    }

    fn truth(&mut self, formula: &Placed) -> Result<bool, Problem> {
        let traced = formula.formula.truth(&self.values(formula));
        let (truth, turns) = traced.map_err(|error| Problem::at(formula, error))?;
        self.turns.extend(turns);
        Ok(truth)
    }

    /// Every step kept, at the readings as they stand.
    pub(super) fn in_full(&mut self, entry: &Entry, x: Option<f64>) -> Result<Evaluated, Problem> {
        self.run(Level::Target)?;
        let kept = |formula: &Placed| -> Result<StepValue, Problem> {
            let readings = self.values(formula);
            let evaluation =
                formula.formula.evaluate(&readings).map_err(|error| Problem::at(formula, error))?;
            Ok(StepValue { value: evaluation.value, readings, taken: evaluation.taken })
        };
        let steps: Result<_, Problem> =
            self.check.steps.iter().map(|step| kept(&step.formula)).collect();
        let validity: Result<_, Problem> =
            self.check.validity.iter().map(|condition| kept(&condition.formula)).collect();
        Ok(Evaluated {
            combination: entry.combination,
            loaded: entry.loaded.clone(),
            x,
            side: None,
            utilisation: None,
            steps: steps?,
            validity: validity?,
            demand: kept(&self.check.demand)?,
            capacity: kept(&self.check.capacity)?,
        })
    }
}

fn level_of(formula: &Placed, sources: &[&Source], steps: &[Level]) -> Level {
    let of_slot = |slot: &Slot| match slot {
        Slot::Step(index) => steps[*index],
        Slot::Reading(index) => match sources[*index] {
            Source::Constant(_) => Level::Target,
            Source::Effect(_) | Source::Position | Source::Span | Source::Cantilever => {
                Level::Point
            }
            _ => Level::Combination,
        },
    };
    formula.slots.iter().map(of_slot).max().unwrap_or(Level::Target)
}

/// A formula that cannot be evaluated.
pub(super) struct Problem {
    diagnostic: Diagnostic,
}

impl Problem {
    fn at(formula: &Placed, error: CalcError) -> Self {
        let place = formula.at(&error);
        let diagnostic = Diagnostic::error("formula", error.message).at(place).hint(error.hint);
        Self { diagnostic }
    }

    pub(super) fn whole(formula: &Placed, message: String) -> Self {
        Self { diagnostic: Diagnostic::error("formula", message).at(formula.place.clone()) }
    }

    /// With what was being evaluated.
    pub(super) fn on(self, task: &Task<'_>, entry: Option<usize>, x: Option<f64>) -> Diagnostic {
        let check = &task.model.checks[task.check];
        let target = task.model.on_name(check.targets[task.target].on);
        let state = entry
            .map(|entry| task.entries[entry].combination)
            .map(|index| format!(" in {}", task.model.combinations[index].number))
            .unwrap_or_default();
        let place =
            x.map(|x| format!(" at x = {} m", crate::quantity::print(x, 6))).unwrap_or_default();
        self.diagnostic.label(format!("check `{}` on {target}{state}{place}", check.id))
    }
}
