//! Drawings: well-formed, accessible, self-contained, readable, the same every time.

use std::collections::BTreeSet;

use roxmltree::{Document, Node};
use spanfolio::figures::{Figure, figures, method};

use crate::support::{solved, solved_demo};

const DEMOS: [&str; 3] = ["gallery-floor", "workshop-portal", "pump-platform"];

/// 6 m, 10 kN/m, simply supported: M_y = 45 kN m at mid-span.
const BEAM: &str = "
format: 1
project: {title: Footbridge, number: T-1, revisions: [{mark: A, date: 2026-01-05, status: for checking, note: First issue}]}
materials: {steel: {grade: S275}}
sections: {beam: {catalogue: IPE 300}}
frame: plane
nodes: {A: [0 m, 0 m], B: [6 m, 0 m]}
members: {B1: {along: [A, B], section: beam, material: steel}}
supports: {A: pinned, B: {Z: fixed}}
load_cases: {Q: {title: Crowd, nature: imposed, loads: [{member: B1, uniform: 10 kN/m}]}}
combinations: {written: [{title: Crowd alone, purpose: strength, factors: {Q: 1.0}}]}
";

fn all() -> Vec<Vec<Figure>> {
    let mut all: Vec<Vec<Figure>> = DEMOS.iter().map(|demo| figures(&solved_demo(demo))).collect();
    all.push(vec![method()]);
    all
}

fn each(mut check: impl FnMut(&Figure, &Document<'_>)) {
    for figure in all().iter().flatten() {
        match Document::parse(&figure.svg) {
            Ok(document) => check(figure, &document),
            Err(error) => panic!("{}: {error}\n{}", figure.id, figure.svg),
        }
    }
}

fn texts<'a>(document: &'a Document<'a>) -> Vec<(Node<'a, 'a>, String)> {
    document
        .descendants()
        .filter(|node| node.has_tag_name("text"))
        .map(|node| {
            let words = node.descendants().filter(Node::is_text).filter_map(|part| part.text());
            (node, words.collect::<String>().trim().to_owned())
        })
        .collect()
}

#[test]
fn every_drawing_has_a_title_and_a_description_for_those_who_do_not_see_it() {
    each(|figure, document| {
        let root = document.root_element();
        assert_eq!(root.attribute("role"), Some("img"), "{}", figure.id);
        for name in ["title", "desc"] {
            let found = root.children().find(|node| node.has_tag_name(name));
            let words = found.and_then(|node| node.text()).unwrap_or_default();
            assert!(!words.trim().is_empty(), "{}: no {name}", figure.id);
        }
        assert!(!figure.caption.is_empty(), "{}", figure.id);
    });
}

#[test]
fn no_id_comes_twice_in_a_package() {
    for package in all() {
        let mut ids = BTreeSet::new();
        for figure in &package {
            let document = Document::parse(&figure.svg).expect("an XML document");
            for node in document.descendants() {
                if let Some(id) = node.attribute("id") {
                    assert!(ids.insert(id.to_owned()), "{id} in {}", figure.id);
                }
            }
        }
    }
}

#[test]
fn no_drawing_asks_for_anything_outside_itself() {
    each(|figure, document| {
        for node in document.descendants() {
            for attribute in node.attributes() {
                assert!(!attribute.name().ends_with("href"), "{}", figure.id);
                assert!(!attribute.value().contains("url("), "{}", figure.id);
            }
            assert!(!node.has_tag_name("script") && !node.has_tag_name("image"), "{}", figure.id);
        }
        assert!(!figure.svg.contains("@import"), "{}", figure.id);
    });
}

#[test]
fn every_number_drawn_is_finite() {
    each(|figure, document| {
        for node in document.descendants() {
            for attribute in node.attributes().filter(|attribute| attribute.name() == "d") {
                let path = attribute.value();
                assert!(!path.contains("NaN") && !path.contains("inf"), "{}: {path}", figure.id);
            }
        }
        let of_root = document.root_element().attribute("viewBox").unwrap_or_default();
        let numbers: Vec<f64> = of_root.split(' ').filter_map(|part| part.parse().ok()).collect();
        assert!(numbers.len() == 4 && numbers.iter().all(|n| n.is_finite()), "{}", figure.id);
    });
}

/// Boxes narrower than any font of the style's stack makes them: what overlaps here overlaps on paper.
#[test]
fn no_label_covers_another() {
    each(|figure, document| {
        let boxes: Vec<([f64; 4], String)> = texts(document)
            .into_iter()
            .filter(|(node, _)| node.attribute("transform").is_none())
            .map(|(node, words)| {
                let number = |name: &str| {
                    node.attribute(name).and_then(|value| value.parse::<f64>().ok()).expect(name)
                };
                let width = words.chars().count() as f64 * 1.1;
                let left = match node.attribute("text-anchor") {
                    Some("middle") => number("x") - width / 2.0,
                    _ => number("x"),
                };
                ([left, number("y") - 1.8, left + width, number("y")], words)
            })
            .collect();
        for (i, (a, first)) in boxes.iter().enumerate() {
            for (b, second) in &boxes[i + 1..] {
                let apart = a[2] <= b[0] || b[2] <= a[0] || a[3] <= b[1] || b[3] <= a[1];
                assert!(apart, "{}: `{first}` and `{second}`", figure.id);
            }
        }
    });
}

#[test]
fn drawing_twice_gives_the_same_bytes() {
    let record = solved_demo(DEMOS[0]);
    assert_eq!(figures(&record), figures(&record));
}

#[test]
fn every_structure_case_and_drawn_member_has_its_drawing() {
    for demo in DEMOS {
        let record = solved_demo(demo);
        let drawn = figures(&record);
        for structure in record.model.structures.keys() {
            let id = |figure: &&Figure| {
                figure.id.starts_with("model-") && figure.structure.as_ref() == Some(structure)
            };
            assert_eq!(drawn.iter().filter(id).count(), 1, "{structure}");
        }
        for (name, case) in &record.model.cases {
            for load in &case.loads {
                let shows = |figure: &Figure| {
                    figure.case.as_ref() == Some(name)
                        && figure.structure.as_ref() == Some(&load.structure)
                };
                assert!(drawn.iter().any(shows), "{name} on {}", load.structure);
            }
        }
        for member in &record.model.package.drawn {
            assert!(drawn.iter().any(|figure| figure.member.as_ref() == Some(member)), "{member}");
        }
    }
}

#[test]
fn the_extreme_of_a_beam_is_written_with_its_place() {
    let drawn = figures(&solved(BEAM));
    let effects = drawn.iter().find(|figure| figure.id == "member-b1.strength").expect("drawn");
    let document = Document::parse(&effects.svg).expect("an XML document");
    let words: Vec<String> = texts(&document).into_iter().map(|(_, words)| words).collect();
    assert!(words.iter().any(|words| words == "45 at 3\u{a0}m (C1)"), "{words:?}");
}

#[test]
fn the_beam_element_is_drawn_as_before() {
    insta::assert_snapshot!(method().svg);
}
