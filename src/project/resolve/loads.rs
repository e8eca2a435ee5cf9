//! One load as written → what acts, in global axes.

use super::geometry::{Vector, dot, scaled};
use super::handed::{giver, handed};
use super::members::frame;
use super::reader::Reader;
use super::stretch::{Stretch, stretch};
use crate::diagnostic::Diagnostic;
use crate::model::{
    BuildUpId, Direction, Frame, Freedom, Handed, Load, LoadForm, LoadKind, MemberId, Model,
    NodeId, Per, Target, Written,
};
use crate::project::text::{Located, Text};
use crate::project::written;
use crate::quantity::Kind;

/// Positions may pass an end by this share of the member's length, for round-off.
pub(super) const END: f64 = 1e-9;

/// The loads that one written load makes: one for each member it names.
pub(super) fn load(
    reader: &mut Reader,
    model: &Model,
    written: &Located<written::Load>,
) -> Vec<Load> {
    let names = written.member.iter().chain(written.members.iter().flatten());
    let members: Vec<MemberId> = names.filter_map(|name| member(reader, model, name)).collect();
    let node = written.node.as_ref().and_then(|name| any_node(reader, model, name));
    let source = super::about::words(written.source.as_ref());
    let mut out = Vec::new();
    let mut file = |kind: LoadKind, said: Written| {
        out.push(Load { kind, written: said, source: source.clone(), origin: written.place() });
    };
    if let Some(node) = node
        && let Some((kind, said)) = on_node(reader, model, written, node)
    {
        file(kind, said);
    }
    for id in members {
        if let Some((kind, said)) = on_member(reader, model, written, id) {
            file(kind, said);
        }
    }
    out
}

/// The member of a name, anywhere in the project.
pub(super) fn member(reader: &mut Reader, model: &Model, name: &Text) -> Option<MemberId> {
    let known = model.members.iter().map(|member| member.name.as_str());
    reader.find(name, "member", "unknown-member", known).map(MemberId)
}

/// The node of a name, anywhere in the project.
pub(super) fn any_node(reader: &mut Reader, model: &Model, name: &Text) -> Option<NodeId> {
    let known = model.nodes.iter().map(|node| node.name.as_str());
    reader.find(name, "node", "unknown-node", known).map(NodeId)
}

/// What acts and how it was written; `None` where something was wrong and reported.
pub(super) type Resolved = Option<(LoadKind, Written)>;

/// How a load was written, downward and per length; the callers set the rest.
pub(super) fn said(form: LoadForm, values: Vec<f64>) -> Written {
    Written {
        form,
        direction: Direction::DOWN,
        per: Per::Length,
        values,
        width: None,
        build_up: None,
        every: None,
        span: None,
    }
}

// ---- on nodes

fn on_node(
    reader: &mut Reader,
    model: &Model,
    written: &Located<written::Load>,
    node: NodeId,
) -> Resolved {
    let structure = &model[model[node].structure];
    if !structure.nodes.contains(&node) {
        let place = written.node.as_ref().map_or_else(|| written.place(), Text::place);
        reader.error("no-member", format!("no member reaches node `{}`", model[node].name), place);
        return None;
    }
    let plane = structure.frame == Frame::Plane;
    if let Some(from) = &written.reaction_of {
        let giver = giver(reader, model, from, model[node].structure)?;
        for text in [&written.at, &written.every, &written.from, &written.to].into_iter().flatten()
        {
            reader.error(
                "off-member",
                "a reaction handed to a node has no place along a member",
                text.place(),
            );
        }
        let handed = Handed { from: giver, to: Target::Node(node), at: vec![0.0] };
        return Some((LoadKind::Handed(handed), said(LoadForm::ReactionOf, Vec::new())));
    }
    if let Some(movement) = &written.displaced {
        return displaced(reader, model, node, movement);
    }
    let mut components = |given: Option<&written::Components>, kind: Kind, across: [bool; 3]| {
        let mut out = [0.0; 3];
        for (k, text) in given.map(written::Components::parts).into_iter().flatten().enumerate() {
            let Some(text) = text else { continue };
            if plane && across[k] {
                out_of_plane(reader, text);
            }
            out[k] = reader.quantity(text, kind)?;
        }
        Some(out)
    };
    let force = components(written.force.as_ref(), Kind::Force, [false, true, false]);
    let moment = components(written.moment.as_ref(), Kind::Moment, [true, false, true]);
    let (force, moment) = (force?, moment?);
    let values = force.into_iter().chain(moment).collect();
    Some((LoadKind::Node { node, force, moment }, said(LoadForm::Nodal, values)))
}

