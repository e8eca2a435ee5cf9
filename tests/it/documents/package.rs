//! The package as a reader, a validator and a hostile project see it.

use spanfolio::diagnostic::Diagnostic;
use spanfolio::files::Sources;
use spanfolio::package::{Package, package};

use crate::support::sources;

const BEAM: &str = r#"format: 1
project:
  title: Porch
  number: P-1
  revisions:
    - {mark: A, date: 2026-03-01, status: for checking, note: First issue}
materials:
  steel: {E: 210 GPa, G: 81 GPa, density: 7850 kg/m3, expansion: 1.2e-5 /K}
sections:
  beam: {given: {A: 40 cm2, I_major: 3000 cm4, I_minor: 200 cm4, I_t: 10 cm4}}
frame: plane
nodes: {A: [0 m, 0 m], B: [6 m, 0 m]}
members:
  B1: {along: [A, B], section: beam, material: steel}
supports: {A: pinned, B: {Z: fixed}}
load_cases:
  Q:
    title: Load
    nature: imposed
    loads:
      - {member: B1, uniform: 10 kN/m}
combinations:
  written:
    - {title: all, purpose: strength, factors: {Q: 1.5}, source: a test}
"#;

fn issued(sources: &Sources) -> Result<Package, Vec<Diagnostic>> {
    let solved = spanfolio::solve(sources)?;
    package(&solved.record, sources, None)
}

fn with_template(name: &str, text: &str) -> Sources {
    let mut sources = sources(BEAM);
    sources.files.insert(format!("templates/{name}"), text.as_bytes().to_vec());
    sources
}

fn text(package: &Package, path: &str) -> String {
    String::from_utf8(package[path].clone()).expect("UTF-8")
}

fn problem(sources: &Sources) -> Diagnostic {
    let mut problems = issued(sources).expect_err("a template error");
    problems.remove(0)
}

#[test]
fn a_simple_beam_says_what_governs() {
    let package = issued(&sources(BEAM)).expect("a package");
    let markdown = text(&package, "package.md");
    // 1.5 × 10 kN/m × (6 m)² / 8, common practice, no source.
    assert!(markdown.contains("| strength | M_y in kN m | 67.5 | 3 | C1 |"), "{markdown}");
    for chapter in [
        "# 1 Summary",
        "# 2 Basis",
        "# 3 Model",
        "# 4 Actions",
        "# 5 Combinations",
        "# 6 Effects",
        "# 7 Checks",
        "# 8 Self-check",
        "# 9 Deferred",
        "# 10 Appendix",
    ] {
        assert!(markdown.contains(chapter), "no {chapter}");
    }
}

#[test]
fn the_same_project_gives_the_same_bytes() {
    assert_eq!(issued(&sources(BEAM)), issued(&sources(BEAM)));
}

#[test]
fn text_of_the_project_comes_out_as_it_went_in() {
    let nasty =
        r#"A|B <script>alert(1)</script> *x* _y_ $z$ `c` [l](http://evil.example) &amp; # 1."#;
    let yaml = BEAM.replace("title: Porch", &format!("title: '{nasty}'"));
    let package = issued(&sources(&yaml)).expect("a package");
    let page = text(&package, "package.html");
    assert!(!page.contains("<script>"), "a script reached the page");
    assert!(!page.contains("href=\"http"), "a link leads out of the page");
    let heading = "<h1 id=\"";
    let start = page.find(heading).expect("a heading");
    let line = page[start..].lines().next().expect("a line");
    assert!(
        line.contains("A|B &lt;script&gt;alert(1)&lt;/script&gt; *x* _y_ $z$ `c` [l](http://evil.example) &amp;amp; # 1."),
        "{line}"
    );
}

#[test]
fn nothing_is_loaded_from_elsewhere() {
    let page = text(&issued(&sources(BEAM)).expect("a package"), "package.html");
    for outside in ["src=\"", "@import", "<link", "<iframe"] {
        assert!(!page.contains(outside), "the page holds {outside}");
    }
    let own = page.matches("url(data:font/woff2;base64,").count();
    assert_eq!(page.matches("url(").count(), own, "something but the fonts is loaded");
    assert!(page.contains("default-src 'none'"));
}

#[test]
fn no_text_of_the_project_leaves_what_the_script_reads() {
    let yaml = BEAM.replace("title: all,", "title: '</script><b>&amp;',");
    assert_ne!(yaml, BEAM);
    let page = text(&issued(&sources(&yaml)).expect("a package"), "package.html");
    assert!(!page.contains("</script><b>"));
    assert!(page.contains("\\u003c/script\\u003e\\u003cb\\u003e\\u0026amp;"), "{page}");
}

#[test]
fn a_template_of_the_project_takes_the_place_of_ours() {
    let own = with_template(
        "summary.md",
        "# Overview\n\n{{ effect('B1', 'M_y', 'max', purpose='strength') | quantity }}\n",
    );
    let markdown = text(&issued(&own).expect("a package"), "package.md");
    assert!(markdown.contains("# 1 Overview\n\n67.5\u{a0}kN m\n"), "{markdown}");
}

