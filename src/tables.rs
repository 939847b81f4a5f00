//! The figures of the standards and of this program, read once from `templates/` (embedded), each row with its source.
//! Imports only the floor of primitives. Holds no rule: what is done with a figure stands in `steel`, `rules` and `plan`.

pub mod curtailment;
pub mod font;

use crate::trace::Cite;
use serde::Deserialize;
use std::collections::BTreeMap;
use std::sync::OnceLock;

/// Every embedded table, typed.
pub struct Tables {
    pub bars: Bars,
    pub shapes: Shapes,
    pub materials: Materials,
    pub national: National,
    pub deductions: Vec<Deduction>,
    pub curtailments: Vec<curtailment::Sheet>,
    pub sheets: Sheets,
    pub notes: Notes,
    pub sources: BTreeMap<String, Source>,
}

#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Bars {
    pub name: String,
    pub source: String,
    pub density_kg_m3: f64,
    #[serde(rename = "size")]
    pub sizes: Vec<Bar>,
}

/// One bar size; lengths in mm, area in mm², mass in kg/m.
#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Bar {
    pub d: u32,
    pub area_mm2: f64,
    pub mass_kg_m: f64,
    /// Least internal radius of a bend.
    pub radius: f64,
    pub former: f64,
    /// Least end projection P.
    pub projection: f64,
    /// Least overall dimension over two bends.
    pub over_two_bends: f64,
    pub preferred: bool,
    pub source: String,
}

/// A sum of named quantities, such as A + B - 0.5r - d.
pub type Sum = BTreeMap<String, f64>;

#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Shapes {
    pub edition: String,
    pub source: String,
    #[serde(rename = "shape")]
    pub list: Vec<ShapeCode>,
    pub refused: Vec<Refused>,
}

#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct ShapeCode {
    pub code: String,
    pub name: String,
    pub length: Sum,
    pub path: Vec<Walk>,
    pub measured: BTreeMap<String, String>,
    pub free: String,
    #[serde(default)]
    pub conditions: Vec<Condition>,
    pub confidence: String,
    pub source: String,
}

#[derive(Debug, Deserialize)]
#[serde(untagged)]
pub enum Walk {
    Leg {
        leg: String,
    },
    Turn {
        turn: f64,
        #[serde(default)]
        radius: Radius,
    },
    TurnBy {
        turn_by: Offset,
        #[serde(default)]
        apex: Apex,
        #[serde(default)]
        back: bool,
    },
}

#[derive(Clone, Copy, Debug, Default, Deserialize, PartialEq)]
pub enum Radius {
    #[default]
    #[serde(rename = "r")]
    Least,
    #[serde(rename = "R")]
    Scheduled,
    #[serde(rename = "crown")]
    Crown,
}

#[derive(Clone, Copy, Debug, Default, Deserialize, PartialEq)]
#[serde(rename_all = "lowercase")]
pub enum Apex {
    #[default]
    Outer,
    Centre,
}

#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Offset {
    pub rise: String,
    pub along: String,
    pub thick: f64,
}

/// `least` may not be under `of`.
#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Condition {
    pub least: Sum,
    pub of: Sum,
    #[serde(default)]
    pub memory: bool,
}

#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Refused {
    pub code: String,
    pub why: String,
    pub source: String,
}

#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Materials {
    pub concrete: Vec<Concrete>,
    pub steel: Vec<Steel>,
    #[serde(rename = "letter")]
    pub letters: Vec<Letter>,
}

#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Concrete {
    pub class: String,
    /// Characteristic cylinder strength, N/mm².
    pub fck: f64,
    pub source: String,
}

#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Steel {
    pub class: String,
    /// Characteristic yield strength, N/mm².
    pub fyk: f64,
    pub letters: Vec<String>,
    pub source: String,
}

#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Letter {
    pub letter: String,
    pub text: String,
    pub source: String,
}

#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct National {
    pub name: String,
    pub gamma_c: Value,
    pub gamma_s: Value,
    pub alpha_ct: Value,
    pub gamma_g: Value,
    pub gamma_q: Value,
    pub psi_2: Value,
    pub partial_fixity: Value,
    pub area_most: Value,
    pub spacing: Spacings,
    pub alpha6: Vec<Alpha6>,
    pub crack: Vec<Crack>,
    pub fire: Vec<Fire>,
}

#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Value {
    pub value: f64,
    pub clause: String,
    pub source: String,
    pub confidence: String,
}

#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Spacings {
    pub main: SpacingMost,
    pub main_peak: SpacingMost,
    pub distribution: SpacingMost,
    pub distribution_peak: SpacingMost,
}

/// Greatest spacing: the lesser of a multiple of the thickness and a limit in mm.
#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct SpacingMost {
    pub times_h: f64,
    pub limit_mm: f64,
    pub clause: String,
    pub source: String,
    pub confidence: String,
}

#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Alpha6 {
    pub share: u32,
    pub value: f64,
    pub source: String,
}

#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Crack {
    pub stress: f64,
    pub size: f64,
    pub spacing: f64,
    pub source: String,
}

#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Fire {
    pub minutes: u32,
    pub thickness: f64,
    pub axis: f64,
    pub source: String,
}

