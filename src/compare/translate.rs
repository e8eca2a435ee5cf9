//! A Record with the names of the other side, so that what was renamed compares as the same thing.

use std::collections::BTreeMap;

use super::{ItemKind, Renamed};
use crate::record::{Map, Record, TargetRecord};

/// Old name → new name, by kind.
struct Names<'r>(BTreeMap<(ItemKind, &'r str), &'r str>);

impl Names<'_> {
    fn get(&self, kind: ItemKind, name: &str) -> String {
        self.0.get(&(kind, name)).map_or_else(|| name.to_owned(), |new| (*new).to_owned())
    }

    fn put(&self, kind: ItemKind, name: &mut String) {
        *name = self.get(kind, name);
    }

    fn put_all<'n>(&self, kind: ItemKind, names: impl IntoIterator<Item = &'n mut String>) {
        names.into_iter().for_each(|name| self.put(kind, name));
    }

    fn keys<T>(&self, kind: ItemKind, map: &mut Map<T>) {
        let old = std::mem::take(map);
        *map = old.into_iter().map(|(name, value)| (self.get(kind, &name), value)).collect();
    }

    /// A part of a case that acts by span is named `case/member.span`.
    fn part(&self, name: &mut String) {
        let Some((case, rest)) = name.split_once('/') else { return };
        let Some((member, span)) = rest.rsplit_once('.') else { return };
        let (case, member) = (self.get(ItemKind::Case, case), self.get(ItemKind::Member, member));
        *name = format!("{case}/{member}.{span}");
    }
}

/// The record under its new names: its input, and the names under which results stand. States keep
/// theirs, since combinations are matched by content.
pub(super) fn translated(record: &Record, renamed: &[Renamed]) -> Record {
    let mut record = record.clone();
    if renamed.is_empty() {
        return record;
    }
    let entry = |one: &'_ Renamed| ((one.kind, one.old.clone()), one.new.clone());
    let owned: BTreeMap<(ItemKind, String), String> = renamed.iter().map(entry).collect();
    let names = Names(
        owned.iter().map(|((kind, old), new)| ((*kind, old.as_str()), new.as_str())).collect(),
    );
    model(&mut record, &names);
    results(&mut record, &names);
    record
}

fn model(record: &mut Record, names: &Names<'_>) {
    use ItemKind::{Case, Material, Member, Node, Section, Structure};
    let model = &mut record.model;
    names.keys(Material, &mut model.materials);
    names.keys(Section, &mut model.sections);
    names.keys(Structure, &mut model.structures);
    names.keys(Case, &mut model.cases);
    names.put_all(Structure, &mut model.solve_order);
    names.put_all(Member, model.package.drawn.iter_mut().chain(&mut model.package.left_out));
    for structure in model.structures.values_mut() {
        names.keys(Node, &mut structure.nodes);
        names.keys(Member, &mut structure.members);
        for member in structure.members.values_mut() {
            names.put_all(Node, &mut member.along);
            names.put_all(Node, member.hinges.iter_mut().map(|hinge| &mut hinge.node));
            names.put_all(Node, member.spans.iter_mut().flat_map(|span| &mut span.nodes));
            names.put(Section, &mut member.section);
            names.put(Material, &mut member.material);
            for held in [&mut member.held.top, &mut member.held.bottom] {
                let nodes: Vec<String> =
                    held.split(", ").map(|node| names.get(Node, node)).collect();
                *held = nodes.join(", ");
            }
        }
    }
    for case in model.cases.values_mut() {
        names.put_all(Case, &mut case.relations.together_with);
        names.keys(Structure, &mut case.resultant);
        if let Some(by_span) = &mut case.by_span {
            by_span.parts.iter_mut().for_each(|part| names.part(part));
            by_span.sets.iter_mut().flatten().for_each(|part| names.part(part));
        }
        for load in &mut case.loads {
            names.put(Structure, &mut load.structure);
            match &mut load.target {
                TargetRecord::Member(member) => names.put(Member, member),
                TargetRecord::Node(node) => names.put(Node, node),
            }
            names.put_all(Node, &mut load.reaction_of);
        }
    }
    for combination in record.combinations.values_mut() {
        names.keys(Case, &mut combination.factors);
        names.put_all(Case, &mut combination.leading);
    }
    names.put_all(
        Case,
        record.rules.iter_mut().flat_map(|rule| &mut rule.psi).map(|psi| &mut psi.case),
    );
}

fn results(record: &mut Record, names: &Names<'_>) {
    use ItemKind::{Member, Node, Structure};
    names.keys(Node, &mut record.results.nodes);
    names.keys(Member, &mut record.results.members);
    for components in record.results.reactions.values_mut() {
        names.keys(Node, components);
    }
    let members = record.results.members.values_mut().flat_map(|member| {
        let spans = member.spans.iter_mut().map(|span| &mut span.governing);
        std::iter::once(&mut member.governing).chain(spans)
    });
    let extremes =
        members
            .flat_map(|governing| governing.values_mut().flat_map(|effects| effects.values_mut()))
            .chain(record.results.reactions.values_mut().flat_map(|nodes| {
                nodes.values_mut().flat_map(|components| components.values_mut())
            }));
    for extreme in extremes.flat_map(|extremes| [&mut extremes.max, &mut extremes.min]) {
        extreme.loaded.iter_mut().for_each(|part| names.part(part));
    }
    for check in &mut record.checks {
        names.put_all(Member, &mut check.on.member);
        names.put_all(
            Node,
            [&mut check.on.node, &mut check.on.relative_to, &mut check.on.about]
                .into_iter()
                .flatten(),
        );
        names.put_all(Structure, &mut check.on.structure);
        check.loaded.iter_mut().for_each(|part| names.part(part));
    }
}
