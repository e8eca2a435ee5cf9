//! `spanfolio solve --at "B1 2.5 m"`: every effect at one place, in every case and combination.

use super::table::{Align, Table};
use crate::diagnostic::Diagnostic;
use crate::model::{EFFECTS, Side};
use crate::quantity::{Kind, parse_as};
use crate::record::Record;

/// The table for a member's name followed by a position.
pub(super) fn table(record: &Record, place: &str) -> Result<String, Diagnostic> {
    let (member, x) = split(record, place)?;
    let printer = record.model.units.printer();
    let mut head = vec![("state".to_owned(), Align::Left), (String::new(), Align::Left)];
    for effect in EFFECTS {
        let unit = &printer.units.get(effect.kind()).label;
        head.push((format!("{} {unit}", effect.name()), Align::Right));
    }
    let head: Vec<(&str, Align)> =
        head.iter().map(|(title, align)| (title.as_str(), *align)).collect();
    let mut table = Table::new(&head);
    for state in record.states() {
        let cells = |side: Side| -> Vec<String> {
            EFFECTS
                .iter()
                .map(|effect| {
                    record.effect(member, *effect, state, x, side).map_or_else(
                        || "–".to_owned(),
                        |value| printer.number(effect.kind(), value),
                    )
                })
                .collect()
        };
        let (before, after) = (cells(Side::Before), cells(Side::After));
        if before == after {
            table.row([state.clone(), String::new()].into_iter().chain(before).collect());
        } else {
            for (side, cells) in [("before", before), ("after", after)] {
                table.row([state.clone(), side.to_owned()].into_iter().chain(cells).collect());
            }
        }
    }
    Ok(format!("Member {member} at {}\n{}", printer.with_unit(Kind::Length, x), table.print()))
}

/// Splits `B1 2.5 m` where what follows a member's name is a length.
fn split<'r>(record: &'r Record, place: &str) -> Result<(&'r str, f64), Diagnostic> {
    let place = place.trim();
    // The longest name first, since one may begin another.
    let mut names: Vec<&String> = record.results.members.keys().collect();
    names.sort_by_key(|name| std::cmp::Reverse(name.len()));
    for name in names {
        let Some(rest) = place.strip_prefix(name.as_str()) else { continue };
        if !rest.starts_with(' ') {
            continue;
        }
        let x = parse_as(rest.trim(), Kind::Length)
            .map_err(|error| Diagnostic::error("quantity", error.message).hint(error.hint))?;
        let length = record.member(name).map_or(0.0, |member| member.length);
        if !(0.0..=length).contains(&x) {
            let printer = record.model.units.printer();
            return Err(Diagnostic::error(
                "off-member",
                format!(
                    "`{}` is not on member `{name}`, which is {} long",
                    rest.trim(),
                    printer.with_unit(Kind::Length, length)
                ),
            ));
        }
        return Ok((name, x));
    }
    Err(Diagnostic::error("unknown-member", format!("`{place}` begins with the name of no member"))
        .hint("write a member and a position, e.g. --at \"B1 2.5 m\"".to_owned()))
}