#[derive(Clone, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Deduction {
    pub name: String,
    pub text: String,
    pub source: String,
    pub confidence: String,
    /// Straight bars of any length, mm.
    pub straight: f64,
    pub bent: Vec<Allowance>,
}

#[derive(Clone, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Allowance {
    pub up_to: Option<f64>,
    pub mm: f64,
}

impl Deduction {
    /// The allowance for a bent bar between faces `distance` mm apart, mm.
    pub fn for_bent(&self, distance: f64) -> f64 {
        let row = self.bent.iter().find(|a| a.up_to.is_none_or(|most| distance <= most));
        row.map_or(0.0, |a| a.mm)
    }
}

#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Sheets {
    pub border_left: f64,
    pub border: f64,
    pub frame_pen: f64,
    /// Lines between the fields of the border, mm.
    pub field_pen: f64,
    pub scales: Vec<u32>,
    pub source: String,
    /// Every text height a sheet may use: the series of ISO 3098, mm.
    pub heights: Vec<f64>,
    /// Every line width a sheet may use: the series of ISO 128, mm.
    pub widths: Vec<f64>,
    pub half_size: HalfSize,
    #[serde(rename = "size")]
    pub sizes: Vec<SheetSize>,
}

/// Heights of capitals, mm: labels of the title block, notes and dimensions, call-outs, view titles, the drawing number.
#[derive(Clone, Copy, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct TextHeights {
    pub label: f64,
    pub note: f64,
    pub call_out: f64,
    pub view: f64,
    pub number: f64,
}

/// What has to be left of a sheet when it is printed smaller, mm on the print.
#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct HalfSize {
    pub sheet: String,
    pub printed: String,
    pub factor: f64,
    pub text: f64,
    pub line: f64,
    pub source: String,
}

#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct SheetSize {
    pub name: String,
    pub width: f64,
    pub height: f64,
    pub fields: [u32; 2],
    pub pens: Pens,
    pub text: TextHeights,
    pub source: String,
}

/// Line widths, mm.
#[derive(Clone, Copy, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Pens {
    pub main: f64,
    pub other: f64,
    pub concrete: f64,
    pub thin: f64,
}

#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Notes {
    pub caution: Vec<Sentence>,
    pub note: BTreeMap<String, Sentence>,
    pub stamp: BTreeMap<String, Sentence>,
    pub limits: Limits,
}

#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Sentence {
    pub text: String,
    pub source: String,
}

#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Limits {
    pub handling_kg: Guide,
}

#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Guide {
    pub value: f64,
    pub source: String,
    pub confidence: String,
}

#[derive(Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Source {
    pub cite: String,
    pub title: String,
    pub edition: String,
    pub confidence: String,
}

/// The JSON Schema of the model file, shipped with the program.
pub const MODEL_SCHEMA: &str = include_str!("../templates/model.schema.json");

/// The embedded tables, read at first use.
pub fn tables() -> &'static Tables {
    static TABLES: OnceLock<Tables> = OnceLock::new();
    TABLES.get_or_init(|| {
        #[derive(Deserialize)]
        struct DeductionFile {
            table: Vec<Deduction>,
        }
        Tables {
            bars: embedded(include_str!("../templates/bars.toml")),
            shapes: embedded(include_str!("../templates/shapes.toml")),
            materials: embedded(include_str!("../templates/materials.toml")),
            national: embedded(include_str!("../templates/national.toml")),
            deductions: embedded::<DeductionFile>(include_str!("../templates/deductions.toml")).table,
            curtailments: curtailment::EMBEDDED.iter().map(|text| embedded(text)).collect(),
            sheets: embedded(include_str!("../templates/sheets.toml")),
            notes: embedded(include_str!("../templates/notes.toml")),
            sources: embedded(include_str!("../templates/sources.toml")),
        }
    })
}

/// A file of `templates/`; one that cannot be read is a fault of the build, not of any input, and a test reads each.
#[allow(clippy::expect_used)]
fn embedded<T: for<'de> Deserialize<'de>>(text: &str) -> T {
    toml::from_str(text).expect("a file of templates/ fits its type")
}

impl Tables {
    pub fn bar(&self, size: u32) -> Option<&Bar> {
        self.bars.sizes.iter().find(|b| b.d == size)
    }

    /// The row of a size that the reader let in. Falls back on the first row, which no validated job can reach.
    pub fn known_bar(&self, size: u32) -> &Bar {
        self.bar(size).unwrap_or(&self.bars.sizes[0])
    }

    pub fn shape(&self, code: &str) -> Option<&ShapeCode> {
        self.shapes.list.iter().find(|s| s.code == code)
    }

    /// Sizes that a job may use, ascending, mm.
    pub fn preferred_sizes(&self) -> impl DoubleEndedIterator<Item = u32> + '_ {
        self.bars.sizes.iter().filter(|b| b.preferred).map(|b| b.d)
    }

    /// A citation in print: the document and the clause.
    pub fn cited(&self, cite: &Cite) -> String {
        let document = self.sources.get(cite.source.as_ref()).map_or(cite.source.as_ref(), |s| s.cite.as_str());
        if cite.clause.is_empty() { document.to_string() } else { format!("{document} {}", cite.clause) }
    }
}
