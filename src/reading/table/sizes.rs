//! The sizes of groups where the header gives none: from the row, from the caption, from counts with their percentages.

use super::super::sentence::SentenceView;
use super::super::{Figure, Inference};
use super::cell::{self, At, Form};
use super::summary::Sized;
use super::{Setting, Table};
use crate::layout::{ColumnRole, Part, Row, RowRole, Size};
use crate::printed::{Printed, totals_that_fit};
use crate::text::Span;

fn sized(size: Size, inference: Inference) -> Sized {
    Sized { value: size.value, figure: Figure::inferred(Printed::whole(size.value), inference, size.span) }
}

impl Table<'_> {
    /// The size of the group in a cell: from its row, from its head, from its column's figures, from the caption.
    pub(super) fn size_of(&self, row: &Row, index: usize, setting: &Setting) -> Option<Sized> {
        let column = self.grid.cells[index].column as usize;
        let is_size = |&i: &usize| *self.role_of(i) == ColumnRole::Size;
        let beside = index.checked_sub(1).filter(|i| row.cells.contains(i)).filter(is_size);
        let first = setting.size_columns.first().filter(|_| self.layout.rows_are_groups);
        let of_row = first.and_then(|&k| self.layout.cell_in(self.grid, row, k));
        // One column of sizes beside several groups is of all of them.
        let several = || setting.size_columns.len() > 1 || self.layout.rows_are_groups;
        if let Some(cell) = beside.filter(|_| several()).or(of_row) {
            return self.printed_size(cell);
        }
        if self.layout.rows_are_groups
            && let Some(size) = row.own_size
        {
            return Some(sized(size, Inference::Header));
        }
        let header = self.layout.size(row, column).map(|s| sized(s, Inference::Header));
        header.or_else(|| setting.shown.get(column).copied().flatten()).or(setting.noted)
    }

    /// The percentage in the next cell, where that is a column of percentages.
    fn percent_beside(&self, index: usize) -> Option<Printed> {
        let next = self.grid.cells.get(index + 1)?;
        if *self.layout.role(next) != ColumnRole::Part(Part::Percent) {
            return None;
        }
        match cell::read(&self.view(index + 1))[..] {
            [cell::Read { form: Form::Single { value, .. }, .. }] => Some(value.printed),
            _ => None,
        }
    }

    fn printed_size(&self, cell: usize) -> Option<Sized> {
        let view = self.view(cell);
        let [cell::Read { form: Form::Single { value, percent: false }, .. }] = cell::read(&view)[..] else {
            return None;
        };
        let n = value.printed.count().filter(|&n| n > 0)?;
        let figure = Figure::at(value.printed, view.span(value.first, value.last));
        Some(Sized { value: n, figure })
    }
}

/// The one `n = 12` of a caption and notes, or the one number of people there; several leave it open.
pub(super) fn noted<'a>(views: impl Iterator<Item = SentenceView<'a>>, single: bool) -> Option<Sized> {
    let mut found: Option<Sized> = None;
    for view in views {
        for i in 0..view.len() {
            let at = if view.eq(i, "n") && view.sign(i + 1, '=') {
                i + 2
            } else if single && view.number(i).is_some() && counts_people(&view, i) {
                i
            } else {
                continue;
            };
            let value = view.number(at)?.count().filter(|&n| n > 0)?;
            if found.is_some_and(|f| f.value != value) {
                return None;
            }
            found = Some(sized(Size { value, span: view.span(at, at) }, Inference::ArmSize));
        }
    }
    found
}

/// `15 healthy male subjects`
fn counts_people(view: &SentenceView, i: usize) -> bool {
    const PEOPLE: &[&str] =
        &["subjects", "patients", "participants", "volunteers", "individuals", "children", "adults"];
    for k in i + 1..(i + 6).min(view.len()) {
        if view.any(k, PEOPLE) {
            return true;
        }
        if !view.get(k).is_some_and(|t| t.is_word()) {
            return false;
        }
    }
    false
}

