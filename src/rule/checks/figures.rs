//! Figures that their own definition rules out, whatever was analysed.

use crate::manuscript::{MarkKind, SectionKind};
use crate::printed::Printed;
use crate::query::{Ground, RepairKind, Verdict};
use crate::reading::{Measure, Relation, Scale, Symbol};
use crate::recompute::Quantity;
use crate::rule::check::{Bounded, Pair};
use crate::rule::checks::recomputed::with_p;
use crate::rule::finding::{Draft, Finding};
use crate::rule::level::{Off, Weight};
use crate::rule::look::Look;
use crate::rule::wording;
use crate::text::Span;

fn by_definition() -> Weight {
    Weight { ground: Ground::ByDefinition, distance: Off::Figure, ..Weight::reporting() }
}

fn about(facts: &Look, span: Span, says: String) -> Finding {
    let mut f = Finding::at(span, by_definition(), says);
    f.fills.push(("printed", facts.shown(span)));
    f.results = facts.results_with(span).collect();
    f
}

/// Figures beyond what they can be; rounding is allowed for (1.0 may stand for 1.04, but not for 0.96).
pub fn outside(facts: &Look, field: Bounded, lowest: f64, highest: f64) -> Vec<Finding> {
    let out = |p: Printed| p.value() > highest || p.value() < lowest;
    let readings = facts.readings;
    let estimates = |measure: Measure| {
        readings.estimates.iter().filter(move |e| e.measure == measure && !e.percent).map(|e| (e.span, e.value))
    };
    let (name, figures): (&str, Vec<(Span, Printed)>) = match field {
        Bounded::P => {
            let with = readings.p.iter().filter_map(|p| p.value.map(|v| (p.span, v)));
            ("a p-value", with.collect())
        }
        Bounded::Correlation => {
            let symbols = [Symbol::R, Symbol::Rho, Symbol::Tau];
            let printed = readings.statistics.iter().filter(|s| symbols.contains(&s.symbol));
            let printed = printed.map(|s| (s.span, s.value));
            ("a correlation", printed.chain(estimates(Measure::Correlation)).collect())
        }
        Bounded::EtaSquared => ("η²", estimates(Measure::EtaSquared).collect()),
    };
    let mut findings: Vec<Finding> = Vec::new();
    for (span, value) in figures.into_iter().filter(|(_, value)| out(*value)) {
        let quote = facts.shown(span);
        let lowest = lowest.to_string().replace('-', "−");
        let says = format!("Printed {quote}; {name} lies between {lowest} and {highest}.");
        let mut f = about(facts, span, says);
        f.fills.push(("computed", value.to_string()));
        findings.push(f);
    }
    findings
}

/// Figures of a pair printed the wrong way round.
pub fn order(facts: &Look, of: Pair) -> Vec<Finding> {
    let readings = facts.readings;
    let mut findings = Vec::new();
    match of {
        Pair::IntervalLimits => {
            for i in &readings.intervals {
                // An interval of a reciprocal may run through infinity, its limits in this order rightly.
                let reciprocal = || {
                    facts.results_with(i.span).map(|k| &facts.results[k]).any(|r| {
                        r.interval.is_some_and(|k| readings.intervals[k].span == i.span)
                            && r.estimate.is_some_and(|k| readings.estimates[k].scale == Scale::Reciprocal)
                    })
                };
                if (i.reversed || i.lower.value() > i.upper.value()) && !reciprocal() {
                    let quote = facts.shown(i.span);
                    let says = format!("Printed {quote}; the larger limit stands first.");
                    let mut f = about(facts, i.span, says);
                    // `−2.5 to −12.9`: many print a reduction from the smaller to the larger.
                    f.weight.peripheral = i.lower.negative && i.upper.negative;
                    findings.push(f);
                }
            }
        }
        Pair::SpreadLimits => {
            for g in &readings.groups {
                if let [low, high] = g.spread[..]
                    && low.value() > high.value()
                {
                    let quote = facts.shown(g.span);
                    let says = format!("Printed {quote}; the lower figure {low} is above the upper figure {high}.");
                    findings.push(about(facts, g.span, says));
                }
            }
        }
        Pair::CountInTotal => {
            for g in readings.groups.iter().filter(|g| g.one_expression) {
                let count = |f: Option<crate::reading::Figure>| f.and_then(|f| f.printed.count());
                if let (Some(events), Some(total)) = (count(g.events), count(g.total))
                    && events > total
                {
                    let quote = facts.shown(g.span);
                    let says = format!("Printed {quote}; the count {events} is above its total {total}.");
                    findings.push(about(facts, g.span, says));
                }
            }
        }
    }
    findings
}

