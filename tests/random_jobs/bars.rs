//! Placed bars of random jobs: inside the concrete, counted, weighed, marked and explained.

use super::{DRAWN, Drawn, detailed};
use slabwright::place::{BarType, SlabModel};
use slabwright::plan::Layer;
use std::collections::BTreeSet;

/// Mass per metre by size, kg: rule D22.
const KG_M: [(u32, f64); 7] = [(8, 0.395), (10, 0.617), (12, 0.888), (16, 1.578), (20, 2.466), (25, 3.853), (32, 6.313)];

fn every_slab() -> impl Iterator<Item = (&'static Drawn, usize, &'static SlabModel)> {
    DRAWN.iter().flat_map(|d| d.set.model.slabs.iter().enumerate().map(move |(i, s)| (d, i, s)))
}

/// Least distance of a bar's surface from six faces, less the cover there: -x, +x, -y, +y, -z, +z.
fn spare(slab: &SlabModel, bar: &BarType, axis: &[[f64; 3]], cover: [f64; 3]) -> f64 {
    let half = f64::from(bar.size) / 2.0;
    let [bottom, top, side] = cover;
    let low = [slab.stations.start + side, side, bottom];
    let high = [slab.stations.end - side, slab.width - side, slab.thickness - top];
    let mut least = f64::INFINITY;
    for (i, point) in axis.iter().enumerate() {
        let neighbours = [i.checked_sub(1), Some(i + 1)];
        for k in 0..3 {
            // A cut end shows no side of the bar in the direction it runs.
            let runs_along = neighbours.iter().flatten().filter_map(|n| axis.get(*n)).all(|n| n[k] != point[k]);
            let surface = if runs_along { 0.0 } else { half };
            least = least.min(point[k] - surface - low[k]).min(high[k] - point[k] - surface);
        }
    }
    least
}

fn outside(drawn: &Drawn, index: usize, slab: &SlabModel) -> Option<String> {
    let cover = drawn.draft.slabs[index].cover.map(f64::from);
    let worst = slab.bars.iter().flat_map(|b| b.placements().map(move |a| (spare(slab, b, &a, cover), b))).min_by(|a, b| a.0.total_cmp(&b.0))?;
    (worst.0 < -0.01).then(|| format!("seed {}: mark {} stands {} mm into the cover", drawn.seed, worst.1.mark, -worst.0))
}

#[test]
fn every_bar_stands_inside_the_concrete_less_cover() {
    let open: Vec<String> = every_slab().filter_map(|(d, i, s)| outside(d, i, s)).collect();
    assert!(open.is_empty(), "{open:#?}");
}

#[test]
fn every_bottom_and_distribution_bar_stands_inside_the_concrete_less_cover() {
    for (drawn, index, slab) in every_slab() {
        let cover = drawn.draft.slabs[index].cover.map(f64::from);
        for bar in slab.bars.iter().filter(|b| b.layer != Layer::E && b.layer != Layer::T1) {
            let least = bar.placements().map(|a| spare(slab, bar, &a, cover)).fold(f64::INFINITY, f64::min);
            assert!(least >= -0.01, "seed {}: mark {} stands {} mm into the cover", drawn.seed, bar.mark, -least);
        }
    }
}

#[test]
fn numbers_of_sets_and_members_make_the_total() {
    for (drawn, index, slab) in every_slab() {
        for bar in &slab.bars {
            let counted: u32 = bar.sets.iter().map(|s| s.count).sum();
            assert_eq!((bar.each(), bar.total()), (counted, counted * drawn.draft.slabs[index].members), "seed {}, mark {}", drawn.seed, bar.mark);
            assert_eq!(bar.placements().count(), counted as usize);
        }
    }
}

#[test]
fn a_straight_bar_is_as_long_as_its_axis_and_a_multiple_of_25() {
    for (drawn, _, slab) in every_slab() {
        for bar in slab.bars.iter().filter(|b| b.is_straight()) {
            assert_eq!(bar.length % 25, 0);
            for axis in bar.placements() {
                let drawn_length: f64 = (0..3).map(|k| (axis[1][k] - axis[0][k]).abs()).sum();
                assert!(axis.len() == 2 && (drawn_length - f64::from(bar.length)).abs() < 0.01, "seed {}, mark {}: {drawn_length}", drawn.seed, bar.mark);
            }
        }
    }
}

#[test]
fn marks_run_from_01_in_the_order_of_the_layers() {
    for drawn in DRAWN.iter() {
        let bars: Vec<(usize, &BarType)> = drawn.set.model.slabs.iter().enumerate().flat_map(|(i, s)| s.bars.iter().map(move |b| (i, b))).collect();
        let digits = bars.len().to_string().len().max(2);
        for (i, (_, bar)) in bars.iter().enumerate() {
            assert_eq!(bar.mark, format!("{:0digits$}", i + 1), "seed {}", drawn.seed);
        }
        let order = |b: &BarType| ["B1", "B2", "T1", "T2", "E"].iter().position(|l| *l == b.layer.name()).unwrap();
        let keys: Vec<(usize, usize)> = bars.iter().map(|(slab, b)| (*slab, order(b))).collect();
        assert!(keys.is_sorted(), "seed {}: {keys:?}", drawn.seed);
    }
}

