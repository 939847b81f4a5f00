//! One reinforcement sheet: the bands of a slab or a part of it, close-ups, the column beside them, the frame round all.

use super::bands::{self, Band, Gap, Neighbour, level_scale, margin};
use super::bookmarks;
use super::close_up::CloseUps;
use super::column;
use super::frame::{self, Title};
use super::inner;
use super::lists;
use super::notes;
use super::paper::{Area, Paper};
use super::view::{Subject, View};
use crate::finding::Check;
use crate::job::Job;
use crate::place::BarModel;
use crate::scene::{Layer, Pen, Scene};
use crate::tables::SheetSize;
use itertools::Itertools;

/// A slab, or a part of one, and how it stands on a sheet.
#[derive(Clone, Debug)]
pub struct Choice {
    pub size: &'static SheetSize,
    pub scale: f64,
    pub low: f64,
    pub high: f64,
    pub gap: Gap,
    pub columns: &'static [&'static [Band]],
    /// Whether the close-ups stand here; of a bottom and a top sheet, on the second.
    pub close_ups: bool,
}

/// What every sheet of a job shares.
pub struct Frame<'a> {
    pub job: &'a Job,
    pub model: &'a BarModel,
    pub checks: &'a [Vec<Check>],
    pub of: usize,
}

pub fn column_width(size: &SheetSize) -> f64 {
    match size.name.as_str() {
        "A1" => 180.0,
        "A2" => 150.0,
        _ => 152.0,
    }
}

/// Room for the bands and close-ups on a sheet.
pub fn band_area(size: &SheetSize) -> Area {
    let space = frame::space(size);
    Area::new([space.min[0] + 6.0, space.min[1] + 6.0], [space.max[0] - column_width(size) - 4.0, space.max[1] - 6.0])
}

/// Width of the widest column of bands, mm.
fn bands_width(subject: &Subject, choice: &Choice, v: &View) -> f64 {
    choice.columns.iter().map(|c| bands::width(subject, v, choice.gap, c)).fold(0.0, f64::max)
}

/// Where the parts of a sheet stand; none where they do not fit.
struct Layout {
    spread: Vec<f64>,
    /// Close-ups; the section across the span and the list of marks under them where they fit. In the column where none.
    beside: Option<Area>,
}

/// Most paper put between two bands beyond what they need, mm.
const SPREAD: f64 = 12.0;
/// Paper between the bands and the close-ups, mm.
const BESIDE: f64 = 6.0;

fn layout(subject: &Subject, choice: &Choice, v: &View) -> Option<Layout> {
    let area = band_area(choice.size);
    let width = bands_width(subject, choice, v) * choice.columns.len() as f64;
    let heights: Vec<f64> = choice.columns.iter().map(|c| bands::height(subject, v, choice.gap, c)).collect();
    let tallest = heights.iter().copied().fold(0.0, f64::max);
    if width > area.width() || tallest > area.height() {
        return None;
    }
    let spread_in = |room: f64| -> Vec<f64> {
        let each = |(h, c): (&f64, &&[Band])| ((room - h) / c.len() as f64).clamp(0.0, SPREAD);
        heights.iter().zip(choice.columns).map(each).collect()
    };
    if !choice.close_ups {
        return Some(Layout { spread: spread_in(area.height()), beside: None });
    }
    let right = Area::new([area.min[0] + width + BESIDE, area.min[1]], area.max);
    let set = CloseUps::in_area(subject, v, right.width()).filter(|c| right.width() >= 34.0 * v.note && c.height() <= right.height());
    if set.is_some() {
        return Some(Layout { spread: spread_in(area.height()), beside: Some(right) });
    }
    let under = CloseUps::in_area(subject, v, area.width())?;
    let rest = area.height() - tallest - under.height() - 4.0;
    if rest >= 0.0 {
        // Paper left over goes between the bands first.
        let spread = spread_in(tallest + 0.7 * rest);
        let end = heights.iter().zip(choice.columns).zip(&spread).map(|((h, c), s)| h + s * (c.len() as f64 - 1.0)).fold(0.0, f64::max);
        let left = area.height() - end - under.height();
        return Some(Layout { spread, beside: Some(Area::new([area.min[0], area.min[1] + end + (left / 2.0).clamp(4.0, 14.0)], area.max)) });
    }
    Some(Layout { spread: spread_in(area.height()), beside: None })
}

