//! Checks and hand calculations, evaluated on the solution.
//!
//! Invariants
//! - A check is evaluated in every combination of its purpose, and along a member wherever the utilisation
//!   can be greatest; nothing that was not evaluated is satisfied.
//! - Outcomes are decided on unrounded values: satisfied means utilisation ≤ limit + 1e-9.
//! - A formula that cannot be evaluated is an error of the project, at its place; it has no outcome.
//! - Never rounds for printing, never reads the project file.

mod agreement;
mod evaluator;
mod fields;
mod loaded;
mod member;
mod node;
mod search;
mod structure;
mod weigh;

use rayon::prelude::*;

use crate::analysis::{Governing, Solution, on_member};
use crate::calc::Value;
use crate::diagnostic::Diagnostic;
use crate::model::{CaseId, Model, Nature, On, Side};

/// Everything that was checked.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Checked {
    /// By check and target, in order.
    pub checks: Vec<CheckResult>,
    /// By working block of the model, by its lines; `None` of a remark.
    pub workings: Vec<Vec<Option<LineResult>>>,
}

/// A check on one of its targets.
#[derive(Clone, Debug, PartialEq)]
pub struct CheckResult {
    /// Index into the model's checks.
    pub check: usize,
    /// Index into the check's targets.
    pub target: usize,
    pub outcome: Outcome,
    /// Why it is deferred, or not satisfied although its utilisation does not say so.
    pub reason: Option<String>,
    /// Where it governs; `None` where nothing could be evaluated.
    pub governing: Option<Evaluated>,
    /// The combinations that come next, worst first.
    pub next: Vec<Next>,
    /// How many more were evaluated.
    pub further: usize,
}

/// What came out, the best first.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Outcome {
    Satisfied,
    Deferred,
    NotSatisfied,
}

/// A check at its governing place, every step kept.
#[derive(Clone, Debug, PartialEq)]
pub struct Evaluated {
    /// Index into the model's combinations.
    pub combination: usize,
    /// Parts that act, of cases that act by span.
    pub loaded: Vec<CaseId>,
    /// Position along the member, m.
    pub x: Option<f64>,
    /// Set where the utilisation jumps at `x`.
    pub side: Option<Side>,
    /// Demand over capacity; `None` where the capacity is not above zero.
    pub utilisation: Option<f64>,
    pub steps: Vec<StepValue>,
    pub validity: Vec<StepValue>,
    pub demand: StepValue,
    pub capacity: StepValue,
}

/// A formula with what it read and gave.
#[derive(Clone, Debug, PartialEq)]
pub struct StepValue {
    pub value: Value,
    /// In the order of the formula's readings.
    pub readings: Vec<Value>,
    /// Branches taken, as [`crate::calc::Evaluation::taken`].
    pub taken: Vec<usize>,
}

/// Another combination with its own worst place.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Next {
    pub combination: usize,
    pub utilisation: f64,
    pub x: Option<f64>,
}

/// A line of a working block, evaluated.
#[derive(Clone, Debug, PartialEq)]
pub enum LineResult {
    Step(StepValue),
    Agreement {
        outcome: Outcome,
        value: StepValue,
        with: StepValue,
        /// Difference as a share of the second value.
        difference: f64,
    },
}

impl Outcome {
    /// The word of the record and the package.
    #[must_use]
    pub const fn name(self) -> &'static str {
        match self {
            Self::Satisfied => "satisfied",
            Self::NotSatisfied => "not satisfied",
            Self::Deferred => "deferred",
        }
    }
}

/// How the greatest utilisation along a member is found, for the package.
pub const METHOD: &str = "In every combination of its purpose a check is evaluated at both ends of every piece between nodes, load ends, \
extremes and zeros of the effects that it reads, and at seven points between. \
Where a formula or a condition turns to another branch on the way, that place is found by halving, and what lies before and behind it \
is looked at in the same manner. \
Around the greatest utilisations the place is refined to a millionth of the member's length by golden section.";

