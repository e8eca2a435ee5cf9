//! A structure on a sheet: its lines, and what its drawings share.

use super::canvas::{Align, Canvas, Pen};
use super::plane::{Point, add, length, moved, sub, unit};
use super::symbols;
use super::text::Text;
use super::view::View;
use crate::quantity::{Kind, Printer};
use crate::record::{HingeRecord, MemberRecord, Record, StructureRecord};

/// What is drawn: one structure of a record, and how.
pub(super) struct Sheet<'a> {
    pub(super) record: &'a Record,
    pub(super) printer: &'a Printer,
    pub(super) name: &'a str,
    pub(super) structure: &'a StructureRecord,
    pub(super) view: View,
}

impl<'a> Sheet<'a> {
    pub(super) fn new(
        record: &'a Record,
        printer: &'a Printer,
        name: &'a str,
        structure: &'a StructureRecord,
    ) -> Self {
        Self { record, printer, name, structure, view: View::of(structure) }
    }

    pub(super) fn node(&self, name: &str) -> Point {
        self.structure.nodes.get(name).map_or([0.0; 2], |node| self.view.point(node.at))
    }

    /// Place of position `x` along a member in space.
    pub(super) fn at(&self, member: &MemberRecord, x: f64) -> [f64; 3] {
        let start = member.along.first().and_then(|name| self.structure.nodes.get(name));
        super::view::along(start.map_or([0.0; 3], |node| node.at), member.axes[0], x)
    }

    pub(super) fn paper(&self, member: &MemberRecord, x: f64) -> Point {
        self.view.point(self.at(member, x))
    }

    /// Members as lines; hinges and supports on them.
    pub(super) fn skeleton(&self, canvas: &mut Canvas, pen: Pen) {
        for (name, node) in &self.structure.nodes {
            if let Some(support) = &node.support {
                symbols::support(
                    canvas,
                    self.view.point(node.at),
                    support,
                    |vector| self.view.direction(vector),
                    &self.members_at(name),
                    self.view.space,
                );
            }
        }
        for member in self.structure.members.values() {
            let pen =
                if member.axial_only.is_some() && pen == Pen::Member { Pen::Brace } else { pen };
            canvas.line(self.paper(member, 0.0), self.paper(member, member.length), pen);
        }
        for member in self.structure.members.values() {
            self.hinges(canvas, member);
        }
    }

    fn hinges(&self, canvas: &mut Canvas, member: &MemberRecord) {
        for hinge in &member.hinges {
            if let Some(by) = hinge_offset(member, hinge) {
                let along = unit(self.view.direction(member.axes[0]));
                symbols::hinge(canvas, moved(self.paper(member, hinge.x), along, by));
            }
        }
    }

    /// Directions of the members at a node, on the paper.
    fn members_at(&self, node: &str) -> Vec<Point> {
        let at = self.node(node);
        let mut directions = Vec::new();
        for member in self.structure.members.values() {
            let Some(place) = member.along.iter().position(|name| name == node) else { continue };
            let neighbours = [place.checked_sub(1), Some(place + 1)];
            let others = neighbours.into_iter().flatten().filter_map(|i| member.along.get(i));
            directions.extend(others.map(|other| unit(sub(self.node(other), at))));
        }
        directions
    }

    pub(super) fn node_names(&self, canvas: &mut Canvas) {
        for name in self.structure.nodes.keys() {
            let away = symbols::away(&self.members_at(name));
            // Beside a support's symbol rather than on it.
            let side = if away[1] > 0.5 { [-0.8, -0.6] } else { away };
            canvas.label(self.node(name), side, 1, Text::new(name.as_str()).strong());
        }
    }

    /// The axes of space, below the drawing.
    pub(super) fn triad(&self, canvas: &mut Canvas) {
        let at = [8.0, canvas.bottom() + 4.0];
        let all = [("X", [1.0, 0.0, 0.0]), ("Y", [0.0, 1.0, 0.0]), ("Z", [0.0, 0.0, 1.0])];
        let seen: Vec<(&str, Point)> = all
            .into_iter()
            .map(|(name, axis)| (name, self.view.direction(axis)))
            .filter(|(_, axis)| length(*axis) > 0.1)
            .collect();
        symbols::triad(canvas, at, &seen);
    }

    /// Left edge of the structure on the paper.
    pub(super) fn left(&self) -> f64 {
        let nodes = self.structure.nodes.values();
        nodes.map(|node| self.view.point(node.at)[0]).fold(f64::INFINITY, f64::min)
    }

    /// Writes a length with its unit.
    pub(super) fn length(&self, metres: f64) -> String {
        self.printer.with_unit(Kind::Length, metres)
    }
}

/// How far a hinge's circle stands from its node along the member, mm: in the piece that is released.
/// `None` where no bending moment is released.
pub(super) fn hinge_offset(member: &MemberRecord, hinge: &HingeRecord) -> Option<f64> {
    let last = hinge.x > member.length * (1.0 - 1e-9);
    let bends = hinge.releases.keys().any(|force| force.starts_with('M'));
    bends.then_some(if last { -1.5 } else { 1.5 })
}

/// A row of samples with their meaning, below the drawing.
pub(super) fn legend(canvas: &mut Canvas, top: f64, entries: &[(Sample, Text)]) {
    let (mut x, mut y) = (8.0, top);
    for (sample, text) in entries {
        if x + 9.0 + text.width() > super::canvas::WIDTH - 2.0 && x > 8.0 {
            (x, y) = (8.0, y + 4.2);
        }
        sample.draw(canvas, [x, y]);
        canvas.text([x + 8.5, y], Align::Start, text);
        x += 8.5 + text.width() + 5.0;
    }
}

/// What a legend shows.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Sample {
    Line(Pen),
    Band,
    Extreme,
    Zero,
}

impl Sample {
    fn draw(self, canvas: &mut Canvas, [x, y]: Point) {
        match self {
            Self::Line(pen) => canvas.line([x, y], [x + 7.0, y], pen),
            Self::Band => canvas.polygon(
                &[[x, y - 1.2], [x + 7.0, y - 1.2], [x + 7.0, y + 1.2], [x, y + 1.2]],
                Pen::Tint,
            ),
            Self::Extreme => extreme(canvas, [x + 3.5, y]),
            Self::Zero => zero(canvas, [x + 3.5, y]),
        }
    }
}

/// The mark of an extreme.
pub(super) fn extreme(canvas: &mut Canvas, at: Point) {
    canvas.circle(at, 0.7, Pen::Ink);
}

/// The mark of a zero.
pub(super) fn zero(canvas: &mut Canvas, at: Point) {
    let r = 0.85;
    let corners = [[0.0, -r], [r, 0.0], [0.0, r], [-r, 0.0]].map(|corner| add(at, corner));
    canvas.polygon(&corners, Pen::Open);
}
