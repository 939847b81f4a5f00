//! Detailing rules worked by hand for invented slabs: every figure below comes from the rules' text, none from the program.

use serde_json::Value;
use slabwright::issue_set::{IssueSet, detail};
use slabwright::place::BarType;
use slabwright::report;

const HEAD: &str =
    "schema = 1\n[job]\nnumber = \"X2\"\nproject = \"Invented\"\ntitle = \"Invented\"\ndrawing = \"X2-001\"\nrevision = \"P01\"\ndate = 2026-02-03\n";
const C32: &str = "[basis]\nconcrete = \"C32/40\"\nsteel = \"B500B\"\n";

fn slab(thickness: u32, width: u32, side: u32, arrangement: &str) -> String {
    format!(
        "[[slab]]\nmark = \"S1\"\nthickness = {thickness}\nwidth = {width}\ncover = {{ bottom = 25, top = 25, side = {side} }}\nload = {{ permanent = 6.4, variable = 2.0 }}\n\
         bottom_distribution = \"H10-300\"\ntop_distribution = \"H10-300\"\nedges = {{ near = \"joint\", far = \"joint\" }}\narrangement = \"{arrangement}\"\n"
    )
}

fn support(kind: &str, width: u32, rest: &str) -> String {
    format!("[[slab.support]]\nkind = \"{kind}\"\nwidth = {width}\n{rest}\n")
}

fn span(length: u32, bottom: &str) -> String {
    format!("[[slab.span]]\nlength = {length}\nbottom = \"{bottom}\"\n")
}

fn made(text: &str) -> IssueSet {
    let outcome = detail(text.as_bytes(), &|_: &str| Err("no files here".into()));
    outcome.set.unwrap_or_else(|| panic!("{:?}\n{text}", outcome.faults.iter().map(|f| &f.message).collect::<Vec<_>>()))
}

fn bars<'a>(set: &'a IssueSet, layer: &str) -> Vec<&'a BarType> {
    set.model.slabs[0].bars.iter().filter(|b| b.layer.name() == layer).collect()
}

/// Least and greatest x of a bar's centre line.
fn extent(axis: &[[f64; 3]], k: usize) -> (f64, f64) {
    (axis.iter().map(|p| p[k]).fold(f64::INFINITY, f64::min), axis.iter().map(|p| p[k]).fold(f64::NEG_INFINITY, f64::max))
}

/// Two spans of 4100 on a wall of 215, a beam of 250 and a wall of 165; H12-175 in B1 and over the beam; width 6800, side cover 30.
fn two_spans() -> IssueSet {
    let parts = [
        support("wall", 215, "top = \"H10-300\""),
        span(4100, "H12-175"),
        support("beam", 250, "top = \"H12-175\""),
        span(4100, "H12-175"),
        support("wall", 165, "top = \"H10-300\""),
    ];
    made(&format!("{HEAD}{C32}{}{}", slab(185, 6800, 30, "auto"), parts.concat()))
}

#[test]
fn d1_to_d3_stations_of_two_spans() {
    let stations = two_spans().model.slabs[0].stations.clone();
    assert_eq!((stations.start, stations.end), (-107.5, 8282.5));
    let faces: Vec<[f64; 3]> = stations.supports.iter().map(|s| [s.left_face, s.centre, s.right_face]).collect();
    assert_eq!(faces, [[-107.5, 0.0, 107.5], [3975.0, 4100.0, 4225.0], [8117.5, 8200.0, 8282.5]]);
    // a = min(185/2, t/2): 92.5, 92.5 on both sides of the beam, 82.5 at the wall of 165.
    let spans: Vec<[f64; 4]> = stations.spans.iter().map(|s| [s.clear, s.effective, s.left_line, s.right_line]).collect();
    assert_eq!(spans, [[3867.5, 4052.5, 15.0, 4067.5], [3892.5, 4067.5, 4132.5, 8200.0]]);
}

