//! Materials by grade.

use indexmap::IndexMap;

use super::NotFound;
use super::names::{key, nearest};
use super::table::{Row, Table};
use crate::quantity::Kind;

/// A material of a table, SI.
#[derive(Clone, Debug, PartialEq)]
pub struct CatalogueMaterial {
    /// The grade as in the table, with its product where a grade stands for several.
    pub title: String,
    /// `steel`, `timber`, `aluminium` or `concrete`.
    pub family: String,
    /// Young's modulus (mean, along the grain), Pa.
    pub e: f64,
    /// Shear modulus, Pa.
    pub g: f64,
    /// kg/m³.
    pub density: f64,
    /// 1/K.
    pub expansion: f64,
    /// By symbol (`f_y`, `f_m_k`, …), with what they are; for the thickness stated in the source.
    pub strengths: IndexMap<String, (f64, Kind)>,
    pub source: String,
    /// Greatest thickness at which the strengths hold, m; `None` where they do not depend on it.
    pub up_to: Option<f64>,
}

/// m; where no thickness is stated, strengths are those for this one.
const USUAL_THICKNESS: f64 = 0.040;

/// Columns that are no strengths.
const CONSTANTS: [&str; 4] = ["E", "G", "density", "expansion"];

static TABLES: [&str; 10] = [
    include_str!("../../catalogue/materials/steel-en.csv"),
    include_str!("../../catalogue/materials/steel-en-product.csv"),
    include_str!("../../catalogue/materials/steel-us.csv"),
    include_str!("../../catalogue/materials/timber-softwood.csv"),
    include_str!("../../catalogue/materials/timber-hardwood.csv"),
    include_str!("../../catalogue/materials/glulam.csv"),
    include_str!("../../catalogue/materials/timber-us.csv"),
    include_str!("../../catalogue/materials/aluminium-en.csv"),
    include_str!("../../catalogue/materials/aluminium-us.csv"),
    include_str!("../../catalogue/materials/concrete-en.csv"),
];

/// Title, family and grades (with product where needed to tell them apart) of every table.
#[must_use]
pub fn material_tables() -> Vec<(&'static str, &'static str, Vec<String>)> {
    TABLES
        .iter()
        .map(|text| {
            let table = Table::new(text);
            let titles = table.rows().map(|row| title(&table, &row)).collect();
            (table.note("title"), table.note("family"), titles)
        })
        .collect()
}

/// The material of a grade, e.g. `S275`, `S355JR`, `S460NL`, `C24`, `GL28h`, `A500 Gr C`,
/// `A500 Gr C HSS round`, `C30/37`. `thickness` (m) chooses strengths that depend on it; without it
/// they are those for 40 mm or, where the table ends before, its least. A grade that stands for
/// several products without naming one gives the weakest.
///
/// # Errors
/// With the nearest grades when there is none, or when the table gives no strength at that thickness.
pub fn material(grade: &str, thickness: Option<f64>) -> Result<CatalogueMaterial, NotFound> {
    let wanted = key(grade);
    // Impact classes of EN 10025-2 and EN 10210-1 share the strengths of their grade.
    let plain = ["JR", "J0", "J2", "K2"].iter().fold(wanted.clone(), |name, class| {
        if name.starts_with('S') { name.replacen(class, "", 1) } else { name }
    });
    for text in TABLES {
        let table = Table::new(text);
        for wanted in [&wanted, &plain] {
            let rows: Vec<Row<'_>> = table.rows().filter(|row| answers(row, wanted)).collect();
            if rows.is_empty() {
                continue;
            }
            let found: Vec<CatalogueMaterial> =
                rows.iter().filter_map(|row| read(&table, row, thickness)).collect();
            // Earlier rows win a tie.
            return found
                .into_iter()
                .reduce(
                    |weakest, other| {
                        if leading(&other) < leading(&weakest) { other } else { weakest }
                    },
                )
                .ok_or_else(|| NotFound {
                    message: format!(
                        "the table of `{}` gives no strength at a thickness of {} mm",
                        grade.trim(),
                        thickness.unwrap_or(USUAL_THICKNESS) * 1000.0
                    ),
                    nearest: Vec::new(),
                });
        }
    }
    let grades = TABLES.iter().flat_map(|text| Table::new(text).names().collect::<Vec<_>>());
    Err(NotFound {
        message: format!("no material of grade `{}` in the catalogue", grade.trim()),
        nearest: nearest(grade, grades),
    })
}

