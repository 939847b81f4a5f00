//! A close-up of an inner support, where the bars of two spans meet: the laps of the bottom bars, the stops beside them.

use super::bands::STUBS;
use super::close_up::names;
use super::dimension::{Stop, level, running, upright};
use super::paper::{Area, Lettering, Paper, Spot};
use super::rows::lap_over;
use super::section::Cut;
use super::view::{Subject, View};
use crate::base::mm;
use crate::plan::Layer as BarLayer;
use crate::plan::stations::SupportAt;
use crate::scene::{Anchor, Layer};

const SCALE: f64 = 10.0;
/// How far the close-up looks to each side of the grid, mm.
const LOOK: f64 = 800.0;

/// The first inner support on the sheet, with its place among the grids.
fn support<'s>(subject: &'s Subject, v: &View) -> Option<(usize, &'s SupportAt)> {
    let all = &subject.model.stations.supports;
    let inner = all.iter().enumerate().skip(1).take(all.len().saturating_sub(2));
    inner.into_iter().find(|(_, s)| s.centre > v.low + LOOK && s.centre < v.high - LOOK)
}

fn above(v: &View) -> f64 {
    2.6 * v.call_out + 3.0 + 5.5 * v.note
}

/// Paper that it takes, width and height, mm; none where the sheet shows no inner support.
pub fn size(subject: &Subject, v: &View) -> Option<[f64; 2]> {
    support(subject, v)?;
    Some([2.0 * LOOK / SCALE + 7.0 * v.note, above(v) + subject.slab.thickness.value / SCALE + STUBS + 9.0 * v.note + 6.0])
}

/// Draws it; returns its title and the paper it fills.
pub fn inner(paper: &mut Paper, v: &View, subject: &Subject, corner: [f64; 2]) -> Option<(String, Area)> {
    let (j, support) = support(subject, v)?;
    let [width, height] = size(subject, v)?;
    let area = Area::new(corner, [corner[0] + width, corner[1] + height]);
    let title = format!("Support {}", subject.model.grids.get(j).map_or("", String::as_str));
    paper.text(&Lettering::new(Layer::Text, v.call_out), Spot::level([corner[0], corner[1] + v.call_out + 1.0], Anchor::Start), &title);
    let note = format!("1:{SCALE}, bars of one level drawn apart");
    paper.text(&Lettering::new(Layer::Text, v.note), Spot::level([corner[0], corner[1] + 1.25 * v.call_out + 1.6 + v.note], Anchor::Start), &note);
    let cut = Cut {
        subject,
        axis: 0,
        low: support.centre - LOOK,
        high: support.centre + LOOK,
        at: 0.3 * subject.slab.width.value,
        scale: SCALE,
        level_scale: SCALE,
        corner: [corner[0] + v.note, corner[1] + above(v)],
        apart: true,
    };
    let points = cut.draw(paper, v, STUBS - 3.0);
    names(paper, v, &cut, points, &area);
    let h = subject.slab.thickness.value;
    let x = cut.x(cut.high);
    upright(paper, v, x + 2.5 * v.note, cut.y(h), cut.y(0.0), x + 1.5, &mm(h));
    let grid = cut.x(support.centre);
    let top = stops(subject, &cut, support, |layer| layer == BarLayer::T1);
    if !top.is_empty() {
        running(paper, v, grid, cut.y(h) - 1.8 * v.note - 3.0, &top);
    }
    let mut y = cut.y(0.0) + STUBS + 1.25 * v.note + 3.0;
    level(paper, v, cut.x(support.left_face), cut.x(support.right_face), y, &mm(support.right_face - support.left_face));
    y += v.note + 3.2;
    if let Some((start, end)) = lap_over(subject, support.centre)
        && start > cut.low
        && end < cut.high
    {
        level(paper, v, cut.x(start), cut.x(end), y, &format!("lap {}", mm(end - start)));
    }
    Some((title, area))
}

/// Ends of the bars of some layers near a support that the close-up shows.
fn stops(subject: &Subject, cut: &Cut, support: &SupportAt, wanted: impl Fn(BarLayer) -> bool) -> Vec<Stop> {
    let mut stops: Vec<Stop> = Vec::new();
    let own = subject.occurrences.iter().filter(|o| o.bar.is_along_span() && wanted(o.bar.layer));
    for station in own.flat_map(|o| o.main_ends()).filter(|s| *s > cut.low && *s < cut.high) {
        let x = cut.x(station);
        if stops.iter().all(|s| (s.x - x).abs() > 0.1) {
            stops.push(Stop { x, distance: (station - support.centre).abs(), from_y: cut.y(subject.slab.thickness.value) });
        }
    }
    stops
}
