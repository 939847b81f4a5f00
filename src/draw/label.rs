//! Where texts stand. Each label has places it may take, each place a cost; all are set one by one, the tightest first, then
//! moved while that helps: a text without a free place takes its best one and the texts it meets look for others.

use super::area::wide_area;
use super::index::{Firmness, Id};
use super::paper::{Area, Lettering, Paper, Spot};
use crate::scene::{Anchor, Pen};
use crate::tables::font::face;

/// A text that waits for its place.
#[derive(Clone, Debug)]
pub struct Label {
    pub lettering: Lettering,
    pub text: String,
    /// Width of the text, mm.
    width: f64,
    /// Places beside what it names, the best first.
    pub near: Vec<Spot>,
    /// What a leader points at, where no near place is free; none for texts that may not leave their place.
    pub target: Option<[f64; 2]>,
    /// How far a leader may reach, mm.
    pub reach: f64,
    /// Paper the text may not leave.
    pub within: Area,
    /// Whether near places have a leader as well: the text never stands on what it names.
    pub leads: bool,
    /// Lower numbers choose first.
    pub order: u8,
    pub leader_pen: Pen,
}

impl Label {
    /// A text that may stand at these places and nowhere else, and chooses first.
    pub fn new(lettering: Lettering, text: String, near: Vec<Spot>, within: Area, leader_pen: Pen) -> Label {
        let width = face().width(&text, lettering.height);
        Label { lettering, text, width, near, target: None, reach: 0.0, within, leads: false, order: 0, leader_pen }
    }

    /// Where no near place is free, a leader of this reach leads to the target.
    pub fn leader(self, target: [f64; 2], reach: f64) -> Label {
        Label { target: Some(target), reach, ..self }
    }

    /// Near places have a leader as well: the text never stands on what it names.
    pub fn leads(self) -> Label {
        Label { leads: true, ..self }
    }

    /// Lower numbers choose first; 0 where nothing is said.
    pub fn order(self, order: u8) -> Label {
        Label { order, ..self }
    }

    fn area(&self, spot: &Spot) -> Area {
        wide_area(spot.at, self.lettering.height, self.width, spot.anchor, spot.upward)
    }
}

/// A label in its place.
pub struct Placed {
    pub label: Label,
    pub spot: Spot,
    pub leader: Option<[[f64; 2]; 2]>,
    pub is_free: bool,
}

/// Paper kept clear round a text, mm.
const CLEAR: f64 = 0.45;
/// A place that costs this or more meets something it must not.
const MEETS: f64 = 300.0;
const TEXT: f64 = 1000.0;
const OUTSIDE: f64 = 5000.0;
/// Radius of the dot at the end of a leader, mm.
pub(super) const DOT: f64 = 0.5;
/// What it costs to stand in line with another text so near that the two read as one.
const IN_LINE: f64 = 150.0;
/// How often labels are moved again.
const ROUNDS: usize = 12;
/// With more texts than this without a place, none is moved.
const HOPELESS: usize = 12;

#[derive(Clone, Copy, Debug)]
struct Place {
    spot: Spot,
    leader: Option<[[f64; 2]; 2]>,
    cost: f64,
}

struct Standing {
    place: Place,
    ids: Vec<Id>,
}

impl Paper {
    /// Writes a text at once, at the cheapest of these places.
    pub fn place(&mut self, lettering: &Lettering, spots: impl IntoIterator<Item = Spot>, text: &str, within: &Area) {
        let label = Label::new(lettering.clone(), text.into(), spots.into_iter().collect(), *within, Pen::solid(0.0));
        if let Some(place) = best(self, &label, TEXT) {
            self.text(lettering, place.spot, text);
        }
    }
}

/// Sets every waiting label of a sheet.
pub fn settle(paper: &mut Paper) -> Vec<Placed> {
    let mut labels = std::mem::take(&mut paper.labels);
    // Those with the fewest places first within their order; equal ones keep the order of drawing.
    labels.sort_by_key(|l| (l.order, l.near.len() + if l.target.is_some() { 100 } else { 0 }));
    let mut standing: Vec<Option<Standing>> = labels.iter().map(|_| None).collect();
    for i in 0..labels.len() {
        let place = best(paper, &labels[i], TEXT);
        standing[i] = place.map(|p| stand(paper, &labels[i], p));
    }
    let stuck = standing.iter().flatten().filter(|s| s.place.cost >= MEETS).count();
    // A sheet far too small is not worth the work: another way to set it is tried next.
    for _ in 0..if stuck > HOPELESS { 0 } else { ROUNDS } {
        if !improve(paper, &labels, &mut standing) {
            break;
        }
    }
    let mut placed = Vec::new();
    for (label, standing) in labels.into_iter().zip(standing) {
        let Some(Standing { place, .. }) = standing else { continue };
        placed.push(Placed { label, spot: place.spot, leader: place.leader, is_free: place.cost < MEETS });
    }
    placed
}

