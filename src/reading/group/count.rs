//! Counts and percentages: `45/101 (44.6%)`, `45 of 101 (44.6%)`, `12 patients (26.7%)`, `44.6% (45/101)`,
//! `Sixteen (76%) of the 21`, `Of the 786 students, 22 (3%)`, `26.9%`.

use super::super::lexicon::{self, Classes};
use super::super::sentence::SentenceView;
use super::super::token::Style;
use super::super::{Figure, Inference};
use super::{Draft, Setting, empty, printed, share};
use crate::printed::Printed;

/// A count or percentage summary starting at token `i`.
pub(super) fn read(view: &SentenceView, i: usize, setting: &Setting, taken: &[bool]) -> Option<Draft> {
    fraction(view, i)
        .or_else(|| count_and_percent(view, i, taken))
        .or_else(|| percent_first(view, i, setting, taken))
        .or_else(|| count_of_told(view, i))
}

/// A count in digits or words: `45`, `Sixteen`, `One hundred and forty nine`; gives the token after it.
pub(super) fn count_at(view: &SentenceView, i: usize) -> Option<(u64, usize)> {
    let token = view.get(i)?;
    if token.style != Style::Plain {
        return None;
    }
    if let Some(p) = token.number() {
        // A sign, a decimal neighbour or a label (`Table 2`, `day 7`) makes it no count.
        let glued =
            i > 0 && !view.spaced(i) && (view.signs(i - 1, &['-', '.', '/', '·', '×']) || view.get(i - 1)?.is_word());
        let glued = glued && !(view.sign(i - 1, '-') && view.spaced(i - 1));
        return p.count().filter(|_| !glued && !after_label(view, i)).map(|c| (c, i + 1));
    }
    // "under-five children"
    let inner = i > 1 && view.sign(i - 1, '-') && !view.spaced(i) && view.tokens[i - 2].is_word();
    if !token.is(Classes::NUMBER_WORD) || inner && !view.is(i - 2, Classes::NUMBER_WORD) {
        return None;
    }
    let (mut total, mut part, mut at, mut any) = (0u64, 0u64, i, false);
    // No number is spelled in more words.
    while at < i + 24 {
        if let Some(v) =
            view.get(at).filter(|t| t.is(Classes::NUMBER_WORD)).and_then(|_| lexicon::number_word(view.word(at)))
        {
            if v == 100 {
                part = part.max(1).saturating_mul(100);
            } else {
                part = part.saturating_add(v);
            }
            any = true;
            at += 1;
        } else if any
            && (view.sign(at, '-') || (view.eq(at, "and") && part >= 100))
            && view.is(at + 1, Classes::NUMBER_WORD)
        {
            at += 1;
        } else if any && view.eq(at, "thousand") {
            total = part.saturating_mul(1000);
            part = 0;
            at += 1;
        } else {
            break;
        }
    }
    any.then_some((total.saturating_add(part), at))
}

/// "Table 2", "day 7", "type 2": the number is part of a name.
fn after_label(view: &SentenceView, i: usize) -> bool {
    i > 0 && view.is(i - 1, Classes::LABEL) && !view.any(i - 1, &["no", "number"])
}

pub(super) fn whole(view: &SentenceView, value: u64, first: usize, last: usize) -> Figure {
    printed(view, Printed::whole(value), first, last)
}

/// A percentage with its sign at `at`; gives the token after the sign.
pub(super) fn percent_at(view: &SentenceView, at: usize) -> Option<(Printed, usize)> {
    let p = view.number(at)?;
    let next = if view.sign(at + 1, '%') { at + 2 } else { percent_word(view, at + 1)? };
    Some((p, next))
}

/// "percent", "per cent"; gives the token after it.
fn percent_word(view: &SentenceView, at: usize) -> Option<usize> {
    if view.any(at, &["percent"]) {
        return Some(at + 1);
    }
    (view.eq(at, "per") && view.eq(at + 1, "cent")).then_some(at + 2)
}

/// "Thirty-four percent"; gives the token after it.
fn percent_in_words(view: &SentenceView, i: usize) -> Option<(Printed, usize)> {
    if !view.is(i, Classes::NUMBER_WORD) {
        return None;
    }
    let (value, next) = count_at(view, i)?;
    let after = percent_word(view, next)?;
    (value <= 100).then(|| (Printed::whole(value), after))
}

