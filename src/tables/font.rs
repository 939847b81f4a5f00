//! The shipped font: its bytes for the writers and its widths for whoever lays out text.

use std::collections::HashMap;
use std::sync::OnceLock;

pub const FAMILY: &str = "Roboto Condensed";
/// Height of the capitals over the size of the font.
pub const CAPITAL: f64 = 0.711;

pub struct Face {
    pub bytes: &'static [u8],
    pub woff2: &'static [u8],
    advances: HashMap<char, f64>,
    /// Advances of the first letters of Unicode, by their number: most texts use no others.
    common: [Option<f64>; 128],
}

/// The one face of every document.
pub fn face() -> &'static Face {
    static FACE: OnceLock<Face> = OnceLock::new();
    FACE.get_or_init(|| {
        load(include_bytes!("../../templates/fonts/RobotoCondensed-Regular.sub.ttf"), include_bytes!("../../templates/fonts/RobotoCondensed-Regular.sub.woff2"))
    })
}

/// The shipped file is part of the program, so a face that does not parse is a fault of the build; every test draws with it.
#[allow(clippy::expect_used)]
fn load(bytes: &'static [u8], woff2: &'static [u8]) -> Face {
    let parsed = ttf_parser::Face::parse(bytes, 0).expect("the shipped font parses");
    let em = f64::from(parsed.units_per_em());
    let mut advances = HashMap::new();
    for subtable in parsed.tables().cmap.iter().flat_map(|cmap| cmap.subtables).filter(ttf_parser::cmap::Subtable::is_unicode) {
        subtable.codepoints(|code| {
            if let Some(letter) = char::from_u32(code)
                && let Some(glyph) = parsed.glyph_index(letter)
            {
                advances.insert(letter, f64::from(parsed.glyph_hor_advance(glyph).unwrap_or(0)) / em);
            }
        });
    }
    let common = std::array::from_fn(|code| u32::try_from(code).ok().and_then(char::from_u32).and_then(|letter| advances.get(&letter).copied()));
    Face { bytes, woff2, advances, common }
}

impl Face {
    pub fn has(&self, letter: char) -> bool {
        self.advances.contains_key(&letter)
    }

    /// Width of a text whose capitals are `height` mm high, mm.
    pub fn width(&self, text: &str, height: f64) -> f64 {
        let advance = |c: char| self.common.get(c as usize).copied().unwrap_or_else(|| self.advances.get(&c).copied()).unwrap_or(0.6);
        text.chars().map(advance).sum::<f64>() * height / CAPITAL
    }
}

/// The corners of the box that a text of this width fills on paper, mm: its capitals and descenders. `before` is the share of its width
/// that lies before `at`; a text that reads upward runs towards the top of the sheet.
pub fn text_box(at: [f64; 2], height: f64, width: f64, before: f64, upward: bool) -> [[f64; 2]; 2] {
    let (above, below, back) = (height, 0.25 * height, before * width);
    if upward {
        [[at[0] - above, at[1] - width + back], [at[0] + below, at[1] + back]]
    } else {
        [[at[0] - back, at[1] - above], [at[0] - back + width, at[1] + below]]
    }
}

/// Breaks a text at spaces into lines no wider than `width` mm; a single word may be wider.
pub fn wrap(text: &str, height: f64, width: f64) -> Vec<String> {
    let font = face();
    let mut lines: Vec<String> = Vec::new();
    let mut line = String::new();
    for word in text.split_whitespace() {
        let tried = if line.is_empty() { word.to_string() } else { format!("{line} {word}") };
        if !line.is_empty() && font.width(&tried, height) > width {
            lines.push(std::mem::replace(&mut line, word.to_string()));
        } else {
            line = tried;
        }
    }
    lines.push(line);
    lines
}
