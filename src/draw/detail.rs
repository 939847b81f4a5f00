//! Sections: along the span as a band, and close-ups of slab ends and side edges. Bars stand at their true levels.

use super::paper::{Area, Lettering, Paper, Spot};
use super::plan_view::level_dimension;
use super::view::View;
use crate::base::{mm, num};
use crate::job::Slab;
use crate::place::{BarType, SlabModel};
use crate::plan::{Layer as BarLayer, Role};
use crate::scene::{Anchor, Dash, Layer, Pen, Weight};
use crate::tables::tables;

/// A cut dot is never drawn smaller than this radius, mm on paper.
const LEAST_DOT: f64 = 0.55;

/// An upright cut through the slab: stations along `axis` (0 along the span, 1 across it) against levels.
pub struct Cut<'a> {
    pub slab: &'a Slab,
    pub model: &'a SlabModel,
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
}

impl Cut<'_> {
    fn x(&self, station: f64) -> f64 {
        self.corner[0] + (station - self.low) / self.scale
    }

    fn y(&self, level: f64) -> f64 {
        self.corner[1] + (self.slab.thickness.value - level) / self.level_scale
    }

    /// Height of the slab on paper, mm.
    pub fn height(&self) -> f64 {
        self.slab.thickness.value / self.level_scale
    }

    pub fn width(&self) -> f64 {
        (self.high - self.low) / self.scale
    }

    /// Draws concrete, supports and bars; returns where each mark can be pointed at.
    pub fn draw(&self, paper: &mut Paper, v: &View, stub: f64) -> Vec<(String, [f64; 2])> {
        self.concrete(paper, v, stub);
        let mut points = Vec::new();
        for bar in &self.model.bars {
            if bar.is_along_span() == (self.axis == 0) {
                points.extend(self.in_plane(paper, v, bar));
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
        let h = self.slab.thickness.value;
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

    fn concrete_extent(&self) -> (f64, f64) {
        if self.axis == 0 { (self.model.stations.start, self.model.stations.end) } else { (0.0, self.slab.width.value) }
    }

    /// What the slab rests on in this cut, as lengths of stations.
    fn holders(&self) -> Vec<(f64, f64)> {
        if self.axis == 0 {
            return self.model.stations.supports.iter().map(|s| (s.left_face, s.right_face)).collect();
        }
        let width = self.slab.width.value;
        let mut held = Vec::new();
        if self.slab.edges[0].is_held() {
            held.push((0.0, self.slab.edge_width[0]));
        }
        if self.slab.edges[1].is_held() {
            held.push((width - self.slab.edge_width[1], width));
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
    fn in_plane(&self, paper: &mut Paper, v: &View, bar: &BarType) -> Vec<(String, [f64; 2])> {
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
            let rounded = rounded(&line, radius);
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

    /// Whether a set that starts at `first` and runs on by `reach` has a bar within half a metre of the cut.
    fn is_near(&self, first: f64, reach: f64) -> bool {
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

/// A close-up with its title and the marks in it.
pub fn close_up(paper: &mut Paper, v: &View, cut: &Cut, title: &str, within: &Area) {
    let points = cut.draw(paper, v, 7.0);
    let heading = Lettering { layer: Layer::Text, mark: String::new(), height: v.note, weight: Weight::Medium };
    let x = cut.corner[0];
    paper.text(&heading, Spot { at: [x, cut.corner[1] - 11.0], anchor: Anchor::Start, upward: false }, title);
    thickness(paper, v, cut);
    lengths(paper, v, cut);
    point_at(paper, v, cut, points, within);
}

/// What a fixer needs at an edge: the bearing, and the legs back of closing bars from their outer face.
fn lengths(paper: &mut Paper, v: &View, cut: &Cut) {
    let (from, to) = cut.concrete_extent();
    let soffit = cut.y(0.0);
    let mut rows = soffit + 13.5;
    for (a, b) in cut.holders() {
        let (a, b) = (a.max(from), b.min(to));
        if a >= cut.low - 0.5 && b <= cut.high + 0.5 && b > a {
            level_dimension(paper, v, cut.x(a), cut.x(b), rows, &format!("bearing {}", mm(b - a)));
            rows += 5.5;
        }
    }
    // The shortest closing leg that ends within the view.
    let across = 1 - cut.axis;
    let closing = cut.model.bars.iter().filter(|b| matches!(b.shape, "21" | "13") && b.is_along_span() == (cut.axis == 0));
    let legs = closing
        .flat_map(|b| b.sets.iter().map(move |s| (b, s)))
        .filter(|(_, s)| cut.axis == 0 || cut.is_near(s.axis[0][across], s.step[across] * f64::from(s.count.saturating_sub(1))));
    let seen = legs.filter_map(|(bar, set)| {
        let half = f64::from(bar.size) / 2.0;
        let (first, last) = (set.axis.first()?, set.axis.last()?);
        let end = if first[2] < last[2] { first } else { last };
        let face = set.axis.windows(2).find(|w| w[0][cut.axis] == w[1][cut.axis]).map(|w| w[0][cut.axis])?;
        let outer = if end[cut.axis] > face { face - half } else { face + half };
        let inside = |x: f64| x >= cut.low && x <= cut.high;
        (inside(end[cut.axis]) && inside(outer)).then_some((bar, outer, end[cut.axis]))
    });
    if let Some((bar, outer, end)) = seen.min_by(|a, b| (a.1 - a.2).abs().total_cmp(&(b.1 - b.2).abs())) {
        level_dimension(paper, v, cut.x(outer), cut.x(end), rows, &format!("{} leg {}", bar.mark, mm((end - outer).abs())));
    }
}

/// Marks with leaders: above the slab for what lies in its upper half, below for the rest, spread so that they do not meet.
fn point_at(paper: &mut Paper, v: &View, cut: &Cut, mut points: Vec<(String, [f64; 2])>, within: &Area) {
    let lettering = |mark: &str| Lettering { layer: Layer::CallOut, mark: mark.into(), height: v.note, weight: Weight::Medium };
    points.sort_by(|a, b| a.1[0].total_cmp(&b.1[0]));
    let middle = cut.corner[1] + cut.height() / 2.0;
    for upper in [true, false] {
        let own: Vec<&(String, [f64; 2])> = points.iter().filter(|p| (p.1[1] < middle) == upper).collect();
        for (mark, at) in own {
            let y = if upper { cut.corner[1] - 4.6 } else { cut.corner[1] + cut.height() + 8.6 };
            // From close by outwards, to both sides.
            let spots = (0..40).map(|i| {
                let step = f64::from((i + 1) / 2) * 1.7 * if i % 2 == 0 { 1.0 } else { -1.0 };
                Spot { at: [at[0] + 3.0 + step, y], anchor: Anchor::Middle, upward: false }
            });
            let (area, _) = paper.place(&lettering(mark), spots, mark, within);
            paper.reserve(area.grown(0.9));
            let middle = (area.min[0] + area.max[0]) / 2.0;
            let foot = [middle, if upper { area.max[1] + 0.3 } else { area.min[1] - 0.3 }];
            paper.line(Layer::CallOut, mark, &[*at, foot], Pen::solid(v.pens.thin));
        }
    }
}

/// The thickness at the broken or far side of a close-up.
fn thickness(paper: &mut Paper, v: &View, cut: &Cut) {
    let ends_high = cut.high < cut.concrete_extent().1 - 0.5;
    let x = if ends_high { cut.x(cut.high) + 7.0 } else { cut.x(cut.low) - 5.0 };
    let from = if ends_high { cut.x(cut.high) + 1.5 } else { cut.x(cut.low) - 1.5 };
    super::plan_view::upright_dimension(paper, v, x, cut.y(cut.slab.thickness.value), cut.y(0.0), from, &mm(cut.slab.thickness.value));
}

/// Names of the layers at the left end of the section band, and the level of the top.
pub fn name_layers(paper: &mut Paper, v: &View, cut: &Cut) {
    let lettering = Lettering { layer: Layer::Text, mark: String::new(), height: v.note, weight: Weight::Regular };
    let x = cut.x(cut.low);
    let mut levels: Vec<(BarLayer, f64)> = Vec::new();
    for layer in [BarLayer::T1, BarLayer::T2, BarLayer::B2, BarLayer::B1] {
        let of_layer = cut.model.bars.iter().filter(|b| b.layer == layer || layer == BarLayer::T1 && b.role == Role::EndTop);
        let z = of_layer.flat_map(|b| &b.sets).map(|s| s.axis[0][2]).next();
        levels.extend(z.map(|z| (layer, z)));
    }
    let top = cut.corner[1] - 0.5;
    let spread = (cut.height() + 1.0) / 3.0;
    for (i, (layer, z)) in levels.iter().enumerate() {
        let y = top + (i as f64 * spread.max(3.2)) + 1.0;
        paper.text(&lettering, Spot { at: [x - 9.0, y + 1.2], anchor: Anchor::End, upward: false }, layer.name());
        paper.scene.line(Layer::Text, &[[x - 8.2, y], [x - 1.5, cut.y(*z)]], Pen { width: v.pens.thin, dash: Dash::Solid });
    }
    if let Some(level) = cut.slab.level {
        let x1 = cut.x(cut.high);
        let sign = if level >= 0.0 { "+" } else { "" };
        let text = format!("{sign}{:.3}", level / 1000.0);
        paper.text(&lettering, Spot { at: [x1 + 8.0, cut.corner[1] - 1.0], anchor: Anchor::Start, upward: false }, &text);
        paper.scene.line(Layer::Dimension, &[[x1 + 1.0, cut.corner[1]], [x1 + 20.0, cut.corner[1]]], Pen::solid(v.pens.thin));
    }
    let text = num(cut.slab.thickness.value, 0);
    super::plan_view::upright_dimension(paper, v, cut.x(cut.high) + 5.0, cut.y(cut.slab.thickness.value), cut.y(0.0), cut.x(cut.high) + 1.0, &text);
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
fn clip(line: &[[f64; 2]], low: f64, high: f64) -> Vec<Vec<[f64; 2]>> {
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
