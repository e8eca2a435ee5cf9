//! `catalogue`: finds sections, materials, check sheets and combination rules, prints their properties and source.
//!
//! Returns what to print; a name that is not found is a problem of the command line.

use clap::{Args, ValueEnum};
use serde_json::{Map, Value, json};

use super::{rules, sheets};
use crate::catalogue::{
    self, CatalogueMaterial, CatalogueSection, Entry, Family, Rule, RuleSet, Sheet, families, find,
    material, material_tables, section,
};
use crate::diagnostic::Diagnostic;
use crate::quantity::{Kind, Printer, System, Units, parse_as, parse_unit};

/// Significant digits of the properties printed.
const SIGNIFICANT: usize = 4;

/// Arguments of `catalogue`.
#[derive(Args, Clone, Debug)]
pub struct CatalogueArgs {
    /// A name (`IPE 300`, `S275`, `bending stress`), a family (`IPE`), `checks`, `rules` or words to find; none lists
    /// what there is
    pub words: Vec<String>,
    /// Units to print in
    #[arg(long, value_enum, default_value_t = UnitsArg::Si)]
    pub units: UnitsArg,
    /// Thickness that chooses the strengths of a material, e.g. `50 mm`
    #[arg(long, value_name = "LENGTH")]
    pub thickness: Option<String>,
    /// Print JSON, all values in SI base units
    #[arg(long)]
    pub json: bool,
}

/// Systems of units on the command line.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum UnitsArg {
    Si,
    Us,
}

