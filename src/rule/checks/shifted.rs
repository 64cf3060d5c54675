//! A P column that has slipped by a row.

use crate::query::Ground;
use crate::recompute::Checked;
use crate::rule::finding::Finding;
use crate::rule::level::{Off, Weight};
use crate::rule::look::Look;
use crate::rule::shift::Shift;
use crate::rule::wording;

/// One query for a column whose p-values fit the rows beside their own.
pub fn columns(facts: &Look) -> Vec<Finding> {
    facts.shifts.iter().filter_map(|shift| finding(facts, shift)).collect()
}

fn finding(facts: &Look, shift: &Shift) -> Option<Finding> {
    let first = shift.moved.first()?;
    let side = if shift.above { "above" } else { "below" };
    let quote = facts.shown(first.p);
    let says = format!(
        "Of {} p-values of this column that could be recomputed, {} differ from their own rows and fit the rows {side} \
         them, as {quote}: its own row gives {}, the row {side} it {}.",
        shift.recomputed,
        shift.moved.len(),
        wording::p_range(first.own),
        wording::p_range(first.fits)
    );
    let weight =
        Weight { ground: ground(facts, &facts.checked[first.result]), distance: Off::Figure, ..Weight::reporting() };
    let mut f = Finding::at(first.p, weight, says);
    f.fills = vec![("printed", quote), ("computed", wording::p_range(first.fits))];
    let line = |m: &crate::rule::shift::Moved| {
        format!("{}: own row {}, row {side} {}", facts.quote(m.p), wording::p_range(m.own), wording::p_range(m.fits))
    };
    f.working = Some(shift.moved.iter().map(line).collect::<Vec<_>>().join("; "));
    f.related = shift.moved[1..].iter().map(|m| (m.p, format!("fits the row {side} it"))).collect();
    f.related.extend(shift.end.map(|p| (p, format!("has no row {side} it, and differs from its own"))));
    f.figures = shift.moved.iter().map(|m| m.p).collect();
    f.results = shift.moved.iter().map(|m| m.result).collect();
    Some(f)
}

/// Why the p-values should agree with any row at all.
fn ground(facts: &Look, checked: &Checked) -> Ground {
    let p = facts.results[checked.result].p.map(|p| facts.readings.p[p].span);
    checked
        .recomputations
        .iter()
        .filter(|r| Some(r.figure) == p)
        .map(|r| r.ground)
        .min()
        .unwrap_or(Ground::IfUnadjusted)
}
