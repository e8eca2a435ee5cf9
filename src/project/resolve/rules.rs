//! Rules in use: their values, the rows they make, each with its reason.

use indexmap::IndexMap;

use super::about::{meant, words};
use super::expand::{self, Row, TooMany, dominated, of_kind};
use super::reader::Reader;
use crate::catalogue::{self, KINDS, RuleRow, branches};
use crate::diagnostic::Diagnostic;
use crate::model::{CaseId, Combination, Model, Nature, Purpose, RuleUse, alike};
use crate::project::text::Located;
use crate::project::text::Words as _;
use crate::project::written::{
    self,
    words::{Dominated, Expansion},
};
use crate::quantity::Kind;

/// A rule as it is used.
struct Used {
    id: String,
    title: String,
    reference: String,
    clause: String,
    purpose: Purpose,
    expansion: Expansion,
    values: IndexMap<String, f64>,
    rows: Vec<RuleRow>,
    psi: Option<&'static IndexMap<String, [f64; 3]>>,
    annex: Option<String>,
    notes: Option<String>,
}

pub(super) fn rules(reader: &mut Reader, written: &[Located<written::Rule>], model: &mut Model) {
    for rule in written {
        if let Some(used) = used(reader, rule) {
            make(reader, rule, used, model);
        }
    }
}

fn used(reader: &mut Reader, written: &Located<written::Rule>) -> Option<Used> {
    let id = &written.rule;
    let purpose = written.purpose.as_ref().map(|word| word.is);
    let expansion = written.expansion.as_ref().map(|word| word.is);
    let Some((set, rule)) = catalogue::rule(id) else {
        return own(reader, written, purpose, expansion);
    };
    if let Some(rows) = &written.rows {
        let place = rows.first().map_or_else(|| id.place(), |row| row.place());
        reader.error(
            "conflicting-keys",
            format!("`{id}` is a rule of the catalogue: its rows are there"),
            place,
        );
        return None;
    }
    let annex = words(written.annex.as_ref());
    if let (Some(name), Some(text)) = (&annex, &written.annex)
        && !set.annexes.contains(name)
    {
        let known = set.annexes.iter().map(String::as_str);
        reader.problem(
            Diagnostic::error(
                "unknown-annex",
                format!("no annex values `{name}` for {}", set.code),
            )
            .at(text.place())
            .hint(meant(name, known.clone()))
            .hint(format!(
                "there are {}; state others in `with` and `psi`",
                known.collect::<Vec<_>>().join(", ")
            )),
        );
        return None;
    }
    let usual = set.annexes.first().map_or("", String::as_str);
    let chosen = annex.as_deref().unwrap_or(usual);
    let mut values = rule.values.clone();
    values
        .extend(rule.annex_values.get(chosen).into_iter().flatten().map(|(k, v)| (k.clone(), *v)));
    stated(reader, written, &mut values)?;
    Some(Used {
        id: rule.id.clone(),
        title: rule.title.clone(),
        reference: set.reference(rule),
        clause: format!("{}, {}", set.code, rule.clause),
        purpose: purpose.or_else(|| Purpose::from_name(&rule.purpose))?,
        expansion: expansion.or_else(|| expansion_of(&rule.expansion))?,
        values,
        rows: rule.rows.clone(),
        psi: set.psi.get(chosen),
        annex: (!set.psi.is_empty()).then(|| chosen.to_owned()),
        notes: rule.notes.clone(),
    })
}

/// A rule of the project.
fn own(
    reader: &mut Reader,
    written: &Located<written::Rule>,
    purpose: Option<Purpose>,
    expansion: Option<Expansion>,
) -> Option<Used> {
    let id = &written.rule;
    let Some(rows) = &written.rows else {
        let known =
            catalogue::rule_sets().iter().flat_map(|set| &set.rules).map(|rule| rule.id.as_str());
        reader.problem(
            Diagnostic::error("unknown-rule", format!("no combination rule named `{id}`"))
                .at(id.place())
                .hint(meant(id, known))
                .hint("`spanfolio catalogue rules` lists them; a rule of your own needs `rows`, `purpose` and `source`".to_owned()),
        );
        return None;
    };
    let source = words(written.source.as_ref());
    let (Some(purpose), Some(source)) = (purpose, source) else {
        reader.error(
            "missing-key",
            format!("the rule `{id}` of the project needs `purpose` and `source`"),
            id.place(),
        );
        return None;
    };
    let mut values = IndexMap::new();
    for (name, text) in &written.values {
        values.insert(name.to_string(), reader.quantity(text, Kind::Number)?);
    }
    Some(Used {
        id: id.to_string(),
        title: id.to_string(),
        reference: source.clone(),
        clause: source,
        purpose,
        expansion: expansion.unwrap_or(Expansion::AllSubsets),
        values,
        rows: rows
            .iter()
            .map(|row| RuleRow { id: None, expression: row.to_string(), needs: Vec::new() })
            .collect(),
        psi: catalogue::rule_sets().first().and_then(|set| set.psi.get("recommended")),
        annex: None,
        notes: None,
    })
}

