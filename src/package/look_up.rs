//! What templates and narrative ask the Record for, by call.

use minijinja::value::{Kwargs, Serde};
use minijinja::{Environment, Error, ErrorKind, Value};
use serde::Serialize;

use super::context::Quantity;
use super::markdown;
use crate::model::Effect;
use crate::quantity::Kind;
use crate::record::{
    ExtremesRecord, Map, Record, StepValueRecord, WorkingLineRecord, by_id, component_kind,
    printed_utilisation,
};

/// A value with the unit in which it prints.
#[derive(Serialize)]
struct InUnit {
    value: f64,
    unit: String,
}

/// A check where it is worst.
#[derive(Serialize)]
struct CheckResult {
    id: String,
    title: String,
    on: String,
    utilisation: String,
    outcome: String,
    combination: String,
}

/// Adds the calls; `figures` are ids with captions.
pub(super) fn add(
    environment: &mut Environment<'_>,
    record: &Record,
    figures: &[(String, String)],
) {
    add_results(environment, record);
    add_values(environment, record);
    add_checks(environment, record);
    let figures = figures.to_vec();
    environment.add_function("figure", move |id: String| {
        let caption = figures.iter().find(|(own, _)| *own == id).map(|(_, caption)| caption);
        let caption = caption.ok_or_else(|| {
            let near: Vec<&str> = figures
                .iter()
                .map(|(own, _)| own.as_str())
                .filter(|own| own.contains(id.as_str()) || id.contains(own))
                .take(6)
                .collect();
            let near = if near.is_empty() {
                String::new()
            } else {
                format!("; near it: {}", near.join(", "))
            };
            Error::new(ErrorKind::InvalidOperation, format!("no figure named `{id}`{near}"))
        })?;
        let caption = markdown::escaped(caption);
        Ok::<Value, Error>(Value::from_safe_string(format!("![{caption}](figures/{id}.svg)")))
    });
}

/// `value('q_store')` of the project and `result('M_hand')` of the working blocks.
fn add_values(environment: &mut Environment<'_>, record: &Record) {
    let values = record.model.values.clone();
    environment.add_function("value", move |name: String| {
        let value = values.get(&name).ok_or_else(|| missing("value", &name))?;
        Ok::<Value, Error>(in_unit(value.value, &value.unit))
    });
    let mut results: Map<(f64, String)> = Map::new();
    for line in record.workings.iter().flat_map(|working| &working.lines) {
        if let WorkingLineRecord::Step(step) = line
            && let StepValueRecord::Number(value, unit) = &step.value
        {
            results.insert(step.symbol.clone(), (*value, unit.clone()));
        }
    }
    environment.add_function("result", move |name: String| {
        let (value, unit) = results.get(&name).ok_or_else(|| missing("result", &name))?;
        Ok::<Value, Error>(in_unit(*value, unit))
    });
}

fn in_unit(value: f64, unit: &str) -> Value {
    Value::from(Serde(InUnit { value, unit: unit.to_owned() }))
}

/// `check('B1-bending')`, with its `utilisation`, `outcome`, `on`, `combination`, `title`.
fn add_checks(environment: &mut Environment<'_>, record: &Record) {
    let checks: Map<CheckResult> = by_id(&record.checks)
        .into_iter()
        .filter_map(|(id, all)| {
            let worst = all.into_iter().reduce(|a, b| {
                let worse = super::context::rank(b) > super::context::rank(a);
                if worse { b } else { a }
            })?;
            let state = worst.state.as_deref().unwrap_or_default();
            let result = CheckResult {
                id: id.clone(),
                title: worst.title.clone(),
                on: worst.on_words(),
                utilisation: worst.utilisation.map_or_else(|| "–".to_owned(), printed_utilisation),
                outcome: worst.outcome.clone(),
                combination: record
                    .combinations
                    .get(state)
                    .map(|combination| combination.number.clone())
                    .unwrap_or_default(),
            };
            Some((id, result))
        })
        .collect();
    environment.add_function("check", move |id: String| {
        let check = checks.get(&id).ok_or_else(|| missing("check", &id))?;
        Ok::<Value, Error>(Value::from(Serde(check)))
    });
}

/// `effect('B1', 'M_y', 'max', purpose='strength')` and `reaction('A', 'Z', 'max', purpose=…)`.
fn add_results(environment: &mut Environment<'_>, record: &Record) {
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
