//! T1: reaches over supports (D11), sets that run together in short spans (D14a), turns (D13, D14).

use super::ends::{self, BottomEnd, EndPlan, Ends, TopEnd};
use super::pattern::{self, Turn};
use super::{Along, Layer, Role, Run, TopSet, Work, cut, lines};
use crate::base::{mm, up};
use crate::job::Bars;
use crate::steel::made::{End, Form, between};
use crate::tables::curtailment::From;
use crate::trace::{Step, rule};

/// The bars at every support: the design's, or the planner's at an end support where none are given (D10a).
pub(super) fn decide(work: &mut Work) -> Vec<TopSet> {
    (0..=work.stations.last())
        .map(|j| {
            let bars = match &work.slab.supports[j].top {
                Some(top) => top.value.clone(),
                None => super::ends::chosen(work, j),
            };
            TopSet { first: j, last: j, bars }
        })
        .collect()
}

/// How far T1 at support `j` reaches on one side: near, far; mm from the centre of support 0.
fn reaches(work: &mut Work, j: usize, left: bool, bars: &Bars) -> [f64; 2] {
    let sheet = work.basis.curtailment.value.clone();
    let station = work.stations.supports[j].clone();
    let at_end = j == 0 || j == work.stations.last();
    let span_index = if left { j - 1 } else { j };
    let span = work.stations.spans[span_index].clone();
    let (line, face) = if left { (span.right_line, station.left_face) } else { (span.left_line, station.right_face) };
    let grid = station.centre;
    let sign = if left { -1.0 } else { 1.0 };
    let (line_from_grid, face_from_grid) = (sign * (line - grid), sign * (face - grid));
    let leff = if at_end { span.effective } else { work.stations.top_span(j) };
    let size = f64::from(bars.size);
    let mut steps = super::stations::effective_steps(work, span_index);
    let (near, far) = if at_end {
        let from = if sheet.end_top.from == From::Face { face_from_grid } else { line_from_grid };
        let exact = (from + sheet.end_top.reach * leff).max(face_from_grid + sheet.end_top.least_face_sizes * size);
        steps.push(
            Step::new(
                format!(
                    "reach at an end: {} leff from the {}",
                    crate::base::num(sheet.end_top.reach, 3),
                    if sheet.end_top.from == From::Face { "face" } else { "support line" }
                ),
                format!(
                    "{} + {} × {}, at least {} sizes from the face",
                    mm(from),
                    crate::base::num(sheet.end_top.reach, 3),
                    mm(leff),
                    mm(sheet.end_top.least_face_sizes)
                ),
                format!("{} mm from the grid", mm(exact)),
            )
            .cited(rule("D8, D11")),
        );
        (exact, exact)
    } else {
        let near = (line_from_grid + sheet.top.near * leff).max(face_from_grid + sheet.top.near_face_sizes * size);
        let far = (line_from_grid + sheet.top.far * leff).max(near);
        steps.push(Step::new("the greater of the two adjacent effective spans", "", format!("{} mm", mm(leff))).cited(rule("D3")));
        steps.push(
            Step::new(
                format!(
                    "near reach: the further of {} leff from the line and {} sizes from the face",
                    crate::base::num(sheet.top.near, 3),
                    mm(sheet.top.near_face_sizes)
                ),
                format!(
                    "max({} + {} × {}, {} + {} × {})",
                    mm(line_from_grid),
                    crate::base::num(sheet.top.near, 3),
                    mm(leff),
                    mm(face_from_grid),
                    mm(sheet.top.near_face_sizes),
                    bars.size
                ),
                format!("{} mm from the grid", mm(near)),
            )
            .cited(rule("D11")),
        );
        steps.push(
            Step::new(
                format!("far reach: {} leff from the line", crate::base::num(sheet.top.far, 3)),
                format!("{} + {} × {}", mm(line_from_grid), crate::base::num(sheet.top.far, 3), mm(leff)),
                format!("{} mm from the grid", mm(far)),
            )
            .cited(rule("D11")),
        );
        (near, far)
    };
    let (near, far) = (up(near, 25.0), up(far, 25.0));
    steps.push(Step::new("from the grid, up to 25 mm", "near, far", format!("{} and {} mm", mm(near), mm(far))).cited(rule("D16")));
    let name = work.slab.supports[j].grid.clone();
    work.explain(&format!("support:{name}/T1/reach-{}", if left { "left" } else { "right" }), steps);
    [grid + sign * near, grid + sign * far]
}

