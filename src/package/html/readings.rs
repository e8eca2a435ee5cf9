//! What the page's script reads diagrams with: the Record's polynomials of the members that are drawn, and what
//! acts in each combination. SI, with the units to print in; a compact JSON that no markup can leave.

use serde::Serialize;

use crate::figures::{ENDS, Figure};
use crate::model::{Effect, Purpose};
use crate::quantity::Kind;
use crate::record::{CombinationRecord, MemberRecord, Record, SegmentRecord};

/// With more combinations of a purpose than these, its diagrams are not read: the page would grow too large.
const STATES: usize = 400;

type Map<T> = crate::record::Map<T>;

#[derive(Serialize)]
struct Readings<'r> {
    significant: usize,
    /// Position `x` and effects.
    units: Map<Unit<'r>>,
    /// Solved states; others name them by their place here.
    cases: Vec<&'r str>,
    /// Of cases whose spans are loaded or not: the places of their parts.
    parts: Map<Vec<usize>>,
    /// Combinations by purpose.
    states: Map<Vec<State<'r>>>,
    members: Map<Member<'r>>,
    figures: Map<Diagram<'r>>,
}

#[derive(Serialize)]
struct Unit<'r> {
    label: &'r str,
    factor: f64,
}

#[derive(Serialize)]
struct State<'r> {
    number: &'r str,
    title: &'r str,
    acting: Vec<Acting>,
}

#[derive(Serialize)]
struct Acting {
    terms: Vec<(usize, f64)>,
    free: Vec<(usize, f64)>,
}

#[derive(Serialize)]
struct Member<'r> {
    length: f64,
    pieces: Vec<Piece>,
    /// Combinations as they count for this member, where imposed loads are reduced on it.
    #[serde(skip_serializing_if = "Option::is_none")]
    states: Option<Map<Vec<State<'r>>>>,
}

#[derive(Serialize)]
struct Piece {
    from: f64,
    to: f64,
    /// Effect → solved state → coefficients.
    fields: Map<Map<Vec<f64>>>,
}

#[derive(Serialize)]
struct Diagram<'r> {
    member: &'r str,
    purpose: &'r str,
    ends: [f64; 2],
    rows: Vec<Row>,
}

#[derive(Serialize)]
struct Row {
    effect: &'static str,
    axis: f64,
    scale: f64,
}

/// The JSON; empty where nothing can be read.
pub(super) fn readings(record: &Record, drawings: &[Figure]) -> String {
    let figures: Map<Diagram<'_>> =
        drawings.iter().filter_map(|drawing| diagram(record, drawing)).collect();
    if figures.is_empty() {
        return String::new();
    }
    let cases = solved(record);
    let printer = record.model.units.printer();
    let unit = |kind: Kind| {
        let unit = printer.units.get(kind);
        (unit.label.clone(), unit.factor)
    };
    let drawn = |effect: &Effect| {
        figures.values().any(|figure| figure.rows.iter().any(|row| row.effect == effect.name()))
    };
    let effects: Vec<Effect> = crate::model::EFFECTS.into_iter().filter(drawn).collect();
    let labels: Vec<(&str, (String, f64))> = std::iter::once(("x", unit(Kind::Length)))
        .chain(effects.iter().map(|effect| (effect.name(), unit(effect.kind()))))
        .collect();
    let mut members = Map::new();
    for Diagram { member: name, .. } in figures.values() {
        if let Some(member) = record.member(name) {
            members.insert((*name).to_owned(), content(record, name, member, &cases, &effects));
        }
    }
    let readings = Readings {
        significant: printer.significant,
        units: labels
            .iter()
            .map(|(name, (label, factor))| ((*name).to_owned(), Unit { label, factor: *factor }))
            .collect(),
        parts: parts(record, &cases),
        states: states(record, "", &cases),
        cases,
        members,
        figures,
    };
    let json = serde_json::to_string(&readings).expect("only text, finite numbers, lists and maps");
    // Within an element of script nothing is escaped as in HTML; JSON has escapes of its own.
    json.replace('&', "\\u0026").replace('<', "\\u003c").replace('>', "\\u003e")
}

