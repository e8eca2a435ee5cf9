//! Mathematics → LaTeX as the usual git hosts and our page read it.

use super::Math;

/// Letters of Greek by name.
const GREEK: [&str; 33] = [
    "alpha", "beta", "gamma", "delta", "epsilon", "zeta", "eta", "theta", "iota", "kappa",
    "lambda", "mu", "nu", "xi", "pi", "rho", "sigma", "tau", "upsilon", "phi", "chi", "psi",
    "omega", "Gamma", "Delta", "Theta", "Lambda", "Xi", "Pi", "Sigma", "Phi", "Psi", "Omega",
];

/// LaTeX without its delimiters.
#[must_use]
pub fn latex(math: &Math) -> String {
    let mut out = String::new();
    write(&mut out, math);
    out
}

fn write(out: &mut String, math: &Math) {
    match math {
        Math::Symbol(name) => *out += &symbol(name),
        Math::Value(number, unit) => {
            *out += &self::number(number);
            *out += &self::unit(unit);
        }
        Math::Text(text) => *out += &format!("\\text{{{}}}", escaped(text)),
        Math::Sign(sign) => *out += spelled(sign),
        Math::Row(parts) => parts.iter().for_each(|part| write(out, part)),
        Math::Brackets(inner) => around(out, "\\left(", inner, "\\right)"),
        Math::Absolute(inner) => around(out, "\\left\\lvert ", inner, "\\right\\rvert "),
        Math::Floor(inner) => around(out, "\\left\\lfloor ", inner, "\\right\\rfloor "),
        Math::Ceil(inner) => around(out, "\\left\\lceil ", inner, "\\right\\rceil "),
        Math::Root(inner) => around(out, "\\sqrt{", inner, "}"),
        Math::Fraction(above, below) => {
            around(out, "\\frac{", above, "}");
            around(out, "{", below, "}");
        }
        Math::Power(base, exponent) => {
            around(out, "{", base, "}");
            around(out, "^{", exponent, "}");
        }
        Math::Named(name, inner) => {
            *out += &named(name);
            around(out, "\\left(", inner, "\\right)");
        }
        Math::Cases(rows) => {
            *out += "\\begin{cases}";
            for (index, (value, condition)) in rows.iter().enumerate() {
                if index > 0 {
                    *out += " \\\\ ";
                }
                write(out, value);
                *out += " & ";
                write(out, condition);
            }
            *out += "\\end{cases}";
        }
    }
}

fn around(out: &mut String, before: &str, inner: &Math, behind: &str) {
    *out += before;
    write(out, inner);
    *out += behind;
}

fn named(name: &str) -> String {
    match name {
        "min" | "max" | "sin" | "cos" | "tan" | "exp" | "ln" => format!("\\{name}"),
        "asin" | "acos" | "atan" => format!("\\arc{}", &name[1..]),
        "log10" => "\\log_{10}".to_owned(),
        other => format!("\\operatorname{{{other}}}"),
    }
}

fn spelled(sign: &str) -> &str {
    match sign {
        "·" => " \\cdot ",
        "<" => " < ",
        ">" => " > ",
        "≤" => " \\le ",
        "≥" => " \\ge ",
        "≠" => " \\ne ",
        "∧" => " \\;\\land\\; ",
        "∨" => " \\;\\lor\\; ",
        "¬" => "\\lnot ",
        "→" => " \\to ",
        "," => ",\\; ",
        ";" => ";\\; ",
        "=" => " = ",
        "+" => " + ",
        "-" => " - ",
        other => other,
    }
}

