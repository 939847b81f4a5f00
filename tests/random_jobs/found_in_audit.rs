//! Sound bars that the second opinion fails, each reduced to its smallest job. A test loses its `ignore` with the mend.

use super::small::{H12_200, assert_passes, small};

#[test]
fn a_cut_bottom_bar_runs_on_and_stops_where_its_outer_pieces_do() {
    let mut job = small(150, &[(8297, H12_200)]);
    job.longest = 6000;
    assert_passes(job.tops(&[None, Some(H12_200)]), &["area-run-on", "bottom-stop", "area-least"]);
}

#[test]
fn a_cut_top_bar_reaches_as_far_as_its_outer_pieces() {
    let mut job = small(150, &[(3099, H12_200), (8525, H12_200)]);
    job.longest = 6000;
    assert_passes(job.tops(&[None, Some(H12_200), None]), &["top-near", "top-far"]);
}

#[test]
fn turned_pairs_of_an_odd_number_run_on_by_half() {
    assert_passes(small(150, &[(1500, H12_200)]).tops(&[None, Some(H12_200)]), &["area-run-on"]);
}

#[test]
fn legs_over_a_held_edge_are_not_those_of_a_free_one() {
    let mut job = small(300, &[(1500, H12_200)]);
    job.slab().edges = ["beam", "free"];
    job.slab().edge_width = [190, 0];
    assert_passes(job.tops(&[None, None]), &["edge-leg"]);
}

#[test]
fn anchorage_at_an_end_counts_the_bars_that_run_on() {
    let mut job = small(250, &[(1500, (10, 75))]);
    job.slab().supports[1].width = 325;
    assert_passes(job.tops(&[None, None]), &["end-anchorage"]);
}

#[test]
fn closing_bars_of_their_own_are_not_the_top_bars() {
    let mut job = small(150, &[(7350, H12_200)]);
    job.concrete = "C25/30";
    job.slab().supports[0].bearing = Some(181);
    job.slab().supports[0].end_bar = Some("straight");
    assert_passes(&job, &["end-top-reach"]);
}

#[test]
fn bars_of_two_spans_that_pass_one_another_are_no_lap() {
    let mut job = small(300, &[(1500, (16, 144)), (1500, (16, 250))]);
    job.tops(&[None, Some(H12_200), None]);
    assert_passes(&job, &["lap-length"]);
}

#[test]
fn bars_of_two_edges_that_pass_one_another_are_no_lap() {
    let mut job = small(300, &[(6000, H12_200)]);
    job.slab().width = 2800;
    job.slab().edges = ["wall", "beam"];
    job.slab().edge_width = [285, 210];
    assert_passes(job.tops(&[None, Some(H12_200)]), &["lap-length"]);
}

#[test]
fn top_bars_that_run_to_the_slab_end_reach_far_enough() {
    let job = small(150, &[(1500, H12_200), (6000, H12_200)]);
    assert_passes(&job, &["top-far"]);
}

#[test]
fn top_legs_lowered_by_the_deduction_count() {
    let mut job = small(135, &[(1500, H12_200)]);
    job.deduction = "25".into();
    job.slab().cover = [20, 40, 30];
    assert_passes(job.tops(&[None, Some(H12_200)]), &["end-top-area"]);
}
