//! Structures in order of dependency: right-hand sides, solution, reactions, fields.

use super::element::{Particular, Vector12};
use super::frame::{Frame, Place, spring};
use super::loading::{CaseLoads, cuts, gather, station_at};
use super::mechanism;
use super::member::{Stretch, fields, particular, stretches};
use super::span::deflections;
use super::{Arithmetic, HandedForce, MemberSolution, NodeSolution, Segment, Solution};
use crate::diagnostic::Diagnostic;
use crate::model::{CaseId, Frame as Kind, Freedom, LoadKind, Model, NodeId, StructureId, Target};

/// Largest left-over of K u = f, relative to the forces, that is taken for round-off.
const RESIDUAL: f64 = 1e-6;
/// A component below this share of the largest is round-off of turning vectors.
const ROUND_OFF: f64 = 1e-9;

pub(super) fn solve(model: &Model) -> Result<Solution, Vec<Diagnostic>> {
    let mut problems = Vec::new();
    let mut solution = Solution {
        arithmetic: Arithmetic::Portable,
        states: (0..model.cases.len()).map(CaseId).collect(),
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
        for (index, element) in frame.elements.iter().enumerate() {
            let turn = frame.turn(model, element);
            let nodes = frame.at_ends(model, element, &displacement);
            let held = &side.held[index];
            let forces =
                turn.transpose() * (element.joined.stiffness * nodes + element.joined.held(held));
            for k in 0..12 {
                resisting[element.nodes[k / 6]][k % 6] += forces[k];
            }
            let ends = element.joined.ends(&nodes, held);
            let start = element.ends.start(&ends, &side.particular[index]);
            let member = &model[frame.members[element.member]];
            let flexibility = &frame.flexibility[element.member];
            let own = fields(
                &start,
                &stretches[index],
                &loads.members[element.member],
                member.length,
                flexibility,
            );
            let into = &mut segments[element.member];
            let offset = into.iter().position(|segment| segment.from >= element.from).unwrap_or(0);
            for (segment, polynomials) in into[offset..].iter_mut().zip(own) {
                segment.states.push(polynomials);
            }
        }
        side.sound(model, structure, frame, &resisting, solution.states[place])?;
        file_nodes(model, frame, &displacement, &resisting, side, solution);
    }
    for (place, id) in frame.members.iter().enumerate() {
        let mut own = std::mem::take(&mut segments[place]);
        deflections(&model[*id], &mut own);
        solution.members[id.0].segments = own;
    }
    Ok(())
}

/// One case's right-hand side, with what is needed to come back from the solution.
struct Side {
    equations: Vec<f64>,
    /// Applied nodal forces along nodal axes.
    applied: Vec<[f64; 6]>,
    /// Prescribed displacements of held freedoms and movements of springs' ground ends.
    ground: Vec<[f64; 6]>,
    /// By element: end forces with the ends held, before hinges; and the particular solution.
    held: Vec<Vector12>,
    particular: Vec<Particular>,
}

impl Side {
    fn new(model: &Model, frame: &Frame, loads: &CaseLoads, stretches: &[Vec<Stretch>]) -> Self {
        let place = |id: NodeId| frame.nodes.iter().position(|node| *node == id);
        let mut applied = vec![[0.0; 6]; frame.nodes.len()];
        for (id, force) in &loads.nodal {
            if let Some(node) = place(*id) {
                let own = frame.along(node, force);
                for k in 0..6 {
                    applied[node][k] += own[k];
                }
            }
        }
        let mut ground = vec![[0.0; 6]; frame.nodes.len()];
        for (id, by) in &loads.displaced {
            if let Some(node) = place(*id) {
                for k in 0..6 {
                    ground[node][k] += by[k].unwrap_or(0.0);
                }
            }
        }
        let mut out = Self {
            equations: vec![0.0; frame.equations],
            applied,
            ground,
            held: Vec::with_capacity(frame.elements.len()),
            particular: Vec::with_capacity(frame.elements.len()),
        };
        let mut right = out.applied.clone();
        for (node, id) in frame.nodes.iter().enumerate() {
            for k in 0..6 {
                right[node][k] += spring(model, *id, k) * out.ground[node][k];
            }
        }
        for (index, element) in frame.elements.iter().enumerate() {
            let member = &model[frame.members[element.member]];
            let own = particular(
                &stretches[index],
                &loads.members[element.member],
                member.length,
                &frame.flexibility[element.member],
            );
            let held = element.ends.held(&own);
            let turn = frame.turn(model, element);
            let moved = Vector12::from_fn(|k, _| {
                let (node, freedom) = (element.nodes[k / 6], k % 6);
                if frame.places[node][freedom] == Place::Held {
                    out.ground[node][freedom]
                } else {
                    0.0
                }
            });
            let forces = turn.transpose()
                * (element.joined.stiffness * (turn * moved) + element.joined.held(&held));
            for k in 0..12 {
                right[element.nodes[k / 6]][k % 6] -= forces[k];
            }
            out.held.push(held);
            out.particular.push(own);
        }
        for (node, places) in frame.places.iter().enumerate() {
            for (k, place) in places.iter().enumerate() {
                if let Place::Equation(row) = place {
                    out.equations[*row] = right[node][k];
                }
            }
        }
        out
    }

