//! Load cases, loads and combinations for templates.

use serde::Serialize;

use super::{FigureRef, Quantity};
use crate::compare::{content_name, load_name};
use crate::figures::Figure;
use crate::quantity::Kind;
use crate::record::{CombinationRecord, LoadWords, Record, RuleUseRecord, components};

/// Cases side by side in one block of the factors matrix.
const COLUMNS: usize = 16;

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
    /// What a comparison knows it by.
    name: String,
    on: &'r str,
    #[serde(flatten)]
    words: LoadWords,
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
            loads: case
                .loads
                .iter()
                .map(|load| LoadRow {
                    name: load_name(name, load),
                    on: load.on(),
                    words: load.words(&printer),
                    source: load.source.as_deref(),
                })
                .collect(),
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
                let to = load.on();
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
    /// What a comparison knows it by.
    content: String,
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
        content: content_name(combination),
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
