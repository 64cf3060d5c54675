//! Confidence intervals in running text: `95% CI 0.62 to 0.91`, `(95 % CI, −4.1; −1.0)`,
//! `OR (95% CI) was 1.2 (0.8–1.9)`, `HR 0.75 (0.60–0.93)`.

use super::lexicon::Classes;
use super::sentence::SentenceView;
use super::{Figure, IntervalReading};
use crate::printed::Printed;
use crate::text::Span;

/// Two limits with the tokens they take.
#[derive(Clone, Copy, Debug)]
struct Pair {
    lower: Printed,
    upper: Printed,
    percent: bool,
    reversed: bool,
    first: usize,
    last: usize,
}

/// Appends the intervals of a sentence; marks the tokens they take in `taken`. Gives the level that the sentence names.
pub fn read(view: &SentenceView, taken: &mut [bool], out: &mut Vec<IntervalReading>) -> Option<Figure> {
    let mut declared: Option<(Option<Figure>, bool, usize)> = None;
    let mut i = 0;
    while i < view.len() {
        let Some(anchor) = anchor(view, i) else {
            // `OR (95% CI)` was named: every `1.2 (0.8–1.9)` after it is one.
            if let Some((level, credible, named_at)) = declared
                && let Some((estimate, pair)) = bracketed_after_number(view, i)
                && !spread_named(view, i, named_at)
            {
                emit(view, pair, pair.first, level, credible, estimate, taken, out);
                i = pair.last + 1;
            } else if let Some((level, credible, _)) = declared
                && let Some((estimate, pair)) = pair_in_bracket(view, i)
            {
                emit(view, pair, pair.first, level, credible, estimate, taken, out);
                i = pair.last + 1;
            } else {
                i += 1;
            }
            continue;
        };
        let Anchor { level, credible, last, first } = anchor;
        let at = skip_words(view, last + 1);
        if let Some(pair) = pair(view, at) {
            let estimate = estimate_before(view, first).or_else(|| change_before(view, first, &pair));
            emit(view, pair, first, level, credible, estimate, taken, out);
            i = pair.last + 1;
            // A list of intervals under one name.
            while view.signs(i, &[',', ';']) || view.is(i, Classes::AND) || view.is(i, Classes::VERSUS) {
                let mut next = i + 1;
                if view.is(next, Classes::AND) || view.is(next, Classes::VERSUS) {
                    next += 1;
                }
                let Some(more) = self::pair(view, next) else { break };
                let closes = view.get(more.last + 1).is_none_or(|t| !t.is_sign('%') && !t.is_sign('±'));
                if !closes || more.percent != pair.percent {
                    break;
                }
                emit(view, more, more.first, level, credible, None, taken, out);
                i = more.last + 1;
            }
            declared = Some((level, credible, last));
            continue;
        }
        declared = Some((level, credible, last));
        // `95% CI: 1.2 (0.8–1.9)`: the limits follow a figure
        i = last + 1;
    }
    declared.and_then(|(level, ..)| level)
}

#[allow(clippy::too_many_arguments)]
fn emit(
    view: &SentenceView,
    pair: Pair,
    first: usize,
    level: Option<Figure>,
    credible: bool,
    estimate: Option<(Printed, Span)>,
    taken: &mut [bool],
    out: &mut Vec<IntervalReading>,
) {
    // A bracket that opens within the quote closes within it.
    let opened = (first..pair.first).filter(|&k| view.signs(k, &['(', '['])).count();
    let closed = (first..pair.first).filter(|&k| view.signs(k, &[')', ']'])).count();
    let last = pair.last + usize::from(opened > closed && view.signs(pair.last + 1, &[')', ']']));
    taken[first..=last].fill(true);
    out.push(IntervalReading {
        span: view.span(first, last),
        sentence: view.id,
        level,
        lower: pair.lower,
        upper: pair.upper,
        percent: pair.percent,
        credible,
        reversed: pair.reversed,
        estimate,
    });
}

struct Anchor {
    level: Option<Figure>,
    credible: bool,
    first: usize,
    last: usize,
}

