//! D18, second part: bars longer than may be scheduled, cut into pieces that lap.

use super::{Along, Layer, Role, Run, Work, lines};
use crate::base::{mm, up};
use crate::rules::anchorage::{self, Bar, Bond};
use crate::steel::made::{End, Form, between};
use crate::trace::{Step, Worked, rule};

/// Piece extents for bars turned one way and the other; the second is the first seen in a mirror.
#[derive(Clone, Debug)]
pub struct Pieces {
    pub one: Vec<(f64, f64)>,
    pub other: Vec<(f64, f64)>,
}

/// Main bars: equal long pieces and one short, turned in turn, so that lap centres stand at least 1.3 l0 apart.
/// None where a piece would be shorter than its laps.
pub fn staggered(from: f64, to: f64, longest: f64, lap: f64) -> Option<Pieces> {
    let length = to - from;
    for count in 2..=60u32 {
        let n = f64::from(count);
        let short = (length - 0.3 * (n - 1.0) * lap) / n;
        let long = up(short + 1.3 * lap, 25.0);
        if long > longest {
            continue;
        }
        // With two pieces the short one only has to hold its lap; with more, its two laps apart.
        if short < if count == 2 { 1.1 * lap } else { 2.3 * lap } {
            return None;
        }
        let short = up(short, 25.0);
        let step = (length - short) / (n - 1.0);
        let mut one: Vec<(f64, f64)> = (0..count - 1).map(|i| (from + f64::from(i) * step, from + f64::from(i) * step + long)).collect();
        one.push((to - short, to));
        let other = one.iter().rev().map(|(a, b)| (from + to - b, from + to - a)).collect();
        return Some(Pieces { one, other });
    }
    None
}

/// Distribution: equal pieces, all lapped at one section. Returns the extents, each piece a multiple of 25 mm long.
pub fn equal(from: f64, to: f64, longest: f64, lap: f64) -> Vec<(f64, f64)> {
    let length = to - from;
    let mut count = 1.0;
    while (length + (count - 1.0) * lap) / count > longest && count < 60.0 {
        count += 1.0;
    }
    if count < 1.5 {
        return vec![(from, to)];
    }
    let piece = up((length + (count - 1.0) * lap) / count, 25.0);
    let step = (length - piece) / (count - 1.0);
    (0..count as usize).map(|i| (from + i as f64 * step, from + i as f64 * step + piece)).collect()
}

/// Full lap of bars at a spacing in the top or the bottom of the slab (D4).
pub(super) fn lap(work: &Work, size: u32, spacing: f64, top: bool) -> Worked {
    let (bond, cover) = if top { (anchorage::top_bond(work.h()), work.slab.cover.top.value) } else { (Bond::Good, work.slab.cover.bottom.value) };
    let form = anchorage::Form::Straight;
    let cd = anchorage::cd(spacing - 2.0 * f64::from(size), work.side(), cover, form);
    let bar = Bar { size, fck: work.fck(), sigma: work.fyd(), bond, cd, form };
    anchorage::lap(&bar, work.basis.lap_share.value, work.basis.least_lap.value)
}

/// Adds a run, cut into lapped pieces turned in turn where its bar is longer than may be scheduled.
/// Every second piece stands aside by `sizes_aside` bar sizes; the outer ends keep their `forms`.
pub(super) fn push(work: &mut Work, run: Run, forms: [Form; 2], sizes_aside: f64) {
    let longest = work.basis.longest_bar.value;
    let closes_both = forms.iter().all(|f| matches!(f, Form::Closed { .. }));
    if f64::from(run.made.length) <= longest && !closes_both {
        stand(work, run);
        return;
    }
    let size = run.made.size;
    let top = matches!(run.role, Role::SupportTop | Role::EndTop);
    let lap = lap(work, size, run.spacing, top);
    let (from, to) = (forms[0].at(), forms[1].at());
    // What bends and legs back take of the longest bar, with room for the 5 and 25 mm steps.
    let bent = forms.iter().map(|f| match f {
        Form::Straight(_) => 0.0,
        Form::Turned { leg, .. } => *leg,
        Form::Closed { depth, back, .. } => depth + back,
    });
    let room = longest - bent.fold(0.0, f64::max) - 50.0;
    // What closes both ends is never one bar: where it is too short to stagger its laps, all lap at midspan, over what there is.
    let middle = || {
        let half = (lap.value / 2.0).min((to - from) / 2.0 - 20.0);
        let (one, centre) = ((to - from) / 2.0 + half, (from + to) / 2.0);
        let pieces = vec![(from, from + one), (centre - half, to)];
        closes_both.then(|| Pieces { one: pieces.clone(), other: pieces })
    };
    // Laps too long to stagger: equal pieces, all lapped at the same sections, so that the bars can still be ordered.
    let same = || {
        let pieces = equal(from, to, room, lap.value);
        let holds = pieces.len() > 1 && pieces[0].1 - pieces[0].0 > 1.1 * lap.value;
        holds.then(|| Pieces { one: pieces.clone(), other: pieces })
    };
    let Some(pieces) = staggered(from, to, room, lap.value).or_else(middle).or_else(same) else {
        let zone = run.zone.clone();
        work.plan.reasons.push(super::Reason { address: zone, text: "too short to be cut with laps: left whole".into(), cite: rule("D18") });
        work.plan.runs.push(run);
        return;
    };
    explain(work, &run, &lap, pieces.one.len());
    work.plan.laps.push((size, lap.value));
    let limit = work.slab.width.value - work.side() - run.size() / 2.0;
    for (parity, extents) in [(0, &pieces.one), (1, &pieces.other)] {
        let own: Vec<f64> = run.lines.iter().enumerate().filter(|(i, _)| i % 2 == parity).map(|(_, y)| *y).collect();
        if own.is_empty() {
            continue;
        }
        let last = extents.len() - 1;
        for (i, (low, high)) in extents.iter().enumerate() {
            let left = if i == 0 { forms[0] } else { Form::Straight(End::Lap(*low)) };
            let right = if i == last { forms[1] } else { Form::Straight(End::Lap(*high)) };
            let lines = if i % 2 == 1 { lines::beside(&own, sizes_aside * run.size(), limit) } else { own.clone() };
            let lap = if i == 0 { run.lap } else { extents[i - 1].1 - low };
            let made = between(size, left, right, &work.basis.deduction);
            stand(work, Run { made, lines, lap, turn: "alt", ..run.clone() });
        }
    }
}

