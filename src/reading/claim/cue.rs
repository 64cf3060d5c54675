//! The cue of a clause: the words that make it a claim, and of which kind.

use super::clause::{Clause, Flat, Lead};
use super::words::*;
use crate::reading::claim_words::{
    BREAK, CHANGED, COMPARATIVE, DIFFER, EXTREME, FINITE, FUNCTION, HEDGE, METHOD, MODAL, OTHERS, PLAN, REPORT, THAN,
};
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
        let cited = union.meets(OTHERS)
            && (0..view.len()).any(|i| {
                view.eq(i, "al") && view.eq(i.wrapping_sub(1), "et")
                    || view.any(i, &["previous", "previously", "earlier", "literature", "published", "recent", "other"])
                        && (1..4).any(|d| view.any(i + d, STUDIES))
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

struct Scope<'a> {
    flat: &'a Flat<'a>,
    clause: &'a Clause,
    facts: &'a Facts,
    finite: Option<usize>,
}

impl Scope<'_> {
    fn range(&self) -> std::ops::Range<usize> {
        self.clause.first..self.clause.end
    }

    /// A plan, a question, a definition or a possibility stands before `k`.
    fn planned(&self, k: usize) -> bool {
        let flat = self.flat;
        (self.clause.first..k).any(|j| {
            flat.is(j, PLAN)
                && !(flat.any(j, &["predicted"])
                    && flat.any(j.wrapping_sub(1), &["than", "significantly", "not", "and"]))
                || flat.any(j, &["to"])
                    && flat.any(j + 1, INQUIRE)
                    && !flat.any(j.wrapping_sub(1), &["failed", "unable", "fail", "fails"])
                || flat.any(j, &["was", "were", "are", "is"])
                    && (j + 1..j + 4).any(|h| flat.is(h, METHOD))
                    && !(j + 1..j + 4).any(|h| flat.is(h, Classes::SIGNIFICANCE.or(Classes::NEGATION)))
                    && j + 4 > k.saturating_sub(14)
                    && flat.find(j + 1..k, FINITE).is_none()
        })
    }

    /// The clause says only what was computed: "Differences … were analysed with …".
    fn method_after(&self, k: usize) -> bool {
        let flat = self.flat;
        let verb = (k + 1..self.clause.end).find(|&j| flat.is(j, FINITE));
        verb.is_some_and(|v| {
            let last = flat.find(v + 1..(v + 4).min(self.clause.end), METHOD);
            last.is_some() && flat.find(v + 1..v + 4, Classes::NEGATION.or(Classes::SIGNIFICANCE)).is_none()
        })
    }

    fn possible(&self, k: usize) -> bool {
        let flat = self.flat;
        (k.saturating_sub(5).max(self.clause.first)..k)
            .any(|j| flat.is(j, MODAL) && !flat.is(j + 1, Classes::NEGATION) || flat.any(j, &["will", "would"]))
    }

    /// Past tense, or a present tense backed by figures.
    fn found_out(&self) -> bool {
        let Some(v) = self.finite else { return self.clause.lead != Lead::Main };
        let present =
            self.flat.any(v, &["is", "are", "has", "have", "do", "does", "remains", "suggests", "indicates", "shows"]);
        !present || self.facts.figures || self.clause.lead == Lead::With
    }

    /// The negation that governs `k`, if any.
    fn negation(&self, k: usize, reach: usize) -> Option<usize> {
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

    fn found(&self, kind: ClaimKind, first: usize, last: usize) -> Option<Found> {
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

    /// The first word of significance in the statistical sense.
    fn significance(&self) -> Option<Found> {
        let flat = self.flat;
        let mut k = self.range().start;
        while let Some(at) = flat.find(k..self.clause.end, Classes::SIGNIFICANCE) {
            if let Some(found) = self.significance_at(at) {
                return Some(found);
            }
            k = at + 1;
        }
        None
    }

    fn significance_at(&self, k: usize) -> Option<Found> {
        let flat = self.flat;
        let before = |d: usize, words: &[&str]| k >= d && flat.any(k - d, words);
        if before(1, NOT_STATISTICAL)
            || before(1, &["of", "or", "and"])
                && before(2, &["level", "levels", "threshold", "tests", "test", "clinical", "clinically", "relevance"])
            || before(2, &["clinically"]) && before(1, &["or"])
            || flat.any(
                k + 1,
                &["level", "levels", "threshold", "test", "tests", "testing", "other", "others", "was", "were", "will"],
            ) && flat.any(k, &["significance"])
                && flat.find(k + 1..(k + 4).min(self.clause.end), METHOD.or(Classes::CONSIDERED)).is_some()
            || flat.any(k, &["significance"]) && flat.any(k + 1, &["level", "levels", "testing", "tests", "threshold"])
            || flat.any(k, &["significance"])
                && before(1, &["of"])
                && !(1..6).any(|d| before(d, &["reach", "reached", "lack", "failed"]))
            || self.planned(k)
            || self.possible(k) && !self.facts.figures
        {
            return None;
        }
        // "P < 0.05 was considered significant" defines.
        let considered = (k.saturating_sub(5).max(self.clause.first)..k).any(|j| flat.any(j, CONSIDERED));
        if considered && !self.facts.exact {
            return None;
        }
        let word = flat.word(k).as_bytes();
        let non = word[0].eq_ignore_ascii_case(&b'n')
            || word[0].eq_ignore_ascii_case(&b'i')
            || before(1, &["non"])
            || before(2, &["non"]) && flat.sign(k - 1, '-');
        let adverb = flat.word(k).ends_with("ly");
        let noun = flat.any(k, &["significance"]);
        // "statistically" alone qualifies; the word after it says what.
        if flat.any(k, &["statistically"]) && flat.find(k + 1..k + 3, METHOD).is_some() {
            return None;
        }
        if flat.any(k, &["statistically"]) && flat.is(k + 1, Classes::SIGNIFICANCE) && !non {
            return None;
        }
        let end = self.clause.end;
        // "Significantly, the majority …" speaks of importance.
        if flat.sign(k + 1, ',') && k == self.clause.first {
            return None;
        }
        let target = flat.find(
            k + 1..(k + 7).min(end),
            Classes::DIFFERENCE
                .or(Classes::ASSOCIATION)
                .or(COMPARATIVE)
                .or(CHANGED)
                .or(DIFFER)
                .or(Classes::SIMILAR)
                .or(EXTREME),
        );
        let predicate = (k.saturating_sub(5).max(self.clause.first)..k).any(|j| flat.any(j, PREDICATE_VERBS));
        if !adverb && !noun && target.is_none() {
            // An adjective needs its noun, or stands behind its verb.
            let result_noun = (k + 1..(k + 5).min(end)).any(|j| flat.any(j, RESULT_NOUNS));
            let bare = k + 1 >= end
                || flat.signs(k + 1, &[',', '.', ';', ':'])
                || flat.is(k + 1, FUNCTION.or(THAN).or(BREAK))
                || flat.any(k + 1, &["only", "when", "after", "within", "at"])
                || flat.token(k + 1) > flat.token(k) + 1;
            // "did not identify significant activations", "no significant clustering was found".
            let denied = self.negation(k, 4).is_some()
                && (flat.find(self.range(), REPORT).is_some() || flat.any(self.clause.first, &["there"]))
                && !(k + 1..(k + 6).min(end)).any(|j| flat.any(j, CLINICAL_NOUNS));
            if !(predicate && bare || result_noun && self.finite.is_some() || denied) {
                return None;
            }
        }
        // "reached significance", "significance was not reached", "without significance".
        if noun
            && !(k.saturating_sub(5).max(self.clause.first)..k).any(|j| flat.any(j, REACHES))
            && !(k + 1..(k + 6).min(end)).any(|j| flat.any(j, REACHES))
            && self.negation(k, 2).is_none()
            && !(k.saturating_sub(2).max(self.clause.first)..k).any(|j| flat.is(j, HEDGE))
        {
            return None;
        }
        if adverb && target.is_none() && self.finite.is_none() {
            return None;
        }
        if self.method_after(k) && !noun && target.is_some_and(|t| flat.is(t, Classes::DIFFERENCE)) {
            return None;
        }
        let hedged = (k.saturating_sub(3).max(self.clause.first)..k).any(|j| flat.is(j, HEDGE))
            || (k.saturating_sub(6).max(self.clause.first)..k).any(|j| flat.any(j, &["trend", "tended", "tendency"]))
            || (k + 1..(k + 3).min(end)).any(|j| flat.is(j, Classes::TREND));
        let last = target.unwrap_or(k);
        let negation = self.negation(k, 9);
        // "significantly influences" without figures is common knowledge.
        let present = adverb
            && target == Some(k + 1)
            && flat.is(k + 1, DIFFER)
            && flat.word(k + 1).ends_with('s')
            && !self.facts.figures;
        let alike =
            target.is_some_and(|t| flat.is(t, Classes::SIMILAR) && t <= k + 2) && flat.any(k, &["statistically"]);
        if present && negation.is_none() {
            return None;
        }
        if alike && negation.is_none() {
            return self.found(ClaimKind::NoDifference, k, last);
        }
        if flat.any(last, &["loss"]) && flat.any(last + 1, &["to"]) {
            return None;
        }
        let kind = if negation.is_some() || non || self.clause.denied {
            ClaimKind::NotSignificant
        } else if hedged {
            ClaimKind::Trend
        } else if !self.found_out() {
            return None;
        } else if self.one_arm_only(k) {
            ClaimKind::WithinGroupContrast
        } else if before(1, &["highly", "very", "extremely", "strongly", "more", "most", "hugely", "remarkably"]) {
            ClaimKind::SignificanceAsSize
        } else {
            ClaimKind::Difference
        };
        if kind == ClaimKind::NotSignificant
            && self.finite.is_some_and(|v| flat.any(v, &["is", "are"]))
            && self.planned(k)
        {
            return None;
        }
        let first = negation.unwrap_or(k).min(k);
        let mut found = self.found(kind, first, last)?;
        if kind == ClaimKind::WithinGroupContrast {
            found.last = self.clause.end - 1;
        }
        found.says_significant = true;
        Some(found)
    }

    /// "only in the X group", "in X but not in Y", said of a change.
    fn one_arm_only(&self, k: usize) -> bool {
        let flat = self.flat;
        let range = self.range();
        let only = range.clone().any(|j| {
            flat.any(j, &["only"])
                && (j + 1..j + 4).any(|h| flat.any(h, &["in", "for", "within", "with"]))
                && (j + 1..j + 9).any(|h| flat.is(h, Classes::GROUP))
        });
        let but_not = range.clone().any(|j| flat.any(j, &["but"]) && flat.any(j + 1, &["not"]));
        let change = flat.find(range, CHANGED.or(Classes::CHANGE)).is_some() || flat.any(k + 1, GAINS);
        let compared = flat.find(self.range(), THAN).is_some();
        change && !compared && (only || but_not)
    }

    fn trend(&self) -> Option<Found> {
        let flat = self.flat;
        let k = self.range().find(|&k| {
            flat.any(k, &["trend", "tendency", "trends"])
                && (k + 1..k + 3).any(|j| flat.any(j, &["toward", "towards", "to", "for", "in"]))
                && !flat.any(k + 2, &["trend", "test"])
                && (!flat.any(k + 1, &["in"]) || flat.any(k + 2, &["favor", "favour"]))
                || flat.any(k, &["tended"]) && flat.any(k + 1, &["to", "towards", "toward"])
                || flat.any(k, &["trended", "trending"])
                || flat.any(k, &["some"]) && flat.any(k + 1, &["evidence"]) && self.facts.figures
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

    /// "no difference", "did not differ", "was not associated".
    fn denial(&self) -> Option<Found> {
        let flat = self.flat;
        let targets = Classes::DIFFERENCE.or(DIFFER).or(COMPARATIVE).or(Classes::ASSOCIATION);
        for k in self.range() {
            if !(flat.is(k, Classes::NEGATION)) {
                if self.clause.denied
                    && k > self.clause.first
                    && flat.is(k, targets)
                    && (flat.finite(k) || flat.finite(k - 1))
                {
                    return self.found(ClaimKind::NoDifference, k, k);
                }
                continue;
            }
            let bound = flat.any(k + 1, &["more", "less", "later", "fewer"]) && flat.any(k + 2, &["than"]);
            if flat.any(k + 1, NOT_DENYING) || bound || self.planned(k) {
                continue;
            }
            let noun_like = flat.any(k, &["no", "without", "lack", "absence", "none", "neither", "nor"]);
            let reach = if flat.any(k, &["none"]) { 14 } else { 7 };
            let until = (k + 1..(k + reach).min(self.clause.end))
                .find(|&j| {
                    flat.signs(j, &[',', ';']) && !flat.any(k, &["none", "neither"])
                        || flat.any(j, &["who", "which", "to"]) && !flat.any(j, &["to"])
                })
                .unwrap_or((k + reach).min(self.clause.end));
            let Some(t) = flat.find(k + 1..until, targets) else { continue };
            // "none reported complications associated with it": the participle belongs to a noun.
            if flat.is(t, Classes::ASSOCIATION)
                && flat.any(t, &["associated", "related", "linked"])
                && !self.negated_predicate(k, t)
            {
                continue;
            }
            let between = k + 1..t;
            if noun_like && !flat.any(k, &["neither", "nor", "none"]) {
                // The noun denied must be the difference itself: "no patients with reduced function" denies patients.
                let blocked = between.clone().any(|j| {
                    flat.is(j, Classes::GROUP) && !flat.any(j, &["group", "treatment", "condition", "intervention"])
                        || flat.any(j, BOUNDARY)
                });
                if blocked
                    || flat.any(t - 1, &["side", "adverse"])
                    || flat.any(t, &["loss", "drop", "link", "gap", "related", "fall"])
                    || flat.is(t, CHANGED)
                {
                    continue;
                }
                if !flat.is(t, Classes::DIFFERENCE.or(Classes::ASSOCIATION)) && !flat.is(t, COMPARATIVE) {
                    continue;
                }
                if flat.any(k, &["without"]) && self.clause.lead == Lead::Main && self.finite.is_some_and(|v| v > t) {
                    continue;
                }
            } else if flat.any(k, &["not", "cannot", "didn't", "wasn't", "weren't", "unable", "failed", "never"]) {
                let blocked = between.clone().any(|j| flat.any(j, &["for", "in", "by", "because", "due", "until"]));
                if blocked || !self.negates_a_verb(k, t) {
                    continue;
                }
            }
            if self.method_after(t) && !flat.is(t, DIFFER) {
                continue;
            }
            if self.present_background(k) {
                continue;
            }
            return self.found(ClaimKind::NoDifference, k, t);
        }
        None
    }

    /// A form of "be" on either side of the negation: "was not associated", "none was related".
    fn negated_predicate(&self, k: usize, t: usize) -> bool {
        (k.saturating_sub(1)..t).any(|j| self.flat.any(j, &["was", "were", "is", "are", "be", "been"]))
    }

    /// "did not differ", "was not higher", "could not find any difference": not "not all patients improved".
    fn negates_a_verb(&self, k: usize, t: usize) -> bool {
        let flat = self.flat;
        let auxiliary =
            flat.is(k.wrapping_sub(1), FINITE) || flat.is(k.wrapping_sub(1), MODAL) || !flat.any(k, &["not"]);
        auxiliary
            && t - k <= 6
            && !flat.any(k + 1, &["all", "every", "everyone"])
            && !(flat
                .any(k + 1, &["receive", "receiving", "include", "included", "require", "take", "meet", "complete"]))
    }

    /// A present tense without figures is common knowledge, not a finding, unless it speaks of this study.
    fn present_background(&self, k: usize) -> bool {
        let flat = self.flat;
        let Some(v) = self.finite else { return false };
        flat.any(v, &["is", "are", "has", "have", "does", "do"])
            && !self.facts.figures
            && self.clause.lead != Lead::That
            && !(self.clause.first..k).any(|j| flat.any(j, &["we", "our", "this"]))
    }

    fn equivalence(&self) -> Option<Found> {
        let flat = self.flat;
        for k in self.range() {
            if !flat.is(k, Classes::EQUIVALENT) || self.planned(k) {
                continue;
            }
            let copula = (k.saturating_sub(4).max(self.clause.first)..k)
                .any(|j| flat.any(j, &["was", "were", "is", "are", "be", "proved", "proven"]));
            let as_good = flat.any(k, &["effective", "efficacious", "safe"]);
            let claimed = if as_good {
                flat.any(k.wrapping_sub(1), &["as"]) && flat.any(k + 1, &["as"])
                    || flat.any(k.wrapping_sub(1), &["equally", "similarly", "comparably"])
            } else if flat.any(k, &["inferior"]) {
                copula && (flat.any(k.wrapping_sub(1), &["not", "non"]) || flat.any(k.wrapping_sub(2), &["non"]))
            } else if flat.any(k, &["inferiority", "noninferiority", "equivalence", "bioequivalence"]) {
                flat.find(self.range(), REPORT).is_some()
                    && !flat.any(
                        k + 1,
                        &["margin", "trial", "study", "design", "limit", "limits", "test", "analysis", "margins"],
                    )
                    && self.negation(k, 6).is_none()
            } else {
                copula
                    && !(flat.any(k + 1, &["to", "of"]) && (k + 2..k + 4).any(|j| flat.number(j)))
                    && self.negation(k, 4).is_none()
            };
            if claimed && !self.possible(k) {
                let start = if flat.any(k.wrapping_sub(2), &["non"]) {
                    k - 2
                } else {
                    k.saturating_sub(1).max(self.clause.first)
                };
                return self.found(ClaimKind::Equivalence, start, k);
            }
        }
        None
    }

    /// "were similar", "similar proportions of …", "remained unchanged".
    fn likeness(&self) -> Option<Found> {
        let flat = self.flat;
        for k in self.range() {
            if !flat.is(k, Classes::SIMILAR) || self.planned(k) || self.possible(k) {
                continue;
            }
            // "were very similar", but not "were given a similar dose".
            let verb = (k.saturating_sub(5).max(self.clause.first)..k).rev().find(|&j| flat.any(j, LINKING));
            let predicate = verb.is_some_and(|verb| {
                !(verb + 1..k)
                    .any(|j| flat.is(j, FUNCTION) && !flat.any(j, &["also", "both", "more"]) || flat.is(j, METHOD))
            });
            let next = (k + 1..k + 6).find(|&j| flat.any(j, OTHER_LIKENESS));
            let claimed = if flat
                .any(k, &["unchanged", "unaffected", "unaltered", "indistinguishable", "undifferentiated"])
            {
                verb.is_some() || flat.any(k.wrapping_sub(1), &["an", "and"])
            } else if flat.any(k, &["stable", "constant"]) {
                flat.any(k.wrapping_sub(1), &["remained", "stayed", "relatively", "were"])
                    && flat.find(self.range(), METHOD).is_none()
            } else if flat.any(k, &["equally", "evenly", "comparably"]) {
                verb.is_some()
                    && (k + 1..k + 3).any(|j| {
                        flat.any(j, &["distributed", "balanced", "effective", "matched", "well", "common", "good"])
                    })
            } else if flat.any(k, &["balanced", "matched", "alike", "homogeneous"]) {
                predicate
                    && flat.any(k.wrapping_sub(1), &["well", "were", "comparably", "was"])
                    && !flat.any(k + 1, &["for", "by", "on"])
            } else if flat.any(k, &["same", "equal", "identical"]) {
                predicate
                    && (k + 1..k + 5).any(|j| flat.any(j, &["in", "between", "for", "across", "among"]))
                    && (k + 1..self.clause.end)
                        .any(|j| flat.any(j, &["groups", "arms", "both", "two", "treatments", "three", "conditions"]))
                    && next.is_none()
            } else if predicate {
                // "was similar to that of earlier studies" compares with others, "similar to that of controls" does not.
                let elsewhere = (k + 2..k + 8).any(|j| flat.any(j, ELSEWHERE));
                let manner = flat.any(k + 1, &["manner", "way", "fashion", "looking"])
                    || flat.any(k + 2, &["appearance", "design", "taste", "shape"]);
                !elsewhere && !manner
            } else {
                // Attributive: "similar proportions of subjects reached", "had a similar impact".
                let noun = (k + 1..k + 4).any(|j| flat.any(j, LIKE_NOUNS) || flat.is(j, Classes::DIFFERENCE));
                noun && next.is_none()
                    && self.finite.is_some_and(|v| flat.find(v..v + 4, METHOD).is_none())
                    && (flat.find(self.range(), Classes::GROUP.or(THAN)).is_some()
                        || self.facts.figures
                        || self.facts.numbers
                        || self.clause.lead == Lead::That)
            };
            if !claimed
                || self.clause.denied
                || self.negation(k, 3).is_some()
                || flat.any(k + 1, &["to"]) && next.is_some()
            {
                continue;
            }
            if self.present_background(k) && !flat.is(k, Classes::GROUP)
                || !self.found_out() && self.clause.lead == Lead::Main && !self.facts.has_groups
            {
                continue;
            }
            return self.found(ClaimKind::NoDifference, k, k);
        }
        None
    }

    /// A form of "be" before `k` with nothing but adverbs between.
    fn predicate(&self, k: usize) -> bool {
        let flat = self.flat;
        let from = k.saturating_sub(4).max(self.clause.first);
        let be = (from..k).rev().find(|&j| flat.any(j, &["was", "were", "is", "are", "been"]));
        be.is_some_and(|be| !(be + 1..k).any(|j| flat.is(j, FUNCTION.or(Classes::NEGATION)) && !flat.any(j, &["both"])))
    }

    /// "was associated with", "correlated with", "predicted".
    fn association(&self) -> Option<Found> {
        let flat = self.flat;
        for k in self.range() {
            if !flat.is(k, Classes::ASSOCIATION) || self.planned(k) || self.possible(k) {
                continue;
            }
            let verbal = flat.any(k, &["associated", "correlated", "related", "linked", "predicted", "predictive"])
                && self.predicate(k)
                && flat.any(k + 1, &["with", "to", "of", "positively", "negatively", "inversely", "both"])
                || flat.any(k, &["correlated", "predicted"]) && flat.finite(k) && self.facts.figures
                || flat.any(k, &["predictors", "predictor"])
                    && flat.find(self.range(), FINITE).is_some()
                    && self.facts.figures
                || flat.any(k, &["correlation", "association", "relationship"])
                    && self.facts.figures
                    && (flat.find(self.range(), REPORT).is_some() || flat.any(self.clause.first, &["there"]));
            let only = flat.any(k, &["associated"]) && flat.any(self.clause.first + 1, &["only"]) && self.facts.figures;
            if verbal && self.found_out() && !flat.any(k + 1, &["adverse"]) || only {
                return self.found(ClaimKind::Difference, k, k);
            }
        }
        None
    }

    /// "was higher in A than in B", "were twice as likely".
    fn comparison(&self) -> Option<Found> {
        let flat = self.flat;
        for k in self.range() {
            if !flat.is(k, COMPARATIVE.or(EXTREME)) || self.planned(k) || self.possible(k) {
                continue;
            }
            let end = self.clause.end;
            let counted = flat
                .any(k, &["more", "less", "fewer", "greater", "higher", "lower", "longer", "older", "younger"])
                && flat.any(k + 1, &["than"])
                && (k + 2..k + 4)
                    .any(|j| flat.number(j) || flat.is(j, Classes::NUMBER_WORD) || flat.any(j, &["half", "once"]));
            if counted
                || flat.any(k + 1, &["and"]) && flat.any(k, &["more"])
                || flat.any(k, &["longer"]) && flat.any(k.wrapping_sub(1), &["no"])
            {
                continue;
            }
            let compared = flat.find(self.range(), THAN).is_some();
            let verb = self.finite.is_some() || self.clause.lead == Lead::With;
            let claimed = if flat.any(k, &["likely"]) {
                (k.saturating_sub(2)..k).any(|j| flat.any(j, &["more", "less", "as"]))
                    && (compared || flat.find(k..end, Classes(0)).is_some() || flat.any(k + 1, &["as", "to"]))
                    && self.finite.is_some()
            } else if flat.is(k, EXTREME) {
                flat.any(k.wrapping_sub(1), &["the"])
                    && self.finite.is_some()
                    && (self.facts.figures || compared)
                    && !flat.any(k.wrapping_sub(2), &["of", "with", "at", "from", "in", "for"])
                    || flat.any(k.wrapping_sub(1), &["the"])
                        && flat.any(k.wrapping_sub(4).max(self.clause.first), &["was", "were"])
                        && k + 2 > end
            } else if flat.any(k, &["more", "less", "longer"]) && !compared && !self.facts.figures {
                false
            } else {
                let groups = (self.range()).any(|j| flat.any(j, &["group", "groups", "arm"]));
                compared || self.facts.figures || groups && (self.clause.first..k).any(|j| flat.finite(j))
            };
            if claimed && verb && self.found_out() && !self.eligibility() {
                let last = (k + 1..end).find(|&j| flat.any(j, &["than"])).map_or(k, |j| if j < k + 8 { j } else { k });
                return self.found(ClaimKind::Difference, k, last);
            }
        }
        None
    }

    /// Who was included, what was given, what was done.
    fn eligibility(&self) -> bool {
        let flat = self.flat;
        self.range().any(|j| flat.any(j, ELIGIBILITY))
    }

    /// "decreased from 12 to 9 (P …)", "was reduced".
    fn change(&self) -> Option<Found> {
        let flat = self.flat;
        for k in self.range() {
            let changed = flat.is(k, CHANGED) || flat.any(k, &["differed", "affected", "influenced", "varied"]);
            if !changed || self.planned(k) || self.possible(k) {
                continue;
            }
            let passive = (k.saturating_sub(3).max(self.clause.first)..k)
                .any(|j| flat.any(j, &["was", "were", "had", "found", "been"]));
            let attributive = flat.is(k.wrapping_sub(1), FUNCTION)
                || flat.signs(k.wrapping_sub(1), &[',', '-'])
                || k == self.clause.first;
            if attributive && !passive || flat.any(k, &["lost"]) && !self.facts.figures {
                continue;
            }
            let figured = self.facts.figures
                || flat.find(self.range(), THAN).is_some()
                || (k + 1..(k + 12).min(self.clause.end)).any(|j| flat.number(j))
                    && flat.any(k + 1, &["from", "by", "to", "in"])
                || self.facts.has_groups
                    && (k + 1..(k + 12).min(self.clause.end)).any(|j| flat.any(j, &["group", "groups"]));
            if figured && self.found_out() && !self.eligibility() {
                return self.found(ClaimKind::Difference, k, k);
            }
        }
        None
    }

    /// "there was a difference", "showed a reduction", "revealed an effect".
    fn existence(&self) -> Option<Found> {
        let flat = self.flat;
        for k in self.range() {
            if !flat.is(k, Classes::DIFFERENCE) || self.planned(k) || self.possible(k) || self.method_after(k) {
                continue;
            }
            let from = k.saturating_sub(8).max(self.clause.first);
            let said = (from..k).any(|j| {
                flat.is(j, REPORT) && !flat.any(j, &["had", "have", "conclude", "led"])
                    || flat.any(j, &["there"]) && flat.is(j + 1, FINITE)
            }) || (k + 1..(k + 12).min(self.clause.end)).any(|j| {
                flat.is(j, FINITE)
                    && (j + 1..j + 4).any(|h| flat.any(h, &["observed", "found", "noted", "seen", "detected"]))
            }) || clause_of_apposition(self.clause, k);
            if said
                && self.found_out()
                && (self.facts.figures || flat.find(self.range(), THAN).is_some())
                && !flat.any(k.wrapping_sub(1), &["side", "adverse", "weight"])
            {
                return self.found(ClaimKind::Difference, k, k);
            }
        }
        None
    }
}

/// "…, a difference of 12 %".
fn clause_of_apposition(clause: &Clause, k: usize) -> bool {
    clause.lead == Lead::With && k < clause.first + 6
}

/// Verbs that link a subject with "similar".
const LINKING: &[&str] = &["was", "were", "remained", "is", "are", "appeared", "seemed", "been", "stayed", "be"];

/// After a negation these turn it into something else: "not only", "no longer".
const NOT_DENYING: &[&str] = &["only", "longer", "surprisingly", "just", "least", "yet", "because", "due"];
