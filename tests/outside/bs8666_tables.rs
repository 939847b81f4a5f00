//! Sizes: BS 8666:2005 Table 2 (radii, formers, end projections) and the least overall dimension over two bends, as suppliers reprint
//! them: Tunley Rod & Bar (BS 8666:2005), Collins Reinforcements, K B Rebar; the last column from Valbruna UK (BS 8666 limitations,
//! page 4) and a sheet of notes to Table 3. Masses: suppliers' tables to BS 4449 (Midland Rapid Reinforcements, Midland Steel Supplies).

use slabwright::tables::tables;

/// Size, least radius r, former M, end projection P (general), overall over two bends x; mm.
/// At 32 mm the two sources of x differ, 416 and 420: the greater, which is also 4d + 2r + 2d up to 5 mm.
const SIZES: [(u32, f64, f64, f64, f64); 10] = [
    (6, 12.0, 24.0, 110.0, 60.0),
    (8, 16.0, 32.0, 115.0, 80.0),
    (10, 20.0, 40.0, 120.0, 100.0),
    (12, 24.0, 48.0, 125.0, 120.0),
    (16, 32.0, 64.0, 130.0, 160.0),
    (20, 70.0, 140.0, 190.0, 260.0),
    (25, 87.0, 175.0, 240.0, 325.0),
    (32, 112.0, 224.0, 305.0, 420.0),
    (40, 140.0, 280.0, 380.0, 520.0),
    (50, 175.0, 350.0, 475.0, 650.0),
];

/// Size, area (mm²), kg/m of two suppliers.
const MASSES: [(u32, f64, [f64; 2]); 10] = [
    (6, 28.3, [0.222, 0.222]),
    (8, 50.3, [0.395, 0.395]),
    (10, 78.5, [0.616, 0.617]),
    (12, 113.1, [0.888, 0.888]),
    (16, 201.1, [1.579, 1.580]),
    (20, 314.2, [2.466, 2.470]),
    (25, 490.9, [3.854, 3.853]),
    (32, 804.2, [6.313, 6.313]),
    (40, 1256.6, [9.864, 9.864]),
    (50, 1963.5, [15.413, 15.413]),
];

#[test]
fn radii_formers_projections_and_two_bend_dimensions_are_the_printed_ones() {
    for (size, radius, former, projection, over_two_bends) in SIZES {
        let bar = tables().bar(size).unwrap();
        assert_eq!((bar.radius, bar.former), (radius, former), "r and M of {size}");
        assert_eq!(bar.projection, projection, "P of {size}");
        assert_eq!(bar.over_two_bends, over_two_bends, "x of {size}");
    }
    assert_eq!(tables().bars.sizes.len(), SIZES.len());
}

/// The columns hang together: M = 2r but for 25 mm, where the table rounds 87.5 down; P is r + d + 5d up to 5 mm from 16 mm on, and
/// under that what bending machines need; x is 4d + 2r + 2d up to 5 mm.
#[test]
fn the_columns_agree_with_each_other() {
    for bar in &tables().bars.sizes {
        let d = f64::from(bar.d);
        assert!((bar.former - 2.0 * bar.radius).abs() <= 1.0, "M of {}", bar.d);
        let straight = ((bar.radius + 6.0 * d) / 5.0).ceil() * 5.0;
        assert!(if bar.d >= 16 { bar.projection == straight } else { bar.projection >= straight }, "P of {}", bar.d);
        let twice = ((6.0 * d + 2.0 * bar.radius) / 5.0).ceil() * 5.0;
        assert_eq!(bar.over_two_bends, twice, "x of {}", bar.d);
        // EN 1992-1-1:2004 Table 8.1N: mandrel 4φ up to 16 mm, 7φ above.
        assert_eq!(bar.former, if bar.d <= 16 { 4.0 * d } else { 7.0 * d }, "former of {}", bar.d);
    }
}

#[test]
fn masses_per_metre_are_within_a_fifth_of_a_per_cent_of_the_suppliers() {
    for (size, area, printed) in MASSES {
        let bar = tables().bar(size).unwrap();
        assert_eq!(bar.area_mm2, area, "area of {size}");
        for printed in printed {
            assert!((bar.mass_kg_m / printed - 1.0).abs() <= 0.002, "{size}: ours {}, printed {printed}", bar.mass_kg_m);
        }
        // 7850 kg/m³ times the exact area, to three decimals.
        let exact = std::f64::consts::PI / 4.0 * f64::from(size * size) * 7850e-6;
        assert!((bar.mass_kg_m - exact).abs() <= 0.0005 + 1e-9, "{size}: {exact}");
    }
}
