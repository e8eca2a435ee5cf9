//! From a rule's terms and the project's actions to rows of factors.
//!
//! - All subsets: every set of variable actions that can act together, the empty one included; in each set
//!   every action leads in turn. What is left out acts favourably or not at all.
//! - Maximal, as written: only the sets to which nothing can be added.
//! - Actions that a rule names by itself (accidental, seismic) always act, as many as can act together.
//! - Permanent actions choose their factor by source.

use crate::catalogue::{Factor, Term};
use crate::model::{CaseId, Model, Nature};

/// Most rows of one rule.
pub(super) const MOST: usize = 20_000;
/// Most variable actions of which all sets are formed.
const MOST_ACTIONS: usize = 16;

/// A row: factors by case, what leads, which choice the permanent actions made.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Row {
    pub(super) factors: Vec<(CaseId, f64)>,
    pub(super) leading: Option<CaseId>,
    pub(super) reason: String,
}

/// Too many rows to make.
pub(super) struct TooMany;

/// An action that may act: a case with its sense.
#[derive(Clone, Copy, Debug, PartialEq)]
struct Action {
    case: CaseId,
    sign: f64,
}

/// The cases that a kind of action stands for.
pub(super) fn of_kind(model: &Model, kind: &str, case: CaseId) -> bool {
    use Nature as N;
    let nature = model[case].nature;
    match kind {
        // The factor on settlement depends on the analysis (Table A1.2(B), NOTE 4): it is for the engineer to
        // write, and a case in no combination is an open item.
        "permanent" => matches!(nature, N::Permanent | N::Earth),
        "leading" | "accompanying" | "variable" => matches!(
            nature,
            N::Imposed
                | N::RoofLive
                | N::Snow
                | N::Rain
                | N::Wind
                | N::Thermal
                | N::Fluid
                | N::Construction
        ),
        "accidental" => nature == N::Accidental,
        "seismic" => matches!(nature, N::SeismicHorizontal | N::SeismicVertical),
        "D" => nature == N::Permanent,
        "L" => matches!(nature, N::Imposed | N::Construction),
        "Lr" => nature == N::RoofLive,
        "S" => nature == N::Snow,
        "R" => nature == N::Rain,
        "W" => nature == N::Wind,
        "F" => nature == N::Fluid,
        "H" => nature == N::Earth,
        "T" => nature == N::Thermal,
        "Ev" => nature == N::SeismicVertical,
        "Eh" => nature == N::SeismicHorizontal,
        _ => false,
    }
}

/// Kinds that stand in every combination of their row.
fn always(kind: &str) -> bool {
    matches!(kind, "permanent" | "D" | "F" | "H")
}

/// Kinds that a row is about: as many as can act together, never none.
fn named(kind: &str) -> bool {
    matches!(kind, "accidental" | "seismic" | "Ev" | "Eh")
}