/// One round over the labels that meet something; returns whether any place changed for the better.
fn improve(paper: &mut Paper, labels: &[Label], standing: &mut [Option<Standing>]) -> bool {
    let mut better = false;
    for i in 0..labels.len() {
        let Some(own) = standing[i].take() else { continue };
        lift(paper, &own);
        let before = price(paper, &labels[i], own.place.spot, own.place.leader, TEXT, f64::INFINITY);
        if before < MEETS {
            standing[i] = Some(stand(paper, &labels[i], Place { cost: before, ..own.place }));
            continue;
        }
        // Its best place if texts would move away; then those in its way look for other places.
        let Some(wished) = best(paper, &labels[i], 40.0) else { continue };
        let area = labels[i].area(&wished.spot).grown(CLEAR);
        let met = paper.index.texts_met(&area);
        let in_way: Vec<usize> = (0..labels.len()).filter(|j| standing[*j].as_ref().is_some_and(|s| s.ids.iter().any(|id| met.contains(id)))).collect();
        let old: Vec<Place> = in_way.iter().filter_map(|j| standing[*j].as_ref().map(|s| s.place)).collect();
        let old_cost: f64 = before + old.iter().map(|p| p.cost).sum::<f64>();
        for j in &in_way {
            if let Some(s) = standing[*j].take() {
                lift(paper, &s);
            }
        }
        standing[i] = Some(stand(paper, &labels[i], wished));
        let mut cost = 0.0;
        for j in &in_way {
            if let Some(place) = best(paper, &labels[*j], TEXT) {
                cost += place.cost;
                standing[*j] = Some(stand(paper, &labels[*j], place));
            }
        }
        if let Some(own) = standing[i].take() {
            lift(paper, &own);
            let price = price(paper, &labels[i], wished.spot, wished.leader, TEXT, f64::INFINITY);
            cost += price;
            standing[i] = Some(stand(paper, &labels[i], Place { cost: price, ..wished }));
        }
        if cost + 1.0 < old_cost {
            better = true;
            continue;
        }
        // No gain: everything back.
        for j in in_way.iter().copied().chain([i]) {
            if let Some(s) = standing[j].take() {
                lift(paper, &s);
            }
        }
        for (j, place) in in_way.iter().copied().zip(old) {
            standing[j] = Some(stand(paper, &labels[j], place));
        }
        standing[i] = Some(stand(paper, &labels[i], Place { cost: before, ..own.place }));
    }
    better
}

fn stand(paper: &mut Paper, label: &Label, place: Place) -> Standing {
    let mut ids = vec![paper.index.add_box(label.area(&place.spot), Firmness::Text)];
    if let Some([a, b]) = place.leader {
        ids.push(paper.index.add_piece(a, b, Firmness::Leader));
        let dot = dot(b);
        ids.push(paper.index.add_piece([dot.min[0], b[1]], [dot.max[0], b[1]], Firmness::Leader));
        ids.push(paper.index.add_piece([b[0], dot.min[1]], [b[0], dot.max[1]], Firmness::Leader));
    }
    Standing { place, ids }
}

/// The dot at the end of a leader.
fn dot(at: [f64; 2]) -> Area {
    Area::new(at, at).grown(DOT)
}

fn lift(paper: &mut Paper, standing: &Standing) {
    for id in &standing.ids {
        paper.index.remove(*id);
    }
}

