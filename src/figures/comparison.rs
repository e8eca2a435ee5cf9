//! Old and new envelopes of a member's moments and deflections, drawn over each other.

use super::Figure;
use super::canvas::{Align, Canvas, Pen};
use super::member::{Drawing, ENDS};
use super::names::{NOTHING, is_bending, slug, words};
use super::plane::Point;
use super::sheet::{Sample, Sheet, extreme, legend};
use super::text::Text;
use crate::compare::{Changes, ItemKind};
use crate::model::{Effect, Purpose};
use crate::quantity::Kind;
use crate::record::{Band, ExtremeRecord, ExtremesRecord, Record};

const DRAWN: [Effect; 4] = [Effect::My, Effect::Mz, Effect::Dy, Effect::Dz];
/// Height from least to greatest value and clear height between two effects, mm.
const HEIGHT: f64 = 30.0;
const GAP: f64 = 12.0;

/// One drawing for each member and purpose whose governing moments or deflections changed, where both
/// Records hold the member's fields.
#[must_use]
pub fn comparison(old: &Record, new: &Record, changes: &Changes) -> Vec<Figure> {
    let printer = new.model.units.printer();
    let mut figures = Vec::new();
    for (name, structure) in &new.model.structures {
        let sheet = Sheet::new(new, &printer, name, structure);
        for member in structure.members.keys() {
            for purpose in Purpose::ALL {
                figures.extend(figure(&sheet, old, changes, member, purpose));
            }
        }
    }
    figures
}

/// An effect on one side.
struct Line<'r> {
    extremes: &'r ExtremesRecord,
    band: Band,
}

impl<'r> Line<'r> {
    fn of(record: &'r Record, member: &str, effect: Effect, purpose: Purpose) -> Option<Self> {
        let governing = record.results.members.get(member)?.governing.get(purpose.name())?;
        let extremes = governing.get(effect.name())?;
        Some(Self { extremes, band: record.band(member, effect, purpose)? })
    }
}

fn figure(
    sheet: &Sheet<'_>,
    old: &Record,
    changes: &Changes,
    name: &str,
    purpose: Purpose,
) -> Option<Figure> {
    let renamed =
        changes.renamed.iter().find(|one| one.kind == ItemKind::Member && one.new == name);
    let before = renamed.map_or(name, |one| one.old.as_str());
    let listed = |effect: &Effect| {
        changes.values.iter().any(|change| {
            change.on == name
                && change.purpose == purpose.name()
                && change.effect == effect.name()
                && change.is_primary()
        })
    };
    let lines: Vec<(Effect, Line<'_>, Line<'_>)> = DRAWN
        .into_iter()
        .filter(listed)
        .filter_map(|effect| {
            let line = |record, member| Line::of(record, member, effect, purpose);
            Some((effect, line(old, before)?, line(sheet.record, name)?))
        })
        .collect();
    if lines.is_empty() {
        return None;
    }
    let drawing = Drawing::new(sheet, name, purpose)?;
    let length = old.member(before)?.length.max(drawing.member.length);
    let mut canvas = Canvas::default();
    drawing.member_line(&mut canvas);
    let mut top = canvas.bottom() + 8.0;
    for (effect, old, new) in &lines {
        row(&mut canvas, sheet, *effect, top, length, [old, new]);
        top += HEIGHT + GAP;
    }
    let entry = |pen, word: &str, mark: &str| {
        (Sample::Line(pen), Text::new(format!("{word}, revision {mark}")))
    };
    let mut entries = vec![
        entry(Pen::Outline, "new", &changes.new.revision),
        entry(Pen::Second, "old", &changes.old.revision),
    ];
    entries.push((Sample::Extreme, Text::new("extreme, new in bold")));
    legend(&mut canvas, top - GAP + 8.0, &entries);

    let effects: Vec<&str> = lines.iter().map(|(effect, ..)| words(*effect)).collect();
    let title = format!("Member {name}, {}, old and new", purpose.name());
    let mut caption = format!(
        "Member {name}, {} combinations: {}, old (broken line) and new (full line).",
        purpose.name(),
        effects.join(", "),
    );
    if before != name {
        caption += &format!(" It was named {before}.");
    }
    let description = format!(
        "Envelopes over all combinations along the member, those of both revisions over each other. {caption}"
    );
    let id = format!("change-{}.{}", slug(name), purpose.name());
    Some(Figure {
        svg: canvas.finish(&id, &title, &description),
        id,
        caption,
        structure: Some(sheet.name.to_owned()),
        member: Some(name.to_owned()),
        purpose: Some(purpose.name().to_owned()),
        ..Figure::default()
    })
}

/// One effect over its axis. `length` is that of the longer side, m.
fn row(
    canvas: &mut Canvas,
    sheet: &Sheet<'_>,
    effect: Effect,
    top: f64,
    length: f64,
    [old, new]: [&Line<'_>; 2],
) {
    let low = old.extremes.min.value.min(new.extremes.min.value).min(0.0);
    let high = old.extremes.max.value.max(new.extremes.max.value).max(0.0);
    // Positive values below the axis.
    let down = is_bending(effect) && sheet.record.model.package.moments == "tension side";
    let factor = HEIGHT / (high - low) * if down { 1.0 } else { -1.0 };
    let axis = top - (if down { low } else { high }) * factor;
    let across = (ENDS[1] - ENDS[0]) / length;
    let place = |[x, value]: Point| [ENDS[0] + x * across, axis + value * factor];

    for (line, pen) in [(old, Pen::Second), (new, Pen::Outline)] {
        for side in [1, 2] {
            let mut points: Vec<Point> =
                line.band.iter().map(|point| place([point[0], point[side]])).collect();
            // Closed onto the axis at both ends.
            if let (Some(first), Some(last)) = (points.first().copied(), points.last().copied()) {
                points.insert(0, [first[0], axis]);
                points.push([last[0], axis]);
            }
            canvas.polyline(&points, pen);
        }
    }
    canvas.line([ENDS[0], axis], [ENDS[1], axis], Pen::Axis);
    let middle = top + HEIGHT / 2.0;
    let unit = &sheet.printer.units.get(effect.kind()).label;
    canvas.text([2.0, middle - 1.6], Align::Start, &Text::symbol(effect.name()).strong());
    canvas.text([2.0, middle + 1.6], Align::Start, &Text::new(unit.as_str()));
    let sign = if down { 1.0 } else { -1.0 };
    for (mark, side) in [("+", sign), ("\u{2212}", -sign)] {
        canvas.text([ENDS[0] - 3.5, axis + side * 1.9], Align::Middle, &Text::new(mark));
    }

    let nothing = NOTHING.max(0.02) * (high - low);
    let pairs = [(&old.extremes.max, &new.extremes.max), (&old.extremes.min, &new.extremes.min)];
    for (was, is) in pairs {
        for (found, rank) in [(is, 2), (was, 3)] {
            let Some(x) = found.x.filter(|_| found.value.abs() > nothing) else { continue };
            let at = place([x, found.value]);
            extreme(canvas, at);
            let outwards = if (found.value > 0.0) == down { 1.0 } else { -1.0 };
            canvas.label(at, [0.2, outwards], rank, written(sheet, effect, found, rank));
        }
    }
}

fn written(sheet: &Sheet<'_>, effect: Effect, found: &ExtremeRecord, rank: u8) -> Text {
    let value = sheet.printer.number(effect.kind(), found.value);
    let at = sheet.printer.with_unit(Kind::Length, found.x.unwrap_or_default());
    if rank == 2 {
        Text::new(format!("{value} at {at}")).strong()
    } else {
        Text::new(format!("was {value} at {at}"))
    }
}
