//! The value of a formula, dimensions checked at every operation.

use std::sync::Arc;

use super::dimensions::{raised, usable};
use super::expression::{Binary, Expr, ExprKind, Formula};
use super::{CalcError, Function};
use crate::quantity::{Dimension, Quantity};

/// What a reading or a result is.
#[derive(Clone, Debug, PartialEq)]
pub enum Value {
    /// A quantity; of angles the dimension is dropped.
    Number(Quantity),
    Truth(bool),
    Word(Arc<str>),
}

/// A value with the branches taken on the way to it.
#[derive(Clone, Debug, PartialEq)]
pub struct Evaluation {
    pub value: Value,
    /// Which branch of each conditional and row of each `choose` was taken, in order of evaluation;
    /// those inside conditions, which are not shown with values, left out.
    pub taken: Vec<usize>,
    /// Where the formula may jump or bend, in order of evaluation.
    pub turns: Vec<Turn>,
}

/// What decides on which smooth branch a formula is.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Turn {
    /// A comparison: whether it holds, and the left value less the right one, SI.
    Compared { holds: bool, margin: f64 },
    /// The result of `floor`, `ceil` or `sign`, or the row of a `choose`.
    Step(f64),
}

impl Turn {
    /// Both lie on the same branch.
    #[must_use]
    pub fn is_same(self, other: Self) -> bool {
        match (self, other) {
            (Self::Compared { holds, .. }, Self::Compared { holds: other, .. }) => holds == other,
            (Self::Step(one), Self::Step(other)) => one.total_cmp(&other).is_eq(),
            _ => false,
        }
    }
}

impl Value {
    /// A quantity; radians become plain numbers.
    #[must_use]
    pub fn number(value: f64, dimension: Dimension) -> Self {
        Self::Number(Quantity { value, dimension: Dimension { angle: 0, ..dimension } })
    }

    /// A word, e.g. a load duration.
    #[must_use]
    pub fn word(text: &str) -> Self {
        Self::Word(text.into())
    }

    fn what(&self) -> String {
        match self {
            Self::Number(quantity) => quantity.dimension.name_with_article(),
            Self::Truth(_) => "a truth value".to_owned(),
            Self::Word(word) => format!("the word `{word}`"),
        }
    }
}

impl Formula {
    /// The value for the values of its readings, in their order.
    ///
    /// # Errors
    /// Dimensions that do not go together, a result that is not a finite number, a look-up outside its
    /// rows; at the place in the formula.
    pub fn evaluate(&self, readings: &[Value]) -> Result<Evaluation, CalcError> {
        let mut run = Run { readings, taken: Vec::new(), turns: Vec::new() };
        let value = run.value(&self.root)?;
        if let Value::Number(quantity) = &value {
            self.printable(*quantity)?;
        }
        Ok(Evaluation { value, taken: run.taken, turns: run.turns })
    }

    /// The value where it must be a quantity.
    ///
    /// # Errors
    /// As [`Formula::evaluate`], and where the result is a truth value or a word.
    pub fn quantity(&self, readings: &[Value]) -> Result<Quantity, CalcError> {
        quantity_of(&self.root, &self.evaluate(readings)?.value)
    }

    /// [`Formula::quantity`], with what decides on its branch.
    ///
    /// # Errors
    /// As [`Formula::quantity`].
    pub fn traced(&self, readings: &[Value]) -> Result<(Quantity, Vec<Turn>), CalcError> {
        let evaluation = self.evaluate(readings)?;
        Ok((quantity_of(&self.root, &evaluation.value)?, evaluation.turns))
    }

    /// The result can be printed in the unit stated for it.
    fn printable(&self, quantity: Quantity) -> Result<(), CalcError> {
        match &self.unit {
            Some(unit) if unit.dimension != quantity.dimension => {
                let what = quantity.dimension.name_with_article();
                let message = format!("the result is {what}, which has no value in {}", unit.label);
                Err(CalcError::new(message, self.root.range.clone()))
            }
            _ => Ok(()),
        }
    }

    /// The value where it must be true or false, with what decides on it.
    ///
    /// # Errors
    /// As [`Formula::evaluate`], and where the result is a quantity or a word.
    pub fn truth(&self, readings: &[Value]) -> Result<(bool, Vec<Turn>), CalcError> {
        let mut run = Run { readings, taken: Vec::new(), turns: Vec::new() };
        let truth = run.truth(&self.root)?;
        Ok((truth, run.turns))
    }
}

