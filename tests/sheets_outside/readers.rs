//! What readers nobody here wrote make of the files: fonts, words and their boxes (poppler), pictures (poppler, Chromium).

use crate::samples::{SAMPLES, python, root, run, sample, tools, written};
use std::path::{Path, PathBuf};

fn with_ending<'f>(files: &'f [PathBuf], ending: &'f str) -> impl Iterator<Item = &'f str> {
    files.iter().filter_map(|p| p.to_str()).filter(move |p| p.ends_with(ending))
}

#[test]
fn a_pdf_has_one_font_embedded_as_a_subset() {
    if !tools() {
        return;
    }
    for name in SAMPLES {
        let folder = tempfile::tempdir().unwrap();
        for path in with_ending(&written(name, folder.path()), ".pdf") {
            let fonts = run("pdffonts", &[path]);
            let rows: Vec<&str> = fonts.lines().skip(2).collect();
            assert_eq!(rows.len(), 1, "{path}: {fonts}");
            // Columns: embedded, subset, with a map to Unicode.
            assert!(rows[0].contains("+RobotoCondensed-Regular") && rows[0].contains("yes yes yes"), "{path}: {fonts}");
        }
    }
}

#[test]
fn every_mark_of_the_schedule_is_found_on_the_sheet_with_its_number() {
    if !tools() {
        return;
    }
    for name in SAMPLES {
        let folder = tempfile::tempdir().unwrap();
        let files = written(name, folder.path());
        let set = sample(name);
        let text = |ending: &str| run("pdftotext", &["-layout", with_ending(&files, ending).next().unwrap(), "-"]);
        let (sheet, schedule, both) = (text("sheet.pdf"), text("schedule.pdf"), text("set.pdf"));
        for (_, bar) in set.model.bars() {
            let call_out = format!("{}{}-{}", bar.each(), bar.type_size(), bar.mark);
            assert!(sheet.contains(&call_out) && both.contains(&call_out), "{name}: {call_out} is not on the sheet");
            let cells = [bar.mark.clone(), bar.type_size(), bar.members.to_string(), bar.each().to_string(), bar.total().to_string(), bar.length.to_string()];
            let is_listed = |line: &str| {
                let words: Vec<&str> = line.split_whitespace().collect();
                words.windows(cells.len()).any(|w| w.iter().zip(&cells).all(|(word, cell)| word == cell))
            };
            assert!(schedule.lines().any(is_listed), "{name}: mark {} has no row {cells:?}", bar.mark);
        }
        for path in with_ending(&files, ".pdf") {
            let info = run("pdfinfo", &[path]);
            assert!(info.contains(&set.job.head.drawing) && info.contains("Encrypted:       no"), "{info}");
        }
    }
}

/// A word as the reader boxes it, points.
#[derive(Debug)]
struct Word {
    text: String,
    min: [f64; 2],
    max: [f64; 2],
}

/// Words of each page of a PDF.
fn words(path: &str) -> Vec<Vec<Word>> {
    let html = run("pdftotext", &["-bbox", path, "-"]);
    let value = |line: &str, key: &str| -> f64 { line.split(&format!("{key}=\"")).nth(1).unwrap().split('"').next().unwrap().parse().unwrap() };
    let word = |line: &str| {
        let text = line.split('>').nth(1).unwrap().split('<').next().unwrap().to_string();
        Word { text, min: [value(line, "xMin"), value(line, "yMin")], max: [value(line, "xMax"), value(line, "yMax")] }
    };
    html.split("<page ").skip(1).map(|page| page.lines().filter(|l| l.trim_start().starts_with("<word ")).map(word).collect()).collect()
}

/// The box of the capitals and digits of a level word, from the line box that the reader gives; none for a word that is turned.
/// Heights over size in the shipped font: ascent 0.928, descent 0.244 (its own table), capitals 0.711.
fn capitals(word: &Word) -> Option<Word> {
    const LINE: f64 = 0.928 + 0.244;
    let sizes = [1.8, 2.5, 3.5, 5.0, 7.0].map(|h: f64| h / 0.711 * 72.0 / 25.4);
    let is_line = |extent: f64| sizes.iter().any(|s| (extent / s / LINE - 1.0).abs() < 0.004);
    let [width, height] = [0, 1].map(|i| word.max[i] - word.min[i]);
    if !is_line(height) || is_line(width) {
        return None;
    }
    let size = height / LINE;
    let base = word.max[1] - 0.244 * size;
    Some(Word { text: word.text.clone(), min: [word.min[0], base - 0.711 * size], max: [word.max[0], base] })
}

