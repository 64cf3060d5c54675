//! Tables as readers see them: what each column and row is for, and which paragraphs belong to the table.
//!
//! Heads are read from the top to the columns beneath them; where a head says nothing, the look of the cells does. The
//! result columns that stand behind a run of group columns compare those groups: together they are a *panel*, and a
//! table may have several side by side. What is doubtful about a panel is kept with it, since a table taken wrongly
//! costs false objections, and one that is missed costs only silence.

mod around;
mod columns;
mod figures;
mod header;
mod rows;

pub use around::{Around, around};

use crate::manuscript::{Block, Cell, Grid};
use crate::text::Span;
use std::ops::Range;

/// A table with the parts of its columns and rows.
#[derive(Clone, Debug, PartialEq)]
pub struct Layout {
    /// Rows from the top that hold headers: those that the format names and further ones that look like it.
    pub header_rows: u32,
    /// One for each column of the grid.
    pub columns: Vec<Column>,
    /// One for each row that has cells, header rows included.
    pub rows: Vec<Row>,
    /// Groups with the results that compare them, from the left.
    pub panels: Vec<Panel>,
    /// The rows are groups of participants, and the columns what was measured or when.
    pub rows_are_groups: bool,
    /// Sizes of the columns as rows of the body print them; [`Row::sizes`] counts from 1 here.
    sizes: Vec<Vec<Option<Size>>>,
}

/// A column and the cells that head it.
#[derive(Clone, Debug, PartialEq)]
pub struct Column {
    pub role: ColumnRole,
    /// Index of the header cell nearest to the figures.
    pub header: Option<usize>,
    /// Indexes of all header cells over the column, from the top.
    pub path: Vec<usize>,
    /// The panel that it belongs to.
    pub panel: Option<usize>,
    /// Result columns with one number are of one comparison.
    pub bundle: usize,
    /// Of a result column: it is not certain that it compares just the groups of its panel. It is one of several, its
    /// head says more of it, or the groups are doubtful.
    pub doubtful: bool,
}

/// What a column is for.
#[derive(Clone, Debug, PartialEq)]
pub enum ColumnRole {
    /// Labels of rows.
    Stub,
    /// Summaries of one group of participants, at one time.
    Group {
        label: String,
        n: Option<Size>,
    },
    /// All groups together.
    Overall {
        label: String,
        n: Option<Size>,
    },
    /// The other half of the summary or estimate to its left.
    Part(Part),
    /// The size of the group to its right, or of the row.
    Size,
    /// A comparison of the groups: a difference or ratio, with its interval or without.
    Estimate,
    /// An interval, both limits in one cell.
    Interval,
    Lower,
    Upper,
    Statistic,
    Df,
    P,
    Other,
}

/// What a column adds to the one on its left.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Part {
    Sd,
    Se,
    Percent,
    Iqr,
    Range,
    /// The interval of the mean or share to the left.
    Ci,
}

/// The size of a group as it is printed.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Size {
    pub value: u64,
    /// The digits.
    pub span: Span,
}

/// Groups and the results that compare them.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Panel {
    /// Columns of groups.
    pub groups: Vec<usize>,
    /// The columns are one group at several times.
    pub times: bool,
    /// Groups at several times, or without a name of their own.
    pub doubtful: bool,
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
    /// The sizes in force: 0 for those of the header, else one more than the index of a list of sizes.
    sizes: usize,
    /// The size that the row's own label or section prints, of the one group that it is about.
    pub own_size: Option<Size>,
}

/// What a row is for.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum RowRole {
    Header,
    /// A label alone: it titles the rows below. A P may stand in it, for all of them together.
    Section,
    /// Sizes of the groups, for the rows below.
    Sizes,
    /// Labelled P: its cells are p-values.
    P,
    /// Labelled t, F, χ²: its cells are test statistics.
    Statistic,
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

    /// Summaries of participants stand in it.
    pub fn summarises(&self) -> bool {
        matches!(self, ColumnRole::Group { .. } | ColumnRole::Overall { .. })
    }

    /// A result of comparing groups stands in it.
    pub fn compares(&self) -> bool {
        use ColumnRole::*;
        matches!(self, Estimate | Interval | Lower | Upper | Statistic | Df | P)
    }
}

