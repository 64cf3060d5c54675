//! Totals and sizes that stand elsewhere in the paragraph.
//!
//! The nearest total is not a denominator: a size is taken over from another place only where the printed
//! percentage itself picks it out, or where the paragraph tells of one group alone.

use super::super::lexicon::Classes;
use super::super::sentence::SentenceView;
use super::super::{Figure, Group, Inference, within};
use super::count::count_at;
use crate::printed::{Printed, is_share};
use crate::text::Span;
use std::collections::BTreeMap;

/// More named groups than a paragraph has.
const MOST_NAMED: usize = 40;

/// A number of participants mentioned in running text.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Mention {
    pub size: u64,
    pub span: Span,
    pub sentence: u32,
    pub role: Role,
}

/// What a number of participants is to all of them.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Role {
    Whole,
    /// One side of a division (`23 men and 11 women`, `15 men (40.5%)`), or those who left.
    Part,
    /// Those who completed the study: later figures may be theirs or of all.
    Stayed,
    /// Those included in the analysis, of which later figures are told.
    Analysed,
}

/// Appends the sizes a sentence mentions: `22 males`, `(n = 24)`, `of the 786 students`, `45/101`.
pub fn mentions(view: &SentenceView, out: &mut Vec<Mention>) {
    if planned(view) {
        return;
    }
    let first_here = out.len();
    // The count before the last one, with its span.
    let mut before: Option<(u64, Span)> = None;
    let mut i = 0;
    while i < view.len() {
        let denominator = i > 1 && view.sign(i - 1, '/') && !view.spaced(i) && view.number(i - 2).is_some();
        let found =
            if denominator { view.number(i).and_then(Printed::count).map(|c| (c, i + 1)) } else { count_at(view, i) };
        let Some((size, next)) = found else {
            i += 1;
            continue;
        };
        let after_n = i > 1 && view.sign(i - 1, '=') && view.is(i - 2, Classes::N);
        // `91 (94.8%) were included`
        let percent = view.sign(next, '(') && view.number(next + 1).is_some() && view.sign(next + 2, '%');
        let verb = if percent && view.sign(next + 3, ')') { next + 4 } else { next };
        let included = view.any(verb, &["were", "was", "completed"])
            && view.any(
                verb + 1,
                &[
                    "included",
                    "analysed",
                    "analyzed",
                    "randomised",
                    "randomized",
                    "enrolled",
                    "eligible",
                    "assigned",
                    "recruited",
                    "the",
                ],
            );
        let span = view.span(i, next - 1);
        let named = members(view, next);
        if size > 4 && (after_n || denominator || named || included) {
            out.push(Mention { size, span, sentence: view.id, role: role(view, i, next, verb) });
            // "Fifty ringers (28 men and 22 women)": the sum of two sides stands right before them.
            if let ([.., a, b], Some(whole)) = (&out[first_here..], before)
                && a.role == Role::Part
                && b.role == Role::Part
                && a.size.checked_add(b.size) == Some(whole.0)
                && !out[first_here..].iter().any(|m| m.span == whole.1)
            {
                let at = out.len() - 2;
                out.insert(at, Mention { size: whole.0, span: whole.1, sentence: view.id, role: Role::Whole });
            }
        } else if after_n {
            // Too few for a group, but enough to add up.
            out.push(Mention { size, span, sentence: view.id, role: Role::Part });
        }
        if !out[first_here..].last().is_some_and(|m| m.span == span && m.role == Role::Part) {
            before = Some((size, span));
        }
        i = next;
    }
}

/// Whether the words right behind a count name participants: "34 healthy (non-smoking) volunteers".
fn members(view: &SentenceView, next: usize) -> bool {
    let mut k = next;
    while k < next + 7 {
        // An abbreviation or its words.
        if k > next && view.sign(k, '(') {
            let Some(close) = (k + 1..k + 6).find(|&j| !view.get(j).is_some_and(|t| t.is_word())) else { return false };
            if !view.sign(close, ')') {
                return false;
            }
            k = close + 1;
            continue;
        }
        let word = view.get(k).is_some_and(|t| t.is_word());
        let stops = view.is(k, Classes::UNIT)
            || view.is(k, Classes::COPULA)
            || view.is(k, Classes::AND)
            || view.any(k, &["in", "for", "to", "with", "from", "by", "per", "than", "on", "at", "after", "before"]);
        if !(word || view.signs(k, &['-', ','])) || stops {
            return false;
        }
        if view.is(k, Classes::GROUP) && !view.any(k, &["groups", "group", "arms"]) {
            return true;
        }
        k += 1;
    }
    false
}

