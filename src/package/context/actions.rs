//! Load cases, loads and combinations for templates.

use serde::Serialize;

use super::{FigureRef, Quantity};
use crate::figures::Figure;
use crate::quantity::{Kind, Printer};
use crate::record::{CombinationRecord, LoadRecord, Record, RuleUseRecord, TargetRecord};

/// Cases side by side in one block of the factors matrix.
const COLUMNS: usize = 8;
const AXES: [&str; 3] = ["X", "Y", "Z"];

#[derive(Serialize)]
pub(super) struct BuildUpTable<'r> {
    name: &'r str,
    layers: Vec<LayerRow<'r>>,
    total: Quantity,
}

#[derive(Serialize)]
struct LayerRow<'r> {
    layer: &'r str,
    load: Quantity,
    source: Option<&'r str>,
}

pub(super) fn build_ups(record: &Record) -> Vec<BuildUpTable<'_>> {
    record
        .model
        .build_ups
        .iter()
        .map(|(name, layers)| BuildUpTable {
            name,
            layers: layers
                .iter()
                .map(|layer| LayerRow {
                    layer: &layer.layer,
                    load: Quantity::new(Kind::AreaLoad, layer.load),
                    source: layer.source.as_deref(),
                })
                .collect(),
            total: Quantity::new(Kind::AreaLoad, layers.iter().map(|layer| layer.load).sum()),
        })
        .collect()
}

#[derive(Serialize)]
pub(super) struct CaseView<'r> {
    name: &'r str,
    title: &'r str,
    nature: &'r str,
    category: Option<&'r str>,
    duration: Option<&'r str>,
    source: Option<&'r str>,
    loads: Vec<LoadRow<'r>>,
    resultants: Vec<ResultantRow<'r>>,
    figures: Vec<FigureRef<'r>>,
}

/// A load in words.
#[derive(Serialize)]
struct LoadRow<'r> {
    on: &'r str,
    what: String,
    place: String,
    direction: String,
    source: Option<&'r str>,
}

#[derive(Serialize)]
struct ResultantRow<'r> {
    structure: &'r str,
    force: [Quantity; 3],
    moment: [Quantity; 3],
}

pub(super) fn cases<'r>(record: &'r Record, drawings: &'r [Figure]) -> Vec<CaseView<'r>> {
    let printer = record.model.units.printer();
    record
        .model
        .cases
        .iter()
        .map(|(name, case)| CaseView {
            name,
            title: &case.title,
            nature: &case.nature,
            category: case.category.as_deref(),
            duration: case.duration.as_deref(),
            source: case.source.as_deref(),
            loads: case.loads.iter().map(|load| row(load, &printer)).collect(),
            resultants: case
                .resultant
                .iter()
                .filter(|(_, values)| values.iter().any(|value| value.abs() > 0.0))
                .map(|(structure, values)| ResultantRow {
                    structure,
                    force: std::array::from_fn(|k| Quantity::new(Kind::Force, values[k])),
                    moment: std::array::from_fn(|k| Quantity::new(Kind::Moment, values[3 + k])),
                })
                .collect(),
            figures: drawings
                .iter()
                .filter(|figure| figure.case.as_ref() == Some(name))
                .map(FigureRef::from)
                .collect(),
        })
        .collect()
}

fn row<'r>(load: &'r LoadRecord, printer: &Printer) -> LoadRow<'r> {
    let (TargetRecord::Member(on) | TargetRecord::Node(on)) = &load.target;
    let directed = !matches!(
        load.form.as_str(),
        "force" | "displaced" | "warming" | "lack_of_fit" | "reaction_of" | "point_moment"
    );
    LoadRow {
        on,
        what: what(load, printer),
        place: place(load, printer),
        direction: match (directed, load.per.as_str()) {
            (false, _) => String::new(),
            (true, "projected") => format!("{}, per projected length", load.direction),
            (true, _) => load.direction.clone(),
        },
        source: load.source.as_deref(),
    }
}

