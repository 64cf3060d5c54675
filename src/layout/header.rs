//! What a header cell says: a group with its size, P, an estimate.

use super::{ColumnRole, Size};
use crate::manuscript::{Block, Cell, MarkKind};
use crate::text::Span;

/// Lower case, without raised marks and footnote signs, one space between words.
pub(super) fn folded(block: &Block, start: u32, end: u32) -> String {
    let mut out = String::new();
    let mut at = start;
    let mut push = |piece: &str| {
        for c in piece.chars() {
            match c {
                '*' | '†' | '‡' | '§' | '¶' | '#' | '$' => {}
                c if c.is_whitespace() => {
                    if !out.is_empty() && !out.ends_with(' ') {
                        out.push(' ');
                    }
                }
                c => out.extend(c.to_lowercase()),
            }
        }
    };
    for mark in block.marks_over(start, end).filter(|m| m.kind == MarkKind::Superscript) {
        if mark.start > at {
            push(block.text.get(at as usize..mark.start as usize).unwrap_or(""));
        }
        at = at.max(mark.end);
    }
    if at < end {
        push(block.text.get(at as usize..end as usize).unwrap_or(""));
    }
    out.truncate(out.trim_end().len());
    out
}

/// The words of a folded header.
fn words(folded: &str) -> impl Iterator<Item = &str> {
    folded.split(|c: char| !c.is_alphanumeric()).filter(|w| !w.is_empty())
}

/// The role that a header cell gives its column.
pub(super) fn role(block: &Block, number: usize, cell: &Cell) -> ColumnRole {
    let head = folded(block, cell.start, cell.end);
    if is_p(&head) {
        return ColumnRole::P;
    }
    if is_estimate(&head) {
        return ColumnRole::Estimate;
    }
    let text = block.text.get(cell.start as usize..cell.end as usize).unwrap_or("");
    match size(text) {
        Some((value, at, name)) => {
            let start = cell.start as usize + at.start;
            let n = Some(Size { value, span: Span::new(number, start, cell.start as usize + at.end) });
            let label = label(text, name);
            if is_overall(&label) { ColumnRole::Overall { label, n } } else { ColumnRole::Group { label, n } }
        }
        None => ColumnRole::Other,
    }
}

/// `P`, `P value`, `p-value (t test)`, `P for interaction`, `Sig.`
pub(super) fn is_p(head: &str) -> bool {
    let mut all = words(head);
    match all.next() {
        Some("p" | "pvalue" | "pvalues") => {}
        Some("sig" | "significance") => return all.next().is_none(),
        Some("overall" | "adjusted" | "unadjusted" | "exact" | "nominal") => match all.next() {
            Some("p" | "pvalue") => {}
            _ => return false,
        },
        _ => return false,
    }
    // `P (n = 24)` would be a group called P.
    !head.contains('=') && words(head).count() <= 12
}

/// A P that compares the groups of the row, and says nothing else of itself than by what test.
pub(super) fn is_plain_p(head: &str, groups: usize) -> bool {
    const OTHER: &[&str] = &[
        "trend",
        "interaction",
        "vs",
        "versus",
        "v",
        "within",
        "baseline",
        "time",
        "change",
        "heterogeneity",
        "paired",
        "pre",
        "post",
        "before",
        "after",
        "and",
        "noninferiority",
        "inferiority",
    ];
    // Of two groups there is only one comparison, named or not.
    !words(head).any(|w| OTHER.contains(&w) && !(groups == 2 && matches!(w, "vs" | "versus" | "v" | "and")))
}

/// A difference or ratio between groups.
fn is_estimate(head: &str) -> bool {
    let has = |w: &str| words(head).any(|x| x == w);
    let interval = has("ci") || (has("confidence") && (has("interval") || has("intervals") || has("limits")));
    let named = ["difference", "differences", "or", "rr", "hr", "ratio", "md", "aor", "ahr", "arr", "rd", "irr", "smd"];
    let measure = named.iter().any(|w| has(w)) || head.contains("relative risk") || head.contains("effect size");
    let group = head.contains("n =") || head.contains("n=");
    // `or` alone is a conjunction.
    let only_or = has("or") && !named.iter().any(|w| *w != "or" && has(w));
    let alone = words(head).count() <= 4 && measure && (!only_or || words(head).count() == 1);
    !group && (interval && measure || alone)
}

/// `n = 24`: the value, where its digits stand, and where the name of the group ends (before `(n`).
/// `None` where the text gives no size or more than one.
fn size(text: &str) -> Option<(u64, std::ops::Range<usize>, std::ops::Range<usize>)> {
    let mut found = None;
    for (at, sign) in text.match_indices(['=', '＝']) {
        let before = text[..at].trim_end();
        let Some(name) = before.strip_suffix(['n', 'N']) else { continue };
        // `mean = 24`: a letter before the n makes it a word, unless a name is glued to it (`groupn = 24`).
        let glued = name.ends_with(|c: char| c.is_alphabetic()) && !name.to_lowercase().ends_with("group");
        let rest = &text[at + sign.len()..];
        let start = at + sign.len() + (rest.len() - rest.trim_start().len());
        let digits = digits(&text[start..]);
        let after = &text[start + digits..];
        // `n = 24/25`, `n = 24–26` and `n = 24%` are no sizes.
        let mut behind = after.chars();
        let joins = behind.next().is_some_and(|c| matches!(c, '.' | '/' | '%' | '-' | '–' | '−' | '·' | '±'));
        let odd = joins && behind.next().is_some_and(|c| c.is_ascii_digit()) || after.trim_start().starts_with('%');
        if digits == 0 || glued {
            continue;
        }
        let value = text[start..start + digits].chars().filter(char::is_ascii_digit).collect::<String>().parse().ok();
        let (Some(value), None, false) = (value, &found, odd) else { return None };
        found = Some((value, start..start + digits, name.len()..start + digits));
    }
    found.filter(|&(value, ..): &(u64, _, _)| value > 0)
}

