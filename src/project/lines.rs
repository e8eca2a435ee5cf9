//! Where the things of a project file stand, by what they are and how they are called.

use std::collections::BTreeMap;
use std::ops::Range;

use super::resolve::ONLY;
use super::text::{Map, Text};
use super::written::{Load, Project, Structure};
use crate::files::Sources;

/// Kind in words and name → lines, counted from 1, in the order of the file.
#[derive(Clone, Debug, Default)]
pub struct Lines {
    found: BTreeMap<(&'static str, String), Vec<usize>>,
    /// First byte of every line.
    starts: Vec<usize>,
}

impl Lines {
    /// Lines of the things in a project file; none where it cannot be read.
    #[must_use]
    pub fn of(sources: &Sources) -> Self {
        let Ok(project) = super::written(sources) else { return Self::default() };
        let text = sources.project();
        let breaks = text.bytes().enumerate().filter(|(_, byte)| *byte == b'\n');
        let starts = std::iter::once(0).chain(breaks.map(|(at, _)| at + 1)).collect();
        let mut lines = Self { found: BTreeMap::new(), starts };
        lines.about(&project);
        lines.parts(&project);
        lines.actions(&project);
        lines
    }

    /// The line of a thing; `number` counts those of the same kind and name from 0. A load without a line
    /// of its own stands where its load case does.
    #[must_use]
    pub fn get(&self, kind: &'static str, name: &str, number: usize) -> Option<usize> {
        let lines = |kind, name: &str| self.found.get(&(kind, name.to_owned()));
        let own = lines(kind, name).and_then(|lines| lines.get(number).copied());
        let case = || {
            let (case, _) = name.split_once(" on ")?;
            lines("load case", case)?.first().copied()
        };
        own.or_else(|| if kind == "load" { case() } else { None })
    }

    fn add(&mut self, kind: &'static str, name: impl Into<String>, range: &Range<usize>) {
        let line = self.starts.partition_point(|start| *start <= range.start);
        self.found.entry((kind, name.into())).or_default().push(line);
    }

    fn keys<T>(&mut self, kind: &'static str, map: &Map<T>) {
        for name in map.keys() {
            self.add(kind, name.as_str(), name.range());
        }
    }

    fn about(&mut self, project: &Project) {
        self.add("project", "", project.project.title.range());
        for revision in &project.project.revisions {
            self.add("revision", revision.mark.as_str(), revision.mark.range());
        }
        let basis = &project.basis;
        for standard in &basis.standards {
            self.add("standard", standard.id.as_str(), standard.id.range());
        }
        for assumption in &basis.assumptions {
            self.add("assumption", assumption.id.as_str(), assumption.id.range());
        }
        for deferral in &basis.deferred {
            self.add("deferral", deferral.id.as_str(), deferral.id.range());
        }
        for check in &project.checks {
            self.add("check", check.id.as_str(), check.id.range());
        }
    }

    fn parts(&mut self, project: &Project) {
        self.keys("value", &project.values);
        self.keys("build-up", &project.build_ups);
        self.keys("material", &project.materials);
        self.keys("section", &project.sections);
        if let Some(structures) = &project.structures {
            self.keys("structure", structures);
            structures.values().for_each(|structure| self.structure(structure));
        }
        let only = (&project.nodes, &project.members, &project.supports);
        if let (Some(nodes), ..) = only {
            if let Some((first, _)) = nodes.first() {
                self.add("structure", ONLY, first.range());
            }
            self.keys("node", nodes);
        }
        only.1.iter().for_each(|members| self.keys("member", members));
        only.2.iter().for_each(|supports| self.keys("support", supports));
    }

    fn structure(&mut self, structure: &Structure) {
        self.keys("node", &structure.nodes);
        self.keys("member", &structure.members);
        self.keys("support", &structure.supports);
    }

    fn actions(&mut self, project: &Project) {
        self.keys("load case", &project.load_cases);
        for (case, content) in &project.load_cases {
            for load in &content.loads {
                let Some((form, range)) = form(load) else { continue };
                let one = load.member.iter().chain(&load.node);
                for on in one.chain(load.members.iter().flatten()) {
                    self.add("load", format!("{case} on {on}, {form}"), range);
                }
            }
        }
        for rule in &project.combinations.rules {
            self.add("rule", rule.rule.as_str(), rule.rule.range());
        }
        for written in &project.combinations.written {
            self.add("combination", written.title.as_str(), written.title.range());
        }
    }
}

/// What decides the form of a load, in words, with its place.
fn form(load: &Load) -> Option<(&'static str, &Range<usize>)> {
    let texts: [(&str, &Option<Text>); 7] = [
        ("uniform", &load.uniform),
        ("area", &load.area),
        ("build up", &load.build_up),
        ("point", &load.point),
        ("point moment", &load.point_moment),
        ("reaction of", &load.reaction_of),
        ("lack of fit", &load.lack_of_fit),
    ];
    let plain = texts.into_iter().find_map(|(form, text)| Some((form, text.as_ref()?.range())));
    plain.or_else(|| Some(("varying", load.varying.as_ref()?.first()?.range()))).or_else(|| {
        let on = load.node.as_ref().or(load.member.as_ref())?.range();
        let form = match load {
            Load { warming: Some(_), .. } => "warming",
            Load { displaced: Some(_), .. } => "displaced",
            _ => "force",
        };
        Some((form, on))
    })
}
