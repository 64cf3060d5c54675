//! Arms with their sizes, and how many took part in all.

use super::words::{BEFORE, NO_ARM};
use super::{Arm, Context, Stated};
use crate::reading::SentenceView;
use crate::reading::lexicon::{self, Classes};

/// Words that name a group's members or the group itself, and end its name.
const GROUP: &[&str] =
    &["group", "groups", "arm", "arms", "controls", "control", "placebo", "condition", "cohort", "treatment"];

/// More arms than any study has; text made to hurt has more.
const MOST: usize = 100;

/// Appends the arms that a sentence introduces (`the placebo group (n = 24)`), and the number randomised.
pub(super) fn arms(view: &SentenceView, context: &mut Context) {
    let mut found: Vec<Arm> = Vec::new();
    for i in 0..view.len() {
        // `n = 24` first thing within a bracket.
        if !(view.is(i, Classes::N) && view.sign(i + 1, '=') && i > 1) {
            continue;
        }
        let Some(n) = view.number(i + 2).and_then(|x| x.count()).filter(|&n| n > 1) else { continue };
        let closes = view.signs(i + 3, &[')', ']', ';', ',']);
        if !view.signs(i - 1, &['(', '[']) || !closes || view.signs(i + 4, &['/', '%']) {
            continue;
        }
        let Some(label) = label_before(view, i - 1) else { continue };
        found.push(Arm { label, n, span: view.span(i, i + 2) });
    }
    // One `(n = …)` by itself is as often a subgroup; two in a sentence, or a word for a group, name arms.
    let certain = found.len() >= 2;
    for arm in found {
        let worded = certain || says_group(view, arm.span.start);
        let known = context.arms.iter().any(|a| a.label.eq_ignore_ascii_case(&arm.label));
        if worded && !known && context.arms.len() < MOST {
            context.arms.push(arm);
        }
    }
    randomised(view, context);
}

/// A word for a group right before the bracket.
fn says_group(view: &SentenceView, offset: u32) -> bool {
    let i = view.token_at(offset);
    (i.saturating_sub(3)..i).any(|j| view.any(j, GROUP))
}

/// The name before a bracket, without "group": at most six words back to an article, preposition or mark.
fn label_before(view: &SentenceView, bracket: usize) -> Option<String> {
    let mut end = bracket;
    while end > 0 && view.any(end - 1, &["group", "groups", "arm", "arms", "condition", "cohort"]) {
        end -= 1;
    }
    // "Group A (n = 12)" keeps its letter.
    let mut first = end;
    while first > 0 && end - first < 6 {
        let j = first - 1;
        let joins = view.signs(j, &['-', '+', '/']) && j > 0;
        if !(view.tokens[j].is_word() || view.number(j).is_some() || joins) || view.any(j, BEFORE) {
            break;
        }
        first = j;
    }
    while first < end && view.signs(first, &['-', '+', '/']) {
        first += 1;
    }
    if first == end {
        return None;
    }
    if (first..end).any(|j| view.any(j, NO_ARM)) || !view.tokens[first..end].iter().any(|t| t.is_word()) {
        return None;
    }
    Some(view.quote(first, end - 1).to_string())
}

/// "60 patients were randomised": the total, said once and only of all.
fn randomised(view: &SentenceView, context: &mut Context) {
    if context.randomised.is_some() {
        return;
    }
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
        context.randomised = Some(Stated { value: n, span: view.span(at, people) });
        return;
    }
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
