//! The schema of the project file, held against an independent validator.

use std::fs::{read, read_dir};

use serde_json::Value;
use spanfolio::project;

use super::project_file::{GOOD, SHAPE_ERRORS, edited};

fn validator() -> jsonschema::Validator {
    jsonschema::draft202012::new(&project::schema()).expect("the schema is one")
}

/// As a YAML reader without our care sees it.
fn json(yaml: &str) -> Value {
    serde_yaml::from_str(yaml).expect("the file is YAML")
}

#[test]
fn the_good_file_is_accepted() {
    let found: Vec<_> = validator().iter_errors(&json(GOOD)).map(|e| e.to_string()).collect();
    assert!(found.is_empty(), "{found:#?}");
}

#[test]
fn every_demo_project_is_accepted() {
    for folder in read_dir(concat!(env!("CARGO_MANIFEST_DIR"), "/demo-projects")).unwrap() {
        let path = folder.unwrap().path().join("project.yaml");
        let Ok(bytes) = read(&path) else { continue };
        let value = json(std::str::from_utf8(&bytes).unwrap());
        let found: Vec<_> = validator().iter_errors(&value).map(|e| e.to_string()).collect();
        assert!(found.is_empty(), "{}: {found:#?}", path.display());
    }
}

#[test]
fn every_shape_error_is_refused() {
    let validator = validator();
    for (name, from, to) in SHAPE_ERRORS {
        assert!(!validator.is_valid(&json(&edited(from, to))), "{name}");
    }
}

#[test]
fn it_is_a_schema_of_its_draft() {
    let schema = project::schema();
    assert_eq!(schema["$schema"], "https://json-schema.org/draft/2020-12/schema");
    assert!(jsonschema::meta::is_valid(&schema));
}

#[test]
fn every_key_has_its_help() {
    fn without(at: &str, schema: &Value, found: &mut Vec<String>) {
        for (key, value) in schema["properties"].as_object().into_iter().flatten() {
            if value["description"].as_str().is_none_or(str::is_empty) {
                found.push(format!("{at}.{key}"));
            }
        }
    }
    let schema = project::schema();
    let mut found = Vec::new();
    without("Project", &schema, &mut found);
    for (name, definition) in schema["$defs"].as_object().unwrap() {
        without(name, definition, &mut found);
    }
    assert!(found.is_empty(), "{found:?}");
}

#[test]
fn every_key_stands_in_some_form() {
    let schema = project::schema();
    let material = &schema["properties"]["materials"]["additionalProperties"];
    let tabled = schema["$defs"].as_object().unwrap().values().chain([&schema, material]);
    for definition in tabled.filter(|definition| definition["oneOf"].is_array()) {
        let forms = definition["oneOf"].as_array().unwrap();
        for key in definition["properties"].as_object().unwrap().keys() {
            let takes = |form: &Value| {
                form["propertyNames"]["enum"]
                    .as_array()
                    .unwrap()
                    .contains(&Value::from(key.as_str()))
            };
            assert!(forms.iter().any(takes), "{key} of {}", definition["description"]);
        }
    }
}
