//! The shipped samples: their outputs are up to date, every one details, and readers nobody here wrote open what comes out.
//! `SLABWRIGHT_BLESS=1 cargo test samples` writes the outputs anew.

use slabwright::issue_set::{self, IssueSet};
use slabwright::write::Artifact;
use std::path::{Path, PathBuf};
use std::process::Command;

/// By their steel, smallest first.
pub const SAMPLES: [&str; 6] = ["gate-landing", "mill-store", "orchard-annexe", "ferry-hall", "harbour-shed", "rope-walk"];

pub fn root() -> PathBuf {
    PathBuf::from(env!("CARGO_MANIFEST_DIR"))
}

pub fn sample(name: &str) -> IssueSet {
    let bytes = std::fs::read(root().join("samples").join(format!("{name}.toml"))).unwrap();
    issue_set::detail(&bytes, &|_| Err("none".into())).set.unwrap()
}

pub fn documents(name: &str) -> Vec<Artifact> {
    sample(name).documents(&[]).unwrap()
}

#[test]
fn outputs_of_the_samples_are_up_to_date() {
    let bless = std::env::var_os("SLABWRIGHT_BLESS").is_some();
    for name in SAMPLES {
        let folder = root().join("samples").join(name);
        let documents = documents(name);
        if bless {
            std::fs::create_dir_all(&folder).unwrap();
            for old in std::fs::read_dir(&folder).unwrap() {
                std::fs::remove_file(old.unwrap().path()).unwrap();
            }
            for file in &documents {
                std::fs::write(folder.join(&file.name), &file.bytes).unwrap();
            }
        }
        let mut there: Vec<String> = std::fs::read_dir(&folder).unwrap().map(|e| e.unwrap().file_name().into_string().unwrap()).collect();
        let mut made: Vec<String> = documents.iter().map(|f| f.name.clone()).collect();
        there.sort();
        made.sort();
        assert_eq!(there, made, "{name}: the files of the set");
        for file in &documents {
            let old = std::fs::read(folder.join(&file.name)).unwrap();
            assert!(old == file.bytes, "samples/{name}/{} is not up to date: look at the change, then write it anew with SLABWRIGHT_BLESS=1", file.name);
        }
    }
}

#[test]
fn samples_fail_only_what_their_own_design_fails() {
    for name in SAMPLES {
        let mut set = sample(name);
        set.documents(&["sheet".into()]).unwrap();
        let failed: Vec<String> = set.all_checks().into_iter().filter(|c| c.verdict == slabwright::audit::Verdict::Fail).map(|c| c.code.to_string()).collect();
        // The rule sheets ask for three spans or more; two samples have fewer, and say so.
        assert!(failed.iter().all(|c| c == "rule-span-count"), "{name}: {failed:?}");
    }
}

/// Whether the tools of the test command are there; the command sets the variable, so that none is passed over quietly.
pub fn tools() -> bool {
    let there = std::env::var_os("SLABWRIGHT_TOOLS").is_some();
    if !there {
        eprintln!("passed over: run tests/all.sh to have the outside readers");
    }
    there
}

/// The Python of the test command, with its libraries.
pub fn python() -> String {
    std::env::var("SLABWRIGHT_PYTHON").expect("the test command sets SLABWRIGHT_PYTHON")
}

pub fn run(program: &str, arguments: &[&str]) -> String {
    let out = Command::new(program).args(arguments).output().unwrap_or_else(|e| panic!("{program}: {e}"));
    assert!(out.status.success(), "{program} {arguments:?}: {}", String::from_utf8_lossy(&out.stderr));
    String::from_utf8_lossy(&out.stdout).into_owned()
}

pub fn written(name: &str, folder: &Path) -> Vec<PathBuf> {
    let write = |file: Artifact| {
        let path = folder.join(&file.name);
        std::fs::write(&path, &file.bytes).unwrap();
        path
    };
    documents(name).into_iter().map(write).collect()
}

#[test]
fn svg_sheets_are_well_formed_and_in_millimetres() {
    if !tools() {
        return;
    }
    let folder = tempfile::tempdir().unwrap();
    for path in written("ferry-hall", folder.path()).iter().filter(|p| p.extension().is_some_and(|e| e == "svg")) {
        run("xmllint", &["--noout", path.to_str().unwrap()]);
        let text = std::fs::read_to_string(path).unwrap();
        assert!(text.contains("width=\"841mm\"") && text.contains("viewBox=\"0 0 841 594\""));
        let ids: Vec<&str> = text.split(" id=\"").skip(1).map(|rest| rest.split('"').next().unwrap()).collect();
        assert_eq!(ids.len(), ids.iter().collect::<std::collections::BTreeSet<_>>().len(), "ids are unique");
        for (_, bar) in sample("ferry-hall").model.bars() {
            assert!(text.contains(&format!("data-mark=\"{}\" data-role=\"{}\"", bar.mark, bar.role.name())), "mark {}", bar.mark);
        }
        assert!(text.contains("data-mark=\"01\"") && text.contains("<title id=\"title\">"));
        let png = folder.path().join("sheet.png");
        run("rsvg-convert", &["-w", "800", "-o", png.to_str().unwrap(), path.to_str().unwrap()]);
        assert!(std::fs::metadata(png).unwrap().len() > 10_000);
    }
}

#[test]
fn the_model_obeys_its_json_schema() {
    if !tools() {
        return;
    }
    let folder = tempfile::tempdir().unwrap();
    let script = "import json,sys,jsonschema\nschema=json.load(open(sys.argv[1]))\njsonschema.Draft202012Validator.check_schema(schema)\nfor p in sys.argv[2:]:\n    jsonschema.validate(json.load(open(p)),schema)\nprint('ok')";
    let schema = root().join("templates/model.schema.json");
    let mut arguments = vec!["-c".to_string(), script.to_string(), schema.to_str().unwrap().to_string()];
    for name in SAMPLES {
        let files = written(name, folder.path());
        arguments.extend(files.iter().filter(|p| p.extension().is_some_and(|e| e == "json")).map(|p| p.to_str().unwrap().to_string()));
    }
    let arguments: Vec<&str> = arguments.iter().map(String::as_str).collect();
    assert_eq!(run(&python(), &arguments).trim(), "ok");
}
