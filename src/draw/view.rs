//! From slab to paper: one station line for all bands of a sheet, and the occurrences of each mark on it.

use crate::job::Slab;
use crate::place::{BarType, Set, SlabModel};
use crate::tables::{Pens, SheetSize};
use std::collections::BTreeMap;

/// A slab to be drawn: as designed, as placed, and where each mark stands.
pub struct Subject<'a> {
    pub slab: &'a Slab,
    pub model: &'a SlabModel,
    pub occurrences: Vec<Occurrence<'a>>,
}

impl<'a> Subject<'a> {
    pub fn new(slab: &'a Slab, model: &'a SlabModel) -> Subject<'a> {
        Subject { slab, model, occurrences: Occurrence::of(model) }
    }

    /// The grid line nearest to a station.
    pub fn nearest_grid(&self, station: f64) -> f64 {
        let grids = self.model.stations.supports.iter().map(|s| s.centre);
        grids.min_by(|a, b| (a - station).abs().total_cmp(&(b - station).abs())).unwrap_or(station)
    }
}

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
    /// Heights of notes and dimensions, call-outs, view titles, mm.
    pub note: f64,
    pub call_out: f64,
    pub title: f64,
    /// The sheet that shows what lies before `low`, where the slab is cut there.
    pub before: Option<usize>,
}

impl View {
    pub fn new(size: &SheetSize, scale: f64, low: f64, high: f64, left: f64) -> View {
        let text = size.text;
        View { scale, low, high, origin: left - low / scale, pens: size.pens, note: text.note, call_out: text.call_out, title: text.view, before: None }
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
    /// Bars of the mark in this zone, and whether this is the first of its places there (turned bars have two).
    pub in_zone: u32,
    pub leads: bool,
    /// Whether the mark stands in other zones too.
    pub elsewhere: bool,
}

impl<'a> Occurrence<'a> {
    /// All zones of all marks of a slab, marks in order, zones as they come.
    pub fn of(slab: &'a SlabModel) -> Vec<Occurrence<'a>> {
        slab.bars.iter().flat_map(Occurrence::of_mark).collect()
    }

    fn of_mark(bar: &'a BarType) -> Vec<Occurrence<'a>> {
        let mut list: Vec<Occurrence<'a>> = Vec::new();
        let mut known: BTreeMap<(&str, u64, u64), usize> = BTreeMap::new();
        for set in &bar.sets {
            // Turned bars of one zone are two views of it; a mark that stands at both slab ends has two zones.
            let (low, high) = if bar.is_along_span() { extent(set) } else { (0.0, 0.0) };
            match known.entry((&set.zone, low.to_bits(), high.to_bits())) {
                std::collections::btree_map::Entry::Occupied(at) => list[*at.get()].sets.push(set),
                std::collections::btree_map::Entry::Vacant(free) => {
                    free.insert(list.len());
                    list.push(Occurrence::new(bar, set, list.is_empty()));
                }
            }
        }
        let mut zones: BTreeMap<&str, (u32, usize)> = BTreeMap::new();
        for (i, occurrence) in list.iter().enumerate() {
            zones.entry(occurrence.zone).or_insert((0, i)).0 += occurrence.count();
        }
        for (i, occurrence) in list.iter_mut().enumerate() {
            let (count, first) = zones.get(occurrence.zone).copied().unwrap_or((0, i));
            (occurrence.in_zone, occurrence.leads, occurrence.elsewhere) = (count, first == i, zones.len() > 1);
        }
        list
    }

    fn new(bar: &'a BarType, set: &'a Set, first: bool) -> Occurrence<'a> {
        Occurrence { bar, zone: &set.zone, sets: vec![set], first, in_zone: 0, leads: true, elsewhere: false }
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

    pub fn turn(&self) -> &'static str {
        self.sets.first().map_or("", |s| s.turn)
    }

    /// The call-out: number, type and size, mark, spacing, layer, comment; where the mark stands in several zones the number here in
    /// brackets. After its first place the number of the mark is not written again: mark, spacing, number here.
    pub fn call_out(&self) -> String {
        if self.first { format!("{}{}", self.bar.each(), self.named()) } else { self.short() }
    }

    /// The call-out at its first place on a later sheet: all but the number of the mark.
    pub fn named(&self) -> String {
        let bar = self.bar;
        format!("{}-{}{} {}{}{}", bar.type_size(), bar.mark, self.spacing_text(), bar.layer.name(), self.comment(), self.here())
    }

    fn short(&self) -> String {
        if self.leads { format!("{}{}{}", self.bar.mark, self.spacing_text(), self.here()) } else { self.bar.mark.clone() }
    }

    /// The number in this zone, in brackets; of lapped pieces, lines times pieces.
    fn here(&self) -> String {
        let pieces = self.pieces();
        if pieces > 1 {
            format!(" ({} \u{d7} {pieces})", self.in_zone / pieces)
        } else if self.elsewhere {
            format!(" ({})", self.in_zone)
        } else {
            String::new()
        }
    }

    /// Of bars across the slab, how many pieces make one line; 1 where the lines have unequal numbers.
    pub fn pieces(&self) -> u32 {
        if self.bar.is_along_span() || self.bar.layer == crate::plan::Layer::E {
            return 1;
        }
        let apart = 2.5 * f64::from(self.bar.size);
        let lines = self.lines(0);
        let count = 1 + lines.windows(2).filter(|w| w[1] - w[0] > apart).count();
        let pieces = lines.len() / count.max(1);
        if pieces > 1 && pieces * count == lines.len() && self.in_zone as usize == lines.len() { pieces as u32 } else { 1 }
    }

    fn comment(&self) -> String {
        let closes = self.bar.layer == crate::plan::Layer::E && !self.bar.is_straight();
        let turn = self.turn();
        format!("{}{}", if closes { " U-bar" } else { "" }, if turn.is_empty() { String::new() } else { format!(" {turn}") })
    }

    /// Spacing of the call-out: as called; of alternate bars, that of this mark alone.
    fn spacing(&self) -> f64 {
        let called = self.sets.first().map_or(0.0, |s| s.spacing);
        let main = self.sets.iter().max_by_key(|s| s.count).filter(|s| s.count > 1 && s.turn == "alt");
        main.map_or(called, |s| s.step[0].abs().max(s.step[1].abs()))
    }

    /// The spacing with its hyphen; none for bars held singly inside bends.
    fn spacing_text(&self) -> String {
        let held = self.bar.role == crate::plan::Role::Edge && self.bar.is_straight();
        if held { String::new() } else { format!("-{}", crate::base::num(self.spacing(), 0)) }
    }
}

fn extent(set: &Set) -> (f64, f64) {
    let low = set.axis.iter().map(|p| p[0]).fold(f64::INFINITY, f64::min);
    let high = set.axis.iter().map(|p| p[0]).fold(f64::NEG_INFINITY, f64::max);
    (low, high)
}
