//! B1: which bars run on, where the rest stop, and their laps at inner supports (D11, D13, D14, D16, D18).

use super::ends::{BottomEnd, Ends};
use super::pattern::{self, Turn};
use super::{Along, Layer, Role, Run, Work, cut, lines};
use crate::base::{down, mm, up};
use crate::job::Bars;
use crate::rules::anchorage::{self, Bar, Bond};
use crate::steel::made::{End, Form, between};
use crate::trace::{Step, ec2, rule};

/// Lines of B1 in a span; those of every second span stand in contact beside the lines of the first (D18).
fn span_lines(work: &Work, k: usize) -> Vec<f64> {
    let slab = work.slab;
    let bars = &slab.spans[k].bottom.value;
    let base = lines::across(slab.width.value, work.side(), bars.size, bars.spacing);
    if k.is_multiple_of(2) {
        return base;
    }
    let neighbours = [k.checked_sub(1), Some(k + 1)];
    let beside = neighbours.iter().flatten().filter_map(|n| slab.spans.get(*n)).map(|s| s.bottom.value.size).max().unwrap_or(0);
    let by = f64::from(bars.size + beside) / 2.0;
    lines::beside(&base, by, slab.width.value - work.side() - f64::from(bars.size) / 2.0)
}

/// What is known of a span before its bars are made.
struct SpanSet {
    bars: Bars,
    lines: Vec<f64>,
    turn: Turn,
    /// Parity of the lines that run on at the left, and at the right.
    phase: [usize; 2],
    stop: [f64; 2],
}

pub(super) fn plan(work: &mut Work, ends: &Ends) {
    let count = work.slab.spans.len();
    let mut sets: Vec<SpanSet> = Vec::new();
    for k in 0..count {
        let set = decide(work, k, ends, sets.last());
        sets.push(set);
    }
    for k in (1..count).step_by(2) {
        sets[k].lines = clear_of_neighbours(work, k, &sets);
    }
    let half_laps: Vec<f64> = (1..count).map(|j| half_lap(work, j, &sets)).collect();
    let mut right_ends: Option<f64> = None;
    for (k, set) in sets.iter().enumerate() {
        right_ends = place(work, k, set, ends, &half_laps, right_ends);
    }
}

/// Lines of a set's bars that run on at one end.
fn on_lines(set: &SpanSet, right_end: bool) -> Vec<f64> {
    let parts = pattern::parts(set.turn, &set.lines, set.phase[0]).into_iter();
    parts.filter(|p| if right_end { p.right_on } else { p.left_on }).flat_map(|p| p.lines).collect()
}

/// Where the spacings of neighbouring spans differ, their lines drift past one another: a bar that would meet one it laps with
/// moves into contact beside it.
fn clear_of_neighbours(work: &Work, k: usize, sets: &[SpanSet]) -> Vec<f64> {
    let size = f64::from(sets[k].bars.size);
    let of = |set: &SpanSet, right_end: bool| -> Vec<(f64, f64)> { on_lines(set, right_end).into_iter().map(|y| (y, f64::from(set.bars.size))).collect() };
    let mut others = of(&sets[k - 1], true);
    others.extend(sets.get(k + 1).map(|next| of(next, false)).unwrap_or_default());
    let (low, high) = (work.side() + size / 2.0, work.slab.width.value - work.side() - size / 2.0);
    let standing = lines::Standing::new(others);
    sets[k].lines.iter().map(|y| standing.clear(*y, size, low, high)).collect()
}

fn decide(work: &mut Work, k: usize, ends: &Ends, before: Option<&SpanSet>) -> SpanSet {
    let bars = work.slab.spans[k].bottom.value.clone();
    let stop = [stop(work, k, true), stop(work, k, false)];
    let address = format!("span:{}/B1", k + 1);
    let share = work.basis.curtailment.value.bottom.on_share;
    let mut full = pattern::all_run_on(work, &bars, work.bottom_depth(bars.size));
    if full.is_none() && share > 0.5 {
        full = Some(format!("the rule sheet runs on {} % of the bars, more than pairs can give", mm(share * 100.0)));
    }
    if full.is_none() && stop[1] - stop[0] < 300.0 {
        full = Some("the span is too short for bars that stop".into());
    }
    // The laps are not known yet; they are alike at both inner ends, so a trial half-lap tells whether a reversed pair is one mark.
    let trial = up(trial_lap(work, &bars) / 2.0, 25.0);
    let one = full.is_none() && reversed_forms(work, k, &stop, ends, &bars, [trial, trial]).is_some();
    let turn = pattern::choose(work, &address, full, one);
    let left_phase = match (turn, before) {
        (Turn::Reversed, Some(b)) => b.phase[1],
        // Nothing on the left to meet: leave the even lines for the right, where the long bars of a next span stand.
        (Turn::Reversed, None) => 1,
        _ => 0,
    };
    let right_phase = if turn == Turn::Reversed { 1 - left_phase } else { 0 };
    let lines = span_lines(work, k);
    let called = &work.slab.spans[k].bottom;
    let steps = vec![
        Step::new("bars of the design", "", called.value.text(&work.basis.bar_letter)).at(&called.at),
        Step::new(
            "number across the width",
            format!("ceil(({} - 2 × {} - {})/{}) + 1", mm(work.slab.width.value), mm(work.side()), bars.size, mm(bars.spacing)),
            lines.len().to_string(),
        )
        .cited(rule("D19"))
        .at(&work.slab.width.at),
    ];
    work.explain(&format!("{address}/count"), steps);
    SpanSet { bars, lines, turn, phase: [left_phase, right_phase], stop }
}

