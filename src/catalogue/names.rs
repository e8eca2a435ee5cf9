//! How names of sections and grades are compared.

/// How many names a hint offers.
const OFFERED: usize = 3;

/// Capitals without spaces, `X` for a multiplication sign, no idle zeros behind a decimal point, and
/// the letters of a section in front: `HE 200 A` is `HEA200`, `203x203x46 UC` is `UC203X203X46`.
pub(super) fn key(name: &str) -> String {
    let plain: String = name
        .to_uppercase()
        .chars()
        .filter(|c| !c.is_whitespace())
        .map(|c| if matches!(c, '×' | '*') { 'X' } else { c })
        .collect();
    letters_first(&without_idle_zeros(&plain))
}

/// `114.30` and `5.0` to `114.3` and `5`.
fn without_idle_zeros(text: &str) -> String {
    let mut out = String::new();
    for part in text.split_inclusive(|c: char| !c.is_ascii_digit() && c != '.') {
        let end = part.trim_end_matches(|c: char| !c.is_ascii_digit() && c != '.');
        let number =
            if end.contains('.') { end.trim_end_matches('0').trim_end_matches('.') } else { end };
        out.push_str(number);
        out.push_str(&part[end.len()..]);
    }
    out
}

fn letters_first(text: &str) -> String {
    let wide = ["A", "B", "M"].into_iter().find_map(|series| {
        let size = text.strip_prefix("HE")?.strip_suffix(series)?;
        size.chars().all(|c| c.is_ascii_digit()).then(|| format!("HE{series}{size}"))
    });
    let trailing = ["UB", "UC", "PFC"].into_iter().find_map(|series| {
        let size = text.strip_suffix(series)?;
        size.starts_with(|c: char| c.is_ascii_digit()).then(|| format!("{series}{size}"))
    });
    wide.or(trailing).unwrap_or_else(|| text.to_owned())
}

/// The letters before the first figure.
pub(super) fn letters(key: &str) -> &str {
    &key[..key.find(|c: char| c.is_ascii_digit()).unwrap_or(key.len())]
}

/// The names most like `wanted`: same letters first, then the nearest numbers, in order.
pub(super) fn nearest(wanted: &str, names: impl Iterator<Item = String>) -> Vec<String> {
    let wanted = key(wanted);
    let mut ranked: Vec<(f64, String)> = names
        .map(|name| (distance(&wanted, &key(&name)), name))
        // Beyond, not even the letters are alike.
        .filter(|(distance, _)| *distance < 30.0)
        .collect();
    ranked.sort_by(|a, b| a.0.total_cmp(&b.0));
    ranked.into_iter().take(OFFERED).map(|(_, name)| name).collect()
}

/// 10 for each letter in front that differs, then up to 1 for each number, the first counting most.
fn distance(a: &str, b: &str) -> f64 {
    let (x, y) = (letters(a), letters(b));
    let same = x.chars().zip(y.chars()).take_while(|(x, y)| x == y).count();
    let differing = x.chars().count().max(y.chars().count()) - same;
    let mut sum = 10.0 * f64::from(u32::try_from(differing).unwrap_or(u32::MAX));
    let (m, n) = (numbers(a), numbers(b));
    let mut weight = 1.0;
    for i in 0..m.len().max(n.len()) {
        sum += weight
            * match (m.get(i), n.get(i)) {
                (Some(p), Some(q)) => (p - q).abs() / (p + q).max(f64::MIN_POSITIVE),
                _ => 0.5,
            };
        weight *= 0.1;
    }
    // The same letters and numbers in another arrangement still differ.
    sum + if a == b { 0.0 } else { 1e-6 }
}

fn numbers(text: &str) -> Vec<f64> {
    text.split(|c: char| !c.is_ascii_digit() && c != '.')
        .filter_map(|part| part.parse().ok())
        .collect()
}
