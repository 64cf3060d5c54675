//! Group sizes that a sentence leaves to an earlier one: "pain was lower with the sling than without (5.2 ± 1.1 v 6.1 ± 1.0)",
//! where the arms were introduced as `sling (n = 24)` and `usual care (n = 25)`.

use super::Context;
use crate::manuscript::Manuscript;
use crate::printed::Printed;
use crate::reading::group::named::{self, Known};
use crate::reading::group::total;
use crate::reading::{Figure, Group, Inference, Origin, Readings, Scan};
use crate::text::Span;
use std::collections::HashMap;

/// Fills the sizes of groups that a sentence sets side by side, where it names arms of known size and the order of names
/// and figures leaves no choice. Such sizes are inferred: participants may have been lost since.
pub fn fill_sizes(manuscript: &Manuscript, scan: &Scan, readings: &mut Readings, context: &Context) {
    let sizes = Sizes::of(readings, context);
    from_tables(manuscript, &sizes, readings);
    let alike = sizes.two_alike(context);
    // More arms than a handful are subgroups, which share their names with others.
    let named = (2..=4).contains(&context.arms.len());
    if !named && alike.is_none() {
        return;
    }
    let groups = &mut readings.groups;
    let known: Vec<Known> = context.arms.iter().map(|a| Known { label: &a.label, n: a.n, span: a.span }).collect();
    for here in groups.chunk_by_mut(|a, b| a.sentence == b.sentence) {
        if !here.iter().any(|g| g.n.is_none() && g.events.is_none() && g.has_figure()) {
            continue;
        }
        let view = scan.view(manuscript, here[0].sentence);
        // Another study's arms may bear the same names.
        if total::of_others(&view) {
            continue;
        }
        if named {
            named::assign(&view, here, &known, Inference::ArmSize);
        }
        if let Some(arms) = &alike
            && !manuscript.block(here[0].span).is_table()
        {
            two_unnamed(here, arms);
        }
    }
}

/// Gives two summaries that a sentence sets side by side without naming their groups the sizes of a study's only two
/// arms, which differ so little that their order does not matter.
fn two_unnamed(groups: &mut [Group], arms: &[(String, u64, Span); 2]) {
    let mut open: Vec<&mut Group> = groups.iter_mut().filter(|g| g.has_figure()).collect();
    let [a, b] = &mut open[..] else { return };
    let plain = |g: &Group| {
        let named = folded(&g.label);
        let summary = g.mean.is_some() && !g.spread.is_empty() || g.percent.is_some() && g.mean.is_none();
        let ours = named.is_empty() || arms.iter().any(|(label, ..)| *label == named);
        g.n.is_none() && g.events.is_none() && summary && ours
    };
    if plain(a) && plain(b) && a.mean.is_some() == b.mean.is_some() {
        for (group, (_, n, span)) in [a, b].into_iter().zip(arms) {
            group.n = Some(Figure::inferred(Printed::whole(*n), Inference::ArmSize, *span));
        }
    }
}

/// How often each group's name stands with each size.
struct Sizes(HashMap<String, HashMap<u64, (u32, Span)>>);

impl Sizes {
    fn of(readings: &Readings, context: &Context) -> Sizes {
        let mut sizes: HashMap<String, HashMap<u64, (u32, Span)>> = HashMap::new();
        let mut met = |label: &str, n: u64, span: Span, weight: u32| {
            sizes.entry(folded(label)).or_default().entry(n).or_insert((0, span)).0 += weight;
        };
        for arm in &context.arms {
            met(&arm.label, arm.n, arm.span, 3);
        }
        // One vote for each table.
        let mut last: Option<(u32, &str)> = None;
        for g in readings.groups.iter().filter(|g| !g.label.is_empty()) {
            if let Some(Figure { printed, origin: Origin::Inferred(Inference::Header, span) }) = g.n
                && let Some(n) = printed.count()
                && last != Some((g.span.block, g.label.as_str()))
            {
                met(&g.label, n, span, 1);
                last = Some((g.span.block, g.label.as_str()));
            }
        }
        Sizes(sizes)
    }

    /// The size met most often, since those analysed vary; among equals the larger one, so that the choice does not hang
    /// on the order of a map.
    fn usual(&self, label: &str) -> Option<(u64, Span)> {
        let found = self.0.get(label).filter(|_| !label.is_empty())?;
        found.iter().max_by_key(|&(&n, &(votes, _))| (votes, n)).map(|(&n, &(_, span))| (n, span))
    }

    /// The study's two arms, where it has no more and they differ in size by a tenth at most.
    fn two_alike(&self, context: &Context) -> Option<[(String, u64, Span); 2]> {
        let mut names: Vec<String> = if context.arms.is_empty() {
            let whole =
                |name: &str| matches!(name, "" | "all" | "total" | "overall" | "all patients" | "all participants");
            self.0.keys().filter(|name| !whole(name)).cloned().collect()
        } else {
            context.arms.iter().map(|a| folded(&a.label)).collect()
        };
        names.sort_unstable();
        let [a, b] = &names[..] else { return None };
        let ((n, first), (m, second)) = (self.usual(a)?, self.usual(b)?);
        (10 * n.abs_diff(m) <= n.max(m)).then(|| [(a.clone(), n, first), (b.clone(), m, second)])
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
/// the arms are introduced.
fn from_tables(manuscript: &Manuscript, sizes: &Sizes, readings: &mut Readings) {
    for group in readings.groups.iter_mut() {
        let wanting = group.n.is_none() && group.total.is_none() && !group.label.is_empty();
        if !wanting || !manuscript.block(group.span).is_table() {
            continue;
        }
        if let Some((n, span)) = sizes.usual(&folded(&group.label)) {
            group.n = Some(Figure::inferred(Printed::whole(n), Inference::ArmSize, span));
        }
    }
}
