//! The verbs on whole jobs: new, check, detail.

use super::{DONE, FAILED, FAULTS, envelope, files, say, talk};
use crate::audit::{Check, Verdict};
use crate::diagnose::{Fault, line_and_column, render};
use crate::issue_set::{self, IssueSet, Outcome};
use crate::report;
use crate::write::FORMATS;
use itertools::Itertools;
use serde_json::{Value, json};
use std::io::IsTerminal;
use std::path::Path;

/// The job file that `new` writes.
const FIRST_JOB: &str = include_str!("../../templates/new-job.toml");

pub fn new(dir: &Path, force: bool) -> u8 {
    let path = dir.join("job.toml");
    let write = || {
        std::fs::create_dir_all(dir)?;
        if force {
            return std::fs::write(&path, FIRST_JOB);
        }
        let mut file = std::fs::OpenOptions::new().write(true).create_new(true).open(&path)?;
        std::io::Write::write_all(&mut file, FIRST_JOB.as_bytes())
    };
    match write() {
        Ok(()) => {
            say(&format!("{}\n", path.display()));
            talk(&format!("Next: slabwright detail {} -o out\n", path.display()));
            DONE
        }
        Err(e) if e.kind() == std::io::ErrorKind::AlreadyExists && path.exists() => {
            talk(&format!("{}: is there; --force overwrites it\n", path.display()));
            FAILED
        }
        Err(e) => {
            talk(&format!("{}: cannot be written: {e}\n", path.display()));
            FAILED
        }
    }
}

/// Reads and details one job; talks about its faults. Err holds the exit status.
pub fn open(path: &str) -> Result<(Outcome, String), u8> {
    let bytes = files::read(path).map_err(|e| {
        talk(&e);
        FAILED
    })?;
    let load = files::beside(path);
    let outcome = issue_set::detail(&bytes, &load);
    let name = if path == "-" { "standard input".to_string() } else { path.to_string() };
    Ok((outcome, name))
}

pub fn show_faults(faults: &[Fault], source: &str, name: &str) {
    if faults.is_empty() {
        return;
    }
    let colour = std::io::stderr().is_terminal() && std::env::var_os("NO_COLOR").is_none();
    talk(&render(faults, source, name, colour));
    let n = faults.len();
    talk(&format!("{name}: {n} fault{}. Nothing was written.\n", if n == 1 { "" } else { "s" }));
}

pub fn fault_json(fault: &Fault, source: &str) -> Value {
    let (line, column) = line_and_column(source, fault.start);
    let wrote: String = source.lines().nth(line - 1).unwrap_or("").chars().take(400).collect();
    json!({ "code": fault.code, "line": line, "column": column, "wrote": wrote, "message": fault.message, "rule": fault.rule, "remedy": fault.remedy })
}

/// Names of jobs that read standard input may stand once only.
fn stdin_once(jobs: &[String]) -> Result<(), u8> {
    if jobs.iter().filter(|j| *j == "-").count() > 1 {
        talk("- may stand once only: standard input is read once\n");
        return Err(FAILED);
    }
    Ok(())
}

