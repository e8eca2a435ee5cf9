//! Printing values: the one rounding rule.
//!
//! A value is rounded to the significant digits asked for, half away from zero, on its decimal digits
//! (14 of them, so that the last bits of a conversion do not decide). Zeros behind the decimal mark are
//! not printed. From 1 000 on, digits before the decimal mark are grouped in threes by thin spaces
//! (U+2009). Values from 10⁻⁴ up to 10⁷ print in fixed point, others as `1.2×10⁻⁵`. Minus is U+2212.

use super::dimension::superscript;
use super::{Kind, Units};

/// Prints SI values in the project's units with its number of significant digits.
#[derive(Clone, Debug, PartialEq)]
pub struct Printer {
    pub units: Units,
    pub significant: usize,
}

impl Printer {
    /// The number alone, e.g. `12.35`, `1 234` (thin space), `1.2×10⁻⁵`; never `-0`.
    #[must_use]
    pub fn number(&self, kind: Kind, si: f64) -> String {
        print(si / self.units.get(kind).factor, self.significant)
    }

    /// Number and unit with a no-break space, e.g. `12.35 kN m`; degrees follow at once, `15°`.
    #[must_use]
    pub fn with_unit(&self, kind: Kind, si: f64) -> String {
        let label = &self.units.get(kind).label;
        let number = self.number(kind, si);
        match label.as_str() {
            "" => number,
            "°" => number + label,
            _ => format!("{number}\u{a0}{label}"),
        }
    }
}

/// Digits that survive the division by a unit's factor unharmed.
const RELIABLE: usize = 14;

/// Rounds and prints a plain number by the rule of this module; a dash for what is not a finite number.
#[must_use]
pub fn print(value: f64, significant: usize) -> String {
    if !value.is_finite() {
        return "–".into();
    }
    let Some(Decimal { negative, digits, exponent }) = Decimal::rounded(value, significant) else {
        return "0".into();
    };
    let sign = if negative { "\u{2212}" } else { "" };
    let (whole, decimals, power) = if (-4..7).contains(&exponent) {
        let whole = usize::try_from(exponent + 1).unwrap_or_default();
        let zeros = usize::try_from(-exponent - 1).unwrap_or_default();
        let padded = format!("{}{digits:0<whole$}", "0".repeat(zeros));
        let (before, behind) = padded.split_at(whole);
        let before = if whole == 0 { "0".into() } else { grouped(before) };
        (before, behind.to_owned(), String::new())
    } else {
        let (first, rest) = digits.split_at(1);
        (first.to_owned(), rest.to_owned(), format!("×10{}", superscript(exponent)))
    };
    let point = if decimals.is_empty() { "" } else { "." };
    format!("{sign}{whole}{point}{decimals}{power}")
}

/// `digits` d₁d₂d₃… without trailing zeros mean d₁.d₂d₃… × 10^exponent.
struct Decimal {
    negative: bool,
    digits: String,
    exponent: i32,
}

impl Decimal {
    /// `None` for zero.
    fn rounded(value: f64, significant: usize) -> Option<Self> {
        let scientific = format!("{:.*e}", RELIABLE - 1, value.abs());
        let (mantissa, exponent) = scientific.split_once('e')?;
        let mut exponent: i32 = exponent.parse().ok()?;
        let mut digits: Vec<u8> = mantissa.bytes().filter(u8::is_ascii_digit).collect();
        let kept = significant.clamp(1, RELIABLE);
        let up = digits.get(kept).is_some_and(|next| *next >= b'5');
        digits.truncate(kept);
        if up {
            while digits.last() == Some(&b'9') {
                digits.pop();
            }
            match digits.last_mut() {
                Some(last) => *last += 1,
                None => {
                    digits.push(b'1');
                    exponent += 1;
                }
            }
        }
        while digits.last() == Some(&b'0') {
            digits.pop();
        }
        let digits = String::from_utf8(digits).ok().filter(|digits| !digits.is_empty())?;
        Some(Self { negative: value < 0.0, digits, exponent })
    }
}

fn grouped(whole: &str) -> String {
    let mut out = String::new();
    for (i, digit) in whole.chars().enumerate() {
        if i > 0 && (whole.len() - i).is_multiple_of(3) {
            out.push('\u{2009}');
        }
        out.push(digit);
    }
    out
}
