//! Close-ups of slab ends and side edges: every leg, cover and lap dimensioned, every mark named.

use super::dimension::{figure, level, tick, upright};
use super::label::Label;
use super::paper::{Area, Lettering, Paper, Spot};
use super::section::Cut;
use super::view::{Subject, View};
use crate::base::mm;
use crate::place::{BarType, Set};
use crate::plan::{Layer as BarLayer, Role};
use crate::scene::{Anchor, Layer, Pen};
use crate::tables::font::wrap;
use itertools::Itertools;

/// How far a close-up looks into the slab, mm, where the paper has room for it.
const LOOK: f64 = 1250.0;
/// Stub of a support under the soffit, mm on paper.
const STUB: f64 = 7.0;

/// One close-up: which end or edge, where it is cut, what it is called.
struct Corner {
    axis: usize,
    at_start: bool,
    at: f64,
    title: String,
    /// What else it stands for, and where it is cut.
    note: String,
}

/// The different ends and edges of a slab; those alike are drawn once.
fn corners(subject: &Subject, v: &View) -> Vec<Corner> {
    let st = &subject.model.stations;
    let width = subject.slab.width.value;
    let middle = super::bands::across_station(subject, v.low);
    let span = st.spans.iter().position(|s| s.left_face < middle && middle < s.right_face).unwrap_or(0);
    let grids = &subject.model.grids;
    let (first, last) = (grids.first().cloned().unwrap_or_default(), grids.last().cloned().unwrap_or_default());
    let corner = |axis, at_start, at, title: String| Corner { axis, at_start, at, title, note: String::new() };
    let mut list = Vec::new();
    let ends = [corner(0, true, 0.3 * width, format!("End {first}")), corner(0, false, 0.3 * width, format!("End {last}"))];
    let kind = |side: usize| subject.slab.edges[side].word();
    let edges = [corner(1, true, middle, format!("Near edge: {}", kind(0))), corner(1, false, middle, format!("Far edge: {}", kind(1)))];
    for [mut one, other] in [ends, edges] {
        if signature(subject, &one) == signature(subject, &other) {
            let other = if one.axis == 0 { format!("end {last}") } else { "far edge".into() };
            one.note = format!("; {other} alike, opposite hand");
            list.push(one);
        } else {
            list.extend([one, other]);
        }
    }
    // Of a slab in parts, each sheet has the end that it shows.
    let shows = |c: &Corner| c.axis == 1 || v.shows(if c.at_start { st.start.max(st.supports[0].centre) } else { st.end.min(st.supports[st.last()].centre) });
    if list.iter().filter(|c| c.axis == 0).count() == 2 {
        list.retain(shows);
    }
    let name = |at: usize| grids.get(at).map_or("", String::as_str);
    for corner in list.iter_mut().filter(|c| c.axis == 1) {
        corner.note.push_str(&format!("; cut in span {}-{}", name(span), name(span + 1)));
    }
    list
}

fn subtitle(scale: f64, corner: &Corner) -> String {
    format!("1:{scale}, bars of one level drawn apart{}", corner.note)
}

/// What makes an end: the marks in its plane with their distances from the face, and what it rests on.
fn signature(subject: &Subject, corner: &Corner) -> Vec<String> {
    let cut = cut(subject, corner, 10.0, LOOK, [0.0, 0.0]);
    let (from, to) = cut.concrete_extent();
    let face = if corner.at_start { from } else { to };
    let near = |x: f64| (x - face).abs() < LOOK;
    let mut parts: Vec<String> = Vec::new();
    for (bar, set) in in_plane(&cut) {
        let points = set.axis.iter().map(|p| ((p[cut.axis] - face).abs(), p[2])).filter(|(x, _)| near(face + x));
        parts.push(format!("{} {:?}", bar.mark, points.map(|(x, z)| format!("{x:.0}/{z:.0}")).sorted().collect::<Vec<_>>()));
    }
    let held = cut.holders().into_iter().filter(|(a, b)| near(*a) || near(*b)).map(|(a, b)| format!("{:.0}", b.min(to) - a.max(from)));
    parts.extend(held);
    let supports = &subject.slab.supports;
    parts.push(match (corner.axis, corner.at_start) {
        (0, true) => format!("{:?}", supports.first().map(|s| s.kind)),
        (0, false) => format!("{:?}", supports.last().map(|s| s.kind)),
        (_, at_start) => subject.slab.edges[usize::from(!at_start)].word().to_string(),
    });
    parts.sort();
    parts.dedup();
    parts
}

