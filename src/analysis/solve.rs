//! Structures in order of dependency: right-hand sides, solution, reactions, fields.

use std::cmp::Ordering;

use super::fields::Fields;
use super::frame::Frame;
use super::handed::{handed_forces, out_of_plane};
use super::loading::{CaseLoads, cuts, gather};
use super::member::{Stretch, fields, stretches};
use super::side::Side;
use super::span::{Chord, deflections};
use super::{Arithmetic, MemberSolution, NodeSolution, Segment, Solution};
use crate::diagnostic::Diagnostic;
use crate::model::{CaseId, Freedom, Model, StructureId};

/// Largest left-over of K u = f, relative to the forces, that is taken for round-off.
const RESIDUAL: f64 = 1e-6;
/// A component below this share of the largest is round-off of turning vectors.
pub(super) const ROUND_OFF: f64 = 1e-9;

pub(super) fn solve(model: &Model) -> Result<Solution, Vec<Diagnostic>> {
    let mut problems = Vec::new();
    let mut solution = Solution {
        arithmetic: Arithmetic::Portable,
        states: model.solved_states().collect(),
        nodes: vec![NodeSolution::default(); model.nodes.len()],
        members: vec![MemberSolution { segments: Vec::new() }; model.members.len()],
        handed: Vec::new(),
    };
    for structure in &model.solve_order {
        match Frame::new(model, *structure) {
            Ok(frame) => {
                if let Err(more) = run(model, *structure, &frame, &mut solution) {
                    problems.extend(more);
                }
            }
            Err(more) => problems.extend(more),
        }
    }
    solution.handed.sort_by_key(|handed| (handed.case, handed.load));
    if problems.is_empty() { Ok(solution) } else { Err(problems) }
}

/// Solves one structure for all cases and files the results.
fn run(
    model: &Model,
    structure: StructureId,
    frame: &Frame,
    solution: &mut Solution,
) -> Result<(), Vec<Diagnostic>> {
    if let Some(factor) = &frame.factor
        && factor.arithmetic == Arithmetic::Fast
    {
        solution.arithmetic = Arithmetic::Fast;
    }
    let handed = handed_forces(model, structure, solution);
    let strays = out_of_plane(model, structure, &handed);
    if !strays.is_empty() {
        return Err(strays);
    }
    let cases: Vec<CaseLoads> = solution
        .states
        .iter()
        .map(|case| {
            gather(model, *case, &frame.members, &|load| {
                handed
                    .iter()
                    .find(|force| force.case == *case && force.load == load)
                    .map_or(([0.0; 3], [0.0; 3]), |force| (force.force, force.moment))
            })
        })
        .collect();
    solution.handed.extend(handed);

    let stretches: Vec<Vec<Stretch>> = frame
        .elements
        .iter()
        .map(|element| {
            let member = &model[frame.members[element.member]];
            let all = cuts(member, cases.iter().map(|case| &case.members[element.member]));
            stretches(element, &all)
        })
        .collect();

    let mut sides = Vec::with_capacity(cases.len());
    let mut problems = Vec::new();
    for (case, loads) in solution.states.iter().zip(&cases) {
        let side = Side::new(model, frame, loads, &stretches);
        problems.extend(side.loose(model, frame, *case));
        sides.push(side);
    }
    if !problems.is_empty() {
        return Err(problems);
    }
    let mut columns: Vec<f64> =
        sides.iter().flat_map(|side| side.equations.iter().copied()).collect();
    if let Some(factor) = &frame.factor {
        factor.solve(&mut columns);
    }

    let mut segments = empty_segments(model, frame, &stretches);
    for (place, (loads, side)) in cases.iter().zip(&sides).enumerate() {
        let displacement = side.displacements(frame, &columns[place * frame.equations..]);
        let mut resisting = vec![[0.0; 6]; frame.nodes.len()];
        let mut finite = true;
        for (index, element) in frame.elements.iter().enumerate() {
            let nodes = frame.at_ends(model, element, &displacement);
            let held = &side.held[index];
            let forces =
                frame.turn(model, element).transpose() * element.joined.forces(&nodes, held);
            for k in 0..12 {
                resisting[element.nodes[k / 6]][k % 6] += forces[k];
            }
            let ends = element.joined.ends(&nodes, held);
            let own = fields(
                &element.ends.start(&ends, &side.particular[index]),
                &stretches[index],
                &loads.members[element.member],
                model[frame.members[element.member]].length,
                &frame.flexibility[element.member],
            );
            finite &= own.iter().flat_map(|f| f.0.as_flattened()).all(|c| c.is_finite());
            file_fields(&mut segments[element.member], element.from, own);
        }
        let left = side.left_over(model, frame, &displacement, &resisting);
        let left = if finite { left } else { f64::NAN };
        // Written so that NaN is refused as well.
        if !matches!(left.partial_cmp(&RESIDUAL), Some(Ordering::Less)) {
            return Err(vec![refused(model, structure, solution.states[place], left)]);
        }
        file_nodes(model, frame, &displacement, &resisting, side, solution);
    }
    for (place, id) in frame.members.iter().enumerate() {
        let mut own = std::mem::take(&mut segments[place]);
        let member = &model[*id];
        let spans: Vec<Chord> = member.spans.iter().map(Chord::from).collect();
        deflections(&spans, member.length, &mut own);
        solution.members[id.0].segments = own;
    }
    Ok(())
}

