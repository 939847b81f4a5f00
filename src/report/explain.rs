//! Explanations as text: formula, numbers, result, clause, and the line of the job file they come from.

use crate::diagnose::line_and_column;
use crate::place::BarModel;
use crate::read::nearest;
use crate::tables::tables;
use crate::trace::Step;
use serde::Serialize;

#[derive(Debug, Serialize)]
pub struct Answer {
    pub address: String,
    pub steps: Vec<Line>,
}

#[derive(Debug, Serialize)]
pub struct Line {
    pub what: String,
    pub formula: String,
    pub result: String,
    pub clause: String,
    /// Place in the job file: line number from 1, and that line; 0 where none.
    pub line: usize,
    pub wrote: String,
}

/// Explains an address; a mark brings its dimensions, length, count, mass and the stops and counts of its zones.
/// Errors with the nearest known addresses.
pub fn explain(model: &BarModel, source: &str, address: &str) -> Result<Vec<Answer>, Vec<String>> {
    let address = address.trim().trim_end_matches('/');
    let mut wanted: Vec<String> = Vec::new();
    let below = format!("{address}/");
    // Provisional addresses of unmarked bars are the program's own.
    let known = || model.ledger.addresses().filter(|a| !a.contains("/bar:"));
    if model.ledger.get(address).is_some() {
        wanted.push(address.to_string());
    }
    wanted.extend(known().filter(|a| a.starts_with(&below)).map(str::to_string));
    // A dimension of a mark is decided in its zones, as the mark is.
    if let Some((slab, mark)) = address.split_once("/mark:").map(|(slab, rest)| (slab, rest.split('/').next().unwrap_or(rest)))
        && let Some(bar) = model.slabs.iter().filter(|s| s.mark == slab).flat_map(|s| &s.bars).find(|b| b.mark == mark)
    {
        let mut zones: Vec<String> = bar.sets.iter().map(|s| s.zone.clone()).collect();
        zones.dedup();
        zones.extend(zones.iter().flat_map(|zone| neighbours(model, zone)).collect::<Vec<_>>());
        for zone in zones {
            let prefix = format!("{zone}/");
            wanted.extend(known().filter(|a| a.starts_with(&prefix)).map(str::to_string));
        }
    }
    if wanted.is_empty() {
        let near: Vec<String> = nearest(address, known())
            .map(str::to_string)
            .into_iter()
            .chain(known().filter(|a| a.contains(last_part(address))).take(5).map(str::to_string))
            .collect();
        let near: Vec<String> = itertools::Itertools::unique(near.into_iter()).collect();
        return Err(if near.is_empty() { known().take(8).map(str::to_string).collect() } else { near });
    }
    let mut seen = std::collections::BTreeSet::new();
    wanted.retain(|a| seen.insert(a.clone()));
    Ok(wanted.into_iter().map(|a| Answer { steps: lines(model.ledger.get(&a).unwrap_or(&[]), source), address: a }).collect())
}

/// The supports at both ends of a span's bottom bars, where their laps and ends are decided; the supports of top bars that run through.
fn neighbours(model: &BarModel, zone: &str) -> Vec<String> {
    let Some((slab, rest)) = zone.split_once('/') else { return Vec::new() };
    let grids = model.slabs.iter().find(|s| s.mark == slab).map_or(&[][..], |s| &s.grids);
    if let Some(number) = rest.strip_prefix("span:").and_then(|r| r.strip_suffix("/B1")) {
        let span: usize = number.parse().unwrap_or(1);
        return grids.iter().skip(span.saturating_sub(1)).take(2).map(|grid| format!("{slab}/support:{grid}/B1")).collect();
    }
    let Some(names) = rest.strip_prefix("support:").and_then(|r| r.strip_suffix("/T1")) else { return Vec::new() };
    // A set that runs through carries the names of its supports in a row.
    let rows = (0..grids.len()).flat_map(|i| (i + 2..=grids.len()).map(move |j| &grids[i..j]));
    let own = rows.into_iter().find(|row| row.join("-") == names).unwrap_or(&[]);
    own.iter().map(|grid| format!("{slab}/support:{grid}/T1")).collect()
}

fn last_part(address: &str) -> &str {
    address.rsplit('/').next().unwrap_or(address)
}

fn lines(steps: &[Step], source: &str) -> Vec<Line> {
    steps
        .iter()
        .map(|step| {
            let line = step.place.as_ref().map_or(0, |p| line_and_column(source, p.start).0);
            let wrote = if line > 0 { source.lines().nth(line - 1).unwrap_or("").trim().to_string() } else { String::new() };
            Line {
                what: step.what.clone(),
                formula: step.formula.clone(),
                result: step.result.clone(),
                clause: step.cite.as_ref().map_or(String::new(), |c| tables().cited(c)),
                line,
                wrote,
            }
        })
        .collect()
}

/// The answers as plain text.
pub fn text(answers: &[Answer], file: &str) -> String {
    let mut text = String::new();
    for answer in answers {
        text.push_str(&format!("{}\n", answer.address));
        for line in &answer.steps {
            let joined = [line.formula.as_str(), line.result.as_str()].iter().filter(|p| !p.is_empty()).copied().collect::<Vec<_>>().join(" = ");
            text.push_str(&format!("  {}{}{}\n", line.what, if joined.is_empty() { "" } else { ": " }, joined));
            if !line.clause.is_empty() {
                text.push_str(&format!("      by {}\n", line.clause));
            }
            if line.line > 0 {
                text.push_str(&format!("      from {file}:{}: {}\n", line.line, line.wrote));
            }
        }
        text.push('\n');
    }
    text
}