/// A percentage in brackets at or a few plain words after `at`: `(44.6%)`, `; 44.6%`; gives its last token.
fn percent_in_brackets(view: &SentenceView, at: usize, words: usize) -> Option<(Printed, usize)> {
    let mut open = at;
    while open < at + words {
        // "31 were still flying after 9 weeks (52%)": a time between the count and its share.
        if open > at
            && view.any(open, &["after", "at", "by", "within", "for", "over"])
            && view.number(open + 1).is_some()
            && view.is(open + 2, Classes::UNIT)
            && view.signs(open + 3, &['(', '['])
        {
            open += 3;
            break;
        }
        let stops = view.is(open, Classes::VERSUS)
            || view.any(open, &["and", "or"])
            || view.eq(open, "to") && view.number(open + 1).is_some()
            || open == at && view.is(open, Classes::UNIT);
        if stops || !view.get(open)?.is_word() {
            break;
        }
        open += 1;
        if view.sign(open, '-') && view.get(open + 1).is_some_and(|t| t.is_word()) {
            open += 1;
        }
    }
    if !view.signs(open, &['(', '[', ',', ';', '=']) || (view.signs(open, &[',', ';', '=']) && open > at) {
        return None;
    }
    let (percent, next) = percent_at(view, open + 1)?;
    if view.signs(open, &[',', ';', '=']) {
        return Some((percent, next - 1));
    }
    // the bracket closes, or goes on after a comma or semicolon
    if view.signs(next, &[')', ']']) {
        Some((percent, next))
    } else if view.signs(next, &[',', ';', ':']) {
        Some((percent, next - 1))
    } else {
        None
    }
}

/// The denominator after "of", "of the", "out of", "/", "among": gives its value, its token and the token after it.
fn denominator(view: &SentenceView, at: usize) -> Option<(u64, usize, usize)> {
    let mut k = at;
    if view.sign(k, '/') {
        k += 1;
    } else if view.eq(k, "out") && view.eq(k + 1, "of") {
        k += 2;
    } else if view.eq(k, "of") {
        k += 1;
    } else {
        return None;
    }
    let by_word = !view.sign(at, '/');
    if by_word {
        while view.any(k, &["the", "a", "total", "of", "all", "these", "those", "our", "its", "their"]) {
            k += 1;
        }
    }
    let (total, next) = if by_word { count_at(view, k)? } else { (view.number(k)?.count()?, k + 1) };
    // `of 20 mg`, `of 0.5`
    (!view.sign(next, '%') && !view.is(next, Classes::UNIT)).then_some((total, k, next))
}

