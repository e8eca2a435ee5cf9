//! Checks: what they are made on, their formulas, and everything these read.

use super::about::words;
use super::formulas::{Formulas, Source, exactly, unbound};
use super::members::spans_unclear;
use super::names::Names;
use super::reader::Reader;
use super::sheets::{Sheets, Used};
use crate::catalogue::{Sheet, SheetShows, SheetTarget};
use crate::diagnostic::{Diagnostic, Place};
use crate::model::{
    Assumption, Check, CheckTarget, Condition, DeflectionFrom, MemberId, Model, NodeId, On, Placed,
    Purpose, Shows, Span, StructureId,
};
use crate::project::text::{Located, Map, Text};
use crate::project::written::{self, words::CheckPurpose};
use crate::quantity::{Kind, System, Units};

/// Groups of members by name.
pub(super) type Groups = Vec<(String, Vec<MemberId>)>;

pub(super) fn groups(reader: &mut Reader, written: &Map<Vec<Text>>, model: &Model) -> Groups {
    let mut names = Names::default();
    let mut out = Vec::new();
    for (name, members) in written {
        names.take(reader, name, "group");
        let found: Vec<MemberId> =
            members.iter().filter_map(|text| member(reader, model, text)).collect();
        if members.is_empty() {
            reader.error("empty", format!("the group `{name}` has no member"), name.place());
        }
        out.push((name.to_string(), found));
    }
    out
}

fn member(reader: &mut Reader, model: &Model, name: &Text) -> Option<MemberId> {
    let known = model.members.iter().map(|member| member.name.as_str());
    reader.find(name, "member", "unknown-member", known).map(MemberId)
}

/// The next parts need all of these.
pub(super) struct Given<'g> {
    pub(super) sheets: &'g Sheets<'g>,
    pub(super) groups: &'g Groups,
    pub(super) names: &'g mut Names,
}

pub(super) fn checks(
    reader: &mut Reader,
    written: &[Located<written::Check>],
    given: &mut Given<'_>,
    model: &mut Model,
) {
    for check in written {
        if let Some(check) = self::check(reader, check, given, model) {
            model.checks.push(check);
        }
    }
}

