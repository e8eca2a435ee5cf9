//! Whether a committed package is up to date, and if not, why.

use serde::Serialize;
use serde_json::Value;

use super::expected::{Expected, expected};
use super::hold::{FileDifference, Held, hold, is_intact};
use super::one_line;
use crate::compare::{Changes, Side, Thresholds, compare};
use crate::diagnostic::Diagnostic;
use crate::files::{CONTENTS, Sources, contents};
use crate::package::Package;
use crate::record::Record;

/// A committed package held against the one that its project makes.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct PackageState {
    pub up_to_date: bool,
    /// Why it is out of date.
    pub reason: Option<Reason>,
    /// The reason in one line, or that it is up to date.
    pub words: String,
    /// The commit of the earlier revision that the committed package was held against.
    pub against: Option<String>,
    /// What changed, in a few lines.
    pub details: Vec<String>,
    /// Files that are not what they should be, where that is the reason.
    pub files: Vec<FileDifference>,
    /// What a reader must know besides.
    pub notes: Vec<String>,
}

/// Why a package is out of date; the first that holds.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize)]
#[serde(rename_all = "kebab-case")]
pub enum Reason {
    NoPackage,
    /// The project was changed and not issued again.
    InputChanged,
    /// Another version of the program made it, with other results.
    ProgramVersion,
    /// Files are not what the program wrote.
    EditedByHand,
    /// Its files are as they were written, and the present program of the same version writes others.
    OtherBuild,
}

impl Reason {
    /// For machines.
    #[must_use]
    pub const fn slug(self) -> &'static str {
        match self {
            Self::NoPackage => "no-package",
            Self::InputChanged => "input-changed",
            Self::ProgramVersion => "program-version",
            Self::EditedByHand => "edited-by-hand",
            Self::OtherBuild => "other-build",
        }
    }
}

const RECORD: &str = "record.json";
/// Things of the input that are named.
const MOST_THINGS: usize = 10;
/// Facts of a thing that are told.
const MOST_FACTS: usize = 3;

/// Holds the committed package of a project against the one that the project makes.
///
/// # Errors
/// Template errors of the project.
pub(super) fn state(
    record: &Record,
    sources: &Sources,
    committed: Option<Package>,
) -> Result<PackageState, Vec<Diagnostic>> {
    let committed = committed.map(with_line_feeds);
    let expected = expected(record, sources, committed.as_ref().map(|(committed, _)| committed))?;
    let Some((committed, other_line_ends)) = committed else {
        let words = "there is no package yet".to_owned();
        return Ok(out_of_date(Reason::NoPackage, words, Vec::new()));
    };
    let judge = Judge { record, sources, committed: &committed, expected: &expected };
    let mut state = judge.judged();
    if other_line_ends {
        let said = "its files were checked out with CRLF line ends, which do not count";
        state.notes.insert(0, said.to_owned());
    }
    state.against = expected.against().map(one_line);
    state.notes.extend(expected.note.map(|note| one_line(&note)));
    Ok(state)
}

/// Every file of a package that is text with LF line ends, and whether any had others: a checkout may change
/// them, and the program writes no other.
fn with_line_feeds(package: Package) -> (Package, bool) {
    let mut any = false;
    let package = package.into_iter().map(|(name, bytes)| match String::from_utf8(bytes) {
        Ok(text) if text.contains("\r\n") => {
            any = true;
            (name, text.replace("\r\n", "\n").into_bytes())
        }
        Ok(text) => (name, text.into_bytes()),
        Err(error) => (name, error.into_bytes()),
    });
    (package.collect(), any)
}

fn up_to_date(notes: Vec<String>) -> PackageState {
    let words = if notes.is_empty() {
        "the package is up to date"
    } else {
        "the package is still up to date"
    };
    PackageState {
        up_to_date: true,
        reason: None,
        words: words.to_owned(),
        against: None,
        details: Vec::new(),
        files: Vec::new(),
        notes,
    }
}

fn out_of_date(reason: Reason, words: String, details: Vec<String>) -> PackageState {
    PackageState {
        up_to_date: false,
        reason: Some(reason),
        words,
        against: None,
        details,
        files: Vec::new(),
        notes: Vec::new(),
    }
}

/// What a package says of its making; read by hand, so that a record of another form tells it too.
struct Origin {
    version: String,
    fingerprint: String,
}

impl Origin {
    fn of(package: &Package) -> Option<Self> {
        let record: Value = serde_json::from_slice(package.get(RECORD)?).ok()?;
        let text = |pointer: &str| Some(record.pointer(pointer)?.as_str()?.to_owned());
        Some(Self { version: text("/program/version")?, fingerprint: text("/fingerprint")? })
    }
}

struct Judge<'a> {
    record: &'a Record,
    sources: &'a Sources,
    /// With LF line ends.
    committed: &'a Package,
    expected: &'a Expected,
}

