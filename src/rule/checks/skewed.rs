//! Means below twice their standard deviation, of quantities that cannot be negative.

use crate::layout::{Row, around};
use crate::manuscript::Grid;
use crate::printed::{Printed, Range};
use crate::reading::quantity::{cannot_be_negative, is_of_changes, is_transformed, may_be_negative, says_when_or_how};
use crate::reading::{Group, SpreadKind};
use crate::rule::finding::Finding;
use crate::rule::level::Weight;
use crate::rule::look::Look;
use crate::rule::wording;
use std::collections::{HashMap, HashSet};

/// Cells in which the mean must be so low: one may be a misprint.
const CELLS: usize = 2;

/// One note for a table in which such means stand.
pub fn low_means(facts: &Look) -> Vec<Finding> {
    let enough = |groups: &[Group]| groups.iter().filter(|g| is_low(g)).count() >= CELLS;
    let tables = facts.groups_of_tables().filter(|(.., groups)| enough(groups));
    tables.filter_map(|(number, grid, groups)| of_table(facts, number, grid, groups)).collect()
}

/// A positive mean below twice its SD, whatever the rounding, that is no count with its percentage.
fn is_low(g: &Group) -> bool {
    let (Some(mean), [sd]) = (g.mean, &g.spread[..]) else { return false };
    let whole = mean.places == 0 && sd.places == 0;
    let share = g.n.filter(|_| whole).map(|n| 100.0 * mean.value() / n.printed.value());
    g.spread_kind == Some(SpreadKind::Sd)
        && !g.change
        && mean.value() > 0.0
        && mean.rounded().hi < 2.0 * sd.rounded().lo
        && !share.is_some_and(|share| sd.rounded().contains(share))
}

fn of_table(facts: &Look, number: usize, grid: &Grid, groups: &[Group]) -> Option<Finding> {
    let blocks = &facts.manuscript.blocks;
    let block = &blocks[number];
    let mut around = around(facts.manuscript, number);
    let transformed = around.notes.any(|b| is_transformed(&blocks[b].text));
    if transformed || around.caption.any(|b| is_of_changes(&blocks[b].text)) {
        return None;
    }
    let layout = facts.readings.layout(number)?;
    let text = |cell: usize| wording::beginning(block.text_of(&grid.cells[cell]));
    let row_of = |g: &Group| {
        let cell = grid.cell_at(g.span.start)?;
        layout.row_of(grid, cell).map(|(at, r)| (at, r, cell.column as usize))
    };
    let heads = |column: usize| layout.heads(column).iter().map(|&h| text(h));
    // Rows of medians, and the titles that they stand under: there the median is given already.
    let with_median: Vec<_> = groups.iter().filter(|g| g.median.is_some()).filter_map(row_of).collect();
    let medians: HashSet<usize> = with_median.iter().map(|(at, ..)| *at).collect();
    let titles: HashSet<usize> = with_median.iter().filter_map(|(_, r, _)| r.section).collect();
    let has_median = |at: usize, row: &Row| {
        let near = (at.saturating_sub(1)..=at + 1).any(|k| medians.contains(&k));
        near || row.section.is_some_and(|s| titles.contains(&s))
    };
    let named = |row: &Row, column: usize| -> Option<String> {
        let own = row.labels.iter().copied().map(text);
        let title = row.section.map(text);
        if own.clone().chain(title).chain(heads(column)).any(may_be_negative) {
            return None;
        }
        // A title names what the rows below it hold where they only say when or how it was summed up.
        let title = title.filter(|_| own.clone().all(says_when_or_how));
        let heads = heads(column).filter(|_| layout.rows_are_groups);
        own.chain(title).chain(heads).find(|t| cannot_be_negative(t)).map(wording::one_line)
    };
    let low = groups.iter().filter(|g| is_low(g)).filter_map(|g| {
        let (at, row, column) = row_of(g)?;
        named(row, column).filter(|_| !has_median(at, row)).map(|name| (g, name, column))
    });
    let low: Vec<(&Group, String, usize)> = low.collect();
    let counts = columns_of_counts(facts, &low);
    let low: Vec<_> =
        low.into_iter().filter(|(g, _, column)| !(in_brackets(facts, g) && counts.contains(column))).collect();
    let (first, name, _) = low.first().filter(|_| low.len() >= CELLS)?;
    let quote = facts.shown(first.span);
    let says = format!(
        "In {} cells of this table the mean is below twice its standard deviation, as {quote} for “{name}”, which cannot \
         be negative.",
        low.len()
    );
    let mut f = Finding::at(first.span, Weight::reporting(), says);
    f.working = Some(working(first)?);
    f.related = low[1..].iter().map(|(g, ..)| (g.span, "another such mean".to_owned())).collect();
    f.figures = low.iter().map(|(g, ..)| g.span).collect();
    Some(f)
}

/// Whole numbers in the form of a count with its percentage: `19 (28)`.
fn in_brackets(facts: &Look, g: &Group) -> bool {
    let whole = |p: &Printed| p.places == 0;
    g.mean.as_ref().is_some_and(whole) && g.spread.iter().all(whole) && !facts.quote(g.span).contains('±')
}

/// Columns in which such figures are all shares of one total: they may be counts, whatever the caption says.
fn columns_of_counts(facts: &Look, cells: &[(&Group, String, usize)]) -> HashSet<usize> {
    let mut totals: HashMap<usize, Option<Range>> = HashMap::new();
    for (g, _, column) in cells.iter().filter(|(g, ..)| in_brackets(facts, g)) {
        let (Some(count), Some(percent)) = (g.mean, g.spread.first().map(|s| s.rounded())) else { continue };
        let own = Range::new(100.0 * count.value() / percent.hi, 100.0 * count.value() / percent.lo);
        let common = totals.entry(*column).or_insert(Some(own));
        *common = common.filter(|c| c.meets(own)).map(|c| Range::new(c.lo.max(own.lo), c.hi.min(own.hi)));
    }
    totals.into_iter().filter(|(_, common)| common.is_some()).map(|(column, _)| column).collect()
}

/// "4.1 − 2 × 3.2 = −2.3"
fn working(g: &Group) -> Option<String> {
    let (mean, sd) = (g.mean?, g.spread.first()?);
    let places = usize::from(mean.places.max(sd.places));
    let low = format!("{:.places$}", mean.value() - 2.0 * sd.value()).replace('-', "−");
    Some(format!("{mean} − 2 × {sd} = {low}"))
}
