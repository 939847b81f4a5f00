//! Hostile job files: whatever the bytes are, an answer in bounded time, and never a panic.

mod mutants;
mod numbers;
mod text;
mod xml;

use slabwright::issue_set::{self, Outcome};
use std::panic::{AssertUnwindSafe, catch_unwind};
use std::sync::mpsc;
use std::time::Duration;

/// Far above what any job takes even on a busy machine without optimisation; a hang goes past it.
const PATIENCE: Duration = Duration::from_secs(120);

const MILL: &str = include_str!("../samples/mill-store.toml");

/// What a file gives: how many bars it comes to, or codes and lines of its faults.
#[derive(Debug, PartialEq)]
enum Answer {
    Job(usize),
    Faults(Vec<(&'static str, usize)>),
}

fn answer(bytes: &[u8]) -> Answer {
    let Outcome { set, faults, source } = issue_set::detail(bytes, &|_| Err("no such sheet".into()));
    match set {
        Some(set) => Answer::Job(set.model.slabs.iter().map(|s| s.bars.len()).sum()),
        None => {
            assert!(!faults.is_empty(), "neither a job nor a fault");
            // The text of the faults is part of the answer: a wrong place would panic here.
            let text = slabwright::diagnose::render(&faults, &source, "job.toml", false);
            assert!(text.contains("job.toml:"));
            Answer::Faults(faults.iter().map(|f| (f.code, slabwright::diagnose::line_and_column(&source, f.start).0)).collect())
        }
    }
}

/// The answer, on a thread with a small stack, so that deep recursion and hangs show.
fn bounded(what: &str, bytes: Vec<u8>) -> Answer {
    let (send, receive) = mpsc::channel();
    std::thread::spawn(move || {
        let _ = send.send(catch_unwind(AssertUnwindSafe(|| answer(&bytes))));
    });
    match receive.recv_timeout(PATIENCE) {
        Ok(Ok(answer)) => answer,
        Ok(Err(_)) => panic!("{what}: the program panicked"),
        Err(_) => panic!("{what}: no answer within {PATIENCE:?}"),
    }
}

fn codes(what: &str, bytes: impl Into<Vec<u8>>) -> Vec<&'static str> {
    match bounded(what, bytes.into()) {
        Answer::Job(_) => panic!("{what}: was taken for a job"),
        Answer::Faults(faults) => faults.into_iter().map(|(code, _)| code).collect(),
    }
}

fn mill() -> Answer {
    let answer = bounded("the sample", MILL.into());
    assert!(matches!(answer, Answer::Job(bars) if bars > 5));
    answer
}

#[test]
fn bytes_that_are_not_utf8_are_told_as_such() {
    let latin: Vec<u8> = MILL.replace("Tamsin", "Tams\u{ef}n").chars().map(|c| c as u8).collect();
    let utf16: Vec<u8> = MILL.encode_utf16().flat_map(u16::to_le_bytes).collect();
    let marked: Vec<u8> = [0xff, 0xfe].into_iter().chain(utf16.iter().copied()).collect();
    for (what, bytes) in [("Latin-1", latin), ("UTF-16 with a mark", marked), ("bytes", vec![0xff; 3000]), ("cut letter", b"# \xe2\x82".to_vec())] {
        assert_eq!(codes(what, bytes), ["encoding"], "{what}");
    }
    assert!(!codes("UTF-16 without a mark", utf16).is_empty());
}

#[test]
fn a_byte_order_mark_changes_nothing() {
    assert_eq!(bounded("mark", format!("\u{feff}{MILL}").into()), mill());
    let faulty = MILL.replace("\"masonry\"", "\"mason\"");
    assert_eq!(bounded("mark", format!("\u{feff}{faulty}").into()), bounded("no mark", faulty.into()));
}

#[test]
fn lines_ended_in_the_manner_of_windows_count_the_same() {
    assert_eq!(bounded("CRLF", MILL.replace('\n', "\r\n").into()), mill());
    for (old, new) in [("\"masonry\"", "\"mason\""), ("H10-175", "H11-175"), ("thickness  = 165", "thickness  = 16"), ("mark ", "marc ")] {
        let faulty = MILL.replacen(old, new, 1);
        let plain = bounded(new, faulty.clone().into());
        assert!(matches!(plain, Answer::Faults(_)), "{new}");
        assert_eq!(bounded(new, faulty.replace('\n', "\r\n").into()), plain, "{new}");
    }
}

#[test]
fn an_open_quote_is_told_once_whatever_ends_the_line() {
    let faulty = MILL.replacen("H208-110\"", "H208-110", 1);
    assert_eq!(codes("LF", faulty.clone()), ["syntax"]);
    assert_eq!(codes("CRLF", faulty.replace('\n', "\r\n")), ["syntax"]);
}

#[test]
fn a_file_too_large_is_told_as_such() {
    assert_eq!(codes("one line of 10 MB", vec![b'a'; 10_000_000]), ["too-large"]);
    assert_eq!(codes("a million supports", format!("{MILL}{}", "[[slab.support]]\n".repeat(1_000_000))), ["too-large"]);
    // A comment fills a sound job to the last byte allowed, and one byte further.
    let fill = |size: usize| format!("{MILL}# {}", "x".repeat(size - MILL.len() - 2));
    assert_eq!(bounded("full", fill(1 << 20).into()), mill());
    assert_eq!(codes("one over", fill((1 << 20) + 1)), ["too-large"]);
}

#[test]
fn as_many_parts_as_the_size_allows_are_told_not_built() {
    assert!(codes("supports", format!("{MILL}{}", "[[slab.support]]\n".repeat(60_000))).contains(&"support-count"));
    assert!(codes("spans", format!("{MILL}{}", "[[slab.span]]\n".repeat(70_000))).contains(&"too-many"));
    assert!(codes("slabs", format!("{MILL}{}", "[[slab]]\n".repeat(100_000))).contains(&"too-many"));
    assert!(codes("keys", format!("{MILL}{}", (0..20_000).map(|i| format!("k{i}=1\n")).collect::<String>())).contains(&"unknown-key"));
    assert!(codes("a long key", format!("{}=1\n{MILL}", "k".repeat(100_000))).contains(&"unknown-key"));
    assert!(codes("a long word", MILL.replacen("\"masonry", &format!("\"{}", "m".repeat(100_000)), 1)).contains(&"unknown-word"));
    assert!(codes("a long number", MILL.replacen("5300", &"5".repeat(900_000), 1)).contains(&"not-a-number"));
}

#[test]
fn a_long_word_is_told_cut_short() {
    for old in ["\"masonry\"", "\"C30/37\"", "\"B500B\""] {
        let source = MILL.replacen(old, &format!("\"{}\"", "m".repeat(100_000)), 1);
        let outcome = issue_set::detail(source.as_bytes(), &|_| Err(String::new()));
        let text = slabwright::diagnose::render(&outcome.faults, &outcome.source, "job.toml", false);
        assert!(text.len() < 5_000, "{old}: {} bytes of talk", text.len());
    }
}

#[test]
fn deep_nesting_ends_in_a_fault() {
    let deep = 100_000;
    for (what, source) in [
        ("[", format!("x = {}", "[".repeat(deep))),
        ("[ ]", format!("x = {}{}", "[".repeat(deep), "]".repeat(deep))),
        ("{", format!("x = {}", "{a=".repeat(deep))),
        ("dotted key", format!("a{} = 1", ".a".repeat(deep))),
        ("dotted heading", format!("[a{}]", ".a".repeat(deep))),
        ("dotted list", format!("[[a{}]]", ".a".repeat(deep))),
        ("headings", (0..400).map(|n| format!("[[a{}]]\n", ".a".repeat(n))).collect()),
    ] {
        assert!(!codes(what, format!("{source}\n{MILL}")).is_empty(), "{what}");
        assert!(!codes(what, format!("{MILL}\n{source}\n")).is_empty(), "{what}");
    }
}

#[test]
fn empty_and_blank_files_are_told_what_they_lack() {
    for (what, source) in [("empty", ""), ("blank", " \n\t\n"), ("mark alone", "\u{feff}"), ("comment", "# nothing"), ("line ends", "\r\n\r\n")] {
        assert_eq!(codes(what, source), ["missing-key", "missing-key", "missing-key", "no-slab"], "{what}");
    }
    assert!(codes("NUL", vec![0; 5000]).contains(&"syntax"));
    assert!(codes("NUL in text", MILL.replacen("Tamsin", "Tam\0sin", 1)).contains(&"syntax"));
    assert!(codes("NUL as an escape", MILL.replacen("Tamsin", "Tam\\u0000sin", 1)).contains(&"no-letter"));
}

#[test]
fn a_key_or_table_given_twice_is_refused() {
    for (old, new) in
        [("mark ", "mark = \"S0\"\nmark "), ("schema = 1", "schema = 1\nschema = 1"), ("[basis]", "[job]\n[basis]"), ("side = 30", "side = 30, side = 31")]
    {
        assert!(codes(new, MILL.replacen(old, new, 1)).contains(&"syntax"), "{new}");
    }
}

#[test]
fn other_ways_of_writing_toml_read_the_same() {
    let dotted = MILL.replacen("cover      = { bottom = 25, top = 25, side = 30 }", "cover.bottom = 25\ncover.top = 25\ncover.side = 30", 1);
    assert_ne!(dotted, MILL);
    assert_eq!(bounded("dotted keys", dotted.into()), mill());
    let (head, slab) = MILL.split_once("[[slab]]").unwrap();
    let quoted = MILL.replacen("mark ", "\"mark\" ", 1).replacen("\"S1\"", "'S1'", 1);
    assert_eq!(bounded("quoted keys", quoted.into()), mill());
    // Lists of tables in one line each: the same slab without a [[heading]].
    let mut parts = slab.split("[[slab.");
    let inline = |part: &str| part.lines().map(str::trim).filter(|l| l.contains('=')).collect::<Vec<_>>().join(", ");
    let own = inline(parts.next().unwrap());
    let (mut supports, mut spans) = (Vec::new(), Vec::new());
    for part in parts {
        let list = if part.starts_with("support") { &mut supports } else { &mut spans };
        list.push(format!("{{ {} }}", inline(part)));
    }
    let list = format!("slab = [ {{ {own}, support = [ {} ], span = [ {} ] }} ]\n", supports.join(", "), spans.join(", "));
    assert_eq!(bounded("inline tables", format!("{list}{head}").into()), mill());
}

/// The widest slab of close bars that the limits allow: the work grows with the bars, not with their cube.
#[test]
fn the_widest_slab_of_close_bars_gets_an_answer() {
    let wide = MILL.replacen("5300", "100_000", 1).replace("H10-175", "H8-40").replace("H12-200", "H8-40");
    assert!(matches!(bounded("the widest slab", wide.into()), Answer::Job(_)));
}