fn displaced(
    reader: &mut Reader,
    model: &Model,
    node: NodeId,
    movement: &written::Movement,
) -> Resolved {
    let mut by = [None; 6];
    for (k, text) in movement.parts().into_iter().enumerate() {
        let Some(text) = text else { continue };
        let kind = if k < 3 { Kind::Deflection } else { Kind::Rotation };
        by[k] = reader.quantity(text, kind);
        let freedom = model[node].support.as_ref().map(|support| support.freedoms[k]);
        if matches!(freedom, None | Some(Freedom::Free)) {
            let axis = ["X", "Y", "Z", "RX", "RY", "RZ"][k];
            reader.problem(
                Diagnostic::error(
                    "free-direction",
                    format!(
                        "node `{}` is free along {axis}: no ground moves it there",
                        model[node].name
                    ),
                )
                .at(text.place())
                .hint("displace a fixed or sprung freedom of a support".to_owned()),
            );
        }
    }
    let values = by.iter().map(|value| value.unwrap_or(0.0)).collect();
    Some((LoadKind::Displaced { node, by }, said(LoadForm::Displaced, values)))
}

// ---- on members

fn on_member(
    reader: &mut Reader,
    model: &Model,
    written: &Located<written::Load>,
    id: MemberId,
) -> Resolved {
    let imposed = written.warming.is_some() || written.lack_of_fit.is_some();
    if model[id].axial_only.is_some() && !imposed {
        reader.problem(
            Diagnostic::error(
                "axial-only",
                format!(
                    "member `{}` carries axial force only: it takes no load along its length",
                    model[id].name
                ),
            )
            .at(written.place())
            .hint("put the load on its nodes".to_owned()),
        );
        return None;
    }
    if let Some(warming) = &written.warming {
        return warmed(reader, model, warming, id);
    }
    if let Some(text) = &written.lack_of_fit {
        let length = reader.quantity(text, Kind::Deflection)?;
        return Some((
            LoadKind::LackOfFit { member: id, length },
            said(LoadForm::LackOfFit, vec![length]),
        ));
    }
    let stretch = stretch(reader, model, written, id)?;
    if let Some(from) = &written.reaction_of {
        return handed(reader, model, written, from, id, &stretch);
    }
    if let Some(text) = &written.point {
        let value = reader.quantity(text, Kind::Force);
        let at = stretch.position(reader, written.at.as_ref()?);
        let direction = direction(reader, model, written, id)?;
        let (value, at) = (value?, at?);
        let force = scaled(direction.1, value);
        let said = Written {
            direction: direction.0,
            span: stretch.span,
            ..said(LoadForm::Point, vec![value])
        };
        return Some((LoadKind::Point { member: id, at, force, moment: [0.0; 3] }, said));
    }
    if let Some(text) = &written.point_moment {
        let value = reader.quantity(text, Kind::Moment);
        let at = stretch.position(reader, written.at.as_ref()?);
        let about = written.about.as_ref()?;
        let axis = match about.is {
            written::words::Axis::X => 0,
            written::words::Axis::Y => 1,
            written::words::Axis::Z => 2,
        };
        if frame(model, &model[id]) == Frame::Plane && axis != 1 {
            out_of_plane(reader, about.text());
        }
        let (value, at) = (value?, at?);
        let mut moment = [0.0; 3];
        moment[axis] = value;
        let said = Written {
            direction: Direction::Global { axis, sign: 1 },
            span: stretch.span,
            ..said(LoadForm::PointMoment, vec![value])
        };
        return Some((LoadKind::Point { member: id, at, force: [0.0; 3], moment }, said));
    }
    line(reader, model, written, id, &stretch)
}

