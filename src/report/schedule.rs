//! The bar schedule: one row a mark, in the columns of the national form.

use crate::place::{BarModel, BarType, SlabModel};
use crate::table::Table;

/// Headings of the form, in order.
pub const COLUMNS: [&str; 14] = [
    "Member",
    "Bar mark",
    "Type and size",
    ">No. of members",
    ">No. of bars in each",
    ">Total no.",
    ">Length of each bar (mm)",
    "Shape code",
    ">A",
    ">B",
    ">C",
    ">D",
    ">E/R (mm)",
    "Rev letter",
];

/// The whole schedule, slab by slab, mark by mark.
pub fn table(model: &BarModel) -> Table {
    let mut table = Table::new(&COLUMNS);
    for (slab, bar) in model.bars() {
        table.rows.push(row(slab, bar));
    }
    table
}

/// Cells of one mark.
pub fn row(slab: &SlabModel, bar: &BarType) -> Vec<String> {
    let dim = |letters: &[char]| {
        let value = letters.iter().find_map(|l| bar.dims.get(l));
        value.map_or(String::new(), i32::to_string)
    };
    vec![
        slab.mark.clone(),
        bar.mark.clone(),
        bar.type_size(),
        slab.members.to_string(),
        bar.each().to_string(),
        bar.total().to_string(),
        bar.length.to_string(),
        bar.shape.to_string(),
        dim(&['A']),
        dim(&['B']),
        dim(&['C']),
        dim(&['D']),
        dim(&['E', 'R']),
        String::new(),
    ]
}
