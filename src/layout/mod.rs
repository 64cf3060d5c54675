//! Tables as readers see them: what each column and row is for, and which paragraphs belong to the table.
//!
//! One shape is known whole, the *plain* one: labels on the left, one column for each group with its size in
//! the header, then possibly an estimate, then possibly P. Every other table is only told apart from it, so that
//! nobody reads more into it than a P column. A table taken for plain wrongly costs false objections; a plain
//! table that is missed costs only silence. So every doubt counts against the plain shape.

mod around;
mod header;

pub use around::{Around, around};

use crate::manuscript::{Block, Cell, Grid};
use crate::text::Span;
use std::ops::Range;

/// A table with the parts of its columns and rows.
#[derive(Clone, Debug, PartialEq)]
pub struct Layout {
    /// Rows from the top that hold headers: those that the format names and a row of sizes below them.
    pub header_rows: u32,
    /// One for each column of the grid.
    pub columns: Vec<Column>,
    /// One for each row that has cells, header rows included.
    pub rows: Vec<Row>,
    /// The plain shape: labels, groups with their sizes, at most one estimate, at most one P, in this order.
    pub plain: bool,
}

/// A column and the cell that heads it.
#[derive(Clone, Debug, PartialEq)]
pub struct Column {
    pub role: ColumnRole,
    /// Index of the header cell in the grid's cells.
    pub header: Option<usize>,
}

/// What a column is for.
#[derive(Clone, Debug, PartialEq)]
pub enum ColumnRole {
    /// Labels of rows.
    Stub,
    /// One group of participants.
    Group {
        label: String,
        n: Option<Size>,
    },
    /// All groups together.
    Overall {
        label: String,
        n: Option<Size>,
    },
    /// A comparison of the groups: a difference or ratio, with its interval or without.
    Estimate,
    P,
    Other,
}

/// The size of a group as its header prints it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Size {
    pub value: u64,
    /// The digits.
    pub span: Span,
}

/// A row with its label.
#[derive(Clone, Debug, PartialEq)]
pub struct Row {
    pub role: RowRole,
    /// Its cells in the grid.
    pub cells: Range<usize>,
    /// Indexes of the cells that label it, from the left; none are empty.
    pub labels: Vec<usize>,
    /// Index of the cell that titles the rows below it, this one among them.
    pub section: Option<usize>,
}

/// What a row is for.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum RowRole {
    Header,
    /// A label alone: it titles the rows below. A P may stand in it, for all of them together.
    Section,
    /// Labelled P: its cells are p-values.
    P,
    Data,
    Blank,
}

impl ColumnRole {
    /// The size of the column's group.
    pub fn size(&self) -> Option<Size> {
        match self {
            ColumnRole::Group { n, .. } | ColumnRole::Overall { n, .. } => *n,
            _ => None,
        }
    }

    /// The name of the column's group.
    pub fn label(&self) -> Option<&str> {
        match self {
            ColumnRole::Group { label, .. } | ColumnRole::Overall { label, .. } => Some(label),
            _ => None,
        }
    }
}

impl Layout {
    /// The layout of a table. `number` is the block's number in the manuscript.
    pub fn of(block: &Block, number: usize, grid: &Grid) -> Layout {
        let text = Text { block, number };
        let runs = rows_of(&grid.cells);
        let mut header_rows = grid.header_rows.max(1).min(runs.len() as u32);
        let mut columns: Vec<Column> = (0..grid.columns.min(grid.cells.len() as u32))
            .map(|_| Column { role: ColumnRole::Other, header: None })
            .collect();
        for (index, cell) in grid.cells.iter().enumerate().take_while(|(_, c)| c.row < header_rows) {
            let wide = cell.column_span > 1 || cell.row_span > 1;
            if let Some(column) = columns.get_mut(cell.column as usize) {
                // Of stacked header cells the lowest is nearest to the figures.
                if !text.of(cell).is_empty() || column.header.is_none() {
                    *column =
                        Column { role: if wide { ColumnRole::Other } else { text.role(cell) }, header: Some(index) };
                }
            }
        }
        let stubs = stub_columns(&text, grid, &runs, header_rows, &columns);
        for column in &mut columns[..stubs] {
            column.role = ColumnRole::Stub;
        }
        if columns.iter().all(|c| c.role.size().is_none())
            && let Some(run) = runs.get(header_rows as usize)
            && sizes_below(&text, grid, run.clone(), &mut columns)
        {
            header_rows += 1;
        }
        find_overall(&text, grid, &mut columns);
        let rows = rows(&text, grid, &runs, header_rows, stubs, &columns);
        let inner_header = rows.iter().skip(header_rows as usize).any(|r| r.role == RowRole::Header);
        let spans = grid.cells.iter().any(|c| c.column_span > 1 || c.row_span > 1);
        let plain = !inner_header && !spans && plain_columns(&text, grid, &columns);
        Layout { header_rows, columns, rows, plain }
    }

