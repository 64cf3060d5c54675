//! Rows: titles, sizes, inner headers, rows of p-values, data; and the labels that carry on.

use super::figures::Look;
use super::{Column, ColumnRole, Row, RowRole, Size, Text, header};
use crate::manuscript::{Cell, Grid};
use std::ops::Range;

pub(super) fn rows(
    text: &Text,
    grid: &Grid,
    runs: &[Range<usize>],
    header_rows: u32,
    stubs: usize,
    columns: &[Column],
) -> Vec<Row> {
    let mut rows = Vec::with_capacity(runs.len());
    let mut section = None;
    // With several columns of labels the first is printed once for several rows.
    let mut carried = None;
    for (number, run) in runs.iter().enumerate() {
        let cells = &grid.cells[run.clone()];
        let is_stub = |c: &Cell| (c.column as usize) < stubs;
        let shown = |c: &Cell| !text.of(c).is_empty();
        let labels: Vec<usize> = run.clone().filter(|&i| is_stub(&grid.cells[i]) && shown(&grid.cells[i])).collect();
        let filled = cells.iter().filter(|c| !is_stub(c) && shown(c)).count();
        let role_of = |c: &Cell| columns.get(c.column as usize).map(|c| &c.role);
        let p_only = filled == 1 && cells.iter().any(|c| shown(c) && role_of(c) == Some(&ColumnRole::P));
        let last_label = labels.last().map(|&i| text.folded(&grid.cells[i]));
        let says = |test: fn(&str) -> bool| last_label.as_deref().is_some_and(test);
        let role = if number < header_rows as usize {
            RowRole::Header
        } else if labels.is_empty() && filled == 0 {
            RowRole::Blank
        } else if says(header::is_p) && filled > 0 {
            RowRole::P
        } else if is_sizes(text, cells, stubs, columns, last_label.as_deref()) {
            RowRole::Sizes
        } else if repeats_header(text, cells, columns) {
            RowRole::Header
        } else if says(header::is_statistic) && filled > 0 {
            RowRole::Statistic
        } else if filled == 0 || (p_only && !labels.is_empty()) {
            RowRole::Section
        } else {
            RowRole::Data
        };
        let own = match role {
            RowRole::Section | RowRole::Data | RowRole::Sizes => {
                labels.iter().rev().find_map(|&i| text.role(&grid.cells[i]).size())
            }
            _ => None,
        };
        match role {
            RowRole::Section | RowRole::Sizes if !labels.is_empty() => {
                let first = labels.first().copied();
                // "N" in front of sizes is no title.
                let titles = role == RowRole::Section || !says(header::is_size_label);
                // With several columns of labels the last may label a row of dashes.
                if titles {
                    section = if role == RowRole::Section && stubs > 1 && labels.len() > 1 {
                        first
                    } else {
                        labels.last().copied()
                    };
                    carried = None;
                }
            }
            RowRole::Data | RowRole::P | RowRole::Statistic if stubs > 1 => {
                if let Some(&first) = labels.first().filter(|&&i| grid.cells[i].column == 0) {
                    carried = (labels.len() > 1).then_some(first);
                    if carried.is_some() {
                        section = carried;
                    }
                } else if carried.is_some() {
                    section = carried;
                }
            }
            _ => {}
        }
        rows.push(Row { role, cells: run.clone(), labels, section, sizes: 0, own_size: own });
    }
    rows
}

/// A row that gives sizes: `n = 24` in every filled cell of figures, or whole numbers in a row labelled N.
fn is_sizes(text: &Text, cells: &[Cell], stubs: usize, columns: &[Column], label: Option<&str>) -> bool {
    let labelled = label.is_some_and(header::is_size_label);
    let mut found = 0;
    for cell in cells.iter().filter(|c| c.column as usize >= stubs && !text.of(c).is_empty()) {
        let compares = columns.get(cell.column as usize).is_some_and(|c| c.role.compares());
        if compares && text.look(cell) == Look::Empty {
            continue;
        }
        if header::size_alone(text.block, text.number, cell, labelled).is_none() {
            return false;
        }
        found += 1;
    }
    found >= 2 || labelled && found >= 1 && columns.len() == stubs + 1
}

