//! Every demo project reads, resolves and solves.

use std::path::Path;

use spanfolio::model::Model;

use crate::support::model;

const DEMOS: [&str; 3] = ["gallery-floor", "workshop-portal", "pump-platform"];

fn demo(name: &str) -> Model {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("demo-projects").join(name);
    let bytes = std::fs::read(folder.join("project.yaml")).expect("a demo project");
    let text = String::from_utf8(bytes).expect("UTF-8");
    model(&text).unwrap_or_else(|problems| panic!("{name}: {problems:#?}"))
}

#[test]
fn every_demo_solves() {
    for name in DEMOS {
        let model = demo(name);
        let solution = spanfolio::analysis::solve(&model)
            .unwrap_or_else(|problems| panic!("{name}: {problems:#?}"));
        assert_eq!(solution.states.len(), model.cases.len());
    }
}
