//! A validated job: the finished design with a place for every value. Nothing in here is out of its range.

mod parse;
mod slab;

pub use parse::{Loader, Reading, read};

use crate::tables::{Concrete, Deduction, Steel, curtailment};
use crate::trace::{At, Place};

pub const MOST_SPANS: usize = 20;
pub const MOST_SLABS: usize = 200;
/// Bars of one kind side by side in one slab; keeps files and memory within reason.
pub const MOST_ACROSS: usize = 2_500;

#[derive(Clone, Debug)]
pub struct Job {
    pub head: Head,
    pub basis: Basis,
    pub slabs: Vec<Slab>,
}

/// What is printed about the job.
#[derive(Clone, Debug, Default)]
pub struct Head {
    pub number: String,
    pub project: String,
    pub title: String,
    pub drawing: String,
    pub revision: String,
    pub date: (u16, u8, u8),
    pub client: String,
    pub site: String,
    pub drawn_by: String,
    pub checked_by: String,
    pub status: String,
    pub sheet: Option<String>,
    pub scale: Option<u32>,
    pub schedule: String,
}

impl Head {
    pub fn date_text(&self) -> String {
        format!("{:04}-{:02}-{:02}", self.date.0, self.date.1, self.date.2)
    }

    /// The drawing number as a file name: letters, digits, `-`, `_`, `.`, never a path.
    pub fn file_stem(&self) -> String {
        let safe: String = self.drawing.chars().map(|c| if c.is_ascii_alphanumeric() || "-_.".contains(c) { c } else { '-' }).collect();
        let trimmed = safe.trim_matches(|c| c == '.' || c == '-');
        if trimmed.is_empty() { "drawing".into() } else { trimmed.to_string() }
    }
}

#[derive(Clone, Debug)]
pub struct Basis {
    pub concrete: At<&'static Concrete>,
    pub steel: At<&'static Steel>,
    pub bar_letter: String,
    /// Largest aggregate, mm.
    pub aggregate: At<f64>,
    pub exposure: String,
    pub fire: Option<Fire>,
    pub curtailment: At<curtailment::Sheet>,
    pub deduction: Deduction,
    pub stock_length: At<f64>,
    pub longest_bar: At<f64>,
    /// Share of bars lapped at one section, per cent.
    pub lap_share: At<u32>,
    pub least_lap: At<f64>,
}

#[derive(Clone, Debug)]
pub struct Fire {
    pub text: String,
    pub minutes: u32,
}

/// Bars at a spacing, such as `H12-175`; mm.
#[derive(Clone, Debug, PartialEq)]
pub struct Bars {
    pub size: u32,
    pub spacing: f64,
}

impl Bars {
    pub fn area(&self) -> f64 {
        crate::base::area_per_metre(self.size, self.spacing)
    }

    /// As it is written, with the letter of the job.
    pub fn text(&self, letter: &str) -> String {
        format!("{letter}{}-{}", self.size, crate::base::num(self.spacing, 0))
    }
}

#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Kind {
    Masonry,
    Wall,
    Beam,
}

impl Kind {
    pub const WORDS: [(&'static str, Kind); 3] = [("masonry", Kind::Masonry), ("wall", Kind::Wall), ("beam", Kind::Beam)];
}

#[derive(Clone, Copy, Debug, PartialEq)]
pub enum EndBar {
    Auto,
    UBar,
    LBar,
    Straight,
}

impl EndBar {
    pub const WORDS: [(&'static str, EndBar); 4] = [("auto", EndBar::Auto), ("u-bar", EndBar::UBar), ("l-bar", EndBar::LBar), ("straight", EndBar::Straight)];
}

#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Edge {
    Free,
    Wall,
    Beam,
    Joint,
}

impl Edge {
    pub const WORDS: [(&'static str, Edge); 4] = [("free", Edge::Free), ("wall", Edge::Wall), ("beam", Edge::Beam), ("joint", Edge::Joint)];

    pub fn is_held(self) -> bool {
        matches!(self, Edge::Wall | Edge::Beam)
    }

    pub fn word(self) -> &'static str {
        Edge::WORDS.iter().find(|(_, e)| *e == self).map_or("", |(w, _)| w)
    }
}

#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Arrangement {
    Auto,
    Full,
    Alternate,
    Reversed,
}

impl Arrangement {
    pub const WORDS: [(&'static str, Arrangement); 4] =
        [("auto", Arrangement::Auto), ("full", Arrangement::Full), ("alternate", Arrangement::Alternate), ("reversed", Arrangement::Reversed)];
}

/// One slab: lengths in mm, loads in kN/m², levels in mm above datum.
#[derive(Clone, Debug)]
pub struct Slab {
    pub mark: String,
    pub members: u32,
    pub thickness: At<f64>,
    pub width: At<f64>,
    pub cover: Cover,
    pub permanent: At<f64>,
    pub variable: At<f64>,
    pub bottom_distribution: At<Bars>,
    pub top_distribution: At<Bars>,
    /// Near, far.
    pub edges: [Edge; 2],
    pub edge_width: [f64; 2],
    pub level: Option<f64>,
    pub arrangement: At<Arrangement>,
    pub supports: Vec<Support>,
    pub spans: Vec<Span>,
    pub at: Option<Place>,
}

#[derive(Clone, Debug)]
pub struct Cover {
    pub bottom: At<f64>,
    pub top: At<f64>,
    pub side: At<f64>,
}

#[derive(Clone, Debug)]
pub struct Support {
    pub grid: String,
    pub kind: Kind,
    pub width: At<f64>,
    /// Inner face to slab end, at an end support; the width elsewhere.
    pub bearing: At<f64>,
    pub top: Option<At<Bars>>,
    /// Design area of T1, mm²/m, where known.
    pub required: Option<At<f64>>,
    pub end_bar: At<EndBar>,
    pub moment: Option<At<f64>>,
    pub shear: Option<At<f64>>,
    pub at: Option<Place>,
}

#[derive(Clone, Debug)]
pub struct Span {
    pub length: At<f64>,
    pub bottom: At<Bars>,
    /// Design area of B1, mm²/m, where known.
    pub required: Option<At<f64>>,
    pub moment: Option<At<f64>>,
    pub shear: Option<At<f64>>,
}
