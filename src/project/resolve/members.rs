//! Members: collinear nodes, local axes, spans, hinges, restraint.

use super::geometry::{
    Vector, axes_towards, between, cleaned, dot, fits, length, rotated, scaled, unit, usual_axes,
};
use super::names::Names;
use super::reader::Reader;
use super::structures::{Blocks, node};
use crate::diagnostic::Diagnostic;
use crate::model::{
    Axes, AxialOnly, Frame, Held, HeldAlong, Hinge, MaterialId, Member, Model, NodeId, Release,
    SectionId, Span, StructureId,
};
use crate::project::text::Text;
use crate::project::written;
use crate::quantity::Kind;

/// How far, as a share of the member's length, a node may stand off the line of its ends.
const STRAIGHT: f64 = 1e-6;
/// Releases in the order N, V_y, V_z, T, M_y, M_z: the first three resist movement.
const MOVEMENTS: usize = 3;

pub(super) fn members(
    reader: &mut Reader,
    model: &mut Model,
    names: &mut Names,
    structure: StructureId,
    blocks: &Blocks<'_>,
) {
    let first = model.members.len();
    for (name, written) in blocks.members {
        names.take(reader, name, "member");
        if let Some(member) = member(reader, model, structure, name, written) {
            model.structures[structure.0].members.push(crate::model::MemberId(model.members.len()));
            model.members.push(member);
        }
    }
    // Spans need to know which other members meet at a node.
    for index in first..model.members.len() {
        let name = model.members[index].name.clone();
        let Some(written) = blocks.members.get(name.as_str()) else { continue };
        let spans = spans(reader, model, index, written);
        model.members[index].spans = spans;
    }
}

fn member(
    reader: &mut Reader,
    model: &Model,
    structure: StructureId,
    name: &Text,
    written: &written::Member,
) -> Option<Member> {
    let section = reader.find(
        &written.section,
        "section",
        "unknown-section",
        model.sections.iter().map(|section| section.name.as_str()),
    );
    let material = reader.find(
        &written.material,
        "material",
        "unknown-material",
        model.materials.iter().map(|material| material.name.as_str()),
    );
    let along: Vec<Option<NodeId>> =
        written.along.iter().map(|text| node(reader, model, structure, text)).collect();
    let along: Vec<NodeId> = along.into_iter().collect::<Option<_>>()?;
    let (stations, x) = line(reader, model, name, written, &along)?;
    let axes = axes(reader, model, structure, name, written, &along, x)?;
    let hinges = hinges(reader, name, written);
    let held = Held {
        top: edge(
            reader,
            model,
            structure,
            written.held.as_ref().and_then(|held| held.top.as_ref()),
            &along,
        ),
        bottom: edge(
            reader,
            model,
            structure,
            written.held.as_ref().and_then(|held| held.bottom.as_ref()),
            &along,
        ),
    };
    let imposed_reduction = written.imposed_reduction.as_ref().and_then(|reduction| {
        let factor = reader.positive(&reduction.factor, Kind::Number)?;
        if factor > 1.0 {
            let place = reduction.factor.place();
            reader.error(
                "reduction",
                format!("`{}` is above 1: it reduces nothing", reduction.factor),
                place,
            );
            return None;
        }
        Some((factor, reduction.source.to_string()))
    });
    let lengths = written.buckling_length.as_ref();
    let mut buckling =
        |text: Option<&Text>| text.and_then(|text| reader.positive(text, Kind::Length));
    let buckling_length = [
        buckling(lengths.and_then(|lengths| lengths.y.as_ref())),
        buckling(lengths.and_then(|lengths| lengths.z.as_ref())),
    ];
    let axial_only = written
        .axial_only
        .unwrap_or(false)
        .then_some(AxialOnly { compression_accepted: written.compression.is_some() });
    if let (None, Some(word)) = (axial_only, &written.compression) {
        reader.error(
            "compression",
            format!("member `{name}` is not `axial_only`: there is no compression to accept"),
            word.place(),
        );
    }
    Some(Member {
        name: name.to_string(),
        structure,
        length: *stations.last()?,
        along,
        stations,
        axes,
        section: SectionId(section?),
        material: MaterialId(material?),
        hinges,
        spans: Vec::new(),
        spans_written: written.spans.is_some(),
        held,
        buckling_length,
        imposed_reduction,
        axial_only,
        origin: name.place(),
    })
}

