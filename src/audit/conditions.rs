//! D12: whether the rule sheet may be used for this slab; and the fire rating where one is stated.

use super::{Slate, Verdict};
use crate::plan::Layer;
use crate::tables::tables;

pub(super) fn checks(slate: &mut Slate) {
    let conditions = slate.job.basis.curtailment.value.conditions.clone();
    let name = format!("curtailment:{}", slate.job.basis.curtailment.value.name);
    let spans: Vec<f64> = slate.model.stations.spans.iter().map(|s| s.effective).collect();
    let (shortest, longest) = (spans.iter().copied().fold(f64::INFINITY, f64::min), spans.iter().copied().fold(0.0, f64::max));
    let (permanent, variable) = (slate.slab.permanent.value, slate.slab.variable.value);
    let ratio = shortest / longest;
    slate.file("rule-spans", &name, ratio, conditions.shortest_over_longest, "", ratio >= conditions.shortest_over_longest - 1e-9, Verdict::Fail);
    let loads = if permanent > 0.0 { variable / permanent } else { f64::MAX };
    slate.file(
        "rule-load-ratio",
        &name,
        loads.min(1e6),
        conditions.variable_over_permanent,
        "",
        loads <= conditions.variable_over_permanent + 1e-9,
        Verdict::Fail,
    );
    slate.file("rule-load", &name, variable, conditions.variable_most_kn_m2, "kN/m²", variable <= conditions.variable_most_kn_m2 + 1e-9, Verdict::Fail);
    slate.file("rule-span-count", &name, spans.len() as f64, conditions.least_spans as f64, "", spans.len() >= conditions.least_spans, Verdict::Fail);
    // Cannot be seen in the file: a warning until actions prove it.
    slate.file("rule-redistribution", &name, conditions.redistribution_percent, conditions.redistribution_percent, "%", false, Verdict::Warn);
    fire(slate);
}

fn fire(slate: &mut Slate) {
    let Some(minutes) = slate.job.basis.fire.as_ref().map(|f| f.minutes) else { return };
    let Some(row) = tables().national.fire.iter().find(|f| f.minutes == minutes) else { return };
    let axis = slate.pieces.along(|p| p.layer == Layer::B1).iter().map(|p| p.low[2]).fold(f64::INFINITY, f64::min);
    slate.at_least("fire-axis", "B1", axis, row.axis, "mm");
    slate.at_least("fire-thickness", "thickness", slate.h(), row.thickness, "mm");
}