/// Uniform, varying, area and build-up loads.
fn line(
    reader: &mut Reader,
    model: &Model,
    written: &Located<written::Load>,
    id: MemberId,
    stretch: &Stretch,
) -> Resolved {
    let width = written.width.as_ref().map(|text| reader.positive(text, Kind::Length));
    let (form, values, build_up) = if let Some(text) = &written.uniform {
        (LoadForm::Uniform, vec![reader.quantity(text, Kind::LineLoad)?], None)
    } else if let Some([start, end]) = &written.varying {
        let start = reader.quantity(start, Kind::LineLoad);
        let end = reader.quantity(end, Kind::LineLoad);
        (LoadForm::Varying, vec![start?, end?], None)
    } else if let Some(text) = &written.area {
        (LoadForm::Area, vec![reader.quantity(text, Kind::AreaLoad)?], None)
    } else {
        let name = written.build_up.as_ref()?;
        let known = model.build_ups.iter().map(|build_up| build_up.name.as_str());
        let place = reader.find(name, "build-up", "unknown-build-up", known)?;
        (LoadForm::BuildUp, vec![model.build_ups[place].total()], Some(BuildUpId(place)))
    };
    let from = written.from.as_ref().map(|text| stretch.position(reader, text));
    let to = written.to.as_ref().map(|text| stretch.position(reader, text));
    let direction = direction(reader, model, written, id)?;
    let per = written.per.as_ref().map_or(Per::Length, |word| word.is);
    let ratio = match per {
        Per::Length => 1.0,
        Per::Projected => {
            let along = dot(model[id].axes[0], direction.1);
            let ratio = (1.0 - along * along).max(0.0).sqrt();
            if ratio <= 1e-6 {
                let place =
                    written.per.as_ref().map_or_else(|| written.place(), |word| word.place());
                reader.problem(
                    Diagnostic::error(
                        "no-projection",
                        format!(
                            "member `{}` runs along the load: its projected length is zero",
                            model[id].name
                        ),
                    )
                    .at(place),
                );
                return None;
            }
            ratio
        }
    };
    let width = match width {
        Some(read) => Some(read?),
        None => None,
    };
    let from = from.unwrap_or(Some(stretch.from))?;
    let to = to.unwrap_or(Some(stretch.to))?;
    if to - from <= END * model[id].length {
        let place = written
            .to
            .as_ref()
            .or(written.from.as_ref())
            .map_or_else(|| written.place(), Text::place);
        reader.error("empty-stretch", "the load ends where it begins, or before", place);
        return None;
    }
    let factor = width.unwrap_or(1.0) * ratio;
    let start = scaled(direction.1, values[0] * factor);
    let end = scaled(direction.1, values[values.len() - 1] * factor);
    let said = Written {
        direction: direction.0,
        per,
        width,
        build_up,
        span: stretch.span,
        ..said(form, values)
    };
    Some((LoadKind::Line { member: id, from, to, start, end }, said))
}

fn warmed(
    reader: &mut Reader,
    model: &Model,
    written: &written::Warming,
    id: MemberId,
) -> Resolved {
    if let Some(text) = &written.uniform {
        let mean = reader.quantity(text, Kind::Temperature)?;
        let kind = LoadKind::Warming { member: id, mean, gradient_z: 0.0, gradient_y: 0.0 };
        return Some((kind, said(LoadForm::Warming, vec![mean, mean])));
    }
    let (top_text, bottom_text) = (written.top.as_ref()?, written.bottom.as_ref()?);
    let top = reader.quantity(top_text, Kind::Temperature);
    let bottom = reader.quantity(bottom_text, Kind::Temperature);
    let (top, bottom) = (top?, bottom?);
    let properties = &model[model[id].section].properties;
    let (Some(depth), Some(below)) = (properties.depth(), properties.z_bottom) else {
        reader.problem(
            Diagnostic::error(
                "no-depth",
                format!(
                    "section `{}` has no depth, so a difference between top and bottom has no gradient",
                    model[model[id].section].name
                ),
            )
            .at(top_text.place())
            .hint("give the section a `depth`".to_owned()),
        );
        return None;
    };
    let gradient_z = (top - bottom) / depth;
    let kind = LoadKind::Warming {
        member: id,
        mean: bottom + gradient_z * below,
        gradient_z,
        gradient_y: 0.0,
    };
    Some((kind, said(LoadForm::Warming, vec![top, bottom])))
}

/// The direction of a load as written and as a unit vector.
fn direction(
    reader: &mut Reader,
    model: &Model,
    written: &Located<written::Load>,
    id: MemberId,
) -> Option<(Direction, Vector)> {
    let member = &model[id];
    let is = written.direction.as_ref().map_or(Direction::DOWN, |word| word.is);
    let vector = match is {
        Direction::Global { axis, sign } => {
            let mut unit = [0.0; 3];
            unit[axis] = f64::from(sign);
            unit
        }
        Direction::Local { axis, sign } => scaled(member.axes[axis], f64::from(sign)),
    };
    if frame(model, member) == Frame::Plane && vector[1].abs() > 1e-9 {
        if let Some(word) = &written.direction {
            out_of_plane(reader, word.text());
        }
        return None;
    }
    Some((is, vector))
}

fn out_of_plane(reader: &mut Reader, text: &Text) {
    reader.problem(
        Diagnostic::error(
            "out-of-plane",
            "this acts out of the plane of a plane frame, which lies in X-Z",
        )
        .at(text.place())
        .hint("make it `frame: space`, or turn the load into the plane".to_owned()),
    );
}
