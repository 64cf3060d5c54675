//! Claims that something differs, without the word "significant".

use super::clause::{Clause, Lead};
use super::cue::{Found, Scope};
use super::words::*;
use crate::reading::ClaimKind;
use crate::reading::claim_words::{CHANGED, COMPARATIVE, EXTREME, FINITE, FUNCTION, REPORT, THAN};
use crate::reading::lexicon::Classes;

impl Scope<'_> {
    /// A form of "be" before `k` with nothing but adverbs between.
    pub(super) fn predicate(&self, k: usize) -> bool {
        let flat = self.flat;
        let from = k.saturating_sub(4).max(self.clause.first);
        let be = (from..k).rev().find(|&j| flat.any(j, &["was", "were", "is", "are", "been"]));
        be.is_some_and(|be| !(be + 1..k).any(|j| flat.is(j, FUNCTION.or(Classes::NEGATION)) && !flat.any(j, &["both"])))
    }

    /// "was associated with", "correlated with", "predicted".
    pub(super) fn association(&self) -> Option<Found> {
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
    pub(super) fn comparison(&self) -> Option<Found> {
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
                    && (compared || flat.any(k + 1, &["as", "to"]))
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
            // "are 32 % higher": a figure of this study, whatever the tense.
            let measured = flat.sign(k.wrapping_sub(1), '%')
                || (k.saturating_sub(3)..k).any(|j| flat.sign(j, '%')) && flat.is(k, EXTREME);
            if claimed && verb && (self.found_out() || measured) && !self.eligibility() {
                let last = (k + 1..end).find(|&j| flat.any(j, &["than"])).map_or(k, |j| if j < k + 8 { j } else { k });
                return self.found(ClaimKind::Difference, k, last);
            }
        }
        None
    }

    /// Who was included, what was given, what was done.
    pub(super) fn eligibility(&self) -> bool {
        let flat = self.flat;
        self.range().any(|j| flat.any(j, ELIGIBILITY))
    }

    /// "decreased from 12 to 9 (P …)", "was reduced".
    pub(super) fn change(&self) -> Option<Found> {
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
            // "scores decreased after the summer", "fell from spring to autumn": what changed needs no p beside it.
            let active = flat.finite(k)
                && self.finite == Some(k)
                && !passive
                && !self.facts.others
                && !flat.word(k - 1).ends_with("ing");
            let goes_on = k + 1 == self.clause.end
                || flat.signs(k + 1, &[',', '.'])
                || flat.word(k + 1).ends_with("ly")
                || flat.any(
                    k + 1,
                    &["after", "during", "over", "with", "from", "to", "and", "at", "following", "in", "up"],
                );
            let pre_post = (k + 1..(k + 12).min(self.clause.end))
                .any(|j| flat.any(j, &["from"]) && (j + 1..j + 5).any(|h| flat.any(h, &["to"])));
            let whose = (self.clause.first..k).any(|j| flat.any(j, &["who", "which", "that", "whose"]));
            let moved = active && !whose && self.clause.lead == Lead::Main && (goes_on || pre_post);
            let figured = self.facts.figures
                || moved
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
    pub(super) fn existence(&self) -> Option<Found> {
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
                && (self.facts.figures
                    || flat.find(self.range(), THAN).is_some()
                    || flat.any(k, MOVES)
                        && !self.facts.others
                        && (k + 1..(k + 14).min(self.clause.end))
                            .any(|j| flat.any(j, &["from", "by", "after", "group", "groups"])))
                && !flat.any(k.wrapping_sub(1), &["side", "adverse", "weight"])
                // "those who showed a gain", "when a gain was seen"
                && !(from..k).any(|j| flat.any(j, &["who", "whose", "only", "when", "if", "whom"]))
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