/// `W_el_y` → `W_{\mathrm{el},y}`, `lambda_bar_LT` → `\bar{\lambda}_{\mathrm{LT}}`, `span` → `\mathrm{span}`.
pub(super) fn symbol(name: &str) -> String {
    let mut parts = name.split('_').filter(|part| !part.is_empty());
    let (base, digits) = greek_with_digits(parts.next().unwrap_or(name));
    let base = letters(base);
    let mut rest = parts.peekable();
    let barred = rest.next_if(|part| *part == "bar").is_some();
    let base = if barred { format!("\\bar{{{base}}}") } else { base };
    // A letter has one place for all its indices.
    let indices: Vec<String> = digits.into_iter().chain(rest).map(letters).collect();
    if indices.is_empty() { base } else { format!("{base}_{{{}}}", indices.join(",")) }
}

/// `sigma1` → `sigma`, `1`; other words whole.
fn greek_with_digits(word: &str) -> (&str, Option<&str>) {
    let stem = word.trim_end_matches(|c: char| c.is_ascii_digit());
    if stem.len() < word.len() && GREEK.contains(&stem) {
        (stem, Some(&word[stem.len()..]))
    } else {
        (word, None)
    }
}

/// One letter leans, words stand upright; Greek by name, followed by digits or not.
fn letters(word: &str) -> String {
    let (stem, digits) = greek_with_digits(word);
    if GREEK.contains(&stem) {
        return match digits {
            None => format!("\\{stem}"),
            Some(digits) => format!("\\{stem}_{{{digits}}}"),
        };
    }
    if word.chars().count() == 1 || word.chars().all(|c| c.is_ascii_digit()) {
        return word.to_owned();
    }
    format!("\\mathrm{{{}}}", escaped(word))
}

/// A number as printed: thin spaces, the minus of print, `×10⁻⁵`; or as written, `1.2e-5`.
fn number(text: &str) -> String {
    if let Some((mantissa, exponent)) = text.split_once(['e', 'E']) {
        let exponent = exponent.trim_start_matches('+');
        return format!("{} \\times 10^{{{exponent}}}", number(mantissa));
    }
    let mut out = String::new();
    let mut raised = String::new();
    for c in text.chars() {
        match c {
            '\u{2212}' => out.push('-'),
            '\u{2009}' => out += "\\,",
            '\u{a0}' => out.push('~'),
            '×' => out += " \\times ",
            '–' => out += "\\text{–}",
            c => match plain_digit(c) {
                Some(digit) => raised.push(digit),
                None => out.push(c),
            },
        }
    }
    if !raised.is_empty() {
        out += &format!("^{{{raised}}}");
    }
    out
}

/// A unit set upright behind a thin space; degrees and per cent follow at once.
fn unit(label: &str) -> String {
    let mut inner = String::new();
    let mut raised = String::new();
    for c in label.chars().chain(std::iter::once('\0')) {
        if let Some(digit) = plain_digit(c) {
            raised.push(digit);
            continue;
        }
        if !raised.is_empty() {
            inner += &format!("^{{{raised}}}");
            raised.clear();
        }
        match c {
            '\0' => {}
            ' ' | '·' => inner += "\\,",
            '°' => inner += "^{\\circ}",
            '%' => inner += "\\%",
            '_' => inner += "\\_",
            c => inner.push(c),
        }
    }
    match label {
        "" => String::new(),
        "°" => "^{\\circ}".to_owned(),
        "%" => "\\,\\%".to_owned(),
        _ => format!("\\,\\mathrm{{{inner}}}"),
    }
}

fn plain_digit(c: char) -> Option<char> {
    const RAISED: &str = "⁰¹²³⁴⁵⁶⁷⁸⁹";
    match RAISED.chars().position(|raised| raised == c) {
        Some(digit) => char::from_digit(u32::try_from(digit).ok()?, 10),
        None => (c == '⁻').then_some('-'),
    }
}

/// Text that LaTeX shows as it is.
fn escaped(text: &str) -> String {
    let mut out = String::new();
    for c in text.chars() {
        match c {
            '\\' | '~' | '^' | '`' | '<' | '>' | '|' | '$' => out.push(' '),
            '{' | '}' | '&' | '#' | '%' | '_' => {
                out.push('\\');
                out.push(c);
            }
            c => out.push(c),
        }
    }
    out
}
