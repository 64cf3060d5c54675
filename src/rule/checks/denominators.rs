//! Tables whose percentages are of another number than their heads print.

use crate::layout::around;
use crate::manuscript::Grid;
use crate::printed::totals_that_fit;
use crate::query::Ground;
use crate::reading::{Figure, Group, Inference, Origin};
use crate::rule::finding::Finding;
use crate::rule::level::{Off, Weight};
use crate::rule::look::Look;
use crate::rule::wording;
use crate::text::Span;
use std::collections::BTreeMap;

/// Rows that must agree on one other size: a single one is as likely a slip.
const ROWS: usize = 3;

/// More columns than any table has groups. Text made to hurt has more, and each looks through the whole table.
const COLUMNS: usize = 30;

/// A count with its percentage under a head that prints a size.
struct Share<'a> {
    row: u32,
    group: &'a Group,
    /// The totals that count and percentage allow.
    least: u64,
    most: u64,
}

/// The rows of one column that agree on a size which its head does not print.
struct Agreed<'a> {
    head: (u64, Span),
    fits: u64,
    rows: Vec<Share<'a>>,
}

/// One note for a table: rows whose counts and percentages agree on one size, which is not the head's.
pub fn other_total(facts: &Look) -> Vec<Finding> {
    facts.groups_of_tables().filter_map(|(block, grid, groups)| of_table(facts, block, grid, groups)).collect()
}

fn of_table(facts: &Look, block: usize, grid: &Grid, groups: &[Group]) -> Option<Finding> {
    let mut columns: BTreeMap<(u32, u64), (Span, Vec<Share>)> = BTreeMap::new();
    for group in groups {
        let Some((n, head)) = headed(group) else { continue };
        let (Some(cell), Some((least, most))) = (grid.cell_at(group.span.start), totals(group)) else { continue };
        let share = Share { row: cell.row, group, least, most };
        columns.entry((cell.column, n)).or_insert((head, Vec::new())).1.push(share);
    }
    // Shares of all groups together are another matter.
    let all: u64 = columns.keys().map(|k| k.1).sum();
    let mut agreed: Vec<Agreed> = Vec::new();
    for ((column, n), (head, shares)) in columns.into_iter().take(COLUMNS) {
        let found = one_other(n, head, shares);
        agreed.extend(found.filter(|a| a.fits != all && !told(facts, block, grid, column, a.fits)));
    }
    if agreed.is_empty() {
        return None;
    }
    Some(finding(facts, &agreed))
}

/// The size that the head of a group's column prints.
fn headed(group: &Group) -> Option<(u64, Span)> {
    match group.n? {
        Figure { printed, origin: Origin::Inferred(Inference::Header, span) } => Some((printed.count()?, span)),
        _ => None,
    }
}

/// The totals of which a count is the printed percentage, whether rounded or cut.
fn totals(group: &Group) -> Option<(u64, u64)> {
    let (events, percent) = (group.events?.printed.count()?, group.percent?);
    if group.one_expression || group.approximate || percent.value() >= 100.0 {
        return None;
    }
    let range = percent.rounded_or_cut();
    totals_that_fit(events, range).filter(|_| range.lo > 0.0)
}

/// The rows of one column that do not fit its head's size and all fit one other.
fn one_other(n: u64, head: Span, shares: Vec<Share>) -> Option<Agreed> {
    let (fit, off): (Vec<_>, Vec<_>) = shares.into_iter().partition(|s| s.least <= n && n <= s.most);
    let (least, most) = (off.iter().map(|s| s.least).max()?, off.iter().map(|s| s.most).min()?);
    // Rows of the head's size may stand above or below; those between the others contradict them.
    let (first, last) = (off.iter().map(|s| s.row).min()?, off.iter().map(|s| s.row).max()?);
    let contradicts = |s: &Share| (first..=last).contains(&s.row) && !(s.least <= least && least <= s.most);
    let mut rows: Vec<u32> = off.iter().map(|s| s.row).collect();
    rows.dedup();
    let one = least == most && rows.len() >= ROWS && !fit.iter().any(contradicts);
    one.then_some(Agreed { head: (n, head), fits: least, rows: off })
}

/// The number stands in a column's own cells, in the labels of rows, in the caption or in the notes: the table tells of
/// it itself. Under the head of another group it does not: then two heads may have changed places.
fn told(facts: &Look, block: usize, grid: &Grid, column: u32, number: u64) -> bool {
    let (around, blocks) = (around(facts.manuscript, block), &facts.manuscript.blocks);
    let number = number.to_string();
    let holds = |text: &str| text.split(|c: char| !c.is_ascii_digit()).any(|word| word == number);
    let own = grid.cells.iter().filter(|c| c.column == 0 || (c.column..c.column + c.column_span).contains(&column));
    own.map(|c| blocks[block].text_of(c)).any(holds)
        || around.caption.chain(around.notes).any(|b| holds(&blocks[b].text))
}

fn finding(facts: &Look, agreed: &[Agreed]) -> Finding {
    let first = &agreed[0].rows[0];
    let columns: Vec<String> = agreed.iter().map(words).collect();
    let says = format!("The percentages of {}.", columns.join("; those of "));
    let weight = Weight { ground: Ground::IfOneMethod, distance: Off::Figure, ..Weight::reporting() };
    let mut f = Finding::at(first.group.span, weight, says);
    f.working = working(&agreed[0]);
    for a in agreed {
        f.related.push((a.head.1, "the number in the header".to_owned()));
        let others = a.rows.iter().filter(|s| !std::ptr::eq(*s, first));
        f.related.extend(others.map(|s| (s.group.span, "another such row".to_owned())));
        f.figures.extend(a.rows.iter().map(|s| s.group.span));
        f.results.extend(a.rows.iter().flat_map(|s| facts.results_with(s.group.span)));
    }
    f.labels = agreed.iter().map(|a| a.rows[0].group.label.clone()).collect();
    f.figures.remove(0);
    f
}

/// "4 rows under “Sling” are of 57, not of the 60 in the header"
fn words(a: &Agreed) -> String {
    let label = wording::one_line(&a.rows[0].group.label);
    let under = if label.is_empty() { "of one column".to_owned() } else { format!("under “{label}”") };
    format!("{} rows {under} are of {}, not of the {} in the header", a.rows.len(), a.fits, a.head.0)
}

/// "17/57 = 29.82 %, printed as 29.8 %; 17/60 = 28.33 %"
fn working(a: &Agreed) -> Option<String> {
    let group = a.rows[0].group;
    let (events, percent) = (group.events?.printed.count()?, group.percent?);
    let share = |n: u64| format!("{events}/{n} = {:.2} %", 100.0 * events as f64 / n as f64);
    Some(format!("{}, printed as {percent} %; {}", share(a.fits), share(a.head.0)))
}
