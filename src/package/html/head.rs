//! The head of a page: what it may load and run, its fonts, its looks, its script.

use std::fmt::Write;

use sha2::{Digest, Sha256};

use super::escaped;
use crate::package::data_uri::{base64, data_uri};

const STYLES: [&str; 4] = [
    include_str!("../../../styles/page.css"),
    include_str!("../../../styles/drawing.css"),
    include_str!("../../../styles/screen.css"),
    include_str!("../../../styles/print.css"),
];

/// Fonts: family, weight, slope, WOFF2.
const FONTS: [(&str, u16, &str, &[u8]); 4] = [
    (
        "Spanfolio Text",
        400,
        "normal",
        include_bytes!("../../../styles/fonts/Spanfolio-Text-Regular.woff2"),
    ),
    (
        "Spanfolio Text",
        400,
        "italic",
        include_bytes!("../../../styles/fonts/Spanfolio-Text-Italic.woff2"),
    ),
    (
        "Spanfolio Text",
        600,
        "normal",
        include_bytes!("../../../styles/fonts/Spanfolio-Text-Semibold.woff2"),
    ),
    (
        "Spanfolio Math",
        400,
        "normal",
        include_bytes!("../../../styles/fonts/Spanfolio-Math-Regular.woff2"),
    ),
];

/// What helps to read the page, in the order of its parts; without it all that stands in the page is there.
const SCRIPT: &str = concat!(
    include_str!("../script/elements.js"),
    include_str!("../script/numbers.js"),
    include_str!("../script/record.js"),
    include_str!("../script/diagrams.js"),
    include_str!("../script/tables.js"),
    include_str!("../script/references.js"),
);

/// The page up to its body: nothing is loaded from elsewhere, and no script runs but ours.
pub(super) fn opening(title: &str, sheets: &str, readings: &str) -> String {
    let title = escaped(title);
    let script = base64(&Sha256::digest(SCRIPT));
    let mut out = format!(
        "<!DOCTYPE html>\n<html lang=\"en\">\n<head>\n<meta charset=\"utf-8\">\n\
         <meta http-equiv=\"Content-Security-Policy\" content=\"default-src 'none'; style-src 'unsafe-inline'; img-src data:; font-src data:; script-src 'sha256-{script}'\">\n\
         <meta name=\"viewport\" content=\"width=device-width, initial-scale=1\">\n\
         <meta name=\"color-scheme\" content=\"light dark\">\n\
         <title>{title}</title>\n<style>\n",
    );
    for (family, weight, slope, bytes) in FONTS {
        let _ = writeln!(
            out,
            "@font-face {{ font-family: \"{family}\"; font-weight: {weight}; font-style: {slope}; src: url({}) format(\"woff2\"); }}",
            data_uri("font/woff2", bytes),
        );
    }
    out.extend(STYLES);
    let _ = writeln!(out, "{sheets}</style>");
    if !readings.is_empty() {
        let _ = writeln!(
            out,
            "<script type=\"application/json\" id=\"page.record\">{readings}</script>"
        );
    }
    // A module runs when the whole page is there.
    let _ = write!(out, "<script type=\"module\">{SCRIPT}</script>\n</head>\n<body>\n");
    out
}
