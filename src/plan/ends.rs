//! D7 and D8: how bottom and top bars end at the slab ends, what closes them, and what their bends hold.

use super::choose;
use super::fitting::{closing, face};
use super::{TopSet, Work};
use crate::base::{mm, num, up};
use crate::job::{Bars, EndBar, Kind};
use crate::rules::anchorage::{self, Bar, Bond, Form as BarForm};
use crate::rules::{areas, spacing};
use crate::steel::made::{End, Form, between};
use crate::tables::tables;
use crate::trace::{Step, rule};

#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum BottomEnd {
    Straight,
    /// Bent up, leg in mm.
    Up {
        leg: f64,
    },
    /// Straight, lapped by a closing bar.
    Closed,
}

#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum TopEnd {
    Straight,
    /// Bent down, leg in mm.
    Turned {
        leg: f64,
    },
    Closed {
        shape: &'static str,
        depth: f64,
    },
}

/// One slab end.
#[derive(Clone, Debug)]
pub(crate) struct EndPlan {
    pub support: usize,
    /// T1 at this end, perhaps in a smaller size than the design's where that one does not bend into the depth.
    pub bars: Bars,
    pub bottom: BottomEnd,
    pub top: TopEnd,
    /// Leg back of a closing bar from its outer face, mm.
    pub back: f64,
    /// Lap of the closing bar with B1, mm; 0 where it is not needed.
    pub lap: f64,
    /// Closing bars of their own, where the top bars do not close the end but B1 needs it.
    pub own: Option<Bars>,
    /// How far behind the cover line straight bottom bars start, mm.
    pub start: f64,
}

/// Left, right.
pub(crate) struct Ends(pub [EndPlan; 2]);

impl Ends {
    /// The form of the top bars of a set at a slab end, for the size the set has in the end.
    pub fn top_form(&self, work: &Work, side: usize, size: u32) -> Form {
        let end = &self.0[side];
        let face = face(work, side);
        match end.top {
            TopEnd::Straight => Form::Straight(End::Face(face)),
            TopEnd::Turned { leg } => {
                // A set that was joined may have a larger size, whose leg may not fit.
                let leg = leg.max(tables().known_bar(size).projection);
                let fits = leg <= work.upright(work.between_covers());
                if fits { Form::Turned { face, leg, turn: -1.0 } } else { Form::Straight(End::Face(face)) }
            }
            TopEnd::Closed { .. } => match closing(work, size) {
                Some((shape, depth)) => Form::Closed { face, shape, depth, back: end.back, turn: -1.0 },
                None => Form::Straight(End::Face(face)),
            },
        }
    }

    pub fn lap_of(&self, set: &TopSet) -> f64 {
        self.0.iter().filter(|e| e.own.is_none() && (e.support == set.first || e.support == set.last)).map(|e| e.lap).fold(0.0, f64::max)
    }
}

/// Steel of the span next to an end, mm²/m: the design area where given, else what is provided.
fn span_area(work: &Work, k: usize) -> (f64, Step) {
    let span = &work.slab.spans[k];
    match &span.required {
        Some(required) => (required.value, Step::new("design area of the span", "as required", format!("{} mm²/m", mm(required.value))).at(&required.at)),
        None => {
            let area = span.bottom.value.area();
            (area, Step::new("area of the span's B1", span.bottom.value.text(&work.basis.bar_letter), format!("{} mm²/m", mm(area))).at(&span.bottom.at))
        }
    }
}

/// Area that T1 has to give at an end, mm²/m, for a bar size (D8).
pub(super) fn top_need(work: &Work, support: usize, size: u32) -> (f64, Vec<Step>) {
    let k = if support == 0 { 0 } else { support - 1 };
    let sheet = &work.basis.curtailment.value.end_top;
    let (area, step) = span_area(work, k);
    let least = areas::least(work.fck(), work.fyk(), work.top_depth(size));
    let own = work.slab.supports[support].required.as_ref().map_or(0.0, |r| r.value);
    let value = (sheet.share * area).max(if sheet.least_area { least.value } else { 0.0 }).max(own);
    let mut steps = vec![step];
    steps.extend(least.steps);
    steps.push(Step::new("area at the end", format!("max({} × {}, As,min)", num(sheet.share, 2), mm(area)), format!("{} mm²/m", mm(value))).cited(rule("D8")));
    (value, steps)
}