/// The name of an interval with its level: `95% CI`, `95 % confidence interval (CI)`, `CI95%`, `95%-CI`.
fn anchor(view: &SentenceView, i: usize) -> Option<Anchor> {
    let token = view.get(i)?;
    let mut first = i;
    let mut last = i;
    let credible;
    if token.is(Classes::CI) {
        // `Cl` is chloride as well: take it only after a percentage.
        let word = view.word(i);
        let after_percent =
            i > 0 && (view.sign(i - 1, '%') || (view.sign(i - 1, '-') && i > 1 && view.sign(i - 2, '%')));
        if (matches!(word, "Cl" | "CL" | "cl" | "ci" | "Ci")) && !after_percent {
            return None;
        }
        credible = word.to_ascii_lowercase().starts_with("cr");
    } else if token.is(Classes::CONFIDENCE)
        && view.any(i + 1, &["interval", "intervals", "limits", "limit", "bounds", "bound", "region"])
    {
        credible = view.word(i).to_ascii_lowercase().starts_with("cred");
        last = i + 1;
    } else if matches!(view.word(i), "CI95" | "CI90" | "CI99") {
        credible = false;
    } else {
        return None;
    }
    let mut level = None;
    // before: 95% CI, 95%-CI, 95 percent CI, 95 CI
    let mut k = i;
    if k > 0 && view.sign(k - 1, '-') {
        k -= 1;
    }
    let percent = k > 0 && (view.sign(k - 1, '%') || view.is(k - 1, Classes::PERCENT));
    if percent {
        k -= 1;
    }
    if k > 0
        && let Some(p) = view.number(k - 1)
        && is_level(p)
        && (percent || view.word(k - 1).len() == 2)
    {
        level = Some(Figure::at(p, view.span(k - 1, k - 1)));
        first = k - 1;
    }
    // glued: CI95
    if level.is_none()
        && view.word(i).len() == 4
        && view.word(i).is_char_boundary(2)
        && let Some(p) = Printed::parse(&view.word(i)[2..])
        && is_level(p)
    {
        level = Some(Figure::at(p, view.span(i, i)));
    }
    // confidence interval CI
    if last > i && view.is(last + 1, Classes::CI) {
        last += 1;
    }
    // (CI), [CI]
    if view.signs(last + 1, &['(', '[']) && view.is(last + 2, Classes::CI) && view.signs(last + 3, &[')', ']']) {
        last += 3;
    }
    // after: CI 95%, CI (95%), CI~95%~, CI95%
    if level.is_none() {
        let open = usize::from(view.signs(last + 1, &['(', '[']));
        let at = last + 1 + open;
        if let Some(p) = view.number(at)
            && is_level(p)
            && (view.sign(at + 1, '%') || view.style(at) != super::Style::Plain)
        {
            level = Some(Figure::at(p, view.span(at, at)));
            last = at + usize::from(view.sign(at + 1, '%'));
            if open == 1 && view.signs(last + 1, &[')', ']']) {
                last += 1;
            }
        }
    }
    Some(Anchor { level, credible, first, last })
}

fn is_level(p: Printed) -> bool {
    let v = p.value();
    (50.0..100.0).contains(&v)
}

/// Words and signs between the name and its limits.
fn skip_words(view: &SentenceView, mut at: usize) -> usize {
    let start = at;
    while at < start + 9 {
        let Some(token) = view.get(at) else { break };
        if token.is_word() {
            let skipped = token.is(Classes::COPULA)
                || view.any(
                    at,
                    &[
                        "from",
                        "between",
                        "ranged",
                        "ranging",
                        "range",
                        "for",
                        "the",
                        "difference",
                        "ratio",
                        "this",
                        "interval",
                        "intervals",
                        "estimate",
                        "mean",
                        "in",
                        "effect",
                        "respective",
                        "corresponding",
                        "lower",
                        "upper",
                        "limits",
                        "limit",
                        "hr",
                        "or",
                        "rr",
                    ],
                );
            if !skipped {
                break;
            }
        } else {
            let links = view.signs(at, &[':', '=', ',', '(', '[', '{', '~', ';']);
            let opens_else = view.signs(at, &['(', '[']) && self::pair(view, at + 1).is_none() && at > start + 1;
            if !links || opens_else {
                break;
            }
        }
        at += 1;
    }
    at
}