fn what(load: &LoadRecord, printer: &Printer) -> String {
    let first = load.values.first().copied().unwrap_or_default();
    let last = load.values.last().copied().unwrap_or_default();
    let line = |value: f64| printer.with_unit(Kind::LineLoad, value);
    let over_width = || {
        let width = load.width.unwrap_or_default();
        format!(
            "{} × {} = {}",
            printer.with_unit(Kind::AreaLoad, first),
            printer.with_unit(Kind::Length, width),
            line(first * width)
        )
    };
    match load.form.as_str() {
        "self_weight" => format!("self-weight {}", line(first)),
        "uniform" => line(first),
        "varying" => format!("{} to {}", line(first), line(last)),
        "area" => over_width(),
        "build_up" => {
            format!("build-up {}: {}", load.build_up.as_deref().unwrap_or_default(), over_width())
        }
        "point" => printer.with_unit(Kind::Force, first),
        "point_moment" => {
            format!(
                "moment {} about {}",
                printer.with_unit(Kind::Moment, first),
                axis(&load.direction)
            )
        }
        "force" => joined(&[
            components("force", load.start, Kind::Force, printer),
            components("moment", load.moment, Kind::Moment, printer),
        ]),
        "reaction_of" => {
            let given = joined(&[
                components("force", load.start, Kind::Force, printer),
                components("moment", load.moment, Kind::Moment, printer),
            ]);
            let node = load.reaction_of.as_deref().unwrap_or_default();
            let given = if given.is_empty() { "nothing in this case".to_owned() } else { given };
            format!("reaction of {node} handed on: {given}")
        }
        "displaced" => {
            let part = |from: usize, kind: Kind, word: &str| {
                let values =
                    std::array::from_fn(|k| load.values.get(from + k).copied().unwrap_or_default());
                components(word, values, kind, printer)
            };
            joined(&[
                part(0, Kind::Deflection, "ground moved"),
                part(3, Kind::Rotation, "ground turned"),
            ])
        }
        "warming" if (first - last).abs() > 0.0 => format!(
            "warming: top {}, bottom {}",
            printer.with_unit(Kind::Temperature, first),
            printer.with_unit(Kind::Temperature, last)
        ),
        "warming" => format!("warming {}", printer.with_unit(Kind::Temperature, first)),
        _ => format!("made too long by {}", printer.with_unit(Kind::Deflection, first)),
    }
}

fn axis(direction: &str) -> &str {
    match direction {
        "up" | "down" => "Z",
        other => other.trim_start_matches('+'),
    }
}

fn joined(parts: &[String]) -> String {
    let there: Vec<&str> =
        parts.iter().map(String::as_str).filter(|part| !part.is_empty()).collect();
    there.join("; ")
}

/// `force X 3 kN, Z −1 kN`; nothing where all are zero.
fn components(word: &str, values: [f64; 3], kind: Kind, printer: &Printer) -> String {
    let parts: Vec<String> = AXES
        .iter()
        .zip(values)
        .filter(|(_, value)| value.abs() > 0.0)
        .map(|(axis, value)| format!("{axis} {}", printer.with_unit(kind, value)))
        .collect();
    if parts.is_empty() { String::new() } else { format!("{word} {}", parts.join(", ")) }
}

fn place(load: &LoadRecord, printer: &Printer) -> String {
    let length = |x: f64| printer.number(Kind::Length, x);
    let unit = &printer.units.get(Kind::Length).label;
    match (load.from, load.to, load.at.as_slice()) {
        (Some(from), Some(to), _) => format!("{} to {} {unit}", length(from), length(to)),
        (_, _, [at]) => format!("at {} {unit}", length(*at)),
        (_, _, [first, .., last]) => {
            let every = load.every.map(|every| format!("every {} {unit}, ", length(every)));
            format!(
                "{}{} places from {} to {} {unit}",
                every.unwrap_or_default(),
                load.at.len(),
                length(*first),
                length(*last)
            )
        }
        _ => String::new(),
    }
}

/// One reaction handed on.
#[derive(Serialize)]
pub(super) struct HandedRow<'r> {
    case: &'r str,
    node: &'r str,
    giver: &'r str,
    to: &'r str,
    receiver: &'r str,
    places: usize,
    each: String,
    total: String,
}

