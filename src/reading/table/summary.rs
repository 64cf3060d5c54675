//! The group summaries of one row.

use super::super::lexicon::Classes;
use super::super::sentence::SentenceView;
use super::super::{Figure, Group, Inference, IntervalReading, Readings, SpreadKind};
use super::cell::{self, At, Form, Read};
use super::meaning::Meaning;
use super::{Setting, Table};
use crate::layout::{ColumnRole, Part, Row};
use crate::printed::{Printed, is_share, totals_that_fit};
use crate::text::Span;

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

/// A size with where it comes from.
#[derive(Clone, Copy, Debug)]
pub(super) struct Sized {
    pub value: u64,
    pub figure: Figure,
}

/// What a row is by its label and all its figures.
#[derive(Clone, Copy)]
struct RowIs {
    /// Men and women with a sign between.
    sexes: bool,
    /// Counts without percentages.
    bare: bool,
}

/// One cell of a group column with what it holds.
struct Held<'a> {
    index: usize,
    view: SentenceView<'a>,
    reads: Vec<Read>,
    size: Option<Sized>,
}

/// Appends the groups of a row; tells whether they are counts.
pub(super) fn read(table: &Table, number: usize, setting: &Setting, readings: &mut Readings) -> bool {
    let row = &table.layout.rows[number];
    let out = &mut readings.groups;
    let (own, section) = table.said(row);
    let mut cells: Vec<Held> = Vec::new();
    for index in row.cells.clone().filter(|&i| table.role_of(i).summarises()) {
        let view = table.view(index);
        if view.is_empty() {
            continue;
        }
        cells.push(Held { index, view, reads: cell::read(&view), size: table.size_of(row, index, setting) });
    }
    let evidence = Evidence::of(&cells);
    let own_size = row.labels.iter().any(|&l| names_size(&table.view(l))) && !table.layout.rows_are_groups;
    let start = out.len();
    let labels: Vec<SentenceView> = row.labels.iter().map(|&l| table.view(l)).collect();
    // `Never/ever smoked` beside `14/26`: two categories that make up the group.
    let parts = |h: &Held| match h.reads[..] {
        [Read { form: Form::Fraction { events, total, percent: None }, .. }] => {
            let sum = events.printed.count().zip(total.printed.count()).and_then(|(a, b)| a.checked_add(b));
            sum.is_some() && sum == h.size.map(|s| s.value)
        }
        _ => false,
    };
    let two_parts = |l: &SentenceView| (0..l.len()).filter(|&i| l.sign(i, '/')).count() == 1;
    let blank = |h: &Held| h.reads.is_empty() && h.view.len() == 1 && h.view.sign(0, '-');
    let filled = || cells.iter().filter(|h| !blank(h));
    let categories = labels.iter().any(two_parts) && filled().count() > 1 && filled().all(parts);
    let sexes = categories || labels.iter().any(names_sexes);
    let whole = |h: &Held| match h.reads[..] {
        [Read { form: Form::Single { value, percent: false }, .. }] => {
            value.printed.count().zip(h.size).is_some_and(|(v, n)| v <= n.value)
        }
        _ => false,
    };
    let bare = setting.bare_counts && cells.len() > 1 && cells.iter().all(whole) && !labels.iter().any(names_measure);
    let row_is = RowIs { sexes, bare };
    let below = table.brackets_below(number);
    let joint = joint_error(table, row, setting, &cells);
    for held in &cells {
        let column = table.grid.cells[held.index].column as usize;
        let at = setting.heads.get(column).copied().unwrap_or_default();
        let said = [&own, &section, &at, &setting.columns, &setting.around];
        let bracket = evidence.bracket(&said);
        let levels = own.change || own.shift || section.change || section.shift || at.change || at.shift;
        let change = levels || setting.around.change;
        let label = table.layout.columns[column].role.label().unwrap_or("");
        let mut add = |mut group: Group, n: Option<At>| {
            group.label = label.to_string();
            group.change = change && group.events.is_none();
            if let Some(n) = n {
                group.n = Some(printed(&held.view, n));
            } else if own_size && group.total.is_none() {
                // The row has a size of its own, which is of all groups or of none.
                group.n = None;
            }
            out.push(group);
        };
        if held.reads.is_empty()
            && let Some(group) = limits_alone(held, &own)
        {
            add(group, None);
            continue;
        }
        let mut reads = held.reads.clone();
        // `12.4` over `(3.1)`: one summary on two lines.
        if let ([Read { form, .. }], Some(below)) = (&mut reads[..], below)
            && let Form::Single { value, percent: false } = *form
            && let Some(inner) = table.bracketed(below, column)
        {
            *form = Form::Bracket { centre: value, inner, percent: false, named: None };
        }
        let bracket = if below.is_some() { evidence_below(&said).or(bracket) } else { bracket };
        if let [Read { form: Form::Single { value, percent: false }, .. }] = reads[..]
            && let Some(group) =
                joint.map(|se| pooled(held, value, se)).or_else(|| two_cells(table, held, value, &said))
        {
            add(group, None);
            continue;
        }
        for read in &reads {
            if let Some(group) = summary(&held.view, read, held.size, &said, bracket, row_is) {
                add(group, read.n);
            }
        }
    }
    let panel = |g: &Group| {
        let cell = table.grid.cells.get((g.sentence - table.first) as usize);
        cell.and_then(|c| table.layout.columns.get(c.column as usize)).and_then(|c| c.panel)
    };
    out[start..].chunk_by_mut(|a, b| panel(a) == panel(b)).for_each(row_shares);
    for g in out[start..].iter().filter(|g| g.spread_kind == Some(SpreadKind::Ci)) {
        if let ([lower, upper], Some(centre)) = (&g.spread[..], g.mean.or(g.median)) {
            readings.intervals.push(IntervalReading {
                span: g.span,
                sentence: g.sentence,
                level: table.level_of((g.sentence - table.first) as usize),
                lower: *lower,
                upper: *upper,
                percent: false,
                credible: false,
                reversed: false,
                estimate: Some((centre, g.span)),
            });
        }
    }
    readings.groups[start..].iter().any(|g| g.events.is_some())
}

