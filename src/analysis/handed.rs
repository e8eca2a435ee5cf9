//! Reactions that one structure hands on to another.

use super::solve::ROUND_OFF;
use super::{HandedForce, Solution};
use crate::diagnostic::Diagnostic;
use crate::model::{Frame, LoadKind, Model, StructureId, Target};

/// The reactions that loads of this structure take from structures already solved.
pub(super) fn handed_forces(
    model: &Model,
    structure: StructureId,
    solution: &Solution,
) -> Vec<HandedForce> {
    let mut out = Vec::new();
    for case in &solution.states {
        // Under `by_span` the parts are the receiving member's spans: what is handed on to each is the
        // reaction with all parts acting.
        let place = model.whole_of(*case).0;
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

/// Reactions handed on to a plane frame that would push it out of its plane.
pub(super) fn out_of_plane(
    model: &Model,
    structure: StructureId,
    handed: &[HandedForce],
) -> Vec<Diagnostic> {
    if model[structure].frame == Frame::Space {
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
