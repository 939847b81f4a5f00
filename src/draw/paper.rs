//! A sheet while it is drawn: the scene, and what already stands on it, so that text can be placed where nothing else is.

use crate::scene::{Anchor, Layer, Pen, Scene, Shape, Weight};
use crate::tables::font::face;

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

    pub fn meets(&self, other: &Area) -> bool {
        (0..2).all(|i| self.min[i] < other.max[i] && other.min[i] < self.max[i])
    }

    pub fn holds(&self, other: &Area) -> bool {
        (0..2).all(|i| self.min[i] <= other.min[i] && other.max[i] <= self.max[i])
    }

    pub fn grown(&self, by: f64) -> Area {
        Area { min: [self.min[0] - by, self.min[1] - by], max: [self.max[0] + by, self.max[1] + by] }
    }

    /// Whether a straight piece passes through the rectangle.
    pub fn is_crossed(&self, a: [f64; 2], b: [f64; 2]) -> bool {
        let (mut from, mut to) = (0.0f64, 1.0f64);
        for i in 0..2 {
            let d = b[i] - a[i];
            if d.abs() < 1e-12 {
                if a[i] <= self.min[i] || a[i] >= self.max[i] {
                    return false;
                }
                continue;
            }
            let (t0, t1) = ((self.min[i] - a[i]) / d, (self.max[i] - a[i]) / d);
            from = from.max(t0.min(t1));
            to = to.min(t0.max(t1));
        }
        from < to
    }
}

/// The box a text fills, mm: capitals and descenders, exact width of the shipped font.
pub fn text_area(at: [f64; 2], height: f64, text: &str, anchor: Anchor, weight: Weight, upward: bool) -> Area {
    let width = face(weight).width(text, height);
    let before = match anchor {
        Anchor::Start => 0.0,
        Anchor::Middle => width / 2.0,
        Anchor::End => width,
    };
    let (above, below) = (height, 0.25 * height);
    if upward {
        Area::new([at[0] - above, at[1] - width + before], [at[0] + below, at[1] + before])
    } else {
        Area::new([at[0] - before, at[1] - above], [at[0] - before + width, at[1] + below])
    }
}

/// A place where a text may stand.
#[derive(Clone, Copy, Debug)]
pub struct Spot {
    pub at: [f64; 2],
    pub anchor: Anchor,
    pub upward: bool,
}

/// How a text is written.
#[derive(Clone, Debug)]
pub struct Lettering {
    pub layer: Layer,
    pub mark: String,
    pub height: f64,
    pub weight: Weight,
}

pub struct Paper {
    pub scene: Scene,
    texts: Vec<Area>,
    lines: Vec<([f64; 2], [f64; 2])>,
}

impl Paper {
    pub fn new(width: f64, height: f64) -> Paper {
        Paper { scene: Scene { width, height, ..Scene::default() }, texts: Vec::new(), lines: Vec::new() }
    }

    /// A line that text keeps away from.
    pub fn line(&mut self, layer: Layer, mark: &str, points: &[[f64; 2]], pen: Pen) {
        self.lines.extend(points.windows(2).map(|w| (w[0], w[1])));
        self.scene.push(layer, mark, Shape::Line { points: points.to_vec(), closed: false, pen });
    }

    pub fn outline(&mut self, layer: Layer, points: &[[f64; 2]], pen: Pen) {
        let closing = points.iter().copied().chain(points.first().copied()).collect::<Vec<_>>();
        self.lines.extend(closing.windows(2).map(|w| (w[0], w[1])));
        self.scene.push(layer, "", Shape::Line { points: points.to_vec(), closed: true, pen });
    }

    pub fn dot(&mut self, layer: Layer, mark: &str, centre: [f64; 2], radius: f64) {
        let r = radius;
        self.lines.push(([centre[0] - r, centre[1]], [centre[0] + r, centre[1]]));
        self.scene.push(layer, mark, Shape::Circle { centre, radius, pen: None, filled: true });
    }

    pub fn ring(&mut self, layer: Layer, mark: &str, centre: [f64; 2], radius: f64, pen: Pen) {
        self.lines.push(([centre[0] - radius, centre[1]], [centre[0] + radius, centre[1]]));
        self.scene.push(layer, mark, Shape::Circle { centre, radius, pen: Some(pen), filled: false });
    }

    /// Text at a fixed place.
    pub fn text(&mut self, lettering: &Lettering, spot: Spot, text: &str) -> Area {
        let area = text_area(spot.at, lettering.height, text, spot.anchor, lettering.weight, spot.upward);
        self.texts.push(area);
        let shape =
            Shape::Text { at: spot.at, height: lettering.height, text: text.into(), anchor: spot.anchor, weight: lettering.weight, upward: spot.upward };
        self.scene.push(lettering.layer, &lettering.mark, shape);
        area
    }

    /// Keeps text out of an area.
    pub fn reserve(&mut self, area: Area) {
        self.texts.push(area);
    }

    /// How many texts and lines an area would meet.
    pub fn conflicts(&self, area: &Area) -> usize {
        let roomy = area.grown(0.4);
        let texts = self.texts.iter().filter(|t| t.meets(&roomy)).count();
        let lines = self.lines.iter().filter(|(a, b)| roomy.is_crossed(*a, *b)).count();
        10 * texts + lines
    }

    /// Writes a text at the first spot that is free and inside `within`; where none is, at the one that meets least.
    /// Returns the area and whether it is free.
    pub fn place(&mut self, lettering: &Lettering, spots: impl IntoIterator<Item = Spot>, text: &str, within: &Area) -> (Area, bool) {
        let mut best: Option<(usize, Spot)> = None;
        for spot in spots {
            let area = text_area(spot.at, lettering.height, text, spot.anchor, lettering.weight, spot.upward);
            let outside = if within.holds(&area) { 0 } else { 1000 };
            let cost = outside + self.conflicts(&area);
            if best.is_none_or(|(c, _)| cost < c) {
                best = Some((cost, spot));
            }
            if cost == 0 {
                break;
            }
        }
        match best {
            Some((cost, spot)) => (self.text(lettering, spot, text), cost == 0),
            None => (Area::new([0.0, 0.0], [0.0, 0.0]), false),
        }
    }
}

/// Spots along a level line from `from` to `to` at height `y`: above it first, from the middle outwards, then below.
pub fn along_level(from: f64, to: f64, y: f64, height: f64) -> Vec<Spot> {
    let mut spots = Vec::new();
    for offset in [-1.2, height + 1.2] {
        for share in [0.5, 0.4, 0.6, 0.3, 0.7, 0.2, 0.8, 0.1, 0.9] {
            spots.push(Spot { at: [from + share * (to - from), y + offset], anchor: Anchor::Middle, upward: false });
        }
    }
    spots
}

/// Spots along an upright line at `x` from `low` to `high` on paper: left of it first, from the middle outwards, then right.
pub fn along_upright(x: f64, low: f64, high: f64, height: f64, right_first: bool) -> Vec<Spot> {
    let mut spots = Vec::new();
    let sides = if right_first { [height + 1.2, -1.2] } else { [-1.2, height + 1.2] };
    for offset in sides {
        for i in 0..=24 {
            // From the middle outwards.
            let step = f64::from((i + 1) / 2) / 26.0 * if i % 2 == 0 { 1.0 } else { -1.0 };
            spots.push(Spot { at: [x + offset, low + (0.5 + step) * (high - low)], anchor: Anchor::Middle, upward: true });
        }
    }
    spots
}
