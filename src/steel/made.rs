//! The rounded bar (D15 to D17): scheduled dimensions, cut length, and its centre line in its own upright plane.
//! "That rounded bar is the bar": sheet, schedule, mass and checks all come from here.

use crate::base::{down, mm, up, whole};
use crate::steel::bend::{Bent, Dims};
use crate::tables::Deduction;
use crate::trace::{Step, cite, rule};
use std::collections::BTreeMap;

/// An end of a straight bar along its run, mm.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum End {
    /// At the cover line of a concrete face.
    Face(f64),
    Free(f64),
    /// Laps with another bar; the lap may get longer.
    Lap(f64),
}

impl End {
    pub fn at(self) -> f64 {
        match self {
            End::Face(x) | End::Free(x) | End::Lap(x) => x,
        }
    }
}

/// A bar that can be ordered. `axis` is (along, up) of its centre line with sharp corners; up is 0 on its main leg.
#[derive(Clone, Debug)]
pub struct Made {
    pub shape: &'static str,
    pub size: u32,
    pub dims: BTreeMap<char, i32>,
    pub length: i32,
    pub axis: Vec<(f64, f64)>,
    /// Why each dimension is what it is; the key 'L' is the cut length.
    pub why: BTreeMap<char, Vec<Step>>,
}

impl Made {
    /// Extent along the run, mm: outer faces at bends, bar ends elsewhere.
    pub fn extent(&self) -> (f64, f64) {
        let half = f64::from(self.size) / 2.0;
        let upright = |x: f64| self.axis.windows(2).any(|w| w[0].0 == w[1].0 && w[0].0 == x);
        let low = self.axis.iter().map(|p| p.0).fold(f64::INFINITY, f64::min);
        let high = self.axis.iter().map(|p| p.0).fold(f64::NEG_INFINITY, f64::max);
        (if upright(low) { low - half } else { low }, if upright(high) { high + half } else { high })
    }

    fn bent(shape: &'static str, size: u32, dims: &[(char, f64)], axis: Vec<(f64, f64)>) -> Made {
        let exact: Dims = dims.iter().copied().collect();
        let (length, steps) = match Bent::new(shape, size, exact) {
            Ok(bent) => (bent.cut_length(), bent.length_steps()),
            // Only a dimension of nothing gets here, and conditions refuse that before the bar is used.
            Err(fault) => (0, vec![Step::new("length", fault.to_string(), "none")]),
        };
        let dims = dims.iter().map(|(l, v)| (*l, whole(*v))).collect();
        Made { shape, size, dims, length, axis, why: BTreeMap::from([('L', steps)]) }
    }

    pub fn explained(mut self, letter: char, steps: Vec<Step>) -> Made {
        self.why.insert(letter, steps);
        self
    }
}

/// A straight bar between two ends (D16, D17).
pub fn straight(size: u32, from: End, to: End, deduction: &Deduction) -> Made {
    let room = to.at() - from.at();
    let mut steps = vec![Step::new("extent", format!("{} - ({})", mm(to.at()), mm(from.at())), format!("{} mm", mm(room)))];
    let (length, start) = match (from, to) {
        (End::Face(_), End::Face(_)) => {
            let length = down(room - deduction.straight, 25.0);
            steps.push(
                Step::new(
                    "between two faces",
                    format!("{} - {} for deviations, down to a multiple of 25", mm(room), mm(deduction.straight)),
                    format!("{} mm", mm(length)),
                )
                .cited(rule("D16, D17")),
            );
            (length, from.at() + (room - length) / 2.0)
        }
        _ => {
            let length = up(room, 25.0);
            let surplus = length - room;
            let (start, side) = match (from, to) {
                (End::Lap(x), End::Lap(_)) => (x - surplus / 2.0, "half at each lapped end"),
                (x, End::Face(_)) => (x.at() - surplus, "at the left end"),
                (x, _) => (x.at(), "at the right end"),
            };
            steps.push(
                Step::new("up to a multiple of 25", format!("{}, surplus {} {side}", mm(room), mm(surplus)), format!("{} mm", mm(length))).cited(rule("D16")),
            );
            (length, start)
        }
    };
    let shape = if length > 0.0 { "00" } else { "99" };
    Made {
        shape,
        size,
        dims: BTreeMap::from([('A', whole(length))]),
        length: whole(length),
        axis: vec![(start, 0.0), (start + length, 0.0)],
        why: BTreeMap::from([('A', steps.clone()), ('L', steps)]),
    }
}

/// Which way a bend or an opening looks along the run.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Side {
    Low,
    High,
}

impl Side {
    /// +1 where the bar leads away from its bend towards higher values.
    pub fn inward(self) -> f64 {
        match self {
            Side::Low => 1.0,
            Side::High => -1.0,
        }
    }
}

