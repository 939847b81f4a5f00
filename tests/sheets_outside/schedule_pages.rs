//! The printed schedule: no text meets anything, headings stand over their rows, a bar without a shape code has its sketch.

use crate::random_jobs::generator::draft;
use crate::samples::{SAMPLES, sample};
use crate::sheets::collisions::collisions;
use slabwright::draw;
use slabwright::issue_set::{IssueSet, detail};
use slabwright::place::{BarType, Set};
use slabwright::scene::{Layer, Scene, Shape};
use slabwright::tables::{ShapeCode, tables};

fn pages(set: &IssueSet) -> Vec<Scene> {
    draw::schedule(&set.job, &set.model, &set.checks)
}

/// Texts of a page with their base lines, from the top down.
fn texts(scene: &Scene) -> Vec<(f64, f64, &str)> {
    let mut list: Vec<(f64, f64, &str)> = scene
        .items
        .iter()
        .filter_map(|item| match &item.shape {
            Shape::Text { at, height, text, .. } => Some((at[1], *height, text.as_str())),
            _ => None,
        })
        .collect();
    list.sort_by(|a, b| a.0.total_cmp(&b.0));
    list
}

/// An invented job of three slabs with more than sixty marks between them.
fn many_marks() -> IssueSet {
    let mut job = draft(0);
    let with_many_spans = (0..400).flat_map(|seed| draft(seed).slabs).filter(|s| s.spans.len() > 7 && s.thickness > 200 && s.width < 9000);
    job.slabs = with_many_spans.take(3).collect();
    for (i, slab) in job.slabs.iter_mut().enumerate() {
        slab.mark = format!("LEVEL-{}", i + 1);
        slab.members = i as u32 + 1;
    }
    (job.deduction, job.longest, job.share, job.least_lap) = ("\"bs8110-3.24\"".into(), 12_000, 50, 0);
    (job.concrete, job.steel, job.letter, job.aggregate) = ("C32/40", "B500B", "H", 20);
    let outcome = detail(job.text(None).as_bytes(), &|_: &str| Err("no files here".into()));
    outcome.set.unwrap_or_else(|| panic!("{:?}", outcome.faults))
}

/// A sample with a bar that no shape code names: a crank at 30°, a leg down and a leg back.
fn with_a_bar_of_shape_99() -> IssueSet {
    let mut set = sample("mill-store");
    let bar = &mut set.model.slabs[0].bars[1];
    bar.shape = "99";
    bar.dims.clear();
    bar.length = 2575;
    let rise = 200.0;
    let axis =
        vec![[0.0, 0.0, 0.0], [900.0, 0.0, 0.0], [900.0 + rise * 3f64.sqrt(), 0.0, rise], [2000.0, 0.0, rise], [2000.0, 0.0, -250.0], [1600.0, 0.0, -250.0]];
    bar.sets = vec![Set { axis, ..bar.sets[0].clone() }];
    set
}

/// A sample with the longest texts that a job file may hold, in the widest letter; and a slab of the longest mark and the most members.
fn with_the_longest_texts() -> IssueSet {
    let mut set = sample("orchard-annexe");
    let head = &mut set.job.head;
    let wide = |letters: usize| "W".repeat(letters);
    (head.number, head.drawing, head.revision) = (wide(20), wide(40), wide(6));
    for text in [&mut head.project, &mut head.title, &mut head.schedule, &mut head.drawn_by, &mut head.checked_by] {
        *text = wide(60);
    }
    let slab = &mut set.model.slabs[0];
    (slab.mark, slab.members) = (wide(12), 99);
    for bar in &mut slab.bars {
        (bar.members, bar.length) = (99, 18_000);
    }
    set
}

#[test]
fn no_text_of_a_schedule_meets_anything() {
    let sets = SAMPLES.iter().map(|name| sample(name)).chain([many_marks(), with_a_bar_of_shape_99(), with_the_longest_texts()]);
    for set in sets {
        for scene in pages(&set) {
            let met = collisions(&scene);
            assert!(met.is_empty(), "{}: {met:#?}", scene.description);
        }
    }
}

#[test]
fn a_long_drawing_number_is_printed_in_full() {
    let mut set = sample("mill-store");
    set.job.head.drawing = "CFH-NNN-ZZ-01-DR-S-20-00201-BUILDING-TWO".into();
    let pages = pages(&set);
    let printed: Vec<&str> = texts(&pages[0]).into_iter().map(|(.., t)| t).collect();
    let is_there = |at: usize| printed.contains(&&set.job.head.drawing[..at]) && printed.contains(&&set.job.head.drawing[at..]);
    assert!((1..40).any(is_there), "{printed:?}");
}

