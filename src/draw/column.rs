//! The right-hand column: key of layers, legend of what is used, notes, stamp.

use super::paper::{Area, Lettering, Paper, Spot};
use super::view::{Subject, View};
use crate::place::SlabModel;
use crate::plan::{Layer as BarLayer, Role};
use crate::scene::{Anchor, Dash, Layer, Pen};
use crate::tables::font::wrap;

/// Paper from one line of text to the next, mm.
pub(super) fn line_step(v: &View) -> f64 {
    v.note * 1.45
}

fn write(paper: &mut Paper, v: &View, x: f64, y: f64, text: &str) {
    paper.text(&Lettering::new(Layer::Text, v.note), Spot::level([x, y + v.note], Anchor::Start), text);
}

/// A heading with a thin line under it; returns the paper height below.
pub(super) fn heading(paper: &mut Paper, v: &View, area: &Area, y: f64, text: &str) -> f64 {
    let height = v.call_out.max(v.note);
    paper.text(&Lettering::new(Layer::Text, height), Spot::level([area.min[0], y + height], Anchor::Start), text);
    let under = y + 1.25 * height + 0.9;
    paper.line(Layer::Text, "", &[[area.min[0], under], [area.max[0], under]], Pen::solid(v.pens.thin));
    under + 2.2
}

/// Lines of a text in a width; returns the paper height below them.
fn paragraph(paper: &mut Paper, v: &View, x: f64, width: f64, y: f64, text: &str) -> f64 {
    let mut y = y;
    for line in wrap(text, v.note, width) {
        write(paper, v, x, y, &line);
        y += line_step(v);
    }
    y
}

/// A small section that names the layers and says in which order they are laid.
pub fn layer_key(paper: &mut Paper, v: &View, model: &SlabModel, area: &Area, top: f64) -> f64 {
    let y = heading(paper, v, area, top, "Layers and order of laying");
    let has = |layer: BarLayer| model.bars.iter().any(|b| b.layer == layer);
    let has_end_top = model.bars.iter().any(|b| b.layer == BarLayer::E && b.role == Role::EndTop);
    let has_edge = model.bars.iter().any(|b| b.layer == BarLayer::E && b.role == Role::Edge);
    let rows = [
        (BarLayer::T1, "top, outermost, along the span"),
        (BarLayer::T2, if has(BarLayer::T1) { "across, under T1, on chairs" } else { "across, on chairs" }),
        (BarLayer::E, "both faces, at ends and edges"),
        (BarLayer::B2, if has_edge { "across, on B1, with the bars of the edges" } else { "across, on B1" }),
        (BarLayer::B1, if has_end_top { "bottom, along the span, with the bars of the ends" } else { "bottom, outermost, along the span" }),
    ];
    let laid: Vec<(BarLayer, &str)> = rows.into_iter().filter(|(layer, _)| has(*layer)).collect();
    let pitch = line_step(v) + 0.4;
    let height = pitch * (laid.len().max(3) as f64 - 1.0) + v.note + 3.0;
    let (x0, x1) = (area.min[0] + 1.0, area.min[0] + 42.0);
    let bottom = y + height;
    paper.outline(Layer::Text, &[[x0, y], [x1, y], [x1, bottom], [x0, bottom]], Pen::solid(v.pens.concrete));
    let heavy = Pen::solid(v.pens.main);
    let dots = |paper: &mut Paper, y: f64| {
        for i in 0..4 {
            paper.dot(Layer::Text, "", [x0 + 7.0 + 9.0 * f64::from(i), y], 0.8);
        }
    };
    // Where the leader of each layer starts in the key.
    let mut levels: Vec<(BarLayer, f64)> = Vec::new();
    if has(BarLayer::T1) || has_end_top {
        paper.line(Layer::Text, "", &[[x0 + 3.0, y + 2.6], [x1 - 3.0, y + 2.6]], heavy);
        levels.push((BarLayer::T1, y + 2.6));
    }
    if has(BarLayer::T2) {
        dots(paper, y + 4.4);
        levels.push((BarLayer::T2, y + 4.4));
    }
    dots(paper, bottom - 4.4);
    levels.push((BarLayer::B2, bottom - 4.4));
    paper.line(Layer::Text, "", &[[x0 + 3.0, bottom - 2.6], [x1 - 3.0, bottom - 2.6]], heavy);
    levels.push((BarLayer::B1, bottom - 2.6));
    if has(BarLayer::E) {
        let x = x1 - 1.9;
        paper.line(Layer::Text, "", &[[x - 9.0, y + 6.2], [x, y + 6.2], [x, bottom - 6.2], [x - 9.0, bottom - 6.2]], heavy);
        levels.push((BarLayer::E, (y + bottom) / 2.0));
    }
    let first = (y + bottom) / 2.0 - pitch * (laid.len() as f64 - 1.0) / 2.0;
    let mut order = laid.iter().filter(|(layer, _)| *layer != BarLayer::E).count();
    for (i, (layer, text)) in laid.iter().enumerate() {
        let at = first + i as f64 * pitch;
        // Bars of both faces go in with the mats they belong to: they have no number of their own.
        let number = if *layer == BarLayer::E { " ".to_string() } else { order.to_string() };
        order -= usize::from(*layer != BarLayer::E);
        write(paper, v, x1 + 10.0, at - v.note / 2.0, &number);
        write(paper, v, x1 + 10.0 + 1.6 * v.note, at - v.note / 2.0, &format!("{}  {text}", layer.name()));
        if let Some((_, level)) = levels.iter().find(|(l, _)| l == layer) {
            paper.line(Layer::Text, "", &[[x1 - 1.5, *level], [x1 + 8.6, at]], Pen::solid(v.pens.thin));
        }
    }
    bottom + 5.0
}

