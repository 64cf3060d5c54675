//! Between-group estimates: `HR 0.75`, `mean difference of −1.2`, `OR = 2.1`, `η² = .06`, `NNT 12`.

use super::interval;
use super::sentence::SentenceView;
use super::token::{Style, TokenKind};
use super::{Estimate, IntervalReading, Measure, Scale};
use crate::printed::Printed;

/// A printed name of a measure: tokens `first..=last`.
#[derive(Clone, Copy, Debug)]
struct Name {
    measure: Measure,
    scale: Scale,
    first: usize,
    last: usize,
    adjusted: bool,
}

/// What a paragraph has named so far, for figures that follow without a name.
#[derive(Clone, Copy, Debug, Default)]
pub struct Named {
    /// The level of its intervals.
    pub level: Option<super::Figure>,
    /// The last ratio or difference that it named.
    measure: Option<(Measure, Scale)>,
}

/// Appends the estimates of a sentence, and the intervals that only an estimate's name reveals.
///
/// `first_interval` is the first of this sentence's intervals in `intervals`.
pub fn read(
    view: &SentenceView,
    named: &mut Named,
    taken: &mut [bool],
    intervals: &mut Vec<IntervalReading>,
    first_interval: usize,
    out: &mut Vec<Estimate>,
) {
    let names = names(view);
    let start = out.len();
    // Where the paragraph has named its intervals, a verb before the figure is enough.
    let level = named.level;
    let told = |i: usize| level.is_some() && i > 0 && view.any(i - 1, &["was", "were", "is", "of"]);
    let known = |i: usize| told(i) || names.iter().any(|n| leads_to(view, n, i));
    interval::read_unnamed(view, known, |i| told_as_change(view, i, i), level, taken, intervals);
    intervals[first_interval..].sort_by_key(|x| x.span.start);
    for interval in &mut intervals[first_interval..] {
        let Some((mut value, span)) = interval.estimate else { continue };
        let at = view.token_at(span.start);
        let name = names.iter().rev().find(|n| n.last < at && at - n.last <= 24 && !another_between(&names, n, at));
        let last = view.token_at(span.end).saturating_sub(1);
        let near = name.is_some_and(|n| leads_to(view, n, at));
        let within =
            |value: Printed| interval.lower.value() <= value.value() && value.value() <= interval.upper.value();
        // `63% (95% CI 7 to 17)`: right behind its sign the interval is that of the percentage, whatever it holds.
        let adjoins = view.sign(last + 1, '%')
            && view.signs(last + 2, &['(', '['])
            && view.token_at(interval.span.start).saturating_sub(last) <= 3
            && interval.level.is_some();
        // "fell by 6.2 (95% CI −9.9 to −2.5)", "a lowering of 30% (95% CI −39% to −20%)": the sign stands in the words.
        if !within(value) && within(value.negated()) && (adjoins || told_as_change(view, at, last)) {
            value = value.negated();
        }
        let inside = within(value);
        let time = view.is(last + 1, super::lexicon::Classes::UNIT)
            && at > 0
            && view.any(at - 1, &["at", "after", "per", "in", "by", "to"]);
        if (!inside && !near && !adjoins) || time || taken[at] {
            // Some other figure that happens to stand there.
            interval.estimate = None;
            continue;
        }
        let (measure, scale, adjusted) = match name {
            Some(n) if near || at - n.last <= 16 => (n.measure, n.scale, n.adjusted),
            _ if told_as_change(view, at, last) => {
                // A change in percent may be one of percentage points or a ratio.
                let percent = view.sign(last + 1, '%') || interval.percent;
                let scale = if percent { Scale::Unknown } else { Scale::Difference };
                (if percent { Measure::Other } else { Measure::MeanDifference }, scale, false)
            }
            _ if single(view, at, last) => (Measure::Other, Scale::Single, false),
            _ => {
                let (measure, scale) = named.measure.filter(|_| inside).unwrap_or((Measure::Other, Scale::Unknown));
                (measure, scale, false)
            }
        };
        // A share of one group is a summary as well.
        let share = scale == Scale::Single && view.sign(last + 1, '%');
        if !share {
            taken[at..=last].fill(true);
        }
        out.push(Estimate {
            span: name.filter(|_| near).map_or(span, |n| view.span(n.first, n.first).to(span)),
            sentence: view.id,
            measure,
            scale,
            value,
            se: None,
            percent: view.sign(last + 1, '%') || interval.percent,
            adjusted,
        });
    }
    for n in &names {
        let Some(at) = value_after(view, n) else { continue };
        let Some((value, next)) = view.signed(at) else { continue };
        if taken[at..next].iter().any(|&t| t) || view.sign(next, '±') {
            continue;
        }
        taken[at..next].fill(true);
        let points = view.any(next, &["percentage", "percent"]);
        // A difference in percent or in percentage points is one of risks.
        let risk = n.measure == Measure::MeanDifference && (points || view.sign(next, '%'));
        out.push(Estimate {
            span: view.span(n.first, next - 1),
            sentence: view.id,
            measure: if risk { Measure::RiskDifference } else { n.measure },
            scale: n.scale,
            value,
            se: standard_error(view, next),
            percent: points || view.sign(next, '%'),
            adjusted: n.adjusted,
        });
    }
    signed_with_error(view, taken, out);
    out[start..].sort_by_key(|e| e.span.start);
    if let Some(n) = names.iter().rev().find(|n| n.scale == Scale::Ratio) {
        named.measure = Some((n.measure, n.scale));
    }
}

