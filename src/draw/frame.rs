//! The sheet's border, grid fields and title block (ISO 5457, ISO 7200).

use super::paper::{Area, Lettering, Paper, Spot, text_area};
use crate::job::Job;
use crate::scene::{Anchor, Layer, Pen};
use crate::tables::{SheetSize, tables};

/// What the title block says besides the job.
pub struct Title<'a> {
    pub size: &'a SheetSize,
    pub scales: String,
    pub number: usize,
    pub of: usize,
    pub document: &'a str,
}

/// The drawing space inside the frame.
pub fn space(size: &SheetSize) -> Area {
    let s = &tables().sheets;
    Area::new([s.border_left, s.border], [size.width - s.border, size.height - s.border])
}

/// Border, trim and centring marks, grid fields.
pub fn frame(paper: &mut Paper, size: &SheetSize) {
    let s = &tables().sheets;
    let area = space(size);
    paper.room = area.grown(-1.0);
    paper.outline(Layer::Frame, &[area.min, [area.max[0], area.min[1]], area.max, [area.min[0], area.max[1]]], Pen::solid(s.frame_pen));
    // Trim marks in the corners.
    for (x, y) in [(0.0, 0.0), (size.width, 0.0), (0.0, size.height), (size.width, size.height)] {
        let (sx, sy) = (if x > 0.0 { -1.0 } else { 1.0 }, if y > 0.0 { -1.0 } else { 1.0 });
        paper.scene.line(Layer::Frame, &[[x, y + sy * 5.0], [x, y], [x + sx * 5.0, y]], Pen::solid(s.frame_pen));
    }
    let middle = [(area.min[0] + area.max[0]) / 2.0, (area.min[1] + area.max[1]) / 2.0];
    for (a, b) in [
        ([middle[0], 5.0], [middle[0], area.min[1] + 5.0]),
        ([middle[0], size.height - 5.0], [middle[0], area.max[1] - 5.0]),
        ([5.0, middle[1]], [area.min[0] + 5.0, middle[1]]),
        ([size.width - 5.0, middle[1]], [area.max[0] - 5.0, middle[1]]),
    ] {
        paper.line(Layer::Frame, "", &[a, b], Pen::solid(s.frame_pen));
    }
    fields(paper, size, &area, Pen::solid(s.field_pen));
}

/// Grid fields of 50 mm from the centring marks outwards: letters from the top, without I and O, numerals from the left.
fn fields(paper: &mut Paper, size: &SheetSize, area: &Area, pen: Pen) {
    const STRIP: f64 = 5.0;
    const LETTERS: &[u8] = b"ABCDEFGHJKLMNPQRSTUVWXYZ";
    let lettering = Lettering { layer: Layer::Frame, mark: String::new(), height: 3.5 };
    for axis in 0..2 {
        let middle = (area.min[axis] + area.max[axis]) / 2.0;
        let half = f64::from(size.fields[axis]) / 2.0;
        let edges: Vec<f64> = (0..=size.fields[axis]).map(|i| (middle + (f64::from(i) - half) * 50.0).clamp(area.min[axis], area.max[axis])).collect();
        for (i, w) in edges.windows(2).enumerate() {
            let name = if axis == 0 { (i + 1).to_string() } else { char::from(LETTERS[i % LETTERS.len()]).to_string() };
            let at = (w[0] + w[1]) / 2.0;
            for outer in [area.min[1 - axis], area.max[1 - axis]] {
                let sign = if outer == area.min[1 - axis] { -1.0 } else { 1.0 };
                let (line, text) = if axis == 0 {
                    ([[w[1], outer], [w[1], outer + sign * STRIP]], [at, outer + sign * STRIP / 2.0 + 1.3])
                } else {
                    ([[outer, w[1]], [outer + sign * STRIP, w[1]]], [outer + sign * STRIP / 2.0, at + 1.3])
                };
                if i + 1 < edges.len() - 1 {
                    paper.scene.line(Layer::Frame, &line, pen);
                }
                paper.text(&lettering, Spot { at: text, anchor: Anchor::Middle, upward: false }, &name);
            }
        }
    }
}

