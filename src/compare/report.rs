//! Changes → rows of words, the same ones for the terminal, a merge request and a package.

use serde::Serialize;

use super::{
    Changes, CheckChange, Count, End, FactChange, ItemChange, OutcomeEnd, SideRecord, TextChange,
    ValueChange, What,
};
use crate::quantity::{Kind, Printer, print};
use crate::record::printed_utilisation;

/// A comparison in words.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct Report {
    pub old: SideRecord,
    pub new: SideRecord,
    pub verdict: String,
    pub notes: Vec<String>,
    pub renamed: Vec<RenamedRow>,
    pub input: Vec<ItemRow>,
    pub texts: Vec<TextRow>,
    pub checks: Vec<CheckRow>,
    /// Of members: forces, and displacements where serviceability asks for them; displacements that equal
    /// a deflection from the chord are told once.
    pub values: Vec<ValueRow>,
    /// How many other displacements changed with them.
    pub further: usize,
    pub reactions: Vec<ValueRow>,
    pub opened: Vec<String>,
    pub closed: Vec<String>,
    pub counts: Vec<CountRow>,
    /// What is too small to be listed.
    pub thresholds: String,
    /// What is left out here for its length.
    pub cut: Vec<String>,
}

impl Report {
    /// Keeps the first rows of every list and says how many there are more.
    #[must_use]
    pub fn at_most(mut self, rows: usize) -> Self {
        let mut cut = |what: &str, all: usize| {
            if all > rows {
                self.cut.push(format!("{} more rows of {what} are not shown here.", all - rows));
            }
        };
        cut("checks", self.checks.len());
        cut("the project file", self.input.len());
        cut("other files", self.texts.len());
        cut("governing values", self.values.len());
        cut("reactions", self.reactions.len());
        self.checks.truncate(rows);
        self.input.truncate(rows);
        self.texts.truncate(rows);
        self.values.truncate(rows);
        self.reactions.truncate(rows);
        self
    }
}

/// Something renamed.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct RenamedRow {
    pub kind: &'static str,
    pub old: String,
    pub new: String,
    pub by: String,
}

/// A thing of the input that changed.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct ItemRow {
    /// `new`, `changed` or `gone`.
    pub what: &'static str,
    /// What it is and its name: `section beam`.
    pub item: String,
    /// File and line; of the new side, or of the old one for what is gone.
    pub place: String,
    pub facts: Vec<FactChange>,
    /// How many facts more changed with these.
    pub more: usize,
}

/// A text file that changed.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct TextRow {
    pub file: String,
    pub what: String,
}

/// A check whose outcome or utilisation moved.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct CheckRow {
    /// `worse`, `better`, `new`, `gone`; empty where only the utilisation moved.
    pub what: &'static str,
    pub worse: bool,
    pub id: String,
    pub title: String,
    pub on: String,
    pub outcome: String,
    pub utilisation: String,
    pub combination: String,
    pub x: String,
    /// Why the new outcome is not `satisfied`, where it says.
    pub reason: String,
}

/// A governing value that moved.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct ValueRow {
    pub on: String,
    pub purpose: String,
    /// Effect or component, and whether it is the greatest or the least value.
    pub what: String,
    pub unit: String,
    pub old: String,
    pub new: String,
    /// Change of size, in per cent.
    pub change: String,
    pub combination: String,
    pub other_combination: bool,
    pub x: String,
    pub moved: bool,
}

/// How many things of a sort changed and did not.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct CountRow {
    pub what: &'static str,
    pub listed: usize,
    pub below: usize,
    pub same: usize,
}

/// Between an old and a new text.
const BECOMES: &str = " → ";
/// So many facts of a thing are told: what is written comes before what follows from it.
const FACTS: usize = 8;

impl Changes {
    /// The comparison in words, values in the units of a printer.
    #[must_use]
    pub fn report(&self, printer: &Printer) -> Report {
        let values = |changes: &[ValueChange]| -> Vec<ValueRow> {
            let told = |change: &&ValueChange| change.is_primary() && !is_repeated(change, changes);
            let listed = changes.iter().filter(told);
            listed.map(|change| value(change, printer)).collect()
        };
        let members = values(&self.values);
        Report {
            old: self.old.clone(),
            new: self.new.clone(),
            verdict: self.verdict(),
            notes: self.notes.clone(),
            renamed: self.renamed.iter().map(renamed).collect(),
            input: self.input.iter().map(item).collect(),
            texts: self.texts.iter().map(text).collect(),
            checks: self.checks.iter().map(|change| check(change, printer)).collect(),
            further: self.values.len() - members.len(),
            values: members,
            reactions: self.reactions.iter().map(|change| value(change, printer)).collect(),
            opened: self.opened.clone(),
            closed: self.closed.clone(),
            counts: self.counted(),
            thresholds: self.thresholds.words(printer),
            cut: Vec::new(),
        }
    }

    fn counted(&self) -> Vec<CountRow> {
        let row = |what: &'static str, count: &Count| CountRow {
            what,
            listed: count.listed,
            below: count.below,
            same: count.same,
        };
        let counts = &self.counts;
        [
            row("things of the project file", &counts.items),
            row("text files", &counts.texts),
            row("outcomes of checks", &counts.checks),
            row("governing values of members", &counts.values),
            row("governing reactions", &counts.reactions),
        ]
        .into_iter()
        .filter(|row| row.listed + row.below + row.same > 0)
        .collect()
    }
}

