//! The model as other programs read it: `slabwright/model/1`. Fields may be added, never renamed or dropped.

use crate::base::tidy;
use crate::finding::Check;
use crate::job::Job;
use crate::place::{BarModel, BarType, Set, SlabModel};
use crate::report::steel;
use serde_json::{Map, Value, json};

pub const SCHEMA: &str = "slabwright/model/1";

/// A number without noise: whole where it is whole.
fn number(value: f64) -> Value {
    let value = tidy(value);
    if value.fract() == 0.0 && value.abs() < 1e15 { json!(value as i64) } else { json!(value) }
}

fn points(points: &[[f64; 3]]) -> Value {
    points.iter().map(|p| p.iter().map(|v| number(*v)).collect::<Value>()).collect()
}

/// Mass to two decimals.
fn kilograms(value: f64) -> Value {
    number((value * 100.0).round() / 100.0)
}

/// The whole model as JSON text: one bar, one check and one reason a line, so that two models compare line by line.
pub fn json(job: &Job, model: &BarModel, checks: &[Vec<Check>]) -> String {
    let list = |items: Vec<Value>, indent: &str| -> String {
        if items.is_empty() {
            return "[]".into();
        }
        let lines: Vec<String> = items.iter().map(|v| format!("{indent}  {v}")).collect();
        format!("[\n{}\n{indent}]", lines.join(",\n"))
    };
    let mut slabs = Vec::new();
    for (slab, checks) in model.slabs.iter().zip(checks) {
        let head = slab_head(slab);
        let reasons = slab.reasons.iter().map(|r| json!({ "at": r.address, "text": r.text, "clause": crate::tables::tables().cited(&r.cite) })).collect();
        let mut fields: Vec<String> = head.iter().map(|(k, v)| format!("    {}: {v}", json!(k))).collect();
        fields.push(format!("    \"supports\": {}", list(supports(slab), "    ")));
        fields.push(format!("    \"spans\": {}", list(spans(slab), "    ")));
        fields.push(format!("    \"bars\": {}", list(slab.bars.iter().map(bar).collect(), "    ")));
        fields.push(format!("    \"checks\": {}", list(checks.iter().map(check).collect(), "    ")));
        fields.push(format!("    \"reasons\": {}", list(reasons, "    ")));
        slabs.push(format!("  {{\n{}\n  }}", fields.join(",\n")));
    }
    let job_fields = json!({
        "number": job.head.number, "project": job.head.project, "title": job.head.title,
        "drawing": job.head.drawing, "revision": job.head.revision, "date": job.head.date_text(),
        "concrete": job.basis.concrete.value.class, "steel": job.basis.steel.value.class, "curtailment": job.basis.curtailment.value.name,
    });
    let mut by_size = Map::new();
    for (size, sum) in steel::sums(model, |_, b| Some(b.size)) {
        by_size.insert(size.to_string(), kilograms(sum.kg));
    }
    let total = steel::total(model);
    let steel = json!({ "total_kg": kilograms(total.kg), "laps_kg": kilograms(total.laps_kg), "by_size_kg": by_size });
    format!("{{\n\"schema\": \"{SCHEMA}\",\n\"job\": {job_fields},\n\"slabs\": [\n{}\n],\n\"steel\": {steel}\n}}\n", slabs.join(",\n"))
}

fn slab_head(slab: &SlabModel) -> Vec<(&'static str, Value)> {
    vec![
        ("mark", json!(slab.mark)),
        ("members", json!(slab.members)),
        ("thickness_mm", number(slab.thickness)),
        ("width_mm", number(slab.width)),
        ("start_mm", number(slab.stations.start)),
        ("end_mm", number(slab.stations.end)),
    ]
}

fn supports(slab: &SlabModel) -> Vec<Value> {
    let stations = slab.stations.supports.iter().zip(&slab.grids);
    stations
        .map(|(s, grid)| json!({ "grid": grid, "left_face_mm": number(s.left_face), "centre_mm": number(s.centre), "right_face_mm": number(s.right_face) }))
        .collect()
}

fn spans(slab: &SlabModel) -> Vec<Value> {
    let span = |s: &crate::plan::stations::SpanAt| json!({ "clear_mm": number(s.clear), "effective_mm": number(s.effective), "left_line_mm": number(s.left_line), "right_line_mm": number(s.right_line) });
    slab.stations.spans.iter().map(span).collect()
}

fn bar(bar: &BarType) -> Value {
    json!({
        "mark": bar.mark,
        "letter": bar.letter,
        "size_mm": bar.size,
        "shape": bar.shape,
        "dims_mm": bar.dims.iter().map(|(l, v)| (l.to_string(), json!(v))).collect::<Map<String, Value>>(),
        "length_mm": bar.length,
        "each": bar.each(),
        "total": bar.total(),
        "mass_kg": kilograms(bar.mass()),
        "laps_mm": number(bar.lap_mm),
        "layer": bar.layer.name(),
        "role": bar.role.name(),
        "sets": bar.sets.iter().map(set).collect::<Value>(),
    })
}

fn set(set: &Set) -> Value {
    json!({
        "count": set.count,
        "step_mm": set.step.iter().map(|v| number(*v)).collect::<Value>(),
        "spacing_mm": number(set.spacing),
        "axis_mm": points(&set.axis),
        "zone": set.zone,
    })
}

pub fn check(check: &Check) -> Value {
    json!({
        "code": check.code,
        "result": check.verdict.word(),
        "at": check.at,
        "value": number(check.value),
        "limit": number(check.limit),
        "unit": check.unit,
        "clause": check.clause,
    })
}
