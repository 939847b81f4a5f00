//! Code quantities worked out by a library at the time of the test: structuralcodes (fib), written for version 0.7.2.
//! The Python interpreter that has it is named by the environment variable SLABWRIGHT_PYTHON; without the variable nothing is compared.

use slabwright::rules::anchorage;
use std::process::{Command, Stdio};

const SCRIPT: &str = include_str!("structuralcodes_values.py");
const VARIABLE: &str = "SLABWRIGHT_PYTHON";

/// What the script prints. Only an unset variable skips: once it is set, an interpreter or library that does not work is a failure.
fn printed(python: &std::ffi::OsStr) -> String {
    let child = Command::new(python).args(["-c", SCRIPT]).stdin(Stdio::null()).output();
    let output = child.unwrap_or_else(|e| panic!("{VARIABLE} names {python:?}, which does not start: {e}"));
    assert!(output.status.success(), "{python:?} failed: {}", String::from_utf8_lossy(&output.stderr));
    String::from_utf8(output.stdout).unwrap()
}

#[test]
fn strengths_are_those_of_a_living_library() {
    let Some(python) = std::env::var_os(VARIABLE) else {
        eprintln!("skipped: {VARIABLE} is not set");
        return;
    };
    let text = printed(&python);
    let mut reader = csv::Reader::from_reader(text.as_bytes());
    let mut compared = 0;
    for record in reader.records() {
        let record = record.unwrap();
        if &record[0] == "version" {
            eprintln!("structuralcodes {}", &record[2]);
            continue;
        }
        let (input, value): (f64, f64) = (record[1].parse().unwrap(), record[2].parse().unwrap());
        let ours = match &record[0] {
            "fctm" => anchorage::fctm(input),
            "fctk_5" => anchorage::fctk_005(input),
            "fctd" => anchorage::fctd(input),
            "fyd" => anchorage::fyd(input),
            other => panic!("no quantity {other} of ours"),
        };
        assert!((ours / value - 1.0).abs() < 1e-6, "{} of {input}: ours {ours}, library {value}", &record[0]);
        compared += 1;
    }
    // C20 to C50 in halves, three quantities each, and five grades of steel: nothing printed is nothing compared.
    assert_eq!(compared, 61 * 3 + 5);
}
