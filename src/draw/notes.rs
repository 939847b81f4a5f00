//! The notes of a sheet, made from the model only: what is not on the job is not said.

use crate::base::{mm, num};
use crate::finding::{Check, KINDS, Verdict};
use crate::job::{Edge, Job, Slab};
use crate::place::SlabModel;
use crate::plan::{Layer, Role};
use crate::tables::{Sentence, tables};
use crate::trace::Cite;
use itertools::Itertools;

fn fill(sentence: &Sentence, values: &[(&str, String)]) -> String {
    values.iter().fold(sentence.text.clone(), |text, (name, value)| text.replace(&format!("{{{name}}}"), value))
}

/// The numbered notes of a sheet of one slab.
pub fn notes(job: &Job, slab: &Slab, placed: &SlabModel) -> Vec<String> {
    let t = tables();
    let note = |key: &str, values: &[(&str, String)]| t.notes.note.get(key).map(|s| fill(s, values)).unwrap_or_default();
    let basis = &job.basis;
    let exposure = if basis.exposure.is_empty() { "not stated".to_string() } else { basis.exposure.clone() };
    let letter = t.materials.letters.iter().find(|l| l.letter == basis.bar_letter).map_or(String::new(), |l| l.text.clone());
    let mut notes = vec![
        note("units", &[]),
        note("concrete", &[("concrete", basis.concrete.value.class.clone()), ("aggregate", mm(basis.aggregate.value)), ("exposure", exposure)]),
        note("steel", &[("steel", basis.steel.value.class.clone()), ("fyk", num(basis.steel.value.fyk, 0)), ("letter", letter)]),
    ];
    if let Some(fire) = &basis.fire {
        notes.push(note("fire", &[("fire", fire.text.clone())]));
    }
    let cover = &slab.cover;
    let values = [("slab", slab.mark.clone()), ("bottom", mm(cover.bottom.value)), ("top", mm(cover.top.value)), ("side", mm(cover.side.value))];
    notes.push(note("cover", &values));
    notes.push(note("layers", &[("order", order(placed))]));
    if closes(placed) && placed.bars.iter().any(|b| b.layer == Layer::T2) {
        notes.push(note("under_legs", &[]));
    }
    notes.push(note("spacing", &[]));
    notes.push(laps(job, placed, note));
    if let Some(heights) = chair_heights(placed) {
        notes.push(note("chairs", &[("slab", slab.mark.clone()), ("height", heights)]));
    }
    for (edge, side) in slab.edges.iter().zip(["near", "far"]) {
        if *edge == Edge::Joint {
            notes.push(note("joint", &[("slab", slab.mark.clone()), ("side", side.to_string())]));
        }
    }
    if slab.edges.contains(&Edge::Free) && placed.bars.iter().any(|b| b.layer == Layer::E && b.role == Role::Edge && !b.is_straight()) {
        notes.push(note("edge_bars", &[]));
    }
    notes.push(note("spacers", &[]));
    notes.push(note("deduction", &[("deduction", basis.deduction.text.clone())]));
    let sheet = &basis.curtailment.value;
    let source = t.cited(&Cite { source: sheet.source.clone().into(), clause: "".into() });
    notes.push(note("curtailment", &[("name", sheet.name.clone()), ("cite", source)]));
    let limit = t.notes.limits.handling_kg.value;
    let heavy = placed.bars.iter().filter(|b| crate::steel::mass(b.size, b.length) > limit).map(|b| b.mark.clone()).join(", ");
    if !heavy.is_empty() {
        notes.push(note("heavy", &[("marks", heavy), ("limit", num(limit, 0))]));
    }
    notes.push(note("figures", &[("editions", editions(job))]));
    notes.push(t.notes.caution.iter().map(|c| c.text.as_str()).join(" "));
    notes
}

/// Whether bars of both faces close the slab ends.
fn closes(placed: &SlabModel) -> bool {
    placed.bars.iter().any(|b| b.layer == Layer::E && b.role == Role::EndTop)
}

