//! Manuscripts made by hand, so that the tests of readers and rules lean on no file format.

use super::{Block, BlockKind, Manuscript, Section, SectionKind, Source};
use crate::text::{LineIndex, PieceTable, decode};

/// Paragraphs, each in a section with its title; an empty title is that of text before any heading.
pub(crate) fn paragraphs(parts: &[(&str, &str)]) -> Manuscript {
    let (mut sections, mut blocks, mut source) = (Vec::new(), Vec::new(), String::new());
    for (number, &(title, text)) in parts.iter().enumerate() {
        let kind = SectionKind::of_title(title).unwrap_or(SectionKind::Unknown);
        let (level, in_abstract) = (u8::from(!title.is_empty()), kind == SectionKind::Abstract);
        sections.push(Section { title: title.to_owned(), level, parent: None, kind, in_abstract });
        let mut pieces = PieceTable::default();
        pieces.push(0, text.len(), source.len(), source.len() + text.len(), true);
        let (kind, section) = (BlockKind::Paragraph, number as u32);
        blocks.push(Block { kind, section, text: text.to_owned(), pieces, marks: Vec::new() });
        source.push_str(text);
    }
    let (decoded, lines) = (decode(source.as_bytes()), LineIndex::new(&source));
    Manuscript::new(sections, blocks, Source { format: "text", decoded, lines })
}
