//! Second step: the tree held against the schema; every unknown key, missing key and wrong kind at once.
//!
//! Knows the part of JSON Schema that `schema` writes: `$ref`, `type`, `enum`, `anyOf` by kind of value,
//! `properties`, `additionalProperties`, `required`, `minProperties`, `items`, `minItems`, `maxItems`; in
//! place of `oneOf` it asks the table that made it.

use std::ops::Range;

use serde_json::{Value, json};

use super::forms::{self, Form, Table};
use super::near::nearest;
use super::schema::SCHEMA;
use super::text::{Map, Text, place};
use super::tree::{Kind, Node};
use crate::diagnostic::Diagnostic;

/// Longest list of keys or words that a hint gives in full.
const LISTED: usize = 16;

/// Every shape problem of a file, in its order.
pub(super) fn problems(text: &str, root: &Node) -> Vec<Diagnostic> {
    let mut walk = Walk { text, found: Vec::new() };
    if let Some(newer) = walk.newer(root) {
        return vec![newer];
    }
    walk.value(root, Spot { schema: &SCHEMA, what: "the project file", at: &(0..0) });
    walk.found.sort_by_key(|problem| problem.place.as_ref().map(|place| place.range.start));
    walk.found
}

/// Every shape problem of a text that is one definition of the schema.
pub(super) fn problems_of(
    text: &str,
    root: &Node,
    definition: &str,
    what: &str,
) -> Vec<Diagnostic> {
    let mut walk = Walk { text, found: Vec::new() };
    let schema = json!({ "$ref": format!("#/$defs/{definition}") });
    walk.value(root, Spot { schema: &schema, what, at: &(0..0) });
    walk.found.sort_by_key(|problem| problem.place.as_ref().map(|place| place.range.start));
    walk.found
}

struct Walk<'t> {
    text: &'t str,
    found: Vec<Diagnostic>,
}

/// What a value should be, what it is called and where its name stands.
#[derive(Clone, Copy)]
struct Spot<'a> {
    schema: &'a Value,
    what: &'a str,
    at: &'a Range<usize>,
}

