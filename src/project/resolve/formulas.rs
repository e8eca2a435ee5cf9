//! Formulas as written → parsed, placed, their readings numbered and bound.

use std::ops::Range;

use super::reader::Reader;
use crate::calc::{CalcError, Formula, formula, formula_with_unit, is_name};
use crate::diagnostic::{Diagnostic, Place};
use crate::model::{Placed, Slot, Step, Unbound, located};
use crate::project::near::nearest;

/// A formula's text with its place.
#[derive(Clone, Debug)]
pub(super) struct Source<'s> {
    pub(super) text: &'s str,
    pub(super) place: Place,
    /// The place's bytes are the text's, one by one.
    pub(super) exact: bool,
    /// Leads every message, e.g. ``sheet `sway`: ``.
    pub(super) whose: &'s str,
}

/// Whether a stretch of a file is the text itself, or the text in quotes; with the stretch of the text.
pub(super) fn exactly(file: &str, range: &Range<usize>, text: &str) -> (Range<usize>, bool) {
    let raw = file.get(range.clone()).unwrap_or_default();
    if raw == text {
        return (range.clone(), true);
    }
    let inner = range.start + 1..range.end.saturating_sub(1).max(range.start + 1);
    if file.get(inner.clone()) == Some(text) {
        return (inner, true);
    }
    (range.clone(), false)
}

/// Formulas that share their readings and steps.
#[derive(Debug, Default)]
pub(super) struct Formulas {
    /// Every reading, each once, with the formula in which it stands first.
    pub(super) readings: Vec<(crate::calc::Reading, Place)>,
    pub(super) steps: Vec<Step>,
    /// Where each step is named.
    pub(super) named_at: Vec<Place>,
    /// Names of steps that were wrong and are reported: what reads them stays silent.
    broken: Vec<String>,
}

impl Formulas {
    /// Whether a reading that is not in reach is one that was reported already.
    pub(super) fn is_broken(&self, name: &str) -> bool {
        self.broken.iter().any(|broken| broken == name)
    }

    /// A step that should be there and is not, which is reported.
    pub(super) fn is_missing(&mut self, name: &str) {
        self.broken.push(name.to_owned());
    }

    /// Adds a step whose name later formulas read.
    pub(super) fn step(
        &mut self,
        reader: &mut Reader,
        symbol: (&str, Place),
        source: &Source<'_>,
        meaning: Option<String>,
        clause: Option<String>,
    ) {
        let (name, place) = symbol;
        if !is_name(name) {
            reader.problem(
                Diagnostic::error("name", format!("{}`{name}` cannot name a value", source.whose))
                    .at(place)
                    .hint("begin with a letter, go on with letters, digits and `_`".to_owned()),
            );
            return;
        }
        if self.steps.iter().any(|step| step.symbol == name) {
            let message = format!("{}the name `{name}` is given twice", source.whose);
            reader.error("duplicate-name", message, place);
            return;
        }
        match self.placed(reader, source, true) {
            Some(formula) => {
                self.named_at.push(place);
                self.steps.push(Step { symbol: name.to_owned(), formula, meaning, clause });
            }
            None => self.broken.push(name.to_owned()),
        }
    }

    /// Parses a formula and numbers what it reads.
    pub(super) fn placed(
        &mut self,
        reader: &mut Reader,
        source: &Source<'_>,
        takes_unit: bool,
    ) -> Option<Placed> {
        let parsed: Result<Formula, CalcError> =
            if takes_unit { formula_with_unit(source.text) } else { formula(source.text) };
        let formula = match parsed {
            Ok(formula) => formula,
            Err(error) => {
                let message = format!("{}{}", source.whose, error.message);
                let place = located(&source.place, source.exact, &error);
                reader.problem(Diagnostic::error("formula", message).at(place).hint(error.hint));
                return None;
            }
        };
        let mut slots = Vec::new();
        for reading in &formula.readings {
            let step = self.steps.iter().position(|step| step.symbol == reading.name);
            if let (Some(step), None) = (step, &reading.arguments) {
                slots.push(Slot::Step(step));
                continue;
            }
            let known = self.readings.iter().position(|(other, _)| other.text == reading.text);
            slots.push(Slot::Reading(known.unwrap_or_else(|| {
                let place = part(source, &reading.range);
                self.readings.push((reading.clone(), place));
                self.readings.len() - 1
            })));
        }
        Some(Placed { formula, slots, place: source.place.clone(), exact: source.exact })
    }
}

fn part(source: &Source<'_>, range: &Range<usize>) -> Place {
    if !source.exact {
        return source.place.clone();
    }
    let start = source.place.range.start;
    Place { file: source.place.file.clone(), range: start + range.start..start + range.end }
}

/// Reports what is not in reach.
pub(super) fn unbound(
    reader: &mut Reader,
    name: &str,
    unbound: Unbound,
    whose: &str,
    place: Place,
) {
    let near = nearest(name, unbound.known.iter().map(String::as_str));
    reader.problem(
        Diagnostic::error("unknown-name", format!("{whose}{}", unbound.message))
            .at(place)
            .hint(near.map(|near| format!("did you mean `{near}`?")))
            .hint(unbound.hint),
    );
}