fn check(
    reader: &mut Reader,
    written: &Located<written::Check>,
    given: &mut Given<'_>,
    model: &mut Model,
) -> Option<Check> {
    given.names.take(reader, &written.id, "check");
    let sheet = match &written.sheet {
        None => None,
        Some(id) => match given.sheets.find(id) {
            Ok(used) => Some((used, id.place(), format!("sheet `{id}`: "))),
            Err(_) if given.sheets.incomplete => return None,
            Err(near) => {
                reader.problem(
                    Diagnostic::error("unknown-sheet", format!("no check sheet named `{id}`"))
                        .at(id.place())
                        .hint(near.map(|near| format!("did you mean `{near}`?")))
                        .hint("`spanfolio catalogue checks` lists them".to_owned()),
                );
                return None;
            }
        },
    };
    let plain = sheet.as_ref().map(|(used, ..)| used.sheet);
    let on = targets(reader, written, given.groups, plain, model)?;
    let mut formulas = Formulas::default();
    match &sheet {
        Some((used, place, whose)) => {
            inputs(reader, written, used, place, whose, &mut formulas);
            for (symbol, step) in &used.sheet.steps {
                let path = ["steps", symbol, "formula"];
                let source = used.formula(&step.formula, &path, place, whose);
                let symbol = (symbol.as_str(), source.place.clone());
                formulas.step(reader, symbol, &source, step.meaning.clone(), step.clause.clone());
            }
        }
        None => {
            for (symbol, text) in &written.steps {
                let source = own(reader, text);
                formulas.step(reader, (symbol, symbol.place()), &source, None, None);
            }
        }
    }
    let formula = |reader: &mut Reader, formulas: &mut Formulas, key: &'static str| match &sheet {
        Some((used, place, whose)) => {
            let text = if key == "demand" { &used.sheet.demand } else { &used.sheet.capacity };
            let source = used.formula(text, &[key], place, whose);
            formulas.placed(reader, &source, true)
        }
        None => {
            let text = if key == "demand" { &written.demand } else { &written.capacity };
            let source = own(reader, text.as_ref()?);
            formulas.placed(reader, &source, true)
        }
    };
    let mut demand = formula(reader, &mut formulas, "demand");
    let mut capacity = formula(reader, &mut formulas, "capacity");
    if let Some((used, ..)) = sheet.as_ref().filter(|(used, ..)| used.is_of_catalogue()) {
        let steps = formulas.steps.iter_mut();
        let steps = steps.filter(|step| used.sheet.steps.contains_key(step.symbol.as_str()));
        let formulas = steps.map(|step| &mut step.formula);
        for placed in formulas.chain(&mut demand).chain(&mut capacity) {
            in_units_of_project(placed, &model.units);
        }
    }
    let validity = validity(reader, written, sheet.as_ref(), &mut formulas);
    let limit = match &written.limit {
        Some(text) => reader.positive(text, Kind::Number)?,
        None => 1.0,
    };
    relies_on(reader, written, model);
    let purposes = purposes(written.purpose.is);
    let shows = match (&written.shows, plain) {
        (Some(word), _) => word.is,
        (None, Some(sheet)) => shows(sheet.shows),
        (None, None) => on.first()?.usually_shows(*purposes.first()?),
    };
    let whose = sheet.as_ref().map_or("", |(.., whose)| whose.as_str());
    let targets = bind(reader, &formulas, &on, plain, whose, model);
    let deflection = deflection(reader, written, plain, &on, model);
    if let (Some(sheet), Some(id)) = (plain, &written.sheet) {
        assumes(sheet, id, model);
    }
    Some(Check {
        id: written.id.to_string(),
        title: words(written.title.as_ref())
            .or_else(|| plain.map(|sheet| sheet.title.clone()))
            .unwrap_or_default(),
        reference: reference(written, plain),
        sheet: plain.map(|sheet| sheet.id.clone()),
        shows,
        purpose: written.purpose.text().to_string(),
        purposes,
        variable_only: written.only.is_some(),
        deflection,
        one_sided: written.one_sided.unwrap_or(plain.is_some_and(|sheet| sheet.one_sided)),
        limit,
        relies_on: written.relies_on.iter().map(ToString::to_string).collect(),
        readings: formulas.readings.iter().map(|(reading, _)| reading.text.clone()).collect(),
        steps: formulas.steps,
        validity,
        demand: demand?,
        capacity: capacity?,
        targets,
        cautions: plain.map(|sheet| sheet.cautions.clone()).unwrap_or_default(),
        origin: written.place(),
    })
}

/// A unit in a sheet of the catalogue stands for what usually has it; the project says in which unit that
/// prints.
fn in_units_of_project(placed: &mut Placed, units: &Units) {
    let Some(stated) = &placed.formula.unit else { return };
    let usual = Units::new(System::Si);
    let kind = usual.iter().find(|(_, unit)| unit.label == stated.label).map(|(kind, _)| kind);
    match kind {
        Some(kind) => placed.formula.unit = Some(units.get(kind).clone()),
        None if units.system == System::Us => placed.formula.unit = None,
        None => {}
    }
}

/// A formula of the project file.
pub(super) fn own<'t>(reader: &Reader, text: &'t Text) -> Source<'t> {
    let (range, exact) = exactly(&reader.file, text.range(), text);
    Source { text, place: Place { range, ..text.place() }, exact, whose: "" }
}

fn reference(written: &written::Check, sheet: Option<&Sheet>) -> String {
    let own = words(written.reference.as_ref());
    match (sheet.map(Sheet::reference), own) {
        (Some(sheet), Some(own)) => format!("{sheet}; {own}"),
        (Some(one), None) | (None, Some(one)) => one,
        (None, None) => String::new(),
    }
}

