//! Bottom and top plans: one heavy representative bar for each set, a thin line across it over the zone it fills, its call-out on that line.

use super::paper::{Area, Lettering, Paper, Spot, along_level, along_upright};
use super::view::{Occurrence, View};
use crate::base::num;
use crate::job::{Edge, Slab};
use crate::place::SlabModel;
use crate::plan::{Layer as BarLayer, Role};
use crate::scene::{Anchor, Dash, Layer, Pen, Weight};

#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Face {
    Bottom,
    Top,
}

/// A plan on paper: the band it fills, and how places across the slab map to it.
pub struct PlanView<'a> {
    pub view: &'a View,
    pub slab: &'a Slab,
    pub model: &'a SlabModel,
    pub face: Face,
    /// Paper y of the far side face.
    pub top: f64,
    /// What is left out of a slab too wide for the sheet: from, to; mm across the slab.
    pub gap: Option<(f64, f64)>,
}

/// A call-out that waits for its place: where it may stand, and what it points at.
struct Waiting {
    spots: Vec<Spot>,
    target: [f64; 2],
}

/// Paper kept for the gap of a broken view, mm.
pub const BREAK: f64 = 6.0;

impl PlanView<'_> {
    /// Height of the plan on paper, mm.
    pub fn height(&self) -> f64 {
        let shown = self.slab.width.value - self.gap.map_or(0.0, |(a, b)| b - a);
        shown / self.view.scale + self.gap.map_or(0.0, |_| BREAK)
    }

    /// A place across the slab on paper.
    pub fn y(&self, across: f64) -> f64 {
        let bottom = self.top + self.height();
        let Some((from, to)) = self.gap else { return bottom - across / self.view.scale };
        let s = self.view.scale;
        if across <= from {
            bottom - across / s
        } else if across >= to {
            bottom - (from + across - to) / s - BREAK
        } else {
            bottom - from / s - BREAK * (across - from) / (to - from)
        }
    }

    /// Draws the plan.
    pub fn draw(&self, paper: &mut Paper) {
        self.concrete(paper);
        let shown: Vec<Occurrence> = Occurrence::of(self.model).into_iter().filter(|o| self.is_here(o)).collect();
        let along: Vec<&Occurrence> = shown.iter().filter(|o| o.bar.is_along_span()).collect();
        let across: Vec<&Occurrence> = shown.iter().filter(|o| !o.bar.is_along_span()).collect();
        // All lines first, then the texts, so that every text sees every line.
        let mut waiting: Vec<(Waiting, &Occurrence)> = Vec::new();
        for (i, occurrence) in along.iter().enumerate() {
            waiting.extend(self.along(paper, occurrence, i, &along).map(|w| (w, *occurrence)));
        }
        for occurrence in &across {
            waiting.extend(self.across(paper, occurrence).map(|w| (w, *occurrence)));
        }
        self.sides(paper);
        let within = Area::new([self.view.x(self.view.low) - 24.0, self.top - 9.0], [self.view.x(self.view.high) + 24.0, self.top + self.height() + 9.0]);
        // Full call-outs first: a mark alone finds room more easily.
        waiting.sort_by_key(|(_, o)| !o.first);
        for (place, occurrence) in waiting {
            self.call_out(paper, place, occurrence, &within);
        }
    }

    /// Bottom plan: B1 and B2. Top plan: T1, T2, edge and corner bars.
    fn is_here(&self, occurrence: &Occurrence) -> bool {
        let is_bottom = matches!(occurrence.bar.layer, BarLayer::B1 | BarLayer::B2);
        let (low, high) = occurrence.extent();
        let seen = if occurrence.bar.is_along_span() { self.view.clip(low, high).is_some() } else { occurrence.lines(0).iter().any(|x| self.view.shows(*x)) };
        (self.face == Face::Bottom) == is_bottom && seen
    }

    fn layer(&self) -> Layer {
        if self.face == Face::Bottom { Layer::Bottom } else { Layer::Top }
    }

    fn bar_layer(&self, occurrence: &Occurrence) -> Layer {
        if occurrence.bar.layer == BarLayer::E { Layer::Edge } else { self.layer() }
    }

    fn concrete(&self, paper: &mut Paper) {
        let v = self.view;
        let pen = Pen::solid(v.pens.concrete);
        let st = &self.model.stations;
        let (y0, y1) = (self.y(self.slab.width.value), self.y(0.0));
        let (start, end) = (st.start.max(v.low), st.end.min(v.high));
        paper.line(Layer::Concrete, "", &[[v.x(start), y0], [v.x(end), y0]], pen);
        paper.line(Layer::Concrete, "", &[[v.x(start), y1], [v.x(end), y1]], pen);
        for (x, own) in [(start, st.start), (end, st.end)] {
            let pen = if (x - own).abs() < 0.5 { pen } else { Pen { width: v.pens.thin, dash: Dash::Chain } };
            paper.line(Layer::Concrete, "", &[[v.x(x), y0], [v.x(x), y1]], pen);
        }
        let hidden = Pen { width: v.pens.thin, dash: Dash::Dashed };
        for (support, given) in st.supports.iter().zip(&self.slab.supports) {
            for x in [support.left_face, support.right_face] {
                // Faces under the slab are hidden; one outside its end is not drawn in plan.
                if v.shows(x) && x > st.start && x < st.end {
                    paper.line(Layer::Concrete, &given.grid, &[[v.x(x), y0], [v.x(x), y1]], hidden);
                }
            }
        }
        for (side, edge) in self.slab.edges.iter().enumerate() {
            if edge.is_held() {
                let across = if side == 0 { self.slab.edge_width[0] } else { self.slab.width.value - self.slab.edge_width[1] };
                paper.line(Layer::Concrete, "", &[[v.x(start), self.y(across)], [v.x(end), self.y(across)]], hidden);
            }
        }
        if let Some((from, to)) = self.gap {
            for across in [from, to] {
                zigzag(paper, v.x(start) - 4.0, v.x(end) + 4.0, self.y(across), v.pens.thin);
            }
        }
    }

    /// Bars along the span: one bar (two of a turned pair), its ends, and the upright line over its zone.
    fn along(&self, paper: &mut Paper, occurrence: &Occurrence, order: usize, all: &[&Occurrence]) -> Option<Waiting> {
        let v = self.view;
        let (low, high) = occurrence.extent();
        let (from, to) = v.clip(low, high)?;
        let held = occurrence.bar.role == Role::Edge;
        let lines = occurrence.lines(1);
        let (first, last) = (*lines.first()?, *lines.last()?);
        // Neighbouring sets stand at neighbouring heights, so that laps and turned pairs can be told apart.
        let share = if self.face == Face::Bottom { 0.62 } else { 0.55 };
        let wanted = self.slab.width.value * (share - 0.035 * (order % 3) as f64);
        let y = if held { first } else { occurrence.nearest(1, self.in_view(wanted)) };
        let layer = self.bar_layer(occurrence);
        let mark = occurrence.bar.mark.as_str();
        let width = if occurrence.bar.layer == BarLayer::E && held { v.pens.other } else { v.pens.main };
        for y in if held { lines.clone() } else { vec![y] } {
            paper.line(layer, mark, &[[v.x(from), self.y(y)], [v.x(to), self.y(y)]], Pen::solid(width));
            self.end_ticks(paper, occurrence, (low, high), y);
        }
        if held {
            let y = self.y(first);
            return Some(Waiting { spots: along_level(v.x(from), v.x(to), y, v.call_out), target: [v.x(from + 0.3 * (to - from)), y] });
        }
        let station = self.indicator(occurrence, from, to, all);
        let x = v.x(station);
        let thin = Pen::solid(v.pens.thin);
        let (y0, y1) = (self.y(last), self.y(first));
        paper.line(Layer::CallOut, mark, &[[x, y0], [x, y1]], thin);
        for y in [y0, y1] {
            tick(paper, Layer::CallOut, mark, [x, y], v.pens.thin);
        }
        paper.ring(Layer::CallOut, mark, [x, self.y(y)], 0.9, thin);
        Some(Waiting { spots: along_upright(x, y0, y1, v.call_out, order % 2 == 1), target: [x, self.y(y)] })
    }

    fn in_view(&self, across: f64) -> f64 {
        match self.gap {
            Some((from, to)) if across > from && across < to => to + 0.3 * (self.slab.width.value - to),
            _ => across,
        }
    }

    /// Where the upright line of a set stands: in the span, clear of its faces and of the line of the other part of its zone.
    fn indicator(&self, occurrence: &Occurrence, from: f64, to: f64, all: &[&Occurrence]) -> f64 {
        let st = &self.model.stations;
        let zone = occurrence.zone;
        // Parts of one zone share the room: the first takes the left place, the next the next.
        let parts = all.iter().filter(|o| o.zone == zone);
        let index = parts.into_iter().position(|o| o.bar.mark == occurrence.bar.mark && o.extent() == occurrence.extent()).unwrap_or(0);
        let paper = |mm: f64| mm * self.view.scale;
        if occurrence.bar.role == Role::SpanBottom {
            let middle = (from + to) / 2.0;
            let span = st.spans.iter().find(|s| s.left_face <= middle && middle <= s.right_face);
            let (left, right) = span.map_or((from, to), |s| (s.left_face, s.right_face));
            let (left, right) = (left.max(from), right.min(to));
            return (left + 0.16 * (right - left) + paper(9.0) * index as f64).clamp(from, to);
        }
        if occurrence.bar.role == Role::SupportTop {
            let near = st.supports.iter().min_by(|a, b| (a.centre - (from + to) / 2.0).abs().total_cmp(&(b.centre - (from + to) / 2.0).abs()));
            let face = near.map_or(from, |s| s.right_face);
            return (face + paper(3.0) + paper(9.0) * index as f64).min(to - paper(1.0)).max(from);
        }
        // An end bar: in its reach, past the face.
        let at_start = (from + to) / 2.0 < (st.start + st.end) / 2.0;
        let share = 0.62 + 0.1 * index as f64;
        if at_start { from + share * (to - from) } else { to - share * (to - from) }
    }

    /// Ends of straight bars: a short tick at 45° where a bar ends over others; bent ends run to the face as they are.
    fn end_ticks(&self, paper: &mut Paper, occurrence: &Occurrence, extent: (f64, f64), y: f64) {
        if !occurrence.bar.is_straight() {
            return;
        }
        let v = self.view;
        for (station, sign) in [(extent.0, 1.0), (extent.1, -1.0)] {
            if v.shows(station) {
                let (x, y) = (v.x(station), self.y(y));
                paper.line(self.bar_layer(occurrence), &occurrence.bar.mark, &[[x, y], [x + sign * 1.3, y - 1.3]], Pen::solid(v.pens.other));
            }
        }
    }

    /// Bars across the slab: one bar, and the level line over its zone.
    fn across(&self, paper: &mut Paper, occurrence: &Occurrence) -> Option<Waiting> {
        let v = self.view;
        let lines: Vec<f64> = occurrence.lines(0).into_iter().filter(|x| v.shows(*x)).collect();
        let (first, last) = (*lines.first()?, *lines.last()?);
        let mark = occurrence.bar.mark.as_str();
        let layer = self.bar_layer(occurrence);
        let edge_bar = occurrence.bar.role == Role::Edge;
        let held = edge_bar && occurrence.bar.is_straight();
        let width = if matches!(occurrence.bar.layer, BarLayer::E) && !held { v.pens.main } else { v.pens.other };
        let share = match (edge_bar, self.face) {
            (true, _) => 0.5,
            (false, Face::Bottom) => 0.90,
            (false, Face::Top) => 0.16,
        };
        let station = if held { first } else { nearest(&lines, first + share * (last - first)) };
        let set = occurrence.sets.iter().min_by(|a, b| (a.axis[0][0] - station).abs().total_cmp(&(b.axis[0][0] - station).abs()))?;
        let (y_low, y_high) = set.axis.iter().map(|p| p[1]).fold((f64::INFINITY, f64::NEG_INFINITY), |(a, b), y| (a.min(y), b.max(y)));
        for x in if held { vec![first, last] } else { vec![station] } {
            let pieces = pieces_at(occurrence, x);
            // Pieces in contact are drawn apart, not to scale, so that the lap can be seen.
            let drawn: Vec<(f64, (f64, f64))> = pieces.iter().enumerate().map(|(i, p)| (v.x(x) + if i % 2 == 1 { 1.4 } else { 0.0 }, *p)).collect();
            for (at, piece) in &drawn {
                paper.line(layer, mark, &[[*at, self.y(piece.1)], [*at, self.y(piece.0)]], Pen::solid(width));
            }
            if occurrence.first && (!held || x == first) {
                for pair in drawn.windows(2) {
                    self.lap(paper, pair[0].0.max(pair[1].0) + 2.2, pair[1].1.0, pair[0].1.1);
                }
            }
        }
        let x = v.x(station);
        if held {
            let spots = along_upright(x, self.y(y_high), self.y(y_low), v.call_out, station > self.model.stations.spans[0].left_face);
            return Some(Waiting { spots, target: [x, self.y(y_low + 0.45 * (y_high - y_low))] });
        }
        let y = if edge_bar {
            (y_low + y_high) / 2.0
        } else if self.face == Face::Bottom {
            self.in_view(0.26 * self.slab.width.value)
        } else {
            self.in_view(0.22 * self.slab.width.value)
        };
        let y = self.y(y);
        let thin = Pen::solid(v.pens.thin);
        paper.line(Layer::CallOut, mark, &[[v.x(first), y], [v.x(last), y]], thin);
        for x in [v.x(first), v.x(last)] {
            tick(paper, Layer::CallOut, mark, [x, y], v.pens.thin);
        }
        paper.ring(Layer::CallOut, mark, [x, y], 0.9, thin);
        let mut spots = along_level(v.x(first), v.x(last), y, v.call_out);
        spots.extend(along_upright(x, self.y(y_high), self.y(y_low), v.call_out, true));
        Some(Waiting { spots, target: [x, y] })
    }

    /// The lap of two pieces across the slab, dimensioned beside them.
    fn lap(&self, paper: &mut Paper, x: f64, from: f64, to: f64) {
        let v = self.view;
        let (y0, y1) = (self.y(to), self.y(from));
        paper.line(Layer::Dimension, "", &[[x, y0], [x, y1]], Pen::solid(v.pens.thin));
        for y in [y0, y1] {
            tick(paper, Layer::Dimension, "", [x, y], v.pens.thin);
        }
        let text = format!("lap {}", num(to - from, 0));
        let mut spots = vec![Spot { at: [x + v.note + 0.9, (y0 + y1) / 2.0], anchor: Anchor::Middle, upward: true }];
        spots.extend([2.0, 5.0, 8.0, 12.0].iter().flat_map(|d| [y0 - d, y1 + d]).map(|y| Spot {
            at: [x + v.note + 0.9, y],
            anchor: Anchor::Middle,
            upward: true,
        }));
        let within = Area::new([v.x(v.low) - 20.0, self.top - 4.0], [v.x(v.high) + 20.0, self.top + self.height() + 4.0]);
        paper.place(&figure(v), spots, &text, &within);
    }

    fn call_out(&self, paper: &mut Paper, place: Waiting, occurrence: &Occurrence, within: &Area) {
        let v = self.view;
        let lettering = Lettering { layer: Layer::CallOut, mark: occurrence.bar.mark.clone(), height: v.call_out, weight: Weight::Medium };
        let text = occurrence.call_out();
        let is_free = |s: &Spot| {
            let area = super::paper::text_area(s.at, v.call_out, &text, s.anchor, Weight::Medium, s.upward);
            within.holds(&area) && paper.conflicts(&area) == 0
        };
        if let Some(spot) = place.spots.iter().copied().find(is_free) {
            paper.text(&lettering, spot, &text);
            return;
        }
        // No room on its line: further off, with a leader to what it names.
        let target = place.target;
        let mut away = Vec::new();
        for ring in 1..=30 {
            let reach = 4.0 + 3.0 * f64::from(ring);
            for (dx, dy) in [
                (1.0, -0.6),
                (-1.0, -0.6),
                (1.0, 0.6),
                (-1.0, 0.6),
                (0.4, -1.0),
                (-0.4, -1.0),
                (0.4, 1.0),
                (-0.4, 1.0),
                (0.15, -1.0),
                (-0.15, -1.0),
                (0.15, 1.0),
                (-0.15, 1.0),
                (0.25, -0.5),
                (-0.25, -0.5),
                (0.25, 0.5),
                (-0.25, 0.5),
            ] {
                let at = [target[0] + dx * reach, target[1] + dy * reach];
                away.push(Spot { at, anchor: if dx > 0.0 { Anchor::Start } else { Anchor::End }, upward: false });
                away.push(Spot { at, anchor: if dy > 0.0 { Anchor::End } else { Anchor::Start }, upward: true });
            }
        }
        let (area, _) = paper.place(&lettering, away, &text, within);
        leader(paper, &lettering.mark, target, &area, v.pens.thin);
    }

    /// Names of the side edges and the width, at the left of the plan.
    fn sides(&self, paper: &mut Paper) {
        let v = self.view;
        let lettering = Lettering { layer: Layer::Text, mark: String::new(), height: v.note, weight: Weight::Regular };
        let left = v.x(self.model.stations.start.max(v.low));
        let (y0, y1) = (self.y(self.slab.width.value), self.y(0.0));
        let x = left - 17.0;
        upright_dimension(paper, v, x, y0, y1, left - 1.0, &num(self.slab.width.value, 0));
        for (side, y) in [(0, y1), (1, y0)] {
            let text = match self.slab.edges[side] {
                Edge::Free => "free edge".to_string(),
                Edge::Joint => "joint".to_string(),
                held => format!("{} {}", held.word(), num(self.slab.edge_width[side], 0)),
            };
            let near = if side == 0 { "near side: " } else { "far side: " };
            let at = if side == 0 { y + v.note + 1.6 } else { y - 1.6 };
            let right = v.x(self.model.stations.end.min(v.high));
            let spots = [0.97, 0.8, 0.6, 0.4].map(|share| Spot { at: [left + share * (right - left), at], anchor: Anchor::End, upward: false });
            let within = Area::new([0.0, 0.0], [paper.scene.width, paper.scene.height]);
            paper.place(&lettering, spots, &format!("{near}{text}"), &within);
        }
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

/// A thin line from a call-out to what it names.
fn leader(paper: &mut Paper, mark: &str, target: [f64; 2], area: &Area, width: f64) {
    let from = [target[0].clamp(area.min[0], area.max[0]), target[1].clamp(area.min[1], area.max[1])];
    paper.line(Layer::CallOut, mark, &[from, target], Pen::solid(width));
    paper.dot(Layer::CallOut, mark, target, 0.5);
}

/// A terminator: a short stroke at 45°.
pub fn tick(paper: &mut Paper, layer: Layer, mark: &str, at: [f64; 2], width: f64) {
    paper.line(layer, mark, &[[at[0] - 1.0, at[1] + 1.0], [at[0] + 1.0, at[1] - 1.0]], Pen::solid(width * 1.4));
}

/// A break line across a view.
fn zigzag(paper: &mut Paper, from: f64, to: f64, y: f64, width: f64) {
    let middle = (from + to) / 2.0;
    let points = [[from, y], [middle - 3.0, y], [middle - 1.0, y - 2.5], [middle + 1.0, y + 2.5], [middle + 3.0, y], [to, y]];
    paper.line(Layer::Concrete, "", &points, Pen::solid(width));
}

/// An upright dimension at `x` between two paper heights, with extension lines from `from_x`.
pub fn upright_dimension(paper: &mut Paper, v: &View, x: f64, y0: f64, y1: f64, from_x: f64, text: &str) {
    let pen = Pen::solid(v.pens.thin);
    paper.line(Layer::Dimension, "", &[[x, y0], [x, y1]], pen);
    let sign = (from_x - x).signum();
    for y in [y0, y1] {
        paper.line(Layer::Dimension, "", &[[from_x, y], [x - sign * 1.5, y]], pen);
        tick(paper, Layer::Dimension, "", [x, y], v.pens.thin);
    }
    let lettering = Lettering { layer: Layer::Dimension, mark: String::new(), height: v.note, weight: Weight::Regular };
    paper.text(&lettering, Spot { at: [x - 1.0, (y0 + y1) / 2.0], anchor: Anchor::Middle, upward: true }, text);
}

/// The line of a level dimension with its terminators.
pub fn dimension_line(paper: &mut Paper, v: &View, x0: f64, x1: f64, y: f64) {
    paper.line(Layer::Dimension, "", &[[x0.min(x1), y], [x0.max(x1), y]], Pen::solid(v.pens.thin));
    for x in [x0, x1] {
        tick(paper, Layer::Dimension, "", [x, y], v.pens.thin);
    }
}

fn figure(v: &View) -> Lettering {
    Lettering { layer: Layer::Dimension, mark: String::new(), height: v.note, weight: Weight::Regular }
}

/// The figure of a dimension from a grid to a bar end: over its length where it fits, else past the bar end, away from the grid.
pub fn outward_figure(paper: &mut Paper, v: &View, grid: f64, end: f64, y: f64, text: &str) {
    let (x0, x1) = (grid.min(end), grid.max(end));
    let width = crate::tables::font::face(Weight::Regular).width(text, v.note);
    let over = Spot { at: [(x0 + x1) / 2.0, y - 1.1], anchor: Anchor::Middle, upward: false };
    let (past, anchor) = if end > grid { (1.0, Anchor::Start) } else { (-1.0, Anchor::End) };
    let away = [(1.8, v.note / 2.0), (1.8, -1.1), (1.8, v.note + 1.1), (4.0, v.note / 2.0), (8.0, v.note / 2.0), (12.0, v.note / 2.0)];
    let away = away.map(|(dx, dy)| Spot { at: [end + past * dx, y + dy], anchor, upward: false });
    let within = Area::new([0.0, 0.0], [paper.scene.width, paper.scene.height]);
    let first = (width + 1.0 < x1 - x0).then_some(over);
    paper.place(&figure(v), first.into_iter().chain(away), text, &within);
}

/// A level dimension at `y` between two paper stations; the text stands above it, or beside it where it is short.
pub fn level_dimension(paper: &mut Paper, v: &View, x0: f64, x1: f64, y: f64, text: &str) {
    let (x0, x1) = (x0.min(x1), x0.max(x1));
    dimension_line(paper, v, x0, x1, y);
    let within = Area::new([0.0, 0.0], [paper.scene.width, paper.scene.height]);
    let middle = (x0 + x1) / 2.0;
    let beside = [(x1 + 1.6, Anchor::Start), (x0 - 1.6, Anchor::End)]
        .map(|(x, anchor)| [v.note / 2.0, -1.1, v.note + 1.1].map(|dy| Spot { at: [x, y + dy], anchor, upward: false }));
    let over = [-1.1, v.note + 1.1].map(|dy| Spot { at: [middle, y + dy], anchor: Anchor::Middle, upward: false });
    paper.place(&figure(v), over.into_iter().chain(beside.into_iter().flatten()), text, &within);
}
