//! Exact centre-line lengths by plane geometry, a second time: corners of the centre line from the scheduled dimensions, each corner
//! rounded to the bend's radius. Compared with `steel::walk`, and with `shape_lengths.csv`.
//! The lengths of the file were worked out from the same shapes by analytic and numeric (0.25° steps) walks.

use slabwright::steel::bend::{Bent, Dims};
use slabwright::steel::walk::walk;
use std::collections::BTreeMap;

const LENGTHS: &str = include_str!("shape_lengths.csv");

pub fn dims(text: &str) -> Dims {
    text.split_whitespace().map(|part| (part.chars().next().unwrap(), part.split_once('=').unwrap().1.parse().unwrap())).collect()
}

struct Row {
    code: String,
    size: u32,
    dims: Dims,
    /// Angle of the oblique bends, degrees.
    theta: Option<f64>,
    exact: f64,
    difference: f64,
}

fn rows() -> Vec<Row> {
    let mut reader = csv::ReaderBuilder::new().comment(Some(b'#')).from_reader(LENGTHS.as_bytes());
    let mut rows = Vec::new();
    for record in reader.records() {
        let record = record.unwrap();
        let (angles, lengths): (Vec<&str>, Vec<&str>) = record[2].split_whitespace().partition(|part| part.starts_with("theta="));
        rows.push(Row {
            code: record[0].to_string(),
            size: record[1].parse().unwrap(),
            dims: dims(&lengths.join(" ")),
            theta: angles.first().map(|a| a["theta=".len()..].parse().unwrap()),
            exact: record[3].parse().unwrap(),
            difference: record[4].parse().unwrap(),
        });
    }
    rows
}

/// The file turns its oblique bends by an angle, a schedule by an offset: B of shape 15 and C, D of 25 are the heights of their
/// slopes; D of 26 and 46 is overall, so a bar thicker.
fn with_offsets(row: &Row) -> Dims {
    let mut dims = row.dims.clone();
    let Some(theta) = row.theta else { return dims };
    let sin = theta.to_radians().sin();
    match row.code.as_str() {
        "15" => drop(dims.insert('B', dims[&'A'] * sin)),
        "25" => {
            dims.insert('C', dims[&'A'] * sin);
            dims.insert('D', dims[&'B'] * sin);
        }
        _ => drop(dims.insert('D', dims[&'B'] * sin + f64::from(row.size))),
    }
    dims
}

/// Corners of the centre line from the dimensions of a schedule, in three dimensions where the shape is, and the radius at each.
struct Corners {
    points: Vec<[f64; 3]>,
    radius: f64,
}

/// A dimension to the outside of a bend ends half a bar past the corner of the centre line, at an oblique bend d/2 tan(θ/2) past it.
fn corners(code: &str, size: u32, dims: &Dims) -> Corners {
    let (d, at) = (f64::from(size), |letter: char| dims[&letter]);
    // EN 1992-1-1:2004 Table 8.1N and BS 8666:2005 Table 2: least radii 2d to 16 mm; 3.5d above, 87 for 87.5 at 25 mm.
    let least = if size <= 16 { 2.0 * d } else { (3.5 * d).floor() };
    let radius = least + d / 2.0;
    let (end, inner) = (|l: char| at(l) - d / 2.0, |l: char| at(l) - d);
    let flat = |points: Vec<[f64; 2]>| points.into_iter().map(|[x, y]| [x, y, 0.0]).collect::<Vec<_>>();
    let points = match code {
        "11" => flat(vec![[end('A'), 0.0], [0.0, 0.0], [0.0, end('B')]]),
        "12" => return Corners { points: flat(vec![[end('A'), 0.0], [0.0, 0.0], [0.0, end('B')]]), radius: at('R') + d / 2.0 },
        "15" => {
            let theta = (at('B') / at('A')).asin();
            let past = d / 2.0 * (theta / 2.0).tan();
            let a = at('A') - past;
            flat(vec![[-a * theta.cos(), a * theta.sin()], [0.0, 0.0], [at('C') - past, 0.0]])
        }
        "21" => flat(vec![[0.0, end('A')], [0.0, 0.0], [inner('B'), 0.0], [inner('B'), end('C')]]),
        "23" => flat(vec![[-end('A'), 0.0], [0.0, 0.0], [0.0, inner('B')], [end('C'), inner('B')]]),
        "25" => {
            let (one, two) = ((at('C') / at('A')).asin(), (at('D') / at('B')).asin());
            let (p, q) = (d / 2.0 * (one / 2.0).tan(), d / 2.0 * (two / 2.0).tan());
            let (a, b, e) = (at('A') - p, at('B') - q, at('E') - p - q);
            flat(vec![[-a * one.cos(), a * one.sin()], [0.0, 0.0], [e, 0.0], [e + b * two.cos(), b * two.sin()]])
        }
        "26" => {
            let rise = at('D') - d;
            let run = (at('B') * at('B') - rise * rise).sqrt();
            flat(vec![[-at('A'), 0.0], [0.0, 0.0], [run, rise], [run + at('C'), rise]])
        }
        "31" => {
            let (b, c) = (inner('B'), inner('C'));
            flat(vec![[0.0, end('A')], [0.0, 0.0], [b, 0.0], [b, c], [b - end('D'), c]])
        }
        "41" => {
            // Flanges turned out on both uprights; the base hangs below them.
            let (b, c, up) = (inner('B'), inner('C'), inner('D'));
            flat(vec![[-end('A'), b], [0.0, b], [0.0, 0.0], [c, 0.0], [c, up], [c + end('E'), up]])
        }
        "46" => {
            let rise = at('D') - d;
            let run = (at('B') * at('B') - rise * rise).sqrt();
            let c = run + at('C');
            flat(vec![[-at('A'), rise], [0.0, rise], [run, 0.0], [c, 0.0], [c + run, rise], [c + run + at('E'), rise]])
        }
        "98" => {
            // Feet out of the plane of top and uprights, to opposite sides.
            let (a, h) = (inner('A'), inner('B'));
            vec![[0.0, end('C'), 0.0], [0.0, 0.0, 0.0], [0.0, 0.0, h], [a, 0.0, h], [a, 0.0, 0.0], [a, -end('D'), 0.0]]
        }
        other => panic!("no corners for shape {other}"),
    };
    Corners { points, radius }
}

