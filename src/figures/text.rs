//! Text in drawings: what is written, and how much room it takes.
//!
//! Widths are the advance widths shared by the common sans-serif fonts of the style's font stack, with
//! some room added, so that a box holds its text whichever of them a reader has.

/// Size of labels, mm: 7.4 pt where the drawing is one column wide.
pub(super) const SIZE: f64 = 2.6;
/// Size of subscripts, mm.
const SUBSCRIPT: f64 = 1.9;
/// Room added to the table's widths.
const ROOM: f64 = 1.07;
/// Bold text is wider.
const BOLD: f64 = 1.08;

/// Advance widths of the printable ASCII characters from space on, thousandths of the size.
const WIDTHS: [u16; 95] = [
    278, 278, 355, 556, 556, 889, 667, 191, 333, 333, 389, 584, 278, 333, 278, 278, 556, 556, 556,
    556, 556, 556, 556, 556, 556, 556, 278, 278, 584, 584, 584, 556, 1015, 667, 667, 722, 722, 667,
    611, 778, 722, 278, 500, 667, 556, 833, 722, 778, 667, 778, 722, 667, 611, 722, 667, 944, 667,
    667, 611, 278, 278, 278, 469, 556, 333, 556, 556, 500, 556, 556, 278, 556, 556, 222, 222, 500,
    222, 833, 556, 556, 556, 556, 333, 500, 278, 556, 500, 722, 500, 500, 500, 334, 260, 334, 584,
];

/// Words with subscripts.
#[derive(Clone, Debug, Default, PartialEq)]
pub(super) struct Text {
    /// Pieces, and whether each is a subscript.
    parts: Vec<(String, bool)>,
    strong: bool,
}

impl Text {
    pub(super) fn new(words: impl Into<String>) -> Self {
        Self { parts: vec![(words.into(), false)], strong: false }
    }

    /// A symbol such as `M_y`, its part behind the underscore as a subscript.
    pub(super) fn symbol(symbol: &str) -> Self {
        match symbol.split_once('_') {
            Some((letter, index)) => {
                Self { parts: vec![(letter.into(), false), (index.into(), true)], strong: false }
            }
            None => Self::new(symbol),
        }
    }

    pub(super) fn then(mut self, words: impl Into<String>) -> Self {
        self.parts.push((words.into(), false));
        self
    }

    /// Goes on with a symbol.
    pub(super) fn and_symbol(mut self, symbol: &str) -> Self {
        self.parts.extend(Self::symbol(symbol).parts);
        self
    }

    pub(super) fn strong(mut self) -> Self {
        self.strong = true;
        self
    }

    pub(super) fn is_strong(&self) -> bool {
        self.strong
    }

    /// Width in mm.
    pub(super) fn width(&self) -> f64 {
        let plain: f64 = self
            .parts
            .iter()
            .map(|(words, sub)| width(words) * if *sub { SUBSCRIPT } else { SIZE })
            .sum();
        plain * ROOM * if self.strong { BOLD } else { 1.0 }
    }

    /// The content of an SVG text element, escaped.
    pub(super) fn markup(&self) -> String {
        let mut out = String::new();
        let mut lowered = false;
        for (words, sub) in &self.parts {
            // Ordinary spaces at the ends of pieces would be dropped.
            let words =
                escape(words).replace(' ', if self.parts.len() > 1 { "\u{a0}" } else { " " });
            match (sub, lowered) {
                (true, _) => out += &format!(r#"<tspan class="sf-sub" dy=".6">{words}</tspan>"#),
                (false, true) => out += &format!(r#"<tspan dy="-.6">{words}</tspan>"#),
                (false, false) => out += &words,
            }
            lowered = *sub;
        }
        out
    }
}

fn escape(words: &str) -> String {
    words.replace('&', "&amp;").replace('<', "&lt;").replace('>', "&gt;")
}

/// Width as a multiple of the size.
fn width(words: &str) -> f64 {
    words.chars().map(advance).sum::<f64>() / 1000.0
}

fn advance(c: char) -> f64 {
    let ascii = u32::from(c)
        .checked_sub(u32::from(' '))
        .and_then(|place| usize::try_from(place).ok())
        .and_then(|place| WIDTHS.get(place));
    match (ascii, c) {
        (Some(width), _) => f64::from(*width),
        (None, '\u{a0}') => 278.0,
        (None, '\u{2009}') => 200.0,
        // Marks that stand on the letter before them.
        (None, '\u{300}'..='\u{36f}') => 0.0,
        // Wide scripts take a whole square.
        (None, '\u{1100}'..='\u{11ff}' | '\u{2e80}'..='\u{ffdc}') => 1000.0,
        (None, _) => 650.0,
    }
}
