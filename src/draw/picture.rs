//! Small pictures of shape codes with their letters, walked from the table of shapes.

use super::form::LABEL;
use super::paper::{Area, Lettering, Paper, Spot};
use crate::place::BarType;
use crate::scene::{Anchor, Layer, Pen};
use crate::tables::{ShapeCode, Walk, tables};

/// Radius of a bend as pictured, mm on paper.
const BEND: f64 = 1.0;
/// Clear paper between a line and its letter, mm.
const CLEAR: f64 = 0.8;
/// The longest leg a picture gets, mm on paper.
const LONGEST: f64 = 24.0;

/// A measured piece of a pictured bar: its letter, its middle and its heading (radians, y up), in units of the longest leg.
struct Leg {
    letter: char,
    middle: [f64; 2],
    heading: f64,
}

/// A shape as walked, y down as paper.
struct Outline {
    points: Vec<[f64; 2]>,
    legs: Vec<Leg>,
}

fn outline(bar: &BarType, code: &ShapeCode) -> Outline {
    let longest = f64::from(bar.dims.values().max().copied().unwrap_or(1).max(1));
    let mut heading = 0.0f64;
    let mut at = [0.0f64, 0.0];
    let mut found = Outline { points: vec![at], legs: Vec::new() };
    for part in &code.path {
        match part {
            Walk::Leg { leg } => {
                let letter = leg.chars().next().unwrap_or('A');
                let share = f64::from(bar.dims.get(&letter).copied().unwrap_or(0)) / longest;
                // Short legs are drawn longer than they are, so that they can be read.
                let length = 0.35 + 0.65 * share;
                let to = [at[0] + length * heading.cos(), at[1] - length * heading.sin()];
                found.legs.push(Leg { letter, middle: [(at[0] + to[0]) / 2.0, (at[1] + to[1]) / 2.0], heading });
                at = to;
                found.points.push(at);
            }
            Walk::Turn { turn, .. } if *turn == 180.0 => {
                for step in 0..6 {
                    heading += 15.0f64.to_radians();
                    at = [at[0] + 0.06 * heading.cos(), at[1] - 0.06 * heading.sin()];
                    heading += 15.0f64.to_radians();
                    found.points.push(at);
                    if step == 2 {
                        // The crown is measured by B: its letter stands beside the middle of the bend.
                        found.legs.push(Leg { letter: 'B', middle: at, heading: std::f64::consts::FRAC_PI_2 });
                    }
                }
            }
            Walk::Turn { turn, .. } => heading += turn.to_radians(),
            Walk::TurnBy { back, .. } => heading += if *back { -0.5 } else { 0.5 },
        }
    }
    found
}

/// Draws the shape of a mark into a box, its legs at set proportions, each letter at the clear place nearest to its leg.
pub fn shape(paper: &mut Paper, bar: &BarType, min: [f64; 2], max: [f64; 2], pen: Pen) {
    let Some(code) = tables().shape(bar.shape).filter(|c| !c.path.is_empty()) else { return };
    let outline = outline(bar, code);
    let low = outline.points.iter().fold([f64::INFINITY; 2], |m, p| [m[0].min(p[0]), m[1].min(p[1])]);
    let high = outline.points.iter().fold([f64::NEG_INFINITY; 2], |m, p| [m[0].max(p[0]), m[1].max(p[1])]);
    let span = [(high[0] - low[0]).max(1e-6), (high[1] - low[1]).max(1e-6)];
    let room = [max[0] - min[0] - 8.0, max[1] - min[1] - 4.0];
    let scale = [(room[0] / span[0]).min(LONGEST), (room[1] / span[1]).min(LONGEST)];
    // A picture is not to scale: where a row is too low for the shape it is pressed, as long as its legs stay level and upright.
    let scale = if outline.legs.iter().all(|l| (2.0 * l.heading).sin().abs() < 0.01) { scale } else { [scale[0].min(scale[1]); 2] };
    let middle = [(min[0] + max[0]) / 2.0, (min[1] + max[1]) / 2.0];
    let map = |p: [f64; 2]| -> [f64; 2] { std::array::from_fn(|i| middle[i] + (p[i] - (low[i] + high[i]) / 2.0) * scale[i]) };
    let drawn: Vec<[f64; 2]> = outline.points.iter().map(|p| map(*p)).collect();
    let drawn = rounded(&drawn, BEND);
    paper.line(Layer::Edge, &bar.mark, &drawn, pen);
    let lettering = Lettering { layer: Layer::Text, mark: String::new(), height: LABEL };
    let within = Area::new(min, max).grown(-0.4);
    let last = outline.legs.len().saturating_sub(1);
    for (i, leg) in outline.legs.iter().enumerate() {
        let end = if i == 0 { drawn.first() } else { drawn.last() }.filter(|_| (i == 0 || i == last) && last > 0);
        let spots = spots(map(leg.middle), leg.heading, end.copied(), middle);
        paper.place(&lettering, spots, &leg.letter.to_string(), &within);
    }
}

