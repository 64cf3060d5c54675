//! Figures that were recomputed and differ.

use crate::manuscript::SectionKind;
use crate::query::{Explanation, Ground, RepairKind, Verdict};
use crate::reading::{Relation, Role};
use crate::recompute::{Checked, Quantity, Recomputation};
use crate::rule::check::{Basis, Of};
use crate::rule::finding::{Draft, Finding};
use crate::rule::level::{Off, Weight};
use crate::rule::look::{Look, Settled};
use crate::rule::wording;
use crate::text::Span;

/// Rows of a table that must tally sharply before its plain method counts as known.
const VOUCHING_ROWS: usize = 3;

/// Every figure of the kind that differs under all candidates, once, with the strongest of them.
pub fn differs(facts: &Look, of: Of, from: &[Basis]) -> Vec<Finding> {
    let mut findings = Vec::new();
    for checked in facts.checked {
        let mut done: Vec<Span> = Vec::new();
        for first in candidates(facts, checked, of, from) {
            if done.contains(&first.figure) {
                continue;
            }
            done.push(first.figure);
            let all: Vec<_> = candidates(facts, checked, of, from).filter(|r| r.figure == first.figure).collect();
            // The strongest ground; among equals the nearest figure: the kindest comparison.
            let size = |r: &Recomputation| r.distance.map_or(f64::INFINITY, |d| d.size);
            let best = all.iter().min_by(|a, b| a.ground.cmp(&b.ground).then(size(a).total_cmp(&size(b))));
            if let Some(best) = best {
                findings.push(finding(facts, checked, best, &all));
            }
        }
    }
    findings
}

/// The recomputations that a rule of this kind speaks of, where their result really differs.
fn candidates<'a>(
    facts: &'a Look,
    checked: &'a Checked,
    of: Of,
    from: &'a [Basis],
) -> impl Iterator<Item = &'a Recomputation> {
    // A definition stands by itself, and clears nothing else; otherwise one candidate that tallies clears the figure.
    let clears = |o: &Recomputation, r: &Recomputation| {
        o.verdict == Verdict::Tallies && o.ground != Ground::ByDefinition && o.of == r.of && o.figure == r.figure
    };
    let tallies = move |r: &Recomputation| {
        r.ground != Ground::ByDefinition && checked.recomputations.iter().any(|o| clears(o, r))
    };
    checked.recomputations.iter().filter(move |r| {
        r.verdict == Verdict::Differs
            && checked.verdict == Verdict::Differs
            && of.is(r.of)
            && r.computed.is_some()
            && from.contains(&basis(facts, checked, r))
            && !within_group(facts, checked, r)
            && !small_total_elsewhere(facts, checked, r)
            && !facts.is_shifted(r.figure)
            && !tallies(r)
    })
}

/// An "estimate" that is really the summary of one of the groups: a reading too doubtful to ask about.
fn within_group(facts: &Look, checked: &Checked, r: &Recomputation) -> bool {
    let groups = &facts.results[checked.result].groups;
    r.of == Quantity::Estimate && groups.iter().any(|&i| facts.readings.groups[i].span.overlaps(r.figure))
}

/// A percentage of a handful that stands elsewhere: "two strategies … in 2 (18 %) measures" is of other things.
fn small_total_elsewhere(facts: &Look, checked: &Checked, r: &Recomputation) -> bool {
    const HANDFUL: u64 = 10;
    let groups = facts.results[checked.result].groups.iter().map(|&i| &facts.readings.groups[i]);
    let mut totals = groups.filter_map(|g| g.total.and_then(|t| t.printed.count()));
    elsewhere(r) && totals.any(|t| t < HANDFUL)
}

/// Count, total and percentage are not printed in one expression.
fn elsewhere(r: &Recomputation) -> bool {
    matches!(r.of, Quantity::Percent | Quantity::Events | Quantity::Total) && r.ground != Ground::ByDefinition
}

/// What a figure was recomputed from: the reading nearest to a test's own arithmetic that is among its inputs.
fn basis(facts: &Look, checked: &Checked, r: &Recomputation) -> Basis {
    let (result, readings) = (&facts.results[checked.result], facts.readings);
    let used = |span: Span| !span.overlaps(r.figure) && r.inputs.iter().any(|&(s, _)| s.overlaps(span));
    let groups = || result.groups.iter().map(|&i| &readings.groups[i]);
    let means = groups().any(|g| g.mean.is_some() || g.median.is_some());
    let counts = groups().any(|g| g.events.is_some() || g.percent.is_some());
    if result.statistic.is_some_and(|i| used(readings.statistics[i].span)) {
        Basis::Statistic
    } else if result.interval.is_some_and(|i| used(readings.intervals[i].span)) {
        Basis::Interval
    } else if r.of != Quantity::P && result.p.is_some_and(|i| used(readings.p[i].span)) {
        Basis::P
    } else if result.estimate.is_some_and(|i| used(readings.estimates[i].span)) {
        Basis::Estimate
    } else if r.of == Quantity::Df {
        Basis::GroupSizes
    } else if means {
        Basis::Means
    } else if counts {
        Basis::Counts
    } else if !result.groups.is_empty() {
        Basis::GroupSizes
    } else if result.statistic.is_some() {
        // A figure and its input can share one span: the df of `t(28) = 2.20`.
        Basis::Statistic
    } else if result.interval.is_some() {
        Basis::Interval
    } else {
        Basis::Estimate
    }
}

