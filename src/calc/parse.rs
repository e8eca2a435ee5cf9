//! Tokens → tree, by precedence: `or`, `and`, `not`, comparisons, `+ -`, `* /`, unary minus, `^`.

use std::ops::Range;

use super::expression::{Argument, Binary, Expr, ExprKind, Formula, Reading};
use super::token::{Spot, Token, in_name, tokens};
use super::unit::KEYWORDS;
use super::{CalcError, Function};
use crate::quantity::{Unit, parse_unit};

/// Longest formula, bytes.
const LONGEST: usize = 4_000;
/// Most numbers, names and signs: a sum nests as deep as it has terms.
const MOST: usize = 1_000;
/// Deepest nesting of brackets, signs, powers and conditionals.
const DEEPEST: usize = 40;

/// Reads a formula.
///
/// # Errors
/// Where it breaks the grammar, at the character.
pub fn formula(text: &str) -> Result<Formula, CalcError> {
    read(text, false)
}

/// Reads a formula that may end with the unit in which its result prints: `span / 360 [mm]`.
///
/// # Errors
/// As [`formula`].
pub fn formula_with_unit(text: &str) -> Result<Formula, CalcError> {
    read(text, true)
}

/// The text can name a value in a formula.
#[must_use]
pub fn is_name(text: &str) -> bool {
    text.starts_with(char::is_alphabetic)
        && text.chars().all(in_name)
        && !KEYWORDS.contains(&text)
        && Function::from_name(text).is_none()
        && !matches!(text, "value_in" | "interpolate" | "choose" | "pi")
}

fn read(text: &str, takes_unit: bool) -> Result<Formula, CalcError> {
    if text.len() > LONGEST {
        let message = format!("a formula has at most {LONGEST} characters");
        return Err(CalcError::new(message, 0..text.len()));
    }
    let spots = tokens(text)?;
    if spots.len() > MOST {
        let message = format!("a formula has at most {MOST} numbers, names and signs");
        return Err(CalcError::new(message, 0..text.len()));
    }
    let mut parser = Parser { text, spots, at: 0, depth: 0, parts: 0, readings: Vec::new() };
    let root = parser.expression(0)?;
    let body = parser.spots[parser.at].range.start;
    let unit = if takes_unit && parser.takes("[") {
        let unit = parser.unit_until("]")?;
        Some(unit)
    } else {
        None
    };
    let left = &parser.spots[parser.at];
    if left.token != Token::End {
        return Err(parser.unexpected("an operator or the end of the formula"));
    }
    let text = text[..body].trim_end().to_owned();
    Ok(Formula { text, root, readings: parser.readings, unit })
}

struct Parser<'t> {
    text: &'t str,
    spots: Vec<Spot>,
    at: usize,
    depth: usize,
    /// Expressions so far, those that a chain of comparisons holds twice counted twice.
    parts: usize,
    readings: Vec<Reading>,
}