pub(super) fn takedown(record: &Record) -> Vec<HandedRow<'_>> {
    let printer = record.model.units.printer();
    let mut out = Vec::new();
    for receiver in &record.model.solve_order {
        for (case, content) in &record.model.cases {
            for load in content.loads.iter().filter(|load| load.structure == *receiver) {
                let Some(node) = load.reaction_of.as_deref() else { continue };
                let giver = record
                    .model
                    .structures
                    .iter()
                    .find(|(_, structure)| structure.nodes.contains_key(node))
                    .map_or("", |(name, _)| name.as_str());
                let (TargetRecord::Member(to) | TargetRecord::Node(to)) = &load.target;
                let places = load.at.len().max(1);
                #[expect(clippy::cast_precision_loss, reason = "at most ten thousand places")]
                let total = load.start.map(|force| force * places as f64);
                let said = |force: [f64; 3]| components("", force, Kind::Force, &printer);
                if load.start.iter().chain(&load.moment).all(|value| value.abs() <= 0.0) {
                    continue;
                }
                out.push(HandedRow {
                    case,
                    node,
                    giver,
                    to,
                    receiver,
                    places,
                    each: said(load.start).trim().to_owned(),
                    total: said(total).trim().to_owned(),
                });
            }
        }
    }
    out
}

/// Combinations: the rules that made them, a list for each purpose, the factors matrix.
#[derive(Serialize)]
pub(super) struct Combinations<'r> {
    rules: Vec<RuleRow<'r>>,
    psi: Vec<PsiRow<'r>>,
    relations: Vec<String>,
    /// Cases in no combination, cases without a load: the open items about them.
    unused: Vec<&'r str>,
    purposes: Vec<PurposeView<'r>>,
    /// Left out where there are more than [`MATRIX`] combinations: the lists say the same.
    blocks: Vec<Block<'r>>,
    count: usize,
}

/// Significant digits of a factor.
const FACTOR_DIGITS: usize = 6;

/// Most combinations of which a matrix is printed besides the lists.
const MATRIX: usize = 60;

/// A rule in use.
#[derive(Serialize)]
struct RuleRow<'r> {
    rule: &'r str,
    reference: &'r str,
    annex: Option<&'r str>,
    purpose: &'r str,
    expansion: &'r str,
    kept: usize,
    same: usize,
    dominated: String,
    values: String,
    expressions: &'r [String],
    notes: Option<&'r str>,
}

/// ψ factors of a case.
#[derive(Serialize, PartialEq)]
struct PsiRow<'r> {
    case: &'r str,
    psi: [String; 3],
    origin: String,
}

/// The combinations of one purpose.
#[derive(Serialize)]
struct PurposeView<'r> {
    purpose: &'r str,
    rows: Vec<CombinationRow<'r>>,
}

/// Some cases side by side.
#[derive(Serialize)]
struct Block<'r> {
    cases: Vec<&'r str>,
    rows: Vec<FactorRow<'r>>,
}

#[derive(Serialize)]
struct FactorRow<'r> {
    number: &'r str,
    /// Blank where the case does not act.
    factors: Vec<String>,
}

#[derive(Serialize)]
struct CombinationRow<'r> {
    number: &'r str,
    title: &'r str,
    expression: String,
    clause: Option<&'r str>,
    reason: Option<&'r str>,
    duration: Option<&'r str>,
}

pub(super) fn combinations(record: &Record) -> Combinations<'_> {
    let cases: Vec<&str> = record.model.cases.keys().map(String::as_str).collect();
    let mut purposes: Vec<PurposeView<'_>> = Vec::new();
    for combination in record.combinations.values() {
        let row = combination_row(combination);
        match purposes.iter_mut().find(|view| view.purpose == combination.purpose) {
            Some(view) => view.rows.push(row),
            None => purposes.push(PurposeView { purpose: &combination.purpose, rows: vec![row] }),
        }
    }
    let matrix = record.combinations.len() <= MATRIX;
    Combinations {
        rules: record.rules.iter().map(rule_row).collect(),
        psi: psi(record),
        relations: relations(record),
        unused: record
            .registers
            .open_items
            .iter()
            .filter(|item| item.kind == "combinations")
            .map(|item| item.text.as_str())
            .collect(),
        purposes,
        blocks: cases
            .chunks(COLUMNS)
            .filter(|_| matrix)
            .map(|cases| Block { cases: cases.to_vec(), rows: factor_rows(record, cases) })
            .collect(),
        count: record.combinations.len(),
    }
}