impl Walk<'_> {
    /// A file of a later format is not read any further.
    fn newer(&self, root: &Node) -> Option<Diagnostic> {
        let Kind::Map(entries) = &root.kind else { return None };
        let node = entries.get("format")?;
        let Kind::Leaf(format) = &node.kind else { return None };
        format.parse::<u32>().is_ok_and(|format| format > 1).then(|| {
            self.error("format", format!("the file has format {format}"), &node.range)
                .label("this version reads format 1")
        })
    }

    fn value(&mut self, node: &Node, spot: Spot<'_>) {
        let (schema, definition) = resolved(spot.schema);
        if let Some(branches) = schema["anyOf"].as_array() {
            match branches.iter().find(|branch| fits(node, resolved(branch).0)) {
                Some(schema) => self.value(node, Spot { schema, ..spot }),
                None => self.wrong_kind(node, spot),
            }
            return;
        }
        match &node.kind {
            Kind::Empty => self.found.push(
                self.error("no-value", format!("{} has no value", spot.what), &node.range)
                    .label(format!("expected {}", expected(schema)))
                    .hint("write a value, or leave the key out".to_owned()),
            ),
            _ if !fits(node, schema) => self.wrong_kind(node, spot),
            Kind::Leaf(text) => self.leaf(text, node, spot),
            Kind::List(items) => self.list(items, node, Spot { schema, ..spot }),
            Kind::Map(entries) => {
                self.map(entries, definition, node, Spot { schema, ..spot });
            }
        }
    }

    fn leaf(&mut self, text: &str, node: &Node, spot: Spot<'_>) {
        let schema = resolved(spot.schema).0;
        let Some(words) = schema["enum"].as_array() else { return };
        let words: Vec<String> = words.iter().map(plain).collect();
        if !words.iter().any(|word| word == text) {
            let near = nearest(text, words.iter().map(String::as_str));
            self.found.push(
                self.error(
                    "unknown-word",
                    format!("{} cannot be `{text}`", spot.what),
                    &node.range,
                )
                .label(format!("expected {}", expected(schema)))
                .hint(near.map(|near| format!("did you mean `{near}`?"))),
            );
        }
    }

    fn list(&mut self, items: &[Node], node: &Node, spot: Spot<'_>) {
        let bound = |key: &str| spot.schema[key].as_u64().and_then(|n| usize::try_from(n).ok());
        let (least, most) = (bound("minItems").unwrap_or(0), bound("maxItems"));
        if items.len() < least || most.is_some_and(|most| items.len() > most) {
            let wanted = match most {
                Some(most) if most == least => format!("{least}"),
                Some(most) => format!("{least} to {most}"),
                None => format!("at least {least}"),
            };
            let entries = |one: bool| if one { "entry" } else { "entries" };
            let (given, wants) = (entries(items.len() == 1), entries(wanted == "at least 1"));
            self.found.push(
                self.error(
                    "wrong-count",
                    format!("{} has {} {given}, not {wanted}", spot.what, items.len()),
                    &node.range,
                )
                .label(format!("expected {wanted} {wants}")),
            );
        }
        let what = format!("an entry of {}", spot.what);
        for item in items {
            let at = &item.range;
            self.value(item, Spot { schema: &spot.schema["items"], what: &what, at });
        }
    }

    fn map(&mut self, entries: &Map<Node>, definition: &str, node: &Node, spot: Spot<'_>) {
        let properties = spot.schema["properties"].as_object();
        let others = Some(&spot.schema["additionalProperties"]).filter(|schema| schema.is_object());
        let table = forms::table(definition);
        let what = table.map_or(spot.what, |table| table.what);
        if spot.schema["minProperties"] == 1 && entries.is_empty() {
            self.found.push(
                self.error("missing-key", format!("{what} is empty"), &node.range)
                    .label(format!("expected {}", expected(spot.schema))),
            );
        }
        for (key, value) in entries {
            let known = properties.and_then(|known| known.get(key.as_str())).or(others);
            let named = format!("`{key}`");
            match known {
                Some(schema) => {
                    self.value(value, Spot { schema, what: &named, at: key.range() });
                }
                None => self.unknown_key(key, what, spot.schema),
            }
        }
        for key in spot.schema["required"].as_array().into_iter().flatten().map(plain) {
            if !entries.contains_key(key.as_str()) {
                self.found.push(
                    self.error("missing-key", format!("{what} needs `{key}`"), spot.at)
                        .label(format!("`{key}` is missing")),
                );
            }
        }
        if let Some(table) = table {
            self.form(entries, table, spot.at);
        }
    }

    fn unknown_key(&mut self, key: &Text, what: &str, schema: &Value) {
        let keys = || {
            schema["properties"]
                .as_object()
                .into_iter()
                .flat_map(|keys| keys.keys().map(String::as_str))
        };
        let hint = match nearest(key, keys()) {
            Some(near) => Some(format!("did you mean `{near}`?")),
            None if keys().count() <= LISTED => Some(format!("it takes {}", listed(keys()))),
            None => None,
        };
        let message = format!("{what} has no key `{key}`");
        self.found
            .push(self.error("unknown-key", message, key.range()).label("unknown key").hint(hint));
    }

    /// Keys that must, or cannot, stand together.
    fn form(&mut self, entries: &Map<Node>, table: &Table, at: &Range<usize>) {
        let here = |key: &&str| entries.contains_key(*key);
        let deciding: Vec<&Form> =
            table.forms.iter().filter(|form| form.when.iter().any(here)).collect();
        let Some(first) = deciding.first() else {
            let mut names: Vec<&str> =
                table.forms.iter().flat_map(|form| form.when).copied().collect();
            names.dedup();
            self.found.push(
                self.error("missing-key", format!("{} says too little", table.what), at)
                    .label(format!("expected {}", one_of(names.into_iter()))),
            );
            return;
        };
        if let Some(other) = deciding.iter().find(|form| form.when[0] != first.when[0]) {
            let key = other.when.iter().find(|key| here(key)).copied().unwrap_or(other.when[0]);
            let written = first.when.iter().find(|key| here(key)).copied().unwrap_or(key);
            self.found.push(
                self.error(
                    "conflicting-keys",
                    format!("{} cannot have both `{written}` and `{key}`", table.what),
                    entries.get_full(key).map_or(at, |(_, key, _)| key.range()),
                )
                .label("say one of them"),
            );
            return;
        }
        // Of several forms with the same deciding key its word picks one; an unknown word is reported already.
        let word = entries.get(first.when[0]).map(|node| &node.kind);
        let picked = deciding.iter().find(|form| match (form.word, word) {
            (None, _) => true,
            (Some(word), Some(Kind::Leaf(text))) => word == text,
            (Some(_), _) => false,
        });
        if let Some(form) = picked {
            self.picked(entries, table, form, at);
        }
    }

    fn picked(&mut self, entries: &Map<Node>, table: &Table, form: &Form, at: &Range<usize>) {
        let name = match form.word {
            Some(_) => form.name(),
            None => {
                let here = form.when.iter().find(|key| entries.contains_key(**key));
                format!("`{}`", here.unwrap_or(&form.when[0]))
            }
        };
        for group in form.needs {
            let mut written = group.iter().filter_map(|key| entries.get_full(*key));
            match (written.next(), written.next()) {
                (None, _) => {
                    let wanted = one_of(group.iter().copied());
                    self.found.push(
                        self.error(
                            "missing-key",
                            format!("{} with {name} needs {wanted}", table.what),
                            at,
                        )
                        .label(format!("{wanted} is missing")),
                    );
                }
                (Some((_, one, _)), Some((_, other, _))) => self.found.push(
                    self.error(
                        "conflicting-keys",
                        format!("{} cannot have both `{one}` and `{other}`", table.what),
                        other.range(),
                    )
                    .label("say one of them"),
                ),
                _ => {}
            }
        }
        let known = |key: &str| {
            table.always.contains(&key) || table.forms.iter().any(|form| form.takes(table, key))
        };
        for key in entries.keys().filter(|key| known(key) && !form.takes(table, key)) {
            self.found.push(
                self.error(
                    "conflicting-keys",
                    format!("`{key}` does not go with {name}"),
                    key.range(),
                )
                .label(format!("not in {} with {name}", table.what)),
            );
        }
    }

    fn wrong_kind(&mut self, node: &Node, spot: Spot<'_>) {
        let wanted = expected(resolved(spot.schema).0);
        let given = match &node.kind {
            Kind::Empty => "nothing",
            Kind::Leaf(_) => "text",
            Kind::List(_) => "a list",
            Kind::Map(_) => "keys with values",
        };
        self.found.push(
            self.error("wrong-kind", format!("{} cannot be {given}", spot.what), &node.range)
                .label(format!("expected {wanted}")),
        );
    }

    /// An error at the first line of a stretch.
    fn error(&self, code: &'static str, message: String, range: &Range<usize>) -> Diagnostic {
        let first = self.text.get(range.clone()).unwrap_or_default();
        let length = first.lines().next().unwrap_or_default().trim_end().len();
        Diagnostic::error(code, message).at(place(range.start..range.start + length))
    }
}