/// Places for a letter: beside the middle of its leg, away from the middle of the picture first; past the free end of an end leg; between legs.
fn spots(at: [f64; 2], heading: f64, end: Option<[f64; 2]>, centre: [f64; 2]) -> Vec<Spot> {
    let spot = |at: [f64; 2]| Spot { at, anchor: Anchor::Middle, upward: false };
    let base = LABEL / 2.0;
    let mut list = Vec::new();
    let is_upright = heading.sin().abs() > 0.7;
    let aside = 0.6 + CLEAR + 0.5;
    let outward = if at[0] >= centre[0] { 1.0 } else { -1.0 };
    if is_upright {
        list.extend([outward, -outward].map(|s| spot([at[0] + s * aside, at[1] + base])));
    } else {
        if let Some(end) = end {
            list.push(spot([end[0] + (end[0] - at[0]).signum() * aside, end[1] + base]));
        }
        let over = [at[1] - CLEAR - 0.3, at[1] + CLEAR + 0.3 + LABEL];
        let order = if at[1] <= centre[1] { over } else { [over[1], over[0]] };
        for y in order {
            list.extend([0.0, -3.0, 3.0, -6.0, 6.0].map(|dx| spot([at[0] + dx, y])));
        }
    }
    // Slanting and crowded legs: a ring of places round the middle.
    for radius in [2.2, 3.2, 4.5] {
        list.extend((0..12).map(|i| {
            let angle = f64::from(i) * 30.0f64.to_radians();
            spot([at[0] + radius * angle.cos(), at[1] + radius * angle.sin() + base])
        }));
    }
    list
}

/// A line with its corners rounded to `radius` or what their legs allow; ends stay where they are.
pub fn rounded(line: &[[f64; 2]], radius: f64) -> Vec<[f64; 2]> {
    let (Some(first), Some(last)) = (line.first(), line.last()) else { return Vec::new() };
    let mut out = vec![*first];
    for corner in line.windows(3) {
        let [a, b, c] = [corner[0], corner[1], corner[2]];
        let (before, after) = ([a[0] - b[0], a[1] - b[1]], [c[0] - b[0], c[1] - b[1]]);
        let (la, lc) = (before[0].hypot(before[1]), after[0].hypot(after[1]));
        if la < 1e-6 || lc < 1e-6 {
            continue;
        }
        let cut = radius.min(0.45 * la).min(0.45 * lc);
        let on = |d: [f64; 2], length: f64| [b[0] + d[0] / length * cut, b[1] + d[1] / length * cut];
        let (p, q) = (on(before, la), on(after, lc));
        // A quadratic curve through the corner's tangents: near enough to an arc at this size.
        out.extend((0..=4).map(|i| {
            let t = f64::from(i) / 4.0;
            let blend = |i: usize| (1.0 - t) * (1.0 - t) * p[i] + 2.0 * t * (1.0 - t) * b[i] + t * t * q[i];
            [blend(0), blend(1)]
        }));
    }
    out.push(*last);
    out
}