struct Run<'v> {
    readings: &'v [Value],
    taken: Vec<usize>,
    turns: Vec<Turn>,
}

impl Run<'_> {
    fn value(&mut self, expr: &Expr) -> Result<Value, CalcError> {
        Ok(match &expr.kind {
            ExprKind::Quantity { quantity, .. } => Value::Number(*quantity),
            ExprKind::Pi => Value::number(std::f64::consts::PI, Dimension::NONE),
            ExprKind::Word(word) => Value::word(word),
            ExprKind::Read(index) => match &self.readings[*index] {
                Value::Number(quantity) => Value::Number(finite(expr, *quantity)?),
                other => other.clone(),
            },
            ExprKind::Negate(inner) => {
                let inner = self.quantity(inner)?;
                Value::Number(Quantity { value: -inner.value, ..inner })
            }
            ExprKind::Not(inner) => Value::Truth(!self.truth(inner)?),
            ExprKind::Binary(Binary::And, left, right) => {
                Value::Truth(self.truth(left)? && self.truth(right)?)
            }
            ExprKind::Binary(Binary::Or, left, right) => {
                Value::Truth(self.truth(left)? || self.truth(right)?)
            }
            ExprKind::Binary(binary, left, right) => self.binary(expr, *binary, left, right)?,
            ExprKind::Call(function, arguments) => {
                Value::Number(self.call(expr, *function, arguments)?)
            }
            ExprKind::ValueIn(inner, unit) => {
                let quantity = self.quantity(inner)?;
                if quantity.dimension != unit.dimension {
                    let message = format!(
                        "{} has no value in {}",
                        quantity.dimension.name_with_article(),
                        unit.label
                    );
                    return Err(CalcError::new(message, expr.range.clone()));
                }
                Value::number(quantity.value / unit.factor, Dimension::NONE)
            }
            ExprKind::If { condition, then, otherwise } => {
                let holds = self.truth(condition)?;
                self.taken.push(usize::from(!holds));
                self.value(if holds { then } else { otherwise })?
            }
            ExprKind::Interpolate(at, rows) => Value::Number(self.interpolated(expr, at, rows)?),
            ExprKind::Choose(of, rows) => self.chosen(expr, of, rows)?,
        })
    }

    fn quantity(&mut self, expr: &Expr) -> Result<Quantity, CalcError> {
        let value = self.value(expr)?;
        quantity_of(expr, &value)
    }

    fn truth(&mut self, expr: &Expr) -> Result<bool, CalcError> {
        match self.unrecorded(expr)? {
            Value::Truth(truth) => Ok(truth),
            other => {
                let message = format!("this is {}, expected a condition", other.what());
                Err(CalcError::new(message, expr.range.clone()).hint("compare it with something"))
            }
        }
    }

    fn unrecorded(&mut self, expr: &Expr) -> Result<Value, CalcError> {
        let before = self.taken.len();
        let value = self.value(expr);
        self.taken.truncate(before);
        value
    }

    fn binary(
        &mut self,
        expr: &Expr,
        binary: Binary,
        left: &Expr,
        right: &Expr,
    ) -> Result<Value, CalcError> {
        let (a, b) = (self.value(left)?, self.value(right)?);
        if let (Binary::Equal | Binary::NotEqual, Value::Word(a), Value::Word(b)) = (binary, &a, &b)
        {
            return Ok(Value::Truth((a == b) == (binary == Binary::Equal)));
        }
        let (a, b) = (quantity_of(left, &a)?, quantity_of(right, &b)?);
        let number = |value, dimension: Dimension| {
            if !usable(dimension) {
                let message = format!("a {} is beyond any use", dimension.name());
                return Err(CalcError::new(message, expr.range.clone()));
            }
            finite(expr, Quantity { value, dimension }).map(Value::Number)
        };
        match binary {
            Binary::Multiply => number(a.value * b.value, a.dimension * b.dimension),
            Binary::Divide if b.value == 0.0 => {
                Err(CalcError::new("this divides by zero", right.range.clone()))
            }
            Binary::Divide => number(a.value / b.value, a.dimension / b.dimension),
            Binary::Power => power(expr, left, right, a, b).map(Value::Number),
            _ => {
                let dimension = same(expr, binary.sign(), &[(left, a), (right, b)])?;
                let holds = match binary {
                    Binary::Add => return number(a.value + b.value, dimension),
                    Binary::Subtract => return number(a.value - b.value, dimension),
                    Binary::Less => a.value < b.value,
                    Binary::LessOrEqual => a.value <= b.value,
                    Binary::Greater => a.value > b.value,
                    Binary::GreaterOrEqual => a.value >= b.value,
                    Binary::Equal => equal(a.value, b.value),
                    _ => !equal(a.value, b.value),
                };
                self.turns.push(Turn::Compared { holds, margin: a.value - b.value });
                Ok(Value::Truth(holds))
            }
        }
    }

    fn call(
        &mut self,
        expr: &Expr,
        function: Function,
        arguments: &[Expr],
    ) -> Result<Quantity, CalcError> {
        let values: Vec<Quantity> =
            arguments.iter().map(|argument| self.quantity(argument)).collect::<Result<_, _>>()?;
        let (first, x) = (&arguments[0], values[0]);
        let plain = |value: f64| Quantity { value, dimension: Dimension::NONE };
        let result = match function {
            Function::Min | Function::Max => {
                let both: Vec<(&Expr, Quantity)> =
                    arguments.iter().zip(values.iter().copied()).collect();
                let dimension = same(expr, function.name(), &both)?;
                let of = values.iter().map(|quantity| quantity.value);
                let value = match function {
                    Function::Min => of.fold(f64::INFINITY, f64::min),
                    _ => of.fold(f64::NEG_INFINITY, f64::max),
                };
                Quantity { value, dimension }
            }
            Function::Abs => Quantity { value: x.value.abs(), ..x },
            Function::Sign => plain(if x.value == 0.0 { 0.0 } else { x.value.signum() }),
            Function::Sqrt => {
                if x.value < 0.0 {
                    return Err(CalcError::new(
                        "this is below zero: it has no root",
                        first.range.clone(),
                    ));
                }
                let dimension = raised(x.dimension, 0.5).ok_or_else(|| {
                    let message = format!("{} has no square root", x.dimension.name_with_article());
                    CalcError::new(message, first.range.clone())
                })?;
                Quantity { value: libm::sqrt(x.value), dimension }
            }
            _ => {
                if x.dimension != Dimension::NONE {
                    let message = format!(
                        "`{}` takes a plain number, not {}",
                        function.name(),
                        x.dimension.name_with_article()
                    );
                    return Err(CalcError::new(message, first.range.clone()));
                }
                plain(of_number(function, x.value, first)?)
            }
        };
        if matches!(function, Function::Sign | Function::Floor | Function::Ceil) {
            self.turns.push(Turn::Step(result.value));
        }
        finite(expr, result)
    }

    fn interpolated(
        &mut self,
        expr: &Expr,
        at: &Expr,
        rows: &[[Expr; 2]],
    ) -> Result<Quantity, CalcError> {
        let x = self.quantity(at)?;
        let mut across = vec![(at, x)];
        let mut up = Vec::with_capacity(rows.len());
        for [first, second] in rows {
            across.push((first, self.quantity(first)?));
            up.push((second, self.quantity(second)?));
        }
        same(expr, "interpolate", &across)?;
        let dimension = same(expr, "interpolate", &up)?;
        let across = &across[1..];
        if let Some(pair) = across.windows(2).find(|pair| pair[1].1.value <= pair[0].1.value) {
            let message = "rows must ascend in their first entry";
            return Err(CalcError::new(message, pair[1].0.range.clone()));
        }
        let between = across
            .windows(2)
            .position(|pair| pair[0].1.value <= x.value && x.value <= pair[1].1.value);
        let Some(low) = between else {
            let message = "this lies outside the rows, and nothing is extrapolated";
            return Err(CalcError::new(message, at.range.clone()));
        };
        let [x_low, x_high] = [low, low + 1].map(|row| across[row].1.value);
        let [y_low, y_high] = [low, low + 1].map(|row| up[row].1.value);
        let share = (x.value - x_low) / (x_high - x_low);
        finite(expr, Quantity { value: y_low + share * (y_high - y_low), dimension })
    }

    fn chosen(&mut self, expr: &Expr, of: &Expr, rows: &[[Expr; 2]]) -> Result<Value, CalcError> {
        let wanted = self.unrecorded(of)?;
        for (index, [key, value]) in rows.iter().enumerate() {
            let found = match (self.unrecorded(key)?, &wanted) {
                (Value::Number(a), Value::Number(b)) => {
                    same(expr, "choose", &[(of, *b), (key, a)])?;
                    equal(a.value, b.value)
                }
                (Value::Word(a), Value::Word(b)) => a == *b,
                (Value::Truth(a), Value::Truth(b)) => a == *b,
                (other, wanted) => {
                    let message = format!("{} cannot equal {}", other.what(), wanted.what());
                    return Err(CalcError::new(message, key.range.clone()));
                }
            };
            if found {
                self.taken.push(index);
                #[expect(clippy::cast_precision_loss, reason = "few rows")]
                self.turns.push(Turn::Step(index as f64));
                return self.value(value);
            }
        }
        let said = match wanted {
            Value::Word(word) => format!("no row for `{word}`"),
            _ => "no row for this value".to_owned(),
        };
        Err(CalcError::new(said, of.range.clone()))
    }
}

