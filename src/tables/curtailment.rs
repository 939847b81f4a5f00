//! Rule sheets of simplified curtailment: what share runs on, where the rest stops, from what line, under what conditions.

use serde::Deserialize;

pub const EMBEDDED: [&str; 2] = [include_str!("../../templates/curtailment/one-way-50.toml"), include_str!("../../templates/curtailment/bs8110-3-25.toml")];

#[derive(Clone, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Sheet {
    pub schema: u32,
    pub name: String,
    pub title: String,
    pub source: String,
    pub confidence: String,
    pub note: String,
    pub bottom: Bottom,
    pub top: Top,
    pub end_top: EndTop,
    pub conditions: Conditions,
}

/// Fractions of the effective span, measured from the support line of that end.
#[derive(Clone, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Bottom {
    /// Share of the span steel that runs on into the supports.
    pub on_share: f64,
    pub stop_end: f64,
    pub stop_interior: f64,
}

/// Reach of top bars at an interior support, fractions of the greater adjacent effective span, from the support line.
#[derive(Clone, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Top {
    pub near: f64,
    /// The near reach is at least this many bar sizes from the face.
    pub near_face_sizes: f64,
    pub far: f64,
}

#[derive(Clone, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct EndTop {
    /// Share of the adjacent span's steel.
    pub share: f64,
    pub least_area: bool,
    pub reach: f64,
    pub from: From,
    pub least_face_sizes: f64,
}

#[derive(Clone, Copy, Debug, Deserialize, PartialEq)]
#[serde(rename_all = "lowercase")]
pub enum From {
    Face,
    Line,
}

#[derive(Clone, Debug, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Conditions {
    pub uniform_load: bool,
    pub shortest_over_longest: f64,
    pub variable_over_permanent: f64,
    pub variable_most_kn_m2: f64,
    pub least_spans: usize,
    pub redistribution_percent: f64,
}

impl Sheet {
    /// Faults of a sheet that parsed: shares and fractions outside their ranges. Empty when sound.
    pub fn faults(&self) -> Vec<String> {
        let ranges = [
            ("bottom.on_share", self.bottom.on_share, 0.25, 1.0),
            ("bottom.stop_end", self.bottom.stop_end, 0.0, 0.3),
            ("bottom.stop_interior", self.bottom.stop_interior, 0.0, 0.4),
            ("top.near", self.top.near, 0.0, 0.5),
            ("top.far", self.top.far, 0.05, 0.5),
            ("end_top.share", self.end_top.share, 0.0, 1.0),
            ("end_top.reach", self.end_top.reach, 0.05, 0.5),
            ("top.near_face_sizes", self.top.near_face_sizes, 0.0, 100.0),
            ("end_top.least_face_sizes", self.end_top.least_face_sizes, 0.0, 100.0),
            ("conditions.shortest_over_longest", self.conditions.shortest_over_longest, 0.0, 1.0),
            ("conditions.variable_over_permanent", self.conditions.variable_over_permanent, 0.0, 100.0),
            ("conditions.variable_most_kn_m2", self.conditions.variable_most_kn_m2, 0.0, 100.0),
            ("conditions.redistribution_percent", self.conditions.redistribution_percent, 0.0, 30.0),
        ];
        let mut faults: Vec<String> = ranges
            .iter()
            .filter(|(_, value, least, most)| !(value >= least && value <= most))
            .map(|(key, value, least, most)| format!("{key} = {value} is outside {least} to {most}"))
            .collect();
        if self.schema != 1 {
            faults.push(format!("schema = {} is not known; this program reads schema 1", self.schema));
        }
        if self.top.near > self.top.far {
            faults.push("top.near is further than top.far".into());
        }
        faults
    }
}
