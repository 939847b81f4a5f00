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
