//! `spanfolio issue`

use super::{Project, Status, render, side, wrong};
use crate::files;
use crate::package::package;

#[derive(Debug, clap::Args)]
pub(super) struct Arguments {
    #[command(flatten)]
    project: Project,
    /// Mark what changed since a git revision, and add a chapter that lists it
    #[arg(long, value_name = "REVISION")]
    against: Option<String>,
}

pub(super) fn run(arguments: &Arguments) -> Status {
    let folder = arguments.project.folder();
    let (sources, solved) = match arguments.project.solve() {
        Ok(both) => both,
        Err(status) => return status,
    };
    if !solved.record.self_check.satisfied {
        anstream::eprintln!("the self-check is out of tolerance; nothing was written");
        return Status::CouldNot;
    }
    let against = match arguments.against.as_ref().map(|revision| side::against(&folder, revision))
    {
        None => None,
        Some(Ok(against)) => {
            render::print(against.warning(&solved.record).as_slice(), &folder, None);
            Some(against)
        }
        Some(Err(status)) => return status,
    };
    let package = match package(&solved.record, &sources, against.as_ref()) {
        Ok(package) => package,
        Err(problems) => return wrong(&problems, &folder, Some(&sources)),
    };
    if let Err(problem) = files::write(&folder, &package) {
        let status =
            if problem.code == "foreign-package" { Status::Wrong } else { Status::CouldNot };
        render::print(&[problem], &folder, None);
        return status;
    }
    let into = folder.join(files::PACKAGE);
    anstream::eprintln!(
        "wrote {} files into `{}`; open `{}`",
        package.len() + 1,
        into.display(),
        into.join("package.html").display()
    );
    let open = solved.record.registers.open_items.len();
    match open {
        0 => {}
        1 => anstream::eprintln!("1 open item stands on the first page"),
        _ => anstream::eprintln!("{open} open items stand on the first page"),
    }
    let failing = |outcome: &str| {
        solved.record.checks.iter().filter(|check| check.outcome == outcome).count()
    };
    match (failing("not satisfied"), failing("deferred")) {
        (0, 0) => {}
        (failing, 0) => anstream::eprintln!("checks not satisfied: {failing}"),
        (0, deferred) => anstream::eprintln!("checks deferred: {deferred}"),
        (failing, deferred) => {
            anstream::eprintln!("checks not satisfied: {failing}, deferred: {deferred}");
        }
    }
    Status::Done
}
