//! From raw inline text to canonical text: super- and subscripts, asterisks that the parser left,
//! references to the literature.
//!
//! CommonMark does not see `x^2^` and `H~2~O` at all, and its flanking rules (CommonMark 0.31.2,
//! section 6.2) leave the asterisks of `*P *< .05` as text. Both are common in manuscripts, so they
//! are read here. Every look is bounded to a few dozen bytes: the time is linear in the text.

use super::inline::{Draft, Inline};
use crate::manuscript::{Mark, MarkKind};
use std::ops::Range;

/// The longest super- or subscript, in bytes.
const LONGEST_SCRIPT: usize = 48;
/// The longest stretch between two asterisks that the parser did not pair, in bytes.
const LONGEST_EMPHASIS: usize = 64;
/// The longest bracket of reference numbers, in bytes.
const LONGEST_REFERENCE: usize = 160;

/// Appends the canonical text of an inline run to a block.
pub(super) fn append(draft: &mut Draft, mut inline: Inline) {
    let mut delimiters = Delimiters::of(&inline);
    let mut cuts = Vec::new();
    scripts(&mut inline, &delimiters.carets, MarkKind::Superscript, &mut cuts);
    scripts(&mut inline, &delimiters.tildes, MarkKind::Subscript, &mut cuts);
    emphasis(&mut inline, &mut delimiters.stars, &mut cuts);
    let text = &inline.text;
    // Only plain spaces: others at the head of a cell indent it.
    let lead = text.len() - text.trim_start_matches(' ').len();
    let tail = text.trim_end_matches(' ').len().max(lead);
    cuts.extend([0..lead, tail..text.len()].into_iter().filter(|c| !c.is_empty()));
    cuts.sort_unstable_by_key(|c| c.start);
    let base = draft.text.len();
    copy(draft, &inline, &cuts);
    let moved = Moved::new(&cuts);
    for m in &inline.marks {
        let (start, end) = (base + moved.to(m.start as usize), base + moved.to(m.end as usize));
        if start < end {
            draft.marks.push(Mark { start: start as u32, end: end as u32, kind: m.kind });
        }
    }
    references(draft, base);
}

/// Where the raw text may hold delimiters.
struct Delimiters {
    carets: Vec<usize>,
    tildes: Vec<usize>,
    /// Runs of one character, `*` or `_`.
    stars: Vec<Range<usize>>,
}

impl Delimiters {
    fn of(inline: &Inline) -> Delimiters {
        let mut found = Delimiters { carets: Vec::new(), tildes: Vec::new(), stars: Vec::new() };
        let bytes = inline.text.as_bytes();
        for run in inline.runs.iter().filter(|r| r.exact && !r.verbatim) {
            for (at, &b) in bytes.iter().enumerate().take(run.end).skip(run.start) {
                match b {
                    b'^' => found.carets.push(at),
                    b'~' => found.tildes.push(at),
                    b'*' | b'_' => match found.stars.last_mut() {
                        Some(last) if last.end == at && bytes[last.start] == b => last.end += 1,
                        _ => found.stars.push(at..at + 1),
                    },
                    _ => {}
                }
            }
        }
        found
    }
}

/// Pairs of `^` or `~` round a short text.
fn scripts(inline: &mut Inline, at: &[usize], kind: MarkKind, cuts: &mut Vec<Range<usize>>) {
    let mut i = 0;
    while i + 1 < at.len() {
        let (open, close) = (at[i], at[i + 1]);
        let Some(inner) = script(&inline.text, open, close, kind) else {
            i += 1;
            continue;
        };
        // `10^ −3^`: the space before the exponent is not meant; the one in `χ^2 ^test` is.
        cuts.push(open..inner.start);
        let spaced = inline.text[close + 1..].chars().next().is_none_or(|c| c == ' ');
        cuts.push(if spaced { inner.end } else { close }..close + 1);
        inline.mark(inner.start, inner.end, kind);
        i += 2;
    }
}

