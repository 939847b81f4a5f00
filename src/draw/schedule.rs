//! The printed bar schedule: A4 landscape in the columns of the national form, a heading over the bars of each slab, heads repeated on every
//! page, the masses on pages of their own at the end.

use super::bookmarks;
use super::form::{self, BODY_END, BODY_TOP, BOLD, Block, DATA, FINE, Form, HEAD_TOP, HEADING, HEADING_ROW, LABEL, Line, MAX, MIN};
use super::mass_page;
use super::notes;
use super::paper::{Lettering, Paper, Spot};
use super::picture;
use super::sketch;
use crate::finding::Check;
use crate::job::Job;
use crate::place::{BarModel, BarType, SlabModel};
use crate::report::schedule::{COLUMNS, row};
use crate::scene::{Anchor, Bookmark, Layer, Pen, Row, Scene};
use crate::table::Align;
use crate::tables::font::wrap;

/// Widths of the columns, mm; after the form's own stands the picture of the shape.
const WIDTHS: [f64; 15] = [21.0, 14.0, 16.0, 16.0, 17.0, 14.0, 20.0, 14.0, 17.0, 17.0, 17.0, 17.0, 17.0, 13.0, 37.0];
/// Paper of a row, and of one that holds a sketch.
const ROW: f64 = 9.0;
const SKETCH_ROW: f64 = 38.0;
/// Column of the bar mark; the bending dimensions, which a sketch takes over.
const MARK: usize = 1;
const DIMENSIONS: std::ops::Range<usize> = 8..13;
const PICTURE: Pen = Pen::solid(0.5);

/// Pages of the schedule, the masses last.
pub fn schedule(job: &Job, model: &BarModel, checks: &[Vec<Check>]) -> Vec<Scene> {
    let stamp = notes::stamp(job, checks);
    let blocks = model.slabs.iter().map(|slab| Block {
        heading: heading(slab),
        rows: slab.bars.iter().map(|bar| ((slab, bar), if bar.shape == "99" { SKETCH_ROW } else { ROW })).collect(),
    });
    let pages = form::paginate(blocks.collect(), BODY_END - BODY_TOP);
    let masses = mass_page::pages(model);
    let form = Form { job, stamp: stamp.as_deref(), of: pages.len() + masses.len() };
    let count = pages.len();
    let bars = pages.into_iter().enumerate().map(|(i, lines)| bar_page(&form, &lines, i + 1));
    bars.chain(masses.into_iter().enumerate().map(|(i, lines)| mass_page::draw(&form, &lines, count + i + 1))).collect()
}

fn heading(slab: &SlabModel) -> String {
    let members = if slab.members == 1 { "1 member".to_string() } else { format!("{} members", slab.members) };
    format!("Slab {}, {members}", slab.mark)
}

/// Left edge of a column, mm.
fn left(column: usize) -> f64 {
    MIN[0] + WIDTHS[..column].iter().sum::<f64>()
}

fn bar_page(form: &Form, lines: &[Line<(&SlabModel, &BarType)>], number: usize) -> Scene {
    let mut paper = form.page("BAR SCHEDULE", number);
    column_heads(&mut paper);
    let mut marks = vec![Bookmark { title: format!("Schedule, sheet {number}"), at: [0.0, 0.0], level: 0 }];
    let mut y = BODY_TOP;
    let mut is_first = true;
    for line in lines {
        match line {
            Line::Heading(text) => {
                form::write(&mut paper, HEADING, [MIN[0] + 3.0, y + HEADING_ROW - 2.4], Anchor::Start, text);
                marks.push(Bookmark { title: text.clone(), at: [0.0, y], level: 1 });
                if y > BODY_TOP {
                    form::rule(&mut paper, [MIN[0], y], [MAX[0], y], BOLD);
                }
            }
            Line::Row((slab, bar), height) => {
                bookmarks::name_mark(&mut paper.scene, bar);
                marks.push(Bookmark { title: bookmarks::name(bar), at: [0.0, (y - 30.0).max(0.0)], level: 2 });
                bar_row(&mut paper, slab, bar, y, *height, is_first);
            }
        }
        is_first = matches!(line, Line::Heading(_));
        y += line.height();
        form::rule(&mut paper, [MIN[0], y], [MAX[0], y], FINE);
    }
    paper.scene.bookmarks = marks;
    paper.scene
}

