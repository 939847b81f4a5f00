//! The built program, run as a user runs it: arguments, exit status, what goes to which stream, and what stands on the disk after.

mod answers;
mod disk;

use std::io::Write;
use std::path::{Path, PathBuf};
use std::process::{Command, Stdio};

/// What a run left: exit status, standard output, standard error.
struct Run {
    status: i32,
    out: String,
    talk: String,
}

fn run_in(dir: &Path, arguments: &[&str], input: &str) -> Run {
    let mut child = Command::new(env!("CARGO_BIN_EXE_slabwright"))
        .args(arguments)
        .current_dir(dir)
        .stdin(Stdio::piped())
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .unwrap();
    // A run that does not read its input may be gone by now.
    let _ = child.stdin.take().unwrap().write_all(input.as_bytes());
    let done = child.wait_with_output().unwrap();
    let text = |bytes: Vec<u8>| String::from_utf8(bytes).unwrap();
    Run { status: done.status.code().unwrap(), out: text(done.stdout), talk: text(done.stderr) }
}

fn run(arguments: &[&str]) -> Run {
    run_in(&root(), arguments, "")
}

fn root() -> PathBuf {
    PathBuf::from(env!("CARGO_MANIFEST_DIR"))
}

const MILL: &str = "samples/mill-store.toml";
const FAULTY: &str = "tests/faults/unknown-word-kind.toml";

fn envelope(verb: &str, run: &Run) -> serde_json::Value {
    let value: serde_json::Value = serde_json::from_str(&run.out).unwrap_or_else(|e| panic!("{verb}: {e}:\n{}", run.out));
    assert_eq!(value["schema"], format!("slabwright/{verb}/1"));
    value
}

#[test]
fn a_sound_job_ends_with_0_and_its_results_on_standard_output() {
    let run = run(&["check", MILL]);
    assert_eq!((run.status, run.talk.as_str()), (0, ""));
    assert!(run.out.contains("checks pass"), "{}", run.out);
}

#[test]
fn a_faulty_job_ends_with_1_and_its_faults_on_standard_error() {
    for verb in [&["check", FAULTY][..], &["explain", FAULTY, "steel/total"]] {
        let run = run(verb);
        assert_eq!((run.status, run.out.as_str()), (1, ""), "{verb:?}");
        for part in ["unknown-word", "unknown-word-kind.toml:36:9", "kind  = \"wal\"", "^", "did you mean \"wall\"?", "1 fault."] {
            assert!(run.talk.contains(part), "{verb:?}: no {part:?} in\n{}", run.talk);
        }
    }
}

#[test]
fn a_run_that_cannot_be_understood_or_read_ends_with_2() {
    for (arguments, said) in [
        (&["chek", MILL][..], "check"),
        (&["check"], "JOB"),
        (&["check", "none.toml"], "none.toml: cannot be read"),
        (&["check", "src"], "cannot be read"),
        (&["check", MILL, "--stricter"], "--strict"),
        (&["detail", "-", "-"], "standard input is read once"),
        (&["detail", MILL, "--only", "shedule"], "did you mean schedule?"),
        (&["list", "shape"], "shapes"),
        (&["lap", "12", "C30/37", "--bond", "fair"], "poor"),
        (&["completions", "basher"], "bash"),
        (&[], "Usage"),
    ] {
        let run = run(arguments);
        assert_eq!((run.status, run.out.as_str()), (2, ""), "{arguments:?}\n{}", run.talk);
        assert!(run.talk.contains(said), "{arguments:?}: no {said:?} in\n{}", run.talk);
    }
}

#[test]
fn help_and_version_are_results() {
    for (arguments, said) in [(&["--help"][..], "detail"), (&["detail", "--help"], "--only"), (&["--version"], env!("CARGO_PKG_VERSION"))] {
        let run = run(arguments);
        assert_eq!((run.status, run.talk.as_str()), (0, ""), "{arguments:?}");
        assert!(run.out.contains(said), "{arguments:?}\n{}", run.out);
    }
}

#[test]
fn a_dash_reads_standard_input() {
    let job = std::fs::read_to_string(root().join(MILL)).unwrap();
    let piped = run_in(&root(), &["check", "-"], &job);
    assert_eq!((piped.status, piped.talk.as_str()), (0, ""));
    assert_eq!(piped.out.replace("standard input", MILL), run(&["check", MILL]).out);
    let faulty = run_in(&root(), &["check", "-"], &job.replace("\"masonry\"", "\"mason\""));
    assert_eq!(faulty.status, 1);
    assert!(faulty.talk.contains("standard input:32:11"), "{}", faulty.talk);
    assert_eq!(run_in(&root(), &["check", "-"], "").status, 1);
}

