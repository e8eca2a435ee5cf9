//! One member of the run integrated again: the governing differential equations by the classical
//! Runge–Kutta method, from the values at the start of each piece between nodes, with the loads taken
//! anew from the model.

use super::acting::{Acting, acting};
use super::{TOLERANCE, relative};
use crate::analysis::{Independent, Segment, Solution, evaluate};
use crate::model::{CaseId, EFFECTS, Effect, LoadKind, Member, MemberId, Model, STORED, Side};

/// Steps in each stretch between breaks of the loads.
const STEPS: u32 = 64;

type State = [f64; STORED];

pub(super) fn independent(model: &Model, solution: &Solution) -> Option<Independent> {
    let (id, case) = hardest(model, solution)?;
    let member = &model[id];
    let path = Path::new(model, solution, id, case)?;
    let segments = &solution.members[id.0].segments;
    let mut largest = [0.0_f64; STORED];
    let mut errors = [0.0_f64; STORED];
    for piece in member.stations.windows(2) {
        let mut state = values(segments, case, piece[0], Side::After)?;
        let mut x = piece[0];
        for end in path.breaks(piece[0], piece[1]) {
            let step = (end - x) / f64::from(STEPS);
            for count in 1..=STEPS {
                state = path.step(&state, x, step);
                x = if count == STEPS { end } else { x + step };
                let side = if count == STEPS { Side::Before } else { Side::After };
                let solved = values(segments, case, x, side)?;
                for k in 0..STORED {
                    largest[k] = largest[k].max(solved[k].abs()).max(state[k].abs());
                    let error = (state[k] - solved[k]).abs();
                    if error > errors[k] || error.is_nan() {
                        errors[k] = error;
                    }
                }
            }
            path.jump(&mut state, end, member.length);
        }
    }
    let scales = path.scales(&largest);
    let scale = |k: usize| scales[EFFECTS[k].group()];
    let differences: Vec<(Effect, f64)> =
        (0..STORED).map(|k| (EFFECTS[k], relative(errors[k], scale(k)))).collect();
    Some(Independent {
        member: id,
        case,
        method: format!(
            "classical Runge–Kutta of the governing equations, {STEPS} steps between breaks"
        ),
        satisfied: differences.iter().all(|(_, difference)| *difference <= TOLERANCE),
        differences,
    })
}

/// The member and case with the largest bending moment; without bending, the largest axial force.
fn hardest(model: &Model, solution: &Solution) -> Option<(MemberId, CaseId)> {
    let size = |id: usize, case: CaseId, effects: &[Effect]| {
        let segments = &solution.members[id].segments;
        let ends = segments.iter().flat_map(|segment| {
            let middle = 0.5 * (segment.to - segment.from);
            [0.0, middle, 2.0 * middle].map(|s| (segment, s))
        });
        ends.flat_map(|(segment, s)| {
            effects
                .iter()
                .map(move |effect| evaluate(&segment.states[case.0].0[effect.index()], s).abs())
        })
        .fold(0.0, f64::max)
    };
    let mut best: Option<(MemberId, CaseId, f64)> = None;
    for effects in [&[Effect::My, Effect::Mz][..], &[Effect::N]] {
        for id in 0..model.members.len() {
            for case in &solution.states {
                let here = size(id, *case, effects);
                if here > best.map_or(0.0, |(_, _, most)| most) {
                    best = Some((MemberId(id), *case, here));
                }
            }
        }
        if best.is_some() {
            break;
        }
    }
    best.map(|(id, case, _)| (id, case))
}

/// The twelve stored effects at a place.
fn values(segments: &[Segment], case: CaseId, x: f64, side: Side) -> Option<State> {
    let segment = match side {
        Side::Before => segments.iter().find(|segment| x <= segment.to)?,
        Side::After => segments.iter().rev().find(|segment| segment.from <= x)?,
    };
    let fields = &segment.states[case.0].0;
    Some(std::array::from_fn(|k| evaluate(&fields[k], x - segment.from)))
}

/// What acts along the member, and how it answers.
struct Path<'m> {
    member: &'m Member,
    acting: Vec<Acting>,
    /// ε₀ and κ₀ (v″, w″).
    imposed: [f64; 3],
    axial: f64,
    torsion: f64,
    /// E I_y, E I_z, E I_yz.
    bending: [f64; 3],
    shear: [f64; 2],
}

impl<'m> Path<'m> {
    fn new(model: &'m Model, solution: &Solution, id: MemberId, case: CaseId) -> Option<Self> {
        let member = &model[id];
        let (section, material) = (&model[member.section].properties, &model[member.material]);
        let mine = |one: &Acting| match one {
            Acting::Line { member, .. } | Acting::Point { member, .. } => *member == id,
            Acting::Node { .. } => false,
        };
        let mut imposed = [0.0; 3];
        for load in &model[case].loads {
            match &load.kind {
                LoadKind::Warming { member, mean, gradient_z, gradient_y } if *member == id => {
                    imposed[0] += material.expansion * mean;
                    imposed[1] -= material.expansion * gradient_y;
                    imposed[2] -= material.expansion * gradient_z;
                }
                LoadKind::LackOfFit { member: other, length } if *other == id => {
                    imposed[0] += length / member.length;
                }
                _ => {}
            }
        }
        let shear = |area: Option<f64>| area.map_or(0.0, |area| 1.0 / (material.g * area));
        Some(Self {
            member,
            acting: acting(model, solution, member.structure, case)
                .into_iter()
                .filter(mine)
                .collect(),
            imposed,
            axial: material.e * section.area,
            torsion: material.g * section.i_t,
            bending: [section.i_y, section.i_z, section.i_yz].map(|second| material.e * second),
            shear: [shear(section.a_sy), shear(section.a_sz)],
        })
    }

