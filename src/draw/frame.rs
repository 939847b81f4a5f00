//! The sheet's border, grid fields and title block (ISO 5457, ISO 7200).

use super::paper::{Area, Lettering, Paper, Spot, text_area};
use crate::job::Job;
use crate::scene::{Anchor, Layer, Pen, Weight};
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
    let thin = Pen::solid(size.pens.concrete);
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
        paper.scene.line(Layer::Frame, &[a, b], Pen::solid(s.frame_pen));
    }
    fields(paper, size, &area, thin);
}

/// Grid fields of 50 mm from the centring marks outwards: letters from the top, without I and O, numerals from the left.
fn fields(paper: &mut Paper, size: &SheetSize, area: &Area, pen: Pen) {
    const STRIP: f64 = 5.0;
    const LETTERS: &[u8] = b"ABCDEFGHJKLMNPQRSTUVWXYZ";
    let lettering = Lettering { layer: Layer::Frame, mark: String::new(), height: 2.5, weight: Weight::Regular };
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
                    ([[w[1], outer], [w[1], outer + sign * STRIP]], [at, outer + sign * STRIP / 2.0 + 1.2])
                } else {
                    ([[outer, w[1]], [outer + sign * STRIP, w[1]]], [outer + sign * STRIP / 2.0, at + 1.2])
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
    // Rows from the bottom up: (height, [(share of width, label, value, height of text)]).
    type Cell<'c> = (f64, &'c str, &'c str, f64);
    let date = head.date_text();
    let rows: Vec<(f64, Vec<Cell>)> = vec![
        (13.0, vec![(0.62, "Drawing number", &head.drawing, 7.0), (0.19, "Revision", &head.revision, 7.0), (0.19, "Sheet", &sheets, 3.5)]),
        (9.0, vec![(0.25, "Job number", &head.number, 3.5), (0.25, "Date", &date, 3.5), (0.5, "Scales", &title.scales, 2.5)]),
        (
            9.0,
            vec![
                (0.25, "Drawn", &head.drawn_by, 2.5),
                (0.25, "Checked", &head.checked_by, 2.5),
                (0.25, "Approved", "", 2.5),
                (0.25, "Status", if head.status.is_empty() { kind } else { &head.status }, 2.5),
            ],
        ),
        (
            9.0,
            vec![
                (0.5, "Document", title.document, 2.5),
                (0.5, "Bar schedule", if head.schedule.is_empty() { "see the schedule of this drawing" } else { &head.schedule }, 2.5),
            ],
        ),
        (10.0, vec![(1.0, "Title", &head.title, 3.5)]),
        (9.0, vec![(0.5, "Client", &head.client, 2.5), (0.5, "Site", &head.site, 2.5)]),
        (11.0, vec![(1.0, "Project", &head.project, 5.0)]),
    ];
    let pen = Pen::solid(title.size.pens.concrete);
    let label = Lettering { layer: Layer::Frame, mark: String::new(), height: 1.8, weight: Weight::Regular };
    let mut y = area.max[1];
    for (height, cells) in rows {
        let top = y - height;
        paper.line(Layer::Frame, "", &[[x0, top], [x1, top]], pen);
        let mut x = x0;
        for (share, name, value, size) in cells {
            let right = x + share * width;
            if x > x0 {
                paper.line(Layer::Frame, "", &[[x, top], [x, y]], pen);
            }
            paper.text(&label, Spot { at: [x + 1.2, top + 2.8], anchor: Anchor::Start, upward: false }, name);
            fitted(paper, [x + 1.2, y - 1.8], right - x - 2.4, size, value);
            x = right;
        }
        y = top;
    }
    paper.line(Layer::Frame, "", &[[x0, y], [x0, area.max[1]]], pen);
    revisions(paper, job, title, x0, width, y)
}

/// The revision table over the title block; returns its top.
fn revisions(paper: &mut Paper, job: &Job, title: &Title, x0: f64, width: f64, bottom: f64) -> f64 {
    const ROW: f64 = 5.5;
    let pen = Pen::solid(title.size.pens.thin);
    let head = &job.head;
    let date = head.date_text();
    let kind = if head.revision.starts_with('P') { "Preliminary issue" } else { "Contractual issue" };
    let rows = [[head.revision.as_str(), &date, kind, &head.drawn_by, &head.checked_by], ["Rev", "Date", "Description", "By", "Chk"]];
    let shares = [0.10, 0.18, 0.42, 0.15, 0.15];
    let mut y = bottom;
    for row in rows {
        let top = y - ROW;
        paper.line(Layer::Frame, "", &[[x0, top], [x0 + width, top]], pen);
        let mut x = x0;
        for (text, share) in row.iter().zip(shares) {
            fitted(paper, [x + 1.2, y - 1.6], share * width - 2.0, 2.5, text);
            x += share * width;
        }
        y = top;
    }
    paper.line(Layer::Frame, "", &[[x0, y], [x0, bottom]], pen);
    y
}

/// Text of a field: as high as wished, lower where it would not fit, but never under 1.8 mm; then on two lines.
fn fitted(paper: &mut Paper, at: [f64; 2], room: f64, height: f64, text: &str) {
    let weight = if height > 3.0 { Weight::Medium } else { Weight::Regular };
    let width = |h: f64| text_area([0.0, 0.0], h, text, Anchor::Start, weight, false).width();
    let fits = [height, 5.0, 3.5, 2.5, 1.8].into_iter().filter(|h| *h <= height).find(|h| width(*h) <= room);
    let height = fits.unwrap_or(1.8);
    let lettering = Lettering { layer: Layer::Frame, mark: String::new(), height, weight };
    let spot = |y: f64| Spot { at: [at[0], y], anchor: Anchor::Start, upward: false };
    if fits.is_some() {
        paper.text(&lettering, spot(at[1]), text);
        return;
    }
    for (i, line) in crate::tables::font::wrap(text, height, room).iter().take(2).enumerate() {
        paper.text(&lettering, spot(at[1] - 2.4 + 2.6 * i as f64), line);
    }
}

/// Height of the title block with its revision table, mm.
pub const TITLE_HEIGHT: f64 = 70.0 + 11.0;
