//! Finding entries by words.

use super::names::key;
use super::{families, material_tables};

/// An entry that words found.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Entry {
    Section { designation: String, family: &'static str },
    Material { title: String, family: &'static str },
}

/// Entries whose name, family or table title hold all the words, in the order of the tables. Words that
/// together are the whole name of entries find these alone.
#[must_use]
pub fn find(words: &[String]) -> Vec<Entry> {
    let whole = key(&words.concat());
    let parts: Vec<String> = words.iter().map(|word| key(word)).collect();
    let sections = families().iter().flat_map(|family| {
        let about = key(&format!("{} {}", family.name, family.title()));
        family.designations().into_iter().map(move |designation| {
            let entry = Entry::Section { designation: designation.clone(), family: family.name };
            (key(&designation), about.clone(), entry)
        })
    });
    let materials = material_tables().into_iter().flat_map(|(title, family, grades)| {
        let about = key(&format!("{family} {title}"));
        grades.into_iter().map(move |grade| {
            (key(&grade), about.clone(), Entry::Material { title: grade, family })
        })
    });
    let mut exact = Vec::new();
    let mut loose = Vec::new();
    for (name, about, entry) in sections.chain(materials) {
        if name == whole {
            exact.push(entry);
        } else if parts.iter().all(|part| name.contains(part) || about.contains(part)) {
            loose.push(entry);
        }
    }
    if exact.is_empty() { loose } else { exact }
}
