//! The resultant of all loads against all reactions, about the global origin.

use super::acting::{Acting, about_origin, acting, place, reaction};
use super::{components, extent, imposed_scale, integral, relative, satisfied};
use crate::analysis::{Balance, Solution};
use crate::model::{CaseId, Model, StructureId};

pub(super) fn balance(
    model: &Model,
    solution: &Solution,
    structure: StructureId,
    case: CaseId,
) -> Balance {
    let mut loads = [0.0; 6];
    // Sums of sizes, so that loads that cancel one another still set the scale.
    let (mut forces, mut moments) = (imposed_scale(model, structure, case).0, 0.0);
    let mut add = |into: &mut [f64; 6], part: [f64; 6]| {
        for k in 0..6 {
            into[k] += part[k];
        }
        forces += part[..3].iter().map(|force| force.abs()).sum::<f64>();
        moments += part[3..].iter().map(|moment| moment.abs()).sum::<f64>();
    };
    for one in acting(model, solution, structure, case) {
        add(&mut loads, resultant(model, &one));
    }
    let mut reactions = [0.0; 6];
    for node in &model[structure].nodes {
        if let Some((force, moment)) = reaction(model, solution, *node, case) {
            add(&mut reactions, about_origin(model[*node].at, force, moment));
        }
    }
    let turning = moments.max(forces * extent(model, structure));
    let worst = components(model, structure)
        .iter()
        .map(|k| relative(loads[*k] + reactions[*k], if *k < 3 { forces } else { turning }))
        .fold(0.0, |worst: f64, error| if error > worst || error.is_nan() { error } else { worst });
    Balance { case, loads, reactions, relative: worst, satisfied: satisfied(worst) }
}

fn resultant(model: &Model, acting: &Acting) -> [f64; 6] {
    match *acting {
        Acting::Node { node, force, moment } => about_origin(model[node].at, force, moment),
        Acting::Point { member, at, force, moment } => {
            about_origin(place(model, &model[member], at), force, moment)
        }
        Acting::Line { member, from, to, start, end } => {
            let part = |s: f64, k: usize| {
                let share = s / (to - from);
                let q = std::array::from_fn(|axis| start[axis] + share * (end[axis] - start[axis]));
                about_origin(place(model, &model[member], from + s), q, [0.0; 3])[k]
            };
            std::array::from_fn(|k| integral(to - from, |s| part(s, k)))
        }
    }
}
