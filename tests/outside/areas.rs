//! Areas of bars per metre. Source: π φ²/4 × 1000/s to the nearest mm² (derived; common practice prints the same table);
//! 754 (H12-150), 376 (H12-300), 251 (H12-450), 224 (H10-350) and 393 (H10-200) also stand in Worked Examples to Eurocode 2,
//! volume 1 (The Concrete Centre), 3.3 and 3.4, which cuts 377 to 376.

use slabwright::base::{area_per_metre, bar_area};
use slabwright::tables::tables;

const SIZES: [u32; 6] = [8, 10, 12, 16, 20, 25];

/// Spacing, areas by size, mm²/m.
const AREAS: [(f64, [f64; 6]); 12] = [
    (100.0, [503.0, 785.0, 1131.0, 2011.0, 3142.0, 4909.0]),
    (125.0, [402.0, 628.0, 905.0, 1608.0, 2513.0, 3927.0]),
    (150.0, [335.0, 524.0, 754.0, 1340.0, 2094.0, 3272.0]),
    (175.0, [287.0, 449.0, 646.0, 1149.0, 1795.0, 2805.0]),
    (200.0, [251.0, 393.0, 565.0, 1005.0, 1571.0, 2454.0]),
    (225.0, [223.0, 349.0, 503.0, 894.0, 1396.0, 2182.0]),
    (250.0, [201.0, 314.0, 452.0, 804.0, 1257.0, 1963.0]),
    (275.0, [183.0, 286.0, 411.0, 731.0, 1142.0, 1785.0]),
    (300.0, [168.0, 262.0, 377.0, 670.0, 1047.0, 1636.0]),
    (350.0, [144.0, 224.0, 323.0, 574.0, 898.0, 1402.0]),
    (400.0, [126.0, 196.0, 283.0, 503.0, 785.0, 1227.0]),
    (450.0, [112.0, 175.0, 251.0, 447.0, 698.0, 1091.0]),
];

/// Area of one bar, mm², as suppliers' tables to BS 4449 print it.
const ONE_BAR: [(u32, f64); 10] =
    [(6, 28.3), (8, 50.3), (10, 78.5), (12, 113.1), (16, 201.1), (20, 314.2), (25, 490.9), (32, 804.2), (40, 1256.6), (50, 1963.5)];

#[test]
fn areas_per_metre_are_those_of_the_table() {
    for (spacing, row) in AREAS {
        for (size, printed) in SIZES.into_iter().zip(row) {
            let ours = area_per_metre(size, spacing);
            // The table is rounded to the nearest: half a mm² and no more.
            assert!((ours - printed).abs() <= 0.5, "H{size}-{spacing}: {ours}, printed {printed}");
        }
    }
}

#[test]
fn area_of_one_bar_is_the_printed_one_and_that_of_the_embedded_table() {
    for (size, printed) in ONE_BAR {
        assert!((bar_area(size) - printed).abs() <= 0.051, "{size}: {}", bar_area(size));
        assert_eq!(tables().bar(size).unwrap().area_mm2, printed, "{size}");
    }
    assert_eq!(tables().bars.sizes.len(), ONE_BAR.len());
}
