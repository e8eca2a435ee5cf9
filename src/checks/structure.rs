//! Checks on a structure as a whole: sums of reactions, overturning, largest displacements.

use super::node::{by_combination, displacement, duration, global, reaction, turned};
use super::{CheckResult, Task};
use crate::calc::Value;
use crate::diagnostic::Diagnostic;
use crate::model::{CaseId, Nature, NodeId, Source, StructureId};
use crate::quantity::Dimension;

pub(super) fn check(
    task: &Task<'_>,
    structure: StructureId,
    about: Option<NodeId>,
) -> Result<CheckResult, Diagnostic> {
    by_combination(task, |source, entry, factors| {
        Ok(match source {
            Source::Duration => duration(task, entry)?,
            Source::SumOfReactions(component) => {
                let dimension = if *component < 3 { Dimension::FORCE } else { Dimension::MOMENT };
                Value::number(sum(task, structure, factors)[*component], dimension)
            }
            Source::LargestDisplacement(component) => {
                let nodes = &task.model[structure].nodes;
                let sizes = nodes.iter().map(|node| displacement(task, *node, *component, factors));
                Value::number(sizes.map(f64::abs).fold(0.0, f64::max), Dimension::LENGTH)
            }
            Source::Stabilising | Source::Overturning => {
                let both = about.map_or([0.0; 2], |edge| moments(task, structure, edge, factors));
                let which = usize::from(matches!(source, Source::Overturning));
                Value::number(both[which], Dimension::MOMENT)
            }
            _ => Value::Truth(false),
        })
    })
}

/// Sum of all reactions about the global origin: X Y Z, then moments about X Y Z.
fn sum(task: &Task<'_>, structure: StructureId, factors: &[(CaseId, f64)]) -> [f64; 6] {
    let mut sum = [0.0; 6];
    for node in &task.model[structure].nodes {
        if task.model[*node].support.is_none() {
            continue;
        }
        let own = reaction(task, *node, factors);
        let force = global(task, *node, own);
        let moment = turned(task, *node, [own[3], own[4], own[5]]);
        let at = task.model[*node].at;
        for k in 0..3 {
            let (i, j) = ((k + 1) % 3, (k + 2) % 3);
            sum[k] += force[k];
            sum[k + 3] += moment[k] + at[i] * force[j] - at[j] * force[i];
        }
    }
    sum
}

/// Moments of the actions about a line along Y through a node: in the sense of the permanent actions, and
/// against it; neither is below zero. Actions are in equilibrium with the reactions.
fn moments(
    task: &Task<'_>,
    structure: StructureId,
    edge: NodeId,
    factors: &[(CaseId, f64)],
) -> [f64; 2] {
    let [x, _, z] = task.model[edge].at;
    let about = |case: CaseId, factor: f64| {
        let reactions = sum(task, structure, &[(case, factor)]);
        // M about the edge = M about the origin − (r × F) about Y; actions are the reactions turned round.
        -(reactions[4] - (z * reactions[0] - x * reactions[2]))
    };
    let permanent = (0..task.model.cases.len())
        .map(CaseId)
        .filter(|case| task.model[*case].nature == Nature::Permanent);
    let sense: f64 = permanent.map(|case| about(case, 1.0)).sum();
    let mut both = [0.0; 2];
    for (case, factor) in factors {
        let moment = about(*case, *factor);
        both[usize::from(moment * sense <= 0.0)] += moment.abs();
    }
    both
}
