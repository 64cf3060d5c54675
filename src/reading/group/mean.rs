//! Means and medians with their spreads: `5.2 ± 1.1`, `5.2 (SD 1.1)`, `M = 5.2, SD = 1.1`, `mean (SD) 5.2 (1.1)`,
//! `median 8 [IQR 7–10]`.

use super::super::SpreadKind;
use super::super::lexicon::Classes;
use super::super::sentence::SentenceView;
use super::super::token::{Style, TokenKind};
use super::{Draft, Setting, bare, empty, with_spread};
use crate::printed::Printed;

/// What a paragraph says its figures are, from "mean ± SD", "mean (SD)", "median (IQR)" on.
#[derive(Clone, Copy, Debug, Default)]
pub struct Declared {
    /// What stands after ±.
    pub plus_minus: Option<SpreadKind>,
    /// What stands in brackets after a mean.
    pub bracket: Option<SpreadKind>,
    /// What stands in brackets after a median.
    pub median: Option<SpreadKind>,
    /// The sign ± stands somewhere in the paragraph: a plus between two figures may be one that lost its bar.
    pub signs: bool,
}

impl Declared {
    /// Notes the declarations of one sentence; they hold until others follow.
    pub fn note(&mut self, view: &SentenceView) {
        for i in 0..view.len() {
            self.signs |= view.sign(i, '±');
            let mean = view.is(i, Classes::MEAN) && !view.sign(i + 1, '=');
            let median = view.is(i, Classes::MEDIAN);
            if !mean && !median {
                continue;
            }
            // mean ± SD, mean (±SD), means (standard deviations), median [interquartile range]
            let mut at = i + 1;
            if view.any(at, &["value", "values"]) {
                at += 1;
            }
            let mut sign = None;
            while let Some(TokenKind::Sign(c @ ('±' | '(' | '[' | ',' | '+' | '-'))) = view.get(at).map(|t| t.kind) {
                if c == '±' {
                    sign = Some('±');
                } else if matches!(c, '(' | '[') && sign.is_none() {
                    sign = Some('(');
                }
                at += 1;
                if at > i + 5 {
                    break;
                }
            }
            if view.any(at, &["and", "with", "plus"]) && sign.is_none() {
                // "means and standard deviations"
                sign = Some('±');
                at += 1;
            }
            let Some((kind, _)) = spread_word(view, at) else { continue };
            if median {
                self.median = Some(kind);
            } else if sign == Some('±') {
                self.plus_minus = Some(kind);
                if view.signs(at.saturating_sub(2), &['(', '[']) {
                    self.bracket = Some(kind);
                }
            } else if sign == Some('(') {
                self.bracket = Some(kind);
            }
        }
    }
}

/// A name of a spread at token `at`; gives the token after it.
pub(super) fn spread_word(view: &SentenceView, mut at: usize) -> Option<(SpreadKind, usize)> {
    if view.eq(at, "1") {
        at += 1;
    }
    if view.eq(at, "standard") {
        if view.any(at + 1, &["deviation", "deviations"]) {
            return Some((SpreadKind::Sd, at + 2));
        }
        if view.any(at + 1, &["error", "errors"]) {
            let of_mean = view.phrase(at + 2, &["of", "the", "mean"]);
            let of = view.phrase(at + 2, &["of", "mean"]) || view.phrase(at + 2, &["of", "means"]);
            return Some((
                SpreadKind::Se,
                at + if of_mean {
                    5
                } else if of {
                    4
                } else {
                    2
                },
            ));
        }
        return None;
    }
    if view.eq(at, "s") && view.sign(at + 1, '.') {
        let stop = |k: usize| k + usize::from(view.sign(k, '.'));
        if view.eq(at + 2, "d") {
            return Some((SpreadKind::Sd, stop(at + 3)));
        }
        if view.eq(at + 2, "e") {
            let mut k = stop(at + 3);
            if view.eq(k, "m") {
                k = stop(k + 1);
            }
            return Some((SpreadKind::Se, k));
        }
    }
    if view.is(at, Classes::SD) && !view.any(at, &["deviation", "deviations"]) {
        return Some((SpreadKind::Sd, at + 1));
    }
    if view.is(at, Classes::SE) && !view.any(at, &["error"]) {
        return Some((SpreadKind::Se, at + 1));
    }
    if view.is(at, Classes::IQR) {
        let mut next = at + 1;
        if view.any(at, &["interquartile"]) && view.any(next, &["range", "ranges", "interval"]) {
            next += 1;
            if view.signs(next, &['(', '[']) && view.eq(next + 1, "iqr") && view.signs(next + 2, &[')', ']']) {
                next += 3;
            }
        }
        return Some((SpreadKind::Iqr, next));
    }
    if view.eq(at, "inter") && view.sign(at + 1, '-') && view.eq(at + 2, "quartile") {
        return Some((SpreadKind::Iqr, at + 3 + usize::from(view.any(at + 3, &["range", "ranges"]))));
    }
    if view.any(at, &["range", "ranges", "ranging", "ranged"]) {
        return Some((SpreadKind::Range, at + 1));
    }
    if (view.any(at, &["min", "minimum"])) && (view.signs(at + 1, &['-', ',', '/']) || view.eq(at + 1, "and")) {
        return Some((SpreadKind::Range, at + 3));
    }
    None
}

