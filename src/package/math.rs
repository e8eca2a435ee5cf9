//! LaTeX mathematics of the templates → MathML.

use math_core::{LatexToMathML, MathCoreConfig, MathDisplay};

/// Converts formulas; one for each page.
#[derive(Debug)]
pub(super) struct Mathematics {
    converter: Option<LatexToMathML>,
}

impl Mathematics {
    pub(super) fn new() -> Self {
        Self { converter: LatexToMathML::new(MathCoreConfig::default()).ok() }
    }

    /// MathML; what cannot be read is shown as it was written.
    pub(super) fn convert(&self, latex: &str, display: MathDisplay) -> String {
        let converted = self
            .converter
            .as_ref()
            .and_then(|converter| converter.convert_with_local_state(latex, display).ok());
        match converted {
            // MathML Core has no level of scripts on tables, and a formula of its own stands at the left as
            // inline mathematics in its display style.
            Some(result) => result.mathml.replace(" scriptlevel=\"0\"", "").replace(
                "<math display=\"block\">",
                "<math class=\"formula\" displaystyle=\"true\">",
            ),
            None => format!("<code>{}</code>", super::html::escaped(latex)),
        }
    }
}