/// What stands between two delimiters, without outer spaces, if they make a super- or subscript.
fn script(text: &str, open: usize, close: usize, kind: MarkKind) -> Option<Range<usize>> {
    if close - open > LONGEST_SCRIPT {
        return None;
    }
    let inner = &text[open + 1..close];
    let body = inner.trim();
    if body.is_empty() {
        return None;
    }
    let before = text[..open].chars().next_back();
    let after = text[close + 1..].chars().next();
    // `[^1]` is a footnote; `10^4/10^5` and `3~5/6~8` are two figures.
    let digit = |c: Option<char>| c.is_some_and(|c| c.is_ascii_digit());
    let sign = |c: Option<char>| c.is_some_and(|c| matches!(c, '-' | '+' | '−'));
    if before == Some('[') || (digit(before) && (digit(after) || sign(after))) {
        return None;
    }
    if body.contains(char::is_whitespace) && (after.is_some_and(char::is_alphanumeric) || !is_list(body)) {
        return None;
    }
    let loose = before.is_none_or(|c| c.is_whitespace() || matches!(c, '(' | '[' | '–' | '-' | '/'));
    if kind == MarkKind::Subscript && loose {
        // `~5 to ~10 kg`, `(~5–~10)`: about, not a subscript.
        let dash = body.ends_with(['-', '–', '—', '−', '/', '(']);
        if inner.contains(char::is_whitespace) || dash || after.is_some_and(char::is_alphanumeric) {
            return None;
        }
    }
    let start = open + 1 + (inner.len() - inner.trim_start().len());
    Some(start..start + body.len())
}

/// Marks set apart by spaces: `r & s`, `1, 2`, `(1, 38)`, `a and b`, `i, ii, iv`.
fn is_list(body: &str) -> bool {
    body.split_whitespace().all(|t| {
        let t = t.trim_matches([',', ';', '(', ')', '[', ']']);
        let roman = t.bytes().all(|b| matches!(b, b'i' | b'v' | b'x'));
        let short = t.len() <= 4 && t.bytes().all(|b| b.is_ascii_digit());
        roman || short || matches!(t, "&" | "and") || t.chars().count() == 1
    })
}

/// Asterisks (or underscores) round a short text that the parser left because of a space or sign
/// at their inner side. Stars after a figure and those that open a legend stay.
fn emphasis(inline: &mut Inline, runs: &mut Vec<Range<usize>>, cuts: &mut Vec<Range<usize>>) {
    runs.retain(|r| r.len() <= 3);
    let mut i = 0;
    while i + 1 < runs.len() {
        let (open, close) = (runs[i].clone(), runs[i + 1].clone());
        if !is_emphasis(&inline.text, &open, &close) {
            if is_stray(&inline.text, &open) {
                cuts.push(open);
            }
            i += 1;
            continue;
        }
        let inner = &inline.text[open.end..close.start];
        let start = open.end + (inner.len() - inner.trim_start().len());
        let end = start + inner.trim().len();
        let kind = if open.len() == 2 { MarkKind::Strong } else { MarkKind::Emphasis };
        inline.mark(start, end, kind);
        // A space inside an opening delimiter stands beside one outside it, or nothing.
        cuts.push(open.start..start);
        cuts.push(close);
        i += 2;
    }
    if let Some(last) = runs.get(i).filter(|r| is_stray(&inline.text, r)) {
        cuts.push(last.clone());
    }
}

/// An asterisk between a sign and its figure (`−*2.9`) marks nothing.
fn is_stray(text: &str, run: &Range<usize>) -> bool {
    let signs = ['−', '-', '+', '±', '=', '<', '>', '≤', '≥', '.', '·'];
    text.as_bytes()[run.start] == b'*'
        && text[..run.start].ends_with(signs)
        && text[run.end..].starts_with(|c: char| c.is_ascii_digit())
}

fn is_emphasis(text: &str, open: &Range<usize>, close: &Range<usize>) -> bool {
    let inner_length = close.start - open.end;
    let delimiter = text.as_bytes()[open.start];
    if open.len() != close.len() || inner_length > LONGEST_EMPHASIS || text.as_bytes()[close.start] != delimiter {
        return false;
    }
    let inner = &text[open.end..close.start];
    let body = inner.trim();
    let before = text[..open.start].chars().next_back();
    let after = text[close.end..].chars().next();
    // `^*^` is a raised star.
    if body.is_empty()
        || (before == Some('^') && inner.starts_with('^'))
        || (after == Some('^') && inner.ends_with('^'))
    {
        return false;
    }
    // An opening delimiter follows a space or a sign; a star after a figure or a word is a mark.
    if before.is_some_and(|c| c.is_alphanumeric() || matches!(c, '%' | ')' | ']' | '|')) {
        return false;
    }
    if inner.starts_with(char::is_whitespace) && body.chars().count() > 3 {
        return false;
    }
    let digits = body.contains(|c: char| c.is_ascii_digit());
    let spaced = inner.ends_with(char::is_whitespace);
    let relation = body.contains(['<', '>', '=', '≤', '≥']);
    if digits && relation && spaced && after.is_some_and(char::is_alphabetic) {
        // `*P < 0.05, *Q …`: two marks in a legend.
        return false;
    }
    if digits && (body.ends_with([',', ';', '.'])) {
        return false;
    }
    if !body.starts_with(|c: char| c.is_alphanumeric() || matches!(c, '(' | '<' | '>' | '=' | '±' | '−' | '-' | '.'))
    {
        return false;
    }
    // `12 * 3 * 4` is a product.
    delimiter == b'*' || !after.is_some_and(char::is_alphanumeric)
}

