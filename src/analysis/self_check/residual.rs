//! Equilibrium of every node: the forces of the members' ends, taken from their fields, with the loads on
//! the node and its reaction.

use super::acting::{Acting, acting, reaction};
use super::{components, extent, imposed_scale, relative, satisfied};
use crate::analysis::{Residual, Segment, Solution, evaluate};
use crate::model::{CaseId, Member, Model, NodeId, StructureId};

/// Signs that turn N V_y V_z T M_y M_z into force and moment on the +x face.
const FACE: [f64; 6] = [1.0, -1.0, -1.0, 1.0, -1.0, 1.0];

pub(super) fn residual(
    model: &Model,
    solution: &Solution,
    structure: StructureId,
    case: CaseId,
) -> Residual {
    let nodes = &model[structure].nodes;
    let mut sums = vec![[0.0_f64; 6]; nodes.len()];
    let (mut forces, mut moments) = (imposed_scale(model, structure, case).0, 0.0_f64);
    let mut add = |node: NodeId, part: [f64; 6]| {
        if let Some(place) = nodes.iter().position(|id| *id == node) {
            for k in 0..6 {
                sums[place][k] += part[k];
            }
        }
        forces = part[..3].iter().fold(forces, |most, force| most.max(force.abs()));
        moments = part[3..].iter().fold(moments, |most, moment| most.max(moment.abs()));
    };
    for id in &model[structure].members {
        let member = &model[*id];
        for (node, part) in ends(member, &solution.members[id.0].segments, case) {
            add(node, part);
        }
    }
    for one in acting(model, solution, structure, case) {
        if let Acting::Node { node, force, moment } = one {
            add(node, [force[0], force[1], force[2], moment[0], moment[1], moment[2]]);
        }
    }
    for node in nodes {
        if let Some((force, moment)) = reaction(model, solution, *node, case) {
            add(*node, [force[0], force[1], force[2], moment[0], moment[1], moment[2]]);
        }
    }
    let turning = moments.max(forces * extent(model, structure));
    let mut worst = 0.0_f64;
    for sum in &sums {
        for k in components(model, structure) {
            let error = relative(sum[*k], if *k < 3 { forces } else { turning });
            if error > worst || error.is_nan() {
                worst = error;
            }
        }
    }
    Residual { case, relative: worst, satisfied: satisfied(worst) }
}

/// What the pieces of a member do to its nodes, global axes.
fn ends(member: &Member, segments: &[Segment], case: CaseId) -> Vec<(NodeId, [f64; 6])> {
    let margin = 1e-9 * member.length;
    let mut out = Vec::new();
    for segment in segments {
        let fields = &segment.states[case.0];
        let length = segment.to - segment.from;
        for (x, s, sign) in [(segment.from, 0.0, 1.0), (segment.to, length, -1.0)] {
            let station = member.stations.iter().position(|station| (station - x).abs() <= margin);
            let Some(station) = station else { continue };
            let local: [f64; 6] =
                std::array::from_fn(|k| sign * FACE[k] * evaluate(&fields.0[k], s));
            let global = std::array::from_fn(|k| {
                let offset = 3 * (k / 3);
                (0..3).map(|row| member.axes[row][k % 3] * local[offset + row]).sum()
            });
            out.push((member.along[station], global));
        }
    }
    out
}
