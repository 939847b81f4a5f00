//! Which bend fits a depth, and where the slab ends stand.

use super::Work;
use crate::tables::tables;

/// The cover line of a slab end.
pub(super) fn face(work: &Work, side: usize) -> f64 {
    if side == 0 { work.stations.start + work.side() } else { work.stations.end - work.side() }
}

/// The shape in which a size closes the depth between the covers: 21, else hairpin 13; none where neither bends.
pub(super) fn closing(work: &Work, size: u32) -> Option<(&'static str, f64)> {
    closing_in(work.upright(work.between_covers()), size)
}

/// The same in a depth that is given, mm overall.
pub(super) fn closing_in(depth: f64, size: u32) -> Option<(&'static str, f64)> {
    let bar = tables().known_bar(size);
    let d = f64::from(size);
    if depth >= bar.over_two_bends {
        Some(("21", depth))
    } else if depth >= 2.0 * (bar.radius + d) && depth - 2.0 * d <= 400.0 {
        Some(("13", depth))
    } else {
        None
    }
}
