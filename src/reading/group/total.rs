//! Totals and sizes that stand elsewhere in the paragraph.
//!
//! The nearest total is not a denominator: a size is taken over from another place only where the printed
//! percentage itself picks it out, or where the paragraph tells of one group alone.

use super::super::lexicon::Classes;
use super::super::sentence::SentenceView;
use super::super::{Figure, Group, Inference, Origin, within};
use super::count::count_at;
use crate::printed::Printed;
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
    /// One side of a division (`23 men and 11 women`, `15 men (40.5%)`), or those who completed the study.
    pub part: bool,
}

/// Appends the sizes a sentence mentions: `22 males`, `(n = 24)`, `of the 786 students`, `45/101`.
pub fn mentions(view: &SentenceView, out: &mut Vec<Mention>) {
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
        let included = view.any(next, &["were", "was", "completed"])
            && view.any(
                next + 1,
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
        let members = (next..next + 7)
            .take_while(|&k| view.get(k).is_some_and(|t| t.is_word()) || view.signs(k, &['-', ',']))
            .take_while(|&k| !view.is(k, Classes::UNIT) && !view.is(k, Classes::COPULA) && !view.is(k, Classes::AND))
            .any(|k| view.is(k, Classes::GROUP) && !view.any(k, &["groups", "group", "arms"]));
        if size > 4 && (after_n || denominator || members || included) {
            let part = is_part(view, i, next);
            out.push(Mention { size, span: view.span(i, next - 1), sentence: view.id, part });
        }
        i = next;
    }
}

/// Whether the count in tokens `i..next` is of one sex, beside one of the other or a percentage, or of those who stayed.
fn is_part(view: &SentenceView, i: usize, next: usize) -> bool {
    const SEXES: &[&str] = &["male", "males", "female", "females", "men", "women", "boys", "girls", "man", "woman"];
    let sex = |from: usize| (from..from + 2).any(|k| view.any(k, SEXES));
    // Those who stayed to the end are not the ones described at the start.
    let stayed = (next..next + 4).take_while(|&k| view.get(k).is_some_and(|t| t.is_word()));
    if stayed.into_iter().any(|k| view.any(k, &["completed", "finished", "withdrew", "dropped", "refused"])) {
        return true;
    }
    if !sex(next) {
        return false;
    }
    let percent = (next..next + 4).any(|k| view.sign(k, '(') && view.number(k + 1).is_some() && view.sign(k + 2, '%'));
    let other = (next..next + 10).any(|k| view.is(k, Classes::AND) || view.sign(k, ','))
        && (next + 1..next + 12).any(|k| (view.number(k).is_some() || view.is(k, Classes::NUMBER_WORD)) && sex(k + 1));
    let before = (i.saturating_sub(8)..i).any(|k| view.any(k, SEXES));
    percent || other || before
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
/// `of_arms(sentence)` whether it sets groups side by side.
pub fn fill(groups: &mut [Group], mentions: &[Mention], tested: impl Fn(u32) -> bool, of_arms: impl Fn(u32) -> bool) {
    categories(groups);
    let sizes = Sizes::of(mentions);
    // Nor are the sizes of named groups those of all.
    let named: Vec<Span> = groups.iter().filter(|g| !g.has_figure()).map(|g| g.span).take(MOST_NAMED).collect();
    let whole_mentions: Vec<Mention> =
        mentions.iter().filter(|m| !m.part && !named.iter().any(|s| s.overlaps(m.span))).copied().collect();
    let largest = whole_mentions.iter().map(|m| m.size).max();
    let alike = whole_mentions.iter().take_while(|m| m.size == whole_mentions[0].size).count();
    let wholes = wholes(groups, mentions);
    for at in 0..groups.len() {
        let (before_it, group) = groups.split_at_mut(at);
        let group = &mut group[0];
        if let (Some(events), Some(percent), None) = (group.events, group.percent, group.total)
            && let Some(first) = sizes.only(events.printed.value(), percent, group.span)
        {
            let origin = Origin::Inferred(Inference::OtherSentence, first.span);
            group.total = Some(Figure { printed: Printed::whole(first.size), origin });
            group.n = group.total;
        }
        if let (Some(events), Some(percent), None) = (group.events, group.percent, group.total) {
            part_of_counted(group, events, percent, before_it);
        }
        let single = group.n.is_none() && group.events.is_none() && group.has_figure();
        if single && !tested(group.sentence) {
            // One group alone: the only size named before it.
            let before = &whole_mentions[..whole_mentions.partition_point(|m| m.span.start < group.span.start)];
            let here = before.iter().rev().take_while(|m| m.sentence == group.sentence).count();
            let summed = wholes.binary_search_by_key(&group.sentence, |w| w.sentence).ok().map(|w| &wholes[w]);
            let summed = summed.filter(|w| w.span.start < group.span.start);
            let only = match here {
                _ if summed.is_some() => summed,
                _ if of_arms(group.sentence) => None,
                1 => before.last(),
                2.. => all_of_sentence(before, group.sentence),
                0 if !before.is_empty() && before.len() <= alike => before.first(),
                0 if before.is_empty() => whole(&whole_mentions, largest),
                0 => None,
            };
            if let Some(first) = only {
                let origin = Origin::Inferred(Inference::OtherSentence, first.span);
                group.n = Some(Figure { printed: Printed::whole(first.size), origin });
            }
        }
    }
    siblings(groups);
    companions(groups, tested);
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
        let origin = Origin::Inferred(Inference::OtherSentence, span);
        group.total = Some(Figure { printed: Printed::whole(size), origin });
        group.n = group.total;
    }
}