/// Counts whose percentages share out the row and not the column: they are of all groups together.
fn row_shares(groups: &mut [Group]) {
    let count = |g: &Group| g.events.and_then(|e| e.printed.count());
    let Some(sum) = groups.iter().map(count).try_fold(0u64, |s, c| s.checked_add(c?)) else { return };
    let fits = |g: &Group, total: u64| {
        let events = Printed::whole(count(g).unwrap_or(0));
        total > 0 && g.percent.is_some_and(|p| fits(events, p, total))
    };
    let own = |g: &Group| g.total.and_then(|t| t.printed.count()).is_some_and(|n| fits(g, n) && !inferred(g));
    if groups.len() < 2 || !groups.iter().all(|g| fits(g, sum)) || groups.iter().all(own) {
        return;
    }
    for g in groups {
        g.total = Some(Figure::inferred(Printed::whole(sum), Inference::Categories, g.span));
        g.n = g.total;
    }
}

fn inferred(g: &Group) -> bool {
    g.total.is_some_and(|t| t.is_inferred(Inference::FromPercent))
}

/// What brackets in a line of their own hold.
fn evidence_below(said: &[&Meaning; 5]) -> Option<Bracket> {
    let nearest = said.iter().find(|m| m.speaks());
    match nearest {
        Some(m) if m.count && !m.summary() => Some(Bracket::Count),
        Some(m) if m.median && m.spread.is_none() => Some(Bracket::Median(m.quantiles.unwrap_or(SpreadKind::Unstated))),
        Some(m) => Some(Bracket::Mean(m.spread.unwrap_or(SpreadKind::Unstated))),
        None => Some(Bracket::Mean(SpreadKind::Unstated)),
    }
}

/// A row of ranges: `16–89` beside "Range".
fn limits_alone(held: &Held, own: &Meaning) -> Option<Group> {
    let kind = own.quantiles.filter(|_| !own.mean && !own.median)?;
    let (lower, upper) = cell::limits(&held.view)?;
    Some(Group {
        n: held.size.map(|s| s.figure),
        spread_kind: Some(kind),
        spread: vec![lower.printed, upper.printed],
        ..Group::new(held.view.span(lower.first, upper.last), held.view.id)
    })
}

