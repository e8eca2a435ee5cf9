//! The blocks in which a project speaks of itself, its basis, values and build-ups.

use super::names::Names;
use super::reader::Reader;
use crate::diagnostic::{Diagnostic, Place};
use crate::model::{
    AnalysisSettings, Assumption, Basis, BuildUp, Deferral, Draw, Layer, Model, MomentSide,
    NamedValue, PackageSettings, Paper, ProjectInfo, Revision, Standard,
};
use crate::project::near::nearest;
use crate::project::text::{Located, Map, Text, Words};
use crate::project::written::{self, words};
use crate::quantity::{Kind, System, Units, parse_unit};

const SIGNIFICANT: std::ops::RangeInclusive<usize> = 3..=8;

pub(super) fn project(reader: &mut Reader, written: &written::ProjectInfo) -> ProjectInfo {
    let mut marks = Names::default();
    if written.revisions.is_empty() {
        reader.error("no-revision", "the project has no revision", written.number.place());
    }
    let revisions = written
        .revisions
        .iter()
        .map(|revision| {
            marks.take(reader, &revision.mark, "revision");
            if !is_date(&revision.date) {
                reader.problem(
                    Diagnostic::error("date", format!("`{}` is not a date", revision.date))
                        .at(revision.date.place())
                        .label("expected a date such as `2026-03-02`"),
                );
            }
            Revision {
                mark: revision.mark.to_string(),
                date: revision.date.to_string(),
                status: revision.status.to_string(),
                note: words(revision.note.as_ref()).unwrap_or_default(),
                originated: words(revision.originated.as_ref()).unwrap_or_default(),
                checked: words(revision.checked.as_ref()).unwrap_or_default(),
                approved: words(revision.approved.as_ref()).unwrap_or_default(),
            }
        })
        .collect();
    ProjectInfo {
        title: written.title.to_string(),
        number: written.number.to_string(),
        client: words(written.client.as_ref()),
        subject: words(written.subject.as_ref()),
        revisions,
    }
}

pub(super) fn basis(reader: &mut Reader, written: &written::Basis, ids: &mut Names) -> Basis {
    let standards = written
        .standards
        .iter()
        .map(|standard| {
            ids.take(reader, &standard.id, "standard");
            self::standard(standard)
        })
        .collect();
    let assumptions = written
        .assumptions
        .iter()
        .map(|assumption| {
            ids.take(reader, &assumption.id, "assumption");
            self::assumption(assumption, assumption.place())
        })
        .collect();
    let deferred = written
        .deferred
        .iter()
        .map(|deferral| {
            ids.take(reader, &deferral.id, "deferral");
            self::deferral(deferral)
        })
        .collect();
    Basis {
        national_annex: words(written.national_annex.as_ref()),
        consequence_class: words(written.consequence_class.as_ref()),
        working_life: words(written.working_life.as_ref()),
        standards,
        assumptions,
        deferred,
    }
}

pub(super) fn standard(written: &written::Standard) -> Standard {
    Standard {
        id: written.id.to_string(),
        title: written.title.to_string(),
        edition: written.edition.to_string(),
    }
}

pub(super) fn assumption(written: &written::Assumption, origin: Place) -> Assumption {
    Assumption {
        id: written.id.to_string(),
        text: written.text.to_string(),
        confirmed: written.status.is == words::Status::Confirmed,
        by: words(written.by.as_ref()),
        source: words(written.source.as_ref()),
        origin,
    }
}

pub(super) fn deferral(written: &written::Deferral) -> Deferral {
    Deferral {
        id: written.id.to_string(),
        text: written.text.to_string(),
        to: written.to.to_string(),
        checks: written.checks.iter().map(ToString::to_string).collect(),
    }
}

/// Units and significant digits.
pub(super) fn printing(reader: &mut Reader, project: &written::Project) -> (Units, usize) {
    let system = project.units.get("system").map_or(System::Si, |word| {
        System::WORDS
            .iter()
            .find(|(name, _)| *name == word.as_str())
            .map_or(System::Si, |(_, is)| *is)
    });
    let mut units = Units::new(system);
    for (name, unit) in project.units.iter().filter(|(name, _)| name.as_str() != "system") {
        let Some(kind) = Kind::from_name(name) else { continue };
        match parse_unit(unit) {
            Ok(parsed) => {
                if units.set(kind, parsed).is_err() {
                    reader.problem(
                        Diagnostic::error(
                            "wrong-dimension",
                            format!("`{unit}` is not a unit of {}", kind.description()),
                        )
                        .at(unit.place()),
                    );
                }
            }
            Err(error) => reader.problem(
                Diagnostic::error("quantity", error.message).at(unit.place()).hint(error.hint),
            ),
        }
    }
    let significant = project.precision.as_ref().and_then(|precision| {
        let digits = reader.whole(&precision.significant)?;
        if SIGNIFICANT.contains(&digits) {
            return Some(digits);
        }
        reader.error(
            "precision",
            format!("`{digits}` significant digits cannot be printed: 3 to 8 can"),
            precision.significant.place(),
        );
        None
    });
    (units, significant.unwrap_or(4))
}

