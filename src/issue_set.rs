//! The pipeline in one page: the bytes of a job file in, documents and diagnostics out. Nothing is printed, read or written here.

use crate::audit::{self, Check, Verdict};
use crate::diagnose::Fault;
use crate::job::{self, Job, Loader};
use crate::place::BarModel;
use crate::scene::Scene;
use crate::write::{Artifact, FORMATS, Format, Parts};
use crate::{draw, place, plan, report};
use std::collections::BTreeMap;

/// A job file as read, with its faults.
pub struct Outcome {
    pub set: Option<IssueSet>,
    pub faults: Vec<Fault>,
    pub source: String,
}

/// Everything that one job gives: bars, checks, and what the documents are made from.
pub struct IssueSet {
    pub job: Job,
    pub model: BarModel,
    /// Checks, one list a slab.
    pub checks: Vec<Vec<Check>>,
}

/// Reads, plans, places and audits.
pub fn detail(bytes: &[u8], load: Loader) -> Outcome {
    let reading = job::read(bytes, load);
    let set = reading.job.map(|job| {
        let model = place::place(&job, plan::plan(&job));
        let checks = audit::audit(&job, &model);
        IssueSet { job, model, checks }
    });
    Outcome { set, faults: reading.faults, source: reading.source }
}

impl IssueSet {
    /// The documents of the wanted formats (all where none is named), in memory.
    /// Errors where a document cannot be put together.
    pub fn documents(&mut self, only: &[String]) -> Result<Vec<Artifact>, String> {
        let wanted = |format: &Format| only.is_empty() || only.iter().any(|word| format.is_named(word));
        let mut sheets = draw::sheets(&self.job, &self.model, &self.checks);
        if self.reconcile(&sheets) {
            // A mark that is not drawn changes the stamp: draw again with it.
            sheets = draw::sheets(&self.job, &self.model, &self.checks);
        }
        let schedule = draw::schedule(&self.job, &self.model, &self.checks);
        let model_json = report::model::json(&self.job, &self.model, &self.checks);
        let head = &self.job.head;
        let title = format!("{} {}, revision {}", head.drawing, head.title, head.revision);
        let stem = head.file_stem();
        let parts = Parts {
            stem: &stem,
            date: head.date,
            title: &title,
            project: &head.project,
            sheets: &sheets,
            schedule: &schedule,
            schedule_table: &report::schedule::table(&self.model),
            steel_table: &report::steel::table(&self.model),
            model_json: &model_json,
        };
        let mut files = Vec::new();
        for format in FORMATS.iter().filter(|f| wanted(f)) {
            files.extend((format.make)(&parts)?);
        }
        Ok(files)
    }

    /// Checks that every mark of the schedule is called out on a sheet with its number, and that every text has a place of its own; returns
    /// whether one has not.
    fn reconcile(&mut self, sheets: &[Scene]) -> bool {
        let drawn = drawn_numbers(sheets);
        let mut missing = false;
        for (slab, checks) in self.model.slabs.iter().zip(&mut self.checks) {
            // The documents may be asked for more than once.
            checks.retain(|c| c.code != "sheet-marks" && c.code != "sheet-texts");
            let crowded: usize = sheets.iter().filter(|s| s.slab == slab.mark).map(|s| s.unplaced.len()).sum();
            let verdict = if crowded == 0 { Verdict::Pass } else { Verdict::Fail };
            missing |= verdict == Verdict::Fail;
            checks.push(audit::check("sheet-texts", verdict, format!("{}/sheets", slab.mark), crowded as f64, 0.0, ""));
            for bar in &slab.bars {
                let number = drawn.get(&bar.mark).copied().unwrap_or(0);
                let verdict = if number == bar.each() { Verdict::Pass } else { Verdict::Fail };
                missing |= verdict == Verdict::Fail;
                let at = format!("{}/mark:{}", slab.mark, bar.mark);
                checks.push(audit::check("sheet-marks", verdict, at, f64::from(number), f64::from(bar.each()), ""));
            }
        }
        missing
    }

    pub fn all_checks(&self) -> Vec<Check> {
        self.checks.concat()
    }
}

/// The number written at each mark's call-out on the sheets.
fn drawn_numbers(sheets: &[Scene]) -> BTreeMap<String, u32> {
    let mut numbers = BTreeMap::new();
    for call_out in sheets.iter().flat_map(Scene::call_outs) {
        if let Some(number) = call_out.number() {
            numbers.insert(call_out.mark.to_string(), number);
        }
    }
    numbers
}
