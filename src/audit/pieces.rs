//! Placed bars taken apart into their straight pieces, for measuring.

use crate::base::Point3;
use crate::place::{BarType, SlabModel};
use crate::plan::{Layer, Role};

/// A straight piece of one placed bar, parallel to an axis of the slab.
#[derive(Clone, Debug)]
pub struct Piece {
    /// Number of the bar it belongs to, counted over the slab.
    pub bar: usize,
    /// Index of its mark in the slab.
    pub kind: usize,
    /// Number of its zone, counted over the slab.
    pub zone: usize,
    pub layer: Layer,
    pub role: Role,
    pub size: f64,
    /// 0 along the span, 1 across it, 2 upright.
    pub axis: usize,
    pub low: Point3,
    pub high: Point3,
    /// Whether it is top steel: the upper level of a bar that has two, else over mid depth.
    pub top: bool,
    /// Whether its bar is straight from end to end.
    pub straight: bool,
}

impl Piece {
    pub fn length(&self) -> f64 {
        self.high[self.axis] - self.low[self.axis]
    }

    /// How much of two parallel pieces lies side by side, mm.
    pub fn overlap(&self, other: &Piece) -> f64 {
        self.high[self.axis].min(other.high[self.axis]) - self.low[self.axis].max(other.low[self.axis])
    }

    pub fn covers(&self, axis: usize, at: f64) -> bool {
        self.low[axis] <= at && at <= self.high[axis]
    }
}

/// Pieces by direction.
pub struct Pieces {
    pub by_axis: [Vec<Piece>; 3],
}

impl Pieces {
    pub fn of(slab: &SlabModel) -> Pieces {
        let mut by_axis: [Vec<Piece>; 3] = Default::default();
        let mut zones: Vec<&str> = Vec::new();
        let mut bar = 0;
        for (kind, mark) in slab.bars.iter().enumerate() {
            for set in &mark.sets {
                let zone = zones.iter().position(|z| *z == set.zone).unwrap_or(zones.len());
                if zone == zones.len() {
                    zones.push(&set.zone);
                }
                for axis in set.bars() {
                    for pair in axis.windows(2) {
                        let mut piece = piece([kind, bar, zone], mark, pair[0], pair[1]);
                        piece.top = is_top(&axis, piece.low[2], slab.thickness);
                        by_axis[piece.axis].push(piece);
                    }
                    bar += 1;
                }
            }
        }
        Pieces { by_axis }
    }

    pub fn all(&self) -> impl Iterator<Item = &Piece> {
        self.by_axis.iter().flatten()
    }

    /// Level pieces along the span in a layer or role.
    pub fn along(&self, wanted: impl Fn(&Piece) -> bool) -> Vec<&Piece> {
        self.by_axis[0].iter().filter(|p| wanted(p)).collect()
    }

    pub fn across(&self, wanted: impl Fn(&Piece) -> bool) -> Vec<&Piece> {
        self.by_axis[1].iter().filter(|p| wanted(p)).collect()
    }
}

fn piece([kind, bar, zone]: [usize; 3], mark: &BarType, a: Point3, b: Point3) -> Piece {
    let axis = (0..3).max_by(|i, j| (a[*i] - b[*i]).abs().total_cmp(&(a[*j] - b[*j]).abs())).unwrap_or(0);
    let low = std::array::from_fn(|i| a[i].min(b[i]));
    let high = std::array::from_fn(|i| a[i].max(b[i]));
    Piece { bar, kind, zone, layer: mark.layer, role: mark.role, size: f64::from(mark.size), axis, low, high, top: false, straight: mark.is_straight() }
}

fn is_top(axis: &[Point3], level: f64, thickness: f64) -> bool {
    let levels: Vec<f64> = axis.windows(2).filter(|w| w[0][2] == w[1][2]).map(|w| w[0][2]).collect();
    let highest = levels.iter().copied().fold(f64::NEG_INFINITY, f64::max);
    let lowest = levels.iter().copied().fold(f64::INFINITY, f64::min);
    if highest - lowest > 1.0 { level >= highest - 1.0 } else { level > thickness / 2.0 }
}

/// Pieces that lap within a span are one continuous line of steel: each chain of them as one piece. Laps over a support do not chain.
pub fn chained(pieces: &[&Piece], supports: &[f64]) -> Vec<Piece> {
    let mut sorted: Vec<Piece> = pieces.iter().map(|p| (*p).clone()).collect();
    sorted.sort_by(|a, b| a.low[0].total_cmp(&b.low[0]));
    let mut chains: Vec<Piece> = Vec::new();
    for piece in sorted {
        let follows = |chain: &Piece| {
            let overlap = chain.high[0].min(piece.high[0]) - piece.low[0];
            let beside = (chain.low[1] - piece.low[1]).abs() - (chain.size + piece.size) / 2.0 <= 50.0;
            let (from, to) = (piece.low[0], chain.high[0]);
            let over_support = piece.layer == Layer::B1 && supports.iter().any(|x| from < *x && *x < to);
            overlap > 100.0 && overlap < 0.5 * piece.length() && piece.high[0] > chain.high[0] && beside && !over_support && chain.zone == piece.zone
        };
        match chains.iter_mut().find(|c| follows(c)) {
            Some(chain) => chain.high = piece.high,
            None => chains.push(piece),
        }
    }
    chains
}

/// Sorted places of pieces on an axis, and the widest and the mean gap between neighbours, mm.
pub struct Row {
    pub places: Vec<f64>,
}

impl Row {
    pub fn of<'p>(pieces: impl IntoIterator<Item = &'p Piece>, axis: usize) -> Row {
        let mut places: Vec<f64> = pieces.into_iter().map(|p| p.low[axis]).collect();
        places.sort_by(f64::total_cmp);
        Row { places }
    }

    /// The widest gap, mm.
    pub fn widest(&self) -> f64 {
        self.places.windows(2).map(|w| w[1] - w[0]).fold(0.0, f64::max)
    }

    /// The widest gap, less what a bar adds that is set aside by up to its own size to lap in contact or keep clear of another, mm.
    pub fn widest_called(&self, size: f64) -> f64 {
        let mut gaps: Vec<f64> = self.places.windows(2).map(|w| w[1] - w[0]).collect();
        gaps.sort_by(f64::total_cmp);
        let Some(median) = gaps.get(gaps.len() / 2).copied() else { return 0.0 };
        let widest = self.widest();
        if widest - median <= 2.0 * size { widest.min(median) } else { widest }
    }

    /// Centre distance that would give the same number over the same width, mm; infinite for under two bars.
    pub fn mean(&self) -> f64 {
        match self.places.as_slice() {
            [first, .., last] => (last - first) / (self.places.len() - 1) as f64,
            _ => f64::INFINITY,
        }
    }
}

/// Area per metre of the pieces that cross a station, mm²/m: each gives its section over the mean centre distance of all.
pub fn area_at(pieces: &[&Piece], axis: usize, at: f64, across: usize) -> f64 {
    let crossing: Vec<&Piece> = pieces.iter().copied().filter(|p| p.covers(axis, at)).collect();
    let mean = Row::of(crossing.iter().copied(), across).mean();
    if !mean.is_finite() || mean <= 0.0 {
        return 0.0;
    }
    let section: f64 = crossing.iter().map(|p| crate::base::bar_area(p.size as u32)).sum();
    section / crossing.len() as f64 * 1000.0 / mean
}
