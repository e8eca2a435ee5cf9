//! Check sheets: those of the catalogue, and those in the project's own `checks` folder.

use super::formulas::{Source, exactly};
use super::reader::Reader;
use crate::catalogue::{self, Sheet};
use crate::diagnostic::{Diagnostic, Place};
use crate::files::Sources;
use crate::project::tree::{Kind, Node};
use crate::project::{de, near, shape, tree};

/// Folder of the project's own sheets.
const FOLDER: &str = "checks/";

/// All sheets that a project can use.
#[derive(Debug, Default)]
pub(super) struct Sheets<'s> {
    own: Vec<OwnSheet<'s>>,
    /// Some sheet was wrong and is reported: an unknown id may be its.
    pub(super) incomplete: bool,
}

#[derive(Debug)]
struct OwnSheet<'s> {
    sheet: Sheet,
    file: &'s str,
    text: &'s str,
    tree: Node,
}

/// A sheet in use, with where its formulas stand.
#[derive(Clone, Copy, Debug)]
pub(super) struct Used<'s> {
    pub(super) sheet: &'s Sheet,
    own: Option<&'s OwnSheet<'s>>,
}

/// Reads the project's own sheets.
pub(super) fn sheets<'s>(reader: &mut Reader, sources: &'s Sources) -> Sheets<'s> {
    let mut own: Vec<OwnSheet<'s>> = Vec::new();
    let mut incomplete = false;
    for file in sources.files.keys().filter(|path| path.starts_with(FOLDER)) {
        if !file.ends_with(".yaml") {
            continue;
        }
        let Some(text) = sources.text(file) else { continue };
        match read(text) {
            Ok((sheet, tree)) => {
                let known = catalogue::sheets().iter().chain(own.iter().map(|own| &own.sheet));
                if known.map(|sheet| &sheet.id).any(|id| *id == sheet.id) {
                    let message = format!("a sheet `{}` is there already", sheet.id);
                    let range = node(&tree, &["id"]).map_or(0..0, |node| node.range.clone());
                    reader.error("duplicate-name", message, Place { file: file.clone(), range });
                    continue;
                }
                own.push(OwnSheet { sheet, file, text, tree });
            }
            Err(problems) => {
                incomplete = true;
                for mut problem in problems {
                    if let Some(place) = &mut problem.place {
                        place.file.clone_from(file);
                    }
                    reader.problem(problem);
                }
            }
        }
    }
    Sheets { own, incomplete }
}

fn read(text: &str) -> Result<(Sheet, Node), Vec<Diagnostic>> {
    let tree = tree::read(text)?;
    let problems = shape::problems_of(text, &tree, "Sheet", "a check sheet");
    if !problems.is_empty() {
        return Err(problems);
    }
    let sheet = de::read(&tree).map_err(|problem| vec![problem])?;
    Ok((sheet, tree))
}

impl Sheets<'_> {
    /// The sheet of an id, or the nearest id.
    pub(super) fn find(&self, id: &str) -> Result<Used<'_>, Option<String>> {
        let own = self.own.iter().find(|own| own.sheet.id == id);
        if let Some(own) = own {
            return Ok(Used { sheet: &own.sheet, own: Some(own) });
        }
        let built_in = catalogue::sheets();
        if let Some(sheet) = built_in.iter().find(|sheet| sheet.id == id) {
            return Ok(Used { sheet, own: None });
        }
        let known = built_in.iter().chain(self.own.iter().map(|own| &own.sheet));
        Err(near::nearest(id, known.map(|sheet| sheet.id.as_str())).map(str::to_owned))
    }
}

impl<'s> Used<'s> {
    /// It comes with the program, and so knows nothing of the project's units.
    pub(super) const fn is_of_catalogue(&self) -> bool {
        self.own.is_none()
    }

    /// A formula of the sheet; one of the catalogue is placed where the project names the sheet.
    pub(super) fn formula(
        &self,
        text: &'s str,
        path: &[&str],
        named_at: &Place,
        whose: &'s str,
    ) -> Source<'s> {
        let Some((own, node)) = self.own.and_then(|own| Some((own, node(&own.tree, path)?))) else {
            return Source { text, place: named_at.clone(), exact: false, whose };
        };
        let (range, exact) = exactly(own.text, &node.range, text);
        Source { text, place: Place { file: own.file.to_owned(), range }, exact, whose: "" }
    }
}

/// The node at a path of keys and numbers.
fn node<'n>(tree: &'n Node, path: &[&str]) -> Option<&'n Node> {
    path.iter().try_fold(tree, |node, step| match &node.kind {
        Kind::Map(entries) => entries.get(*step),
        Kind::List(items) => items.get(step.parse::<usize>().ok()?),
        Kind::Empty | Kind::Leaf(_) => None,
    })
}
