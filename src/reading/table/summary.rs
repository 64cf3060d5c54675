//! The group summaries of one row.

use super::super::sentence::SentenceView;
use super::super::{Figure, Group, Inference, Origin, SpreadKind};
use super::cell::{self, At, Form, Read};
use super::meaning::Meaning;
use super::{Setting, Table};
use crate::layout::{Row, Size};
use crate::printed::{Printed, Range};

/// What `12 (30)` and `12 (8–15)` are in a row.
#[derive(Clone, Copy, Debug, PartialEq)]
enum Bracket {
    Mean(SpreadKind),
    /// A median with one figure for its spread.
    Median(SpreadKind),
    /// A count with its percent.
    Count,
    /// A percent with its count.
    Percent,
}

/// Appends the groups of a row; tells whether they are counts.
pub(super) fn read(table: &Table, row: &Row, setting: &Setting, out: &mut Vec<Group>) -> bool {
    let (own, section) = table.said(row);
    let cells: Vec<(usize, Read, Size)> = row
        .cells
        .clone()
        .filter_map(|i| Some((i, table.role_of(i).size()?)))
        .filter_map(|(i, size)| Some((i, cell::read(&table.view(i))?, size)))
        .collect();
    let said = [&own, &section, &setting.columns, &setting.around];
    let bracket = bracket(&cells, said);
    let own_size = row.labels.iter().any(|&l| names_size(&table.view(l)));
    let change = own.change || own.shift || section.change || section.shift || setting.around.change;
    let start = out.len();
    for (index, read, size) in &cells {
        let view = table.view(*index);
        let Some(mut group) = summary(&view, read, *size, said, bracket) else { continue };
        group.label = table.role_of(*index).label().unwrap_or("").to_string();
        group.change = change && group.events.is_none();
        if let Some(n) = read.n {
            group.n = Some(printed(&view, n));
        } else if own_size && group.total.is_none() {
            // The row has a size of its own, which is of all groups or of none.
            group.n = None;
        }
        out.push(group);
    }
    out[start..].iter().any(|g| g.events.is_some())
}

/// What brackets hold in this row, from the nearest text that says it.
fn bracket(cells: &[(usize, Read, Size)], said: [&Meaning; 4]) -> Option<Bracket> {
    let pairs: Vec<(Printed, Printed, u64)> = cells
        .iter()
        .filter_map(|(_, read, size)| match read.form {
            Form::Bracket { centre, inner, .. } => Some((centre.printed, inner, size.value)),
            _ => None,
        })
        .collect();
    // Counts and percentages that the header's sizes bear out, in every cell: that is no accident.
    let bears_out = |swapped: bool| {
        let share = |&(a, b, n): &(Printed, Printed, u64)| if swapped { fits(b, a, n) } else { fits(a, b, n) };
        !pairs.is_empty() && pairs.iter().all(share)
    };
    let decimals = pairs.iter().any(|p| p.0.places > 0 || p.0.negative);
    let beyond = pairs.iter().any(|p| p.0.value() > p.2 as f64);
    let [own, _, _, around] = said;
    let Some(nearest) = said.into_iter().find(|m| m.speaks()) else {
        return if bears_out(false) {
            Some(Bracket::Count)
        } else if decimals && !own.percent {
            Some(Bracket::Mean(SpreadKind::Unstated))
        } else {
            None
        };
    };
    let summary = if let Some(kind) = nearest.spread.filter(|_| !nearest.geometric) {
        Some(Bracket::Mean(kind))
    } else if nearest.median {
        Some(Bracket::Median(nearest.quantiles.unwrap_or(SpreadKind::Unstated)))
    } else {
        None
    };
    let swapped = nearest.percent_first && (bears_out(true) || !bears_out(false));
    let count = Some(if swapped { Bracket::Percent } else { Bracket::Count });
    if own.speaks() {
        return match (own.count, own.summary()) {
            (true, false) => count,
            (false, _) => summary,
            (true, true) if bears_out(false) => Some(Bracket::Count),
            (true, true) => summary.filter(|_| decimals || beyond),
        };
    }
    if bears_out(false) && !swapped {
        return Some(Bracket::Count);
    }
    match (nearest.count, nearest.summary()) {
        // A row of means in a table of counts.
        (true, false) if decimals && !swapped => Some(Bracket::Mean(around.spread.unwrap_or(SpreadKind::Unstated))),
        (true, false) => count,
        (false, _) if own.percent && !decimals => None,
        (false, _) => summary,
        (true, true) => summary.filter(|_| decimals || beyond),
    }
}

/// Whether a count and a percentage are those of a group of `n`: rounded, or cut.
fn fits(events: Printed, percent: Printed, n: u64) -> bool {
    let Some(events) = events.count().filter(|&e| e <= n) else { return false };
    let share = 100.0 * events as f64 / n as f64;
    !percent.negative && share_of(percent).contains(share)
}

/// What a percentage may stand for, whether it was rounded or cut.
fn share_of(percent: Printed) -> Range {
    percent.rounded().hull(percent.cut()).widened(1e-12)
}

