//! Models built by hand, and solved values asked for by name: what the laws are stated with.
//!
//! One structure; every member takes the section and material given last.

use spanfolio::analysis::{self, Solution, evaluate};
use spanfolio::diagnostic::{Diagnostic, Place};
use spanfolio::model::*;
use spanfolio::quantity::{System, Units};
use spanfolio::section::Properties;

pub(super) struct Build(pub(super) Model);

/// EI = 1e7 N m² about y, a quarter of it about z.
pub(super) const E: f64 = 200e9;
pub(super) const I_Y: f64 = 5e-5;
pub(super) const I_Z: f64 = 1.25e-5;
pub(super) const AREA: f64 = 4e-3;
pub(super) const I_T: f64 = 2e-6;
pub(super) const G: f64 = 80e9;
pub(super) const ALPHA: f64 = 1.2e-5;
pub(super) const EI: f64 = E * I_Y;

pub(super) const FREE: [Freedom; 6] = [Freedom::Free; 6];
pub(super) const FIXED: [Freedom; 6] = [Freedom::Fixed; 6];
pub(super) const PINNED: [Freedom; 6] = held("XYZ");
/// Pinned, and held against twist about X.
pub(super) const FORK: [Freedom; 6] =
    [Freedom::Fixed, Freedom::Fixed, Freedom::Fixed, Freedom::Fixed, Freedom::Free, Freedom::Free];
pub(super) const ROLLER: [Freedom; 6] = held("YZ");

const fn held(axes: &str) -> [Freedom; 6] {
    let mut out = FREE;
    let mut k = 0;
    while k < axes.len() {
        out[(axes.as_bytes()[k] - b'X') as usize] = Freedom::Fixed;
        k += 1;
    }
    out
}

pub(super) fn properties() -> Properties {
    Properties { area: AREA, i_y: I_Y, i_z: I_Z, i_t: I_T, ..Properties::default() }
}

pub(super) fn plane() -> Build {
    Build::new(Frame::Plane)
}

pub(super) fn space() -> Build {
    Build::new(Frame::Space)
}

impl Build {
    fn new(frame: Frame) -> Self {
        let structure = Structure {
            name: "main".to_owned(),
            frame,
            nodes: Vec::new(),
            members: Vec::new(),
            origin: origin(),
        };
        Self(Model {
            project: ProjectInfo::default(),
            basis: Basis::default(),
            units: Units::new(System::Si),
            significant: 4,
            shear_deformation: false,
            analysis: AnalysisSettings {
                order: "first".to_owned(),
                imperfections: "none".to_owned(),
            },
            package: PackageSettings {
                draw: Draw::All,
                moments: MomentSide::Tension,
                paper: Paper::A4,
                local_axes: false,
            },
            values: Vec::new(),
            build_ups: Vec::new(),
            materials: Vec::new(),
            sections: Vec::new(),
            structures: vec![structure],
            solve_order: vec![StructureId(0)],
            nodes: Vec::new(),
            members: Vec::new(),
            cases: Vec::new(),
            parts: Vec::new(),
            combinations: Vec::new(),
            rules: Vec::new(),
            checks: Vec::new(),
            workings: Vec::new(),
            narrative: Vec::new(),
        })
        .section(properties())
    }

    /// For all members that follow.
    pub(super) fn section(mut self, properties: Properties) -> Self {
        self.0.sections.push(Section {
            name: "section".to_owned(),
            title: "given properties".to_owned(),
            properties,
            source: String::new(),
            origin: origin(),
        });
        self.0.materials.push(Material {
            name: "steel".to_owned(),
            title: "steel".to_owned(),
            family: "steel".to_owned(),
            e: E,
            g: G,
            density: 7850.0,
            expansion: ALPHA,
            strengths: Default::default(),
            up_to: None,
            service_class: None,
            source: String::new(),
            origin: origin(),
        });
        self
    }

    /// A further structure; nodes and members that follow belong to it.
    pub(super) fn structure(mut self, frame: Frame) -> Self {
        self.0.solve_order.push(StructureId(self.0.structures.len()));
        self.0.structures.push(Structure {
            name: format!("structure {}", self.0.structures.len()),
            frame,
            nodes: Vec::new(),
            members: Vec::new(),
            origin: origin(),
        });
        self
    }