/// The sheet's inputs as first steps: what the project gives, else the default.
fn inputs<'s>(
    reader: &mut Reader,
    written: &'s written::Check,
    used: &Used<'s>,
    place: &Place,
    whose: &'s str,
    formulas: &mut Formulas,
) {
    let sheet = used.sheet;
    for (name, text) in &written.inputs {
        if !sheet.inputs.contains_key(name.as_str()) {
            let known = sheet.inputs.keys().map(String::as_str);
            reader.problem(
                Diagnostic::error(
                    "unknown-key",
                    format!("sheet `{}` has no input `{name}`", sheet.id),
                )
                .at(name.place())
                .hint(super::about::meant(name, known.clone()))
                .hint(Some(format!("it takes {}", known.collect::<Vec<_>>().join(", ")))),
            );
            let _ = own(reader, text);
        }
    }
    for (name, input) in &sheet.inputs {
        let meaning = Some(input.meaning.clone());
        if let Some((_, key, text)) = written.inputs.get_full(name.as_str()) {
            let source = own(reader, text);
            formulas.step(reader, (name, key.place()), &source, meaning, None);
        } else if let Some(default) = &input.default {
            let path = ["inputs", name, "default"];
            let source = used.formula(default, &path, place, whose);
            formulas.step(reader, (name, place.clone()), &source, meaning, input.clause.clone());
        } else {
            reader.problem(
                Diagnostic::error(
                    "missing-key",
                    format!("{whose}needs `{name}`: {}", input.meaning),
                )
                .at(place.clone())
                .hint(format!("give it: `with: {{{name}: …}}`")),
            );
            formulas.is_missing(name);
        }
    }
}

fn validity<'s>(
    reader: &mut Reader,
    written: &'s written::Check,
    sheet: Option<&'s (Used<'s>, Place, String)>,
    formulas: &mut Formulas,
) -> Vec<Condition> {
    let mut out = Vec::new();
    if let Some((used, place, whose)) = sheet {
        for (index, condition) in used.sheet.valid_if.iter().enumerate() {
            let path = ["valid_if", &index.to_string(), "condition"];
            let source = used.formula(&condition.condition, &path, place, whose);
            let formula = formulas.placed(reader, &source, false);
            let reason = condition.reason.clone();
            out.extend(formula.map(|formula| Condition { formula, reason }));
        }
    }
    for condition in &written.valid_if {
        let source = own(reader, &condition.condition);
        let formula = formulas.placed(reader, &source, false);
        let reason = condition.reason.to_string();
        out.extend(formula.map(|formula| Condition { formula, reason }));
    }
    out
}

fn purposes(purpose: CheckPurpose) -> Vec<Purpose> {
    match purpose {
        CheckPurpose::One(purpose) => vec![purpose],
        CheckPurpose::Service => {
            Purpose::ALL.into_iter().filter(|purpose| purpose.is_service()).collect()
        }
    }
}

const fn shows(shows: SheetShows) -> Shows {
    match shows {
        SheetShows::Strength => Shows::Strength,
        SheetShows::Stability => Shows::Stability,
        SheetShows::Deflection => Shows::Deflection,
        SheetShows::Equilibrium => Shows::Equilibrium,
        SheetShows::Bearing => Shows::Bearing,
        SheetShows::Other => Shows::Other,
    }
}

