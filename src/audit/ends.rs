//! End supports and edges: anchorage past the face, top steel, corners, legs of edge bars.

use super::pieces::{Piece, area_at};
use super::{Slate, Verdict};
use crate::base::{Point3, bar_area};
use crate::job::Edge;
use crate::plan::{Layer, Role};
use crate::rules::anchorage::{self, Bar, Bond, Form};
use crate::rules::areas;
use crate::tables::curtailment::From;
use crate::tables::tables;

pub(super) fn checks(slate: &mut Slate) {
    let last = slate.model.stations.last();
    for (support, left) in [(0, true), (last, false)] {
        bottom(slate, support, left);
        top(slate, support, left);
        corners(slate, support, left);
    }
    legs(slate);
}

/// Centre-line length of a bar from where its piece crosses a face to its end beyond it, mm; bends at their least radius.
/// Of a closing bar the leg back counts too.
fn past_face(slate: &Slate, piece: &Piece, face: f64, left: bool) -> f64 {
    let mark = &slate.model.bars[piece.kind];
    let is_piece = |w: &[Point3]| (0..3).all(|i| w[0][i].min(w[1][i]) == piece.low[i] && w[0][i].max(w[1][i]) == piece.high[i]);
    let Some(mut axis) = mark.placements().find(|a| a.windows(2).any(is_piece)) else { return 0.0 };
    let at = axis.windows(2).position(is_piece).unwrap_or(0);
    // Walk from the crossing outwards.
    let outward = if left { axis[at + 1][0] < axis[at][0] } else { axis[at + 1][0] > axis[at][0] };
    let at = if outward { at } else { axis.len() - 2 - at };
    if !outward {
        axis.reverse();
    }
    let radius = tables().known_bar(mark.size).radius + f64::from(mark.size) / 2.0;
    // A sharp corner of two centre lines is longer than its arc.
    let corner = (2.0 - std::f64::consts::FRAC_PI_2) * radius;
    let first = (axis[at + 1][0] - face).abs();
    let rest: f64 = axis[at + 1..].windows(2).map(|w| crate::base::distance(w[0], w[1]) - corner).sum();
    first + rest
}

fn inner_face(slate: &Slate, support: usize, left: bool) -> f64 {
    let station = &slate.model.stations.supports[support];
    if left { station.right_face } else { station.left_face }
}

fn bottom(slate: &mut Slate, support: usize, left: bool) {
    let k = if left { 0 } else { support - 1 };
    let face = inner_face(slate, support, left);
    let span = slate.model.stations.spans[k].clone();
    let x = if left { face - 1.0 } else { face + 1.0 };
    // In a short span bars that stop may stop past the face: those that run on reach the cover line.
    let side = slate.slab.cover.side.value;
    let (start, end) = (slate.model.stations.start + side, slate.model.stations.end - side);
    let reaches = |p: &Piece| if left { p.low[0] <= start + 60.0 } else { p.high[0] >= end - 60.0 };
    let running = slate.pieces.along(|p| p.layer == Layer::B1 && p.covers(0, x) && reaches(p));
    let at = format!("support:{}/B1", slate.model.grids[support]);
    let area = area_at(&running, 0, x, 1);
    if area <= 0.0 {
        slate.at_least("end-anchorage", &at, 0.0, 100.0, "mm");
        return;
    }
    let given = slate.slab.supports[support].shear.as_ref().or(slate.slab.spans[k].shear.as_ref()).map(|s| s.value);
    let shear = given.unwrap_or_else(|| areas::end_shear(slate.slab.permanent.value, slate.slab.variable.value, span.effective).value);
    let tie = areas::end_tie_force(shear).value * 1000.0;
    let fyd = anchorage::fyd(slate.job.basis.steel.value.fyk);
    let sigma = tie / area;
    let mut worst: Option<(f64, f64)> = None;
    let fck = slate.job.basis.concrete.value.fck;
    let gap = super::pieces::Row::of(running.iter().copied(), 1).mean();
    for piece in &running {
        let mark = &slate.model.bars[piece.kind];
        let form = if mark.is_straight() { Form::Straight } else { Form::Bent };
        let cd = anchorage::cd(gap - piece.size, slate.slab.cover.side.value, slate.slab.cover.bottom.value, form);
        let bar = Bar { size: mark.size, fck, sigma: sigma.min(fyd), bond: Bond::Good, cd, form };
        let needed = anchorage::anchorage(&bar).value;
        let got = past_face(slate, piece, face, left);
        if worst.is_none_or(|(g, n)| got - needed < g - n) {
            worst = Some((got, needed));
        }
    }
    let Some((got, needed)) = worst else { return };
    if got + super::SLACK < needed
        && let Some((lap, limit, closing)) = closing_lap(slate, &running, left)
    {
        let ok = lap + super::SLACK >= limit && closing * fyd + 1.0 >= tie;
        slate.file("end-anchorage", &format!("{at}/closing"), lap, limit, "mm", ok, Verdict::Fail);
        return;
    }
    slate.file("end-anchorage", &at, got, needed, "mm", got + super::SLACK >= needed && sigma <= fyd, Verdict::Fail);
}

