//! Combination rules for `catalogue`.

use serde_json::{Value, json};

use crate::catalogue::{Rule, RuleSet, rule_sets};

/// Word that lists all rules.
pub(super) const ALL: &str = "rules";

/// The rule of an id, case ignored.
pub(super) fn rule(id: &str) -> Option<(&'static RuleSet, &'static Rule)> {
    all().into_iter().find(|(_, rule)| rule.id.eq_ignore_ascii_case(id))
}

/// Every rule with its code.
pub(super) fn all() -> Vec<(&'static RuleSet, &'static Rule)> {
    rule_sets().iter().flat_map(|set| set.rules.iter().map(move |rule| (set, rule))).collect()
}

/// Rules whose id, title or code hold all the words.
pub(super) fn matching(words: &[String]) -> Vec<(&'static RuleSet, &'static Rule)> {
    let holds = |(set, rule): &(&'static RuleSet, &'static Rule)| {
        let about = format!("{} {} {}", rule.id, rule.title, set.code).to_lowercase();
        words.iter().all(|word| about.contains(&word.to_lowercase()))
    };
    all().into_iter().filter(holds).collect()
}

/// Id, purpose, usual expansion, clause.
pub(super) fn rows(of: &[(&RuleSet, &Rule)]) -> Vec<Vec<String>> {
    of.iter()
        .map(|(_, rule)| {
            vec![rule.id.clone(), rule.purpose.clone(), rule.expansion.clone(), rule.clause.clone()]
        })
        .collect()
}

/// Everything a rule says.
pub(super) fn in_full(set: &RuleSet, rule: &Rule) -> String {
    let values = |values: &indexmap::IndexMap<String, f64>| -> String {
        let values: Vec<String> = values.iter().map(|(name, v)| format!("{name} = {v}")).collect();
        values.join(", ")
    };
    let mut out = format!("{}\n{}\n", rule.id, set.reference(rule));
    out += &format!(
        "\nPurpose {}; expansion {} unless stated\n\nRows\n",
        rule.purpose, rule.expansion
    );
    for row in &rule.rows {
        let id = row.id.as_ref().map(|id| format!("{id}: ")).unwrap_or_default();
        let needs = if row.needs.is_empty() {
            String::new()
        } else {
            format!("   (only with {})", row.needs.join(" or "))
        };
        out += &format!("  {id}{}{needs}\n", row.expression);
    }
    if !rule.values.is_empty() {
        out += &format!("\nValues\n  {}\n", values(&rule.values));
    }
    for (annex, differing) in &rule.annex_values {
        out += &format!("  {annex}: {}\n", values(differing));
    }
    for (annex, table) in &set.psi {
        out += &format!("\nψ0, ψ1, ψ2: {annex}\n");
        for (category, [a, b, c]) in table {
            out += &format!("  {category}: {a}, {b}, {c}\n");
        }
    }
    if let Some(notes) = &rule.notes {
        out += &format!("\n{notes}\n");
    }
    out + &format!("\nSource: {}\nVerified: {}\n", set.source, set.verified)
}

/// A rule for machines.
pub(super) fn as_json(set: &RuleSet, rule: &Rule) -> Value {
    json!({
        "id": rule.id,
        "code": set.code,
        "edition": set.edition,
        "clause": rule.clause,
        "purpose": rule.purpose,
        "expansion": rule.expansion,
        "values": rule.values,
        "annex_values": rule.annex_values,
        "psi": set.psi,
        "rows": rule.rows.iter().map(|row| json!({
            "id": row.id,
            "expression": row.expression,
            "needs": row.needs,
        })).collect::<Vec<_>>(),
        "notes": rule.notes,
        "source": set.source,
        "verified": set.verified,
    })
}
