//! Audit: what is committed of a project, held against what the project makes now.
//!
//! Invariants
//! - Everything is rebuilt in memory; nothing of a project is written or mended.
//! - A package is up to date when every file has equal bytes, or is equal after reading, with numbers within
//!   1e-9 of their size, apart from the program version and from line ends; the latter with a note.
//! - Outcomes, registers and changes are those that [`crate::solve`] and [`crate::compare`] give.
//! - A project that fails stops no other. Reports hold no time, no absolute path and no order of threads.

mod annotations;
mod expected;
mod findings;
mod hold;
mod junit;
mod lines;
mod part;
mod project;
mod report;
mod state;
mod summary;
mod text;

pub use findings::{Finding, Level};
pub use hold::{FileDifference, FileState};
pub use part::{Part, parts};
pub use project::{Assumption, Audited, CheckOutcome, Deferral, Problem, Standing};
pub use report::{Counts, Report};
pub use state::{PackageState, Reason};

use rayon::prelude::*;

use crate::files::Found;

/// Audits projects side by side, in their order.
#[must_use]
pub fn audit(projects: &[Found]) -> Vec<Audited> {
    projects.par_iter().map(project::audited).collect()
}

/// Text of others on one line, so that it can neither begin a line of a report, nor steer a terminal, nor
/// turn the direction of what is read.
#[must_use]
pub fn one_line(text: &str) -> String {
    let steers = |c: char| {
        c.is_control()
            || matches!(c, '\u{202a}'..='\u{202e}' | '\u{2066}'..='\u{2069}' | '\u{2028}' | '\u{2029}')
    };
    text.chars().map(|c| if steers(c) { ' ' } else { c }).collect()
}