#[test]
fn d11_d14_d16_d18_d19_bottom_bars_of_two_spans() {
    let set = two_spans();
    // Stops from the grid, down to 25: 15 + 0.08 x 4052.5 = 339.2; 32.5 + 0.20 x 4052.5 = 843; 846; 0 + 0.08 x 4067.5 = 325.4.
    // Lap of H12 in C32/40, cd = 25: 0.8375 x 1.5 x 410.8 = 516.1, half of it up to 25: 275.
    // Long bars: -77.5 to 4375, up to 4475, surplus at the lap; 3825 to 8252.5, up to 4450, surplus at the lap.
    // n = ceil(6728/175) + 1 = 40; long ones floor(40/2) + 1 = 21, as 20 at 350 and one at 6764; the last gap of 78 stands.
    let seen: Vec<(i32, u32, Vec<(u32, [f64; 3], Vec<[f64; 3]>)>)> =
        bars(&set, "B1").iter().map(|b| (b.length, b.each(), b.sets.iter().map(|s| (s.count, s.step, s.axis.clone())).collect())).collect();
    let line = |x: [f64; 2], y: f64| vec![[x[0], y, 31.0], [x[1], y, 31.0]];
    let step = [0.0, 350.0, 0.0];
    let wanted = vec![
        (4475, 21, vec![(20, step, line([-77.5, 4397.5], 36.0)), (1, [0.0; 3], line([-77.5, 4397.5], 6764.0))]),
        (2950, 38, vec![(19, step, line([325.0, 3275.0], 211.0)), (19, step, line([4925.0, 7875.0], 223.0))]),
        // In contact beside the first span's: 12 towards the far edge, the last one the other way.
        (4450, 21, vec![(20, step, line([3802.5, 8252.5], 48.0)), (1, [0.0; 3], line([3802.5, 8252.5], 6752.0))]),
    ];
    assert_eq!(seen, wanted);
}

#[test]
fn d3_d11_d14_top_bars_over_a_beam() {
    let set = two_spans();
    // Near: max(32.5 + 0.15 x 4067.5, 125 + 45 x 12) = 665, up to 675. Far: 32.5 + 0.30 x 4067.5 = 1252.75, up to 1275. Turned in turn: one mark.
    let t1 = bars(&set, "T1");
    assert_eq!(t1.iter().map(|b| (b.length, b.each())).collect::<Vec<_>>(), [(1950, 40)]);
    let mut extents: Vec<(f64, f64)> = t1[0].placements().map(|a| extent(&a, 0)).collect();
    extents.sort_by(|a, b| a.0.total_cmp(&b.0));
    assert_eq!((extents[0], extents[19], extents[20], extents[39]), ((2825.0, 4775.0), (2825.0, 4775.0), (3425.0, 5375.0), (3425.0, 5375.0)));
    assert!(t1[0].placements().all(|a| a[0][2] == 154.0));
}

#[test]
fn d8_d17_closing_bars_of_two_spans() {
    let set = two_spans();
    // Depth 185 - 50, less 10 for a bent bar: 125, over the 100 of H10. Legs back 2h = 370. Top legs from the outer face:
    // 77.5 + up25(107.5 + 0.2 x 4052.5) = 1002.5, up to 1005; 52.5 + up25(82.5 + 0.2 x 4067.5) = 952.5, up to 955.
    // Cut lengths A + B + C - r - 2d, up to 25: 1460 and 1410. n = ceil(6730/300) + 1 = 24.
    let closing: Vec<&BarType> = bars(&set, "E").into_iter().filter(|b| b.role.name() == "end-top").collect();
    let seen: Vec<(Vec<i32>, i32, u32, &str)> = closing.iter().map(|b| (b.dims.values().copied().collect(), b.length, b.each(), b.shape)).collect();
    assert_eq!(seen, [(vec![1005, 125, 370], 1475, 24, "21"), (vec![955, 125, 370], 1425, 24, "21")]);
}

#[test]
fn d6_d19_distribution_of_two_spans() {
    let set = two_spans();
    let (b2, t2) = (bars(&set, "B2"), bars(&set, "T2"));
    // 13 in each span, first bars (3867.5 - 3600)/2 and (3892.5 - 3600)/2 from the faces; 6800 - 60 - 40 long; on B1: 25 + 12 + 5.
    let first: Vec<(u32, f64, f64)> = b2[0].sets.iter().map(|s| (s.count, s.axis[0][0], s.axis[0][2])).collect();
    assert_eq!((b2.len(), b2[0].length, first), (1, 6700, vec![(13, 241.25, 42.0), (13, 4371.25, 42.0)]));
    assert_eq!(extent(&b2[0].sets[0].axis, 1), (50.0, 6750.0));
    // Over the beam ceil((2550 - 100)/300) + 1 = 10 from 2875; a last gap of 50 is shared: 4975, 5150, 5325. At the ends ceil(905/300) + 1 and ceil(855/300) + 1.
    let over_beam: Vec<f64> = t2[0].placements().map(|a| a[0][0]).filter(|x| *x > 2800.0 && *x < 5400.0).collect();
    assert_eq!(over_beam, [2875.0, 3175.0, 3475.0, 3775.0, 4075.0, 4375.0, 4675.0, 4975.0, 5150.0, 5325.0]);
    assert_eq!((t2.len(), t2[0].each()), (1, 5 + 10 + 4));
    assert!(t2[0].placements().filter(|a| a[0][0] > 2800.0 && a[0][0] < 5400.0).all(|a| a[0][2] == 154.0 - 6.0 - 5.0));
}

