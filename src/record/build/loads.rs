//! Load cases with their loads, as tables and drawings need them.

use crate::analysis::{SelfCheck, Solution, arrangements};
use crate::model::{CaseId, Load, LoadKind, Model, Per, SpanLoading, StructureId, Target};
use crate::record::{BySpanRecord, CaseRecord, LoadRecord, Map, RelationsRecord, TargetRecord};

pub(super) fn cases(model: &Model, solution: &Solution, self_check: &SelfCheck) -> Map<CaseRecord> {
    model
        .cases
        .iter()
        .enumerate()
        .map(|(index, case)| {
            let id = CaseId(index);
            let record = CaseRecord {
                title: case.title.clone(),
                nature: case.nature.name().to_owned(),
                category: case.category.clone(),
                duration: case.duration.map(|duration| duration.name().to_owned()),
                source: case.source.clone(),
                self_weight: case.self_weight,
                relations: RelationsRecord {
                    one_of: case.relations.one_of.clone(),
                    together_with: names(model, &case.relations.together_with),
                    reverses: case.relations.reverses,
                    source_group: case.relations.source_group.clone(),
                },
                psi: case.psi,
                by_span: case.by_span.map(|loading| by_span(model, id, loading)),
                loads: case
                    .loads
                    .iter()
                    .enumerate()
                    .map(|(load, written)| self::load(model, solution, id, load, written))
                    .collect(),
                resultant: self_check
                    .structures
                    .iter()
                    .filter_map(|check| {
                        let balance = check.balances.iter().find(|balance| balance.case == id)?;
                        Some((model[check.structure].name.clone(), balance.loads))
                    })
                    .collect(),
            };
            (case.name.clone(), record)
        })
        .collect()
}

fn names(model: &Model, cases: &[CaseId]) -> Vec<String> {
    cases.iter().map(|case| model[*case].name.clone()).collect()
}

fn by_span(model: &Model, case: CaseId, loading: SpanLoading) -> BySpanRecord {
    let parts: Vec<CaseId> = model.parts_of(case).collect();
    let sets = match loading {
        SpanLoading::Any => Vec::new(),
        _ => arrangements(model, &parts, loading).iter().map(|set| names(model, set)).collect(),
    };
    let loading = match loading {
        SpanLoading::Any => "any",
        SpanLoading::AlternateAndAdjacent => "alternate and adjacent",
        SpanLoading::Alternate => "alternate",
    };
    BySpanRecord { loading: loading.to_owned(), parts: names(model, &parts), sets }
}

fn load(model: &Model, solution: &Solution, case: CaseId, index: usize, load: &Load) -> LoadRecord {
    let written = &load.written;
    let target = target(load);
    let structure: StructureId = match target {
        Target::Member(member) => model[member].structure,
        Target::Node(node) => model[node].structure,
    };
    let mut record = LoadRecord {
        form: written.form.name().to_owned(),
        structure: model[structure].name.clone(),
        target: match target {
            Target::Member(member) => TargetRecord::Member(model[member].name.clone()),
            Target::Node(node) => TargetRecord::Node(model[node].name.clone()),
        },
        from: None,
        to: None,
        at: Vec::new(),
        direction: written.direction.name(),
        per: match written.per {
            Per::Length => "length",
            Per::Projected => "projected",
        }
        .to_owned(),
        values: written.values.clone(),
        start: [0.0; 3],
        end: [0.0; 3],
        moment: [0.0; 3],
        width: written.width,
        build_up: written.build_up.map(|id| model[id].name.clone()),
        reaction_of: None,
        every: written.every,
        span: written.span,
        source: load.source.clone(),
    };
    match &load.kind {
        LoadKind::Line { from, to, start, end, .. } => {
            (record.from, record.to) = (Some(*from), Some(*to));
            (record.start, record.end) = (*start, *end);
        }
        LoadKind::Point { at, force, moment, .. } => {
            record.at = vec![*at];
            (record.start, record.moment) = (*force, *moment);
        }
        LoadKind::Node { force, moment, .. } => {
            (record.start, record.moment) = (*force, *moment);
        }
        LoadKind::Handed(handed) => {
            if let Target::Member(_) = handed.to {
                record.at.clone_from(&handed.at);
            }
            record.reaction_of = Some(model[handed.from].name.clone());
            let force =
                solution.handed.iter().find(|force| force.case == case && force.load == index);
            if let Some(force) = force {
                (record.start, record.moment) = (force.force, force.moment);
            }
        }
        LoadKind::Displaced { .. } | LoadKind::Warming { .. } | LoadKind::LackOfFit { .. } => {}
    }
    record
}

fn target(load: &Load) -> Target {
    match &load.kind {
        LoadKind::Line { member, .. }
        | LoadKind::Point { member, .. }
        | LoadKind::Warming { member, .. }
        | LoadKind::LackOfFit { member, .. } => Target::Member(*member),
        LoadKind::Node { node, .. } | LoadKind::Displaced { node, .. } => Target::Node(*node),
        LoadKind::Handed(handed) => handed.to,
    }
}