/// Bars in the plane of a cut near it, without those held inside bends.
fn in_plane<'c>(cut: &'c Cut) -> impl Iterator<Item = (&'c BarType, &'c Set)> {
    let across = 1 - cut.axis;
    let own = cut.subject.model.bars.iter().filter(|b| b.is_along_span() == (cut.axis == 0) && !(b.role == Role::Edge && b.is_straight()));
    own.flat_map(|b| b.sets.iter().map(move |s| (b, s))).filter(move |(_, s)| {
        let shown = s.axis.iter().any(|p| p[cut.axis] >= cut.low && p[cut.axis] <= cut.high);
        shown && (cut.axis == 0 || cut.is_near(s.axis[0][across], s.step[across] * f64::from(s.count.saturating_sub(1))))
    })
}

fn cut<'a>(subject: &'a Subject, corner: &Corner, scale: f64, look: f64, at: [f64; 2]) -> Cut<'a> {
    let st = &subject.model.stations;
    let width = subject.slab.width.value;
    let (low, high) = match (corner.axis, corner.at_start) {
        (0, true) => {
            let low = st.start.min(st.supports[0].left_face.max(st.start - 120.0));
            (low, low + look)
        }
        (0, false) => {
            let high = st.end.max(st.supports[st.last()].right_face.min(st.end + 120.0));
            (high - look, high)
        }
        (_, true) => (0.0, look.min(width)),
        (_, false) => ((width - look).max(0.0), width),
    };
    Cut { subject, axis: corner.axis, low, high, at: corner.at, scale, level_scale: scale, corner: at, apart: true }
}

/// How the close-ups of a slab are set out in a width of paper.
pub struct CloseUps {
    pub scale: f64,
    columns: usize,
    row: f64,
    count: usize,
    above: f64,
}

impl CloseUps {
    pub fn in_area(subject: &Subject, v: &View, width: f64) -> Option<CloseUps> {
        let corners = corners(subject, v);
        let count = corners.len();
        let thickness = subject.slab.thickness.value;
        let line = v.note + 3.2;
        let spare = 10.0 * v.note;
        for (scale, least) in [(10.0, 520.0), (20.0, 520.0)] {
            let most = ((width / (least / scale + spare)) as usize).min(count);
            if most > 0 {
                // As many side by side as fill their rows evenly.
                let columns = count.div_ceil(count.div_ceil(most));
                let room = width / columns as f64;
                let notes = corners.iter().map(|c| wrap(&subtitle(scale, c), v.note, room - 3.0).len()).max().unwrap_or(1);
                let above = 1.25 * v.call_out + 4.4 + notes as f64 * 1.35 * v.note + 2.0 * line;
                let row = above + thickness / scale + STUB + 2.0 + 3.4 * line;
                return Some(CloseUps { scale, columns, row, count, above });
            }
        }
        None
    }

    pub fn height(&self) -> f64 {
        self.row * self.count.div_ceil(self.columns) as f64
    }

    /// Paper from one row to the next: a little looser than needed where there is room.
    fn pitch(&self, area: &Area) -> f64 {
        (0.5 * area.height() / self.count.div_ceil(self.columns) as f64).clamp(self.row, 1.15 * self.row)
    }

    /// Paper height below them.
    pub fn below(&self, area: &Area) -> f64 {
        area.min[1] + self.pitch(area) * self.count.div_ceil(self.columns) as f64
    }

