//! Laps as placed: every two bars of one layer that lie side by side for part of their length.

use super::pieces::Piece;
use super::{Slate, Verdict};
use crate::plan::{Layer, Role};
use crate::rules::anchorage::{self, Bar, Bond, Form};

pub(super) fn checks(slate: &mut Slate) {
    for j in 1..slate.model.stations.last() {
        over_support(slate, j);
    }
    pieces(slate);
}

fn needed(slate: &Slate, a: &Piece, b: &Piece, gap: f64) -> f64 {
    let basis = &slate.job.basis;
    let top = a.low[2] > slate.h() / 2.0;
    let size = a.size.min(b.size) as u32;
    let (bond, cover) = if top { (anchorage::top_bond(slate.h()), slate.slab.cover.top.value) } else { (Bond::Good, slate.slab.cover.bottom.value) };
    // Neighbouring laps stand further apart than twice any cover here, so the covers decide cd.
    let cd = slate.slab.cover.side.value.min(cover);
    let bar = Bar { size, fck: basis.concrete.value.fck, sigma: anchorage::fyd(basis.steel.value.fyk), bond, cd, form: Form::Straight };
    anchorage::lap(&bar, basis.lap_share.value, basis.least_lap.value).value + anchorage::lap_excess(gap, size)
}

/// The bottom bars that run on from both sides over an inner support: each laps its nearest neighbour.
fn over_support(slate: &mut Slate, j: usize) {
    let centre = slate.model.stations.supports[j].centre;
    let bottom = slate.pieces.along(|p| p.layer == Layer::B1 && p.covers(0, centre));
    let middle = |p: &Piece| (p.low[0] + p.high[0]) / 2.0;
    let (from_left, from_right): (Vec<&Piece>, Vec<&Piece>) = bottom.into_iter().partition(|p| middle(p) < centre);
    let nearest = |p: &Piece, others: &[&Piece]| -> Option<(f64, f64, f64)> {
        let other = others.iter().min_by(|a, b| (a.low[1] - p.low[1]).abs().total_cmp(&(b.low[1] - p.low[1]).abs()))?;
        let gap = ((other.low[1] - p.low[1]).abs() - (p.size + other.size) / 2.0).max(0.0);
        Some((p.overlap(other), needed(slate, p, other, gap), gap))
    };
    let pairs = from_left.iter().filter_map(|p| nearest(p, &from_right)).chain(from_right.iter().filter_map(|p| nearest(p, &from_left)));
    let worst = pairs.min_by(|a, b| (a.0 - a.1).total_cmp(&(b.0 - b.1)));
    let at = format!("support:{}/B1/lap", slate.model.grids[j]);
    match worst {
        Some((lap, limit, _)) => slate.at_least("lap-length", &at, lap, limit, "mm"),
        None => slate.at_least("lap-length", &at, 0.0, 200.0, "mm"),
    }
    let size = from_left.iter().chain(&from_right).map(|p| p.size).fold(0.0, f64::max);
    transverse(slate, &at, size);
}

/// Laps of cut bars: bars of one layer and role, in or near contact, that overlap for less than half of the shorter.
fn pieces(slate: &mut Slate) {
    let mut worst: Option<(f64, f64, String, f64)> = None;
    for group in &slate.pieces.by_axis[..2] {
        let Some(axis) = group.first().map(|p| p.axis) else { continue };
        let across = 1 - axis;
        let mut sorted: Vec<&Piece> = group.iter().filter(|p| p.straight || p.layer != Layer::E || p.role == Role::SupportTop).collect();
        sorted.sort_by(|a, b| a.low[across].total_cmp(&b.low[across]));
        for (i, a) in sorted.iter().enumerate() {
            for b in sorted[i + 1..].iter().take_while(|b| b.low[across] - a.low[across] <= 3.0 * a.size + 1.0) {
                let alike = a.zone == b.zone && a.role == b.role && a.bar != b.bar && (a.low[2] - b.low[2]).abs() < 1.0;
                let overlap = a.overlap(b);
                if !alike || overlap <= 1.0 || overlap > 0.5 * a.length().min(b.length()) {
                    continue;
                }
                let gap = (b.low[across] - a.low[across] - (a.size + b.size) / 2.0).max(0.0);
                let limit = needed(slate, a, b, gap);
                if worst.as_ref().is_none_or(|w| overlap - limit < w.0 - w.1) {
                    worst = Some((overlap, limit, format!("mark:{}", slate.model.bars[a.kind].mark), a.size));
                }
            }
        }
    }
    if let Some((lap, limit, at, size)) = worst {
        slate.at_least("lap-length", &at, lap, limit, "mm");
        transverse(slate, &at, size);
    }
}

/// Bars of 20 mm and over that lap at one section in more than a quarter of their number need transverse steel of their own.
fn transverse(slate: &mut Slate, at: &str, size: f64) {
    let needs = size >= 20.0 && slate.job.basis.lap_share.value > 25;
    slate.file("lap-transverse", at, size, 20.0, "mm", !needs, Verdict::Warn);
}
