//! The printed bar schedule: A4 landscape in the form of the national standard, heads repeated, a summary of mass on its last page.

use super::notes;
use super::paper::{Lettering, Paper, Spot, text_area};
use super::picture;
use crate::finding::Check;
use crate::job::Job;
use crate::place::{BarModel, BarType, SlabModel};
use crate::report::schedule::{COLUMNS, row};
use crate::report::steel;
use crate::scene::{Anchor, Bookmark, Layer, Pen, Scene};
use crate::table::{Align, Table};
use crate::tables::font::wrap;
use crate::tables::tables;

const PAGE: [f64; 2] = [297.0, 210.0];
const MIN: [f64; 2] = [15.0, 10.0];
const MAX: [f64; 2] = [287.0, 200.0];
const ROW: f64 = 9.0;
const HEAD_TOP: f64 = 46.0;
const BODY_TOP: f64 = 57.0;
const BODY_END: f64 = 176.0;
/// Widths of the columns; after the form's own stands the picture of the shape.
const WIDTHS: [f64; 15] = [19.0, 14.0, 16.0, 16.0, 17.0, 14.0, 20.0, 14.0, 17.0, 17.0, 17.0, 17.0, 17.0, 14.0, 43.0];
const FINE: f64 = 0.18;
const BOLD: f64 = 0.35;

fn lettering(height: f64) -> Lettering {
    Lettering { layer: Layer::Text, mark: String::new(), height }
}

/// Pages of the schedule, the summary last.
pub fn schedule(job: &Job, model: &BarModel, checks: &[Vec<Check>]) -> Vec<Scene> {
    let stamp = notes::stamp(job, checks);
    let per_page = ((BODY_END - BODY_TOP) / ROW) as usize;
    let mut pages: Vec<Vec<(&SlabModel, &BarType)>> = Vec::new();
    for slab in &model.slabs {
        let mut rest: Vec<(&SlabModel, &BarType)> = slab.bars.iter().map(|b| (slab, b)).collect();
        while !rest.is_empty() {
            // A slab starts on the page before it only where at least three of its rows fit there.
            let room = pages.last().map_or(0, |p| per_page - p.len());
            if room < rest.len().min(3) {
                pages.push(Vec::new());
                continue;
            }
            let now = rest.drain(..rest.len().min(room)).collect::<Vec<_>>();
            if let Some(page) = pages.last_mut() {
                page.extend(now);
            }
        }
    }
    let summary = steel::summary(model);
    let summary_rows = 20;
    let summary_pages: Vec<Table> = summary.rows.chunks(summary_rows).map(|rows| Table { columns: summary.columns.clone(), rows: rows.to_vec() }).collect();
    let of = pages.len() + summary_pages.len();
    let mut scenes: Vec<Scene> = pages.iter().enumerate().map(|(i, rows)| bar_page(job, stamp.as_deref(), rows, i + 1, of)).collect();
    for (i, table) in summary_pages.iter().enumerate() {
        scenes.push(mass_page(job, stamp.as_deref(), table, pages.len() + i + 1, of));
    }
    scenes
}

