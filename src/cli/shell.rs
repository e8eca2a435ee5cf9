//! `spanfolio completions` and `spanfolio man`

use std::io::Write;

use super::Status;

#[derive(Debug, clap::Args)]
pub(super) struct Arguments {
    /// The shell to complete for
    shell: clap_complete::Shell,
}

pub(super) fn completions(arguments: &Arguments, mut command: clap::Command) -> Status {
    let mut out = Vec::new();
    clap_complete::generate(arguments.shell, &mut command, "spanfolio", &mut out);
    print(&out)
}

pub(super) fn manual(command: clap::Command) -> Status {
    let mut out = Vec::new();
    match clap_mangen::Man::new(command).render(&mut out) {
        Ok(()) => print(&out),
        Err(_) => Status::CouldNot,
    }
}

/// A reader that closes the pipe early has what it wanted.
fn print(bytes: &[u8]) -> Status {
    let _ = std::io::stdout().write_all(bytes);
    Status::Done
}
