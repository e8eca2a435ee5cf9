//! The template environment: built-in chapters, which a project overrides by name.
//!
//! Fuel, recursion and what can be read are bounded: a template sees the context, the functions below and
//! other templates, and nothing else.

use std::collections::BTreeMap;
use std::error::Error as _;
use std::ops::Range;
use std::sync::Arc;

use minijinja::syntax::SyntaxConfig;
use minijinja::value::{Kwargs, Rest, Serde, ValueKind};
use minijinja::{
    AutoEscape, Environment, Error, ErrorKind, State, UndefinedBehavior, Value, context,
};

use super::context::{Context, FigureRef};
use super::{MARK, look_up, markdown, narrative};
use crate::compare::{Marks, Report};
use crate::diagnostic::{Diagnostic, Place};
use crate::figures::Figure;
use crate::files::Sources;
use crate::quantity::{Dimension, Kind, Printer, Unit, parse_unit};
use crate::record::Record;

/// Instructions (and bytes) that one chapter may cost. The largest demo needs about a hundredth.
const FUEL: u64 = 50_000_000;
const RECURSION: usize = 100;

macro_rules! built_in {
    ($($name:literal),* $(,)?) => {
        [$(($name, include_str!(concat!("../../templates/", $name)))),*]
    };
}

/// Templates that come with the program.
const BUILT_IN: [(&str, &str); 15] = built_in![
    "cover.md",
    "summary.md",
    "basis.md",
    "method.md",
    "model.md",
    "actions.md",
    "combinations.md",
    "effects.md",
    "governing.md",
    "checks.md",
    "block.md",
    "self-check.md",
    "deferred.md",
    "changes.md",
    "appendix.md",
];
const CHANGES: &str = "changes.md";

/// A template that comes with the program.
fn built_in(name: &str) -> Option<String> {
    BUILT_IN.iter().find(|(own, _)| *own == name).map(|(_, text)| (*text).to_owned())
}

/// An environment in which text is escaped and whose cost is bounded; it has no template yet.
fn bounded<'e>() -> Environment<'e> {
    let mut environment = Environment::new();
    environment.set_undefined_behavior(UndefinedBehavior::Strict);
    environment.set_fuel(Some(FUEL));
    environment.set_recursion_limit(RECURSION);
    environment.set_debug(true);
    let syntax = SyntaxConfig::builder().trim_blocks(true).lstrip_blocks(true).build();
    environment.set_syntax(syntax.expect("only white space differs from the usual syntax"));
    environment.set_auto_escape_callback(|_| AutoEscape::Custom("markdown".into()));
    environment.set_formatter(format);
    environment
}

/// Renders the built-in text of a comparison on its own, apart from any package.
pub(super) fn comparison(
    report: &Report,
    drawings: &[Figure],
    printer: &Printer,
) -> Result<String, Diagnostic> {
    let mut environment = bounded();
    environment.set_loader(|name| Ok(built_in(name)));
    add_printing(&mut environment, printer.clone());
    let figures: Vec<FigureRef<'_>> = drawings.iter().map(FigureRef::from).collect();
    let context = context! { changes => Value::from(Serde(report)), changes_figures => Value::from(Serde(&figures)) };
    environment
        .get_template(CHANGES)
        .and_then(|template| template.render(context))
        .map_err(|error| Diagnostic::error("template", format!("template `{CHANGES}`: {error}")))
}

/// Renders chapters from one context.
pub(super) struct Renderer<'r> {
    environment: Environment<'r>,
    context: Value,
    /// Templates of the project, by name.
    own: BTreeMap<String, String>,
    /// Narrative files by path: as read, and as the template that is left of each.
    narrative: BTreeMap<String, (String, String)>,
}

