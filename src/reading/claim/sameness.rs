//! Claims that nothing differs: by denial, by likeness, by equivalence.

use super::clause::Lead;
use super::cue::{Found, Scope};
use super::words::*;
use crate::reading::ClaimKind;
use crate::reading::claim_words::{CHANGED, COMPARATIVE, DIFFER, FINITE, FUNCTION, METHOD, MODAL, REPORT, THAN};
use crate::reading::lexicon::Classes;

impl Scope<'_> {
    /// "no difference", "did not differ", "was not associated".
    pub(super) fn denial(&self) -> Option<Found> {
        let flat = self.flat;
        let targets = Classes::DIFFERENCE.or(DIFFER).or(COMPARATIVE).or(Classes::ASSOCIATION);
        for k in self.range() {
            if !(flat.is(k, Classes::NEGATION)) {
                // "no evidence that syrup exerted an effect": the verb may stand anywhere before the noun.
                if self.clause.denied
                    && k > self.clause.first
                    && flat.is(k, targets)
                    && (flat.finite(k)
                        || flat.finite(k - 1)
                        || flat.word(k).ends_with("ed") && flat.is(k, DIFFER)
                        || (self.clause.first + 1..k).any(|j| flat.finite(j) || flat.word(j).ends_with("ed")))
                {
                    return self.found(ClaimKind::NoDifference, k, k);
                }
                if let Some(found) = self.little(k) {
                    return Some(found);
                }
                continue;
            }
            // "no more than", "not greater than 2 times the limit"
            let bound = flat.any(k + 1, &["more", "less", "later", "fewer"]) && flat.any(k + 2, &["than"])
                || (k + 1..k + 3).any(|j| {
                    flat.is(j, COMPARATIVE)
                        && flat.any(j + 1, &["than"])
                        && (flat.number(j + 2) || flat.is(j + 2, Classes::NUMBER_WORD))
                });
            if flat.any(k + 1, NOT_DENYING) || bound || self.planned(k) {
                continue;
            }
            let noun_like = flat.any(k, &["no", "without", "lack", "absence", "none", "neither", "nor"]);
            // "changes were observed neither in A nor in B"
            let nowhere = flat.any(k, &["neither"])
                && k > self.clause.first + 1
                && flat.is(k - 1, REPORT)
                && flat.any(k + 1, &["in", "for", "between", "with"])
                && flat.find(self.clause.first..k, Classes::DIFFERENCE.or(Classes::ASSOCIATION)).is_some();
            if nowhere {
                return self.found(ClaimKind::NoDifference, self.clause.first, k);
            }
            // "1 no change case" is a category; "the lack of effect may be due to …" refers to a claim made elsewhere.
            let category = flat.any(k, &["no"]) && flat.number(k.wrapping_sub(1));
            let referred = flat.any(k, &["lack", "absence"])
                && flat.any(k.wrapping_sub(1), &["the", "this", "for", "to", "by"])
                && !self.facts.figures;
            if category || referred {
                continue;
            }
            // "no clear dose–response was observed"
            let response = flat.any(k, &["no"])
                && (k + 1..k + 5).any(|j| flat.any(j, &["dose"]) && (j + 1..j + 3).any(|h| flat.any(h, &["response"])))
                && flat.find(self.range(), REPORT.or(FINITE)).is_some();
            if response {
                return self.found(ClaimKind::NoDifference, k, (k + 4).min(self.clause.end - 1));
            }
            let reach = if flat.any(k, &["none"]) { 14 } else { 9 };
            let until = (k + 1..(k + reach).min(self.clause.end))
                .find(|&j| {
                    flat.signs(j, &[',', ';']) && !flat.any(k, &["none", "neither"]) || flat.any(j, &["who", "which"])
                })
                .unwrap_or((k + reach).min(self.clause.end));
            let Some(t) = flat.find(k + 1..until, targets) else { continue };
            // Non-inferiority is told as such; a sensitivity analysis that changes no conclusion compares nothing.
            if flat.any(t, &["inferior"]) || self.of_the_method(t) {
                continue;
            }
            // "none reported complications associated with it": the participle belongs to a noun.
            if flat.is(t, Classes::ASSOCIATION)
                && flat.any(t, &["associated", "related", "linked"])
                && !self.negated_predicate(k, t)
            {
                continue;
            }
            let between = k + 1..t;
            // "neither case was considered to be related to the drug": a judgement on a case.
            if flat.is(t, Classes::ASSOCIATION)
                && between.clone().any(|j| flat.any(j, &["considered", "judged", "deemed"]))
            {
                continue;
            }
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
                let blocked = between.clone().any(|j| {
                    flat.any(j, &["for", "in", "by", "because", "due", "until"])
                        && !flat.any(j - 1, &["result", "resulted", "resulting"])
                        || flat.any(j, NOT_DONE)
                });
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

    /// "had little effect on", "there was little difference between"
    fn little(&self, k: usize) -> Option<Found> {
        let flat = self.flat;
        if !flat.any(k, &["little"]) {
            return None;
        }
        let noun = (k + 1..k + 3).find(|&j| flat.any(j, &["difference", "effect", "change", "impact", "influence"]))?;
        let said = k > self.clause.first && flat.any(k - 1, &["had", "was", "were", "showed", "found", "made", "very"]);
        let little = said && !self.planned(k) && self.found_out();
        if little { self.found(ClaimKind::NoDifference, k, noun) } else { None }
    }

    /// "did not change the conclusions", "no changes to the protocol": about how, not about what was found.
    fn of_the_method(&self, t: usize) -> bool {
        let flat = self.flat;
        let next = || t + 1..(t + 6).min(self.clause.end);
        let acts =
            flat.any(t, &["change", "changed", "alter", "altered", "affect", "affected", "influence", "changes"]);
        acts && next()
            .take_while(|&j| {
                flat.is(j, FUNCTION) || flat.any(j, CONCLUSIONS) || flat.any(j, &["main", "overall", "study"])
            })
            .any(|j| flat.any(j, CONCLUSIONS))
            || flat.any(t, &["change", "changes"])
                && flat.any(t + 1, &["to", "in"])
                && next().any(|j| {
                    flat.any(
                        j,
                        &[
                            "protocol",
                            "medication",
                            "medications",
                            "methods",
                            "eligibility",
                            "design",
                            "therapy",
                            "trial",
                        ],
                    )
                })
    }

    /// A likeness at `k` to another analysis, study or report.
    pub(super) fn like_another(&self, k: usize) -> bool {
        let flat = self.flat;
        flat.any(k + 1, &["to", "with"])
            && (flat.any(k + 2, &["our", "ours"]) || (k + 2..k + 5).any(|j| flat.any(j, ANOTHER)))
    }

    /// "similar to that of controls" compares within the study.
    fn like_a_group(&self, k: usize) -> bool {
        let flat = self.flat;
        // "similar to that of the syrup", whose group goes by its own name
        let named = flat.any(k + 2, &["that", "those"])
            && flat.any(k + 3, &["of", "with", "in", "for"])
            && !(k + 4..(k + 12).min(self.clause.end)).any(|j| {
                flat.any(j, ELSEWHERE)
                    || flat.any(j, &["study", "trial", "trials", "population", "cohort", "literature"])
            });
        flat.any(k + 1, &["to", "with"])
            && (named || (k + 2..(k + 9).min(self.clause.end)).any(|j| flat.is(j, Classes::GROUP)))
            && !(k + 2..k + 6).any(|j| flat.any(j, &["performed", "used", "given", "received", "described"]))
            && !self.like_another(k)
    }

    /// A form of "be" on either side of the negation: "was not associated", "none was related".
    pub(super) fn negated_predicate(&self, k: usize, t: usize) -> bool {
        (k.saturating_sub(1)..t).any(|j| self.flat.any(j, &["was", "were", "is", "are", "be", "been"]))
    }

    /// "did not differ", "was not higher", "could not find any difference": not "not all patients improved".
    pub(super) fn negates_a_verb(&self, k: usize, t: usize) -> bool {
        let flat = self.flat;
        let auxiliary =
            flat.is(k.wrapping_sub(1), FINITE) || flat.is(k.wrapping_sub(1), MODAL) || !flat.any(k, &["not"]);
        // "were also not reduced"
        let adverb = k > 1
            && (flat.word(k - 1).ends_with("ly")
                || flat.any(k - 1, &["also", "still", "either", "again", "therefore"]))
            && flat.is(k - 2, FINITE);
        (auxiliary || adverb)
            && t - k <= 8
            && !flat.any(k + 1, &["all", "every", "everyone"])
            && !(flat
                .any(k + 1, &["receive", "receiving", "include", "included", "require", "take", "meet", "complete"]))
    }

    /// A present tense without figures is common knowledge, not a finding, unless it speaks of this study.
    pub(super) fn present_background(&self, k: usize) -> bool {
        let flat = self.flat;
        let Some(v) = self.finite else { return false };
        flat.any(v, &["is", "are", "has", "have", "does", "do"])
            && !self.facts.figures
            && self.clause.lead != Lead::That
            && !(self.clause.first..k).any(|j| flat.any(j, &["we", "our", "this"]))
            // "there is no correlation between … in the fed group"
            && !(flat.any(self.clause.first, &["there"]) && self.range().any(|j| flat.any(j, &["group", "groups", "arm"])))
    }

    pub(super) fn equivalence(&self) -> Option<Found> {
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
    pub(super) fn likeness(&self) -> Option<Found> {
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
            let next = (k + 1..k + 6)
                .find(|&j| flat.any(j, OTHER_LIKENESS) && !(flat.any(j, &["that", "those"]) && self.like_a_group(k)));
            // "Similar to the results of the survey, …"
            let degree = flat.any(k.wrapping_sub(1), &["more", "less", "most"]);
            if k == self.clause.first && flat.any(k + 1, &["to"]) || degree || self.like_another(k) {
                continue;
            }
            let claimed = if flat
                .any(k, &["unchanged", "unaffected", "unaltered", "indistinguishable", "undifferentiated"])
            {
                // Capsules are indistinguishable from placebo.
                let looks = flat.any(k, &["indistinguishable"]) && (k + 2..k + 4).any(|j| flat.any(j, &["placebo"]));
                let had = (k.saturating_sub(2)..k).any(|j| flat.any(j, &["had", "showed"]));
                !looks && (verb.is_some() || had || flat.any(k.wrapping_sub(1), &["an", "and"]))
            } else if flat.any(k, &["stable", "constant"]) {
                let over = (k + 1..k + 4)
                    .any(|j| flat.any(j, &["over", "throughout", "during", "between", "across", "among", "from"]));
                (flat.any(k.wrapping_sub(1), &["remained", "stayed", "relatively"])
                    || flat.any(k.wrapping_sub(1), &["were", "was"]) && over)
                    && flat.find(self.range(), METHOD).is_none()
                    && !self.range().any(|j| flat.any(j, &["samples", "solutions", "analyte", "storage", "solution"]))
            } else if flat.any(k, &["similarity", "similarities"]) {
                (k + 1..k + 4).any(|j| flat.any(j, &["between", "among", "across"]))
                    && (flat.any(self.clause.first, &["there"])
                        || flat.find(k.saturating_sub(4).max(self.clause.first)..k, REPORT).is_some())
            } else if flat.any(k, &["ineffective"]) {
                predicate && flat.any(k + 1, &["in", "at", "for", "against"])
            } else if flat.any(k, &["equally", "evenly", "comparably"]) {
                verb.is_some()
                    && (k + 1..k + 3).any(|j| {
                        flat.any(j, &["distributed", "balanced", "effective", "matched", "well", "common", "good"])
                    })
            } else if flat.any(k, &["balanced", "matched", "alike", "homogeneous"]) {
                predicate
                    && flat.any(k.wrapping_sub(1), &["well", "were", "comparably", "was"])
                    && !flat.any(k + 1, &["for", "by", "on"])
            } else if flat.any(k, &["same", "equal", "identical"])
                && (flat.any(k.wrapping_sub(1), NEARLY) && predicate
                    // "were equal (p = 0.34)"
                    || predicate && self.facts.figures && flat.figures_after(k)
                    || flat.any(k, &["same"])
                        && flat.any(k.wrapping_sub(1), &["the"])
                        && (flat.any(k.wrapping_sub(2), &["remained", "stayed"])
                            || flat.any(k.wrapping_sub(2), NEARLY) && verb.is_some()))
            {
                next.is_none()
            } else if flat.any(k, &["same", "equal", "identical"]) {
                predicate
                    && (k + 1..k + 5).any(|j| flat.any(j, &["in", "between", "for", "across", "among"]))
                    && (k + 1..self.clause.end)
                        .any(|j| flat.any(j, &["groups", "arms", "both", "two", "treatments", "three", "conditions"]))
                    && next.is_none()
            } else if predicate {
                // "was similar to that of earlier studies" compares with others, "similar to that of controls" does not.
                let elsewhere = (k + 2..(k + 14).min(self.clause.end)).any(|j| {
                    flat.any(j, ELSEWHERE) && j < k + 8
                        || flat.any(j, &["study", "trial", "survey", "cohort", "registry", "studies", "trials"])
                            && (flat.word(j).starts_with(|c: char| c.is_uppercase())
                                || flat.any(j.wrapping_sub(1), &["another", "other", "earlier"]))
                });
                let manner = flat.any(k + 1, &["manner", "way", "fashion", "looking"])
                    || flat.any(k + 2, &["appearance", "design", "taste", "shape"]);
                !elsewhere && !manner
            } else {
                // Attributive: "similar proportions of subjects reached", "had a similar impact".
                let listed = (k + 1..k + 4).any(|j| flat.any(j, LIKE_NOUNS) || flat.is(j, Classes::DIFFERENCE));
                // Any other noun where the clause compares groups: "showed similar control in both groups".
                let among = (k + 2..(k + 7).min(self.clause.end)).any(|j| {
                    flat.any(j, &["in", "between", "among", "across", "for"])
                        && (j + 1..j + 5).any(|h| {
                            flat.any(h, &["groups", "arms", "both", "treatments", "two", "three", "conditions"])
                        })
                });
                let told = || flat.find(k.saturating_sub(6).max(self.clause.first)..k, REPORT).is_some();
                let general = !flat.is(k + 1, FUNCTION)
                    && !self.eligibility()
                    && !self
                        .range()
                        .any(|j| flat.any(j, &["used", "using", "underwent", "given", "followed", "design"]))
                    && (self.clause.lead == Lead::Which || among && told());
                // "at a rate comparable to that of controls", "infrequent, mild and similar between the groups".
                let behind = flat.any(k, &["similar", "comparable"])
                    && (self.like_a_group(k) && !flat.is(k.wrapping_sub(1), FUNCTION)
                        || flat.is(k.wrapping_sub(1), Classes::AND)
                            && flat.any(k + 1, &["between", "in", "among", "across"])
                            && (self.clause.first..k).any(|j| flat.any(j, LINKING)))
                    && self.finite.is_some()
                    && !self.eligibility();
                let modal = flat.find(self.clause.first..k, MODAL).is_some();
                let noun = (listed || general || behind) && !modal;
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
}
