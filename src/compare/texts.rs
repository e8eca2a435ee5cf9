//! Text files of the project besides `project.yaml`.

use similar::{ChangeTag, TextDiff};

use super::{Count, TextChange, What};
use crate::files::Sources;
use crate::project::text::FILE;

/// Files that came, went or changed, with how many lines; nothing where a side has no sources.
pub(super) fn changes(
    old: Option<&Sources>,
    new: Option<&Sources>,
    count: &mut Count,
) -> Vec<TextChange> {
    let (Some(old), Some(new)) = (old, new) else { return Vec::new() };
    let gone = old.files.keys().filter(|file| !new.files.contains_key(*file));
    let files = new.files.keys().chain(gone).filter(|file| *file != FILE);
    let mut out = Vec::new();
    for file in files {
        match (old.files.get(file), new.files.get(file)) {
            (Some(a), Some(b)) if a == b => count.same += 1,
            (a, b) => out.push(change(file, a, b)),
        }
    }
    out.sort_by(|a, b| a.file.cmp(&b.file));
    count.listed = out.len();
    out
}

fn change(file: &str, old: Option<&Vec<u8>>, new: Option<&Vec<u8>>) -> TextChange {
    let text = |bytes: Option<&Vec<u8>>| {
        bytes.map(|bytes| String::from_utf8_lossy(bytes).into_owned()).unwrap_or_default()
    };
    let (before, after) = (text(old), text(new));
    let diff = TextDiff::from_lines(&before, &after);
    let (mut added, mut removed, mut line, mut first) = (0, 0, 1, 0);
    for change in diff.iter_all_changes() {
        match change.tag() {
            ChangeTag::Equal => line += 1,
            ChangeTag::Insert => {
                added += 1;
                first = if first == 0 { line } else { first };
                line += 1;
            }
            ChangeTag::Delete => {
                removed += 1;
                first = if first == 0 { line } else { first };
            }
        }
    }
    TextChange {
        file: file.to_owned(),
        what: match (old, new) {
            (None, _) => What::New,
            (_, None) => What::Vanished,
            _ => What::Changed,
        },
        added,
        removed,
        first,
    }
}
