//! `start`

use super::project::Project;

const KINDS: [&str; 5] =
    ["simple-beam", "continuous-beam", "plane-frame", "space-frame", "us-units"];

#[test]
fn every_kind_can_be_issued_at_once() {
    for kind in KINDS {
        let place = Project::empty();
        let folder = place.path("new").display().to_string();
        let started = place.run(&["start", &folder, "--kind", kind]);
        assert_eq!(started.status, 0, "{kind}: {}", started.err);
        let issued = place.run(&["issue", &folder]);
        assert_eq!(issued.status, 0, "{kind}: {}", issued.err);
        assert!(!issued.err.contains("warning"), "{kind}: {}", issued.err);
    }
}

#[test]
fn a_folder_in_use_is_left_alone() {
    let place = Project::empty();
    place.put("notes.txt", b"mine");
    let started = place.run(&["start", "."]);
    assert_eq!(started.status, 2);
    assert_eq!(place.files("").len(), 1);
}
