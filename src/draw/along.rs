//! Bars along the span in plan: lanes of representative bars, running dimensions of their ends, thin lines over their zones.

use super::dimension::{Stop, level, running, tick};
use super::paper::Paper;
use super::plan_view::{PlanView, along_level, along_upright};
use super::view::{Occurrence, View};
use crate::base::num;
use crate::plan::Role;
use crate::scene::{Layer, Pen};
use itertools::Itertools;

/// Paper between two bars that stand side by side, mm.
const LANE: f64 = 4.2;
/// How far inside the edge its laps are dimensioned, mm on paper.
const HELD_LAP: f64 = 9.0;
/// Paper between bars of one lane, mm.
const APART: f64 = 4.0;

impl PlanView<'_> {
    pub(super) fn bars_along(&self, paper: &mut Paper, along: &[&Occurrence]) {
        let (held, sets): (Vec<&Occurrence>, Vec<&Occurrence>) = along.iter().copied().partition(|o| PlanView::is_held(o));
        for occurrence in &held {
            self.held_along(paper, occurrence);
        }
        self.held_laps(paper, &held);
        let heights = self.lanes(&sets);
        for (occurrence, y) in sets.iter().zip(&heights) {
            self.bar_along(paper, occurrence, *y);
        }
        self.ends(paper, &sets, &heights);
        for (order, (occurrence, y)) in sets.iter().zip(&heights).enumerate() {
            // The two ways round of a turned mark are one set: one line through both bars.
            let beside = |o: &Occurrence| {
                let (low, high) = (o.extent().0.max(occurrence.extent().0), o.extent().1.min(occurrence.extent().1));
                low < high && self.view.clip(low, high).is_some()
            };
            let is_turned = |i: &usize| {
                let other = sets[*i];
                *i != order && other.bar.mark == occurrence.bar.mark && other.zone == occurrence.zone && other.turn() == "alt rev" && beside(other)
            };
            let pair = (0..sets.len()).find(is_turned);
            if pair.is_none_or(|other| other > order) {
                self.zone_along(paper, occurrence, *y, order, &sets, pair.map(|other| (sets[other], heights[other])));
            }
        }
    }

    /// Paper heights of the representative bars: each stands on a real bar of its set, clear of those it would meet.
    fn lanes(&self, sets: &[&Occurrence]) -> Vec<f64> {
        let v = self.view;
        let first = self.down(0.22);
        let mut order: Vec<usize> = (0..sets.len()).collect();
        order.sort_by(|a, b| sets[*a].extent().0.total_cmp(&sets[*b].extent().0));
        let mut heights = vec![first; sets.len()];
        let mut done: Vec<usize> = Vec::new();
        for i in order {
            let (low, high) = sets[i].extent();
            let apart = APART * v.scale;
            let beside = |j: &&usize| {
                let other = sets[**j].extent();
                low < other.1 + apart && other.0 < high + apart
            };
            let mut taken: Vec<f64> = done.iter().filter(beside).map(|j| heights[*j]).collect();
            taken.sort_by(f64::total_cmp);
            let in_gap = |across: f64| self.gap.is_some_and(|(from, to)| across > from && across < to);
            let bars: Vec<f64> = sets[i].lines(1).into_iter().filter(|across| !in_gap(*across)).map(|across| self.y(across)).collect();
            let is_clear = |y: f64| taken.iter().all(|t| (t - y).abs() >= LANE - 0.01);
            let below = bars.iter().copied().filter(|y| *y >= first - 0.01 && is_clear(*y)).min_by(f64::total_cmp);
            let above = || bars.iter().copied().filter(|y| is_clear(*y)).max_by(f64::total_cmp);
            let any = || bars.iter().copied().min_by(|a, b| (a - first).abs().total_cmp(&(b - first).abs()));
            heights[i] = below.or_else(above).or_else(any).unwrap_or(first);
            done.push(i);
        }
        heights
    }

    fn bar_along(&self, paper: &mut Paper, occurrence: &Occurrence, y: f64) {
        let v = self.view;
        let (low, high) = occurrence.extent();
        let Some((from, to)) = v.clip(low, high) else { return };
        let mark = occurrence.bar.mark.as_str();
        let layer = self.bar_layer(occurrence);
        paper.line(layer, mark, &[[v.x(from), y], [v.x(to), y]], Pen::solid(v.pens.main));
        if occurrence.bar.is_straight() {
            end_ticks(paper, v, layer, mark, (low, high), y);
        }
    }

    /// Ends of the bars of each support, as running dimensions from its grid under them.
    fn ends(&self, paper: &mut Paper, sets: &[&Occurrence], heights: &[f64]) {
        let v = self.view;
        for support in &self.subject.model.stations.supports {
            if !v.shows(support.centre) {
                continue;
            }
            let mut stops: Vec<Stop> = Vec::new();
            let mut lowest = f64::NEG_INFINITY;
            for (occurrence, y) in sets.iter().zip(heights) {
                for station in occurrence.main_ends() {
                    if !v.shows(station) || self.subject.nearest_grid(station) != support.centre {
                        continue;
                    }
                    lowest = lowest.max(*y);
                    let distance = (station - support.centre).abs();
                    let known = stops.iter_mut().find(|s| (s.x - v.x(station)).abs() * v.scale < 0.5);
                    match known {
                        Some(stop) => stop.from_y = stop.from_y.max(*y),
                        None if distance > 0.5 => stops.push(Stop { x: v.x(station), distance, from_y: *y }),
                        None => {}
                    }
                }
            }
            if !stops.is_empty() {
                running(paper, v, v.x(support.centre), lowest + 4.0, &stops);
            }
        }
    }

    /// The thin upright line over a zone, its ring where it crosses the bar, the call-out on it.
    fn zone_along(&self, paper: &mut Paper, occurrence: &Occurrence, y: f64, order: usize, all: &[&Occurrence], pair: Option<(&Occurrence, f64)>) {
        let v = self.view;
        let (low, high) = occurrence.extent();
        let mut lines = occurrence.lines(1);
        // Where both ways round lie side by side, the line crosses both.
        let (mut shared_low, mut shared_high) = (low, high);
        if let Some((other, _)) = pair {
            lines.extend(other.lines(1));
            lines.sort_by(f64::total_cmp);
            (shared_low, shared_high) = (low.max(other.extent().0), high.min(other.extent().1));
        }
        let (Some((from, to)), Some(first), Some(last)) = (v.clip(shared_low, shared_high), lines.first(), lines.last()) else { return };
        let mark = occurrence.bar.mark.as_str();
        let x = v.x(self.zone_station(occurrence, from, to, all));
        let thin = Pen::solid(v.pens.thin);
        let (y0, y1) = (self.y(*last), self.y(*first));
        paper.soft_line(Layer::CallOut, mark, &[[x, y0], [x, y1]], thin);
        for y in [y0, y1] {
            tick(paper, Layer::CallOut, mark, [x, y], v.pens.thin);
        }
        for y in [Some(y), pair.map(|(_, y)| y)].into_iter().flatten() {
            paper.ring(Layer::CallOut, mark, [x, y], 0.9, thin);
        }
        self.call_out(paper, along_upright(x, y0, y1, v.call_out, order % 2 == 1), [x, y], occurrence);
    }

    /// Where the upright line of a set stands: in the span, clear of its faces and of the lines of the other parts of its zone.
    fn zone_station(&self, occurrence: &Occurrence, from: f64, to: f64, all: &[&Occurrence]) -> f64 {
        let st = &self.subject.model.stations;
        let parts: Vec<&&Occurrence> = all.iter().filter(|o| o.zone == occurrence.zone).collect();
        let index = parts.iter().position(|o| o.bar.mark == occurrence.bar.mark && o.extent() == occurrence.extent()).unwrap_or(0);
        let scale = self.view.scale;
        let pitch = |room: f64| (9.0 * scale).min(0.8 * room / (parts.len() + 1) as f64);
        match occurrence.bar.role {
            Role::SpanBottom => {
                let middle = (from + to) / 2.0;
                let span = st.spans.iter().find(|s| s.left_face <= middle && middle <= s.right_face);
                let (left, right) = span.map_or((from, to), |s| (s.left_face.max(from), s.right_face.min(to)));
                (left + 0.16 * (right - left) + pitch(right - left) * index as f64).clamp(from, to)
            }
            Role::SupportTop => {
                let near = st.supports.iter().min_by(|a, b| (a.centre - (from + to) / 2.0).abs().total_cmp(&(b.centre - (from + to) / 2.0).abs()));
                let face = near.map_or(from, |s| s.right_face);
                (face + 3.0 * scale + pitch(2.0 * (to - face)) * index as f64).min(to - scale).max(from)
            }
            _ => {
                // An end bar: in its reach, past the face.
                let at_start = (from + to) / 2.0 < (st.start + st.end) / 2.0;
                let share = 0.62 + 0.1 * index as f64;
                if at_start { from + share * (to - from) } else { to - share * (to - from) }
            }
        }
    }

    /// Laps of the pieces of bars held along each side edge, dimensioned inside the slab.
    fn held_laps(&self, paper: &mut Paper, held: &[&Occurrence]) {
        let v = self.view;
        let level_of = |o: &Occurrence| o.sets.first().map_or(0, |s| s.axis[0][2].round() as i64);
        for is_near in [true, false] {
            let on_side = |o: &&&Occurrence| o.lines(1).iter().any(|across| (*across < self.width() / 2.0) == is_near);
            let own: Vec<&&Occurrence> = held.iter().filter(on_side).collect();
            let y = if is_near { self.top + self.height() - HELD_LAP } else { self.top + HELD_LAP };
            let mut known: Vec<f64> = Vec::new();
            for z in own.iter().map(|o| level_of(o)).sorted().dedup() {
                let line = own.iter().filter(|o| level_of(o) == z).map(|o| (o.bar.mark.as_str(), o.extent()));
                for (before, after) in line.sorted_by(|a, b| a.1.0.total_cmp(&b.1.0)).tuple_windows() {
                    let (from, to) = (after.1.0, before.1.1);
                    // Equal laps of one edge are dimensioned once.
                    let is_new = known.iter().all(|lap| (lap - (to - from)).abs() > 1.0);
                    if to > from && is_new && v.shows(from) && v.shows(to) {
                        known.push(to - from);
                        let marks = if before.0 == after.0 { before.0.to_string() } else { format!("{}, {}", before.0, after.0) };
                        level(paper, v, v.x(from), v.x(to), y, &format!("{marks} lap {}", num(to - from, 0)));
                    }
                }
            }
        }
    }

    fn held_along(&self, paper: &mut Paper, occurrence: &Occurrence) {
        let v = self.view;
        let (low, high) = occurrence.extent();
        let Some((from, to)) = v.clip(low, high) else { return };
        let lines = occurrence.lines(1);
        let layer = self.bar_layer(occurrence);
        for across in &lines {
            let y = self.y(*across);
            paper.line(layer, &occurrence.bar.mark, &[[v.x(from), y], [v.x(to), y]], Pen::solid(v.pens.other));
            end_ticks(paper, v, layer, &occurrence.bar.mark, (low, high), y);
        }
        let Some(y) = lines.first().map(|across| self.y(*across)) else { return };
        let near = along_level(v.x(from), v.x(to), y, v.call_out);
        self.call_out(paper, near, [v.x(from + 0.3 * (to - from)), y], occurrence);
    }
}