#[test]
fn a_heading_stands_over_the_rows_of_its_slab_on_every_page() {
    let set = many_marks();
    assert!(set.model.slabs.len() == 3 && set.model.bars().count() >= 60, "{} marks", set.model.bars().count());
    let pages = pages(&set);
    let mut continued = 0;
    for scene in pages.iter().filter(|s| !s.rows.is_empty()) {
        let texts = texts(scene);
        let headings: Vec<f64> = texts.iter().filter(|(.., t)| t.starts_with("Slab LEVEL-")).map(|(y, ..)| *y).collect();
        continued += texts.iter().filter(|(.., t)| t.ends_with(", continued")).count();
        let first = scene.rows.iter().map(|r| r.area[0][1]).fold(f64::INFINITY, f64::min);
        let last = scene.rows.iter().map(|r| r.area[1][1]).fold(0.0, f64::max);
        assert!(headings[0] < first, "a page begins with a heading");
        for heading in headings {
            let under = scene.rows.iter().filter(|r| r.area[0][1] > heading).count();
            assert!(heading < last && under >= 1, "a heading is the last line of a page");
        }
        assert!(texts.iter().any(|(.., t)| *t == "Bar mark"), "heads are repeated");
    }
    assert!(continued >= 3, "{continued} headings are continued");
    let listed: Vec<&str> = pages.iter().flat_map(|s| &s.rows).map(|r| r.mark.as_str()).collect();
    let marks: Vec<&str> = set.model.bars().map(|(_, b)| b.mark.as_str()).collect();
    assert_eq!(listed, marks, "every mark has one row, in order");
}

#[test]
fn masses_of_each_group_add_up_to_the_grand_total() {
    let set = many_marks();
    let masses = slabwright::report::steel::masses(&set.model);
    let total = &masses.last().unwrap().sum;
    assert!((total.kg - set.model.total_kg()).abs() < 1e-6);
    for group in ["size", "slab", "layer", "class"] {
        let of_group = || masses.iter().filter(|m| m.group == group).map(|m| m.sum);
        assert!((of_group().map(|s| s.kg).sum::<f64>() - total.kg).abs() < 1e-6, "{group}");
        assert_eq!(of_group().map(|s| s.bars).sum::<u64>(), total.bars, "{group}");
    }
    let printed: Vec<String> = pages(&set).iter().flat_map(|s| texts(s).into_iter().map(|(.., t)| t.to_string()).collect::<Vec<_>>()).collect();
    for figure in [format!("{:.1}", total.kg), total.bars.to_string(), "Grand total".to_string(), "By size".to_string(), "By slab".to_string()] {
        assert!(printed.contains(&figure), "{figure} is not printed");
    }
}

#[test]
fn a_bar_of_shape_99_has_its_sketch_with_every_leg() {
    let set = with_a_bar_of_shape_99();
    let pages = pages(&set);
    let mark = &set.model.slabs[0].bars[1].mark;
    let page = pages.iter().find(|s| s.rows.iter().any(|r| r.mark == *mark)).unwrap();
    let row = page.rows.iter().find(|r| r.mark == *mark).unwrap();
    let in_row: Vec<&str> = texts(page).into_iter().filter(|(y, ..)| row.area[0][1] < *y && *y < row.area[1][1]).map(|(.., t)| t).collect();
    // Over the outside of a bar of 10 mm: half its size times tan(θ/2) past each corner, 1.3 mm at 30° and 5 mm at a right angle.
    let slope = 400.0 + 2.0 * 5.0 * 15f64.to_radians().tan();
    let crest = 2000.0 - 900.0 - 200.0 * 3f64.sqrt() + 5.0 * 15f64.to_radians().tan() + 5.0;
    for figure in [901.0, slope.round(), crest.round(), 450.0 + 10.0, 400.0 + 5.0] {
        assert!(in_row.contains(&figure.to_string().as_str()), "{figure} is not in {in_row:?}");
    }
    assert_eq!(in_row.iter().filter(|t| **t == "150°").count(), 2, "{in_row:?}");
    let drawn = page.items.iter().any(|i| i.mark == *mark && i.layer == Layer::Edge && matches!(&i.shape, Shape::Line { points, .. } if points.len() > 6));
    assert!(drawn, "the bar itself is drawn");
}

/// A sample that lists one invented bar of every shape code.
fn with_every_shape() -> IssueSet {
    let mut set = sample("mill-store");
    let bars = &mut set.model.slabs[0].bars;
    let model = bars[0].clone();
    let bar_of = |(i, shape): (usize, &'static ShapeCode)| {
        let dims = shape.measured.keys().filter_map(|l| l.chars().next()).zip([600, 260, 450, 240, 600, 300]).collect();
        BarType { mark: format!("{:02}", i + 1), shape: &shape.code, dims, ..model.clone() }
    };
    *bars = tables().shapes.list.iter().enumerate().filter(|(_, s)| s.code != "99").map(bar_of).collect();
    set
}

#[test]
fn every_shape_has_a_picture_with_all_its_letters() {
    let set = with_every_shape();
    let pages = pages(&set);
    for scene in &pages {
        let met = collisions(scene);
        assert!(met.is_empty(), "{}: {met:#?}", scene.description);
    }
    for bar in &set.model.slabs[0].bars {
        let page = pages.iter().find(|s| s.rows.iter().any(|r| r.mark == bar.mark)).unwrap();
        let row = page.rows.iter().find(|r| r.mark == bar.mark).unwrap();
        let texts: Vec<&str> = texts(page).into_iter().filter(|(y, ..)| row.area[0][1] < *y && *y < row.area[1][1]).map(|(.., t)| t).collect();
        for letter in bar.dims.keys() {
            assert!(texts.contains(&letter.to_string().as_str()), "shape {}: {letter} is not in {texts:?}", bar.shape);
        }
    }
}
