//! The dimensioned sketch of a bar that has no shape code (shape 99): drawn from its own centre line, every leg and every other angle than
//! a right one written at it.

use super::form::{DATA, FINE, LABEL};
use super::paper::{Area, Lettering, Paper, Spot};
use super::picture::rounded;
use crate::base::{Point3, num, whole};
use crate::place::BarType;
use crate::scene::{Anchor, Layer, Pen};

/// Paper between a leg and its dimension line, mm.
const OFFSET: f64 = 4.0;
/// Clear paper round the bar inside the box, mm.
const AROUND: f64 = 10.5;

/// The centre line in its own plane, mm, y down; and the extent across that plane, which is nothing for bars that can be bent flat.
fn flat(axis: &[Point3]) -> (Vec<[f64; 2]>, f64) {
    let extent = |i: usize| {
        let values = axis.iter().map(|p| p[i]);
        values.clone().fold(f64::NEG_INFINITY, f64::max) - values.fold(f64::INFINITY, f64::min)
    };
    let extents: [f64; 3] = std::array::from_fn(extent);
    // Level lines stay level: the upright axis is drawn up wherever the bar has any height.
    let least = (0..3).min_by(|a, b| extents[*a].total_cmp(&extents[*b])).unwrap_or(1);
    let kept: Vec<usize> = (0..3).filter(|i| *i != least).collect();
    (axis.iter().map(|p| [p[kept[0]], -p[kept[1]]]).collect(), extents[least])
}

/// A leg as it is measured: over the outside of the bends at its ends, mm.
fn legs(points: &[[f64; 2]], size: f64) -> Vec<i32> {
    let turn = |i: usize| {
        let heading = |a: [f64; 2], b: [f64; 2]| (b[1] - a[1]).atan2(b[0] - a[0]);
        let by = heading(points[i], points[i + 1]) - heading(points[i - 1], points[i]);
        let by = by.sin().atan2(by.cos()).abs();
        size / 2.0 * (by.min(std::f64::consts::FRAC_PI_2) / 2.0).tan()
    };
    let ends = |i: usize| if i == 0 || i + 1 == points.len() { 0.0 } else { turn(i) };
    let length = |i: usize| (points[i + 1][0] - points[i][0]).hypot(points[i + 1][1] - points[i][1]);
    (0..points.len().saturating_sub(1)).map(|i| whole(length(i) + ends(i) + ends(i + 1))).collect()
}

/// Draws the bar into a box. A bar with no centre line, or one that leaves its plane, says so instead of being half shown.
pub fn sketch(paper: &mut Paper, bar: &BarType, min: [f64; 2], max: [f64; 2], pen: Pen) {
    let note = Lettering { layer: Layer::Text, mark: String::new(), height: LABEL };
    let within = Area::new(min, max).grown(-0.4);
    let axis = bar.sets.first().map_or(&[][..], |s| &s.axis);
    let (points, across) = flat(axis);
    let fault = if points.len() < 2 {
        Some("no centre line: see the drawing")
    } else if across > 1.0 {
        Some("not in one plane: see the drawing")
    } else {
        None
    };
    if let Some(fault) = fault {
        let at = [(min[0] + max[0]) / 2.0, (min[1] + max[1]) / 2.0];
        paper.text(&note, Spot { at, anchor: Anchor::Middle, upward: false }, fault);
        return;
    }
    let drawn = mapped(&points, min, max);
    paper.line(Layer::Edge, &bar.mark, &rounded(&drawn, 1.5), pen);
    let centre: [f64; 2] = std::array::from_fn(|i| drawn.iter().map(|p| p[i]).sum::<f64>() / drawn.len() as f64);
    let lettering = Lettering { layer: Layer::Text, mark: String::new(), height: DATA };
    let lines: Vec<_> = drawn.windows(2).map(|w| dimension(paper, w[0], w[1], centre)).collect();
    for ((a, b), length) in lines.iter().zip(legs(&points, f64::from(bar.size))) {
        paper.place(&lettering, beside(*a, *b, centre), &length.to_string(), &within);
    }
    for (corner, real) in drawn.windows(3).zip(points.windows(3)) {
        angle(paper, &note, corner, real, &within);
    }
    let about = "over all, mm; not to scale";
    paper.place(&note, corners(min, max), about, &within);
}

/// The bar on paper: directions kept, short legs drawn longer than they are.
fn mapped(points: &[[f64; 2]], min: [f64; 2], max: [f64; 2]) -> Vec<[f64; 2]> {
    let longest = points.windows(2).map(|w| (w[1][0] - w[0][0]).hypot(w[1][1] - w[0][1])).fold(1e-6, f64::max);
    let mut at = [0.0f64, 0.0];
    let mut walked = vec![at];
    for w in points.windows(2) {
        let d = [w[1][0] - w[0][0], w[1][1] - w[0][1]];
        let length = d[0].hypot(d[1]);
        if length > 1e-6 {
            let shown = 0.3 + 0.7 * length / longest;
            at = [at[0] + d[0] / length * shown, at[1] + d[1] / length * shown];
        }
        walked.push(at);
    }
    let low: [f64; 2] = std::array::from_fn(|i| walked.iter().map(|p| p[i]).fold(f64::INFINITY, f64::min));
    let high: [f64; 2] = std::array::from_fn(|i| walked.iter().map(|p| p[i]).fold(f64::NEG_INFINITY, f64::max));
    let room: [f64; 2] = std::array::from_fn(|i| max[i] - min[i] - 2.0 * AROUND);
    let scale = (0..2).map(|i| room[i] / (high[i] - low[i]).max(1e-6)).fold(45.0, f64::min);
    walked.iter().map(|p| std::array::from_fn(|i| (min[i] + max[i]) / 2.0 + (p[i] - (low[i] + high[i]) / 2.0) * scale)).collect()
}

