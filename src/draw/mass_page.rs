//! The masses, apart from the bar schedule: by size, by slab with its rates, by layer and class, the grand total last. One set of columns.

use super::form::{self, BODY_END, BOLD, Block, DATA, FINE, Form, HEAD_TOP, HEADING, HEADING_ROW, LABEL, Line, MAX, MIN};
use crate::place::BarModel;
use crate::report::steel::{self, Masses};
use crate::scene::{Anchor, Bookmark, Scene};
use crate::table::Align;

const ROW: f64 = 5.6;
const TOTAL_ROW: f64 = 9.0;
/// Paper of the column heads, and of the note at the foot.
const HEADS: f64 = 7.0;
const NOTE: f64 = 6.0;
/// Width of the first column and of the others, mm.
const NAME: f64 = 43.0;
const FIGURE: f64 = 27.0;
const COLUMNS: [&str; 8] =
    ["Number of bars", "Total length (m)", "Mass (kg)", "of which laps (kg)", "Plan area (m²)", "Concrete (m³)", "kg per m²", "kg per m³"];

/// What stands on a mass page.
pub enum Entry {
    Sum(Masses),
    Total(Masses),
}

/// The lines of the pages of masses.
pub fn pages(model: &BarModel) -> Vec<Vec<Line<Entry>>> {
    let mut blocks: Vec<Block<Entry>> = Vec::new();
    for masses in steel::masses(model) {
        let (entry, height) =
            if masses.group == steel::TOTAL { (Entry::Total as fn(Masses) -> Entry, TOTAL_ROW) } else { (Entry::Sum as fn(Masses) -> Entry, ROW) };
        let heading = heading(masses.group);
        match blocks.last_mut() {
            // The total closes the last group, so that it never stands alone on a page.
            Some(block) if block.heading == heading || masses.group == steel::TOTAL => block.rows.push((entry(masses), height)),
            _ => blocks.push(Block { heading, rows: vec![(entry(masses), height)] }),
        }
    }
    form::paginate(blocks, BODY_END - HEAD_TOP - HEADS - NOTE)
}

fn heading(group: &str) -> String {
    match group {
        "over 12 m" => "Bars over 12 m".into(),
        other => format!("By {other}"),
    }
}

pub fn draw(form: &Form, lines: &[Line<Entry>], number: usize) -> Scene {
    let mut paper = form.page("STEEL SUMMARY", number);
    let mut y = HEAD_TOP + HEADS;
    for (i, name) in COLUMNS.iter().enumerate() {
        form::write(&mut paper, LABEL, [left(i) + FIGURE - 2.5, y - 2.6], Anchor::End, name);
    }
    form::rule(&mut paper, [MIN[0], y], [MAX[0], y], BOLD);
    for line in lines {
        match line {
            Line::Heading(text) => {
                if y > HEAD_TOP + HEADS {
                    form::rule(&mut paper, [MIN[0], y], [MAX[0], y], FINE);
                }
                form::write(&mut paper, HEADING, [MIN[0] + 3.0, y + HEADING_ROW - 2.0], Anchor::Start, text);
            }
            Line::Row(Entry::Sum(masses), _) => figures(&mut paper, masses, &masses.name, y + ROW - 1.6, DATA),
            Line::Row(Entry::Total(masses), _) => {
                form::rule(&mut paper, [MIN[0], y + 1.0], [MAX[0], y + 1.0], BOLD);
                figures(&mut paper, masses, "Grand total", y + TOTAL_ROW - 2.3, HEADING);
                form::rule(&mut paper, [MIN[0], y + TOTAL_ROW], [MAX[0], y + TOTAL_ROW], BOLD);
            }
        }
        y += line.height();
    }
    let note = "Sizes, slabs, layers and classes each add up to the grand total. Laps are part of the mass and count once, on one of the two bars. Rates are per gross plan area and volume of concrete. Figures are rounded once, as printed.";
    for (i, line) in crate::tables::font::wrap(note, LABEL, MAX[0] - MIN[0] - 6.0).iter().enumerate() {
        form::write(&mut paper, LABEL, [MIN[0] + 3.0, BODY_END - 4.2 + 2.8 * i as f64], Anchor::Start, line);
    }
    paper.scene.bookmarks = vec![Bookmark { title: format!("Steel summary, sheet {number}"), at: [0.0, 0.0], level: 0 }];
    paper.scene
}

/// Left edge of a column of figures, mm.
fn left(column: usize) -> f64 {
    MIN[0] + NAME + FIGURE * column as f64
}

fn figures(paper: &mut super::paper::Paper, masses: &Masses, name: &str, y: f64, height: f64) {
    let indent = if height > DATA { 1.5 } else { 6.0 };
    form::cell(paper, MIN[0] + indent, NAME - indent, y, name, Align::Left, height);
    let sum = &masses.sum;
    let mut cells = vec![sum.bars.to_string(), format!("{:.1}", sum.length_m), format!("{:.1}", sum.kg), format!("{:.1}", sum.laps_kg)];
    if let Some((area, volume)) = masses.concrete {
        cells.extend([area, volume].map(|v| format!("{v:.1}")));
        cells.extend([area, volume].map(|v| if v > 0.0 { format!("{:.1}", sum.kg / v) } else { String::new() }));
    }
    for (i, text) in cells.iter().enumerate() {
        form::cell(paper, left(i), FIGURE, y, text, Align::Right, height);
    }
}