fn page(job: &Job, stamp: Option<&str>, title: &str, number: usize, of: usize) -> Paper {
    let mut paper = Paper::new(PAGE[0], PAGE[1]);
    let head = &job.head;
    paper.scene.title = format!("{} bar schedule, revision {}", head.drawing, head.revision);
    paper.scene.description = format!("{title} of {}, {}, page {number} of {of}", head.drawing, head.project);
    paper.scene.rect(Layer::Frame, MIN, MAX, Pen::solid(BOLD));
    let big = lettering(5.0);
    paper.text(&big, Spot { at: [MIN[0] + 3.0, MIN[1] + 8.5], anchor: Anchor::Start, upward: false }, title);
    if let Some(stamp) = stamp {
        paper.text(&lettering(2.5), Spot { at: [MAX[0] - 3.0, MIN[1] + 8.0], anchor: Anchor::End, upward: false }, stamp);
    }
    let reference = if head.schedule.is_empty() { "none given" } else { &head.schedule };
    let date = head.date_text();
    let fields = [
        [("Project", head.project.as_str()), ("Job number", head.number.as_str()), ("Drawing", head.drawing.as_str())],
        [("Title", &head.title), ("Schedule reference", reference), ("Revision", &head.revision)],
        [("Prepared by", &head.drawn_by), ("Checked by", &head.checked_by), ("Date prepared", &date)],
    ];
    for (i, line) in fields.iter().enumerate() {
        let y = MIN[1] + 13.0 + 7.5 * i as f64;
        paper.scene.line(Layer::Frame, &[[MIN[0], y], [MAX[0], y]], Pen::solid(FINE));
        for (j, (name, value)) in line.iter().enumerate() {
            let x = MIN[0] + [0.0, 130.0, 205.0][j];
            if j > 0 {
                paper.scene.line(Layer::Frame, &[[x, y], [x, y + 7.5]], Pen::solid(FINE));
            }
            let label = paper.text(&lettering(1.8), Spot { at: [x + 2.0, y + 5.2], anchor: Anchor::Start, upward: false }, name);
            let at = label.max[0] + 2.0;
            let room = x + [130.0, 75.0, 67.0][j] - at - 2.0;
            let height = if text_area([0.0; 2], 2.5, value, Anchor::Start, false).width() <= room { 2.5 } else { 1.8 };
            paper.text(&lettering(height), Spot { at: [at, y + 5.2], anchor: Anchor::Start, upward: false }, value);
        }
    }
    foot(&mut paper, job, number, of);
    paper
}

fn foot(paper: &mut Paper, job: &Job, number: usize, of: usize) {
    let y = BODY_END + 1.0;
    paper.scene.line(Layer::Frame, &[[MIN[0], y], [MAX[0], y]], Pen::solid(BOLD));
    let cautions = tables().notes.caution.iter().take(2).map(|c| c.text.as_str()).collect::<Vec<_>>().join(" ");
    let lines = [
        format!("Bending dimensions in multiples of 5 mm, lengths in multiples of 25 mm. Shape codes and length formulas: {}.", tables().shapes.edition),
        format!("Allowance between faces: {}. Masses: {}. Figures from: {}.", job.basis.deduction.text, tables().bars.name, notes::editions(job)),
        cautions,
    ];
    let mut at = y + 3.8;
    for line in lines.iter().flat_map(|l| wrap(l, 1.8, MAX[0] - MIN[0] - 42.0)) {
        paper.text(&lettering(1.8), Spot { at: [MIN[0] + 2.0, at], anchor: Anchor::Start, upward: false }, &line);
        at += 3.3;
    }
    let sheet = format!("Sheet {number} of {of}");
    paper.text(&lettering(2.5), Spot { at: [MAX[0] - 3.0, MAX[1] - 3.0], anchor: Anchor::End, upward: false }, &sheet);
}

fn bar_page(job: &Job, stamp: Option<&str>, rows: &[(&SlabModel, &BarType)], number: usize, of: usize) -> Scene {
    let mut paper = page(job, stamp, "BAR SCHEDULE", number, of);
    column_heads(&mut paper);
    let mut y = BODY_TOP;
    let mut before: Option<&str> = None;
    for (slab, bar) in rows {
        let cells = row(slab, bar);
        let mut x = MIN[0];
        for (i, width) in WIDTHS.iter().enumerate() {
            match cells.get(i) {
                // The member is named at its first row of a page.
                Some(cell) if i > 0 || before != Some(cell.as_str()) => {
                    let right = COLUMNS[i].starts_with('>');
                    let (at, anchor) = if right { (x + width - 2.5, Anchor::End) } else { (x + width / 2.0, Anchor::Middle) };
                    let mut own = lettering(2.5);
                    own.mark.clone_from(&bar.mark);
                    paper.text(&own, Spot { at: [at, y + 5.9], anchor, upward: false }, cell);
                }
                Some(_) => {}
                None => picture::shape(&mut paper, bar, [x, y], [x + width, y + ROW], 0.35),
            }
            x += width;
        }
        if before.is_some_and(|b| b != slab.mark) {
            paper.scene.line(Layer::Frame, &[[MIN[0], y], [MAX[0], y]], Pen::solid(BOLD));
        }
        before = Some(&slab.mark);
        y += ROW;
        paper.scene.line(Layer::Frame, &[[MIN[0], y], [MAX[0], y]], Pen::solid(FINE));
    }
    let mut x = MIN[0];
    for width in WIDTHS {
        x += width;
        if x < MAX[0] - 1.0 {
            paper.scene.line(Layer::Frame, &[[x, HEAD_TOP], [x, y]], Pen::solid(FINE));
        }
    }
    paper.scene.bookmarks = vec![Bookmark { title: format!("Schedule, sheet {number}"), at: [0.0, 0.0], level: 0 }];
    paper.scene
}

