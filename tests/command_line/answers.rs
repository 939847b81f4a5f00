//! The verbs that answer one question: explain, bend, lap, list.

use super::{MILL, envelope, root, run};

fn explained(address: &str) -> String {
    let run = run(&["explain", MILL, address]);
    assert_eq!((run.status, run.talk.as_str()), (0, ""), "{address}");
    assert!(run.out.starts_with(address), "{}", run.out);
    run.out
}

/// Lines of the sample that an explanation says it comes from must be there, word for word.
fn own_lines(text: &str) -> usize {
    let job = std::fs::read_to_string(root().join(MILL)).unwrap();
    let lines: Vec<&str> = job.lines().collect();
    let quoted = text.lines().filter_map(|l| l.trim().strip_prefix(&format!("from {MILL}:")));
    quoted
        .map(|l| {
            let (number, wrote) = l.split_once(": ").unwrap();
            assert_eq!(lines[number.parse::<usize>().unwrap() - 1].trim(), wrote);
        })
        .count()
}

#[test]
fn a_number_is_explained_with_its_clause_and_the_line_it_comes_from() {
    for (address, said, clause) in [
        ("S1/mark:01", "shape", "D"),
        ("S1/span:1/B1/stop-left", "0.08", "EN 1992-1-1:2004"),
        ("S1/span:1/B1/count", "5300", "D19"),
        ("S1/support:2/T1/reach-right", "0.3", "EN 1992-1-1:2004"),
    ] {
        let text = explained(address);
        assert!(text.contains(said), "{address}: no {said} in\n{text}");
        assert!(text.lines().any(|l| l.trim().starts_with("by ") && l.contains(clause)), "{address}: no clause {clause} in\n{text}");
        assert!(own_lines(&text) > 0, "{address}: no line of the job in\n{text}");
    }
    for (address, said) in
        [("S1/mark:01/A", "mm"), ("S1/mark:01/length", "mm"), ("S1/mark:01/count", "total"), ("S1/mark:01/mass", "kg"), ("steel/total", "kg")]
    {
        let text = explained(address);
        assert!(text.contains(said) && text.contains("by "), "{address}:\n{text}");
    }
}

#[test]
fn a_dimension_is_explained_down_to_the_job() {
    for address in ["S1/mark:01/A", "S1/mark:01/length"] {
        assert!(own_lines(&explained(address)) > 0, "{address}");
    }
}

/// Every mark and dimension of the schedule has an answer, and the answer ends in the number that the schedule gives.
#[test]
fn every_number_of_the_model_is_explained() {
    let dir = tempfile::tempdir().unwrap();
    let job = root().join(MILL);
    assert_eq!(super::run_in(dir.path(), &["detail", job.to_str().unwrap(), "--only", "model"], "").status, 0);
    let model: serde_json::Value = serde_json::from_slice(&std::fs::read(dir.path().join("H208-110-model.json")).unwrap()).unwrap();
    let text = explained("S1");
    let mut asked = 0;
    for bar in model["slabs"][0]["bars"].as_array().unwrap() {
        let mark = bar["mark"].as_str().unwrap();
        let block = |what: &str| {
            let head = format!("S1/mark:{mark}{what}\n");
            let from = text.find(&format!("\n{head}")).unwrap_or_else(|| panic!("{head} is not explained"));
            text[from + head.len() + 1..].split("\n\n").next().unwrap()
        };
        let dims = bar["dims_mm"].as_object().unwrap();
        for (letter, value) in dims {
            assert!(block(&format!("/{letter}")).contains(&value.to_string()), "{mark}/{letter} is {value}");
        }
        assert!(block("/length").contains(&bar["length_mm"].to_string()), "{mark}/length");
        assert!(block("/count").contains(&format!("= {}", bar["total"])), "{mark}/count");
        asked += dims.len();
    }
    assert!(asked > 10);
}

#[test]
fn an_unknown_address_gets_near_ones() {
    for (address, near) in [
        ("S1/mark:1", "S1/mark:0"),
        ("S2/mark:01", "S1/mark:01"),
        ("S1/span:1/B1/stop-lft", "S1/span:1/B1/stop-left"),
        ("steel", "steel/total"),
        ("", "S1/"),
        ("nonsense", "S1/"),
    ] {
        let run = run(&["explain", MILL, address]);
        let found = run.status == 0 && run.out.contains(near);
        let refused = (run.status, run.out.as_str()) == (2, "") && run.talk.contains("nothing is known at") && run.talk.contains(near);
        // A table of addresses, such as `steel`, may be explained as a whole.
        assert!(if address == "steel" { found } else { refused }, "{address:?}: {} {}{}", run.status, run.out, run.talk);
    }
}