/// Factors are exact (1.35 × 0.925 = 1.24875): a reader multiplies by them.
fn factor(value: f64) -> String {
    crate::quantity::print(value, FACTOR_DIGITS)
}

fn combination_row(combination: &CombinationRecord) -> CombinationRow<'_> {
    let mut expression = String::new();
    for (case, value) in &combination.factors {
        let sign = match (expression.is_empty(), *value < 0.0) {
            (true, false) => "",
            (true, true) => "\u{2212}",
            (false, false) => " + ",
            (false, true) => " \u{2212} ",
        };
        expression += &format!("{sign}{} {case}", factor(value.abs()));
    }
    CombinationRow {
        number: &combination.number,
        title: &combination.title,
        expression,
        clause: combination.clause.as_deref(),
        reason: combination.reason.as_deref(),
        duration: combination.duration.as_deref(),
    }
}

fn factor_rows<'r>(record: &'r Record, cases: &[&'r str]) -> Vec<FactorRow<'r>> {
    let of = |combination: &'r CombinationRecord| FactorRow {
        number: &combination.number,
        factors: cases
            .iter()
            .map(|case| combination.factors.get(*case).map_or_else(String::new, |f| factor(*f)))
            .collect(),
    };
    record.combinations.values().map(of).collect()
}

fn rule_row(rule: &RuleUseRecord) -> RuleRow<'_> {
    let values: Vec<String> =
        rule.values.iter().map(|(name, value)| format!("{name} = {}", factor(*value))).collect();
    RuleRow {
        rule: &rule.rule,
        reference: &rule.reference,
        annex: rule.annex.as_deref(),
        purpose: &rule.purpose,
        expansion: &rule.expansion,
        kept: rule.kept,
        same: rule.same,
        dominated: match (rule.dominated, rule.dropped) {
            (Some(count), true) => format!("{count}, left out"),
            (Some(count), false) => format!("{count}, kept"),
            (None, _) => "not counted".to_owned(),
        },
        values: values.join(", "),
        expressions: &rule.expressions,
        notes: rule.notes.as_deref(),
    }
}

/// The ψ factors of all rules; what two rules take alike stands once.
fn psi(record: &Record) -> Vec<PsiRow<'_>> {
    let mut out: Vec<PsiRow<'_>> = Vec::new();
    for rule in &record.rules {
        let annex = rule.annex.as_deref().unwrap_or("recommended");
        for used in &rule.psi {
            let row = PsiRow {
                case: &used.case,
                psi: used.psi.map(factor),
                origin: match used.origin.as_str() {
                    origin if origin.starts_with("stated") => origin.to_owned(),
                    origin => format!("{origin} ({annex} values)"),
                },
            };
            if !out.contains(&row) {
                out.push(row);
            }
        }
    }
    out
}

/// What is stated of how cases act together, in sentences.
fn relations(record: &Record) -> Vec<String> {
    let mut out = Vec::new();
    let mut groups: Vec<(&str, Vec<&str>)> = Vec::new();
    for (name, case) in &record.model.cases {
        if let Some(group) = &case.relations.one_of {
            match groups.iter_mut().find(|(own, _)| own == group) {
                Some((_, cases)) => cases.push(name),
                None => groups.push((group, vec![name])),
            }
        }
    }
    for (group, cases) in groups {
        out.push(format!("At most one of {} acts at a time ({group}).", cases.join(", ")));
    }
    for (name, case) in &record.model.cases {
        let relations = &case.relations;
        if !relations.together_with.is_empty() {
            out.push(format!("{name} acts only with {}.", relations.together_with.join(", ")));
        }
        if relations.reverses {
            out.push(format!("{name} acts in both senses, one at a time."));
        }
        if let Some(group) = &relations.source_group {
            out.push(format!("{name} is favourable or unfavourable with its source {group}."));
        }
        if let Some(by_span) = &case.by_span {
            let how = match by_span.loading.as_str() {
                "any" => {
                    "every choice of loaded spans, the adverse one found for each effect and place"
                }
                "alternate" => "all, alternate or no spans loaded",
                _ => "all, alternate, two adjacent or no spans loaded (EN 1992-1-1, 5.1.3)",
            };
            out.push(format!("{name} acts by span: {how}."));
        }
    }
    out
}
