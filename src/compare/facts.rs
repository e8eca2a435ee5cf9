//! The input of a Record, thing by thing, in the order of the package's chapters.

use super::items::{Facts, Item, ItemKind};
use crate::quantity::{Kind, Printer, print};
use crate::record::{
    CaseRecord, CheckRecord, CombinationRecord, LoadRecord, MaterialRecord, MemberRecord,
    NodeRecord, Record, RuleUseRecord, SectionRecord, StepRecord, StructureRecord, SupportRecord,
    WorkingLineRecord, by_id, property_kind, release_kind,
};

/// Significant digits of factors.
const FACTOR: usize = 6;

/// Everything stated, resolved.
pub(super) fn items(record: &Record) -> Vec<Item> {
    let printer = record.model.units.printer();
    let facts = || Facts::new(&printer);
    let mut out = project(record, &printer);
    out.extend(basis(record, &printer));
    out.push(settings(record, &printer));
    let model = &record.model;
    for (name, value) in &model.values {
        out.push(
            facts()
                .words("value", value.written.clone(), (&value.written, value.value, &value.unit))
                .maybe("source", value.source.as_ref())
                .item(ItemKind::Value, name),
        );
    }
    for (name, layers) in &model.build_ups {
        let mut item = facts();
        for layer in layers {
            item = item
                .number(&layer.layer, Kind::AreaLoad, layer.load)
                .maybe(&format!("{}, source", layer.layer), layer.source.as_ref());
        }
        out.push(item.item(ItemKind::BuildUp, name));
    }
    out.extend(model.materials.iter().map(|(name, of)| material(name, of, &printer)));
    out.extend(model.sections.iter().map(|(name, of)| section(name, of, &printer)));
    for (name, structure) in &model.structures {
        out.extend(self::structure(name, structure, &printer));
    }
    for (name, case) in &model.cases {
        out.push(self::case(name, case, &printer));
        out.extend(case.loads.iter().filter_map(|of| load(name, of, &printer)));
    }
    out.extend(record.rules.iter().map(|of| rule(of, &printer)));
    out.extend(record.combinations.values().map(|of| combination(of, &printer)));
    for (id, checks) in by_id(&record.checks) {
        out.push(check(&id, &checks, &printer));
    }
    out.extend(workings(record, &printer));
    out
}

fn project(record: &Record, printer: &Printer) -> Vec<Item> {
    let project = &record.project;
    let mut out = vec![
        Facts::new(printer)
            .text("title", &project.title)
            .text("number", &project.number)
            .maybe("client", project.client.as_ref())
            .maybe("subject", project.subject.as_ref())
            .item(ItemKind::Project, ""),
    ];
    out.extend(project.revisions.iter().map(|revision| {
        Facts::new(printer)
            .text("date", &revision.date)
            .text("status", &revision.status)
            .text("note", &revision.note)
            .text("originated", &revision.originated)
            .text("checked", &revision.checked)
            .text("approved", &revision.approved)
            .item(ItemKind::Revision, &revision.mark)
    }));
    out
}

fn basis(record: &Record, printer: &Printer) -> Vec<Item> {
    let basis = &record.basis;
    let facts = || Facts::new(printer);
    let mut out = vec![
        facts()
            .maybe("national annex", basis.national_annex.as_ref())
            .maybe("consequence class", basis.consequence_class.as_ref())
            .maybe("working life", basis.working_life.as_ref())
            .item(ItemKind::Basis, ""),
    ];
    out.extend(basis.standards.iter().map(|standard| {
        facts()
            .text("title", &standard.title)
            .text("edition", &standard.edition)
            .item(ItemKind::Standard, &standard.id)
    }));
    out.extend(basis.assumptions.iter().map(|assumption| {
        facts()
            .text("text", &assumption.text)
            .text("status", &assumption.status)
            .maybe("by", assumption.by.as_ref())
            .maybe("source", assumption.source.as_ref())
            .item(ItemKind::Assumption, &assumption.id)
    }));
    out.extend(basis.deferred.iter().map(|deferral| {
        facts()
            .text("text", &deferral.text)
            .text("to", &deferral.to)
            .list("checks", &deferral.checks)
            .item(ItemKind::Deferral, &deferral.id)
    }));
    out
}