/// Joins sets that would meet or come within a lap of each other: the larger size, the closer spacing (D14a).
fn joined(work: &mut Work, tops: Vec<TopSet>) -> Vec<TopSet> {
    let mut sets: Vec<TopSet> = Vec::new();
    for next in tops {
        let Some(before) = sets.last().cloned() else {
            sets.push(next);
            continue;
        };
        let right = reaches(work, before.last, false, &before.bars)[1];
        let left = reaches(work, next.first, true, &next.bars)[1];
        let lap = cut::lap(work, before.bars.size.max(next.bars.size), before.bars.spacing.min(next.bars.spacing), true).value;
        if left - right >= lap {
            sets.push(next);
            continue;
        }
        let bars = Bars { size: before.bars.size.max(next.bars.size), spacing: before.bars.spacing.min(next.bars.spacing) };
        let names = (work.slab.supports[before.last].grid.clone(), work.slab.supports[next.first].grid.clone());
        let text = format!(
            "T1 of supports {} and {} come within {} mm of each other, under a lap of {} mm: they run through as {}",
            names.0,
            names.1,
            mm((left - right).max(0.0)),
            mm(lap),
            bars.text(&work.basis.bar_letter)
        );
        work.reason(&format!("support:{}/T1", names.1), text, rule("D14a"));
        sets.pop();
        sets.push(TopSet { first: before.first, last: next.last, bars });
    }
    sets
}

/// The sets as they are laid: ends in the bars that bend into the depth, sets joined; the ends then carry their set's bars.
pub(super) fn join(work: &mut Work, tops: Vec<TopSet>, ends: &mut Ends) -> Vec<TopSet> {
    // Joined by the bars of the design; a set of one support at an end takes those that bend there.
    let mut sets = tops;
    loop {
        let before = sets.len();
        sets = joined(work, sets);
        if sets.len() == before {
            break;
        }
    }
    for set in &mut sets {
        if let Some(end) = ends.0.iter().find(|e| set.first == set.last && e.support == set.first) {
            set.bars = end.bars.clone();
        }
    }
    for end in &mut ends.0 {
        let own = sets.iter().find(|set| set.first <= end.support && end.support <= set.last);
        end.bars = own.map_or(end.bars.clone(), |set| set.bars.clone());
        // A set that took a larger size may no longer close an end that B1 needs closed.
        let closes = super::fitting::closing(work, end.bars.size).is_some();
        if end.bottom == BottomEnd::Closed && matches!(end.top, TopEnd::Closed { .. }) && !closes {
            let grid = work.slab.supports[end.support].grid.clone();
            let on = pattern::running_on(work, if end.support == 0 { 0 } else { end.support - 1 });
            end.top = TopEnd::Straight;
            end.own = ends::own_closing(work, &grid, &on);
        }
    }
    sets
}

pub(super) fn plan(work: &mut Work, sets: &[TopSet], ends: &Ends) {
    for set in sets {
        plan_set(work, set, ends);
    }
}

