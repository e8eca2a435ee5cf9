//! Supports: kinds, freedoms, turned axes.

use super::geometry::{GLOBAL, cleaned, turned};
use super::reader::Reader;
use super::structures::{Blocks, node};
use crate::diagnostic::Diagnostic;
use crate::model::{Axes, Frame, Freedom, Model, StructureId, Support};
use crate::project::text::{Text, Word};
use crate::project::written;
use crate::project::written::words::{Axis, SupportKind};
use crate::quantity::Kind;

const NAMES: [&str; 6] = ["X", "Y", "Z", "RX", "RY", "RZ"];

pub(super) fn supports(
    reader: &mut Reader,
    model: &mut Model,
    structure: StructureId,
    blocks: &Blocks<'_>,
) {
    for (name, written) in blocks.supports.into_iter().flatten() {
        let Some(id) = node(reader, model, structure, name) else { continue };
        let frame = model[structure].frame;
        let (kind, map) = match written {
            written::Support::Word(kind) => (Some(kind), None),
            written::Support::Map(map) => (map.kind.as_ref(), Some(map)),
        };
        let mut freedoms = kind.map_or([Freedom::Free; 6], |kind| of_kind(kind.is));
        let mut axes = GLOBAL;
        let mut turn = None;
        if let Some(map) = map {
            for (k, text) in map.freedoms().into_iter().enumerate() {
                if let Some(freedom) = text.and_then(|text| freedom(reader, text, k)) {
                    if frame == Frame::Plane && !matches!(k, 0 | 2 | 4) && freedom != Freedom::Fixed
                    {
                        out_of_plane(reader, text, NAMES[k]);
                    }
                    freedoms[k] = freedom;
                }
            }
            if let Some(written) = &map.turned
                && let Some((own, said)) = turning(reader, frame, written)
            {
                axes = own;
                turn = Some(said);
            }
        }
        if freedoms == [Freedom::Free; 6] {
            reader.error("empty", format!("the support at `{name}` holds nothing"), name.place());
        }
        model.nodes[id.0].support = Some(Support {
            kind: kind.map_or("per freedom", |kind| kind.text().as_str()).to_owned(),
            freedoms,
            axes,
            turned: turn,
            uplift_anchored: map.is_some_and(|map| map.uplift.is_some()),
            origin: name.place(),
        });
    }
}

/// A fork holds a member's end against twisting: the rotation about the member's own axis.
pub(super) fn forks(
    reader: &mut Reader,
    model: &mut Model,
    structure: StructureId,
    blocks: &Blocks<'_>,
) {
    if model[structure].frame == Frame::Plane {
        return;
    }
    for (name, written) in blocks.supports.into_iter().flatten() {
        let Some(kind) = fork(written) else { continue };
        let Some(id) =
            model[structure].nodes.iter().copied().find(|id| model[*id].name == name.as_str())
        else {
            continue;
        };
        let mut axis = None;
        let mut several = false;
        for member in model.members.iter().filter(|member| member.along.contains(&id)) {
            let own = (0..3).find(|k| (member.axes[0][*k].abs() - 1.0).abs() < 1e-9);
            several |= axis.is_some_and(|known| Some(known) != own) || own.is_none();
            axis = own.or(axis);
        }
        match (axis, several) {
            (Some(k), false) => {
                if let Some(support) = &mut model.nodes[id.0].support {
                    support.freedoms[3 + k] = Freedom::Fixed;
                }
            }
            _ => reader.problem(
                Diagnostic::error(
                    "fork",
                    format!("at `{name}` it is not plain about which axis the fork holds against twisting"),
                )
                .at(kind.place())
                .hint("name the freedoms: {X: fixed, Y: fixed, Z: fixed, RX: fixed}".to_owned()),
            ),
        }
    }
}

fn fork(written: &written::Support) -> Option<&Word<SupportKind>> {
    let kind = match written {
        written::Support::Word(kind) => kind,
        written::Support::Map(map) => map.kind.as_ref()?,
    };
    (kind.is == SupportKind::Fork).then_some(kind)
}

fn of_kind(kind: SupportKind) -> [Freedom; 6] {
    let held = match kind {
        SupportKind::Pinned | SupportKind::Fork => 3,
        SupportKind::Fixed => 6,
    };
    std::array::from_fn(|k| if k < held { Freedom::Fixed } else { Freedom::Free })
}

fn freedom(reader: &mut Reader, text: &Text, k: usize) -> Option<Freedom> {
    match text.as_str() {
        "fixed" => Some(Freedom::Fixed),
        "free" => Some(Freedom::Free),
        _ => {
            let kind = if k < 3 { Kind::Spring } else { Kind::RotationSpring };
            reader.positive(text, kind).map(Freedom::Spring)
        }
    }
}

fn turning(reader: &mut Reader, frame: Frame, written: &written::Turned) -> Option<(Axes, String)> {
    let (axis, by) = match written {
        written::Turned::Word(by) => (Axis::Y, by),
        written::Turned::Map(map) => (map.about.is, &map.by),
    };
    let place = match axis {
        Axis::X => 0,
        Axis::Y => 1,
        Axis::Z => 2,
    };
    let angle = reader.quantity(by, Kind::Angle)?;
    if frame == Frame::Plane && place != 1 {
        out_of_plane(reader, Some(by), "a turn about any axis but Y");
        return None;
    }
    Some((cleaned(turned(place, angle)), format!("{by} about {}", ["X", "Y", "Z"][place])))
}

fn out_of_plane(reader: &mut Reader, text: Option<&Text>, what: &str) {
    if let Some(text) = text {
        reader.error(
            "out-of-plane",
            format!("{what} is out of the plane of a plane frame, which lies in X-Z"),
            text.place(),
        );
    }
}