/// The standard error at the end of a row, for all its means, where they are bare figures.
fn joint_error(table: &Table, row: &Row, setting: &Setting, cells: &[Held]) -> Option<Printed> {
    let bare = |h: &Held| matches!(h.reads[..], [Read { form: Form::Single { percent: false, .. }, .. }]);
    let cell = table.layout.cell_in(table.grid, row, setting.pooled?).filter(|_| cells.iter().all(bare))?;
    match cell::read(&table.view(cell))[..] {
        [Read { form: Form::Single { value, percent: false }, .. }] if !value.printed.negative => Some(value.printed),
        _ => None,
    }
}

/// A mean whose standard error stands at the end of the row.
fn pooled(held: &Held, value: At, se: Printed) -> Group {
    Group {
        n: held.size.map(|s| s.figure),
        mean: Some(value.printed),
        spread_kind: Some(SpreadKind::Se),
        spread: vec![se],
        ..Group::new(held.view.span(value.first, value.last), held.view.id)
    }
}

/// A summary whose other half stands in the next cell: `12 | 30`, `5.2 | 1.1`, `8 | 7–10`.
fn two_cells(table: &Table, held: &Held, value: At, said: &[&Meaning; 5]) -> Option<Group> {
    let next = held.index + 1;
    let cell = table.grid.cells.get(next)?;
    let ColumnRole::Part(part) = *table.layout.role(cell) else { return None };
    if cell.row != table.grid.cells[held.index].row {
        return None;
    }
    let view = table.view(next);
    let start = held.view.span(value.first, value.last);
    let span = |last: usize| Span { end: view.span(last, last).end, ..start };
    let group = |last: usize| Group { n: held.size.map(|s| s.figure), ..Group::new(span(last), held.view.id) };
    let single = || match cell::read_first(&view) {
        Some(Read { form: Form::Single { value, .. }, last, .. }) => Some((value.printed, last)),
        _ => None,
    };
    let mean = |kind: SpreadKind| {
        let (spread, last) = single()?;
        (!spread.negative).then(|| Group {
            mean: Some(value.printed),
            spread_kind: Some(kind),
            spread: vec![spread],
            ..group(last)
        })
    };
    match part {
        Part::Sd => mean(SpreadKind::Sd),
        Part::Se => mean(SpreadKind::Se),
        Part::Ci => None,
        Part::Percent => {
            let (percent, last) = single()?;
            let events = value.printed.count()?;
            let (total, n) = total_of(events, percent, held.size, span(last))?;
            Some(Group { events: Some(printed(&held.view, value)), percent: Some(percent), total, n, ..group(last) })
        }
        Part::Iqr | Part::Range => {
            let (lower, upper) = cell::limits(&view)?;
            let kind = if part == Part::Iqr { SpreadKind::Iqr } else { SpreadKind::Range };
            let spread = vec![lower.printed, upper.printed];
            let median = said.iter().any(|m| m.median) || part == Part::Iqr;
            let centre = Some(value.printed);
            let group = Group { spread_kind: Some(kind), spread, ..group(upper.last) };
            Some(if median { Group { median: centre, ..group } } else { Group { mean: centre, ..group } })
        }
    }
}

/// The total and size that go with a count and its percentage; `None` where they cannot be these at all.
fn total_of(
    events: u64,
    percent: Printed,
    size: Option<Sized>,
    place: Span,
) -> Option<(Option<Figure>, Option<Figure>)> {
    if percent.negative || percent.value() > 100.0 {
        return None;
    }
    let Some(size) = size else { return Some((None, None)) };
    if fits(Printed::whole(events), percent, size.value) {
        return Some((Some(size.figure), Some(size.figure)));
    }
    // A percentage below what the head's size gives is of no smaller group: missing answers make it larger. Where no
    // size between the count and the head's gives it, the head's is its total, right or wrong.
    if only_above(events, percent, size.value) {
        return Some((Some(size.figure), Some(size.figure)));
    }
    // Missing answers shrink the group down a table: only the one size that the percentage allows will do.
    let n = only_size(events, percent, size.value)?;
    let total = n.map(|n| Figure::inferred(Printed::whole(n), Inference::FromPercent, place));
    Some((total, Some(size.figure)))
}

