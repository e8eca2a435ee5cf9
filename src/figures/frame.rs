//! Effects of a whole frame over the combinations of one purpose: diagrams on the members, and the
//! displaced shape.

use rayon::prelude::*;

use super::Figure;
use super::canvas::{Canvas, Pen};
use super::curve;
use super::names::{COMBINATIONS, NOTHING, is_bending, slug, words};
use super::plane::{Point, add, length, scaled, sub, unit};
use super::sheet::{Sample, Sheet, extreme, legend};
use super::text::Text;
use super::view::{along, norm};
use crate::model::{Effect, Purpose};
use crate::quantity::{Kind, print};
use crate::record::{MemberRecord, StructureRecord};

/// Greatest ordinate of a diagram, mm.
const ORDINATE: f64 = 13.0;
/// Greatest displacement on the paper, mm.
const MOVEMENT: f64 = 10.0;
/// So many values are written at most, the greatest first.
const VALUES: usize = 60;
/// Values below this share of the greatest are not written.
const SMALL: f64 = 0.05;

/// Draws a structure's effects for each purpose; nothing for members that do not meet.
pub(super) fn figures(sheet: &Sheet<'_>) -> Vec<Figure> {
    if !is_frame(sheet.structure) {
        return Vec::new();
    }
    let effects: &[Effect] = if sheet.view.space {
        &[Effect::N, Effect::My, Effect::Mz]
    } else {
        // V_y and M_z occur in members turned by a quarter.
        &[Effect::N, Effect::Vz, Effect::Vy, Effect::My, Effect::Mz]
    };
    let of_purpose = |purpose: Purpose| -> Vec<Figure> {
        let combinations: Vec<&str> = sheet
            .record
            .combinations
            .iter()
            .filter(|(_, combination)| combination.purpose == purpose.name())
            .map(|(name, _)| name.as_str())
            .collect();
        if combinations.is_empty() {
            return Vec::new();
        }
        let mut figures: Vec<Figure> = effects
            .par_iter()
            .filter_map(|effect| {
                Frame {
                    sheet,
                    purpose,
                    combinations: &combinations,
                    effect: *effect,
                    greatest: 0.0,
                }
                .figure()
            })
            .collect();
        figures.extend(displaced(sheet, purpose, &combinations));
        figures
    };
    Purpose::ALL.par_iter().flat_map(|purpose| of_purpose(*purpose)).collect()
}

/// Some node joins two members.
fn is_frame(structure: &StructureRecord) -> bool {
    structure.nodes.keys().any(|node| {
        structure.members.values().filter(|member| member.along.contains(node)).count() > 1
    })
}

struct Frame<'a> {
    sheet: &'a Sheet<'a>,
    purpose: Purpose,
    /// Names of the combinations of the purpose.
    combinations: &'a [&'a str],
    effect: Effect,
    /// Greatest absolute value on the structure.
    greatest: f64,
}

