//! Two texts held against each other, numbers within round-off being the same.

/// How two texts compare.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Sameness {
    Same,
    /// The same but for so many numbers, which differ by less than [`NEAR`].
    RoundOff(usize),
    /// The first line that differs, counted from 1.
    PartsAt(usize),
}

/// Share of the larger by which numbers computed on another processor may differ.
const NEAR: f64 = 1e-9;

/// Compares line by line.
pub(super) fn held(committed: &str, expected: &str) -> Sameness {
    let (mut left, mut right) = (committed.split('\n'), expected.split('\n'));
    let mut differing = 0;
    for line in 1.. {
        match (left.next(), right.next()) {
            (None, None) => break,
            (Some(a), Some(b)) if a == b => {}
            (Some(a), Some(b)) => match numbers_apart(a, b) {
                Some(count) => differing += count,
                None => return Sameness::PartsAt(line),
            },
            _ => return Sameness::PartsAt(line),
        }
    }
    if differing == 0 { Sameness::Same } else { Sameness::RoundOff(differing) }
}

/// How many numbers of two lines differ by round-off; `None` where the lines differ by more.
fn numbers_apart(mut a: &str, mut b: &str) -> Option<usize> {
    let mut count = 0;
    loop {
        let (length, other) = (number(a), number(b));
        if length > 0 && other > 0 {
            let (one, two) = (&a[..length], &b[..other]);
            if one != two {
                is_near(one, two).then_some(())?;
                count += 1;
            }
            (a, b) = (&a[length..], &b[other..]);
            continue;
        }
        match (a.chars().next(), b.chars().next()) {
            (None, None) => return Some(count),
            (Some(c), Some(d)) if c == d => {
                (a, b) = (&a[c.len_utf8()..], &b[d.len_utf8()..]);
            }
            _ => return None,
        }
    }
}

fn is_near(a: &str, b: &str) -> bool {
    match (a.parse::<f64>(), b.parse::<f64>()) {
        (Ok(a), Ok(b)) => {
            a.is_finite() && b.is_finite() && (a - b).abs() <= NEAR * a.abs().max(b.abs())
        }
        _ => false,
    }
}

/// Bytes of the number that a text begins with, its sign left out; 0 where it begins with none.
fn number(text: &str) -> usize {
    let bytes = text.as_bytes();
    let digits =
        |from: usize| bytes[from..].iter().take_while(|byte| byte.is_ascii_digit()).count();
    let mut end = digits(0);
    if end == 0 {
        return 0;
    }
    if bytes.get(end) == Some(&b'.') && digits(end + 1) > 0 {
        end += 1 + digits(end + 1);
    }
    if matches!(bytes.get(end), Some(b'e' | b'E')) {
        let sign = usize::from(matches!(bytes.get(end + 1), Some(b'+' | b'-')));
        let from = (end + 1 + sign).min(bytes.len());
        if digits(from) > 0 {
            end = from + digits(from);
        }
    }
    end
}
