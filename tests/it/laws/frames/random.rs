//! Laws that hold for every frame.

use proptest::prelude::*;
use spanfolio::analysis::{Fields, superpose};
use spanfolio::model::{EFFECTS, Effect, FORCES, LoadKind, STORED, Side};

use super::build::Solved;
use super::plan::{Plan, plans};

/// Round-off of frames this size, of the largest of its kind.
const MARGIN: f64 = 1e-9;

/// Largest absolute value of an effect over all members and both cases.
fn scale(solved: &Solved, effect: Effect) -> f64 {
    let mut most = 0.0_f64;
    for (member, of) in solved.solution.members.iter().enumerate() {
        for segment in &of.segments {
            for (x, side) in [(segment.from, Side::After), (segment.to, Side::Before)] {
                for case in 0..2 {
                    most = most.max(solved.effect(case, member, effect, x, side).abs());
                }
            }
        }
    }
    most
}

/// Effects of like dimension weigh alike: forces with forces, moments with moments, and so on. Where
/// nothing but settlement acts on a frame that it does not strain, what is left is round-off of forces
/// of the size of the loads, not of zero.
fn scales(solved: &Solved) -> Vec<f64> {
    let own: Vec<f64> = EFFECTS.iter().map(|effect| scale(solved, *effect)).collect();
    EFFECTS
        .iter()
        .map(|effect| {
            let alike = EFFECTS.iter().filter(|other| other.kind() == effect.kind());
            let least = if effect.index() < FORCES { 1e3 } else { 1e-3 };
            alike.map(|other| own[other.index()]).fold(least, f64::max)
        })
        .collect()
}

/// Both members carry the same at the same place, each effect times its sign.
fn same(
    one: &Solved,
    of: usize,
    other: &Solved,
    member: usize,
    place: impl Fn(f64) -> (f64, bool),
    signs: impl Fn(Effect) -> f64,
) -> Result<(), TestCaseError> {
    let scales = scales(one);
    for segment in &one.solution.members[of].segments {
        // Just inside the ends: where an effect jumps, the same place counted from the other end may fall
        // on the other side by its last bit.
        for (share, side) in [(1e-6, Side::After), (0.37, Side::After), (1.0 - 1e-6, Side::Before)]
        {
            let x = segment.from + share * (segment.to - segment.from);
            let (there, turned) = place(x);
            let there_side = match (side, turned) {
                (Side::After, false) | (Side::Before, true) => Side::After,
                _ => Side::Before,
            };
            for case in 0..2 {
                for effect in EFFECTS.into_iter().take(STORED) {
                    let a = one.effect(case, of, effect, x, side);
                    let b = signs(effect) * other.effect(case, member, effect, there, there_side);
                    prop_assert!(
                        (a - b).abs() <= MARGIN * scales[effect.index()],
                        "{} of member {of} at {x}: {a} and {b}",
                        effect.name()
                    );
                }
            }
        }
    }
    Ok(())
}

/// Force and moment about the origin.
fn resultant(at: [f64; 3], force: [f64; 3], moment: [f64; 3]) -> [f64; 6] {
    let turn = |a: usize, b: usize| at[a] * force[b] - at[b] * force[a];
    [
        force[0],
        force[1],
        force[2],
        moment[0] + turn(1, 2),
        moment[1] + turn(2, 0),
        moment[2] + turn(0, 1),
    ]
}

fn on_member(plan: &Plan, member: usize, x: f64) -> [f64; 3] {
    let (a, b, _) = plan.members[member];
    let share = x / plan.length(member);
    std::array::from_fn(|k| plan.nodes[a][k] + share * (plan.nodes[b][k] - plan.nodes[a][k]))
}

fn load_resultant(plan: &Plan, load: &LoadKind) -> [f64; 6] {
    match load {
        LoadKind::Node { node, force, moment } => resultant(plan.nodes[node.0], *force, *moment),
        LoadKind::Point { member, at, force, moment } => {
            resultant(on_member(plan, member.0, *at), *force, *moment)
        }
        LoadKind::Line { member, from, to, start, end } => {
            // A linear load is two triangles: their resultants stand at the thirds.
            let half = (to - from) / 2.0;
            let near = on_member(plan, member.0, from + (to - from) / 3.0);
            let far = on_member(plan, member.0, to - (to - from) / 3.0);
            let one = resultant(near, start.map(|q| q * half), [0.0; 3]);
            let two = resultant(far, end.map(|q| q * half), [0.0; 3]);
            std::array::from_fn(|k| one[k] + two[k])
        }
        _ => [0.0; 6],
    }
}