/// `(−3.1 cm, SE = 1.5; p = 0.04)`: a figure with its sign, its standard error and its p in one bracket. The sign says
/// that it is a difference or a change, which both are tested by their standard error. Where a neighbour has no p of its
/// own, the p compares the two.
fn signed_with_error(view: &SentenceView, taken: &mut [bool], out: &mut Vec<Estimate>) {
    let mut found = Vec::new();
    for i in 1..view.len() {
        if !view.is(i, super::lexicon::Classes::SE) || !view.any(i, &["se", "sem"]) || view.style(i) != Style::Plain {
            continue;
        }
        // Back from the error to the figure: over a comma or bracket and a unit.
        let mut last = i - 1;
        while last > 0
            && i - last < 5
            && (view.signs(last, &[',', ';', '(', '%']) || view.get(last).is_some_and(|t| t.is_word()))
        {
            last -= 1;
        }
        let signed = last > 0 && view.number(last).is_some() && view.signs(last - 1, &['-', '+']);
        if !signed || taken[last] || !view.signs(last.wrapping_sub(2), &['(', '[', ',', ';']) {
            continue;
        }
        let (Some((value, _)), Some(se)) = (view.signed(last - 1), standard_error(view, i)) else { continue };
        let own_p = (i + 2..(i + 6).min(view.len()))
            .any(|k| view.is(k, super::lexicon::Classes::P) && !view.signs(k - 1, &[')']));
        found.push((own_p, last, value, se));
    }
    if found.iter().any(|f| !f.0) {
        return;
    }
    for (_, last, value, se) in found {
        taken[last - 1..=last].fill(true);
        out.push(Estimate {
            span: view.span(last - 1, last),
            sentence: view.id,
            measure: Measure::MeanDifference,
            scale: Scale::Difference,
            value,
            se: Some(se),
            percent: view.sign(last + 1, '%'),
            adjusted: false,
        });
    }
}

/// Whether the words around a figure tell it as a change: "fell by 6.2 mmHg", "a 12.0 mm reduction".
fn told_as_change(view: &SentenceView, at: usize, last: usize) -> bool {
    const VERBS: &[&str] = &[
        "decreased",
        "increased",
        "reduced",
        "improved",
        "fell",
        "rose",
        "dropped",
        "declined",
        "decrease",
        "increase",
        "lowered",
        "raised",
        "gained",
        "lost",
        "grew",
        "decreases",
        "increases",
        "higher",
        "lower",
        "longer",
        "shorter",
        "greater",
        "more",
        "less",
        "fewer",
    ];
    let noun = (last + 1..last + 4).any(|k| interval::names_a_change(view, k));
    let mut k = at;
    while k > 0
        && k + 4 > at
        && (view.any(k - 1, &["by", "of", "a", "an", "about", "approximately", "mean"]) || view.sign(k - 1, '-'))
    {
        k -= 1;
    }
    let verb = k > 0
        && (view.any(k - 1, VERBS)
            && (k < at || view.any(k - 1, &["decreased", "increased", "fell", "rose", "dropped", "declined"]))
            || interval::names_a_change(view, k - 1) && k < at);
    noun || verb
}