/// Two limits: `0.62 to 0.91`, `−4.1; −1.0`, `0.62–0.91`, `−0.58–0.87`, `-0.7–5%`.
fn pair(view: &SentenceView, at: usize) -> Option<Pair> {
    let (a, mut next) = view.signed(at)?;
    let mut percent = false;
    let unit = |next: &mut usize, percent: &mut bool| {
        if view.sign(*next, '%') {
            *percent = true;
            *next += 1;
        } else if view.get(*next).is_some_and(|t| t.is_word())
            && !view.any(*next, &["to", "and", "through"])
            && (view.any(*next + 1, &["to", "and"]) || view.signs(*next + 1, &['-', ',', ';']))
            && view.signed(*next + 2).is_some()
        {
            // one unit word: `1.2 mm to 3.4 mm`
            *next += 1;
        }
    };
    unit(&mut next, &mut percent);
    let (b, mut end) = view.signed(after_separator(view, next)?)?;
    if view.sign(end, '%') {
        percent = true;
        end += 1;
    }
    let (lower, upper, reversed) = if a.value() <= b.value() { (a, b, false) } else { (b, a, true) };
    Some(Pair { lower, upper, percent, reversed, first: at, last: end - 1 })
}

/// The token after what separates two limits.
fn after_separator(view: &SentenceView, at: usize) -> Option<usize> {
    if view.signs(at, &['-', ',', ';', ':', '/', '÷', '~']) || view.any(at, &["to", "through", "and"]) {
        // `, to`, `; to`
        let next = if view.signs(at, &[',', ';']) && view.any(at + 1, &["to", "and"]) { at + 2 } else { at + 1 };
        return Some(next);
    }
    // `..` and `…`
    view.sign(at, '…').then_some(at + 1)
}

/// `1.2 (0.8–1.9)`: a number with a bracketed pair around it, starting at the number.
fn bracketed_after_number(view: &SentenceView, i: usize) -> Option<(Option<(Printed, Span)>, Pair)> {
    pair_after_number(view, i).filter(|(estimate, pair)| {
        estimate.is_some_and(|(e, _)| pair.lower.value() <= e.value() && e.value() <= pair.upper.value())
    })
}

/// `(1.2; 1.1–1.3)`: a figure and its limits in a bracket of their own, after an interval whose name showed the form.
fn pair_in_bracket(view: &SentenceView, i: usize) -> Option<(Option<(Printed, Span)>, Pair)> {
    if !(i > 0 && view.signs(i - 1, &['(', '['])) {
        return None;
    }
    let (estimate, next) = view.signed(i)?;
    let next = next + usize::from(view.sign(next, '%'));
    if !view.signs(next, &[';', ',']) {
        return None;
    }
    let pair = pair(view, next + 1)?;
    let inside = pair.lower.value() <= estimate.value() && estimate.value() <= pair.upper.value();
    let closes = view.signs(pair.last + 1, &[')', ']']);
    (inside && closes && pair.upper.places > 0).then(|| (Some((estimate, view.span(i, next - 1))), pair))
}

/// `6.2 mmHg (−9.9, −2.5`: a figure, and two limits in the bracket behind it.
fn pair_after_number(view: &SentenceView, i: usize) -> Option<(Option<(Printed, Span)>, Pair)> {
    let (estimate, mut next) = view.signed(i)?;
    let end = next - 1;
    if view.sign(next, '%') || view.is(next, Classes::UNIT) {
        next += 1;
    }
    if !view.signs(next, &['(', '[', '{']) {
        return None;
    }
    let pair = pair(view, next + 1)?;
    if !view.signs(pair.last + 1, &[')', ']', '}', ';', ',']) {
        return None;
    }
    Some((Some((estimate, view.span(i, end))), pair))
}

/// The figure right before the bracket or comma that opens `(95% CI …)`.
fn estimate_before(view: &SentenceView, first: usize) -> Option<(Printed, Span)> {
    let mut k = first.checked_sub(1)?;
    while view.signs(k, &['(', '[', ',', ';', ':', '%']) || view.any(k, &["with", "a", "and"]) {
        k = k.checked_sub(1)?;
    }
    // one or two unit words between the figure and the bracket
    for _ in 0..2 {
        if view.number(k).is_none() && view.get(k).is_some_and(|t| t.is_word()) && k > 0 {
            k -= 1;
            if view.signs(k, &['-', '%']) && k > 0 {
                k -= 1;
            }
        }
    }
    let p = view.number(k)?;
    let glued = k > 0 && view.sign(k - 1, '-') && !view.spaced(k) && (k == 1 || view.number(k - 2).is_none());
    if glued {
        return Some((p.negated(), view.span(k - 1, k)));
    }
    Some((p, view.span(k, k)))
}

