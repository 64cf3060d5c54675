//! Canonical text and where it came from: spans, the map back to the source, lines and columns.
//!
//! *Canonical text* is what a reader sees: `P = 0.03`, whatever the markup. Every block of a
//! manuscript has its own canonical text; offsets in it are bytes.

pub mod encoding;
pub mod lines;
pub mod pieces;

pub use encoding::{Decoded, EncodingName, declared, decode, is_latin};
pub use lines::LineIndex;
pub use pieces::{PieceTable, SourceRange};

/// A stretch of canonical text: bytes `start..end` of block number `block` of the manuscript.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Span {
    pub block: u32,
    pub start: u32,
    pub end: u32,
}

impl Span {
    pub fn new(block: usize, start: usize, end: usize) -> Span {
        debug_assert!(start <= end);
        Span { block: block as u32, start: start as u32, end: end as u32 }
    }

    /// The bytes of the span within its block.
    pub fn range(self) -> std::ops::Range<usize> {
        self.start as usize..self.end as usize
    }

    pub fn contains(self, other: Span) -> bool {
        self.block == other.block && self.start <= other.start && other.end <= self.end
    }

    pub fn overlaps(self, other: Span) -> bool {
        self.block == other.block && self.start < other.end && other.start < self.end
    }

    /// The smallest span that holds both; both must stand in one block.
    pub fn to(self, other: Span) -> Span {
        debug_assert_eq!(self.block, other.block);
        Span { block: self.block, start: self.start.min(other.start), end: self.end.max(other.end) }
    }
}
