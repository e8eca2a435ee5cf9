//! Working blocks: hand calculations in the narrative, line by line.
//!
//! A line is a remark (`# words`), a step (`M = q * L^2 / 8 [kN m]  # what it is`) or an agreement
//! (`agree ID: M with effect('B1', 'M_y', 'max', purpose='strength') within 3 %`).

use std::ops::Range;

use super::checks::check_ids;
use super::formulas::{Formulas, Source, unbound};
use super::narrative::File;
use super::reader::Reader;
use crate::diagnostic::{Diagnostic, Place};
use crate::model::{Agreement, Bound, Model, Working, WorkingLine};
use crate::project::narrative::BlockKind;
use crate::quantity::{Kind, parse_as};

pub(super) fn workings(
    reader: &mut Reader,
    files: &[File<'_>],
    taken: &mut super::names::Names,
    model: &mut Model,
) {
    for file in files {
        // Later blocks of a file read what earlier ones computed.
        let mut formulas = Formulas::default();
        let blocks = file.cut.blocks.iter().filter(|block| block.kind == BlockKind::Working);
        for block in blocks {
            let mut lines = Vec::new();
            let mut at = block.body.start;
            for line in file.text[block.body.clone()].split_inclusive('\n') {
                let start = at + line.len() - line.trim_start().len();
                at += line.len();
                let text = line.trim();
                let mut line =
                    Line { file, range: start..start + text.len(), formulas: &mut formulas };
                lines.extend(line.read(reader, taken, text));
            }
            let ids: Vec<String> = check_ids(model).map(str::to_owned).collect();
            model.workings.push(Working {
                file: file.path.to_owned(),
                readings: Vec::new(),
                bound: Vec::new(),
                lines,
                origin: Place { file: file.path.to_owned(), range: block.body.clone() },
            });
            let bound = bind(reader, &formulas, &ids, model);
            let readings = formulas.readings.iter().map(|(reading, _)| reading.text.clone());
            if let Some(working) = model.workings.last_mut() {
                working.readings = readings.collect();
                working.bound = bound;
            }
        }
    }
}

fn bind(
    reader: &mut Reader,
    formulas: &Formulas,
    ids: &[String],
    model: &Model,
) -> Vec<Option<Bound>> {
    formulas
        .readings
        .iter()
        .map(|(reading, place)| match model.bind_result(reading, ids) {
            Ok(bound) => Some(bound),
            Err(_) if formulas.is_broken(&reading.name) => None,
            Err(mut problem) => {
                problem.known.extend(formulas.steps.iter().map(|step| step.symbol.clone()));
                unbound(reader, &reading.name, problem, "", place.clone());
                None
            }
        })
        .collect()
}

struct Line<'f> {
    file: &'f File<'f>,
    range: Range<usize>,
    formulas: &'f mut Formulas,
}

impl<'f> Line<'f> {
    fn read(
        &mut self,
        reader: &mut Reader,
        taken: &mut super::names::Names,
        text: &'f str,
    ) -> Option<WorkingLine> {
        if text.is_empty() {
            return None;
        }
        if let Some(mark) = ["{{", "{%", "{#"].iter().find_map(|mark| text.find(mark)) {
            let place = self.place(mark..mark + 2);
            reader.problem(
                Diagnostic::error("template-mark", "a working block holds no template marks")
                    .at(place)
                    .hint(
                        "read results by call: `effect('B1', 'M_y', 'max', purpose='strength')`"
                            .to_owned(),
                    ),
            );
            return None;
        }
        if let Some(remark) = text.strip_prefix('#') {
            return Some(WorkingLine::Remark(remark.trim().to_owned()));
        }
        if let Some(rest) = text.strip_prefix("agree ") {
            return self.agreement(reader, taken, text, text.len() - rest.len());
        }
        let (body, meaning) = match outside_quotes(text, "#") {
            Some(mark) => (text[..mark].trim_end(), Some(text[mark + 1..].trim().to_owned())),
            None => (text, None),
        };
        let Some(equals) = step_sign(body) else {
            reader.problem(
                Diagnostic::error("working", "this line is not a step, a remark or an agreement")
                    .at(self.place(0..text.len()))
                    .hint("write `name = formula`, `# words`, or `agree ID: value with value within 3 %`".to_owned()),
            );
            return None;
        };
        let name = body[..equals].trim_end();
        let behind = &body[equals + 1..];
        let start = equals + 1 + behind.len() - behind.trim_start().len();
        let source = self.source(body, start..body.len());
        let steps = self.formulas.steps.len();
        self.formulas.step(reader, (name, self.place(0..name.len())), &source, meaning, None);
        let step = self.formulas.steps.get(steps)?;
        Some(WorkingLine::Step(Box::new(step.clone())))
    }

