//! The job file's head and basis, and the one way in.

use super::*;
use crate::diagnose::{Fault, shown};
use crate::read::{Section, nearest, parse, text};
use crate::tables::{Allowance, font, tables};
use itertools::Itertools;
use std::cell::RefCell;

/// Gives the text of a file named in the job (a rule sheet of curtailment), or why it cannot.
pub type Loader<'a> = &'a dyn Fn(&str) -> Result<String, String>;

/// A job file as read: the job where it has no faults, every fault, and the text the places count in.
pub struct Reading {
    pub job: Option<Job>,
    pub faults: Vec<Fault>,
    pub source: String,
}

/// Reads and validates a job file.
pub fn read(bytes: &[u8], load: Loader) -> Reading {
    let source = match text(bytes) {
        Ok(source) => source,
        Err(fault) => return Reading { job: None, faults: vec![*fault], source: String::new() },
    };
    let faults = RefCell::new(Vec::new());
    let job = {
        let table = parse(&source, &faults);
        let broken = !faults.borrow().is_empty();
        let root = Section::root(&table, &faults);
        let job = job(&root, load);
        if broken {
            keep_what_is_sure(&mut faults.borrow_mut(), &source);
        }
        job
    };
    let faults = crate::diagnose::sorted(faults.into_inner());
    let job = if faults.is_empty() { job } else { None };
    Reading { job, faults, source }
}

/// After a syntax fault parts of the file were passed over: what seems missing may not be, and what stands on the same line is the
/// same slip told again.
fn keep_what_is_sure(faults: &mut Vec<Fault>, source: &str) {
    let line = |at: usize| crate::diagnose::line_and_column(source, at).0;
    let broken: Vec<usize> = faults.iter().filter(|f| f.code == "syntax").map(|f| line(f.start)).collect();
    let unsure = ["missing-key", "support-count", "missing-top", "no-slab", "no-span", "wrong-type"];
    faults.retain(|f| f.code == "syntax" || !unsure.contains(&f.code) && !broken.contains(&line(f.start)));
    // One slip may be told twice on its line: the first is enough.
    let mut last = 0;
    faults.sort_by_key(|f| f.start);
    faults.retain(|f| {
        let here = line(f.start);
        let again = f.code == "syntax" && here == last;
        if f.code == "syntax" {
            last = here;
        }
        !again
    });
}

fn job(root: &Section, load: Loader) -> Option<Job> {
    root.need("schema", "1");
    if let Some(schema) = root.number("schema", "", 0.0, 1e9)
        && schema.value != 1.0
    {
        root.fault(
            Fault::new("schema", root.span_of("schema"), format!("schema {} is not known", schema.value))
                .rule("this program reads schema 1")
                .remedy("write schema = 1, or use a program of that schema"),
        );
    }
    for (key, table) in [("job", "[job]"), ("basis", "[basis]")] {
        root.need(key, table);
    }
    let head = head(&root.section("job"));
    let basis = basis(&root.section("basis"), load);
    let sections = root.sections("slab");
    if !root.has("slab") {
        root.fault(
            Fault::new("no-slab", root.span.clone(), "the file has no slab")
                .rule("a job has at least one [[slab]]")
                .remedy("add a [[slab]] with its supports and spans"),
        );
    }
    if sections.len() > MOST_SLABS {
        root.fault(
            Fault::new("too-many", sections[MOST_SLABS].span.clone(), format!("{} slabs", sections.len()))
                .rule(format!("a job has at most {MOST_SLABS} slabs; this is a limit of this program"))
                .remedy("split the slabs over several drawings"),
        );
    }
    let letter = bar_letter(&root.section("basis"));
    let aggregate = basis.as_ref().map_or(20.0, |b| b.aggregate.value);
    let slabs: Vec<Option<Slab>> = sections.iter().take(MOST_SLABS).map(|s| slab::slab(s, letter, aggregate)).collect();
    let marks: Vec<(&str, &Section)> = slabs.iter().zip(&sections).filter_map(|(s, at)| s.as_ref().map(|s| (s.mark.as_str(), at))).collect();
    for (i, (mark, at)) in marks.iter().enumerate() {
        if marks[..i].iter().any(|(m, _)| m == mark) {
            at.fault(
                Fault::new("twice", at.span_of("mark"), format!("slab mark {mark:?} is used twice"))
                    .rule("a slab's mark is unique in the file")
                    .remedy("give one of them another mark"),
            );
        }
    }
    root.finish();
    Some(Job { head: head?, basis: basis?, slabs: slabs.into_iter().collect::<Option<Vec<_>>>()? })
}