/// Files one case's fields of the element that starts at `from`.
fn file_fields(segments: &mut [Segment], from: f64, fields: Vec<Fields>) {
    let first = segments.partition_point(|segment| segment.from < from);
    for (segment, own) in segments[first..].iter_mut().zip(fields) {
        segment.states.push(own);
    }
}

/// Why a solution is not given.
fn refused(model: &Model, structure: StructureId, case: CaseId, left_over: f64) -> Diagnostic {
    let (structure, case) = (&model[structure], &model[case]);
    let whose = format!("structure `{}` cannot be solved for case `{}`", structure.name, case.name);
    if left_over.is_finite() {
        Diagnostic::error(
            "not-solvable",
            format!("{whose}: forces out of balance by {left_over:.1e} of the largest"),
        )
        .at(structure.origin.clone())
        .hint(
            "its stiffnesses differ by too many orders of magnitude, or it is nearly a mechanism"
                .to_owned(),
        )
    } else {
        Diagnostic::error("not-solvable", format!("{whose}: the numbers grow too large"))
            .at(case.origin.clone())
            .hint("look for a load or a stiffness with the wrong unit".to_owned())
    }
}

/// Files displacements and reactions of one case.
fn file_nodes(
    model: &Model,
    frame: &Frame,
    displacement: &[[f64; 6]],
    resisting: &[[f64; 6]],
    side: &Side,
    solution: &mut Solution,
) {
    for (node, id) in frame.nodes.iter().enumerate() {
        let filed = &mut solution.nodes[id.0];
        filed.displacement.push(frame.global(node, &displacement[node]));
        if let Some(support) = &model[*id].support {
            // Rotation freedoms that were turned to find unattached directions are free: no reaction there.
            filed.reaction.push(std::array::from_fn(|k| match support.freedoms[k] {
                Freedom::Free => 0.0,
                Freedom::Fixed => resisting[node][k] - side.applied[node][k],
                Freedom::Spring(stiffness) => {
                    -stiffness * (displacement[node][k] - side.ground[node][k])
                }
            }));
        }
    }
}

fn empty_segments(model: &Model, frame: &Frame, stretches: &[Vec<Stretch>]) -> Vec<Vec<Segment>> {
    let mut out = vec![Vec::new(); frame.members.len()];
    for (element, own) in frame.elements.iter().zip(stretches) {
        for stretch in own {
            out[element.member].push(Segment {
                from: stretch.from,
                to: stretch.to,
                states: Vec::with_capacity(model.solved_states().count()),
            });
        }
    }
    out
}
