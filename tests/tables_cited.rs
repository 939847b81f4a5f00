//! Every row of every table names a source, every source that is named exists, every citation in the code resolves.

use crate::samples::root;
use slabwright::tables::tables;
use toml::Value;

/// Every table that holds a `source`, and every list of rows, under a TOML value.
fn walk(value: &Value, path: &str, sources: &mut Vec<(String, String)>, bare: &mut Vec<String>) {
    match value {
        Value::Table(table) => {
            if let Some(Value::String(source)) = table.get("source") {
                sources.push((path.to_string(), source.clone()));
            }
            for (key, inner) in table {
                walk(inner, &format!("{path}.{key}"), sources, bare);
            }
        }
        Value::Array(list) => {
            for (i, inner) in list.iter().enumerate() {
                let is_row = inner.as_table().is_some_and(|t| {
                    t.contains_key("class") || t.contains_key("code") || t.contains_key("d") || t.contains_key("name") || t.contains_key("text")
                });
                if is_row && inner.get("source").is_none() {
                    bare.push(format!("{path}[{i}]"));
                }
                walk(inner, &format!("{path}[{i}]"), sources, bare);
            }
        }
        _ => {}
    }
}

fn toml_files(folder: &std::path::Path, list: &mut Vec<std::path::PathBuf>) {
    for entry in std::fs::read_dir(folder).unwrap() {
        let path = entry.unwrap().path();
        if path.is_dir() {
            toml_files(&path, list);
        } else if path.extension().is_some_and(|e| e == "toml") {
            list.push(path);
        }
    }
}

#[test]
fn every_row_of_the_templates_names_a_known_source() {
    let mut files = Vec::new();
    toml_files(&root().join("templates"), &mut files);
    let (mut sources, mut bare) = (Vec::new(), Vec::new());
    for file in files.iter().filter(|f| !f.ends_with("new-job.toml") && !f.ends_with("sources.toml")) {
        let value: Value = toml::from_str(&std::fs::read_to_string(file).unwrap()).unwrap();
        walk(&value, file.file_name().unwrap().to_str().unwrap(), &mut sources, &mut bare);
    }
    assert!(bare.is_empty(), "rows without a source: {bare:?}");
    assert!(sources.len() > 90, "only {} sources were found", sources.len());
    for (path, source) in &sources {
        assert!(tables().sources.contains_key(source), "{path} names {source}, which sources.toml does not have");
    }
}

#[test]
fn every_citation_in_the_code_names_a_known_source() {
    fn rust_files(folder: &std::path::Path, list: &mut Vec<String>) {
        for entry in std::fs::read_dir(folder).unwrap() {
            let path = entry.unwrap().path();
            if path.is_dir() {
                rust_files(&path, list);
            } else {
                list.push(std::fs::read_to_string(path).unwrap());
            }
        }
    }
    let mut files = Vec::new();
    rust_files(&root().join("src"), &mut files);
    let mut found = 0;
    for text in &files {
        for (at, _) in text.match_indices("cite(\"") {
            let key = text[at + 6..].split('"').next().unwrap();
            found += 1;
            assert!(tables().sources.contains_key(key), "{key} is cited and not in sources.toml");
        }
    }
    assert!(found >= 8, "only {found} citations were found");
}

#[test]
fn only_the_shapes_whose_geometry_is_sure_are_there() {
    let codes: Vec<&str> = tables().shapes.list.iter().map(|s| s.code.as_str()).collect();
    assert_eq!(codes, ["00", "01", "11", "12", "13", "15", "21", "23", "25", "26", "31", "41", "46", "98", "99"]);
    for code in ["48", "52"] {
        let refused = slabwright::steel::bend::Bent::new(code, 12, Default::default()).unwrap_err().to_string();
        assert!(refused.contains(code) && refused.contains("2020"), "{refused}");
    }
}

#[test]
fn nothing_printed_says_that_it_conforms() {
    let mut texts: Vec<String> = Vec::new();
    for name in crate::samples::SAMPLES {
        texts.extend(crate::samples::documents(name).into_iter().filter(|f| f.name.ends_with(".svg")).map(|f| String::from_utf8(f.bytes).unwrap()));
    }
    for text in texts {
        let lower = text.to_lowercase();
        assert!(!lower.contains("conform") && !lower.contains("complies") && !lower.contains("in accordance with"));
        assert!(lower.contains("competent person"), "the caution stands on every sheet");
    }
}