#[test]
fn results_for_programs_come_in_an_envelope() {
    let check = run(&["check", "--json", MILL]);
    let value = envelope("check", &check);
    assert_eq!((check.status, &value["ok"], &value["jobs"][0]["job"]), (0, &true.into(), &MILL.into()));
    assert!(value["jobs"][0]["checks"].as_array().unwrap().len() > 20);
    let faulty = run(&["check", "--json", FAULTY, MILL]);
    let value = envelope("check", &faulty);
    assert_eq!((faulty.status, &value["ok"]), (1, &false.into()));
    let fault = &value["jobs"][0]["faults"][0];
    assert_eq!((&fault["code"], &fault["line"], &fault["column"], &fault["wrote"]), (&"unknown-word".into(), &36.into(), &9.into(), &"kind  = \"wal\"".into()));
    assert_eq!(value["jobs"][1]["faults"].as_array().unwrap().len(), 0);
    for verb in [
        &["explain", "--json", MILL, "steel/total"][..],
        &["bend", "--json", "21", "12", "A=400", "B=150", "C=400"],
        &["lap", "--json", "12", "C30/37"],
        &["list", "--json", "shapes"],
    ] {
        let run = run(verb);
        assert_eq!((run.status, &envelope(verb[0], &run)["ok"]), (0, &true.into()), "{verb:?}");
    }
    let unknown = run(&["explain", "--json", MILL, "S1/mark:99"]);
    assert_eq!((unknown.status, &envelope("explain", &unknown)["ok"]), (2, &false.into()));
}

#[test]
fn a_failure_comes_in_an_envelope_too() {
    for verb in [&["explain", "--json", FAULTY, "steel/total"][..], &["bend", "--json", "77", "12", "A=400"], &["lap", "--json", "13", "C30/37"]] {
        assert_eq!(envelope(verb[0], &run(verb))["ok"], false, "{verb:?}");
    }
}

/// A check that fails is told; only --strict makes it the end of the run.
#[test]
fn strict_makes_a_failed_check_the_exit_status() {
    let dir = tempfile::tempdir().unwrap();
    let job = std::fs::read_to_string(root().join(MILL)).unwrap();
    std::fs::write(dir.path().join("thin.toml"), job.replace("required = 362", "required = 3000")).unwrap();
    for verb in [&["check", "thin.toml"][..], &["detail", "thin.toml"]] {
        let lenient = run_in(dir.path(), verb, "");
        assert_eq!(lenient.status, 0, "{}", lenient.talk);
        assert!(!lenient.out.contains(" 0 fail"), "{}", lenient.out);
        assert_eq!(run_in(dir.path(), &[verb, &["--strict"]].concat(), "").status, 1, "{verb:?}");
    }
}

#[test]
fn no_colour_goes_where_no_terminal_is() {
    for arguments in [&["check", FAULTY][..], &["check", MILL], &["chek"], &["--help"]] {
        let run = run(arguments);
        assert!(!run.out.contains('\u{1b}') && !run.talk.contains('\u{1b}'), "{arguments:?}");
    }
}

#[test]
fn completions_name_the_verbs() {
    for shell in ["bash", "zsh", "fish"] {
        let run = run(&["completions", shell]);
        assert_eq!((run.status, run.talk.as_str()), (0, ""));
        for verb in ["new", "check", "detail", "explain", "bend", "lap", "list"] {
            assert!(run.out.contains(verb), "{shell}: {verb}");
        }
    }
}

#[test]
fn a_format_that_is_not_named_is_told_in_sentences() {
    let talk = run(&["detail", MILL, "--only", "nothing-like-it"]).talk;
    assert!(!talk.contains("format Formats"), "{talk}");
}

/// Only a reader that has gone away is no fault; a disk that is full is one.
#[cfg(target_os = "linux")]
#[test]
fn results_that_cannot_be_written_end_with_2() {
    let full = std::fs::OpenOptions::new().write(true).open("/dev/full").unwrap();
    let status = Command::new(env!("CARGO_BIN_EXE_slabwright")).args(["check", MILL]).current_dir(root()).stdout(full).status().unwrap();
    assert_eq!(status.code(), Some(2));
}