/// Signs of the legend.
#[derive(Clone, Copy, PartialEq)]
enum Sign {
    Words,
    Zone,
    End,
    Cut,
    Running,
    Hidden,
}

/// Symbols and abbreviations that this sheet uses.
pub fn legend(paper: &mut Paper, v: &View, subject: &Subject, area: &Area, top: f64) -> f64 {
    let mut y = heading(paper, v, area, top, "Legend");
    let model = subject.model;
    let turns = |word: &str| model.bars.iter().flat_map(|b| &b.sets).any(|s| s.turn == word);
    let call_out = subject.occurrences.first().map_or(String::new(), super::view::Occurrence::call_out);
    let mut rows: Vec<(Sign, String)> = vec![
        (Sign::Words, format!("{call_out}: number, type and size, mark, spacing, layer")),
        (Sign::Zone, "one bar of a set; the thin line runs over the zone it fills".into()),
        (Sign::End, "end of a straight bar".into()),
        (Sign::Cut, "bar cut by the section".into()),
        (Sign::Running, "running dimensions: bar ends, first and last bars, each from the grid at the circle".into()),
        (Sign::Hidden, "face under the slab".into()),
    ];
    if turns("alt") {
        rows.push((Sign::Words, "alt: two marks take turns; spacing of this mark alone; the longer first and last".into()));
    }
    if turns("alt rev") {
        rows.push((Sign::Words, "alt rev: one mark, every second bar the other way round, as the two drawn; spacing of all".into()));
    }
    if subject.occurrences.iter().any(|o| o.elsewhere) {
        rows.push((Sign::Words, "(n): number in this zone, of a mark in several; its total stands at its first call-out".into()));
    }
    if subject.occurrences.iter().any(|o| o.pieces() > 1) {
        rows.push((Sign::Words, "(n \u{d7} k): n lines, each of k lapped bars".into()));
    }
    rows.push((Sign::Words, "L: cut length; E: bars of both faces".into()));
    let (thin, x) = (Pen::solid(v.pens.thin), area.min[0]);
    for (sign, text) in rows {
        let m = y + v.note * 0.6;
        match sign {
            Sign::Words => {}
            Sign::Zone => {
                paper.line(Layer::Text, "", &[[x, m], [x + 14.0, m]], Pen::solid(v.pens.main));
                paper.line(Layer::Text, "", &[[x + 7.0, m - 2.0], [x + 7.0, m + 2.0]], thin);
                paper.ring(Layer::Text, "", [x + 7.0, m], 0.9, thin);
            }
            Sign::End => {
                paper.line(Layer::Text, "", &[[x, m + 0.6], [x + 12.0, m + 0.6]], Pen::solid(v.pens.main));
                paper.line(Layer::Text, "", &[[x + 12.0, m + 0.6], [x + 10.7, m - 0.7]], Pen::solid(v.pens.other));
            }
            Sign::Cut => paper.dot(Layer::Text, "", [x + 7.0, m], 0.8),
            Sign::Running => {
                paper.line(Layer::Text, "", &[[x, m], [x + 13.0, m]], thin);
                paper.ring(Layer::Text, "", [x, m], 0.8, thin);
                for at in [x + 7.0, x + 13.0] {
                    super::dimension::tick(paper, Layer::Text, "", [at, m], v.pens.thin);
                }
            }
            Sign::Hidden => paper.line(Layer::Text, "", &[[x, m], [x + 14.0, m]], Pen { width: v.pens.thin, dash: Dash::Dashed }),
        }
        let left = if sign == Sign::Words { 0.0 } else { 18.0 };
        y = paragraph(paper, v, x + left, area.width() - left, y, &text);
    }
    y + 3.5
}

/// Numbered notes; returns the paper height below them.
pub fn notes(paper: &mut Paper, v: &View, texts: &[String], area: &Area, top: f64) -> f64 {
    let mut y = heading(paper, v, area, top, "Notes");
    let indent = 2.4 * v.note;
    for (i, text) in texts.iter().enumerate() {
        write(paper, v, area.min[0], y, &format!("{}", i + 1));
        y = paragraph(paper, v, area.min[0] + indent, area.width() - indent, y, text) + 0.5;
    }
    y + 3.0
}

/// The stamp over the title block, framed; returns its top.
pub fn stamp(paper: &mut Paper, v: &View, text: &str, area: &Area, bottom: f64) -> f64 {
    let lines = wrap(text, v.call_out, area.width() - 6.0);
    let step = v.call_out * 1.25 + 1.2;
    let height = step * lines.len() as f64 + 4.0;
    let top = bottom - height - 2.0;
    let corners = [[area.min[0], top], [area.max[0], top], [area.max[0], top + height], [area.min[0], top + height]];
    paper.outline(Layer::Frame, &corners, Pen::solid(v.pens.main));
    let middle = (area.min[0] + area.max[0]) / 2.0;
    for (i, line) in lines.iter().enumerate() {
        let y = top + 2.2 + v.call_out + i as f64 * step;
        paper.text(&Lettering::new(Layer::Text, v.call_out), Spot::level([middle, y], Anchor::Middle), line);
    }
    top
}
