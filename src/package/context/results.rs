//! Results for templates.

use serde::Serialize;

use super::{FigureRef, Quantity};
use crate::figures::Figure;
use crate::model::{EFFECTS, Effect, FORCES};
use crate::quantity::Kind;
use crate::record::{ExtremeRecord, ExtremesRecord, Map, Record, component_kind};

const COMPONENTS: [&str; 6] = ["X", "Y", "Z", "RX", "RY", "RZ"];

#[derive(Serialize)]
pub(super) struct MemberView<'r> {
    name: &'r str,
    structure: &'r str,
    section: &'r str,
    material: &'r str,
    length: Quantity,
    figures: Vec<FigureRef<'r>>,
    governing: Vec<Governing<'r>>,
    spans: Vec<SpanView<'r>>,
}

#[derive(Serialize)]
struct SpanView<'r> {
    number: usize,
    nodes: &'r [String; 2],
    governing: Vec<Governing<'r>>,
}

/// Governing values of one purpose.
#[derive(Serialize)]
struct Governing<'r> {
    purpose: &'r str,
    rows: Vec<EffectRow<'r>>,
    /// Which of the six internal forces occur at all.
    forces: Vec<&'static str>,
    together: Vec<TogetherRow>,
}

#[derive(Serialize)]
struct EffectRow<'r> {
    effect: &'r str,
    kind: &'static str,
    max: ExtremeView<'r>,
    min: ExtremeView<'r>,
}

#[derive(Serialize)]
struct ExtremeView<'r> {
    value: Quantity,
    x: Option<Quantity>,
    side: Option<&'static str>,
    combination: String,
    next: Option<Quantity>,
    next_combination: &'r str,
}

/// The internal forces that act together at one governing value.
#[derive(Serialize)]
struct TogetherRow {
    what: String,
    x: Option<Quantity>,
    combination: String,
    values: Vec<Quantity>,
}

pub(super) fn members<'r>(record: &'r Record, drawings: &'r [Figure]) -> Vec<MemberView<'r>> {
    let mut out = Vec::new();
    for (structure, content) in &record.model.structures {
        for (name, member) in &content.members {
            let Some(result) = record.results.members.get(name) else { continue };
            let spans = if member.spans.len() > 1 { &result.spans[..] } else { &[] };
            out.push(MemberView {
                name,
                structure,
                section: &member.section,
                material: &member.material,
                length: Quantity::new(Kind::Length, member.length),
                figures: drawings
                    .iter()
                    .filter(|figure| figure.member.as_ref() == Some(name))
                    .map(FigureRef::from)
                    .collect(),
                governing: governing(record, &result.governing),
                spans: spans
                    .iter()
                    .zip(&member.spans)
                    .enumerate()
                    .map(|(index, (result, span))| SpanView {
                        number: index + 1,
                        nodes: &span.nodes,
                        governing: governing(record, &result.governing),
                    })
                    .collect(),
            });
        }
    }
    out
}

fn governing<'r>(record: &'r Record, purposes: &'r Map<Map<ExtremesRecord>>) -> Vec<Governing<'r>> {
    purposes
        .iter()
        .map(|(purpose, effects)| {
            let rows: Vec<(Effect, &'r str, &'r ExtremesRecord)> = effects
                .iter()
                .filter(|(_, extremes)| occurs(extremes))
                .filter_map(|(name, extremes)| {
                    Some((Effect::from_name(name)?, name.as_str(), extremes))
                })
                .collect();
            let forces: Vec<Effect> =
                rows.iter().map(|(effect, ..)| *effect).filter(|e| e.index() < FORCES).collect();
            let together = rows
                .iter()
                .filter(|(effect, ..)| effect.index() < FORCES)
                .flat_map(|(_, name, extremes)| {
                    [("greatest", &extremes.max), ("least", &extremes.min)].map(
                        |(which, extreme)| TogetherRow {
                            what: format!("{which} {name}"),
                            x: extreme.x.map(|x| Quantity::new(Kind::Length, x)),
                            combination: record.in_short(&extreme.state, &extreme.loaded),
                            values: forces
                                .iter()
                                .map(|force| {
                                    Quantity::new(force.kind(), extreme.with[force.index()])
                                })
                                .collect(),
                        },
                    )
                })
                .collect();
            Governing {
                purpose,
                rows: rows
                    .iter()
                    .map(|(effect, name, extremes)| EffectRow {
                        effect: name,
                        kind: effect.kind().name(),
                        max: extreme(record, effect.kind(), &extremes.max),
                        min: extreme(record, effect.kind(), &extremes.min),
                    })
                    .collect(),
                forces: forces.iter().map(|force| force.name()).collect(),
                together,
            }
        })
        .collect()
}

