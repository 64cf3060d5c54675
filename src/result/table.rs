//! Joining across the rows of a plain table: the P of a row with its groups, estimate and interval.

use super::sentence::Members;
use super::{Feature, MOST_TESTS, ReportedResult, StatedTest, feature};
use crate::context::{Stated, Test, tests_in};
use crate::layout::{Around, ColumnRole, Layout, Row, RowRole, around};
use crate::manuscript::{BlockKind, Grid, Manuscript};
use crate::reading::{Figure, Group, Inference, Origin, Readings, Scan, SentenceView, Style};
use crate::text::Span;
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
    let layout = Layout::of(block, number, grid);
    let around = around(manuscript, number);
    let table = Table { manuscript, scan, grid, first: scan.of_block(number).start, layout };
    let notes = table.notes(&around);
    let (mut p, mut groups) = (members.p.clone(), members.groups.clone());
    let (mut intervals, mut estimates) = (members.intervals.clone(), members.estimates.clone());
    for (index, row) in table.layout.rows.iter().enumerate() {
        // Each list is in the order of cells, so it is walked once.
        let end = table.first + row.cells.end as u32;
        let found = Found {
            p: take(&mut p, |i| readings.p[i].sentence < end),
            groups: take(&mut groups, |i| readings.groups[i].sentence < end),
            intervals: take(&mut intervals, |i| readings.intervals[i].sentence < end),
            estimates: take(&mut estimates, |i| readings.estimates[i].sentence < end),
        };
        table.results_of(index, &found, &notes, readings, out);
    }
}

/// The readings of one row.
struct Found {
    p: Range<usize>,
    groups: Range<usize>,
    intervals: Range<usize>,
    estimates: Range<usize>,
}

/// Takes the front of a range as far as a test accepts it.
fn take(rest: &mut Range<usize>, accept: impl Fn(usize) -> bool) -> Range<usize> {
    let start = rest.start;
    while rest.start < rest.end && accept(rest.start) {
        rest.start += 1;
    }
    start..rest.start
}

/// What the caption and notes of a table say of its analyses.
#[derive(Default)]
struct Notes {
    /// Tests, each with the mark that ties it to cells.
    tests: Vec<(Option<String>, Stated<Test>)>,
    /// Features said of the whole table.
    features: Vec<(Feature, Span)>,
}

struct Table<'a> {
    manuscript: &'a Manuscript,
    scan: &'a Scan,
    grid: &'a Grid,
    first: u32,
    layout: Layout,
}

