//! Across a table: each P, estimate, interval or statistic of a row, or of a block of rows, with the groups it compares.

mod block;
mod notes;

use super::sentence::Members;
use super::{Feature, ReportedResult, StatedTest, feature};
use crate::context::{Stated, Test};
use crate::layout::{ColumnRole, Layout, Panel, Row, RowRole, around};
use crate::manuscript::{BlockKind, Grid, Manuscript};
use crate::reading::{Figure, Group, Inference, Readings, Scan, SentenceView, SpreadKind, Symbol};
use crate::text::Span;
use notes::{Notes, of_label, tests_of};
use std::ops::Range;

/// Appends the results of one table; `members` are all its readings.
pub(super) fn join(
    manuscript: &Manuscript,
    scan: &Scan,
    number: usize,
    members: &Members,
    readings: &Readings,
    out: &mut Vec<ReportedResult>,
) {
    let block = &manuscript.blocks[number];
    let BlockKind::Table(grid) = &block.kind else { return };
    let Some(layout) = readings.layout(number) else { return };
    let around = around(manuscript, number);
    let table = Table { manuscript, scan, grid, first: scan.of_block(number).start, layout, members, readings };
    let notes = table.notes(&around);
    for index in 0..table.layout.rows.len() {
        table.results_of(index, &notes, out);
    }
}

struct Table<'a> {
    manuscript: &'a Manuscript,
    scan: &'a Scan,
    grid: &'a Grid,
    first: u32,
    layout: &'a Layout,
    members: &'a Members,
    readings: &'a Readings,
}

/// The members of a list of readings, in order, that stand in one cell.
fn of_sentence<T>(list: &[T], members: &Range<usize>, sentence: impl Fn(&T) -> u32, id: u32) -> Range<usize> {
    let part = &list[members.clone()];
    let first = part.partition_point(|x| sentence(x) < id);
    let count = part[first..].partition_point(|x| sentence(x) <= id);
    members.start + first..members.start + first + count
}

/// The readings of the result columns of one comparison in one row.
#[derive(Default)]
struct Bundle {
    panel: Option<usize>,
    number: usize,
    p: Vec<usize>,
    intervals: Vec<usize>,
    estimates: Vec<usize>,
    statistics: Vec<usize>,
    /// Columns that hold them.
    columns: Vec<usize>,
}

