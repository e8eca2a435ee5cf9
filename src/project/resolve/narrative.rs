//! Narrative files: which there are and in which order, and the registers that their blocks add to.

use super::about;
use super::names::Names;
use super::reader::Reader;
use crate::diagnostic::{Diagnostic, Place};
use crate::files::Sources;
use crate::model::{Model, Narrative, NarrativeBlock};
use crate::project::narrative::{Block, BlockKind, Cut, Fences, cut};
use crate::project::text::Words as _;
use crate::project::written::{self, words::Chapter};
use crate::project::{de, near, shape, tree};

/// Folder of the narrative.
const FOLDER: &str = "narrative/";

/// A narrative file as resolution needs it.
pub(super) struct File<'s> {
    pub(super) path: &'s str,
    pub(super) text: &'s str,
    pub(super) cut: Cut,
}

/// Lists the files, fills the registers from their blocks.
pub(super) fn narrative<'s>(
    reader: &mut Reader,
    written: Option<&Vec<written::Narrative>>,
    sources: &'s Sources,
    ids: &mut Names,
    model: &mut Model,
) -> Vec<File<'s>> {
    let mut files: Vec<File<'s>> = Vec::new();
    for (path, after) in listed(reader, written, sources) {
        let Some((path, text)) = sources
            .files
            .get_key_value(&path)
            .and_then(|(path, _)| Some((path.as_str(), sources.text(path)?)))
        else {
            continue;
        };
        heading(reader, path, text);
        let first = files.iter().map(|file| file.cut.blocks.len()).sum();
        let cut = cut(text, first);
        let blocks = cut.blocks.iter();
        let blocks =
            blocks.map(|block| self::block(reader, path, text, block, ids, model)).collect();
        model.narrative.push(Narrative { file: path.to_owned(), after, blocks });
        files.push(File { path, text, cut });
    }
    files
}

/// Paths in order with the chapter that each follows.
fn listed(
    reader: &mut Reader,
    written: Option<&Vec<written::Narrative>>,
    sources: &Sources,
) -> Vec<(String, String)> {
    let there =
        || sources.files.keys().filter(|path| path.starts_with(FOLDER) && path.ends_with(".md"));
    let summary = || "summary".to_owned();
    let Some(entries) = written else {
        return there().map(|path| (path.clone(), summary())).collect();
    };
    let mut out: Vec<(String, String)> = Vec::new();
    for entry in entries {
        let (file, after) = match entry {
            written::Narrative::Word(file) => (file, summary()),
            written::Narrative::Map(placed) => (&placed.file, chapter(placed.after.is)),
        };
        if !there().any(|path| path == file.as_str()) {
            let near = near::nearest(file, there().map(String::as_str));
            reader.problem(
                Diagnostic::error("missing-file", format!("there is no narrative file `{file}`"))
                    .at(file.place())
                    .label("expected a `.md` file in the `narrative` folder")
                    .hint(near.map(|near| format!("did you mean `{near}`?"))),
            );
        } else if out.iter().any(|(other, _)| other == file.as_str()) {
            reader.error("duplicate-name", format!("`{file}` is listed twice"), file.place());
        } else {
            out.push((file.to_string(), after));
        }
    }
    out
}

fn chapter(chapter: Chapter) -> String {
    let word = Chapter::WORDS.iter().find(|(_, is)| *is == chapter);
    word.map_or("summary", |(word, _)| word).to_owned()
}

/// A file is one chapter: it begins with its heading, and has no other of that level.
fn heading(reader: &mut Reader, path: &str, text: &str) {
    let place = |range| Place { file: path.to_owned(), range };
    if text.trim().is_empty() {
        reader.error("empty", format!("the narrative file `{path}` is empty"), place(0..0));
        return;
    }
    let mut fences = Fences::default();
    let mut first = true;
    let mut at = 0;
    for line in text.split_inclusive('\n') {
        let range = at..at + line.trim_end().len();
        at += line.len();
        let bare = line.trim_end();
        if fences.holds(bare) || bare.is_empty() {
            continue;
        }
        let chapter = bare.starts_with("# ");
        if first && !chapter {
            reader.problem(
                Diagnostic::error(
                    "heading",
                    "a narrative file begins with the heading of its chapter",
                )
                .at(place(range.clone()))
                .hint("begin with a line such as `# Purpose`".to_owned()),
            );
        } else if !first && chapter {
            reader.problem(
                Diagnostic::error("heading", "a narrative file is one chapter")
                    .at(place(range.clone()))
                    .hint("use `## ` for sections, or a file of its own".to_owned()),
            );
        }
        first = false;
    }
}

/// Fills a register from a block; a working block is resolved later.
fn block(
    reader: &mut Reader,
    path: &str,
    text: &str,
    block: &Block,
    ids: &mut Names,
    model: &mut Model,
) -> NarrativeBlock {
    if !block.closed {
        let place = Place { file: path.to_owned(), range: block.opening.clone() };
        reader.error("unclosed-block", "this block is not closed", place);
    }
    let body = &text[block.body.clone()];
    let before = reader.found.len();
    let made = match block.kind {
        BlockKind::Working => Some(NarrativeBlock::Working),
        BlockKind::Assumption => {
            read::<written::Assumption>(reader, body, "Assumption", "an assumption").map(
                |written| {
                    ids.take(reader, &written.id, "assumption");
                    let assumption = about::assumption(&written, place(path, block));
                    let id = assumption.id.clone();
                    model.basis.assumptions.push(assumption);
                    NarrativeBlock::Assumption(id)
                },
            )
        }
        BlockKind::Deferral => read::<written::Deferral>(reader, body, "Deferral", "a deferral")
            .map(|written| {
                ids.take(reader, &written.id, "deferral");
                model.basis.deferred.push(about::deferral(&written));
                NarrativeBlock::Deferral(written.id.to_string())
            }),
        BlockKind::Reference => read::<written::Standard>(reader, body, "Standard", "a reference")
            .map(|written| {
                ids.take(reader, &written.id, "standard");
                model.basis.standards.push(about::standard(&written));
                NarrativeBlock::Reference(written.id.to_string())
            }),
        BlockKind::Open => read::<written::OpenPoint>(reader, body, "OpenPoint", "an open point")
            .map(|written| NarrativeBlock::Open {
                text: written.text.to_string(),
                by: about::words(written.by.as_ref()),
            }),
    };
    // What was read from the block counts its bytes from the block.
    for problem in
        reader.found.iter_mut().skip(before).filter(|problem| problem.code != "unclosed-block")
    {
        if let Some(place) = &mut problem.place {
            place.file = path.to_owned();
            place.range = block.body.start + place.range.start..block.body.start + place.range.end;
        }
    }
    made.unwrap_or(NarrativeBlock::Working)
}

fn place(path: &str, block: &Block) -> Place {
    Place { file: path.to_owned(), range: block.body.clone() }
}

fn read<T: for<'t> serde::Deserialize<'t>>(
    reader: &mut Reader,
    body: &str,
    definition: &str,
    what: &str,
) -> Option<T> {
    let read = tree::read(body).and_then(|tree| {
        let problems = shape::problems_of(body, &tree, definition, what);
        if problems.is_empty() {
            de::read(&tree).map_err(|problem| vec![problem])
        } else {
            Err(problems)
        }
    });
    match read {
        Ok(read) => Some(read),
        Err(problems) => {
            problems.into_iter().for_each(|problem| reader.problem(problem));
            None
        }
    }
}
