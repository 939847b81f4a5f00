//! A neutral table: headings and cells of text, from which any writer makes its own form.

#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Align {
    Left,
    Right,
}

#[derive(Clone, Debug)]
pub struct Column {
    pub name: String,
    pub align: Align,
}

#[derive(Clone, Debug, Default)]
pub struct Table {
    pub columns: Vec<Column>,
    pub rows: Vec<Vec<String>>,
}

impl Table {
    /// Headings; one that begins with `>` is aligned right and loses the sign.
    pub fn new(headings: &[&str]) -> Table {
        let columns = headings
            .iter()
            .map(|h| match h.strip_prefix('>') {
                Some(name) => Column { name: name.into(), align: Align::Right },
                None => Column { name: (*h).into(), align: Align::Left },
            })
            .collect();
        Table { columns, rows: Vec::new() }
    }

    pub fn row<S: Into<String>>(&mut self, cells: impl IntoIterator<Item = S>) {
        self.rows.push(cells.into_iter().map(Into::into).collect());
    }

    /// The table as aligned plain text, one line a row.
    pub fn text(&self) -> String {
        let widths: Vec<usize> = (0..self.columns.len())
            .map(|c| {
                let cells = self.rows.iter().map(|r| r.get(c).map_or(0, |t| t.chars().count()));
                cells.chain([self.columns[c].name.chars().count()]).max().unwrap_or(0)
            })
            .collect();
        let line = |cells: Vec<&str>| {
            let mut text = String::new();
            for ((cell, width), column) in cells.iter().zip(&widths).zip(&self.columns) {
                let pad = " ".repeat(width - cell.chars().count().min(*width));
                match column.align {
                    Align::Left => text.push_str(&format!("{cell}{pad}  ")),
                    Align::Right => text.push_str(&format!("{pad}{cell}  ")),
                }
            }
            format!("{}\n", text.trim_end())
        };
        let mut text = line(self.columns.iter().map(|c| c.name.as_str()).collect());
        for row in &self.rows {
            text.push_str(&line(row.iter().map(String::as_str).collect()));
        }
        text
    }
}