/// Every state that has fields: cases, then parts of cases.
fn solved(record: &Record) -> Vec<&str> {
    let cases = record.model.cases.iter();
    let parts = record.model.cases.values().filter_map(|case| case.by_span.as_ref());
    cases
        .map(|(name, _)| name.as_str())
        .chain(parts.flat_map(|by_span| by_span.parts.iter().map(String::as_str)))
        .collect()
}

fn place(cases: &[&str], name: &str) -> Option<usize> {
    cases.iter().position(|case| *case == name)
}

fn parts(record: &Record, cases: &[&str]) -> Map<Vec<usize>> {
    let by_span = |(name, case): (&String, &crate::record::CaseRecord)| {
        let parts = &case.by_span.as_ref()?.parts;
        Some((name.clone(), parts.iter().filter_map(|part| place(cases, part)).collect()))
    };
    record.model.cases.iter().filter_map(by_span).collect()
}

/// A drawing that can be read.
fn diagram<'r>(record: &'r Record, drawing: &'r Figure) -> Option<(String, Diagram<'r>)> {
    let member = drawing.member.as_deref().filter(|_| !drawing.rows.is_empty())?;
    let purpose = drawing.purpose.as_deref()?;
    if record.results.members.get(member)?.segments.is_empty()
        || of_purpose(record, purpose).count() > STATES
    {
        return None;
    }
    let row = |row: &crate::figures::Row| Row {
        effect: row.effect.name(),
        axis: (row.axis * 100.0).round() / 100.0,
        scale: row.scale,
    };
    let rows = drawing.rows.iter().map(row).collect();
    Some((drawing.id.clone(), Diagram { member, purpose, ends: ENDS, rows }))
}

fn of_purpose<'r>(
    record: &'r Record,
    purpose: &str,
) -> impl Iterator<Item = (&'r String, &'r CombinationRecord)> {
    record.combinations.iter().filter(move |(_, combination)| combination.purpose == purpose)
}

/// The combinations of each purpose as they count for a member; for no member of this name, as they are.
fn states<'r>(record: &'r Record, member: &str, cases: &[&str]) -> Map<Vec<State<'r>>> {
    let placed = |terms: &[(&str, f64)]| -> Vec<(usize, f64)> {
        terms.iter().filter_map(|(name, factor)| Some((place(cases, name)?, *factor))).collect()
    };
    let state = |(name, combination): (&'r String, &'r CombinationRecord)| State {
        number: &combination.number,
        title: &combination.title,
        acting: record
            .arrangements(member, name)
            .iter()
            .map(|acting| Acting { terms: placed(&acting.terms), free: placed(&acting.free) })
            .collect(),
    };
    Purpose::ALL
        .into_iter()
        .map(|purpose| (purpose, of_purpose(record, purpose.name()).count()))
        .filter(|(_, count)| (1..=STATES).contains(count))
        .map(|(purpose, _)| {
            let all = of_purpose(record, purpose.name()).map(state).collect();
            (purpose.name().to_owned(), all)
        })
        .collect()
}

fn content<'r>(
    record: &'r Record,
    name: &str,
    member: &MemberRecord,
    cases: &[&str],
    effects: &[Effect],
) -> Member<'r> {
    let segments = record.results.members.get(name).map_or(&[][..], |result| &result.segments);
    Member {
        length: member.length,
        pieces: segments.iter().map(|segment| piece(segment, cases, effects)).collect(),
        states: member.imposed_reduction.as_ref().map(|_| states(record, name, cases)),
    }
}

fn piece(segment: &SegmentRecord, cases: &[&str], effects: &[Effect]) -> Piece {
    let field = |effect: &Effect| {
        let own = cases.iter().enumerate().filter_map(|(index, case)| {
            let mut coefficients = segment.fields.get(*case)?.0[effect.index()].to_vec();
            while coefficients.last().is_some_and(|last| last.abs() <= 0.0) {
                coefficients.pop();
            }
            (!coefficients.is_empty()).then(|| (index.to_string(), coefficients))
        });
        (effect.name().to_owned(), own.collect())
    };
    Piece { from: segment.from, to: segment.to, fields: effects.iter().map(field).collect() }
}