/// Units, analysis and what the package draws.
fn settings(record: &Record, printer: &Printer) -> Item {
    let model = &record.model;
    let units: Vec<String> = model
        .units
        .units
        .iter()
        .map(|(kind, (label, _))| format!("{} {label}", kind.replace('_', " ")))
        .collect();
    let package = &model.package;
    Facts::new(printer)
        .words("units", units.join(", "), &model.units.units)
        .words("system of units", format!("{:?}", model.units.system), model.units.system)
        .number("significant digits", Kind::Number, count(model.units.significant))
        .text("order of analysis", &model.analysis.order)
        .text("imperfections", &model.analysis.imperfections)
        .flag("shear deformation", model.analysis.shear_deformation)
        .words(
            "free fall",
            format!("{} m/s²", print(model.analysis.gravity, 7)),
            model.analysis.gravity,
        )
        .list("members drawn", &package.drawn)
        .list("members not drawn", &package.left_out)
        .text("moments drawn on", &package.moments)
        .text("paper", &package.paper)
        .flag("local axes drawn", package.local_axes)
        .item(ItemKind::Settings, "")
}

#[expect(clippy::cast_precision_loss, reason = "counts of a project are far below 2^52")]
const fn count(number: usize) -> f64 {
    number as f64
}

fn material(name: &str, of: &MaterialRecord, printer: &Printer) -> Item {
    let mut facts = Facts::new(printer)
        .text("grade", &of.title)
        .text("family", &of.family)
        .number("E", Kind::Modulus, of.e)
        .number("G", Kind::Modulus, of.g)
        .number("density", Kind::MassDensity, of.density)
        .number("expansion", Kind::Expansion, of.expansion);
    for (symbol, (value, kind)) in &of.strengths {
        let print_as = Kind::from_name(kind).unwrap_or(Kind::Number);
        facts = facts.words(symbol, printer.with_unit(print_as, *value), (value, kind));
    }
    facts
        .maybe("service class", of.service_class.as_ref())
        .text("source", &of.source)
        .item(ItemKind::Material, name)
}

fn section(name: &str, of: &SectionRecord, printer: &Printer) -> Item {
    let mut facts = Facts::new(printer).text("section", &of.title);
    for (symbol, value) in &of.dimensions {
        facts = facts.number(&format!("dimension {symbol}"), Kind::SectionLength, *value);
    }
    for (symbol, value) in &of.properties {
        facts = facts.number(symbol, property_kind(symbol), *value);
    }
    facts
        .words("outline", outline(of), &of.outline)
        .text("methods", &of.methods.join("; "))
        .text("source", &of.source)
        .item(ItemKind::Section, name)
}

/// The outline by the number of its points.
fn outline(of: &SectionRecord) -> String {
    match of.outline.iter().map(Vec::len).sum::<usize>() {
        0 => String::new(),
        points => format!("{points} points"),
    }
}

fn structure(name: &str, of: &StructureRecord, printer: &Printer) -> Vec<Item> {
    let mut out =
        vec![Facts::new(printer).text("frame", &of.frame).item(ItemKind::Structure, name)];
    let inside = |facts: Facts<'_>, kind: ItemKind, item: &str| {
        facts.text("structure", name).item(kind, item)
    };
    for (node, content) in &of.nodes {
        out.push(inside(self::node(content, printer), ItemKind::Node, node));
        if let Some(of) = &content.support {
            out.push(inside(support(of, printer), ItemKind::Support, node));
        }
    }
    for (member, content) in &of.members {
        out.push(inside(self::member(content, printer), ItemKind::Member, member));
    }
    out
}

fn node<'p>(of: &NodeRecord, printer: &'p Printer) -> Facts<'p> {
    Facts::new(printer).numbers("at", Kind::Length, &of.at)
}

fn support<'p>(of: &SupportRecord, printer: &'p Printer) -> Facts<'p> {
    let restraint: Vec<String> = ["X", "Y", "Z", "RX", "RY", "RZ"]
        .iter()
        .zip(of.words(printer))
        .filter(|(_, word)| word != "free")
        .map(|(component, word)| format!("{component} {word}"))
        .collect();
    Facts::new(printer)
        .text("kind", &of.kind)
        .words("restraint", restraint.join(", "), of.freedoms)
        .words("turned", of.turned.clone().unwrap_or_default(), (&of.turned, of.axes))
        .flag("anchored against uplift", of.uplift_anchored)
}