    /// Draws them from the top of an area.
    pub fn draw(&self, paper: &mut Paper, v: &View, subject: &Subject, area: &Area) {
        let pitch = self.pitch(area);
        let room = area.width() / self.columns as f64;
        let spare = 10.0 * v.note;
        for (i, corner) in corners(subject, v).iter().enumerate() {
            let (row, column) = (i / self.columns, i % self.columns);
            let left = area.min[0] + column as f64 * room;
            let top = area.min[1] + row as f64 * pitch;
            let look = LOOK.min((room - spare) * self.scale);
            let width = look / self.scale;
            // The open side has the covers and the thickness.
            let x = if corner.at_start { left + 3.2 * v.note } else { left + spare - 3.2 * v.note };
            let cut = cut(subject, corner, self.scale, look, [x, top + self.above]);
            let within = Area::new([left, top], [left + room.min(width + spare) + 4.0, top + self.row - 1.0]);
            paper.text(&Lettering::new(Layer::Text, v.call_out), Spot::level([left, top + v.call_out + 1.0], Anchor::Start), &corner.title);
            for (i, line) in wrap(&subtitle(self.scale, corner), v.note, room - 3.0).iter().enumerate() {
                let y = top + 1.25 * v.call_out + 1.6 + v.note + i as f64 * 1.35 * v.note;
                paper.text(&Lettering::new(Layer::Text, v.note), Spot::level([left, y], Anchor::Start), line);
            }
            draw(paper, v, &cut, corner, &within);
        }
    }
}

fn draw(paper: &mut Paper, v: &View, cut: &Cut, corner: &Corner, within: &Area) {
    let points = cut.draw(paper, v, STUB);
    legs(paper, v, cut, corner);
    open_side(paper, v, cut, corner);
    names(paper, v, cut, points, within);
}

/// A level leg of a closing bar: its mark, outer face and centre line of its upright, its end and its level.
struct Leg<'a> {
    mark: &'a str,
    outer: f64,
    upright: f64,
    end: f64,
    z: f64,
}

/// Legs back of closing bars from their outer face, side cover, uprights; the bearing and the lap with B1.
fn legs(paper: &mut Paper, v: &View, cut: &Cut, corner: &Corner) {
    let (from, to) = cut.concrete_extent();
    let face = if corner.at_start { from } else { to };
    let inward = if corner.at_start { 1.0 } else { -1.0 };
    let line = v.note + 3.2;
    let mut legs: Vec<Leg> = Vec::new();
    let mut uprights: Vec<(&str, (f64, f64))> = Vec::new();
    for (bar, set) in in_plane(cut) {
        let half = f64::from(bar.size) / 2.0;
        for (i, w) in set.axis.windows(2).enumerate() {
            let is_upright = w[0][cut.axis] == w[1][cut.axis] && w[0][2] != w[1][2];
            if !is_upright || (w[0][cut.axis] - face).abs() > 400.0 {
                continue;
            }
            let outer = w[0][cut.axis] - inward * half;
            // A leg that ends free is as high as its centre line; one that turns is measured over its bend.
            let reach = |p: &[f64; 3], turns: bool, sign: f64| p[2] + if turns { sign * half } else { 0.0 };
            let up = (w[1][2] - w[0][2]).signum();
            let ends = [reach(&w[0], i > 0, -up), reach(&w[1], i + 2 < set.axis.len(), up)];
            let height = (ends[0].min(ends[1]), ends[0].max(ends[1]));
            if uprights.iter().all(|(mark, _)| *mark != bar.mark.as_str()) {
                uprights.push((&bar.mark, height));
            }
            let before = i.checked_sub(1).and_then(|j| set.axis.get(j)).map(|p| (p[cut.axis], w[0][2]));
            let after = set.axis.get(i + 2).map(|p| (p[cut.axis], w[1][2]));
            let level = before.into_iter().chain(after).filter(|_| bar.layer != BarLayer::B1);
            legs.extend(level.map(|(end, z)| Leg { mark: &bar.mark, outer, upright: w[0][cut.axis], end, z }));
        }
    }
    let middle = cut.subject.slab.thickness.value / 2.0;
    // Above: side cover and top leg in one chain.
    let y = cut.corner[1] - v.note - 3.0 - 0.5 * line;
    if let Some(leg) = legs.iter().filter(|l| l.z > middle).min_by(|a, b| (a.end - a.outer).abs().total_cmp(&(b.end - b.outer).abs())) {
        leg_dimension(paper, v, cut, leg, y, inward);
    }
    let outer = legs.iter().map(|l| l.outer).reduce(if corner.at_start { f64::min } else { f64::max });
    if let Some(outer) = outer {
        cover(paper, v, [cut.x(face), cut.x(outer)], y, &mm((outer - face).abs()));
    }
    let mut rows = cut.y(0.0) + STUB.max(1.25 * v.note + 4.5) + 0.5;
    let mut next = || {
        rows += line;
        rows
    };
    for (a, b) in cut.holders() {
        // An inner support within the view has no bearing.
        if a > from + 0.5 && b < to - 0.5 {
            continue;
        }
        let (a, b) = (a.max(from), b.min(to));
        if a >= cut.low - 0.5 && b <= cut.high + 0.5 && b > a {
            level(paper, v, cut.x(a), cut.x(b), next(), &format!("bearing {}", mm(b - a)));
        }
    }
    if let Some(leg) = legs.iter().filter(|l| l.z < middle).min_by(|a, b| (a.end - a.outer).abs().total_cmp(&(b.end - b.outer).abs())) {
        leg_dimension(paper, v, cut, leg, next(), inward);
        lap(paper, v, cut, leg, next(), inward);
    }
    uprights.sort_by(|a, b| (b.1.1 - b.1.0).total_cmp(&(a.1.1 - a.1.0)));
    uprights.dedup_by(|a, b| a.1 == b.1);
    let outside = if corner.at_start { cut.low } else { cut.high };
    for (i, (mark, (low, high))) in uprights.iter().take(2).enumerate() {
        let x = cut.x(outside) - inward * (4.5 + i as f64 * 1.6 * v.note);
        let height = mm(high - low);
        let text = if uprights.len() > 1 { format!("{mark} {height}") } else { height };
        upright(paper, v, x, cut.y(*high), cut.y(*low), cut.x(face) - inward * 0.8, &text);
    }
}