/// Lap of the closing bars with the bottom bars that run on: shortest lap, its limit, and their area in mm²/m.
fn closing_lap(slate: &Slate, running: &[&Piece], left: bool) -> Option<(f64, f64, f64)> {
    let (start, end) = (slate.model.stations.start, slate.model.stations.end);
    let near_end = |p: &Piece| if left { p.low[0] < start + 150.0 } else { p.high[0] > end - 150.0 };
    let legs = slate.pieces.along(|p| p.layer == Layer::E && !p.straight && !p.top && near_end(p));
    let first = legs.first()?;
    let mean = super::pieces::Row::of(legs.iter().copied(), 1).mean();
    let size = first.size.min(running.first()?.size) as u32;
    let form = Form::Straight;
    let nearest = |p: &Piece, others: &[&Piece]| others.iter().map(|o| (o.low[1] - p.low[1]).abs() - (o.size + p.size) / 2.0).fold(f64::INFINITY, f64::min);
    let worst_gap = legs.iter().map(|p| nearest(p, running)).chain(running.iter().map(|p| nearest(p, &legs))).fold(0.0, f64::max);
    let run_gap = super::pieces::Row::of(running.iter().copied(), 1).mean().min(mean) - 2.0 * f64::from(size);
    let basis = &slate.job.basis;
    let cd = anchorage::cd(run_gap, slate.slab.cover.side.value, slate.slab.cover.bottom.value, form);
    let bar = Bar { size, fck: basis.concrete.value.fck, sigma: anchorage::fyd(basis.steel.value.fyk), bond: Bond::Good, cd, form };
    let limit = anchorage::lap(&bar, basis.lap_share.value, basis.least_lap.value).value + anchorage::lap_excess(worst_gap, size);
    let lap = legs
        .iter()
        .map(|leg| running.iter().min_by(|a, b| (a.low[1] - leg.low[1]).abs().total_cmp(&(b.low[1] - leg.low[1]).abs())).map_or(0.0, |b| b.overlap(leg)))
        .fold(f64::INFINITY, f64::min);
    Some((lap, limit, bar_area(first.size as u32) * 1000.0 / mean))
}

fn top(slate: &mut Slate, support: usize, left: bool) {
    let k = if left { 0 } else { support - 1 };
    let h = slate.h();
    let face = inner_face(slate, support, left);
    let span = slate.model.stations.spans[k].clone();
    let x = if left { face + 1.0 } else { face - 1.0 };
    let main = slate.pieces.along(|p| matches!(p.role, Role::EndTop | Role::SupportTop) && p.top && p.covers(0, x));
    let sheet = slate.job.basis.curtailment.value.end_top.clone();
    let at = format!("support:{}/T1", slate.model.grids[support]);
    let steel = slate.slab.spans[k].required.as_ref().map_or(slate.slab.spans[k].bottom.value.area(), |r| r.value);
    let depth = main.iter().map(|p| p.low[2]).fold(f64::INFINITY, f64::min);
    let depth = if depth.is_finite() { depth } else { h };
    let basis = &slate.job.basis;
    let least = areas::least(basis.concrete.value.fck, basis.steel.value.fyk, depth).value;
    let own = slate.slab.supports[support].required.as_ref().map_or(0.0, |r| r.value);
    let need = (sheet.share * steel).max(if sheet.least_area { least } else { 0.0 }).max(own);
    let provided = area_at(&main, 0, x, 1);
    slate.at_least("end-top-area", &at, provided, need, "mm²/m");
    let line = if left { span.left_line } else { span.right_line };
    let from = if sheet.from == From::Face { face } else { line };
    let size = main.iter().map(|p| p.size).fold(0.0, f64::max);
    let limit = sheet.reach * span.effective;
    let reach = main.iter().map(|p| if left { p.high[0] - from } else { from - p.low[0] }).fold(f64::INFINITY, f64::min);
    if reach.is_finite() {
        slate.at_least("end-top-reach", &at, reach, limit.max(sheet.least_face_sizes * size), "mm");
    }
    let Some(worst) = anchored(slate, &main, face, left, need, provided) else { return };
    // The standard asks for anchorage without a number for partial fixity: short of the full length is a warning.
    slate.file("end-top-anchorage", &at, worst.0, worst.1, "mm", worst.0 + super::SLACK >= worst.1, Verdict::Warn);
}

