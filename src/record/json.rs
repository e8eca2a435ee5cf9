//! record.json: written so that git can compare it, read back with what it leaves out.

use serde_json::Value;

use super::settle::fill_deflections;
use super::{FORMAT, Record};

impl Record {
    /// The text of record.json: one line per segment, governing value, load and combination. Members that
    /// are not drawn are written without their fields.
    ///
    /// # Panics
    /// Never: a Record holds nothing that JSON cannot.
    #[must_use]
    pub fn to_json(&self) -> String {
        let mut value = serde_json::to_value(self).expect("names are text and numbers are finite");
        for name in &self.model.package.left_out {
            if let Some(segments) = value
                .pointer_mut("/results/members")
                .and_then(|members| members.get_mut(name.as_str())?.get_mut("segments"))
            {
                *segments = Value::Array(Vec::new());
            }
        }
        let mut out = String::new();
        write(&mut out, &value, &mut Vec::new());
        out.push('\n');
        out
    }

    /// Reads a record.
    ///
    /// # Errors
    /// When the text is not a record, or its format is newer than this program.
    pub fn from_json(text: &str) -> Result<Self, String> {
        let value: Value =
            serde_json::from_str(text).map_err(|error| format!("not JSON: {error}"))?;
        let format = value.get("format").and_then(Value::as_u64);
        match format {
            None => return Err("not a record: it has no `format`".to_owned()),
            Some(format) if format > u64::from(FORMAT) => {
                return Err(format!(
                    "the record has format {format}, this program reads {FORMAT}: use a newer version"
                ));
            }
            Some(_) => {}
        }
        let mut record: Self =
            serde_json::from_value(value).map_err(|error| format!("not a record: {error}"))?;
        for (name, member) in record.model.structures.values().flat_map(|s| &s.members) {
            if let Some(result) = record.results.members.get_mut(name) {
                fill_deflections(member, &mut result.segments);
            }
        }
        Ok(record)
    }
}

/// What stands on one line: a value whose parts nobody compares one by one.
fn on_one_line(path: &[&str]) -> bool {
    matches!(
        path,
        ["program"]
            | ["basis" | "project", _, _]
            | ["model", "units" | "analysis" | "package" | "solve_order"]
            | ["model", "materials" | "sections" | "values" | "build_ups", _]
            | ["model", "structures", _, "nodes" | "members", _]
            | ["model", "cases", _, "loads", _]
            | ["model", "cases", _, "resultant"]
            | ["combinations" | "narrative" | "rules", _]
            | ["model", "cases", _, "relations" | "by_span" | "psi"]
            | ["checks", _, "on" | "demand" | "capacity" | "relies_on" | "cautions"]
            | ["checks", _, "steps" | "validity" | "next", _]
            | ["workings", _, "lines", _]
            | ["registers", _, _]
            | ["results", "nodes", _]
            | ["results", "members", _, "segments", _]
            | ["results", "members", _, "governing", _, _, _]
            | ["results", "members", _, "spans", _, "governing", _, _, _]
            | ["results", "reactions", _, _, _, _]
            | ["self_check", "structures", _, _, _]
            | ["self_check", "independent"]
            | ["self_check", "strain_energy", _]
    )
}

fn write<'v>(out: &mut String, value: &'v Value, path: &mut Vec<&'v str>) {
    let indent = |out: &mut String, depth: usize| {
        out.push('\n');
        out.extend(std::iter::repeat_n(' ', depth));
    };
    match value {
        Value::Object(entries) if !entries.is_empty() && !on_one_line(path) => {
            out.push('{');
            for (index, (key, entry)) in entries.iter().enumerate() {
                if index > 0 {
                    out.push(',');
                }
                indent(out, path.len() + 1);
                *out += &Value::from(key.as_str()).to_string();
                *out += ": ";
                path.push(key);
                write(out, entry, path);
                path.pop();
            }
            indent(out, path.len());
            out.push('}');
        }
        Value::Array(entries) if !entries.is_empty() && !on_one_line(path) => {
            out.push('[');
            for (index, entry) in entries.iter().enumerate() {
                if index > 0 {
                    out.push(',');
                }
                indent(out, path.len() + 1);
                path.push("");
                write(out, entry, path);
                path.pop();
            }
            indent(out, path.len());
            out.push(']');
        }
        other => *out += &other.to_string(),
    }
}