impl Frame<'_> {
    fn figure(mut self) -> Option<Figure> {
        let members = self.sheet.structure.members.keys();
        let size = |effect: Effect| {
            let results = &self.sheet.record.results.members;
            members
                .clone()
                .filter_map(|name| {
                    let extremes = results
                        .get(name)?
                        .governing
                        .get(self.purpose.name())?
                        .get(effect.name())?;
                    Some(extremes.max.value.abs().max(extremes.min.value.abs()))
                })
                .fold(0.0, f64::max)
        };
        let related = [Effect::N, Effect::Vy, Effect::Vz, Effect::T, Effect::My, Effect::Mz]
            .into_iter()
            .filter(|other| other.kind() == self.effect.kind())
            .map(size)
            .fold(0.0, f64::max);
        self.greatest = size(self.effect);
        (self.greatest > related * NOTHING).then(|| self.draw())
    }

    fn draw(&self) -> Figure {
        let mut canvas = Canvas::default();
        let mut values: Vec<(f64, Point, Point)> = Vec::new();
        for (name, member) in &self.sheet.structure.members {
            self.diagram(&mut canvas, name, member, &mut values);
        }
        self.sheet.skeleton(&mut canvas, Pen::Axis);
        self.write_values(&mut canvas, values);
        let top = canvas.bottom() + 6.0;
        let unit = &self.sheet.printer.units.get(self.effect.kind()).label;
        let mut entries = vec![
            (
                Sample::Line(Pen::Outline),
                Text::new("greatest and least ")
                    .and_symbol(self.effect.name())
                    .then(format!(", values in {unit}")),
            ),
            (Sample::Band, Text::new("envelope")),
        ];
        if !self.faint().is_empty() {
            entries.push((Sample::Line(Pen::Faint), Text::new("each combination")));
        }
        entries.push((Sample::Extreme, Text::new("value written")));
        legend(&mut canvas, top, &entries);
        let name = self.sheet.name;
        let purpose = self.purpose.name();
        let id = format!("frame-{}.{purpose}.{}", slug(name), self.effect.name().to_lowercase());
        let title = format!("Envelope of {} of structure {name}, {purpose}", words(self.effect));
        let side = if is_bending(self.effect) {
            format!("drawn on the {}", self.sheet.record.model.package.moments)
        } else {
            let axis = if self.effect == Effect::Vy { "y" } else { "z" };
            format!("positive values towards the members' local {axis}")
        };
        let caption = format!(
            "Structure {name}: envelope of {} over the {purpose} combinations, {side}.",
            words(self.effect)
        );
        let description = format!(
            "The frame with the diagram of each member drawn across it; values written at its ends \
             and extremes. {caption}"
        );
        Figure {
            svg: canvas.finish(&id, &title, &description),
            id,
            caption,
            structure: Some(name.to_owned()),
            purpose: Some(purpose.to_owned()),
            effect: Some(self.effect.name().to_owned()),
            ..Figure::default()
        }
    }

    /// The combinations drawn one by one; a single one is its own envelope.
    fn faint(&self) -> &[&str] {
        match self.combinations.len() {
            0 | 1 => &[],
            several => &self.combinations[..several.min(COMBINATIONS)],
        }
    }

    /// The direction of positive ordinates on the paper for a value of one, in mm.
    fn ordinate(&self, member: &MemberRecord) -> Point {
        let about_z = matches!(self.effect, Effect::Mz | Effect::Vy);
        let axis = if about_z { member.axes[1] } else { member.axes[2] };
        let tension = self.sheet.record.model.package.moments == "tension side";
        let sign = if is_bending(self.effect) && tension { -1.0 } else { 1.0 };
        scaled(self.sheet.view.direction(axis), sign * ORDINATE / self.greatest)
    }

    fn diagram(
        &self,
        canvas: &mut Canvas,
        name: &str,
        member: &MemberRecord,
        values: &mut Vec<(f64, Point, Point)>,
    ) {
        let record = self.sheet.record;
        let Some(band) = record.band(name, self.effect, self.purpose) else { return };
        let ordinate = self.ordinate(member);
        let place = |x: f64, value: f64| add(self.sheet.paper(member, x), scaled(ordinate, value));
        let edge = |side: usize| -> Vec<Point> {
            band.iter().map(|point| place(point[0], point[side])).collect()
        };
        let (least, greatest) = (edge(1), edge(2));
        let area: Vec<Point> = greatest.iter().chain(least.iter().rev()).copied().collect();
        canvas.polygon(&area, Pen::Band);
        let run =
            length(sub(self.sheet.paper(member, member.length), self.sheet.paper(member, 0.0)));
        for combination in self.faint() {
            let line: Vec<Point> =
                curve::points(record, name, self.effect, combination, run / member.length)
                    .into_iter()
                    .map(|[x, value]| place(x, value))
                    .collect();
            canvas.polyline(&line, Pen::Faint);
        }
        for mut line in [greatest, least] {
            line.insert(0, self.sheet.paper(member, 0.0));
            line.push(self.sheet.paper(member, member.length));
            canvas.polyline(&line, Pen::Outline);
        }
        let mut note = |x: f64, value: f64| {
            let at = place(x, value);
            values.push((value, at, sub(at, self.sheet.paper(member, x))));
        };
        for end in [band.first(), band.last()].into_iter().flatten() {
            note(end[0], end[1]);
            note(end[0], end[2]);
        }
        let governing =
            record.results.members.get(name).and_then(|result| {
                result.governing.get(self.purpose.name())?.get(self.effect.name())
            });
        if let Some(extremes) = governing {
            for extreme in [&extremes.max, &extremes.min] {
                note(extreme.x.unwrap_or(0.0), extreme.value);
            }
        }
    }

    /// Writes the greatest values, one where several are equal and close.
    fn write_values(&self, canvas: &mut Canvas, mut values: Vec<(f64, Point, Point)>) {
        values.sort_by(|a, b| b.0.abs().total_cmp(&a.0.abs()));
        let mut written: Vec<(String, Point)> = Vec::new();
        for (value, at, outwards) in values {
            if value.abs() < SMALL * self.greatest || written.len() >= VALUES {
                break;
            }
            let words = self.sheet.printer.number(self.effect.kind(), value);
            if written.iter().any(|(other, there)| *other == words && length(sub(*there, at)) < 9.0)
            {
                continue;
            }
            extreme(canvas, at);
            canvas.label(at, unit(outwards), 2, Text::new(words.as_str()));
            written.push((words, at));
        }
    }
}

