//! The map from canonical text back to the bytes of the file.

/// One run of canonical text and the bytes it came from.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
struct Piece {
    start: u32,
    end: u32,
    source_start: u32,
    source_end: u32,
    /// Byte for byte the same in the source; otherwise (entity, escape, joined line) only the whole is mapped.
    exact: bool,
}

/// Pieces in canonical order. Text between pieces (separators that intake inserts) has no source.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct PieceTable {
    pieces: Vec<Piece>,
}

/// Bytes of the decoded source text, and whether they are the canonical text byte for byte.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct SourceRange {
    pub start: usize,
    pub end: usize,
    pub exact: bool,
}

impl PieceTable {
    /// Adds the next piece. Pieces come in canonical order; adjoining exact pieces are joined.
    pub fn push(&mut self, start: usize, end: usize, source_start: usize, source_end: usize, exact: bool) {
        debug_assert!(start <= end && source_start <= source_end);
        debug_assert!(!exact || end - start == source_end - source_start);
        if start == end {
            return;
        }
        if let Some(last) = self.pieces.last_mut() {
            debug_assert!(last.end as usize <= start);
            if exact && last.exact && last.end as usize == start && last.source_end as usize == source_start {
                last.end = end as u32;
                last.source_end = source_end as u32;
                return;
            }
        }
        self.pieces.push(Piece {
            start: start as u32,
            end: end as u32,
            source_start: source_start as u32,
            source_end: source_end as u32,
            exact,
        });
    }

    /// The source bytes of canonical `start..end`. A piece that is not exact is taken whole.
    pub fn source(&self, start: usize, end: usize) -> Option<SourceRange> {
        let (start, end) = (start as u32, end as u32);
        let first = self.pieces.partition_point(|p| p.end <= start);
        let mut found: Option<SourceRange> = None;
        for p in &self.pieces[first..] {
            if p.start >= end.max(start + 1) {
                break;
            }
            let (from, to) = if p.exact {
                (p.source_start + start.max(p.start) - p.start, p.source_start + end.clamp(p.start, p.end) - p.start)
            } else {
                (p.source_start, p.source_end)
            };
            found = Some(match found {
                None => SourceRange { start: from as usize, end: to as usize, exact: p.exact },
                Some(r) => SourceRange { start: r.start.min(from as usize), end: r.end.max(to as usize), exact: false },
            });
        }
        found
    }

    /// The runs of canonical text that are byte for byte those of the source, with where they stand there.
    pub fn exact(&self) -> impl Iterator<Item = (std::ops::Range<usize>, std::ops::Range<usize>)> {
        self.pieces
            .iter()
            .filter(|p| p.exact)
            .map(|p| (p.start as usize..p.end as usize, p.source_start as usize..p.source_end as usize))
    }
}