#[test]
fn no_two_marks_of_a_slab_are_alike() {
    for (drawn, _, slab) in every_slab() {
        let kinds: BTreeSet<String> =
            slab.bars.iter().map(|b| format!("{} {} {:?} {} {} {}", b.size, b.shape, b.dims, b.length, b.layer.name(), b.role.name())).collect();
        assert_eq!(kinds.len(), slab.bars.len(), "seed {}", drawn.seed);
    }
}

#[test]
fn mass_is_number_times_length_times_the_table() {
    for drawn in DRAWN.iter() {
        let mut sum = 0.0;
        for (_, bar) in drawn.set.model.bars() {
            let kg_m = KG_M.iter().find(|(size, _)| *size == bar.size).unwrap().1;
            let kg = f64::from(bar.total()) * f64::from(bar.length) / 1000.0 * kg_m;
            assert!((bar.mass() - kg).abs() < 1e-6, "seed {}, mark {}: {} and {kg}", drawn.seed, bar.mark, bar.mass());
            sum += kg;
        }
        assert!((drawn.set.model.total_kg() - sum).abs() < 1e-6 && sum > 0.0);
    }
}

#[test]
fn at_midspan_b1_is_no_less_than_called() {
    for (drawn, index, slab) in every_slab() {
        let given = &drawn.draft.slabs[index];
        for (span, bay) in slab.stations.spans.iter().zip(&given.spans) {
            let middle = (span.left_face + span.right_face) / 2.0;
            let (size, spacing) = bay.bottom;
            let room = slab.width - 2.0 * f64::from(given.cover[2]) - f64::from(size);
            let called = (room / f64::from(spacing)).ceil() as usize + 1;
            let b1 = slab.bars.iter().filter(|b| b.layer == Layer::B1 && b.size == size);
            let there = b1.flat_map(|b| b.placements()).filter(|a| a.iter().any(|p| p[0] <= middle) && a.iter().any(|p| p[0] >= middle)).count();
            assert!(there >= called, "seed {}: {there} of {called} bars at x = {middle}", drawn.seed);
        }
    }
}

/// Overlap of the bottom bars that run on over an inner support, mm.
fn lap_over(slab: &SlabModel, support: usize) -> f64 {
    let centre = slab.stations.supports[support].centre;
    let ends = |a: &[[f64; 3]]| (a.iter().map(|p| p[0]).fold(f64::INFINITY, f64::min), a.iter().map(|p| p[0]).fold(f64::NEG_INFINITY, f64::max));
    let b1 = slab.bars.iter().filter(|b| b.layer == Layer::B1).flat_map(|b| b.placements()).map(|a| ends(&a));
    let over: Vec<(f64, f64)> = b1.filter(|(low, high)| *low < centre && *high > centre).collect();
    let (from_left, from_right): (Vec<_>, Vec<_>) = over.into_iter().partition(|(low, high)| low + high < 2.0 * centre);
    from_left.iter().map(|e| e.1).fold(f64::INFINITY, f64::min) - from_right.iter().map(|e| e.0).fold(f64::NEG_INFINITY, f64::max)
}

#[test]
fn a_greater_share_lapped_at_one_section_never_shortens_a_lap() {
    let several = DRAWN.iter().filter(|d| d.draft.longest == 12_000 && d.draft.slabs.iter().any(|s| s.spans.len() > 1));
    let mut grown = 0;
    for drawn in several.take(8) {
        let mut before: Option<Vec<f64>> = None;
        for share in [25, 33, 50, 100] {
            let mut draft = drawn.draft.clone();
            draft.share = share;
            let set = detailed(&draft.text(None));
            if set.model.ledger.addresses().any(|a| a.ends_with("/cut")) {
                break;
            }
            let laps: Vec<f64> = set.model.slabs.iter().flat_map(|s| (1..s.stations.last()).map(|j| lap_over(s, j))).collect();
            assert!(laps.iter().all(|l| *l >= 200.0), "seed {}: {laps:?}", drawn.seed);
            if let Some(before) = &before {
                let pairs = || before.iter().zip(&laps);
                assert!(pairs().all(|(a, b)| b >= &(a - 0.01)), "seed {}, share {share}: {before:?} then {laps:?}", drawn.seed);
                grown += pairs().filter(|(a, b)| *b > a).count();
            }
            before = Some(laps);
        }
    }
    assert!(grown > 10, "only {grown} laps grew");
}

#[test]
fn every_mark_stop_reach_and_lap_is_explained() {
    for (drawn, _, slab) in every_slab() {
        let ledger = &drawn.set.model.ledger;
        let mut wanted: Vec<String> = Vec::new();
        for bar in &slab.bars {
            let at = format!("{}/mark:{}", slab.mark, bar.mark);
            wanted.extend(["/length", "/count", "/mass"].map(|e| format!("{at}{e}")));
            wanted.extend(bar.dims.keys().map(|letter| format!("{at}/{letter}")));
            wanted.push(at);
        }
        for k in 1..=slab.stations.spans.len() {
            wanted.extend(["left", "right"].map(|side| format!("{}/span:{k}/B1/stop-{side}", slab.mark)));
        }
        for grid in &slab.grids[1..slab.stations.last()] {
            wanted.extend(["T1/reach-left", "T1/reach-right", "B1/lap"].map(|what| format!("{}/support:{grid}/{what}", slab.mark)));
        }
        for address in wanted {
            let steps = ledger.get(&address).unwrap_or_default();
            assert!(!steps.is_empty() && steps.iter().any(|s| !s.result.is_empty()), "seed {}: nothing explains {address}", drawn.seed);
        }
    }
}