/// The title block in the lower right corner, `width` mm wide; returns its top.
pub fn title_block(paper: &mut Paper, job: &Job, title: &Title, width: f64) -> f64 {
    let area = space(title.size);
    let (x0, x1) = (area.max[0] - width, area.max[0]);
    let head = &job.head;
    let kind = if head.revision.starts_with('P') { "preliminary" } else { "contractual" };
    let sheets = format!("{} of {}", title.number, title.of);
    let text = title.size.text;
    let large = if text.note > 3.0 { 5.0 } else { 3.5 };
    // Rows from the bottom up: height of the value, [(share of width, label, value)].
    type Cell<'c> = (f64, &'c str, &'c str);
    let date = head.date_text();
    let status = if head.status.is_empty() { kind } else { &head.status };
    let schedule = if head.schedule.is_empty() { "of this drawing" } else { &head.schedule };
    let rows: Vec<(f64, Vec<Cell>)> = vec![
        (text.number, vec![(0.58, "Drawing number", head.drawing.as_str()), (0.21, "Revision", &head.revision), (0.21, "Sheet", &sheets)]),
        (text.note, vec![(1.0, "Scales", &title.scales)]),
        (large, vec![(0.30, "Job number", &head.number), (0.35, "Date of issue", &date), (0.35, "Status", status)]),
        (text.note, vec![(0.333, "Drawn", &head.drawn_by), (0.333, "Checked", &head.checked_by), (0.334, "Approved", "")]),
        (text.note, vec![(0.5, "Document type", title.document), (0.5, "Bar schedule", schedule)]),
        (large, vec![(1.0, "Title", &head.title)]),
        (text.note, vec![(0.5, "Client", &head.client), (0.5, "Site", &head.site)]),
        (5.0, vec![(0.62, "Project", &head.project), (0.38, "Legal owner", "")]),
    ];
    let pen = Pen::solid(title.size.pens.concrete);
    let label = Lettering { layer: Layer::Frame, mark: String::new(), height: text.label };
    // On A3 the paper is short: labels stand before their values.
    let is_small = title.size.height < 300.0;
    let mut y = area.max[1];
    for (size, cells) in rows {
        let top = y - row_height(text.label, size, is_small);
        paper.line(Layer::Frame, "", &[[x0, top], [x1, top]], pen);
        let mut x = x0;
        for (share, name, value) in cells {
            let right = x + share * width;
            if x > x0 {
                paper.line(Layer::Frame, "", &[[x, top], [x, y]], pen);
            }
            let base = if is_small { y - 0.25 * size - 0.7 } else { top + text.label + 1.0 };
            let named = paper.text(&label, Spot::level([x + 1.2, base], Anchor::Start), name);
            let from = if is_small { named.max[0] + 1.2 } else { x + 1.2 };
            fitted(paper, [from, y - 0.25 * size - 0.7], right - from - 1.2, size, text.label, value);
            x = right;
        }
        y = top;
    }
    paper.line(Layer::Frame, "", &[[x0, y], [x0, area.max[1]]], pen);
    revisions(paper, job, title, x0, width, y)
}

/// Height of a row: label over the value or before it, air.
fn row_height(label: f64, value: f64, is_small: bool) -> f64 {
    if is_small { 1.25 * value + 1.6 } else { 1.0 + 1.25 * label + 0.5 + 1.25 * value + 0.7 }
}

/// The revision table over the title block; returns its top.
fn revisions(paper: &mut Paper, job: &Job, title: &Title, x0: f64, width: f64, bottom: f64) -> f64 {
    let pen = Pen::solid(title.size.pens.thin);
    let note = title.size.text.note;
    let row_height = (1.25 * note + 2.0).max(5.5);
    let head = &job.head;
    let date = head.date_text();
    let kind = if head.revision.starts_with('P') { "Preliminary issue" } else { "Contractual issue" };
    let rows = [[head.revision.as_str(), &date, kind, &head.drawn_by, &head.checked_by], ["Rev", "Date", "Description", "By", "Chk"]];
    let shares = [0.10, 0.18, 0.42, 0.15, 0.15];
    let mut y = bottom;
    for row in rows {
        let top = y - row_height;
        paper.line(Layer::Frame, "", &[[x0, top], [x0 + width, top]], pen);
        let mut x = x0;
        for (text, share) in row.iter().zip(shares) {
            fitted(paper, [x + 1.2, y - 0.25 * note - 1.0], share * width - 2.0, note, title.size.text.label, text);
            x += share * width;
        }
        y = top;
    }
    paper.line(Layer::Frame, "", &[[x0, y], [x0, bottom]], pen);
    y
}

/// Text of a field: as high as wished, lower where it would not fit, but never under the least of the sheet; then cut short.
fn fitted(paper: &mut Paper, at: [f64; 2], room: f64, height: f64, least: f64, text: &str) {
    let width = |h: f64, text: &str| text_area([0.0, 0.0], h, text, Anchor::Start, false).width();
    let fits = [height, 5.0, 3.5, 2.5, 1.8].into_iter().filter(|h| *h <= height && *h >= least).find(|h| width(*h, text) <= room);
    let lettering = Lettering::new(Layer::Frame, fits.unwrap_or(least));
    let shown = if fits.is_some() { text.to_string() } else { shortened(text, |t| width(least, t) <= room) };
    paper.text(&lettering, Spot::level(at, Anchor::Start), &shown);
}

/// As many letters as fit, with dots for the rest.
fn shortened(text: &str, fits: impl Fn(&str) -> bool) -> String {
    let mut short: Vec<char> = text.chars().collect();
    while !short.is_empty() {
        let tried: String = short.iter().collect::<String>().trim_end().to_string() + "...";
        if fits(&tried) {
            return tried;
        }
        short.pop();
    }
    String::new()
}
