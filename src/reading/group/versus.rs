//! Figures set against each other without spread: `5.9 vs. 5.7 mmol/L`, `2.4 days versus 4.2 days`,
//! `57/58 %`.

use super::super::lexicon::Classes;
use super::super::sentence::SentenceView;
use super::super::token::Style;
use super::{Draft, empty};

/// Appends pairs of bare figures on both sides of "versus".
pub(super) fn read(view: &SentenceView, taken: &mut [bool], drafts: &mut Vec<Draft>) {
    for from in 0..view.len() {
        if view.eq(from, "from") {
            before_after(view, from, taken, drafts);
        }
    }
    for v in 1..view.len() {
        if !view.is(v, Classes::VERSUS) || view.style(v) != Style::Plain {
            continue;
        }
        let dot = usize::from(view.sign(v + 1, '.'));
        let Some((right, after)) = view.signed(v + 1 + dot) else { continue };
        // the figure on the left, with at most two words of unit or group between
        let mut left = v - 1;
        let mut steps = 0;
        while steps < 3
            && view.number(left).is_none()
            && left > 0
            && (view.get(left).is_some_and(|t| t.is_word()) || view.signs(left, &['/', '%']))
        {
            left -= 1;
            steps += 1;
        }
        let Some(mut value) = view.number(left) else { continue };
        let right_at = after - 1;
        if taken[left] || taken[right_at] || view.sign(left + 1, '%') || view.sign(after, '%') || view.sign(after, '±')
        {
            continue;
        }
        // Whole numbers are figures of a result only in a bracket that holds their p as well.
        let tested = left > 0 && view.sign(left - 1, '(') && (after..after + 6).any(|k| view.is(k, Classes::P));
        if value.places == 0 && right.places == 0 && !tested {
            continue;
        }
        let mut first = left;
        let opens = left > 1 && (view.spaced(left - 1) || view.signs(left - 2, &['(', '[', ':']));
        if left > 0 && view.sign(left - 1, '-') && !view.spaced(left) && opens {
            value = value.negated();
            first = left - 1;
        }
        if left > 0 && view.signs(left - 1, &['=', '<', '>', '≤', '≥']) {
            continue;
        }
        for (p, from, to) in [(value, first, left), (right, v + 1 + dot, right_at)] {
            taken[from..=to].fill(true);
            let mut group = empty(view, from, to);
            if (from.saturating_sub(16)..from).any(|k| view.is(k, Classes::MEDIAN)) {
                group.median = Some(p);
            } else {
                group.mean = Some(p);
            }
            drafts.push(Draft { first: from, last: to, group });
        }
    }
}

/// `decreased from 84.6 to 77.6 mmHg (p = 0.001)`: two means without spread, where their p stands behind them.
fn before_after(view: &SentenceView, from: usize, taken: &mut [bool], drafts: &mut Vec<Draft>) {
    let Some((first, after)) = view.signed(from + 1) else { return };
    let unit = usize::from(view.get(after).is_some_and(|t| t.is_word()) && !view.eq(after, "to"));
    if !view.eq(after + unit, "to") {
        return;
    }
    let start = after + unit + 1;
    let Some((second, end)) = view.signed(start) else { return };
    let tested = (end..end + 8).any(|k| view.is(k, Classes::P));
    let free = !taken[from + 1..end].iter().any(|&t| t) && !view.sign(end, '%') && !view.sign(end, '±');
    if !tested || !free || (first.places == 0 && second.places == 0) {
        return;
    }
    for (value, a, b) in [(first, from + 1, after - 1), (second, start, end - 1)] {
        taken[a..=b].fill(true);
        let mut group = empty(view, a, b);
        group.mean = Some(value);
        drafts.push(Draft { first: a, last: b, group });
    }
}
