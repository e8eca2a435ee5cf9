//! The page as its Markdown makes it: links, footnotes, formulas, outcomes and what stands where.

use roxmltree::{Document, Node};
use spanfolio::diagnostic::Diagnostic;
use spanfolio::files::Sources;
use spanfolio::package::package;

use crate::support::{demo, sources};

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

fn pages(sources: &Sources) -> Result<String, Vec<Diagnostic>> {
    let solved = spanfolio::solve(sources)?;
    let mut package = package(&solved.record, sources, None)?;
    let page = package.remove("package.html").expect("a page");
    Ok(String::from_utf8(page).expect("UTF-8"))
}

/// The summary in this form, the chapter on the basis too where a second text is given.
fn with(summary: &str, basis: Option<&str>) -> Result<String, Vec<Diagnostic>> {
    let mut sources = sources(BEAM);
    let mut put = |name: &str, text: &str| {
        sources.files.insert(format!("templates/{name}"), text.as_bytes().to_vec());
    };
    put("summary.md", &format!("# Summary\n\n{summary}\n"));
    if let Some(basis) = basis {
        put("basis.md", &format!("# Basis\n\n{basis}\n"));
    }
    pages(&sources)
}

/// The HTML of the chapter's text, behind its heading.
fn chapter(summary: &str) -> String {
    let page = with(summary, None).unwrap_or_else(|problems| panic!("{problems:#?}"));
    let heading = "<h1 id=\"1-summary\">1 Summary</h1>\n";
    let start = page.find(heading).expect("the summary") + heading.len();
    let end = page[start..].find("</section>").expect("its end") + start;
    page[start..end].to_owned()
}