fn occurs(extremes: &ExtremesRecord) -> bool {
    extremes.max.value.abs() > 0.0 || extremes.min.value.abs() > 0.0
}

fn extreme<'r>(record: &'r Record, kind: Kind, extreme: &'r ExtremeRecord) -> ExtremeView<'r> {
    ExtremeView {
        value: Quantity::new(kind, extreme.value),
        x: extreme.x.map(|x| Quantity::new(Kind::Length, x)),
        side: extreme.side.map(|side| match side {
            crate::model::Side::Before => "before",
            crate::model::Side::After => "after",
        }),
        combination: record.in_short(&extreme.state, &extreme.loaded),
        next: extreme.next.as_ref().map(|next| Quantity::new(kind, next.value)),
        next_combination: extreme.next.as_ref().map_or("", |next| number(record, &next.state)),
    }
}

/// The short number of a combination.
fn number<'r>(record: &'r Record, state: &str) -> &'r str {
    record.combinations.get(state).map_or("", |combination| combination.number.as_str())
}

#[derive(Serialize)]
pub(super) struct Reactions<'r> {
    /// Components that occur anywhere, in order.
    components: Vec<&'static str>,
    by_case: Vec<CaseReaction<'r>>,
    governing: Vec<GoverningReactions<'r>>,
}

#[derive(Serialize)]
struct CaseReaction<'r> {
    node: &'r str,
    case: &'r str,
    values: Vec<Quantity>,
}

#[derive(Serialize)]
struct GoverningReactions<'r> {
    purpose: &'r str,
    /// Of the support on the structure.
    rows: Vec<ReactionRow<'r>>,
    /// Of the structure on the foundation: opposite signs, so that greatest and least change places.
    foundation: Vec<ActionRow<'r>>,
}

#[derive(Serialize)]
struct ActionRow<'r> {
    node: &'r str,
    what: String,
    /// The reaction that this is turned round.
    reaction: String,
    combination: String,
    values: Vec<Quantity>,
}

#[derive(Serialize)]
struct ReactionRow<'r> {
    node: &'r str,
    what: String,
    value: Quantity,
    combination: String,
    next: Option<Quantity>,
    next_combination: &'r str,
    /// Components acting together.
    with: Vec<Quantity>,
}

