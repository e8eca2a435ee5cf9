//! One structure made ready to solve: its elements, its freedoms and the factor of its stiffness.
//!
//! Nodal freedoms run along the support's own axes where there is a support, else along global axes;
//! rotations of a node whose members are hinged in some direction run along the principal directions
//! of what stiffness is left, so that a direction in which nothing holds the node gets no equation.

use nalgebra::{Matrix3, SymmetricEigen, Vector3};

use super::element::{Ends, Flexibility, Matrix12, Vector12};
use super::hinge::{Joined, Loose};
use super::mechanism;
use super::parts;
use super::sparse::{Entries, Factor, Singular, node_order};
use crate::diagnostic::Diagnostic;
use crate::model::{
    Effect, Frame as Kind, Freedom, Member, MemberId, Model, NodeId, Release, StructureId,
};

/// Left-over rotational stiffness below this share of the elements' own does not hold a node.
const UNATTACHED: f64 = 1e-9;

/// A member's piece between two neighbouring nodes.
#[derive(Debug)]
pub(super) struct Element {
    /// Place of the member in the structure.
    pub(super) member: usize,
    /// Places of the nodes in the structure.
    pub(super) nodes: [usize; 2],
    /// Positions along the member, m.
    pub(super) from: f64,
    pub(super) to: f64,
    pub(super) ends: Ends,
    pub(super) joined: Joined,
}

/// What becomes of one nodal freedom.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) enum Place {
    /// Its equation.
    Equation(usize),
    /// Held by a support, or out of plane.
    Held,
    /// Nothing resists it and nothing may load it.
    Unattached,
}

/// The axes of a node's translations and rotations; columns of rows as in [`crate::model::Axes`].
#[derive(Clone, Copy, Debug)]
pub(super) struct NodeAxes {
    pub(super) translation: Matrix3<f64>,
    pub(super) rotation: Matrix3<f64>,
}

/// A structure with its factor.
#[derive(Debug)]
pub(super) struct Frame {
    pub(super) nodes: Vec<NodeId>,
    pub(super) members: Vec<MemberId>,
    pub(super) flexibility: Vec<Flexibility>,
    pub(super) elements: Vec<Element>,
    pub(super) axes: Vec<NodeAxes>,
    pub(super) places: Vec<[Place; 6]>,
    pub(super) equations: usize,
    pub(super) factor: Option<Factor>,
}

impl Frame {
    /// Builds and factorises a structure.
    ///
    /// # Errors
    /// Mechanisms, loose members and properties that give no stiffness.
    pub(super) fn new(model: &Model, structure: StructureId) -> Result<Self, Vec<Diagnostic>> {
        let nodes = model[structure].nodes.clone();
        let members = model[structure].members.clone();
        let mut problems = Vec::new();
        let mut flexibility = Vec::new();
        let mut elements = Vec::new();
        for (place, id) in members.iter().enumerate() {
            let member = &model[*id];
            match elements_of(model, member, place, &nodes) {
                Ok((section, pieces)) => {
                    flexibility.push(section);
                    elements.extend(pieces);
                }
                Err(more) => problems.extend(more),
            }
        }
        if !problems.is_empty() {
            return Err(problems);
        }
        let mut frame = Self {
            axes: nodes.iter().map(|id| node_axes(model, *id)).collect(),
            places: vec![[Place::Held; 6]; nodes.len()],
            nodes,
            members,
            flexibility,
            elements,
            equations: 0,
            factor: None,
        };
        let problems = parts::not_held(model, structure, &frame);
        if !problems.is_empty() {
            return Err(problems);
        }
        frame.place(model, structure);
        let entries = frame.entries(model);
        if frame.equations > 0 {
            frame.factor = Some(Factor::new(frame.equations, &entries).map_err(|singular| {
                vec![match singular {
                    Singular::Mechanism(mode) => mechanism::named(model, structure, &frame, &mode),
                    Singular::Unusable => Diagnostic::error(
                        "not-solvable",
                        format!(
                            "structure `{}` cannot be solved: its stiffnesses differ by too many orders of magnitude",
                            model[structure].name
                        ),
                    )
                    .at(model[structure].origin.clone()),
                }]
            })?);
        }
        Ok(frame)
    }

    /// From nodal axes at both ends of an element to the member's local axes.
    pub(super) fn turn(&self, model: &Model, element: &Element) -> Matrix12 {
        let member = rows(&model[self.members[element.member]].axes);
        let mut turn = Matrix12::zeros();
        for (end, node) in element.nodes.iter().enumerate() {
            let axes = &self.axes[*node];
            for (part, own) in [axes.translation, axes.rotation].into_iter().enumerate() {
                let at = 6 * end + 3 * part;
                turn.fixed_view_mut::<3, 3>(at, at).copy_from(&(member * own.transpose()));
            }
        }
        turn
    }

