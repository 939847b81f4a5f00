//! Small pictures of shape codes with their letters, walked from the table of shapes.

use super::form::{FINE, LABEL};
use super::paper::{Area, Lettering, Paper, Spot};
use crate::place::BarType;
use crate::scene::{Anchor, Layer, Pen};
use crate::tables::{Radius, ShapeCode, Walk, tables};

/// Radius of a bend as pictured, mm on paper.
const BEND: f64 = 1.0;
/// Clear paper between a line and its letter, mm.
const CLEAR: f64 = 0.8;
/// The longest leg a picture gets, mm on paper.
const LONGEST: f64 = 24.0;

/// Heading of a sloping leg as pictured, radians.
const SLOPE: f64 = 0.5;

/// A measured piece of a pictured bar: its letter, its ends and its heading (radians, y up), in units of the longest leg.
struct Leg {
    letter: char,
    ends: [[f64; 2]; 2],
    heading: f64,
}

impl Leg {
    fn middle(&self) -> [f64; 2] {
        std::array::from_fn(|i| (self.ends[0][i] + self.ends[1][i]) / 2.0)
    }

    fn is_sloping(&self) -> bool {
        (2.0 * self.heading).sin().abs() > 0.01
    }
}

/// A shape as walked, y down as paper.
#[derive(Default)]
struct Outline {
    points: Vec<[f64; 2]>,
    legs: Vec<Leg>,
    /// Letters of offsets, each with the legs that it stands between.
    rises: Vec<(char, usize)>,
    /// Where the radius of a bend is scheduled.
    bend: Option<[f64; 2]>,
}

fn outline(bar: &BarType, code: &ShapeCode) -> Outline {
    let longest = f64::from(bar.dims.values().max().copied().unwrap_or(1).max(1));
    // A shape that begins with a slope begins downwards, so that the leg after it lies level.
    let mut heading = if code.measured.get("A").is_some_and(|how| how.starts_with("along")) { -SLOPE } else { 0.0 };
    let mut at = [0.0f64, 0.0];
    let mut found = Outline { points: vec![at], ..Outline::default() };
    for part in &code.path {
        match part {
            Walk::Leg { leg } => {
                let letter = leg.chars().next().unwrap_or('A');
                let share = f64::from(bar.dims.get(&letter).copied().unwrap_or(0)) / longest;
                // Short legs are drawn longer than they are, so that they can be read.
                let length = 0.35 + 0.65 * share;
                let to = [at[0] + length * heading.cos(), at[1] - length * heading.sin()];
                found.legs.push(Leg { letter, ends: [at, to], heading });
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
                        found.legs.push(Leg { letter: 'B', ends: [at, at], heading: std::f64::consts::FRAC_PI_2 });
                    }
                }
            }
            Walk::Turn { turn, radius } => {
                heading += turn.to_radians();
                if *radius == Radius::Scheduled {
                    found.bend = Some(at);
                }
            }
            Walk::TurnBy { back, turn_by, .. } => {
                heading += if *back { -SLOPE } else { SLOPE };
                let letter = turn_by.rise.chars().next().unwrap_or('D');
                if found.rises.iter().all(|(known, _)| *known != letter) {
                    found.rises.push((letter, found.legs.len()));
                }
            }
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
    let scale = if outline.legs.iter().any(Leg::is_sloping) { [scale[0].min(scale[1]); 2] } else { scale };
    let middle = [(min[0] + max[0]) / 2.0, (min[1] + max[1]) / 2.0];
    let map = |p: [f64; 2]| -> [f64; 2] { std::array::from_fn(|i| middle[i] + (p[i] - (low[i] + high[i]) / 2.0) * scale[i]) };
    let drawn: Vec<[f64; 2]> = outline.points.iter().map(|p| map(*p)).collect();
    let drawn = rounded(&drawn, BEND);
    paper.line(Layer::Edge, &bar.mark, &drawn, pen);
    let lettering = Lettering { layer: Layer::Text, mark: String::new(), height: LABEL };
    let within = Area::new(min, max).grown(-0.4);
    rises(paper, &outline, map);
    let last = outline.legs.len().saturating_sub(1);
    for (i, leg) in outline.legs.iter().enumerate() {
        let end = if i == 0 { drawn.first() } else { drawn.last() }.filter(|_| (i == 0 || i == last) && last > 0);
        let spots = spots(map(leg.middle()), leg.heading, end.copied(), middle);
        paper.place(&lettering, spots, &leg.letter.to_string(), &within);
    }
    for (letter, at) in outline.rises.iter().filter_map(|(letter, i)| Some((*letter, rise(&outline, *i)?))) {
        let [from, to] = at.map(map);
        let spots = spots([from[0], (from[1] + to[1]) / 2.0], std::f64::consts::FRAC_PI_2, None, middle);
        paper.place(&lettering, spots, &letter.to_string(), &within);
    }
    if let Some(bend) = outline.bend.map(map) {
        paper.place(&lettering, spots(bend, SLOPE, None, middle), "R", &within);
    }
}

/// The upright of an offset: from the level of one end of the sloping leg at `joint` to the other end.
fn rise(outline: &Outline, joint: usize) -> Option<[[f64; 2]; 2]> {
    let before = joint.checked_sub(1).and_then(|i| outline.legs.get(i)).filter(|l| l.is_sloping());
    let leg = before.or_else(|| outline.legs.get(joint))?;
    // The end that is not the joint is the higher one where a slope leads away from a level leg.
    let [joint, end] = if before.is_some() { [leg.ends[1], leg.ends[0]] } else { leg.ends };
    Some([[end[0], joint[1]], end])
}

/// Thin lines that show what an offset is measured between.
fn rises(paper: &mut Paper, outline: &Outline, map: impl Fn([f64; 2]) -> [f64; 2]) {
    for [foot, end] in outline.rises.iter().filter_map(|(_, i)| rise(outline, *i)) {
        let (foot, end) = (map(foot), map(end));
        paper.line(Layer::Dimension, "", &[foot, end], FINE);
        paper.line(Layer::Dimension, "", &[[foot[0] - 1.2, foot[1]], [foot[0] + 1.2, foot[1]]], FINE);
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
