//! The loads of every case brought to the members' local axes and cut at their breaks.

use super::element::{Imposed, Intensity};
use crate::model::{Axes, CaseId, LoadKind, Member, MemberId, Model, NodeId, Target};

/// Positions closer than this share of the member's length are one break.
const SAME_PLACE: f64 = 1e-9;

/// A force and a moment at a point of a member, local axes.
#[derive(Clone, Copy, Debug)]
pub(super) struct PointLoad {
    pub(super) at: f64,
    pub(super) force: [f64; 3],
    pub(super) moment: [f64; 3],
}

/// A linearly varying load on a stretch of a member, local axes, N/m.
#[derive(Clone, Copy, Debug)]
struct LineLoad {
    from: f64,
    to: f64,
    start: [f64; 3],
    end: [f64; 3],
}

/// Everything that acts along one member in one case.
#[derive(Clone, Debug, Default)]
pub(super) struct MemberLoads {
    lines: Vec<LineLoad>,
    points: Vec<PointLoad>,
    pub(super) imposed: Imposed,
}

/// Forces on nodes in global axes (force, then moment).
pub(super) type NodalLoad = (NodeId, [f64; 6]);

/// The loads of one case on one structure.
#[derive(Clone, Debug)]
pub(super) struct CaseLoads {
    /// In the order of the structure's members.
    pub(super) members: Vec<MemberLoads>,
    pub(super) nodal: Vec<NodalLoad>,
    /// Movements of ground ends, along the support's own axes.
    pub(super) displaced: Vec<(NodeId, [Option<f64>; 6])>,
}

/// Gathers a case's loads on the given members and on nodes of the same structure. `handed` gives the
/// global force and moment of a reaction handed on, by the load's index.
pub(super) fn gather(
    model: &Model,
    case: CaseId,
    members: &[MemberId],
    handed: &dyn Fn(usize) -> ([f64; 3], [f64; 3]),
) -> CaseLoads {
    let mut out = CaseLoads {
        members: vec![MemberLoads::default(); members.len()],
        nodal: Vec::new(),
        displaced: Vec::new(),
    };
    let place = |id: MemberId| members.iter().position(|member| *member == id);
    for (index, load) in model[case].loads.iter().enumerate() {
        match &load.kind {
            LoadKind::Line { member, from, to, start, end } => {
                let Some(place) = place(*member) else { continue };
                let axes = &model[*member].axes;
                out.members[place].lines.push(LineLoad {
                    from: *from,
                    to: *to,
                    start: local(axes, start),
                    end: local(axes, end),
                });
            }
            LoadKind::Point { member, at, force, moment } => {
                if let Some(place) = place(*member) {
                    out.point(place, &model[*member], *at, force, moment);
                }
            }
            LoadKind::Node { node, force, moment } => {
                out.nodal.push((*node, joined(force, moment)))
            }
            LoadKind::Displaced { node, by } => out.displaced.push((*node, *by)),
            LoadKind::Warming { member, mean, gradient_z, gradient_y } => {
                let Some(place) = place(*member) else { continue };
                let alpha = model[model[*member].material].expansion;
                let imposed = &mut out.members[place].imposed;
                imposed.axial += alpha * mean;
                imposed.curvature[0] -= alpha * gradient_y;
                imposed.curvature[1] -= alpha * gradient_z;
            }
            LoadKind::LackOfFit { member, length } => {
                let Some(place) = place(*member) else { continue };
                out.members[place].imposed.axial += length / model[*member].length;
            }
            LoadKind::Handed(reaction) => match reaction.to {
                Target::Node(node) => {
                    let (force, moment) = handed(index);
                    out.nodal.push((node, joined(&force, &moment)));
                }
                Target::Member(member) => {
                    let Some(place) = place(member) else { continue };
                    let (force, moment) = handed(index);
                    for at in &reaction.at {
                        out.point(place, &model[member], *at, &force, &moment);
                    }
                }
            },
        }
    }
    out
}

impl CaseLoads {
    /// A point load; at a node of the member it acts on the node.
    fn point(
        &mut self,
        place: usize,
        member: &Member,
        at: f64,
        force: &[f64; 3],
        moment: &[f64; 3],
    ) {
        match station_at(member, at) {
            Some(station) => self.nodal.push((member.along[station], joined(force, moment))),
            None => self.members[place].points.push(PointLoad {
                at,
                force: local(&member.axes, force),
                moment: local(&member.axes, moment),
            }),
        }
    }
}

impl MemberLoads {
    /// Where the loads begin, end or jump.
    fn breaks(&self) -> impl Iterator<Item = f64> + '_ {
        self.lines
            .iter()
            .flat_map(|line| [line.from, line.to])
            .chain(self.points.iter().map(|point| point.at))
    }

    /// Intensity on a stretch that holds no break inside.
    pub(super) fn intensity(&self, from: f64, to: f64) -> Intensity {
        let middle = 0.5 * (from + to);
        let mut out = Intensity::default();
        for line in self.lines.iter().filter(|line| line.from < middle && middle < line.to) {
            for axis in 0..3 {
                let slope = (line.end[axis] - line.start[axis]) / (line.to - line.from);
                out.start[axis] += line.start[axis] + slope * (from - line.from);
                out.slope[axis] += slope;
            }
        }
        out
    }

    /// Sum of the point loads at a break (within the merging distance).
    pub(super) fn at(&self, x: f64, length: f64) -> Option<PointLoad> {
        let mut sum = PointLoad { at: x, force: [0.0; 3], moment: [0.0; 3] };
        let mut any = false;
        for point in self.points.iter().filter(|point| (point.at - x).abs() <= SAME_PLACE * length)
        {
            any = true;
            for axis in 0..3 {
                sum.force[axis] += point.force[axis];
                sum.moment[axis] += point.moment[axis];
            }
        }
        any.then_some(sum)
    }
}

/// All places where a member's fields may change form in any case: its nodes and every break, sorted,
/// near-equal ones merged (a node's station stays as it is).
pub(super) fn cuts<'l>(member: &Member, cases: impl Iterator<Item = &'l MemberLoads>) -> Vec<f64> {
    let mut inner: Vec<f64> = cases.flat_map(MemberLoads::breaks).collect();
    inner.sort_by(f64::total_cmp);
    let margin = SAME_PLACE * member.length;
    let mut out = member.stations.clone();
    for x in inner {
        if out.iter().all(|known| (known - x).abs() > margin) {
            out.push(x);
        }
    }
    out.sort_by(f64::total_cmp);
    out
}

/// The station of a member at a position, if there is one.
pub(super) fn station_at(member: &Member, at: f64) -> Option<usize> {
    let margin = SAME_PLACE * member.length;
    member.stations.iter().position(|station| (station - at).abs() <= margin)
}

/// Components of a global vector along the local axes.
pub(super) fn local(axes: &Axes, vector: &[f64; 3]) -> [f64; 3] {
    axes.map(|axis| axis[0] * vector[0] + axis[1] * vector[1] + axis[2] * vector[2])
}

fn joined(force: &[f64; 3], moment: &[f64; 3]) -> [f64; 6] {
    [force[0], force[1], force[2], moment[0], moment[1], moment[2]]
}