/// A mean, a proportion or a rate of one group: nothing to test its interval against.
fn single(view: &SentenceView, at: usize, last: usize) -> bool {
    view.sign(last + 1, '%')
        || (at.saturating_sub(10)..at).any(|k| {
            view.is(k, super::lexicon::Classes::MEAN)
                || view.is(k, super::lexicon::Classes::MEDIAN)
                || view.any(
                    k,
                    &["rate", "prevalence", "incidence", "proportion", "sensitivity", "specificity", "survival"],
                )
        })
}

/// `(SE 0.3)`, `, SE = 0.3` right behind an estimate.
fn standard_error(view: &SentenceView, mut at: usize) -> Option<Printed> {
    while view.signs(at, &['(', ',', ';', '[']) {
        at += 1;
    }
    if !view.any(at, &["se", "sem"]) {
        return None;
    }
    at += 1;
    while view.signs(at, &['=', ':']) {
        at += 1;
    }
    view.number(at)
}

/// Whether another measure's name stands between a name and a figure.
fn another_between(names: &[Name], name: &Name, at: usize) -> bool {
    names.iter().any(|m| m.first > name.last && m.first < at)
}

/// Whether the name's figure is the one at token `at`: only linking words and signs, or a list's earlier members, between.
fn leads_to(view: &SentenceView, name: &Name, at: usize) -> bool {
    at > name.last && value_after(view, name) == Some(at)
}

/// The token of the figure that a name introduces.
fn value_after(view: &SentenceView, name: &Name) -> Option<usize> {
    let mut k = name.last + 1;
    let stop = (k + 22).min(view.len());
    let mut verb = false;
    let mut words = 0;
    while k < stop {
        let token = view.get(k)?;
        match token.kind {
            TokenKind::Number(_) => {
                if token.style != Style::Plain || is_level(view, k) {
                    k += 1;
                    continue;
                }
                if k + 1 < view.len() && view.get(k + 1).is_some_and(|t| t.is_word()) && words > 0 && !verb {
                    // "difference in 12 month survival"
                    k += 1;
                    words += 1;
                    continue;
                }
                return (words <= 2 || verb).then_some(k);
            }
            // "LX-200": a hyphen within a name is no sign
            TokenKind::Sign('-') if k > 0 && !view.spaced(k) && view.get(k - 1).is_some_and(|t| t.is_word()) => {
                k += 1;
                words += 1;
            }
            TokenKind::Sign('-' | '+') if view.number(k + 1).is_some() => {
                return (words <= 2 || verb || view.sign(k - 1, '=')).then_some(k);
            }
            TokenKind::Sign('=' | ':') => verb = true,
            TokenKind::Sign('(' | ')' | '[' | ']' | ',' | ';' | '%' | '-' | '~' | '/' | 'Δ') => {}
            TokenKind::Word => {
                use super::lexicon::Classes;
                if view.is(k, Classes::MEAN.or(Classes::MEDIAN).or(Classes::N).or(Classes::SD).or(Classes::P)) {
                    return None;
                }
                if view.any(k, &["was", "is", "of", "were", "by", "being", "equal"]) {
                    // The figure must follow its verb at once.
                    let next =
                        k + 1 + usize::from(view.any(k + 1, &["only", "about", "approximately", "estimated", "also"]));
                    let follows = view.signed(next).is_some();
                    verb |= follows;
                    if follows && view.number(next).is_none() {
                        return Some(next);
                    }
                    if !follows {
                        words += 1;
                    }
                } else if view.is(k, super::lexicon::Classes::CI)
                    || view.is(k, super::lexicon::Classes::CONFIDENCE)
                    || ratio_abbreviation(view.word(k)).is_some()
                    || view.any(k, &["interval", "intervals", "with", "or", "ci", "md", "smd", "arr"])
                {
                } else {
                    words += 1;
                }
            }
            _ => return None,
        }
        if words > 12 {
            return None;
        }
        k += 1;
    }
    None
}

