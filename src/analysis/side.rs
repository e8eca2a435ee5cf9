//! One case's right-hand side: equivalent nodal loads, exact for the loads inside elements.

use super::element::{Particular, Vector12};
use super::frame::{Frame, Place, spring};
use super::loading::{CaseLoads, station_at};
use super::mechanism;
use super::member::{Stretch, particular};
use super::solve::ROUND_OFF;
use crate::diagnostic::Diagnostic;
use crate::model::{CaseId, LoadKind, Model, NodeId, Target};

/// One case's right-hand side, with what is needed to come back from the solution.
pub(super) struct Side {
    pub(super) equations: Vec<f64>,
    /// Applied nodal forces along nodal axes.
    pub(super) applied: Vec<[f64; 6]>,
    /// Prescribed displacements of held freedoms and movements of springs' ground ends.
    pub(super) ground: Vec<[f64; 6]>,
    /// By element: end forces with the ends held, before hinges; and the particular solution.
    pub(super) held: Vec<Vector12>,
    pub(super) particular: Vec<Particular>,
    /// Largest force that loads and moved supports cause while every other freedom is held.
    driving: f64,
}

impl Side {
    pub(super) fn new(
        model: &Model,
        frame: &Frame,
        loads: &CaseLoads,
        stretches: &[Vec<Stretch>],
    ) -> Self {
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
            driving: 0.0,
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
            let forces = turn.transpose() * element.joined.forces(&(turn * moved), &held);
            for k in 0..12 {
                right[element.nodes[k / 6]][k % 6] -= forces[k];
            }
            out.driving = out.driving.max(forces.amax()).max(held.amax());
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
    pub(super) fn loose(&self, model: &Model, frame: &Frame, case: CaseId) -> Vec<Diagnostic> {
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
    pub(super) fn displacements(&self, frame: &Frame, column: &[f64]) -> Vec<[f64; 6]> {
        let own = |node: usize, k: usize| match frame.places[node][k] {
            Place::Equation(row) => column[row],
            Place::Held => self.ground[node][k],
            Place::Unattached => 0.0,
        };
        (0..frame.nodes.len()).map(|node| std::array::from_fn(|k| own(node, k))).collect()
    }

    /// What is left over of the nodes' equilibrium, relative to the largest force; not finite where the
    /// forces are not.
    pub(super) fn left_over(
        &self,
        model: &Model,
        frame: &Frame,
        displacement: &[[f64; 6]],
        resisting: &[[f64; 6]],
    ) -> f64 {
        let (mut scale, mut sum) = (self.driving, 0.0);
        for force in resisting.iter().chain(&self.applied).flatten() {
            scale = scale.max(force.abs());
            sum += force;
        }
        let mut worst = 0.0_f64;
        for (node, id) in frame.nodes.iter().enumerate() {
            for k in (0..6).filter(|k| frame.places[node][*k] != Place::Held) {
                let sprung = spring(model, *id, k) * (displacement[node][k] - self.ground[node][k]);
                worst = worst.max((resisting[node][k] + sprung - self.applied[node][k]).abs());
            }
        }
        // `max` passes over NaN; the sum does not.
        if !sum.is_finite() {
            return f64::NAN;
        }
        if scale > 0.0 { worst / scale } else { 0.0 }
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