#[test]
fn no_template_turns_off_the_notice_or_the_cautions() {
    let mut sources = sources(BEAM);
    for name in ["cover.md", "summary.md", "basis.md", "deferred.md", "appendix.md"] {
        sources.files.insert(format!("templates/{name}"), b"# Nothing\n".to_vec());
    }
    let package = issued(&sources).expect("a package");
    for path in ["package.md", "package.html"] {
        let text = text(&package, path);
        assert!(text.contains("Notice of responsibility."), "{path}");
        assert!(text.contains("a licensed engineer must check it"), "{path}");
    }
}

#[test]
fn an_error_in_a_template_names_file_and_line() {
    let problem = problem(&with_template("summary.md", "# Summary\n\n{{ project.titel }}\n"));
    assert_eq!(problem.code, "template");
    assert!(problem.message.starts_with("template `summary.md`, line 3"), "{}", problem.message);
    assert_eq!(problem.place.expect("a place").file, "templates/summary.md");
}

#[test]
fn an_error_in_an_included_template_points_there() {
    let mut sources = with_template("summary.md", "# Summary\n\n{% include \"part.md\" %}\n");
    sources.files.insert("templates/part.md".to_owned(), b"fine\n\n{{ nobody }}\n".to_vec());
    let problem = problem(&sources);
    assert!(problem.message.starts_with("template `part.md`, line 3"), "{}", problem.message);
}

#[test]
fn a_missing_template_is_named() {
    let problem = problem(&with_template("summary.md", "# Summary\n\n{% include \"part.md\" %}\n"));
    assert!(problem.message.contains("part.md"), "{}", problem.message);
}

#[test]
fn templates_that_include_each_other_are_stopped() {
    let problem = problem(&with_template("summary.md", "{% include \"summary.md\" %}"));
    assert_eq!(problem.code, "template");
}

#[test]
fn a_template_that_never_ends_is_stopped() {
    let endless =
        "{% for a in range(100000) %}{% for b in range(100000) %}x{% endfor %}{% endfor %}";
    let problem = problem(&with_template("summary.md", endless));
    assert_eq!(problem.code, "template");
}

#[test]
fn a_quantity_prints_only_through_its_filter() {
    let bare = "# S\n\n{{ effect('B1', 'M_y', 'max', purpose='strength') }}\n";
    let problem = problem(&with_template("summary.md", bare));
    assert!(problem.message.contains("`quantity`"), "{}", problem.message);
}

#[test]
fn an_unknown_member_in_a_template_is_an_error() {
    let unknown = "# S\n\n{{ effect('B9', 'M_y', 'max', purpose='strength') | quantity }}\n";
    let problem = problem(&with_template("summary.md", unknown));
    assert!(problem.message.contains("no member named `B9`"), "{}", problem.message);
}

#[test]
fn every_drawing_of_the_markdown_is_in_the_package() {
    let package = issued(&sources(BEAM)).expect("a package");
    let markdown = text(&package, "package.md");
    let mut count = 0;
    for target in markdown.split("](figures/").skip(1) {
        let file = target.split(')').next().expect("an end");
        assert!(package.contains_key(&format!("figures/{file}")), "no {file}");
        count += 1;
    }
    assert!(count >= 4, "only {count} drawings");
}

#[test]
fn every_formula_of_the_method_becomes_mathematics() {
    let page = text(&issued(&sources(BEAM)).expect("a package"), "package.html");
    assert!(page.matches("<math").count() >= 5);
    assert!(!page.contains("\\frac"), "a formula was not converted");
}

/// The context that templates see, as names: a change here is a change for every project's own templates.
#[test]
fn the_context_has_the_names_of_version_one() {
    let names = "{% for name in [program, fingerprint, project, present, basis, settings, units, values, build_ups, \
                 materials, sections, structures, cases, takedown, combinations, members, reactions, registers, \
                 self_check, method_figure, sources] %}{% endfor %}# All there\n";
    assert!(issued(&with_template("summary.md", names)).is_ok());
}

fn with_narrative(text: &str) -> Sources {
    let mut sources = sources(BEAM);
    sources.files.insert("narrative/a.md".to_owned(), text.as_bytes().to_vec());
    sources
}

/// An unclosed fence took the chapters behind it, the cautions with them, into a block of code.
#[test]
fn a_chapter_that_is_not_closed_is_an_error_at_its_place() {
    for opening in ["```yaml", "~~~", "<!-- for later"] {
        let problem = problem(&with_narrative(&format!("# Purpose\n\nText\n\n{opening}\nmore\n")));
        let place = problem.place.expect("a place");
        assert_eq!((problem.code, place.file.as_str()), ("unclosed-block", "narrative/a.md"));
        assert_eq!(place.range, 17..17 + opening.len());
    }
}

#[test]
fn code_within_a_line_opens_no_block() {
    let narrative = "# Purpose\n\n``` a ``` is code, [](#chapter:effects)\n\n## Scope\n";
    let markdown = text(&issued(&with_narrative(narrative)).expect("a package"), "package.md");
    assert!(markdown.contains("[chapter 7 Effects](#7-effects)\n\n## 2.1 Scope\n"), "{markdown}");
}