    pub(super) fn node(mut self, name: &str, at: [f64; 3]) -> Self {
        let id = NodeId(self.0.nodes.len());
        let structure = StructureId(self.0.structures.len() - 1);
        self.0.structures[structure.0].nodes.push(id);
        self.0.nodes.push(Node {
            name: name.to_owned(),
            structure,
            at,
            support: None,
            origin: origin(),
        });
        self
    }

    pub(super) fn support(self, node: &str, freedoms: [Freedom; 6]) -> Self {
        self.turned(node, freedoms, [[1.0, 0.0, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, 1.0]])
    }

    pub(super) fn turned(mut self, node: &str, freedoms: [Freedom; 6], axes: Axes) -> Self {
        let id = self.id(node);
        self.0.nodes[id.0].support = Some(Support {
            kind: "per freedom".to_owned(),
            freedoms,
            axes,
            turned: None,
            uplift_anchored: false,
            origin: origin(),
        });
        self
    }

    /// Local axes by the rule of the design.
    pub(super) fn member(self, name: &str, along: &[&str]) -> Self {
        let x = self.direction(along);
        let horizontal = libm::hypot(x[0], x[1]);
        let up = if horizontal <= 0.01 {
            cross(x, less([0.0, 1.0, 0.0], x))
        } else {
            less([0.0, 0.0, 1.0], x)
        };
        self.member_towards(name, along, up)
    }

    /// Local z as near as may be to `up`.
    pub(super) fn member_towards(mut self, name: &str, along: &[&str], up: [f64; 3]) -> Self {
        let x = self.direction(along);
        let z = unit(less(up, x));
        let nodes: Vec<NodeId> = along.iter().map(|node| self.id(node)).collect();
        let start = self.0[nodes[0]].at;
        let stations: Vec<f64> =
            nodes.iter().map(|node| length(difference(self.0[*node].at, start))).collect();
        let structure = StructureId(self.0.structures.len() - 1);
        self.0.structures[structure.0].members.push(MemberId(self.0.members.len()));
        self.0.members.push(Member {
            name: name.to_owned(),
            structure,
            length: stations[stations.len() - 1],
            along: nodes,
            stations,
            axes: [x, cross(z, x), z],
            section: SectionId(self.0.sections.len() - 1),
            material: MaterialId(self.0.materials.len() - 1),
            hinges: Vec::new(),
            spans: Vec::new(),
            spans_written: false,
            held: Held::default(),
            buckling_length: [None, None],
            imposed_reduction: None,
            axial_only: None,
            origin: origin(),
        });
        self
    }

    /// Spans by their positions, with free ends marked.
    pub(super) fn span(mut self, from: f64, to: f64, free: [bool; 2]) -> Self {
        let member = self.0.members.last_mut().expect("a member");
        let nodes = [member.along[0], member.along[member.along.len() - 1]];
        member.spans.push(Span { nodes, from, to, free });
        self
    }

    /// A hinge of the last member.
    pub(super) fn hinge(mut self, station: usize, releases: &[(Effect, Release)]) -> Self {
        let mut all = [Release::Rigid; 6];
        for (effect, release) in releases {
            all[effect.index()] = *release;
        }
        let member = self.0.members.last_mut().expect("a member");
        member.hinges.push(Hinge { station, releases: all, origin: origin() });
        self
    }

    /// The last member carries axial force only.
    pub(super) fn axial_only(mut self) -> Self {
        self.0.members.last_mut().expect("a member").axial_only =
            Some(AxialOnly { compression_accepted: true });
        self
    }

    pub(super) fn case(mut self, loads: Vec<LoadKind>) -> Self {
        let loads = loads
            .into_iter()
            .map(|kind| Load {
                kind,
                written: Written {
                    form: LoadForm::Nodal,
                    direction: Direction::DOWN,
                    per: Per::Length,
                    values: Vec::new(),
                    width: None,
                    build_up: None,
                    every: None,
                    span: None,
                },
                source: None,
                origin: origin(),
            })
            .collect();
        let name = format!("case {}", self.0.cases.len() + 1);
        self.0.cases.push(LoadCase {
            title: name.clone(),
            name,
            nature: Nature::Permanent,
            category: None,
            psi: None,
            relations: Relations::default(),
            by_span: None,
            duration: None,
            source: None,
            self_weight: false,
            loads,
            origin: origin(),
        });
        self
    }

