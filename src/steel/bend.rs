//! Shape codes: conditions and cut length as BS 8666:2005 Table 3 gives them, from `templates/shapes.toml`.

use crate::base::{num, up};
use crate::tables::{Bar, Condition, ShapeCode, Sum, tables};
use crate::trace::{Step, cite};
use std::collections::BTreeMap;

/// Scheduled dimensions by letter, mm.
pub type Dims = BTreeMap<char, f64>;

/// Why a bar cannot be worked out at all.
#[derive(Clone, Debug, PartialEq)]
pub enum BendError {
    UnknownSize(u32),
    UnknownShape(String),
    Refused { code: String, why: String },
    NeedsSketch,
    Missing(char),
    NotUsed(char),
    NotPositive(char),
    Impossible(String),
}

impl std::fmt::Display for BendError {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        match self {
            BendError::UnknownSize(size) => write!(f, "no bar of size {size} mm; sizes are {}", sizes()),
            BendError::UnknownShape(code) => write!(f, "no shape code {code:?}; `slabwright list shapes` lists them"),
            BendError::Refused { code, why } => write!(f, "shape code {code} is refused: {why}"),
            BendError::NeedsSketch => write!(f, "shape 99 has no formula: its length comes from its dimensioned sketch"),
            BendError::Missing(letter) => write!(f, "dimension {letter} is missing"),
            BendError::NotUsed(letter) => write!(f, "this shape has no dimension {letter}"),
            BendError::NotPositive(letter) => write!(f, "dimension {letter} has to be over 0 mm and at most 100000 mm"),
            BendError::Impossible(why) => write!(f, "{why}"),
        }
    }
}

fn sizes() -> String {
    tables().bars.sizes.iter().map(|b| b.d.to_string()).collect::<Vec<_>>().join(", ")
}

/// A shape code, a size and dimensions that belong together.
#[derive(Clone, Debug)]
pub struct Bent {
    pub shape: &'static ShapeCode,
    pub bar: &'static Bar,
    pub dims: Dims,
}

/// One condition of the shape: what is met or missed, in mm.
#[derive(Clone, Debug)]
pub struct Met {
    pub text: String,
    pub value: f64,
    pub limit: f64,
    pub ok: bool,
    pub memory: bool,
}

impl Bent {
    /// Joins code, size and dimensions. Errors where code or size is unknown or a letter is missing, unused or not positive.
    pub fn new(code: &str, size: u32, dims: Dims) -> Result<Bent, BendError> {
        if let Some(row) = tables().shapes.refused.iter().find(|r| r.code == code) {
            return Err(BendError::Refused { code: code.into(), why: row.why.clone() });
        }
        let shape = tables().shape(code).ok_or_else(|| BendError::UnknownShape(code.into()))?;
        let bar = tables().bar(size).ok_or(BendError::UnknownSize(size))?;
        if shape.path.is_empty() {
            return Err(BendError::NeedsSketch);
        }
        for letter in shape.measured.keys().filter_map(|k| k.chars().next()) {
            match dims.get(&letter) {
                None => return Err(BendError::Missing(letter)),
                Some(value) if !(*value > 0.0 && *value <= 100_000.0) => return Err(BendError::NotPositive(letter)),
                Some(_) => {}
            }
        }
        if let Some(letter) = dims.keys().find(|l| !shape.measured.contains_key(&l.to_string())) {
            return Err(BendError::NotUsed(*letter));
        }
        Ok(Bent { shape, bar, dims })
    }

    /// A quantity of the sums: a dimension, or r, d, P, X, or the number one. mm.
    fn quantity(&self, name: &str) -> f64 {
        match name {
            "one" => 1.0,
            "r" => self.bar.radius,
            "d" => f64::from(self.bar.d),
            "P" => self.bar.projection,
            "X" => self.bar.over_two_bends,
            _ => name.chars().next().and_then(|l| self.dims.get(&l)).copied().unwrap_or(0.0),
        }
    }

    fn sum(&self, sum: &Sum) -> f64 {
        sum.iter().map(|(name, factor)| factor * self.quantity(name)).sum()
    }

    /// Length by the formula of the table, before rounding, mm.
    pub fn formula_length(&self) -> f64 {
        self.sum(&self.shape.length)
    }

    /// Cut length: up to a multiple of 25 mm.
    pub fn cut_length(&self) -> i32 {
        crate::base::whole(up(self.formula_length(), 25.0))
    }

    /// Every condition of the shape with value and limit.
    pub fn conditions(&self) -> Vec<Met> {
        self.shape.conditions.iter().map(|c| self.met(c)).collect()
    }

    /// The conditions that fail; empty for a bar that can be bent.
    pub fn misses(&self) -> Vec<Met> {
        self.conditions().into_iter().filter(|m| !m.ok).collect()
    }

    fn met(&self, condition: &Condition) -> Met {
        let (value, limit) = (self.sum(&condition.least), self.sum(&condition.of));
        Met {
            text: format!("{} ≥ {}", formula(&condition.least), formula(&condition.of)),
            value,
            limit,
            ok: value >= limit - crate::base::TOUCH,
            memory: condition.memory,
        }
    }

    /// The steps of the cut length.
    pub fn length_steps(&self) -> Vec<Step> {
        let numbers: Vec<String> =
            self.shape.length.iter().filter(|(name, _)| name.as_str() != "one").map(|(name, _)| format!("{name} = {}", num(self.quantity(name), 1))).collect();
        let table3 = || cite("BS8666", "Table 3");
        let unrounded = self.formula_length();
        vec![
            Step::new(
                format!("length, shape {}", self.shape.code),
                format!("{} with {}", formula(&self.shape.length), numbers.join(", ")),
                format!("{} mm", num(unrounded, 1)),
            )
            .cited(table3()),
            Step::new("cut length", format!("{} up to a multiple of 25", num(unrounded, 1)), format!("{} mm", self.cut_length()))
                .cited(cite("BS8666", "length column")),
        ]
    }
}

/// A sum as it is written by hand: letters first, then r, R and d.
pub fn formula(sum: &Sum) -> String {
    let mut terms: Vec<(&String, f64)> = sum.iter().map(|(n, f)| (n, *f)).collect();
    let last = ["r", "R", "d", "one"];
    terms.sort_by_key(|(name, _)| (last.iter().position(|l| l == name).map_or(0, |i| i + 1), *name));
    let mut text = String::new();
    for (name, factor) in terms {
        let sign = match (text.is_empty(), factor < 0.0) {
            (true, false) => "",
            (true, true) => "-",
            (false, false) => " + ",
            (false, true) => " - ",
        };
        let size = factor.abs();
        let body = match (name.as_str(), size == 1.0) {
            ("one", _) => num(size, 2),
            (_, true) => name.clone(),
            (_, false) => format!("{}{name}", num(size, 2)),
        };
        text.push_str(sign);
        text.push_str(&body);
    }
    text
}
