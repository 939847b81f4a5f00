//! What bars, from where to where, and why: rules D1 to D20. Yields runs of alike bars; knows no mark, no sheet, no file.
//! Order of work: stations, bottom bars with their ends, top bars, corners, distribution, edges. Each later step sees the earlier runs.

pub mod bottom;
pub mod choose;
pub mod closing;
pub mod corners;
pub mod cut;
pub mod distribution;
pub mod edges;
pub mod ends;
pub mod fitting;
pub mod lines;
pub mod pattern;
pub mod stations;
pub mod top;

use crate::job::{Bars, Basis, Job, Slab};
use crate::steel::made::Made;
use crate::trace::{Cite, Ledger, Step};
use stations::Stations;

#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Layer {
    B1,
    B2,
    T1,
    T2,
    /// Bars of both faces: U-bars, hairpins and what they hold.
    E,
}

impl Layer {
    pub fn name(self) -> &'static str {
        match self {
            Layer::B1 => "B1",
            Layer::B2 => "B2",
            Layer::T1 => "T1",
            Layer::T2 => "T2",
            Layer::E => "E",
        }
    }
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Role {
    SpanBottom,
    SupportTop,
    EndTop,
    DistributionBottom,
    DistributionTop,
    Edge,
    Corner,
}

impl Role {
    pub fn name(self) -> &'static str {
        match self {
            Role::SpanBottom => "span-bottom",
            Role::SupportTop => "support-top",
            Role::EndTop => "end-top",
            Role::DistributionBottom => "distribution-bottom",
            Role::DistributionTop => "distribution-top",
            Role::Edge => "edge",
            Role::Corner => "corner",
        }
    }
}

/// The direction a bar's plane runs in: along the span (x) or across it (y).
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Along {
    X,
    Y,
}

/// Alike bars: one made bar, repeated on lines across its run.
#[derive(Clone, Debug)]
pub struct Run {
    pub layer: Layer,
    pub role: Role,
    pub along: Along,
    pub made: Made,
    /// Where each bar's centre line stands across the run, mm.
    pub lines: Vec<f64>,
    /// Level of the main leg's centre line above the soffit, mm.
    pub z: f64,
    /// Called spacing of the zone, mm.
    pub spacing: f64,
    /// Address of the zone, such as `S1/span:1/B1`.
    pub zone: String,
    /// Length of each bar that counts as lap, mm; each lap counts on one of its two bars.
    pub lap: f64,
    /// How its bars take turns, for the call-out: "", "alt" or "alt rev".
    pub turn: &'static str,
}

impl Run {
    pub fn size(&self) -> f64 {
        f64::from(self.made.size)
    }
}

/// A choice the planner had to make, with its reason.
#[derive(Clone, Debug)]
pub struct Reason {
    pub address: String,
    pub text: String,
    pub cite: Cite,
}

/// A planned slab.
pub struct Plan {
    pub stations: Stations,
    pub runs: Vec<Run>,
    pub ledger: Ledger,
    pub reasons: Vec<Reason>,
    /// Laps used, as (size, length mm), for the notes.
    pub laps: Vec<(u32, f64)>,
}

/// Top bars over one support, or over several that run through as one set.
#[derive(Clone, Debug)]
pub(crate) struct TopSet {
    pub first: usize,
    pub last: usize,
    pub bars: Bars,
}

/// What the planners share while one slab is planned.
pub(crate) struct Work<'a> {
    pub basis: &'a Basis,
    pub slab: &'a Slab,
    pub stations: Stations,
    pub plan: Book,
}

/// What grows while a slab is planned.
#[derive(Default)]
pub(crate) struct Book {
    pub runs: Vec<Run>,
    pub ledger: Ledger,
    pub reasons: Vec<Reason>,
    pub laps: Vec<(u32, f64)>,
}

