//! Bottom and top plans: the concrete, one heavy bar for each set with its ends, thin lines over the zones, call-outs on them.

use super::dimension::upright;
use super::label::Label;
use super::paper::{Area, Lettering, Paper, Spot};
use super::view::{Occurrence, Subject, View};
use crate::base::num;
use crate::job::Edge;
use crate::plan::{Layer as BarLayer, Role};
use crate::scene::{Anchor, Dash, Layer, Pen};

#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Face {
    Bottom,
    Top,
}

/// A plan on paper: the band it fills, and how places across the slab map to it.
pub struct PlanView<'a> {
    pub view: &'a View,
    pub subject: &'a Subject<'a>,
    pub face: Face,
    /// Paper y of the far side face.
    pub top: f64,
    /// What is left out of a slab too wide for the sheet: from, to; mm across the slab.
    pub gap: Option<(f64, f64)>,
    /// Paper that call-outs may use.
    pub within: Area,
    /// Whether the sheet has the section across, whose place is marked here.
    pub shows_across: bool,
}

/// Paper kept for the gap of a broken view, mm.
pub const BREAK: f64 = 6.0;
/// How far a leader reaches, mm.
const REACH: f64 = 110.0;

impl PlanView<'_> {
    pub(super) fn width(&self) -> f64 {
        self.subject.slab.width.value
    }

    /// Height of the plan on paper, mm.
    pub fn height(&self) -> f64 {
        let shown = self.width() - self.gap.map_or(0.0, |(a, b)| b - a);
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

    /// Paper y at a share of the plan's height from its top.
    pub(super) fn down(&self, share: f64) -> f64 {
        self.top + share * self.height()
    }

    /// Draws the plan.
    pub fn draw(&self, paper: &mut Paper) {
        self.concrete(paper);
        let shown: Vec<&Occurrence> = self.subject.occurrences.iter().filter(|o| self.is_here(o)).collect();
        let along: Vec<&Occurrence> = shown.iter().copied().filter(|o| o.bar.is_along_span()).collect();
        self.bars_along(paper, &along);
        for occurrence in shown.iter().filter(|o| !o.bar.is_along_span()) {
            self.bars_across(paper, occurrence);
        }
        self.sides(paper);
        self.section_marks(paper);
    }

    /// Where the sections are cut: a short heavy stroke with an arrow the way one looks, and the section's letter.
    fn section_marks(&self, paper: &mut Paper) {
        let v = self.view;
        let st = &self.subject.model.stations;
        let y = self.y(super::bands::section_across(self.subject, self.gap));
        let heavy = Pen::solid(v.pens.other);
        let letter = Lettering::new(Layer::Text, v.call_out);
        for (x, out) in [(v.x(st.start.max(v.low)), -1.0), (v.x(st.end.min(v.high)), 1.0)] {
            let (near, far) = (x + out * 2.5, x + out * 7.5);
            paper.line(Layer::Text, "", &[[near, y], [far, y], [far, y - 3.0]], heavy);
            paper.fill(Layer::Text, &[[far - 0.8, y - 2.6], [far + 0.8, y - 2.6], [far, y - 5.0]]);
            paper.text(&letter, Spot::level([far, y - 5.0 - 0.25 * v.call_out - 0.9], Anchor::Middle), "A");
        }
        if !self.shows_across {
            return;
        }
        let x = v.x(super::bands::across_station(self.subject, v.low));
        for (y, out) in [(self.top, -1.0), (self.top + self.height(), 1.0)] {
            let (near, far) = (y + out * 1.2, y + out * 4.2);
            paper.line(Layer::Text, "", &[[x, near], [x, far], [x - 3.0, far]], heavy);
            paper.fill(Layer::Text, &[[x - 2.6, far - 0.8], [x - 2.6, far + 0.8], [x - 5.0, far]]);
            paper.text(&letter, Spot::level([x - 6.0, far + v.call_out / 2.0], Anchor::End), "B");
        }
    }

    /// Bottom plan: B1 and B2. Top plan: T1, T2, edge and corner bars.
    fn is_here(&self, occurrence: &Occurrence) -> bool {
        let is_bottom = matches!(occurrence.bar.layer, BarLayer::B1 | BarLayer::B2);
        let (low, high) = occurrence.extent();
        let seen = if occurrence.bar.is_along_span() { self.view.clip(low, high).is_some() } else { occurrence.lines(0).iter().any(|x| self.view.shows(*x)) };
        (self.face == Face::Bottom) == is_bottom && seen
    }

    /// Bars held inside the bends of others: drawn where they lie, without a zone.
    pub(super) fn is_held(occurrence: &Occurrence) -> bool {
        occurrence.bar.role == Role::Edge && occurrence.bar.is_straight()
    }

    pub(super) fn bar_layer(&self, occurrence: &Occurrence) -> Layer {
        match (occurrence.bar.layer, self.face) {
            (BarLayer::E, _) => Layer::Edge,
            (_, Face::Bottom) => Layer::Bottom,
            (_, Face::Top) => Layer::Top,
        }
    }

    fn concrete(&self, paper: &mut Paper) {
        let v = self.view;
        let pen = Pen::solid(v.pens.concrete);
        let (slab, st) = (self.subject.slab, &self.subject.model.stations);
        let (y0, y1) = (self.y(self.width()), self.y(0.0));
        let (start, end) = (st.start.max(v.low), st.end.min(v.high));
        paper.line(Layer::Concrete, "", &[[v.x(start), y0], [v.x(end), y0]], pen);
        paper.line(Layer::Concrete, "", &[[v.x(start), y1], [v.x(end), y1]], pen);
        for (x, own) in [(start, st.start), (end, st.end)] {
            if (x - own).abs() < 0.5 {
                paper.line(Layer::Concrete, "", &[[v.x(x), y0], [v.x(x), y1]], pen);
            } else {
                paper.soft_line(Layer::Concrete, "", &[[v.x(x), y0], [v.x(x), y1]], Pen { width: v.pens.thin, dash: Dash::Chain });
            }
        }
        let hidden = Pen { width: v.pens.thin, dash: Dash::Dashed };
        for support in &st.supports {
            for x in [support.left_face, support.right_face] {
                // Faces under the slab are hidden; one outside its end is not drawn in plan.
                if v.shows(x) && x > st.start && x < st.end {
                    paper.soft_line(Layer::Concrete, "", &[[v.x(x), y0], [v.x(x), y1]], hidden);
                }
            }
        }
        for (side, edge) in slab.edges.iter().enumerate() {
            if edge.is_held() {
                let across = if side == 0 { slab.edge_width[0] } else { self.width() - slab.edge_width[1] };
                paper.soft_line(Layer::Concrete, "", &[[v.x(start), self.y(across)], [v.x(end), self.y(across)]], hidden);
            }
        }
        if let Some((from, to)) = self.gap {
            for across in [from, to] {
                zigzag(paper, v.x(start) - 4.0, v.x(end) + 4.0, self.y(across), v.pens.thin);
            }
        }
    }

    /// Asks for a call-out's place: on its line where it can, else with a leader to `target`.
    pub(super) fn call_out(&self, paper: &mut Paper, near: Vec<Spot>, target: [f64; 2], occurrence: &Occurrence) {
        let v = self.view;
        let label =
            Label::new(Lettering::of(Layer::CallOut, &occurrence.bar.mark, v.call_out), self.says(occurrence), near, self.within, Pen::solid(v.pens.thin))
                .leader(target, REACH)
                .order(if occurrence.first { 1 } else { 2 });
        paper.label(label);
    }

    /// What a call-out says on this sheet: a set that goes on from the sheet before is counted there; the first place of a mark on a
    /// later sheet names its size and layer again.
    fn says(&self, occurrence: &Occurrence) -> String {
        let v = self.view;
        let starts = if occurrence.bar.is_along_span() { occurrence.extent().0 } else { occurrence.lines(0).first().copied().unwrap_or(v.low) };
        if let Some(sheet) = v.before.filter(|_| starts < v.low - 0.5) {
            return format!("{}, see sheet {sheet}", occurrence.bar.mark);
        }
        let is_first_here = || self.subject.occurrences.iter().filter(|o| o.bar.mark == occurrence.bar.mark && self.is_here(o)).all(|o| !o.first);
        let leads_here = || {
            let mut own = self.subject.occurrences.iter().filter(|o| o.bar.mark == occurrence.bar.mark && self.is_here(o) && o.extent().0 >= v.low - 0.5);
            own.next().is_some_and(|o| std::ptr::eq(o, occurrence))
        };
        if v.before.is_some() && !occurrence.first && is_first_here() && leads_here() { occurrence.named() } else { occurrence.call_out() }
    }

    /// Names of the side edges and the width, at the left of the plan.
    fn sides(&self, paper: &mut Paper) {
        let v = self.view;
        let slab = self.subject.slab;
        let st = &self.subject.model.stations;
        let (left, right) = (v.x(st.start.max(v.low)), v.x(st.end.min(v.high)));
        let (y0, y1) = (self.y(self.width()), self.y(0.0));
        upright(paper, v, left - 15.0, y0, y1, left - 1.0, &num(self.width(), 0));
        for (side, y) in [(0, y1), (1, y0)] {
            let text = match slab.edges[side] {
                Edge::Free => "free edge".to_string(),
                Edge::Joint => "joint".to_string(),
                held => format!("{} {}", held.word(), num(slab.edge_width[side], 0)),
            };
            let near = if side == 0 { "near side: " } else { "far side: " };
            let at = if side == 0 { y + v.note + 1.2 } else { y - 0.25 * v.note - 1.0 };
            let spots =
                [1.0, 0.92, 0.85, 0.77, 0.7, 0.62, 0.55, 0.47, 0.4, 0.32, 0.25].map(|share| Spot::level([left + share * (right - left), at], Anchor::End));
            let outside = [2.0, 6.0].map(|out| Spot::level([right + out, if side == 0 { y } else { y + v.note }], Anchor::Start));
            let label = Label::new(
                Lettering::new(Layer::Text, v.note),
                format!("{near}{text}"),
                spots.into_iter().chain(outside).collect(),
                paper.room,
                Pen::solid(v.pens.thin),
            )
            .order(3);
            paper.label(label);
        }
    }
}