/// The mats in the order they are laid, with what goes in beside them.
fn order(placed: &SlabModel) -> String {
    let has = |layer: Layer| placed.bars.iter().any(|b| b.layer == layer);
    let edge = placed.bars.iter().any(|b| b.layer == Layer::E && b.role == Role::Edge);
    let bottom = if closes(placed) { "B1 with the bars that close the ends" } else { "B1" };
    let second = if edge { "B2 with the edge bars" } else { "B2" };
    [Some(bottom), has(Layer::B2).then_some(second), has(Layer::T2).then_some("T2"), has(Layer::T1).then_some("T1")].into_iter().flatten().join(", ")
}

fn laps(job: &Job, placed: &SlabModel, note: impl Fn(&str, &[(&str, String)]) -> String) -> String {
    let laps = placed.laps.iter();
    let by_size = laps.map(|(size, length)| (*size, *length)).into_grouping_map().min_by(|_, a, b| a.total_cmp(b));
    if by_size.is_empty() {
        return note("no_laps", &[]);
    }
    let letter = &job.basis.bar_letter;
    let listed = by_size.into_iter().sorted_by_key(|(size, _)| *size).map(|(size, length)| format!("{letter}{size} {}", mm(length.floor()))).join(", ");
    note("laps", &[("share", job.basis.lap_share.value.to_string()), ("laps", listed)])
}

/// Heights of chairs, from the top of B2 to the underside of T2: one, or that at the ends and that over inner supports, where the
/// deduction of closing bars leaves T2 lower at the ends.
fn chair_heights(placed: &SlabModel) -> Option<String> {
    let level = |layer: Layer, role: Role| {
        let own = placed.bars.iter().filter(move |b| b.layer == layer && b.role == role);
        own.flat_map(|b| b.sets.iter().map(move |s| (s.zone.as_str(), s.axis[0][2], f64::from(b.size) / 2.0)))
    };
    let bottom = level(Layer::B2, Role::DistributionBottom).map(|(_, z, half)| z + half).fold(0.0, f64::max);
    let ends: Vec<String> = [placed.grids.first(), placed.grids.last()].into_iter().flatten().map(|g| format!("/support:{g}/")).collect();
    let is_end = |zone: &str| ends.iter().any(|e| zone.contains(e.as_str()));
    let under = |end: bool| level(Layer::T2, Role::DistributionTop).filter(|(zone, _, _)| is_end(zone) == end).map(|(_, z, half)| z - half).reduce(f64::min);
    let height = |z: f64| mm(crate::base::down(z - bottom, 1.0));
    match (under(true), under(false)) {
        (Some(end), Some(inner)) if (end - inner).abs() > 1.0 => Some(format!("{} at the ends, {} over inner supports,", height(end), height(inner))),
        (Some(z), _) | (None, Some(z)) if z > bottom => Some(format!("{} mm", height(z))),
        _ => None,
    }
}

/// The documents that the figures came from, with their editions.
pub fn editions(job: &Job) -> String {
    let t = tables();
    let sheet = job.basis.curtailment.value.source.as_str();
    let keys = ["EC2", "UKNA", "BS8666", job.basis.deduction.source.as_str(), sheet];
    let known = keys.iter().unique().filter(|k| **k != "slabwright").filter_map(|k| t.sources.get(*k));
    known.map(|s| s.cite.clone()).join("; ")
}

/// The stamp over the title block: failed checks first, then preliminary; none where contractual and clean.
pub fn stamp(job: &Job, checks: &[Vec<Check>]) -> Option<String> {
    let failed: Vec<&Check> = checks.iter().flatten().filter(|c| c.verdict == Verdict::Fail).collect();
    let stamps = &tables().notes.stamp;
    if !failed.is_empty() {
        let count = format!("{} check{}", failed.len(), if failed.len() == 1 { "" } else { "s" });
        let mut about: Vec<&str> = failed.iter().map(|c| c.code).unique().filter_map(|code| KINDS.iter().find(|k| k.code == code)).map(|k| k.text).collect();
        if about.len() > 2 {
            about.truncate(2);
            about.push("...");
        }
        return stamps.get("failed").map(|s| fill(s, &[("count", count), ("about", about.join("; "))]));
    }
    job.head.revision.starts_with('P').then(|| stamps.get("preliminary").map(|s| s.text.clone())).flatten()
}