/// Copies what is not cut, with its source.
fn copy(draft: &mut Draft, inline: &Inline, cuts: &[Range<usize>]) {
    let mut cut = 0;
    for run in &inline.runs {
        let mut at = run.start;
        while at < run.end {
            while cut < cuts.len() && cuts[cut].end <= at {
                cut += 1;
            }
            let next = cuts.get(cut).cloned().unwrap_or(usize::MAX..usize::MAX);
            if next.start <= at {
                at = next.end.min(run.end);
                continue;
            }
            let end = next.start.min(run.end);
            let start = draft.text.len();
            draft.text.push_str(&inline.text[at..end]);
            let (from, to) = if run.exact {
                (run.source.start + (at - run.start), run.source.start + (end - run.start))
            } else {
                (run.source.start, run.source.end)
            };
            draft.pieces.push(start, draft.text.len(), from, to, run.exact);
            at = end;
        }
    }
}

/// Where raw offsets come to stand after the cuts.
struct Moved<'a> {
    cuts: &'a [Range<usize>],
    /// Bytes cut before each cut.
    before: Vec<usize>,
}

impl Moved<'_> {
    fn new(cuts: &[Range<usize>]) -> Moved<'_> {
        let mut sum = 0;
        let before = cuts
            .iter()
            .map(|c| {
                let b = sum;
                sum += c.len();
                b
            })
            .collect();
        Moved { cuts, before }
    }

    fn to(&self, raw: usize) -> usize {
        let i = self.cuts.partition_point(|c| c.start < raw);
        match i.checked_sub(1) {
            None => raw,
            Some(i) => raw - self.before[i] - (raw.min(self.cuts[i].end) - self.cuts[i].start),
        }
    }
}

/// Marks `[[23]]`, `[12, 14–16]` and `[^1]` as references; the text stays.
fn references(draft: &mut Draft, base: usize) {
    let mut at = base;
    while let Some(found) = draft.text[at..].find('[') {
        let open = at + found;
        match reference(&draft.text[base..], open - base) {
            Some(end) => {
                let kind = MarkKind::Reference;
                draft.marks.push(Mark { start: open as u32, end: (base + end) as u32, kind });
                at = base + end;
            }
            None => at = open + 1,
        }
    }
}

/// The end of a bracket of reference numbers that opens at `open`.
fn reference(text: &str, open: usize) -> Option<usize> {
    let (mut depth, mut digits, mut number, mut nested, mut range) = (0usize, 0usize, 0usize, false, false);
    if text[open..].starts_with("[^") {
        let label = text[open + 2..].bytes().take(LONGEST_SCRIPT).take_while(u8::is_ascii_alphanumeric).count();
        let end = open + 2 + label;
        return (label > 0 && text[end..].starts_with(']')).then_some(end + 1);
    }
    let mut end = None;
    for (i, c) in text[open..].char_indices().take_while(|(i, _)| *i < LONGEST_REFERENCE) {
        match c {
            '[' => {
                depth += 1;
                nested |= depth > 1;
                number = 0;
            }
            ']' => depth -= 1,
            '0'..='9' => {
                digits += 1;
                number += 1;
                if number > 4 {
                    return None;
                }
            }
            ',' | ';' => number = 0,
            '-' | '–' | '—' => {
                number = 0;
                range = true;
            }
            c if c.is_whitespace() && number == 0 => {}
            _ => return None,
        }
        if depth == 0 {
            end = Some(open + i + 1);
            break;
        }
    }
    let end = end.filter(|_| digits > 0)?;
    // After a figure a bracket is a spread or a percentage: `10 [8–12]`, `24 [12]`.
    let before = text[..open].trim_end();
    let figure = before.ends_with(|c: char| c.is_numeric() || matches!(c, '%' | ']' | ')' | '=' | ':'));
    let spread = ["IQR", "iqr", "range", "CI", "interval", "SD", "SE", "median", "mean", "quartiles", "limits"];
    if (figure && (range || !nested)) || before.is_empty() || spread.iter().any(|w| before.ends_with(w)) {
        return None;
    }
    Some(end)
}
