//! The head of a member's drawing: the member with its nodes, supports, neighbours and spans.

use super::canvas::{Canvas, Pen};
use super::member::{Drawing, ENDS};
use super::plane::{Point, length, scaled, unit};
use super::sheet::hinge_offset;
use super::symbols;
use super::text::Text;
use super::view::dot;

impl Drawing<'_> {
    /// The member with its supports, what frames in, its hinges, nodes and spans.
    pub(super) fn member_line(&self, canvas: &mut Canvas) {
        let axes = self.member.axes;
        let direction = |vector: [f64; 3]| [dot(axes[0], vector), -dot(axes[2], vector)];
        // Between neighbouring nodes where they stand closest.
        let room = self
            .member
            .stations
            .windows(2)
            .map(|pair| self.x(pair[1]) - self.x(pair[0]))
            .fold(f64::INFINITY, f64::min);
        for (node, station) in self.member.along.iter().zip(&self.member.stations) {
            let at = [self.x(*station), 0.0];
            self.neighbours(canvas, node, at, direction);
            let support =
                self.sheet.structure.nodes.get(node).and_then(|node| node.support.as_ref());
            if let Some(support) = support {
                let start = *station <= 0.0;
                let end = *station >= self.member.length;
                let both = [[1.0, 0.0], [-1.0, 0.0]];
                let members = if start {
                    &both[..1]
                } else if end {
                    &both[1..]
                } else {
                    &both[..]
                };
                symbols::support(canvas, at, support, direction, members, self.sheet.view.space);
            }
            let name = Text::new(node.as_str()).strong();
            let outer = *station <= 0.0 || *station >= self.member.length;
            if outer || !self.crowded() || name.width() < room {
                canvas.label(at, [0.0, -1.0], 0, name);
            }
        }
        canvas.line([ENDS[0], 0.0], [ENDS[1], 0.0], Pen::Member);
        for hinge in &self.member.hinges {
            if let Some(by) = hinge_offset(self.member, hinge) {
                symbols::hinge(canvas, [self.x(hinge.x) + by, 0.0]);
            }
        }
        let y = canvas.bottom() + 5.0;
        let written: Vec<Text> = self
            .member
            .spans
            .iter()
            .map(|span| Text::new(self.sheet.length(span.to - span.from)))
            .collect();
        for (span, text) in self.member.spans.iter().zip(&written) {
            let [a, b] = [self.x(span.from), self.x(span.to)];
            if text.width() < b - a {
                symbols::dimension(canvas, [a, y], [b, y], text);
            } else if self.crowded() {
                symbols::dimension(canvas, [a, y], [b, y], &Text::new(""));
            } else {
                canvas.line([a, y], [b, y], Pen::Hair);
                canvas.label([(a + b) / 2.0, y], [0.0, 1.0], 2, text.clone());
            }
        }
    }

    /// Stubs of other members that meet this one at a node.
    fn neighbours(
        &self,
        canvas: &mut Canvas,
        node: &str,
        at: Point,
        direction: impl Fn([f64; 3]) -> Point,
    ) {
        let nodes = &self.sheet.structure.nodes;
        let Some(here) = nodes.get(node) else { return };
        for (name, member) in &self.sheet.structure.members {
            let Some(place) = member.along.iter().position(|other| other == node) else { continue };
            if name == self.name {
                continue;
            }
            for other in [place.checked_sub(1), Some(place + 1)].into_iter().flatten() {
                let Some(there) = member.along.get(other).and_then(|name| nodes.get(name)) else {
                    continue;
                };
                let run: [f64; 3] = std::array::from_fn(|i| there.at[i] - here.at[i]);
                let flat = direction(run);
                if length(flat) > 1e-6 {
                    let tip = scaled(unit(flat), 5.0);
                    canvas.line(at, [at[0] + tip[0], at[1] + tip[1]], Pen::Ghost);
                }
            }
        }
    }
}
