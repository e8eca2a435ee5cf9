//! Placing labels: each beside its anchor, none over another, drawn lines avoided where possible.
//!
//! Greedy: labels are placed one after the other in order of rank. Each tries positions all round its
//! anchor at growing distances and takes the one with the least penalty; a position over a placed label
//! is never taken. Below the drawing there is always room, so every label finds a place.

use super::plane::{Area, Point, add, length, scaled, sub, unit};
use super::text::{SIZE, Text};

/// A label to be placed.
#[derive(Clone, Debug)]
pub(super) struct Label {
    pub(super) text: Text,
    /// Points it may stand beside, the best first; at least one.
    pub(super) anchors: Vec<Point>,
    /// The side of its anchor on which it should stand.
    pub(super) side: Point,
    /// Lower ranks are placed first.
    pub(super) rank: u8,
}

/// A label in its place.
#[derive(Clone, Debug)]
pub(super) struct Placed {
    pub(super) text: Text,
    pub(super) area: Area,
    /// A line to the anchor where the label stands away from it.
    pub(super) leader: Option<[Point; 2]>,
    /// It stands on drawn lines.
    pub(super) on_lines: bool,
}

/// What labels must keep clear of.
#[derive(Debug, Default)]
pub(super) struct Placer {
    /// Lines drawn.
    pub(super) ink: Vec<[Point; 2]>,
    /// Boxes taken by text.
    pub(super) taken: Vec<Area>,
}

/// Height of a label's box, mm.
pub(super) const HEIGHT: f64 = SIZE * 1.12;
/// Clear space round a label, mm.
const CLEAR: f64 = 0.35;
/// Distances from the anchor that are tried, mm.
const DISTANCES: [f64; 12] = [0.9, 1.6, 2.6, 4.0, 5.6, 7.6, 10.0, 13.0, 17.0, 22.0, 28.0, 36.0];
/// From this gap on a leader joins label and anchor, mm.
const LEADER: f64 = 2.4;
/// Penalty of a line crossed, and of each anchor after the first, mm of distance.
const CROSSED: f64 = 4.5;
const NEXT: f64 = 0.8;
/// Both parts of a unit vector half way between the axes.
const DIAGONAL: f64 = std::f64::consts::FRAC_1_SQRT_2;
/// Sixteen directions, as unit vectors.
const DIRECTIONS: [Point; 16] = [
    [1.0, 0.0],
    [0.923_9, 0.382_7],
    [DIAGONAL, DIAGONAL],
    [0.382_7, 0.923_9],
    [0.0, 1.0],
    [-0.382_7, 0.923_9],
    [-DIAGONAL, DIAGONAL],
    [-0.923_9, 0.382_7],
    [-1.0, 0.0],
    [-0.923_9, -0.382_7],
    [-DIAGONAL, -DIAGONAL],
    [-0.382_7, -0.923_9],
    [0.0, -1.0],
    [0.382_7, -0.923_9],
    [DIAGONAL, -DIAGONAL],
    [0.923_9, -0.382_7],
];

impl Placer {
    /// Places all labels between the left and right edges of the paper.
    pub(super) fn place(mut self, mut labels: Vec<Label>, edges: [f64; 2]) -> Vec<Placed> {
        labels.sort_by_key(|label| label.rank);
        labels.into_iter().map(|label| self.place_one(label, edges)).collect()
    }

    fn place_one(&mut self, label: Label, edges: [f64; 2]) -> Placed {
        let size = [label.text.width(), HEIGHT];
        let side = unit(label.side);
        let mut best: Option<(f64, Area, Point)> = None;
        for (order, anchor) in (0_u8..).zip(&label.anchors) {
            self.improve(&mut best, *anchor, f64::from(order) * NEXT, side, size, edges);
        }
        let first = label.anchors.first().copied().unwrap_or_default();
        let (_, area, anchor) =
            best.unwrap_or_else(|| (0.0, self.below(first, size, edges), first));
        self.taken.push(area);
        let leader = leader(anchor, &area);
        let on_lines = self.ink.iter().any(|[a, b]| area.meets(*a, *b));
        self.ink.extend(leader);
        Placed { text: label.text, area, leader, on_lines }
    }