fn member<'p>(of: &MemberRecord, printer: &'p Printer) -> Facts<'p> {
    let spans: Vec<String> =
        of.spans.iter().map(|span| format!("{}–{}", span.nodes[0], span.nodes[1])).collect();
    let ends: Vec<_> = of.spans.iter().map(|span| (&span.nodes, span.free)).collect();
    let mut facts = Facts::new(printer)
        .list("along", &of.along)
        .number("length", Kind::Length, of.length)
        .words("local axes", axes(&of.axes), of.axes)
        .text("section", &of.section)
        .text("material", &of.material)
        .words("spans", spans.join(", "), ends);
    for hinge in &of.hinges {
        let releases: Vec<String> = hinge
            .releases
            .iter()
            .map(|(force, freedom)| {
                format!("{force} {}", freedom.words(release_kind(force), printer))
            })
            .collect();
        facts =
            facts.words(&format!("hinge at {}", hinge.node), releases.join(", "), &hinge.releases);
    }
    for (label, length) in ["buckling length y", "buckling length z"].iter().zip(of.buckling_length)
    {
        facts = facts.numbers(label, Kind::Length, length.as_slice());
    }
    let reduction = of.imposed_reduction.as_ref();
    facts
        .text("held at top", &of.held.top)
        .text("held at bottom", &of.held.bottom)
        .words(
            "imposed reduction",
            reduction
                .map(|(factor, source)| format!("{} ({source})", print(*factor, FACTOR)))
                .unwrap_or_default(),
            reduction,
        )
        .text(
            "axial only",
            match &of.axial_only {
                None => "",
                Some(axial) if axial.compression_accepted => "yes, compression accepted",
                Some(_) => "yes",
            },
        )
}

fn axes(rows: &[[f64; 3]; 3]) -> String {
    let vector = |row: &[f64; 3]| row.map(|part| print(part, 3)).join(" ");
    ["x", "y", "z"]
        .iter()
        .zip(rows)
        .map(|(axis, row)| format!("{axis} ({})", vector(row)))
        .collect::<Vec<_>>()
        .join(", ")
}

fn case(name: &str, of: &CaseRecord, printer: &Printer) -> Item {
    let relations = &of.relations;
    Facts::new(printer)
        .text("title", &of.title)
        .text("nature", &of.nature)
        .maybe("category", of.category.as_ref())
        .maybe("duration", of.duration.as_ref())
        .maybe("source", of.source.as_ref())
        .flag("self-weight", of.self_weight)
        .maybe("one of", relations.one_of.as_ref())
        .list("together with", &relations.together_with)
        .flag("reverses", relations.reverses)
        .maybe("source group", relations.source_group.as_ref())
        .numbers("ψ0, ψ1, ψ2", Kind::Number, of.psi.as_ref().map_or(&[], |psi| &psi[..]))
        .text("by span", of.by_span.as_ref().map_or("", |by_span| &by_span.loading))
        .item(ItemKind::Case, name)
}

/// A load as stated: self-weight and what a reaction comes to follow from other things.
fn load(case: &str, of: &LoadRecord, printer: &Printer) -> Option<Item> {
    if of.form == "self_weight" {
        return None;
    }
    let handed = of.reaction_of.is_some();
    let words = of.words(printer);
    let what = match &of.reaction_of {
        Some(node) => format!("reaction of {node}"),
        None => words.what,
    };
    let acting = (!handed).then_some((&of.values, of.start, of.end, of.moment));
    let facts = Facts::new(printer)
        .words("load", what, (&of.form, &of.reaction_of, &of.build_up, of.width, acting))
        .text("structure", &of.structure)
        .words("place", words.place, (of.from, of.to, &of.at, of.every, of.span))
        .words("direction", words.direction, (&of.direction, &of.per))
        .maybe("source", of.source.as_ref());
    Some(facts.item(ItemKind::Load, &load_name(case, of)))
}

/// What a load is known by; several of one form on one target share it.
#[must_use]
pub fn load_name(case: &str, of: &LoadRecord) -> String {
    format!("{case} on {}, {}", of.on(), of.form.replace('_', " "))
}

