//! Rounding, small geometry and number text. Imports nothing of the program.

pub type Point3 = [f64; 3];

/// Slack for comparing lengths that should be equal, mm.
pub const TOUCH: f64 = 0.01;

/// The least multiple of `step` that is not under `value`, mm; a value within a hundredth above a multiple counts as that multiple.
pub fn up(value: f64, step: f64) -> f64 {
    ((value - TOUCH) / step).ceil() * step
}

/// The greatest multiple of `step` that is not over `value`, mm.
pub fn down(value: f64, step: f64) -> f64 {
    ((value + TOUCH) / step).floor() * step
}

/// A computed length as a scheduled one: whole mm.
pub fn whole(value: f64) -> i32 {
    value.round() as i32
}

/// Number of equal gaps no wider than `step` that fill `length`, mm; at least one where there is a length.
pub fn gaps(length: f64, step: f64) -> usize {
    if length <= TOUCH { 0 } else { ((length - TOUCH) / step).ceil().max(1.0) as usize }
}

/// A value to three decimals, for files: no noise from binary fractions, no negative zero.
pub fn tidy(value: f64) -> f64 {
    let rounded = (value * 1000.0).round() / 1000.0;
    if rounded == 0.0 { 0.0 } else { rounded }
}

/// A number as a person writes it: at most `decimals` places, no trailing zeros, "-0" never.
pub fn num(value: f64, decimals: usize) -> String {
    let text = format!("{value:.decimals$}");
    let text = if text.contains('.') { text.trim_end_matches('0').trim_end_matches('.') } else { &text };
    if text == "-0" { "0".into() } else { text.into() }
}

/// A length in mm for print: whole where it is whole, else one decimal.
pub fn mm(value: f64) -> String {
    num(value, 1)
}

/// Plain sum of the straight pieces of a centre line with sharp corners, mm.
pub fn polyline_length(points: &[Point3]) -> f64 {
    points.windows(2).map(|w| distance(w[0], w[1])).sum()
}

pub fn distance(a: Point3, b: Point3) -> f64 {
    a.iter().zip(b).map(|(p, q)| (p - q) * (p - q)).sum::<f64>().sqrt()
}

pub fn shifted(points: &[Point3], by: Point3) -> Vec<Point3> {
    points.iter().map(|p| [p[0] + by[0], p[1] + by[1], p[2] + by[2]]).collect()
}

/// Area of one bar, mm²; `size` in mm.
pub fn bar_area(size: u32) -> f64 {
    std::f64::consts::PI / 4.0 * f64::from(size * size)
}

/// Area of bars at a spacing, mm²/m.
pub fn area_per_metre(size: u32, spacing: f64) -> f64 {
    bar_area(size) * 1000.0 / spacing
}