impl Work<'_> {
    pub fn address(&self, rest: &str) -> String {
        format!("{}/{rest}", self.slab.mark)
    }

    pub fn explain(&mut self, rest: &str, steps: Vec<Step>) {
        let address = self.address(rest);
        self.plan.ledger.put(address, steps);
    }

    pub fn reason(&mut self, rest: &str, text: impl Into<String>, cite: Cite) {
        let address = self.address(rest);
        self.plan.reasons.push(Reason { address, text: text.into(), cite });
    }

    pub fn h(&self) -> f64 {
        self.slab.thickness.value
    }

    pub fn side(&self) -> f64 {
        self.slab.cover.side.value
    }

    pub fn fck(&self) -> f64 {
        self.basis.concrete.value.fck
    }

    pub fn fyk(&self) -> f64 {
        self.basis.steel.value.fyk
    }

    pub fn fyd(&self) -> f64 {
        crate::rules::anchorage::fyd(self.fyk())
    }

    /// Effective depth of B1, mm.
    pub fn bottom_depth(&self, size: u32) -> f64 {
        self.h() - self.slab.cover.bottom.value - f64::from(size) / 2.0
    }

    /// Effective depth of T1, mm.
    pub fn top_depth(&self, size: u32) -> f64 {
        self.h() - self.slab.cover.top.value - f64::from(size) / 2.0
    }

    /// Depth between the covers, less the deduction for bent bars, down to 5 mm: the greatest upright of a bent bar.
    pub fn upright(&self, between: f64) -> f64 {
        crate::base::down(between - self.basis.deduction.for_bent(between), 5.0)
    }

    pub fn between_covers(&self) -> f64 {
        self.h() - self.slab.cover.bottom.value - self.slab.cover.top.value
    }

    /// Top of the outermost bottom bars that cross `x`, mm above the soffit.
    pub fn bottom_seat(&self, x: f64) -> f64 {
        let low = self.flats(x).filter(|(z, _)| *z < self.h() / 2.0);
        low.map(|(z, size)| z + size / 2.0).fold(self.slab.cover.bottom.value, f64::max)
    }

    /// Underside of the outermost top bars that cross `x`, mm above the soffit; the nominal layer where none do.
    pub fn top_seat(&self, x: f64) -> f64 {
        let nominal = self.h() - self.slab.cover.top.value - self.largest_top();
        let high = self.flats(x).filter(|(z, _)| *z > self.h() / 2.0);
        high.map(|(z, size)| z - size / 2.0).fold(nominal, f64::min)
    }

    pub fn largest_top(&self) -> f64 {
        let tops = self.plan.runs.iter().filter(|r| matches!(r.role, Role::SupportTop | Role::EndTop));
        tops.map(Run::size).fold(0.0, f64::max)
    }

    /// Level and size of the level pieces of the bars along the span that a bar across it at `x` would meet.
    fn flats(&self, x: f64) -> impl Iterator<Item = (f64, f64)> {
        let along = self.plan.runs.iter().filter(|r| r.along == Along::X && (r.role != Role::Edge || r.made.shape != "00"));
        along.flat_map(move |r| {
            let level = r.made.axis.windows(2).filter(move |w| {
                let (low, high) = (w[0].0.min(w[1].0), w[0].0.max(w[1].0));
                w[0].1 == w[1].1 && low - r.size() <= x && x <= high + r.size()
            });
            level.map(|w| (r.z + w[0].1, r.size())).collect::<Vec<_>>()
        })
    }
}

/// Plans every slab of a job, in the order of the file.
pub fn plan(job: &Job) -> Vec<Plan> {
    job.slabs.iter().map(|slab| plan_slab(&job.basis, slab)).collect()
}

fn plan_slab(basis: &Basis, slab: &Slab) -> Plan {
    let stations = Stations::of(slab);
    let mut work = Work { basis, slab, stations, plan: Book::default() };
    stations::explain(&mut work);
    let tops = top::decide(&mut work);
    let mut ends = ends::decide(&mut work, &tops);
    let sets = top::join(&mut work, tops, &mut ends);
    bottom::plan(&mut work, &ends);
    closing::lap(&mut work, &mut ends, false);
    top::plan(&mut work, &sets, &ends);
    closing::lap(&mut work, &mut ends, true);
    closing::close(&mut work, &ends);
    closing::hold(&mut work, &ends);
    corners::plan(&mut work);
    distribution::plan(&mut work);
    edges::plan(&mut work);
    let Work { stations, plan: book, .. } = work;
    let mut laps = book.laps;
    laps.sort_by_key(|lap| (lap.0, lap.1 as i64));
    laps.dedup_by(|a, b| a.0 == b.0 && (a.1 - b.1).abs() < 0.5);
    Plan { stations, runs: book.runs, ledger: book.ledger, reasons: book.reasons, laps }
}
