//! Text of the job that would do harm in a file name, a spreadsheet, a picture or a data file.

use super::{MILL, xml::well_formed};
use slabwright::issue_set;
use slabwright::write::Artifact;

/// The rule sheet that the program ships.
const SHEET: &str = include_str!("../../templates/curtailment/one-way-50.toml");

fn documents(source: &str) -> Vec<Artifact> {
    let outcome = issue_set::detail(source.as_bytes(), &|_| Err("none".into()));
    let told = slabwright::diagnose::render(&outcome.faults, &outcome.source, "job.toml", false);
    outcome.set.unwrap_or_else(|| panic!("refused:\n{told}")).documents(&[]).unwrap()
}

fn ending<'a>(files: &'a [Artifact], end: &str) -> Vec<&'a str> {
    files.iter().filter(|f| f.name.ends_with(end)).map(|f| std::str::from_utf8(&f.bytes).unwrap()).collect()
}

/// The sample with `text` in every place that takes free text, as far as its field is long.
fn full_of(text: &str) -> String {
    let mut source = String::new();
    for line in MILL.lines() {
        let key = line.split('=').next().unwrap().trim();
        let most = match key {
            "mark" => 12,
            "grid" => 7,
            "number" => 20,
            "exposure" => 30,
            "drawing" => 40,
            "project" | "title" | "client" | "site" => 60,
            _ => 0,
        };
        if most == 0 {
            source.push_str(line);
        } else {
            // A grid keeps its own name behind the text: no two may be alike.
            let own = if key == "grid" { line.split('"').nth(1).unwrap() } else { "" };
            let cut: String = text.chars().cycle().take(most).collect();
            let quoted = cut.replace('\\', "\\\\").replace('"', "\\\"");
            source.push_str(&format!("{key} = \"{quoted}{own}\""));
        }
        source.push('\n');
    }
    source.replacen("date ", "drawn_by = \"<x>\"\nchecked_by = \"&y;\"\nstatus = \"'z\\\"\"\nschedule = \"]]>\"\ndate ", 1)
}

#[test]
fn pictures_are_well_formed_whatever_the_text() {
    for text in ["<&\"'=>", "&lt;", "]]>", "--><script>", "\\", "%s{}", "'/><a b='"] {
        let files = documents(&full_of(text));
        let pictures = ending(&files, ".svg");
        assert!(!pictures.is_empty());
        for picture in pictures {
            assert_eq!(well_formed(picture), Ok(()), "{text}");
            assert!(!picture.contains("<script"), "{text}: text became a tag");
        }
    }
}

#[test]
fn the_model_and_tables_read_back_whatever_the_text() {
    for text in ["<&\"'=>", ",;\"", "\\", "\"\"", "'"] {
        let source = full_of(text);
        let files = documents(&source);
        let model: serde_json::Value = serde_json::from_str(ending(&files, "-model.json")[0]).unwrap();
        let mark: String = text.chars().cycle().take(12).collect();
        assert_eq!(model["slabs"][0]["mark"], mark.as_str());
        for table in ending(&files, ".csv") {
            let mut reader = csv::ReaderBuilder::new().from_reader(table.as_bytes());
            let rows: Vec<csv::StringRecord> = reader.records().map(Result::unwrap).collect();
            let name = if text.starts_with('=') { format!("'{mark}") } else { mark.clone() };
            assert!(rows.iter().any(|r| r[0] == name), "{text}: no row of {name:?} in\n{table}");
        }
    }
}

#[test]
fn printed_files_open_whatever_the_text() {
    let files = documents(&full_of("<&\"'=>()\\"));
    let mut opened = 0;
    for file in files.iter().filter(|f| f.name.ends_with(".pdf")) {
        assert!(!lopdf::Document::load_mem(&file.bytes).unwrap().get_pages().is_empty(), "{}", file.name);
        opened += 1;
    }
    assert_eq!(opened, 3);
}

#[test]
fn a_table_holds_no_cell_that_a_spreadsheet_would_run() {
    for mark in ["=1+1", "+1", "-1", "@SUM(A1)", "=cmd|' /C"] {
        let files = documents(&MILL.replacen("\"S1\"", &format!("\"{mark}\""), 1));
        let mut held = 0;
        for table in ending(&files, ".csv") {
            let mut reader = csv::ReaderBuilder::new().has_headers(false).from_reader(table.as_bytes());
            for cell in reader.records().flat_map(|r| r.unwrap().iter().map(String::from).collect::<Vec<_>>()) {
                let number = cell.parse::<f64>().is_ok() && cell != mark;
                assert!(number || !cell.starts_with(['=', '+', '-', '@', '\t', '\r']), "{mark}: cell {cell:?}");
                held += usize::from(cell == format!("'{mark}"));
            }
        }
        assert!(held >= 2, "{mark}: the mark is not in both tables");
    }
}