/// The displaced shape of every combination; the one that moves a node most is drawn strongly.
fn displaced(sheet: &Sheet<'_>, purpose: Purpose, combinations: &[&str]) -> Option<Figure> {
    let record = sheet.record;
    let moved = |node: &str, state: &str| -> [f64; 3] {
        let d = record.displacement(node, state).unwrap_or_default();
        [d[0], d[1], d[2]]
    };
    let mut governing: Option<(f64, &str, &str)> = None;
    for state in combinations {
        for node in sheet.structure.nodes.keys() {
            let by = norm(moved(node, state));
            // Ties (1e-9) go to the earlier combination.
            if governing.is_none_or(|(most, ..)| by > most * (1.0 + 1e-9)) {
                governing = Some((by, node, state));
            }
        }
    }
    let (most, node, state) = governing.filter(|(most, ..)| *most > 0.0)?;
    // The scale comes from all that is drawn, members between their nodes included.
    let farthest = combinations
        .iter()
        .flat_map(|state| sheet.structure.members.keys().map(move |name| (name, state)))
        .flat_map(|(name, state)| movements(sheet, name, state))
        .map(|(_, by)| length(by))
        .fold(most, f64::max);
    let factor = MOVEMENT / farthest;
    let shape = |name: &str, member: &MemberRecord, state: &str| -> Vec<Point> {
        shape(sheet, name, member, state, factor)
    };
    let mut canvas = Canvas::default();
    for other in combinations.iter().take(COMBINATIONS).filter(|other| **other != state) {
        for (name, member) in &sheet.structure.members {
            canvas.polyline(&shape(name, member, other), Pen::Faint);
        }
    }
    sheet.skeleton(&mut canvas, Pen::Second);
    for (name, member) in &sheet.structure.members {
        canvas.polyline(&shape(name, member, state), Pen::Member);
    }
    let by = moved(node, state);
    let at = add(sheet.node(node), scaled(sheet.view.direction(by), factor));
    extreme(&mut canvas, at);
    let components: Vec<String> = ["X", "Y", "Z"]
        .into_iter()
        .zip(by)
        .filter(|(_, by)| by.abs() > most * NOTHING)
        .map(|(axis, by)| format!("{axis} {}", sheet.printer.number(Kind::Deflection, by)))
        .collect();
    let unit = &sheet.printer.units.get(Kind::Deflection).label;
    let number = record.combinations.get(state).map_or("", |found| found.number.as_str());
    let movement = format!("{node} ({number}): {} {unit}", components.join(", "));
    canvas.label(at, [0.5, -0.8], 2, Text::new(movement.as_str()));
    let top = canvas.bottom() + 6.0;
    let mut entries = vec![
        (Sample::Line(Pen::Second), Text::new("undisplaced")),
        (Sample::Line(Pen::Member), Text::new(format!("{number}, which moves a node most"))),
    ];
    if combinations.len() > 1 {
        entries.push((Sample::Line(Pen::Faint), Text::new("other combinations")));
    }
    legend(&mut canvas, top, &entries);

    let id = format!("frame-{}.{}.displacement", slug(sheet.name), purpose.name());
    let title = format!("Displaced shape of structure {}, {}", sheet.name, purpose.name());
    let times = print(factor / sheet.view.scale, 2);
    let capped = match combinations.len() {
        n if n > COMBINATIONS => {
            format!(" The first {COMBINATIONS} of {n} combinations are drawn.")
        }
        _ => String::new(),
    };
    let caption = format!(
        "Structure {}: displaced shapes of the {} combinations, displacements drawn {times} times as \
         large as the structure.{capped}",
        sheet.name,
        purpose.name()
    );
    let description = format!("The frame before and after it displaces. {movement}. {caption}");
    Some(Figure {
        svg: canvas.finish(&id, &title, &description),
        id,
        caption,
        structure: Some(sheet.name.to_owned()),
        purpose: Some(purpose.name().to_owned()),
        effect: Some("displacement".to_owned()),
        ..Figure::default()
    })
}

/// The displaced axis of a member on the paper, displacements at `factor` mm a metre.
fn shape(
    sheet: &Sheet<'_>,
    name: &str,
    member: &MemberRecord,
    state: &str,
    factor: f64,
) -> Vec<Point> {
    movements(sheet, name, state)
        .into_iter()
        .map(|(x, by)| add(sheet.paper(member, x), scaled(by, factor)))
        .collect()
}

/// Displacements along a member as seen on the paper: position, and m to the right and downwards.
fn movements(sheet: &Sheet<'_>, name: &str, state: &str) -> Vec<(f64, Point)> {
    let Some(member) = sheet.structure.members.get(name) else { return Vec::new() };
    // All three are cut alike and so share their positions.
    let [u, v, w] = [Effect::U, Effect::V, Effect::W]
        .map(|effect| curve::evenly(sheet.record, name, effect, state, sheet.view.scale));
    u.iter()
        .zip(&v)
        .zip(&w)
        .map(|((u, v), w)| {
            let mut by = [0.0; 3];
            for (axis, part) in member.axes.iter().zip([u[1], v[1], w[1]]) {
                by = along(by, *axis, part);
            }
            (u[0], sheet.view.direction(by))
        })
        .collect()
}