fn anchored(slate: &Slate, main: &[&Piece], face: f64, left: bool, need: f64, provided: f64) -> Option<(f64, f64)> {
    let basis = &slate.job.basis;
    let sigma = anchorage::fyd(basis.steel.value.fyk) * (need / provided.max(1.0)).min(1.0);
    let gap = super::pieces::Row::of(main.iter().copied(), 1).mean();
    let first = main.first()?;
    let mark = &slate.model.bars[first.kind];
    let form = if mark.is_straight() { Form::Straight } else { Form::Bent };
    let cd = anchorage::cd(gap - first.size, slate.slab.cover.side.value, slate.slab.cover.top.value, form);
    let bar = Bar { size: mark.size, fck: basis.concrete.value.fck, sigma, bond: anchorage::top_bond(slate.h()), cd, form };
    Some((past_face(slate, first, face, left), anchorage::anchorage(&bar).value))
}

/// Both ways over 0.2 of the effective span where an end support and a held edge meet: As,min each way.
fn corners(slate: &mut Slate, support: usize, left: bool) {
    let k = if left { 0 } else { support - 1 };
    let h = slate.h();
    let extent = 0.20 * slate.model.stations.spans[k].effective;
    let face = inner_face(slate, support, left);
    let width = slate.slab.width.value;
    for side in 0..2 {
        if !slate.slab.edges[side].is_held() {
            continue;
        }
        let rests = slate.slab.edge_width[side];
        let (low, high) = if side == 0 { (0.0, rests + extent) } else { (width - rests - extent, width) };
        let at = format!("support:{}/corner:{}", slate.model.grids[support], if side == 0 { "near" } else { "far" });
        let x = if left { face + 1.0 } else { face - 1.0 };
        let section = |pieces: &[&Piece], across: usize, low: f64, high: f64| -> f64 {
            pieces.iter().filter(|p| p.low[across] >= low && p.low[across] <= high).map(|p| bar_area(p.size as u32)).sum::<f64>() * 1000.0 / (high - low)
        };
        let along = slate.pieces.along(|p| p.top && p.covers(0, x));
        let level = along.iter().map(|p| p.low[2]).fold(h, f64::min);
        let least = areas::least(slate.job.basis.concrete.value.fck, slate.job.basis.steel.value.fyk, level).value;
        let y = if side == 0 { rests + 1.0 } else { width - rests - 1.0 };
        let (from, to) = if left { (slate.model.stations.start, face + extent) } else { (face - extent, slate.model.stations.end) };
        let across = slate.pieces.across(|p| p.top && p.covers(1, y));
        let values = [section(&along, 1, low, high), section(&across, 0, from, to)];
        // A window of a few bars counts up to one bar more or less than the spacing gives.
        for (value, name) in values.into_iter().zip(["along", "across"]) {
            slate.file("corner-area", &format!("{at}/{name}"), value, least, "mm²/m", value >= 0.9 * least, Verdict::Fail);
        }
    }
}

/// Legs of the U-bars at free edges, from the edge bar's outer face.
fn legs(slate: &mut Slate) {
    let limit = 2.0 * slate.h();
    let width = slate.slab.width.value;
    let stands_free = |mark: &crate::place::BarType| {
        let upright = mark.sets.iter().flat_map(|s| s.axis.windows(2)).find(|w| w[0][2] != w[1][2] && w[0][1] == w[1][1]);
        upright.is_some_and(|w| slate.slab.edges[usize::from(w[0][1] > width / 2.0)] == Edge::Free)
    };
    let bars = slate.model.bars.iter().filter(|b| b.role == Role::Edge && !b.is_straight() && !b.is_along_span() && stands_free(b));
    let found: Vec<(String, f64)> = bars
        .map(|mark| {
            let leg = mark.dims.iter().filter(|(l, _)| **l != 'B').map(|(_, v)| f64::from(*v)).fold(f64::INFINITY, f64::min);
            (format!("mark:{}", mark.mark), leg)
        })
        .collect();
    for (at, leg) in found {
        slate.at_least("edge-leg", &at, leg, limit, "mm");
    }
}
