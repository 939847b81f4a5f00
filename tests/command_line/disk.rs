//! What stands on the disk after a run: the whole new set, or the old one untouched.

use super::{FAULTY, root, run_in};
use std::collections::BTreeMap;
use std::path::Path;

fn sample(name: &str) -> String {
    root().join("samples").join(name).to_str().unwrap().to_string()
}

/// Every file of a folder, also hidden ones, with its bytes.
fn files(dir: &Path) -> BTreeMap<String, Vec<u8>> {
    let entries = std::fs::read_dir(dir).unwrap().map(|e| e.unwrap());
    entries.map(|e| (e.file_name().into_string().unwrap(), std::fs::read(e.path()).unwrap_or_default())).collect()
}

fn names(dir: &Path) -> Vec<String> {
    files(dir).into_keys().collect()
}

const SET: [&str; 7] = [
    "H208-110-model.json",
    "H208-110-schedule.csv",
    "H208-110-schedule.pdf",
    "H208-110-set.pdf",
    "H208-110-sheet-1.svg",
    "H208-110-sheet.pdf",
    "H208-110-steel.csv",
];

#[test]
fn the_first_job_details_as_it_stands() {
    let dir = tempfile::tempdir().unwrap();
    let new = run_in(dir.path(), &["new", "first"], "");
    assert_eq!((new.status, new.out.trim()), (0, "first/job.toml"));
    let detail = run_in(dir.path(), &["detail", "first/job.toml", "-o", "out"], "");
    assert_eq!((detail.status, detail.talk.as_str()), (0, ""), "{}", detail.out);
    assert!(detail.out.contains(" 0 fail"), "{}", detail.out);
    for name in names(&dir.path().join("out")) {
        assert!(detail.out.contains(&format!("out/{name}\n")), "{name} is not named in\n{}", detail.out);
    }
    std::fs::write(dir.path().join("first/job.toml"), "mine").unwrap();
    assert_eq!(run_in(dir.path(), &["new", "first"], "").status, 2);
    assert_eq!(std::fs::read_to_string(dir.path().join("first/job.toml")).unwrap(), "mine");
    assert_eq!(run_in(dir.path(), &["new", "first", "--force"], "").status, 0);
    assert!(std::fs::read_to_string(dir.path().join("first/job.toml")).unwrap().contains("[[slab]]"));
}

#[test]
fn the_same_job_gives_the_same_bytes() {
    let dir = tempfile::tempdir().unwrap();
    let job = sample("mill-store.toml");
    for out in ["a", "b"] {
        assert_eq!(run_in(dir.path(), &["detail", &job, "-o", out], "").status, 0);
    }
    // Over its own files: no --force is needed.
    assert_eq!(run_in(dir.path(), &["detail", &job, "-o", "b"], "").status, 0);
    let (a, b) = (files(&dir.path().join("a")), files(&dir.path().join("b")));
    assert_eq!(a.keys().collect::<Vec<_>>(), SET);
    assert!(a == b, "two runs differ");
}

#[test]
fn only_writes_only_what_is_named() {
    for (only, expected) in [
        ("sheet", &["H208-110-sheet-1.svg", "H208-110-sheet.pdf"][..]),
        ("schedule-csv,model", &["H208-110-model.json", "H208-110-schedule.csv"]),
        ("steel", &["H208-110-steel.csv"]),
        ("set", &["H208-110-set.pdf"]),
    ] {
        let dir = tempfile::tempdir().unwrap();
        assert_eq!(run_in(dir.path(), &["detail", &sample("mill-store.toml"), "--only", only], "").status, 0);
        assert_eq!(names(dir.path()), expected, "{only}");
    }
}