/// A mean or median summary starting at token `i`; `before` is the summary read last in the sentence.
pub(super) fn read(
    view: &SentenceView,
    i: usize,
    setting: &Setting,
    taken: &[bool],
    before: Option<&Draft>,
) -> Option<Draft> {
    m_equals(view, i).or_else(|| {
        let (centre, next) = centre(view, i)?;
        plus_minus(view, i, centre, next, setting)
            .or_else(|| bracketed(view, i, centre, next, setting, taken, before))
            .or_else(|| after_comma(view, i, centre, next))
            .or_else(|| bare::read(view, i, centre, next, taken, before))
    })
}

/// A signed number that may open a summary: a sign only where it stands for itself.
fn centre(view: &SentenceView, i: usize) -> Option<(Printed, usize)> {
    let token = view.get(i)?;
    if token.style != Style::Plain {
        return None;
    }
    match token.kind {
        TokenKind::Number(_) if i > 0 && view.sign(i - 1, '×') => None,
        TokenKind::Number(p) => Some((p, i + 1)),
        TokenKind::Sign('-' | '+') if !view.spaced(i + 1) || view.spaced(i) => {
            // `3-5 ± 1`: a dash between figures is no sign.
            let follows_figure =
                i > 0 && !view.spaced(i) && (view.number(i - 1).is_some() || view.get(i - 1)?.is_word());
            if follows_figure { None } else { view.signed(i) }
        }
        _ => None,
    }
}

/// The token after a unit (`mmol/L`, `kg`, `%`, `mL/m^2^`, `beats per minute`), at most six tokens on.
fn after_unit(view: &SentenceView, at: usize, stop: impl Fn(usize) -> bool) -> Option<usize> {
    (at..(at + 8).min(view.len() + 1)).find(|&k| stop(k)).filter(|&k| {
        (at..k).all(|j| {
            view.get(j).is_some_and(|t| match t.kind {
                TokenKind::Word => {
                    !view.any(j, &["and", "or", "to", "versus", "vs", "in", "for", "with", "was", "were"])
                }
                TokenKind::Number(_) => t.style != Style::Plain || view.any(j, &["2", "3", "100", "10"]),
                TokenKind::Sign(c) => matches!(c, '/' | '%' | '·' | '-' | '.' | '°' | '^' | 'µ' | '×'),
            })
        })
    })
}

/// `5.2 ± 1.1`, `5.2 mg ± 1.1 mg`, `45.2 ± SD 3.1`, `± 12.1 (SD)`.
fn plus_minus(view: &SentenceView, i: usize, centre: Printed, next: usize, setting: &Setting) -> Option<Draft> {
    let sign = if view.sign(next, '±') || lost_bar(view, centre, next, setting) {
        next
    } else {
        let at = after_unit(view, next, |k| view.sign(k, '±'))?;
        if at > next + 3 + power(view, next) {
            return None;
        }
        at
    };
    let mut at = sign + 1;
    let mut kind = None;
    if let Some((k, after)) = spread_word(view, at) {
        kind = Some(k);
        at = after;
    }
    let spread = view.number(at)?;
    let mut last = at;
    // visit windows: `3 (±2 weeks)` never come here; tolerances `100 ± 5 °C` of devices do, and cannot be told apart.
    if view.sign(last + 1, '%') {
        last += 1;
    }
    // 5.2 ± 1.1 (SD)
    if kind.is_none() {
        let open = after_unit(view, last + 1, |k| view.signs(k, &['(', '[']) || k > last + 3);
        if let Some(o) = open.filter(|&o| view.signs(o, &['(', '[']))
            && let Some((k, after)) = spread_word(view, o + 1)
            && view.signs(after, &[')', ']'])
        {
            kind = Some(k);
        } else if let Some((k, after)) = spread_word(view, last + 1)
            && view.number(after).is_none_or(|p| p.places == 0)
            && matches!(k, SpreadKind::Sd | SpreadKind::Se)
        {
            kind = Some(k);
        }
    }
    let kind = kind.or(setting.declared.plus_minus).unwrap_or(SpreadKind::Unstated);
    let mut group = with_spread(empty(view, i, last), kind, &[spread]);
    group.mean = Some(centre);
    Some(Draft { first: i, last, group })
}