impl<'a> Table<'a> {
    fn view(&self, cell: usize) -> SentenceView<'a> {
        self.scan.view(self.manuscript, self.first + cell as u32)
    }

    fn id(&self, cell: usize) -> u32 {
        self.first + cell as u32
    }

    fn cell_of(&self, sentence: u32) -> usize {
        (sentence - self.first) as usize
    }

    fn p_in(&self, cell: usize) -> Range<usize> {
        of_sentence(&self.readings.p, &self.members.p, |x| x.sentence, self.id(cell))
    }

    fn groups_in(&self, cell: usize) -> Range<usize> {
        of_sentence(&self.readings.groups, &self.members.groups, |x| x.sentence, self.id(cell))
    }

    fn intervals_in(&self, cell: usize) -> Range<usize> {
        of_sentence(&self.readings.intervals, &self.members.intervals, |x| x.sentence, self.id(cell))
    }

    fn estimates_in(&self, cell: usize) -> Range<usize> {
        of_sentence(&self.readings.estimates, &self.members.estimates, |x| x.sentence, self.id(cell))
    }

    fn statistics_in(&self, cell: usize) -> Range<usize> {
        of_sentence(&self.readings.statistics, &self.members.statistics, |x| x.sentence, self.id(cell))
    }

    fn column(&self, cell: usize) -> usize {
        self.grid.cells[cell].column as usize
    }

    fn role(&self, cell: usize) -> &ColumnRole {
        self.layout.role(&self.grid.cells[cell])
    }

    fn results_of(&self, index: usize, notes: &Notes, out: &mut Vec<ReportedResult>) {
        let row = &self.layout.rows[index];
        let mut bundles: Vec<Bundle> = Vec::new();
        for cell in row.cells.clone() {
            let (p, intervals) = (self.p_in(cell), self.intervals_in(cell));
            let (estimates, statistics) = (self.estimates_in(cell), self.statistics_in(cell));
            if p.is_empty() && intervals.is_empty() && estimates.is_empty() && statistics.is_empty() {
                continue;
            }
            let k = self.column(cell);
            let column = &self.layout.columns[k];
            if matches!(row.role, RowRole::P | RowRole::Statistic) && !column.role.compares() {
                self.of_column(index, cell, notes, out);
                continue;
            }
            if !column.role.compares() {
                // An estimate over its P is joined to it there.
                if self.p_below(index, k).is_none() || estimates.is_empty() {
                    self.of_cell(row, cell, notes, out);
                }
                continue;
            }
            // Those of one comparison stand side by side.
            if bundles.last().is_none_or(|b| b.panel != column.panel || b.number != column.bundle) {
                bundles.push(Bundle { panel: column.panel, number: column.bundle, ..Bundle::default() });
            }
            let Some(bundle) = bundles.last_mut() else { continue };
            bundle.columns.push(k);
            bundle.p.extend(p);
            bundle.intervals.extend(intervals);
            bundle.estimates.extend(estimates);
            bundle.statistics.extend(statistics);
        }
        for bundle in &bundles {
            self.of_bundle(index, bundle, notes, out);
        }
        for cell in row.cells.clone() {
            for g in self.groups_in(cell).filter(|&g| is_arithmetic(&self.readings.groups[g])) {
                out.push(ReportedResult { groups: vec![g], ..ReportedResult::default() });
            }
        }
    }

    /// The groups of a row that the results of a panel compare, one list for each figure of a cell where cells hold
    /// several; empty where one cannot be read.
    fn compared(&self, row: &Row, panel: Option<usize>) -> Vec<Vec<usize>> {
        let Some(panel) = panel.and_then(|k| self.layout.panels.get(k)) else { return Vec::new() };
        /// More groups than one result compares.
        const MOST: usize = 40;
        if panel.groups.len() > MOST {
            return Vec::new();
        }
        let mut lists: Vec<Vec<usize>> = Vec::new();
        let mut met = 0;
        let mut blank = 0;
        for cell in panel.groups.iter().filter_map(|&k| self.layout.cell_in(self.grid, row, k)) {
            let groups: Vec<usize> = self.groups_in(cell).collect();
            // A dash: the group has no such figure.
            if groups.is_empty() && self.is_dash(cell) {
                blank += 1;
                continue;
            }
            if met == 0 {
                lists = vec![Vec::new(); groups.len()];
            }
            if groups.len() != lists.len() || groups.is_empty() {
                return Vec::new();
            }
            met += 1;
            for (list, g) in lists.iter_mut().zip(groups) {
                list.push(g);
            }
        }
        if met + blank < panel.groups.len() || met < 2 { Vec::new() } else { lists }
    }

    /// The results in the columns of one comparison.
    fn of_bundle(&self, index: usize, bundle: &Bundle, notes: &Notes, out: &mut Vec<ReportedResult>) {
        let row = &self.layout.rows[index];
        let lists = self.compared(row, bundle.panel);
        let same = |list: &[usize]| list.windows(2).all(|w| alike(self.readings, w[0], w[1]));
        let results =
            bundle.p.len().max(bundle.estimates.len()).max(bundle.statistics.len()).max(bundle.intervals.len());
        for k in 0..results {
            let p = bundle.p.get(k).copied();
            let estimate = bundle.estimates.get(k).copied();
            let statistic = bundle.statistics.get(k).copied();
            let own = |&&i: &&usize| {
                let of = self.readings.intervals[i].estimate.map(|e| e.1);
                estimate.is_none_or(|e| of.is_none_or(|s| s == self.readings.estimates[e].span))
            };
            let mut interval = bundle.intervals.iter().find(own).copied();
            if estimate.is_none() {
                interval = bundle.intervals.get(k).copied();
            }
            let mut groups = match &lists[..] {
                [] => Vec::new(),
                [one] => one.clone(),
                // Cells and P cells of as many figures: the first belongs to the first.
                many if many.len() == bundle.p.len() && results == many.len() => many[k].clone(),
                many => many.concat(),
            };
            let mut result = ReportedResult { p, interval, estimate, statistic, ..ReportedResult::default() };
            if results > 1 && lists.len() != results && k > 0 && p.is_some() {
                result.features.push((Feature::Unclear, self.readings.p[bundle.p[k]].span));
            }
            let span = self.span_of(&result);
            if let (Some(p), true) = (p, k == 0) {
                let block = self.block_of(index, self.cell_of(self.readings.p[p].sentence), bundle.panel, &groups);
                if let Some(block) = block {
                    groups = block.groups;
                    result.arms = block.arms;
                    if block.doubtful {
                        result.features.push((Feature::OtherGroups, span));
                    }
                }
            }
            if !same(&groups) && lists.len() <= 1 {
                // One group over time, and a change of another kind behind it.
                let times = bundle.panel.and_then(|k| self.layout.panels.get(k)).is_some_and(|p| p.times || p.doubtful);
                groups.retain(|&g| times && alike(self.readings, groups_first(&lists), g));
                if groups.len() < 2 {
                    groups.clear();
                }
            }
            if let Some(panel) = bundle.panel.and_then(|k| self.layout.panels.get(k))
                && !groups.is_empty()
            {
                if let Some(pair) = self.named_pair(bundle, &groups) {
                    groups = pair;
                }
                if panel.doubtful || bundle.columns.iter().any(|&k| self.layout.columns[k].doubtful) {
                    result.features.push((Feature::Unclear, span));
                }
                // One standard error for all: of a model, or of one group.
                let se = |g: &usize| self.readings.groups[*g].spread_kind == Some(SpreadKind::Se);
                if self.layout.pooled().is_some() && groups.iter().all(se) {
                    result.features.push((Feature::Unclear, span));
                }
                if panel.times {
                    result.features.push((Feature::Paired, span));
                }
            }
            if bundle.panel.and_then(|k| self.layout.panels.get(k)).is_some_and(|p| self.has_dash(row, p)) {
                result.features.push((Feature::OtherGroups, span));
            }
            if shares_of_row(self.readings, &groups) {
                result.features.push((Feature::OtherGroups, span));
            }
            result.groups = groups;
            self.describe(row, &bundle.columns, &mut result, notes);
            out.push(result);
        }
    }

    /// A group of the panel has a dash in the row.
    fn has_dash(&self, row: &Row, panel: &Panel) -> bool {
        panel.groups.iter().filter_map(|&k| self.layout.cell_in(self.grid, row, k)).any(|c| self.is_dash(c))
    }

    /// The two groups that the head of a P names, where the panel has more: `P (A vs. C)`.
    fn named_pair(&self, bundle: &Bundle, groups: &[usize]) -> Option<Vec<usize>> {
        if groups.len() < 3 || groups.len() > 8 {
            return None;
        }
        let heads = bundle.columns.iter().filter(|&&k| self.layout.columns[k].role == ColumnRole::P);
        let heads: Vec<usize> = heads.flat_map(|&k| self.layout.columns[k].path.iter().copied()).collect();
        let versus = |c: &usize| {
            let view = self.view(*c);
            (0..view.len()).any(|i| view.any(i, &["vs", "versus", "v"]))
        };
        if !heads.iter().any(versus) {
            return None;
        }
        let named = |&&g: &&usize| {
            let label = &self.readings.groups[g].label;
            let words: Vec<&str> = label.split(|c: char| !c.is_alphanumeric()).filter(|w| !w.is_empty()).collect();
            let own = |w: &&&str| !matches!(w.to_ascii_lowercase().as_str(), "group" | "arm" | "n" | "the" | "and");
            heads.iter().any(|&c| {
                let view = self.view(c);
                let mut words = words.iter().filter(own).peekable();
                words.peek().is_some() && words.all(|w| (0..view.len()).any(|i| view.eq(i, w)))
            })
        };
        let pair: Vec<usize> = groups.iter().filter(named).copied().collect();
        (pair.len() == 2).then_some(pair)
    }

    /// Any place of a result.
    fn span_of(&self, result: &ReportedResult) -> Span {
        let r = self.readings;
        let p = result.p.map(|i| r.p[i].span);
        let interval = || result.interval.map(|i| r.intervals[i].span);
        let estimate = || result.estimate.map(|i| r.estimates[i].span);
        let statistic = || result.statistic.map(|i| r.statistics[i].span);
        p.or_else(interval).or_else(estimate).or_else(statistic).unwrap_or(Span::new(0, 0, 0))
    }

    /// What a cell says of itself: `z = 2.1, P = 0.03`, `12.4 (3.1), P = 0.03`.
    fn of_cell(&self, row: &Row, cell: usize, notes: &Notes, out: &mut Vec<ReportedResult>) {
        let (p, statistics) = (self.p_in(cell), self.statistics_in(cell));
        let (intervals, estimates) = (self.intervals_in(cell), self.estimates_in(cell));
        let count = p.len().max(statistics.len()).max(intervals.len()).max(estimates.len());
        // A column of tests beside the groups.
        let beside = *self.role(cell) == ColumnRole::Other && count == 1;
        let mean = |k: usize| {
            let of = self.readings.intervals[intervals.clone().nth(k)?].estimate?.1;
            self.groups_in(cell).find(|&g| self.readings.groups[g].span.overlaps(of))
        };
        let groups: Vec<usize> = if beside {
            let group = |&c: &usize| matches!(self.role(c), ColumnRole::Group { .. });
            row.cells.clone().filter(group).flat_map(|c| self.groups_in(c)).collect()
        } else {
            Vec::new()
        };
        for k in 0..count {
            let nth = |list: &Range<usize>| list.clone().nth(k);
            let mut result = ReportedResult {
                p: nth(&p),
                statistic: nth(&statistics),
                interval: nth(&intervals),
                estimate: nth(&estimates),
                groups: if beside { groups.clone() } else { mean(k).into_iter().collect() },
                ..ReportedResult::default()
            };
            if beside {
                let span = self.span_of(&result);
                // With its degrees of freedom, a statistic in the cell is that of the P, whatever groups they compare.
                let whole = |s: usize| {
                    let s = &self.readings.statistics[s];
                    s.df1.is_some() || s.symbol == Symbol::Z
                };
                let open = if result.statistic.is_some_and(whole) { Feature::OtherGroups } else { Feature::Unclear };
                result.features.push((open, span));
                self.describe(row, &[self.column(cell)], &mut result, notes);
            }
            out.push(result);
        }
    }

    /// The cell of a column in the row below, where that is a row of p-values and has one there.
    fn p_below(&self, index: usize, column: usize) -> Option<usize> {
        let below = self.layout.rows.get(index + 1).filter(|r| r.role == RowRole::P)?;
        let cell = self.layout.cell_in(self.grid, below, column)?;
        (!self.p_in(cell).is_empty()).then_some(cell)
    }

    /// A P or statistic in a row of its own: it compares the rows above it in its column.
    fn of_column(&self, index: usize, cell: usize, notes: &Notes, out: &mut Vec<ReportedResult>) {
        /// More rows than one P compares.
        const MOST: usize = 8;
        let k = self.column(cell);
        let row = &self.layout.rows[index];
        // `Difference (95% CI)` in the row above: the P is that of the estimate.
        let over = index.checked_sub(1).map(|i| &self.layout.rows[i]).filter(|r| r.role == RowRole::Data);
        let over = over.and_then(|r| self.layout.cell_in(self.grid, r, k));
        if let Some(over) = over.filter(|&c| !self.estimates_in(c).is_empty())
            && let Some(p) = self.p_in(cell).next()
        {
            let (estimate, interval) = (self.estimates_in(over).next(), self.intervals_in(over).next());
            let mut result = ReportedResult { p: Some(p), estimate, interval, ..ReportedResult::default() };
            self.describe(row, &[k], &mut result, notes);
            out.push(result);
            return;
        }
        let mut groups: Vec<usize> = Vec::new();
        let mut statistic = self.statistics_in(cell).next();
        let mut rows = 0;
        let at = |row: &Row| self.layout.cell_in(self.grid, row, k);
        for above in self.layout.rows[..index].iter().rev().take(MOST + 4) {
            match above.role {
                RowRole::Statistic if row.role == RowRole::P && rows == 0 => {
                    statistic = statistic.or_else(|| at(above).and_then(|c| self.statistics_in(c).next()));
                    continue;
                }
                RowRole::Data if above.section == row.section => {}
                _ => break,
            }
            rows += 1;
            if let Some(c) = at(above) {
                groups.splice(0..0, self.groups_in(c));
            }
        }
        // The statistic is joined to the P below it.
        let below = self.layout.rows.get(index + 1).filter(|r| row.role == RowRole::Statistic && r.role == RowRole::P);
        if below.and_then(at).is_some_and(|c| !self.p_in(c).is_empty()) {
            return;
        }
        if groups.len() < 2 || groups.len() > MOST {
            groups.clear();
        }
        for p in self.p_in(cell).map(Some).chain(self.p_in(cell).is_empty().then_some(None)) {
            let mut result = ReportedResult { p, statistic, groups: groups.clone(), ..ReportedResult::default() };
            let span = self.span_of(&result);
            let feature = if self.layout.rows_are_groups { Feature::Unclear } else { Feature::Paired };
            // Two rows of groups have one comparison.
            if !(self.layout.rows_are_groups && groups.len() == 2) {
                result.features.push((feature, span));
            }
            self.describe(row, &[k], &mut result, notes);
            out.push(result);
        }
    }

    /// Adds what labels, heads and notes say of the analysis of a result.
    fn describe(&self, row: &Row, columns: &[usize], result: &mut ReportedResult, notes: &Notes) {
        let readings = self.readings;
        let mut features: Vec<(Feature, Span)> = Vec::new();
        let p_cell = result.p.map(|p| self.cell_of(readings.p[p].sentence));
        let mut heads: Vec<usize> = columns.iter().flat_map(|&k| self.layout.columns[k].path.iter().copied()).collect();
        heads.sort_unstable();
        heads.dedup();
        let named = row.labels.iter().copied().chain(row.section).chain(heads.iter().copied());
        let mut here: Vec<Stated<Test>> = Vec::new();
        for cell in named {
            let view = self.view(cell);
            features.extend(of_label(&view));
            here.extend(tests_of(&view));
        }
        // Tests that the notes tie to this P by a mark; a mark on the column's head ties them to all its rows.
        let marks: Vec<String> = p_cell
            .into_iter()
            .chain(heads.iter().copied())
            .chain(row.labels.iter().copied())
            .flat_map(|cell| self.marks(&self.view(cell)))
            .collect();
        let tied: Vec<Stated<Test>> = notes
            .tests
            .iter()
            .filter(|(mark, _)| mark.as_ref().is_some_and(|m| marks.contains(m)))
            .map(|&(_, test)| test)
            .collect();
        let groups: Vec<&Group> = result.groups.iter().map(|&g| &readings.groups[g]).collect();
        // One test for a whole column is the test of those rows only whose figures suit it.
        here.extend(&tied);
        let (stated, others): (Vec<_>, Vec<_>) = here.into_iter().partition(|t| suits(t.value, &groups));
        for test in &stated {
            features.extend(feature::of_test(test.value).map(|f| (f, test.span)));
        }
        if let Some(p) = result.p.map(|p| &readings.p[p]) {
            features.extend(feature::of_p(p).map(|f| (f, p.span)));
        }
        if let Some(e) = result.estimate.map(|e| &readings.estimates[e]).filter(|e| e.adjusted) {
            features.push((Feature::Adjusted, e.span));
        }
        if let Some(g) = groups.iter().find(|g| g.change) {
            features.push((Feature::Change, g.span));
        }
        if let Some(g) = groups.iter().find(|g| g.median.is_some()) {
            features.push((Feature::Ranked, g.span));
        }
        let applies = |mark: &Option<String>| mark.as_ref().is_none_or(|m| marks.contains(m));
        features.extend(notes.features.iter().filter(|n| applies(&n.0)).map(|n| (n.1, n.2)));
        for (feature, span) in features {
            if result.features.iter().all(|&(f, _)| f != feature) {
                result.features.push((feature, span));
            }
        }
        result.tests.extend(stated.into_iter().map(|test| StatedTest { test, here: true }));
        result.tests.extend(others.into_iter().map(|test| StatedTest { test, here: false }));
        let proposed = notes.tests.iter().filter(|(mark, _)| mark.is_none()).map(|&(_, test)| test);
        result.tests.extend(proposed.map(|test| StatedTest { test, here: false }));
    }
}

