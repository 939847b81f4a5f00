//! D1 to D3: grids, faces, support lines and effective spans.

use super::Work;
use crate::base::mm;
use crate::job::Slab;
use crate::trace::{Step, ec2, rule};

/// Stations along the span, mm, from the centre of support 0.
#[derive(Clone, Debug)]
pub struct Stations {
    /// Where the concrete starts and ends.
    pub start: f64,
    pub end: f64,
    pub supports: Vec<SupportAt>,
    pub spans: Vec<SpanAt>,
}

#[derive(Clone, Debug)]
pub struct SupportAt {
    pub centre: f64,
    pub left_face: f64,
    pub right_face: f64,
}

#[derive(Clone, Debug)]
pub struct SpanAt {
    /// Clear span, face to face.
    pub clear: f64,
    pub effective: f64,
    pub left_face: f64,
    pub right_face: f64,
    /// Support lines: a inside the support from its face.
    pub left_line: f64,
    pub right_line: f64,
}

impl Stations {
    pub fn of(slab: &Slab) -> Stations {
        let mut centre = 0.0;
        let mut supports = Vec::new();
        for (i, support) in slab.supports.iter().enumerate() {
            if i > 0 {
                centre += slab.spans[i - 1].length.value;
            }
            let half = support.width.value / 2.0;
            supports.push(SupportAt { centre, left_face: centre - half, right_face: centre + half });
        }
        let last = slab.supports.len() - 1;
        let inside = |support: usize| {
            let seat = if support == 0 || support == last { slab.supports[support].bearing.value } else { slab.supports[support].width.value };
            (slab.thickness.value / 2.0).min(seat / 2.0)
        };
        let spans = (0..last)
            .map(|k| {
                let (left_face, right_face) = (supports[k].right_face, supports[k + 1].left_face);
                let (left_line, right_line) = (left_face - inside(k), right_face + inside(k + 1));
                SpanAt { clear: right_face - left_face, effective: right_line - left_line, left_face, right_face, left_line, right_line }
            })
            .collect();
        Stations {
            start: supports[0].right_face - slab.supports[0].bearing.value,
            end: supports[last].left_face + slab.supports[last].bearing.value,
            supports,
            spans,
        }
    }

    /// The effective span that top bars over a support use: the greater of its two (D3).
    pub fn top_span(&self, support: usize) -> f64 {
        let left = support.checked_sub(1).and_then(|k| self.spans.get(k)).map_or(0.0, |s| s.effective);
        let right = self.spans.get(support).map_or(0.0, |s| s.effective);
        left.max(right)
    }

    pub fn last(&self) -> usize {
        self.supports.len() - 1
    }
}

/// The steps of every effective span.
pub(super) fn explain(work: &mut Work) {
    for k in 0..work.stations.spans.len() {
        let steps = effective_steps(work, k);
        work.explain(&format!("span:{}/effective", k + 1), steps);
    }
}

pub(super) fn effective_steps(work: &Work, k: usize) -> Vec<Step> {
    let span = &work.stations.spans[k];
    let (a, b) = (span.left_face - span.left_line, span.right_line - span.right_face);
    vec![
        Step::new(
            "clear span ln",
            format!("{} between centres, less the supports to their faces", mm(work.slab.spans[k].length.value)),
            format!("{} mm", mm(span.clear)),
        )
        .cited(rule("D1"))
        .at(&work.slab.spans[k].length.at),
        Step::new(
            "effective span leff",
            format!("ln + a + a = {} + {} + {}, a = min(h/2, t/2), h = {}", mm(span.clear), mm(a), mm(b), mm(work.h())),
            format!("{} mm", mm(span.effective)),
        )
        .cited(ec2("5.3.2.2"))
        .at(&work.slab.thickness.at),
    ]
}
