//! The notes of a sheet, made from the model only: what is not on the job is not said.

use crate::base::{mm, num};
use crate::finding::{Check, Verdict};
use crate::job::{Edge, Job, Slab};
use crate::place::{BarType, SlabModel};
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
    notes.push(note("layers", &[]));
    notes.push(note("spacing", &[]));
    notes.push(laps(job, placed, note));
    if let Some(height) = chair_height(placed.thickness, &placed.bars) {
        notes.push(note("chairs", &[("slab", slab.mark.clone()), ("height", mm(height))]));
    }
    for (edge, side) in slab.edges.iter().zip(["near", "far"]) {
        if *edge == Edge::Joint {
            notes.push(note("joint", &[("slab", slab.mark.clone()), ("side", side.to_string())]));
        }
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
    notes.extend(t.notes.caution.iter().map(|c| c.text.clone()));
    notes
}

fn laps(job: &Job, placed: &SlabModel, note: impl Fn(&str, &[(&str, String)]) -> String) -> String {
    let laps = placed.laps.iter();
    let by_size = laps.map(|(size, length)| (*size, *length)).into_grouping_map().max_by(|_, a, b| a.total_cmp(b));
    if by_size.is_empty() {
        return note("no_laps", &[]);
    }
    let letter = &job.basis.bar_letter;
    let listed = by_size.into_iter().sorted_by_key(|(size, _)| *size).map(|(size, length)| format!("{letter}{size} up to {}", mm(length.ceil()))).join(", ");
    note("laps", &[("share", job.basis.lap_share.value.to_string()), ("laps", listed)])
}

/// Height of chairs: from the top of B2 to the underside of T2, where a slab has both.
fn chair_height(thickness: f64, bars: &[BarType]) -> Option<f64> {
    let middle = thickness / 2.0;
    let level = |layer: Layer, role: Role| {
        bars.iter().filter(move |b| b.layer == layer && b.role == role).flat_map(|b| b.sets.iter().map(move |s| (s.axis[0][2], f64::from(b.size) / 2.0)))
    };
    let bottom = level(Layer::B2, Role::DistributionBottom).map(|(z, half)| z + half).fold(0.0, f64::max);
    let top = level(Layer::T2, Role::DistributionTop).map(|(z, half)| z - half).fold(f64::INFINITY, f64::min);
    (bottom > 0.0 && top.is_finite() && top > middle * 0.5 && top > bottom).then(|| crate::base::down(top - bottom, 5.0))
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
    let failed = checks.iter().flatten().filter(|c| c.verdict == Verdict::Fail).count();
    let stamps = &tables().notes.stamp;
    if failed > 0 {
        return stamps.get("failed").map(|s| fill(s, &[("count", failed.to_string())]));
    }
    job.head.revision.starts_with('P').then(|| stamps.get("preliminary").map(|s| s.text.clone())).flatten()
}