/// `7.3 +1.8` where the paragraph prints ± elsewhere and both figures are told alike: the sign lost its bar.
fn lost_bar(view: &SentenceView, centre: Printed, at: usize, setting: &Setting) -> bool {
    setting.declared.signs
        && view.sign(at, '+')
        && view.spaced(at)
        && !view.spaced(at + 1)
        && view.number(at + 1).is_some_and(|s| s.places == centre.places && s.places > 0)
        && !view.signs(at + 2, &['+', '-', '/', '='])
}

/// `5.2 (SD 1.1)`, `5.2 years (±1.1)`, `mean (SD) 5.2 (1.1)`, `median 8 (IQR 7–10)`, `45 (range 20–70)`.
fn bracketed(
    view: &SentenceView,
    i: usize,
    centre: Printed,
    next: usize,
    setting: &Setting,
    taken: &[bool],
    before: Option<&Draft>,
) -> Option<Draft> {
    let open = after_unit(view, next, |k| view.signs(k, &['(', '[', '{']))?;
    if taken.get(open).copied().unwrap_or(false) || open > next + 4 + power(view, next) {
        return None;
    }
    let mut at = open + 1;
    let mut kind = None;
    if view.sign(at, '±') {
        at += 1;
        kind = setting.declared.bracket.or(setting.declared.plus_minus).or(Some(SpreadKind::Unstated));
        if open == next && centre.places == 0 && !near_mean(view, i) && view.get(at + 1).is_some_and(|t| t.is_word()) {
            // a visit window: `at 3 (±2 weeks)`
            return None;
        }
    }
    if let Some((k, after)) = spread_word(view, at) {
        kind = Some(k);
        at = after;
        while view.signs(at, &['=', ':', ',', '±', '~', ')', '(', '['])
            || view.any(at, &["of", "from", "was", "is", "between"])
        {
            at += 1;
        }
    }
    let (a, mut end) = view.signed(at)?;
    // In a list the first summary shows what the next ones are, however far back "median" stands.
    let listed = before.is_some_and(|d| d.group.median.is_some() && d.group.spread.len() == 2);
    let median_near = listed || near(view, i, Classes::MEDIAN);
    // a pair: quartiles or a range
    let pair = pair_after(view, end);
    if let Some((b, after)) = pair {
        let named_median = listed || median_near && !near_mean_later(view, i);
        let declared = kind.or(if named_median { setting.declared.median } else { None });
        let kind = match declared {
            Some(k @ (SpreadKind::Iqr | SpreadKind::Range)) => k,
            Some(_) => return None,
            None if named_median => SpreadKind::Unstated,
            None if carried_median(view, i, centre, (a, b), setting) => SpreadKind::Iqr,
            // "a mean age of 45 years (21–70)"
            None if a.value() < centre.value() && centre.value() < b.value() && bare::name(view, i).is_some() => {
                SpreadKind::Unstated
            }
            None => return None,
        };
        let close = after_unit(view, after, |k| view.signs(k, &[')', ']', '}', ';', ',']))?;
        let last = if view.signs(close, &[')', ']', '}']) { close } else { close - 1 };
        let mut group = with_spread(empty(view, i, last), kind, &[a, b]);
        if named_median || (kind == SpreadKind::Iqr) {
            group.median = Some(centre);
        } else {
            group.mean = Some(centre);
        }
        return Some(Draft { first: i, last, group });
    }
    if view.sign(end, '%') {
        // 12 (26.7%) is a count unless the spread is named
        kind?;
        end += 1;
    }
    let close = after_unit(view, end, |k| view.signs(k, &[')', ']', '}', ';', ',']))?;
    if !view.signs(close, &[')', ']', '}']) && kind.is_none() {
        return None;
    }
    let last = if view.signs(close, &[')', ']', '}']) { close } else { close - 1 };
    let kind = match kind {
        Some(k) => k,
        None => {
            // No name inside the bracket: the sentence must have said that means are told.
            if a.negative || close != end || view.sign(end, ',') {
                return None;
            }
            match (setting.declared.bracket, near_mean(view, i)) {
                (Some(k), _) if centre.places > 0 || a.places > 0 => k,
                (Some(k), true) => k,
                (None, true) if a.places > 0 || centre.places > 0 => SpreadKind::Unstated,
                _ if has_twin(view, i, centre, a, last) => SpreadKind::Unstated,
                _ => return None,
            }
        }
    };
    let mut group = with_spread(empty(view, i, last), kind, &[a]);
    if median_near && kind == SpreadKind::Iqr {
        group.median = Some(centre);
    } else {
        group.mean = Some(centre);
    }
    Some(Draft { first: i, last, group })
}

