//! Checks on nodes: reactions and displacements.

use super::evaluator::{Evaluator, Level, Problem};
use super::fields::{bound, settled};
use super::weigh::{Weighing, not_applicable};
use super::{CheckResult, Task, is_variable};
use crate::calc::Value;
use crate::diagnostic::Diagnostic;
use crate::model::{CaseId, Duration, NodeId, On, Source};
use crate::quantity::Dimension;

pub(super) fn check(
    task: &Task<'_>,
    node: NodeId,
    relative_to: Option<NodeId>,
) -> Result<CheckResult, Diagnostic> {
    by_combination(task, |source, entry, factors| {
        let reaction = || reaction(task, node, factors);
        let up = || global(task, node, reaction())[2];
        let force = |value: f64| Value::number(value, Dimension::FORCE);
        Ok(match source {
            Source::Duration => duration(task, entry)?,
            Source::Reaction(component) => {
                let dimension = if *component < 3 { Dimension::FORCE } else { Dimension::MOMENT };
                Value::number(reaction()[*component], dimension)
            }
            Source::Up => force(up().max(0.0)),
            Source::Down => force((-up()).max(0.0)),
            Source::Horizontal => {
                let [x, y, _] = global(task, node, reaction());
                force(libm::hypot(x, y))
            }
            Source::Displacement(component) => {
                let of = |node: NodeId| displacement(task, node, *component, factors);
                let value = of(node) - relative_to.map_or(0.0, of);
                let dimension = if *component < 3 { Dimension::LENGTH } else { Dimension::NONE };
                Value::number(value, dimension)
            }
            _ => Value::Truth(false),
        })
    })
}

/// A check whose readings depend on the combination alone.
pub(super) fn by_combination(
    task: &Task<'_>,
    read: impl Fn(&Source, usize, &[(CaseId, f64)]) -> Result<Value, Problem>,
) -> Result<CheckResult, Diagnostic> {
    if let Some(result) = not_applicable(task) {
        return Ok(result);
    }
    let mut evaluator = Evaluator::new(task);
    let set = |evaluator: &mut Evaluator<'_>, entry: usize| -> Result<(), Problem> {
        let factors = &task.entries[entry].factors;
        for index in 0..evaluator.sources.len() {
            let source = evaluator.sources[index];
            if !matches!(source, Source::Constant(_)) {
                evaluator.readings[index] = read(source, entry, factors)?;
            }
        }
        Ok(())
    };
    let mut weighing = Weighing::new();
    for entry in 0..task.entries.len() {
        weighing.begin();
        let said = set(&mut evaluator, entry)
            .and_then(|()| evaluator.run(Level::Combination))
            .map_err(|problem| problem.on(task, Some(entry), None))?;
        weighing.take(entry, None, None, said);
    }
    weighing.ended(task, |entry, _| {
        set(&mut evaluator, entry)
            .and_then(|()| evaluator.in_full(&task.entries[entry], None))
            .map_err(|problem| problem.on(task, Some(entry), None))
    })
}

/// Shortest duration among the cases that act on the target; what stays for good has the longest.
pub(super) fn duration(task: &Task<'_>, entry: usize) -> Result<Value, Problem> {
    let of = |(case, _): &(CaseId, f64)| {
        let case = &task.model[*case];
        case.duration.or((!is_variable(case.nature)).then_some(Duration::Permanent))
    };
    let factors = &task.entries[entry].factors;
    let acting = factors.iter().filter(|(case, _)| acts(task, *case)).filter_map(of).max();
    let duration = acting.or_else(|| factors.iter().filter_map(of).max());
    duration.map(|duration| Value::word(duration.name())).ok_or_else(|| {
        let check = &task.model.checks[task.check];
        let combination = &task.model.combinations[task.entries[entry].combination];
        let message = format!("no load case of {} states its `duration`", combination.number);
        Problem::whole(&check.demand, message)
    })
}

/// A case does something to the target.
fn acts(task: &Task<'_>, case: CaseId) -> bool {
    let solution = task.solution;
    let moves = |node: &NodeId| {
        let node = &solution.nodes[node.0];
        let reaction =
            node.reaction.get(case.0).is_some_and(|all| all.iter().any(|v| v.abs() > 0.0));
        reaction || node.displacement[case.0].iter().any(|value| value.abs() > 0.0)
    };
    match task.model.checks[task.check].targets[task.target].on {
        On::Member { member, .. } => {
            let scales = &task.scales.effects[task.model[member].structure.0];
            solution.members[member.0].segments.iter().any(|segment| {
                let length = segment.to - segment.from;
                let fields = segment.states[case.0].0.iter().zip(scales);
                fields.into_iter().any(|(field, scale)| settled(bound(field, length), *scale) > 0.0)
            })
        }
        On::Node { node, .. } => moves(&node),
        On::Structure { structure, .. } => task.model[structure].nodes.iter().any(moves),
    }
}

/// Reaction along the support's own axes, N and N m.
pub(super) fn reaction(task: &Task<'_>, node: NodeId, factors: &[(CaseId, f64)]) -> [f64; 6] {
    let solved = &task.solution.nodes[node.0].reaction;
    let scales = task.scales.reactions[task.model[node].structure.0];
    std::array::from_fn(|k| {
        let terms =
            factors.iter().filter_map(|(case, factor)| Some(factor * solved.get(case.0)?[k]));
        settled(terms.sum(), scales[usize::from(k >= 3)])
    })
}

/// The forces of a reaction along global axes.
pub(super) fn global(task: &Task<'_>, node: NodeId, own: [f64; 6]) -> [f64; 3] {
    turned(task, node, [own[0], own[1], own[2]])
}

/// A vector along the support's own axes, along global ones.
pub(super) fn turned(task: &Task<'_>, node: NodeId, own: [f64; 3]) -> [f64; 3] {
    let Some(support) = &task.model[node].support else { return own };
    std::array::from_fn(|k| (0..3).map(|axis| support.axes[axis][k] * own[axis]).sum())
}

/// Component of the displacement along global axes, m or rad.
pub(super) fn displacement(
    task: &Task<'_>,
    node: NodeId,
    component: usize,
    factors: &[(CaseId, f64)],
) -> f64 {
    let solved = &task.solution.nodes[node.0].displacement;
    factors.iter().map(|(case, factor)| factor * solved[case.0][component]).sum()
}
