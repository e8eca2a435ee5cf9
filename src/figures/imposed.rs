//! What moves, warms or does not fit: loads that are no forces.

use super::canvas::{Canvas, Pen};
use super::loads::Drawing;
use super::plane::{Point, add, moved, scaled, turned, unit};
use super::symbols;
use super::text::Text;
use super::view::cross;
use crate::quantity::Kind;
use crate::record::{LoadRecord, MemberRecord};

impl Drawing<'_> {
    pub(super) fn displaced(&self, canvas: &mut Canvas, node: &str, load: &LoadRecord) {
        let at = self.sheet.node(node);
        let Some(support) =
            self.sheet.structure.nodes.get(node).and_then(|node| node.support.as_ref())
        else {
            return;
        };
        for (i, by) in load.values.iter().enumerate().take(6).filter(|(_, by)| by.abs() > 0.0) {
            let axis = support.axes[i % 3].map(|component| component * by.signum());
            if i >= 3 {
                let value = self.sheet.printer.with_unit(Kind::Rotation, by.abs());
                self.turned_by(canvas, at, axis, &value);
                continue;
            }
            let Some(direction) = self.seen(axis) else { continue };
            let start = add(moved(at, direction, 1.5), scaled(turned(direction), 5.5));
            let end = moved(start, direction, 7.0);
            canvas.line(start, end, Pen::Second);
            canvas.arrow_head(end, direction, 1.9);
            let value = self.sheet.printer.with_unit(Kind::Deflection, by.abs());
            canvas.label(end, direction, 3, Text::new(format!("support moves {value}")));
        }
    }

    fn turned_by(&self, canvas: &mut Canvas, at: Point, axis: [f64; 3], value: &str) {
        let other = if axis[2].abs() < 0.9 { [0.0, 0.0, 1.0] } else { [1.0, 0.0, 0.0] };
        let first = cross(other, axis);
        let second = cross(axis, first);
        let view = &self.sheet.view;
        symbols::curl(canvas, at, view.direction(first), view.direction(second), 4.2, true);
        canvas.label(
            add(at, [3.0, 3.0]),
            [0.7, 0.7],
            3,
            Text::new(format!("support turns {value}")),
        );
    }

    /// Dashed lines along the edges that change temperature, each with its change.
    pub(super) fn warming(&self, canvas: &mut Canvas, member: &MemberRecord, load: &LoadRecord) {
        let up = unit(self.sheet.view.direction(member.axes[2]));
        let top = load.values.first().copied().unwrap_or(0.0);
        let bottom = load.values.get(1).copied().unwrap_or(top);
        let degrees = |change: f64| {
            let sign = if change > 0.0 { "+" } else { "" };
            format!("{sign}{}", self.sheet.printer.with_unit(Kind::Temperature, change))
        };
        let same = (top - bottom).abs() <= 1e-9 * top.abs().max(bottom.abs());
        for (offset, change, name) in [(1.6, top, "top "), (-1.6, bottom, "bottom ")] {
            let edge = |x: f64| moved(self.sheet.paper(member, x), up, offset);
            canvas.line(edge(0.0), edge(member.length), Pen::Second);
            let words = if same { degrees(change) } else { format!("{name}{}", degrees(change)) };
            if !same || offset > 0.0 {
                canvas.label(edge(member.length * 0.5), scaled(up, offset), 3, Text::new(words));
            }
        }
    }

    /// Arrows outwards where the member is made too long, inwards where too short.
    pub(super) fn lack_of_fit(
        &self,
        canvas: &mut Canvas,
        member: &MemberRecord,
        load: &LoadRecord,
    ) {
        let by = load.values.first().copied().unwrap_or(0.0);
        let axis = unit(self.sheet.view.direction(member.axes[0]));
        let side = self.clear_side(axis);
        let middle = moved(self.sheet.paper(member, member.length / 2.0), side, 2.4);
        for sense in [1.0, -1.0] {
            let [near, far] = [1.5, 9.0].map(|along| moved(middle, axis, along * sense));
            let (from, to) = if by > 0.0 { (near, far) } else { (far, near) };
            canvas.arrow(from, to, Pen::Load);
        }
        let value = self.sheet.printer.with_unit(Kind::Deflection, by.abs());
        let words = if by > 0.0 { "too long" } else { "too short" };
        canvas.label(middle, side, 3, Text::new(format!("made {value} {words}")));
    }
}
