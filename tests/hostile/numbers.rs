//! Numbers at the ends of what can be written, at every place where a number stands.

use super::{Answer, MILL, bounded};

/// A job with every key that takes a number.
fn full() -> String {
    MILL.replacen("exposure ", "aggregate = 20\nstock_length = 12000\nlongest_bar = 12000\nlap_share = 100\nleast_lap = 0\ndeduction = 10\nexposure ", 1)
        .replacen("level ", "members = 1\nedges = { near = \"wall\", far = \"free\" }\nedge_width = { near = 100, far = 0 }\nlevel ", 1)
        .replacen("date ", "scale = 50\ndate ", 1)
        .replacen("required = 362", "required = 362\nmoment = 11.5\nshear = 17.5", 1)
        .replacen("required = 498", "required = 498\nmoment = -14.5\nshear = 21.5", 1)
}

/// Places of the numbers of `source` that stand outside quotes and comments and are not part of a date.
fn numbers(source: &str) -> Vec<std::ops::Range<usize>> {
    let mut found = Vec::new();
    let mut start = 0;
    for line in source.split_inclusive('\n') {
        let code = line.split('#').next().unwrap();
        let mut quoted = false;
        let mut from = None;
        for (at, letter) in code.char_indices() {
            quoted ^= letter == '"';
            let digit = letter.is_ascii_digit() || letter == '.' || letter == '-' && from.is_none();
            match (from, digit && !quoted) {
                (None, true) => from = Some(at),
                (Some(first), false) => {
                    found.push(start + first..start + at);
                    from = None;
                }
                _ => {}
            }
        }
        start += line.len();
    }
    found.retain(|r| source[..r.start].ends_with("= ") && !source[r.end..].starts_with('-'));
    found
}

fn with(source: &str, place: &std::ops::Range<usize>, value: &str) -> Vec<u8> {
    format!("{}{value}{}", &source[..place.start], &source[place.end..]).into()
}

fn line(source: &str, place: &std::ops::Range<usize>) -> usize {
    source[..place.start].matches('\n').count() + 1
}

#[test]
fn what_is_no_number_or_out_of_all_bounds_is_a_fault_at_its_line() {
    let source = full();
    assert!(matches!(bounded("the full job", source.clone().into()), Answer::Job(_)));
    let places = numbers(&source);
    assert_eq!(places.len(), 33, "the numbers of the full job");
    for place in &places {
        for value in [
            "nan",
            "-nan",
            "+inf",
            "-inf",
            "1e300",
            "-1e300",
            "1e400",
            "9223372036854775807",
            "99999999999999999999999999",
            "-1e12",
            "\"5\"",
            "true",
            "[1]",
            "{ a = 1 }",
        ] {
            let what = format!("line {}, {} as {value}", line(&source, place), &source[place.clone()]);
            let Answer::Faults(faults) = bounded(&what, with(&source, place, value)) else { panic!("{what}: was taken for a job") };
            assert!(faults.iter().any(|(_, at)| *at == line(&source, place)), "{what}: {faults:?}");
        }
    }
}

/// These may be sound at some places: only the answer must come.
#[test]
fn numbers_at_the_edge_of_a_range_get_an_answer() {
    let source = full();
    for place in &numbers(&source) {
        for value in ["0", "-0.0", "-1", "1e-300", "0.1", "1", "49.999999", "74.9999999999", "99999"] {
            let what = format!("line {}, {} as {value}", line(&source, place), &source[place.clone()]);
            bounded(&what, with(&source, place, value));
        }
    }
}

#[test]
fn spacings_that_cannot_be_fixed_are_refused() {
    for spacing in ["0", "-200", "--200", "NaN", "nan", "inf", "1e300", "1e999", "0.5", "200.5", "1", "1001", "", " ", "0x64", "2_00", "200mm"] {
        let source = MILL.replacen("H10-175", &format!("H10-{spacing}"), 1);
        let Answer::Faults(faults) = bounded(spacing, source.into()) else { panic!("spacing {spacing:?} was taken") };
        assert!(faults.iter().all(|(code, _)| ["bar-spacing", "bar-form"].contains(code)), "{spacing:?}: {faults:?}");
    }
}

#[test]
fn bars_are_written_in_one_way_only() {
    for bars in ["H10-1.75e2", "H10-+175", "H010-175", "H10-0175", "H10-175.0"] {
        let answer = bounded(bars, MILL.replacen("H10-175", bars, 1).into());
        assert!(matches!(answer, Answer::Faults(_)), "{bars} was taken");
    }
}

#[test]
fn sizes_that_are_not_made_are_refused() {
    for size in ["0", "1", "13", "50", "4294967296", "99999999999999999999"] {
        let Answer::Faults(faults) = bounded(size, MILL.replacen("H10-175", &format!("H{size}-175"), 1).into()) else { panic!("size {size} was taken") };
        assert_eq!(faults.iter().map(|(code, _)| *code).collect::<Vec<_>>(), ["bar-size"], "{size}");
    }
}

#[test]
fn a_number_may_be_written_in_any_way_of_toml() {
    let model = |source: &str| {
        let mut set = slabwright::issue_set::detail(source.as_bytes(), &|_| Err(String::new())).set.unwrap_or_else(|| panic!("refused:\n{source}"));
        set.documents(&["model".into()]).unwrap().remove(0).bytes
    };
    let plain = model(MILL);
    for (old, ways) in [
        ("= 165", ["0xA5", "0o245", "0b1010_0101", "1_65", "1.65e2", "+165", "165.0"]),
        ("= 5300", ["0x14b4", "0o12264", "0b1010010110100", "5_300", "5.3e3", "+5300", "5_300.000"]),
    ] {
        for way in ways {
            let source = MILL.replacen(old, &format!("= {way}"), 1);
            assert_ne!(source, MILL);
            assert!(model(&source) == plain, "{way} gives another model");
        }
    }
}
