//! From a place in the file back to the sentence or table row around it.

use super::Audited;
use crate::manuscript::{BlockKind, CellPlace, Grid, Location};
use crate::text::Span;

/// The blocks of a manuscript by where they stand in the file.
pub struct Places<'a> {
    audited: &'a Audited,
    /// First and last byte of each block in the file.
    blocks: Vec<(usize, usize)>,
}

/// What stands around the words in question.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Context<'a> {
    pub before: &'a str,
    pub after: &'a str,
    /// The header row of a table, cells apart by `\t`.
    pub columns: Option<&'a str>,
}

impl<'a> Places<'a> {
    pub fn new(audited: &'a Audited) -> Places<'a> {
        let decoded = &audited.manuscript.source.decoded;
        let whole = |b: &crate::manuscript::Block| match b.pieces.source(0, b.text.len()) {
            Some(r) => (decoded.original(r.start), decoded.original(r.end)),
            None => (0, 0),
        };
        Places { audited, blocks: audited.manuscript.blocks.iter().map(whole).collect() }
    }

    /// What stands around a quote at a place: the rest of its sentence, or of its row.
    pub fn context(&self, location: &Location, quote: &str) -> Option<Context<'a>> {
        let span = self.span(location, quote)?;
        let block = self.audited.manuscript.block(span);
        let (from, to, columns) = match &block.kind {
            BlockKind::Table(grid) => {
                let row = grid.cell_at(span.start)?.row;
                let (from, to) = row_of(grid, row)?;
                let columns = (grid.header_rows > 0 && row >= grid.header_rows)
                    .then(|| row_of(grid, grid.header_rows - 1))
                    .flatten()
                    .map(|(a, b)| &block.text[a..b]);
                (from, to.max(span.end as usize), columns)
            }
            _ => {
                let (from, to) = self.sentence(span)?;
                (from, to, None)
            }
        };
        let (start, end) = (span.start as usize, span.end as usize);
        Some(Context { before: block.text.get(from..start)?, after: block.text.get(end..to)?, columns })
    }

    /// A section's titles without that of the whole manuscript, which stands over all of them.
    pub fn below_title<'s>(&self, section: &'s [String]) -> &'s [String] {
        let mut top = self.audited.manuscript.sections.iter().filter(|s| s.level == 1);
        match (top.next(), top.next(), section) {
            (Some(title), None, [first, rest @ ..]) if title.title == *first && !rest.is_empty() => rest,
            _ => section,
        }
    }

    /// The number of a row among those below the header, from 0.
    pub fn body_row(&self, cell: CellPlace) -> Option<u32> {
        let tables = self.audited.manuscript.blocks.iter().filter_map(|b| match &b.kind {
            BlockKind::Table(grid) => Some(grid),
            _ => None,
        });
        let header = tables.skip(cell.table as usize).map(|g| g.header_rows).next()?;
        cell.row.checked_sub(header)
    }

    fn span(&self, location: &Location, quote: &str) -> Option<Span> {
        let manuscript = &self.audited.manuscript;
        if quote.is_empty() {
            return None;
        }
        let holds = |&(_, &(start, end)): &(usize, &(usize, usize))| start <= location.start && location.end <= end;
        self.blocks.iter().enumerate().filter(holds).find_map(|(number, _)| {
            let text = &manuscript.blocks[number].text;
            let mut matches = text.match_indices(quote).map(|(at, _)| Span::new(number, at, at + quote.len()));
            matches.find(|&span| manuscript.locate(span).start == location.start)
        })
    }

    /// The sentences that a span touches, from the start of the first to the end of the last.
    fn sentence(&self, span: Span) -> Option<(usize, usize)> {
        let scan = &self.audited.scan;
        let block = span.block as usize;
        let mut found: Option<(usize, usize)> = None;
        for id in scan.of_block(block) {
            let view = scan.view(&self.audited.manuscript, id);
            let (Some(first), Some(last)) = (view.tokens.first(), view.tokens.last()) else { continue };
            if first.start < span.end && span.start < last.end {
                let from = found.map_or(first.start as usize, |f| f.0);
                found = Some((from, last.end as usize));
            }
        }
        found.map(|(from, to)| (from.min(span.start as usize), to.max(span.end as usize)))
    }
}

/// The bytes of a row in the text of its block.
fn row_of(grid: &Grid, row: u32) -> Option<(usize, usize)> {
    let mut cells = grid.cells.iter().filter(|c| c.row == row);
    let first = cells.next()?;
    let last = cells.last().unwrap_or(first);
    Some((first.start as usize, last.end as usize))
}