/// T1 at an end support where the job gives none (D10a).
pub(super) fn chosen(work: &mut Work, support: usize) -> Bars {
    let room = work.upright(work.between_covers());
    let most = spacing::most(spacing::Zone::Main, work.h());
    let fits = |size: u32| closing(work, size).is_some() || tables().known_bar(size).projection <= room;
    let bars = choose::bars(|size| top_need(work, support, size).0, most, work.basis.aggregate.value, fits);
    let bars = bars.unwrap_or(Bars { size: 10, spacing: 100.0 });
    let (need, mut steps) = top_need(work, support, bars.size);
    steps.push(
        Step::new(
            "lightest bars from size 10 up, widest spacing in 25 mm steps",
            format!("at least {} mm²/m, at most {} mm apart", mm(need), mm(most)),
            format!("{} = {} mm²/m", bars.text(&work.basis.bar_letter), mm(bars.area())),
        )
        .cited(rule("D10a")),
    );
    let grid = work.slab.supports[support].grid.clone();
    work.explain(&format!("support:{grid}/T1/chosen"), steps);
    work.reason(&format!("support:{grid}/T1"), format!("no bars given: {} chosen", bars.text(&work.basis.bar_letter)), rule("D10a"));
    bars
}

pub(super) fn decide(work: &mut Work, tops: &[TopSet]) -> Ends {
    let last = work.stations.last();
    Ends([decide_end(work, 0, 0, tops), decide_end(work, 1, last, tops)])
}

fn decide_end(work: &mut Work, side: usize, support: usize, tops: &[TopSet]) -> EndPlan {
    let k = if side == 0 { 0 } else { support - 1 };
    let grid = work.slab.supports[support].grid.clone();
    let on = super::pattern::running_on(work, k);
    let (bottom, start, steps) = decide_bottom(work, side, support, k, &on);
    work.explain(&format!("support:{grid}/B1/end"), steps);
    let mut bars = tops[support].bars.clone();
    let top = decide_top(work, support, &mut bars, bottom == BottomEnd::Closed);
    let closes = matches!(top, TopEnd::Closed { .. });
    let own = if bottom == BottomEnd::Closed && !closes { own_closing(work, &grid, &on) } else { None };
    EndPlan { support, bars, bottom, top, back: 2.0 * work.h(), lap: 0.0, own, start }
}

/// The end of the bottom bars that run on (D7); also how far behind the cover line a straight bar starts.
fn decide_bottom(work: &mut Work, side: usize, support: usize, k: usize, on: &Bars) -> (BottomEnd, f64, Vec<Step>) {
    let slab = work.slab;
    let bar = tables().known_bar(on.size);
    let d = f64::from(on.size);
    let seat = &slab.supports[support].bearing;
    let face = face(work, side);
    let start = if slab.spans.len() == 1 {
        let other = super::fitting::face(work, 1 - side);
        let (low, high) = (face.min(other), face.max(other));
        let whole = between(on.size, Form::Straight(End::Face(low)), Form::Straight(End::Face(high)), &work.basis.deduction);
        whole.extent().0 - low
    } else {
        0.0
    };
    let shear = match (&slab.supports[support].shear, &slab.spans[k].shear) {
        (Some(v), _) | (None, Some(v)) => {
            crate::trace::Worked { value: v.value, steps: vec![Step::new("end shear VEd", "as given", format!("{} kN/m", num(v.value, 2))).at(&v.at)] }
        }
        _ => areas::end_shear(slab.permanent.value, slab.variable.value, work.stations.spans[k].effective),
    };
    let tie = areas::end_tie_force(shear.value);
    let area = on.area();
    let sigma = (tie.value * 1000.0 / area).min(work.fyd());
    let mut steps = shear.steps;
    steps.extend(tie.steps);
    steps.push(
        Step::new("stress in the bars that run on", format!("FE / As = {} × 1000 / {}", num(tie.value, 2), mm(area)), format!("{} N/mm²", num(sigma, 1)))
            .cited(rule("D7")),
    );
    let gap = on.spacing - d;
    let length = |form: BarForm| {
        let cd = anchorage::cd(gap, work.side(), slab.cover.bottom.value, form);
        anchorage::anchorage(&Bar { size: on.size, fck: work.fck(), sigma, bond: Bond::Good, cd, form })
    };
    let straight = length(BarForm::Straight);
    let available = seat.value - work.side() - start;
    let needed = straight.value;
    steps.extend(straight.steps);
    steps.push(
        Step::new(
            "straight past the face",
            format!("bearing {} - side cover {} - {}", mm(seat.value), mm(work.side()), mm(start)),
            format!("{} of {} mm needed", mm(available), mm(needed)),
        )
        .cited(rule("D7"))
        .at(&seat.at),
    );
    if available + crate::base::TOUCH >= needed {
        return (BottomEnd::Straight, start, steps);
    }
    let grid = slab.supports[support].grid.clone();
    let bent = length(BarForm::Bent);
    let room = work.upright(work.between_covers());
    // A bar bent at both ends of a single span stands back by half of its deduction.
    let room_along = (face - super::fitting::face(work, 1 - side)).abs();
    let back = if slab.spans.len() == 1 { (room_along - crate::base::down(room_along - work.basis.deduction.for_bent(room_along), 5.0)) / 2.0 } else { 0.0 };
    let level = seat.value - work.side() - back;
    let corner = 2.0 * (bar.radius + d) - std::f64::consts::FRAC_PI_2 * (bar.radius + d / 2.0);
    let leg = up(bar.projection.max(bent.value - level + corner), 5.0);
    steps.push(
        Step::new(
            "bent up (shape 11): leg",
            format!("max(P = {}, lbd {} - {} + {} for the bend), room {}", mm(bar.projection), mm(bent.value), mm(level), mm(corner), mm(room)),
            format!("{} mm", mm(leg)),
        )
        .cited(rule("D7, D20")),
    );
    let short = format!("straight bars reach {} mm past the face, {} are needed", mm(available), mm(needed));
    if leg <= room {
        work.reason(&format!("support:{grid}/B1"), format!("{short}: bent up, leg {}", mm(leg)), rule("D7"));
        return (BottomEnd::Up { leg }, start, steps);
    }
    let closes = std::iter::once(on.size).chain(choose::smaller(on.size)).any(|size| closing(work, size).is_some());
    if closes {
        work.reason(
            &format!("support:{grid}/B1"),
            format!("{short}, a leg up of {} does not fit in {}: lapped by closing bars", mm(leg), mm(room)),
            rule("D7"),
        );
        return (BottomEnd::Closed, start, steps);
    }
    work.reason(&format!("support:{grid}/B1"), format!("{short} and no bend fits the depth: left straight"), rule("D7"));
    (BottomEnd::Straight, start, steps)
}

