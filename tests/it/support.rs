//! What the tests share: projects given as text, run through the library's real pipeline.

use std::collections::BTreeMap;

use spanfolio::diagnostic::Diagnostic;
use spanfolio::files::Sources;
use spanfolio::model::Model;
use spanfolio::project;
use spanfolio::record::Record;

/// Sources that hold nothing but this project file.
pub(crate) fn sources(yaml: &str) -> Sources {
    Sources { files: BTreeMap::from([("project.yaml".to_owned(), yaml.as_bytes().to_vec())]) }
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
