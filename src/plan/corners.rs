//! D10: corners of an end support and a held side edge. T1, T2 and edge bars already there count; only the shortfall is added.

use super::{Along, Layer, Role, Run, Work, lines};
use crate::base::{area_per_metre, mm, up};
use crate::rules::{areas, spacing};
use crate::steel::made::{End, Form, between};
use crate::tables::tables;
use crate::trace::rule;
use itertools::Itertools;

/// Share of the effective span over which corner bars reach each way (common practice).
const EXTENT: f64 = 0.20;

pub(super) fn plan(work: &mut Work) {
    for support in [0, work.stations.last()] {
        for side in 0..2 {
            if work.slab.edges[side].is_held() {
                along_span(work, support, side);
            }
        }
    }
}

/// Bars along the span over a corner: T1 of the end counts; what it lacks of As,min is added midway between its bars.
/// Across the span T2 or the edge bars give As,min already: D9 leaves T2 to serve only where it does.
fn along_span(work: &mut Work, support: usize, side: usize) {
    let (k, at_start) = if support == 0 { (0, true) } else { (support - 1, false) };
    let zone = work.address(&format!("support:{}", work.slab.supports[support].grid));
    let reaches_end = |r: &&Run| {
        let (low, high) = r.made.extent();
        if at_start { low < work.stations.start + 100.0 } else { high > work.stations.end - 100.0 }
    };
    let mut ends = work.plan.runs.iter().filter(|r| matches!(r.role, Role::EndTop | Role::SupportTop) && r.zone.ends_with("/T1")).filter(reaches_end);
    let Some(end) = ends.next() else { return };
    let (size, step, level) = (end.made.size, end.spacing, end.z);
    let all: Vec<f64> = end.lines.iter().chain(ends.flat_map(|r| &r.lines)).copied().sorted_by(f64::total_cmp).collect();
    let least = areas::least(work.fck(), work.fyk(), work.top_depth(size)).value;
    let area = area_per_metre(size, step);
    let most = spacing::most(spacing::Zone::Main, work.h());
    if area >= least && step <= most {
        return;
    }
    let short = (least - area).max(1.0);
    let Some(added) = tables().preferred_sizes().find(|s| *s >= 10 && area_per_metre(*s, step) >= short) else { return };
    let extent = EXTENT * work.stations.spans[k].effective;
    let width = work.slab.width.value;
    let reach_across = work.slab.edge_width[side] + extent;
    // A narrow slab's two corners may share bars.
    let zone = format!("{zone}/corner");
    let known: Vec<f64> = work.plan.runs.iter().filter(|r| r.zone == zone).flat_map(|r| r.lines.clone()).collect();
    let inside = |y: f64| if side == 0 { y <= reach_across } else { y >= width - reach_across && known.iter().all(|k| (k - y).abs() > 1.0) };
    let lines: Vec<f64> = all.iter().tuple_windows().map(|(a, b)| (a + b) / 2.0).filter(|y| inside(*y)).collect();
    let span = &work.stations.spans[k];
    let (face, to) = if at_start {
        (work.stations.start + work.side(), up(span.left_face + extent, 25.0))
    } else {
        (work.stations.end - work.side(), -up(-(span.right_face - extent), 25.0))
    };
    let forms = if at_start {
        [Form::Straight(End::Face(face)), Form::Straight(End::Free(to))]
    } else {
        [Form::Straight(End::Free(to)), Form::Straight(End::Face(face))]
    };
    let made = between(added, forms[0], forms[1], &work.basis.deduction);
    let text = format!("T1 gives {} mm²/m at {} mm in the corner, As,min is {}: size {added} added between its bars", mm(area), mm(step), mm(least));
    let grid = work.slab.supports[support].grid.clone();
    work.reason(&format!("support:{grid}/corner"), text, rule("D10"));
    // The upright of a U-bar leaves its main leg the deduction lower: the added bar lies at the same level.
    let z = level + (f64::from(size) - f64::from(added)) / 2.0;
    let standing = lines::Standing::new(all.iter().map(|y| (*y, f64::from(size))));
    let lines = lines.into_iter().map(|y| standing.clear(y, f64::from(added), 0.0, width)).collect_vec();
    work.plan.runs.push(Run { layer: Layer::T1, role: Role::Corner, along: Along::X, made, lines, z, spacing: step, zone, lap: 0.0, turn: "" });
}
