//! The second opinion: measures the placed bars anew against the design and the code, without the planner's numbers.
//! May import place, job, rules, steel; never plan's extents, steps or choices.

mod areas;
mod bars;
mod conditions;
mod ends;
mod fit;
mod laps;
pub mod pieces;
mod spacings;

pub use crate::finding::{Check, KINDS, Kind, Verdict};
use crate::job::{Job, Slab};
use crate::place::{BarModel, SlabModel};
use crate::tables::tables;
use pieces::Pieces;

/// What the checks of one slab look at.
pub(crate) struct Slate<'a> {
    pub job: &'a Job,
    pub slab: &'a Slab,
    pub model: &'a SlabModel,
    pub pieces: &'a Pieces,
    pub found: Vec<Check>,
}

impl Slate<'_> {
    /// Files a finding that passes where `value` is at least `limit`.
    pub fn at_least(&mut self, code: &'static str, at: &str, value: f64, limit: f64, unit: &'static str) {
        self.file(code, at, value, limit, unit, value >= limit - SLACK, Verdict::Fail);
    }

    /// Files a finding that passes where `value` is at most `limit`.
    pub fn at_most(&mut self, code: &'static str, at: &str, value: f64, limit: f64, unit: &'static str) {
        self.file(code, at, value, limit, unit, value <= limit + SLACK, Verdict::Fail);
    }

    #[allow(clippy::too_many_arguments)]
    pub fn file(&mut self, code: &'static str, at: &str, value: f64, limit: f64, unit: &'static str, ok: bool, otherwise: Verdict) {
        let verdict = if ok { Verdict::Pass } else { otherwise };
        let at = format!("{}/{at}", self.slab.mark);
        self.found.push(check(code, verdict, at, value, limit, unit));
    }

    pub fn h(&self) -> f64 {
        self.slab.thickness.value
    }
}

/// Slack of every comparison, mm, mm²/m or kg.
const SLACK: f64 = 0.05;

pub fn check(code: &'static str, verdict: Verdict, at: String, value: f64, limit: f64, unit: &'static str) -> Check {
    let clause = KINDS.iter().find(|k| k.code == code).map_or(String::new(), |k| tables().cited(&k.cite));
    Check { code, verdict, at, value, limit, unit, clause }
}

/// Every finding on every slab, slab by slab in the order of the job.
pub fn audit(job: &Job, model: &BarModel) -> Vec<Vec<Check>> {
    job.slabs.iter().zip(&model.slabs).map(|(slab, placed)| audit_slab(job, slab, placed)).collect()
}

fn audit_slab(job: &Job, slab: &Slab, model: &SlabModel) -> Vec<Check> {
    let pieces = Pieces::of(model);
    let mut slate = Slate { job, slab, model, pieces: &pieces, found: Vec::new() };
    fit::checks(&mut slate);
    spacings::checks(&mut slate);
    areas::checks(&mut slate);
    ends::checks(&mut slate);
    laps::checks(&mut slate);
    bars::checks(&mut slate);
    conditions::checks(&mut slate);
    slate.found
}
