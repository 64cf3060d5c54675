//! Planning statements: alpha, power, sides, sample size, thresholds, legends, multiplicity.

mod sample;
// Word lists are easier to read in full lines.
#[rustfmt::skip]
mod words;

use self::words::*;
use super::claim_words::MULTIPLE;
use super::lexicon::Classes;
use super::p::PExpression;
use super::sentence::SentenceView;
use super::token::Style;
use super::{Planning, PlanningKind, Relation, Sides};
use crate::printed::Printed;

/// Appends the planning statements of one sentence. `defines[i]` is set for each p expression that
/// defines a threshold or a legend instead of reporting a result.
pub fn read(view: &SentenceView, p: &[PExpression], defines: &mut [bool], out: &mut Vec<Planning>) {
    let union = Classes(view.tokens.iter().fold(0, |all, t| all | t.classes.0));
    let cues = Classes::SIDED.or(Classes::SAMPLE).or(Classes::POWER).or(Classes::ALPHA).or(MULTIPLE);
    let greek = view
        .tokens
        .iter()
        .enumerate()
        .any(|(i, t)| t.is_word() && t.classes == Classes::NONE && view.any(i, &["α", "β"]));
    if p.is_empty() && !greek && !union.meets(cues.or(Classes::CONSIDERED).or(Classes::SIGNIFICANCE)) {
        return;
    }
    let error = view.tokens.iter().enumerate().any(|(i, t)| t.is_word() && view.any(i, &["type"]));
    let from = out.len();
    let mut reader = Reader { view, p, defines, out };
    if !p.is_empty() {
        reader.legends();
        reader.thresholds();
    }
    if union.meets(Classes::CONSIDERED) && union.meets(Classes::SIGNIFICANCE) && union.meets(Classes::CI) {
        reader.interval_threshold();
    }
    if union.meets(Classes::SIDED) {
        reader.sides();
    }
    if greek || union.meets(Classes::ALPHA.or(Classes::SE).or(Classes::SIGNIFICANCE)) || error {
        reader.alpha();
    }
    if greek || union.meets(Classes::POWER) {
        reader.power();
    }
    if union.meets(Classes::CONSIDERED) && union.meets(Classes::SIGNIFICANCE) && reader.out.len() == from {
        reader.bare_threshold();
    }
    if union.meets(Classes::SAMPLE.or(Classes::POWER)) {
        reader.sample_size();
    }
    if union.meets(MULTIPLE) {
        reader.multiplicity();
    }
    if union.meets(Classes::SIGNIFICANCE) {
        reader.least_significant();
    }
    out[from..].sort_by_key(|x| (x.span.start, x.span.end));
}

struct Reader<'a, 'b> {
    view: &'a SentenceView<'a>,
    p: &'b [PExpression],
    defines: &'b mut [bool],
    out: &'b mut Vec<Planning>,
}

/// Marks that tie a legend to the figures that carry them.
const MARKS: &[char] =
    &['*', '†', '‡', '§', '¶', '#', '$', '&', '+', '⁎', '∗', '∆', '^', '@', '∧', '◊', '¥', '£', '‖', '※'];

impl Reader<'_, '_> {
    fn add(&mut self, what: PlanningKind, first: usize, last: usize, value: Option<Printed>, sides: Option<Sides>) {
        let span = self.view.span(first, last);
        self.out.push(Planning { span, sentence: self.view.id, what, value, sides });
    }

