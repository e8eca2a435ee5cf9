//! The unit symbols that can be read, and expressions of them such as `kN m/rad`.
//!
//! Pounds follow structural practice in the United States: `lb` is a force, `lbm` the mass. `t` is the
//! metric tonne, a mass.

use std::ops::Range;

use super::dimension::{SUPERSCRIPTS, superscript};
use super::{Dimension, QuantityError, Unit};

// NIST Special Publication 811 (2008), Appendix B, exact values.
const INCH: f64 = 0.0254;
const FOOT: f64 = 0.3048;
const POUND_MASS: f64 = 0.453_592_37;
const POUND_FORCE: f64 = 4.448_221_615_260_5;
const KIP: f64 = 4_448.221_615_260_5;
const FAHRENHEIT: f64 = 5.0 / 9.0;
const DEGREE: f64 = std::f64::consts::PI / 180.0;

/// Symbol, SI base units in one of it, dimension.
const SYMBOLS: [(&str, f64, Dimension); 54] = [
    ("m", 1.0, Dimension::LENGTH),
    ("mm", 0.001, Dimension::LENGTH),
    ("cm", 0.01, Dimension::LENGTH),
    ("dm", 0.1, Dimension::LENGTH),
    ("km", 1_000.0, Dimension::LENGTH),
    ("in", INCH, Dimension::LENGTH),
    ("\"", INCH, Dimension::LENGTH),
    ("″", INCH, Dimension::LENGTH),
    ("ft", FOOT, Dimension::LENGTH),
    ("'", FOOT, Dimension::LENGTH),
    ("′", FOOT, Dimension::LENGTH),
    ("yd", 0.9144, Dimension::LENGTH),
    ("kg", 1.0, Dimension::MASS),
    ("t", 1_000.0, Dimension::MASS),
    ("lbm", POUND_MASS, Dimension::MASS),
    ("slug", POUND_FORCE / FOOT, Dimension::MASS),
    ("s", 1.0, Dimension::TIME),
    ("Hz", 1.0, Dimension::FREQUENCY),
    ("K", 1.0, Dimension::TEMPERATURE),
    ("°C", 1.0, Dimension::TEMPERATURE),
    ("degC", 1.0, Dimension::TEMPERATURE),
    ("°F", FAHRENHEIT, Dimension::TEMPERATURE),
    ("degF", FAHRENHEIT, Dimension::TEMPERATURE),
    ("rad", 1.0, Dimension::ANGLE),
    ("mrad", 0.001, Dimension::ANGLE),
    ("°", DEGREE, Dimension::ANGLE),
    ("deg", DEGREE, Dimension::ANGLE),
    ("N", 1.0, Dimension::FORCE),
    ("daN", 10.0, Dimension::FORCE),
    ("kN", 1_000.0, Dimension::FORCE),
    ("MN", 1_000_000.0, Dimension::FORCE),
    ("lb", POUND_FORCE, Dimension::FORCE),
    ("lbs", POUND_FORCE, Dimension::FORCE),
    ("lbf", POUND_FORCE, Dimension::FORCE),
    ("kip", KIP, Dimension::FORCE),
    ("kips", KIP, Dimension::FORCE),
    ("Pa", 1.0, Dimension::PRESSURE),
    ("kPa", 1_000.0, Dimension::PRESSURE),
    ("MPa", 1_000_000.0, Dimension::PRESSURE),
    ("GPa", 1_000_000_000.0, Dimension::PRESSURE),
    ("psi", POUND_FORCE / (INCH * INCH), Dimension::PRESSURE),
    ("ksi", KIP / (INCH * INCH), Dimension::PRESSURE),
    ("psf", POUND_FORCE / (FOOT * FOOT), Dimension::PRESSURE),
    ("ksf", KIP / (FOOT * FOOT), Dimension::PRESSURE),
    ("plf", POUND_FORCE / FOOT, Dimension::LINE_LOAD),
    ("klf", KIP / FOOT, Dimension::LINE_LOAD),
    ("pcf", POUND_FORCE / (FOOT * FOOT * FOOT), Dimension::WEIGHT_DENSITY),
    ("kcf", KIP / (FOOT * FOOT * FOOT), Dimension::WEIGHT_DENSITY),
    ("pci", POUND_FORCE / (INCH * INCH * INCH), Dimension::WEIGHT_DENSITY),
    ("J", 1.0, Dimension::MOMENT),
    ("kJ", 1_000.0, Dimension::MOMENT),
    ("MJ", 1_000_000.0, Dimension::MOMENT),
    ("%", 0.01, Dimension::NONE),
    ("‰", 0.001, Dimension::NONE),
];

