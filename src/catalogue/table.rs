//! Reading one embedded table.
//!
//! Lines `# key: text` come first, then one line of column heads, then the rows. Cells are parted by
//! commas and not quoted. The head of a number is `symbol [unit]`, with `computed` behind the symbol
//! where the value was computed rather than tabulated; a head without a unit is text. An empty cell
//! is no value.

use crate::quantity::{Dimension, Kind, Quantity, parse};

/// A table with its heads read and its rows still text.
pub(super) struct Table {
    text: &'static str,
    columns: Vec<Column>,
}

struct Column {
    /// Without the unit and the word `computed`.
    symbol: &'static str,
    /// `None`: text.
    unit: Option<(&'static str, Quantity)>,
    computed: bool,
}

/// One row.
pub(super) struct Row<'t> {
    table: &'t Table,
    cells: Vec<&'static str>,
}

/// A value as the table gives it.
#[derive(Clone, Debug, PartialEq)]
pub struct Printed {
    /// E.g. `W_pl_y`.
    pub symbol: String,
    /// As it stands in the table, in the table's unit.
    pub text: String,
    /// In SI base units.
    pub value: f64,
    /// As it stands in the table, e.g. `cm4`.
    pub unit: &'static str,
    /// `None`: a mass per length, which prints in the unit of the table.
    pub kind: Option<Kind>,
    /// Computed for the table, not tabulated by its source.
    pub computed: bool,
}

impl Table {
    pub(super) fn new(text: &'static str) -> Self {
        let heads = text.lines().find(|line| !line.starts_with('#')).unwrap_or_default();
        Self { text, columns: heads.split(',').map(Column::new).collect() }
    }

    /// Text behind `# key:`, empty where there is none.
    pub(super) fn note(&self, key: &str) -> &'static str {
        self.text
            .lines()
            .take_while(|line| line.starts_with('#'))
            .find_map(|line| line.strip_prefix("# ")?.strip_prefix(key)?.strip_prefix(": "))
            .unwrap_or_default()
    }

    pub(super) fn rows(&self) -> impl Iterator<Item = Row<'_>> {
        self.text
            .lines()
            .filter(|line| !line.starts_with('#') && !line.is_empty())
            .skip(1)
            .map(|line| Row { table: self, cells: line.split(',').collect() })
    }

    /// First cells of all rows.
    pub(super) fn names(&self) -> impl Iterator<Item = String> {
        self.rows().map(|row| row.name().to_owned())
    }
}

impl Column {
    fn new(head: &'static str) -> Self {
        let (name, unit) = match head.split_once(" [") {
            Some((name, unit)) => (name, Some(unit.trim_end_matches(']'))),
            None => (head, None),
        };
        let symbol = name.trim_end_matches(" computed");
        let unit = unit.map(|unit| {
            // A unit may carry a factor of its own, as `1e9 mm6`.
            let one = if unit.starts_with(|c: char| c.is_ascii_digit()) { "" } else { "1 " };
            let quantity = parse(&format!("{one}{unit}"));
            (unit, quantity.expect("the units of the tables are tested"))
        });
        Self { symbol, unit, computed: symbol.len() < name.len() }
    }
}

impl<'t> Row<'t> {
    /// The first cell: designation or grade.
    pub(super) fn name(&self) -> &'static str {
        self.cells.first().copied().unwrap_or_default()
    }

    /// A cell of text.
    pub(super) fn text(&self, symbol: &str) -> &'static str {
        let column = self.table.columns.iter().position(|column| column.symbol == symbol);
        column.and_then(|i| self.cells.get(i)).copied().unwrap_or_default()
    }

    /// A number in SI base units.
    pub(super) fn number(&self, symbol: &str) -> Option<f64> {
        self.printed().find(|printed| printed.symbol == symbol).map(|printed| printed.value)
    }

    /// All numbers of the row.
    pub(super) fn printed(&self) -> impl Iterator<Item = Printed> + use<'t, '_> {
        self.table.columns.iter().zip(&self.cells).filter_map(|(column, cell)| {
            let (label, unit) = column.unit?;
            let number: f64 = cell.parse().ok()?;
            Some(Printed {
                symbol: column.symbol.to_owned(),
                text: (*cell).to_owned(),
                value: number * unit.value,
                unit: label,
                kind: kind(column.symbol, unit.dimension),
                computed: column.computed,
            })
        })
    }
}

/// What a value of a table is, for printing.
fn kind(symbol: &str, dimension: Dimension) -> Option<Kind> {
    let kinds = [
        Kind::SectionLength,
        Kind::Area,
        Kind::SecondMoment,
        Kind::SectionModulus,
        Kind::Warping,
        Kind::MassDensity,
        Kind::Expansion,
        Kind::LineLoad,
        Kind::Number,
    ];
    if dimension == Dimension::PRESSURE {
        // E_05, G_mean and the like are moduli, all else strengths.
        let modulus = symbol.starts_with(['E', 'G']);
        return Some(if modulus { Kind::Modulus } else { Kind::Stress });
    }
    kinds.into_iter().find(|kind| kind.dimension() == dimension)
}
