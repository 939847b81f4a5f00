//! Small pictures of shape codes with their letters, walked from the table of shapes.

use super::paper::{Lettering, Paper, Spot};
use crate::place::BarType;
use crate::scene::{Anchor, Layer, Pen};
use crate::tables::{Walk, tables};

/// Draws the shape of a mark into a box, its legs at set proportions, its letters beside them.
pub fn shape(paper: &mut Paper, bar: &BarType, min: [f64; 2], max: [f64; 2], pen: f64) {
    let Some(code) = tables().shape(bar.shape) else { return };
    let longest = bar.dims.values().max().copied().unwrap_or(1).max(1);
    let mut heading = 0.0f64;
    let mut at = [0.0f64, 0.0];
    let mut points = vec![at];
    let mut legs: Vec<(char, [f64; 2], f64, f64)> = Vec::new();
    for part in &code.path {
        match part {
            Walk::Leg { leg } => {
                let letter = leg.chars().next().unwrap_or('A');
                let share = f64::from(bar.dims.get(&letter).copied().unwrap_or(0)) / f64::from(longest);
                // Short legs are drawn longer than they are, so that they can be read.
                let length = 0.35 + 0.65 * share;
                let to = [at[0] + length * heading.cos(), at[1] - length * heading.sin()];
                legs.push((letter, [(at[0] + to[0]) / 2.0, (at[1] + to[1]) / 2.0], heading, length));
                at = to;
                points.push(at);
            }
            Walk::Turn { turn, .. } if *turn == 180.0 => {
                for step in 0..6 {
                    heading += 15.0f64.to_radians();
                    at = [at[0] + 0.045 * heading.cos(), at[1] - 0.045 * heading.sin()];
                    heading += 15.0f64.to_radians();
                    points.push(at);
                    if step == 2 {
                        // The crown is measured by B: its letter stands beside the middle of the bend.
                        legs.push(('B', at, std::f64::consts::FRAC_PI_2, 0.0));
                    }
                }
            }
            Walk::Turn { turn, .. } => heading += turn.to_radians(),
            Walk::TurnBy { back, .. } => heading += if *back { -0.5 } else { 0.5 },
        }
    }
    let low = points.iter().fold([f64::INFINITY; 2], |m, p| [m[0].min(p[0]), m[1].min(p[1])]);
    let high = points.iter().fold([f64::NEG_INFINITY; 2], |m, p| [m[0].max(p[0]), m[1].max(p[1])]);
    let room = [max[0] - min[0] - 7.0, max[1] - min[1] - 4.4];
    let span = [(high[0] - low[0]).max(1e-6), (high[1] - low[1]).max(1e-6)];
    let scale = (room[0] / span[0]).min(room[1] / span[1]).min(22.0);
    let middle = [(min[0] + max[0]) / 2.0, (min[1] + max[1]) / 2.0];
    let map = |p: [f64; 2]| [middle[0] + (p[0] - (low[0] + high[0]) / 2.0) * scale, middle[1] + (p[1] - (low[1] + high[1]) / 2.0) * scale];
    let drawn: Vec<[f64; 2]> = points.iter().map(|p| map(*p)).collect();
    paper.line(Layer::Edge, &bar.mark, &drawn, Pen::solid(pen));
    if code.path.len() < 2 {
        return;
    }
    let lettering = Lettering { layer: Layer::Text, mark: String::new(), height: 1.8 };
    let centre = [drawn.iter().map(|p| p[0]).sum::<f64>() / drawn.len() as f64, drawn.iter().map(|p| p[1]).sum::<f64>() / drawn.len() as f64];
    let last = legs.len() - 1;
    for (i, (letter, place, heading, length)) in legs.into_iter().enumerate() {
        let p = map(place);
        let (dx, dy) = (heading.cos() * length * scale / 2.0, -heading.sin() * length * scale / 2.0);
        let at = if heading.sin().abs() > 0.7 {
            // Beside an upright leg, on its outer side.
            [p[0] + if p[0] >= centre[0] { 1.9 } else { -1.9 }, p[1] + 0.9]
        } else if i == 0 || i == last {
            // Past the free end of an end leg.
            let sign = if i == 0 { -1.0 } else { 1.0 };
            [p[0] + sign * dx + (sign * dx).signum() * 1.7, p[1] + sign * dy + 0.9]
        } else {
            [p[0], p[1] - 0.7]
        };
        paper.text(&lettering, Spot { at, anchor: Anchor::Middle, upward: false }, &letter.to_string());
    }
}
