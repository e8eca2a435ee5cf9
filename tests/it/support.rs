//! What the tests share: projects given as text, run through the library's real pipeline.

use std::collections::BTreeMap;

use spanfolio::diagnostic::Diagnostic;
use spanfolio::files::Sources;
use spanfolio::model::Model;
use spanfolio::record::Record;
use spanfolio::{analysis, project, record};

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
    let result = model(yaml).and_then(|model| {
        let solution = analysis::solve(&model)?;
        let governing = analysis::govern(&model, &solution);
        let self_check = analysis::self_check(&model, &solution);
        Ok(record::record(&model, &solution, &governing, &self_check, "test"))
    });
    match result {
        Ok(record) => record,
        Err(problems) => panic!("{problems:#?}\nin\n{yaml}"),
    }
}
