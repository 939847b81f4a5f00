//! The sheets as drawn: no text meets another text, nothing leaves the frame, drawn lengths are true lengths at the stated scale.

pub mod collisions;
mod generated;

use crate::samples::{SAMPLES, sample};
use collisions::collisions;
use slabwright::draw::{self, paper::text_area};
use slabwright::issue_set::IssueSet;
use slabwright::scene::{Layer, Scene, Shape};

pub fn sheets(set: &IssueSet) -> Vec<Scene> {
    draw::sheets(&set.job, &set.model, &set.checks)
}

#[test]
fn no_text_of_a_sample_meets_anything() {
    for name in SAMPLES {
        for scene in sheets(&sample(name)) {
            let met = collisions(&scene);
            assert!(met.is_empty(), "{}: {met:#?}", scene.title);
        }
    }
}

#[test]
fn nothing_stands_outside_the_sheet() {
    for name in SAMPLES {
        for scene in sheets(&sample(name)) {
            for item in &scene.items {
                let inside = |p: [f64; 2]| p[0] >= -0.01 && p[1] >= -0.01 && p[0] <= scene.width + 0.01 && p[1] <= scene.height + 0.01;
                let ok = match &item.shape {
                    Shape::Line { points, .. } | Shape::Fill { points, .. } => points.iter().all(|p| inside(*p)),
                    Shape::Circle { centre, .. } => inside(*centre),
                    Shape::Text { at, height, text, anchor, upward } => {
                        let area = text_area(*at, *height, text, *anchor, *upward);
                        inside(area.min) && inside(area.max)
                    }
                };
                assert!(ok, "{}: {item:?}", scene.title);
            }
        }
    }
}

#[test]
fn a_drawn_straight_bar_is_as_long_as_its_schedule_says() {
    for name in SAMPLES {
        let set = sample(name);
        let scenes = sheets(&set);
        for (_, bar) in set.model.bars().filter(|(_, b)| b.is_straight()) {
            // Plans and drawn-out bars carry the mark; the stated scale turns paper back into millimetres.
            let found = scenes.iter().any(|scene| {
                let scale: f64 = scene.description.split(" at 1:").nth(1).unwrap().split(' ').next().unwrap().parse().unwrap();
                scene.items.iter().filter(|i| i.mark == bar.mark && matches!(i.layer, Layer::Bottom | Layer::Top | Layer::Edge)).any(|item| match &item.shape {
                    Shape::Line { points, .. } => {
                        let length: f64 = points.windows(2).map(|w| (w[1][0] - w[0][0]).hypot(w[1][1] - w[0][1])).sum();
                        (length * scale - f64::from(bar.length)).abs() < 0.5
                    }
                    _ => false,
                })
            });
            assert!(found, "{name}: mark {} of {} mm is nowhere drawn at its length", bar.mark, bar.length);
        }
    }
}

#[test]
fn every_mark_is_called_out_with_its_number() {
    for name in SAMPLES {
        let mut set = sample(name);
        set.documents(&["sheet".into()]).unwrap();
        let checks: Vec<_> = set.all_checks().into_iter().filter(|c| c.code == "sheet-marks").collect();
        assert_eq!(checks.len(), set.model.bars().count());
        assert!(checks.iter().all(|c| c.value == c.limit), "{name}: {checks:?}");
    }
}

/// A sample with keys of `[job]` and lengths changed.
fn changed(name: &str, from: &str, to: &str) -> IssueSet {
    let text = std::fs::read_to_string(crate::samples::root().join(format!("samples/{name}.toml"))).unwrap();
    assert!(text.contains(from));
    slabwright::issue_set::detail(text.replace(from, to).as_bytes(), &|_| Err("none".into())).set.unwrap()
}

#[test]
fn a_slab_too_large_for_the_sheet_asked_for_still_gets_one() {
    let set = changed("ferry-hall", "revision =", "sheet = \"A3\"\nscale = 20\nrevision =");
    let scenes = sheets(&set);
    assert!(!scenes.is_empty() && scenes.iter().all(|s| s.unplaced.is_empty()), "three spans at 1:20 do not go on an A3: scale and sheet are given up");
    let small = sheets(&changed("gate-landing", "revision =", "sheet = \"A3\"\nrevision ="));
    assert!(small.len() == 3 && small.iter().all(|s| s.unplaced.is_empty() && s.width == 420.0), "a landing goes on A3: bottom, top and close-ups");
}

#[test]
fn texts_without_a_place_are_a_failed_check_and_stamp_the_sheet() {
    let mut set = changed("rope-walk", "revision =", "sheet = \"A1\"\nscale = 100\nrevision =");
    for span in &mut set.model.slabs[0].stations.spans {
        assert!(span.clear > 5000.0);
    }
    // The same bars with far longer marks: no sheet holds their call-outs.
    for (i, bar) in set.model.slabs[0].bars.iter_mut().enumerate() {
        bar.mark = format!("{i:0>60}");
    }
    let pdf = set.documents(&["sheet-svg".into()]).unwrap();
    let crowded: Vec<_> = set.all_checks().into_iter().filter(|c| c.code == "sheet-texts").collect();
    assert!(crowded.len() == 1 && crowded[0].value > 0.0, "{crowded:?}");
    assert!(String::from_utf8_lossy(&pdf[0].bytes).contains("NOT FOR CONSTRUCTION: "), "the sheet is stamped");
}

#[test]
fn a_bent_up_end_is_as_high_as_the_schedule_says() {
    // Invented: thin bearings at the ends make the bottom bars bend up where a straight end does not anchor.
    let set = changed("mill-store", "required = 362", "required = 362\nshear = 60");
    let bent: Vec<_> = set.model.bars().filter(|(_, b)| b.shape == "11").map(|(_, b)| (b.mark.clone(), b.dims[&'B'].min(b.dims[&'A']))).collect();
    for scene in sheets(&set) {
        for (mark, height) in &bent {
            let said =
                scene.items.iter().any(|i| matches!(&i.shape, Shape::Text { text, .. } if text == &height.to_string() || *text == format!("{mark} {height}")));
            assert!(said, "{}: the upright of mark {mark} is {height}", scene.title);
        }
    }
}
