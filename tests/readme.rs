//! The README tells the truth: its commands run, its verbs and files exist.

use crate::samples::root;
use std::process::Command;

fn readme() -> String {
    std::fs::read_to_string(root().join("README.md")).unwrap()
}

#[test]
fn the_main_command_does_the_main_job() {
    let text = readme();
    let command = text.lines().find(|l| l.starts_with("cargo run")).expect("the README shows the main command");
    let mut arguments: Vec<String> = command.split(" -- ").nth(1).unwrap().split_whitespace().map(String::from).collect();
    let folder = tempfile::tempdir().unwrap();
    let at = arguments.iter().position(|a| a == "-o").unwrap() + 1;
    arguments[at] = folder.path().to_str().unwrap().to_string();
    let out = Command::new(env!("CARGO_BIN_EXE_slabwright")).args(&arguments).current_dir(root()).output().unwrap();
    assert!(out.status.success(), "{}", String::from_utf8_lossy(&out.stderr));
    assert!(std::fs::read_dir(folder.path()).unwrap().count() >= 6);
}

#[test]
fn the_test_command_is_the_one_that_ci_runs() {
    let text = readme();
    let command = text.lines().find(|l| l.starts_with("bash tests/")).expect("the README shows the test command");
    let script = command.split_whitespace().nth(1).unwrap();
    assert!(root().join(script).is_file());
    assert!(std::fs::read_to_string(root().join(".ci/run")).unwrap().contains(script));
}

#[test]
fn every_verb_is_told_and_every_told_verb_is_there() {
    let text = readme();
    let help = Command::new(env!("CARGO_BIN_EXE_slabwright")).arg("--help").output().unwrap();
    let help = String::from_utf8(help.stdout).unwrap();
    let known: Vec<&str> = help
        .lines()
        .skip_while(|l| !l.starts_with("Commands:"))
        .skip(1)
        .take_while(|l| !l.is_empty())
        .filter_map(|l| l.split_whitespace().next())
        .filter(|v| *v != "help")
        .collect();
    let told: Vec<&str> = text.lines().filter_map(|l| l.strip_prefix("slabwright ")).filter_map(|l| l.split_whitespace().next()).collect();
    assert!(known.len() >= 8);
    for verb in &known {
        assert!(told.contains(verb), "the README does not tell of `{verb}`");
    }
    for verb in &told {
        assert!(known.contains(verb), "the README tells of `{verb}`, which is not there");
    }
}

#[test]
fn every_format_is_told() {
    let text = readme();
    for format in slabwright::write::FORMATS {
        let suffix = format.files.split_whitespace().next().unwrap().trim_start_matches("DRAWING-");
        let ending = suffix.rsplit('.').next().unwrap();
        assert!(text.contains(&format!("DRAWING-{suffix}")) || text.contains(&format!("`.{ending}`")), "the README does not tell of {}", format.files);
    }
}

#[test]
fn the_picture_and_the_samples_are_there() {
    let text = readme();
    for (at, _) in text.match_indices("](") {
        let target: String = text[at + 2..].chars().take_while(|c| *c != ')').collect();
        assert!(root().join(&target).exists(), "{target} is linked and not there");
    }
}

#[test]
fn the_gallery_shows_every_sample_smallest_first() {
    let text = readme();
    let places: Vec<usize> = crate::samples::SAMPLES.iter().map(|name| text.find(&format!("](samples/pictures/{name}.png)")).expect(name)).collect();
    assert!(places.is_sorted(), "{places:?}");
    let steel = |name: &str| crate::samples::sample(name).model.total_kg();
    let masses: Vec<f64> = crate::samples::SAMPLES.iter().map(|name| steel(name)).collect();
    assert!(masses.is_sorted(), "{masses:?}");
}