/// Tokens that a power of ten adds to a unit: `138 × 10^9^/L (range 96–141)`.
fn power(view: &SentenceView, at: usize) -> usize {
    if view.sign(at, '×') && view.eq(at + 1, "10") { 3 } else { 0 }
}

/// `wax 3.9 (3.1) mg, comb 3.3 (1.6) mg`: two figures of one unit with as many places inside their brackets as before
/// them are a centre and its spread, whatever the text calls them.
fn has_twin(view: &SentenceView, i: usize, centre: Printed, spread: Printed, close: usize) -> bool {
    const REACH: usize = 16;
    let unit = close + 1;
    if centre.places == 0 || centre.places != spread.places || !view.is(unit, Classes::UNIT) || !view.sign(i + 1, '(') {
        return false;
    }
    let alike = |k: usize| {
        k != i
            && view.number(k).is_some_and(|c| c.places == centre.places)
            && view.sign(k + 1, '(')
            && view.number(k + 2).is_some_and(|s| s.places == spread.places)
            && view.sign(k + 3, ')')
            && view.eq(k + 4, view.word(unit))
    };
    (i.saturating_sub(REACH)..(i + REACH).min(view.len())).any(alike)
}

/// "On day 2 it was alike: 340 mL (260, 840) v 210 mL (170, 630)" after a sentence of medians with quartiles: two figures
/// of one form, each between two limits that nothing calls an interval.
fn carried_median(
    view: &SentenceView,
    i: usize,
    centre: Printed,
    limits: (Printed, Printed),
    setting: &Setting,
) -> bool {
    let inside = limits.0.value() <= centre.value() && centre.value() <= limits.1.value();
    let plain = |k: usize| {
        let named = view.is(k, Classes::CI.or(Classes::CONFIDENCE).or(Classes::RATIO).or(Classes::MEAN));
        let effect = &["difference", "differences", "reduction", "increase", "decrease", "effect", "change"];
        !named && !view.any(k, effect)
    };
    setting.declared.median == Some(SpreadKind::Iqr)
        && inside
        && limits.0.value() < limits.1.value()
        && (i.saturating_sub(30)..(i + 40).min(view.len())).all(plain)
        && (i.saturating_sub(20)..(i + 20).min(view.len()))
            .any(|k| view.is(k, Classes::VERSUS) || view.is(k, Classes::AND))
}

/// `– 10`, `, 10`, `to 10`, `; 10` after a first figure.
fn pair_after(view: &SentenceView, mut at: usize) -> Option<(Printed, usize)> {
    if view.sign(at, '%') || (view.get(at).is_some_and(|t| t.is_word()) && view.any(at + 1, &["to", "and"])) {
        at += 1;
    }
    if !(view.signs(at, &['-', ',', ';', ':', '/']) || view.any(at, &["to", "and", "through"])) {
        return None;
    }
    view.signed(at + 1)
}