/// Whether a sentence plans a sample: its numbers are no one's yet.
fn planned(view: &SentenceView) -> bool {
    let power = |k: usize| view.is(k, Classes::POWER) || view.phrase(k, &["sample", "size"]);
    (0..view.len()).any(power)
        && (0..view.len())
            .any(|k| view.any(k, &["needed", "required", "detect", "calculated", "assuming", "necessary", "estimated"]))
}

/// Whether the count in tokens `i..next` is of one sex, beside one of the other or a percentage, of those who left or
/// stayed, or of those analysed; what is told of it begins at token `verb`.
fn role(view: &SentenceView, i: usize, next: usize, verb: usize) -> Role {
    const SEXES: &[&str] = &["male", "males", "female", "females", "men", "women", "boys", "girls", "man", "woman"];
    let sex = |from: usize| (from..from + 2).any(|k| view.any(k, SEXES));
    // Those who stayed to the end are not the ones described at the start.
    let behind = |reach: usize| (verb..verb + reach).take_while(|&k| view.get(k).is_some_and(|t| t.is_word()));
    if behind(4).any(|k| view.any(k, &["completed", "finished"])) {
        return Role::Stayed;
    }
    let left = &[
        "withdrew",
        "dropped",
        "refused",
        "excluded",
        "declined",
        "lost",
        "died",
        "discontinued",
        "ineligible",
        "left",
        "withdrawn",
    ];
    if behind(4).any(|k| view.any(k, left)) {
        return Role::Part;
    }
    let analysis = |k: usize| view.any(k, &["analysis", "analyses", "analysed", "analyzed", "evaluable"]);
    let included =
        behind(5).any(|k| view.any(k, &["included"])) && behind(14).any(|k| analysis(k) || view.eq(k, "population"));
    if included || behind(4).any(|k| view.any(k, &["analysed", "analyzed", "evaluable"])) {
        return Role::Analysed;
    }
    if !sex(next) {
        return Role::Whole;
    }
    let percent = (next..next + 4).any(|k| view.sign(k, '(') && view.number(k + 1).is_some() && view.sign(k + 2, '%'));
    let other = (next..next + 10).any(|k| view.is(k, Classes::AND) || view.sign(k, ','))
        && (next + 1..next + 12).any(|k| (view.number(k).is_some() || view.is(k, Classes::NUMBER_WORD)) && sex(k + 1));
    let before = (i.saturating_sub(8)..i).any(|k| view.any(k, SEXES));
    if percent || other || before { Role::Part } else { Role::Whole }
}

/// Whether a sentence tells what participants were at the start, which holds for all of them.
pub fn describes(view: &SentenceView) -> bool {
    (0..view.len()).any(|k| {
        view.is(k, Classes::BASELINE)
            || view
                .any(k, &["age", "aged", "male", "males", "female", "females", "men", "women", "sex", "gender", "bmi"])
    })
}

/// Whether a sentence tells of another study, or of some of the participants only.
pub fn of_others(view: &SentenceView) -> bool {
    const STUDY: &[&str] =
        &["study", "studies", "trial", "trials", "work", "report", "reports", "research", "literature"];
    let reported = || {
        (0..view.len()).any(|k| {
            view.any(k, &["reported", "found", "showed", "shown", "observed", "demonstrated", "described", "reports"])
        })
    };
    (0..view.len()).any(|k| {
        view.any(k, &["previous", "earlier", "prior", "another", "other", "published"])
            && (k + 1..k + 4).any(|j| view.any(j, STUDY))
            || view.eq(k, "et") && view.eq(k + 1, "al")
            || view.any(k, STUDY) && view.eq(k + 1, "by")
            || view.sign(k, '[') && view.sign(k + 1, '[') && reported()
            || view.any(k, &["those", "them"]) && view.any(k + 1, &["who", "with", "without", "whose"])
    })
}