/// Work of the forces of one case on the movements of another.
fn work(plan: &Plan, solved: &Solved, forces: usize, moving: usize) -> f64 {
    plan.loads[forces]
        .iter()
        .map(|load| {
            let (force, moment, moved) = match load {
                LoadKind::Node { node, force, moment } => {
                    (force, moment, solved.solution.nodes[node.0].displacement[moving])
                }
                LoadKind::Point { member, at, force, moment } => {
                    let axes = solved.model.members[member.0].axes;
                    let own = |k: usize| {
                        solved.effect(moving, member.0, EFFECTS[6 + k], *at, Side::After)
                    };
                    let global = std::array::from_fn(|k| {
                        (0..3).map(|row| axes[row][k % 3] * own(3 * (k / 3) + row)).sum()
                    });
                    (force, moment, global)
                }
                other => panic!("no work of {other:?}"),
            };
            (0..3).map(|k| force[k] * moved[k] + moment[k] * moved[3 + k]).sum::<f64>()
        })
        .sum()
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 256, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn reactions_balance_the_loads(plan in plans(true)) {
        let solved = plan.solve();
        for case in 0..2 {
            let mut sum = [0.0; 6];
            let mut size = 1e3_f64;
            let mut add = |part: [f64; 6]| for k in 0..6 {
                sum[k] += part[k];
                size = size.max(part[k].abs());
            };
            for load in &plan.loads[case] {
                add(load_resultant(&plan, load));
            }
            for (at, node) in plan.nodes.iter().zip(&solved.solution.nodes) {
                if let Some(own) = node.reaction.get(case) {
                    add(resultant(*at, [own[0], own[1], own[2]], [own[3], own[4], own[5]]));
                }
            }
            prop_assert!(sum.iter().all(|part| part.abs() <= MARGIN * size), "left over {sum:?}");
        }
    }

    /// Betti: the forces of one case do the same work on the movements of another as the other way round.
    #[test]
    fn work_is_reciprocal(plan in plans(false)) {
        let solved = plan.solve();
        let (one, two) = (work(&plan, &solved, 0, 1), work(&plan, &solved, 1, 0));
        let own = work(&plan, &solved, 0, 0).abs().max(work(&plan, &solved, 1, 1).abs());
        prop_assert!((one - two).abs() <= MARGIN * own, "{one} and {two}");
    }

    #[test]
    fn effects_of_loads_acting_together_are_the_sum(plan in plans(true)) {
        let apart = plan.solve();
        let both: Vec<LoadKind> = plan.loads.iter().flatten().cloned().collect();
        let together = Plan { loads: [both.clone(), both], ..plan.clone() }.solve();
        let scales = scales(&together);
        for (one, all) in apart.solution.members.iter().zip(&together.solution.members) {
            for (segment, expected) in one.segments.iter().zip(&all.segments) {
                let terms = segment.states.iter().map(|fields| (1.0, fields));
                let Fields(sum) = superpose(terms);
                let length = segment.to - segment.from;
                for effect in EFFECTS {
                    let mut power = 1.0;
                    for (a, b) in sum[effect.index()].iter().zip(expected.states[0].0[effect.index()]) {
                        prop_assert!((a - b).abs() * power <= MARGIN * scales[effect.index()]);
                        power *= length;
                    }
                }
            }
        }
    }

    #[test]
    fn fields_meet_the_nodes_and_one_another(plan in plans(true)) {
        let solved = plan.solve();
        let scales = scales(&solved);
        for (member, of) in solved.solution.members.iter().enumerate() {
            let axes = solved.model.members[member].axes;
            let (a, b, hinged) = plan.members[member];
            for case in 0..2 {
                for (node, x, side, k_end) in [
                    (a, 0.0, Side::After, 6),
                    (b, solved.model.members[member].length, Side::Before, if hinged { 3 } else { 6 }),
                ] {
                    let moved = solved.solution.nodes[node].displacement[case];
                    for k in 0..k_end {
                        let own: f64 = (0..3).map(|axis| axes[k % 3][axis] * moved[3 * (k / 3) + axis]).sum();
                        let field = solved.effect(case, member, EFFECTS[6 + k], x, side);
                        prop_assert!((own - field).abs() <= MARGIN * scales[6 + k], "{own} {field}");
                    }
                }
                for pair in of.segments.windows(2) {
                    for k in 6..12 {
                        let x = pair[0].to;
                        let before = solved.effect(case, member, EFFECTS[k], x, Side::Before);
                        let after = solved.effect(case, member, EFFECTS[k], x, Side::After);
                        prop_assert!((before - after).abs() <= MARGIN * scales[k]);
                    }
                }
            }
        }
    }

    #[test]
    fn a_frame_turned_about_z_carries_the_same(plan in plans(true), angle in -3.0..3.0_f64) {
        let (c, s) = (libm::cos(angle), libm::sin(angle));
        let turn = |[x, y, z]: [f64; 3]| [c * x - s * y, s * x + c * y, z];
        let mut turned = Plan {
            nodes: plan.nodes.iter().map(|at| turn(*at)).collect(),
            // Supports keep their own axes, turned along.
            supports: Vec::new(),
            ..plan.clone()
        };
        for load in turned.loads.iter_mut().flatten() {
            match load {
                LoadKind::Node { force, moment, .. } | LoadKind::Point { force, moment, .. } => {
                    (*force, *moment) = (turn(*force), turn(*moment));
                }
                LoadKind::Line { start, end, .. } => (*start, *end) = (turn(*start), turn(*end)),
                _ => {}
            }
        }
        let axes = [turn([1.0, 0.0, 0.0]), turn([0.0, 1.0, 0.0]), [0.0, 0.0, 1.0]];
        let mut build = turned.build().turned("N0", super::build::FIXED, axes);
        for (node, freedoms) in &plan.supports {
            build = build.turned(&format!("N{node}"), *freedoms, axes);
        }
        let (one, other) = (plan.solve(), build.solve());
        for member in 0..plan.members.len() {
            same(&one, member, &other, member, |x| (x, false), |_| 1.0)?;
        }
    }

    #[test]
    fn the_order_of_nodes_and_members_does_not_matter(plan in plans(true)) {
        let (nodes, members) = (plan.nodes.len() - 1, plan.members.len() - 1);
        let mut build = plan.build();
        let model = &mut build.0;
        model.nodes.reverse();
        model.members.reverse();
        model.structures[0].nodes.rotate_left(1);
        let other = |id: spanfolio::model::NodeId| spanfolio::model::NodeId(nodes - id.0);
        for member in &mut model.members {
            member.along.iter_mut().for_each(|id| *id = other(*id));
        }
        for load in model.cases.iter_mut().flat_map(|case| &mut case.loads) {
            match &mut load.kind {
                LoadKind::Node { node, .. } | LoadKind::Displaced { node, .. } => *node = other(*node),
                LoadKind::Point { member, .. }
                | LoadKind::Line { member, .. }
                | LoadKind::Warming { member, .. }
                | LoadKind::LackOfFit { member, .. } => member.0 = members - member.0,
                LoadKind::Handed(_) => {}
            }
        }
        let (one, other) = (plan.solve(), build.solve());
        for member in 0..=members {
            same(&one, member, &other, members - member, |x| (x, false), |_| 1.0)?;
        }
    }

    /// Local x turns round and z stays up, so y turns round as well; see the conventions.
    #[test]
    fn a_member_written_from_its_other_end_carries_the_same(plan in plans(true)) {
        let first = 0;
        let length = plan.length(first);
        let mut turned = plan.clone();
        for load in turned.loads.iter_mut().flatten() {
            match load {
                LoadKind::Point { member, at, .. } if member.0 == first => *at = length - *at,
                LoadKind::Line { member, from, to, start, end } if member.0 == first => {
                    (*from, *to) = (length - *to, length - *from);
                    std::mem::swap(start, end);
                }
                LoadKind::Warming { member, gradient_y, .. } if member.0 == first => {
                    *gradient_y = -*gradient_y;
                }
                _ => {}
            }
        }
        // The section is the same body: seen along the other way its product of inertia changes sign.
        let mut mirrored = turned.build_with(|index, build, name, [a, b]| {
            if index == first { build.member(name, &[b, a]) } else { build.member(name, &[a, b]) }
        });
        let model = &mut mirrored.0;
        let mut section = model.sections[model.members[first].section.0].clone();
        section.properties.i_yz = -section.properties.i_yz;
        model.members[first].section = spanfolio::model::SectionId(model.sections.len());
        model.sections.push(section);
        let (one, other) = (plan.solve(), mirrored.solve());
        for member in 1..plan.members.len() {
            same(&one, member, &other, member, |x| (x, false), |_| 1.0)?;
        }
        same(&one, first, &other, first, |x| (length - x, true), |effect| match effect {
            Effect::Vz | Effect::Mz | Effect::U | Effect::V | Effect::ThetaX | Effect::ThetaY => -1.0,
            _ => 1.0,
        })?;
    }
}