/// What the figures in a row's brackets show by themselves.
struct Evidence {
    /// Counts and percentages that the sizes bear out, in every cell: that is no accident.
    bears_out: bool,
    /// The same with the percentage in front.
    swapped: bool,
    decimals: bool,
    /// A figure in front beyond the size of its group, or far from any share of it in every cell.
    beyond: bool,
}

impl Evidence {
    fn of(cells: &[Held]) -> Evidence {
        let mut pairs: Vec<(Printed, Printed, Option<u64>)> = Vec::new();
        for held in cells {
            for read in &held.reads {
                if let Form::Bracket { centre, inner, .. } = read.form {
                    pairs.push((centre.printed, inner, held.size.map(|s| s.value)));
                }
            }
        }
        let fit = |swapped: bool| {
            let fits_size = |&(a, b, n): &(Printed, Printed, Option<u64>)| {
                n.is_some_and(|n| if swapped { fits(b, a, n) } else { fits(a, b, n) })
            };
            !pairs.is_empty() && pairs.iter().all(fits_size)
        };
        Evidence {
            bears_out: fit(false),
            swapped: fit(true),
            decimals: pairs.iter().any(|p| p.0.places > 0 || p.0.negative),
            beyond: pairs.iter().any(|p| p.2.is_some_and(|n| p.0.value() > n as f64))
                || !pairs.is_empty()
                    && pairs
                        .iter()
                        .all(|p| p.2.is_some_and(|n| (100.0 * p.0.value() / n as f64 - p.1.value()).abs() > 5.0)),
        }
    }

    /// What brackets hold in this row, from the nearest text that says it.
    fn bracket(&self, said: &[&Meaning; 5]) -> Option<Bracket> {
        let [own, _, _, _, around] = said;
        let shares = |m: &Meaning| m.bracket_percent && !self.decimals;
        let Some(nearest) = said.iter().find(|m| m.tells_brackets() || shares(m)) else {
            return if self.bears_out {
                Some(Bracket::Count)
            } else if self.decimals && !own.percent {
                Some(Bracket::Mean(SpreadKind::Unstated))
            } else {
                None
            };
        };
        // "Mean (SD) or geometric mean (IQR)": one figure is the SD.
        let summary = if let Some(kind) = nearest.spread.filter(|_| !nearest.geometric || nearest.quantiles.is_some()) {
            Some(Bracket::Mean(kind))
        } else if nearest.median {
            Some(Bracket::Median(nearest.quantiles.unwrap_or(SpreadKind::Unstated)))
        } else {
            None
        };
        if !nearest.tells_brackets() {
            return Some(Bracket::Count);
        }
        let swapped = nearest.percent_first && (self.swapped || !self.bears_out);
        let count = Some(if swapped { Bracket::Percent } else { Bracket::Count });
        if own.tells_brackets() {
            return match (own.count, own.summary()) {
                (true, false) => count,
                (false, _) => summary,
                (true, true) if self.bears_out => Some(Bracket::Count),
                (true, true) => summary.filter(|_| self.decimals || self.beyond),
            };
        }
        if self.bears_out && !swapped {
            return Some(Bracket::Count);
        }
        match (nearest.count, nearest.summary()) {
            // A row of means in a table of counts.
            (true, false) if self.decimals && !swapped => {
                Some(Bracket::Mean(around.spread.unwrap_or(SpreadKind::Unstated)))
            }
            (true, false) => count,
            (false, _) if own.percent && !self.decimals => None,
            (false, _) => summary,
            (true, true) => summary.filter(|_| self.decimals || self.beyond),
        }
    }
}

/// Whether a count and a percentage are those of a group of `n`: rounded, or cut.
fn fits(events: Printed, percent: Printed, n: u64) -> bool {
    let events = events.count().filter(|&e| e <= n);
    !percent.negative && events.is_some_and(|e| is_share(e, n, percent.rounded_or_cut()))
}

