//! Spacing of main, distribution and edge bars, and crack control by spacing or size.

use super::pieces::Row;
use super::{Slate, Verdict};
use crate::job::Edge;
use crate::plan::{Layer, Role};
use crate::rules::spacing::Zone;
use crate::rules::{anchorage, areas, spacing};

pub(super) fn checks(slate: &mut Slate) {
    let h = slate.h();
    bottom(slate, h);
    top(slate, h);
    edges(slate, h);
}

fn bottom(slate: &mut Slate, h: f64) {
    for (k, span) in slate.model.stations.spans.clone().into_iter().enumerate() {
        let middle = (span.left_face + span.right_face) / 2.0;
        let main = slate.pieces.along(|p| p.layer == Layer::B1);
        let row = |x: f64| Row::of(main.iter().copied().filter(|p| p.covers(0, x)), 1);
        let at_middle = row(middle);
        let size = main.iter().filter(|p| p.covers(0, middle)).map(|p| p.size).fold(0.0, f64::max);
        let (left, right) = (row(span.left_face).widest_called(size), row(span.right_face).widest_called(size));
        let distribution = slate.pieces.across(|p| p.role == Role::DistributionBottom && p.low[0] > span.left_face && p.low[0] < span.right_face);
        let mut places: Vec<f64> = distribution.iter().map(|p| p.low[0]).collect();
        // Lapped pieces of one bar stand side by side: one place.
        places.sort_by(f64::total_cmp);
        places.dedup_by(|a, b| (*a - *b).abs() < 60.0);
        let widest = Row { places }.widest();
        let at = format!("span:{}", k + 1);
        slate.at_most("spacing-most", &format!("{at}/B1"), at_middle.widest_called(size), spacing::most(Zone::MainPeak, h), "mm");
        slate.at_most("spacing-run-on", &format!("{at}/B1/left"), left, spacing::most(Zone::Main, h), "mm");
        slate.at_most("spacing-run-on", &format!("{at}/B1/right"), right, spacing::most(Zone::Main, h), "mm");
        slate.at_most("spacing-distribution", &format!("{at}/B2"), widest, spacing::most(Zone::DistributionPeak, h), "mm");
        let required = slate.slab.spans[k].required.as_ref().map(|r| r.value);
        crack(slate, &format!("{at}/B1"), size, at_middle.mean(), required);
    }
}

fn top(slate: &mut Slate, h: f64) {
    let last = slate.model.stations.last();
    for (j, support) in slate.model.stations.supports.clone().into_iter().enumerate() {
        if j == 0 || j == last {
            continue;
        }
        let main = slate.pieces.along(|p| matches!(p.role, Role::SupportTop | Role::EndTop) && p.top);
        let over: Vec<_> = main.iter().copied().filter(|p| p.covers(0, support.centre)).collect();
        let row = Row::of(over.iter().copied(), 1);
        let size = over.iter().map(|p| p.size).fold(0.0, f64::max);
        let (low, high) = (over.iter().map(|p| p.low[0]).fold(f64::INFINITY, f64::min), over.iter().map(|p| p.high[0]).fold(f64::NEG_INFINITY, f64::max));
        let ends = [low + 1.0, high - 1.0].map(|x| Row::of(main.iter().copied().filter(|p| p.covers(0, x)), 1).widest_called(size));
        let mut places: Vec<f64> =
            slate.pieces.across(|p| p.role == Role::DistributionTop && p.low[0] > low && p.low[0] < high).iter().map(|p| p.low[0]).collect();
        places.sort_by(f64::total_cmp);
        places.dedup_by(|a, b| (*a - *b).abs() < 60.0);
        let distribution = Row { places }.widest();
        let at = format!("support:{}", slate.model.grids[j]);
        slate.at_most("spacing-most", &format!("{at}/T1"), row.widest_called(size), spacing::most(Zone::MainPeak, h), "mm");
        slate.at_most("spacing-run-on", &format!("{at}/T1/left"), ends[0], spacing::most(Zone::Main, h), "mm");
        slate.at_most("spacing-run-on", &format!("{at}/T1/right"), ends[1], spacing::most(Zone::Main, h), "mm");
        slate.at_most("spacing-distribution", &format!("{at}/T2"), distribution, spacing::most(Zone::DistributionPeak, h), "mm");
        let required = slate.slab.supports[j].required.as_ref().map(|r| r.value);
        crack(slate, &format!("{at}/T1"), size, row.mean(), required);
    }
}

/// Tables 7.2N and 7.3N: either is enough. The stress is estimated from the loads where the job gives no moments.
fn crack(slate: &mut Slate, at: &str, size: f64, mean: f64, required: Option<f64>) {
    if slate.h() < 200.0 || !mean.is_finite() || size == 0.0 {
        return;
    }
    let provided = crate::base::area_per_metre(size as u32, mean);
    let fyd = anchorage::fyd(slate.job.basis.steel.value.fyk);
    let stress = areas::service_stress(slate.slab.permanent.value, slate.slab.variable.value, fyd, required.unwrap_or(provided), provided);
    match spacing::crack_limits(stress) {
        Some((most_size, most_spacing)) => {
            let ok = size <= most_size || mean <= most_spacing + 0.5;
            slate.file("spacing-crack", at, mean, most_spacing, "mm", ok, Verdict::Fail);
        }
        None => slate.file("spacing-crack", at, mean, 0.0, "mm", false, Verdict::Fail),
    }
}

fn edges(slate: &mut Slate, h: f64) {
    let width = slate.slab.width.value;
    for (side, name) in [(0, "near"), (1, "far")] {
        if slate.slab.edges[side] != Edge::Free {
            continue;
        }
        let is_here = |y: f64| if side == 0 { y < width / 2.0 } else { y > width / 2.0 };
        let bars: Vec<_> = slate.pieces.by_axis[2].iter().filter(|p| p.role == Role::Edge && is_here(p.low[1])).collect();
        let mut row = Row::of(bars, 0);
        // The corner bar's own end and the slab ends count as places.
        let (start, end) = (slate.model.stations.start, slate.model.stations.end);
        row.places.insert(0, start);
        row.places.push(end);
        let widest = row.widest();
        slate.at_most("spacing-edge", &format!("edge:{name}"), widest, spacing::most(Zone::Distribution, h), "mm");
    }
}
