//! The reinforcement sheet: four bands on one station line, the column beside them, the frame round both.

use super::column::{self, CloseUps};
use super::detail::{Cut, name_layers};
use super::frame::{self, Title};
use super::notes;
use super::paper::{Area, Lettering, Paper, Spot};
use super::plan_view::{BREAK, Face, PlanView, level_dimension};
use super::rows::{self, Rows};
use super::view::View;
use crate::base::mm;
use crate::finding::Check;
use crate::job::{Job, Slab};
use crate::place::{BarModel, SlabModel};
use crate::scene::{Anchor, Bookmark, Dash, Layer, Pen, Scene, Weight};
use crate::tables::{SheetSize, tables};

/// Paper left and right of the stations, mm.
const MARGIN: f64 = 26.0;
/// Paper of the grid heads and their dimensions, mm.
const HEADS: f64 = 26.0;
/// Paper of a view title, mm.
const TITLE: f64 = 13.0;
/// Paper under a plan, mm.
const UNDER: f64 = 9.0;
/// Paper of the support stubs under the section, mm.
const STUBS: f64 = 13.0;

/// A slab, or a part of one, and how it fits a sheet.
struct Fit<'a> {
    size: &'a SheetSize,
    scale: f64,
    low: f64,
    high: f64,
    gap: Option<(f64, f64)>,
}

/// Every sheet of a job.
pub fn sheets(job: &Job, model: &BarModel, checks: &[Vec<Check>]) -> Vec<Scene> {
    struct Part<'p> {
        slab: &'p Slab,
        placed: &'p SlabModel,
        fit: Fit<'p>,
        texts: Vec<String>,
    }
    let parts: Vec<Part> = job
        .slabs
        .iter()
        .zip(&model.slabs)
        .flat_map(|(slab, placed)| {
            let texts = notes::notes(job, slab, placed);
            let fits = fits(job, slab, placed, &texts);
            fits.into_iter().map(move |fit| Part { slab, placed, fit, texts: texts.clone() })
        })
        .collect();
    let of = parts.len();
    parts.iter().enumerate().map(|(i, p)| sheet(job, p.slab, p.placed, &p.fit, checks, &p.texts, i + 1, of)).collect()
}

fn column_width(size: &SheetSize) -> f64 {
    match size.name.as_str() {
        "A1" => 180.0,
        "A2" => 165.0,
        _ => 150.0,
    }
}

/// Room for the bands on a sheet.
fn band_area(size: &SheetSize) -> Area {
    let space = frame::space(size);
    Area::new([space.min[0] + 4.0, space.min[1] + 4.0], [space.max[0] - column_width(size) - 8.0, space.max[1] - 4.0])
}

/// The room between the bands and the column, where it is wide enough for close-ups.
fn beside(size: &SheetSize, view: &View) -> Option<Area> {
    let area = band_area(size);
    let left = view.x(view.high) + MARGIN + 10.0;
    let width = (area.max[0] - left).min(230.0);
    let left = left + (area.max[0] - left - width) / 2.0;
    (width >= 130.0).then(|| Area::new([left, area.min[1]], [left + width, area.max[1]]))
}

/// Scale of levels in the section: 1:10 where the plan is drawn at 1:50 or larger, else 1:20.
fn level_scale(scale: f64) -> f64 {
    if scale <= 50.0 { 10.0 } else { 20.0 }
}

/// Height of all bands with the scale bar, mm, the plans cut down by a gap across the slab.
fn bands_height(slab: &Slab, model: &SlabModel, view: &View, gap: f64) -> f64 {
    Bands::of(slab, model, view, gap, 0.0).end + 12.0
}

