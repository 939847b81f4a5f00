//! Bars drawn out: each mark of B1, T1 and the ends at its true station, its ends dimensioned from a grid, its laps dimensioned.

use super::paper::{Area, Lettering, Paper, Spot};
use super::plan_view::{dimension_line, level_dimension, outward_figure};
use super::view::{Occurrence, View};
use crate::base::mm;
use crate::place::SlabModel;
use crate::plan::{Layer as BarLayer, Role};
use crate::scene::{Anchor, Layer, Pen, Weight};

/// Paper height of one row, mm.
pub const ROW: f64 = 13.0;
/// Paper between two bars of one row, for their texts, mm.
const APART: f64 = 16.0;

/// Rows of occurrences that do not meet.
pub struct Rows<'m> {
    pub rows: Vec<Vec<Occurrence<'m>>>,
}

impl<'m> Rows<'m> {
    /// Bars along the span of the bottom, or of the top, packed into rows.
    pub fn of(model: &'m SlabModel, view: &View, bottom: bool) -> Rows<'m> {
        let wanted = |o: &Occurrence| {
            let main = matches!(o.bar.role, Role::SpanBottom | Role::SupportTop | Role::EndTop | Role::Corner);
            let (low, high) = o.extent();
            o.bar.is_along_span() && main && (o.bar.layer == BarLayer::B1) == bottom && view.clip(low, high).is_some()
        };
        let mut rows: Vec<Vec<Occurrence<'m>>> = Vec::new();
        let mut seen: Vec<(String, (f64, f64))> = Vec::new();
        for occurrence in Occurrence::of(model).into_iter().filter(wanted) {
            let extent = occurrence.extent();
            let key = (occurrence.bar.mark.clone(), extent);
            if seen.contains(&key) {
                continue;
            }
            seen.push(key);
            let fits = |row: &Vec<Occurrence>| {
                let apart = APART * view.scale;
                row.iter().all(|other| extent.0 > other.extent().1 + apart || extent.1 < other.extent().0 - apart)
            };
            match rows.iter_mut().find(|r| fits(r)) {
                Some(row) => row.push(occurrence),
                None => rows.push(vec![occurrence]),
            }
        }
        Rows { rows }
    }

    pub fn height(&self) -> f64 {
        self.rows.len() as f64 * ROW
    }

    /// Draws the rows from paper height `top` down.
    pub fn draw(&self, paper: &mut Paper, view: &View, model: &SlabModel, top: f64) {
        for (i, row) in self.rows.iter().enumerate() {
            let y = top + i as f64 * ROW + 4.6;
            for occurrence in row {
                bar(paper, view, occurrence, y);
            }
            for occurrence in row {
                ends(paper, view, model, occurrence, y);
            }
        }
    }
}

fn ink(occurrence: &Occurrence) -> Layer {
    match occurrence.bar.layer {
        BarLayer::B1 | BarLayer::B2 => Layer::Bottom,
        BarLayer::E => Layer::Edge,
        _ => Layer::Top,
    }
}

/// The bar as bent; uprights are drawn short, not to scale.
fn bar(paper: &mut Paper, v: &View, occurrence: &Occurrence, y: f64) {
    const UPRIGHT: f64 = 2.4;
    let Some(set) = occurrence.sets.first() else { return };
    let top = set.axis.iter().map(|p| p[2]).fold(f64::NEG_INFINITY, f64::max);
    let bottom = set.axis.iter().map(|p| p[2]).fold(f64::INFINITY, f64::min);
    // The main leg lies on the row's line; what turns away from it is drawn a little above or below.
    let main = main_level(&set.axis);
    let points: Vec<[f64; 2]> = set
        .axis
        .iter()
        .map(|p| {
            let turned = if (p[2] - main).abs() < 0.5 {
                0.0
            } else if p[2] < main {
                UPRIGHT
            } else {
                -UPRIGHT
            };
            [v.x(p[0].clamp(v.low, v.high)), y + if top - bottom < 0.5 { 0.0 } else { turned }]
        })
        .collect();
    let mark = occurrence.bar.mark.as_str();
    paper.line(ink(occurrence), mark, &points, Pen::solid(v.pens.main));
    if occurrence.bar.is_straight() {
        let (low, high) = occurrence.extent();
        for (station, sign) in [(low, 1.0), (high, -1.0)] {
            if v.shows(station) {
                let x = v.x(station);
                paper.line(ink(occurrence), mark, &[[x, y], [x + sign * 1.3, y - 1.3]], Pen::solid(v.pens.other));
            }
        }
    }
    let (low, high) = occurrence.extent();
    let Some((from, to)) = v.clip(low, high) else { return };
    let lettering = Lettering { layer: Layer::CallOut, mark: mark.into(), height: v.note, weight: Weight::Medium };
    let text = format!("{}  L {}", occurrence.bar.mark, occurrence.bar.length);
    let within = Area::new([0.0, 0.0], [paper.scene.width, paper.scene.height]);
    let spots = [0.5, 0.4, 0.6, 0.3, 0.7, 0.2, 0.8, 0.1, 0.9, 0.0, 1.0].map(|s| Spot {
        at: [v.x(from + s * (to - from)), y - 2.2],
        anchor: Anchor::Middle,
        upward: false,
    });
    paper.place(&lettering, spots, &text, &within);
}

/// Level of the main leg: the upper one of a bar that closes the face, else the longest level piece.
fn main_level(axis: &[[f64; 3]]) -> f64 {
    let level = || axis.windows(2).filter(|w| w[0][2] == w[1][2]);
    let longest = level().max_by(|a, b| (a[0][0] - a[1][0]).abs().total_cmp(&(b[0][0] - b[1][0]).abs())).map_or(0.0, |w| w[0][2]);
    if level().count() > 1 { level().map(|w| w[0][2]).fold(longest, f64::max) } else { longest }
}

/// Both ends from the nearest grid.
fn ends(paper: &mut Paper, v: &View, model: &SlabModel, occurrence: &Occurrence, y: f64) {
    let Some(set) = occurrence.sets.first() else { return };
    let main = main_level(&set.axis);
    let on_main = set.axis.iter().filter(|p| (p[2] - main).abs() < 0.5).map(|p| p[0]);
    let (low, high) = on_main.fold((f64::INFINITY, f64::NEG_INFINITY), |(a, b), x| (a.min(x), b.max(x)));
    let half = f64::from(occurrence.bar.size) / 2.0;
    // A bent end is dimensioned to its outer face.
    let outer = |station: f64, sign: f64| {
        let upright = set.axis.windows(2).any(|w| w[0][0] == w[1][0] && w[0][0] == station);
        if upright { station + sign * half } else { station }
    };
    let grid_of = |station: f64| {
        let grids = model.stations.supports.iter().map(|s| s.centre);
        grids.min_by(|a, b| (a - station).abs().total_cmp(&(b - station).abs())).filter(|g| (g - station).abs() > 0.5)
    };
    let ends = [outer(low, -1.0), outer(high, 1.0)].into_iter().filter(|x| v.shows(*x)).filter_map(|x| grid_of(x).map(|g| (g, x)));
    let ends: Vec<(f64, f64)> = ends.collect();
    // Both lines first: a figure stands over its own length or outside the bar, never over the other length.
    for (grid, station) in &ends {
        dimension_line(paper, v, v.x(*grid), v.x(*station), y + 5.2);
    }
    for (grid, station) in &ends {
        outward_figure(paper, v, v.x(*grid), v.x(*station), y + 5.2, &mm((grid - station).abs()));
    }
}

/// Laps of the bottom bars over inner supports, dimensioned in one line.
pub fn laps(paper: &mut Paper, view: &View, model: &SlabModel, y: f64) {
    let bottom: Vec<Occurrence> = Occurrence::of(model).into_iter().filter(|o| o.bar.role == Role::SpanBottom).collect();
    for support in model.stations.supports.iter().skip(1).take(model.stations.supports.len().saturating_sub(2)) {
        let centre = support.centre;
        let middle = |o: &Occurrence| (o.extent().0 + o.extent().1) / 2.0;
        let over = || bottom.iter().filter(|o| o.extent().0 < centre && o.extent().1 > centre);
        let end = over().filter(|o| middle(o) < centre).map(|o| o.extent().1).fold(f64::INFINITY, f64::min);
        let start = over().filter(|o| middle(o) > centre).map(|o| o.extent().0).fold(f64::NEG_INFINITY, f64::max);
        if end.is_finite() && start.is_finite() && view.shows(start) && view.shows(end) {
            level_dimension(paper, view, view.x(start), view.x(end), y, &format!("lap {}", mm(end - start)));
        }
    }
}
