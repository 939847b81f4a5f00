//! Documents of random jobs: equal bytes for equal jobs, whatever the order in the file; masses agree between them.

use super::generator::{Dice, draft};
use super::{DRAWN, detailed};
use slabwright::issue_set::IssueSet;
use slabwright::report;

fn tables(set: &IssueSet) -> [String; 3] {
    let csv = |table| String::from_utf8(slabwright::write::csv::write(&table).unwrap()).unwrap();
    [report::model::json(&set.job, &set.model, &set.checks), csv(report::schedule::table(&set.model)), csv(report::steel::table(&set.model))]
}

#[test]
fn two_runs_give_equal_bytes() {
    let only = ["steel", "model", "schedule-csv"].map(str::to_string);
    for seed in 0..5 {
        let text = draft(seed).text(None);
        let [one, two] = [(); 2].map(|()| detailed(&text).documents(&only).unwrap());
        assert_eq!(one.len(), 3, "seed {seed}");
        assert!(one.iter().all(|file| !file.bytes.is_empty()));
        assert_eq!(one, two, "seed {seed}");
    }
}

#[test]
fn order_of_tables_and_keys_changes_nothing() {
    for drawn in DRAWN.iter().take(40) {
        let mut dice = Dice::new(drawn.seed + 1000);
        let text = drawn.draft.text(Some(&mut dice));
        assert_ne!(text, drawn.draft.text(None));
        assert_eq!(tables(&detailed(&text)), tables(&drawn.set), "seed {}", drawn.seed);
    }
}

#[test]
fn schedule_steel_and_model_give_one_mass() {
    for drawn in DRAWN.iter() {
        let [model, schedule, steel] = tables(&drawn.set);
        let number = |cell: &str| cell.parse::<f64>().unwrap();
        let kg_m =
            |size: &str| [("8", 0.395), ("10", 0.617), ("12", 0.888), ("16", 1.578), ("20", 2.466), ("25", 3.853)].iter().find(|(s, _)| *s == size).unwrap().1;
        let rows = |text: &str| -> Vec<Vec<String>> {
            csv::Reader::from_reader(text.as_bytes()).records().map(|r| r.unwrap().iter().map(str::to_string).collect()).collect()
        };
        let scheduled: f64 = rows(&schedule).iter().map(|r| number(&r[5]) * number(&r[6]) / 1000.0 * kg_m(&r[2][1..])).sum();
        let steel_rows = rows(&steel);
        let summed: f64 = steel_rows.iter().map(|r| number(&r[6])).sum();
        let value: serde_json::Value = serde_json::from_str(&model).unwrap();
        let total = value["steel"]["total_kg"].as_f64().unwrap();
        assert!((scheduled - total).abs() < 0.006, "seed {}: schedule {scheduled}, model {total}", drawn.seed);
        assert!((summed - total).abs() < 0.006 * (steel_rows.len() + 1) as f64, "seed {}: steel {summed}, model {total}", drawn.seed);
        assert!(steel_rows.iter().all(|r| number(&r[7]) <= number(&r[6])), "seed {}: more laps than steel", drawn.seed);
    }
}
