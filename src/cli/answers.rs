//! The verbs that answer one question: explain, bend, lap.

use super::{DONE, FAILED, FAULTS, envelope, jobs, say, talk};
use crate::base::num;
use crate::report::explain;
use crate::rules::anchorage::{self, Bar, Bond, Form};
use crate::steel::bend::{Bent, Dims, formula};
use crate::steel::mass;
use crate::steel::walk::walk;
use crate::tables::tables;
use crate::trace::Step;
use serde_json::json;

pub fn explain(path: &str, address: &str, as_json: bool) -> u8 {
    let (outcome, name) = match jobs::open(path) {
        Ok(opened) => opened,
        Err(status) => return status,
    };
    let Some(set) = outcome.set else {
        if as_json {
            let faults: Vec<_> = outcome.faults.iter().map(|f| jobs::fault_json(f, &outcome.source)).collect();
            envelope("explain", false, json!({ "job": name, "faults": faults }));
        }
        jobs::show_faults(&outcome.faults, &outcome.source, &name);
        return FAULTS;
    };
    match explain::explain(&set.model, &outcome.source, address) {
        Ok(answers) if as_json => {
            envelope("explain", true, json!({ "job": name, "answers": answers }));
            DONE
        }
        Ok(answers) => {
            say(&explain::text(&answers, &name));
            DONE
        }
        Err(near) => {
            if as_json {
                envelope("explain", false, json!({ "job": name, "address": address, "near": near }));
            }
            talk(&format!("nothing is known at {:?}. Near it:\n  {}\n", crate::diagnose::shown(address), near.join("\n  ")));
            FAILED
        }
    }
}

pub fn bend(shape: &str, size: &str, dims: &[String], as_json: bool) -> u8 {
    let parsed = || -> Result<Bent, String> {
        let size: u32 = digits_of(size).parse().map_err(|_| format!("size {size:?} is not a number of mm"))?;
        let mut letters = Dims::new();
        for text in dims {
            let (letter, value) = text.split_once('=').ok_or(format!("{text:?}: write a dimension like A=1200"))?;
            let mut chars = letter.chars();
            let (Some(letter), None) = (chars.next().map(|c| c.to_ascii_uppercase()), chars.next()) else {
                return Err(format!("{text:?}: one letter before ="));
            };
            let value: f64 = value.parse().map_err(|_| format!("{text:?}: {value:?} is not a number of mm"))?;
            if letters.insert(letter, value).is_some() {
                return Err(format!("dimension {letter} is given twice"));
            }
        }
        Bent::new(shape, size, letters).map_err(|e| e.to_string())
    };
    let bent = match parsed() {
        Ok(bent) => bent,
        Err(fault) => {
            if as_json {
                envelope("bend", false, json!({ "error": fault }));
            }
            talk(&format!("{fault}\n"));
            return FAILED;
        }
    };
    let walked = walk(&bent);
    let misses = bent.misses();
    let kg = mass(bent.bar.d, bent.cut_length());
    if as_json {
        let conditions: Vec<_> = bent.conditions().iter().map(|m| json!({ "condition": m.text, "value": m.value, "limit": m.limit, "ok": m.ok })).collect();
        let fields = json!({
            "shape": bent.shape.code, "size_mm": bent.bar.d, "length_mm": bent.cut_length(), "formula_mm": bent.formula_length(),
            "exact_mm": walked.as_ref().ok().map(|w| w.length), "mass_kg": kg, "conditions": conditions,
        });
        envelope("bend", misses.is_empty() && walked.is_ok(), fields);
    } else {
        say(&format!("shape {} ({}), size {}\n", bent.shape.code, bent.shape.name, bent.bar.d));
        say(&format!("length      {} = {} mm, cut at {} mm\n", formula(&bent.shape.length), num(bent.formula_length(), 1), bent.cut_length()));
        match &walked {
            Ok(walked) => say(&format!("centre line {} mm, exact, bends at radius {} mm\n", num(walked.length, 1), num(bent.bar.radius, 0))),
            Err(fault) => say(&format!("centre line none: {fault}\n")),
        }
        say(&format!("mass        {} kg at {} kg/m\n", num(kg, 3), num(bent.bar.mass_kg_m, 3)));
        say(&format!(
            "least       end leg P {} mm, radius r {} mm, over two bends {} mm\n",
            num(bent.bar.projection, 0),
            num(bent.bar.radius, 0),
            num(bent.bar.over_two_bends, 0)
        ));
        for met in bent.conditions() {
            let word = if met.ok { "met" } else { "NOT MET" };
            let memory = if met.memory { " (from memory)" } else { "" };
            say(&format!("condition   {}: {} against {}: {word}{memory}\n", met.text, num(met.value, 1), num(met.limit, 1)));
        }
        say(&format!("by          {}; cut length up to a multiple of 25 mm\n", tables().shapes.edition));
    }
    if misses.is_empty() && walked.is_ok() { DONE } else { FAULTS }
}

