//! Load cases: what they say of themselves, their self-weight and their loads.

use super::about::words;
use super::loads;
use super::names::Names;
use super::reader::Reader;
use crate::model::{
    CaseId, Direction, Duration, Load, LoadCase, LoadForm, LoadKind, MemberId, Model, Nature, Per,
    Relations, Written,
};
use crate::project::text::{Map, Text};
use crate::project::written;
use crate::quantity::{Kind, STANDARD_GRAVITY};

pub(super) fn cases(reader: &mut Reader, written: &Map<written::LoadCase>, model: &mut Model) {
    let mut names = Names::default();
    for (name, case) in written {
        names.take(reader, name, "load case");
        let weighted = weighted(reader, case, model);
        let mut out = LoadCase {
            name: name.to_string(),
            title: case.title.to_string(),
            nature: case.nature.is,
            category: words(case.category.as_ref()),
            psi: case.psi.as_ref().and_then(|psi| self::psi(reader, psi)),
            relations: Relations {
                one_of: words(case.one_of.as_ref()),
                together_with: Vec::new(),
                reverses: case.reverses.unwrap_or(false),
                source_group: words(case.source_group.as_ref()),
            },
            by_span: case.by_span.as_ref().map(|word| word.is),
            // What acts permanently does so for timber too, unless the project says otherwise.
            duration: case
                .duration
                .as_ref()
                .map(|word| word.is)
                .or((case.nature.is == Nature::Permanent).then_some(Duration::Permanent)),
            source: words(case.source.as_ref()),
            self_weight: !weighted.is_empty(),
            loads: weighted.into_iter().map(|id| self_weight(model, id, name)).collect(),
            origin: name.place(),
        };
        for load in &case.loads {
            out.loads.extend(loads::load(reader, model, load));
        }
        model.cases.push(out);
    }
    // Cases can name those that are written after them.
    for (index, case) in written.values().enumerate() {
        let known: Vec<&str> = written.keys().map(Text::as_str).collect();
        let found = case.together_with.iter().filter_map(|name| {
            reader.find(name, "load case", "unknown-case", known.iter().copied()).map(CaseId)
        });
        model.cases[index].relations.together_with = found.collect();
    }
}

fn psi(reader: &mut Reader, written: &[Text; 3]) -> Option<[f64; 3]> {
    let read = written.each_ref().map(|text| {
        let value = reader.quantity(text, Kind::Number)?;
        if !(0.0..=1.0).contains(&value) {
            reader.error("psi", format!("`{text}` is not between 0 and 1"), text.place());
            return None;
        }
        Some(value)
    });
    Some([read[0]?, read[1]?, read[2]?])
}

/// The members whose weight acts, in order.
fn weighted(reader: &mut Reader, case: &written::LoadCase, model: &Model) -> Vec<MemberId> {
    match &case.self_weight {
        None | Some(written::SelfWeight::Word(false)) => Vec::new(),
        Some(written::SelfWeight::Word(true)) => (0..model.members.len()).map(MemberId).collect(),
        Some(written::SelfWeight::List(names)) => {
            names.iter().filter_map(|name| loads::member(reader, model, name)).collect()
        }
    }
}

/// ρ A g, downward over the whole member.
fn self_weight(model: &Model, id: MemberId, case: &Text) -> Load {
    let member = &model[id];
    let weight =
        model[member.material].density * model[member.section].properties.area * STANDARD_GRAVITY;
    Load {
        kind: LoadKind::Line {
            member: id,
            from: 0.0,
            to: member.length,
            start: [0.0, 0.0, -weight],
            end: [0.0, 0.0, -weight],
        },
        written: Written {
            form: LoadForm::SelfWeight,
            direction: Direction::DOWN,
            per: Per::Length,
            values: vec![weight],
            width: None,
            build_up: None,
            every: None,
            span: None,
        },
        source: None,
        origin: case.place(),
    }
}
