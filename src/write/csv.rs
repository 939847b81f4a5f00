//! A table as CSV: one heading row, then one row a row; text that a spreadsheet would take for a formula is made harmless.

use crate::table::{Align, Table};

/// The bytes of a table, lines ended by line feeds. Errors only where memory does.
pub fn write(table: &Table) -> Result<Vec<u8>, String> {
    let mut writer = csv::WriterBuilder::new().terminator(csv::Terminator::Any(b'\n')).from_writer(Vec::new());
    let fault = |e: csv::Error| e.to_string();
    writer.write_record(table.columns.iter().map(|c| c.name.as_str())).map_err(fault)?;
    for row in &table.rows {
        let cells = row.iter().zip(&table.columns).map(|(cell, column)| if column.align == Align::Left { harmless(cell) } else { cell.clone() });
        writer.write_record(cells).map_err(fault)?;
    }
    writer.into_inner().map_err(|e| e.to_string())
}

/// A text cell that begins like a formula gets an apostrophe in front, as spreadsheets write it.
fn harmless(cell: &str) -> String {
    if cell.starts_with(['=', '+', '-', '@', '\t', '\r']) { format!("'{cell}") } else { cell.to_string() }
}
