//! Faults and warnings of a job file, each at its place, and their text with the user's own line.

use annotate_snippets::{AnnotationKind, Level, Origin, Renderer, Snippet};

/// No more faults than this are printed; the rest are counted.
pub const MOST_FAULTS: usize = 100;

#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Severity {
    Fault,
    Warning,
}

/// Something wrong in a job file: code, place, what is wrong, the rule it breaks, and what to do.
#[derive(Clone, Debug)]
pub struct Fault {
    pub code: &'static str,
    pub severity: Severity,
    pub message: String,
    /// Range of bytes in the file.
    pub start: usize,
    pub end: usize,
    /// Text beside the caret; may be empty.
    pub label: String,
    pub rule: String,
    pub remedy: String,
}

impl Fault {
    pub fn new(code: &'static str, span: std::ops::Range<usize>, message: impl Into<String>) -> Fault {
        Fault {
            code,
            severity: Severity::Fault,
            message: message.into(),
            start: span.start,
            end: span.end.max(span.start),
            label: String::new(),
            rule: String::new(),
            remedy: String::new(),
        }
    }

    pub fn label(mut self, text: impl Into<String>) -> Fault {
        self.label = text.into();
        self
    }

    pub fn rule(mut self, text: impl Into<String>) -> Fault {
        self.rule = text.into();
        self
    }

    pub fn remedy(mut self, text: impl Into<String>) -> Fault {
        self.remedy = text.into();
        self
    }
}

/// Line and column, both from 1, the column in characters, of a byte in `source`.
pub fn line_and_column(source: &str, byte: usize) -> (usize, usize) {
    let mut byte = byte.min(source.len());
    while !source.is_char_boundary(byte) {
        byte -= 1;
    }
    let before = &source[..byte];
    let line_start = before.rfind('\n').map_or(0, |n| n + 1);
    (before.matches('\n').count() + 1, before[line_start..].chars().count() + 1)
}

/// Sorts by place and takes out doubles.
pub fn sorted(mut faults: Vec<Fault>) -> Vec<Fault> {
    faults.sort_by(|a, b| (a.severity, a.start, a.code, &a.message).cmp(&(b.severity, b.start, b.code, &b.message)));
    faults.dedup_by(|a, b| a.start == b.start && a.code == b.code && a.message == b.message);
    faults
}

/// The faults as text: file, line, column, the user's line with a caret, rule and remedy.
pub fn render(faults: &[Fault], source: &str, path: &str, colour: bool) -> String {
    let renderer = if colour { Renderer::styled() } else { Renderer::plain() };
    let mut text = String::new();
    for fault in faults.iter().take(MOST_FAULTS) {
        text.push_str(&render_one(fault, source, path, &renderer));
        text.push_str("\n\n");
    }
    if faults.len() > MOST_FAULTS {
        text.push_str(&format!("... and {} more, not printed (the limit is {MOST_FAULTS})\n\n", faults.len() - MOST_FAULTS));
    }
    text
}

fn render_one(fault: &Fault, source: &str, path: &str, renderer: &Renderer) -> String {
    let (line, column) = line_and_column(source, fault.start);
    let (window, offset) = window(source, fault.start, fault.end);
    let span = fault.start - offset..fault.end.min(offset + window.len()) - offset;
    let level = match fault.severity {
        Severity::Fault => Level::ERROR,
        Severity::Warning => Level::WARNING,
    };
    let mut annotation = AnnotationKind::Primary.span(span);
    if !fault.label.is_empty() {
        annotation = annotation.label(fault.label.as_str());
    }
    let snippet = Snippet::source(window).line_start(line).annotation(annotation);
    let title = level.primary_title(fault.message.as_str()).id(fault.code);
    // A window cut out of a long line would count its own columns: there the place is said by itself.
    let is_cut = offset != line_start(source, fault.start);
    let mut group = if is_cut { title.element(Origin::path(path).line(line).char_column(column)).element(snippet) } else { title.element(snippet.path(path)) };
    if !fault.rule.is_empty() {
        group = group.element(Level::NOTE.with_name("rule").message(fault.rule.as_str()));
    }
    if !fault.remedy.is_empty() {
        group = group.element(Level::HELP.message(fault.remedy.as_str()));
    }
    renderer.render(&[group])
}

/// Where the line that holds a byte begins.
fn line_start(source: &str, byte: usize) -> usize {
    source[..floor_boundary(source, byte)].rfind('\n').map_or(0, |n| n + 1)
}

/// The line that holds `start`, cut to a window round the fault where it is very long.
fn window(source: &str, start: usize, end: usize) -> (&str, usize) {
    const REACH: usize = 160;
    let mut from = line_start(source, start);
    let rest = &source[floor_boundary(source, start)..];
    let mut to = start.min(source.len()) + rest.find('\n').unwrap_or(rest.len());
    if to > 0 && source[..floor_boundary(source, to)].ends_with('\r') {
        to -= 1;
    }
    if to.saturating_sub(from) > 2 * REACH {
        from = floor_boundary(source, from.max(start.saturating_sub(REACH)));
        to = floor_boundary(source, to.min(end.min(start + REACH) + REACH));
    }
    let from = from.min(source.len());
    let to = floor_boundary(source, to.clamp(from, source.len()));
    (&source[from..to.max(from)], from)
}

fn floor_boundary(source: &str, byte: usize) -> usize {
    let mut byte = byte.min(source.len());
    while !source.is_char_boundary(byte) {
        byte -= 1;
    }
    byte
}

/// What a user wrote, shortened for a message.
pub fn shown(text: &str) -> String {
    const MOST: usize = 40;
    if text.chars().count() <= MOST { text.to_string() } else { format!("{}...", text.chars().take(MOST).collect::<String>()) }
}