/// `45/101 (44.6%)`, `45 of 101 patients (44.6%)`, `18 of 64`.
fn fraction(view: &SentenceView, i: usize) -> Option<Draft> {
    let (events, next) = count_at(view, i)?;
    // `12 patients of 45`, `12 women (…) of` is left to counts.
    let words = (next..next + 3)
        .take_while(|&k| view.get(k).is_some_and(|t| t.is_word()) && !view.eq(k, "of") && !view.eq(k, "out"))
        .count();
    let by_slash = view.sign(next, '/');
    if !by_slash && view.sign(next + words, '/') {
        return None;
    }
    if words > 0 && !by_slash && !(next..next + words).any(|k| view.is(k, Classes::GROUP)) {
        return None;
    }
    let at = if by_slash { next } else { next + words };
    let (total, k, end) = denominator(view, at)?;
    // "May 4 of 2021"
    if i > 0 && view.is(i - 1, Classes::MONTH) {
        return None;
    }
    let plausible = total > 1 && events <= total && !(by_slash && view.sign(end, '/'));
    if !plausible {
        // 30/2 (males/females) and dates are no fractions; `50 of 45` would be a slip only with a percent beside it.
        let (percent, last) = percent_in_brackets(view, end, 0)?;
        if events <= total || !by_slash || total <= 1 {
            return None;
        }
        let mut group = empty(view, i, last);
        (group.events, group.total, group.percent) =
            (Some(whole(view, events, i, next - 1)), Some(whole(view, total, k, end - 1)), Some(percent));
        group.n = group.total;
        group.one_expression = true;
        return Some(Draft { first: i, last, group });
    }
    let allowed = if by_slash { 8 } else { 6 };
    let found = percent_in_brackets(view, end, 0).or_else(|| percent_in_brackets(view, end, allowed));
    let (percent, last) = match found {
        Some((p, last)) => (Some(p), last),
        None => (None, end - 1),
    };
    if percent.is_none() {
        // Without a percentage a slash may be a unit, a date or a score; "of" may be anything.
        let bracket = i > 0 && view.signs(i - 1, &['(', '[', ',']) && view.signs(end, &[')', ']', ',', ';']);
        // "9 of 16 trained keepers": an adjective or two may stand before the members.
        let members = (end..end + 3)
            .take_while(|&k| view.get(k).is_some_and(|t| t.is_word()) && !view.is(k, Classes::AND))
            .any(|k| view.is(k, Classes::GROUP) && !view.any(k, &["group", "groups", "arm", "arms"]));
        let told = if by_slash {
            bracket || members || beside_fraction(view, i, end)
        } else {
            // "9 of the 12 still flew": an adverb may stand before the verb.
            let verb = verb(view, end) || view.get(end).is_some_and(|t| t.is_word()) && verb(view, end + 1);
            let beside = total >= 5 && of_beside(view, i, end);
            let whole = view.eq(at, "of") && view.eq(at + 1, "the") && total >= 8 && view.number(k).is_some();
            beside
                || whole && !view.is(end, Classes::AND)
                || members
                || words > 0
                || view.eq(at, "out")
                || view.signs(end, &[')', ',', '.'])
                || verb && total >= 8
        };
        if !told {
            return None;
        }
        if by_slash && total < 8 {
            return None;
        }
        if view.any(at, &["out"]) || view.any(at, &["of"]) {
            let scale = view.any(
                end,
                &[
                    "points",
                    "items",
                    "days",
                    "weeks",
                    "months",
                    "years",
                    "hours",
                    "mg",
                    "ml",
                    "times",
                    "groups",
                    "arms",
                    "domains",
                    "scales",
                    "subscales",
                    "measures",
                    "questions",
                    "outcomes",
                    "tests",
                    "sessions",
                    "visits",
                    "conditions",
                    "studies",
                    "trials",
                    "interventions",
                    "treatments",
                    "components",
                    "criteria",
                    "following",
                ],
            ) || view.any(end, PLACES);
            if scale || view.any(end + 1, &["group", "groups", "arm", "arms", "conditions"]) {
                return None;
            }
        }
    }
    let mut group = empty(view, i, last);
    group.events = Some(whole(view, events, i, next - 1));
    group.total = Some(whole(view, total, k, end - 1));
    group.n = group.total;
    group.percent = percent;
    group.one_expression = true;
    Some(Draft { first: i, last, group })
}

/// As far as a total told before may stand from its count.
const WIDE: usize = 60;

/// Where a study took place.
const PLACES: &[&str] = &[
    "site",
    "sites",
    "centres",
    "centers",
    "hospitals",
    "clinics",
    "countries",
    "practices",
    "schools",
    "villages",
    "trials",
    "studies",
];

/// A verb that tells what became of the members of a group.
fn verb(view: &SentenceView, k: usize) -> bool {
    view.is(k, Classes::COPULA) && !view.eq(k, "of")
        || view.any(
            k,
            &[
                "had",
                "has",
                "have",
                "did",
                "achieved",
                "experienced",
                "reported",
                "showed",
                "completed",
                "received",
                "responded",
                "died",
                "developed",
                "required",
                "needed",
                "withdrew",
                "discontinued",
                "failed",
                "reached",
                "remained",
                "improved",
                "used",
                "survived",
                "underwent",
                "attended",
                "returned",
                "refused",
                "agreed",
                "dropped",
                "met",
                "relapsed",
                "recovered",
                "tested",
                "became",
            ],
        )
}

