//! The effects along one member over the combinations of one purpose, one under the other.

use super::canvas::{Align, Canvas, Pen};
use super::curve;
use super::names::{COMBINATIONS, NOTHING, is_bending, slug, words};
use super::plane::Point;
use super::sheet::{Sample, Sheet, extreme, legend, zero};
use super::text::Text;
use super::{Figure, Row};
use crate::model::{Effect, Purpose};
use crate::quantity::Kind;
use crate::record::{ExtremeRecord, ExtremesRecord, Map, MemberRecord};

/// Effects that are drawn, where they are not zero.
const DRAWN: [Effect; 8] =
    [Effect::N, Effect::Vy, Effect::Vz, Effect::T, Effect::My, Effect::Mz, Effect::Dy, Effect::Dz];
/// Left and right ends of the member on the paper, mm.
pub const ENDS: [f64; 2] = [26.0, 160.0];
/// Height from least to greatest value, mm, and the height of all effects together.
const HEIGHT: f64 = 19.0;
const HEIGHTS: f64 = 195.0;
/// An effect below this share of the greatest related one is drawn half as high.
const MINOR: f64 = 0.02;
/// With more spans than these only the extremes of the whole member are written, not those of each span.
const WRITTEN: usize = 8;
/// Clear height between two effects, mm.
const GAP: f64 = 11.0;

pub(super) struct Drawing<'a> {
    pub(super) sheet: &'a Sheet<'a>,
    pub(super) name: &'a str,
    pub(super) member: &'a MemberRecord,
    purpose: Purpose,
    /// Combinations of the purpose: name and number.
    combinations: Vec<(&'a str, &'a str)>,
    /// Whole member, then each span.
    governing: Vec<&'a Map<ExtremesRecord>>,
}

/// Draws a member's effects; `None` where all are zero or nothing is known.
pub(super) fn figure(sheet: &Sheet<'_>, name: &str, purpose: Purpose) -> Option<Figure> {
    let drawing = Drawing::new(sheet, name, purpose)?;
    let effects = drawing.effects();
    if effects.is_empty() {
        return None;
    }
    Some(drawing.draw(&effects))
}

impl<'a> Drawing<'a> {
    /// `None` where nothing is known of the member under the purpose.
    pub(super) fn new(sheet: &'a Sheet<'a>, name: &'a str, purpose: Purpose) -> Option<Self> {
        let record = sheet.record;
        let member = sheet.structure.members.get(name)?;
        let result = record.results.members.get(name)?;
        let whole = result.governing.get(purpose.name())?;
        let spans = result.spans.iter().filter_map(|span| span.governing.get(purpose.name()));
        let combinations = record
            .combinations
            .iter()
            .filter(|(_, combination)| combination.purpose == purpose.name())
            .map(|(name, combination)| (name.as_str(), combination.number.as_str()))
            .collect();
        Some(Self {
            sheet,
            name,
            member,
            purpose,
            combinations,
            governing: std::iter::once(whole).chain(spans).collect(),
        })
    }
}

