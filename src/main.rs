//! The program: parses arguments, runs one command, ends with its status.

use std::process::ExitCode;

use clap::Parser;
use spanfolio::cli::{Arguments, run};

fn main() -> ExitCode {
    let arguments = Arguments::parse();
    if let Some(jobs) = arguments.jobs {
        // The global pool can be built only once, and this is the first and only place that does.
        rayon::ThreadPoolBuilder::new()
            .num_threads(usize::from(jobs))
            .build_global()
            .expect("no thread pool has been built before");
    }
    ExitCode::from(run(arguments) as u8)
}
