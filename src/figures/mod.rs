//! Record → SVG drawings. Asks the Record for every value; computes none.
//!
//! Invariants
//! - Every drawing is one column wide, 170 mm; its numbers are mm of paper. Text is at least 7 pt.
//! - Black and white: meaning is carried by line, mark and word, never by colour.
//! - The look is in `styles/drawing.css`, written into every drawing.
//! - Equal records give equal bytes.

mod canvas;
mod comparison;
mod curve;
mod frame;
mod imposed;
mod labels;
mod loads;
mod member;
mod member_line;
mod method;
mod model;
mod names;
mod plane;
mod sheet;
mod symbols;
mod text;
mod view;

use rayon::prelude::*;

use crate::model::{Effect, Purpose};
use crate::record::Record;
use sheet::Sheet;

pub use comparison::comparison;
pub use method::method;

/// Left and right ends of the member on a drawing of its effects, mm of paper.
pub use member::ENDS;

/// Where an effect along a member is drawn: its zero line and the paper that one SI unit takes downwards, mm.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Row {
    pub effect: Effect,
    pub axis: f64,
    pub scale: f64,
}

/// A drawing with its place in the package.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Figure {
    /// Unique: `model-main`, `loads-main.g`, `frame-main.strength.m_y`, `member-b1.strength`, …
    pub id: String,
    /// Caption under the drawing.
    pub caption: String,
    /// One SVG element with title and desc, text as text, no outside reference.
    pub svg: String,
    /// The structure shown, where one is shown.
    pub structure: Option<String>,
    /// The load case shown.
    pub case: Option<String>,
    /// The member shown.
    pub member: Option<String>,
    /// The purpose whose combinations are shown.
    pub purpose: Option<String>,
    /// The effect shown (its name, e.g. `M_y`, or `displacement`); `None` where several are.
    pub effect: Option<String>,
    /// The effects along a member, from top to bottom, where the drawing can be read.
    pub rows: Vec<Row>,
}

/// All drawings of a package, in order: for each structure its model, the loads of each case and the
/// frame's effects by purpose, then each drawn member's effects by purpose.
#[must_use]
pub fn figures(record: &Record) -> Vec<Figure> {
    let printer = record.model.units.printer();
    let mut figures = Vec::new();
    for (name, structure) in &record.model.structures {
        let sheet = Sheet::new(record, &printer, name, structure);
        figures.push(model::figure(&sheet));
        let cases: Vec<_> = record.model.cases.iter().collect();
        figures.par_extend(
            cases.par_iter().filter_map(|(case, content)| loads::figure(&sheet, case, content)),
        );
        figures.extend(frame::figures(&sheet));
        let members: Vec<(&String, Purpose)> = structure
            .members
            .keys()
            .filter(|name| is_drawn(record, name))
            .flat_map(|name| Purpose::ALL.map(|purpose| (name, purpose)))
            .collect();
        figures.par_extend(
            members.par_iter().filter_map(|(name, purpose)| member::figure(&sheet, name, *purpose)),
        );
    }
    figures
}

fn is_drawn(record: &Record, member: &str) -> bool {
    record.model.package.drawn.iter().any(|drawn| drawn == member)
}
