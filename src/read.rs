//! TOML with places: a cursor over a parsed file that gathers every fault and knows which keys were asked for.
//! Knows TOML and faults; what the keys mean stands in `job`.

use crate::diagnose::{Fault, shown};
use crate::trace::{At, Place};
use itertools::Itertools;
use std::cell::RefCell;
use std::collections::BTreeSet;
use std::ops::Range;
use toml::Spanned;
use toml::de::{DeTable, DeValue};

/// A job file may not be larger than this, bytes.
pub const MOST_BYTES: usize = 1 << 20;

/// The text of a job file, without its byte order mark. Faults where it is too large or not UTF-8.
pub fn text(bytes: &[u8]) -> Result<String, Box<Fault>> {
    if bytes.len() > MOST_BYTES {
        return Err(Box::new(
            Fault::new("too-large", 0..0, format!("the file is larger than {MOST_BYTES} bytes"))
                .rule(format!("a job file holds one drawing and at most {MOST_BYTES} bytes"))
                .remedy("split the slabs over several drawings"),
        ));
    }
    match std::str::from_utf8(bytes) {
        Ok(text) => Ok(text.strip_prefix('\u{feff}').unwrap_or(text).to_string()),
        Err(fault) => Err(Box::new(
            Fault::new("encoding", 0..0, format!("the file is not UTF-8 text: byte {} cannot be read", fault.valid_up_to()))
                .rule("a job file is UTF-8 text")
                .remedy("save it as UTF-8 in your editor"),
        )),
    }
}

/// Parses, keeping every syntax fault.
pub fn parse<'a>(source: &'a str, faults: &RefCell<Vec<Fault>>) -> Spanned<DeTable<'a>> {
    let (table, errors) = DeTable::parse_recoverable(source);
    for error in errors {
        let span = error.span().unwrap_or(0..0);
        let message = error.message().lines().next().unwrap_or("cannot be read").to_string();
        faults.borrow_mut().push(
            Fault::new("syntax", span, format!("this is not TOML: {message}"))
                .rule("a job file is TOML: key = value, text in quotes, [table] and [[list of tables]]")
                .remedy("put the line right; the lines after it are read as far as possible"),
        );
    }
    table
}

/// The nearest of the known names, where one is near enough to be meant.
pub fn nearest<'n>(name: &str, known: impl IntoIterator<Item = &'n str>) -> Option<&'n str> {
    if name.len() > 80 {
        return None;
    }
    known
        .into_iter()
        .map(|k| (strsim::damerau_levenshtein(&name.to_lowercase(), &k.to_lowercase()), k))
        .min()
        .filter(|(d, k)| *d <= (k.len().max(name.len()) / 3).max(1))
        .map(|(_, k)| k)
}

/// One table of the file while it is read.
pub struct Section<'a> {
    table: Option<&'a DeTable<'a>>,
    pub path: String,
    pub span: Range<usize>,
    known: RefCell<BTreeSet<&'static str>>,
    missing: RefCell<Vec<(&'static str, Fault)>>,
    faults: &'a RefCell<Vec<Fault>>,
}

