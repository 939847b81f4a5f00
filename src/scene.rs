//! Drawing primitives in mm on paper, y down from the top left corner of the sheet. A scene is finished: writers only copy it.

use std::collections::BTreeMap;

/// Who draws a line: decides width, and the layer a viewer can switch.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Layer {
    Frame,
    Grid,
    Concrete,
    Bottom,
    Top,
    Edge,
    Dimension,
    CallOut,
    Text,
}

impl Layer {
    pub const ALL: [Layer; 9] =
        [Layer::Frame, Layer::Grid, Layer::Concrete, Layer::Bottom, Layer::Top, Layer::Edge, Layer::Dimension, Layer::CallOut, Layer::Text];

    pub fn name(self) -> &'static str {
        match self {
            Layer::Frame => "frame",
            Layer::Grid => "grids",
            Layer::Concrete => "concrete",
            Layer::Bottom => "bars-bottom",
            Layer::Top => "bars-top",
            Layer::Edge => "bars-edge",
            Layer::Dimension => "dimensions",
            Layer::CallOut => "call-outs",
            Layer::Text => "text",
        }
    }
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Dash {
    Solid,
    Dashed,
    Chain,
}

#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Pen {
    /// Line width, mm.
    pub width: f64,
    pub dash: Dash,
}

impl Pen {
    pub const fn solid(width: f64) -> Pen {
        Pen { width, dash: Dash::Solid }
    }
}

#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Anchor {
    Start,
    Middle,
    End,
}

#[derive(Clone, Debug)]
pub enum Shape {
    Line {
        points: Vec<[f64; 2]>,
        closed: bool,
        pen: Pen,
    },
    Circle {
        centre: [f64; 2],
        radius: f64,
        pen: Option<Pen>,
        filled: bool,
    },
    Fill {
        points: Vec<[f64; 2]>,
    },
    /// Text on its base line; `height` is the height of its capitals, `upward` turns it to read from the right.
    Text {
        at: [f64; 2],
        height: f64,
        text: String,
        anchor: Anchor,
        upward: bool,
    },
}

#[derive(Clone, Debug)]
pub struct Item {
    pub layer: Layer,
    /// The bar mark this item belongs to; empty for none.
    pub mark: String,
    pub shape: Shape,
}

#[derive(Clone, Debug)]
pub struct Bookmark {
    pub title: String,
}

#[derive(Clone, Debug, Default)]
pub struct Scene {
    pub title: String,
    pub description: String,
    pub width: f64,
    pub height: f64,
    pub bookmarks: Vec<Bookmark>,
    /// Role of each mark's bars, such as `span-bottom`.
    pub roles: BTreeMap<String, String>,
    pub items: Vec<Item>,
}

impl Scene {
    pub fn push(&mut self, layer: Layer, mark: &str, shape: Shape) {
        self.items.push(Item { layer, mark: mark.into(), shape });
    }

    pub fn line(&mut self, layer: Layer, points: &[[f64; 2]], pen: Pen) {
        self.push(layer, "", Shape::Line { points: points.to_vec(), closed: false, pen });
    }

    pub fn rect(&mut self, layer: Layer, min: [f64; 2], max: [f64; 2], pen: Pen) {
        let points = vec![min, [max[0], min[1]], max, [min[0], max[1]]];
        self.push(layer, "", Shape::Line { points, closed: true, pen });
    }
}