/// The estimate lies outside the interval printed for it, as the recomputation found.
pub fn estimate_outside_interval(facts: &Look) -> Vec<Finding> {
    let readings = facts.readings;
    let mut findings = Vec::new();
    for checked in facts.checked {
        let result = &facts.results[checked.result];
        let (Some(e), Some(i)) = (result.estimate, result.interval) else { continue };
        let (e, i) = (&readings.estimates[e], &readings.intervals[i]);
        let outside = checked
            .recomputations
            .iter()
            .find(|r| r.of == Quantity::Interval && r.ground == Ground::ByDefinition && r.verdict == Verdict::Differs);
        let Some(r) = outside else { continue };
        // The pair must be beyond doubt: the estimate first, and no other estimate or interval between.
        let (from, to) = (e.span, i.span);
        let apart = facts.stands_between(from, to);
        // `OR0.5`: the figure read begins inside a printed one.
        let before = &facts.manuscript.block(from).text[..from.start as usize];
        let torn = before.ends_with(|c: char| c == '.' || c == ',' || c.is_ascii_digit());
        if from.block != to.block || from.start > to.start || apart || torn {
            continue;
        }
        let (estimate, interval) = (facts.shown(from), facts.shown(to));
        let at_limit = [i.lower, i.upper].iter().any(|limit| limit.value() == e.value.value());
        let how = if at_limit { "one of whose limits is also" } else { "which does not hold" };
        let says = format!("Printed {estimate} with {interval}, {how} {}.", e.value);
        let mut f = about(facts, to, says);
        f.fills = vec![("printed", estimate), ("computed", interval)];
        f.working = Some(r.working.clone());
        f.related.push((from, "the estimate".to_owned()));
        f.figures.push(from);
        f.explanations.extend(r.slip.as_ref().map(wording::slip));
        f.results = vec![checked.result];
        findings.push(f);
    }
    findings
}

/// `P = 0.000`.
pub fn printed_zero(facts: &Look) -> Vec<Finding> {
    let zero = |p: &&crate::reading::PValue| {
        let relations = [Relation::Equal, Relation::Less, Relation::AtMost];
        p.value.is_some_and(|v| v.digits == 0) && relations.contains(&p.relation)
    };
    let found = facts
        .readings
        .p
        .iter()
        .filter(zero)
        .filter(|p| !quoted(facts, p.sentence, p.span))
        .map(|p| {
            let quote = facts.quote(p.span);
            let says = format!("Printed {}; a p-value can be very small, but not zero.", facts.shown(p.span));
            let mut f = Finding { weight: Weight::reporting(), ..about(facts, p.span, says) };
            let number = wording::last_number(quote);
            // `0.000` stands for less than 0.0005, so that `< 0.001` is safe; and so on for other places.
            f.repair = number.filter(|(_, places)| *places >= 2).map(|(at, places)| Draft {
                kind: RepairKind::Replace,
                at: p.span,
                text: with_p(quote, at, &format!("< 0.{:0>places$}", 1)),
                needs_confirmation: p.relation != Relation::Equal,
            });
            f
        })
        .collect();
    one_per_table(facts, found)
}

/// Whether a sentence outside the results cites where its figures are from.
fn quoted(facts: &Look, sentence: u32, span: Span) -> bool {
    let told = matches!(facts.manuscript.section(span).kind, SectionKind::Introduction | SectionKind::Discussion);
    let tokens = facts.scan.view(facts.manuscript, sentence).tokens;
    let (Some(first), Some(last)) = (tokens.first(), tokens.last()) else { return false };
    // The reference may stand behind the full stop.
    told && facts.manuscript.block(span).marked(MarkKind::Reference, first.start, last.end + 8)
}

/// A table full of `0.000` is one question, with all its places.
fn one_per_table(facts: &Look, found: Vec<Finding>) -> Vec<Finding> {
    let mut kept: Vec<Finding> = Vec::new();
    for f in found {
        let span = f.at[0];
        // Findings are in reading order, so those of one table follow each other.
        match kept.last_mut() {
            Some(first) if facts.in_table(span) && first.at[0].block == span.block => {
                first.related.push((span, "printed likewise".to_owned()));
                first.results.extend(f.results);
            }
            _ => kept.push(f),
        }
    }
    kept
}