/// Counts that share out one total among them are no samples to compare.
fn shares_of_row(readings: &Readings, groups: &[usize]) -> bool {
    let count = |f: Option<Figure>| f.and_then(|f| f.printed.count());
    let of = |g: &usize| &readings.groups[*g];
    let sum = groups.iter().try_fold(0u64, |s, g| s.checked_add(count(of(g).events)?));
    groups.len() > 1 && sum.is_some() && groups.iter().all(|g| count(of(g).total) == sum)
}

/// The first group of the first list; only asked where there is one.
fn groups_first(lists: &[Vec<usize>]) -> usize {
    lists.first().and_then(|l| l.first()).copied().unwrap_or(0)
}

/// Whether two groups are summed up alike.
fn alike(readings: &Readings, a: usize, b: usize) -> bool {
    let kind =
        |g: &Group| (g.mean.is_some(), g.median.is_some(), g.events.is_some() || g.percent.is_some(), g.spread_kind);
    kind(&readings.groups[a]) == kind(&readings.groups[b])
}

/// Whether a test can be that of these groups: of means, of counts, of ranks.
fn suits(test: Test, groups: &[&Group]) -> bool {
    use Test::*;
    let Some(first) = groups.first() else { return true };
    match test {
        T | WelchT | Anova => first.mean.is_some() || first.median.is_some(),
        ChiSquared | YatesChiSquared | FisherExact => first.events.is_some() || first.percent.is_some(),
        _ => true,
    }
}

/// Count, percent and total of one group that stand for themselves: the total printed with them, or the header's where
/// it fits. One that was inferred from the percent itself proves nothing.
fn is_arithmetic(group: &Group) -> bool {
    let stated = group.total.is_some_and(|t| !t.is_inferred(Inference::FromPercent));
    group.events.is_some() && group.percent.is_some() && stated
}