/// The page is written as XML wants it but for its first line and its void elements.
fn document<T>(page: &str, look: impl Fn(&Document<'_>) -> T) -> T {
    let start = page.find("<body>").expect("a body");
    let end = page.find("</html>").expect("an end");
    let body = page[start..end].replace("<br>", "<br/>").replace("<hr>", "<hr/>");
    look(&Document::parse(&body).unwrap_or_else(|error| panic!("{error}\n{body}")))
}

fn ids(document: &Document<'_>) -> Vec<String> {
    let id = |node: Node<'_, '_>| node.attribute("id").map(str::to_owned);
    document.descendants().filter_map(id).collect()
}

#[test]
fn ids_of_headings_are_those_of_the_usual_git_hosts() {
    // The rule is from memory.
    for (heading, id) in [
        ("### 7 Effects", "7-effects"),
        ("### 7.2 Member B-1 (roof)", "72-member-b-1-roof"),
        ("### B1-bending: M_y / W", "b1-bending-m_y--w"),
        ("### Beam `B1` *on* **grid** C", "beam-b1-on-grid-c"),
        ("### Größe λ̄ & 5 m²", "größe-λ̄--5-m"),
        ("###### A\u{a0}B", "ab"),
    ] {
        let out = chapter(heading);
        assert!(out.contains(&format!(" id=\"{id}\">")), "{heading}: {out}");
    }
}

#[test]
fn a_heading_that_comes_again_gets_a_number() {
    let out = chapter("### Post\n\n### Post\n\n### Post\n\n[second](#post-1)");
    for expected in ["<h3 id=\"post\">", "<h3 id=\"post-1\">", "<h3 id=\"post-2\">"] {
        assert!(out.contains(expected), "{out}");
    }
    assert!(out.contains("<a href=\"#post-1\">second</a>"), "{out}");
}

#[test]
fn no_heading_takes_the_id_of_a_figure_or_a_footnote() {
    let text = "### Figure method element\n\n### Method element title\n\n### Note 1\n\n### Note 1 mark\n\n### ―\n\n\
                A word[^a].\n\n[^a]: A note.\n\n![Again](figures/method-element.svg)\n\n![Again](figures/method-element.svg)";
    let page = with(text, None).expect("a page");
    document(&page, |document| {
        let mut all = ids(document);
        all.sort();
        let count = all.len();
        all.dedup();
        assert_eq!(all.len(), count, "{all:?}");
        let aside = document.descendants().find(|node| node.attribute("id") == Some("note-1"));
        assert!(aside.expect("the note").has_tag_name("aside"));
    });
}

#[test]
fn every_id_of_the_demos_comes_once_and_every_link_leads_to_one() {
    for name in ["gallery-floor", "workshop-portal", "pump-platform"] {
        let page = pages(&demo(name)).expect("a page");
        document(&page, |document| {
            let all = ids(document);
            for (at, id) in all.iter().enumerate() {
                assert!(!all[..at].contains(id), "{name}: {id} comes twice");
            }
            for link in document.descendants().filter_map(|node| node.attribute("href")) {
                let id = link.strip_prefix('#').expect("a link inside the page");
                assert!(all.iter().any(|other| other == id), "{name}: nothing at {link}");
            }
        });
    }
}

#[test]
fn a_link_that_leads_nowhere_is_an_error_at_its_place() {
    let problems = with("See [this](#nobody) and [this](#nobody).", None).expect_err("an error");
    assert_eq!(problems.len(), 1);
    assert_eq!(problems[0].code, "unknown-link");
    assert_eq!(problems[0].message, "a link leads to `#nobody`, which is not there");
    let place = problems[0].place.as_ref().expect("a place");
    assert_eq!((place.file.as_str(), &place.range), ("templates/summary.md", &(22..29)));
}

#[test]
fn of_a_link_that_leads_out_the_address_is_shown() {
    let out = chapter("[Maps](https://maps.example/a?b&c), <https://maps.example>");
    assert_eq!(out, "<p>Maps (https://maps.example/a?b&amp;c), https://maps.example</p>\n");
}

#[test]
fn a_link_in_a_heading_is_text() {
    let out = chapter("### Of [the summary](#1-summary)");
    assert_eq!(out, "<h3 id=\"of-the-summary\">Of the summary</h3>\n");
}

#[test]
fn footnotes_are_numbered_in_order_of_first_reference() {
    let out = chapter("[^b]: Of b.\n\n[^a]: Of a.\n\nOne[^a], two[^b], one again[^a].");
    insta::assert_snapshot!(out, @r##"
    <aside class="note" id="note-2" role="doc-footnote"><a href="#note-2-mark" role="doc-backlink">2</a>
    <p>Of b.</p>
    </aside>
    <aside class="note" id="note-1" role="doc-footnote"><a href="#note-1-mark" role="doc-backlink">1</a>
    <p>Of a.</p>
    </aside>
    <p>One<sup id="note-1-mark"><a href="#note-1" role="doc-noteref">1</a></sup>, two<sup id="note-2-mark"><a href="#note-2" role="doc-noteref">2</a></sup>, one again<sup><a href="#note-1" role="doc-noteref">1</a></sup>.</p>
    "##);
}

#[test]
fn a_footnote_counts_in_its_chapter() {
    let page =
        with("Here[^1].\n\n[^1]: Of the summary.", Some("There[^1].\n\n[^1]: Of the basis."))
            .expect("a page");
    document(&page, |document| {
        for (reference, text) in [("Here", "Of the summary."), ("There", "Of the basis.")] {
            let paragraph = document
                .descendants()
                .find(|node| node.has_tag_name("p") && node.text() == Some(reference))
                .expect("the paragraph");
            let link = paragraph.descendants().find_map(|node| node.attribute("href"));
            let id = link.expect("a link").trim_start_matches('#');
            let note = document.descendants().find(|node| node.attribute("id") == Some(id));
            let words = note.expect("the note").descendants().filter_map(|node| node.text());
            assert!(words.collect::<String>().contains(text), "{reference}");
        }
    });
}

#[test]
fn a_footnote_that_is_not_there_stays_text() {
    assert_eq!(chapter("A word[^gone]."), "<p>A word[^gone].</p>\n");
}

#[test]
fn a_note_that_nothing_refers_to_is_shown_without_a_number() {
    assert_eq!(
        chapter("[^alone]: Left over."),
        "<aside class=\"note\">\n<p>Left over.</p>\n</aside>\n"
    );
}

#[test]
fn outcomes_alone_in_strong_print_are_marked() {
    assert_eq!(
        chapter("**satisfied**, **not satisfied**, **deferred**, **satisfied by far**"),
        "<p><strong class=\"outcome satisfied\">satisfied</strong>, \
         <strong class=\"outcome unsatisfied\">not satisfied</strong>, \
         <strong class=\"outcome deferred\">deferred</strong>, <strong>satisfied by far</strong></p>\n"
    );
}

/// What calculations are written with. A `%` must be written `\%`: alone it begins a comment.
#[test]
fn the_mathematics_of_calculations_is_converted() {
    for latex in [
        r"\begin{aligned} \sigma &= \frac{M_y}{W_{el,y}} \\ &= \frac{12.3\,\mathrm{kN\,m}}{557\,\mathrm{cm^3}} = 22.1\,\mathrm{MPa} \end{aligned}",
        r"\begin{cases} \dfrac{a}{b} & \text{if } \lambda \le 0.2 \\ 1 & \text{otherwise} \end{cases}",
        r"\sqrt{\left( \frac{a}{b} \right)^2} + \lvert x \rvert + \left\lvert x \right\rvert",
        r"a \le b \ge c \ne d < e > f, \quad p \land q \lor \lnot r",
        r"\alpha \beta \gamma_{M0} \theta \lambda \varphi \Phi \Delta \bar{\lambda}_{LT} \overline{\lambda}",
        r"a \cdot b \; c \times d \% \lfloor x \rfloor \lceil x \rceil \operatorname{sign}(x) \min(a, b)",
        r"35° + 35^\circ + 12\text{ \% of }b + \mathrm{k N} + \mu \Omega",
    ] {
        let out = chapter(&format!("$$\n{latex}\n$$"));
        assert!(out.starts_with("<div class=\"display\"><math"), "{latex}: {out}");
    }
}

#[test]
fn a_formula_or_a_figure_amid_a_paragraph_parts_it() {
    let out = chapter("From $$a$$ follows\n![words](figures/method-element.svg) all.");
    document(&format!("<body>{out}</body></html>"), |document| {
        let parts: Vec<&str> = document
            .root_element()
            .children()
            .filter(Node::is_element)
            .map(|node| node.tag_name().name())
            .collect();
        assert_eq!(parts, ["p", "div", "p", "figure", "p"]);
    });
}

#[test]
fn the_words_of_a_caption_stay_in_it() {
    let out = chapter("![Bending of `B1`, *see* M_y](figures/method-element.svg)");
    assert!(out.starts_with("<figure "), "{out}");
    let caption = "<figcaption>Figure 1. Bending of <code>B1</code>, <em>see</em> <i>M</i><sub>y</sub></figcaption>";
    assert!(out.contains(caption), "{out}");
}

#[test]
fn only_the_line_above_a_table_is_its_caption() {
    let out =
        chapter("**Table 9** says more.\n\nTable: Loads\n\n| a | b |\n| --- | :---: |\n| 1 | 2 |");
    assert!(out.starts_with("<p><strong>Table 9</strong> says more.</p>\n"), "{out}");
    assert!(out.contains(".</strong> Loads</caption>\n<thead>"), "{out}");
    assert!(out.contains("<td class=\"centre\">2</td>"), "{out}");
}

#[test]
fn lists_nest_and_begin_where_they_say() {
    let out = chapter("3. three\n   - inner\n\n     > said\n4. four");
    assert!(out.starts_with("<ol start=\"3\">\n<li>"), "{out}");
    document(&format!("<body>{out}</body></html>"), |document| {
        let said = document.descendants().find(|node| node.has_tag_name("blockquote"));
        let names: Vec<&str> =
            said.expect("a quotation").ancestors().map(|node| node.tag_name().name()).collect();
        assert_eq!(names[..5], ["blockquote", "li", "ul", "li", "ol"]);
    });
}