fn summary(
    view: &SentenceView,
    read: &Read,
    size: Option<Sized>,
    said: &[&Meaning; 5],
    bracket: Option<Bracket>,
    row: RowIs,
) -> Option<Group> {
    let header = size.map(|s| s.figure);
    let group = Group { n: header, ..Group::new(view.span(read.first, read.last), view.id) };
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
        let (total, n) = total_of(whole, percent, size, view.span(read.first, read.last))?;
        Some(Group { events: Some(printed(view, events)), percent: Some(percent), total, n, ..group.clone() })
    };
    match read.form {
        Form::PlusMinus { centre, spread } => {
            // The nearest text that names a spread; SD and SE both named elsewhere leave it open.
            let kind = said.iter().find_map(|m| m.spread).unwrap_or(SpreadKind::Unstated);
            mean(centre, kind, spread)
        }
        Form::Bracket { centre, inner, named: Some(kind), .. } => mean(centre.printed, kind, inner),
        Form::Bracket { centre, inner, percent: true, .. } => {
            // `62.1 (11.2%)` is a mean with its coefficient of variation.
            count(centre, inner)
        }
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
            let stated = said[..4].iter().any(|m| m.fraction);
            let (e, t) = (events.printed.count()?, total.printed.count()?);
            let sum = e.checked_add(t)?;
            if row.sexes && percent.is_none_or(|p| p.count() == Some(sum)) {
                let sum = Printed::whole(sum);
                let place = view.span(read.first, read.last);
                let total = Some(Figure::inferred(sum, Inference::Categories, place));
                return Some(Group { events: Some(printed(view, events)), total, n: header.or(total), ..group });
            }
            // Events of persons with their rate per person-time.
            let rate = said[..4].iter().any(|m| m.rate) && !said[..4].iter().any(|m| m.percent || m.count);
            let percent = percent.filter(|_| !rate);
            let whole = header.is_some_and(|h| h.printed.count() == Some(t));
            let stated = stated || whole || said[0].number || said[1].number;
            if t == 0 || e > t || (percent.is_none() && !stated) {
                return None;
            }
            let total = Some(printed(view, total));
            Some(Group {
                events: Some(printed(view, events)),
                total,
                n: header.or(total),
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
            let near_ci = said[..4].iter().any(|m| m.ci);
            let quantiles = said.iter().find_map(|m| m.quantiles);
            let spread = vec![lower, upper];
            let nearest = said.iter().find(|m| m.median || m.mean || m.ci || m.quantiles.is_some());
            let of_mean = nearest.is_some_and(|m| !m.median && m.mean);
            let kind_of =
                |kind| Group { mean: Some(c), spread_kind: Some(kind), spread: spread.clone(), ..group.clone() };
            match median {
                Some(m) if !of_mean => {
                    let kind = m.quantiles.or(quantiles).unwrap_or(SpreadKind::Unstated);
                    let kind = if m.ci && m.quantiles.is_none() { SpreadKind::Ci } else { kind };
                    Some(Group { median: Some(c), spread_kind: Some(kind), spread, ..group })
                }
                _ if near_ci && quantiles.is_none() || nearest.is_some_and(|m| m.ci && m.quantiles.is_none()) => {
                    Some(kind_of(SpreadKind::Ci))
                }
                _ if said.iter().any(|m| m.geometric) => Some(kind_of(quantiles.unwrap_or(SpreadKind::Unstated))),
                _ if quantiles == Some(SpreadKind::Range) && said.iter().any(|m| m.mean) => {
                    Some(kind_of(SpreadKind::Range))
                }
                // Quartiles go with a median.
                _ if quantiles.is_some() => Some(Group { median: Some(c), spread_kind: quantiles, spread, ..group }),
                _ if said[4].ci => Some(kind_of(SpreadKind::Ci)),
                // Nothing says what they are: limits to one side of the figure are those of a median.
                _ if !said.iter().any(|m| m.mean) => {
                    let (down, up) = (c.value() - lower.value(), upper.value() - c.value());
                    let one_sided = (down - up).abs() > 0.2 * (down + up);
                    let median = Group { median: Some(c), spread_kind: Some(SpreadKind::Unstated), spread, ..group };
                    one_sided.then_some(median)
                }
                _ => None,
            }
        }
        Form::Single { value, percent } => single(view, value, percent, size, said, row.bare, group),
    }
}

