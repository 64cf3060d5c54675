//! A table while it is read, and the grid that comes of it.

use crate::intake::inline::{Draft, Inline};
use crate::intake::tidy::append;
use crate::manuscript::{Block, BlockKind, Cell, Grid};

/// Columns beyond those that the fullest row holds cells for: what a span may add at most.
const MOST_ADDED: usize = 64;
/// Places of a grid that need no cells of their own to back them.
const FREE_AREA: usize = 200_000;

/// The part of a table that a row stands in.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Part {
    Head,
    Body(u32),
    Foot,
}

pub(super) struct RawCell {
    pub inline: Inline,
    /// `th` rather than `td`.
    pub header: bool,
    /// Holds a rule (`hr`).
    pub ruled: bool,
    pub row_span: usize,
    pub column_span: usize,
    /// Where the cell ends in the source.
    pub end: usize,
}

struct Row {
    part: Part,
    cells: Vec<RawCell>,
}

impl Row {
    /// A line drawn across the table: no row that a reader sees.
    fn is_rule(&self) -> bool {
        self.cells.iter().any(|c| c.ruled) && self.cells.iter().all(|c| c.inline.is_blank())
    }
}

/// A table under construction.
pub(super) struct Table {
    rows: Vec<Row>,
    pub part: Part,
    bodies: u32,
}

/// What a table becomes.
pub(super) enum Built {
    Table(Box<Block>),
    /// Too irregular for a grid: the text of its cells.
    Cells(Vec<Inline>),
    Nothing,
}

impl Table {
    pub fn new() -> Table {
        Table { rows: Vec::new(), part: Part::Body(0), bodies: 0 }
    }

    pub fn enter(&mut self, name: &str) {
        self.part = match name {
            "thead" => Part::Head,
            "tfoot" => Part::Foot,
            _ => {
                self.bodies += 1;
                Part::Body(self.bodies)
            }
        };
    }

    pub fn row(&mut self) {
        self.rows.push(Row { part: self.part, cells: Vec::new() });
    }

    pub fn cell(&mut self, cell: RawCell) {
        if self.rows.last().is_none_or(|r| r.part != self.part) {
            self.row();
        }
        if let Some(row) = self.rows.last_mut() {
            row.cells.push(cell);
        }
    }

    /// Lays the cells out as HTML does (HTML Standard, "forming a table"): each takes the first free
    /// column, spans end with their part of the table, and a foot stands last.
    pub fn build(mut self) -> Built {
        self.rows.sort_by_key(|r| match r.part {
            Part::Head => 0,
            Part::Body(_) => 1,
            Part::Foot => 2,
        });
        let header_rows = self.header_rows();
        let cells: usize = self.rows.iter().map(|r| r.cells.len()).sum();
        let widest = self.rows.iter().map(|r| r.cells.len()).max().unwrap_or(0);
        if self.rows.iter().all(|r| r.cells.iter().all(|c| c.inline.is_blank())) {
            return Built::Nothing;
        }
        let most = widest + MOST_ADDED;
        if most.saturating_mul(self.rows.len()) > FREE_AREA + 16 * cells {
            return Built::Cells(self.rows.into_iter().flat_map(|r| r.cells).map(|c| c.inline).collect());
        }
        let mut grid = Grid { rows: 0, columns: 0, header_rows, cells: Vec::with_capacity(cells) };
        let mut draft = Draft::default();
        // For every column: the cell that spans down into the next row, and the rows it still wants.
        let mut down: Vec<(usize, usize)> = vec![(0, 0); most];
        let mut part = None;
        for row in self.rows {
            if part.replace(row.part) != Some(row.part) {
                down.fill((0, 0));
            }
            if row.is_rule() {
                down.iter_mut().for_each(|d| d.1 = d.1.saturating_sub(1));
                continue;
            }
            let mut covered: Vec<(usize, usize)> = down.iter().copied().filter(|d| d.1 > 0).collect();
            covered.dedup_by_key(|d| d.0);
            for (cell, _) in covered {
                grid.cells[cell].row_span += 1;
            }
            let taken: Vec<bool> = down.iter().map(|d| d.1 > 0).collect();
            down.iter_mut().for_each(|d| d.1 = d.1.saturating_sub(1));
            let count = row.cells.len();
            let mut column = 0;
            for (i, cell) in row.cells.into_iter().enumerate() {
                while taken.get(column) == Some(&true) {
                    column += 1;
                }
                let free = taken[column.min(most)..].iter().take_while(|t| !**t).count();
                let span = cell.column_span.clamp(1, free.max(1));
                let start = draft.text.len() as u32;
                let after = cell.end;
                append(&mut draft, cell.inline);
                let end = draft.text.len() as u32;
                for place in down.iter_mut().skip(column).take(span) {
                    *place = (grid.cells.len(), cell.row_span.saturating_sub(1));
                }
                grid.cells.push(Cell {
                    row: grid.rows,
                    column: column as u32,
                    row_span: 1,
                    column_span: span as u32,
                    start,
                    end,
                });
                draft.separator(if i + 1 == count { '\n' } else { '\t' }, after);
                column += span;
                grid.columns = grid.columns.max(column as u32);
            }
            grid.rows += 1;
        }
        Built::Table(Box::new(draft.finish(BlockKind::Table(grid))))
    }

    /// The rows of the head; without one, the first rows if all their cells are headers.
    fn header_rows(&self) -> u32 {
        let shown = || self.rows.iter().filter(|r| !r.is_rule());
        let head = shown().take_while(|r| r.part == Part::Head).count();
        let named = |r: &&Row| !r.cells.is_empty() && r.cells.iter().all(|c| c.header);
        let count = if head > 0 { head } else { shown().take_while(named).count() };
        // A table that is all head has its figures there.
        if count == shown().count() { count.min(1) as u32 } else { count as u32 }
    }
}