/// The letter that bars are written with; none where it is itself at fault, so that it is not told again at every bar.
fn bar_letter(basis: &Section) -> Option<&'static str> {
    if !basis.has("bar_letter") {
        return Some("H");
    }
    let wrote = basis.peek("bar_letter")?;
    let steel = basis.peek("steel").and_then(|class| tables().materials.steel.iter().find(|s| s.class == class));
    if steel.is_some_and(|s| !s.letters.iter().any(|l| l == wrote)) {
        return None;
    }
    tables().materials.letters.iter().map(|l| l.letter.as_str()).find(|l| *l == wrote)
}

/// A printed text: not empty where required, no control characters, only letters the drawing's font has.
pub(super) fn printed(section: &Section, key: &'static str, required: bool, most: usize) -> Option<String> {
    let Some(text) = section.text(key, "text") else {
        return if required { None } else { Some(String::new()) };
    };
    let span = section.span_of(key);
    let count = text.value.chars().count();
    if required && text.value.trim().is_empty() {
        section.fault(Fault::new("empty-text", span, format!("`{key}` is empty")).rule(format!("`{key}` is printed and required")).remedy("write it"));
        return None;
    }
    if count > most {
        section.fault(
            Fault::new("text-too-long", span, format!("`{key}` has {count} letters"))
                .rule(format!("`{key}` has at most {most} letters, to fit its field"))
                .remedy("shorten it"),
        );
        return None;
    }
    if let Some(letter) = text.value.chars().find(|c| !font::face().has(*c)) {
        section.fault(
            Fault::new("no-letter", span, format!("`{key}` holds {:?} (U+{:04X})", letter, letter as u32))
                .label("cannot be drawn")
                .rule("the drawing's font has the letters of Latin and Greek, digits and technical signs; no line breaks, no emoji")
                .remedy("write it with those letters"),
        );
        return None;
    }
    Some(text.value)
}

fn head(section: &Section) -> Option<Head> {
    for (key, example) in [("number", "\"K417\""), ("project", "\"...\""), ("title", "\"...\""), ("drawing", "\"K417-201\""), ("revision", "\"P01\"")] {
        section.need(key, example);
    }
    section.need("date", "2026-05-18");
    let number = printed(section, "number", true, 20);
    let project = printed(section, "project", true, 60);
    let title = printed(section, "title", true, 60);
    let drawing = printed(section, "drawing", true, 40);
    let revision = printed(section, "revision", true, 6);
    let optional: Vec<Option<String>> =
        ["client", "site", "drawn_by", "checked_by", "status", "schedule"].into_iter().map(|key| printed(section, key, false, 60)).collect();
    if let Some(text) = &revision
        && !revision_is_sound(text)
    {
        section.fault(
            Fault::new("revision", section.span_of("revision"), format!("revision {text:?}"))
                .rule("a revision is P01, P02 ... while preliminary, C01, C02 ... when contractual")
                .remedy("write a revision such as \"P01\""),
        );
    }
    let date = section.date("date");
    let words: Vec<(&'static str, &'static str)> = [("auto", "auto"), ("A1", "A1"), ("A2", "A2"), ("A3", "A3")].to_vec();
    let sheet = section.choice("sheet", &words).map(|s| s.value).filter(|s| *s != "auto").map(str::to_string);
    let scale = match section.text_or_number("scale", "", 1e6, "auto") {
        Some(Err(n)) if tables().sheets.scales.contains(&(n.value as u32)) && n.value.fract() == 0.0 => Some(n.value as u32),
        Some(Ok(word)) if word.value == "auto" => None,
        None => None,
        Some(_) => {
            let listed = tables().sheets.scales.iter().join(", ");
            section.fault(
                Fault::new("unknown-word", section.span_of("scale"), "this scale is not known")
                    .rule(format!("`scale` is \"auto\" or one of {listed}"))
                    .remedy("write \"auto\" to let the sheet choose"),
            );
            None
        }
    };
    section.finish();
    let [client, site, drawn_by, checked_by, status, schedule] = <[Option<String>; 6]>::try_from(optional).ok()?;
    Some(Head {
        number: number?,
        project: project?,
        title: title?,
        drawing: drawing?,
        revision: revision?,
        date: date?,
        client: client?,
        site: site?,
        drawn_by: drawn_by?,
        checked_by: checked_by?,
        status: status?,
        sheet,
        scale,
        schedule: schedule?,
    })
}

