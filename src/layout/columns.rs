//! Heads and columns: how far the header reaches, what stands over each column, what it is for, what is compared.

use super::figures::{self, Look};
use super::{Column, ColumnRole, Panel, Part, Text, header};
use crate::manuscript::{Cell, Grid};
use std::ops::Range;

/// Rows below the format's own header that may go on with it.
const MOST_ADDED: usize = 3;
/// Cells over one column that are looked at.
const MOST_HEADS: usize = 6;
/// Columns that a table of figures has at most; beyond them nothing is joined.
const MOST_GROUPS: usize = 24;

/// How many rows from the top are headers: those of the format, and what stands below in the same manner.
pub(super) fn header_rows(text: &Text, grid: &Grid, runs: &[Range<usize>]) -> u32 {
    let named = grid.header_rows.max(1).min(runs.len() as u32);
    let mut rows = named as usize;
    while rows < runs.len().saturating_sub(1) && rows < named as usize + MOST_ADDED {
        let cells = &grid.cells[runs[rows].clone()];
        let stub = cells.iter().find(|c| c.column == 0);
        let labelled = stub.is_some_and(|c| !text.of(c).is_empty());
        let others = || cells.iter().filter(|c| c.column > 0 && !text.of(c).is_empty());
        let words = others().all(|c| is_head(text, c));
        // A row without cells of its own under heads that span down, or with heads under heads that span across.
        let above = &grid.cells[runs[rows - 1].clone()];
        let under_span =
            above.iter().any(|c| c.column_span > 1 && c.column > 0 && c.column + c.column_span < grid.columns + 1);
        let says = others().filter(|c| header::heads_column(&text.folded(c))).count();
        let goes_on = others().count() >= 2
            && words
            && (says >= 2 || !labelled || under_span && stub.is_none_or(|c| !ends(text, c)));
        // A label that spans down from the header proper leaves its first column free.
        let spanned = stub.is_none() && grid.header_rows == 0 && words;
        let empty = others().count() == 0 && !labelled;
        if !(goes_on || spanned || empty) {
            break;
        }
        rows += 1;
    }
    // Empty rows at the end belong to the body.
    while rows > named as usize && grid.cells[runs[rows - 1].clone()].iter().all(|c| text.of(c).is_empty()) {
        rows -= 1;
    }
    rows as u32
}

/// Whether a cell below the header may go on with it: words, or a size.
fn is_head(text: &Text, cell: &Cell) -> bool {
    match text.look(cell) {
        Look::Words | Look::Empty => true,
        // `95% CI`
        _ if header::says_interval(&text.folded(cell)) && header::heads_column(&text.folded(cell)) => true,
        _ => header::size_alone(text.block, text.number, cell, false).is_some(),
    }
}

/// A label that is no head of labels but of a row.
fn ends(text: &Text, cell: &Cell) -> bool {
    matches!(text.look(cell), Look::Number | Look::Summary | Look::Range)
}

/// The columns with what heads them and what they are for.
pub(super) fn columns(text: &Text, grid: &Grid, runs: &[Range<usize>], header_rows: u32) -> Vec<Column> {
    let count = grid.columns.min(2 * grid.cells.len() as u32 + 1) as usize;
    let mut columns: Vec<Column> = (0..count)
        .map(|_| Column {
            role: ColumnRole::Other,
            header: None,
            path: Vec::new(),
            panel: None,
            bundle: 0,
            doubtful: false,
        })
        .collect();
    let body = runs.get(header_rows as usize).map_or(grid.cells.len(), |r| r.start);
    for (index, cell) in grid.cells[..body].iter().enumerate() {
        if text.of(cell).is_empty() {
            continue;
        }
        let from = (cell.column as usize).min(count);
        let to = (from + cell.column_span.max(1) as usize).min(count);
        // A title over the whole table heads no column in particular.
        if to - from == count && count > 2 {
            continue;
        }
        for column in &mut columns[from..to] {
            // Of endless heads the lowest counts.
            if column.path.len() == MOST_HEADS {
                column.path.pop();
            }
            column.path.push(index);
            column.header = Some(index);
        }
    }
    let looks = looks(text, &grid.cells[body..], count);
    let stubs = stub_columns(text, grid, &columns, &looks);
    for (k, column) in columns.iter_mut().enumerate() {
        column.role = if k < stubs { ColumnRole::Stub } else { head_role(text, grid, column) };
    }
    settle(text, grid, &mut columns, &looks);
    inherit_sizes(text, grid, &mut columns);
    columns
}

