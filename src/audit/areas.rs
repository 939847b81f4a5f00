//! Areas at every station that decides, where bars stop, and how far top bars reach.

use super::pieces::{Piece, area_at, chained};
use super::{Slate, Verdict};
use crate::plan::stations::Stations;
use crate::plan::{Layer, Role};
use crate::rules::areas;

pub(super) fn checks(slate: &mut Slate) {
    for k in 0..slate.model.stations.spans.len() {
        span(slate, k);
    }
    for j in 1..slate.model.stations.last() {
        support(slate, j);
    }
}

fn centres(stations: &Stations) -> Vec<f64> {
    stations.supports.iter().map(|s| s.centre).collect()
}

fn span(slate: &mut Slate, k: usize) {
    let stations = slate.model.stations.clone();
    let span = &stations.spans[k];
    let (fck, fyk) = (slate.job.basis.concrete.value.fck, slate.job.basis.steel.value.fyk);
    let sheet = slate.job.basis.curtailment.value.clone();
    let pieces = slate.pieces.along(|p| p.layer == Layer::B1);
    let own: Vec<&Piece> = pieces.into_iter().filter(|p| p.high[0] > span.left_face && p.low[0] < span.right_face).collect();
    let main = chained(&own, &centres(&stations));
    let main: Vec<&Piece> = main.iter().collect();
    let middle = (span.left_face + span.right_face) / 2.0;
    let provided = area_at(&main, 0, middle, 1);
    let level = main.iter().map(|p| p.low[2]).fold(0.0, f64::max);
    let depth = slate.h() - level;
    let least = areas::least(fck, fyk, depth).value;
    let at = format!("span:{}/B1", k + 1);
    if let Some(required) = slate.slab.spans[k].required.as_ref().map(|r| r.value) {
        slate.at_least("area-required", &at, provided, required, "mm²/m");
    }
    slate.at_least("area-least", &at, provided, least, "mm²/m");
    slate.at_most("area-most", &at, provided, areas::most(slate.h()), "mm²/m");
    let distribution = slate.pieces.across(|p| p.role == Role::DistributionBottom && p.low[0] > span.left_face && p.low[0] < span.right_face);
    let across = slate.slab.width.value / 2.0;
    let crossing: Vec<&Piece> = distribution.iter().copied().filter(|p| p.covers(1, p.low[1].max(across.min(p.high[1])))).collect();
    let share = distribution_area(&crossing, span.clear) / provided.max(1.0);
    slate.at_least("distribution-share", &format!("span:{}/B2", k + 1), share, areas::DISTRIBUTION_SHARE, "");
    for (left, support, face) in [(true, k, span.left_face), (false, k + 1, span.right_face)] {
        let at_end = support == 0 || support == stations.last();
        let name = if left { "left" } else { "right" };
        // Just inside the support: only the bars that run on, of this span alone.
        let x = if left { face - 1.0 } else { face + 1.0 };
        let own: Vec<&Piece> = main.iter().copied().filter(|p| p.covers(0, middle)).collect();
        let on = area_at(&own, 0, x, 1);
        let limit = if at_end { 0.50 } else { 0.25 };
        // Counted by spacing: of an odd number one bar more or less runs on at either end.
        let one_bar = 1.0 / own.len().max(1) as f64;
        let share = on / provided.max(1.0);
        slate.file("area-run-on", &format!("{at}/{name}"), share, limit, "", share >= limit - one_bar, Verdict::Fail);
        slate.at_least("area-least", &format!("{at}/{name}"), on.max(if at_end { 0.0 } else { area_at(&main, 0, x, 1) }), least, "mm²/m");
        stop(slate, &main, k, left, if at_end { sheet.bottom.stop_end } else { sheet.bottom.stop_interior });
    }
}