pub(super) fn reactions(record: &Record) -> Reactions<'_> {
    let occurs = |k: usize| {
        record
            .results
            .nodes
            .values()
            .flat_map(|node| node.reaction.values())
            .any(|reaction| reaction[k].abs() > 0.0)
    };
    let used: Vec<usize> = (0..6).filter(|k| occurs(*k)).collect();
    let quantities = |values: &[f64; 6], sign: f64| -> Vec<Quantity> {
        used.iter()
            .map(|k| Quantity::new(component_kind(COMPONENTS[*k]), sign * values[*k] + 0.0))
            .collect()
    };
    let mut by_case = Vec::new();
    for (node, result) in &record.results.nodes {
        let whole = |case: &String| record.model.cases.contains_key(case);
        for (case, reaction) in result.reaction.iter().filter(|(case, _)| whole(case)) {
            by_case.push(CaseReaction { node, case, values: quantities(reaction, 1.0) });
        }
    }
    let governing = record
        .results
        .reactions
        .iter()
        .map(|(purpose, nodes)| {
            let mut rows = Vec::new();
            let mut foundation = Vec::new();
            for (node, components) in nodes {
                for (component, extremes) in components {
                    if extremes.max.value.abs() <= 0.0 && extremes.min.value.abs() <= 0.0 {
                        continue;
                    }
                    let kind = component_kind(component);
                    for (which, extreme) in [("greatest", &extremes.max), ("least", &extremes.min)]
                    {
                        rows.push(ReactionRow {
                            node,
                            what: format!("{which} {component}"),
                            value: Quantity::new(kind, extreme.value),
                            combination: record.in_short(&extreme.state, &extreme.loaded),
                            next: extreme.next.as_ref().map(|next| Quantity::new(kind, next.value)),
                            next_combination: extreme
                                .next
                                .as_ref()
                                .map_or("", |next| number(record, &next.state)),
                            with: quantities(&extreme.with, 1.0),
                        });
                    }
                    let turned = [
                        ("greatest", "least", &extremes.min),
                        ("least", "greatest", &extremes.max),
                    ];
                    for (which, reaction, extreme) in turned {
                        foundation.push(ActionRow {
                            node,
                            what: format!("{which} {component}"),
                            reaction: format!("{reaction} {component}"),
                            combination: record.in_short(&extreme.state, &extreme.loaded),
                            values: quantities(&extreme.with, -1.0),
                        });
                    }
                }
            }
            GoverningReactions { purpose, rows, foundation }
        })
        .collect();
    Reactions { components: used.iter().map(|k| COMPONENTS[*k]).collect(), by_case, governing }
}

#[derive(Serialize)]
pub(super) struct SelfCheckView<'r> {
    satisfied: bool,
    rows: Vec<CheckRow<'r>>,
    independent: Option<IndependentView<'r>>,
}

#[derive(Serialize)]
struct CheckRow<'r> {
    structure: &'r str,
    case: &'r str,
    loads: [Quantity; 3],
    reactions: [Quantity; 3],
    balance: String,
    residual: String,
    external: Quantity,
    strain: Quantity,
    energy: String,
    satisfied: bool,
}

#[derive(Serialize)]
struct IndependentView<'r> {
    member: &'r str,
    case: &'r str,
    method: &'r str,
    differences: Vec<Difference>,
    satisfied: bool,
}

#[derive(Serialize)]
struct Difference {
    effect: &'static str,
    relative: String,
}

pub(super) fn self_check(record: &Record) -> SelfCheckView<'_> {
    let check = &record.self_check;
    let mut rows = Vec::new();
    for (structure, parts) in &check.structures {
        for (case, balance) in &parts.balances {
            let (Some(residual), Some(energy)) =
                (parts.residuals.get(case), parts.energies.get(case))
            else {
                continue;
            };
            let force =
                |values: &[f64; 6]| std::array::from_fn(|k| Quantity::new(Kind::Force, values[k]));
            rows.push(CheckRow {
                structure,
                case,
                loads: force(&balance.loads),
                reactions: force(&balance.reactions),
                balance: at_most(balance.relative),
                residual: at_most(residual.relative),
                external: Quantity::new(Kind::Energy, energy.external),
                strain: Quantity::new(Kind::Energy, energy.strain),
                energy: at_most(energy.relative),
                satisfied: balance.satisfied && residual.satisfied && energy.satisfied,
            });
        }
    }
    SelfCheckView {
        satisfied: check.satisfied,
        rows,
        independent: check.independent.as_ref().map(|part| IndependentView {
            member: &part.member,
            case: &part.case,
            method: &part.method,
            differences: EFFECTS
                .iter()
                .filter_map(|effect| {
                    let relative = part.differences.get(effect.name())?;
                    Some(Difference { effect: effect.name(), relative: at_most(*relative) })
                })
                .collect(),
            satisfied: part.satisfied,
        }),
    }
}

/// A relative error, which the Record keeps as a power of ten.
fn at_most(relative: f64) -> String {
    if relative == 0.0 {
        "< 10⁻¹⁴".to_owned()
    } else {
        format!("≤ {}", crate::quantity::print(relative, 1))
    }
}