/// What the check is made on; `None` where that is wrong and reported.
fn targets(
    reader: &mut Reader,
    written: &Located<written::Check>,
    groups: &Groups,
    sheet: Option<&Sheet>,
    model: &Model,
) -> Option<Vec<On>> {
    let on_members = written.members.is_some() || written.groups.is_some();
    let on_nodes = written.node.is_some() || written.nodes.is_some();
    let kinds = [on_members, on_nodes, written.structure.is_some()];
    if kinds.iter().filter(|kind| **kind).count() != 1 {
        reader.problem(
            Diagnostic::error(
                "missing-key",
                format!("the check `{}` does not say what it is made on", written.id),
            )
            .at(written.id.place())
            .hint(
                "give `members` or `groups`, or `node` or `nodes`, or `structure`, and only one of these"
                    .to_owned(),
            ),
        );
        return None;
    }
    let wanted = sheet.map(|sheet| sheet.on);
    let fits = match wanted {
        None => true,
        Some(SheetTarget::Member) => on_members,
        Some(SheetTarget::Node) => on_nodes,
        Some(SheetTarget::Structure) => written.structure.is_some(),
    };
    if let (false, Some(id)) = (fits, &written.sheet) {
        let what = match wanted {
            Some(SheetTarget::Node) => "nodes",
            Some(SheetTarget::Structure) => "a structure",
            _ => "members",
        };
        reader.error("wrong-target", format!("sheet `{id}` is made on {what}"), id.place());
        return None;
    }
    stray(reader, written, on_members, on_nodes);
    let before = reader.found.len();
    let found = if on_members {
        of_members(reader, written, groups, model)
    } else if on_nodes {
        of_nodes(reader, written, model)
    } else {
        of_structure(reader, written, model)
    }?;
    if found.is_empty() {
        // Names that are not there are reported by themselves.
        if reader.found.len() == before {
            let message = format!("the check `{}` is made on nothing", written.id);
            reader.error("empty", message, written.id.place());
        }
        return None;
    }
    // What is named twice, by itself and in a group say, is checked once.
    let mut once: Vec<On> = Vec::with_capacity(found.len());
    for on in found {
        if !once.contains(&on) {
            once.push(on);
        }
    }
    Some(once)
}

/// Keys that only go with another kind of target.
fn stray(reader: &mut Reader, written: &written::Check, on_members: bool, on_nodes: bool) {
    let spans = written.spans.as_ref().filter(|_| !on_members).map(|spans| match spans {
        written::Members::Word(word) => word.place(),
        written::Members::List(list) => {
            list.first().map_or_else(|| written.id.place(), Text::place)
        }
    });
    let from = written.from.as_ref().filter(|_| !on_members).map(|word| word.place());
    let relative = written.relative_to.as_ref().filter(|_| !on_nodes).map(Text::place);
    let on_structure = written.structure.is_some();
    let about = written.about.as_ref().filter(|_| !on_structure).map(Text::place);
    let strays = [
        (spans, "spans", "members"),
        (from, "from", "members"),
        (relative, "relative_to", "nodes"),
        (about, "about", "a structure"),
    ];
    for (place, key, what) in strays {
        if let Some(place) = place {
            let message = format!("`{key}` goes with a check on {what}");
            reader.error("conflicting-keys", message, place);
        }
    }
}

fn of_members(
    reader: &mut Reader,
    written: &written::Check,
    groups: &Groups,
    model: &Model,
) -> Option<Vec<On>> {
    let mut members: Vec<MemberId> = Vec::new();
    match &written.members {
        Some(written::Members::Word(_)) => members.extend((0..model.members.len()).map(MemberId)),
        Some(written::Members::List(names)) => {
            members.extend(names.iter().filter_map(|name| member(reader, model, name)));
        }
        None => {}
    }
    for name in written.groups.iter().flatten() {
        let known = groups.iter().map(|(name, _)| name.as_str());
        if let Some(index) = reader.find(name, "group", "unknown-group", known) {
            members.extend(&groups[index].1);
        }
    }
    let Some(spans) = &written.spans else {
        return Some(members.into_iter().map(|member| On::Member { member, span: None }).collect());
    };
    let mut out = Vec::new();
    for member in members {
        let of = &model[member];
        let place = || match spans {
            written::Members::Word(word) => word.place(),
            written::Members::List(list) => {
                list.first().map_or_else(|| written.id.place(), Text::place)
            }
        };
        if spans_unclear(model, member.0) {
            let message = format!(
                "member `{}` has no `spans`, and another member frames in between its supports",
                of.name
            );
            reader.error("spans", message, place());
            continue;
        }
        match spans {
            written::Members::Word(_) => {
                out.extend((0..of.spans.len()).map(|span| On::Member { member, span: Some(span) }));
            }
            written::Members::List(numbers) => {
                for text in numbers {
                    let Some(number) = reader.whole(text) else { continue };
                    match number.checked_sub(1).filter(|span| *span < of.spans.len()) {
                        Some(span) => out.push(On::Member { member, span: Some(span) }),
                        None => reader.problem(
                            Diagnostic::error(
                                "unknown-span",
                                format!("member `{}` has no span {number}", of.name),
                            )
                            .at(text.place())
                            .label(format!("it has {}", of.spans.len())),
                        ),
                    }
                }
            }
        }
    }
    Some(out)
}

