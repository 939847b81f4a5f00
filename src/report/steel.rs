//! Steel by slab, layer, size and class, with laps apart; and what a quantity surveyor asks besides.

use crate::place::{BarModel, BarType, SlabModel};
use crate::steel::mass;
use crate::table::Table;
use std::collections::BTreeMap;

/// Bars longer than this count as over-length, mm (usual stock).
pub const OVER_LENGTH: i32 = 12_000;

/// Sums of one group of bars over all members: number, metres, kg, and the kg that are laps.
#[derive(Clone, Copy, Debug, Default)]
pub struct Sum {
    pub bars: u64,
    pub length_m: f64,
    pub kg: f64,
    pub laps_kg: f64,
}

impl Sum {
    fn add(&mut self, bar: &BarType) {
        self.bars += u64::from(bar.total());
        self.length_m += f64::from(bar.total()) * f64::from(bar.length) / 1000.0;
        self.kg += bar.mass();
        self.laps_kg += bar.lap_mm * f64::from(bar.members) / 1e6 * mass(bar.size, 1_000_000);
    }
}

pub fn class(bar: &BarType) -> &'static str {
    if bar.is_straight() { "straight" } else { "bent" }
}

/// Sums by any key.
pub fn sums<K: Ord>(model: &BarModel, key: impl Fn(&SlabModel, &BarType) -> Option<K>) -> BTreeMap<K, Sum> {
    let mut sums: BTreeMap<K, Sum> = BTreeMap::new();
    for (slab, bar) in model.bars() {
        if let Some(key) = key(slab, bar) {
            sums.entry(key).or_default().add(bar);
        }
    }
    sums
}

pub fn total(model: &BarModel) -> Sum {
    sums(model, |_, _| Some(())).remove(&()).unwrap_or_default()
}

/// One row a slab, layer, size and class.
pub fn table(model: &BarModel) -> Table {
    let mut table = Table::new(&["slab", "layer", ">size_mm", "class", ">bars", ">length_m", ">mass_kg", ">laps_kg"]);
    for (order, slab) in model.slabs.iter().enumerate() {
        let of_slab = sums(model, |s, b| (s.mark == slab.mark).then(|| (order, b.layer, b.size, class(b))));
        for ((_, layer, size, class), sum) in of_slab {
            table.row([
                slab.mark.clone(),
                layer.name().to_string(),
                size.to_string(),
                class.to_string(),
                sum.bars.to_string(),
                format!("{:.3}", sum.length_m),
                format!("{:.2}", sum.kg),
                format!("{:.2}", sum.laps_kg),
            ]);
        }
    }
    table
}

/// Plan area and volume of concrete of all members, m² and m³, gross.
pub fn concrete(slab: &SlabModel) -> (f64, f64) {
    let area = (slab.stations.end - slab.stations.start) * slab.width * 1e-6 * f64::from(slab.members);
    (area, area * slab.thickness * 1e-3)
}

/// The group of the last row of `masses`.
pub const TOTAL: &str = "total";

/// A sum with the group it belongs to, and the gross plan area and volume of concrete (m², m³) where a rate has a meaning.
#[derive(Clone, Debug)]
pub struct Masses {
    pub group: &'static str,
    pub name: String,
    pub sum: Sum,
    pub concrete: Option<(f64, f64)>,
}

/// By size, by slab with its concrete, by layer and class, what is over-length, and the total of all.
pub fn masses(model: &BarModel) -> Vec<Masses> {
    let plain = |group: &'static str, name: String, sum: Sum| Masses { group, name, sum, concrete: None };
    let mut list: Vec<Masses> = Vec::new();
    list.extend(sums(model, |_, b| Some((b.size, b.type_size()))).into_iter().map(|((_, name), sum)| plain("size", name, sum)));
    for slab in &model.slabs {
        let sum = sums(model, |s, _| (s.mark == slab.mark).then_some(())).remove(&()).unwrap_or_default();
        let name = if slab.members == 1 { slab.mark.clone() } else { format!("{} × {}", slab.mark, slab.members) };
        list.push(Masses { group: "slab", name, sum, concrete: Some(concrete(slab)) });
    }
    list.extend(sums(model, |_, b| Some(b.layer)).into_iter().map(|(layer, sum)| plain("layer", layer.name().to_string(), sum)));
    list.extend(sums(model, |_, b| Some(class(b))).into_iter().map(|(class, sum)| plain("class", class.to_string(), sum)));
    let long = sums(model, |_, b| (b.length > OVER_LENGTH).then(|| (b.size, b.type_size())));
    list.extend(long.into_iter().map(|((_, name), sum)| plain("over 12 m", name, sum)));
    let all = model.slabs.iter().map(concrete).fold((0.0, 0.0), |a, b| (a.0 + b.0, a.1 + b.1));
    list.push(Masses { group: TOTAL, name: String::new(), sum: total(model), concrete: Some(all) });
    list
}

/// The summary for the terminal: `masses` as one table with rates.
pub fn summary(model: &BarModel) -> Table {
    let mut table = Table::new(&["steel", "", ">bars", ">length m", ">mass kg", ">laps kg", ">kg/m²", ">kg/m³"]);
    for masses in masses(model) {
        table.row(summary_row(masses.group, masses.name, &masses.sum, masses.concrete));
    }
    table
}

/// A row of the summary; `concrete` is plan area and volume, m² and m³, for the rates.
fn summary_row(group: &str, name: String, sum: &Sum, concrete: Option<(f64, f64)>) -> [String; 8] {
    let rate = |of: f64| if of > 0.0 { format!("{:.1}", sum.kg / of) } else { String::new() };
    let (area, volume) = concrete.map_or((String::new(), String::new()), |(a, v)| (rate(a), rate(v)));
    let tenth = |value: f64| format!("{value:.1}");
    [group.to_string(), name, sum.bars.to_string(), tenth(sum.length_m), tenth(sum.kg), tenth(sum.laps_kg), area, volume]
}
