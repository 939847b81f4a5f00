//! One `[[slab]]` with its supports and spans.

use super::parse::printed;
use super::*;
use crate::base::mm;
use crate::diagnose::Fault;
use crate::read::Section;
use crate::tables::tables;
use itertools::Itertools;

pub(super) fn slab(section: &Section, letter: Option<&str>, aggregate: f64) -> Option<Slab> {
    for (key, example) in [
        ("mark", "\"S1\""),
        ("thickness", "185"),
        ("width", "6800"),
        ("cover", "{ bottom = 25, top = 25, side = 30 }"),
        ("load", "{ permanent = 6.4, variable = 2.0 }"),
        ("bottom_distribution", "\"H10-300\""),
        ("top_distribution", "\"H10-300\""),
    ] {
        section.need(key, example);
    }
    let mark = printed(section, "mark", true, 12);
    let members = if section.has("members") { section.whole("members", "", 1.0, 1000.0) } else { Some(At::default(1)) };
    let thickness = section.number("thickness", "mm", 75.0, 600.0);
    let width = section.number("width", "mm", 600.0, 100_000.0);
    let cover = cover(&section.section("cover"));
    let (permanent, variable) = load(&section.section("load"));
    let bottom_distribution = bars(section, "bottom_distribution", letter, aggregate);
    let top_distribution = bars(section, "top_distribution", letter, aggregate);
    let (edges, edge_width) = edges(section, width.as_ref().map(|w| w.value));
    let level = section.number("level", "mm", -1e6, 1e7).map(|l| l.value);
    let arrangement = if section.has("arrangement") { section.choice("arrangement", &Arrangement::WORDS) } else { Some(At::default(Arrangement::Auto)) };

    let (support_sections, span_sections) = (section.sections("support"), section.sections("span"));
    counts(section, &support_sections, &span_sections);
    let last = support_sections.len().saturating_sub(1);
    let supports: Vec<Option<Support>> =
        support_sections.iter().take(MOST_SPANS + 1).enumerate().map(|(i, s)| support(s, i, i == 0 || i == last, letter, aggregate)).collect();
    let spans: Vec<Option<Span>> = span_sections.iter().take(MOST_SPANS).map(|s| span(s, letter, aggregate)).collect();
    section.finish();
    for (i, (support, at)) in supports.iter().zip(&support_sections).enumerate() {
        let twice = |s: &Support| supports[..i].iter().flatten().any(|other| other.grid == s.grid);
        if let Some(support) = support.as_ref().filter(|s| twice(s)) {
            at.fault(
                Fault::new("twice", at.span_of("grid"), format!("grid {:?} stands twice in this slab", support.grid))
                    .rule("each support has a grid of its own")
                    .remedy("rename one of them"),
            );
        }
    }
    let slab = Slab {
        mark: mark?,
        members: members?.value,
        thickness: thickness?,
        width: width?,
        cover: cover?,
        permanent: permanent?,
        variable: variable?,
        bottom_distribution: bottom_distribution?,
        top_distribution: top_distribution?,
        edges: edges?,
        edge_width: edge_width?,
        level,
        arrangement: arrangement?,
        supports: supports.into_iter().collect::<Option<Vec<_>>>()?,
        spans: spans.into_iter().collect::<Option<Vec<_>>>()?,
        at: Some(section.place("mark", &section.span_of("mark"))),
    };
    if slab.supports.len() == slab.spans.len() + 1 && !slab.spans.is_empty() {
        fits(section, &slab, &support_sections, &span_sections);
    }
    Some(slab)
}

fn counts(section: &Section, supports: &[Section], spans: &[Section]) {
    if spans.len() > MOST_SPANS {
        section.fault(
            Fault::new("too-many", spans[MOST_SPANS].span.clone(), format!("{} spans", spans.len()))
                .rule(format!("a slab has at most {MOST_SPANS} spans; this is a limit of this program"))
                .remedy("split it at a joint"),
        );
    } else if spans.is_empty() {
        section
            .fault(Fault::new("no-span", section.span.clone(), "this slab has no span").rule("a slab has at least one [[slab.span]]").remedy("add its spans"));
    } else if supports.len() != spans.len() + 1 {
        let at = supports.last().map_or(section.span.clone(), |s| s.span.clone());
        section.fault(
            Fault::new("support-count", at, format!("{} spans have {} supports", spans.len(), supports.len()))
                .rule("n spans have n + 1 supports, from left to right")
                .remedy(format!("give {} [[slab.support]]", spans.len() + 1)),
        );
    }
}

