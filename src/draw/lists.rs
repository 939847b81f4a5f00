//! Lists beside the drawing: the marks as the schedule has them, the schedules of the drawing, the key plan.

use super::column::{heading, line_step};
use super::paper::{Area, Lettering, Paper, Spot};
use super::view::View;
use crate::base::num;
use crate::job::Job;
use crate::place::{BarModel, SlabModel};
use crate::scene::{Anchor, Layer, Pen};
use crate::tables::font::face;

/// Columns of the list of marks: head, share of the width, whether it is a figure.
const COLUMNS: [(&str, f64, bool); 7] = [
    ("Mark", 0.13, false),
    ("Type", 0.14, false),
    ("Each", 0.12, true),
    ("Total", 0.13, true),
    ("Length", 0.18, true),
    ("Shape", 0.15, true),
    ("Layer", 0.15, true),
];
/// Most width that the list of marks takes, in heights of a note.
const WIDE: f64 = 46.0;

/// Paper height of the list of marks, mm.
pub fn marks_height(v: &View, model: &SlabModel) -> f64 {
    v.call_out * 1.25 + 3.1 + (line_step(v) + 0.6) * (model.bars.len() + 1) as f64 + 4.0
}

/// The marks of the slab: what the sheet shows, as the schedule lists it.
pub fn marks(paper: &mut Paper, v: &View, model: &SlabModel, area: &Area, top: f64) {
    let area = Area::new(area.min, [area.max[0].min(area.min[0] + WIDE * v.note), area.max[1]]);
    let mut y = heading(paper, v, &area, top, &format!("Marks of slab {}", model.mark));
    let step = line_step(v) + 0.6;
    let mut line = |cells: [String; 7], mark: &str| {
        let mut x = area.min[0];
        for (cell, (_, share, is_figure)) in cells.iter().zip(COLUMNS) {
            let width = share * area.width();
            let spot = if is_figure { Spot::level([x + width - 1.0, y + v.note], Anchor::End) } else { Spot::level([x, y + v.note], Anchor::Start) };
            paper.text(&Lettering::of(Layer::Text, mark, v.note), spot, cell);
            x += width;
        }
        y += step;
    };
    line(COLUMNS.map(|c| c.0.to_string()), "");
    for bar in &model.bars {
        let cells = [
            bar.mark.clone(),
            bar.type_size(),
            bar.each().to_string(),
            bar.total().to_string(),
            bar.length.to_string(),
            bar.shape.to_string(),
            bar.layer.name().to_string(),
        ];
        line(cells, &bar.mark);
    }
}

/// Which schedule lists the bars of this drawing, with its marks, numbers and mass.
pub fn schedules(paper: &mut Paper, v: &View, job: &Job, model: &BarModel, area: &Area, top: f64) -> f64 {
    let y = heading(paper, v, area, top, "Schedules of this drawing");
    let marks: Vec<&str> = model.bars().map(|(_, b)| b.mark.as_str()).collect();
    let (first, last) = (marks.first().copied().unwrap_or("-"), marks.last().copied().unwrap_or("-"));
    let name = if job.head.schedule.is_empty() { format!("Bar schedule of {}", job.head.drawing) } else { job.head.schedule.clone() };
    let bars: u32 = model.bars().map(|(_, b)| b.total()).sum();
    let lines = [format!("{name}, revision {}", job.head.revision), format!("marks {first} to {last}: {bars} bars, {} t", num(model.total_kg() / 1000.0, 2))];
    for (i, text) in lines.iter().enumerate() {
        let at = [area.min[0], y + v.note + i as f64 * line_step(v)];
        paper.text(&Lettering::new(Layer::Text, v.note), Spot::level(at, Anchor::Start), text);
    }
    y + 2.0 * line_step(v) + 4.0
}

const KEY: f64 = 24.0;

fn named(slab: &SlabModel) -> String {
    if slab.members > 1 { format!("{} x {}", slab.mark, slab.members) } else { slab.mark.clone() }
}

/// The slabs of the drawing side by side at one scale, what this sheet shows hatched.
pub fn key_plan(paper: &mut Paper, v: &View, model: &BarModel, shown: (&str, f64, f64), area: &Area, top: f64) -> f64 {
    let y = top;
    let gap = 6.0;
    let lengths: Vec<f64> = model.slabs.iter().map(|s| s.stations.end - s.stations.start).collect();
    let widest = model.slabs.iter().map(|s| s.width).fold(1.0, f64::max);
    let total: f64 = lengths.iter().sum::<f64>().max(1.0);
    let scale = ((area.width() - gap * lengths.len() as f64) / total).min(KEY / widest);
    let names: f64 = model.slabs.iter().map(|s| face().width(&named(s), v.note) + gap).sum();
    // Too many slabs for one row of boxes: the sheet titles tell them apart.
    if scale <= 0.0 || names > area.width() {
        return top;
    }
    let y = heading(paper, v, area, y, "Key plan: slabs of this drawing, not set out");
    let mut x = area.min[0];
    for (slab, length) in model.slabs.iter().zip(&lengths) {
        let (w, h) = ((length * scale).max(1.5), (slab.width * scale).max(1.5));
        let bottom = y + KEY;
        let corners = [[x, bottom - h], [x + w, bottom - h], [x + w, bottom], [x, bottom]];
        paper.outline(Layer::Text, &corners, Pen::solid(v.pens.concrete));
        for support in &slab.stations.supports {
            let at = (x + (support.centre - slab.stations.start) * scale).clamp(x, x + w);
            paper.line(Layer::Text, "", &[[at, bottom - h], [at, bottom]], Pen::solid(v.pens.thin));
        }
        if slab.mark == shown.0 {
            let from = x + ((shown.1 - slab.stations.start).max(0.0) * scale).min(w);
            let to = x + ((shown.2 - slab.stations.start) * scale).clamp(0.0, w);
            hatch(paper, v, from, bottom - h, to, bottom);
        }
        let area = paper.text(&Lettering::new(Layer::Text, v.note), Spot::level([x, bottom + v.note + 1.2], Anchor::Start), &named(slab));
        x = (x + w).max(area.max[0]) + gap;
    }
    y + KEY + v.note + 6.0
}

/// Lines at 45° inside a rectangle.
fn hatch(paper: &mut Paper, v: &View, x0: f64, y0: f64, x1: f64, y1: f64) {
    let (w, h) = (x1 - x0, y1 - y0);
    let mut at = 1.6;
    while at < w + h {
        let a = [x0 + at.min(w), y1 - (at - w).max(0.0)];
        let b = [x0 + (at - h).max(0.0), y1 - at.min(h)];
        paper.line(Layer::Text, "", &[a, b], Pen::solid(v.pens.thin));
        at += 1.6;
    }
}
