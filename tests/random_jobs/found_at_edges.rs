//! Faults of the planner at slab ends, edges and corners that random jobs showed, each reduced to its smallest job.

use super::small::{H12_200, SHORT, assert_passes, small};

#[test]
fn edge_bars_stand_inside_bent_up_bottom_bars() {
    let mut job = small(250, &[SHORT]);
    job.slab().edges[1] = "free";
    job.slab().supports[1].bearing = Some(98);
    assert_passes(job.tops(&[Some(H12_200), None]), &["clash"]);
}

#[test]
fn edge_bars_stand_inside_closing_bars() {
    let mut job = small(250, &[(3000, H12_200)]);
    job.slab().edges[0] = "free";
    assert_passes(job.tops(&[Some((16, 150)), Some(H12_200)]), &["clash"]);
}

#[test]
fn bars_held_at_a_corner_pass_one_another() {
    let mut job = small(150, &[(3000, H12_200)]);
    job.deduction = "\"none\"".into();
    job.slab().edges[0] = "free";
    assert_passes(&job, &["clash"]);
}

#[test]
fn edge_bars_of_both_edges_pass_one_another_in_a_narrow_slab() {
    let mut job = small(300, &[(6000, H12_200)]);
    job.slab().edges = ["free", "beam"];
    job.slab().edge_width = [0, 210];
    assert_passes(job.tops(&[None, Some(H12_200)]), &["clash"]);
}

#[test]
fn a_held_bar_lies_on_b2() {
    let mut job = small(200, &[(6000, H12_200), (6000, H12_200)]);
    job.longest = 6000;
    job.slab().edges[1] = "beam";
    job.slab().edge_width[1] = 210;
    job.slab().b2 = (16, 275);
    assert_passes(job.tops(&[None, Some(H12_200), Some(H12_200)]), &["clash"]);
}

#[test]
fn closing_bars_of_their_own_lie_beside_the_top_bars() {
    let mut job = small(150, &[(1500, (20, 250))]);
    job.slab().supports[0].end_bar = Some("straight");
    assert_passes(&job, &["clash"]);
}

#[test]
fn a_leg_down_misses_straight_bottom_bars() {
    let mut job = small(200, &[(2000, H12_200)]);
    job.deduction = "0".into();
    job.slab().cover = [40, 35, 25];
    job.slab().supports[1].end_bar = Some("l-bar");
    assert_passes(job.tops(&[None, Some(H12_200)]), &["clash"]);
}

#[test]
fn a_leg_up_misses_straight_top_bars() {
    let mut job = small(200, &[(1500, (10, 200))]);
    job.deduction = "0".into();
    job.slab().cover = [40, 40, 35];
    job.slab().supports[1].bearing = Some(136);
    job.slab().supports[1].end_bar = Some("straight");
    assert_passes(job.tops(&[None, None]), &["clash"]);
}

#[test]
fn a_held_bar_misses_bent_up_legs() {
    let mut job = small(285, &[(2000, (20, 250))]);
    job.deduction = "25".into();
    assert_passes(job.tops(&[None, None]), &["clash"]);
}

#[test]
fn corner_bars_are_added_once() {
    let mut job = small(200, &[(6000, H12_200)]);
    job.slab().edges = ["wall", "wall"];
    job.slab().edge_width = [140, 140];
    assert_passes(job.tops(&[None, Some((8, 196))]), &["clash", "gap-least"]);
}

#[test]
fn b2_over_a_wide_support_keeps_its_gaps() {
    let mut job = small(150, &[SHORT, SHORT]);
    job.slab().b2 = (12, 225);
    job.slab().supports[0].width = 210;
    job.slab().supports[1].width = 500;
    assert_passes(job.tops(&[None, Some(H12_200), Some(H12_200)]), &["gap-least"]);
}

#[test]
fn t2_moved_off_a_held_bar_keeps_its_gaps() {
    let mut job = small(300, &[(6550, H12_200)]);
    job.slab().supports[1].width = 425;
    job.slab().supports[1].bearing = Some(384);
    assert_passes(job.tops(&[None, Some((25, 250))]), &["gap-least"]);
}
