//! No project file makes the reader panic, or work for long.

use std::time::{Duration, Instant};

use proptest::prelude::*;

use super::project_file::{GOOD, read};

/// Generous for a busy machine and an unoptimised build; a bomb would take minutes.
const SOON: Duration = Duration::from_secs(5);

/// The code of the first problem, found soon.
fn refused(yaml: &str) -> &'static str {
    let start = Instant::now();
    let code = read(yaml).expect_err("refused")[0].code;
    assert!(start.elapsed() < SOON, "{:?}", start.elapsed());
    code
}

#[test]
fn many_opening_brackets_are_answered_soon() {
    assert_eq!(refused(&format!("a: {}", "[".repeat(200_000))), "limit");
    assert_eq!(refused(&format!("a: {}", "{a: ".repeat(200_000))), "limit");
    assert_eq!(refused(&"- ".repeat(200_000)), "limit");
}

#[test]
fn an_alias_bomb_is_answered_soon() {
    let mut yaml = String::from("a0: &a0 [x, x, x, x, x, x, x, x, x, x]\n");
    for level in 1..30 {
        let inner = vec![format!("*a{}", level - 1); 10].join(", ");
        yaml += &format!("a{level}: &a{level} [{inner}]\n");
    }
    assert_eq!(refused(&yaml), "limit");
}

#[test]
fn a_long_text_aliased_often_is_answered_soon() {
    let yaml = format!("a: &a {}\nb: [{}]\n", "x".repeat(1 << 20), "*a, ".repeat(1000));
    assert_eq!(refused(&yaml), "limit");
}

#[test]
fn an_alias_inside_its_own_anchor_is_refused() {
    assert_eq!(refused("a: &a [1, *a]\n"), "alias");
}

#[test]
fn a_file_too_large_is_refused() {
    assert_eq!(refused(&"# remark\n".repeat(1_000_000)), "limit");
}

#[test]
fn depth_counts_through_aliases() {
    let mut yaml = String::from("a0: &a0 [x]\n");
    for level in 1..80 {
        yaml += &format!("a{level}: &a{level} [*a{}]\n", level - 1);
    }
    assert_eq!(refused(&yaml), "limit");
}

#[test]
fn bytes_that_are_not_text_are_refused() {
    let mut sources = crate::support::sources(GOOD);
    sources.files.insert("project.yaml".to_owned(), vec![b'a', 0xff, 0xfe]);
    assert_eq!(spanfolio::project::written(&sources).unwrap_err()[0].code, "encoding");
}

#[test]
fn a_folder_without_a_project_file_is_refused() {
    let found = spanfolio::project::written(&spanfolio::files::Sources::default()).unwrap_err();
    assert_eq!(found[0].code, "no-project");
}

/// Places lie inside the file and between characters, so that they can be shown.
fn shows(yaml: &str) {
    for problem in read(yaml).err().unwrap_or_default() {
        if let Some(place) = problem.place {
            assert!(yaml.get(place.range.clone()).is_some(), "{problem:?}", problem = place.range);
        }
    }
}

proptest! {
    #[test]
    fn damaged_files_are_answered(
        edits in prop::collection::vec(
            (any::<prop::sample::Index>(), 0..12_usize, r"[\[\]{}:,&*!|>'%@#?\-\x00-\x20a-z0-9°²\u{feff}\t\r\n ]{0,6}"),
            1..6,
        ),
    ) {
        let mut letters: Vec<char> = GOOD.chars().collect();
        for (at, cut, put) in edits {
            let at = at.index(letters.len());
            let end = (at + cut).min(letters.len());
            letters.splice(at..end, put.chars());
        }
        shows(&letters.into_iter().collect::<String>());
    }

    #[test]
    fn lines_moved_about_are_answered(
        moves in prop::collection::vec((any::<prop::sample::Index>(), any::<prop::sample::Index>()), 1..8),
    ) {
        let mut lines: Vec<&str> = GOOD.lines().collect();
        for (from, to) in moves {
            let line = lines[from.index(lines.len())];
            lines.insert(to.index(lines.len()), line);
        }
        shows(&lines.join("\n"));
    }

    #[test]
    fn any_text_is_answered(yaml in r"([a-c&*!\[\]{}:,|>'\x22%?#\-\n\t °]|: |- |\n  ){0,60}") {
        shows(&yaml);
    }
}
