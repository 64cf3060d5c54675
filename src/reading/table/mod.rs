//! Reading in tables: with the roles that the layout gives columns and rows.
//!
//! A cell is read by the role of its column and row: group summaries with the sizes that header, row or label print,
//! estimates with their intervals, test statistics, p-values. What says itself what it is (`P = 0.03`, `t = 2.1`) is
//! read as in running text.

mod cell;
mod estimate;
mod meaning;
mod sizes;
mod statistic;
mod summary;
mod totals;

use super::lexicon::Classes;
use super::sentence::{Scan, SentenceView};
use super::{Figure, PValue, Readings, Role, p};
use crate::layout::{Around, Column, ColumnRole, Layout, Row, RowRole, around};
use crate::manuscript::{Block, BlockKind, Grid, Manuscript};
use crate::printed::Printed;
use meaning::Meaning;

/// Appends what a table says, row by row.
pub fn read(manuscript: &Manuscript, scan: &Scan, number: usize, readings: &mut Readings) {
    let block = &manuscript.blocks[number];
    let BlockKind::Table(grid) = &block.kind else { return };
    let layout = Layout::of(block, number, grid);
    let table = Table { manuscript, scan, block, grid, first: scan.of_block(number).start, layout };
    let setting = Setting::of(&table, &around(manuscript, number));
    let first_group = readings.groups.len();
    for (number, row) in table.layout.rows.iter().enumerate().skip(table.layout.header_rows as usize) {
        match row.role {
            RowRole::Header | RowRole::Blank | RowRole::Sizes => continue,
            RowRole::Section | RowRole::P | RowRole::Data | RowRole::Statistic => {}
        }
        let above = &table.layout.rows[number.saturating_sub(1)];
        let of_estimates = row.role == RowRole::P && above.role == RowRole::Data && table.row_estimates(above);
        table.read_p(row, &setting, of_estimates, readings);
        let estimates = row.role == RowRole::Data && table.row_estimates(row);
        let continues = number > 0 && table.brackets_below(number - 1).is_some();
        let mut counts = false;
        if row.role == RowRole::Data && !continues {
            counts = !estimates && summary::read(&table, number, &setting, readings);
            estimate::read(&table, row, &setting, counts, estimates, readings);
        }
        if row.role == RowRole::Data {
            estimate::read_limits(&table, number, readings);
        }
        table.read_statistics(row, counts, readings);
    }
    // Cells are read by role, and readings are in reading order.
    readings.p.sort_by_key(|p| p.sentence);
    readings.statistics.sort_by_key(|s| s.sentence);
    readings.intervals.sort_by_key(|i| i.sentence);
    totals::fill(&table, &mut readings.groups[first_group..]);
    readings.layouts.push((number, table.layout));
}