/// The sheet and scale that fit: the largest scale first, for each the smallest sheet. Where none does, the slab is cut at supports
/// over several sheets at the smallest scale, and a plan too wide for the sheet is broken.
fn fits<'a>(job: &Job, slab: &Slab, model: &SlabModel, texts: &[String]) -> Vec<Fit<'a>> {
    let all = &tables().sheets;
    let sizes: Vec<&'static SheetSize> = ["A3", "A2", "A1"]
        .iter()
        .filter(|name| job.head.sheet.as_deref().is_none_or(|wanted| wanted == **name))
        .filter_map(|name| all.sizes.iter().find(|s| s.name == **name))
        .collect();
    let scales: Vec<f64> = all.scales.iter().filter(|s| job.head.scale.is_none_or(|wanted| wanted == **s)).map(|s| f64::from(*s)).collect();
    let st = &model.stations;
    let (low, high) = (st.start.min(st.supports[0].centre), st.end.max(st.supports[st.last()].centre));
    let texts_height: Vec<f64> = sizes.iter().map(|size| column::height(&View::new(size, 1.0, 0.0, 0.0, 0.0), texts, column_width(size) - 6.0)).collect();
    let column_fits = |index: usize, size: &SheetSize, view: &View| {
        let room = frame::space(size).height() - frame::TITLE_HEIGHT - 16.0;
        let width = column_width(size) - 6.0;
        let beside = beside(size, view).is_some_and(|area| CloseUps::in_width(slab, area.width()).height() <= area.height());
        let close_ups = if beside { 0.0 } else { CloseUps::in_width(slab, width).height() };
        texts_height[index] + close_ups <= room
    };
    for scale in &scales {
        for (index, size) in sizes.iter().enumerate() {
            let area = band_area(size);
            let view = View::new(size, *scale, low, high, band_area(size).min[0] + MARGIN);
            let wide = (high - low) / scale + 2.0 * MARGIN <= area.width();
            if wide && bands_height(slab, model, &view, 0.0) <= area.height() && column_fits(index, size, &view) {
                return vec![Fit { size, scale: *scale, low, high, gap: None }];
            }
        }
    }
    let (Some(size), Some(scale)) = (sizes.last().copied(), scales.last().copied()) else { return Vec::new() };
    let room = band_area(size).width() - 2.0 * MARGIN;
    windows(model, low, high, room * scale)
        .into_iter()
        .map(|(low, high)| {
            let view = View::new(size, scale, low, high, 0.0);
            let excess = bands_height(slab, model, &view, 0.0) - band_area(size).height();
            let gap = (excess > 0.0).then(|| {
                let out = ((excess / 2.0 + BREAK) * scale).min(slab.width.value - 1500.0).max(0.0);
                let from = 0.62 * (slab.width.value - out);
                (from, from + out)
            });
            Fit { size, scale, low, high, gap }
        })
        .collect()
}

/// Parts of a slab no longer than `most`, cut at supports.
fn windows(model: &SlabModel, low: f64, high: f64, most: f64) -> Vec<(f64, f64)> {
    let mut cuts = vec![low];
    let mut at = low;
    for pair in model.stations.supports.windows(2).skip(1) {
        if pair[1].centre - at > most && pair[0].centre > at {
            cuts.push(pair[0].centre);
            at = pair[0].centre;
        }
    }
    cuts.push(high);
    // A last part that is still too long keeps its place: it runs out at the smallest scale only for spans past any sheet.
    cuts.windows(2).map(|w| (w[0], w[1])).collect()
}

