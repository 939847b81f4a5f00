//! Which sheets a slab stands on: large scales and small sheets first, whole before in parts, until every text has a place of its own.
//! What does not fit goes on a larger sheet, then at a smaller scale, then over several sheets cut at supports.

use super::bands::{self, BOTTOM, Band, DETAILS, Gap, Neighbour, PAIRED, STACKED, TOP, margin};
use super::plan_view::BREAK;
use super::sheet::{Choice, Frame, band_area, sheet};
use super::view::{Subject, View};
use crate::finding::Check;
use crate::job::Job;
use crate::place::BarModel;
use crate::scene::Scene;
use crate::tables::{SheetSize, tables};
use itertools::Itertools;

/// Every sheet of a job.
pub fn sheets(job: &Job, model: &BarModel, checks: &[Vec<Check>]) -> Vec<Scene> {
    let subjects: Vec<Subject> = job.slabs.iter().zip(&model.slabs).map(|(slab, placed)| Subject::new(slab, placed)).collect();
    // Most slabs need one sheet: drawn as if all did, and anew only where that was wrong.
    let one_each = Frame { job, model, checks, of: subjects.len() };
    let chosen: Vec<(Vec<Choice>, Vec<Scene>)> = subjects.iter().enumerate().map(|(i, s)| choose(&one_each, s, i + 1)).collect();
    let of = chosen.iter().map(|(c, _)| c.len()).sum();
    if of == subjects.len() {
        return chosen.into_iter().flat_map(|(_, drawn)| drawn).collect();
    }
    let all = Frame { of, ..one_each };
    let mut scenes = Vec::new();
    for (subject, (choices, _)) in subjects.iter().zip(&chosen) {
        let first = scenes.len() + 1;
        scenes.extend(draw(&all, subject, choices, first, usize::MAX));
    }
    scenes
}

/// The first way to draw a slab in which every text finds its place; where there is none, the one that leaves the fewest over. A sheet
/// or scale that the job asks for and that cannot hold the slab with all its texts is given up, the scale first: the title block says
/// which was taken.
fn choose(all: &Frame, subject: &Subject, first: usize) -> (Vec<Choice>, Vec<Scene>) {
    let head = &all.job.head;
    let mut best: Option<(usize, Vec<Choice>, Vec<Scene>)> = None;
    for (size, scale) in [(head.sheet.as_deref(), head.scale), (head.sheet.as_deref(), None), (None, None)] {
        for choices in ways(subject, size, scale) {
            let least = best.as_ref().map_or(usize::MAX, |(least, _, _)| *least);
            let drawn = draw(all, subject, &choices, first, least);
            if drawn.len() < choices.len() {
                continue;
            }
            let unplaced = drawn.iter().map(|d| d.unplaced.len()).sum();
            if unplaced == 0 {
                return (choices, drawn);
            }
            if unplaced < least {
                best = Some((unplaced, choices, drawn));
            }
        }
    }
    best.map(|(_, choices, drawn)| (choices, drawn)).unwrap_or_default()
}

/// The sheets of one way, numbered from `first`; fewer than asked where one does not fit, or where `most` texts or more have no place.
fn draw(all: &Frame, subject: &Subject, choices: &[Choice], first: usize, most: usize) -> Vec<Scene> {
    let mut drawn = Vec::new();
    for (i, choice) in choices.iter().enumerate() {
        let number = first + i;
        let mut neighbours = Vec::new();
        let grid = |station: f64| {
            let at = subject.model.stations.supports.iter().position(|s| (s.centre - station).abs() < 0.5);
            at.and_then(|j| subject.model.grids.get(j)).cloned().unwrap_or_default()
        };
        // Parts of the length meet at match lines; bottom and top of one length do not.
        let goes_on = |a: usize, b: usize| choices[a].high < choices[b].low + 0.5;
        if i > 0 && goes_on(i - 1, i) {
            neighbours.push(Neighbour { station: choice.low, grid: grid(choice.low), sheet: number - 1 });
        }
        if i + 1 < choices.len() && goes_on(i, i + 1) {
            neighbours.push(Neighbour { station: choice.high, grid: grid(choice.high), sheet: number + 1 });
        }
        match sheet(all, subject, choice, number, &neighbours) {
            Some(done) => drawn.push(done),
            None => break,
        }
        if drawn.iter().map(|d: &Scene| d.unplaced.len()).sum::<usize>() >= most {
            break;
        }
    }
    drawn
}

/// What weighs against a sheet: small scales are hard to read, large sheets hard to handle. An A3 at 1:50 comes before an A1 at 1:20,
/// an A1 at 1:50 before an A3 at 1:100, two A1 at 1:50 before one at 1:100 (our own judgement).
fn burden(way: &[Choice]) -> f64 {
    let Some(first) = way.first() else { return f64::INFINITY };
    let of_scale = match first.scale as u32 {
        0..=20 => 0.0,
        21..=25 => 0.2,
        26..=50 => 1.0,
        _ => 3.0,
    };
    let of_size = match first.size.name.as_str() {
        "A3" => 0.0,
        "A2" => 0.9,
        _ => 1.9,
    };
    of_scale + of_size + 1.2 * (way.len() - 1) as f64
}

