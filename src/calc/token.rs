//! Text → tokens.

use std::ops::Range;

use super::CalcError;
use super::unit::{Follows, unit_after_number};
use crate::quantity::{self, Dimension, Quantity};

#[derive(Clone, Debug, PartialEq)]
pub(super) enum Token {
    Quantity {
        quantity: Quantity,
        number: String,
        unit: String,
    },
    Name(String),
    Word(String),
    /// An operator, bracket or separator, in one spelling.
    Sign(&'static str),
    End,
}

#[derive(Clone, Debug)]
pub(super) struct Spot {
    pub(super) token: Token,
    pub(super) range: Range<usize>,
}

/// Spellings of the signs; longer ones first.
const SIGNS: [(&str, &str); 27] = [
    ("<=", "<="),
    (">=", ">="),
    ("==", "=="),
    ("!=", "!="),
    ("≤", "<="),
    ("≥", ">="),
    ("≠", "!="),
    ("+", "+"),
    ("-", "-"),
    ("\u{2212}", "-"),
    ("*", "*"),
    ("·", "*"),
    ("⋅", "*"),
    ("×", "*"),
    ("/", "/"),
    ("^", "^"),
    ("²", "²"),
    ("³", "³"),
    ("<", "<"),
    (">", ">"),
    ("=", "="),
    ("(", "("),
    (")", ")"),
    ("[", "["),
    ("]", "]"),
    (",", ","),
    (";", ";"),
];

pub(super) fn tokens(text: &str) -> Result<Vec<Spot>, CalcError> {
    let mut out = Vec::new();
    let mut at = 0;
    while let Some(c) = text[at..].chars().next() {
        let start = at;
        if c.is_whitespace() {
            at += c.len_utf8();
            continue;
        }
        let token = if c.is_ascii_digit() || (c == '.' && digit_at(text, at + 1)) {
            number(text, &mut at)?
        } else if c.is_alphabetic() {
            at += text[at..].len() - text[at..].trim_start_matches(in_name).len();
            Token::Name(text[start..at].to_owned())
        } else if matches!(c, '\'' | '"') {
            word(text, &mut at, c)?
        } else if let Some((spelling, sign)) =
            SIGNS.iter().find(|(spelling, _)| text[at..].starts_with(spelling))
        {
            at += spelling.len();
            Token::Sign(sign)
        } else {
            let range = at..at + c.len_utf8();
            return Err(CalcError::new(format!("`{c}` has no meaning in a formula"), range));
        };
        out.push(Spot { token, range: start..at });
    }
    out.push(Spot { token: Token::End, range: text.len()..text.len() });
    Ok(out)
}

pub(super) fn in_name(c: char) -> bool {
    c.is_alphanumeric() && !matches!(c, '²' | '³' | '¹' | '⁰' | '⁴'..='⁹') || c == '_'
}

fn digit_at(text: &str, at: usize) -> bool {
    text[at..].starts_with(|c: char| c.is_ascii_digit())
}

fn number(text: &str, at: &mut usize) -> Result<Token, CalcError> {
    let start = *at;
    let bytes = text.as_bytes();
    let digits = |mut at: usize| {
        while bytes.get(at).is_some_and(u8::is_ascii_digit) {
            at += 1;
        }
        at
    };
    let mut end = digits(start);
    if bytes.get(end) == Some(&b'.') {
        end = digits(end + 1);
    }
    if matches!(bytes.get(end), Some(b'e' | b'E')) {
        let sign = usize::from(matches!(bytes.get(end + 1), Some(b'+' | b'-')));
        let power = digits(end + 1 + sign);
        if power > end + 1 + sign {
            end = power;
        }
    }
    let reach = match unit_after_number(&text[end..]) {
        Follows::Unit(length) => end + length,
        Follows::Unknown(from, to) => {
            let word = &text[end + from..end + to];
            let error = CalcError::new(format!("no unit is called `{word}`"), end + from..end + to);
            return Err(error.hint("to multiply by a value, write `*` between the two"));
        }
    };
    *at = reach;
    let written = &text[start..reach];
    let read = quantity::parse(written).map_err(|error| CalcError {
        message: error.message,
        range: start + error.range.start..start + error.range.end,
        hint: error.hint,
    })?;
    Ok(Token::Quantity {
        quantity: plain_angle(read),
        number: text[start..end].to_owned(),
        unit: text[end..reach].trim().to_owned(),
    })
}

/// Radians are plain numbers in formulas.
pub(super) fn plain_angle(quantity: Quantity) -> Quantity {
    Quantity { dimension: Dimension { angle: 0, ..quantity.dimension }, ..quantity }
}

fn word(text: &str, at: &mut usize, quote: char) -> Result<Token, CalcError> {
    let start = *at + 1;
    let Some(length) = text[start..].find(quote) else {
        return Err(CalcError::new("this quotation has no end", *at..text.len()));
    };
    *at = start + length + 1;
    Ok(Token::Word(text[start..start + length].to_owned()))
}