    /// The role of the column that a cell stands in.
    pub fn role(&self, cell: &Cell) -> &ColumnRole {
        self.columns.get(cell.column as usize).map_or(&ColumnRole::Other, |c| &c.role)
    }
}

/// A table's text.
struct Text<'a> {
    block: &'a Block,
    number: usize,
}

impl Text<'_> {
    fn of(&self, cell: &Cell) -> &str {
        self.block.text.get(cell.start as usize..cell.end as usize).unwrap_or("").trim()
    }

    /// Lower case, without footnote marks, one space between words.
    fn folded(&self, cell: &Cell) -> String {
        header::folded(self.block, cell.start, cell.end)
    }

    fn role(&self, cell: &Cell) -> ColumnRole {
        header::role(self.block, self.number, cell)
    }
}

/// The cells of each row; rows without cells are left out.
fn rows_of(cells: &[Cell]) -> Vec<Range<usize>> {
    let mut runs: Vec<Range<usize>> = Vec::new();
    for (i, cell) in cells.iter().enumerate() {
        match runs.last_mut() {
            Some(run) if cells[run.start].row == cell.row => run.end = i + 1,
            _ => runs.push(i..i + 1),
        }
    }
    runs
}

/// How many columns from the left hold labels: the first, and a second whose cells hold hardly a figure.
fn stub_columns(text: &Text, grid: &Grid, runs: &[Range<usize>], header_rows: u32, columns: &[Column]) -> usize {
    if columns.is_empty() {
        return 0;
    }
    let second = columns.get(1).is_some_and(|c| matches!(c.role, ColumnRole::Other));
    if !second || columns.len() < 4 {
        return 1;
    }
    let (mut words, mut figures) = (0, 0);
    for run in runs.iter().skip(header_rows as usize) {
        for cell in grid.cells[run.clone()].iter().filter(|c| c.column == 1) {
            let shown = text.of(cell);
            if shown.is_empty() {
                continue;
            }
            // "Week 12" is a label, "12 (3)" is not.
            if shown.starts_with(|c: char| c.is_alphabetic()) { words += 1 } else { figures += 1 }
        }
    }
    if words > 0 && words >= 4 * figures { 2 } else { 1 }
}

/// Sizes in the row right below the header: `n = 24` in every column, or a row labelled N of whole numbers.
fn sizes_below(text: &Text, grid: &Grid, run: Range<usize>, columns: &mut [Column]) -> bool {
    let cells = &grid.cells[run];
    let labelled = cells.iter().find(|c| !text.of(c).is_empty()).is_some_and(|c| {
        matches!(columns.get(c.column as usize).map(|c| &c.role), Some(ColumnRole::Stub))
            && header::is_size_label(&text.folded(c))
    });
    let mut found = Vec::new();
    for cell in cells {
        let Some(column) = columns.get(cell.column as usize) else { return false };
        if column.role != ColumnRole::Other {
            continue;
        }
        if text.of(cell).is_empty() {
            continue;
        }
        match header::size_alone(text.block, text.number, cell, labelled) {
            Some(size) => found.push((cell.column as usize, size)),
            None => return false,
        }
    }
    if found.len() < 2 {
        return false;
    }
    for (at, size) in found {
        let label = columns[at].header.map_or(String::new(), |h| header::name(text.block, &grid.cells[h]));
        columns[at].role = ColumnRole::Group { label, n: Some(size) };
    }
    true
}

/// Tells the column of all participants from the groups: by its name, or as the sum of at least two others.
fn find_overall(text: &Text, grid: &Grid, columns: &mut [Column]) {
    let sizes: Vec<(usize, u64)> =
        columns.iter().enumerate().filter_map(|(i, c)| Some((i, c.role.size()?.value))).collect();
    let sum: u64 = sizes.iter().map(|s| s.1).fold(0, u64::saturating_add);
    let whole = sizes.iter().find(|&&(_, n)| sizes.len() >= 3 && n == sum.saturating_sub(n)).map(|s| s.0);
    for (i, column) in columns.iter_mut().enumerate() {
        if column.role == ColumnRole::Other
            && let Some(head) = column.header.map(|h| text.folded(&grid.cells[h])).filter(|h| header::is_overall(h))
        {
            column.role = ColumnRole::Overall { label: head, n: None };
        }
        if let ColumnRole::Group { label, n } = &column.role
            && (whole == Some(i) || header::is_overall(label))
        {
            column.role = ColumnRole::Overall { label: label.clone(), n: *n };
        }
    }
}