impl<'r> Renderer<'r> {
    /// `marks` says which rows changed since the revision that the package is held against.
    pub(super) fn new(
        record: &Record,
        sources: &Sources,
        context: &Context<'_>,
        marks: Option<Marks>,
    ) -> Self {
        let own: BTreeMap<String, String> = sources
            .files
            .keys()
            .filter_map(|path| {
                let name = path.strip_prefix("templates/")?;
                Some((name.to_owned(), sources.text(path)?.to_owned()))
            })
            .collect();
        let mut environment = bounded();
        let mut templates = own.clone();
        let (files, blocks) = narrative::templates(record, sources);
        let read = |(path, template): &(String, String)| {
            let text = sources.text(path).unwrap_or_default().to_owned();
            (path.clone(), (text, template.clone()))
        };
        let narrative = files.iter().map(read).collect();
        templates.extend(files);
        environment
            .set_loader(move |name| Ok(templates.get(name).cloned().or_else(|| built_in(name))));
        add_printing(&mut environment, record.model.units.printer());
        look_up::add(&mut environment, record, &context.figure_captions());
        add_marks(&mut environment, record, marks);
        let blocks: Vec<Value> = blocks.iter().map(|block| Value::from(Serde(block))).collect();
        environment.add_function("block", move |state: &State<'_, '_>, number: usize| {
            let block = blocks.get(number).ok_or_else(|| no_block(number))?;
            let text = state.env().get_template("block.md")?.render(block)?;
            Ok::<Value, Error>(Value::from_safe_string(text))
        });
        Self { environment, context: Value::from(Serde(context)), own, narrative }
    }

    /// The text of a chapter.
    pub(super) fn render(&self, name: &str) -> Result<String, Diagnostic> {
        self.environment
            .get_template(name)
            .and_then(|template| template.render(&self.context))
            .map_err(|error| self.problem(name, &error))
    }

    /// The error at its deepest: inside an included template, not at the include.
    fn problem(&self, chapter: &str, error: &Error) -> Diagnostic {
        let mut deepest = error;
        while let Some(inner) = deepest.source().and_then(|source| source.downcast_ref::<Error>()) {
            deepest = inner;
        }
        let file = deepest.name().unwrap_or(chapter);
        let line = deepest.line().map(|line| format!(", line {line}")).unwrap_or_default();
        let detail = deepest.detail().map_or_else(|| deepest.kind().to_string(), str::to_owned);
        let mut problem =
            Diagnostic::error("template", format!("template `{file}`{line}: {detail}"));
        if self.own.contains_key(file) {
            let range = deepest.range().unwrap_or(0..0);
            problem = problem.at(Place { file: format!("templates/{file}"), range });
        } else if let Some((text, template)) = self.narrative.get(file) {
            problem = Diagnostic::error("narrative", detail);
            let range = deepest.line().map_or(0..0, |line| {
                in_line(text, template, line, &deepest.range().unwrap_or_default())
            });
            problem = problem.at(Place { file: file.to_owned(), range });
        }
        problem
    }
}

/// A stretch of a template as a stretch of the file it was cut from: cutting leaves lines where they were,
/// and all but the blocks' own as they were. Where it does not lie within its line, the whole line.
fn in_line(text: &str, template: &str, number: usize, range: &Range<usize>) -> Range<usize> {
    let line = |of: &str| -> Range<usize> {
        let mut at = 0;
        for (index, line) in of.split_inclusive('\n').enumerate() {
            if index + 1 == number {
                return at..at + line.trim_end().len();
            }
            at += line.len();
        }
        of.len()..of.len()
    };
    let (own, cut) = (line(text), line(template));
    let inside = cut.start <= range.start && range.end <= cut.end && !range.is_empty();
    if inside && text[own.clone()] == template[cut.clone()] {
        return own.start + range.start - cut.start..own.start + range.end - cut.start;
    }
    own
}

fn no_block(number: usize) -> Error {
    Error::new(ErrorKind::InvalidOperation, format!("there is no block {number}"))
}

/// Text is escaped for Markdown; a quantity must go through its filter.
fn format(
    out: &mut minijinja::Output<'_>,
    _: &mut State<'_, '_>,
    value: &Value,
) -> Result<(), Error> {
    match value.kind() {
        ValueKind::String if !value.is_safe() => {
            let text = value.as_str().unwrap_or_default();
            out.write_str(&markdown::escaped(text)).map_err(Error::from)
        }
        ValueKind::None => Ok(()),
        ValueKind::Map | ValueKind::Seq | ValueKind::Iterable => Err(Error::new(
            ErrorKind::InvalidOperation,
            "this is not text: print a quantity with the filters `quantity` or `number`, loop over a list",
        )),
        ValueKind::Undefined => {
            Err(Error::new(ErrorKind::UndefinedError, "this name is not defined"))
        }
        _ => write!(out, "{value}").map_err(Error::from),
    }
}