/// Spots along a level line from `from` to `to` at height `y`: above it first, from the middle outwards, then below.
pub fn along_level(from: f64, to: f64, y: f64, height: f64) -> Vec<Spot> {
    let mut spots = Vec::new();
    for offset in [-0.25 * height - 0.8, height + 0.9] {
        for share in [0.5, 0.4, 0.6, 0.3, 0.7, 0.2, 0.8, 0.1, 0.9] {
            spots.push(Spot::level([from + share * (to - from), y + offset], Anchor::Middle));
        }
    }
    spots
}

/// Spots along an upright line at `x` from `low` to `high` on paper: left of it first, from the middle outwards, then right.
pub fn along_upright(x: f64, low: f64, high: f64, height: f64, right_first: bool) -> Vec<Spot> {
    let mut spots = Vec::new();
    let (left, right) = (-0.25 * height - 0.8, height + 0.9);
    for offset in if right_first { [right, left] } else { [left, right] } {
        for i in 0..=32 {
            // From the middle outwards.
            let step = f64::from((i + 1) / 2) / 34.0 * if i % 2 == 0 { 1.0 } else { -1.0 };
            spots.push(Spot::upright([x + offset, low + (0.5 + step) * (high - low)], Anchor::Middle));
        }
    }
    spots
}

/// A break line across a view.
fn zigzag(paper: &mut Paper, from: f64, to: f64, y: f64, width: f64) {
    let middle = (from + to) / 2.0;
    let points = [[from, y], [middle - 3.0, y], [middle - 1.0, y - 2.5], [middle + 1.0, y + 2.5], [middle + 3.0, y], [to, y]];
    paper.soft_line(Layer::Concrete, "", &points, Pen::solid(width));
}
