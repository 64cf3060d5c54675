//! Means and medians with an interval in place of a spread: `a mean of 5.2 mm (95% CI 4.1–6.3)`, "median (95% CI) was
//! 3.6 (1.9 to 5.4)". The interval keeps its own reading.

use super::super::lexicon::Classes;
use super::super::sentence::SentenceView;
use super::super::token::TokenKind;
use super::super::{Estimate, IntervalReading, Measure, SpreadKind};
use super::{Draft, Setting, empty, with_spread};

/// Words between "mean" and the figure, or anywhere in a list, that make it an effect.
const EFFECT: &[&str] = &[
    "difference",
    "differences",
    "ratio",
    "ratios",
    "odds",
    "hazard",
    "hr",
    "or",
    "rr",
    "reduction",
    "increase",
    "decrease",
    "improvement",
    "effect",
    "benefit",
    "coefficient",
    "slope",
    "beta",
    "md",
    "smd",
    "than",
    "risk",
    "correlation",
];

/// Appends a group for each interval whose figure the sentence calls a mean or a median.
pub(super) fn read(
    view: &SentenceView,
    setting: &mut Setting,
    intervals: &[IntervalReading],
    estimates: &[Estimate],
    drafts: &mut Vec<Draft>,
) {
    let mut before: Option<(usize, bool)> = None;
    let mut timed = None;
    // "at the end it was 2.1 (95% CI …) and 1.9 (95% CI …)": the paragraph has told that its figures are means.
    let carried = setting.limits.filter(|_| intervals.len() >= 2 && !(0..view.len()).any(|k| view.any(k, EFFECT)));
    for interval in intervals {
        let Some((value, span)) = interval.estimate else { continue };
        let (first, last) = (view.token_at(span.start), view.token_at(interval.span.end));
        let effect =
            |e: &&Estimate| e.span.end == span.end && !matches!(e.measure, Measure::Other | Measure::MeanDifference);
        if estimates.iter().any(|e| effect(&e)) || interval.credible {
            continue;
        }
        // "a mean 6 mm reduction on the scale (95% CI …)"
        let figure_end = view.token_at(span.end);
        if (figure_end..last.min(figure_end + 12)).any(|k| view.any(k, EFFECT) && !view.sign(k - 1, '(')) {
            continue;
        }
        let follows = before.filter(|&(end, _)| first - end.min(first) <= 14 && list(view, end, first)).map(|b| b.1);
        let of_time = || of_time(view, first, figure_end, &mut timed);
        let Some(median) = named(view, first).or(follows).or(carried).or_else(of_time) else { continue };
        let inside = interval.lower.value() <= value.value() && value.value() <= interval.upper.value();
        if !inside {
            continue;
        }
        let spread = [interval.lower, interval.upper];
        let mut group = with_spread(empty(view, first, last - 1), SpreadKind::Ci, &spread);
        if median {
            group.median = Some(value);
        } else {
            group.mean = Some(value);
        }
        drafts.push(Draft { first, last: last - 1, group });
        before = Some((last, median));
        setting.limits = Some(median);
    }
}

/// "Clearance took 61 hours (95% CI 48 to 75) … and 43 hours …" where a hazard ratio or a log-rank test compares them:
/// times to an event, of which the median is told. `timed` keeps what the sentence says of that.
fn of_time(view: &SentenceView, first: usize, end: usize, timed: &mut Option<bool>) -> Option<bool> {
    const TIMES: &[&str] = &["hours", "hour", "days", "day", "weeks", "months", "years", "minutes"];
    if !view.any(end, TIMES) || !(first.saturating_sub(24)..first).all(|k| !view.any(k, EFFECT)) {
        return None;
    }
    let told = *timed.get_or_insert_with(|| {
        (0..view.len()).any(|k| view.any(k, &["hazard", "hr", "logrank", "kaplan"]) || view.phrase(k, &["log", "rank"]))
            || (1..view.len()).any(|k| view.eq(k, "rank") && view.sign(k - 1, '-'))
    });
    told.then_some(true)
}

/// Gives a percentage that was read by itself the interval in the bracket right behind it: `63% (95% CI 58 to 68)`.
pub(super) fn of_shares(view: &SentenceView, intervals: &[IntervalReading], drafts: &mut [Draft]) {
    for d in drafts {
        let alone = d.group.percent.is_some() && d.group.events.is_none() && d.group.spread.is_empty();
        if !alone || !view.sign(d.last, '%') || !view.signs(d.last + 1, &['(', '[']) {
            continue;
        }
        let behind = |i: &&IntervalReading| (d.last + 1..=d.last + 2).contains(&view.token_at(i.span.start));
        if let Some(interval) = intervals.iter().find(behind) {
            let last = view.token_at(interval.span.end) - 1;
            let spread = [interval.lower, interval.upper];
            d.group = with_spread(d.group.clone(), SpreadKind::Ci, &spread);
            d.group.span = view.span(d.first, last);
            d.last = last;
        }
    }
}

/// Whether "mean" or "median" names the figure at token `at`, and which.
fn named(view: &SentenceView, at: usize) -> Option<bool> {
    let mut depth = 0usize;
    for k in (at.saturating_sub(22)..at).rev() {
        match view.get(k)?.kind {
            TokenKind::Sign(')' | ']') => depth += 1,
            TokenKind::Sign('(' | '[') => depth = depth.saturating_sub(1),
            TokenKind::Sign(';' | '=') if depth == 0 => return None,
            TokenKind::Number(_) if depth == 0 && !view.is(k.wrapping_sub(1), Classes::LABEL) => return None,
            TokenKind::Word if depth == 0 => {
                let symbol = view.word(k).len() < 2;
                if (view.is(k, Classes::MEAN) || view.is(k, Classes::MEDIAN)) && !symbol {
                    // "the difference in adjusted means was"
                    let between = (k.saturating_sub(4)..k).any(|j| view.any(j, EFFECT));
                    return (!between).then(|| view.is(k, Classes::MEDIAN));
                }
                if view.any(k, EFFECT) {
                    return None;
                }
            }
            _ => {}
        }
    }
    None
}

/// Whether tokens `from..to` join two members of a list.
fn list(view: &SentenceView, from: usize, to: usize) -> bool {
    !(from..to).any(|k| view.any(k, EFFECT) || view.sign(k, ';') || view.is(k, Classes::P))
        && (from..to).any(|k| {
            view.is(k, Classes::AND)
                || view.is(k, Classes::VERSUS)
                || view.sign(k, ',')
                || view.any(k, &["compared", "with"])
        })
}
