//! `audit`

mod reports;
mod several;
mod states;

use super::project::{BEAM, Project};

/// The beam with a check, an assumption and a deferral.
const CHECKED: &str = "\
basis:
  assumptions:
    - {id: A1, text: The floor holds the top flange., status: to confirm, by: site engineer}
  deferred:
    - {id: D1, text: Connections, to: fabricator}
checks:
  - {id: bending, title: Bending, shows: strength, members: [B1], purpose: strength, reference: a test,
     demand: abs(M_y), capacity: 25 kN m}
";

/// The beam with a check, issued.
fn issued() -> Project {
    let project = Project::of(&format!("{BEAM}{CHECKED}"));
    issue(&project);
    project
}

fn issue(project: &Project) {
    let run = project.run(&["issue", "."]);
    assert_eq!(run.status, 0, "{}", run.err);
}
