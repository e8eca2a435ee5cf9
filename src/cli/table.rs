//! Columns for the terminal.

/// Where a column's cells stand.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Align {
    Left,
    Right,
}

/// Rows under a head, cells padded to the widest of their column.
#[derive(Debug)]
pub(super) struct Table {
    columns: Vec<Align>,
    rows: Vec<Vec<String>>,
}

impl Table {
    pub(super) fn new(head: &[(&str, Align)]) -> Self {
        Self {
            columns: head.iter().map(|(_, align)| *align).collect(),
            rows: vec![head.iter().map(|(title, _)| (*title).to_owned()).collect()],
        }
    }

    pub(super) fn row(&mut self, cells: Vec<String>) {
        self.rows.push(cells);
    }

    pub(super) fn is_empty(&self) -> bool {
        self.rows.len() == 1
    }

    /// The lines, each ended, with an indent of two.
    pub(super) fn print(&self) -> String {
        let width = |column: usize| {
            self.rows.iter().map(|row| row[column].chars().count()).max().unwrap_or_default()
        };
        let widths: Vec<usize> = (0..self.columns.len()).map(width).collect();
        let mut out = String::new();
        for row in &self.rows {
            let mut line = String::new();
            for ((cell, align), width) in row.iter().zip(&self.columns).zip(&widths) {
                let padding = " ".repeat(width - cell.chars().count());
                let cell = match align {
                    Align::Left => format!("{cell}{padding}"),
                    Align::Right => format!("{padding}{cell}"),
                };
                line = format!("{line}  {cell}");
            }
            out += line.trim_end();
            out.push('\n');
        }
        out
    }
}