fn cover(section: &Section) -> Option<Cover> {
    for key in ["bottom", "top", "side"] {
        section.need(key, "25");
    }
    let read = |key| section.number(key, "mm", 10.0, 100.0);
    let (bottom, top, side) = (read("bottom"), read("top"), read("side"));
    section.finish();
    Some(Cover { bottom: bottom?, top: top?, side: side? })
}

fn load(section: &Section) -> (Option<At<f64>>, Option<At<f64>>) {
    for key in ["permanent", "variable"] {
        section.need(key, "5.0");
    }
    let loads = (section.number("permanent", "kN/m²", 0.0, 100.0), section.number("variable", "kN/m²", 0.0, 100.0));
    section.finish();
    loads
}

fn edges(section: &Section, width: Option<f64>) -> (Option<[Edge; 2]>, Option<[f64; 2]>) {
    let (table, widths) = (section.section("edges"), section.section("edge_width"));
    let kind = |key| if table.has(key) { table.choice(key, &Edge::WORDS).map(|e| e.value) } else { Some(Edge::Free) };
    let rest = |key| if widths.has(key) { widths.number(key, "mm", 0.0, 2000.0).map(|w| w.value) } else { Some(0.0) };
    let (near, far) = (kind("near"), kind("far"));
    let (near_width, far_width) = (rest("near"), rest("far"));
    for (key, edge, rests) in [("near", near, near_width), ("far", far, far_width)] {
        let (Some(edge), Some(rests)) = (edge, rests) else { continue };
        let wrong = match edge {
            Edge::Wall | Edge::Beam if rests < 50.0 => {
                Some((format!("the {key} edge rests {rests} mm on its {}", edge.word()), "a held edge rests at least 50 mm on its wall or beam"))
            }
            Edge::Free | Edge::Joint if rests > 0.0 => {
                Some((format!("the {key} edge is {} and rests {rests} mm", edge.word()), "a free edge or a joint rests on nothing"))
            }
            _ => None,
        };
        if let Some((message, rule)) = wrong {
            section.fault(
                Fault::new("edge-width", if widths.has(key) { widths.span_of(key) } else { section.span_of("edges") }, message)
                    .rule(rule)
                    .remedy(format!("set edge_width.{key} or edges.{key}")),
            );
        }
    }
    if let (Some(width), Some(a), Some(b)) = (width, near_width, far_width)
        && a + b > width - 500.0
    {
        section.fault(
            Fault::new("edge-width", section.span_of("edge_width"), format!("the edges rest on {} of {} mm width", mm(a + b), mm(width)))
                .rule("at least 500 mm of the width stands clear")
                .remedy("correct edge_width or width"),
        );
    }
    table.finish();
    widths.finish();
    (near.zip(far).map(|(a, b)| [a, b]), near_width.zip(far_width).map(|(a, b)| [a, b]))
}

fn support(section: &Section, index: usize, is_end: bool, letter: Option<&str>, aggregate: f64) -> Option<Support> {
    section.need("kind", "\"wall\"");
    section.need("width", "200");
    let grid = if section.has("grid") { printed(section, "grid", true, 8) } else { Some(default_grid(index)) };
    let kind = section.choice("kind", &Kind::WORDS);
    let width = section.number("width", "mm", 50.0, 3000.0);
    if !is_end {
        for key in ["bearing", "end_bar"] {
            if section.has(key) {
                section.fault(
                    Fault::new("end-only", section.span_of(key), format!("`{key}` on an inner support"))
                        .rule(format!("`{key}` belongs to the first and the last support only"))
                        .remedy("remove it here"),
                );
            }
        }
        if !section.has("top") {
            section.fault(
                Fault::new("missing-top", section.span.clone(), "an inner support without T1")
                    .rule("`top` may be left out at an end support only")
                    .remedy("add the bars of the design, such as top = \"H12-200\""),
            );
        }
    }
    let bearing = match &width {
        Some(width) if section.has("bearing") => section.number("bearing", "mm", 20.0, width.value),
        Some(width) => Some(At { value: width.value, at: width.at.clone() }),
        None => None,
    };
    let end_bar = if section.has("end_bar") { section.choice("end_bar", &EndBar::WORDS) } else { Some(At::default(EndBar::Auto)) };
    let top = section.has("top").then(|| bars(section, "top", letter, aggregate));
    let required = required(section);
    let moment = section.number("moment", "kNm/m", -2000.0, 2000.0);
    let shear = section.number("shear", "kN/m", 0.0, 2000.0);
    section.finish();
    let top = match top {
        Some(bars) => Some(bars?),
        None => None,
    };
    let at = Some(section.place("kind", &section.span_of("kind")));
    Some(Support { grid: grid?, kind: kind?.value, width: width?, bearing: bearing?, top, required, end_bar: end_bar?, moment, shear, at })
}

