//! The part of a member that positions of a load run along: all of it, or one span.

use super::loads::END;
use super::members::spans_unclear;
use super::reader::Reader;
use crate::diagnostic::Diagnostic;
use crate::model::{MemberId, Model};
use crate::project::text::{Located, Text};
use crate::project::written;
use crate::quantity::Kind;

/// The part of a member that positions of a load run along.
pub(super) struct Stretch {
    pub(super) from: f64,
    pub(super) to: f64,
    /// Counted from 1.
    pub(super) span: Option<usize>,
    what: String,
    slack: f64,
}

/// The stretch of a load on a member.
pub(super) fn stretch(
    reader: &mut Reader,
    model: &Model,
    written: &Located<written::Load>,
    id: MemberId,
) -> Option<Stretch> {
    let member = &model[id];
    let slack = END * member.length;
    let Some(text) = &written.span else {
        let what = format!("member `{}`", member.name);
        return Some(Stretch { from: 0.0, to: member.length, span: None, what, slack });
    };
    if spans_unclear(model, id.0) {
        reader.problem(
            Diagnostic::error(
                "spans",
                format!(
                    "member `{}` has no `spans`, and another member frames in between its supports",
                    member.name
                ),
            )
            .at(text.place())
            .hint("say which nodes bound its spans: `spans: [...]`".to_owned()),
        );
        return None;
    }
    let number = reader.whole(text)?;
    let Some(span) = number.checked_sub(1).and_then(|place| member.spans.get(place)) else {
        reader.problem(
            Diagnostic::error(
                "unknown-span",
                format!("member `{}` has no span {number}", member.name),
            )
            .at(text.place())
            .label(format!("it has {}", member.spans.len())),
        );
        return None;
    };
    Some(Stretch {
        from: span.from,
        to: span.to,
        span: Some(number),
        what: format!("span {number} of member `{}`", member.name),
        slack,
    })
}

impl Stretch {
    /// A position along the member from one along the stretch.
    pub(super) fn position(&self, reader: &mut Reader, text: &Text) -> Option<f64> {
        let offset = reader.quantity(text, Kind::Length)?;
        let length = self.to - self.from;
        if offset < -self.slack || offset > length + self.slack {
            reader.problem(
                Diagnostic::error("off-member", format!("`{text}` is not on {}", self.what))
                    .at(text.place())
                    .label(format!("it runs from 0 to {length:.6} m")),
            );
            return None;
        }
        Some(self.from + offset.clamp(0.0, length))
    }
}