/// `changed('section', name)`: the mark of the present revision where that changed, else nothing.
fn add_marks(environment: &mut Environment<'_>, record: &Record, marks: Option<Marks>) {
    let revision = record.project.revisions.last().map_or("", |revision| &revision.mark);
    let mark = format!("{MARK}{}\u{a0}", markdown::escaped(revision));
    environment.add_function("changed", move |words: Rest<Value>| {
        let key: Vec<String> = words.iter().map(Value::to_string).collect();
        let text =
            if marks.as_ref().is_some_and(|marks| marks.has(&key)) { mark.as_str() } else { "" };
        Value::from_safe_string(text.to_owned())
    });
}

fn add_printing(environment: &mut Environment<'_>, printer: Printer) {
    let printer = Arc::new(printer);
    let own = Arc::clone(&printer);
    environment.add_filter("quantity", move |value: &Value, options: Kwargs| {
        print(&own, value, true, &options)
    });
    let own = Arc::clone(&printer);
    environment.add_filter("number", move |value: &Value, options: Kwargs| {
        print(&own, value, false, &options)
    });
    environment.add_filter("display", display);
    // Blanks would end the target of a link.
    environment
        .add_filter("link", |text: String| Value::from_safe_string(text.replace(' ', "%20")));
    environment.add_function("unit", move |kind: String| -> Result<String, Error> {
        let kind = Kind::from_name(&kind).ok_or_else(|| no_kind(&kind))?;
        Ok(printer.units.get(kind).label.clone())
    });
}

/// LaTeX of a step as a formula of its own.
fn display(step: &Value) -> Result<Value, Error> {
    let latex = step.get_attr("latex")?;
    let latex = latex.as_str().unwrap_or_default();
    Ok(Value::from_safe_string(format!("$$\n{latex}\n$$")))
}

/// Prints a value with the digits and in the unit asked for, else as the project prints its kind.
fn print(
    printer: &Printer,
    value: &Value,
    with_unit: bool,
    options: &Kwargs,
) -> Result<String, Error> {
    let digits: Option<usize> = options.get("digits")?;
    let unit: Option<String> = options.get("unit")?;
    options.assert_all_used()?;
    if value.is_none() {
        return Ok(String::new());
    }
    let number = f64::try_from(value.get_attr("value")?)?;
    let given = value.get_attr("unit")?;
    let kind = value.get_attr("kind")?;
    let name = kind.as_str().unwrap_or_default();
    let own = match (given.as_str(), Kind::from_name(name)) {
        (Some(label), _) => parse_unit(label).unwrap_or_else(|_| plain()),
        (None, Some(kind)) => printer.units.get(kind).clone(),
        (None, None) => return Err(no_kind(name)),
    };
    let unit = match unit {
        None => own,
        Some(label) => {
            let asked = parse_unit(&label)
                .map_err(|error| Error::new(ErrorKind::InvalidOperation, error.message))?;
            let plain_angle = |dimension: Dimension| Dimension { angle: 0, ..dimension };
            if plain_angle(asked.dimension) != plain_angle(own.dimension) {
                let message =
                    format!("`{label}` is not a unit of {}", own.dimension.name_with_article());
                return Err(Error::new(ErrorKind::InvalidOperation, message));
            }
            asked
        }
    };
    let significant = digits.unwrap_or(printer.significant).clamp(1, 12);
    let number = crate::quantity::print(number / unit.factor, significant);
    Ok(match unit.label.as_str() {
        _ if !with_unit => number,
        "" => number,
        "°" => number + "°",
        label => format!("{number}\u{a0}{label}"),
    })
}

fn plain() -> Unit {
    Unit { label: String::new(), factor: 1.0, dimension: Dimension::NONE }
}

fn no_kind(name: &str) -> Error {
    Error::new(ErrorKind::InvalidOperation, format!("`{name}` is not a kind of quantity"))
}
