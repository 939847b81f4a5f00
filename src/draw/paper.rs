//! A sheet while it is drawn: the scene, what stands on it, and the texts that wait until every line is there.

pub use super::area::{Area, text_area};
use super::index::{Firmness, Index};
use super::label::{Label, Placed};
use crate::scene::{Anchor, Layer, Pen, Scene, Shape};

/// A place where a text may stand.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Spot {
    pub at: [f64; 2],
    pub anchor: Anchor,
    pub upward: bool,
}

impl Spot {
    pub fn level(at: [f64; 2], anchor: Anchor) -> Spot {
        Spot { at, anchor, upward: false }
    }

    pub fn upright(at: [f64; 2], anchor: Anchor) -> Spot {
        Spot { at, anchor, upward: true }
    }
}

/// How a text is written.
#[derive(Clone, Debug)]
pub struct Lettering {
    pub layer: Layer,
    pub mark: String,
    pub height: f64,
}

impl Lettering {
    pub fn new(layer: Layer, height: f64) -> Lettering {
        Lettering { layer, mark: String::new(), height }
    }

    pub fn of(layer: Layer, mark: &str, height: f64) -> Lettering {
        Lettering { layer, mark: mark.into(), height }
    }

    pub fn area(&self, spot: &Spot, text: &str) -> Area {
        text_area(spot.at, self.height, text, spot.anchor, spot.upward)
    }
}

pub struct Paper {
    pub scene: Scene,
    /// Paper that texts of the drawing may use: the space inside the frame.
    pub room: Area,
    pub(super) index: Index,
    pub(super) labels: Vec<Label>,
    /// Items of the scene that are interrupted where a text stands on them.
    soft: Vec<usize>,
}

impl Paper {
    pub fn new(width: f64, height: f64) -> Paper {
        let room = Area::new([0.0, 0.0], [width, height]);
        Paper { scene: Scene { width, height, ..Scene::default() }, room, index: Index::new(width, height), labels: Vec::new(), soft: Vec::new() }
    }

    fn keep_off(&mut self, points: &[[f64; 2]], firmness: Firmness) {
        for w in points.windows(2) {
            self.index.add_piece(w[0], w[1], firmness);
        }
    }

    /// A line that no text stands on.
    pub fn line(&mut self, layer: Layer, mark: &str, points: &[[f64; 2]], pen: Pen) {
        self.keep_off(points, Firmness::Firm);
        self.scene.push(layer, mark, Shape::Line { points: points.to_vec(), closed: false, pen });
    }

    /// A thin line that is interrupted where a text has to stand on it.
    pub fn soft_line(&mut self, layer: Layer, mark: &str, points: &[[f64; 2]], pen: Pen) {
        self.keep_off(points, Firmness::Soft);
        self.soft.push(self.scene.items.len());
        self.scene.push(layer, mark, Shape::Line { points: points.to_vec(), closed: false, pen });
    }

    pub fn outline(&mut self, layer: Layer, points: &[[f64; 2]], pen: Pen) {
        let closing: Vec<[f64; 2]> = points.iter().copied().chain(points.first().copied()).collect();
        self.keep_off(&closing, Firmness::Firm);
        self.scene.push(layer, "", Shape::Line { points: points.to_vec(), closed: true, pen });
    }

    pub fn dot(&mut self, layer: Layer, mark: &str, centre: [f64; 2], radius: f64) {
        let r = radius;
        self.keep_off(&[[centre[0] - r, centre[1]], [centre[0] + r, centre[1]]], Firmness::Firm);
        self.keep_off(&[[centre[0], centre[1] - r], [centre[0], centre[1] + r]], Firmness::Firm);
        self.scene.push(layer, mark, Shape::Circle { centre, radius, pen: None, filled: true });
    }

    pub fn ring(&mut self, layer: Layer, mark: &str, centre: [f64; 2], radius: f64, pen: Pen) {
        let around: Vec<[f64; 2]> =
            (0..=12).map(|i| f64::from(i) * std::f64::consts::TAU / 12.0).map(|a| [centre[0] + radius * a.cos(), centre[1] + radius * a.sin()]).collect();
        self.keep_off(&around, Firmness::Firm);
        self.scene.push(layer, mark, Shape::Circle { centre, radius, pen: Some(pen), filled: false });
    }

