//! Collisions on a sheet: every text box, measured with the font's own widths, against every other text and every line, dot and fill.

use slabwright::draw::paper::{Area, text_area};
use slabwright::scene::{Item, Layer, Scene, Shape};

/// Two things that meet: what the text says, and what it meets.
#[derive(Debug)]
pub struct Collision {
    pub text: String,
    pub with: String,
}

/// What a line is called in a report.
fn name(item: &Item) -> String {
    let kind = match item.layer {
        Layer::Frame => "frame",
        Layer::Grid => "grid line",
        Layer::Concrete => "concrete",
        Layer::Bottom | Layer::Top | Layer::Edge => "bar",
        Layer::Dimension => "dimension line",
        Layer::CallOut => "call-out line",
        Layer::Text => "line",
    };
    if item.mark.is_empty() { kind.to_string() } else { format!("{kind} of mark {}", item.mark) }
}

fn meets(area: &Area, shape: &Shape) -> bool {
    match shape {
        Shape::Line { points, closed, .. } => {
            let closing = if *closed { points.last().zip(points.first()) } else { None };
            points.windows(2).map(|w| (w[0], w[1])).chain(closing.map(|(a, b)| (*a, *b))).any(|(a, b)| area.is_crossed(a, b))
        }
        Shape::Fill { points } => points.iter().any(|p| area.holds(&Area::new(*p, *p))),
        Shape::Circle { centre, radius, filled, .. } => {
            let near = [centre[0].clamp(area.min[0], area.max[0]), centre[1].clamp(area.min[1], area.max[1])];
            let far = [0, 1].map(|i| (centre[i] - area.min[i]).abs().max((centre[i] - area.max[i]).abs()));
            let (nearest, farthest) = ((near[0] - centre[0]).hypot(near[1] - centre[1]), far[0].hypot(far[1]));
            // A ring may stand round a text, as a grid letter's does.
            nearest < *radius && (*filled || farthest > *radius)
        }
        Shape::Text { .. } => false,
    }
}

/// Every collision of a scene.
pub fn collisions(scene: &Scene) -> Vec<Collision> {
    let texts: Vec<(Area, &str)> = scene
        .items
        .iter()
        .filter_map(|item| match &item.shape {
            Shape::Text { at, height, text, anchor, upward } => Some((text_area(*at, *height, text, *anchor, *upward), text.as_str())),
            _ => None,
        })
        .collect();
    let mut met = Vec::new();
    for (i, (area, text)) in texts.iter().enumerate() {
        for (_, other) in texts[i + 1..].iter().filter(|(b, _)| area.meets(b)) {
            met.push(Collision { text: text.to_string(), with: format!("text {other:?}") });
        }
        for item in scene.items.iter().filter(|item| meets(area, &item.shape)) {
            met.push(Collision { text: text.to_string(), with: name(item) });
        }
        let sheet = Area::new([0.0, 0.0], [scene.width, scene.height]);
        if !sheet.holds(area) {
            met.push(Collision { text: text.to_string(), with: "edge of the sheet".into() });
        }
    }
    met
}
