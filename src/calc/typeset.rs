//! A formula as mathematics, in a neutral tree: with symbols, or with the values put in.

use super::Function;
use super::expression::{Argument, Binary, Expr, ExprKind, Formula, Reading};
use crate::quantity::parse_unit;

/// Mathematics, free of any markup.
#[derive(Clone, Debug, PartialEq)]
pub enum Math {
    /// A symbol with its indices: `W_el_y` is W with `el`, `y`.
    Symbol(String),
    /// A number, printed or as written in the formula, with its unit, which may be empty.
    Value(String, String),
    Text(String),
    /// An operator or relation, in one spelling: `+ - · < ≤ = ≠ ∧ ∨ ¬ ,`.
    Sign(&'static str),
    Row(Vec<Math>),
    Brackets(Box<Math>),
    Fraction(Box<Math>, Box<Math>),
    Power(Box<Math>, Box<Math>),
    Root(Box<Math>),
    Absolute(Box<Math>),
    Floor(Box<Math>),
    Ceil(Box<Math>),
    Named(&'static str, Box<Math>),
    /// Values with their conditions.
    Cases(Vec<(Math, Math)>),
}

impl Formula {
    /// With symbols.
    #[must_use]
    pub fn symbols(&self) -> Math {
        Set { readings: &self.readings, values: None }.math(&self.root, 0)
    }

    /// With the values of its readings put in, printed as (number, unit), and only the branches that were
    /// taken.
    #[must_use]
    pub fn values_put_in(&self, values: &[(String, String)], taken: &[usize]) -> Math {
        let values = Some((values, taken.iter().copied()));
        Set { readings: &self.readings, values }.math(&self.root, 0)
    }

    /// There is something to put in.
    #[must_use]
    pub fn is_constant(&self) -> bool {
        self.readings.is_empty() && matches!(self.root.kind, ExprKind::Quantity { .. })
    }
}

type PutIn<'f> = (&'f [(String, String)], std::iter::Copied<std::slice::Iter<'f, usize>>);

struct Set<'f> {
    readings: &'f [Reading],
    values: Option<PutIn<'f>>,
}

/// Binding strengths, as of [`Binary::level`].
const PRODUCT: u8 = 6;
const POWER: u8 = 8;

impl Set<'_> {
    /// The expression where its surroundings bind at `level`.
    fn math(&mut self, expr: &Expr, level: u8) -> Math {
        match &expr.kind {
            ExprKind::Quantity { number, unit, .. } => {
                // `kN/m2` is set as `kN/m²`.
                let label = parse_unit(unit).map_or_else(|_| unit.clone(), |unit| unit.label);
                let raised = number.contains(['e', 'E']);
                let needed = level >= POWER && (!unit.is_empty() || raised);
                bracketed(Math::Value(number.clone(), label), needed)
            }
            ExprKind::Pi => Math::Symbol("pi".to_owned()),
            ExprKind::Word(word) => Math::Text(word.clone()),
            ExprKind::Read(index) => self.reading(*index, level),
            ExprKind::Negate(inner) => {
                let row = Math::Row(vec![Math::Sign("-"), self.math(inner, 7)]);
                bracketed(row, level > PRODUCT)
            }
            ExprKind::Not(inner) => Math::Row(vec![Math::Sign("¬"), self.math(inner, 7)]),
            ExprKind::Binary(Binary::Divide, left, right) => {
                let fraction =
                    Math::Fraction(Box::new(self.math(left, 0)), Box::new(self.math(right, 0)));
                bracketed(fraction, level >= POWER)
            }
            ExprKind::Binary(Binary::Power, base, exponent) => {
                let power =
                    Math::Power(Box::new(self.math(base, POWER)), Box::new(self.math(exponent, 0)));
                bracketed(power, level >= POWER)
            }
            ExprKind::Binary(binary, left, right) => self.binary(*binary, left, right, level),
            ExprKind::Call(function, arguments) => self.call(*function, arguments),
            ExprKind::ValueIn(inner, unit) => {
                let inner = self.math(inner, 0);
                let below = Math::Value("1".to_owned(), unit.label.clone());
                bracketed(Math::Fraction(Box::new(inner), Box::new(below)), level >= POWER)
            }
            ExprKind::If { condition, then, otherwise } => {
                let Some(branch) = self.taken() else {
                    let cases = vec![
                        (self.math(then, 0), self.math(condition, 0)),
                        (self.math(otherwise, 0), Math::Text("otherwise".to_owned())),
                    ];
                    return bracketed(Math::Cases(cases), level > 0);
                };
                // Only what follows is put in; branches inside conditions are not recorded.
                self.math(if branch == 0 { then } else { otherwise }, level)
            }
            ExprKind::Interpolate(at, rows) => {
                let at = self.math(at, 0);
                let mut row = vec![at];
                for [x, y] in rows {
                    row.push(Math::Sign(";"));
                    row.push(self.math(x, 0));
                    row.push(Math::Sign("→"));
                    row.push(self.math(y, 0));
                }
                Math::Named("interpolate", Box::new(Math::Row(row)))
            }
            ExprKind::Choose(of, rows) => {
                if let Some(row) = self.taken().and_then(|branch| rows.get(branch)) {
                    return self.math(&row[1], level);
                }
                let of = self.math(of, 4);
                let mut cases = Vec::new();
                for [key, value] in rows {
                    let key = self.math(key, 4);
                    let equals = Math::Row(vec![of.clone(), Math::Sign("="), key]);
                    cases.push((self.math(value, 0), equals));
                }
                bracketed(Math::Cases(cases), level > 0)
            }
        }
    }

