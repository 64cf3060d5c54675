//! The cue of a clause: the words that make it a claim, and of which kind.

use super::clause::{Clause, Flat, Lead};
use super::words::*;
use crate::reading::claim_words::{BREAK, FINITE, FUNCTION, HEDGE, METHOD, MODAL, OTHERS, PLAN, REPORT};
use crate::reading::lexicon::Classes;
use crate::reading::p::PExpression;
use crate::reading::{ClaimKind, Direction, Relation};

/// What the whole sentence says, for all its clauses.
pub(super) struct Facts {
    /// A p-value stands in the sentence, or an interval or a percent beside a ratio.
    pub figures: bool,
    /// A p with an equals sign: a result in any case.
    pub exact: bool,
    /// Any number.
    pub numbers: bool,
    /// Findings of others: "previous studies", "et al.".
    pub others: bool,
    pub has_groups: bool,
}

impl Facts {
    pub fn of(flat: &Flat, p: &[PExpression], union: Classes) -> Facts {
        let view = flat.view;
        let figures = !p.is_empty() || union.meets(Classes::CI);
        let exact = p.iter().any(|x| x.relation == Relation::Equal);
        let numbers = view.tokens.iter().any(|t| t.number().is_some());
        // "another trial showed", "in that same study", "in a study of …" beside a citation.
        let named = |words: &[&str]| {
            (1..view.len()).any(|i| {
                view.is(i, Classes::RARE.or(OTHERS))
                    && view.any(i, &["study", "trial", "studies", "trials", "review"])
                    && (i.saturating_sub(3)..i).any(|j| view.any(j, words))
            })
        };
        let marked = || {
            (1..view.len()).any(|i| {
                view.sign(i - 1, '[') && view.number(i).is_some() || view.any(i, &["al"]) && view.eq(i - 1, "et")
            })
        };
        let elsewhere = union.meets(Classes::RARE.or(OTHERS))
            && (named(&["another", "same", "earlier"])
                || named(&["a", "an", "one", "two", "several", "some", "many", "that", "their"]) && marked());
        let ours = || (0..view.len()).any(|i| view.any(i, &["we", "our", "present", "current"]));
        let cited = elsewhere && !ours()
            || union.meets(OTHERS)
                && (0..view.len()).any(|i| {
                    view.eq(i, "al") && view.eq(i.wrapping_sub(1), "et")
                        || view.any(
                            i,
                            &["previous", "previously", "earlier", "literature", "published", "recent", "other"],
                        ) && (1..4).any(|d| view.any(i + d, STUDIES))
                });
        Facts { figures, exact, numbers, others: cited, has_groups: union.meets(Classes::GROUP) }
    }
}

/// The claim of a clause: positions of the first and last word that it needs.
#[derive(Clone, Copy, Debug)]
pub(super) struct Found {
    pub kind: ClaimKind,
    pub first: usize,
    pub last: usize,
    pub direction: Option<Direction>,
    pub says_significant: bool,
}

pub(super) fn find(flat: &Flat, clause: &Clause, facts: &Facts) -> Option<Found> {
    let range = clause.first..clause.end;
    let finite = (range.clone()).find(|&k| flat.finite(k));
    // Any other past form behind its subject: "delivered their infants at similar weeks".
    let finite = finite.or_else(|| {
        range
            .clone()
            .skip(1)
            .find(|&k| flat.word(k).len() > 4 && flat.word(k).ends_with("ed") && !flat.is(k - 1, FUNCTION))
    });
    // A clause without a verb claims nothing, except after "with" and in apposition.
    if finite.is_none()
        && clause.lead == Lead::Main
        && flat.find(range.clone(), REPORT).is_none()
        && !headline(flat, clause)
    {
        return None;
    }
    let scope = Scope { flat, clause, facts, finite };
    scope
        .significance()
        .or_else(|| scope.trend())
        .or_else(|| scope.denial())
        .or_else(|| scope.equivalence())
        .or_else(|| scope.likeness())
        .or_else(|| scope.association())
        .or_else(|| scope.comparison())
        .or_else(|| scope.change())
        .or_else(|| scope.existence())
}

