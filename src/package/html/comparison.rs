//! The page of a comparison, which stands apart from any package.

use super::{body, escaped, head};
use crate::figures::Figure;
use crate::record::Record;

/// The whole page; `record` is the new side.
pub(in crate::package) fn comparison(
    record: &Record,
    markdown: &str,
    drawings: &[Figure],
) -> String {
    let body = body::Body::new(markdown, drawings);
    let project = &record.project;
    let title = format!("{} – {}: changes", project.number, project.title);
    let mut out =
        head::opening(&title, &format!("@page {{ size: {}; }}\n", record.model.package.paper), "");
    out.reserve(body.html.len());
    out += &format!(
        "<header class=\"head\" data-issue=\"{0}\"><span>{0}</span> <span>{1}</span></header>\n<main>\n",
        escaped(&project.number),
        escaped(&project.title),
    );
    out += &body.html;
    out += "</main>\n</body>\n</html>\n";
    out
}
