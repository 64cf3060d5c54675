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
    for group in groups.iter_mut() {
        if let (Some(events), Some(percent), None) = (group.events, group.percent, group.total) {
            let fits = |m: &&Mention| {
                let share = 100.0 * events.printed.value() / m.size as f64;
                m.size as f64 >= events.printed.value() && percent.rounded().widened(1e-12).contains(share)
            };
            let mut found = mentions.iter().filter(|m| !m.span.overlaps(group.span)).filter(fits);
            if let Some(first) = found.next()
                && found.all(|m| m.size == first.size)
            {
                let origin = Origin::Inferred(Inference::OtherSentence, first.span);
                group.total = Some(Figure { printed: Printed::whole(first.size), origin });
                group.n = group.total;
            }
        }
        if group.n.is_none() && group.events.is_none() && !tested(group.sentence) {
            // One group alone: the only size named before it.
            let mut before = mentions
                .iter()
                .filter(|m| m.span.start < group.span.start && m.sentence <= group.sentence)
                .filter(|m| m.span.block == group.span.block);
            let here: Vec<&Mention> = before.clone().filter(|m| m.sentence == group.sentence).collect();
            let only = match (here.as_slice(), before.next()) {
                ([one], _) => Some(**one),
                ([], Some(first)) if before.all(|m| m.size == first.size) => Some(*first),
                _ => None,
            };
            if let Some(first) = only {
                let origin = Origin::Inferred(Inference::OtherSentence, first.span);
                group.n = Some(Figure { printed: Printed::whole(first.size), origin });
            }
        }
    }
    siblings(groups);
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
