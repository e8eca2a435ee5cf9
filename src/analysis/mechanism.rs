//! Names a mechanism inside a structure that is held as a whole (see `parts`): which node moves, which
//! way, with the members there.

use super::frame::{Frame, Place};
use crate::diagnostic::Diagnostic;
use crate::model::{Model, NodeId, StructureId};

/// Translations below this share of the largest rotation times the structure's size do not count:
/// the node only turns.
const STILL: f64 = 1e-6;

/// A problem that says how the structure moves. `mode` holds one value an equation.
pub(super) fn named(
    model: &Model,
    structure: StructureId,
    frame: &Frame,
    mode: &[f64],
) -> Diagnostic {
    let motions: Vec<[f64; 6]> = (0..frame.nodes.len())
        .map(|node| {
            let own = frame.places[node].map(|place| match place {
                Place::Equation(k) => mode[k],
                Place::Held | Place::Unattached => 0.0,
            });
            frame.global(node, &own)
        })
        .collect();
    let size = extent(model, frame);
    let (node, axis, moved) = largest(&motions, 0);
    let (turning, about, turned) = largest(&motions, 3);
    let moves = moved > STILL * turned * size;
    let (node, way) = if moves {
        (frame.nodes[node], format!("move along {}", ["X", "Y", "Z"][axis]))
    } else {
        (frame.nodes[turning], format!("rotate about {}", ["X", "Y", "Z"][about]))
    };
    Diagnostic::error(
        "mechanism",
        format!(
            "structure `{}` is a mechanism: node `{}` can {way}",
            model[structure].name, model[node].name
        ),
    )
    .at(model[node].origin.clone())
    .label(format!("{} here", members_at(model, frame, node)))
    .hint("take away a hinge, give it a spring, or hold the node with a support".to_owned())
}

/// The members that meet at a node, as a phrase.
pub(super) fn members_at(model: &Model, frame: &Frame, node: NodeId) -> String {
    let names: Vec<String> = frame
        .members
        .iter()
        .filter(|member| model[**member].along.contains(&node))
        .map(|member| format!("`{}`", model[*member].name))
        .collect();
    match names.as_slice() {
        [] => "no member".to_owned(),
        [one] => format!("member {one}"),
        many => format!("members {}", many.join(", ")),
    }
}

/// The node and axis that move most, and by how much; of near-equals the first.
fn largest(motions: &[[f64; 6]], offset: usize) -> (usize, usize, f64) {
    let mut best = (0, 0, 0.0);
    for (node, motion) in motions.iter().enumerate() {
        for axis in 0..3 {
            let size = motion[offset + axis].abs();
            if size > best.2 * (1.0 + 1e-6) {
                best = (node, axis, size);
            }
        }
    }
    best
}

/// Greatest extent of the structure, m.
fn extent(model: &Model, frame: &Frame) -> f64 {
    (0..3)
        .map(|axis| {
            let along = |id: &NodeId| model[*id].at[axis];
            let least = frame.nodes.iter().map(along).fold(f64::INFINITY, f64::min);
            let most = frame.nodes.iter().map(along).fold(f64::NEG_INFINITY, f64::max);
            most - least
        })
        .fold(0.0, f64::max)
}