#[allow(clippy::too_many_arguments)]
fn sheet(job: &Job, slab: &Slab, model: &SlabModel, fit: &Fit, checks: &[Vec<Check>], texts: &[String], number: usize, of: usize) -> Scene {
    let size = fit.size;
    let mut paper = Paper::new(size.width, size.height);
    frame::frame(&mut paper, size);
    let area = band_area(size);
    let left = area.min[0] + ((area.width() - (fit.high - fit.low) / fit.scale) / 2.0).clamp(MARGIN, MARGIN + 30.0);
    let view = View::new(size, fit.scale, fit.low, fit.high, left);
    let levels = level_scale(fit.scale);
    let title = Title {
        size,
        scales: format!("plans and stations 1:{}, levels 1:{levels}, close-ups as titled, at {}", fit.scale, size.name),
        number,
        of,
        document: "Reinforcement drawing",
    };
    let top = frame::title_block(&mut paper, job, &title, column_width(size));
    let space = frame::space(size);
    let column = Area::new([space.max[0] - column_width(size) + 3.0, space.min[1] + 4.0], [space.max[0] - 3.0, top - 2.0]);
    paper.line(
        Layer::Frame,
        "",
        &[[space.max[0] - column_width(size), space.min[1]], [space.max[0] - column_width(size), top]],
        Pen::solid(size.pens.concrete),
    );
    if let Some(text) = notes::stamp(job, checks) {
        column::stamp(&mut paper, &view, &text, &column, top);
    }
    let mut y = column.min[1];
    // Close-ups stand beside the bands where the sheet has room there, else at the head of the column.
    match beside(size, &view).filter(|area| CloseUps::in_width(slab, area.width()).height() <= area.height()) {
        Some(area) => {
            let below = column::close_ups(&mut paper, &view, slab, model, &area, area.min[1]);
            if below + column::bar_list_height(model) <= area.max[1] {
                column::bar_list(&mut paper, &view, model, &area, below);
            }
        }
        None => y = column::close_ups(&mut paper, &view, slab, model, &column, y),
    }
    y = column::layer_key(&mut paper, &view, model, &column, y);
    y = column::legend(&mut paper, &view, model, &column, y);
    column::notes(&mut paper, &view, texts, &column, y);
    bands(&mut paper, &view, slab, model, fit, area.min[1]);
    match_lines(&mut paper, &view, model, fit, &area, number);
    let mut scene = paper.scene;
    let part = if of > 1 { format!(", sheet {number} of {of}") } else { String::new() };
    scene.title = format!("{} {}, revision {}: {}, slab {}{part}", job.head.drawing, job.head.title, job.head.revision, job.head.project, slab.mark);
    scene.description = format!(
        "Reinforcement of slab {}: bottom plan, top plan, section along the span and bars drawn out, at 1:{} on {}. {} marks. Dated {}.",
        slab.mark,
        fit.scale,
        size.name,
        model.bars.len(),
        job.head.date_text()
    );
    scene.bookmarks = vec![Bookmark { title: format!("Sheet {number}: slab {}", slab.mark) }];
    scene
}

/// Paper heights of the bands of a sheet, from the top.
struct Bands<'m> {
    bottom_plan: f64,
    top_plan: f64,
    top_rows: f64,
    section: f64,
    bottom_rows: f64,
    end: f64,
    rows: [Rows<'m>; 2],
}