    /// `* P < 0.05`, `^a^ p < 0.05 compared with …`, `†: p < 0.01`, `* indicates p < 0.05`.
    fn legends(&mut self) {
        let v = self.view;
        for (n, x) in self.p.iter().enumerate() {
            if !customary(x) {
                continue;
            }
            let mut i = x.first;
            // From the p back to its mark: signs, "indicates", "significant at".
            while i > 0 && (v.signs(i - 1, &[':', '=', ',', ';', '-', '(']) || v.any(i - 1, LEGEND_WORDS)) {
                i -= 1;
            }
            if i == 0 {
                continue;
            }
            let mark = i - 1;
            let star = v.signs(mark, MARKS) && (v.style(mark) == Style::Superscript || mark == 0 || opens(v, mark));
            let letter = is_mark_letter(v, mark)
                && (v.style(mark) == Style::Superscript
                    && (mark == 0 || v.spaced(mark) || v.signs(mark - 1, &[',', ';', '.']))
                    || v.signs(mark + 1, &[';', ':', '=', ')'])
                        && (mark == 0 || v.signs(mark - 1, &[';', ',', '.', '(', ':', '-'])));
            if !(star || letter) {
                continue;
            }
            let mut first = mark;
            while first > 0 && v.signs(first - 1, MARKS) && !v.spaced(first) {
                first -= 1;
            }
            self.defines[n] = true;
            let last = self.until(x.last, self.p.get(n + 1).map(|next| next.first));
            self.add(PlanningKind::Legend, first, last, x.value, None);
        }
        // "Asterisks indicate p < 0.05", "different letters differ at P < 0.05".
        for (n, x) in self.p.iter().enumerate() {
            if self.defines[n] || !customary(x) {
                continue;
            }
            let sign = (x.first.saturating_sub(14)..x.first).find(|&i| v.any(i, SIGN_NAMES));
            if let Some(first) = sign.filter(|&w| (w + 1..x.first).any(|i| v.any(i, SIGN_VERBS))) {
                self.defines[n] = true;
                self.add(PlanningKind::Legend, first, x.last, x.value, None);
            }
        }
        // "*Significantly different from controls (p < 0.05)": the mark opens the sentence. The mark may be lost:
        // "Statistically significant (p < 0.05)." has no subject that could be a result.
        let bare = v.len() < 12
            && (0..2).any(|i| v.any(i, &["significant", "significantly"]))
            && !(0..v.len()).any(|i| v.any(i, DECLARES) || v.any(i, &["was", "were"]));
        let opening = bare || v.signs(0, MARKS) || v.style(0) == Style::Superscript && is_mark_letter(v, 0);
        if opening
            && self.p.len() == 1
            && !self.defines[0]
            && customary(&self.p[0])
            && (0..8).any(|i| {
                v.is(i, Classes::SIGNIFICANCE.or(Classes::DIFFERENCE))
                    || v.any(i, &["vs", "different", "versus", "compared", "higher", "lower", "than", "from"])
            })
        {
            self.defines[0] = true;
            let x = &self.p[0];
            let last = if v.sign(x.last + 1, ')') { x.last + 1 } else { x.last };
            self.add(PlanningKind::Legend, 0, last, x.value, None);
        }
    }

    /// The end of a legend: the next mark, stop or semicolon.
    fn until(&self, from: usize, next_p: Option<usize>) -> usize {
        let v = self.view;
        let stop = next_p.unwrap_or(v.len());
        let mut i = from;
        while i + 1 < stop
            && i < from + 16
            && !v.signs(i + 1, &[';', '.', ','])
            && !v.signs(i + 1, MARKS)
            && v.style(i + 1) != Style::Superscript
        {
            i += 1;
        }
        i
    }

    /// "P < 0.05 was considered significant", "significance was set at p < 0.05".
    fn thresholds(&mut self) {
        let v = self.view;
        for n in 0..self.p.len() {
            if self.defines[n] || !self.is_threshold(n) {
                continue;
            }
            self.defines[n] = true;
            let (first, last) = self.threshold_extent(n);
            let x = &self.p[n];
            // "p < 0.05 significance level" within a sample-size sentence is alpha.
            let alpha = v.is(x.last + 1, Classes::SIGNIFICANCE)
                && v.any(x.last + 2, &["level"])
                && !(0..x.first).any(|i| v.any(i, DECLARES));
            if alpha {
                self.add(PlanningKind::Alpha, x.first, x.last + 2, x.value, None);
            } else {
                self.add(PlanningKind::Threshold, first, last, x.value, None);
            }
        }
    }