/// A row that heads columns anew, in the middle of a table.
fn repeats_header(text: &Text, cells: &[Cell], columns: &[Column]) -> bool {
    cells.iter().any(|c| match columns.get(c.column as usize).map(|c| &c.role) {
        Some(ColumnRole::Stub) | None => false,
        Some(ColumnRole::P) => header::is_p(&text.folded(c)),
        Some(_) => {
            !text.of(c).starts_with(|c: char| c.is_ascii_digit()) && {
                let role = text.role(c);
                role == ColumnRole::P && text.look(c) == Look::Words
                    || role.size().is_some() && text.look(c) == Look::Words
            }
        }
    })
}

/// Collects the sizes that rows of the body print and ties the rows to them. Sizes in front of all data where the header
/// has none are the header's.
pub(super) fn sizes(text: &Text, grid: &Grid, rows: &mut [Row], columns: &mut [Column]) -> Vec<Vec<Option<Size>>> {
    let mut lists: Vec<Vec<Option<Size>>> = Vec::new();
    let mut current = 0;
    let mut budget = 4 * grid.cells.len() + 64;
    let mut data = false;
    for row in rows.iter_mut() {
        let inner = row.role == RowRole::Header && data;
        if row.role == RowRole::Sizes || inner {
            let known = columns.iter().any(|c| c.role.size().is_some());
            let labelled = row.role == RowRole::Sizes;
            let found: Vec<(usize, Size)> = grid.cells[row.cells.clone()]
                .iter()
                .filter_map(|c| {
                    let size = if labelled {
                        header::size_alone(text.block, text.number, c, true)
                    } else {
                        text.role(c).size()
                    };
                    Some((c.column as usize, size?))
                })
                .filter(|&(k, _)| {
                    columns.get(k).is_some_and(|c| !matches!(c.role, ColumnRole::Stub) && !c.role.compares())
                })
                .collect();
            if !known && !data && !found.is_empty() {
                for (k, size) in found {
                    let label = columns[k]
                        .path
                        .iter()
                        .map(|&h| header::name(text.block, &grid.cells[h]))
                        .collect::<Vec<_>>()
                        .join(", ");
                    columns[k].role = ColumnRole::Group { label, n: Some(size) };
                }
                current = 0;
            } else if budget >= columns.len() {
                budget -= columns.len();
                let mut list = vec![None; columns.len()];
                for (k, size) in found {
                    list[k] = Some(size);
                }
                lists.push(list);
                current = lists.len();
            }
        }
        data |= row.role == RowRole::Data;
        row.sizes = current;
    }
    lists
}

/// Words that name groups of participants.
const GROUPS: &[&str] = &[
    "group",
    "groups",
    "arm",
    "arms",
    "treatment",
    "treatments",
    "intervention",
    "control",
    "controls",
    "placebo",
    "experimental",
    "treated",
    "untreated",
];

/// Whether the rows are groups: their labels name groups, and the columns do not.
pub(super) fn are_groups(text: &Text, grid: &Grid, rows: &[Row], columns: &[Column]) -> bool {
    let names = |cell: &Cell| header::words(&text.folded(cell)).any(|w| GROUPS.contains(&w));
    let by_columns = columns
        .iter()
        .filter(|c| c.role.summarises())
        .any(|c| c.role.size().is_some() || c.path.iter().any(|&h| names(&grid.cells[h])));
    if by_columns {
        return false;
    }
    let head = columns.first().and_then(|c| c.header).is_some_and(|h| {
        let head = text.folded(&grid.cells[h]);
        matches!(
            head.as_str(),
            "group" | "groups" | "treatment" | "treatment group" | "arm" | "study group" | "treatments"
        )
    });
    let labelled = rows
        .iter()
        .filter(|r| r.role == RowRole::Data)
        .filter(|r| r.labels.iter().any(|&l| names(&grid.cells[l])))
        .count();
    head || labelled >= 2 || rows.iter().filter(|r| r.role == RowRole::Data && r.own_size.is_some()).count() >= 2
}