#[test]
fn near_addresses_are_named_once_each() {
    let talk = run(&["explain", MILL, "s1/mark:01"]).talk;
    let near: Vec<&str> = talk.lines().skip(1).map(str::trim).collect();
    assert!(!near.is_empty());
    assert_eq!(near.len(), near.iter().collect::<std::collections::BTreeSet<_>>().len(), "{talk}");
}

#[test]
fn one_bar_is_worked_out() {
    // Shape 00 is as long as its one dimension; 1200 mm of size 16 at 1.579 kg/m.
    let run_00 = run(&["bend", "--json", "00", "H16", "A=1200"]);
    let value = envelope("bend", &run_00);
    assert_eq!((run_00.status, &value["length_mm"]), (0, &1200.into()));
    assert!((value["mass_kg"].as_f64().unwrap() - 1.2 * 1.579).abs() < 0.002);
    let text = run(&["bend", "11", "12", "A=800", "B=150"]);
    assert_eq!((text.status, text.talk.as_str()), (0, ""));
    // A + B - d - 0.5r with r = 2d = 24: 926, up to a multiple of 25.
    assert!(text.out.contains("926 mm, cut at 950 mm") && text.out.contains("BS 8666"), "{}", text.out);
    let short = run(&["bend", "11", "12", "A=800", "B=20"]);
    assert_eq!(short.status, 1);
    assert!(short.out.contains("NOT MET"), "{}", short.out);
}

#[test]
fn a_bar_that_cannot_be_asked_for_is_refused() {
    for arguments in [
        &["77", "12", "A=100"][..],
        &["00", "13", "A=100"],
        &["00", "twelve", "A=100"],
        &["00", "12"],
        &["00", "12", "A"],
        &["00", "12", "A=long"],
        &["00", "12", "A=nan"],
        &["00", "12", "A=inf"],
        &["00", "12", "A=1e300"],
        &["00", "12", "A=-100"],
        &["00", "12", "A=0"],
        &["00", "12", "A=100", "A=200"],
        &["00", "12", "A=100", "Q=200"],
        &["00", "12", "AB=100"],
    ] {
        let run = run(&[&["bend"], arguments].concat());
        assert_eq!((run.status, run.out.as_str()), (2, ""), "{arguments:?}");
        assert!(run.talk.len() > 10, "{arguments:?}");
    }
}

#[test]
fn laps_follow_share_and_bond() {
    let lap = |more: &[&str]| {
        let run = run(&[&["lap", "--json", "16", "C30/37"], more].concat());
        assert_eq!(run.status, 0, "{more:?}");
        envelope("lap", &run)["lap_mm"].as_f64().unwrap()
    };
    let plain = lap(&[]);
    assert!(plain > 200.0);
    assert!((lap(&["--share", "25"]) * 1.5 - plain).abs() < 1.0, "a quarter lapped: 1.0 against 1.5");
    assert!((lap(&["--bond", "poor"]) * 0.7 - plain).abs() < 1.0, "poor bond: over 0.7");
    let text = run(&["lap", "16", "C30/37"]);
    assert!(text.out.contains("8.7.3") && text.out.contains("8.4.4"), "{}", text.out);
    for wrong in [
        &["13", "C30/37"][..],
        &["16", "C30"],
        &["16", "C30/37", "--cover", "nan"],
        &["16", "C30/37", "--cover", "0"],
        &["16", "C30/37", "--spacing", "10"],
        &["16", "C30/37", "--share", "0"],
        &["16", "C30/37", "--share", "101"],
    ] {
        let run = run(&[&["lap"], wrong].concat());
        assert_eq!((run.status, run.out.as_str()), (2, ""), "{wrong:?}");
    }
}

#[test]
fn the_five_lists_hold_what_they_say() {
    for (what, held) in [("shapes", "U-bar"), ("rules", "one-way-50"), ("formats", "model.schema.json"), ("checks", "spacing-most"), ("sources", "EN 1992-1-1")]
    {
        let text = run(&["list", what]);
        assert_eq!((text.status, text.talk.as_str()), (0, ""));
        assert!(text.out.contains(held), "{what}:\n{}", text.out);
        let rows = envelope("list", &run(&["list", what, "--json"]))["rows"].as_array().unwrap().len();
        assert_eq!(text.out.lines().count(), rows + 1, "{what}");
    }
}
