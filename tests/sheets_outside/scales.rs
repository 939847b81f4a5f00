//! Drawn to scale, as the files say: lengths of straight bars in the paths of the SVG and in the content of the PDF, against the model.

use crate::samples::{SAMPLES, documents, sample};
use lopdf::{Document, Object};
use std::collections::BTreeMap;

const POINTS_PER_MM: f64 = 72.0 / 25.4;
/// Both ends of a line are written to a hundredth of a millimetre in the SVG, to a thousandth of a point in the PDF.
const SVG_SLACK: f64 = 0.015;
const PDF_SLACK: f64 = 0.002;

fn length(points: &[[f64; 2]]) -> f64 {
    points.windows(2).map(|w| (w[1][0] - w[0][0]).hypot(w[1][1] - w[0][1])).sum()
}

/// Lengths of the lines of a path's data: absolute `M` and `L` only, as written here.
fn lines(data: &str) -> Vec<f64> {
    let points = |line: &str| -> Vec<[f64; 2]> {
        let point = |p: &str| {
            let numbers: Vec<f64> = p.split_whitespace().map(|n| n.parse().unwrap()).collect();
            [numbers[0], numbers[1]]
        };
        line.trim_end_matches('Z').split('L').map(point).collect()
    };
    data.split('M').skip(1).map(|line| length(&points(line))).collect()
}

/// Lengths on paper (mm) of the lines of each mark in the groups of bars.
fn drawn_in_svg(text: &str) -> BTreeMap<String, Vec<f64>> {
    let mut found: BTreeMap<String, Vec<f64>> = BTreeMap::new();
    for layer in ["bars-bottom", "bars-top", "bars-edge"] {
        for group in text.split(&format!("data-layer=\"{layer}\" data-mark=\"")).skip(1) {
            let mark = group.split('"').next().unwrap().to_string();
            let own = group.split("</g>").next().unwrap();
            let paths = own.split("<path d=\"").skip(1).map(|p| p.split('"').next().unwrap());
            found.entry(mark).or_default().extend(paths.filter(|d| d.starts_with('M')).flat_map(lines));
        }
    }
    found
}

/// Lengths on paper (mm) of the open lines stroked in the layers of bars on a page.
fn drawn_in_pdf(file: &Document, page: lopdf::ObjectId) -> Vec<f64> {
    let groups = file.get_dictionary(page).unwrap().get(b"Resources").unwrap();
    let resources = match groups {
        Object::Reference(id) => file.get_dictionary(*id).unwrap(),
        other => other.as_dict().unwrap(),
    };
    let properties = resources.get(b"Properties").and_then(Object::as_dict).unwrap();
    let layer = |name: &[u8]| -> String {
        let group = file.get_dictionary(properties.get(name).and_then(Object::as_reference).unwrap()).unwrap();
        String::from_utf8_lossy(group.get(b"Name").unwrap().as_str().unwrap()).into_owned()
    };
    let content = file.get_and_decode_page_content(page).unwrap();
    let (mut is_bar, mut line, mut lengths) = (false, Vec::<[f64; 2]>::new(), Vec::new());
    for operation in &content.operations {
        let number = |i: usize| f64::from(operation.operands[i].as_float().unwrap()) / POINTS_PER_MM;
        match operation.operator.as_str() {
            "BDC" => is_bar = layer(operation.operands[1].as_name().unwrap()).starts_with("bars-"),
            "EMC" => is_bar = false,
            "cm" => panic!("the content has a scale of its own: {operation:?}"),
            "m" => line = vec![[number(0), number(1)]],
            "l" => line.push([number(0), number(1)]),
            "S" if is_bar => lengths.push(length(&std::mem::take(&mut line))),
            _ => {}
        }
    }
    lengths
}

/// The scale that a sheet states in its description.
fn scale(svg: &str) -> f64 {
    let description = svg.split("<desc").nth(1).unwrap();
    description.split(" at 1:").nth(1).unwrap().split(' ').next().unwrap().parse().unwrap()
}

#[test]
fn straight_bars_are_drawn_at_their_length_in_svg_and_pdf() {
    for name in SAMPLES {
        let set = sample(name);
        let files = documents(name);
        let text = |n: usize| {
            let file = files.iter().find(|f| f.name.ends_with(&format!("-sheet-{n}.svg"))).unwrap();
            String::from_utf8(file.bytes.clone()).unwrap()
        };
        let pdf = Document::load_mem(&files.iter().find(|f| f.name.ends_with("sheet.pdf")).unwrap().bytes).unwrap();
        let mut found: BTreeMap<&str, usize> = BTreeMap::new();
        for (number, page) in pdf.get_pages() {
            let svg = text(number as usize);
            let scale = scale(&svg);
            let (in_svg, in_pdf) = (drawn_in_svg(&svg), drawn_in_pdf(&pdf, page));
            for (_, bar) in set.model.bars().filter(|(_, b)| b.is_straight()) {
                let wanted = f64::from(bar.length) / scale;
                let near = |slack: f64| move |drawn: &&f64| (**drawn - wanted).abs() <= slack;
                let of_mark = in_svg.get(&bar.mark).map_or(0, |lengths| lengths.iter().filter(near(SVG_SLACK)).count());
                // Marks of equal length cannot be told apart in the content of the PDF.
                let of_length: usize = in_svg.values().map(|lengths| lengths.iter().filter(near(SVG_SLACK)).count()).sum();
                let pdf_lines = in_pdf.iter().filter(near(PDF_SLACK)).count();
                if of_mark > 0 {
                    assert!(pdf_lines >= of_mark && pdf_lines <= of_length, "{name}: mark {}: {pdf_lines} lines in the PDF, {of_mark} in the SVG", bar.mark);
                }
                *found.entry(bar.mark.as_str()).or_default() += of_mark;
            }
        }
        for (_, bar) in set.model.bars().filter(|(_, b)| b.is_straight()) {
            // Bars along the span stand on a plan and once more drawn out.
            let least = if bar.is_along_span() && matches!(bar.layer.name(), "B1" | "T1") { 2 } else { 1 };
            assert!(
                found[bar.mark.as_str()] >= least,
                "{name}: mark {} of {} mm is drawn at its length {} times",
                bar.mark,
                bar.length,
                found[bar.mark.as_str()]
            );
        }
    }
}
