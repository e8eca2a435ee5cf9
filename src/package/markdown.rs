//! Escaping text for Markdown.

use std::fmt::Write;

/// Text that comes out of Markdown as it went in, in a paragraph or a table's cell.
#[must_use]
pub fn escaped(text: &str) -> String {
    let mut out = String::with_capacity(text.len() + 8);
    let mut before: Option<char> = None;
    let mut rest = text.chars().peekable();
    while let Some(c) = rest.next() {
        match c {
            '\n' | '\r' | '\t' => out.push(' '),
            '\\' | '`' | '*' | '[' | ']' | '<' | '|' | '$' | '~' => {
                let _ = write!(out, "\\{c}");
            }
            // Between letters or digits an underscore is only an underscore: `M_y` stays readable.
            '_' => {
                let inside = before.is_some_and(char::is_alphanumeric)
                    && rest.peek().is_some_and(|next| next.is_alphanumeric());
                out.push_str(if inside { "_" } else { "\\_" });
            }
            '&' if rest.peek().is_some_and(|next| next.is_alphanumeric() || *next == '#') => {
                out.push_str("\\&");
            }
            // At the beginning these would make a heading, a quotation, a list or a rule.
            '#' | '>' | '+' | '-' | '=' if before.is_none() => {
                let _ = write!(out, "\\{c}");
            }
            '.' | ')' if is_number(&out) && rest.peek().is_none_or(|c| c.is_whitespace()) => {
                let _ = write!(out, "\\{c}");
            }
            _ => out.push(c),
        }
        before = Some(c);
    }
    out
}

/// Digits alone before a point or bracket and a space would begin a numbered list.
fn is_number(so_far: &str) -> bool {
    !so_far.is_empty() && so_far.chars().all(|c| c.is_ascii_digit())
}

/// A fence longer than any run of backticks in the text.
pub(super) fn fence(text: &str) -> String {
    let mut longest = 0;
    let mut run = 0;
    for c in text.chars() {
        run = if c == '`' { run + 1 } else { 0 };
        longest = longest.max(run);
    }
    "`".repeat(longest.max(2) + 1)
}
