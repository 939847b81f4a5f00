//! Sections: an upright cut through the slab, along the span as a band or close up at ends and edges. Bars stand at their true levels.

use super::dimension::upright;
use super::paper::{Lettering, Paper, Spot};
use super::view::{Subject, View};
use crate::base::num;
use crate::place::BarType;
use crate::plan::{Layer as BarLayer, Role};
use crate::scene::{Anchor, Layer, Pen};
use crate::tables::tables;

/// A cut dot is never drawn smaller than this radius, mm on paper.
const LEAST_DOT: f64 = 0.55;

/// An upright cut through the slab: stations along `axis` (0 along the span, 1 across it) against levels.
pub struct Cut<'a> {
    pub subject: &'a Subject<'a>,
    pub axis: usize,
    /// Stations shown, mm.
    pub low: f64,
    pub high: f64,
    /// Where the cut is taken, on the other axis, mm.
    pub at: f64,
    pub scale: f64,
    pub level_scale: f64,
    /// Paper x of `low`, paper y of the top of the slab.
    pub corner: [f64; 2],
    /// Whether bars that lie one behind the other are drawn apart.
    pub apart: bool,
}

/// Paper between bars of one level that are drawn apart, mm.
const APART: f64 = 1.2;

impl Cut<'_> {
    pub(super) fn x(&self, station: f64) -> f64 {
        self.corner[0] + (station - self.low) / self.scale
    }

    pub(super) fn y(&self, level: f64) -> f64 {
        self.corner[1] + (self.subject.slab.thickness.value - level) / self.level_scale
    }

    /// Height of the slab on paper, mm.
    pub fn height(&self) -> f64 {
        self.subject.slab.thickness.value / self.level_scale
    }

    pub fn width(&self) -> f64 {
        (self.high - self.low) / self.scale
    }

    /// Draws concrete, supports and bars; returns where each mark can be pointed at.
    pub fn draw(&self, paper: &mut Paper, v: &View, stub: f64) -> Vec<(String, [f64; 2])> {
        self.concrete(paper, v, stub);
        let mut points = Vec::new();
        let mut levels: Vec<[f64; 3]> = Vec::new();
        for bar in &self.subject.model.bars {
            if bar.is_along_span() == (self.axis == 0) {
                points.extend(self.in_plane(paper, v, bar, &mut levels));
            } else {
                points.extend(self.cut(paper, bar));
            }
        }
        points
    }

    fn concrete(&self, paper: &mut Paper, v: &View, stub: f64) {
        let pen = Pen::solid(v.pens.concrete);
        let (from, to) = self.concrete_extent();
        let (low, high) = (self.low.max(from), self.high.min(to));
        let h = self.subject.slab.thickness.value;
        let top = [[self.x(low), self.y(h)], [self.x(high), self.y(h)]];
        paper.line(Layer::Concrete, "", &top, pen);
        // The soffit runs between the faces of what holds the slab.
        let mut at = low;
        for (from, to) in self.holders() {
            if to <= low || from >= high {
                continue;
            }
            if from > at {
                paper.line(Layer::Concrete, "", &[[self.x(at), self.y(0.0)], [self.x(from), self.y(0.0)]], pen);
            }
            let foot = self.y(0.0) + stub;
            for side in [from, to] {
                if side >= self.low - 0.5 && side <= self.high + 0.5 {
                    paper.line(Layer::Concrete, "", &[[self.x(side), self.y(0.0)], [self.x(side), foot]], pen);
                }
            }
            let (a, b) = (from.max(self.low), to.min(self.high));
            let middle = (self.x(a) + self.x(b)) / 2.0;
            let foot_line =
                [[self.x(a), foot], [middle - 0.8, foot], [middle - 0.3, foot - 1.0], [middle + 0.3, foot + 1.0], [middle + 0.8, foot], [self.x(b), foot]];
            paper.line(Layer::Concrete, "", &foot_line, Pen::solid(v.pens.thin));
            at = at.max(to);
            // A support that reaches past the slab end has a top of its own there.
            for (a, b) in [(from, low.min(to)), (high.max(from), to)] {
                if b - a > 0.5 && a >= self.low - 0.5 && b <= self.high + 0.5 {
                    paper.line(Layer::Concrete, "", &[[self.x(a), self.y(0.0)], [self.x(b), self.y(0.0)]], pen);
                }
            }
        }
        if at < high {
            paper.line(Layer::Concrete, "", &[[self.x(at), self.y(0.0)], [self.x(high), self.y(0.0)]], pen);
        }
        for (side, real) in [(low, from), (high, to)] {
            let x = self.x(side);
            if (side - real).abs() < 0.5 {
                paper.line(Layer::Concrete, "", &[[x, self.y(h)], [x, self.y(0.0)]], pen);
            } else {
                let (y0, y1) = (self.y(h) - 1.5, self.y(0.0) + 1.5);
                let m = (y0 + y1) / 2.0;
                paper.line(
                    Layer::Concrete,
                    "",
                    &[[x, y0], [x, m - 0.8], [x - 1.0, m - 0.3], [x + 1.0, m + 0.3], [x, m + 0.8], [x, y1]],
                    Pen::solid(v.pens.thin),
                );
            }
        }
    }

    pub(super) fn concrete_extent(&self) -> (f64, f64) {
        if self.axis == 0 { (self.subject.model.stations.start, self.subject.model.stations.end) } else { (0.0, self.subject.slab.width.value) }
    }

    /// What the slab rests on in this cut, as lengths of stations.
    pub(super) fn holders(&self) -> Vec<(f64, f64)> {
        if self.axis == 0 {
            return self.subject.model.stations.supports.iter().map(|s| (s.left_face, s.right_face)).collect();
        }
        let width = self.subject.slab.width.value;
        let mut held = Vec::new();
        if self.subject.slab.edges[0].is_held() {
            held.push((0.0, self.subject.slab.edge_width[0]));
        }
        if self.subject.slab.edges[1].is_held() {
            held.push((width - self.subject.slab.edge_width[1], width));
        }
        held
    }

    fn ink(&self, bar: &BarType) -> Layer {
        match bar.layer {
            BarLayer::E => Layer::Edge,
            BarLayer::B1 | BarLayer::B2 => Layer::Bottom,
            _ => Layer::Top,
        }
    }

    /// Bars in the plane of the cut: each different centre line once.
    fn in_plane(&self, paper: &mut Paper, v: &View, bar: &BarType, levels: &mut Vec<[f64; 3]>) -> Vec<(String, [f64; 2])> {
        let across = 1 - self.axis;
        let mut seen: Vec<Vec<[f64; 2]>> = Vec::new();
        let mut points = Vec::new();
        for set in &bar.sets {
            // Bars held inside the corners of an edge stand at one side; a cut elsewhere does not meet them.
            if bar.role == Role::Edge && bar.is_straight() {
                continue;
            }
            if self.axis == 1 && !self.is_near(set.axis[0][across], set.step[across] * f64::from(set.count.saturating_sub(1))) {
                continue;
            }
            let line: Vec<[f64; 2]> = set.axis.iter().map(|p| [p[self.axis], p[2]]).collect();
            if seen.contains(&line) {
                continue;
            }
            let radius = tables().known_bar(bar.size).radius + f64::from(bar.size) / 2.0;
            let shown = if self.apart { self.drawn_apart(&line, levels) } else { line.clone() };
            let rounded = rounded(&shown, radius);
            let clipped = clip(&rounded, self.low, self.high);
            for piece in clipped {
                let paper_line: Vec<[f64; 2]> = piece.iter().map(|p| [self.x(p[0]), self.y(p[1])]).collect();
                paper.line(
                    self.ink(bar),
                    &bar.mark,
                    &paper_line,
                    Pen::solid(if matches!(bar.layer, BarLayer::B2 | BarLayer::T2) { v.pens.other } else { v.pens.main }),
                );
                let longest = piece.windows(2).max_by(|a, b| (a[0][0] - a[1][0]).abs().total_cmp(&(b[0][0] - b[1][0]).abs()));
                if let Some(w) = longest {
                    points.push((bar.mark.clone(), [self.x((w[0][0] + w[1][0]) / 2.0), self.y((w[0][1] + w[1][1]) / 2.0)]));
                }
            }
            seen.push(line);
        }
        points.truncate(1);
        points
    }

    /// A line whose level pieces that would cover others are moved towards the middle of the slab, not to scale.
    fn drawn_apart(&self, line: &[[f64; 2]], levels: &mut Vec<[f64; 3]>) -> Vec<[f64; 2]> {
        let middle = self.subject.slab.thickness.value / 2.0;
        let mut shown = line.to_vec();
        let step = APART * self.level_scale;
        for i in 1..line.len() {
            let (a, b) = (line[i - 1], line[i]);
            if a[1] != b[1] {
                continue;
            }
            let (from, to) = (a[0].min(b[0]).max(self.low), a[0].max(b[0]).min(self.high));
            let inward = if a[1] < middle { step } else { -step };
            let covers = |z: f64| levels.iter().any(|l| (l[2] - z).abs() < 0.7 * step && l[0] < to && from < l[1]);
            let mut z = a[1];
            while covers(z) && (z - a[1]).abs() < 3.5 * step {
                z += inward;
            }
            (shown[i - 1][1], shown[i][1]) = (z, z);
            levels.push([from, to, z]);
        }
        shown
    }

    /// Whether a set that starts at `first` and runs on by `reach` has a bar within half a metre of the cut.
    pub(super) fn is_near(&self, first: f64, reach: f64) -> bool {
        let (a, b) = (first.min(first + reach), first.max(first + reach));
        self.at > a - 500.0 && self.at < b + 500.0
    }

    /// Bars that the cut goes through, as dots.
    fn cut(&self, paper: &mut Paper, bar: &BarType) -> Vec<(String, [f64; 2])> {
        let across = 1 - self.axis;
        let mut points: Vec<(String, [f64; 2])> = Vec::new();
        for set in &bar.sets {
            for pair in set.axis.windows(2).filter(|w| w[0][across] != w[1][across]) {
                let (a, b) = (pair[0][across].min(pair[1][across]), pair[0][across].max(pair[1][across]));
                if self.at < a || self.at > b {
                    continue;
                }
                for i in 0..set.count {
                    let station = pair[0][self.axis] + set.step[self.axis] * f64::from(i);
                    if station < self.low || station > self.high {
                        continue;
                    }
                    let centre = [self.x(station), self.y(pair[0][2])];
                    let radius = (f64::from(bar.size) / 2.0 / self.scale.max(self.level_scale)).max(LEAST_DOT);
                    paper.dot(self.ink(bar), &bar.mark, centre, radius);
                    points.push((bar.mark.clone(), centre));
                }
            }
        }
        let middle = points.len() / 2;
        points.into_iter().skip(middle).take(1).collect()
    }
}