fn finding(facts: &Look, checked: &Checked, r: &Recomputation, all: &[&Recomputation]) -> Finding {
    let quote = facts.quote(r.figure);
    let percent = (r.of == Quantity::Percent).then(|| wording::percent_number(quote)).flatten();
    let sign = if percent.is_some() { "%" } else { "" };
    let printed = percent.map_or_else(|| facts.shown(r.figure), |(at, _)| format!("{}%", &quote[at]));
    let computed = r.computed.map_or(String::new(), |range| match r.of {
        Quantity::P => wording::p_range(range),
        of => {
            // The quote of a share may end in its total.
            let share = facts.results[checked.result].groups.iter().find_map(|&g| facts.readings.groups[g].percent);
            let places = match share.filter(|_| of == Quantity::Percent) {
                Some(share) => usize::from(share.places),
                None => number(of, quote).map_or(0, |(_, places)| places),
            };
            wording::figure_range(range, places) + sign
        }
    });
    let mut from = inputs(facts, r);
    let estimate = facts.results[checked.result].estimate.map(|i| &facts.readings.estimates[i]);
    if let (Basis::Estimate, Some(se)) = (basis(facts, checked, r), estimate.and_then(|e| e.se)) {
        from = format!("{from} with its standard error {se}");
    }
    let says = match r.of {
        Quantity::P if is_bare(quote) => format!("Printed P {printed}; from {from} we get {computed}."),
        Quantity::P => format!("Printed {printed}; from {from} we get {computed}."),
        of => format!("Printed {printed} as {}; from {from} we get {computed}.", wording::quantity(of)),
    };
    // What makes the one row credible.
    let says = match vouching(facts, checked, r) {
        Some(others) => format!("{says} The other {others} rows of this table that could be checked tally."),
        None => says,
    };
    let mut f = Finding::at(r.figure, weight(facts, checked, r), says);
    f.working = Some(r.working.clone());
    f.related = r.inputs.iter().filter(|(s, _)| *s != r.figure).map(|&(s, part)| (s, part.to_owned())).collect();
    f.results = vec![checked.result];
    f.labels = facts.results[checked.result].groups.iter().map(|&i| facts.readings.groups[i].label.clone()).collect();
    f.fills = vec![("printed", printed), ("computed", computed), ("method", r.method.name.to_owned())];
    if let Some(slip) = all.iter().find_map(|r| r.slip.as_ref()) {
        f.explanations.push(wording::slip(slip));
    }
    f.explanations.extend(r.assumptions.iter().map(|&a| wording::assumption(a)));
    let mut others: Vec<&str> = all.iter().map(|o| o.method.name).filter(|n| *n != r.method.name).collect();
    others.dedup();
    if !others.is_empty() {
        let says = format!("It does not agree with {} either.", others.join(", "));
        f.explanations.push(Explanation { kind: "other-methods".to_owned(), says });
    }
    f.repair = repair(r, quote);
    f
}

/// The inputs as a phrase: "4.1 (SD 1.2) and 5.3 (SD 1.4) with n = 40 and 40".
fn inputs(facts: &Look, r: &Recomputation) -> String {
    const MOST: usize = 4;
    let part = |name: &str| r.inputs.iter().find(|(_, part)| *part == name).map(|&(s, _)| facts.quote(s));
    if let (Some(count), Some(total)) = (part("the count"), part("the total")) {
        // A total that is printed nowhere has the place of what it was inferred from; the working names it.
        let unprinted = total.contains(count).then(|| r.working.split(['/', ' ']).nth(1)).flatten();
        return wording::one_line(&format!("{count} of {}", unprinted.filter(|_| total != count).unwrap_or(total)));
    }
    let others = || r.inputs.iter().filter(|(s, _)| *s != r.figure);
    let words = |sizes: bool| {
        let mut spans: Vec<Span> = Vec::new();
        for &(span, _) in others().filter(|(_, part)| (*part == "the group size") == sizes) {
            // The degrees of freedom of `t(28) = 2.20` are told by the statistic itself.
            if !spans.iter().any(|s| s.contains(span)) {
                spans.push(span);
            }
        }
        spans.sort();
        spans.iter().map(|&s| facts.shown(s)).collect::<Vec<_>>()
    };
    let (figures, sizes) = (words(false), words(true));
    match (figures.len(), sizes.len()) {
        (0, 0) => "the other figures".to_owned(),
        (0, _) => format!("n = {}", sizes.join(" and ")),
        (1..=MOST, 0) => figures.join(" and "),
        (1..=MOST, 1..=MOST) => format!("{} with n = {}", figures.join(" and "), sizes.join(" and ")),
        (n, _) => format!("the {n} figures beside it"),
    }
}