/// What the words call for.
enum Found {
    Tables,
    Family(&'static Family),
    Section(Box<CatalogueSection>),
    Material(Box<CatalogueMaterial>),
    Sheets(Vec<&'static Sheet>),
    Rules(Vec<(&'static RuleSet, &'static Rule)>),
    Entries(Vec<Entry>),
}

/// The text for stdout.
///
/// # Errors
/// When nothing is found, or the thickness is not a length.
pub fn run(args: &CatalogueArgs) -> Result<String, Diagnostic> {
    let thickness = match &args.thickness {
        Some(text) => Some(parse_as(text, Kind::SectionLength).map_err(|problem| {
            Diagnostic::error("not-a-length", format!("--thickness: {problem}")).hint(problem.hint)
        })?),
        None => None,
    };
    let found = look_up(&args.words, thickness)?;
    if args.json {
        let value = as_json(&found);
        return Ok(format!("{value:#}\n"));
    }
    let system = match args.units {
        UnitsArg::Si => System::Si,
        UnitsArg::Us => System::Us,
    };
    let printer = Printer { units: Units::new(system), significant: SIGNIFICANT };
    Ok(match &found {
        Found::Tables => tables(),
        Found::Family(family) => {
            let rows = catalogue::family(family.name).unwrap_or_default();
            format!("{}\n\n{}", family.title(), section_list(&rows, &printer))
        }
        Found::Section(section) => one_section(section, &printer),
        Found::Material(material) => one_material(material, &printer),
        Found::Sheets(found) => match &found[..] {
            [one] => sheets::in_full(one),
            several => columns(&sheets::rows(several)),
        },
        Found::Rules(found) => match &found[..] {
            [(set, rule)] => rules::in_full(set, rule),
            several => columns(&rules::rows(several)),
        },
        Found::Entries(entries) => entry_list(entries, &printer),
    })
}

fn look_up(words: &[String], thickness: Option<f64>) -> Result<Found, Diagnostic> {
    if words.is_empty() {
        return Ok(Found::Tables);
    }
    let name = words.join(" ");
    if let Some(sheet) = sheets::sheet(&name) {
        return Ok(Found::Sheets(vec![sheet]));
    }
    if let Some(rule) = rules::rule(&name) {
        return Ok(Found::Rules(vec![rule]));
    }
    if name.eq_ignore_ascii_case(rules::ALL) {
        return Ok(Found::Rules(rules::all()));
    }
    if name.eq_ignore_ascii_case(sheets::ALL) {
        return Ok(Found::Sheets(catalogue::sheets().iter().collect()));
    }
    let is_name = |family: &&Family| family.name.eq_ignore_ascii_case(&words.concat());
    if let Some(family) = families().iter().find(is_name) {
        return Ok(Found::Family(family));
    }
    let no_section = match section(&name) {
        Ok(section) => return Ok(Found::Section(Box::new(section))),
        Err(problem) => problem,
    };
    let no_material = match material(&name, thickness) {
        Ok(material) => return Ok(Found::Material(Box::new(material))),
        // A grade that is there, but not at this thickness.
        Err(problem) if problem.nearest.is_empty() && material(&name, None).is_ok() => {
            return Err(Diagnostic::error("unknown-catalogue-name", problem.message));
        }
        Err(problem) => problem,
    };
    let entries = find(words);
    let sheets = sheets::matching(words);
    let rules = rules::matching(words);
    match &entries[..] {
        [] if !sheets.is_empty() => Ok(Found::Sheets(sheets)),
        [] if !rules.is_empty() => Ok(Found::Rules(rules)),
        [] => {
            let nearest: Vec<String> = no_section
                .nearest
                .iter()
                .chain(&no_material.nearest)
                .map(|name| format!("`{name}`"))
                .collect();
            let hint = if nearest.is_empty() {
                "`spanfolio catalogue` lists what there is".to_owned()
            } else {
                format!("nearest names: {}", nearest.join(", "))
            };
            let message = format!("nothing named `{name}` in the catalogue");
            Err(Diagnostic::error("unknown-catalogue-name", message).hint(hint))
        }
        [one] => Ok(match one {
            Entry::Section { designation, .. } => section(designation)
                .map_or(Found::Entries(entries.clone()), |found| Found::Section(Box::new(found))),
            Entry::Material { title, .. } => material(title, thickness)
                .map_or(Found::Entries(entries.clone()), |found| Found::Material(Box::new(found))),
        }),
        _ => Ok(Found::Entries(entries)),
    }
}

fn tables() -> String {
    let mut rows = Vec::new();
    for family in families() {
        let count = family.designations().len().to_string();
        rows.push(vec![family.name.to_owned(), count, family.title().to_owned()]);
    }
    let mut text = format!("Sections\n{}", columns(&rows));
    let rows: Vec<Vec<String>> = material_tables()
        .into_iter()
        .map(|(title, family, grades)| {
            vec![family.to_owned(), grades.len().to_string(), title.to_owned()]
        })
        .collect();
    text.push_str(&format!("\nMaterials\n{}", columns(&rows)));
    let all: Vec<&Sheet> = catalogue::sheets().iter().collect();
    text.push_str(&format!("\nCheck sheets\n{}", columns(&sheets::rows(&all))));
    text.push_str(&format!("\nCombination rules\n{}", columns(&rules::rows(&rules::all()))));
    text
}

fn one_section(section: &CatalogueSection, printer: &Printer) -> String {
    let mut rows = vec![vec![String::new(), "used".to_owned(), "in the table".to_owned()]];
    let mut left: Vec<&catalogue::Printed> = section.printed.iter().collect();
    let mut take = |symbol: &str| {
        let at = left.iter().position(|printed| printed.symbol == symbol)?;
        Some(left.remove(at))
    };
    // Sizes that the table holds are printed below with what else it holds.
    let dimensions = section.properties.dimensions.iter().filter(|(_, value)| **value > 0.0);
    for (symbol, value) in dimensions {
        let kind = if symbol == "slope" { Kind::Number } else { Kind::SectionLength };
        let table = take(symbol).map(in_table).unwrap_or_default();
        rows.push(vec![symbol.clone(), printer.with_unit(kind, *value), table]);
    }
    for (symbol, kind, value) in section.properties.by_symbol() {
        let table = take(symbol).map(in_table).unwrap_or_default();
        rows.push(vec![symbol.to_owned(), printer.with_unit(kind, value), table]);
    }
    for printed in left.into_iter().filter(|printed| printed.value.abs() > 0.0) {
        rows.push(vec![printed.symbol.clone(), String::new(), in_table(printed)]);
    }
    let mut text = format!("{}\n\n{}\n", section.designation, columns(&rows));
    let family = families().iter().find(|family| family.name == section.family);
    let mut notes = vec![("Source", section.source.clone())];
    if let Some(family) = family {
        notes.push(("Verified", family.verified().to_owned()));
        notes.push(("Axes", family.axes().to_owned()));
    }
    notes.extend(section.properties.methods.texts().map(|text| ("Method", text.to_owned())));
    for (head, note) in notes {
        text.push_str(&format!("{head}: {note}\n"));
    }
    text
}

fn in_table(printed: &catalogue::Printed) -> String {
    let computed = if printed.computed { " (computed)" } else { "" };
    let (power, unit) = match printed.unit.split_once(' ') {
        Some((factor, unit)) => (factor.replace("1e9", "×10⁹ ").replace("1e12", "×10¹² "), unit),
        None => (String::from(" "), printed.unit),
    };
    let label = parse_unit(unit).map_or_else(|_| String::new(), |unit| unit.label);
    format!("{}{power}{label}{computed}", printed.text).trim_end().to_owned()
}

fn one_material(material: &CatalogueMaterial, printer: &Printer) -> String {
    let mut rows = vec![
        vec!["E".to_owned(), printer.with_unit(Kind::Modulus, material.e)],
        vec!["G".to_owned(), printer.with_unit(Kind::Modulus, material.g)],
        vec!["density".to_owned(), printer.with_unit(Kind::MassDensity, material.density)],
        vec!["expansion".to_owned(), printer.with_unit(Kind::Expansion, material.expansion)],
    ];
    for (symbol, (value, kind)) in &material.strengths {
        rows.push(vec![symbol.clone(), printer.with_unit(*kind, *value)]);
    }
    format!(
        "{} ({})\n\n{}\nSource: {}\n",
        material.title,
        material.family,
        columns(&rows),
        material.source
    )
}

fn section_list(sections: &[CatalogueSection], printer: &Printer) -> String {
    let shown = [
        ("A", Kind::Area),
        ("I_y", Kind::SecondMoment),
        ("I_z", Kind::SecondMoment),
        ("W_el_y", Kind::SectionModulus),
    ];
    let heads =
        shown.iter().map(|(symbol, kind)| format!("{symbol} [{}]", printer.units.get(*kind).label));
    let mut rows = vec![std::iter::once(String::new()).chain(heads).collect()];
    for section in sections {
        let values = section.properties.by_symbol();
        let cell = |symbol: &str, kind| {
            values
                .iter()
                .find(|(name, ..)| *name == symbol)
                .map(|(_, _, value)| printer.number(kind, *value))
                .unwrap_or_default()
        };
        let cells = shown.iter().map(|(symbol, kind)| cell(symbol, *kind));
        rows.push(std::iter::once(section.designation.clone()).chain(cells).collect());
    }
    columns(&rows)
}

fn entry_list(entries: &[Entry], printer: &Printer) -> String {
    let mut found = Vec::new();
    let mut materials = Vec::new();
    for entry in entries {
        match entry {
            Entry::Section { designation, .. } => found.extend(section(designation)),
            Entry::Material { title, family } => {
                materials.push(vec![title.clone(), (*family).to_owned()]);
            }
        }
    }
    let mut parts = Vec::new();
    if !found.is_empty() {
        parts.push(section_list(&found, printer));
    }
    if !materials.is_empty() {
        parts.push(columns(&materials));
    }
    parts.join("\n")
}

/// Cells in columns two spaces apart.
fn columns(rows: &[Vec<String>]) -> String {
    let width = |i: usize| {
        rows.iter().filter_map(|row| row.get(i)).map(|cell| cell.chars().count()).max().unwrap_or(0)
    };
    let widths: Vec<usize> = (0..rows.iter().map(Vec::len).max().unwrap_or(0)).map(width).collect();
    let mut text = String::new();
    for row in rows {
        let line: String = row
            .iter()
            .zip(&widths)
            .map(|(cell, width)| {
                let gap = width + 2 - cell.chars().count();
                format!("{cell}{}", " ".repeat(gap))
            })
            .collect();
        text.push_str(line.trim_end_matches(' '));
        text.push('\n');
    }
    text
}

fn as_json(found: &Found) -> Value {
    match found {
        Found::Tables => json!({
            "sections": families().iter().map(|family| json!({
                "family": family.name,
                "title": family.title(),
                "source": family.source(),
                "designations": family.designations(),
            })).collect::<Vec<_>>(),
            "materials": material_tables().into_iter().map(|(title, family, grades)| json!({
                "family": family,
                "title": title,
                "grades": grades,
            })).collect::<Vec<_>>(),
            "checks": catalogue::sheets().iter().map(sheets::as_json).collect::<Vec<_>>(),
            "rules": rules::all().iter().map(|(set, rule)| rules::as_json(set, rule)).collect::<Vec<_>>(),
        }),
        Found::Rules(found) => json!({
            "rules": found.iter().map(|(set, rule)| rules::as_json(set, rule)).collect::<Vec<_>>(),
        }),
        Found::Sheets(found) => json!({
            "checks": found.iter().map(|sheet| sheets::as_json(sheet)).collect::<Vec<_>>(),
        }),
        Found::Family(family) => json!({
            "sections": catalogue::family(family.name)
                .unwrap_or_default()
                .iter()
                .map(section_json)
                .collect::<Vec<_>>(),
        }),
        Found::Section(section) => json!({ "sections": [section_json(section)] }),
        Found::Material(material) => json!({ "materials": [material_json(material)] }),
        Found::Entries(entries) => {
            let mut sections = Vec::new();
            let mut materials = Vec::new();
            for entry in entries {
                match entry {
                    Entry::Section { designation, .. } => {
                        sections.extend(section(designation).iter().map(section_json));
                    }
                    Entry::Material { title, .. } => {
                        materials.extend(material(title, None).iter().map(material_json));
                    }
                }
            }
            json!({ "sections": sections, "materials": materials })
        }
    }
}

fn section_json(section: &CatalogueSection) -> Value {
    let properties: Map<String, Value> = section
        .properties
        .by_symbol()
        .into_iter()
        .map(|(symbol, _, value)| (symbol.to_owned(), json!(value)))
        .collect();
    let printed: Map<String, Value> = section
        .printed
        .iter()
        .map(|printed| (printed.symbol.clone(), json!(printed.value)))
        .collect();
    json!({
        "designation": section.designation,
        "family": section.family,
        "properties": properties,
        "dimensions": section.properties.dimensions,
        "printed": printed,
        "source": section.source,
        "methods": section.properties.methods.texts().collect::<Vec<_>>(),
    })
}

fn material_json(material: &CatalogueMaterial) -> Value {
    let strengths: Map<String, Value> = material
        .strengths
        .iter()
        .map(|(symbol, (value, _))| (symbol.clone(), json!(value)))
        .collect();
    json!({
        "title": material.title,
        "family": material.family,
        "E": material.e,
        "G": material.g,
        "density": material.density,
        "expansion": material.expansion,
        "strengths": strengths,
        "source": material.source,
    })
}