    fn is_threshold(&self, n: usize) -> bool {
        let (v, x) = (self.view, &self.p[n]);
        let Some(value) = x.value else { return false };
        if !matches!(
            x.relation,
            Relation::Less | Relation::AtMost | Relation::Equal | Relation::Greater | Relation::AtLeast
        ) || value.value() > 0.25
        {
            return false;
        }
        let (first, last) = (x.first, x.last);
        let exact = x.relation == Relation::Equal;
        if exact && ![0.05, 0.01, 0.1, 0.001, 0.025].contains(&value.value()) {
            return false;
        }
        let significance = |i: usize| v.is(i, Classes::SIGNIFICANCE) || v.any(i, &["significance", "different"]);
        // "… (P < 0.05)" after words of its own sentence is a result, unless the words set a level.
        let in_bracket = first > 0 && v.signs(first - 1, &['(', '[']);
        // p as the subject: "P < 0.05 was considered significant", "P values < 0.05 indicated significance".
        let after = last + 1..(last + 16).min(v.len());
        let closed = after
            .clone()
            .find(|&i| {
                v.signs(i, &[';'])
                    || v.signs(i, &[')', ']']) && !(last + 1..i).any(|j| v.signs(j, &['(', '[']))
                    || v.any(i, &["but", "whereas"])
            })
            .unwrap_or(after.end);
        let subject = !in_bracket && {
            let verb = (last + 1..closed.min(last + 12)).find(|&i| v.any(i, DECLARES) || v.any(i, STANDS_FOR));
            verb.is_some_and(|w| {
                (w..closed).any(significance)
                    || v.any(w, &["threshold", "cutoff", "level"]) && (0..v.len()).any(significance)
            }) || v.any(last + 1, &["was", "were", "is", "being", "are"])
                && (last + 2..(last + 5).min(closed)).any(significance)
        };
        if subject {
            return true;
        }
        let from = first.saturating_sub(14);
        let before = (from..first).rev().find(|&i| v.signs(i, &[';'])).map_or(from, |i| i + 1);
        let declared = (before..first).rev().find(|&i| v.any(i, DECLARES));
        // "significance was set at P < 0.05", "considered significant if p < 0.05", "threshold at P < 0.01".
        if let Some(w) = declared {
            let near = first - w <= 12;
            let said = (0..first).any(significance) || v.any(w, &["threshold", "cutoff"]);
            let linked = (w + 1..first).all(|i| {
                significance(i)
                    || v.is(i, Classes::P.or(Classes::SIDED).or(Classes::NUMBER_WORD))
                    || !v.tokens[i].is_word() && !v.signs(i, &[';'])
                    || v.any(i, THRESHOLD_LINKS)
            });
            let bracket_result = in_bracket
                && v.any(w, &["used", "applied", "level", "levels", "chosen", "assigned", "selected"])
                && !v.any(w.wrapping_sub(1), &["significance"]);
            if near && said && linked && !bracket_result && !(in_bracket && exact) {
                // "was considered significant (P < 0.05)" says what is considered so; with `=` it reports.
                return true;
            }
        }
        // "significance: P ≤ 0.05", "significance level (P < 0.05)", "significant if p < 0.05", "significant when".
        let colon = first > 1
            && v.signs(first - 1, &[':', '='])
            && (first.saturating_sub(5)..first).any(significance)
            && x.relation != Relation::Equal
            && (first < 8 || (first.saturating_sub(4)..first).any(|i| v.any(i, &["level", "significance"])));
        let level = first > 1
            && (first.saturating_sub(3)..first).any(|i| v.any(i, &["level", "threshold"]))
            && (first.saturating_sub(5)..first).any(significance)
            && !exact;
        let condition = first > 0
            && (first.saturating_sub(3)..first).any(|i| v.any(i, &["if", "when", "where", "whenever"]))
            && (from..first).any(significance)
            && !exact;
        let as_level = v.any(last + 1, &["level", "significance"])
            && (last + 1..last + 3).any(|i| v.any(i, &["level"]))
            && (v.is(last + 1, Classes::SIGNIFICANCE) || v.any(last + 2, &["of"]))
            && !(from..first).any(|i| v.any(i, &["significant", "significantly", "differed", "were"]))
            && !exact;
        // "Statistical significance was P < 0.05".
        let equated = first > 1
            && v.any(first - 1, &["was", "is", "as", "were"])
            && (first.saturating_sub(6)..first).any(|i| v.any(i, &["significance"]))
            && !exact;
        let threshold = (first.saturating_sub(3)..first).any(|i| v.any(i, &["threshold", "cutoff"]));
        // "p < 0.05 for statistical significance", "hypotheses were tested at p < 0.05".
        let purpose = !in_bracket
            && !exact
            && v.any(last + 1, &["for", "as"])
            && (last + 2..last + 5).any(|i| v.any(i, &["significance"]));
        let tested = !in_bracket
            && !exact
            && (first.saturating_sub(4)..first).any(|i| {
                v.any(i, &["tested", "performed", "conducted", "evaluated"])
                    && (i + 1..first).all(|j| v.any(j, &["at", "using", "with", "a", "the", "level", "of"]))
            });
        purpose || tested || colon || level || condition || as_level || equated || threshold
    }

