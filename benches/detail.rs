//! How long detailing takes and where the time goes: every sample, and a job of 200 slabs of five spans (invented).
//! Run with `cargo bench`. Times are medians of several runs in one process; compare rows of one run, not runs.

#![allow(clippy::unwrap_used, clippy::expect_used, clippy::disallowed_methods, clippy::print_stdout)]

use slabwright::{audit, draw, issue_set, job, place, plan, report, write};
use std::time::Instant;

fn no_files(_: &str) -> Result<String, String> {
    Err("no files in a bench".into())
}

/// 200 slabs of five spans, each a little different.
fn large() -> String {
    let mut text = String::from(
        "schema = 1\n[job]\nnumber = \"B200\"\nproject = \"Invented bench\"\ntitle = \"200 slabs\"\ndrawing = \"B200-001\"\nrevision = \"P01\"\ndate = 2026-01-01\n[basis]\nconcrete = \"C32/40\"\nsteel = \"B500B\"\n",
    );
    for slab in 0..200 {
        let width = 5000 + 25 * (slab % 40);
        text.push_str(&format!(
            "[[slab]]\nmark = \"S{slab}\"\nthickness = 190\nwidth = {width}\ncover = {{ bottom = 25, top = 25, side = 30 }}\nload = {{ permanent = 6, variable = 3 }}\nbottom_distribution = \"H10-300\"\ntop_distribution = \"H10-300\"\n"
        ));
        for j in 0..6 {
            let top = if j == 0 || j == 5 { "" } else { "top = \"H12-150\"\n" };
            text.push_str(&format!("[[slab.support]]\nkind = \"wall\"\nwidth = 200\n{top}"));
            if j < 5 {
                text.push_str(&format!("[[slab.span]]\nlength = {}\nbottom = \"H12-175\"\n", 4200 + 25 * ((slab + j) % 9)));
            }
        }
    }
    text
}

fn median(mut times: Vec<f64>) -> f64 {
    times.sort_by(f64::total_cmp);
    times[times.len() / 2]
}

/// Runs a stage several times; returns its last result and the median in ms.
fn timed<T>(runs: usize, mut stage: impl FnMut() -> T) -> (T, f64) {
    let mut last = None;
    let times = (0..runs)
        .map(|_| {
            let start = Instant::now();
            last = Some(stage());
            start.elapsed().as_secs_f64() * 1000.0
        })
        .collect();
    (last.unwrap(), median(times))
}

fn row(name: &str, source: &[u8], runs: usize) {
    let (reading, read) = timed(runs, || job::read(source, &no_files));
    let job = reading.job.expect("a bench job is sound");
    let (_, planned) = timed(runs, || plan::plan(&job));
    let (model, placed) = timed(runs, || place::place(&job, plan::plan(&job)));
    let (checks, audited) = timed(runs, || audit::audit(&job, &model));
    let (sheets, drawn) = timed(runs, || draw::sheets(&job, &model, &checks));
    let (pages, schedule) = timed(runs, || draw::schedule(&job, &model, &checks));
    let (_, pdf) = timed(runs, || write::pdf::write(&sheets.iter().collect::<Vec<_>>(), (2026, 1, 1), "bench", "bench"));
    let (_, schedule_pdf) = timed(runs, || write::pdf::write(&pages.iter().collect::<Vec<_>>(), (2026, 1, 1), "bench", "bench"));
    let (_, svg) = timed(runs, || sheets.iter().map(write::svg::write).map(|s| s.len()).sum::<usize>());
    let (_, json) = timed(runs, || report::model::json(&job, &model, &checks));
    let (_, whole) = timed(runs, || issue_set::detail(source, &no_files).set.map(|mut s| s.documents(&[]).map(|d| d.len())));
    let cells = [read, planned, (placed - planned).max(0.0), audited, drawn + schedule, pdf + schedule_pdf, svg, json, whole];
    let cells: Vec<String> = cells.iter().map(|ms| format!("{ms:>9.2}")).collect();
    println!("{name:<18}{}", cells.join(""));
}

fn main() {
    let heads = ["read", "plan", "place", "audit", "draw", "pdf", "svg", "json", "whole"];
    println!("{:<18}{}   ms", "", heads.map(|h| format!("{h:>9}")).join(""));
    for sample in ["mill-store", "ferry-hall", "harbour-shed", "orchard-annexe"] {
        let path = format!("{}/samples/{sample}.toml", env!("CARGO_MANIFEST_DIR"));
        row(sample, &std::fs::read(path).unwrap(), 9);
    }
    row("200 slabs x 5", large().as_bytes(), 1);
}
