//! Totals and sizes that stand elsewhere in the paragraph.
//!
//! The nearest total is not a denominator: a size is taken over from another place only where the printed
//! percentage itself picks it out, or where the paragraph tells of one group alone.

use super::super::lexicon::Classes;
use super::super::sentence::SentenceView;
use super::super::{Figure, Group, Inference, Origin};
use super::count::count_at;
use crate::printed::Printed;
use crate::text::Span;
use std::collections::BTreeMap;

/// A number of participants mentioned in running text.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Mention {
    pub size: u64,
    pub span: Span,
    pub sentence: u32,
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
            out.push(Mention { size, span: view.span(i, next - 1), sentence: view.id });
        }
        i = next;
    }
}

/// Fills totals and sizes of one paragraph's groups. `tested(sentence)` tells whether a sentence prints a p-value.
pub fn fill(groups: &mut [Group], mentions: &[Mention], tested: impl Fn(u32) -> bool) {
    categories(groups);
    let sizes = Sizes::of(mentions);
    for group in groups.iter_mut() {
        if let (Some(events), Some(percent), None) = (group.events, group.percent, group.total)
            && let Some(first) = sizes.only(events.printed.value(), percent, group.span)
        {
            let origin = Origin::Inferred(Inference::OtherSentence, first.span);
            group.total = Some(Figure { printed: Printed::whole(first.size), origin });
            group.n = group.total;
        }
        if group.n.is_none() && group.events.is_none() && !tested(group.sentence) {
            // One group alone: the only size named before it.
            let before = &mentions[..mentions.partition_point(|m| m.span.start < group.span.start)];
            let here = before.iter().rev().take_while(|m| m.sentence == group.sentence).take(2).count();
            let only = match here {
                1 => before.last(),
                0 if before.len() <= sizes.alike => before.first(),
                _ => None,
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
    /// So many mentions from the first on have one and the same size.
    alike: usize,
}

impl<'a> Sizes<'a> {
    fn of(mentions: &'a [Mention]) -> Sizes<'a> {
        let mut by_size: BTreeMap<u64, Vec<&Mention>> = BTreeMap::new();
        for m in mentions {
            by_size.entry(m.size).or_default().push(m);
        }
        Sizes { by_size, alike: mentions.iter().take_while(|m| m.size == mentions[0].size).count() }
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
        let counts: Option<Vec<(u64, Printed)>> = groups[from..to].iter().map(open).collect();
        if let Some(counts) = counts.filter(|c| c.len() >= 2) {
            let sum = counts.iter().map(|c| c.0).sum();
            if counts.iter().all(|&(events, percent)| fits(events, sum, percent)) {
                let span = groups[from].span.to(groups[to - 1].span);
                for group in &mut groups[from..to] {
                    let origin = Origin::Inferred(Inference::Categories, span);
                    group.total = Some(Figure { printed: Printed::whole(sum), origin });
                    group.n = group.total;
                }
            }
        }
        from = to;
    }
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
        let mention =
            |i: usize| Mention { size: (i as u64 * 37) % 90 + 5, span: Span::new(0, 10 * i, 10 * i + 2), sentence: 0 };
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