/// Ways to set a slab on sheets, the best first, each once.
fn ways(subject: &Subject, size: Option<&str>, scale: Option<u32>) -> Vec<Vec<Choice>> {
    let all = &tables().sheets;
    let sizes: Vec<&'static SheetSize> = ["A3", "A2", "A1"]
        .iter()
        .filter(|name| size.is_none_or(|wanted| wanted == **name))
        .filter_map(|name| all.sizes.iter().find(|s| s.name == **name))
        .collect();
    let scales: Vec<f64> = all.scales.iter().filter(|s| scale.is_none_or(|wanted| wanted == **s)).map(|s| f64::from(*s)).collect();
    let st = &subject.model.stations;
    let (low, high) = (st.start.min(st.supports[0].centre), st.end.max(st.supports[st.last()].centre));
    let mut ways = Vec::new();
    // The last sheet of a way has the close-ups.
    let whole: [&[&[&[Band]]]; 6] = [&[STACKED], &[PAIRED], &[BOTTOM, TOP], &[STACKED, DETAILS], &[PAIRED, DETAILS], &[BOTTOM, TOP, DETAILS]];
    for (scale, size) in scales.iter().copied().cartesian_product(&sizes) {
        ways.extend(whole.iter().map(|sheets| {
            let last = sheets.len() - 1;
            sheets.iter().enumerate().map(|(i, columns)| Choice { size, scale, low, high, gap: None, columns, close_ups: i == last }).collect::<Vec<_>>()
        }));
    }
    ways.sort_by(|a, b| burden(a).total_cmp(&burden(b)));
    let Some(size) = sizes.last() else { return ways };
    let mut add = |way: Vec<Choice>| {
        if !ways.iter().any(|known| same(known, &way)) {
            ways.push(way);
        }
    };
    // In parts: as few as the scale allows, then fewer spans a sheet, then larger scales.
    for scale in scales.iter().rev() {
        for share in [1.0, 0.7, 0.5, 0.34] {
            for columns in [STACKED, PAIRED] {
                let v = View::new(size, *scale, low, high, 0.0);
                let room = band_area(size).width() / columns.len() as f64 - 2.0 * margin(&v);
                let parts = windows(subject, low, high, room * scale * share);
                let gap = gap(subject, &v, size, columns);
                add(parts.into_iter().map(|(low, high)| Choice { size, scale: *scale, low, high, gap, columns, close_ups: true }).collect());
            }
        }
    }
    ways
}

fn same(one: &[Choice], other: &[Choice]) -> bool {
    let alike = |(a, b): (&Choice, &Choice)| {
        a.size.name == b.size.name && a.scale == b.scale && a.low == b.low && a.high == b.high && a.gap == b.gap && a.columns == b.columns
    };
    one.len() == other.len() && one.iter().zip(other).all(alike)
}

/// What is left out across a slab too wide for the sheet, mm; none where it fits.
fn gap(subject: &Subject, v: &View, size: &SheetSize, columns: &[&[Band]]) -> Gap {
    let width = subject.slab.width.value;
    let excess = columns.iter().map(|c| {
        let plans = c.iter().filter(|b| matches!(b, Band::BottomPlan | Band::TopPlan)).count().max(1) as f64;
        (bands::height(subject, v, None, c) - band_area(size).height()) / plans
    });
    let excess = excess.fold(0.0, f64::max);
    if excess <= 0.0 {
        return None;
    }
    let out = ((excess + BREAK + 1.0) * v.scale).min(width - 1500.0).max(0.0);
    let from = 0.72 * (width - out);
    Some((from, from + out))
}

/// Parts of a slab no longer than `most`, cut at supports; as few as that allows, and about as long as one another.
fn windows(subject: &Subject, low: f64, high: f64, most: f64) -> Vec<(f64, f64)> {
    let supports = &subject.model.stations.supports;
    let inner: Vec<f64> = supports.iter().skip(1).take(supports.len().saturating_sub(2)).map(|s| s.centre).collect();
    let parts = |most: f64| {
        let mut cuts = vec![low];
        for pair in inner.iter().copied().chain([high]).collect::<Vec<_>>().windows(2) {
            let at = cuts.last().copied().unwrap_or(low);
            if pair[1] - at > most && pair[0] > at {
                cuts.push(pair[0]);
            }
        }
        cuts.push(high);
        cuts
    };
    let fewest = parts(most);
    // The shortest reach that needs no more parts.
    let mut even = fewest.clone();
    for share in (50..100).rev() {
        let tried = parts(most * f64::from(share) / 100.0);
        if tried.len() > fewest.len() {
            break;
        }
        even = tried;
    }
    even.windows(2).map(|w| (w[0], w[1])).collect()
}
