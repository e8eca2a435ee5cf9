//! Commands: parse arguments, call the library, print, pick the exit status.
//!
//! Invariants
//! - Results go to stdout, words for people to stderr; colour only on a terminal.
//! - Nothing here computes or decides what another caller of the library would need.
//! - Problems are rendered here and nowhere else.

mod audit;
pub mod catalogue;
mod compare;
mod issue;
mod point;
mod progress;
mod render;
mod rules;
mod schema;
mod sheets;
mod shell;
mod side;
mod solve;
mod start;
mod table;
mod trial;

use std::path::{Path, PathBuf};

use clap::{CommandFactory, Parser, Subcommand};

use crate::Solved;
use crate::diagnostic::Diagnostic;
use crate::files::{self, Sources};

/// What a command ends with; the numbers are those of the process.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Status {
    Done = 0,
    /// Writing failed, or the self-check is out of tolerance: nothing was written.
    CouldNot = 1,
    /// The command line or the project is wrong.
    Wrong = 2,
    /// A check is not satisfied, or deferred without being named in `basis.deferred`; of `try`: so with
    /// every section tried.
    NotSatisfied = 3,
    /// The committed package is out of date.
    OutOfDate = 4,
}

/// Turns one YAML project file into a calculation package for beams and frames.
#[derive(Debug, Parser)]
#[command(
    name = "spanfolio",
    version,
    about,
    long_about = "Turns one YAML project file into a calculation package for beams and frames that a checker can review.\n\n\
                  A package supports and does not replace the judgement of a licensed engineer; local codes and national annexes govern.",
    after_help = "Exit status: 0 done; 1 could not (writing failed, self-check out of tolerance; nothing written); \
                  2 the command line or the project is wrong; 3 a check is not satisfied, or deferred without being named in `basis.deferred` (`solve`, `audit`), or no section satisfies (`try`), or an outcome worsened (`compare --exit-status`); \
                  4 a committed package is out of date (`audit`).",
    propagate_version = true
)]
pub struct Arguments {
    /// Threads to use at most; the result does not depend on it
    #[arg(long, global = true, value_name = "N", value_parser = clap::value_parser!(u16).range(1..=256))]
    pub jobs: Option<u16>,
    #[command(subcommand)]
    command: Command,
}

#[derive(Debug, Subcommand)]
enum Command {
    /// Set up a new project folder from a small working example
    Start(start::Arguments),
    /// Solve a project and print what governs; writes nothing
    Solve(solve::Arguments),
    /// Write the calculation package into the project's `package` folder
    Issue(issue::Arguments),
    /// Say what changed between two revisions of a project
    Compare(compare::Arguments),
    /// Hold committed packages against their projects, list what is open; for CI
    Audit(audit::Arguments),
    /// Try the sections of a family in place of one section, lightest first
    Try(trial::Arguments),
    /// Find sections, materials, check sheets and combination rules, print their properties and source
    Catalogue(catalogue::CatalogueArgs),
    /// Print the JSON Schema of the project file, for editors
    Schema,
    /// Print shell completions
    Completions(shell::Arguments),
    /// Print the manual page
    Man,
}

/// Runs the command of parsed arguments.
#[must_use]
pub fn run(arguments: Arguments) -> Status {
    // Threads inside the solver's kernels cost more than they give at these sizes.
    faer::set_global_parallelism(faer::Par::Seq);
    match arguments.command {
        Command::Start(arguments) => start::run(&arguments),
        Command::Solve(arguments) => solve::run(&arguments),
        Command::Issue(arguments) => issue::run(&arguments),
        Command::Compare(arguments) => compare::run(&arguments),
        Command::Audit(arguments) => audit::run(&arguments),
        Command::Try(arguments) => trial::run(&arguments),
        Command::Catalogue(arguments) => match catalogue::run(&arguments) {
            Ok(text) => {
                anstream::print!("{text}");
                Status::Done
            }
            Err(problem) => wrong(&[problem], Path::new(""), None),
        },
        Command::Schema => schema::run(),
        Command::Completions(arguments) => shell::completions(&arguments, Arguments::command()),
        Command::Man => shell::manual(Arguments::command()),
    }
}

/// The folder of a project, or its `project.yaml`.
#[derive(Debug, clap::Args)]
struct Project {
    /// Folder of the project, or its `project.yaml`
    #[arg(value_name = "PROJECT")]
    path: PathBuf,
}

impl Project {
    fn folder(&self) -> PathBuf {
        files::folder(&self.path)
    }

    /// Reads and solves the project, mending first what an interrupted command left behind; prints
    /// problems and warnings.
    fn solve(&self) -> Result<(Sources, Solved), Status> {
        let folder = self.folder();
        let sources =
            files::read(&self.path).map_err(|problems| wrong(&problems, &folder, None))?;
        files::heal(&folder).map_err(|problem| {
            render::print(&[problem], &folder, None);
            Status::CouldNot
        })?;
        let bar = progress::Bar::new();
        let solved = crate::solve(&sources);
        drop(bar);
        let solved = solved.map_err(|problems| wrong(&problems, &folder, Some(&sources)))?;
        render::print(&solved.warnings, &folder, Some(&sources));
        Ok((sources, solved))
    }
}

/// Prints problems and gives the status of a wrong project.
fn wrong(problems: &[Diagnostic], folder: &Path, sources: Option<&Sources>) -> Status {
    render::print(problems, folder, sources);
    Status::Wrong
}
