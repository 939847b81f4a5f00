//! A scene as SVG: 1 user unit = 1 mm, a group for each layer and each mark, real text in the shipped font.

use crate::scene::{Anchor, Dash, Layer, Pen, Scene, Shape};
use crate::tables::font::{CAPITAL, FAMILY, face};
use base64::Engine;
use std::collections::BTreeMap;
use svg::Node;
use svg::node::Text as TextNode;
use svg::node::element::{Element, Style};

/// The sheet as an SVG file.
pub fn write(scene: &Scene) -> String {
    let mut root = svg::Document::new()
        .set("width", format!("{}mm", number(scene.width)))
        .set("height", format!("{}mm", number(scene.height)))
        .set("viewBox", format!("0 0 {} {}", number(scene.width), number(scene.height)))
        .set("role", "img")
        .set("aria-labelledby", "title desc")
        .set("lang", "en-GB");
    root.append(labelled("title", "title", &scene.title));
    root.append(labelled("desc", "desc", &scene.description));
    root.append(Style::new(style()));
    let mut paper = Element::new("rect");
    paper.assign("width", number(scene.width));
    paper.assign("height", number(scene.height));
    paper.assign("fill", "#fff");
    root.append(paper);
    for layer in Layer::ALL {
        if let Some(group) = layer_group(scene, layer) {
            root.append(group);
        }
    }
    format!("<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n{root}\n")
}

fn labelled(tag: &str, id: &str, text: &str) -> Element {
    let mut element = Element::new(tag);
    element.assign("id", id);
    element.append(TextNode::new(clean(text)));
    element
}

fn style() -> String {
    let data = base64::engine::general_purpose::STANDARD.encode(face().woff2);
    let font = format!("@font-face{{font-family:'{FAMILY}';src:url(data:font/woff2;base64,{data}) format('woff2')}}\n");
    let text = format!("text{{font-family:'{FAMILY}','Arial Narrow',sans-serif;fill:#000}}\n");
    let line = "path,circle{fill:none;stroke:#000;stroke-linecap:butt;stroke-linejoin:miter}\n.f{fill:#000;stroke:none}";
    font + &text + line
}

/// Items of one layer: first those of no mark, then a group for each mark.
fn layer_group(scene: &Scene, layer: Layer) -> Option<Element> {
    let mut marks: BTreeMap<&str, Vec<&Shape>> = BTreeMap::new();
    for item in scene.items.iter().filter(|i| i.layer == layer) {
        marks.entry(item.mark.as_str()).or_default().push(&item.shape);
    }
    if marks.is_empty() {
        return None;
    }
    let mut group = Element::new("g");
    group.assign("id", layer.name());
    group.assign("data-layer", layer.name());
    for (mark, shapes) in marks {
        if mark.is_empty() {
            draw(&mut group, &shapes);
        } else {
            let mut own = Element::new("g");
            own.assign("id", format!("{}-{}", layer.name(), mark.chars().filter(char::is_ascii_alphanumeric).collect::<String>()));
            own.assign("data-mark", mark);
            own.assign("data-layer", layer.name());
            if let Some(role) = scene.roles.get(mark) {
                own.assign("data-role", role.as_str());
            }
            if let Some(name) = scene.names.get(mark) {
                let mut title = Element::new("title");
                title.append(TextNode::new(clean(name)));
                own.append(title);
            }
            draw(&mut own, &shapes);
            group.append(own);
        }
    }
    Some(group)
}

fn draw(group: &mut Element, shapes: &[&Shape]) {
    // Lines of one pen are one path.
    let mut paths: BTreeMap<(u64, u8), (Pen, String)> = BTreeMap::new();
    for shape in shapes {
        if let Shape::Line { points, closed, pen } = shape {
            let key = ((pen.width * 1000.0).round() as u64, pen.dash as u8);
            paths.entry(key).or_insert_with(|| (*pen, String::new())).1.push_str(&path(points, *closed));
        }
    }
    for (pen, data) in paths.into_values() {
        let mut path = Element::new("path");
        path.assign("d", data);
        stroke(&mut path, pen);
        group.append(path);
    }
    for shape in shapes.iter().filter(|s| !matches!(s, Shape::Line { .. })) {
        group.append(element(shape));
    }
}

fn stroke(element: &mut Element, pen: Pen) {
    element.assign("stroke-width", number(pen.width));
    if let Some(dash) = dashes(pen.dash) {
        element.assign("stroke-dasharray", dash.iter().map(|d| number(*d)).collect::<Vec<_>>().join(" "));
    }
}

/// Dash lengths, mm.
pub fn dashes(dash: Dash) -> Option<&'static [f64]> {
    match dash {
        Dash::Solid => None,
        Dash::Dashed => Some(&[2.4, 1.2]),
        Dash::Chain => Some(&[7.0, 1.2, 0.6, 1.2]),
    }
}

fn path(points: &[[f64; 2]], closed: bool) -> String {
    let mut data = String::new();
    for (i, p) in points.iter().enumerate() {
        data.push_str(if i == 0 { "M" } else { "L" });
        data.push_str(&format!("{} {}", number(p[0]), number(p[1])));
    }
    if closed {
        data.push('Z');
    }
    data
}

fn element(shape: &Shape) -> Element {
    match shape {
        Shape::Line { points, closed, pen } => {
            let mut element = Element::new("path");
            element.assign("d", path(points, *closed));
            stroke(&mut element, *pen);
            element
        }
        Shape::Fill { points } => {
            let mut element = Element::new("path");
            element.assign("d", path(points, true));
            element.assign("class", "f");
            element
        }
        Shape::Circle { centre, radius, pen, filled } => {
            let mut element = Element::new("circle");
            element.assign("cx", number(centre[0]));
            element.assign("cy", number(centre[1]));
            element.assign("r", number(*radius));
            if *filled {
                element.assign("class", "f");
            }
            if let Some(pen) = pen {
                stroke(&mut element, *pen);
            }
            element
        }
        Shape::Text { at, height, text, anchor, upward } => {
            let mut element = Element::new("text");
            element.assign("x", number(at[0]));
            element.assign("y", number(at[1]));
            element.assign("font-size", number(height / CAPITAL));
            match anchor {
                Anchor::Start => {}
                Anchor::Middle => element.assign("text-anchor", "middle"),
                Anchor::End => element.assign("text-anchor", "end"),
            }
            if *upward {
                element.assign("transform", format!("rotate(-90 {} {})", number(at[0]), number(at[1])));
            }
            // The width of the shipped font, so that another font in its place cannot run into its neighbours.
            element.assign("textLength", number(face().width(text, *height)));
            element.append(TextNode::new(clean(text)));
            element
        }
    }
}

/// Two decimals of a millimetre, without noise.
fn number(value: f64) -> String {
    crate::base::num(value, 2)
}

/// Text without control characters; runs of spaces are kept by no-break spaces.
fn clean(text: &str) -> String {
    let plain: String = text.chars().filter(|c| !c.is_control()).collect();
    plain.replace("  ", "\u{a0} ")
}