/// Whether a row is meant by a key: its grade, one of the grades it stands for (`S460N/NL`), or
/// its grade and product or the last word of it.
fn answers(row: &Row<'_>, wanted: &str) -> bool {
    let grade = key(row.name());
    let product = row.text("product");
    let last = product.rsplit(' ').next().unwrap_or_default();
    if grade == wanted
        || format!("{grade}{}", key(product)) == wanted
        || format!("{grade}{}", key(last)) == wanted
    {
        return true;
    }
    let mut parts = grade.split('/');
    let first = parts.next().unwrap_or_default();
    let base = first.trim_end_matches(|c: char| c.is_ascii_uppercase());
    // `C30/37` is one grade: its second part is no suffix.
    let suffixes: Vec<&str> = parts.collect();
    !suffixes.is_empty()
        && suffixes.iter().all(|suffix| suffix.starts_with(|c: char| c.is_ascii_uppercase()))
        && (first == wanted || suffixes.iter().any(|suffix| format!("{base}{suffix}") == wanted))
}

fn title(table: &Table, row: &Row<'_>) -> String {
    let several = table.rows().filter(|other| other.name() == row.name()).count() > 1;
    let product = row.text("product");
    if several { format!("{} {product}", row.name()) } else { row.name().to_owned() }
}

fn leading(material: &CatalogueMaterial) -> f64 {
    material.strengths.first().map_or(f64::INFINITY, |(_, (value, _))| *value)
}

/// `None` where the row has no strength at this thickness.
fn read(table: &Table, row: &Row<'_>, thickness: Option<f64>) -> Option<CatalogueMaterial> {
    let mut strengths: IndexMap<String, (f64, Kind)> = IndexMap::new();
    let mut limits: IndexMap<String, Vec<(f64, f64)>> = IndexMap::new();
    for printed in row.printed().filter(|printed| !CONSTANTS.contains(&printed.symbol.as_str())) {
        let kind = printed.kind.unwrap_or(Kind::Number);
        match printed.symbol.split_once(" t<=") {
            None => {
                strengths.insert(printed.symbol, (printed.value, kind));
            }
            Some((symbol, limit)) => {
                let limit = limit.parse::<f64>().ok()? / 1000.0;
                limits.entry(symbol.to_owned()).or_default().push((limit, printed.value));
                // Keeps the place in the order of columns; the value follows.
                strengths.entry(symbol.to_owned()).or_insert((printed.value, kind));
            }
        }
    }
    let asked = thickness.unwrap_or(USUAL_THICKNESS);
    let mut range = None;
    let mut up_to = None;
    for (symbol, values) in &limits {
        // Round-off of a thickness converted from inches must not push it over a limit.
        let fits = values.iter().find(|(limit, _)| asked <= limit * (1.0 + 1e-9));
        let least = || values.iter().min_by(|a, b| a.1.total_cmp(&b.1));
        let (limit, value) = match (fits, thickness) {
            (Some(fits), _) => fits,
            (None, None) => least()?,
            (None, Some(_)) => return None,
        };
        range.get_or_insert(*limit);
        // Beyond the table its least value stands in.
        let last = values.iter().map(|(limit, _)| *limit).fold(0.0, f64::max);
        up_to.get_or_insert(if fits.is_some() { *limit } else { last });
        strengths.get_mut(symbol)?.0 = *value;
    }
    let mut source = table.note("source").to_owned();
    if !row.text("product").is_empty() {
        source = format!("{}: {source}", row.text("product"));
    }
    if let Some(limit) = range {
        source.push_str(&format!("; strengths for thickness up to {} mm", limit * 1000.0));
    }
    for note in [table.note("note"), row.text("note")] {
        if !note.is_empty() {
            source.push_str("; ");
            source.push_str(note);
        }
    }
    Some(CatalogueMaterial {
        title: title(table, row),
        family: table.note("family").to_owned(),
        e: row.number("E")?,
        g: row.number("G")?,
        density: row.number("density")?,
        expansion: row.number("expansion")?,
        strengths,
        source,
        up_to,
    })
}
