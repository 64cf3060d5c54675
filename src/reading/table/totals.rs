//! Totals of categories that share out a group, from the block of rows or the row that they stand in.
//!
//! Where percentages make 100, the counts beside them make the total. What then does not fit is a disagreement between
//! figures that all stand in sight, not a denominator that stands elsewhere.

use super::super::{Figure, Group, Inference, Origin};
use super::Table;
use crate::layout::{ColumnRole, RowRole};
use crate::printed::{Printed, is_share, totals_that_fit};
use std::collections::HashMap;

/// A count with its percentage.
#[derive(Clone, Copy)]
struct Part {
    /// Index among the groups.
    group: usize,
    count: u64,
    percent: Printed,
}

impl Part {
    fn fits(&self, total: u64) -> bool {
        is_share(self.count, total, self.percent.rounded_or_cut())
    }

    /// The one total that the percentage allows.
    fn only_total(&self) -> Option<u64> {
        let totals = totals_that_fit(self.count, self.percent.rounded()).filter(|_| self.count <= 1_000_000);
        totals.filter(|(least, most)| least == most).map(|t| t.0)
    }
}

fn part(groups: &[Group], group: usize) -> Option<Part> {
    let g = &groups[group];
    let mut percent = g.percent.filter(|p| !p.negative)?;
    // `33.30` in a column of two places may be 33.3.
    while percent.places > 1 && percent.digits % 10 == 0 {
        (percent.places, percent.digits) = (percent.places - 1, percent.digits / 10);
    }
    Some(Part { group, count: g.events?.printed.count()?, percent })
}

/// Not printed with the count, nor borne out by a header.
fn open(g: &Group) -> bool {
    g.total.is_none_or(|t| t.is_inferred(Inference::FromPercent))
}

/// Open, or taken from a head that the percentage does not bear out.
fn unsettled(groups: &[Group], p: &Part) -> bool {
    let g = &groups[p.group];
    let of_head = g.total.filter(|t| matches!(t.origin, Origin::Inferred(..))).and_then(|t| t.printed.count());
    open(g) || of_head.is_some_and(|n| !p.fits(n))
}

/// The percentages make 100, their rounding aside.
fn makes_hundred(parts: &[Part]) -> bool {
    let sum: f64 = parts.iter().map(|p| p.percent.value()).sum();
    let slack: f64 = parts.iter().map(|p| p.percent.unit() / 2.0).sum();
    (sum - 100.0).abs() <= slack + 1e-9
}

/// Fills in the totals that blocks of rows and rows show.
pub(super) fn fill(table: &Table, groups: &mut [Group]) {
    if (0..groups.len()).any(|k| part(groups, k).is_some_and(|p| unsettled(groups, &p))) {
        blocks(table, groups);
    }
    rows(table, groups);
}

/// Blocks of categories: a title with its rows, or a P with the rows that have none.
fn blocks(table: &Table, groups: &mut [Group]) {
    let mut section_of: HashMap<u32, (usize, usize)> = HashMap::new();
    let mut started = 0;
    for (number, row) in table.layout.rows.iter().enumerate() {
        let has_p = |&c: &usize| *table.role_of(c) == ColumnRole::P && !table.view(c).is_empty();
        if row.cells.clone().any(|c| has_p(&c)) {
            started = number;
        }
        if row.role == RowRole::Data {
            let section = (row.section.unwrap_or(0), started);
            section_of.extend(row.cells.clone().map(|c| (table.first + c as u32, section)));
        }
    }
    let mut blocks: HashMap<((usize, usize), u32), Vec<Part>> = HashMap::new();
    for k in 0..groups.len() {
        let cell = (groups[k].sentence - table.first) as usize;
        let found = (section_of.get(&groups[k].sentence), table.grid.cells.get(cell), part(groups, k));
        if let (Some(&section), Some(cell), Some(part)) = found {
            blocks.entry((section, cell.column)).or_default().push(part);
        }
    }
    for ((section, _), parts) in &blocks {
        block(groups, parts, section.0 != 0);
    }
}

