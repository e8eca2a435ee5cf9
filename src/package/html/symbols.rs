//! Symbols in running text.

use super::escaped;

/// Letters that begin a symbol with a subscript.
const SYMBOLS: [&str; 21] = [
    "h", "b", "N", "V", "M", "T", "I", "W", "A", "E", "G", "F", "f", "i", "d", "w", "t", "r", "y",
    "z", "theta",
];

/// Text with `M_y`, `theta_y`, `W_el_y` and the like set as symbols with subscripts.
pub(super) fn symbols(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    let mut word = String::new();
    for c in text.chars().chain(std::iter::once('\0')) {
        if c.is_alphanumeric() || c == '_' {
            word.push(c);
            continue;
        }
        if !word.is_empty() {
            out += &symbol(&word);
            word.clear();
        }
        if c != '\0' {
            out += &escaped(c.encode_utf8(&mut [0; 4]));
        }
    }
    out
}

fn symbol(word: &str) -> String {
    match word.split_once('_') {
        Some((letter, index))
            if SYMBOLS.contains(&letter) && !index.is_empty() && index.chars().count() <= 8 =>
        {
            let letter = if letter == "theta" { "θ" } else { letter };
            let index = index.replace('_', ",");
            format!("<i>{letter}</i><sub>{}</sub>", escaped(&index))
        }
        _ => escaped(word),
    }
}