/// Exponents beyond this are a slip of the pen: the warping constant has length⁶.
const LARGEST_EXPONENT: i8 = 6;
/// So are units with more factors than this.
const MOST_FACTORS: usize = 6;

/// Reads a unit expression such as `kN/m²`, `kip-ft`, `kNm`, `/K`, `m^-2`. The ranges of errors count
/// from `offset`. Nothing at all is the unit of plain numbers.
pub(super) fn unit(text: &str, offset: usize) -> Result<Unit, QuantityError> {
    let mut reader = Reader { text, at: 0, offset };
    let mut label = String::new();
    let mut factor = 1.0;
    let mut dimension = Dimension::NONE;
    let mut divided = false;
    let mut count = 0;
    // `1/K`: the figure stands for nothing but itself.
    reader.skip(is_blank);
    if reader.rest().strip_prefix('1').is_some_and(|rest| rest.trim_start().starts_with('/')) {
        reader.at += 1;
    }
    loop {
        reader.skip(is_blank);
        let divides = reader.take('/');
        if !divides && count > 0 {
            reader.take_one_of(&['·', '⋅', '*', '×', '-', '.']);
        }
        reader.skip(is_blank);
        if reader.rest().is_empty() && !divides && !reader.after_separator() {
            return Ok(Unit { label, factor, dimension });
        }
        let start = reader.at;
        let symbols = reader.symbols()?;
        let exponent = reader.exponent()?;
        count += symbols.len();
        if divided && !divides {
            return Err(reader.error(
                start,
                format!("unit `{}` is ambiguous after a `/`", text.trim()),
                Some("write what multiplies first, as in `kN m/rad`, or repeat the `/`".into()),
            ));
        }
        if count > MOST_FACTORS {
            return Err(reader.error(start, "this unit has too many factors".into(), None));
        }
        divided |= divides;
        let last = symbols.len() - 1;
        for (i, (symbol, unit_factor, unit_dimension)) in symbols.into_iter().enumerate() {
            let written = if i == last { exponent } else { 1 };
            let signed = if divides { -written } else { written };
            factor *= power(unit_factor, signed);
            dimension = dimension * unit_dimension.power(signed);
            if divides {
                label.push('/');
            } else if !label.is_empty() {
                label.push(' ');
            }
            label.push_str(symbol);
            label.push_str(&superscript(i32::from(written)));
        }
    }
}

/// White space, ordinary or of print.
pub(super) fn is_blank(c: char) -> bool {
    matches!(c, ' ' | '\t' | '\u{a0}' | '\u{2009}' | '\u{202f}')
}

type Symbol = (&'static str, f64, Dimension);

struct Reader<'t> {
    text: &'t str,
    at: usize,
    offset: usize,
}

