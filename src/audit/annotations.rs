//! Findings in the forms in which git hosts show them beside the lines of a change.

use std::collections::BTreeSet;

use serde_json::{Value, json};

use super::{Finding, Level, Report};
use crate::files::digest;

impl Report {
    /// Workflow commands, one a line: `::error file=…,line=…,title=…::message`.
    #[must_use]
    pub fn workflow_commands(&self) -> String {
        self.findings().iter().map(|finding| workflow_command(finding) + "\n").collect()
    }

    /// A code quality report: a JSON array of findings with their place and a fingerprint.
    #[must_use]
    pub fn code_quality(&self) -> String {
        let mut seen = BTreeSet::new();
        let issues: Vec<Value> = self
            .findings()
            .iter()
            .filter_map(|finding| {
                let path = finding.file.as_deref().unwrap_or("project.yaml");
                let line = finding.line.unwrap_or(1);
                let said = format!("{}: {}", finding.title, finding.message);
                let id = digest(format!("{}\n{path}\n{line}\n{said}", finding.code).as_bytes());
                // Two issues of one fingerprint would be told apart by nobody.
                seen.insert(id.clone()).then(|| {
                    json!({
                        "description": said,
                        "check_name": format!("spanfolio-{}", finding.code),
                        "fingerprint": id,
                        "severity": match finding.level {
                            Level::Error => "critical",
                            Level::Warning => "minor",
                            Level::Notice => "info",
                        },
                        "location": {"path": path, "lines": {"begin": line}},
                    })
                })
            })
            .collect();
        format!("{:#}\n", Value::Array(issues))
    }
}

fn workflow_command(finding: &Finding) -> String {
    let command = match finding.level {
        Level::Error => "error",
        Level::Warning => "warning",
        Level::Notice => "notice",
    };
    let number =
        |name: &str, number: Option<usize>| number.map(|number| format!("{name}={number}"));
    let properties: Vec<String> = finding
        .file
        .iter()
        .map(|file| format!("file={}", property(file)))
        .chain(number("line", finding.line))
        .chain(number("col", finding.column))
        .chain(std::iter::once(format!("title={}", property(&finding.title))))
        .collect();
    format!("::{command} {}::{}", properties.join(","), data(&finding.message))
}

/// The message of a command: what would end its line.
fn data(text: &str) -> String {
    text.replace('%', "%25").replace('\r', "%0D").replace('\n', "%0A")
}

/// The value of a property: besides, what would end the value.
fn property(text: &str) -> String {
    data(text).replace(':', "%3A").replace(',', "%2C")
}
