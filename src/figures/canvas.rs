//! A sheet to draw on, one column wide; knows what it holds, so that labels find free places.
//!
//! Numbers are written with two decimals of a mm, so that equal drawings are equal bytes.

use svg::Node;
use svg::node::Blob;
use svg::node::element::Element;

use super::labels::{Label, Placer};
use super::plane::{Area, Point, add, moved, scaled, sub, turned, unit};
use super::text::{SIZE, Text};

/// Width of every drawing, mm: one column of A4.
pub(super) const WIDTH: f64 = 170.0;
/// Labels keep this far from the edges of the sheet, mm.
const EDGE: f64 = 0.6;
/// The style of all drawings.
const STYLE: &str = include_str!("../../styles/drawing.css");

/// How a line is drawn; the style gives each its look.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Pen {
    Member,
    Brace,
    Ghost,
    Axis,
    Outline,
    Second,
    Faint,
    Hair,
    Dotted,
    Load,
    Force,
    /// Light area without outline.
    Band,
    /// Light area with outline.
    Tint,
    /// Black area.
    Ink,
    /// White area with outline.
    Open,
    /// White area that parts lines behind a label.
    Back,
}

impl Pen {
    const fn class(self) -> &'static str {
        match self {
            Self::Member => "sf-member",
            Self::Brace => "sf-brace",
            Self::Ghost => "sf-ghost",
            Self::Axis => "sf-axis",
            Self::Outline => "sf-outline",
            Self::Second => "sf-second",
            Self::Faint => "sf-faint",
            Self::Hair => "sf-hair",
            Self::Dotted => "sf-dotted",
            Self::Load => "sf-load",
            Self::Force => "sf-force",
            Self::Band => "sf-band",
            Self::Tint => "sf-tint",
            Self::Ink => "sf-ink",
            Self::Open => "sf-open",
            Self::Back => "sf-back",
        }
    }

    /// How much labels keep off it.
    const fn weight(self) -> u8 {
        match self {
            Self::Faint | Self::Band | Self::Back => 0,
            Self::Member | Self::Brace => 2,
            _ => 1,
        }
    }
}

/// Where a text's anchor is.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Align {
    Start,
    Middle,
}

#[derive(Debug, Default)]
pub(super) struct Canvas {
    elements: Vec<Element>,
    labels: Vec<Label>,
    placer: Placer,
    extent: Option<Area>,
}

impl Canvas {
    pub(super) fn line(&mut self, a: Point, b: Point, pen: Pen) {
        self.polyline(&[a, b], pen);
    }

    pub(super) fn polyline(&mut self, points: &[Point], pen: Pen) {
        self.trace(points, pen, false);
    }

    pub(super) fn polygon(&mut self, points: &[Point], pen: Pen) {
        self.trace(points, pen, true);
    }

    fn trace(&mut self, points: &[Point], pen: Pen, closed: bool) {
        self.draw(&[points], pen, closed);
    }

    /// Several loops as one area, the inner ones as holes.
    pub(super) fn loops(&mut self, loops: &[Vec<Point>], pen: Pen) {
        let loops: Vec<&[Point]> = loops.iter().map(Vec::as_slice).collect();
        self.draw(&loops, pen, true);
    }

    fn draw(&mut self, lines: &[&[Point]], pen: Pen, closed: bool) {
        let mut path = String::new();
        for points in lines {
            if points.iter().flatten().any(|coordinate| !coordinate.is_finite()) {
                continue;
            }
            self.note(points, pen, closed);
            for (i, point) in points.iter().enumerate() {
                path += if i == 0 { "M" } else { "L" };
                path += &format!("{} {}", number(point[0]), number(point[1]));
            }
            if closed && !points.is_empty() {
                path += "Z";
            }
        }
        if path.is_empty() {
            return;
        }
        let mut element = Element::new("path");
        element.assign("class", pen.class());
        element.assign("d", path);
        if lines.len() > 1 {
            element.assign("fill-rule", "evenodd");
        }
        self.elements.push(element);
    }

    fn note(&mut self, points: &[Point], pen: Pen, closed: bool) {
        let extent = self.extent.get_or_insert(Area::EMPTY);
        for point in points {
            extent.include(*point);
        }
        // Thick lines count twice.
        for _ in 0..pen.weight() {
            self.placer.ink.extend(points.windows(2).map(|pair| [pair[0], pair[1]]));
            if let (true, Some(first), Some(last)) = (closed, points.first(), points.last()) {
                self.placer.ink.push([*last, *first]);
            }
        }
    }

    pub(super) fn circle(&mut self, centre: Point, radius: f64, pen: Pen) {
        let r = radius;
        self.note(
            &[[-r, -r], [r, -r], [r, r], [-r, r]].map(|corner| add(centre, corner)),
            pen,
            true,
        );
        let mut element = Element::new("circle");
        element.assign("class", pen.class());
        element.assign("cx", number(centre[0]));
        element.assign("cy", number(centre[1]));
        element.assign("r", number(radius));
        self.elements.push(element);
    }

    /// A straight arrow with its point at `to`.
    pub(super) fn arrow(&mut self, from: Point, to: Point, pen: Pen) {
        let along = unit(sub(to, from));
        let size = if pen == Pen::Force { 1.9 } else { 1.2 };
        self.line(from, moved(to, along, -size * 0.7), pen);
        self.arrow_head(to, along, size);
    }

