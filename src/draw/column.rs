//! The right-hand column: close-ups, key of layers, legend of what is used, notes, stamp.

use super::detail::{Cut, close_up};
use super::paper::{Area, Lettering, Paper, Spot};
use super::view::View;
use crate::job::Slab;
use crate::place::SlabModel;
use crate::plan::Layer as BarLayer;
use crate::scene::{Anchor, Dash, Layer, Pen, Weight};
use crate::tables::font::wrap;

/// How far a close-up looks into the slab, mm.
const LOOK: f64 = 780.0;

fn lettering(height: f64, weight: Weight) -> Lettering {
    Lettering { layer: Layer::Text, mark: String::new(), height, weight }
}

fn heading(paper: &mut Paper, v: &View, area: &Area, y: f64, text: &str) -> f64 {
    paper.text(&lettering(v.call_out, Weight::Medium), Spot { at: [area.min[0], y + v.call_out], anchor: Anchor::Start, upward: false }, text);
    y + v.call_out + 3.5
}

/// How the close-ups are set out: their scale, how many stand side by side, and the paper each takes.
pub struct CloseUps {
    pub scale: f64,
    pub columns: usize,
    pub step: f64,
}

impl CloseUps {
    /// The largest scale at which the four fit a width: two side by side where both find room.
    pub fn in_width(slab: &Slab, width: f64) -> CloseUps {
        let step = |scale: f64| slab.thickness.value / scale + 42.0;
        let takes = |scale: f64| LOOK / scale + SPARE;
        let set = |scale: f64, columns: usize| CloseUps { scale, columns, step: step(scale) };
        if takes(5.0) <= width && slab.thickness.value <= 250.0 {
            set(5.0, 1)
        } else if 2.0 * takes(10.0) <= width + 40.0 {
            set(10.0, 2)
        } else {
            set(20.0, 2)
        }
    }

    pub fn height(&self) -> f64 {
        self.step * (4 / self.columns) as f64
    }
}

/// Paper beside a close-up for its thickness and marks, mm.
const SPARE: f64 = 30.0;

/// Ends and side edges; returns the paper height below them.
pub fn close_ups(paper: &mut Paper, v: &View, slab: &Slab, model: &SlabModel, area: &Area, top: f64) -> f64 {
    let set = CloseUps::in_width(slab, area.width());
    let room = area.width() / set.columns as f64;
    let look = LOOK.min((room - 16.0) * set.scale);
    let st = &model.stations;
    let middle = (st.spans[0].left_face + st.spans[0].right_face) / 2.0;
    let outer_low = st.start.min(st.supports[0].left_face.max(st.start - 120.0));
    let outer_high = st.end.max(st.supports[st.last()].right_face.min(st.end + 120.0));
    let width = slab.width.value;
    let names = (model.grids.first().cloned().unwrap_or_default(), model.grids.last().cloned().unwrap_or_default());
    let scale = set.scale;
    let views = [
        (0, outer_low, outer_low + look, 0.3 * width, format!("End {}  1:{scale}", names.0)),
        (0, outer_high - look, outer_high, 0.3 * width, format!("End {}  1:{scale}", names.1)),
        (1, 0.0, look, middle, format!("Near edge, in span 1  1:{scale}")),
        (1, width - look, width, middle, format!("Far edge, in span 1  1:{scale}")),
    ];
    for (i, (axis, low, high, at, title)) in views.into_iter().enumerate() {
        let (row, place) = (i / set.columns, i % set.columns);
        // A view that opens to the left has its thickness on that side.
        let opens_left = i % 2 == 1;
        let left = area.min[0] + place as f64 * room + if opens_left { room - look / scale - 2.0 } else { 2.0 };
        let corner = [left, top + row as f64 * set.step + 17.0];
        let cut = Cut { slab, model, axis, low, high, at, scale, level_scale: scale, corner };
        let within = Area::new([area.min[0] + place as f64 * room - 2.0, top], [area.min[0] + (place + 1) as f64 * room + 2.0, top + set.height()]);
        close_up(paper, v, &cut, &title, &within);
    }
    top + set.height()
}

