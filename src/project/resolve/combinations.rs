//! Combinations: those that rules make, then those written out.

use super::about::words;
use super::reader::Reader;
use crate::diagnostic::Diagnostic;
use crate::model::{CaseId, Combination, Model};
use crate::project::written;
use crate::quantity::Kind;

pub(super) fn combinations(
    reader: &mut Reader,
    written: &written::Combinations,
    model: &mut Model,
) {
    super::rules::rules(reader, &written.rules, model);
    for combination in &written.written {
        let mut factors = Vec::new();
        for (name, text) in &combination.factors {
            let cases = model.cases.iter().map(|case| case.name.as_str());
            let case = reader.find(name, "load case", "unknown-case", cases);
            let factor = reader.quantity(text, Kind::Number);
            // A factor of nought says that the case does not act.
            if let (Some(case), Some(factor)) = (case, factor)
                && factor.abs() > 0.0
            {
                factors.push((CaseId(case), factor));
            }
        }
        factors.sort_by_key(|(case, _)| *case);
        if factors.is_empty() {
            reader.error(
                "empty",
                format!("the combination `{}` has no load case that acts", combination.title),
                combination.title.place(),
            );
            continue;
        }
        let purpose = combination.purpose.is;
        let terms: Vec<String> = factors
            .iter()
            .map(|(case, factor)| format!("{factor} {}", model[*case].name))
            .collect();
        let name = format!("{} {} | {}", purpose.name(), combination.title, terms.join(" + "));
        if model.combinations.iter().any(|other| other.name == name) {
            reader.problem(
                Diagnostic::error(
                    "duplicate-combination",
                    format!("the combination `{}` stands twice", combination.title),
                )
                .at(combination.title.place())
                .hint("same title, purpose and factors: take one away".to_owned()),
            );
            continue;
        }
        model.combinations.push(Combination {
            name,
            number: format!("C{}", model.combinations.len() + 1),
            title: combination.title.to_string(),
            purpose,
            duration: factors.iter().filter_map(|(case, _)| model[*case].duration).max(),
            factors,
            rule: None,
            clause: None,
            leading: None,
            reason: words(combination.source.as_ref()),
            origin: combination.place(),
        });
    }
}