/// Where the bars that stop may stop: measured from the support line, then from the grid to 25 mm, so that the bar gets longer.
fn stop(work: &mut Work, k: usize, left: bool) -> f64 {
    let sheet = work.basis.curtailment.value.clone();
    let span = work.stations.spans[k].clone();
    let support = if left { k } else { k + 1 };
    let at_end = support == 0 || support == work.stations.last();
    let share = if at_end { sheet.bottom.stop_end } else { sheet.bottom.stop_interior };
    let grid = work.stations.supports[support].centre;
    let line = if left { span.left_line } else { span.right_line };
    let exact = (line - grid).abs() * if (line > grid) == left { 1.0 } else { -1.0 } + share * span.effective;
    let rounded = down(exact, 25.0);
    let mut steps = super::stations::effective_steps(work, k);
    steps.push(
        Step::new(
            format!("stop no further than {} leff from the support line", crate::base::num(share, 3)),
            format!(
                "{} × {} = {}; the line is {} from grid {}",
                crate::base::num(share, 3),
                mm(span.effective),
                mm(share * span.effective),
                mm((line - grid).abs()),
                work.slab.supports[support].grid
            ),
            format!("{} mm from the grid", mm(exact)),
        )
        .cited(rule("D11"))
        .at(&work.basis.curtailment.at),
    );
    steps.push(Step::new("from the grid, down to 25 mm", mm(exact), format!("{} mm", mm(rounded))).cited(rule("D16")));
    work.explain(&format!("span:{}/B1/stop-{}", k + 1, if left { "left" } else { "right" }), steps);
    if left { grid + rounded } else { grid - rounded }
}

fn lap_bar(work: &Work, size: u32, clear_gap: f64) -> Bar {
    let cover = work.slab.cover.bottom.value;
    let form = anchorage::Form::Straight;
    Bar { size, fck: work.fck(), sigma: work.fyd(), bond: Bond::Good, cd: anchorage::cd(clear_gap, work.side(), cover, form), form }
}

fn trial_lap(work: &Work, bars: &Bars) -> f64 {
    anchorage::lap(&lap_bar(work, bars.size, bars.spacing), work.basis.lap_share.value, work.basis.least_lap.value).value
}

/// Whether the bars of a span that run on will be longer than may be scheduled.
fn is_cut(work: &Work, k: usize) -> bool {
    work.stations.spans[k].effective + trial_lap(work, &work.slab.spans[k].bottom.value) > work.basis.longest_bar.value
}

/// Half of the lap at an inner support, up to 25 mm from the grid, with what it grows by where its bars stand apart (D18).
fn half_lap(work: &mut Work, j: usize, sets: &[SpanSet]) -> f64 {
    let (left, right) = (&sets[j - 1], &sets[j]);
    let small = left.bars.size.min(right.bars.size);
    let (a, b) = (on_lines(left, true), on_lines(right, false));
    let apart = lines::worst_gap(&a, f64::from(left.bars.size), &b, f64::from(right.bars.size));
    // Every second piece of a bar that is cut stands aside by two sizes.
    let aside = [j - 1, j].into_iter().filter(|k| is_cut(work, *k)).map(|k| 2.0 * f64::from(sets[k].bars.size)).fold(0.0, f64::max);
    let apart = apart + aside;
    let on_spacing = |set: &SpanSet| if set.turn == Turn::Full { set.bars.spacing } else { 2.0 * set.bars.spacing };
    let between = on_spacing(left).min(on_spacing(right)) - f64::from(left.bars.size + right.bars.size);
    let lap = anchorage::lap(&lap_bar(work, small, between), work.basis.lap_share.value, work.basis.least_lap.value);
    let excess = anchorage::lap_excess(apart, small);
    let length = lap.value + excess;
    let half = up(length / 2.0, 25.0);
    work.plan.laps.push((small, 2.0 * half));
    let grid = work.slab.supports[j].grid.clone();
    let mut steps = vec![Step::new("lap of the bars that run on, by the smaller size", "", format!("size {small}")).cited(rule("D4, D18"))];
    steps.extend(lap.steps);
    steps.push(
        Step::new(
            "worst clear gap between lapping bars as placed",
            format!("{} mm; over min(4φ, 50) it is added", mm(apart)),
            format!("{} mm added", mm(excess)),
        )
        .cited(ec2("8.7.2(3)")),
    );
    steps.push(Step::new("half each side of the grid, up to 25 mm", format!("{}/2", mm(length)), format!("{} mm", mm(half))).cited(rule("D16, D18")));
    work.explain(&format!("support:{grid}/B1/lap"), steps);
    half
}