#[test]
fn files_of_others_are_left_alone() {
    let dir = tempfile::tempdir().unwrap();
    let job = sample("mill-store.toml");
    for name in SET {
        std::fs::write(dir.path().join(name), "a letter to the client").unwrap();
        let run = run_in(dir.path(), &["detail", &job], "");
        assert_eq!((run.status, run.out.as_str()), (2, ""), "{name}");
        assert!(run.talk.contains(name) && run.talk.contains("--force"), "{}", run.talk);
        assert_eq!(files(dir.path()), BTreeMap::from([(name.to_string(), b"a letter to the client".to_vec())]), "{name}");
        std::fs::remove_file(dir.path().join(name)).unwrap();
    }
    std::fs::write(dir.path().join(SET[5]), "a letter to the client").unwrap();
    assert_eq!(run_in(dir.path(), &["detail", &job, "--force"], "").status, 0);
    assert!(std::fs::read(dir.path().join(SET[5])).unwrap().starts_with(b"%PDF"));
}

#[test]
fn a_folder_in_the_way_is_never_deleted() {
    let dir = tempfile::tempdir().unwrap();
    let folder = dir.path().join(SET[5]);
    std::fs::create_dir(&folder).unwrap();
    std::fs::write(folder.join("precious.txt"), "x").unwrap();
    for force in [&[][..], &["--force"]] {
        let run = run_in(dir.path(), &[&["detail", &sample("mill-store.toml")][..], force].concat(), "");
        assert_eq!(run.status, 2, "{force:?}");
        assert!(folder.join("precious.txt").exists(), "{force:?}: the folder is gone");
    }
}

#[test]
fn one_faulty_job_keeps_all_from_being_written() {
    let dir = tempfile::tempdir().unwrap();
    let run = run_in(dir.path(), &["detail", &sample("mill-store.toml"), root().join(FAULTY).to_str().unwrap(), "-o", "out"], "");
    assert_eq!((run.status, run.out.as_str()), (1, ""));
    assert!(names(dir.path()).is_empty(), "{:?}", names(dir.path()));
}

#[test]
fn two_jobs_of_one_drawing_number_are_refused() {
    let dir = tempfile::tempdir().unwrap();
    let job = sample("mill-store.toml");
    let run = run_in(dir.path(), &["detail", &job, &job], "");
    assert_eq!((run.status, run.out.as_str()), (2, ""));
    assert!(run.talk.contains("H208-110") && run.talk.contains("drawing number"), "{}", run.talk);
    assert!(names(dir.path()).is_empty());
    assert_eq!(run_in(dir.path(), &["detail", &job, &sample("ferry-hall.toml")], "").status, 0);
    assert_eq!(names(dir.path()).len(), 2 * SET.len());
}

#[test]
fn a_drawing_number_that_is_a_path_stays_in_the_folder() {
    let dir = tempfile::tempdir().unwrap();
    let job = std::fs::read_to_string(sample("mill-store.toml")).unwrap().replace("H208-110", "../../x");
    assert_eq!(run_in(dir.path(), &["detail", "-", "-o", "a/b/c"], &job).status, 0);
    assert_eq!((names(dir.path()), names(&dir.path().join("a/b")), names(&dir.path().join("a/b/c")).len()), (vec!["a".into()], vec!["c".into()], SET.len()));
}

#[test]
fn pages_that_a_sheet_no_longer_has_are_removed() {
    let dir = tempfile::tempdir().unwrap();
    let job = sample("mill-store.toml");
    assert_eq!(run_in(dir.path(), &["detail", &job], "").status, 0);
    let page = |n: u32| dir.path().join(format!("H208-110-sheet-{n}.svg"));
    // Two pages of an earlier run, and one that is somebody else's.
    for n in [2, 3] {
        std::fs::copy(page(1), page(n)).unwrap();
    }
    std::fs::write(page(4), "<svg>mine</svg>").unwrap();
    assert_eq!(run_in(dir.path(), &["detail", &job, "--only", "model"], "").status, 0);
    assert!(page(2).exists(), "a run that writes no sheet took a page away");
    assert_eq!(run_in(dir.path(), &["detail", &job], "").status, 0);
    assert_eq!([1, 2, 3, 4].map(|n| page(n).exists()), [true, false, false, true]);
}