    /// Moments on nodes that nothing holds in that direction.
    fn loose(&self, model: &Model, frame: &Frame, case: CaseId) -> Vec<Diagnostic> {
        let scale =
            self.applied.iter().flatten().fold(0.0_f64, |most, force| most.max(force.abs()));
        let mut problems = Vec::new();
        for (node, id) in frame.nodes.iter().enumerate() {
            let loaded = (3..6).any(|k| {
                frame.places[node][k] == Place::Unattached
                    && self.applied[node][k].abs() > ROUND_OFF * scale
            });
            if loaded {
                let origin = model[case]
                    .loads
                    .iter()
                    .find(|load| turns_node(model, &load.kind, *id))
                    .map_or(&model[case].origin, |load| &load.origin);
                problems.push(
                    Diagnostic::error(
                        "load-on-hinge",
                        format!(
                            "case `{}` puts a moment on node `{}`, where every member is hinged",
                            model[case].name, model[*id].name
                        ),
                    )
                    .at(origin.clone())
                    .label(format!(
                        "{} here pass on no moment",
                        mechanism::members_at(model, frame, *id)
                    )),
                );
            }
        }
        problems
    }

    /// Displacements of all nodes along nodal axes.
    fn displacements(&self, frame: &Frame, column: &[f64]) -> Vec<[f64; 6]> {
        let own = |node: usize, k: usize| match frame.places[node][k] {
            Place::Equation(row) => column[row],
            Place::Held => self.ground[node][k],
            Place::Unattached => 0.0,
        };
        (0..frame.nodes.len()).map(|node| std::array::from_fn(|k| own(node, k))).collect()
    }

