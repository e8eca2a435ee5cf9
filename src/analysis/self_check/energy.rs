//! External work against strain energy (Clapeyron's theorem), imposed deformations counted.
//!
//! The principle of virtual work with the true displacements says
//! Σ F u + Σ R g = ∫ (N ε + M_y κ_z + M_z κ_y + …) dx + Σ R²/k,
//! with loads F, reactions R, movements g of the ground and springs k. Each strain is elastic plus
//! imposed (ε₀, κ₀), so the strain energy is
//! U = ½ ∫ (N²/EA + …) dx + ½ Σ R²/k = ½ (Σ F u + Σ R g − ∫ (N ε₀ + M_y κ_z0 + M_z κ_y0) dx).
//! The left side is found from internal forces alone, the right side from loads and displacements.

use super::acting::{Acting, acting};
use super::{imposed_scale, integral, relative, satisfied};
use crate::analysis::{Energy, Segment, Solution, evaluate};
use crate::model::{
    CaseId, Effect, Freedom, LoadKind, Member, MemberId, Model, Release, StructureId,
};

pub(super) fn energy(
    model: &Model,
    solution: &Solution,
    structure: StructureId,
    case: CaseId,
) -> Energy {
    let mut strain = 0.0;
    let mut work = 0.0;
    // Sizes of the parts of the work: parts that cancel still set the scale.
    let mut scale = imposed_scale(model, structure, case).1;
    let mut add = |part: f64| {
        work += 0.5 * part;
        scale += 0.5 * part.abs();
    };
    for id in &model[structure].members {
        let segments = &solution.members[id.0].segments;
        strain += of_member(model, &model[*id], segments, case);
        add(-of_imposed(model, *id, segments, case));
    }
    for node in &model[structure].nodes {
        let Some(support) = &model[*node].support else { continue };
        let reaction = &solution.nodes[node.0].reaction[case.0];
        for k in 0..6 {
            if let Freedom::Spring(stiffness) = support.freedoms[k] {
                strain += 0.5 * reaction[k] * reaction[k] / stiffness;
            }
        }
    }
    for one in acting(model, solution, structure, case) {
        add(of_load(model, solution, &one, case));
    }
    for load in &model[case].loads {
        if let LoadKind::Displaced { node, by } = &load.kind
            && model[*node].structure == structure
        {
            let reaction = &solution.nodes[node.0].reaction[case.0];
            for k in 0..6 {
                add(reaction[k] * by[k].unwrap_or(0.0));
            }
        }
    }
    let relative = relative(work - strain, scale.max(strain.abs()));
    Energy { case, external: work, strain, relative, satisfied: satisfied(relative) }
}

/// ½ ∫ of the internal forces over their stiffnesses, hinge springs included.
fn of_member(model: &Model, member: &Member, segments: &[Segment], case: CaseId) -> f64 {
    let (section, material) = (&model[member.section].properties, &model[member.material]);
    let (e, g) = (material.e, material.g);
    let determinant = section.i_y * section.i_z - section.i_yz * section.i_yz;
    let shear = |area: Option<f64>| area.map_or(0.0, |area| 1.0 / (g * area));
    let mut energy = 0.0;
    for segment in segments {
        let fields = &segment.states[case.0].0;
        let at = |effect: Effect, s: f64| evaluate(&fields[effect.index()], s);
        energy += 0.5
            * integral(segment.to - segment.from, |s| {
                let (n, t) = (at(Effect::N, s), at(Effect::T, s));
                let (vy, vz) = (at(Effect::Vy, s), at(Effect::Vz, s));
                let (my, mz) = (at(Effect::My, s), at(Effect::Mz, s));
                let bending =
                    section.i_z * my * my - 2.0 * section.i_yz * my * mz + section.i_y * mz * mz;
                n * n / (e * section.area)
                    + t * t / (g * section.i_t)
                    + vy * vy * shear(section.a_sy)
                    + vz * vz * shear(section.a_sz)
                    + bending / (e * determinant)
            });
    }
    for hinge in &member.hinges {
        let x = member.stations[hinge.station];
        let last = hinge.station + 1 == member.stations.len();
        let segment =
            if last { segments.last() } else { segments.iter().find(|segment| x < segment.to) };
        let Some(segment) = segment else { continue };
        let s = if last { segment.to - segment.from } else { x - segment.from };
        for (k, release) in hinge.releases.iter().enumerate() {
            if let Release::Spring(stiffness) = release {
                let force = evaluate(&segment.states[case.0].0[k], s);
                energy += 0.5 * force * force / stiffness;
            }
        }
    }
    energy
}

/// ∫ (N ε₀ + M_y κ_z0 + M_z κ_y0) dx.
fn of_imposed(model: &Model, id: MemberId, segments: &[Segment], case: CaseId) -> f64 {
    let member = &model[id];
    let alpha = model[member.material].expansion;
    let (mut strain, mut curvature_y, mut curvature_z) = (0.0, 0.0, 0.0);
    for load in &model[case].loads {
        match &load.kind {
            LoadKind::Warming { member, mean, gradient_z, gradient_y } if *member == id => {
                strain += alpha * mean;
                curvature_y -= alpha * gradient_y;
                curvature_z -= alpha * gradient_z;
            }
            LoadKind::LackOfFit { member: other, length } if *other == id => {
                strain += length / member.length;
            }
            _ => {}
        }
    }
    let mut work = 0.0;
    for segment in segments {
        let fields = &segment.states[case.0].0;
        let at = |effect: Effect, s: f64| evaluate(&fields[effect.index()], s);
        work += integral(segment.to - segment.from, |s| {
            at(Effect::N, s) * strain
                + at(Effect::My, s) * curvature_z
                + at(Effect::Mz, s) * curvature_y
        });
    }
    work
}

/// Force times displacement, not halved.
fn of_load(model: &Model, solution: &Solution, acting: &Acting, case: CaseId) -> f64 {
    match *acting {
        Acting::Node { node, force, moment } => {
            let moved = &solution.nodes[node.0].displacement[case.0];
            (0..3).map(|k| force[k] * moved[k] + moment[k] * moved[3 + k]).sum()
        }
        Acting::Point { member, at, force, moment } => {
            let segments = &solution.members[member.0].segments;
            let Some(segment) = segments.iter().rev().find(|segment| segment.from <= at) else {
                return f64::NAN;
            };
            let moved = global(&model[member], segment, case, at - segment.from);
            (0..3).map(|k| force[k] * moved[k] + moment[k] * moved[3 + k]).sum()
        }
        Acting::Line { member, from, to, start, end } => {
            let mut work = 0.0;
            for segment in &solution.members[member.0].segments {
                let middle = 0.5 * (segment.from + segment.to);
                if middle < from || to < middle {
                    continue;
                }
                work += integral(segment.to - segment.from, |s| {
                    let share = (segment.from + s - from) / (to - from);
                    let moved = global(&model[member], segment, case, s);
                    (0..3).map(|k| (start[k] + share * (end[k] - start[k])) * moved[k]).sum()
                });
            }
            work
        }
    }
}

/// Displacement and rotation at a place of a segment, global axes.
fn global(member: &Member, segment: &Segment, case: CaseId, s: f64) -> [f64; 6] {
    let fields = &segment.states[case.0].0;
    let local: [f64; 6] = std::array::from_fn(|k| evaluate(&fields[Effect::U.index() + k], s));
    std::array::from_fn(|k| {
        let offset = 3 * (k / 3);
        (0..3).map(|row| member.axes[row][k % 3] * local[offset + row]).sum()
    })
}
