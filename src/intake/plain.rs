//! Plain text: paragraphs between blank lines, lines joined, words that were broken at a line's end
//! put together, headings where a line is plainly one.

use super::inline::{Draft, Inline};
use super::outline::{Outline, is_caption};
use super::tidy::append;
use crate::manuscript::{Block, BlockKind, Section, SectionKind};
use std::ops::Range;

/// The sections and blocks of a plain text.
pub(super) fn blocks(source: &str) -> (Vec<Section>, Vec<Block>) {
    let mut outline = Outline::new();
    let mut lines: Vec<Range<usize>> = Vec::new();
    for line in lines_of(source) {
        let text = trimmed(source, line);
        if text.is_empty() {
            paragraph(source, &mut lines, &mut outline);
        } else {
            lines.push(text);
        }
    }
    paragraph(source, &mut lines, &mut outline);
    (outline.sections, outline.blocks)
}

/// Lines without their ends. A form feed ends a line and stands for a blank one.
fn lines_of(source: &str) -> impl Iterator<Item = Range<usize>> {
    let mut at = 0;
    let mut page = false;
    std::iter::from_fn(move || {
        if std::mem::take(&mut page) {
            return Some(at..at);
        }
        let rest = source.get(at..).filter(|r| !r.is_empty())?;
        let start = at;
        let end = rest.find(['\n', '\r', '\u{c}']).map_or(source.len(), |i| at + i);
        at = match source.as_bytes().get(end) {
            None => end,
            Some(b'\r') if source.as_bytes().get(end + 1) == Some(&b'\n') => end + 2,
            Some(&b) => {
                page = b == b'\x0c';
                end + 1
            }
        };
        Some(start..end)
    })
}

/// The range without white space and stray byte order marks at its ends.
fn trimmed(source: &str, range: Range<usize>) -> Range<usize> {
    let blank = |c: char| c.is_whitespace() || c == '\u{feff}';
    let text = &source[range.clone()];
    let start = range.start + (text.len() - text.trim_start_matches(blank).len());
    start..start + source[start..range.end].trim_end_matches(blank).len()
}

/// Ends a paragraph: its lines become one block.
fn paragraph(source: &str, lines: &mut Vec<Range<usize>>, outline: &mut Outline) {
    let Some(first) = lines.first().cloned() else { return };
    let level = if lines.len() == 1 { heading_level(&source[first]) } else { None };
    let mut inline = Inline::default();
    for (i, line) in lines.iter().enumerate() {
        let Some(next) = lines.get(i + 1) else {
            inline.push_source(source, line.clone(), true);
            break;
        };
        let gap = |from: usize| from..next.start;
        match join(&source[line.clone()], &source[next.clone()]) {
            Join::Space => {
                inline.push_source(source, line.clone(), true);
                inline.push_break(gap(line.end));
            }
            Join::Tight => inline.push_source(source, line.clone(), true),
            Join::Word(hyphen) => inline.push_source(source, line.start..line.end - hyphen, true),
        }
    }
    lines.clear();
    let mut draft = Draft::default();
    append(&mut draft, inline);
    let kind = match level {
        _ if is_caption(&draft.text) => BlockKind::Caption,
        Some(_) => BlockKind::Heading,
        None => BlockKind::Paragraph,
    };
    outline.push(draft.finish(kind), level.unwrap_or(0));
}

/// How two lines of a paragraph meet.
enum Join {
    Space,
    /// A hyphen that belongs to the word or figure: `P-` `value`.
    Tight,
    /// A broken word; the bytes of the hyphen that falls away.
    Word(usize),
}

fn join(line: &str, next: &str) -> Join {
    if let Some(word) = line.strip_suffix('\u{ad}') {
        return if word.ends_with(char::is_alphabetic) { Join::Word(2) } else { Join::Tight };
    }
    let Some(hyphen) = ['-', '\u{2010}', '\u{2011}'].into_iter().find(|&c| line.ends_with(c)) else {
        // `0.5–` `1.2`: a range over the line's end.
        let range = line.ends_with(['–', '−']) && !line.ends_with(" –") && line.chars().count() > 1;
        let figure = next.starts_with(|c: char| c.is_ascii_digit());
        return if range && figure { Join::Tight } else { Join::Space };
    };
    let stem = &line[..line.len() - hyphen.len_utf8()];
    let before = last_word(stem);
    let after = first_word(next);
    let small = |w: &str| w.chars().all(char::is_lowercase);
    if before.is_empty() {
        // A hyphen that stands alone is a dash or a sign; a sign belongs to the figure after it.
        let sign = !stem.ends_with('-') && next.starts_with(|c: char| c.is_ascii_digit() || c == '.');
        return if sign { Join::Tight } else { Join::Space };
    }
    if matches!(after, "and" | "or" | "to") {
        // `pre-` `and post-treatment`: a word left open.
        return Join::Space;
    }
    let part = before.rsplit('-').next().unwrap_or("");
    let long = part.chars().count() >= 2 && after.chars().count() >= 2;
    let letters = before.chars().all(|c| c.is_alphabetic() || c == '-');
    if long && letters && small(part) && small(after) { Join::Word(hyphen.len_utf8()) } else { Join::Tight }
}

/// The last word: what follows the last space or opening bracket.
fn last_word(text: &str) -> &str {
    text.rsplit(|c: char| c.is_whitespace() || matches!(c, '(' | '[' | '/')).next().unwrap_or("")
}

/// The first word, without the punctuation after it.
fn first_word(text: &str) -> &str {
    let word = text.split_whitespace().next().unwrap_or("");
    word.trim_end_matches(['.', ',', ';', ':', ')', ']', '?', '!'])
}

/// The level of a line that stands alone, if it is a heading: by its words, its number or capitals.
fn heading_level(line: &str) -> Option<u8> {
    let length = line.chars().count();
    let letters = line.chars().filter(|c| c.is_alphabetic()).count();
    let label = line.trim_end_matches(':');
    if length > 80 || letters < 3 || letters * 2 < length || label.ends_with(['.', ',', ';', '?', '!']) {
        return None;
    }
    let (number, title) = numbered(label);
    let words = title.split_whitespace().count();
    // A figure makes it a statement: "Results: P = 0.03".
    let figures = title.contains(['=', '<', '>', '≤', '≥', '±', '%']);
    if figures || words > 12 || !title.starts_with(char::is_uppercase) {
        return None;
    }
    if let Some(depth) = number {
        return Some(depth.min(6));
    }
    let capitals = !title.contains(char::is_lowercase) && letters >= 4;
    let known = SectionKind::of_title(title).is_some() && words <= 6;
    (known || capitals).then_some(if capitals { 1 } else { 2 })
}

/// `2.1 Patients` → depth 2 and `Patients`; without a number, depth is `None`.
fn numbered(line: &str) -> (Option<u8>, &str) {
    let Some((number, title)) = line.split_once(char::is_whitespace) else { return (None, line) };
    let body = number.trim_end_matches('.');
    let parts = body.split('.').count();
    let plain = body.split('.').all(|p| (1..=2).contains(&p.len()) && p.bytes().all(|b| b.is_ascii_digit()));
    // `12 patients` is no heading: one number needs its stop, and zero is none.
    if plain && parts <= 4 && !body.starts_with('0') && (parts > 1 || number.ends_with('.') || body.len() == 1) {
        (Some(parts as u8), title.trim_start())
    } else {
        (None, line)
    }
}