/// How often the cells of a column have each look.
#[derive(Clone, Copy, Default)]
struct Looks {
    words: u32,
    summary: u32,
    fraction: u32,
    range: u32,
    number: u32,
    bound: u32,
    /// Numbers that a p-value may be: `0.03`, `.03`, `1`.
    shares: u32,
    /// Figures behind a symbol: `F = 3.2`, `χ2(1) = 4.1`.
    symbols: u32,
}

impl Looks {
    fn filled(&self) -> u32 {
        self.words + self.summary + self.fraction + self.range + self.number + self.bound
    }
}

fn looks(text: &Text, body: &[Cell], count: usize) -> Vec<Looks> {
    let mut looks = vec![Looks::default(); count];
    for cell in body.iter().filter(|c| c.column_span <= 1) {
        let Some(of) = looks.get_mut(cell.column as usize) else { continue };
        match text.look(cell) {
            Look::Empty => {}
            Look::Words => {
                of.words += 1;
                of.symbols += u32::from(figures::shows_symbol(text.of(cell)));
            }
            Look::Summary => of.summary += 1,
            Look::Fraction => of.fraction += 1,
            Look::Range => of.range += 1,
            Look::Number => {
                of.number += 1;
                of.shares += u32::from(figures::may_be_p(text.of(cell)));
            }
            Look::Bound => of.bound += 1,
        }
    }
    looks
}

/// The role that the heads over a column give it, from the lowest up.
fn head_role(text: &Text, grid: &Grid, column: &Column) -> ColumnRole {
    let mut found = ColumnRole::Other;
    let names = || {
        let names = column.path.iter().map(|&h| header::name(text.block, &grid.cells[h])).filter(|n| !n.is_empty());
        names.collect::<Vec<_>>().join(", ")
    };
    for &index in column.path.iter().rev() {
        let role = text.role(&grid.cells[index]);
        found = match (found, role) {
            // A size below its name.
            (ColumnRole::Other, ColumnRole::Group { label, n }) if label.is_empty() => {
                ColumnRole::Group { label: names(), n }
            }
            (ColumnRole::Other, role) => role,
            // "%" below "Tea (n = 24)": what it is stands lowest.
            (found, _) => return found,
        };
    }
    found
}

/// Words of a head that make a column one of labels whatever its cells look like.
const LABELS: &[&str] = &[
    "category",
    "categories",
    "group",
    "variable",
    "measure",
    "time",
    "visit",
    "level",
    "subgroup",
    "item",
    "scale",
    "test",
    "period",
    "unit",
    "units",
];

/// How many columns from the left hold labels: the first, and those behind it whose cells hold hardly a figure.
fn stub_columns(text: &Text, grid: &Grid, columns: &[Column], looks: &[Looks]) -> usize {
    let mut stubs = 1.min(columns.len());
    while stubs < 3 && stubs + 2 <= columns.len() {
        let (column, of) = (&columns[stubs], looks[stubs]);
        let head = column.header.map_or(String::new(), |h| text.folded(&grid.cells[h]));
        let role = head_role(text, grid, column);
        let figures = of.summary + of.fraction + of.number + of.bound;
        // `Group: tea, mean | SE`: half of a summary is no label.
        let halved = columns.get(stubs + 1).is_some_and(|c| matches!(head_role(text, grid, c), ColumnRole::Part(_)));
        // So is a symbol no label: `Post-test z`.
        let symbol = header::ends_in_symbol(&head) && of.number == of.filled();
        let named = header::words(&head).any(|w| LABELS.contains(&w))
            && of.summary == 0
            && !head.contains('=')
            && !halved
            && !symbol;
        let labels =
            of.words > 0 && of.words >= 2 * figures || named && figures + of.range + of.words > 0 && of.bound == 0;
        let role_free = matches!(role, ColumnRole::Other) && !(header::is_size_label(&head));
        // The last columns are those of figures.
        if !(role_free && labels) || columns.len() - stubs < 2 {
            break;
        }
        stubs += 1;
    }
    stubs
}

