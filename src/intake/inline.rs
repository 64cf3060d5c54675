//! The text of one block or cell while it is read: characters, where they came from, and marks.

use crate::manuscript::{Block, BlockKind, Mark, MarkKind};
use crate::text::PieceTable;
use std::ops::Range;

/// A run of raw text with its source.
#[derive(Clone, Debug)]
pub(super) struct Run {
    pub start: usize,
    pub end: usize,
    pub source: Range<usize>,
    pub exact: bool,
    /// Code, mathematics, and characters that were escaped: what they hold is no markup.
    pub verbatim: bool,
}

/// Text before [`super::tidy`] has taken out the delimiters that the parser left in it.
#[derive(Clone, Debug, Default)]
pub(super) struct Inline {
    pub text: String,
    pub runs: Vec<Run>,
    pub marks: Vec<Mark>,
}

impl Inline {
    /// Adds text that stands in the source byte for byte. Line ends and tabs become spaces.
    pub fn push_source(&mut self, source: &str, range: Range<usize>, verbatim: bool) {
        let mut from = range.start;
        let slice = &source[range.clone()];
        for (i, c) in slice.char_indices().filter(|(_, c)| matches!(c, '\n' | '\r' | '\t' | '\0')) {
            let at = range.start + i;
            self.push_exact(source, from..at, verbatim);
            let end_of_crlf = c == '\n' && slice[..i].ends_with('\r');
            if !end_of_crlf {
                self.push_other(" ", at..at + 1);
            }
            from = at + 1;
        }
        self.push_exact(source, from..range.end, verbatim);
    }

    fn push_exact(&mut self, source: &str, range: Range<usize>, verbatim: bool) {
        if range.is_empty() {
            return;
        }
        let start = self.text.len();
        self.text.push_str(&source[range.clone()]);
        self.runs.push(Run { start, end: self.text.len(), source: range, exact: true, verbatim });
    }

    /// Adds text that differs from its source: an entity, an escape, a joined line.
    pub fn push_other(&mut self, text: &str, source: Range<usize>) {
        if text.is_empty() {
            return;
        }
        let start = self.text.len();
        self.text.extend(text.chars().map(|c| if matches!(c, '\n' | '\r' | '\t') { ' ' } else { c }));
        self.runs.push(Run { start, end: self.text.len(), source, exact: false, verbatim: true });
    }

    /// Adds one space for a break, unless there is one already or nothing stands before it.
    pub fn push_break(&mut self, source: Range<usize>) {
        if !self.text.is_empty() && !self.text.ends_with(' ') {
            self.push_other(" ", source);
        }
    }

    pub fn mark(&mut self, start: usize, end: usize, kind: MarkKind) {
        if start < end {
            self.marks.push(Mark { start: start as u32, end: end as u32, kind });
        }
    }

    pub fn is_blank(&self) -> bool {
        self.text.trim().is_empty()
    }
}

/// A block under construction: canonical text only.
#[derive(Debug, Default)]
pub(super) struct Draft {
    pub text: String,
    pub pieces: PieceTable,
    pub marks: Vec<Mark>,
}

impl Draft {
    /// Adds a separator that no reader sees; it points at a place between bytes.
    pub fn separator(&mut self, c: char, at: usize) {
        let start = self.text.len();
        self.text.push(c);
        self.pieces.push(start, self.text.len(), at, at, false);
    }

    pub fn finish(self, kind: BlockKind) -> Block {
        let marks = in_order(self.marks, &self.text);
        Block { kind, section: 0, text: self.text, pieces: self.pieces, marks }
    }
}

/// Marks as a block keeps them: no overlap within a kind, none too long, in order of their start.
fn in_order(mut marks: Vec<Mark>, text: &str) -> Vec<Mark> {
    marks.sort_by_key(|m| (m.kind as u8, m.start, m.end));
    let mut joined: Vec<Mark> = Vec::with_capacity(marks.len());
    for m in marks {
        match joined.last_mut() {
            Some(last) if last.kind == m.kind && m.start < last.end => last.end = last.end.max(m.end),
            _ => joined.push(m),
        }
    }
    let mut split = Vec::with_capacity(joined.len());
    for mut m in joined {
        while m.end - m.start > Mark::LONGEST {
            let end = text.floor_char_boundary((m.start + Mark::LONGEST) as usize) as u32;
            split.push(Mark { end, ..m });
            m.start = end;
        }
        split.push(m);
    }
    split.sort_by_key(|m| (m.start, std::cmp::Reverse(m.end)));
    split
}
