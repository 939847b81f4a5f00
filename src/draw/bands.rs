//! The bands of a slab on its station line: plans, section, bars drawn out, one under another or in two columns.

use super::heads::{grids, heads, heads_height, match_line, scale_bar, title_height, view_title};
use super::paper::{Area, Paper};
use super::plan_view::{BREAK, Face, PlanView};
use super::rows::Rows;
use super::section::{Cut, name_layers};
use super::view::{Subject, View};
use crate::plan::Layer;
use crate::tables::font::face;
use itertools::Itertools;

/// One band of the sheet.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Band {
    BottomPlan,
    TopPlan,
    TopRows,
    Section,
    BottomRows,
}

impl Band {
    pub fn word(self) -> &'static str {
        match self {
            Band::BottomPlan => "bottom plan",
            Band::TopPlan => "top plan",
            Band::TopRows => "top bars drawn out",
            Band::Section => "section along the span",
            Band::BottomRows => "bottom bars drawn out",
        }
    }
}

/// All bands on one station line; or the bottom beside the top, each plan over its own bars drawn out.
pub const STACKED: &[&[Band]] = &[&[Band::BottomPlan, Band::TopPlan, Band::TopRows, Band::Section, Band::BottomRows]];
pub const PAIRED: &[&[Band]] = &[&[Band::BottomPlan, Band::BottomRows], &[Band::TopPlan, Band::TopRows, Band::Section]];

/// The bottom and the top on a sheet each, with the section.
pub const BOTTOM: &[&[Band]] = &[&[Band::BottomPlan, Band::BottomRows, Band::Section]];
pub const TOP: &[&[Band]] = &[&[Band::TopPlan, Band::TopRows, Band::Section]];

/// Close-ups and sections on a sheet of their own.
pub const DETAILS: &[&[Band]] = &[];

/// Paper of the support stubs under the section, mm.
pub(super) const STUBS: f64 = 10.0;
/// Paper over a plan for the name of its far edge and the mark of the section across, mm.
const OVER: f64 = 3.5;
/// Paper of the scale bar under the bands, mm.
const SCALE_BAR: f64 = 4.0;

/// Paper left and right of the stations, mm.
pub fn margin(v: &View) -> f64 {
    17.0 + 3.2 * v.note
}

/// Scale of levels in the section: 1:10 where the plan is drawn at 1:50 or larger, else 1:20.
pub fn level_scale(scale: f64) -> f64 {
    if scale <= 50.0 { 10.0 } else { 20.0 }
}

/// Paper under a plan for what stands past its edge, mm.
fn under(v: &View) -> f64 {
    1.25 * v.note + 4.5
}

/// Paper over a thin section, so that the names of its layers find room beside it, mm.
fn section_drop(subject: &Subject, v: &View) -> f64 {
    (3.0 * (1.25 * v.note + 0.5) - subject.slab.thickness.value / level_scale(v.scale)).max(0.0) / 2.0 + v.note / 2.0
}

/// What is left out of a slab broken across, mm.
pub type Gap = Option<(f64, f64)>;

fn plan_height(subject: &Subject, v: &View, gap: Gap) -> f64 {
    (subject.slab.width.value - gap.map_or(0.0, |(a, b)| b - a)) / v.scale + gap.map_or(0.0, |_| BREAK)
}

fn band_height(subject: &Subject, v: &View, gap: Gap, band: Band) -> f64 {
    let content = match band {
        Band::BottomPlan | Band::TopPlan => OVER + plan_height(subject, v, gap) + under(v),
        Band::TopRows => Rows::of(subject, v, false).height(),
        Band::BottomRows => Rows::of(subject, v, true).height(),
        Band::Section => subject.slab.thickness.value / level_scale(v.scale) + STUBS + section_drop(subject, v),
    };
    title_height(v) + content
}

/// Paper height of a column of bands with its heads and scale bar, mm.
pub fn height(subject: &Subject, v: &View, gap: Gap, bands: &[Band]) -> f64 {
    heads_height(v, subject) + bands.iter().map(|b| band_height(subject, v, gap, *b)).sum::<f64>() + v.note + 3.0 + SCALE_BAR
}

