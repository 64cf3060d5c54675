//! What results lack: asked once for each section, or once for the manuscript.

use crate::query::{RepairKind, Verdict};
use crate::reading::{Measure, PValue, Relation, SpreadKind, Symbol, within};
use crate::recompute::Quantity;
use crate::result::{Feature, ReportedResult};
use crate::rule::check::{Part, SpreadSign};
use crate::rule::checks::recomputed::with_p;
use crate::rule::finding::{Draft, Finding};
use crate::rule::level::Weight;
use crate::rule::look::{Look, is_effect};
use crate::rule::wording;
use crate::text::Span;
use std::collections::BTreeMap;

/// "difference in mean walking distance of 42" is an estimate; a longer phrase may name something else.
const LONGEST_ESTIMATE: usize = 60;

/// One finding for each part of the manuscript; `says` gets the number of occurrences and the first quote.
fn per_part(facts: &Look, mut spans: Vec<Span>, says: impl Fn(usize, &str) -> String) -> Vec<Finding> {
    spans.sort();
    spans.dedup();
    let mut parts: BTreeMap<u32, Vec<Span>> = BTreeMap::new();
    for span in spans {
        parts.entry(facts.part(span)).or_default().push(span);
    }
    let of_part = |(part, at): (u32, Vec<Span>)| {
        let (count, first) = (at.len(), facts.shown(at[0]));
        let label = facts.manuscript.sections[part as usize].title.clone();
        let mut f = Finding::wide(at, Weight::reporting(), says(count, &first), vec![label]);
        f.fills.push(("count", count.to_string()));
        f
    };
    parts.into_iter().map(of_part).collect()
}

fn places(count: usize) -> String {
    if count == 1 { "once".to_owned() } else { format!("{count} times") }
}

/// P only as `< 0.05`, `> 0.05` or `ns`.
pub fn threshold_only(facts: &Look, bounds: &[f64]) -> Vec<Finding> {
    let vague = |p: &&PValue| {
        let at_bound = p.value.is_some_and(|v| bounds.iter().any(|b| (v.value() - b).abs() < 1e-12));
        let vague = match p.relation {
            Relation::Less | Relation::AtMost | Relation::Greater | Relation::AtLeast => at_bound,
            Relation::NotSignificant => true,
            Relation::Equal => false,
        };
        // One bound for several results ("all P > 0.05") is a summary, not a report of each.
        vague && !p.shared && is_effect(p)
    };
    let spans = facts.readings.p.iter().filter(vague).map(|p| p.span).collect();
    let mut findings = per_part(facts, spans, |count, first| {
        format!("P stands only as a bound or as not significant here {} (first as {first}).", places(count))
    });
    for f in &mut findings {
        // Where one of them was recomputed sharply, its precise figure can be offered.
        let offer = f.at.iter().find_map(|&span| precise(facts, span).map(|d| (span, d)));
        if let Some((span, draft)) = offer {
            f.at.retain(|&s| s != span);
            f.at.insert(0, span);
            f.repair = Some(draft);
        }
    }
    findings
}

/// The precise p for a bound that tallies with a sharp recomputation.
fn precise(facts: &Look, span: Span) -> Option<Draft> {
    let all = facts.results_with(span).flat_map(|i| &facts.checked[i].recomputations);
    let r = all.filter(|r| r.of == Quantity::P && r.figure == span && r.verdict == Verdict::Tallies);
    let p = r.filter_map(|r| r.computed).find_map(wording::journal_p)?;
    let quote = facts.quote(span);
    let (at, _) = wording::last_number(quote)?;
    Some(Draft { kind: RepairKind::Replace, at: span, text: with_p(quote, at, &p), needs_confirmation: true })
}

/// A part that results lack, in sections that were recognised as reporting results.
pub fn missing(facts: &Look, what: Part) -> Vec<Finding> {
    let readings = facts.readings;
    let due = |span: Span| facts.reports_results(span);
    let interval_beside =
        |sentence: u32| !within(&readings.intervals, |i| i.sentence, sentence..sentence + 1).is_empty();
    match what {
        Part::EffectEstimate => {
            let spans = facts.results.iter().filter_map(|r| effect_missing(facts, r)).filter(|&s| due(s)).collect();
            per_part(facts, spans, |count, first| {
                format!(
                    "A p-value for a comparison of two groups stands without the size of the effect {} (first: {first}).",
                    places(count)
                )
            })
        }
        Part::Interval => {
            let bare = facts.results.iter().filter_map(|r| {
                let e = &readings.estimates[r.estimate?];
                let has_precision = r.interval.is_some() || e.se.is_some() || interval_beside(e.sentence);
                // Without a p, or at the far end of a phrase, the figure may be no tested effect at all.
                let groups = within(&readings.groups, |g| g.sentence, e.sentence..e.sentence + 1);
                let of_group = groups.iter().any(|g| g.span.overlaps(e.span));
                // "difference in falls (3 of 58" ends in a bracket that says something else.
                let torn = facts.quote(e.span).contains('(') && !facts.quote(e.span).contains(')');
                let sure =
                    r.p.is_some() && !of_group && !torn && facts.quote(e.span).chars().count() <= LONGEST_ESTIMATE;
                let wanted = !has_precision && sure && wants_interval(e.measure) && due(e.span);
                (wanted && !facts.in_table(e.span)).then_some(e.span)
            });
            per_part(facts, bare.collect(), |count, first| {
                format!("An effect is given without an interval or standard error {} (first: {first}).", places(count))
            })
        }
        Part::Df => {
            let lacks = |s: &&crate::reading::Statistic| match s.symbol {
                Symbol::T | Symbol::ChiSquared => s.df1.is_none(),
                Symbol::F => s.df1.is_none() || s.df2.is_none(),
                _ => false,
            };
            let bare = readings.statistics.iter().filter(lacks).map(|s| s.span);
            let spans = bare.filter(|&s| due(s) && !facts.in_table(s)).collect();
            per_part(facts, spans, |count, first| {
                format!("A test statistic stands without its degrees of freedom {} (first: {first}).", places(count))
            })
        }
        Part::Spread => {
            let compared = facts.results.iter().filter(|r| r.p.is_some() && r.groups.len() >= 2);
            let groups = compared.flat_map(|r| &r.groups).map(|&i| &readings.groups[i]);
            let bare = groups.filter(|g| {
                g.mean.is_some() && g.spread.is_empty() && g.percent.is_none() && !interval_beside(g.sentence)
            });
            let spans = bare.map(|g| g.span).filter(|&s| due(s) && !facts.in_table(s)).collect();
            per_part(facts, spans, |count, first| {
                format!(
                    "A group's mean is compared without a measure of its spread {} (first: {first}).",
                    places(count)
                )
            })
        }
    }
}

