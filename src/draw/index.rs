//! What stands on a sheet, found by place: squares of paper that know what passes through them.

use super::area::Area;
use std::cell::RefCell;

/// How much a text minds standing on a thing.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Firmness {
    /// Another text, or paper kept free.
    Text,
    /// Bars, concrete, dimension lines, frames: no text stands on them.
    Firm,
    /// A leader: firm for texts, and leaders would rather not cross it.
    Leader,
    /// Thin lines that are interrupted where a text stands: grids, hidden faces, zone and extension lines.
    Soft,
}

#[derive(Clone, Copy, Debug)]
enum Form {
    Piece([f64; 2], [f64; 2]),
    Box(Area),
}

/// Side of a square, mm.
const SQUARE: f64 = 14.0;

pub type Id = usize;

pub struct Index {
    columns: usize,
    rows: usize,
    squares: Vec<Vec<Id>>,
    things: Vec<Option<(Form, Firmness)>>,
    /// The last question, and the one in which each thing was seen: so that a thing in several squares is met once.
    seen: RefCell<(u32, Vec<u32>)>,
}

/// What a box or a piece meets, by firmness.
#[derive(Clone, Copy, Debug, Default)]
pub struct Met {
    pub texts: usize,
    pub firm: usize,
    pub leaders: usize,
    pub soft: usize,
}

impl Index {
    pub fn new(width: f64, height: f64) -> Index {
        let (columns, rows) = ((width / SQUARE) as usize + 1, (height / SQUARE) as usize + 1);
        Index { columns, rows, squares: vec![Vec::new(); columns * rows], things: Vec::new(), seen: RefCell::default() }
    }

    pub fn add_piece(&mut self, a: [f64; 2], b: [f64; 2], firmness: Firmness) -> Id {
        let area = Area::new([a[0].min(b[0]), a[1].min(b[1])], [a[0].max(b[0]), a[1].max(b[1])]);
        self.add(Form::Piece(a, b), &area, firmness)
    }

    pub fn add_box(&mut self, area: Area, firmness: Firmness) -> Id {
        self.add(Form::Box(area), &area, firmness)
    }

    fn add(&mut self, form: Form, area: &Area, firmness: Firmness) -> Id {
        let id = self.things.len();
        self.things.push(Some((form, firmness)));
        for square in self.squares_of(area) {
            self.squares[square].push(id);
        }
        id
    }

    pub fn remove(&mut self, id: Id) {
        if let Some(thing) = self.things.get_mut(id) {
            *thing = None;
        }
    }

    fn squares_of(&self, area: &Area) -> impl Iterator<Item = usize> + use<> {
        let cell = |v: f64, most: usize| ((v / SQUARE).max(0.0) as usize).min(most - 1);
        let (x0, x1) = (cell(area.min[0], self.columns), cell(area.max[0], self.columns));
        let (y0, y1) = (cell(area.min[1], self.rows), cell(area.max[1], self.rows));
        let columns = self.columns;
        (y0..=y1).flat_map(move |y| (x0..=x1).map(move |x| y * columns + x))
    }

    /// Hands over everything in the squares of an area, each thing once.
    fn near(&self, area: &Area, mut take: impl FnMut(Id, &Form, Firmness)) {
        let mut seen = self.seen.borrow_mut();
        seen.0 += 1;
        let round = seen.0;
        seen.1.resize(self.things.len(), 0);
        for id in self.squares_of(area).flat_map(|s| self.squares[s].iter().copied()) {
            if std::mem::replace(&mut seen.1[id], round) == round {
                continue;
            }
            if let Some((form, firmness)) = &self.things[id] {
                take(id, form, *firmness);
            }
        }
    }

    /// What a box meets.
    pub fn met_by_box(&self, area: &Area) -> Met {
        let hit = |form: &Form| match form {
            Form::Piece(a, b) => area.is_crossed(*a, *b),
            Form::Box(other) => area.meets(other),
        };
        self.met(area, hit)
    }

    /// What a straight piece meets.
    pub fn met_by_piece(&self, a: [f64; 2], b: [f64; 2]) -> Met {
        let area = Area::new([a[0].min(b[0]), a[1].min(b[1])], [a[0].max(b[0]), a[1].max(b[1])]);
        let hit = |form: &Form| match form {
            Form::Piece(c, d) => crosses(a, b, *c, *d),
            Form::Box(other) => other.is_crossed(a, b),
        };
        self.met(&area, hit)
    }

    fn met(&self, area: &Area, hit: impl Fn(&Form) -> bool) -> Met {
        let mut met = Met::default();
        self.near(area, |_, form, firmness| {
            if hit(form) {
                match firmness {
                    Firmness::Text => met.texts += 1,
                    Firmness::Firm => met.firm += 1,
                    Firmness::Leader => met.leaders += 1,
                    Firmness::Soft => met.soft += 1,
                }
            }
        });
        met
    }

    /// The boxes of texts near an area that meet it, by id.
    pub fn texts_met(&self, area: &Area) -> Vec<Id> {
        let mut met = Vec::new();
        self.near(area, |id, form, firmness| {
            if firmness == Firmness::Text && matches!(form, Form::Box(other) if area.meets(other)) {
                met.push(id);
            }
        });
        met
    }

    /// Boxes of all texts that a straight piece passes through, grown by `by`.
    pub fn boxes_on(&self, a: [f64; 2], b: [f64; 2], by: f64) -> Vec<Area> {
        let area = Area::new([a[0].min(b[0]), a[1].min(b[1])], [a[0].max(b[0]), a[1].max(b[1])]).grown(by);
        let mut boxes = Vec::new();
        self.near(&area, |_, form, firmness| {
            if let (Firmness::Text, Form::Box(other)) = (firmness, form) {
                boxes.push(other.grown(by));
            }
        });
        boxes.retain(|other| other.is_crossed(a, b));
        boxes
    }
}

/// Whether two straight pieces cross between their ends.
fn crosses(a: [f64; 2], b: [f64; 2], c: [f64; 2], d: [f64; 2]) -> bool {
    let side = |p: [f64; 2], q: [f64; 2], r: [f64; 2]| (q[0] - p[0]) * (r[1] - p[1]) - (q[1] - p[1]) * (r[0] - p[0]);
    side(a, b, c) * side(a, b, d) < -1e-9 && side(c, d, a) * side(c, d, b) < -1e-9
}