impl<'a> Table<'a> {
    fn view(&self, cell: usize) -> SentenceView<'a> {
        self.scan.view(self.manuscript, self.first + cell as u32)
    }

    fn column_of(&self, sentence: u32) -> Option<&ColumnRole> {
        Some(self.layout.role(self.grid.cells.get((sentence - self.first) as usize)?))
    }

    fn results_of(
        &self,
        index: usize,
        found: &Found,
        notes: &Notes,
        readings: &Readings,
        out: &mut Vec<ReportedResult>,
    ) {
        let row = &self.layout.rows[index];
        let mut compared: Vec<usize> = found
            .groups
            .clone()
            .filter(|&g| matches!(self.column_of(readings.groups[g].sentence), Some(ColumnRole::Group { .. })))
            .collect();
        let arms = self.layout.columns.iter().filter(|c| matches!(c.role, ColumnRole::Group { .. })).count();
        // A group left out, or figures of another kind beside: the P is not of what could be read.
        let whole = compared.len() == arms && compared.windows(2).all(|w| alike(readings, w[0], w[1]));
        if !whole || arms < 2 {
            compared.clear();
        }
        let in_p_column = |i: &usize| self.column_of(readings.p[*i].sentence) == Some(&ColumnRole::P);
        let own_p: Vec<usize> = found.p.clone().filter(in_p_column).collect();
        let joined = self.layout.plain && own_p.len() <= 1 && found.intervals.len() <= 1 && found.estimates.len() <= 1;
        let p = own_p.first().copied();
        let (interval, estimate) = (found.intervals.clone().next(), found.estimates.clone().next());
        if joined && (p.is_some() || interval.is_some() || estimate.is_some()) {
            let mut result = ReportedResult { p, interval, estimate, groups: compared, ..ReportedResult::default() };
            if let Some(p) = p.filter(|_| self.shares_p(index, &result.groups, readings)) {
                result.features.push((Feature::OtherGroups, readings.p[p].span));
            }
            self.describe(row, &mut result, notes, readings);
            out.push(result);
        }
        for p in found.p.clone().filter(|i| !joined || !in_p_column(i)) {
            out.push(ReportedResult { p: Some(p), ..ReportedResult::default() });
        }
        if !joined {
            for interval in found.intervals.clone() {
                out.push(ReportedResult { interval: Some(interval), ..ReportedResult::default() });
            }
        }
        for g in found.groups.clone().filter(|&g| is_arithmetic(&readings.groups[g])) {
            out.push(ReportedResult { groups: vec![g], ..ReportedResult::default() });
        }
    }

    /// Whether a row's P may be that of several rows: a row beside it has figures and no P of its own. Two rows that
    /// share out the whole of each group ("male", "female") have one and the same P.
    fn shares_p(&self, index: usize, groups: &[usize], readings: &Readings) -> bool {
        let bare = |k: Option<usize>| {
            k.and_then(|k| self.layout.rows.get(k)).is_some_and(|row| {
                let empty = |c: usize| self.view(c).is_empty();
                let role = |c: usize| self.layout.role(&self.grid.cells[c]);
                row.role == RowRole::Data
                    && row.cells.clone().any(|c| role(c).size().is_some() && !empty(c))
                    && row.cells.clone().all(|c| *role(c) != ColumnRole::P || empty(c))
            })
        };
        let beside = match (bare(index.checked_sub(1)), bare(index.checked_add(1))) {
            (false, false) => return false,
            (true, true) => return true,
            (true, false) if bare(index.checked_sub(2)) => return true,
            (false, true) if bare(index.checked_add(2)) => return true,
            (true, false) => index - 1,
            (false, true) => index + 1,
        };
        let cells = &self.layout.rows[beside].cells;
        let sentences = self.first + cells.start as u32..self.first + cells.end as u32;
        let column = |s: u32| self.grid.cells.get((s - self.first) as usize).map(|c| c.column);
        let other_half = |g: usize| {
            let group = &readings.groups[g];
            let count = |f: Option<Figure>| f.and_then(|f| f.printed.count());
            // The row beside is at most a row's width away in the list.
            let near = g.saturating_sub(2 * cells.len())..(g + 2 * cells.len()).min(readings.groups.len());
            readings.groups[near].iter().any(|o| {
                sentences.contains(&o.sentence)
                    && column(o.sentence) == column(group.sentence)
                    && count(o.events).zip(count(group.events)).map(|(a, b)| a.saturating_add(b)) == count(group.total)
                    && group.total.is_some()
            })
        };
        groups.is_empty() || !groups.iter().all(|&g| other_half(g))
    }

    fn describe(&self, row: &Row, result: &mut ReportedResult, notes: &Notes, readings: &Readings) {
        let mut features: Vec<(Feature, Span)> = Vec::new();
        let p_cell = result.p.map(|p| (readings.p[p].sentence - self.first) as usize);
        let header = |role: &ColumnRole| self.layout.columns.iter().find(|c| c.role == *role).and_then(|c| c.header);
        let p_head = p_cell.and_then(|_| header(&ColumnRole::P));
        let estimate_head = result.estimate.and_then(|_| header(&ColumnRole::Estimate));
        let named = row.labels.iter().copied().chain(row.section).chain(p_head).chain(estimate_head);
        let mut here: Vec<Stated<Test>> = Vec::new();
        for cell in named {
            let view = self.view(cell);
            features.extend(of_label(&view));
            here.extend(tests_of(&view));
        }
        // Tests that the notes tie to this P by a mark; a mark on the column's head ties them to all its rows.
        let marks: Vec<String> =
            p_cell.into_iter().chain(p_head).flat_map(|cell| self.marks(&self.view(cell))).collect();
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
        features.extend(&notes.features);
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

    /// Reads the caption and the notes once.
    fn notes(&self, around: &Around) -> Notes {
        let mut notes = Notes::default();
        for block in around.caption.clone().chain(around.notes.clone()) {
            let caption = around.caption.contains(&block);
            // A mark holds until the next one, also past the end of a sentence.
            let mut mark: Option<String> = None;
            for id in self.scan.of_block(block) {
                let view = self.scan.view(self.manuscript, id);
                let mut at = 0;
                for test in tests_in(&view).into_iter().take(MOST_TESTS.saturating_sub(notes.tests.len())) {
                    let (value, first, last) = test;
                    if !caption {
                        mark = (at..first).rev().find_map(|i| mark_at(&view, i)).or(mark);
                    }
                    at = first;
                    notes.tests.push((mark.clone(), Stated { value, span: view.span(first, last) }));
                }
                if !caption {
                    mark = (at..view.len()).rev().find_map(|i| mark_at(&view, i)).or(mark);
                }
                notes.features.extend(feature::of_words(&view).into_iter().filter(|&(f, _)| {
                    matches!(f, Feature::Adjusted | Feature::Imputed | Feature::Transformed | Feature::Corrected)
                }));
                if let Some(i) = (0..view.len()).find(|&i| view.any(i, &["paired", "within-group", "intragroup"])) {
                    notes.features.push((Feature::Paired, view.span(i, i)));
                }
            }
        }
        notes
    }

    /// The footnote marks of a cell.
    fn marks(&self, view: &SentenceView) -> Vec<String> {
        let fused = |i: usize| i > 0 && view.number(i - 1).is_some() && view.word(i).len() == 1;
        (0..view.len())
            .filter_map(|i| {
                mark_at(view, i).or_else(|| {
                    (view.get(i).is_some_and(|t| t.is_word()) && fused(i)).then(|| view.word(i).to_lowercase())
                })
            })
            .collect()
    }
}