/// Bytes of a whole number at the start, thousands set apart by a comma or a narrow space.
fn digits(text: &str) -> usize {
    let run = |t: &str| t.bytes().take_while(u8::is_ascii_digit).count();
    let mut end = run(text);
    while (1..=9).contains(&end) {
        let Some(c) = text[end..].chars().next().filter(|c| matches!(c, ',' | '\u{2009}' | '\u{202F}')) else { break };
        if run(&text[end + c.len_utf8()..]) != 3 {
            break;
        }
        end += c.len_utf8() + 3;
    }
    end
}

/// The name of a group: what stands before its size, else what stands behind it.
fn label(text: &str, size: std::ops::Range<usize>) -> String {
    let before = name_only(&text[..size.start]);
    if !before.is_empty() { before } else { name_only(&text[size.end..]) }
}

/// A group's name without brackets at its ends and without what its figures are.
fn name_only(text: &str) -> String {
    let trim = |t: &str| t.trim_matches(|c: char| c.is_whitespace() || "([{)]},;:*†‡".contains(c)).to_string();
    let mut name = trim(text);
    // Offsets found in the lower-cased name hold in the name itself only where it is ASCII.
    let lower = name.to_ascii_lowercase();
    let stop = ["mean", "median", "n (%", "no. (%", "number (%"].iter().filter_map(|w| lower.find(w)).min();
    if let Some(stop) = stop {
        name = trim(&name[..stop]);
    }
    name.split_whitespace().collect::<Vec<_>>().join(" ")
}

/// The name that a header cell gives a group whose size stands elsewhere.
pub(super) fn name(block: &Block, cell: &Cell) -> String {
    name_only(block.text.get(cell.start as usize..cell.end as usize).unwrap_or(""))
}

/// A cell that holds a size and nothing else: `n = 24`, `(n = 24)`; `24` where the row is labelled N.
pub(super) fn size_alone(block: &Block, number: usize, cell: &Cell, labelled: bool) -> Option<Size> {
    let text = block.text.get(cell.start as usize..cell.end as usize)?;
    let at = |r: std::ops::Range<usize>| Span::new(number, cell.start as usize + r.start, cell.start as usize + r.end);
    if let Some((value, digits, whole)) = size(text) {
        let rest = format!("{}{}", &text[..whole.start], &text[whole.end..]);
        return rest.chars().all(|c| !c.is_alphanumeric()).then(|| Size { value, span: at(digits) });
    }
    let start = text.len() - text.trim_start().len();
    let end = start + digits(&text[start..]);
    let value = text[start..end].chars().filter(char::is_ascii_digit).collect::<String>().parse().ok()?;
    (labelled && value > 0 && text[end..].trim().is_empty()).then(|| Size { value, span: at(start..end) })
}

/// The label of a row of sizes.
pub(super) fn is_size_label(head: &str) -> bool {
    matches!(
        head,
        "n" | "n="
            | "n ="
            | "(n)"
            | "no."
            | "number"
            | "no. of patients"
            | "number of patients"
            | "number of participants"
            | "no. of participants"
            | "number of subjects"
            | "no. of subjects"
            | "sample size"
    )
}

/// Words for all participants together.
pub(super) fn is_overall(label: &str) -> bool {
    let label = label.to_lowercase();
    let mut all = words(&label);
    matches!(all.next(), Some("all" | "total" | "overall" | "combined" | "whole" | "entire"))
        && all.all(|w| {
            matches!(
                w,
                "patients"
                    | "participants"
                    | "subjects"
                    | "sample"
                    | "group"
                    | "groups"
                    | "population"
                    | "cohort"
                    | "women"
                    | "men"
                    | "children"
                    | "study"
                    | "cases"
                    | "randomised"
                    | "randomized"
            )
        })
}

/// Words that show that a column is a time of measurement, not a group of participants.
pub(super) fn names_time(head: &str) -> bool {
    const TIMES: &[&str] = &[
        "before",
        "after",
        "baseline",
        "pre",
        "post",
        "pretest",
        "posttest",
        "pretreatment",
        "posttreatment",
        "preintervention",
        "postintervention",
        "week",
        "weeks",
        "month",
        "months",
        "day",
        "days",
        "year",
        "years",
        "visit",
        "followup",
        "follow",
        "change",
        "changes",
        "difference",
        "admission",
        "discharge",
        "endpoint",
    ];
    // A dose is no time: `2,000 IU/day`.
    let head = head.replace("/day", "").replace("/ day", "").replace("/week", "");
    words(&head).any(|w| TIMES.contains(&w))
}
