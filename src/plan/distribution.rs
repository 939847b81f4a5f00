//! B2 and T2: distribution in every clear span and over the top bars (D19), each bar resting on what it crosses (D6).

use super::{Along, Layer, Role, Run, Work, cut, lines};
use crate::base::{mm, up};
use crate::job::Bars;
use crate::rules::spacing;
use crate::steel::made::{End, Form, between};
use crate::trace::{Place, Step, rule};
use itertools::Itertools;

pub(super) fn plan(work: &mut Work) {
    bottom(work);
    top(work);
}

fn bottom(work: &mut Work) {
    let bars = work.slab.bottom_distribution.clone();
    let most = spacing::most(spacing::Zone::Distribution, work.h());
    for k in 0..work.stations.spans.len() {
        let span = work.stations.spans[k].clone();
        let lines = lines::centred(span.left_face, span.right_face, bars.value.spacing);
        let steps = count_steps(work, &bars.value, &bars.at, span.clear, lines.len());
        let zone = format!("span:{}/B2", k + 1);
        work.explain(&format!("{zone}/count"), steps);
        push(work, Layer::B2, &bars.value, &lines, &zone);
        let over = &work.stations.supports[k + 1];
        let (from, to) = (over.left_face, over.right_face);
        if k + 1 < work.stations.last() && to - from > most {
            let grid = work.slab.supports[k + 1].grid.clone();
            work.reason(
                &format!("support:{grid}/B2"),
                format!(
                    "the support is {} mm wide, over {} = {} mm: B2 goes on over it",
                    mm(to - from),
                    spacing::most_text(spacing::Zone::Distribution),
                    mm(most)
                ),
                rule("D19"),
            );
            // From the last bar of one span to the first of the next, no wider than called.
            let next = &work.stations.spans[k + 1];
            let beyond = lines::centred(next.left_face, next.right_face, bars.value.spacing);
            let (first, last) = (lines.last().copied().unwrap_or(from), beyond.first().copied().unwrap_or(to));
            let n = crate::base::gaps(last - first, bars.value.spacing);
            let over: Vec<f64> = (1..n).map(|i| first + (last - first) * i as f64 / n as f64).collect();
            push(work, Layer::B2, &bars.value, &over, &format!("support:{grid}/B2"));
        }
    }
}

fn count_steps(work: &Work, bars: &Bars, at: &Option<Place>, clear: f64, n: usize) -> Vec<Step> {
    vec![
        Step::new("bars of the design", "", bars.text(&work.basis.bar_letter)).at(at),
        Step::new("number in the clear span", format!("ceil({}/{})", mm(clear), mm(bars.spacing)), n.to_string()).cited(rule("D19")),
        Step::new(
            "first bar from the face",
            format!("({} - {} × {})/2", mm(clear), n.saturating_sub(1), mm(bars.spacing)),
            format!("{} mm", mm((clear - n.saturating_sub(1) as f64 * bars.spacing) / 2.0)),
        )
        .cited(rule("D19")),
    ]
}

/// T2 from 50 mm inside one end of the top bars to 50 mm inside the other.
fn top(work: &mut Work) {
    const INSIDE: f64 = 50.0;
    let bars = work.slab.top_distribution.clone();
    let tops = work.plan.runs.iter().filter(|r| matches!(r.role, Role::SupportTop | Role::EndTop) && r.zone.ends_with("/T1"));
    let zones: Vec<(String, f64, f64)> = tops
        .map(|r| (r.zone.clone(), r.made.extent()))
        .into_group_map()
        .into_iter()
        .map(|(zone, extents)| {
            let low = extents.iter().map(|e| e.0).fold(f64::INFINITY, f64::min);
            let high = extents.iter().map(|e| e.1).fold(f64::NEG_INFINITY, f64::max);
            (zone, low, high)
        })
        .sorted_by(|a, b| a.1.total_cmp(&b.1))
        .collect();
    let held: Vec<(f64, f64)> = work
        .plan
        .runs
        .iter()
        .filter(|r| r.role == Role::Edge && r.along == Along::Y && r.z > work.h() / 2.0)
        .flat_map(|r| r.lines.iter().map(|x| (*x, r.size())).collect::<Vec<_>>())
        .collect();
    let gap = spacing::least_gap(bars.value.size, work.basis.aggregate.value);
    for (zone, low, high) in zones {
        let mut lines = lines::fill(low + INSIDE, high - INSIDE, bars.value.spacing);
        let n = lines.len();
        // The bar that a bend holds stands near the end: the first of T2 keeps the least clear gap from it, in steps of 5 mm.
        for (x, size) in &held {
            let apart = (size + f64::from(bars.value.size)) / 2.0 + gap;
            if (lines[0] - x).abs() < apart {
                lines[0] = low + up(x + apart - low, 5.0);
            }
            if (lines[n - 1] - x).abs() < apart {
                lines[n - 1] = high - up(high - (x - apart), 5.0);
            }
        }
        // What moved may now stand close to the next one: that one shares the gap with the one after it.
        let close = gap + f64::from(bars.value.size);
        if n > 2 && lines[1] - lines[0] < close {
            lines[1] = (lines[0] + lines[2]) / 2.0;
        }
        if n > 2 && lines[n - 1] - lines[n - 2] < close {
            lines[n - 2] = (lines[n - 3] + lines[n - 1]) / 2.0;
        }
        let zone = zone.split_once('/').map_or(String::new(), |(_, rest)| rest.replace("/T1", "/T2"));
        let steps = vec![
            Step::new("bars of the design", "", bars.value.text(&work.basis.bar_letter)).at(&bars.at),
            Step::new("number over the top bars", format!("ceil(({} - 2 × 50)/{}) + 1", mm(high - low), mm(bars.value.spacing)), n.to_string())
                .cited(rule("D19")),
        ];
        work.explain(&format!("{zone}/count"), steps);
        push(work, Layer::T2, &bars.value, &lines, &zone);
    }
}

/// Straight bars across the slab on these lines, grouped by the level they rest at.
fn push(work: &mut Work, layer: Layer, bars: &Bars, lines: &[f64], zone: &str) {
    let half = f64::from(bars.size) / 2.0;
    let forms = [Form::Straight(End::Face(work.side())), Form::Straight(End::Face(work.slab.width.value - work.side()))];
    let made = between(bars.size, forms[0], forms[1], &work.basis.deduction);
    let level = |x: f64| if layer == Layer::B2 { work.bottom_seat(x) + half } else { work.top_seat(x) - half };
    let mut levels: Vec<(f64, Vec<f64>)> = Vec::new();
    for x in lines {
        let z = level(*x);
        match levels.last_mut() {
            Some((at, group)) if (*at - z).abs() < crate::base::TOUCH => group.push(*x),
            _ => levels.push((z, vec![*x])),
        }
    }
    let role = if layer == Layer::B2 { Role::DistributionBottom } else { Role::DistributionTop };
    let zone = work.address(zone);
    for (z, lines) in levels {
        let run = Run { layer, role, along: Along::Y, made: made.clone(), lines, z, spacing: bars.spacing, zone: zone.clone(), lap: 0.0, turn: "" };
        cut::push_distribution(work, run, forms);
    }
}