/// A footnote mark at a token: raised, or one of the signs that serve for it.
fn mark_at(view: &SentenceView, i: usize) -> Option<String> {
    let raised = view.style(i) == Style::Superscript;
    let sign = view.signs(i, &['*', '†', '‡', '§', '¶', '#', '$', '∗']);
    (raised || sign).then(|| {
        // `**` is another mark than `*`.
        let same = |k: usize| view.word(k) == view.word(i) && !view.spaced(k);
        let before = (0..i).rev().take_while(|&k| same(k + 1) && view.word(k) == view.word(i)).count();
        view.word(i).to_lowercase().repeat(before + 1)
    })
}

fn tests_of(view: &SentenceView) -> Vec<Stated<Test>> {
    tests_in(view).into_iter().map(|(value, a, b)| Stated { value, span: view.span(a, b) }).collect()
}

/// The features that a label or header shows. "Baseline" in a label names a time, not a paired analysis.
fn of_label(view: &SentenceView) -> Vec<(Feature, Span)> {
    let mut found: Vec<(Feature, Span)> = feature::of_words(view);
    let from_baseline =
        (0..view.len()).any(|i| view.any(i, &["from", "versus", "vs"]) && view.any(i + 1, &["baseline"]));
    let at = |span: Span| view.token_at(span.start);
    found.retain(|&(f, span)| f != Feature::Paired || from_baseline || !view.eq(at(span), "baseline"));
    found
}

/// Whether two groups are summed up alike.
fn alike(readings: &Readings, a: usize, b: usize) -> bool {
    let kind = |g: &Group| (g.mean.is_some(), g.median.is_some(), g.events.is_some(), g.spread_kind);
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
    let inferred = |o: Origin| matches!(o, Origin::Inferred(Inference::FromPercent, _));
    group.events.is_some() && group.percent.is_some() && group.total.is_some_and(|t| !inferred(t.origin))
}
