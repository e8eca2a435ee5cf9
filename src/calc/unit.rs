//! How far a unit reaches behind a number.
//!
//! A unit is made of symbols that follow one blank or a middle dot (`kN m`), or a `/` written without blanks
//! (`kN/m2`); ` / ` with blanks divides the formula. An exponent belongs to its symbol: `5 mm^2` is five
//! square millimetres, `(5 mm)^2` is twenty-five.

use crate::quantity::parse_unit;

/// Words of the language that can follow a number.
pub(super) const KEYWORDS: [&str; 6] = ["and", "or", "not", "if", "then", "else"];

/// What follows a number.
pub(super) enum Follows {
    /// Bytes that the unit takes up, blanks before it counted; 0 of no unit.
    Unit(usize),
    /// A word that is no unit, from and to.
    Unknown(usize, usize),
}

/// The unit at the beginning of `text`, which stands right behind a number.
pub(super) fn unit_after_number(text: &str) -> Follows {
    let start = blanks(text);
    let Some(first) = symbol(&text[start..]) else { return Follows::Unit(0) };
    let word = &text[start..start + first];
    if !known(word) {
        if KEYWORDS.contains(&word) {
            return Follows::Unit(0);
        }
        return Follows::Unknown(start, start + first);
    }
    let mut end = start + first + exponent(&text[start + first..]);
    loop {
        let rest = &text[end..];
        if let Some(tail) = rest.strip_prefix('/') {
            match symbol(tail).filter(|length| known(&tail[..*length])) {
                Some(length) => end += 1 + length + exponent(&tail[length..]),
                None => return Follows::Unit(end),
            }
            continue;
        }
        let gap = blanks(rest);
        let joined = rest[gap..].strip_prefix(['·', '⋅']).map(|tail| {
            let dot = rest.len() - gap - tail.len();
            gap + dot + blanks(tail)
        });
        let gap = joined.unwrap_or(gap);
        if gap == 0 {
            return Follows::Unit(end);
        }
        let tail = &rest[gap..];
        match symbol(tail) {
            Some(length) if known(&tail[..length]) => {
                end += gap + length + exponent(&tail[length..]);
            }
            Some(length) if !KEYWORDS.contains(&&tail[..length]) => {
                return Follows::Unknown(end + gap, end + gap + length);
            }
            _ => return feet_and_inches(text, start, first, end),
        }
    }
}

/// `3 ft 6 in`: the inches belong to the feet.
fn feet_and_inches(text: &str, start: usize, first: usize, end: usize) -> Follows {
    let feet = &text[start..start + first] == "ft" && end == start + first;
    let rest = &text[end..];
    let gap = blanks(rest);
    let digits = rest[gap..].len()
        - rest[gap..].trim_start_matches(|c: char| c.is_ascii_digit() || c == '.').len();
    let tail = &rest[gap + digits..];
    let inches = blanks(tail);
    match symbol(&tail[inches..]) {
        Some(2) if feet && digits > 0 && tail[inches..].starts_with("in") => {
            Follows::Unit(end + gap + digits + inches + 2)
        }
        _ => Follows::Unit(end),
    }
}

fn blanks(text: &str) -> usize {
    text.len() - text.trim_start_matches([' ', '\t', '\u{a0}', '\u{2009}', '\u{202f}']).len()
}

/// Length of a word made of letters, or of a sign that stands for a unit.
fn symbol(text: &str) -> Option<usize> {
    let first = text.chars().next()?;
    if matches!(first, '%' | '‰') {
        return Some(first.len_utf8());
    }
    let mut end = 0;
    for (at, c) in text.char_indices() {
        if !(c.is_alphabetic() || c == '_' || (c == '°' && at == 0)) {
            break;
        }
        end = at + c.len_utf8();
    }
    // `f2_x` is a name, not the unit f².
    (end > 0).then_some(end)
}

/// Length of `2`, `²`, `^2`, `^-1` or `⁻¹`.
fn exponent(text: &str) -> usize {
    let digits =
        |text: &str| text.len() - text.trim_start_matches(|c: char| c.is_ascii_digit()).len();
    let raised = |c: char| matches!(c, '⁻' | '⁰' | '¹' | '²' | '³' | '⁴'..='⁹');
    if let Some(tail) = text.strip_prefix('^') {
        let sign = usize::from(tail.starts_with('-'));
        let count = digits(&tail[sign..]);
        return if count > 0 { 1 + sign + count } else { 0 };
    }
    let count = digits(text);
    if count > 0 { count } else { text.len() - text.trim_start_matches(raised).len() }
}

fn known(word: &str) -> bool {
    parse_unit(word).is_ok()
}
