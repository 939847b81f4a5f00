//! What closes a slab end and what its bends hold: shapes that fit the depth, lines clear of the bottom bars, bars inside corners (D7 to D9).

use super::ends::{BottomEnd, EndPlan, Ends, TopEnd};
use super::fitting::{closing, face};
use super::{Along, Layer, Role, Run, Work, cut, lines};
use crate::base::{mm, up};
use crate::job::Bars;
use crate::rules::anchorage;
use crate::steel::made::{End, Form, between};
use crate::tables::tables;
use crate::trace::{Step, rule};

/// Sets the leg back of the closing bars that B1 needs, now that B1 stands: the full lap, and what it grows by where bars stand apart.
/// Bars of their own are looked at after the top bars stand, which they keep clear of (`own`).
pub(super) fn lap(work: &mut Work, ends: &mut Ends, own: bool) {
    for side in 0..2 {
        let end = ends.0[side].clone();
        let closes = matches!(end.top, TopEnd::Closed { .. }) || end.own.is_some();
        if end.bottom != BottomEnd::Closed || !closes || end.own.is_some() != own {
            continue;
        }
        let bars = end.own.as_ref().unwrap_or(&end.bars).clone();
        let face = face(work, side);
        let reaches = |r: &&Run| {
            let (low, high) = r.made.extent();
            r.layer == Layer::B1 && if side == 0 { low < face + 50.0 } else { high > face - 50.0 }
        };
        let running: Vec<&Run> = work.plan.runs.iter().filter(reaches).collect();
        let Some(size) = running.first().map(|r| r.made.size) else { continue };
        let run_lines: Vec<f64> = running.iter().flat_map(|r| r.lines.clone()).collect();
        let lines = closing_lines(work, &end, side, &bars);
        let small = bars.size.min(size);
        let apart = lines::worst_gap(&lines, f64::from(bars.size), &run_lines, f64::from(size));
        let spacing = bars.spacing.min(running[0].spacing);
        let full = cut::lap(work, small, spacing, false);
        let excess = anchorage::lap_excess(apart, small);
        let lap = full.value + excess;
        // The lap counts from the upright's centre line.
        let back = (2.0 * work.h()).max(end.start + f64::from(bars.size) / 2.0 + lap);
        let mut steps = full.steps;
        steps.push(
            Step::new(
                "leg back: past the start of B1 by the lap, with what it grows by where bars stand apart; at least 2h",
                format!("max(2 × {}, {} + {} + {})", mm(work.h()), mm(end.start + f64::from(bars.size) / 2.0), mm(full.value), mm(excess)),
                format!("{} mm", mm(up(back, 5.0))),
            )
            .cited(rule("D7, D8")),
        );
        let grid = work.slab.supports[end.support].grid.clone();
        work.explain(&format!("support:{grid}/T1/leg-back"), steps);
        work.plan.laps.push((small, lap));
        ends.0[side].lap = lap;
        ends.0[side].back = back;
    }
}

/// Lines of the bars at an end across the width (D19), moved off the bottom bars that share their level or their upright plane.
pub(super) fn closing_lines(work: &Work, end: &EndPlan, side: usize, bars: &Bars) -> Vec<f64> {
    let size = f64::from(bars.size);
    let base = lines::across(work.slab.width.value, work.side(), bars.size, bars.spacing);
    let closes = end.own.is_some() || matches!(end.top, TopEnd::Closed { .. });
    // How low the top bars reach at this end.
    let foot = match end.top {
        TopEnd::Turned { leg } => work.h() - work.slab.cover.top.value - leg,
        TopEnd::Straight => work.h() - work.slab.cover.top.value - size,
        TopEnd::Closed { .. } => 0.0,
    };
    let face = face(work, side);
    // A bar between two faces stands back from both by half of its deduction and its rounding.
    let reach = if closes { end.back.max(end.lap).max(1000.0) } else { 60.0 };
    let near = |r: &&Run| {
        let (low, high) = r.made.extent();
        let top = end.own.is_some() && matches!(r.role, Role::EndTop | Role::SupportTop);
        (r.layer == Layer::B1 || top) && if side == 0 { low - reach <= face + 1.0 } else { high + reach >= face - 1.0 }
    };
    let own_level = |r: &&Run| closes || r.made.axis.iter().any(|p| r.z + p.1 + r.size() / 2.0 > foot);
    let standing = lines::Standing::new(work.plan.runs.iter().filter(near).filter(own_level).flat_map(|r| r.lines.iter().map(|y| (*y, r.size()))));
    let (low, high) = (work.side() + size / 2.0, work.slab.width.value - work.side() - size / 2.0);
    base.into_iter().map(|y| standing.clear(y, size, low, high)).collect()
}