/// Values that the project states otherwise.
fn stated(
    reader: &mut Reader,
    written: &written::Rule,
    values: &mut IndexMap<String, f64>,
) -> Option<()> {
    for (name, text) in &written.values {
        let known: Vec<String> = values.keys().cloned().collect();
        match values.get_mut(name.as_str()) {
            Some(value) => *value = reader.quantity(text, Kind::Number)?,
            None => {
                reader.problem(
                    Diagnostic::error(
                        "unknown-key",
                        format!("`{}` has no value `{name}`", written.rule),
                    )
                    .at(name.place())
                    .hint(meant(name, known.iter().map(String::as_str)))
                    .hint(format!("it has {}", known.join(", "))),
                );
                return None;
            }
        }
    }
    Some(())
}

fn expansion_of(word: &str) -> Option<Expansion> {
    Expansion::WORDS.iter().find(|(own, _)| *own == word).map(|(_, is)| *is)
}

fn make(reader: &mut Reader, written: &Located<written::Rule>, used: Used, model: &mut Model) {
    let every = used.expansion == Expansion::AllSubsets;
    let exists = |kind: &str| {
        matches!(kind, "leading" | "accompanying" | "variable")
            || (0..model.cases.len()).any(|case| of_kind(model, kind, CaseId(case)))
    };
    let psi = |case: CaseId| psi(model, used.psi, case).0;
    let mut made: Vec<(String, Row)> = Vec::new();
    for (index, row) in used.rows.iter().enumerate() {
        if !row.needs.is_empty() && !row.needs.iter().any(|kind| exists(kind)) {
            continue;
        }
        let place = || match &written.rows {
            Some(rows) => rows[index].place(),
            None => written.rule.place(),
        };
        let branches = match branches(&row.expression, &used.values, &exists) {
            Ok(branches) => branches,
            Err(error) => {
                let message = format!("this rule cannot be read: {error}");
                reader.problem(
                    Diagnostic::error("rule", message)
                        .at(place())
                        .hint(format!("kinds of action: {}", KINDS.join(", "))),
                );
                return;
            }
        };
        for branch in branches {
            match expand::rows(model, &branch, every, &psi) {
                Ok(rows) if made.len() + rows.len() <= expand::MOST => {
                    let id = row.id.clone().unwrap_or_default();
                    made.extend(rows.into_iter().map(|row| (id.clone(), row)));
                }
                Ok(_) | Err(TooMany) => {
                    reader.problem(
                        Diagnostic::error("too-many", format!("`{}` makes too many combinations", used.id))
                            .at(place())
                            .hint("say `expansion: maximal`, or which cases exclude one another: `one_of`".to_owned()),
                    );
                    return;
                }
            }
        }
    }
    file(written, &used, made, model);
}

