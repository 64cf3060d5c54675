//! Blocks of categories: the P stands on the block's title row or in its first row, and compares all its counts.

use super::Table;
use crate::layout::{ColumnRole, RowRole};
use crate::reading::{Group, Inference};
use std::ops::Range;

/// The groups of a block of rows.
pub(super) struct Block {
    /// Row by row.
    pub groups: Vec<usize>,
    /// How many groups of participants each row has, where the block is a table of counts; 0 where it is not.
    pub arms: usize,
    /// It is not known whether the P compares them all.
    pub doubtful: bool,
}

/// More rows than a block of categories has.
const MOST_ROWS: usize = 30;

impl Table<'_> {
    /// The block whose P stands in `cell` of row `index`; `None` where the P is of its own row alone.
    pub(super) fn block_of(&self, index: usize, cell: usize, panel: Option<usize>, own: &[usize]) -> Option<Block> {
        let row = &self.layout.rows[index];
        let title = row.role == RowRole::Section;
        // "Chi square for trend = 7.5" in the cell above: what the P compares began there.
        if self.begins_above(index, cell) {
            return Some(Block { groups: Vec::new(), arms: 0, doubtful: true });
        }
        let rows = self.rows_below(index, cell);
        let spans = self.grid.cells[cell].row_span > 1;
        if rows.is_empty() {
            return None;
        }
        let columns = panel.and_then(|k| self.layout.panels.get(k)).map_or(&[][..], |p| &p.groups);
        if let [column] = columns {
            return self.rows_as_groups(index, rows, *column, spans);
        }
        let arms = columns.len();
        let mut groups = own.to_vec();
        let mut whole = title || !own.is_empty();
        let mut complete = None;
        for below in rows.clone() {
            let mut lists = self.compared(&self.layout.rows[below], panel);
            // "Missing" has a count and no percentage.
            let share = |g: &usize| self.readings.groups[*g].percent.is_some();
            if groups.first().is_some_and(share) && lists.iter().flatten().any(|g| !share(g)) {
                lists.clear();
                let named = self.layout.rows[below].labels.iter().any(|&l| {
                    let view = self.view(l);
                    (0..view.len()).any(|i| view.any(i, &["missing", "unknown", "unclear", "lost", "unavailable"]))
                });
                if named {
                    continue;
                }
            }
            let [list] = &lists[..] else {
                // Rows without figures ("missing") end a block that is complete without them.
                whole &= self.is_bare(below);
                continue;
            };
            // A dash among them: it is open what was counted there.
            if list.len() != arms {
                whole = false;
                continue;
            }
            groups.extend(list);
            if complete.is_none() && self.exhausts(&groups, arms) {
                complete = Some(groups.len());
            }
        }
        let counts = |g: &usize| self.readings.groups[*g].events.is_some();
        let table =
            arms >= 2 && groups.len() >= 2 * arms && groups.len().is_multiple_of(arms) && groups.iter().all(counts);
        let carried = row.section.is_some() && rows.clone().all(|r| self.layout.rows[r].section == row.section);
        if title || spans || carried && !self.stub_is_single() {
            if title && groups.len() == arms {
                return Some(Block { groups, arms: 0, doubtful: false });
            }
            return Some(if table && whole {
                Block { groups, arms, doubtful: false }
            } else {
                Block { groups, arms: 0, doubtful: true }
            });
        }
        // One column of labels, no title: only counts that share out the whole of each group show that they belong
        // together; else it is open what the P compares.
        match complete {
            Some(count) if table => Some(Block { groups: groups[..count].to_vec(), arms, doubtful: false }),
            _ => Some(Block { groups: own.to_vec(), arms: 0, doubtful: true }),
        }
    }

    /// One column of figures and a P for several rows: it compares the rows.
    fn rows_as_groups(&self, index: usize, below: Range<usize>, column: usize, spans: bool) -> Option<Block> {
        /// More groups than one P compares.
        const MOST: usize = 8;
        let carried = !self.stub_is_single() && self.layout.rows[index].section.is_some();
        if !(spans || carried || self.layout.rows_are_groups) || below.len() >= MOST {
            return None;
        }
        let mut groups = Vec::new();
        for row in std::iter::once(index).chain(below) {
            let cell = self.layout.cell_in(self.grid, &self.layout.rows[row], column)?;
            let mut found = self.groups_in(cell);
            groups.push(found.next()?);
            if found.next().is_some() {
                return None;
            }
        }
        // Rows that do not name groups may be times or items.
        Some(Block { groups, arms: 0, doubtful: !self.layout.rows_are_groups })
    }

    /// The cell above a P, in its own column, holds something else than a P.
    fn begins_above(&self, index: usize, cell: usize) -> bool {
        let Some(above) = index.checked_sub(1).map(|i| &self.layout.rows[i]).filter(|r| r.role == RowRole::Data) else {
            return false;
        };
        let over = self.layout.cell_in(self.grid, above, self.column(cell));
        over.is_some_and(|c| {
            let view = self.view(c);
            self.p_in(c).is_empty() && (0..view.len()).any(|i| view.sign(i, '=') || view.any(i, &["chi", "test"]))
        })
    }

    /// Rows below that have figures and no P of their own in the column of a P.
    fn rows_below(&self, index: usize, cell: usize) -> Range<usize> {
        let start = index + 1;
        let k = self.column(cell);
        let span = self.grid.cells[cell].row_span as usize;
        if span > 1 {
            return start..(index + span).min(self.layout.rows.len());
        }
        let row = &self.layout.rows[index];
        let title = row.role == RowRole::Section;
        let mut end = start;
        while end < self.layout.rows.len() && end - start < MOST_ROWS {
            let below = &self.layout.rows[end];
            let own =
                self.layout.cell_in(self.grid, below, k).is_some_and(|c| !self.view(c).is_empty() && !self.is_dash(c));
            let new_title = !title && !self.stub_is_single() && below.section != row.section;
            // "Total" sums up the rows above it.
            let total = below.labels.last().is_some_and(|&l| {
                let view = self.view(l);
                view.len() == 1 && view.any(0, &["total", "all", "overall"])
            });
            if below.role != RowRole::Data || own || new_title || total {
                break;
            }
            end += 1;
        }
        start..end
    }

    pub(super) fn is_dash(&self, cell: usize) -> bool {
        let view = self.view(cell);
        view.len() == 1 && view.sign(0, '-')
    }

    /// No group could be read in a row.
    fn is_bare(&self, row: usize) -> bool {
        self.layout.rows[row].cells.clone().all(|c| self.groups_in(c).is_empty())
    }

    fn stub_is_single(&self) -> bool {
        self.layout.columns.iter().filter(|c| c.role == ColumnRole::Stub).count() <= 1
    }

    /// The counts of several rows share out the total of each group.
    fn exhausts(&self, groups: &[usize], arms: usize) -> bool {
        if arms == 0 || groups.len() < 2 * arms || !groups.len().is_multiple_of(arms) {
            return false;
        }
        let group = |g: usize| &self.readings.groups[g];
        let count = |g: &Group| g.events.and_then(|f| f.printed.count());
        let printed = |g: &Group| g.total.filter(|t| !t.is_inferred(Inference::FromPercent));
        let total = |g: &Group| printed(g).and_then(|f| f.printed.count());
        (0..arms).all(|a| {
            let column = || groups.iter().skip(a).step_by(arms).map(|&g| group(g));
            let sum = column().map(count).try_fold(0u64, |s, c| s.checked_add(c?));
            let whole = column().map(total).next().flatten();
            sum.is_some() && sum == whole
        })
    }
}
