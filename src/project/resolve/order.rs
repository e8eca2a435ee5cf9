//! The order in which structures are solved: who hands on reactions comes first.

use std::collections::BTreeSet;

use super::reader::Reader;
use crate::diagnostic::Diagnostic;
use crate::model::{LoadKind, Model, StructureId, Target};

pub(super) fn solve_order(reader: &mut Reader, model: &mut Model) {
    // (giver, receiver), each pair once.
    let mut handed = BTreeSet::new();
    let mut places = Vec::new();
    for load in model.cases.iter().flat_map(|case| &case.loads) {
        if let LoadKind::Handed(reaction) = &load.kind {
            let receiver = match reaction.to {
                Target::Member(member) => model[member].structure,
                Target::Node(node) => model[node].structure,
            };
            let pair = (model[reaction.from].structure, receiver);
            if handed.insert(pair) {
                places.push((pair, load.origin.clone()));
            }
        }
    }
    let mut left: Vec<StructureId> = (0..model.structures.len()).map(StructureId).collect();
    while !left.is_empty() {
        let waits = |id: StructureId| {
            handed.iter().any(|(giver, receiver)| *receiver == id && left.contains(giver))
        };
        let Some(place) = left.iter().position(|id| !waits(*id)) else { break };
        model.solve_order.push(left.remove(place));
    }
    if let Some(chain) = cycle(&left, &handed) {
        let names: Vec<String> = chain.iter().map(|id| format!("`{}`", model[*id].name)).collect();
        let pair = (chain[0], chain[1]);
        let place = places.iter().find(|(other, _)| *other == pair).map(|(_, place)| place.clone());
        reader.problem(
            Diagnostic::error(
                "reaction-cycle",
                format!("reactions are handed on in a circle: {}", names.join(" → ")),
            )
            .at(place)
            .hint("a structure cannot rest, through others, on itself".to_owned()),
        );
    }
}

/// A circle among structures that wait for one another, the first repeated at the end.
fn cycle(
    left: &[StructureId],
    handed: &BTreeSet<(StructureId, StructureId)>,
) -> Option<Vec<StructureId>> {
    let mut chain = vec![*left.first()?];
    // Each structure left waits for another one left: going backwards must meet itself.
    while chain.len() <= left.len() {
        let here = chain[chain.len() - 1];
        let (giver, _) =
            handed.iter().find(|(giver, receiver)| *receiver == here && left.contains(giver))?;
        if let Some(start) = chain.iter().position(|id| id == giver) {
            let mut circle: Vec<StructureId> = chain[start..].to_vec();
            circle.push(*giver);
            circle.reverse();
            return Some(circle);
        }
        chain.push(*giver);
    }
    None
}
