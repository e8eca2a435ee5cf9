//! Load cases: what they say of themselves, their self-weight and their loads.

use super::about::words;
use super::loads;
use super::names::Names;
use super::reader::Reader;
use crate::model::{Direction, Load, LoadCase, LoadForm, LoadKind, MemberId, Model, Per, Written};
use crate::project::text::{Map, Text};
use crate::project::written;
use crate::quantity::STANDARD_GRAVITY;

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
            duration: case.duration.as_ref().map(|word| word.is),
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
