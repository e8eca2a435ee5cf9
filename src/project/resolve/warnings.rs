//! What is odd but not wrong: things that nothing uses.

use std::collections::BTreeSet;

use crate::diagnostic::{Diagnostic, Place};
use crate::model::{CaseId, MaterialId, Member, Model, NodeId, SectionId};

pub(super) fn warnings(model: &Model, marks: &BTreeSet<String>) -> Vec<Diagnostic> {
    let mut out = Vec::new();
    let mut unused = |code, what: &str, name: &str, place: &Place| {
        out.push(
            Diagnostic::warning(code, format!("{what} `{name}` is used by nothing"))
                .at(place.clone()),
        );
    };
    for (index, node) in model.nodes.iter().enumerate() {
        let reached = |member: &Member| member.along.contains(&NodeId(index));
        if !model.members.iter().any(reached) && !marks.contains(&node.name) {
            unused("unused-node", "node", &node.name, &node.origin);
        }
    }
    for (index, section) in model.sections.iter().enumerate() {
        if !model.members.iter().any(|member| member.section == SectionId(index)) {
            unused("unused-section", "section", &section.name, &section.origin);
        }
    }
    for (index, material) in model.materials.iter().enumerate() {
        if !model.members.iter().any(|member| member.material == MaterialId(index)) {
            unused("unused-material", "material", &material.name, &material.origin);
        }
    }
    for (index, case) in model.cases.iter().enumerate() {
        if case.loads.is_empty() {
            out.push(
                Diagnostic::warning("empty-case", format!("load case `{}` has no load", case.name))
                    .at(case.origin.clone()),
            );
        }
        let combined = model
            .combinations
            .iter()
            .any(|combination| combination.factors.iter().any(|(case, _)| *case == CaseId(index)));
        if !combined {
            out.push(
                Diagnostic::warning(
                    "uncombined-case",
                    format!("load case `{}` is in no combination", case.name),
                )
                .at(case.origin.clone()),
            );
        }
    }
    out.sort_by_key(|problem| problem.place.as_ref().map(|place| place.range.start));
    out
}
