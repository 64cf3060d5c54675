//! Planning statements: alpha, power, sides, sample size, thresholds, legends, multiplicity.

mod levels;
mod multiplicity;
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
    // Two bytes of a letter that is no Latin one: the only words of two bytes looked for here.
    let greek =
        view.tokens.iter().enumerate().any(|(i, t)| {
            t.is_word() && t.classes == Classes::NONE && view.word(i).len() == 2 && view.any(i, &["α", "β"])
        });
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
        // "at α = 0.05 type I error" names one level twice.
        let twice = matches!(what, PlanningKind::Alpha | PlanningKind::Power)
            && self
                .out
                .iter()
                .rev()
                .take_while(|x| x.sentence == self.view.id)
                .any(|x| x.what == what && x.span.overlaps(span));
        if twice {
            return;
        }
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
            let x = &self.p[n];
            if !self.defines[n] && self.plans_with(n) {
                self.defines[n] = true;
                self.add(PlanningKind::Alpha, x.first, x.last, x.value, None);
                continue;
            }
            if self.defines[n] || !self.is_threshold(n) {
                continue;
            }
            self.defines[n] = true;
            let (first, last) = self.threshold_extent(n);
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

    /// "with p = 0.05 and a power of 80 %, 40 per group": the level that a sample size was planned for.
    fn plans_with(&self, n: usize) -> bool {
        let (v, x) = (self.view, &self.p[n]);
        let level = x.value.is_some_and(limit)
            && matches!(x.relation, Relation::Less | Relation::AtMost | Relation::Equal)
            && (x.first.saturating_sub(4)..x.first).any(|i| v.any(i, PLANS_LEVEL));
        level
            && (0..v.len()).any(|i| v.any(i, SIZES))
            && !(0..v.len())
                .any(|i| v.any(i, DECLARES) && !v.any(i, &["level", "required", "used", "by", "determined"]))
            && (0..v.len()).any(|i| {
                v.is(i, Classes::POWER)
                    && (i.saturating_sub(3)..i + 4).any(|j| v.number(j).is_some_and(|x| x.value() >= 0.5))
            })
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
            let said = (0..first).any(significance) || (before..first).any(|i| v.any(i, &["threshold", "cutoff"]));
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
        // "Significance was conferred at p < 0.05", whatever the verb; "was reached at" reports.
        let conferred = !in_bracket
            && !exact
            && v.any(first - usize::from(first > 0), &["at", "by"])
            && (first.saturating_sub(6)..first).find(|&i| v.any(i, &["significance"])).is_some_and(|i| {
                v.any(i + 1, &["was", "is", "were", "will"]) && !(i + 1..first).any(|j| v.any(j, GOT))
            });
        purpose || conferred || tested || colon || level || condition || as_level || equated || threshold
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
                && n.checked_sub(1).is_none_or(|before| first - 1 > self.p[before].last)
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
            let below = v.signs(j - 1, &['<', '≤'])
                || v.any(j - 1, &["than", "below", "under", "at"])
                || v.any(end, &["or"]) && v.any(end + 1, &["less", "below", "lower", "smaller"]);
            if !below || self.taken(j) || self.p.iter().any(|p| p.first <= j && j <= p.last) {
                continue;
            }
            let behind = (j.saturating_sub(18)..j).find(|&w| v.any(w, DECLARES) && !v.any(w, &["by", "used", "level"]));
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
                let noun = (j.saturating_sub(8)..j)
                    .find(|&i| v.is(i, Classes::P) || v.any(i, &["probability", "values", "value", "level"]));
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
        for i in 0..v.len() {
            // "a bilateral test", "bilateral α": said of limbs and lungs far more often.
            if v.any(i, &["bilateral", "unilateral"]) {
                let test = |j: usize| v.any(j, &["test", "tests", "testing", "hypothesis", "formulation"]);
                if v.any(i + 1, &["α", "alpha"]) || v.any(i + 1, &["type"]) || (i + 1..i + 4).any(test) {
                    let sides = if v.any(i, &["bilateral"]) { Sides::Two } else { Sides::One };
                    self.add(PlanningKind::Sided, i, i, None, Some(sides));
                }
                continue;
            }
            if i == 0 || !v.any(i, &["sided", "tailed", "tail", "side"]) {
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

#[cfg(test)]
mod tests;
