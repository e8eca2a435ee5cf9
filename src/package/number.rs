//! Numbers headings, figures and tables in the rendered Markdown, so that Markdown and HTML agree.
//!
//! Chapters begin with `# `; sections with `## `. A line `Table: words` above a table becomes its numbered
//! caption; an image that stands alone in its line is a figure. Code blocks are left alone.

use std::fmt::Write;

use crate::project::narrative::Fences;

/// Begins the caption of a figure or table.
pub(super) const FIGURE: &str = "Figure ";
pub(super) const TABLE: &str = "**Table ";

/// Counters that run through the package.
#[derive(Debug, Default)]
pub(super) struct Numbering {
    chapter: usize,
    section: usize,
    figure: usize,
    table: usize,
}

impl Numbering {
    /// A chapter, its heading numbered or not.
    pub(super) fn chapter(&mut self, markdown: &str, numbered: bool) -> String {
        if numbered {
            self.chapter += 1;
        }
        self.section = 0;
        self.lines(markdown, numbered)
    }

    /// More of the chapter before.
    pub(super) fn continued(&mut self, markdown: &str) -> String {
        self.lines(markdown, true)
    }

    fn lines(&mut self, markdown: &str, numbered: bool) -> String {
        let mut out = String::with_capacity(markdown.len() + 256);
        let mut fences = Fences::default();
        let mut blank = true;
        for line in markdown.trim().lines() {
            let line = line.trim_end();
            let code = fences.holds(line);
            // Templates leave runs of empty lines where a loop or condition had nothing to say.
            if !code && line.is_empty() && blank {
                continue;
            }
            blank = !code && line.is_empty();
            let changed = if code { None } else { self.line(line, numbered) };
            out += changed.as_deref().unwrap_or(line);
            out.push('\n');
        }
        out.push('\n');
        out
    }

    fn line(&mut self, line: &str, numbered: bool) -> Option<String> {
        let mut out = String::new();
        if let Some(title) = line.strip_prefix("# ") {
            if !numbered {
                return None;
            }
            let _ = write!(out, "# {} {title}", self.chapter);
        } else if let Some(title) = line.strip_prefix("## ") {
            if !numbered {
                return None;
            }
            self.section += 1;
            let _ = write!(out, "## {}.{} {title}", self.chapter, self.section);
        } else if let Some(caption) = line.strip_prefix("Table: ") {
            self.table += 1;
            let _ = write!(out, "{TABLE}{}.** {caption}", self.table);
        } else if let Some(rest) = line.strip_prefix("![") {
            self.figure += 1;
            let _ = write!(out, "![{FIGURE}{}. {rest}", self.figure);
        } else {
            return None;
        }
        Some(out)
    }
}
