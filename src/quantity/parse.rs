//! Reading a quantity from text.

use std::ops::Range;

use super::dimension::SUPERSCRIPTS;
use super::symbols::{is_blank, trimmed, unit};
use super::{Dimension, Kind, Quantity, STANDARD_GRAVITY, Unit};

/// Why a text is not a quantity.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
#[error("{message}")]
pub struct QuantityError {
    pub message: String,
    /// Bytes of the text that are at fault.
    pub range: Range<usize>,
    pub hint: Option<String>,
}

/// Reads a number with an optional unit, e.g. `12.5 kN/m`, `3 ft 6 in`, `1.2e-5 /K`, `0.4 %`.
///
/// The decimal mark is a point; digits may be grouped in threes by spaces. Superscripts, `^`, middle
/// dots, `*`, the minus sign of print and its spaces are read, so that whatever [`super::Printer`]
/// prints can be read again. Nothing is ever rounded.
///
/// # Errors
/// When the text is not one finite number followed by known units.
pub fn parse(text: &str) -> Result<Quantity, QuantityError> {
    let span = trimmed(text);
    if span.is_empty() {
        return Err(error("expected a number with its unit, found nothing", span, None));
    }
    let number = number(text, span.start)?;
    let written = &text[number.end..span.end];
    let (value, dimension) = match feet_and_inches(text, &number, span.end)? {
        Some(length) => (length, Dimension::LENGTH),
        None => {
            let unit = unit(written, number.end)?;
            (number.value * unit.factor, unit.dimension)
        }
    };
    let lost = value.abs() < f64::MIN_POSITIVE && number.value.abs() > 0.0;
    if !value.is_finite() || lost {
        let size = if lost { "small" } else { "large" };
        return Err(error(format!("`{}` is too {size} to compute with", text.trim()), span, None));
    }
    // Adding zero turns -0 into 0.
    Ok(Quantity { value: value + 0.0, dimension })
}

/// Reads a value of a kind, in SI base units.
///
/// # Errors
/// As [`parse`], and when the dimension is not that of `kind`; the message then says what was given and
/// what was expected.
pub fn parse_as(text: &str, kind: Kind) -> Result<f64, QuantityError> {
    parse(text)?.as_kind(kind, text)
}

/// Reads a unit alone, e.g. `kN m`, `mm²`, for the `units` block of a project.
///
/// # Errors
/// When the text is not made of known units.
pub fn parse_unit(text: &str) -> Result<Unit, QuantityError> {
    let span = trimmed(text);
    if span.is_empty() {
        return Err(error("expected a unit, found nothing", span, None));
    }
    unit(&text[span.clone()], span.start)
}

impl Quantity {
    /// The value, if the quantity is of the dimension of `kind`; `written` is how the file wrote it, for
    /// the message. A density may be given as a weight per volume; it is divided by the standard
    /// acceleration of free fall.
    ///
    /// # Errors
    /// Names the given and the expected dimension.
    pub fn as_kind(self, kind: Kind, written: &str) -> Result<f64, QuantityError> {
        let expected = kind.dimension();
        if self.dimension == expected {
            return Ok(self.value);
        }
        if kind == Kind::MassDensity && self.dimension == Dimension::WEIGHT_DENSITY {
            return Ok(self.value / STANDARD_GRAVITY);
        }
        let span = trimmed(written);
        let shown = &written[span.clone()];
        let number = number(written, span.start).map_or("1", |n| written[span.start..n.end].trim());
        let example = match kind.usual_unit() {
            "" => number.to_owned(),
            "°" => format!("{number}°"),
            unit => format!("{number} {unit}"),
        };
        let message = format!(
            "`{shown}` is {}, expected {} such as `{example}`",
            self.dimension.name_with_article(),
            kind.description(),
        );
        Err(error(message, span, mismatch_hint(self.dimension, expected, shown)))
    }
}

fn mismatch_hint(given: Dimension, expected: Dimension, shown: &str) -> Option<String> {
    if given * Dimension::ACCELERATION == expected {
        return Some(
            "a mass is not yet a force: multiply it by the acceleration of free fall, 9.80665 m/s², \
             and write it in kN (pounds: `lb` is the force, `lbm` the mass)"
                .into(),
        );
    }
    if given == expected * Dimension::ACCELERATION {
        return Some("pounds as a mass are written `lbm`; `lb` is the force".into())
            .filter(|_| shown.contains("lb"));
    }
    (given == Dimension::NONE).then(|| "write the unit behind the number".into())
}

struct Number {
    value: f64,
    /// Byte of the text behind the number.
    end: usize,
}

