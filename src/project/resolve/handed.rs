//! Reactions handed on from one structure to another.

use super::loads::{END, Resolved, any_node, said};
use super::reader::Reader;
use super::stretch::Stretch;
use crate::diagnostic::Diagnostic;
use crate::model::{Handed, LoadForm, LoadKind, MemberId, Model, NodeId, Target, Written};
use crate::project::text::{Located, Text};
use crate::project::written;
use crate::quantity::Kind;

/// Most repeated reactions of one load.
const MOST: f64 = 10_000.0;

/// A reaction on a member, once or repeated.
pub(super) fn handed(
    reader: &mut Reader,
    model: &Model,
    written: &Located<written::Load>,
    from: &Text,
    id: MemberId,
    stretch: &Stretch,
) -> Resolved {
    let giver = giver(reader, model, from, model[id].structure)?;
    let at = match (&written.at, &written.every) {
        (Some(at), None) => vec![stretch.position(reader, at)?],
        (None, Some(every)) => {
            let spacing = reader.positive(every, Kind::Length);
            let first = written.from.as_ref().map(|text| stretch.position(reader, text));
            let last = written.to.as_ref().map(|text| stretch.position(reader, text));
            let first = first.unwrap_or(Some(stretch.from))?;
            let last = last.unwrap_or(Some(stretch.to))?;
            repeated(reader, every, first, last, spacing?, model[id].length)?
        }
        _ => {
            reader.problem(
                Diagnostic::error(
                    "missing-key",
                    "a reaction on a member needs `at`, or `every` with `from` and `to`",
                )
                .at(from.place()),
            );
            return None;
        }
    };
    let every = written.every.as_ref().and_then(|text| reader.quantity(text, Kind::Length));
    let said = Written { every, span: stretch.span, ..said(LoadForm::ReactionOf, Vec::new()) };
    Some((LoadKind::Handed(Handed { from: giver, to: Target::Member(id), at }), said))
}

fn repeated(
    reader: &mut Reader,
    every: &Text,
    first: f64,
    last: f64,
    spacing: f64,
    length: f64,
) -> Option<Vec<f64>> {
    if (last - first) / spacing > MOST {
        reader.error(
            "too-many",
            format!("more than {MOST} reactions on one member"),
            every.place(),
        );
        return None;
    }
    let mut out = Vec::new();
    loop {
        #[expect(clippy::cast_precision_loss, reason = "at most ten thousand positions")]
        let x = first + out.len() as f64 * spacing;
        if x > last + END * length {
            return Some(out);
        }
        out.push(x.min(last));
    }
}

/// The node whose reaction is handed on: supported, and of another structure.
pub(super) fn giver(
    reader: &mut Reader,
    model: &Model,
    name: &Text,
    receiver: crate::model::StructureId,
) -> Option<NodeId> {
    let id = any_node(reader, model, name)?;
    if model[id].support.is_none() {
        reader.problem(
            Diagnostic::error(
                "no-reaction",
                format!("node `{name}` has no support, so it has no reaction"),
            )
            .at(name.place()),
        );
        return None;
    }
    if model[id].structure == receiver {
        reader.problem(
            Diagnostic::error(
                "own-reaction",
                format!("node `{name}` belongs to the structure that is loaded"),
            )
            .at(name.place())
            .hint("reactions are handed on from another structure".to_owned()),
        );
        return None;
    }
    Some(id)
}