/// `95` of `95% CI`.
fn is_level(view: &SentenceView, k: usize) -> bool {
    view.number(k).is_some_and(|p| (80.0..100.0).contains(&p.value()))
        && (view.sign(k + 1, '%') || view.is(k + 1, super::lexicon::Classes::CI))
        && (view.is(k + 2, super::lexicon::Classes::CI)
            || view.is(k + 2, super::lexicon::Classes::CONFIDENCE)
            || view.is(k + 1, super::lexicon::Classes::CI)
            || (view.sign(k + 2, '-') && view.is(k + 3, super::lexicon::Classes::CI)))
}

fn names(view: &SentenceView) -> Vec<Name> {
    let mut found: Vec<Name> = Vec::new();
    let mut i = 0;
    while i < view.len() {
        match name(view, i) {
            Some(n) => {
                i = n.last + 1;
                // `odds ratio (OR)`: one name
                if view.signs(i, &['(', '[']) && name(view, i + 1).is_some_and(|m| m.measure == n.measure) {
                    i += 2;
                }
                found.push(Name { last: i - 1, ..n });
            }
            None => i += 1,
        }
    }
    found
}

/// `HR`, `ORs`, `aOR`, `AdjOR`, `ORadj`, `cHR`: the measure, and whether it is marked as adjusted. Capitals are kept:
/// `or` is a conjunction.
fn ratio_abbreviation(word: &str) -> Option<(Measure, bool)> {
    let word = word.strip_suffix('s').unwrap_or(word);
    let measure = |base: &str| match base {
        "HR" => Some(Measure::HazardRatio),
        "OR" => Some(Measure::OddsRatio),
        "RR" => Some(Measure::RiskRatio),
        "IRR" => Some(Measure::RateRatio),
        _ => None,
    };
    if let Some(m) = measure(word) {
        return Some((m, false));
    }
    let marked = ["Adj", "adj", "ADJ", "a"].iter().find_map(|mark| word.strip_prefix(mark));
    // A subdistribution or cause-specific hazard ratio comes from a model, with or without covariates.
    let modelled = ["sd", "s", "cs"].iter().find_map(|mark| word.strip_prefix(mark)).filter(|&base| base == "HR");
    let capital = word.strip_prefix('A').filter(|&base| base == "OR" || base == "HR");
    let behind = ["adj", "a"].iter().find_map(|mark| word.strip_suffix(mark));
    if let Some(m) = [marked, modelled, capital, behind].into_iter().flatten().find_map(measure) {
        return Some((m, true));
    }
    ["c", "u"].iter().find_map(|mark| word.strip_prefix(mark)).and_then(measure).map(|m| (m, false))
}

