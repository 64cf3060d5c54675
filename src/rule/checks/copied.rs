//! An estimate with its interval that stands in two rows of one table.

use crate::manuscript::BlockKind;
use crate::printed::Printed;
use crate::query::Ground;
use crate::reading::Group;
use crate::result::ReportedResult;
use crate::rule::finding::Finding;
use crate::rule::level::{Off, Weight};
use crate::rule::look::Look;
use crate::rule::wording;
use crate::text::Span;
use std::collections::HashMap;

/// Significant digits that chance does not repeat in one table.
const DIGITS: u32 = 7;
/// The same where both rows bear one name under two titles: kindred analyses give like figures.
const DIGITS_OF_KIN: u32 = 10;

/// Words of rows that tell of one comparison analysed in several ways: their figures may well be the same.
const SAME_MATTER: [&str; 14] = [
    "model",
    "adjust",
    "crude",
    "sensitivity",
    "imput",
    "analys",
    "protocol",
    "treat",
    "multivaria",
    "univaria",
    "overall",
    "total",
    "all ",
    "complete",
];

/// What two rows share: the table, the estimate, both limits.
type Key = (u32, [Printed; 3]);

/// Rows of one table with the same estimate and interval, all digits, and other groups.
pub fn same_estimate(facts: &Look) -> Vec<Finding> {
    let readings = facts.readings;
    let mut met: HashMap<Key, usize> = HashMap::new();
    let mut pairs: Vec<(usize, usize, u32)> = Vec::new();
    for (number, result) in facts.results.iter().enumerate() {
        let (Some(e), Some(i)) = (result.estimate, result.interval) else { continue };
        let (e, i) = (&readings.estimates[e], &readings.intervals[i]);
        let key = [e.value, i.lower, i.upper];
        let digits: u32 = key.iter().map(|p| p.significant_digits()).sum();
        if digits < DIGITS || !facts.in_table(i.span) {
            continue;
        }
        // The first row is the one that a copy is set against.
        match met.entry((i.span.block, key)) {
            std::collections::hash_map::Entry::Vacant(v) => {
                v.insert(number);
            }
            std::collections::hash_map::Entry::Occupied(o) => pairs.push((*o.get(), number, digits)),
        }
    }
    pairs.into_iter().filter_map(|(first, second, digits)| finding(facts, first, second, digits)).collect()
}

fn finding(facts: &Look, first: usize, second: usize, digits: u32) -> Option<Finding> {
    let (a, b) = (&facts.results[first], &facts.results[second]);
    let place = |r: &ReportedResult| r.interval.map(|i| facts.readings.intervals[i].span);
    let (before, here) = (place(a)?, place(b)?);
    let (row, other) = (name(facts, before)?, name(facts, here)?);
    let least = if row.own == other.own { DIGITS_OF_KIN } else { DIGITS };
    let plain = |n: &Name| {
        let text = format!("{} {}", n.own, n.title).to_lowercase();
        !n.own.is_empty() && !SAME_MATTER.iter().any(|w| text.contains(w))
    };
    let one_row = row.number == other.number || row.own == other.own && row.title == other.title;
    if one_row || digits < least || !plain(&row) || !plain(&other) || same_groups(facts, a, b) {
        return None;
    }
    let estimate = facts.readings.estimates[b.estimate?].value;
    let interval = &facts.readings.intervals[b.interval?];
    let says = format!(
        "{estimate} ({} to {}) stands for “{}” and for “{}”, all digits alike.",
        interval.lower,
        interval.upper,
        row.full(&other),
        other.full(&row)
    );
    let weight = Weight { ground: Ground::IfOneMethod, distance: Off::Figure, ..Weight::reporting() };
    let mut f = Finding::at(here, weight, says);
    f.related.push((before, "the same figures in another row".to_owned()));
    f.figures.push(before);
    f.labels = vec![row.own, other.own];
    f.results = vec![first, second];
    Some(f)
}

/// What labels a row, and the title that it stands under.
struct Name {
    number: usize,
    own: String,
    title: String,
}

impl Name {
    fn full(&self, other: &Name) -> String {
        if self.own == other.own { format!("{}, {}", self.title, self.own) } else { self.own.clone() }
    }
}

fn name(facts: &Look, at: Span) -> Option<Name> {
    let block = facts.manuscript.block(at);
    let BlockKind::Table(grid) = &block.kind else { return None };
    let layout = facts.readings.layout(at.block as usize)?;
    let (number, row) = layout.row_of(grid, grid.cell_at(at.start)?)?;
    let text = |c: usize| wording::one_line(wording::beginning(block.text_of(&grid.cells[c])));
    let own: Vec<String> = row.labels.iter().map(|&c| text(c)).collect();
    Some(Name { number, own: own.join(" "), title: row.section.map(text).unwrap_or_default() })
}

/// Both rows print the same groups: then the same figures follow rightly.
fn same_groups(facts: &Look, a: &ReportedResult, b: &ReportedResult) -> bool {
    let figures = |g: &Group| (g.events.map(|e| e.printed), g.percent, g.mean, g.median, g.spread.clone());
    let of = |r: &ReportedResult| -> Vec<_> { r.groups.iter().map(|&g| figures(&facts.readings.groups[g])).collect() };
    !a.groups.is_empty() && of(a) == of(b)
}
