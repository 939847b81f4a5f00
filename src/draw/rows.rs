//! Bars drawn out: each mark of B1, T1 and the ends at its true station, its ends dimensioned from a grid, its laps dimensioned.

use super::along::end_ticks;
use super::dimension::{figure, level, level_line};
use super::label::Label;
use super::paper::{Lettering, Paper, Spot};
use super::section::clip;
use super::view::{Occurrence, Subject, View};
use crate::base::mm;
use crate::plan::{Layer as BarLayer, Role};
use crate::scene::{Anchor, Layer, Pen};
use crate::tables::font::face;

/// How far past a match line a dimension may run that belongs to the support there, mm in the slab.
pub(super) const PAST: f64 = 1500.0;

/// Rows of occurrences that do not meet.
pub struct Rows<'m> {
    rows: Vec<Vec<&'m Occurrence<'m>>>,
    row: f64,
    has_laps: bool,
}

impl<'m> Rows<'m> {
    /// Bars along the span of the bottom, or of the top, packed into rows.
    pub fn of(subject: &'m Subject<'m>, view: &View, bottom: bool) -> Rows<'m> {
        let wanted = |o: &&Occurrence| {
            let main = matches!(o.bar.role, Role::SpanBottom | Role::SupportTop | Role::EndTop | Role::Corner);
            let (low, high) = o.extent();
            o.bar.is_along_span() && main && (o.bar.layer == BarLayer::B1) == bottom && view.clip(low, high).is_some()
        };
        let mut rows: Vec<Vec<&Occurrence>> = Vec::new();
        let mut seen: Vec<(&str, (f64, f64))> = Vec::new();
        for occurrence in subject.occurrences.iter().filter(wanted) {
            let extent = occurrence.extent();
            let key = (occurrence.bar.mark.as_str(), extent);
            if seen.contains(&key) {
                continue;
            }
            seen.push(key);
            // Paper between two bars of one row, for their figures.
            let apart = 6.5 * view.note * view.scale;
            let wide = face().width(&name(occurrence), view.note) * view.scale;
            let fits = |row: &Vec<&Occurrence>| {
                row.iter().all(|other| {
                    let (a, b) = other.extent();
                    let names = (wide + face().width(&name(other), view.note) * view.scale) / 2.0 + view.scale;
                    let middles = ((extent.0 + extent.1) / 2.0 - (a + b) / 2.0).abs();
                    (extent.0 > b + apart || extent.1 < a - apart) && middles > names
                })
            };
            match rows.iter_mut().find(|r| fits(r)) {
                Some(row) => row.push(occurrence),
                None => rows.push(vec![occurrence]),
            }
        }
        Rows { rows, row: 3.5 * view.note + 5.9, has_laps: bottom && subject.model.stations.supports.len() > 2 }
    }

    pub fn height(&self) -> f64 {
        (self.rows.len() as f64 + if self.has_laps { 0.55 } else { 0.0 }) * self.row
    }

    /// Draws the rows from paper height `top` down.
    pub fn draw(&self, paper: &mut Paper, view: &View, subject: &Subject, top: f64) {
        for (i, row) in self.rows.iter().enumerate() {
            let y = top + i as f64 * self.row + view.note + 2.7;
            for occurrence in row {
                bar(paper, view, occurrence, y);
                ends(paper, view, subject, occurrence, y + view.note + 2.9);
            }
        }
        if self.has_laps {
            laps(paper, view, subject, top + (self.rows.len() as f64 + 0.4) * self.row);
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

fn name(occurrence: &Occurrence) -> String {
    format!("{}  L {}", occurrence.bar.mark, occurrence.bar.length)
}

/// The bar as bent; uprights are drawn short, not to scale.
fn bar(paper: &mut Paper, v: &View, occurrence: &Occurrence, y: f64) {
    const UPRIGHT: f64 = 2.4;
    let Some(set) = occurrence.sets.first() else { return };
    // The main leg lies on the row's line; what turns away from it is drawn a little above or below.
    let main = occurrence.main_level();
    let line: Vec<[f64; 2]> = set
        .axis
        .iter()
        .map(|p| {
            let turned = if (p[2] - main).abs() < 0.5 { 0.0 } else { UPRIGHT * (main - p[2]).signum() };
            [p[0], y + turned]
        })
        .collect();
    let mark = occurrence.bar.mark.as_str();
    for part in clip(&line, v.low, v.high) {
        let points: Vec<[f64; 2]> = part.iter().map(|p| [v.x(p[0]), p[1]]).collect();
        paper.line(ink(occurrence), mark, &points, Pen::solid(v.pens.main));
    }
    let (low, high) = occurrence.extent();
    if occurrence.bar.is_straight() {
        end_ticks(paper, v, ink(occurrence), mark, (low, high), y);
    }
    let Some((from, to)) = v.clip(low, high) else { return };
    let over = y - 0.25 * v.note - 1.9;
    let shares = [0.5, 0.45, 0.55, 0.4, 0.6, 0.3, 0.7, 0.2, 0.8, 0.1, 0.9, 0.0, 1.0];
    let near = shares.map(|s| Spot::level([v.x(from + s * (to - from)), over], Anchor::Middle)).to_vec();
    let label = Label::new(Lettering::of(Layer::CallOut, mark, v.note), name(occurrence), near, paper.room, Pen::solid(v.pens.thin))
        .leader([v.x((from + to) / 2.0), y], 20.0)
        .order(1);
    paper.label(label);
}

/// Both ends from the nearest grid: the figure over its length where it fits, else past the bar end, away from the grid.
fn ends(paper: &mut Paper, v: &View, subject: &Subject, occurrence: &Occurrence, y: f64) {
    for station in occurrence.main_ends().into_iter().filter(|x| v.shows(*x)) {
        let grid = subject.nearest_grid(station);
        if (grid - station).abs() <= 0.5 {
            continue;
        }
        let (from, to) = (v.x(grid), v.x(station));
        let (x0, x1) = (from.min(to), from.max(to));
        level_line(paper, v, x0, x1, y);
        let text = mm((grid - station).abs());
        let over = y - 0.25 * v.note - 0.6;
        let mut near = Vec::new();
        if face().width(&text, v.note) + 1.0 < x1 - x0 {
            near.push(Spot::level([(x0 + x1) / 2.0, over], Anchor::Middle));
        }
        let (sign, past, before) = if to > from { (1.0, Anchor::Start, Anchor::End) } else { (-1.0, Anchor::End, Anchor::Start) };
        for out in [1.8, 3.0, 5.0, 8.0] {
            for dy in [v.note / 2.0, v.note / 2.0 + 1.2, v.note + 0.8, -0.25 * v.note - 0.6] {
                near.push(Spot::level([to + sign * out, y + dy], past));
            }
        }
        near.push(Spot::level([from - sign * 1.8, y + v.note / 2.0], before));
        near.push(Spot::level([from - sign * 1.8, y + v.note + 0.6], before));
        near.push(Spot::level([(x0 + x1) / 2.0, y + v.note + 0.8], Anchor::Middle));
        figure(paper, v, near, [(x0 + x1) / 2.0, y], &text);
    }
}

/// Where the bottom bars of two spans lie side by side over an inner support: from the start of one to the end of the other.
pub fn lap_over(subject: &Subject, centre: f64) -> Option<(f64, f64)> {
    let middle = |o: &Occurrence| (o.extent().0 + o.extent().1) / 2.0;
    let bottom = || subject.occurrences.iter().filter(|o| o.bar.role == Role::SpanBottom);
    let over = || bottom().filter(|o| o.extent().0 < centre && o.extent().1 > centre);
    let end = over().filter(|o| middle(o) < centre).map(|o| o.extent().1).fold(f64::INFINITY, f64::min);
    let start = over().filter(|o| middle(o) > centre).map(|o| o.extent().0).fold(f64::NEG_INFINITY, f64::max);
    (end.is_finite() && start.is_finite() && end > start).then_some((start, end))
}

/// Laps of the bottom bars over inner supports, dimensioned in one line.
fn laps(paper: &mut Paper, view: &View, subject: &Subject, y: f64) {
    let supports = &subject.model.stations.supports;
    for support in supports.iter().skip(1).take(supports.len().saturating_sub(2)) {
        if let Some((start, end)) = lap_over(subject, support.centre).filter(|(start, end)| view.shows(*start) && *end < view.high + PAST) {
            level(paper, view, view.x(start), view.x(end), y, &format!("lap {}", mm(end - start)));
        }
    }
}