/// Whether a sentence tells of one group among others.
pub fn speaks_of_arms(view: &SentenceView) -> bool {
    (0..view.len()).any(|k| {
        view.any(k, &["group", "groups", "arm", "arms", "placebo", "control", "controls"])
            || view.is(k, Classes::VERSUS)
            || view.is(k, Classes::RESPECTIVELY)
    })
}

/// Fills totals and sizes of one paragraph's groups. `tested(sentence)` tells whether a sentence prints a p-value,
/// `view(sentence)` gives a sentence of it.
pub fn fill<'a>(
    groups: &mut [Group],
    mentions: &[Mention],
    tested: impl Fn(u32) -> bool,
    view: impl Fn(u32) -> SentenceView<'a>,
) {
    categories(groups);
    let sizes = Sizes::of(mentions);
    // Nor are the sizes of named groups those of all.
    let named: Vec<Span> = groups.iter().filter(|g| !g.has_figure()).map(|g| g.span).take(MOST_NAMED).collect();
    let labels: Vec<String> =
        groups.iter().filter(|g| !g.has_figure()).map(|g| g.label.clone()).take(MOST_NAMED).collect();
    for at in 0..groups.len() {
        let (before_it, group) = groups.split_at_mut(at);
        let group = &mut group[0];
        if let (Some(events), Some(percent), None) = (group.events, group.percent, group.total)
            && let Some(first) = sizes.only(events.printed.value(), percent, group.span)
        {
            group.total = Some(Figure::inferred(Printed::whole(first.size), Inference::OtherSentence, first.span));
            group.n = group.total;
        }
        if let (Some(events), Some(percent), None) = (group.events, group.percent, group.total) {
            part_of_counted(group, events, percent, before_it);
        }
    }
    // A count of a total is a part, unless later figures are told of it.
    let counted: Vec<Span> =
        groups.iter().filter(|g| g.total.is_some() && g.percent.is_some()).map(|g| g.span).collect();
    let part = |m: &Mention| {
        m.role == Role::Whole && counted.binary_search_by(|s| side(*s, m.span)).is_ok() && !is_total(groups, m)
    };
    let divided = divided(mentions);
    let most = mentions.iter().map(|m| m.size).max();
    let whole_mentions: Vec<Mention> = mentions
        .iter()
        .enumerate()
        .filter(|(k, m)| m.role != Role::Part && divided.binary_search(k).is_err() && !part(m))
        // Those who stayed are all of whom a paragraph tells that names no more.
        .filter(|(_, m)| m.role != Role::Stayed || Some(m.size) == most)
        .map(|(_, m)| *m)
        .filter(|m| !named.iter().any(|s| s.overlaps(m.span)))
        .collect();
    let agreed = agreed(groups);
    let largest = whole_mentions.iter().map(|m| m.size).max();
    let alike = whole_mentions.iter().take_while(|m| m.size == whole_mentions[0].size).count();
    let wholes = wholes(groups, mentions);
    // What the sentence of the group before was found to be; groups of one sentence stand together.
    let mut known: Option<(u32, Told)> = None;
    for group in groups.iter_mut() {
        let single = group.n.is_none() && group.events.is_none() && group.has_figure();
        if single && let Some(m) = bracketed(mentions, group, &view) {
            group.n = Some(Figure::inferred(Printed::whole(m.size), Inference::SameSentence, m.span));
            continue;
        }
        if single && !tested(group.sentence) {
            // One group alone: the only size named before it.
            let before = &whole_mentions[..whole_mentions.partition_point(|m| m.span.start < group.span.start)];
            let here = before.iter().rev().take_while(|m| m.sentence == group.sentence).count();
            let summed = wholes.binary_search_by_key(&group.sentence, |w| w.sentence).ok().map(|w| &wholes[w]);
            let summed = summed.filter(|w| w.span.start < group.span.start);
            let told = match known {
                Some((sentence, told)) if sentence == group.sentence => told,
                _ => Told::of(&view(group.sentence), &labels),
            };
            known = Some((group.sentence, told));
            let earlier = &mentions[..mentions.partition_point(|m| m.span.start < group.span.start)];
            let analysed = before.last().filter(|m| m.role == Role::Analysed);
            let analysed = analysed.filter(|m| earlier.iter().any(|all| all.size > m.size));
            let only = match here {
                _ if told.opposed => None,
                _ if summed.is_some() => summed,
                _ if told.arms || told.others => None,
                _ if analysed.is_some() => analysed,
                1 => before.last(),
                2.. => all_of_sentence(before, group.sentence),
                0 if !before.is_empty() && before.len() <= alike => before.first(),
                0 if before.is_empty() => whole(&whole_mentions, largest),
                0 => None,
            };
            // Those who stayed to the end are another possible size.
            let stayed = |size: u64| earlier.iter().any(|m| m.role == Role::Stayed && m.size < size);
            let only = only.filter(|m| here > 0 || told.describes || !stayed(m.size));
            // Nor do all counts beside it tell of another total.
            let only = only.filter(|m| here > 0 || agreed.is_none_or(|t| t.printed.count() == Some(m.size)));
            if let (None, 0, Some(total), false) = (only, here, agreed, told.arms || told.others)
                && let Some(span) = total.place()
            {
                group.n = Some(Figure::inferred(total.printed, Inference::OtherSentence, span));
            }
            if let Some(first) = only {
                group.n = Some(Figure::inferred(Printed::whole(first.size), Inference::OtherSentence, first.span));
            }
        }
    }
    siblings(groups);
    companions(groups, tested, view);
}