fn node(reader: &mut Reader, model: &Model, name: &Text) -> Option<NodeId> {
    let known = model.nodes.iter().map(|node| node.name.as_str());
    reader.find(name, "node", "unknown-node", known).map(NodeId)
}

fn of_nodes(reader: &mut Reader, written: &written::Check, model: &Model) -> Option<Vec<On>> {
    let relative_to = match &written.relative_to {
        Some(name) => Some((node(reader, model, name)?, name)),
        None => None,
    };
    let names = written.node.iter().chain(written.nodes.iter().flatten());
    let mut out = Vec::new();
    for name in names {
        let Some(id) = node(reader, model, name) else { continue };
        if let Some((other, text)) = relative_to
            && other == id
        {
            let message = format!("`{name}` does not move relative to itself");
            reader.error("unknown-node", message, text.place());
            continue;
        }
        if let Some((other, text)) = relative_to
            && model[other].structure != model[id].structure
        {
            let message = format!("`{text}` is not of the structure of `{name}`");
            reader.error("unknown-node", message, text.place());
            continue;
        }
        out.push(On::Node { node: id, relative_to: relative_to.map(|(id, _)| id) });
    }
    Some(out)
}

fn of_structure(reader: &mut Reader, written: &written::Check, model: &Model) -> Option<Vec<On>> {
    let name = written.structure.as_ref()?;
    let known = model.structures.iter().map(|structure| structure.name.as_str());
    let structure = reader.find(name, "structure", "unknown-structure", known).map(StructureId)?;
    let about = match &written.about {
        Some(name) => Some(super::structures::node(reader, model, structure, name)?),
        None => None,
    };
    Some(vec![On::Structure { structure, about }])
}

/// Binds every reading on every target; the same mistake on several targets is reported once.
fn bind(
    reader: &mut Reader,
    formulas: &Formulas,
    on: &[On],
    sheet: Option<&Sheet>,
    whose: &str,
    model: &Model,
) -> Vec<CheckTarget> {
    let mut reported: Vec<String> = Vec::new();
    shadows(reader, formulas, on, whose, model);
    on.iter()
        .map(|on| {
            if let Some(reason) = sheet.and_then(|sheet| does_not_apply(sheet, *on, model)) {
                return CheckTarget { on: *on, bound: Vec::new(), deferred: Some(reason) };
            }
            let bound = formulas
                .readings
                .iter()
                .map(|(reading, place)| match model.bind(*on, reading) {
                    Ok(bound) => Some(bound),
                    Err(_) if formulas.is_broken(&reading.name) => None,
                    Err(problem) => {
                        if !reported.contains(&problem.message) {
                            reported.push(problem.message.clone());
                            let mut problem = problem;
                            let input = input_of(sheet, &reading.name);
                            problem.hint = problem.hint.or(input);
                            unbound(reader, &reading.name, problem, whose, place.clone());
                        }
                        None
                    }
                })
                .collect();
            CheckTarget { on: *on, bound, deferred: None }
        })
        .collect()
}

/// A step of the name of something in reach would make formulas mean one before it and the other behind it.
fn shadows(reader: &mut Reader, formulas: &Formulas, on: &[On], whose: &str, model: &Model) {
    for (step, place) in formulas.steps.iter().zip(&formulas.named_at) {
        let name = &step.symbol;
        let Some(on) = on.iter().find(|on| model.has(**on, name)) else { continue };
        let message =
            format!("{whose}the step `{name}` has the name of a value of {}", model.on_name(*on));
        reader.problem(
            Diagnostic::error("duplicate-name", message)
                .at(place.clone())
                .hint("give the step another name".to_owned()),
        );
    }
}

/// The input whose default reads this name can be given instead.
fn input_of(sheet: Option<&Sheet>, name: &str) -> Option<String> {
    let reads = |default: &Option<String>| {
        default.as_ref().is_some_and(|text| {
            text.split(|c: char| !c.is_alphanumeric() && c != '_').any(|word| word == name)
        })
    };
    let (input, _) = sheet?.inputs.iter().find(|(_, input)| reads(&input.default))?;
    Some(format!("give the sheet's input: `with: {{{input}: …}}`"))
}

