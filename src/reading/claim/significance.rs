//! Claims by the word "significant".

use super::cue::{Found, Scope};
use super::words::*;
use crate::reading::ClaimKind;
use crate::reading::claim_words::{
    BREAK, CHANGED, COMPARATIVE, DIFFER, EXTREME, FUNCTION, HEDGE, METHOD, PLAN, REPORT, THAN,
};
use crate::reading::lexicon::Classes;

impl Scope<'_> {
    /// The first word of significance in the statistical sense.
    pub(super) fn significance(&self) -> Option<Found> {
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

    pub(super) fn significance_at(&self, k: usize) -> Option<Found> {
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
                && !(1..6).any(|d| before(d, &["reach", "reached", "lack", "failed", "short", "absence"]))
            // "the detection of a significant difference" in a plan; "no significant risk" to anyone's health.
            || (1..5).any(|d| before(d, &["detection", "detecting"]))
            || flat.any(k + 1, &["risk", "risks"])
                && !flat.is(k + 2, Classes::DIFFERENCE)
                && !flat.any(k + 2, &["factor", "factors"])
                && !self.facts.figures
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
        let qualified = flat.is(k + 1, Classes::SIGNIFICANCE) || flat.any(k + 1, &["non", "not", "in"]);
        if flat.any(k, &["statistically"]) && qualified && !non {
            return None;
        }
        // "was statistically underpowered"
        if flat.any(k, &["statistically"]) && flat.is(k + 1, PLAN) {
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
        // "significance was not reached", "lost significance", "was no longer significant".
        let unreached = noun
            && ((k + 1..(k + 5).min(end)).any(|j| flat.is(j, Classes::NEGATION))
                || (1..4).any(|d| before(d, &["lost", "lacked", "lacking", "short", "below", "losing"])))
            || before(1, &["longer"]) && before(2, &["no"]);
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
        if alike && self.like_another(last) {
            return None;
        }
        if alike && negation.is_none() {
            return self.found(ClaimKind::NoDifference, k, last);
        }
        if flat.any(last, &["loss"]) && flat.any(last + 1, &["to"]) {
            return None;
        }
        let kind = if negation.is_some() || non || unreached || self.clause.denied {
            ClaimKind::NotSignificant
        } else if hedged {
            ClaimKind::Trend
        } else if !self.found_out() || self.conditional(k) {
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

    /// "When a significant interaction was detected, …" says what is done then, not that it was found.
    fn conditional(&self, k: usize) -> bool {
        let flat = self.flat;
        let opens = flat.any(self.clause.first, &["when", "if", "whenever", "once", "unless"]);
        opens && !self.facts.figures && !(self.clause.first..k).any(|j| flat.sign(j, ','))
    }

    /// "only in the X group", "in X but not in Y", said of a change.
    pub(super) fn one_arm_only(&self, k: usize) -> bool {
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
}