/// A summary without size beside counts that all have one total: "68.1% (111/163) were female, the mean age was 57 years".
fn companions(groups: &mut [Group], tested: impl Fn(u32) -> bool) {
    let mut from = 0;
    while from < groups.len() {
        let sentence = groups[from].sentence;
        let to = from + groups[from..].iter().take_while(|g| g.sentence == sentence).count();
        let sizes: Vec<Figure> = groups[from..to].iter().filter_map(|g| g.total).collect();
        if let [first, rest @ ..] = &sizes[..]
            && rest.iter().all(|n| n.printed == first.printed)
            && !tested(sentence)
        {
            let span = match first.origin {
                Origin::Printed(span) | Origin::Inferred(_, span) => span,
                Origin::Assumed(_) => groups[from].span,
            };
            for group in groups[from..to].iter_mut().filter(|g| g.n.is_none() && g.events.is_none()) {
                group.n =
                    Some(Figure { printed: first.printed, origin: Origin::Inferred(Inference::SameSentence, span) });
            }
        }
        from = to;
    }
}

/// The mentions of one paragraph by size.
struct Sizes<'a> {
    by_size: BTreeMap<u64, Vec<&'a Mention>>,
}

impl<'a> Sizes<'a> {
    fn of(mentions: &'a [Mention]) -> Sizes<'a> {
        let mut by_size: BTreeMap<u64, Vec<&Mention>> = BTreeMap::new();
        for m in mentions {
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
    total > 0 && percent.rounded().widened(1e-12).contains(100.0 * events as f64 / total as f64)
}

/// `38 male (63.3%) and 22 female (36.7%)`: the categories of one sentence, where all percentages fit their sum.
fn categories(groups: &mut [Group]) {
    let mut from = 0;
    while from < groups.len() {
        let sentence = groups[from].sentence;
        let to = from + groups[from..].iter().take_while(|g| g.sentence == sentence).count();
        // All counts of the sentence, else runs of them whose percentages make 100.
        if !category(&mut groups[from..to]) {
            let mut start = from;
            while start < to {
                let (mut sum, mut end) = (0.0, start);
                while end < to && sum < 99.0 && open(&groups[end]).is_some() {
                    sum += groups[end].percent.map_or(0.0, Printed::value);
                    end += 1;
                }
                let found = (99.0..101.0).contains(&sum) && end - start >= 2 && category(&mut groups[start..end]);
                start = if found { end } else { start + 1 };
            }
        }
        from = to;
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
        let origin = Origin::Inferred(Inference::Categories, span);
        group.total = Some(Figure { printed: Printed::whole(sum), origin });
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
    let span = match first.origin {
        Origin::Printed(span) | Origin::Inferred(_, span) => span,
        Origin::Assumed(_) => return,
    };
    let counts = groups.iter().filter(|g| g.percent.is_some() && g.events.is_some()).count();
    if counts != totals.len() + 1 {
        return;
    }
    let odd = groups.iter_mut().find(|g| open(g).is_some_and(|(events, _)| events < first.printed.digits));
    if let Some(group) = odd {
        group.total = Some(Figure { printed: first.printed, origin: Origin::Inferred(Inference::Siblings, span) });
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
            part: false,
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