/// The marks of the slab in a short table: what the sheet shows, as the schedule lists it.
pub fn bar_list(paper: &mut Paper, v: &View, model: &SlabModel, area: &Area, top: f64) {
    let y = heading(paper, v, area, top, &format!("Marks of slab {}", model.mark));
    let widths = [14.0, 16.0, 14.0, 16.0, 20.0, 16.0, 14.0];
    let heads = ["Mark", "Type", "Each", "Total", "Length", "Shape", "Layer"];
    let line = |paper: &mut Paper, y: f64, cells: &[String], weight: Weight, mark: &str| {
        let mut x = area.min[0];
        for (i, (cell, width)) in cells.iter().zip(widths).enumerate() {
            let right = matches!(i, 2..=4);
            let own = Lettering { layer: Layer::Text, mark: mark.into(), height: v.note, weight };
            let spot = if right {
                Spot { at: [x + width - 5.0, y], anchor: Anchor::End, upward: false }
            } else {
                Spot { at: [x, y], anchor: Anchor::Start, upward: false }
            };
            paper.text(&own, spot, cell);
            x += width;
        }
    };
    let mut at = y + v.note;
    line(paper, at, &heads.map(str::to_string), Weight::Medium, "");
    paper.scene.line(Layer::Text, &[[area.min[0], at + 1.4], [area.min[0] + 108.0, at + 1.4]], Pen::solid(v.pens.thin));
    at += 0.9;
    for bar in &model.bars {
        at += LIST_ROW;
        let cells = [
            bar.mark.clone(),
            bar.type_size(),
            bar.each().to_string(),
            bar.total().to_string(),
            bar.length.to_string(),
            bar.shape.to_string(),
            bar.layer.name().to_string(),
        ];
        line(paper, at, &cells, Weight::Regular, &bar.mark);
    }
}

const LIST_ROW: f64 = 4.6;

pub fn bar_list_height(model: &SlabModel) -> f64 {
    14.0 + LIST_ROW * (model.bars.len() + 1) as f64
}

/// A small section that names the layers and the order of laying.
pub fn layer_key(paper: &mut Paper, v: &View, model: &SlabModel, area: &Area, top: f64) -> f64 {
    let y = heading(paper, v, area, top, "Layers and order of laying");
    let (x0, x1) = (area.min[0] + 2.0, area.min[0] + 52.0);
    let (top, bottom) = (y + 1.0, y + 19.0);
    let pen = Pen::solid(v.pens.concrete);
    paper.outline(Layer::Text, &[[x0, top], [x1, top], [x1, bottom], [x0, bottom]], pen);
    let dots = |paper: &mut Paper, y: f64| {
        for i in 0..5 {
            paper.dot(Layer::Text, "", [x0 + 6.0 + 9.5 * f64::from(i), y], 0.8);
        }
    };
    let heavy = Pen::solid(v.pens.main);
    paper.line(Layer::Text, "", &[[x0 + 2.0, top + 2.6], [x1 - 2.0, top + 2.6]], heavy);
    dots(paper, top + 4.6);
    dots(paper, bottom - 4.6);
    paper.line(Layer::Text, "", &[[x0 + 2.0, bottom - 2.6], [x1 - 2.0, bottom - 2.6]], heavy);
    let has = |layer: BarLayer| model.bars.iter().any(|b| b.layer == layer);
    let rows = [
        (BarLayer::T1, "T1  top, outermost, along the span: laid last", top + 2.6),
        (BarLayer::T2, "T2  across, under T1: on chairs", top + 4.6),
        (BarLayer::B2, "B2  across, on B1", bottom - 4.6),
        (BarLayer::B1, "B1  bottom, outermost, along the span: laid first", bottom - 2.6),
    ];
    for (i, (layer, text, level)) in rows.into_iter().enumerate() {
        let y = top + 2.2 + i as f64 * 5.2;
        if has(layer) || layer == BarLayer::T1 {
            paper.text(&lettering(v.note, Weight::Regular), Spot { at: [x1 + 8.0, y + v.note / 2.0], anchor: Anchor::Start, upward: false }, text);
            paper.scene.line(Layer::Text, &[[x1 - 1.0, level], [x1 + 7.0, y]], Pen::solid(v.pens.thin));
        }
    }
    bottom + 6.0
}