/// "two of eleven and three of forty": another such fraction right behind or before.
fn of_beside(view: &SentenceView, first: usize, end: usize) -> bool {
    let joins = |k: usize| view.is(k, Classes::AND) || view.is(k, Classes::VERSUS);
    let behind =
        joins(end) && count_at(view, end + 1).is_some_and(|(_, k)| view.eq(k, "of") && count_at(view, k + 1).is_some());
    let before = first > 3
        && joins(first - 1)
        && (view.number(first - 2).is_some() || view.is(first - 2, Classes::NUMBER_WORD))
        && (first.saturating_sub(7)..first - 2).any(|k| view.eq(k, "of"));
    behind || before
}

/// `27/122 v 44/487`, `30/204 and 21/205`: another fraction right before or behind.
fn beside_fraction(view: &SentenceView, first: usize, end: usize) -> bool {
    let joins = |k: usize| view.is(k, Classes::VERSUS) || view.is(k, Classes::AND);
    let dot = usize::from(view.sign(end + 1, '.'));
    let behind = joins(end) && view.number(end + 1 + dot).is_some() && view.sign(end + 2 + dot, '/');
    let before = first > 1 && {
        let k = if view.sign(first - 1, '.') { first - 2 } else { first - 1 };
        joins(k) && k > 2 && view.number(k - 1).is_some() && view.sign(k - 2, '/')
    };
    behind || before
}

/// `12 (26.7%)`, `12 patients (26.7%)`, `Sixteen (76%) of the 21`, `n = 12 (26.7%)`.
fn count_and_percent(view: &SentenceView, i: usize, taken: &[bool]) -> Option<Draft> {
    let (events, next) = count_at(view, i)?;
    // "Twenty-four percent (24%)"
    if view.is(next, Classes::PERCENT) || view.eq(next, "per") {
        return None;
    }
    let (percent, last) = percent_in_brackets(view, next, 0)
        .or_else(|| percent_in_brackets(view, next, 4))
        .or_else(|| members_and_percent(view, i, next))?;
    // `1.2 (26%)` and a percent after a comma are taken only where a count can be meant.
    let in_bracket =
        i > 0 && view.signs(i - 1, &['(', '[']) && view.signs(last + 1, &[')', ']']) && view.sign(next, ';');
    if view.signs(next, &[',', ';', '=']) && !(i > 0 && view.sign(i - 1, '=')) && !in_bracket {
        return None;
    }
    if taken[next..=last].iter().any(|&t| t) || percent.value() > 100.0 {
        return None;
    }
    let mut group = empty(view, i, last);
    group.events = Some(whole(view, events, i, next - 1));
    group.percent = Some(percent);
    let mut end = last;
    if let Some((total, k, after)) = denominator(view, last + 1).filter(|&(t, ..)| t >= events) {
        group.total = Some(whole(view, total, k, after - 1));
        group.one_expression = true;
        end = after - 1;
    } else if let Some((total, span)) = of_the(view, i).filter(|&(t, _)| t >= events) {
        group.total = Some(Figure::inferred(Printed::whole(total), Inference::SameSentence, span));
    }
    group.n = group.total;
    group.span = view.span(i, end);
    Some(Draft { first: i, last: end, group })
}

/// `(33 patients, 2.4%)`: members between the count and its percentage, in a bracket of their own.
fn members_and_percent(view: &SentenceView, i: usize, next: usize) -> Option<(Printed, usize)> {
    let opens = |k: usize| view.signs(k, &['(', '[']);
    if i == 0 || !(opens(i - 1) || i > 1 && opens(i - 2) && view.any(i - 1, &["for", "in"])) {
        return None;
    }
    let comma = (next..next + 3).find(|&k| view.sign(k, ','))?;
    let (percent, after) = percent_at(view, comma + 1)?;
    let whole = view.is(comma - 1, Classes::GROUP) && view.signs(after, &[')', ']', ';', ',']);
    whole.then_some((percent, after - 1))
}