/// What a sentence tells of, as far as it decides whose size a figure has.
#[derive(Clone, Copy, Debug)]
struct Told {
    arms: bool,
    /// Two figures are set against each other.
    opposed: bool,
    others: bool,
    describes: bool,
}

impl Told {
    fn of(view: &SentenceView, labels: &[String]) -> Told {
        let named = |k: usize| {
            view.get(k).is_some_and(|t| t.is_word())
                && labels.iter().any(|l| l.split(' ').next().is_some_and(|word| word.len() > 1 && view.eq(k, word)))
        };
        Told {
            opposed: (0..view.len()).any(|k| view.is(k, Classes::VERSUS)),
            arms: speaks_of_arms(view) || (0..view.len()).any(named),
            others: of_others(view),
            describes: describes(view),
        }
    }
}

/// `30 volunteers (mean age 31.4 ± 2.6 years)`: the mention of participants right before the bracket in which a mean
/// stands.
fn bracketed<'a>(mentions: &[Mention], group: &Group, view: impl Fn(u32) -> SentenceView<'a>) -> Option<Mention> {
    let before = &mentions[..mentions.partition_point(|m| m.span.start < group.span.start)];
    let last = before.last().filter(|m| m.sentence == group.sentence && m.size > 4)?;
    if group.percent.is_some() || last.span.overlaps(group.span) {
        return None;
    }
    let view = view(group.sentence);
    let at = view.token_at(group.span.start);
    let edge = |k: usize| view.signs(k, &['(', '[', ')', ']']);
    let mut depth = 0usize;
    let open = (at.saturating_sub(40)..at).rev().find(|&k| {
        if view.signs(k, &[')', ']']) {
            depth += 1;
        } else if view.signs(k, &['(', '[']) {
            match depth {
                0 => return true,
                _ => depth -= 1,
            }
        }
        false
    })?;
    let mut inside = (open + 1..(open + 60).min(view.len())).take_while(|&k| !view.signs(k, &[')', ']']) || k < at);
    if inside.any(|k| view.is(k, Classes::VERSUS)) {
        return None;
    }
    // The mention whose words lead up to the bracket.
    let outside = before.iter().rev().take(6).find(|m| view.token_at(m.span.end) <= open)?;
    let end = view.token_at(outside.span.end);
    let words = outside.sentence == group.sentence
        && open - end <= 6
        && (end..open).all(|k| view.get(k).is_some_and(|t| t.is_word()) && !edge(k) && !view.is(k, Classes::COPULA))
        && (end..open).any(|k| view.is(k, Classes::GROUP));
    words.then_some(*outside)
}

/// Where a span lies beside another one: equal if they overlap.
fn side(span: Span, other: Span) -> std::cmp::Ordering {
    if span.overlaps(other) { std::cmp::Ordering::Equal } else { span.start.cmp(&other.start) }
}

