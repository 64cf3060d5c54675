//! Means and medians told without a spread: "the mean age was 57 years", "median age = 72 years", "a median of 4 years",
//! "2.3 hours in the first arm and 2.1 hours in the second".

use super::super::lexicon::Classes;
use super::super::sentence::SentenceView;
use super::super::token::{Style, TokenKind};
use super::{Draft, empty};
use crate::printed::Printed;

/// How far back the word may stand that names a figure.
const REACH: usize = 16;

/// Words between "mean" and the figure that make it something else than the mean of a group.
const NO_LEVEL: &[&str] = &[
    "difference",
    "differences",
    "change",
    "changes",
    "reduction",
    "increase",
    "decrease",
    "improvement",
    "gain",
    "loss",
    "than",
    "ratio",
    "respectively",
    "versus",
    "vs",
    "because",
    "while",
    "whereas",
    "although",
    "but",
    "which",
    "p",
    "percent",
    "coefficient",
    "window",
];

/// A figure at token `i` that the sentence calls a mean or median.
pub(super) fn read(
    view: &SentenceView,
    i: usize,
    centre: Printed,
    next: usize,
    taken: &[bool],
    before: Option<&Draft>,
) -> Option<Draft> {
    let median = match name(view, i) {
        Some(k) => view.is(k, Classes::MEDIAN),
        None => continues(view, i, next, before?)?,
    };
    if !ends(view, i, next, taken) {
        return None;
    }
    let last = if view.sign(next, '%') { next } else { next - 1 };
    Some(draft(view, i, last, centre, median))
}

pub(super) fn draft(view: &SentenceView, first: usize, last: usize, centre: Printed, median: bool) -> Draft {
    let mut group = empty(view, first, last);
    if median {
        group.median = Some(centre);
    } else {
        group.mean = Some(centre);
    }
    Draft { first, last, group }
}

/// The token of "mean" or "median" that names the figure at token `i`: "mean age was", "median PSA [ng/mL] =",
/// "average of", "mean score 7.8".
pub(super) fn name(view: &SentenceView, i: usize) -> Option<usize> {
    let link = i.checked_sub(1)?;
    let told = view.any(link, &["was", "were", "is"]) || view.signs(link, &['=', ':']);
    let of = view.eq(link, "of");
    // "mean score 7.8": right behind the name, with decimals to show that it is no label.
    let beside = !told
        && !of
        && view.get(link)?.is_word()
        && view.number(i).is_some_and(|p| p.places > 0)
        && view.style(link) == Style::Plain
        && !view.is(link, Classes::AND)
        && !view.is(link, Classes::LABEL)
        && !view.is(link, Classes::TO);
    if !told && !of && !beside {
        return None;
    }
    let mut depth = 0usize;
    for k in (i.saturating_sub(REACH)..link + usize::from(beside)).rev() {
        if view.is(k, Classes::MEAN) || view.is(k, Classes::MEDIAN) {
            let far = link - k;
            let fits = told || of && far <= 4 || beside && far <= 3;
            // "M" is a mean only in "M = 5.2", which has a reading of its own.
            // So is "on average" a manner of speaking.
            let by = view.eq(k.wrapping_sub(1), "by") || view.eq(k.wrapping_sub(2), "by");
            let named = view.word(k).len() > 1 && !view.any(k.wrapping_sub(1), &["on", "moving", "rolling"]) && !by;
            // "the difference in means was"
            let between =
                (k.saturating_sub(3)..k).any(|j| view.any(j, &["difference", "differences", "change", "ratio"]));
            return (fits && depth == 0 && named && !between).then_some(k);
        }
        match view.get(k)?.kind {
            TokenKind::Sign(')' | ']') => depth += 1,
            TokenKind::Sign('(' | '[') => depth = depth.checked_sub(1)?,
            TokenKind::Sign(';' | '.' | '=' | '±' | '%' | '<' | '>') => return None,
            TokenKind::Number(_) => {
                let raised = view.style(k) != Style::Plain;
                if !raised && !view.is(k.wrapping_sub(1), Classes::LABEL) && !view.sign(k.wrapping_sub(1), '-') {
                    return None;
                }
            }
            TokenKind::Word if depth == 0 && view.any(k, NO_LEVEL) => return None,
            TokenKind::Word if beside && view.any(k, &["in", "at", "for", "by", "with", "from", "of"]) => return None,
            _ => {}
        }
    }
    None
}

/// Whether what follows the figure leaves it a figure of its own, without spread, range or interval.
fn ends(view: &SentenceView, i: usize, next: usize, taken: &[bool]) -> bool {
    let percent = usize::from(view.sign(next, '%'));
    // A unit of up to three tokens before a bracket.
    let open = (next..next + 4).find(|&k| view.signs(k, &['(', '[', '±']));
    if let Some(open) = open {
        let told = view.sign(open, '±')
            || taken.get(open).copied().unwrap_or(false)
            || view.signed(open + 1).is_some()
            || view.sign(open + 1, '±');
        if told {
            return false;
        }
    }
    let after = next + percent;
    if view.signs(after, &['/', '±', '×', '~']) || (view.sign(after, '-') && view.number(after + 1).is_some()) {
        return false;
    }
    let stop = view.any(after, &["to", "or", "times", "of", "confidence", "ci"])
        || (view.is(after, Classes::AND) && view.number(after + 1).is_some())
        || view.is(after, Classes::GROUP)
        || (view.sign(after, ',') && view.number(after + 1).is_some());
    // "was 12% higher", "was 5 points lower", "mean 3 mm reduction": a difference.
    let compared = (after..after + 3).any(|k| {
        view.any(
            k,
            &[
                "higher",
                "lower",
                "less",
                "more",
                "greater",
                "longer",
                "shorter",
                "fewer",
                "larger",
                "smaller",
                "reduction",
                "increase",
                "decrease",
                "difference",
                "change",
                "improvement",
                "gain",
                "loss",
                "drop",
                "decline",
                "rise",
            ],
        )
    });
    !stop && !compared && !taken[i..next].iter().any(|&t| t)
}

/// Whether the figure goes on with a list of bare means: "2.3 hours in the first arm and 2.1 hours in the second"; tells
/// whether they are medians.
fn continues(view: &SentenceView, i: usize, next: usize, before: &Draft) -> Option<bool> {
    let group = &before.group;
    let open = group.spread.is_empty() && group.events.is_none() && (group.mean.is_some() || group.median.is_some());
    let link = i.checked_sub(1)?;
    let from = before.last + 1;
    if !open || link < from || i - from > 12 {
        return None;
    }
    let joins = view.is(link, Classes::AND) || view.is(link, Classes::VERSUS) || view.any(link, &["to", "with", "was"]);
    let broken = (from..i).any(|k| view.signs(k, &[';', '.', '(', ')', '=']) || view.number(k).is_some());
    if !joins || broken {
        return None;
    }
    let alike = view.sign(next, '%') == view.sign(before.last, '%')
        && (view.sign(next, '%')
            || view.get(from).is_some_and(|t| t.is_word()) && view.eq(next, view.word(from))
            || group.mean.or(group.median).is_some_and(|p| p.places > 0)
                && view.number(next - 1).is_some_and(|p| p.places > 0));
    alike.then_some(group.median.is_some())
}
