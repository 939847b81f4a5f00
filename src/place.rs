//! Runs become bar types with marks and placements in three dimensions (D15, D21, D22). A bar exists once: sheet, schedule, masses,
//! checks and every export read it from here. Imports plan and steel; computes no extent.

use crate::base::{Point3, area_per_metre, mm, num, shifted, tidy};
use crate::job::Job;
use crate::plan::stations::Stations;
use crate::plan::{Along, Layer, Plan, Reason, Role, Run};
use crate::steel;
use crate::trace::{Ledger, Step, rule};
use itertools::Itertools;
use std::collections::BTreeMap;

/// Every placed bar of a drawing.
pub struct BarModel {
    pub slabs: Vec<SlabModel>,
    pub ledger: Ledger,
}

/// One slab with its bars; lengths in mm.
pub struct SlabModel {
    pub mark: String,
    pub members: u32,
    pub thickness: f64,
    pub width: f64,
    pub stations: Stations,
    pub grids: Vec<String>,
    pub bars: Vec<BarType>,
    pub reasons: Vec<Reason>,
    /// Laps used, as (size, length).
    pub laps: Vec<(u32, f64)>,
}

/// A bar mark: what is ordered and bent, and where each of its bars stands.
#[derive(Clone, Debug)]
pub struct BarType {
    pub mark: String,
    pub letter: String,
    pub size: u32,
    pub shape: &'static str,
    pub dims: BTreeMap<char, i32>,
    pub length: i32,
    pub layer: Layer,
    pub role: Role,
    pub members: u32,
    pub sets: Vec<Set>,
    /// Length of all bars of the mark in one member that counts as lap, mm.
    pub lap_mm: f64,
}

/// Bars of a mark at equal steps. `axis` is the centre line of the first, with sharp corners.
#[derive(Clone, Debug)]
pub struct Set {
    pub count: u32,
    pub step: Point3,
    /// Called spacing of the zone, mm.
    pub spacing: f64,
    pub axis: Vec<Point3>,
    /// Address of the zone, such as `S1/span:1/B1`.
    pub zone: String,
    pub turn: &'static str,
}

impl Set {
    /// The centre line of the bar with this number, from 0.
    pub fn bar(&self, number: u32) -> Vec<Point3> {
        let n = f64::from(number);
        shifted(&self.axis, [self.step[0] * n, self.step[1] * n, self.step[2] * n])
    }

    pub fn bars(&self) -> impl Iterator<Item = Vec<Point3>> + '_ {
        (0..self.count).map(|i| self.bar(i))
    }
}

impl BarType {
    pub fn each(&self) -> u32 {
        self.sets.iter().map(|s| s.count).sum()
    }

    pub fn total(&self) -> u32 {
        self.each() * self.members
    }

    /// Mass of all bars of the mark, kg, not rounded.
    pub fn mass(&self) -> f64 {
        f64::from(self.total()) * steel::mass(self.size, self.length)
    }

    /// Type and size, such as H12.
    pub fn type_size(&self) -> String {
        format!("{}{}", self.letter, self.size)
    }

    pub fn is_straight(&self) -> bool {
        self.shape == "00"
    }

    /// Whether its plane runs along the span.
    pub fn is_along_span(&self) -> bool {
        self.sets.first().is_some_and(|s| s.axis.windows(2).any(|w| w[0][0] != w[1][0]))
    }

    pub fn placements(&self) -> impl Iterator<Item = Vec<Point3>> + '_ {
        self.sets.iter().flat_map(Set::bars)
    }
}

impl BarModel {
    pub fn bars(&self) -> impl Iterator<Item = (&SlabModel, &BarType)> {
        self.slabs.iter().flat_map(|s| s.bars.iter().map(move |b| (s, b)))
    }

    pub fn total_kg(&self) -> f64 {
        self.bars().map(|(_, b)| b.mass()).sum()
    }
}

