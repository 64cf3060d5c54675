//! The tree of sections and the list of blocks, built in reading order.

use crate::manuscript::{Block, BlockKind, Section, SectionKind};

/// Sections and blocks so far.
pub(super) struct Outline {
    pub sections: Vec<Section>,
    pub blocks: Vec<Block>,
    current: u32,
}

impl Outline {
    pub fn new() -> Outline {
        let root =
            Section { title: String::new(), level: 0, parent: None, kind: SectionKind::Unknown, in_abstract: false };
        Outline { sections: vec![root], blocks: Vec::new(), current: 0 }
    }

    /// Adds a block under the current section; a heading opens a section of the given level first.
    pub fn push(&mut self, mut block: Block, level: u8) {
        if block.kind == BlockKind::Heading {
            self.open(block.text.trim(), level);
        }
        block.section = self.current;
        self.blocks.push(block);
    }

    /// The section that blocks are added to.
    pub fn current(&self) -> u32 {
        self.current
    }

    /// Goes back to a section that was left.
    pub fn go(&mut self, section: u32) {
        self.current = section;
    }

    /// Opens a section under another, for formats that say where one begins and ends. Without a kind
    /// of its own it has that of the section above.
    pub fn enter(&mut self, parent: u32, kind: Option<SectionKind>, in_abstract: bool) {
        let above = &self.sections[parent as usize];
        let kind = kind.unwrap_or(match above.kind {
            SectionKind::Title => SectionKind::Unknown,
            kind => kind,
        });
        let level = (above.level + 1).min(6);
        let in_abstract = above.in_abstract || in_abstract;
        self.current = self.sections.len() as u32;
        self.sections.push(Section { title: String::new(), level, parent: Some(parent), kind, in_abstract });
    }

    /// Names the current section; the title gives its kind if it tells one.
    pub fn name(&mut self, title: &str, kind: Option<SectionKind>) {
        let section = &mut self.sections[self.current as usize];
        section.title = title.trim().to_owned();
        section.kind = kind.unwrap_or(section.kind);
    }

    fn open(&mut self, title: &str, level: u8) {
        let mut parent = self.current;
        while parent != 0 && self.sections[parent as usize].level >= level {
            parent = self.sections[parent as usize].parent.unwrap_or(0);
        }
        let above = &self.sections[parent as usize];
        let own = SectionKind::of_title(title);
        let first = self.sections.len() == 1;
        let kind = match (own, above.kind) {
            (Some(kind), _) => kind,
            // The first heading is the paper's title; what stands under it is not of that kind.
            (None, _) if first && level == 1 => SectionKind::Title,
            (None, SectionKind::Title) => SectionKind::Unknown,
            (None, kind) => kind,
        };
        let in_abstract = above.in_abstract || own == Some(SectionKind::Abstract);
        self.current = self.sections.len() as u32;
        self.sections.push(Section { title: title.to_owned(), level, parent: Some(parent), kind, in_abstract });
    }
}

/// Whether a paragraph is the caption of a table: `Table 2. Outcomes`, `Table S1: …`.
pub(super) fn is_caption(text: &str) -> bool {
    let Some((label, rest)) = table_label(text) else { return false };
    !label.is_empty() && (rest.is_empty() || rest.starts_with(['.', ':', '|', '—', '–']))
}

/// Whether the paragraph right before a table is its caption: it starts with `Table` and is not a
/// sentence about it ("Table 2 shows …").
pub(super) fn is_caption_before_table(text: &str) -> bool {
    const TELLS: &[&str] = &[
        "shows",
        "presents",
        "summari",
        "lists",
        "gives",
        "reports",
        "displays",
        "provides",
        "describes",
        "compares",
        "contains",
        "details",
        "demonstrates",
        "illustrates",
        "indicates",
        "outlines",
        "and",
        "also",
        "reveals",
    ];
    let Some((_, rest)) = table_label(text) else { return false };
    let word = rest.trim_start();
    !TELLS.iter().any(|t| word.starts_with(t))
}

/// The label after `Table` (`2`, `S1`, `IV`; may be empty) and what follows it.
fn table_label(text: &str) -> Option<(&str, &str)> {
    let text = text.trim_start();
    let text = text.strip_prefix("Supplementary ").unwrap_or(text);
    let rest = ["Table", "TABLE"].iter().find_map(|w| text.strip_prefix(w))?;
    if rest.starts_with(char::is_alphanumeric) {
        return None;
    }
    let rest = rest.trim_start();
    let end = rest.find(|c: char| !c.is_alphanumeric()).unwrap_or(rest.len());
    let label = &rest[..end];
    let is_label = label.len() <= 5
        && (label.contains(|c: char| c.is_ascii_digit()) || label.bytes().all(|b| matches!(b, b'I' | b'V' | b'X')));
    Some(if is_label { (label, &rest[end..]) } else { ("", rest) })
}