/// Whether a mention is the total of a count rather than the count.
fn is_total(groups: &[Group], m: &Mention) -> bool {
    let at = groups.binary_search_by(|g| side(g.span, m.span));
    at.is_ok_and(|g| groups[g].total.is_some_and(|t| t.printed.count() == Some(m.size)))
}

/// The mentions of one sentence that add up to one told before them: parts of it, by number.
fn divided(mentions: &[Mention]) -> Vec<usize> {
    let mut found = Vec::new();
    let mut from = 0;
    let mut told: Vec<u64> = Vec::new();
    for here in mentions.chunk_by(|a, b| a.sentence == b.sentence) {
        let sum = |list: &[Mention]| list.iter().fold(0u64, |sum, m| sum.saturating_add(m.size));
        let own = here[0].size;
        if here.len() >= 2 && told.contains(&sum(here)) {
            found.extend(from..from + here.len());
        } else if here.len() >= 3 && sum(&here[1..]) == own {
            found.extend(from + 1..from + here.len());
        }
        // A paragraph that tells more sizes than these tells of no one group.
        told.extend(here.iter().filter(|m| m.role == Role::Whole).map(|m| m.size).take(MOST_NAMED));
        told.truncate(MOST_NAMED);
        from += here.len();
    }
    found
}

/// The total of all counts with percentages of a paragraph, if they have one, two at least.
fn agreed(groups: &[Group]) -> Option<Figure> {
    let mut counts = groups.iter().filter(|g| g.events.is_some() && g.percent.is_some());
    let first = counts.next()?.total?;
    let mut more = 0;
    for g in counts {
        if g.total?.printed != first.printed {
            return None;
        }
        more += 1;
    }
    (more > 0).then_some(first)
}

/// All participants told only later: the largest size of the paragraph, told thrice.
fn whole(mentions: &[Mention], largest: Option<u64>) -> Option<&Mention> {
    let first = mentions.first()?;
    let told = mentions.iter().filter(|m| m.size == first.size).take(3).count();
    (largest == Some(first.size) && told >= 3).then_some(first)
}

/// "13 patients (12 men, 1 woman; median age 65 years)": the first size of a sentence, of which all others are parts.
fn all_of_sentence(before: &[Mention], sentence: u32) -> Option<&Mention> {
    let here = &before[before.partition_point(|m| m.sentence < sentence)..];
    here.first().filter(|first| here[1..].iter().all(|m| m.size < first.size))
}

/// The sizes that are the sum of the groups named in their sentence: `60 hives (31 water; 29 syrup)`.
fn wholes(groups: &[Group], mentions: &[Mention]) -> Vec<Mention> {
    let mut found = Vec::new();
    for named in groups.chunk_by(|a, b| a.sentence == b.sentence) {
        let sizes = named.iter().filter(|g| !g.has_figure()).filter_map(|g| g.n?.printed.count());
        let (count, sum) = sizes.fold((0, 0u64), |(count, sum), n| (count + 1, sum.saturating_add(n)));
        let here = within(mentions, |m| m.sentence, named[0].sentence..named[0].sentence + 1);
        found.extend(here.iter().find(|m| count >= 2 && m.size == sum).copied());
    }
    found
}

/// "Of these, 247 (70.4%) …" after "351 (85.2%) wintered": the one count told before of which the count is so many percent.
fn part_of_counted(group: &mut Group, events: Figure, percent: Printed, before: &[Group]) {
    let Some(count) = events.printed.count() else { return };
    let mut whole: Option<(u64, Span)> = None;
    // A handful of sentences back; a paragraph of counts must not take the square of its length.
    for g in before.iter().rev().take(12) {
        let Some(size) = g.events.and_then(|e| e.printed.count()).filter(|&s| s > count && s >= 20) else { continue };
        if fits(count, size, percent) {
            if whole.is_some_and(|w| w.0 != size) {
                return;
            }
            whole = Some((size, g.span));
        }
    }
    if let Some((size, span)) = whole {
        group.total = Some(Figure::inferred(Printed::whole(size), Inference::OtherSentence, span));
        group.n = group.total;
    }
}

