//! D10a: where the planner chooses bars.

use crate::base::{TOUCH, area_per_metre, down};
use crate::job::Bars;
use crate::rules::spacing::least_gap;
use crate::tables::tables;

/// The lightest bars that give `area(size)` mm²/m within `most` mm: sizes from 10 up that `fits` lets through, spacing in 25 mm steps;
/// a tie goes to the wider. None where no size gives the area.
pub fn bars(area: impl Fn(u32) -> f64, most: f64, aggregate: f64, fits: impl Fn(u32) -> bool) -> Option<Bars> {
    let candidates = tables().preferred_sizes().filter(|s| *s >= 10 && fits(*s)).filter_map(|size| {
        let widest = down(most.min(area_per_metre(size, 1.0) / area(size).max(TOUCH)), 25.0);
        let least = f64::from(size) + least_gap(size, aggregate);
        (widest >= least).then_some(Bars { size, spacing: widest })
    });
    candidates.min_by(|a, b| a.area().total_cmp(&b.area()).then(b.spacing.total_cmp(&a.spacing)))
}

/// The same area in another size: the widest 25 mm step that gives it.
pub fn equal_area(bars: &Bars, size: u32) -> Bars {
    Bars { size, spacing: down(area_per_metre(size, 1.0) / bars.area(), 25.0).max(25.0) }
}

/// Smaller preferred sizes, from the next one down.
pub fn smaller(size: u32) -> impl Iterator<Item = u32> {
    tables().preferred_sizes().rev().filter(move |s| *s < size)
}
