//! Model, solution, governing values and self-check → the Record's form.

mod input;
mod loads;
mod outcomes;
mod results;
mod self_check;
mod steps;

use super::{
    AssumptionRecord, BasisRecord, CombinationRecord, DeferralRecord, FORMAT, Map, ProgramRecord,
    ProjectRecord, PsiRecord, Record, Registers, Results, RevisionRecord, RuleUseRecord,
    StandardRecord, registers,
};
use crate::analysis::{Governing, SelfCheck, Solution};
use crate::checks::Checked;
use crate::model::Model;

pub(super) fn build(
    model: &Model,
    solution: &Solution,
    governing: &Governing,
    self_check: &SelfCheck,
    checked: &Checked,
    fingerprint: &str,
) -> Record {
    let (checks, workings) = outcomes::outcomes(model, checked);
    let mut record = Record {
        format: FORMAT,
        program: ProgramRecord {
            name: env!("CARGO_PKG_NAME").to_owned(),
            version: env!("CARGO_PKG_VERSION").to_owned(),
        },
        fingerprint: fingerprint.to_owned(),
        arithmetic: solution.arithmetic,
        project: project(model),
        basis: basis(model),
        model: input::model(model, solution, governing, self_check),
        combinations: combinations(model),
        rules: rules(model),
        results: Results {
            nodes: results::nodes(model, solution),
            members: results::members(model, solution, governing),
            reactions: results::reactions(model, governing),
        },
        checks,
        workings,
        narrative: outcomes::narrative(model),
        registers: Registers::default(),
        self_check: self_check::self_check(model, self_check),
    };
    record.settle();
    // Open items print values, so they come after these are settled.
    record.registers = registers::registers(&record);
    record
}

fn project(model: &Model) -> ProjectRecord {
    let project = &model.project;
    ProjectRecord {
        title: project.title.clone(),
        number: project.number.clone(),
        client: project.client.clone(),
        subject: project.subject.clone(),
        revisions: project
            .revisions
            .iter()
            .map(|revision| RevisionRecord {
                mark: revision.mark.clone(),
                date: revision.date.clone(),
                status: revision.status.clone(),
                note: revision.note.clone(),
                originated: revision.originated.clone(),
                checked: revision.checked.clone(),
                approved: revision.approved.clone(),
            })
            .collect(),
    }
}

fn basis(model: &Model) -> BasisRecord {
    let basis = &model.basis;
    BasisRecord {
        national_annex: basis.national_annex.clone(),
        consequence_class: basis.consequence_class.clone(),
        working_life: basis.working_life.clone(),
        standards: basis
            .standards
            .iter()
            .map(|standard| StandardRecord {
                id: standard.id.clone(),
                title: standard.title.clone(),
                edition: standard.edition.clone(),
            })
            .collect(),
        assumptions: basis
            .assumptions
            .iter()
            .map(|assumption| AssumptionRecord {
                id: assumption.id.clone(),
                text: assumption.text.clone(),
                status: if assumption.confirmed { "confirmed" } else { "to confirm" }.to_owned(),
                by: assumption.by.clone(),
                source: assumption.source.clone(),
            })
            .collect(),
        deferred: basis
            .deferred
            .iter()
            .map(|deferral| DeferralRecord {
                id: deferral.id.clone(),
                text: deferral.text.clone(),
                to: deferral.to.clone(),
                checks: deferral.checks.clone(),
            })
            .collect(),
    }
}

fn rules(model: &Model) -> Vec<RuleUseRecord> {
    model
        .rules
        .iter()
        .map(|rule| RuleUseRecord {
            rule: rule.rule.clone(),
            reference: rule.reference.clone(),
            annex: rule.annex.clone(),
            purpose: rule.purpose.name().to_owned(),
            expansion: rule.expansion.clone(),
            values: rule.values.clone(),
            expressions: rule.expressions.clone(),
            kept: rule.kept,
            same: rule.same,
            dominated: rule.dominated,
            dropped: rule.dropped,
            notes: rule.notes.clone(),
            psi: rule
                .psi
                .iter()
                .map(|(case, psi, origin)| PsiRecord {
                    case: model[*case].name.clone(),
                    psi: *psi,
                    origin: origin.clone(),
                })
                .collect(),
        })
        .collect()
}

fn combinations(model: &Model) -> Map<CombinationRecord> {
    model
        .combinations
        .iter()
        .map(|combination| {
            let record = CombinationRecord {
                number: combination.number.clone(),
                title: combination.title.clone(),
                purpose: combination.purpose.name().to_owned(),
                analysis: "superposed".to_owned(),
                factors: combination
                    .factors
                    .iter()
                    .map(|(case, factor)| (model[*case].name.clone(), *factor))
                    .collect(),
                rule: combination.rule.clone(),
                clause: combination.clause.clone(),
                leading: combination.leading.map(|case| model[case].name.clone()),
                reason: combination.reason.clone(),
                duration: combination.duration.map(|duration| duration.name().to_owned()),
            };
            (combination.name.clone(), record)
        })
        .collect()
}