impl Parser<'_> {
    /// An expression whose operators bind at least as tightly as `level`.
    fn expression(&mut self, level: u8) -> Result<Expr, CalcError> {
        self.deeper()?;
        let mut left = self.prefix()?;
        while let Some(binary) = self.binary().filter(|binary| binary.level() >= level) {
            self.at += 1;
            let compares = binary.level() == Binary::Less.level();
            let before = self.parts;
            let right = self.expression(binary.level() + 1)?;
            let copied = self.parts - before;
            let range = left.range.start..right.range.end;
            let middle = compares.then(|| right.clone());
            left = pair(binary, left, right, range);
            // `a < b <= c` means both.
            if let (Some(middle), Some(next)) = (middle, self.binary())
                && next.level() == binary.level()
            {
                self.at += 1;
                self.parts += copied;
                if self.parts > MOST {
                    let message = "comparisons in a row nest too deep here";
                    return Err(CalcError::new(message, middle.range.clone()));
                }
                let last = self.expression(next.level() + 1)?;
                let range = left.range.start..last.range.end;
                let second = pair(next, middle.clone(), last, middle.range.start..range.end);
                left = pair(Binary::And, left, second, range);
            }
        }
        self.depth -= 1;
        Ok(left)
    }

    fn deeper(&mut self) -> Result<(), CalcError> {
        self.depth += 1;
        self.parts += 1;
        if self.depth > DEEPEST {
            let message = format!("a formula nests at most {DEEPEST} deep");
            return Err(CalcError::new(message, self.spots[self.at].range.clone()));
        }
        Ok(())
    }

    fn prefix(&mut self) -> Result<Expr, CalcError> {
        let start = self.here().start;
        if self.takes("-") {
            // Unary minus binds less tightly than a power: -2^2 is -4.
            let inner = self.expression(7)?;
            let range = start..inner.range.end;
            return Ok(Expr { range, kind: ExprKind::Negate(Box::new(inner)) });
        }
        if self.takes("+") {
            return self.expression(7);
        }
        if self.takes_word("not") {
            let inner = self.expression(3)?;
            let range = start..inner.range.end;
            return Ok(Expr { range, kind: ExprKind::Not(Box::new(inner)) });
        }
        if self.takes_word("if") {
            return self.conditional(start);
        }
        let base = self.primary()?;
        self.power(base)
    }

    /// `^` binds to the right: 2^3^2 is 2^9.
    fn power(&mut self, base: Expr) -> Result<Expr, CalcError> {
        for (sign, exponent) in [("²", "2"), ("³", "3")] {
            let range = self.here();
            if self.takes(sign) {
                let quantity = crate::quantity::Quantity {
                    value: if sign == "²" { 2.0 } else { 3.0 },
                    dimension: crate::quantity::Dimension::NONE,
                };
                let (number, unit) = (exponent.to_owned(), String::new());
                let kind = ExprKind::Quantity { quantity, number, unit };
                let whole = base.range.start..range.end;
                return Ok(pair(Binary::Power, base, Expr { range, kind }, whole));
            }
        }
        if !self.takes("^") {
            return Ok(base);
        }
        let exponent = self.expression(7)?;
        let range = base.range.start..exponent.range.end;
        Ok(pair(Binary::Power, base, exponent, range))
    }

    fn conditional(&mut self, start: usize) -> Result<Expr, CalcError> {
        let condition = Box::new(self.expression(0)?);
        if !self.takes_word("then") {
            return Err(self.unexpected("`then`"));
        }
        let then = Box::new(self.expression(0)?);
        if !self.takes_word("else") {
            return Err(self.unexpected("`else`"));
        }
        let otherwise = Box::new(self.expression(0)?);
        let range = start..otherwise.range.end;
        Ok(Expr { range, kind: ExprKind::If { condition, then, otherwise } })
    }

    fn primary(&mut self) -> Result<Expr, CalcError> {
        let Spot { token, range } = self.spots[self.at].clone();
        match token {
            Token::Quantity { quantity, number, unit } => {
                self.at += 1;
                Ok(Expr { range, kind: ExprKind::Quantity { quantity, number, unit } })
            }
            Token::Word(word) => {
                self.at += 1;
                Ok(Expr { range, kind: ExprKind::Word(word) })
            }
            Token::Sign("(") => {
                self.at += 1;
                let inner = self.expression(0)?;
                self.close(&range)?;
                Ok(inner)
            }
            Token::Name(name) if !KEYWORDS.contains(&name.as_str()) => {
                self.at += 1;
                let opening = self.here();
                if name == "pi" {
                    Ok(Expr { range, kind: ExprKind::Pi })
                } else if self.takes("(") {
                    self.call(&name, range.start, &opening)
                } else {
                    Ok(self.read_of(name, None, range))
                }
            }
            _ => Err(self.unexpected("a value")),
        }
    }

    fn call(
        &mut self,
        name: &str,
        start: usize,
        opening: &Range<usize>,
    ) -> Result<Expr, CalcError> {
        let kind = match (name, Function::from_name(name)) {
            (_, Some(function)) => {
                let arguments = self.list(opening)?;
                if arguments.len() != 1 && !function.takes_many() {
                    let range = start..self.before();
                    let count = arguments.len();
                    let message = format!("`{name}` takes one value, not {count}");
                    return Err(CalcError::new(message, range));
                }
                ExprKind::Call(function, arguments)
            }
            ("value_in", _) => {
                let inner = Box::new(self.expression(0)?);
                if !self.takes(",") {
                    return Err(self.unexpected("`,` and a unit"));
                }
                ExprKind::ValueIn(inner, self.unit_until(")")?)
            }
            ("interpolate" | "choose", _) => {
                let value = Box::new(self.expression(0)?);
                let rows = self.rows(name, start, opening)?;
                if name == "choose" {
                    ExprKind::Choose(value, rows)
                } else {
                    ExprKind::Interpolate(value, rows)
                }
            }
            _ => {
                let arguments = self.arguments(opening)?;
                let range = start..self.before();
                return Ok(self.read_of(name.to_owned(), Some(arguments), range));
            }
        };
        Ok(Expr { range: start..self.before(), kind })
    }

    fn list(&mut self, opening: &Range<usize>) -> Result<Vec<Expr>, CalcError> {
        let mut out = vec![self.expression(0)?];
        while self.takes(",") {
            out.push(self.expression(0)?);
        }
        self.close(opening)?;
        Ok(out)
    }

    /// Rows of two behind semicolons: `; 0 m, 1.0; 10 m, 0.8)`.
    fn rows(
        &mut self,
        name: &str,
        start: usize,
        opening: &Range<usize>,
    ) -> Result<Vec<[Expr; 2]>, CalcError> {
        let mut rows = Vec::new();
        while self.takes(";") {
            let first = self.expression(0)?;
            if !self.takes(",") {
                return Err(self.unexpected("`,` and the row's second entry"));
            }
            rows.push([first, self.expression(0)?]);
        }
        let least = if name == "choose" { 1 } else { 2 };
        if rows.len() < least {
            let message =
                format!("`{name}` needs at least {least} row{}", if least == 1 { "" } else { "s" });
            return Err(CalcError::new(message, start..self.here().end).hint(format!(
                "write rows behind semicolons: `{name}(value; first, 1.0; second, 0.8)`"
            )));
        }
        self.close(opening)?;
        Ok(rows)
    }

    fn arguments(
        &mut self,
        opening: &Range<usize>,
    ) -> Result<Vec<(Option<String>, Argument)>, CalcError> {
        let mut out = Vec::new();
        if self.takes(")") {
            return Ok(out);
        }
        loop {
            let next = self.spots.get(self.at + 1).map(|spot| &spot.token);
            let key = match (&self.spots[self.at].token, next) {
                (Token::Name(key), Some(Token::Sign("="))) => Some(key.clone()),
                _ => None,
            };
            if key.is_some() {
                self.at += 2;
            }
            let negative = self.takes("-");
            let argument = match self.spots[self.at].token.clone() {
                Token::Quantity { mut quantity, .. } => {
                    if negative {
                        quantity.value = -quantity.value;
                    }
                    Argument::Quantity(quantity)
                }
                Token::Name(name) if !negative => Argument::Name(name),
                Token::Word(word) if !negative => Argument::Text(word),
                _ => return Err(self.unexpected("a name, a quotation or a number")),
            };
            self.at += 1;
            out.push((key, argument));
            if !self.takes(",") {
                break;
            }
        }
        self.close(opening)?;
        Ok(out)
    }

    fn read_of(
        &mut self,
        name: String,
        arguments: Option<Vec<(Option<String>, Argument)>>,
        range: Range<usize>,
    ) -> Expr {
        let written = &self.text[range.clone()];
        let text = without_blanks(written);
        let known = self.readings.iter().position(|reading| reading.text == text);
        let index = known.unwrap_or_else(|| {
            self.readings.push(Reading { text, name, arguments, range: range.clone() });
            self.readings.len() - 1
        });
        Expr { range, kind: ExprKind::Read(index) }
    }

    /// A unit up to, and with, a closing sign.
    fn unit_until(&mut self, closing: &'static str) -> Result<Unit, CalcError> {
        let start = self.before();
        while self.spots[self.at].token != Token::Sign(closing) {
            if self.spots[self.at].token == Token::End {
                return Err(self.unexpected(&format!("`{closing}`")));
            }
            self.at += 1;
        }
        let end = self.here().start;
        self.at += 1;
        let unit = parse_unit(&self.text[start..end]).map_err(|error| CalcError {
            message: error.message,
            range: start + error.range.start..start + error.range.end,
            hint: error.hint,
        })?;
        let dimension = crate::quantity::Dimension { angle: 0, ..unit.dimension };
        Ok(Unit { dimension, ..unit })
    }

    fn binary(&self) -> Option<Binary> {
        Some(match &self.spots[self.at].token {
            Token::Sign("+") => Binary::Add,
            Token::Sign("-") => Binary::Subtract,
            Token::Sign("*") => Binary::Multiply,
            Token::Sign("/") => Binary::Divide,
            Token::Sign("<") => Binary::Less,
            Token::Sign("<=") => Binary::LessOrEqual,
            Token::Sign(">") => Binary::Greater,
            Token::Sign(">=") => Binary::GreaterOrEqual,
            Token::Sign("==") => Binary::Equal,
            Token::Sign("!=") => Binary::NotEqual,
            Token::Name(name) if name == "and" => Binary::And,
            Token::Name(name) if name == "or" => Binary::Or,
            _ => return None,
        })
    }

    fn here(&self) -> Range<usize> {
        self.spots[self.at].range.clone()
    }

    /// Where the last token taken ends.
    fn before(&self) -> usize {
        self.at.checked_sub(1).map_or(0, |at| self.spots[at].range.end)
    }

    fn takes(&mut self, sign: &str) -> bool {
        let there = matches!(self.spots[self.at].token, Token::Sign(other) if other == sign);
        self.at += usize::from(there);
        there
    }

    fn takes_word(&mut self, word: &str) -> bool {
        let there = matches!(&self.spots[self.at].token, Token::Name(name) if name == word);
        self.at += usize::from(there);
        there
    }

    fn close(&mut self, opening: &Range<usize>) -> Result<(), CalcError> {
        if self.takes(")") {
            return Ok(());
        }
        if self.spots[self.at].token == Token::End {
            return Err(CalcError::new("this bracket is not closed", opening.clone()));
        }
        Err(self.unexpected("`)`"))
    }

    fn unexpected(&self, wanted: &str) -> CalcError {
        let Spot { token, range } = &self.spots[self.at];
        let message = match token {
            Token::End => format!("the formula breaks off: expected {wanted}"),
            _ => format!("expected {wanted}, found `{}`", &self.text[range.clone()]),
        };
        let error = CalcError::new(message, range.clone());
        match token {
            Token::Sign("=") => error.hint("to compare, write `==`"),
            _ => error,
        }
    }
}

fn pair(binary: Binary, left: Expr, right: Expr, range: Range<usize>) -> Expr {
    Expr { range, kind: ExprKind::Binary(binary, Box::new(left), Box::new(right)) }
}

/// Blanks outside quotations taken out, one kept behind each comma.
fn without_blanks(text: &str) -> String {
    let mut out = String::new();
    let mut quote = None;
    for c in text.chars() {
        match quote {
            Some(open) => {
                out.push(c);
                if c == open {
                    quote = None;
                }
            }
            None if c.is_whitespace() => {}
            None => {
                out.push(c);
                if matches!(c, '\'' | '"') {
                    quote = Some(c);
                } else if c == ',' {
                    out.push(' ');
                }
            }
        }
    }
    out
}