fn name(view: &SentenceView, i: usize) -> Option<Name> {
    use Measure::*;
    let token = view.get(i)?;
    if !token.is_word() || token.style != Style::Plain {
        return None;
    }
    let word = view.word(i);
    // Greek letters are not in the lexicon.
    if !token.is(super::lexicon::Classes::MEASURE) && word.as_bytes().first().is_some_and(u8::is_ascii) {
        return None;
    }
    let before = |words: &[&str]| i > 0 && view.any(i - 1, words);
    let adjusted_before = (i.saturating_sub(4)..i).any(|k| view.any(k, &["adjusted", "multivariable", "multivariate"]));
    let hit = |measure: Measure, scale: Scale, last: usize, adjusted: bool| {
        Some(Name { measure, scale, first: i, last, adjusted: adjusted || adjusted_before })
    };
    if let Some((measure, adjusted)) = ratio_abbreviation(word) {
        return hit(measure, Scale::Ratio, i, adjusted);
    }
    // abbreviations, case kept: `or` is a conjunction
    match word {
        "ARRs" => return hit(RiskRatio, Scale::Ratio, i, true),
        "aRRR" | "PR" if view.signs(i + 1, &['=', ':', '(']) => return hit(RiskRatio, Scale::Ratio, i, true),
        "MD" | "WMD" if view.signed(i + 1).is_some() || view.signs(i + 1, &['=', ':', ',']) => {
            return hit(MeanDifference, Scale::Difference, i, false);
        }
        "SMD" => return hit(StandardizedDifference, Scale::Difference, i, false),
        "RD" | "ARD" | "ARR" if view.signed(i + 1).is_some() || view.signs(i + 1, &['=', ':', ',', '(']) => {
            return hit(RiskDifference, Scale::Difference, i, false);
        }
        "NNT" | "NNH" | "NNTB" | "NNTH" => return hit(NumberNeededToTreat, Scale::Reciprocal, i, false),
        "RRR" | "VE" => {
            // A reduction is printed in percent; without a sign it may be a ratio of ratios.
            let percent =
                (i..(i + 12).min(view.len())).any(|k| view.sign(k, '%') && !is_level(view, k.saturating_sub(1)));
            return hit(Efficacy, if percent { Scale::Efficacy } else { Scale::Unknown }, i, false);
        }
        "β" | "B" | "b" | "beta" if view.signs(i + 1, &['=', ':']) => {
            return hit(RegressionCoefficient, Scale::Difference, i, false);
        }
        "d" | "g" if view.sign(i + 1, '=') && view.spaced(i) => {
            return hit(StandardizedDifference, Scale::Difference, i, false);
        }
        "Δ" => return hit(MeanDifference, Scale::Difference, i, false),
        "AUC" | "AUROC" => return hit(Other, Scale::Single, i, false),
        _ => {}
    }
    if word.starts_with('η') || matches!(word, "eta" | "Eta") {
        let mut last = i;
        while view.style(last + 1) != Style::Plain || view.any(last + 1, &["squared", "p"]) {
            last += 1;
            if last > i + 3 {
                break;
            }
        }
        return hit(EtaSquared, Scale::Single, last, false);
    }
    let two = |a: &str, b: &str| view.eq(i, a) && view.eq(i + 1, b);
    if two("hazard", "ratio") || two("hazard", "ratios") || two("hazards", "ratio") {
        return hit(HazardRatio, Scale::Ratio, i + 1, false);
    }
    if two("odds", "ratio") || two("odds", "ratios") {
        return hit(OddsRatio, Scale::Ratio, i + 1, false);
    }
    if two("risk", "ratio")
        || two("relative", "risk")
        || two("risk", "ratios")
        || two("relative", "risks")
        || two("rate", "ratios") && before(&["risk"])
    {
        if view.any(i + 2, &["reduction", "reductions"]) {
            return hit(Efficacy, Scale::Efficacy, i + 2, false);
        }
        return hit(RiskRatio, Scale::Ratio, i + 1, false);
    }
    if two("prevalence", "ratio") {
        return hit(RiskRatio, Scale::Ratio, i + 1, false);
    }
    if two("rate", "ratio") || two("rate", "ratios") {
        return hit(RateRatio, Scale::Ratio, i + 1, false);
    }
    if two("risk", "difference")
        || (view.eq(i, "absolute")
            && view.eq(i + 1, "risk")
            && view.any(i + 2, &["difference", "reduction", "increase"]))
    {
        return hit(RiskDifference, Scale::Difference, if view.eq(i, "risk") { i + 1 } else { i + 2 }, false);
    }
    if view.phrase(i, &["number", "needed", "to", "treat"]) || view.phrase(i, &["number", "needed", "to", "harm"]) {
        return hit(NumberNeededToTreat, Scale::Reciprocal, i + 3, false);
    }
    if view.any(i, &["efficacy"]) && before(&["vaccine", "protective"]) {
        return hit(Efficacy, Scale::Efficacy, i, false);
    }
    if view.any(i, &["cohen", "hedges"]) {
        return None;
    }
    if two("effect", "size") || two("effect", "sizes") {
        return hit(StandardizedDifference, Scale::Unknown, i + 1, false);
    }
    if (view.any(i, &["coefficient", "slope"]) && !before(&["correlation", "of", "variation"])) && !view.eq(i + 1, "of")
    {
        return hit(RegressionCoefficient, Scale::Difference, i, false);
    }
    if view.any(i, &["difference", "differences"]) {
        if before(&["standardized", "standardised"])
            || (before(&["mean"]) && i > 1 && view.any(i - 2, &["standardized", "standardised"]))
        {
            return hit(StandardizedDifference, Scale::Difference, i, false);
        }
        let percent = before(&["percent", "percentage", "relative"]);
        return hit(if percent { PercentDifference } else { MeanDifference }, Scale::Difference, i, false);
    }
    None
}