/// Shape 11: main leg from the cover line `face` at `side` to at least `free`, end leg of `leg` mm up (+1) or down (-1).
pub fn l_bar(size: u32, face: f64, side: Side, free: f64, leg: f64, turn: f64) -> Made {
    let d = f64::from(size);
    let main = up((free - face).abs(), 5.0);
    let inward = side.inward();
    let bend = face + inward * d / 2.0;
    let mut axis = vec![(bend, turn * (leg - d / 2.0)), (bend, 0.0), (face + inward * main, 0.0)];
    if side == Side::High {
        axis.reverse();
    }
    let why = vec![
        Step::new("main leg, cover line to free end", format!("{} up to a multiple of 5", mm((free - face).abs())), format!("{} mm", mm(main)))
            .cited(rule("D16")),
    ];
    Made::bent("11", size, &[('A', main), ('B', leg)], axis).explained('A', why)
}

/// A U-bar (21) or hairpin (13) that closes the face at `side`: main leg `a` and return leg `c` from the cover line, depth `b` overall.
/// `turn` is -1 where the return leg lies below the main leg, +1 where above.
pub fn u_bar(shape: &'static str, size: u32, face: f64, side: Side, legs: [f64; 3], turn: f64) -> Made {
    let d = f64::from(size);
    let [a, b, c] = [up(legs[0], 5.0), down(legs[1], 5.0), up(legs[2], 5.0)];
    let inward = side.inward();
    let bend = face + inward * d / 2.0;
    let low = turn * (b - d);
    let axis = vec![(face + inward * a, 0.0), (bend, 0.0), (bend, low), (face + inward * c, low)];
    let leg = |name: &str, exact: f64, made: f64| {
        vec![Step::new(name, format!("{} up to a multiple of 5", mm(exact)), format!("{} mm", mm(made))).cited(rule("D16"))]
    };
    Made::bent(shape, size, &[('A', a), ('B', b), ('C', c)], axis)
        .explained('A', leg("leg A, outer face to end", legs[0], a))
        .explained('C', leg("leg C, outer face to end", legs[2], c))
        .explained(
            'B',
            vec![
                Step::new("depth between the covers, less the deduction", format!("{} down to a multiple of 5", mm(legs[1])), format!("{} mm", mm(b)))
                    .cited(cite("BS8666", "dimension columns")),
            ],
        )
}

/// How one end of a bar is formed.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Form {
    Straight(End),
    /// A 90° bend at the cover line `face`, its leg going up (+1) or down (-1).
    Turned {
        face: f64,
        leg: f64,
        turn: f64,
    },
    /// Closes the face: upright of `depth` overall, and a leg back of `back` mm.
    Closed {
        face: f64,
        shape: &'static str,
        depth: f64,
        back: f64,
        turn: f64,
    },
}

impl Form {
    /// Where the bar ends along its run, mm.
    pub fn at(self) -> f64 {
        match self {
            Form::Straight(end) => end.at(),
            Form::Turned { face, .. } | Form::Closed { face, .. } => face,
        }
    }

    fn is_face(self) -> bool {
        !matches!(self, Form::Straight(End::Free(_) | End::Lap(_)))
    }
}

/// The bar between two formed ends, rounded (D15 to D17). Two closed ends are not one bar: the caller cuts it first.
pub fn between(size: u32, left: Form, right: Form, deduction: &Deduction) -> Made {
    let room = right.at() - left.at();
    // A bent bar between two faces gives up the deduction once and sits centred in what is left.
    let slack = if left.is_face() && right.is_face() { room - down(room - deduction.for_bent(room), 5.0) } else { 0.0 };
    let (low, high) = (left.at() + slack / 2.0, right.at() - slack / 2.0);
    match (left, right) {
        (Form::Straight(from), Form::Straight(to)) => straight(size, from, to, deduction),
        (Form::Turned { leg, turn, .. }, Form::Straight(_)) => l_bar(size, low, Side::Low, high, leg, turn),
        (Form::Straight(_), Form::Turned { leg, turn, .. }) => l_bar(size, high, Side::High, low, leg, turn),
        (Form::Closed { shape, depth, back, turn, .. }, Form::Straight(_)) => u_bar(shape, size, low, Side::Low, [high - low, depth, back], turn),
        (Form::Straight(_), Form::Closed { shape, depth, back, turn, .. }) => u_bar(shape, size, high, Side::High, [high - low, depth, back], turn),
        (_, _) => both_turned(size, low, high, left, right),
    }
}

/// Shape 21 lying along the run: a leg at each end.
fn both_turned(size: u32, low: f64, high: f64, left: Form, right: Form) -> Made {
    let d = f64::from(size);
    let upright = |form: Form| match form {
        Form::Turned { leg, turn, .. } => (leg, turn),
        Form::Closed { depth, turn, .. } => (depth, turn),
        Form::Straight(_) => (0.0, 1.0),
    };
    let ((a, turn), (c, _)) = (upright(left), upright(right));
    let axis = vec![(low + d / 2.0, turn * (a - d / 2.0)), (low + d / 2.0, 0.0), (high - d / 2.0, 0.0), (high - d / 2.0, turn * (c - d / 2.0))];
    let why = vec![
        Step::new("between two faces, less the deduction", "down to a multiple of 5".to_string(), format!("{} mm", mm(high - low))).cited(rule("D16, D17")),
    ];
    Made::bent("21", size, &[('A', a), ('B', high - low), ('C', c)], axis).explained('B', why)
}