/// Why a sheet says nothing about a member.
fn does_not_apply(sheet: &Sheet, on: On, model: &Model) -> Option<String> {
    let On::Member { member, .. } = on else { return None };
    let member = &model[member];
    let material = &model[member.material];
    if !sheet.materials.is_empty() && !sheet.materials.contains(&material.family) {
        return Some(format!(
            "the sheet applies to {}, and the material of {} is {}",
            sheet.materials.join(", "),
            member.name,
            material.family
        ));
    }
    let section = &model[member.section];
    let form = match section.properties.form {
        "" => "given",
        form => form,
    };
    let listed = sheet.shapes.iter().any(|shape| shape == form);
    (!sheet.shapes.is_empty() && !listed).then(|| {
        format!(
            "the sheet applies to sections of the shapes {}, and section {} is {form}",
            sheet.shapes.join(", "),
            section.name
        )
    })
}

fn deflection(
    reader: &mut Reader,
    written: &written::Check,
    sheet: Option<&Sheet>,
    on: &[On],
    model: &Model,
) -> DeflectionFrom {
    let stated = sheet.and_then(|sheet| sheet.from.as_deref());
    let from = match (&written.from, stated) {
        (Some(word), _) => word.is,
        (None, Some("undeformed")) => DeflectionFrom::Undeformed,
        (None, Some("support tangent")) => DeflectionFrom::SupportTangent,
        (None, _) => DeflectionFrom::Chord,
    };
    if let (DeflectionFrom::SupportTangent, Some(word)) = (from, &written.from) {
        for target in on {
            let On::Member { member, span } = target else { continue };
            let spans = &model[*member].spans;
            let fits = match span {
                Some(span) => spans[*span].is_cantilever(),
                None => spans.iter().all(Span::is_cantilever),
            };
            if !fits {
                let name = &model[*member].name;
                let message = format!("`{name}` has a span without a free end here");
                reader.problem(
                    Diagnostic::error("support-tangent", message)
                        .at(word.place())
                        .hint("name the cantilevers in `spans`".to_owned()),
                );
            }
        }
    }
    from
}

fn relies_on(reader: &mut Reader, written: &written::Check, model: &Model) {
    for id in &written.relies_on {
        let known = model.basis.assumptions.iter().map(|assumption| assumption.id.as_str());
        reader.find(id, "assumption", "unknown-assumption", known);
    }
}

/// What the sheet takes for granted joins the register, unless the project states it under the same id.
fn assumes(sheet: &Sheet, id: &Text, model: &mut Model) {
    for (index, text) in sheet.assumes.iter().enumerate() {
        let id_of = format!("{} {}", sheet.id, index + 1);
        if model.basis.assumptions.iter().all(|assumption| assumption.id != id_of) {
            model.basis.assumptions.push(Assumption {
                id: id_of,
                text: text.clone(),
                confirmed: false,
                by: None,
                source: Some(format!("check sheet {}", sheet.id)),
                origin: id.place(),
            });
        }
    }
}

/// Checks that deferrals name must be there.
pub(super) fn deferrals(reader: &mut Reader, written: &written::Basis, model: &Model) {
    let ids: Vec<&str> = check_ids(model).collect();
    for name in written.deferred.iter().flat_map(|deferral| &deferral.checks) {
        reader.find(name, "check", "unknown-check", ids.iter().copied());
    }
}

/// Ids of checks and of agreements.
pub(super) fn check_ids(model: &Model) -> impl Iterator<Item = &str> {
    let agreements =
        model.workings.iter().flat_map(|working| &working.lines).filter_map(|line| match line {
            crate::model::WorkingLine::Agreement(agreement) => Some(agreement.id.as_str()),
            crate::model::WorkingLine::Remark(_) | crate::model::WorkingLine::Step(_) => None,
        });
    model.checks.iter().map(|check| check.id.as_str()).chain(agreements)
}
