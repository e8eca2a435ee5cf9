//! The model of a structure: members, nodes, supports, hinges, restraint, dimensions.

use super::Figure;
use super::canvas::{Canvas, Pen};
use super::names::slug;
use super::plane::{Point, add, between, length, moved, scaled, sub, turned, unit};
use super::sheet::{Sample, Sheet, legend};
use super::symbols;
use super::text::Text;
use crate::quantity::Kind;
use crate::record::{FreedomRecord, MemberRecord, SupportRecord};

/// Size of the largest section's outline on the paper, mm.
const OUTLINE: f64 = 8.0;
/// Clear width a dimension's text needs beside itself, mm.
const ROOM: f64 = 1.0;

pub(super) fn figure(sheet: &Sheet<'_>) -> Figure {
    let mut canvas = Canvas::default();
    sheet.skeleton(&mut canvas, Pen::Member);
    let mut held = false;
    for member in sheet.structure.members.values() {
        held |= restraint(&mut canvas, sheet, member);
    }
    if sheet.view.space {
        section_outlines(&mut canvas, sheet);
    }
    if sheet.record.model.package.local_axes {
        for member in sheet.structure.members.values() {
            local_axes(&mut canvas, sheet, member);
        }
    }
    sheet.node_names(&mut canvas);
    for (name, member) in &sheet.structure.members {
        member_name(&mut canvas, sheet, name, member);
    }
    for (name, node) in &sheet.structure.nodes {
        if let Some(support) = &node.support {
            spring_values(&mut canvas, sheet, sheet.node(name), support);
        }
    }
    if !sheet.view.space {
        dimensions(&mut canvas, sheet);
    }
    sheet.triad(&mut canvas);
    let braces = sheet.structure.members.values().any(|member| member.axial_only.is_some());
    let mut entries = Vec::new();
    if held {
        entries
            .push((Sample::Line(Pen::Dotted), Text::new("edge held sideways (cross: at a node)")));
    }
    if braces {
        entries.push((Sample::Line(Pen::Brace), Text::new("carries axial force only")));
    }
    if !entries.is_empty() {
        let top = canvas.bottom() + 6.0;
        legend(&mut canvas, top, &entries);
    }
    written(sheet, canvas)
}

fn written(sheet: &Sheet<'_>, canvas: Canvas) -> Figure {
    let id = format!("model-{}", slug(sheet.name));
    let (nodes, members) = (sheet.structure.nodes.len(), sheet.structure.members.len());
    let supports = sheet.structure.nodes.values().filter(|node| node.support.is_some()).count();
    let title = format!("Model of structure {}", sheet.name);
    let view = if sheet.view.space {
        "seen from the front, the right and above, section outlines enlarged"
    } else {
        "seen along Y"
    };
    let caption = format!("Model of structure {}, {view}.", sheet.name);
    let description = format!(
        "Line drawing with {nodes} nodes, {members} members and {supports} supports; names and lengths \
         are written beside them, and the tables of the model hold them all."
    );
    Figure {
        svg: canvas.finish(&id, &title, &description),
        id,
        caption,
        structure: Some(sheet.name.to_owned()),
        ..Figure::default()
    }
}

/// Members of a frame in space carry their length in their name: no dimension lines are drawn there.
fn member_name(canvas: &mut Canvas, sheet: &Sheet<'_>, name: &str, member: &MemberRecord) {
    let [a, b] = [sheet.paper(member, 0.0), sheet.paper(member, member.length)];
    let across = turned(unit(sub(b, a)));
    let side = if across[1] > 0.0 || (across[1].abs() < 0.3 && across[0] < 0.0) {
        scaled(across, -1.0)
    } else {
        across
    };
    let words = if sheet.view.space {
        format!("{name}, {}", sheet.length(member.length))
    } else {
        name.to_owned()
    };
    // Beside the middle of the longest piece between nodes, or elsewhere along the member.
    let longest =
        member.stations.windows(2).map(|pair| (pair[1] - pair[0], (pair[0] + pair[1]) / 2.0)).fold(
            (0.0, member.length / 2.0),
            |most, piece| if piece.0 > most.0 { piece } else { most },
        );
    let middle = longest.1 / member.length;
    let anchors = [middle, 0.42, 0.58, 0.32, 0.7, 0.2, 0.82].map(|t| between(a, b, t));
    canvas.label_along(&anchors, side, 2, Text::new(words));
}

/// Dotted lines along edges held sideways, crosses where they are held at nodes.
fn restraint(canvas: &mut Canvas, sheet: &Sheet<'_>, member: &MemberRecord) -> bool {
    let up = unit(sheet.view.direction(member.axes[2]));
    let mut drawn = false;
    for (held, offset) in [(&member.held.top, 1.3), (&member.held.bottom, -1.3)] {
        let edge = |x: f64| moved(sheet.paper(member, x), up, offset);
        match held.as_str() {
            "not stated" => continue,
            "continuous" => canvas.line(edge(0.0), edge(member.length), Pen::Dotted),
            names => {
                for name in names.split(',').map(str::trim) {
                    let Some(place) = member.along.iter().position(|node| node == name) else {
                        continue;
                    };
                    let at = edge(member.stations.get(place).copied().unwrap_or(0.0));
                    for slope in [[0.8, 0.8], [0.8, -0.8]] {
                        canvas.line(sub(at, slope), add(at, slope), Pen::Axis);
                    }
                }
            }
        }
        drawn = true;
    }
    drawn
}

