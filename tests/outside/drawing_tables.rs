//! Drawing practice: sheet sizes and frames (ISO 5457), lettering (ISO 3098), line widths (ISO 128-2), scales (ISO 5455), data fields
//! (ISO 7200), dimensions (ISO 129-1). None of these standards was read: the figures are second-hand, from summaries of drafting standards
//! that paraphrase them; beside each stands how sure it is: high = two or more sources agree, medium = one good summary.

use crate::samples::{SAMPLES, sample};
use slabwright::scene::{Layer, Scene, Shape};
use slabwright::tables::tables;

/// ISO 5457 Table 1, landscape: trimmed width and height, mm. High: every source.
const SIZES: [(&str, f64, f64); 4] = [("A1", 841.0, 594.0), ("A2", 594.0, 420.0), ("A3", 420.0, 297.0), ("A4", 297.0, 210.0)];

/// ISO 5457: width and height of the drawing space, mm. Medium to high: one summary of the 1999 edition; older editions differ.
const SPACES: [(&str, f64, f64); 3] = [("A1", 811.0, 574.0), ("A2", 564.0, 400.0), ("A3", 390.0, 277.0)];

/// ISO 5457: fields of the grid reference along the long and the short side. Medium; A2 follows from the length of 50 mm.
const FIELDS: [(&str, [u32; 2]); 3] = [("A1", [16, 12]), ("A2", [12, 8]), ("A3", [8, 6])];

/// ISO 3098-1: nominal heights of lettering, mm. High: two summaries.
const HEIGHTS: [f64; 8] = [1.8, 2.5, 3.5, 5.0, 7.0, 10.0, 14.0, 20.0];

/// ISO 128-2: line widths, mm. High: three summaries.
const WIDTHS: [f64; 9] = [0.13, 0.18, 0.25, 0.35, 0.5, 0.7, 1.0, 1.4, 2.0];

/// ISO 5455: recommended reductions up to 1:100. High.
const SCALES: [u32; 7] = [1, 2, 5, 10, 20, 50, 100];

/// ISO 7200 Table 1 to 3: what the field is called here, a value of the recommended number of characters. High: two listings agree.
/// The legal owner, which it asks for too, has an empty field: it is not in a job file.
const FIELDS_OF_THE_TITLE_BLOCK: [(&str, &str, usize); 8] = [
    ("Drawing number", "K4170-RF-20-0201", 16),
    ("Revision", "P2", 2),
    ("Date of issue", "2026-05-18", 10),
    ("Sheet", "1 of", 4),
    ("Title", "First floor, grids B to E", 25),
    ("Approved", "", 20),
    ("Drawn", "Alexandra R. Person-", 20),
    ("Document type", "Reinforcement drawing", 30),
];

fn sheets() -> Vec<Scene> {
    let of = |name: &&str| {
        let set = sample(name);
        slabwright::draw::sheets(&set.job, &set.model, &set.checks)
    };
    SAMPLES.iter().flat_map(of).collect()
}

#[test]
fn sheets_are_of_iso_5457_sizes_with_its_borders() {
    let t = &tables().sheets;
    assert_eq!(t.sizes.len(), SIZES.len());
    for (name, width, height) in SIZES {
        let size = t.sizes.iter().find(|s| s.name == name).unwrap();
        assert_eq!((size.width, size.height), (width, height), "{name}");
    }
    // 20 mm to the binding edge, 10 mm elsewhere, a frame of 0.7 mm.
    assert_eq!((t.border_left, t.border, t.frame_pen), (20.0, 10.0, 0.7));
    for (name, width, height) in SPACES {
        let size = t.sizes.iter().find(|s| s.name == name).unwrap();
        assert_eq!((size.width - t.border_left - t.border, size.height - 2.0 * t.border), (width, height), "{name}");
    }
}

#[test]
fn fields_of_the_border_are_about_fifty_millimetres_and_even_in_number() {
    for (name, fields) in FIELDS {
        let size = tables().sheets.sizes.iter().find(|s| s.name == name).unwrap();
        assert_eq!(size.fields, fields, "{name}");
        for (count, side) in size.fields.iter().zip([size.width, size.height]) {
            // Counted from the centring marks in fields of 50 mm; the last ones take the remainder.
            assert!(count % 2 == 0 && (f64::from(*count) * 50.0 - side).abs() <= 60.0, "{name}: {count} fields on {side} mm");
        }
    }
}

#[test]
fn text_heights_are_of_the_iso_3098_series_and_none_read_is_under_two_and_a_half() {
    assert_eq!(tables().sheets.heights, HEIGHTS);
    assert_eq!(tables().sheets.widths, WIDTHS);
    for size in &tables().sheets.sizes {
        let text = &size.text;
        let heights = [text.note, text.call_out, text.view, text.number];
        for height in heights {
            // 2.5 mm is the least to be read. High: three summaries.
            assert!(HEIGHTS.contains(&height) && height >= 2.5, "{height}");
        }
        // No rank under the last, and no more than two steps of root two over it.
        assert!(heights.windows(2).all(|w| w[1] >= w[0] && w[1] / w[0] < 2.1), "{heights:?}");
    }
    for scene in sheets() {
        for item in &scene.items {
            if let Shape::Text { height, text, .. } = &item.shape {
                assert!(HEIGHTS.contains(height), "{}: {text:?} is {height} mm high", scene.title);
            }
        }
    }
}

