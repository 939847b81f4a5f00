//! Dimension lines: level, upright and running; 45° ticks at their ends, figures over them or beside where they are short.

use super::label::Label;
use super::paper::{Lettering, Paper, Spot};
use super::view::View;
use crate::base::mm;
use crate::scene::{Anchor, Layer, Pen};
use crate::tables::font::face;

/// A terminator: a short stroke at 45°.
pub fn tick(paper: &mut Paper, layer: Layer, mark: &str, at: [f64; 2], width: f64) {
    paper.line(layer, mark, &[[at[0] - 1.0, at[1] + 1.0], [at[0] + 1.0, at[1] - 1.0]], Pen::solid(width * 1.4));
}

/// A figure that waits for one of these places, or for one near by with a leader to its dimension.
pub fn figure(paper: &mut Paper, v: &View, near: Vec<Spot>, target: [f64; 2], text: &str) {
    let within = paper.room;
    let label = Label::new(Lettering::new(Layer::Dimension, v.note), text.into(), near, within, Pen::solid(v.pens.thin)).leader(target, 24.0);
    paper.label(label);
}

/// Text base lines over, through and under a level line.
fn over(v: &View, y: f64) -> f64 {
    y - 0.25 * v.note - 0.6
}

fn under(v: &View, y: f64) -> f64 {
    y + v.note + 0.6
}

/// A level dimension line with its terminators, without a figure.
pub fn level_line(paper: &mut Paper, v: &View, x0: f64, x1: f64, y: f64) {
    paper.line(Layer::Dimension, "", &[[x0, y], [x1, y]], Pen::solid(v.pens.thin));
    for x in [x0, x1] {
        tick(paper, Layer::Dimension, "", [x, y], v.pens.thin);
    }
}

/// A level dimension at `y` between two paper stations: the figure over it, or beside where it is short.
pub fn level(paper: &mut Paper, v: &View, x0: f64, x1: f64, y: f64, text: &str) {
    let (x0, x1) = (x0.min(x1), x0.max(x1));
    level_line(paper, v, x0, x1, y);
    let middle = (x0 + x1) / 2.0;
    let mut spots = Vec::new();
    let room = x1 - x0 - face().width(text, v.note);
    if room > 0.6 {
        for share in [0.0, 0.3, -0.3, 0.45, -0.45] {
            spots.push(Spot::level([middle + share * room, over(v, y)], Anchor::Middle));
        }
        spots.push(Spot::level([middle, under(v, y)], Anchor::Middle));
    }
    for out in [1.7, 3.5, 6.0, 9.0] {
        for dy in [v.note / 2.0, -0.25 * v.note - 0.6, v.note + 0.6] {
            spots.push(Spot::level([x1 + out, y + dy], Anchor::Start));
            spots.push(Spot::level([x0 - out, y + dy], Anchor::End));
        }
    }
    if room <= 0.6 {
        spots.push(Spot::level([middle, over(v, y)], Anchor::Middle));
        spots.push(Spot::level([middle, under(v, y)], Anchor::Middle));
        for dy in [1.2, 2.4] {
            spots.push(Spot::level([middle, over(v, y) - dy * v.note], Anchor::Middle));
            spots.push(Spot::level([middle, under(v, y) + dy * v.note], Anchor::Middle));
        }
    }
    figure(paper, v, spots, [middle, y], text);
}

/// An upright dimension at `x` between two paper heights, with extension lines from `from_x`.
pub fn upright(paper: &mut Paper, v: &View, x: f64, y0: f64, y1: f64, from_x: f64, text: &str) {
    let (y0, y1) = (y0.min(y1), y0.max(y1));
    let pen = Pen::solid(v.pens.thin);
    paper.line(Layer::Dimension, "", &[[x, y0], [x, y1]], pen);
    let sign = (from_x - x).signum();
    for y in [y0, y1] {
        paper.soft_line(Layer::Dimension, "", &[[from_x, y], [x - sign * 1.5, y]], pen);
        tick(paper, Layer::Dimension, "", [x, y], v.pens.thin);
    }
    let middle = (y0 + y1) / 2.0;
    let room = y1 - y0 - face().width(text, v.note);
    let (left, right) = (over(v, x), under(v, x));
    let mut spots = Vec::new();
    if room > 0.6 {
        for share in [0.0, 0.3, -0.3] {
            spots.extend([left, right].map(|x| Spot::upright([x, middle + share * room], Anchor::Middle)));
        }
    }
    let beside = if sign > 0.0 { (x - 1.8, Anchor::End) } else { (x + 1.8, Anchor::Start) };
    spots.push(Spot::level([beside.0, middle + v.note / 2.0], beside.1));
    for out in [1.8, 4.0, 7.0] {
        spots.push(Spot::upright([x + v.note / 2.0, y0 - out], Anchor::Start));
        spots.push(Spot::upright([x + v.note / 2.0, y1 + out], Anchor::End));
    }
    figure(paper, v, spots, [x, middle], text);
}

/// A place that a running dimension names: its station on paper, its distance from the origin, where its extension line begins.
pub struct Stop {
    pub x: f64,
    pub distance: f64,
    pub from_y: f64,
}

/// Running dimensions from a grid: an open circle at the origin, a tick at each stop, its distance written beside it, upright.
/// Figures hang under the line, so that the chain stays short; stops of one station are one.
pub fn running(paper: &mut Paper, v: &View, origin: f64, y: f64, stops: &[Stop]) {
    let pen = Pen::solid(v.pens.thin);
    let (low, high) = stops.iter().fold((origin, origin), |(a, b), s| (a.min(s.x), b.max(s.x)));
    paper.line(Layer::Dimension, "", &[[low, y], [high, y]], pen);
    paper.ring(Layer::Dimension, "", [origin, y], 0.8, pen);
    for stop in stops {
        if (stop.from_y - y).abs() > 0.8 {
            paper.soft_line(Layer::Dimension, "", &[[stop.x, stop.from_y + (y - stop.from_y).signum() * 0.8], [stop.x, y]], pen);
        }
        tick(paper, Layer::Dimension, "", [stop.x, y], v.pens.thin);
        running_figure(paper, v, stop.x, origin, y, stop.distance);
    }
}

/// The figure of a running dimension at its stop: upright, under the line, else over it or beside.
pub fn running_figure(paper: &mut Paper, v: &View, x: f64, origin: f64, y: f64, distance: f64) {
    let outward = if x < origin { -1.0 } else { 1.0 };
    let mut spots = Vec::new();
    let middle = v.note / 2.0;
    for shift in [0.0, 0.8, 1.6, -0.8, 2.2, -1.6, 2.8, 3.4, -2.4, 4.2, 5.0, 6.0, 7.0] {
        let at = x + outward * shift + middle;
        spots.push(Spot::upright([at, y + 1.7], Anchor::End));
    }
    for shift in [0.0, 0.8, 1.6, 2.6, 3.6] {
        spots.push(Spot::upright([x + outward * (shift + 1.0) + middle, y - 1.7], Anchor::Start));
    }
    let side = if outward > 0.0 { Anchor::Start } else { Anchor::End };
    for out in [1.7, 4.0, 7.0] {
        spots.push(Spot::level([x + outward * out, y + middle], side));
    }
    for drop in [3.2, 5.0, 7.0, 9.0, 12.0] {
        for shift in [0.0, 0.8, -0.8] {
            spots.push(Spot::upright([x + outward * shift + middle, y + drop], Anchor::End));
        }
    }
    figure(paper, v, spots, [x, y], &mm(distance));
}
