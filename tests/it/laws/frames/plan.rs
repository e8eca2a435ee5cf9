//! Random space frames: a chain of stiff joints from a fixed node, closed by members with hinges, so
//! that nothing is a mechanism; every kind of load.

use proptest::collection::vec;
use proptest::prelude::*;
use spanfolio::model::{Effect, Freedom, LoadKind, MemberId, NodeId, Release};
use spanfolio::section::Properties;

use super::build::{Build, FIXED, FREE, Solved, properties, space};

#[derive(Clone, Debug)]
pub(super) struct Plan {
    pub(super) nodes: Vec<[f64; 3]>,
    /// Start and end node; hinged at the end.
    pub(super) members: Vec<(usize, usize, bool)>,
    /// Supports besides the fixed first node.
    pub(super) supports: Vec<(usize, [Freedom; 6])>,
    pub(super) loads: [Vec<LoadKind>; 2],
}

impl Plan {
    pub(super) fn length(&self, member: usize) -> f64 {
        let (a, b, _) = self.members[member];
        (0..3).map(|k| self.nodes[a][k] - self.nodes[b][k]).map(|d| d * d).sum::<f64>().sqrt()
    }

    pub(super) fn build(&self) -> Build {
        self.build_with(|_, build, name, along| build.member(name, &along))
    }

    /// `member` adds one member (index, name, its two nodes).
    pub(super) fn build_with(
        &self,
        member: impl Fn(usize, Build, &str, [&str; 2]) -> Build,
    ) -> Build {
        let names: Vec<String> = (0..self.nodes.len()).map(|k| format!("N{k}")).collect();
        let mut build = space().section(skew());
        for (name, at) in names.iter().zip(&self.nodes) {
            build = build.node(name, *at);
        }
        build = build.support("N0", FIXED);
        for (node, freedoms) in &self.supports {
            build = build.support(&names[*node], *freedoms);
        }
        for (index, (a, b, hinged)) in self.members.iter().enumerate() {
            build = member(index, build, &format!("M{index}"), [&names[*a], &names[*b]]);
            if *hinged {
                build = build.hinge(1, &FREE_TO_TURN);
            }
        }
        for loads in &self.loads {
            build = build.case(loads.clone());
        }
        build
    }

    pub(super) fn solve(&self) -> Solved {
        self.build().solve()
    }
}

/// Bending released in both planes.
pub(super) const FREE_TO_TURN: [(Effect, Release); 2] =
    [(Effect::My, Release::Free), (Effect::Mz, Release::Spring(3e5))];

fn skew() -> Properties {
    Properties { i_yz: 1.1e-5, a_sy: Some(1.8e-3), a_sz: Some(1.3e-3), ..properties() }
}

/// Plans whose loads are forces and moments only (`imposed` = false), or also warming, lack of fit and
/// settlement.
pub(super) fn plans(imposed: bool) -> impl Strategy<Value = Plan> {
    (3..7_usize).prop_flat_map(move |count| {
        let nodes = vec([-0.5..0.5_f64, -4.0..4.0, -4.0..4.0], count);
        let closing = vec((0..count, 0..count, any::<bool>()), 0..4);
        let supports = vec((1..count, [0..3_u8, 0..3, 0..3, 0..3, 0..3, 0..3]), 0..3);
        (nodes, closing, supports).prop_flat_map(move |(nodes, closing, supports)| {
            let nodes: Vec<[f64; 3]> =
                (0_u8..).zip(nodes).map(|(k, [x, y, z])| [2.0 * f64::from(k) + x, y, z]).collect();
            let mut members: Vec<(usize, usize, bool)> =
                (1..nodes.len()).map(|k| (k - 1, k, false)).collect();
            members.extend(closing.into_iter().filter(|(a, b, _)| a != b));
            let supports: Vec<(usize, [Freedom; 6])> =
                supports.into_iter().map(|(node, kinds)| (node, kinds.map(freedom))).collect();
            let plan = Plan { nodes, members, supports, loads: [Vec::new(), Vec::new()] };
            let one = vec(load(&plan, imposed), 1..5);
            let two = vec(load(&plan, imposed), 1..5);
            (Just(plan), one, two).prop_map(|(plan, one, two)| Plan { loads: [one, two], ..plan })
        })
    })
}

fn freedom(kind: u8) -> Freedom {
    match kind {
        0 => Freedom::Fixed,
        1 => Freedom::Spring(4e6),
        _ => FREE[0],
    }
}

fn load(plan: &Plan, imposed: bool) -> BoxedStrategy<LoadKind> {
    let lengths: Vec<f64> = (0..plan.members.len()).map(|member| plan.length(member)).collect();
    let member = 0..plan.members.len();
    let vector = || [-1e4..1e4_f64, -1e4..1e4_f64, -1e4..1e4_f64];
    let share = || 0.05..0.95_f64;
    let on_node = (0..plan.nodes.len(), vector(), vector())
        .prop_map(|(node, force, moment)| LoadKind::Node { node: NodeId(node), force, moment });
    let (of_point, of_line) = (lengths.clone(), lengths);
    let point = (member.clone(), share(), vector(), vector()).prop_map(
        move |(member, share, force, moment)| LoadKind::Point {
            member: MemberId(member),
            at: share * of_point[member],
            force,
            moment,
        },
    );
    if !imposed {
        return prop_oneof![on_node, point].boxed();
    }
    let line = (member.clone(), share(), share(), vector(), vector())
        .prop_filter("some length", |(_, a, b, _, _)| (a - b).abs() > 0.01)
        .prop_map(move |(member, a, b, start, end)| LoadKind::Line {
            member: MemberId(member),
            from: a.min(b) * of_line[member],
            to: a.max(b) * of_line[member],
            start,
            end,
        });
    let warming = (member.clone(), -40.0..40.0_f64, -90.0..90.0_f64, -90.0..90.0_f64).prop_map(
        |(member, mean, gradient_z, gradient_y)| LoadKind::Warming {
            member: MemberId(member),
            mean,
            gradient_z,
            gradient_y,
        },
    );
    let fit = (member, -3e-3..3e-3_f64)
        .prop_map(|(member, length)| LoadKind::LackOfFit { member: MemberId(member), length });
    let sinking = vector().prop_map(|by| LoadKind::Displaced {
        node: NodeId(0),
        by: [Some(by[0] * 1e-6), None, Some(by[1] * 1e-6), None, Some(by[2] * 1e-7), None],
    });
    prop_oneof![on_node, point, line, warming, fit, sinking].boxed()
}
