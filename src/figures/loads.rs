//! The loads of one case on one structure: arrows to scale with their values.

use super::Figure;
use super::canvas::{Canvas, Pen};
use super::names::slug;
use super::plane::{Point, add, between, length, moved, scaled, sub, turned, unit};
use super::sheet::Sheet;
use super::symbols;
use super::text::Text;
use super::view::{cross, norm};
use crate::quantity::Kind;
use crate::record::{CaseRecord, LoadRecord, MemberRecord, TargetRecord};

/// Heights of the greatest and the least line load on the paper, mm.
const LINE: [f64; 2] = [9.0, 1.8];
/// Lengths of the greatest and the least point force, mm.
const FORCE: [f64; 2] = [14.0, 6.0];
/// About so far apart are the arrows of a line load, mm.
const PITCH: f64 = 5.5;
/// Clear space between a member and its first load, and between loads, mm.
const CLEAR: f64 = 0.9;
/// Structures with more nodes are drawn without their names, with more lines of self-weight without
/// the values of these.
const NAMES: usize = 20;
/// Below this share a load's direction counts as along its member.
const ALONG: f64 = 0.12;

pub(super) struct Drawing<'a> {
    pub(super) sheet: &'a Sheet<'a>,
    /// Greatest intensity (N/m) and force (N) of the case on this structure.
    greatest: [f64; 2],
    /// Self-weight is written at every member.
    weighs: bool,
    /// Room taken beside members: member, direction, stretch, outer edge in mm.
    taken: Vec<(&'a str, Point, [f64; 2], f64)>,
}

/// Draws the loads of a case on a structure; `None` where it has none there.
pub(super) fn figure(sheet: &Sheet<'_>, name: &str, case: &CaseRecord) -> Option<Figure> {
    let loads: Vec<&LoadRecord> =
        case.loads.iter().filter(|load| load.structure == sheet.name).collect();
    if loads.is_empty() {
        return None;
    }
    let greatest = |kind: fn(&LoadRecord) -> bool| {
        let of_kind = loads.iter().filter(|load| kind(load));
        of_kind.map(|load| norm(load.start).max(norm(load.end))).fold(0.0, f64::max)
    };
    let mut drawing = Drawing {
        sheet,
        greatest: [greatest(is_line), greatest(|load| !is_line(load))],
        weighs: loads.iter().filter(|load| load.form == "self_weight").count() <= NAMES,
        taken: Vec::new(),
    };
    let mut canvas = Canvas::default();
    for load in &loads {
        drawing.draw(&mut canvas, load);
    }
    sheet.skeleton(&mut canvas, Pen::Member);
    if sheet.structure.nodes.len() <= NAMES {
        sheet.node_names(&mut canvas);
    }
    sheet.triad(&mut canvas);
    let id = format!("loads-{}.{}", slug(sheet.name), slug(name));
    let title = format!("Loads of case {name} on structure {}", sheet.name);
    let silent = if drawing.weighs {
        ""
    } else {
        " Self-weight is drawn without its values, which the table lists."
    };
    let caption = format!(
        "Case {name}, {}: loads on structure {}. Line loads are per length of member; arrows are to \
         scale, the smallest lengthened to be seen.{silent}",
        case.title, sheet.name
    );
    let description = format!(
        "The structure with {} loads as arrows in their directions, each with its value; moments as \
         curved arrows in their sense. The table of the case lists them.",
        loads.len()
    );
    Some(Figure {
        svg: canvas.finish(&id, &title, &description),
        id,
        caption,
        structure: Some(sheet.name.to_owned()),
        case: Some(name.to_owned()),
        ..Figure::default()
    })
}

fn is_line(load: &LoadRecord) -> bool {
    matches!(load.target, TargetRecord::Member(_)) && load.at.is_empty()
}

impl<'a> Drawing<'a> {
    fn draw(&mut self, canvas: &mut Canvas, load: &'a LoadRecord) {
        match &load.target {
            TargetRecord::Node(node) if load.form == "displaced" => {
                self.displaced(canvas, node, load);
            }
            TargetRecord::Node(node) => {
                let at = self.sheet.node(node);
                self.force(canvas, at, load.start, 0.0, true, &prefix(load));
                self.moment(canvas, at, load.moment, true, &prefix(load));
            }
            TargetRecord::Member(name) => {
                let Some((name, member)) = self.sheet.structure.members.get_key_value(name) else {
                    return;
                };
                match load.form.as_str() {
                    "warming" => self.warming(canvas, member, load),
                    "lack_of_fit" => self.lack_of_fit(canvas, member, load),
                    _ if load.at.is_empty() => self.line(canvas, name, member, load),
                    _ => self.points(canvas, name, member, load),
                }
            }
        }
    }