impl Reader<'_> {
    fn rest(&self) -> &str {
        &self.text[self.at..]
    }

    fn skip(&mut self, skipped: impl Fn(char) -> bool) {
        self.at = self.text.len() - self.rest().trim_start_matches(skipped).len();
    }

    fn take(&mut self, c: char) -> bool {
        let there = self.rest().starts_with(c);
        if there {
            self.at += c.len_utf8();
        }
        there
    }

    fn take_one_of(&mut self, separators: &[char]) -> bool {
        separators.iter().any(|c| self.take(*c))
    }

    /// A sign of multiplication stands just before, with nothing behind it.
    fn after_separator(&self) -> bool {
        self.text[..self.at].trim_end_matches(is_blank).ends_with(['·', '⋅', '*', '×', '-', '.'])
    }

    fn error(&self, start: usize, message: String, hint: Option<String>) -> QuantityError {
        let end = self.at.max(start);
        QuantityError { message, range: self.offset + start..self.offset + end, hint }
    }

    /// One symbol, or a force and a length written together as in `kNm`.
    fn symbols(&mut self) -> Result<Vec<Symbol>, QuantityError> {
        let start = self.at;
        let length = symbol_length(self.rest());
        let word = self.rest()[..length].to_owned();
        self.at += length;
        if word.is_empty() {
            let found = self.rest().chars().next();
            self.at = self.text.len();
            let message = match found {
                Some(c) => format!("`{c}` is not part of a unit"),
                None => "the unit breaks off".to_owned(),
            };
            return Err(self.error(start, message, None));
        }
        if let Some(symbol) = find(&word) {
            return Ok(vec![symbol]);
        }
        let pair = word.char_indices().skip(1).find_map(|(i, _)| {
            let (first, second) = (find(&word[..i])?, find(&word[i..])?);
            let kinds = [first.2, second.2];
            let moment = kinds == [Dimension::FORCE, Dimension::LENGTH]
                || kinds == [Dimension::LENGTH, Dimension::FORCE];
            moment.then(|| vec![first, second])
        });
        pair.ok_or_else(|| {
            let hint = nearest(&word).map(|near| format!("did you mean `{near}`?"));
            self.error(start, format!("no unit is called `{word}`"), hint)
        })
    }

    /// `²`, `^2`, `^-1` or `2`; 1 where none stands.
    fn exponent(&mut self) -> Result<i8, QuantityError> {
        let start = self.at;
        let caret = self.take('^');
        let mut digits = String::new();
        for c in self.rest().chars() {
            let raised = SUPERSCRIPTS.iter().position(|digit| *digit == c);
            let plain = match (c, raised) {
                (_, Some(digit)) => char::from_digit(u32::try_from(digit).unwrap_or(0), 10),
                ('⁻', _) => Some('-'),
                // Only after a caret: `kip-ft` multiplies.
                ('-' | '\u{2212}', _) if caret && digits.is_empty() => Some('-'),
                ('0'..='9', _) => Some(c),
                _ => None,
            };
            let Some(plain) = plain else { break };
            digits.push(plain);
        }
        if digits.is_empty() && !caret {
            return Ok(1);
        }
        let width: usize =
            self.rest().chars().take(digits.chars().count()).map(char::len_utf8).sum();
        self.at += width;
        let exponent = digits.parse::<i8>().ok().filter(|n| n.abs() <= LARGEST_EXPONENT && *n != 0);
        exponent.ok_or_else(|| {
            let message =
                format!("the exponent of a unit is a whole number up to {LARGEST_EXPONENT}");
            self.error(start, message, None)
        })
    }
}

fn symbol_length(text: &str) -> usize {
    let mut end = 0;
    for (i, c) in text.char_indices() {
        let mark = matches!(c, '\'' | '"' | '′' | '″' | '%' | '‰');
        let letter = c.is_alphabetic() || c == '_' || (c == '°' && i == 0);
        if mark && i == 0 {
            return c.len_utf8();
        }
        if !letter {
            break;
        }
        end = i + c.len_utf8();
    }
    end
}

fn find(word: &str) -> Option<Symbol> {
    SYMBOLS.into_iter().find(|(symbol, ..)| *symbol == word)
}

/// A symbol that differs only in case, else one that differs in one character.
fn nearest(word: &str) -> Option<&'static str> {
    let known = || SYMBOLS.iter().map(|(symbol, ..)| *symbol).filter(|symbol| symbol.len() > 1);
    known()
        .find(|symbol| symbol.eq_ignore_ascii_case(word))
        .or_else(|| known().find(|symbol| one_edit_apart(word, symbol)))
}

fn one_edit_apart(a: &str, b: &str) -> bool {
    let (a, b): (Vec<char>, Vec<char>) = (a.chars().collect(), b.chars().collect());
    let same_start = a.iter().zip(&b).take_while(|(x, y)| x == y).count();
    let (a, b) = (&a[same_start..], &b[same_start..]);
    let same_end = a.iter().rev().zip(b.iter().rev()).take_while(|(x, y)| x == y).count();
    a.len() - same_end <= 1 && b.len() - same_end <= 1
}

fn power(base: f64, exponent: i8) -> f64 {
    let product: f64 = (0..exponent.unsigned_abs()).map(|_| base).product();
    if exponent < 0 { 1.0 / product } else { product }
}

/// A stretch of text with its blanks trimmed, as a range of bytes.
pub(super) fn trimmed(text: &str) -> Range<usize> {
    let start = text.len() - text.trim_start_matches(is_blank).len();
    start..text.trim_end_matches(is_blank).len().max(start)
}