fn bare_reading(view: &SentenceView, x: cell::BareP, role: Role, corrected: bool) -> PValue {
    PValue {
        span: view.span(x.first, x.last),
        sentence: view.id,
        relation: x.relation,
        value: x.value,
        role,
        corrected,
        shared: false,
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

    /// The level of intervals that the heads over a cell's column give.
    fn level_of(&self, cell: usize) -> Option<Figure> {
        let column = self.grid.cells.get(cell)?.column as usize;
        self.heads(column).find_map(|h| estimate::level(&h))
    }

    /// The heads over a column, from the top.
    fn heads(&self, column: usize) -> impl Iterator<Item = SentenceView<'a>> {
        self.layout.heads(column).iter().map(|&h| self.view(h))
    }

    /// Whether a row's cells are estimates with their intervals: its label or title names a measure and intervals.
    fn row_estimates(&self, row: &Row) -> bool {
        let (own, section) = self.said(row);
        own.measure && own.ci || section.measure && section.ci && !own.speaks()
    }

    /// The row below one, where it holds nothing but brackets under the figures of this one: `12.4` over `(3.1)`.
    fn brackets_below(&self, number: usize) -> Option<&Row> {
        let (row, below) = (self.layout.rows.get(number)?, self.layout.rows.get(number + 1)?);
        if row.role != RowRole::Data || below.role != RowRole::Data {
            return None;
        }
        let mut found = 0;
        for cell in below.cells.clone().filter(|&c| *self.role_of(c) != ColumnRole::Stub) {
            let view = self.view(cell);
            if view.is_empty() {
                continue;
            }
            if !view.signs(0, &['(', '[']) || !view.signs(view.len() - 1, &[')', ']']) {
                return None;
            }
            found += usize::from(self.role_of(cell).summarises());
        }
        let bare = |&c: &usize| self.role_of(c).summarises() && !self.view(c).is_empty();
        let above = row.cells.clone().filter(bare).all(|c| {
            matches!(
                cell::read(&self.view(c))[..],
                [cell::Read { form: cell::Form::Single { percent: false, .. }, .. }]
            )
        });
        (found >= 1 && above).then_some(below)
    }

    /// The one figure in brackets in a row's cell of a column.
    fn bracketed(&self, row: &Row, column: usize) -> Option<Printed> {
        let cell = self.layout.cell_in(self.grid, row, column)?;
        match cell::read(&self.view(cell))[..] {
            [cell::Read { form: cell::Form::Single { value, .. }, .. }] => Some(value.printed),
            _ => None,
        }
    }

    /// Whether bare figures in the columns of groups are counts: nearly all are whole, and none above its group's size.
    fn has_bare_counts(&self) -> bool {
        const LEAST: usize = 6;
        let (mut whole, mut all) = (0, 0);
        for row in self.layout.rows.iter().filter(|r| r.role == RowRole::Data) {
            for cell in row.cells.clone() {
                let column = self.grid.cells[cell].column as usize;
                let Some(size) = self.layout.size(row, column).filter(|_| self.role_of(cell).summarises()) else {
                    continue;
                };
                let [cell::Read { form: cell::Form::Single { value, percent: false }, .. }] =
                    cell::read(&self.view(cell))[..]
                else {
                    continue;
                };
                all += 1;
                whole += usize::from(value.printed.count().is_some_and(|v| v <= size.value));
            }
        }
        all >= LEAST && 10 * whole >= 8 * all
    }

    /// Whether a row or a column holds figures from the start of the study.
    fn shows_start(&self) -> bool {
        let is_start = |view: SentenceView| {
            view.any(0, &["baseline", "pretreatment", "preintervention", "pretest"])
                || view.any(0, &["before", "pre"]) && view.len() <= 3
        };
        let rows = self.layout.rows.iter().filter(|r| matches!(r.role, RowRole::Data | RowRole::Section));
        let columns = self.layout.columns.iter().filter(|c| c.role.summarises()).filter_map(|c| c.header);
        rows.filter_map(|r| r.labels.last().copied()).chain(columns).any(|c| is_start(self.view(c)))
    }

    /// Whether two columns of results are of one comparison.
    fn same_bundle(&self, a: usize, b: usize) -> bool {
        let of = |k: usize| self.layout.columns.get(k).map(|c| (c.panel, c.bundle));
        of(a) == of(b)
    }

    /// The p-values of a row. `of_estimates` tells that it is a row of them below a row of estimates.
    fn read_p(&self, row: &Row, setting: &Setting, of_estimates: bool, readings: &mut Readings) {
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
            // `χ2(1) = 4.1` in a column headed "Significance" says itself what it is.
            if in_p_column && (0..view.len()).any(|i| view.sign(i, '=')) && cell::bare_p(&view).is_empty() {
                super::statistic::read(&view, &mut vec![false; view.len()], &mut readings.statistics);
            }
            if !in_p_column && row.role != RowRole::P {
                // `12.4 (3.1), P = 0.03` says itself what it is; so does `z = 2.1, P = 0.03`.
                let found = p::find(&view);
                readings.p.extend(found.iter().map(|x| x.reading(&view)));
                if *role == ColumnRole::Other || !found.is_empty() {
                    let mut taken = vec![false; view.len()];
                    found.iter().for_each(|x| taken[x.first..=x.last].fill(true));
                    let before = readings.statistics.len();
                    super::statistic::read(&view, &mut taken, &mut readings.statistics);
                    // `F = 0.36, NS`
                    let tested = readings.statistics.len() > before && found.is_empty();
                    if let Some(x) = cell::not_significant_at_end(&view).filter(|_| tested) {
                        readings.p.push(bare_reading(&view, x, Role::Effect, false));
                    }
                    super::interval::read(&view, &mut taken, &mut readings.intervals);
                }
                continue;
            }
            let column = self.grid.cells[cell].column as usize;
            let named: Vec<usize> = headed.iter().chain(self.layout.heads(column)).copied().collect();
            let times = self.layout.panel(column).is_some_and(|p| p.times);
            let p_role = if words(&named, Classes::INTERACTION) {
                Role::Interaction
            } else if words(&named, Classes::TREND) {
                Role::TrendOrJoint
            } else if !in_p_column && role.summarises() && !self.layout.rows_are_groups && !of_estimates
                || in_p_column && times
                || self.says(&named, &["within", "paired"])
            {
                // A row of p-values, one for each group: within the groups, over time.
                Role::WithinGroup
            } else if self.says(&named, &["noninferiority", "inferiority"]) {
                Role::NonInferiority
            } else if self.says(
                &named,
                &[
                    "normality",
                    "shapiro",
                    "levene",
                    "heterogeneity",
                    "homogeneity",
                    "breslow",
                    "hosmer",
                    "cochran",
                    "fit",
                ],
            ) {
                Role::AssumptionOrFit
            } else if setting.baseline || words(&named, Classes::BASELINE) && !self.says(&named, &["from", "change"]) {
                Role::Baseline
            } else {
                Role::Effect
            };
            let corrected = self.says(&named, &["corrected", "bonferroni", "tukey", "holm", "fdr"]);
            let bare = cell::bare_p(&view);
            if bare.is_empty() {
                readings.p.extend(p::find(&view).iter().map(|x| x.reading(&view)));
            }
            for x in bare {
                readings.p.push(bare_reading(&view, x, p_role, corrected));
            }
        }
    }

    /// The statistics of a row, in columns or a row of their own.
    fn read_statistics(&self, row: &Row, counts: bool, readings: &mut Readings) {
        let of_row = (row.role == RowRole::Statistic)
            .then(|| row.labels.last().map(|&l| statistic::Head::of(&self.view(l))))
            .flatten();
        let start = readings.statistics.len();
        for cell in row.cells.clone() {
            let role = self.role_of(cell);
            let column = self.grid.cells[cell].column as usize;
            let head = match (of_row, role) {
                (_, ColumnRole::Stub) => continue,
                (Some(head), _) => head,
                (None, ColumnRole::Statistic) => {
                    let mut head = statistic::Head::default();
                    for view in self.heads(column) {
                        let of = statistic::Head::of(&view);
                        if of.symbol.is_some() {
                            head = of;
                        }
                    }
                    head.settled(counts)
                }
                _ => continue,
            };
            // Degrees of freedom stand within a few cells of their statistic.
            let mut near = cell.saturating_sub(3).max(row.cells.start)..(cell + 4).min(row.cells.end);
            let df = near
                .find(|&i| {
                    *self.role_of(i) == ColumnRole::Df && self.same_bundle(self.grid.cells[i].column as usize, column)
                })
                .map_or((None, None), |i| self.freedom(i));
            let view = self.view(cell);
            match statistic::read(&view, head, df) {
                Some(s) => readings.statistics.push(s),
                // `F(1, 46) = 3.2` in the cell itself.
                None if readings.statistics[start..].iter().all(|s| s.sentence != view.id) => {
                    super::statistic::read(&view, &mut vec![false; view.len()], &mut readings.statistics);
                }
                None => {}
            }
        }
    }

    /// One or two degrees of freedom in a cell.
    fn freedom(&self, cell: usize) -> (Option<Figure>, Option<Figure>) {
        let view = self.view(cell);
        let mut found = (0..view.len()).filter_map(|i| Some(Figure::at(view.number(i)?, view.span(i, i))));
        (found.next(), found.next())
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
    /// By the headers of each column.
    heads: Vec<Meaning>,
    /// By its caption and notes.
    around: Meaning,
    /// It shows the participants as they were at the start.
    baseline: bool,
    /// Sizes that the figures of a column show, where no text does.
    shown: Vec<Option<summary::Sized>>,
    /// The one size that the caption or the notes give, for want of others.
    noted: Option<summary::Sized>,
    /// Bare figures are counts.
    bare_counts: bool,
    /// Columns of sizes.
    size_columns: Vec<usize>,
    /// The column of a standard error that all means of a row have in common.
    pooled: Option<usize>,
}