/// Files the rows as combinations: those that are there already are counted, dominated ones dropped on request.
fn file(
    written: &Located<written::Rule>,
    used: &Used,
    made: Vec<(String, Row)>,
    model: &mut Model,
) {
    let mut same = 0;
    let mut kept: Vec<(String, Row)> = Vec::new();
    for (id, row) in made {
        let there = row.factors.is_empty()
            || kept.iter().any(|(_, other)| alike(&other.factors, &row.factors))
            || model
                .combinations
                .iter()
                .any(|other| other.purpose == used.purpose && alike(&other.factors, &row.factors));
        if there {
            same += 1;
        } else {
            kept.push((id, row));
        }
    }
    let factors: Vec<Vec<(CaseId, f64)>> =
        kept.iter().map(|(_, row)| row.factors.clone()).collect();
    let never = dominated(&factors);
    let drops = written.dominated.as_ref().is_some_and(|word| word.is == Dominated::Drop);
    let count = never.as_ref().map(|never| never.iter().filter(|never| **never).count());
    if let (true, Some(never)) = (drops, &never) {
        let mut never = never.iter();
        kept.retain(|_| !never.next().copied().unwrap_or(false));
    }
    model.rules.push(RuleUse {
        rule: used.id.clone(),
        reference: used.reference.clone(),
        annex: used.annex.clone(),
        purpose: used.purpose,
        expansion: expansion_name(used.expansion).to_owned(),
        values: used.values.iter().map(|(name, value)| (name.clone(), *value)).collect(),
        expressions: used
            .rows
            .iter()
            .map(|row| match &row.id {
                Some(id) => format!("{id}: {}", row.expression),
                None => row.expression.clone(),
            })
            .collect(),
        kept: kept.len(),
        same,
        dominated: count,
        dropped: drops,
        notes: used.notes.clone(),
        psi: factors_of(model, used),
    });
    for (id, row) in kept {
        let title =
            if id.is_empty() { used.title.clone() } else { format!("{} ({id})", used.title) };
        let terms: Vec<String> = row
            .factors
            .iter()
            .map(|(case, factor)| {
                format!(
                    "{} {}",
                    crate::quantity::print(*factor, 8).replace('\u{2212}', "-"),
                    model[*case].name
                )
            })
            .collect();
        let purpose = used.purpose;
        let clause =
            if id.is_empty() { used.clause.clone() } else { format!("{} ({id})", used.clause) };
        model.combinations.push(Combination {
            name: format!(
                "{} {title} | {}",
                purpose.name(),
                terms.join(" + ").replace("+ -", "- ")
            ),
            number: format!("C{}", model.combinations.len() + 1),
            title,
            purpose,
            duration: row.factors.iter().filter_map(|(case, _)| model[*case].duration).max(),
            factors: row.factors,
            rule: Some(used.id.clone()),
            clause: Some(clause),
            leading: row.leading,
            reason: Some(row.reason).filter(|reason| !reason.is_empty()),
            origin: written.place(),
        });
    }
}

const fn expansion_name(expansion: Expansion) -> &'static str {
    match expansion {
        Expansion::AllSubsets => "all subsets",
        Expansion::Maximal => "maximal",
        Expansion::AsWritten => "as written",
    }
}

/// The ψ factors that a rule takes, by variable action; none where its expressions name none.
fn factors_of(model: &Model, used: &Used) -> Vec<(CaseId, [f64; 3], String)> {
    if !used.rows.iter().any(|row| row.expression.contains("psi")) {
        return Vec::new();
    }
    (0..model.cases.len())
        .map(CaseId)
        .filter(|case| of_kind(model, "variable", *case))
        .map(|case| {
            let (factors, origin) = psi(model, used.psi, case);
            (case, factors, origin)
        })
        .collect()
}

/// ψ0, ψ1, ψ2 of a case, and where they come from: as stated, of its category, of its nature; where the
/// category is not stated, the largest of the nature; 1 where the nature has none.
fn psi(
    model: &Model,
    table: Option<&IndexMap<String, [f64; 3]>>,
    case: CaseId,
) -> ([f64; 3], String) {
    let case = &model[case];
    if let Some(psi) = case.psi {
        return (psi, "stated by the project".to_owned());
    }
    let whole = || ([1.0; 3], format!("none given for {}: taken as 1", case.nature.name()));
    let Some(table) = table else { return whole() };
    let category = case.category.as_deref().unwrap_or_default();
    let exact = |name: &str| table.get(name).map(|psi| (*psi, name.to_owned()));
    let category_of =
        |letter: &str| exact(letter).map(|(psi, letter)| (psi, format!("category {letter}")));
    let largest = |names: &dyn Fn(&str) -> bool| {
        let found = table.iter().filter(|(name, _)| names(name)).map(|(_, psi)| *psi);
        let most = found.reduce(|a, b| [0, 1, 2].map(|k: usize| a[k].max(b[k])));
        let said = format!("category not in the table: largest of {}", case.nature.name());
        most.map_or_else(whole, |psi| (psi, said))
    };
    match case.nature {
        Nature::Imposed => {
            let letter = category.get(..1).unwrap_or_default();
            category_of(letter).unwrap_or_else(|| largest(&|name| name.len() == 1 && name != "H"))
        }
        Nature::RoofLive => category_of("H").unwrap_or_else(whole),
        Nature::Snow => {
            let of_category = exact(&format!("snow {category}"));
            of_category.unwrap_or_else(|| largest(&|name| name.starts_with("snow")))
        }
        Nature::Wind => exact("wind").unwrap_or_else(whole),
        Nature::Thermal => exact("thermal").unwrap_or_else(whole),
        _ => whole(),
    }
}