/// A size with or without the letter of its steel.
fn digits_of(size: &str) -> &str {
    let letters = tables().materials.letters.iter();
    letters.filter_map(|l| size.strip_prefix(l.letter.as_str())).next().unwrap_or(size)
}

/// What `lap` was asked.
pub struct Lap {
    pub size: String,
    pub concrete: String,
    pub cover: f64,
    pub spacing: f64,
    pub share: u32,
    pub poor: bool,
}

pub fn lap(asked: &Lap, as_json: bool) -> u8 {
    let size: Option<u32> = digits_of(&asked.size).parse().ok();
    let bar = size.and_then(|s| tables().bar(s));
    let concrete = tables().materials.concrete.iter().find(|c| c.class == asked.concrete);
    let (Some(bar), Some(concrete)) = (bar, concrete) else {
        let classes = tables().materials.concrete.iter().map(|c| c.class.as_str()).collect::<Vec<_>>().join(", ");
        return refuse_lap(as_json, &format!("a size such as 12 and a class are needed; classes are {classes}"));
    };
    let sound = (5.0..=200.0).contains(&asked.cover) && asked.spacing >= f64::from(bar.d) && asked.spacing <= 2000.0 && (1..=100).contains(&asked.share);
    if !sound {
        return refuse_lap(as_json, "cover 5 to 200 mm, spacing from the size to 2000 mm, share 1 to 100 per cent");
    }
    let bond = if asked.poor { Bond::Poor } else { Bond::Good };
    let make = |form: Form| {
        let cd = anchorage::cd(asked.spacing - f64::from(bar.d), asked.cover, asked.cover, form);
        Bar { size: bar.d, fck: concrete.fck, sigma: anchorage::fyd(500.0), bond, cd, form }
    };
    let straight = anchorage::anchorage(&make(Form::Straight));
    let bent = anchorage::anchorage(&make(Form::Bent));
    let lap = anchorage::lap(&make(Form::Straight), asked.share, 0.0);
    if as_json {
        let fields = json!({
            "size_mm": bar.d, "concrete": concrete.class, "bond": if asked.poor { "poor" } else { "good" }, "cover_mm": asked.cover,
            "spacing_mm": asked.spacing, "share_percent": asked.share,
            "anchorage_straight_mm": straight.value, "anchorage_bent_mm": bent.value, "lap_mm": lap.value,
        });
        envelope("lap", true, fields);
        return DONE;
    }
    say(&format!(
        "size {}, {}, {} bond, cover {} mm, spacing {} mm, {} % lapped at one section\n\n",
        bar.d,
        concrete.class,
        if asked.poor { "poor" } else { "good" },
        num(asked.cover, 1),
        num(asked.spacing, 1),
        asked.share
    ));
    for (name, worked) in [("anchorage, straight", &straight), ("anchorage, bent", &bent), ("lap, straight", &lap)] {
        say(&format!("{name}: {} mm\n", num(worked.value.ceil(), 0)));
        say(&steps(&worked.steps));
    }
    DONE
}

fn refuse_lap(as_json: bool, why: &str) -> u8 {
    if as_json {
        envelope("lap", false, json!({ "error": why }));
    }
    talk(&format!("{why}\n"));
    FAILED
}

fn steps(steps: &[Step]) -> String {
    steps
        .iter()
        .map(|s| {
            let clause = s.cite.as_ref().map_or(String::new(), |c| format!("  [{}]", tables().cited(c)));
            format!("  {}: {} = {}{clause}\n", s.what, s.formula, s.result)
        })
        .chain(["\n".to_string()])
        .collect()
}
