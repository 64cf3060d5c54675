//! P columns that fit their table when they are moved by one row.

use super::Facts;
use crate::manuscript::BlockKind;
use crate::printed::Range;
use crate::query::Verdict;
use crate::reading::Relation;
use crate::recompute::{Checked, Quantity};
use crate::text::Span;
use std::collections::BTreeMap;

/// Recomputed p-values that a column must have, and how many of them must fit only when moved.
const RECOMPUTED: usize = 4;
const MOVED: usize = 3;

/// Wider than this (upper over lower end), a recomputed p fits too much to prove anything.
const SHARP_FACTOR: f64 = 2.5;

/// A column that fits when moved.
#[derive(Clone, Debug, PartialEq)]
pub struct Shift {
    /// Its p-values belong to the row above the one that they stand in; otherwise to the row below.
    pub above: bool,
    /// The p-values that differ in their own row, from the top.
    pub moved: Vec<Moved>,
    /// The p of the first or last row, which differs from its own row and has no other to fit.
    pub end: Option<Span>,
    pub recomputed: usize,
}

/// A p-value in the wrong row.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Moved {
    pub p: Span,
    pub result: usize,
    /// What its own row gives, and what the row gives that it fits.
    pub own: Range,
    pub fits: Range,
}

struct Entry {
    p: Span,
    result: usize,
    printed: Option<Range>,
    computed: Range,
    verdict: Verdict,
}

/// All such columns of a manuscript.
pub fn shifts(facts: &Facts) -> Vec<Shift> {
    let mut columns: BTreeMap<(u32, u32), Vec<Entry>> = BTreeMap::new();
    for checked in facts.checked {
        let Some(entry) = entry(facts, checked) else { continue };
        let BlockKind::Table(grid) = &facts.manuscript.block(entry.p).kind else { continue };
        if let Some(cell) = grid.cell_at(entry.p.start) {
            let column = columns.entry((entry.p.block, cell.column)).or_default();
            // One p of a cell that several results share.
            if column.last().is_none_or(|last| last.p != entry.p) {
                column.push(entry);
            }
        }
    }
    let columns = columns.values().filter(|c| c.len() >= RECOMPUTED);
    columns.filter_map(|c| shift(c, true).or_else(|| shift(c, false))).collect()
}

fn entry(facts: &Facts, checked: &Checked) -> Option<Entry> {
    let p = &facts.readings.p[facts.results[checked.result].p?];
    let mut of_p = checked.recomputations.iter().filter(|r| r.of == Quantity::P && r.figure == p.span);
    let computed = of_p.find_map(|r| r.computed)?;
    let printed = p.value.filter(|_| p.relation == Relation::Equal).map(|v| v.rounded());
    Some(Entry { p: p.span, result: checked.result, printed, computed, verdict: checked.verdict })
}

fn shift(column: &[Entry], above: bool) -> Option<Shift> {
    let neighbour = |i: usize| if above { i.checked_sub(1).map(|k| &column[k]) } else { column.get(i + 1) };
    let (mut moved, mut end) = (Vec::new(), None);
    for (i, entry) in column.iter().enumerate().filter(|(_, e)| e.verdict == Verdict::Differs) {
        let Some(next) = neighbour(i) else {
            end = Some(entry.p);
            continue;
        };
        let fits = entry.printed.is_some_and(|p| p.meets(next.computed));
        if !fits || next.computed.hi > SHARP_FACTOR * next.computed.lo {
            return None;
        }
        moved.push(Moved { p: entry.p, result: entry.result, own: entry.computed, fits: next.computed });
    }
    (moved.len() >= MOVED).then_some(Shift { above, moved, end, recomputed: column.len() })
}
