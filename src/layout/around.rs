//! The paragraphs that belong to a table: its caption before it, its notes behind it.

use crate::manuscript::{Block, BlockKind, Manuscript, MarkKind};
use std::ops::Range;

/// Blocks of the manuscript.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Around {
    pub caption: Range<usize>,
    pub notes: Range<usize>,
}

/// How many blocks are taken for notes at most.
const MOST_NOTES: usize = 40;

/// The caption and notes of the table that is block number `table`.
pub fn around(manuscript: &Manuscript, table: usize) -> Around {
    let blocks = &manuscript.blocks;
    // The title may stand in a paragraph of its own below "Table 1".
    let named = |i: usize| names_table(&blocks[i]);
    let first = (table.saturating_sub(2)..table)
        .rev()
        .take_while(|&i| matches!(blocks[i].kind, BlockKind::Paragraph | BlockKind::Caption))
        .find(|&i| named(i) && (i + 1 == table || blocks[i + 1].text.len() < 300))
        .or_else(|| table.checked_sub(1).filter(|&i| blocks[i].kind == BlockKind::Caption));
    let last = (table + 1..blocks.len())
        .take(MOST_NOTES)
        .find(|&i| !is_note(&blocks[i]))
        .unwrap_or((table + 1 + MOST_NOTES).min(blocks.len()));
    Around { caption: first.unwrap_or(table)..table, notes: table + 1..last }
}

/// "Table 1.", "Table-II"
fn names_table(block: &Block) -> bool {
    let text = block.text.trim_start();
    text.get(..5).is_some_and(|t| t.eq_ignore_ascii_case("table"))
        && text[5..].chars().find(|c| c.is_alphanumeric()).is_some_and(|c| c.is_ascii_digit() || "IVXSA".contains(c))
}

/// Words that open notes, not running text.
const OPENINGS: &[&str] = &[
    "values are",
    "values were",
    "values in",
    "values represent",
    "values present",
    "values given",
    "all values",
    "data are",
    "data were",
    "data presented",
    "data represent",
    "data given",
    "data in",
    "all data",
    "results are",
    "results expressed",
    "results were",
    "results presented",
    "figures are",
    "numbers are",
    "numbers in",
    "note:",
    "note.",
    "notes:",
    "notes.",
    "abbreviations",
    "plus-minus",
    "plus–minus",
    "continuous variables",
    "categorical variables",
    "continuous data",
    "categorical data",
    "variables are",
    "p value",
    "p-value",
    "p values",
    "p-values",
    "p <",
    "p<",
    "p ≤",
    "p:",
    "n =",
    "n=",
    "n:",
    "sd =",
    "sd:",
    "sd,",
    "sd ",
    "se =",
    "se:",
    "sem",
    "ci =",
    "ci:",
    "ci,",
    "iqr",
    "mean",
    "means",
    "footnote",
    "expressed as",
    "presented as",
    "shown are",
    "ns =",
    "ns:",
    "ns,",
    "mean (",
    "mean ±",
    "median",
    "unless otherwise",
    "the median",
    "the mean",
    "the values",
    "means ",
    "medians",
    "percentages",
    "number (",
    "n (%",
    "statistical",
    "different letters",
    "results represent",
    "values expressed",
    "data expressed",
    "comparison",
    "test of",
    "tests of",
    "t test",
    "t-test",
    "chi-square",
    "chi square",
    "mann-whitney",
    "fisher",
    "student",
    "anova",
    "all p",
    "bold",
    "estimates",
    "effect estimates",
    "estimated",
    "ns ",
];

fn is_note(block: &Block) -> bool {
    match block.kind {
        BlockKind::Footnote => return true,
        BlockKind::Paragraph | BlockKind::ListItem => {}
        _ => return false,
    }
    let text = block.text.trim_start();
    if names_table(block) {
        return false;
    }
    let skipped = (block.text.len() - text.len()) as u32;
    if text.starts_with(['*', '†', '‡', '§', '¶', '#', '$', '∗', ':'])
        || block.marked(MarkKind::Superscript, skipped, skipped + 1)
    {
        return true;
    }
    // `*MPR* mediation possession ratio`: an abbreviation set apart.
    if block.marked(MarkKind::Emphasis, skipped, skipped + 1) {
        let first: String = text.chars().take_while(|c| !c.is_whitespace()).collect();
        if (2..=12).contains(&first.chars().count()) && first.chars().filter(|c| c.is_uppercase()).count() >= 2 {
            return true;
        }
    }
    let opening: String = text.chars().take(28).flat_map(char::to_lowercase).collect();
    OPENINGS.iter().any(|w| opening.starts_with(w)) || lists_abbreviations(text)
}

/// `CK, creatine kinase; LDH, lactate dehydrogenase`, `MP = Methylprednisolone;`, `BP indicates …`
fn lists_abbreviations(text: &str) -> bool {
    let end = text.find([',', '=', ':', ' ']).unwrap_or(0);
    let short = &text[..end];
    let capitals = short.chars().filter(|c| c.is_uppercase()).count();
    let rest = text[end..].trim_start();
    (2..=10).contains(&short.chars().count())
        && capitals >= 2
        && (rest.starts_with(['=', ':']) || rest.starts_with("indicates") || text[end..].starts_with(','))
}
