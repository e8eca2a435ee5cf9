//! A committed record against the one that the present program computes from the same input.

use super::{Side, Thresholds, compare};
use crate::record::Record;

/// Says in one line how a committed record differs from the project computed anew; `None` where it does
/// not.
#[must_use]
pub fn differs(committed: &[u8], computed: &Record, label: &str) -> Option<String> {
    let Ok(text) = std::str::from_utf8(committed) else {
        return Some(format!("The record committed with {label} is not text."));
    };
    let record = match Record::from_json(text) {
        Ok(record) => record,
        Err(problem) => return Some(format!("The record committed with {label}: {problem}.")),
    };
    if record.fingerprint != computed.fingerprint {
        return Some(format!("The package committed with {label} was issued from other input."));
    }
    let side = |label, record| Side { label, record, sources: None };
    let changes = compare(&side("", &record), &side("", computed), &Thresholds::default());
    if changes.is_empty() {
        return None;
    }
    let (was, is) = (&record.program.version, &computed.program.version);
    let by = if was == is { String::new() } else { format!(", made by version {was},") };
    Some(format!(
        "The record committed with {label}{by} differs from what this program computes from the same \
         input: the comparison is between values computed anew."
    ))
}
