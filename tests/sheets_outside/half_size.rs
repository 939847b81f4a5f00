//! An A1 sheet printed on A3: no text and no line gets too small to read. Limits stand in `templates/sheets.toml`.

use crate::samples::{SAMPLES, root, sample};
use slabwright::scene::{Scene, Shape};
use std::collections::BTreeMap;
use toml::Value;

fn sheets_table() -> Value {
    toml::from_str(&std::fs::read_to_string(root().join("templates/sheets.toml")).unwrap()).unwrap()
}

fn number(value: &Value) -> f64 {
    value.as_float().or_else(|| value.as_integer().map(|i| i as f64)).unwrap()
}

/// The row of `[[size]]` that a sheet is drawn on.
fn size_of<'t>(table: &'t Value, scene: &Scene) -> &'t Value {
    let is_same = |row: &&Value| number(&row["width"]) == scene.width && number(&row["height"]) == scene.height;
    table["size"].as_array().unwrap().iter().find(is_same).unwrap()
}

/// What a sheet uses: heights of text and widths of lines, each with how often and an example.
fn used(scene: &Scene) -> (BTreeMap<String, (usize, String)>, BTreeMap<String, (usize, String)>) {
    let (mut texts, mut lines) = (BTreeMap::new(), BTreeMap::new());
    let note = |map: &mut BTreeMap<String, (usize, String)>, value: f64, example: String| map.entry(format!("{value}")).or_insert((0, example)).0 += 1;
    for item in &scene.items {
        match &item.shape {
            Shape::Text { height, text, .. } => note(&mut texts, *height, text.clone()),
            Shape::Line { pen, .. } | Shape::Circle { pen: Some(pen), .. } => note(&mut lines, pen.width, format!("{:?}", item.layer)),
            _ => {}
        }
    }
    (texts, lines)
}

#[test]
fn an_a1_sheet_reads_at_half_size() {
    let table = sheets_table();
    let half = &table["half_size"];
    let [factor, text_least, line_least] = ["factor", "text", "line"].map(|key| number(&half[key]));
    let mut small = Vec::new();
    for name in SAMPLES {
        let set = sample(name);
        for scene in slabwright::draw::sheets(&set.job, &set.model, &set.checks) {
            if size_of(&table, &scene)["name"] != half["sheet"] {
                continue;
            }
            let (texts, lines) = used(&scene);
            let under = |map: BTreeMap<String, (usize, String)>, least: f64, what: &str| -> Vec<String> {
                let is_small = |value: &str| value.parse::<f64>().unwrap() * factor < least - 1e-9;
                map.into_iter().filter(|(v, _)| is_small(v)).map(|(v, (n, example))| format!("{name}: {n} {what} of {v} mm, such as {example:?}")).collect()
            };
            small.extend(under(texts, text_least, "texts"));
            small.extend(under(lines, line_least, "lines"));
        }
    }
    assert!(small.is_empty(), "{small:#?}");
}

#[test]
fn every_text_of_a_sheet_has_a_height_of_the_table() {
    let table = sheets_table();
    for name in SAMPLES {
        let set = sample(name);
        for scene in slabwright::draw::sheets(&set.job, &set.model, &set.checks) {
            let row = size_of(&table, &scene);
            let mut known: Vec<f64> = row["text"].as_table().unwrap().values().map(number).collect();
            // The letters of the border have one height on every size (ISO 5457); a long value in the title block is set lower.
            known.extend([3.5, 2.5]);
            for (height, (_, text)) in used(&scene).0 {
                assert!(known.contains(&height.parse().unwrap()), "{name}: {text:?} is {height} mm high, which {:?} does not have", row["name"]);
            }
        }
    }
}

#[test]
fn a_sheet_has_no_line_thinner_than_its_pens() {
    let table = sheets_table();
    for name in SAMPLES {
        let set = sample(name);
        for scene in slabwright::draw::sheets(&set.job, &set.model, &set.checks) {
            let pens = size_of(&table, &scene)["pens"].as_table().unwrap();
            let least = pens.values().map(number).fold(f64::INFINITY, f64::min);
            for (width, (_, layer)) in used(&scene).1 {
                assert!(width.parse::<f64>().unwrap() >= least - 1e-9, "{name}: a line of {layer} is {width} mm wide");
            }
        }
    }
}
