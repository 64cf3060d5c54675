//! A sentence without its parentheses, cut into clauses.

use crate::reading::claim_words::{BREAK, CHANGED, COMPARATIVE, DIFFER, FINITE, FUNCTION, OTHERS, PLAN, REPORT, THAN};
use crate::reading::lexicon::Classes;
use crate::reading::sentence::SentenceView;

/// The tokens of a sentence that stand outside parentheses. Positions in it are called `k`.
pub(super) struct Flat<'a> {
    pub view: &'a SentenceView<'a>,
    at: Vec<u32>,
}

impl<'a> Flat<'a> {
    pub fn new(view: &'a SentenceView<'a>) -> Flat<'a> {
        // A bracket without its partner is a sign like any other.
        let mut open: Vec<usize> = Vec::new();
        let mut holes: Vec<(usize, usize)> = Vec::new();
        for i in 0..view.len() {
            if view.signs(i, &['(', '[']) {
                open.push(i);
            } else if view.signs(i, &[')', ']'])
                && let Some(from) = open.pop()
            {
                while holes.last().is_some_and(|h| h.0 > from) {
                    holes.pop();
                }
                holes.push((from, i));
            }
        }
        let mut at = Vec::with_capacity(view.len());
        let mut i = 0;
        let mut holes = holes.into_iter().peekable();
        while i < view.len() {
            match holes.peek() {
                Some(&(from, to)) if from <= i => {
                    i = to + 1;
                    holes.next();
                }
                _ => {
                    at.push(i as u32);
                    i += 1;
                }
            }
        }
        Flat { view, at }
    }

    pub fn len(&self) -> usize {
        self.at.len()
    }

    /// The token at `k`.
    pub fn token(&self, k: usize) -> usize {
        self.at[k] as usize
    }

    pub fn is(&self, k: usize, class: Classes) -> bool {
        self.at.get(k).is_some_and(|&i| self.view.is(i as usize, class))
    }

    pub fn any(&self, k: usize, words: &[&str]) -> bool {
        self.at.get(k).is_some_and(|&i| self.view.any(i as usize, words))
    }

    pub fn sign(&self, k: usize, sign: char) -> bool {
        self.at.get(k).is_some_and(|&i| self.view.sign(i as usize, sign))
    }

    pub fn signs(&self, k: usize, signs: &[char]) -> bool {
        self.at.get(k).is_some_and(|&i| self.view.signs(i as usize, signs))
    }

    pub fn number(&self, k: usize) -> bool {
        self.at.get(k).is_some_and(|&i| self.view.number(i as usize).is_some())
    }

    pub fn word(&self, k: usize) -> &'a str {
        self.at.get(k).map_or("", |&i| self.view.word(i as usize))
    }

    /// A parenthesis with a figure (or a pointer to a table) was taken out after `k`.
    pub fn figures_after(&self, k: usize) -> bool {
        let from = self.token(k) + 1;
        let to = self.at.get(k + 1).map_or(self.view.len(), |&i| i as usize);
        (from..to).any(|i| self.view.number(i).is_some() || self.view.is(i, Classes::P.or(Classes::LABEL)))
    }

    /// Any token of `range` of one of these classes.
    pub fn find(&self, range: std::ops::Range<usize>, class: Classes) -> Option<usize> {
        let end = range.end.min(self.len());
        (range.start..end).find(|&k| self.is(k, class))
    }

    /// A verb that makes its clause finite. Participles that stand before a noun do not.
    pub fn finite(&self, k: usize) -> bool {
        if self.is(k, FINITE) {
            return true;
        }
        if !self.is(k, CHANGED.or(DIFFER).or(REPORT)) || self.is(k, COMPARATIVE.or(PLAN)) {
            return false;
        }
        let word = self.word(k);
        let past = word.ends_with("ed") || self.any(k, PAST);
        past && k > 0 && !self.is(k - 1, FUNCTION.or(THAN)) && !self.signs(k - 1, &[',', '-'])
    }
}

/// Past forms without -ed, and present forms that only verbs have.
const PAST: &[&str] = &["fell", "rose", "grew", "showed", "found", "saw", "differs", "suggests", "indicates", "shows"];

/// How a clause hangs on the one before it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Lead {
    /// A main clause.
    Main,
    /// After "that": a finding, when the verb before it is one of report.
    That,
    /// ", with no differences …": no verb of its own is needed.
    With,
    /// ", which revealed …" and ", revealing …".
    Which,
}

#[derive(Clone, Copy, Debug)]
pub(super) struct Clause {
    pub first: usize,
    /// One past the last.
    pub end: usize,
    pub lead: Lead,
    /// A plan, a question or a hypothesis governs it.
    pub planned: bool,
    /// "no evidence that …", "did not find that …".
    pub denied: bool,
    /// "previous studies have shown that …".
    pub others: bool,
    /// It only introduces the next clause: "these data show".
    pub introduces: bool,
}