#[test]
fn d21_marks_of_two_spans() {
    let seen: Vec<(String, &str)> = two_spans().model.slabs[0].bars.iter().map(|b| (b.mark.clone(), b.layer.name())).collect();
    let wanted = ["B1", "B1", "B1", "B2", "T1", "T2", "E", "E", "E"].iter().enumerate().map(|(i, layer)| (format!("{:02}", i + 1), *layer));
    assert_eq!(seen, wanted.collect::<Vec<_>>());
}

#[test]
fn d7_bottom_bars_bend_up_on_a_short_bearing() {
    // 100 - 30 = 70 past the face, 120 = 10 sizes needed. P = 125, room 135 - 10 = 125. A = 4375 - 37.5, up to 4340; L = A + B - r/2 - d = 4441, up to 4450.
    let parts = [
        support("masonry", 215, "bearing = 100\ntop = \"H10-300\""),
        span(4100, "H12-175"),
        support("beam", 250, "top = \"H12-175\""),
        span(4100, "H12-175"),
        support("wall", 165, "top = \"H10-300\""),
    ];
    let set = made(&format!("{HEAD}{C32}{}{}", slab(185, 6800, 30, "auto"), parts.concat()));
    let long = bars(&set, "B1")[0];
    assert_eq!((long.shape, long.dims[&'A'], long.dims[&'B'], long.length, long.each()), ("11", 4340, 125, 4450, 21));
}

#[test]
fn d13_bars_that_would_be_too_far_apart_or_too_few_all_run_on() {
    // 2 x 225 over min(3h, 400); H10-400 gives 196 mm2/m, under 0.26 x 3.02/500 x 1000 x 220 = 346.
    for (thickness, bottom, word) in [(185, "H12-225", "400"), (250, "H10-200", "As,min")] {
        let parts = [support("wall", 200, "top = \"H12-150\""), span(4000, bottom), support("wall", 200, "top = \"H12-150\"")];
        let set = made(&format!("{HEAD}{C32}{}{}", slab(thickness, 4000, 25, "auto"), parts.concat()));
        let b1 = bars(&set, "B1");
        let (size, spacing) = if bottom == "H12-225" { (12.0, 225.0) } else { (10.0, 200.0) };
        let n = f64::ceil((4000.0 - 50.0 - size) / spacing) as u32 + 1;
        assert_eq!(b1.iter().map(|b| b.each()).collect::<Vec<_>>(), [n]);
        let reasons = &set.model.slabs[0].reasons;
        let why = reasons.iter().find(|r| r.address == "S1/span:1/B1" && r.cite.clause == "D13").map(|r| r.text.clone());
        assert!(why.as_ref().is_some_and(|w| w.contains(word)), "{why:?}");
    }
}

#[test]
fn d14a_top_bars_run_through_over_a_short_span() {
    // Reach 25 + 0.30 x 2950 = 910, up to 925, from either side of a span of 1500: one set of the larger size at the closer spacing.
    let top = |bars: &str| support("wall", 200, &format!("top = \"{bars}\""));
    let parts = [top("H10-200"), span(3000, "H12-200"), top("H12-200"), span(1500, "H12-200"), top("H10-150"), span(3000, "H12-200"), top("H10-200")];
    let set = made(&format!("{HEAD}{C32}{}{}", slab(150, 4000, 25, "full"), parts.concat()));
    let t1 = bars(&set, "T1");
    assert_eq!(t1.iter().map(|b| (b.size, b.length, b.each(), extent(&b.sets[0].axis, 0))).collect::<Vec<_>>(), [(12, 3350, 28, (2075.0, 5425.0))]);
}

#[test]
fn d17_deductions_between_two_faces() {
    // Room 3200 - 50. Straight: 40 off and down to 25, centred. Bent: 10 off 100 by the table.
    for (deduction, length, low, depth) in [("\"bs8110-3.24\"", 3100, -50.0, 90), ("\"none\"", 3150, -75.0, 100), ("15", 3100, -50.0, 85)] {
        let parts = [support("wall", 200, "top = \"H10-200\""), span(3000, "H12-200"), support("wall", 200, "top = \"H10-200\"")];
        let set = made(&format!("{HEAD}{C32}deduction = {deduction}\n{}{}", slab(150, 4000, 25, "full"), parts.concat()));
        let b1 = bars(&set, "B1")[0];
        assert_eq!((b1.length, extent(&b1.sets[0].axis, 0).0), (length, low), "{deduction}");
        let closing = bars(&set, "E").into_iter().find(|b| b.role.name() == "end-top").unwrap();
        assert_eq!(closing.dims[&'B'], depth, "{deduction}");
    }
}