/// A leg from the outer face of its upright to its end; one that runs out of the view has no tick there.
fn leg_dimension(paper: &mut Paper, v: &View, cut: &Cut, leg: &Leg, y: f64, inward: f64) {
    let text = format!("{} leg {}", leg.mark, mm((leg.end - leg.outer).abs()));
    if leg.end >= cut.low && leg.end <= cut.high {
        level(paper, v, cut.x(leg.outer), cut.x(leg.end), y, &text);
        return;
    }
    let (a, b) = (cut.x(leg.outer), cut.x(if inward > 0.0 { cut.high } else { cut.low }));
    paper.line(Layer::Dimension, "", &[[a, y], [b, y]], Pen::solid(v.pens.thin));
    tick(paper, Layer::Dimension, "", [a, y], v.pens.thin);
    let over = y - 0.25 * v.note - 0.6;
    let near = [0.5, 0.6, 0.4, 0.7, 0.3].map(|s| Spot::level([a + s * (b - a), over], Anchor::Middle)).to_vec();
    figure(paper, v, near, [(a + b) / 2.0, y], &text);
}

/// The lap of a bottom leg with the bar of B1 that ends in the view.
fn lap(paper: &mut Paper, v: &View, cut: &Cut, leg: &Leg, y: f64, inward: f64) {
    let straight = in_plane(cut).filter(|(b, _)| b.is_straight() && matches!(b.layer, BarLayer::B1));
    let ends = straight.map(|(_, s)| s.axis.iter().map(|p| p[cut.axis] * inward).fold(f64::INFINITY, f64::min) * inward);
    // Counted from the centre line of the upright at the nearest.
    let Some(start) = ends.map(|x| x * inward).reduce(f64::min).map(|x| x.max(leg.upright * inward) * inward) else { return };
    let long = (leg.end - start) * inward;
    if long > 1.0 && start >= cut.low && start <= cut.high && leg.end >= cut.low && leg.end <= cut.high {
        level(paper, v, cut.x(start), cut.x(leg.end), y, &format!("overlap {}", mm(long)));
    }
}

