//! Words of direction against the figures printed for them. Very cautious: two figures in an order that
//! the sentence itself makes plain, or one ratio whose whole interval lies on the other side of 1.

use crate::reading::lexicon::Classes;
use crate::reading::{Attribution, Claim, Direction, Estimate, Group, Measure, Scale, SentenceView, within};
use crate::rule::finding::Finding;
use crate::rule::level::Weight;
use crate::rule::look::Look;
use crate::text::Span;

pub fn against_figures(facts: &Look) -> Vec<Finding> {
    let mut findings = Vec::new();
    for claim in &facts.readings.claims {
        let (Some(direction), Attribution::ThisStudy) = (claim.direction, claim.attribution) else { continue };
        let view = facts.scan.view(facts.manuscript, claim.sentence);
        let alone = within(&facts.readings.claims, |c| c.sentence, claim.sentence..claim.sentence + 1).len() == 1;
        // "Faster", "better" and "longer" may name either end of a scale.
        let quote = facts.quote(claim.span).to_lowercase();
        if !alone || !one_direction(&view) || !PLAIN.iter().any(|w| quote.contains(w)) {
            continue;
        }
        findings.extend(two_figures(facts, claim, direction).or_else(|| one_ratio(facts, claim, direction, &view)));
    }
    findings
}

/// One word of direction in the whole sentence: a second one ("lower … a greater fall") may turn it round.
fn one_direction(view: &SentenceView) -> bool {
    let count = (0..view.len()).filter(|&i| view.is(i, Classes::UP.or(Classes::DOWN)) || view.any(i, &TURNS)).count();
    count <= 1
}

/// Words whose direction is that of the figure itself.
const PLAIN: [&str; 12] = [
    "higher",
    "lower",
    "greater",
    "fewer",
    "larger",
    "smaller",
    "increased",
    "decreased",
    "reduced",
    "more ",
    "less ",
    "raised",
];

/// Words that turn a comparison round or make its figures something else than levels.
const TURNS: [&str; 24] = [
    "reduction",
    "reductions",
    "decrease",
    "decreases",
    "decline",
    "declines",
    "fall",
    "drop",
    "loss",
    "improvement",
    "increase",
    "increases",
    "gain",
    "change",
    "changes",
    "respectively",
    "difference",
    "differences",
    "not",
    "no",
    "adjusted",
    "from",
    "except",
    "but",
];

/// "lower in A than in B (8.1 v 7.4)".
fn two_figures(facts: &Look, claim: &Claim, direction: Direction) -> Option<Finding> {
    let readings = facts.readings;
    let groups: &[Group] = within(&readings.groups, |g| g.sentence, claim.sentence..claim.sentence + 1);
    let [first, second] = groups else { return None };
    if first.change || second.change || first.span.start < claim.span.end {
        return None;
    }
    let figure = |g: &Group| g.mean.or(g.median).or(g.percent);
    let alike = first.mean.is_some() == second.mean.is_some() && first.median.is_some() == second.median.is_some();
    let (a, b) = (figure(first)?, figure(second)?);
    if !alike || a.negative || b.negative {
        return None;
    }
    // The order is plain when "than" stands once, between the claim and both figures, and only a
    // comparing word stands between the figures.
    let begin = Span { end: claim.span.start, ..claim.span };
    let before = facts.between(begin, first.span);
    let thans = before.split(|c: char| !c.is_alphabetic()).filter(|w| *w == "than").count();
    let between = facts.between(first.span, second.span);
    let joined = between.split(|c: char| !c.is_alphabetic()).any(|w| ["v", "vs", "versus", "compared"].contains(&w));
    if thans != 1 || !joined || contradicted(&before, &first.label, &second.label) {
        return None;
    }
    let against = match direction {
        Direction::Lower => a.rounded().lo > b.rounded().hi,
        Direction::Higher => a.rounded().hi < b.rounded().lo,
    };
    if !against {
        return None;
    }
    let quote = facts.shown(claim.span);
    let figures = format!("{a} against {b}");
    let f = finding(facts, claim, figures.clone(), format!("“{quote}” stands beside {figures}, in this order."));
    Some(Finding {
        related: vec![(first.span, "the first figure".to_owned()), (second.span, "the second figure".to_owned())],
        figures: vec![claim.span, first.span, second.span],
        ..f
    })
}

/// The labels read for the figures name the two groups the other way round.
fn contradicted(before: &str, first: &str, second: &str) -> bool {
    let Some((head, tail)) = before.split_once("than") else { return true };
    let named = |text: &str, label: &str| !label.is_empty() && text.contains(&label.to_lowercase());
    named(tail, first) && !named(head, first) || named(head, second) && !named(tail, second)
}

/// "reduced risk (HR 1.4, 95 % CI 1.1 to 1.8)".
fn one_ratio(facts: &Look, claim: &Claim, direction: Direction, view: &SentenceView) -> Option<Finding> {
    let readings = facts.readings;
    let estimates: &[Estimate] = within(&readings.estimates, |e| e.sentence, claim.sentence..claim.sentence + 1);
    let [e] = estimates else { return None };
    let ratio =
        matches!(e.measure, Measure::RiskRatio | Measure::OddsRatio | Measure::HazardRatio | Measure::RateRatio);
    let result = facts
        .results_with(e.span)
        .map(|i| &facts.results[i])
        .find(|r| r.estimate.is_some_and(|i| readings.estimates[i].span == e.span))?;
    let interval = &readings.intervals[result.interval?];
    if !ratio || e.scale != Scale::Ratio || interval.sentence != claim.sentence {
        return None;
    }
    // The word of direction must speak of the risk itself: "reduced risk", "higher odds of".
    let at = (0..view.len()).find(|&i| view.is(i, Classes::UP.or(Classes::DOWN)))?;
    let risk = ["risk", "risks", "odds", "hazard", "mortality", "rate", "rates", "incidence", "likelihood"];
    if !(1..=2).any(|k| view.any(at + k, &risk)) {
        return None;
    }
    let against = match direction {
        Direction::Lower => interval.lower.value() > 1.0 && e.value.value() > 1.0,
        Direction::Higher => interval.upper.value() < 1.0 && e.value.value() < 1.0,
    };
    if !against {
        return None;
    }
    let quote = facts.shown(claim.span);
    let estimate = facts.shown(e.span);
    let f = finding(facts, claim, estimate.clone(), format!("“{quote}” stands beside {estimate}."));
    let related = vec![(e.span, "the estimate".to_owned()), (interval.span, "the interval".to_owned())];
    Some(Finding { related, figures: vec![claim.span, e.span], ..f })
}

fn finding(facts: &Look, claim: &Claim, printed: String, says: String) -> Finding {
    let weight = Weight { drives_message: facts.drives_message(claim.span), ..Weight::reporting() };
    let mut f = Finding::at(claim.span, weight, says);
    f.fills.push(("printed", printed));
    f
}
