//! `spanfolio compare`

use std::path::{Path, PathBuf};

use super::side::{self, Loaded};
use super::table::{Align, Table};
use super::{Status, render, wrong};
use crate::compare::{Report, Thresholds, ValueRow, compare};
use crate::diagnostic::Diagnostic;
use crate::files;
use crate::package::{comparison_markdown, comparison_page};
use crate::quantity::{Kind, Printer, parse};

/// Rows of a list on the terminal, and in a comment.
const ROWS: usize = 60;

#[derive(Debug, clap::Args)]
#[command(
    after_help = "A side is a project folder, a record.json, or REVISION:FOLDER for a project at a git revision. \
    Folders and revisions are solved by this program, so that differences come from the input.\n\n\
    Examples:\n  spanfolio compare ../issued-B .\n  spanfolio compare v1:beams/hall main:beams/hall --markdown -\n  \
    spanfolio compare --since origin/main beams/hall --html changes.html --exit-status"
)]
pub(super) struct Arguments {
    /// OLD and NEW; with `--since` the project alone
    #[arg(value_name = "SIDE", num_args = 0..=2)]
    sides: Vec<PathBuf>,
    /// Compare the working copy of a project with itself at a git revision
    #[arg(long, value_name = "REVISION")]
    since: Option<String>,
    /// Smallest relative change of a value that is listed, in per cent
    #[arg(long, value_name = "PERCENT", value_parser = percent)]
    relative: Option<f64>,
    /// Smallest change that is listed, by its unit: `0.5 kN`, `1 kN m`, `0.2 mm`, `0.1 mrad`, `0.01` of utilisation
    #[arg(long, value_name = "QUANTITY")]
    absolute: Vec<String>,
    /// Write Markdown fit for a comment into a file; `-` prints it instead of the report
    #[arg(long, value_name = "FILE")]
    markdown: Option<PathBuf>,
    /// Write a self-contained page with old and new lines drawn over each other
    #[arg(long, value_name = "FILE")]
    html: Option<PathBuf>,
    /// Print JSON, all values in SI base units
    #[arg(long)]
    json: bool,
    /// End with 3 when an outcome worsened
    #[arg(long)]
    exit_status: bool,
}

fn percent(text: &str) -> Result<f64, String> {
    let value: f64 = text.trim_end_matches('%').trim().parse().map_err(|_| "not a number")?;
    let allowed = (0.0..=100.0).contains(&value);
    if allowed { Ok(value / 100.0) } else { Err("not between 0 and 100".to_owned()) }
}

pub(super) fn run(arguments: &Arguments) -> Status {
    compared(arguments).unwrap_or_else(|status| status)
}

fn compared(arguments: &Arguments) -> Result<Status, Status> {
    let thresholds = thresholds(arguments)?;
    let [old, new] = sides(arguments)?;
    let mut changes = compare(&old.side(), &new.side(), &thresholds);
    changes.notes.extend(old.notes.iter().chain(&new.notes).cloned());
    let printer = new.record.model.units.printer();
    let report = changes.report(&printer);
    let put = |path: &Path, text: &str| {
        files::put(path, text.as_bytes()).map_err(|problem| {
            render::print(&[problem], Path::new(""), None);
            Status::CouldNot
        })
    };
    let mut printed = None;
    if let Some(path) = &arguments.markdown {
        let text = comparison_markdown(&report.clone().at_most(ROWS), &printer);
        let text = text.map_err(|problems| wrong(&problems, Path::new(""), None))?;
        if path.as_os_str() == "-" {
            printed = Some(text);
        } else {
            put(path, &text)?;
        }
    }
    if let Some(path) = &arguments.html {
        let page = comparison_page(&old.record, &new.record, &changes);
        put(path, &page.map_err(|problems| wrong(&problems, Path::new(""), None))?)?;
    }
    if arguments.json {
        printed = Some(changes.to_json());
    }
    anstream::print!("{}", printed.unwrap_or_else(|| terminal(&report.at_most(ROWS), &printer)));
    let worse = arguments.exit_status && changes.is_worse();
    Ok(if worse { Status::NotSatisfied } else { Status::Done })
}

fn thresholds(arguments: &Arguments) -> Result<Thresholds, Status> {
    let mut thresholds = Thresholds::default();
    thresholds.relative = arguments.relative.unwrap_or(thresholds.relative);
    for text in &arguments.absolute {
        let set = parse(text)
            .map_err(|error| error.message)
            .and_then(|quantity| thresholds.set(&quantity));
        set.map_err(|message| {
            let message = format!("`--absolute {text}`: {message}");
            wrong(&[Diagnostic::error("threshold", message)], Path::new(""), None)
        })?;
    }
    Ok(thresholds)
}

fn sides(arguments: &Arguments) -> Result<[Loaded; 2], Status> {
    match (&arguments.since, arguments.sides.as_slice()) {
        (None, [old, new]) => Ok([side::load(old)?, side::load(new)?]),
        (Some(revision), []) => since(revision, Path::new(".")),
        (Some(revision), [project]) => since(revision, project),
        (None, _) => Err(misused(
            "a comparison has two sides: `compare OLD NEW`, or `--since REVISION PROJECT`",
        )),
        (Some(_), _) => {
            Err(misused("`--since` compares one project with itself: give its folder alone"))
        }
    }
}