/// Area of distribution over a clear span, each place counted once however many pieces lap there.
fn distribution_area(pieces: &[&Piece], clear: f64) -> f64 {
    let mut places: Vec<(f64, f64)> = pieces.iter().map(|p| (p.low[0], p.size)).collect();
    places.sort_by(|a, b| a.0.total_cmp(&b.0));
    places.dedup_by(|a, b| (a.0 - b.0).abs() < 60.0);
    places.iter().map(|(_, size)| crate::base::bar_area(*size as u32)).sum::<f64>() * 1000.0 / clear.max(1.0)
}

/// Where the last of the span's bars stops, from the support line.
fn stop(slate: &mut Slate, main: &[&Piece], k: usize, left: bool, share: f64) {
    let span = slate.model.stations.spans[k].clone();
    let middle = (span.left_face + span.right_face) / 2.0;
    let limit = share * span.effective;
    let own = main.iter().filter(|p| p.covers(0, middle));
    let stop = if left {
        own.map(|p| p.low[0] - span.left_line).fold(f64::NEG_INFINITY, f64::max)
    } else {
        own.map(|p| span.right_line - p.high[0]).fold(f64::NEG_INFINITY, f64::max)
    };
    // Where every bar is lapped at midspan no single one crosses it: nothing stops there.
    if stop.is_finite() && stop > 0.0 {
        let name = if left { "left" } else { "right" };
        slate.at_most("bottom-stop", &format!("span:{}/B1/stop-{name}", k + 1), stop, limit, "mm");
    }
}

fn support(slate: &mut Slate, j: usize) {
    let stations = slate.model.stations.clone();
    let at = format!("support:{}/T1", slate.model.grids[j]);
    let station = &stations.supports[j];
    let h = slate.h();
    let top = slate.pieces.along(|p| matches!(p.role, Role::SupportTop | Role::EndTop) && p.top);
    let top = chained(&top, &centres(&stations));
    let over: Vec<&Piece> = top.iter().filter(|p| p.covers(0, station.centre)).collect();
    let provided = area_at(&over, 0, station.centre, 1);
    let depth = over.iter().map(|p| p.low[2]).fold(f64::INFINITY, f64::min);
    if let Some(required) = slate.slab.supports[j].required.as_ref().map(|r| r.value) {
        slate.at_least("area-required", &at, provided, required, "mm²/m");
    }
    let least = if depth.is_finite() { areas::least(slate.job.basis.concrete.value.fck, slate.job.basis.steel.value.fyk, depth).value } else { 0.0 };
    slate.at_least("area-least", &at, provided, least, "mm²/m");
    slate.at_most("area-most", &at, provided, areas::most(h), "mm²/m");
    let sheet = slate.job.basis.curtailment.value.top.clone();
    let size = over.iter().map(|p| p.size).fold(0.0, f64::max);
    let leff = stations.top_span(j);
    for left in [true, false] {
        let span = if left { &stations.spans[j - 1] } else { &stations.spans[j] };
        let (line, face) = if left { (span.right_line, station.left_face) } else { (span.left_line, station.right_face) };
        let reach = |p: &&Piece| if left { line - p.low[0] } else { p.high[0] - line };
        let near_limit = (sheet.near * leff).max(sheet.near_face_sizes * size + (line - face).abs());
        let far_limit = sheet.far * leff;
        // A reach that would pass the slab end ends at its cover, and a little before it for a bar between two faces.
        let cover = slate.slab.cover.side.value + 45.0;
        let room = if left { line - stations.start - cover } else { stations.end - line - cover };
        let (near_limit, far_limit) = (near_limit.min(room), far_limit.min(room));
        let mut reaches: Vec<f64> = over.iter().map(reach).collect();
        reaches.sort_by(f64::total_cmp);
        let name = if left { "left" } else { "right" };
        let nearest = reaches.first().copied().unwrap_or(0.0);
        // Turned pairs of an odd number leave one bar more on the other side.
        let half = reaches.get(reaches.len().div_ceil(2).min(reaches.len().saturating_sub(1))).copied().unwrap_or(0.0);
        slate.at_least("top-near", &format!("{at}/reach-{name}"), nearest, near_limit, "mm");
        slate.at_least("top-far", &format!("{at}/reach-{name}"), half, far_limit, "mm");
    }
}