/// Positions of the nodes along the member and its direction.
fn line(
    reader: &mut Reader,
    model: &Model,
    name: &Text,
    written: &written::Member,
    along: &[NodeId],
) -> Option<(Vec<f64>, Vector)> {
    let at = |id: &NodeId| model[*id].at;
    let (first, last) = (along.first()?, along.last()?);
    if along.iter().any(|id| at(id).iter().any(|c| !c.is_finite())) {
        return None;
    }
    let total = between(at(first), at(last));
    let size = length(total);
    if size <= 1e-9 {
        reader.problem(
            Diagnostic::error("zero-length", format!("member `{name}` has no length"))
                .at(written.along[0].place())
                .label(format!(
                    "`{}` and `{}` are the same place",
                    model[*first].name, model[*last].name
                )),
        );
        return None;
    }
    let x = unit(total);
    let mut stations: Vec<f64> = Vec::with_capacity(along.len());
    for (place, id) in along.iter().enumerate() {
        let offset = between(at(first), at(id));
        let s = if place + 1 == along.len() { size } else { dot(offset, x) };
        let off = length(between(scaled(x, s), offset));
        if off > STRAIGHT * size {
            reader.problem(
                Diagnostic::error("not-straight", format!("member `{name}` is not straight"))
                    .at(written.along[place].place())
                    .label(format!("`{}` stands off the line of its ends", model[*id].name))
                    .hint("make one member for each straight piece".to_owned()),
            );
            return None;
        }
        if stations.last().is_some_and(|before| s <= before + 1e-9) {
            reader.problem(
                Diagnostic::error(
                    "zero-length",
                    format!("the nodes of member `{name}` do not follow one another"),
                )
                .at(written.along[place].place())
                .label("this node does not lie beyond the one before it"),
            );
            return None;
        }
        stations.push(s);
    }
    Some((stations, x))
}

fn axes(
    reader: &mut Reader,
    model: &Model,
    structure: StructureId,
    name: &Text,
    written: &written::Member,
    along: &[NodeId],
    x: Vector,
) -> Option<Axes> {
    let mut axes = match &written.z_towards {
        None => usual_axes(x),
        Some(towards) => {
            let (direction, place) = match towards {
                written::Towards::Word(text) => {
                    let id = node(reader, model, structure, text)?;
                    reader.marks.insert(text.to_string());
                    (between(model[along[0]].at, model[id].at), text.place())
                }
                written::Towards::List(parts) => {
                    let read = parts.each_ref().map(|text| reader.quantity(text, Kind::Number));
                    let [a, b, c] = read;
                    ([a?, b?, c?], parts[0].place())
                }
            };
            let found = axes_towards(x, direction);
            if found.is_none() {
                reader.error(
                    "z-towards",
                    format!("`z_towards` of member `{name}` points along the member"),
                    place.clone(),
                );
            }
            found?
        }
    };
    if let Some(text) = &written.rotate {
        axes = rotated(axes, reader.quantity(text, Kind::Angle)?);
    }
    let axes = cleaned(axes);
    if !fits(model[structure].frame, &axes) {
        let place = written.rotate.as_ref().map_or_else(|| name.place(), Text::place);
        reader.problem(
            Diagnostic::error(
                "out-of-plane",
                format!("the axes of member `{name}` do not lie in and square to the plane frame"),
            )
            .at(place)
            .hint("in a plane frame a member can be turned by quarter turns; else make it `frame: space`".to_owned()),
        );
        return None;
    }
    Some(axes)
}

