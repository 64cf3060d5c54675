//! Reading in tables: with the roles that the layout gives columns and rows.
//!
//! Of a plain table every cell is read: group summaries with the sizes of the header, estimates with their
//! intervals, p-values. Of any other table only the p-values under or beside a P are.

mod cell;
mod estimate;
mod meaning;
mod summary;

use super::lexicon::Classes;
use super::sentence::{Scan, SentenceView};
use super::{PValue, Readings, Role, p};
use crate::layout::{Around, ColumnRole, Layout, Row, RowRole, around};
use crate::manuscript::{Block, BlockKind, Grid, Manuscript};
use meaning::Meaning;

/// Appends what a table says, row by row.
pub fn read(manuscript: &Manuscript, scan: &Scan, number: usize, readings: &mut Readings) {
    let block = &manuscript.blocks[number];
    let BlockKind::Table(grid) = &block.kind else { return };
    let layout = Layout::of(block, number, grid);
    let table = Table { manuscript, scan, block, grid, first: scan.of_block(number).start, layout };
    let setting = Setting::of(&table, &around(manuscript, number));
    for row in table.layout.rows.iter().skip(table.layout.header_rows as usize) {
        match row.role {
            RowRole::Header | RowRole::Blank => {}
            RowRole::Section | RowRole::P | RowRole::Data => table.read_p(row, &setting, &mut readings.p),
        }
        if row.role == RowRole::Data && table.layout.plain {
            let counts = summary::read(&table, row, &setting, &mut readings.groups);
            estimate::read(&table, row, &setting, counts, readings);
        }
    }
}

/// A table with what is needed to look at its cells.
struct Table<'a> {
    manuscript: &'a Manuscript,
    scan: &'a Scan,
    block: &'a Block,
    grid: &'a Grid,
    /// Number of the first cell's sentence.
    first: u32,
    layout: Layout,
}

impl<'a> Table<'a> {
    /// A cell as a sentence.
    fn view(&self, cell: usize) -> SentenceView<'a> {
        self.scan.view(self.manuscript, self.first + cell as u32)
    }

    fn role_of(&self, cell: usize) -> &ColumnRole {
        self.layout.role(&self.grid.cells[cell])
    }

    /// What a row says of its own figures, and what its section says.
    fn said(&self, row: &Row) -> (Meaning, Meaning) {
        let mut own = Meaning::default();
        for &label in &row.labels {
            own.add(&self.view(label));
        }
        (own, row.section.map_or(Meaning::default(), |s| Meaning::of(&self.view(s))))
    }

    fn read_p(&self, row: &Row, setting: &Setting, out: &mut Vec<PValue>) {
        let words = |cells: &[usize], class: Classes| {
            cells.iter().any(|&c| {
                let view = self.view(c);
                (0..view.len()).any(|i| view.is(i, class))
            })
        };
        let headed: Vec<usize> = row.labels.iter().copied().chain(row.section).collect();
        for cell in row.cells.clone() {
            let view = self.view(cell);
            let role = self.role_of(cell);
            if *role == ColumnRole::Stub || view.is_empty() {
                continue;
            }
            let in_p_column = *role == ColumnRole::P;
            if !in_p_column && row.role != RowRole::P {
                // `12.4 (3.1), P = 0.03` says itself what it is.
                out.extend(p::find(&view).iter().map(|x| x.reading(&view)));
                continue;
            }
            let header = self.layout.columns.get(self.grid.cells[cell].column as usize).and_then(|c| c.header);
            let named: Vec<usize> = headed.iter().copied().chain(header).collect();
            let p_role = if words(&named, Classes::INTERACTION) {
                Role::Interaction
            } else if words(&named, Classes::TREND) {
                Role::TrendOrJoint
            } else if !in_p_column && role.size().is_some() || self.says(&named, &["within", "paired"]) {
                // A row of p-values, one for each group: within the groups, over time.
                Role::WithinGroup
            } else if self.says(&named, &["noninferiority", "inferiority"]) {
                Role::NonInferiority
            } else if self.says(&named, &["normality", "shapiro", "levene", "heterogeneity", "homogeneity"]) {
                Role::AssumptionOrFit
            } else if setting.baseline || words(&named, Classes::BASELINE) && !self.says(&named, &["from", "change"]) {
                Role::Baseline
            } else {
                Role::Effect
            };
            let corrected = self.says(&named, &["corrected", "bonferroni", "tukey", "holm", "fdr"]);
            for x in cell::bare_p(&view) {
                out.push(PValue {
                    span: view.span(x.first, x.last),
                    sentence: view.id,
                    relation: x.relation,
                    value: x.value,
                    role: p_role,
                    corrected,
                    shared: false,
                });
            }
        }
    }

    fn says(&self, cells: &[usize], words: &[&str]) -> bool {
        cells.iter().any(|&c| {
            let view = self.view(c);
            (0..view.len()).any(|i| view.any(i, words))
        })
    }
}

/// What is said for a whole table.
struct Setting {
    /// By the headers of its columns of groups and of labels.
    columns: Meaning,
    /// By its caption and notes.
    around: Meaning,
    /// It shows the participants as they were at the start.
    baseline: bool,
}

impl Setting {
    fn of(table: &Table, around: &Around) -> Setting {
        let mut columns = Meaning::default();
        for column in &table.layout.columns {
            if let Some(header) = column.header
                && matches!(column.role, ColumnRole::Stub | ColumnRole::Group { .. } | ColumnRole::Overall { .. })
            {
                columns.add(&table.view(header));
            }
        }
        let views = |blocks: std::ops::Range<usize>| {
            blocks.flat_map(|b| table.scan.of_block(b)).map(|id| table.scan.view(table.manuscript, id))
        };
        let mut said = Meaning::default();
        views(around.caption.clone()).chain(views(around.notes.clone())).for_each(|v| said.add(&v));
        let caption_says =
            |words: &[&str]| views(around.caption.clone()).any(|v| (0..v.len()).any(|i| v.any(i, words)));
        let title = table.manuscript.sections[table.block.section as usize].title.to_lowercase();
        let baseline = (caption_says(&["baseline", "demographic", "demographics", "characteristics"])
            || title.contains("baseline"))
            && !caption_says(&["change", "changes", "after", "outcome", "outcomes", "follow", "end", "during", "post"]);
        Setting { columns, around: said, baseline }
    }
}