/// Symbols and abbreviations that this sheet uses.
pub fn legend(paper: &mut Paper, v: &View, model: &SlabModel, area: &Area, top: f64) -> f64 {
    let mut y = heading(paper, v, area, top, "Legend");
    let turns = |word: &str| model.bars.iter().flat_map(|b| &b.sets).any(|s| s.turn == word);
    let closing = model.bars.iter().any(|b| !b.is_straight());
    let call_out = super::view::Occurrence::of(model).first().map_or(String::new(), super::view::Occurrence::call_out);
    let mut rows: Vec<(u8, String)> = vec![
        (0, format!("{call_out}: number, type and size, mark, spacing, layer")),
        (1, "one bar of a set; the thin line runs over the zone it fills".into()),
        (2, "a straight end that lies over other bars".into()),
        (3, "a bar that the section cuts".into()),
    ];
    if turns("alt") {
        rows.push((4, "alt: alternate bars of two marks, each at the spacing written; first and last bar are the longer".into()));
    }
    if turns("alt rev") {
        rows.push((4, "alt rev: every second bar turned end for end, all at the spacing written".into()));
    }
    if closing {
        rows.push((4, "E: bars of both faces at ends and edges; U-bar: closes the face".into()));
    }
    rows.push((4, "(n): number in this zone, where the mark stands in several; a mark alone: its turned bar".into()));
    let thin = Pen::solid(v.pens.thin);
    let x = area.min[0];
    for (symbol, text) in rows {
        let m = y + v.note / 2.0;
        match symbol {
            1 => {
                paper.scene.line(Layer::Text, &[[x, m], [x + 14.0, m]], Pen::solid(v.pens.main));
                paper.scene.line(Layer::Text, &[[x + 7.0, m - 2.2], [x + 7.0, m + 2.2]], thin);
                paper.ring(Layer::Text, "", [x + 7.0, m], 0.9, thin);
            }
            2 => {
                paper.scene.line(Layer::Text, &[[x, m + 0.6], [x + 12.0, m + 0.6]], Pen::solid(v.pens.main));
                paper.scene.line(Layer::Text, &[[x + 12.0, m + 0.6], [x + 10.7, m - 0.7]], Pen::solid(v.pens.other));
            }
            3 => paper.dot(Layer::Text, "", [x + 7.0, m], 0.8),
            _ => {}
        }
        for line in wrap(&text, v.note, area.width() - if symbol == 1 || symbol == 2 || symbol == 3 { 18.0 } else { 0.0 }) {
            let x = if symbol == 1 || symbol == 2 || symbol == 3 { x + 18.0 } else { x };
            paper.text(&lettering(v.note, Weight::Regular), Spot { at: [x, y + v.note], anchor: Anchor::Start, upward: false }, &line);
            y += v.note + 1.9;
        }
    }
    y + 3.0
}

/// Numbered notes; returns the paper height below them.
pub fn notes(paper: &mut Paper, v: &View, texts: &[String], area: &Area, top: f64) -> f64 {
    let mut y = heading(paper, v, area, top, "Notes");
    for (i, text) in texts.iter().enumerate() {
        paper.text(&lettering(v.note, Weight::Regular), Spot { at: [area.min[0], y + v.note], anchor: Anchor::Start, upward: false }, &format!("{}", i + 1));
        for line in wrap(text, v.note, area.width() - 7.0) {
            paper.text(&lettering(v.note, Weight::Regular), Spot { at: [area.min[0] + 7.0, y + v.note], anchor: Anchor::Start, upward: false }, &line);
            y += v.note + 1.7;
        }
        y += 0.5;
    }
    y
}

/// Height that notes, legend and key take in a column of this width, mm.
pub fn height(v: &View, texts: &[String], width: f64) -> f64 {
    let lines: usize = texts.iter().map(|t| wrap(t, v.note, width - 7.0).len()).sum();
    let notes = 7.0 + lines as f64 * (v.note + 1.7) + texts.len() as f64 * 0.5;
    let legend = 7.0 + 12.0 * (v.note + 1.9) + 3.0;
    notes + legend + 33.0 + 12.0
}

/// The stamp over the title block, framed.
pub fn stamp(paper: &mut Paper, v: &View, text: &str, area: &Area, bottom: f64) -> f64 {
    let height = 9.0;
    let top = bottom - height - 2.0;
    let pen = Pen { width: v.pens.main, dash: Dash::Solid };
    paper.outline(Layer::Frame, &[[area.min[0], top], [area.max[0], top], [area.max[0], top + height], [area.min[0], top + height]], pen);
    let middle = (area.min[0] + area.max[0]) / 2.0;
    paper.text(&lettering(v.call_out, Weight::Medium), Spot { at: [middle, top + 6.3], anchor: Anchor::Middle, upward: false }, text);
    top
}