/// Ends of straight bars: a short tick at 45° where a bar ends over others; bent ends run to the face as they are.
pub fn end_ticks(paper: &mut Paper, v: &View, layer: Layer, mark: &str, extent: (f64, f64), y: f64) {
    for (station, sign) in [(extent.0, 1.0), (extent.1, -1.0)] {
        if v.shows(station) {
            let x = v.x(station);
            paper.line(layer, mark, &[[x, y], [x + sign * 1.3, y - 1.3]], Pen::solid(v.pens.other));
        }
    }
}

impl Occurrence<'_> {
    /// Where its main leg ends along the span: bent ends at their outer face.
    pub fn main_ends(&self) -> Vec<f64> {
        let Some(set) = self.sets.first() else { return Vec::new() };
        let main = self.main_level();
        let on_main = set.axis.iter().filter(|p| (p[2] - main).abs() < 0.5).map(|p| p[0]);
        let (low, high) = on_main.fold((f64::INFINITY, f64::NEG_INFINITY), |(a, b), x| (a.min(x), b.max(x)));
        let half = f64::from(self.bar.size) / 2.0;
        let outer = |station: f64, sign: f64| {
            let is_upright = set.axis.windows(2).any(|w| w[0][0] == w[1][0] && w[0][0] == station);
            if is_upright { station + sign * half } else { station }
        };
        vec![outer(low, -1.0), outer(high, 1.0)]
    }

    /// Level of the main leg: the upper one of a bar that closes the face, else the longest level piece.
    pub fn main_level(&self) -> f64 {
        let Some(set) = self.sets.first() else { return 0.0 };
        let level = || set.axis.windows(2).filter(|w| w[0][2] == w[1][2]);
        let longest = level().max_by(|a, b| (a[0][0] - a[1][0]).abs().total_cmp(&(b[0][0] - b[1][0]).abs())).map_or(0.0, |w| w[0][2]);
        if level().count() > 1 { level().map(|w| w[0][2]).fold(longest, f64::max) } else { longest }
    }
}