/// "Of the 45 hives that were fed, 12 swarmed": a count whose total the sentence has told before, without percentage.
fn count_of_told(view: &SentenceView, i: usize) -> Option<Draft> {
    let opens = i > 1 && (view.sign(i - 1, ',') || view.sign(i - 2, ',') && view.any(i - 1, &["and", "only"]));
    if !opens {
        return None;
    }
    let (events, next) = count_at(view, i)?;
    // A verb right behind the count, or behind the members or "of them".
    let members = next + usize::from(view.is(next, Classes::GROUP));
    let of_them =
        members + if view.eq(members, "of") && view.any(members + 1, &["them", "these", "whom"]) { 2 } else { 0 };
    let acts =
        verb(view, of_them) || view.get(of_them).is_some_and(|t| t.is_word()) && view.word(of_them).ends_with("ed");
    let divided =
        (of_them..of_them + 3).any(|k| view.any(k, &["assigned", "allocated", "randomised", "randomized", "randomly"]));
    if !acts || divided || view.any(of_them, &["of"]) {
        return None;
    }
    let (total, span) = of_the(view, i).filter(|&(total, _)| events <= total && total >= 5)?;
    // Nor do lists of those who left make groups. A window: a sentence of counts must not take the square of its length.
    if super::arm::tells_of_leaving_within(view, i.saturating_sub(WIDE), (i + WIDE).min(view.len())) {
        return None;
    }
    // Places are no participants.
    let of = view.token_at(span.end);
    if (of..of + 3).any(|k| view.any(k, PLACES)) {
        return None;
    }
    let mut group = empty(view, i, next - 1);
    group.events = Some(whole(view, events, i, next - 1));
    group.total = Some(Figure::inferred(Printed::whole(total), Inference::SameSentence, span));
    group.n = group.total;
    Some(Draft { first: i, last: next - 1, group })
}

/// "Of the 786 treated students, …" opening the sentence or clause before token `i`.
fn of_the(view: &SentenceView, i: usize) -> Option<(u64, crate::text::Span)> {
    let mut k = i;
    while k > i.saturating_sub(2 * WIDE) {
        k -= 1;
        let out = view.eq(k, "of")
            && view.eq(k.wrapping_sub(1), "out")
            && (k == 1 || view.signs(k - 2, &['.', ';', '(', ',']));
        let opens = out
            || view.any(k, &["of", "among"])
                && (k == 0 || view.signs(k - 1, &['.', ';', '(']) || (view.sign(k - 1, ',') && k < i));
        if !opens {
            continue;
        }
        let mut at = k + 1;
        while view.any(at, &["the", "these", "those", "all", "a", "total", "of", "our"]) {
            at += 1;
        }
        let (total, next) = count_at(view, at)?;
        let members = (next..i).take(8).any(|m| view.is(m, Classes::GROUP) || view.sign(m, ','));
        return (members && next <= i && !view.sign(next, '%')).then(|| (total, view.span(at, next - 1)));
    }
    None
}

/// `44.6% (45/101)`, `44.6% (n = 45)`, `44.6% (45 of 101)`, and percentages alone.
fn percent_first(view: &SentenceView, i: usize, setting: &Setting, taken: &[bool]) -> Option<Draft> {
    if view.style(i) != Style::Plain {
        return None;
    }
    let (percent, next) = percent_at(view, i).or_else(|| percent_in_words(view, i))?;
    // `60% of the sample (100/163)`
    let words =
        (next..next + 5).take_while(|&k| view.get(k).is_some_and(|t| t.is_word()) && !view.is(k, Classes::AND)).count();
    let open = if view.signs(next, &['(', '[']) { next } else { next + words };
    if view.signs(open, &['(', '[']) && !taken[open] {
        let mut at = open + 1;
        // `n/n = 12/80`
        if view.is(at, Classes::N) && view.sign(at + 1, '/') && view.is(at + 2, Classes::N) {
            at += 2;
        }
        if view.is(at, Classes::N) && view.sign(at + 1, '=') {
            at += 2;
        }
        if let Some((events, after)) = count_at(view, at) {
            let base = Some(whole(view, events, at, after - 1));
            if let Some((total, k, end)) = denominator(view, after).filter(|&(t, ..)| events <= t && t > 1)
                && let Some(close) = (end..(end + 4).min(view.len())).find(|&c| view.signs(c, &[')', ']', ',', ';']))
            {
                let last = if view.signs(close, &[')', ']']) { close } else { close - 1 };
                let mut group = empty(view, i, last);
                (group.events, group.percent) = (base, Some(percent));
                group.total = Some(whole(view, total, k, end - 1));
                group.n = group.total;
                group.one_expression = true;
                return Some(Draft { first: i, last, group });
            }
            if at > open + 1 && open == next && view.signs(after, &[')', ']', ',', ';']) {
                // 44.6% (n = 45): events as a rule; the size of a group when the percentage is of it is rarer.
                let last = if view.signs(after, &[')', ']']) { after } else { after - 1 };
                let mut group = empty(view, i, last);
                (group.events, group.percent) = (base, Some(percent));
                return Some(Draft { first: i, last, group });
            }
        }
    }
    // `9%, 3/33`, `9%, 3 out of 33`
    if view.signs(next, &[',', ';'])
        && let Some((events, after)) = count_at(view, next + 1)
        && let Some((total, k, end)) = denominator(view, after).filter(|&(t, ..)| events <= t && t > 1)
        && fits_share(events, total, percent)
    {
        let mut group = empty(view, i, end - 1);
        (group.events, group.percent) = (Some(whole(view, events, next + 1, after - 1)), Some(percent));
        group.total = Some(whole(view, total, k, end - 1));
        group.n = group.total;
        group.one_expression = true;
        return Some(Draft { first: i, last: end - 1, group });
    }
    share::read(view, i, percent, next, setting, taken)
}

