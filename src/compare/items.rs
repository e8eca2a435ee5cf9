//! A Record's input as a list of named things with their facts.

use serde::{Deserialize, Serialize};
use serde_json::Value;

use crate::quantity::{Kind, Printer};

/// What a thing of the project file is.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum ItemKind {
    Project,
    Revision,
    Basis,
    Standard,
    Assumption,
    Deferral,
    Settings,
    Value,
    #[serde(rename = "build-up")]
    BuildUp,
    Material,
    Section,
    Structure,
    Node,
    Support,
    Member,
    #[serde(rename = "load case")]
    Case,
    Load,
    Rule,
    Combination,
    Check,
    #[serde(rename = "hand calculation")]
    Working,
}

impl ItemKind {
    /// The word in reports.
    #[must_use]
    pub const fn word(self) -> &'static str {
        match self {
            Self::Project => "project",
            Self::Revision => "revision",
            Self::Basis => "basis",
            Self::Standard => "standard",
            Self::Assumption => "assumption",
            Self::Deferral => "deferral",
            Self::Settings => "settings",
            Self::Value => "value",
            Self::BuildUp => "build-up",
            Self::Material => "material",
            Self::Section => "section",
            Self::Structure => "structure",
            Self::Node => "node",
            Self::Support => "support",
            Self::Member => "member",
            Self::Case => "load case",
            Self::Load => "load",
            Self::Rule => "rule",
            Self::Combination => "combination",
            Self::Check => "check",
            Self::Working => "hand calculation",
        }
    }
}

/// A thing of the project file. Several may share a name: loads of a case on one member.
#[derive(Clone, Debug)]
pub(super) struct Item {
    pub(super) kind: ItemKind,
    pub(super) name: String,
    pub(super) facts: Vec<Fact>,
}

impl Item {
    /// A check of which nothing was evaluated: its formulas are not known.
    pub(super) fn is_partial(&self) -> bool {
        self.kind == ItemKind::Check && !self.facts.iter().any(|fact| fact.label == "demand")
    }
}

/// Something stated of a thing: in words, and as the Record has it.
#[derive(Clone, Debug)]
pub(super) struct Fact {
    pub(super) label: String,
    pub(super) text: String,
    pub(super) raw: Value,
}

/// Values that differ by less are the same value computed on another processor.
const SAME: f64 = 1e-9;

impl Fact {
    /// Says the same, numbers within round-off.
    pub(super) fn is_same(&self, other: &Self) -> bool {
        same(&self.raw, &other.raw)
    }
}

fn same(a: &Value, b: &Value) -> bool {
    match (a, b) {
        (Value::Number(a), Value::Number(b)) => match (a.as_f64(), b.as_f64()) {
            (Some(a), Some(b)) => (a - b).abs() <= SAME * a.abs().max(b.abs()),
            _ => a == b,
        },
        (Value::Array(a), Value::Array(b)) => {
            a.len() == b.len() && a.iter().zip(b).all(|(a, b)| same(a, b))
        }
        (Value::Object(a), Value::Object(b)) => {
            a.len() == b.len()
                && a.iter().all(|(key, value)| b.get(key).is_some_and(|other| same(value, other)))
        }
        _ => a == b,
    }
}

/// Collects the facts of one thing; what is not stated makes none.
pub(super) struct Facts<'p> {
    printer: &'p Printer,
    list: Vec<Fact>,
}

impl<'p> Facts<'p> {
    pub(super) const fn new(printer: &'p Printer) -> Self {
        Self { printer, list: Vec::new() }
    }

    pub(super) fn text(mut self, label: &str, text: &str) -> Self {
        if !text.is_empty() {
            self.push(label, text.to_owned(), Value::from(text));
        }
        self
    }

    pub(super) fn maybe(self, label: &str, text: Option<&String>) -> Self {
        self.text(label, text.map_or("", String::as_str))
    }

    pub(super) fn list(self, label: &str, texts: &[String]) -> Self {
        self.text(label, &texts.join(", "))
    }

    pub(super) fn flag(self, label: &str, set: bool) -> Self {
        self.text(label, if set { "yes" } else { "" })
    }

    pub(super) fn number(self, label: &str, kind: Kind, value: f64) -> Self {
        self.numbers(label, kind, &[value])
    }

    /// Several numbers side by side, e.g. coordinates.
    pub(super) fn numbers(mut self, label: &str, kind: Kind, values: &[f64]) -> Self {
        let text = match values {
            [] => return self,
            [value] => self.printer.with_unit(kind, *value),
            several => {
                let numbers: Vec<String> =
                    several.iter().map(|value| self.printer.number(kind, *value)).collect();
                let unit = &self.printer.units.get(kind).label;
                format!("({}) {unit}", numbers.join(", ")).trim_end().to_owned()
            }
        };
        self.push(label, text, Value::from(values.to_vec()));
        self
    }

    /// Words made from more than they show: `raw` decides whether something changed.
    pub(super) fn words(mut self, label: &str, text: String, raw: impl Serialize) -> Self {
        let raw = serde_json::to_value(raw).unwrap_or_default();
        let nothing = match &raw {
            Value::Null => true,
            Value::Array(parts) => parts.is_empty(),
            _ => false,
        };
        if !(text.is_empty() && nothing) {
            self.push(label, text, raw);
        }
        self
    }

    /// Labels differ, so that facts of two things can be held against each other by label.
    fn push(&mut self, label: &str, text: String, raw: Value) {
        let taken = |label: &str| self.list.iter().any(|fact| fact.label == label);
        let again = (2..).map(|number| format!("{label} ({number})"));
        let label = std::iter::once(label.to_owned()).chain(again).find(|label| !taken(label));
        self.list.extend(label.map(|label| Fact { label, text, raw }));
    }

    pub(super) fn item(self, kind: ItemKind, name: &str) -> Item {
        Item { kind, name: name.to_owned(), facts: self.list }
    }
}
