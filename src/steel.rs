//! Bars as bent: conditions of a shape code, cut length, exact centre line, mass, and the rounded bar itself.
//! Imports `tables` and the primitives; knows no slab and no job.

pub mod bend;
pub mod made;
pub mod walk;

use crate::tables::tables;

/// Mass of one bar, kg: cut length (mm) times the mass per metre of the named table (D22).
pub fn mass(size: u32, length_mm: i32) -> f64 {
    f64::from(length_mm) / 1000.0 * tables().known_bar(size).mass_kg_m
}