/// `3 ft 6 in`, `3' 6"`, `3'-6"`: feet, then inches. The sign counts for both.
fn feet_and_inches(text: &str, feet: &Number, end: usize) -> Result<Option<f64>, QuantityError> {
    let behind = text[feet.end..end].trim_start_matches(is_blank);
    let Some(rest) = ["ft", "'", "′"].iter().find_map(|foot| behind.strip_prefix(foot)) else {
        return Ok(None);
    };
    let rest = rest.trim_start_matches(|c: char| is_blank(c) || c == '-');
    if !rest.starts_with(|c: char| c.is_ascii_digit()) {
        return Ok(None);
    }
    let start = end - rest.len();
    let inches = number(text, start)?;
    if !["in", "\"", "″"].contains(&text[inches.end..end].trim_matches(is_blank)) {
        let message = "feet are followed by inches alone, as in `3 ft 6 in`";
        return Err(error(message, start..end, None));
    }
    let sign = if text[..feet.end].contains(['-', '\u{2212}']) { -1.0 } else { 1.0 };
    let (foot, inch) = (0.3048, 0.0254);
    Ok(Some(sign * (feet.value.abs() * foot + inches.value * inch)))
}

/// Reads the number that begins at byte `start`.
fn number(text: &str, start: usize) -> Result<Number, QuantityError> {
    let mut plain = String::new();
    let mut rest = &text[start..];
    if let Some(behind) = rest.strip_prefix(['-', '\u{2212}']) {
        plain.push('-');
        rest = behind;
    } else if let Some(behind) = rest.strip_prefix('+') {
        rest = behind;
    }
    rest = take_whole_part(rest, &mut plain);
    if let Some(behind) = rest.strip_prefix('.')
        && (behind.starts_with(|c: char| c.is_ascii_digit()) || ends_in_digit(&plain))
    {
        plain.push('.');
        rest = take_digits(behind, &mut plain);
    }
    if !plain.contains(|c: char| c.is_ascii_digit()) {
        let message = format!("expected a number, found `{}`", text[start..].trim());
        return Err(error(message, start..text.len(), None));
    }
    rest = take_exponent(rest, &mut plain);
    let end = text.len() - rest.len();
    if rest.starts_with(',') {
        let hint = "the decimal mark is a point, and thousands are grouped by spaces";
        let message = format!("`{}` has a comma in its number", text.trim());
        return Err(error(message, end..end + 1, Some(hint.into())));
    }
    let value = plain.parse::<f64>().ok().filter(|value| value.is_finite());
    let nought = || plain.split('e').next().is_none_or(|m| !m.contains(|c| matches!(c, '1'..='9')));
    match value {
        Some(value) if value.abs() > 0.0 || nought() => Ok(Number { value, end }),
        Some(_) => Err(error("this number is too small to compute with", start..end, None)),
        None => Err(error("this number is too large to compute with", start..end, None)),
    }
}

/// Digits, in groups of three where there are blanks between them.
fn take_whole_part<'t>(text: &'t str, plain: &mut String) -> &'t str {
    let first = leading_digits(text);
    let mut rest = take_digits(text, plain);
    while (1..=3).contains(&first) {
        let mut chars = rest.chars();
        let blank = chars.next().is_some_and(is_blank);
        let group = chars.as_str();
        if !blank || leading_digits(group) != 3 {
            break;
        }
        rest = take_digits(group, plain);
    }
    rest
}

fn take_digits<'t>(text: &'t str, plain: &mut String) -> &'t str {
    let (digits, rest) = text.split_at(leading_digits(text));
    plain.push_str(digits);
    rest
}

fn leading_digits(text: &str) -> usize {
    text.bytes().take_while(u8::is_ascii_digit).count()
}

fn ends_in_digit(text: &str) -> bool {
    text.ends_with(|c: char| c.is_ascii_digit())
}

/// `e-5`, `E+3`, `×10⁻⁵`, `×10^-5`; nothing where none of these stands.
fn take_exponent<'t>(text: &'t str, plain: &mut String) -> &'t str {
    if let Some(raised) = text.trim_start_matches(is_blank).strip_prefix('×') {
        let raised = raised.trim_start_matches(is_blank);
        let Some(raised) = raised.strip_prefix("10") else { return text };
        let (exponent, rest) = match raised.strip_prefix('^') {
            Some(behind) => signed_digits(behind),
            None => superscript_digits(raised),
        };
        if ends_in_digit(&exponent) {
            plain.push('e');
            plain.push_str(&exponent);
            return rest;
        }
    } else if let Some(behind) = text.strip_prefix(['e', 'E']) {
        let (exponent, rest) = signed_digits(behind);
        if ends_in_digit(&exponent) {
            plain.push('e');
            plain.push_str(&exponent);
            return rest;
        }
    }
    text
}

fn signed_digits(text: &str) -> (String, &str) {
    let mut exponent = String::new();
    let rest = text.strip_prefix(['-', '\u{2212}']);
    exponent.extend(rest.map(|_| '-'));
    let rest = rest.or_else(|| text.strip_prefix('+')).unwrap_or(text);
    let rest = take_digits(rest, &mut exponent);
    (exponent, rest)
}

fn superscript_digits(text: &str) -> (String, &str) {
    let plain = |c: char| match c {
        '⁻' => Some('-'),
        _ => "0123456789".chars().nth(SUPERSCRIPTS.iter().position(|digit| *digit == c)?),
    };
    let exponent: String = text.chars().map_while(plain).collect();
    let width: usize = text.chars().take(exponent.len()).map(char::len_utf8).sum();
    (exponent, &text[width..])
}

fn error(message: impl Into<String>, range: Range<usize>, hint: Option<String>) -> QuantityError {
    QuantityError { message: message.into(), range, hint }
}