/// Places the planned runs of a job and gives every bar type its mark.
pub fn place(job: &Job, plans: Vec<Plan>) -> BarModel {
    let mut ledger = Ledger::default();
    let mut slabs: Vec<SlabModel> = Vec::new();
    for (slab, plan) in job.slabs.iter().zip(plans) {
        let bars = bar_types(&plan.runs, &job.basis.bar_letter, slab.members);
        ledger.absorb(plan.ledger);
        slabs.push(SlabModel {
            mark: slab.mark.clone(),
            members: slab.members,
            thickness: slab.thickness.value,
            width: slab.width.value,
            stations: plan.stations,
            grids: slab.supports.iter().map(|s| s.grid.clone()).collect(),
            bars: bars.iter().map(|(b, _)| b.clone()).collect(),
            reasons: plan.reasons,
            laps: plan.laps,
        });
        // The explanations of a bar's dimensions travel with its first run until it has a mark.
        if let Some(made) = slabs.last_mut() {
            let runs: Vec<Run> = bars.into_iter().map(|(_, run)| run).collect();
            pending(made, runs, &mut ledger);
        }
    }
    number(&mut slabs, &mut ledger);
    explain_steel(&slabs, &mut ledger);
    BarModel { slabs, ledger }
}

/// Alike bars share a type: letter, size, shape, dimensions, layer and role (D21). Sorted as marks run.
fn bar_types(runs: &[Run], letter: &str, members: u32) -> Vec<(BarType, Run)> {
    let mut types: Vec<(BarType, Run)> = Vec::new();
    for run in runs.iter().filter(|r| !r.lines.is_empty() && r.made.length > 0) {
        let sets = sets_of(run);
        let lap = run.lap * run.lines.len() as f64;
        let alike = |b: &BarType| {
            b.layer == run.layer
                && b.role == run.role
                && b.size == run.made.size
                && b.shape == run.made.shape
                && b.dims == run.made.dims
                && b.length == run.made.length
        };
        match types.iter_mut().find(|(b, _)| alike(b)) {
            Some((bar, _)) => {
                bar.sets.extend(sets);
                bar.lap_mm += lap;
            }
            None => {
                let bar = BarType {
                    mark: String::new(),
                    letter: letter.to_string(),
                    size: run.made.size,
                    shape: run.made.shape,
                    dims: run.made.dims.clone(),
                    length: run.made.length,
                    layer: run.layer,
                    role: run.role,
                    members,
                    sets,
                    lap_mm: lap,
                };
                types.push((bar, run.clone()));
            }
        }
    }
    let low = |b: &BarType, axis: usize| b.sets.iter().flat_map(|s| s.axis.iter().map(move |p| p[axis])).fold(f64::INFINITY, f64::min);
    types.sort_by(|(a, _), (b, _)| {
        (a.layer, group(a)).cmp(&(b.layer, group(b))).then(low(a, 0).total_cmp(&low(b, 0))).then(low(a, 1).total_cmp(&low(b, 1))).then(b.length.cmp(&a.length))
    });
    types
}

/// Among the bars of both faces: those that close the slab ends first, then the side edges and what they hold.
fn group(bar: &BarType) -> u8 {
    match bar.role {
        Role::Corner => 2,
        Role::Edge => 1,
        _ => 0,
    }
}

/// The lines of a run as sets of equal steps.
fn sets_of(run: &Run) -> Vec<Set> {
    let mut sets: Vec<Set> = Vec::new();
    let mut i = 0;
    while i < run.lines.len() {
        let step = run.lines.get(i + 1).map_or(0.0, |next| next - run.lines[i]);
        let mut n = 1;
        while run.lines.get(i + n).is_some_and(|y| (y - run.lines[i] - step * n as f64).abs() < 1e-6) {
            n += 1;
        }
        let across = run.lines[i];
        let axis = run.made.axis.iter().map(|(along, up)| match run.along {
            Along::X => [tidy(*along), tidy(across), tidy(run.z + up)],
            Along::Y => [tidy(across), tidy(*along), tidy(run.z + up)],
        });
        let step = match (n, run.along) {
            (1, _) => [0.0, 0.0, 0.0],
            (_, Along::X) => [0.0, tidy(step), 0.0],
            (_, Along::Y) => [tidy(step), 0.0, 0.0],
        };
        sets.push(Set { count: n as u32, step, spacing: run.spacing, axis: axis.collect(), zone: run.zone.clone(), turn: run.turn });
        i += n;
    }
    sets
}

/// Keeps why each dimension is what it is under a provisional address: the bar's place in its slab.
fn pending(slab: &SlabModel, runs: Vec<Run>, ledger: &mut Ledger) {
    for (i, run) in runs.into_iter().enumerate() {
        for (letter, steps) in run.made.why {
            ledger.put(format!("{}/bar:{i}/{letter}", slab.mark), steps);
        }
    }
}

