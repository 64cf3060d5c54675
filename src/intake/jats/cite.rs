//! References to the literature: numbers that are no figures of the results.

use crate::intake::inline::Inline;
use crate::manuscript::{Mark, MarkKind};
use std::ops::Range;

/// What may stand between two references of one group, in bytes.
const LONGEST_GAP: usize = 8;

/// Widens references to the brackets round them or to the superscript that they stand in, and joins
/// those that are enumerated: `[12, 14–16]`.
pub(super) fn cite(inline: &mut Inline) {
    let is_reference = |m: &Mark| m.kind == MarkKind::Reference;
    if !inline.marks.iter().any(is_reference) {
        return;
    }
    let text = inline.text.as_str();
    let mut groups: Vec<Range<usize>> = Vec::new();
    for m in inline.marks.iter().filter(|m| is_reference(m)) {
        let (start, end) = (m.start as usize, m.end as usize);
        match groups.last_mut() {
            Some(last) if start < last.end => last.end = last.end.max(end),
            Some(last)
                if start - last.end <= LONGEST_GAP
                    && text[last.end..start].chars().all(|c| c.is_whitespace() || ",;-–—−‐‑&".contains(c)) =>
            {
                last.end = end;
            }
            _ => groups.push(start..end),
        }
    }
    for group in &mut groups {
        let before = text[..group.start].trim_end();
        let after = &text[group.end..];
        let gap = after.len() - after.trim_start().len();
        let pair =
            [('[', ']'), ('(', ')')].iter().any(|&(a, b)| before.ends_with(a) && after.trim_start().starts_with(b));
        if pair {
            *group = before.len() - 1..group.end + gap + 1;
        }
    }
    // A superscript that holds references is one.
    let mut next = 0;
    for m in inline.marks.iter_mut().filter(|m| m.kind == MarkKind::Superscript) {
        while next < groups.len() && groups[next].end <= m.start as usize {
            next += 1;
        }
        if groups.get(next).is_some_and(|g| g.start < m.end as usize) {
            m.kind = MarkKind::Reference;
        }
    }
    for group in groups {
        inline.mark(group.start, group.end, MarkKind::Reference);
    }
}
