//! A module imports only from floors below its own: the imports of every source file are read.

use std::collections::BTreeSet;
use std::path::{Path, PathBuf};

/// From the top floor down. The primitives at the bottom may import one another.
const FLOORS: &[&[&str]] = &[
    &["cli"],
    &["issue_set"],
    &["draw", "write"],
    &["audit", "report"],
    &["place"],
    &["plan"],
    &["job", "rules"],
    &["read", "steel"],
    &["tables"],
    &["base", "trace", "diagnose", "finding", "scene", "table"],
];

fn floor(module: &str) -> Option<usize> {
    FLOORS.iter().position(|f| f.contains(&module))
}

fn files(dir: &Path, found: &mut Vec<PathBuf>) {
    for entry in std::fs::read_dir(dir).unwrap() {
        let path = entry.unwrap().path();
        if path.is_dir() {
            files(&path, found);
        } else if path.extension().is_some_and(|e| e == "rs") {
            found.push(path);
        }
    }
}

/// The text without comments: `//` to the end of its line, where it stands outside a string.
fn code(text: &str) -> String {
    let uncommented = |line: &str| {
        let (mut is_text, mut before) = (false, ' ');
        let mut end = line.len();
        for (i, c) in line.char_indices() {
            if c == '"' && before != '\\' {
                is_text = !is_text;
            }
            if !is_text && line[i..].starts_with("//") {
                end = i;
                break;
            }
            before = c;
        }
        line[..end].to_string()
    };
    text.lines().map(uncommented).collect::<Vec<_>>().join("\n")
}

/// Top-level modules that a text names after `crate::`, or after `super::` in a file of that top level.
fn imports(text: &str, from_super: bool) -> BTreeSet<String> {
    let text = code(text);
    let mut found = BTreeSet::new();
    let roots = ["crate::", "super::"];
    for root in &roots[..if from_super { 2 } else { 1 }] {
        for (at, _) in text.match_indices(root) {
            let before = text[..at].chars().next_back();
            if before.is_some_and(|c| c.is_alphanumeric() || c == '_' || c == ':') {
                continue;
            }
            found.extend(first_names(&text[at + root.len()..]));
        }
    }
    found
}

/// The first names of a path, or of every path of a group in braces.
fn first_names(rest: &str) -> Vec<String> {
    let name = |text: &str| text.trim_start().chars().take_while(|c| c.is_alphanumeric() || *c == '_').collect::<String>();
    let Some(group) = rest.strip_prefix('{') else { return vec![name(rest)] };
    let (mut depth, mut names, mut from) = (0, Vec::new(), 0);
    for (i, c) in group.char_indices() {
        match c {
            '{' => depth += 1,
            '}' if depth == 0 => {
                names.push(name(&group[from..i]));
                break;
            }
            '}' => depth -= 1,
            ',' if depth == 0 => {
                names.push(name(&group[from..i]));
                from = i + 1;
            }
            _ => {}
        }
    }
    names.retain(|n| !n.is_empty());
    names
}

/// The top-level module of a source file; none for the roots `lib.rs` and `main.rs`.
fn module(source: &Path, file: &Path) -> Option<String> {
    let first = file.strip_prefix(source).unwrap().components().next().unwrap().as_os_str().to_string_lossy().into_owned();
    let name = first.strip_suffix(".rs").unwrap_or(&first).to_string();
    (name != "lib" && name != "main").then_some(name)
}

/// What an import breaks, if it does.
fn breach(module: &str, import: &str) -> Option<String> {
    if module == import {
        return None;
    }
    let (own, other) = (floor(module)?, floor(import));
    let is_primitive = own == FLOORS.len() - 1;
    match other {
        None => Some(format!("{module} imports {import}, which has no floor")),
        Some(other) if other > own || is_primitive && other == own => None,
        Some(_) => Some(format!("{module} imports {import}, which is not below it")),
    }
}

#[test]
fn a_module_imports_only_from_floors_below_it() {
    let source = Path::new(env!("CARGO_MANIFEST_DIR")).join("src");
    let mut all = Vec::new();
    files(&source, &mut all);
    let (mut broken, mut seen) = (Vec::new(), 0);
    for file in all {
        let Some(module) = module(&source, &file) else { continue };
        assert!(floor(&module).is_some(), "{module} has no floor");
        let is_top = file.parent() == Some(source.as_path());
        let text = std::fs::read_to_string(&file).unwrap();
        for import in imports(&text, is_top) {
            seen += 1;
            broken.extend(breach(&module, &import).map(|b| format!("{}: {b}", file.strip_prefix(&source).unwrap().display())));
        }
    }
    assert!(seen > 100, "only {seen} imports were read");
    assert!(broken.is_empty(), "{broken:#?}");
}

#[test]
fn every_floor_has_its_modules() {
    let source = Path::new(env!("CARGO_MANIFEST_DIR")).join("src");
    for name in FLOORS.iter().flat_map(|f| f.iter()) {
        assert!(source.join(format!("{name}.rs")).is_file(), "{name}");
    }
}

#[test]
fn imports_are_read_in_every_form() {
    let text = "use crate::{draw::sheet, plan};\nuse crate::base::{mm, up}; // crate::cli\nlet a = \"http://x\"; let b = crate::rules::{self};";
    let found: Vec<String> = imports(text, false).into_iter().collect();
    assert_eq!(found, ["base", "draw", "plan", "rules"]);
    assert_eq!(imports("use super::issue_set::detail;", true).into_iter().collect::<Vec<_>>(), ["issue_set"]);
    assert!(imports("use super::Work;", false).is_empty());
}

#[test]
fn upward_and_sideways_imports_are_breaches() {
    for (module, import) in
        [("plan", "place"), ("audit", "report"), ("draw", "write"), ("rules", "job"), ("base", "tables"), ("write", "cli"), ("job", "unknown")]
    {
        assert!(breach(module, import).is_some(), "{module} {import}");
    }
    for (module, import) in [("audit", "plan"), ("base", "trace"), ("cli", "issue_set"), ("plan", "plan")] {
        assert!(breach(module, import).is_none(), "{module} {import}");
    }
}