fn rule(of: &RuleUseRecord, printer: &Printer) -> Item {
    let mut facts = Facts::new(printer)
        .text("reference", &of.reference)
        .maybe("annex", of.annex.as_ref())
        .text("purpose", &of.purpose)
        .text("expansion", &of.expansion)
        .text("expressions", &of.expressions.join("; "))
        .number("combinations", Kind::Number, count(of.kept))
        .number("made by another rule too", Kind::Number, count(of.same))
        .words(
            "never governing",
            of.dominated.map(|number| number.to_string()).unwrap_or_default(),
            of.dominated,
        )
        .flag("never governing ones left out", of.dropped)
        .maybe("notes", of.notes.as_ref());
    for (name, value) in &of.values {
        facts = facts.number(name, Kind::Number, *value);
    }
    for psi in &of.psi {
        facts = facts
            .numbers(&format!("ψ of {}", psi.case), Kind::Number, &psi.psi)
            .text(&format!("ψ of {} from", psi.case), &psi.origin);
    }
    facts.item(ItemKind::Rule, &of.rule)
}

/// By what it contains; its number and whatever follows from the content are left out.
fn combination(of: &CombinationRecord, printer: &Printer) -> Item {
    Facts::new(printer)
        .words("factors", content(of), &of.factors)
        .text("title", &of.title)
        .text("analysis", &of.analysis)
        .maybe("clause", of.clause.as_ref())
        .maybe("leading", of.leading.as_ref())
        .maybe("reason", of.reason.as_ref())
        .maybe("duration", of.duration.as_ref())
        .item(ItemKind::Combination, &content_name(of))
}

/// What a combination is known by: purpose, rule or title, factors.
#[must_use]
pub fn content_name(of: &CombinationRecord) -> String {
    format!("{} {} | {}", of.purpose, of.rule.as_ref().unwrap_or(&of.title), content(of))
}

fn content(of: &CombinationRecord) -> String {
    let mut out = String::new();
    for (case, factor) in &of.factors {
        let sign = match (out.is_empty(), *factor < 0.0) {
            (true, false) => "",
            (true, true) => "\u{2212}",
            (false, false) => " + ",
            (false, true) => " \u{2212} ",
        };
        out += &format!("{sign}{} {case}", print(factor.abs(), FACTOR));
    }
    out
}

/// What is asked, not what came out of it.
fn check(id: &str, all: &[&CheckRecord], printer: &Printer) -> Item {
    let on: Vec<String> = all.iter().map(|check| check.on_words()).collect();
    let mut facts = Facts::new(printer).list("made on", &on);
    let Some(first) = all.first() else { return facts.item(ItemKind::Check, id) };
    facts = facts
        .text("title", &first.title)
        .text("reference", &first.reference)
        .maybe("sheet", first.sheet.as_ref())
        .text("shows", &first.shows)
        .text("purpose", &first.purpose)
        .flag("variable actions only", first.variable_only)
        .text("deflection from", &first.deflection)
        .number("limit", Kind::Number, first.limit)
        .list("relies on", &first.relies_on)
        .text("cautions", &first.cautions.join("; "));
    // A deferred check may have nothing evaluated, on one side or on some of its targets.
    if let Some(check) = all.iter().find(|check| check.demand.is_some()) {
        for (label, step) in [("demand", &check.demand), ("capacity", &check.capacity)] {
            facts = facts.text(label, step.as_ref().map_or("", |step| &step.formula));
        }
        facts = steps(facts, &check.steps);
        let validity: Vec<&str> = check.validity.iter().map(|step| step.formula.as_str()).collect();
        facts = facts.text("valid if", &validity.join("; "));
    }
    facts.item(ItemKind::Check, id)
}

fn steps<'p>(mut facts: Facts<'p>, steps: &[StepRecord]) -> Facts<'p> {
    for step in steps {
        facts = facts.text(&step.symbol, &step.formula);
    }
    facts
}

/// Formulas of hand calculations, a thing for each narrative file.
fn workings(record: &Record, printer: &Printer) -> Vec<Item> {
    let mut out: Vec<Item> = Vec::new();
    let mut files: Vec<&str> = record.workings.iter().map(|of| of.file.as_str()).collect();
    files.dedup();
    for file in files {
        let mut facts = Facts::new(printer);
        let own = record.workings.iter().filter(|working| working.file == file);
        for line in own.flat_map(|working| &working.lines) {
            facts = match line {
                WorkingLineRecord::Step(step) => facts.text(&step.symbol, &step.formula),
                WorkingLineRecord::Agreement(id) => facts.flag(&format!("agreement {id}"), true),
                WorkingLineRecord::Remark(_) => facts,
            };
        }
        out.push(facts.item(ItemKind::Working, file));
    }
    out
}
