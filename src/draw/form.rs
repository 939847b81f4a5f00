//! The printed form that schedule and masses share: A4 landscape, head and foot of a page, cells, and blocks of rows broken into pages.

use super::notes;
use super::paper::{Lettering, Paper, Spot};
use crate::job::Job;
use crate::scene::{Anchor, Layer, Pen};
use crate::table::Align;
use crate::tables::font::{face, wrap};
use crate::tables::tables;

const PAGE: [f64; 2] = [297.0, 210.0];
/// The frame: 20 mm to the binding edge, 10 mm elsewhere (ISO 5457).
pub const MIN: [f64; 2] = [20.0, 10.0];
pub const MAX: [f64; 2] = [287.0, 200.0];
const FIELDS_TOP: f64 = 21.5;
const FIELD: f64 = 7.2;
/// Where the heads of the columns begin, and the room for rows under them.
pub const HEAD_TOP: f64 = FIELDS_TOP + 3.0 * FIELD;
pub const BODY_TOP: f64 = HEAD_TOP + 11.0;
pub const BODY_END: f64 = 181.5;
pub const FINE: Pen = Pen::solid(0.18);
pub const BOLD: Pen = Pen::solid(0.35);
/// Heights of capitals: one face only, so rank is told by size. Labels, data, headings, title.
pub const LABEL: f64 = 1.8;
pub const DATA: f64 = 2.5;
pub const HEADING: f64 = 3.5;
const TITLE: f64 = 5.0;
/// Paper of a heading row.
pub const HEADING_ROW: f64 = 8.0;

/// What every page of a document repeats.
pub struct Form<'f> {
    pub job: &'f Job,
    pub stamp: Option<&'f str>,
    pub of: usize,
}

pub fn lettering(height: f64) -> Lettering {
    Lettering { layer: Layer::Text, mark: String::new(), height }
}

pub fn write(paper: &mut Paper, height: f64, at: [f64; 2], anchor: Anchor, text: &str) {
    if !text.is_empty() {
        paper.text(&lettering(height), Spot { at, anchor, upward: false }, text);
    }
}

/// A line of the form; text keeps away from it by its place in the form, not by search.
pub fn rule(paper: &mut Paper, from: [f64; 2], to: [f64; 2], pen: Pen) {
    paper.scene.line(Layer::Frame, &[from, to], pen);
}

/// The greatest height up to `most` at which a text fits, and the text, cut short where even the least is too wide.
pub fn fitted(text: &str, most: f64, room: f64) -> (f64, String) {
    let width = |t: &str, h: f64| face().width(t, h);
    match [most, DATA, LABEL].into_iter().filter(|h| *h <= most).find(|h| width(text, *h) <= room) {
        Some(height) => (height, text.to_string()),
        None => {
            let mut short = text.to_string();
            while short.pop().is_some() && width(&short, LABEL) + width("...", LABEL) > room {}
            (LABEL, format!("{}...", short.trim_end()))
        }
    }
}

/// As much of a text as fits on a line of labels, broken after a space or hyphen where there is one, and the rest.
fn broken(text: &str, room: f64) -> (&str, &str) {
    let ends = text.char_indices().map(|(i, c)| (i + c.len_utf8(), c));
    let fitting: Vec<(usize, char)> = ends.take_while(|(end, _)| face().width(&text[..*end], LABEL) <= room).collect();
    let at_joint = fitting.iter().rev().find(|(_, c)| matches!(c, ' ' | '-' | '/'));
    let end = at_joint.or(fitting.last()).map_or(0, |(end, _)| *end);
    (&text[..end], text[end..].trim_start())
}

/// Text in a cell from `x`, on the base line `y`: right up to the edge, or from the left; `most` high.
pub fn cell(paper: &mut Paper, x: f64, width: f64, y: f64, text: &str, align: Align, most: f64) {
    let (height, text) = fitted(text, most, width - 4.0);
    let (at, anchor) = if align == Align::Right { (x + width - 2.5, Anchor::End) } else { (x + 1.5, Anchor::Start) };
    write(paper, height, [at, y], anchor, &text);
}