/// A summary without size beside counts that all have one total: "68.1% (111/163) were female, the mean age was 57 years".
fn companions<'a>(groups: &mut [Group], tested: impl Fn(u32) -> bool, view: impl Fn(u32) -> SentenceView<'a>) {
    for here in groups.chunk_by_mut(|a, b| a.sentence == b.sentence) {
        let sentence = here[0].sentence;
        let sizes: Vec<Figure> = here.iter().filter_map(|g| g.total).collect();
        let [first, rest @ ..] = &sizes[..] else { continue };
        if rest.iter().any(|n| n.printed != first.printed) || tested(sentence) {
            continue;
        }
        let span = first.place().unwrap_or(here[0].span);
        let mut whose = Whose::All;
        let sentence = here.iter().any(|g| g.n.is_none() && g.events.is_none()).then(|| view(sentence));
        for at in 0..here.len() {
            let (before, group) = here.split_at_mut(at);
            let group = &mut group[0];
            if group.n.is_some() || group.events.is_some() {
                whose = Whose::All;
                continue;
            }
            if let (Some(view), Some(last)) = (&sentence, before.last()) {
                whose = whose_between(view, last, group.span, whose);
            }
            let size = match whose {
                Whose::All => Some((first.printed, span)),
                Whose::Counted => before.iter().rev().take(8).find_map(|g| g.events.map(|e| (e.printed, g.span))),
                Whose::Open => None,
            };
            group.n = size.map(|(printed, span)| Figure::inferred(printed, Inference::SameSentence, span));
        }
    }
}

/// Of whom a summary behind a count is told.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Whose {
    /// Of all that the count is of.
    All,
    /// Of those counted.
    Counted,
    /// That cannot be told.
    Open,
}

/// "9 of 22 responded, among whom it fell by 4.7 ± 1.2", "50 received it, with a mean of 3.6 visits": of those counted.
/// "30 were fed, with a mean age of 57 years": of whom is open, except where the count is one of sexes.
fn whose_between(view: &SentenceView, before: &Group, own: Span, whose: Whose) -> Whose {
    let (from, to) = (view.token_at(before.span.end), view.token_at(own.start));
    if to < from || to - from > 40 {
        return Whose::All;
    }
    if (from..to).any(|k| view.eq(k, "whom")) {
        return Whose::Counted;
    }
    let with = (from..to).find(|&k| {
        view.any(k, &["with", "for"])
            && view.any(k + 1, &["a", "an"])
            && (view.is(k + 2, Classes::MEAN) || view.is(k + 2, Classes::MEDIAN))
    });
    let Some(with) = with else { return whose };
    if before.events.is_none() {
        return whose;
    }
    let said = |words: &[&str]| (from..with).any(|k| view.any(k, words));
    if said(&["male", "males", "female", "females", "men", "women", "boys", "girls"]) {
        Whose::All
    } else if said(&["received", "underwent", "attended", "completed", "used", "took", "responded"]) {
        Whose::Counted
    } else {
        Whose::Open
    }
}

/// The mentions of one paragraph by size.
struct Sizes<'a> {
    by_size: BTreeMap<u64, Vec<&'a Mention>>,
}

impl<'a> Sizes<'a> {
    fn of(mentions: &'a [Mention]) -> Sizes<'a> {
        let mut by_size: BTreeMap<u64, Vec<&Mention>> = BTreeMap::new();
        for m in mentions.iter().filter(|m| m.size > 4) {
            by_size.entry(m.size).or_default().push(m);
        }
        Sizes { by_size }
    }

    /// The first mention of the one size, outside `own`, of which so many events are so many percent.
    fn only(&self, events: f64, percent: Printed, own: Span) -> Option<&'a Mention> {
        let range = percent.rounded().widened(1e-12);
        // Sizes beyond these do not fit; a little room for rounding.
        let least = (100.0 * events / range.hi).floor() - 1.0;
        let most = if range.lo > 0.0 { (100.0 * events / range.lo).ceil() + 1.0 } else { f64::INFINITY };
        let fits = |size: u64| size as f64 >= events && range.contains(100.0 * events / size as f64);
        let near = self.by_size.range(least.max(events) as u64..).take_while(|&(&size, _)| size as f64 <= most);
        let apart = |all: &Vec<&'a Mention>| all.iter().copied().find(|m| !m.span.overlaps(own));
        let mut found = near.filter(|&(&size, _)| fits(size)).filter_map(|(_, all)| apart(all));
        found.next().filter(|_| found.next().is_none())
    }
}