/// "a 12.0 mm reduction on the scale (95% CI 3.1 to 20.9)": the figure of a change whose noun stands between it and its
/// interval. It must be the only figure there, and lie about midway between the limits.
fn change_before(view: &SentenceView, first: usize, pair: &Pair) -> Option<(Printed, Span)> {
    let bracket = first.checked_sub(1).filter(|&k| view.signs(k, &['(', '[']))?;
    let k = (bracket.saturating_sub(16)..bracket)
        .rev()
        .take_while(|&k| !view.signs(k, &['(', ')', ';', ':']))
        .find(|&k| view.number(k).is_some())?;
    let noun = (k + 1..(k + 4).min(bracket)).any(|j| names_a_change(view, j));
    let value = view.number(k)?;
    let alone = k == 0 || !view.signs(k - 1, &['-', '±', '<', '>', '=']);
    let (low, high) = (pair.lower.value().min(pair.upper.value()), pair.lower.value().max(pair.upper.value()));
    (noun && alone && midway(value.value(), low, high)).then(|| (value, view.span(k, k)))
}

/// Nouns of a difference or change that has a size.
pub(super) fn names_a_change(view: &SentenceView, k: usize) -> bool {
    const NOUNS: &[&str] = &[
        "reduction",
        "increase",
        "decrease",
        "decline",
        "improvement",
        "difference",
        "change",
        "gain",
        "drop",
        "rise",
        "fall",
        "benefit",
        "loss",
        "reductions",
        "increases",
        "decreases",
        "improvements",
        "differences",
    ];
    view.any(k, NOUNS)
}

/// Whether a figure can be the middle of its limits, on the plain or the logarithmic scale, give or take a quarter.
fn midway(value: f64, low: f64, high: f64) -> bool {
    let near = |v: f64, l: f64, h: f64| (v - (l + h) / 2.0).abs() <= 0.125 * (h - l);
    near(value, low, high) || low > 0.0 && value > 0.0 && near(value.ln(), low.ln(), high.ln())
}

/// Medians, quartiles and ranges named within the last few tokens (after token `from`): the pair is a spread.
fn spread_named(view: &SentenceView, i: usize, from: usize) -> bool {
    (i.saturating_sub(8).max(from)..i)
        .any(|k| view.is(k, Classes::IQR) || view.is(k, Classes::RANGE) || view.is(k, Classes::MEDIAN))
}

/// Bracketed pairs after a named estimate, where the text never says what they are: `HR 0.75 (0.60–0.93)`.
/// `named` tells whether an estimate's name stands right before the figure at token `i`, `changed` whether that figure
/// is told as a change: `fell by 6.2 mmHg (−9.9, −2.5, p = 0.001)`.
pub fn read_unnamed(
    view: &SentenceView,
    named: impl Fn(usize) -> bool,
    changed: impl Fn(usize) -> bool,
    level: Option<Figure>,
    taken: &mut [bool],
    out: &mut Vec<IntervalReading>,
) {
    // "5.2 (4.1 to 6.8) at six and 4.9 (3.8 to 6.4) at eight hours": what the first pair is, the next are as well.
    let mut list = false;
    for i in 0..view.len() {
        if taken[i] || (view.number(i).is_some() && i > 0 && view.sign(i - 1, '-') && !view.spaced(i) && !taken[i - 1])
        {
            continue;
        }
        let Some((estimate, pair)) = pair_after_number(view, i) else { continue };
        let decimals = pair.lower.places > 0 && pair.upper.places > 0;
        if taken[pair.first] || !decimals || spread_named(view, i, 0) {
            continue;
        }
        let (value, low, high) = match estimate {
            Some((value, _)) => (value.value(), pair.lower.value(), pair.upper.value()),
            None => continue,
        };
        let inside = low <= value && value <= high;
        // A pair about midway, on one side of 0 and with its p, can hardly be anything but limits.
        let tested = view.signs(pair.last + 1, &[',', ';']) && view.is(pair.last + 2, Classes::P);
        let change = || tested && (midway(value, low, high) || midway(-value, low, high)) && changed(i);
        if !(inside && (list || named(i)) || change()) {
            continue;
        }
        list |= inside;
        emit(view, pair, pair.first, level, false, estimate, taken, out);
    }
}