/// A cover: a short dimension whose figure stands outside the concrete.
fn cover(paper: &mut Paper, v: &View, [face, bar]: [f64; 2], y: f64, text: &str) {
    let out = (face - bar).signum();
    paper.line(Layer::Dimension, "", &[[face + out * 3.0, y], [bar, y]], Pen::solid(v.pens.thin));
    for x in [face, bar] {
        tick(paper, Layer::Dimension, "", [x, y], v.pens.thin);
    }
    let side = if out > 0.0 { Anchor::Start } else { Anchor::End };
    let near = [3.6, 5.0].iter().flat_map(|d| [v.note / 2.0, -0.8, v.note + 0.8].map(|dy| Spot::level([face + out * d, y + dy], side))).collect();
    figure(paper, v, near, [(face + bar) / 2.0, y], text);
}

/// At the open side: top and bottom cover, then the thickness.
fn open_side(paper: &mut Paper, v: &View, cut: &Cut, corner: &Corner) {
    let out = if corner.at_start { 1.0 } else { -1.0 };
    let edge = cut.x(if corner.at_start { cut.high } else { cut.low });
    let h = cut.subject.slab.thickness.value;
    let levels: Vec<(f64, f64)> =
        in_plane(cut).flat_map(|(b, s)| s.axis.iter().map(move |p| (p[2] - f64::from(b.size) / 2.0, p[2] + f64::from(b.size) / 2.0))).collect();
    let lowest = levels.iter().map(|l| l.0).fold(f64::INFINITY, f64::min);
    let highest = levels.iter().map(|l| l.1).fold(f64::NEG_INFINITY, f64::max);
    let x = edge + out * 4.0;
    let thin = Pen::solid(v.pens.thin);
    for (face, bar) in [(h, highest), (0.0, lowest)] {
        let gap = (face - bar).abs();
        // Across the span the lowest bar may be far from the face: its own cover is that of the layer under it.
        if !gap.is_finite() || gap > h / 2.0 {
            continue;
        }
        let (y_face, y_bar) = (cut.y(face), cut.y(bar));
        let outward = (y_face - y_bar).signum();
        paper.line(Layer::Dimension, "", &[[x, y_face + outward * 2.6], [x, y_bar]], thin);
        paper.soft_line(Layer::Dimension, "", &[[edge + out * 1.2, y_face], [x + out * 1.2, y_face]], thin);
        for y in [y_face, y_bar] {
            tick(paper, Layer::Dimension, "", [x, y], v.pens.thin);
        }
        let side = if out > 0.0 { Anchor::Start } else { Anchor::End };
        let base = y_face + outward * 2.2 + v.note / 2.0;
        let near = [1.4, 2.6].iter().flat_map(|d| [0.0, 1.2, -1.2, 2.4, -2.4].map(|dy| Spot::level([x + out * d, base + dy * outward], side))).collect();
        figure(paper, v, near, [x, (y_face + y_bar) / 2.0], &mm(gap));
    }
    upright(paper, v, edge + out * (6.0 + 3.6 * v.note), cut.y(h), cut.y(0.0), edge + out * 6.5, &mm(h));
}

/// Marks with leaders: above the slab for what lies in its upper half, below for the rest.
pub(super) fn names(paper: &mut Paper, v: &View, cut: &Cut, points: Vec<(String, [f64; 2])>, within: &Area) {
    let middle = cut.corner[1] + cut.height() / 2.0;
    for (mark, at) in points {
        let upper = at[1] < middle;
        let mut near = Vec::new();
        let bases = if upper { [cut.corner[1] - 2.6, cut.corner[1] - 3.8] } else { [cut.y(0.0) + v.note + 3.6, cut.y(0.0) + v.note + 5.2] };
        for base in bases {
            for i in 0..40 {
                let step = f64::from((i + 1) / 2) * 1.6 * if i % 2 == 0 { 1.0 } else { -1.0 };
                near.push(Spot::level([at[0] + 3.0 + step, base], Anchor::Middle));
            }
        }
        let label = Label::new(Lettering::of(Layer::CallOut, &mark, v.note), mark, near, *within, Pen::solid(v.pens.thin)).leader(at, 40.0).order(4);
        paper.label(label.leads());
    }
}