fn plan_set(work: &mut Work, set: &TopSet, ends: &Ends) {
    let last = work.stations.last();
    let names: Vec<String> = (set.first..=set.last).map(|j| work.slab.supports[j].grid.clone()).collect();
    let zone = format!("support:{}/T1", names.join("-"));
    let left = (set.first > 0).then(|| reaches(work, set.first, true, &set.bars));
    let right = (set.last < last).then(|| reaches(work, set.last, false, &set.bars));
    let end_form = |side: usize| ends.top_form(work, side, set.bars.size);
    let (left_end, right_end) = (left.is_none().then(|| end_form(0)), right.is_none().then(|| end_form(1)));
    let forms = |on: [bool; 2], extra: f64| -> [Form; 2] {
        let reach = |reach: Option<[f64; 2]>, on: bool, end: Option<Form>, sign: f64| match (reach, end) {
            (Some([near, far]), _) => Form::Straight(End::Free(if on { far } else { near + sign * extra })),
            (None, Some(form)) => form,
            (None, None) => Form::Straight(End::Free(0.0)),
        };
        [reach(left, on[0], left_end, -1.0), reach(right, on[1], right_end, 1.0)]
    };
    let inner = set.first > 0 && set.last < last;
    let is_single_end = set.first == set.last && !inner;
    let full = pattern::all_run_on(work, &set.bars, work.top_depth(set.bars.size));
    let size = set.bars.size;
    let one = |extra: f64| forms([true, false], extra);
    let other = |extra: f64| forms([false, true], extra);
    let pair = if inner { pattern::one_mark(size, &work.basis.deduction, &one, &other) } else { None };
    let turn = match () {
        () if is_single_end => Turn::Full,
        // With one end of the set at a slab end only the other end can stop short: turned bars would not balance.
        () if !inner && full.is_none() => Turn::Alternate,
        () => pattern::choose(work, &zone, full, pair.is_some()),
    };
    let lines = set_lines(work, set, ends);
    explain_count(work, set, &zone, lines.len());
    let role = if is_single_end { Role::EndTop } else { Role::SupportTop };
    let z = work.h() - work.slab.cover.top.value - f64::from(size) / 2.0;
    for part in pattern::parts(turn, &lines, 0) {
        let own = match &pair {
            Some([one, _]) if turn == Turn::Reversed && part.left_on => *one,
            Some([_, other]) if turn == Turn::Reversed => *other,
            _ => forms([part.left_on, part.right_on], 0.0),
        };
        // A closing bar stands on the bottom cover: its leg back lies in B1's level, its main leg the depth above.
        let closed = own.iter().find_map(|f| match f {
            Form::Closed { depth, .. } => Some(work.slab.cover.bottom.value + depth - f64::from(size) / 2.0),
            _ => None,
        });
        let made = between(size, own[0], own[1], &work.basis.deduction);
        let run = Run {
            layer: if closed.is_some() { Layer::E } else { Layer::T1 },
            role,
            along: Along::X,
            made,
            lines: part.lines,
            z: closed.unwrap_or(z),
            spacing: set.bars.spacing,
            zone: work.address(&zone),
            lap: ends.lap_of(set),
            turn: part.turn,
        };
        cut::push(work, run, own, 1.0);
    }
}

/// Lines of a set across the width; a set that ends at a slab end keeps off the bottom bars there.
fn set_lines(work: &Work, set: &TopSet, ends: &Ends) -> Vec<f64> {
    let at_end = ends.0.iter().enumerate().find(|(_, e)| e.support == set.first || e.support == set.last);
    match at_end {
        // Closing bars of their own come later and keep clear of these.
        Some((side, end)) => super::closing::closing_lines(work, &EndPlan { own: None, ..end.clone() }, side, &set.bars),
        None => lines::across(work.slab.width.value, work.side(), set.bars.size, set.bars.spacing),
    }
}

fn explain_count(work: &mut Work, set: &TopSet, zone: &str, n: usize) {
    let support = &work.slab.supports[set.first];
    let (grid, at) = (support.grid.clone(), support.top.as_ref().and_then(|t| t.at.clone()));
    let steps = vec![
        Step::new(format!("bars at support {grid}"), "", set.bars.text(&work.basis.bar_letter)).at(&at),
        Step::new(
            "number across the width",
            format!("ceil(({} - 2 × {} - {})/{}) + 1", mm(work.slab.width.value), mm(work.side()), set.bars.size, mm(set.bars.spacing)),
            n.to_string(),
        )
        .cited(rule("D19"))
        .at(&work.slab.width.at),
    ];
    work.explain(&format!("{zone}/count"), steps);
}
