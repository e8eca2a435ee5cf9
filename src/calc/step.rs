//! One step of a calculation as a column of equations: symbol, formula, values put in, result.

use super::latex::latex;
use super::{Formula, Math};

/// A value as printed: number and unit, which may be empty.
pub type Shown = (String, String);

/// Wider lines, in widths of a digit, are broken before an operator.
const WIDEST: usize = 64;

/// LaTeX of the whole step, aligned at its equals signs; `symbol` is empty for what has no name.
#[must_use]
pub fn equations(
    symbol: &str,
    formula: &Formula,
    values: &[Shown],
    taken: &[usize],
    result: &Shown,
) -> String {
    let result = Math::Value(result.0.clone(), result.1.clone());
    let mut lines: Vec<Vec<Math>> = Vec::new();
    let symbols = formula.symbols();
    let put_in = formula.values_put_in(values, taken);
    if !formula.is_constant() {
        lines.push(broken(symbols.clone()));
    }
    // A formula that only names a value has nothing to put in.
    if put_in != symbols && put_in != result {
        lines.push(broken(put_in));
    }
    lines.push(vec![result]);
    let name = (!symbol.is_empty()).then(|| Math::Symbol(symbol.to_owned()));
    let total: usize = lines.iter().flatten().chain(&name).map(|part| width(part) + 3).sum();
    if total <= WIDEST {
        let parts = name.iter().chain(lines.iter().flatten()).map(latex);
        return parts.collect::<Vec<_>>().join(" = ");
    }
    let mut out = String::from("\\begin{aligned}\n");
    for (index, line) in lines.iter().enumerate() {
        match (index, &name) {
            (0, None) => out += "&",
            (0, Some(name)) => out += &format!("{} &= ", latex(name)),
            _ => out += "&= ",
        }
        for (part, math) in line.iter().enumerate() {
            if part > 0 {
                out += " \\\\\n&\\quad ";
            }
            out += &latex(math);
        }
        out += if index + 1 < lines.len() { " \\\\\n" } else { "\n" };
    }
    out + "\\end{aligned}"
}

/// A sum, product or condition that is too wide, cut before its operators.
fn broken(math: Math) -> Vec<Math> {
    let Math::Row(parts) = math else { return vec![math] };
    if parts.iter().map(width).sum::<usize>() <= WIDEST {
        return vec![Math::Row(parts)];
    }
    let mut lines = Vec::new();
    let mut line = Vec::new();
    let mut so_far = 0;
    let mut parts = parts.into_iter().peekable();
    while let Some(part) = parts.next() {
        let cuts =
            matches!(part, Math::Sign("+" | "-" | "·" | "∧" | "∨" | "<" | ">" | "≤" | "≥" | "="));
        let ahead = width(&part) + parts.peek().map_or(0, width);
        if cuts && so_far + ahead > WIDEST && !line.is_empty() {
            lines.push(Math::Row(std::mem::take(&mut line)));
            so_far = 0;
        }
        so_far += width(&part);
        line.push(part);
    }
    lines.push(Math::Row(line));
    lines
}

/// About how many digits wide.
fn width(math: &Math) -> usize {
    match math {
        Math::Symbol(name) => 1 + name.chars().count() / 2,
        Math::Value(number, unit) => number.chars().count() + unit.chars().count() + 1,
        Math::Text(text) => text.chars().count(),
        Math::Sign(_) => 3,
        Math::Row(parts) => parts.iter().map(width).sum(),
        Math::Brackets(inner)
        | Math::Root(inner)
        | Math::Absolute(inner)
        | Math::Floor(inner)
        | Math::Ceil(inner) => width(inner) + 2,
        Math::Fraction(above, below) => width(above).max(width(below)),
        Math::Power(base, exponent) => width(base) + width(exponent).div_ceil(2),
        Math::Named(name, inner) => name.len() + width(inner) + 2,
        Math::Cases(rows) => rows
            .iter()
            .map(|(value, condition)| width(value) + width(condition) + 4)
            .max()
            .unwrap_or_default(),
    }
}