fn weight(facts: &Look, checked: &Checked, r: &Recomputation) -> Weight {
    let p = facts.results[checked.result].p.map(|i| &facts.readings.p[i]);
    let rounded = r.of != Quantity::P || p.is_some_and(|p| p.relation == Relation::Equal);
    let distance = match (r.of, r.distance) {
        _ if rounded && below_one_unit(r) => Off::BelowOneUnit,
        (Quantity::P, Some(d)) => Off::P { factor: d.size, across_alpha: d.across_alpha },
        // An interval that disagrees with its p about the null value is a disagreement about p.
        (_, Some(d)) if d.across_alpha => Off::P { factor: 1.0, across_alpha: true },
        _ => Off::Figure,
    };
    Weight {
        ground: r.ground,
        distance,
        drives_message: false,
        // What an introduction reports is mostly the work of others; a percentage may be of another total.
        peripheral: p.is_some_and(|p| matches!(p.role, Role::Baseline | Role::AssumptionOrFit))
            || facts.manuscript.section(r.figure).kind == SectionKind::Introduction
            || elsewhere(r),
        table_vouches: r.ground == Ground::IfUnadjusted && vouching(facts, checked, r).is_some(),
    }
}

/// The printed value itself lies less than a unit of its last place from the nearest recomputed value.
fn below_one_unit(r: &Recomputation) -> bool {
    let (Some(printed), Some(computed)) = (r.printed, r.computed) else { return false };
    let unit = printed.width();
    let nearest = printed.middle().clamp(computed.lo, computed.hi);
    // A count is exact, and has no rounding to hide behind.
    unit > 0.0 && unit.is_finite() && (printed.middle() - nearest).abs() < unit
}

/// How many other rows of the same table tally sharply, where that is enough and none differs.
fn vouching(facts: &Look, checked: &Checked, r: &Recomputation) -> Option<usize> {
    if !facts.in_table(r.figure) {
        return None;
    }
    let all = facts.settled(r.of, r.figure.block);
    let mut own = Settled::default();
    for o in checked.recomputations.iter().filter(|o| o.of == r.of && o.figure.block == r.figure.block) {
        own.add(o.verdict, o.sharp);
    }
    let others = all.sharp - own.sharp;
    (others >= VOUCHING_ROWS && all.differ == own.differ).then_some(others)
}

/// The recomputed figure as the author might print it, where the printed ones leave only one.
fn repair(r: &Recomputation, quote: &str) -> Option<Draft> {
    if r.ground == Ground::IfUnadjusted {
        return None;
    }
    let range = r.computed?;
    let (at, places) = number(r.of, quote)?;
    let text = match r.of {
        Quantity::P => with_p(quote, at, &wording::journal_p(range)?),
        Quantity::Percent => {
            let figure = wording::figure_range(range, places);
            let single = !figure.contains(' ');
            single.then(|| format!("{}{figure}{}", &quote[..at.start], &quote[at.end..]))?
        }
        Quantity::Interval
        | Quantity::Estimate
        | Quantity::Statistic
        | Quantity::Df
        | Quantity::Events
        | Quantity::Total => return None,
    };
    Some(Draft { kind: RepairKind::Replace, at: r.figure, text, needs_confirmation: true })
}

/// The figure in question within its quote, with its decimal places.
fn number(of: Quantity, quote: &str) -> Option<(std::ops::Range<usize>, usize)> {
    let percent = (of == Quantity::Percent).then(|| wording::percent_number(quote)).flatten();
    if of == Quantity::Percent && quote.contains('%') { percent } else { wording::last_number(quote) }
}

/// Puts `= 0.13` for the relation and figure of a printed p; in a table cell, without the sign.
pub fn with_p(quote: &str, at: std::ops::Range<usize>, p: &str) -> String {
    let signs = ['=', '<', '>', '≤', '≥', '⩽', '⩾', '‹', '›'];
    let start = quote[..at.start].find(signs).unwrap_or(at.start);
    let p = if is_bare(quote) { p.trim_start_matches("= ") } else { p };
    format!("{}{p}{}", &quote[..start], &quote[at.end..])
}

/// Printed without the letter P, as in a table cell.
fn is_bare(quote: &str) -> bool {
    !quote.contains(['p', 'P'])
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_repaired_p_keeps_what_stands_around_it() {
        assert_eq!(with_p("P = 0.03", 4..8, "= 0.13"), "P = 0.13");
        assert_eq!(with_p("p=.03", 2..5, "< 0.001"), "p< 0.001");
        assert_eq!(with_p("0.03", 0..4, "= 0.13"), "0.13");
        assert_eq!(with_p("< 0.05", 2..6, "= 0.13"), "0.13");
    }
}