    /// Outer edge of what stands beside a member on a stretch already, mm.
    fn edge(&self, member: &str, direction: Point, stretch: [f64; 2]) -> f64 {
        self.taken
            .iter()
            .filter(|(name, other, [from, to], _)| {
                *name == member
                    && other[0] * direction[0] + other[1] * direction[1] > 0.5
                    && *from <= stretch[1] + 1e-9
                    && *to >= stretch[0] - 1e-9
            })
            .map(|(.., edge)| *edge)
            .fold(0.0, f64::max)
    }

    fn line(
        &mut self,
        canvas: &mut Canvas,
        name: &'a str,
        member: &MemberRecord,
        load: &LoadRecord,
    ) {
        let stretch = [load.from.unwrap_or(0.0), load.to.unwrap_or(member.length)];
        let main = if norm(load.start) >= norm(load.end) { load.start } else { load.end };
        let Some(direction) = self.seen(main) else { return };
        let axis = unit(self.sheet.view.direction(member.axes[0]));
        let lies_along = (axis[0] * direction[1] - axis[1] * direction[0]).abs() < ALONG;
        // Intensities along the direction of the greater.
        let size = norm(main);
        let intensity = [load.start, load.end]
            .map(|q| (0..3).map(|i| q[i] * main[i]).sum::<f64>() / size.max(f64::MIN_POSITIVE));
        let away = if lies_along { self.clear_side(axis) } else { scaled(direction, -1.0) };
        let base = self.edge(name, away, stretch) + CLEAR;
        let ends = stretch.map(|x| moved(self.sheet.paper(member, x), away, base));
        let top = if lies_along {
            axial_arrows(canvas, ends, direction);
            base + 1.6
        } else {
            let heights = intensity.map(|q| self.height(q));
            comb(canvas, ends, away, heights);
            base + heights[0].max(heights[1])
        };
        self.taken.push((name, away, stretch, top));
        if self.weighs || load.form != "self_weight" {
            self.line_values(canvas, ends, away, top - base, intensity, load);
        }
    }

    fn line_values(
        &self,
        canvas: &mut Canvas,
        ends: [Point; 2],
        away: Point,
        height: f64,
        intensity: [f64; 2],
        load: &LoadRecord,
    ) {
        let value = |q: f64| self.sheet.printer.with_unit(Kind::LineLoad, q.abs());
        let prefix = prefix(load);
        if (intensity[0] - intensity[1]).abs() <= 1e-9 * intensity[0].abs().max(intensity[1].abs())
        {
            let places = [0.5, 0.4, 0.6, 0.25, 0.75]
                .map(|t| moved(between(ends[0], ends[1], t), away, height));
            let text = Text::new(format!("{prefix}{}", value(intensity[0])));
            return canvas.label_along(&places, away, 3, text);
        }
        let greater = usize::from(intensity[1].abs() > intensity[0].abs());
        for i in 0..2 {
            let words = if i == greater {
                format!("{prefix}{}", value(intensity[i]))
            } else {
                value(intensity[i])
            };
            let at = moved(ends[i], away, if i == greater { height } else { 0.0 });
            canvas.label(at, away, 3, Text::new(words));
        }
    }

    /// Height of an intensity on the paper, mm, with its sign.
    fn height(&self, intensity: f64) -> f64 {
        if intensity.abs() <= 1e-12 * self.greatest[0] {
            return 0.0;
        }
        (LINE[0] * intensity.abs() / self.greatest[0]).max(LINE[1]).copysign(intensity)
    }

    fn points(
        &mut self,
        canvas: &mut Canvas,
        name: &'a str,
        member: &MemberRecord,
        load: &LoadRecord,
    ) {
        let prefix = prefix(load);
        let many = load.at.len();
        let named = many / 2;
        for (i, x) in load.at.iter().enumerate() {
            let at = self.sheet.paper(member, *x);
            let reach = self
                .seen(load.start)
                .map_or(0.0, |direction| self.edge(name, scaled(direction, -1.0), [*x, *x]));
            let words = if many > 1 { format!("{prefix}{many} × ") } else { prefix.clone() };
            self.force(canvas, at, load.start, reach, i == named, &words);
            self.moment(canvas, at, load.moment, i == named, &words);
        }
    }

