//! What the tests share: projects given as text, run through the library's real pipeline.

use std::collections::BTreeMap;
use std::path::Path;

use spanfolio::diagnostic::Diagnostic;
use spanfolio::files::{self, Sources};
use spanfolio::model::Model;
use spanfolio::project;
use spanfolio::record::Record;

/// Sources that hold nothing but this project file.
pub(crate) fn sources(yaml: &str) -> Sources {
    Sources { files: BTreeMap::from([("project.yaml".to_owned(), yaml.as_bytes().to_vec())]) }
}

/// A demo project as the program reads it, narrative and sheets included.
pub(crate) fn demo(name: &str) -> Sources {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("demo-projects").join(name);
    files::read(&folder).unwrap_or_else(|problems| panic!("{name}: {problems:#?}"))
}

/// A demo project solved.
pub(crate) fn solved_demo(name: &str) -> Record {
    match spanfolio::solve(&demo(name)) {
        Ok(solved) => solved.record,
        Err(problems) => panic!("{name}: {problems:#?}"),
    }
}

/// YAML text in, Model out.
pub(crate) fn model(yaml: &str) -> Result<Model, Vec<Diagnostic>> {
    project::read(&sources(yaml)).map(|(model, _)| model)
}

/// YAML text in, Record out; panics with the problems where there are any.
pub(crate) fn solved(yaml: &str) -> Record {
    match spanfolio::solve(&sources(yaml)) {
        Ok(solved) => solved.record,
        Err(problems) => panic!("{problems:#?}\nin\n{yaml}"),
    }
}