/// The p of a plain comparison of two groups beside which no effect stands.
fn effect_missing(facts: &Look, r: &ReportedResult) -> Option<Span> {
    let readings = facts.readings;
    let p = r.p.map(|i| &readings.p[i]).filter(|p| is_effect(p))?;
    // Rank tests and medians have no effect that guidance would have everyone print.
    let doubtful = [Feature::OtherGroups, Feature::Unclear, Feature::Paired, Feature::Ranked, Feature::TimeToEvent];
    if r.groups.iter().any(|&i| readings.groups[i].median.is_some()) {
        return None;
    }
    if r.groups.len() != 2 || r.estimate.is_some() || r.interval.is_some() || doubtful.iter().any(|&f| r.has(f)) {
        return None;
    }
    let beside =
        if facts.in_table(p.span) { facts.scan.of_block(p.span.block as usize) } else { p.sentence..p.sentence + 1 };
    let estimate = !within(&readings.estimates, |e| e.sentence, beside.clone()).is_empty();
    let interval = !within(&readings.intervals, |i| i.sentence, beside).is_empty();
    (!estimate && !interval).then_some(p.span)
}

/// Measures of which guidance asks for an interval.
fn wants_interval(measure: Measure) -> bool {
    match measure {
        Measure::MeanDifference
        | Measure::RiskRatio
        | Measure::OddsRatio
        | Measure::HazardRatio
        | Measure::RateRatio
        | Measure::RiskDifference
        | Measure::StandardizedDifference
        | Measure::Efficacy
        | Measure::NumberNeededToTreat => true,
        Measure::PercentDifference
        | Measure::RegressionCoefficient
        | Measure::Correlation
        | Measure::EtaSquared
        | Measure::Other => false,
    }
}

/// Words that say, somewhere in the manuscript, what its spreads are.
const SPREAD_NAMES: [&str; 16] = [
    "± sd",
    "±sd",
    "± se",
    "±se",
    "± standard",
    "± s.d",
    "± s.e",
    "(sd)",
    "(se)",
    "(sem)",
    "[sd]",
    "(s.d",
    "mean (standard deviation",
    "standard deviation",
    "standard error of the mean",
    "mean, sd",
];

/// Spreads that are named nowhere.
pub fn spread_unnamed(facts: &Look, sign: SpreadSign) -> Vec<Finding> {
    let groups = facts.readings.groups.iter();
    let unnamed = groups.filter(|g| g.spread_kind == Some(SpreadKind::Unstated) && g.mean.is_some());
    let with_sign = |span: Span| {
        let quote = facts.quote(span);
        match sign {
            SpreadSign::PlusMinus => quote.contains(['±', '∓']) || quote.contains("+/-"),
            SpreadSign::Brackets => quote.contains(['(', '[']),
        }
    };
    let at: Vec<Span> = unnamed.map(|g| g.span).filter(|&s| with_sign(s)).collect();
    // The name may stand in Methods that this text does not hold.
    let fragment = !facts.context.has_methods;
    if at.is_empty() || fragment || facts.context.spread.is_some() || facts.mentions(&SPREAD_NAMES) {
        return Vec::new();
    }
    let first = facts.shown(at[0]);
    let count = at.len();
    let (figure, label) = match sign {
        SpreadSign::PlusMinus => ("figure after ±", "plus-minus"),
        SpreadSign::Brackets => ("figure in brackets", "brackets"),
    };
    let says = format!(
        "The {figure} is nowhere said to be a standard deviation or a standard error ({}, first in {first}).",
        places(count)
    );
    let mut f = Finding::wide(at, Weight::reporting(), says, vec![label.to_owned()]);
    f.fills.push(("count", count.to_string()));
    vec![f]
}
