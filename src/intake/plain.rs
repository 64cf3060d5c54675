//! Plain text: paragraphs between blank lines.

use super::inline::{Draft, Inline};
use super::outline::Outline;
use super::tidy::append;
use crate::manuscript::{Block, BlockKind, Section};

/// The sections and blocks of a plain text.
pub(super) fn blocks(source: &str) -> (Vec<Section>, Vec<Block>) {
    let mut outline = Outline::new();
    let mut inline = Inline::default();
    inline.push_source(source, 0..source.len(), true);
    let mut draft = Draft::default();
    append(&mut draft, inline);
    outline.push(draft.finish(BlockKind::Paragraph), 0);
    (outline.sections, outline.blocks)
}