/// One figure: what it is must be said, by a sign or in words.
fn single(
    view: &SentenceView,
    value: At,
    percent: bool,
    size: Option<Sized>,
    said: &[&Meaning; 5],
    bare: bool,
    group: Group,
) -> Option<Group> {
    let [own, section, at, ..] = said;
    let share = !value.printed.negative && value.printed.value() <= 100.0;
    if percent {
        return (share && !own.summary()).then_some(Group { percent: Some(value.printed), ..group });
    }
    let near = [own, section, at];
    let summary = near.iter().find(|m| m.median || m.mean);
    if own.percent && !own.count && !own.summary() && !own.mean && share {
        return Some(Group { percent: Some(value.printed), ..group });
    }
    // `0` and other counts whose percentage was left out.
    let speaking = near.iter().find(|m| m.count || m.bare_count || m.summary() || m.mean);
    let counts = speaking.is_some_and(|m| (m.count || m.bare_count) && !m.summary());
    if (counts || bare && speaking.is_none())
        && let (Some(events), Some(size)) = (value.printed.count(), size)
    {
        let total = (events <= size.value).then_some(size.figure);
        return total.map(|total| Group { events: Some(printed(view, value)), total: Some(total), ..group });
    }
    match summary {
        Some(m) if m.median && !m.mean => Some(Group { median: Some(value.printed), ..group }),
        Some(m) if m.mean && !m.count => Some(Group { mean: Some(value.printed), ..group }),
        _ => None,
    }
}

/// The size that a count and its percentage allow, where it is the only one between half the header's and the header's.
/// `None` where the two figures cannot be a count and its percentage at all.
fn only_size(events: u64, percent: Printed, header: u64) -> Option<Option<u64>> {
    let share = percent.rounded();
    if events == 0 || share.hi <= 0.0 {
        return (events == 0).then_some(None);
    }
    let only = totals_that_fit(events, share).filter(|(least, most)| least == most).map(|t| t.0);
    Some(only.filter(|&n| n <= header && n as f64 >= header as f64 / 2.0))
}

/// Whether no size from the count up to the header's gives the percentage, near as it is to that of the header's.
fn only_above(events: u64, percent: Printed, header: u64) -> bool {
    let share = percent.rounded();
    if events == 0 || share.hi <= 0.0 || events > header {
        return false;
    }
    // Far off it is a share of something else, or no share at all.
    const NEAR: f64 = 10.0;
    if (100.0 * events as f64 / header as f64 - percent.value()).abs() > NEAR {
        return false;
    }
    totals_that_fit(events, share).is_none_or(|(least, _)| least > header)
}

/// The count in the brackets of `30 (12)`, with its token.
fn inner_count(view: &SentenceView, read: &Read, inner: Printed) -> Option<At> {
    inner.count()?;
    let at = (read.first..=read.last).rev().find(|&i| view.number(i) == Some(inner))?;
    Some(At { printed: inner, first: at, last: at })
}

fn printed(view: &SentenceView, at: At) -> Figure {
    Figure::at(at.printed, view.span(at.first, at.last))
}

/// `Weight (n = 45)`
fn names_size(view: &SentenceView) -> bool {
    (0..view.len()).any(|i| view.any(i, &["n"]) && view.sign(i + 1, '='))
}

/// `Males/Females`, `Sex (M:F)`
pub(super) fn names_sexes(view: &SentenceView) -> bool {
    const MEN: &[&str] = &["m", "male", "males", "men", "boys"];
    const WOMEN: &[&str] = &["f", "female", "females", "women", "girls", "w"];
    let at = |words: &[&str]| (0..view.len()).find(|&i| view.any(i, words));
    match (at(MEN), at(WOMEN)) {
        (Some(a), Some(b)) => (a.min(b)..a.max(b)).any(|i| view.signs(i, &['/', ':', '-'])),
        _ => false,
    }
}

/// Words for measurements: what stands beside them is no count.
fn names_measure(view: &SentenceView) -> bool {
    const WORDS: &[&str] = &[
        "min", "max", "minimum", "maximum", "age", "score", "time", "duration", "mean", "median", "range", "weight",
        "height", "rate", "dose", "cost", "sd", "se", "year", "years", "level",
    ];
    (0..view.len()).any(|i| view.is(i, Classes::UNIT) || view.any(i, WORDS) || view.sign(i, '%'))
}