/// The rows of one branch of an expression. `psi` gives ψ0, ψ1, ψ2 of a case.
pub(super) fn rows(
    model: &Model,
    branch: &[Term],
    every_subset: bool,
    psi: &dyn Fn(CaseId) -> [f64; 3],
) -> Result<Vec<Row>, TooMany> {
    let cases = |kind: &str| -> Vec<CaseId> {
        (0..model.cases.len()).map(CaseId).filter(|case| of_kind(model, kind, *case)).collect()
    };
    let candidates = |wanted: &dyn Fn(&str) -> bool| -> Vec<Action> {
        let mut out: Vec<Action> = Vec::new();
        for case in
            branch.iter().filter(|term| wanted(&term.kind)).flat_map(|term| cases(&term.kind))
        {
            if out.iter().any(|action| action.case == case) {
                continue;
            }
            out.push(Action { case, sign: 1.0 });
            if model[case].relations.reverses {
                out.push(Action { case, sign: -1.0 });
            }
        }
        out.sort_by_key(|action| (action.case, action.sign < 0.0));
        out
    };
    let varying = candidates(&|kind| !always(kind) && !named(kind));
    let must = candidates(&named);
    if varying.len() > MOST_ACTIONS || must.len() > MOST_ACTIONS {
        return Err(TooMany);
    }
    let value = |factor: &Factor, action: Action| {
        let psi = factor.psi.map_or(1.0, |which| psi(action.case)[which]);
        factor.number * psi * action.sign
    };
    let term = |kinds: &[&str], case: CaseId| {
        branch
            .iter()
            .find(|term| kinds.contains(&term.kind.as_str()) && of_kind(model, &term.kind, case))
    };
    let mut out = Vec::new();
    for fixed in sets(model, &must, false) {
        for acting in sets(model, &varying, every_subset) {
            let leads = branch.iter().any(|term| term.kind == "leading");
            let leaders: Vec<Option<CaseId>> = if leads && !acting.is_empty() {
                acting.iter().map(|action| Some(action.case)).collect()
            } else {
                vec![None]
            };
            let about = senses(model, &fixed, &acting, &varying);
            for leading in leaders {
                let mut factors: Vec<(CaseId, f64)> = Vec::new();
                for action in fixed.iter().chain(&acting) {
                    let kinds: &[&str] = if leading == Some(action.case) {
                        &["leading"]
                    } else {
                        &[
                            "accompanying",
                            "variable",
                            "accidental",
                            "seismic",
                            "L",
                            "Lr",
                            "S",
                            "R",
                            "W",
                            "T",
                            "Ev",
                            "Eh",
                        ]
                    };
                    if let Some(term) = term(kinds, action.case) {
                        factors.push((action.case, value(&term.choices[0], *action)));
                    }
                }
                for (permanent, reasons) in permanents(model, branch, &cases) {
                    let mut all = permanent;
                    all.extend(&factors);
                    all.retain(|(_, factor)| factor.abs() > 0.0);
                    all.sort_by_key(|(case, _)| *case);
                    let lead = leading.map(|case| format!("{} leads", model[case].name));
                    let parts: Vec<String> =
                        lead.into_iter().chain(reasons).chain(about.clone()).collect();
                    out.push(Row { factors: all, leading, reason: parts.join(", ") });
                    if out.len() > MOST {
                        return Err(TooMany);
                    }
                }
            }
        }
    }
    Ok(out)
}

/// Which actions act in the opposite sense, and which are left out though they could act.
fn senses(model: &Model, fixed: &[Action], acting: &[Action], varying: &[Action]) -> Vec<String> {
    let name = |action: &Action| model[action.case].name.clone();
    let reversed = fixed.iter().chain(acting).filter(|action| action.sign < 0.0);
    let mut out: Vec<String> = reversed.map(|a| format!("{} reversed", name(a))).collect();
    let excluded = |action: &Action| {
        let group = &model[action.case].relations.one_of;
        acting.iter().any(|other| {
            other.case == action.case
                || group.is_some() && *group == model[other.case].relations.one_of
        })
    };
    let left: Vec<String> =
        varying.iter().filter(|a| a.sign > 0.0 && !excluded(a)).map(name).collect();
    match left.len() {
        0 => {}
        1..=3 => out.push(format!("without {}", left.join(", "))),
        more => out.push(format!("without {more} that could act")),
    }
    out
}

/// Sets of actions that can act together; all, or those to which nothing can be added.
fn sets(model: &Model, actions: &[Action], every: bool) -> Vec<Vec<Action>> {
    let compatible: Vec<u32> =
        (0..1_u32 << actions.len()).filter(|set| fits(model, actions, *set)).collect();
    // One more action usually does; those that act only together come by twos and threes.
    let enlarged = |set: &u32| {
        let mut bits = (0..actions.len()).map(|index| set | 1 << index).filter(|more| more != set);
        bits.any(|more| compatible.binary_search(&more).is_ok())
            || compatible.iter().any(|other| other != set && other & set == *set)
    };
    let mut chosen: Vec<u32> =
        compatible.iter().filter(|set| every || !enlarged(set)).copied().collect();
    // Fuller sets first: the complete combination leads the list.
    chosen.sort_by_key(|set| (std::cmp::Reverse(set.count_ones()), *set));
    let members = |set: u32| {
        let at = |index: &usize| set & (1 << index) != 0;
        (0..actions.len()).filter(at).map(|index| actions[index]).collect()
    };
    chosen.into_iter().map(members).collect()
}