/// Names of the layers at the left end of the section band, the level of the top and the thickness at its right end.
pub fn name_layers(paper: &mut Paper, v: &View, cut: &Cut) {
    let lettering = Lettering::new(Layer::Text, v.note);
    let x = cut.x(cut.low);
    let thin = Pen::solid(v.pens.thin);
    let mut levels: Vec<(BarLayer, f64)> = Vec::new();
    for layer in [BarLayer::T1, BarLayer::T2, BarLayer::B2, BarLayer::B1] {
        let z = cut.subject.occurrences.iter().find(|o| o.bar.layer == layer).map(|o| o.main_level());
        levels.extend(z.map(|z| (layer, z)));
    }
    let pitch = ((cut.height() + 1.0) / 3.0).max(1.25 * v.note + 0.5);
    let top = cut.corner[1] + cut.height() / 2.0 - pitch * (levels.len() as f64 - 1.0) / 2.0;
    for (i, (layer, z)) in levels.iter().enumerate() {
        let y = top + i as f64 * pitch;
        paper.text(&lettering, Spot::level([x - 9.0, y + v.note / 2.0], Anchor::End), layer.name());
        paper.line(Layer::Text, "", &[[x - 8.2, y], [x - 1.5, cut.y(*z)]], thin);
    }
    let right = cut.x(cut.high);
    if let Some(level) = cut.subject.slab.level {
        let metres = (level.round() + 0.0) / 1000.0;
        let sign = if metres >= 0.0 { "+" } else { "" };
        let text = format!("{sign}{:.3}", metres.abs() * if metres < 0.0 { -1.0 } else { 1.0 });
        let area = paper.text(&lettering, Spot::level([right + 9.0, cut.corner[1] - 0.25 * v.note - 0.6], Anchor::Start), &text);
        paper.line(Layer::Dimension, "", &[[right + 1.0, cut.corner[1]], [area.max[0], cut.corner[1]]], thin);
    }
    let text = num(cut.subject.slab.thickness.value, 0);
    upright(paper, v, right + 5.0, cut.y(cut.subject.slab.thickness.value), cut.y(0.0), right + 1.0, &text);
}