    /// Gives every freedom its place: fixes, finds unattached rotations, numbers the rest in a
    /// fill-reducing order of the nodes.
    fn place(&mut self, model: &Model, structure: StructureId) {
        let (own, scale) = self.rotational(model);
        for node in 0..self.nodes.len() {
            let free = free_freedoms(model, structure, self.nodes[node]);
            for k in 0..6 {
                self.places[node][k] = if free[k] { Place::Equation(0) } else { Place::Held };
            }
            let block = own[node];
            let sprung = (3..6).any(|k| spring(model, self.nodes[node], k) > 0.0);
            if free[3] && free[4] && free[5] && !sprung {
                let eigen = SymmetricEigen::new(block);
                if eigen.eigenvalues.iter().any(|value| *value <= UNATTACHED * scale[node]) {
                    let turned = right_handed(eigen.eigenvectors.transpose());
                    self.axes[node].rotation = turned * self.axes[node].rotation;
                    for k in 0..3 {
                        if eigen.eigenvalues[k] <= UNATTACHED * scale[node] {
                            self.places[node][3 + k] = Place::Unattached;
                        }
                    }
                }
            } else {
                let limit = UNATTACHED * scale[node];
                for k in left_over(block, [free[3], free[4], free[5]], limit) {
                    self.places[node][3 + k] = Place::Unattached;
                }
            }
        }
        let edges: Vec<[usize; 2]> = self.elements.iter().map(|element| element.nodes).collect();
        for node in node_order(self.nodes.len(), &edges) {
            for place in &mut self.places[node] {
                if *place != Place::Held && *place != Place::Unattached {
                    *place = Place::Equation(self.equations);
                    self.equations += 1;
                }
            }
        }
    }

    /// Rotational stiffness at each node along its axes (members and support springs), and its scale:
    /// what the elements alone would give without hinges.
    fn rotational(&self, model: &Model) -> (Vec<Matrix3<f64>>, Vec<f64>) {
        let mut own = vec![Matrix3::zeros(); self.nodes.len()];
        let mut scale = vec![0.0; self.nodes.len()];
        for element in &self.elements {
            let turn = self.turn(model, element);
            let stiffness = turn.transpose() * element.joined.stiffness * turn;
            for (end, node) in element.nodes.iter().enumerate() {
                own[*node] += stiffness.fixed_view::<3, 3>(6 * end + 3, 6 * end + 3);
                scale[*node] += element.ends.stiffness.fixed_view::<3, 3>(3, 3).trace();
            }
        }
        for (node, id) in self.nodes.iter().enumerate() {
            for k in 0..3 {
                let spring = spring(model, *id, 3 + k);
                own[node][(k, k)] += spring;
                scale[node] += spring;
            }
        }
        (own, scale)
    }

    /// Upper triangle of the stiffness of all equations.
    fn entries(&self, model: &Model) -> Entries {
        let mut entries = Entries::new();
        for element in &self.elements {
            let turn = self.turn(model, element);
            let stiffness = turn.transpose() * element.joined.stiffness * turn;
            for row in 0..12 {
                let Place::Equation(i) = self.places[element.nodes[row / 6]][row % 6] else {
                    continue;
                };
                for column in 0..12 {
                    let Place::Equation(j) = self.places[element.nodes[column / 6]][column % 6]
                    else {
                        continue;
                    };
                    if i <= j {
                        entries.push(faer::sparse::Triplet::new(i, j, stiffness[(row, column)]));
                    }
                }
            }
        }
        for (node, id) in self.nodes.iter().enumerate() {
            for k in 0..6 {
                if let Place::Equation(i) = self.places[node][k] {
                    // Every equation has a diagonal entry, so that nothing is left out of the pattern.
                    entries.push(faer::sparse::Triplet::new(i, i, spring(model, *id, k)));
                }
            }
        }
        entries
    }

    /// A vector of global components (force, then moment) along a node's axes.
    pub(super) fn along(&self, node: usize, global: &[f64; 6]) -> [f64; 6] {
        let force = self.axes[node].translation * Vector3::new(global[0], global[1], global[2]);
        let moment = self.axes[node].rotation * Vector3::new(global[3], global[4], global[5]);
        [force[0], force[1], force[2], moment[0], moment[1], moment[2]]
    }

    /// The opposite of [`Self::along`].
    pub(super) fn global(&self, node: usize, own: &[f64; 6]) -> [f64; 6] {
        let force = self.axes[node].translation.transpose() * Vector3::new(own[0], own[1], own[2]);
        let moment = self.axes[node].rotation.transpose() * Vector3::new(own[3], own[4], own[5]);
        [force[0], force[1], force[2], moment[0], moment[1], moment[2]]
    }

    /// End displacements of an element's nodes, local axes.
    pub(super) fn at_ends(&self, model: &Model, element: &Element, nodes: &[[f64; 6]]) -> Vector12 {
        let both = Vector12::from_fn(|k, _| nodes[element.nodes[k / 6]][k % 6]);
        self.turn(model, element) * both
    }
}

/// The stiffness of a support's spring along its own axes; 0 where there is none.
pub(super) fn spring(model: &Model, node: NodeId, freedom: usize) -> f64 {
    match model[node].support.as_ref().map(|support| support.freedoms[freedom]) {
        Some(Freedom::Spring(stiffness)) => stiffness,
        _ => 0.0,
    }
}