/// A to Z, then A1, B1 ...; I and O are left out, as on grids.
fn default_grid(index: usize) -> String {
    const LETTERS: &[u8] = b"ABCDEFGHJKLMNPQRSTUVWXYZ";
    let letter = char::from(LETTERS[index % LETTERS.len()]);
    match index / LETTERS.len() {
        0 => letter.to_string(),
        round => format!("{letter}{round}"),
    }
}

fn span(section: &Section, letter: Option<&str>, aggregate: f64) -> Option<Span> {
    section.need("length", "4100");
    section.need("bottom", "\"H12-175\"");
    let length = section.number("length", "mm", 300.0, 20_000.0);
    let bottom = bars(section, "bottom", letter, aggregate);
    let required = required(section);
    let moment = section.number("moment", "kNm/m", -2000.0, 2000.0);
    let shear = section.number("shear", "kN/m", 0.0, 2000.0);
    section.finish();
    Some(Span { length: length?, bottom: bottom?, required, moment, shear })
}

/// A design area; 0 means not known.
fn required(section: &Section) -> Option<At<f64>> {
    section.number("required", "mm²/m", 0.0, 20_000.0).filter(|r| r.value > 0.0)
}

/// Bars at a spacing: letter, size, hyphen, spacing.
fn bars(section: &Section, key: &'static str, letter: Option<&str>, aggregate: f64) -> Option<At<Bars>> {
    let example = letter.unwrap_or("H");
    let text = section.text(key, &format!("{example}12-175"))?;
    let span = section.span_of(key);
    let shown: String = text.value.chars().take(30).collect();
    // A basic text without escapes stands one byte after its opening quote.
    let inner = |from: usize, to: usize| if span.len() == text.value.len() + 2 { span.start + 1 + from..span.start + 1 + to } else { span.clone() };
    let form = |label: &str, at| {
        section.fault(
            Fault::new("bar-form", at, format!("{key} is {shown:?}"))
                .label(label)
                .rule("bars are written letter, size, hyphen, spacing in mm, such as H12-175")
                .remedy(format!("write it like \"{example}12-175\"")),
        );
    };
    let Some((head, spacing_text)) = text.value.split_once('-') else {
        form("a hyphen is missing", span.clone());
        return None;
    };
    let letters: String = head.chars().take_while(|c| !c.is_ascii_digit()).collect();
    let size_text = &head[letters.len()..];
    let (size_at, spacing_at) = (inner(letters.len(), head.len()), inner(head.len() + 1, text.value.len()));
    let plain = |text: &str| !text.is_empty() && text.len() <= 20 && text.chars().all(|c| c.is_ascii_digit()) && !text.starts_with('0');
    let is_zero = spacing_text == "0";
    let sound = (plain(size_text) || size_text == "0") && (plain(spacing_text) || is_zero || spacing_text.starts_with('-'));
    let (Some(size), Ok(spacing)) = (sound.then(|| size_text.parse::<u32>().unwrap_or(u32::MAX)), spacing_text.parse::<f64>()) else {
        form("cannot be read", span.clone());
        return None;
    };
    if let Some(letter) = letter.filter(|l| *l != letters) {
        section.fault(
            Fault::new("bar-letter", inner(0, letters.len()), format!("{key} is {shown:?}"))
                .label(format!("the letter of this job is {letter}"))
                .rule("all bars of a job carry its bar_letter")
                .remedy(format!("write \"{letter}{size_text}-{spacing_text}\", or change bar_letter")),
        );
        return None;
    }
    if !tables().preferred_sizes().any(|s| s == size) {
        let near = tables().preferred_sizes().sorted_by_key(|s| s.abs_diff(size)).take(2).sorted().join(" and ");
        section.fault(
            Fault::new("bar-size", size_at, format!("{key} is {shown:?}: no bar of {size_text} mm"))
                .label(format!("nearest sizes: {near}"))
                .rule(format!("preferred sizes are {} mm", tables().preferred_sizes().join(", ")))
                .remedy(format!("take {near}")),
        );
        return None;
    }
    let least = f64::from(size) + f64::from(size).max(aggregate + 5.0).max(20.0);
    if !(spacing.is_finite() && (least..=1000.0).contains(&spacing)) || spacing.fract() != 0.0 {
        section.fault(
            Fault::new("bar-spacing", spacing_at, format!("{key} is {shown:?}"))
                .label(format!("spacing outside {} to 1000 mm, or not whole", mm(least)))
                .rule("clear gap at least the size, the aggregate + 5 and 20 mm (EN 1992-1-1:2004 8.2); at most 1000 mm")
                .remedy(format!("write a whole spacing from {} to 1000 mm", mm(least))),
        );
        return None;
    }
    Some(At { value: Bars { size, spacing }, at: text.at })
}

