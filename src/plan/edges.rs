//! D9: side edges. Free: U-bars across the edge beside every B2 bar. Held: top bars across it with a closing bend. Joint: none.

use super::closing::{in_corner, inner_radius};
use super::fitting::closing_in;
use super::{Along, Layer, Role, Run, Work, choose, cut, lines};
use crate::base::{gaps, mm, up};
use crate::job::{Bars, Edge};
use crate::rules::{areas, spacing};
use crate::steel::made::{End, Form, between};
use crate::trace::{Step, rule};
use itertools::Itertools;

const NAMES: [&str; 2] = ["near", "far"];

pub(super) fn plan(work: &mut Work) {
    for (side, name) in NAMES.iter().enumerate() {
        match work.slab.edges[side] {
            Edge::Free => free(work, side),
            Edge::Wall | Edge::Beam => held(work, side),
            Edge::Joint => work.reason(&format!("edge:{name}"), "a joint: no edge bars; continuity is the engineer's", rule("D9")),
        }
        hold(work, side);
    }
}

/// The cover line of a side edge.
fn face(work: &Work, side: usize) -> f64 {
    if side == 0 { work.side() } else { work.slab.width.value - work.side() }
}

/// Upright of an edge bar: from the underside of the B2 level to the top of the T2 level, less the deduction.
fn depth(work: &Work) -> f64 {
    let outer = work.plan.runs.iter().filter(|r| r.along == Along::X && (r.layer == Layer::B1 || r.layer == Layer::E && r.made.shape != "00"));
    let closing = work.plan.runs.iter().filter(|r| r.along == Along::X && r.layer == Layer::E && r.made.shape != "00").map(Run::size).fold(0.0, f64::max);
    let bottom = outer.map(Run::size).fold(0.0, f64::max);
    work.upright(work.between_covers() - bottom - work.largest_top().max(closing))
}

/// Lines and sizes of the bars across the slab that come within `reach` of this side edge, in these layers; bars held at the
/// slab ends and the legs of the other side's edge bars count with them.
fn crossing_bars(work: &Work, side: usize, layers: &[Layer], reach: f64) -> Vec<(f64, f64)> {
    let edge = face(work, side);
    let near_edge = |r: &&Run| {
        let (low, high) = r.made.extent();
        if side == 0 { low <= edge + reach } else { high >= edge - reach }
    };
    let across = work.plan.runs.iter().filter(|r| r.along == Along::Y && (layers.contains(&r.layer) || r.role == Role::Edge));
    across.filter(near_edge).flat_map(|r| r.lines.iter().map(|x| (*x, r.size())).collect::<Vec<_>>()).collect()
}

fn free(work: &mut Work, side: usize) {
    let called = work.slab.bottom_distribution.value.clone();
    let depth = depth(work);
    let address = format!("edge:{}", NAMES[side]);
    let Some((size, (shape, depth))) =
        std::iter::once(called.size).chain(choose::smaller(called.size)).find_map(|size| closing_in(depth, size).map(|c| (size, c)))
    else {
        work.reason(&address, format!("no bar bends into {} mm between the layers: no edge bars", mm(depth)), rule("D9, D20"));
        return;
    };
    if size != called.size {
        work.reason(&address, format!("size {} does not bend into {} mm: size {size}", called.size, mm(depth)), rule("D9"));
    }
    let lines = free_lines(work, side, size, &called);
    let leg = up(2.0 * work.h(), 5.0);
    let steps = vec![
        Step::new("legs at least 2h", format!("2 × {}", mm(work.h())), format!("{} mm", mm(leg))).cited(rule("D9")).at(&work.slab.thickness.at),
        Step::new("beside every B2 bar, and at its spacing where there is none", format!("{} mm", mm(called.spacing)), lines.len().to_string())
            .cited(rule("D9, D19")),
    ];
    work.explain(&format!("{address}/count"), steps);
    push(work, side, size, [leg, depth, leg], shape, &lines, called.spacing, &address);
}

