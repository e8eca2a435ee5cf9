//! How far the search for governing values is, for whoever shows it. Counts only; changes no result.

use std::sync::atomic::{AtomicUsize, Ordering};

static DONE: AtomicUsize = AtomicUsize::new(0);
static ALL: AtomicUsize = AtomicUsize::new(0);

/// Combinations of members looked at, and of how many.
#[must_use]
pub fn progress() -> (usize, usize) {
    (DONE.load(Ordering::Relaxed), ALL.load(Ordering::Relaxed))
}

pub(super) fn expect(count: usize) {
    ALL.fetch_add(count, Ordering::Relaxed);
}

pub(super) fn done() {
    DONE.fetch_add(1, Ordering::Relaxed);
}