/// The direction from a leg away from the middle of the bar.
fn outward(a: [f64; 2], b: [f64; 2], centre: [f64; 2]) -> [f64; 2] {
    let d = [b[0] - a[0], b[1] - a[1]];
    let length = d[0].hypot(d[1]).max(1e-6);
    let n = [-d[1] / length, d[0] / length];
    let middle = [(a[0] + b[0]) / 2.0 - centre[0], (a[1] + b[1]) / 2.0 - centre[1]];
    if n[0] * middle[0] + n[1] * middle[1] >= 0.0 { n } else { [-n[0], -n[1]] }
}

/// A dimension line beside a leg, with extension lines and ticks; returns its ends.
fn dimension(paper: &mut Paper, a: [f64; 2], b: [f64; 2], centre: [f64; 2]) -> ([f64; 2], [f64; 2]) {
    let n = outward(a, b, centre);
    let off = |p: [f64; 2], by: f64| [p[0] + n[0] * by, p[1] + n[1] * by];
    for p in [a, b] {
        paper.line(Layer::Dimension, "", &[off(p, 1.0), off(p, OFFSET + 1.0)], FINE);
        let c = off(p, OFFSET);
        paper.line(Layer::Dimension, "", &[[c[0] - 0.7, c[1] + 0.7], [c[0] + 0.7, c[1] - 0.7]], FINE);
    }
    let ends = (off(a, OFFSET), off(b, OFFSET));
    paper.line(Layer::Dimension, "", &[ends.0, ends.1], FINE);
    ends
}

/// Places for the figure of a dimension: on the far side of its line, then on the near one; upright lines read from the right.
fn beside(a: [f64; 2], b: [f64; 2], centre: [f64; 2]) -> Vec<Spot> {
    let n = outward(a, b, centre);
    let is_upright = (b[0] - a[0]).abs() < 0.2 * (b[1] - a[1]).abs();
    let mut list = Vec::new();
    for (side, aside) in [(1.0, 1.0), (1.0, 2.5), (-1.0, 1.0), (1.0, 4.5), (-1.0, 3.0)] {
        for share in [0.5, 0.35, 0.65, 0.2, 0.8, -0.2, 1.2] {
            let at = [a[0] + share * (b[0] - a[0]) + side * aside * n[0], a[1] + share * (b[1] - a[1]) + side * aside * n[1]];
            let to = [side * n[0], side * n[1]];
            // The base line lies under the figure: it is moved by the figure's height where the figure hangs below or right of its line.
            let spot = if is_upright {
                Spot { at: [if to[0] > 0.0 { at[0] + DATA } else { at[0] - 0.3 * DATA }, at[1]], anchor: Anchor::Middle, upward: true }
            } else {
                let anchor = if to[0].abs() < 0.3 {
                    Anchor::Middle
                } else if to[0] > 0.0 {
                    Anchor::Start
                } else {
                    Anchor::End
                };
                Spot { at: [at[0], if to[1] > 0.0 { at[1] + DATA } else { at[1] - 0.3 * DATA }], anchor, upward: false }
            };
            list.push(spot);
        }
    }
    list
}

/// The angle between two legs where it is not a right one.
fn angle(paper: &mut Paper, lettering: &Lettering, corner: &[[f64; 2]], real: &[[f64; 2]], within: &Area) {
    let (u, v) = ([real[0][0] - real[1][0], real[0][1] - real[1][1]], [real[2][0] - real[1][0], real[2][1] - real[1][1]]);
    let between = (u[0] * v[1] - u[1] * v[0]).atan2(u[0] * v[0] + u[1] * v[1]).abs().to_degrees();
    if (between - 90.0).abs() < 0.05 || !(0.05..=179.95).contains(&between) {
        return;
    }
    let spots = [2.5, 3.5, 5.0, 7.0].iter().flat_map(|radius| {
        (0..16).map(move |i| {
            let turn = f64::from(i) * 22.5f64.to_radians();
            Spot { at: [corner[1][0] + radius * turn.cos(), corner[1][1] + radius * turn.sin() + LABEL / 2.0], anchor: Anchor::Middle, upward: false }
        })
    });
    paper.place(lettering, spots.collect::<Vec<_>>(), &format!("{}°", num(between, 1)), within);
}

/// The corners of the box, for what is said of the whole sketch.
fn corners(min: [f64; 2], max: [f64; 2]) -> [Spot; 4] {
    let (low, high) = (max[1] - 1.2, min[1] + LABEL + 1.0);
    let spot = |x: f64, y: f64, anchor: Anchor| Spot { at: [x, y], anchor, upward: false };
    [
        spot(max[0] - 1.2, low, Anchor::End),
        spot(min[0] + 1.2, low, Anchor::Start),
        spot(max[0] - 1.2, high, Anchor::End),
        spot(min[0] + 1.2, high, Anchor::Start),
    ]
}