/// In contact beside each B2 bar, on the side where no T2 bar stands; between those and to the slab ends at the B2 spacing.
fn free_lines(work: &Work, side: usize, size: u32, called: &Bars) -> Vec<f64> {
    let d = f64::from(size);
    let reach = 2.0 * work.h();
    let top = lines::Standing::new(crossing_bars(work, side, &[Layer::T2], reach));
    let bottom: Vec<(f64, f64)> = bottom_bars(work, side);
    let (start, end) = (work.stations.start + work.side(), work.stations.end - work.side());
    let standing = lines::Standing::new(crossing_bars(work, side, &[Layer::B2, Layer::T2], reach));
    let middle = (start + end) / 2.0;
    // Towards the middle of the slab, so that a bar held in a bend at a slab end keeps its edge bar inside it.
    let beside = |(x, s): &(f64, f64)| {
        let touch = if *x <= middle { (s + d) / 2.0 } else { -(s + d) / 2.0 };
        if top.clear(x + touch, d, start, end) == x + touch { x + touch } else { x - touch }
    };
    let mut fixed: Vec<f64> = bottom.iter().map(beside).sorted_by(f64::total_cmp).collect();
    fixed.dedup_by(|a, b| (*a - *b).abs() < d);
    for (at, first) in [(start + d / 2.0, true), (end - d / 2.0, false)] {
        let nearest = if first { fixed.first() } else { fixed.last() };
        if nearest.is_none_or(|x| (x - at).abs() > called.spacing / 2.0) {
            let x = standing.clear(at, d, start, end);
            if first { fixed.insert(0, x) } else { fixed.push(x) }
        }
    }
    let mut lines: Vec<f64> = Vec::new();
    for (a, b) in fixed.iter().tuple_windows() {
        lines.push(*a);
        let n = gaps(b - a, called.spacing + d);
        lines.extend((1..n).map(|i| standing.clear(a + (b - a) * i as f64 / n as f64, d, start, end)));
    }
    lines.extend(fixed.last());
    lines
}

/// Lines and sizes of B2, and of the innermost bar held at each slab end: what edge bars stand beside.
fn bottom_bars(work: &Work, side: usize) -> Vec<(f64, f64)> {
    let edge = face(work, side);
    // Of a bar in lapped pieces only the piece at this edge counts.
    let at_edge = |r: &Run| if side == 0 { r.made.extent().0 < edge + 60.0 } else { r.made.extent().1 > edge - 60.0 };
    let straight = |role: Role| work.plan.runs.iter().filter(move |r| r.along == Along::Y && r.role == role && r.made.shape == "00" && at_edge(r));
    let lines = |r: &Run| r.lines.iter().map(|x| (*x, r.size())).collect::<Vec<_>>();
    let mut bars: Vec<(f64, f64)> = straight(Role::DistributionBottom).flat_map(lines).collect();
    let held: Vec<(f64, f64)> = straight(Role::Edge).flat_map(lines).collect();
    let middle = (work.stations.start + work.stations.end) / 2.0;
    bars.extend(held.iter().filter(|h| h.0 < middle).max_by(|a, b| a.0.total_cmp(&b.0)));
    bars.extend(held.iter().filter(|h| h.0 >= middle).min_by(|a, b| a.0.total_cmp(&b.0)));
    bars
}