impl Form<'_> {
    /// A page with its head and foot.
    pub fn page(&self, title: &str, number: usize) -> Paper {
        let mut paper = Paper::new(PAGE[0], PAGE[1]);
        let head = &self.job.head;
        paper.scene.title = format!("{} bar schedule, revision {}", head.drawing, head.revision);
        paper.scene.description = format!("{title} of {}, {}, page {number} of {}", head.drawing, head.project, self.of);
        paper.scene.rect(Layer::Frame, MIN, MAX, Pen::solid(tables().sheets.frame_pen));
        write(&mut paper, TITLE, [MIN[0] + 3.0, FIELDS_TOP - 3.2], Anchor::Start, title);
        let (height, stamp) = fitted(self.stamp.unwrap_or_default(), HEADING, 170.0);
        write(&mut paper, height, [MAX[0] - 3.0, FIELDS_TOP - 3.2], Anchor::End, if self.stamp.is_some() { &stamp } else { "" });
        self.fields(&mut paper);
        self.foot(&mut paper, number);
        paper
    }

    fn fields(&self, paper: &mut Paper) {
        const LEFTS: [f64; 4] = [0.0, 122.0, 204.0, 267.0];
        let head = &self.job.head;
        let reference = if head.schedule.is_empty() { "none given" } else { &head.schedule };
        let date = head.date_text();
        let fields = [
            [("Project", head.project.as_str()), ("Job number", head.number.as_str()), ("Drawing", head.drawing.as_str())],
            [("Title", &head.title), ("Schedule reference", reference), ("Revision", &head.revision)],
            [("Prepared by", &head.drawn_by), ("Checked by", &head.checked_by), ("Date prepared", &date)],
        ];
        // Values of a column begin at one place, past its longest label.
        let labels: [f64; 3] = std::array::from_fn(|j| fields.iter().map(|line| face().width(line[j].0, LABEL)).fold(0.0, f64::max));
        for (i, line) in fields.iter().enumerate() {
            let y = FIELDS_TOP + FIELD * i as f64;
            rule(paper, [MIN[0], y], [MAX[0], y], FINE);
            for (j, (name, value)) in line.iter().enumerate() {
                let x = MIN[0] + LEFTS[j];
                if j > 0 {
                    rule(paper, [x, y], [x, y + FIELD], FINE);
                }
                write(paper, LABEL, [x + 1.5, y + 4.9], Anchor::Start, name);
                let at = x + 1.5 + labels[j] + 2.5;
                let room = MIN[0] + LEFTS[j + 1] - at - 1.5;
                if face().width(value, LABEL) <= room {
                    let (height, text) = fitted(value, DATA, room);
                    write(paper, height, [at, y + 4.9], Anchor::Start, &text);
                } else {
                    let (first, rest) = broken(value, room);
                    write(paper, LABEL, [at, y + 3.1], Anchor::Start, first);
                    write(paper, LABEL, [at, y + 6.0], Anchor::Start, &fitted(rest, LABEL, room).1);
                }
            }
        }
        rule(paper, [MIN[0], HEAD_TOP], [MAX[0], HEAD_TOP], BOLD);
    }

    fn foot(&self, paper: &mut Paper, number: usize) {
        let t = tables();
        rule(paper, [MIN[0], BODY_END], [MAX[0], BODY_END], BOLD);
        let cautions = t.notes.caution.iter().take(2).map(|c| c.text.as_str()).collect::<Vec<_>>().join(" ");
        let job = self.job;
        let lines = [
            format!("Bending dimensions in multiples of 5 mm, lengths in multiples of 25 mm. Shape codes and length formulas: {}.", t.shapes.edition),
            format!("Allowance between faces: {}. Masses: {}. Figures from: {}.", job.basis.deduction.text, t.bars.name, notes::editions(job)),
            cautions,
        ];
        let mut y = BODY_END + 3.6;
        for line in lines.iter().flat_map(|l| wrap(l, LABEL, MAX[0] - MIN[0] - 34.0)).take(5) {
            write(paper, LABEL, [MIN[0] + 1.5, y], Anchor::Start, &line);
            y += 3.1;
        }
        write(paper, HEADING, [MAX[0] - 3.0, MAX[1] - 3.0], Anchor::End, &format!("Sheet {number} of {}", self.of));
    }
}

/// Rows under one heading, each with the paper it takes.
pub struct Block<R> {
    pub heading: String,
    pub rows: Vec<(R, f64)>,
}

/// A line of a page: a heading, repeated where its rows go on over the page, or a row. The number is the paper it takes.
pub enum Line<R> {
    Heading(String),
    Row(R, f64),
}

impl<R> Line<R> {
    pub fn height(&self) -> f64 {
        match self {
            Line::Heading(_) => HEADING_ROW,
            Line::Row(_, height) => *height,
        }
    }
}

/// Breaks blocks into pages with `room` mm each. A heading stands over at least three of its rows, or all where there are fewer,
/// and a block is broken only so that a page has at least one row.
pub fn paginate<R>(blocks: Vec<Block<R>>, room: f64) -> Vec<Vec<Line<R>>> {
    let mut pages: Vec<Vec<Line<R>>> = Vec::new();
    let mut used = room;
    for block in blocks.into_iter().filter(|b| !b.rows.is_empty()) {
        let first = HEADING_ROW + block.rows.iter().take(3).map(|(_, height)| height).sum::<f64>();
        let mut rest = block.rows.into_iter().peekable();
        if used + first > room {
            pages.push(Vec::new());
            used = 0.0;
        }
        let mut heading = block.heading.clone();
        while rest.peek().is_some() {
            let Some(page) = pages.last_mut() else { break };
            page.push(Line::Heading(heading));
            used += HEADING_ROW;
            let mut is_first = true;
            while let Some((row, height)) = rest.next_if(|(_, height)| is_first || used + height <= room) {
                page.push(Line::Row(row, height));
                used += height;
                is_first = false;
            }
            heading = format!("{}, continued", block.heading);
            if rest.peek().is_some() {
                pages.push(Vec::new());
                used = 0.0;
            }
        }
    }
    pages
}