impl<'a> Section<'a> {
    pub fn root(table: &'a Spanned<DeTable<'a>>, faults: &'a RefCell<Vec<Fault>>) -> Section<'a> {
        Section::new(Some(table.get_ref()), String::new(), 0..0, faults)
    }

    fn new(table: Option<&'a DeTable<'a>>, path: String, span: Range<usize>, faults: &'a RefCell<Vec<Fault>>) -> Section<'a> {
        Section { table, path, span, known: RefCell::default(), missing: RefCell::default(), faults }
    }

    pub fn fault(&self, fault: Fault) {
        self.faults.borrow_mut().push(fault);
    }

    pub fn place(&self, key: &str, span: &Range<usize>) -> Place {
        Place { path: self.join(key).into(), start: span.start, end: span.end }
    }

    fn join(&self, key: &str) -> String {
        if self.path.is_empty() { key.into() } else { format!("{}.{key}", self.path) }
    }

    fn look(&self, key: &'static str) -> Option<&'a Spanned<DeValue<'a>>> {
        self.known.borrow_mut().insert(key);
        self.table.and_then(|t| t.get(key))
    }

    pub fn has(&self, key: &'static str) -> bool {
        self.look(key).is_some()
    }

    /// Span of a key's value, or of the table itself.
    pub fn span_of(&self, key: &'static str) -> Range<usize> {
        self.look(key).map_or(self.span.clone(), Spanned::span)
    }

    /// Says that a key is missing, unless an unknown key turns out to be meant for it.
    pub fn need(&self, key: &'static str, example: &str) {
        if self.table.is_none() || self.look(key).is_some() {
            return;
        }
        let at = if self.path.is_empty() { "the file".into() } else { format!("[{}]", self.path) };
        let fault = Fault::new("missing-key", self.span.clone(), format!("{at} has no `{key}`"))
            .rule(format!("`{key}` is required here"))
            .remedy(if example.starts_with('[') { format!("add {example}") } else { format!("add: {key} = {example}") });
        self.missing.borrow_mut().push((key, fault));
    }

    fn wrong_type(&self, key: &str, value: &Spanned<DeValue<'_>>, wanted: &str, example: &str) {
        let found = match value.get_ref() {
            DeValue::String(_) => "text",
            DeValue::Integer(_) | DeValue::Float(_) => "a number",
            DeValue::Boolean(_) => "true or false",
            DeValue::Datetime(_) => "a date or time",
            DeValue::Array(_) => "a list",
            DeValue::Table(_) => "a table",
        };
        self.fault(
            Fault::new("wrong-type", value.span(), format!("`{}` is {found}, not {wanted}", self.join(key)))
                .label(format!("{wanted} is expected"))
                .rule(format!("`{key}` is {wanted}"))
                .remedy(format!("write it like {key} = {example}")),
        );
    }

    /// A text, as written.
    pub fn text(&self, key: &'static str, example: &str) -> Option<At<String>> {
        let value = self.look(key)?;
        match value.get_ref() {
            DeValue::String(text) => Some(At { value: text.to_string(), at: Some(self.place(key, &value.span())) }),
            _ => {
                self.wrong_type(key, value, "text", &format!("\"{example}\""));
                None
            }
        }
    }

    /// A text without any word about its type.
    pub fn peek(&self, key: &'static str) -> Option<&'a str> {
        self.look(key)?.get_ref().as_str()
    }

    /// A number within a range; whole numbers and decimals both read. `unit` is for the message.
    pub fn number(&self, key: &'static str, unit: &str, least: f64, most: f64) -> Option<At<f64>> {
        let value = self.look(key)?;
        let number = match value.get_ref() {
            DeValue::Integer(n) => i128::from_str_radix(&n.as_str().replace('_', ""), n.radix()).ok().map(|n| n as f64),
            DeValue::Float(n) => n.as_str().replace('_', "").parse::<f64>().ok(),
            _ => {
                self.wrong_type(key, value, "a number", &crate::base::num(least.max(1.0), 3));
                return None;
            }
        };
        let range = format!("{} to {} {unit}", crate::base::num(least, 3), crate::base::num(most, 3));
        match number {
            Some(n) if n.is_finite() && n >= least && n <= most => Some(At { value: n, at: Some(self.place(key, &value.span())) }),
            Some(n) if n.is_finite() => {
                self.fault(
                    Fault::new("out-of-range", value.span(), format!("`{}` is {n} {unit}", self.join(key)))
                        .label(format!("outside {range}"))
                        .rule(format!("`{key}` has to lie within {range}; these are limits of this program"))
                        .remedy("correct the value; look at its unit first"),
                );
                None
            }
            _ => {
                self.fault(
                    Fault::new("not-a-number", value.span(), format!("`{}` is not a finite number", self.join(key)))
                        .rule(format!("`{key}` is a number within {range}"))
                        .remedy("write a plain number"),
                );
                None
            }
        }
    }

    /// A whole number within a range.
    pub fn whole(&self, key: &'static str, unit: &str, least: f64, most: f64) -> Option<At<u32>> {
        let number = self.number(key, unit, least, most)?;
        if number.value.fract() != 0.0 {
            self.fault(
                Fault::new("out-of-range", self.span_of(key), format!("`{}` is {}, not a whole number", self.join(key), number.value))
                    .rule(format!("`{key}` is a whole number"))
                    .remedy("write a whole number"),
            );
            return None;
        }
        Some(At { value: number.value as u32, at: number.at })
    }

    /// A calendar date without a time: year, month, day.
    pub fn date(&self, key: &'static str) -> Option<(u16, u8, u8)> {
        let value = self.look(key)?;
        let DeValue::Datetime(date) = value.get_ref() else {
            self.wrong_type(key, value, "a date", "2026-05-18 (no quotes)");
            return None;
        };
        match (&date.date, &date.time) {
            (Some(date), None) => Some((date.year, date.month, date.day)),
            _ => {
                self.wrong_type(key, value, "a date without a time", "2026-05-18");
                None
            }
        }
    }

    /// A choice of words; the message names the nearest.
    pub fn choice<T: Copy>(&self, key: &'static str, words: &[(&'static str, T)]) -> Option<At<T>> {
        let text = self.text(key, words[0].0)?;
        if let Some((_, value)) = words.iter().find(|(w, _)| *w == text.value) {
            return Some(At { value: *value, at: text.at });
        }
        let listed = words.iter().map(|(w, _)| format!("\"{w}\"")).join(", ");
        let near = nearest(&text.value, words.iter().map(|(w, _)| *w));
        self.fault(
            Fault::new("unknown-word", self.span_of(key), format!("`{}` is {:?}", self.join(key), shown(&text.value)))
                .label(near.map_or(String::new(), |n| format!("did you mean \"{n}\"?")))
                .rule(format!("`{key}` is one of {listed}"))
                .remedy(format!("write one of {listed}")),
        );
        None
    }

    /// A value that may be a text or a number.
    pub fn text_or_number(&self, key: &'static str, unit: &str, most: f64, word: &str) -> Option<Result<At<String>, At<f64>>> {
        let value = self.look(key)?;
        match value.get_ref() {
            DeValue::Integer(_) | DeValue::Float(_) => self.number(key, unit, 0.0, most).map(Err),
            _ => self.text(key, word).map(Ok),
        }
    }

    /// A table inside this one; one that is missing reads as empty, with no faults of its own.
    pub fn section(&self, key: &'static str) -> Section<'a> {
        match self.look(key) {
            None => Section::new(None, self.join(key), self.span.clone(), self.faults),
            Some(value) => match value.get_ref() {
                DeValue::Table(table) => Section::new(Some(table), self.join(key), value.span(), self.faults),
                _ => {
                    self.wrong_type(key, value, "a table", "{ ... }");
                    Section::new(None, self.join(key), value.span(), self.faults)
                }
            },
        }
    }

    /// A list of tables.
    pub fn sections(&self, key: &'static str) -> Vec<Section<'a>> {
        let Some(value) = self.look(key) else { return Vec::new() };
        let DeValue::Array(list) = value.get_ref() else {
            self.wrong_type(key, value, &format!("a list of tables, [[{key}]]"), "[ { ... } ]");
            return Vec::new();
        };
        let mut sections = Vec::new();
        for (i, item) in list.iter().enumerate() {
            match item.get_ref() {
                DeValue::Table(table) => {
                    sections.push(Section::new(Some(table), format!("{}[{i}]", self.join(key)), item.span(), self.faults));
                }
                _ => self.wrong_type(key, item, "a table", "{ ... }"),
            }
        }
        sections
    }

    /// Reports keys that nobody asked for, and what is missing.
    pub fn finish(&self) {
        let known = self.known.borrow();
        let mut meant = BTreeSet::new();
        for (key, _) in self.table.iter().flat_map(|t| t.iter()).filter(|(k, _)| !known.contains(k.get_ref().as_ref())) {
            let name = key.get_ref().as_ref();
            let near = nearest(name, known.iter().copied());
            meant.extend(near);
            let at = if self.path.is_empty() { "the file".into() } else { format!("[{}]", self.path) };
            let shown: String = name.chars().take(60).collect();
            self.fault(
                Fault::new("unknown-key", key.span(), format!("{at} has no key `{shown}`"))
                    .label(near.map_or(String::new(), |n| format!("did you mean `{n}`?")))
                    .rule(format!("the keys here are {}", known.iter().join(", ")))
                    .remedy(near.map_or("remove it or correct its name".into(), |n| format!("write `{n}`"))),
            );
        }
        for (key, fault) in self.missing.borrow_mut().drain(..) {
            if !meant.contains(key) {
                self.fault(fault);
            }
        }
    }
}
