//! Covers, clashes, clear gaps and the depth stack.

use super::Slate;
use super::pieces::Piece;
use crate::plan::Role;
use crate::rules::spacing::least_gap;

pub(super) fn checks(slate: &mut Slate) {
    covers(slate);
    clashes(slate);
    gaps(slate);
    stack(slate);
}

/// Least distance of any bar's surface from each face.
fn covers(slate: &mut Slate) {
    let width = slate.slab.width.value;
    let (start, end, h) = (slate.model.stations.start, slate.model.stations.end, slate.h());
    // A piece that runs towards a face ends there with its cut end; one that runs past it shows its side.
    let surface = |p: &Piece, axis: usize| if p.axis == axis { 0.0 } else { p.size / 2.0 };
    let low = |axis: usize, face: f64| slate.pieces.all().map(|p| p.low[axis] - surface(p, axis) - face).fold(f64::INFINITY, f64::min);
    let high = |axis: usize, face: f64| slate.pieces.all().map(|p| face - p.high[axis] - surface(p, axis)).fold(f64::INFINITY, f64::min);
    let (bottom, top) = (low(2, 0.0), high(2, h));
    let (left, right) = (low(0, start), high(0, end));
    let (near, far) = (low(1, 0.0), high(1, width));
    let cover = slate.slab.cover.clone();
    slate.at_least("cover-bottom", "bottom", bottom, cover.bottom.value, "mm");
    slate.at_least("cover-top", "top", top, cover.top.value, "mm");
    slate.at_least("cover-end", "left", left, cover.side.value, "mm");
    slate.at_least("cover-end", "right", right, cover.side.value, "mm");
    slate.at_least("cover-side", "near", near, cover.side.value, "mm");
    slate.at_least("cover-side", "far", far, cover.side.value, "mm");
}

/// The deepest overlap of two bars, mm; 0 where none meet.
fn clashes(slate: &mut Slate) {
    let mut worst = (0.0, String::from("bars"));
    let mut see = |a: &Piece, b: &Piece, depth: f64| {
        if depth > worst.0 {
            worst = (depth, format!("mark:{}+mark:{}", slate.model.bars[a.kind].mark, slate.model.bars[b.kind].mark));
        }
    };
    let [along, across, upright] = &slate.pieces.by_axis;
    for group in [along, across] {
        neighbours(group, 60.0, |a, b, apart| {
            let depth = (a.size + b.size) / 2.0 - apart;
            if a.bar != b.bar && a.overlap(b) > 1.0 && depth > 0.0 {
                see(a, b, depth);
            }
        });
    }
    let mut sorted: Vec<&Piece> = across.iter().collect();
    sorted.sort_by(|a, b| a.low[0].total_cmp(&b.low[0]));
    for a in along {
        let from = sorted.partition_point(|b| b.low[0] < a.low[0]);
        for b in sorted[from..].iter().take_while(|b| b.low[0] <= a.high[0]) {
            let depth = (a.size + b.size) / 2.0 - (a.low[2] - b.low[2]).abs();
            if depth > 0.0 && a.bar != b.bar && b.covers(1, a.low[1]) {
                see(a, b, depth);
            }
        }
    }
    for u in upright {
        for (group, run, other) in [(along, 0, 1), (across, 1, 0)] {
            for p in group.iter().filter(|p| p.bar != u.bar) {
                let depth = (u.size + p.size) / 2.0 - (p.low[other] - u.low[other]).abs();
                if depth > 0.0 && p.low[run] < u.low[run] && u.low[run] < p.high[run] && u.low[2] < p.low[2] && p.low[2] < u.high[2] {
                    see(u, p, depth);
                }
            }
        }
    }
    neighbours(upright, 60.0, |a, b, apart| {
        let depth = (a.size + b.size) / 2.0 - apart;
        if a.bar != b.bar && a.overlap(b) > 1.0 && depth > 0.0 {
            see(a, b, depth);
        }
    });
    let (depth, at) = worst;
    // Half a millimetre is within the rounding of levels.
    slate.at_most("clash", &at, depth, 0.5, "mm");
}

/// Calls `see` with every two parallel pieces whose centre lines stand within `reach`, and how far apart they are.
fn neighbours(group: &[Piece], reach: f64, mut see: impl FnMut(&Piece, &Piece, f64)) {
    let Some(axis) = group.first().map(|p| p.axis) else { return };
    let (first, second) = ([1, 0, 0][axis], [2, 2, 1][axis]);
    let mut sorted: Vec<&Piece> = group.iter().collect();
    sorted.sort_by(|a, b| a.low[first].total_cmp(&b.low[first]));
    for (i, a) in sorted.iter().enumerate() {
        for b in sorted[i + 1..].iter().take_while(|b| b.low[first] - a.low[first] < reach) {
            let apart = (b.low[first] - a.low[first]).hypot(b.low[second] - a.low[second]);
            if apart < reach {
                see(a, b, apart);
            }
        }
    }
}

/// Least clear gap between bars of one level that do not lap.
fn gaps(slate: &mut Slate) {
    let aggregate = slate.job.basis.aggregate.value;
    let mut worst: Option<(f64, f64, String)> = None;
    for group in &slate.pieces.by_axis[..2] {
        neighbours(group, 150.0, |a, b, _| {
            let (first, level) = ([1, 0][a.axis], 2);
            let same_level = (a.low[level] - b.low[level]).abs() < (a.size + b.size) / 2.0;
            let shorter = a.length().min(b.length());
            // Bars that lie side by side over their whole length do not lap; edge and closing bars lap the layer they lie in.
            let laps = a.layer != b.layer || a.role != b.role || a.overlap(b) < 0.6 * shorter;
            let is_held = a.role == Role::Edge && b.role == Role::Edge;
            if a.bar == b.bar || !same_level || laps || is_held || a.overlap(b) < 1.0 {
                return;
            }
            let clear = (a.low[first] - b.low[first]).abs() - (a.size + b.size) / 2.0;
            let limit = least_gap(a.size.max(b.size) as u32, aggregate);
            if worst.as_ref().is_none_or(|(c, l, _)| clear - limit < c - l) {
                worst = Some((clear, limit, format!("mark:{}", slate.model.bars[a.kind].mark)));
            }
        });
    }
    if let Some((clear, limit, at)) = worst {
        slate.at_least("gap-least", &at, clear, limit, "mm");
    }
}

/// Depth between the top of the bottom layers and the underside of the top layers.
fn stack(slate: &mut Slate) {
    let middle = slate.h() / 2.0;
    let level = || slate.pieces.all().filter(|p| p.axis != 2 && p.role != Role::Edge);
    let bottom = level().filter(|p| p.low[2] < middle).map(|p| p.low[2] + p.size / 2.0).fold(0.0, f64::max);
    let top = level().filter(|p| p.low[2] >= middle).map(|p| p.low[2] - p.size / 2.0).fold(slate.h(), f64::min);
    slate.at_least("depth-stack", "layers", top - bottom, 0.0, "mm");
}