impl Setting {
    fn of(table: &Table, around: &Around) -> Setting {
        let mut columns = Meaning::default();
        let mut heads = vec![Meaning::default(); table.layout.columns.len()];
        for (k, column) in table.layout.columns.iter().enumerate() {
            for &header in &column.path {
                let view = table.view(header);
                heads[k].add(&view);
                if column.role == ColumnRole::Stub || column.role.summarises() {
                    columns.add(&view);
                }
            }
        }
        let views = |blocks: std::ops::Range<usize>| {
            blocks.flat_map(|b| table.scan.of_block(b)).map(|id| table.scan.view(table.manuscript, id))
        };
        let mut said = Meaning::default();
        views(around.caption.clone()).chain(views(around.notes.clone())).for_each(|v| said.add(&v));
        // "Changes of weight" over a table with a row or column of the start: its figures are levels, not changes.
        said.change &= !table.shows_start();
        let caption_says =
            |words: &[&str]| views(around.caption.clone()).any(|v| (0..v.len()).any(|i| v.any(i, words)));
        let title = table.manuscript.sections[table.block.section as usize].title.to_lowercase();
        let baseline = (caption_says(&["baseline", "demographic", "demographics", "characteristics"])
            || title.contains("baseline"))
            && !caption_says(&["change", "changes", "after", "outcome", "outcomes", "follow", "end", "during", "post"]);
        let sized = table.layout.columns.iter().any(|c| c.role.size().is_some());
        let shown = sizes::shown(table);
        let noted = if sized || shown.iter().any(Option::is_some) {
            None
        } else {
            let compares = table.layout.columns.iter().any(|c| c.role.compares());
            let named = |c: &&Column| c.role.label().is_some_and(|l| !l.is_empty()) && c.role.summarises();
            let summaries = heads.iter().filter(|h| h.mean || h.median).count();
            let single = !compares && table.layout.columns.iter().filter(named).count() <= summaries.max(1);
            sizes::noted(views(around.caption.clone()).chain(views(around.notes.clone())), single)
        };
        let bare_counts = table.has_bare_counts();
        let is_size = |(k, c): (usize, &Column)| (c.role == ColumnRole::Size).then_some(k);
        let size_columns = table.layout.columns.iter().enumerate().filter_map(is_size).collect();
        Setting {
            columns,
            heads,
            around: said,
            baseline,
            shown,
            noted,
            bare_counts,
            size_columns,
            pooled: table.layout.pooled(),
        }
    }
}
