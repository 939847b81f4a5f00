//! A slab seen in a mirror gives the bars seen in a mirror, where all lengths are multiples of 25 mm and the number of spans is odd:
//! B1 of every second span stands aside (D18), which an even number of spans turns round.

use super::generator::{Draft, draft};
use super::{detailed, failed};
use slabwright::place::SlabModel;
use slabwright::plan::Layer;

/// The same draft on a 25 mm grid, one slab of an odd number of spans.
fn even(seed: u64) -> Draft {
    let mut draft = draft(seed);
    draft.slabs.truncate(1);
    draft.longest = 12_000;
    let slab = &mut draft.slabs[0];
    if slab.spans.len().is_multiple_of(2) {
        slab.spans.remove(1);
        slab.supports.remove(1);
    }
    let to_25 = |v: u32| v.div_ceil(25) * 25;
    slab.cover[2] = to_25(slab.cover[2]);
    for support in &mut slab.supports {
        support.width = support.width.div_ceil(50) * 50;
        support.bearing = support.bearing.map(|b| to_25(b).min(support.width));
    }
    for span in &mut slab.spans {
        span.length = to_25(span.length);
    }
    draft
}

fn mirrored(draft: &Draft) -> Draft {
    let mut draft = draft.clone();
    draft.slabs[0].supports.reverse();
    draft.slabs[0].spans.reverse();
    draft
}

/// Layer, size, shape, length and extent along the span of every bar of B1 and T1, sorted; `turn` takes x to where it is measured from.
fn bars(slab: &SlabModel, turn: impl Fn(f64) -> f64) -> Vec<String> {
    let main = slab.bars.iter().filter(|b| b.is_along_span() && b.role.name() != "edge" && b.layer != Layer::B2);
    let mut all: Vec<String> = main
        .flat_map(|b| {
            b.placements().map(|a| {
                let xs: Vec<f64> = a.iter().map(|p| turn(p[0])).collect();
                let (low, high) = (xs.iter().copied().fold(f64::INFINITY, f64::min), xs.iter().copied().fold(f64::NEG_INFINITY, f64::max));
                format!("{} {} {} {} {low:.1} {high:.1}", b.layer.name(), b.size, b.shape, b.length)
            })
        })
        .collect();
    all.sort();
    all
}

/// Number and length of every bar across the span and of the edges.
fn counts(slab: &SlabModel) -> Vec<(u32, i32, u32)> {
    let mut all: Vec<(u32, i32, u32)> = slab.bars.iter().filter(|b| b.layer == Layer::B2).map(|b| (b.size, b.length, b.each())).collect();
    all.sort_unstable();
    all
}

fn compare(seeds: std::ops::Range<u64>, merged: bool, wanted: impl Fn(&Draft) -> bool) -> (usize, Vec<u64>) {
    let mut compared = 0;
    let mut broken = Vec::new();
    for seed in seeds {
        let draft = even(seed);
        if !wanted(&draft) {
            continue;
        }
        let (one, other) = (detailed(&draft.text(None)), detailed(&mirrored(&draft).text(None)));
        let (a, b) = (&one.model.slabs[0], &other.model.slabs[0]);
        if a.reasons.iter().chain(&b.reasons).any(|r| r.text.contains("run through as")) != merged {
            continue;
        }
        let length: f64 = draft.slabs[0].spans.iter().map(|s| f64::from(s.length)).sum();
        compared += 1;
        if bars(a, |x| x) != bars(b, |x| length - x) || counts(a) != counts(b) {
            broken.push(seed);
        }
    }
    (compared, broken)
}

#[test]
fn a_mirrored_slab_of_full_bars_gives_mirrored_bars() {
    let (compared, broken) = compare(0..70, false, |d| d.slabs[0].arrangement == "full");
    assert!(compared >= 5, "{compared}");
    assert!(broken.is_empty(), "seeds {broken:?}");
}

#[test]
fn a_mirrored_slab_of_alternate_bars_gives_mirrored_bars() {
    let (compared, broken) = compare(0..70, false, |d| d.slabs[0].arrangement == "alternate");
    assert!(compared >= 5, "{compared}");
    assert!(broken.is_empty(), "seeds {broken:?}");
}

#[test]
fn a_mirrored_slab_of_merged_top_bars_gives_mirrored_bars() {
    let (compared, broken) = compare(0..160, true, |d| d.slabs[0].arrangement == "full" || d.slabs[0].arrangement == "alternate");
    assert!(compared >= 5, "{compared}");
    assert!(broken.is_empty(), "seeds {broken:?}");
}

#[test]
fn a_mirrored_slab_has_the_same_covers_and_areas() {
    const SAME: &[&str] = &["area-required", "area-most", "rule-spans", "rule-load", "rule-load-ratio", "rule-span-count"];
    for seed in 0..15 {
        let draft = even(seed);
        let (one, other) = (detailed(&draft.text(None)), detailed(&mirrored(&draft).text(None)));
        assert_eq!(failed(&one, SAME).len(), failed(&other, SAME).len(), "seed {seed}");
    }
}