#[test]
fn level_words_do_not_overlap_as_a_reader_boxes_them() {
    if !tools() {
        return;
    }
    for name in SAMPLES {
        let folder = tempfile::tempdir().unwrap();
        let files = written(name, folder.path());
        for path in with_ending(&files, "sheet.pdf").chain(with_ending(&files, "schedule.pdf")) {
            for page in words(path) {
                let level: Vec<Word> = page.iter().filter_map(capitals).collect();
                assert!(level.len() * 3 > page.len() * 2, "{path}: only {} of {} words were taken as level", level.len(), page.len());
                for (i, a) in level.iter().enumerate() {
                    for b in &level[i + 1..] {
                        let apart = (0..2).any(|k| a.max[k] <= b.min[k] + 0.05 || b.max[k] <= a.min[k] + 0.05);
                        assert!(apart, "{path}: {a:?} and {b:?}");
                    }
                }
            }
        }
    }
}

const PIXELS_PER_MM: usize = 3;
/// Twice what was measured over the samples (mean of a sheet, worst field of 10 mm; 1 is black against white).
const MEAN_MOST: f64 = 0.008;
const FIELD_MOST: f64 = 0.09;

/// A sheet's SVG as the browser shows it.
fn browser_picture(folder: &Path, svg: &str, [width, height]: [usize; 2]) -> String {
    let page = folder.join("page.html");
    let picture = folder.join("browser.png");
    let html = format!("<!doctype html><body style=\"margin:0\"><img src=\"file://{svg}\" style=\"display:block;width:{width}px;height:{height}px\"></body>");
    std::fs::write(&page, html).unwrap();
    let (shot, size) = (format!("--screenshot={}", picture.display()), format!("--window-size={width},{height}"));
    let (profile, url) = (format!("--user-data-dir={}", folder.join("profile").display()), format!("file://{}", page.display()));
    let fixed = ["--headless", "--no-sandbox", "--disable-gpu", "--hide-scrollbars", "--force-device-scale-factor=1", "--allow-file-access-from-files"];
    run("chromium", &[&fixed[..], &[&profile, &shot, &size, &url]].concat());
    picture.to_str().unwrap().to_string()
}

#[test]
fn pdf_and_svg_of_a_sheet_look_alike() {
    if !tools() {
        return;
    }
    let script = root().join("tests/sheets_outside/compare.py");
    for name in SAMPLES {
        let folder = tempfile::tempdir().unwrap();
        let files = written(name, folder.path());
        let pdf = with_ending(&files, "sheet.pdf").next().unwrap();
        for (i, svg) in with_ending(&files, ".svg").enumerate() {
            let text = std::fs::read_to_string(svg).unwrap();
            let view_box: Vec<usize> = text.split("viewBox=\"0 0 ").nth(1).unwrap().split('"').next().unwrap().split(' ').map(|v| v.parse().unwrap()).collect();
            let size = [view_box[0] * PIXELS_PER_MM, view_box[1] * PIXELS_PER_MM];
            let browser = browser_picture(folder.path(), svg, size);
            let stem = folder.path().join("poppler");
            let (page, finer) = ((i + 1).to_string(), size.map(|n| (3 * n).to_string()));
            let place = stem.to_str().unwrap();
            run("pdftoppm", &["-gray", "-scale-to-x", &finer[0], "-scale-to-y", &finer[1], "-f", &page, "-l", &page, "-singlefile", pdf, place]);
            let told = run(&python(), &[script.to_str().unwrap(), &browser, &format!("{place}.pgm"), &PIXELS_PER_MM.to_string()]);
            let figures: Vec<f64> = told.split_whitespace().map(|f| f.parse().unwrap()).collect();
            eprintln!("{name} sheet {}: mean {}, worst field {} at {} mm, {} mm; ink {}", i + 1, figures[0], figures[1], figures[3], figures[4], figures[2]);
            assert!(figures[2] > 0.01, "{svg}: the browser shows next to nothing");
            assert!(figures[0] < MEAN_MOST && figures[1] < FIELD_MOST, "{svg}: {told}");
        }
    }
}
