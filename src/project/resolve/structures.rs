//! Structures with their nodes; members and supports follow in their own files.

use super::names::Names;
use super::reader::Reader;
use super::{members, supports};
use crate::model::{Frame, Model, Node, NodeId, Structure, StructureId};
use crate::project::text::{Map, Text, Word};
use crate::project::written;
use crate::quantity::Kind;

/// Name of the structure of a project that writes it at the top level.
pub(in crate::project) const ONLY: &str = "main";

/// One structure's blocks, wherever they stand in the file.
pub(super) struct Blocks<'w> {
    pub(super) frame: &'w Word<Frame>,
    pub(super) nodes: &'w Map<Vec<Text>>,
    pub(super) members: &'w Map<written::Member>,
    pub(super) supports: Option<&'w Map<written::Support>>,
}

pub(super) fn structures(reader: &mut Reader, project: &written::Project, model: &mut Model) {
    let mut names = Names::default();
    let mut parts = Names::default();
    if let Some(structures) = &project.structures {
        for (name, structure) in structures {
            names.take(reader, name, "structure");
            let blocks = Blocks {
                frame: &structure.frame,
                nodes: &structure.nodes,
                members: &structure.members,
                supports: Some(&structure.supports),
            };
            one(reader, model, &mut parts, name.to_string(), &blocks, name.place());
        }
        if structures.is_empty() {
            reader.error("empty", "the project has no structure", project.project.title.place());
        }
    } else if let (Some(frame), Some(nodes), Some(members)) =
        (&project.frame, &project.nodes, &project.members)
    {
        let blocks = Blocks { frame, nodes, members, supports: project.supports.as_ref() };
        one(reader, model, &mut parts, ONLY.to_owned(), &blocks, frame.place());
    }
}

fn one(
    reader: &mut Reader,
    model: &mut Model,
    names: &mut Names,
    name: String,
    blocks: &Blocks<'_>,
    origin: crate::model::Origin,
) {
    let id = StructureId(model.structures.len());
    model.structures.push(Structure {
        name: name.clone(),
        frame: blocks.frame.is,
        nodes: Vec::new(),
        members: Vec::new(),
        origin: origin.clone(),
    });
    for (node, at) in blocks.nodes {
        names.take(reader, node, "node");
        let at = position(reader, node, at, blocks.frame.is).unwrap_or([f64::NAN; 3]);
        model.structures[id.0].nodes.push(NodeId(model.nodes.len()));
        model.nodes.push(Node {
            name: node.to_string(),
            structure: id,
            at,
            support: None,
            origin: node.place(),
        });
    }
    supports::supports(reader, model, id, blocks);
    members::members(reader, model, names, id, blocks);
    supports::forks(reader, model, id, blocks);
    // With a member missing because it was wrong, nothing is known of the nodes it was to reach.
    if model[id].members.len() == blocks.members.len() {
        part_with_marks(reader, model, id);
    }
    if model.structures[id.0].members.is_empty() {
        reader.error("empty", format!("structure `{name}` has no member"), origin.clone());
    }
    if blocks.supports.is_none_or(Map::is_empty) {
        reader.error("no-support", format!("structure `{name}` has no support"), origin);
    }
}

/// Nodes that no member reaches only mark a place (`z_towards`): they are no part of the structure.
fn part_with_marks(reader: &mut Reader, model: &mut Model, id: StructureId) {
    let reached = |node: &NodeId| model.members.iter().any(|member| member.along.contains(node));
    let (nodes, marks): (Vec<NodeId>, Vec<NodeId>) =
        model[id].nodes.iter().copied().partition(reached);
    for mark in marks {
        if let Some(support) = &model[mark].support {
            let message = format!("no member reaches the support at `{}`", model[mark].name);
            reader.error("no-member", message, support.origin.clone());
        }
    }
    model.structures[id.0].nodes = nodes;
}

fn position(reader: &mut Reader, node: &Text, at: &[Text], frame: Frame) -> Option<[f64; 3]> {
    let read: Vec<Option<f64>> =
        at.iter().map(|text| reader.quantity(text, Kind::Length)).collect();
    let expected = match frame {
        Frame::Plane => "[x, z]",
        Frame::Space => "[x, y, z]",
    };
    match (frame, read.as_slice()) {
        (Frame::Plane, [x, z]) => Some([(*x)?, 0.0, (*z)?]),
        (Frame::Space, [x, y, z]) => Some([(*x)?, (*y)?, (*z)?]),
        _ => {
            let place = at.first().map_or_else(|| node.place(), Text::place);
            reader.error(
                "coordinates",
                format!("node `{node}` has {} coordinates, expected {expected}", at.len()),
                place,
            );
            None
        }
    }
}

/// The node of this structure with a name; unknown names are reported.
pub(super) fn node(
    reader: &mut Reader,
    model: &Model,
    structure: StructureId,
    name: &Text,
) -> Option<NodeId> {
    let nodes = &model[structure].nodes;
    let known = nodes.iter().map(|id| model[*id].name.as_str());
    reader.find(name, "node", "unknown-node", known).map(|place| nodes[place])
}