impl Layout {
    /// The layout of a table. `number` is the block's number in the manuscript.
    pub fn of(block: &Block, number: usize, grid: &Grid) -> Layout {
        let text = Text { block, number };
        let runs = rows_of(&grid.cells);
        let header_rows = columns::header_rows(&text, grid, &runs);
        let mut columns = columns::columns(&text, grid, &runs, header_rows);
        let stubs = columns.iter().take_while(|c| c.role == ColumnRole::Stub).count();
        let mut rows = rows::rows(&text, grid, &runs, header_rows, stubs, &columns);
        let sizes = rows::sizes(&text, grid, &mut rows, &mut columns);
        columns::find_overall(&text, grid, &mut columns);
        let panels = columns::panels(&text, grid, &mut columns);
        let rows_are_groups = rows::are_groups(&text, grid, &rows, &columns);
        Layout { header_rows, columns, rows, panels, rows_are_groups, sizes }
    }

    /// The role of the column that a cell stands in.
    pub fn role(&self, cell: &Cell) -> &ColumnRole {
        self.columns.get(cell.column as usize).map_or(&ColumnRole::Other, |c| &c.role)
    }

    /// The size of the group in a row's cell of a column: as rows of the body print it, else as the header does.
    pub fn size(&self, row: &Row, column: usize) -> Option<Size> {
        let printed = row.sizes.checked_sub(1).and_then(|k| self.sizes.get(k)).map(|list| list.get(column).copied());
        match printed {
            Some(size) => size.flatten(),
            None => self.columns.get(column).and_then(|c| c.role.size()),
        }
    }

    /// The row that a cell stands in, with its number.
    pub fn row_of(&self, grid: &Grid, cell: &Cell) -> Option<(usize, &Row)> {
        let at = self.rows.partition_point(|r| grid.cells[r.cells.start].row < cell.row);
        Some((at, self.rows.get(at)?))
    }

    /// Indexes of the cells that head a column, from the top.
    pub fn heads(&self, column: usize) -> &[usize] {
        self.columns.get(column).map_or(&[], |c| &c.path)
    }

    /// The cell of a row in a column; cells of a row are in the order of their columns.
    pub fn cell_in(&self, grid: &Grid, row: &Row, column: usize) -> Option<usize> {
        let cells = &grid.cells[row.cells.clone()];
        let at = cells.partition_point(|c| (c.column as usize) < column);
        cells.get(at).filter(|c| c.column as usize == column).map(|_| row.cells.start + at)
    }

    /// The column of the one standard error that a row's means have in common: `A | B | C | SEM`.
    pub fn pooled(&self) -> Option<usize> {
        let mut parts = self.columns.iter().enumerate().filter(|(_, c)| matches!(c.role, ColumnRole::Part(_)));
        let (k, column) = parts.next()?;
        let left = self.panel(k.checked_sub(1)?).filter(|p| p.groups.len() > 1 && p.groups.contains(&(k - 1)));
        (column.role == ColumnRole::Part(Part::Se) && parts.next().is_none() && left.is_some()).then_some(k)
    }

    /// The panel of a column.
    pub fn panel(&self, column: usize) -> Option<&Panel> {
        self.panels.get(self.columns.get(column)?.panel?)
    }
}

/// A table's text.
struct Text<'a> {
    block: &'a Block,
    number: usize,
}

impl Text<'_> {
    fn of(&self, cell: &Cell) -> &str {
        self.block.text_of(cell).trim()
    }

    /// Lower case, without footnote marks, one space between words.
    fn folded(&self, cell: &Cell) -> String {
        header::folded(self.block, cell.start, cell.end)
    }

    fn role(&self, cell: &Cell) -> ColumnRole {
        header::role(self.block, self.number, cell)
    }

    fn look(&self, cell: &Cell) -> figures::Look {
        figures::look(self.of(cell))
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

#[cfg(test)]
mod tests;
