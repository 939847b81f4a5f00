//! Small invented jobs, built up from one plain slab, for faults that a random job showed.

use super::generator::{Bars, Bay, Draft, Panel, Rest};
use super::{detailed, failed};

pub const H12_200: Bars = (12, 200);
pub const SHORT: (u32, Bars) = (1500, H12_200);

/// A job fails none of these checks.
pub fn assert_passes(draft: &Draft, codes: &[&str]) {
    let text = draft.text(None);
    let open = failed(&detailed(&text), codes);
    assert!(open.is_empty(), "{open:#?}\n{text}");
}

/// One slab 2 m wide between joints, on walls of 200 mm with H12-200 over each, all covers 25 mm.
pub fn small(thickness: u32, spans: &[(u32, Bars)]) -> Draft {
    let support = |j: usize| {
        let is_end = j == 0 || j == spans.len();
        Rest {
            grid: format!("G{}", j + 1),
            kind: "wall",
            width: 200,
            bearing: None,
            top: Some(H12_200),
            required: None,
            end_bar: is_end.then_some("auto"),
            shear: None,
        }
    };
    let slab = Panel {
        mark: "S1".into(),
        members: 1,
        thickness,
        width: 2000,
        cover: [25, 25, 25],
        load: [6.0, 2.0],
        b2: (10, 300),
        t2: (10, 300),
        edges: ["joint", "joint"],
        edge_width: [0, 0],
        arrangement: "auto",
        supports: (0..=spans.len()).map(support).collect(),
        spans: spans.iter().map(|(length, bottom)| Bay { length: *length, bottom: *bottom, required: None, shear: None }).collect(),
    };
    Draft {
        concrete: "C32/40",
        steel: "B500B",
        letter: "H",
        aggregate: 20,
        curtailment: "one-way-50",
        deduction: "\"bs8110-3.24\"".into(),
        longest: 12_000,
        share: 100,
        least_lap: 0,
        slabs: vec![slab],
    }
}

impl Draft {
    pub fn slab(&mut self) -> &mut Panel {
        &mut self.slabs[0]
    }

    /// The bars over each support; none where the planner has to choose.
    pub fn tops(&mut self, tops: &[Option<Bars>]) -> &mut Draft {
        for (support, top) in self.slabs[0].supports.iter_mut().zip(tops) {
            support.top = *top;
        }
        self
    }
}
