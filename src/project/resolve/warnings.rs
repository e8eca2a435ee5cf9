//! What is odd but not wrong: things that nothing uses, strengths of thinner parts.

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
    too_thick(model, &mut out);
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

/// Sections with parts beyond the thickness at which their material has its strengths.
fn too_thick(model: &Model, out: &mut Vec<Diagnostic>) {
    let mut seen = BTreeSet::new();
    for member in &model.members {
        let (section, material) = (&model[member.section], &model[member.material]);
        let (Some(part), Some(limit)) = (section.properties.thickest(), material.up_to) else {
            continue;
        };
        if part > limit * (1.0 + 1e-9) && seen.insert((member.section.0, member.material.0)) {
            let mm = |metres: f64| crate::quantity::print(1e3 * metres, 4);
            out.push(
                Diagnostic::warning(
                    "thickness",
                    format!(
                        "section `{}` is {} mm thick, and material `{}` has its strengths up to {} mm",
                        section.name,
                        mm(part),
                        material.name,
                        mm(limit)
                    ),
                )
                .at(section.origin.clone())
                .hint(format!("state it: `thickness: {} mm` at the material", mm(part))),
            );
        }
    }
}
