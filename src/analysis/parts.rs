//! The parts of a structure that members join, and whether supports hold each as a whole.
//!
//! A part is taken as rigid: a motion is a translation t and a rotation ω about the part's middle.
//! Every held (or sprung) freedom takes one direction out of these six; what is left over is how the
//! part can move as a whole. Mechanisms inside a part are found by its stiffness; see `mechanism`.

use nalgebra::{Matrix6, SymmetricEigen, Vector3, Vector6};

use super::frame::Frame;
use crate::diagnostic::Diagnostic;
use crate::model::{Frame as Kind, Freedom, Model, NodeId, StructureId};

/// A motion is free when all restraints together resist it by less than this share of one of them.
const FREE: f64 = 1e-12;
/// Names listed before the rest is only counted.
const LISTED: usize = 6;

/// One problem for every part that its supports do not hold.
pub(super) fn not_held(model: &Model, structure: StructureId, frame: &Frame) -> Vec<Diagnostic> {
    let parts = parts(frame);
    let only = parts.len() == 1;
    parts
        .iter()
        .filter_map(|part| {
            let way = way(model, structure, frame, part)?;
            Some(problem(model, structure, frame, part, only, &way))
        })
        .collect()
}

fn problem(
    model: &Model,
    structure: StructureId,
    frame: &Frame,
    part: &[usize],
    only: bool,
    way: &str,
) -> Diagnostic {
    let first = frame.nodes[part[0]];
    let name = &model[structure].name;
    if part.len() == 1 && !only {
        return Diagnostic::error(
            "mechanism",
            format!(
                "node `{}` of structure `{name}` is joined to no member and {way}",
                model[first].name
            ),
        )
        .at(model[first].origin.clone())
        .hint("join it to a member, or leave it out".to_owned());
    }
    let (message, place) = if only {
        (format!("structure `{name}` is not held: it {way}"), &model[structure].origin)
    } else {
        let nodes: Vec<NodeId> = part.iter().map(|node| frame.nodes[*node]).collect();
        let who = format!("the part of structure `{name}` with nodes {}", listed(model, &nodes));
        (format!("{who} is not held: it {way}"), &model[first].origin)
    };
    Diagnostic::error("mechanism", message).at(place.clone()).hint(match model[structure].frame {
        Kind::Plane => "add a support: a plane frame needs at least three restraints that are neither all parallel nor meet in one point".to_owned(),
        Kind::Space => "add a support: a space frame needs at least six restraints; `pinned` supports alone let a beam spin about its own axis, `fork` ones do not".to_owned(),
    })
}

/// Places of the nodes of each part, in the order of their first nodes.
fn parts(frame: &Frame) -> Vec<Vec<usize>> {
    let mut part: Vec<usize> = (0..frame.nodes.len()).collect();
    fn root(part: &[usize], mut node: usize) -> usize {
        while part[node] != node {
            node = part[node];
        }
        node
    }
    for element in &frame.elements {
        let [a, b] = element.nodes.map(|node| root(&part, node));
        part[a.max(b)] = a.min(b);
    }
    let mut out: Vec<Vec<usize>> = vec![Vec::new(); frame.nodes.len()];
    for node in 0..frame.nodes.len() {
        out[root(&part, node)].push(node);
    }
    out.retain(|nodes| !nodes.is_empty());
    out
}

/// How a part can move as a whole, as a phrase; `None` where it is held.
fn way(model: &Model, structure: StructureId, frame: &Frame, part: &[usize]) -> Option<String> {
    let at = |node: usize| Vector3::from(model[frame.nodes[node]].at);
    #[expect(clippy::cast_precision_loss, reason = "far fewer nodes than 2^52")]
    let middle = part.iter().map(|node| at(*node)).sum::<Vector3<f64>>() / part.len() as f64;
    let size = part.iter().map(|node| (at(*node) - middle).norm()).fold(0.0, f64::max).max(1e-3);

    let mut restraint = Matrix6::zeros();
    let mut hold = |direction: Vector6<f64>| restraint += direction * direction.transpose();
    if model[structure].frame == Kind::Plane {
        for k in [1, 3, 5] {
            hold(Vector6::ith(k, 1.0));
        }
    }
    let mut supported = false;
    for node in part {
        let Some(support) = &model[frame.nodes[*node]].support else { continue };
        for k in (0..6).filter(|k| support.freedoms[*k] != Freedom::Free) {
            let axis = Vector3::from(support.axes[k % 3]);
            supported = true;
            if k < 3 {
                // a · (t + ω × d) = a · t + ω · (d × a); ω counts per size, to weigh like a translation.
                let turn = (at(*node) - middle).cross(&axis) / size;
                hold(Vector6::new(axis[0], axis[1], axis[2], turn[0], turn[1], turn[2]));
            } else {
                hold(Vector6::new(0.0, 0.0, 0.0, axis[0], axis[1], axis[2]));
            }
        }
    }
    if !supported {
        return Some("has no support".to_owned());
    }
    let along: Vec<&str> =
        (0..3).filter(|k| restraint[(*k, *k)] <= FREE).map(|k| ["X", "Y", "Z"][k]).collect();
    if !along.is_empty() {
        return Some(format!("can move along {}", along.join(" and ")));
    }
    let eigen = SymmetricEigen::new(restraint);
    let least = eigen.eigenvalues.imin();
    if eigen.eigenvalues[least] > FREE {
        return None;
    }
    let motion = eigen.eigenvectors.column(least);
    let turns = Vector3::new(motion[3], motion[4], motion[5]);
    if turns.norm() > 1e-6 {
        return Some(format!("can turn about {}", axis_name(&turns)));
    }
    Some(format!("can move along {}", axis_name(&Vector3::new(motion[0], motion[1], motion[2]))))
}

/// `X`, or an oblique direction by its components.
fn axis_name(direction: &Vector3<f64>) -> String {
    let unit = direction / direction.norm();
    if unit[unit.iamax()].abs() > 1.0 - 1e-6 {
        return ["X", "Y", "Z"][unit.iamax()].to_owned();
    }
    // Either sense will do; the first component that counts is given as positive.
    let sign = unit.iter().find(|c| c.abs() > 1e-6).map_or(1.0, |c| c.signum());
    let shown = |k: usize| format!("{:.2}", sign * unit[k] + 0.0).replace("-0.00", "0.00");
    format!("the direction ({}, {}, {})", shown(0), shown(1), shown(2))
}

fn listed(model: &Model, nodes: &[NodeId]) -> String {
    let names: Vec<String> =
        nodes.iter().take(LISTED).map(|node| format!("`{}`", model[*node].name)).collect();
    let rest = nodes.len() - names.len();
    if rest == 0 { names.join(", ") } else { format!("{} and {rest} more", names.join(", ")) }
}
