//! Group sizes that a sentence leaves to an earlier one: "pain was lower with the sling than without (5.2 ± 1.1 v 6.1 ± 1.0)",
//! where the arms were introduced as `sling (n = 24)` and `usual care (n = 25)`.

use super::Context;
use crate::manuscript::{BlockKind, Manuscript};
use crate::printed::Printed;
use crate::reading::group::named::{self, Known};
use crate::reading::{Figure, Group, Inference, Origin, Readings, Scan};
use crate::text::Span;
use std::collections::HashMap;

/// Fills the sizes of groups that a sentence sets side by side, where it names arms of known size and the order of names
/// and figures leaves no choice.
pub fn fill_sizes(manuscript: &Manuscript, scan: &Scan, readings: &mut Readings, context: &Context) {
    from_tables(manuscript, readings, context);
    // More arms than a handful are subgroups, which share their names with others.
    if !(2..=4).contains(&context.arms.len()) {
        return;
    }
    let groups = &mut readings.groups;
    let known: Vec<Known> = context.arms.iter().map(|a| Known { label: &a.label, n: a.n, span: a.span }).collect();
    let mut from = 0;
    while from < groups.len() {
        let sentence = groups[from].sentence;
        let to = from + groups[from..].iter().take_while(|g| g.sentence == sentence).count();
        let here = &mut groups[from..to];
        if here.iter().any(|g| g.n.is_none() && g.events.is_none() && g.has_figure()) {
            named::assign(&scan.view(manuscript, sentence), here, &known, Inference::ArmSize);
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
