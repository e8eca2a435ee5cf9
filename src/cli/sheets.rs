//! Check sheets for `catalogue`.

use serde_json::{Value, json};

use crate::catalogue::{Sheet, SheetShows, SheetTarget, sheets};

/// Word that lists all sheets.
pub(super) const ALL: &str = "checks";

/// The sheet of an id, case ignored.
pub(super) fn sheet(id: &str) -> Option<&'static Sheet> {
    sheets().iter().find(|sheet| sheet.id.eq_ignore_ascii_case(id))
}

/// Sheets whose id, title or code hold all the words.
pub(super) fn matching(words: &[String]) -> Vec<&'static Sheet> {
    let holds = |sheet: &&Sheet| {
        let about = format!("{} {} {}", sheet.id, sheet.title, sheet.code).to_lowercase();
        words.iter().all(|word| about.contains(&word.to_lowercase()))
    };
    sheets().iter().filter(holds).collect()
}

/// Id, what it is made on, title.
pub(super) fn rows(of: &[&Sheet]) -> Vec<Vec<String>> {
    of.iter()
        .map(|sheet| vec![sheet.id.clone(), on(sheet.on).to_owned(), sheet.title.clone()])
        .collect()
}

const fn on(target: SheetTarget) -> &'static str {
    match target {
        SheetTarget::Member => "members",
        SheetTarget::Node => "nodes",
        SheetTarget::Structure => "structures",
    }
}

const fn shows(shows: SheetShows) -> &'static str {
    match shows {
        SheetShows::Strength => "strength",
        SheetShows::Stability => "stability",
        SheetShows::Deflection => "deflection",
        SheetShows::Equilibrium => "equilibrium",
        SheetShows::Bearing => "bearing",
        SheetShows::Other => "other",
    }
}

/// Everything a sheet says.
pub(super) fn in_full(sheet: &Sheet) -> String {
    let mut out = format!("{} ({})\n{}\n", sheet.title, sheet.id, sheet.reference());
    out += &format!("\nMade on {}, shows {}", on(sheet.on), shows(sheet.shows));
    for (what, names) in [("materials", &sheet.materials), ("shapes", &sheet.shapes)] {
        if !names.is_empty() {
            out += &format!("; {what}: {}", names.join(", "));
        }
    }
    out += "\n";
    if !sheet.inputs.is_empty() {
        out += "\nInputs\n";
        for (name, input) in &sheet.inputs {
            let default = match &input.default {
                Some(default) => format!(" (default {default})"),
                None => " (to be given)".to_owned(),
            };
            out += &format!("  {name}: {}{default}\n", input.meaning);
        }
    }
    if !sheet.valid_if.is_empty() {
        out += "\nValid if\n";
        for condition in &sheet.valid_if {
            out += &format!("  {} – otherwise: {}\n", condition.condition, condition.reason);
        }
    }
    out += "\nSteps\n";
    for (symbol, step) in &sheet.steps {
        let about: Vec<&str> =
            step.meaning.iter().chain(&step.clause).map(String::as_str).collect();
        let about =
            if about.is_empty() { String::new() } else { format!("  – {}", about.join(", ")) };
        out += &format!("  {symbol} = {}{about}\n", step.formula);
    }
    out += &format!("  demand = {}\n  capacity = {}\n", sheet.demand, sheet.capacity);
    for (head, lines) in [("Takes for granted", &sheet.assumes), ("Cautions", &sheet.cautions)] {
        if !lines.is_empty() {
            out += &format!("\n{head}\n");
            lines.iter().for_each(|line| out += &format!("  - {line}\n"));
        }
    }
    if let Some(verified) = &sheet.verified {
        out += &format!("\nVerified: {verified}\n");
    }
    out
}

/// A sheet for machines.
pub(super) fn as_json(sheet: &Sheet) -> Value {
    json!({
        "id": sheet.id,
        "title": sheet.title,
        "reference": sheet.reference(),
        "on": on(sheet.on),
        "shows": shows(sheet.shows),
        "materials": sheet.materials,
        "shapes": sheet.shapes,
        "inputs": sheet.inputs.iter().map(|(name, input)| json!({
            "name": name,
            "meaning": input.meaning,
            "default": input.default,
        })).collect::<Vec<_>>(),
        "valid_if": sheet.valid_if.iter().map(|condition| json!({
            "condition": condition.condition,
            "reason": condition.reason,
        })).collect::<Vec<_>>(),
        "steps": sheet.steps.iter().map(|(symbol, step)| json!({
            "symbol": symbol,
            "formula": step.formula,
            "meaning": step.meaning,
            "clause": step.clause,
        })).collect::<Vec<_>>(),
        "demand": sheet.demand,
        "capacity": sheet.capacity,
        "assumes": sheet.assumes,
        "cautions": sheet.cautions,
        "verified": sheet.verified,
    })
}
