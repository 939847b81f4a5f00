//! Faulty job files: one fault a file, each found at its place and told so that it can be put right.

use slabwright::diagnose::{Fault, line_and_column, render};
use slabwright::issue_set;
use std::collections::BTreeSet;
use std::path::{Path, PathBuf};

/// Files whose first fault draws others after it, or is told of the wrong value: each has a test of its own below.
const APART: [&str; 3] = ["cascade-", "blame-", "several-"];

/// Codes that no file of a sensible size or encoding shows; the hostile tests raise them.
const ELSEWHERE: [&str; 2] = ["encoding", "too-large"];

struct Case {
    name: String,
    source: String,
    code: String,
    line: usize,
}

fn folder() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/faults")
}

fn all() -> Vec<Case> {
    let mut paths: Vec<PathBuf> =
        std::fs::read_dir(folder()).unwrap().map(|e| e.unwrap().path()).filter(|p| p.extension().is_some_and(|e| e == "toml")).collect();
    paths.sort();
    paths.iter().map(|p| case(p)).collect()
}

fn case(path: &Path) -> Case {
    let source = std::fs::read_to_string(path).unwrap();
    let name = path.file_stem().unwrap().to_str().unwrap().to_string();
    let head = source.lines().next().unwrap().strip_prefix("# expect: ").unwrap_or_else(|| panic!("{name}: no `# expect: CODE LINE`"));
    let (code, line) = head.split_once(' ').unwrap();
    let (code, line) = (code.to_string(), line.parse().unwrap());
    Case { name, source, code, line }
}

fn named(name: &str) -> Case {
    case(&folder().join(format!("{name}.toml")))
}

fn alone() -> Vec<Case> {
    all().into_iter().filter(|c| !APART.iter().any(|a| c.name.starts_with(a))).collect()
}

/// The faults of a case; a rule sheet it names is not there.
fn faults(case: &Case) -> Vec<Fault> {
    let outcome = issue_set::detail(case.source.as_bytes(), &|_| Err("it is not there".into()));
    assert!(outcome.set.is_none(), "{}: a job in spite of its fault", case.name);
    outcome.faults
}

fn line_of(case: &Case, fault: &Fault) -> usize {
    line_and_column(&case.source, fault.start).0
}

fn told(case: &Case) -> String {
    render(&faults(case), &case.source, "job.toml", false)
}

#[test]
fn each_file_gives_its_one_fault_at_its_line() {
    let cases = alone();
    assert!(cases.len() >= 60, "only {} faulty files", cases.len());
    for case in &cases {
        let found: Vec<(String, usize)> = faults(case).iter().map(|f| (f.code.to_string(), line_of(case, f))).collect();
        assert_eq!(found, [(case.code.clone(), case.line)], "{}", case.name);
    }
}

#[test]
fn each_fault_is_told_with_place_line_caret_rule_and_remedy() {
    for case in alone() {
        let found = faults(&case);
        let text = told(&case);
        let (line, column) = line_and_column(&case.source, found[0].start);
        let wrote = case.source.lines().nth(case.line - 1).unwrap().trim();
        for part in [format!("job.toml:{line}:{column}"), wrote.to_string(), "^".into(), "rule: ".into(), "help: ".into(), format!("[{}]", case.code)] {
            assert!(text.contains(&part), "{}: {part:?} is not told in:\n{text}", case.name);
        }
        assert!(!found[0].rule.is_empty() && !found[0].remedy.is_empty(), "{}", case.name);
        assert!(!text.contains('\u{1b}'), "{}: colour in plain text", case.name);
    }
}

/// The caret stands under a value or key of the fault's line, not at its far end or before it.
#[test]
fn the_place_of_a_fault_lies_within_its_line() {
    for case in alone() {
        for fault in faults(&case) {
            let (line, column) = line_and_column(&case.source, fault.start);
            let wrote = case.source.lines().nth(line - 1).unwrap();
            assert!(column <= wrote.chars().count() + 1, "{}: column {column} of {wrote:?}", case.name);
            assert!(case.source.is_char_boundary(fault.start) && fault.start <= fault.end && fault.end <= case.source.len(), "{}", case.name);
        }
    }
}

/// A faulty file less its fault is a job: without this, a second hidden fault could be what is found.
#[test]
fn the_file_behind_the_faults_is_sound() {
    let sound = named("bar-size").source.replace("H14-200", "H12-200");
    let outcome = issue_set::detail(sound.as_bytes(), &|_| Err("none".into()));
    assert!(outcome.faults.is_empty() && outcome.set.is_some());
}