fn local_axes(canvas: &mut Canvas, sheet: &Sheet<'_>, member: &MemberRecord) {
    // Beside the member, so that x shows.
    let beside = sheet.view.direction(member.axes[2]);
    let origin = moved(sheet.paper(member, member.length * 0.62), unit(beside), 2.6);
    for (name, axis) in ["x", "y", "z"].into_iter().zip(member.axes) {
        let flat = sheet.view.direction(axis);
        if length(flat) < 0.15 {
            continue;
        }
        let tip = moved(origin, flat, 6.0);
        canvas.arrow(origin, tip, Pen::Axis);
        canvas.label(tip, flat, 3, Text::new(name));
    }
}

/// Sections of members in space, all at one scale, turned as they lie.
fn section_outlines(canvas: &mut Canvas, sheet: &Sheet<'_>) {
    let outline = |member: &MemberRecord| -> Option<&Vec<Vec<[f64; 2]>>> {
        let section = sheet.record.model.sections.get(&member.section)?;
        Some(&section.outline).filter(|loops| !loops.is_empty())
    };
    let largest = sheet
        .structure
        .members
        .values()
        .filter_map(outline)
        .flatten()
        .flatten()
        .map(|[y, z]| y.abs().max(z.abs()))
        .fold(0.0, f64::max);
    if largest <= 0.0 {
        return;
    }
    let scale = OUTLINE / 2.0 / largest;
    for member in sheet.structure.members.values() {
        let Some(loops) = outline(member) else { continue };
        let centre = sheet.paper(member, member.length * 0.25);
        let [y_axis, z_axis] = [1, 2].map(|axis| sheet.view.direction(member.axes[axis]));
        let drawn: Vec<Vec<Point>> = loops
            .iter()
            .map(|corners| {
                corners
                    .iter()
                    .map(|[y, z]| moved(moved(centre, y_axis, y * scale), z_axis, z * scale))
                    .collect()
            })
            .collect();
        canvas.loops(&drawn, Pen::Tint);
    }
}

/// Stiffnesses of a support's springs, written beside it.
fn spring_values(canvas: &mut Canvas, sheet: &Sheet<'_>, at: Point, support: &SupportRecord) {
    for (i, freedom) in support.freedoms.iter().enumerate() {
        let FreedomRecord::Spring(stiffness) = freedom else { continue };
        let kind = if i < 3 { Kind::Spring } else { Kind::RotationSpring };
        let axis = ["X", "Y", "Z", "RX", "RY", "RZ"][i];
        let words = format!("{axis}: {}", sheet.printer.with_unit(kind, *stiffness));
        canvas.label(add(at, [1.2, 3.0]), [1.0, 0.2], 3, Text::new(words));
    }
}

/// Chains of dimensions below and to the left, between the nodes' coordinates.
fn dimensions(canvas: &mut Canvas, sheet: &Sheet<'_>) {
    let (below, left) = (canvas.bottom() + 6.0, sheet.left() - 8.0);
    let coordinates = |axis: usize| {
        let mut all: Vec<f64> = sheet.structure.nodes.values().map(|node| node.at[axis]).collect();
        all.sort_by(f64::total_cmp);
        all.dedup_by(|a, b| (*a - *b).abs() < 1e-6);
        all
    };
    let (xs, zs) = (coordinates(0), coordinates(2));
    let paper_x = |x: f64| [sheet.view.point([x, 0.0, 0.0])[0], below];
    let paper_z = |z: f64| [left, sheet.view.point([0.0, 0.0, z])[1]];
    chain(canvas, sheet, &xs, paper_x, |text| text.width() + ROOM, [0.0, 5.0]);
    chain(canvas, sheet, &zs, paper_z, |text| text.width() + ROOM, [-5.5, 0.0]);
}

/// A chain of dimensions and, where it has several links, the whole outside it; links too short for
/// their text leave the whole alone.
fn chain(
    canvas: &mut Canvas,
    sheet: &Sheet<'_>,
    stops: &[f64],
    place: impl Fn(f64) -> Point,
    room: impl Fn(&Text) -> f64,
    outside: Point,
) {
    let (Some(first), Some(last)) = (stops.first(), stops.last()) else { return };
    let text = |run: f64| Text::new(sheet.length(run));
    let links: Vec<([Point; 2], Text)> = stops
        .windows(2)
        .map(|pair| ([place(pair[0]), place(pair[1])], text(pair[1] - pair[0])))
        .collect();
    let fits = links.iter().all(|([a, b], text)| length(sub(*b, *a)) > room(text));
    if fits {
        for ([a, b], text) in &links {
            symbols::dimension(canvas, *a, *b, text);
        }
    }
    if links.len() > 1 {
        let shift = if fits { outside } else { [0.0; 2] };
        let [a, b] = [add(place(*first), shift), add(place(*last), shift)];
        symbols::dimension(canvas, a, b, &text(last - first));
    }
}
