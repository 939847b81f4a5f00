//! Why a value is what it is: steps with numbers, clause and place in the job file.

use std::borrow::Cow;
use std::collections::BTreeMap;
use std::sync::Arc;

/// A reference to a row of `templates/sources.toml` and the clause within it.
#[derive(Clone, Debug, PartialEq)]
pub struct Cite {
    pub source: Cow<'static, str>,
    pub clause: Cow<'static, str>,
}

pub const fn cite(source: &'static str, clause: &'static str) -> Cite {
    Cite { source: Cow::Borrowed(source), clause: Cow::Borrowed(clause) }
}

/// A rule of this program, D1 to D22.
pub const fn rule(clause: &'static str) -> Cite {
    cite("slabwright", clause)
}

pub const fn ec2(clause: &'static str) -> Cite {
    cite("EC2", clause)
}

/// Where in the job file a value stands: a path such as `slab[0].span[1].bottom` and a range of bytes.
#[derive(Clone, Debug, PartialEq)]
pub struct Place {
    pub path: Arc<str>,
    pub start: usize,
    pub end: usize,
}

/// A value of the job file with its place; `at` is empty where a default was taken.
#[derive(Clone, Debug)]
pub struct At<T> {
    pub value: T,
    pub at: Option<Place>,
}

impl<T> At<T> {
    pub fn default(value: T) -> At<T> {
        At { value, at: None }
    }
}

#[derive(Clone, Debug)]
pub struct Step {
    /// What is worked out, with its symbol.
    pub what: String,
    /// Formula and numbers; empty where the value is only stated.
    pub formula: String,
    /// The result with its unit.
    pub result: String,
    pub cite: Option<Cite>,
    pub place: Option<Place>,
}

impl Step {
    pub fn new(what: impl Into<String>, formula: impl Into<String>, result: impl Into<String>) -> Step {
        Step { what: what.into(), formula: formula.into(), result: result.into(), cite: None, place: None }
    }

    pub fn cited(mut self, cite: Cite) -> Step {
        self.cite = Some(cite);
        self
    }

    pub fn at(mut self, place: &Option<Place>) -> Step {
        self.place.clone_from(place);
        self
    }
}

/// A computed value and the steps that led to it.
#[derive(Clone, Debug)]
pub struct Worked {
    pub value: f64,
    pub steps: Vec<Step>,
}

/// Explanations by address, such as `S1/support:B/T1/reach-right`.
#[derive(Clone, Debug, Default)]
pub struct Ledger {
    entries: BTreeMap<String, Vec<Step>>,
}

impl Ledger {
    pub fn put(&mut self, address: impl Into<String>, steps: Vec<Step>) {
        self.entries.insert(address.into(), steps);
    }

    pub fn get(&self, address: &str) -> Option<&[Step]> {
        self.entries.get(address).map(Vec::as_slice)
    }

    pub fn addresses(&self) -> impl Iterator<Item = &str> {
        self.entries.keys().map(String::as_str)
    }

    pub fn absorb(&mut self, other: Ledger) {
        self.entries.extend(other.entries);
    }
}
