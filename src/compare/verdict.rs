//! A comparison in one line.

use super::{Changes, CheckChange, What};

impl Changes {
    /// What a reader asks first: outcomes, then how much of the input and of what governs changed.
    #[must_use]
    pub fn verdict(&self) -> String {
        let counts = &self.counts;
        if self.is_empty() {
            let all = counts.items.all()
                + counts.values.all()
                + counts.reactions.all()
                + counts.checks.all();
            return format!("no change: all {all} things compared are the same");
        }
        if self.is_below() {
            return "no change that passes the thresholds".to_owned();
        }
        let mut outcomes = self.outcomes();
        if outcomes.is_empty() && counts.checks.all() > 0 {
            outcomes.push("no outcome of a check changed".to_owned());
        }
        let mut input = vec![of(counts.items.listed, counts.items.all(), "things of the input")];
        if counts.texts.listed > 0 {
            input.push(number(counts.texts.listed, "text file", "text files"));
        }
        let mut governs =
            vec![of(counts.values.listed, counts.values.all(), "governing values of members")];
        if counts.reactions.listed > 0 {
            governs.push(of(counts.reactions.listed, counts.reactions.all(), "of reactions"));
        }
        let parts = [outcomes.join(", "), changed(&input), changed(&governs)];
        parts.iter().filter(|part| !part.is_empty()).cloned().collect::<Vec<_>>().join("; ")
    }

    /// How outcomes of checks moved, each sort counted; empty where none did.
    #[must_use]
    pub fn outcomes(&self) -> Vec<String> {
        let count = |is: &dyn Fn(&CheckChange) -> bool| {
            self.checks.iter().filter(|change| is(change)).count()
        };
        let flipped = |change: &CheckChange| change.what == What::Changed && change.flipped;
        let sorts = [
            (count(&|change| flipped(change) && change.worse), "worsened"),
            (count(&|change| flipped(change) && !change.worse), "improved"),
        ];
        let mut out: Vec<String> = sorts
            .iter()
            .filter(|(count, _)| *count > 0)
            .map(|(count, word)| format!("{} {word}", number(*count, "outcome", "outcomes")))
            .collect();
        let bad = count(&|change| change.what == What::New && change.worse);
        if bad > 0 {
            out.push(format!("{} not satisfied", number(bad, "new check", "new checks")));
        }
        let gone = count(&|change| change.what == What::Vanished);
        if gone > 0 {
            out.push(format!("{} gone", number(gone, "check", "checks")));
        }
        out
    }
}

fn of(listed: usize, all: usize, what: &str) -> String {
    format!("{listed} of {all} {what}")
}

fn changed(parts: &[String]) -> String {
    format!("{} changed", parts.join(" and "))
}

fn number(count: usize, one: &str, several: &str) -> String {
    format!("{count} {}", if count == 1 { one } else { several })
}