/// Marks from 01, two digits or as many as the drawing needs, slab by slab (D21).
fn number(slabs: &mut [SlabModel], ledger: &mut Ledger) {
    let count: usize = slabs.iter().map(|s| s.bars.len()).sum();
    let digits = count.to_string().len().max(2);
    let mut next = 1;
    for slab in slabs {
        for (i, bar) in slab.bars.iter_mut().enumerate() {
            bar.mark = format!("{next:0digits$}");
            next += 1;
            explain_mark(&slab.mark, i, bar, ledger);
        }
    }
}

fn explain_mark(slab: &str, index: usize, bar: &BarType, ledger: &mut Ledger) {
    let address = format!("{slab}/mark:{}", bar.mark);
    for letter in bar.dims.keys().copied().chain(['L']) {
        let steps = ledger.get(&format!("{slab}/bar:{index}/{letter}")).map(<[Step]>::to_vec).unwrap_or_default();
        let name = if letter == 'L' { "length".to_string() } else { letter.to_string() };
        let steps = if steps.is_empty() {
            vec![Step::new(format!("dimension {letter}"), "", format!("{} mm", bar.dims.get(&letter).copied().unwrap_or(0)))]
        } else {
            steps
        };
        ledger.put(format!("{address}/{name}"), steps);
    }
    let zones: Vec<(String, u32)> = bar.sets.iter().map(|s| (s.zone.clone(), s.count)).into_grouping_map().sum().into_iter().sorted().collect();
    let mut steps: Vec<Step> = zones.iter().map(|(zone, n)| Step::new(format!("in {zone}"), "", n.to_string())).collect();
    steps.push(Step::new("total", format!("{} in each × {} members", bar.each(), bar.members), bar.total().to_string()).cited(rule("D19")));
    ledger.put(format!("{address}/count"), steps);
    ledger.put(
        format!("{address}/mass"),
        vec![
            Step::new(
                "mass",
                format!("{} × {} m × {} kg/m", bar.total(), num(f64::from(bar.length) / 1000.0, 3), num(steel::mass(bar.size, 1000), 3)),
                format!("{} kg", num(bar.mass(), 2)),
            )
            .cited(rule("D22")),
        ],
    );
    let summary = Step::new(
        format!("mark {}", bar.mark),
        format!(
            "{}{}, shape {}, {}, layer {}, {}; called at {}",
            bar.letter,
            bar.size,
            bar.shape,
            bar.dims.iter().map(|(l, v)| format!("{l} = {v}")).join(", "),
            bar.layer.name(),
            bar.role.name(),
            bar.sets.first().map_or(String::new(), |s| mm(s.spacing))
        ),
        format!("{} no., {} mm long", bar.total(), bar.length),
    );
    let area = bar.sets.first().map(|s| area_per_metre(bar.size, s.spacing));
    let mut steps = vec![summary];
    steps.extend(area.map(|a| Step::new("area at the called spacing", "", format!("{} mm²/m", num(a, 0)))));
    steps.extend(zones.iter().map(|(zone, n)| Step::new(format!("{n} stand in {zone}"), "ask for this address for its stops and counts", "")));
    ledger.put(address, steps);
}

fn explain_steel(slabs: &[SlabModel], ledger: &mut Ledger) {
    let mut total = Vec::new();
    for slab in slabs {
        let kg: f64 = slab.bars.iter().map(BarType::mass).sum();
        let by_mark = slab.bars.iter().map(|b| Step::new(format!("mark {}", b.mark), "", format!("{} kg", num(b.mass(), 2))));
        let mut steps: Vec<Step> = by_mark.collect();
        steps.push(Step::new(format!("slab {}", slab.mark), format!("sum, {} members", slab.members), format!("{} kg", num(kg, 1))).cited(rule("D22")));
        ledger.put(format!("{}/steel", slab.mark), steps);
        total.push(Step::new(format!("slab {}", slab.mark), "", format!("{} kg", num(kg, 2))));
    }
    let kg: f64 = slabs.iter().flat_map(|s| &s.bars).map(BarType::mass).sum();
    total.push(Step::new("total", "sum, rounded once", format!("{} kg", num(kg, 1))).cited(rule("D22")));
    ledger.put("steel/total", total);
}