fn free_freedoms(model: &Model, structure: StructureId, node: NodeId) -> [bool; 6] {
    let supported = model[node].support.as_ref();
    std::array::from_fn(|k| {
        let in_plane = model[structure].frame == Kind::Space || matches!(k, 0 | 2 | 4);
        in_plane && supported.is_none_or(|support| support.freedoms[k] != Freedom::Fixed)
    })
}

/// The free rotations that stay without stiffness when the others are eliminated, largest pivot first.
/// Held at nothing, they change no force: the same force follows from any choice of what is not resisted.
fn left_over(mut block: Matrix3<f64>, free: [bool; 3], limit: f64) -> Vec<usize> {
    let mut open: Vec<usize> = (0..3).filter(|k| free[*k]).collect();
    while let Some(place) = (0..open.len())
        .max_by(|a, b| block.diagonal()[open[*a]].total_cmp(&block.diagonal()[open[*b]]))
    {
        let pivot = open[place];
        if block[(pivot, pivot)] <= limit {
            break;
        }
        open.remove(place);
        for row in &open {
            let factor = block[(*row, pivot)] / block[(pivot, pivot)];
            for column in &open {
                block[(*row, *column)] -= factor * block[(pivot, *column)];
            }
        }
    }
    open
}

fn node_axes(model: &Model, node: NodeId) -> NodeAxes {
    let own = model[node].support.as_ref().map_or(Matrix3::identity(), |s| rows(&s.axes));
    NodeAxes { translation: own, rotation: own }
}

fn rows(axes: &crate::model::Axes) -> Matrix3<f64> {
    Matrix3::from_fn(|row, column| axes[row][column])
}

fn right_handed(mut rows: Matrix3<f64>) -> Matrix3<f64> {
    if rows.determinant() < 0.0 {
        rows.row_mut(2).neg_mut();
    }
    rows
}

fn elements_of(
    model: &Model,
    member: &Member,
    place: usize,
    nodes: &[NodeId],
) -> Result<(Flexibility, Vec<Element>), Vec<Diagnostic>> {
    let weak = || {
        vec![Diagnostic::error(
            "no-stiffness",
            format!(
                "member `{}` has no usable stiffness: section `{}` and material `{}` give values that cannot be inverted",
                member.name, model[member.section].name, model[member.material].name
            ),
        )
        .at(member.origin.clone())]
    };
    let flexibility =
        Flexibility::new(&model[member.section], &model[member.material]).ok_or_else(weak)?;
    let last = member.along.len() - 1;
    let mut elements = Vec::with_capacity(last);
    for piece in 0..last {
        let (from, to) = (member.stations[piece], member.stations[piece + 1]);
        let ends = Ends::new(&flexibility, to - from).ok_or_else(weak)?;
        let kind = model[member.structure].frame;
        let releases =
            [released(member, kind, piece, true), released(member, kind, piece + 1, false)];
        let joined =
            Joined::new(&ends.stiffness, &releases).map_err(|loose| vec![spins(member, loose)])?;
        let node = |station: usize| nodes.iter().position(|id| *id == member.along[station]);
        let (Some(start), Some(end)) = (node(piece), node(piece + 1)) else { return Err(weak()) };
        elements.push(Element { member: place, nodes: [start, end], from, to, ends, joined });
    }
    Ok((flexibility, elements))
}

/// Releases of the element end at a station. A hinge at an inner node releases the piece after it; at
/// the end of the member, the piece before it. A member that carries axial force only is hinged at both
/// ends, and free to twist at one, so that it still holds itself. In a plane frame releases out of the
/// plane mean nothing.
fn released(member: &Member, kind: Kind, station: usize, element_starts: bool) -> [Release; 6] {
    let first = station == 0;
    let last = station + 1 == member.along.len();
    if !element_starts && !last {
        return [Release::Rigid; 6];
    }
    let mut out = [Release::Rigid; 6];
    for hinge in member.hinges.iter().filter(|hinge| hinge.station == station) {
        out = hinge.releases;
    }
    if member.axial_only.is_some() && (first || last) {
        out[Effect::My.index()] = Release::Free;
        out[Effect::Mz.index()] = Release::Free;
        out[Effect::T.index()] = if last { Release::Free } else { Release::Rigid };
    }
    if kind == Kind::Plane {
        for effect in [Effect::Vy, Effect::T, Effect::Mz] {
            out[effect.index()] = Release::Rigid;
        }
    }
    out
}

fn spins(member: &Member, loose: Loose) -> Diagnostic {
    let force = crate::model::EFFECTS[loose.freedom % 6].name();
    Diagnostic::error(
        "mechanism",
        format!(
            "member `{}` is loose between its hinges: `{force}` is passed on at neither end",
            member.name
        ),
    )
    .at(member.origin.clone())
    .hint(format!("release `{force}` at one end only, or give the hinge a spring"))
}
