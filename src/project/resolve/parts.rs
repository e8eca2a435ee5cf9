//! Cases that act by span, cut into the parts that each span takes.

use super::members::spans_unclear;
use super::reader::Reader;
use crate::diagnostic::Diagnostic;
use crate::model::{CaseId, Handed, Load, LoadCase, LoadKind, MemberId, Model, Part, Target};
use crate::project::text::Map;
use crate::project::written;

/// A member and one of its spans, counted from 0; `None` for what acts on no span.
type Place = Option<(MemberId, usize)>;

/// Most parts of one case.
const MOST: usize = 200;

pub(super) fn parts(reader: &mut Reader, written: &Map<written::LoadCase>, model: &mut Model) {
    for index in 0..model.cases.len() {
        let case = &model.cases[index];
        if case.by_span.is_none() {
            continue;
        }
        let place = written
            .get(case.name.as_str())
            .and_then(|case| case.by_span.as_ref())
            .map_or_else(|| case.origin.clone(), |word| word.place());
        let mut cut: Vec<(Place, Vec<Load>)> = Vec::new();
        let mut unclear: Vec<MemberId> = Vec::new();
        for load in &case.loads {
            if let Some(member) = member_of(load)
                && spans_unclear(model, member.0)
                && !unclear.contains(&member)
            {
                unclear.push(member);
            }
            for (on, piece) in pieces(model, load) {
                match cut.iter_mut().find(|(own, _)| *own == on) {
                    Some((_, loads)) => loads.push(piece),
                    None => cut.push((on, vec![piece])),
                }
            }
        }
        for member in unclear {
            reader.problem(
                Diagnostic::error(
                    "spans",
                    format!(
                        "member `{}` has no `spans`, and another member frames in between its supports",
                        model[member].name
                    ),
                )
                .at(place.clone())
                .hint("say which nodes bound its spans: `spans: [...]`".to_owned()),
            );
        }
        if cut.len() > MOST {
            let message = format!("more than {MOST} spans are loaded by this case");
            reader.error("too-many", message, place);
            continue;
        }
        // In the order of members and spans, what acts on none last.
        cut.sort_by_key(|(on, _)| on.map_or((true, MemberId(0), 0), |(m, s)| (false, m, s)));
        let made: Vec<Part> = cut
            .into_iter()
            .map(|(on, loads)| {
                let name = match on {
                    Some((member, span)) => {
                        format!("{}/{}.{}", case.name, model[member].name, span + 1)
                    }
                    None => format!("{}/others", case.name),
                };
                let case = LoadCase {
                    name,
                    loads,
                    self_weight: false,
                    by_span: None,
                    ..model.cases[index].clone()
                };
                Part { of: CaseId(index), on, case }
            })
            .collect();
        model.parts.extend(made);
    }
}

/// The member that a load acts along.
fn member_of(load: &Load) -> Option<MemberId> {
    match &load.kind {
        LoadKind::Line { member, .. } | LoadKind::Point { member, .. } => Some(*member),
        LoadKind::Handed(Handed { to: Target::Member(member), .. }) => Some(*member),
        _ => None,
    }
}

/// A load by the spans that it acts on; what lies on no span, or acts on none, under `None`.
fn pieces(model: &Model, load: &Load) -> Vec<(Place, Load)> {
    let with = |kind: LoadKind| Load { kind, ..load.clone() };
    match &load.kind {
        LoadKind::Line { member, from, to, start, end } => {
            let at = |x: f64| -> [f64; 3] {
                let share = if to > from { (x - from) / (to - from) } else { 0.0 };
                std::array::from_fn(|k| start[k] + share * (end[k] - start[k]))
            };
            let piece = |on: Option<usize>, a: f64, b: f64| {
                let line =
                    LoadKind::Line { member: *member, from: a, to: b, start: at(a), end: at(b) };
                (on.map(|span| (*member, span)), with(line))
            };
            let spans = &model[*member].spans;
            let mut out = Vec::new();
            let mut reached = *from;
            for (index, span) in spans.iter().enumerate() {
                let (a, b) = (span.from.max(*from), span.to.min(*to));
                if a >= b {
                    continue;
                }
                if a > reached {
                    out.push(piece(None, reached, a));
                }
                out.push(piece(Some(index), a, b));
                reached = b;
            }
            if *to > reached {
                out.push(piece(None, reached, *to));
            }
            out
        }
        LoadKind::Point { member, at, .. } => {
            vec![(model[*member].span_at(*at).map(|span| (*member, span)), load.clone())]
        }
        LoadKind::Handed(handed) => {
            let Target::Member(member) = handed.to else { return vec![(None, load.clone())] };
            let mut out: Vec<(Place, Vec<f64>)> = Vec::new();
            for at in &handed.at {
                let on = model[member].span_at(*at).map(|span| (member, span));
                match out.iter_mut().find(|(own, _)| *own == on) {
                    Some((_, places)) => places.push(*at),
                    None => out.push((on, vec![*at])),
                }
            }
            let piece = |(on, at): (Place, Vec<f64>)| {
                (on, with(LoadKind::Handed(Handed { at, ..handed.clone() })))
            };
            out.into_iter().map(piece).collect()
        }
        LoadKind::Node { .. }
        | LoadKind::Displaced { .. }
        | LoadKind::Warming { .. }
        | LoadKind::LackOfFit { .. } => vec![(None, load.clone())],
    }
}