    /// From the subject to the end of the definition.
    fn threshold_extent(&self, n: usize) -> (usize, usize) {
        let (v, x) = (self.view, &self.p[n]);
        let stops = |i: usize| v.signs(i, &[';', ')', '(', ']', '[']) || v.signs(i, &['.']);
        let mut first = x.first;
        if let Some(w) = (first.saturating_sub(3)..first).find(|&i| v.any(i, &["threshold", "cutoff"])) {
            first = w;
        } else {
            while first > 0
                && x.first - first < 16
                && !stops(first - 1)
                && !(v.sign(first - 1, ',') || v.any(first - 1, &["and"]) && v.is(first, Classes::P))
            {
                first -= 1;
            }
        }
        while first < x.first && v.is(first, Classes::AND) {
            first += 1;
        }
        let mut last = x.last;
        let declared_before = (first..x.first).any(|i| v.any(i, DECLARES) || v.is(i, Classes::SIGNIFICANCE));
        if declared_before {
            if v.any(last + 1, &["level"]) {
                last += 1;
            }
        } else if let Some(end) =
            (last + 1..(last + 14).min(v.len())).take_while(|&i| !stops(i)).find(|&i| v.is(i, Classes::SIGNIFICANCE))
        {
            last = end;
            while v.is(last + 1, Classes::SIGNIFICANCE) || v.any(last + 1, &["different", "difference", "level"]) {
                last += 1;
            }
        }
        (first, last)
    }

    /// "a probability below 0.05 was considered significant": the limit without a p.
    fn bare_threshold(&mut self) {
        let v = self.view;
        for j in 1..v.len() {
            let Some((x, end)) = self.share(j).filter(|x| limit(x.0)) else { continue };
            let below = v.signs(j - 1, &['<', '≤']) || v.any(j - 1, &["than", "below", "under", "at"]);
            if !below || self.taken(j) || self.p.iter().any(|p| p.first <= j && j <= p.last) {
                continue;
            }
            let behind = (j.saturating_sub(10)..j).find(|&w| v.any(w, DECLARES) && !v.any(w, &["by", "used", "level"]));
            let behind = behind.filter(|&w| {
                (w.saturating_sub(5)..j).any(|i| v.is(i, Classes::SIGNIFICANCE))
                    && (w + 1..j).all(|i| {
                        !v.tokens[i].is_word()
                            || v.is(i, Classes::SIGNIFICANCE.or(Classes::P))
                            || v.any(i, THRESHOLD_LINKS)
                    })
            });
            let ahead = (end..(end + 4).min(v.len()))
                .find(|&w| v.any(w, DECLARES))
                .and_then(|w| (w + 1..(w + 6).min(v.len())).rev().find(|&i| v.is(i, Classes::SIGNIFICANCE)));
            if let Some(w) = behind {
                let noun = (w.saturating_sub(5)..w).find(|&i| v.is(i, Classes::SIGNIFICANCE)).unwrap_or(w);
                self.add(PlanningKind::Threshold, noun, end - 1, Some(x), None);
                return;
            }
            if let Some(last) = ahead {
                let noun = (j.saturating_sub(5)..j).find(|&i| v.any(i, &["probability", "values", "value", "level"]));
                self.add(PlanningKind::Threshold, noun.unwrap_or(j - 1), last, Some(x), None);
                return;
            }
        }
    }

    /// "considered significant if the 95 % CI did not contain 0": a threshold without p.
    fn interval_threshold(&mut self) {
        let v = self.view;
        for i in 0..v.len() {
            if !v.any(i, &["if", "when"]) {
                continue;
            }
            let ci =
                (i + 1..(i + 12).min(v.len())).find(|&j| v.is(j, Classes::CI) || v.any(j, &["intervals", "interval"]));
            let Some(ci) = ci else { continue };
            let verb = (ci + 1..(ci + 20).min(v.len())).find(|&j| v.any(j, EXCLUDES_NULL));
            let Some(verb) = verb else { continue };
            let last = (verb + 1..(verb + 6).min(v.len()))
                .find(|&j| v.number(j).is_some() || v.any(j, &["zero", "one", "unity"]))
                .unwrap_or(verb);
            let first = (0..i).rev().find(|&j| v.is(j, Classes::CONSIDERED)).map_or(i, |w| {
                (0..w).rev().take(12).find(|&j| v.signs(j, &[',', ';'])).map_or(w.saturating_sub(6), |j| j + 1)
            });
            let first = if self.out.last().is_some_and(|o| o.sentence == v.id && o.what == PlanningKind::Threshold) {
                i
            } else {
                first
            };
            self.add(PlanningKind::Threshold, first, last, None, None);
        }
    }