    pub(super) fn id(&self, node: &str) -> NodeId {
        NodeId(self.0.nodes.iter().position(|n| n.name == node).expect("a node of that name"))
    }

    pub(super) fn solve(self) -> Solved {
        match analysis::solve(&self.0) {
            Ok(solution) => Solved { model: self.0, solution },
            Err(problems) => panic!("{problems:#?}"),
        }
    }

    /// The messages of a structure that cannot be solved.
    pub(super) fn refused(self) -> Vec<Diagnostic> {
        analysis::solve(&self.0).expect_err("this structure must be refused")
    }

    fn direction(&self, along: &[&str]) -> [f64; 3] {
        let at = |name: &str| self.0[self.id(name)].at;
        unit(difference(at(along[along.len() - 1]), at(along[0])))
    }
}

/// A solution with its model.
pub(super) struct Solved {
    pub(super) model: Model,
    pub(super) solution: Solution,
}

impl Solved {
    /// An effect of the first case just after `x`.
    pub(super) fn after(&self, member: usize, effect: Effect, x: f64) -> f64 {
        self.effect(0, member, effect, x, Side::After)
    }

    /// An effect of the first case just before `x`.
    pub(super) fn before(&self, member: usize, effect: Effect, x: f64) -> f64 {
        self.effect(0, member, effect, x, Side::Before)
    }

    pub(super) fn effect(
        &self,
        case: usize,
        member: usize,
        effect: Effect,
        x: f64,
        side: Side,
    ) -> f64 {
        let segments = &self.solution.members[member].segments;
        let segment = match side {
            Side::Before => segments.iter().rev().find(|s| s.from < x).unwrap_or(&segments[0]),
            Side::After => {
                segments.iter().find(|s| x < s.to).unwrap_or(&segments[segments.len() - 1])
            }
        };
        evaluate(&segment.states[case].0[effect.index()], x - segment.from)
    }

    pub(super) fn displacement(&self, node: &str) -> [f64; 6] {
        self.solution.nodes[self.id(node)].displacement[0]
    }

    pub(super) fn reaction(&self, node: &str) -> [f64; 6] {
        self.solution.nodes[self.id(node)].reaction[0]
    }

    fn id(&self, node: &str) -> usize {
        self.model.nodes.iter().position(|n| n.name == node).expect("a node of that name")
    }
}

/// Fails unless both agree within `relative` of the larger, or of `scale` where that is larger.
#[track_caller]
pub(super) fn close(computed: f64, published: f64, scale: f64) {
    let margin = 1e-10 * published.abs().max(scale);
    assert!((computed - published).abs() <= margin, "computed {computed}, expected {published}");
}

/// A load over the whole of a member, N/m.
pub(super) fn line(member: usize, length: f64, force: [f64; 3]) -> LoadKind {
    LoadKind::Line { member: MemberId(member), from: 0.0, to: length, start: force, end: force }
}

pub(super) fn point(member: usize, at: f64, force: [f64; 3]) -> LoadKind {
    LoadKind::Point { member: MemberId(member), at, force, moment: [0.0; 3] }
}

pub(super) fn on_node(node: usize, force: [f64; 3], moment: [f64; 3]) -> LoadKind {
    LoadKind::Node { node: NodeId(node), force, moment }
}

fn origin() -> Place {
    Place { file: "project.yaml".to_owned(), range: 0..0 }
}

fn difference(a: [f64; 3], b: [f64; 3]) -> [f64; 3] {
    [a[0] - b[0], a[1] - b[1], a[2] - b[2]]
}

fn dot(a: [f64; 3], b: [f64; 3]) -> f64 {
    a[0] * b[0] + a[1] * b[1] + a[2] * b[2]
}

fn cross(a: [f64; 3], b: [f64; 3]) -> [f64; 3] {
    [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]]
}

/// What of `a` stands at right angles to the unit vector `x`.
fn less(a: [f64; 3], x: [f64; 3]) -> [f64; 3] {
    let along = dot(a, x);
    [a[0] - along * x[0], a[1] - along * x[1], a[2] - along * x[2]]
}

fn length(a: [f64; 3]) -> f64 {
    dot(a, a).sqrt()
}

fn unit(a: [f64; 3]) -> [f64; 3] {
    let size = length(a);
    a.map(|c| c / size)
}
