//! Each mark by itself: can it be bent, is it rounded, counted and weighed as it should be.

use super::{Slate, Verdict};
use crate::base::{bar_area, polyline_length};
use crate::steel::bend::{Bent, Dims};
use crate::steel::walk::walk;
use crate::tables::tables;

pub(super) fn checks(slate: &mut Slate) {
    let limit = tables().notes.limits.handling_kg.value;
    let longest = slate.job.basis.longest_bar.value;
    for mark in &slate.model.bars {
        let at = format!("mark:{}", mark.mark);
        let dims: Dims = mark.dims.iter().map(|(l, v)| (*l, f64::from(*v))).collect();
        match Bent::new(mark.shape, mark.size, dims) {
            Ok(bent) => {
                if let Some(worst) = bent.conditions().into_iter().min_by(|a, b| (a.value - a.limit).total_cmp(&(b.value - b.limit))) {
                    slate.at_least("bend-least", &at, worst.value, worst.limit, "mm");
                }
                match walk(&bent) {
                    Ok(walked) => {
                        if walked.least_straight.is_finite() {
                            slate.at_least("bend-straight", &at, walked.least_straight, 4.0 * f64::from(mark.size), "mm");
                        }
                        // The formula may fall short of the centre line by a few millimetres, inside the cutting tolerance of 25.
                        slate.at_least("length-formula", &at, f64::from(mark.length), walked.length - 5.0, "mm");
                    }
                    Err(_) => slate.at_least("bend-straight", &at, 0.0, 4.0 * f64::from(mark.size), "mm"),
                }
            }
            Err(_) => slate.at_least("bend-least", &at, 0.0, 1.0, "mm"),
        }
        slate.at_most("length-most", &at, f64::from(mark.length), longest, "mm");
        let off = mark.dims.values().map(|v| v % 5).max().unwrap_or(0) + mark.length % 25;
        slate.at_most("rounding", &at, f64::from(off), 0.0, "mm");
        let placed = mark.placements().count();
        slate.file(
            "count",
            &at,
            f64::from(mark.total()),
            placed as f64 * f64::from(slate.slab.members),
            "",
            mark.total() as usize == placed * slate.slab.members as usize,
            Verdict::Fail,
        );
        if mark.is_straight() {
            let drawn = mark.sets.iter().map(|s| (polyline_length(&s.axis) - f64::from(mark.length)).abs()).fold(0.0, f64::max);
            slate.at_most("rounding", &format!("{at}/axis"), drawn, 0.0, "mm");
        }
        let volume = bar_area(mark.size) * f64::from(mark.length) * f64::from(mark.total()) * 1e-9 * tables().bars.density_kg_m3;
        let ratio = mark.mass() / volume.max(1e-9);
        slate.file("mass", &at, ratio, 1.0, "", (ratio - 1.0).abs() < 0.003, Verdict::Fail);
        let one = mark.mass() / f64::from(mark.total().max(1));
        slate.file("handling", &at, one, limit, "kg", one <= limit, Verdict::Warn);
    }
}