#[test]
fn files_stay_in_their_folder_whatever_the_drawing_number() {
    for drawing in [
        "../../x",
        "/etc/x",
        "..",
        ".",
        "./.",
        "a/b/c",
        "C:\\x",
        "\\\\host\\x",
        "-rf",
        ".hidden",
        "x y",
        "\u{c5}\u{3a9}",
        "---",
        "x.",
        "~/x",
        "a:b",
        "x;y|z",
        "$(x)",
    ] {
        let source = MILL.replacen("\"H208-110\"", &format!("'{drawing}'"), 1);
        for file in documents(&source) {
            let sound = file.name.chars().all(|c| c.is_ascii_alphanumeric() || "-_.".contains(c));
            assert!(sound && file.name.starts_with(|c: char| c.is_ascii_alphanumeric() || c == '_'), "{drawing}: {}", file.name);
            assert_eq!(std::path::Path::new(&file.name).components().count(), 1, "{drawing}: {}", file.name);
        }
    }
}

#[test]
fn letters_that_cannot_be_drawn_are_refused_wherever_text_stands() {
    for letter in ["\u{1F9F1}", "\u{1}", "\u{202e}", "\u{200b}", "\u{feff}", "\u{301}", "\u{4e2d}", "\n", "\u{7f}", "\u{fffe}"] {
        for key in ["number", "project", "title", "drawing", "client", "site", "exposure", "mark", "grid"] {
            let escaped: String = letter.chars().map(|c| format!("\\U{:08X}", c as u32)).collect();
            let line = MILL.lines().find(|l| l.split('=').next().unwrap().trim() == key).unwrap();
            let source = MILL.replacen(line, &format!("{key} = \"a{escaped}\""), 1);
            let outcome = issue_set::detail(source.as_bytes(), &|_| Err("none".into()));
            let codes: Vec<&str> = outcome.faults.iter().map(|f| f.code).collect();
            assert_eq!(codes, ["no-letter"], "{letter:?} in {key}");
        }
    }
}

#[test]
fn a_fire_rating_takes_no_letters_beside_its_own() {
    for fire in ["REI\\u000160", "REI\\U0001F9F160", "REI<60>", "60 REI", "6REI0", "REI -60", "R E I60"] {
        let source = MILL.replacen("\"REI 60\"", &format!("\"{fire}\""), 1);
        let outcome = issue_set::detail(source.as_bytes(), &|_| Err("none".into()));
        assert!(outcome.set.is_none(), "fire = {fire:?} was taken");
    }
}

/// A rule sheet beside the job is text from outside as well: its title and note are printed.
#[test]
fn the_text_of_a_rule_sheet_does_no_harm() {
    let job = MILL.replacen("exposure ", "curtailment = \"own.toml\"\nexposure ", 1);
    for text in ["<&\\\"'>", "\\u0001", "\\U0001F9F1", "a\\nb"] {
        let own: String = SHEET
            .lines()
            .map(|l| match l.split(" = ").next() {
                Some(key @ ("name" | "title" | "note")) => format!("{key} = \"{text}\"\n"),
                _ => format!("{l}\n"),
            })
            .collect();
        let outcome = issue_set::detail(job.as_bytes(), &|_| Ok(own.clone()));
        // Refused is well; taken, then every picture has to be sound.
        if let Some(mut set) = outcome.set {
            for picture in ending(&set.documents(&["sheet-svg".into()]).unwrap(), ".svg") {
                assert_eq!(well_formed(picture), Ok(()), "{text}");
            }
        }
    }
}

#[test]
fn a_rule_sheet_of_unsound_figures_is_refused() {
    refused(&[
        ("on_share = 0.50", "on_share = nan"),
        ("reach = 0.20", "reach = inf"),
        ("far = 0.30", "far = -1"),
        ("schema = 1", "schema = 2"),
        ("[bottom]", "[botom]"),
        ("least_spans = 3", "least_spans = -3"),
        ("stop_end = 0.08", ""),
    ]);
}

#[test]
fn a_rule_sheet_of_unsound_conditions_is_refused() {
    refused(&[
        ("shortest_over_longest = 0.85", "shortest_over_longest = nan"),
        ("shortest_over_longest = 0.85", "shortest_over_longest = 7"),
        ("variable_most_kn_m2 = 5.0", "variable_most_kn_m2 = -1"),
    ]);
}

/// Each change to the shipped sheet makes one that is refused.
fn refused(changes: &[(&str, &str)]) {
    let job = MILL.replacen("exposure ", "curtailment = \"own.toml\"\nexposure ", 1);
    for (old, new) in changes {
        let own = SHEET.replacen(old, new, 1);
        assert_ne!(own, SHEET);
        let outcome = issue_set::detail(job.as_bytes(), &|_| Ok(own.clone()));
        assert_eq!(outcome.faults.iter().map(|f| f.code).collect::<Vec<_>>(), ["rule-sheet"], "{new}");
    }
}