/// Whether a percentage is near enough to a fraction beside it that both tell of one count.
fn fits_share(events: u64, total: u64, percent: Printed) -> bool {
    (100.0 * events as f64 / total as f64 - percent.value()).abs() <= 10.0
}

/// "none in the control group" beside another count or percentage: a count of nought.
pub(super) fn none_beside(view: &SentenceView, taken: &[bool], drafts: &mut Vec<Draft>) {
    if !drafts.iter().any(|d| d.group.events.is_some() || d.group.percent.is_some()) {
        return;
    }
    for (i, taken) in taken.iter().enumerate() {
        if *taken || !view.eq(i, "none") || !view.any(i + 1, &["in", "of"]) {
            continue;
        }
        let Some(last) = (i + 2..i + 8).find(|&k| view.any(k, &["group", "arm", "controls", "placebo"])) else {
            continue;
        };
        if (i + 2..last).any(|k| !view.get(k).is_some_and(|t| t.is_word()) || view.any(k, &["two", "three", "either"]))
        {
            continue;
        }
        let mut group = empty(view, i, last);
        group.events = Some(whole(view, 0, i, i));
        drafts.push(Draft { first: i, last: i, group });
    }
}

/// Marks percentages that are said to be about so much or that no count over a total gives (survival, actuarial rates),
/// and takes back a total from "Of the 26 patients, …" where several counts follow: they may be of parts of it.
pub(super) fn soften(view: &SentenceView, drafts: &mut [Draft]) {
    if drafts.is_empty() {
        return;
    }
    let estimated = (0..view.len()).any(|k| {
        view.any(k, &["actuarial", "kaplan", "survival", "cumulative", "weighted", "standardised", "standardized"])
    });
    let counts = drafts.iter().filter(|d| d.group.events.is_some() && d.group.percent.is_some()).count();
    // Another count of the sentence that fits a total confirms it for all.
    let confirmed: Vec<Printed> = drafts
        .iter()
        .filter(|d| d.group.percent.is_some() && fits(&d.group))
        .filter_map(|d| d.group.total.map(|t| t.printed))
        .collect();
    for d in drafts {
        let about = d.first > 0
            && (view.any(
                d.first - 1,
                &[
                    "over",
                    "about",
                    "approximately",
                    "nearly",
                    "almost",
                    "around",
                    "roughly",
                    "least",
                    "most",
                    "than",
                    "below",
                    "above",
                    "under",
                ],
            ) || view.signs(d.first - 1, &['~', '<', '>', '≥', '≤']));
        d.group.approximate = (about || estimated) && d.group.percent.is_some();
        let Some(total) = d.group.total else { continue };
        if counts > 1
            && total.is_inferred(Inference::SameSentence)
            && !fits(&d.group)
            && !confirmed.contains(&total.printed)
        {
            (d.group.total, d.group.n) = (None, None);
        }
    }
}

/// Whether the percentage is the count over the total, as rounded.
fn fits(group: &super::Group) -> bool {
    match (group.events, group.total, group.percent) {
        (Some(e), Some(t), Some(p)) => {
            p.rounded().widened(1e-12).contains(100.0 * e.printed.value() / t.printed.value())
        }
        _ => true,
    }
}