#[test]
fn line_widths_are_of_the_iso_128_series_one_step_down_with_each_size() {
    let step = |width: f64| WIDTHS.iter().position(|w| *w == width);
    let of = |name: &str| {
        let pens = tables().sheets.sizes.iter().find(|s| s.name == name).unwrap().pens;
        [pens.main, pens.other, pens.concrete, pens.thin].map(|w| step(w).unwrap_or_else(|| panic!("{name}: {w} mm is not of the series")))
    };
    for name in ["A1", "A2", "A3", "A4"] {
        // Main bars over other bars over concrete over thin lines. High: a summary of the Standard method and one office rule agree.
        assert!(of(name).windows(2).all(|w| w[0] == w[1] + 1), "{name}: {:?}", of(name));
    }
    for (larger, smaller) in [("A1", "A2"), ("A2", "A3")] {
        assert_eq!(of(larger), of(smaller).map(|s| s + 1), "{larger} and {smaller}");
    }
    // A1: main bars 0.7, concrete 0.35, dimensions 0.25 (Standard method, from memory; medium).
    assert_eq!(of("A1"), [0.7, 0.5, 0.35, 0.25].map(|w| step(w).unwrap()));
}

#[test]
fn scales_are_recommended_ones_but_for_one_to_twenty_five() {
    // 1:25 is not in ISO 5455; British offices use it, and the sheet says its scale.
    let others: Vec<u32> = tables().sheets.scales.iter().copied().filter(|s| !SCALES.contains(s)).collect();
    assert_eq!(others, [25]);
}

#[test]
fn title_block_and_schedule_hold_the_fields_of_iso_7200_at_their_lengths() {
    let mut set = sample("ferry-hall");
    let value = |label: &str| FIELDS_OF_THE_TITLE_BLOCK.iter().find(|(l, ..)| *l == label).unwrap().1.to_string();
    let head = &mut set.job.head;
    (head.drawing, head.title, head.drawn_by, head.revision) = (value("Drawing number"), value("Title"), value("Drawn"), value("Revision"));
    let scenes = slabwright::draw::sheets(&set.job, &set.model, &set.checks);
    let texts = |scene: &Scene| -> Vec<(String, f64)> {
        let text = |shape: &Shape| if let Shape::Text { text, height, .. } = shape { Some((text.clone(), *height)) } else { None };
        scene.items.iter().filter_map(|i| text(&i.shape)).collect()
    };
    let written = texts(&scenes[0]);
    for (label, value, length) in FIELDS_OF_THE_TITLE_BLOCK {
        assert!(value.chars().count() <= length, "{value:?} is longer than {length}");
        assert!(written.iter().any(|(t, _)| t == label), "the title block has no field {label}");
        let is_read = |(text, height): &(String, f64)| text.starts_with(value) && *height >= 2.5;
        assert!(value.is_empty() || written.iter().any(is_read), "{label}: {value:?} is not written at 2.5 mm or more");
    }
    let pages = slabwright::draw::schedule(&set.job, &set.model, &set.checks);
    for label in ["Drawing number", "Title", "Drawn", "Revision", "Date of issue"] {
        let is_read = |(text, height): &(String, f64)| *text == value(label) && *height >= 2.5;
        assert!(texts(&pages[0]).iter().any(is_read), "the schedule does not say {label} {:?}", value(label));
    }
}

#[test]
fn dimensions_of_a_sheet_have_one_height_of_text_and_no_unit() {
    // ISO 129-1: one height for all dimensions; millimetres, said once and not with each value. High: two summaries.
    for scene in sheets() {
        let mut heights: Vec<f64> = Vec::new();
        for item in scene.items.iter().filter(|i| i.layer == Layer::Dimension) {
            let Shape::Text { height, text, .. } = &item.shape else { continue };
            assert!(!text.ends_with(" mm") && !text.ends_with("mm"), "{}: {text:?}", scene.title);
            if !heights.contains(height) {
                heights.push(*height);
            }
        }
        assert_eq!(heights.len(), 1, "{}: {heights:?}", scene.title);
        let units =
            |i: &slabwright::scene::Item| matches!(&i.shape, Shape::Text { text, .. } if text.contains("Dimensions in mm") || text.contains("millimetres"));
        assert!(scene.items.iter().any(units), "{}: the unit is said nowhere", scene.title);
    }
}

#[test]

fn letters_and_lines_of_the_border_are_those_of_iso_5457() {
    // Characters of 3.5 mm, lines of 0.35 mm. Medium: one summary.
    let t = &tables().sheets;
    for scene in sheets() {
        let is_outside = |p: [f64; 2]| p[0] < t.border_left || p[0] > scene.width - t.border || p[1] < t.border || p[1] > scene.height - t.border;
        let is_on_frame =
            |p: [f64; 2]| [p[0] - t.border_left, p[0] - (scene.width - t.border), p[1] - t.border, p[1] - (scene.height - t.border)].contains(&0.0);
        for item in scene.items.iter().filter(|i| i.layer == Layer::Frame) {
            match &item.shape {
                Shape::Text { at, height, text, .. } if is_outside(*at) => assert_eq!(*height, 3.5, "{}: {text:?}", scene.title),
                Shape::Line { points, pen, .. } if points.len() == 2 && is_on_frame(points[0]) && is_outside(points[1]) => {
                    assert_eq!(pen.width, 0.35, "{}: {points:?}", scene.title);
                }
                _ => {}
            }
        }
    }
}
