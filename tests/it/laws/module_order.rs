//! Each module imports only modules that stand before it in the way of the data.

use std::path::{Path, PathBuf};

const ORDER: [&str; 17] = [
    "quantity",
    "diagnostic",
    "files",
    "section",
    "calc",
    "catalogue",
    "model",
    "project",
    "analysis",
    "checks",
    "trial",
    "record",
    "compare",
    "figures",
    "package",
    "audit",
    "cli",
];

fn rust_files(folder: &Path) -> Vec<PathBuf> {
    let mut files = Vec::new();
    for entry in std::fs::read_dir(folder).expect("a source folder") {
        let path = entry.expect("an entry").path();
        if path.is_dir() {
            files.extend(rust_files(&path));
        } else if path.extension().is_some_and(|extension| extension == "rs") {
            files.push(path);
        }
    }
    files.sort();
    files
}

/// Names that follow `crate::` in a text.
fn imports(text: &str) -> Vec<&str> {
    text.split("crate::")
        .skip(1)
        .filter_map(|rest| rest.split(|c: char| !c.is_alphanumeric() && c != '_').next())
        .collect()
}

#[test]
fn modules_import_only_what_stands_before_them() {
    let source = Path::new(env!("CARGO_MANIFEST_DIR")).join("src");
    let mut seen = 0;
    for (position, module) in ORDER.iter().enumerate() {
        for file in rust_files(&source.join(module)) {
            let text = std::fs::read(&file).expect("a source file");
            let text = String::from_utf8(text).expect("UTF-8");
            for import in imports(&text) {
                if let Some(other) = ORDER.iter().position(|name| *name == import) {
                    seen += 1;
                    assert!(other <= position, "{} imports `{import}`", file.display());
                }
            }
        }
    }
    assert!(seen > 50, "only {seen} imports seen: the test reads the wrong place");
}

#[test]
fn every_module_stands_in_the_order() {
    let lib = include_str!("../../../src/lib.rs");
    let modules: Vec<&str> =
        lib.lines().filter_map(|line| line.strip_prefix("pub mod ")?.strip_suffix(';')).collect();
    let mut sorted: Vec<&str> = ORDER.to_vec();
    sorted.sort_unstable();
    let mut listed = modules.clone();
    listed.sort_unstable();
    assert_eq!(listed, sorted);
}
