//! The house in order: files say what they are for, nothing reaches backwards, and DEVELOPERS.md names what is there.

use std::collections::BTreeSet;
use std::fs;
use std::path::{Path, PathBuf};

fn root() -> &'static Path {
    Path::new(env!("CARGO_MANIFEST_DIR"))
}

/// Every Rust file below a folder, with its text.
fn rust_files(folder: &str) -> Vec<(PathBuf, String)> {
    fn walk(folder: &Path, files: &mut Vec<(PathBuf, String)>) {
        for entry in fs::read_dir(folder).unwrap().map(Result::unwrap) {
            let path = entry.path();
            if path.is_dir() {
                walk(&path, files);
            } else if path.extension().is_some_and(|e| e == "rs") {
                let text = fs::read_to_string(&path).unwrap();
                files.push((path, text));
            }
        }
    }
    let mut files = Vec::new();
    walk(&root().join(folder), &mut files);
    assert!(!files.is_empty(), "{folder} holds no Rust file");
    files
}

fn developers() -> String {
    fs::read_to_string(root().join("DEVELOPERS.md")).unwrap()
}

/// A line without its comment.
fn code(line: &str) -> &str {
    line.split("//").next().unwrap_or("")
}

#[test]
fn every_file_says_first_what_it_is_for() {
    for (path, text) in rust_files("src").into_iter().chain(rust_files("tests")) {
        let first = text.lines().next().unwrap_or("");
        let said = first.strip_prefix("//! ").unwrap_or("");
        assert!(said.len() > 10, "{} begins with: {first}", path.display());
    }
}

/// What a folder may not use of the crate: who stands before it in the way of the data knows nothing of who comes after.
const NOT_OF: &[(&str, &[&str])] = &[
    (
        "src/reading",
        &[
            "sky",
            "house",
            "reduction",
            "rules",
            "slips",
            "output",
            "run",
            "cli",
        ],
    ),
    (
        "src/sheet",
        &[
            "sky",
            "reading",
            "house",
            "reduction",
            "rules",
            "slips",
            "output",
            "run",
            "cli",
        ],
    ),
    ("src/reduction", &["rules", "slips", "output", "run", "cli"]),
    (
        "src/house",
        &["reduction", "rules", "slips", "output", "run", "cli"],
    ),
    ("src/rules", &["output", "run", "cli"]),
    ("src/slips", &["output", "run", "cli"]),
    ("src/output", &["cli"]),
];

#[test]
fn nothing_reaches_backwards() {
    for (folder, forbidden) in NOT_OF {
        for (path, text) in rust_files(folder) {
            for (number, line) in text.lines().enumerate() {
                for name in *forbidden {
                    let reaches =
                        code(line)
                            .match_indices(&format!("crate::{name}"))
                            .any(|(at, found)| {
                                let next = code(line)[at + found.len()..].chars().next();
                                !next.is_some_and(|c| c.is_alphanumeric() || c == '_')
                            });
                    assert!(!reaches, "{}:{} uses {name}", path.display(), number + 1);
                }
            }
        }
    }
}

#[test]
fn the_sky_stands_alone_and_has_never_heard_of_text() {
    for (path, text) in rust_files("src/sky") {
        for (number, line) in text.lines().enumerate() {
            let place = format!("{}:{}", path.display(), number + 1);
            for (at, word) in code(line).match_indices("crate::") {
                let rest = &code(line)[at + word.len()..];
                assert!(rest.starts_with("sky"), "{place} leaves the sky: {line}");
            }
            for library in ["nom::", "miette", "serde", "crate::span"] {
                assert!(!code(line).contains(library), "{place} knows {library}");
            }
        }
    }
}

#[test]
fn unsafe_code_is_forbidden() {
    let lib = fs::read_to_string(root().join("src/lib.rs")).unwrap();
    assert!(lib.contains("#![forbid(unsafe_code)]"));
}

#[test]
fn every_path_that_developers_md_names_exists() {
    let text = developers();
    let mut count = 0;
    for word in text.split('`').skip(1).step_by(2) {
        let is_path = word.contains('/') || word.ends_with(".md") || word.ends_with(".toml");
        let plain = !word.contains(|c: char| c.is_whitespace() || "<>*:{}|…$".contains(c));
        if !is_path || !plain || word.starts_with("../") || word.starts_with('/') {
            continue;
        }
        count += 1;
        assert!(root().join(word).exists(), "DEVELOPERS.md names {word}");
    }
    assert!(count >= 20, "only {count} paths found");
}

#[test]
fn every_folder_of_src_has_its_paragraph() {
    let text = developers();
    for entry in fs::read_dir(root().join("src")).unwrap() {
        let entry = entry.unwrap();
        if entry.path().is_dir() {
            let name = entry.file_name().into_string().unwrap();
            let mentioned = text.contains(&format!("**`src/{name}/`**"));
            assert!(mentioned, "DEVELOPERS.md has no paragraph on src/{name}/");
        }
    }
}

#[test]
fn the_table_of_dependencies_is_that_of_cargo_toml() {
    let manifest = fs::read_to_string(root().join("Cargo.toml")).unwrap();
    let (mut section, mut used) = ("", BTreeSet::new());
    for line in manifest.lines() {
        if line.starts_with('[') {
            section = line.trim_matches(['[', ']']);
        } else if section.ends_with("dependencies")
            && let Some((name, _)) = line.split_once('=')
        {
            used.insert(name.trim().to_owned());
        }
    }
    let text = developers();
    let table = text.split("## Dependencies").nth(1).expect("a section");
    let table = table.split("\n## ").next().unwrap();
    let named: BTreeSet<String> = table
        .lines()
        .filter_map(|line| line.strip_prefix("| `")?.split('`').next())
        .map(str::to_owned)
        .collect();
    assert_eq!(named, used, "left: DEVELOPERS.md, right: Cargo.toml");
}

#[test]
fn the_rules_of_the_table_are_the_files_of_the_folder() {
    let table: BTreeSet<String> = colure::rules::TABLE
        .iter()
        .map(|rule| rule.name.replace('-', "_") + ".rs")
        .collect();
    let folder: BTreeSet<String> = fs::read_dir(root().join("src/rules"))
        .unwrap()
        .map(|e| e.unwrap().file_name().into_string().unwrap())
        .filter(|name| name.ends_with(".rs") && name != "mod.rs")
        .collect();
    assert_eq!(table, folder);
}

/// Examples are invented; mail goes nowhere. Source: RFC 2606, section 2 (the top-level domain `.example`).
#[test]
fn addresses_in_the_examples_are_reserved_ones() {
    let mut files = vec![
        root().join("examples/colure.yaml"),
        root().join("README.md"),
    ];
    for entry in fs::read_dir(root().join("examples/inbox")).unwrap() {
        files.push(entry.unwrap().path());
    }
    let mut count = 0;
    for file in files {
        let text = String::from_utf8_lossy(&fs::read(&file).unwrap()).into_owned();
        for word in text.split(|c: char| c.is_whitespace() || "<>,;{}()`".contains(c)) {
            if word.contains('@') && word.contains('.') {
                count += 1;
                let ends = word.trim_end_matches(['.', '"']).ends_with(".example");
                assert!(ends, "{}: {word}", file.display());
            }
        }
    }
    assert!(count >= 9, "only {count} addresses found");
}