/// Settles by the cells what the heads leave open or say wrongly.
fn settle(text: &Text, grid: &Grid, columns: &mut [Column], looks: &[Looks]) {
    let letters =
        columns.iter().any(|c| c.header.is_some_and(|h| matches!(text.folded(&grid.cells[h]).as_str(), "a" | "c")));
    let some_p = columns.iter().any(|c| c.role == ColumnRole::P);
    let heads: Vec<String> =
        columns.iter().map(|c| c.header.map_or(String::new(), |h| text.folded(&grid.cells[h]))).collect();
    for k in 0..columns.len() {
        let of = looks[k];
        let left = k.checked_sub(1).map(|j| columns[j].role.clone());
        let role = match &columns[k].role {
            ColumnRole::Stub => continue,
            ColumnRole::P if of.summary > of.number + of.bound => ColumnRole::Other,
            // `P~CO2~`, `P~max~`: a symbol of something else.
            ColumnRole::P if of.shares < of.number && !header::is_p(&heads[k]) => ColumnRole::Other,
            // "Group differences" over `F = 0.36, NS`: the cells say themselves what they are.
            ColumnRole::Estimate | ColumnRole::Interval if 2 * of.symbols > of.filled() => ColumnRole::Other,
            // "…, n = 30, Pearson r": the size is that of all who were measured.
            ColumnRole::Group { .. }
                if (heads[k].ends_with("pearson r") || heads[k].ends_with("spearman r"))
                    && of.number > 0
                    && of.shares == of.number =>
            {
                ColumnRole::Statistic
            }
            ColumnRole::Other | ColumnRole::Estimate
                if header::ends_in_symbol(&heads[k])
                    && of.number > 0
                    && of.number == of.filled()
                    && (heads[k].ends_with(['r', 'o', 'ρ']) && of.shares == of.number
                        || columns.get(k + 1).is_some_and(|c| c.role == ColumnRole::P)) =>
            {
                ColumnRole::Statistic
            }
            // A single letter is a symbol only where results stand.
            ColumnRole::Statistic if !some_p && of.number < of.filled() => ColumnRole::Other,
            ColumnRole::Estimate if of.range > of.summary + of.number && columns_left_estimate(columns, k) => {
                ColumnRole::Interval
            }
            // Two groups called A and B, and no regression.
            ColumnRole::Estimate if matches!(heads[k].as_str(), "b" | "d") && (of.summary > 0 || letters) => {
                ColumnRole::Other
            }
            // "to" between two limits.
            ColumnRole::Interval if of.words > 0 && of.words == of.filled() => ColumnRole::Other,
            ColumnRole::Interval if of.summary > of.range => ColumnRole::Estimate,
            ColumnRole::Interval if of.number > of.range => ColumnRole::Lower,
            ColumnRole::Part(part) => match (part, &left) {
                (_, Some(ColumnRole::Stub) | None) => ColumnRole::Other,
                // A column of percentages of its own.
                (Part::Percent, Some(left)) if !left.summarises() && *left != ColumnRole::Other => ColumnRole::Other,
                (part, _) => ColumnRole::Part(*part),
            },
            ColumnRole::Other
                if of.number > 0
                    && 2 * of.number >= of.filled()
                    && columns.get(k + 1).is_none_or(|c| c.role != ColumnRole::Part(Part::Percent))
                    && is_size(&heads[k], looks.get(k + 1)) =>
            {
                ColumnRole::Size
            }
            // The second limit of an interval whose head stands over the first only.
            ColumnRole::Other
                if heads[k].is_empty()
                    && of.number > 0
                    && of.number == of.filled()
                    && follows_lower(columns, looks, k) =>
            {
                ColumnRole::Upper
            }
            ColumnRole::Other
                if heads[k].is_empty()
                    && of.range > 0
                    && of.range == of.filled()
                    && left == Some(ColumnRole::Estimate) =>
            {
                ColumnRole::Interval
            }
            // `>0.05`, `<0.01`: bounds and nothing else.
            // "Intervention − control": what the columns named in it differ by.
            ColumnRole::Other if is_contrast(text, grid, columns, k, &heads[k]) => ColumnRole::Estimate,
            ColumnRole::Other if of.bound >= 2 && of.bound + 1 >= of.filled() && of.summary == 0 => ColumnRole::P,
            other => other.clone(),
        };
        columns[k].role = role;
    }
    // Two limits under one head: the first is the lower one, the second the upper.
    for k in 1..columns.len() {
        let joins = columns[k - 1].role == ColumnRole::Other && looks[k - 1].words > 0;
        let before = if joins && k > 1 { k - 2 } else { k - 1 };
        if columns[k].role == ColumnRole::Lower
            && columns[before].role == ColumnRole::Lower
            && columns[k].header == columns[before].header
        {
            columns[k].role = ColumnRole::Upper;
        }
    }
    group_columns(text, grid, columns, looks, &heads);
    own_intervals(grid, columns);
}