impl<'m> Bands<'m> {
    fn of(slab: &Slab, model: &'m SlabModel, view: &View, gap: f64, top: f64) -> Bands<'m> {
        let plan = (slab.width.value - gap) / view.scale + if gap > 0.0 { BREAK } else { 0.0 };
        let rows = [Rows::of(model, view, false), Rows::of(model, view, true)];
        let bottom_plan = top + HEADS;
        let top_plan = bottom_plan + TITLE + plan + UNDER;
        let top_rows = top_plan + TITLE + plan + UNDER;
        let section = top_rows + TITLE + rows[0].height();
        let bottom_rows = section + TITLE + slab.thickness.value / level_scale(view.scale) + STUBS - 2.0;
        let end = bottom_rows + TITLE + rows[1].height() + 4.0;
        Bands { bottom_plan, top_plan, top_rows, section, bottom_rows, end, rows }
    }
}

fn bands(paper: &mut Paper, view: &View, slab: &Slab, model: &SlabModel, fit: &Fit, top: f64) {
    let levels = level_scale(fit.scale);
    let bands = Bands::of(slab, model, view, fit.gap.map_or(0.0, |(a, b)| b - a), top);
    heads(paper, view, model, top);
    let x = view.x(view.low) - MARGIN + 4.0;
    let scale = fit.scale;
    let broken = if fit.gap.is_some() { ", broken across" } else { "" };
    let name = if slab.members > 1 { format!("{} ({} alike)", slab.mark, slab.members) } else { slab.mark.clone() };
    let titles = [
        (bands.bottom_plan, format!("Slab {name}: BOTTOM  B1 and B2"), format!("plan 1:{scale}{broken}")),
        (bands.top_plan, format!("Slab {name}: TOP  T1, T2, ends and edges"), format!("plan 1:{scale}{broken}")),
        (bands.top_rows, "Top bars drawn out".to_string(), format!("stations 1:{scale}, uprights not to scale")),
        (bands.section, "Section along the span".to_string(), format!("stations 1:{scale}, levels 1:{levels}")),
        (bands.bottom_rows, "Bottom bars drawn out".to_string(), format!("stations 1:{scale}")),
    ];
    let areas: Vec<Area> = titles.iter().map(|(y, title, note)| view_title(paper, view, x, *y, title, note)).collect();
    grids(paper, view, model, top + 9.2, bands.end + 2.0, &areas);
    for (face, y) in [(Face::Bottom, bands.bottom_plan), (Face::Top, bands.top_plan)] {
        PlanView { view, slab, model, face, top: y + TITLE, gap: fit.gap }.draw(paper);
    }
    bands.rows[0].draw(paper, view, model, bands.top_rows + TITLE);
    let low = view.low.min(model.stations.supports[0].left_face.max(view.low - 200.0));
    let cut = Cut {
        slab,
        model,
        axis: 0,
        low,
        high: view.high,
        at: 0.3 * slab.width.value,
        scale: view.scale,
        level_scale: levels,
        corner: [view.x(low), bands.section + TITLE],
    };
    cut.draw(paper, view, STUBS - 5.0);
    name_layers(paper, view, &cut);
    bands.rows[1].draw(paper, view, model, bands.bottom_rows + TITLE);
    rows::laps(paper, view, model, bands.end);
    scale_bar(paper, view, x, bands.end + 7.0);
}

fn view_title(paper: &mut Paper, v: &View, x: f64, y: f64, title: &str, note: &str) -> Area {
    let big = Lettering { layer: Layer::Text, mark: String::new(), height: tables().sheets.text.view, weight: Weight::Medium };
    let area = paper.text(&big, Spot { at: [x, y + 7.5], anchor: Anchor::Start, upward: false }, title);
    let small = Lettering { layer: Layer::Text, mark: String::new(), height: v.note, weight: Weight::Regular };
    let note = paper.text(&small, Spot { at: [area.max[0] + 4.0, y + 7.5], anchor: Anchor::Start, upward: false }, note);
    Area::new(area.min, [note.max[0], area.max[1]])
}

/// Grid letters in circles, and the dimensions between them with the ends of the slab.
fn heads(paper: &mut Paper, v: &View, model: &SlabModel, top: f64) {
    let st = &model.stations;
    let lettering = Lettering { layer: Layer::Grid, mark: String::new(), height: v.call_out, weight: Weight::Medium };
    for (support, grid) in st.supports.iter().zip(&model.grids) {
        if v.shows(support.centre) {
            let x = v.x(support.centre);
            paper.ring(Layer::Grid, "", [x, top + 5.0], 4.2, Pen::solid(v.pens.concrete));
            paper.text(&lettering, Spot { at: [x, top + 5.0 + v.call_out / 2.0], anchor: Anchor::Middle, upward: false }, grid);
        }
    }
    let y = top + 16.0;
    for pair in st.supports.windows(2) {
        if v.shows(pair[0].centre) && v.shows(pair[1].centre) {
            level_dimension(paper, v, v.x(pair[0].centre), v.x(pair[1].centre), y, &mm(pair[1].centre - pair[0].centre));
        }
    }
    let y = top + 22.5;
    for span in &st.spans {
        if v.shows(span.left_face) && v.shows(span.right_face) {
            level_dimension(paper, v, v.x(span.left_face), v.x(span.right_face), y, &format!("clear {}", mm(span.clear)));
        }
    }
    for (a, b) in [(st.start, st.spans[0].left_face), (st.spans[st.spans.len() - 1].right_face, st.end)] {
        if v.shows(a) && v.shows(b) {
            level_dimension(paper, v, v.x(a), v.x(b), y, &mm(b - a));
        }
    }
    for support in &st.supports[1..st.last()] {
        if v.shows(support.left_face) && v.shows(support.right_face) {
            level_dimension(paper, v, v.x(support.left_face), v.x(support.right_face), y, &mm(support.right_face - support.left_face));
        }
    }
}

/// Grid lines down through every band, broken where a title stands on them.
fn grids(paper: &mut Paper, v: &View, model: &SlabModel, top: f64, bottom: f64, titles: &[Area]) {
    let pen = Pen { width: v.pens.thin, dash: Dash::Chain };
    for support in model.stations.supports.iter().filter(|s| v.shows(s.centre)) {
        let x = v.x(support.centre);
        let mut from = top;
        for title in titles.iter().map(|t| t.grown(1.0)).filter(|t| t.min[0] < x && x < t.max[0]) {
            paper.line(Layer::Grid, "", &[[x, from], [x, title.min[1]]], pen);
            from = title.max[1];
        }
        paper.line(Layer::Grid, "", &[[x, from], [x, bottom]], pen);
    }
}

/// A bar of five metres (or one) at the scale of the plans.
fn scale_bar(paper: &mut Paper, v: &View, x: f64, y: f64) {
    let step = if v.scale > 40.0 { 1000.0 } else { 500.0 };
    let pen = Pen::solid(v.pens.thin);
    let lettering = Lettering { layer: Layer::Text, mark: String::new(), height: v.note, weight: Weight::Regular };
    for i in 0..5 {
        let (a, b) = (x + f64::from(i) * step / v.scale, x + f64::from(i + 1) * step / v.scale);
        paper.scene.rect(Layer::Text, [a, y], [b, y + 1.6], pen);
        if i % 2 == 0 {
            paper.scene.push(Layer::Text, "", crate::scene::Shape::Fill { points: vec![[a, y], [b, y], [b, y + 1.6], [a, y + 1.6]] });
        }
    }
    for i in [0, 5] {
        let text = crate::base::num(f64::from(i) * step / 1000.0, 1);
        let text = if i == 5 { format!("{text} m") } else { text };
        paper.text(&lettering, Spot { at: [x + f64::from(i) * step / v.scale, y - 1.0], anchor: Anchor::Middle, upward: false }, &text);
    }
}

/// Where a slab goes on over the next sheet.
fn match_lines(paper: &mut Paper, v: &View, model: &SlabModel, fit: &Fit, area: &Area, number: usize) {
    let st = &model.stations;
    let pen = Pen { width: v.pens.concrete, dash: Dash::Chain };
    let lettering = Lettering { layer: Layer::Text, mark: String::new(), height: v.note, weight: Weight::Medium };
    let cuts = [(fit.low, number.saturating_sub(1), -3.0), (fit.high, number + 1, 3.0)];
    for (station, sheet, offset) in cuts {
        let Some(j) = st.supports.iter().position(|s| (s.centre - station).abs() < 0.5) else { continue };
        if j == 0 || j == st.last() {
            continue;
        }
        let x = v.x(station);
        paper.scene.line(Layer::Grid, &[[x + offset * 0.2, area.min[1] + HEADS], [x + offset * 0.2, area.max[1] - 6.0]], pen);
        let within = Area::new([0.0, 0.0], [paper.scene.width, paper.scene.height]);
        let at = if offset < 0.0 { x - 3.0 } else { x + 3.0 + v.note };
        let spots = (0..12).map(|i| Spot { at: [at, area.min[1] + HEADS + 50.0 + 25.0 * f64::from(i)], anchor: Anchor::Middle, upward: true });
        paper.place(&lettering, spots, &format!("match line, grid {}: see sheet {sheet}", model.grids[j]), &within);
    }
}