fn renamed(one: &super::Renamed) -> RenamedRow {
    RenamedRow {
        kind: one.kind.word(),
        old: one.old.clone(),
        new: one.new.clone(),
        by: one.by.clone(),
    }
}

const fn word(what: What) -> &'static str {
    match what {
        What::New => "new",
        What::Changed => "changed",
        What::Vanished => "gone",
    }
}

fn item(change: &ItemChange) -> ItemRow {
    let line = match change.what {
        What::Vanished => &change.old_line,
        _ => &change.new_line,
    };
    ItemRow {
        what: word(change.what),
        item: format!("{} {}", change.kind.word(), change.name).trim_end().to_owned(),
        place: line.as_ref().map(|at| format!("{}:{}", at.file, at.line)).unwrap_or_default(),
        facts: change.facts.iter().take(FACTS).cloned().collect(),
        more: change.facts.len().saturating_sub(FACTS),
    }
}

fn text(change: &TextChange) -> TextRow {
    let what = match change.what {
        What::Changed => format!(
            "{} added, {} removed, the first at line {}",
            lines(change.added),
            lines(change.removed),
            change.first
        ),
        other => word(other).to_owned(),
    };
    TextRow { file: change.file.clone(), what }
}

fn lines(count: usize) -> String {
    format!("{count} {}", if count == 1 { "line" } else { "lines" })
}

/// A displacement along a local axis whose governing values are those of the deflection from the chord.
fn is_repeated(change: &ValueChange, all: &[ValueChange]) -> bool {
    let deflection = match change.effect.as_str() {
        "v" => "d_y",
        "w" => "d_z",
        _ => return false,
    };
    let value = |end: &Option<End>| end.as_ref().map(|end| end.value.to_bits());
    all.iter().any(|other| {
        other.effect == deflection
            && (&other.on, other.span, &other.purpose, other.which)
                == (&change.on, change.span, &change.purpose, change.which)
            && value(&other.old) == value(&change.old)
            && value(&other.new) == value(&change.new)
    })
}

fn check(change: &CheckChange, printer: &Printer) -> CheckRow {
    let ends = [change.old.as_ref(), change.new.as_ref()];
    let of = |text: &dyn Fn(&OutcomeEnd) -> String| became(ends.map(|end| end.map(text)));
    CheckRow {
        what: match change.what {
            What::New => "new",
            What::Vanished => "gone",
            What::Changed if change.worse => "worse",
            What::Changed if change.flipped => "better",
            What::Changed => "",
        },
        worse: change.worse,
        id: change.id.clone(),
        title: change.title.clone(),
        on: change.on_words.clone(),
        outcome: of(&outcome),
        utilisation: of(&|end| end.utilisation.map_or("–".to_owned(), printed_utilisation)),
        combination: of(&|end| end.number.clone().unwrap_or_default()),
        x: of(&|end| end.x.map(|x| printer.number(Kind::Length, x)).unwrap_or_default()),
        reason: change.new.as_ref().and_then(|end| end.reason.clone()).unwrap_or_default(),
    }
}

fn outcome(end: &OutcomeEnd) -> String {
    match (end.outcome.as_str(), end.covered) {
        ("deferred", true) => "deferred, as disclosed".to_owned(),
        (outcome, _) => outcome.to_owned(),
    }
}

/// One text where both sides say the same or only one says something.
fn became(ends: [Option<String>; 2]) -> String {
    match ends.map(Option::unwrap_or_default) {
        [old, new] if old == new || new.is_empty() => old,
        [old, new] if old.is_empty() => new,
        [old, new] => format!("{old}{BECOMES}{new}"),
    }
}

fn value(change: &ValueChange, printer: &Printer) -> ValueRow {
    let kind = Kind::from_name(change.kind).unwrap_or(Kind::Number);
    let number = |end: &Option<End>| {
        end.as_ref().map_or_else(|| "–".to_owned(), |end| printer.number(kind, end.value))
    };
    let ends = [change.old.as_ref(), change.new.as_ref()];
    let [old_x, new_x] =
        ends.map(|end| end.and_then(|end| end.x).map(|x| printer.number(Kind::Length, x)));
    let [old_in, new_in] = ends.map(|end| end.map(|end| end.number.clone()));
    let span = change.span.map(|span| format!(", span {span}")).unwrap_or_default();
    let which = if change.which == "max" { "greatest" } else { "least" };
    ValueRow {
        on: format!("{}{span}", change.on),
        purpose: change.purpose.clone(),
        what: format!("{} {which}", change.effect),
        unit: printer.units.get(kind).label.clone(),
        old: number(&change.old),
        new: number(&change.new),
        change: size(change),
        combination: if change.other_combination {
            became([old_in, new_in])
        } else {
            new_in.or(old_in).unwrap_or_default()
        },
        other_combination: change.other_combination,
        x: if change.moved { became([old_x, new_x]) } else { new_x.or(old_x).unwrap_or_default() },
        moved: change.moved,
    }
}

/// How the size changed: per cent with its sign, or why there is no such number.
fn size(change: &ValueChange) -> String {
    match (change.what, change.relative) {
        (What::New | What::Vanished, _) => word(change.what).to_owned(),
        (_, Some(share)) => {
            let text = print(share * 100.0, 3);
            if share > 0.0 { format!("+{text}\u{a0}%") } else { format!("{text}\u{a0}%") }
        }
        _ => match (&change.old, &change.new) {
            (Some(old), Some(new)) if old.value * new.value < 0.0 => "other sign".to_owned(),
            _ => "from zero".to_owned(),
        },
    }
}
