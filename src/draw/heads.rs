//! What runs through all bands of a sheet: grid heads and lines, view titles, match lines, the scale bar.

use super::dimension::level;
use super::label::Label;
use super::paper::{Area, Lettering, Paper, Spot, text_area};
use super::view::{Subject, View};
use crate::base::{mm, num};
use crate::scene::{Anchor, Dash, Layer, Pen};

/// Least radius of the circle round a grid letter, mm.
const CIRCLE: f64 = 4.2;

/// Radius of the circles round the grid names of a slab, mm.
fn circle(v: &View, subject: &Subject) -> f64 {
    let area = |grid: &String| text_area([0.0, v.call_out / 2.0], v.call_out, grid, Anchor::Middle, false);
    let needed = subject.model.grids.iter().map(|g| area(g).max[0].hypot(area(g).max[1]) + 0.5);
    needed.fold(CIRCLE, f64::max)
}

/// Paper of the grid heads and their dimensions, mm.
pub fn heads_height(v: &View, subject: &Subject) -> f64 {
    2.0 * circle(v, subject) + 2.0 + 3.0 * (v.note + 3.2) + 1.0
}

/// Paper of a view title, mm.
pub fn title_height(v: &View) -> f64 {
    v.title + 6.0
}

/// Grid letters in circles; under them the dimensions between grids, then those between the faces of supports.
pub fn heads(paper: &mut Paper, v: &View, subject: &Subject, top: f64) {
    let st = &subject.model.stations;
    let circle = circle(v, subject);
    for (support, grid) in st.supports.iter().zip(&subject.model.grids) {
        if v.shows(support.centre) {
            let x = v.x(support.centre);
            paper.ring(Layer::Grid, "", [x, top + circle], circle, Pen::solid(v.pens.concrete));
            paper.text(&Lettering::new(Layer::Grid, v.call_out), Spot::level([x, top + circle + v.call_out / 2.0], Anchor::Middle), grid);
        }
    }
    let first = top + 2.0 * circle + 2.0 + v.note + 1.6;
    for pair in st.supports.windows(2) {
        if v.shows(pair[0].centre) && v.shows(pair[1].centre) {
            level(paper, v, v.x(pair[0].centre), v.x(pair[1].centre), first, &mm(pair[1].centre - pair[0].centre));
        }
    }
    let second = first + v.note + 3.2;
    let mut faces = vec![st.start];
    faces.extend(st.spans.iter().flat_map(|s| [s.left_face, s.right_face]));
    faces.push(st.end);
    for w in faces.windows(2) {
        let ends_here = v.shows(w[1]) || w[1] - w[0] < super::rows::PAST && w[1] < v.high + super::rows::PAST;
        if v.shows(w[0]) && w[0] < v.high - 0.5 && ends_here && w[1] - w[0] > 0.5 {
            level(paper, v, v.x(w[0]), v.x(w[1]), second, &mm(w[1] - w[0]));
        }
    }
    let name = Lettering::new(Layer::Dimension, v.note);
    let left = v.x(st.start.max(v.low).min(st.supports[0].centre.max(v.low))) - 3.0 - 4.0 * v.note;
    let third = second + v.note + 3.2;
    if v.shows(st.start) && v.shows(st.end) {
        level(paper, v, v.x(st.start), v.x(st.end), third, &mm(st.end - st.start));
    }
    for (y, text) in [(first, "grids"), (second, "faces"), (third, "overall")].into_iter().take(if v.shows(st.start) && v.shows(st.end) { 3 } else { 2 }) {
        paper.text(&name, Spot::level([left, y + v.note / 2.0], Anchor::End), text);
    }
}

/// Grid lines down through every band; titles and texts interrupt them.
pub fn grids(paper: &mut Paper, v: &View, subject: &Subject, top: f64, bottom: f64) {
    let pen = Pen { width: v.pens.thin, dash: Dash::Chain };
    let top = top + 2.0 * circle(v, subject);
    for support in subject.model.stations.supports.iter().filter(|s| v.shows(s.centre)) {
        let x = v.x(support.centre);
        paper.soft_line(Layer::Grid, "", &[[x, top], [x, bottom]], pen);
    }
}

/// A view title with its scale; returns the paper it takes.
pub fn view_title(paper: &mut Paper, v: &View, x: f64, y: f64, title: &str, note: &str) -> Area {
    let base = y + v.title + 2.0;
    let area = paper.text(&Lettering::new(Layer::Text, v.title), Spot::level([x, base], Anchor::Start), title);
    let note = paper.text(&Lettering::new(Layer::Text, v.note), Spot::level([area.max[0] + 4.0, base], Anchor::Start), note);
    Area::new(area.min, [note.max[0], area.max[1]])
}

/// A bar of five metres (or less) at the scale of the plans.
pub fn scale_bar(paper: &mut Paper, v: &View, x: f64, y: f64) {
    let step = if v.scale > 40.0 { 1000.0 } else { 500.0 };
    let pen = Pen::solid(v.pens.thin);
    for i in 0..5 {
        let (a, b) = (x + f64::from(i) * step / v.scale, x + f64::from(i + 1) * step / v.scale);
        let corners = [[a, y], [b, y], [b, y + 1.6], [a, y + 1.6]];
        paper.outline(Layer::Text, &corners, pen);
        if i % 2 == 0 {
            paper.fill(Layer::Text, &corners);
        }
    }
    for i in [0, 1, 5] {
        let text = num(f64::from(i) * step / 1000.0, 1);
        let text = if i == 5 { format!("{text} m") } else { text };
        paper.text(&Lettering::new(Layer::Text, v.note), Spot::level([x + f64::from(i) * step / v.scale, y - 1.2], Anchor::Middle), &text);
    }
}

/// Where a slab goes on over another sheet: a line through all bands with that sheet's number.
pub fn match_line(paper: &mut Paper, v: &View, station: f64, grid: &str, sheet: usize, top: f64, bottom: f64) {
    let x = v.x(station);
    let out = if station > (v.low + v.high) / 2.0 { 1.0 } else { -1.0 };
    let pen = Pen { width: v.pens.concrete, dash: Dash::Chain };
    paper.soft_line(Layer::Grid, "", &[[x + out * 0.8, top], [x + out * 0.8, bottom]], pen);
    let beside = |by: f64| if out < 0.0 { x - by } else { x + by + v.note };
    let down = |by: f64| (0..120).map(move |i| (by, top + 30.0 + 4.0 * f64::from(i))).filter(|(_, y)| *y < bottom - 10.0);
    let side = if out < 0.0 { Anchor::End } else { Anchor::Start };
    let under = [v.note + 2.0, 2.5 * v.note + 2.0].map(|dy| Spot::level([x + out * 2.0, bottom + dy], side));
    let near = [3.0, 8.0, 13.0].into_iter().flat_map(down).map(|(by, y)| Spot::upright([beside(by), y], Anchor::Middle)).chain(under);
    let label =
        Label::new(Lettering::new(Layer::Text, v.note), format!("match line {grid}: see sheet {sheet}"), near.collect(), paper.room, Pen::solid(v.pens.thin))
            .leader([x + out * 0.8, (top + bottom) / 2.0], 90.0)
            .order(3);
    paper.label(label);
}