/// "No significant difference in …" as a clause without a verb (abstracts, lists).
fn headline(flat: &Flat, clause: &Clause) -> bool {
    flat.any(clause.first, &["no"]) && flat.find(clause.first + 1..clause.first + 5, Classes::DIFFERENCE).is_some()
}

pub(super) struct Scope<'a> {
    pub flat: &'a Flat<'a>,
    pub clause: &'a Clause,
    pub facts: &'a Facts,
    pub finite: Option<usize>,
}

impl Scope<'_> {
    pub(super) fn range(&self) -> std::ops::Range<usize> {
        self.clause.first..self.clause.end
    }

    /// "this study, the first to test changes, failed to show …": the infinitive at `j` is over before `k`.
    fn apposition_ends(&self, j: usize, k: usize) -> bool {
        let flat = self.flat;
        let comma = (self.clause.first..j).any(|h| flat.sign(h, ','));
        comma && (j + 1..k).any(|h| flat.sign(h, ',') && (flat.is(h + 1, FINITE) || flat.is(h + 1, Classes::NEGATION)))
    }

    /// A word of planning at `j` that plans nothing for `k`.
    fn plans_nothing(&self, j: usize, k: usize) -> bool {
        let flat = self.flat;
        // "the objective score", "if admitted," as an aside, "was not predicted"
        let adjective = flat.any(j, &["objective"]) && !flat.any(j + 1, &["was", "is", "of", "for", "were", "in"]);
        let aside = flat.any(j, &["if"]) && (j + 1..k).any(|h| flat.sign(h, ','));
        let verb = flat.any(j, &["predicted"]) && flat.any(j.wrapping_sub(1), &["than", "significantly", "not", "and"]);
        adjective || aside || verb
    }

    /// A plan, a question, a definition or a possibility stands before `k`.
    pub(super) fn planned(&self, k: usize) -> bool {
        let flat = self.flat;
        (self.clause.first..k).any(|j| {
            flat.is(j, PLAN) && !self.plans_nothing(j, k)
                || flat.any(j, &["ensure", "ensured", "ensuring"])
                || flat.any(j, &["to"])
                    && flat.any(j + 1, INQUIRE)
                    && !flat.any(j.wrapping_sub(1), &["failed", "unable", "fail", "fails"])
                    && !self.apposition_ends(j, k)
                || flat.any(j, &["was", "were", "are", "is"])
                    && (j + 1..j + 4).any(|h| flat.is(h, METHOD))
                    && !(j + 1..j + 4).any(|h| flat.is(h, Classes::SIGNIFICANCE.or(Classes::NEGATION)))
                    && j + 4 > k.saturating_sub(14)
                    && flat.find(j + 1..k, FINITE).is_none()
                    && !(j + 1..k).any(|h| flat.any(h, &["found"]))
        })
    }

    /// The clause says only what was computed: "Differences … were analysed with …".
    pub(super) fn method_after(&self, k: usize) -> bool {
        let flat = self.flat;
        // "no effect when events were counted": the verb belongs to another clause.
        let until = (k + 1..self.clause.end)
            .find(|&j| flat.any(j, &["when", "where", "which", "after", "as"]))
            .unwrap_or(self.clause.end);
        let verb = (k + 1..until).find(|&j| flat.is(j, FINITE));
        verb.is_some_and(|v| {
            let last = flat.find(v + 1..(v + 4).min(self.clause.end), METHOD);
            last.is_some() && flat.find(v + 1..v + 4, Classes::NEGATION.or(Classes::SIGNIFICANCE)).is_none()
        })
    }

    pub(super) fn possible(&self, k: usize) -> bool {
        let flat = self.flat;
        (k.saturating_sub(5).max(self.clause.first)..k)
            .any(|j| flat.is(j, MODAL) && !flat.is(j + 1, Classes::NEGATION) || flat.any(j, &["will", "would"]))
    }

    /// Past tense, or a present tense backed by figures.
    pub(super) fn found_out(&self) -> bool {
        let Some(v) = self.finite else { return self.clause.lead != Lead::Main };
        let present =
            self.flat.any(v, &["is", "are", "has", "have", "do", "does", "remains", "suggests", "indicates", "shows"]);
        !present || self.facts.figures || self.clause.lead == Lead::With
    }

    /// The negation that governs `k`, if any.
    pub(super) fn negation(&self, k: usize, reach: usize) -> Option<usize> {
        let flat = self.flat;
        let from = k.saturating_sub(reach).max(self.clause.first);
        let near = (from..k).rev().find(|&j| {
            if !flat.is(j, Classes::NEGATION) || flat.any(j + 1, NOT_DENYING) {
                return false;
            }
            let bound = flat.any(j + 1, &["more", "less", "later"]) && flat.any(j + 2, &["than"]);
            let number = flat.any(j, &["no"]) && flat.sign(j + 1, '.');
            let between = || j + 1..k;
            let clause = between().any(|h| flat.signs(h, &[';', ':']) || flat.is(h, BREAK));
            // "without complications, X was significantly higher"
            let aside = flat.any(j, &["without", "no"])
                && between().any(|h| flat.sign(h, ','))
                && !between().any(|h| flat.any(h, &["or", "nor"]));
            !(bound || number || clause || aside)
        });
        // "None of the … were significant", "No X was higher": the subject is denied.
        near.or_else(|| {
            let first = self.clause.first;
            (first..(first + 3).min(k)).find(|&j| flat.any(j, &["no", "none", "neither", "nor"]))
        })
    }

    pub(super) fn found(&self, kind: ClaimKind, first: usize, last: usize) -> Option<Found> {
        let flat = self.flat;
        let range = first.min(last)..(last.max(first) + 4).min(self.clause.end);
        let up = flat.find(range.clone(), Classes::UP);
        let down = flat.find(range, Classes::DOWN);
        let direction = match (up, down) {
            // "more reduced", "less increased": leave it open.
            (Some(_), Some(_)) | (None, None) => None,
            (Some(_), None) => Some(Direction::Higher),
            (None, Some(_)) => Some(Direction::Lower),
        };
        Some(Found { kind, first, last, direction, says_significant: false })
    }

    pub(super) fn trend(&self) -> Option<Found> {
        let flat = self.flat;
        let k = self.range().find(|&k| {
            // Two cheap looks spare most words the lists below.
            let some = self.facts.figures && flat.any(k, &["some"]);
            if !(some || flat.is(k, HEDGE)) {
                return false;
            }
            flat.any(k, &["trend", "tendency", "trends"])
                && (k + 1..k + 3).any(|j| flat.any(j, &["toward", "towards", "to", "for", "in"]))
                && !flat.any(k + 2, &["trend", "test"])
                && (!flat.any(k + 1, &["in"]) || flat.any(k + 2, &["favor", "favour"]))
                || flat.any(k, &["trend", "tendency"])
                    && flat.any(k + 1, &["was", "is"])
                    && (k + 2..k + 5).any(|j| flat.any(j, &["toward", "towards", "for", "to"]))
                || flat.any(k, &["tended"]) && flat.any(k + 1, &["to", "towards", "toward"])
                || flat.any(k, &["trended", "trending"])
                || some && flat.any(k + 1, &["evidence"])
        })?;
        if self.planned(k)
            || self.negation(k, 5).is_some()
            || !self.found_out()
            || flat.any(k.wrapping_sub(1), &["for", "linear"])
        {
            return None;
        }
        self.found(ClaimKind::Trend, k, k + 1)
    }
}