/// Cuts a sentence into clauses, in order.
pub(super) fn clauses(flat: &Flat) -> Vec<Clause> {
    let mut out: Vec<Clause> = Vec::with_capacity(4);
    let mut now =
        Clause { first: 0, end: 0, lead: Lead::Main, planned: false, denied: false, others: false, introduces: false };
    let mut finite = false;
    let mut k = 0;
    while k < flat.len() {
        let cut = cut_at(flat, now.first, k, finite);
        if let Some((next, lead)) = cut {
            let mut left = now;
            left.end = k;
            let mut new = Clause { first: next, lead, introduces: false, ..now };
            if lead == Lead::That {
                left.introduces = true;
                let range = now.first..k;
                new.planned |= flat.find(range.clone(), PLAN).is_some();
                // "we cannot exclude that": neither found nor denied.
                new.planned |= flat.find(range.clone(), Classes::NEGATION).is_some()
                    && range
                        .clone()
                        .any(|j| flat.any(j, &["exclude", "rule", "know", "known", "surprising", "certain"]));
                new.planned |=
                    range.clone().any(|j| flat.any(j, &["ensure", "ensures", "ensured", "ensuring", "possible"]));
                new.denied = flat.find(range.clone(), Classes::NEGATION).is_some();
                new.others |= flat.find(range, OTHERS).is_some();
            } else {
                new.denied = false;
                new.planned = false;
            }
            if left.end > left.first {
                out.push(left);
            }
            now = new;
            finite = lead == Lead::With;
            k = next;
            continue;
        }
        finite |= flat.finite(k);
        k += 1;
    }
    now.end = flat.len();
    if now.end > now.first {
        out.push(now);
    }
    out
}

/// Whether a new clause begins at `k`, and then its first token and how it hangs on.
fn cut_at(flat: &Flat, first: usize, k: usize, finite: bool) -> Option<(usize, Lead)> {
    if k == first && !flat.is(k, BREAK) {
        return None;
    }
    if flat.signs(k, &[';', ':']) {
        return Some((k + 1, Lead::Main));
    }
    if flat.sign(k, ',') {
        if flat.any(k + 1, &["which", "who"]) {
            return Some((k + 1, Lead::Which));
        }
        if flat.any(k + 1, &["with", "without"]) && finite && verbless(flat, k + 2) {
            return Some((k + 1, Lead::With));
        }
        if flat.any(k + 1, PARTICIPLES) {
            let next = if flat.any(k + 2, &["that"]) { k + 3 } else { k + 2 };
            return Some((next, Lead::Which));
        }
        if finite && flat.any(k + 1, &["a", "an", "no"]) && flat.find(k + 2..k + 4, Classes::SIGNIFICANCE).is_some() {
            return Some((k + 1, Lead::Which));
        }
        if finite && (flat.any(k + 1, &["there"]) || subject_and_verb(flat, k + 1)) {
            return Some((k + 1, Lead::Main));
        }
        return None;
    }
    if flat.any(k, &["that"]) && k > first && flat.is(k - 1, REPORT.or(PLAN))
        || flat.any(k, &["that"])
            && flat.any(
                k.wrapping_sub(1),
                &["evidence", "fact", "conclusion", "finding", "possible", "ensures", "ensure", "ensured"],
            )
    {
        return Some((k + 1, Lead::That));
    }
    if flat.is(k, BREAK) && !flat.any(k, &["even", "except", "despite", "since"]) {
        // "but not in controls" belongs to what it limits.
        if flat.any(k, &["but"]) && flat.any(k + 1, &["not"]) && !(k + 2..k + 12).any(|j| flat.finite(j)) {
            return None;
        }
        // "rose in both groups but with no difference between them"
        // and "found an effect of time but a non-significant one of feeding".
        let hangs = finite
            && (flat.any(k + 1, &["with", "without"]) && verbless(flat, k + 2)
                || flat.any(k, &["but"])
                    && flat.any(k + 1, &["a", "an"])
                    && flat.find(k + 2..k + 5, Classes::SIGNIFICANCE).is_some());
        return Some((k + 1, if hangs { Lead::With } else { Lead::Main }));
    }
    if finite && flat.is(k, Classes::AND) {
        if flat.any(k + 1, &["there", "no"]) && (k + 1..k + 14).any(|j| flat.finite(j)) {
            return Some((k + 1, Lead::Main));
        }
        // "a decrease in A and no change in B", "and no evidence for differences": the verb is left out.
        let evidence = flat.any(k + 2, &["evidence"]) && flat.find(k + 3..k + 6, Classes::DIFFERENCE).is_some();
        if flat.any(k + 1, &["no"]) && (evidence || flat.find(k + 2..k + 4, Classes::DIFFERENCE).is_some()) {
            return Some((k + 1, Lead::With));
        }
        // "was lower in A and did not differ in B": the second verb says something else.
        if flat.finite(k + 1) && flat.find(k + 2..k + 4, Classes::NEGATION).is_some() {
            return Some((k + 1, Lead::Main));
        }
        if subject_and_verb(flat, k + 1) {
            return Some((k + 1, Lead::Main));
        }
    }
    if finite && flat.any(k, &["nor"]) {
        return Some((k, Lead::Main));
    }
    None
}

/// "with no differences …": what follows `k` claims something without a verb.
fn verbless(flat: &Flat, k: usize) -> bool {
    let cues = Classes::SIGNIFICANCE.or(Classes::DIFFERENCE).or(COMPARATIVE).or(Classes::SIMILAR);
    flat.find(k..k + 8, cues).is_some()
}

/// Participles that open a finding after a comma.
const PARTICIPLES: &[&str] = &["revealing", "showing", "indicating", "suggesting", "demonstrating", "reflecting"];

/// A noun phrase and then a finite verb, before the next mark.
fn subject_and_verb(flat: &Flat, k: usize) -> bool {
    let k = if flat.any(k, &["and", "meanwhile", "thus"]) { k + 1 } else { k };
    if flat.finite(k) || flat.is(k, COMPARATIVE) {
        return false;
    }
    for j in k..(k + 18).min(flat.len()) {
        if flat.signs(j, &[',', ';', ':', '=', '<', '>'])
            || flat.is(j, BREAK)
            || flat.any(j, &["that", "which", "who", "when", "where"])
            || flat.is(j, Classes::AND) && flat.any(j + 1, &["no", "there"])
        {
            return false;
        }
        if flat.finite(j) {
            // An adverb is no subject.
            return j > k && !(j == k + 1 && flat.word(k).ends_with("ly"));
        }
    }
    false
}