#[test]
fn d18_cut_bars_lap_at_two_sections_and_distribution_at_one() {
    let parts = [support("wall", 200, "top = \"H12-200\""), span(9000, "H12-200"), support("wall", 200, "top = \"H12-200\"")];
    let set = made(&format!("{HEAD}{C32}longest_bar = 6000\n{}{}", slab(250, 9000, 25, "full"), parts.concat()));
    // H12 in C32/40, cd = 25: l0 = 516.1; lap centres at least 1.3 l0 = 670.9 apart. H10: l0 = 398.0.
    let (lap, lap_10) = (516.1, 398.0);
    let pieces: Vec<[f64; 3]> =
        bars(&set, "B1").iter().flat_map(|b| b.placements().map(|a| [extent(&a, 0).0, extent(&a, 0).1, a[0][1]]).collect::<Vec<_>>()).collect();
    assert!(pieces.iter().all(|p| p[1] - p[0] <= 6000.0));
    let (lefts, rights): (Vec<[f64; 3]>, Vec<[f64; 3]>) = pieces.iter().partition(|p| p[0] < 0.0);
    // 45 lines, n = ceil(8938/200) + 1 = 46; each has one piece from either end.
    assert_eq!((lefts.len(), rights.len()), (46, 46));
    let centres: Vec<f64> = lefts
        .iter()
        .map(|l| {
            let right = rights.iter().find(|r| ((r[2] - l[2]).abs() - 24.0).abs() < 0.01).unwrap();
            assert!(l[1] - right[0] >= lap, "{l:?} {right:?}");
            (l[1] + right[0]) / 2.0
        })
        .collect();
    let (first, last) = (centres.iter().copied().fold(f64::INFINITY, f64::min), centres.iter().copied().fold(f64::NEG_INFINITY, f64::max));
    assert!(last - first >= 1.3 * lap && centres.iter().all(|c| (c - first).abs() < 1.0 || (c - last).abs() < 1.0), "{first} {last}");
    // Distribution: (8910 + 398)/2 up to 25, both pieces alike.
    let b2 = bars(&set, "B2");
    assert_eq!(b2.iter().map(|b| b.length).collect::<Vec<_>>(), [4675]);
    let ends: Vec<(f64, f64)> = b2[0].placements().map(|a| extent(&a, 1)).collect();
    let (near, far): (Vec<_>, Vec<_>) = ends.into_iter().partition(|e| e.0 < 100.0);
    assert!(!near.is_empty() && near.len() == far.len() && near[0].1 - far[0].0 >= lap_10);
}

#[test]
fn the_model_has_the_names_of_its_description() {
    let set = two_spans();
    let model: Value = serde_json::from_str(&report::model::json(&set.job, &set.model, &set.checks)).unwrap();
    let slab = &model["slabs"][0];
    let named = [
        (&model, "schema job slabs steel"),
        (&model["job"], "number drawing revision"),
        (slab, "mark members thickness_mm width_mm start_mm end_mm supports spans bars checks"),
        (&slab["supports"][0], "grid left_face_mm centre_mm right_face_mm"),
        (&slab["spans"][0], "clear_mm effective_mm left_line_mm right_line_mm"),
        (&slab["bars"][0], "mark letter size_mm shape dims_mm length_mm each total mass_kg layer role sets"),
        (&slab["bars"][0]["sets"][0], "count step_mm spacing_mm axis_mm"),
        (&slab["checks"][0], "code result at value limit unit clause"),
        (&model["steel"], "total_kg by_size_kg"),
    ];
    for (value, names) in named {
        for name in names.split(' ') {
            assert!(value.get(name).is_some(), "{name} is missing in {value}");
        }
    }
    assert_eq!((&model["schema"], &slab["bars"][0]["mark"], &slab["bars"][0]["role"]), (&"slabwright/model/1".into(), &"01".into(), &"span-bottom".into()));
    // 21 x 4.475 m x 0.888 kg/m, to two decimals.
    assert_eq!(slab["bars"][0]["mass_kg"], 83.45);
    assert_eq!(
        slab["bars"][0]["sets"][1],
        serde_json::json!({ "count": 1, "step_mm": [0, 0, 0], "spacing_mm": 175, "axis_mm": [[-77.5, 6764, 31], [4397.5, 6764, 31]], "zone": "S1/span:1/B1" })
    );
}

#[test]
fn the_csv_files_have_the_headings_of_their_description() {
    let set = two_spans();
    let head = |table| String::from_utf8(slabwright::write::csv::write(&table).unwrap()).unwrap().lines().next().unwrap().to_string();
    assert_eq!(head(report::steel::table(&set.model)), "slab,layer,size_mm,class,bars,length_m,mass_kg,laps_kg");
    let schedule = "Member,Bar mark,Type and size,No. of members,No. of bars in each,Total no.,Length of each bar (mm),Shape code,A,B,C,D,E/R (mm),Rev letter";
    assert_eq!(head(report::schedule::table(&set.model)), schedule);
}