/// What can be seen only when the parts are together: depth, clear spans, bearings.
fn fits(section: &Section, slab: &Slab, supports: &[Section], spans: &[Section]) {
    let size = |s: &Option<At<Bars>>| s.as_ref().map_or(10, |b| b.value.size);
    let largest_top = slab.supports.iter().map(|s| size(&s.top)).max().unwrap_or(0);
    let largest_bottom = slab.spans.iter().map(|s| s.bottom.value.size).max().unwrap_or(0);
    let layers = f64::from(largest_top + largest_bottom + slab.bottom_distribution.value.size + slab.top_distribution.value.size);
    let stack = slab.cover.bottom.value + slab.cover.top.value + layers;
    if stack > slab.thickness.value {
        section.fault(
            Fault::new(
                "depth",
                section.span_of("thickness"),
                format!("covers and four layers need {} mm, the slab is {} mm", mm(stack), mm(slab.thickness.value)),
            )
            .rule("covers + layers ≤ thickness")
            .remedy("correct covers, sizes or thickness"),
        );
    }
    let (side, width) = (slab.cover.side.value, slab.width.value);
    for (i, span) in slab.spans.iter().enumerate() {
        let clear = span.length.value - slab.supports[i].width.value / 2.0 - slab.supports[i + 1].width.value / 2.0;
        if clear < 300.0 {
            spans[i].fault(
                Fault::new("span-short", spans[i].span_of("length"), format!("the clear span is {} mm", mm(clear)))
                    .rule("a clear span, face to face, is at least 300 mm")
                    .remedy("correct the span length or the support widths"),
            );
        }
    }
    // How many bars of a kind stand side by side, over the width or along the slab.
    let tops = slab.supports.iter().filter_map(|s| s.top.as_ref()).map(|t| t.value.spacing);
    let across = slab.spans.iter().map(|s| s.bottom.value.spacing).chain(tops).fold(f64::INFINITY, f64::min);
    let length: f64 = slab.spans.iter().map(|s| s.length.value).sum();
    let along = slab.bottom_distribution.value.spacing.min(slab.top_distribution.value.spacing);
    for (what, key, number) in [("across the width", "width", (width - 2.0 * side) / across), ("along the slab", "bottom_distribution", length / along)] {
        if number > MOST_ACROSS as f64 {
            section.fault(
                Fault::new("too-many", section.span_of(key), format!("about {} bars {what}", number.ceil()))
                    .rule(format!("at most {MOST_ACROSS} bars of a kind side by side; this is a limit of this program"))
                    .remedy("split the slab, or look at the spacing"),
            );
        }
    }
    for i in [0, slab.supports.len() - 1] {
        let bearing = slab.supports[i].bearing.value;
        if bearing < side + 20.0 {
            let key = if supports[i].has("bearing") { "bearing" } else { "width" };
            supports[i].fault(
                Fault::new("bearing", supports[i].span_of(key), format!("a bearing of {} mm with a side cover of {} mm", mm(bearing), mm(side)))
                    .rule("the bearing is at least the side cover and 20 mm, so that a bar reaches past the face")
                    .remedy("correct the bearing or the cover"),
            );
        }
    }
}