    pub fn fill(&mut self, layer: Layer, points: &[[f64; 2]]) {
        let closing: Vec<[f64; 2]> = points.iter().copied().chain(points.first().copied()).collect();
        self.keep_off(&closing, Firmness::Firm);
        self.scene.push(layer, "", Shape::Fill { points: points.to_vec() });
    }

    /// Text at a fixed place.
    pub fn text(&mut self, lettering: &Lettering, spot: Spot, text: &str) -> Area {
        let area = lettering.area(&spot, text);
        self.index.add_box(area, Firmness::Text);
        self.write(lettering, spot, text);
        area
    }

    pub(super) fn write(&mut self, lettering: &Lettering, spot: Spot, text: &str) {
        let shape = Shape::Text { at: spot.at, height: lettering.height, text: text.into(), anchor: spot.anchor, upward: spot.upward };
        self.scene.push(lettering.layer, &lettering.mark, shape);
    }

    /// A text that finds its place when all lines are drawn.
    pub fn label(&mut self, label: Label) {
        self.labels.push(label);
    }

    /// Places what waits, interrupts soft lines under texts; the finished scene, and the texts that found no free place.
    pub fn finish(mut self) -> (Scene, Vec<String>) {
        let placed = super::label::settle(&mut self);
        let unplaced = placed.iter().filter(|p| !p.is_free).map(|p| p.label.text.clone()).collect();
        for Placed { label, spot, leader, .. } in placed {
            if let Some([from, to]) = leader {
                let pen = label.leader_pen;
                self.scene.push(Layer::CallOut, &label.lettering.mark, Shape::Line { points: vec![from, to], closed: false, pen });
                self.scene.push(Layer::CallOut, &label.lettering.mark, Shape::Circle { centre: to, radius: super::label::DOT, pen: None, filled: true });
            }
            self.write(&label.lettering, spot, &label.text);
        }
        self.interrupt();
        (self.scene, unplaced)
    }

    fn interrupt(&mut self) {
        for at in std::mem::take(&mut self.soft) {
            let Shape::Line { points, closed, pen } = &self.scene.items[at].shape else { continue };
            let (pen, closed) = (*pen, *closed);
            let pieces = without_boxes(points, &self.index);
            let Some((first, rest)) = pieces.split_first() else {
                self.scene.items[at].shape = Shape::Fill { points: Vec::new() };
                continue;
            };
            if rest.is_empty() && first == points {
                continue;
            }
            let (layer, mark) = (self.scene.items[at].layer, self.scene.items[at].mark.clone());
            self.scene.items[at].shape = Shape::Line { points: first.clone(), closed, pen };
            for piece in rest {
                self.scene.push(layer, &mark, Shape::Line { points: piece.clone(), closed: false, pen });
            }
        }
        self.scene.items.retain(|i| !matches!(&i.shape, Shape::Fill { points } if points.is_empty()));
    }
}

/// Clear paper between an interrupted line and the text, mm.
const CLEAR: f64 = 0.6;

/// The pieces of a line outside the boxes of texts.
fn without_boxes(points: &[[f64; 2]], index: &Index) -> Vec<Vec<[f64; 2]>> {
    let mut pieces: Vec<Vec<[f64; 2]>> = Vec::new();
    let mut piece: Vec<[f64; 2]> = points.first().map(|p| vec![*p]).unwrap_or_default();
    for w in points.windows(2) {
        let (a, b) = (w[0], w[1]);
        let at = |t: f64| [a[0] + (b[0] - a[0]) * t, a[1] + (b[1] - a[1]) * t];
        let mut gaps: Vec<(f64, f64)> = index.boxes_on(a, b, CLEAR).iter().filter_map(|area| area.part_inside(a, b)).collect();
        gaps.sort_by(|x, y| x.0.total_cmp(&y.0));
        let mut reached = 0.0f64;
        for (from, to) in gaps {
            // Boxes that overlap make one gap.
            if from > reached {
                piece.push(at(from));
                pieces.push(std::mem::take(&mut piece));
            } else {
                piece.clear();
            }
            reached = reached.max(to);
            piece.push(at(reached));
        }
        piece.push(b);
    }
    pieces.push(piece);
    let length = |p: &Vec<[f64; 2]>| p.windows(2).map(|w| (w[1][0] - w[0][0]).hypot(w[1][1] - w[0][1])).sum::<f64>();
    pieces.retain(|p| length(p) > 0.05);
    pieces
}