fn quantity_of(expr: &Expr, value: &Value) -> Result<Quantity, CalcError> {
    match value {
        Value::Number(quantity) => Ok(*quantity),
        other => {
            let message = format!("this is {}, expected a quantity", other.what());
            Err(CalcError::new(message, expr.range.clone()))
        }
    }
}

fn of_number(function: Function, x: f64, at: &Expr) -> Result<f64, CalcError> {
    let outside = |what: &str| CalcError::new(what, at.range.clone());
    Ok(match function {
        Function::Sin => libm::sin(x),
        Function::Cos => libm::cos(x),
        Function::Tan => libm::tan(x),
        Function::Asin | Function::Acos if x.abs() > 1.0 => {
            return Err(outside("this lies outside -1 to 1"));
        }
        Function::Asin => libm::asin(x),
        Function::Acos => libm::acos(x),
        Function::Atan => libm::atan(x),
        Function::Exp => libm::exp(x),
        Function::Ln | Function::Log10 if x <= 0.0 => {
            return Err(outside("this is not above zero: it has no logarithm"));
        }
        Function::Ln => libm::log(x),
        Function::Log10 => libm::log10(x),
        Function::Floor => libm::floor(x),
        Function::Ceil => libm::ceil(x),
        Function::Sqrt | Function::Abs | Function::Min | Function::Max | Function::Sign => x,
    })
}

