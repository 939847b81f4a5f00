//! Rectangles on paper, and the box that a text fills.

use crate::scene::Anchor;
use crate::tables::font::{face, text_box};

/// A rectangle on paper, mm.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Area {
    pub min: [f64; 2],
    pub max: [f64; 2],
}

impl Area {
    pub fn new(min: [f64; 2], max: [f64; 2]) -> Area {
        Area { min, max }
    }

    pub fn width(&self) -> f64 {
        self.max[0] - self.min[0]
    }

    pub fn height(&self) -> f64 {
        self.max[1] - self.min[1]
    }

    pub fn middle(&self) -> [f64; 2] {
        [(self.min[0] + self.max[0]) / 2.0, (self.min[1] + self.max[1]) / 2.0]
    }

    pub fn meets(&self, other: &Area) -> bool {
        (0..2).all(|i| self.min[i] < other.max[i] && other.min[i] < self.max[i])
    }

    pub fn holds(&self, other: &Area) -> bool {
        (0..2).all(|i| self.min[i] <= other.min[i] && other.max[i] <= self.max[i])
    }

    pub fn grown(&self, by: f64) -> Area {
        Area { min: [self.min[0] - by, self.min[1] - by], max: [self.max[0] + by, self.max[1] + by] }
    }

    /// The part of a straight piece inside the rectangle, as shares of its length.
    pub fn part_inside(&self, a: [f64; 2], b: [f64; 2]) -> Option<(f64, f64)> {
        let (mut from, mut to) = (0.0f64, 1.0f64);
        for i in 0..2 {
            let d = b[i] - a[i];
            if d.abs() < 1e-12 {
                if a[i] <= self.min[i] || a[i] >= self.max[i] {
                    return None;
                }
                continue;
            }
            let (t0, t1) = ((self.min[i] - a[i]) / d, (self.max[i] - a[i]) / d);
            from = from.max(t0.min(t1));
            to = to.min(t0.max(t1));
        }
        (from < to).then_some((from, to))
    }

    /// Whether a straight piece passes through the rectangle.
    pub fn is_crossed(&self, a: [f64; 2], b: [f64; 2]) -> bool {
        self.part_inside(a, b).is_some()
    }
}

/// The box a text fills, mm: capitals and descenders, exact width of the shipped font.
pub fn text_area(at: [f64; 2], height: f64, text: &str, anchor: Anchor, upward: bool) -> Area {
    wide_area(at, height, face().width(text, height), anchor, upward)
}

/// The box of a text whose width is known, mm.
pub fn wide_area(at: [f64; 2], height: f64, width: f64, anchor: Anchor, upward: bool) -> Area {
    let [min, max] = text_box(at, height, width, anchor.before(), upward);
    Area::new(min, max)
}