fn hinges(reader: &mut Reader, name: &Text, written: &written::Member) -> Vec<Hinge> {
    let last = written.along.len() - 1;
    let mut out: Vec<Hinge> = Vec::new();
    for (key, hinge) in &written.hinges {
        let station = match key.as_str() {
            "start" => Some(0),
            "end" => Some(last),
            other => written.along.iter().position(|node| node.as_str() == other),
        };
        let Some(station) = station else {
            let inner = written.along.iter().map(Text::as_str).chain(["start", "end"]);
            reader.problem(
                Diagnostic::error(
                    "unknown-node",
                    format!("member `{name}` has no place named `{key}`"),
                )
                .at(key.place())
                .label("expected `start`, `end` or a node of this member")
                .hint(super::about::meant(key, inner)),
            );
            continue;
        };
        let mut releases = [Release::Rigid; 6];
        for (k, text) in hinge.releases().into_iter().enumerate() {
            let Some(text) = text else { continue };
            if text.as_str() == "free" {
                releases[k] = Release::Free;
                continue;
            }
            let kind = if k < MOVEMENTS { Kind::Spring } else { Kind::RotationSpring };
            if let Some(stiffness) = reader.positive(text, kind) {
                releases[k] = Release::Spring(stiffness);
            }
        }
        if out.iter().any(|other| other.station == station) {
            reader.error(
                "duplicate-name",
                format!("member `{name}` has two hinges at the same place"),
                key.place(),
            );
        }
        out.push(Hinge { station, releases, origin: key.place() });
    }
    out.sort_by_key(|hinge| hinge.station);
    out
}

fn edge(
    reader: &mut Reader,
    model: &Model,
    structure: StructureId,
    written: Option<&written::HeldAlong>,
    along: &[NodeId],
) -> HeldAlong {
    match written {
        None => HeldAlong::NotStated,
        Some(written::HeldAlong::Word(_)) => HeldAlong::Continuous,
        Some(written::HeldAlong::List(names)) => {
            let mut nodes = Vec::new();
            for name in names {
                let Some(id) = node(reader, model, structure, name) else { continue };
                if along.contains(&id) {
                    nodes.push(id);
                } else {
                    reader.error(
                        "off-member",
                        format!("node `{name}` is not on this member"),
                        name.place(),
                    );
                }
            }
            HeldAlong::At(nodes)
        }
    }
}

/// Spans as written, or the stretches between the ends and the supported nodes.
fn spans(reader: &mut Reader, model: &Model, index: usize, written: &written::Member) -> Vec<Span> {
    let member = &model.members[index];
    let mut bounds: Vec<usize> = Vec::new();
    match &written.spans {
        Some(names) => {
            for name in names {
                match written.along.iter().position(|node| node == name) {
                    Some(station) if bounds.last().is_none_or(|before| *before < station) => {
                        bounds.push(station);
                    }
                    Some(_) => reader.error(
                        "spans",
                        format!("`{name}` does not lie beyond the span's node before it"),
                        name.place(),
                    ),
                    None => reader.problem(
                        Diagnostic::error(
                            "unknown-node",
                            format!("`{name}` is not a node of member `{}`", member.name),
                        )
                        .at(name.place())
                        .hint(super::about::meant(name, written.along.iter().map(Text::as_str))),
                    ),
                }
            }
        }
        None => {
            let last = member.along.len() - 1;
            let supported = |station: &usize| model[member.along[*station]].support.is_some();
            bounds.extend((0..=last).filter(|k| *k == 0 || *k == last || supported(k)));
        }
    }
    let free = |station: usize| {
        let id = member.along[station];
        let outer = station == 0 || station + 1 == member.along.len();
        outer && model[id].support.is_none() && !joined(model, index, id)
    };
    bounds
        .windows(2)
        .map(|pair| Span {
            nodes: [member.along[pair[0]], member.along[pair[1]]],
            from: member.stations[pair[0]],
            to: member.stations[pair[1]],
            free: [free(pair[0]), free(pair[1])],
        })
        .collect()
}

/// Another member meets this one at a node.
fn joined(model: &Model, index: usize, id: NodeId) -> bool {
    let others = model.members.iter().enumerate().filter(|(other, _)| *other != index);
    others.map(|(_, member)| member).any(|member| member.along.contains(&id))
}

/// Spans were left out although another member frames in between the supports, so that it is not plain
/// what a span is.
pub(super) fn spans_unclear(model: &Model, index: usize) -> bool {
    let member = &model.members[index];
    let inner = &member.along[1..member.along.len() - 1];
    !member.spans_written
        && inner.iter().any(|id| model[*id].support.is_none() && joined(model, index, *id))
}

/// The frame of a member.
pub(super) fn frame(model: &Model, member: &Member) -> Frame {
    model[member.structure].frame
}