fn held(work: &mut Work, side: usize) {
    let depth = depth(work);
    let address = format!("edge:{}", NAMES[side]);
    let most = spacing::most(spacing::Zone::Main, work.h());
    let t2 = work.slab.top_distribution.value.clone();
    let sheet = work.basis.curtailment.value.end_top.clone();
    let fraction = sheet.reach;
    for k in 0..work.stations.spans.len() {
        let span = work.stations.spans[k].clone();
        let given = &work.slab.spans[k];
        let area = given.required.as_ref().map_or(given.bottom.value.area(), |r| r.value);
        let level = |size: u32| work.h() - work.slab.cover.top.value - work.largest_top() - f64::from(size) / 2.0;
        let need = |size: u32| (sheet.share * area).max(areas::least(work.fck(), work.fyk(), level(size)).value);
        let fits = |size: u32| closing_in(depth, size).is_some();
        let Some(bars) = choose::bars(need, most, work.basis.aggregate.value, fits) else {
            work.reason(&address, format!("no bar bends into {} mm between the layers: no edge bars", mm(depth)), rule("D9, D20"));
            return;
        };
        let Some((shape, depth)) = closing_in(depth, bars.size) else { return };
        let serves = t2.area() >= need(t2.size) && t2.spacing <= most;
        let needed = need(bars.size);
        let free = if serves { outside_tops(work, span.left_face, span.right_face) } else { vec![(span.left_face, span.right_face)] };
        let across = work.slab.width.value - 2.0 * work.side();
        let reach = up(work.slab.edge_width[side] - work.side() + fraction * span.effective, 5.0)
            .min(crate::base::down(across - work.basis.deduction.straight / 2.0, 5.0));
        let back = up(2.0 * work.h(), 5.0);
        let standing = lines::Standing::new(crossing_bars(work, side, &[Layer::B2, Layer::T2], reach));
        let lines: Vec<f64> = free
            .iter()
            .flat_map(|(from, to)| lines::centred(*from, *to, bars.spacing))
            .map(|x| standing.clear(x, f64::from(bars.size), span.left_face, span.right_face))
            .collect();
        let zone = format!("{address}/span:{}", k + 1);
        let steps = vec![
            Step::new("area across the edge", format!("max({} × {}, As,min)", crate::base::num(sheet.share, 2), mm(area)), format!("{} mm²/m", mm(needed)))
                .cited(rule("D8, D9")),
            Step::new("lightest bars from size 10 up", format!("at most {} mm apart", mm(most)), bars.text(&work.basis.bar_letter)).cited(rule("D10a")),
            Step::new(
                "reach from the edge's face",
                format!(
                    "{} leff = {} × {}, and {} on the edge less the cover",
                    crate::base::num(fraction, 3),
                    crate::base::num(fraction, 3),
                    mm(span.effective),
                    mm(work.slab.edge_width[side])
                ),
                format!("{} mm", mm(reach)),
            )
            .cited(rule("D9")),
            Step::new("number", if serves { "outside the T1 zones, where T2 gives the area" } else { "face to face" }, lines.len().to_string())
                .cited(rule("D9, D19")),
        ];
        work.explain(&format!("{zone}/count"), steps);
        push(work, side, bars.size, [reach, depth, back], shape, &lines, bars.spacing, &zone);
    }
}

/// The parts of a length that no top bars along the span cover.
fn outside_tops(work: &Work, from: f64, to: f64) -> Vec<(f64, f64)> {
    let mut free = vec![(from, to)];
    let tops = work.plan.runs.iter().filter(|r| matches!(r.role, Role::SupportTop | Role::EndTop) && r.zone.ends_with("/T1"));
    for (low, high) in tops.map(|r| r.made.extent()) {
        free = free.into_iter().flat_map(|(a, b)| [(a, b.min(low)), (a.max(high), b)]).filter(|(a, b)| b - a > 100.0).collect();
    }
    free
}

/// U-bars across a side edge: bottom leg in the B2 level, main leg above it. Grouped by the level they rest at.
#[allow(clippy::too_many_arguments)]
fn push(work: &mut Work, side: usize, size: u32, legs: [f64; 3], shape: &'static str, lines: &[f64], spacing: f64, zone: &str) {
    let face = face(work, side);
    let inward = if side == 0 { 1.0 } else { -1.0 };
    let closed = Form::Closed { face, shape, depth: legs[1], back: legs[2], turn: -1.0 };
    let free = Form::Straight(End::Free(face + inward * legs[0]));
    let forms = if side == 0 { [closed, free] } else { [free, closed] };
    let made = between(size, forms[0], forms[1], &work.basis.deduction);
    let levels = lines.iter().map(|x| (work.bottom_seat(*x), *x)).collect_vec();
    let zone = work.address(zone);
    let chunks = levels.into_iter().chunk_by(|(z, _)| (z * 100.0).round() as i64);
    let groups: Vec<(f64, Vec<f64>)> = chunks
        .into_iter()
        .map(|(_, group)| {
            let group = group.collect_vec();
            (group[0].0, group.iter().map(|g| g.1).collect())
        })
        .collect();
    for (seat, lines) in groups {
        let z = seat + legs[1] - f64::from(size) / 2.0;
        work.plan.runs.push(Run {
            layer: Layer::E,
            role: Role::Edge,
            along: Along::Y,
            made: made.clone(),
            lines,
            z,
            spacing,
            zone: zone.clone(),
            lap: 0.0,
            turn: "",
        });
    }
}