/// `titled` tells that the rows stand below a title of their own.
fn block(groups: &mut [Group], parts: &[Part], titled: bool) {
    let undecided: Vec<Part> = parts.iter().filter(|p| unsettled(groups, p)).copied().collect();
    let sum = |parts: &[Part]| parts.iter().try_fold(0u64, |s, p| s.checked_add(p.count));
    let Some(sum_open) = sum(&undecided).filter(|&s| s > 0) else { return };
    let fill = |groups: &mut [Group], parts: &[Part], total: u64, inference: Inference| {
        for p in parts {
            // Where the head prints it, that is its place.
            let printed = groups[p.group].n.filter(|n| n.printed.count() == Some(total));
            let place = match printed.map(|n| n.origin) {
                Some(Origin::Printed(span) | Origin::Inferred(Inference::Header, span)) => span,
                _ => groups[p.group].span,
            };
            let total = Some(Figure::inferred(Printed::whole(total), inference, place));
            groups[p.group].total = total;
            groups[p.group].n = groups[p.group].n.or(total);
        }
    };
    if undecided.len() > 1 && undecided.iter().all(|p| p.fits(sum_open)) {
        return fill(groups, &undecided, sum_open, Inference::Categories);
    }
    let n = groups[undecided[0].group].n.and_then(|n| n.printed.count());
    let Some(sum_all) = sum(parts).filter(|_| parts.len() > 1) else { return };
    let filled = || parts.iter().filter(|p| p.count > 0);
    let fit = |total: u64| filled().filter(|p| p.fits(total)).count();
    let hundred = makes_hundred(parts);
    // Percentages that make 100 are of one total, whatever it is; chance makes 100 of two figures without decimals.
    let exhaust = hundred && titled && parts.iter().all(|p| p.percent.places > 0);
    let pinned = || {
        let mut ranges = filled().filter_map(Part::only_total);
        let first = ranges.next()?;
        (fit(first) >= 2 && fit(first) + 1 == filled().count()).then_some(first)
    };
    // Categories that count no one twice: their sum is the head's size, and most percentages are of it.
    let whole = || n.filter(|&n| n == sum_all && (hundred || fit(n) >= 2 && 3 * fit(n) >= 2 * filled().count()));
    let known = || n.filter(|&n| exhaust && fit(n) >= 1 && sum_all.abs_diff(n) <= 2);
    let alone = || (exhaust && fit(sum_all) == 0 && n.is_none_or(|n| n == sum_all)).then_some(sum_all);
    let total = exhaust.then(pinned).flatten().or_else(whole).or_else(known).or_else(alone);
    if let Some(total) = total {
        fill(groups, &undecided, total, Inference::Siblings);
    }
}

/// Rows whose counts share out the row, where nearly all rows of the table do: "attended" beside "did not attend".
fn rows(table: &Table, groups: &mut [Group]) {
    /// Rows that must share out their sum before one that does not is of the same kind.
    const LEAST: usize = 4;
    let place = |g: &Group| {
        let cell = table.grid.cells.get((g.sentence - table.first) as usize)?;
        Some((cell.row, table.layout.columns.get(cell.column as usize)?.panel))
    };
    let mut lists: Vec<Vec<Part>> = Vec::new();
    let mut last = None;
    for k in 0..groups.len() {
        let at = place(&groups[k]);
        if at != last || lists.is_empty() {
            lists.push(Vec::new());
            last = at;
        }
        if let (Some(part), Some(list)) = (part(groups, k), lists.last_mut()) {
            list.push(part);
        }
    }
    let sum = |list: &[Part]| list.iter().try_fold(0u64, |s, p| s.checked_add(p.count)).filter(|&s| s > 0);
    lists.retain(|l| l.len() == 2 && sum(l).is_some() && l.iter().all(|p| !groups[p.group].one_expression));
    let shares = |l: &Vec<Part>| sum(l).is_some_and(|s| l.iter().all(|p| p.fits(s)));
    let (sharing, all) = (lists.iter().filter(|l| shares(l)).count(), lists.len());
    if sharing < LEAST || 4 * sharing < 3 * all {
        return;
    }
    for list in lists.iter().filter(|l| !shares(l)) {
        let near: f64 = list.iter().map(|p| p.percent.value()).sum();
        let borne_out = list.iter().any(|p| !open(&groups[p.group]));
        let Some(total) = sum(list).filter(|_| !borne_out && (near - 100.0).abs() <= 1.0 + 1e-9) else { continue };
        for p in list {
            let total = Some(Figure::inferred(Printed::whole(total), Inference::Siblings, groups[p.group].span));
            (groups[p.group].total, groups[p.group].n) = (total, total);
        }
    }
}