/// Adds closing bars of their own at the ends that need them.
pub(super) fn close(work: &mut Work, ends: &Ends) {
    for (side, end) in ends.0.iter().enumerate() {
        let Some(bars) = &end.own else { continue };
        let Some((shape, depth)) = closing(work, bars.size) else { continue };
        let face = face(work, side);
        let top_leg = (2.0 * work.h()).max(tables().known_bar(bars.size).projection);
        let inward = if side == 0 { 1.0 } else { -1.0 };
        let closed = Form::Closed { face, shape, depth, back: end.back, turn: -1.0 };
        let free = Form::Straight(End::Free(face + inward * top_leg));
        let forms = if side == 0 { [closed, free] } else { [free, closed] };
        let made = between(bars.size, forms[0], forms[1], &work.basis.deduction);
        let size = f64::from(bars.size);
        let lines = closing_lines(work, end, side, bars);
        let grid = work.slab.supports[end.support].grid.clone();
        work.plan.runs.push(Run {
            layer: Layer::E,
            role: Role::Edge,
            along: Along::X,
            made,
            lines,
            z: work.slab.cover.bottom.value + depth - size / 2.0,
            spacing: bars.spacing,
            zone: work.address(&format!("support:{grid}/closing")),
            lap: end.lap,
            turn: "",
        });
    }
}

/// How far a bar of `size` that touches the inside of a bend of inner radius `radius` stands from both inner faces, mm.
pub(super) fn in_corner(radius: f64, size: f64) -> f64 {
    radius - (radius - size / 2.0).max(0.0) * std::f64::consts::FRAC_1_SQRT_2
}

/// Inner radius of a made bar's bends, mm.
pub(super) fn inner_radius(run: &Run) -> f64 {
    match run.made.shape {
        "13" => f64::from(run.made.dims.get(&'B').copied().unwrap_or(0)) / 2.0 - run.size(),
        _ => tables().known_bar(run.made.size).radius,
    }
}

/// The bars across the slab that the bends of its ends hold, one inside each corner (D9).
pub(super) fn hold(work: &mut Work, ends: &Ends) {
    let size = work.slab.bottom_distribution.value.size;
    let d = f64::from(size);
    for end in &ends.0 {
        let side = usize::from(end.support != 0);
        let face = face(work, side);
        let inward = if side == 0 { 1.0 } else { -1.0 };
        // Bends at this end: their upright stands at the cover line.
        let corners: Vec<(f64, f64, bool)> = work
            .plan
            .runs
            .iter()
            .filter(|r| r.along == Along::X && r.made.shape != "00")
            .flat_map(|r| {
                let upright = r.made.axis.windows(2).filter(|w| w[0].0 == w[1].0 && (w[0].0 - face).abs() < r.size() + 15.0);
                upright
                    .flat_map(|w| w.to_vec())
                    .filter(|p| r.made.axis.windows(2).any(|w| w[0].1 == w[1].1 && (w[0] == *p || w[1] == *p)))
                    .map(|p| {
                        let off = in_corner(inner_radius(r), d) + r.size() / 2.0;
                        let low = r.z + p.1 < work.h() / 2.0;
                        let stands = (p.0 - face).abs() + off;
                        (stands, if low { r.z + p.1 + off } else { r.z + p.1 - off }, low)
                    })
                    .collect::<Vec<_>>()
            })
            .collect();
        for low in [true, false] {
            let own: Vec<&(f64, f64, bool)> = corners.iter().filter(|c| c.2 == low).collect();
            // Inside every upright of this end, whichever bend holds it.
            let Some(stands) = corners.iter().map(|c| c.0).reduce(f64::max).filter(|_| !own.is_empty()) else { continue };
            let x = face + inward * stands;
            let z = if low {
                own.iter().map(|c| c.1).fold(work.bottom_seat(x) + d / 2.0, f64::max)
            } else {
                own.iter().map(|c| c.1).fold(work.top_seat(x) - d / 2.0, f64::min)
            };
            let grid = work.slab.supports[end.support].grid.clone();
            across(work, x, z, size, &format!("support:{grid}/edge"), Role::Edge, Layer::E);
        }
    }
}

/// One straight bar across the slab, side cover to side cover.
fn across(work: &mut Work, x: f64, z: f64, size: u32, zone: &str, role: Role, layer: Layer) {
    let forms = [Form::Straight(End::Face(work.side())), Form::Straight(End::Face(work.slab.width.value - work.side()))];
    let made = between(size, forms[0], forms[1], &work.basis.deduction);
    let zone = work.address(zone);
    let spacing = work.slab.bottom_distribution.value.spacing;
    let run = Run { layer, role, along: Along::Y, made, lines: vec![x], z, spacing, zone, lap: 0.0, turn: "" };
    cut::push_distribution(work, run, forms);
}