/// Whether an estimate stands right to the left.
fn columns_left_estimate(columns: &[Column], k: usize) -> bool {
    k > 0 && columns[k - 1].role == ColumnRole::Estimate
}

/// Intervals under the head of one group, with other groups behind them, are those of the group's mean.
fn own_intervals(grid: &Grid, columns: &mut [Column]) {
    let mut some = false;
    let last_group = columns.iter().rposition(|c| matches!(c.role, ColumnRole::Group { .. }));
    for k in 1..columns.len() {
        let spans = |h: usize| grid.cells[h].column_span > 1;
        let shared = columns[k].path.first() == columns[k - 1].path.first()
            && columns[k].path.first().is_some_and(|&h| spans(h));
        let alone = last_group.is_some_and(|g| g > k) || some;
        if columns[k].role == ColumnRole::Interval
            && columns[k].path.len() > 1
            && columns[k - 1].role.summarises()
            && shared
            && alone
        {
            columns[k].role = ColumnRole::Part(Part::Ci);
            some = true;
        }
    }
}

/// A head of sizes: `N`, or `Drug arm No. households` in front of a column of summaries.
fn is_size(head: &str, next: Option<&Looks>) -> bool {
    let ends = |end: &str| head.ends_with(end);
    header::is_size_label(head)
        || next.is_some_and(|n| n.summary > 0 && 2 * n.summary >= n.filled())
            && !head.contains('%')
            && header::words(head).count() <= 8
            && (ends(" n") || header::size_words_at_end(head))
}

/// Whether a head sets the names of two columns of figures against each other: `Tea − water (SE)`.
fn is_contrast(text: &Text, grid: &Grid, columns: &[Column], k: usize, head: &str) -> bool {
    let against = head.contains([' ', '-', '–', '−'])
        && (header::words(head).any(|w| matches!(w, "vs" | "versus" | "minus"))
            || head
                .split([' ', '('])
                .any(|w| matches!(w, "-" | "–" | "−") || w.ends_with(['-', '–', '−']) && w.len() > 3));
    let left = columns[..k].iter().rev().take(4).filter(|c| !matches!(c.role, ColumnRole::Stub) && !c.role.compares());
    let named = left.filter(|c| {
        c.header.is_some_and(|h| {
            let name = text.folded(&grid.cells[h]);
            header::words(&name).next().is_some_and(|first| header::words(head).any(|w| w == first))
        })
    });
    against && named.count() >= 1
}

/// Whether a lower limit stands to the left, with nothing but "to" between.
fn follows_lower(columns: &[Column], looks: &[Looks], k: usize) -> bool {
    let joins = |j: usize| looks[j].words > 0 && looks[j].words == looks[j].filled();
    match k.checked_sub(1) {
        Some(j) if columns[j].role == ColumnRole::Lower => true,
        Some(j) if joins(j) => j > 0 && columns[j - 1].role == ColumnRole::Lower,
        _ => false,
    }
}