/// A line with its corners rounded to a radius.
fn rounded(line: &[[f64; 2]], radius: f64) -> Vec<[f64; 2]> {
    let mut points = Vec::new();
    for (i, p) in line.iter().enumerate() {
        let (Some(before), Some(after)) = (i.checked_sub(1).and_then(|j| line.get(j)), line.get(i + 1)) else {
            points.push(*p);
            continue;
        };
        let toward = |q: &[f64; 2]| {
            let (dx, dy) = (q[0] - p[0], q[1] - p[1]);
            let length = dx.hypot(dy).max(1e-9);
            let reach = radius.min(length / 2.0);
            [p[0] + dx / length * reach, p[1] + dy / length * reach]
        };
        let (a, b) = (toward(before), toward(after));
        // A quarter circle as a curve through its corner: five points of a quadratic are within a tenth of a line width.
        for step in 0..=4 {
            let t = f64::from(step) / 4.0;
            let mix = |i: usize| (1.0 - t) * (1.0 - t) * a[i] + 2.0 * t * (1.0 - t) * p[i] + t * t * b[i];
            points.push([mix(0), mix(1)]);
        }
    }
    points
}

/// The parts of a line between two stations.
pub(super) fn clip(line: &[[f64; 2]], low: f64, high: f64) -> Vec<Vec<[f64; 2]>> {
    let mut parts: Vec<Vec<[f64; 2]>> = Vec::new();
    let mut part: Vec<[f64; 2]> = Vec::new();
    for w in line.windows(2) {
        let (a, b) = (w[0], w[1]);
        let at = |x: f64| if (b[0] - a[0]).abs() < 1e-9 { a } else { [x, a[1] + (x - a[0]) / (b[0] - a[0]) * (b[1] - a[1])] };
        let (from, to) = (a[0].min(b[0]).max(low), a[0].max(b[0]).min(high));
        if from > to {
            if part.len() > 1 {
                parts.push(std::mem::take(&mut part));
            }
            part.clear();
            continue;
        }
        let (first, second) = if a[0] <= b[0] { (at(from), at(to)) } else { (at(to), at(from)) };
        let (first, second) = if (b[0] - a[0]).abs() < 1e-9 { (a, b) } else { (first, second) };
        if part.last() != Some(&first) {
            if part.len() > 1 {
                parts.push(std::mem::take(&mut part));
            }
            part = vec![first];
        }
        part.push(second);
    }
    if part.len() > 1 {
        parts.push(part);
    }
    parts
}