/// Forms of the ends of a bar that runs on.
fn on_form(work: &Work, k: usize, left: bool, ends: &Ends, half_laps: [f64; 2]) -> Form {
    let (support, end) = if left { (k, &ends.0[0]) } else { (k + 1, &ends.0[1]) };
    let (at_end, face) = match (support == 0, support == work.stations.last()) {
        (true, _) => (true, work.stations.start + work.side()),
        (_, true) => (true, work.stations.end - work.side()),
        _ => (false, 0.0),
    };
    if !at_end {
        let centre = work.stations.supports[support].centre;
        return Form::Straight(End::Lap(if left { centre - half_laps[0] } else { centre + half_laps[1] }));
    }
    match end.bottom {
        BottomEnd::Up { leg } => Form::Turned { face, leg, turn: 1.0 },
        BottomEnd::Straight | BottomEnd::Closed => Form::Straight(End::Face(face)),
    }
}

/// Forms of both ends of a bar of one part; a bar that stops may stop `extra` mm later.
fn forms(work: &Work, k: usize, on: [bool; 2], stop: &[f64; 2], ends: &Ends, halves: [f64; 2], extra: f64) -> [Form; 2] {
    let left = if on[0] { on_form(work, k, true, ends, halves) } else { Form::Straight(End::Free(stop[0] - extra)) };
    let right = if on[1] { on_form(work, k, false, ends, halves) } else { Form::Straight(End::Free(stop[1] + extra)) };
    [left, right]
}

fn reversed_forms(work: &Work, k: usize, stop: &[f64; 2], ends: &Ends, bars: &Bars, halves: [f64; 2]) -> Option<[[Form; 2]; 2]> {
    let one = |extra: f64| forms(work, k, [true, false], stop, ends, halves, extra);
    let other = |extra: f64| forms(work, k, [false, true], stop, ends, halves, extra);
    pattern::one_mark(bars.size, &work.basis.deduction, &one, &other)
}

/// Makes and places the bars of one span; returns where those that run on at the right end, for the next span's laps.
fn place(work: &mut Work, k: usize, set: &SpanSet, ends: &Ends, half_laps: &[f64], before: Option<f64>) -> Option<f64> {
    let half = |j: usize| j.checked_sub(1).and_then(|i| half_laps.get(i)).copied().unwrap_or(0.0);
    let halves = [half(k), half(k + 1)];
    let pair = if set.turn == Turn::Reversed { reversed_forms(work, k, &set.stop, ends, &set.bars, halves) } else { None };
    let mut reached = None;
    for part in pattern::parts(set.turn, &set.lines, set.phase[0]) {
        let forms = match &pair {
            Some([one, _]) if part.left_on => *one,
            Some([_, other]) => *other,
            None => forms(work, k, [part.left_on, part.right_on], &set.stop, ends, halves, 0.0),
        };
        let made = between(set.bars.size, forms[0], forms[1], &work.basis.deduction);
        let (low, high) = made.extent();
        let lap = if part.left_on { before.map_or(0.0, |b| (b - low).max(0.0)) } else { 0.0 };
        if part.right_on {
            reached = Some(high);
        }
        let run = Run {
            layer: Layer::B1,
            role: Role::SpanBottom,
            along: Along::X,
            made,
            lines: part.lines,
            z: work.slab.cover.bottom.value + f64::from(set.bars.size) / 2.0,
            spacing: set.bars.spacing,
            zone: work.address(&format!("span:{}/B1", k + 1)),
            lap,
            turn: part.turn,
        };
        cut::push(work, run, forms, 2.0);
    }
    reached
}