fn summary(
    view: &SentenceView,
    read: &Read,
    size: Size,
    said: [&Meaning; 4],
    bracket: Option<Bracket>,
) -> Option<Group> {
    let header = Figure { printed: Printed::whole(size.value), origin: Origin::Inferred(Inference::Header, size.span) };
    let group = Group { n: Some(header), ..Group::new(view.span(read.first, read.last), view.id) };
    let mean = |centre: Printed, kind: SpreadKind, spread: Printed| {
        (!spread.negative).then(|| Group {
            mean: Some(centre),
            spread_kind: Some(kind),
            spread: vec![spread],
            ..group.clone()
        })
    };
    let count = |events: At, percent: Printed| {
        let whole = events.printed.count()?;
        if percent.negative || percent.value() > 100.0 {
            return None;
        }
        let events_figure = printed(view, events);
        let total = if fits(events.printed, percent, size.value) {
            Some(header)
        } else {
            // Missing answers shrink the group down a table: only the one size that the percentage allows will do.
            let n = only_size(whole, percent, size.value)?;
            let place = view.span(read.first, read.last);
            n.map(|n| Figure { printed: Printed::whole(n), origin: Origin::Inferred(Inference::FromPercent, place) })
        };
        Some(Group { events: Some(events_figure), percent: Some(percent), total, n: total, ..group.clone() })
    };
    match read.form {
        Form::PlusMinus { centre, spread } => {
            // The nearest text that names a spread; SD and SE both named elsewhere leave it open.
            let kind = said.iter().find_map(|m| m.spread).unwrap_or(SpreadKind::Unstated);
            mean(centre, kind, spread)
        }
        Form::Bracket { centre, inner, named: Some(kind), .. } => mean(centre.printed, kind, inner),
        Form::Bracket { centre, inner, percent: true, .. } => count(centre, inner),
        Form::Bracket { centre, inner, .. } => match bracket? {
            Bracket::Mean(kind) => mean(centre.printed, kind, inner),
            Bracket::Median(kind) => Some(Group {
                median: Some(centre.printed),
                spread_kind: Some(kind),
                spread: vec![inner],
                ..group.clone()
            }),
            Bracket::Count => count(centre, inner),
            Bracket::Percent => {
                let events = inner_count(view, read, inner)?;
                count(events, centre.printed)
            }
        },
        Form::PercentFirst { percent, events } => count(events, percent),
        Form::Fraction { events, total, percent } => {
            let stated = said[..3].iter().any(|m| m.fraction);
            let (e, t) = (events.printed.count()?, total.printed.count()?);
            if t == 0 || e > t || (percent.is_none() && !stated) {
                return None;
            }
            let total = Some(printed(view, total));
            Some(Group {
                events: Some(printed(view, events)),
                total,
                n: total,
                percent,
                one_expression: true,
                ..group.clone()
            })
        }
        Form::Pair { centre, lower, upper } => {
            let c = centre.printed;
            if !(lower.value() <= c.value() && c.value() <= upper.value()) {
                return None;
            }
            let median = said.iter().find(|m| m.median);
            let near_ci = said[..3].iter().any(|m| m.ci);
            let quantiles = said.iter().find_map(|m| m.quantiles);
            let spread = vec![lower, upper];
            match median {
                Some(m) => {
                    let kind = m.quantiles.or(quantiles).unwrap_or(SpreadKind::Unstated);
                    let kind = if m.ci && m.quantiles.is_none() { SpreadKind::Ci } else { kind };
                    Some(Group { median: Some(c), spread_kind: Some(kind), spread, ..group.clone() })
                }
                None if near_ci => {
                    Some(Group { mean: Some(c), spread_kind: Some(SpreadKind::Ci), spread, ..group.clone() })
                }
                None if said[..3].iter().any(|m| m.mean) && quantiles == Some(SpreadKind::Range) => {
                    Some(Group { mean: Some(c), spread_kind: Some(SpreadKind::Range), spread, ..group.clone() })
                }
                None => None,
            }
        }
        Form::Single { value, percent } => {
            (percent && value.printed.value() <= 100.0 && !value.printed.negative && said[0].summary().eq(&false))
                .then(|| Group { percent: Some(value.printed), ..group.clone() })
        }
    }
}

/// The size that a count and its percentage allow, where it is the only one between half the header's and the header's.
/// `None` where the two figures cannot be a count and its percentage at all.
fn only_size(events: u64, percent: Printed, header: u64) -> Option<Option<u64>> {
    let share = percent.rounded();
    if events == 0 || share.hi <= 0.0 {
        return (events == 0).then_some(None);
    }
    let least = (100.0 * events as f64 / share.hi * (1.0 - 1e-12)).ceil().max(events as f64);
    let most = if share.lo > 0.0 { (100.0 * events as f64 / share.lo * (1.0 + 1e-12)).floor() } else { f64::INFINITY };
    let within = least <= header as f64 && least >= header as f64 / 2.0;
    Some((least == most && within).then_some(least as u64))
}

/// The count in the brackets of `30 (12)`, with its token.
fn inner_count(view: &SentenceView, read: &Read, inner: Printed) -> Option<At> {
    inner.count()?;
    let at = (read.first..=read.last).rev().find(|&i| view.number(i) == Some(inner))?;
    Some(At { printed: inner, first: at, last: at })
}

fn printed(view: &SentenceView, at: At) -> Figure {
    Figure { printed: at.printed, origin: Origin::Printed(view.span(at.first, at.last)) }
}

/// `Weight (n = 45)`
fn names_size(view: &SentenceView) -> bool {
    (0..view.len()).any(|i| view.any(i, &["n"]) && view.sign(i + 1, '='))
}