    fn agreement(
        &mut self,
        reader: &mut Reader,
        taken: &mut super::names::Names,
        text: &'f str,
        start: usize,
    ) -> Option<WorkingLine> {
        let parts = (|| {
            let colon = start + outside_quotes(&text[start..], ":")?;
            let with = colon + outside_quotes(&text[colon..], " with ")?;
            let within = text.rfind(" within ").filter(|within| *within > with)?;
            Some((colon, with, within))
        })();
        let Some((colon, with, within)) = parts else {
            reader.problem(
                Diagnostic::error("working", "this agreement is not complete")
                    .at(self.place(0..text.len()))
                    .hint("write `agree ID: value with value within 3 %`".to_owned()),
            );
            return None;
        };
        let id = text[start..colon].trim();
        let tolerance = text[within + " within ".len()..].trim();
        let at = text.len() - tolerance.len();
        let share = match parse_as(tolerance, Kind::Number) {
            Ok(share) if share > 0.0 && share < 1.0 => Some(share),
            Ok(_) => {
                let place = self.place(at..text.len());
                reader.error("tolerance", "a tolerance lies between 0 and 100 %", place);
                None
            }
            Err(error) => {
                let place = self.place(at..text.len());
                reader.problem(
                    Diagnostic::error("quantity", error.message).at(place).hint(error.hint),
                );
                None
            }
        };
        let usable = taken.take_plain(reader, id, self.place(start..colon), "check");
        let value = self.source(text, trimmed(text, colon + 1..with));
        let other = self.source(text, trimmed(text, with + " with ".len()..within));
        let value = self.formulas.placed(reader, &value, true);
        let with = self.formulas.placed(reader, &other, true);
        usable.then_some(WorkingLine::Agreement(Box::new(Agreement {
            id: id.to_owned(),
            title: "Agreement of a hand calculation with the analysis".to_owned(),
            value: value?,
            with: with?,
            tolerance: share?,
            origin: self.place(0..text.len()),
        })))
    }

    fn source(&self, text: &'f str, range: Range<usize>) -> Source<'f> {
        Source { text: &text[range.clone()], place: self.place(range), exact: true, whose: "" }
    }

    /// A part of the line in its file.
    fn place(&self, range: Range<usize>) -> Place {
        let start = self.range.start;
        Place { file: self.file.path.to_owned(), range: start + range.start..start + range.end }
    }
}

fn trimmed(text: &str, range: Range<usize>) -> Range<usize> {
    let part = &text[range.clone()];
    let start = range.start + part.len() - part.trim_start().len();
    start..(start + part.trim().len())
}

/// The `=` of a step, which is not one of `==`, `<=`, `>=`, `!=`.
fn step_sign(text: &str) -> Option<usize> {
    let at = text.find('=')?;
    let name = text[..at].trim_end();
    let single = !text[at + 1..].starts_with('=') && !name.ends_with(['<', '>', '!']);
    (single && !name.is_empty()).then_some(at)
}

fn outside_quotes(text: &str, wanted: &str) -> Option<usize> {
    let mut quote = None;
    for (at, c) in text.char_indices() {
        match quote {
            Some(open) if c == open => quote = None,
            Some(_) => {}
            None if text[at..].starts_with(wanted) => return Some(at),
            None if matches!(c, '\'' | '"') => quote = Some(c),
            None => {}
        }
    }
    None
}
