//! `spanfolio start`

use std::collections::BTreeMap;
use std::path::{Path, PathBuf};

use clap::ValueEnum;

use super::{Status, render};
use crate::files;

#[derive(Debug, clap::Args)]
pub(super) struct Arguments {
    /// Folder to make; it must not exist or be empty
    #[arg(value_name = "FOLDER")]
    folder: PathBuf,
    /// Which example to begin with
    #[arg(long, value_enum, default_value_t = Kind::SimpleBeam)]
    kind: Kind,
}

/// The examples that a project can begin with.
#[derive(Clone, Copy, Debug, ValueEnum)]
enum Kind {
    /// One span between two supports
    SimpleBeam,
    /// Several spans over supports
    ContinuousBeam,
    /// Columns and a beam in one plane
    PlaneFrame,
    /// Columns and beams in space
    SpaceFrame,
    /// One span in US customary units
    UsUnits,
}

impl Kind {
    fn project(self) -> &'static str {
        match self {
            Self::SimpleBeam => include_str!("../../templates/start/simple-beam.yaml"),
            Self::ContinuousBeam => include_str!("../../templates/start/continuous-beam.yaml"),
            Self::PlaneFrame => include_str!("../../templates/start/plane-frame.yaml"),
            Self::SpaceFrame => include_str!("../../templates/start/space-frame.yaml"),
            Self::UsUnits => include_str!("../../templates/start/us-units.yaml"),
        }
    }
}

pub(super) fn run(arguments: &Arguments) -> Status {
    let project = arguments.kind.project().as_bytes().to_vec();
    let files = BTreeMap::from([("project.yaml".to_owned(), project)]);
    if let Err(problem) = files::create(&arguments.folder, &files) {
        // A folder that is not empty is the caller's to mend; a disk that refuses is not.
        let status = if problem.code == "not-empty" { Status::Wrong } else { Status::CouldNot };
        render::print(&[problem], Path::new(""), None);
        return status;
    }
    let folder = arguments.folder.display();
    anstream::eprintln!("made `{folder}/project.yaml`; next: spanfolio issue {folder}");
    Status::Done
}
