//! The manuscript as plain data: sections, blocks, table grids. Knows no file format.

mod section;
#[cfg(test)]
pub(crate) mod testing;

pub use section::SectionKind;

use crate::text::{Decoded, LineIndex, PieceTable, Span};

/// A manuscript after intake. Blocks are in reading order.
#[derive(Clone, Debug)]
pub struct Manuscript {
    pub sections: Vec<Section>,
    pub blocks: Vec<Block>,
    pub source: Source,
    /// Numbers of the blocks that are tables, in order.
    tables: Vec<u32>,
}

/// The file's text, kept to resolve places.
#[derive(Clone, Debug)]
pub struct Source {
    /// `markdown`, `text` …
    pub format: &'static str,
    pub decoded: Decoded,
    pub lines: LineIndex,
}

/// A section: a heading and what stands under it. Section 0 is what stands before any heading.
#[derive(Clone, Debug)]
pub struct Section {
    pub title: String,
    /// 1 to 6; 0 for what stands before any heading.
    pub level: u8,
    pub parent: Option<u32>,
    /// The kind that its own title or the nearest recognised ancestor gives.
    pub kind: SectionKind,
    /// Under a heading that is recognised as the abstract (whatever `kind` its own title gives).
    pub in_abstract: bool,
}

#[derive(Clone, Debug)]
pub struct Block {
    pub kind: BlockKind,
    pub section: u32,
    /// Canonical text. For a table: cells in row order, each followed by `\t`, the last of a row by `\n`.
    pub text: String,
    pub pieces: PieceTable,
    /// Marks in order of their start. Those of one kind do not overlap, and none is longer than
    /// [`Mark::LONGEST`]: a longer stretch is several marks that adjoin.
    pub marks: Vec<Mark>,
}

#[derive(Clone, Debug, PartialEq)]
pub enum BlockKind {
    Heading,
    Paragraph,
    ListItem,
    Table(Grid),
    Caption,
    Footnote,
}

/// A stretch of a block that is set otherwise, or that readers of numbers must leave alone.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Mark {
    pub start: u32,
    pub end: u32,
    pub kind: MarkKind,
}

impl Mark {
    /// The longest mark, in bytes; it bounds how far a look-up has to go back.
    pub const LONGEST: u32 = 256;
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum MarkKind {
    Emphasis,
    Strong,
    Superscript,
    Subscript,
    /// Code: never read for figures.
    Code,
    /// Mathematical source (`$…$`): never read for figures.
    Math,
    Link,
    /// A reference to a footnote or to the literature.
    Reference,
}

/// A table as printed: rows of cells over the block's text.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Grid {
    pub rows: u32,
    pub columns: u32,
    /// Number of rows that the format itself calls header.
    pub header_rows: u32,
    /// In row order.
    pub cells: Vec<Cell>,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Cell {
    pub row: u32,
    pub column: u32,
    pub row_span: u32,
    pub column_span: u32,
    /// Bytes of the block's canonical text.
    pub start: u32,
    pub end: u32,
}

/// A place in a file, for people and for editors.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Location {
    /// Bytes of the file as given.
    pub start: usize,
    pub end: usize,
    /// From 1; the column counts characters.
    pub line: u32,
    pub column: u32,
    /// The source is the canonical text byte for byte.
    pub exact: bool,
    pub cell: Option<CellPlace>,
}

/// Numbers count from 0 in JSON fields `table`, `row`, `column_index`.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct CellPlace {
    pub table: u32,
    pub row: u32,
    pub column: u32,
}

impl Manuscript {
    pub fn new(sections: Vec<Section>, mut blocks: Vec<Block>, source: Source) -> Manuscript {
        // They are held to the end, and grew by doubling.
        for block in &mut blocks {
            block.text.shrink_to_fit();
            block.marks.shrink_to_fit();
        }
        let tables = (0u32..).zip(&blocks).filter(|(_, b)| b.is_table()).map(|(i, _)| i);
        Manuscript { tables: tables.collect(), sections, blocks, source }
    }

    pub fn block(&self, span: Span) -> &Block {
        &self.blocks[span.block as usize]
    }

    pub fn quote(&self, span: Span) -> &str {
        &self.blocks[span.block as usize].text[span.range()]
    }

    pub fn section(&self, span: Span) -> &Section {
        &self.sections[self.blocks[span.block as usize].section as usize]
    }

    /// The place of a span in the file as given.
    pub fn locate(&self, span: Span) -> Location {
        let block = self.block(span);
        let range = block.pieces.source(span.start as usize, span.end as usize);
        let (start, end, exact) = range.map_or((0, 0, false), |r| (r.start, r.end, r.exact));
        let (line, column) = self.source.lines.position(&self.source.decoded.text, start);
        let cell = match &block.kind {
            BlockKind::Table(grid) => grid.cell_at(span.start).map(|c| CellPlace {
                table: self.table_number(span.block),
                row: c.row,
                column: c.column,
            }),
            _ => None,
        };
        let decoded = &self.source.decoded;
        Location { start: decoded.original(start), end: decoded.original(end), line, column, exact, cell }
    }

    /// How many tables stand before this block.
    fn table_number(&self, block: u32) -> u32 {
        self.tables.partition_point(|&t| t < block) as u32
    }
}

impl Grid {
    /// The cell that holds a byte offset of the block's text.
    pub fn cell_at(&self, offset: u32) -> Option<&Cell> {
        let i = self.cells.partition_point(|c| c.end < offset);
        self.cells.get(i).filter(|c| c.start <= offset && offset <= c.end)
    }
}

impl Block {
    pub fn is_table(&self) -> bool {
        matches!(self.kind, BlockKind::Table(_))
    }

    /// The text of one of its cells.
    pub fn text_of(&self, cell: &Cell) -> &str {
        self.text.get(cell.start as usize..cell.end as usize).unwrap_or("")
    }

    /// Whether a mark of a kind overlaps `start..end`.
    pub fn marked(&self, kind: MarkKind, start: u32, end: u32) -> bool {
        self.marks_over(start, end).any(|m| m.kind == kind)
    }

    /// The marks that overlap `start..end`, in order of their start.
    pub fn marks_over(&self, start: u32, end: u32) -> impl Iterator<Item = &Mark> {
        let first = self.marks.partition_point(|m| m.start.saturating_add(Mark::LONGEST) <= start);
        self.marks[first..].iter().take_while(move |m| m.start < end).filter(move |m| start < m.end)
    }
}
