//! Claims: what the sentences conclude.
//!
//! A sentence is read without its parentheses and cut into clauses; in each clause a cue (a word of
//! significance, of likeness, of difference …) and what denies or weakens it give the kind of claim.

mod clause;
mod cue;
// Word lists are easier to read in full lines.
#[rustfmt::skip]
mod words;

use self::clause::{Clause, Flat, Lead, clauses};
use self::cue::{Facts, Found, find};
use self::words::{CIRCUMSTANCES, OPENERS};
use super::claim_words::{CHANGED, COMPARATIVE, DIFFER, EXTREME, FINITE, FIT, HEDGE};
use super::lexicon::Classes;
use super::p::PExpression;
use super::sentence::SentenceView;
use super::{Attribution, Claim, ClaimKind};

/// Only a sentence with one of these words can make a claim.
const CUES: Classes = Classes(
    Classes::SIGNIFICANCE.0
        | Classes::DIFFERENCE.0
        | Classes::SIMILAR.0
        | Classes::ASSOCIATION.0
        | Classes::EQUIVALENT.0
        | Classes::TREND.0
        | COMPARATIVE.0
        | CHANGED.0
        | DIFFER.0
        | EXTREME.0
        | HEDGE.0,
);

/// Appends the claims of one sentence.
pub fn read(view: &SentenceView, p: &[PExpression], out: &mut Vec<Claim>) {
    let union = view.tokens.iter().fold(0, |all, t| all | t.classes.0);
    if union & CUES.0 == 0 {
        if union & Classes::P.0 != 0 || view.len() > 4 {
            misreading(view, out);
        }
        return;
    }
    if misreading(view, out) {
        return;
    }
    let flat = Flat::new(view);
    let facts = Facts::of(&flat, p, Classes(union));
    for clause in clauses(&flat) {
        if clause.planned || clause.introduces {
            continue;
        }
        let Some(found) = find(&flat, &clause, &facts) else { continue };
        let (first, last) = extent(&flat, &clause, &found);
        let span = view.span(flat.token(first), flat.token(last));
        out.push(Claim {
            span,
            sentence: view.id,
            kind: found.kind,
            attribution: attribution(&flat, &clause, &facts),
            direction: found.direction,
            says_significant: found.says_significant,
        });
    }
}

/// P as the probability that the result is due to chance, or that the hypothesis is true.
fn misreading(view: &SentenceView, out: &mut Vec<Claim>) -> bool {
    let mut chance = None;
    for i in 0..view.len() {
        if !view.tokens[i].is_word() {
            continue;
        }
        if view.any(i, &["probability", "likelihood", "chance"]) {
            // "a 3 % probability that the difference arose by chance", "the probability that the null hypothesis is true"
            if let Some(end) = (i + 1..(i + 25).min(view.len())).find(|&j| {
                view.eq(j, "chance")
                    && (view.any(j - 1, &["by", "to"]) || view.phrase(j.saturating_sub(2), &["by", "random"]))
                    || view.any(j, &["true", "correct", "false"])
                        && (i..j).any(|h| view.eq(h, "hypothesis"))
                        && view.any(j - 1, &["is", "was", "being"])
            }) && !(i..end)
                .any(|j| view.any(j, &["if", "given", "assuming", "reject", "rejecting", "under", "when"]))
            {
                chance = Some((i, end));
                break;
            }
        }
    }
    let Some((first, last)) = chance else { return false };
    let p_said = (0..view.len()).any(|i| view.is(i, Classes::P) || view.sign(i, '%'));
    if !p_said {
        return false;
    }
    out.push(Claim {
        span: view.span(first, last),
        sentence: view.id,
        kind: ClaimKind::PMisread,
        attribution: Attribution::ThisStudy,
        direction: None,
        says_significant: false,
    });
    true
}

/// The clause from its subject to the end of what the cue says.
fn extent(flat: &Flat, clause: &Clause, found: &Found) -> (usize, usize) {
    let mut first = clause.first;
    if clause.lead != Lead::With {
        loop {
            if first < found.first && (flat.sign(first, ',') || flat.any(first, OPENERS)) {
                first += 1;
                continue;
            }
            if flat.any(first, CIRCUMSTANCES) {
                let verb = (first..found.first).find(|&k| flat.is(k, FINITE)).unwrap_or(found.first);
                // The comma of "At 12 months, …"; of "When X was added, Y fell" too.
                let comma = (first..verb).find(|&k| flat.sign(k, ','));
                if let Some(comma) = comma.or_else(|| (verb..found.first).find(|&k| flat.sign(k, ','))) {
                    first = comma + 1;
                    continue;
                }
            }
            break;
        }
    }
    // A long subject is left out: the claim starts with its verb.
    const LONG: usize = 24;
    if found.first > first + LONG {
        let from = found.first - LONG;
        first = (from..found.first)
            .rev()
            .find(|&k| flat.is(k, FINITE))
            .or_else(|| (from..found.first).rev().find(|&k| flat.sign(k, ',')).map(|k| k + 1))
            .unwrap_or(found.first - 6);
    }
    let mut last = found.last;
    // Up to the parenthesis with the figures, the statistic after a comma, or enough.
    let limit = clause.end.min(found.last + 26);
    while last + 1 < limit {
        if flat.figures_after(last) && flat.token(last + 1) > flat.token(last) + 1 {
            break;
        }
        let next = last + 1;
        if flat.sign(next, ',') && statistic_follows(flat, next + 1) {
            break;
        }
        if flat.signs(next, &['=', '<', '>', '≤', '≥']) && flat.is(last, Classes::P) {
            last = last.saturating_sub(1).max(found.last);
            break;
        }
        if flat.sign(next, ',')
            && flat.any(next + 1, &["as", "suggesting", "although", "respectively"])
            && !flat.any(next + 2, &["was", "were", "did"])
        {
            break;
        }
        last = next;
    }
    while last > found.last
        && (flat.signs(last, &['.', ',', ';', ':', '-', '!', '?'])
            || flat.any(last, &["and", "or", "a", "the", "with", "at"]))
    {
        last -= 1;
    }
    (first, last.max(first))
}

/// `p = …`, `F(1, 20) = …`, `95 % CI …` after a comma.
fn statistic_follows(flat: &Flat, k: usize) -> bool {
    let sign = (k..k + 5).find(|&j| flat.signs(j, &['=', '<', '>', '≤', '≥']));
    let words = |end: usize| (k..end).filter(|&j| flat.word(j).len() > 4).count();
    sign.is_some_and(|end| words(end) <= 1)
        || flat.number(k) && (k..k + 4).any(|j| flat.is(j, Classes::CI.or(Classes::CONFIDENCE)))
}

/// Who says it, of what.
fn attribution(flat: &Flat, clause: &Clause, facts: &Facts) -> Attribution {
    if clause.others || facts.others {
        return Attribution::OtherAuthors;
    }
    let range = clause.first..clause.end;
    if flat.find(range.clone(), FIT).is_some() {
        return Attribution::FitOrAssumption;
    }
    let baseline = (range.start..range.end).any(|k| {
        flat.is(k, Classes::BASELINE) && !flat.any(k.wrapping_sub(1), &["from", "to", "with", "versus", "vs", "than"])
            || flat.any(k, &["characteristics", "demographics", "demographic"])
    });
    if baseline {
        return Attribution::Baseline;
    }
    Attribution::ThisStudy
}
