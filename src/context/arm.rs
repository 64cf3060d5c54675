//! Arms with their sizes, and how many took part in all.

use super::{Arm, Context, Stated};
use crate::reading::group::arm::{EACH, NO_ARM, SizedArm};
use crate::reading::lexicon::{self, Classes};
use crate::reading::{Readings, SentenceView, within};

/// More arms than any study has; text made to hurt has more.
const MOST: usize = 100;

/// Appends the arms that a sentence introduces (`the placebo group (n = 24)`), and the number randomised.
pub(super) fn arms(view: &SentenceView, readings: &Readings, context: &mut Context) {
    // Who left a study makes no arm of it.
    let named = |a: &&SizedArm| !a.leaving && a.label != EACH;
    for arm in within(&readings.arms, |a| a.sentence, view.id..view.id + 1).iter().filter(named) {
        let known = context.arms.iter().any(|a| a.label.eq_ignore_ascii_case(&arm.label));
        if !known && context.arms.len() < MOST {
            context.arms.push(Arm { label: arm.label.clone(), n: arm.n, span: arm.span });
        }
    }
    if context.randomised.is_none() {
        context.randomised = randomised_in(view);
    }
}

/// "60 patients were randomised": the total, where a sentence says it only of all.
pub fn randomised_in(view: &SentenceView) -> Option<Stated<u64>> {
    for v in 0..view.len() {
        if !view.is(v, Classes::RARE) || !view.any(v, &["randomised", "randomized", "randomly"]) {
            continue;
        }
        // "… patients were (randomly) randomised/assigned": back over the verb to a count of people.
        let verb = (v.saturating_sub(3)..v).rev().find(|&j| view.any(j, &["were", "was"]));
        let assigned = !view.any(v, &["randomly"])
            || (v + 1..v + 3).any(|j| view.any(j, &["assigned", "allocated", "divided", "distributed"]));
        let Some(verb) = verb.filter(|_| assigned) else { continue };
        let people = (verb.saturating_sub(5)..verb).rev().find(|&j| view.is(j, Classes::GROUP) || view.any(j, NO_ARM));
        let Some(people) = people else { continue };
        let count = (people.saturating_sub(4)..people).rev().find_map(|j| Some((j, count_at(view, j)?)));
        let Some((at, n)) = count.filter(|&(_, n)| n >= 8) else { continue };
        // "24 patients were randomised to placebo" is an arm, "60 … to receive A or B" is everyone.
        let to_one = (v + 1..(v + 4).min(view.len())).any(|j| view.any(j, &["to", "into"]))
            && !(v + 1..(v + 30).min(view.len()))
                .any(|j| view.any(j, &["or", "either", "groups", "arms", "two", "three", "four", "one", "versus"]));
        let parted = (0..at).any(|j| count_at(view, j).is_some_and(|m| m > n));
        if to_one || parted && !view.any(at.wrapping_sub(1), &["of"]) || view.signs(at + 1, &['%', '/']) {
            continue;
        }
        return Some(Stated { value: n, span: view.span(at, people) });
    }
    None
}

/// A whole number in digits or in words ("one hundred and forty nine" is left alone: its last word alone misleads).
fn count_at(view: &SentenceView, j: usize) -> Option<u64> {
    if let Some(n) = view.number(j) {
        return n.count();
    }
    if !view.is(j, Classes::NUMBER_WORD) {
        return None;
    }
    let one = lexicon::number_word(view.word(j))?;
    if j > 0 && (view.is(j - 1, Classes::NUMBER_WORD) || view.sign(j - 1, '-') || view.any(j - 1, &["and", "hundred"]))
    {
        let tens = if view.sign(j - 1, '-') { j.checked_sub(2)? } else { j - 1 };
        let ten = lexicon::number_word(view.word(tens)).filter(|t| (20..100).contains(t) && t % 10 == 0 && one < 10)?;
        return Some(ten + one);
    }
    Some(one)
}
