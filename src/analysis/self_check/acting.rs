//! The loads of one case on one structure as plain forces, reactions handed on included.

use crate::analysis::Solution;
use crate::model::{CaseId, Load, LoadKind, Member, MemberId, Model, NodeId, StructureId, Target};

/// A point load this close to a node, as a share of the member's length, acts on the node.
const AT_NODE: f64 = 1e-9;

/// One force or line of force, global axes.
#[derive(Clone, Copy, Debug)]
pub(super) enum Acting {
    /// N/m, linear between.
    Line {
        member: MemberId,
        from: f64,
        to: f64,
        start: [f64; 3],
        end: [f64; 3],
    },
    /// Inside a member.
    Point {
        member: MemberId,
        at: f64,
        force: [f64; 3],
        moment: [f64; 3],
    },
    Node {
        node: NodeId,
        force: [f64; 3],
        moment: [f64; 3],
    },
}

/// Everything that acts.
pub(super) fn acting(
    model: &Model,
    solution: &Solution,
    structure: StructureId,
    case: CaseId,
) -> Vec<Acting> {
    let mut out = Vec::new();
    for (index, load) in model[case].loads.iter().enumerate() {
        for acting in one(model, solution, case, index, load) {
            let of = match acting {
                Acting::Line { member, .. } | Acting::Point { member, .. } => {
                    model[member].structure
                }
                Acting::Node { node, .. } => model[node].structure,
            };
            if of == structure {
                out.push(acting);
            }
        }
    }
    out
}

fn one(model: &Model, solution: &Solution, case: CaseId, index: usize, load: &Load) -> Vec<Acting> {
    match &load.kind {
        LoadKind::Line { member, from, to, start, end } => {
            vec![Acting::Line { member: *member, from: *from, to: *to, start: *start, end: *end }]
        }
        LoadKind::Point { member, at, force, moment } => {
            vec![point(model, *member, *at, *force, *moment)]
        }
        LoadKind::Node { node, force, moment } => {
            vec![Acting::Node { node: *node, force: *force, moment: *moment }]
        }
        LoadKind::Handed(handed) => {
            let Some(given) =
                solution.handed.iter().find(|given| given.case == case && given.load == index)
            else {
                return Vec::new();
            };
            match handed.to {
                Target::Node(node) => {
                    vec![Acting::Node { node, force: given.force, moment: given.moment }]
                }
                Target::Member(member) => handed
                    .at
                    .iter()
                    .map(|at| point(model, member, *at, given.force, given.moment))
                    .collect(),
            }
        }
        LoadKind::Displaced { .. } | LoadKind::Warming { .. } | LoadKind::LackOfFit { .. } => {
            Vec::new()
        }
    }
}

fn point(model: &Model, id: MemberId, at: f64, force: [f64; 3], moment: [f64; 3]) -> Acting {
    let member = &model[id];
    let near = |station: &f64| (station - at).abs() <= AT_NODE * member.length;
    match member.stations.iter().position(near) {
        Some(station) => Acting::Node { node: member.along[station], force, moment },
        None => Acting::Point { member: id, at, force, moment },
    }
}

/// Global coordinates of a place on a member.
pub(super) fn place(model: &Model, member: &Member, x: f64) -> [f64; 3] {
    let start = model[member.along[0]].at;
    std::array::from_fn(|axis| start[axis] + x * member.axes[0][axis])
}

/// A force at a place and a moment as six components about the origin.
pub(super) fn about_origin(at: [f64; 3], force: [f64; 3], moment: [f64; 3]) -> [f64; 6] {
    [
        force[0],
        force[1],
        force[2],
        moment[0] + at[1] * force[2] - at[2] * force[1],
        moment[1] + at[2] * force[0] - at[0] * force[2],
        moment[2] + at[0] * force[1] - at[1] * force[0],
    ]
}

/// The reaction of a supported node in global axes (force, moment); `None` without a support.
pub(super) fn reaction(
    model: &Model,
    solution: &Solution,
    node: NodeId,
    case: CaseId,
) -> Option<([f64; 3], [f64; 3])> {
    let support = model[node].support.as_ref()?;
    let own = solution.nodes[node.0].reaction.get(case.0)?;
    let global = |offset: usize| -> [f64; 3] {
        std::array::from_fn(|axis| {
            (0..3).map(|row| support.axes[row][axis] * own[offset + row]).sum()
        })
    };
    Some((global(0), global(3)))
}