    /// A filled arrow head with its point at `tip`.
    pub(super) fn arrow_head(&mut self, tip: Point, along: Point, size: f64) {
        let back = moved(tip, along, -size);
        let wide = scaled(turned(along), size * 0.32);
        self.polygon(&[tip, add(back, wide), sub(back, wide)], Pen::Ink);
    }

    /// Text in a fixed place; `at` is on its middle line.
    pub(super) fn text(&mut self, at: Point, align: Align, text: &Text) {
        let width = text.width();
        let left = match align {
            Align::Start => at[0],
            Align::Middle => at[0] - width / 2.0,
        };
        let half = super::labels::HEIGHT / 2.0;
        let area = Area { min: [left, at[1] - half], max: [left + width, at[1] + half] };
        self.placer.taken.push(area);
        self.write(at, align, text, &area);
    }

    /// Text that runs upwards, its middle at `at`.
    pub(super) fn upright_text(&mut self, at: Point, text: &Text) {
        let half = [super::labels::HEIGHT / 2.0, text.width() / 2.0];
        let area = Area { min: sub(at, half), max: add(at, half) };
        self.placer.taken.push(area);
        self.write(at, Align::Middle, text, &area);
        if let Some(element) = self.elements.last_mut() {
            element.assign("transform", format!("rotate(-90 {} {})", number(at[0]), number(at[1])));
        }
    }

    fn write(&mut self, at: Point, align: Align, text: &Text, area: &Area) {
        let extent = self.extent.get_or_insert(Area::EMPTY);
        extent.include(area.min);
        extent.include(area.max);
        let mut element = Element::new("text");
        element.assign("x", number(at[0]));
        // From the middle line down to the base line.
        element.assign("y", number(at[1] + SIZE * 0.35));
        match align {
            Align::Start => {}
            Align::Middle => element.assign("text-anchor", "middle"),
        }
        if text.is_strong() {
            element.assign("class", "sf-strong");
        }
        element.append(Blob::new(text.markup()));
        self.elements.push(element);
    }

    /// A label to stand near `anchor`, if possible on the given side of it.
    pub(super) fn label(&mut self, anchor: Point, side: Point, rank: u8, text: Text) {
        self.label_along(&[anchor], side, rank, text);
    }

    /// A label to stand near one of several points, the first if possible.
    pub(super) fn label_along(&mut self, anchors: &[Point], side: Point, rank: u8, text: Text) {
        let anchors: Vec<Point> = anchors
            .iter()
            .copied()
            .filter(|anchor| anchor.iter().all(|coordinate| coordinate.is_finite()))
            .collect();
        if !anchors.is_empty() {
            self.labels.push(Label { text, anchors, side, rank });
        }
    }

    /// Lower edge of what is drawn so far, labels apart.
    pub(super) fn bottom(&self) -> f64 {
        self.extent.map_or(0.0, |extent| extent.max[1])
    }

    /// Places the labels and writes the drawing.
    pub(super) fn finish(mut self, id: &str, title: &str, description: &str) -> String {
        let labels = std::mem::take(&mut self.labels);
        let placer = std::mem::take(&mut self.placer);
        for placed in placer.place(labels, [EDGE, WIDTH - EDGE]) {
            if let Some([from, to]) = placed.leader {
                self.line(from, to, Pen::Hair);
            }
            if placed.on_lines {
                let Area { min, max } = placed.area;
                self.polygon(&[min, [max[0], min[1]], max, [min[0], max[1]]], Pen::Back);
            }
            let middle = scaled(add(placed.area.min, placed.area.max), 0.5);
            self.write(middle, Align::Middle, &placed.text, &placed.area);
        }
        let extent = self.extent.unwrap_or(Area { min: [0.0; 2], max: [WIDTH, 10.0] });
        let (top, height) = (extent.min[1] - 1.5, extent.max[1] - extent.min[1] + 3.0);
        // Wider than a column only where arrows reach beyond it.
        let (left, right) = ((extent.min[0] - 1.0).min(0.0), (extent.max[0] + 1.0).max(WIDTH));

        let mut root = Element::new("svg");
        root.assign("xmlns", "http://www.w3.org/2000/svg");
        root.assign("class", "sf-fig");
        root.assign("role", "img");
        root.assign("aria-labelledby", format!("{id}-title {id}-desc"));
        root.assign(
            "viewBox",
            format!("{} {} {} {}", number(left), number(top), number(right - left), number(height)),
        );
        root.assign("width", "100%");
        for (name, words) in [("title", title), ("desc", description)] {
            let mut element = Element::new(name);
            element.assign("id", format!("{id}-{name}"));
            element.append(svg::node::Text::new(words));
            root.append(element);
        }
        let mut style = Element::new("style");
        style.append(Blob::new(STYLE.trim_end()));
        root.append(style);
        for element in self.elements {
            root.append(element);
        }
        format!("{root}\n")
    }
}

/// Two decimals without trailing zeros, never `-0`.
fn number(value: f64) -> String {
    let text = format!("{value:.2}");
    let text = text.trim_end_matches('0').trim_end_matches('.');
    if text == "-0" { "0".to_owned() } else { text.to_owned() }
}