    /// Scales of forces, moments, displacements and rotations from the largest of each effect. A field
    /// that vanishes is judged by what the others of the member would make of it.
    fn scales(&self, largest: &State) -> [f64; 4] {
        let of = |group: usize| {
            let members = (0..STORED).filter(|k| EFFECTS[*k].group() == group);
            members.map(|k| largest[k]).fold(0.0, f64::max)
        };
        let length = self.member.length;
        let softest = self.bending[0].min(self.bending[1]);
        let force = of(0).max(of(1) / length);
        let moment = of(1).max(of(0) * length);
        let rotation = of(3)
            .max(largest[Effect::My.index()].max(largest[Effect::Mz.index()]) * length / softest);
        let displacement =
            of(2).max(rotation * length).max(largest[Effect::N.index()] * length / self.axial);
        [force, moment, displacement, rotation]
    }

    /// Ends of the stretches between breaks inside (from, to], ascending.
    fn breaks(&self, from: f64, to: f64) -> Vec<f64> {
        let margin = 1e-9 * self.member.length;
        let mut out: Vec<f64> = self
            .acting
            .iter()
            .flat_map(|one| match *one {
                Acting::Line { from, to, .. } => vec![from, to],
                Acting::Point { at, .. } => vec![at],
                Acting::Node { .. } => Vec::new(),
            })
            .filter(|x| *x > from + margin && *x < to - margin)
            .collect();
        out.push(to);
        out.sort_by(f64::total_cmp);
        out.dedup_by(|later, earlier| *later - *earlier <= margin);
        out
    }

    /// Intensity along the local axes at a place, N/m; `middle` tells on which side of a break.
    fn intensity(&self, x: f64, middle: f64) -> [f64; 3] {
        let mut global = [0.0; 3];
        for one in &self.acting {
            if let Acting::Line { from, to, start, end, .. } = one
                && *from < middle
                && middle < *to
            {
                let share = (x - from) / (to - from);
                for axis in 0..3 {
                    global[axis] += start[axis] + share * (end[axis] - start[axis]);
                }
            }
        }
        self.local(global)
    }

    fn local(&self, global: [f64; 3]) -> [f64; 3] {
        self.member.axes.map(|axis| (0..3).map(|k| axis[k] * global[k]).sum())
    }

    /// Derivatives of all effects with respect to x.
    fn slope(&self, state: &State, x: f64, middle: f64) -> State {
        let [n, vy, vz, t, my, mz, _, _, _, _, ty, tz] = *state;
        let [px, py, pz] = self.intensity(x, middle);
        let [ei_y, ei_z, ei_yz] = self.bending;
        let determinant = ei_y * ei_z - ei_yz * ei_yz;
        let kappa_y = (ei_y * mz - ei_yz * my) / determinant + self.imposed[1];
        let kappa_z = (ei_z * my - ei_yz * mz) / determinant + self.imposed[2];
        [
            -px,
            py,
            pz,
            0.0,
            vz,
            vy,
            n / self.axial + self.imposed[0],
            tz - vy * self.shear[0],
            -ty - vz * self.shear[1],
            t / self.torsion,
            -kappa_z,
            kappa_y,
        ]
    }

    fn step(&self, state: &State, x: f64, h: f64) -> State {
        let middle = x + 0.5 * h;
        let along = |slope: &State, share: f64| -> State {
            std::array::from_fn(|k| state[k] + share * h * slope[k])
        };
        let first = self.slope(state, x, middle);
        let second = self.slope(&along(&first, 0.5), middle, middle);
        let third = self.slope(&along(&second, 0.5), middle, middle);
        let fourth = self.slope(&along(&third, 1.0), x + h, middle);
        std::array::from_fn(|k| {
            state[k] + h / 6.0 * (first[k] + 2.0 * second[k] + 2.0 * third[k] + fourth[k])
        })
    }

    /// Steps over the point loads at a place: the internal forces change by their opposite.
    fn jump(&self, state: &mut State, x: f64, length: f64) {
        for one in &self.acting {
            if let Acting::Point { at, force, moment, .. } = one
                && (at - x).abs() <= 1e-9 * length
            {
                let (force, moment) = (self.local(*force), self.local(*moment));
                state[Effect::N.index()] -= force[0];
                state[Effect::Vy.index()] += force[1];
                state[Effect::Vz.index()] += force[2];
                state[Effect::T.index()] -= moment[0];
                state[Effect::My.index()] += moment[1];
                state[Effect::Mz.index()] -= moment[2];
            }
        }
    }
}