/// The cheapest place of a label; near ones first, leaders only where none of those is free.
fn best(paper: &Paper, label: &Label, text: f64) -> Option<Place> {
    let mut best: Option<Place> = None;
    for (i, spot) in label.near.iter().enumerate() {
        let leader = label.target.filter(|_| label.leads).map(|t| [foot(&label.area(spot), t, label.lettering.height), t]);
        let known = best.map_or(f64::INFINITY, |b| b.cost);
        let cost = price(paper, label, *spot, leader, text, known) + 0.5 * i as f64;
        if best.is_none_or(|b| cost < b.cost) {
            best = Some(Place { spot: *spot, leader, cost });
        }
        if cost < 0.5 * (i + 1) as f64 + 0.1 {
            break;
        }
    }
    let Some(target) = label.target.filter(|_| best.is_none_or(|b| b.cost >= MEETS.min(60.0))) else { return best };
    for ring in 1..=((label.reach / 3.0) as u32) {
        let reach = 2.0 + 3.0 * f64::from(ring);
        for (dx, dy) in AROUND {
            let at = [target[0] + dx * reach, target[1] + dy * reach];
            let level = Spot::level(at, if dx > 0.0 { Anchor::Start } else { Anchor::End });
            let upright = Spot::upright(at, if dy > 0.0 { Anchor::End } else { Anchor::Start });
            for spot in [level, upright] {
                let area = label.area(&spot);
                let leader = Some([foot(&area, target, label.lettering.height), target]);
                let known = best.map_or(f64::INFINITY, |b| b.cost) - 20.0;
                let cost = price(paper, label, spot, leader, text, known) + 20.0;
                if best.is_none_or(|b| cost < b.cost) {
                    best = Some(Place { spot, leader, cost });
                }
            }
        }
        // What lies further out costs at least its longer leader.
        if best.is_some_and(|b| b.cost < 20.0 + 0.5 * reach) {
            break;
        }
    }
    best
}

const AROUND: [(f64, f64); 16] = [
    (0.9, -0.5),
    (-0.9, -0.5),
    (0.9, 0.5),
    (-0.9, 0.5),
    (0.5, -0.9),
    (-0.5, -0.9),
    (0.5, 0.9),
    (-0.5, 0.9),
    (0.2, -1.0),
    (-0.2, -1.0),
    (0.2, 1.0),
    (-0.2, 1.0),
    (1.0, -0.15),
    (-1.0, -0.15),
    (1.0, 0.15),
    (-1.0, 0.15),
];

/// Where a leader leaves its text: the middle of the end towards the target, or straight from its long side.
fn foot(area: &Area, target: [f64; 2], height: f64) -> [f64; 2] {
    let is_level = area.width() >= area.height();
    let along = usize::from(!is_level);
    let across = 1 - along;
    let mut at = [0.0, 0.0];
    if target[along] < area.min[along] || target[along] > area.max[along] {
        at[along] = if target[along] < area.min[along] { area.min[along] - 0.5 } else { area.max[along] + 0.5 };
        at[across] = if is_level { area.max[1] - 0.25 * height - height / 2.0 } else { area.min[0] + height / 2.0 };
    } else {
        at[along] = target[along];
        at[across] = if target[across] < area.min[across] { area.min[across] - 0.3 } else { area.max[across] + 0.3 };
    }
    at
}

/// A text's box with the paper before and behind it that must be clear, so that two texts in line are not read as one.
fn along(area: &Area, height: f64, upward: bool) -> Area {
    let by = 1.3 * height;
    if upward {
        Area::new([area.min[0], area.min[1] - by], [area.max[0], area.max[1] + by])
    } else {
        Area::new([area.min[0] - by, area.min[1]], [area.max[0] + by, area.max[1]])
    }
}

/// What a place costs: what its box and its leader meet, and how long the leader is. Where it comes to `most` or more it is not worth
/// knowing exactly.
fn price(paper: &Paper, label: &Label, spot: Spot, leader: Option<[[f64; 2]; 2]>, text: f64, most: f64) -> f64 {
    let area = label.area(&spot);
    let mut cost = if label.within.holds(&area) { 0.0 } else { OUTSIDE };
    cost += leader.map_or(0.0, |[from, to]| 0.5 * (to[0] - from[0]).hypot(to[1] - from[1]));
    if cost >= most {
        return cost;
    }
    let met = paper.index.met_by_box(&area.grown(CLEAR));
    cost += text * met.texts as f64 + MEETS * (met.firm + met.leaders) as f64 + 3.0 * met.soft as f64;
    if cost >= most {
        return cost;
    }
    cost += IN_LINE * paper.index.texts_met(&along(&area, label.lettering.height, spot.upward)).len().saturating_sub(met.texts) as f64;
    if let Some([from, to]) = leader.filter(|_| cost < most) {
        let met = paper.index.met_by_piece(from, to);
        cost += text * (met.texts + paper.index.met_by_box(&dot(to)).texts) as f64;
        cost += 40.0 * met.leaders as f64 + 5.0 * met.firm as f64 + met.soft as f64;
    }
    cost
}
