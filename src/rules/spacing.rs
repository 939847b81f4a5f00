//! Spacing limits: EN 1992-1-1:2004 8.2, 9.3.1.1(3) and 7.3.3.

use crate::tables::{SpacingMost, tables};

/// Where a spacing is looked at: main or distribution, in the zones of greatest moment or elsewhere.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Zone {
    Main,
    MainPeak,
    Distribution,
    DistributionPeak,
}

/// Greatest spacing, mm, in a slab `h` mm deep (9.3.1.1(3)).
pub fn most(zone: Zone, h: f64) -> f64 {
    let row = row(zone);
    (row.times_h * h).min(row.limit_mm)
}

/// The rule in words, such as min(3h, 400).
pub fn most_text(zone: Zone) -> String {
    let row = row(zone);
    format!("min({}h, {})", crate::base::num(row.times_h, 1), crate::base::num(row.limit_mm, 0))
}

fn row(zone: Zone) -> &'static SpacingMost {
    let s = &tables().national.spacing;
    match zone {
        Zone::Main => &s.main,
        Zone::MainPeak => &s.main_peak,
        Zone::Distribution => &s.distribution,
        Zone::DistributionPeak => &s.distribution_peak,
    }
}

/// Least clear gap between bars that do not lap, mm: max(φ, aggregate + 5, 20) (8.2(2)).
pub fn least_gap(size: u32, aggregate: f64) -> f64 {
    f64::from(size).max(aggregate + 5.0).max(20.0)
}

/// Crack control without calculation for w = 0.3 mm (7.3.3): greatest size and greatest spacing at a steel stress, either is enough.
/// Values between rows are interpolated; under the first row it holds, over the last there is none.
pub fn crack_limits(stress: f64) -> Option<(f64, f64)> {
    let rows = &tables().national.crack;
    let (first, last) = (rows.first()?, rows.last()?);
    if stress <= first.stress {
        return Some((first.size, first.spacing));
    }
    if stress > last.stress {
        return None;
    }
    rows.windows(2).find(|w| stress <= w[1].stress).map(|w| {
        let share = (stress - w[0].stress) / (w[1].stress - w[0].stress);
        (w[0].size + share * (w[1].size - w[0].size), w[0].spacing + share * (w[1].spacing - w[0].spacing))
    })
}
