//! The name of a group: "in the placebo group", "for vortex therapy", "controls".

use super::super::lexicon::Classes;
use super::super::sentence::SentenceView;
use super::super::token::TokenKind;
use super::Draft;

/// Fills the labels that stand right behind the summaries, or behind a whole list with "respectively".
pub(super) fn assign(view: &SentenceView, drafts: &mut [Draft]) {
    for d in 0..drafts.len() {
        let limit = drafts.get(d + 1).map_or(view.len(), |n| n.first);
        let last = drafts[d].last;
        let first = drafts[d].first;
        drafts[d].group.label =
            bracketed(view, first, limit).or_else(|| behind(view, last + 1, limit)).unwrap_or_default();
        drafts[d].group.change = is_change(view, first) || d > 0 && shares_change(view, &drafts[d - 1], first);
    }
}

/// "in the syrup group (5.2 ± 1.1)": the name before the bracket in which the summary stands alone.
fn bracketed(view: &SentenceView, first: usize, limit: usize) -> Option<String> {
    let open = first.checked_sub(1).filter(|&k| view.signs(k, &['(', '[']))?;
    let mut depth = 0i32;
    (open..limit).find(|&k| {
        depth += i32::from(view.signs(k, &['(', '['])) - i32::from(view.signs(k, &[')', ']']));
        depth == 0
    })?;
    let group = open.checked_sub(1).filter(|&k| view.any(k, &["group", "arm", "condition"]))?;
    let from = (group.saturating_sub(6)..group).rev().find(|&k| {
        !view.get(k).is_some_and(|t| t.is_word() || t.is_sign('-') || t.number().is_some())
            || view.any(k, &["the", "in", "than", "with", "for", "of", "a", "and", "to"])
    })?;
    (from + 1 < group).then(|| view.quote(from + 1, group - 1).to_string())
}

/// Up to five words after "in", "for", "with", "among" within a few tokens.
fn behind(view: &SentenceView, from: usize, limit: usize) -> Option<String> {
    let stop = limit.min(from + 9);
    // What another figure is set against names the other one.
    let stop =
        (from..stop).find(|&k| view.any(k, &["than", "compared"]) || view.is(k, Classes::VERSUS)).unwrap_or(stop);
    let at = (from..stop).find(|&k| view.any(k, &["in", "for", "with", "among", "receiving"]))?;
    let mut first = at + 1;
    while view.any(first, &["the", "a", "those", "patients", "participants", "subjects", "receiving", "treated", "of"])
    {
        first += 1;
    }
    let mut last = first;
    while last < limit.min(first + 5) {
        match view.get(last)?.kind {
            TokenKind::Word if view.any(last, &["group", "groups", "arm", "arms"]) => break,
            TokenKind::Word
                if view.is(last, Classes::AND) || view.is(last, Classes::VERSUS) || view.is(last, Classes::COPULA) =>
            {
                break;
            }
            TokenKind::Word | TokenKind::Number(_) | TokenKind::Sign('-' | '+') => last += 1,
            TokenKind::Sign(_) => break,
        }
    }
    (last > first).then(|| view.quote(first, last - 1).to_string())
}

/// `changes (syrup 5.2 ± 1.1; water 6.1 ± 1.0)`: in one bracket, what is said of the first member is said of all.
fn shares_change(view: &SentenceView, before: &Draft, first: usize) -> bool {
    let (from, change) = (before.last + 1, before.group.change);
    let near = change && (from..from + 8).contains(&first);
    let open = |k: usize| view.signs(k, &['(', '[']);
    let inside = near && before.group.mean.is_some() && {
        // The bracket was opened before the member before this one, and is closed nowhere between.
        (before.first.saturating_sub(24)..before.first).rev().take_while(|&k| !view.signs(k, &[')', ']'])).any(open)
    };
    inside
        && (from..first).any(|k| view.sign(k, ';'))
        && !(from..first)
            .any(|k| view.signs(k, &['(', '[', ')', ']', '.']) || view.any(k, &["from", "to", "pre", "post"]))
}

/// "change", "increase", "reduction" … told before the figure and after the last figure.
fn is_change(view: &SentenceView, first: usize) -> bool {
    (first.saturating_sub(16)..first).any(|k| {
        view.any(
            k,
            &[
                "change",
                "changes",
                "increase",
                "increases",
                "decrease",
                "decreases",
                "reduction",
                "reductions",
                "gain",
                "loss",
                "improvement",
            ],
        )
    }) && !(first.saturating_sub(3)..first).any(|k| view.any(k, &["from", "to"]))
}