    /// "two-sided", "2-tailed t test", "one tailed".
    fn sides(&mut self) {
        let v = self.view;
        for i in 1..v.len() {
            if !v.any(i, &["sided", "tailed", "tail", "side"]) {
                continue;
            }
            let dash = v.sign(i - 1, '-');
            let Some(count) = i.checked_sub(if dash { 2 } else { 1 }) else { continue };
            let sides =
                if v.any(count, &["two", "both", "double"]) || v.number(count).and_then(Printed::count) == Some(2) {
                    Sides::Two
                } else if v.any(count, &["one", "single"]) || v.number(count).and_then(Printed::count) == Some(1) {
                    Sides::One
                } else {
                    continue;
                };
            // "on one side", "two side effects": needs its hyphen or a test nearby.
            if v.any(i, &["side", "tail"]) && (!dash || v.any(i + 1, &["effects", "effect"])) {
                continue;
            }
            let mut last = i;
            let test = (i + 1..(i + 7).min(v.len()))
                .take_while(|&j| v.tokens[j].is_word() || v.signs(j, &['-', '\'']))
                .find(|&j| v.any(j, &["test", "tests", "testing"]));
            if let Some(test) = test {
                last = test;
            }
            self.add(PlanningKind::Sided, count, last, None, Some(sides));
        }
    }

    /// A probability: `0.05`, `.05`, `5 %`; the token after it.
    fn share(&self, i: usize) -> Option<(Printed, usize)> {
        let v = self.view;
        let x = v.number(i)?;
        if v.sign(i + 1, '%') || v.is(i + 1, Classes::PERCENT) || v.any(i + 1, &["per"]) {
            return Some((x.shifted(-2), i + if v.any(i + 1, &["per"]) { 3 } else { 2 }));
        }
        (x.value() < 1.0 && x.places > 0).then_some((x, i + 1))
    }

    /// Over "level", "was", "set", "at", "of", "=" … to a probability.
    fn share_after(&self, i: usize, reach: usize) -> Option<(Printed, usize)> {
        let v = self.view;
        let mut j = i;
        while j < (i + reach).min(v.len()) {
            if let Some(x) = self.share(j) {
                return Some(x);
            }
            let skip = v.signs(j, &['=', '(', ':', ')', '-', '<', '≤', ',', '[', ']', '~', '\''])
                || v.is(j, Classes::P.or(Classes::SIDED).or(Classes::NUMBER_WORD))
                || v.any(j, ALPHA_LINKS)
                || v.number(j).is_some_and(|x| x.count().is_some_and(|n| n <= 2));
            if !skip {
                return None;
            }
            j += 1;
        }
        None
    }

    fn taken(&self, i: usize) -> bool {
        // A number inside a p that was read as a threshold is not told twice.
        self.p.iter().zip(self.defines.iter()).any(|(x, &d)| d && x.first <= i && i <= x.last)
    }

