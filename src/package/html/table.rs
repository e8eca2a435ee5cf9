//! A table of the page while its rows are read.

use pulldown_cmark::Alignment;

/// Tables of at most so many rows stay on one sheet.
const TOGETHER: usize = 14;
/// Tables with more columns than these stand on sheets turned sideways.
const UPRIGHT: usize = 12;

pub(super) struct Table {
    alignments: Vec<Alignment>,
    /// The present column, and the rows so far.
    column: usize,
    rows: usize,
    in_head: bool,
    /// Where the table begins in the page.
    start: usize,
}

impl Table {
    pub(super) fn new(alignments: Vec<Alignment>, start: usize) -> Self {
        Self { alignments, column: 0, rows: 0, in_head: true, start }
    }

    pub(super) fn opening(&self, caption: Option<String>) -> String {
        let caption = caption.map(|caption| format!("<caption>{caption}</caption>\n"));
        format!("<div class=\"table\">\n<table>\n{}<thead>\n<tr>", caption.unwrap_or_default())
    }

    pub(super) fn head_end(&mut self) -> &'static str {
        self.in_head = false;
        "</tr>\n</thead>\n<tbody>\n"
    }

    pub(super) fn row(&mut self) -> &'static str {
        self.column = 0;
        self.rows += 1;
        "<tr>"
    }

    pub(super) fn cell(&self) -> String {
        let class = match self.alignments.get(self.column) {
            Some(Alignment::Right) => " class=\"right\"",
            Some(Alignment::Center) => " class=\"centre\"",
            _ => "",
        };
        match (self.in_head, self.column) {
            (true, _) => format!("<th scope=\"col\"{class}>"),
            (false, 0) => format!("<th scope=\"row\"{class}>"),
            (false, _) => format!("<td{class}>"),
        }
    }

    /// The present cell is the first of a row of the body.
    pub(super) const fn heads_row(&self) -> bool {
        !self.in_head && self.column == 0
    }

    pub(super) fn cell_end(&mut self) -> &'static str {
        let heads = self.in_head || self.column == 0;
        self.column += 1;
        if heads { "</th>" } else { "</td>" }
    }

    /// Ends the table at the end of the page so far; `sideways` names the sheets that are turned.
    pub(super) fn end(&self, html: &mut String, sideways: &str) {
        html.push_str("</tbody>\n</table>\n</div>\n");
        without_empty_heads(html, self.start);
        if self.rows <= TOGETHER {
            html.insert_str(self.start + "<div class=\"table".len(), " short");
        }
        if self.alignments.len() > UPRIGHT {
            let style = format!(" style=\"page: {sideways}\"");
            html.insert_str(self.start + "<div".len(), &style);
        }
    }
}

/// A corner without words is no head, and a row of such corners is none either.
fn without_empty_heads(html: &mut String, start: usize) {
    let Some(from) = html[start..].find("<thead>").map(|at| start + at) else { return };
    let Some(to) = html[from..].find("</thead>\n").map(|at| from + at + "</thead>\n".len()) else {
        return;
    };
    let mut head = html[from..to].to_owned();
    for class in ["", " class=\"right\"", " class=\"centre\""] {
        head = head.replace(&format!("<th scope=\"col\"{class}></th>"), "<td></td>");
    }
    if !head.contains("<th") {
        head.clear();
    }
    html.replace_range(from..to, &head);
}
