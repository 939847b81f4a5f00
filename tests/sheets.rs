//! The sheets as drawn: no text meets another text, nothing leaves the frame, drawn lengths are true lengths at the stated scale.

use crate::samples::{SAMPLES, sample};
use slabwright::draw::{self, paper::text_area};
use slabwright::issue_set::IssueSet;
use slabwright::scene::{Layer, Scene, Shape};

pub fn sheets(set: &IssueSet) -> Vec<Scene> {
    draw::sheets(&set.job, &set.model, &set.checks)
}

/// Every two texts of a scene whose boxes meet, and every text that a line of another thing crosses.
pub fn collisions(scene: &Scene) -> (Vec<String>, Vec<String>) {
    let texts: Vec<_> = scene
        .items
        .iter()
        .filter_map(|item| match &item.shape {
            Shape::Text { at, height, text, anchor, weight, upward } => Some((text_area(*at, *height, text, *anchor, *weight, *upward), text.clone())),
            _ => None,
        })
        .collect();
    let mut texts_met = Vec::new();
    for (i, (a, one)) in texts.iter().enumerate() {
        for (b, other) in &texts[i + 1..] {
            if a.meets(b) {
                texts_met.push(format!("{one:?} meets {other:?}"));
            }
        }
    }
    let mut lines_met = Vec::new();
    for (area, text) in &texts {
        let crossed = scene.items.iter().any(|item| match &item.shape {
            Shape::Line { points, closed, .. } => {
                let closing = if *closed { points.last().zip(points.first()) } else { None };
                points.windows(2).map(|w| (w[0], w[1])).chain(closing.map(|(a, b)| (*a, *b))).any(|(a, b)| area.is_crossed(a, b))
            }
            _ => false,
        });
        if crossed {
            lines_met.push(text.clone());
        }
    }
    (texts_met, lines_met)
}

#[test]
fn no_text_of_a_sample_meets_another_text() {
    for name in SAMPLES {
        for scene in sheets(&sample(name)) {
            let (texts, lines) = collisions(&scene);
            eprintln!("{}: {} texts meet texts, {} texts are crossed by lines: {:?}", scene.title, texts.len(), lines.len(), lines);
            assert!(texts.is_empty(), "{}: {texts:?}", scene.title);
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
                    Shape::Text { at, height, text, anchor, weight, upward } => {
                        let area = text_area(*at, *height, text, *anchor, *weight, *upward);
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