fn revision_is_sound(text: &str) -> bool {
    let digits = text.strip_prefix(['P', 'C']).unwrap_or("");
    digits.len() == 2 && digits.chars().all(|c| c.is_ascii_digit()) && digits != "00"
}

fn basis(section: &Section, load: Loader) -> Option<Basis> {
    section.need("concrete", "\"C32/40\"");
    section.need("steel", "\"B500B\"");
    let t = tables();
    let classes: Vec<(&'static str, &'static crate::tables::Concrete)> = t.materials.concrete.iter().map(|c| (c.class.as_str(), c)).collect();
    let concrete = section.choice("concrete", &classes);
    let steels: Vec<(&'static str, &'static crate::tables::Steel)> = t.materials.steel.iter().map(|s| (s.class.as_str(), s)).collect();
    let steel = section.choice("steel", &steels);
    let letters: Vec<(&'static str, &'static str)> = t.materials.letters.iter().map(|l| (l.letter.as_str(), l.letter.as_str())).collect();
    let bar_letter = if section.has("bar_letter") { section.choice("bar_letter", &letters)?.value } else { "H" };
    if let Some(steel) = &steel
        && !steel.value.letters.iter().any(|l| l == bar_letter)
    {
        section.fault(
            Fault::new("steel-letter", section.span_of("bar_letter"), format!("letter {bar_letter:?} does not stand for steel {}", steel.value.class))
                .rule(format!("{}: letters {} (BS 8666:2005 Table 1)", steel.value.class, steel.value.letters.join(", ")))
                .remedy("change the letter or the steel class"),
        );
    }
    let or = |value: Option<At<f64>>, default: f64, key: &'static str| if section.has(key) { value } else { Some(At::default(default)) };
    let aggregate = or(section.number("aggregate", "mm", 4.0, 40.0), 20.0, "aggregate");
    let exposure = printed(section, "exposure", false, 30);
    let fire = fire(section);
    let curtailment = curtailment_sheet(section, load);
    let deduction = deduction(section);
    let stock_length = or(section.number("stock_length", "mm", 3000.0, 20000.0), 12000.0, "stock_length");
    let longest = or(section.number("longest_bar", "mm", 3000.0, 20000.0), 12000.0, "longest_bar");
    if let (Some(stock), Some(longest)) = (&stock_length, &longest)
        && longest.value > stock.value
    {
        section.fault(
            Fault::new("longest-bar", section.span_of("longest_bar"), format!("longest_bar {} mm is over stock_length {} mm", longest.value, stock.value))
                .rule("no bar is longer than the stock it is cut from")
                .remedy("raise stock_length or lower longest_bar"),
        );
    }
    let lap_share = if section.has("lap_share") { section.whole("lap_share", "per cent", 1.0, 100.0) } else { Some(At::default(100)) };
    if let Some(share) = &lap_share
        && !t.national.alpha6.iter().any(|a| a.share == share.value)
    {
        section.fault(
            Fault::new("unknown-word", section.span_of("lap_share"), format!("lap_share is {} per cent", share.value))
                .rule("`lap_share` is 25, 33, 50 or 100 per cent (EN 1992-1-1:2004 Table 8.3)")
                .remedy("take the next greater of these"),
        );
    }
    let least_lap = or(section.number("least_lap", "mm", 0.0, 3000.0), 0.0, "least_lap");
    section.finish();
    Some(Basis {
        concrete: concrete?,
        steel: steel?,
        bar_letter: bar_letter.to_string(),
        aggregate: aggregate?,
        exposure: exposure?,
        fire: fire?,
        curtailment: curtailment?,
        deduction: deduction?,
        stock_length: stock_length?,
        longest_bar: longest?,
        lap_share: lap_share?,
        least_lap: least_lap?,
    })
}