    /// Refuses a solution that does not satisfy its own equations.
    fn sound(
        &self,
        model: &Model,
        structure: StructureId,
        frame: &Frame,
        resisting: &[[f64; 6]],
        case: CaseId,
    ) -> Result<(), Vec<Diagnostic>> {
        let scale = resisting
            .iter()
            .chain(&self.applied)
            .flatten()
            .chain(self.held.iter().flat_map(|held| held.iter()))
            .fold(0.0_f64, |most, force| most.max(force.abs()));
        let left = |node: usize, k: usize| {
            let spring = spring(model, frame.nodes[node], k);
            match frame.places[node][k] {
                // A spring's force is found from this very equation; see `file_nodes`.
                Place::Equation(_) if spring <= 0.0 => {
                    (resisting[node][k] - self.applied[node][k]).abs()
                }
                _ => 0.0,
            }
        };
        let worst = (0..frame.nodes.len())
            .flat_map(|node| (0..6).map(move |k| (node, k)))
            .map(|(node, k)| left(node, k))
            .fold(0.0_f64, f64::max);
        // `max` passes over NaN, so every number is looked at.
        let finite = resisting.iter().chain(&self.applied).flatten().all(|force| force.is_finite())
            && self.held.iter().flat_map(|held| held.iter()).all(|force| force.is_finite());
        if !finite {
            return Err(vec![
                Diagnostic::error(
                    "not-solvable",
                    format!(
                        "structure `{}` cannot be solved for case `{}`: the numbers grow too large",
                        model[structure].name, model[case].name
                    ),
                )
                .at(model[case].origin.clone())
                .hint("look for a load or a stiffness with the wrong unit".to_owned()),
            ]);
        }
        if worst <= RESIDUAL * scale {
            return Ok(());
        }
        Err(vec![
            Diagnostic::error(
                "not-solvable",
                format!(
                    "structure `{}` cannot be solved accurately for case `{}`: forces out of balance by {:.1e} of the largest",
                    model[structure].name,
                    model[case].name,
                    worst / scale
                ),
            )
            .at(model[structure].origin.clone())
            .hint("stiffnesses that differ by too many orders of magnitude, or nearly a mechanism".to_owned()),
        ])
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

/// The load puts a moment on the node.
fn turns_node(model: &Model, load: &LoadKind, id: NodeId) -> bool {
    match load {
        LoadKind::Node { node, moment, .. } => *node == id && moment.iter().any(|m| *m != 0.0),
        LoadKind::Point { member, at, moment, .. } => {
            station_at(&model[*member], *at)
                .is_some_and(|station| model[*member].along[station] == id)
                && moment.iter().any(|m| *m != 0.0)
        }
        LoadKind::Handed(handed) => match handed.to {
            Target::Node(node) => node == id,
            Target::Member(member) => handed.at.iter().any(|at| {
                station_at(&model[member], *at)
                    .is_some_and(|station| model[member].along[station] == id)
            }),
        },
        _ => false,
    }
}

/// Reactions handed on to a plane frame that would push it out of its plane.
fn out_of_plane(model: &Model, structure: StructureId, handed: &[HandedForce]) -> Vec<Diagnostic> {
    if model[structure].frame == Kind::Space {
        return Vec::new();
    }
    let size = |values: &[f64]| values.iter().fold(0.0_f64, |most, value| most.max(value.abs()));
    handed
        .iter()
        .filter(|own| {
            let out = [own.force[1], own.moment[0], own.moment[2]];
            size(&out) > ROUND_OFF * size(&own.force).max(size(&own.moment))
        })
        .map(|own| {
            let load = &model[own.case].loads[own.load];
            Diagnostic::error(
                "out-of-plane",
                format!(
                    "the reaction handed on in case `{}` pushes plane frame `{}` out of its plane",
                    model[own.case].name, model[structure].name
                ),
            )
            .at(load.origin.clone())
            .hint("write the receiving structure as a space frame, or hold the giving one so that it reacts in X-Z only".to_owned())
        })
        .collect()
}

/// The reactions that loads of this structure take from structures already solved.
fn handed_forces(model: &Model, structure: StructureId, solution: &Solution) -> Vec<HandedForce> {
    let mut out = Vec::new();
    for (place, case) in solution.states.iter().enumerate() {
        for (load, written) in model[*case].loads.iter().enumerate() {
            let LoadKind::Handed(handed) = &written.kind else { continue };
            let receiver = match handed.to {
                Target::Member(member) => model[member].structure,
                Target::Node(node) => model[node].structure,
            };
            if receiver != structure {
                continue;
            }
            let Some(own) = solution.nodes[handed.from.0].reaction.get(place) else { continue };
            let axes = model[handed.from].support.as_ref().map(|support| support.axes);
            let turned = |offset: usize| -> [f64; 3] {
                std::array::from_fn(|axis| match axes {
                    Some(rows) => {
                        -(0..3).map(|row| rows[row][axis] * own[offset + row]).sum::<f64>()
                    }
                    None => -own[offset + axis],
                })
            };
            out.push(HandedForce { case: *case, load, force: turned(0), moment: turned(3) });
        }
    }
    out
}

fn empty_segments(model: &Model, frame: &Frame, stretches: &[Vec<Stretch>]) -> Vec<Vec<Segment>> {
    let mut out = vec![Vec::new(); frame.members.len()];
    for (element, own) in frame.elements.iter().zip(stretches) {
        for stretch in own {
            out[element.member].push(Segment {
                from: stretch.from,
                to: stretch.to,
                states: Vec::with_capacity(model.cases.len()),
            });
        }
    }
    out
}