/// `mean 5.2, SD 1.1`, `5.2 years, SD = 1.1`, `12.0 months, IQR 8–16`, `a mean of 5.2 with a range of 3 to 8`.
fn after_comma(view: &SentenceView, i: usize, centre: Printed, next: usize) -> Option<Draft> {
    let joined = |k: usize| view.any(k, &["with", "and"]) && view.any(k + 1, &["a", "an"]);
    let comma = after_unit(view, next, |k| view.signs(k, &[',', ';']) || joined(k))?;
    if comma > next + 3 {
        return None;
    }
    let (kind, mut at) = spread_word(view, comma + 1 + usize::from(joined(comma)))?;
    if !near_mean(view, i) && !near(view, i, Classes::MEDIAN) {
        return None;
    }
    while view.signs(at, &['=', ':', '±', '[', '(']) || view.any(at, &["of", "from"]) {
        at += 1;
    }
    let (a, end) = view.signed(at)?;
    let pair = pair_after(view, end);
    let (spread, last) = match (kind, pair) {
        (SpreadKind::Iqr | SpreadKind::Range, Some((b, after))) => (vec![a, b], after - 1),
        (SpreadKind::Iqr, None) => (vec![a], end - 1),
        (SpreadKind::Range, None) => return None,
        _ => (vec![a], end - 1),
    };
    let mut group = with_spread(empty(view, i, last), kind, &spread);
    if kind == SpreadKind::Iqr || (near(view, i, Classes::MEDIAN) && !near_mean(view, i)) {
        group.median = Some(centre);
    } else {
        group.mean = Some(centre);
    }
    Some(Draft { first: i, last, group })
}

/// `M = 5.2, SD = 1.1`, `(mean = 5.2; SE = 0.3)`, `Mdn = 8`, `mean: 5.2 (SD: 1.1)`.
fn m_equals(view: &SentenceView, i: usize) -> Option<Draft> {
    let median = view.is(i, Classes::MEDIAN);
    if !(view.is(i, Classes::MEAN) || median) || !view.signs(i + 1, &['=', ':']) {
        return None;
    }
    let (centre, next) = view.signed(i + 2)?;
    let mut at =
        after_unit(view, next, |k| view.signs(k, &[',', ';', '(', ')', '[']) || k >= view.len()).unwrap_or(next);
    if view.signs(at, &[',', ';', '(', '[']) || view.eq(at, "and") {
        at += 1;
    }
    let mut group = empty(view, i, next - 1);
    let mut last = next - 1;
    if let Some((kind, after)) = spread_word(view, at) {
        let mut k = after;
        while view.signs(k, &['=', ':', '±']) || view.any(k, &["of"]) {
            k += 1;
        }
        if let Some((a, end)) = view.signed(k) {
            let pair = if matches!(kind, SpreadKind::Iqr | SpreadKind::Range) { pair_after(view, end) } else { None };
            last = pair.map_or(end, |p| p.1) - 1;
            let spread: Vec<Printed> = std::iter::once(a).chain(pair.map(|p| p.0)).collect();
            group = with_spread(empty(view, i, last), kind, &spread);
        }
    }
    // `2.1 to 4.4 (mean: 3.3)`
    let mut first = i;
    if group.spread.is_empty()
        && i > 3
        && view.signs(i - 1, &['(', '['])
        && (view.eq(i - 3, "to") || view.sign(i - 3, '-'))
        && let (Some(a), Some(b)) = (view.number(i - 4), view.number(i - 2))
        && a.value() <= centre.value()
        && centre.value() <= b.value()
    {
        first = i - 4;
        group = with_spread(empty(view, first, last), SpreadKind::Range, &[a, b]);
    }
    if median {
        group.median = Some(centre);
    } else {
        group.mean = Some(centre);
    }
    Some(Draft { first, last, group })
}

/// Whether a word of a class stands within the dozen tokens before, after the last semicolon.
fn near(view: &SentenceView, i: usize, class: Classes) -> bool {
    (i.saturating_sub(14)..i).rev().take_while(|&k| !view.sign(k, ';')).any(|k| view.is(k, class))
}

fn near_mean(view: &SentenceView, i: usize) -> bool {
    near(view, i, Classes::MEAN)
}

/// Whether "mean" stands nearer than "median".
fn near_mean_later(view: &SentenceView, i: usize) -> bool {
    (i.saturating_sub(14)..i)
        .rev()
        .find(|&k| view.is(k, Classes::MEAN) || view.is(k, Classes::MEDIAN))
        .is_some_and(|k| view.is(k, Classes::MEAN))
}
