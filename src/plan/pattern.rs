//! D13 and D14: how the bars of one set take turns between running on and stopping.

use super::Work;
use crate::base::{area_per_metre, mm};
use crate::job::{Arrangement, Bars};
use crate::rules::{areas, spacing};
use crate::steel::made::{Form, between};
use crate::tables::Deduction;
use crate::trace::rule;

#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Turn {
    Full,
    Alternate,
    Reversed,
}

/// Bars of one set that are formed alike at both ends.
#[derive(Clone, Debug)]
pub struct Part {
    pub left_on: bool,
    pub right_on: bool,
    pub lines: Vec<f64>,
    /// Spacing of these bars among themselves, as a multiple of the called spacing.
    pub every: f64,
    pub turn: &'static str,
}

/// The parts of a set on `lines`. `phase` is the parity of the lines that run on at the left (reversed only).
pub fn parts(turn: Turn, lines: &[f64], phase: usize) -> Vec<Part> {
    let last = lines.len().saturating_sub(1);
    let pick = |wanted: &dyn Fn(usize) -> bool| lines.iter().enumerate().filter(|(i, _)| wanted(*i)).map(|(_, y)| *y).collect::<Vec<f64>>();
    let part = |left_on, right_on, lines, every, turn| Part { left_on, right_on, lines, every, turn };
    let parts = match turn {
        Turn::Full => vec![part(true, true, lines.to_vec(), 1.0, "")],
        Turn::Alternate => {
            vec![part(true, true, pick(&|i| i % 2 == 0 || i == last), 2.0, "alt"), part(false, false, pick(&|i| i % 2 == 1 && i != last), 2.0, "alt")]
        }
        Turn::Reversed => vec![part(true, false, pick(&|i| i % 2 == phase), 2.0, "alt rev"), part(false, true, pick(&|i| i % 2 != phase), 2.0, "alt rev")],
    };
    parts.into_iter().filter(|p| !p.lines.is_empty()).collect()
}

/// Whether all bars have to run on (D13), with the reason, or the bars may take turns.
pub(super) fn all_run_on(work: &Work, bars: &Bars, depth: f64) -> Option<String> {
    let twice = 2.0 * bars.spacing;
    let most = spacing::most(spacing::Zone::Main, work.h());
    let least = areas::least(work.fck(), work.fyk(), depth).value;
    let alone = area_per_metre(bars.size, twice);
    if work.slab.arrangement.value == Arrangement::Full {
        return Some("the job asks for full bars".into());
    }
    if twice > most + crate::base::TOUCH {
        return Some(format!("the bars that go on alone would stand at {} mm, over {} = {} mm", mm(twice), spacing::most_text(spacing::Zone::Main), mm(most)));
    }
    if alone < least {
        return Some(format!("the bars that go on alone would give {} mm²/m, under As,min = {} mm²/m", mm(alone), mm(least)));
    }
    None
}

/// The forms of a reversed pair that is one mark: where both come out equal, or the shorter may grow by up to 75 mm (D14).
/// `one` and `other` give the forms for an extra length at the stopping end.
pub(super) fn one_mark(size: u32, deduction: &Deduction, one: &dyn Fn(f64) -> [Form; 2], other: &dyn Fn(f64) -> [Form; 2]) -> Option<[[Form; 2]; 2]> {
    const MOST_GROWTH: f64 = 75.0;
    let made = |forms: [Form; 2]| between(size, forms[0], forms[1], deduction);
    let same = |a: &[Form; 2], b: &[Form; 2]| {
        let (a, b) = (made(*a), made(*b));
        a.shape == b.shape && a.length == b.length && a.dims == b.dims
    };
    let pair = [one(0.0), other(0.0)];
    if same(&pair[0], &pair[1]) {
        return Some(pair);
    }
    let difference = f64::from(made(pair[0]).length - made(pair[1]).length);
    if difference.abs() > MOST_GROWTH {
        return None;
    }
    let pair = if difference > 0.0 { [pair[0], other(difference)] } else { [one(-difference), pair[1]] };
    same(&pair[0], &pair[1]).then_some(pair)
}

/// Chooses the turn and keeps the reason (D13, D14). `reversed_is_one` tells whether a reversed pair is one mark.
pub(super) fn choose(work: &mut Work, address: &str, full: Option<String>, reversed_is_one: bool) -> Turn {
    let (turn, text, cite) = match (full, work.slab.arrangement.value) {
        (Some(why), _) => (Turn::Full, format!("all bars run on: {why}"), rule("D13")),
        (None, Arrangement::Alternate) => (Turn::Alternate, "alternate, as the job asks".into(), rule("D14")),
        (None, Arrangement::Reversed) => (Turn::Reversed, "reversed, as the job asks".into(), rule("D14")),
        (None, _) if reversed_is_one => (Turn::Reversed, "reversed: both ways round are one mark".into(), rule("D14")),
        (None, _) => (Turn::Alternate, "alternate: the two ways round differ by more than 75 mm".into(), rule("D14")),
    };
    work.reason(address, text, cite);
    turn
}

/// The bottom bars of a span that run on, at the spacing at which they do so.
pub(super) fn running_on(work: &Work, k: usize) -> Bars {
    let bars = &work.slab.spans[k].bottom.value;
    let share = work.basis.curtailment.value.bottom.on_share;
    let all = share > 0.5 || all_run_on(work, bars, work.bottom_depth(bars.size)).is_some();
    Bars { size: bars.size, spacing: if all { bars.spacing } else { 2.0 * bars.spacing } }
}
