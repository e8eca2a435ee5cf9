//! JSON Schema of the project file, made from the structs of `written` and the tables of `forms`.

use std::sync::LazyLock;

use schemars::generate::SchemaSettings;
use serde_json::{Map, Value, json};

use super::forms::TABLED;
use super::written::{OpenPoint, Project};
use crate::catalogue::Sheet;

/// The schema, made once.
pub(super) static SCHEMA: LazyLock<Value> = LazyLock::new(make);

fn make() -> Value {
    let mut generator = SchemaSettings::draft2020_12().into_generator();
    // What stands in other files of a project is described along with it.
    generator.subschema_for::<Sheet>();
    generator.subschema_for::<OpenPoint>();
    let mut schema = generator.into_root_schema_for::<Project>().to_value();
    schema["$id"] = json!("urn:spanfolio:project:1");
    without_null(&mut schema);
    for (name, table) in TABLED {
        let branches: Vec<Value> = table.forms.iter().map(|form| form.schema(table)).collect();
        if let Some(definition) = definition(&mut schema, name) {
            definition.insert("oneOf".to_owned(), Value::Array(branches));
        }
    }
    schema
}

/// A definition by its name; a material is written in place.
fn definition<'s>(schema: &'s mut Value, name: &str) -> Option<&'s mut Map<String, Value>> {
    let at = match name {
        "Project" => String::new(),
        "Material" => "/properties/materials/additionalProperties".to_owned(),
        _ => format!("/$defs/{name}"),
    };
    schema.pointer_mut(&at)?.as_object_mut()
}

/// An optional key is left out, never null: takes the null out that optional fields bring.
fn without_null(schema: &mut Value) {
    match schema {
        Value::Array(items) => items.iter_mut().for_each(without_null),
        Value::Object(keys) => {
            if let Some(Value::Array(types)) = keys.get_mut("type") {
                types.retain(|kind| kind != "null");
                if let [only] = types.as_slice() {
                    let only = only.clone();
                    keys.insert("type".to_owned(), only);
                }
            }
            if let Some(Value::Array(branches)) = keys.get_mut("anyOf") {
                branches.retain(|branch| branch["type"] != "null");
                if let [Value::Object(only)] = branches.as_slice() {
                    let only = only.clone();
                    keys.shift_remove("anyOf");
                    keys.extend(only);
                }
            }
            keys.values_mut().for_each(without_null);
        }
        _ => {}
    }
}
