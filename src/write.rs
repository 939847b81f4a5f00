//! Finished scenes, tables and the model become bytes: one file a format, one row each in `FORMATS`. Computes no length, chooses no layout.

pub mod csv;
pub mod pages;
pub mod pdf;
pub mod svg;

use crate::scene::Scene;

/// The parts that every document is made from.
pub struct Parts<'a> {
    pub stem: &'a str,
    pub date: (u16, u8, u8),
    pub title: &'a str,
    pub project: &'a str,
    pub sheets: &'a [Scene],
    pub schedule: &'a [Scene],
    pub schedule_table: &'a crate::table::Table,
    pub steel_table: &'a crate::table::Table,
    pub model_json: &'a str,
}

/// A file in memory.
#[derive(Clone, Debug, PartialEq)]
pub struct Artifact {
    pub name: String,
    pub bytes: Vec<u8>,
}

/// A kind of document: what it is called on the command line, which files it writes, what for, and its maker.
pub struct Format {
    pub key: &'static str,
    /// The document it is a form of; naming it brings all its forms.
    pub group: &'static str,
    pub files: &'static str,
    pub what: &'static str,
    pub user: &'static str,
    pub make: fn(&Parts) -> Result<Vec<Artifact>, String>,
}

/// Every format; help, lists, README and tests are made from these rows.
pub const FORMATS: &[Format] = &[
    Format { key: "sheet-pdf", group: "sheet", files: "DRAWING-sheet.pdf", what: "reinforcement sheet, all pages", user: "detailer, site", make: sheet_pdf },
    Format {
        key: "sheet-svg",
        group: "sheet",
        files: "DRAWING-sheet-1.svg ...",
        what: "reinforcement sheet, one file a page",
        user: "detailer, web",
        make: sheet_svg,
    },
    Format {
        key: "schedule-pdf",
        group: "schedule",
        files: "DRAWING-schedule.pdf",
        what: "bar schedule in the form of BS 8666",
        user: "supplier, site",
        make: schedule_pdf,
    },
    Format {
        key: "schedule-csv",
        group: "schedule",
        files: "DRAWING-schedule.csv",
        what: "bar schedule, one row a mark",
        user: "supplier, spreadsheet",
        make: schedule_csv,
    },
    Format {
        key: "set-pdf",
        group: "set",
        files: "DRAWING-set.pdf",
        what: "sheets and schedule in one file, marks linked both ways",
        user: "site, tablet",
        make: set_pdf,
    },
    Format {
        key: "steel",
        group: "steel",
        files: "DRAWING-steel.csv",
        what: "steel by slab, layer, size and class",
        user: "quantity surveyor",
        make: steel_csv,
    },
    Format {
        key: "model",
        group: "model",
        files: "DRAWING-model.json",
        what: "every bar and every check; schema: templates/model.schema.json",
        user: "scripts",
        make: model_json,
    },
];

impl Format {
    /// Whether a word of `--only` means this format.
    pub fn is_named(&self, word: &str) -> bool {
        word == self.key || word == self.group
    }
}

fn one(parts: &Parts, suffix: &str, bytes: Vec<u8>) -> Result<Vec<Artifact>, String> {
    Ok(vec![Artifact { name: format!("{}-{suffix}", parts.stem), bytes }])
}

fn sheet_pdf(parts: &Parts) -> Result<Vec<Artifact>, String> {
    pdf_of(parts, "sheet.pdf", "", parts.sheets.iter())
}

fn sheet_svg(parts: &Parts) -> Result<Vec<Artifact>, String> {
    let page = |(i, scene)| Artifact { name: format!("{}-sheet-{}.svg", parts.stem, i + 1), bytes: svg::write(scene).into_bytes() };
    Ok(parts.sheets.iter().enumerate().map(page).collect())
}

fn schedule_pdf(parts: &Parts) -> Result<Vec<Artifact>, String> {
    pdf_of(parts, "schedule.pdf", " - bar schedule", parts.schedule.iter())
}

fn set_pdf(parts: &Parts) -> Result<Vec<Artifact>, String> {
    pdf_of(parts, "set.pdf", " - sheets and bar schedule", parts.sheets.iter().chain(parts.schedule))
}

fn pdf_of<'s>(parts: &Parts, suffix: &str, addition: &str, scenes: impl Iterator<Item = &'s Scene>) -> Result<Vec<Artifact>, String> {
    let scenes: Vec<&Scene> = scenes.collect();
    let title = format!("{}{addition}", parts.title);
    one(parts, suffix, pdf::write(&scenes, parts.date, &title, parts.project)?)
}

fn schedule_csv(parts: &Parts) -> Result<Vec<Artifact>, String> {
    one(parts, "schedule.csv", csv::write(parts.schedule_table)?)
}

fn steel_csv(parts: &Parts) -> Result<Vec<Artifact>, String> {
    one(parts, "steel.csv", csv::write(parts.steel_table)?)
}

fn model_json(parts: &Parts) -> Result<Vec<Artifact>, String> {
    one(parts, "model.json", parts.model_json.as_bytes().to_vec())
}
