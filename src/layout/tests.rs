use super::*;
use crate::manuscript::{BlockKind, Mark, MarkKind};
use crate::text::PieceTable;

/// A table block of these rows; the first is the header. `^a^` is raised.
fn table(rows: &[&[&str]]) -> (Block, Grid) {
    let columns = rows.iter().map(|r| r.len()).max().unwrap_or(0) as u32;
    let mut grid = Grid { rows: rows.len() as u32, columns, header_rows: 1, cells: Vec::new() };
    let (mut text, mut marks) = (String::new(), Vec::new());
    for (r, row) in rows.iter().enumerate() {
        for (c, cell) in row.iter().enumerate() {
            let start = text.len() as u32;
            for (i, piece) in cell.split('^').enumerate() {
                let from = text.len() as u32;
                text.push_str(piece);
                if i % 2 == 1 {
                    marks.push(Mark { start: from, end: text.len() as u32, kind: MarkKind::Superscript });
                }
            }
            let end = text.len() as u32;
            grid.cells.push(Cell { row: r as u32, column: c as u32, row_span: 1, column_span: 1, start, end });
            text.push(if c + 1 == row.len() { '\n' } else { '\t' });
        }
    }
    let kind = BlockKind::Table(grid.clone());
    (Block { kind, section: 0, text, pieces: PieceTable::default(), marks }, grid)
}

fn layout(rows: &[&[&str]]) -> Layout {
    let (block, grid) = table(rows);
    Layout::of(&block, 0, &grid)
}

/// One word for each column.
fn roles(layout: &Layout) -> Vec<String> {
    layout
        .columns
        .iter()
        .map(|c| match &c.role {
            ColumnRole::Group { label, n } => format!("{label}={}", n.map_or(0, |n| n.value)),
            ColumnRole::Overall { label, n } => format!("all {label}={}", n.map_or(0, |n| n.value)),
            role => format!("{role:?}"),
        })
        .collect()
}

#[test]
fn groups_estimate_and_p() {
    let l = layout(&[
        &["Outcome", "Tea group (n = 24)^a^", "WaterN=1,025 mean (SD)", "Total (n=1049)", "OR (95% CI)", "P-value*"],
        &["Thirst", "3 (12)", "4 (1)", "7 (1)", "2.0 (1.0 to 4.0)", "0.2"],
    ]);
    // `WaterN` may be a word: the size is left alone.
    assert_eq!(roles(&l), ["Stub", "Tea group=24", "WaterN=1,025=0", "all Total=1049", "Estimate", "P"]);
    let l = layout(&[
        &["Outcome", "Tea group (n = 24)^a^", "Water N=1,025 mean (SD)", "Total (n=1049)", "OR (95% CI)", "P-value*"],
        &["Thirst", "3 (12)", "4 (1)", "7 (1)", "2.0 (1.0 to 4.0)", "0.2"],
    ]);
    assert_eq!(roles(&l), ["Stub", "Tea group=24", "Water=1025", "all Total=1049", "Estimate", "P"]);
}

#[test]
fn the_sum_of_the_others_is_the_whole() {
    let l = layout(&[&["", "Both (n = 30)", "A (n = 14)", "B (n = 16)"], &["Age", "1", "2", "3"]]);
    assert_eq!(roles(&l), ["Stub", "all Both=30", "A=14", "B=16"]);
}

#[test]
fn sizes_in_a_row_of_their_own() {
    for row in [["", "n = 12", "(N = 14)", ""], ["N", "12", "14", ""]] {
        let l = layout(&[&["", "A", "B", "P"], &row, &["Age", "2", "3", "0.4"]]);
        assert_eq!(roles(&l), ["Stub", "A=12", "B=14", "P"], "{row:?}");
    }
    let l = layout(&[&["", "A", "B", "P"], &["Age", "12", "14", ""]]);
    assert_eq!(roles(&l), ["Stub", "A=0", "B=0", "P"]);
}

#[test]
fn rows_have_sections() {
    let l = layout(&[
        &["", "A (n = 12)", "B (n = 14)", "P"],
        &["Sex", "", "", "0.3"],
        &["Women", "3", "4", ""],
        &["", "", "", ""],
        &["P value", "0.1", "0.2", ""],
    ]);
    let roles: Vec<_> = l.rows.iter().map(|r| r.role).collect();
    assert_eq!(roles, [RowRole::Header, RowRole::Section, RowRole::Data, RowRole::Blank, RowRole::P]);
    assert_eq!(l.rows[2].section, Some(4));
    assert_eq!(l.rows[2].labels, [8]);
}

#[test]
fn labels_in_two_columns() {
    let l = layout(&[
        &["", "", "A (n = 12)", "B (n = 14)", "P"],
        &["Weight", "Week 1", "3", "4", "0.3"],
        &["", "Week 9", "3", "4", "0.3"],
    ]);
    assert_eq!(l.rows[2].section, Some(5));
    assert_eq!(l.rows[2].labels, [11]);
}

#[test]
fn what_is_doubtful_about_a_comparison_is_kept_with_it() {
    let heads: [&[&str]; 4] = [
        &["", "Before (n = 12)", "After (n = 12)", "P"],
        &["", "A (n = 12)", "A (n = 12)", "P"],
        &["", "A (n = 12)", "B (n = 14)", "P for trend"],
        &["", "Tea before (n = 12)", "Tea after (n = 12)", "Water before (n = 9)", "P"],
    ];
    for head in heads {
        let l = layout(&[head, &["Age", "2", "3", "4", "0.4"]]);
        let p = l.columns.iter().position(|c| c.role == ColumnRole::P).expect("a P");
        assert!(l.columns[p].doubtful || l.panels[0].times, "{head:?}");
    }
    let l = layout(&[&["", "A (n = 12)", "B (n = 14)", "P"], &["Age", "2", "3", "0.4"]]);
    assert!(!l.columns[3].doubtful && !l.panels[0].times);
    assert_eq!(l.panels[0].groups, [1, 2]);
}

#[test]
fn any_text_has_a_layout() {
    for text in
        ["", "n =", "n = –140", "n=1–2", "= 3", "ｎ＝3", "N =\u{2009}9\u{2009}999", "P", "n = 99999999999999999999999"]
    {
        let l = layout(&[&[text, text, text], &[text, text]]);
        assert_eq!(l.columns.len(), 3);
        layout(&[&[text]]);
    }
    assert!(layout(&[]).columns.is_empty());
}