pub fn check(jobs: &[String], strict: bool, as_json: bool) -> u8 {
    if let Err(status) = stdin_once(jobs) {
        return status;
    }
    let mut status = DONE;
    let mut entries = Vec::new();
    for path in jobs {
        let (outcome, name) = match open(path) {
            Ok(opened) => opened,
            Err(failed) => {
                status = status.max(failed);
                entries.push(json!({ "job": path, "unread": true, "faults": [], "checks": [], "reasons": [] }));
                continue;
            }
        };
        let mut set = outcome.set;
        // The sheet is drawn too, so that its marks are reconciled with the schedule.
        if let Some(set) = &mut set
            && let Err(fault) = set.documents(&["sheet-svg".into()])
        {
            talk(&format!("{name}: {fault}\n"));
            status = FAILED;
        }
        let checks = set.as_ref().map(IssueSet::all_checks).unwrap_or_default();
        let failed = checks.iter().any(|c| c.verdict == Verdict::Fail);
        if set.is_none() || strict && failed {
            status = status.max(FAULTS);
        }
        if as_json {
            let faults: Vec<Value> = outcome.faults.iter().map(|f| fault_json(f, &outcome.source)).collect();
            let checks: Vec<Value> = checks.iter().map(report::model::check).collect();
            let reasons: Vec<Value> =
                set.iter().flat_map(|s| &s.model.slabs).flat_map(|s| &s.reasons).map(|r| json!({ "at": r.address, "text": r.text })).collect();
            entries.push(json!({ "job": name, "faults": faults, "checks": checks, "reasons": reasons }));
            continue;
        }
        show_faults(&outcome.faults, &outcome.source, &name);
        if let Some(set) = &set {
            say(&format!("{name}: {}\n\n", summary(&checks)));
            say(&report::check_table(&checks).text());
            say(&format!("\n{}", reasons(set)));
            open_talk(&checks);
        }
    }
    if as_json {
        envelope("check", status == DONE, json!({ "jobs": entries }));
    }
    status
}

fn summary(checks: &[Check]) -> String {
    let tally = report::tally(checks);
    format!("{} checks pass, {} warn, {} fail", tally.pass, tally.warn, tally.fail)
}

fn reasons(set: &IssueSet) -> String {
    set.model.slabs.iter().flat_map(|s| &s.reasons).map(|r| format!("{}: {}\n", r.address, r.text)).collect()
}

/// The checks that did not pass, as a short table.
fn open_talk(checks: &[Check]) {
    let table = report::open_checks(checks);
    if !table.rows.is_empty() {
        say(&format!("\n{}", table.text()));
    }
}

pub fn detail(jobs: &[String], folder: &Path, only: &[String], strict: bool, force: bool) -> u8 {
    if let Err(status) = stdin_once(jobs) {
        return status;
    }
    for key in only {
        if !FORMATS.iter().any(|f| f.is_named(key)) {
            let near = crate::read::nearest(key, FORMATS.iter().flat_map(|f| [f.key, f.group]));
            let hint = near.map_or(".".to_string(), |n| format!("; did you mean {n}?"));
            talk(&format!("--only {key}: no such format{hint} Formats: {}\n", FORMATS.iter().flat_map(|f| [f.group, f.key]).unique().join(", ")));
            return FAILED;
        }
    }
    let mut status = DONE;
    let mut sets = Vec::new();
    for path in jobs {
        match open(path) {
            Ok((outcome, name)) => {
                show_faults(&outcome.faults, &outcome.source, &name);
                match outcome.set {
                    Some(set) => sets.push((name, set)),
                    None => status = status.max(FAULTS),
                }
            }
            Err(failed) => status = status.max(failed),
        }
    }
    if status != DONE {
        return status;
    }
    let mut all = Vec::new();
    for (name, set) in &mut sets {
        match set.documents(only) {
            Ok(files) => all.extend(files),
            Err(fault) => {
                talk(&format!("{name}: {fault}\n"));
                return FAILED;
            }
        }
    }
    if let Some(twice) = all.iter().map(|f| f.name.as_str()).duplicates().next() {
        talk(&format!("two jobs would both write {twice}; give each its own drawing number. Nothing was written.\n"));
        return FAILED;
    }
    if let Err(fault) = files::write_all(folder, &all, force) {
        talk(&fault);
        return FAILED;
    }
    for file in &all {
        say(&format!("{}\n", folder.join(&file.name).display()));
    }
    for (name, set) in &sets {
        let checks = set.all_checks();
        say(&format!("\n{name}: {}\n", summary(&checks)));
        open_talk(&checks);
        say(&format!("\n{}", report::steel::summary(&set.model).text()));
        if strict && checks.iter().any(|c| c.verdict == Verdict::Fail) {
            status = FAULTS;
        }
    }
    status
}