impl Judge<'_> {
    fn judged(&self) -> PackageState {
        if self.is_equal() {
            return up_to_date(Vec::new());
        }
        let present = &self.record.program.version;
        let Some(origin) = Origin::of(self.committed) else {
            return self.edited(&hold(self.committed, &self.expected.package));
        };
        let earlier = self.committed_record();
        if origin.fingerprint != self.record.fingerprint {
            let words = "the input was changed and not issued again".to_owned();
            let details = earlier.map(|earlier| self.input_changes(&earlier)).unwrap_or_default();
            return self.with_edits(out_of_date(Reason::InputChanged, words, details));
        }
        let (held, notes) = self.held(&origin, earlier.as_ref());
        if held.files.is_empty() {
            return up_to_date(notes);
        }
        let same_results = held.files.iter().all(|file| file.file != RECORD);
        let edited = !is_intact(self.committed);
        if origin.version != *present && !(same_results && edited) {
            let version = one_line(&origin.version);
            let words =
                format!("made by version {version}, and version {present} makes another package");
            let details = earlier.map(|earlier| vec![self.compared(&earlier).verdict()]);
            let state = out_of_date(Reason::ProgramVersion, words, details.unwrap_or_default());
            return self.with_edits(state);
        }
        if !edited {
            let words =
                format!("made by another build of version {present}, which wrote other files");
            let state = out_of_date(Reason::OtherBuild, words, Vec::new());
            return PackageState { files: held.files, ..state };
        }
        self.edited(&held)
    }

    fn is_equal(&self) -> bool {
        let expected = &self.expected.package;
        self.committed.len() == expected.len() + 1
            && expected.iter().all(|(name, bytes)| self.committed.get(name) == Some(bytes))
            && self
                .committed
                .get(CONTENTS)
                .is_some_and(|list| *list == contents(expected).as_bytes())
    }

    /// Compares apart from the program version and from numbers within round-off. A number on the border may
    /// be printed with another last digit then, so where the committed record is the same within round-off,
    /// the other files may also be those that the committed record itself makes.
    fn held(&self, origin: &Origin, earlier: Option<&Record>) -> (Held, Vec<String>) {
        let present = &self.record.program.version;
        let mut notes = Vec::new();
        let mut renamed = None;
        if origin.version != *present {
            notes.push(format!(
                "made by version {} with the same results as version {present}",
                one_line(&origin.version)
            ));
            let mut record = self.record.clone();
            record.program.version.clone_from(&origin.version);
            renamed = self.expected.of(&record, self.sources);
        }
        let expected = renamed.as_ref().unwrap_or(&self.expected.package);
        let held = hold(self.committed, expected);
        if held.files.is_empty() {
            notes.extend(round_off(held.numbers));
            return (held, notes);
        }
        let same_record = held.numbers > 0 && held.files.iter().all(|file| file.file != RECORD);
        if let Some(earlier) = earlier.filter(|_| same_record)
            && let Some(package) = self.expected.of(earlier, self.sources)
        {
            let as_written = hold(self.committed, &package);
            if as_written.files.is_empty() {
                notes.extend(round_off(held.numbers));
                notes.push("some numbers are printed with another last digit for it".to_owned());
                return (as_written, notes);
            }
        }
        (held, notes)
    }

    /// The committed record; fields that its file leaves out are those computed here.
    fn committed_record(&self) -> Option<Record> {
        let text = std::str::from_utf8(self.committed.get(RECORD)?).ok()?;
        let mut record = Record::from_json(text).ok()?;
        for name in &self.record.model.package.left_out {
            if let Some(there) = record.results.members.get_mut(name)
                && let Some(here) = self.record.results.members.get(name)
            {
                there.segments.clone_from(&here.segments);
            }
        }
        Some(record)
    }

    fn compared(&self, earlier: &Record) -> Changes {
        let old = Side { label: "the package", record: earlier, sources: None };
        let new = Side { label: "the project", record: self.record, sources: Some(self.sources) };
        compare(&old, &new, &Thresholds::default())
    }

    /// Which things of the input changed, and what came of it.
    fn input_changes(&self, earlier: &Record) -> Vec<String> {
        let changes = self.compared(earlier);
        let report = changes.report(&self.record.model.units.printer());
        let mut things: Vec<String> = report
            .renamed
            .iter()
            .map(|row| format!("{} {} is now called {}", row.kind, row.old, row.new))
            .collect();
        things.extend(report.input.iter().map(|row| {
            let facts: Vec<String> = row
                .facts
                .iter()
                .take(MOST_FACTS)
                .map(|fact| became(&fact.fact, &fact.old, &fact.new))
                .collect();
            let more = (row.facts.len() + row.more).saturating_sub(MOST_FACTS);
            let more = if more == 0 { String::new() } else { format!("; {more} more") };
            let what = match row.what {
                "changed" => format!(": {}{more}", facts.join("; ")),
                what => format!(" is {what}"),
            };
            let place =
                if row.place.is_empty() { String::new() } else { format!(" ({})", row.place) };
            format!("{}{what}{place}", row.item)
        }));
        let left_out = things.len().saturating_sub(MOST_THINGS);
        things.truncate(MOST_THINGS);
        if left_out > 0 {
            things.push(format!("and {left_out} more"));
        }
        if things.is_empty() {
            things.push("no thing of the project file: texts, comments or their places".to_owned());
        }
        things.push(changes.verdict());
        things.iter().map(|line| one_line(line)).collect()
    }

    /// Says of a package that is out of date for another reason which files were edited besides.
    fn with_edits(&self, mut state: PackageState) -> PackageState {
        if !is_intact(self.committed) {
            let said = format!("besides, its files are not as its own `{CONTENTS}` says");
            state.notes.push(said);
        }
        state
    }

    fn edited(&self, held: &Held) -> PackageState {
        let words = "its files are not what the program wrote: edited by hand".to_owned();
        let state = out_of_date(Reason::EditedByHand, words, Vec::new());
        PackageState { files: held.files.clone(), ..state }
    }
}

fn round_off(numbers: usize) -> Option<String> {
    let differ = match numbers {
        0 => return None,
        1 => "1 number differs".to_owned(),
        several => format!("{several} numbers differ"),
    };
    Some(format!("{differ} from those computed here by less than 1e-9 of their size"))
}

fn became(fact: &str, old: &str, new: &str) -> String {
    match (old.is_empty(), new.is_empty()) {
        (true, _) => format!("{fact} {new}, not stated before"),
        (_, true) => format!("{fact} {old}, no longer stated"),
        _ => format!("{fact} {old} → {new}"),
    }
}
