//! Results by name.

use crate::analysis::{Extreme, Extremes, Governing, Segment, Solution};
use crate::model::{EFFECTS, Freedom, Model, Purpose};
use crate::record::{
    ExtremeRecord, ExtremesRecord, Map, MemberResult, NodeResult, RunnerRecord, SegmentRecord,
    SpanResult,
};

/// Names of reaction components.
pub(in crate::record) const COMPONENTS: [&str; 6] = ["X", "Y", "Z", "RX", "RY", "RZ"];

pub(super) fn nodes(model: &Model, solution: &Solution) -> Map<NodeResult> {
    let by_state = |values: &[[f64; 6]]| -> Map<[f64; 6]> {
        solution
            .states
            .iter()
            .zip(values)
            .map(|(case, value)| (model[*case].name.clone(), *value))
            .collect()
    };
    model
        .nodes
        .iter()
        .zip(&solution.nodes)
        .map(|(node, solved)| {
            let record = NodeResult {
                displacement: by_state(&solved.displacement),
                reaction: by_state(&solved.reaction),
            };
            (node.name.clone(), record)
        })
        .collect()
}

pub(super) fn members(
    model: &Model,
    solution: &Solution,
    governing: &Governing,
) -> Map<MemberResult> {
    let states: Vec<&str> = solution.states.iter().map(|case| model[*case].name.as_str()).collect();
    model
        .members
        .iter()
        .zip(&solution.members)
        .zip(&governing.members)
        .map(|((member, solved), governing)| {
            let record = MemberResult {
                segments: solved.segments.iter().map(|segment| named(segment, &states)).collect(),
                governing: by_purpose(model, &governing.whole),
                spans: governing
                    .spans
                    .iter()
                    .map(|span| SpanResult { governing: by_purpose(model, span) })
                    .collect(),
            };
            (member.name.clone(), record)
        })
        .collect()
}

/// A segment with its states by name.
pub(in crate::record) fn named(segment: &Segment, states: &[&str]) -> SegmentRecord {
    SegmentRecord {
        from: segment.from,
        to: segment.to,
        fields: states
            .iter()
            .map(|state| (*state).to_owned())
            .zip(segment.states.iter().cloned())
            .collect(),
    }
}

fn by_purpose(
    model: &Model,
    governing: &[(Purpose, [Extremes; EFFECTS.len()])],
) -> Map<Map<ExtremesRecord>> {
    governing
        .iter()
        .map(|(purpose, effects)| {
            let effects = EFFECTS
                .iter()
                .zip(effects)
                .map(|(effect, extremes)| {
                    (effect.name().to_owned(), self::extremes(model, extremes))
                })
                .collect();
            (purpose.name().to_owned(), effects)
        })
        .collect()
}

pub(super) fn reactions(model: &Model, governing: &Governing) -> Map<Map<Map<ExtremesRecord>>> {
    let mut out: Map<Map<Map<ExtremesRecord>>> = Map::new();
    for (purpose, node, components) in &governing.reactions {
        let node = &model[*node];
        let Some(support) = &node.support else { continue };
        let restrained = COMPONENTS
            .iter()
            .zip(components)
            .zip(support.freedoms)
            .filter(|(_, freedom)| *freedom != Freedom::Free)
            .map(|((name, extremes), _)| ((*name).to_owned(), self::extremes(model, extremes)))
            .collect();
        out.entry(purpose.name().to_owned()).or_default().insert(node.name.clone(), restrained);
    }
    out
}

fn extremes(model: &Model, extremes: &Extremes) -> ExtremesRecord {
    ExtremesRecord { max: extreme(model, &extremes.max), min: extreme(model, &extremes.min) }
}

fn extreme(model: &Model, extreme: &Extreme) -> ExtremeRecord {
    let state = |combination: usize| model.combinations[combination].name.clone();
    ExtremeRecord {
        value: extreme.value,
        x: extreme.x,
        side: extreme.side,
        state: state(extreme.combination),
        loaded: extreme.loaded.iter().map(|part| model[*part].name.clone()).collect(),
        with: extreme.with,
        next: extreme
            .next
            .map(|next| RunnerRecord { value: next.value, state: state(next.combination) }),
    }
}