#[test]
fn every_fault_code_of_the_program_has_a_file() {
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).join("src");
    let mut sources = vec![root.join("read.rs"), root.join("job.rs")];
    sources.extend(std::fs::read_dir(root.join("job")).unwrap().map(|e| e.unwrap().path()));
    let mut codes = BTreeSet::new();
    for path in sources {
        let text = std::fs::read_to_string(&path).unwrap();
        let after = text.split("Fault::new(").skip(1).filter_map(|rest| rest.trim_start().strip_prefix('"'));
        codes.extend(after.map(|rest| rest.split('"').next().unwrap().to_string()));
    }
    assert!(codes.len() >= 30, "only {codes:?} were found in the source");
    let shown: BTreeSet<String> = alone().into_iter().map(|c| c.code).chain(ELSEWHERE.map(String::from)).collect();
    let without: Vec<&String> = codes.difference(&shown).collect();
    assert!(without.is_empty(), "no faulty file shows {without:?}");
    let strange: Vec<&String> = shown.difference(&codes).collect();
    assert!(strange.is_empty(), "the program has no such codes: {strange:?}");
}

#[test]
fn several_faults_are_told_at_once_in_order_of_place() {
    let case = named("several-at-once");
    let found: Vec<(&str, usize)> = faults(&case).iter().map(|f| (f.code, line_of(&case, f))).collect();
    let expected = [
        ("empty-text", 7),
        ("revision", 9),
        ("unknown-word", 13),
        ("out-of-range", 18),
        ("unknown-key", 19),
        ("wrong-type", 21),
        ("bar-size", 23),
        ("not-a-number", 28),
        ("bar-form", 32),
        ("missing-key", 34),
        ("unknown-word", 36),
    ];
    assert_eq!(found, expected);
    let text = told(&case);
    let places: Vec<usize> = expected.iter().map(|(_, line)| text.find(&format!("job.toml:{line}:")).unwrap()).collect();
    assert!(places.is_sorted(), "told out of order:\n{text}");
}

#[test]
fn a_misspelt_name_gets_the_nearest_known() {
    for (file, near) in [
        ("unknown-key-in-slab", "did you mean `thickness`?"),
        ("unknown-key-capital", "did you mean `exposure`?"),
        ("unknown-word-concrete", "did you mean \"C30/37\"?"),
        ("unknown-word-kind", "did you mean \"wall\"?"),
        ("unknown-word-edge", "did you mean \"wall\"?"),
        ("rule-sheet-unknown", "did you mean \"one-way-50\"?"),
        ("bar-size", "nearest sizes: 12 and 16"),
        ("bar-size-huge", "nearest sizes: 32 and 40"),
    ] {
        let text = told(&named(file));
        assert!(text.contains(near), "{file}: {near:?} is not in\n{text}");
    }
    assert!(!told(&named("unknown-key-extra")).contains("did you mean"), "a far name was suggested");
}

#[test]
fn a_bar_fault_points_into_the_text_of_the_bars() {
    for (file, wrong) in [("bar-size", "14"), ("bar-letter", "T"), ("bar-spacing-too-close", "30"), ("bar-spacing-zero", "0")] {
        let case = named(file);
        let fault = faults(&case).remove(0);
        assert_eq!(&case.source[fault.start..fault.end], wrong, "{file}");
    }
}

#[test]
fn the_place_is_printed_once() {
    for case in alone() {
        let text = told(&case);
        let fault = &faults(&case)[0];
        let (line, column) = line_and_column(&case.source, fault.start);
        assert!(text.lines().any(|l| l.ends_with(&format!("job.toml:{line}:{column}"))), "{}:\n{text}", case.name);
        assert!(!text.contains(&format!("{line}:{column}:{line}")), "{}:\n{text}", case.name);
    }
}

#[test]
fn a_fault_draws_no_others_after_it() {
    for case in all().iter().filter(|c| c.name.starts_with("cascade-")) {
        let found: Vec<(String, usize)> = faults(case).iter().map(|f| (f.code.to_string(), line_of(case, f))).collect();
        assert_eq!(found, [(case.code.clone(), case.line)], "{}", case.name);
    }
}

#[test]
fn the_value_that_is_wrong_is_the_one_blamed() {
    for case in all().iter().filter(|c| c.name.starts_with("blame-")) {
        let found: Vec<(String, usize)> = faults(case).iter().map(|f| (f.code.to_string(), line_of(case, f))).collect();
        assert_eq!(found, [(case.code.clone(), case.line)], "{}", case.name);
    }
}

#[test]
fn the_remedy_for_a_missing_table_is_its_heading() {
    assert!(told(&named("missing-table")).contains("[basis]"));
}