/// Columns without a size in their head that hold summaries all the same, and columns of figures beside them.
fn group_columns(text: &Text, grid: &Grid, columns: &mut [Column], looks: &[Looks], heads: &[String]) {
    let name = |column: &Column| {
        let names: Vec<String> =
            column.path.iter().map(|&h| header::name(text.block, &grid.cells[h])).filter(|n| !n.is_empty()).collect();
        names.join(", ")
    };
    let mut some = columns.iter().any(|c| c.role.summarises());
    for k in 0..columns.len() {
        let summaries = looks[k].summary + looks[k].fraction;
        if columns[k].role == ColumnRole::Other && summaries > 0 && 2 * summaries >= looks[k].range {
            let label = name(&columns[k]);
            columns[k].role = ColumnRole::Group { label, n: None };
            some = true;
        }
    }
    // Bare figures: beside summaries, or where halves of summaries or a P follow.
    let results = columns.iter().any(|c| c.role == ColumnRole::P);
    let halves = columns.iter().any(|c| matches!(c.role, ColumnRole::Part(_)));
    for k in 0..columns.len() {
        let of = looks[k];
        let bare = columns[k].role == ColumnRole::Other && of.number > 0 && 2 * of.number >= of.filled();
        // A column of figures among results is one of theirs.
        let compares = |j: Option<usize>| j.and_then(|j| columns.get(j)).is_some_and(|c| c.role.compares());
        let among = compares(k.checked_sub(1)) && compares(Some(k + 1));
        let whole_head = !heads[k].is_empty() && !among;
        if bare && whole_head && (some || results || halves) {
            let label = name(&columns[k]);
            columns[k].role = ColumnRole::Group { label, n: None };
        }
    }
}

/// A size that stands over the first of several columns only, as in a header whose spans were lost: the columns after
/// it that are other times of the same group have it as well.
fn inherit_sizes(text: &Text, grid: &Grid, columns: &mut [Column]) {
    let mut last: Option<(super::Size, bool)> = None;
    for column in columns.iter_mut() {
        let Some(head) = column.header.map(|h| text.folded(&grid.cells[h])) else {
            // "Tea (n = 12) Pre Post" over two columns, of which the second has no head.
            let left = last.take();
            if let (ColumnRole::Group { n: n @ None, .. }, Some((size, true))) = (&mut column.role, left) {
                *n = Some(size);
            }
            continue;
        };
        match &mut column.role {
            ColumnRole::Group { n: Some(size), .. } => last = Some((*size, header::names_two_times(&head))),
            ColumnRole::Group { n, .. } => match last {
                Some((size, _)) if header::names_time(&head) && header::timeless(&head).0.is_empty() => {
                    *n = Some(size);
                }
                _ => last = None,
            },
            ColumnRole::Part(_) => {}
            role if role.compares() => {}
            _ => last = None,
        }
    }
}

/// Tells the column of all participants from the groups: by its name, or as the sum of at least two others.
pub(super) fn find_overall(text: &Text, grid: &Grid, columns: &mut [Column]) {
    let sizes: Vec<(usize, u64)> =
        columns.iter().enumerate().filter_map(|(i, c)| Some((i, c.role.size()?.value))).collect();
    let sum: u64 = sizes.iter().map(|s| s.1).fold(0, u64::saturating_add);
    let whole = sizes.iter().find(|&&(_, n)| sizes.len() >= 3 && n == sum.saturating_sub(n)).map(|s| s.0);
    for (i, column) in columns.iter_mut().enumerate() {
        let named = column.path.iter().any(|&h| header::is_overall(&text.folded(&grid.cells[h])));
        if let ColumnRole::Group { label, n } = &column.role
            && (whole == Some(i) || named || header::is_overall(label))
        {
            column.role = ColumnRole::Overall { label: label.clone(), n: *n };
        }
    }
}

/// Splits the columns into groups and the results behind them.
pub(super) fn panels(text: &Text, grid: &Grid, columns: &mut [Column]) -> Vec<Panel> {
    let mut panels: Vec<Panel> = Vec::new();
    let mut open = Panel::default();
    let mut results: Vec<usize> = Vec::new();
    let mut bundle = 0;
    for k in 0..=columns.len() {
        let group = matches!(columns.get(k).map(|c| &c.role), Some(ColumnRole::Group { .. }));
        if (k == columns.len() || group) && !results.is_empty() {
            close(text, grid, columns, &mut open, &results, &mut bundle);
            let number = panels.len();
            for &c in open.groups.iter().chain(&results) {
                columns[c].panel = Some(number);
            }
            panels.push(std::mem::take(&mut open));
            results.clear();
        }
        match columns.get(k).map(|c| &c.role) {
            Some(ColumnRole::Group { .. }) => open.groups.push(k),
            Some(role) if role.compares() => results.push(k),
            _ => {}
        }
    }
    // `P | A | B`: the P stands in front of all groups.
    if let [first] = &mut panels[..]
        && first.groups.is_empty()
        && open.groups.len() > 1
    {
        first.groups = std::mem::take(&mut open.groups);
        judge(text, grid, columns, first);
        for &c in &first.groups {
            columns[c].panel = Some(0);
        }
    }
    if !open.groups.is_empty() {
        judge(text, grid, columns, &mut open);
        // Results in front of their groups: `P | A | B`.
        let number = panels.len();
        for &c in &open.groups {
            columns[c].panel = Some(number);
        }
        panels.push(open);
    }
    panels
}

