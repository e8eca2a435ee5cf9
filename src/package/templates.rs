//! The template environment: built-in chapters, which a project overrides by name.
//!
//! Fuel, recursion and what can be read are bounded: a template sees the context, the functions below and
//! other templates, and nothing else.

use std::collections::BTreeMap;
use std::error::Error as _;
use std::sync::Arc;

use minijinja::syntax::SyntaxConfig;
use minijinja::value::{Kwargs, Serde, ValueKind};
use minijinja::{AutoEscape, Environment, Error, ErrorKind, State, UndefinedBehavior, Value};

use super::context::{Context, Quantity, component_kind};
use super::markdown;
use crate::diagnostic::{Diagnostic, Place};
use crate::files::Sources;
use crate::model::Effect;
use crate::quantity::{Kind, Printer};
use crate::record::{ExtremesRecord, Map, Record};

/// Instructions (and bytes) that one chapter may cost. The largest demo needs about a hundredth.
const FUEL: u64 = 50_000_000;
const RECURSION: usize = 100;

macro_rules! built_in {
    ($($name:literal),* $(,)?) => {
        [$(($name, include_str!(concat!("../../templates/", $name)))),*]
    };
}

/// Templates that come with the program.
const BUILT_IN: [(&str, &str); 12] = built_in![
    "cover.md",
    "summary.md",
    "basis.md",
    "method.md",
    "model.md",
    "actions.md",
    "combinations.md",
    "effects.md",
    "governing.md",
    "self-check.md",
    "deferred.md",
    "appendix.md",
];

/// Renders chapters from one context.
pub(super) struct Renderer<'r> {
    environment: Environment<'r>,
    context: Value,
    /// Templates of the project, by name.
    own: BTreeMap<String, String>,
}

impl<'r> Renderer<'r> {
    pub(super) fn new(record: &Record, sources: &Sources, context: &Context<'_>) -> Self {
        let own: BTreeMap<String, String> = sources
            .files
            .keys()
            .filter_map(|path| {
                let name = path.strip_prefix("templates/")?;
                Some((name.to_owned(), sources.text(path)?.to_owned()))
            })
            .collect();
        let mut environment = Environment::new();
        environment.set_undefined_behavior(UndefinedBehavior::Strict);
        environment.set_fuel(Some(FUEL));
        environment.set_recursion_limit(RECURSION);
        environment.set_debug(true);
        let syntax = SyntaxConfig::builder().trim_blocks(true).lstrip_blocks(true).build();
        environment.set_syntax(syntax.expect("only white space differs from the usual syntax"));
        environment.set_auto_escape_callback(|_| AutoEscape::Custom("markdown".into()));
        environment.set_formatter(format);
        let templates = own.clone();
        environment.set_loader(move |name| {
            let built_in = || BUILT_IN.iter().find(|(own, _)| *own == name).map(|(_, text)| *text);
            Ok(templates.get(name).map(String::as_str).or_else(built_in).map(str::to_owned))
        });
        add_printing(&mut environment, record.model.units.printer());
        add_look_up(&mut environment, record);
        Self { environment, context: Value::from(Serde(context)), own }
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
        }
        problem
    }
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

fn add_printing(environment: &mut Environment<'_>, printer: Printer) {
    let printer = Arc::new(printer);
    let own = Arc::clone(&printer);
    environment.add_filter("quantity", move |value: &Value| print(&own, value, Printer::with_unit));
    let own = Arc::clone(&printer);
    environment.add_filter("number", move |value: &Value| print(&own, value, Printer::number));
    environment.add_function("unit", move |kind: String| -> Result<String, Error> {
        let kind = Kind::from_name(&kind).ok_or_else(|| no_kind(&kind))?;
        Ok(printer.units.get(kind).label.clone())
    });
}

fn print(
    printer: &Printer,
    value: &Value,
    how: fn(&Printer, Kind, f64) -> String,
) -> Result<String, Error> {
    if value.is_none() {
        return Ok(String::new());
    }
    let kind = value.get_attr("kind")?;
    let name = kind.as_str().unwrap_or_default();
    let kind = Kind::from_name(name).ok_or_else(|| no_kind(name))?;
    let number = f64::try_from(value.get_attr("value")?)?;
    Ok(how(printer, kind, number))
}

fn no_kind(name: &str) -> Error {
    Error::new(ErrorKind::InvalidOperation, format!("`{name}` is not a kind of quantity"))
}

/// `effect('B1', 'M_y', 'max', purpose='strength')` and `reaction('A', 'Z', 'max', purpose=…)`.
fn add_look_up(environment: &mut Environment<'_>, record: &Record) {
    let members: Map<Map<Map<ExtremesRecord>>> = record
        .results
        .members
        .iter()
        .map(|(name, result)| (name.clone(), result.governing.clone()))
        .collect();
    environment.add_function(
        "effect",
        move |member: String, effect: String, which: String, options: Kwargs| {
            let kind = Effect::from_name(&effect).map(Effect::kind);
            let kind = kind.ok_or_else(|| missing("effect", &effect))?;
            let purposes = members.get(&member).ok_or_else(|| missing("member", &member))?;
            let purpose: String = options.get("purpose")?;
            options.assert_all_used()?;
            let effects = purposes.get(&purpose).ok_or_else(|| missing("purpose", &purpose))?;
            let extremes = effects.get(&effect).ok_or_else(|| missing("effect", &effect))?;
            value(kind, extremes, &which)
        },
    );
    let reactions = record.results.reactions.clone();
    environment.add_function(
        "reaction",
        move |node: String, component: String, which: String, options: Kwargs| {
            let purpose: String = options.get("purpose")?;
            options.assert_all_used()?;
            let nodes = reactions.get(&purpose).ok_or_else(|| missing("purpose", &purpose))?;
            let components = nodes.get(&node).ok_or_else(|| missing("supported node", &node))?;
            let extremes =
                components.get(&component).ok_or_else(|| missing("component", &component))?;
            value(component_kind(&component), extremes, &which)
        },
    );
}

fn value(kind: Kind, extremes: &ExtremesRecord, which: &str) -> Result<Value, Error> {
    let extreme = match which {
        "max" => &extremes.max,
        "min" => &extremes.min,
        other => return Err(missing("extreme", other)),
    };
    Ok(Value::from(Serde(Quantity::new(kind, extreme.value))))
}

fn missing(what: &str, name: &str) -> Error {
    Error::new(ErrorKind::InvalidOperation, format!("no {what} named `{name}`"))
}