/// Evaluates every check and working block.
///
/// # Errors
/// Formulas that cannot be evaluated, each once, at their places.
pub fn check(
    model: &Model,
    solution: &Solution,
    governing: &Governing,
) -> Result<Checked, Vec<Diagnostic>> {
    let checks = checks(model, solution)?;
    let workings = agreement::workings(model, solution, governing, &checks)?;
    Ok(Checked { checks, workings })
}

/// Evaluates every check, without the hand calculations.
///
/// # Errors
/// As [`check`].
pub fn checks(model: &Model, solution: &Solution) -> Result<Vec<CheckResult>, Vec<Diagnostic>> {
    let scales = fields::scales(model, solution);
    let pairs: Vec<(usize, usize)> = model
        .checks
        .iter()
        .enumerate()
        .flat_map(|(check, content)| (0..content.targets.len()).map(move |target| (check, target)))
        .collect();
    let results: Vec<Result<CheckResult, Diagnostic>> = pairs
        .par_iter()
        .map(|(check, target)| {
            let task = Task::new(model, solution, &scales, *check, *target);
            let on = model.checks[*check].targets[*target].on;
            match on {
                On::Member { member, span } => member::check(&task, member, span),
                On::Node { node, relative_to } => node::check(&task, node, relative_to),
                On::Structure { structure, about } => structure::check(&task, structure, about),
            }
        })
        .collect();
    let mut found = Vec::new();
    let mut problems: Vec<Diagnostic> = Vec::new();
    for result in results {
        match result {
            Ok(result) => found.push(result),
            // A mistake in a formula shows on every target: once is enough.
            Err(problem) => {
                if problems.iter().all(|other| other.place != problem.place) {
                    problems.push(problem);
                }
            }
        }
    }
    if problems.is_empty() { Ok(found) } else { Err(problems) }
}

/// One check on one target.
struct Task<'t> {
    model: &'t Model,
    solution: &'t Solution,
    /// By structure and effect: the largest value that occurs, to tell round-off from nothing.
    scales: &'t fields::Scales,
    check: usize,
    target: usize,
    /// The combinations of the check's purpose, one entry for each choice of loaded spans.
    entries: Vec<Entry>,
}

/// A combination with one choice of loaded spans.
struct Entry {
    /// Index into the model's combinations.
    combination: usize,
    /// The factors that count.
    factors: Vec<(CaseId, f64)>,
    /// Parts that act, of cases that act by span.
    loaded: Vec<CaseId>,
}

impl<'t> Task<'t> {
    fn new(
        model: &'t Model,
        solution: &'t Solution,
        scales: &'t fields::Scales,
        check: usize,
        target: usize,
    ) -> Self {
        let content = &model.checks[check];
        let on = content.targets[target].on;
        let mut patterns = loaded::Patterns::new(model, solution, on);
        let entries = model
            .combinations
            .iter()
            .enumerate()
            .filter(|(_, combination)| content.purposes.contains(&combination.purpose))
            .map(|(index, combination)| {
                let counts =
                    |case: CaseId| !content.variable_only || is_variable(model[case].nature);
                let factors = combination.factors.iter().filter(|(case, _)| counts(*case));
                let factors: Vec<(CaseId, f64)> = factors.copied().collect();
                match on {
                    On::Member { member, .. } => {
                        (index, on_member(model, &model[member], &factors))
                    }
                    On::Node { .. } | On::Structure { .. } => (index, factors),
                }
            })
            // A combination without a variable action has nothing to say about them.
            .filter(|(_, factors)| !factors.is_empty())
            .flat_map(|(combination, factors)| patterns.entries(combination, &factors))
            .collect();
        Self { model, solution, scales, check, target, entries }
    }
}

/// Actions that vary in time; permanent ones, earth and settlement do not.
#[must_use]
pub const fn is_variable(nature: Nature) -> bool {
    !matches!(nature, Nature::Permanent | Nature::Earth | Nature::Settlement)
}
