//! Projects divided over machines.

use std::collections::BTreeSet;

use proptest::collection::btree_set;
use proptest::prelude::*;
use spanfolio::audit::{Part, parts};

fn names() -> impl Strategy<Value = BTreeSet<String>> {
    btree_set("[a-c]{1,3}(/[a-z ]{1,4}){0,2}", 0..60)
}

proptest! {
    #[test]
    fn parts_are_disjoint_complete_and_no_part_has_more_than_its_share(names in names(), of in 1usize..40) {
        let all: Vec<String> = names.into_iter().collect();
        let mut seen = Vec::new();
        for number in 1..=of {
            let part: Part = format!("{number}/{of}").parse().expect("a part");
            let kept = part.keep(all.clone(), |name| name);
            prop_assert!(kept.len() <= all.len().div_ceil(of));
            prop_assert!(kept.is_sorted(), "the order is kept");
            seen.extend(kept);
        }
        seen.sort();
        prop_assert_eq!(seen, all);
    }

    #[test]
    fn the_order_of_names_does_not_change_their_part(names in names(), of in 1usize..40) {
        let all: Vec<&str> = names.iter().map(String::as_str).collect();
        let back: Vec<&str> = all.iter().rev().copied().collect();
        let mut parts_back = parts(&back, of);
        parts_back.reverse();
        prop_assert_eq!(parts(&all, of), parts_back);
    }
}

/// A project more moves a few others at most, whatever the number of parts; in turn by order of name it would
/// move half of them.
#[test]
fn a_new_project_moves_few_others() {
    let names: Vec<String> = (0..200).map(|number| format!("projects/{number}")).collect();
    for of in [2, 3, 8, 20] {
        let mut moved = 0;
        for new in 0..names.len() {
            let without: Vec<&str> = (0..names.len())
                .filter(|index| *index != new)
                .map(|index| &*names[index])
                .collect();
            let with: Vec<&str> = names.iter().map(String::as_str).collect();
            let mut after = parts(&with, of);
            after.remove(new);
            moved += parts(&without, of).iter().zip(&after).filter(|(a, b)| a != b).count();
        }
        let share = moved as f64 / (names.len() * (names.len() - 1)) as f64;
        assert!(share < 0.05, "{of} parts: {share}");
    }
}

/// Machines of other versions must agree, so a change here is a break.
#[test]
fn the_parts_of_these_names_never_change() {
    let names = ["bridges/weir", "halls/workshop", "houses/a", "houses/b", "houses/c", "tower"];
    assert_eq!(parts(&names, 3), [1, 3, 2, 2, 1, 3]);
}
