//! Group sizes that a sentence leaves to an earlier one: "pain was lower with the sling than without (5.2 ± 1.1 v 6.1 ± 1.0)",
//! where the arms were introduced as `sling (n = 24)` and `usual care (n = 25)`.

use super::{Arm, Context};
use crate::manuscript::{BlockKind, Manuscript};
use crate::printed::Printed;
use crate::reading::{Figure, Group, Inference, Origin, Readings, Scan, SentenceView};
use crate::text::Span;
use std::collections::HashMap;

/// Fills the sizes of two groups that a sentence sets side by side, where it names two arms of known size and the order
/// of names and figures leaves no choice. Such a size is inferred: patients may have been lost since.
pub fn fill_sizes(manuscript: &Manuscript, scan: &Scan, readings: &mut Readings, context: &Context) {
    from_tables(manuscript, readings, context);
    // More arms than a handful are subgroups, which share their names with others.
    if !(2..=4).contains(&context.arms.len()) {
        return;
    }
    let groups = &mut readings.groups;
    // A summary that the text gives to an arm by its full name.
    for group in groups.iter_mut().filter(|g| g.n.is_none() && g.events.is_none()) {
        let own = |arm: &&Arm| arm.label.len() > 1 && arm.label.eq_ignore_ascii_case(&group.label);
        if let Some(arm) = context.arms.iter().find(own) {
            group.n = Some(size(arm));
        }
    }
    let mut from = 0;
    while from < groups.len() {
        let sentence = groups[from].sentence;
        let to = from + groups[from..].iter().take_while(|g| g.sentence == sentence).count();
        if let [a, b] = &mut groups[from..to]
            && a.n.is_none()
            && b.n.is_none()
            && a.mean.is_some() == b.mean.is_some()
        {
            let view = scan.view(manuscript, sentence);
            if let Some((first, second)) = arms_in_order(&view, a, b, &context.arms) {
                a.n = Some(size(first));
                b.n = Some(size(second));
            }
        }
        from = to;
    }
}

/// A group's name without case, signs and the words for groups.
fn folded(label: &str) -> String {
    let words = label.split(|c: char| !c.is_alphanumeric()).filter(|w| !w.is_empty()).map(str::to_lowercase);
    words
        .filter(|w| !matches!(w.as_str(), "group" | "groups" | "arm" | "the" | "mean" | "sd"))
        .collect::<Vec<_>>()
        .join(" ")
}

/// Gives summaries in tables that print no sizes those of the groups that bear the same name in other tables and where
/// the arms are introduced: the size met most often, since those analysed vary.
fn from_tables(manuscript: &Manuscript, readings: &mut Readings, context: &Context) {
    let in_table = |g: &Group| matches!(manuscript.blocks[g.span.block as usize].kind, BlockKind::Table(_));
    let wanting = |g: &Group| g.n.is_none() && g.total.is_none() && !g.label.is_empty() && in_table(g);
    if !readings.groups.iter().any(wanting) {
        return;
    }
    let mut sizes: HashMap<String, HashMap<u64, (u32, Span)>> = HashMap::new();
    let mut met = |label: &str, n: u64, span: Span, weight: u32| {
        sizes.entry(folded(label)).or_default().entry(n).or_insert((0, span)).0 += weight;
    };
    for arm in &context.arms {
        met(&arm.label, arm.n, arm.span, 3);
    }
    // One vote for each table.
    let mut last: Option<(u32, String)> = None;
    for g in readings.groups.iter().filter(|g| !g.label.is_empty()) {
        if let Some(Figure { printed, origin: Origin::Inferred(Inference::Header, span) }) = g.n
            && let Some(n) = printed.count()
            && last.as_ref().is_none_or(|l| l.0 != g.span.block || l.1 != g.label)
        {
            met(&g.label, n, span, 1);
            last = Some((g.span.block, g.label.clone()));
        }
    }
    for group in readings.groups.iter_mut() {
        if !wanting(group) {
            continue;
        }
        let Some(found) = sizes.get(&folded(&group.label)).filter(|_| !folded(&group.label).is_empty()) else {
            continue;
        };
        // Among equals the larger one, so that the choice does not hang on the order of a map.
        if let Some((&n, &(_, span))) = found.iter().max_by_key(|&(&n, &(votes, _))| (votes, n)) {
            group.n = Some(Figure { printed: Printed::whole(n), origin: Origin::Inferred(Inference::ArmSize, span) });
        }
    }
}

fn size(arm: &Arm) -> Figure {
    Figure { printed: Printed::whole(arm.n), origin: Origin::Inferred(Inference::ArmSize, arm.span) }
}

/// The arms of the two groups: both named before the figures, both after them, or each beside its own.
fn arms_in_order<'a>(view: &SentenceView, a: &Group, b: &Group, arms: &'a [Arm]) -> Option<(&'a Arm, &'a Arm)> {
    let mut named: Vec<(usize, &Arm)> = Vec::new();
    for arm in arms {
        let places: Vec<usize> = (0..view.len()).filter(|&i| stands_at(view, i, &arm.label)).collect();
        match places[..] {
            [] => {}
            [at] => named.push((at, arm)),
            // named twice: which mention goes with which figure is open
            _ => return None,
        }
    }
    named.sort_by_key(|n| n.0);
    let [(one, first), (two, second)] = named[..] else { return None };
    let (start_a, start_b) = (view.token_at(a.span.start), view.token_at(b.span.start));
    let before = two < start_a;
    let after = one > start_b;
    let beside = one < start_a && start_a < two && two < start_b || start_a < one && one < start_b && start_b < two;
    (before || after || beside).then_some((first, second))
}

/// Whether the words of a label stand at token `i`.
fn stands_at(view: &SentenceView, i: usize, label: &str) -> bool {
    let mut at = i;
    for word in label.split(|c: char| c.is_whitespace() || c == '-').filter(|w| !w.is_empty()) {
        if at > i && view.sign(at, '-') {
            at += 1;
        }
        if !view.eq(at, word) {
            return false;
        }
        at += 1;
    }
    at > i
}
