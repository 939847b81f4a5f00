//! Neutral tables made from the placed bars: schedule, steel, checks, explanations and the model for other programs.
//! Computes no length and rounds masses once, in what it prints.

pub mod explain;
pub mod model;
pub mod schedule;
pub mod steel;

use crate::base::num;
use crate::finding::{Check, KINDS, Verdict};
use crate::table::Table;

/// How many checks passed, warned and failed.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Tally {
    pub pass: usize,
    pub warn: usize,
    pub fail: usize,
}

pub fn tally<'c>(checks: impl IntoIterator<Item = &'c Check>) -> Tally {
    let mut tally = Tally::default();
    for check in checks {
        match check.verdict {
            Verdict::Pass => tally.pass += 1,
            Verdict::Warn => tally.warn += 1,
            Verdict::Fail => tally.fail += 1,
        }
    }
    tally
}

/// One row for each kind of check that was made: how often it passed, and the place nearest to or past its limit.
pub fn check_table(checks: &[Check]) -> Table {
    let mut table = Table::new(&["check", ">pass", ">warn", ">fail", "tightest at", ">value", ">limit", "unit", "clause"]);
    for kind in KINDS {
        let own: Vec<&Check> = checks.iter().filter(|c| c.code == kind.code).collect();
        let margin = |c: &Check| (c.value - c.limit).abs() / c.limit.abs().max(1e-6);
        // The worst verdict first; among equals the one closest to its limit.
        let Some(worst) = own.iter().min_by(|a, b| b.verdict.cmp(&a.verdict).then(margin(a).total_cmp(&margin(b)))) else { continue };
        let counts = tally(own.iter().copied());
        table.row([
            kind.code.to_string(),
            counts.pass.to_string(),
            counts.warn.to_string(),
            counts.fail.to_string(),
            worst.at.clone(),
            num(worst.value, 2),
            num(worst.limit, 2),
            worst.unit.to_string(),
            worst.clause.clone(),
        ]);
    }
    table
}

/// The checks that did not pass, one row each.
pub fn open_checks(checks: &[Check]) -> Table {
    let mut table = Table::new(&["verdict", "check", "at", ">value", ">limit", "unit", "clause"]);
    for check in checks.iter().filter(|c| c.verdict != Verdict::Pass) {
        table.row([
            check.verdict.word().to_string(),
            check.code.to_string(),
            check.at.clone(),
            num(check.value, 2),
            num(check.limit, 2),
            check.unit.to_string(),
            check.clause.clone(),
        ]);
    }
    table
}