/// What a band is called, and its scales.
fn name(subject: &Subject, v: &View, gap: Gap, band: Band) -> (String, String) {
    let slab = subject.slab;
    let name = if slab.members > 1 { format!("{} ({} alike)", slab.mark, slab.members) } else { slab.mark.clone() };
    let scale = v.scale;
    let broken = if gap.is_some() { ", broken across" } else { "" };
    match band {
        Band::BottomPlan => (format!("Slab {name}: BOTTOM  B1 and B2"), format!("plan 1:{scale}{broken}")),
        Band::TopPlan => {
            let has = |layer: Layer| subject.model.bars.iter().any(|b| b.layer == layer);
            let layers =
                [(Layer::T1, "T1"), (Layer::T2, "T2"), (Layer::E, "ends and edges")].into_iter().filter(|(l, _)| has(*l)).map(|(_, name)| name).join(", ");
            (format!("Slab {name}: TOP  {layers}"), format!("plan 1:{scale}{broken}"))
        }
        Band::TopRows => ("Top bars drawn out".into(), format!("stations 1:{scale}, uprights not to scale")),
        Band::Section => ("Section A-A, along the span".into(), format!("stations 1:{scale}, levels 1:{}", level_scale(scale))),
        Band::BottomRows => {
            let bent = subject.model.bars.iter().any(|b| b.layer == Layer::B1 && !b.is_straight());
            ("Bottom bars drawn out".into(), format!("stations 1:{scale}{}", if bent { ", uprights not to scale" } else { "" }))
        }
    }
}

/// Paper width of a column of bands: its stations with their margins, or its widest title, mm.
pub fn width(subject: &Subject, v: &View, gap: Gap, bands: &[Band]) -> f64 {
    let title = |band: &Band| {
        let (title, note) = name(subject, v, gap, *band);
        face().width(&title, v.title) + face().width(&note, v.note) + 14.0
    };
    bands.iter().map(title).fold((v.high - v.low) / v.scale + 2.0 * margin(v), f64::max)
}

/// A sheet on the other side of a match line.
pub struct Neighbour {
    pub station: f64,
    pub grid: String,
    pub sheet: usize,
}

/// How a column of bands stands on its sheet.
pub struct Column<'a> {
    pub bands: &'a [Band],
    pub gap: Gap,
    pub top: f64,
    /// Paper between two bands beyond what they need, mm.
    pub spread: f64,
    pub neighbours: &'a [Neighbour],
    /// Whether the sheet has the section across.
    pub has_across: bool,
    /// Whether it is the first column of the sheet, which has the scale bar and the marks of the section across.
    pub is_first: bool,
}

/// Draws a column of bands; returns the titles of its views with their places.
pub fn draw(paper: &mut Paper, v: &View, subject: &Subject, column: &Column) -> Vec<(String, Area)> {
    let Column { bands, gap, top, spread, neighbours, has_across, is_first } = *column;
    heads(paper, v, subject, top);
    let x = v.x(v.low) - margin(v) + 2.0;
    let mut titles = Vec::new();
    let mut y = top + heads_height(v, subject);
    for band in bands {
        let (title, note) = name(subject, v, gap, *band);
        let at = y + title_height(v);
        let end = y + band_height(subject, v, gap, *band);
        let area = view_title(paper, v, x, y, &title, &note);
        titles.push((title, Area::new([x - 2.0, area.min[1]], [v.x(v.high) + margin(v), end + spread])));
        match band {
            Band::BottomPlan | Band::TopPlan => {
                let face = if *band == Band::BottomPlan { Face::Bottom } else { Face::Top };
                let within = Area::new([x - 2.0, y], [v.x(v.high) + margin(v) - 1.0, end + spread]);
                let shows_across = has_across && is_first && *band == bands[0];
                PlanView { view: v, subject, face, top: at + OVER, gap, within, shows_across }.draw(paper);
            }
            Band::TopRows => Rows::of(subject, v, false).draw(paper, v, subject, at),
            Band::BottomRows => Rows::of(subject, v, true).draw(paper, v, subject, at),
            Band::Section => section(paper, v, subject, gap, at + section_drop(subject, v)),
        }
        y = end + spread;
    }
    let end = y - spread;
    grids(paper, v, subject, top, end + 1.0);
    for n in neighbours {
        match_line(paper, v, n.station, &n.grid, n.sheet, top + heads_height(v, subject), end);
    }
    if is_first {
        scale_bar(paper, v, x, end + v.note + 3.0);
    }
    titles
}

