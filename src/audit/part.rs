//! The projects of one machine where several share the work.

use std::str::FromStr;

use sha2::{Digest, Sha256};

/// Parts at most.
const MOST_PARTS: usize = 256;

/// One of several parts, written `3/8`.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Part {
    number: usize,
    of: usize,
}

impl Part {
    /// Keeps what belongs to this part, in its order. All machines must see the same names.
    #[must_use]
    pub fn keep<T>(self, all: Vec<T>, name: impl Fn(&T) -> &str) -> Vec<T> {
        let names: Vec<&str> = all.iter().map(name).collect();
        let parts = parts(&names, self.of);
        all.into_iter()
            .zip(parts)
            .filter(|(_, part)| *part == self.number)
            .map(|(one, _)| one)
            .collect()
    }
}

impl FromStr for Part {
    type Err = String;

    fn from_str(text: &str) -> Result<Self, String> {
        let read = |text: &str| {
            Some(text).filter(|text| text.bytes().all(|byte| byte.is_ascii_digit()))?.parse().ok()
        };
        let form = || "expected a part and their number, such as `3/8`".to_owned();
        let (number, of) = text.split_once('/').ok_or_else(form)?;
        let (number, of): (usize, usize) = read(number).zip(read(of)).ok_or_else(form)?;
        match of {
            0 => Err("there is no division into 0 parts".to_owned()),
            _ if of > MOST_PARTS => Err(format!("there are at most {MOST_PARTS} parts")),
            _ if number == 0 => Err("parts are counted from 1".to_owned()),
            _ if number > of => Err(format!("there is no part {number} of {of}")),
            _ => Ok(Self { number, of }),
        }
    }
}

impl std::fmt::Display for Part {
    fn fmt(&self, out: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        write!(out, "{}/{}", self.number, self.of)
    }
}

/// The part, counted from 1, to which each name belongs.
///
/// A name goes to the part that it ranks highest by a hash of both, among those that are not full. So no part has
/// more than its share, and where a project comes or goes most others stay where they were.
#[must_use]
pub fn parts(names: &[&str], of: usize) -> Vec<usize> {
    let full = names.len().div_ceil(of.max(1));
    let mut order: Vec<usize> = (0..names.len()).collect();
    order.sort_by_cached_key(|index| (hash(names[*index], 0), names[*index]));
    let mut count = vec![0; of.max(1)];
    let mut out = vec![1; names.len()];
    for index in order {
        let room = (1..=count.len()).filter(|part| count[part - 1] < full);
        if let Some(part) = room.max_by_key(|part| hash(names[index], *part)) {
            count[part - 1] += 1;
            out[index] = part;
        }
    }
    out
}

/// The same on every machine.
fn hash(name: &str, part: usize) -> [u8; 32] {
    let mut hash = Sha256::new();
    hash.update((part as u64).to_le_bytes());
    hash.update(name.as_bytes());
    hash.finalize().into()
}
