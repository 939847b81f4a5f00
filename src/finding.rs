//! What a check finds: its kinds, verdicts and findings. Data only: `audit` measures, `report` and `draw` show.

use crate::trace::{Cite, cite, ec2, rule};

#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Verdict {
    Pass,
    Warn,
    Fail,
}

impl Verdict {
    pub fn word(self) -> &'static str {
        match self {
            Verdict::Pass => "pass",
            Verdict::Warn => "warn",
            Verdict::Fail => "fail",
        }
    }
}

/// One finding: what was measured where, against which limit.
#[derive(Clone, Debug)]
pub struct Check {
    pub code: &'static str,
    pub verdict: Verdict,
    pub at: String,
    pub value: f64,
    pub limit: f64,
    pub unit: &'static str,
    pub clause: String,
}

/// A kind of check, as `slabwright list checks` shows it.
pub struct Kind {
    pub code: &'static str,
    pub text: &'static str,
    pub cite: Cite,
}

/// Every kind of check the audit knows.
pub const KINDS: &[Kind] = &[
    Kind { code: "cover-bottom", text: "bottom cover of every bar", cite: ec2("4.4.1") },
    Kind { code: "cover-top", text: "top cover of every bar", cite: ec2("4.4.1") },
    Kind { code: "cover-end", text: "cover at the slab ends", cite: ec2("4.4.1") },
    Kind { code: "cover-side", text: "cover at the side edges", cite: ec2("4.4.1") },
    Kind { code: "clash", text: "bars that would pass through one another, mm of overlap", cite: rule("D15") },
    Kind { code: "gap-least", text: "clear gap between bars that do not lap", cite: ec2("8.2(2)") },
    Kind { code: "depth-stack", text: "bottom layers stay under top layers: depth between them", cite: rule("D6") },
    Kind { code: "spacing-most", text: "spacing of main bars in the zones of greatest moment", cite: ec2("9.3.1.1(3)") },
    Kind { code: "spacing-run-on", text: "spacing of the main bars that run on", cite: ec2("9.3.1.1(3)") },
    Kind { code: "spacing-distribution", text: "spacing of distribution in the zones of greatest moment", cite: ec2("9.3.1.1(3)") },
    Kind { code: "spacing-edge", text: "spacing of edge bars along a free edge", cite: ec2("9.3.1.1(3)") },
    Kind { code: "spacing-crack", text: "spacing or size for cracks of 0.3 mm in slabs of 200 mm or more", cite: ec2("7.3.3(2)") },
    Kind { code: "area-required", text: "area placed against the design area", cite: rule("D5") },
    Kind { code: "area-least", text: "area placed against As,min", cite: ec2("9.2.1.1(1)") },
    Kind { code: "area-most", text: "area placed against As,max", cite: ec2("9.2.1.1(3)") },
    Kind { code: "area-run-on", text: "share of the span steel that runs on into a support", cite: ec2("9.3.1.2(1), 9.2.1.5(1)") },
    Kind { code: "distribution-share", text: "distribution against 20 % of the main steel", cite: ec2("9.3.1.1(2)") },
    Kind { code: "bottom-stop", text: "where bottom bars stop, from the support line", cite: rule("D11") },
    Kind { code: "top-near", text: "reach of all top bars, from the support line", cite: rule("D11") },
    Kind { code: "top-far", text: "reach of half the top bars, from the support line", cite: rule("D11") },
    Kind { code: "end-top-area", text: "top steel at an end support", cite: ec2("9.3.1.2(2)") },
    Kind { code: "end-top-reach", text: "reach of top steel from an end support", cite: ec2("9.3.1.2(2)") },
    Kind { code: "end-top-anchorage", text: "anchorage of top steel past the face of an end support", cite: ec2("8.4.4") },
    Kind { code: "end-anchorage", text: "anchorage of bottom steel past the face of an end support", cite: ec2("9.2.1.4, 8.4.4") },
    Kind { code: "lap-length", text: "laps, with what they grow by where bars stand apart", cite: ec2("8.7.3, 8.7.2(3)") },
    Kind { code: "lap-transverse", text: "laps of bars of 20 mm and over need transverse steel", cite: ec2("8.7.4") },
    Kind { code: "edge-leg", text: "legs of U-bars at a free edge", cite: ec2("9.3.1.4") },
    Kind { code: "corner-area", text: "top steel both ways in a held corner", cite: ec2("9.3.1.3") },
    Kind { code: "bend-least", text: "least legs and depths of bent bars", cite: cite("BS8666", "Tables 2 and 3") },
    Kind { code: "bend-straight", text: "straight piece between two bends", cite: cite("BS8666", "Table 3") },
    Kind { code: "length-formula", text: "cut length against the exact centre line", cite: cite("BS8666", "Table 3") },
    Kind { code: "length-most", text: "longest bar that may be scheduled", cite: rule("D18") },
    Kind { code: "rounding", text: "dimensions in multiples of 5 mm, lengths of 25 mm", cite: cite("BS8666", "form of schedule") },
    Kind { code: "count", text: "scheduled number against the bars as placed", cite: rule("D19") },
    Kind { code: "mass", text: "mass of the table against volume at 7850 kg/m³", cite: rule("D22") },
    Kind { code: "handling", text: "mass of one bar against the guideline for one person", cite: cite("HSE", "") },
    Kind { code: "fire-axis", text: "axis distance of B1 for the fire rating", cite: cite("EC2-fire", "Table 5.8 (from memory)") },
    Kind { code: "fire-thickness", text: "thickness for the fire rating", cite: cite("EC2-fire", "Table 5.8 (from memory)") },
    Kind { code: "rule-spans", text: "rule sheet: shortest span over the longest", cite: rule("D12") },
    Kind { code: "rule-load-ratio", text: "rule sheet: variable over permanent load", cite: rule("D12") },
    Kind { code: "rule-load", text: "rule sheet: variable load", cite: rule("D12") },
    Kind { code: "rule-span-count", text: "rule sheet: number of spans", cite: rule("D12") },
    Kind { code: "rule-redistribution", text: "rule sheet: designed for all spans loaded with this redistribution; an assumption", cite: rule("D12") },
    Kind { code: "sheet-texts", text: "texts of the sheets without a free place", cite: cite("practice", "") },
    Kind { code: "sheet-marks", text: "every scheduled mark stands on the sheet with its number", cite: rule("D15") },
];
