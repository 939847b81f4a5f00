//! Bars across the slab in plan: one bar of each set, the level line over its zone, laps of pieces dimensioned.

use super::dimension::{figure, running_figure, tick};
use super::paper::{Paper, Spot};
use super::plan_view::{Face, PlanView, along_level, along_upright};
use super::view::Occurrence;
use crate::base::num;
use crate::plan::{Layer as BarLayer, Role};
use crate::scene::{Anchor, Layer, Pen};

impl PlanView<'_> {
    pub(super) fn bars_across(&self, paper: &mut Paper, occurrence: &Occurrence) {
        let v = self.view;
        let lines: Vec<f64> = occurrence.lines(0).into_iter().filter(|x| v.shows(*x)).collect();
        let (Some(first), Some(last)) = (lines.first().copied(), lines.last().copied()) else { return };
        let mark = occurrence.bar.mark.as_str();
        let layer = self.bar_layer(occurrence);
        let is_edge = occurrence.bar.role == Role::Edge;
        let held = PlanView::is_held(occurrence);
        let width = if occurrence.bar.layer == BarLayer::E && !held { v.pens.main } else { v.pens.other };
        let share = match (is_edge, self.face) {
            (true, _) => 0.5,
            (false, Face::Bottom) => 0.90,
            (false, Face::Top) => 0.16,
        };
        let station = if held { first } else { nearest(&lines, first + share * (last - first)) };
        let Some(set) = occurrence.sets.iter().min_by(|a, b| (a.axis[0][0] - station).abs().total_cmp(&(b.axis[0][0] - station).abs())) else { return };
        let (y_low, y_high) = set.axis.iter().map(|p| p[1]).fold((f64::INFINITY, f64::NEG_INFINITY), |(a, b), y| (a.min(y), b.max(y)));
        for x in if held && last > first { vec![first, last] } else { vec![station] } {
            let pieces = pieces_at(occurrence, x);
            // Pieces in contact are drawn apart, not to scale, so that the lap can be seen: towards the middle of the slab.
            let st = &self.subject.model.stations;
            let inward = if x < (st.start + st.end) / 2.0 { 1.4 } else { -1.4 };
            let drawn: Vec<(f64, (f64, f64))> = pieces.iter().enumerate().map(|(i, p)| (v.x(x) + if i % 2 == 1 { inward } else { 0.0 }, *p)).collect();
            for (at, piece) in &drawn {
                paper.line(layer, mark, &[[*at, self.y(piece.1)], [*at, self.y(piece.0)]], Pen::solid(width));
            }
            if occurrence.first && x == station {
                let laps: Vec<f64> = drawn.windows(2).map(|pair| pair[0].1.1 - pair[1].1.0).collect();
                let is_one = laps.iter().all(|lap| (lap - laps[0]).abs() < 1.0);
                // Equal laps of one line are dimensioned once.
                for pair in drawn.windows(2).take(if is_one { 1 } else { laps.len() }) {
                    let at = if inward > 0.0 { pair[0].0.max(pair[1].0) + 2.2 } else { pair[0].0.min(pair[1].0) - 2.2 };
                    let word = if is_one && laps.len() > 1 { "laps" } else { "lap" };
                    self.lap(paper, &format!("{mark} {word}"), at, pair[1].1.0, pair[0].1.1);
                }
            }
        }
        let x = v.x(station);
        let (y0, y1) = (self.y(y_high), self.y(y_low));
        if held {
            let is_left = station < self.subject.model.stations.spans[0].left_face;
            self.call_out(paper, along_upright(x, y0, y1, v.call_out, !is_left), [x, y0 + 0.55 * (y1 - y0)], occurrence);
            return;
        }
        let y = match (is_edge, self.face) {
            (true, _) => self.y((y_low + y_high) / 2.0),
            (false, Face::Bottom) => self.down(0.88),
            (false, Face::Top) => self.down(0.86),
        };
        let thin = Pen::solid(v.pens.thin);
        self.located(paper, mark, first, last, y);
        paper.ring(Layer::CallOut, mark, [x, y], 0.9, thin);
        let mut spots = along_level(v.x(first), v.x(last), y, v.call_out);
        spots.extend(along_upright(x, y0, y1, v.call_out, true));
        self.call_out(paper, spots, [x, y], occurrence);
    }

    /// The level line over a zone from its first to its last bar, both located from the grids nearest to them: running dimensions.
    fn located(&self, paper: &mut Paper, mark: &str, first: f64, last: f64, y: f64) {
        let v = self.view;
        let thin = Pen::solid(v.pens.thin);
        let ends: Vec<(f64, f64)> = [first, last].map(|s| (s, self.subject.nearest_grid(s))).into_iter().filter(|(_, g)| v.shows(*g)).collect();
        let reach = |least: bool| ends.iter().flat_map(|(s, g)| [*s, *g]).chain([first, last]).reduce(if least { f64::min } else { f64::max }).unwrap_or(first);
        paper.soft_line(Layer::CallOut, mark, &[[v.x(reach(true)), y], [v.x(reach(false)), y]], thin);
        let mut circled: Vec<f64> = Vec::new();
        for station in [first, last] {
            tick(paper, Layer::CallOut, mark, [v.x(station), y], v.pens.thin);
        }
        for (station, grid) in ends {
            if !circled.contains(&grid) {
                paper.ring(Layer::Dimension, "", [v.x(grid), y], 0.8, thin);
                circled.push(grid);
            }
            let distance = (station - grid).abs();
            if distance > 0.5 {
                running_figure(paper, v, v.x(station), v.x(grid), y, distance.round());
            }
        }
    }

    /// The lap of two pieces across the slab, dimensioned beside them.
    fn lap(&self, paper: &mut Paper, name: &str, x: f64, from: f64, to: f64) {
        let v = self.view;
        let (y0, y1) = (self.y(to), self.y(from));
        paper.line(Layer::Dimension, "", &[[x, y0], [x, y1]], Pen::solid(v.pens.thin));
        for y in [y0, y1] {
            tick(paper, Layer::Dimension, "", [x, y], v.pens.thin);
        }
        let text = format!("{name} {}", num(to - from, 0));
        let mut spots = vec![Spot::upright([x + v.note + 0.9, (y0 + y1) / 2.0], Anchor::Middle)];
        for out in [2.0, 4.0, 6.0, 9.0, 12.0, 16.0, 21.0] {
            for dx in [v.note + 0.9, v.note / 2.0] {
                spots.push(Spot::upright([x + dx, y0 - out], Anchor::Start));
                spots.push(Spot::upright([x + dx, y1 + out], Anchor::End));
            }
        }
        spots.extend([2.0, 4.0, 7.0].map(|out| Spot::level([x + out, (y0 + y1) / 2.0 + v.note / 2.0], Anchor::Start)));
        figure(paper, v, spots, [x, (y0 + y1) / 2.0], &text);
    }
}

fn nearest(lines: &[f64], to: f64) -> f64 {
    lines.iter().copied().min_by(|a, b| (a - to).abs().total_cmp(&(b - to).abs())).unwrap_or(to)
}

/// Extents across the slab of the pieces that stand at or beside a station.
fn pieces_at(occurrence: &Occurrence, station: f64) -> Vec<(f64, f64)> {
    let beside = 2.5 * f64::from(occurrence.bar.size);
    let mut pieces: Vec<(f64, f64)> = Vec::new();
    for set in &occurrence.sets {
        let near = (0..set.count).any(|i| (set.axis[0][0] + set.step[0] * f64::from(i) - station).abs() <= beside);
        if near {
            let ys = set.axis.iter().map(|p| p[1]);
            pieces.push((ys.clone().fold(f64::INFINITY, f64::min), ys.fold(f64::NEG_INFINITY, f64::max)));
        }
    }
    pieces.sort_by(|a, b| a.0.total_cmp(&b.0));
    pieces.dedup_by(|a, b| (a.0 - b.0).abs() < 1.0);
    pieces
}