fn minus(a: [f64; 3], b: [f64; 3]) -> [f64; 3] {
    [a[0] - b[0], a[1] - b[1], a[2] - b[2]]
}

fn dot(a: [f64; 3], b: [f64; 3]) -> f64 {
    a.iter().zip(b).map(|(p, q)| p * q).sum()
}

/// Length of a chain with rounded corners, and the distance between its ends.
fn rounded(corners: &Corners) -> (f64, f64) {
    let legs: Vec<[f64; 3]> = corners.points.windows(2).map(|w| minus(w[1], w[0])).collect();
    let size = |v: [f64; 3]| dot(v, v).sqrt();
    let sharp: f64 = legs.iter().map(|leg| size(*leg)).sum();
    let saved: f64 = legs
        .windows(2)
        .map(|w| {
            let theta = (dot(w[0], w[1]) / size(w[0]) / size(w[1])).clamp(-1.0, 1.0).acos();
            corners.radius * (2.0 * (theta / 2.0).tan() - theta)
        })
        .sum();
    (sharp - saved, size(minus(corners.points[corners.points.len() - 1], corners.points[0])))
}

/// Exact length and distance between the ends, by this file alone.
fn exact(code: &str, size: u32, dims: &Dims) -> (f64, f64) {
    if code == "13" {
        // A semicircle has no corner: its ends stand a diameter of the centre line apart.
        let (d, b) = (f64::from(size), dims[&'B']);
        let (a, c) = (dims[&'A'] - b / 2.0, dims[&'C'] - b / 2.0);
        return (a + c + std::f64::consts::FRAC_PI_2 * (b - d), (b - d).hypot(a - c));
    }
    rounded(&corners(code, size, dims))
}

/// Walks a bar and compares length and end with those worked out here; returns bar and exact length.
pub fn walked(code: &str, size: u32, dims: &Dims) -> (Bent, f64) {
    let bar = Bent::new(code, size, dims.clone()).unwrap();
    let walked = walk(&bar).unwrap();
    let (length, apart) = exact(code, size, dims);
    assert!((walked.length - length).abs() < 0.01, "{code}, {size}, {dims:?}: walked {}, exact {length}", walked.length);
    // The walk of a chair is laid flat: only its length is that of the bar.
    if code != "98" {
        let (first, last) = (walked.points[0], walked.points[walked.points.len() - 1]);
        let ours = (last[0] - first[0]).hypot(last[1] - first[1]);
        assert!((ours - apart).abs() < 0.01, "{code}, {size}, {dims:?}: ends {ours} apart, exact {apart}");
    }
    (bar, length)
}

#[test]
fn walked_lengths_are_those_of_the_file() {
    let mut codes = BTreeMap::new();
    for row in rows() {
        let (bar, length) = walked(&row.code, row.size, &with_offsets(&row));
        assert!((length - row.exact).abs() < 0.01, "{}, {}, {:?}: {length}, file {}", row.code, row.size, row.dims, row.exact);
        let difference = bar.formula_length() - length;
        assert!((difference - row.difference).abs() < 0.011, "{}, {}: {difference}, file {}", row.code, row.size, row.difference);
        *codes.entry(row.code).or_insert(0) += 1;
    }
    let whole = [("11", 8), ("12", 8), ("13", 8), ("15", 32), ("21", 8), ("25", 16), ("26", 24), ("31", 8), ("41", 8), ("46", 16), ("98", 8)];
    assert_eq!(codes.into_iter().collect::<Vec<_>>(), whole.map(|(c, n)| (c.to_string(), n)));
}