/// The size that the counts and percentages of a column have in common, where its head gives none.
pub(super) fn shown(table: &Table) -> Vec<Option<Sized>> {
    let mut ranges: Vec<Vec<(u64, u64, Span)>> = vec![Vec::new(); table.layout.columns.len()];
    let mut sexes: Vec<Option<Sized>> = vec![None; ranges.len()];
    let mut totals: Vec<Option<Sized>> = vec![None; ranges.len()];
    let wanted = |k: usize| table.layout.columns.get(k).is_some_and(|c| c.role.summarises() && c.role.size().is_none());
    if !(0..ranges.len()).any(wanted) {
        return vec![None; ranges.len()];
    }
    for row in table.layout.rows.iter().filter(|r| r.role == RowRole::Data) {
        for index in row.cells.clone() {
            let column = table.grid.cells[index].column as usize;
            if !wanted(column) || table.layout.size(row, column).is_some() {
                continue;
            }
            let view = table.view(index);
            let reads = cell::read(&view);
            // A row of totals, borne out below by counts with their percentages.
            if let [cell::Read { form: Form::Single { value, percent: false }, .. }] = reads[..]
                && row.labels.last().is_some_and(|&l| says_total(&table.view(l)))
                && let Some(n) = value.printed.count().filter(|&n| n > 0)
            {
                let span = view.span(value.first, value.last);
                totals[column] = Some(sized(Size { value: n, span }, Inference::Header));
            }
            // Men and women make the group.
            if let [cell::Read { form: Form::Fraction { events, total, percent: None }, .. }] = reads[..]
                && row.labels.iter().any(|&l| super::summary::names_sexes(&table.view(l)))
                && let (Some(a), Some(b)) = (events.printed.count(), total.printed.count())
                && let Some(value) = a.checked_add(b).filter(|&n| n > 0)
            {
                let span = view.span(events.first, total.last);
                sexes[column] = Some(sized(Size { value, span }, Inference::Categories));
            }
            let (events, percent): (At, Printed) = match reads[..] {
                [cell::Read { form: Form::Bracket { centre, inner, named: None, .. }, .. }] => (centre, inner),
                [cell::Read { form: Form::PercentFirst { percent, events }, .. }] => (events, percent),
                [cell::Read { form: Form::Single { value, percent: false }, .. }] => {
                    match table.percent_beside(index) {
                        Some(percent) => (value, percent),
                        None => continue,
                    }
                }
                _ => continue,
            };
            let Some(count) = events.printed.count().filter(|&e| e > 0 && e < 1_000_000) else { continue };
            let share = percent.rounded();
            if percent.negative || share.lo <= 0.0 || share.hi > 100.1 {
                continue;
            }
            if let Some((least, most)) = totals_that_fit(count, share) {
                ranges[column].push((least, most, view.span(events.first, events.last)));
            }
        }
    }
    let borne_out = |total: &Sized, r: &[(u64, u64, Span)]| {
        let fit = r.iter().filter(|&&(a, b, _)| a <= total.value && total.value <= b).count();
        fit >= 2 && 2 * fit >= r.len()
    };
    let known = |k: usize| totals[k].filter(|t| borne_out(t, &ranges[k])).or_else(|| common(&ranges[k])).or(sexes[k]);
    (0..ranges.len()).map(known).collect()
}

/// "Total", "All patients"
fn says_total(view: &SentenceView) -> bool {
    view.len() <= 3 && view.any(0, &["total", "all", "overall"])
}

/// The one size that most ranges hold, where it is the only such.
fn common(ranges: &[(u64, u64, Span)]) -> Option<Sized> {
    const LEAST: usize = 3;
    let mut ends: Vec<(u64, i32)> = ranges.iter().flat_map(|&(a, b, _)| [(a, 1), (b + 1, -1)]).collect();
    ends.sort_unstable();
    let (mut depth, mut best, mut from, mut width) = (0, 0, 0, u64::MAX);
    for (i, &(at, step)) in ends.iter().enumerate() {
        depth += step;
        let next = ends.get(i + 1).map_or(at, |e| e.0);
        if depth > best && next > at {
            (best, from, width) = (depth, at, next - at);
        }
    }
    let enough = best as usize >= LEAST && 5 * best as usize >= 3 * ranges.len();
    let (_, _, span) = *ranges.first()?;
    (enough && width == 1).then(|| sized(Size { value: from, span }, Inference::FromPercent))
}