#[test]
fn a_folder_that_cannot_be_written_is_told() {
    let dir = tempfile::tempdir().unwrap();
    std::fs::write(dir.path().join("plain"), "x").unwrap();
    for out in ["plain", "plain/below"] {
        let run = run_in(dir.path(), &["detail", &sample("mill-store.toml"), "-o", out], "");
        assert_eq!((run.status, run.out.as_str()), (2, ""), "{out}");
        assert!(run.talk.contains("plain"), "{}", run.talk);
    }
    assert_eq!(names(dir.path()), ["plain"]);
}

/// A limit on the size of files stands for a disk that fills up: the write fails, or the run is killed in it.
#[cfg(unix)]
#[test]
fn a_run_that_fails_in_writing_leaves_the_old_set_whole() {
    let dir = tempfile::tempdir().unwrap();
    let job = std::fs::read_to_string(sample("mill-store.toml")).unwrap();
    let write = |text: &str| std::fs::write(dir.path().join("job.toml"), text).unwrap();
    write(&job);
    assert_eq!(run_in(dir.path(), &["detail", "job.toml", "-o", "out"], "").status, 0);
    let before = files(&dir.path().join("out"));
    write(&job.replace("H10-175", "H10-150"));
    for (trap, code) in [("trap '' XFSZ; ", Some(2)), ("", None)] {
        let script = format!("{trap}ulimit -f 8; exec '{}' detail job.toml -o out", env!("CARGO_BIN_EXE_slabwright"));
        let run = std::process::Command::new("sh").args(["-c", &script]).current_dir(dir.path()).output().unwrap();
        assert_eq!(run.status.code(), code, "{}", String::from_utf8_lossy(&run.stderr));
        assert!(run.stdout.is_empty(), "files are named that were not written");
        let after: BTreeMap<_, _> = files(&dir.path().join("out")).into_iter().filter(|(name, _)| code.is_some() || !name.starts_with('.')).collect();
        assert!(after == before, "{trap}: the old set changed: {:?}", after.keys());
    }
    // The next run is not hindered by what a killed one left.
    assert_eq!(run_in(dir.path(), &["detail", "job.toml", "-o", "out"], "").status, 0);
    assert!(files(&dir.path().join("out"))[SET[1]] != before[SET[1]]);
}

#[test]
fn new_in_the_place_of_a_file_does_not_offer_force() {
    let dir = tempfile::tempdir().unwrap();
    std::fs::write(dir.path().join("plain"), "x").unwrap();
    let run = run_in(dir.path(), &["new", "plain"], "");
    assert_eq!(run.status, 2);
    assert!(!run.talk.contains("--force"), "{}", run.talk);
}

/// The path of a rule sheet counts from the job file, not from where the program is started.
#[test]
fn a_rule_sheet_of_ones_own_is_read_beside_the_job() {
    let dir = tempfile::tempdir().unwrap();
    std::fs::create_dir(dir.path().join("jobs")).unwrap();
    let job = std::fs::read_to_string(sample("mill-store.toml")).unwrap().replacen("exposure ", "curtailment = \"own.toml\"\nexposure ", 1);
    std::fs::write(dir.path().join("jobs/job.toml"), job).unwrap();
    let absent = run_in(dir.path(), &["check", "jobs/job.toml"], "");
    assert_eq!(absent.status, 1);
    assert!(absent.talk.contains("rule-sheet") && absent.talk.contains("jobs/own.toml"), "{}", absent.talk);
    std::fs::copy(root().join("templates/curtailment/one-way-50.toml"), dir.path().join("jobs/own.toml")).unwrap();
    assert_eq!(run_in(dir.path(), &["check", "jobs/job.toml"], "").status, 0);
}
