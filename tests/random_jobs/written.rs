//! A draft as the text of a job file, its keys and tables in order or shuffled.

use super::generator::{Bars, Bay, Dice, Draft, Panel, Rest};
use std::fmt::Write;

impl Draft {
    /// The job as a file; with dice, its keys and tables in a random order.
    pub fn text(&self, mut dice: Option<&mut Dice>) -> String {
        let lines = |lines: Vec<String>, dice: &mut Option<&mut Dice>| {
            let mut lines = lines;
            if let Some(dice) = dice {
                dice.shuffle(&mut lines);
            }
            lines.join("\n")
        };
        let job =
            ["number = \"X1\"", "project = \"Invented\"", "title = \"Invented floor\"", "drawing = \"X1-001\"", "revision = \"P01\"", "date = 2026-01-05"];
        let job = format!("[job]\n{}\n", lines(job.map(str::to_string).to_vec(), &mut dice));
        let basis = vec![
            format!("concrete = \"{}\"", self.concrete),
            format!("steel = \"{}\"", self.steel),
            format!("bar_letter = \"{}\"", self.letter),
            format!("aggregate = {}", self.aggregate),
            format!("curtailment = \"{}\"", self.curtailment),
            format!("deduction = {}", self.deduction),
            format!("longest_bar = {}", self.longest),
            format!("lap_share = {}", self.share),
            format!("least_lap = {}", self.least_lap),
        ];
        let basis = format!("[basis]\n{}\n", lines(basis, &mut dice));
        let mut slabs = String::new();
        for slab in &self.slabs {
            let _ = writeln!(slabs, "[[slab]]\n{}", lines(slab.keys(self.letter), &mut dice));
            let table = |name: &str, keys: Vec<String>| format!("[[slab.{name}]]\n{}", keys.join("\n"));
            let supports: Vec<String> = slab.supports.iter().map(|s| table("support", s.keys(self.letter))).collect();
            let spans: Vec<String> = slab.spans.iter().map(|s| table("span", s.keys(self.letter))).collect();
            let is_apart = dice.as_mut().is_some_and(|d| d.chance(50));
            let ordered = if is_apart { [spans, supports].concat() } else { itertools::interleave(supports, spans).collect() };
            let _ = writeln!(slabs, "{}", ordered.join("\n"));
        }
        let mut tables = vec![job, basis, slabs];
        if let Some(dice) = &mut dice {
            dice.shuffle(&mut tables);
        }
        format!("schema = 1\n{}", tables.concat())
    }
}

impl Panel {
    fn keys(&self, letter: &str) -> Vec<String> {
        let [bottom, top, side] = self.cover;
        let bars = |(size, spacing): Bars| format!("\"{letter}{size}-{spacing}\"");
        vec![
            format!("mark = \"{}\"", self.mark),
            format!("members = {}", self.members),
            format!("thickness = {}", self.thickness),
            format!("width = {}", self.width),
            format!("cover = {{ bottom = {bottom}, top = {top}, side = {side} }}"),
            format!("load = {{ permanent = {}, variable = {} }}", self.load[0], self.load[1]),
            format!("bottom_distribution = {}", bars(self.b2)),
            format!("top_distribution = {}", bars(self.t2)),
            format!("edges = {{ near = \"{}\", far = \"{}\" }}", self.edges[0], self.edges[1]),
            format!("edge_width = {{ near = {}, far = {} }}", self.edge_width[0], self.edge_width[1]),
            format!("arrangement = \"{}\"", self.arrangement),
        ]
    }
}

impl Rest {
    fn keys(&self, letter: &str) -> Vec<String> {
        let mut keys = vec![format!("grid = \"{}\"", self.grid), format!("kind = \"{}\"", self.kind), format!("width = {}", self.width)];
        keys.extend(self.bearing.map(|b| format!("bearing = {b}")));
        keys.extend(self.top.map(|(size, spacing)| format!("top = \"{letter}{size}-{spacing}\"")));
        keys.extend(self.required.map(|r| format!("required = {r}")));
        keys.extend(self.end_bar.map(|e| format!("end_bar = \"{e}\"")));
        keys.extend(self.shear.map(|s| format!("shear = {s}")));
        keys
    }
}

impl Bay {
    fn keys(&self, letter: &str) -> Vec<String> {
        let mut keys = vec![format!("length = {}", self.length), format!("bottom = \"{letter}{}-{}\"", self.bottom.0, self.bottom.1)];
        keys.extend(self.required.map(|r| format!("required = {r}")));
        keys.extend(self.shear.map(|s| format!("shear = {s}")));
        keys
    }
}
