//! D19: where bars stand across their run, and how many.

use crate::base::{TOUCH, gaps};

/// The last gap is not left narrower than this, mm.
const NARROW: f64 = 75.0;

/// Lines from `first` to `last` at `spacing`, the last gap taking the remainder; a last gap under 75 mm is shared with the one before.
pub fn fill(first: f64, last: f64, spacing: f64) -> Vec<f64> {
    let n = gaps(last - first, spacing);
    let mut lines: Vec<f64> = (0..n).map(|i| first + i as f64 * spacing).collect();
    lines.push(last);
    if n >= 2 && last - lines[n - 1] < NARROW - TOUCH {
        lines[n - 1] = (lines[n - 2] + last) / 2.0;
    }
    lines
}

/// Bars across a width with side cover to the bar: first and last at the covers.
pub fn across(width: f64, side: f64, size: u32, spacing: f64) -> Vec<f64> {
    let inset = side + f64::from(size) / 2.0;
    fill(inset, width - inset, spacing)
}

/// Distribution in a clear length: ceil(length / spacing) bars, centred at their spacing.
pub fn centred(from: f64, to: f64, spacing: f64) -> Vec<f64> {
    let length = to - from;
    let n = gaps(length, spacing);
    let first = (length - n.saturating_sub(1) as f64 * spacing) / 2.0;
    (0..n).map(|i| from + first + i as f64 * spacing).collect()
}

/// Moves lines by `by` towards higher values; one that this would push past `limit` moves the other way (D18).
pub fn beside(lines: &[f64], by: f64, limit: f64) -> Vec<f64> {
    lines.iter().map(|y| if y + by > limit + TOUCH { y - by } else { y + by }).collect()
}

/// Bars that stand already: lines and sizes, sorted.
pub struct Standing {
    sorted: Vec<(f64, f64)>,
}

impl Standing {
    pub fn new(bars: impl IntoIterator<Item = (f64, f64)>) -> Standing {
        let mut sorted: Vec<(f64, f64)> = bars.into_iter().collect();
        sorted.sort_by(|a, b| a.0.total_cmp(&b.0));
        Standing { sorted }
    }

    /// The place nearest to `x` at which a bar of `size` overlaps none of these, within `low..high`: in contact beside one of them
    /// where that is free, else the next free millimetre within reach; `x` itself where there is none.
    pub fn clear(&self, x: f64, size: f64, low: f64, high: f64) -> f64 {
        const REACH: i32 = 90;
        let from = self.sorted.partition_point(|(o, _)| *o < x - 3.0 * f64::from(REACH));
        let near: Vec<(f64, f64)> = self.sorted[from..].iter().copied().take_while(|(o, _)| *o < x + 3.0 * f64::from(REACH)).collect();
        let overlaps = |at: f64| near.iter().any(|(o, s)| (at - o).abs() < (size + s) / 2.0 - TOUCH);
        if !overlaps(x) {
            return x;
        }
        let is_free = |at: &f64| *at >= low - TOUCH && *at <= high + TOUCH && !overlaps(*at);
        let touching = near.iter().flat_map(|(o, s)| [o + (size + s) / 2.0, o - (size + s) / 2.0]);
        let closest = touching.filter(is_free).min_by(|a, b| (a - x).abs().total_cmp(&(b - x).abs()).then(b.total_cmp(a)));
        closest.or_else(|| (1..=REACH).flat_map(|mm| [x + f64::from(mm), x - f64::from(mm)]).find(is_free)).unwrap_or(x)
    }
}

/// The greatest clear gap from a line of either set to its nearest in the other, mm.
pub fn worst_gap(a: &[f64], size_a: f64, b: &[f64], size_b: f64) -> f64 {
    let sorted = |set: &[f64]| {
        let mut set = set.to_vec();
        set.sort_by(f64::total_cmp);
        set
    };
    let (a, b) = (sorted(a), sorted(b));
    let nearest = |y: f64, set: &[f64]| {
        let at = set.partition_point(|o| *o < y);
        set[at.saturating_sub(1)..set.len().min(at + 1)].iter().map(|o| (o - y).abs()).fold(f64::INFINITY, f64::min)
    };
    let worst = a.iter().map(|y| nearest(*y, &b)).chain(b.iter().map(|y| nearest(*y, &a))).fold(0.0, f64::max);
    (worst - (size_a + size_b) / 2.0).max(0.0)
}