/// Finishes a panel: which of its results belong together, and how certain its groups are.
fn close(text: &Text, grid: &Grid, columns: &mut [Column], panel: &mut Panel, results: &[usize], bundle: &mut usize) {
    judge(text, grid, columns, panel);
    let p = results.iter().filter(|&&k| columns[k].role == ColumnRole::P).count();
    let ends_with_p = results.last().is_some_and(|&k| columns[k].role == ColumnRole::P);
    let first = &columns[results[0]].role.clone();
    let repeats = results.iter().filter(|&&k| columns[k].role == *first).count() > 1;
    *bundle += 1;
    let mut seen: Vec<ColumnRole> = Vec::new();
    for (i, &k) in results.iter().enumerate() {
        let role = columns[k].role.clone();
        let starts = if ends_with_p || !repeats { seen.contains(&role) } else { role == *first && i > 0 };
        if starts {
            *bundle += 1;
            seen.clear();
        }
        columns[k].bundle = *bundle;
        let ends = ends_with_p && role == ColumnRole::P;
        seen.push(role);
        if ends {
            *bundle += 1;
            seen.clear();
        }
    }
    let groups = panel.groups.len();
    // A P right behind the groups is theirs, whatever the P of an estimate behind it is.
    let first_bundle = columns[results[0]].bundle;
    let estimate_behind =
        results.iter().any(|&k| columns[k].role == ColumnRole::Estimate && columns[k].bundle != first_bundle);
    for &k in results {
        let plain = columns[k].role != ColumnRole::P
            || columns[k].path.iter().all(|&h| header::is_plain_p(&text.folded(&grid.cells[h]), groups));
        let own = p <= 1 || estimate_behind && columns[k].bundle == first_bundle;
        columns[k].doubtful = panel.doubtful || !plain || !own || groups > MOST_GROUPS;
    }
}

/// Tells groups from times, and groups of their own name from others.
fn judge(text: &Text, grid: &Grid, columns: &[Column], panel: &mut Panel) {
    let mut keys: Vec<(String, bool)> = Vec::new();
    let mut last = String::new();
    for &k in panel.groups.iter().take(MOST_GROUPS) {
        let mut key = String::new();
        let mut timed = false;
        // Without a head of its own: another time of the group to its left.
        if let ([], Some((left, was_timed))) = (&columns[k].path[..], keys.last()) {
            key.clone_from(left);
            timed = *was_timed;
        }
        for &h in &columns[k].path {
            let (part, time) = header::timeless(&text.folded(&grid.cells[h]));
            key.push_str(&part);
            timed |= time;
        }
        // A time without a group below a header whose spans were lost.
        if key.is_empty() && timed {
            key.clone_from(&last);
        }
        last.clone_from(&key);
        keys.push((key, timed));
    }
    let timed = keys.iter().any(|k| k.1);
    let mut names: Vec<&str> = keys.iter().map(|k| k.0.as_str()).collect();
    names.sort_unstable();
    let all = names.len();
    names.dedup();
    panel.times = timed && names.len() == 1 && all > 1;
    // Names that differ by figures only ("Group 1", "Group 2") are names.
    let numbered = !timed && names.len() < all && {
        let mut heads: Vec<String> = panel
            .groups
            .iter()
            .take(MOST_GROUPS)
            .map(|&k| columns[k].path.iter().map(|&h| text.folded(&grid.cells[h])).collect::<Vec<_>>().join(" "))
            .collect();
        heads.sort_unstable();
        heads.dedup();
        heads.len() == all
    };
    panel.doubtful |= names.len() < all && !panel.times && !numbered;
}