    /// A force with its arrow's point at `at`, reaching past `reach` mm of other loads.
    fn force(
        &self,
        canvas: &mut Canvas,
        at: Point,
        force: [f64; 3],
        reach: f64,
        named: bool,
        prefix: &str,
    ) {
        let Some(direction) = self.seen(force) else { return };
        let size = norm(force);
        let long = (FORCE[0] * size / self.greatest[1]).max(FORCE[1]).max(reach + 4.0);
        let tip = moved(at, direction, -CLEAR);
        let tail = moved(tip, direction, -long);
        canvas.arrow(tail, tip, Pen::Force);
        if named {
            let value = self.sheet.printer.with_unit(Kind::Force, size);
            canvas.label(tail, scaled(direction, -1.0), 3, Text::new(format!("{prefix}{value}")));
        }
    }

    /// Moments about each global axis, as curved arrows in their sense.
    fn moment(&self, canvas: &mut Canvas, at: Point, moment: [f64; 3], named: bool, prefix: &str) {
        let size = norm(moment);
        if size <= 0.0 {
            return;
        }
        let axis = moment.map(|component| component / size);
        // Two vectors across the axis; the moment turns the first towards the second.
        let other = if axis[2].abs() < 0.9 { [0.0, 0.0, 1.0] } else { [1.0, 0.0, 0.0] };
        let first = cross(other, axis);
        let long = norm(first);
        let first = first.map(|component| component / long);
        let second = cross(axis, first);
        let view = &self.sheet.view;
        let radius = 3.4;
        symbols::curl(canvas, at, view.direction(first), view.direction(second), radius, true);
        if named {
            let value = self.sheet.printer.with_unit(Kind::Moment, size);
            let edge = add(at, [radius * 0.7, radius * 0.7]);
            canvas.label(edge, [0.7, 0.7], 3, Text::new(format!("{prefix}{value}")));
        }
    }

    /// The direction of a vector on the paper; `None` where it is zero or points at the reader.
    pub(super) fn seen(&self, vector: [f64; 3]) -> Option<Point> {
        let size = norm(vector);
        let flat = self.sheet.view.direction(vector);
        (size > 0.0 && length(flat) > 0.1 * size).then(|| unit(flat))
    }

    /// The upper side of a member on the paper, the left one where it stands.
    pub(super) fn clear_side(&self, axis: Point) -> Point {
        let across = turned(axis);
        let upper = if across[1].abs() > 0.05 { across[1] < 0.0 } else { across[0] < 0.0 };
        if upper { across } else { scaled(across, -1.0) }
    }
}

/// What a load is, before its value.
fn prefix(load: &LoadRecord) -> String {
    match (load.form.as_str(), &load.build_up, &load.reaction_of) {
        ("self_weight", ..) => "self-weight ".to_owned(),
        (_, Some(build_up), _) => format!("{build_up} "),
        (_, _, Some(node)) => format!("from {node}: "),
        _ => String::new(),
    }
}

/// A line load across a member: arrows from the outline of its intensity to the base line.
fn comb(canvas: &mut Canvas, ends: [Point; 2], away: Point, heights: [f64; 2]) {
    let tails = [moved(ends[0], away, heights[0]), moved(ends[1], away, heights[1])];
    canvas.polygon(&[ends[0], tails[0], tails[1], ends[1]], Pen::Tint);
    let gaps = gaps(length(sub(ends[1], ends[0])));
    for i in 0..=gaps {
        let t = f64::from(i) / f64::from(gaps);
        let (tip, tail) = (between(ends[0], ends[1], t), between(tails[0], tails[1], t));
        let run = sub(tip, tail);
        let long = length(run);
        if long > 0.8 {
            canvas.line(tail, tip, Pen::Load);
            canvas.arrow_head(tip, unit(run), (long * 0.6).min(1.3));
        }
    }
}

/// A load along its member: a row of arrows beside it.
fn axial_arrows(canvas: &mut Canvas, ends: [Point; 2], direction: Point) {
    let gaps = gaps(length(sub(ends[1], ends[0])));
    let long = length(sub(ends[1], ends[0])) / f64::from(gaps) * 0.7;
    for i in 0..gaps {
        let middle = between(ends[0], ends[1], (f64::from(i) + 0.5) / f64::from(gaps));
        canvas.arrow(
            moved(middle, direction, -long / 2.0),
            moved(middle, direction, long / 2.0),
            Pen::Load,
        );
    }
}

/// Number of gaps between arrows on a stretch of paper.
fn gaps(long: f64) -> u8 {
    (1..40).find(|gaps| f64::from(*gaps) * PITCH >= long).unwrap_or(40)
}