/// First order without imperfections is all there is; the words allow nothing else yet.
pub(super) fn analysis() -> AnalysisSettings {
    AnalysisSettings { order: "first".to_owned(), imperfections: "none".to_owned() }
}

pub(super) fn package(written: Option<&written::Package>) -> PackageSettings {
    PackageSettings {
        draw: match written.and_then(|package| package.draw.as_ref()) {
            Some(written::Draw::List(names)) => {
                Draw::Named(names.iter().map(ToString::to_string).collect())
            }
            Some(written::Draw::Word(word)) if word.is == words::DrawWord::Governing => {
                Draw::Governing
            }
            _ => Draw::All,
        },
        moments: written
            .and_then(|package| package.moments.as_ref())
            .map_or(MomentSide::Tension, |word| word.is),
        paper: written.and_then(|package| package.paper.as_ref()).map_or(Paper::A4, |word| word.is),
        local_axes: written.and_then(|package| package.local_axes).unwrap_or(false),
    }
}

/// Members named for drawing must be there.
pub(super) fn drawn(reader: &mut Reader, written: Option<&written::Package>, model: &Model) {
    if let Some(written::Draw::List(names)) = written.and_then(|package| package.draw.as_ref()) {
        for name in names {
            let known = model.members.iter().map(|member| member.name.as_str());
            reader.find(name, "member", "unknown-member", known);
        }
    }
}

pub(super) fn values(reader: &mut Reader, written: &Map<written::NamedValue>) -> Vec<NamedValue> {
    let mut names = Names::default();
    let mut out = Vec::new();
    for (name, value) in written {
        let usable = names.take(reader, name, "value");
        let Some(quantity) = reader.any_quantity(&value.value) else { continue };
        if usable {
            out.push(NamedValue {
                name: name.to_string(),
                value: quantity.value,
                dimension: quantity.dimension,
                written: value.value.to_string(),
                source: words(value.source.as_ref()),
                origin: name.place(),
            });
            reader.name_value(name, quantity);
        }
    }
    out
}

pub(super) fn build_ups(
    reader: &mut Reader,
    written: &Map<Vec<Located<written::Layer>>>,
) -> Vec<BuildUp> {
    let mut names = Names::default();
    written
        .iter()
        .map(|(name, layers)| {
            names.take(reader, name, "build-up");
            if layers.is_empty() {
                reader.error("empty", format!("the build-up `{name}` has no layer"), name.place());
            }
            BuildUp {
                name: name.to_string(),
                layers: layers
                    .iter()
                    .map(|layer| Layer {
                        title: layer.layer.to_string(),
                        load: reader.quantity(&layer.load, Kind::AreaLoad).unwrap_or_default(),
                        source: words(layer.source.as_ref()),
                    })
                    .collect(),
                origin: name.place(),
            }
        })
        .collect()
}

/// An optional text; blank counts as left out.
pub(super) fn words(text: Option<&Text>) -> Option<String> {
    text.map(ToString::to_string).filter(|text| !text.trim().is_empty())
}

/// A date of the Gregorian calendar as `YYYY-MM-DD`.
fn is_date(text: &str) -> bool {
    let parts: Vec<&str> = text.split('-').collect();
    let [year, month, day] = parts.as_slice() else { return false };
    if (year.len(), month.len(), day.len()) != (4, 2, 2) {
        return false;
    }
    let (Ok(year), Ok(month), Ok(day)) =
        (year.parse::<u32>(), month.parse::<u32>(), day.parse::<u32>())
    else {
        return false;
    };
    let leap = (year % 4 == 0 && year % 100 != 0) || year % 400 == 0;
    let days = match month {
        1 | 3 | 5 | 7 | 8 | 10 | 12 => 31,
        4 | 6 | 9 | 11 => 30,
        2 if leap => 29,
        2 => 28,
        _ => return false,
    };
    (1..=days).contains(&day)
}

/// The nearest of some names, as a hint.
pub(super) fn meant<'n>(word: &str, names: impl Iterator<Item = &'n str>) -> Option<String> {
    nearest(word, names).map(|near| format!("did you mean `{near}`?"))
}