fn fire(section: &Section) -> Option<Option<Fire>> {
    let value = printed(section, "fire", false, 20)?;
    if value.is_empty() {
        return Some(None);
    }
    let text = At { value, at: None };
    let known = &tables().national.fire;
    let letters: String = text.value.chars().take_while(char::is_ascii_alphabetic).collect();
    let minutes = text.value[letters.len()..].trim_start().parse::<u32>().ok().filter(|m| known.iter().any(|f| f.minutes == *m));
    match minutes {
        Some(minutes) if ["R", "RE", "REI"].contains(&letters.as_str()) => Some(Some(Fire { text: text.value, minutes })),
        _ => {
            section.fault(
                Fault::new("fire", section.span_of("fire"), format!("fire rating {:?}", text.value.chars().take(30).collect::<String>()))
                    .rule(format!("`fire` is REI and one of {} minutes (EN 1992-1-2:2004 Table 5.8)", known.iter().map(|f| f.minutes).join(", ")))
                    .remedy("write it like \"REI 60\", or leave it out"),
            );
            None
        }
    }
}

fn curtailment_sheet(section: &Section, load: Loader) -> Option<At<curtailment::Sheet>> {
    let embedded = &tables().curtailments;
    let Some(name) = section.text("curtailment", "one-way-50") else {
        return if section.has("curtailment") { None } else { Some(At::default(embedded[0].clone())) };
    };
    if let Some(sheet) = embedded.iter().find(|s| s.name == name.value) {
        return Some(At { value: sheet.clone(), at: name.at });
    }
    let span = section.span_of("curtailment");
    if !name.value.ends_with(".toml") {
        let near = nearest(&name.value, embedded.iter().map(|s| s.name.as_str()));
        section.fault(
            Fault::new("rule-sheet", span, format!("no rule sheet {:?}", shown(&name.value)))
                .label(near.map_or(String::new(), |n| format!("did you mean \"{n}\"?")))
                .rule(format!("`curtailment` is {} or a path that ends with .toml", embedded.iter().map(|s| format!("\"{}\"", s.name)).join(", ")))
                .remedy("`slabwright list rules` lists the sheets"),
        );
        return None;
    }
    let unsound = |why: String| {
        section.fault(
            Fault::new("rule-sheet", span.clone(), format!("rule sheet {:?}: {why}", shown(&name.value)))
                .rule("a rule sheet has the keys of templates/curtailment/one-way-50.toml")
                .remedy("correct the sheet or its path; the path counts from the job file"),
        );
    };
    match load(&name.value).and_then(|text| toml::from_str::<curtailment::Sheet>(&text).map_err(|e| e.message().to_string())) {
        Ok(sheet) if sheet.faults().is_empty() => Some(At { value: sheet, at: name.at }),
        Ok(sheet) => {
            unsound(sheet.faults().join("; "));
            None
        }
        Err(why) => {
            unsound(why);
            None
        }
    }
}

fn deduction(section: &Section) -> Option<Deduction> {
    let listed = &tables().deductions;
    match section.text_or_number("deduction", "mm", 200.0, "bs8110-3.24") {
        None if section.has("deduction") => None,
        None => Some(listed[0].clone()),
        Some(Err(number)) => Some(Deduction {
            name: "number".into(),
            text: format!("bent bars {} mm, straight bars 40 mm, as the job says", crate::base::mm(number.value)),
            source: "slabwright".into(),
            confidence: "own".into(),
            straight: 40.0,
            bent: vec![Allowance { up_to: None, mm: number.value }],
        }),
        Some(Ok(name)) => {
            let found = listed.iter().find(|d| d.name == name.value).cloned();
            if found.is_none() {
                section.fault(
                    Fault::new("deduction", section.span_of("deduction"), format!("no deduction table {:?}", shown(&name.value)))
                        .rule(format!("`deduction` is {} or a number of mm", listed.iter().map(|d| format!("\"{}\"", d.name)).join(", ")))
                        .remedy("write one of these"),
                );
            }
            found
        }
    }
}
