//! From slab to paper: one station line for all bands of a sheet, and the occurrences of each mark on it.

use crate::place::{BarType, Set, SlabModel};
use crate::tables::{Pens, SheetSize, tables};

/// The part of a slab on one sheet and how it maps to paper.
#[derive(Clone, Debug)]
pub struct View {
    /// Plan and station scale: 1 to this.
    pub scale: f64,
    /// Stations shown, mm in the slab.
    pub low: f64,
    pub high: f64,
    /// Where station 0 falls on paper, mm.
    pub origin: f64,
    pub pens: Pens,
    pub note: f64,
    pub call_out: f64,
}

impl View {
    pub fn new(size: &SheetSize, scale: f64, low: f64, high: f64, left: f64) -> View {
        let text = &tables().sheets.text;
        View { scale, low, high, origin: left - low / scale, pens: size.pens, note: text.note, call_out: text.call_out }
    }

    /// A station on paper, mm.
    pub fn x(&self, station: f64) -> f64 {
        self.origin + station / self.scale
    }

    pub fn shows(&self, station: f64) -> bool {
        station >= self.low - 0.5 && station <= self.high + 0.5
    }

    /// The part of a length of stations that is shown; none where it lies outside.
    pub fn clip(&self, from: f64, to: f64) -> Option<(f64, f64)> {
        let (from, to) = (from.max(self.low), to.min(self.high));
        (from < to).then_some((from, to))
    }
}

/// A mark within one zone: its bars there, as sets.
#[derive(Clone, Debug)]
pub struct Occurrence<'a> {
    pub bar: &'a BarType,
    pub zone: &'a str,
    pub sets: Vec<&'a Set>,
    /// The first place of its mark on the drawing, where the number is written.
    pub first: bool,
}

impl<'a> Occurrence<'a> {
    /// All zones of all marks of a slab, marks in order, zones as they come.
    pub fn of(slab: &'a SlabModel) -> Vec<Occurrence<'a>> {
        let mut list: Vec<Occurrence<'a>> = Vec::new();
        for bar in &slab.bars {
            let start = list.len();
            for set in &bar.sets {
                // Turned bars of one zone are two views of it; a mark that stands at both slab ends has two zones.
                match list[start..].iter_mut().find(|o| o.zone == set.zone && o.extent() == extent(set)) {
                    Some(known) if bar.is_along_span() => known.sets.push(set),
                    _ if !bar.is_along_span() => match list[start..].iter_mut().find(|o| o.zone == set.zone) {
                        Some(known) => known.sets.push(set),
                        None => list.push(Occurrence { bar, zone: &set.zone, sets: vec![set], first: list.len() == start }),
                    },
                    _ => list.push(Occurrence { bar, zone: &set.zone, sets: vec![set], first: list.len() == start }),
                }
            }
        }
        list
    }

    /// Extent along the span of a bar of this occurrence, mm.
    pub fn extent(&self) -> (f64, f64) {
        self.sets.first().map_or((0.0, 0.0), |s| extent(s))
    }

    pub fn count(&self) -> u32 {
        self.sets.iter().map(|s| s.count).sum()
    }

    /// Places of its bars across their run (y of bars along the span, x of bars across it), sorted.
    pub fn lines(&self, axis: usize) -> Vec<f64> {
        let mut lines: Vec<f64> = self.sets.iter().flat_map(|s| (0..s.count).map(|i| s.axis[0][axis] + s.step[axis] * f64::from(i))).collect();
        lines.sort_by(f64::total_cmp);
        lines
    }

    /// The bar nearest to a place across its run.
    pub fn nearest(&self, axis: usize, to: f64) -> f64 {
        self.lines(axis).into_iter().min_by(|a, b| (a - to).abs().total_cmp(&(b - to).abs())).unwrap_or(to)
    }

    pub fn turn(&self) -> &'static str {
        self.sets.first().map_or("", |s| s.turn)
    }

    /// The call-out: number, type and size, mark, spacing, layer, comment; the mark alone after its first place.
    pub fn call_out(&self) -> String {
        if !self.first {
            return self.bar.mark.clone();
        }
        let spacing = self.spacing();
        let comment = match (self.turn(), self.bar.shape) {
            ("", "21" | "13") if self.bar.layer == crate::plan::Layer::E => " U-bar",
            (turn, _) if !turn.is_empty() => return format!("{} {turn}", self.head(spacing)),
            _ => "",
        };
        format!("{}{comment}", self.head(spacing))
    }

    /// Spacing of the call-out: as called; of alternate bars, that of this mark alone.
    fn spacing(&self) -> f64 {
        let called = self.sets.first().map_or(0.0, |s| s.spacing);
        let main = self.sets.iter().max_by_key(|s| s.count).filter(|s| s.count > 1 && s.turn == "alt");
        main.map_or(called, |s| s.step[0].abs().max(s.step[1].abs()))
    }

    fn head(&self, spacing: f64) -> String {
        let bar = self.bar;
        let held = bar.role == crate::plan::Role::Edge && bar.is_straight();
        let spacing = if held { String::new() } else { format!("-{}", crate::base::num(spacing, 0)) };
        format!("{}{}-{}{spacing} {}", bar.each(), bar.type_size(), bar.mark, bar.layer.name())
    }
}

fn extent(set: &Set) -> (f64, f64) {
    let low = set.axis.iter().map(|p| p[0]).fold(f64::INFINITY, f64::min);
    let high = set.axis.iter().map(|p| p[0]).fold(f64::NEG_INFINITY, f64::max);
    (low, high)
}