/// Where the section along the span is cut, mm across the slab: clear of what a broken view leaves out.
pub fn section_across(subject: &Subject, gap: Gap) -> f64 {
    0.3 * (subject.slab.width.value - gap.map_or(0.0, |(from, to)| to - from))
}

fn section(paper: &mut Paper, v: &View, subject: &Subject, gap: Gap, top: f64) {
    let st = &subject.model.stations;
    // A support that reaches past the slab is shown at the slab's own ends.
    let low = if v.low <= st.start + 0.5 { v.low.min(st.supports[0].left_face.max(v.low - 200.0)) } else { v.low };
    let high = if v.high >= st.end - 0.5 { v.high.max(st.supports[st.last()].right_face.min(v.high + 200.0)) } else { v.high };
    let levels = level_scale(v.scale);
    let at = section_across(subject, gap);
    let cut = Cut { subject, axis: 0, low, high, at, scale: v.scale, level_scale: levels, corner: [v.x(low), top], apart: false };
    cut.draw(paper, v, STUBS - 4.0);
    name_layers(paper, v, &cut);
}

const ACROSS: &str = "Section B-B, across the span";

/// Paper of the section across the span: width and height, mm.
pub fn across_size(subject: &Subject, v: &View) -> [f64; 2] {
    let title = face().width(ACROSS, v.title) + face().width("1:100, levels 1:20", v.note) + 6.0;
    let wide = (subject.slab.width.value / v.scale + 12.0 * v.note).max(title);
    [wide, title_height(v) + section_drop(subject, v) + subject.slab.thickness.value / level_scale(v.scale) + 2.5 * v.note + STUBS + 6.0]
}

/// The section across the span with both edges, in the first span shown; returns its title with its place.
pub fn across(paper: &mut Paper, v: &View, subject: &Subject, low: f64, corner: [f64; 2]) -> (String, Area) {
    let title = ACROSS.to_string();
    let levels = level_scale(v.scale);
    view_title(paper, v, corner[0], corner[1], &title, &format!("1:{}, levels 1:{levels}", v.scale));
    let width = subject.slab.width.value;
    let left = corner[0] + 5.0 * v.note;
    let top = corner[1] + title_height(v) + section_drop(subject, v) + 1.25 * v.note;
    let at = across_station(subject, low);
    let cut = Cut { subject, axis: 1, low: 0.0, high: width, at, scale: v.scale, level_scale: levels, corner: [left, top], apart: false };
    let points = cut.draw(paper, v, STUBS - 4.0);
    let within = Area::new([corner[0], corner[1]], [left + width / v.scale + 7.0 * v.note, top + cut.height() + 2.0 * v.note + STUBS]);
    super::close_up::names(paper, v, &cut, points, &within);
    let h = subject.slab.thickness.value;
    let right = cut.x(width);
    super::dimension::upright(paper, v, right + 5.0, cut.y(h), cut.y(0.0), right + 1.0, &crate::base::mm(h));
    (title, within)
}

/// Where the section across is cut: in the middle of the first span shown.
pub fn across_station(subject: &Subject, low: f64) -> f64 {
    let st = &subject.model.stations;
    let span = st.spans.iter().find(|s| s.left_face >= low - 0.5).unwrap_or(&st.spans[0]);
    (span.left_face + span.right_face) / 2.0
}
