//! What the program knows, made from its own tables: shapes, rules, formats, checks, sources.

use super::{DONE, envelope, say};
use crate::audit::KINDS;
use crate::steel::bend::formula;
use crate::table::Table;
use crate::tables::tables;
use crate::write::FORMATS;
use serde_json::{Map, Value, json};

pub fn list(what: &str, as_json: bool) -> u8 {
    let table = match what {
        "shapes" => shapes(),
        "rules" => rules(),
        "formats" => formats(),
        "checks" => checks(),
        _ => sources(),
    };
    if as_json {
        let rows: Vec<Value> = table
            .rows
            .iter()
            .map(|row| Value::Object(table.columns.iter().zip(row).map(|(c, cell)| (c.name.clone(), json!(cell))).collect::<Map<_, _>>()))
            .collect();
        envelope("list", true, json!({ "what": what, "rows": rows }));
    } else {
        say(&table.text());
    }
    DONE
}

fn shapes() -> Table {
    let mut table = Table::new(&["code", "shape", "length", "free", "geometry"]);
    for shape in &tables().shapes.list {
        let length = if shape.length.is_empty() { "by its sketch".to_string() } else { formula(&shape.length) };
        table.row([&shape.code, &shape.name, &length, &shape.free, &shape.confidence]);
    }
    for refused in &tables().shapes.refused {
        table.row([refused.code.as_str(), "refused", refused.why.as_str(), "", ""]);
    }
    table
}

fn rules() -> Table {
    let mut table = Table::new(&["rule sheet", "title", "source", "confidence", "note"]);
    for sheet in &tables().curtailments {
        let source = tables().sources.get(&sheet.source).map_or(sheet.source.as_str(), |s| s.cite.as_str());
        table.row([&sheet.name, &sheet.title, source, &sheet.confidence, &sheet.note]);
    }
    table
}

fn formats() -> Table {
    let mut table = Table::new(&["format", "of", "files", "what", "for"]);
    for format in FORMATS {
        table.row([format.key, format.group, format.files, format.what, format.user]);
    }
    table
}

fn checks() -> Table {
    let mut table = Table::new(&["check", "what is measured", "clause"]);
    for kind in KINDS {
        table.row([kind.code, kind.text, &tables().cited(&kind.cite)]);
    }
    table
}

fn sources() -> Table {
    let mut table = Table::new(&["key", "cite", "title", "edition", "confidence"]);
    for (key, source) in &tables().sources {
        table.row([key, &source.cite, &source.title, &source.edition, &source.confidence]);
    }
    table
}