    /// Looks for a better position round an anchor that costs `cost` by itself.
    fn improve(
        &self,
        best: &mut Option<(f64, Area, Point)>,
        anchor: Point,
        cost: f64,
        side: Point,
        size: Point,
        edges: [f64; 2],
    ) {
        let reach = Area::around(&[anchor]).grown(size[0] + 40.0);
        let ink: Vec<[Point; 2]> =
            self.ink.iter().copied().filter(|[a, b]| reach.meets(*a, *b)).collect();
        let taken: Vec<Area> =
            self.taken.iter().copied().filter(|area| area.overlaps(&reach)).collect();
        for distance in DISTANCES {
            // Farther positions can only be worse than what is found already.
            if best.is_some_and(|(penalty, ..)| penalty < cost + distance) {
                break;
            }
            for direction in DIRECTIONS {
                let agreement = direction[0] * side[0] + direction[1] * side[1];
                let least = cost + distance + (1.0 - agreement) * 1.5;
                let area = beside(anchor, direction, distance, size);
                if area.min[0] < edges[0]
                    || area.max[0] > edges[1]
                    || best.is_some_and(|(penalty, ..)| penalty <= least)
                {
                    continue;
                }
                let clear = area.grown(CLEAR);
                if taken.iter().any(|other| clear.overlaps(other)) {
                    continue;
                }
                let near = area.grown(0.2);
                let crossed = ink.iter().filter(|[a, b]| near.meets(*a, *b)).count();
                let penalty = least
                    + crossed.min(20) as f64 * CROSSED
                    + leader_penalty(anchor, &area, &taken);
                if best.is_none_or(|(found, ..)| penalty < found) {
                    *best = Some((penalty, area, anchor));
                }
            }
        }
    }

    /// The first free place straight below everything near the anchor.
    fn below(&self, anchor: Point, size: Point, edges: [f64; 2]) -> Area {
        let left = (anchor[0] - size[0] / 2.0).min(edges[1] - size[0]).max(edges[0]);
        let mut top = anchor[1] + 2.0;
        loop {
            let area = Area { min: [left, top], max: [left + size[0], top + size[1]] };
            let lowest = self
                .taken
                .iter()
                .filter(|other| area.grown(CLEAR).overlaps(other))
                .map(|other| other.max[1])
                .reduce(f64::max);
            match lowest {
                Some(lowest) => top = lowest + CLEAR * 2.0,
                None => return area,
            }
        }
    }
}

/// The box that stands off the anchor in a direction, its nearest side `distance` away.
fn beside(anchor: Point, direction: Point, distance: f64, size: Point) -> Area {
    let centre = add(
        add(anchor, scaled(direction, distance)),
        [direction[0] * size[0] / 2.0, direction[1] * size[1] / 2.0],
    );
    Area {
        min: [centre[0] - size[0] / 2.0, centre[1] - size[1] / 2.0],
        max: [centre[0] + size[0] / 2.0, centre[1] + size[1] / 2.0],
    }
}

fn leader(anchor: Point, area: &Area) -> Option<[Point; 2]> {
    let end = area.nearest(anchor);
    let gap = sub(end, anchor);
    (length(gap) > LEADER).then(|| [add(anchor, scaled(unit(gap), 0.7)), end])
}

fn leader_penalty(anchor: Point, area: &Area, taken: &[Area]) -> f64 {
    let Some([a, b]) = leader(anchor, area) else { return 0.0 };
    let crossed = taken.iter().filter(|other| other.meets(a, b)).count();
    1.5 + crossed.min(20) as f64 * 12.0
}