    fn alpha(&mut self) {
        let v = self.view;
        let mut i = 0;
        while i < v.len() {
            let named = v.any(i, &["alpha", "α"]) && !v.sign(i.wrapping_sub(1), '(') || v.any(i, &["alpha", "α"]);
            let one = i + 1 + usize::from(v.sign(i + 1, '-'));
            let error = one + 1 + usize::from(v.sign(one + 1, '-'));
            let type_one = v.any(i, &["type"])
                && (v.any(one, &["i", "one"]) || v.number(one).and_then(Printed::count) == Some(1))
                && v.any(error, &["error", "errors"]);
            let bare = v.any(i, &["significance"]) && self.states_significance(i)
                || v.any(i, &["error"]) && v.any(i + 1, &["probability"]);
            // "significant at the 5 % level".
            let at_level = v.any(i, &["level", "levels"])
                && (v.sign(i.wrapping_sub(1), '%') || v.is(i.wrapping_sub(1), Classes::PERCENT))
                && (0..v.len()).any(|j| v.is(j, Classes::SIGNIFICANCE) || v.any(j, &["test", "tests", "tested"]));
            let level = v.any(i, &["significance"]) && v.any(i + 1, &["level", "levels", "threshold"])
                || v.any(i, &["level"])
                    && v.any(i + 1, &["of"])
                    && (v.any(i + 2, &["significance"])
                        || v.any(i + 2, &["statistical"]) && v.any(i + 3, &["significance"]));
            if !(named || type_one || level || bare || at_level)
                || named
                    && v.any(i.wrapping_sub(1), &["cronbach", "cronbach's", "interferon", "cronbachs", "coefficient"])
            {
                i += 1;
                continue;
            }
            let start = if named {
                i + 1
            } else if type_one {
                error + 1
            } else if bare || at_level {
                i + 1
            } else if v.any(i, &["level"]) {
                i + 3
            } else {
                i + 2
            };
            let ahead = self.share_after(start, 10).filter(|x| x.0.value() <= 0.2 && x.0.value() > 0.0);
            let ahead = ahead.filter(|x| !at_level && (named || type_one || level || limit(x.0)));
            // "0.05 level of significance", "5 % significance level", "0.05 alpha".
            let behind = (i.saturating_sub(6)..i).rev().find_map(|j| {
                let (x, end) = self.share(j)?;
                let linked = (end..i).all(|h| {
                    v.sign(h, '-')
                        || v.is(h, Classes::SIDED.or(Classes::NUMBER_WORD))
                        || v.any(h, &["level", "statistical", "alpha", "of", "two", "one", "a", "probability", "of"])
                });
                // "the 95 % significance level" means 5 %.
                let x = if x.value() >= 0.9 && x.value() < 1.0 && !named { complement(x)? } else { x };
                (linked && x.value() <= 0.2 && x.value() > 0.0 && (!at_level || limit(x))).then_some((x, j))
            });
            let cronbach =
                (i.saturating_sub(4)..i).any(|j| v.any(j, &["cronbach", "cronbach's", "consistency", "reliability"]));
            if cronbach {
                i += 1;
                continue;
            }
            if let Some((x, first)) = behind {
                let last = if named {
                    i
                } else if v.any(i, &["level"]) && v.any(i + 2, &["significance"]) {
                    i + 2
                } else if type_one {
                    error
                } else if bare || at_level {
                    i
                } else {
                    (i + 1).min(v.len() - 1)
                };
                if !self.taken(first) {
                    self.add(PlanningKind::Alpha, first, last, Some(x), None);
                }
                i = last + 1;
            } else if let Some((x, end)) = ahead {
                if !self.taken(end - 1) && !self.taken(end.saturating_sub(2)) {
                    self.add(PlanningKind::Alpha, i, end - 1, Some(x), None);
                }
                i = end;
            } else {
                i = start;
            }
        }
    }

    /// "significance of 5 %", "significance was set at 0.05", "5 % significance".
    fn states_significance(&self, i: usize) -> bool {
        let v = self.view;
        let verb = |j: usize| v.any(j, &["of", "set", "at", "defined", "accepted", "fixed", "assumed"]);
        verb(i + 1) && !(v.any(i + 1, &["of"]) && v.is(i + 2, Classes::P))
            || v.any(i + 1, &["was", "is", "will", "being"]) && (i + 2..i + 4).any(verb)
            || v.sign(i.wrapping_sub(1), '%')
    }