impl Drawing<'_> {
    fn effects(&self) -> Vec<Effect> {
        let shows = |effect: &Effect| self.size(*effect) > self.related(*effect) * NOTHING;
        DRAWN.into_iter().filter(shows).collect()
    }

    /// Greatest absolute value along the member.
    fn size(&self, effect: Effect) -> f64 {
        self.governing[0]
            .get(effect.name())
            .map_or(0.0, |found| found.max.value.abs().max(found.min.value.abs()))
    }

    /// Greatest absolute value of any effect of the same kind.
    fn related(&self, effect: Effect) -> f64 {
        let related = DRAWN.into_iter().filter(|other| other.kind() == effect.kind());
        related.map(|other| self.size(other)).fold(0.0, f64::max)
    }

    fn draw(&self, effects: &[Effect]) -> Figure {
        let mut canvas = Canvas::default();
        self.member_line(&mut canvas);
        let mut top = canvas.bottom() + 7.0;
        let mut zeros = false;
        let count = u32::try_from(effects.len()).unwrap_or(1);
        let full = (HEIGHTS / f64::from(count) - GAP).min(HEIGHT);
        let mut rows = Vec::new();
        for effect in effects {
            let minor = self.size(*effect) < MINOR * self.related(*effect);
            let height = if minor { full / 2.0 } else { full };
            if let Some(row) = self.place(*effect, top, height) {
                zeros |= self.row(&mut canvas, &row, top + height / 2.0);
                rows.push(row);
            }
            top += height + GAP;
        }
        self.legend(&mut canvas, top - GAP + 7.0, zeros);

        let id = format!("member-{}.{}", slug(self.name), self.purpose.name());
        let names: Vec<&str> = effects.iter().map(|effect| words(*effect)).collect();
        let title = format!("Effects along member {}, {}", self.name, self.purpose.name());
        let mut caption = format!(
            "Member {}, {} combinations: {}.",
            self.name,
            self.purpose.name(),
            names.join(", "),
        );
        if effects.iter().any(|effect| is_bending(*effect)) {
            caption += &format!(" Moments on the {}.", self.sheet.record.model.package.moments);
        }
        if effects.iter().any(|effect| effect.kind() == Kind::Deflection) {
            caption += " Deflections from the chord of each span, of a span with a free end from the \
                        undeformed line through its support.";
        }
        if self.combinations.len() > COMBINATIONS {
            caption += &format!(
                " Of {} combinations the first {COMBINATIONS} are drawn one by one; the envelope \
                 covers all.",
                self.combinations.len()
            );
        }
        if self.crowded() {
            caption += " Values of single spans stand in the tables.";
        }
        let description = format!(
            "Diagrams under a sketch of the member with its supports, from its start at the left to its \
             end at the right, with the envelope over all combinations and the extremes marked. {caption}"
        );
        Figure {
            svg: canvas.finish(&id, &title, &description),
            id,
            caption,
            structure: Some(self.sheet.name.to_owned()),
            member: Some(self.name.to_owned()),
            purpose: Some(self.purpose.name().to_owned()),
            rows,
            ..Figure::default()
        }
    }

    /// There are too many spans to write a value at each.
    pub(super) fn crowded(&self) -> bool {
        self.member.spans.len() > WRITTEN
    }

    fn scale(&self) -> f64 {
        (ENDS[1] - ENDS[0]) / self.member.length
    }

    pub(super) fn x(&self, position: f64) -> f64 {
        ENDS[0] + position * self.scale()
    }

    /// Axis and scale of an effect between `top` and `top + height`.
    fn place(&self, effect: Effect, top: f64, height: f64) -> Option<Row> {
        let extremes = self.governing[0].get(effect.name())?;
        let (low, high) = (extremes.min.value.min(0.0), extremes.max.value.max(0.0));
        // Positive values below the axis.
        let down = is_bending(effect) && self.sheet.record.model.package.moments == "tension side";
        let scale = height / (high - low) * if down { 1.0 } else { -1.0 };
        Some(Row { effect, axis: top - (if down { low } else { high }) * scale, scale })
    }

    /// One effect over its axis, its name beside `middle`; says whether zeros are marked.
    fn row(&self, canvas: &mut Canvas, row: &Row, middle: f64) -> bool {
        let Row { effect, axis, scale } = *row;
        let Some(extremes) = self.governing[0].get(effect.name()) else { return false };
        let down = scale > 0.0;
        let place = |point: Point| [self.x(point[0]), axis + point[1] * scale];

        let band = self.sheet.record.band(self.name, effect, self.purpose).unwrap_or_default();
        self.envelope(canvas, effect, &band, axis, place);
        canvas.line([ENDS[0], axis], [ENDS[1], axis], Pen::Axis);
        for station in &self.member.stations {
            canvas.line([self.x(*station), axis - 0.8], [self.x(*station), axis + 0.8], Pen::Axis);
        }
        let unit = &self.sheet.printer.units.get(effect.kind()).label;
        canvas.text([2.0, middle - 1.6], Align::Start, &Text::symbol(effect.name()).strong());
        canvas.text([2.0, middle + 1.6], Align::Start, &Text::new(unit.as_str()));
        let sign = if down { 1.0 } else { -1.0 };
        for (mark, side) in [("+", sign), ("\u{2212}", -sign)] {
            canvas.text([ENDS[0] - 3.5, axis + side * 1.9], Align::Middle, &Text::new(mark));
        }

        let zeros = self.zeros(effect, extremes);
        for x in &zeros {
            zero(canvas, [self.x(*x), axis]);
            if !self.crowded() {
                let text = Text::new(self.sheet.printer.number(Kind::Length, *x));
                canvas.label([self.x(*x), axis], [0.5, -sign], 5, text);
            }
        }
        for (found, rank) in self.marked(effect) {
            let Some(x) = found.x else { continue };
            let at = place([x, found.value]);
            extreme(canvas, at);
            if self.crowded() && rank > 2 {
                continue;
            }
            let outwards = if (found.value > 0.0) == down { 1.0 } else { -1.0 };
            let text = self.extreme_text(effect, found, rank);
            canvas.label(at, [0.2, outwards], rank, text);
        }
        if effect.kind() != Kind::Deflection {
            self.end_values(canvas, effect, &band, down, place);
        }
        !zeros.is_empty()
    }

    /// The greater value of the envelope at each end of the member, where no extreme says it.
    fn end_values(
        &self,
        canvas: &mut Canvas,
        effect: Effect,
        band: &[[f64; 3]],
        down: bool,
        place: impl Fn(Point) -> Point,
    ) {
        let marked = self.marked(effect);
        for end in [band.first(), band.last()].into_iter().flatten() {
            let value = if end[2].abs() >= end[1].abs() { end[2] } else { end[1] };
            let known = marked.iter().any(|(extreme, _)| {
                let apart = extreme.x.unwrap_or(0.0) - end[0];
                apart.abs() < 1e-6 * self.member.length
            });
            if known || value.abs() < 0.02 * self.size(effect) {
                continue;
            }
            let outwards = if (value > 0.0) == down { 1.0 } else { -1.0 };
            let text = Text::new(self.sheet.printer.number(effect.kind(), value));
            canvas.label(place([end[0], value]), [0.2, outwards], 4, text);
        }
    }

    fn envelope(
        &self,
        canvas: &mut Canvas,
        effect: Effect,
        band: &[[f64; 3]],
        axis: f64,
        place: impl Fn(Point) -> Point,
    ) {
        let record = self.sheet.record;
        let several = self.combinations.len() > 1;
        let edge = |side: usize| -> Vec<Point> {
            band.iter().map(|point| place([point[0], point[side]])).collect()
        };
        let (least, greatest) = (edge(1), edge(2));
        let area: Vec<Point> = greatest.iter().chain(least.iter().rev()).copied().collect();
        if several {
            canvas.polygon(&area, Pen::Band);
            for (combination, _) in self.combinations.iter().take(COMBINATIONS) {
                let line: Vec<Point> =
                    curve::points(record, self.name, effect, combination, self.scale())
                        .into_iter()
                        .map(&place)
                        .collect();
                canvas.polyline(&line, Pen::Faint);
            }
        }
        for mut line in [greatest, least] {
            // Closed onto the axis at both ends.
            if let (Some(first), Some(last)) = (line.first().copied(), line.last().copied()) {
                line.insert(0, [first[0], axis]);
                line.push([last[0], axis]);
            }
            canvas.polyline(&line, Pen::Outline);
            if !several {
                break;
            }
        }
    }

    /// Zeros of the forces and moments of the combinations that govern, without repetition.
    fn zeros(&self, effect: Effect, extremes: &ExtremesRecord) -> Vec<f64> {
        let mut zeros = Vec::new();
        if effect.kind() == Kind::Deflection {
            return zeros;
        }
        let nothing = NOTHING * self.size(effect);
        for state in [&extremes.max.state, &extremes.min.state] {
            zeros.extend(curve::zeros(self.sheet.record, self.name, effect, state, nothing));
        }
        zeros.sort_by(f64::total_cmp);
        zeros.dedup_by(|a, b| (*a - *b).abs() < 1e-6 * self.member.length);
        zeros
    }

    /// The extremes that are marked, with their ranks: of the whole member, then of each span.
    fn marked(&self, effect: Effect) -> Vec<(&ExtremeRecord, u8)> {
        let mut marked: Vec<(&ExtremeRecord, u8)> = Vec::new();
        let greatest = self.size(effect);
        for (i, governing) in self.governing.iter().enumerate() {
            let Some(found) = governing.get(effect.name()) else { continue };
            for extreme in [&found.max, &found.min] {
                let near = |other: &ExtremeRecord| {
                    let apart = extreme.x.unwrap_or(0.0) - other.x.unwrap_or(0.0);
                    apart.abs() < 1e-6 * self.member.length
                        && (extreme.value - other.value).abs() < 1e-6 * greatest
                };
                let small = extreme.value.abs() < greatest * if i == 0 { NOTHING } else { 0.02 };
                if !small && !marked.iter().any(|(other, _)| near(other)) {
                    marked.push((extreme, if i == 0 { 2 } else { 3 }));
                }
            }
        }
        marked
    }

    fn extreme_text(&self, effect: Effect, extreme: &ExtremeRecord, rank: u8) -> Text {
        let printer = self.sheet.printer;
        let value = printer.number(effect.kind(), extreme.value);
        let number = self
            .combinations
            .iter()
            .find(|(name, _)| *name == extreme.state)
            .map_or("", |(_, number)| number);
        let at = printer.with_unit(Kind::Length, extreme.x.unwrap_or(0.0));
        let text = Text::new(format!("{value} at {at} ({number})"));
        if rank == 2 { text.strong() } else { text }
    }

    fn legend(&self, canvas: &mut Canvas, top: f64, zeros: bool) {
        let mut entries = Vec::new();
        if self.combinations.len() > 1 {
            entries.push((Sample::Band, Text::new(format!("envelope, {}", self.purpose.name()))));
            entries.push((Sample::Line(Pen::Faint), Text::new("each combination")));
        } else if let Some((_, number)) = self.combinations.first() {
            entries.push((Sample::Line(Pen::Outline), Text::new(format!("combination {number}"))));
        }
        entries.push((Sample::Extreme, Text::new("extreme of member (bold) or span")));
        if zeros {
            let position = &self.sheet.printer.units.get(Kind::Length).label;
            entries.push((
                Sample::Zero,
                Text::new(format!(
                    "zero (moment: contraflexure) of a governing combination, x in {position}"
                )),
            ));
        }
        legend(canvas, top, &entries);
    }
}
