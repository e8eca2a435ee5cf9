//! `spanfolio solve`

use super::table::{Align, Table};
use super::{Project, Status, point, wrong};
use crate::model::Effect;
use crate::quantity::{Kind, Printer};
use crate::record::{ExtremeRecord, ExtremesRecord, MemberResult, Record, printed_utilisation};

#[derive(Debug, clap::Args)]
pub(super) struct Arguments {
    #[command(flatten)]
    project: Project,
    /// Print the whole record as JSON
    #[arg(long, conflicts_with = "at")]
    json: bool,
    /// Print every effect at a place of a member, in every case and combination
    #[arg(long, value_name = "MEMBER POSITION")]
    at: Option<String>,
}

pub(super) fn run(arguments: &Arguments) -> Status {
    let solved = match arguments.project.solve() {
        Ok((_, solved)) => solved,
        Err(status) => return status,
    };
    let record = &solved.record;
    if arguments.json {
        anstream::print!("{}", record.to_json());
    } else if let Some(place) = &arguments.at {
        match point::table(record, place) {
            Ok(table) => anstream::print!("{table}"),
            Err(problem) => return wrong(&[problem], &arguments.project.folder(), None),
        }
    } else {
        anstream::print!("{}", summary(record));
    }
    if !record.self_check.satisfied {
        anstream::eprintln!("the self-check is out of tolerance: do not use these values");
        return Status::CouldNot;
    }
    if record.is_settled() { Status::Done } else { Status::NotSatisfied }
}

/// What governs, the reactions, the self-check and what is open.
fn summary(record: &Record) -> String {
    let printer = record.model.units.printer();
    let mut out = format!("{}\n{}\n", record.project.title, record.project.number);
    for (name, member) in &record.results.members {
        out += &governing(record, &printer, name, member);
    }
    out += &reactions(record, &printer);
    out += &checks(record, &printer);
    out += &combinations(record);
    out += "\nSelf-check\n  ";
    out += if record.self_check.satisfied {
        "loads against reactions, nodal equilibrium, energy and an independent integration agree\n"
    } else {
        "OUT OF TOLERANCE\n"
    };
    if !record.registers.open_items.is_empty() {
        out += "\nOpen items\n";
        for item in &record.registers.open_items {
            out += &format!("  - {}\n", item.text);
        }
    }
    out
}

fn governing(record: &Record, printer: &Printer, name: &str, member: &MemberResult) -> String {
    let at = format!("at {}", printer.units.get(Kind::Length).label);
    let mut table = Table::new(&[
        ("purpose", Align::Left),
        ("effect", Align::Left),
        ("", Align::Left),
        ("greatest", Align::Right),
        (&at, Align::Right),
        ("in", Align::Left),
        ("next", Align::Left),
        ("least", Align::Right),
        (&at, Align::Right),
        ("in", Align::Left),
        ("next", Align::Left),
    ]);
    for (purpose, effects) in &member.governing {
        for (effect, extremes) in effects {
            let Some(kind) = Effect::from_name(effect).map(Effect::kind) else { continue };
            if is_nought(extremes) {
                continue;
            }
            let unit = printer.units.get(kind).label.clone();
            let mut cells = vec![purpose.clone(), effect.clone(), unit];
            cells.extend(of(record, printer, kind, &extremes.max));
            cells.extend(of(record, printer, kind, &extremes.min));
            table.row(cells);
        }
    }
    if table.is_empty() {
        return String::new();
    }
    format!("\nMember {name}\n{}", table.print())
}

fn of(record: &Record, printer: &Printer, kind: Kind, extreme: &ExtremeRecord) -> Vec<String> {
    let number = |state: &str| record.combinations.get(state).map_or("", |c| c.number.as_str());
    vec![
        printer.number(kind, extreme.value),
        extreme.x.map(|x| printer.number(Kind::Length, x)).unwrap_or_default(),
        record.in_short(&extreme.state, &extreme.loaded),
        extreme.next.as_ref().map_or_else(String::new, |next| {
            format!("{} {}", number(&next.state), printer.number(kind, next.value))
        }),
    ]
}

fn reactions(record: &Record, printer: &Printer) -> String {
    let mut table = Table::new(&[
        ("purpose", Align::Left),
        ("node", Align::Left),
        ("", Align::Left),
        ("", Align::Left),
        ("greatest", Align::Right),
        ("in", Align::Left),
        ("least", Align::Right),
        ("in", Align::Left),
    ]);
    for (purpose, nodes) in &record.results.reactions {
        for (node, components) in nodes {
            for (component, extremes) in components {
                if is_nought(extremes) {
                    continue;
                }
                let kind = if component.starts_with('R') { Kind::Moment } else { Kind::Force };
                let unit = printer.units.get(kind).label.clone();
                let max = of(record, printer, kind, &extremes.max);
                let min = of(record, printer, kind, &extremes.min);
                table.row(vec![
                    purpose.clone(),
                    node.clone(),
                    component.clone(),
                    unit,
                    max[0].clone(),
                    max[2].clone(),
                    min[0].clone(),
                    min[2].clone(),
                ]);
            }
        }
    }
    format!("\nReactions, support on structure (Z up)\n{}", table.print())
}

fn checks(record: &Record, printer: &Printer) -> String {
    if record.checks.is_empty() {
        return String::new();
    }
    let at = format!("at {}", printer.units.get(Kind::Length).label);
    let mut table = Table::new(&[
        ("check", Align::Left),
        ("on", Align::Left),
        ("utilisation", Align::Right),
        ("in", Align::Left),
        (&at, Align::Right),
        ("outcome", Align::Left),
    ]);
    for check in &record.checks {
        let state = check.state.as_deref().unwrap_or_default();
        let reason = check.reason.as_ref().map(|reason| format!(": {reason}")).unwrap_or_default();
        table.row(vec![
            check.id.clone(),
            check.on_words(),
            check.utilisation.map_or_else(|| "–".to_owned(), printed_utilisation),
            record.in_short(state, &check.loaded),
            check.x.map(|x| printer.number(Kind::Length, x)).unwrap_or_default(),
            format!("{}{reason}", check.outcome),
        ]);
    }
    format!("\nChecks\n{}", table.print())
}

fn combinations(record: &Record) -> String {
    let mut table = Table::new(&[("number", Align::Left), ("combination", Align::Left)]);
    for (name, combination) in &record.combinations {
        table.row(vec![combination.number.clone(), name.clone()]);
    }
    format!("\nCombinations\n{}", table.print())
}

fn is_nought(extremes: &ExtremesRecord) -> bool {
    extremes.max.value.abs() <= 0.0 && extremes.min.value.abs() <= 0.0
}