fn power(
    expr: &Expr,
    left: &Expr,
    right: &Expr,
    a: Quantity,
    b: Quantity,
) -> Result<Quantity, CalcError> {
    if b.dimension != Dimension::NONE {
        let message =
            format!("an exponent is a plain number, not {}", b.dimension.name_with_article());
        return Err(CalcError::new(message, right.range.clone()));
    }
    let dimension = raised(a.dimension, b.value).ok_or_else(|| {
        let message = format!(
            "{} cannot be raised to the power {}",
            a.dimension.name_with_article(),
            b.value
        );
        CalcError::new(message, left.range.clone())
            .hint("say in which unit its number counts: `value_in(…, MPa)`")
    })?;
    if a.value == 0.0 && b.value < 0.0 {
        return Err(CalcError::new("this divides by zero", left.range.clone()));
    }
    if a.value < 0.0 && libm::fmod(b.value, 1.0).abs() > 0.0 {
        let message = "this is below zero: it has no broken power";
        return Err(CalcError::new(message, left.range.clone()));
    }
    finite(expr, Quantity { value: libm::pow(a.value, b.value), dimension })
}

/// The one dimension of all values; noughts go with every dimension.
fn same(expr: &Expr, what: &str, values: &[(&Expr, Quantity)]) -> Result<Dimension, CalcError> {
    let mut known: Option<Dimension> = None;
    for (value, quantity) in values {
        match known {
            _ if value.is_nought() => {}
            None => known = Some(quantity.dimension),
            Some(dimension) if dimension == quantity.dimension => {}
            Some(dimension) => {
                let message = format!(
                    "`{what}` cannot take {} with {}",
                    dimension.name_with_article(),
                    quantity.dimension.name_with_article()
                );
                return Err(CalcError::new(message, expr.range.clone()));
            }
        }
    }
    Ok(known.unwrap_or(Dimension::NONE))
}

/// Equal but for the last bits, which a change of units may disturb: 300 mm is 0.3 m.
fn equal(a: f64, b: f64) -> bool {
    (a - b).abs() <= 1e-12 * a.abs().max(b.abs())
}

fn finite(expr: &Expr, quantity: Quantity) -> Result<Quantity, CalcError> {
    if quantity.value.is_finite() {
        return Ok(quantity);
    }
    Err(CalcError::new("the result is not a finite number", expr.range.clone()))
}