    fn power(&mut self) {
        let v = self.view;
        let mut i = 0;
        while i < v.len() {
            let power = v.any(i, &["power", "powers", "powered"])
                && !v.any(i + 1, &["output", "doppler", "spectrum", "spectral"]);
            let beta = v.any(i, &["beta", "β"]) && !v.sign(i.wrapping_sub(1), '-') && !(v.sign(i + 1, '-'));
            let type_two = v.any(i, &["type"]) && v.any(i + 1, &["ii", "two"]) && v.any(i + 2, &["error", "errors"]);
            if power {
                let behind = (i.saturating_sub(4)..i).rev().find_map(|j| {
                    let x = v.number(j)?;
                    let percent = v.sign(j + 1, '%') || v.is(j + 1, Classes::PERCENT) || v.any(j + 1, &["per"]);
                    let end = if v.any(j + 1, &["per"]) {
                        j + 3
                    } else if percent {
                        j + 2
                    } else {
                        j + 1
                    };
                    let linked = (end..i).all(|h| v.any(h, &["statistical", "study", "a", "of"]) || v.sign(h, '-'));
                    (linked && plausible_power(x, percent)).then_some((x, j))
                });
                if let Some((x, first)) = behind {
                    self.add(PlanningKind::Power, first, i, Some(x), None);
                    i += 1;
                    continue;
                }
                // "power of 80 %", "power (1 − β) was set at 0.8".
                let mut j = i + 1;
                while j < (i + 12).min(v.len()) {
                    if let Some(x) = v.number(j) {
                        let percent = v.sign(j + 1, '%') || v.is(j + 1, Classes::PERCENT) || v.any(j + 1, &["per"]);
                        if plausible_power(x, percent)
                            && !(v.tokens.get(j + 1).is_some_and(|t| t.is_word())
                                && v.any(j + 1, &["w", "kw", "watts"]))
                        {
                            let last = if v.any(j + 1, &["per"]) {
                                j + 2
                            } else if percent {
                                j + 1
                            } else {
                                j
                            };
                            self.add(PlanningKind::Power, i, last, Some(x), None);
                            i = last;
                            break;
                        }
                        if x.count() != Some(1) {
                            break;
                        }
                    } else if !(v.signs(j, &['=', '(', ')', ':', '-', ',', '≥', '>', '[', ']'])
                        || v.any(j, POWER_LINKS))
                    {
                        break;
                    }
                    j += 1;
                }
            } else if v.any(i, &["chance", "probability"])
                && v.any(i + 1, &["of", "to"])
                && (i + 2..i + 4).any(|j| v.any(j, &["detecting", "detect", "finding", "demonstrating"]))
                && v.sign(i.wrapping_sub(1), '%')
            {
                // "a 90 % chance of detecting".
                if let Some(x) = i.checked_sub(2).and_then(|j| v.number(j)).filter(|&x| plausible_power(x, true)) {
                    self.add(PlanningKind::Power, i - 2, i, Some(x), None);
                }
            } else if beta || type_two {
                let at = if beta { i + 1 } else { i + 3 };
                let planned = type_two || (0..v.len()).any(|j| v.any(j, &["alpha", "α", "power", "sample"]));
                // Beta in sample-size sentences: the power is its complement, printed as beta.
                if planned
                    && !(beta && v.any(i.wrapping_sub(2), &["1"])
                        || v.number(i.wrapping_sub(2)).is_some() && v.sign(i.wrapping_sub(1), '-'))
                    && let Some((x, end)) =
                        self.share_after(at, 8).filter(|x| x.0.value() <= 0.5 && x.0.value() >= 0.01)
                {
                    let complement = complement(x);
                    self.add(PlanningKind::Power, i, end - 1, complement, None);
                    i = end;
                    continue;
                }
            }
            i += 1;
        }
    }

    /// "Bonferroni correction", "Tukey post hoc tests", "adjusted for multiple comparisons".
    fn multiplicity(&mut self) {
        let v = self.view;
        let mut i = 0;
        while i < v.len() {
            if !v.is(i, MULTIPLE) {
                i += 1;
                continue;
            }
            let multiple = v.any(i, &["multiple", "multiplicity"]);
            let discovery = v.any(i, &["discovery"]);
            let capitals = |i: usize| v.word(i).bytes().all(|b| b.is_ascii_uppercase());
            let mut first = i;
            let mut last = i;
            if multiple {
                let about = v.any(i, &["multiplicity"])
                    || v.any(i + 1, &["comparisons", "comparison", "testing", "tests", "hypotheses", "hypothesis"]);
                let adjust = (i.saturating_sub(7)..i).find(|&j| v.any(j, ADJUSTS));
                let after =
                    (i + 1..(i + 5).min(v.len())).find(|&j| v.any(j, ADJUSTS) || v.any(j, &["procedure", "test"]));
                if !about || adjust.is_none() && after.is_none() {
                    i += 1;
                    continue;
                }
                first = adjust.unwrap_or(i);
                last = after.unwrap_or(i).max(if v.any(i, &["multiplicity"]) { i } else { i + 1 });
            } else if discovery {
                if !(v.any(i.wrapping_sub(1), &["false"]) && v.any(i + 1, &["rate", "rates"])) {
                    i += 1;
                    continue;
                }
                first = i - 1;
                last = i + 1;
            } else if v.any(i, &["hierarchical", "closed", "sequential", "fixed"]) {
                // An order of tests, not a model or a bottle.
                let from = i + 1 + usize::from(v.sign(i + 1, '-'));
                let test =
                    (from..from + 1).find(|&j| v.any(j, &["testing", "test", "tests", "gatekeeping", "sequence"]));
                let Some(test) = test.filter(|&t| {
                    v.any(
                        t + 1,
                        &["procedure", "strategy", "sequence", "approach", "procedures", "principle", "scheme"],
                    ) || v.any(t, &["testing", "gatekeeping"])
                }) else {
                    i += 1;
                    continue;
                };
                let procedure = &["procedure", "strategy", "sequence", "approach", "procedures", "principle", "scheme"];
                last = if v.any(test + 1, procedure) { test + 1 } else { test };
            } else if v.any(i, &["lsd"])
                && capitals(i)
                && (0..v.len()).any(|j| v.any(j, &["anova", "post", "means", "comparisons", "difference"]))
            {
                // "separated by LSD".
            } else if v.any(i, &["fdr", "hsd", "lsd"]) && !capitals(i)
                || v.any(i, &["newman", "multiple", "dunn", "duncan", "holm", "hommel", "dunn's", "lsd"])
                    && !(i + 1..i + 7).any(|j| v.any(j, TEST_WORDS) || v.is(j, MULTIPLE))
            {
                i += 1;
                continue;
            } else {
                while last + 1 < v.len()
                    && last < i + 8
                    && (v.sign(last + 1, '-')
                        || v.is(last + 1, MULTIPLE)
                        || v.any(last + 1, TEST_WORDS)
                        || v.any(last + 1, CORRECTION_LINKS)
                        || v.sign(last + 1, '\''))
                {
                    last += 1;
                }
                while last > i && (v.signs(last, &['-', '\'']) || v.any(last, &["for", "and"])) {
                    last -= 1;
                }
                // A test named alone in a bracket after a result is its test, and still the correction.
            }
            self.add(PlanningKind::Multiplicity, first, last, None, None);
            i = last + 1;
        }
    }

