//! Leaves to numbers: quantities with their kinds, named values, plain numbers, names.

use std::collections::{BTreeMap, BTreeSet};

use crate::diagnostic::{Diagnostic, Place};
use crate::project::near::nearest;
use crate::project::text::Text;
use crate::quantity::{Kind, Quantity, parse};

/// Beyond this (SI) no later product or power can be trusted not to overflow.
const HUGE: f64 = 1e18;

/// Reads leaves and keeps every problem found.
#[derive(Debug, Default)]
pub(super) struct Reader {
    /// Text of `project.yaml`, in which formulas are placed by the character.
    pub(super) file: String,
    pub(super) found: Vec<Diagnostic>,
    /// Nodes that `z_towards` points to.
    pub(super) marks: BTreeSet<String>,
    /// Named constants of the project.
    values: BTreeMap<String, Quantity>,
}

impl Reader {
    /// Reads leaves of this text.
    pub(super) fn new(file: &str) -> Self {
        Self { file: file.to_owned(), ..Self::default() }
    }

    /// Keeps a problem.
    pub(super) fn problem(&mut self, problem: Diagnostic) {
        self.found.push(problem);
    }

    /// Keeps an error at a place.
    pub(super) fn error(&mut self, code: &'static str, message: impl Into<String>, place: Place) {
        self.problem(Diagnostic::error(code, message).at(place));
    }

    /// Makes a named value usable in the quantities that follow.
    pub(super) fn name_value(&mut self, name: &str, value: Quantity) {
        self.values.insert(name.to_owned(), value);
    }

    /// A quantity of any dimension.
    pub(super) fn any_quantity(&mut self, text: &Text) -> Option<Quantity> {
        if let Some(named) = self.values.get(text.as_str()) {
            return Some(*named);
        }
        match parse(text) {
            Ok(quantity) if quantity.value.abs() > HUGE => {
                self.problem(
                    Diagnostic::error(
                        "huge-number",
                        format!("`{text}` is too large to compute with"),
                    )
                    .at(text.place())
                    .hint("check the unit and the power of ten".to_owned()),
                );
                None
            }
            Ok(quantity) => Some(quantity),
            Err(error) => {
                let values = self.values.keys().map(String::as_str);
                let near =
                    nearest(text, values).map(|name| format!("did you mean the value `{name}`?"));
                self.problem(
                    Diagnostic::error("quantity", error.message)
                        .at(text.place())
                        .hint(error.hint)
                        .hint(near),
                );
                None
            }
        }
    }

    /// A quantity of a kind, SI.
    pub(super) fn quantity(&mut self, text: &Text, kind: Kind) -> Option<f64> {
        let quantity = self.any_quantity(text)?;
        let named = self.values.contains_key(text.as_str());
        match quantity.as_kind(kind, text) {
            Ok(value) => Some(value),
            Err(_) if named => {
                self.problem(
                    Diagnostic::error(
                        "wrong-dimension",
                        format!(
                            "the value `{text}` is {}, expected {}",
                            quantity.dimension.name_with_article(),
                            kind.description()
                        ),
                    )
                    .at(text.place()),
                );
                None
            }
            Err(error) => {
                self.problem(
                    Diagnostic::error("wrong-dimension", error.message)
                        .at(text.place())
                        .label(format!("expected {}", kind.description()))
                        .hint(error.hint),
                );
                None
            }
        }
    }

    /// A quantity of a kind that must be above zero.
    pub(super) fn positive(&mut self, text: &Text, kind: Kind) -> Option<f64> {
        let value = self.quantity(text, kind)?;
        if value > 0.0 {
            return Some(value);
        }
        self.error("not-positive", format!("`{text}` must be above zero"), text.place());
        None
    }

    /// An optional quantity; `None` also where it was wrong and reported.
    pub(super) fn optional(&mut self, text: Option<&Text>, kind: Kind) -> Option<f64> {
        text.and_then(|text| self.quantity(text, kind))
    }

    /// A whole number.
    pub(super) fn whole(&mut self, text: &Text) -> Option<usize> {
        let read = text.as_str().parse().ok();
        if read.is_none() {
            self.error("whole-number", format!("`{text}` is not a whole number"), text.place());
        }
        read
    }

    /// The position of a name in a list; an unknown name is reported with the nearest one.
    pub(super) fn find<'n>(
        &mut self,
        name: &Text,
        what: &str,
        code: &'static str,
        known: impl Iterator<Item = &'n str> + Clone,
    ) -> Option<usize> {
        let found = known.clone().position(|other| other == name.as_str());
        if found.is_none() {
            let near = nearest(name, known).map(|near| format!("did you mean `{near}`?"));
            self.problem(
                Diagnostic::error(code, format!("no {what} named `{name}`"))
                    .at(name.place())
                    .label(format!("not a {what} of this project"))
                    .hint(near),
            );
        }
        found
    }
}