/// Draws one sheet; none where its parts do not fit it.
pub fn sheet(all: &Frame, subject: &Subject, choice: &Choice, number: usize, neighbours: &[Neighbour]) -> Option<Scene> {
    let (job, size) = (all.job, choice.size);
    let area = band_area(size);
    let measure = View::new(size, choice.scale, choice.low, choice.high, area.min[0]);
    let width = bands_width(subject, choice, &measure);
    let layout = layout(subject, choice, &measure)?;
    let mut paper = Paper::new(size.width, size.height);
    let space = frame::space(size);
    frame::frame(&mut paper, size);
    let levels = level_scale(choice.scale);
    let title = Title {
        size,
        scales: format!(
            "plans and stations 1:{}, levels 1:{levels}{}, at {}",
            choice.scale,
            if choice.close_ups { ", close-ups as titled" } else { "" },
            size.name
        ),
        number,
        of: all.of,
        document: "Reinforcement drawing",
    };
    let left = space.max[0] - column_width(size);
    let top = frame::title_block(&mut paper, job, &title, column_width(size));
    paper.line(Layer::Frame, "", &[[left, space.min[1]], [left, top]], Pen::solid(size.pens.concrete));
    let column = Area::new([left + 4.0, space.min[1] + 4.0], [space.max[0] - 5.5, top - 2.0]);
    let bottom = notes::stamp(job, all.checks).map_or(column.max[1], |text| column::stamp(&mut paper, &measure, &text, &column, top));
    let (below, in_column) = fill_column(&mut paper, all, subject, choice, &measure, &column, &layout)?;
    if below > bottom {
        return None;
    }
    let beside = layout.beside.and_then(|area| CloseUps::in_area(subject, &measure, area.width()).map(|set| (area, set)));
    let across = beside.as_ref().map(|(area, set)| Area::new([area.min[0], set.below(area) + 4.0], area.max));
    let needed = bands::across_size(subject, &measure);
    let has_across = across.is_some_and(|a| needed[0] <= a.width() && needed[1] <= a.height());
    let mut views = Vec::new();
    for (i, (bands, spread)) in choice.columns.iter().zip(&layout.spread).enumerate() {
        let before = neighbours.iter().find(|n| n.station < (choice.low + choice.high) / 2.0).map(|n| n.sheet);
        let view = View { before, ..View::new(size, choice.scale, choice.low, choice.high, area.min[0] + i as f64 * width + margin(&measure)) };
        let column = bands::Column { bands, gap: choice.gap, top: area.min[1], spread: *spread, neighbours, has_across, is_first: i == 0 };
        views.extend(bands::draw(&mut paper, &view, subject, &column));
    }
    if let (Some((area, set)), Some(mut rest)) = (beside, across) {
        set.draw(&mut paper, &measure, subject, &area);
        if has_across {
            views.push(bands::across(&mut paper, &measure, subject, choice.low, rest.min));
            rest.min[1] += needed[1] + 4.0;
        }
        let inner = inner::size(subject, &measure).filter(|s| s[0] <= rest.width() && s[1] <= rest.height());
        if let Some(needed) = inner {
            views.extend(inner::inner(&mut paper, &measure, subject, rest.min));
            rest.min[1] += needed[1] + 4.0;
        }
        if !in_column && lists::marks_height(&measure, subject.model) <= rest.height() {
            lists::marks(&mut paper, &measure, subject.model, &rest, rest.min[1]);
        }
    }
    let (mut scene, unplaced) = paper.finish();
    describe(&mut scene, all, subject, choice, number);
    bookmarks::name_marks(&mut scene, subject.model);
    scene.bookmarks = bookmarks::bookmarks(&scene, &format!("Sheet {number}: slab {}", subject.slab.mark), &views);
    scene.slab.clone_from(&subject.slab.mark);
    scene.unplaced = unplaced;
    Some(scene)
}

/// Key, legend, notes and lists from the top of the column; returns the paper height below them, and whether the marks are among
/// them. None where close-ups find no room.
fn fill_column(paper: &mut Paper, all: &Frame, subject: &Subject, choice: &Choice, v: &View, column: &Area, layout: &Layout) -> Option<(f64, bool)> {
    let mut y = column.min[1];
    if layout.beside.is_none() && choice.close_ups {
        let set = CloseUps::in_area(subject, v, column.width())?;
        set.draw(paper, v, subject, &Area::new([column.min[0], y], column.max));
        y += set.height();
    }
    y = column::layer_key(paper, v, subject.model, column, y);
    y = column::legend(paper, v, subject, column, y);
    y = column::notes(paper, v, &notes::notes(all.job, subject.slab, subject.model), column, y);
    if choice.size.height > 300.0 {
        y = lists::schedules(paper, v, all.job, all.model, column, y);
    }
    let st = &subject.model.stations;
    let is_part = choice.low > st.supports[0].centre.max(st.start) + 0.5 || choice.high < st.supports[st.last()].centre.min(st.end) - 0.5;
    if is_part || all.model.slabs.len() > 1 {
        y = lists::key_plan(paper, v, all.model, (&subject.slab.mark, choice.low, choice.high), column, y);
    }
    let has_room = y + lists::marks_height(v, subject.model) <= column.max[1] - 14.0;
    if has_room {
        lists::marks(paper, v, subject.model, column, y);
        y += lists::marks_height(v, subject.model);
    }
    Some((y, has_room))
}

fn describe(scene: &mut Scene, all: &Frame, subject: &Subject, choice: &Choice, number: usize) {
    let head = &all.job.head;
    let mark = &subject.slab.mark;
    let part = if all.of > 1 { format!(", sheet {number} of {}", all.of) } else { String::new() };
    scene.title = format!("{} {}, revision {}: {}, slab {mark}{part}", head.drawing, head.title, head.revision, head.project);
    scene.description = format!(
        "Reinforcement of slab {mark}: {}, at 1:{} on {}. {} marks. Dated {}.",
        choice.columns.iter().flat_map(|c| c.iter()).map(|b| b.word()).chain(choice.close_ups.then_some("close-ups")).join(", "),
        choice.scale,
        choice.size.name,
        subject.model.bars.len(),
        head.date_text()
    );
}