    fn binary(&mut self, binary: Binary, left: &Expr, right: &Expr, level: u8) -> Math {
        let own = binary.level();
        let first = self.math(left, own);
        // What is subtracted keeps its brackets: a - (b + c).
        // So does what has a sign of its own: a - (-b).
        let signed = own >= 5 && matches!(right.kind, ExprKind::Negate(_));
        let second = self.math(right, if signed { POWER } else { own + 1 });
        let sign = match binary {
            Binary::Add => "+",
            Binary::Subtract => "-",
            Binary::Multiply => "·",
            Binary::Less => "<",
            Binary::LessOrEqual => "≤",
            Binary::Greater => ">",
            Binary::GreaterOrEqual => "≥",
            Binary::NotEqual => "≠",
            Binary::And => "∧",
            Binary::Or => "∨",
            Binary::Equal | Binary::Divide | Binary::Power => "=",
        };
        let mut row = match first {
            Math::Row(row) if own <= 5 && !matches!(left.kind, ExprKind::Negate(_)) => row,
            other => vec![other],
        };
        row.extend([Math::Sign(sign), second]);
        bracketed(Math::Row(row), level > own)
    }

    fn call(&mut self, function: Function, arguments: &[Expr]) -> Math {
        let mut row = Vec::new();
        for (index, argument) in arguments.iter().enumerate() {
            if index > 0 {
                row.push(Math::Sign(","));
            }
            row.push(self.math(argument, 0));
        }
        let inner = Box::new(if row.len() == 1 { row.swap_remove(0) } else { Math::Row(row) });
        match function {
            Function::Sqrt => Math::Root(inner),
            Function::Abs => Math::Absolute(inner),
            Function::Floor => Math::Floor(inner),
            Function::Ceil => Math::Ceil(inner),
            other => Math::Named(other.name(), inner),
        }
    }

    fn reading(&mut self, index: usize, level: u8) -> Math {
        match &self.values {
            None => symbol(&self.readings[index]),
            Some((values, _)) => {
                let (number, unit) = values[index].clone();
                if number.starts_with(char::is_alphabetic) {
                    return Math::Text(number);
                }
                let inside = number.starts_with('\u{2212}') && level >= 5
                    || level >= POWER && !unit.is_empty()
                    || level >= PRODUCT && number.contains('×');
                bracketed(Math::Value(number, unit), inside)
            }
        }
    }

    /// The next branch taken, where values are put in.
    fn taken(&mut self) -> Option<usize> {
        self.values.as_mut().and_then(|(_, taken)| taken.next())
    }
}

fn bracketed(math: Math, needed: bool) -> Math {
    if needed { Math::Brackets(Box::new(math)) } else { math }
}

/// A name is a symbol. A call that names a thing and one of its values, as `effect('B1', 'M_y', 'max', …)`
/// does, is set as that value's symbol with the thing behind it: M_y,max (B1, …).
fn symbol(reading: &Reading) -> Math {
    let Some(arguments) = &reading.arguments else { return Math::Symbol(reading.name.clone()) };
    let plain: Vec<&str> = arguments
        .iter()
        .filter_map(|(key, argument)| match (key, argument) {
            (None, Argument::Text(text)) => Some(text.as_str()),
            _ => None,
        })
        .collect();
    let (symbol, named) = match plain.as_slice() {
        [_, of, rest @ ..] => {
            let letter = match reading.name.as_str() {
                "reaction" => "R_",
                "displacement" => "u_",
                _ => "",
            };
            let index = rest.first().map(|which| format!("_{which}")).unwrap_or_default();
            (Math::Symbol(format!("{letter}{of}{index}")), 1 + rest.len())
        }
        _ => (Math::Text(reading.name.clone()), 0),
    };
    let mut inner = Vec::new();
    for (place, (key, argument)) in arguments.iter().enumerate() {
        if (1..=named).contains(&place) && key.is_none() {
            continue;
        }
        if !inner.is_empty() {
            inner.push(Math::Sign(","));
        }
        if let (Some(key), Argument::Quantity(_)) = (key, argument) {
            inner.push(Math::Text(format!("{key} ")));
        }
        inner.push(match argument {
            Argument::Name(name) => Math::Symbol(name.clone()),
            Argument::Text(text) => Math::Text(text.clone()),
            Argument::Quantity(quantity) => Math::Value(
                crate::quantity::print(quantity.value, 6),
                quantity.dimension.base_units(),
            ),
        });
    }
    Math::Row(vec![symbol, Math::Brackets(Box::new(Math::Row(inner)))])
}
