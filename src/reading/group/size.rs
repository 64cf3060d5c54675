//! Group sizes printed in the same sentence: `(n = 24)` before or after a summary.

use super::super::lexicon::Classes;
use super::super::sentence::SentenceView;
use super::super::{Figure, Inference};
use super::Draft;
use crate::printed::Printed;

/// Fills `n` where the sentence prints it for the group.
pub(super) fn assign(view: &SentenceView, drafts: &mut [Draft]) {
    if drafts.is_empty() {
        return;
    }
    let mut sizes = sizes(view);
    // `8% (n = 4)`: the number is the count itself.
    // `(syrup n = 5; water n = 6; p = 0.7)`: counts that are compared.
    sizes.retain(|s| !compared(view, s.1));
    sizes.retain(|s| !drafts.iter().any(|d| d.group.events.is_some() && d.first <= s.1 && s.1 <= d.last));
    if sizes.is_empty() {
        return;
    }
    let open: Vec<usize> = (0..drafts.len()).filter(|&d| drafts[d].group.n.is_none()).collect();
    if open.is_empty() {
        return;
    }
    // `(n = 20) and … (n = 22) …, 5.2 ± 1.1 and 6.1 ± 1.0`: all sizes first, as many as groups, in the same order.
    let all_first = sizes.last().is_some_and(|s| s.1 < drafts[open[0]].first);
    let all_last = sizes.first().is_some_and(|s| s.1 > drafts[open[open.len() - 1]].last);
    if sizes.len() > 1 && (all_first || all_last) {
        if open.len().is_multiple_of(sizes.len()) && interleaved(view, drafts, &open) {
            for (k, &d) in open.iter().enumerate() {
                let (n, at) = sizes[k % sizes.len()];
                give(view, &mut drafts[d], n, at);
            }
            return;
        }
        if all_last {
            return;
        }
    }
    // Sizes stand before their summaries or behind them; the first summary shows which.
    let reach = if sizes[0].1 < drafts[open[0]].first { 6 } else { 14 };
    for &d in &open {
        let (first, last) = (drafts[d].first, drafts[d].last);
        // right behind: `5.2 ± 1.1 (n = 24)`, `5.2 ± 1.1, n = 24`, `5.2 ± 1.1 with the sling (n = 24)`
        // `65% at the end (n = 52)`: as often the count itself.
        let share = drafts[d].group.percent.is_some();
        let behind = sizes.iter().find(|s| s.1 > last && s.1 <= last + reach && !crosses(view, last + 1, s.1));
        if share && behind.is_some_and(|s| !(last + 1..s.1).any(|k| view.is(k, Classes::GROUP))) {
            continue;
        }
        let before = sizes.iter().rev().find(|s| s.1 < first);
        // "flights (n = 172) were alike (91% v 87%)": the one size is that of both together.
        let of_both = sizes.len() == 1 && share && open.len() > 1 && behind.is_none() && opposed(view, drafts, &open);
        let before = before.filter(|_| !of_both);
        if let Some(&(n, at)) = behind.or(before) {
            give(view, &mut drafts[d], n, at);
        }
    }
}

fn give(view: &SentenceView, draft: &mut Draft, n: u64, at: usize) {
    draft.group.n = Some(Figure::inferred(Printed::whole(n), Inference::SameSentence, view.span(at, at)));
}

/// Whether the bracket of a size holds another one and a p-value, and no summary.
fn compared(view: &SentenceView, at: usize) -> bool {
    let edge = |k: usize| view.signs(k, &[')', ']', '(', '[']);
    let Some(open) = (at.saturating_sub(24)..at).rev().find(|&k| edge(k)) else { return false };
    let inside = || (open + 1..(open + 40).min(view.len())).take_while(|&k| !edge(k));
    view.signs(open, &['(', '['])
        && inside().any(|k| view.is(k, Classes::P) && view.signs(k + 1, &['=', '<', '>']))
        && inside().filter(|&k| view.is(k, Classes::N) && view.sign(k + 1, '=')).count() == 2
        && !inside().any(|k| view.sign(k, '±') || view.sign(k, '%'))
}

/// Summaries set against each other.
fn opposed(view: &SentenceView, drafts: &[Draft], open: &[usize]) -> bool {
    open.windows(2).any(|w| {
        let (a, b) = (drafts[w[0]].last + 1, drafts[w[1]].first);
        b.saturating_sub(a) <= 12 && (a..b).any(|k| view.is(k, Classes::VERSUS) || view.any(k, &["compared", "than"]))
    })
}

/// A comma or another figure between a summary and the size behind it.
fn crosses(view: &SentenceView, from: usize, to: usize) -> bool {
    // `(SD 1.0; n = 25)`: the separator that leads to the size itself
    let from = if view.signs(from, &[';', ',']) && view.is(from + 1, Classes::N) { from + 1 } else { from };
    (from..to).any(|k| {
        view.number(k).is_some() || view.signs(k, &[';']) || view.is(k, Classes::AND) || view.is(k, Classes::VERSUS)
    })
}

/// Summaries stand in one list: joined by "and", "versus" or commas only.
fn interleaved(view: &SentenceView, drafts: &[Draft], open: &[usize]) -> bool {
    open.windows(2).all(|w| {
        let (a, b) = (drafts[w[0]].last + 1, drafts[w[1]].first);
        b.saturating_sub(a) <= 6
            && (a..b).any(|k| view.is(k, Classes::AND) || view.is(k, Classes::VERSUS) || view.sign(k, ','))
    })
}

/// All `n = 24` of a sentence with the token of the figure.
fn sizes(view: &SentenceView) -> Vec<(u64, usize)> {
    (0..view.len())
        .filter(|&i| view.any(i, &["n"]) && view.sign(i + 1, '='))
        .filter_map(|i| view.number(i + 2).and_then(Printed::count).map(|n| (n, i + 2)))
        .filter(|&(_, at)| !view.sign(at + 1, '-') && !view.sign(at + 1, '%') && !view.sign(at + 1, '/'))
        .collect()
}