/// The end of the top bars (D8, D20); may change `bars` to a smaller size of equal area.
fn decide_top(work: &mut Work, support: usize, bars: &mut Bars, bottom_needs_closing: bool) -> TopEnd {
    let grid = work.slab.supports[support].grid.clone();
    let address = format!("support:{grid}/T1");
    let room = work.upright(work.between_covers());
    let wish = work.slab.supports[support].end_bar.clone();
    let kind = work.slab.supports[support].kind;
    let leg = up(tables().known_bar(bars.size).projection, 5.0);
    let wanted = match (wish.value, kind) {
        (EndBar::Auto, _) if bottom_needs_closing => EndBar::UBar,
        (EndBar::Auto, Kind::Masonry) if leg <= room => EndBar::LBar,
        (EndBar::Auto, _) => EndBar::UBar,
        (wish, _) => wish,
    };
    let steps = vec![
        Step::new("depth between the covers, less the deduction", format!("{} for bent bars", mm(work.between_covers())), format!("{} mm", mm(room)))
            .cited(rule("D17"))
            .at(&wish.at),
    ];
    work.explain(&format!("{address}/end"), steps);
    match wanted {
        EndBar::Straight => return TopEnd::Straight,
        EndBar::LBar if leg <= room => return TopEnd::Turned { leg },
        EndBar::LBar => work.reason(&address, format!("a leg of {} mm does not fit in {}: closing bars instead", mm(leg), mm(room)), rule("D20")),
        _ => {}
    }
    for size in std::iter::once(bars.size).chain(choose::smaller(bars.size)) {
        if let Some((shape, depth)) = closing(work, size) {
            if size != bars.size {
                let other = choose::equal_area(bars, size);
                let letter = work.basis.bar_letter.clone();
                work.reason(
                    &address,
                    format!("{} does not bend into {} mm: {} instead, of equal area", bars.text(&letter), mm(room), other.text(&letter)),
                    rule("D7, D20"),
                );
                *bars = other;
            }
            return TopEnd::Closed { shape, depth };
        }
    }
    work.reason(&address, format!("no bend fits {} mm: left straight", mm(room)), rule("D20"));
    TopEnd::Straight
}

/// Closing bars of their own, of the area that runs on.
pub(super) fn own_closing(work: &mut Work, grid: &str, on: &Bars) -> Option<Bars> {
    let size = std::iter::once(on.size).chain(choose::smaller(on.size)).find(|s| closing(work, *s).is_some())?;
    let bars = if size == on.size { on.clone() } else { choose::equal_area(on, size) };
    work.reason(&format!("support:{grid}/B1"), format!("closing bars {} lap B1", bars.text(&work.basis.bar_letter)), rule("D7"));
    Some(bars)
}
