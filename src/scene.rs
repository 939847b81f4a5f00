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

impl Anchor {
    /// The share of a text's width that lies before its anchor.
    pub fn before(self) -> f64 {
        match self {
            Anchor::Start => 0.0,
            Anchor::Middle => 0.5,
            Anchor::End => 1.0,
        }
    }
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

/// A place that a reader may want to jump to.
#[derive(Clone, Debug, PartialEq)]
pub struct Bookmark {
    pub title: String,
    /// Upper left corner of what is shown, mm.
    pub at: [f64; 2],
    /// 0 for the page, 1 for a view on it, 2 for a mark in the view.
    pub level: u8,
}

/// Where the schedule lists a mark: lowest and highest corner, mm.
#[derive(Clone, Debug, PartialEq)]
pub struct Row {
    pub mark: String,
    pub area: [[f64; 2]; 2],
    /// The cell that holds the mark.
    pub cell: [[f64; 2]; 2],
}

#[derive(Clone, Debug, Default)]
pub struct Scene {
    pub title: String,
    pub description: String,
    pub width: f64,
    pub height: f64,
    /// In reading order; a bookmark stands under the last one before it of a lower level.
    pub bookmarks: Vec<Bookmark>,
    /// Mark of the slab that a sheet shows; empty on other pages.
    pub slab: String,
    /// Texts that found no free place: they stand on something.
    pub unplaced: Vec<String>,
    pub rows: Vec<Row>,
    /// What the bars of each mark are for, such as `span-bottom`.
    pub roles: BTreeMap<String, String>,
    /// Each mark in words, such as `mark 04, H12, T1`.
    pub names: BTreeMap<String, String>,
    pub items: Vec<Item>,
}

/// A text that calls out a mark.
#[derive(Clone, Copy, Debug)]
pub struct CallOut<'s> {
    pub mark: &'s str,
    pub text: &'s str,
    pub shape: &'s Shape,
}

impl CallOut<'_> {
    /// Where its base line starts or turns, mm.
    pub fn at(&self) -> Option<[f64; 2]> {
        if let Shape::Text { at, .. } = self.shape { Some(*at) } else { None }
    }

    /// The number of bars where the text has it: `37H12-01-200 B1` says 37. A mark without its number says nothing.
    pub fn number(&self) -> Option<u32> {
        let digits = self.text.find(|c: char| !c.is_ascii_digit()).map_or(self.text, |end| &self.text[..end]);
        let is_full = self.text[digits.len()..].starts_with(|c: char| c.is_ascii_uppercase()) && self.text.contains(&format!("-{}", self.mark));
        if is_full { digits.parse().ok() } else { None }
    }
}

/// For each mark the scene and the call-out that a reader wants first: the one with the number before any other, else the first drawn.
pub fn first_call_outs<'s>(scenes: impl Iterator<Item = &'s Scene>) -> BTreeMap<&'s str, (usize, CallOut<'s>)> {
    let mut first: BTreeMap<&str, (usize, CallOut)> = BTreeMap::new();
    for (i, call_out) in scenes.enumerate().flat_map(|(i, scene)| scene.call_outs().map(move |c| (i, c))) {
        let is_full = |c: &CallOut| c.number().is_some();
        if first.get(call_out.mark).is_none_or(|(_, known)| is_full(&call_out) && !is_full(known)) {
            first.insert(call_out.mark, (i, call_out));
        }
    }
    first
}

/// The corner from which a thing at `at` is seen with something over and before it, mm.
pub fn seen_from(at: [f64; 2]) -> [f64; 2] {
    [(at[0] - 40.0).max(0.0), (at[1] - 30.0).max(0.0)]
}

impl Scene {
    /// Every text that calls out a mark, in the order drawn.
    pub fn call_outs(&self) -> impl Iterator<Item = CallOut<'_>> {
        self.items.iter().filter(|i| i.layer == Layer::CallOut && !i.mark.is_empty()).filter_map(|item| match &item.shape {
            shape @ Shape::Text { text, .. } => Some(CallOut { mark: &item.mark, text, shape }),
            _ => None,
        })
    }

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