/// Follows a reference; with the name of the definition.
fn resolved(schema: &Value) -> (&Value, &str) {
    match schema["$ref"].as_str().and_then(|at| at.strip_prefix("#/$defs/")) {
        Some(name) => (&SCHEMA["$defs"][name], name),
        None => (schema, schema["title"].as_str().unwrap_or_default()),
    }
}

/// The value is of the kind that the schema wants: a leaf, a list or a map.
fn fits(node: &Node, schema: &Value) -> bool {
    if let Some(branches) = schema["anyOf"].as_array() {
        return branches.iter().any(|branch| fits(node, resolved(branch).0));
    }
    match (&node.kind, schema["type"].as_str()) {
        (Kind::Leaf(text), Some("boolean")) => text == "true" || text == "false",
        (Kind::List(_), Some("array")) | (Kind::Map(_), Some("object")) => true,
        (Kind::Leaf(_), kind) => !matches!(kind, Some("array" | "object")),
        _ => false,
    }
}

/// What the schema wants, in words.
fn expected(schema: &Value) -> String {
    if let Some(branches) = schema["anyOf"].as_array() {
        let parts: Vec<String> = branches.iter().map(|one| expected(resolved(one).0)).collect();
        return parts.join(", or ");
    }
    if let Some(words) = schema["enum"].as_array() {
        let mut words: Vec<String> = words.iter().map(plain).collect();
        // A truth value and its word read alike.
        words.dedup();
        return one_of(words.iter().map(String::as_str));
    }
    match schema["type"].as_str() {
        Some("array") => "a list".to_owned(),
        Some("object") => match schema["properties"].as_object() {
            Some(keys) if keys.len() <= LISTED => {
                format!("keys with values: {}", listed(keys.keys().map(String::as_str)))
            }
            _ => "keys with values".to_owned(),
        },
        Some("boolean") => "`true` or `false`".to_owned(),
        _ => "text or a value".to_owned(),
    }
}

fn plain(value: &Value) -> String {
    value.as_str().map_or_else(|| value.to_string(), str::to_owned)
}

fn listed<'a>(names: impl Iterator<Item = &'a str>) -> String {
    let names: Vec<String> = names.map(|name| format!("`{name}`")).collect();
    names.join(", ")
}

fn one_of<'a>(names: impl Iterator<Item = &'a str>) -> String {
    let names: Vec<String> = names.map(|name| format!("`{name}`")).collect();
    match names.as_slice() {
        [] => String::new(),
        [only] => only.clone(),
        [first @ .., last] => format!("{} or {last}", first.join(", ")),
    }
}
