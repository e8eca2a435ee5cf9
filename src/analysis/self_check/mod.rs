//! Self-check: the solution held against equilibrium, energy and an integration by another method.
//!
//! Invariants
//! - Loads are taken anew from the model; nothing comes from the solver but the solution itself.
//! - Every part can fail: each compares two numbers that were found by different routes.
//!
//! Each relative error is over the scale of its case: the forces that act, or, where only supports move
//! or members warm, the forces that would arise if the imposed deformation were wholly resisted. Without
//! that floor a determinate frame, in which nothing resists, would be judged by its round-off.

mod acting;
mod balance;
mod energy;
mod independent;
mod residual;

use super::{SelfCheck, Solution, StructureCheck};
use crate::model::{Frame, LoadKind, Model, StructureId};

/// Largest relative error that passes. Round-off leaves about 1e-12 in usual frames and 1e-8 where axial
/// stiffness exceeds bending stiffness a millionfold; a mistake leaves far more than this.
const TOLERANCE: f64 = 1e-6;

pub(super) fn self_check(model: &Model, solution: &Solution) -> SelfCheck {
    let structures = model
        .solve_order
        .iter()
        .map(|structure| StructureCheck {
            structure: *structure,
            balances: solution
                .states
                .iter()
                .map(|case| balance::balance(model, solution, *structure, *case))
                .collect(),
            residuals: solution
                .states
                .iter()
                .map(|case| residual::residual(model, solution, *structure, *case))
                .collect(),
            energies: solution
                .states
                .iter()
                .map(|case| energy::energy(model, solution, *structure, *case))
                .collect(),
        })
        .collect();
    SelfCheck { structures, independent: independent::independent(model, solution) }
}

/// Which of Fx Fy Fz Mx My Mz a structure must keep in balance.
fn components(model: &Model, structure: StructureId) -> &'static [usize] {
    match model[structure].frame {
        Frame::Plane => &[0, 2, 4],
        Frame::Space => &[0, 1, 2, 3, 4, 5],
    }
}

/// Greatest extent of a structure, m.
fn extent(model: &Model, structure: StructureId) -> f64 {
    let members = model[structure].members.iter().map(|id| model[*id].length);
    members.fold(0.0, f64::max)
}

/// What imposed deformations would cause if wholly resisted: a force (N) and an energy (J).
fn imposed_scale(model: &Model, structure: StructureId, case: crate::model::CaseId) -> (f64, f64) {
    let stiffest = model[structure]
        .members
        .iter()
        .map(|id| axial_stiffness(model, *id) / model[*id].length)
        .fold(0.0, f64::max);
    let size = extent(model, structure);
    let (mut force, mut energy) = (0.0, 0.0);
    let mut add = |shift: f64| {
        force += stiffest * shift;
        energy += stiffest * shift * shift;
    };
    for load in &model[case].loads {
        match &load.kind {
            LoadKind::Warming { member, mean, gradient_z, gradient_y }
                if model[*member].structure == structure =>
            {
                let alpha = model[model[*member].material].expansion;
                let length = model[*member].length;
                let bent = (gradient_z.abs() + gradient_y.abs()) * length;
                add(alpha.abs() * (mean.abs() + bent) * length);
            }
            LoadKind::LackOfFit { member, length } if model[*member].structure == structure => {
                add(length.abs());
            }
            LoadKind::Displaced { node, by } if model[*node].structure == structure => {
                for (k, shift) in by.iter().enumerate() {
                    let arm = if k < 3 { 1.0 } else { size };
                    add(shift.unwrap_or(0.0).abs() * arm);
                }
            }
            _ => {}
        }
    }
    (force, energy)
}

fn axial_stiffness(model: &Model, id: crate::model::MemberId) -> f64 {
    let member = &model[id];
    model[member.material].e * model[member.section].properties.area
}

/// |error| over scale; nothing over nothing is nothing.
fn relative(error: f64, scale: f64) -> f64 {
    if error == 0.0 { 0.0 } else { error.abs() / scale }
}

/// Passes; a number that is not one fails.
fn satisfied(relative: f64) -> bool {
    relative <= TOLERANCE
}

/// ∫ f ds over (0, length) by Gauss–Legendre with six points, exact to degree eleven.
fn integral(length: f64, f: impl Fn(f64) -> f64) -> f64 {
    // Abramowitz and Stegun, Handbook of Mathematical Functions, table 25.4, n = 6 (from memory).
    const POINTS: [(f64, f64); 3] = [
        (0.238_619_186_083_196_9, 0.467_913_934_572_691_05),
        (0.661_209_386_466_264_5, 0.360_761_573_048_138_6),
        (0.932_469_514_203_152, 0.171_324_492_379_170_36),
    ];
    let half = 0.5 * length;
    let mut sum = 0.0;
    for (point, weight) in POINTS {
        sum += weight * (f(half * (1.0 - point)) + f(half * (1.0 + point)));
    }
    half * sum
}