    /// "Fisher's least significant difference".
    fn least_significant(&mut self) {
        let v = self.view;
        for i in 0..v.len() {
            if v.any(i, &["least"])
                && v.any(i + 1, &["significant", "significance"])
                && v.any(i + 2, &["difference", "differences"])
                && !self.out.iter().rev().take(4).any(|o| {
                    o.sentence == v.id && o.what == PlanningKind::Multiplicity && o.span.end >= v.span(i, i + 2).start
                })
            {
                self.add(PlanningKind::Multiplicity, i, i + 2, None, None);
            }
        }
    }
}

/// A letter that marks figures: `a`, `b`; `p` itself is none.
fn is_mark_letter(v: &SentenceView, i: usize) -> bool {
    let w = v.word(i);
    w.len() == 1 && w.as_bytes()[0].is_ascii_alphabetic() && !w.eq_ignore_ascii_case("p")
        || v.number(i).is_some() && v.style(i) == Style::Superscript
}

/// `<` and one of the limits that legends use: a mark with another figure tells the p of its own cells.
fn customary(x: &PExpression) -> bool {
    const LIMITS: [f64; 9] = [0.1, 0.05, 0.025, 0.02, 0.01, 0.005, 0.002, 0.001, 0.0001];
    matches!(x.relation, Relation::Less | Relation::AtMost) && x.value.is_some_and(|v| LIMITS.contains(&v.value()))
}

/// A mark opens a legend at the start of the sentence or after a stop.
fn opens(v: &SentenceView, mark: usize) -> bool {
    let mut i = mark;
    while i > 0 && v.signs(i - 1, MARKS) {
        i -= 1;
    }
    i == 0
        || v.signs(i - 1, &[',', ';', '.', ':', ')', '(', '['])
        || v.spaced(i) && !v.spaced(i + 1) && v.number(i - 1).is_none()
}

/// One of the limits that levels of significance are set at.
fn limit(x: Printed) -> bool {
    const LIMITS: [f64; 9] = [0.1, 0.05, 0.025, 0.02, 0.01, 0.005, 0.0125, 0.001, 0.0001];
    LIMITS.iter().any(|l| (l - x.value()).abs() < 1e-9)
}

fn plausible_power(x: Printed, percent: bool) -> bool {
    if percent { (50.0..100.0).contains(&x.value()) } else { x.places > 0 && (0.5..1.0).contains(&x.value()) }
}

/// 1 − β with the digits that β is printed with.
fn complement(beta: Printed) -> Option<Printed> {
    let places = i32::from(beta.places) - i32::from(beta.exponent);
    let places = u8::try_from(places).ok().filter(|&p| p <= 6)?;
    let one = 10u64.pow(u32::from(places));
    (beta.digits < one).then_some(Printed { negative: false, digits: one - beta.digits, places, exponent: 0 })
}

#[cfg(test)]
mod tests;