fn column_heads(paper: &mut Paper) {
    paper.scene.line(Layer::Frame, &[[MIN[0], HEAD_TOP], [MAX[0], HEAD_TOP]], Pen::solid(BOLD));
    paper.scene.line(Layer::Frame, &[[MIN[0], BODY_TOP], [MAX[0], BODY_TOP]], Pen::solid(BOLD));
    let mut x = MIN[0];
    for (i, width) in WIDTHS.iter().enumerate() {
        let name = COLUMNS.get(i).map_or("Shape", |c| c.trim_start_matches('>'));
        let lines = wrap(name, 1.8, width - 2.0);
        let first = (HEAD_TOP + BODY_TOP) / 2.0 + 0.9 - (lines.len() as f64 - 1.0) * 1.4;
        for (j, line) in lines.iter().enumerate() {
            paper.text(&lettering(1.8), Spot { at: [x + width / 2.0, first + 2.8 * j as f64], anchor: Anchor::Middle, upward: false }, line);
        }
        x += width;
    }
}

/// The masses, apart from the form.
fn mass_page(job: &Job, stamp: Option<&str>, table: &Table, number: usize, of: usize) -> Scene {
    let mut paper = page(job, stamp, "STEEL SUMMARY", number, of);
    let widths = [30.0, 36.0, 22.0, 30.0, 30.0, 30.0, 28.0, 28.0];
    let mut y = HEAD_TOP + 6.5;
    let left = MIN[0] + 4.0;
    let mut x = left;
    for (column, width) in table.columns.iter().zip(widths) {
        cell(&mut paper, x, width, y, &column.name, column.align);
        x += width;
    }
    paper.scene.line(Layer::Frame, &[[MIN[0], y + 2.2], [MAX[0], y + 2.2]], Pen::solid(BOLD));
    let mut before = "";
    for row in &table.rows {
        y += 5.6;
        let group = row.first().map_or("", String::as_str);
        if !before.is_empty() && before != group {
            paper.scene.line(Layer::Frame, &[[MIN[0], y - 3.9], [MAX[0], y - 3.9]], Pen::solid(FINE));
        }
        let mut x = left;
        for (i, ((text, column), width)) in row.iter().zip(&table.columns).zip(widths).enumerate() {
            let shown = if i == 0 && before == group { "" } else { text.as_str() };
            cell(&mut paper, x, width, y, shown, column.align);
            x += width;
        }
        before = group;
    }
    let note = "Each group adds up to the total. Laps are part of the mass; they count once, on one of the two bars. Rates are per gross plan area and volume.";
    paper.text(&lettering(1.8), Spot { at: [left, BODY_END - 3.0], anchor: Anchor::Start, upward: false }, note);
    paper.scene.bookmarks = vec![Bookmark { title: "Steel summary".into(), at: [0.0, 0.0], level: 0 }];
    paper.scene
}

fn cell(paper: &mut Paper, x: f64, width: f64, y: f64, text: &str, align: Align) {
    let (at, anchor) = if align == Align::Right { (x + width - 2.0, Anchor::End) } else { (x, Anchor::Start) };
    paper.text(&lettering(2.5), Spot { at: [at, y], anchor, upward: false }, text);
}