fn since(revision: &str, project: &Path) -> Result<[Loaded; 2], Status> {
    Ok([side::at_revision(revision, project)?, side::folder(project)?])
}

fn misused(message: &str) -> Status {
    wrong(&[Diagnostic::error("command-line", message.to_owned())], Path::new(""), None)
}

fn terminal(report: &Report, printer: &Printer) -> String {
    let length = &printer.units.get(Kind::Length).label;
    let mut out = String::new();
    for (word, side) in [("old", &report.old), ("new", &report.new)] {
        out += &format!(
            "{word}  {}, {} {}, revision {}\n",
            side.label, side.number, side.title, side.revision
        );
    }
    out += &format!("\n{}\n", in_capitals(&report.verdict));
    for note in &report.notes {
        out += &format!("Note: {note}\n");
    }
    out += &checks(report, length);
    out += &input(report);
    out += &values("Governing values of members", "member", &report.values, Some(length));
    if report.further > 0 {
        out += &format!("  and {} further of displacements and rotations\n", report.further);
    }
    out += &values("Governing reactions, support on structure", "support", &report.reactions, None);
    out += &list("New open items", &report.opened);
    out += &list("Closed open items", &report.closed);
    let mut table = Table::new(&[
        ("compared", Align::Left),
        ("listed", Align::Right),
        ("below", Align::Right),
        ("same", Align::Right),
    ]);
    for row in &report.counts {
        table.row(vec![
            row.what.to_owned(),
            row.listed.to_string(),
            row.below.to_string(),
            row.same.to_string(),
        ]);
    }
    out += &format!(
        "\nCounts\n{}\nBelow: changed by less than {}\n",
        table.print(),
        report.thresholds
    );
    for text in &report.cut {
        out += &format!("{text}\n");
    }
    out
}

/// The first letter as a capital, and a full stop.
fn in_capitals(text: &str) -> String {
    let mut chars = text.chars();
    let first = chars.next().map(|first| first.to_uppercase().chain(chars).collect::<String>());
    format!("{}.", first.unwrap_or_default())
}

fn checks(report: &Report, length: &str) -> String {
    let at = format!("at {length}");
    let mut table = Table::new(&[
        ("", Align::Left),
        ("check", Align::Left),
        ("on", Align::Left),
        ("outcome", Align::Left),
        ("utilisation", Align::Right),
        ("in", Align::Left),
        (&at, Align::Right),
    ]);
    for row in &report.checks {
        table.row(vec![
            row.what.to_owned(),
            row.id.clone(),
            row.on.clone(),
            row.outcome.clone(),
            row.utilisation.clone(),
            row.combination.clone(),
            row.x.clone(),
        ]);
    }
    titled("Checks", &table)
}

fn input(report: &Report) -> String {
    let mut out = String::new();
    let mut renamed = Table::new(&[
        ("what", Align::Left),
        ("old", Align::Left),
        ("new", Align::Left),
        ("recognised by", Align::Left),
    ]);
    for row in &report.renamed {
        renamed.row(vec![row.kind.to_owned(), row.old.clone(), row.new.clone(), row.by.clone()]);
    }
    out += &titled("Renamed", &renamed);
    if !report.input.is_empty() || !report.texts.is_empty() {
        out += "\nInput\n";
    }
    for row in &report.input {
        let place = if row.place.is_empty() { String::new() } else { format!("  {}", row.place) };
        out += &format!("  {} {}{place}\n", row.what, row.item);
        let mut facts = Table::new(&[("", Align::Left), ("", Align::Left)]);
        for fact in &row.facts {
            let either =
                |text: &str| if text.is_empty() { "–".to_owned() } else { text.to_owned() };
            facts.row(vec![
                format!("  {}", fact.fact),
                format!("{} → {}", either(&fact.old), either(&fact.new)),
            ]);
        }
        out += facts.print().trim_start_matches('\n');
        if row.more > 0 {
            out += &format!("    and {} more\n", row.more);
        }
    }
    for row in &report.texts {
        out += &format!("  file {}: {}\n", row.file, row.what);
    }
    out
}

/// A column of positions where `length` is given.
fn values(title: &str, on: &str, rows: &[ValueRow], length: Option<&str>) -> String {
    let at = length.map(|length| format!("at {length}")).unwrap_or_default();
    let mut table = Table::new(&[
        (on, Align::Left),
        ("purpose", Align::Left),
        ("value", Align::Left),
        ("", Align::Left),
        ("old", Align::Right),
        ("new", Align::Right),
        ("size", Align::Right),
        ("in", Align::Left),
        (&at, Align::Left),
    ]);
    for row in rows {
        let other = if row.other_combination { " (other)" } else { "" };
        let moved = if row.moved { " (moved)" } else { "" };
        table.row(vec![
            row.on.clone(),
            row.purpose.clone(),
            row.what.clone(),
            row.unit.clone(),
            row.old.clone(),
            row.new.clone(),
            row.change.clone(),
            format!("{}{other}", row.combination),
            format!("{}{moved}", row.x),
        ]);
    }
    titled(title, &table)
}

fn list(title: &str, items: &[String]) -> String {
    let lines: String = items.iter().map(|item| format!("  - {item}\n")).collect();
    if lines.is_empty() { lines } else { format!("\n{title}\n{lines}") }
}

fn titled(title: &str, table: &Table) -> String {
    if table.is_empty() { String::new() } else { format!("\n{title}\n{}", table.print()) }
}