/// A count with its percentage and no total.
fn open(group: &Group) -> Option<(u64, Printed)> {
    let events = group.events?.printed.count()?;
    group.percent.filter(|_| group.total.is_none() && !group.approximate).map(|p| (events, p))
}

fn fits(events: u64, total: u64, percent: Printed) -> bool {
    is_share(events, total, percent.rounded())
}

/// `38 male (63.3%) and 22 female (36.7%)`: the categories of one sentence, where all percentages fit their sum.
fn categories(groups: &mut [Group]) {
    for here in groups.chunk_by_mut(|a, b| a.sentence == b.sentence) {
        // All counts of the sentence, else runs of them whose percentages make 100.
        if category(here) {
            continue;
        }
        let mut start = 0;
        while start < here.len() {
            let (mut sum, mut end) = (0.0, start);
            while end < here.len() && sum < 99.0 && open(&here[end]).is_some() {
                sum += here[end].percent.map_or(0.0, Printed::value);
                end += 1;
            }
            let found = (99.0..101.0).contains(&sum) && end - start >= 2 && category(&mut here[start..end]);
            start = if found { end } else { start + 1 };
        }
    }
}

/// Gives the groups their sum for a total, if all are counts of it as their percentages say.
fn category(groups: &mut [Group]) -> bool {
    let counts: Option<Vec<(u64, Printed)>> = groups.iter().map(open).collect();
    let Some(counts) = counts.filter(|c| c.len() >= 2) else { return false };
    let sum = counts.iter().fold(0u64, |sum, c| sum.saturating_add(c.0));
    if !counts.iter().all(|&(events, percent)| fits(events, sum, percent)) {
        return false;
    }
    let span = groups[0].span.to(groups[groups.len() - 1].span);
    for group in groups {
        group.total = Some(Figure::inferred(Printed::whole(sum), Inference::Categories, span));
        group.n = group.total;
    }
    true
}

/// A count whose percentage fits no size, in a sentence whose other counts all have one and the same total (as has all
/// the paragraph, twice at least).
fn siblings(groups: &mut [Group]) {
    let totals: Vec<Figure> =
        groups.iter().filter(|g| g.percent.is_some() && g.events.is_some()).filter_map(|g| g.total).collect();
    let Some(&first) = totals.first() else { return };
    if totals.len() < 2 || first.printed.digits < 20 || totals.iter().any(|t| t.printed != first.printed) {
        return;
    }
    let Some(span) = first.place() else { return };
    let counts = groups.iter().filter(|g| g.percent.is_some() && g.events.is_some()).count();
    if counts != totals.len() + 1 {
        return;
    }
    let odd = groups.iter_mut().find(|g| open(g).is_some_and(|(events, _)| events < first.printed.digits));
    if let Some(group) = odd {
        group.total = Some(Figure::inferred(first.printed, Inference::Siblings, span));
        group.n = group.total;
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_index_finds_the_size_that_a_walk_would() {
        let mention = |i: usize| Mention {
            size: (i as u64 * 37) % 90 + 5,
            span: Span::new(0, 10 * i, 10 * i + 2),
            sentence: 0,
            role: Role::Whole,
        };
        let mentions: Vec<Mention> = (0..60).map(mention).collect();
        let sizes = Sizes::of(&mentions);
        for (events, percent) in [(0, "0"), (3, "4.2"), (12, "30"), (12, "13.5"), (40, "100"), (7, "9.9"), (2, "100.0")]
        {
            let percent = Printed::parse(percent).expect("a number");
            for own in [Span::new(0, 0, 1), Span::new(0, 100, 205)] {
                let fits = |m: &&Mention| m.size >= events && fits(events, m.size, percent);
                let mut walk = mentions.iter().filter(|m| !m.span.overlaps(own)).filter(fits);
                let first = walk.next();
                let only = first.filter(|f| walk.all(|m| m.size == f.size));
                assert_eq!(sizes.only(events as f64, percent, own), only, "{events} {percent}");
            }
        }
    }
}