fn rows(
    text: &Text,
    grid: &Grid,
    runs: &[Range<usize>],
    header_rows: u32,
    stubs: usize,
    columns: &[Column],
) -> Vec<Row> {
    let mut rows = Vec::with_capacity(runs.len());
    let mut section = None;
    // With two columns of labels the first is printed once for several rows.
    let mut carried = None;
    for (number, run) in runs.iter().enumerate() {
        let cells = &grid.cells[run.clone()];
        let is_stub = |c: &Cell| (c.column as usize) < stubs;
        let shown = |c: &Cell| !text.of(c).is_empty();
        let labels: Vec<usize> = run.clone().filter(|&i| is_stub(&grid.cells[i]) && shown(&grid.cells[i])).collect();
        let filled = cells.iter().filter(|c| !is_stub(c) && shown(c)).count();
        let p_only = filled == 1
            && cells
                .iter()
                .any(|c| shown(c) && matches!(columns.get(c.column as usize).map(|c| &c.role), Some(ColumnRole::P)));
        let last_label = labels.last().map(|&i| text.folded(&grid.cells[i]));
        let role = if number < header_rows as usize {
            RowRole::Header
        } else if labels.is_empty() && filled == 0 {
            RowRole::Blank
        } else if last_label.as_deref().is_some_and(header::is_p) && filled > 0 {
            RowRole::P
        } else if repeats_header(text, cells, columns) {
            RowRole::Header
        } else if filled == 0 || (p_only && !labels.is_empty()) {
            RowRole::Section
        } else {
            RowRole::Data
        };
        if role == RowRole::Section {
            section = labels.last().copied();
            carried = None;
        } else if stubs == 2 && matches!(role, RowRole::Data | RowRole::P) {
            if let Some(&first) = labels.first().filter(|&&i| grid.cells[i].column == 0) {
                carried = (labels.len() == 2).then_some(first);
            } else if carried.is_some() {
                section = carried;
            }
        }
        rows.push(Row { role, cells: run.clone(), labels, section });
    }
    rows
}

/// A row that heads columns anew, in the middle of a table.
fn repeats_header(text: &Text, cells: &[Cell], columns: &[Column]) -> bool {
    cells.iter().any(|c| match columns.get(c.column as usize).map(|c| &c.role) {
        Some(ColumnRole::Stub) | None => false,
        Some(ColumnRole::P) => header::is_p(&text.folded(c)),
        Some(_) => {
            !text.of(c).starts_with(|c: char| c.is_ascii_digit()) && {
                let role = text.role(c);
                role == ColumnRole::P || role.size().is_some() && text.of(c).contains('=')
            }
        }
    })
}

/// Labels, groups (and the whole), an estimate, P: in this order, each group once and named as a group.
fn plain_columns(text: &Text, grid: &Grid, columns: &[Column]) -> bool {
    let place = |role: &ColumnRole| match role {
        ColumnRole::Stub => Some(0),
        ColumnRole::Group { n: Some(_), .. } | ColumnRole::Overall { .. } => Some(1),
        ColumnRole::Estimate => Some(2),
        ColumnRole::P => Some(3),
        _ => None,
    };
    let Some(places) = columns.iter().map(|c| place(&c.role)).collect::<Option<Vec<_>>>() else { return false };
    let count = |x| places.iter().filter(|&&p| p == x).count();
    let groups = columns.iter().filter(|c| matches!(c.role, ColumnRole::Group { .. })).count();
    // The few columns are compared with each other below; a table of more groups is no plain one anyway.
    if groups > 8 || count(1) > 9 || count(0) > 2 {
        return false;
    }
    let heads: Vec<String> =
        columns.iter().map(|c| c.header.map_or(String::new(), |h| text.folded(&grid.cells[h]))).collect();
    let alike = |role: &ColumnRole, k: usize| {
        columns[..k].iter().enumerate().any(|(j, c)| {
            c.role.size().is_some() && (heads[j] == heads[k] || c.role.label() == role.label()) && !heads[k].is_empty()
        })
    };
    let repeated = columns.iter().enumerate().any(|(k, c)| c.role.size().is_some() && alike(&c.role, k));
    // Columns of one group at two times are no groups.
    let timed = columns.iter().zip(&heads).any(|(c, h)| c.role.size().is_some() && header::names_time(h));
    let odd_p = columns.iter().zip(&heads).any(|(c, h)| c.role == ColumnRole::P && !header::is_plain_p(h, groups));
    places.is_sorted()
        && count(2) <= 1
        && count(3) <= 1
        && count(1) >= 1
        && (groups >= 2 || count(3) + count(2) == 0)
        && !repeated
        && !timed
        && !odd_p
}

#[cfg(test)]
mod tests;
