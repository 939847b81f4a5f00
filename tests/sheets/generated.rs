//! 500 generated jobs drawn: 1 to 20 spans of 1.5 to 9 m, 2 to 40 m wide, every arrangement, edge and end; all invented.

use super::collisions::collisions;
use super::sheets;
use crate::random_jobs::generator::{Dice, Draft, draft};
use slabwright::issue_set::{IssueSet, detail};
use std::collections::BTreeMap;

const JOBS: u64 = 500;

fn wide_range(seed: u64) -> Draft {
    let mut draft = draft(50_000 + seed);
    let mut dice = Dice::new(seed);
    for slab in &mut draft.slabs {
        slab.width = if dice.chance(60) { dice.stepped(2000, 12_000, 50) } else { dice.within(12_000, 40_000) };
        for bay in &mut slab.spans {
            bay.length = bay.length.max(1500);
        }
    }
    draft
}

fn detailed(seed: u64) -> Option<IssueSet> {
    let text = wide_range(seed).text(None);
    detail(text.as_bytes(), &|_: &str| Err("no files here".into())).set
}

#[test]
fn no_text_of_500_generated_jobs_meets_anything() {
    let jobs: u64 = std::env::var("SLABWRIGHT_JOBS").ok().and_then(|n| n.parse().ok()).unwrap_or(JOBS);
    let one = |seed: u64| {
        let set = detailed(seed)?;
        let scenes = sheets(&set);
        let mut lines = Vec::new();
        let chosen: Vec<String> =
            scenes.iter().map(|s| s.description.split(", at ").nth(1).unwrap_or("").split('.').next().unwrap_or("").to_string()).collect();
        for (i, scene) in scenes.iter().enumerate() {
            lines.extend(collisions(scene).into_iter().map(|c| format!("job {seed} sheet {}: {:?} meets {}", i + 1, c.text, c.with)));
        }
        Some((chosen, lines))
    };
    let one = &one;
    let results: Vec<(Vec<String>, Vec<String>)> = std::thread::scope(|scope| {
        let parts: Vec<_> = (0..2).map(|half| scope.spawn(move || (0..jobs).filter(|s| s % 2 == half).filter_map(one).collect::<Vec<_>>())).collect();
        parts.into_iter().flat_map(|p| p.join().unwrap()).collect()
    });
    let mut chosen: BTreeMap<String, usize> = BTreeMap::new();
    for sheet in results.iter().flat_map(|r| &r.0) {
        *chosen.entry(sheet.clone()).or_default() += 1;
    }
    let found: Vec<&String> = results.iter().flat_map(|r| &r.1).collect();
    let texts = found.iter().filter(|f| f.contains("meets text")).count();
    let jobs_met = results.iter().filter(|r| !r.1.is_empty()).count();
    eprintln!(
        "{} jobs, {} sheets, {chosen:?}: {} collisions ({texts} of two texts) in {jobs_met} jobs",
        results.len(),
        chosen.values().sum::<usize>(),
        found.len()
    );
    assert!(results.len() as u64 == jobs, "every generated job is valid");
    assert!(found.is_empty(), "{:#?}", &found[..found.len().min(60)]);
}

#[test]
fn the_generated_jobs_reach_the_whole_range() {
    let drafts: Vec<Draft> = (0..JOBS).map(wide_range).collect();
    let slabs = || drafts.iter().flat_map(|d| &d.slabs);
    let spans: std::collections::BTreeSet<usize> = slabs().map(|s| s.spans.len()).collect();
    assert_eq!(spans.into_iter().collect::<Vec<_>>(), (1..=20).collect::<Vec<_>>());
    let widths = || slabs().map(|s| s.width);
    assert!(widths().min() <= Some(2200) && widths().max() > Some(39_000), "{:?} to {:?}", widths().min(), widths().max());
    let lengths = || slabs().flat_map(|s| s.spans.iter().map(|b| b.length));
    assert!(lengths().min() == Some(1500) && lengths().max() > Some(8950));
    for edge in ["free", "wall", "beam", "joint"] {
        assert!(slabs().any(|s| s.edges[0] == edge) && slabs().any(|s| s.edges[1] == edge));
    }
    for way in ["auto", "full", "alternate", "reversed"] {
        assert!(slabs().any(|s| s.arrangement == way));
    }
}