/// One mark; the member is named in the first row under a heading.
fn bar_row(paper: &mut Paper, slab: &SlabModel, bar: &BarType, y: f64, height: f64, is_first: bool) {
    let base = y + (height + DATA) / 2.0;
    let has_sketch = bar.shape == "99";
    for (i, text) in row(slab, bar).iter().enumerate().filter(|(i, _)| (is_first || *i > 0) && !(has_sketch && DIMENSIONS.contains(i))) {
        let right = COLUMNS[i].starts_with('>');
        let x = left(i);
        if right {
            form::cell(paper, x, WIDTHS[i], base, text, Align::Right, DATA);
            continue;
        }
        let (size, text) = form::fitted(text, DATA, WIDTHS[i] - 2.0);
        if !text.is_empty() {
            let lettering = Lettering { layer: Layer::Text, mark: if i == MARK { bar.mark.clone() } else { String::new() }, height: size };
            paper.text(&lettering, Spot { at: [x + WIDTHS[i] / 2.0, base], anchor: Anchor::Middle, upward: false }, &text);
        }
    }
    let (dimensions, picture) = (left(DIMENSIONS.start), left(COLUMNS.len()));
    if has_sketch {
        sketch::sketch(paper, bar, [dimensions, y], [left(DIMENSIONS.end), y + height], PICTURE);
        form::write(paper, LABEL, [picture + 18.5, base], Anchor::Middle, "as sketched");
    } else {
        picture::shape(paper, bar, [picture, y], [MAX[0], y + height], PICTURE);
    }
    for column in (1..WIDTHS.len()).filter(|i| !(has_sketch && DIMENSIONS.start < *i && *i < DIMENSIONS.end)) {
        form::rule(paper, [left(column), y], [left(column), y + height], FINE);
    }
    let bottom = y + height;
    let cell = [[left(MARK), y], [left(MARK + 1), bottom]];
    paper.scene.rows.push(Row { mark: bar.mark.clone(), area: [[MIN[0], y], [MAX[0], bottom]], cell });
}

/// Heads of the columns; the five bending dimensions stand under one head of their own.
fn column_heads(paper: &mut Paper) {
    const SPLIT: f64 = HEAD_TOP + 5.0;
    form::rule(paper, [MIN[0], BODY_TOP], [MAX[0], BODY_TOP], BOLD);
    let (from, to) = (left(DIMENSIONS.start), left(DIMENSIONS.end));
    form::rule(paper, [from, SPLIT], [to, SPLIT], FINE);
    form::write(paper, LABEL, [(from + to) / 2.0, HEAD_TOP + 3.4], Anchor::Middle, "Bending dimensions (mm)");
    for (i, width) in WIDTHS.iter().enumerate() {
        let (x, middle) = (left(i), left(i) + width / 2.0);
        let name = COLUMNS.get(i).map_or("Shape, not to scale", |c| c.trim_start_matches('>'));
        let is_dimension = DIMENSIONS.contains(&i);
        if i > 0 {
            let top = if is_dimension && i > DIMENSIONS.start { SPLIT } else { HEAD_TOP };
            form::rule(paper, [x, top], [x, BODY_TOP], FINE);
        }
        if is_dimension {
            form::write(paper, DATA, [middle, BODY_TOP - 1.8], Anchor::Middle, name.trim_end_matches(" (mm)"));
            continue;
        }
        let lines = wrap(name, LABEL, width - 2.0);
        let first = (HEAD_TOP + BODY_TOP + LABEL) / 2.0 - (lines.len() as f64 - 1.0) * 1.4;
        for (j, line) in lines.iter().enumerate() {
            form::write(paper, LABEL, [middle, first + 2.8 * j as f64], Anchor::Middle, line);
        }
    }
}