/// One of each group at most, and nobody without those that it acts with.
fn fits(model: &Model, actions: &[Action], set: u32) -> bool {
    let acting: Vec<Action> = actions
        .iter()
        .enumerate()
        .filter(|(index, _)| set & (1 << index) != 0)
        .map(|(_, action)| *action)
        .collect();
    let variable = |case: CaseId| actions.iter().any(|action| action.case == case);
    acting.iter().enumerate().all(|(index, action)| {
        let relations = &model[action.case].relations;
        let alone = acting[index + 1..].iter().all(|other| {
            let same_group = relations.one_of.is_some()
                && relations.one_of == model[other.case].relations.one_of;
            other.case != action.case && !same_group
        });
        let accidental = model[action.case].nature == Nature::Accidental;
        let one_accident = !accidental
            || acting.iter().filter(|other| model[other.case].nature == Nature::Accidental).count()
                == 1;
        let accompanied = relations
            .together_with
            .iter()
            .all(|with| !variable(*with) || acting.iter().any(|other| other.case == *with));
        alone && one_accident && accompanied
    })
}

/// Factors of what always acts, with the choices in words.
type Permanent = (Vec<(CaseId, f64)>, Vec<String>);

/// Factors of what always acts, every source choosing for itself.
fn permanents(
    model: &Model,
    branch: &[Term],
    cases: &dyn Fn(&str) -> Vec<CaseId>,
) -> Vec<Permanent> {
    let mut out: Vec<Permanent> = vec![(Vec::new(), Vec::new())];
    for term in branch.iter().filter(|term| always(&term.kind)) {
        let mut groups: Vec<(Option<&String>, Vec<CaseId>)> = Vec::new();
        for case in cases(&term.kind) {
            let group = model[case].relations.source_group.as_ref();
            match groups.iter_mut().find(|(name, _)| *name == group) {
                Some((_, all)) => all.push(case),
                None => groups.push((group, vec![case])),
            }
        }
        let several = groups.len() > 1;
        for (group, all) in groups {
            let mut next = Vec::new();
            for (factors, reasons) in &out {
                for (index, choice) in term.choices.iter().enumerate() {
                    let mut factors: Vec<(CaseId, f64)> = factors.clone();
                    factors.extend(all.iter().map(|case| (*case, choice.number)));
                    let mut reasons = reasons.clone();
                    if term.choices.len() > 1 {
                        let which = if index == 0 { "unfavourable" } else { "favourable" };
                        let whose = match group {
                            Some(group) if several => format!(" ({group})"),
                            None if several => " (others)".to_owned(),
                            _ => String::new(),
                        };
                        reasons.push(format!("permanent{whose} {which}"));
                    }
                    next.push((factors, reasons));
                }
            }
            out = next;
        }
    }
    out
}

/// Which rows can never govern: for every choice of signs of the actions' effects another row has the same
/// or worse factors. `None` where there are too many actions or rows to tell.
pub(super) fn dominated(rows: &[Vec<(CaseId, f64)>]) -> Option<Vec<bool>> {
    let mut cases: Vec<CaseId> = rows.iter().flatten().map(|(case, _)| *case).collect();
    cases.sort();
    cases.dedup();
    if cases.len() > 12
        || rows.len().checked_mul(rows.len())?.checked_shl(u32::try_from(cases.len()).ok()?)?
            > 200_000_000
    {
        return None;
    }
    let vector = |row: &Vec<(CaseId, f64)>| -> Vec<f64> {
        let of = |case: &CaseId| row.iter().find(|(own, _)| own == case).map_or(0.0, |(_, f)| *f);
        cases.iter().map(of).collect()
    };
    let vectors: Vec<Vec<f64>> = rows.iter().map(vector).collect();
    let beaten = |index: usize, signs: u32| {
        vectors.iter().enumerate().any(|(other, vector)| {
            other != index
                && vector.iter().zip(&vectors[index]).enumerate().all(|(k, (theirs, own))| {
                    let sign = if signs & (1 << k) == 0 { 1.0 } else { -1.0 };
                    sign * theirs >= sign * own - 1e-12
                })
        })
    };
    let all = 1_u32 << cases.len();
    Some((0..rows.len()).map(|index| (0..all).all(|signs| beaten(index, signs))).collect())
}