/// The bars along the slab that the bends of a side edge hold, one inside each corner, the full length.
fn hold(work: &mut Work, side: usize) {
    let zone = work.address(&format!("edge:{}", NAMES[side]));
    let own: Vec<Run> = work.plan.runs.iter().filter(|r| r.zone.starts_with(&zone) && r.along == Along::Y).cloned().collect();
    let size = work.slab.bottom_distribution.value.size;
    let d = f64::from(size);
    let Some(off) = own.iter().map(|r| in_corner(inner_radius(r), d) + r.size()).reduce(f64::max) else { return };
    let inward = if side == 0 { 1.0 } else { -1.0 };
    let y = face(work, side) + inward * off;
    let bottom = own.iter().map(|r| r.z - (depth_of(r) - r.size()) - r.size() / 2.0).fold(0.0, f64::max) + off;
    let top = own.iter().map(|r| r.z + r.size() / 2.0).fold(f64::INFINITY, f64::min) - off;
    // Bars across the slab that the end bends hold cross these near the corners: one lies on the other.
    let held: Vec<f64> = work.plan.runs.iter().filter(|r| r.role == Role::Edge && r.along == Along::Y && r.made.shape == "00").map(|r| r.z).collect();
    let middle = work.h() / 2.0;
    let over = |z: f64, other: f64| (z - other).abs() < d - crate::base::TOUCH;
    let bottom = held.iter().filter(|z| **z < middle && over(bottom, **z)).map(|z| z + d).fold(bottom, f64::max);
    let top = held.iter().filter(|z| **z >= middle && over(top, **z)).map(|z| z - d).fold(top, f64::min);
    // They end inside the uprights that close the slab ends.
    let uprights = [0, 1].map(|end| upright_size(work, super::fitting::face(work, end)));
    // A bend too shallow for two bars holds one.
    let levels = if top - bottom < d { vec![(bottom + top) / 2.0] } else { vec![bottom, top] };
    if levels.len() == 1 {
        work.reason(
            &format!("edge:{}", NAMES[side]),
            format!("the bends leave {} mm between two bars of size {size}: one is held", mm(top - bottom)),
            rule("D9"),
        );
    }
    for z in levels {
        let forms =
            [Form::Straight(End::Face(super::fitting::face(work, 0) + uprights[0])), Form::Straight(End::Face(super::fitting::face(work, 1) - uprights[1]))];
        let made = between(size, forms[0], forms[1], &work.basis.deduction);
        let spacing = work.slab.bottom_distribution.value.spacing;
        let run = Run { layer: Layer::E, role: Role::Edge, along: Along::X, made, lines: vec![y], z, spacing, zone: zone.clone(), lap: 0.0, turn: "" };
        cut::push_distribution(work, run, forms);
    }
}

/// The largest size of the bars along the span whose upright stands at a cover line, mm.
fn upright_size(work: &Work, face: f64) -> f64 {
    let stands = |r: &&Run| r.along == Along::X && r.made.axis.windows(2).any(|w| w[0].0 == w[1].0 && (w[0].0 - face).abs() < r.size() + 15.0);
    work.plan.runs.iter().filter(stands).map(Run::size).fold(0.0, f64::max)
}

fn depth_of(run: &Run) -> f64 {
    f64::from(run.made.dims.get(&'B').copied().unwrap_or(0))
}
