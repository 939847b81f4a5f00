//! The model of random jobs obeys the schema that ships with the program.

use super::DRAWN;
use serde_json::Value;
use slabwright::report::model::json;

/// What of a value breaks the schema; knows the words this schema uses.
fn breaches(root: &Value, schema: &Value, value: &Value, at: &str, found: &mut Vec<String>) {
    if let Some(name) = schema["$ref"].as_str() {
        let target = root.pointer(name.trim_start_matches('#')).unwrap();
        return breaches(root, target, value, at, found);
    }
    let mut say = |what: &str| found.push(format!("{at}: {what} {value}"));
    let is_kind = match schema["type"].as_str() {
        Some("object") => value.is_object(),
        Some("array") => value.is_array(),
        Some("string") => value.is_string(),
        Some("number") => value.is_number(),
        Some("integer") => value.is_i64(),
        _ => true,
    };
    if !is_kind {
        say("wrong type");
    }
    if schema.get("const").is_some_and(|c| c != value) || schema["enum"].as_array().is_some_and(|e| !e.contains(value)) {
        say("unknown word");
    }
    let number = value.as_f64().unwrap_or(0.0);
    if schema["minimum"].as_f64().is_some_and(|m| number < m) || schema["multipleOf"].as_f64().is_some_and(|m| number % m != 0.0) {
        say("number out of its range");
    }
    let count = value.as_array().map_or(0, Vec::len) as u64;
    if schema["minItems"].as_u64().is_some_and(|m| count < m) || schema["maxItems"].as_u64().is_some_and(|m| count > m) {
        say("wrong number of items");
    }
    let text = value.as_str().unwrap_or("");
    let is_number = text.chars().all(|c| c.is_ascii_digit());
    match schema["pattern"].as_str() {
        Some("^[0-9]{2,}$") if !is_number || text.len() < 2 => say("not two digits or more"),
        Some("^[0-9]{2}$") if !is_number || text.len() != 2 => say("not two digits"),
        Some("^[0-9]{2,}$" | "^[0-9]{2}$") | None => {}
        Some(other) => panic!("this test does not know the pattern {other}"),
    }
    for key in schema["required"].as_array().into_iter().flatten().filter_map(Value::as_str) {
        if value.get(key).is_none() {
            found.push(format!("{at}: {key} is missing"));
        }
    }
    for (key, child) in value.as_object().into_iter().flatten() {
        let own = schema["properties"].get(key).or(schema.get("additionalProperties"));
        if let Some(own) = own.filter(|s| s.is_object()) {
            breaches(root, own, child, &format!("{at}/{key}"), found);
        }
    }
    if schema.get("items").is_some() {
        for (i, child) in value.as_array().into_iter().flatten().enumerate() {
            breaches(root, &schema["items"], child, &format!("{at}/{i}"), found);
        }
    }
}

fn schema() -> Value {
    serde_json::from_str(&std::fs::read_to_string(concat!(env!("CARGO_MANIFEST_DIR"), "/templates/model.schema.json")).unwrap()).unwrap()
}

#[test]
fn every_model_obeys_the_schema() {
    let schema = schema();
    for drawn in DRAWN.iter() {
        let model: Value = serde_json::from_str(&json(&drawn.set.job, &drawn.set.model, &drawn.set.checks)).unwrap();
        let mut found = Vec::new();
        breaches(&schema, &schema, &model, "", &mut found);
        assert!(found.is_empty(), "seed {}: {:?}", drawn.seed, &found[..found.len().min(5)]);
    }
}

#[test]
fn a_broken_model_is_seen() {
    let schema = schema();
    let drawn = &DRAWN[0];
    let sound: Value = serde_json::from_str(&json(&drawn.set.job, &drawn.set.model, &drawn.set.checks)).unwrap();
    let break_it: [&dyn Fn(&mut Value); 5] = [
        &|m| m["slabs"][0]["bars"][0]["length_mm"] = 1234.into(),
        &|m| m["slabs"][0]["bars"][0]["layer"] = "B3".into(),
        &|m| m["slabs"][0]["bars"][0]["sets"][0]["step_mm"] = serde_json::json!([0, 1]),
        &|m| m["slabs"][0]["mark"] = 7.into(),
        &|m| drop(m["steel"].as_object_mut().unwrap().remove("total_kg")),
    ];
    for change in break_it {
        let mut model = sound.clone();
        change(&mut model);
        let mut found = Vec::new();
        breaches(&schema, &schema, &model, "", &mut found);
        assert_eq!(found.len(), 1, "{found:?}");
    }
}