/// Adds a run along the span; a line that would meet a bar of its layer that stands there already moves into contact beside it.
fn stand(work: &mut Work, mut run: Run) {
    let (from, to) = run.made.extent();
    let meets = |r: &&Run| {
        let (low, high) = r.made.extent();
        // The leg back of a closing bar lies in B1's level.
        let shares = r.layer == run.layer && r.role == run.role || run.layer == Layer::E && run.made.shape != "00" && r.layer == Layer::B1;
        r.along == Along::X && shares && low < to - 1.0 && high > from + 1.0
    };
    let standing = lines::Standing::new(work.plan.runs.iter().filter(meets).flat_map(|r| r.lines.iter().map(|y| (*y, r.size()))));
    let half = run.size() / 2.0;
    let (low, high) = (work.side() + half, work.slab.width.value - work.side() - half);
    let lines = run.lines.iter().map(|y| standing.clear(*y, run.size(), low, high)).collect();
    run.lines = lines;
    work.plan.runs.push(run);
}

/// Adds a run across the slab, cut into equal pieces lapped at one section where it is longer than may be scheduled.
pub(super) fn push_distribution(work: &mut Work, run: Run, forms: [Form; 2]) {
    let longest = work.basis.longest_bar.value;
    if f64::from(run.made.length) <= longest {
        work.plan.runs.push(run);
        return;
    }
    let size = run.made.size;
    let deduction = work.basis.deduction.straight / 2.0;
    let top = run.z > work.h() / 2.0;
    let lap = lap(work, size, run.spacing, top);
    let pieces = equal(forms[0].at() + deduction, forms[1].at() - deduction, longest, lap.value);
    explain(work, &run, &lap, pieces.len());
    work.plan.laps.push((size, lap.value));
    let middle = match run.along {
        Along::X => work.slab.width.value / 2.0,
        Along::Y => (work.stations.start + work.stations.end) / 2.0,
    };
    // Towards the middle of the slab: a bar that a bend holds must not be pushed into the bend.
    let aside: Vec<f64> = run.lines.iter().map(|at| if *at <= middle { at + run.size() } else { at - run.size() }).collect();
    for (i, (low, high)) in pieces.iter().enumerate() {
        let made = between(size, Form::Straight(End::Lap(*low)), Form::Straight(End::Lap(*high)), &work.basis.deduction);
        let lines = if i % 2 == 1 { aside.clone() } else { run.lines.clone() };
        let lap = if i == 0 { 0.0 } else { pieces[i - 1].1 - low };
        work.plan.runs.push(Run { made, lines, lap, ..run.clone() });
    }
}

fn explain(work: &mut Work, run: &Run, lap: &Worked, pieces: usize) {
    let mut steps = lap.steps.clone();
    steps.push(
        Step::new(
            "cut into lapped pieces",
            format!("{} mm is over the longest bar of {} mm, or closes both ends", run.made.length, mm(work.basis.longest_bar.value)),
            format!("{pieces} pieces, laps of at least {} mm", mm(lap.value)),
        )
        .cited(rule("D18"))
        .at(&work.basis.longest_bar.at),
    );
    work.plan.ledger.put(format!("{}/cut", run.zone), steps);
}
